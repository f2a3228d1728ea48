//! The balance between an ion and the next one in local thermodynamic equilibrium.
//!
//! n_{z+1} n_e/n_z = 2 (Z_{z+1}/Z_z) (2π m_e kT/h²)^(3/2) e^(−(χ−Δχ)/kT): Saha, with the energy of
//! ionisation χ lowered by the charges around by Δχ = (z+1) e²/(4πε₀ λ_D), the Debye length being
//! λ_D = √{ε₀kT/[e²(n_e + n_i)]} with as many singly charged ions as electrons.
//!
//! Source: Saha, Phil. Mag. 40, 472 (1920); Griem, *Plasma Spectroscopy* (1964), eqs. 6-33 and 6-55.

use super::populations::thermal_energy;
use crate::constants::{BOHR_RADIUS, BOLTZMANN, ELECTRON_MASS, HARTREE_WAVENUMBER, PLANCK};
use crate::problem::Problem;
use core::f64::consts::PI;

/// Electrons in one m³ that are taken.
const DENSITIES: (f64, f64) = (1.0, 1e32);

/// The balance of two ions.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Balance {
    /// n_{z+1}/n_z: how many of the more highly charged ion there are for each of the other.
    pub ratio: f64,
    /// Δχ, cm⁻¹, by which the limit of ionisation was lowered.
    pub lowering: f64,
    /// Debye length, m.
    pub debye_length: f64,
}

/// Δχ in cm⁻¹ and the Debye length in m around an ion that will have the charge `charge` after it has
/// lost its electron; temperature in K, electrons per m³.
///
/// A formula for thin plasmas: Δχ is a small part of χ there.
///
/// # Errors
/// `temperature-out-of-range`, `electron-density-out-of-range` outside 1 … 10³² m⁻³.
pub fn lowering(
    charge: u32,
    temperature: f64,
    electron_density: f64,
) -> Result<(f64, f64), Problem> {
    let thermal = thermal_energy(temperature)?;
    if !(electron_density >= DENSITIES.0 && electron_density <= DENSITIES.1) {
        return Err(density_out_of_range(electron_density));
    }
    // e²/(4πε₀) = E_h a₀, in cm⁻¹ m.
    let coupling = HARTREE_WAVENUMBER.value * BOHR_RADIUS.value;
    let debye = (thermal / (4.0 * PI * coupling * 2.0 * electron_density)).sqrt();
    Ok((f64::from(charge) * coupling / debye, debye))
}

/// Saha's ratio, the formula of the module's head.
///
/// `limit` is the energy of ionisation of the lower ion from its lowest level in cm⁻¹, `charge` the
/// charge of the higher ion, the partition functions are counted from each ion's lowest level.
/// Exact to rounding; zero where the exponential is below the smallest double.
///
/// # Errors
/// `temperature-out-of-range`, `electron-density-out-of-range`; `ionisation-energy-out-of-range`
/// unless χ > Δχ; `partition-function-out-of-range` unless both are above zero.
pub fn saha(
    limit: f64,
    charge: u32,
    temperature: f64,
    electron_density: f64,
    lower_partition: f64,
    higher_partition: f64,
) -> Result<Balance, Problem> {
    let thermal = thermal_energy(temperature)?;
    let (lowering, debye_length) = lowering(charge, temperature, electron_density)?;
    let energy = limit - lowering;
    if !(energy > 0.0 && energy.is_finite()) {
        return Err(limit_out_of_range(limit, lowering));
    }
    let partitions = higher_partition / lower_partition;
    if !(higher_partition > 0.0 && partitions > 0.0 && partitions.is_finite()) {
        return Err(partition_out_of_range());
    }
    // 1/λ² of the thermal de Broglie wave, m⁻².
    let inverse = 2.0 * PI * ELECTRON_MASS.value * (BOLTZMANN.value * temperature)
        / PLANCK.value
        / PLANCK.value;
    let states = 2.0 * inverse * inverse.sqrt() / electron_density;
    let ratio = partitions * states * libm::exp(-energy / thermal);
    if ratio.is_finite() {
        Ok(Balance {
            ratio,
            lowering,
            debye_length,
        })
    } else {
        Err(density_out_of_range(electron_density))
    }
}

#[inline(never)]
fn density_out_of_range(density: f64) -> Problem {
    Problem::new(
        "electron-density-out-of-range",
        format!("The balance of ions is not computed for {density} electrons in a cubic metre."),
        0,
        0,
    )
    .bound("The electron density is between 1 and 1e32 m-3.")
}

#[inline(never)]
fn limit_out_of_range(limit: f64, lowering: f64) -> Problem {
    Problem::new(
        "ionisation-energy-out-of-range",
        format!(
            "An energy of ionisation of {limit} cm-1, lowered by {lowering} cm-1, leaves no bound level."
        ),
        0,
        0,
    )
    .bound("The energy of ionisation is above its lowering by the plasma.")
}

#[inline(never)]
fn partition_out_of_range() -> Problem {
    Problem::new(
        "partition-function-out-of-range",
        "A partition function is above zero.",
        0,
        0,
    )
}
