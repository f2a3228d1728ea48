//! The radial parameters of the energies, spelled as the sheet spells or may spell them.

use crate::configuration::Orbital;
use crate::structure::model::{Kind, Name, Value};

use super::document::Document;
use super::energy_case::EnergyCase;
use super::levels_rows::ParameterRow;
use super::solved::Solved;

/// A name as it is written, without its configuration.
fn spelling(document: &Document, entries: &[usize], name: Name) -> String {
    let two = |letter: &str, a: Orbital, b: Orbital| format!("{letter}({a},{b})");
    match name {
        Name::Average(place) => format!("E({})", label(document, entries, place)),
        Name::Direct { k, a, b } => two(&format!("F{k}"), a, b),
        Name::Exchange { k, a, b } => two(&format!("G{k}"), a, b),
        Name::Mixing { k, a, b, c, d } => format!("R{k}({a},{b};{c},{d})"),
        Name::OneElectron(a, c) => two("h", a, c),
        Name::SpinOrbit(a) => format!("zeta({a})"),
        // No name of the sheet's, for what it changes can be given.
        Name::Change { k, a } => two(&format!("ΔF{k}"), a, a),
        Name::Alpha(a) => format!("alpha({a})"),
        Name::Beta(a) => format!("beta({a})"),
        Name::Gamma(a) => format!("gamma({a})"),
        Name::Dipole(a, b) => two("r", a, b),
        Name::Quadrupole(a, b) => two("r2", a, b),
    }
}

fn label(document: &Document, entries: &[usize], place: usize) -> String {
    let entry = entries.get(place).and_then(|e| document.entries.get(*e));
    entry.map(|e| e.label.clone()).unwrap_or_default()
}

/// Rows for these values.
pub fn rows(document: &Document, solved: &Solved, values: &[Value]) -> Vec<ParameterRow> {
    let EnergyCase::Model { case, entries } = solved.case() else {
        return Vec::new();
    };
    values
        .iter()
        .map(|value| {
            let (first, second) = value.configurations;
            let bare = spelling(document, entries, value.name);
            let configuration = label(document, entries, first);
            let entered = (value.kind == Kind::Entered)
                .then(|| typed(document, entries, value))
                .flatten();
            let own = matches!(value.name, Name::Average(_));
            let several = values.iter().any(|other| {
                other.name.ordered() == value.name.ordered()
                    && other.configurations != value.configurations
            });
            let name = match entered {
                Some(spelled) => spelled,
                None if several && !own => format!("{bare} @ {configuration}"),
                None => bare,
            };
            ParameterRow {
                name,
                second: (first != second).then(|| label(document, entries, second)),
                configuration: Some(configuration),
                // A zero without its sign.
                value: value.value + 0.0,
                unit: match value.name {
                    Name::Dipole(..) => "a0",
                    Name::Quadrupole(..) => "a0^2",
                    _ => "cm-1",
                },
                kind: match value.kind {
                    Kind::Computed => "computed",
                    Kind::Entered => "entered",
                    Kind::Zero => "zero",
                },
                computed: value.computed.map(|computed| computed + 0.0),
                scale: (value.kind == Kind::Computed && case.computed).then_some(value.scale),
                can_be_given: !matches!(value.name, Name::OneElectron(..) | Name::Change { .. }),
            }
        })
        .collect()
}

/// How the sheet spells the name whose value stands here: a qualified one wins.
fn typed(document: &Document, entries: &[usize], value: &Value) -> Option<String> {
    let (first, second) = value.configurations;
    let of = |place: usize| entries.get(place).copied();
    let mut found: Option<(&str, bool)> = None;
    for given in &document.given {
        let same = super::energy_case::name_of(given, entries)
            .is_some_and(|name| name.ordered() == value.name.ordered());
        let fits = given
            .entry
            .is_none_or(|entry| Some(entry) == of(first) || Some(entry) == of(second));
        let qualified = given.entry.is_some();
        if same && fits && found.is_none_or(|(_, known)| qualified >= known) {
            found = Some((&given.spelling, qualified));
        }
    }
    found.map(|(spelling, _)| spelling.to_owned())
}
