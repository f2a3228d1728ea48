//! A matrix near a large symmetric one that can be diagonalised: what the search for the lowest
//! eigenpairs starts from and is corrected by.
//!
//! The rows fall into parts that are linked strongly inside; each part is diagonalised by itself. Among
//! the lowest eigenvectors of all parts the whole matrix is kept and diagonalised once more; beyond
//! them only the eigenvalues of the parts are.

use super::lanes::{add, dot};
use super::order::sort_by;
use super::sparse::{SparseSymmetric, products};
use super::symmetric::eigensystem;
use nalgebra::DMatrix;

/// The longest part that is diagonalised as a whole; longer ones are cut.
const LONGEST_PART: usize = 400;

/// Vectors of a start that reach all rows.
const BROAD: u32 = 4;

/// Eigenvectors of a symmetric matrix one after another, with their eigenvalues.
#[derive(Clone, Debug, Default)]
struct Diagonalised {
    values: Vec<f64>,
    vectors: Vec<f64>,
}

impl Diagonalised {
    fn new(matrix: DMatrix<f64>) -> Option<Self> {
        let system = eigensystem(matrix)?;
        Some(Diagonalised {
            vectors: system.vectors.as_slice().to_vec(),
            values: system.values,
        })
    }

    fn pairs(&self) -> impl Iterator<Item = (f64, &[f64])> {
        let length = self.values.len().max(1);
        let vectors = self.vectors.chunks_exact(length);
        self.values.iter().copied().zip(vectors)
    }
}

/// One part of the rows.
#[derive(Clone, Debug)]
struct Part {
    first: usize,
    own: Diagonalised,
    /// The place of each of its eigenvectors among those of all parts, eigenvalues rising.
    ranks: Vec<usize>,
}

/// The matrix near the given one.
#[derive(Clone, Debug)]
pub struct Nearby {
    size: usize,
    parts: Vec<Part>,
    /// The eigenvalues of all parts, rising.
    values: Vec<f64>,
    /// The whole matrix among the first eigenvectors of all parts.
    low: Diagonalised,
}

impl Nearby {
    /// Diagonalises consecutive parts of these lengths, rows beyond them making one more, and the
    /// whole matrix among their `low` lowest eigenvectors. Nothing when an eigensystem is not found.
    pub fn new(matrix: &SparseSymmetric, lengths: &[usize], low: usize) -> Option<Self> {
        let size = matrix.size();
        let mut parts = Vec::new();
        let mut first = 0;
        for &length in lengths.iter().chain([&size]) {
            let end = first + length.min(size - first);
            while first < end {
                let length = LONGEST_PART.min(end - first);
                parts.push(Part {
                    first,
                    own: Diagonalised::new(inner(matrix, first, length))?,
                    ranks: vec![0; length],
                });
                first += length;
            }
        }
        let mut order = Vec::with_capacity(size);
        for (place, part) in parts.iter().enumerate() {
            let values = part.own.values.iter().enumerate();
            order.extend(values.map(|(inside, &value)| (value, place, inside)));
        }
        sort_by(&mut order, |a, b| a.0.total_cmp(&b.0));
        for (rank, &(_, part, inside)) in order.iter().enumerate() {
            let part = parts
                .get_mut(part)
                .and_then(|part| part.ranks.get_mut(inside));
            if let Some(known) = part {
                *known = rank;
            }
        }
        let mut found = Nearby {
            size,
            parts,
            values: order.iter().map(|known| known.0).collect(),
            low: Diagonalised::default(),
        };
        found.low = found.among_lowest(matrix, low.min(size))?;
        Some(found)
    }

