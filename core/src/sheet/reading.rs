//! How a sheet was read: faults, an echo of every field, the head, the state of each question.

use serde::Serialize;

use crate::configuration::{Orbital, Subshell};
use crate::problem::Problem;
use crate::terms::label;

use super::document::{Content, Document, Entry, Lack, LevelOf, Named, Way};
use super::json::Json;
use super::rich::{Kind, Rich};
use super::{Question, lines, to_json};

#[derive(Serialize)]
struct Reading<'a> {
    faults: &'a [Problem],
    echo: Vec<Echo>,
    head: Rich,
    head_plain: String,
    defaults: Defaults,
    /// Labels of levels that the sheet's configurations have, for choosing a line.
    levels: Vec<String>,
    questions: Vec<QuestionState>,
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
struct QuestionState {
    name: &'static str,
    status: &'static str,
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
        faults: &document.faults,
    })
}

fn state(document: &Document, question: Question) -> QuestionState {
    let name = question.name();
    if !document.faults.is_empty() {
        return QuestionState {
            name,
            status: "fault",
            needs: None,
            way: None,
        };
    }
    match document.lacks(question) {
        None => QuestionState {
            name,
            status: "ready",
            needs: None,
            way: None,
        },
        Some(lack) => QuestionState {
            name,
            status: "lacks",
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
                    Some(core) => {
                        rich.say(format!("; the inner electrons were completed as {core}"))
                    }
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
    if let Some((upper, lower)) = &document.line {
        add("/line/upper", document.level_rich(upper));
        add("/line/lower", document.level_rich(lower));
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

fn text(value: &str) -> Json {
    Json::Text(value.to_owned())
}

/// What a question lacks in this document.
pub fn lack(document: &Document, question: Question) -> Option<Lack> {
    let first = document.entries.first();
    let Some(first) = first else {
        return Some(Lack {
            code: "needs-an-atom",
            needs: "an atom or a configuration".to_owned(),
            way: Some(Way {
                label: "Put in Fe".to_owned(),
                path: "/species".to_owned(),
                value: text("Fe"),
            }),
        });
    };
    match question {
        Question::States => None,
        Question::Lines => {
            let pairs = lines::pairs(document);
            if pairs == 0 {
                return Some(second_configuration(
                    document,
                    first,
                    "a second configuration",
                ));
            }
            (pairs > lines::MAX_PAIRS).then(|| Lack {
                code: "needs-fewer-pairs",
                needs: format!(
                    "fewer configurations or fewer open shells: these have {pairs} pairs of levels, and at most {} are listed",
                    lines::MAX_PAIRS
                ),
                way: None,
            })
        }
        Question::Splitting => {
            if document.line.is_none() {
                return Some(match lines::first_allowed(document) {
                    Some((upper, lower)) => line_lack(document, &upper, &lower),
                    None => second_configuration(
                        document,
                        first,
                        "a line, and so a second configuration",
                    ),
                });
            }
            document.field.is_none().then(|| Lack {
                code: "needs-a-field",
                needs: "a field".to_owned(),
                way: Some(Way {
                    label: "Put in 0.5 T".to_owned(),
                    path: "/field".to_owned(),
                    value: Json::Object(vec![
                        ("flux_density".to_owned(), text("0.5 T")),
                        ("view".to_owned(), text("across")),
                    ]),
                }),
            })
        }
    }
}

fn line_lack(document: &Document, upper: &LevelOf, lower: &LevelOf) -> Lack {
    let (upper, lower) = (document.level_label(upper), document.level_label(lower));
    Lack {
        code: "needs-a-line",
        needs: "a line: an upper and a lower level".to_owned(),
        way: Some(Way {
            label: format!("Put in {lower} to {upper}"),
            path: "/line".to_owned(),
            value: Json::Object(vec![
                ("upper".to_owned(), text(&upper)),
                ("lower".to_owned(), text(&lower)),
            ]),
        }),
    }
}

fn second_configuration(document: &Document, first: &Entry, needs: &str) -> Lack {
    let proposal = first
        .configuration()
        .and_then(excited)
        .unwrap_or_else(|| "2p".to_owned());
    // A ground configuration that an empty field stands for has to be written out beside the second.
    let typed = !first.path.is_empty();
    let value = if typed {
        text(&proposal)
    } else {
        Json::List(vec![text(&first.label), text(&proposal)])
    };
    let path = if typed {
        format!("/configurations/{}", document.entries.len())
    } else {
        "/configurations".to_owned()
    };
    let way = Some(Way {
        label: format!("Put in {proposal}"),
        path,
        value,
    });
    Lack {
        code: "needs-a-configuration",
        needs: needs.to_owned(),
        way,
    }
}

/// The configuration with its outermost electron raised to the next ℓ that an electric dipole reaches.
fn excited(configuration: &crate::configuration::Configuration) -> Option<String> {
    let outermost = configuration
        .subshells()
        .iter()
        .max_by_key(|s| (s.orbital().n(), s.orbital().l()))
        .copied()?;
    let (n, l) = (outermost.orbital().n(), outermost.orbital().l());
    let taken: Vec<Orbital> = configuration
        .subshells()
        .iter()
        .map(|s| s.orbital())
        .collect();
    let target = [
        (n, l.checked_add(1)?),
        (n.checked_add(1)?, l.saturating_sub(1)),
        (n.checked_add(1)?, l.checked_add(1)?),
    ]
    .into_iter()
    .filter(|(_, other)| other.abs_diff(l) == 1)
    .filter_map(|(n, l)| Orbital::new(n, l))
    .find(|orbital| !taken.contains(orbital))?;
    let mut subshells: Vec<Subshell> = configuration
        .subshells()
        .iter()
        .copied()
        .filter(|s| s.orbital() != outermost.orbital())
        .collect();
    subshells.extend(Subshell::new(
        outermost.orbital(),
        outermost.electrons().checked_sub(1)?,
    ));
    subshells.push(Subshell::new(target, 1)?);
    let raised = crate::configuration::Configuration::new(subshells)?;
    Some(Named::untyped(raised).label())
}
