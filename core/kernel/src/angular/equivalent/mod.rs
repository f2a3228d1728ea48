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

use crate::problem::Problem;
use counting::{Content, contents, states};

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
    let families: Vec<Family> = contents.iter().flat_map(|spin| families(l, spin)).collect();
    let mut terms = Vec::with_capacity(usize::try_from(total).unwrap_or(0));
    let highest = contents.iter().map(|spin| spin.two_s).max().unwrap_or(0);
    for two_s in (0..=highest).rev().step_by(2) {
        // Met in rising seniority and U.
        let alike: Vec<&Family> = families.iter().filter(|f| f.two_s == two_s).collect();
        let longest = alike.iter().map(|f| f.by_l.len()).max().unwrap_or(0);
        for (l_total, place) in (0_u32..).zip(0..longest) {
            let first = terms.len();
            let occurs = |f: &Family| f.by_l.get(place).copied().unwrap_or(0);
            let times = alike.iter().map(|f| occurs(f)).sum::<u64>();
            let times = u32::try_from(times).unwrap_or(u32::MAX);
            for family in &alike {
                for _ in 0..occurs(family) {
                    let index = u32::try_from(terms.len() - first).unwrap_or(u32::MAX);
                    terms.push(EquivalentTerm {
                        two_s,
                        l_total,
                        seniority: family.seniority,
                        w: family.w,
                        u: family.u,
                        rotation_casimir: family.rotation_casimir,
                        g2_casimir: family.g2_casimir,
                        index: index.saturating_add(1),
                        times,
                        distinguished: occurs(family) == 1,
                    });
                }
            }
        }
    }
    Ok(terms)
}

/// The terms that share all labels but L.
struct Family<'a> {
    two_s: i32,
    seniority: u32,
    w: Option<RotationLabel>,
    u: Option<[i32; 2]>,
    rotation_casimir: Option<f64>,
    g2_casimir: Option<f64>,
    /// How often L = 0, 1, 2 … occurs.
    by_l: &'a [u64],
}

/// The families of one spin and seniority: one, or one for each U of f electrons, U rising.
fn families(l: u8, spin: &Content) -> Vec<Family<'_>> {
    let w = (l >= 2).then(|| RotationLabel::of(l, spin.seniority, spin.two_s));
    let rotation_casimir = w.map(RotationLabel::casimir);
    let family = |u: Option<[i32; 2]>, by_l| Family {
        two_s: spin.two_s,
        seniority: spin.seniority,
        w,
        u,
        rotation_casimir,
        g2_casimir: u.map(exceptional::casimir),
        by_l,
    };
    if l == 3 {
        let branches = exceptional::branching(spin.seniority, spin.two_s);
        branches
            .iter()
            .map(|(u, by_l)| family(Some(*u), by_l.as_slice()))
            .collect()
    } else {
        vec![family(None, spin.by_l.as_slice())]
    }
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
