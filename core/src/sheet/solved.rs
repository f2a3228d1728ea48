//! The levels of a sheet's configurations, kept by what they depend on.
//!
//! A window, a medium, a temperature or a pin changes no energy matrix: the questions on levels and on
//! lines share what is kept here. What is kept is a pure function of its key, so an answer is
//! the same with a cold and with a warm cache.

use std::cell::{OnceCell, RefCell};
use std::rc::Rc;

use crate::configuration::{Orbital, Subshell};
use crate::constants::HARTREE_WAVENUMBER;
use crate::numerics::order::sort_by;
use crate::numerics::sorted_map::SortedMap;
use crate::problem::Problem;
use crate::quantity::TwiceJ;
use crate::radial::hydrogenic::dirac;
use crate::structure::model::{self, Spectrum};
use crate::terms::chains::Chain;
use crate::terms::{Level, Term, label, lande};

use super::basis_names;
use super::compositions::{Compositions, compositions};
use super::document::{Document, LevelOf};
use super::energy_case::{EnergyCase, energy_case};
use super::levels::MOST_LEVELS_WITH_LINES;
use super::orbitals_cache;
use super::orbitals_field::solution;
use super::rich::{Piece, Rich, TermName};
use super::solved_lines::{Strengths, strengths};
use super::watch::{Progress, Watch};

/// The most cases that are kept.
const MOST: usize = 4;

/// One level.
#[derive(Clone, Debug)]
pub struct SolvedLevel {
    /// Its configuration's place in the sheet.
    pub entry: usize,
    /// The configuration as its label writes it.
    pub configuration: Rc<str>,
    /// Of a bare shell's levels the orbital.
    pub orbital: Option<Orbital>,
    /// Term, index and J.
    pub level: Level,
    /// Its name in the sheet.
    pub label: Rc<str>,
    /// Parity.
    pub odd: bool,
    /// As computed, cm⁻¹.
    pub energy: f64,
    /// g_J; nothing for J = 0.
    pub g: Option<f64>,
}

impl SolvedLevel {
    /// 2J + 1.
    pub fn weight(&self) -> f64 {
        self.level.j.degeneracy() as f64
    }

    /// As the sheet's pins name it.
    pub fn of(&self) -> LevelOf {
        LevelOf {
            entry: self.entry,
            level: self.level,
        }
    }

    /// Configuration and level, typeset.
    pub fn rich(&self, document: &Document) -> Rich {
        let Some(shell) = self.orbital.and_then(|orbital| Subshell::new(orbital, 1)) else {
            return document.level_rich(&self.of());
        };
        let name = TermName::of_level(&self.level, self.odd);
        Rich::new()
            .with(Piece::Configuration {
                core: None,
                subshells: vec![shell.into()],
            })
            .say(" ")
            .with(Piece::Term(name))
    }
}

/// All levels by rising energy.
#[derive(Debug)]
pub struct Solved {
    case: EnergyCase,
    labels: Vec<String>,
    /// The levels.
    pub levels: Vec<SolvedLevel>,
    /// Matrices and radial integrals; none for one electron.
    pub spectrum: Option<Spectrum>,
    /// The coupling chain of every basis state, by parity.
    pub chains: Vec<Vec<Chain>>,
    /// Whether the term of each of these states occurs more than once in its configuration.
    pub several: Vec<Vec<bool>>,
    strengths: OnceCell<Strengths>,
    compositions: OnceCell<Compositions>,
}

thread_local! {
    static KEPT: RefCell<Vec<Rc<Solved>>> = const { RefCell::new(Vec::new()) };
}

fn kept(case: &EnergyCase, labels: &[String]) -> Option<Rc<Solved>> {
    KEPT.with_borrow_mut(|kept| {
        let same = |solved: &Rc<Solved>| solved.case == *case && solved.labels == labels;
        let place = kept.iter().position(same)?;
        let solved = kept.remove(place);
        kept.push(Rc::clone(&solved));
        Some(solved)
    })
}

