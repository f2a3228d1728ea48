//! What a question lacks, and a usual value that would do.

use serde::Serialize;

use crate::configuration::{Configuration, Orbital, Subshell};
use crate::problem::Problem;
use crate::radiation::selection::pair_count;

use super::Question;
use super::document::{Document, LevelOf};
use super::entry::{Entry, Named};
use super::field::Field;
use super::json::Json;
use super::level_alone::LevelAlone;
use super::levels::MOST_LEVELS_WITH_LINES;
use super::nucleus::natural;
use super::pairs;

/// What a question lacks, and a usual value that would do.
#[derive(Clone, Debug)]
pub struct Lack {
    /// `needs-a-field`
    pub code: &'static str,
    /// "a field"
    pub needs: String,
    /// A usual value that would do.
    pub way: Option<Way>,
}

/// A usual value for what is lacking.
#[derive(Clone, Debug, Serialize)]
pub struct Way {
    /// What the button says.
    pub label: String,
    /// Where the value goes.
    pub path: String,
    /// The value.
    pub value: Json,
}

impl Lack {
    /// As a fault, for a question that was asked all the same.
    pub fn problem(&self) -> Problem {
        let problem = Problem::new(
            self.code,
            format!("This question needs {}.", self.needs),
            0,
            0,
        );
        let Some(way) = &self.way else { return problem };
        let replacement = match &way.value {
            Json::Text(text) => text.clone(),
            other => serde_json::to_string(other).unwrap_or_default(),
        };
        problem
            .at(way.path.clone())
            .way(way.label.clone(), replacement)
    }
}

fn text(value: &str) -> Json {
    Json::Text(value.to_owned())
}

/// What a question lacks in this document.
pub fn lack(document: &Document, question: Question) -> Option<Lack> {
    if let (Question::Splitting, Some(level)) = (question, &document.level_alone) {
        return alone(level, document.field.as_ref());
    }
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
        Question::Orbitals => super::orbitals_case::need(document).map(|needs| Lack {
            code: "needs-a-nucleus",
            needs,
            way: None,
        }),
        Question::Levels => super::energy_case::need(document).map(|(code, needs)| {
            if code == "needs-an-open-shell" {
                return Lack {
                    code,
                    ..second_configuration(document, first, &needs)
                };
            }
            let is_given = code == "needs-parameters" && document.is_of_an_element();
            Lack {
                code,
                needs,
                way: is_given.then(|| Way {
                    label: "Compute the energies".to_owned(),
                    path: "/structure/energies".to_owned(),
                    value: text("computed"),
                }),
            }
        }),
        Question::Lines => lines(document, first),
        Question::Splitting => splitting(document, first),
    }
}

fn field_lack() -> Lack {
    Lack {
        code: "needs-a-field",
        needs: "a field or a nucleus".to_owned(),
        way: Some(Way {
            label: "Put in 0.5 T".to_owned(),
            path: "/field".to_owned(),
            value: Json::Object(vec![
                ("flux_density".to_owned(), text("0.5 T")),
                ("view".to_owned(), text("across")),
            ]),
        }),
    }
}

/// A level alone needs its numbers; otherwise a field or a nucleus is needed, and where energies are not
/// known a line.
fn splitting(document: &Document, first: &Entry) -> Option<Lack> {
    let is_full = super::splitting::is_full(document);
    if !is_full && document.line.is_none() {
        return Some(match pairs::first_allowed(document) {
            Some((upper, lower)) => line_lack(document, &upper, &lower),
            None if document.entries.len() > 1 => Lack {
                code: "needs-a-line",
                needs: "a line: an upper and a lower level of these configurations".to_owned(),
                way: None,
            },
            None => second_configuration(document, first, "a line, and so a second configuration"),
        });
    }
    if let (Some(nucleus), false) = (document.nuclei.first(), document.isotopes_listed)
        && nucleus.spin.is_none()
    {
        return Some(spin_lack(document));
    }
    if !is_full && document.field.is_none() {
        return Some(field_lack());
    }
    (document.field.is_none() && document.nuclei.is_empty()).then(field_lack)
}

/// The spin of the nucleus, with a natural isotope's as a way.
fn spin_lack(document: &Document) -> Lack {
    let z = document.species.and_then(|species| species.element);
    let isotopes = z.map(natural).unwrap_or_default();
    let usual = isotopes
        .iter()
        .find_map(|i| i.spin.filter(|spin| spin.doubled() > 0));
    let named = document.species.and_then(|species| species.mass_number);
    Lack {
        code: "needs-a-spin",
        needs: match named {
            Some(_) => "the spin of the nucleus, which the table of isotopes does not have",
            None => "the spin of the nucleus, or the mass number of an isotope",
        }
        .to_owned(),
        way: usual.map(|spin| Way {
            label: format!("Put in {spin}"),
            path: "/nucleus/spin".to_owned(),
            value: text(&spin.to_string()),
        }),
    }
}

/// What a level alone still needs.
fn alone(level: &LevelAlone, field: Option<&Field>) -> Option<Lack> {
    let lack = |code, needs: &str, key: &str, usual: &str| {
        Some(Lack {
            code,
            needs: needs.to_owned(),
            way: Some(Way {
                label: format!("Put in {usual}"),
                path: format!("/level/{key}"),
                value: text(usual),
            }),
        })
    };
    let tesla = field.map_or(0.0, |field| field.tesla);
    if level.j.is_none() {
        return lack("needs-a-j", "the J of the level", "J", "1/2");
    }
    if level.g.is_none() && tesla > 0.0 && level.j.is_some_and(|j| j.doubled() > 0) {
        return lack("needs-a-g", "the g of the level", "g", "2.0023");
    }
    if level.spin.is_none() && (level.a != 0.0 || level.b != 0.0) {
        return lack("needs-a-spin", "the spin I of the nucleus", "I", "3/2");
    }
    None
}

/// Lines need two levels, and not too many: fewer where their energies are not known.
fn lines(document: &Document, first: &Entry) -> Option<Lack> {
    if document.entries.iter().any(|e| e.named().is_none())
        && super::energy_case::need(document).is_none()
    {
        return None;
    }
    let levels = pairs::level_count(document);
    if levels < 2 {
        return Some(second_configuration(
            document,
            first,
            "a second configuration",
        ));
    }
    let needs = if super::energy_case::need(document).is_none() {
        let most = MOST_LEVELS_WITH_LINES;
        (levels > most as u128).then(|| {
            format!("fewer configurations or fewer open shells: these have {levels} levels, and lines are listed between at most {most}; a window leaves their number as it is")
        })
    } else {
        let pairs = pair_count(levels, None);
        (pairs > pairs::MAX_PAIRS).then(|| {
            format!(
                "fewer configurations or fewer open shells: these have {pairs} pairs of levels, and at most {} are listed",
                pairs::MAX_PAIRS
            )
        })
    };
    needs.map(|needs| Lack {
        code: "needs-fewer-pairs",
        needs,
        way: None,
    })
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
fn excited(configuration: &Configuration) -> Option<String> {
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
    let raised = Configuration::new(subshells)?;
    Some(Named::untyped(raised).label())
}
