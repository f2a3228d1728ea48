//! Angular coefficients of the spin–orbit parameter ζ with two-electron screening.
//!
//! The Breit–Pauli spin–own-orbit and spin–other-orbit interactions of two electrons are
//! H = (α²/2) Σ_{i≠j} [∇ᵢ(1/r_ij) × pᵢ]·(sᵢ + 2sⱼ) in atomic units. Summed over the electrons of a
//! closed shell b they act on an electron a as ζ_ab ℓ·s. With λ = ℓ(ℓ+1), λ_k = k(k+1) and
//! w_k = (ℓ_a k ℓ_b; 0 0 0)², the expansion of 1/r₁₂ in multipoles gives
//!
//! ```text
//! ζ_ab = −4(2ℓ_b+1) N⁰(ab,ab) − 3 (2ℓ_b+1)/λ_a Σ_k w_k {
//!            [(λ_a+λ_k−λ_b) − (k+1)(3λ_a+λ_b−λ_k)] N^k(ab,ba)
//!          + [(λ_a+λ_k−λ_b) +   k  (3λ_a+λ_b−λ_k)] N^{k−2}(ab,ba)
//!          −  (λ_a+λ_k−λ_b) V^k(ab,ba) }
//! ```
//!
//! The direct spin–other-orbit part of a closed shell is zero, for it carries no current; in the
//! exchange part sᵢ + 2sⱼ becomes 3s.
//!
//! Radial integrals, in hartree, P = r·R:
//! - N^k(ab,cd) = (α²/4) ∫₀^∞ dr₁ P_a(r₁) P_c(r₁) r₁^{−k−3} ∫₀^{r₁} dr₂ P_b(r₂) P_d(r₂) r₂^k.
//!   In N^k(ab,ba) both products are P_a P_b. k = −1 occurs where |ℓ_a − ℓ_b| = 1; the inner
//!   integrand P_a P_b / r₂ is regular at the origin.
//! - V^k(ab,ba) = (α²/4) ∫₀^∞ dr₁ [P_a(r₁) P_b′(r₁) − P_a′(r₁) P_b(r₁)] r₁⁻¹ ·
//!   ∫₀^∞ dr₂ P_a(r₂) P_b(r₂) r_<^k / r_>^{k+1}; the prime is d/dr. It changes its sign when a and
//!   b change places.
//!
//! So ζ_a = (α²/2) ⟨a| r⁻¹ dV_nucleus/dr |a⟩ + Σ_b share_b · ζ_ab, the first term being
//! (α²/2) Z ⟨r⁻³⟩ for a point nucleus, and share_b
//! - 1 for a closed shell b: exact;
//! - N_b/(4ℓ_b+2) for another open shell b: its spherical average; what depends on the coupling of
//!   the two open shells is left out;
//! - [`equivalent_share`] for b = a, the other electrons of the open shell itself.
//!
//! Source: Blume & Watson, Proc. R. Soc. Lond. A 270, 127 (1962) and 271, 565 (1963), for the
//! interaction and its treatment; the coefficients are derived anew as written here, and a test
//! compares them with sums over Slater determinants.

use crate::angular::wigner_3j;

/// Below every coefficient that is not zero, above the rounding of one that is.
const TINY: f64 = 1e-9;

/// One radial integral with its coefficient in ζ.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Term {
    /// Rank k of N^k or V^k, −1 at least.
    pub k: i32,
    /// What the integral is multiplied by.
    pub coefficient: f64,
}

/// ζ_ab = direct · N⁰(ab,ab) + Σ exchange_n N^k(ab,ba) + Σ exchange_v V^k(ab,ba).
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Coefficients {
    /// Of N⁰(ab,ab): −4(2ℓ_b+1), −2 for each electron of the closed shell.
    pub direct: f64,
    /// Of N^k(ab,ba), k rising; zero coefficients left out.
    pub exchange_n: Vec<Term>,
    /// Of V^k(ab,ba), k rising; zero coefficients left out.
    pub exchange_v: Vec<Term>,
}