fn labels(document: &Document) -> Vec<String> {
    document.entries.iter().map(|e| e.label.clone()).collect()
}

/// The levels of a document, kept or computed.
///
/// # Errors
/// As [`energy_case`] and [`model::solve`], placed in the sheet.
pub fn solved(document: &Document, watch: &mut Watch) -> Result<Rc<Solved>, Problem> {
    let case = energy_case(document)?;
    let labels = labels(document);
    if let Some(known) = kept(&case, &labels) {
        return Ok(known);
    }
    let solved = match &case {
        EnergyCase::OneElectron { z, mass, orbitals } => Solved {
            levels: one_electron(*z, *mass, orbitals)?,
            spectrum: None,
            chains: Vec::new(),
            several: Vec::new(),
            case: case.clone(),
            labels,
            strengths: OnceCell::new(),
            compositions: OnceCell::new(),
        },
        EnergyCase::Model {
            case: asked,
            entries,
        } => {
            let spectrum = spectrum(document, asked, watch).map_err(|p| place(document, p))?;
            let chains: Vec<Vec<Chain>> = spectrum
                .parities
                .iter()
                .map(|parity| basis_names::chains(parity.basis(), &spectrum.orbitals))
                .collect();
            let several = several(&spectrum, &chains);
            Solved {
                levels: model_levels(&spectrum, (&chains, &several), entries, &labels),
                spectrum: Some(spectrum),
                chains,
                several,
                case: case.clone(),
                labels,
                strengths: OnceCell::new(),
                compositions: OnceCell::new(),
            }
        }
    };
    let solved = Rc::new(solved);
    KEPT.with_borrow_mut(|kept| {
        if kept.len() >= MOST {
            kept.remove(0);
        }
        kept.push(Rc::clone(&solved));
    });
    Ok(solved)
}

/// A fault of the model at the configurations, or the species that stands for them.
fn place(document: &Document, problem: Problem) -> Problem {
    if !problem.path.is_empty() {
        return problem;
    }
    let typed = document.entries.iter().any(|e| !e.path.is_empty());
    let bound = problem.bound.as_deref().map(as_sentence);
    let problem = Problem { bound, ..problem };
    problem.at(if typed { "/configurations" } else { "/species" })
}

/// A bound as the sheet tells it.
fn as_sentence(bound: &str) -> String {
    let mut letters = bound.chars();
    let first = letters.next().map(|c| c.to_ascii_uppercase());
    let end = if bound.ends_with('.') { "" } else { "." };
    format!(
        "{}{}{end}",
        first.map(String::from).unwrap_or_default(),
        letters.as_str()
    )
}

fn spectrum(
    document: &Document,
    case: &model::Case,
    watch: &mut Watch,
) -> Result<Spectrum, Problem> {
    let watch = RefCell::new(watch);
    let of = case.configurations.len();
    let mut number = 0;
    let mut field = |atom: &crate::radial::hartree_fock::Atom| {
        let label = document.entries.get(number).map(|e| e.label.as_str());
        let configuration = number;
        number += 1;
        solution(atom, &mut |step| {
            (watch.borrow_mut())(&Progress {
                configuration,
                of,
                label: label.unwrap_or_default(),
                iteration: step.iteration,
                residual: step.residual,
                done: None,
            })
        })
    };
    model::solve(case, &mut field, &mut |done| {
        (watch.borrow_mut())(&told("energies", done))
    })
}

/// Progress of the matrices or of the lines.
pub fn told(label: &str, done: f64) -> Progress<'_> {
    Progress {
        configuration: 0,
        of: 0,
        label,
        iteration: 0,
        residual: 0.0,
        done: Some(done),
    }
}

/// A term that occurs once in its configuration has no number.
fn several(spectrum: &Spectrum, chains: &[Vec<Chain>]) -> Vec<Vec<bool>> {
    let of_parity = |(parity, chains): (&model::Parity, &Vec<Chain>)| {
        let states = || parity.basis().states().iter().zip(chains);
        let repeated: SortedMap<(usize, Term), ()> = states()
            .filter(|(_, chain)| chain.index == 2)
            .map(|(state, chain)| ((state.configuration, chain.term), ()))
            .collect();
        states()
            .map(|(state, chain)| repeated.get(&(state.configuration, chain.term)).is_some())
            .collect()
    };
    spectrum
        .parities
        .iter()
        .zip(chains)
        .map(of_parity)
        .collect()
}

