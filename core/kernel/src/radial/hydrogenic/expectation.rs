//! ⟨r^k⟩ of a hydrogenic orbital in closed form.

use super::{Hydrogenic, power};
use crate::problem::Problem;

/// The lowest k of ⟨r^k⟩.
pub const LOWEST_POWER: i32 = -4;

/// The highest k of ⟨r^k⟩.
pub const HIGHEST_POWER: i32 = 4;

impl Hydrogenic {
    /// ⟨r^k⟩ in a₀^k, −4 ≤ k ≤ 4; nothing where the integral diverges (k ≤ −2ℓ − 3).
    ///
    /// For Z = 1, with Λ = ℓ(ℓ+1):
    /// - ⟨r⟩ = (3n² − Λ)/2
    /// - ⟨r²⟩ = n²(5n² + 1 − 3Λ)/2
    /// - ⟨r³⟩ = n²[35n²(n²−1) − 30n²(Λ−2) + 3Λ(Λ−2)]/8
    /// - ⟨r⁴⟩ = n⁴[63n⁴ − 35n²(2Λ−3) + 5Λ(3Λ−10) + 12]/8
    /// - ⟨r⁻¹⟩ = 1/n², ⟨r⁻²⟩ = 2/[n³(2ℓ+1)], ⟨r⁻³⟩ = 2/[n³(2ℓ+1)Λ]
    /// - ⟨r⁻⁴⟩ = 4(3n² − Λ)/[n⁵ (2ℓ−1)(2ℓ+1)(2ℓ+3)Λ]
    ///
    /// Numerators and denominators are whole numbers below 2⁵³ up to n = 50, so that for Z = 1 the
    /// quotient is rounded once.
    ///
    /// Source: Bethe & Salpeter, *Quantum Mechanics of One- and Two-Electron Atoms* (1957), eqs.
    /// 3.20–3.26.
    ///
    /// # Errors
    /// `radial-power-out-of-range` for another k.
    pub fn expectation(&self, k: i32) -> Result<Option<f64>, Problem> {
        let (n, l) = (i64::from(self.n), i64::from(self.l));
        let (square, lambda) = (n * n, l * (l + 1));
        let odd = (2 * l - 1) * (2 * l + 1) * (2 * l + 3);
        let (numerator, denominator) = match k {
            0 => (1, 1),
            1 => (3 * square - lambda, 2),
            2 => (square * (5 * square + 1 - 3 * lambda), 2),
            3 => (
                square
                    * (35 * square * (square - 1) - 30 * square * (lambda - 2)
                        + 3 * lambda * (lambda - 2)),
                8,
            ),
            4 => (
                square
                    * square
                    * (63 * square * square - 35 * square * (2 * lambda - 3)
                        + 5 * lambda * (3 * lambda - 10)
                        + 12),
                8,
            ),
            -1 => (1, square),
            -2 => (2, n * square * (2 * l + 1)),
            -3 => (2, n * square * (2 * l + 1) * lambda),
            -4 => (
                4 * (3 * square - lambda),
                n * square * square * odd * lambda,
            ),
            _ => return Err(power_out_of_range(k)),
        };
        if denominator == 0 {
            return Ok(None);
        }
        Ok(Some(
            numerator as f64 / denominator as f64 / power(self.z, k),
        ))
    }
}

#[inline(never)]
fn power_out_of_range(k: i32) -> Problem {
    Problem::new(
        "radial-power-out-of-range",
        format!("The mean of r to the power {k} is not computed."),
        0,
        0,
    )
    .bound("The power is between -4 and 4.")
}
