//! Wavenumbers and rates of the lines of a sheet, and how its levels decay.

use crate::radiation::Multipole;
use crate::radiation::rates::{Decay, Rates, decays, rates};

use super::placed::Placed;
use super::solved::Solved;
use super::solved_lines::Strengths;

/// Energies closer than this, cm⁻¹, are one energy: the rounding of terms of 10⁷ cm⁻¹.
const NO_DIFFERENCE: f64 = 1e-8;

/// A line with its rates, the level of higher energy above.
#[derive(Clone, Copy, Debug)]
pub struct Line {
    /// Place of the upper level.
    pub upper: usize,
    /// Place of the lower level.
    pub lower: usize,
    /// By which radiation.
    pub multipole: Multipole,
    /// Line strength.
    pub s: f64,
    /// Cancellation factor.
    pub cancellation: f64,
    /// In vacuum, cm⁻¹; zero between levels of one energy.
    pub wavenumber: f64,
    /// Nothing without a wavenumber.
    pub rates: Option<Rates>,
}

/// All lines with their rates, and the decay of each level.
#[derive(Clone, Debug)]
pub struct Radiation {
    /// In the order of the strengths.
    pub lines: Vec<Line>,
    /// By level.
    pub decays: Vec<Decay>,
}

impl Radiation {
    /// The rates at the energies of the sheet.
    pub fn new(solved: &Solved, strengths: &Strengths, placed: &Placed) -> Radiation {
        let weight = |place: usize| solved.levels.get(place).map_or(0.0, |l| l.weight());
        let mut lines = Vec::with_capacity(strengths.lines.len());
        for found in &strengths.lines {
            let difference = placed.of(found.upper) - placed.of(found.lower);
            let (upper, lower) = if difference < 0.0 {
                (found.lower, found.upper)
            } else {
                (found.upper, found.lower)
            };
            let wavenumber = match difference.abs() {
                rounding if rounding < NO_DIFFERENCE => 0.0,
                wavenumber => wavenumber,
            };
            lines.push(Line {
                upper,
                lower,
                multipole: found.multipole,
                s: found.s,
                cancellation: found.cancellation,
                wavenumber,
                rates: rates(
                    found.multipole,
                    found.s,
                    found.rated_at.unwrap_or(wavenumber),
                    weight(upper),
                    weight(lower),
                ),
            });
        }
        let rated = lines
            .iter()
            .filter_map(|line| Some((line.upper, line.rates?.a)));
        Radiation {
            decays: decays(solved.levels.len(), rated),
            lines,
        }
    }
}
