//! LS-coupled states of several configurations of one parity.
//!
//! The subshells stand in one order for all configurations. A state is made by coupling their terms
//! one after another to S and L: (((a S_a L_a), b S_b L_b) S₁L₁, c S_c L_c) … SL. As a product of
//! creation operators it keeps that order too, which fixes all phases between configurations.

use super::bounds::{MOST_CONFIGURATIONS, MOST_L, MOST_LS_STATES, MOST_PRODUCTS, MOST_SUBSHELLS};
use super::estimate::{Estimate, estimate};
use crate::angular::equivalent::{EquivalentTerm, classify};
use crate::problem::Problem;
use std::sync::Arc;

/// S and L of a coupled part.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, PartialOrd, Ord)]
pub struct Coupled {
    /// 2S.
    pub two_s: i32,
    /// L.
    pub l: i32,
}

impl Coupled {
    /// Of one term.
    pub fn of(term: &EquivalentTerm) -> Self {
        Coupled {
            two_s: term.two_s,
            l: i32::try_from(term.l_total).unwrap_or(0),
        }
    }

    /// (2S+1)(2L+1).
    pub fn degeneracy(self) -> f64 {
        f64::from(self.two_s + 1) * f64::from(2 * self.l + 1)
    }

    /// Whether S and L can couple to J.
    pub fn reaches(self, two_j: i32) -> bool {
        let two_l = 2 * self.l;
        two_j >= (self.two_s - two_l).abs()
            && two_j <= self.two_s + two_l
            && (self.two_s + two_l - two_j) % 2 == 0
    }

    /// All that two parts can couple to: S falling, then L rising.
    pub fn couplings(self, other: Coupled) -> impl Iterator<Item = Coupled> {
        let lowest = (self.two_s - other.two_s).abs();
        let highest = self.two_s + other.two_s;
        let (l_low, l_high) = ((self.l - other.l).abs(), self.l + other.l);
        (lowest..=highest)
            .rev()
            .step_by(2)
            .flat_map(move |two_s| (l_low..=l_high).map(move |l| Coupled { two_s, l }))
    }
}

/// One LS-coupled state, without its J.
#[derive(Clone, Debug, PartialEq)]
pub struct State {
    /// Place of its configuration.
    pub configuration: usize,
    /// For each subshell the place of its term in [`Basis::terms`].
    pub terms: Vec<usize>,
    /// For each subshell S and L of that term.
    pub parts: Vec<Coupled>,
    /// For each subshell S and L of all subshells up to it; the last is the total.
    pub running: Vec<Coupled>,
}

impl State {
    /// Total S and L.
    pub fn total(&self) -> Coupled {
        self.running.last().copied().unwrap_or_default()
    }
}

/// All states of one S and L.
#[derive(Clone, Debug, PartialEq)]
pub struct Block {
    /// Its S and L.
    pub total: Coupled,
    /// Place of its first state.
    pub first: usize,
    /// How many states it has.
    pub len: usize,
}

/// The states, sorted by S falling, L rising, configuration, and within it by terms and couplings.
#[derive(Clone, Debug)]
pub struct Basis {
    subshells: Vec<u8>,
    configurations: Vec<Vec<u32>>,
    /// By configuration, then subshell.
    terms: Vec<Vec<Arc<[EquivalentTerm]>>>,
    states: Vec<State>,
    blocks: Vec<Block>,
}

impl Basis {
    /// The states of configurations that share a list of subshells.
    ///
    /// `subshells` holds ℓ of each, in the order of coupling; a configuration holds the number of
    /// electrons in each of them, zero and full included.
    ///
    /// # Errors
    /// `no-configuration`, `configurations-of-different-length`, `subshell-over-capacity`,
    /// `angular-momentum-too-large` for ℓ > 49, `electron-numbers-differ`, `parities-differ`, `configuration-twice`, `parentage-too-large`
    /// for ℓ > 3 with more than two electrons and more than one hole, and `basis-too-large`.
    pub fn new(subshells: &[u8], configurations: &[Vec<u32>]) -> Result<Basis, Problem> {
        check(subshells, configurations)?;
        let expected = estimate(subshells, configurations)?;
        within_bounds(&expected)?;
        let mut basis = Basis {
            subshells: subshells.to_vec(),
            configurations: configurations.to_vec(),
            terms: Vec::new(),
            states: Vec::new(),
            blocks: Vec::new(),
        };
        for (place, occupations) in configurations.iter().enumerate() {
            let mut terms = Vec::new();
            for (&l, &electrons) in subshells.iter().zip(occupations) {
                terms.push(Arc::from(classify(l, electrons)?));
            }
            let empty = State {
                configuration: place,
                terms: Vec::new(),
                parts: Vec::new(),
                running: Vec::new(),
            };
            couple_next(&terms, empty, &mut basis.states);
            basis.terms.push(terms);
        }
        // Stable: configurations and couplings stay in the order they were made in.
        crate::numerics::order::sort_by_key(&mut basis.states, |state| {
            let total = state.total();
            (-total.two_s, total.l)
        });
        let mut first = 0;
        for same in basis.states.chunk_by(|a, b| a.total() == b.total()) {
            basis.blocks.push(Block {
                total: same.first().map(State::total).unwrap_or_default(),
                first,
                len: same.len(),
            });
            first += same.len();
        }
        Ok(basis)
    }

