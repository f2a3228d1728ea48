//! Coefficients of the average energy of a configuration against averages over Slater determinants.
//!
//! The reference is ours but independent of the closed formula: ⟨ij|ij⟩ − ⟨ij|ji⟩ of 1/r₁₂ between
//! spin-orbitals with definite m, from Gaunt integrals (Condon & Shortley, *The Theory of Atomic
//! Spectra*, 1935, ch. VI), averaged over every pair of spin-orbitals of the shells. In an average
//! over all states of a configuration every pair occurs equally often.

use rungline_core::angular::wigner_3j;
use rungline_core::radial::average::{exchange, within};
use rungline_tests::{Row, report};

/// c^k(ℓm, ℓ′m′) = ⟨ℓm|C^k|ℓ′m′⟩.
fn gaunt(k: i32, (l, m): (i32, i32), (other, n): (i32, i32)) -> f64 {
    let sign = if m % 2 == 0 { 1.0 } else { -1.0 };
    let width = f64::from((2 * l + 1) * (2 * other + 1)).sqrt();
    sign * width
        * wigner_3j(2 * l, 2 * k, 2 * other, 0, 0, 0)
        * wigner_3j(2 * l, 2 * k, 2 * other, -2 * m, 2 * (m - n), 2 * n)
}

type Spin = (i32, i32);

fn shell(l: i32) -> Vec<Spin> {
    (-l..=l).flat_map(|m| [(m, -1), (m, 1)]).collect()
}

/// Coefficients of F^k(ab) and −G^k(ab) of one pair of spin-orbitals.
fn pair(k: i32, a: (i32, Spin), b: (i32, Spin)) -> (f64, f64) {
    let ((l, (m, s)), (other, (n, t))) = (a, b);
    let direct = gaunt(k, (l, m), (l, m)) * gaunt(k, (other, n), (other, n));
    let exchange = gaunt(k, (l, m), (other, n));
    (direct, if s == t { exchange * exchange } else { 0.0 })
}

#[test]
fn the_average_over_all_determinants_has_these_coefficients() {
    let (mut worst, mut cases) = (0.0_f64, 0);
    for l in 0..=4_i32 {
        let all = shell(l);
        let pairs: Vec<(Spin, Spin)> = all
            .iter()
            .enumerate()
            .flat_map(|(i, a)| all.iter().skip(i + 1).map(move |b| (*a, *b)))
            .collect();
        let formula = within(l as u8);
        for k in (0..=2 * l).step_by(2) {
            let sum: f64 = pairs
                .iter()
                .map(|(a, b)| pair(k, (l, *a), (l, *b)))
                .map(|(direct, exchange)| direct - exchange)
                .sum();
            let found = formula.iter().find(|rank| rank.k as i32 == k);
            let expected = found.map_or(1.0, |rank| -rank.coefficient);
            worst = worst.max((sum / pairs.len() as f64 - expected).abs());
            cases += 1;
        }
        for other in 0..=4_i32 {
            let seconds = shell(other);
            let count = (all.len() * seconds.len()) as f64;
            let formula = exchange(l as u8, other as u8);
            for k in 0..=l + other {
                let (mut direct, mut turned) = (0.0, 0.0);
                for a in &all {
                    for b in &seconds {
                        let (f, g) = pair(k, (l, *a), (other, *b));
                        direct += f / count;
                        turned += g / count;
                    }
                }
                let found = formula.iter().find(|rank| rank.k as i32 == k);
                let expected = found.map_or(0.0, |rank| rank.coefficient);
                worst = worst.max((turned - expected).abs());
                worst = worst.max((direct - f64::from(u8::from(k == 0))).abs());
                cases += 2;
            }
        }
    }
    report(
        "radial-average",
        Row {
            quantity: "coefficients of the average energy of a configuration".into(),
            cases,
            worst,
            tolerance: 1e-14,
            measure: "absolute".into(),
            source: "own averages over Slater determinants".into(),
        },
    );
}
