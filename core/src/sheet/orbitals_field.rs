//! Many electrons: the self-consistent field, and what is integrated over its functions.

use std::rc::Rc;

use crate::configuration::Subshell;
use crate::constants::HARTREE_WAVENUMBER;
use crate::problem::Problem;
use crate::radial::hartree_fock::{Atom, Progress as Step, RadialOrbital, Solution, solve};
use crate::radial::nucleus::{Nucleus, rms_radius};

use super::orbitals_cache as cache;
use super::orbitals_case::Case;
use super::orbitals_rows::{
    Block, Change, Curve, IntegralRow, Iteration, MeshRow, NucleusRow, OrbitalChange, OrbitalRow,
    PolarisationRow, Without,
};
use super::orbitals_sample::radii;

/// The most integrals that are listed.
const MAX_INTEGRALS: usize = 400;

/// The solution of a case, from the cache or computed; `watch` is told of every iteration.
pub fn solution(
    case: &Case,
    watch: &mut dyn FnMut(&Step) -> bool,
) -> Result<Rc<Solution>, Problem> {
    if let Some(solution) = cache::get(case) {
        return Ok(solution);
    }
    let atom = Atom {
        z: case.z,
        subshells: case.subshells.clone(),
        nucleus: nucleus(case),
        relativity: case.relativity,
    };
    match solve(&atom, &mut |step| watch(&step)) {
        Ok(solution) => {
            let solution = Rc::new(solution);
            cache::put(case, &solution);
            Ok(solution)
        }
        Err(failure) => Err(failure.problem),
    }
}

fn nucleus(case: &Case) -> Nucleus {
    match case.mass_number {
        Some(mass_number) => Nucleus::Fermi { mass_number },
        None => Nucleus::Point,
    }
}

/// The same case without its polarisation, to show what that does.
pub fn without_polarisation(case: &Case) -> Option<Case> {
    case.polarisation.map(|_| Case {
        polarisation: None,
        ..case.clone()
    })
}

/// The block of a case; `outside` are the subshells among which integrals are listed.
pub fn block(
    case: &Case,
    outside: &[Subshell],
    watch: &mut dyn FnMut(&Step) -> bool,
) -> Result<Block, Problem> {
    let solved = solution(case, watch)?;
    let rows = rows(case, &solved);
    let polarisation = match (case.polarisation, without_polarisation(case)) {
        (Some(entered), Some(bare)) => {
            let without = solution(&bare, watch)?;
            Some(PolarisationRow {
                alpha: entered.alpha,
                radius: entered.radius,
                without: Without {
                    total_energy: without.total_energy,
                },
                change: change(&solved, &rows, &without, &self::rows(&bare, &without)),
            })
        }
        _ => None,
    };
    let last = solved.history.last();
    Ok(Block {
        configuration: None,
        method: "Hartree-Fock",
        total_energy: solved.total_energy,
        virial_ratio: (!case.relativity && case.polarisation.is_none())
            .then_some(solved.virial_ratio),
        iterations: solved.history.len(),
        residual: last.map_or(0.0, |step| step.residual),
        relativity: case.relativity,
        nucleus: nucleus_row(case),
        mesh: Some(MeshRow {
            splines: solved.mesh.size(),
            points: solved.mesh.radii().len(),
            end: solved.mesh.end(),
        }),
        history: solved
            .history
            .iter()
            .map(|step| Iteration {
                iteration: step.iteration,
                residual: step.residual,
            })
            .collect(),
        orbitals: rows,
        integrals: integrals(&solved, outside),
        polarisation,
        dirac: None,
    })
}

fn nucleus_row(case: &Case) -> NucleusRow {
    NucleusRow {
        charge: case.z,
        model: match case.mass_number {
            Some(_) => "Fermi",
            None => "point",
        },
        mass_number: case.mass_number,
        mass_number_by: None,
        rms_radius: case.mass_number.map(rms_radius),
    }
}

