//! Σ ζ(a) ℓ·s as coefficients between S L and S′ L′, the same for every J.
//!
//! ⟨SLJ|Σ ℓ·s|S′L′J⟩ = (−1)^(S′+L+J) {S L J; L′ S′ 1} ⟨SL‖Σ (sℓ)^(11)‖S′L′⟩, with
//! Σ (sℓ)^(11) = −⅓ √(3/2) √[ℓ(ℓ+1)(2ℓ+1)] [a†ã]^(11).
//!
//! Source: Condon & Shortley, *The Theory of Atomic Spectra* (1935), chapter 3; Edmonds, *Angular
//! Momentum in Quantum Mechanics* (1957), eq. 7.1.6.

use super::basis::{Basis, Coupled, State};
use super::chain::{Chain, Workshop};
use super::electrostatic::{Entry, electrons};
use super::parameters::{Integral, Parameter};
use super::shell_operators::Ranks;
use super::symbols::{Symbols, signed};
use crate::problem::Problem;

/// Below this a reduced element is zero.
const ZERO: f64 = 1e-11;

/// The coefficients between two blocks.
#[derive(Clone, Debug, PartialEq)]
pub struct Joint {
    /// Place of the block of the rows.
    pub rows: usize,
    /// Place of the block of the columns, at most `rows`.
    pub columns: usize,
    /// ⟨row‖Σ (sℓ)^(11)‖column⟩ for each ζ; within one block the lower triangle.
    pub entries: Vec<Entry>,
}

/// All coefficients of every ζ; parameters that are met are appended.
///
/// # Errors
/// Those of [`crate::angular::parentage::parents`].
pub fn coefficients(
    basis: &Basis,
    workshop: &mut Workshop,
    parameters: &mut Vec<Parameter>,
) -> Result<Vec<Joint>, Problem> {
    let ranks = Ranks {
        spin: 2,
        orbital: 2,
    };
    // By configuration.
    let mut chains: Vec<Vec<(usize, Chain, f64)>> = Vec::new();
    for place in 0..basis.configurations().len() {
        let mut own = Vec::new();
        for electron in electrons(basis).filter(|electron| electron.l > 0) {
            let chain = workshop.one_electron(basis, place, electron, electron, ranks)?;
            if let Some(chain) = chain {
                let a = electron.subshell;
                parameters.push(Parameter {
                    first: place,
                    second: place,
                    integral: Integral::SpinOrbit { a },
                });
                let l = f64::from(electron.l);
                let factor = -(1.5 * l * (l + 1.0) * (2.0 * l + 1.0)).sqrt() / 3.0;
                own.push((parameters.len() - 1, chain, factor));
            }
        }
        chains.push(own);
    }
    let mut joints = Vec::new();
    for (rows, upper) in basis.blocks().iter().enumerate() {
        for (columns, lower) in basis.blocks().iter().enumerate().take(rows + 1) {
            let (left, right) = (upper.total, lower.total);
            if (left.two_s - right.two_s).abs() > 2 || (left.l - right.l).abs() > 1 {
                continue;
            }
            let mut entries = Vec::new();
            for (row, bra) in basis.block_states(upper).iter().enumerate() {
                let limit = if rows == columns { row + 1 } else { lower.len };
                let kets = basis.block_states(lower).iter().take(limit);
                for (column, ket) in kets.enumerate() {
                    add(&chains, workshop, (row, bra), (column, ket), &mut entries);
                }
            }
            if !entries.is_empty() {
                joints.push(Joint {
                    rows,
                    columns,
                    entries,
                });
            }
        }
    }
    Ok(joints)
}

fn add(
    chains: &[Vec<(usize, Chain, f64)>],
    workshop: &mut Workshop,
    (row, bra): (usize, &State),
    (column, ket): (usize, &State),
    entries: &mut Vec<Entry>,
) {
    if bra.configuration != ket.configuration {
        return;
    }
    let differing = bra.terms.iter().zip(&ket.terms).filter(|(a, b)| a != b);
    if differing.count() > 1 {
        return;
    }
    for (parameter, chain, factor) in chains.get(ket.configuration).into_iter().flatten() {
        let value = factor * chain.value(&mut workshop.symbols, bra, ket);
        if value.abs() > ZERO || value.is_nan() {
            entries.push(Entry {
                parameter: *parameter,
                row,
                column,
                value,
            });
        }
    }
}

/// (−1)^(S′+L+J) {S L J; L′ S′ 1} of the row's S L and the column's S′ L′.
pub fn factor(symbols: &mut Symbols, left: Coupled, right: Coupled, two_j: i32) -> f64 {
    let (two_l, two_lp) = (2 * left.l, 2 * right.l);
    let six = symbols.six([left.two_s, two_l, two_j, two_lp, right.two_s, 2]);
    signed((right.two_s + two_l + two_j) / 2, six)
}
