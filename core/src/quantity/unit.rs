//! Kinds of quantity, their units and bounds.

use crate::constants::{
    ATOMIC_MASS, BOHR_RADIUS, ELECTRON_VOLT_WAVENUMBER, HARTREE_WAVENUMBER, PLANCK, RYDBERG,
    SPEED_OF_LIGHT,
};

/// What a quantity measures. The unit named with each is the one values are kept in.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Dimension {
    /// Wavelength, nm.
    Wavelength,
    /// Energy of a level or line as a wavenumber, cm-1; electron volts, hertz, hartree are taken too.
    Wavenumber,
    /// Frequency, width or hyperfine constant, MHz; cm-1 is taken too.
    Frequency,
    /// Magnetic flux density, T.
    FluxDensity,
    /// Temperature, K.
    Temperature,
    /// Pressure, Pa.
    Pressure,
    /// Angle, degrees.
    Angle,
    /// Atoms in a column of unit area, m-2.
    ColumnDensity,
    /// Mass, u.
    Mass,
    /// Dipole polarisability as a volume, a0^3.
    Polarisability,
    /// Radius in an atom, a0.
    Radius,
    /// Radial integral ⟨r⟩ between orbitals, a0.
    RadialIntegral,
    /// Radial integral ⟨r²⟩ between orbitals, a0^2.
    RadialIntegralSquared,
    /// Length in an instrument, mm.
    Length,
    /// Grooves of a grating per length, mm-1.
    GrooveDensity,
    /// Resolving power λ/Δλ, a pure number.
    ResolvingPower,
    /// Particles in a volume, m-3.
    NumberDensity,
    /// Relative humidity of air, %.
    Humidity,
    /// Share of a gas among the molecules of air, ppm.
    MoleFraction,
    /// Refractive index, a pure number.
    RefractiveIndex,
    /// Share of a whole, %.
    Share,
    /// A pure number of any kind.
    Number,
}

/// A unit of a dimension: value in the dimension's own unit = typed · `multiply` / `divide` + `offset`.
///
/// Two factors, so that a power of ten is divided by where that is the exact operation.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Unit {
    /// The usual spelling, ASCII where the trade has one.
    pub symbol: &'static str,
    pub(super) spellings: &'static [&'static str],
    multiply: f64,
    divide: f64,
    offset: f64,
}

impl Unit {
    /// The value in the dimension's own unit.
    pub fn to_own(&self, typed: f64) -> f64 {
        typed * self.multiply / self.divide + self.offset
    }

    /// A difference in the dimension's own unit.
    pub fn difference_to_own(&self, typed: f64) -> f64 {
        typed * self.multiply / self.divide
    }
}

const fn unit(
    symbol: &'static str,
    spellings: &'static [&'static str],
    multiply: f64,
    divide: f64,
) -> Unit {
    Unit {
        symbol,
        spellings,
        multiply,
        divide,
        offset: 0.0,
    }
}

/// Hertz in 1 cm-1, exact.
const HERTZ_PER_WAVENUMBER: f64 = SPEED_OF_LIGHT.value * 100.0;

const WAVELENGTH: &[Unit] = &[
    unit(
        "nm",
        &["nanometre", "nanometres", "nanometer", "nanometers"],
        1.0,
        1.0,
    ),
    unit(
        "Å",
        &[
            "A",
            "AA",
            "Ang",
            "angstrom",
            "angstroms",
            "Angstrom",
            "ångström",
        ],
        1.0,
        10.0,
    ),
    unit("µm", &["um", "micron", "microns", "micrometre"], 1e3, 1.0),
    unit("pm", &[], 1.0, 1e3),
    unit("fm", &[], 1.0, 1e6),
    unit("mm", &[], 1e6, 1.0),
    unit("cm", &[], 1e7, 1.0),
    unit("m", &[], 1e9, 1.0),
];

