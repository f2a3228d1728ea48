//! The lowest levels of a J whose matrix is too large to be diagonalised as a whole.

use super::hamiltonian::{Hamiltonian, Rows};
use super::levels::Level;
use super::ties::untie;
use crate::numerics::lowest::{Failure, Lowest, Wanted, lowest};
use crate::numerics::sparse::SparseSymmetric;
use crate::problem::Problem;
use crate::quantity::TwiceJ;

/// Levels found of each J whose matrix has more than [`super::MOST_ROWS`] rows.
pub const LOWEST_LEVELS: usize = 50;

/// Multiplications for the lowest levels of a J, about: some thirty corrections for each level and its
/// guards, each taken off a space of 150 vectors, corrected by the nearby matrix and multiplied by a
/// twentieth of the matrix; and the matrices within that space. From runs with f and d electrons,
/// 400 to 3100 rows.
pub fn multiplications(rows: f64) -> f64 {
    1.1e10 + 1.7e6 * rows + 170.0 * rows * rows
}

/// Bytes at most at one time besides the levels: an eighth of the square of the rows for elements,
/// twice while they are sorted, and the vectors of the space with their images.
pub fn bytes(rows: u64) -> u64 {
    let elements = rows.saturating_mul(rows) / 8;
    let space = rows.saturating_mul(400 * 8);
    elements.saturating_mul(28).saturating_add(space)
}

/// Residual of a level as a part of the largest element of the diagonal. Its square over the distance
/// of levels is the error of an energy; itself over that distance the error of a component.
const RESIDUAL: f64 = 1e-12;

/// Turns after which a matrix is given up.
const TURNS: usize = 400;

/// The `count` lowest levels of one J, rising, by Davidson's method: the blocks of equal S and L, which
/// the electrostatic energy links strongly, are diagonalised first, and what links them corrects
/// their states.
///
/// Energies agree with those of the whole matrix to 1e-12 of the largest diagonal element, components
/// to that over the distance to the next level. That no level is missed is very likely, not proved.
/// `watch` hears the share that is done and ends the work by answering false.
///
/// # Errors
/// Those of [`Hamiltonian::sparse`]; `levels-not-found` when the iteration does not converge;
/// `stopped`.
pub fn lowest_of_j(
    hamiltonian: &Hamiltonian,
    rows: &Rows,
    values: &[f64],
    count: usize,
    watch: &mut dyn FnMut(f64) -> bool,
) -> Result<Vec<Level>, Problem> {
    let matrix = hamiltonian.sparse(rows, values)?;
    if matrix.size() == 0 {
        return Ok(Vec::new());
    }
    let blocks = hamiltonian.basis().blocks();
    let lengths: Vec<usize> = (rows.blocks.iter())
        .filter_map(|&(place, _)| blocks.get(place).map(|block| block.len))
        .collect();
    let wanted = Wanted {
        count,
        residual: RESIDUAL * largest(&matrix),
        turns: TURNS,
    };
    let found = lowest(&matrix, &lengths, wanted, watch);
    let Lowest {
        values,
        mut vectors,
        ..
    } = found.map_err(|failure| failed(failure, rows.two_j))?;
    untie(&values, &mut vectors);
    Ok(values
        .into_iter()
        .zip(vectors)
        .map(|(energy, vector)| Level {
            two_j: rows.two_j,
            energy,
            vector,
        })
        .collect())
}

/// The largest element of the diagonal by size.
fn largest(matrix: &SparseSymmetric) -> f64 {
    let sizes = matrix.diagonal().iter().map(|entry| entry.abs());
    sizes.fold(0.0, f64::max)
}

#[inline(never)]
fn failed(failure: Failure, two_j: i32) -> Problem {
    let j = TwiceJ::from_doubled(two_j);
    let (code, message) = match failure {
        Failure::Stopped => ("stopped", "The calculation was stopped.".to_owned()),
        Failure::NoMatrix => (
            "levels-not-found",
            format!("The matrix of J = {j} has elements that are not finite."),
        ),
        Failure::NotConverged(residual) => (
            "levels-not-found",
            format!(
                "The lowest levels of J = {j} did not converge: a residual of {residual:.1e} is left."
            ),
        ),
    };
    Problem::new(code, message, 0, 0)
}
