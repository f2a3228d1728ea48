//! Levels in jj and jK coupling: how much of each state they hold.
//!
//! LS-coupled subshells become subshells with J of their own by
//!
//! ⟨(S₁S₂)S (L₁L₂)L J|(S₁L₁)J₁ (S₂L₂)J₂ J⟩ = √[(2S+1)(2L+1)(2J₁+1)(2J₂+1)] {S₁ S₂ S; L₁ L₂ L; J₁ J₂ J},
//!
//! one factor for each coupled pair; within each subshell follow its own jj states. With one electron
//! in the last open subshell jK coupling is ((S_c L_c)J_c ℓ)K ½ J, by two recouplings of three.
//!
//! Source: Edmonds, *Angular Momentum in Quantum Mechanics* (1957), eqs. 6.1.5 and 6.4.2; Cowan, *The
//! Theory of Atomic Structure and Spectra* (1981), chapter 9.

use super::basis::{Basis, Coupled, State};
use super::chain::Workshop;
use super::hamiltonian::Rows;
use super::levels::Level;
use super::multipole::Elements;
use super::subshell_jj::{JjBlock, JjState, jj_states};
use super::symbols::{Symbols, signed};
use crate::numerics::order::sort_by;
use crate::numerics::sorted_map::SortedMap;
use crate::problem::Problem;

/// Below this a coefficient is zero.
const ZERO: f64 = 1e-12;

/// One state in jj coupling, without its J.
#[derive(Clone, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub struct JjCoupled {
    /// Place of its configuration.
    pub configuration: usize,
    /// The state of each subshell.
    pub subshells: Vec<JjState>,
    /// For each subshell 2J of all subshells up to it; the last is the total.
    pub running: Vec<i32>,
}

/// One state in jK coupling, without its J.
#[derive(Clone, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub struct JkCoupled {
    /// Place of its configuration.
    pub configuration: usize,
    /// For each subshell before the last open one the place of its term.
    pub terms: Vec<usize>,
    /// For each of them S and L of all up to it.
    pub running: Vec<Coupled>,
    /// 2J of the core.
    pub two_j_core: i32,
    /// 2K; nothing for full shells alone, whose one state stands for itself.
    pub two_k: Option<i32>,
}

/// The states of a scheme for one J, and what they are of LS states.
#[derive(Clone, Debug, PartialEq)]
pub struct Scheme<T> {
    /// The states.
    pub states: Vec<T>,
    /// Row of the LS state, place of the scheme's state, their overlap.
    elements: Elements,
}

impl<T> Scheme<T> {
    /// Places of the states with their shares of a level in percent, largest first; those that are
    /// exactly zero left out.
    pub fn composition(&self, level: &Level) -> Vec<(usize, f64)> {
        let mut components = vec![0.0; self.states.len()];
        for &(row, place, overlap) in &self.elements {
            let share = level.vector.get(row).copied().unwrap_or(0.0) * overlap;
            if let Some(component) = components.get_mut(place) {
                *component += share;
            }
        }
        let mut shares: Vec<(usize, f64)> = components
            .iter()
            .map(|component| 100.0 * component * component)
            .enumerate()
            .filter(|share| share.1 > 0.0)
            .collect();
        sort_by(&mut shares, |a, b| b.1.total_cmp(&a.1));
        shares
    }
}

/// Collects states as they are met, then sorts them.
struct Collector<T> {
    places: SortedMap<T, Vec<(usize, f64)>>,
}

impl<T: Ord> Collector<T> {
    fn new() -> Self {
        Collector {
            places: SortedMap::default(),
        }
    }

    fn add(&mut self, row: usize, state: T, overlap: f64) {
        if overlap.abs() > ZERO {
            self.places.change(state, |of| of.push((row, overlap)));
        }
    }

    fn finish(self) -> Scheme<T> {
        let places = self.places.into_entries();
        let mut scheme = Scheme {
            states: Vec::with_capacity(places.len()),
            elements: Elements::new(),
        };
        for (place, (state, overlaps)) in places.into_iter().enumerate() {
            scheme.states.push(state);
            let found = overlaps
                .into_iter()
                .map(|(row, overlap)| (row, place, overlap));
            scheme.elements.extend(found);
        }
        scheme
    }
}

