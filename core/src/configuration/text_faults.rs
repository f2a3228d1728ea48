//! The faults of a configuration's text, each with its code, place, bound and ways out.

use super::filling::filling_order;
use super::text::{LONGEST, is_separator};
use super::written::WrittenSubshell;
use super::{MAX_N, Orbital, Subshell, orbital_letter};
use crate::problem::Problem;
use crate::quantity::signs::{clipped, shown_all};

/// One subshell of the text, as far as it could be read.
pub(super) struct Item<'a> {
    pub text: &'a str,
    pub start: usize,
    pub letter_start: usize,
    pub letter_end: usize,
    pub end: usize,
    pub n: &'a str,
    pub letter: &'a str,
    pub electrons: Option<u32>,
}

impl Item<'_> {
    /// The subshell as typed.
    fn typed(&self) -> String {
        clipped(self.text.get(self.start..self.end).unwrap_or(""))
    }

    /// Adds the way out that puts another subshell in this one's place.
    fn way(&self, problem: Problem, subshell: &str) -> Problem {
        way(problem, self.text, self.start, self.end, subshell)
    }
}

/// The whole text with some bytes replaced, set apart from letters and digits beside them.
pub(super) fn replaced(text: &str, start: usize, end: usize, replacement: &str) -> String {
    let before = text
        .get(..start)
        .unwrap_or("")
        .trim_start_matches(is_separator);
    let after = text.get(end..).unwrap_or("").trim_end_matches(is_separator);
    if replacement.is_empty() {
        let before = before.trim_end_matches(is_separator);
        let after = after.trim_start_matches(is_separator);
        let gap = if before.is_empty() || after.is_empty() {
            ""
        } else {
            " "
        };
        return format!("{before}{gap}{after}");
    }
    let left = if before.ends_with(|c: char| c.is_alphanumeric()) {
        " "
    } else {
        ""
    };
    let right = if after.starts_with(|c: char| c.is_alphanumeric()) {
        " "
    } else {
        ""
    };
    format!("{before}{left}{replacement}{right}{after}")
}

pub(super) fn way(
    problem: Problem,
    text: &str,
    start: usize,
    end: usize,
    replacement: &str,
) -> Problem {
    let whole = replaced(text, start, end, replacement);
    if whole.is_empty() {
        // Nothing is left of the text: the smallest configuration there is.
        return if problem.ways.is_empty() {
            problem.way("Use 1s", "1s")
        } else {
            problem
        };
    }
    let label = if replacement.is_empty() {
        format!("Use {whole}")
    } else {
        format!("Use {replacement}")
    };
    problem.way(clipped(&label), whole)
}

pub(super) fn size(text: &str) -> Option<Problem> {
    let length = text.chars().count();
    (length > LONGEST).then(|| {
        let problem = Problem::new(
            "configuration-too-long",
            format!("The configuration has {length} characters."),
            0,
            text.len(),
        )
        .bound(format!("A configuration has at most {LONGEST} characters."));
        // The beginning that is within the bound, cut at a space.
        let kept: String = text.chars().take(LONGEST).collect();
        let kept = kept
            .rsplit_once(char::is_whitespace)
            .map_or("", |(head, _)| head)
            .trim();
        if kept.is_empty() {
            problem
        } else {
            problem.way("Keep the beginning", kept)
        }
    })
}

pub(super) fn empty(text: &str) -> Problem {
    Problem::new(
        "configuration-empty",
        "No configuration is given.",
        0,
        text.len(),
    )
    .bound("At least one subshell, such as 3d6.")
    .way("Use 1s", "1s")
}

pub(super) fn number_alone(text: &str, start: usize, end: usize, digits: &str) -> Problem {
    let number = clipped(digits);
    let mut problem = Problem::new(
        "number-without-letter",
        format!("The number {number} has no orbital letter after it."),
        start,
        end,
    )
    .bound("A subshell is n, a letter and the number of electrons: 3d6.");
    if let Some(n) = digits
        .parse::<u8>()
        .ok()
        .filter(|n| (1..=MAX_N).contains(n))
    {
        problem = way(problem, text, start, end, &format!("{n}s"));
    }
    way(problem, text, start, end, "")
}

