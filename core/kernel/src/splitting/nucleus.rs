//! The nucleus: its spin, its g and the constants A and B of each level.

use super::manifold::{Level, MOST_TWO_J};
use crate::constants::{NUCLEAR_MAGNETON_FREQUENCY, SPEED_OF_LIGHT};
use crate::problem::Problem;
use crate::quantity::TwiceJ;

/// c in MHz·cm: the frequency of 1 cm⁻¹, exact.
pub const MHZ_PER_WAVENUMBER: f64 = SPEED_OF_LIGHT.value * 1e-4;

/// μ_N/hc, cm⁻¹/T.
pub const NUCLEAR_MAGNETON_WAVENUMBER: f64 = NUCLEAR_MAGNETON_FREQUENCY.value / MHZ_PER_WAVENUMBER;

/// The largest |g_I|: that of ³He is 4.3, the proton's 5.6.
const MOST_G: f64 = 1000.0;

/// A nucleus with its interaction with each level of a manifold.
#[derive(Clone, Debug, PartialEq)]
pub struct Nucleus {
    /// 2I.
    pub two_i: i32,
    /// g_I = μ/(I μ_N), positive for a moment along the spin.
    pub g_i: f64,
    /// A of each level, cm⁻¹; levels beyond the list have none.
    pub magnetic_dipole: Vec<f64>,
    /// B of each level, cm⁻¹.
    pub electric_quadrupole: Vec<f64>,
}

impl Nucleus {
    /// A and B of a level.
    pub fn constants(&self, level: usize) -> (f64, f64) {
        let at = |list: &[f64]| list.get(level).copied().unwrap_or(0.0);
        (at(&self.magnetic_dipole), at(&self.electric_quadrupole))
    }

    /// # Errors
    /// `spin-out-of-range` for I below 0 or above 1000; `g-out-of-range`; `hyperfine-needs-momentum` for
    /// A with I or J = 0 and B with I or J below 1; `constant-not-finite`; `constants-differ` for a constant
    /// of a level that is not there.
    pub(super) fn check(&self, levels: &[Level]) -> Result<(), Problem> {
        let spin = TwiceJ::from_doubled(self.two_i);
        if !(0..=MOST_TWO_J).contains(&self.two_i) {
            let message = format!("There is no nuclear spin {spin}.");
            return Err(Problem::new("spin-out-of-range", message, 0, 0).bound("0, 1/2, 1 …"));
        }
        if !(-MOST_G..=MOST_G).contains(&self.g_i) {
            let message = format!("g_I = {} is out of range.", self.g_i);
            return Err(Problem::new("g-out-of-range", message, 0, 0)
                .bound(format!("|g_I| at most {MOST_G}")));
        }
        let most = self
            .magnetic_dipole
            .len()
            .max(self.electric_quadrupole.len());
        if most > levels.len() {
            let message = format!(
                "There are constants of {most} levels, and {} levels.",
                levels.len()
            );
            return Err(Problem::new("constants-differ", message, 0, 0));
        }
        for (place, level) in levels.iter().enumerate() {
            let (a, b) = self.constants(place);
            if !a.is_finite() || !b.is_finite() {
                let message = "A constant of a level has no finite value.";
                return Err(Problem::new("constant-not-finite", message, 0, 0));
            }
            let smallest = self.two_i.min(level.two_j);
            let (name, bound) = match (a != 0.0 && smallest < 1, b != 0.0 && smallest < 2) {
                (true, _) => ("A", "I and J at least 1/2"),
                (_, true) => ("B", "I and J at least 1"),
                _ => continue,
            };
            let j = TwiceJ::from_doubled(level.two_j);
            let message =
                format!("A level of J = {j} has no constant {name} with a nucleus of spin {spin}.");
            return Err(Problem::new("hyperfine-needs-momentum", message, 0, 0).bound(bound));
        }
        Ok(())
    }
}

/// A K/2 + B [3K(K+1)/4 − I(I+1)J(J+1)] / [2I(2I−1)J(2J−1)], K = F(F+1) − I(I+1) − J(J+1), in the unit of
/// A and B; the second term only where I and J are at least 1.
///
/// Source: Casimir, *On the Interaction between Atomic Nuclei and Electrons* (1936); the mean of
/// A I·J + B [3(I·J)² + (3/2) I·J − I(I+1)J(J+1)] / [2I(2I−1)J(2J−1)].
pub fn casimir(two_i: i32, two_j: i32, two_f: i32, a: f64, b: f64) -> f64 {
    // X(X+1) of a doubled X.
    let square = |two: i32| f64::from(two) * (f64::from(two) + 2.0) / 4.0;
    let (i, j) = (square(two_i), square(two_j));
    let k = square(two_f) - i - j;
    let dipole = a * k / 2.0;
    if two_i < 2 || two_j < 2 {
        return dipole;
    }
    let (i2, j2) = (f64::from(two_i), f64::from(two_j));
    // 2I(2I−1)J(2J−1).
    let whole = i2 * (i2 - 1.0) * j2 * (j2 - 1.0) / 2.0;
    dipole + b * (0.75 * k * (k + 1.0) - i * j) / whole
}
