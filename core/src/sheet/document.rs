//! A sheet as it was read: typed values, every fault, and what each question still lacks.

use serde::Serialize;

use crate::configuration::{
    self, Configuration, Reading, Species, Subshell, Written, filling, join,
};
use crate::elements;
use crate::problem::Problem;
use crate::quantity::{self, Dimension};
use crate::terms::{self, Level, label, ls};

use super::Question;
use super::json::Json;
use super::rich::{Piece, Rich, SubshellName};
use super::schema;

/// A configuration as the sheet names it.
#[derive(Clone, Debug)]
pub struct Named {
    /// All subshells.
    pub configuration: Configuration,
    /// The noble gas or typed core that stands in brackets.
    pub core: Option<String>,
    /// The subshells beyond it, or all that were typed.
    pub beyond: Vec<Subshell>,
    /// The core that was added to the typed text.
    pub completed: Option<String>,
}

impl Named {
    /// A configuration that nobody typed: the largest noble-gas core in brackets.
    pub fn untyped(configuration: Configuration) -> Named {
        Named {
            core: configuration
                .noble_core()
                .and_then(elements::symbol)
                .map(str::to_owned),
            beyond: configuration.valence(),
            configuration,
            completed: None,
        }
    }

    /// A typed configuration made whole: the typed subshells name its levels.
    fn typed(written: &Written, reading: Reading) -> Named {
        if written.core.is_none() && reading.completed_core.is_none() {
            return Named::untyped(reading.configuration);
        }
        let mut beyond: Vec<Subshell> = written.subshells.iter().map(|s| s.subshell).collect();
        beyond.sort_unstable();
        if beyond.is_empty() {
            return Named::untyped(reading.configuration);
        }
        let noble = reading
            .completed_core
            .as_ref()
            .and_then(|core| core.noble_gas);
        Named {
            core: written
                .core
                .map(|core| core.symbol)
                .or(noble)
                .map(str::to_owned),
            beyond,
            completed: reading.completed_core.map(|core| core.to_string()),
            configuration: reading.configuration,
        }
    }

    /// How its levels are named: `3d6 4s2`.
    pub fn label(&self) -> String {
        join(&self.beyond)
    }

    /// With the core in brackets.
    pub fn rich(&self) -> Rich {
        piece(self.core.clone(), &self.beyond)
    }

    /// Only what names its levels.
    pub fn short_rich(&self) -> Rich {
        piece(None, &self.beyond)
    }
}

/// What stands in one configuration field.
#[derive(Clone, Debug)]
pub enum Content {
    /// Electrons in subshells.
    Configuration(Named),
    /// `n=5`: a shell without electrons.
    BareShell(u8),
}

/// One configuration of the sheet.
#[derive(Clone, Debug)]
pub struct Entry {
    /// Its place in the sheet; empty for the ground configuration that an empty list stands for.
    pub path: String,
    /// How its levels are named.
    pub label: String,
    /// Typed, observed or by the filling rule.
    pub source: &'static str,
    /// What was read.
    pub content: Content,
}

impl Entry {
    /// The configuration with its name, unless it is a bare shell.
    pub fn named(&self) -> Option<&Named> {
        match &self.content {
            Content::Configuration(named) => Some(named),
            Content::BareShell(_) => None,
        }
    }

    /// The configuration, unless it is a bare shell.
    pub fn configuration(&self) -> Option<&Configuration> {
        self.named().map(|named| &named.configuration)
    }
}

/// A level of one of the sheet's configurations.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct LevelOf {
    /// Index into [`Document::entries`].
    pub entry: usize,
    /// Term, index and J.
    pub level: Level,
}

/// The field of the sheet.
#[derive(Clone, Debug)]
pub struct Field {
    /// B in tesla.
    pub tesla: f64,
    /// As it was typed.
    pub text: String,
    /// Angle between field and line of sight.
    pub angle_degrees: f64,
}

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

