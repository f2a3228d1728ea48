//! The rows of the answer on orbitals.

use serde::Serialize;

use crate::quantity::TwiceJ;

use super::states::ConfigurationText;

/// What was computed for one configuration.
#[derive(Clone, Debug, Serialize)]
pub struct Block {
    pub configuration: Option<ConfigurationText>,
    pub method: &'static str,
    /// The configuration's average energy, hartree.
    pub total_energy: f64,
    pub virial_ratio: Option<f64>,
    pub iterations: usize,
    pub residual: f64,
    pub relativity: bool,
    pub nucleus: NucleusRow,
    pub mesh: Option<MeshRow>,
    pub history: Vec<Iteration>,
    pub orbitals: Vec<OrbitalRow>,
    pub integrals: Vec<IntegralRow>,
    pub polarisation: Option<PolarisationRow>,
    /// What could be entered, where none is and the core's polarisability is known.
    pub polarisation_offer: Option<PolarisationOffer>,
    pub dirac: Option<DiracRow>,
}

#[derive(Clone, Debug, Serialize)]
pub struct NucleusRow {
    pub charge: u8,
    pub model: &'static str,
    pub mass_number: Option<u16>,
    pub mass_number_by: Option<&'static str>,
    /// √⟨r²⟩ of the charge, a₀.
    pub rms_radius: Option<f64>,
}

#[derive(Clone, Copy, Debug, Serialize)]
pub struct MeshRow {
    pub splines: usize,
    pub points: usize,
    /// Where the radial functions end, a₀.
    pub end: f64,
}

#[derive(Clone, Copy, Debug, Serialize)]
pub struct Iteration {
    pub iteration: usize,
    pub residual: f64,
}

/// One subshell: energies in hartree, lengths in a₀, ζ in cm⁻¹.
#[derive(Clone, Debug, Serialize)]
pub struct OrbitalRow {
    pub label: String,
    pub n: u8,
    pub l: u8,
    pub electrons: u32,
    pub open: bool,
    pub energy: f64,
    pub r: f64,
    pub r2: f64,
    pub r_inv: f64,
    pub r_inv2: f64,
    pub r_inv3: Option<f64>,
    pub r_most_probable: f64,
    /// With the screening of Blume and Watson.
    pub zeta: Option<f64>,
    /// From the slope of the central field.
    pub zeta_central: Option<f64>,
}

#[derive(Clone, Debug, Serialize)]
pub struct IntegralRow {
    pub name: String,
    /// cm⁻¹.
    pub value: f64,
}

/// A radial integral between two configurations of the sheet.
#[derive(Clone, Debug, Serialize)]
pub struct BetweenRow {
    /// `r(3s,3p)`
    pub name: String,
    /// The earlier configuration of the sheet.
    pub lower: String,
    /// The later one.
    pub upper: String,
    pub multipole: &'static str,
    /// With the overlaps of the other electrons, a₀ or a₀².
    pub value: f64,
    /// Of the two orbitals alone.
    pub bare: f64,
    /// What the electrons that stay have of themselves in the other configuration.
    pub overlap: f64,
    /// The largest overlap of different orbitals; its square bounds what is left out.
    pub largest_cross: f64,
}

/// A core polarisation that has a source, in the sheet's own spelling.
#[derive(Clone, Debug, Serialize)]
pub struct PolarisationOffer {
    /// "0.9457 a0^3".
    pub alpha: String,
    /// The mean radius of the core's outermost orbital as computed here, to two decimals: "0.79 a0".
    pub radius: String,
    pub core: String,
    pub source: &'static str,
}

/// The core polarisation and what it does: with minus without, hartree, a₀, cm⁻¹.
#[derive(Clone, Debug, Serialize)]
pub struct PolarisationRow {
    pub alpha: f64,
    pub radius: f64,
    /// The orbitals that it does not act on.
    pub core: String,
    pub without: Without,
    pub change: Change,
}

#[derive(Clone, Debug, Serialize)]
pub struct Without {
    pub total_energy: f64,
}

#[derive(Clone, Debug, Serialize)]
pub struct Change {
    pub total_energy: f64,
    pub orbitals: Vec<OrbitalChange>,
}

#[derive(Clone, Debug, Serialize)]
pub struct OrbitalChange {
    pub label: String,
    pub energy: f64,
    pub r: f64,
    pub zeta: Option<f64>,
}

/// Levels of a one-electron atom or ion by Dirac's equation.
#[derive(Clone, Debug, Serialize)]
pub struct DiracRow {
    pub levels: Vec<DiracLevel>,
    /// Weighted by 2j+1, nucleus infinitely heavy, hartree.
    pub average: f64,
    /// Electron masses.
    pub nuclear_mass: f64,
    pub nuclear_mass_by: &'static str,
}

#[derive(Clone, Debug, Serialize)]
pub struct DiracLevel {
    pub label: String,
    pub j: TwiceJ,
    /// Hartree, nucleus infinitely heavy.
    pub energy: f64,
    /// Hartree, with the nuclear mass.
    pub energy_finite_mass: f64,
    /// cm⁻¹ above the lowest level listed, with the nuclear mass.
    pub above_lowest: f64,
}

/// The density of one subshell for its picture.
#[derive(Clone, Debug, Serialize)]
pub struct Curve {
    pub configuration: String,
    pub path: String,
    pub label: String,
    pub n: u8,
    pub l: u8,
    pub electrons: u32,
    /// a₀.
    pub r: Vec<f64>,
    /// P² in 1/a₀, its integral 1.
    pub density: Vec<f64>,
    /// ⟨r⟩, a₀.
    pub mean: f64,
    /// a₀.
    pub most_probable: f64,
    /// P² there, 1/a₀.
    pub height: f64,
}
