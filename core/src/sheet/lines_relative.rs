//! Pure LS coupling: every pair of levels, allowed or refused, and relative strengths in each multiplet.

use std::rc::Rc;

use crate::problem::Problem;
use crate::quantity::TwiceJ;
use crate::radiation::selection::Between;
use crate::radiation::strengths::{self, Multiplet};
use crate::radiation::{Multipole, Rule};

use super::document::{Document, LevelOf};
use super::levels_rows::Shared;
use super::line_rows::{LineRow, MultipletRow, RefusedRow, SumRow};
use super::pairs::{Kinds, between, kinds, pairs_of_entries};
use super::rich::{Kind, Piece, Rich, TermName};

/// What pure LS coupling says of every pair of levels.
pub struct Judgement {
    /// The allowed ones, a row for each multipole.
    pub lines: Vec<LineRow>,
    /// Those that no multipole joins.
    pub refused: Vec<RefusedRow>,
    /// Each multiplet with its sums.
    pub multiplets: Vec<MultipletRow>,
}

/// Judges every pair.
///
/// # Errors
/// Those of [`kinds`] and of the comparison of two configurations.
pub fn judge(document: &Document) -> Result<Judgement, Problem> {
    let mut judged = Judged {
        document,
        lines: Vec::new(),
        refused: Vec::new(),
        multiplets: Vec::new(),
    };
    for (lower_entry, upper_entry) in pairs_of_entries(document) {
        let Some(between) = between(document, lower_entry, upper_entry) else {
            continue;
        };
        let between = between.map_err(|problem| problem.at("/configurations"))?;
        let lowers = kinds(document, lower_entry, usize::MAX)?;
        if lower_entry == upper_entry {
            judged.inside(&between, &lowers);
        } else {
            let uppers = kinds(document, upper_entry, usize::MAX)?;
            for lower in &lowers {
                for upper in &uppers {
                    judged.terms(&between, upper, lower);
                }
            }
        }
    }
    Ok(Judgement {
        lines: judged.lines,
        refused: judged.refused,
        multiplets: judged.multiplets,
    })
}

struct Judged<'a> {
    document: &'a Document,
    lines: Vec<LineRow>,
    refused: Vec<RefusedRow>,
    multiplets: Vec<MultipletRow>,
}

