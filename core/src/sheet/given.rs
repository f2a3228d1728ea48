//! Radial parameters that the sheet gives: which integral of which configuration, and its value.

use crate::configuration::{self, Orbital, Species};
use crate::problem::Problem;
use crate::quantity::signs::clipped;
use crate::quantity::{self};

use super::document::Document;
use super::entry::Entry;
use super::json::Json;
use super::parameter_name::{self, Parameter, ParameterName};
use super::schema::pointer;

/// One given parameter.
#[derive(Clone, Debug, PartialEq)]
pub struct Given {
    /// What it is.
    pub name: ParameterName,
    /// As the sheet spells it.
    pub spelling: String,
    /// The configuration it is of, for E(…) and behind @, as an index into the entries.
    pub entry: Option<usize>,
    /// In cm⁻¹, a₀ or a₀².
    pub value: f64,
}

impl Document {
    /// Reads `structure.given` once the configurations are known.
    pub(super) fn read_given(&mut self, json: &Json) {
        let Some(Json::Object(given)) = json.get("structure").and_then(|s| s.get("given")) else {
            return;
        };
        for (spelling, value) in given {
            let path = pointer("/structure/given", spelling);
            match self.given_value(spelling, value) {
                Ok(Some(given)) => self.given.push(given),
                Ok(None) => {}
                // The fault stands in the name, and a way out replaces the value.
                Err(Faulty::Name(problem)) => {
                    let mut problem = problem.in_utf16(spelling).at(path);
                    problem.ways.clear();
                    self.faults.push(problem.way("Leave this value out", ""));
                }
                Err(Faulty::Value(problem)) => {
                    let text = value.as_text().unwrap_or_default();
                    self.faults.push(problem.in_utf16(text).at(path));
                }
            }
        }
    }

    fn given_value(&self, spelling: &str, value: &Json) -> Result<Option<Given>, Faulty> {
        let name = parameter_name::parse(spelling).map_err(Faulty::Name)?;
        // Another kind of value is a fault of the shapes already.
        let Some(text) = value.as_text() else {
            return Ok(None);
        };
        let typed = quantity::quantity(text, name.parameter.dimension()).map_err(Faulty::Value)?;
        if typed.value < 0.0 && name.parameter.is_positive() {
            let shown = clipped(spelling);
            let positive = text.trim().trim_start_matches(quantity::signs::is_minus);
            return Err(Faulty::Value(
                Problem::new(
                    "slater-integral-negative",
                    format!("{shown} is {}.", clipped(text.trim())),
                    0,
                    text.len(),
                )
                .bound("F and G are integrals of a charge cloud with itself or another one and never below zero.")
                .way(format!("Use {positive}"), positive),
            ));
        }
        let same_orbital = |pair: &[Orbital]| matches!(pair, [one, other] if one == other);
        if typed.value < 0.0
            && name.parameter == Parameter::Quadrupole
            && same_orbital(&name.orbitals)
        {
            let positive = text.trim().trim_start_matches(quantity::signs::is_minus);
            return Err(Faulty::Value(
                Problem::new(
                    "mean-square-negative",
                    format!("{} is {}.", clipped(spelling), clipped(text.trim())),
                    0,
                    text.len(),
                )
                .bound("The mean of r² of one orbital is never below zero; between two orbitals r2 has either sign.")
                .way(format!("Use {positive}"), positive),
            ));
        }
        let entry = self.checked_shells(spelling, &name).map_err(Faulty::Name)?;
        let same = |other: &&Given| {
            other.entry == entry
                && other.name.parameter == name.parameter
                && other.name.orbitals == name.orbitals
        };
        if let Some(twin) = self.given.iter().find(same) {
            return Err(Faulty::Name(
                Problem::new(
                    "parameter-repeated",
                    format!(
                        "{} is given already, as {}.",
                        clipped(spelling),
                        clipped(&twin.spelling)
                    ),
                    0,
                    spelling.len(),
                )
                .bound("Each parameter has one value."),
            ));
        }
        Ok(Some(Given {
            name,
            spelling: spelling.to_owned(),
            entry,
            value: typed.value,
        }))
    }

