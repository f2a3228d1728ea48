//! Every LS term of equivalent electrons, told apart by seniority and group labels.
//!
//! The orbital states of ℓ^N with spin S and seniority v form one irreducible representation W of
//! the rotation group R(2ℓ+1); for f electrons it splits into representations U of G₂ before it
//! splits into L. Both are found from weights, none is listed.
//!
//! Source: Racah, Phys. Rev. 63, 367 (1943) and 76, 1352 (1949). The running index follows Nielson
//! and Koster, *Spectroscopic Coefficients for the pⁿ, dⁿ, and fⁿ Configurations* (1963): among
//! equal S L by seniority, then by U; both rise with the eigenvalue of their Casimir operator.

mod counting;
mod exceptional;

use crate::numerics::order::sort_by_key;
use crate::problem::Problem;
use counting::{contents, states};

/// Subshells with more states than this are not resolved into terms.
pub const MOST_STATES: u64 = 1_000_000_000;

/// Nor are those with more terms than this.
pub const MOST_TERMS: u64 = 100_000;

/// One LS term of ℓ^N.
#[derive(Clone, Debug, PartialEq)]
pub struct EquivalentTerm {
    /// 2S.
    pub two_s: i32,
    /// L.
    pub l_total: u32,
    /// Seniority v: the number of electrons left when pairs coupled to ¹S are taken away.
    pub seniority: u32,
    /// W = (w₁ … w_ℓ) of R(2ℓ+1), for ℓ ≥ 2.
    pub w: Option<RotationLabel>,
    /// U = (u₁ u₂) of G₂, for f electrons.
    pub u: Option<[i32; 2]>,
    /// Eigenvalue of the Casimir operator of R(2ℓ+1): Σ wᵢ(wᵢ + 2ℓ+1−2i) / [2(2ℓ−1)].
    pub rotation_casimir: Option<f64>,
    /// Eigenvalue of the Casimir operator of G₂: (u₁² + u₁u₂ + u₂² + 5u₁ + 4u₂)/12.
    pub g2_casimir: Option<f64>,
    /// Running index among equal S L, from 1.
    pub index: u32,
    /// How often S L occurs.
    pub times: u32,
    /// False where another term has the same S, L and all the same labels.
    pub distinguished: bool,
}

/// All terms of ℓ^N, the largest multiplicity first, then by rising L, then by index.
///
/// More than half filled shells have the terms of their holes.
///
/// # Errors
/// `subshell-over-capacity` for N > 4ℓ+2; `too-many-states` above 10⁹ states or 10⁵ terms.
pub fn classify(l: u8, electrons: u32) -> Result<Vec<EquivalentTerm>, Problem> {
    let capacity = 4 * u32::from(l) + 2;
    if electrons > capacity {
        return Err(Problem::new(
            "subshell-over-capacity",
            format!("A subshell of ℓ = {l} cannot hold {electrons} electrons."),
            0,
            0,
        )
        .bound(format!("it holds at most {capacity}")));
    }
    let electrons = electrons.min(capacity - electrons);
    let too_many = || {
        Problem::new(
            "too-many-states",
            format!("{electrons} electrons or holes of ℓ = {l} have too many states to be resolved into terms."),
            0,
            0,
        )
        .bound(format!("at most {MOST_STATES} states and {MOST_TERMS} terms"))
    };
    if states(l, electrons) > MOST_STATES {
        return Err(too_many());
    }
    let contents = contents(l, electrons);
    let total: u64 = contents.iter().flat_map(|spin| &spin.by_l).sum();
    if total > MOST_TERMS {
        return Err(too_many());
    }
    let mut terms = Vec::with_capacity(usize::try_from(total).unwrap_or(0));
    for spin in contents {
        let w = (l >= 2).then(|| RotationLabel::of(l, spin.seniority, spin.two_s));
        let rotation_casimir = w.map(RotationLabel::casimir);
        let term = |l_total: u32, u: Option<[i32; 2]>, alike: u64| EquivalentTerm {
            two_s: spin.two_s,
            l_total,
            seniority: spin.seniority,
            w,
            u,
            rotation_casimir,
            g2_casimir: u.map(exceptional::casimir),
            index: 0,
            times: 0,
            distinguished: alike == 1,
        };
        let mut add = |u: Option<[i32; 2]>, by_l: &[u64]| {
            for (l_total, &alike) in (0_u32..).zip(by_l) {
                terms.extend((0..alike).map(|_| term(l_total, u, alike)));
            }
        };
        if l == 3 {
            for (u, by_l) in exceptional::branching(spin.seniority, spin.two_s) {
                add(Some(*u), by_l);
            }
        } else {
            add(None, &spin.by_l);
        }
    }
    // Stable: seniority and U were met in rising order.
    sort_by_key(&mut terms, |term| (-term.two_s, term.l_total));
    for same in
        terms.chunk_by_mut(|one, other| (one.two_s, one.l_total) == (other.two_s, other.l_total))
    {
        let times = u32::try_from(same.len()).unwrap_or(u32::MAX);
        for (index, term) in (1..).zip(same) {
            term.index = index;
            term.times = times;
        }
    }
    Ok(terms)
}