const WAVENUMBER: &[Unit] = &[
    unit(
        "cm-1",
        &["/cm", "1/cm", "cm^-1", "kayser", "Kayser"],
        1.0,
        1.0,
    ),
    unit("eV", &["electronvolt"], ELECTRON_VOLT_WAVENUMBER.value, 1.0),
    unit("GHz", &[], 1e9, HERTZ_PER_WAVENUMBER),
    unit("meV", &[], ELECTRON_VOLT_WAVENUMBER.value, 1e3),
    unit("keV", &[], ELECTRON_VOLT_WAVENUMBER.value * 1e3, 1.0),
    unit("Hz", &[], 1.0, HERTZ_PER_WAVENUMBER),
    unit("kHz", &[], 1e3, HERTZ_PER_WAVENUMBER),
    unit("MHz", &[], 1e6, HERTZ_PER_WAVENUMBER),
    unit("THz", &[], 1e12, HERTZ_PER_WAVENUMBER),
    unit("PHz", &[], 1e15, HERTZ_PER_WAVENUMBER),
    unit("m-1", &["/m", "1/m"], 1.0, 100.0),
    unit(
        "Eh",
        &["E_h", "hartree", "Hartree", "Ha"],
        HARTREE_WAVENUMBER.value,
        1.0,
    ),
    unit("Ry", &["rydberg", "Rydberg"], RYDBERG.value, 1.0),
    unit("J", &["joule"], 1.0, PLANCK.value * HERTZ_PER_WAVENUMBER),
];

const FREQUENCY: &[Unit] = &[
    unit("MHz", &[], 1.0, 1.0),
    unit("GHz", &[], 1e3, 1.0),
    unit("kHz", &[], 1.0, 1e3),
    unit("Hz", &["s-1", "/s", "1/s"], 1.0, 1e6),
    unit("THz", &[], 1e6, 1.0),
    unit("cm-1", &["/cm", "1/cm"], HERTZ_PER_WAVENUMBER, 1e6),
];

const FLUX_DENSITY: &[Unit] = &[
    unit("T", &["tesla", "Tesla"], 1.0, 1.0),
    unit("mT", &["millitesla"], 1.0, 1e3),
    // Of a field strength in oersted the flux density in air, which meters show.
    unit(
        "G",
        &["gauss", "Gauss", "Oe", "oersted", "Oersted"],
        1.0,
        1e4,
    ),
    unit("kG", &["kilogauss", "kOe"], 1.0, 10.0),
    unit("µT", &["uT", "microtesla"], 1.0, 1e6),
    unit("MG", &["megagauss"], 100.0, 1.0),
];

const TEMPERATURE: &[Unit] = &[
    unit("K", &["kelvin", "Kelvin"], 1.0, 1.0),
    Unit {
        symbol: "°C",
        spellings: &["C", "degC", "℃", "celsius", "Celsius"],
        multiply: 1.0,
        divide: 1.0,
        offset: 273.15,
    },
];

const PRESSURE: &[Unit] = &[
    unit("Pa", &["pascal", "Pascal"], 1.0, 1.0),
    unit("mbar", &[], 100.0, 1.0),
    unit("Torr", &["torr"], 101_325.0, 760.0),
    unit("hPa", &[], 100.0, 1.0),
    unit("kPa", &[], 1e3, 1.0),
    unit("MPa", &[], 1e6, 1.0),
    unit("bar", &[], 1e5, 1.0),
    unit("atm", &[], 101_325.0, 1.0),
    // Conventional millimetre of mercury, ISO 80000-4 (from memory).
    unit("mmHg", &[], 133.322, 1.0),
];

const ANGLE: &[Unit] = &[
    unit("°", &["deg", "degree", "degrees"], 1.0, 1.0),
    unit("rad", &["radian", "radians"], 180.0, std::f64::consts::PI),
    unit("mrad", &[], 0.18, std::f64::consts::PI),
];

const COLUMN_DENSITY: &[Unit] = &[
    unit("m-2", &["/m2", "1/m2"], 1.0, 1.0),
    unit("cm-2", &["/cm2", "1/cm2"], 1e4, 1.0),
];

const MASS: &[Unit] = &[
    unit("u", &["amu"], 1.0, 1.0),
    unit("Da", &[], 1.0, 1.0),
    unit("kg", &[], 1.0, ATOMIC_MASS.value),
];

/// a0 in ångström.
const BOHR_ANGSTROM: f64 = BOHR_RADIUS.value * 1e10;

const POLARISABILITY: &[Unit] = &[
    unit("a0^3", &["a03", "a_03", "bohr3"], 1.0, 1.0),
    unit(
        "Å^3",
        &["Å3", "A3", "angstrom3"],
        1.0,
        BOHR_ANGSTROM * BOHR_ANGSTROM * BOHR_ANGSTROM,
    ),
];

const RADIUS: &[Unit] = &[
    unit("a0", &["a_0", "bohr", "Bohr"], 1.0, 1.0),
    unit("Å", &["A", "angstrom"], 1.0, BOHR_ANGSTROM),
    unit("pm", &[], 1.0, BOHR_ANGSTROM * 100.0),
    unit("nm", &[], 10.0, BOHR_ANGSTROM),
];

