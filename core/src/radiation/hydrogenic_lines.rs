//! Lines of one electron in closed form: Dirac's levels with the nucleus of finite mass, and the
//! strengths of all electric-dipole components between two shells.
//!
//! S(nℓj, n′ℓ′j′) = (2j+1)(2j′+1) {ℓ j 1/2; j′ ℓ′ 1}² ℓ_> R², R = ∫ P r P′ dr of the non-relativistic
//! functions (Gordon, Ann. Phys. 394, 1031 (1929); Bethe & Salpeter, *Quantum Mechanics of One- and
//! Two-Electron Atoms* (1957), sect. 60–63). With a nucleus of mass M all lengths are longer by
//! 1 + m_e/M, and the moved nucleus adds to the dipole: S has the factor
//! (1 + m_e/M)² [(M + Z m_e)/(M + m_e)]².
//!
//! gf, f and A are non-relativistic throughout, with the wavenumber Z² R_M (1/n′² − 1/n²): relativity
//! in the wavenumber, in the functions and in retardation are of one order, (Zα)² of A, and nearly
//! cancel: A of 2p₁⸝₂ – 1s rises by (Zα)² ln(9/8) of itself, 6e-6 in hydrogen (Sapirstein, Pachucki &
//! Cheng, Phys. Rev. A 69, 022113 (2004), from memory); with the true wavenumber alone it would by 4e-5.
//!
//! Left out besides: the Lamb shift (see [`crate::radial::hydrogenic::dirac`]), 0.27 cm⁻¹ in 1s and
//! 0.035 cm⁻¹ in 2s of hydrogen, growing like Z⁴.

use super::Multipole;
use super::rates::{Rates, rates};
use crate::angular::wigner_6j;
use crate::configuration::Orbital;
use crate::constants::HARTREE_WAVENUMBER;
use crate::problem::Problem;
use crate::quantity::TwiceJ;
use crate::radial::hydrogenic::dirac::{self, Level, NuclearMass, fine_structure};
use crate::radial::hydrogenic::multipole;

/// One line nℓj → n′ℓ′j′.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Component {
    /// The upper level, hartree.
    pub upper: Level,
    /// The lower level, hartree.
    pub lower: Level,
    /// In vacuum, cm⁻¹.
    pub wavenumber: f64,
    /// S, e²a₀².
    pub strength: f64,
    /// gf, f and A, non-relativistic.
    pub rates: Rates,
}

/// All components from one shell to a lower one.
#[derive(Clone, Debug, PartialEq)]
pub struct Transition {
    /// Shell of the upper levels.
    pub upper: u8,
    /// Shell of the lower levels.
    pub lower: u8,
    /// Components by rising wavenumber; equal ones by the order of their levels.
    pub components: Vec<Component>,
    /// ΣS, e²a₀².
    pub strength: f64,
    /// ΣSσ/ΣS in vacuum, cm⁻¹: where the line is seen that is not resolved.
    pub centre: f64,
    /// Σgf.
    pub gf: f64,
    /// Σg_u A over the 2n² states of the upper shell, s⁻¹: for all its states populated alike.
    pub a: f64,
}

/// S of nℓj – n′ℓ′j′, e²a₀²; zero where the rules for ℓ and j forbid it. Formula of the module's head,
/// relative error below 1e-14 of it.
///
/// # Errors
/// `nuclear-charge-out-of-range`, `nuclear-mass-out-of-range`.
pub fn strength(
    (one, j): (Orbital, TwiceJ),
    (other, other_j): (Orbital, TwiceJ),
    z: u8,
    mass: NuclearMass,
) -> Result<f64, Problem> {
    let (l, k) = (one.l(), other.l());
    if l.abs_diff(k) != 1 {
        return Ok(0.0);
    }
    let doubled = |l: u8| 2 * i32::from(l);
    let six_j = wigner_6j(doubled(l), j.doubled(), 1, other_j.doubled(), doubled(k), 2);
    if six_j == 0.0 {
        return Ok(0.0);
    }
    let charge = f64::from(z);
    let radial = multipole(one, other, 1, charge)?.unwrap_or(0.0);
    let moved = match mass {
        None => 1.0,
        Some(mass) => (1.0 + 1.0 / mass) * (mass + charge) / (mass + 1.0),
    };
    let amplitude = six_j * radial * moved;
    let weights = j.degeneracy() as f64 * other_j.degeneracy() as f64;
    Ok(weights * f64::from(l.max(k)) * amplitude * amplitude)
}

