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
        if parsed.configuration.is_empty() {
            return Err(vec![self.without_configuration(text, &parsed.level)]);
        }
        let written = match configuration::parse(parsed.configuration) {
            Ok(written) => written,
            Err(problems) => {
                return Err(problems
                    .into_iter()
                    .map(|mut p| {
                        p.start += parsed.configuration_start;
                        p.end += parsed.configuration_start;
                        for way in &mut p.ways {
                            way.replacement = label::format(&way.replacement, &parsed.level);
                        }
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
            for name in self.names_of(&parsed.level) {
                problem = problem.way(format!("Use {name}"), name);
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
                let mut names = self.names_of(&parsed.level);
                names.extend(
                    self.levels(entry, 3)
                        .iter()
                        .map(|level| label::format(&name, level)),
                );
                names.truncate(4);
                names.into_iter().fold(
                    problem.bound(format!("Its terms: {}.", known.join(", "))),
                    |problem, name| problem.way(format!("Use {name}"), name),
                )
            }
            1 => problem
                .bound("A number stands only behind a repeated term.")
                .way(
                    "Leave the number out",
                    label::format(
                        &name,
                        &Level {
                            index: None,
                            ..parsed.level
                        },
                    ),
                ),
            _ => (1..=times.min(3)).fold(
                problem.bound(format!("Write #1 to #{times} behind it.")),
                |problem, index| {
                    let level = Level {
                        index: Some(index),
                        ..parsed.level
                    };
                    problem.way(format!("Use #{index}"), label::format(&name, &level))
                },
            ),
        };
        Err(vec![problem])
    }

    /// A level without its configuration, `2P3/2`: each configuration that has it is a way out.
    fn without_configuration(&self, text: &str, level: &Level) -> Problem {
        let problem = Problem::new(
            "level-without-configuration",
            format!("{level} is a level of which configuration?"),
            0,
            text.len(),
        )
        .bound(format!(
            "The sheet has the configurations {}.",
            self.labels().join(", ")
        ));
        self.names_of(level)
            .into_iter()
            .fold(problem, |problem, name| {
                problem.way(format!("Use {name}"), name)
            })
    }

    /// Up to four names of this level in the sheet, one for each configuration that has it.
    fn names_of(&self, level: &Level) -> Vec<String> {
        let named = self.entries.iter().filter_map(|entry| {
            let all = ls::terms(entry.configuration()?.subshells()).ok()?;
            let times = all.times(level.term);
            let index = match times {
                0 => return None,
                1 => None,
                _ => Some(level.index.filter(|&index| index <= times).unwrap_or(1)),
            };
            let level = Level { index, ..*level };
            all.has(&level).then(|| label::format(&entry.label, &level))
        });
        named.take(4).collect()
    }

    /// Up to two names for the other end of a line that starts or ends at this level: of the other
    /// parity and the same spin, with J at most one apart (not 0 and 0).
    pub(super) fn other_ends(&self, of: &LevelOf) -> Vec<String> {
        let (term, j) = (of.level.term, of.level.j.doubled());
        let mut names = Vec::new();
        for (index, entry) in self.entries.iter().enumerate() {
            if self.is_odd(index) == self.is_odd(of.entry) {
                continue;
            }
            let reached = self.levels(index, 400).into_iter().filter(|level| {
                let other = level.j.doubled();
                level.term.two_s == term.two_s
                    && level.term.l.abs_diff(term.l) <= 1
                    && other.abs_diff(j) <= 2
                    && (other, j) != (0, 0)
            });
            names.extend(
                reached
                    .map(|level| label::format(&entry.label, &level))
                    .take(2),
            );
        }
        names.truncate(2);
        names
    }

    fn labels(&self) -> Vec<String> {
        self.entries.iter().map(|e| e.label.clone()).collect()
    }
}