const RADIAL_INTEGRAL_SQUARED: &[Unit] = &[
    unit("a0^2", &["a02", "a_02", "bohr2"], 1.0, 1.0),
    unit(
        "Å^2",
        &["Å2", "A2", "angstrom2"],
        1.0,
        BOHR_ANGSTROM * BOHR_ANGSTROM,
    ),
];

const LENGTH: &[Unit] = &[
    unit("mm", &[], 1.0, 1.0),
    unit("µm", &["um", "micron", "microns"], 1.0, 1e3),
    unit("cm", &[], 10.0, 1.0),
    unit("m", &[], 1e3, 1.0),
    unit("nm", &[], 1.0, 1e6),
];

const GROOVE_DENSITY: &[Unit] = &[
    unit(
        "mm-1",
        &["/mm", "1/mm", "l/mm", "lines/mm", "grooves/mm"],
        1.0,
        1.0,
    ),
    unit("cm-1", &["/cm", "1/cm"], 1.0, 10.0),
    unit("m-1", &["/m", "1/m"], 1.0, 1e3),
];

const NUMBER_DENSITY: &[Unit] = &[
    unit("m-3", &["/m3", "1/m3"], 1.0, 1.0),
    unit("cm-3", &["/cm3", "1/cm3"], 1e6, 1.0),
];

const HUMIDITY: &[Unit] = &[unit("%", &["percent", "per cent"], 1.0, 1.0)];

const MOLE_FRACTION: &[Unit] = &[
    unit("ppm", &["µmol/mol", "umol/mol"], 1.0, 1.0),
    unit("%", &["percent", "per cent"], 1e4, 1.0),
];

/// Name, units (the first is the own one), lowest and highest value in it.
struct Description {
    name: &'static str,
    units: &'static [Unit],
    lowest: f64,
    highest: f64,
}

const fn described(
    name: &'static str,
    units: &'static [Unit],
    lowest: f64,
    highest: f64,
) -> Description {
    Description {
        name,
        units,
        lowest,
        highest,
    }
}

impl Dimension {
    /// Every dimension.
    pub const ALL: [Dimension; 22] = [
        Dimension::Wavelength,
        Dimension::Wavenumber,
        Dimension::Frequency,
        Dimension::FluxDensity,
        Dimension::Temperature,
        Dimension::Pressure,
        Dimension::Angle,
        Dimension::ColumnDensity,
        Dimension::Mass,
        Dimension::Polarisability,
        Dimension::Radius,
        Dimension::RadialIntegral,
        Dimension::RadialIntegralSquared,
        Dimension::Length,
        Dimension::GrooveDensity,
        Dimension::ResolvingPower,
        Dimension::NumberDensity,
        Dimension::Humidity,
        Dimension::MoleFraction,
        Dimension::RefractiveIndex,
        Dimension::Share,
        Dimension::Number,
    ];

    const fn description(self) -> Description {
        match self {
            Dimension::Wavelength => described("wavelength", WAVELENGTH, 1e-3, 1e9),
            Dimension::Wavenumber => described("energy", WAVENUMBER, -1e10, 1e10),
            Dimension::Frequency => described("frequency", FREQUENCY, -1e12, 1e12),
            // The strongest field in which a sheet is answered; its direction is set by the view.
            Dimension::FluxDensity => described("flux density", FLUX_DENSITY, 0.0, 1e3),
            Dimension::Temperature => described("temperature", TEMPERATURE, 1e-9, 1e9),
            Dimension::Pressure => described("pressure", PRESSURE, 0.0, 1e9),
            Dimension::Angle => described("angle", ANGLE, -360.0, 360.0),
            Dimension::ColumnDensity => described("column density", COLUMN_DENSITY, 0.0, 1e30),
            Dimension::Mass => described("mass", MASS, 1e-4, 1e6),
            Dimension::Polarisability => described("polarisability", POLARISABILITY, 0.0, 1e6),
            Dimension::Radius => described("radius", RADIUS, 0.0, 1e5),
            Dimension::RadialIntegral => described("radial integral", RADIUS, -1e6, 1e6),
            Dimension::RadialIntegralSquared => described(
                "squared radial integral",
                RADIAL_INTEGRAL_SQUARED,
                -1e9,
                1e9,
            ),
            Dimension::Length => described("length", LENGTH, 1e-6, 1e6),
            Dimension::GrooveDensity => described("groove density", GROOVE_DENSITY, 1e-3, 1e5),
            Dimension::ResolvingPower => described("resolving power", &[], 1.0, 1e10),
            Dimension::NumberDensity => described("number density", NUMBER_DENSITY, 1.0, 1e40),
            Dimension::Humidity => described("relative humidity", HUMIDITY, 0.0, 100.0),
            Dimension::MoleFraction => described("share of a gas", MOLE_FRACTION, 0.0, 1e6),
            Dimension::RefractiveIndex => described("refractive index", &[], 1.0, 10.0),
            Dimension::Share => described("share", HUMIDITY, 0.0, 100.0),
            Dimension::Number => described("number", &[], -1e15, 1e15),
        }
    }

