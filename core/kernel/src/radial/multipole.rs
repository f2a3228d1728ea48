//! Electric multipole integrals ∫ P_a r^k P_b dr between orbitals of one configuration or of two that
//! were optimised separately.
//!
//! In two runs the other electrons' orbitals differ too. For the jump of one electron from a to b,
//! the matrix element of Σ r^k C^k between the two configurations' determinants is the angular factor
//! times
//!
//! integral = ⟨ã|r^k|b̃⟩ Π_c ⟨c|c′⟩^{q_c},
//!
//! ã = a − Σ ⟨a|d′⟩ (S⁻¹)_{d′c} c, b̃ = b − Σ d′ (S⁻¹)_{d′c} ⟨c|b⟩, S_{cd′} = ⟨c|d′⟩: c, d run over the full
//! shells of ℓ_a (ℓ_b) that stay, primes mark the final configuration, q_c are the electrons that
//! stay. Exact for full shells with one electron outside but for the off-diagonal part of the
//! determinants of S, which is of second order in [`Multipole::largest_cross`]; for open shells that
//! stay, overlaps with their neighbours of equal ℓ are left out too.
//! Source: Löwdin, Phys. Rev. 97, 1474 (1955).

use super::hartree_fock::{Polarisation, RadialOrbital, Solution};
use super::mesh::POINTS;
use crate::configuration::Orbital;
use crate::numerics::gauss_legendre::gauss_legendre;
use crate::numerics::linear::solve;
use crate::numerics::order::sort_by;
use crate::problem::Problem;

/// An integral with what the other orbitals make of it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Multipole {
    /// The integral with all overlaps, a₀^k.
    pub integral: f64,
    /// ⟨a|r^k|b⟩ alone, a₀^k.
    pub bare: f64,
    /// Π ⟨c|c′⟩^{q_c} of the electrons that stay.
    pub overlap: f64,
    /// The largest |⟨c|d′⟩| of different orbitals of equal ℓ, a and b included: its square bounds
    /// what is left out.
    pub largest_cross: f64,
}

impl Solution {
    /// ∫ P_a r^k P_b dr of two orbitals of this configuration, a₀^k, for k = 0, 1, 2.
    ///
    /// With core polarisation and k = 1, r carries the factor of [`Polarisation::dipole`].
    pub fn multipole(&self, k: u8, a: &RadialOrbital, b: &RadialOrbital) -> f64 {
        let polarisation = self.atom.polarisation.as_ref();
        let parts = (a.p.iter().zip(&b.p)).zip(self.mesh.radii());
        let terms = parts.map(|((p, s), &r)| p * s * operator(k, r, polarisation));
        self.mesh.integral(terms)
    }
}

/// r^k, with the dipole that is induced in the core.
fn operator(k: u8, r: f64, polarisation: Option<&Polarisation>) -> f64 {
    let power = (0..k).fold(1.0, |power, _| power * r);
    match polarisation {
        Some(polarisation) if k == 1 => power * polarisation.dipole(r),
        _ => power,
    }
}

/// ∫ P_a r^k P_b dr for the jump of one electron from `a` in `from` to `b` in `to`, k = 1 or 2.
///
/// Taken on the break points of both meshes together, so that the quadrature loses nothing. Where the
/// two runs differ in their core polarisation, that of `from` makes the dipole.
///
/// # Errors
/// `multipole-out-of-range`, `orbital-not-occupied`, and `not-a-jump` unless the configurations differ
/// by just this electron.
pub fn between(
    k: u8,
    (from, a): (&Solution, Orbital),
    (to, b): (&Solution, Orbital),
) -> Result<Multipole, Problem> {
    if !(1..=2).contains(&k) {
        return Err(Problem::new(
            "multipole-out-of-range",
            "Only E1 and E2 integrals are computed.",
            0,
            0,
        ));
    }
    let (Some(place_a), Some(place_b)) = (place(from, a), place(to, b)) else {
        return Err(Problem::new(
            "orbital-not-occupied",
            "The electron's orbital is not occupied in its configuration.",
            0,
            0,
        ));
    };
    if !is_jump(from, a, to, b) {
        return Err(Problem::new(
            "not-a-jump",
            "The two configurations differ by more than one electron.",
            0,
            0,
        ));
    }
    let common = Common::new(from, to);
    let polarisation = from
        .atom
        .polarisation
        .as_ref()
        .or(to.atom.polarisation.as_ref());
    let operator: Vec<f64> = (common.radii.iter())
        .map(|&r| operator(k, r, polarisation))
        .collect();
    let left = common.without_core(from, to, place_a, Side::From);
    let right = common.without_core(from, to, place_b, Side::To);
    let (mut overlap, mut largest_cross) = (1.0, 0.0_f64);
    for (c, f) in from.orbitals.iter().zip(&common.from) {
        for (d, g) in to.orbitals.iter().zip(&common.to) {
            if c.orbital.l() != d.orbital.l() {
                continue;
            }
            let product = common.product(f, g);
            if c.orbital != d.orbital {
                largest_cross = largest_cross.max(product.abs());
                continue;
            }
            let stay = (c.electrons - u32::from(c.orbital == a)).min(d.electrons);
            overlap *= (0..stay).fold(1.0, |power, _| power * product);
        }
    }
    let bare = match (common.from.get(place_a), common.to.get(place_b)) {
        (Some(f), Some(g)) => common.with(f, &operator, g),
        _ => 0.0,
    };
    Ok(Multipole {
        integral: common.with(&left, &operator, &right) * overlap,
        bare,
        overlap,
        largest_cross,
    })
}

