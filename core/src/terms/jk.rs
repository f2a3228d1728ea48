//! jK (pair) coupling of an outer electron: the parent's J_p and the electron's ℓ make K, K and
//! the electron's spin make J = K ± ½ (Racah, Phys. Rev. 61, 537 (1942); Cowan 1981, §4-18).

use super::ls;
use super::term::Level;
use super::{is_odd, open_shells};
use crate::configuration::{Subshell, total_letter};
use crate::problem::Problem;
use crate::quantity::TwiceJ;
use std::fmt;

/// One K on one parent level: one or two levels.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Pair {
    /// Level of the other electrons.
    pub parent: Level,
    /// Whether the parent's parity is odd.
    pub parent_is_odd: bool,
    /// K.
    pub k: TwiceJ,
    /// J = K − ½ and K + ½; only ½ for K = 0.
    pub j: Vec<TwiceJ>,
    /// Whether the parity of the whole is odd.
    pub is_odd: bool,
}

/// ASCII: `(2P*3/2) 2[3/2]*`, `*` for odd parity.
impl fmt::Display for Pair {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let mark = |odd: bool| if odd { "*" } else { "" };
        let Level { term, index, j } = self.parent;
        let letter = total_letter(term.l);
        write!(
            f,
            "({}{letter}{}{j}",
            term.multiplicity(),
            mark(self.parent_is_odd)
        )?;
        if let Some(index) = index {
            write!(f, " #{index}")?;
        }
        write!(f, ") 2[{}]{}", self.k, mark(self.is_odd))
    }
}

/// The jK levels of a configuration.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Pairs {
    /// The electrons of the parent: open shells without the outer electron.
    pub parent: Vec<Subshell>,
    /// The outer electron.
    pub outer: Subshell,
    /// Number of levels, the same as in LS coupling.
    pub n_levels: u128,
    /// Pairs on the first parent levels: parents in their order, K rising.
    pub listed: Vec<Pair>,
}

/// The jK levels, or nothing when the last open shell does not hold exactly one electron or no
/// other shell is open. At most `limit` pairs are listed.
///
/// Errors: as [`ls::terms`].
pub fn pairs(subshells: &[Subshell], limit: usize) -> Result<Option<Pairs>, Problem> {
    let mut parent = open_shells(subshells);
    let Some(outer) = parent.pop().filter(|s| s.electrons() == 1) else {
        return Ok(None);
    };
    if parent.is_empty() {
        return Ok(None);
    }
    let parents = ls::terms(&parent)?;
    let two_l = 2 * i32::from(outer.orbital().l());
    let whole_is_odd = is_odd(&[parent.as_slice(), &[outer]].concat());
    let parent_is_odd = is_odd(&parent);
    // Each parent J gives 2·(number of K) levels, one fewer if K = 0 occurs.
    let n_levels = parents
        .levels_by_j()
        .into_iter()
        .map(|(j, times)| times.saturating_mul(ks(j, two_l).map(|k| js(k).count() as u128).sum()))
        .fold(0, u128::saturating_add);
    let listed = parents
        .levels(limit)
        .into_iter()
        .flat_map(|level| {
            ks(level.j, two_l).map(move |k| Pair {
                parent: level,
                parent_is_odd,
                k,
                j: js(k).collect(),
                is_odd: whole_is_odd,
            })
        })
        .take(limit)
        .collect();
    Ok(Some(Pairs {
        parent,
        outer,
        n_levels,
        listed,
    }))
}

/// K of a parent J and 2ℓ, rising.
fn ks(parent: TwiceJ, two_l: i32) -> impl Iterator<Item = TwiceJ> {
    let two_j = parent.doubled();
    (two_j.abs_diff(two_l)..=two_j.saturating_add(two_l).unsigned_abs())
        .step_by(2)
        .map(|two_k| TwiceJ::from_doubled(i32::try_from(two_k).unwrap_or(i32::MAX)))
}

/// J of a K: K ± ½.
fn js(k: TwiceJ) -> impl Iterator<Item = TwiceJ> {
    [k.doubled().saturating_sub(1), k.doubled().saturating_add(1)]
        .into_iter()
        .filter(|&two_j| two_j >= 0)
        .map(TwiceJ::from_doubled)
}