fn model_levels(
    spectrum: &Spectrum,
    (chains, several): (&[Vec<Chain>], &[Vec<bool>]),
    entries: &[usize],
    labels: &[String],
) -> Vec<SolvedLevel> {
    let names: Vec<Rc<str>> = labels
        .iter()
        .map(|label| Rc::from(label.as_str()))
        .collect();
    let mut levels = Vec::with_capacity(spectrum.levels.len());
    for place in &spectrum.levels {
        let found = || {
            let (parity, level) = spectrum.level(*place)?;
            let named = *parity.named.get(place.level)?;
            let state = parity.basis().states().get(named)?;
            let chain = chains.get(place.parity)?.get(named)?;
            let several = *several.get(place.parity)?.get(named)?;
            let entry = *entries.get(parity.configuration_of(state)?)?;
            let own = Level {
                term: chain.term,
                index: several.then_some(chain.index),
                j: TwiceJ::from_doubled(level.two_j),
            };
            let configuration = Rc::clone(names.get(entry)?);
            Some(SolvedLevel {
                entry,
                label: Rc::from(label::format(&configuration, &own)),
                configuration,
                orbital: None,
                level: own,
                odd: parity.odd,
                energy: level.energy,
                g: spectrum.g(*place),
            })
        };
        levels.extend(found());
    }
    levels
}

/// Dirac's levels, counted from the average of the first entry.
fn one_electron(
    z: u8,
    mass: f64,
    orbitals: &[(usize, Orbital)],
) -> Result<Vec<SolvedLevel>, Problem> {
    let mut levels = Vec::new();
    for (entry, orbital) in orbitals {
        for level in dirac::levels(*orbital, z, Some(mass))? {
            let own = Level {
                term: Term {
                    two_s: 1,
                    l: orbital.l().into(),
                },
                index: None,
                j: level.j,
            };
            let configuration: Rc<str> = Rc::from(orbital.to_string());
            levels.push(SolvedLevel {
                entry: *entry,
                label: Rc::from(label::format(&configuration, &own)),
                configuration,
                orbital: Some(*orbital),
                level: own,
                odd: orbital.l() % 2 == 1,
                energy: level.energy * HARTREE_WAVENUMBER.value,
                g: lande::ls(own.term, own.j),
            });
        }
    }
    let first: Vec<&SolvedLevel> = levels.iter().filter(|l| l.entry == 0).collect();
    let weights: f64 = first.iter().map(|l| l.weight()).sum();
    let sum: f64 = first.iter().map(|l| l.weight() * l.energy).sum();
    let origin = if weights > 0.0 { sum / weights } else { 0.0 };
    for level in &mut levels {
        level.energy -= origin;
    }
    sort_by(&mut levels, |a, b| a.energy.total_cmp(&b.energy));
    Ok(levels)
}

impl Solved {
    /// What the levels depend on.
    pub fn case(&self) -> &EnergyCase {
        &self.case
    }

    /// All lines with S > 0, kept or computed.
    ///
    /// # Errors
    /// Those of [`Spectrum::lines`].
    pub fn strengths(&self, document: &Document, watch: &mut Watch) -> Result<&Strengths, Problem> {
        if self.strengths.get().is_none() {
            let found = strengths(self, watch).map_err(|p| place(document, p))?;
            // Only this thread could have been faster, and it is here.
            let _ = self.strengths.set(found);
        }
        self.strengths
            .get()
            .ok_or_else(|| Problem::new("lines-not-found", "The lines could not be kept.", 0, 0))
    }

    /// What each level is made of, kept or computed.
    pub fn compositions(&self) -> &Compositions {
        self.compositions.get_or_init(|| compositions(self))
    }
}

