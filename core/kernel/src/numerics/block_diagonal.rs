//! A symmetric matrix without what links different parts of its rows, diagonalised.

use super::lanes::{add, dot};
use super::order::sort_by;
use super::sparse::SparseSymmetric;
use super::symmetric::eigensystem;
use nalgebra::DMatrix;

/// The longest part that is diagonalised as a whole; longer ones are cut.
pub const LONGEST_PART: usize = 400;

/// Vectors of a start that reach all rows.
pub const BROAD: u32 = 4;

/// One part with the eigensystem of its own matrix.
#[derive(Clone, Debug)]
struct Part {
    first: usize,
    values: Vec<f64>,
    /// Its eigenvectors one after another.
    vectors: Vec<f64>,
}

/// The diagonal parts of a matrix.
#[derive(Clone, Debug)]
pub struct BlockDiagonal {
    size: usize,
    parts: Vec<Part>,
    /// All eigenvalues, rising, each with its part and its place there.
    order: Vec<(f64, usize, usize)>,
}

impl BlockDiagonal {
    /// Diagonalises the parts, consecutive rows of these lengths; rows beyond them make one more.
    /// Nothing when an eigensystem is not found.
    pub fn new(matrix: &SparseSymmetric, lengths: &[usize]) -> Option<Self> {
        let size = matrix.size();
        let mut parts = Vec::new();
        let mut first = 0;
        for &length in lengths.iter().chain([&size]) {
            let end = first + length.min(size - first);
            while first < end {
                let length = LONGEST_PART.min(end - first);
                let system = eigensystem(inner(matrix, first, length))?;
                parts.push(Part {
                    first,
                    values: system.values,
                    vectors: system.vectors.as_slice().to_vec(),
                });
                first += length;
            }
        }
        let mut order = Vec::with_capacity(size);
        for (place, part) in parts.iter().enumerate() {
            let values = part.values.iter().enumerate();
            order.extend(values.map(|(inside, &value)| (value, place, inside)));
        }
        sort_by(&mut order, |a, b| a.0.total_cmp(&b.0));
        Some(BlockDiagonal { size, parts, order })
    }

    /// The eigenvectors of the `count` lowest eigenvalues, and [`BROAD`] vectors that reach all rows,
    /// the low ones most, in a fixed pattern without symmetry.
    pub fn start(&self, count: usize) -> Vec<Vec<f64>> {
        let lowest = self.order.iter().take(count);
        let mut vectors: Vec<Vec<f64>> = lowest
            .map(|&(_, part, inside)| {
                let mut vector = vec![0.0; self.size];
                self.add_to(&mut vector, part, inside, 1.0);
                vector
            })
            .collect();
        let low = self.order.first().map_or(0.0, |known| known.0);
        let scale = self.order.get(count).map_or(1.0, |known| known.0 - low);
        for seed in 1..=BROAD {
            let mut vector = vec![0.0; self.size];
            let mut turn = 0.37 * f64::from(seed);
            for &(value, part, inside) in &self.order {
                // Multiples of the golden section, of which no two fractions are alike.
                turn = (turn + 0.618_033_988_749_894_9 * f64::from(seed)).fract();
                let weight = (turn - 0.5) / (1.0 + (value - low) / scale.max(f64::MIN_POSITIVE));
                self.add_to(&mut vector, part, inside, weight);
            }
            vectors.push(vector);
        }
        vectors
    }

    fn add_to(&self, vector: &mut [f64], part: usize, inside: usize, factor: f64) {
        let Some(part) = self.parts.get(part) else {
            return;
        };
        let length = part.values.len();
        let own = part.vectors.chunks_exact(length).nth(inside);
        let target = vector.get_mut(part.first..part.first + length);
        if let (Some(own), Some(target)) = (own, target) {
            add(target, factor, own);
        }
    }

    /// (M − θ)⁻¹ x, eigenvalues nearer to θ than `floor` being moved away to it.
    pub fn solve(&self, theta: f64, floor: f64, x: &[f64]) -> Vec<f64> {
        let mut result = vec![0.0; self.size];
        for part in &self.parts {
            let length = part.values.len();
            let range = part.first..part.first + length;
            let (Some(from), Some(target)) = (x.get(range.clone()), result.get_mut(range)) else {
                continue;
            };
            for (own, value) in part.vectors.chunks_exact(length).zip(&part.values) {
                let gap = value - theta;
                let gap = if gap.abs() < floor {
                    floor.copysign(gap)
                } else {
                    gap
                };
                add(target, dot(own, from) / gap, own);
            }
        }
        result
    }

    /// The highest less the lowest eigenvalue.
    pub fn spread(&self) -> f64 {
        let ends = self.order.first().zip(self.order.last());
        ends.map_or(0.0, |(low, high)| high.0 - low.0)
    }
}

/// The lower triangle of the rows and columns from `first` on.
fn inner(matrix: &SparseSymmetric, first: usize, length: usize) -> DMatrix<f64> {
    let mut own = DMatrix::zeros(length, length);
    let mut put = |row: usize, column: usize, value: f64| {
        if let Some(entry) = own.get_mut((row, column)) {
            *entry = value;
        }
    };
    for row in 0..length {
        let diagonal = matrix.diagonal().get(first + row);
        put(row, row, diagonal.copied().unwrap_or(0.0));
        let (columns, values) = matrix.row(first + row);
        for (&column, &value) in columns.iter().zip(values) {
            let inside = usize::try_from(column)
                .ok()
                .and_then(|c| c.checked_sub(first));
            if let Some(column) = inside {
                put(row, column, value);
            }
        }
    }
    own
}
