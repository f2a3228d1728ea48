//! Which lines? Every pair of levels that a photon joins, with its strength, wavelength and rates, and
//! the rule against every other pair.
//!
//! Where no energies are to be had, lines have their relative strengths in pure LS coupling alone.

use serde::Serialize;

use crate::configuration::Subshell;
use crate::numerics::sorted_map::SortedMap;
use crate::problem::Problem;
use crate::radiation::Multipole;
use crate::radiation::populations::Weighted;
use crate::radiation::selection::{Between, TermOf};

use super::answer::Around;
use super::decays::Radiation;
use super::document::{Document, LevelOf};
use super::energy_case;
use super::levels::{parity, populated};
use super::light::{Surroundings, conversions};
use super::line_rows::{Conversions, LevelEntry, LineRow, MultipletRow, RefusedRow, WindowRow};
use super::lines_energies::Source;
use super::lines_relative::{Judgement, judge};
use super::lines_spectrum_words as spectrum_words;
use super::lines_words::{limits, sentence, working};
use super::pairs;
use super::placed::Placed;
use super::rich::Kind;
use super::solved::{Solved, SolvedLevel, solved};
use super::watch::Watch;

/// The most refused pairs and the most multiplets that are listed beside known energies; their number is
/// given always.
const MAX_LISTED: usize = 5000;

/// The answer.
#[derive(Debug, Serialize)]
pub struct Lines {
    #[serde(flatten)]
    around: Around,
    lines: Vec<LineRow>,
    refused: Vec<RefusedRow>,
    refused_total: usize,
    multiplets: Vec<MultipletRow>,
    multiplets_total: usize,
    levels: Vec<LevelEntry>,
    pairs: usize,
    window: Option<WindowRow>,
    conversions: Conversions,
    order: &'static str,
}

/// The answer to *Which lines?*
pub fn answer(document: &Document, watch: &mut Watch) -> Result<Lines, Problem> {
    if let Some(lack) = document.lacks(super::Question::Lines) {
        return Err(lack.problem());
    }
    if energy_case::need(document).is_some() {
        return relative(document, None);
    }
    match with_energies(document, watch) {
        Ok(found) => Ok(found),
        // Energies that cannot be had keep no rule and no relative strength back.
        Err(problem) if problem.code != "stopped" && pairs::few(document) => {
            relative(document, Some(&problem))
        }
        Err(problem) => Err(problem),
    }
}

fn count(pairs: u128) -> usize {
    usize::try_from(pairs).unwrap_or(usize::MAX)
}

/// Lines without energies.
fn relative(document: &Document, because: Option<&Problem>) -> Result<Lines, Problem> {
    let Judgement {
        lines,
        refused,
        multiplets,
    } = judge(document)?;
    let mut levels = Vec::new();
    for (entry, named) in document
        .entries
        .iter()
        .enumerate()
        .filter(|(_, e)| e.configuration().is_some())
    {
        for level in document.levels(entry, usize::MAX) {
            let of = LevelOf { entry, level };
            levels.push(LevelEntry {
                label: document.level_label(&of),
                rich: document.level_rich(&of),
                j: level.j,
                configuration: named.label.clone(),
                term: level.term.to_string(),
                parity: parity(document.is_odd(entry)),
                energy: document.pinned(&of),
                above_lowest: None,
                population: None,
            });
        }
    }
    let surroundings = Surroundings::new(&document.conditions);
    let mut around = Around::saying(sentence(document, &lines, &refused));
    around.working = working(&lines, &multiplets);
    around.limits = limits(document, because);
    let shortest = lines
        .iter()
        .filter_map(|line| line.vacuum_nm)
        .reduce(f64::min);
    around.cautions = document.source_cautions(shortest);
    around.kinds = [
        ("lines.relative", Kind::Computed),
        ("lines.multipole", Kind::Exact),
        ("lines.wavenumber", Kind::Entered),
        ("lines.vacuum_nm", Kind::Entered),
        ("refused.rule", Kind::Exact),
        ("refused_total", Kind::Exact),
        ("multiplets_total", Kind::Exact),
        ("conversions", Kind::Exact),
        ("multiplets.lines", Kind::Exact),
        ("multiplets.sum", Kind::Computed),
        ("multiplets.upper_sums.sum", Kind::Computed),
        ("multiplets.upper_sums.expected", Kind::Exact),
        ("multiplets.lower_sums.sum", Kind::Computed),
        ("multiplets.lower_sums.expected", Kind::Exact),
        ("pairs", Kind::Exact),
    ]
    .into_iter()
    .collect();
    Ok(Lines {
        around,
        pairs: count(pairs::pairs(document)),
        window: surroundings.window(&document.conditions, &lines),
        conversions: conversions(),
        refused_total: refused.len(),
        multiplets_total: multiplets.len(),
        lines,
        refused,
        multiplets,
        levels,
        order: "Of two levels the one of the later configuration, or the later one in the list, is called the upper one, unless measured energies say otherwise.",
    })
}

