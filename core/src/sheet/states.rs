//! Which states? Shells, terms, levels and the ground of each configuration.

use serde::{Serialize, Serializer, ser::SerializeMap};

use crate::angular::equivalent::{EquivalentTerm, classify};
use crate::angular::parentage::{self, Parentage};
use crate::configuration::Subshell;
use crate::problem::Problem;
use crate::quantity::TwiceJ;
use crate::terms::{self, Level, Term, chains, grid, jj, jk, lande, ls};

use super::answer::Around;
use super::document::Document;
use super::entry::{Content, Entry, Named};
use super::ground::{Filling, Ground};
use super::rich::{Count, Kind, Piece, Rich, SubshellName, TermName};
use super::shells::{BareShell, ShellRow};
use super::states_words::{limits, sentence, working};

/// The most levels that are listed; their whole number is always given.
pub const MAX_LEVELS: usize = 4000;
/// The most coupling chains that are listed.
const MAX_CHAINS: usize = 1000;
/// The most jj configurations and jK pairs that are listed.
const MAX_SCHEME_ROWS: usize = 2000;
/// The most cells of a grid.
const MAX_GRID: usize = 20_000;

/// The answer: the first configuration's own keys, then one entry for every configuration.
#[derive(Debug, Serialize)]
pub struct States {
    #[serde(flatten)]
    around: Around,
    #[serde(flatten)]
    first: Allowed,
    by_configuration: Vec<Allowed>,
}

/// What one configuration allows.
#[derive(Clone, Debug, Default, Serialize)]
pub struct Allowed {
    pub(super) configuration: Option<ConfigurationText>,
    pub(super) species: Rich,
    completed_core: Option<String>,
    source_of_configuration: &'static str,
    pub(super) states: Option<Count>,
    parity: Option<&'static str>,
    pub(super) n_terms: Option<Count>,
    pub(super) n_levels: Option<Count>,
    terms: Vec<TermRow>,
    #[serde(rename = "levels_by_J")]
    levels_by_j: ByJ,
    levels: Vec<LevelRow>,
    pub(super) levels_listed: usize,
    pub(super) ground: Option<Ground>,
    spin_only: Option<SpinOnly>,
    shells: Vec<ShellRow>,
    pub(super) bare_shell: Option<BareShell>,
    grid: Option<GridTable>,
    jj: Vec<JjRow>,
    jj_configurations: Option<Count>,
    #[serde(rename = "jj_levels_by_J")]
    jj_levels_by_j: ByJ,
    #[serde(rename = "jK")]
    jk: Option<Vec<PairRow>>,
    filling: Option<Filling>,
}

/// A configuration as it is typeset and as it is written.
#[derive(Clone, Debug, Serialize)]
pub struct ConfigurationText {
    pub core: Option<String>,
    pub subshells: Vec<SubshellName>,
    pub text: String,
    pub rich: Rich,
}

/// Numbers of levels by J, as an object whose keys are J in rising order.
#[derive(Clone, Debug, Default)]
pub struct ByJ(pub Vec<(TwiceJ, u128)>);

impl Serialize for ByJ {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        let mut map = serializer.serialize_map(Some(self.0.len()))?;
        for (j, times) in &self.0 {
            map.serialize_entry(&j.to_string(), &Count(*times))?;
        }
        map.end()
    }
}

