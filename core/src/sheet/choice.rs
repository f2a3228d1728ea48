//! Words among which a field of the sheet chooses, and the word that a slip was meant to be.

use crate::elements::distance;
use crate::problem::Problem;
use crate::quantity::Dimension;
use crate::quantity::signs::clipped;

use super::schema::key_of;

/// The named directions in which a field is viewed.
pub const VIEWS: [&str; 2] = ["along", "across"];

/// Where the radial parameters of energies come from.
pub const ENERGIES: [&str; 2] = ["computed", "given"];

/// Where wavelengths are measured.
pub const MEDIA: [&str; 2] = ["air", "vacuum"];

/// What may stand before a detector, beside a linear polariser at an angle.
pub const POLARISERS: [&str; 3] = ["none", "left circular", "right circular"];

/// The choice that a text names, in any case of letters and with spaces around it.
pub fn choice(typed: &str, words: &[&'static str]) -> Option<&'static str> {
    let typed = typed.trim();
    words
        .iter()
        .copied()
        .find(|word| word.eq_ignore_ascii_case(typed))
}

/// A word that is none of the choices; where a quantity may stand too, it is named with them.
pub(super) fn not_a_choice(
    word: &str,
    words: &[&'static str],
    or: Option<Dimension>,
    path: &str,
) -> Problem {
    let choices = match or {
        Some(Dimension::Angle) => format!("{}, or an angle such as 60 deg", words.join(", ")),
        Some(other) => format!("{}, or a value such as {}", words.join(", "), other.usual()),
        None => words.join(", "),
    };
    let mut problem = Problem::new(
        "unknown-choice",
        format!("{} is \"{}\".", key_of(path), clipped(word)),
        0,
        word.encode_utf16().count(),
    )
    .bound(format!("It is one of: {choices}."))
    .at(path);
    let near = nearest(word, words.iter().copied());
    let others = words.iter().copied().filter(|word| Some(*word) != near);
    for choice in near.into_iter().chain(others).take(4) {
        problem = problem.way(format!("Use {choice}"), choice);
    }
    problem
}

/// The known word that takes the fewest changes of a character, if at most half of it changes.
pub fn nearest<'a>(typed: &str, known: impl Iterator<Item = &'a str>) -> Option<&'a str> {
    let typed: Vec<char> = typed
        .chars()
        .take(64)
        .map(|c| c.to_ascii_lowercase())
        .collect();
    known
        .map(|word| (distance(&typed, word), word))
        .min_by_key(|(changes, _)| *changes)
        .filter(|(changes, word)| *changes * 2 <= word.chars().count().max(typed.len()))
        .map(|(_, word)| word)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::sheet::json::read;
    use crate::sheet::schema::SHEET;
    use crate::sheet::schema_check::check;

    #[test]
    fn a_word_like_none_has_no_nearest() {
        assert_eq!(nearest("zzzzzzzz", ["species", "title"].into_iter()), None);
        assert_eq!(
            nearest("speceis", ["species", "title"].into_iter()),
            Some("species")
        );
    }

    #[test]
    fn choices_are_read_in_any_case_and_named_where_unknown() {
        assert_eq!(choice(" Across", &VIEWS), Some("across"));
        let view = |typed: &str| {
            let text = format!(r#"{{"rungline":1,"field":{{"view":"{typed}"}}}}"#);
            let mut faults = Vec::new();
            check(&read(&text).unwrap(), &SHEET, "", &mut faults);
            faults
        };
        for typed in ["Across", "ALONG", "60 deg", "45°"] {
            assert_eq!(view(typed), [], "{typed}");
        }
        let sideways = view("sideways").remove(0);
        assert_eq!(sideways.code, "unknown-choice");
        assert_eq!(
            sideways.bound.as_deref(),
            Some("It is one of: along, across, or an angle such as 60 deg.")
        );
        assert_eq!(sideways.ways.len(), 2);
        for way in sideways.ways {
            assert_eq!(view(&way.replacement), []);
        }
        assert_eq!(view("acros").remove(0).ways[0].replacement, "across");
    }
}
