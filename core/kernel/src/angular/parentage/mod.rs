//! Coefficients of fractional parentage: how the terms of ℓ^N grow out of those of ℓ^(N−1).
//!
//! |ℓ^N αSL⟩ = Σ |(ℓ^(N−1) α′S′L′, ℓ) SL⟩ ⟨ℓ^(N−1) α′S′L′, ℓ|}ℓ^N αSL⟩.
//!
//! The coefficients are the eigenvectors, to eigenvalue 1, of the operator that makes the last
//! electron antisymmetric with the others; equal S L are resolved by the Casimir operators of the
//! groups that classify them, so that rows belong to the terms of [`classify`]. Past the half the
//! coefficients follow from those of the holes.
//!
//! Signs and bases of our own, where only convention decides:
//! - up to the half, the first coefficient of a term that does not vanish, in the order of the
//!   parents, is positive;
//! - two terms that no label tells apart are chosen so that the first parent that either has
//!   belongs to the one with the lower index alone.
//!
//! Source: Racah, Phys. Rev. 63, 367 (1943); Redmond, Proc. R. Soc. A 222, 84 (1954).

mod recursion;

use super::equivalent::{EquivalentTerm, classify};
use crate::problem::Problem;
use std::sync::{Arc, OnceLock};

/// All coefficients of fractional parentage of one ℓ^N.
#[derive(Clone, Debug, PartialEq)]
pub struct Parentage {
    l: u8,
    electrons: u32,
    children: Vec<EquivalentTerm>,
    parents: Vec<EquivalentTerm>,
    /// Row by row: one row for each child, one column for each parent.
    coefficients: Vec<f64>,
}

/// A table that is built when it is first asked for.
type Kept = OnceLock<Result<Arc<Parentage>, Problem>>;

/// Tables are kept for ℓ ≤ 3: they need each other, and are asked for again and again.
static TABLES: [[Kept; 15]; 4] = [const { [const { OnceLock::new() }; 15] }; 4];

/// The coefficients of fractional parentage of ℓ^N, N ≥ 1.
///
/// # Errors
/// `subshell-over-capacity` for N > 4ℓ+2; `no-parents` for N = 0; `parentage-too-large` for ℓ > 3
/// with more than two electrons and more than one hole.
pub fn parents(l: u8, electrons: u32) -> Result<Arc<Parentage>, Problem> {
    let kept = usize::try_from(electrons)
        .ok()
        .and_then(|place| TABLES.get(usize::from(l))?.get(place));
    match kept {
        Some(table) => table
            .get_or_init(|| build(l, electrons).map(Arc::new))
            .clone(),
        None => build(l, electrons).map(Arc::new),
    }
}

fn build(l: u8, electrons: u32) -> Result<Parentage, Problem> {
    let children = classify(l, electrons)?;
    let Some(fewer) = electrons.checked_sub(1) else {
        return Err(Problem::new(
            "no-parents",
            "A subshell without electrons has no parent terms.",
            0,
            0,
        )
        .bound("one electron or more"));
    };
    let parents = classify(l, fewer)?;
    let half = 2 * u32::from(l) + 1;
    let coefficients = if electrons <= 2 && electrons <= half {
        // One parent for each.
        vec![1.0; children.len()]
    } else if electrons > half && (l <= 3 || electrons + 1 >= 2 * half) {
        past_the_half(l, electrons, &children, &parents)?
    } else if l <= 3 {
        recursion::coefficients(&children, &*self::parents(l, fewer)?)?
    } else {
        return Err(Problem::new(
            "parentage-too-large",
            format!("The parents of {electrons} electrons of ℓ = {l} are not computed."),
            0,
            0,
        )
        .bound("s, p, d and f subshells in full; others with at most two electrons or one hole"));
    };
    Ok(Parentage {
        l,
        electrons,
        children,
        parents,
        coefficients,
    })
}