pub(super) fn n_out_of_range(
    text: &str,
    start: usize,
    end: usize,
    digits: &str,
    before: &str,
) -> Problem {
    let problem = Problem::new(
        "n-out-of-range",
        format!("n cannot be {}.", clipped(digits)),
        start,
        end,
    )
    .bound(format!(
        "The principal quantum number n is a whole number from 1 to {MAX_N}."
    ));
    let nearest = if digits.trim_matches('0').is_empty() {
        1
    } else {
        MAX_N
    };
    if before.is_empty() {
        // Only the number is replaced; the letter after it stays.
        let whole = format!(
            "{}{nearest}{}",
            text.get(..start).unwrap_or(""),
            text.get(end..).unwrap_or("")
        );
        return problem.way(format!("Use n = {nearest}"), whole);
    }
    way(problem, text, start, end, &format!("{before}{nearest}"))
}

pub(super) fn letter_unknown(item: &Item) -> Problem {
    let letter = clipped(item.letter);
    let mut problem = Problem::new(
        "orbital-letter-unknown",
        format!("There is no orbital letter {letter}."),
        item.letter_start,
        item.letter_end,
    )
    .bound("The letters are s p d f g h i k l m n o q r t u v w x y z, then [21], [22] and so on.");
    let n = item.n.parse::<u8>().unwrap_or(0);
    let electrons = item.electrons.unwrap_or(1);
    for l in (0..n.min(4)).rev() {
        if let Some(subshell) =
            Orbital::new(n, l).and_then(|orbital| Subshell::new(orbital, electrons))
        {
            problem = item.way(problem, &subshell.to_string());
        }
    }
    if problem.ways.is_empty() {
        item.way(problem, "")
    } else {
        problem
    }
}

pub(super) fn letter_capital(item: &Item) -> Problem {
    let small = item.letter.to_ascii_lowercase();
    let whole = format!(
        "{}{small}{}",
        item.text.get(..item.letter_start).unwrap_or(""),
        item.text.get(item.letter_end..).unwrap_or("")
    );
    Problem::new(
        "orbital-letter-capital",
        format!(
            "{} stands for a total L; an orbital has a small letter.",
            item.letter
        ),
        item.letter_start,
        item.letter_end,
    )
    .bound("Orbital letters are small: 3d6.")
    .way(format!("Use {small}"), whole)
}

pub(super) fn n_missing(item: &Item, l: u8) -> Problem {
    let mut problem = Problem::new(
        "n-missing",
        format!("{} has no principal quantum number.", item.typed()),
        item.start,
        item.end,
    )
    .bound(format!(
        "Before {1}, n is a whole number from {0} to {MAX_N}.",
        l.saturating_add(1),
        item.letter
    ));
    let electrons = item.electrons.unwrap_or(1);
    for n in (l.saturating_add(1)..=MAX_N).take(3) {
        if let Some(subshell) =
            Orbital::new(n, l).and_then(|orbital| Subshell::new(orbital, electrons))
        {
            problem = item.way(problem, &subshell.to_string());
        }
    }
    if problem.ways.is_empty() {
        item.way(problem, "")
    } else {
        problem
    }
}

pub(super) fn l_not_below_n(item: &Item, n: u32, l: u8, electrons: u32) -> Problem {
    let letter = orbital_letter(l.into());
    let mut problem = Problem::new(
        "l-not-below-n",
        format!(
            "There is no {}{}: shell {n} ends at {}.",
            item.n,
            item.letter,
            orbital_letter(n.saturating_sub(1))
        ),
        item.start,
        item.letter_end,
    )
    .bound(format!(
        "In every subshell ℓ is less than n; {letter} is ℓ = {l}, so n is at least {}.",
        u32::from(l) + 1
    ));
    let higher = (l < MAX_N).then(|| Orbital::new(l + 1, l)).flatten();
    let lower = u8::try_from(n)
        .ok()
        .and_then(|n| Orbital::new(n, n.checked_sub(1)?));
    for orbital in higher.into_iter().chain(lower) {
        if let Some(subshell) = Subshell::new(orbital, electrons.clamp(1, orbital.capacity())) {
            problem = item.way(problem, &subshell.to_string());
        }
    }
    problem
}

pub(super) fn no_electrons(item: &Item) -> Problem {
    let problem = Problem::new(
        "occupation-zero",
        format!("{} holds no electron.", item.typed()),
        item.start,
        item.end,
    )
    .bound("A subshell that is named holds at least 1 electron.");
    let one = format!("{}{}", item.n, item.letter);
    if replaced(item.text, item.start, item.end, "").is_empty() {
        return item.way(problem, &one);
    }
    item.way(item.way(problem, ""), &one)
}

