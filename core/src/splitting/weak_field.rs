//! The linear Zeeman pattern of a line: field so weak that J stays good, E = E₀ + g μ_B B M
//! (Condon & Shortley 1935, ch. XVI; Cowan 1981, ch. 17).
//!
//! Each pair of states M, M′ is a component at (g M − g′ M′) μ_B B with the strength
//! (J k J′; −M q M′)², q = M − M′ and k the rank: π for q = 0, σ± for q = ±1, and for quadrupoles
//! q = ±2. These sum to 1 over the line and to 1/(2k + 1) for each q.
//!
//! Seen at an angle to the field each q is weighted by its own directions, so that the whole line
//! stays 1. E1 and M1 are seen alike without a polariser.

use super::seen::{Polariser, weight};
use super::wigner_eckart::{dipole_share, quadrupole_share};
use crate::constants::BOHR_MAGNETON_WAVENUMBER;
use crate::numerics::order::sort_by;
use crate::problem::Problem;
use crate::quantity::TwiceJ;
use crate::radiation::Multipole;

/// c in GHz per cm⁻¹, exact: 10⁻⁷ of its value in m/s.
const GHZ_PER_CM: f64 = 29.979_245_8;

/// The most components that one line may have.
pub const MAX_COMPONENTS: i64 = 20_000;

/// Largest |g|, in magnitude far above that of any level of an atom.
pub const MAX_G: f64 = 1.0e3;

/// Largest flux density, in tesla.
pub const MAX_TESLA: f64 = 1.0e6;

/// Offsets this close, in μ_B B, are one place: far below what any g is known to.
const SAME_PLACE: f64 = 1e-9;

/// A level in the field.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct SplitLevel {
    /// J.
    pub j: TwiceJ,
    /// g; its value does not matter for J = 0.
    pub g: f64,
}

/// π, σ+ or σ−, by M_upper − M_lower = 0, +1, −1; E2 has ±2 besides.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Polarisation {
    /// M_upper − M_lower = −2, E2 only.
    MinusTwo,
    /// M_upper − M_lower = −1.
    SigmaMinus,
    /// M_upper = M_lower.
    Pi,
    /// M_upper − M_lower = +1.
    SigmaPlus,
    /// M_upper − M_lower = +2, E2 only.
    PlusTwo,
}

impl Polarisation {
    /// ASCII: `pi`, `sigma+`, `sigma-`, for E2 also `delta-M+2`, `delta-M-2`.
    pub fn name(self) -> &'static str {
        match self {
            Polarisation::MinusTwo => "delta-M-2",
            Polarisation::PlusTwo => "delta-M+2",
            Polarisation::SigmaMinus => "sigma-",
            Polarisation::Pi => "pi",
            Polarisation::SigmaPlus => "sigma+",
        }
    }

    /// M_upper − M_lower.
    pub fn change_of_m(self) -> i32 {
        match self {
            Polarisation::MinusTwo => -2,
            Polarisation::SigmaMinus => -1,
            Polarisation::Pi => 0,
            Polarisation::SigmaPlus => 1,
            Polarisation::PlusTwo => 2,
        }
    }
}

/// One component.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Component {
    /// By M_upper − M_lower.
    pub polarisation: Polarisation,
    /// M of the upper level.
    pub m_upper: TwiceJ,
    /// M of the lower level.
    pub m_lower: TwiceJ,
    /// Offset from the line in units of μ_B B (Lorentz units): g M − g′ M′.
    pub lorentz: f64,
    /// Strength over all directions, 1 for the line.
    pub strength: f64,
    /// The radiation, which decides how it is seen.
    multipole: Multipole,
}

/// Components that coincide.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Position {
    /// π, σ+ or σ−.
    pub polarisation: Polarisation,
    /// Offset in units of μ_B B.
    pub lorentz: f64,
    /// Their strength together.
    pub strength: f64,
    /// How many there are.
    pub components: u32,
}

/// The pattern of a line.
#[derive(Clone, Debug, PartialEq)]
pub struct Pattern {
    /// The radiation.
    pub multipole: Multipole,
    /// By rising M_upper − M_lower, then by rising M of the upper level.
    pub components: Vec<Component>,
}

