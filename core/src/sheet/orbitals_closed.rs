//! One electron in the field of a nucleus: everything in closed form.

use crate::configuration::Orbital;
use crate::constants::{
    ALPHA_MASS_U, DEUTERON_MASS_U, ELECTRON_MASS_U, HARTREE_WAVENUMBER, PROTON_MASS_U,
};
use crate::elements;
use crate::problem::Problem;
use crate::radial::hydrogenic::{Hydrogenic, dirac};
use crate::radial::nucleus::stable_mass_number;
use crate::terms::{Level, Term, label};

use super::orbitals_rows::{Block, Curve, DiracLevel, DiracRow, NucleusRow, OrbitalRow};
use super::orbitals_sample::radii;

/// The block of one electron in one of the orbitals (or in none: a bare shell).
pub fn block(
    z: u8,
    mass_number: Option<u16>,
    orbitals: &[Orbital],
    occupied: bool,
    relativity: bool,
) -> Result<Block, Problem> {
    let (number, _) = mass_number_of(z, mass_number);
    let dirac = dirac_row(z, number, orbitals)?;
    let mut rows = Vec::new();
    for orbital in orbitals {
        rows.push(row(z, *orbital, occupied, relativity)?);
    }
    Ok(Block {
        configuration: None,
        method: "closed form",
        total_energy: rows.first().map_or(0.0, |row| row.energy),
        virial_ratio: None,
        iterations: 0,
        residual: 0.0,
        relativity,
        nucleus: NucleusRow {
            charge: z,
            model: "point",
            mass_number: Some(number),
            mass_number_by: None,
            rms_radius: None,
        },
        mesh: None,
        history: Vec::new(),
        orbitals: rows,
        integrals: Vec::new(),
        polarisation: None,
        polarisation_offer: None,
        dirac: Some(dirac),
    })
}

fn row(z: u8, orbital: Orbital, occupied: bool, relativity: bool) -> Result<OrbitalRow, Problem> {
    let function = Hydrogenic::new(orbital, z.into())?;
    let mean = |k: i32| Ok::<f64, Problem>(function.expectation(k)?.unwrap_or(0.0));
    let zeta = function
        .spin_orbit()
        .map(|zeta| zeta * HARTREE_WAVENUMBER.value);
    Ok(OrbitalRow {
        label: orbital.to_string(),
        n: orbital.n(),
        l: orbital.l(),
        electrons: occupied.into(),
        open: occupied,
        energy: if relativity {
            dirac::average(orbital, z, None)?
        } else {
            function.energy()
        },
        r: mean(1)?,
        r2: mean(2)?,
        r_inv: mean(-1)?,
        r_inv2: mean(-2)?,
        r_inv3: function.expectation(-3)?,
        r_most_probable: function.most_probable().radius,
        zeta,
        zeta_central: zeta,
    })
}

fn dirac_row(z: u8, mass_number: u16, orbitals: &[Orbital]) -> Result<DiracRow, Problem> {
    let (mass, by) = nuclear_mass(z, mass_number);
    let mut levels = Vec::new();
    let (mut sum, mut weights) = (0.0, 0.0);
    for orbital in orbitals {
        let finite = dirac::levels(*orbital, z, Some(mass))?;
        let fixed = dirac::levels(*orbital, z, None)?;
        for (finite, fixed) in finite.iter().zip(fixed) {
            let weight = fixed.j.degeneracy() as f64;
            sum += weight * fixed.energy;
            weights += weight;
            let level = Level {
                term: Term {
                    two_s: 1,
                    l: orbital.l().into(),
                },
                index: None,
                j: fixed.j,
            };
            levels.push(DiracLevel {
                label: label::format(&orbital.to_string(), &level),
                j: fixed.j,
                energy: fixed.energy,
                energy_finite_mass: finite.energy,
                above_lowest: 0.0,
            });
        }
    }
    let lowest = levels
        .iter()
        .map(|level| level.energy_finite_mass)
        .fold(f64::INFINITY, f64::min);
    for level in &mut levels {
        level.above_lowest = (level.energy_finite_mass - lowest) * HARTREE_WAVENUMBER.value;
    }
    Ok(DiracRow {
        levels,
        average: if weights > 0.0 { sum / weights } else { 0.0 },
        nuclear_mass: mass,
        nuclear_mass_by: by,
    })
}

/// The mass number of a nucleus and how it is known: the typed one, otherwise that of the most abundant
/// isotope, and where none occurs in nature the one on the valley of stability.
pub fn mass_number_of(z: u8, typed: Option<u16>) -> (u16, &'static str) {
    match (typed, elements::most_abundant(z)) {
        (Some(number), _) => (number, "typed"),
        (None, Some(number)) => (number, "most abundant isotope"),
        (None, None) => (stable_mass_number(z), "valley of stability"),
    }
}

/// The mass of a nucleus in electron masses: CODATA for p, d and α, otherwise that of the tabulated atom
/// less its electrons (their binding, below a part in 10⁶ of the mass, left in), otherwise A u − Z m_e,
/// which is within a part in 800 from A = 12 on.
pub fn nuclear_mass(z: u8, mass_number: u16) -> (f64, &'static str) {
    let known = match (z, mass_number) {
        (1, 1) => PROTON_MASS_U,
        (1, 2) => DEUTERON_MASS_U,
        (2, 4) => ALPHA_MASS_U,
        _ => {
            let (atomic, by) = match elements::isotope(z, mass_number) {
                Some(isotope) => (isotope.mass, "table of isotopes"),
                None => (f64::from(mass_number), "mass number"),
            };
            return (atomic / ELECTRON_MASS_U.value - f64::from(z), by);
        }
    };
    (known.value / ELECTRON_MASS_U.value, "CODATA 2022")
}

/// The density of each orbital for its picture.
pub fn curves(z: u8, orbitals: &[Orbital], occupied: bool) -> Result<Vec<Curve>, Problem> {
    let mut curves = Vec::new();
    for orbital in orbitals {
        let function = Hydrogenic::new(*orbital, z.into())?;
        let highest = function.most_probable();
        let mean = function.expectation(1)?.unwrap_or(0.0);
        let density = |r: f64| {
            let p = function.reduced(r);
            p * p
        };
        let r = radii(highest.radius, highest.density, density);
        curves.push(Curve {
            configuration: String::new(),
            path: String::new(),
            label: orbital.to_string(),
            n: orbital.n(),
            l: orbital.l(),
            electrons: occupied.into(),
            density: r.iter().map(|r| density(*r)).collect(),
            r,
            mean,
            most_probable: highest.radius,
            height: highest.density,
        });
    }
    Ok(curves)
}
