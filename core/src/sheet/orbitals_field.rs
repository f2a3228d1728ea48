//! Many electrons: the self-consistent field, and what is integrated over its functions.

use std::rc::Rc;

use crate::configuration::{Orbital, Subshell};
use crate::constants::HARTREE_WAVENUMBER;
use crate::problem::Problem;
use crate::radial::hartree_fock::{
    Atom, Progress as Step, RadialOrbital, Solution, polarisability, solve,
};
use crate::radial::nucleus::{Nucleus, rms_radius};

use super::orbitals_cache as cache;
use super::orbitals_rows::{
    Block, Change, Curve, IntegralRow, Iteration, MeshRow, NucleusRow, OrbitalChange, OrbitalRow,
    PolarisationOffer, PolarisationRow, Without,
};
use super::orbitals_sample::radii;

/// The most integrals that are listed.
const MAX_INTEGRALS: usize = 400;

/// The solution of an atom, from the cache or computed; `watch` is told of every iteration.
pub fn solution(
    atom: &Atom,
    watch: &mut dyn FnMut(&Step) -> bool,
) -> Result<Rc<Solution>, Problem> {
    if let Some(solution) = cache::get(atom) {
        return Ok(solution);
    }
    let solution = solve(atom, &mut |step| watch(&step)).map_err(|failure| failure.problem)?;
    let solution = Rc::new(solution);
    cache::put(&solution);
    Ok(solution)
}

/// The same atom without its polarisation, to show what that does.
pub fn without_polarisation(atom: &Atom) -> Option<Atom> {
    atom.polarisation.as_ref().map(|_| Atom {
        polarisation: None,
        ..atom.clone()
    })
}

/// The block of an atom; `outside` are the subshells among which integrals are listed.
pub fn block(
    atom: &Atom,
    outside: &[Subshell],
    watch: &mut dyn FnMut(&Step) -> bool,
) -> Result<Block, Problem> {
    let solved = solution(atom, watch)?;
    let rows = rows(&solved);
    let polarisation = match (&atom.polarisation, without_polarisation(atom)) {
        (Some(entered), Some(bare)) => {
            let without = solution(&bare, watch)?;
            Some(PolarisationRow {
                alpha: entered.alpha,
                radius: entered.radius,
                core: join(&entered.core),
                without: Without {
                    total_energy: without.total_energy,
                },
                change: change(&solved, &rows, &without, &self::rows(&without)),
            })
        }
        _ => None,
    };
    Ok(Block {
        configuration: None,
        method: "Hartree-Fock",
        total_energy: solved.total_energy,
        virial_ratio: (!atom.relativity && polarisation.is_none()).then(|| solved.virial_ratio()),
        iterations: solved.iterations(),
        residual: solved.residual(),
        relativity: atom.relativity,
        nucleus: nucleus_row(atom),
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
        polarisation_offer: match polarisation {
            Some(_) => None,
            None => offer(&solved, outside),
        },
        polarisation,
        dirac: None,
    })
}

/// The core polarisation that could be entered: a published polarisability, and for the cut-off radius
/// the mean radius of the core's outermost orbital (Migdalek and Baylis 1978).
fn offer(solved: &Solution, outside: &[Subshell]) -> Option<PolarisationOffer> {
    let core: Vec<&RadialOrbital> = solved
        .orbitals
        .iter()
        .filter(|inner| outside.iter().all(|shell| shell.orbital() != inner.orbital))
        .collect();
    let full = core
        .iter()
        .all(|inner| inner.electrons == inner.orbital.capacity());
    let electrons = core.iter().map(|inner| inner.electrons).sum();
    let alpha = polarisability(solved.atom.z, electrons).filter(|_| full)?;
    let radius = core
        .iter()
        .filter_map(|inner| solved.expectation(inner, 1))
        .fold(0.0, f64::max);
    let names: Vec<Orbital> = core.iter().map(|inner| inner.orbital).collect();
    Some(PolarisationOffer {
        alpha: format!("{alpha} a0^3"),
        radius: format!("{radius:.2} a0"),
        core: join(&names),
        source: "Johnson, Kolb and Huang, At. Data Nucl. Data Tables 28, 333 (1983), from memory",
    })
}