/// Transforms the states of a basis to jj coupling.
pub struct JjTransformation {
    /// By configuration, then subshell.
    subshells: Vec<Vec<Vec<JjBlock>>>,
}

impl JjTransformation {
    /// The jj states of every subshell of every configuration.
    ///
    /// # Errors
    /// Those of [`crate::angular::parentage::parents`]; `levels-not-found` where an iteration fails.
    pub fn new(basis: &Basis) -> Result<Self, Problem> {
        let mut workshop = Workshop::default();
        let mut subshells = Vec::new();
        for occupations in basis.configurations() {
            let mut own = Vec::new();
            for (&l, &electrons) in basis.subshells().iter().zip(occupations) {
                own.push(jj_states(&mut workshop, l, electrons)?);
            }
            subshells.push(own);
        }
        Ok(JjTransformation { subshells })
    }

    /// The jj states of one J.
    pub fn of(&self, basis: &Basis, rows: &Rows) -> Scheme<JjCoupled> {
        let mut symbols = Symbols::default();
        let mut collector = Collector::new();
        for (row, &place) in rows.states.iter().enumerate() {
            let Some(state) = basis.states().get(place) else {
                continue;
            };
            let Some(subshells) = self.subshells.get(state.configuration) else {
                continue;
            };
            let mut path = Path {
                state,
                subshells,
                two_j: rows.two_j,
                symbols: &mut symbols,
                collector: &mut collector,
                row,
            };
            let start = JjCoupled {
                configuration: state.configuration,
                subshells: Vec::new(),
                running: Vec::new(),
            };
            path.follow(&start, 1.0);
        }
        collector.finish()
    }
}

/// Follows one LS state to all jj states that it holds, subshell by subshell.
struct Path<'a> {
    state: &'a State,
    subshells: &'a [Vec<JjBlock>],
    two_j: i32,
    symbols: &'a mut Symbols,
    collector: &'a mut Collector<JjCoupled>,
    row: usize,
}

impl Path<'_> {
    fn follow(&mut self, so_far: &JjCoupled, overlap: f64) {
        let subshell = so_far.subshells.len();
        let (Some(blocks), Some(&term)) =
            (self.subshells.get(subshell), self.state.terms.get(subshell))
        else {
            if so_far.running.last() == Some(&self.two_j) {
                self.collector.add(self.row, so_far.clone(), overlap);
            }
            return;
        };
        let before = subshell.checked_sub(1);
        let earlier = before.and_then(|place| self.state.running.get(place));
        let earlier = earlier.copied().unwrap_or_default();
        let two_j1 = so_far.running.last().copied().unwrap_or(0);
        let part = self.state.parts.get(subshell).copied().unwrap_or_default();
        let total = self
            .state
            .running
            .get(subshell)
            .copied()
            .unwrap_or_default();
        let is_last = subshell + 1 == self.subshells.len();
        for block in blocks {
            let Some(row) = block.terms.iter().position(|&place| place == term) else {
                continue;
            };
            let two_j2 = block.two_j;
            for two_j in ((two_j1 - two_j2).abs()..=two_j1 + two_j2).step_by(2) {
                if !total.reaches(two_j) || (is_last && two_j != self.two_j) {
                    continue;
                }
                // A step has √[(2S+1)(2L+1)(2J+1)] before the transposed 9j symbol.
                let nine = [
                    earlier.two_s,
                    2 * earlier.l,
                    two_j1,
                    part.two_s,
                    2 * part.l,
                    two_j2,
                    total.two_s,
                    2 * total.l,
                    two_j,
                ];
                let width = f64::from(two_j1 + 1) * f64::from(two_j2 + 1) / f64::from(two_j + 1);
                let coupling = self.symbols.step(nine) * width.sqrt();
                if coupling.abs() < ZERO {
                    continue;
                }
                for (&jj, &share) in block.states.iter().zip(block.table.row(row)) {
                    if share.abs() > ZERO {
                        let mut longer = so_far.clone();
                        longer.subshells.push(jj);
                        longer.running.push(two_j);
                        self.follow(&longer, overlap * coupling * share);
                    }
                }
            }
        }
    }
}