#[derive(Clone, Debug, Serialize)]
struct TermRow {
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
#[derive(Clone, Debug, Serialize)]
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
#[derive(Clone, Debug, Serialize)]
struct ParentRow {
    text: String,
    rich: Rich,
    weight: f64,
}

#[derive(Clone, Debug, Serialize)]
struct LevelRow {
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

#[derive(Clone, Debug, Serialize)]
struct SpinOnly {
    mu: f64,
    #[serde(rename = "S")]
    s: TwiceJ,
}

#[derive(Clone, Debug, Serialize)]
struct GridTable {
    #[serde(rename = "M_L")]
    m_l: Vec<i32>,
    #[serde(rename = "M_S")]
    m_s: Vec<TwiceJ>,
    counts: Vec<Vec<Count>>,
}

#[derive(Clone, Debug, Serialize)]
struct JjRow {
    /// g of each j subshell, the same for every level of j^n.
    factors: Vec<JjFactor>,
    name: Rich,
    text: String,
    levels: ByJ,
    n_levels: Count,
}

#[derive(Clone, Debug, Serialize)]
struct JjFactor {
    label: String,
    j: TwiceJ,
    g: Option<f64>,
}

#[derive(Clone, Debug, Serialize)]
struct PairRow {
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

/// About how many rows the answer has, for the estimate.
pub fn rows(document: &Document) -> f64 {
    document
        .entries
        .iter()
        .filter_map(Entry::configuration)
        .filter_map(|c| ls::terms(c.subshells()).ok())
        .map(|terms| terms.n_levels().min(MAX_LEVELS as u128) as f64 + terms.terms.len() as f64)
        .sum()
}

/// The answer to *Which states?*
pub fn answer(document: &Document) -> Result<States, Problem> {
    if let Some(lack) = document.lacks(super::Question::States) {
        return Err(lack.problem());
    }
    let mut by_configuration = Vec::new();
    for entry in &document.entries {
        by_configuration.push(match &entry.content {
            Content::Configuration(named) => allowed(document, entry, named)?,
            Content::BareShell(n) => bare(document, *n),
        });
    }
    let first = by_configuration.first().cloned().unwrap_or_default();
    let mut around = Around::saying(sentence(
        &first,
        by_configuration.get(1..).unwrap_or_default(),
    ));
    around.working = working(&first, document);
    around.limits = limits(&first, document);
    around.kinds = [
        ("states", Kind::Exact),
        ("n_terms", Kind::Exact),
        ("n_levels", Kind::Exact),
        ("terms", Kind::Exact),
        ("terms.kinds.parents.weight", Kind::Computed),
        ("terms.kinds.rotation_casimir", Kind::Exact),
        ("terms.kinds.G2_casimir", Kind::Exact),
        ("levels_by_J", Kind::Exact),
        ("levels.J", Kind::Exact),
        ("levels.g", Kind::Computed),
        ("levels.mu_eff", Kind::Computed),
        (
            "ground",
            if first.ground.as_ref().is_some_and(Ground::is_tabulated) {
                Kind::Measured
            } else {
                Kind::Computed
            },
        ),
        ("grid", Kind::Exact),
        ("bare_shell", Kind::Exact),
        ("jj", Kind::Exact),
        ("jj.factors", Kind::Computed),
        ("jj_configurations", Kind::Exact),
        ("jj_levels_by_J", Kind::Exact),
        ("jK", Kind::Exact),
        ("jK.g", Kind::Computed),
        ("shells", Kind::Exact),
        ("spin_only", Kind::Computed),
    ]
    .into_iter()
    .collect();
    Ok(States {
        around,
        first,
        by_configuration,
    })
}

fn bare(document: &Document, n: u8) -> Allowed {
    Allowed {
        species: document.species_rich(),
        source_of_configuration: "typed",
        states: Some(Count(2 * u128::from(n) * u128::from(n))),
        bare_shell: BareShell::new(n),
        ..Allowed::default()
    }
}

pub(super) fn configuration_text(named: &Named) -> ConfigurationText {
    ConfigurationText {
        core: named.core.clone(),
        subshells: named
            .outside
            .iter()
            .copied()
            .map(SubshellName::from)
            .collect(),
        text: named.label(),
        rich: named.rich(),
    }
}

fn allowed(document: &Document, entry: &Entry, named: &Named) -> Result<Allowed, Problem> {
    let configuration = &named.configuration;
    let subshells = configuration.subshells();
    let open = terms::open_shells(subshells);
    let odd = terms::is_odd(subshells);
    let all = ls::terms(subshells)?;
    let parity = if odd { "odd" } else { "even" };
    let levels = all.levels(MAX_LEVELS);
    let ground = Ground::of(document, configuration, &entry.label, &all);
    let spin = ground.term.spin();
    let spin_only = Some(SpinOnly {
        mu: lande::spin_only_moment(spin),
        s: spin,
    });
    let pairs = jk::pairs(subshells, MAX_SCHEME_ROWS)?;
    let schemes = jj::configurations(subshells, MAX_SCHEME_ROWS)?;
    Ok(Allowed {
        configuration: Some(configuration_text(named)),
        species: document.species_rich(),
        completed_core: named.completed.as_ref().map(|core| core.text.clone()),
        source_of_configuration: entry.source,
        states: Some(Count(all.states)),
        parity: Some(parity),
        n_terms: Some(Count(all.n_terms())),
        n_levels: Some(Count(all.n_levels())),
        terms: term_rows(&open, odd, &all)?,
        levels_by_j: ByJ(all.levels_by_j()),
        levels_listed: levels.len(),
        levels: levels
            .iter()
            .map(|level| level_row(&entry.label, level, odd, parity))
            .collect(),
        ground: Some(ground),
        spin_only,
        shells: super::shells::rows(configuration),
        bare_shell: None,
        grid: grid_table(subshells)?,
        jj_levels_by_j: ByJ(jj::levels_by_j(subshells)?),
        jj_configurations: Some(Count(schemes.total)),
        jj: schemes.listed.iter().map(jj_row).collect(),
        jk: pairs.map(|pairs| {
            pairs
                .listed
                .iter()
                .map(|pair| pair_row(pair, &pairs.outer))
                .collect()
        }),
        filling: super::ground::filling(document),
    })
}

fn level_row(configuration: &str, level: &Level, odd: bool, parity: &'static str) -> LevelRow {
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

fn term_rows(open: &[Subshell], odd: bool, all: &ls::LsTerms) -> Result<Vec<TermRow>, Problem> {
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
            let name = TermName::new(term, odd)
                .number((parent.times > 1).then_some(u128::from(parent.index)));
            ParentRow {
                text: name.plain(),
                rich: Rich::new().with(Piece::Term(name)),
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

fn grid_table(subshells: &[Subshell]) -> Result<Option<GridTable>, Problem> {
    let grid = grid::grid(subshells)?;
    if grid.m_l.len().saturating_mul(grid.m_s.len()) > MAX_GRID {
        return Ok(None);
    }
    Ok(Some(GridTable {
        m_l: grid.m_l,
        m_s: grid.m_s,
        counts: grid
            .counts
            .into_iter()
            .map(|row| row.into_iter().map(Count).collect())
            .collect(),
    }))
}

fn jj_row(scheme: &jj::JjConfiguration) -> JjRow {
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

fn pair_row(pair: &jk::Pair, outer: &Subshell) -> PairRow {
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