/// A sheet as it was read.
#[derive(Clone, Debug, Default)]
pub struct Document {
    /// All faults, in the order of the input.
    pub faults: Vec<Problem>,
    /// The atom or ion; nothing where none was typed or it could not be read.
    pub species: Option<Species>,
    /// The configurations that could be read, in the order of the sheet.
    pub entries: Vec<Entry>,
    /// The field.
    pub field: Option<Field>,
    /// Upper and lower level of the line.
    pub line: Option<(LevelOf, LevelOf)>,
    /// Vacuum wavelength of the line in nanometres.
    pub wavelength_nm: Option<f64>,
    /// Level energies from measurements, in cm⁻¹.
    pub measured: Vec<(LevelOf, f64)>,
    /// Keys that no question of this version uses.
    unused_keys: Vec<String>,
}

/// Keys of the sheet that the questions of this version use.
const USED: [&str; 8] = [
    "rungline",
    "title",
    "note",
    "species",
    "configurations",
    "measured",
    "field",
    "line",
];

impl Document {
    /// Reads a sheet; every fault is in `faults`, and what could be read is there all the same.
    pub fn read(json: &Json) -> Document {
        let mut document = Document::default();
        schema::check(json, &schema::SHEET, "", &mut document.faults);
        if !matches!(json, Json::Object(_)) {
            return document;
        }
        document.read_atom(json);
        document.read_field(json);
        document.read_line(json);
        document.read_measured(json);
        if let Json::Object(entries) = json {
            let is_known = |key: &str| {
                !document
                    .faults
                    .iter()
                    .any(|f| f.code == "unknown-key" && f.path == schema::pointer("", key))
            };
            document.unused_keys = entries
                .iter()
                .map(|(key, _)| key.clone())
                .filter(|key| !USED.contains(&key.as_str()) && is_known(key))
                .collect();
        }
        sort_by_place(&mut document.faults, json);
        document
    }

    fn has_fault_at(&self, path: &str) -> bool {
        self.faults
            .iter()
            .any(|fault| fault.path == path || fault.path.starts_with(&format!("{path}/")))
    }

    fn add(&mut self, problems: Vec<Problem>, text: &str, path: &str) {
        self.faults
            .extend(problems.into_iter().map(|p| p.in_utf16(text).at(path)));
    }

    fn read_atom(&mut self, json: &Json) {
        let typed = json
            .get("species")
            .and_then(Json::as_text)
            .unwrap_or_default();
        if !typed.trim().is_empty() {
            match configuration::species::parse(typed) {
                Ok(species) => self.species = Some(species),
                Err(problems) => self.add(problems, typed, "/species"),
            }
        }
        let species_failed = self.has_fault_at("/species");
        let typed: Vec<&str> = match json.get("configurations") {
            Some(Json::List(items)) => items
                .iter()
                .map(|item| item.as_text().unwrap_or_default())
                .collect(),
            _ => Vec::new(),
        };
        if typed.iter().all(|text| text.trim().is_empty()) && !self.has_fault_at("/configurations")
        {
            self.entries.extend(self.ground_entry());
            return;
        }
        // Without a readable atom the electrons cannot be compared with a charge.
        let species = self.species.unwrap_or(Species::ANY);
        for (index, text) in typed.iter().enumerate() {
            let path = format!("/configurations/{index}");
            if text.trim().is_empty() || self.has_fault_at(&path) {
                continue;
            }
            match configuration::parse(text) {
                Err(problems) => self.add(problems, text, &path),
                Ok(written) => {
                    let complete = if species_failed {
                        Species::ANY
                    } else {
                        species
                    };
                    match content(&written, &complete) {
                        Err(problems) => self.add(problems, text, &path),
                        Ok(content) => {
                            let label = match &content {
                                Content::BareShell(n) => format!("n={n}"),
                                Content::Configuration(named) => named.label(),
                            };
                            self.entries.push(Entry {
                                path,
                                label,
                                source: "typed",
                                content,
                            });
                        }
                    }
                }
            }
        }
        self.refuse_repeats(&typed);
    }

