//! How much a column of atoms absorbs at the centre of a line, and what light saturates it.
//!
//! σ₀ = π r_e c f φ(0), r_e = α² a₀: the cross-section at the centre. The profile in frequency is
//! Voigt's, of the Doppler width and of the natural width of both levels:
//! φ(0) = e^(a²) erfc(a)/(√π w), w = ν √(2kT/Mc²), a = (1/τ_u + 1/τ_l)/(4πw).
//!
//! Source: Thorne, Litzén & Johansson, *Spectrophysics* (1999), ch. 8; Mitchell & Zemansky,
//! *Resonance Radiation and Excited Atoms* (1934), ch. III.

use crate::constants::{
    ATOMIC_MASS, BOHR_RADIUS, BOLTZMANN, FINE_STRUCTURE, PLANCK, SPEED_OF_LIGHT,
};
use core::f64::consts::PI;

/// Beyond this argument the continued fraction of the error function is the exact way.
const LARGE: f64 = 4.0;

/// The Doppler width of a line, full at half height, in the unit of `wavenumber`:
/// σ √(8 ln 2 · kT/Mc²), temperature in K, mass of the atom in u. Nothing unless all are above zero.
#[must_use]
pub fn doppler_width(wavenumber: f64, temperature: f64, mass: f64) -> Option<f64> {
    let width = wavenumber * 2.0 * libm::log(2.0).sqrt() * thermal_speed(temperature, mass)?;
    (width > 0.0 && width.is_finite()).then_some(width)
}

/// √(2kT/M)/c.
fn thermal_speed(temperature: f64, mass: f64) -> Option<f64> {
    let c = SPEED_OF_LIGHT.value;
    let square = 2.0 * BOLTZMANN.value * temperature / (mass * ATOMIC_MASS.value * c * c);
    (temperature > 0.0 && mass > 0.0 && square.is_finite()).then(|| square.sqrt())
}

/// σ₀ in m² at the centre of a line of oscillator strength f; formula of the module's head.
///
/// `wavenumber` in cm⁻¹, temperature in K, mass of the atom in u, `decay` = 1/τ_u + 1/τ_l in s⁻¹.
/// Broadening by pressure, by fields and by hyperfine structure is left out: each makes it smaller.
/// Nothing unless wavenumber, temperature and mass are above zero, f and the decay not below it, and
/// the result finite. Error 1e-14 of the formula.
#[must_use]
pub fn centre_cross_section(
    f: f64,
    wavenumber: f64,
    temperature: f64,
    mass: f64,
    decay: f64,
) -> Option<f64> {
    if !(f >= 0.0 && wavenumber > 0.0 && decay >= 0.0) {
        return None;
    }
    let c = SPEED_OF_LIGHT.value;
    let width = wavenumber * 100.0 * c * thermal_speed(temperature, mass)?;
    let profile = scaled_erfc(decay / (4.0 * PI * width)) / (PI.sqrt() * width);
    let alpha = FINE_STRUCTURE.value;
    let radius = alpha * alpha * BOHR_RADIUS.value;
    let section = PI * radius * c * f * profile;
    section.is_finite().then_some(section)
}

/// e^(x²) erfc(x) for x ≥ 0; beyond [`LARGE`] by its continued fraction
/// 1/√π · 1/(x + (1/2)/(x + 1/(x + (3/2)/(x + …)))) (Abramowitz & Stegun 7.1.14).
fn scaled_erfc(x: f64) -> f64 {
    if x <= LARGE {
        return libm::exp(x * x) * libm::erfc(x);
    }
    let fraction = (1..=60)
        .rev()
        .fold(x, |below, half| x + 0.5 * f64::from(half) / below);
    1.0 / (fraction * PI.sqrt())
}

/// The optical depth τ₀ = σ₀ N (x_l − x_u g_l/g_u) at the centre of a line.
///
/// σ₀ in m², N atoms per m² in the line of sight, x the shares of them in the lower and upper level
/// and g the weights of these: stimulated emission is taken off, so that a population turned upside
/// down gives a negative depth. Nothing unless the result is finite.
#[must_use]
pub fn optical_depth(
    cross_section: f64,
    column: f64,
    (lower_share, lower_weight): (f64, f64),
    (upper_share, upper_weight): (f64, f64),
) -> Option<f64> {
    let net = lower_share - upper_share * lower_weight / upper_weight;
    let depth = cross_section * column * net;
    (upper_weight > 0.0 && depth.is_finite()).then_some(depth)
}

/// The intensity, W/m², of light tuned to the line and narrower than it, at which the difference of
/// the populations (each over its weight) is half of what it is without light.
///
/// I = hν ΣA/[σ_n (1 + g_l/g_u)], σ_n = (g_u/g_l) (λ²/2π) A/ΣA: for atoms at rest that only decay to
/// the lower level, in light of all directions of polarisation alike (the two-level formula
/// πhc ΣA/λ³ for equal weights; a cycle between two sublevels has a third of it). `decay` is ΣA of
/// the upper level.
///
/// Nothing unless wavenumber (cm⁻¹), A, ΣA and the weights are above zero. Source: Hilborn, Am. J.
/// Phys. 50, 982 (1982); Siegman, *Lasers* (1986), ch. 7.
#[must_use]
pub fn saturation_intensity(
    wavenumber: f64,
    a: f64,
    decay: f64,
    lower_weight: f64,
    upper_weight: f64,
) -> Option<f64> {
    let positive = [wavenumber, a, decay, lower_weight, upper_weight];
    if !positive.iter().all(|&value| value > 0.0) {
        return None;
    }
    let per_metre = wavenumber * 100.0;
    let photon = PLANCK.value * SPEED_OF_LIGHT.value * per_metre;
    let weights = upper_weight / lower_weight;
    let section = weights / (2.0 * PI * per_metre * per_metre) * (a / decay);
    let intensity = photon * decay / (section * (1.0 + 1.0 / weights));
    intensity.is_finite().then_some(intensity)
}
