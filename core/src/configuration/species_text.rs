//! The reading of a species' text.

use super::species::{Species, roman, roman_value};
use super::species_faults::{self as faults, Piece, plain};
use crate::elements::{by_name, by_symbol};
use crate::numerics::order::sort_by_key;
use crate::problem::Problem;

pub(super) struct Reader<'a> {
    text: &'a str,
    /// Byte offset, character with like signs made one, whether it was superscript.
    characters: Vec<(usize, char)>,
    position: usize,
    problems: Vec<Problem>,
}

impl<'a> Reader<'a> {
    pub(super) fn new(text: &'a str) -> Self {
        Reader {
            text,
            characters: Vec::new(),
            position: 0,
            problems: Vec::new(),
        }
    }

    pub(super) fn read(mut self) -> Result<Species, Vec<Problem>> {
        if let Some(problem) = faults::size(self.text) {
            return Err(vec![problem]);
        }
        self.take_characters();
        if !self.problems.is_empty() {
            return Err(self.problems);
        }
        self.skip_spaces();
        if self.peek() == Some('*') {
            return self.any_atom();
        }
        let mut mass = self.digits();
        self.skip_spaces();
        let letters = self.letters();
        if letters.text.is_empty() {
            return Err(vec![faults::without_element(self.text, letters.start)]);
        }
        let (element, named_mass, attached) = self.element(&letters);
        if mass.is_none() {
            mass = self.mass_after_hyphen(element);
        }
        self.skip_spaces();
        let charge = match attached {
            Some(stage) => self.stage(&stage, element),
            None => self.rest(element),
        };
        let mass_number = match &mass {
            Some(piece) => self.mass_number(piece, element),
            None => named_mass,
        };
        if self.problems.is_empty() {
            Ok(Species {
                element,
                charge: charge.unwrap_or(0),
                mass_number,
            })
        } else {
            sort_by_key(&mut self.problems, |problem| problem.start);
            Err(self.problems)
        }
    }

    /// Makes like signs one; each run of characters that cannot occur is a fault.
    fn take_characters(&mut self) {
        let mut unexpected: Option<(usize, usize)> = None;
        for (byte, c) in self.text.char_indices() {
            let end = byte + c.len_utf8();
            match (plain(c), unexpected) {
                (Some(plain), run) => {
                    self.characters.push((byte, plain));
                    let fault = run.map(|(start, end)| faults::unexpected(self.text, start, end));
                    self.problems.extend(fault);
                    unexpected = None;
                }
                (None, run) => unexpected = Some((run.map_or(byte, |(start, _)| start), end)),
            }
        }
        let fault = unexpected.map(|(start, end)| faults::unexpected(self.text, start, end));
        self.problems.extend(fault);
    }

    fn peek(&self) -> Option<char> {
        self.characters.get(self.position).map(|&(_, c)| c)
    }

    fn byte(&self) -> usize {
        self.characters
            .get(self.position)
            .map_or(self.text.len(), |&(byte, _)| byte)
    }

    fn skip_spaces(&mut self) {
        while self.peek() == Some(' ') {
            self.position += 1;
        }
    }

    fn take_while(&mut self, test: impl Fn(char) -> bool) -> Piece {
        let start = self.byte();
        let mut text = String::new();
        while let Some(c) = self.peek().filter(|&c| test(c)) {
            text.push(c);
            self.position += 1;
        }
        let end = match self
            .position
            .checked_sub(1)
            .and_then(|last| self.characters.get(last))
        {
            Some(&(byte, _)) if !text.is_empty() => {
                byte + self
                    .text
                    .get(byte..)
                    .and_then(|t| t.chars().next())
                    .map_or(0, char::len_utf8)
            }
            _ => start,
        };
        Piece { start, end, text }
    }

    fn digits(&mut self) -> Option<Piece> {
        let piece = self.take_while(|c| c.is_ascii_digit());
        (!piece.text.is_empty()).then_some(piece)
    }

    fn letters(&mut self) -> Piece {
        self.take_while(|c| c.is_ascii_alphabetic())
    }

    fn any_atom(mut self) -> Result<Species, Vec<Problem>> {
        self.position += 1;
        self.skip_spaces();
        if self.peek().is_none() {
            return Ok(Species::ANY);
        }
        Err(vec![faults::any_atom_with_more(self.text, self.byte())])
    }

    /// The element, the mass number that D and T stand for, and a Roman numeral written right after
    /// the symbol.
    fn element(&mut self, letters: &Piece) -> (Option<u8>, Option<u16>, Option<Piece>) {
        let word = letters.text.as_str();
        let hydrogen = match word {
            "D" => Some(2),
            "T" => Some(3),
            _ => None,
        };
        if hydrogen.is_some() {
            return (Some(1), hydrogen, None);
        }
        if let Some(z) = by_symbol(word).or_else(|| by_name(word)) {
            return (Some(z), None, None);
        }
        let loose = (word.len() <= 2)
            .then(|| by_symbol(&capitalised(word)))
            .flatten();
        let attached = attached_stage(letters);
        match (loose, attached) {
            (Some(z), Some((other, stage))) => {
                self.problems
                    .push(faults::ambiguous(self.text, letters, z, other, &stage.text));
                (None, None, None)
            }
            (Some(z), None) => (Some(z), None, None),
            (None, Some((z, stage))) => (Some(z), None, Some(stage)),
            (None, None) => {
                self.problems
                    .push(faults::element_unknown(self.text, letters));
                (None, None, None)
            }
        }
    }

