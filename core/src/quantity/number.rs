//! Numbers as people type them.

use super::signs::{clipped, is_minus, superscript_digit, superscript_sign};
use crate::problem::Problem;

/// The most characters a number or quantity may have.
pub const LONGEST: usize = 200;

/// A number at the beginning of a text.
#[derive(Clone, Debug, PartialEq)]
pub(super) struct Leading {
    pub value: f64,
    /// Standard uncertainty from digits in parentheses.
    pub uncertainty: Option<f64>,
    /// First byte of the number.
    pub start: usize,
    /// One past its last byte; a unit may follow.
    pub end: usize,
}

/// A text's characters with their bytes, and where reading is.
struct Scan<'a> {
    text: &'a str,
    characters: Vec<(usize, char)>,
    position: usize,
}

impl Scan<'_> {
    fn at(&self, position: usize) -> Option<char> {
        self.characters.get(position).map(|&(_, c)| c)
    }

    fn peek(&self) -> Option<char> {
        self.at(self.position)
    }

    fn byte(&self) -> usize {
        self.characters
            .get(self.position)
            .map_or(self.text.len(), |&(byte, _)| byte)
    }

    fn skip_spaces(&mut self) {
        while self.peek().is_some_and(char::is_whitespace) {
            self.position += 1;
        }
    }

    fn digits(&mut self) -> String {
        let mut digits = String::new();
        while let Some(c) = self.peek().filter(char::is_ascii_digit) {
            digits.push(c);
            self.position += 1;
        }
        digits
    }

    fn sign(&mut self) -> &'static str {
        match self.peek() {
            Some('+') => {
                self.position += 1;
                ""
            }
            Some(c) if is_minus(c) => {
                self.position += 1;
                "-"
            }
            _ => "",
        }
    }
}

/// The digits of a number, their groups and marks.
struct Mantissa {
    /// Digits and marks as typed: runs of digits between marks and spaces.
    groups: Vec<String>,
    /// What stands between group i and i + 1: a mark or a space.
    between: Vec<char>,
}

/// Checks length and emptiness, the same for every kind of typed value.
pub(super) fn sized(text: &str, what: &str) -> Option<Problem> {
    let length = text.chars().count();
    if length > LONGEST {
        let problem = Problem::new(
            "value-too-long",
            format!("The {what} has {length} characters."),
            0,
            text.len(),
        )
        .bound(format!("A value has at most {LONGEST} characters."));
        let kept: String = text.chars().take(LONGEST).collect();
        return Some(problem.way("Keep the beginning", kept.trim()));
    }
    text.trim()
        .is_empty()
        .then(|| Problem::new("value-empty", format!("No {what} is given."), 0, text.len()))
}

/// Reads the number at the beginning of a text: `589.592`, `0,5`, `1 234.5`, `3e-2`, `3×10⁻²`,
/// `589.592(2)`.
pub(super) fn leading(text: &str) -> Result<Leading, Problem> {
    let mut scan = Scan {
        text,
        characters: text.char_indices().collect(),
        position: 0,
    };
    scan.skip_spaces();
    let start = scan.byte();
    let sign = scan.sign();
    if !sign.is_empty() {
        scan.skip_spaces();
    }
    let mantissa_start = scan.byte();
    let mantissa = mantissa(&mut scan);
    let mantissa_end = scan.byte();
    let place = (mantissa_start, mantissa_end);
    if mantissa.groups.iter().all(String::is_empty) {
        let end = if text.trim().is_empty() {
            text.len()
        } else {
            text.trim_end().len().max(start)
        };
        return Err(Problem::new(
            "number-missing",
            format!("“{}” does not begin with a number.", clipped(text.trim())),
            start,
            end,
        )
        .bound("A value begins with a number such as 589.592, 0,5 or 3e-2.")
        .way("Use 1", with(text, start, end, "1")));
    }
    let (whole, fraction) = mantissa.parts(text, place)?;
    let uncertainty = uncertainty(&mut scan);
    let exponent = exponent(&mut scan);
    let end = scan.byte();
    // Either side of the mark may be empty: `.5`, `5.`
    let plain = format!("{sign}0{whole}.{fraction}0e{exponent}");
    let value: f64 = plain.parse().unwrap_or(f64::NAN);
    let nonzero = whole.chars().chain(fraction.chars()).any(|c| c != '0');
    if !value.is_finite() || (nonzero && value == 0.0) {
        let size = if value == 0.0 { "small" } else { "large" };
        let near = if value == 0.0 { "0" } else { "1" };
        return Err(Problem::new(
            "number-out-of-range",
            format!(
                "{} is too {size} to be counted.",
                clipped(text.get(start..end).unwrap_or(""))
            ),
            start,
            end,
        )
        .bound("Numbers reach from about 10⁻³⁰⁸ to 10³⁰⁸.")
        .way(format!("Use {near}"), with(text, start, end, near)));
    }
    let uncertainty = uncertainty.map(|digits| {
        let decimals = i64::try_from(fraction.len()).unwrap_or(i64::MAX);
        let last = exponent
            .parse::<i64>()
            .unwrap_or(0)
            .saturating_sub(decimals);
        format!("{digits}e{last}").parse::<f64>().unwrap_or(0.0)
    });
    Ok(Leading {
        value,
        uncertainty,
        start,
        end,
    })
}

