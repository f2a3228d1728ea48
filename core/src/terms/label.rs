//! Names of levels: `3p 2P1/2`, `3d3 2D5/2 #2`.
//!
//! A name is the configuration's text, the term with J, and ` #k` where the term occurs more than
//! once in the configuration. Reading also takes the typeset forms: raised and lowered digits, and
//! a parity mark (`*`, `°`, `o`) after the letter.

use super::term::{Level, Term};
use crate::configuration::l_of_letter;
use crate::problem::Problem;
use crate::quantity::TwiceJ;

/// The longest name that is read, in bytes.
pub const MAX_LENGTH: usize = 2000;

/// The largest multiplicity and the largest L that a name may have.
pub const MAX_MULTIPLICITY: u32 = 1000;
/// See [`MAX_MULTIPLICITY`].
pub const MAX_L: u32 = 5000;

/// A name taken apart.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Label<'a> {
    /// The text of the configuration as typed, trimmed; may be empty.
    pub configuration: &'a str,
    /// Its first byte in the name.
    pub configuration_start: usize,
    /// The level.
    pub level: Level,
    /// The first byte of the term in the name, for faults about the level.
    pub level_start: usize,
    /// The parity mark, where one was typed: odd.
    pub marked_odd: bool,
}

/// The name of a level.
pub fn format(configuration: &str, level: &Level) -> String {
    if configuration.is_empty() {
        level.to_string()
    } else {
        format!("{configuration} {level}")
    }
}

/// Reads a name.
///
/// Errors, each with its bytes: `level-too-long`, `level-without-term`, `level-unknown-letter`,
/// `level-without-j`, `level-j-impossible`, `level-bad-index`.
pub fn parse(text: &str) -> Result<Label<'_>, Problem> {
    parse_plainly(text).map_err(|problem| {
        let slip = matches!(problem.code, "level-without-term" | "level-unknown-letter");
        if !slip || !problem.ways.is_empty() {
            return problem;
        }
        meant(text).into_iter().fold(problem, |problem, name| {
            problem.way(format!("Use {name}"), name)
        })
    })
}

/// Names that a text with a slip may mean; each can be read.
fn meant(text: &str) -> Vec<String> {
    let trimmed = text.trim();
    let (name, number) = match trimmed.rfind('#') {
        Some(at) => (
            trimmed.get(..at).unwrap_or_default().trim_end(),
            trimmed.get(at..).unwrap_or_default(),
        ),
        None => (trimmed, ""),
    };
    let (configuration, last) = name.rsplit_once(char::is_whitespace).unwrap_or(("", name));
    // A space inside the term, a small letter of L, no space before the term.
    let joined = format!("{}{last}", configuration.trim_end());
    let capital = format!("{configuration} {}", last.to_ascii_uppercase());
    let apart = last
        .find(|c: char| c.is_ascii_uppercase())
        .and_then(|at| last.get(..at))
        .and_then(|before| before.char_indices().next_back())
        .and_then(|(at, _)| Some((last.get(..at)?, last.get(at..)?)))
        .map(|(before, term)| format!("{configuration} {before} {term}"));
    let mut names = Vec::new();
    for candidate in [Some(capital), Some(joined), apart].into_iter().flatten() {
        let whole = format!("{} {number}", candidate.trim());
        let whole = whole.trim().to_owned();
        if parse_plainly(&whole).is_ok() && !names.contains(&whole) {
            names.push(whole);
        }
    }
    names
}

