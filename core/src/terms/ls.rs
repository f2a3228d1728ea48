//! LS terms of any number of open shells.
//!
//! The number of states with M_S and M_L falls off by one for each term that stops contributing:
//! times(S, L) = c(S, L) − c(S + 1, L) − c(S, L + 1) + c(S + 1, L + 1), with c the number of
//! states of M_S = S, M_L = L (Slater's counting; Condon & Shortley, *The Theory of Atomic
//! Spectra*, 1935, ch. VII; Cowan, *The Theory of Atomic Structure and Spectra*, 1981, ch. 4).

use super::term::{Level, Term};
use crate::configuration::Subshell;
use crate::problem::Problem;
use crate::quantity::TwiceJ;
use rungline_kernel::weights::Weights;

pub use rungline_kernel::weights::{MAX_STATES, states};

/// A term and how many times a configuration has it.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct LsTerm {
    /// The term.
    pub term: Term,
    /// How often it occurs, at least once.
    pub times: u128,
}

/// All LS terms of a configuration.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct LsTerms {
    /// Largest multiplicity first, then largest L.
    pub terms: Vec<LsTerm>,
    /// The number of states, Π C(4ℓ + 2, N).
    pub states: u128,
}

/// The LS terms of a configuration; full subshells change nothing.
///
/// Errors: `too-many-states` above 2¹²⁰ states, `counting-too-long` above 10⁸ steps.
pub fn terms(subshells: &[Subshell]) -> Result<LsTerms, Problem> {
    let states = states(subshells)?;
    let found = Weights::of(subshells)?.terms();
    Ok(LsTerms {
        terms: found
            .into_iter()
            .map(|(two_s, l, times)| LsTerm {
                term: Term { two_s, l },
                times,
            })
            .collect(),
        states,
    })
}

impl LsTerms {
    /// Number of terms, each repeat counted.
    pub fn n_terms(&self) -> u128 {
        self.terms
            .iter()
            .map(|t| t.times)
            .fold(0, u128::saturating_add)
    }

    /// Number of levels.
    pub fn n_levels(&self) -> u128 {
        self.terms
            .iter()
            .map(|t| t.times.saturating_mul(u128::from(t.term.level_count())))
            .fold(0, u128::saturating_add)
    }

    /// How often a term occurs; zero if it does not.
    pub fn times(&self, term: Term) -> u128 {
        self.terms
            .binary_search_by(|t| t.term.cmp(&term))
            .ok()
            .and_then(|i| self.terms.get(i))
            .map_or(0, |t| t.times)
    }

    /// Number of levels of each J, J rising.
    pub fn levels_by_j(&self) -> Vec<(TwiceJ, u128)> {
        let mut counts: Vec<(TwiceJ, u128)> = Vec::new();
        let highest = self
            .terms
            .iter()
            .filter_map(|t| t.term.levels().last())
            .max();
        let Some(highest) = highest else {
            return counts;
        };
        let lowest = highest.doubled().rem_euclid(2);
        counts.extend(
            (lowest..=highest.doubled())
                .step_by(2)
                .map(|j| (TwiceJ::from_doubled(j), 0)),
        );
        for t in &self.terms {
            for j in t.term.levels() {
                let place = usize::try_from(j.doubled() / 2).ok();
                if let Some((_, count)) = place.and_then(|i| counts.get_mut(i)) {
                    *count = count.saturating_add(t.times);
                }
            }
        }
        counts.retain(|&(_, count)| count > 0);
        counts
    }

    /// The levels, at most `limit` of them: terms in order, repeats by index, J rising. Their whole
    /// number is [`LsTerms::n_levels`].
    pub fn levels(&self, limit: usize) -> Vec<Level> {
        self.terms
            .iter()
            .flat_map(|t| {
                (1..=t.times).flat_map(move |k| {
                    t.term.levels().map(move |j| Level {
                        term: t.term,
                        index: (t.times > 1).then_some(k),
                        j,
                    })
                })
            })
            .take(limit)
            .collect()
    }

    /// Whether the configuration has this level; the index must be given exactly where the term
    /// occurs more than once.
    pub fn has(&self, level: &Level) -> bool {
        let times = self.times(level.term);
        let index_fits = match level.index {
            None => times == 1,
            Some(k) => times > 1 && (1..=times).contains(&k),
        };
        index_fits && level.term.has(level.j)
    }
}