/// Reads a pure number, the whole text: `50000`, `1,5`, `−3e2`.
///
/// Faults: empty, too long, not a number, two kinds of decimal mark, odd grouping, something after
/// it.
pub fn number(text: &str) -> Result<f64, Problem> {
    if let Some(problem) = sized(text, "number") {
        return Err(problem);
    }
    let leading = leading(text)?;
    let rest = text.get(leading.end..).unwrap_or("");
    if rest.trim().is_empty() {
        return Ok(leading.value);
    }
    let end = text.trim_end().len();
    let start = end - rest.trim().len();
    let kept = text.get(leading.start..leading.end).unwrap_or("").trim();
    Err(Problem::new(
        "number-followed",
        format!(
            "“{}” after the number cannot be read.",
            clipped(rest.trim())
        ),
        start,
        end,
    )
    .bound("A pure number without a unit stands here.")
    .way(format!("Use {kept}"), kept))
}

fn mantissa(scan: &mut Scan) -> Mantissa {
    let mut mantissa = Mantissa {
        groups: vec![scan.digits()],
        between: Vec::new(),
    };
    loop {
        match scan.peek() {
            Some(mark @ ('.' | ',')) => {
                scan.position += 1;
                mantissa.between.push(mark);
                mantissa.groups.push(scan.digits());
            }
            // A space belongs to the number where digits stand on both sides.
            Some(c) if c.is_whitespace() => {
                let before = scan.position;
                scan.skip_spaces();
                let after_digit = mantissa
                    .groups
                    .last()
                    .is_some_and(|group| !group.is_empty());
                if after_digit && scan.peek().is_some_and(|c| c.is_ascii_digit()) && !is_per(scan) {
                    mantissa.between.push(' ');
                    mantissa.groups.push(scan.digits());
                } else {
                    scan.position = before;
                    return mantissa;
                }
            }
            _ => return mantissa,
        }
    }
}

/// Whether `1/` stands here, the beginning of a unit such as `1/cm`.
fn is_per(scan: &Scan) -> bool {
    scan.peek() == Some('1') && scan.at(scan.position + 1) == Some('/')
}

impl Mantissa {
    /// Whole and fractional digits; a fault for two marks or odd groups.
    fn parts(&self, text: &str, (start, end): (usize, usize)) -> Result<(String, String), Problem> {
        let marks: Vec<char> = self.between.iter().copied().filter(|&c| c != ' ').collect();
        let typed = clipped(text.get(start..end).unwrap_or(""));
        if marks.len() > 1 {
            let meant = self.meant(&marks);
            let message = if marks.contains(&',') {
                format!(
                    "In {typed} the comma is the decimal mark, so there cannot be another mark."
                )
            } else {
                format!("{typed} has more than one decimal point.")
            };
            return Err(Problem::new("decimal-mark-repeated", message, start, end)
                .bound(
                    "There is one decimal mark, point or comma; digits are grouped by spaces only.",
                )
                .way(format!("Use {meant}"), with(text, start, end, &meant)));
        }
        let split = self
            .between
            .iter()
            .position(|&c| c != ' ')
            .map_or(self.groups.len(), |i| i + 1);
        let (whole, fraction) = self.groups.split_at(split.min(self.groups.len()));
        let whole_grouped = whole.len() == 1
            || (whole.first().is_some_and(|g| (1..=3).contains(&g.len()))
                && whole.iter().skip(1).all(|g| g.len() == 3));
        let fraction_grouped = fraction.len() <= 1
            || (fraction.iter().rev().skip(1).all(|g| g.len() == 3)
                && fraction.last().is_some_and(|g| (1..=3).contains(&g.len())));
        let (whole, fraction) = (whole.concat(), fraction.concat());
        if !whole_grouped || !fraction_grouped {
            let mark = marks.first().map_or(String::new(), char::to_string);
            let meant = format!("{whole}{mark}{fraction}");
            return Err(Problem::new(
                "digits-grouped-oddly",
                format!("The digits of {typed} are grouped oddly."),
                start,
                end,
            )
            .bound("Spaces group digits by threes, counted from the decimal mark.")
            .way(format!("Use {meant}"), with(text, start, end, &meant)));
        }
        Ok((whole, fraction))
    }

    /// What a number with several marks probably means: the last mark decimal where it is of
    /// another kind, else all of them grouping.
    fn meant(&self, marks: &[char]) -> String {
        let last = marks.last().copied();
        let decimal = last.filter(|mark| marks.iter().filter(|m| *m == mark).count() == 1);
        let mut text = self.groups.first().cloned().unwrap_or_default();
        for (group, &between) in self.groups.iter().skip(1).zip(&self.between) {
            if Some(between) == decimal {
                text.push(between);
            }
            text.push_str(group);
        }
        text
    }
}

