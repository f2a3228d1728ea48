//! The states of one subshell in jj coupling, in terms of its LS states of the same J.
//!
//! Σ ℓ·s has the eigenvalue N₊ ℓ/2 − N₋ (ℓ+1)/2 where N₋ and N₊ electrons have j = ℓ ∓ ½. Among equal
//! N₊ the squares of J₋ and J₊, the angular momenta of either kind, tell states apart. J± is the sum of
//! one-electron tensors Σ_κk c_κk w^(κk)1 with
//! c_κk = (2κ+1)(2k+1)(2j+1) √[j(j+1)(2j+1)/3] {½ ½ κ; ℓ ℓ k; j j 1}.
//!
//! Source: Edmonds, *Angular Momentum in Quantum Mechanics* (1957), eqs. 6.4.6 and 7.1.5.

use super::basis::Coupled;
use super::chain::Workshop;
use super::matrix::Table;
use super::shell_operators::{Product, Ranks};
use super::spin_orbit;
use super::symbols::Symbols;
use super::ties::untie;
use crate::angular::equivalent::classify;
use crate::angular::wigner_9j;
use crate::numerics::symmetric::{Eigensystem, eigensystem};
use crate::problem::Problem;
use nalgebra::DMatrix;
use std::rc::Rc;

/// One state of a subshell in jj coupling.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, PartialOrd, Ord)]
pub struct JjState {
    /// Electrons with j = ℓ − ½.
    pub lower: u32,
    /// Electrons with j = ℓ + ½.
    pub upper: u32,
    /// 2J of the former.
    pub two_j_lower: i32,
    /// 2J of the latter.
    pub two_j_upper: i32,
    /// 2J of all.
    pub two_j: i32,
    /// From 1; above it where another state has all the same labels.
    pub index: u32,
}

/// The states of one J.
#[derive(Clone, Debug)]
pub struct JjBlock {
    /// 2J.
    pub two_j: i32,
    /// Places of the LS terms that reach J.
    pub terms: Vec<usize>,
    /// The jj states.
    pub states: Vec<JjState>,
    /// ⟨LS term J|jj state⟩, a row for each term.
    pub table: Table,
}

/// The jj states of ℓ^N by rising J.
///
/// # Errors
/// Those of [`crate::angular::parentage::parents`]; `levels-not-found` where an iteration fails.
pub fn jj_states(workshop: &mut Workshop, l: u8, electrons: u32) -> Result<Vec<JjBlock>, Problem> {
    let terms: Vec<Coupled> = classify(l, electrons)?.iter().map(Coupled::of).collect();
    let highest = terms.iter().map(|term| term.two_s + 2 * term.l).max();
    let mut blocks = Vec::new();
    let operators = Operators::new(workshop, l, electrons)?;
    for two_j in (i32::from(electrons % 2 == 1)..=highest.unwrap_or(0)).step_by(2) {
        let places: Vec<usize> = (0..terms.len())
            .filter(|&place| terms.get(place).is_some_and(|term| term.reaches(two_j)))
            .collect();
        if !places.is_empty() {
            let shell = Shell {
                l,
                electrons,
                terms: &terms,
                operators: &operators,
            };
            blocks.push(shell.block(&mut workshop.symbols, two_j, places)?);
        }
    }
    Ok(blocks)
}

/// Reduced elements of [a†ã]^(κk) that are needed; nothing for a subshell without electrons.
struct Operators {
    spin_orbit: Option<Rc<Table>>,
    /// κ, k, table.
    vectors: Vec<(i32, i32, Rc<Table>)>,
}

impl Operators {
    fn new(workshop: &mut Workshop, l: u8, electrons: u32) -> Result<Self, Problem> {
        let mut operators = Operators {
            spin_orbit: None,
            vectors: Vec::new(),
        };
        if electrons == 0 {
            return Ok(operators);
        }
        for (kappa, k) in [(0, 1), (1, 0), (1, 1), (1, 2)] {
            let ranks = Ranks {
                spin: 2 * kappa,
                orbital: 2 * k,
            };
            let product = Product::Two(true, false, ranks);
            let symbols = &mut workshop.symbols;
            let table = workshop.operators.product(symbols, l, electrons, product)?;
            if (kappa, k) == (1, 1) {
                operators.spin_orbit = Some(Rc::clone(&table));
            }
            operators.vectors.push((kappa, k, table));
        }
        Ok(operators)
    }
}

/// 2J₋ and 2J₊ with the components in LS terms.
type Resolved = ((i32, i32), Vec<f64>);

struct Shell<'a> {
    l: u8,
    electrons: u32,
    terms: &'a [Coupled],
    operators: &'a Operators,
}