/// All components from the shell `upper` to the shell `lower` of a nucleus Z, whose mass is in
/// electron masses.
///
/// # Errors
/// Those of [`fine_structure`]; `shells-not-descending` unless the upper shell has the larger n.
pub fn transition(upper: u8, lower: u8, z: u8, mass: NuclearMass) -> Result<Transition, Problem> {
    if upper <= lower {
        return Err(not_descending(upper, lower));
    }
    let (above, below) = (
        fine_structure(upper, z, mass)?,
        fine_structure(lower, z, mass)?,
    );
    let gross = gross_wavenumber(upper, lower, z, mass);
    let mut components = Vec::new();
    for high in &above {
        for low in &below {
            let strength = strength((high.orbital, high.j), (low.orbital, low.j), z, mass)?;
            let wavenumber = (high.energy - low.energy) * HARTREE_WAVENUMBER.value;
            let [up, down] = [high.j, low.j].map(|j| j.degeneracy() as f64);
            if strength == 0.0 {
                continue;
            }
            if let Some(rates) = rates(Multipole::E1, strength, gross, up, down) {
                components.push(Component {
                    upper: *high,
                    lower: *low,
                    wavenumber,
                    strength,
                    rates,
                });
            }
        }
    }
    crate::numerics::order::sort_by(&mut components, |a, b| {
        a.wavenumber.total_cmp(&b.wavenumber)
    });
    let sum = |part: fn(&Component) -> f64| components.iter().map(part).sum::<f64>();
    let strength = sum(|line| line.strength);
    Ok(Transition {
        upper,
        lower,
        strength,
        centre: sum(|line| line.strength * line.wavenumber) / strength,
        gf: sum(|line| line.rates.gf),
        a: sum(|line| line.upper.j.degeneracy() as f64 * line.rates.a)
            / (2.0 * f64::from(upper) * f64::from(upper)),
        components,
    })
}

/// Z² R_M (1/n′² − 1/n²) in cm⁻¹: the wavenumber without relativity, which the rates of a line between
/// two shells belong to (see the module's head). Zero within one shell, whose lines only relativity
/// makes: their rates are those of the true wavenumber.
#[must_use]
pub fn gross_wavenumber(upper: u8, lower: u8, z: u8, mass: NuclearMass) -> f64 {
    let reduced = mass.map_or(1.0, |mass| mass / (1.0 + mass));
    let [top, bottom] = [upper, lower].map(|n| f64::from(n) * f64::from(n));
    // E_h = 2 R∞.
    0.5 * HARTREE_WAVENUMBER.value
        * reduced
        * f64::from(z)
        * f64::from(z)
        * (1.0 / bottom - 1.0 / top)
}

/// The limit of ionisation above the level, cm⁻¹: its binding energy.
///
/// # Errors
/// Those of [`dirac::energy`].
pub fn binding(orbital: Orbital, j: TwiceJ, z: u8, mass: NuclearMass) -> Result<f64, Problem> {
    Ok(-dirac::energy(orbital, j, z, mass)? * HARTREE_WAVENUMBER.value)
}

#[inline(never)]
fn not_descending(upper: u8, lower: u8) -> Problem {
    Problem::new(
        "shells-not-descending",
        format!("There is no line from the shell n = {upper} down to n = {lower}."),
        0,
        0,
    )
    .bound("The upper shell has the larger n.")
}
