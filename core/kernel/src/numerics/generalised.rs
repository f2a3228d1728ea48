//! Eigenpairs of A x = λ B x with A full, B banded: functions expanded in splines.

use super::banded::{Banded, Factors};
use super::symmetric::{Eigensystem, eigensystem};
use nalgebra::DMatrix;

/// A banded matrix with all its zeros.
pub fn full(banded: &Banded) -> DMatrix<f64> {
    let size = banded.rows();
    let mut matrix = DMatrix::zeros(size, size);
    for (i, row) in banded.entries().chunks_exact(banded.width()).enumerate() {
        for (j, entry) in (i..size).zip(row) {
            for place in [(i, j), (j, i)] {
                if let Some(to) = matrix.get_mut(place) {
                    *to = *entry;
                }
            }
        }
    }
    matrix
}

/// Adds σ d dᵀ, which moves the x with B x = d, xᵀ B x = 1 up by σ and leaves what is orthogonal to it.
pub fn lift(matrix: &mut DMatrix<f64>, strength: f64, dual: &[f64]) {
    for (mut column, d) in matrix.column_iter_mut().zip(dual) {
        for (entry, e) in column.iter_mut().zip(dual) {
            *entry += strength * d * e;
        }
    }
}

/// All eigenpairs of A x = λ B x in rising order, xᵀ B x = 1, from the factors B = L D Lᵀ.
///
/// With x = L^{−ᵀ} D^{−½} y it is the ordinary problem of D^{−½} L^{−1} A L^{−ᵀ} D^{−½}. Nothing where
/// that has no eigensystem.
///
/// Source: Golub and Van Loan, *Matrix Computations* (1996), 8.7.2.
pub fn generalised_eigensystem(mut matrix: DMatrix<f64>, factors: &Factors) -> Option<Eigensystem> {
    for _ in 0..2 {
        for mut column in matrix.column_iter_mut() {
            factors.solve_half(column.as_mut_slice());
        }
        matrix.transpose_mut();
    }
    let mut system = eigensystem(matrix)?;
    for mut column in system.vectors.column_iter_mut() {
        factors.solve_other_half(column.as_mut_slice());
    }
    Some(system)
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Both matrices tridiagonal: 2 on A's diagonal, −1 beside it; 4 on B's, 1 beside it.
    fn pair(size: usize) -> (Banded, Banded) {
        let banded = |diagonal: f64, beside: f64| {
            let mut matrix = Banded::zero(size, 2);
            for row in matrix.entries_mut().chunks_exact_mut(2) {
                row.copy_from_slice(&[diagonal, beside]);
            }
            if let Some(last) = matrix.entries_mut().last_mut() {
                *last = 0.0;
            }
            matrix
        };
        (banded(2.0, -1.0), banded(4.0, 1.0))
    }

    #[test]
    fn a_string_of_linear_elements_has_its_known_frequencies() {
        let size = 12;
        let (a, b) = pair(size);
        let metric = full(&b);
        let system = generalised_eigensystem(full(&a), &b.factorise()).expect("converges");
        for (place, value) in system.values.iter().enumerate() {
            // Both are diagonal in sin(iθ), θ = kπ/(size+1): λ = (2 − 2 cos θ)/(4 + 2 cos θ).
            let theta = (place + 1) as f64 * std::f64::consts::PI / (size + 1) as f64;
            let cosine = libm::cos(theta);
            let exact = (2.0 - 2.0 * cosine) / (4.0 + 2.0 * cosine);
            assert!((value - exact).abs() < 1e-14, "{value} {exact}");
        }
        let products = system.vectors.transpose() * metric * &system.vectors;
        assert!((products - DMatrix::identity(size, size)).abs().max() < 1e-13);
    }

    #[test]
    fn what_is_lifted_moves_alone() {
        let (a, b) = pair(8);
        let (metric, factors) = (full(&b), b.factorise());
        let before = generalised_eigensystem(full(&a), &factors).expect("converges");
        let dual = &metric * before.vectors.column(0);
        let mut matrix = full(&a);
        lift(&mut matrix, 100.0, dual.as_slice());
        let after = generalised_eigensystem(matrix, &factors).expect("converges");
        for (value, expected) in after.values.iter().zip(before.values.iter().skip(1)) {
            assert!((value - expected).abs() < 1e-12);
        }
        assert!((after.values[7] - before.values[0] - 100.0).abs() < 1e-11);
    }
}
