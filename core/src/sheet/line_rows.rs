//! The rows of the answer to *Which lines?*

use crate::numerics::sorted_map::SortedMap;

use serde::Serialize;

use crate::quantity::TwiceJ;
use crate::radiation::Multipole;
use crate::radiation::strengths::LevelSum;

use super::levels_rows::Shared;
use super::rich::{Kind, Rich};

/// A level that lines join; energies in cm⁻¹.
#[derive(Debug, Serialize)]
pub struct LevelEntry {
    pub label: String,
    pub rich: Rich,
    #[serde(rename = "J")]
    pub j: TwiceJ,
    pub configuration: String,
    pub term: String,
    pub parity: &'static str,
    pub energy: Option<f64>,
    pub above_lowest: Option<f64>,
    /// Share of the atoms at the temperature of the source.
    pub population: Option<f64>,
}

fn is_false(value: &bool) -> bool {
    !value
}

/// One line by one multipole. There can be very many: nothing is typeset here, and keys beyond those of
/// every line are left out where they hold nothing.
#[derive(Debug, Serialize)]
pub struct LineRow {
    pub upper: Shared,
    pub lower: Shared,
    #[serde(rename = "upper_J")]
    pub upper_j: TwiceJ,
    #[serde(rename = "lower_J")]
    pub lower_j: TwiceJ,
    pub multipole: Multipole,
    /// cm⁻¹ in vacuum.
    pub wavenumber: Option<f64>,
    pub energy_kind: Option<Kind>,
    pub vacuum_nm: Option<f64>,
    /// Nothing beyond the range of the formula for air.
    pub air_nm: Option<f64>,
    /// Where a refractive index is entered.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub medium_nm: Option<f64>,
    #[serde(rename = "S")]
    pub s: Option<f64>,
    pub gf: Option<f64>,
    pub f: Option<f64>,
    #[serde(rename = "A")]
    pub a: Option<f64>,
    pub branching: Option<f64>,
    pub cancellation: Option<f64>,
    /// Whether so little is left of large terms that S is uncertain.
    #[serde(skip_serializing_if = "is_false")]
    pub weak: bool,
    /// Emitted power beside the strongest line.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub intensity: Option<f64>,
    /// Absorbed share of a continuum, thin column, beside the strongest line.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub absorption: Option<f64>,
    /// At the line's centre, where a column is entered.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub optical_depth: Option<f64>,
    /// At the line's centre in absorption, m², where a column is entered.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub cross_section: Option<f64>,
    /// W/m², where a column is entered.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub saturation_intensity: Option<f64>,
    /// Normal mass shift from the usual isotope, cm⁻¹, where another one is entered.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub mass_shift: Option<f64>,
    /// Share of the multiplet in pure LS coupling.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub relative: Option<f64>,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub multiplet: Option<Shared>,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub spin_note: Option<Shared>,
}

impl LineRow {
    /// A line of which no more is known.
    pub fn between(
        upper: Shared,
        lower: Shared,
        (upper_j, lower_j): (TwiceJ, TwiceJ),
        multipole: Multipole,
    ) -> LineRow {
        LineRow {
            upper,
            lower,
            upper_j,
            lower_j,
            multipole,
            wavenumber: None,
            energy_kind: None,
            vacuum_nm: None,
            air_nm: None,
            medium_nm: None,
            s: None,
            gf: None,
            f: None,
            a: None,
            branching: None,
            cancellation: None,
            weak: false,
            intensity: None,
            absorption: None,
            optical_depth: None,
            cross_section: None,
            saturation_intensity: None,
            mass_shift: None,
            relative: None,
            multiplet: None,
            spin_note: None,
        }
    }
}

#[derive(Debug, Serialize)]
pub struct RefusedRow {
    pub upper: String,
    pub lower: String,
    #[serde(rename = "upper_J")]
    pub upper_j: TwiceJ,
    #[serde(rename = "lower_J")]
    pub lower_j: TwiceJ,
    pub multipole: Multipole,
    pub rule: String,
    pub code: &'static str,
    pub rigorous: bool,
    /// The rule against each other multipole, by its code.
    pub others: SortedMap<String, &'static str>,
}

#[derive(Debug, Serialize)]
pub struct MultipletRow {
    pub name: String,
    pub upper_rich: Rich,
    pub lower_rich: Rich,
    pub multipole: Multipole,
    pub lines: usize,
    pub sum: f64,
    pub upper_sums: Vec<SumRow>,
    pub lower_sums: Vec<SumRow>,
}

#[derive(Debug, Serialize)]
pub struct SumRow {
    #[serde(rename = "J")]
    pub j: TwiceJ,
    pub sum: f64,
    pub expected: f64,
}

impl From<&LevelSum> for SumRow {
    fn from(sum: &LevelSum) -> Self {
        SumRow {
            j: sum.j,
            sum: sum.sum,
            expected: sum.expected,
        }
    }
}

/// The window that is looked at.
#[derive(Debug, Serialize)]
pub struct WindowRow {
    /// Shortest and longest wavelength in vacuum, nm; nothing where it is open.
    pub from_nm: Option<f64>,
    pub to_nm: Option<f64>,
    /// The same in the medium, nm: as entered where they were entered so.
    pub from: Option<f64>,
    pub to: Option<f64>,
    /// "vacuum", "air" or "index".
    pub medium: &'static str,
    pub lines: usize,
    /// The nearest line outside, where none is inside.
    pub nearest: Option<NearestRow>,
}

#[derive(Debug, Serialize)]
pub struct NearestRow {
    pub upper: Shared,
    pub lower: Shared,
    pub multipole: Multipole,
    /// In the medium.
    pub nm: f64,
}

/// By what the page shows a line in other units.
#[derive(Debug, Serialize)]
pub struct Conversions {
    pub angstrom_per_nm: f64,
    pub ev_per_wavenumber: f64,
    pub thz_per_wavenumber: f64,
}
