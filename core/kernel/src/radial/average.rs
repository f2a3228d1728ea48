//! The average energy of a configuration in Slater integrals.
//!
//! E_av = Σ_a q_a I_a + Σ_a ½q_a(q_a − 1)[F⁰(aa) − Σ_{k>0} c_k F^k(aa)]
//!      + Σ_{a<b} q_a q_b [F⁰(ab) − Σ_k g_k G^k(ab)],
//! c_k = (2ℓ+1)/(4ℓ+1) (ℓ k ℓ; 000)², g_k = ½ (ℓ_a k ℓ_b; 000)².
//! Source: Slater, *Quantum Theory of Atomic Structure* (1960), vol. 1, chapter 14;
//! Cowan, *The Theory of Atomic Structure and Spectra* (1981), eqs. 6.38, 6.39.

use crate::angular::wigner_3j;

/// A multipole rank with its coefficient.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Rank {
    /// k.
    pub k: usize,
    /// Its coefficient.
    pub coefficient: f64,
}

/// (ℓ k ℓ′; 0 0 0)².
fn square(l: u8, k: u8, other: u8) -> f64 {
    let symbol = wigner_3j(
        2 * i32::from(l),
        2 * i32::from(k),
        2 * i32::from(other),
        0,
        0,
        0,
    );
    symbol * symbol
}

/// k = 2, 4, …, 2ℓ with c_k: the part of the interaction within a subshell beyond F⁰.
pub fn within(l: u8) -> Vec<Rank> {
    let factor = (2.0 * f64::from(l) + 1.0) / (4.0 * f64::from(l) + 1.0);
    ranks(2, l.saturating_mul(2), |k| factor * square(l, k, l))
}

/// k = |ℓ−ℓ′|, …, ℓ+ℓ′ with g_k: the exchange of two subshells.
pub fn exchange(l: u8, other: u8) -> Vec<Rank> {
    let highest = l.saturating_add(other);
    ranks(l.abs_diff(other), highest, |k| 0.5 * square(l, k, other))
}

fn ranks(lowest: u8, highest: u8, coefficient: impl Fn(u8) -> f64) -> Vec<Rank> {
    (lowest..=highest)
        .step_by(2)
        .map(|k| Rank {
            k: k.into(),
            coefficient: coefficient(k),
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn coefficients_are_those_of_the_tables() {
        // Slater (1960), vol. 1, chapter 14: p–p 2/25 F²; d–d 2/63 (F² + F⁴); s–p 1/6 G¹.
        let close = |a: f64, b: f64| (a - b).abs() < 1e-15;
        assert!(within(0).is_empty());
        assert!(close(within(1)[0].coefficient, 2.0 / 25.0));
        assert!(within(2).iter().all(|r| close(r.coefficient, 2.0 / 63.0)));
        assert!(close(exchange(0, 1)[0].coefficient, 1.0 / 6.0));
        assert!(close(exchange(0, 0)[0].coefficient, 0.5));
        let f_d = exchange(3, 2);
        assert_eq!(f_d.iter().map(|r| r.k).collect::<Vec<_>>(), [1, 3, 5]);
        assert!(close(f_d[0].coefficient, 3.0 / 70.0));
    }

    #[test]
    fn a_full_subshell_does_not_act_on_itself_twice() {
        // For a full subshell, (4ℓ+1) c_k must equal (4ℓ+2) g_k, and (4ℓ+2) g_0 must be 1.
        for l in 0..=10u8 {
            let electrons = 4.0 * f64::from(l) + 2.0;
            let own = exchange(l, l);
            assert!((own[0].coefficient * electrons - 1.0).abs() < 1e-14);
            for (c, g) in within(l).iter().zip(&own[1..]) {
                assert_eq!(c.k, g.k);
                let difference = (electrons - 1.0) * c.coefficient - electrons * g.coefficient;
                assert!(difference.abs() < 1e-14);
            }
        }
    }
}
