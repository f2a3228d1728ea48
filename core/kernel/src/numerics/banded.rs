//! Symmetric banded matrices: products and factorisation L D Lᵀ.

/// A symmetric matrix with `width` stored entries a row: row i holds A_{i,i}, A_{i,i+1}, …,
/// A_{i,i+width−1}; what would lie past the last column is kept and never read.
#[derive(Clone, Debug, PartialEq)]
pub struct Banded {
    width: usize,
    entries: Vec<f64>,
}

impl Banded {
    /// The zero matrix with `rows` rows; a width of zero is taken as one.
    pub fn zero(rows: usize, width: usize) -> Self {
        let width = width.max(1);
        Banded {
            width,
            entries: vec![0.0; rows.saturating_mul(width)],
        }
    }

    /// Stored entries a row: the diagonal and those to the right of it.
    pub fn width(&self) -> usize {
        self.width
    }

    /// Number of rows.
    pub fn rows(&self) -> usize {
        self.entries.len() / self.width
    }

    /// The stored entries, row after row.
    pub fn entries(&self) -> &[f64] {
        &self.entries
    }

    /// The stored entries, to be changed.
    pub fn entries_mut(&mut self) -> &mut [f64] {
        &mut self.entries
    }

    /// The principal submatrix of the rows `start..end`, as far as there are any.
    #[must_use]
    pub fn part(&self, start: usize, end: usize) -> Self {
        let end = end.min(self.rows());
        let start = start.min(end);
        let entries = self.entries.get(start * self.width..end * self.width);
        Banded {
            width: self.width,
            entries: entries.unwrap_or_default().to_vec(),
        }
    }

    /// Adds `factor` times another matrix of the same shape.
    pub fn add(&mut self, factor: f64, other: &Banded) {
        for (entry, other) in self.entries.iter_mut().zip(&other.entries) {
            *entry += factor * other;
        }
    }

    /// y = A x.
    pub fn times(&self, x: &[f64]) -> Vec<f64> {
        let mut y = vec![0.0; x.len()];
        let mut rest_x = x;
        let mut rest_y = y.as_mut_slice();
        for row in self.entries.chunks_exact(self.width) {
            let (Some((&x_i, x_after)), Some((y_i, y_after))) =
                (rest_x.split_first(), rest_y.split_first_mut())
            else {
                break;
            };
            let Some((&diagonal, right)) = row.split_first() else {
                break;
            };
            let mut sum = diagonal * x_i;
            for ((entry, x_j), y_j) in right.iter().zip(x_after).zip(y_after.iter_mut()) {
                sum += entry * x_j;
                *y_j += entry * x_i;
            }
            *y_i += sum;
            rest_x = x_after;
            rest_y = y_after;
        }
        y
    }

    /// The factors L D Lᵀ.
    pub fn factorise(mut self) -> Factors {
        let mut negative = 0;
        let largest = self.entries.iter().fold(0.0_f64, |m, e| m.max(e.abs()));
        let smallest = (largest * f64::EPSILON * 1e-3).max(f64::MIN_POSITIVE);
        let width = self.width;
        let mut rest = self.entries.as_mut_slice();
        while let Some((pivot_row, below)) = rest.split_at_mut_checked(width) {
            if let Some((pivot, right)) = pivot_row.split_first_mut() {
                // A pivot of zero stands for one too small to be told from it.
                if pivot.abs() < smallest {
                    *pivot = smallest;
                }
                negative += usize::from(*pivot < 0.0);
                let inverse = 1.0 / *pivot;
                let mut sources: &[f64] = right;
                for (target, source) in below.chunks_exact_mut(width).zip(right.iter()) {
                    let factor = source * inverse;
                    for (entry, other) in target.iter_mut().zip(sources) {
                        *entry -= factor * other;
                    }
                    sources = sources.get(1..).unwrap_or_default();
                }
                for entry in right {
                    *entry *= inverse;
                }
                *pivot = inverse;
            }
            rest = below;
        }
        Factors {
            width,
            entries: self.entries,
            negative,
        }
    }
}

/// A = L D Lᵀ with unit lower L inside the band, without exchange of rows.
///
/// Meant for positive matrices and for A − λB between eigenvalues; a vanishing pivot is replaced by
/// a tiny one. Source: Golub and Van Loan, *Matrix Computations* (1996), 4.1 and 4.3.
#[derive(Clone, Debug)]
pub struct Factors {
    width: usize,
    entries: Vec<f64>,
    negative: usize,
}

impl Factors {
    /// How many eigenvalues are negative (Sylvester's law of inertia).
    pub fn negative(&self) -> usize {
        self.negative
    }

    /// Replaces b by the x of A x = b.
    pub fn solve(&self, b: &mut [f64]) {
        self.forward(b);
        for (x, row) in b.iter_mut().zip(self.entries.chunks_exact(self.width)) {
            *x *= row.first().copied().unwrap_or(0.0);
        }
        self.backward(b);
    }

