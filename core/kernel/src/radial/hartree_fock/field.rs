//! The fields in which the electrons of a configuration move.
//!
//! For subshell a, with U^k(ab) = ∫ r_<^k/r_>^{k+1} P_a P_b ds and the coefficients of
//! [`crate::radial::average`]:
//! V_a = V_nucleus + Σ_b q_b U⁰(bb) − U⁰(aa) − (q_a − 1) Σ_{k>0} c_k U^k(aa),
//! X_a = −Σ_{b≠a} q_b Σ_k g_k U^k(ab) P_b,
//! F_a P_a = K_a P_a + V_a P_a + X_a = ½ q_a^{-1} δE_av/δP_a.
//! Source: Froese Fischer, *The Hartree–Fock Method for Atoms* (1977), chapters 2 and 3.

use super::wave::{Case, Wave, add, dot};
use crate::radial::average::{Rank, exchange, within};

/// The exchange ranks of every pair ℓ ≤ ℓ′ and the ranks within a subshell, looked up once.
pub(super) struct Coefficients {
    pairs: Vec<Vec<Vec<Rank>>>,
    within: Vec<Vec<Rank>>,
}

impl Coefficients {
    pub fn up_to(highest: u8) -> Self {
        Coefficients {
            pairs: (0..=highest)
                .map(|l| (0..=highest).map(|other| exchange(l, other)).collect())
                .collect(),
            within: (0..=highest).map(within).collect(),
        }
    }

    pub fn exchange(&self, l: u8, other: u8) -> &[Rank] {
        self.pairs
            .get(usize::from(l))
            .and_then(|row| row.get(usize::from(other)))
            .map_or(&[], Vec::as_slice)
    }

    pub fn within(&self, l: u8) -> &[Rank] {
        self.within.get(usize::from(l)).map_or(&[], Vec::as_slice)
    }
}

/// Everything of the waves that follows from their coefficients; returns Slater's average of the
/// exchange potentials at the points.
pub(super) fn update(case: &Case, coefficients: &Coefficients, waves: &mut [Wave]) -> Vec<f64> {
    let points = case.mesh.radii().len();
    let mut density = vec![0.0; points];
    let mut total = vec![0.0; points];
    for wave in waves.iter_mut() {
        wave.p = case.mesh.sample(case.mesh.values(), &wave.coefficients);
        wave.twist = case.mesh.sample(&case.twists, &wave.coefficients);
        wave.exchange.clear();
        wave.exchange.resize(points, 0.0);
        own_fields(case, coefficients, wave, &mut density);
        if let Some(field) = wave.own.first() {
            add(&mut total, wave.q, field);
        }
    }
    for wave in waves.iter_mut() {
        local(case, coefficients, wave, &total);
    }
    let mut field = vec![0.0; points];
    let mut rest = &mut *waves;
    while let Some((a, after)) = rest.split_first_mut() {
        for b in after.iter_mut() {
            for ((density, p), other) in density.iter_mut().zip(&a.p).zip(&b.p) {
                *density = p * other;
            }
            field.fill(0.0);
            for rank in coefficients.exchange(a.l, b.l) {
                case.mesh
                    .add_field(rank.k, rank.coefficient, &density, &mut field);
            }
            for (((x, other), w), p) in a
                .exchange
                .iter_mut()
                .zip(&mut b.exchange)
                .zip(&field)
                .zip(a.p.iter().zip(&b.p))
            {
                *x -= b.q * w * p.1;
                *other -= a.q * w * p.0;
            }
        }
        rest = after;
    }
    let average = slater_average(points, waves);
    for wave in waves.iter_mut() {
        energies(case, wave, &average);
        forces(case, wave);
    }
    average
}

/// U^k of the subshell's own density.
fn own_fields(case: &Case, coefficients: &Coefficients, wave: &mut Wave, density: &mut [f64]) {
    for (density, p) in density.iter_mut().zip(&wave.p) {
        *density = p * p;
    }
    let ranks = core::iter::once(0).chain(coefficients.within(wave.l).iter().map(|rank| rank.k));
    wave.own = ranks
        .map(|k| {
            let mut field = vec![0.0; density.len()];
            case.mesh.add_field(k, 1.0, density, &mut field);
            field
        })
        .collect();
}

fn local(case: &Case, coefficients: &Coefficients, wave: &mut Wave, total: &[f64]) {
    wave.local = case.nuclear.clone();
    add(&mut wave.local, 1.0, total);
    if let (true, Some(polarisation)) = (wave.polarised, &case.polarisation) {
        add(&mut wave.local, 1.0, polarisation);
    }
    let mut own = wave.own.iter();
    if let Some(field) = own.next() {
        add(&mut wave.local, -1.0, field);
    }
    for (field, rank) in own.zip(coefficients.within(wave.l)) {
        add(&mut wave.local, -(wave.q - 1.0) * rank.coefficient, field);
    }
}

