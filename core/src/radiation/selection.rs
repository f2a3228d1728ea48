//! For every pair of levels and every multipole: allowed, or refused by which rule.
//!
//! The rules are asked in a fixed order, rigorous ones first (parity, change of J, sum of J), then
//! those of pure configurations (one electron moves, its ℓ), of pure LS coupling (S, L, one term
//! for M1) and of unmixed coupling chains (other shells keep their terms). The first that refuses
//! decides. At last the strength itself is asked, whose 6j symbol may vanish between two J.

use super::chain_rules::Shells;
use super::strengths::orbital_share;
use super::{Multipole, Rule};
use crate::configuration::{Orbital, Subshell};
use crate::numerics::sorted_map::SortedMap;
use crate::problem::Problem;
use crate::quantity::TwiceJ;
use crate::terms::chains::Chain;
use crate::terms::{Term, is_odd};

/// A term of a configuration: one kind of it, where it occurs more than once.
#[derive(Clone, Copy, Debug)]
pub struct TermOf<'a> {
    /// The term.
    pub term: Term,
    /// Its running index, where it occurs more than once.
    pub index: Option<u128>,
    /// How its shells couple; without it the rules on the shells' own terms are not asked.
    pub chain: Option<&'a Chain>,
}

/// What is said about one pair of levels and one multipole.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Verdict {
    /// The radiation.
    pub multipole: Multipole,
    /// The rule that refuses; none if the transition is allowed.
    pub refused_by: Option<Rule>,
}

/// How two configurations differ.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Jump {
    /// They are one configuration.
    None,
    /// One electron is elsewhere.
    One {
        /// Its orbital in the upper configuration.
        upper: Orbital,
        /// Its orbital in the lower configuration.
        lower: Orbital,
    },
    /// So many electrons are elsewhere.
    Several(u32),
}

/// Two configurations between which transitions are judged.
#[derive(Clone, Debug)]
pub struct Between {
    upper_is_odd: bool,
    lower_is_odd: bool,
    jump: Jump,
    shells: Shells,
}

/// The number of pairs of different levels: of two configurations with that many levels, or of one.
pub fn pair_count(upper_levels: u128, lower_levels: Option<u128>) -> u128 {
    match lower_levels {
        Some(lower) => upper_levels.saturating_mul(lower),
        None if upper_levels.is_multiple_of(2) => {
            (upper_levels / 2).saturating_mul(upper_levels.saturating_sub(1))
        }
        None => (upper_levels / 2).saturating_mul(upper_levels),
    }
}

impl Between {
    /// Compares two configurations with all their subshells, full ones too.
    ///
    /// Errors: `electron-count-differs`.
    pub fn new(upper: &[Subshell], lower: &[Subshell]) -> Result<Self, Problem> {
        let mut occupations: SortedMap<Orbital, (u32, u32)> = SortedMap::default();
        let sides = [upper, lower].into_iter().zip([(1, 0), (0, 1)]);
        for (s, (above, below)) in
            sides.flat_map(|(shells, side)| shells.iter().map(move |s| (s, side)))
        {
            let before = occupations.get(&s.orbital()).copied().unwrap_or_default();
            let with = |count: u32, share: u32| count.saturating_add(share * s.electrons());
            occupations.insert(s.orbital(), (with(before.0, above), with(before.1, below)));
        }
        let (mut left, mut joined) = (0_u32, 0_u32);
        let mut jump = (None, None);
        for &(orbital, (above, below)) in occupations.entries() {
            left = left.saturating_add(above.saturating_sub(below));
            joined = joined.saturating_add(below.saturating_sub(above));
            if above > below {
                jump.0 = Some(orbital);
            }
            if below > above {
                jump.1 = Some(orbital);
            }
        }
        if left != joined {
            let count = |shells: &[Subshell]| shells.iter().map(|s| s.electrons()).sum::<u32>();
            return Err(Problem::new(
                "electron-count-differs",
                format!(
                    "one configuration has {} electrons and the other {}.",
                    count(upper),
                    count(lower)
                ),
                0,
                0,
            )
            .bound("two configurations of the same atom or ion"));
        }
        let shell =
            |shells: &[Subshell], orbital| shells.iter().copied().find(|s| s.orbital() == orbital);
        let active: Vec<Subshell> = match (left, jump) {
            (1, (Some(from), Some(to))) => shell(upper, from)
                .into_iter()
                .chain(shell(lower, to))
                .collect(),
            _ => Vec::new(),
        };
        Ok(Between {
            upper_is_odd: is_odd(upper),
            lower_is_odd: is_odd(lower),
            jump: match (left, jump) {
                (0, _) => Jump::None,
                (1, (Some(upper), Some(lower))) => Jump::One { upper, lower },
                _ => Jump::Several(left),
            },
            shells: Shells::new(
                occupations.entries().iter().map(|entry| entry.0).collect(),
                if left == 0 { upper } else { &[] },
                &active,
            ),
        })
    }

    /// How they differ.
    pub fn jump(&self) -> Jump {
        self.jump
    }

