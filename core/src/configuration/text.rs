//! The reading of a configuration's text, item by item; every fault is kept and reading goes on.

use super::core_faults;
use super::occupation::closed_core;
use super::text_faults as faults;
use super::written::{Written, WrittenCore, WrittenSubshell};
use super::{MAX_N, Orbital, Subshell, l_of_letter};
use crate::elements::by_symbol;
use crate::numerics::order::sort_by_key;
use crate::problem::Problem;
use crate::quantity::signs::{is_minus, superscript_digit};

/// The most characters a configuration may have.
pub(super) const LONGEST: usize = 400;

pub(super) struct Reader<'a> {
    text: &'a str,
    characters: Vec<(usize, char)>,
    position: usize,
    problems: Vec<Problem>,
    core: Option<WrittenCore>,
    subshells: Vec<WrittenSubshell>,
    bare_shell: Option<u8>,
}

/// How many electrons were typed, and what was wrong with it.
enum Count {
    Electrons(u32),
    /// A fault that has been kept.
    Unreadable,
}

impl<'a> Reader<'a> {
    pub(super) fn new(text: &'a str) -> Self {
        Reader {
            text,
            characters: Vec::new(),
            position: 0,
            problems: Vec::new(),
            core: None,
            subshells: Vec::new(),
            bare_shell: None,
        }
    }

    pub(super) fn read(mut self) -> Result<Written, Vec<Problem>> {
        if let Some(problem) = faults::size(self.text) {
            return Err(vec![problem]);
        }
        self.characters = self.text.char_indices().collect();
        while let Some(c) = self.peek() {
            if is_separator(c) {
                self.position += 1;
            } else {
                self.item(c);
            }
        }
        let other_items = self.core.is_some() || !self.subshells.is_empty();
        if let (Some(n), true) = (self.bare_shell, other_items) {
            self.problems
                .push(core_faults::bare_shell_with_more(self.text, n));
        }
        if self.problems.is_empty() && !other_items && self.bare_shell.is_none() {
            self.problems.push(faults::empty(self.text));
        }
        if !self.problems.is_empty() {
            sort_by_key(&mut self.problems, |problem| (problem.start, problem.end));
            return Err(self.problems);
        }
        Ok(Written {
            text: self.text.to_string(),
            core: self.core,
            subshells: self.subshells,
            bare_shell: self.bare_shell,
        })
    }

    fn peek(&self) -> Option<char> {
        self.peek_at(self.position)
    }

    fn peek_at(&self, position: usize) -> Option<char> {
        self.characters.get(position).map(|&(_, c)| c)
    }

    fn byte(&self) -> usize {
        self.byte_at(self.position)
    }

    fn byte_at(&self, position: usize) -> usize {
        self.characters
            .get(position)
            .map_or(self.text.len(), |&(byte, _)| byte)
    }

    /// Where a run of characters that pass a test ends.
    fn run_end(&self, mut position: usize, test: impl Fn(char) -> bool) -> usize {
        while self.peek_at(position).is_some_and(&test) {
            position += 1;
        }
        position
    }

