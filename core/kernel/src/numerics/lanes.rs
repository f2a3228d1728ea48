//! Sums over long vectors, eight at a time in one fixed order.

const LANES: usize = 8;

/// Σ a b over the shorter of the two: eight partial sums, then these and what is left over, so that
/// the machine may add several at once and always adds the same.
pub fn dot(a: &[f64], b: &[f64]) -> f64 {
    let (wide, other) = (a.chunks_exact(LANES), b.chunks_exact(LANES));
    let rest = wide.remainder().iter().zip(other.remainder());
    let mut sums = [0.0; LANES];
    let end: f64 = rest.map(|(x, y)| x * y).sum();
    for (x, y) in wide.zip(other) {
        for ((sum, x), y) in sums.iter_mut().zip(x).zip(y) {
            *sum += x * y;
        }
    }
    sums.iter().sum::<f64>() + end
}

/// √Σ a².
pub fn norm(a: &[f64]) -> f64 {
    dot(a, a).sqrt()
}

/// Adds factor · b to a.
pub fn add(a: &mut [f64], factor: f64, b: &[f64]) {
    for (target, entry) in a.iter_mut().zip(b) {
        *target += factor * entry;
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_place_counts_once() {
        let a: Vec<f64> = (0..29).map(f64::from).collect();
        assert_eq!(dot(&a, &a), 28.0 * 29.0 * 57.0 / 6.0);
        assert_eq!(norm(&[3.0, 4.0]), 5.0);
        let mut b = vec![1.0; 29];
        add(&mut b, 2.0, &a);
        assert_eq!(b[28], 57.0);
    }
}