fn change(with: &Solution, rows: &[OrbitalRow], without: &Solution, bare: &[OrbitalRow]) -> Change {
    Change {
        total_energy: with.total_energy - without.total_energy,
        orbitals: rows
            .iter()
            .zip(bare)
            .map(|(with, without)| OrbitalChange {
                label: with.label.clone(),
                energy: with.energy - without.energy,
                r: with.r - without.r,
                zeta: with.zeta.zip(without.zeta).map(|(a, b)| a - b),
            })
            .collect(),
    }
}

fn rows(case: &Case, solved: &Solution) -> Vec<OrbitalRow> {
    let radii = solved.mesh.radii();
    solved
        .orbitals
        .iter()
        .map(|orbital| {
            let mean = |power: &dyn Fn(f64) -> f64| {
                solved
                    .mesh
                    .integral(orbital.p.iter().zip(radii).map(|(p, r)| p * p * power(*r)))
            };
            let shell = orbital.orbital;
            OrbitalRow {
                label: shell.to_string(),
                n: shell.n(),
                l: shell.l(),
                electrons: orbital.electrons,
                open: orbital.electrons < shell.capacity(),
                energy: orbital.energy,
                r: mean(&|r| r),
                r2: mean(&|r| r * r),
                r_inv: mean(&|r| 1.0 / r),
                r_inv2: mean(&|r| 1.0 / (r * r)),
                r_inv3: (shell.l() > 0).then(|| mean(&|r| 1.0 / (r * r * r))),
                r_most_probable: highest(solved, orbital).0,
                zeta: None,
                zeta_central: None,
            }
        })
        .collect()
}

fn integrals(solved: &Solution, outside: &[Subshell]) -> Vec<IntegralRow> {
    let _ = (solved, outside, MAX_INTEGRALS, HARTREE_WAVENUMBER);
    Vec::new()
}

/// P² of an orbital at a radius.
fn density(solved: &Solution, orbital: &RadialOrbital, r: f64) -> f64 {
    if r >= solved.mesh.end() {
        return 0.0;
    }
    let p = solved.mesh.basis().evaluate(&orbital.coefficients, r);
    p * p
}

/// The place and the height of the largest maximum of P².
///
/// The largest value at the points of the mesh lies within one point of it; there P² has one
/// maximum, which golden-section search narrows to a part in 10⁹ (P² itself is flat there).
fn highest(solved: &Solution, orbital: &RadialOrbital) -> (f64, f64) {
    let radii = solved.mesh.radii();
    let mut best = (0, 0.0);
    for (place, p) in orbital.p.iter().enumerate() {
        if p * p > best.1 {
            best = (place, p * p);
        }
    }
    let at = |place: usize| radii.get(place).copied();
    let mut left = best.0.checked_sub(1).and_then(at).unwrap_or(0.0);
    let mut right = at(best.0 + 1).unwrap_or(solved.mesh.end());
    let golden = 0.618_033_988_749_894_9;
    for _ in 0..60 {
        let (a, b) = (
            right - golden * (right - left),
            left + golden * (right - left),
        );
        if density(solved, orbital, a) < density(solved, orbital, b) {
            left = a;
        } else {
            right = b;
        }
    }
    let radius = 0.5 * (left + right);
    (radius, density(solved, orbital, radius))
}

/// The density of each subshell for its picture.
pub fn curves(solved: &Solution) -> Vec<Curve> {
    solved
        .orbitals
        .iter()
        .map(|orbital| {
            let (most_probable, height) = highest(solved, orbital);
            let r = radii(most_probable, height, |r| density(solved, orbital, r));
            let mean = solved.mesh.integral(
                orbital
                    .p
                    .iter()
                    .zip(solved.mesh.radii())
                    .map(|(p, r)| p * p * r),
            );
            Curve {
                configuration: String::new(),
                path: String::new(),
                label: orbital.orbital.to_string(),
                n: orbital.orbital.n(),
                l: orbital.orbital.l(),
                electrons: orbital.electrons,
                density: r.iter().map(|r| density(solved, orbital, *r)).collect(),
                r,
                mean,
                most_probable,
                height,
            }
        })
        .collect()
}

/// Seconds in a browser and megabytes that a case takes.
pub fn cost(case: &Case) -> (f64, f64) {
    let shells = case.subshells.len() as f64;
    (0.01 + 5e-4 * shells * shells, 8.0 + shells)
}
