//! The faults of a species' text, each with its code, place, bound and ways out.

use super::species::{roman, roman_value};
use super::species_text::capitalised;
use crate::elements::{name, nearest, symbol};
use crate::problem::Problem;
use crate::quantity::signs::{clipped, is_minus, shown_all, superscript_digit, superscript_sign};

/// The most characters a species may have.
const LONGEST: usize = 80;

const ELEMENTS: &str =
    "A species is the symbol or English name of an element from 1 to 118, or * for any atom.";

/// A piece of the text: its bytes, and its characters with like signs made one.
#[derive(Clone, Debug)]
pub(super) struct Piece {
    pub start: usize,
    pub end: usize,
    pub text: String,
}

impl Piece {
    fn problem(&self, code: &'static str, message: String) -> Problem {
        Problem::new(code, message, self.start, self.end)
    }

    /// What stands before it, the element.
    fn before<'a>(&self, text: &'a str) -> &'a str {
        text.get(..self.start).unwrap_or("").trim()
    }

    /// The whole text with this piece replaced.
    fn replaced(&self, text: &str, replacement: &str) -> String {
        let (before, after) = (
            text.get(..self.start).unwrap_or(""),
            text.get(self.end..).unwrap_or(""),
        );
        format!("{before}{replacement}{after}").trim().to_string()
    }
}

/// The sign that a character of a species stands for; nothing where none has it.
pub(super) fn plain(c: char) -> Option<char> {
    match c {
        _ if c.is_whitespace() => Some(' '),
        _ if is_minus(c) => Some('-'),
        '+' | '(' | ')' | '^' | '{' | '}' | '*' => Some(c),
        _ if c.is_ascii_alphanumeric() => Some(c),
        _ => superscript_digit(c).or_else(|| superscript_sign(c)),
    }
}

fn using(problem: Problem, text: impl Into<String>) -> Problem {
    let text = text.into();
    problem.way(format!("Use {}", clipped(&text)), text)
}

pub(super) fn size(text: &str) -> Option<Problem> {
    let length = text.chars().count();
    let problem = if text.trim().is_empty() {
        Problem::new("species-empty", "No species is given.", 0, text.len())
            .bound("An element such as Fe, Fe II or iron, or * for any atom.")
    } else if length > LONGEST {
        Problem::new(
            "species-too-long",
            format!("The species has {length} characters."),
            0,
            text.len(),
        )
        .bound(format!("A species has at most {LONGEST} characters."))
    } else {
        return None;
    };
    Some(problem.way("Use any atom", "*"))
}

/// A run of characters that no species has.
pub(super) fn unexpected(text: &str, start: usize, end: usize) -> Problem {
    let problem = Problem::new(
        "species-unexpected-character",
        format!(
            "A species has no {}.",
            shown_all(text.get(start..end).unwrap_or(""))
        ),
        start,
        end,
    )
    .bound("A species is made of Latin letters, digits, + and −, as in Fe II, Fe 2+ or 57Fe.");
    let kept: String = text.chars().filter(|&c| plain(c).is_some()).collect();
    match kept.trim() {
        "" => problem.way("Use any atom", "*"),
        kept => using(problem, kept),
    }
}

pub(super) fn without_element(text: &str, start: usize) -> Problem {
    let message = format!("“{}” names no element.", clipped(text.trim()));
    Problem::new("species-without-element", message, start, text.len())
        .bound(ELEMENTS)
        .way("Use any atom", "*")
}

pub(super) fn any_atom_with_more(text: &str, start: usize) -> Problem {
    let message = "Any atom, *, has no charge and no isotope.";
    Problem::new("species-any-atom-with-more", message, start, text.len())
        .bound("The star stands alone.")
        .way("Use *", "*")
}

pub(super) fn ambiguous(text: &str, letters: &Piece, z: u8, other: u8, numeral: &str) -> Problem {
    let (one, two) = (
        symbol(z).unwrap_or_default(),
        symbol(other).unwrap_or_default(),
    );
    let problem = letters
        .problem(
            "species-ambiguous",
            format!("“{}” may be {one} or {two} {numeral}.", letters.text),
        )
        .bound("A symbol has a capital letter first and small ones after it.");
    let problem = using(problem, letters.replaced(text, one));
    using(problem, letters.replaced(text, &format!("{two} {numeral}")))
}

pub(super) fn element_unknown(text: &str, letters: &Piece) -> Problem {
    let message = format!("There is no element “{}”.", clipped(&letters.text));
    let mut problem = letters.problem("element-unknown", message).bound(ELEMENTS);
    for z in nearest(&letters.text, 3) {
        let (near, called) = (symbol(z).unwrap_or_default(), name(z).unwrap_or_default());
        problem = problem.way(
            format!("Use {near}, {called}"),
            letters.replaced(text, near),
        );
    }
    problem.way("Use any atom", "*")
}

