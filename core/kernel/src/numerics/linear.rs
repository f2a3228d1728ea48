//! Small dense systems of linear equations.

/// Solves A x = b by elimination with exchange of rows; `rows` holds A's rows, each followed by its
/// element of b. Nothing when A is singular to rounding or the rows do not make a square system.
///
/// Source: Golub and Van Loan, *Matrix Computations* (1996), 3.4.
pub fn solve(mut rows: Vec<Vec<f64>>) -> Option<Vec<f64>> {
    let size = rows.len();
    if rows.iter().any(|row| row.len() != size + 1) {
        return None;
    }
    let mut rest = rows.as_mut_slice();
    let mut column = 0;
    while !rest.is_empty() {
        let place = largest(rest, column)?;
        rest.swap(0, place);
        let (pivot_row, below) = rest.split_first_mut()?;
        let pivot = pivot_row.get(column).copied()?;
        for row in below.iter_mut() {
            let factor = row.get(column).copied()? / pivot;
            for (entry, other) in row.iter_mut().zip(pivot_row.iter()).skip(column) {
                *entry -= factor * other;
            }
        }
        rest = below;
        column += 1;
    }
    let mut x: Vec<f64> = Vec::with_capacity(size);
    // From the last row up; x is built from its end.
    for (column, row) in rows.iter().enumerate().rev() {
        let known = row.iter().skip(column + 1).zip(x.iter().rev());
        let sum: f64 = known.map(|(entry, x)| entry * x).sum();
        x.push((row.last()? - sum) / row.get(column)?);
    }
    x.reverse();
    x.iter().all(|x| x.is_finite()).then_some(x)
}

/// Where the largest entry of the column stands; nothing when it vanishes.
fn largest(rows: &[Vec<f64>], column: usize) -> Option<usize> {
    let mut best = (0.0, None);
    for (place, row) in rows.iter().enumerate() {
        let size = row.get(column)?.abs();
        if size > best.0 {
            best = (size, Some(place));
        }
    }
    best.1
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_system_that_needs_exchanges_is_solved() {
        let rows = vec![
            vec![0.0, 2.0, 1.0, 7.0],
            vec![1.0, 1.0, 1.0, 6.0],
            vec![2.0, 1.0, 3.0, 13.0],
        ];
        let x = solve(rows).expect("regular");
        for (found, expected) in x.iter().zip([1.0, 2.0, 3.0]) {
            assert!((found - expected).abs() < 1e-14);
        }
    }

    #[test]
    fn singular_or_ragged_systems_have_no_solution() {
        assert!(solve(vec![vec![1.0, 2.0, 1.0], vec![2.0, 4.0, 2.0]]).is_none());
        assert!(solve(vec![vec![1.0, 2.0], vec![2.0, 4.0]]).is_none());
        assert_eq!(solve(Vec::new()), Some(Vec::new()));
    }
}
