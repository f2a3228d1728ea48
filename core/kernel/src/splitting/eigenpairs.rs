//! Eigenpairs of small symmetric matrices, of which a map in a field needs thousands.
//!
//! One row is its own answer; two are one exact rotation; up to [`JACOBI`] rows are turned by Jacobi's
//! cyclic method, whose small shifts keep their digits (Golub & Van Loan, *Matrix Computations*, §8.5);
//! more go to [`eigensystem`]. Every order of operations is fixed.

use crate::numerics::order::sort_by;
use crate::numerics::symmetric::eigensystem;
use nalgebra::DMatrix;

/// Rows up to which Jacobi's method is the faster one.
const JACOBI: usize = 9;

/// A rotation by less than this changes no digit, also not of the slope of a level that has none at first.
const NO_TURN: f64 = 1e-18;

/// An element smaller than this share of its diagonal is what rounding left between equal rows.
const NOTHING: f64 = 1e-22;

/// Sweeps of Jacobi's method; six are common.
const SWEEPS: usize = 40;

/// Eigenvalues in rising order with their normalised vectors.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Eigenpairs {
    /// λ₀ ≤ λ₁ ≤ … .
    pub values: Vec<f64>,
    /// Components of the first vector, then of the second …
    pub vectors: Vec<f64>,
}

impl Eigenpairs {
    /// The components of a vector.
    pub fn vector(&self, place: usize) -> &[f64] {
        let size = self.values.len();
        let start = place.saturating_mul(size);
        self.vectors.get(start..start + size).unwrap_or(&[])
    }
}

/// The eigenpairs of a matrix given by rows, which is used up. Nothing where it is not finite or no
/// iteration converges.
pub fn eigenpairs(size: usize, matrix: &mut [f64], found: &mut Eigenpairs) -> Option<()> {
    found.values.clear();
    found.vectors.clear();
    if matrix.len() != size * size || !matrix.iter().all(|entry| entry.is_finite()) {
        return None;
    }
    match *matrix {
        [] => {}
        [only] => {
            found.values.push(only);
            found.vectors.push(1.0);
        }
        [a, b, _, c] => two(a, b, c, found),
        _ if size <= JACOBI => jacobi(size, matrix, found)?,
        _ => {
            let system = eigensystem(DMatrix::from_column_slice(size, size, matrix))?;
            found.values.extend(system.values);
            found.vectors.extend_from_slice(system.vectors.as_slice());
        }
    }
    Some(())
}

/// (a b; b c), by the rotation that makes it diagonal.
fn two(a: f64, b: f64, c: f64, found: &mut Eigenpairs) {
    let t = tangent(a, b, c);
    let cosine = 1.0 / (1.0 + t * t).sqrt();
    let sine = t * cosine;
    let (low, high) = (a - t * b, c + t * b);
    if low <= high {
        found.values.extend([low, high]);
        found.vectors.extend([cosine, -sine, sine, cosine]);
    } else {
        found.values.extend([high, low]);
        found.vectors.extend([sine, cosine, cosine, -sine]);
    }
}

/// tan φ of the smaller rotation that makes (a b; b c) diagonal.
fn tangent(a: f64, b: f64, c: f64) -> f64 {
    if b == 0.0 {
        return 0.0;
    }
    let half = 0.5 * (c - a);
    let root = (half * half + b * b).sqrt();
    if half >= 0.0 {
        b / (half + root)
    } else {
        b / (half - root)
    }
}