    /// ℓ of each subshell.
    pub fn subshells(&self) -> &[u8] {
        &self.subshells
    }

    /// Electrons by configuration and subshell.
    pub fn configurations(&self) -> &[Vec<u32>] {
        &self.configurations
    }

    /// The electrons of one subshell in one configuration; zero where there is none.
    pub fn electrons(&self, configuration: usize, subshell: usize) -> u32 {
        self.configurations
            .get(configuration)
            .and_then(|occupations| occupations.get(subshell))
            .copied()
            .unwrap_or(0)
    }

    /// The terms of one subshell in one configuration.
    pub fn terms(&self, configuration: usize, subshell: usize) -> &[EquivalentTerm] {
        self.terms
            .get(configuration)
            .and_then(|terms| terms.get(subshell))
            .map_or(&[], |terms| terms.as_ref())
    }

    /// All states.
    pub fn states(&self) -> &[State] {
        &self.states
    }

    /// The blocks of equal S and L.
    pub fn blocks(&self) -> &[Block] {
        &self.blocks
    }

    /// The states of a block.
    pub fn block_states(&self, block: &Block) -> &[State] {
        self.states
            .get(block.first..block.first + block.len)
            .unwrap_or(&[])
    }

    /// Every 2J that occurs, rising.
    pub fn two_js(&self) -> Vec<i32> {
        let highest = self.blocks.iter().map(|b| b.total.two_s + 2 * b.total.l);
        (0..=highest.max().unwrap_or(0))
            .filter(|&two_j| self.blocks.iter().any(|b| b.total.reaches(two_j)))
            .collect()
    }

    /// Whether the configurations have odd parity.
    pub fn is_odd(&self) -> bool {
        let occupations = self.configurations.first();
        occupations.is_some_and(|occupations| is_odd(&self.subshells, occupations))
    }
}

/// Appends every coupling of the remaining subshells.
fn couple_next(terms: &[Arc<[EquivalentTerm]>], state: State, found: &mut Vec<State>) {
    let Some(next) = terms.get(state.terms.len()) else {
        found.push(state);
        return;
    };
    let before = state.total();
    for (place, term) in next.iter().enumerate() {
        for after in before.couplings(Coupled::of(term)) {
            let mut longer = state.clone();
            longer.terms.push(place);
            longer.parts.push(Coupled::of(term));
            longer.running.push(after);
            couple_next(terms, longer, found);
        }
    }
}

/// Whether Σ Nℓ is odd.
fn is_odd(subshells: &[u8], occupations: &[u32]) -> bool {
    let odd = subshells
        .iter()
        .zip(occupations)
        .filter(|&(&l, &electrons)| l % 2 == 1 && electrons % 2 == 1);
    odd.count() % 2 == 1
}

/// What the configurations must have in common.
pub(super) fn check(subshells: &[u8], configurations: &[Vec<u32>]) -> Result<(), Problem> {
    let fault = |code, message: String| Err(Problem::new(code, message, 0, 0));
    let Some(first) = configurations.first() else {
        return fault("no-configuration", "There is no configuration.".to_owned());
    };
    if subshells.len() > MOST_SUBSHELLS || configurations.len() > MOST_CONFIGURATIONS {
        return Err(too_large(&format!(
            "{} subshells and {} configurations are too many to be mixed.",
            subshells.len(),
            configurations.len()
        )));
    }
    let total = |occupations: &[u32]| occupations.iter().map(|&n| u64::from(n)).sum::<u64>();
    for (place, occupations) in configurations.iter().enumerate() {
        let number = place + 1;
        if occupations.len() != subshells.len() {
            return fault(
                "configurations-of-different-length",
                format!(
                    "Configuration {number} names {} subshells, but there are {}.",
                    occupations.len(),
                    subshells.len()
                ),
            );
        }
        for (&l, &electrons) in subshells.iter().zip(occupations) {
            within_capacity(l, electrons)?;
        }
        if total(occupations) != total(first) {
            return fault(
                "electron-numbers-differ",
                format!(
                    "Configuration {number} has {} electrons, the first has {}.",
                    total(occupations),
                    total(first)
                ),
            );
        }
        if is_odd(subshells, occupations) != is_odd(subshells, first) {
            return fault(
                "parities-differ",
                format!("Configuration {number} has the other parity than the first."),
            );
        }
        if configurations.iter().take(place).any(|c| c == occupations) {
            return fault(
                "configuration-twice",
                format!("Configuration {number} stands there twice."),
            );
        }
    }
    Ok(())
}