impl Shell<'_> {
    fn block(
        &self,
        symbols: &mut Symbols,
        two_j: i32,
        places: Vec<usize>,
    ) -> Result<JjBlock, Problem> {
        let size = places.len();
        let system = eigensystem(self.spin_orbit(symbols, two_j, &places)).ok_or_else(not_found)?;
        let squares = [-1, 1].map(|side| self.square(symbols, two_j, &places, side));
        let mut states = Vec::with_capacity(size);
        let mut columns: Vec<Vec<f64>> = Vec::with_capacity(size);
        let mut from = 0;
        while let Some(&first) = system.values.get(from) {
            let upper = self.upper(first);
            let alike = system.values.iter().skip(from);
            let count = alike
                .take_while(|&&value| self.upper(value) == upper)
                .count()
                .max(1);
            let found = self.resolve(&system, from..from + count, &squares)?;
            for (label, column) in found {
                let (two_j_lower, two_j_upper) = label;
                let lower = self.electrons.saturating_sub(upper);
                states.push(JjState {
                    lower,
                    upper,
                    two_j_lower,
                    two_j_upper,
                    two_j,
                    index: 1,
                });
                columns.push(column);
            }
            from += count;
        }
        let mut previous: Option<JjState> = None;
        for state in &mut states {
            if let Some(before) = previous
                && before
                    == (JjState {
                        index: before.index,
                        ..*state
                    })
            {
                state.index = before.index + 1;
            }
            previous = Some(*state);
        }
        let table = Table::from_fn(size, states.len(), |row, column| {
            let value = columns.get(column).and_then(|column| column.get(row));
            value.copied().unwrap_or(0.0)
        });
        Ok(JjBlock {
            two_j,
            terms: places,
            states,
            table,
        })
    }

    /// N₊ from an eigenvalue of Σ ℓ·s.
    fn upper(&self, value: f64) -> u32 {
        let l = f64::from(self.l);
        if self.l == 0 {
            return self.electrons;
        }
        let upper = (2.0 * value + f64::from(self.electrons) * (l + 1.0)) / (2.0 * l + 1.0);
        // Not negative, and far below 2³².
        (upper + 0.5).max(0.0) as u32
    }

    fn term(&self, place: Option<&usize>) -> Coupled {
        let term = place.and_then(|&place| self.terms.get(place));
        term.copied().unwrap_or_default()
    }

    /// Σ ℓ·s between the terms of one J.
    fn spin_orbit(&self, symbols: &mut Symbols, two_j: i32, places: &[usize]) -> DMatrix<f64> {
        let l = f64::from(self.l);
        let scale = -(1.5 * l * (l + 1.0) * (2.0 * l + 1.0)).sqrt() / 3.0;
        DMatrix::from_fn(places.len(), places.len(), |row, column| {
            let (bra, ket) = (places.get(row), places.get(column));
            let (Some(table), Some(&left), Some(&right)) = (&self.operators.spin_orbit, bra, ket)
            else {
                return 0.0;
            };
            let (bra, ket) = (self.term(bra), self.term(ket));
            scale * table.at(left, right) * spin_orbit::factor(symbols, bra, ket, two_j)
        })
    }

    /// J₋² (side −1) or J₊² (side 1) between the terms of one J:
    /// Σ ⟨γJ‖J±‖γ″J″⟩⟨γ′J‖J±‖γ″J″⟩/(2J+1).
    fn square(
        &self,
        symbols: &mut Symbols,
        two_j: i32,
        places: &[usize],
        side: i32,
    ) -> DMatrix<f64> {
        let (two_l, two_one) = (2 * i32::from(self.l), 2 * i32::from(self.l) + side);
        let width = f64::from(two_one + 1);
        // √[j(j+1)(2j+1)/3] (2j+1)
        let j = f64::from(two_one) / 2.0;
        let strength = (j * (j + 1.0) * width / 3.0).sqrt() * width;
        let factors: Vec<(i32, i32, &Table, f64)> = self
            .operators
            .vectors
            .iter()
            .map(|(kappa, k, table)| {
                let ranks = f64::from((2 * kappa + 1) * (2 * k + 1));
                let nine = wigner_9j(1, 1, 2 * kappa, two_l, two_l, 2 * k, two_one, two_one, 2);
                // The unit tensor is −[a†ã]/√[(2κ+1)(2k+1)].
                (*kappa, *k, table.as_ref(), -strength * ranks.sqrt() * nine)
            })
            .collect();
        let mut matrix = DMatrix::zeros(places.len(), places.len());
        for two_jm in [two_j - 2, two_j, two_j + 2] {
            for (middle, &between) in self.terms.iter().enumerate() {
                if two_jm < 0 || !between.reaches(two_jm) {
                    continue;
                }
                let reduced: Vec<f64> = places
                    .iter()
                    .map(|place| {
                        let bra = self.term(Some(place));
                        let parts = factors.iter().map(|&(kappa, k, table, factor)| {
                            let element = table.at(*place, middle);
                            if element == 0.0 {
                                return 0.0;
                            }
                            let spins = [bra.two_s, between.two_s, 2 * kappa];
                            let orbits = [2 * bra.l, 2 * between.l, 2 * k];
                            let ([a, b, c], [d, e, f]) = (spins, orbits);
                            factor * element * symbols.step([a, b, c, d, e, f, two_j, two_jm, 2])
                        });
                        parts.sum()
                    })
                    .collect();
                for (row, left) in reduced.iter().enumerate() {
                    for (column, right) in reduced.iter().enumerate() {
                        if let Some(entry) = matrix.get_mut((row, column)) {
                            *entry += left * right / f64::from(two_j + 1);
                        }
                    }
                }
            }
        }
        matrix
    }

    /// Vectors of equal N₊ with their 2J₋ and 2J₊.
    fn resolve(
        &self,
        system: &Eigensystem,
        range: std::ops::Range<usize>,
        [lower, upper]: &[DMatrix<f64>; 2],
    ) -> Result<Vec<Resolved>, Problem> {
        let vectors = system.vectors.columns(range.start, range.len());
        // No J±(J±+1) reaches the weight, so that both are read from one eigenvalue.
        let l = f64::from(self.l);
        let weight = 8.0 * (l + 1.0) * (l + 1.0);
        let whole = lower * weight + upper;
        let inner = vectors.transpose() * whole * vectors;
        let resolved = eigensystem(inner).ok_or_else(not_found)?;
        let turned = vectors * &resolved.vectors;
        let mut columns: Vec<Vec<f64>> = turned
            .column_iter()
            .map(|column| column.iter().copied().collect())
            .collect();
        // Rounding must not choose among what no label tells apart.
        let rounded: Vec<f64> = resolved
            .values
            .iter()
            .map(|v| libm::round(4.0 * v))
            .collect();
        untie(&rounded, &mut columns);
        let labels = rounded.iter().map(|value| {
            let value = value / 4.0;
            // J₋(J₋+1) is the largest square that fits.
            let two_lower = doubled((value / weight + 1e-6).max(0.0), true);
            let left = value - weight * f64::from(two_lower * (two_lower + 2)) / 4.0;
            (two_lower, doubled(left.max(0.0), false))
        });
        Ok(labels.zip(columns).collect())
    }
}