fn jacobi(size: usize, matrix: &mut [f64], found: &mut Eigenpairs) -> Option<()> {
    // Rows of it become the vectors.
    let mut turned = vec![0.0; size * size];
    for entry in turned.iter_mut().step_by(size + 1) {
        *entry = 1.0;
    }
    let mut done = false;
    for _ in 0..SWEEPS {
        done = true;
        for p in 0..size {
            for q in p + 1..size {
                let at = |row: usize, column: usize, m: &[f64]| {
                    m.get(row * size + column).copied().unwrap_or(0.0)
                };
                let (a, b, c) = (at(p, p, matrix), at(p, q, matrix), at(q, q, matrix));
                let t = tangent(a, b, c);
                if t.abs() <= NO_TURN || b.abs() <= NOTHING * (a.abs() + c.abs()) {
                    continue;
                }
                done = false;
                let cosine = 1.0 / (1.0 + t * t).sqrt();
                let sine = t * cosine;
                turn_rows(size, matrix, (p, q), (cosine, sine));
                turn_rows(size, &mut turned, (p, q), (cosine, sine));
                for row in matrix.chunks_exact_mut(size) {
                    if let Ok([x, y]) = row.get_disjoint_mut([p, q]) {
                        (*x, *y) = (cosine * *x - sine * *y, sine * *x + cosine * *y);
                    }
                }
                let mut set = |row: usize, column: usize, value: f64| {
                    if let Some(entry) = matrix.get_mut(row * size + column) {
                        *entry = value;
                    }
                };
                set(p, p, a - t * b);
                set(q, q, c + t * b);
                set(p, q, 0.0);
                set(q, p, 0.0);
            }
        }
        if done {
            break;
        }
    }
    let mut order: Vec<(f64, usize)> = (matrix.iter().step_by(size + 1).copied())
        .zip(0..)
        .collect();
    sort_by(&mut order, |left, right| left.0.total_cmp(&right.0));
    for (value, place) in order {
        found.values.push(value);
        found
            .vectors
            .extend(turned.get(place * size..(place + 1) * size).unwrap_or(&[]));
    }
    done.then_some(())
}

/// Rows p and q of a matrix, turned.
fn turn_rows(size: usize, matrix: &mut [f64], (p, q): (usize, usize), (cosine, sine): (f64, f64)) {
    let (head, tail) = matrix.split_at_mut(q * size);
    let first = head.get_mut(p * size..(p + 1) * size);
    let second = tail.get_mut(..size);
    if let (Some(first), Some(second)) = (first, second) {
        for (x, y) in first.iter_mut().zip(second) {
            (*x, *y) = (cosine * *x - sine * *y, sine * *x + cosine * *y);
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Numbers without pattern in −1…1.
    fn noise(seed: usize) -> f64 {
        let mixed = (seed as u64)
            .wrapping_add(1)
            .wrapping_mul(0x9E37_79B9_7F4A_7C15);
        (mixed >> 11) as f64 / (1_u64 << 52) as f64 - 1.0
    }

    #[test]
    fn matrices_of_every_size_are_rebuilt() {
        for size in 0..=14 {
            for scale in [1.0, 1e-9, 1e12] {
                let entry = |i: usize, j: usize| {
                    let off = noise(97 * i.min(j) + 31 * i.max(j) + 7 * size);
                    if i == j { scale * off } else { off }
                };
                let matrix: Vec<f64> = (0..size * size)
                    .map(|k| entry(k / size, k % size))
                    .collect();
                let mut found = Eigenpairs::default();
                eigenpairs(size, &mut matrix.clone(), &mut found).expect("converges");
                assert!(found.values.is_sorted());
                for i in 0..size {
                    for j in 0..size {
                        let sum: f64 = (0..size)
                            .map(|k| found.values[k] * found.vector(k)[i] * found.vector(k)[j])
                            .sum();
                        let error = (sum - matrix[i * size + j]).abs();
                        assert!(error < 1e-14 * scale.max(1.0), "{size} {scale} {error:e}");
                        let own: f64 = found
                            .vector(i)
                            .iter()
                            .zip(found.vector(j))
                            .map(|(a, b)| a * b)
                            .sum();
                        assert!((own - f64::from(u8::from(i == j))).abs() < 1e-14);
                    }
                }
            }
        }
    }

    /// Second order: −b²/Δ to all digits, though it is 10⁻²⁰ of the matrix.
    #[test]
    fn a_small_shift_keeps_its_digits() {
        let mut found = Eigenpairs::default();
        eigenpairs(2, &mut [0.0, 1e-10, 1e-10, 1.0], &mut found).expect("converges");
        assert!(
            (found.values[0] + 1e-20).abs() < 1e-34,
            "{:e}",
            found.values[0]
        );
        let mut three = [0.0, 1e-10, 0.0, 1e-10, 1.0, 0.0, 0.0, 0.0, 2.0];
        eigenpairs(3, &mut three, &mut found).expect("converges");
        assert!(
            (found.values[0] + 1e-20).abs() < 1e-34,
            "{:e}",
            found.values[0]
        );
    }

    #[test]
    fn what_is_not_finite_is_refused() {
        let mut found = Eigenpairs::default();
        assert!(eigenpairs(2, &mut [f64::NAN, 0.0, 0.0, 1.0], &mut found).is_none());
        assert!(eigenpairs(2, &mut [1.0], &mut found).is_none());
    }
}