/// Coefficients of ζ of an electron ℓ_a from one full shell ℓ_b, by the formula of the module's head.
///
/// For the open shell itself take ℓ_b = ℓ_a, P_b = P_a: every V^k is zero then, and the result times
/// [`equivalent_share`] is what the other equivalent electrons do. All zero for an s electron.
#[must_use]
pub fn closed_shell(l_open: u8, l_closed: u8) -> Coefficients {
    if l_open == 0 {
        return Coefficients::default();
    }
    let (a, b) = (i32::from(l_open), i32::from(l_closed));
    let (lambda_a, lambda_b) = (square(a), square(b));
    let electrons = f64::from(2 * b + 1);
    let mut result = Coefficients {
        direct: -4.0 * electrons,
        ..Coefficients::default()
    };
    let mut k = (a - b).abs();
    while k <= a + b {
        let symbol = wigner_3j(2 * a, 2 * k, 2 * b, 0, 0, 0);
        let scale = -3.0 * electrons * symbol * symbol / f64::from(lambda_a);
        let derivative = lambda_a + square(k) - lambda_b;
        let force = 3 * lambda_a + lambda_b - square(k);
        let lower = derivative + k * force;
        let upper = derivative - (k + 1) * force;
        add(&mut result.exchange_n, k - 2, scale * f64::from(lower));
        add(&mut result.exchange_n, k, scale * f64::from(upper));
        add(&mut result.exchange_v, k, -scale * f64::from(derivative));
        k += 2;
    }
    // Zeros by cancellation leave a few units of the last place.
    result
        .exchange_n
        .retain(|term| term.coefficient.abs() > TINY);
    result
        .exchange_v
        .retain(|term| term.coefficient.abs() > TINY);
    result
}

/// (N−1)/4ℓ, at most 1: how much of a full shell's ζ_aa the other N−1 electrons of ℓ^N amount to.
///
/// It is the one-body part of the two-electron operator within ℓ^N (what is left has no trace with
/// Σ ℓ·s in the configuration). Exact for one electron and for one hole, N = 4ℓ+1; in between the
/// levels also feel a two-body part that no ζ describes, which is left out. A full shell counts
/// like one hole: its ζ is the one of a hole in it with the same radial functions.
#[must_use]
pub fn equivalent_share(l: u8, electrons: u32) -> f64 {
    if l == 0 {
        return 0.0;
    }
    let others = f64::from(electrons.saturating_sub(1));
    (others / f64::from(4 * u32::from(l))).min(1.0)
}

/// ℓ(ℓ+1).
fn square(l: i32) -> i32 {
    l * (l + 1)
}

/// Adds a coefficient to the term of rank k; ranks come in rising order.
fn add(terms: &mut Vec<Term>, k: i32, coefficient: f64) {
    match terms.last_mut() {
        Some(last) if last.k == k => last.coefficient += coefficient,
        _ => terms.push(Term { k, coefficient }),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_hole_in_a_p_shell_is_screened_by_six_n0() {
        // −12 N⁰ direct, +6 N⁰ by exchange: only N⁰ remains in a p shell.
        let own = closed_shell(1, 1);
        assert_eq!(own.exchange_n.len(), 1);
        let only = own
            .exchange_n
            .first()
            .map(|term| (term.k, term.coefficient));
        let (k, exchange) = only.unwrap_or((-9, 0.0));
        assert_eq!(k, 0);
        assert!((own.direct + exchange + 6.0).abs() < 1e-14);
    }

    #[test]
    fn any_pair_of_shells_has_an_answer() {
        for a in [0, 1, 2, 7, 49, u8::MAX] {
            for b in [0, 1, a, 49] {
                let all = closed_shell(a, b);
                let terms = all.exchange_n.iter().chain(&all.exchange_v);
                assert!(
                    terms
                        .into_iter()
                        .all(|t| t.coefficient.is_finite() && t.k >= -1)
                );
            }
        }
        assert_eq!(equivalent_share(1, 0), 0.0);
        assert_eq!(equivalent_share(1, 5), 1.0);
        assert_eq!(equivalent_share(2, u32::MAX), 1.0);
    }
}
