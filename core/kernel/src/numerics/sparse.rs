//! Symmetric matrices most of whose elements are zero.

use super::order::sort_by_key;

/// A symmetric matrix: its diagonal, and by rows what is not zero left of it.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct SparseSymmetric {
    diagonal: Vec<f64>,
    /// Where each row begins among the columns and values, and one past the last.
    starts: Vec<usize>,
    columns: Vec<u32>,
    values: Vec<f64>,
}

/// Vectors that are multiplied at once.
const BESIDE: usize = 8;

/// Collects the elements of a matrix.
#[derive(Clone, Debug, Default)]
pub struct Elements {
    diagonal: Vec<f64>,
    rows: Vec<Vec<(u32, f64)>>,
}

impl Elements {
    /// A matrix of zeros of this size, at most 2³² − 1.
    #[must_use]
    pub fn new(size: u32) -> Self {
        let size = usize::try_from(size).unwrap_or(0);
        Elements {
            diagonal: vec![0.0; size],
            rows: vec![Vec::new(); size],
        }
    }

    /// Adds to an element, which is named by its row and column in either order. What is outside the
    /// matrix is passed over.
    pub fn add(&mut self, row: usize, column: usize, value: f64) {
        let (row, column) = (row.max(column), row.min(column));
        if row == column {
            if let Some(entry) = self.diagonal.get_mut(row) {
                *entry += value;
            }
            return;
        }
        let (Some(entries), Ok(column)) = (self.rows.get_mut(row), u32::try_from(column)) else {
            return;
        };
        match entries.last_mut() {
            // Several contributions to one element mostly follow each other.
            Some(last) if last.0 == column => last.1 += value,
            _ => entries.push((column, value)),
        }
    }

    /// The matrix. Contributions to one element are added in the order they came in.
    #[must_use]
    pub fn finish(self) -> SparseSymmetric {
        let mut matrix = SparseSymmetric {
            diagonal: self.diagonal,
            starts: vec![0],
            columns: Vec::new(),
            values: Vec::new(),
        };
        for mut row in self.rows {
            let rising = row.iter().zip(row.iter().skip(1)).all(|(a, b)| a.0 < b.0);
            if !rising {
                sort_by_key(&mut row, |entry| entry.0);
            }
            let start = matrix.columns.len();
            for (column, value) in row {
                match (matrix.columns.get(start..), matrix.values.last_mut()) {
                    (Some([.., last]), Some(sum)) if *last == column => *sum += value,
                    _ => {
                        matrix.columns.push(column);
                        matrix.values.push(value);
                    }
                }
            }
            matrix.starts.push(matrix.columns.len());
        }
        matrix
    }
}

impl SparseSymmetric {
    /// Rows.
    #[must_use]
    pub fn size(&self) -> usize {
        self.diagonal.len()
    }

    /// Elements that are kept: the diagonal and what is left of it.
    #[must_use]
    pub fn kept(&self) -> usize {
        self.diagonal.len().saturating_add(self.values.len())
    }

    /// The diagonal.
    #[must_use]
    pub fn diagonal(&self) -> &[f64] {
        &self.diagonal
    }

    /// Columns, rising, and values of a row left of the diagonal.
    #[must_use]
    pub fn row(&self, row: usize) -> (&[u32], &[f64]) {
        let bounds = self.starts.get(row..row.saturating_add(2));
        let Some(&[start, end]) = bounds else {
            return (&[], &[]);
        };
        let columns = self.columns.get(start..end).unwrap_or(&[]);
        (columns, self.values.get(start..end).unwrap_or(&[]))
    }

    /// Whether every element is finite.
    #[must_use]
    pub fn is_finite(&self) -> bool {
        self.diagonal
            .iter()
            .chain(&self.values)
            .all(|value| value.is_finite())
    }

    /// A x for WIDTH vectors at once, element by element beside each other, so that each element of
    /// the matrix is fetched once; additions in the order of the rows.
    #[must_use]
    pub fn times<const WIDTH: usize>(&self, x: &[[f64; WIDTH]]) -> Vec<[f64; WIDTH]> {
        let mut product: Vec<[f64; WIDTH]> = vec![[0.0; WIDTH]; self.size()];
        for (row, (&diagonal, own)) in self.diagonal.iter().zip(x).enumerate() {
            let (columns, values) = self.row(row);
            let mut sum = own.map(|entry| diagonal * entry);
            for (&column, &value) in columns.iter().zip(values) {
                let Ok(column) = usize::try_from(column) else {
                    continue;
                };
                if let (Some(other), Some(target)) = (x.get(column), product.get_mut(column)) {
                    let beside = sum.iter_mut().zip(target).zip(other.iter().zip(own));
                    for ((sum, target), (other, own)) in beside {
                        *sum += value * other;
                        *target += value * own;
                    }
                }
            }
            if let Some(target) = product.get_mut(row) {
                for (target, sum) in target.iter_mut().zip(sum) {
                    *target += sum;
                }
            }
        }
        product
    }
}

/// The matrix times each vector, eight at a time.
pub fn products(matrix: &SparseSymmetric, vectors: &[Vec<f64>]) -> Vec<Vec<f64>> {
    let mut all = Vec::with_capacity(vectors.len());
    for group in vectors.chunks(BESIDE) {
        let mut beside = vec![[0.0; BESIDE]; matrix.size()];
        for (place, vector) in group.iter().enumerate() {
            for (row, &entry) in beside.iter_mut().zip(vector) {
                if let Some(target) = row.get_mut(place) {
                    *target = entry;
                }
            }
        }
        let found = matrix.times(&beside);
        for place in 0..group.len() {
            let column = found.iter().filter_map(|row| row.get(place));
            all.push(column.copied().collect());
        }
    }
    all
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn elements_are_summed_and_multiplied() {
        let mut elements = Elements::new(3);
        elements.add(2, 0, 1.0);
        elements.add(1, 0, 5.0);
        elements.add(2, 1, 4.0);
        elements.add(0, 2, 2.0);
        elements.add(1, 1, 7.0);
        elements.add(9, 1, 7.0);
        let matrix = elements.finish();
        assert_eq!(matrix.row(2), (&[0, 1][..], &[3.0, 4.0][..]));
        assert_eq!(matrix.row(7), (&[][..], &[][..]));
        assert_eq!((matrix.size(), matrix.kept()), (3, 6));
        let product = matrix.times(&[[1.0, 0.0], [10.0, 0.0], [100.0, 1.0]]);
        assert_eq!(product, [[350.0, 3.0], [475.0, 4.0], [43.0, 0.0]]);
    }
}