    /// The configuration that a name belongs to, after a look whether the sheet has its shells.
    fn checked_shells(
        &self,
        spelling: &str,
        name: &ParameterName,
    ) -> Result<Option<usize>, Problem> {
        if self.has_fault_at("/configurations")
            || self.has_fault_at("/species")
            || self.entries.is_empty()
        {
            return Ok(None);
        }
        let fault = |code, why: String, bound: String| {
            Problem::new(
                code,
                format!("{}: {why}.", clipped(spelling)),
                0,
                spelling.len(),
            )
            .bound(bound)
        };
        let mut entry = None;
        for text in [&name.average, &name.only].into_iter().flatten() {
            let found = self.entry_named(text).ok_or_else(|| {
                let labels: Vec<&str> = self.entries.iter().map(|e| e.label.as_str()).collect();
                fault(
                    "parameter-of-no-configuration",
                    format!("this sheet has no configuration {}", clipped(text)),
                    format!("Its configurations: {}.", labels.join(", ")),
                )
            })?;
            if entry.is_some_and(|first| first != found) {
                return Err(fault(
                    "parameter-of-no-configuration",
                    "it names two configurations".to_owned(),
                    "E(…) stands for its configuration without @.".to_owned(),
                ));
            }
            entry = Some(found);
        }
        let candidates: Vec<&Entry> = match entry {
            Some(index) => self.entries.get(index).into_iter().collect(),
            None => self.entries.iter().collect(),
        };
        let shells = || {
            candidates
                .iter()
                .filter_map(|e| e.configuration())
                .flat_map(|c| c.subshells())
        };
        for orbital in &name.orbitals {
            if !shells().any(|shell| shell.orbital() == *orbital) {
                let mut open: Vec<String> = shells()
                    .filter(|shell| shell.is_open())
                    .map(|shell| shell.orbital().to_string())
                    .collect();
                crate::numerics::order::sort(&mut open);
                open.dedup();
                let bound = match open.as_slice() {
                    [] => "No shell of it is open.".to_owned(),
                    _ => format!("Its open shells: {}.", open.join(", ")),
                };
                return Err(fault(
                    "parameter-without-shell",
                    format!("no configuration has the shell {orbital}"),
                    bound,
                ));
            }
        }
        let within = !matches!(
            name.parameter,
            Parameter::Average | Parameter::Mixing(_) | Parameter::Dipole | Parameter::Quadrupole
        );
        let is_open = |e: &&Entry| {
            let subshells = e.configuration().map(|c| c.subshells()).unwrap_or_default();
            name.orbitals.iter().all(|orbital| {
                subshells
                    .iter()
                    .any(|shell| shell.orbital() == *orbital && shell.is_open())
            })
        };
        if within && !candidates.iter().any(is_open) {
            let named: Vec<String> = name.orbitals.iter().map(ToString::to_string).collect();
            return Err(fault(
                "parameter-of-closed-shell",
                format!("{} is open in no configuration", named.join(" with ")),
                "Full shells have no parameters: what they do is inside the averages E(…)."
                    .to_owned(),
            ));
        }
        Ok(entry)
    }

    /// The entry whose configuration a text names.
    pub(super) fn entry_named(&self, text: &str) -> Option<usize> {
        let text = text.trim();
        let wanted = configuration::parse(text).ok().and_then(|written| {
            let species = self.species.unwrap_or(Species::ANY);
            configuration::complete(&written, &species).ok()
        });
        self.entries.iter().position(|e| {
            e.label == text
                || wanted
                    .as_ref()
                    .is_some_and(|w| e.configuration() == Some(&w.configuration))
        })
    }
}

/// Where a fault stands.
enum Faulty {
    Name(Problem),
    Value(Problem),
}