/// 2J of J(J+1), the nearest, or with `floor` the largest that is not above.
fn doubled(square: f64, floor: bool) -> i32 {
    let two_j = (4.0 * square + 1.0).sqrt() - 1.0;
    let rounded = if floor {
        two_j.floor()
    } else {
        libm::round(two_j)
    };
    rounded as i32
}

#[inline(never)]
fn not_found() -> Problem {
    Problem::new(
        "levels-not-found",
        "The jj states of a subshell could not be found.",
        0,
        0,
    )
}

#[cfg(test)]
mod tests {
    use super::*;
    use std::collections::BTreeMap;

    /// How often each J occurs for electrons of equal j, from their projections.
    fn equivalent(two_j: i32, electrons: u32) -> BTreeMap<i32, usize> {
        let ms: Vec<i32> = (-two_j..=two_j).step_by(2).collect();
        let mut counts: BTreeMap<i32, i64> = BTreeMap::new();
        for subset in 0..1_u32 << ms.len() {
            if subset.count_ones() == electrons {
                let chosen = ms
                    .iter()
                    .enumerate()
                    .filter(|(place, _)| subset >> place & 1 == 1);
                *counts.entry(chosen.map(|(_, m)| m).sum()).or_insert(0) += 1;
            }
        }
        let at = |m: i32| counts.get(&m).copied().unwrap_or(0);
        (0..=60)
            .map(|two_j| (two_j, (at(two_j) - at(two_j + 2)).max(0) as usize))
            .filter(|&(_, times)| times > 0)
            .collect()
    }

    #[test]
    fn states_are_those_of_the_two_kinds_coupled() {
        for (l, most) in [(0_u8, 2), (1, 6), (2, 10), (3, 14)] {
            for electrons in 0..=most {
                let mut workshop = Workshop::default();
                let mut found: Vec<JjState> = Vec::new();
                for block in jj_states(&mut workshop, l, electrons).expect("states") {
                    for row in 0..block.terms.len() {
                        let norm: f64 = block.table.row(row).iter().map(|c| c * c).sum();
                        assert!((norm - 1.0).abs() < 1e-11);
                    }
                    found.extend(block.states);
                }
                let mut expected = Vec::new();
                let two_l = 2 * i32::from(l);
                for lower in 0..=electrons.min(2 * u32::from(l)) {
                    let upper = electrons - lower;
                    if upper > 2 * u32::from(l) + 2 {
                        continue;
                    }
                    for (&two_j_lower, &one) in &equivalent((two_l - 1).max(0), lower) {
                        if l == 0 && lower > 0 {
                            continue;
                        }
                        for (&two_j_upper, &two) in &equivalent(two_l + 1, upper) {
                            let apart = (two_j_lower - two_j_upper).abs();
                            for two_j in (apart..=two_j_lower + two_j_upper).step_by(2) {
                                for index in (1..).take(one * two) {
                                    expected.push(JjState {
                                        lower,
                                        upper,
                                        two_j_lower,
                                        two_j_upper,
                                        two_j,
                                        index,
                                    });
                                }
                            }
                        }
                    }
                }
                found.sort_unstable();
                expected.sort_unstable();
                assert_eq!(found, expected, "{l} {electrons}");
            }
        }
    }
}
