//! The rows of the answer on splitting.

use serde::Serialize;

use crate::constants::BOHR_MAGNETON_WAVENUMBER;
use crate::quantity::TwiceJ;
use crate::radiation::Multipole;
use crate::splitting::in_field::MHZ_PER_WAVENUMBER;

use super::answer::Around;
use super::lack::Way;
use super::levels_rows::Shared;
use super::rich::{Kind, Rich};

/// The answer.
#[derive(Debug, Serialize)]
pub struct Splitting {
    #[serde(flatten)]
    pub around: Around,
    /// "full": diagonalised; "linear": g M alone.
    pub method: &'static str,
    pub line: Option<LineOf>,
    pub field: Option<FieldOf>,
    pub diamagnetic: Option<DiamagneticRow>,
    pub nucleus: Option<NucleusRow>,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub estimate: Option<EstimateRow>,
    pub isotopes: Vec<IsotopeRow>,
    pub states: Vec<StateRow>,
    pub components: Vec<ComponentRow>,
    /// Why no components are listed, where they could be.
    pub no_components: Option<String>,
    pub linear: Option<LinearRow>,
    pub positions: usize,
    /// Those of the components that are seen.
    pub positions_seen: usize,
    /// Groups of the components that are seen and not faint.
    pub groups: usize,
    pub pattern: String,
    pub conversions: Conversions,
    pub crossings: Vec<CrossingRow>,
    pub crossings_left_out: usize,
    pub component_crossings: Vec<ComponentCrossingRow>,
    pub component_crossings_left_out: usize,
    pub resonances: Vec<ResonanceRow>,
    pub resonances_left_out: usize,
}

impl Splitting {
    /// Without any rows.
    pub fn new(method: &'static str, around: Around) -> Self {
        Splitting {
            around,
            method,
            line: None,
            field: None,
            diamagnetic: None,
            nucleus: None,
            estimate: None,
            isotopes: Vec::new(),
            states: Vec::new(),
            components: Vec::new(),
            no_components: None,
            linear: None,
            positions: 0,
            positions_seen: 0,
            groups: 0,
            conversions: Conversions {
                ghz_per_wavenumber: MHZ_PER_WAVENUMBER / 1e3,
                mu_b_per_tesla: BOHR_MAGNETON_WAVENUMBER.value,
                pm_per_wavenumber: None,
            },
            pattern: String::new(),
            crossings: Vec::new(),
            crossings_left_out: 0,
            component_crossings: Vec::new(),
            component_crossings_left_out: 0,
            resonances: Vec::new(),
            resonances_left_out: 0,
        }
    }
}

/// Factors to other units, for offsets that the page interpolates.
#[derive(Clone, Copy, Debug, Serialize)]
pub struct Conversions {
    pub ghz_per_wavenumber: f64,
    /// cm⁻¹/T.
    pub mu_b_per_tesla: f64,
    /// For small offsets; nothing without a wavelength.
    pub pm_per_wavenumber: Option<f64>,
}

impl Conversions {
    /// With the line's vacuum wavelength in nm.
    #[must_use]
    pub fn at(self, nm: Option<f64>) -> Self {
        Conversions {
            pm_per_wavenumber: nm.map(|nm| -1e-4 * nm * nm),
            ..self
        }
    }
}

#[derive(Clone, Debug, Serialize)]
pub struct LineOf {
    pub upper: String,
    pub lower: String,
    pub upper_rich: Rich,
    pub lower_rich: Rich,
    /// "level", "term" or "configuration": the wider of both ends.
    pub of: &'static str,
    pub g_upper: Option<f64>,
    pub g_lower: Option<f64>,
    /// Of the line's centre of gravity.
    pub g_effective: Option<f64>,
    pub multipole: Multipole,
    pub wavelength_nm: Option<f64>,
    pub wavelength_kind: Option<Kind>,
    /// cm⁻¹; where offsets count from.
    pub centre: Option<f64>,
}

#[derive(Clone, Debug, Serialize)]
pub struct FieldOf {
    pub tesla: f64,
    pub text: String,
    pub angle_degrees: f64,
    pub view: &'static str,
    /// As it was typed, where one stands there.
    pub polariser: Option<String>,
    /// What it keeps of the pattern.
    pub keeps: Option<String>,
    /// Tesla, the end of maps.
    pub up_to: f64,
}

#[derive(Clone, Debug, Serialize)]
pub struct DiamagneticRow {
    pub included: bool,
    /// cm⁻¹, the largest mean shift of a level's states by it in this field; nothing where it is not known.
    pub largest: Option<f64>,
}

#[derive(Clone, Debug, Serialize)]
pub struct NucleusRow {
    pub isotope: Option<String>,
    pub spin: TwiceJ,
    #[serde(rename = "g_I")]
    pub g: Option<f64>,
    pub kind: Kind,
    pub source: Option<&'static str>,
    pub levels: Vec<ConstantRow>,
}

