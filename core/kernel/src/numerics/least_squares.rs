//! Linear least squares of a few unknowns.

/// A solution of min ‖A x − b‖².
#[derive(Clone, Debug, PartialEq)]
pub struct LeastSquares {
    /// x.
    pub solution: Vec<f64>,
    /// Diagonal of (AᵀA)⁻¹: times the variance of an element of b, the variances of x.
    pub variances: Vec<f64>,
}

/// A column shorter than this part of itself before the others were taken off is one of them.
const DEPENDENT: f64 = 1e-13;

/// Solves min ‖A x − b‖² by modified Gram–Schmidt, each column made orthogonal twice; `columns` are
/// A's. Nothing when the columns differ in length from b, are more than its elements, or depend on
/// each other to rounding.
///
/// Source: Björck, *Numerical Methods for Least Squares Problems* (1996), 2.4.
pub fn least_squares(columns: &[Vec<f64>], b: &[f64]) -> Option<LeastSquares> {
    if columns.len() > b.len() || columns.iter().any(|column| column.len() != b.len()) {
        return None;
    }
    let mut basis: Vec<Vec<f64>> = Vec::with_capacity(columns.len());
    // Column j of R, from its top to its diagonal.
    let mut upper: Vec<Vec<f64>> = Vec::with_capacity(columns.len());
    for column in columns {
        let mut rest = column.clone();
        let size = dot(column, column).sqrt();
        let mut parts = vec![0.0; basis.len()];
        for _ in 0..2 {
            for (part, direction) in parts.iter_mut().zip(&basis) {
                *part += take_off(&mut rest, direction);
            }
        }
        let length = dot(&rest, &rest).sqrt();
        if !(length > DEPENDENT * size && length.is_finite()) {
            return None;
        }
        rest.iter_mut().for_each(|entry| *entry /= length);
        parts.push(length);
        basis.push(rest);
        upper.push(parts);
    }
    let mut rest = b.to_vec();
    let right: Vec<f64> = basis
        .iter()
        .map(|direction| take_off(&mut rest, direction))
        .collect();
    let solution = back(&upper, right);
    let mut variances = vec![0.0; columns.len()];
    for place in 0..columns.len() {
        let mut unit = vec![0.0; columns.len()];
        *unit.get_mut(place)? = 1.0;
        // Column `place` of R⁻¹; the sum of squares along its rows is (RᵀR)⁻¹ on the diagonal.
        for (variance, entry) in variances.iter_mut().zip(back(&upper, unit)) {
            *variance += entry * entry;
        }
    }
    solution
        .iter()
        .all(|x| x.is_finite())
        .then_some(LeastSquares {
            solution,
            variances,
        })
}

/// Solves R x = y.
fn back(upper: &[Vec<f64>], mut right: Vec<f64>) -> Vec<f64> {
    for (place, column) in upper.iter().enumerate().rev() {
        let Some((&diagonal, above)) = column.split_last() else {
            continue;
        };
        let Some(found) = right.get_mut(place) else {
            continue;
        };
        *found /= diagonal;
        let found = *found;
        for (entry, factor) in right.iter_mut().zip(above) {
            *entry -= factor * found;
        }
    }
    right
}

fn dot(left: &[f64], right: &[f64]) -> f64 {
    left.iter().zip(right).map(|(a, b)| a * b).sum()
}

/// Takes the part along a unit vector off and tells how much it was.
fn take_off(rest: &mut [f64], direction: &[f64]) -> f64 {
    let part = dot(rest, direction);
    for (entry, along) in rest.iter_mut().zip(direction) {
        *entry -= part * along;
    }
    part
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_straight_line_has_the_textbook_solution() {
        // Slope and its variance by Sxy/Sxx and 1/Sxx.
        let x = [0.0, 1.0, 2.0, 4.0];
        let y = [1.0, 2.5, 3.5, 9.0];
        let found = least_squares(&[vec![1.0; 4], x.to_vec()], &y).expect("regular");
        let mean = 7.0 / 4.0;
        let sxx: f64 = x.iter().map(|x| (x - mean) * (x - mean)).sum();
        let sxy: f64 = x.iter().zip(y).map(|(x, y)| (x - mean) * y).sum();
        let slope = sxy / sxx;
        assert!((found.solution[1] - slope).abs() < 1e-14);
        assert!((found.solution[0] - (4.0 - slope * mean)).abs() < 1e-14);
        assert!((found.variances[1] - 1.0 / sxx).abs() < 1e-15);
        assert!((found.variances[0] - (0.25 + mean * mean / sxx)).abs() < 1e-14);
    }

    #[test]
    fn what_has_no_one_solution_is_refused() {
        assert!(least_squares(&[vec![1.0, 2.0], vec![2.0, 4.0]], &[1.0, 1.0]).is_none());
        assert!(least_squares(&[vec![1.0], vec![2.0]], &[1.0]).is_none());
        assert!(least_squares(&[vec![0.0, 0.0]], &[1.0, 1.0]).is_none());
        assert!(least_squares(&[vec![1.0]], &[1.0, 2.0]).is_none());
    }
}