    /// `Fe-57`: digits after a hyphen, where they can be a mass number of the element.
    fn mass_after_hyphen(&mut self, element: Option<u8>) -> Option<Piece> {
        let before = self.position;
        if self.peek() == Some('-') {
            self.position += 1;
            if let Some(piece) = self.digits() {
                let z = element.map_or(0, u64::from);
                if piece.text.parse::<u64>().is_ok_and(|a| a >= z) {
                    return Some(piece);
                }
            }
        }
        self.position = before;
        None
    }

    fn mass_number(&mut self, piece: &Piece, element: Option<u8>) -> Option<u16> {
        let z = element?;
        let largest = 3 * u16::from(z) + 4;
        let mass = piece
            .text
            .parse::<u16>()
            .ok()
            .filter(|a| (u16::from(z)..=largest).contains(a));
        if mass.is_none() {
            self.problems
                .push(faults::mass_out_of_range(self.text, piece, z, largest));
        }
        mass
    }

    /// The charge after the element.
    fn rest(&mut self, element: Option<u8>) -> Option<i32> {
        let piece = self.take_while(|_| true);
        let mut piece = Piece {
            text: piece.text.trim_end().to_string(),
            ..piece
        };
        piece.end = piece.start
            + self
                .text
                .get(piece.start..)
                .map_or(0, |t| t.trim_end().len());
        if piece.text.is_empty() {
            return Some(0);
        }
        let bracketed = piece.text.starts_with('(');
        let inner: String = piece
            .text
            .chars()
            .filter(|c| !"()^{} ".contains(*c))
            .collect();
        if piece
            .text
            .split(' ')
            .filter(|word| !word.is_empty())
            .count()
            > 1
            && inner.chars().all(|c| c.is_ascii_alphabetic())
        {
            self.problems
                .push(faults::several_stages(self.text, &piece));
            return None;
        }
        if !inner.is_empty() && inner.chars().all(|c| c.is_ascii_alphabetic()) {
            if bracketed && roman_value(&inner).is_some() {
                self.problems
                    .push(faults::oxidation_number(self.text, &piece, &inner));
                return None;
            }
            return self.stage(
                &Piece {
                    text: inner,
                    ..piece
                },
                element,
            );
        }
        self.charge(&piece, &inner, element)
    }

    /// The charge of a Roman numeral: one less than its value.
    fn stage(&mut self, piece: &Piece, element: Option<u8>) -> Option<i32> {
        let value = roman_value(&piece.text);
        let usual = value.and_then(roman);
        if usual.as_deref() != Some(piece.text.to_ascii_uppercase().as_str()) {
            self.problems
                .push(faults::stage_not_roman(self.text, piece, usual));
            return None;
        }
        let charge = i64::from(value?) - 1;
        self.within_bounds(charge, piece, element)
    }

    /// `+`, `++`, `2+`, `+2`, `-`.
    fn charge(&mut self, piece: &Piece, inner: &str, element: Option<u8>) -> Option<i32> {
        let signs: String = inner.chars().filter(|c| !c.is_ascii_digit()).collect();
        let digits: String = inner.chars().filter(char::is_ascii_digit).collect();
        let digits_together = inner.starts_with(&digits) || inner.ends_with(&digits);
        let one_kind = signs.chars().all(|c| c == '+') || signs.chars().all(|c| c == '-');
        if signs.is_empty() {
            self.problems.push(faults::charge_without_sign(
                self.text, piece, &digits, element,
            ));
            return None;
        }
        if !one_kind || !digits_together || (!digits.is_empty() && signs.len() > 1) {
            self.problems
                .push(faults::charge_unreadable(self.text, piece));
            return None;
        }
        let size = if digits.is_empty() {
            i64::try_from(signs.len()).unwrap_or(i64::MAX)
        } else {
            digits.parse::<i64>().unwrap_or(i64::MAX)
        };
        let charge = if signs.starts_with('-') { -size } else { size };
        self.within_bounds(charge, piece, element)
    }

    fn within_bounds(&mut self, charge: i64, piece: &Piece, element: Option<u8>) -> Option<i32> {
        let z = element?;
        if (-1..i64::from(z)).contains(&charge) {
            return i32::try_from(charge).ok();
        }
        self.problems
            .push(faults::charge_out_of_range(self.text, piece, z, charge));
        None
    }
}

pub(super) fn capitalised(word: &str) -> String {
    let mut letters = word.chars();
    letters
        .next()
        .map(|c| c.to_ascii_uppercase())
        .into_iter()
        .chain(letters.map(|c| c.to_ascii_lowercase()))
        .collect()
}

/// `FeII`, `CIV`: a symbol written exactly with a usual Roman numeral in capitals after it.
fn attached_stage(letters: &Piece) -> Option<(u8, Piece)> {
    // Two letters first: `CoI` is cobalt.
    [2usize, 1].into_iter().find_map(|split| {
        let (head, tail) = (letters.text.get(..split)?, letters.text.get(split..)?);
        let z = by_symbol(head)?;
        let usual = roman(roman_value(tail)?)?;
        (usual == tail).then(|| {
            (
                z,
                Piece {
                    start: letters.start + split,
                    end: letters.end,
                    text: tail.to_string(),
                },
            )
        })
    })
}
