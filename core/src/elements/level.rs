//! Reading the level symbols of published tables, with the ways of writing them that occur there.

use crate::quantity::TwiceJ;

const TOTAL_LETTERS: &str = "SPDFGHIKLMNOQRTUVWXYZ";

/// An LS term: multiplicity 2S + 1, L, parity.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct TermSymbol {
    /// 2S + 1.
    pub multiplicity: u32,
    /// L.
    pub total_l: u32,
    /// Odd parity.
    pub odd: bool,
}

/// ASCII with the table's sign of odd parity: `3P`, `2P*`.
impl std::fmt::Display for TermSymbol {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        let letter = usize::try_from(self.total_l)
            .ok()
            .and_then(|l| TOTAL_LETTERS.chars().nth(l));
        write!(
            f,
            "{}{}{}",
            self.multiplicity,
            letter.unwrap_or('?'),
            if self.odd { "*" } else { "" }
        )
    }
}

/// What a table says of a level; parts it leaves out are absent.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct LevelSymbol {
    /// The LS term, where the level is named so.
    pub term: Option<TermSymbol>,
    /// The j values of a jj name, such as `0,3/2` of `(0,3/2)*<3/2>`.
    pub jj: Option<String>,
    /// Whether the table marks odd parity.
    pub odd: bool,
    /// J.
    pub j: Option<TwiceJ>,
}

/// Reads a level symbol tolerantly: `2S<1/2>`, `1S0`, `3F<2.000>`, `3P10` (index 1, J = 0),
/// `5D     0`, `(0,3/2)*<3/2>`, `<5/2>`, `*<3/2>`, `0`, `*` or nothing.
///
/// Odd parity is a `*`. Nothing is returned when a part is left that cannot be read.
pub fn read_level(text: &str) -> Option<LevelSymbol> {
    let compact: String = text.chars().filter(|c| !c.is_whitespace()).collect();
    let odd = compact.contains('*');
    let mut level = LevelSymbol {
        term: None,
        jj: None,
        odd,
        j: None,
    };
    let rest = if let Some(inside) = compact.strip_prefix('(') {
        let (jj, rest) = inside.split_once(')')?;
        level.jj = Some(jj.to_string());
        rest
    } else if let Some((multiplicity, total_l, rest)) = leading_term(&compact) {
        level.term = Some(TermSymbol {
            multiplicity,
            total_l,
            odd,
        });
        rest
    } else {
        &compact
    };
    let rest = rest.strip_prefix('*').unwrap_or(rest);
    level.j = match rest.strip_prefix('<') {
        Some(inside) => Some(angular_momentum(inside.strip_suffix('>')?)?),
        None if rest.is_empty() => None,
        None => Some(bare_j(rest, level.term)?),
    };
    Some(level)
}

/// The multiplicity and L at the beginning, and what follows.
fn leading_term(text: &str) -> Option<(u32, u32, &str)> {
    let digits = text.find(|c: char| !c.is_ascii_digit())?;
    let multiplicity = text.get(..digits)?.parse().ok()?;
    let letter = text.get(digits..)?.chars().next()?;
    let total_l = u32::try_from(TOTAL_LETTERS.find(letter)?).ok()?;
    Some((
        multiplicity,
        total_l,
        text.get(digits + letter.len_utf8()..)?,
    ))
}

/// A J without brackets. Where the whole number is beyond L + S, its first digits are the term's
/// running index and the last is J.
fn bare_j(text: &str, term: Option<TermSymbol>) -> Option<TwiceJ> {
    let whole = angular_momentum(text)?;
    let Some(term) = term else { return Some(whole) };
    let largest = i64::from(term.multiplicity) - 1 + 2 * i64::from(term.total_l);
    if i64::from(whole.doubled()) <= largest {
        return Some(whole);
    }
    let last = text.char_indices().next_back()?.0;
    angular_momentum(text.get(last..)?)
}

/// `2`, `3/2`, `2.000`.
fn angular_momentum(text: &str) -> Option<TwiceJ> {
    let plain = |text: &str| -> Option<i32> {
        (text.len() <= 4 && text.bytes().all(|b| b.is_ascii_digit())).then(|| text.parse().ok())?
    };
    if let Some(numerator) = text.strip_suffix("/2") {
        return plain(numerator).map(TwiceJ::from_doubled);
    }
    let (whole, fraction) = text.split_once('.').unwrap_or((text, ""));
    let half = match fraction.trim_end_matches('0') {
        "" => 0,
        "5" => 1,
        _ => return None,
    };
    Some(TwiceJ::from_doubled(
        plain(whole)?.checked_mul(2)?.checked_add(half)?,
    ))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn read(text: &str) -> (String, Option<String>, bool, String) {
        let level = read_level(text).unwrap();
        (
            level.term.map_or(String::new(), |term| term.to_string()),
            level.jj,
            level.odd,
            level.j.map_or(String::new(), |j| j.to_string()),
        )
    }

    #[test]
    fn every_way_of_writing_is_read() {
        let ls = |term: &str, j: &str| (term.to_string(), None, term.ends_with('*'), j.to_string());
        assert_eq!(read("2S<1/2>"), ls("2S", "1/2"));
        assert_eq!(read("1S0"), ls("1S", "0"));
        assert_eq!(read("3F<2.000>"), ls("3F", "2"));
        assert_eq!(read("3P10"), ls("3P", "0"));
        assert_eq!(read("5D     0"), ls("5D", "0"));
        assert_eq!(read("4I*<9/2>"), ls("4I*", "9/2"));
        assert_eq!(
            read("(0,3/2)*<3/2>"),
            (String::new(), Some("0,3/2".into()), true, "3/2".into())
        );
        assert_eq!(
            read("(1/2,1/2)0"),
            (String::new(), Some("1/2,1/2".into()), false, "0".into())
        );
        assert_eq!(read("<5/2>"), ls("", "5/2"));
        assert_eq!(read("*<3/2>"), (String::new(), None, true, "3/2".into()));
        assert_eq!(read("*"), (String::new(), None, true, String::new()));
        assert_eq!(read(""), ls("", ""));
        assert_eq!(read_level("(1/2"), None);
        assert_eq!(read_level("3P<x>"), None);
        assert_eq!(read_level("iron"), None);
    }
}
