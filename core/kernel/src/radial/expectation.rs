//! Expectation values of powers of r, and P at chosen radii.

use super::hartree_fock::{RadialOrbital, Solution};
use crate::configuration::Orbital;
use crate::constants::FINE_STRUCTURE;

/// The powers of r whose expectation values are computed.
pub const POWERS: core::ops::RangeInclusive<i32> = -3..=2;

impl Solution {
    /// ⟨r^k⟩ = ∫ P² r^k dr in a₀^k for k = −3…2; nothing for other k and for ⟨r⁻³⟩ of an s orbital,
    /// which diverges.
    pub fn expectation(&self, orbital: &RadialOrbital, k: i32) -> Option<f64> {
        if !POWERS.contains(&k) || (k == -3 && orbital.orbital.l() == 0) {
            return None;
        }
        let power = |r: f64| match k {
            -3 => 1.0 / (r * r * r),
            -2 => 1.0 / (r * r),
            -1 => 1.0 / r,
            0 => 1.0,
            1 => r,
            _ => r * r,
        };
        let parts = orbital.p.iter().zip(self.mesh.radii());
        Some(self.mesh.integral(parts.map(|(p, &r)| p * p * power(r))))
    }

    /// By which part the electrons weaken a magnetic field at the nucleus: σ = α²/3 Σ N⟨1/r⟩ with r in a₀, over all
    /// electrons (Lamb, Phys. Rev. 60, 817 (1941)).
    pub fn shielding(&self) -> f64 {
        let of = |orbital| self.expectation(orbital, -1).unwrap_or(0.0);
        let parts = self.orbitals.iter().map(|o| f64::from(o.electrons) * of(o));
        FINE_STRUCTURE.value * FINE_STRUCTURE.value / 3.0 * parts.sum::<f64>()
    }

    /// The largest ⟨r⟩ of these orbitals, a₀: the usual cut-off of core polarisation, the orbitals being
    /// the core's (Migdalek and Baylis, J. Phys. B 11, L497 (1978)); 0 where none is occupied.
    pub fn core_radius(&self, core: &[Orbital]) -> f64 {
        let means = core
            .iter()
            .filter_map(|&o| self.expectation(self.orbital(o)?, 1));
        means.fold(0.0, f64::max)
    }

    /// P at a radius, zero outside the box.
    pub fn p_at(&self, orbital: &RadialOrbital, r: f64) -> f64 {
        self.mesh.basis().evaluate(&orbital.coefficients, r)
    }

    /// The radius and the height of the largest maximum of P², a₀ and a₀⁻¹.
    ///
    /// Between the neighbours of the largest value on the mesh by golden sections; the radius is good
    /// to a part in 10⁷, for P² is flat there.
    pub fn most_probable(&self, orbital: &RadialOrbital) -> (f64, f64) {
        let mut best = (0, 0.0);
        for (place, p) in orbital.p.iter().enumerate() {
            if p.abs() > best.1 {
                best = (place, p.abs());
            }
        }
        let radii = self.mesh.radii();
        let at = |place: Option<usize>| place.and_then(|i| radii.get(i).copied());
        let mut left = at(best.0.checked_sub(1)).unwrap_or(0.0);
        let mut right = at(best.0.checked_add(1)).unwrap_or(self.mesh.end());
        let density = |r: f64| self.p_at(orbital, r) * self.p_at(orbital, r);
        const GOLDEN: f64 = 0.618_033_988_749_894_9;
        for _ in 0..45 {
            let step = GOLDEN * (right - left);
            if density(right - step) < density(left + step) {
                left = right - step;
            } else {
                right = left + step;
            }
        }
        let r = 0.5 * (left + right);
        (r, density(r))
    }
}
