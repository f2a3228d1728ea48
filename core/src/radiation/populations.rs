//! How atoms are shared among their levels at a temperature.
//!
//! N_i/N = g_i e^(−E_i/kT)/Z, Z = Σ g_i e^(−E_i/kT) (Boltzmann), energies from the lowest level.
//! The sum over all levels of an isolated atom diverges, so Z has a cut-off, which is a part of the
//! result: the levels that are known, or those up to an energy, for instance the limit of ionisation
//! lowered by the charges around ([`super::ionisation::lowering`]).
//!
//! Source: Griem, *Plasma Spectroscopy* (1964), ch. 6; Drawin & Felenbok, *Data for Plasmas in Local
//! Thermodynamic Equilibrium* (1965).

use crate::constants::BOLTZMANN_WAVENUMBER;
use crate::problem::Problem;

/// A level as a partition function sees it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Weighted {
    /// Energy on any scale, cm⁻¹.
    pub energy: f64,
    /// 2J + 1.
    pub weight: f64,
}

/// Where the sum ends.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum CutOff {
    /// With the highest of the levels given.
    HighestLevel,
    /// At this energy above the lowest level, cm⁻¹; a level just there is counted.
    Energy(f64),
}

/// A partition function.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Partition {
    /// Z, counted from the lowest level.
    pub value: f64,
    /// K.
    pub temperature: f64,
    /// What the sum ended with.
    pub cut_off: CutOff,
    /// Energy of the lowest level, cm⁻¹ on the scale of the levels.
    pub lowest: f64,
    /// Energy of the highest level counted, cm⁻¹ above the lowest.
    pub highest: f64,
    /// Levels counted.
    pub counted: usize,
    /// Levels above the cut-off.
    pub left_out: usize,
}

/// kT in cm⁻¹.
///
/// # Errors
/// `temperature-out-of-range` unless the temperature is above zero.
pub fn thermal_energy(temperature: f64) -> Result<f64, Problem> {
    let energy = BOLTZMANN_WAVENUMBER.value * temperature;
    if energy > 0.0 && energy.is_finite() {
        Ok(energy)
    } else {
        Err(temperature_out_of_range(temperature))
    }
}

/// The partition function of these levels at a temperature in K; formula of the module's head.
///
/// Exact to rounding. Levels whose energy or weight is not finite, or whose weight is not positive,
/// are left out.
///
/// # Errors
/// `temperature-out-of-range` unless T > 0; `no-level-to-populate` without any level below the
/// cut-off.
pub fn partition(
    levels: &[Weighted],
    temperature: f64,
    cut_off: CutOff,
) -> Result<Partition, Problem> {
    let thermal = thermal_energy(temperature)?;
    let valid = |level: &&Weighted| {
        level.energy.is_finite() && level.weight.is_finite() && level.weight > 0.0
    };
    let lowest = levels
        .iter()
        .filter(valid)
        .fold(f64::INFINITY, |least, level| least.min(level.energy));
    let mut found = Partition {
        value: 0.0,
        temperature,
        cut_off,
        lowest,
        highest: 0.0,
        counted: 0,
        left_out: 0,
    };
    for level in levels.iter().filter(valid) {
        let above = level.energy - lowest;
        let counts = match cut_off {
            CutOff::HighestLevel => true,
            CutOff::Energy(energy) => above <= energy,
        };
        if counts {
            found.value += level.weight * libm::exp(-above / thermal);
            found.highest = found.highest.max(above);
            found.counted = found.counted.saturating_add(1);
        } else {
            found.left_out = found.left_out.saturating_add(1);
        }
    }
    if found.value > 0.0 && found.value.is_finite() {
        Ok(found)
    } else {
        Err(no_level())
    }
}

impl Partition {
    /// The share of the atoms in a level, Boltzmann's formula; zero above the cut-off.
    #[must_use]
    pub fn share(&self, level: Weighted) -> f64 {
        let above = level.energy - self.lowest;
        let counts = match self.cut_off {
            CutOff::HighestLevel => true,
            CutOff::Energy(energy) => above <= energy,
        };
        let thermal = BOLTZMANN_WAVENUMBER.value * self.temperature;
        let share = level.weight * libm::exp(-above / thermal) / self.value;
        if counts && share.is_finite() {
            share
        } else {
            0.0
        }
    }
}

#[inline(never)]
fn temperature_out_of_range(temperature: f64) -> Problem {
    Problem::new(
        "temperature-out-of-range",
        format!("Levels are not populated at {temperature} K."),
        0,
        0,
    )
    .bound("The temperature is above 0 K.")
}

#[inline(never)]
fn no_level() -> Problem {
    Problem::new(
        "no-level-to-populate",
        "There is no level below the cut-off of the partition function.",
        0,
        0,
    )
}
