//! Reduced matrix elements of unit double tensors between the terms of ℓ^N.

use super::equivalent::EquivalentTerm;
use super::parentage::{Parentage, parents};
use super::wigner_6j;
use crate::problem::Problem;

/// ⟨αSL‖W^(κk)‖α′S′L′⟩ between all terms of one ℓ^N.
///
/// W^(κk) = Σᵢ w^(κk)(i), of rank κ in spin and k in orbital space, with ⟨sℓ‖w^(κk)‖sℓ⟩ = 1.
/// The usual operators are multiples of it:
/// U^k = √[2/(2S+1)] W^(0k) for ⟨ℓ‖u^k‖ℓ⟩ = 1; V^(1k) = Σ s u^k = √(3/2) W^(1k).
#[derive(Clone, Debug, PartialEq)]
pub struct UnitTensor {
    terms: Vec<EquivalentTerm>,
    elements: Vec<f64>,
}

/// The unit tensor of spin rank κ = 0 or 1 and orbital rank k ≤ 2ℓ in ℓ^N:
///
/// ⟨αSL‖W^(κk)‖α′S′L′⟩ = N √[(2S+1)(2S′+1)(2L+1)(2L′+1)] Σ c c′
/// (−1)^(S̄+s+S+κ) {s s κ; S′ S S̄} (−1)^(L̄+ℓ+L+k) {ℓ ℓ k; L′ L L̄}
///
/// over the parents S̄ L̄ with the coefficients c, c′ of fractional parentage of both terms.
/// Absolute error below 10⁻¹³.
///
/// Source: Racah, Phys. Rev. 63, 367 (1943); one-electron factors by Edmonds (1957) eq. 7.1.8.
///
/// # Errors
/// Those of [`parents`]; `rank-too-large` for κ > 1 or k > 2ℓ.
pub fn unit_tensor(
    l: u8,
    electrons: u32,
    spin_rank: u8,
    orbital_rank: u8,
) -> Result<UnitTensor, Problem> {
    if spin_rank > 1 || u32::from(orbital_rank) > 2 * u32::from(l) {
        return Err(Problem::new(
            "rank-too-large",
            format!("A unit tensor of ranks {spin_rank} and {orbital_rank} vanishes for an electron of ℓ = {l}."),
            0,
            0,
        )
        .bound(format!("ranks up to 1 in spin and {} in orbital space", 2 * u32::from(l))));
    }
    let table = parents(l, electrons)?;
    let terms = table.children().to_vec();
    let mut elements = Vec::with_capacity(terms.len() * terms.len());
    for (row, left) in terms.iter().enumerate() {
        for (column, right) in terms.iter().enumerate() {
            let ranks = (i32::from(spin_rank), i32::from(orbital_rank));
            elements.push(element(&table, (row, left), (column, right), ranks));
        }
    }
    Ok(UnitTensor { terms, elements })
}

fn element(
    table: &Parentage,
    (row, left): (usize, &EquivalentTerm),
    (column, right): (usize, &EquivalentTerm),
    (kappa, k): (i32, i32),
) -> f64 {
    let doubled = |value: u32| i32::try_from(2 * value).unwrap_or(0);
    let (two_l1, two_l2) = (doubled(left.l_total), doubled(right.l_total));
    if (left.two_s - right.two_s).abs() > 2 * kappa || (two_l1 - two_l2).abs() > 2 * k {
        return 0.0;
    }
    let two_l = 2 * i32::from(table.l());
    let mut sum = 0.0;
    let rows = table.row(row).iter().zip(table.row(column));
    for (parent, (&c1, &c2)) in table.parents().iter().zip(rows) {
        if c1 != 0.0 && c2 != 0.0 {
            let two_lp = doubled(parent.l_total);
            let spin = wigner_6j(1, 1, 2 * kappa, right.two_s, left.two_s, parent.two_s);
            let orbital = wigner_6j(two_l, two_l, 2 * k, two_l2, two_l1, two_lp);
            let exponent =
                (parent.two_s + 1 + left.two_s + two_lp + two_l + two_l1) / 2 + kappa + k;
            let product = c1 * c2 * spin * orbital;
            sum += if exponent & 1 == 0 { product } else { -product };
        }
    }
    let states =
        |term: &EquivalentTerm| (f64::from(term.two_s) + 1.0) * f64::from(2 * term.l_total + 1);
    f64::from(table.electrons()) * (states(left) * states(right)).sqrt() * sum
}

impl UnitTensor {
    /// The terms of ℓ^N, in the order of rows and columns.
    pub fn terms(&self) -> &[EquivalentTerm] {
        &self.terms
    }

    /// ⟨left‖W‖right⟩ by their places; zero for places that do not exist.
    pub fn element(&self, left: usize, right: usize) -> f64 {
        let width = self.terms.len();
        if right >= width {
            return 0.0;
        }
        left.checked_mul(width)
            .and_then(|start| self.elements.get(start.checked_add(right)?))
            .copied()
            .unwrap_or(0.0)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn bounds_are_faults() {
        assert_eq!(
            unit_tensor(2, 3, 2, 0).expect_err("rank").code,
            "rank-too-large"
        );
        assert_eq!(
            unit_tensor(2, 3, 0, 5).expect_err("rank").code,
            "rank-too-large"
        );
        assert_eq!(
            unit_tensor(2, 0, 0, 0).expect_err("none").code,
            "no-parents"
        );
        assert_eq!(
            unit_tensor(2, 3, 0, 2).expect("d3").element(0, usize::MAX),
            0.0
        );
    }

    #[test]
    fn one_electron_has_unit_elements() {
        for l in 0..4 {
            for kappa in 0..2 {
                for k in 0..=2 * l {
                    let tensor = unit_tensor(l, 1, kappa, k).expect("one electron");
                    assert!(
                        (tensor.element(0, 0) - 1.0).abs() < 1e-14,
                        "{l} {kappa} {k}"
                    );
                }
            }
        }
    }
}
