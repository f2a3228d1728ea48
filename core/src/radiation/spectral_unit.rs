//! The units a line's place in the spectrum is told in.
//!
//! λ[nm] = 10⁷/σ, λ[Å] = 10⁸/σ, E[eV] = σ/8065.543 937…, ν[THz] = 0.029 979 245 8 σ with σ in cm⁻¹,
//! all in vacuum; exact but for rounding, as c, h and e are exact by the definition of the SI.

use crate::constants::{ELECTRON_VOLT_WAVENUMBER, SPEED_OF_LIGHT};

/// A unit of wavelength, wavenumber, energy or frequency.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum SpectralUnit {
    /// nm.
    Nanometre,
    /// Å.
    Angstrom,
    /// cm⁻¹.
    Wavenumber,
    /// eV.
    ElectronVolt,
    /// THz.
    Terahertz,
}

/// THz in 1 cm⁻¹.
const TERAHERTZ: f64 = SPEED_OF_LIGHT.value / 1e10;

impl SpectralUnit {
    /// All of them.
    pub const ALL: [SpectralUnit; 5] = [
        SpectralUnit::Nanometre,
        SpectralUnit::Angstrom,
        SpectralUnit::Wavenumber,
        SpectralUnit::ElectronVolt,
        SpectralUnit::Terahertz,
    ];

    /// Its symbol as the sheet spells it.
    #[must_use]
    pub fn symbol(self) -> &'static str {
        match self {
            SpectralUnit::Nanometre => "nm",
            SpectralUnit::Angstrom => "Å",
            SpectralUnit::Wavenumber => "cm-1",
            SpectralUnit::ElectronVolt => "eV",
            SpectralUnit::Terahertz => "THz",
        }
    }

    /// Whether it is a length, which a medium shortens.
    #[must_use]
    pub fn is_wavelength(self) -> bool {
        matches!(self, SpectralUnit::Nanometre | SpectralUnit::Angstrom)
    }

    /// A wavenumber in cm⁻¹ in this unit, in vacuum; nothing unless it is above zero.
    #[must_use]
    pub fn of_wavenumber(self, wavenumber: f64) -> Option<f64> {
        if !(wavenumber > 0.0 && wavenumber.is_finite()) {
            return None;
        }
        let value = match self {
            SpectralUnit::Nanometre => 1e7 / wavenumber,
            SpectralUnit::Angstrom => 1e8 / wavenumber,
            SpectralUnit::Wavenumber => wavenumber,
            SpectralUnit::ElectronVolt => wavenumber / ELECTRON_VOLT_WAVENUMBER.value,
            SpectralUnit::Terahertz => wavenumber * TERAHERTZ,
        };
        value.is_finite().then_some(value)
    }

    /// The wavenumber in cm⁻¹ of a value in this unit, in vacuum; nothing unless it is above zero.
    #[must_use]
    pub fn to_wavenumber(self, value: f64) -> Option<f64> {
        if !(value > 0.0 && value.is_finite()) {
            return None;
        }
        let wavenumber = match self {
            SpectralUnit::Nanometre => 1e7 / value,
            SpectralUnit::Angstrom => 1e8 / value,
            SpectralUnit::Wavenumber => value,
            SpectralUnit::ElectronVolt => value * ELECTRON_VOLT_WAVENUMBER.value,
            SpectralUnit::Terahertz => value / TERAHERTZ,
        };
        wavenumber.is_finite().then_some(wavenumber)
    }
}