    fn digits(&mut self) -> &'a str {
        let start = self.byte();
        self.position = self.run_end(self.position, |c| c.is_ascii_digit());
        self.text.get(start..self.byte()).unwrap_or("")
    }

    fn item(&mut self, c: char) {
        let start = self.position;
        if c == '[' && !self.bracketed_number(start) {
            self.core_symbol();
        } else if c.is_ascii_digit() {
            let digits = self.digits();
            self.after_number(start, digits);
        } else if c == '[' {
            self.orbital(start, "");
        } else if c.is_ascii_alphabetic() {
            self.word(start);
        } else {
            self.unexpected(start);
        }
        // Whatever happened, something was consumed.
        self.position = self.position.max(start + 1);
    }

    /// Whether `[digits]` stands here, the letter of ℓ ≥ 21.
    fn bracketed_number(&self, position: usize) -> bool {
        let end = self.run_end(position + 1, |c| c.is_ascii_digit());
        end > position + 1 && self.peek_at(position) == Some('[') && self.peek_at(end) == Some(']')
    }

    fn core_symbol(&mut self) {
        let start = self.byte();
        let end = self.run_end(self.position + 1, |c| c.is_ascii_alphabetic());
        let name: String = self
            .text
            .get(start + 1..self.byte_at(end))
            .unwrap_or("")
            .to_string();
        let closed = self.peek_at(end) == Some(']');
        self.position = if closed { end + 1 } else { end };
        let stop = self.byte();
        if !closed {
            self.problems
                .push(core_faults::core_not_closed(self.text, start, stop, &name));
            return;
        }
        let mut letters = name.chars();
        let usual: String = letters
            .next()
            .map(|c| c.to_ascii_uppercase())
            .into_iter()
            .chain(letters.map(|c| c.to_ascii_lowercase()))
            .collect();
        let z = by_symbol(&usual);
        match (
            z,
            z.and_then(closed_core),
            z.and_then(crate::elements::symbol),
        ) {
            (Some(z), Some(_), Some(symbol)) => match self.core {
                None => {
                    self.core = Some(WrittenCore {
                        z,
                        symbol,
                        start,
                        end: stop,
                    })
                }
                Some(_) => self
                    .problems
                    .push(core_faults::core_repeated(self.text, start, stop, symbol)),
            },
            (Some(z), _, _) => self
                .problems
                .push(core_faults::core_open(self.text, start, stop, z)),
            (None, _, _) => self
                .problems
                .push(core_faults::core_unknown(self.text, start, stop, &name)),
        }
    }

    /// Letters without a number before them.
    fn word(&mut self, start: usize) {
        let end = self.run_end(start, |c| c.is_ascii_alphabetic());
        let word = self
            .text
            .get(self.byte_at(start)..self.byte_at(end))
            .unwrap_or("");
        if word.eq_ignore_ascii_case("n") && self.bare_shell_at(end) {
            return;
        }
        if end == start + 1 {
            self.orbital(start, "");
            return;
        }
        self.position = end;
        self.problems.push(core_faults::word(
            self.text,
            self.byte_at(start),
            self.byte_at(end),
            word,
        ));
    }

    /// `=5` after an n.
    fn bare_shell_at(&mut self, after_n: usize) -> bool {
        let equals = self.run_end(after_n, char::is_whitespace);
        if self.peek_at(equals) != Some('=') {
            return false;
        }
        let start = self.byte();
        self.position = self.run_end(equals + 1, char::is_whitespace);
        let digits = self.digits();
        let n = digits.parse::<u32>().unwrap_or(u32::MAX);
        let problem = match u8::try_from(n).ok().filter(|n| (1..=MAX_N).contains(n)) {
            _ if digits.is_empty() => {
                core_faults::shell_without_number(self.text, start, self.byte())
            }
            None => faults::n_out_of_range(self.text, start, self.byte(), digits, "n="),
            Some(n) if self.bare_shell.is_none() => {
                self.bare_shell = Some(n);
                return true;
            }
            Some(n) => core_faults::bare_shell_with_more(self.text, n),
        };
        self.problems.push(problem);
        true
    }

    /// A number at the beginning of an item: the n of an orbital, or a fault.
    fn after_number(&mut self, start: usize, digits: &'a str) {
        match self.peek() {
            Some(c) if c.is_ascii_alphabetic() => self.orbital(start, digits),
            Some('[') if self.bracketed_number(self.position) => self.orbital(start, digits),
            _ => {
                let (from, to) = (self.byte_at(start), self.byte());
                self.problems
                    .push(faults::number_alone(self.text, from, to, digits));
            }
        }
    }

    /// An orbital's letter and its electrons, the position being at the letter.
    fn orbital(&mut self, start: usize, n_digits: &str) {
        let letter_at = self.position;
        let first = self.peek().unwrap_or(' ');
        let l = if first == '[' {
            let end = self.run_end(letter_at + 1, |c| c.is_ascii_digit());
            let number = self
                .text
                .get(self.byte_at(letter_at) + 1..self.byte_at(end))
                .unwrap_or("");
            self.position = end + 1;
            Some(number.parse::<u8>().unwrap_or(u8::MAX))
        } else {
            self.position += 1;
            l_of_letter(first.to_ascii_lowercase())
        };
        let letter_end = self.position;
        let n = n_digits.parse::<u32>().unwrap_or(u32::MAX);
        let orbital = l.and_then(|l| Orbital::new(u8::try_from(n).ok()?, l));
        let count = self.electrons(start);
        let (from, to) = (self.byte_at(start), self.byte());
        let letter = self
            .text
            .get(self.byte_at(letter_at)..self.byte_at(letter_end))
            .unwrap_or("");
        let place = faults::Item {
            text: self.text,
            start: from,
            letter_start: self.byte_at(letter_at),
            letter_end: self.byte_at(letter_end),
            end: to,
            n: n_digits,
            letter,
            electrons: match count {
                Count::Electrons(electrons) => Some(electrons),
                Count::Unreadable => None,
            },
        };
        let Some(l) = l else {
            self.problems.push(faults::letter_unknown(&place));
            return;
        };
        if first.is_ascii_uppercase() {
            self.problems.push(faults::letter_capital(&place));
        }
        if n_digits.is_empty() {
            self.problems.push(faults::n_missing(&place, l));
            return;
        }
        if !(1..=u32::from(MAX_N)).contains(&n) {
            self.problems.push(faults::n_out_of_range(
                self.text,
                from,
                place.letter_start,
                n_digits,
                "",
            ));
            return;
        }
        let Count::Electrons(electrons) = count else {
            return;
        };
        let Some(orbital) = orbital else {
            self.problems
                .push(faults::l_not_below_n(&place, n, l, electrons));
            return;
        };
        let Some(subshell) = Subshell::new(orbital, electrons) else {
            self.problems.push(if electrons == 0 {
                faults::no_electrons(&place)
            } else {
                faults::over_capacity(&place, orbital, &self.subshells)
            });
            return;
        };
        match self
            .subshells
            .iter()
            .find(|s| s.subshell.orbital() == orbital)
        {
            Some(earlier) => self
                .problems
                .push(faults::repeated(&place, earlier, subshell)),
            None => self.subshells.push(WrittenSubshell {
                subshell,
                start: from,
                end: to,
            }),
        }
    }

    /// The electrons after an orbital: nothing for one, digits, superscripts, `^6`, `^{6}`, `(6)`.
    fn electrons(&mut self, item: usize) -> Count {
        let start = self.position;
        if self.peek().is_some_and(|c| superscript_digit(c).is_some()) {
            let end = self.run_end(start, |c| superscript_digit(c).is_some());
            let digits: String = self
                .characters
                .get(start..end)
                .unwrap_or(&[])
                .iter()
                .filter_map(|&(_, c)| superscript_digit(c))
                .collect();
            self.position = end;
            return self.not_fractional(item, number(&digits));
        }
        let mut open = start;
        if self.peek_at(open) == Some('^') {
            open += 1;
        }
        let bracket = match self.peek_at(open) {
            Some('{') => Some('}'),
            Some('(') => Some(')'),
            _ => None,
        };
        if bracket.is_some() {
            open += 1;
        }
        if open > start && self.peek_at(open).is_some_and(|c| c.is_ascii_digit()) {
            let end = self.run_end(open, |c| c.is_ascii_digit());
            if bracket.is_none() || self.peek_at(end) == bracket {
                self.position = open;
                let digits = self.digits();
                self.position += usize::from(bracket.is_some());
                return self.not_fractional(item, number(digits));
            }
        }
        if self.peek().is_some_and(is_minus)
            && self.peek_at(start + 1).is_some_and(|c| c.is_ascii_digit())
        {
            self.position += 1;
            let digits = self.digits();
            let (from, to) = (self.byte_at(item), self.byte());
            self.problems.push(faults::negative(
                self.text,
                from,
                self.byte_at(start),
                to,
                digits,
            ));
            return Count::Unreadable;
        }
        if self.peek().is_some_and(|c| c.is_ascii_digit()) {
            let digits = self.digits();
            let taken = self.shared_digits(start, digits);
            self.position = start + taken;
            if taken == 0 {
                return Count::Electrons(1);
            }
            return self.not_fractional(item, number(digits.get(..taken).unwrap_or("")));
        }
        Count::Electrons(1)
    }

    /// How many of the digits after a letter are electrons, the rest being the n of an orbital whose
    /// letter follows at once. The position is behind the digits.
    fn shared_digits(&self, start: usize, digits: &str) -> usize {
        let l = match self.peek() {
            Some('[') if self.bracketed_number(self.position) => {
                let end = self.run_end(self.position + 1, |c| c.is_ascii_digit());
                self.text
                    .get(self.byte() + 1..self.byte_at(end))
                    .and_then(|t| t.parse::<u8>().ok())
            }
            Some(c) if c.is_ascii_alphabetic() => l_of_letter(c.to_ascii_lowercase()),
            _ => return self.position - start,
        };
        // 0 is no n, and ℓ ≥ 9 needs an n of two digits.
        let two = digits.ends_with('0') || l.is_some_and(|l| l >= 9);
        digits.len().saturating_sub(if two { 2 } else { 1 })
    }

    /// `3d6.5`: a mark and digits that no orbital's letter follows.
    fn not_fractional(&mut self, item: usize, electrons: u32) -> Count {
        if !matches!(self.peek(), Some('.' | ',')) {
            return Count::Electrons(electrons);
        }
        let end = self.run_end(self.position + 1, |c| c.is_ascii_digit());
        let followed = self
            .peek_at(end)
            .is_some_and(|c| c.is_ascii_alphabetic() || c == '[');
        if end == self.position + 1 || followed {
            return Count::Electrons(electrons);
        }
        let mark = self.byte();
        self.position = end;
        let (from, to) = (self.byte_at(item), self.byte());
        self.problems
            .push(faults::fractional(self.text, from, mark, to, electrons));
        Count::Unreadable
    }

    /// Characters that no configuration has, up to the next one that may begin an item.
    fn unexpected(&mut self, start: usize) {
        if self.peek() == Some('(') {
            let close = self.run_end(start + 1, |c| c != ')');
            self.position = if self.peek_at(close).is_some() {
                close + 1
            } else {
                close
            };
        } else {
            self.position = self.run_end(start, |c| {
                !is_separator(c) && !c.is_ascii_alphanumeric() && c != '[' && c != '('
            });
        }
        let end = self.byte();
        self.problems
            .push(faults::unexpected(self.text, self.byte_at(start), end));
    }
}

/// What may stand between subshells: spaces of any width, points, commas, centred dots.
pub(super) fn is_separator(c: char) -> bool {
    c.is_whitespace() || matches!(c, '.' | ',' | ';' | '·' | '⋅' | '∙')
}

/// A count; past the range the largest, which is over every capacity.
fn number(digits: &str) -> u32 {
    digits.parse().unwrap_or(u32::MAX)
}