pub(super) fn over_capacity(item: &Item, orbital: Orbital, before: &[WrittenSubshell]) -> Problem {
    let letter = orbital_letter(orbital.l().into());
    let capacity = orbital.capacity();
    let electrons = item.electrons.unwrap_or(u32::MAX);
    let mut problem = Problem::new(
        "subshell-over-capacity",
        match electrons {
            u32::MAX => format!("{} has far too many electrons.", item.typed()),
            _ => format!("{orbital} cannot hold {electrons} electrons."),
        },
        item.start,
        item.end,
    )
    .bound(format!(
        "{} {letter} subshell holds at most {capacity} electrons.",
        article(&letter)
    ));
    problem = item.way(problem, &format!("{orbital}{capacity}"));
    // The electrons too many go where the next ones would.
    let next = filling_order()
        .skip_while(|&o| o != orbital)
        .skip(1)
        .find(|&o| !before.iter().any(|s| s.subshell.orbital() == o));
    if let Some(next) = next
        && let Some(subshell) = electrons
            .checked_sub(capacity)
            .and_then(|over| Subshell::new(next, over))
        && !item
            .text
            .get(item.end..)
            .unwrap_or("")
            .contains(&next.to_string())
    {
        problem = item.way(problem, &format!("{orbital}{capacity} {subshell}"));
    }
    problem
}

pub(super) fn repeated(item: &Item, earlier: &WrittenSubshell, again: Subshell) -> Problem {
    let orbital = again.orbital();
    let mut problem = Problem::new(
        "subshell-repeated",
        format!("{orbital} is given twice."),
        item.start,
        item.end,
    )
    .bound("Each subshell is named once.");
    let without = replaced(item.text, item.start, item.end, "");
    // The earlier place is still the same in the shortened text: only what follows it moved. What
    // was trimmed at the beginning shifts both.
    let shift = item.text.len() - item.text.trim_start_matches(is_separator).len();
    let (start, end) = (
        earlier.start.saturating_sub(shift),
        earlier.end.saturating_sub(shift),
    );
    let together = earlier
        .subshell
        .electrons()
        .saturating_add(again.electrons());
    if let Some(sum) = Subshell::new(orbital, together) {
        problem = problem.way(
            format!("Use {sum}"),
            replaced(&without, start, end, &sum.to_string()),
        );
    }
    problem
        .way(format!("Keep {}", earlier.subshell), without.clone())
        .way(
            format!("Keep {again}"),
            replaced(&without, start, end, &again.to_string()),
        )
}

pub(super) fn negative(text: &str, item: usize, minus: usize, end: usize, digits: &str) -> Problem {
    let problem = Problem::new(
        "occupation-negative",
        format!("The number of electrons cannot be −{}.", clipped(digits)),
        minus,
        end,
    )
    .bound("A subshell that is named holds at least 1 electron.");
    let orbital = text.get(item..minus).unwrap_or("");
    let problem = way(
        problem,
        text,
        item,
        end,
        &format!("{orbital}{}", clipped(digits)),
    );
    way(problem, text, item, end, "")
}

pub(super) fn fractional(
    text: &str,
    item: usize,
    mark: usize,
    end: usize,
    electrons: u32,
) -> Problem {
    let whole = text.get(item..mark).unwrap_or("");
    let problem = Problem::new(
        "occupation-fraction",
        format!(
            "{} is not a whole number of electrons.",
            clipped(text.get(item..end).unwrap_or(""))
        ),
        item,
        end,
    )
    .bound("Electrons are counted in whole numbers.");
    let problem = way(problem, text, item, end, whole);
    let digits = whole.len() - whole.trim_end_matches(|c: char| c.is_ascii_digit()).len();
    match (whole.get(..whole.len() - digits), electrons.checked_add(1)) {
        (Some(orbital), Some(more)) if digits > 0 => {
            way(problem, text, item, end, &format!("{orbital}{more}"))
        }
        _ => problem,
    }
}

pub(super) fn unexpected(text: &str, start: usize, end: usize) -> Problem {
    let run = text.get(start..end).unwrap_or("");
    let words = if run.starts_with('(') {
        format!("“{}”", clipped(run))
    } else {
        shown_all(run)
    };
    let problem = Problem::new(
        "unexpected-character",
        format!("A configuration has no {words}."),
        start,
        end,
    )
    .bound("A configuration is made of subshells such as 3d6, a core such as [Ar], and spaces or points between them.");
    way(problem, text, start, end, "")
}

fn article(letter: &str) -> &'static str {
    // Spoken letters that begin with a vowel: s, f, h, i, l, m, n, o, r, x.
    if letter.starts_with(['s', 'f', 'h', 'i', 'l', 'm', 'n', 'o', 'r', 'x']) {
        "An"
    } else {
        "A"
    }
}
