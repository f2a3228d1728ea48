//! The keys of the sheet, document version 1, and the check of a JSON value against them.
//!
//! Every key of the version is known here, also those whose question is answered by a later
//! release: a sheet written for it opens today, its texts are checked, and the answers say which
//! keys they did not use.

use crate::problem::Problem;
use crate::quantity::Dimension;
use crate::quantity::signs::typeset;

use super::choice::{ENERGIES, MEDIA, VIEWS, choice, nearest, not_a_choice};
use super::json::Json;

/// The document version that is read and written.
pub const VERSION: f64 = 1.0;

/// The most configurations of a sheet.
pub const MAX_CONFIGURATIONS: usize = 40;

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
    Reading, Text,
};

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
    ("window", List(&Quantity(Dimension::Wavelength), 2)),
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
            (
                "magnetic_dipole",
                Named(&Quantity(Dimension::Frequency), 1000),
            ),
            (
                "electric_quadrupole",
                Named(&Quantity(Dimension::Frequency), 1000),
            ),
        ]),
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

/// Adds every fault of `json` against `shape`, in the order of the input.
///
/// Notations and labels are only checked for being text: their own parsers follow.
pub fn check(json: &Json, shape: &Shape, path: &str, faults: &mut Vec<Problem>) {
    match shape {
        Shape::Version => version(json, path, faults),
        Text(max) => {
            text(json, path, *max, faults);
        }
        Notation => {
            text(json, path, usize::MAX, faults);
        }
        Label | Reading => {
            text(json, path, MAX_NAME, faults);
        }
        Bool => {
            if !matches!(json, Json::Bool(_)) {
                faults.push(kind(json, path, "true or false"));
            }
        }
        Number(low, high) => match json {
            Json::Number(value) if (*low..=*high).contains(value) => {}
            Json::Number(value) => {
                let edge = if value < low { low } else { high };
                faults.push(
                    Problem::new(
                        "number-out-of-range",
                        format!("{} is {}.", key_of(path), typeset(*value)),
                        0,
                        0,
                    )
                    .bound(format!(
                        "It lies from {} to {}.",
                        typeset(*low),
                        typeset(*high)
                    ))
                    .way(format!("Use {}", typeset(*edge)), edge.to_string())
                    .at(path),
                );
            }
            _ => faults.push(kind(json, path, "a number")),
        },
        Choice(words) => {
            if let Some(word) = text(json, path, MAX_NAME, faults)
                && choice(word, words).is_none()
            {
                faults.push(not_a_choice(word, words, None, path));
            }
        }
        ChoiceOr(words, dimension) => {
            if let Some(word) = text(json, path, MAX_NAME, faults)
                && choice(word, words).is_none()
            {
                if word.trim_start().starts_with(char::is_alphabetic) {
                    faults.push(not_a_choice(word, words, Some(*dimension), path));
                } else {
                    quantity(word, *dimension, path, faults);
                }
            }
        }
        Quantity(dimension) => {
            if let Some(typed) = text(json, path, MAX_NAME, faults) {
                quantity(typed, *dimension, path, faults);
            }
        }
        HalfInteger => {
            if let Some(typed) = text(json, path, MAX_NAME, faults)
                && let Err(problem) = crate::quantity::half_integer(typed)
            {
                faults.push(problem.in_utf16(typed).at(path));
            }
        }
        List(item, max) => match json {
            Json::List(items) => {
                if items.len() > *max {
                    faults.push(
                        Problem::new(
                            "too-many-entries",
                            format!("{} has {} entries.", key_of(path), items.len()),
                            0,
                            0,
                        )
                        .bound(format!("It takes at most {max}."))
                        .at(path),
                    );
                    return;
                }
                for (index, value) in items.iter().enumerate() {
                    check(value, item, &format!("{path}/{index}"), faults);
                }
            }
            _ => faults.push(kind(json, path, "a list in square brackets")),
        },
        Group(keys) => group(json, keys, path, faults),
        Named(value, max) => match json {
            Json::Object(entries) => {
                if entries.len() > *max {
                    faults.push(
                        Problem::new(
                            "too-many-entries",
                            format!("{} has {} entries.", key_of(path), entries.len()),
                            0,
                            0,
                        )
                        .bound(format!("It takes at most {max}."))
                        .at(path),
                    );
                    return;
                }
                for (key, entry) in entries {
                    if key.chars().count() > MAX_NAME {
                        faults.push(too_long(key.chars().count(), MAX_NAME, path));
                        continue;
                    }
                    check(entry, value, &pointer(path, key), faults);
                }
            }
            _ => faults.push(kind(json, path, "a group of names with values")),
        },
    }
}

pub(super) fn key_of(path: &str) -> String {
    match path.rsplit('/').next() {
        Some(key) if !key.is_empty() => {
            format!("\"{}\"", key.replace("~1", "/").replace("~0", "~"))
        }
        _ => "The sheet".to_owned(),
    }
}

fn kind(json: &Json, path: &str, wanted: &str) -> Problem {
    Problem::new(
        "wrong-kind-of-value",
        format!("{} is {}.", key_of(path), json.what()),
        0,
        0,
    )
    .bound(format!("It must be {wanted}."))
    .at(path)
}