/// The pattern of a line between two levels.
///
/// Errors: `pattern-no-line` where J and J′ forbid the line;
/// `pattern-negative-j`; `pattern-too-large` above 20 000 components; `g-out-of-range`.
pub fn pattern(
    upper: SplitLevel,
    lower: SplitLevel,
    multipole: Multipole,
) -> Result<Pattern, Problem> {
    check(upper, lower, multipole)?;
    let (a, b) = (upper.j.doubled(), lower.j.doubled());
    let rank = multipole.rank();
    let mut components = Vec::new();
    for polarisation in [
        Polarisation::MinusTwo,
        Polarisation::SigmaMinus,
        Polarisation::Pi,
        Polarisation::SigmaPlus,
        Polarisation::PlusTwo,
    ] {
        for m in (-a..=a).step_by(2) {
            let n = m - 2 * polarisation.change_of_m();
            let strength = match rank {
                1 => dipole_share(a, m, b, n),
                _ => quadrupole_share(a, m, b, n),
            };
            if strength > 0.0 {
                let (m_upper, m_lower) = (TwiceJ::from_doubled(m), TwiceJ::from_doubled(n));
                components.push(Component {
                    polarisation,
                    m_upper,
                    m_lower,
                    // A sum with +0 has no negative zero.
                    lorentz: energy(upper, m_upper) - energy(lower, m_lower) + 0.0,
                    strength,
                    multipole,
                });
            }
        }
    }
    Ok(Pattern {
        multipole,
        components,
    })
}

/// g M, the energy of a state in units of μ_B B.
pub fn energy(level: SplitLevel, m: TwiceJ) -> f64 {
    if level.j.doubled() == 0 {
        return 0.0;
    }
    level.g * m.value()
}

/// The states of a level: M falling from J with their energies in units of μ_B B.
///
/// Errors: `pattern-negative-j`, `pattern-too-large`, `g-out-of-range`.
pub fn states(level: SplitLevel) -> Result<Vec<(TwiceJ, f64)>, Problem> {
    check_level(level)?;
    let two_j = level.j.doubled();
    let projections = (-two_j..=two_j).rev().step_by(2).map(TwiceJ::from_doubled);
    Ok(projections.map(|m| (m, energy(level, m))).collect())
}

fn check_level(level: SplitLevel) -> Result<(), Problem> {
    let j = level.j;
    if j.doubled() < 0 {
        return Err(
            Problem::new("pattern-negative-j", format!("J = {j} is negative."), 0, 0)
                .bound("J = 0, 1/2, 1 …"),
        );
    }
    if i64::from(j.doubled()) + 1 > MAX_COMPONENTS / 3 {
        return Err(Problem::new(
            "pattern-too-large",
            format!("J = {j} has too many states."),
            0,
            0,
        )
        .bound(format!("at most {MAX_COMPONENTS} components")));
    }
    // No range contains a NaN.
    if j.doubled() > 0 && !(-MAX_G..=MAX_G).contains(&level.g) {
        return Err(Problem::new(
            "g-out-of-range",
            format!("g = {} is out of range.", level.g),
            0,
            0,
        )
        .bound(format!("|g| at most {MAX_G}")));
    }
    Ok(())
}

fn check(upper: SplitLevel, lower: SplitLevel, multipole: Multipole) -> Result<(), Problem> {
    check_level(upper)?;
    check_level(lower)?;
    let (a, b) = (upper.j.doubled(), lower.j.doubled());
    let rank = if multipole == Multipole::E2 { 2 } else { 1 };
    if (a - b).abs() > 2 * rank || (a - b) % 2 != 0 || a + b < 2 * rank {
        return Err(Problem::new(
            "pattern-no-line",
            format!(
                "there is no {multipole} line from J = {} to J = {}.",
                upper.j, lower.j
            ),
            0,
            0,
        )
        .bound(format!(
            "J changes by at most {rank}, and both J together are at least {rank}"
        )));
    }
    Ok(())
}

impl Component {
    /// What is seen of it at the angle between field and line of sight, in degrees, without polariser.
    pub fn seen(&self, angle_degrees: f64) -> f64 {
        let q = self.polarisation.change_of_m();
        self.strength * weight(self.multipole, q, angle_degrees, Polariser::None)
    }