fn parse_plainly(text: &str) -> Result<Label<'_>, Problem> {
    if text.len() > MAX_LENGTH {
        return Err(Problem::new(
            "level-too-long",
            format!("The level name has {} bytes.", text.len()),
            0,
            text.len(),
        )
        .bound(format!("A level name has at most {MAX_LENGTH} bytes.")));
    }
    let (before_index, index) = split_index(text)?;
    let body = before_index.trim_end();
    let start = body
        .char_indices()
        .rev()
        .find(|(_, c)| c.is_whitespace())
        .map_or(0, |(i, c)| i + c.len_utf8());
    let start = start + raised_multiplicity(body.get(start..).unwrap_or_default());
    let written = body.get(start..).unwrap_or_default();
    let configuration = body.get(..start).unwrap_or_default();
    if written.is_empty() {
        return Err(Problem::new(
            "level-without-term",
            "A level name ends with a term and J, and none stands here.",
            0,
            text.len(),
        )
        .bound("A name is written like 3p 2P1/2."));
    }
    let (term, j, marked_odd) = read_term(text, written, start)?;
    let leading = configuration.len() - configuration.trim_start().len();
    Ok(Label {
        configuration: configuration.trim(),
        configuration_start: leading,
        level: Level { term, index, j },
        level_start: start,
        marked_odd,
    })
}

/// The first byte of a raised multiplicity that follows the configuration directly: `3p²P3/2`,
/// `3d⁶⁵D4`; 0 where none does.
///
/// Directly after an orbital letter, all raised digits but the last are the occupation.
fn raised_multiplicity(word: &str) -> usize {
    let is_raised =
        |c: char| !c.is_ascii_digit() && !('₀'..='₉').contains(&c) && plain_digit(c).is_some();
    let Some(letter) = word.find(|c: char| c.is_ascii_uppercase()) else {
        return 0;
    };
    let before = word.get(..letter).unwrap_or_default();
    let configuration = before.trim_end_matches(is_raised);
    let raised = before.get(configuration.len()..).unwrap_or_default();
    let last = raised.char_indices().next_back().map_or(0, |(at, _)| at);
    match configuration.chars().next_back() {
        None => 0,
        Some(_) if raised.is_empty() => 0,
        Some(c) if c.is_ascii_lowercase() => configuration.len() + last,
        Some(_) => configuration.len(),
    }
}

/// Takes ` #k` off the end.
fn split_index(text: &str) -> Result<(&str, Option<u128>), Problem> {
    let Some(at) = text.rfind('#') else {
        return Ok((text, None));
    };
    let before = text.get(..at).unwrap_or_default();
    let digits = text.get(at + 1..).unwrap_or_default().trim();
    let number = digits
        .bytes()
        .all(|b| b.is_ascii_digit())
        .then(|| digits.parse::<u128>());
    match number {
        Some(Ok(k)) if k > 0 => Ok((before, Some(k))),
        _ => {
            let fault = Problem::new(
                "level-bad-index",
                format!("\"#{digits}\" does not number a repeated term."),
                at,
                text.len(),
            )
            .bound("Behind # stands a whole number from 1.");
            // A way out only where the rest can be read.
            let rest_is_read = !before.contains('#') && parse_plainly(before).is_ok();
            Err(if rest_is_read {
                fault.way("Use #1", format!("{before}#1"))
            } else {
                fault
            })
        }
    }
}

