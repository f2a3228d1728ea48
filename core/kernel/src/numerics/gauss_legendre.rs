//! Gauss–Legendre quadrature, and running integrals on its nodes.

use core::f64::consts::PI;

/// Nodes and weights of the n-point Gauss–Legendre rule on −1…1, rising.
///
/// ∫₋₁¹ f dx = Σ wᵢ f(xᵢ), exact for polynomials up to degree 2n − 1; xᵢ are the roots of P_n and
/// wᵢ = 2/[(1 − xᵢ²) P_n′(xᵢ)²]. Newton's iteration from cos[π(i − ¼)/(n + ½)]; errors below 1e-15.
///
/// Source: Abramowitz and Stegun, *Handbook of Mathematical Functions* (1964), 25.4.29 and 22.16.6.
pub fn gauss_legendre(n: usize) -> Vec<(f64, f64)> {
    let mut rule: Vec<(f64, f64)> = (1..=n).map(|i| node(n, i)).collect();
    rule.reverse();
    rule
}

fn node(n: usize, i: usize) -> (f64, f64) {
    let mut x = libm::cos(PI * (i as f64 - 0.25) / (n as f64 + 0.5));
    let mut slope = 1.0;
    for _ in 0..8 {
        let (value, below) = legendre_pair(n, x);
        slope = n as f64 * (x * value - below) / (x * x - 1.0);
        x -= value / slope;
    }
    // The middle root of an odd polynomial is zero.
    if 2 * i == n + 1 {
        x = 0.0;
    }
    (x, 2.0 / ((1.0 - x * x) * slope * slope))
}

/// P_n(x) and P_{n−1}(x) by (m+1) P_{m+1} = (2m+1) x P_m − m P_{m−1}.
fn legendre_pair(n: usize, x: f64) -> (f64, f64) {
    let (mut value, mut below) = (1.0, 0.0);
    for m in 0..n {
        let m = m as f64;
        let above = ((2.0 * m + 1.0) * x * value - m * below) / (m + 1.0);
        below = value;
        value = above;
    }
    (value, below)
}

/// Weights of running integrals on the nodes of [`gauss_legendre`]: column j holds
/// a_qj = ∫₋₁^{x_q} ℓ_j(x) dx for every q, ℓ_j being the interpolation polynomial of node j.
///
/// From ℓ_j(x) = w_j Σ_m (m + ½) P_m(x_j) P_m(x), m < n, and
/// ∫₋₁ˣ P_m = [P_{m+1}(x) − P_{m−1}(x)]/(2m + 1). They satisfy w_q a_qj + w_j a_jq = w_q w_j, so that
/// double integrals made with them are symmetric to rounding.
pub fn running_weights(rule: &[(f64, f64)]) -> Vec<Vec<f64>> {
    rule.iter()
        .map(|&(x_j, w_j)| {
            rule.iter()
                .map(|&(x_q, _)| {
                    let mut sum = x_q + 1.0;
                    for m in 1..rule.len() {
                        let (_, p_j) = legendre_pair(m + 1, x_j);
                        let (above, _) = legendre_pair(m + 1, x_q);
                        let (_, below) = legendre_pair(m, x_q);
                        sum += p_j * (above - below);
                    }
                    0.5 * w_j * sum
                })
                .collect()
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn polynomials_are_integrated_exactly() {
        for n in 1..=20 {
            let rule = gauss_legendre(n);
            assert!(rule.windows(2).all(|pair| pair[0].0 < pair[1].0));
            for degree in 0..2 * n {
                let mut sum = 0.0;
                for &(x, w) in &rule {
                    sum += w * (0..degree).fold(1.0, |power, _| power * x);
                }
                let exact = if degree % 2 == 1 {
                    0.0
                } else {
                    2.0 / (degree as f64 + 1.0)
                };
                assert!((sum - exact).abs() < 2e-15, "n {n}, degree {degree}");
            }
        }
    }

    #[test]
    fn the_table_of_five_points_is_met() {
        // Abramowitz and Stegun (1964), table 25.4, n = 5.
        let expected = [
            (-0.906_179_845_938_664, 0.236_926_885_056_189),
            (-0.538_469_310_105_683, 0.478_628_670_499_366),
            (0.0, 0.568_888_888_888_889),
        ];
        for (found, expected) in gauss_legendre(5).iter().zip(expected) {
            assert!((found.0 - expected.0).abs() < 1e-15);
            assert!((found.1 - expected.1).abs() < 1e-15);
        }
    }

    #[test]
    fn running_integrals_are_exact_and_symmetric() {
        let rule = gauss_legendre(9);
        let columns = running_weights(&rule);
        for degree in 0..9 {
            let power = |x: f64, n: usize| (0..n).fold(1.0, |p, _| p * x);
            for (q, &(x, _)) in rule.iter().enumerate() {
                let sum: f64 = columns
                    .iter()
                    .zip(&rule)
                    .map(|(column, &(x, _))| column[q] * power(x, degree))
                    .sum();
                let exact =
                    (power(x, degree + 1) - power(-1.0, degree + 1)) / (degree as f64 + 1.0);
                assert!((sum - exact).abs() < 1e-15);
            }
        }
        for (j, &(_, w_j)) in rule.iter().enumerate() {
            for (q, &(_, w_q)) in rule.iter().enumerate() {
                let sum = w_q * columns[j][q] + w_j * columns[q][j];
                assert!((sum - w_q * w_j).abs() < 1e-15);
            }
        }
    }
}
