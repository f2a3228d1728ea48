//! Energies and eigenvectors in intermediate coupling, with their g and composition.

use super::basis::{Basis, Coupled};
use super::bounds::MOST_ROWS;
use super::hamiltonian::{Hamiltonian, Rows};
use super::lowest::{LOWEST_LEVELS, lowest_of_j};
use super::ties::{SAME, untie};
use crate::numerics::connected::connected;
use crate::numerics::order::{sort_by, sort_by_key};
use crate::numerics::symmetric::eigensystem;
use crate::problem::Problem;
use nalgebra::DMatrix;

/// One level.
#[derive(Clone, Debug, PartialEq)]
pub struct Level {
    /// 2J.
    pub two_j: i32,
    /// In the unit of the parameters, from the scale of the averages.
    pub energy: f64,
    /// Components in the LS basis, in the order of the rows of its J, normalised; the largest is
    /// positive.
    pub vector: Vec<f64>,
}

/// All levels by rising energy; equal ones by J, then by their largest component.
#[derive(Clone, Debug, PartialEq)]
pub struct Levels {
    /// The rows of each J that occurs, 2J rising.
    pub rows: Vec<Rows>,
    /// The levels.
    pub levels: Vec<Level>,
}

impl Levels {
    /// Diagonalises the matrix of every J; of one with more than [`super::MOST_ROWS`] rows the
    /// [`LOWEST_LEVELS`] lowest levels are found.
    ///
    /// # Errors
    /// Those of [`Hamiltonian::matrix`]; `levels-not-found` when an iteration does not converge.
    pub fn solve(hamiltonian: &Hamiltonian, values: &[f64]) -> Result<Levels, Problem> {
        Levels::solve_watched(hamiltonian, values, &mut |_| true)
    }

    /// The same; `watch` hears of the rows of each J that is done, often of none, and ends the work by
    /// answering false.
    ///
    /// # Errors
    /// Those of [`Levels::solve`]; `stopped`.
    pub fn solve_watched(
        hamiltonian: &Hamiltonian,
        values: &[f64],
        watch: &mut dyn FnMut(usize) -> bool,
    ) -> Result<Levels, Problem> {
        Levels::solve_up_to(hamiltonian, values, MOST_ROWS, watch)
    }

    /// The same with another number of rows up to which all levels of a J are found.
    fn solve_up_to(
        hamiltonian: &Hamiltonian,
        values: &[f64],
        most: u64,
        watch: &mut dyn FnMut(usize) -> bool,
    ) -> Result<Levels, Problem> {
        let mut rows = Vec::new();
        let mut levels = Vec::new();
        for two_j in hamiltonian.basis().two_js() {
            let of_j = hamiltonian.rows(two_j);
            if u64::try_from(of_j.states.len()).unwrap_or(u64::MAX) > most {
                let found =
                    lowest_of_j(hamiltonian, &of_j, values, LOWEST_LEVELS, &mut |_| watch(0));
                levels.extend(found?);
            } else {
                levels.extend(solve_j(hamiltonian, &of_j, values)?);
            }
            if !watch(of_j.states.len()) {
                return Err(stopped());
            }
            rows.push(of_j);
        }
        in_order(&mut levels);
        Ok(Levels { rows, levels })
    }

    /// Whether all levels of a J are there, and not only the lowest.
    pub fn is_complete(&self, two_j: i32) -> bool {
        let found = self.levels.iter().filter(|level| level.two_j == two_j);
        let rows = self.rows.iter().filter(|rows| rows.two_j == two_j);
        found.count() == rows.map(|rows| rows.states.len()).sum::<usize>()
    }

    /// The rows that a level's components belong to.
    pub fn rows_of(&self, level: &Level) -> Option<&Rows> {
        let place = self.rows.binary_search_by_key(&level.two_j, |r| r.two_j);
        place.ok().and_then(|place| self.rows.get(place))
    }

    /// g_J = Σ |c|² g(SLJ): L + g_s S has no elements between different S L of one J. Nothing for
    /// J = 0.
    pub fn g(&self, basis: &Basis, level: &Level, g_s: f64) -> Option<f64> {
        if level.two_j == 0 {
            return None;
        }
        let rows = self.rows_of(level)?;
        let mut sum = 0.0;
        for (&place, &component) in rows.states.iter().zip(&level.vector) {
            let total = basis.states().get(place)?.total();
            sum += component * component * lande(total, level.two_j, g_s);
        }
        Some(sum)
    }

    /// The places of the states in [`Basis::states`] with their shares in percent, largest first;
    /// equal ones in the order of the basis, those that are exactly zero left out.
    pub fn composition(&self, level: &Level) -> Vec<(usize, f64)> {
        let Some(rows) = self.rows_of(level) else {
            return Vec::new();
        };
        let mut shares: Vec<(usize, f64)> = rows
            .states
            .iter()
            .zip(&level.vector)
            .filter(|&(_, &component)| component != 0.0)
            .map(|(&place, &component)| (place, 100.0 * component * component))
            .collect();
        sort_by(&mut shares, |a, b| b.1.total_cmp(&a.1));
        shares
    }
}