    /// Replaces b by D^{−½} L⁻¹ b, for a positive A: its products are those of b with A⁻¹ between.
    pub fn solve_half(&self, b: &mut [f64]) {
        self.forward(b);
        self.scale_half(b);
    }

    /// Replaces y by L^{−ᵀ} D^{−½} y, the transpose of [`Factors::solve_half`].
    pub fn solve_other_half(&self, y: &mut [f64]) {
        self.scale_half(y);
        self.backward(y);
    }

    fn scale_half(&self, b: &mut [f64]) {
        for (x, row) in b.iter_mut().zip(self.entries.chunks_exact(self.width)) {
            *x *= row.first().map_or(0.0, |inverse| inverse.max(0.0).sqrt());
        }
    }

    fn forward(&self, b: &mut [f64]) {
        let mut rest = b;
        for row in self.entries.chunks_exact(self.width) {
            let Some((&mut first, after)) = rest.split_first_mut() else {
                break;
            };
            if let Some((_, factors)) = row.split_first() {
                for (x, factor) in after.iter_mut().zip(factors) {
                    *x -= factor * first;
                }
            }
            rest = after;
        }
    }

    fn backward(&self, b: &mut [f64]) {
        let rows = self.entries.len() / self.width;
        let mut start = rows.min(b.len());
        for row in self.entries.chunks_exact(self.width).rev() {
            start = start.saturating_sub(1);
            let Some((first, after)) = b.get_mut(start..).and_then(<[f64]>::split_first_mut) else {
                break;
            };
            if let Some((_, factors)) = row.split_first() {
                let sum: f64 = after
                    .iter()
                    .zip(factors)
                    .map(|(x, factor)| factor * x)
                    .sum();
                *first -= sum;
            }
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn example(rows: usize, width: usize, shift: f64) -> Banded {
        let mut matrix = Banded::zero(rows, width);
        for (i, entry) in matrix.entries_mut().iter_mut().enumerate() {
            let (row, place) = (i / width, i % width);
            *entry = if place == 0 {
                3.0 * width as f64 + row as f64 - shift
            } else {
                libm::cos((row * 7 + place * 3) as f64)
            };
        }
        matrix
    }

    fn full(matrix: &Banded) -> nalgebra::DMatrix<f64> {
        nalgebra::DMatrix::from_fn(matrix.rows(), matrix.rows(), |i, j| {
            let (low, high) = (i.min(j), i.max(j));
            if high - low < matrix.width() {
                matrix.entries()[low * matrix.width() + high - low]
            } else {
                0.0
            }
        })
    }

    #[test]
    fn products_and_solutions_agree_with_the_full_matrix() {
        for (rows, width) in [(1, 1), (5, 9), (30, 4), (40, 9)] {
            let matrix = example(rows, width, 0.0);
            let x: Vec<f64> = (0..rows).map(|i| libm::sin(i as f64 + 0.3)).collect();
            let product = matrix.times(&x);
            let expected = full(&matrix) * nalgebra::DVector::from_vec(x.clone());
            for (a, b) in product.iter().zip(expected.iter()) {
                assert!((a - b).abs() < 1e-12);
            }
            let mut solution = product;
            matrix.factorise().solve(&mut solution);
            for (a, b) in solution.iter().zip(&x) {
                assert!((a - b).abs() < 1e-12);
            }
        }
    }

    #[test]
    fn two_half_solutions_make_a_whole_one() {
        let factors = example(20, 5, 0.0).factorise();
        let b: Vec<f64> = (0..20).map(|i| libm::sin(f64::from(i))).collect();
        let (mut whole, mut halves) = (b.clone(), b);
        factors.solve(&mut whole);
        factors.solve_half(&mut halves);
        factors.solve_other_half(&mut halves);
        for (a, b) in whole.iter().zip(&halves) {
            assert!((a - b).abs() < 1e-14);
        }
    }

    #[test]
    fn negative_eigenvalues_are_counted() {
        for shift in [0.0, 20.0, 30.5, 41.0, 80.0] {
            let matrix = example(30, 5, shift);
            let values = full(&matrix).symmetric_eigenvalues();
            let expected = values.iter().filter(|&&value| value < 0.0).count();
            assert_eq!(matrix.factorise().negative(), expected);
        }
    }

    #[test]
    fn a_part_is_the_principal_submatrix() {
        let matrix = example(12, 4, 0.0);
        let part = matrix.part(3, 9);
        assert_eq!(part.rows(), 6);
        let whole = full(&matrix);
        assert!((full(&part) - whole.view((3, 3), (6, 6))).abs().max() == 0.0);
        assert_eq!(matrix.part(20, 5).rows(), 0);
    }

    #[test]
    fn a_singular_matrix_gives_large_numbers_and_no_panic() {
        let mut b = vec![1.0, 1.0];
        Banded::zero(2, 2).factorise().solve(&mut b);
        assert_eq!(b.len(), 2);
    }
}
