//! Fundamental constants: CODATA 2022 recommended values with standard uncertainties.
//!
//! Source of the digits: scipy.constants of SciPy 1.17.1 (BSD-3-Clause), see `core/data/NOTICE`; a
//! test compares every one with that list. Published as Mohr, Newell, Taylor, Tiesinga, CODATA
//! Recommended Values of the Fundamental Physical Constants: 2022.

/// The year of the adjustment.
pub const CODATA_YEAR: u16 = 2022;

/// One constant.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Constant {
    /// The name in the CODATA list, or what it was derived from.
    pub name: &'static str,
    /// The symbol.
    pub symbol: &'static str,
    /// The value in [`Constant::unit`].
    pub value: f64,
    /// Standard uncertainty, 0 for an exact value.
    pub uncertainty: f64,
    /// The unit, ASCII; empty for a pure number.
    pub unit: &'static str,
}

macro_rules! constants {
    ($($(#[$doc:meta])* $id:ident = $name:literal, $symbol:literal, $value:literal, $uncertainty:literal, $unit:literal;)*) => {
        $($(#[$doc])* pub const $id: Constant = Constant {
            name: $name, symbol: $symbol, value: $value, uncertainty: $uncertainty, unit: $unit,
        };)*
        /// Every constant of this module.
        pub const ALL: &[Constant] = &[$($id),*];
    };
}

constants! {
    /// Speed of light, exact.
    SPEED_OF_LIGHT = "speed of light in vacuum", "c", 299792458.0, 0.0, "m s-1";
    /// Planck constant, exact.
    PLANCK = "Planck constant", "h", 6.62607015e-34, 0.0, "J s";
    /// Elementary charge, exact.
    ELEMENTARY_CHARGE = "elementary charge", "e", 1.602176634e-19, 0.0, "C";
    /// Boltzmann constant, exact.
    BOLTZMANN = "Boltzmann constant", "k", 1.380649e-23, 0.0, "J K-1";
    /// k/hc, exact by definition, rounded to double precision.
    BOLTZMANN_WAVENUMBER = "Boltzmann constant in inverse meter per kelvin", "k/hc", 0.6950348004861274, 0.0, "cm-1 K-1";
    /// Bohr magneton.
    BOHR_MAGNETON = "Bohr magneton", "μ_B", 9.2740100657e-24, 2.9e-33, "J T-1";
    /// μ_B/hc: the energy of one Bohr magneton in one tesla, in wavenumbers.
    BOHR_MAGNETON_WAVENUMBER = "Bohr magneton in inverse meter per tesla", "μ_B/hc", 0.46686447719, 1.5e-10, "cm-1 T-1";
    /// μ_B/h: the same as a frequency.
    BOHR_MAGNETON_FREQUENCY = "Bohr magneton in Hz/T", "μ_B/h", 13.9962449171, 4.4e-9, "GHz T-1";
    /// μ_N/h.
    NUCLEAR_MAGNETON_FREQUENCY = "nuclear magneton in MHz/T", "μ_N/h", 7.6225932188, 2.4e-9, "MHz T-1";
    /// g_s, counted positive: the electron's g factor with the sign of μ = −g μ_B s.
    ELECTRON_G = "electron g factor", "g_s", 2.00231930436092, 3.6e-13, "";
    /// α.
    FINE_STRUCTURE = "fine-structure constant", "α", 0.0072973525643, 1.1e-12, "";
    /// R∞.
    RYDBERG = "Rydberg constant", "R∞", 109737.31568157, 1.2e-7, "cm-1";
    /// E_h/hc.
    HARTREE_WAVENUMBER = "hartree-inverse meter relationship", "E_h/hc", 219474.63136314, 2.4e-7, "cm-1";
    /// E_h in electron volts.
    HARTREE_ELECTRON_VOLT = "Hartree energy in eV", "E_h", 27.211386245981, 3e-11, "eV";
    /// 1 eV/hc, exact by definition, rounded to double precision.
    ELECTRON_VOLT_WAVENUMBER = "electron volt-inverse meter relationship", "eV/hc", 8065.543937349211, 0.0, "cm-1";
    /// a₀.
    BOHR_RADIUS = "Bohr radius", "a_0", 5.29177210544e-11, 8.2e-21, "m";
    /// m_e.
    ELECTRON_MASS = "electron mass", "m_e", 9.1093837139e-31, 2.8e-40, "kg";
    /// m_e in atomic mass units.
    ELECTRON_MASS_U = "electron mass in u", "m_e", 0.0005485799090441, 9.7e-15, "u";
    /// m_p in atomic mass units.
    PROTON_MASS_U = "proton mass in u", "m_p", 1.0072764665789, 8.3e-12, "u";
    /// m_d in atomic mass units.
    DEUTERON_MASS_U = "deuteron mass in u", "m_d", 2.013553212544, 1.5e-11, "u";
    /// m_α in atomic mass units.
    ALPHA_MASS_U = "alpha particle mass in u", "m_α", 4.001506179129, 6.2e-11, "u";
    /// 1 u.
    ATOMIC_MASS = "atomic mass constant", "m_u", 1.66053906892e-27, 5.2e-37, "kg";
}
