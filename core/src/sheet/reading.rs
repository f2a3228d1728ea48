//! How a sheet was read: faults, an echo of every field, the head, the state of each question.

use serde::Serialize;

use crate::problem::Problem;
use crate::quantity::TwiceJ;
use crate::terms::label;

use super::document::Document;
use super::entry::{Content, Entry};
use super::json::Json;
use super::lack::Way;
use super::nucleus::{isotope_name, natural};
use super::rich::{Kind, Rich, six_digits};
use super::{Question, to_json};

#[derive(Serialize)]
struct Reading<'a> {
    faults: &'a [Problem],
    echo: Vec<Echo>,
    head: Rich,
    head_plain: String,
    defaults: Defaults,
    /// Labels of levels that the sheet's configurations have, for choosing a line.
    levels: Vec<String>,
    questions: Vec<QuestionState<'a>>,
    /// The natural isotopes of the element.
    isotopes: Vec<NaturalIsotope>,
}

#[derive(Serialize)]
struct NaturalIsotope {
    isotope: String,
    share: String,
    spin: Option<TwiceJ>,
}

#[derive(Serialize)]
struct Echo {
    path: String,
    rich: Rich,
    plain: String,
}

#[derive(Serialize)]
struct Defaults {
    configurations: Vec<String>,
}

#[derive(Serialize)]
struct QuestionState<'a> {
    name: &'static str,
    status: &'static str,
    /// Places of the faults that it hangs on.
    faults: Vec<&'a str>,
    needs: Option<String>,
    way: Option<Way>,
}

/// The most level names that are offered for a line.
const MAX_LEVEL_NAMES: usize = 400;

/// How a sheet was read, as JSON text.
pub fn reading(sheet: &Json) -> String {
    let document = Document::read(sheet);
    let head = head(&document);
    to_json(&Reading {
        echo: echoes(&document),
        head_plain: head.plain(),
        head,
        defaults: Defaults {
            configurations: document
                .entries
                .iter()
                .filter(|e| e.path.is_empty())
                .map(|e| e.label.clone())
                .collect(),
        },
        levels: level_names(&document),
        questions: Question::ALL
            .into_iter()
            .map(|question| state(&document, question))
            .collect(),
        isotopes: natural_isotopes(&document),
        faults: &document.faults,
    })
}

fn state(document: &Document, question: Question) -> QuestionState<'_> {
    let name = question.name();
    let all = document.faults.iter().map(|fault| fault.path.as_str());
    let faults: Vec<&str> = all.filter(|path| question.hangs_on(path)).collect();
    if !faults.is_empty() {
        return QuestionState {
            name,
            status: "fault",
            faults,
            needs: None,
            way: None,
        };
    }
    match document.lacks(question) {
        None => QuestionState {
            name,
            status: "ready",
            faults,
            needs: None,
            way: None,
        },
        Some(lack) => QuestionState {
            name,
            status: "lacks",
            faults,
            needs: Some(lack.needs),
            way: lack.way,
        },
    }
}

fn level_names(document: &Document) -> Vec<String> {
    let mut names = Vec::new();
    for (index, entry) in document.entries.iter().enumerate() {
        let left = MAX_LEVEL_NAMES.saturating_sub(names.len());
        names.extend(
            document
                .levels(index, left)
                .iter()
                .map(|level| label::format(&entry.label, level)),
        );
    }
    names
}

fn natural_isotopes(document: &Document) -> Vec<NaturalIsotope> {
    let z = document.species.and_then(|species| species.element);
    let rows = z.map(natural).unwrap_or_default();
    rows.iter()
        .map(|isotope| NaturalIsotope {
            isotope: isotope_name(isotope),
            share: format!("{} %", isotope.abundance.unwrap_or(0.0)),
            spin: isotope.spin,
        })
        .collect()
}

fn electrons(rich: Rich, entry: &Entry) -> Rich {
    match entry.configuration() {
        Some(configuration) => rich.count(configuration.electrons(), "electron", "electrons"),
        None => rich,
    }
}

fn head(document: &Document) -> Rich {
    let mut head = document.species_rich();
    if head.0.is_empty() {
        head = Rich::words(if document.species.is_some() {
            "Any atom"
        } else {
            "No atom yet"
        });
    }
    for (place, entry) in document.entries.iter().enumerate() {
        head = head.say(if place == 0 { " · " } else { " → " });
        head = match &entry.content {
            Content::Configuration(named) => head.then(&named.short_rich()),
            Content::BareShell(n) => head.say(format!("shell n = {n}")),
        };
    }
    match document.entries.first() {
        Some(entry) if entry.configuration().is_some() => electrons(head.say(" · "), entry),
        _ => head,
    }
}