/// Racah (1943): with n = 4ℓ+2−N holes,
/// ⟨ℓ^(N−1) α′S′L′, ℓ|}ℓ^N αSL⟩ = (−1)^(S+S′+L+L′−s−ℓ) ·
/// √{ (n+1)(2S′+1)(2L′+1) / [N (2S+1)(2L+1)] } ⟨ℓ^n αSL, ℓ|}ℓ^(n+1) α′S′L′⟩,
/// where states past the half are the conjugates of those before it. A state of the half-filled
/// shell is its own conjugate up to (−1)^((v′−1)/2), which enters for N = 2ℓ+2.
fn past_the_half(
    l: u8,
    electrons: u32,
    children: &[EquivalentTerm],
    parents: &[EquivalentTerm],
) -> Result<Vec<f64>, Problem> {
    let half = 2 * u32::from(l) + 1;
    let holes = (2 * half).saturating_sub(electrons);
    let of_holes = self::parents(l, holes + 1)?;
    let mut coefficients = Vec::with_capacity(children.len() * parents.len());
    for (column, child) in children.iter().enumerate() {
        for (row, parent) in parents.iter().enumerate() {
            let value = of_holes.coefficient(row, column);
            let ratio = f64::from(holes + 1) * degeneracy(parent)
                / (f64::from(electrons) * degeneracy(child));
            let orbital = i64::from(child.l_total) + i64::from(parent.l_total) - i64::from(l);
            let spin = (i64::from(child.two_s) + i64::from(parent.two_s) - 1) / 2;
            let own = if electrons == half + 1 {
                i64::from(parent.seniority).div_euclid(2)
            } else {
                0
            };
            let sign = if (orbital + spin + own) & 1 == 0 {
                1.0
            } else {
                -1.0
            };
            coefficients.push(if value == 0.0 {
                0.0
            } else {
                sign * ratio.sqrt() * value
            });
        }
    }
    Ok(coefficients)
}

/// (2S+1)(2L+1).
fn degeneracy(term: &EquivalentTerm) -> f64 {
    (f64::from(term.two_s) + 1.0) * f64::from(2 * term.l_total + 1)
}

impl Parentage {
    /// ℓ.
    pub fn l(&self) -> u8 {
        self.l
    }

    /// N.
    pub fn electrons(&self) -> u32 {
        self.electrons
    }

    /// The terms of ℓ^N, in the order of [`classify`].
    pub fn children(&self) -> &[EquivalentTerm] {
        &self.children
    }

    /// The terms of ℓ^(N−1), in the order of [`classify`].
    pub fn parents(&self) -> &[EquivalentTerm] {
        &self.parents
    }

    /// ⟨ℓ^(N−1) parent, ℓ|}ℓ^N child⟩ by their places; zero for places that do not exist.
    pub fn coefficient(&self, child: usize, parent: usize) -> f64 {
        self.row(child).get(parent).copied().unwrap_or(0.0)
    }

    /// The coefficients of one child, in the order of the parents.
    pub fn row(&self, child: usize) -> &[f64] {
        let width = self.parents.len();
        self.coefficients
            .get(child.saturating_mul(width)..)
            .and_then(|rest| rest.get(..width))
            .unwrap_or(&[])
    }

    /// The parents that lead to a child, each with its share: the squared coefficient, summing to 1.
    pub fn weights(&self, child: usize) -> impl Iterator<Item = (&EquivalentTerm, f64)> {
        self.parents
            .iter()
            .zip(self.row(child))
            .filter(|&(_, &coefficient)| coefficient != 0.0)
            .map(|(parent, &coefficient)| (parent, coefficient * coefficient))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn bounds_are_faults() {
        assert_eq!(parents(1, 0).expect_err("none").code, "no-parents");
        assert_eq!(
            parents(1, 7).expect_err("over").code,
            "subshell-over-capacity"
        );
        assert_eq!(
            parents(4, 3).expect_err("large").code,
            "parentage-too-large"
        );
        assert!(parents(4, 2).is_ok() && parents(4, 17).is_ok() && parents(49, 2).is_ok());
        assert_eq!(
            parents(4, 16).expect_err("large").code,
            "parentage-too-large"
        );
    }

    #[test]
    fn a_full_subshell_has_one_parent() {
        for l in 0..6 {
            let table = parents(l, 4 * u32::from(l) + 2).expect("one hole");
            assert_eq!(table.row(0).len(), 1);
            assert!((table.coefficient(0, 0).abs() - 1.0).abs() < 1e-15);
        }
    }

    #[test]
    fn places_that_do_not_exist_hold_nothing() {
        let table = parents(2, 3).expect("d3");
        assert_eq!(table.coefficient(1000, 0), 0.0);
        assert!(table.row(usize::MAX).is_empty());
        assert_eq!(table.weights(1000).count(), 0);
    }
}