    /// A value of everyday size, as it may be typed: what a way out offers in place of a text that
    /// cannot be read.
    pub fn usual(self) -> &'static str {
        match self {
            Dimension::Wavelength => "589.592 nm",
            Dimension::Wavenumber => "16956.17 cm-1",
            Dimension::Frequency => "100 MHz",
            Dimension::FluxDensity => "0.5 T",
            Dimension::Temperature => "1200 K",
            Dimension::Pressure => "101325 Pa",
            Dimension::Angle => "60 deg",
            Dimension::ColumnDensity => "1e15 m-2",
            Dimension::Mass => "23 u",
            Dimension::Polarisability => "1 a0^3",
            Dimension::Radius => "1 a0",
            Dimension::RadialIntegral => "1 a0",
            Dimension::RadialIntegralSquared => "1 a0^2",
            Dimension::Length => "1 m",
            Dimension::GrooveDensity => "1200 mm-1",
            Dimension::ResolvingPower => "50000",
            Dimension::NumberDensity => "1e20 m-3",
            Dimension::Humidity => "50 %",
            Dimension::MoleFraction => "450 ppm",
            Dimension::RefractiveIndex => "1.5",
            Dimension::Share => "50 %",
            Dimension::Number => "1",
        }
    }

    /// What it is called in a sentence.
    pub fn name(self) -> &'static str {
        self.description().name
    }

    /// Its units, the own one first, then by how usual they are; none for pure numbers.
    pub fn units(self) -> &'static [Unit] {
        self.description().units
    }

    /// The unit that values are kept in; empty for pure numbers.
    pub fn own_unit(self) -> &'static str {
        self.units().first().map_or("", |unit| unit.symbol)
    }

    /// The lowest and the highest value taken, in the own unit.
    pub fn bounds(self) -> (f64, f64) {
        let description = self.description();
        (description.lowest, description.highest)
    }

    /// The unit of a spelling, exact letters; `None` where there is none.
    pub fn unit(self, spelling: &str) -> Option<Unit> {
        let wanted = normalised(spelling);
        self.units().iter().copied().find(|unit| {
            normalised(unit.symbol) == wanted
                || unit.spellings.iter().any(|s| normalised(s) == wanted)
        })
    }
}

/// A unit's spelling with like signs made one: no spaces, carets or braces, superscripts as digits,
/// one micro sign, one ångström, one degree sign.
pub(super) fn normalised(spelling: &str) -> String {
    use super::signs::{is_minus, superscript_digit, superscript_sign};
    spelling
        .chars()
        .filter(|c| !c.is_whitespace() && !matches!(c, '^' | '{' | '}'))
        .map(|c| match c {
            'μ' => 'µ',
            '\u{212B}' => 'Å',
            'º' | '˚' => '°',
            '₀' => '0',
            c if is_minus(c) => '-',
            c => superscript_digit(c)
                .or_else(|| superscript_sign(c))
                .unwrap_or(c),
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_spelling_names_one_unit() {
        for dimension in Dimension::ALL {
            let usual = crate::quantity::quantity(dimension.usual(), dimension);
            assert!(usual.is_ok(), "{dimension:?}: {usual:?}");
            let mut seen: Vec<String> = Vec::new();
            for unit in dimension.units() {
                for spelling in std::iter::once(&unit.symbol).chain(unit.spellings) {
                    assert_eq!(
                        dimension.unit(spelling).map(|u| u.symbol),
                        Some(unit.symbol),
                        "{spelling}"
                    );
                    seen.push(normalised(spelling));
                }
            }
            seen.sort();
            // Two spellings of one unit may be the same after like signs are made one.
            seen.dedup();
            let (lowest, highest) = dimension.bounds();
            assert!(lowest < highest);
        }
    }

    #[test]
    fn signs_of_units_are_made_one() {
        assert_eq!(normalised("cm⁻¹"), "cm-1");
        assert_eq!(normalised("cm^−1"), "cm-1");
        assert_eq!(normalised("a₀³"), "a03");
        assert_eq!(normalised("\u{212B}"), "Å");
        assert_eq!(
            Dimension::FluxDensity.unit("μT").map(|u| u.symbol),
            Some("µT")
        );
    }
}
