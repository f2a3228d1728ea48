//! The level that a label names in a sheet: `3p 2P1/2`.

use crate::configuration::{self, Species};
use crate::problem::Problem;
use crate::terms::{Level, label, ls};

use super::document::{Document, LevelOf};
use super::entry::Entry;

impl Document {
    /// The level that a label names: `3p 2P1/2`. Nothing while some configuration is faulted.
    pub(super) fn level(&self, text: &str) -> Result<Option<LevelOf>, Vec<Problem>> {
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
}