/// Reads `2P*1/2`, the whole of `written`, which starts at byte `start` of `text`.
fn read_term(text: &str, written: &str, start: usize) -> Result<(Term, TwiceJ, bool), Problem> {
    let end = start + written.len();
    let fault = |code, message: String, from: usize| Problem::new(code, message, from, end);
    let letter_at = written
        .find(|c| plain_digit(c).is_none())
        .unwrap_or(written.len());
    let multiplicity = whole_number(written.get(..letter_at).unwrap_or_default());
    let rest = written.get(letter_at..).unwrap_or_default();
    let multiplicity = match multiplicity {
        Some(m) if (1..=MAX_MULTIPLICITY).contains(&m) => m,
        _ => {
            return Err(fault(
                "level-without-term",
                format!(
                    "\"{written}\" is not a term with J: it has to begin with the multiplicity."
                ),
                start,
            )
            .bound(format!(
                "A term is a multiplicity from 1 to {MAX_MULTIPLICITY}, a letter and J, as in 2P1/2."
            )));
        }
    };
    let (l, after_letter) = read_letter(rest).ok_or_else(|| {
        fault(
            "level-unknown-letter",
            format!("\"{written}\" has no capital letter of L after the multiplicity."),
            start + letter_at,
        )
        .bound("The letters are the capitals S P D F G H I K L M N O Q R T U V W X Y Z, then [21], [22] and so on.")
    })?;
    let unmarked = after_letter
        .strip_prefix(PARITY_MARKS)
        .unwrap_or(after_letter);
    let number = unmarked.strip_suffix(PARITY_MARKS).unwrap_or(unmarked);
    let marked_odd = number.len() != after_letter.len();
    let term = Term {
        two_s: multiplicity - 1,
        l,
    };
    let allowed: Vec<String> = term.levels().take(12).map(|j| j.to_string()).collect();
    let bound = format!("{term} has J = {}.", allowed.join(", "));
    let stem = text.get(..end - unmarked.len()).unwrap_or_default();
    let tail = text.get(end..).unwrap_or_default();
    let with_ways = |mut problem: Problem| {
        for j in allowed.iter().take(6) {
            problem = problem.way(format!("Use J = {j}"), format!("{stem}{j}{tail}"));
        }
        problem.bound(bound.clone())
    };
    if unmarked.is_empty() {
        return Err(with_ways(fault(
            "level-without-j",
            format!("\"{written}\" names a term; a level also needs its J."),
            start,
        )));
    }
    match half_integer(number) {
        Some(j) if term.has(j) => Ok((term, j, marked_odd)),
        _ => Err(with_ways(fault(
            "level-j-impossible",
            format!("{term} has no level J = {unmarked}."),
            end - unmarked.len(),
        ))),
    }
}

/// The marks of odd parity, after the letter or after J.
const PARITY_MARKS: [char; 4] = ['*', '°', 'o', 'º'];

/// L and what follows its letter.
fn read_letter(text: &str) -> Option<(u32, &str)> {
    if let Some(inside) = text.strip_prefix('[') {
        let (number, after) = inside.split_once(']')?;
        return whole_number(number)
            .filter(|l| (21..=MAX_L).contains(l))
            .map(|l| (l, after));
    }
    let letter = text.chars().next().filter(char::is_ascii_uppercase)?;
    let l = l_of_letter(letter.to_ascii_lowercase())?;
    Some((u32::from(l), text.get(1..)?))
}

/// A digit of the line, raised or lowered.
fn plain_digit(c: char) -> Option<u32> {
    const RAISED: [char; 10] = ['⁰', '¹', '²', '³', '⁴', '⁵', '⁶', '⁷', '⁸', '⁹'];
    let found = match c {
        '₀'..='₉' => Some(u32::from(c) - u32::from('₀')),
        _ => RAISED
            .iter()
            .position(|&r| r == c)
            .and_then(|i| u32::try_from(i).ok()),
    };
    found.or_else(|| c.to_digit(10))
}

fn whole_number(text: &str) -> Option<u32> {
    if text.is_empty() {
        return None;
    }
    text.chars().try_fold(0_u32, |n, c| {
        n.checked_mul(10)?.checked_add(plain_digit(c)?)
    })
}

