//! The rows of a configuration's other couplings: jj configurations and jK pairs.

use serde::Serialize;

use crate::configuration::Subshell;
use crate::quantity::TwiceJ;
use crate::terms::{jj, jk, lande};

use super::rich::{Count, Piece, Rich, TermName};
use super::states::ByJ;

/// A jj configuration with the levels it allows.
#[derive(Debug, Serialize)]
pub(super) struct JjRow {
    /// g of each j subshell, the same for every level of j^n.
    factors: Vec<JjFactor>,
    name: Rich,
    text: String,
    levels: ByJ,
    n_levels: Count,
}

#[derive(Debug, Serialize)]
struct JjFactor {
    label: String,
    j: TwiceJ,
    g: Option<f64>,
}

/// A pair of a parent level and an outer electron.
#[derive(Debug, Serialize)]
pub(super) struct PairRow {
    name: Rich,
    text: String,
    parent: Rich,
    #[serde(rename = "K")]
    k: TwiceJ,
    #[serde(rename = "J")]
    j: Vec<TwiceJ>,
    /// g of each J, on a parent in pure LS coupling.
    g: Vec<Option<f64>>,
}

/// The row of a jj configuration.
pub(super) fn jj_row(scheme: &jj::JjConfiguration) -> JjRow {
    let subshells = scheme
        .subshells
        .iter()
        .map(|s| (s.orbital.to_string(), s.j, s.electrons))
        .collect();
    let factors = scheme
        .subshells
        .iter()
        .map(|s| JjFactor {
            label: s.orbital.to_string(),
            j: s.j,
            g: lande::electron(s.orbital.l().into(), s.j),
        })
        .collect();
    JjRow {
        factors,
        name: Rich::new().with(Piece::Jj { subshells, j: None }),
        text: scheme.to_string(),
        levels: ByJ(scheme.levels.clone()),
        n_levels: Count(scheme.n_levels()),
    }
}

/// The row of a pair whose outer electron is in this subshell.
pub(super) fn pair_row(pair: &jk::Pair, outer: &Subshell) -> PairRow {
    let parent = Rich::new().with(Piece::Term(TermName::of_level(
        &pair.parent,
        pair.parent_is_odd,
    )));
    let name = Rich::new()
        .say("(")
        .with(Piece::Term(TermName::of_level(
            &pair.parent,
            pair.parent_is_odd,
        )))
        .say(") ")
        .with(Piece::Configuration {
            core: None,
            subshells: vec![(*outer).into()],
        })
        .say(" ")
        .with(Piece::Pair {
            parent: Rich::new(),
            multiplicity: 2,
            k: pair.k,
            odd: pair.is_odd,
            j: None,
        });
    let g_parent = lande::ls(pair.parent.term, pair.parent.j);
    let l = outer.orbital().l().into();
    let factor = |j: &TwiceJ| lande::pair(g_parent, pair.parent.j, l, pair.k, *j);
    PairRow {
        name,
        text: pair.to_string(),
        parent,
        k: pair.k,
        g: pair.j.iter().map(factor).collect(),
        j: pair.j.clone(),
    }
}
