//! The rows of terms and levels in LS coupling, and the chains and parents that lead to a term.

use serde::Serialize;

use crate::angular::equivalent::{EquivalentTerm, classify};
use crate::angular::parentage::{self, Parentage};
use crate::configuration::Subshell;
use crate::problem::Problem;
use crate::quantity::TwiceJ;
use crate::terms::{self, Level, Term, chains, lande, ls};

use super::rich::{Count, Piece, Rich, TermName};

/// The most coupling chains that are listed.
const MAX_CHAINS: usize = 1000;

/// All equal terms of a configuration.
#[derive(Debug, Serialize)]
pub(super) struct TermRow {
    term: String,
    rich: Rich,
    multiplicity: u32,
    #[serde(rename = "L")]
    l: u32,
    odd: bool,
    times: Count,
    #[serde(rename = "J")]
    j: Vec<TwiceJ>,
    kinds: Vec<KindOfTerm>,
    chains: Vec<Rich>,
}

/// One of several equal terms of a single open shell.
#[derive(Debug, Serialize)]
struct KindOfTerm {
    index: Option<u32>,
    seniority: u32,
    #[serde(rename = "W")]
    w: Option<Vec<i32>>,
    #[serde(rename = "U")]
    u: Option<[i32; 2]>,
    rotation_casimir: Option<f64>,
    #[serde(rename = "G2_casimir")]
    g2_casimir: Option<f64>,
    distinguished: bool,
    parents: Vec<ParentRow>,
}

/// A term of the shell with one electron less, and the squared coefficient of fractional parentage.
#[derive(Debug, Serialize)]
struct ParentRow {
    term: String,
    multiplicity: u32,
    odd: bool,
    index: Option<u32>,
    weight: f64,
}

/// A level with its Landé factor.
#[derive(Debug, Serialize)]
pub(super) struct LevelRow {
    label: String,
    rich: Rich,
    term: String,
    #[serde(rename = "J")]
    j: TwiceJ,
    index: Option<Count>,
    parity: &'static str,
    g: Option<f64>,
    mu_eff: Option<f64>,
}

/// The row of a level of the configuration with this label.
pub(super) fn level_row(
    configuration: &str,
    level: &Level,
    odd: bool,
    parity: &'static str,
) -> LevelRow {
    let g = lande::ls(level.term, level.j);
    LevelRow {
        label: terms::label::format(configuration, level),
        rich: Rich::new().with(Piece::Term(TermName::of_level(level, odd))),
        term: level.term.to_string(),
        j: level.j,
        index: level.index.map(Count),
        parity,
        g,
        mu_eff: Some(g.map_or(0.0, |g| lande::effective_moment(g, level.j))),
    }
}

/// The rows of the terms of these open shells.
pub(super) fn term_rows(
    open: &[Subshell],
    odd: bool,
    all: &ls::LsTerms,
) -> Result<Vec<TermRow>, Problem> {
    let single = match open {
        [shell] => Some(*shell),
        _ => None,
    };
    let classified = match single {
        // Shells too large to be resolved keep their terms without labels.
        Some(shell) => classify(shell.orbital().l(), shell.electrons()).unwrap_or_default(),
        None => Vec::new(),
    };
    let parents = match single {
        Some(shell) if shell.electrons() > 1 => {
            parentage::parents(shell.orbital().l(), shell.electrons()).ok()
        }
        _ => None,
    };
    let chains = if open.len() > 1 {
        // Configurations whose couplings are too many to list keep their counts.
        chains::chains(open, MAX_CHAINS)
            .map(|c| c.listed)
            .unwrap_or_default()
    } else {
        Vec::new()
    };
    let parent_odd = single.is_some_and(|s| odd != (s.orbital().l() % 2 == 1));
    Ok(all
        .terms
        .iter()
        .map(|t| TermRow {
            term: t.term.to_string(),
            rich: Rich::new().with(Piece::Term(TermName::new(t.term, odd))),
            multiplicity: t.term.multiplicity(),
            l: t.term.l,
            odd,
            times: Count(t.times),
            j: t.term.levels().collect(),
            kinds: classified
                .iter()
                .enumerate()
                .filter(|(_, kind)| is_term(kind, t.term))
                .map(|(place, kind)| {
                    let parents = parents
                        .as_ref()
                        .map(|table| parent_rows(table, place, parent_odd));
                    kind_of_term(kind, parents.unwrap_or_default())
                })
                .collect(),
            chains: chains
                .iter()
                .filter(|c| c.term == t.term)
                .map(|c| chain_rich(c, odd))
                .collect(),
        })
        .collect())
}

fn is_term(kind: &EquivalentTerm, term: Term) -> bool {
    u32::try_from(kind.two_s) == Ok(term.two_s) && kind.l_total == term.l
}

fn kind_of_term(kind: &EquivalentTerm, parents: Vec<ParentRow>) -> KindOfTerm {
    KindOfTerm {
        index: (kind.times > 1).then_some(kind.index),
        seniority: kind.seniority,
        w: kind.w.map(|w| w.components().collect()),
        u: kind.u,
        rotation_casimir: kind.rotation_casimir,
        g2_casimir: kind.g2_casimir,
        distinguished: kind.distinguished,
        parents,
    }
}

fn parent_rows(table: &Parentage, child: usize, odd: bool) -> Vec<ParentRow> {
    table
        .weights(child)
        .map(|(parent, weight)| {
            let term = Term {
                two_s: u32::try_from(parent.two_s).unwrap_or(0),
                l: parent.l_total,
            };
            ParentRow {
                term: term.to_string(),
                multiplicity: term.multiplicity(),
                odd,
                index: (parent.times > 1).then_some(parent.index),
                weight,
            }
        })
        .collect()
}

/// A coupling chain, typeset: 3d² (³F) 4s (⁴F) 4p → ⁵G.
pub fn chain_rich(chain: &chains::Chain, odd: bool) -> Rich {
    let mut rich = Rich::new();
    let count = chain.links.len();
    let mut odd_so_far = false;
    for (place, link) in chain.links.iter().enumerate() {
        if place > 0 {
            rich = rich.say(" ");
        }
        let own_odd = link.shell.orbital().l() % 2 == 1 && link.shell.electrons() % 2 == 1;
        odd_so_far ^= own_odd;
        rich = rich.with(Piece::Configuration {
            core: None,
            subshells: vec![link.shell.into()],
        });
        if link.shell.electrons() > 1 && count > 1 {
            let own = TermName::new(link.own, own_odd).number(link.own_index);
            rich = rich.say("(").with(Piece::Term(own)).say(")");
        }
        if place > 0 && place + 1 < count {
            rich = rich
                .say(" (")
                .with(Piece::Term(TermName::new(link.coupled, odd_so_far)))
                .say(")");
        }
    }
    rich.say(" ")
        .with(Piece::Term(TermName::new(chain.term, odd)))
}