fn place(solution: &Solution, orbital: Orbital) -> Option<usize> {
    solution.orbitals.iter().position(|o| o.orbital == orbital)
}

fn is_jump(from: &Solution, a: Orbital, to: &Solution, b: Orbital) -> bool {
    let held = |solution: &Solution, orbital: Orbital| {
        (solution.orbital(orbital)).map_or(0, |found| found.electrons)
    };
    let every = from.orbitals.iter().chain(&to.orbitals);
    a != b
        && from.atom.z == to.atom.z
        && every.into_iter().all(|o| {
            let now = held(from, o.orbital) + u32::from(o.orbital == b);
            now == held(to, o.orbital) + u32::from(o.orbital == a)
        })
}

#[derive(Clone, Copy, PartialEq)]
pub(super) enum Side {
    From,
    To,
}

/// The functions of both runs at quadrature points that suit both.
pub(super) struct Common {
    /// The break points of both meshes.
    pub breaks: Vec<f64>,
    pub radii: Vec<f64>,
    pub weights: Vec<f64>,
    pub from: Vec<Vec<f64>>,
    pub to: Vec<Vec<f64>>,
}

impl Common {
    pub fn new(from: &Solution, to: &Solution) -> Self {
        let mut breaks: Vec<f64> = from.mesh.breaks().to_vec();
        breaks.extend_from_slice(to.mesh.breaks());
        sort_by(&mut breaks, f64::total_cmp);
        breaks.dedup();
        let rule = gauss_legendre(POINTS);
        let (mut radii, mut weights) = (Vec::new(), Vec::new());
        for pair in breaks.windows(2) {
            let [start, end] = pair else { continue };
            let half = 0.5 * (end - start);
            for &(x, w) in &rule {
                radii.push(start + half * (1.0 + x));
                weights.push(half * w);
            }
        }
        Common {
            from: sample(from, &radii),
            to: sample(to, &radii),
            breaks,
            radii,
            weights,
        }
    }

    pub fn product(&self, f: &[f64], g: &[f64]) -> f64 {
        let parts = self.weights.iter().zip(f).zip(g);
        parts.map(|((w, f), g)| w * f * g).sum()
    }

    pub fn with(&self, f: &[f64], operator: &[f64], g: &[f64]) -> f64 {
        let parts = (self.weights.iter().zip(f)).zip(operator.iter().zip(g));
        parts.map(|((w, f), (o, g))| w * f * o * g).sum()
    }

    /// ã or b̃: the jumping orbital without what the other side's full shells of its ℓ hold of it.
    pub fn without_core(
        &self,
        from: &Solution,
        to: &Solution,
        place: usize,
        side: Side,
    ) -> Vec<f64> {
        let (own, others, own_solution, other_solution) = match side {
            Side::From => (&self.from, &self.to, from, to),
            Side::To => (&self.to, &self.from, to, from),
        };
        let Some(mut function) = own.get(place).cloned() else {
            return Vec::new();
        };
        let Some(jumping) = own_solution.orbitals.get(place).map(|o| o.orbital) else {
            return function;
        };
        let stays = |o: &RadialOrbital| {
            let full = |o: &RadialOrbital| o.electrons == o.orbital.capacity();
            o.orbital.l() == jumping.l()
                && o.orbital != jumping
                && full(o)
                && other_solution.orbital(o.orbital).is_some_and(full)
        };
        let core: Vec<(&Vec<f64>, &Vec<f64>)> = (own_solution.orbitals.iter().zip(own))
            .filter(|(o, _)| stays(o))
            .filter_map(|(o, f)| Some((f, others.get(place_of(other_solution, o)?)?)))
            .collect();
        // Σ_c x_c ⟨c|d′⟩ = ⟨function|d′⟩ for every d′.
        let rows = core
            .iter()
            .map(|(_, d)| {
                let mut row: Vec<f64> = core.iter().map(|(c, _)| self.product(c, d)).collect();
                row.push(self.product(&function, d));
                row
            })
            .collect();
        for (x, (c, _)) in solve(rows).unwrap_or_default().iter().zip(&core) {
            for (f, c) in function.iter_mut().zip(c.iter()) {
                *f -= x * c;
            }
        }
        function
    }
}

fn place_of(solution: &Solution, orbital: &RadialOrbital) -> Option<usize> {
    place(solution, orbital.orbital)
}

/// Every orbital's P at these radii.
fn sample(solution: &Solution, radii: &[f64]) -> Vec<Vec<f64>> {
    let all: Vec<&[f64]> = (solution.orbitals.iter())
        .map(|o| o.coefficients.as_slice())
        .collect();
    solution.mesh.sample_at(&all, radii)
}
