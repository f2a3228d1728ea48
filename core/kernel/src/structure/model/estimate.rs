//! What a case takes, found before anything is built.

use super::case::Case;
use crate::problem::Problem;
use crate::structure::{MOST_ROWS, multiplications};

/// Sizes and costs; seconds are those of a browser on a machine of 2020 or so. Levels of twelve cases from
/// C I to Eu III 4f⁷ + 4f⁶5d, correlation in them, took 0.8 to 1.5 times as long in the full build, and up to 6
/// times where parentage and compiled code were not there yet.
#[derive(Clone, Debug, PartialEq)]
pub struct Estimate {
    /// Whole time.
    pub seconds: f64,
    /// Of which for radial functions.
    pub field_seconds: f64,
    /// Of which for correlation within subshells.
    pub correlation_seconds: f64,
    /// Bytes at most at one time.
    pub bytes: u64,
    /// States with their M.
    pub states: u64,
    /// Levels.
    pub levels: u64,
    /// Blocks of one parity and J: whether it is odd, 2J, rows.
    pub blocks: Vec<(bool, i32, u64)>,
}

/// Seconds for the coefficients of one parity.
pub(super) fn coefficient_seconds(sizes: &crate::structure::Estimate) -> f64 {
    1.1e-8 * sizes.products as f64
}

/// Seconds to build and diagonalise a matrix, or to find its lowest levels.
pub(super) fn matrix_seconds(rows: f64) -> f64 {
    // The dense way streams through its matrix, the other one gathers.
    if rows > MOST_ROWS as f64 {
        multiplications(rows) / 6e8
    } else {
        5.0 * rows * rows * rows / 2e9
    }
}

/// Seconds for correlation within the subshells of a configuration that have it: more for larger ℓ.
pub(super) fn correlation_seconds(case: &Case, configuration: usize) -> f64 {
    let subshells = case.configurations.get(configuration);
    let moved = (subshells.into_iter().flatten())
        .filter(|s| case.correlates(configuration, s.orbital()) == Some(Ok(())));
    moved.fold(0.0, |sum, s| {
        sum + 0.001 + 4e-4 * f64::from(s.orbital().l())
    })
}

/// Sizes and costs of a case.
///
/// # Errors
/// `no-configuration`, `electron-numbers-differ`, and those of [`crate::structure::estimate()`].
pub fn estimate(case: &Case) -> Result<Estimate, Problem> {
    case.check()?;
    let orbitals = case.orbitals();
    let subshells: Vec<u8> = orbitals.iter().map(|orbital| orbital.l()).collect();
    let mut found = Estimate {
        seconds: 0.0,
        field_seconds: 0.0,
        correlation_seconds: 0.0,
        bytes: 0,
        states: 0,
        levels: 0,
        blocks: Vec::new(),
    };
    for place in 0..case.configurations.len() {
        if let Some(atom) = case.atom(place) {
            let shells = atom.subshells.len() as f64;
            found.field_seconds += 0.006 + 3e-4 * shells * shells;
        }
        found.correlation_seconds += correlation_seconds(case, place);
    }
    found.seconds = found.field_seconds + found.correlation_seconds;
    for odd in [false, true] {
        let configurations = case.of_parity(odd);
        if configurations.is_empty() {
            continue;
        }
        let occupations: Vec<Vec<u32>> = (configurations.iter())
            .map(|&place| case.occupations(place, &orbitals))
            .collect();
        let sizes = crate::structure::estimate(&subshells, &occupations)?;
        found.seconds += coefficient_seconds(&sizes);
        for &(two_j, rows) in &sizes.rows_by_two_j {
            found.seconds += matrix_seconds(rows as f64);
            found.blocks.push((odd, two_j, rows));
        }
        found.bytes = found.bytes.saturating_add(sizes.bytes);
        found.states = found.states.saturating_add(sizes.states);
        found.levels = found.levels.saturating_add(sizes.levels);
    }
    Ok(found)
}