    /// What is seen along the field.
    pub fn along(&self) -> f64 {
        self.seen(0.0)
    }

    /// What is seen across the field.
    pub fn across(&self) -> f64 {
        self.seen(90.0)
    }
}

impl Pattern {
    /// Components that coincide taken together, by polarisation, then by rising offset. Offsets are
    /// equal within 10⁻⁹ μ_B B.
    pub fn positions(&self) -> Vec<Position> {
        let mut sorted = self.components.clone();
        sort_by(&mut sorted, |a, b| {
            let order = a.polarisation.cmp(&b.polarisation);
            order.then(a.lorentz.total_cmp(&b.lorentz))
        });
        let mut positions: Vec<Position> = Vec::new();
        for c in sorted {
            match positions.last_mut() {
                Some(last)
                    if last.polarisation == c.polarisation
                        && c.lorentz - last.lorentz <= SAME_PLACE =>
                {
                    last.strength += c.strength;
                    last.components = last.components.saturating_add(1);
                }
                _ => positions.push(Position {
                    polarisation: c.polarisation,
                    lorentz: c.lorentz,
                    strength: c.strength,
                    components: 1,
                }),
            }
        }
        positions
    }

    /// Whether it is the normal triplet: π at the line and σ± at ±μ_B B, which both need g = 1.
    pub fn is_normal_triplet(&self) -> bool {
        let positions = self.positions();
        let at_step = |p: &Position| {
            let step = f64::from(p.polarisation.change_of_m());
            (p.lorentz - step).abs() <= SAME_PLACE
        };
        positions.len() == 3 && positions.iter().all(at_step)
    }
}

/// An offset in the units of the bench.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Offset {
    /// In cm⁻¹.
    pub wavenumber: f64,
    /// In GHz.
    pub frequency: f64,
    /// In pm, positive to longer wavelengths; nothing without a wavelength, or where the offset
    /// exceeds the line's own wavenumber.
    pub wavelength: Option<f64>,
}

/// The offset of a component in a field, with the line's vacuum wavelength in nm if it is known:
/// Δσ = x μ_B B/hc; Δν = c Δσ; Δλ = −λ² Δσ / (1 + λ Δσ), exact.
///
/// Errors: `field-out-of-range` above 10⁶ T or below zero; `wavelength-out-of-range` unless it is
/// within 10⁻³ … 10⁹ nm.
pub fn offset(lorentz: f64, tesla: f64, wavelength_nm: Option<f64>) -> Result<Offset, Problem> {
    check_field(tesla)?;
    let wavenumber = lorentz * BOHR_MAGNETON_WAVENUMBER.value * tesla + 0.0;
    let wavelength = match wavelength_nm {
        Some(nm) => pm_offset(checked_wavelength(nm)?, wavenumber),
        None => None,
    };
    Ok(Offset {
        wavenumber,
        frequency: wavenumber * GHZ_PER_CM,
        wavelength,
    })
}

fn check_field(tesla: f64) -> Result<(), Problem> {
    if (0.0..=MAX_TESLA).contains(&tesla) {
        return Ok(());
    }
    Err(Problem::new(
        "field-out-of-range",
        format!("a field of {tesla} T is out of range."),
        0,
        0,
    )
    .bound("0 to 1000000 T"))
}

fn checked_wavelength(nm: f64) -> Result<f64, Problem> {
    if (1.0e-3..=1.0e9).contains(&nm) {
        return Ok(nm);
    }
    Err(Problem::new(
        "wavelength-out-of-range",
        format!("a wavelength of {nm} nm is out of range."),
        0,
        0,
    )
    .bound("0.001 to 1000000000 nm"))
}

/// Δλ in pm of a line at `nm` shifted by `wavenumber` cm⁻¹; nothing beyond the line's own wavenumber.
pub fn pm_offset(nm: f64, wavenumber: f64) -> Option<f64> {
    // λ Δσ without unit: 1 nm·cm⁻¹ = 10⁻⁷.
    let relative = nm * wavenumber * 1.0e-7;
    (relative > -1.0).then(|| 0.0 - 1.0e3 * nm * relative / (1.0 + relative))
}
