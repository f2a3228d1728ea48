//! Oscillator strength and transition probability of a line from its line strength S.
//!
//! In atomic units, with ω the energy of the line in hartree,
//!
//! A(E1) = (4/3) α³ ω³ S/g_u, S in e²a₀²;
//! A(M1) = (1/3) α⁵ ω³ S/g_u, S in μ_B² (μ_B is half the atomic unit of the magnetic moment);
//! A(E2) = (1/15) α⁵ ω⁵ S/g_u, S in e²a₀⁴ with the operator Σ r² C²;
//!
//! and for each of them gf = g_l f(absorption) = g_u A/(2 α³ ω²), which is (2/3) ω S for E1. The unit
//! of a rate is E_h/ħ = 2πc · E_h/hc.
//!
//! Source: Martin & Wiese, "Atomic spectroscopy", in *Springer Handbook of Atomic, Molecular, and
//! Optical Physics* (2006), sect. 10.17; Cowan, *The Theory of Atomic Structure and Spectra* (1981),
//! ch. 14 and 15. Their numerical factors are those of [`wavelength_factor`], to their digits.
//!
//! The factors are good to the uncertainty of α, 1e-9; no refractive index is in them, so they are
//! for atoms in a vacuum or a thin gas.

use super::Multipole;
use crate::constants::{BOHR_RADIUS, FINE_STRUCTURE, HARTREE_WAVENUMBER, SPEED_OF_LIGHT};
use core::f64::consts::PI;

/// What a line strength gives.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Rates {
    /// Weighted oscillator strength, the same for absorption and emission.
    pub gf: f64,
    /// Oscillator strength in absorption.
    pub f: f64,
    /// Probability of spontaneous emission, s⁻¹.
    pub a: f64,
}

/// gf, f and A of a line.
///
/// `strength` is S in the unit of the module's head, `wavenumber` that in vacuum in cm⁻¹, the weights
/// are 2J + 1, or those of all states that S was summed over. Nothing unless wavenumber and weights
/// are above zero, S is not negative and all results are finite.
#[must_use]
pub fn rates(
    multipole: Multipole,
    strength: f64,
    wavenumber: f64,
    upper_weight: f64,
    lower_weight: f64,
) -> Option<Rates> {
    if !(wavenumber > 0.0 && upper_weight > 0.0 && lower_weight > 0.0 && strength >= 0.0) {
        return None;
    }
    let energy = wavenumber / HARTREE_WAVENUMBER.value;
    let alpha = FINE_STRUCTURE.value;
    // αω = 2πa₀/λ.
    let phase = alpha * energy;
    let cube = phase * phase * phase;
    let weighted = atomic(multipole, phase) * cube * strength;
    let gf = weighted / (2.0 * alpha * phase * phase);
    let found = Rates {
        gf,
        f: gf / lower_weight,
        a: weighted * atomic_rate() / upper_weight,
    };
    [found.gf, found.f, found.a]
        .iter()
        .all(|value| value.is_finite())
        .then_some(found)
}

/// g_u A/S over (αω)³, in atomic units.
fn atomic(multipole: Multipole, phase: f64) -> f64 {
    let alpha = FINE_STRUCTURE.value;
    match multipole {
        Multipole::E1 => 4.0 / 3.0,
        Multipole::M1 => alpha * alpha / 3.0,
        Multipole::E2 => phase * phase / 15.0,
    }
}

/// E_h/ħ in s⁻¹.
fn atomic_rate() -> f64 {
    2.0 * PI * SPEED_OF_LIGHT.value * 100.0 * HARTREE_WAVENUMBER.value
}

/// The factor C of A = C S/(g_u λᵖ), λ in Å in vacuum, p = 3 for E1 and M1, 5 for E2; A in s⁻¹.
#[must_use]
pub fn wavelength_factor(multipole: Multipole) -> f64 {
    // αωλ.
    let phase = 2.0 * PI * BOHR_RADIUS.value * 1e10;
    atomic(multipole, phase) * phase * phase * phase * atomic_rate()
}

/// How a level decays.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Decay {
    /// Sum of the transition probabilities to all lower levels that were given, s⁻¹.
    pub rate: f64,
}

impl Decay {
    /// τ = 1/ΣA in s; nothing for a level without a decay, whose lifetime these lines do not set.
    #[must_use]
    pub fn lifetime(self) -> Option<f64> {
        let lifetime = 1.0 / self.rate;
        (self.rate > 0.0 && lifetime.is_finite()).then_some(lifetime)
    }

    /// A/ΣA of one line; zero for a level without a decay.
    #[must_use]
    pub fn branching(self, a: f64) -> f64 {
        if self.rate > 0.0 { a / self.rate } else { 0.0 }
    }
}

/// The decay of each of `levels` levels, from the place of the upper level and A of every line.
///
/// A level's lines of all multipoles have to be among them, for what is missing is missing in its
/// lifetime. Lines of a place outside are passed over.
#[must_use]
pub fn decays(levels: usize, lines: impl IntoIterator<Item = (usize, f64)>) -> Vec<Decay> {
    let mut found = vec![Decay::default(); levels];
    for (upper, a) in lines {
        if let Some(decay) = found.get_mut(upper) {
            decay.rate += a;
        }
    }
    found
}
