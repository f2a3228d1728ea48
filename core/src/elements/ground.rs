//! Ground configurations and levels of atoms and ions, from a published table.
//!
//! Source: mendeleev 1.3.0 (MIT), tables of ionisation energies and of elements; see
//! `core/data/NOTICE`. `core/data/generate.py` describes the format of the data file.

use crate::numerics::order::sort;
use std::fmt;
use std::sync::LazyLock;

use super::level::{LevelSymbol, read_level};
use super::names::by_symbol;

const DATA: &str = include_str!("../../data/ground_levels.txt");

/// The lines of the data, found once: they are looked up at every keystroke.
struct Table {
    codes: Vec<&'static str>,
    runs: Vec<&'static str>,
}

static TABLE: LazyLock<Table> = LazyLock::new(|| {
    let mut lines = DATA.lines();
    let codes = lines.next().unwrap_or("").split(' ').collect();
    Table {
        codes,
        runs: lines.collect(),
    }
});

/// Letters of ℓ that occur in ground configurations.
const LETTERS: &str = "spdf";

/// Neutral atoms whose tabulated configuration is an extrapolation that another table contradicts:
/// Ds (6d9 7s there, 6d8 7s2 in a second table) and Rg (6d10 7s, 6d9 7s2).
pub const DOUBTFUL_NEUTRALS: [u8; 2] = [110, 111];

/// How an entry of the table came about, by the table's own flags.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Status {
    /// From measurements.
    Measured,
    /// Interpolated or fitted along a sequence.
    SemiEmpirical,
    /// Calculated.
    Theoretical,
    /// Continued from lighter elements; nothing was measured or calculated for this entry.
    Extrapolated,
}

/// `measured`, `semi-empirical`, `theoretical`, `extrapolated`.
impl fmt::Display for Status {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(match self {
            Status::Measured => "measured",
            Status::SemiEmpirical => "semi-empirical",
            Status::Theoretical => "theoretical",
            Status::Extrapolated => "extrapolated",
        })
    }
}

/// The tabulated ground state of one atom or ion.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct ObservedGround {
    /// Atomic number.
    pub z: u8,
    /// Charge.
    pub charge: i32,
    /// As the table writes it: `[Ar].3d6.4s2`.
    pub written: &'static str,
    /// Every subshell (n, ℓ, electrons), cores written out, by n, then ℓ.
    pub subshells: Vec<(u8, u8, u32)>,
    /// The level, as far as the table names it.
    pub level: LevelSymbol,
    /// How the entry came about.
    pub status: Status,
    /// The table's codes of its references.
    pub references: Vec<&'static str>,
}

impl ObservedGround {
    /// Whether the entry is an extrapolation that another table contradicts.
    pub fn is_doubtful(&self) -> bool {
        self.charge == 0 && DOUBTFUL_NEUTRALS.contains(&self.z)
    }

    /// The status in words: `measured`, …; `extrapolated, doubtful` for [`DOUBTFUL_NEUTRALS`].
    pub fn status_text(&self) -> String {
        if self.is_doubtful() {
            format!("{}, doubtful", self.status)
        } else {
            self.status.to_string()
        }
    }

    /// The source to be shown beside the entry.
    pub fn source(&self) -> String {
        if self.references.is_empty() {
            "table of elements (see Sources under Settings)".to_string()
        } else {
            format!(
                "table of ground levels, reference {} (see Sources under Settings)",
                self.references.join(", ")
            )
        }
    }
}

/// The tabulated ground configuration and level of element Z with a charge, where there is one.
///
/// Z = 1…103: every stage from the neutral atom to the one-electron ion; 104…110 some; the neutral
/// atoms up to 118 have a configuration without a level.
pub fn observed_ground(z: u8, charge: i32) -> Option<ObservedGround> {
    let electrons = i32::from(z)
        .checked_sub(charge)
        .filter(|n| (1..=i32::from(z)).contains(n))?;
    let wanted = electrons.to_string();
    // Every sequence has its four lines, so the place is known.
    let first = usize::try_from(electrons - 1).ok()?.checked_mul(4)?;
    let mut own = TABLE.runs.get(first..)?.iter();
    let mut track = |name: &str| -> Option<&'static str> {
        let mut parts = own.next()?.split('|');
        (parts.next()? == wanted && parts.next()? == name).then_some(())?;
        value_at(parts.next()?, z)
    };
    let written = track("c")?;
    let level = track("l")?;
    let status = track("s")?;
    let references = track("r")?;
    Some(ObservedGround {
        z,
        charge,
        written,
        subshells: subshells(written)?,
        level: read_level(if level == "." { "" } else { level })?,
        status: match status {
            "m" => Status::Measured,
            "s" => Status::SemiEmpirical,
            "t" => Status::Theoretical,
            _ => Status::Extrapolated,
        },
        references: references
            .split(',')
            .filter_map(|number| TABLE.codes.get(number.parse::<usize>().ok()?).copied())
            .collect(),
    })
}

/// The value of the last run that begins at or below Z.
fn value_at(runs: &'static str, z: u8) -> Option<&'static str> {
    let mut value = None;
    for run in runs.split(' ') {
        let (from, text) = run.split_once(':')?;
        if from.parse::<u8>().ok()? > z {
            break;
        }
        value = Some(text);
    }
    value.filter(|&text| text != "-")
}

/// Writes out `[Ar].3d6.4s2`; a core in brackets is the ground configuration of that neutral atom.
fn subshells(written: &str) -> Option<Vec<(u8, u8, u32)>> {
    let mut all: Vec<(u8, u8, u32)> = Vec::new();
    for word in written.split('.') {
        if let Some(core) = word.strip_prefix('[') {
            let z = by_symbol(core.strip_suffix(']')?)?;
            all.extend(observed_ground(z, 0)?.subshells);
        } else {
            let letter = word.find(|c: char| c.is_ascii_alphabetic())?;
            let n = word.get(..letter)?.parse().ok()?;
            let l = u8::try_from(LETTERS.find(word.get(letter..letter + 1)?)?).ok()?;
            let electrons = match word.get(letter + 1..)? {
                "" => 1,
                digits => digits.parse().ok()?,
            };
            all.push((n, l, electrons));
        }
    }
    sort(&mut all);
    Some(all)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn iron_is_found_with_its_source() {
        let iron = observed_ground(26, 0).unwrap();
        assert_eq!(iron.written, "[Ar].3d6.4s2");
        assert_eq!(iron.subshells.iter().map(|s| s.2).sum::<u32>(), 26);
        assert_eq!(iron.level.term.unwrap().to_string(), "5D");
        assert_eq!(iron.level.j.unwrap().to_string(), "4");
        assert_eq!(iron.status, Status::Measured);
        assert!(
            iron.source()
                .starts_with("table of ground levels, reference ")
        );
    }

    #[test]
    fn what_is_not_tabulated_is_absent() {
        assert_eq!(observed_ground(26, 26), None);
        assert_eq!(observed_ground(26, -1), None);
        assert_eq!(observed_ground(0, 0), None);
        assert_eq!(observed_ground(119, 0), None);
        assert_eq!(observed_ground(118, 3), None);
        assert_eq!(observed_ground(26, i32::MIN), None);
    }

    #[test]
    fn extrapolations_say_so() {
        assert_eq!(
            observed_ground(110, 0).unwrap().status_text(),
            "extrapolated, doubtful"
        );
        assert_eq!(
            observed_ground(118, 0).unwrap().status_text(),
            "extrapolated"
        );
    }
}