pub(super) fn mass_out_of_range(text: &str, mass: &Piece, z: u8, largest: u16) -> Problem {
    let symbol = symbol(z).unwrap_or_default();
    let before = text
        .get(..mass.start)
        .unwrap_or("")
        .trim_end()
        .trim_end_matches(is_minus);
    let after = text.get(mass.end..).unwrap_or("");
    let without = format!("{before}{after}");
    let message = format!(
        "{} cannot be a mass number of {symbol}.",
        clipped(&mass.text)
    );
    let problem = mass
        .problem("mass-number-out-of-range", message)
        .bound(format!(
            "Mass numbers of {symbol} are taken from {z} to {largest}."
        ));
    using(problem, without.trim())
}

/// `iron(II)` is the ion Fe²⁺ in chemistry, while Fe II is the spectrum of Fe⁺.
pub(super) fn oxidation_number(text: &str, piece: &Piece, numeral: &str) -> Problem {
    let value = roman_value(numeral).unwrap_or(1);
    let upper = numeral.to_ascii_uppercase();
    let before = piece.before(text);
    let problem = piece
        .problem(
            "stage-in-parentheses",
            format!("({upper}) may be a charge of {value}+ or the spectrum {upper}."),
        )
        .bound("A charge is written 2+, a spectrum II without parentheses.");
    using(
        using(problem, format!("{before} {value}+")),
        format!("{before} {upper}"),
    )
}

/// `Fe I II`: one species has one stage.
pub(super) fn several_stages(text: &str, piece: &Piece) -> Problem {
    let mut problem = piece
        .problem(
            "several-stages",
            format!(
                "“{}” is more than one word after the element.",
                clipped(&piece.text)
            ),
        )
        .bound("One Roman numeral or one charge follows the element.");
    let before = piece.before(text);
    for word in piece.text.split_whitespace().take(3) {
        let numeral = word.to_ascii_uppercase();
        let usual = roman_value(&numeral).and_then(roman);
        let whole = format!("{before} {numeral}");
        let known = problem.ways.iter().any(|way| way.replacement == whole);
        if usual.as_deref() == Some(&numeral) && !known && super::species::parse(&whole).is_ok() {
            problem = using(problem, whole);
        }
    }
    using(problem, before)
}

pub(super) fn stage_not_roman(text: &str, piece: &Piece, usual: Option<String>) -> Problem {
    let problem = piece
        .problem(
            "stage-not-roman",
            format!("“{}” is not a Roman numeral.", clipped(&piece.text)),
        )
        .bound("I is the neutral atom, II has lost one electron, and so on.");
    let before = piece.before(text);
    let numerals = usual
        .into_iter()
        .chain(["I".to_string(), "II".to_string()])
        .take(2);
    numerals.fold(problem, |problem, numeral| {
        using(problem, format!("{before} {numeral}"))
    })
}

pub(super) fn charge_unreadable(text: &str, piece: &Piece) -> Problem {
    let problem = piece
        .problem(
            "charge-unreadable",
            format!("“{}” is not a charge.", clipped(&piece.text)),
        )
        .bound("A charge is written 2+, + or II.");
    let before = piece.before(text);
    using(using(problem, before), format!("{before} +"))
}

pub(super) fn charge_without_sign(
    text: &str,
    piece: &Piece,
    digits: &str,
    element: Option<u8>,
) -> Problem {
    let before = piece.before(text);
    let mut problem = piece
        .problem(
            "charge-without-sign",
            format!("{} may be a charge or a spectrum.", clipped(digits)),
        )
        .bound("A charge has a sign (2+), a spectrum a Roman numeral (II).");
    let most = element.map_or(0, u32::from);
    let value = digits.parse::<u32>().ok();
    if value.is_some_and(|value| (1..most).contains(&value)) {
        problem = using(problem, format!("{before} {digits}+"));
    }
    if let Some(numeral) = value.filter(|&value| value <= most).and_then(roman) {
        problem = using(problem, format!("{before} {numeral}"));
    }
    using(problem, before)
}

pub(super) fn charge_out_of_range(text: &str, piece: &Piece, z: u8, charge: i64) -> Problem {
    let symbol = symbol(z).unwrap_or_default();
    let before = piece.before(text);
    let typed = clipped(&piece.text);
    if charge < 0 {
        let problem = piece
            .problem(
                "charge-too-negative",
                format!("{symbol} {typed} has more than one electron too many."),
            )
            .bound("Ions are counted down to a single negative charge.");
        return using(problem, format!("{before}-"));
    }
    let (code, message) = if charge == i64::from(z) {
        (
            "charge-leaves-no-electron",
            format!("{symbol} {typed} is the bare nucleus and has no electron."),
        )
    } else {
        (
            "charge-above-z",
            format!("{symbol} {typed} has lost more electrons than there are."),
        )
    };
    let highest = z.saturating_sub(1);
    let problem = piece.problem(code, message).bound(format!(
        "{} has {}, so {} with one left is {}.",
        capitalised(name(z).unwrap_or_default()),
        if z == 1 {
            "1 electron".to_string()
        } else {
            format!("{z} electrons")
        },
        if highest == 0 {
            "the only stage"
        } else {
            "the highest charge"
        },
        if highest == 0 {
            "the neutral atom".to_string()
        } else {
            format!("{highest}+")
        }
    ));
    let problem = if highest > 0 {
        using(problem, format!("{before} {highest}+"))
    } else {
        problem
    };
    using(problem, format!("{before} I"))
}