fn with_energies(document: &Document, watch: &mut Watch) -> Result<Lines, Problem> {
    let solved = solved(document, watch)?;
    let placed = Placed::new(document, &solved);
    let strengths = solved.strengths(document, watch)?;
    let radiation = Radiation::new(&solved, strengths, &placed);
    let surroundings = Surroundings::new(&document.conditions);
    let many = !pairs::few(document);
    let judged = match solved.spectrum.is_some() && !many {
        true => Some(judge(document)?),
        false => None,
    };
    let source = Source {
        document,
        solved: &solved,
        placed: &placed,
        radiation: &radiation,
        surroundings: &surroundings,
        judged: judged.as_ref(),
    };
    let lines = source.rows();
    let mut refused = match (judged.is_some(), solved.spectrum.is_some()) {
        (false, false) => refused_of_one_electron(&solved)?,
        _ => Vec::new(),
    };
    let mut multiplets = Vec::new();
    if let Some(judged) = judged {
        refused = judged.refused;
        multiplets = judged.multiplets;
    }
    let joined = Joined::new(&solved, &radiation);
    // A pair that pure coupling refuses may be joined by mixing.
    refused.retain(|row| !joined.has(&row.upper, &row.lower));
    let levels_count = solved.levels.len();
    let pairs = levels_count * levels_count.saturating_sub(1) / 2;
    let refused_total = match many {
        true => pairs.saturating_sub(joined.pairs.len()),
        false => refused.len(),
    };
    // What comes nearest to being allowed first.
    crate::numerics::order::sort_by_key(&mut refused, |row| row.rigorous);
    refused.truncate(MAX_LISTED);
    let multiplets_total = multiplets.len();
    multiplets.truncate(MAX_LISTED);
    let window = surroundings.window(&document.conditions, &lines);
    let told = spectrum_words::Told {
        document,
        solved: &solved,
        placed: &placed,
        lines: &lines,
        surroundings: &surroundings,
        window: window.as_ref(),
        refused_listed: !many,
    };
    let mut around = Around::saying(spectrum_words::sentence(&told));
    around.working = spectrum_words::working(&told);
    if !many && solved.spectrum.is_some() {
        around.working.extend(working(&lines, &multiplets));
    }
    around.limits = spectrum_words::limits(&told);
    let shortest = lines
        .iter()
        .filter_map(|line| line.vacuum_nm)
        .reduce(f64::min);
    around.cautions = document.source_cautions(shortest);
    around.kinds = spectrum_words::kinds(document, &placed);
    Ok(Lines {
        around,
        refused,
        refused_total,
        multiplets,
        multiplets_total,
        levels: level_entries(document, &solved, &placed),
        pairs,
        window,
        conversions: conversions(),
        lines,
        order: "Of two levels the one of higher energy is called the upper one.",
    })
}

/// The pairs of levels that some line joins.
struct Joined<'a> {
    places: SortedMap<&'a str, usize>,
    /// The lower place first, rising.
    pairs: Vec<(usize, usize)>,
}

impl Joined<'_> {
    fn new<'a>(solved: &'a Solved, radiation: &Radiation) -> Joined<'a> {
        let lines = radiation.lines.iter();
        let ends = lines.map(|line| (line.upper.min(line.lower), line.upper.max(line.lower)));
        let mut pairs: Vec<(usize, usize)> = ends.collect();
        crate::numerics::order::sort(&mut pairs);
        pairs.dedup();
        let labels = solved.levels.iter().enumerate();
        Joined {
            places: labels
                .map(|(place, level)| (&*level.label, place))
                .collect(),
            pairs,
        }
    }

    fn has(&self, one: &str, other: &str) -> bool {
        let (Some(one), Some(other)) = (self.places.get(&one), self.places.get(&other)) else {
            return false;
        };
        let pair = (*one.min(other), *one.max(other));
        self.pairs.binary_search(&pair).is_ok()
    }
}

fn level_entries(document: &Document, solved: &Solved, placed: &Placed) -> Vec<LevelEntry> {
    let filled = populated(document, &placed.weighted(solved));
    let lowest = placed.lowest();
    let entry = |place: &usize| {
        let level = solved.levels.get(*place)?;
        let energy = placed.of(*place);
        Some(LevelEntry {
            label: level.label.to_string(),
            rich: level.rich(document),
            j: level.level.j,
            configuration: level.configuration.to_string(),
            term: level.level.term.to_string(),
            parity: parity(level.odd),
            energy: Some(energy),
            above_lowest: Some(energy - lowest),
            population: filled.as_ref().map(|filled| {
                filled.share(Weighted {
                    energy,
                    weight: level.weight(),
                })
            }),
        })
    };
    placed.order.iter().filter_map(entry).collect()
}

/// The rule against an electric dipole line between each pair of one-electron levels that has none.
fn refused_of_one_electron(solved: &Solved) -> Result<Vec<RefusedRow>, Problem> {
    let mut refused = Vec::new();
    let subshells = |level: &SolvedLevel| -> Vec<Subshell> {
        let shell = level.orbital.and_then(|orbital| Subshell::new(orbital, 1));
        shell.into_iter().collect()
    };
    let term = |level: &SolvedLevel| TermOf {
        term: level.level.term,
        index: None,
        chain: None,
    };
    for (place, lower) in solved.levels.iter().enumerate() {
        for upper in solved.levels.iter().skip(place + 1) {
            let between = Between::new(&subshells(upper), &subshells(lower))?;
            let (j, other) = (upper.level.j, lower.level.j);
            let verdicts = between.verdicts(&term(upper), j, &term(lower), other);
            let electric = verdicts.iter().find(|v| v.multipole == Multipole::E1);
            let Some(rule) = electric.and_then(|verdict| verdict.refused_by) else {
                continue;
            };
            refused.push(RefusedRow {
                upper: upper.label.to_string(),
                lower: lower.label.to_string(),
                upper_j: j,
                lower_j: other,
                multipole: Multipole::E1,
                rule: rule.to_string(),
                code: rule.code(),
                rigorous: rule.is_rigorous(),
                others: SortedMap::default(),
            });
        }
    }
    Ok(refused)
}
