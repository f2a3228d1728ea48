//! Binomial coefficients, exact.

use super::natural::Natural;
use std::sync::LazyLock;

/// The largest n all of whose binomial coefficients fit 64 bits.
pub const LARGEST_ROW: usize = 67;

const WIDTH: usize = LARGEST_ROW + 1;

/// Pascal's triangle for n ≤ 67 in a square, so that both rows and columns can be walked.
pub struct Triangle {
    entries: Vec<u64>,
    /// C(n+k, k) by n and k: a column of the triangle in one piece.
    rising: Vec<u64>,
    /// The entries as numbers of 53 bits.
    nearest: Vec<f64>,
}

static TRIANGLE: LazyLock<Triangle> = LazyLock::new(Triangle::build);

/// The one triangle, built at first use.
pub fn triangle() -> &'static Triangle {
    &TRIANGLE
}

impl Triangle {
    fn build() -> Self {
        let mut entries = Vec::with_capacity(WIDTH * WIDTH);
        let mut row = vec![0_u64; WIDTH];
        if let Some(first) = row.first_mut() {
            *first = 1;
        }
        for _ in 0..WIDTH {
            entries.extend_from_slice(&row);
            let mut left = 0_u64;
            for entry in &mut row {
                let above = *entry;
                // The last row's sums are never used, those before it fit.
                *entry = above.wrapping_add(left);
                left = above;
            }
        }
        let rising = (0..WIDTH * WIDTH)
            .map(|place| {
                let (n, k) = (place / WIDTH, place % WIDTH);
                entries.get((n + k) * WIDTH + k).copied().unwrap_or(0)
            })
            .collect();
        let nearest = entries.iter().map(|entry| *entry as f64).collect();
        Triangle {
            entries,
            rising,
            nearest,
        }
    }

    /// C(n, k), C(n, k+1), … , so many of them; nothing outside the triangle.
    #[inline]
    pub fn row(&self, n: i32, k: i32, count: i32) -> &[u64] {
        run(&self.entries, n, k, count)
    }

    /// C(n+k, k), C(n+k+1, k+1), … , so many of them; nothing outside the triangle.
    #[inline]
    pub fn rising(&self, n: i32, k: i32, count: i32) -> &[u64] {
        run(&self.rising, n, k, count)
    }

    /// C(n, k) as the nearest number of 53 bits; zero outside 0 ≤ k ≤ n ≤ 67.
    #[inline]
    pub fn nearest(&self, n: i32, k: i32) -> f64 {
        let place = (n * WIDTH as i32 + k).cast_unsigned() as usize;
        self.nearest.get(place).copied().unwrap_or(0.0)
    }

    /// C(n, k); zero outside 0 ≤ k ≤ n ≤ 67.
    #[inline]
    pub fn choose(&self, n: usize, k: usize) -> u64 {
        if k >= WIDTH {
            return 0;
        }
        self.entries.get(n * WIDTH + k).copied().unwrap_or(0)
    }

    /// C(n, k), C(n, k+1), … .
    #[inline]
    pub fn along_row(&self, n: usize, k: usize) -> std::slice::Iter<'_, u64> {
        self.entries.get(n * WIDTH + k..).unwrap_or(&[]).iter()
    }

    /// C(n, k), C(n+1, k), … .
    #[inline]
    pub fn down_column(&self, n: usize, k: usize) -> std::iter::StepBy<std::slice::Iter<'_, u64>> {
        self.along_row(n, k).step_by(WIDTH)
    }
}

/// So many entries of a square, beginning at (n, k).
#[inline]
fn run(square: &[u64], n: i32, k: i32, count: i32) -> &[u64] {
    let from = (n * WIDTH as i32 + k).cast_unsigned() as usize;
    let to = from.wrapping_add(count.cast_unsigned() as usize);
    square.get(from..to).unwrap_or(&[])
}

/// C(n, k) of any size; zero for k > n.
pub fn binomial(n: u32, k: u32) -> Natural {
    if k > n {
        return Natural::default();
    }
    let (row, place) = (n as usize, k as usize);
    if row <= LARGEST_ROW {
        return Natural::from_u64(triangle().choose(row, place));
    }
    let mut value = Natural::from_u64(1);
    for step in 1..=k.min(n - k) {
        value.multiply_small(n - step + 1);
        value.divide_small(step);
    }
    value
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn known_values() {
        assert_eq!(triangle().choose(67, 33), 14_226_520_737_620_288_370);
        assert_eq!(triangle().choose(14, 7), 3432);
        assert_eq!(triangle().choose(5, 6), 0);
        assert_eq!(triangle().choose(68, 1), 0);
        assert_eq!(binomial(68, 34).difference(&binomial(67, 33)), {
            (false, binomial(67, 34))
        });
    }

    #[test]
    fn rows_and_columns_walk_the_triangle() {
        let row: Vec<u64> = triangle().along_row(4, 1).take(4).copied().collect();
        assert_eq!(row, [4, 6, 4, 1]);
        let column: Vec<u64> = triangle().down_column(2, 2).take(4).copied().collect();
        assert_eq!(column, [1, 3, 6, 10]);
        assert_eq!(triangle().row(4, 1, 4), [4, 6, 4, 1]);
        assert_eq!(triangle().rising(3, 0, 4), [1, 4, 10, 20]);
        assert_eq!(
            triangle().nearest(67, 33),
            14_226_520_737_620_288_370_u64 as f64
        );
        assert!(triangle().row(68, 0, 2).is_empty() && triangle().row(-1, 0, 2).is_empty());
    }
}