    /// The verdict on each multipole for one pair of levels.
    pub fn verdicts(
        &self,
        upper: &TermOf,
        upper_j: TwiceJ,
        lower: &TermOf,
        lower_j: TwiceJ,
    ) -> [Verdict; 3] {
        Multipole::ALL.map(|multipole| Verdict {
            multipole,
            refused_by: self
                .level_rule(multipole, upper_j, lower_j)
                .or_else(|| self.same_level(upper, upper_j, lower, lower_j))
                .or_else(|| self.term_rule(multipole, upper, lower))
                .or_else(|| strength_rule(multipole, upper.term, upper_j, lower.term, lower_j)),
        })
    }

    /// The rigorous rule that refuses, if one does. It depends on parity and J alone.
    pub fn level_rule(&self, multipole: Multipole, upper: TwiceJ, lower: TwiceJ) -> Option<Rule> {
        if (self.upper_is_odd != self.lower_is_odd) != multipole.changes_parity() {
            return Some(Rule::Parity {
                multipole,
                upper_is_odd: self.upper_is_odd,
                lower_is_odd: self.lower_is_odd,
            });
        }
        let twice_rank = 2 * multipole.rank();
        if upper.doubled().abs_diff(lower.doubled()) > twice_rank {
            return Some(Rule::JChange {
                multipole,
                upper,
                lower,
            });
        }
        let sum = i64::from(upper.doubled()) + i64::from(lower.doubled());
        (sum < i64::from(twice_rank)).then_some(Rule::JSum {
            multipole,
            upper,
            lower,
        })
    }

    fn same_level(
        &self,
        upper: &TermOf,
        upper_j: TwiceJ,
        lower: &TermOf,
        lower_j: TwiceJ,
    ) -> Option<Rule> {
        (self.jump == Jump::None && same_term(upper, lower) && upper_j == lower_j)
            .then_some(Rule::SameLevel)
    }

    /// The approximate rule that refuses, if one does. It depends on the terms, not on J, so that it
    /// is asked once for all levels of two terms.
    pub fn term_rule(&self, multipole: Multipole, upper: &TermOf, lower: &TermOf) -> Option<Rule> {
        self.jump_rule(multipole)
            .or_else(|| coupling_rule(multipole, upper, lower))
            .or_else(|| {
                (multipole == Multipole::M1 && !same_term(upper, lower)).then_some(
                    Rule::OtherTerm {
                        upper: upper.term,
                        lower: lower.term,
                    },
                )
            })
            .or_else(|| {
                let (upper, lower) = (upper.chain?, lower.chain?);
                self.shells.refusal(self.jump, multipole, upper, lower)
            })
    }

    /// One electron moves, and its ℓ fits: |ℓ − ℓ′| ≤ k ≤ ℓ + ℓ′ with ℓ + ℓ′ + k even.
    fn jump_rule(&self, multipole: Multipole) -> Option<Rule> {
        match self.jump {
            Jump::None => None,
            Jump::Several(moved) => Some(Rule::SeveralElectrons { moved }),
            Jump::One { upper, lower } if multipole == Multipole::M1 => {
                Some(Rule::OrbitalKept { upper, lower })
            }
            Jump::One { upper, lower } => {
                let (a, b) = (u32::from(upper.l()), u32::from(lower.l()));
                let rank = multipole.rank();
                let fits =
                    a.abs_diff(b) <= rank && rank <= a + b && (a + b + rank).is_multiple_of(2);
                (!fits).then_some(Rule::OrbitalStep {
                    multipole,
                    upper,
                    lower,
                })
            }
        }
    }
}

/// Refuses a line that every other rule allows and whose strength is zero all the same, as of
/// ⁷D₂ – ⁷D₂ by E1. M1 has none of that kind.
pub fn strength_rule(
    multipole: Multipole,
    upper: Term,
    upper_j: TwiceJ,
    lower: Term,
    lower_j: TwiceJ,
) -> Option<Rule> {
    let vanishes = multipole != Multipole::M1
        && orbital_share(multipole.rank(), upper, upper_j, lower, lower_j) == 0.0;
    vanishes.then_some(Rule::Vanishing {
        multipole,
        upper: upper_j,
        lower: lower_j,
    })
}

/// One and the same term of one configuration, given that the configurations are the same.
fn same_term(upper: &TermOf, lower: &TermOf) -> bool {
    upper.term == lower.term && upper.index == lower.index
}

/// ΔS = 0; |ΔL| ≤ k ≤ L + L′.
fn coupling_rule(multipole: Multipole, upper: &TermOf, lower: &TermOf) -> Option<Rule> {
    let (a, b) = (upper.term, lower.term);
    if a.two_s != b.two_s {
        return Some(Rule::Spin {
            upper: a.spin(),
            lower: b.spin(),
        });
    }
    // L + S has no rank in L alone: within one term M1 needs S or L, which J's own rules see to.
    if multipole == Multipole::M1 {
        return None;
    }
    let rank = multipole.rank();
    if a.l.abs_diff(b.l) > rank {
        return Some(Rule::LChange {
            multipole,
            upper: a.l,
            lower: b.l,
        });
    }
    (a.l.saturating_add(b.l) < rank).then_some(Rule::LSum {
        multipole,
        upper: a.l,
        lower: b.l,
    })
}