/// Digits in parentheses after a number.
fn uncertainty(scan: &mut Scan) -> Option<String> {
    let before = scan.position;
    if scan.peek() == Some('(') {
        scan.position += 1;
        let digits = scan.digits();
        if !digits.is_empty() && scan.peek() == Some(')') {
            scan.position += 1;
            return Some(digits);
        }
    }
    scan.position = before;
    None
}

/// `e-2`, `×10^-2`, `·10⁻²`; "0" where none stands here.
fn exponent(scan: &mut Scan) -> String {
    let before = scan.position;
    if matches!(scan.peek(), Some('e' | 'E')) {
        scan.position += 1;
        let sign = scan.sign();
        let digits = scan.digits();
        if !digits.is_empty() {
            return format!("{sign}{digits}");
        }
    } else {
        scan.skip_spaces();
        if matches!(scan.peek(), Some('×' | '·' | '⋅' | '*' | 'x')) {
            scan.position += 1;
            scan.skip_spaces();
            if scan.peek() == Some('1') && scan.at(scan.position + 1) == Some('0') {
                scan.position += 2;
                if let Some(power) = power_of_ten(scan) {
                    return power;
                }
            }
        }
    }
    scan.position = before;
    "0".to_string()
}

fn power_of_ten(scan: &mut Scan) -> Option<String> {
    if scan.peek() == Some('^') {
        scan.position += 1;
        let sign = scan.sign();
        let digits = scan.digits();
        return (!digits.is_empty()).then(|| format!("{sign}{digits}"));
    }
    let mut power = String::new();
    while let Some(c) = scan
        .peek()
        .and_then(|c| superscript_digit(c).or_else(|| superscript_sign(c)))
    {
        power.push(c);
        scan.position += 1;
    }
    power.parse::<i64>().is_ok().then_some(power)
}

/// The whole text with some bytes replaced.
pub(super) fn with(text: &str, start: usize, end: usize, replacement: &str) -> String {
    let (before, after) = (
        text.get(..start).unwrap_or(""),
        text.get(end..).unwrap_or(""),
    );
    format!("{before}{replacement}{after}").trim().to_string()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn numbers_are_read_as_typed() {
        for (text, value) in [
            ("589.592", 589.592),
            ("0,5", 0.5),
            ("1,234", 1.234),
            ("−3", -3.0),
            ("–3", -3.0),
            ("3e-2", 0.03),
            ("3E−2", 0.03),
            ("3×10⁻²", 0.03),
            ("3 · 10^-2", 0.03),
            ("1 234 567,5", 1_234_567.5),
            ("1\u{202F}234\u{A0}567.5", 1_234_567.5),
            ("0.123 456 78", 0.123_456_78),
            (".5", 0.5),
            ("5.", 5.0),
            ("+7", 7.0),
            ("0e-400", 0.0),
        ] {
            assert_eq!(number(text), Ok(value), "{text}");
        }
    }

    #[test]
    fn faults_name_their_place_and_a_way_out() {
        for (text, code, place, way) in [
            ("1,234.5", "decimal-mark-repeated", (0, 7), "1234.5"),
            ("1.234,5", "decimal-mark-repeated", (0, 7), "1234,5"),
            ("1,234,567", "decimal-mark-repeated", (0, 9), "1234567"),
            ("12 34", "digits-grouped-oddly", (0, 5), "1234"),
            ("0.5 3", "digits-grouped-oddly", (0, 5), "0.53"),
            ("1e999", "number-out-of-range", (0, 5), "1"),
            ("-1e-999", "number-out-of-range", (0, 7), "0"),
            ("abc", "number-missing", (0, 3), "1"),
            ("NaN", "number-missing", (0, 3), "1"),
            ("5 x", "number-followed", (2, 3), "5"),
            ("🙂", "number-missing", (0, 4), "1"),
        ] {
            let problem = number(text).unwrap_err();
            assert_eq!(
                (problem.code, problem.start, problem.end),
                (code, place.0, place.1),
                "{text}"
            );
            assert_eq!(
                problem.ways.first().map(|w| w.replacement.as_str()),
                Some(way),
                "{text}"
            );
            assert!(problem.bound.is_some());
        }
        assert_eq!(number("").unwrap_err().code, "value-empty");
        assert_eq!(
            number(&"1".repeat(10_000)).unwrap_err().code,
            "value-too-long"
        );
    }

    #[test]
    fn digits_in_parentheses_are_an_uncertainty() {
        let found = leading("589.592(2) nm").unwrap();
        assert_eq!((found.value, found.uncertainty), (589.592, Some(0.002)));
        assert_eq!(leading("1.50(12)e3").unwrap().uncertainty, Some(120.0));
        assert_eq!(leading("12(3)").unwrap().uncertainty, Some(3.0));
    }
}