    /// The matrix among the lowest eigenvectors of the parts.
    fn among_lowest(&self, matrix: &SparseSymmetric, low: usize) -> Option<Diagonalised> {
        let mut own = DMatrix::zeros(low, low);
        let ranks: Vec<usize> = (0..low).collect();
        // A few at a time, so that the images need little memory.
        for group in ranks.chunks(64) {
            let vectors: Vec<Vec<f64>> = (group.iter())
                .map(|&rank| {
                    let mut unit = vec![0.0; rank + 1];
                    if let Some(entry) = unit.last_mut() {
                        *entry = 1.0;
                    }
                    self.of_components(&unit)
                })
                .collect();
            for (&column, image) in group.iter().zip(products(matrix, &vectors)) {
                for (row, element) in self.components_of(&image).into_iter().take(low).enumerate() {
                    if let Some(entry) = own.get_mut((row, column)) {
                        *entry = element;
                    }
                }
            }
        }
        Diagonalised::new(own)
    }

    /// Components along the eigenvectors of all parts, eigenvalues rising.
    fn components_of(&self, x: &[f64]) -> Vec<f64> {
        let mut components = vec![0.0; self.size];
        for part in &self.parts {
            let rows = x.get(part.first..).unwrap_or(&[]);
            for ((_, vector), &rank) in part.own.pairs().zip(&part.ranks) {
                if let Some(component) = components.get_mut(rank) {
                    *component = dot(vector, rows.get(..vector.len()).unwrap_or(&[]));
                }
            }
        }
        components
    }

    /// The vector of these components; what is not given is zero.
    fn of_components(&self, components: &[f64]) -> Vec<f64> {
        let mut vector = vec![0.0; self.size];
        for part in &self.parts {
            let rows = vector.get_mut(part.first..).unwrap_or(&mut []);
            for ((_, own), &rank) in part.own.pairs().zip(&part.ranks) {
                match components.get(rank) {
                    Some(&component) if component != 0.0 => add(rows, component, own),
                    _ => {}
                }
            }
        }
        vector
    }

    /// The `count` lowest eigenvectors, and some that reach all rows, the low ones most, in a fixed
    /// pattern without symmetry.
    pub fn start(&self, count: usize) -> Vec<Vec<f64>> {
        let lowest = self.low.pairs().take(count);
        let mut vectors: Vec<Vec<f64>> = lowest.map(|(_, own)| self.of_components(own)).collect();
        let bottom = self.values.first().copied().unwrap_or(0.0);
        let scale = self.values.get(count).map_or(1.0, |value| value - bottom);
        for seed in 1..=BROAD {
            let mut turn = 0.37 * f64::from(seed);
            let components: Vec<f64> = (self.values.iter())
                .map(|value| {
                    // Multiples of the golden section, of which no two fractions are alike.
                    turn = (turn + 0.618_033_988_749_894_9 * f64::from(seed)).fract();
                    (turn - 0.5) / (1.0 + (value - bottom) / scale.max(f64::MIN_POSITIVE))
                })
                .collect();
            vectors.push(self.of_components(&components));
        }
        vectors
    }

    /// (M − θ)⁻¹ x, eigenvalues nearer to θ than `floor` being moved away to it.
    pub fn solve(&self, theta: f64, floor: f64, x: &[f64]) -> Vec<f64> {
        let distance = |value: f64| {
            let gap = value - theta;
            if gap.abs() < floor {
                floor.copysign(gap)
            } else {
                gap
            }
        };
        let mut components = self.components_of(x);
        let low = self.low.values.len();
        let among: Vec<f64> = components.iter().take(low).copied().collect();
        for (component, &value) in components.iter_mut().zip(&self.values) {
            *component /= distance(value);
        }
        let result = components.get_mut(..low).unwrap_or(&mut []);
        result.fill(0.0);
        for (value, own) in self.low.pairs() {
            add(result, dot(own, &among) / distance(value), own);
        }
        self.of_components(&components)
    }

    /// The highest less the lowest eigenvalue of the parts.
    pub fn spread(&self) -> f64 {
        let ends = self.values.first().zip(self.values.last());
        ends.map_or(0.0, |(low, high)| high - low)
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
            let inside = usize::try_from(column).ok();
            if let Some(column) = inside.and_then(|column| column.checked_sub(first)) {
                put(row, column, value);
            }
        }
    }
    own
}
