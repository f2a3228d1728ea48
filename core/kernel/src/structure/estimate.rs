//! How large a problem is, found from counts alone, before anything is built.

use super::basis::{Coupled, check, too_large};
use super::bounds::{MOST_COUNTED, MOST_ROWS};
use super::lowest;
use crate::angular::equivalent::classify;
use crate::numerics::sorted_map::SortedMap;
use crate::problem::Problem;

/// Sizes of a set of configurations of one parity.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Estimate {
    /// Π C(4ℓ+2, N) summed over configurations: states with their M.
    pub states: u64,
    /// LS-coupled states, not counting J and M.
    pub ls_states: u64,
    /// Levels: LS-coupled states counted once for each J.
    pub levels: u64,
    /// Rows of the matrix of each 2J, 2J rising.
    pub rows_by_two_j: Vec<(i32, u64)>,
    /// Rows of the largest matrix.
    pub largest: u64,
    /// Σ n² over the blocks of equal S and L: places of electrostatic coefficients.
    pub electrostatic_places: u64,
    /// Products that make the electrostatic coefficients, some nanoseconds each: those places times
    /// Σ 2(2ℓ_<+1)² over the pairs of open subshells, ranks of the tensors times integrals.
    pub products: u64,
    /// Bytes at most at one time: the largest matrix with its eigenvectors and what the eigensolver
    /// works with, three square matrices or what the search for the lowest levels takes, all
    /// eigenvectors kept, and the coefficients at 24 bytes with six integrals at each place.
    pub bytes: u64,
    /// Multiplications of all diagonalisations, 9 n³ each up to [`super::MOST_ROWS`] rows, and of the
    /// searches for the lowest levels beyond.
    pub multiplications: f64,
}

/// Levels kept of a J that is not diagonalised as a whole.
const LEVELS: u64 = lowest::LOWEST_LEVELS as u64;

/// How often each S L occurs.
type Counts = SortedMap<Coupled, u64>;

/// Sizes of these configurations (see [`super::Basis::new`]).
///
/// # Errors
/// Those of [`super::Basis::new`], for the size only above 10⁸ LS-coupled states.
pub fn estimate(subshells: &[u8], configurations: &[Vec<u32>]) -> Result<Estimate, Problem> {
    check(subshells, configurations)?;
    let mut totals = Counts::default();
    for occupations in configurations {
        let mut counts = Counts::default();
        add(&mut counts, Coupled::default(), 1);
        for (&l, &electrons) in subshells.iter().zip(occupations) {
            let mut shell = Counts::default();
            for term in classify(l, electrons)? {
                add(&mut shell, Coupled::of(&term), 1);
            }
            let mut coupled = Counts::default();
            for &(before, many) in counts.entries() {
                for &(part, times) in shell.entries() {
                    for after in before.couplings(part) {
                        add(&mut coupled, after, many.saturating_mul(times));
                    }
                }
            }
            counts = coupled;
            let so_far = counts.entries().iter();
            let so_far = so_far.fold(0_u64, |sum, (_, n)| sum.saturating_add(*n));
            if so_far > MOST_COUNTED {
                return Err(too_large(&format!(
                    "One configuration has more than {MOST_COUNTED} LS-coupled states."
                )));
            }
        }
        for &(total, many) in counts.entries() {
            add(&mut totals, total, many);
        }
    }
    let mut found = sizes(&totals);
    let each = configurations.iter().map(|c| products(subshells, c)).max();
    found.products = found.electrostatic_places.saturating_mul(each.unwrap_or(0));
    Ok(found)
}

/// Products for one pair of states of a configuration.
fn products(subshells: &[u8], occupations: &[u32]) -> u64 {
    let open: Vec<u64> = subshells
        .iter()
        .zip(occupations)
        .filter(|&(&l, &electrons)| (1..4 * u32::from(l) + 2).contains(&electrons))
        .map(|(&l, _)| u64::from(l))
        .collect();
    let pairs = open
        .iter()
        .enumerate()
        .flat_map(|(place, &one)| open.iter().skip(place + 1).map(move |&two| one.min(two)));
    // What every pair of states costs.
    let ground = 10;
    pairs.fold(ground, |sum, l| sum + 2 * (2 * l + 1) * (2 * l + 1))
}

fn add(counts: &mut Counts, key: Coupled, many: u64) {
    counts.change(key, |count| *count = count.saturating_add(many));
}

fn sizes(totals: &Counts) -> Estimate {
    let mut found = Estimate::default();
    let mut by_two_j: SortedMap<i32, u64> = SortedMap::default();
    for &(total, many) in totals.entries() {
        let degeneracy = u64::try_from((total.two_s + 1) * (2 * total.l + 1)).unwrap_or(0);
        found.states = found.states.saturating_add(degeneracy.saturating_mul(many));
        found.ls_states = found.ls_states.saturating_add(many);
        let square = many.saturating_mul(many);
        found.electrostatic_places = found.electrostatic_places.saturating_add(square);
        let lowest = (total.two_s - 2 * total.l).abs();
        for two_j in (lowest..=total.two_s + 2 * total.l).step_by(2) {
            by_two_j.change(two_j, |rows| *rows = rows.saturating_add(many));
        }
    }
    found.rows_by_two_j = by_two_j.into_entries();
    // Bytes of all levels, and at most for one matrix.
    let (mut kept, mut work) = (0_u64, 0_u64);
    for &(_, rows) in &found.rows_by_two_j {
        let square = rows.saturating_mul(rows);
        found.levels = found.levels.saturating_add(rows);
        found.largest = found.largest.max(rows);
        let (components, here) = if rows > MOST_ROWS {
            found.multiplications += lowest::multiplications(rows as f64);
            (rows.saturating_mul(LEVELS), lowest::bytes(rows))
        } else {
            found.multiplications += 9.0 * rows as f64 * square as f64;
            (square, square.saturating_mul(24))
        };
        kept = kept.saturating_add(components.saturating_mul(8));
        work = work.max(here);
    }
    let coefficients = found.electrostatic_places.saturating_mul(72);
    found.bytes = kept.saturating_add(work).saturating_add(coefficients);
    found
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn sizes_are_those_of_the_shell() {
        let found = estimate(&[3], &[vec![7]]).expect("f7");
        assert_eq!(
            (found.states, found.ls_states, found.levels),
            (3432, 119, 327)
        );
        assert_eq!(found.largest, 50);
    }

    #[test]
    fn sizes_beyond_all_bounds_are_told() {
        let found = estimate(&[3; 32], &[vec![7; 32]]);
        assert_eq!(found.expect_err("too large").code, "basis-too-large");
        let large = estimate(&[3, 2, 2], &[vec![7, 5, 5]]).expect("counted");
        assert_eq!(large.states, 3432 * 252 * 252);
    }
}
