//! Pairs of levels of a sheet, and whether a photon joins them.

use crate::configuration::Configuration;
use crate::problem::Problem;
use crate::quantity::TwiceJ;
use crate::radiation::selection::{Between, TermOf, pair_count};
use crate::radiation::{Multipole, Rule};
use crate::terms::chains::{self, Chain};
use crate::terms::{Level, Term, ls};

use super::document::{Document, LevelOf};
use super::entry::Entry;

/// The most pairs of levels that are judged in one answer.
pub const MAX_PAIRS: u128 = 120_000;

/// The highest running index whose coupling chain is looked up.
const MAX_CHAIN: usize = 10_000;

/// One kind of term of one entry, with its coupling chain.
pub struct Kinds {
    /// Index into the document's entries.
    pub entry: usize,
    /// The term.
    pub term: Term,
    /// Its running index, where it occurs more than once.
    pub index: Option<u128>,
    /// How its shells couple.
    pub chain: Option<Chain>,
    /// J of its levels, rising.
    pub levels: Vec<TwiceJ>,
}

impl Kinds {
    /// As the selection rules take it.
    pub fn as_term(&self) -> TermOf<'_> {
        TermOf {
            term: self.term,
            index: self.index,
            chain: self.chain.as_ref(),
        }
    }

    /// The level J of it.
    pub fn level(&self, j: TwiceJ) -> LevelOf {
        LevelOf {
            entry: self.entry,
            level: Level {
                term: self.term,
                index: self.index,
                j,
            },
        }
    }
}

/// Pairs of different levels of all configurations together.
pub fn pairs(document: &Document) -> u128 {
    pair_count(level_count(document), None)
}

/// Whether pure LS coupling is worked out for all pairs.
pub fn few(document: &Document) -> bool {
    pairs(document) <= MAX_PAIRS
}

/// Levels of all configurations together.
pub fn level_count(document: &Document) -> u128 {
    document
        .entries
        .iter()
        .filter_map(Entry::configuration)
        .filter_map(levels_of)
        .fold(0, u128::saturating_add)
}

fn levels_of(configuration: &Configuration) -> Option<u128> {
    ls::terms(configuration.subshells())
        .ok()
        .map(|terms| terms.n_levels())
}

/// About how many rows pure LS coupling gives, for the estimate.
pub fn rows(document: &Document) -> f64 {
    pairs(document).min(MAX_PAIRS) as f64
}

/// Every kind of term of one entry, at most `limit` of them.
pub fn kinds(document: &Document, entry: usize, limit: usize) -> Result<Vec<Kinds>, Problem> {
    let Some(configuration) = document.entries.get(entry).and_then(Entry::configuration) else {
        return Ok(Vec::new());
    };
    let subshells = configuration.subshells();
    let all = ls::terms(subshells)?;
    let mut chains = chains::chains(subshells, limit)?.listed.into_iter();
    let mut kinds = Vec::new();
    for term in &all.terms {
        for k in 1..=term.times {
            if kinds.len() >= limit {
                return Ok(kinds);
            }
            kinds.push(Kinds {
                entry,
                term: term.term,
                index: (term.times > 1).then_some(k),
                chain: chains.next(),
                levels: term.term.levels().collect(),
            });
        }
    }
    Ok(kinds)
}

/// Pairs of entries: inside each, and between each and those after it, the later one above.
pub fn pairs_of_entries(document: &Document) -> Vec<(usize, usize)> {
    let real: Vec<usize> = (0..document.entries.len())
        .filter(|i| {
            document
                .entries
                .get(*i)
                .and_then(Entry::configuration)
                .is_some()
        })
        .collect();
    let mut pairs = Vec::new();
    for (place, lower) in real.iter().enumerate() {
        pairs.extend(real.iter().skip(place).map(|upper| (*lower, *upper)));
    }
    pairs
}

/// The comparison of two entries.
pub fn between(
    document: &Document,
    lower: usize,
    upper: usize,
) -> Option<Result<Between, Problem>> {
    let configuration = |i: usize| document.entries.get(i).and_then(Entry::configuration);
    Some(Between::new(
        configuration(upper)?.subshells(),
        configuration(lower)?.subshells(),
    ))
}

/// The most terms of a configuration among which a line is looked for.
const MAX_TRIED: usize = 150;

/// The first allowed line, E1 before M1 before E2, between different configurations before inside
/// one; what the question on splitting proposes.
pub fn first_allowed(document: &Document) -> Option<(LevelOf, LevelOf)> {
    let mut entries = pairs_of_entries(document);
    entries.sort_by_key(|(lower, upper)| lower == upper);
    for multipole in Multipole::ALL {
        for &(lower_entry, upper_entry) in &entries {
            let Some(Ok(between)) = between(document, lower_entry, upper_entry) else {
                continue;
            };
            let lowers = kinds(document, lower_entry, MAX_TRIED).ok()?;
            let uppers = if upper_entry == lower_entry {
                None
            } else {
                kinds(document, upper_entry, MAX_TRIED).ok()
            };
            for upper in uppers.as_ref().unwrap_or(&lowers) {
                for lower in &lowers {
                    if between
                        .term_rule(multipole, &upper.as_term(), &lower.as_term())
                        .is_some()
                    {
                        continue;
                    }
                    for (upper_j, lower_j) in upper
                        .levels
                        .iter()
                        .flat_map(|u| lower.levels.iter().map(move |l| (*u, *l)))
                    {
                        let (upper, lower) = (upper.level(upper_j), lower.level(lower_j));
                        if upper != lower
                            && between.level_rule(multipole, upper_j, lower_j).is_none()
                        {
                            return Some((upper, lower));
                        }
                    }
                }
            }
        }
    }
    None
}

/// By which multipole a line between two levels is allowed, and the rules against the others.
pub fn judge(
    document: &Document,
    upper: &LevelOf,
    lower: &LevelOf,
) -> Result<Vec<(Multipole, Option<Rule>)>, Problem> {
    let find = |of: &LevelOf| -> Result<Option<Kinds>, Problem> {
        let Some(configuration) = document
            .entries
            .get(of.entry)
            .and_then(Entry::configuration)
        else {
            return Ok(None);
        };
        let Level { term, index, .. } = of.level;
        let chain = chains::chain(configuration.subshells(), term, index, MAX_CHAIN)?;
        Ok(Some(Kinds {
            entry: of.entry,
            term,
            index,
            chain,
            levels: term.levels().collect(),
        }))
    };
    let (Some(a), Some(b)) = (find(upper)?, find(lower)?) else {
        return Ok(Vec::new());
    };
    let Some(between) = between(document, lower.entry, upper.entry) else {
        return Ok(Vec::new());
    };
    let verdicts = between?.verdicts(&a.as_term(), upper.level.j, &b.as_term(), lower.level.j);
    Ok(verdicts
        .into_iter()
        .map(|v| (v.multipole, v.refused_by))
        .collect())
}
