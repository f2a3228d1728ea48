//! The start: orbitals of a self-consistent local potential.

use core::f64::consts::PI;

use super::wave::{Case, Wave, active, add, dot};
use crate::numerics::anderson::Anderson;
use crate::numerics::banded::Banded;
use crate::numerics::banded_eigen::{Eigenpair, eigenpair};
use crate::radial::thomas_fermi::effective_charge;

/// Rounds of the local potential at most.
const ROUNDS: usize = 25;
/// The change of the screening charge, in electrons, below which it counts as self-consistent.
const SETTLED: f64 = 0.01;
/// The strength of the local exchange, between 2/3 of a uniform gas and 1 of Slater.
const EXCHANGE: f64 = 0.75;

/// Gives every wave the eigenfunction with n − ℓ − 1 nodes of one local potential, made
/// self-consistent in a few rounds from the statistical atom; says which one has none.
///
/// V = −Z/r + U⁰(ρ) − 1.5 · 0.75 (3ρ/π)^{1/3}, kept below −tail/r so that every electron sees the
/// charge `tail` far out. Sources: Slater, Phys. Rev. 81, 385 (1951); Latter, Phys. Rev. 99, 510 (1955).
pub(super) fn orbitals(case: &Case, z: f64, waves: &mut [Wave]) -> Option<(u8, u8)> {
    let tail = case.tail;
    let radii = case.mesh.radii();
    let mut screening: Vec<f64> = radii
        .iter()
        .map(|&r| z - effective_charge(z, tail, r))
        .collect();
    let alone = waves.iter().map(|wave| wave.q).sum::<f64>() <= 1.0;
    let mut memory = Anderson::new(5);
    for _ in 0..ROUNDS {
        let local: Vec<f64> = (screening.iter().zip(radii))
            .zip(&case.nuclear)
            .map(|((charge, r), nuclear)| nuclear + charge / r)
            .collect();
        let missing = eigenfunctions(case, z, &local, waves);
        if missing.is_some() {
            return missing;
        }
        let change: Vec<f64> = (self_consistent(case, z, tail, waves).iter().zip(&screening))
            .map(|(new, old)| 0.5 * (new - old))
            .collect();
        let largest = change.iter().fold(0.0_f64, |m, c| m.max(c.abs()));
        if alone || largest < SETTLED {
            break;
        }
        let step = memory.step(&screening, &change);
        add(&mut screening, 1.0, &step);
    }
    orthonormalise(case, waves);
    None
}

/// The screening charge r (V − V_nucleus) of the waves' density.
fn self_consistent(case: &Case, z: f64, tail: f64, waves: &[Wave]) -> Vec<f64> {
    let radii = case.mesh.radii();
    let mut density = vec![0.0; radii.len()];
    for wave in waves {
        for (density, p) in density.iter_mut().zip(&wave.p) {
            *density += wave.q * p * p;
        }
    }
    let mut field = vec![0.0; radii.len()];
    case.mesh.add_field(0, 1.0, &density, &mut field);
    for ((field, rho), r) in field.iter_mut().zip(&density).zip(radii) {
        let uniform = libm::cbrt(3.0 * rho / (4.0 * PI * PI * r * r));
        *field = (r * (*field - 1.5 * EXCHANGE * uniform)).min(z - tail);
    }
    field
}

fn eigenfunctions(case: &Case, z: f64, local: &[f64], waves: &mut [Wave]) -> Option<(u8, u8)> {
    let mesh = &case.mesh;
    for wave in waves.iter_mut() {
        let (start, end) = active(mesh, wave.l);
        let below = usize::from(wave.n.saturating_sub(wave.l).saturating_sub(1));
        let metric = mesh.metric().part(start, end);
        let matrix = hamiltonian(case, wave, local).part(start, end);
        let known = wave.energy;
        let near = (known < 0.0)
            .then(|| eigenpair(&matrix, &metric, below, 1.2 * known, 0.83 * known))
            .flatten();
        let found = near.or_else(|| eigenpair(&matrix, &metric, below, -z * z - 1.0, 1e4));
        let Some(Eigenpair { value, vector }) = found else {
            return Some((wave.n, wave.l));
        };
        let mut coefficients = vec![0.0; mesh.size()];
        if let Some(part) = coefficients.get_mut(start..end) {
            part.copy_from_slice(&vector);
        }
        wave.energy = value;
        wave.p = mesh.sample(mesh.values(), &coefficients);
        wave.coefficients = coefficients;
    }
    None
}

/// Kinetic energy and V, with relativity at the ε known so far.
fn hamiltonian(case: &Case, wave: &Wave, local: &[f64]) -> Banded {
    let half = 0.5 * case.alpha_squared;
    let energy = wave.energy.min(0.0);
    let inverse_mass: Vec<f64> = (local.iter())
        .map(|v| 1.0 / (1.0 + half * (energy - v)).max(0.05))
        .collect();
    case.operator(wave.l, &inverse_mass, local)
}

/// Makes the functions of equal ℓ orthonormal, each against those before it.
pub(super) fn orthonormalise(case: &Case, waves: &mut [Wave]) {
    let metric = case.mesh.metric();
    let mut done: Vec<(u8, Vec<f64>, Vec<f64>)> = Vec::with_capacity(waves.len());
    for wave in waves.iter_mut() {
        for (_, function, dual) in done.iter().filter(|(l, _, _)| *l == wave.l) {
            let overlap = dot(&wave.coefficients, dual);
            add(&mut wave.coefficients, -overlap, function);
        }
        let dual = metric.times(&wave.coefficients);
        let norm = dot(&wave.coefficients, &dual).sqrt();
        let factor = if norm > 0.0 { 1.0 / norm } else { 0.0 };
        wave.coefficients.iter_mut().for_each(|c| *c *= factor);
        let dual = dual.iter().map(|d| d * factor).collect();
        done.push((wave.l, wave.coefficients.clone(), dual));
    }
}