/// g(SLJ) = 1 + (g_s − 1) [J(J+1) + S(S+1) − L(L+1)] / [2J(J+1)] for J > 0.
///
/// Source: Landé, Z. Phys. 15, 189 (1923), with g_L = 1.
pub fn lande(total: Coupled, two_j: i32, g_s: f64) -> f64 {
    let square = |two: i32| f64::from(two) * f64::from(two + 2);
    let (j, s, l) = (square(two_j), square(total.two_s), square(2 * total.l));
    1.0 + (g_s - 1.0) * (j + s - l) / (2.0 * j)
}

/// The levels of one J by rising energy.
///
/// # Errors
/// Those of [`Levels::solve`].
pub fn solve_j(
    hamiltonian: &Hamiltonian,
    rows: &Rows,
    values: &[f64],
) -> Result<Vec<Level>, Problem> {
    let matrix = hamiltonian.matrix(rows, values)?;
    let size = rows.states.len();
    let mut levels = Vec::with_capacity(size);
    // What is not mixed stays pure, however close.
    let linked = |row: usize, other: usize| {
        let at = (row.max(other), row.min(other));
        matrix.get(at).is_some_and(|&entry| entry != 0.0)
    };
    for part in connected(size, linked) {
        let inner = DMatrix::from_fn(part.len(), part.len(), |row, column| {
            match (part.get(row), part.get(column)) {
                (Some(&row), Some(&column)) if column <= row => {
                    matrix.get((row, column)).copied().unwrap_or(0.0)
                }
                _ => 0.0,
            }
        });
        let system = eigensystem(inner).ok_or_else(not_found)?;
        let mut vectors: Vec<Vec<f64>> = system
            .vectors
            .column_iter()
            .map(|column| column.iter().copied().collect())
            .collect();
        untie(&system.values, &mut vectors);
        for (&energy, short) in system.values.iter().zip(vectors) {
            let mut vector = vec![0.0; size];
            for (&row, value) in part.iter().zip(short) {
                if let Some(component) = vector.get_mut(row) {
                    *component = value;
                }
            }
            levels.push(Level {
                two_j: rows.two_j,
                energy,
                vector,
            });
        }
    }
    sort_by(&mut levels, |a, b| a.energy.total_cmp(&b.energy));
    Ok(levels)
}

/// By energy, and what cannot be told apart by J and largest component.
fn in_order(levels: &mut Vec<Level>) {
    sort_by(levels, |a, b| a.energy.total_cmp(&b.energy));
    let scale = levels
        .iter()
        .fold(0.0_f64, |most, level| most.max(level.energy.abs()));
    // The number of each run of equal energies, then a stable sort by it.
    let mut run = 0_usize;
    let mut last = f64::NEG_INFINITY;
    let mut keyed: Vec<(usize, i32, usize, Level)> = Vec::with_capacity(levels.len());
    for level in levels.drain(..) {
        if level.energy - last > SAME * scale {
            run += 1;
        }
        last = level.energy;
        let largest = super::ties::largest(&level.vector);
        keyed.push((run, level.two_j, largest, level));
    }
    sort_by_key(&mut keyed, |&(run, two_j, largest, _)| {
        (run, two_j, largest)
    });
    levels.extend(keyed.into_iter().map(|keyed| keyed.3));
}

/// What a refusal of progress becomes.
#[inline(never)]
pub(super) fn stopped() -> Problem {
    Problem::new("stopped", "The run was stopped.", 0, 0)
}

#[inline(never)]
fn not_found() -> Problem {
    Problem::new(
        "levels-not-found",
        "The matrix of the energies could not be diagonalised.",
        0,
        0,
    )
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn large_matrices_give_their_lowest_levels() {
        // f³ d: some J have more rows than 55.
        let basis = Basis::new(&[3, 2], &[vec![3, 1]]).expect("a basis");
        let own = Hamiltonian::new(basis).expect("coefficients");
        let values: Vec<f64> = (0..own.parameters().len())
            .map(|place| 9000.0 / (1 + place) as f64)
            .collect();
        let all = Levels::solve(&own, &values).expect("levels");
        let mut calls = 0;
        let some = Levels::solve_up_to(&own, &values, 55, &mut |_| {
            calls += 1;
            true
        });
        let some = some.expect("levels");
        assert_eq!(some.rows, all.rows);
        assert!(calls > some.rows.len());
        for rows in &all.rows {
            let of_j = |levels: &Levels| -> Vec<f64> {
                let own = levels.levels.iter().filter(|l| l.two_j == rows.two_j);
                own.map(|level| level.energy).collect()
            };
            let (known, found) = (of_j(&all), of_j(&some));
            let large = rows.states.len() > 55;
            assert_eq!(some.is_complete(rows.two_j), !large);
            assert!(all.is_complete(rows.two_j));
            let expected = if large { LOWEST_LEVELS } else { known.len() };
            assert_eq!(found.len(), expected);
            for (one, other) in found.iter().zip(known) {
                assert!((one - other).abs() < 1e-7, "{one} {other}");
            }
        }
        let stopped = Levels::solve_up_to(&own, &values, 55, &mut |_| false);
        assert_eq!(stopped.expect_err("stopped").code, "stopped");
    }
}