/// Seconds and megabytes that the answer on levels, or with `lines` on lines, takes beyond what is kept.
pub fn estimate(document: &Document, lines: bool) -> (f64, f64) {
    let Ok(case) = energy_case(document) else {
        return (0.0, 0.0);
    };
    let known = kept(&case, &labels(document));
    let EnergyCase::Model { case, .. } = &case else {
        return (0.0, 0.0);
    };
    let Ok(expected) = model::estimate(case) else {
        return (0.0, 0.0);
    };
    let mut fields = 0.0;
    for place in 0..case.configurations.len() {
        if let Some(atom) = case.atom(place).filter(orbitals_missing) {
            fields += super::orbitals_field::cost(&atom).0;
        }
    }
    let levels = expected.levels as f64;
    let rows = levels * levels;
    let (mut seconds, mut bytes) = (0.0, 0.0);
    if known.is_none() {
        seconds += fields + (expected.seconds - expected.field_seconds).max(0.0);
        bytes += expected.bytes as f64;
    }
    if levels <= MOST_LEVELS_WITH_LINES as f64
        && known.is_none_or(|solved| solved.strengths.get().is_none())
    {
        seconds += SECONDS_FOR_A_PAIR * rows;
        bytes += BYTES_FOR_A_PAIR * rows;
    }
    if lines {
        seconds += SECONDS_FOR_A_PAIR_IN_ROWS * rows;
        if super::pairs::few(document) {
            seconds += SECONDS_FOR_A_PAIR_JUDGED * rows;
        }
        bytes += BYTES_FOR_A_PAIR_IN_ROWS * rows;
    } else {
        seconds += SECONDS_FOR_A_LEVEL * levels;
        bytes += BYTES_FOR_A_LEVEL * levels;
    }
    (seconds, bytes * 1e-6)
}

/// Seconds and megabytes that levels take beyond what is kept, without lines or rows.
pub fn estimate_levels(document: &Document) -> (f64, f64) {
    let Ok(case) = energy_case(document) else {
        return (0.0, 0.0);
    };
    let (EnergyCase::Model { case: model, .. }, None) = (&case, kept(&case, &labels(document)))
    else {
        return (0.0, 0.0);
    };
    let Ok(expected) = model::estimate(model) else {
        return (0.0, 0.0);
    };
    let mut seconds = (expected.seconds - expected.field_seconds).max(0.0);
    for place in 0..model.configurations.len() {
        if let Some(atom) = model.atom(place).filter(orbitals_missing) {
            seconds += super::orbitals_field::cost(&atom).0;
        }
    }
    (seconds, expected.bytes as f64 * 1e-6)
}

/// Seconds that the levels take without anything kept; nothing where they cannot be had.
pub fn cold_seconds(document: &Document) -> Option<f64> {
    match energy_case(document).ok()? {
        EnergyCase::OneElectron { .. } => Some(0.0),
        EnergyCase::Model { case, .. } => Some(model::estimate(&case).ok()?.seconds),
    }
}

/// Measured with four configurations of neutral iron and with f⁷, natively times 1.6 for a browser: strengths
/// of all multipoles and the rows of lines over the pairs of levels, compositions and rows over the levels.
/// What pure coupling says of each pair in a browser, with Cr I, Sm III and Pr III.
const SECONDS_FOR_A_PAIR: f64 = 3.5e-7;
const BYTES_FOR_A_PAIR: f64 = 60.0;
const SECONDS_FOR_A_PAIR_IN_ROWS: f64 = 9e-7;
const SECONDS_FOR_A_PAIR_JUDGED: f64 = 1.75e-6;
const BYTES_FOR_A_PAIR_IN_ROWS: f64 = 340.0;
const SECONDS_FOR_A_LEVEL: f64 = 1e-4;
const BYTES_FOR_A_LEVEL: f64 = 2e4;

fn orbitals_missing(atom: &crate::radial::hartree_fock::Atom) -> bool {
    !orbitals_cache::has(atom)
}
