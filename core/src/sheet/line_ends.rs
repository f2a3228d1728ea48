//! The ends of the sheet's line: a level `3p 2P1/2`, a term `3p 2P` or a configuration `3p`.

use crate::configuration::{self, Species};
use crate::problem::Problem;
use crate::quantity::{self, Dimension};
use crate::terms::{Level, Term, label};

use super::document::{Document, LevelOf};
use super::entry::{Entry, Named};
use super::json::Json;
use super::rich::{Piece, Rich, TermName};

/// One end of a line.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct End {
    /// Index into [`Document::entries`].
    pub entry: usize,
    /// What of this configuration.
    pub of: Of,
}

/// What of a configuration is an end of a line.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Of {
    /// One level.
    Level(Level),
    /// All levels of a term; its number where it occurs more than once.
    Term(Term, Option<u128>),
    /// All its levels.
    Configuration,
}

impl End {
    /// The end that is one level.
    pub fn level(of: LevelOf) -> End {
        End {
            entry: of.entry,
            of: Of::Level(of.level),
        }
    }

    /// The level, where it is one.
    pub fn as_level(&self) -> Option<LevelOf> {
        match self.of {
            Of::Level(level) => Some(LevelOf {
                entry: self.entry,
                level,
            }),
            _ => None,
        }
    }

    /// Whether it holds this level.
    pub fn holds(&self, of: &LevelOf) -> bool {
        self.entry == of.entry
            && match self.of {
                Of::Level(level) => level == of.level,
                Of::Term(term, index) => (term, index) == (of.level.term, of.level.index),
                Of::Configuration => true,
            }
    }

    /// Whether some level belongs to both.
    fn overlaps(&self, other: &End) -> bool {
        if self.entry != other.entry {
            return false;
        }
        match (self.of, other.of) {
            (Of::Configuration, _) | (_, Of::Configuration) => true,
            (Of::Level(a), Of::Level(b)) => a == b,
            (Of::Term(a, i), Of::Term(b, k)) => (a, i) == (b, k),
            (Of::Term(term, index), Of::Level(level))
            | (Of::Level(level), Of::Term(term, index)) => {
                (term, index) == (level.term, level.index)
            }
        }
    }

    /// "level", "term" or "configuration".
    pub fn kind(&self) -> &'static str {
        match self.of {
            Of::Level(_) => "level",
            Of::Term(..) => "term",
            Of::Configuration => "configuration",
        }
    }
}

impl Document {
    /// Reads `line` once the configurations are known.
    pub(super) fn read_line(&mut self, json: &Json) {
        let Some(line) = json.get("line") else { return };
        if let Some(text) = line.get("wavelength").and_then(Json::as_text)
            && let Ok(wavelength) = quantity::quantity(text, Dimension::Wavelength)
        {
            self.wavelength_nm = Some(wavelength.value);
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
            match self.end(text) {
                Ok(found) => *end = found,
                Err(problems) => {
                    let problems = problems
                        .into_iter()
                        .map(|p| p.way("Leave the line out", ""));
                    self.add(problems.collect(), text, &format!("/line/{key}"));
                }
            }
        }
        let [Some(upper), Some(lower)] = ends else {
            return;
        };
        if !upper.overlaps(&lower) {
            self.line = Some((upper, lower));
            return;
        }
        let text = line.get("upper").and_then(Json::as_text);
        let text = text.unwrap_or_default();
        let message = if upper == lower {
            "Upper and lower level are the same."
        } else {
            "Upper and lower end have a level in common."
        };
        let mut problem = Problem::new("line-without-change", message, 0, text.len())
            .bound("A line joins two different levels.");
        for name in lower
            .as_level()
            .map_or_else(Vec::new, |of| self.other_ends(&of))
        {
            problem = problem.way(format!("Use {name}"), name);
        }
        problem = problem.way("Leave the line out", "");
        self.add(vec![problem], text, "/line/upper");
    }

    /// The upper and the lower end of the line, turned if the sheet has them the other way round.
    pub fn ends(&self, turned: bool) -> Option<(&End, &End)> {
        let (upper, lower) = self.line.as_ref()?;
        Some(if turned {
            (lower, upper)
        } else {
            (upper, lower)
        })
    }

    /// What a text names. Nothing while some configuration is faulted.
    fn end(&self, text: &str) -> Result<Option<End>, Vec<Problem>> {
        let with_j = match label::parse(text) {
            Err(problem) if problem.code == "level-without-j" => {
                problem.ways.into_iter().next().map(|way| way.replacement)
            }
            Err(_) => {
                if let Some(entry) = self.configuration_named(text) {
                    return Ok(Some(End {
                        entry,
                        of: Of::Configuration,
                    }));
                }
                None
            }
            Ok(_) => None,
        };
        let Some(with_j) = with_j else {
            return Ok(self.level(text)?.map(End::level));
        };
        // A term is read as its first level, whose J is then left out.
        let found = self.level(&with_j).map_err(|mut problems| {
            for problem in &mut problems {
                problem.start = problem.start.min(text.len());
                problem.end = problem.end.min(text.len());
            }
            problems
        })?;
        Ok(found.map(|of| End {
            entry: of.entry,
            of: Of::Term(of.level.term, of.level.index),
        }))
    }

    /// The place of the configuration that a text writes.
    fn configuration_named(&self, text: &str) -> Option<usize> {
        let text = text.trim();
        let by_label = self.entries.iter().position(|entry| entry.label == text);
        by_label.or_else(|| {
            let written = configuration::parse(text).ok()?;
            let species = self.species.unwrap_or(Species::ANY);
            let wanted = configuration::complete(&written, &species)
                .ok()?
                .configuration;
            let mut entries = self.entries.iter();
            entries.position(|entry| entry.configuration() == Some(&wanted))
        })
    }

    /// An end's name in this sheet.
    pub fn end_label(&self, end: &End) -> String {
        let entry = self.entries.get(end.entry);
        let configuration = entry.map(|e| e.label.as_str()).unwrap_or_default();
        match end.of {
            Of::Level(level) => label::format(configuration, &level),
            Of::Term(term, None) => format!("{configuration} {term}"),
            Of::Term(term, Some(index)) => format!("{configuration} {term} #{index}"),
            Of::Configuration => configuration.to_owned(),
        }
    }

    /// An end as it is typeset.
    pub fn end_rich(&self, end: &End) -> Rich {
        let named = self.entries.get(end.entry).and_then(Entry::named);
        let configuration = named.map(Named::short_rich);
        match end.of {
            Of::Level(level) => self.level_rich(&LevelOf {
                entry: end.entry,
                level,
            }),
            Of::Term(term, index) => {
                let name = TermName::new(term, self.is_odd(end.entry)).number(index);
                configuration
                    .unwrap_or_default()
                    .say(" ")
                    .with(Piece::Term(name))
            }
            Of::Configuration => configuration.unwrap_or_else(|| Rich::words(self.end_label(end))),
        }
    }
}
