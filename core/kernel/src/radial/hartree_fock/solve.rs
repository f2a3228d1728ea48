//! The run: rough mesh and local potential, fine mesh and iteration.

use super::atom::{Atom, fault};
use super::field::{Coefficients, total_energy, update};
use super::iterate::{DECAY, End, iterate, reach};
use super::repair::{first_sign, has_its_nodes, state};
use super::start;
use super::wave::{Case, Wave, active};
use super::{Failure, Progress, RadialOrbital, Solution};
use crate::configuration::{Orbital, Subshell};
use crate::constants::FINE_STRUCTURE;
use crate::numerics::banded::Banded;
use crate::numerics::order::sort;
use crate::problem::Problem;
use crate::radial::knots::{Spacing, breaks};
use crate::radial::mesh::{Block, Mesh};
use crate::radial::nucleus::Nucleus;

/// Phase that an interval of the first, rough mesh spans.
const ROUGH: f64 = 1.4;
/// Phase that an interval of the final mesh spans.
const FINE: f64 = 0.65;
/// Meshes that are tried, each larger than the one before.
const MESHES: usize = 8;
/// Orbitals that are put right at most; each is a full eigenproblem.
const REPAIRS: usize = 16;
/// Iterations after which no other start is tried.
const ENOUGH: usize = 500;
/// Shares of the corrections that are taken, one after another where an iteration fails.
const SHARES: [f64; 3] = [1.0, 0.5, 0.2];

/// Radial functions of the average energy of a configuration.
///
/// `progress` is called after each iteration and ends the run by answering false. Total energies
/// come within 2e-11 of the limit of the mesh, with relativity within 2e-10, relative; orbital
/// energies and expectation values within 1e-9.
///
/// # Errors
/// Those of [`Atom::check`]; `not-bound` with the orbital that has no bound state, `not-converged`,
/// `stopped`. The history goes with them.
pub fn solve(atom: &Atom, progress: &mut dyn FnMut(Progress) -> bool) -> Result<Solution, Failure> {
    let mut history = Vec::new();
    match attempts(atom, &mut history, progress) {
        Ok(mut solution) => {
            solution.history = history;
            Ok(solution)
        }
        Err(problem) => Err(Failure { problem, history }),
    }
}

fn attempts(
    atom: &Atom,
    history: &mut Vec<Progress>,
    progress: &mut dyn FnMut(Progress) -> bool,
) -> Result<Solution, Problem> {
    atom.check()?;
    let mut subshells = atom.subshells.clone();
    sort(&mut subshells);
    let highest = subshells.iter().map(|s| s.orbital().l()).max().unwrap_or(0);
    let coefficients = Coefficients::up_to(highest);
    let mut repairs = REPAIRS;
    for share in SHARES {
        if history.len() > ENOUGH {
            break;
        }
        let (rough, mut waves) = start_of(atom, &subshells, highest)?;
        let mut from = rough.mesh.clone();
        let mut spacing = rough.spacing;
        for _ in 0..MESHES {
            if history.len() > 2 * ENOUGH {
                break;
            }
            spacing = fine_spacing(&spacing, &rough, &waves);
            let case = case(atom, spacing, highest)?;
            transfer(&from, &case, &mut waves);
            match iterate(&case, &coefficients, &mut waves, share, history, progress) {
                End::Converged => match set_right(&case, &coefficients, &mut waves, &mut repairs) {
                    Right::All => {
                        let average = update(&case, &coefficients, &mut waves);
                        return Ok(solution(atom, case, waves, average, &subshells));
                    }
                    Right::Changed => {}
                    Right::Unknown => return Err(not_converged(history)),
                },
                End::Cramped => {}
                End::Unbound(n, l) => return Err(not_bound(n, l)),
                End::Stopped => {
                    return Err(Problem::new("stopped", "The run was stopped.", 0, 0));
                }
                End::Failed => match set_right(&case, &coefficients, &mut waves, &mut repairs) {
                    Right::Changed => {}
                    Right::All | Right::Unknown => break,
                },
            }
            from = case.mesh;
        }
    }
    Err(not_converged(history))
}

/// Whether every orbital is the state it should be.
enum Right {
    All,
    /// Some were not, and are now.
    Changed,
    /// Some may not be, and no more is tried.
    Unknown,
}

/// Puts orbitals that are not the state they should be into it.
fn set_right(
    case: &Case,
    coefficients: &Coefficients,
    waves: &mut [Wave],
    repairs: &mut usize,
) -> Right {
    let mut right = Right::All;
    for place in 0..waves.len() {
        if waves.get(place).is_none_or(has_its_nodes) {
            continue;
        }
        if *repairs == 0 {
            return Right::Unknown;
        }
        *repairs -= 1;
        let found = state(case, coefficients, waves, place);
        let (Some(wave), Some((energy, function))) = (waves.get_mut(place), found) else {
            return Right::Unknown;
        };
        if (energy - wave.energy).abs() > 1e-5 * wave.energy.abs() {
            wave.coefficients = function;
            wave.energy = energy;
            right = Right::Changed;
        }
    }
    right
}

#[cold]
#[inline(never)]
fn not_bound(n: u8, l: u8) -> Problem {
    let name = Orbital::new(n, l).map_or_else(String::new, |orbital| orbital.to_string());
    fault(
        "not-bound",
        format!("The {name} electron is not bound in this configuration."),
        "Every electron has to be bound: take fewer electrons or another configuration.".into(),
    )
}

#[cold]
#[inline(never)]
fn not_converged(history: &[Progress]) -> Problem {
    let last = history.last().map_or(f64::INFINITY, |last| last.residual);
    fault(
        "not-converged",
        format!(
            "After {} iterations the orbitals still change by {last:.0e}.",
            history.len()
        ),
        "They count as found when they change by less than 1e-10; take another configuration or charge.".into(),
    )
}