    /// Two equal configurations would give levels with equal names.
    fn refuse_repeats(&mut self, typed: &[&str]) {
        let mut kept: Vec<Entry> = Vec::new();
        for entry in std::mem::take(&mut self.entries) {
            let twin = kept
                .iter()
                .find(|other| match (&entry.content, &other.content) {
                    (Content::BareShell(a), Content::BareShell(b)) => a == b,
                    (Content::Configuration(a), Content::Configuration(b)) => {
                        a.configuration == b.configuration
                    }
                    _ => false,
                });
            if twin.is_none() {
                kept.push(entry);
                continue;
            }
            let index = entry
                .path
                .rsplit('/')
                .next()
                .and_then(|i| i.parse::<usize>().ok())
                .unwrap_or(0);
            let text = typed.get(index).copied().unwrap_or_default();
            let problem = Problem::new(
                "configuration-repeated",
                format!("{} stands twice in this sheet.", entry.label),
                0,
                text.len(),
            )
            .bound("Each configuration stands once.")
            .way("Leave this one out", "");
            self.add(vec![problem], text, &entry.path);
        }
        self.entries = kept;
    }

    fn ground_entry(&self) -> Option<Entry> {
        let filled = self.filled()?;
        let named = Named::untyped(filled.configuration().clone());
        Some(Entry {
            path: String::new(),
            label: named.label(),
            source: match filled.used {
                filling::Used::Observed => "observed",
                filling::Used::Rule => "rule",
            },
            content: Content::Configuration(named),
        })
    }

    fn read_field(&mut self, json: &Json) {
        let Some(field) = json.get("field") else {
            return;
        };
        let Some(text) = field.get("flux_density").and_then(Json::as_text) else {
            return;
        };
        let Ok(density) = quantity::quantity(text, Dimension::FluxDensity) else {
            return;
        };
        let view = field
            .get("view")
            .and_then(Json::as_text)
            .unwrap_or("across");
        let angle_degrees = match view {
            "along" => Some(0.0),
            "across" => Some(90.0),
            other => quantity::quantity(other, Dimension::Angle)
                .ok()
                .map(|q| q.value),
        };
        if !(0.0..=MAX_TESLA).contains(&density.value) {
            let problem = Problem::new(
                "field-out-of-range",
                format!("The flux density is {text}."),
                0,
                text.len(),
            )
            .bound(format!(
                "From 0 to {MAX_TESLA} T; its direction is set by the view."
            ))
            .way("Use 0.5 T", "0.5 T");
            self.add(vec![problem], text, "/field/flux_density");
            return;
        }
        if let Some(angle_degrees) = angle_degrees {
            self.field = Some(Field {
                tesla: density.value,
                text: text.trim().to_owned(),
                angle_degrees,
            });
        }
    }

    fn read_line(&mut self, json: &Json) {
        let Some(line) = json.get("line") else { return };
        if let Some(text) = line.get("wavelength").and_then(Json::as_text)
            && let Ok(wavelength) = quantity::quantity(text, Dimension::Wavelength)
        {
            let nanometres = wavelength.value;
            if (1e-3..=1e9).contains(&nanometres) {
                self.wavelength_nm = Some(nanometres);
            } else {
                let problem = Problem::new(
                    "wavelength-out-of-range",
                    format!("The wavelength is {text}."),
                    0,
                    text.len(),
                )
                .bound("From 0.001 nm to 1 m.");
                self.add(vec![problem], text, "/line/wavelength");
            }
        }
        let mut ends = [None, None];
        for (end, key) in ends.iter_mut().zip(["upper", "lower"]) {
            let Some(text) = line
                .get(key)
                .and_then(Json::as_text)
                .filter(|t| !t.trim().is_empty())
            else {
                continue;
            };
            match self.level(text) {
                Ok(level) => *end = level,
                Err(problems) => self.add(problems, text, &format!("/line/{key}")),
            }
        }
        if let [Some(upper), Some(lower)] = ends {
            if upper == lower {
                let text = line
                    .get("upper")
                    .and_then(Json::as_text)
                    .unwrap_or_default();
                let problem = Problem::new(
                    "line-without-change",
                    "Upper and lower level are the same.",
                    0,
                    text.len(),
                )
                .bound("A line joins two different levels.");
                self.add(vec![problem], text, "/line/upper");
            } else {
                self.line = Some((upper, lower));
            }
        }
    }

