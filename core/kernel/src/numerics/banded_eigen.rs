//! Single eigenpairs of A x = λ B x with banded symmetric A and positive B.

use super::banded::Banded;

/// Halvings of the interval before inverse iteration takes over, at most.
const HALVINGS: usize = 200;

/// An eigenvalue with its vector, xᵀ B x = 1.
#[derive(Clone, Debug)]
pub struct Eigenpair {
    /// λ.
    pub value: f64,
    /// x.
    pub vector: Vec<f64>,
}

/// The eigenpair with `below` eigenvalues below it (0 is the lowest), sought in `low..high`.
///
/// The eigenvalue is bracketed by counting negative pivots of A − λB (Sylvester's law of inertia)
/// until no other shares the bracket, then refined by inverse iteration with Rayleigh quotients that
/// may not leave the bracket. Nothing when it does not lie between the two bounds or the matrices
/// differ in shape. Source: Parlett, *The Symmetric Eigenvalue Problem* (1980), chapters 3 and 4.
pub fn eigenpair(a: &Banded, b: &Banded, below: usize, low: f64, high: f64) -> Option<Eigenpair> {
    if a.rows() != b.rows() || a.width() != b.width() {
        return None;
    }
    let count = |shift: f64| {
        let mut shifted = a.clone();
        shifted.add(-shift, b);
        shifted.factorise().negative()
    };
    let (mut low, mut high) = (low, high);
    let (mut at_low, mut at_high) = (count(low), count(high));
    if at_low > below || at_high <= below {
        return None;
    }
    for _ in 0..HALVINGS {
        let close = high - low <= 0.05 * low.abs().min(high.abs());
        if at_low == below && at_high == below + 1 && close {
            break;
        }
        let middle = middle(low, high);
        if middle <= low || middle >= high {
            break;
        }
        let at_middle = count(middle);
        if at_middle > below {
            (high, at_high) = (middle, at_middle);
        } else {
            (low, at_low) = (middle, at_middle);
        }
    }
    refine(a, b, low, high)
}

/// Halfway, on a logarithmic scale where both ends have one sign and differ much.
fn middle(low: f64, high: f64) -> f64 {
    let ratio = low / high;
    if low * high > 0.0 && !(0.25..=4.0).contains(&ratio) {
        libm::copysign((low * high).sqrt(), low)
    } else {
        0.5 * (low + high)
    }
}

fn refine(a: &Banded, b: &Banded, low: f64, high: f64) -> Option<Eigenpair> {
    let mut shift = 0.5 * (low + high);
    let mut vector: Vec<f64> = (0..a.rows())
        .map(|i| 1.0 + 0.5 * (i as f64 * 0.7 - (i / 3) as f64))
        .collect();
    let mut previous = f64::INFINITY;
    for turn in 0..60 {
        let mut shifted = a.clone();
        shifted.add(-shift, b);
        vector = b.times(&vector);
        shifted.factorise().solve(&mut vector);
        let norm = dot(&vector, &b.times(&vector)).sqrt();
        if !(norm.is_finite() && norm > 0.0) {
            return None;
        }
        vector.iter_mut().for_each(|x| *x /= norm);
        let value = dot(&vector, &a.times(&vector));
        let change = (value - previous).abs();
        previous = value;
        if change <= 4.0 * f64::EPSILON * value.abs() {
            return Some(Eigenpair { value, vector });
        }
        // The first solutions may still point elsewhere.
        if turn >= 1 && value > low && value < high {
            shift = value;
        }
    }
    // Rounding keeps the last digits moving: the value stands all the same.
    (previous > low && previous < high).then_some(Eigenpair {
        value: previous,
        vector,
    })
}

fn dot(a: &[f64], b: &[f64]) -> f64 {
    a.iter().zip(b).map(|(a, b)| a * b).sum()
}

#[cfg(test)]
mod tests {
    use super::*;

    /// −u″ = λu on a line of equal steps.
    fn string(rows: usize) -> (Banded, Banded) {
        let (mut a, mut b) = (Banded::zero(rows, 2), Banded::zero(rows, 2));
        for row in a.entries_mut().chunks_exact_mut(2) {
            row.copy_from_slice(&[2.0, -1.0]);
        }
        for row in b.entries_mut().chunks_exact_mut(2) {
            row.copy_from_slice(&[1.0, 0.0]);
        }
        (a, b)
    }

    #[test]
    fn every_eigenvalue_of_a_string_is_found() {
        let (a, b) = string(40);
        for below in 0..40 {
            let pair = eigenpair(&a, &b, below, -1.0, 5.0).expect("it lies there");
            let angle = core::f64::consts::PI * (below as f64 + 1.0) / 82.0;
            let exact = 4.0 * libm::sin(angle) * libm::sin(angle);
            assert!((pair.value - exact).abs() < 1e-14, "{below}");
            let product = a.times(&pair.vector);
            for (left, right) in product.iter().zip(&pair.vector) {
                assert!((left - pair.value * right).abs() < 1e-10);
            }
        }
    }

    #[test]
    fn what_is_not_there_is_not_found() {
        let (a, b) = string(10);
        assert!(eigenpair(&a, &b, 10, -1.0, 5.0).is_none());
        assert!(eigenpair(&a, &b, 0, 1.0, 5.0).is_none());
        assert!(eigenpair(&a, &Banded::zero(3, 2), 0, 1.0, 5.0).is_none());
    }
}
