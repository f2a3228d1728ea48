//! Rectangular tables of reduced matrix elements.

/// Numbers by rows.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Table {
    columns: usize,
    values: Vec<f64>,
}

impl Table {
    /// A table of the value of each row and column.
    pub fn from_fn(
        rows: usize,
        columns: usize,
        mut value: impl FnMut(usize, usize) -> f64,
    ) -> Self {
        let mut values = Vec::with_capacity(rows.saturating_mul(columns));
        for row in 0..rows {
            values.extend((0..columns).map(|column| value(row, column)));
        }
        Table { columns, values }
    }

    /// One value; zero outside.
    #[inline]
    pub fn at(&self, row: usize, column: usize) -> f64 {
        self.row(row).get(column).copied().unwrap_or(0.0)
    }

    /// One row; empty outside.
    #[inline]
    pub fn row(&self, row: usize) -> &[f64] {
        let start = row.saturating_mul(self.columns);
        self.values
            .get(start..start.saturating_add(self.columns))
            .unwrap_or(&[])
    }

    /// Whether every value is zero.
    pub fn is_zero(&self) -> bool {
        self.values.iter().all(|&value| value == 0.0)
    }
}