fn join(orbitals: &[Orbital]) -> String {
    let names: Vec<String> = orbitals.iter().map(Orbital::to_string).collect();
    names.join(" ")
}

fn nucleus_row(atom: &Atom) -> NucleusRow {
    let (model, mass_number) = match atom.nucleus {
        Nucleus::Point => ("point", None),
        Nucleus::Uniform { mass_number } => ("uniform sphere", Some(mass_number)),
        Nucleus::Fermi { mass_number } => ("Fermi distribution", Some(mass_number)),
    };
    NucleusRow {
        charge: atom.z,
        model,
        mass_number,
        mass_number_by: None,
        rms_radius: mass_number.map(rms_radius),
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

fn rows(solved: &Solution) -> Vec<OrbitalRow> {
    let row = |orbital: &RadialOrbital| {
        let mean = |k: i32| solved.expectation(orbital, k);
        let shell = orbital.orbital;
        let zeta = |hartree: Option<f64>| hartree.map(|zeta| zeta * HARTREE_WAVENUMBER.value);
        OrbitalRow {
            label: shell.to_string(),
            n: shell.n(),
            l: shell.l(),
            electrons: orbital.electrons,
            open: orbital.electrons < shell.capacity(),
            energy: orbital.energy,
            r: mean(1).unwrap_or(0.0),
            r2: mean(2).unwrap_or(0.0),
            r_inv: mean(-1).unwrap_or(0.0),
            r_inv2: mean(-2).unwrap_or(0.0),
            r_inv3: mean(-3),
            r_most_probable: solved.most_probable(orbital).0,
            zeta: zeta(solved.zeta(orbital)),
            zeta_central: zeta(solved.zeta_central(orbital)),
        }
    };
    solved.orbitals.iter().map(row).collect()
}

/// F^k and G^k within and between the subshells that stand outside the core, in cm⁻¹.
fn integrals(solved: &Solution, outside: &[Subshell]) -> Vec<IntegralRow> {
    let shells: Vec<&RadialOrbital> = outside
        .iter()
        .filter_map(|shell| solved.orbital(shell.orbital()))
        .collect();
    let mut rows = Vec::new();
    let mut add = |letter: char, k: usize, a: &RadialOrbital, b: &RadialOrbital, value| {
        if let Some(hartree) = value
            && rows.len() < MAX_INTEGRALS
        {
            let hartree: f64 = hartree;
            rows.push(IntegralRow {
                name: format!("{letter}{k}({},{})", a.orbital, b.orbital),
                value: hartree * HARTREE_WAVENUMBER.value,
            });
        }
    };
    for (place, a) in shells.iter().enumerate() {
        for b in shells.iter().skip(place) {
            let highest = usize::from(a.orbital.l()) + usize::from(b.orbital.l());
            (0..=highest).for_each(|k| add('F', k, a, b, solved.f(k, a, b)));
            if a.orbital != b.orbital {
                (0..=highest).for_each(|k| add('G', k, a, b, solved.g(k, a, b)));
            }
        }
    }
    rows
}

/// The density of each subshell for its picture.
pub fn curves(solved: &Solution) -> Vec<Curve> {
    solved
        .orbitals
        .iter()
        .map(|orbital| {
            let (most_probable, height) = solved.most_probable(orbital);
            let density = |r: f64| {
                let p = solved.p_at(orbital, r);
                p * p
            };
            let r = radii(most_probable, height, density);
            Curve {
                configuration: String::new(),
                path: String::new(),
                label: orbital.orbital.to_string(),
                n: orbital.orbital.n(),
                l: orbital.orbital.l(),
                electrons: orbital.electrons,
                density: r.iter().map(|r| density(*r)).collect(),
                r,
                mean: solved.expectation(orbital, 1).unwrap_or(0.0),
                most_probable,
                height,
            }
        })
        .collect()
}

/// Seconds in a browser and megabytes that an atom takes.
pub fn cost(atom: &Atom) -> (f64, f64) {
    let shells = atom.subshells.len() as f64;
    // Measured in Chromium’s engine: He 1.4 ms, Fe 30 ms, Xe 37 ms, U 64 ms; the first run is slower.
    (0.006 + 3e-4 * shells * shells, 2.0 + 0.1 * shells)
}