/// Hyperfine constants of a level.
#[derive(Clone, Debug, Serialize)]
pub struct ConstantRow {
    pub label: Shared,
    pub rich: Rich,
    #[serde(rename = "A_MHz")]
    pub a: Option<f64>,
    #[serde(rename = "B_MHz")]
    pub b: Option<f64>,
    /// Of A, or of B where there is no A: "entered", "computed" (estimated, or from another isotope's) or "zero".
    pub kind: &'static str,
    /// Whether it is another isotope's, scaled.
    pub scaled: bool,
    /// Which of both are estimates: "A", "B" or "A, B".
    #[serde(skip_serializing_if = "Option::is_none")]
    pub estimated: Option<&'static str>,
}

/// Estimates of A and B: that they are used, or could be.
#[derive(Clone, Debug, Serialize)]
pub struct EstimateRow {
    pub included: bool,
    /// How far off they usually are.
    pub say: &'static str,
    /// How to put them in.
    pub way: Option<Way>,
}

#[derive(Clone, Debug, Serialize)]
pub struct IsotopeRow {
    pub isotope: String,
    /// Percent of the light.
    pub share: f64,
    #[serde(rename = "shift_MHz")]
    pub shift: f64,
    pub spin: Option<TwiceJ>,
    pub kind: Kind,
    pub levels: Vec<ConstantRow>,
}

#[derive(Clone, Debug, Serialize)]
pub struct StateRow {
    /// Its own in this answer: level, F and M.
    pub name: String,
    pub rich: Rich,
    pub configuration: Option<Shared>,
    pub level: Shared,
    #[serde(rename = "J")]
    pub j: TwiceJ,
    #[serde(rename = "M")]
    pub m: TwiceJ,
    #[serde(rename = "F")]
    pub f: Option<TwiceJ>,
    /// Where level and nucleus are not coupled at all.
    #[serde(rename = "M_J", skip_serializing_if = "Option::is_none")]
    pub m_j: Option<TwiceJ>,
    #[serde(rename = "M_I", skip_serializing_if = "Option::is_none")]
    pub m_i: Option<TwiceJ>,
    /// cm⁻¹ on the scale of the levels; nothing where their energies are not known.
    pub energy: Option<f64>,
    /// cm⁻¹ from the level without field and nucleus.
    pub shift: f64,
    /// cm⁻¹/T.
    pub slope: f64,
    /// The shift in units of μ_B B.
    pub lorentz: Option<f64>,
    pub side: Option<&'static str>,
    pub isotope: Option<Shared>,
}

#[derive(Clone, Debug, Serialize)]
pub struct ComponentRow {
    pub polarisation: &'static str,
    /// Names of states.
    pub upper: Shared,
    pub lower: Shared,
    pub level_upper: Shared,
    pub level_lower: Shared,
    #[serde(rename = "M_upper")]
    pub m_upper: TwiceJ,
    #[serde(rename = "M_lower")]
    pub m_lower: TwiceJ,
    #[serde(rename = "F_upper")]
    pub f_upper: Option<TwiceJ>,
    #[serde(rename = "F_lower")]
    pub f_lower: Option<TwiceJ>,
    pub lorentz: Option<f64>,
    pub offset: f64,
    pub ghz: f64,
    pub pm: Option<f64>,
    pub strength: f64,
    pub along: f64,
    pub across: f64,
    pub seen: f64,
    /// cm⁻¹: the offset by g M alone.
    pub linear: Option<f64>,
    pub isotope: Option<Shared>,
    /// cm⁻¹: the shift of its isotope, which is in the offset.
    #[serde(skip)]
    pub moved: f64,
}

#[derive(Clone, Debug, Serialize)]
pub struct LinearRow {
    /// As typed, or the usual one.
    pub tolerance: String,
    /// Tesla; nothing where the linear pattern holds up to the end of maps.
    pub departs_at: Option<f64>,
    /// cm⁻¹, in this field.
    pub largest_difference: f64,
}

#[derive(Clone, Debug, Serialize)]
pub struct CrossingRow {
    /// "crossing", "avoided" or "clock".
    pub kind: &'static str,
    pub first: Shared,
    pub second: Shared,
    pub tesla: f64,
    pub energy: Option<f64>,
    /// cm⁻¹.
    pub gap: f64,
    /// cm⁻¹/T.
    pub slope_first: f64,
    pub slope_second: f64,
    /// The gap as a frequency.
    pub mhz: f64,
    /// How many photons drive a clock transition: 1 for |ΔM| ≤ 1, 2 for |ΔM| = 2; nothing for others.
    pub photons: Option<u8>,
    pub isotope: Option<Shared>,
}

#[derive(Clone, Debug, Serialize)]
pub struct ComponentCrossingRow {
    /// "crossing" or "farthest".
    pub kind: &'static str,
    pub first: String,
    pub second: String,
    pub tesla: f64,
    /// cm⁻¹.
    pub apart: f64,
    pub isotope: Option<Shared>,
}

#[derive(Clone, Debug, Serialize)]
pub struct ResonanceRow {
    pub from: Shared,
    pub to: Shared,
    pub mhz: f64,
    /// MHz/mT.
    pub slope: f64,
    /// μ_B².
    pub strength: f64,
    /// "parallel" or "perpendicular": the oscillating field to B.
    pub kind: &'static str,
    pub isotope: Option<Shared>,
}
