//! Which states? Shells, terms, levels and the ground of each configuration.

use serde::{Serialize, Serializer, ser::SerializeMap};

use crate::configuration::Subshell;
use crate::problem::Problem;
use crate::quantity::TwiceJ;
use crate::terms::{self, grid, jj, jk, lande, ls};

use super::answer::Around;
use super::document::Document;
use super::entry::{Content, Entry, Named};
use super::ground::{Filling, Ground};
use super::rich::{Count, Kind, Rich, SubshellName};
use super::shells::{BareShell, ShellRow};
use super::states_schemes::{JjRow, PairRow, jj_row, pair_row};
use super::states_terms::{LevelRow, TermRow, level_row, term_rows};
use super::states_words::{limits, sentence, working};

/// The most levels that are listed; their whole number is always given.
pub const MAX_LEVELS: usize = 4000;
/// The most jj configurations and jK pairs that are listed.
const MAX_SCHEME_ROWS: usize = 2000;
/// The most cells of a grid.
const MAX_GRID: usize = 20_000;

/// The answer: what each configuration allows, the sheet's first one first.
#[derive(Debug)]
pub struct States {
    around: Around,
    first: Allowed,
    others: Vec<Allowed>,
}

impl Serialize for States {
    /// The first configuration's own keys, then an entry for every configuration if there are several: a lone
    /// one is not told twice, for a half-full f shell alone has thousands of parents.
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        #[derive(Serialize)]
        struct Told<'a> {
            #[serde(flatten)]
            around: &'a Around,
            #[serde(flatten)]
            first: &'a Allowed,
            by_configuration: Vec<&'a Allowed>,
        }
        let every = std::iter::once(&self.first).chain(&self.others);
        Told {
            around: &self.around,
            first: &self.first,
            by_configuration: every.filter(|_| !self.others.is_empty()).collect(),
        }
        .serialize(serializer)
    }
}

/// What one configuration allows.
#[derive(Debug, Default, Serialize)]
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
#[derive(Debug, Default)]
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

#[derive(Debug, Serialize)]
struct SpinOnly {
    mu: f64,
    #[serde(rename = "S")]
    s: TwiceJ,
}

#[derive(Debug, Serialize)]
struct GridTable {
    #[serde(rename = "M_L")]
    m_l: Vec<i32>,
    #[serde(rename = "M_S")]
    m_s: Vec<TwiceJ>,
    counts: Vec<Vec<Count>>,
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
    let mut first = None;
    let mut others = Vec::new();
    for entry in &document.entries {
        let allowed = match &entry.content {
            Content::Configuration(named) => allowed(document, entry, named)?,
            Content::BareShell(n) => bare(document, *n),
        };
        if first.is_none() {
            first = Some(allowed);
        } else {
            others.push(allowed);
        }
    }
    let first = first.unwrap_or_default();
    let mut around = Around::saying(sentence(&first, &others));
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
        ("levels.index", Kind::Exact),
        ("levels_listed", Kind::Exact),
        (
            "ground",
            if first.ground.as_ref().is_some_and(Ground::is_measured) {
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
        others,
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