/// The local potential's orbitals on a rough mesh that reaches far.
fn start_of(
    atom: &Atom,
    subshells: &[Subshell],
    highest: u8,
) -> Result<(Case, Vec<Wave>), Problem> {
    let z = f64::from(atom.z);
    let tail = (z - f64::from(atom.electrons()) + 1.0).max(1.0);
    let outer = subshells.iter().map(|s| s.orbital().n()).max();
    let n = f64::from(outer.unwrap_or(1));
    let spacing = Spacing {
        z,
        tail,
        decay: tail / n,
        end: n * (15.0 + 2.2 * n) / tail,
        phase: ROUGH,
    };
    let rough = case(atom, spacing, highest)?;
    let outside = |orbital| {
        let polarisation = atom.polarisation.as_ref();
        polarisation.is_some_and(|p| !p.core.contains(&orbital))
    };
    let mut waves: Vec<Wave> = subshells
        .iter()
        .map(|s| Wave::new(s.orbital(), s.electrons(), outside(s.orbital())))
        .collect();
    match start::orbitals(&rough, z, &mut waves) {
        None => Ok((rough, waves)),
        Some((n, l)) => Err(not_bound(n, l)),
    }
}

/// The fine mesh for the energies known: once more as far where the last did not suffice.
fn fine_spacing(last: &Spacing, rough: &Case, waves: &[Wave]) -> Spacing {
    let least = waves.iter().map(|wave| wave.energy).fold(-1e9, f64::max);
    let end = reach(rough, waves, 1.09 * DECAY);
    let again = last.phase == FINE && end < last.end;
    Spacing {
        decay: (-2.0 * least.min(-1e-4)).sqrt(),
        end: if again { 1.3 * last.end } else { end },
        phase: FINE,
        ..*last
    }
}

fn case(atom: &Atom, spacing: Spacing, highest: u8) -> Result<Case, Problem> {
    let inner = match (atom.relativity, atom.nucleus) {
        // P is r^γ there, with a γ that is no whole number.
        (true, Nucleus::Point) => vec![1e-7 / spacing.z],
        _ => atom.nucleus.break_points(),
    };
    let rank = 2 * usize::from(highest);
    let kinks = atom.nucleus.kinks();
    let Some(mesh) = Mesh::new(breaks(&spacing, &inner), &kinks, rank) else {
        return Err(not_converged(&[]));
    };
    let alpha = if atom.relativity {
        FINE_STRUCTURE.value
    } else {
        0.0
    };
    let twists = mesh.slopes_with(-1.0);
    let kinetic = if atom.relativity {
        Vec::new()
    } else {
        (0..=highest).map(|l| kinetic(&mesh, &twists, l)).collect()
    };
    Ok(Case {
        twists,
        kinetic,
        nuclear: atom.nucleus.potential(spacing.z, mesh.radii()),
        polarisation: (atom.polarisation.as_ref())
            .map(|p| mesh.radii().iter().map(|&r| p.potential(r)).collect()),
        tail: spacing.tail,
        anion: atom.electrons() > u32::from(atom.z),
        alpha_squared: alpha * alpha,
        spacing,
        mesh,
    })
}

/// −½ d²/dr² + ℓ(ℓ+1)/2r².
fn kinetic(mesh: &Mesh, twists: &[Block], l: u8) -> Banded {
    let half: Vec<f64> = mesh.weights().iter().map(|w| 0.5 * w).collect();
    let centrifugal = f64::from(l) * (f64::from(l) + 1.0);
    let barrier: Vec<f64> = (half.iter().zip(mesh.radii()))
        .map(|(w, r)| w * centrifugal / (r * r))
        .collect();
    let mut matrix = mesh.assemble(twists, &half);
    matrix.add(1.0, &mesh.assemble(mesh.values(), &barrier));
    matrix
}

/// Brings the functions from one mesh to another.
fn transfer(from: &Mesh, case: &Case, waves: &mut [Wave]) {
    let all: Vec<&[f64]> = waves.iter().map(|w| w.coefficients.as_slice()).collect();
    let sampled = from.sample_at(&all, case.mesh.radii());
    for (wave, p) in waves.iter_mut().zip(sampled) {
        let (start, end) = active(&case.mesh, wave.l);
        let fitted = case.mesh.fit(&p);
        wave.coefficients = (fitted.iter().zip(0..))
            .map(|(&c, i)| if (start..end).contains(&i) { c } else { 0.0 })
            .collect();
    }
    start::orthonormalise(case, waves);
}

fn solution(
    atom: &Atom,
    case: Case,
    waves: Vec<Wave>,
    average_exchange: Vec<f64>,
    subshells: &[Subshell],
) -> Solution {
    Solution {
        atom: atom.clone(),
        total_energy: total_energy(&waves),
        kinetic_energy: waves.iter().map(|wave| wave.q * wave.kinetic).sum(),
        average_exchange,
        history: Vec::new(),
        mesh: case.mesh,
        orbitals: (waves.into_iter().zip(subshells))
            .map(|(mut wave, subshell)| {
                let sign = first_sign(&wave.p);
                wave.p.iter_mut().for_each(|p| *p *= sign);
                wave.coefficients.iter_mut().for_each(|c| *c *= sign);
                (wave, subshell)
            })
            .map(|(wave, subshell)| RadialOrbital {
                orbital: subshell.orbital(),
                electrons: subshell.electrons(),
                energy: wave.energy,
                one_electron: wave.one_electron,
                kinetic: wave.kinetic,
                potential: wave.local,
                inverse_mass: wave.inverse_mass,
                coefficients: wave.coefficients,
                p: wave.p,
            })
            .collect(),
    }
}