fn echoes(document: &Document) -> Vec<Echo> {
    let mut echoes = Vec::new();
    let mut add = |path: &str, rich: Rich| {
        echoes.push(Echo {
            path: path.to_owned(),
            plain: rich.plain(),
            rich,
        })
    };
    if let Some(species) = &document.species {
        let rich = match species.element {
            None => Rich::words("Any atom: nothing is taken from a nucleus"),
            Some(_) => {
                let rich = document
                    .species_rich()
                    .say(format!(", {}, ", described(species)));
                rich.count(species.electrons().unwrap_or(0), "electron", "electrons")
            }
        };
        add("/species", rich);
    }
    for entry in document.entries.iter().filter(|e| !e.path.is_empty()) {
        let rich = match &entry.content {
            Content::BareShell(n) => Rich::words(format!("The bare shell n = {n}")),
            Content::Configuration(named) => {
                let rich = electrons(named.rich().say(", "), entry);
                match &named.completed {
                    Some(core) => rich
                        .say("; the inner electrons were completed as ")
                        .then(&core.rich),
                    None => rich,
                }
            }
        };
        add(&entry.path, rich);
    }
    if let Some(field) = &document.field {
        add(
            "/field/flux_density",
            Rich::new().number(field.tesla, Some("T"), Kind::Entered),
        );
        add(
            "/field/view",
            Rich::new()
                .number(field.angle_degrees, Some("°"), Kind::Entered)
                .say(" between field and line of sight"),
        );
    }
    splitting_echoes(document, &mut add);
    if let Some((upper, lower)) = &document.line {
        add("/line/upper", document.end_rich(upper));
        add("/line/lower", document.end_rich(lower));
    }
    if let Some(polarisation) = &document.structure.polarisation {
        add(
            "/structure/polarisation/alpha",
            Rich::new().number(polarisation.alpha, Some("a0^3"), Kind::Entered),
        );
        add(
            "/structure/polarisation/radius",
            Rich::new().number(polarisation.radius, Some("a0"), Kind::Entered),
        );
    }
    for given in &document.given {
        let unit = given.name.parameter.dimension().own_unit();
        add(
            &super::schema::pointer("/structure/given", &given.spelling),
            Rich::new().number(given.value, Some(unit), Kind::Entered),
        );
    }
    let conditions = &document.conditions;
    for (place, end) in (0..).zip(conditions.window.into_iter().flat_map(|window| window.ends)) {
        let Some(end) = end else { continue };
        let say = |nm: f64| Rich::new().number(nm, Some("nm"), Kind::Entered);
        let rich = match end.by_energy {
            true => say(six_digits(end.nm)).say(" in vacuum"),
            false => say(end.nm),
        };
        add(&format!("/window/{place}"), rich);
    }
    let air = &conditions.air;
    for (path, value, unit) in [
        ("/refractive_index", conditions.refractive_index, None),
        ("/air/temperature", air.temperature, Some("K")),
        ("/air/pressure", air.pressure, Some("Pa")),
        ("/air/humidity", air.humidity, Some("%")),
        ("/air/co2", air.co2, Some("ppm")),
        ("/source/temperature", conditions.temperature, Some("K")),
        (
            "/source/electron_density",
            conditions.electron_density,
            Some("m-3"),
        ),
        ("/source/column", conditions.column, Some("m-2")),
    ] {
        if let Some(value) = value {
            add(path, Rich::new().number(value, unit, Kind::Entered));
        }
    }
    if let Some(wavelength) = document.wavelength_nm {
        add(
            "/line/wavelength",
            Rich::new()
                .number(wavelength, Some("nm"), Kind::Entered)
                .say(" in vacuum"),
        );
    }
    echoes
}

/// Fields of the question on splitting beside the flux density.
fn splitting_echoes(document: &Document, add: &mut dyn FnMut(&str, Rich)) {
    let entered = |value: f64, unit| Rich::new().number(value, unit, Kind::Entered);
    if let Some(field) = &document.field {
        if let Some(end) = field.up_to {
            add("/field/up_to", entered(end, Some("T")));
        }
        if let Some(words) = field.polariser_words() {
            add("/field/polariser", Rich::words(words));
        }
    }
    for (index, nuclear) in document.nuclei.iter().enumerate() {
        let known = match (nuclear.spin, nuclear.g) {
            (Some(spin), Some(g)) if spin.doubled() > 0 => {
                Rich::words(format!("I = {spin}, g_I = ")).number(
                    g,
                    None,
                    if nuclear.typed {
                        Kind::Entered
                    } else {
                        Kind::Measured
                    },
                )
            }
            (Some(spin), _) => Rich::words(format!("I = {spin}")),
            (None, _) => Rich::words("a nucleus whose spin the table does not have"),
        };
        let known = match &nuclear.name {
            Some(name) => Rich::words(format!("{name}: ")).then(&known),
            None => known,
        };
        match nuclear.share {
            None => add("/nucleus/spin", known),
            Some((share, _)) => {
                add(&format!("/isotopes/{index}/isotope"), known);
                add(
                    &format!("/isotopes/{index}/share"),
                    entered(share, Some("%")),
                );
            }
        }
    }
    let Some(level) = &document.level_alone else {
        return;
    };
    if let Some(j) = level.j {
        add("/level/J", Rich::words(format!("J = {j}")));
    }
    if let Some(spin) = level.spin {
        add("/level/I", Rich::words(format!("I = {spin}")));
    }
    for (path, value, unit) in [
        ("/level/g", level.g, None),
        ("/level/A", Some(level.a), Some("MHz")),
        ("/level/B", Some(level.b), Some("MHz")),
        ("/level/g_I", level.g_i, None),
    ] {
        if let Some(value) = value.filter(|value| *value != 0.0) {
            add(path, entered(value, unit));
        }
    }
}

/// "neutral iron", "iron with charge 2+".
fn described(species: &crate::configuration::Species) -> String {
    let name = species
        .element
        .and_then(crate::elements::name)
        .unwrap_or("any atom");
    match species.charge {
        0 => format!("neutral {name}"),
        charge if charge > 0 => format!("{name} with charge {charge}+"),
        charge => format!("{name} with charge {}−", charge.unsigned_abs()),
    }
}
