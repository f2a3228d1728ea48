//! A sheet as it was read: typed values, every fault, and what each question still lacks.

use crate::configuration::{self, Species, filling};
use crate::numerics::order::sort_by_key;
use crate::numerics::sorted_map::SortedMap;
use crate::problem::Problem;
use crate::terms::{self, Level, label, ls};

use super::Question;
use super::conditions::Conditions;
use super::entry::{Content, Entry, Named, content_of, keep_fitting_ways};
use super::field::Field;
use super::given::Given;
use super::json::Json;
use super::level_alone::LevelAlone;
use super::line_ends::End;
use super::nucleus::Nuclear;
use super::rich::{Piece, Rich};
use super::structure::{Energies, Structure};
use super::{schema, schema_check};

/// A level of one of the sheet's configurations.
#[derive(Clone, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub struct LevelOf {
    /// Index into [`Document::entries`].
    pub entry: usize,
    /// Term, index and J.
    pub level: Level,
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
    /// Upper and lower end of the line.
    pub line: Option<(End, End)>,
    /// Vacuum wavelength of the line in nanometres.
    pub wavelength_nm: Option<f64>,
    /// How radial functions and energies are computed.
    pub structure: Structure,
    /// Radial parameters that the sheet gives.
    pub given: Vec<Given>,
    /// The source of light and the medium of its wavelengths.
    pub conditions: Conditions,
    /// Level energies from measurements, in cm⁻¹, sorted by level.
    pub measured: Vec<(LevelOf, f64)>,
    /// The nucleus, or every isotope of the mixture.
    pub nuclei: Vec<Nuclear>,
    /// Whether these are isotopes that the sheet lists.
    pub isotopes_listed: bool,
    /// Whether constants A and B that are not entered are estimated.
    pub estimate: bool,
    /// A level that needs no configuration.
    pub level_alone: Option<LevelAlone>,
    /// Keys that no question of this version uses.
    pub(super) unused_keys: Vec<String>,
}

impl Document {
    /// Reads a sheet; every fault is in `faults`, and what could be read is there all the same.
    pub fn read(json: &Json) -> Document {
        let mut document = Document::default();
        schema_check::check(json, &schema::SHEET, "", &mut document.faults);
        if !matches!(json, Json::Object(_)) {
            return document;
        }
        document.read_atom(json);
        document.read_field(json);
        document.read_line(json);
        document.read_nuclei(json);
        document.read_level_alone(json);
        document.read_measured(json);
        document.structure = Structure::read(json, &mut document.faults);
        document.refuse_energies(json);
        document.read_given(json);
        document.conditions = Conditions::read(json, &mut document.faults);
        super::parameters::check(json, &mut document.faults);
        document.unused_keys = super::unused::keys(json);
        sort_by_place(&mut document.faults, json);
        document
    }

    pub(super) fn has_fault_at(&self, path: &str) -> bool {
        self.faults
            .iter()
            .any(|fault| fault.path == path || fault.path.starts_with(&format!("{path}/")))
    }

    pub(super) fn add(&mut self, problems: Vec<Problem>, text: &str, path: &str) {
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
            let complete = if species_failed {
                Species::ANY
            } else {
                species
            };
            match content_of(text, &complete) {
                Err(mut problems) => {
                    if let [problem] = problems.as_mut_slice() {
                        let others = typed.iter().enumerate().filter(|(at, _)| *at != index);
                        let others: Vec<&str> = others.map(|(_, other)| *other).collect();
                        keep_fitting_ways(problem, &complete, &others);
                    }
                    self.add(problems, text, &path);
                }
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

    /// Whether it is about an atom or ion, and not about any (`*`).
    pub fn is_of_an_element(&self) -> bool {
        self.species
            .is_some_and(|species| species.element.is_some())
    }

    /// Whether the energies of levels come from radial functions or only from what is given.
    pub fn energies(&self) -> Energies {
        match self.structure.energies {
            Some(said) => said,
            None if self.is_of_an_element() => Energies::Computed,
            None => Energies::Given,
        }
    }

    /// Any atom has no nucleus from which energies could be computed.
    fn refuse_energies(&mut self, json: &Json) {
        let any = self
            .species
            .is_some_and(|species| species.element.is_none());
        if !any || self.structure.energies != Some(Energies::Computed) {
            return;
        }
        let typed = json.get("structure").and_then(|s| s.get("energies"));
        let text = typed.and_then(Json::as_text).unwrap_or_default();
        let problem = Problem::new(
            "energies-need-a-nucleus",
            "Energies of any atom cannot be computed: it has no nucleus.",
            0,
            text.len(),
        )
        .bound("With * energies come from the given parameters, and what is not given is zero.")
        .way("Use given", "given");
        self.add(vec![problem], text, "/structure/energies");
    }

    /// Whether the species is a negative ion, which may not be bound at all.
    pub fn is_anion(&self) -> bool {
        self.species.is_some_and(|species| species.charge < 0)
    }

    /// Cautions on the source of the light: mercury, ultraviolet below 400 nm.
    pub fn source_cautions(&self, shortest_nm: Option<f64>) -> Vec<&'static str> {
        let mut cautions = Vec::new();
        if self.species.is_some_and(|s| s.element == Some(80)) {
            cautions.push(
                "Mercury is poisonous; a broken lamp releases its vapour. Local codes and licensed practice come first.",
            );
        }
        if shortest_nm.is_some_and(|nm| nm < 400.0) {
            cautions.push(
                "Ultraviolet light harms eyes and skin, and below about 240 nm makes ozone in air. Local codes and licensed practice come first.",
            );
        }
        cautions
    }

    /// What the question lacks, or nothing when it can be answered.
    pub fn lacks(&self, question: Question) -> Option<super::lack::Lack> {
        super::lack::lack(self, question)
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

/// Sorts faults by where their path stands in the sheet, then by place in the text.
fn sort_by_place(faults: &mut Vec<Problem>, json: &Json) {
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
    let places: SortedMap<String, usize> = order
        .into_iter()
        .enumerate()
        .map(|(place, path)| (path, place))
        .collect();
    sort_by_key(faults, |fault| {
        (
            places.get(&fault.path).copied().unwrap_or(usize::MAX),
            fault.start,
        )
    });
}