    fn read_measured(&mut self, json: &Json) {
        let Some(Json::Object(pins)) = json.get("measured") else {
            return;
        };
        for (name, value) in pins {
            let path = schema::pointer("/measured", name);
            let energy = value
                .as_text()
                .and_then(|t| quantity::quantity(t, Dimension::Wavenumber).ok());
            match (self.level(name), energy) {
                (Ok(Some(level)), Some(energy)) => self.measured.push((level, energy.value)),
                (Ok(_), _) => {}
                // The fault stands in the key, whose characters are not those of the value.
                (Err(problems), _) => {
                    self.faults.extend(
                        problems
                            .into_iter()
                            .map(|p| p.in_utf16(name).at(path.clone())),
                    );
                }
            }
        }
    }

    /// The level that a label names: `3p 2P1/2`. Nothing while some configuration is faulted.
    fn level(&self, text: &str) -> Result<Option<LevelOf>, Vec<Problem>> {
        let parsed = label::parse(text).map_err(|p| vec![p])?;
        if self.has_fault_at("/configurations")
            || self.has_fault_at("/species")
            || self.entries.is_empty()
        {
            return Ok(None);
        }
        let written = match configuration::parse(parsed.configuration) {
            Ok(written) => written,
            Err(problems) => {
                return Err(problems
                    .into_iter()
                    .map(|mut p| {
                        p.start += parsed.configuration_start;
                        p.end += parsed.configuration_start;
                        p.ways.clear();
                        p
                    })
                    .collect());
            }
        };
        let species = self.species.unwrap_or(Species::ANY);
        let wanted = configuration::complete(&written, &species)
            .ok()
            .map(|r| r.configuration);
        let end = parsed.configuration_start + parsed.configuration.len();
        let Some(entry) = self.entries.iter().position(|e| {
            e.label == parsed.configuration
                || (wanted.is_some() && e.configuration() == wanted.as_ref())
        }) else {
            let mut problem = Problem::new(
                "level-of-no-configuration",
                format!("This sheet has no configuration {}.", parsed.configuration),
                parsed.configuration_start,
                end,
            )
            .bound(format!("Its configurations: {}.", self.labels().join(", ")));
            for other in self.labels().into_iter().take(3) {
                problem = problem.way(format!("Use {other}"), label::format(&other, &parsed.level));
            }
            return Err(vec![problem]);
        };
        let Some(configuration) = self.entries.get(entry).and_then(Entry::configuration) else {
            return Ok(None);
        };
        let all = ls::terms(configuration.subshells()).map_err(|p| vec![p])?;
        if all.has(&parsed.level) {
            return Ok(Some(LevelOf {
                entry,
                level: parsed.level,
            }));
        }
        let times = all.times(parsed.level.term);
        let name = self
            .entries
            .get(entry)
            .map(|e| e.label.clone())
            .unwrap_or_default();
        let message = match (times, parsed.level.index) {
            (0, _) => format!("{name} has no term {}.", parsed.level.term),
            (1, Some(_)) => format!("{name} has the term {} only once.", parsed.level.term),
            (_, None) => format!(
                "{name} has the term {} {times} times: which one?",
                parsed.level.term
            ),
            (_, Some(index)) => format!("{name} has no {} number {index}.", parsed.level.term),
        };
        let mut problem = Problem::new("level-unknown", message, parsed.level_start, text.len());
        problem = match times {
            0 => {
                let known: Vec<String> = all
                    .terms
                    .iter()
                    .take(12)
                    .map(|t| t.term.to_string())
                    .collect();
                problem.bound(format!("Its terms: {}.", known.join(", ")))
            }
            1 => problem.way(
                "Leave the number out",
                label::format(
                    &name,
                    &Level {
                        index: None,
                        ..parsed.level
                    },
                ),
            ),
            _ => problem
                .bound(format!("Write #1 to #{times} behind it."))
                .way(
                    "Use number 1",
                    label::format(
                        &name,
                        &Level {
                            index: Some(1),
                            ..parsed.level
                        },
                    ),
                ),
        };
        Err(vec![problem])
    }

    fn labels(&self) -> Vec<String> {
        self.entries.iter().map(|e| e.label.clone()).collect()
    }