impl Judged<'_> {
    /// Pairs inside one configuration: each pair of terms once, and within each term.
    fn inside(&mut self, between: &Between, kinds: &[Kinds]) {
        for (place, lower) in kinds.iter().enumerate() {
            for upper in kinds.iter().skip(place) {
                self.terms(between, upper, lower);
            }
        }
    }

    /// All pairs of levels of two terms, or of one term with itself.
    fn terms(&mut self, between: &Between, upper: &Kinds, lower: &Kinds) {
        let same = std::ptr::eq(upper, lower);
        let rules =
            Multipole::ALL.map(|m| (m, between.term_rule(m, &upper.as_term(), &lower.as_term())));
        let multiplets = rules.map(|(multipole, rule)| match rule {
            Some(_) => None,
            None if same => Some(strengths::within(multipole, upper.term)),
            None => Some(strengths::between(multipole, upper.term, lower.term)),
        });
        for multiplet in multiplets.iter().flatten().filter(|m| !m.lines.is_empty()) {
            if between
                .level_rule(
                    multiplet.multipole,
                    TwiceJ::from_doubled(4),
                    TwiceJ::from_doubled(4),
                )
                .is_none()
            {
                self.multiplet(multiplet, upper, lower);
            }
        }
        for (upper_place, upper_j) in upper.levels.iter().enumerate() {
            for (lower_place, lower_j) in lower.levels.iter().enumerate() {
                if same && lower_place >= upper_place {
                    continue;
                }
                let mut refusals = Vec::new();
                let mut allowed = 0;
                for ((multipole, rule), multiplet) in rules.iter().zip(&multiplets) {
                    let refusal = between.level_rule(*multipole, *upper_j, *lower_j).or(*rule);
                    let share = multiplet
                        .as_ref()
                        .and_then(|m| share(m, *upper_j, *lower_j));
                    match (refusal, share) {
                        (Some(rule), _) => refusals.push((*multipole, rule)),
                        (None, Some(relative)) => {
                            allowed += 1;
                            self.line(
                                *multipole,
                                relative,
                                &upper.level(*upper_j),
                                &lower.level(*lower_j),
                            );
                        }
                        // A multipole without strength between these terms.
                        (None, None) => {}
                    }
                }
                if allowed == 0 {
                    self.refuse(&refusals, &upper.level(*upper_j), &lower.level(*lower_j));
                }
            }
        }
    }

    fn term_rich(&self, kinds: &Kinds) -> Rich {
        let Some(level) = kinds.levels.first() else {
            return Rich::new();
        };
        let mut rich = self.document.level_rich(&kinds.level(*level));
        if let Some(Piece::Term(name)) = rich.0.last_mut() {
            *name = TermName {
                j: None,
                ..name.clone()
            };
        }
        rich
    }

    fn multiplet_name(upper: &str, lower: &str) -> String {
        format!("{lower} - {upper}")
    }

    fn term_label(&self, of: &LevelOf) -> String {
        let configuration = self
            .document
            .entries
            .get(of.entry)
            .map(|e| e.label.as_str())
            .unwrap_or_default();
        let index = of.level.index.map(|k| format!(" #{k}")).unwrap_or_default();
        format!("{configuration} {}{index}", of.level.term)
    }

    fn multiplet(&mut self, multiplet: &Multiplet, upper: &Kinds, lower: &Kinds) {
        let first = |kinds: &Kinds| kinds.level(kinds.levels.first().copied().unwrap_or_default());
        let name = Self::multiplet_name(
            &self.term_label(&first(upper)),
            &self.term_label(&first(lower)),
        );
        self.multiplets.push(MultipletRow {
            name,
            upper_rich: self.term_rich(upper),
            lower_rich: self.term_rich(lower),
            multipole: multiplet.multipole,
            lines: multiplet.lines.len(),
            sum: multiplet.lines.iter().map(|l| l.relative).sum(),
            upper_sums: multiplet.upper_sums.iter().map(SumRow::from).collect(),
            lower_sums: multiplet.lower_sums.iter().map(SumRow::from).collect(),
        });
    }

    fn line(&mut self, multipole: Multipole, relative: f64, upper: &LevelOf, lower: &LevelOf) {
        let (up, low) = (self.document.pinned(upper), self.document.pinned(lower));
        let swap = matches!((up, low), (Some(up), Some(low)) if up < low);
        let wavenumber = up
            .zip(low)
            .map(|(up, low)| (up - low).abs())
            .filter(|w| *w > 0.0);
        let multiplet = Self::multiplet_name(&self.term_label(upper), &self.term_label(lower));
        let (upper, lower) = if swap { (lower, upper) } else { (upper, lower) };
        self.lines.push(LineRow {
            relative: Some(relative),
            multiplet: Some(Shared(Rc::from(multiplet))),
            wavenumber,
            vacuum_nm: wavenumber.map(|w| 1e7 / w),
            energy_kind: wavenumber.map(|_| Kind::Measured),
            ..LineRow::between(
                self.name(upper),
                self.name(lower),
                (upper.level.j, lower.level.j),
                multipole,
            )
        });
    }

    fn name(&self, of: &LevelOf) -> Shared {
        Shared(Rc::from(self.document.level_label(of)))
    }

    /// The rule that comes nearest to allowing the pair decides: approximate before rigorous ones.
    fn refuse(&mut self, refusals: &[(Multipole, Rule)], upper: &LevelOf, lower: &LevelOf) {
        let deciding = refusals
            .iter()
            .find(|(_, rule)| !rule.is_rigorous())
            .or(refusals.first());
        let Some((multipole, rule)) = deciding else {
            return;
        };
        self.refused.push(RefusedRow {
            upper: self.document.level_label(upper),
            lower: self.document.level_label(lower),
            upper_j: upper.level.j,
            lower_j: lower.level.j,
            multipole: *multipole,
            rule: rule.to_string(),
            code: rule.code(),
            rigorous: rule.is_rigorous(),
            others: refusals
                .iter()
                .filter(|(other, _)| other != multipole)
                .map(|(multipole, rule)| (multipole.to_string(), rule.code()))
                .collect(),
        });
    }
}

fn share(multiplet: &Multiplet, upper: TwiceJ, lower: TwiceJ) -> Option<f64> {
    multiplet
        .lines
        .iter()
        .find(|l| l.upper == upper && l.lower == lower)
        .map(|l| l.relative)
}