/// The states of one J in jK coupling; nothing where a configuration has not exactly one electron in
/// the last of its open subshells and another open one before it, unless it has full shells alone.
pub fn jk_scheme(basis: &Basis, rows: &Rows) -> Option<Scheme<JkCoupled>> {
    let mut outer = Vec::new();
    for occupations in basis.configurations() {
        let subshells = basis.subshells().iter().zip(occupations).enumerate();
        let open: Vec<(usize, u8, u32)> = subshells
            .filter(|&(_, (&l, &n))| (1..4 * u32::from(l) + 2).contains(&n))
            .map(|(place, (&l, &n))| (place, l, n))
            .collect();
        match open.as_slice() {
            &[_, .., (place, l, 1)] => outer.push(Some((place, i32::from(l)))),
            [] => outer.push(None),
            _ => return None,
        }
    }
    let mut symbols = Symbols::default();
    let mut collector = Collector::new();
    for (row, &place) in rows.states.iter().enumerate() {
        let state = basis.states().get(place)?;
        let Some((last, l)) = *outer.get(state.configuration)? else {
            let found = JkCoupled {
                configuration: state.configuration,
                terms: state.terms.clone(),
                running: state.running.clone(),
                two_j_core: 0,
                two_k: None,
            };
            collector.add(row, found, 1.0);
            continue;
        };
        let core = last
            .checked_sub(1)
            .and_then(|before| state.running.get(before));
        let core = core.copied().unwrap_or_default();
        let total = state.total();
        for two_j_core in (core.two_s - 2 * core.l).abs()..=core.two_s + 2 * core.l {
            if !core.reaches(two_j_core) {
                continue;
            }
            for two_k in [rows.two_j - 1, rows.two_j + 1] {
                let apart = (two_j_core - 2 * l).abs();
                if two_k < apart || two_k > two_j_core + 2 * l {
                    continue;
                }
                let overlap = jk_overlap(
                    &mut symbols,
                    core,
                    l,
                    total,
                    [two_j_core, two_k, rows.two_j],
                );
                let found = JkCoupled {
                    configuration: state.configuration,
                    terms: state.terms.iter().take(last).copied().collect(),
                    running: state.running.iter().take(last).copied().collect(),
                    two_j_core,
                    two_k: Some(two_k),
                };
                collector.add(row, found, overlap);
            }
        }
    }
    Some(collector.finish())
}

/// ⟨(S_c ½)S (L_c ℓ)L J|((S_c L_c)J_c ℓ)K ½ J⟩ =
/// (−1)^(½+L+S+K) √[(2S+1)(2K+1)] {½ S_c S; L J K} ·
/// (−1)^(S_c+L_c+ℓ+K) √[(2J_c+1)(2L+1)] {S_c L_c J_c; ℓ K L}.
fn jk_overlap(
    symbols: &mut Symbols,
    core: Coupled,
    l: i32,
    total: Coupled,
    [two_j_core, two_k, two_j]: [i32; 3],
) -> f64 {
    let (two_sc, two_lc, two_l) = (core.two_s, 2 * core.l, 2 * l);
    let (two_s, two_total) = (total.two_s, 2 * total.l);
    let first = symbols.six([1, two_sc, two_s, two_total, two_j, two_k]);
    let second = symbols.six([two_sc, two_lc, two_j_core, two_l, two_k, two_total]);
    let width = |two: i32| f64::from(two + 1);
    let root = (width(two_s) * width(two_k) * width(two_j_core) * width(two_total)).sqrt();
    let exponent = (1 + two_total + two_s + two_k) / 2 + (two_sc + two_lc + two_l + two_k) / 2;
    signed(exponent, root * first * second)
}