/// Σ q P X / Σ q P² (Slater, Phys. Rev. 81, 385 (1951)), the self-interaction being in the local
/// potentials already.
fn slater_average(points: usize, waves: &[Wave]) -> Vec<f64> {
    let mut above = vec![0.0; points];
    let mut below = vec![1e-200; points];
    for wave in waves {
        for (((above, below), p), x) in above
            .iter_mut()
            .zip(&mut below)
            .zip(&wave.p)
            .zip(&wave.exchange)
        {
            *above += wave.q * p * x;
            *below += wave.q * p * p;
        }
    }
    for (above, below) in above.iter_mut().zip(&below) {
        *above /= below;
    }
    above
}

/// ε, I and, with relativity, the mass that depends on ε: M = 1 + ½α²(ε − V).
fn energies(case: &Case, wave: &mut Wave, average: &[f64]) {
    let mesh = &case.mesh;
    let centrifugal = wave.centrifugal();
    let potential = mesh.integral(
        (wave.p.iter().zip(&wave.local))
            .zip(&wave.exchange)
            .map(|((p, v), x)| p * (v * p + x)),
    );
    let nuclear = mesh.integral(wave.p.iter().zip(&case.nuclear).map(|(p, v)| p * p * v));
    let polar = match (wave.polarised, &case.polarisation) {
        (true, Some(field)) => mesh.integral(wave.p.iter().zip(field).map(|(p, v)| p * p * v)),
        _ => 0.0,
    };
    // (P′ − P/r)² + ℓ(ℓ+1) P²/r², the density of ⟨p²⟩.
    let momentum: Vec<f64> = (wave.p.iter().zip(&wave.twist))
        .zip(mesh.radii())
        .map(|((p, d), r)| d * d + centrifugal * (p / r) * (p / r))
        .collect();
    if case.alpha_squared == 0.0 {
        wave.inverse_mass.clear();
        wave.inverse_mass.resize(momentum.len(), 1.0);
        wave.kinetic = 0.5 * mesh.integral(momentum.iter().copied());
    } else {
        let half = 0.5 * case.alpha_squared;
        let base: Vec<f64> = (wave.local.iter().zip(average))
            .map(|(v, x)| 1.0 - half * (v + x))
            .collect();
        // ε = K(ε) + potential, by Newton's iteration: K falls as ε rises.
        let mut energy = wave.energy;
        for _ in 0..30 {
            let (mut value, mut slope) = (0.0, 0.0);
            for ((w, s), b) in mesh.weights().iter().zip(&momentum).zip(&base) {
                let inverse = 1.0 / (b + half * energy).max(0.05);
                value += 0.5 * w * s * inverse;
                slope -= 0.5 * w * s * inverse * inverse * half;
            }
            let change = (value + potential - energy) / (1.0 - slope);
            energy += change;
            wave.kinetic = value + slope * change;
            if change.abs() <= 1e-15 * energy.abs() {
                break;
            }
        }
        wave.inverse_mass = base
            .iter()
            .map(|b| 1.0 / (b + half * energy).max(0.05))
            .collect();
    }
    wave.energy = wave.kinetic + potential;
    wave.one_electron = wave.kinetic + nuclear + polar;
}

fn forces(case: &Case, wave: &mut Wave) {
    let mesh = &case.mesh;
    let centrifugal = wave.centrifugal();
    let parts = (wave.twist.iter().zip(&wave.inverse_mass)).zip(mesh.weights());
    let slope_part: Vec<f64> = parts.map(|((d, m), w)| 0.5 * w * d * m).collect();
    let parts = (wave.p.iter().zip(mesh.radii()))
        .zip(&wave.inverse_mass)
        .zip(mesh.weights());
    let mut value_part: Vec<f64> = parts
        .map(|(((p, r), m), w)| 0.5 * w * m * centrifugal * p / (r * r))
        .collect();
    let slope_force = mesh.project(&case.twists, &slope_part);
    if case.alpha_squared > 0.0 {
        wave.kinetic_force = mesh.project(mesh.values(), &value_part);
        add(&mut wave.kinetic_force, 1.0, &slope_force);
    }
    let rest = (wave.p.iter().zip(&wave.local))
        .zip(&wave.exchange)
        .zip(mesh.weights());
    for (value, (((p, v), x), w)) in value_part.iter_mut().zip(rest) {
        *value += w * (v * p + x);
    }
    wave.force = mesh.project(mesh.values(), &value_part);
    add(&mut wave.force, 1.0, &slope_force);
}

/// E_av = ½ Σ q (I + ε).
pub(super) fn total_energy(waves: &[Wave]) -> f64 {
    waves
        .iter()
        .map(|wave| 0.5 * wave.q * (wave.one_electron + wave.energy))
        .sum()
}

/// ⟨a|F_b|b⟩ from b's force; `kinetic` gives the kinetic part alone.
pub(super) fn between(a: &Wave, b: &Wave) -> (f64, f64) {
    (
        dot(&a.coefficients, &b.force),
        dot(&a.coefficients, &b.kinetic_force),
    )
}