/// `2`, `3/2`, also with a raised or lowered slash.
fn half_integer(text: &str) -> Option<TwiceJ> {
    let doubled = match text.split_once(['/', '⁄', '∕', '⸝']) {
        Some((numerator, denominator)) => {
            let odd = whole_number(numerator).filter(|n| n % 2 == 1)?;
            (whole_number(denominator)? == 2).then_some(odd)?
        }
        None => whole_number(text)?.checked_mul(2)?,
    };
    i32::try_from(doubled).ok().map(TwiceJ::from_doubled)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn code(text: &str) -> (&'static str, usize, usize) {
        let problem = parse(text).unwrap_err();
        (problem.code, problem.start, problem.end)
    }

    #[test]
    fn names_are_read_back_as_they_were_made() {
        for text in [
            "3p 2P1/2",
            "3d3 2D5/2 #2",
            "3d6 4s2 5D4",
            "4f7 5d2 11[21]26",
            "1S0",
            "3p 4S3/2",
        ] {
            let label = parse(text).unwrap();
            assert_eq!(format(label.configuration, &label.level), text);
        }
        let label = parse(" 3d6 4s2   5D4 ").unwrap();
        assert_eq!(
            (label.configuration, label.configuration_start),
            ("3d6 4s2", 1)
        );
        assert_eq!(label.level_start, 11);
    }

    #[test]
    fn typeset_names_are_read() {
        let label = parse("3p ²P°₃⸝₂").unwrap();
        assert_eq!(label.level.to_string(), "2P3/2");
        assert!(label.marked_odd);
        assert!(parse("3p 2P*3/2").unwrap().marked_odd);
        assert!(!parse("3p 2P3/2").unwrap().marked_odd);
    }

    #[test]
    fn marks_and_raised_multiplicities_stand_where_people_put_them() {
        for (text, configuration, level, odd) in [
            ("3p²P3/2", "3p", "2P3/2", false),
            ("3p²P°₃⸝₂", "3p", "2P3/2", true),
            ("3d⁶⁵D4", "3d⁶", "5D4", false),
            ("3d6⁵D4", "3d6", "5D4", false),
            ("3d⁶ 4s²⁵D4", "3d⁶ 4s²", "5D4", false),
            ("3p 2P3/2°", "3p", "2P3/2", true),
            ("3p 2P°3/2", "3p", "2P3/2", true),
            ("²P3/2", "", "2P3/2", false),
        ] {
            let label = parse(text).unwrap();
            assert_eq!(
                (
                    label.configuration,
                    label.level.to_string().as_str(),
                    label.marked_odd
                ),
                (configuration, level, odd),
                "{text}"
            );
        }
    }

    #[test]
    fn slips_lead_to_the_name_that_is_meant() {
        for (text, name) in [
            ("3p 2p3/2", "3p 2P3/2"),
            ("3p 2P 3/2", "3p 2P3/2"),
            ("3p2P3/2", "3p 2P3/2"),
            ("3d3 2d5/2 #2", "3d3 2D5/2 #2"),
        ] {
            let problem = parse(text).unwrap_err();
            assert_eq!(problem.ways[0].replacement, name, "{text}");
        }
    }

    #[test]
    fn every_fault_points_at_its_bytes() {
        assert_eq!(code(""), ("level-without-term", 0, 0));
        assert_eq!(code("3p 2P"), ("level-without-j", 3, 5));
        assert_eq!(code("3p 2P5/2"), ("level-j-impossible", 5, 8));
        assert_eq!(code("3p 2P1"), ("level-j-impossible", 5, 6));
        assert_eq!(code("3p 2J1"), ("level-unknown-letter", 4, 6));
        assert_eq!(code("3p P1/2"), ("level-without-term", 3, 7));
        assert_eq!(code("3p 0P1/2"), ("level-without-term", 3, 8));
        assert_eq!(code("3d3 2D5/2 #0"), ("level-bad-index", 10, 12));
        assert_eq!(code("3d3 2D5/2 #x"), ("level-bad-index", 10, 12));
        assert_eq!(code("🙂 2P"), ("level-without-j", 5, 7));
        assert_eq!(code(&"9".repeat(3000)).0, "level-too-long");
        assert_eq!(code(&"9".repeat(300)).0, "level-without-term");
    }

    #[test]
    fn a_way_out_is_a_name_that_can_be_read() {
        for text in ["3p 2P", "3p 2P5/2", "3d3 2D #2", "3d3 2D5/2 #"] {
            for way in parse(text).unwrap_err().ways {
                assert!(parse(&way.replacement).is_ok(), "{}", way.replacement);
            }
        }
    }
}
