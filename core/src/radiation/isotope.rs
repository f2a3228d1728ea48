//! How lines move with the mass of the nucleus.
//!
//! All energies of an atom scale with the reduced mass μ = m_e M/(m_e + M), so that from the isotope
//! of mass M to that of mass M′ a line of wavenumber σ moves by
//!
//! σ′ − σ = σ m_e (M′ − M)/[M (M′ + m_e)]: the normal mass shift.
//!
//! It is all there is of the mass for one electron. With several electrons the specific mass shift
//! (correlated momenta), and in heavy atoms the size of the nucleus, add amounts of the same order or
//! larger, which are not computed here.
//!
//! Source: Hughes & Eckart, Phys. Rev. 36, 694 (1930); Kuhn, *Atomic Spectra* (1969), ch. VI.

use crate::constants::{ALPHA_MASS_U, DEUTERON_MASS_U, ELECTRON_MASS_U, PROTON_MASS_U, RYDBERG};
use crate::problem::Problem;

/// Masses of nuclei in u: from just below the proton's to beyond the heaviest known.
const LIGHTEST: f64 = 1.0;
const HEAVIEST: f64 = 400.0;

/// The normal mass shift σ′ − σ of a line, cm⁻¹; formula of the module's head.
///
/// `wavenumber` is σ of the isotope `from` in cm⁻¹; masses of the nuclei in u.
///
/// # Errors
/// `nuclear-mass-out-of-range` for masses outside 1 … 400 u.
pub fn normal_mass_shift(wavenumber: f64, from: f64, to: f64) -> Result<f64, Problem> {
    check(from)?;
    check(to)?;
    let electron = ELECTRON_MASS_U.value;
    Ok(wavenumber * electron * (to - from) / (from * (to + electron)))
}

/// R_M = R∞/(1 + m_e/M) in cm⁻¹ for a nucleus (or for a series limit, a whole ion) of M in u; R∞
/// without a mass.
///
/// # Errors
/// `nuclear-mass-out-of-range` for a mass outside 1 … 400 u.
pub fn rydberg(mass: Option<f64>) -> Result<f64, Problem> {
    let Some(mass) = mass else {
        return Ok(RYDBERG.value);
    };
    check(mass)?;
    Ok(RYDBERG.value * mass / (mass + ELECTRON_MASS_U.value))
}

/// The mass of the nucleus of an atom whose mass is `atomic` u: the electrons taken off, their
/// binding (below 1e-6 of the nucleus even at Z = 100) left in.
#[must_use]
pub fn nuclear_mass(atomic: f64, z: u8) -> f64 {
    atomic - f64::from(z) * ELECTRON_MASS_U.value
}

/// A mass in u as one in electron masses, which Dirac's levels are given.
#[must_use]
pub fn in_electron_masses(mass: f64) -> f64 {
    mass / ELECTRON_MASS_U.value
}

/// The measured mass of the proton, deuteron or α particle in u, by CODATA; nothing for other nuclei.
#[must_use]
pub fn light_nucleus(z: u8, mass_number: u32) -> Option<f64> {
    match (z, mass_number) {
        (1, 1) => Some(PROTON_MASS_U.value),
        (1, 2) => Some(DEUTERON_MASS_U.value),
        (2, 4) => Some(ALPHA_MASS_U.value),
        _ => None,
    }
}

fn check(mass: f64) -> Result<(), Problem> {
    if (LIGHTEST..=HEAVIEST).contains(&mass) {
        Ok(())
    } else {
        Err(mass_out_of_range(mass))
    }
}

#[inline(never)]
fn mass_out_of_range(mass: f64) -> Problem {
    Problem::new(
        "nuclear-mass-out-of-range",
        format!("A nucleus of {mass} u is not possible here."),
        0,
        0,
    )
    .bound("The mass of a nucleus is between 1 and 400 u.")
}
