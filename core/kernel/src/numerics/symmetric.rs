//! Eigenvalues and eigenvectors of real symmetric matrices, rising and with fixed signs.

use super::order::sort_by;
use nalgebra::{DMatrix, SymmetricEigen};

/// Eigenvalues in rising order, each with its normalised eigenvector.
pub struct Eigensystem {
    /// λ₀ ≤ λ₁ ≤ … .
    pub values: Vec<f64>,
    /// Column i belongs to `values[i]`.
    pub vectors: DMatrix<f64>,
}

/// The eigensystem of a symmetric matrix, only whose lower triangle is read.
///
/// Householder reduction and implicit QR of the library `nalgebra`, in a fixed order of operations,
/// so the result has the same bits on every machine. Nothing when the matrix is not square, holds
/// something not finite, or the iteration does not converge within 100 sweeps for each row.
pub fn eigensystem(matrix: DMatrix<f64>) -> Option<Eigensystem> {
    if !matrix.is_square() || !matrix.iter().all(|entry| entry.is_finite()) {
        return None;
    }
    if matrix.is_empty() {
        return Some(Eigensystem {
            values: Vec::new(),
            vectors: matrix,
        });
    }
    let sweeps = matrix.nrows().saturating_mul(100).max(1);
    let system = SymmetricEigen::try_new(matrix, f64::EPSILON, sweeps)?;
    let mut order: Vec<(f64, usize)> = system.eigenvalues.iter().copied().zip(0..).collect();
    sort_by(&mut order, |left, right| left.0.total_cmp(&right.0));
    // A column is one piece of memory: copied as such, not element by element.
    let (size, found) = (order.len(), system.eigenvectors.as_slice());
    let mut vectors = Vec::with_capacity(found.len());
    for &(_, place) in &order {
        vectors.extend_from_slice(found.get(place * size..(place + 1) * size)?);
    }
    Some(Eigensystem {
        values: order.into_iter().map(|(value, _)| value).collect(),
        vectors: DMatrix::from_vec(size, size, vectors),
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_matrix_is_rebuilt_from_its_eigensystem() {
        let matrix = DMatrix::from_fn(6, 6, |i, j| 1.0 / (1.0 + (i + j) as f64));
        let system = eigensystem(matrix.clone()).expect("converges");
        assert!(system.values.windows(2).all(|pair| pair[0] <= pair[1]));
        let diagonal = DMatrix::from_diagonal(&nalgebra::DVector::from_vec(system.values));
        let rebuilt = &system.vectors * diagonal * system.vectors.transpose();
        assert!((rebuilt - matrix).abs().max() < 1e-14);
    }

    #[test]
    fn what_has_no_eigensystem_is_refused() {
        assert!(eigensystem(DMatrix::zeros(2, 3)).is_none());
        assert!(eigensystem(DMatrix::from_element(2, 2, f64::NAN)).is_none());
        assert!(eigensystem(DMatrix::zeros(0, 0)).is_some());
    }
}
