//! A term ²ˢ⁺¹L and a level ²ˢ⁺¹L_J.

use crate::configuration::total_letter;
use crate::quantity::TwiceJ;
use std::cmp::Ordering;
use std::fmt;

/// A term ²ˢ⁺¹L, without the parity, which is that of its configuration.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub struct Term {
    /// 2S.
    pub two_s: u32,
    /// L.
    pub l: u32,
}

impl Term {
    /// The term of closed shells.
    pub const SINGLET_S: Term = Term { two_s: 0, l: 0 };

    /// The multiplicity 2S + 1.
    pub fn multiplicity(self) -> u32 {
        self.two_s.saturating_add(1)
    }

    /// S.
    pub fn spin(self) -> TwiceJ {
        TwiceJ::from_doubled(i32::try_from(self.two_s).unwrap_or(i32::MAX))
    }

    /// Its J, rising: |L − S| … L + S.
    pub fn levels(self) -> impl Iterator<Item = TwiceJ> {
        let two_l = self.l.saturating_mul(2);
        let highest = two_l.saturating_add(self.two_s);
        (two_l.abs_diff(self.two_s)..=highest)
            .step_by(2)
            .map(|two_j| TwiceJ::from_doubled(i32::try_from(two_j).unwrap_or(i32::MAX)))
    }

    /// Whether J is one of its levels.
    pub fn has(self, j: TwiceJ) -> bool {
        let two_l = self.l.saturating_mul(2);
        u32::try_from(j.doubled()).is_ok_and(|two_j| {
            (two_l.abs_diff(self.two_s)..=two_l.saturating_add(self.two_s)).contains(&two_j)
                && two_j % 2 == self.two_s % 2
        })
    }

    /// How many levels it has: the smaller of 2S + 1 and 2L + 1.
    pub fn level_count(self) -> u32 {
        self.multiplicity()
            .min(self.l.saturating_mul(2).saturating_add(1))
    }

    /// How many states it has: (2S + 1)(2L + 1).
    pub fn states(self) -> u64 {
        u64::from(self.multiplicity())
            .saturating_mul(u64::from(self.l).saturating_mul(2).saturating_add(1))
    }

    /// Terms that two terms couple to, in the order of [`Term`]: |S₁ − S₂| … S₁ + S₂, |L₁ − L₂| … L₁ + L₂.
    pub fn coupled_to(self, other: Term) -> impl Iterator<Item = Term> {
        let spins = (self.two_s.abs_diff(other.two_s)..=self.two_s.saturating_add(other.two_s))
            .rev()
            .step_by(2);
        spins.flat_map(move |two_s| {
            (self.l.abs_diff(other.l)..=self.l.saturating_add(other.l))
                .rev()
                .map(move |l| Term { two_s, l })
        })
    }
}

/// Largest multiplicity first, then largest L: the order of Hund's first two rules.
impl Ord for Term {
    fn cmp(&self, other: &Self) -> Ordering {
        (other.two_s, other.l).cmp(&(self.two_s, self.l))
    }
}

impl PartialOrd for Term {
    fn partial_cmp(&self, other: &Self) -> Option<Ordering> {
        Some(self.cmp(other))
    }
}

/// Bare ASCII: `5D`.
impl fmt::Display for Term {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{}{}", self.multiplicity(), total_letter(self.l))
    }
}

/// A level ²ˢ⁺¹L_J of a configuration.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct Level {
    /// The term.
    pub term: Term,
    /// Which one, from 1, where that term occurs more than once; otherwise nothing.
    pub index: Option<u128>,
    /// J.
    pub j: TwiceJ,
}

/// `2D5/2 #2`.
impl fmt::Display for Level {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{}{}", self.term, self.j)?;
        match self.index {
            Some(index) => write!(f, " #{index}"),
            None => Ok(()),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn levels_run_from_the_difference_to_the_sum() {
        let quintet_d = Term { two_s: 4, l: 2 };
        let j: Vec<String> = quintet_d.levels().map(|j| j.to_string()).collect();
        assert_eq!(j, ["0", "1", "2", "3", "4"]);
        assert_eq!(quintet_d.level_count(), 5);
        assert_eq!(quintet_d.states(), 25);
        assert!(quintet_d.has(TwiceJ::from_doubled(8)));
        assert!(!quintet_d.has(TwiceJ::from_doubled(7)));
        assert!(!quintet_d.has(TwiceJ::from_doubled(10)));
        assert!(!quintet_d.has(TwiceJ::from_doubled(-2)));
    }

    #[test]
    fn terms_are_ordered_by_multiplicity_then_l() {
        let coupled: Vec<String> = Term { two_s: 1, l: 1 }
            .coupled_to(Term { two_s: 1, l: 1 })
            .map(|t| t.to_string())
            .collect();
        assert_eq!(coupled, ["3D", "3P", "3S", "1D", "1P", "1S"]);
    }
}
