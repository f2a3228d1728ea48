//! B-splines of any order on any knots: values and slopes.

/// A basis of B-splines of order k (degree k − 1).
///
/// Spline i lives on t_i…t_{i+k}; all are non-negative and sum to one on the span of the knots.
/// Source: de Boor, *A Practical Guide to Splines* (1978), chapters IX and X.
#[derive(Clone, Debug, PartialEq)]
pub struct SplineBasis {
    order: usize,
    knots: Vec<f64>,
}

/// A knot, or the last one beyond the end.
fn at(knots: &[f64], i: usize) -> f64 {
    knots.get(i).or(knots.last()).copied().unwrap_or(0.0)
}

impl SplineBasis {
    /// The basis on these knots, or nothing where the order is zero, there are fewer than two
    /// orders of knots, or they fall or are not finite.
    pub fn new(order: usize, knots: Vec<f64>) -> Option<Self> {
        let rising = knots.windows(2).all(|pair| match pair {
            [a, b] => a <= b && b.is_finite(),
            _ => false,
        });
        (order > 0 && knots.len() >= 2 * order && rising).then_some(SplineBasis { order, knots })
    }

    /// The basis whose interior knots are these rising break points, each simple, the first and
    /// the last taken `order` times, so that only the first spline is not zero at the first point
    /// and only the last at the last.
    pub fn clamped(order: usize, breaks: &[f64]) -> Option<Self> {
        let (first, last) = (breaks.first()?, breaks.last()?);
        let more = order.checked_sub(1)?;
        let mut knots = Vec::with_capacity(breaks.len() + 2 * more);
        knots.extend(core::iter::repeat_n(*first, more));
        knots.extend_from_slice(breaks);
        knots.extend(core::iter::repeat_n(*last, more));
        SplineBasis::new(order, knots)
    }

    /// Order k.
    pub fn order(&self) -> usize {
        self.order
    }

    /// The knots.
    pub fn knots(&self) -> &[f64] {
        &self.knots
    }

    /// Number of splines.
    pub fn len(&self) -> usize {
        self.knots.len() - self.order
    }

    /// Never: a basis has at least one spline.
    pub fn is_empty(&self) -> bool {
        false
    }

    /// The first of the `order` splines that are not zero around x: i with t_{i+k−1} ≤ x < t_{i+k},
    /// the last such interval at the end.
    pub fn first_at(&self, x: f64) -> usize {
        let last = self.len() - 1;
        let below = self.knots.partition_point(|&t| t <= x);
        below.saturating_sub(1).clamp(self.order - 1, last) + 1 - self.order
    }

    /// The values at x of the `order` splines from `first` on; x should lie in their common interval.
    pub fn values(&self, first: usize, x: f64) -> Vec<f64> {
        self.of_order(self.order, first + self.order - 1, x)
    }

    /// The slopes at x of the same splines,
    /// B′_{i,k} = (k − 1)[B_{i,k−1}/(t_{i+k−1} − t_i) − B_{i+1,k−1}/(t_{i+k} − t_{i+1})].
    pub fn slopes(&self, first: usize, x: f64) -> Vec<f64> {
        let degree = self.order - 1;
        let lower = self.of_order(degree, first + degree, x);
        let scaled: Vec<f64> = lower
            .iter()
            .zip(first + 1..)
            .map(|(value, i)| {
                let width = at(&self.knots, i + degree) - at(&self.knots, i);
                degree as f64 * value / width
            })
            .collect();
        let minus = core::iter::once(0.0).chain(scaled.iter().copied());
        let plus = scaled.iter().copied().chain(core::iter::once(0.0));
        minus.zip(plus).map(|(minus, plus)| minus - plus).collect()
    }

    /// The values of the splines of order k on the interval that begins at knot `left`, by the
    /// stable recurrence B_{i,k} = (x − t_i)/(t_{i+k−1} − t_i) B_{i,k−1} + … .
    fn of_order(&self, k: usize, left: usize, x: f64) -> Vec<f64> {
        let mut values: Vec<f64> = Vec::with_capacity(k);
        if k > 0 {
            values.push(1.0);
        }
        for j in 1..k {
            let mut saved = 0.0;
            for (i, value) in values.iter_mut().enumerate() {
                let right = at(&self.knots, left + i + 1) - x;
                let back = x - at(&self.knots, left + i + 1 - j);
                let term = *value / (right + back);
                *value = saved + right * term;
                saved = back * term;
            }
            values.push(saved);
        }
        values
    }

    /// The spline Σ c_i B_i at x; zero outside the knots.
    pub fn evaluate(&self, coefficients: &[f64], x: f64) -> f64 {
        let (start, end) = (at(&self.knots, 0), at(&self.knots, usize::MAX));
        if !(start..=end).contains(&x) {
            return 0.0;
        }
        let first = self.first_at(x);
        let values = self.values(first, x);
        coefficients
            .iter()
            .skip(first)
            .zip(values)
            .map(|(c, value)| c * value)
            .sum()
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn splines_sum_to_one_and_reproduce_a_line() {
        let breaks = [0.0, 0.1, 0.3, 1.0, 2.5, 7.0];
        for order in 2..=10 {
            let basis = SplineBasis::clamped(order, &breaks).expect("rising points");
            assert_eq!(basis.len(), breaks.len() - 1 + order - 1);
            // Schoenberg: the coefficients of x are the means of k − 1 knots.
            let line: Vec<f64> = (0..basis.len())
                .map(|i| basis.knots()[i + 1..i + order].iter().sum::<f64>() / (order as f64 - 1.0))
                .collect();
            for x in [0.0, 0.05, 0.1, 0.999, 1.0, 3.3, 7.0] {
                let first = basis.first_at(x);
                let values = basis.values(first, x);
                assert!((values.iter().sum::<f64>() - 1.0).abs() < 1e-14);
                assert!((basis.evaluate(&line, x) - x).abs() < 1e-13);
                let slope: f64 = basis
                    .slopes(first, x)
                    .iter()
                    .zip(&line[first..])
                    .map(|(s, c)| s * c)
                    .sum();
                assert!((slope - 1.0).abs() < 1e-12, "order {order}, x {x}: {slope}");
            }
        }
    }

    #[test]
    fn the_cardinal_cubic_is_one_sixth_two_thirds_one_sixth() {
        let knots = (0..12).map(f64::from).collect();
        let basis = SplineBasis::new(4, knots).expect("rising knots");
        let values = basis.values(basis.first_at(5.0), 5.0);
        for (found, expected) in values.iter().zip([1.0 / 6.0, 2.0 / 3.0, 1.0 / 6.0, 0.0]) {
            assert!((found - expected).abs() < 1e-15);
        }
    }

    #[test]
    fn what_is_no_basis_is_refused() {
        assert!(SplineBasis::new(3, vec![0.0, 1.0, 0.5, 2.0, 3.0, 4.0]).is_none());
        assert!(SplineBasis::new(3, vec![0.0, 1.0, 2.0]).is_none());
        assert!(SplineBasis::new(0, vec![0.0, 1.0, 2.0]).is_none());
        assert!(SplineBasis::clamped(3, &[0.0, f64::NAN]).is_none());
        assert!(SplineBasis::clamped(3, &[]).is_none());
        let basis = SplineBasis::clamped(3, &[0.0, 1.0]).expect("one interval");
        assert_eq!(basis.evaluate(&[1.0, 1.0, 1.0], 2.0), 0.0);
        assert_eq!(basis.evaluate(&[1.0, 1.0, 1.0], f64::NAN), 0.0);
    }
}
