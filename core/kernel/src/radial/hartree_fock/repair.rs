//! The right state of one orbital in the field of the others.
//!
//! A local potential may give an orbital another number of nodes than its place asks for once
//! exchange acts (nd of potassium, nf of radon). The exact operator F_a with the others frozen, as a
//! full matrix, has all its states; the one wanted is told by counting.

use nalgebra::DMatrix;

use super::field::Coefficients;
use super::wave::{Case, Wave, active, dot};
use crate::numerics::generalised::{full, generalised_eigensystem, lift};
use crate::radial::mesh::POINTS;

/// Where other occupied orbitals of equal ℓ are moved out of the way, hartree.
const ASIDE: f64 = 1e6;
/// Part of the largest |P| below which a lobe is not counted.
const FAINT: f64 = 1e-3;

/// The sign of P near the nucleus, where it is not faint.
pub(super) fn first_sign(p: &[f64]) -> f64 {
    let top = p.iter().fold(0.0_f64, |m, p| m.max(p.abs()));
    let first = p.iter().find(|p| p.abs() > FAINT * top);
    first.map_or(1.0, |p| p.signum())
}

/// Whether P has n − ℓ − 1 nodes inside its largest maximum. Further out, exchange may add faint ones.
pub(super) fn has_its_nodes(wave: &Wave) -> bool {
    let mut largest = 0.0_f64;
    let mut nodes = 0;
    let mut at_largest = 0;
    let top = wave.p.iter().fold(0.0_f64, |m, p| m.max(p.abs()));
    let mut sign = 0.0;
    for &p in &wave.p {
        if p.abs() > FAINT * top {
            nodes += usize::from(sign * p < 0.0);
            sign = p.signum();
        }
        if p.abs() > largest {
            largest = p.abs();
            at_largest = nodes;
        }
    }
    at_largest + usize::from(wave.l) + 1 == usize::from(wave.n)
}

/// The state of F_a, orthogonal to the other occupied orbitals of equal ℓ, that has as many lower ones
/// as there are unoccupied n′ < n: its energy and coefficients.
pub(super) fn state(
    case: &Case,
    coefficients: &Coefficients,
    waves: &[Wave],
    place: usize,
) -> Option<(f64, Vec<f64>)> {
    let wave = waves.get(place)?;
    let mesh = &case.mesh;
    let (start, end) = active(mesh, wave.l);
    let local = case
        .operator(wave.l, &wave.inverse_mass, &wave.local)
        .part(start, end);
    let mut matrix = full(&local);
    for other in waves {
        let alike = (other.n, other.l) == (wave.n, wave.l);
        if !alike {
            add_exchange(case, coefficients, wave, other, start, &mut matrix);
        }
    }
    let mut below = usize::from(wave.n) - usize::from(wave.l) - 1;
    for other in waves.iter().filter(|o| o.l == wave.l && o.n != wave.n) {
        below -= usize::from(other.n < wave.n);
        let dual = mesh.metric().times(&other.coefficients);
        lift(&mut matrix, ASIDE, dual.get(start..end)?);
    }
    let factors = mesh.metric().part(start, end).factorise();
    let system = generalised_eigensystem(matrix, &factors)?;
    let energy = *system.values.get(below)?;
    let vector = system.vectors.column_iter().nth(below)?;
    let mut whole = vec![0.0; mesh.size()];
    whole
        .get_mut(start..end)?
        .copy_from_slice(vector.as_slice());
    let sign = dot(&whole, &mesh.metric().times(&wave.coefficients));
    if sign < 0.0 {
        whole.iter_mut().for_each(|c| *c = -*c);
    }
    Some((energy, whole))
}

/// Adds −q_b Σ_k g_k ⟨B_i P_b| r_<^k/r_>^{k+1} |B_j P_b⟩.
fn add_exchange(
    case: &Case,
    coefficients: &Coefficients,
    wave: &Wave,
    other: &Wave,
    start: usize,
    matrix: &mut DMatrix<f64>,
) {
    let mesh = &case.mesh;
    let mut single = vec![0.0; mesh.size()];
    for (mut column, j) in matrix.column_iter_mut().zip(start..) {
        if let Some(c) = single.get_mut(j) {
            *c = 1.0;
        }
        let function = mesh.sample(mesh.values(), &single);
        if let Some(c) = single.get_mut(j) {
            *c = 0.0;
        }
        let density: Vec<f64> = function.iter().zip(&other.p).map(|(b, p)| b * p).collect();
        let mut field = vec![0.0; mesh.intervals() * POINTS];
        for rank in coefficients.exchange(wave.l, other.l) {
            mesh.add_field(rank.k, -other.q * rank.coefficient, &density, &mut field);
        }
        let weighted: Vec<f64> = (field.iter().zip(&other.p))
            .zip(mesh.weights())
            .map(|((u, p), w)| u * p * w)
            .collect();
        let projected = mesh.project(mesh.values(), &weighted);
        for (entry, value) in column.iter_mut().zip(projected.iter().skip(start)) {
            *entry += value;
        }
    }
}
