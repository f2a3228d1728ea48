//! Squares of 3j symbols with a rank of one, in closed form, and with a rank of two.
//!
//! Edmonds, *Angular Momentum in Quantum Mechanics* (1957), table 2, with doubled arguments, so that
//! each is one quotient of whole numbers.

use crate::angular::wigner_3j;

/// (J 1 J′; −M q M′)² with q = M − M′, from the doubled values; zero where the rules of projections or
/// of the triangle forbid it.
pub fn dipole_share(two_j: i32, two_m: i32, lower_two_j: i32, lower_two_m: i32) -> f64 {
    let [j, m, k, n] = [two_j, two_m, lower_two_j, lower_two_m].map(i64::from);
    if j < 0 || k < 0 || m.abs() > j || n.abs() > k || (j + m) % 2 != 0 || (k + n) % 2 != 0 {
        return 0.0;
    }
    let q = m - n;
    match k - j {
        0 if j > 0 => level(j, m, q),
        2 => step(j, m, -q),
        -2 => step(k, n, q),
        _ => 0.0,
    }
}

/// (J 2 J′; −M q M′)² with q = M − M′, from the doubled values.
pub fn quadrupole_share(two_j: i32, two_m: i32, lower_two_j: i32, lower_two_m: i32) -> f64 {
    let Some(q) = two_m.checked_sub(lower_two_m) else {
        return 0.0;
    };
    let symbol = wigner_3j(
        two_j,
        4,
        lower_two_j,
        two_m.saturating_neg(),
        q,
        lower_two_m,
    );
    symbol * symbol
}

/// Whole numbers below 2³⁵ multiplied without overflow, exactly below 2⁵³.
fn product(a: i64, b: i64) -> f64 {
    a as f64 * b as f64
}

/// J = J′ with 2J = j, 2M = m of one end, and 2q.
fn level(j: i64, m: i64, q: i64) -> f64 {
    // q = 0: M² / J(J+1)(2J+1); q = ±1: (J ± M)(J ∓ M + 1) / 2J(J+1)(2J+1) with M the upper end's.
    let numerator = match q {
        0 => product(2 * m, m),
        2 => product(j + m, j - m + 2),
        -2 => product(j - m, j + m + 2),
        _ => return 0.0,
    };
    numerator / (2.0 * (j as f64) * ((j + 1) as f64) * ((j + 2) as f64))
}

/// J and J + 1, with 2J = j and 2M = m of the smaller, and 2q = 2M(larger) − 2M(smaller).
fn step(j: i64, m: i64, q: i64) -> f64 {
    // q = 0: 2(J+M+1)(J−M+1) / (2J+1)(2J+2)(2J+3); q = ±1: (J±M+1)(J±M+2) / the same.
    let numerator = match q {
        0 => product(2 * (j + m + 2), j - m + 2),
        2 => product(j + m + 2, j + m + 4),
        -2 => product(j - m + 2, j - m + 4),
        _ => return 0.0,
    };
    numerator / (4.0 * ((j + 1) as f64) * ((j + 2) as f64) * ((j + 3) as f64))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn each_polarisation_gets_a_third() {
        for j in 0..40 {
            for k in [j - 2, j, j + 2] {
                if k < 0 || j + k < 2 {
                    continue;
                }
                for q in [-2, 0, 2] {
                    let sum: f64 = (-j..=j)
                        .step_by(2)
                        .map(|m| dipole_share(j, m, k, m - q))
                        .sum();
                    assert!((sum - 1.0 / 3.0).abs() < 1e-14, "{j} {k} {q}: {sum}");
                }
            }
        }
        assert_eq!(dipole_share(0, 0, 0, 0), 0.0);
        assert_eq!(dipole_share(i32::MAX, i32::MIN, i32::MAX, 0), 0.0);
        for m in [i32::MIN, -1, 1, i32::MAX] {
            for k in [i32::MAX - 2, i32::MAX] {
                assert!(dipole_share(i32::MAX, m, k, m).is_finite());
                assert!(dipole_share(k, m, i32::MAX, m).is_finite());
            }
        }
    }
}