fn within_capacity(l: u8, electrons: u32) -> Result<(), Problem> {
    if l > MOST_L {
        return Err(Problem::new(
            "angular-momentum-too-large",
            format!("A subshell of ℓ = {l} is not computed."),
            0,
            0,
        )
        .bound(format!("ℓ up to {MOST_L}")));
    }
    let capacity = 4 * u32::from(l) + 2;
    if electrons > capacity {
        return Err(Problem::new(
            "subshell-over-capacity",
            format!("A subshell of ℓ = {l} cannot hold {electrons} electrons."),
            0,
            0,
        )
        .bound(format!("it holds at most {capacity}")));
    }
    if l > 3 && electrons > 2 && electrons + 1 < capacity {
        return Err(Problem::new(
            "parentage-too-large",
            format!("{electrons} electrons of ℓ = {l} are not computed."),
            0,
            0,
        )
        .bound("s, p, d and f subshells in full; others with at most two electrons or one hole"));
    }
    Ok(())
}

fn within_bounds(expected: &Estimate) -> Result<(), Problem> {
    if expected.ls_states > MOST_LS_STATES {
        return Err(too_large(&format!(
            "The configurations have {} LS-coupled states.",
            expected.ls_states
        )));
    }
    if expected.products > MOST_PRODUCTS {
        return Err(too_large(&format!(
            "The electrostatic coefficients take {} products.",
            expected.products
        )));
    }
    Ok(())
}

pub(super) fn too_large(message: &str) -> Problem {
    Problem::new("basis-too-large", message, 0, 0).bound(format!(
        "at most {MOST_SUBSHELLS} subshells, {MOST_CONFIGURATIONS} configurations, {MOST_LS_STATES} LS-coupled states and {MOST_PRODUCTS} products"
    ))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn couplings_count_all_states() {
        // 3d⁶4s4p and 3d⁷4p: C(10,6)·2·6 + C(10,7)·6 states.
        let basis = Basis::new(&[2, 0, 1], &[vec![6, 1, 1], vec![7, 0, 1]]).expect("Fe I");
        let states: f64 = basis.states().iter().map(|s| s.total().degeneracy()).sum();
        assert_eq!(states, 210.0 * 12.0 + 120.0 * 6.0);
        assert!(basis.is_odd());
        assert_eq!(basis.two_js().first(), Some(&0));
    }

    #[test]
    fn bad_configurations_are_faults() {
        let code = |l: &[u8], c: &[Vec<u32>]| Basis::new(l, c).expect_err("a fault").code;
        assert_eq!(code(&[0], &[]), "no-configuration");
        assert_eq!(
            code(&[0], &[vec![1, 1]]),
            "configurations-of-different-length"
        );
        assert_eq!(code(&[0], &[vec![3]]), "subshell-over-capacity");
        assert_eq!(code(&[4], &[vec![3]]), "parentage-too-large");
        assert_eq!(code(&[50], &[vec![1]]), "angular-momentum-too-large");
        assert_eq!(
            code(&[0, 1], &[vec![1, 1], vec![1, 2]]),
            "electron-numbers-differ"
        );
        assert_eq!(code(&[0, 1], &[vec![1, 1], vec![2, 0]]), "parities-differ");
        assert_eq!(
            code(&[0, 1], &[vec![1, 1], vec![1, 1]]),
            "configuration-twice"
        );
        assert_eq!(code(&[3, 3, 3, 3], &[vec![7, 7, 7, 7]]), "basis-too-large");
        assert_eq!(code(&[1; 100], &[vec![0; 100]]), "basis-too-large");
        assert_eq!(code(&[49, 49], &[vec![2, 1]]), "basis-too-large");
    }

    #[test]
    fn closed_and_empty_subshells_have_one_state() {
        let basis = Basis::new(&[4, 1, 0], &[vec![18, 0, 2]]).expect("closed");
        assert_eq!(basis.states().len(), 1);
        assert_eq!(basis.two_js(), [0]);
    }
}