/// W = (w₁ … w_ℓ) of R(2ℓ+1): some twos, then some ones, then zeros.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct RotationLabel {
    twos: u32,
    ones: u32,
    l: u32,
}

impl RotationLabel {
    /// W of the states of ℓ^v with seniority v and spin S: v/2 − S twos, then min(2S, 2ℓ+1−v) ones.
    ///
    /// Racah, Phys. Rev. 76, 1352 (1949).
    fn of(l: u8, seniority: u32, two_s: i32) -> Self {
        let spin = u32::try_from(two_s).unwrap_or(0);
        RotationLabel {
            twos: seniority.saturating_sub(spin) / 2,
            ones: spin.min((2 * u32::from(l) + 1).saturating_sub(seniority)),
            l: l.into(),
        }
    }

    /// w₁ … w_ℓ.
    pub fn components(self) -> impl Iterator<Item = i32> {
        (0..self.l).map(move |place| {
            if place < self.twos {
                2
            } else {
                i32::from(place < self.twos + self.ones)
            }
        })
    }

    fn casimir(self) -> f64 {
        let l = i32::try_from(self.l).unwrap_or(0);
        let sum: i32 = (1..)
            .zip(self.components())
            .map(|(place, w)| w * (w + 2 * l + 1 - 2 * place))
            .sum();
        f64::from(sum) / f64::from(2 * (2 * l - 1))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn names(l: u8, electrons: u32) -> Vec<(i32, u32, u32)> {
        let terms = classify(l, electrons).expect("within bounds");
        terms
            .iter()
            .map(|term| (term.two_s + 1, term.l_total, term.seniority))
            .collect()
    }

    #[test]
    fn closed_and_single() {
        assert_eq!(names(0, 0), [(1, 0, 0)]);
        assert_eq!(names(0, 1), [(2, 0, 1)]);
        assert_eq!(names(0, 2), [(1, 0, 0)]);
        assert_eq!(names(3, 14), [(1, 0, 0)]);
        assert_eq!(names(1, 3), [(4, 0, 3), (2, 1, 1), (2, 2, 3)]);
        assert_eq!(names(4, 2).len(), 9);
    }

    #[test]
    fn the_dimension_of_w_is_kept_by_its_branching_into_l() {
        // Dimensions of R(7) representations from Weyl's formula, from memory of Racah (1949).
        for (seniority, two_s, dimension) in [
            (3, 1, 105),
            (4, 0, 168),
            (5, 1, 378),
            (6, 0, 294),
            (6, 2, 378),
            (7, 3, 168),
        ] {
            let found: u64 = classify(3, 7)
                .into_iter()
                .chain(classify(3, 6))
                .flatten()
                .filter(|term| (term.seniority, term.two_s) == (seniority, two_s))
                .map(|term| u64::from(2 * term.l_total + 1))
                .sum();
            assert_eq!(found, dimension, "v = {seniority}, 2S = {two_s}");
        }
    }

    #[test]
    fn bounds_are_faults() {
        assert_eq!(
            classify(1, 7).expect_err("over").code,
            "subshell-over-capacity"
        );
        assert_eq!(
            classify(255, 400).expect_err("many").code,
            "too-many-states"
        );
        assert_eq!(classify(7, 9).expect_err("many").code, "too-many-states");
        assert_eq!(
            classify(0, u32::MAX).expect_err("over").code,
            "subshell-over-capacity"
        );
    }
}