fn too_long(length: usize, max: usize, path: &str) -> Problem {
    Problem::new(
        "text-too-long",
        format!("This text has {length} characters."),
        0,
        0,
    )
    .bound(format!("At most {max} characters stand here."))
    .at(path)
}

fn text<'a>(json: &'a Json, path: &str, max: usize, faults: &mut Vec<Problem>) -> Option<&'a str> {
    let Some(typed) = json.as_text() else {
        faults.push(kind(json, path, "a text in quotation marks"));
        return None;
    };
    let length = typed.chars().count();
    if length > max {
        let kept: String = typed.chars().take(max).collect();
        let mut problem = too_long(length, max, path)
            .way(format!("Keep the first {max} characters"), kept.clone());
        problem.start = kept.encode_utf16().count();
        problem.end = typed.encode_utf16().count();
        faults.push(problem);
        return None;
    }
    Some(typed)
}

fn quantity(typed: &str, dimension: Dimension, path: &str, faults: &mut Vec<Problem>) {
    if let Err(problem) = crate::quantity::quantity(typed, dimension) {
        faults.push(problem.in_utf16(typed).at(path));
    }
}

fn version(json: &Json, path: &str, faults: &mut Vec<Problem>) {
    match json {
        Json::Number(value) if *value == VERSION => {}
        Json::Number(value) => faults.push(
            Problem::new(
                "wrong-version",
                format!("This sheet has document version {}.", typeset(*value)),
                0,
                0,
            )
            .bound("This program reads document version 1.")
            .way("Read it as version 1", "1")
            .at(path),
        ),
        _ => faults.push(kind(json, path, "the number 1")),
    }
}

fn group(json: &Json, keys: &[(&str, Shape)], path: &str, faults: &mut Vec<Problem>) {
    let Json::Object(entries) = json else {
        faults.push(kind(json, path, "a group of keys in braces"));
        return;
    };
    if path.is_empty() && json.get("rungline").is_none() {
        let mut problem = Problem::new(
            "version-missing",
            "This is not a Rungline sheet: it lacks \"rungline\".",
            0,
            0,
        )
        .bound("A sheet starts with \"rungline\": 1.");
        let mut whole = vec![("rungline".to_owned(), Json::Number(VERSION))];
        whole.extend(entries.iter().cloned());
        let text = super::pretty(&Json::Object(whole));
        if text.len() <= super::json::MAX_REPAIRED_BYTES {
            problem = problem.way("Add \"rungline\": 1", text);
        }
        faults.push(problem);
    }
    for (key, value) in entries {
        match keys.iter().find(|(name, _)| name == key) {
            Some((_, shape)) => check(value, shape, &pointer(path, key), faults),
            None => {
                let short: String = key.chars().take(60).collect();
                let place = if path.is_empty() {
                    "a sheet".to_owned()
                } else {
                    key_of(path)
                };
                let mut problem = Problem::new(
                    "unknown-key",
                    format!("There is no key \"{short}\" in {place}."),
                    0,
                    0,
                )
                .at(pointer(path, key));
                let names: Vec<&str> = keys.iter().map(|(name, _)| *name).collect();
                problem = match nearest(key, names.iter().copied()) {
                    Some(near) => problem
                        .bound(format!("The nearest known key is \"{near}\"."))
                        .way(format!("Rename it {near}"), near),
                    None => problem.bound(format!("Known keys: {}.", names.join(", "))),
                };
                faults.push(problem);
            }
        }
    }
}

#[cfg(test)]
mod tests {
    #[test]
    fn a_sheet_without_its_version_gets_it() {
        let mut faults = Vec::new();
        check(
            &read(r#"{"species":"Fe"}"#).unwrap(),
            &SHEET,
            "",
            &mut faults,
        );
        let whole = read(&faults[0].ways[0].replacement).unwrap();
        faults.clear();
        check(&whole, &SHEET, "", &mut faults);
        assert_eq!(faults, []);
    }

    use super::*;
    use crate::sheet::json::read;

    fn codes(text: &str) -> Vec<(&'static str, String)> {
        let mut faults = Vec::new();
        check(&read(text).unwrap(), &SHEET, "", &mut faults);
        faults.into_iter().map(|f| (f.code, f.path)).collect()
    }

    #[test]
    fn every_fault_is_reported_in_order() {
        let found = codes(
            r#"{"rungline":2,"specie":"Fe","title":7,"structure":{"relativity":"yes","scal":{}},"medium":"ais"}"#,
        );
        let expected = [
            ("wrong-version", "/rungline"),
            ("unknown-key", "/specie"),
            ("wrong-kind-of-value", "/title"),
            ("wrong-kind-of-value", "/structure/relativity"),
            ("unknown-key", "/structure/scal"),
            ("unknown-choice", "/medium"),
        ];
        assert_eq!(found, expected.map(|(c, p)| (c, p.to_owned())));
    }

    #[test]
    fn the_nearest_known_key_is_named() {
        let mut faults = Vec::new();
        check(
            &read(r#"{"rungline":1,"configuration":[]}"#).unwrap(),
            &SHEET,
            "",
            &mut faults,
        );
        assert_eq!(faults[0].ways[0].replacement, "configurations");
    }

    #[test]
    fn keys_are_escaped_in_pointers() {
        assert_eq!(pointer("/measured", "3p 2P1/2~"), "/measured/3p 2P1~12~0");
    }
}