    /// How the atom or ion fills its subshells, by rule and as tabulated.
    pub fn filled(&self) -> Option<filling::Ground> {
        let species = self.species.as_ref()?;
        filling::ground(species.element?, species.charge)
    }

    /// The atom or ion, typeset; nothing for any atom.
    pub fn species_rich(&self) -> Rich {
        match self.species.as_ref().filter(|s| s.element.is_some()) {
            Some(species) => Rich::new().with(Piece::Species {
                symbol: species.symbol().to_owned(),
                charge: species.charge,
                stage: species.stage().unwrap_or_default(),
                mass_number: species.mass_number,
            }),
            None => Rich::new(),
        }
    }

    /// A sentence on keys that this version keeps and checks but does not use.
    pub fn unused(&self) -> Option<String> {
        (!self.unused_keys.is_empty()).then(|| {
            format!(
                "This version does not use these keys of the sheet: {}.",
                self.unused_keys.join(", ")
            )
        })
    }

    /// What the question lacks, or nothing when it can be answered.
    pub fn lacks(&self, question: Question) -> Option<Lack> {
        super::reading::lack(self, question)
    }

    /// The levels of one entry, at most `limit`.
    pub fn levels(&self, entry: usize, limit: usize) -> Vec<Level> {
        self.entries
            .get(entry)
            .and_then(Entry::configuration)
            .and_then(|c| ls::terms(c.subshells()).ok())
            .map(|all| all.levels(limit))
            .unwrap_or_default()
    }

    /// Whether the parity of an entry's configuration is odd.
    pub fn is_odd(&self, entry: usize) -> bool {
        self.entries
            .get(entry)
            .and_then(Entry::configuration)
            .is_some_and(|c| terms::is_odd(c.subshells()))
    }

    /// A level of this sheet as it is typeset: configuration and term.
    pub fn level_rich(&self, of: &LevelOf) -> Rich {
        let configuration = self
            .entries
            .get(of.entry)
            .and_then(Entry::named)
            .map(Named::short_rich)
            .unwrap_or_default();
        let name = super::rich::TermName::of_level(&of.level, self.is_odd(of.entry));
        configuration.say(" ").with(Piece::Term(name))
    }

    /// A level's name in this sheet.
    pub fn level_label(&self, of: &LevelOf) -> String {
        let label = self
            .entries
            .get(of.entry)
            .map(|e| e.label.as_str())
            .unwrap_or_default();
        label::format(label, &of.level)
    }
}

/// The strongest static field in which a sheet is answered, in tesla.
pub const MAX_TESLA: f64 = 1000.0;

/// What a configuration field holds, complete.
fn content(written: &Written, species: &Species) -> Result<Content, Vec<Problem>> {
    if let Some(n) = written.bare_shell {
        return Ok(Content::BareShell(n));
    }
    configuration::complete(written, species)
        .map(|reading| Content::Configuration(Named::typed(written, reading)))
}

fn piece(core: Option<String>, subshells: &[Subshell]) -> Rich {
    let subshells: Vec<SubshellName> = subshells.iter().copied().map(SubshellName::from).collect();
    Rich::new().with(Piece::Configuration { core, subshells })
}

/// Sorts faults by where their path stands in the sheet, then by place in the text.
fn sort_by_place(faults: &mut [Problem], json: &Json) {
    fn walk(json: &Json, path: &str, order: &mut Vec<String>) {
        order.push(path.to_owned());
        match json {
            Json::Object(entries) => {
                for (key, value) in entries {
                    walk(value, &schema::pointer(path, key), order);
                }
            }
            Json::List(items) => {
                for (index, value) in items.iter().enumerate() {
                    walk(value, &format!("{path}/{index}"), order);
                }
            }
            _ => {}
        }
    }
    if faults.len() < 2 {
        return;
    }
    let mut order = Vec::new();
    walk(json, "", &mut order);
    let places: std::collections::BTreeMap<String, usize> = order
        .into_iter()
        .enumerate()
        .map(|(place, path)| (path, place))
        .collect();
    faults.sort_by_key(|fault| {
        (
            places.get(&fault.path).copied().unwrap_or(usize::MAX),
            fault.start,
        )
    });
}
