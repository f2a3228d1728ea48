//! The keys of the sheet, document version 1, what may stand under each, and how they are named.
//!
//! Every key of the version is known here, also those whose question is answered by a later
//! release: a sheet written for it opens today, its texts are checked, and the answers say which
//! keys they did not use.

use crate::quantity::Dimension;

use super::choice::{ENERGIES, MEDIA, POLARISERS, VIEWS};

/// The document version that is read and written.
pub const VERSION: f64 = 1.0;

/// The most configurations of a sheet.
pub const MAX_CONFIGURATIONS: usize = 40;

/// The most isotopes of a sheet.
pub const MAX_ISOTOPES: usize = 40;

/// What may stand under a key.
#[derive(Debug)]
pub enum Shape {
    /// The number 1.
    Version,
    /// Free text of at most so many characters.
    Text(usize),
    /// A species or a configuration: read by its own parser.
    Notation,
    /// A level label: read once the configurations are known.
    Label,
    /// `true` or `false`.
    Bool,
    /// A number from the first to the second bound.
    Number(f64, f64),
    /// One of these words.
    Choice(&'static [&'static str]),
    /// One of these words or a quantity.
    ChoiceOr(&'static [&'static str], Dimension),
    /// A typed quantity.
    Quantity(Dimension),
    /// A typed quantity whose dimension its neighbour decides: only its length is checked.
    Reading,
    /// An end of a window: a wavelength, an energy, or nothing.
    WindowEnd,
    /// A half-integer from 0, as text.
    HalfInteger,
    /// A list of at most so many items.
    List(&'static Shape, usize),
    /// Named keys.
    Group(&'static [(&'static str, Shape)]),
    /// Keys chosen by the user, at most so many.
    Named(&'static Shape, usize),
}

use Shape::{
    Bool, Choice, ChoiceOr, Group, HalfInteger, Label, List, Named, Notation, Number, Quantity,
    Reading, Text, WindowEnd,
};

/// Hyperfine constants of levels.
const CONSTANTS: Shape = Named(&Quantity(Dimension::Frequency), 1000);

/// The whole document.
pub const SHEET: Shape = Group(&[
    ("rungline", Shape::Version),
    ("title", Text(200)),
    ("note", Text(10_000)),
    ("species", Notation),
    ("configurations", List(&Notation, MAX_CONFIGURATIONS)),
    (
        "structure",
        Group(&[
            ("energies", Choice(&ENERGIES)),
            ("relativity", Bool),
            ("mixing", Bool),
            ("correlation", Bool),
            (
                "scale",
                Group(&[
                    ("F", Number(0.0, 10.0)),
                    ("G", Number(0.0, 10.0)),
                    ("R", Number(0.0, 10.0)),
                    ("zeta", Number(0.0, 10.0)),
                ]),
            ),
            (
                "polarisation",
                Group(&[
                    ("alpha", Quantity(Dimension::Polarisability)),
                    ("radius", Quantity(Dimension::Radius)),
                ]),
            ),
            ("given", Named(&Reading, 1000)),
        ]),
    ),
    ("measured", Named(&Quantity(Dimension::Wavenumber), 20_000)),
    (
        "field",
        Group(&[
            ("flux_density", Quantity(Dimension::FluxDensity)),
            ("view", ChoiceOr(&VIEWS, Dimension::Angle)),
            ("up_to", Quantity(Dimension::FluxDensity)),
            ("diamagnetic", Bool),
            ("tolerance", Reading),
            ("polariser", ChoiceOr(&POLARISERS, Dimension::Angle)),
        ]),
    ),
    (
        "line",
        Group(&[
            ("upper", Label),
            ("lower", Label),
            ("wavelength", Quantity(Dimension::Wavelength)),
        ]),
    ),
    (
        "source",
        Group(&[
            ("temperature", Quantity(Dimension::Temperature)),
            ("electron_density", Quantity(Dimension::NumberDensity)),
            ("collision_width", Quantity(Dimension::Frequency)),
            ("column", Quantity(Dimension::ColumnDensity)),
        ]),
    ),
    (
        "instrument",
        Group(&[("resolving_power", Number(1.0, 1e9))]),
    ),
    ("window", List(&WindowEnd, 2)),
    ("pair", List(&Quantity(Dimension::Wavelength), 2)),
    ("medium", Choice(&MEDIA)),
    ("refractive_index", Quantity(Dimension::RefractiveIndex)),
    (
        "air",
        Group(&[
            ("temperature", Quantity(Dimension::Temperature)),
            ("pressure", Quantity(Dimension::Pressure)),
            ("humidity", Quantity(Dimension::Humidity)),
            ("co2", Quantity(Dimension::MoleFraction)),
        ]),
    ),
    (
        "nucleus",
        Group(&[
            ("spin", HalfInteger),
            ("g_I", Reading),
            ("magnetic_dipole", CONSTANTS),
            ("electric_quadrupole", CONSTANTS),
            // A and B that are not entered are computed, for listed isotopes too.
            ("estimate", Bool),
        ]),
    ),
    (
        "isotopes",
        List(
            &Group(&[
                ("isotope", Text(80)),
                ("share", Quantity(Dimension::Share)),
                ("shift", Quantity(Dimension::Frequency)),
                ("magnetic_dipole", CONSTANTS),
                ("electric_quadrupole", CONSTANTS),
            ]),
            MAX_ISOTOPES,
        ),
    ),
    (
        "level",
        Group(&[
            ("J", HalfInteger),
            ("g", Reading),
            ("I", HalfInteger),
            ("A", Quantity(Dimension::Frequency)),
            ("B", Quantity(Dimension::Frequency)),
            ("g_I", Reading),
        ]),
    ),
    (
        "readings",
        List(
            &Group(&[
                (
                    "kind",
                    Choice(&[
                        "line",
                        "level",
                        "interval",
                        "offset",
                        "intensity",
                        "peak",
                        "pixel",
                    ]),
                ),
                ("value", Reading),
                ("u", Reading),
                ("of", Label),
            ]),
            100_000,
        ),
    ),
    ("fit", Group(&[("free", List(&Text(200), 1000))])),
]);

/// Whether the document has this key at its top.
pub fn is_known(key: &str) -> bool {
    match &SHEET {
        Group(keys) => keys.iter().any(|(name, _)| *name == key),
        _ => false,
    }
}

/// The longest text of a quantity, a name or a label.
pub const MAX_NAME: usize = 400;

/// One more level of a JSON pointer, with ~ and / escaped as its standard (RFC 6901) says.
pub fn pointer(path: &str, key: &str) -> String {
    format!("{path}/{}", key.replace('~', "~0").replace('/', "~1"))
}

/// The last key of a JSON pointer in quotation marks, or the sheet itself.
pub(super) fn key_of(path: &str) -> String {
    match path.rsplit('/').next() {
        Some(key) if !key.is_empty() => {
            format!("\"{}\"", key.replace("~1", "/").replace("~0", "~"))
        }
        _ => "The sheet".to_owned(),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn keys_are_escaped_in_pointers() {
        assert_eq!(pointer("/measured", "3p 2P1/2~"), "/measured/3p 2P1~12~0");
    }
}
