//! The reading of a species' text.

use super::species::{Species, roman, roman_value};
use crate::elements::{by_name, by_symbol, name, nearest, symbol};
use crate::problem::Problem;
use crate::quantity::signs::{is_minus, shown, superscript_digit, superscript_sign};

/// The most characters a species may have.
const LONGEST: usize = 80;

/// A piece of the text: its bytes and its characters with like signs made one.
#[derive(Clone, Debug)]
struct Piece {
    start: usize,
    end: usize,
    text: String,
}

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
        if let Some(problem) = self.size_problem() {
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
            let problem = Problem::new(
                "species-without-element",
                format!("“{}” names no element.", self.text.trim()),
                letters.start,
                self.text.len(),
            );
            return Err(vec![problem.bound(
                "symbols and English names of the elements 1 to 118, or * for any atom",
            )]);
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
            self.problems.sort_by_key(|problem| problem.start);
            Err(self.problems)
        }
    }

    fn size_problem(&self) -> Option<Problem> {
        if self.text.trim().is_empty() {
            let problem = Problem::new("species-empty", "No species is given.", 0, self.text.len());
            return Some(problem.way("Use any atom", "*"));
        }
        let length = self.text.chars().count();
        (length > LONGEST).then(|| {
            Problem::new(
                "species-too-long",
                format!("The species has {length} characters."),
                0,
                self.text.len(),
            )
            .bound(format!("a species has at most {LONGEST} characters"))
            .way("Use any atom", "*")
        })
    }

    /// Makes like signs one; each run of characters that cannot occur is a fault.
    fn take_characters(&mut self) {
        let mut unexpected: Option<(usize, usize, String)> = None;
        for (byte, c) in self.text.char_indices() {
            let plain = if c.is_whitespace() {
                Some(' ')
            } else if is_minus(c) {
                Some('-')
            } else if c.is_ascii_alphanumeric() || "+()^{}*".contains(c) {
                Some(c)
            } else {
                superscript_digit(c).or_else(|| superscript_sign(c))
            };
            match plain {
                Some(plain) => {
                    self.characters.push((byte, plain));
                    self.report_unexpected(unexpected.take());
                }
                None => {
                    let end = byte + c.len_utf8();
                    match &mut unexpected {
                        Some((_, last, words)) => {
                            *last = end;
                            if words.len() < 60 {
                                words.push_str(", ");
                                words.push_str(&shown(c));
                            }
                        }
                        None => unexpected = Some((byte, end, shown(c))),
                    }
                }
            }
        }
        self.report_unexpected(unexpected);
    }

    fn report_unexpected(&mut self, run: Option<(usize, usize, String)>) {
        if let Some((start, end, words)) = run {
            let kept: String = self
                .text
                .chars()
                .filter(|&c| {
                    c.is_whitespace()
                        || is_minus(c)
                        || c.is_ascii_alphanumeric()
                        || "+()^{}*".contains(c)
                        || superscript_digit(c).is_some()
                        || superscript_sign(c).is_some()
                })
                .collect();
            let mut problem = Problem::new(
                "species-unexpected-character",
                format!("A species has no {words}."),
                start,
                end,
            )
            .bound("Latin letters, digits, + and - in the form Fe II, Fe 2+ or 57Fe");
            let kept = kept.trim();
            if !kept.is_empty() {
                problem = problem.way(format!("Use {kept}"), kept);
            }
            self.problems.push(problem);
        }
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

    /// The whole text with a piece of it replaced.
    fn with(&self, piece: &Piece, replacement: &str) -> String {
        let before = self.text.get(..piece.start).unwrap_or("");
        let after = self.text.get(piece.end..).unwrap_or("");
        format!("{before}{replacement}{after}").trim().to_string()
    }

    fn any_atom(mut self) -> Result<Species, Vec<Problem>> {
        self.position += 1;
        self.skip_spaces();
        if self.peek().is_none() {
            return Ok(Species::ANY);
        }
        Err(vec![
            Problem::new(
                "species-any-atom-with-more",
                "Any atom, *, has no charge and no isotope.",
                self.byte(),
                self.text.len(),
            )
            .way("Use *", "*"),
        ])
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
                let (one, two) = (
                    symbol(z).unwrap_or_default(),
                    symbol(other).unwrap_or_default(),
                );
                let numeral = &stage.text;
                self.problems.push(
                    Problem::new(
                        "species-ambiguous",
                        format!("“{word}” may be {one} or {two} {numeral}."),
                        letters.start,
                        letters.end,
                    )
                    .way(format!("Use {one}"), self.with(letters, one))
                    .way(
                        format!("Use {two} {numeral}"),
                        self.with(letters, &format!("{two} {numeral}")),
                    ),
                );
                (None, None, None)
            }
            (Some(z), None) => (Some(z), None, None),
            (None, Some((z, stage))) => (Some(z), None, Some(stage)),
            (None, None) => {
                let mut problem = Problem::new(
                    "element-unknown",
                    format!("There is no element “{}”.", clipped(word)),
                    letters.start,
                    letters.end,
                )
                .bound("symbols and English names of the elements 1 to 118, or * for any atom");
                for z in nearest(word, 3) {
                    let (near, called) =
                        (symbol(z).unwrap_or_default(), name(z).unwrap_or_default());
                    problem =
                        problem.way(format!("Use {near}, {called}"), self.with(letters, near));
                }
                self.problems.push(problem);
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
            let symbol = symbol(z).unwrap_or_default();
            let bare = match element_with(self.text, piece) {
                Some(text) => text,
                None => symbol.to_string(),
            };
            self.problems.push(
                Problem::new(
                    "mass-number-out-of-range",
                    format!(
                        "{} cannot be a mass number of {symbol}.",
                        clipped(&piece.text)
                    ),
                    piece.start,
                    piece.end,
                )
                .bound(format!(
                    "mass numbers of {symbol} from {z} to {largest} are taken"
                ))
                .way(format!("Use {bare} without a mass number"), bare),
            );
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
        if !inner.is_empty() && inner.chars().all(|c| c.is_ascii_alphabetic()) {
            if bracketed && roman_value(&inner).is_some() {
                self.oxidation_number(&piece, &inner);
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

    /// `iron(II)` is the ion Fe²⁺ in chemistry, while Fe II is the spectrum of Fe⁺: ask.
    fn oxidation_number(&mut self, piece: &Piece, numeral: &str) {
        let before = self
            .text
            .get(..piece.start)
            .unwrap_or("")
            .trim()
            .to_string();
        let value = roman_value(numeral).unwrap_or(1);
        let upper = numeral.to_ascii_uppercase();
        self.problems.push(
            Problem::new(
                "stage-in-parentheses",
                format!("({upper}) may be a charge of {value}+ or the spectrum {upper}."),
                piece.start,
                piece.end,
            )
            .way(
                format!("Use {before} {value}+"),
                format!("{before} {value}+"),
            )
            .way(format!("Use {before} {upper}"), format!("{before} {upper}")),
        );
    }

    /// The charge of a Roman numeral: one less than its value.
    fn stage(&mut self, piece: &Piece, element: Option<u8>) -> Option<i32> {
        let value = roman_value(&piece.text);
        let usual = value.and_then(roman);
        if usual.as_deref() != Some(piece.text.to_ascii_uppercase().as_str()) {
            let mut problem = Problem::new(
                "stage-not-roman",
                format!("“{}” is not a Roman numeral.", clipped(&piece.text)),
                piece.start,
                piece.end,
            )
            .bound("I is the neutral atom, II has lost one electron, and so on");
            let attached = self
                .text
                .get(..piece.start)
                .is_some_and(|t| t.ends_with(|c: char| c.is_ascii_alphabetic()));
            let gap = if attached { " " } else { "" };
            for numeral in usual
                .into_iter()
                .chain([String::from("I"), String::from("II")])
                .take(2)
            {
                problem = problem.way(
                    format!("Use {numeral}"),
                    self.with(piece, &format!("{gap}{numeral}")),
                );
            }
            self.problems.push(problem);
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
            self.charge_without_sign(piece, &digits);
            return None;
        }
        if !one_kind || !digits_together || (!digits.is_empty() && signs.len() > 1) {
            let before = self.text.get(..piece.start).unwrap_or("").trim_end();
            self.problems.push(
                Problem::new(
                    "charge-unreadable",
                    format!("“{}” is not a charge.", clipped(&piece.text)),
                    piece.start,
                    piece.end,
                )
                .bound("a charge is written 2+, + or II")
                .way(format!("Use {before}"), before)
                .way(format!("Use {before} 2+"), format!("{before} 2+")),
            );
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

    fn charge_without_sign(&mut self, piece: &Piece, digits: &str) {
        let before = self.text.get(..piece.start).unwrap_or("").trim_end();
        let mut problem = Problem::new(
            "charge-without-sign",
            format!("{} may be a charge or a spectrum.", clipped(digits)),
            piece.start,
            piece.end,
        )
        .bound("a charge has a sign (2+), a spectrum a Roman numeral (II)")
        .way(
            format!("Use {before} {digits}+"),
            format!("{before} {digits}+"),
        );
        if let Some(numeral) = digits.parse().ok().and_then(roman) {
            problem = problem.way(
                format!("Use {before} {numeral}"),
                format!("{before} {numeral}"),
            );
        }
        self.problems.push(problem);
    }

    fn within_bounds(&mut self, charge: i64, piece: &Piece, element: Option<u8>) -> Option<i32> {
        let z = i64::from(element?);
        if (-1..z).contains(&charge) {
            return i32::try_from(charge).ok();
        }
        let symbol = element.and_then(symbol).unwrap_or_default();
        let called = element.and_then(name).unwrap_or_default();
        let before = self.text.get(..piece.start).unwrap_or("").trim_end();
        let (code, message, bound) = if charge < 0 {
            (
                "charge-too-negative",
                format!(
                    "{symbol} {}- has more than one electron too many.",
                    clipped(&charge.unsigned_abs().to_string())
                ),
                "ions are counted down to a single negative charge".to_string(),
            )
        } else if charge == z {
            (
                "charge-leaves-no-electron",
                format!("{symbol} {charge}+ is the bare nucleus and has no electron."),
                format!(
                    "{called} has {z} electrons, so the highest charge with one left is {}+",
                    z - 1
                ),
            )
        } else {
            (
                "charge-above-z",
                format!("{symbol} cannot have a charge of {charge}+."),
                format!(
                    "{called} has {z} electrons, so the highest charge with one left is {}+",
                    z - 1
                ),
            )
        };
        let highest = if charge < 0 { -1 } else { z - 1 };
        let (label, text) = match highest {
            -1 => ("-".to_string(), format!("{before}-")),
            0 => (" I".to_string(), format!("{before} I")),
            n => (format!(" {n}+"), format!("{before} {n}+")),
        };
        let mut problem = Problem::new(code, message, piece.start, piece.end).bound(bound);
        problem = problem.way(format!("Use {symbol}{label}"), text);
        if charge > 0 && z > 1 {
            problem = problem.way(format!("Use {symbol} I"), format!("{before} I"));
        }
        self.problems.push(problem);
        None
    }
}

/// The text without its mass number.
fn element_with(text: &str, mass: &Piece) -> Option<String> {
    let before = text
        .get(..mass.start)?
        .trim_end()
        .trim_end_matches(is_minus);
    let after = text.get(mass.end..)?;
    Some(format!("{before}{after}").trim().to_string())
}

fn capitalised(word: &str) -> String {
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

fn clipped(text: &str) -> String {
    if text.chars().count() <= 24 {
        text.to_string()
    } else {
        text.chars().take(20).chain(['…']).collect()
    }
}
