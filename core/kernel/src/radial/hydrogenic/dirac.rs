//! Levels of one electron by Dirac's equation, with the nucleus of finite mass.
//!
//! With f = [1 + (Zα/(n−δ))²]^(−1/2), δ = |κ| − √(κ² − (Zα)²), |κ| = j + 1/2, the reduced mass
//! μ = mM/(m+M) and κ = −(ℓ+1) for j = ℓ + 1/2, ℓ for j = ℓ − 1/2,
//!
//! E = μc²(f−1) − μ²c²/[2(m+M)] (f−1)² + (1−δ_ℓ0)/[κ(2ℓ+1)] (Zα)⁴ μ³c²/(2n³M²).
//!
//! The first term is Dirac's formula (Sommerfeld, Ann. Phys. 356, 1 (1916); Gordon, Z. Phys. 48, 11
//! (1928)) scaled by the reduced mass, the others the recoil of order (Zα)⁴ (Barker & Glover, Phys.
//! Rev. 99, 317 (1955); in this form in the CODATA adjustments, Mohr, Newell & Taylor, Rev. Mod.
//! Phys. 88, 035009 (2016), sect. IV.A.1).
//!
//! Left out: self-energy, vacuum polarisation and other quantum electrodynamics (the Lamb shift),
//! recoil of order (Zα)⁵ and above, size, spin and polarisability of the nucleus.

use crate::configuration::Orbital;
use crate::constants::FINE_STRUCTURE;
use crate::problem::Problem;
use crate::quantity::TwiceJ;

/// The largest nuclear charge: with a point nucleus Dirac's s₁⸝₂ and p₁⸝₂ levels end at Z = 1/α.
pub const LARGEST_CHARGE: u8 = 137;

/// The mass of the nucleus in electron masses; nothing stands for an infinite one.
pub type NuclearMass = Option<f64>;

/// One level.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Level {
    /// The orbital.
    pub orbital: Orbital,
    /// j = ℓ ± 1/2.
    pub j: TwiceJ,
    /// The energy without rest masses, hartree.
    pub energy: f64,
}

/// The energy of the level nℓ_j in hartree, rest masses taken off; the formula of the module's head.
///
/// Without a mass the nucleus is infinitely heavy and only the first term remains. Relative error
/// 1e-15 of the formula: f − 1 is evaluated without the difference.
///
/// # Errors
/// `nuclear-charge-out-of-range` unless 1 ≤ Z ≤ 137, `nuclear-mass-out-of-range` for a mass that is
/// not above one electron mass, `level-does-not-exist` for another j.
pub fn energy(orbital: Orbital, j: TwiceJ, z: u8, mass: NuclearMass) -> Result<f64, Problem> {
    if !(1..=LARGEST_CHARGE).contains(&z) {
        return Err(charge_out_of_range(z));
    }
    let (n, l) = (f64::from(orbital.n()), i32::from(orbital.l()));
    let kappa = match j.doubled() - 2 * l {
        1 => -l - 1,
        -1 if l > 0 => l,
        _ => return Err(no_such_level(orbital, j)),
    };
    let alpha = FINE_STRUCTURE.value;
    let strength = f64::from(z) * alpha;
    let size = f64::from(kappa.unsigned_abs());
    let defect = strength * strength / (size + (size * size - strength * strength).sqrt());
    let ratio = f64::from(z) / (n - defect);
    let root = (1.0 + alpha * alpha * ratio * ratio).sqrt();
    // c²(f − 1), with c = 1/α.
    let dirac = -ratio * ratio / (root * (1.0 + root));
    let Some(mass) = mass else {
        return Ok(dirac);
    };
    if !(mass > 1.0 && mass.is_finite()) {
        return Err(mass_out_of_range(mass));
    }
    let reduced = mass / (1.0 + mass);
    let recoil = reduced * reduced * alpha * alpha * dirac * dirac / (2.0 * (1.0 + mass));
    let orbit = if l == 0 {
        0.0
    } else {
        let fourth = strength * strength * f64::from(z) * f64::from(z);
        let ratio = reduced / mass;
        fourth * reduced * ratio * ratio / (2.0 * n * n * n * f64::from(kappa * (2 * l + 1)))
    };
    Ok(reduced * dirac - recoil + orbit)
}

/// The levels of nℓ, lower j first.
///
/// # Errors
/// As [`energy`].
pub fn levels(orbital: Orbital, z: u8, mass: NuclearMass) -> Result<Vec<Level>, Problem> {
    let l = i32::from(orbital.l());
    [2 * l - 1, 2 * l + 1]
        .into_iter()
        .filter(|two_j| *two_j > 0)
        .map(|two_j| {
            let j = TwiceJ::from_doubled(two_j);
            let energy = energy(orbital, j, z, mass)?;
            Ok(Level { orbital, j, energy })
        })
        .collect()
}

/// The fine structure of the shell n: the levels of all its orbitals, ℓ and then j rising.
///
/// # Errors
/// As [`energy`]; `orbital-out-of-range` unless 1 ≤ n ≤ 50.
pub fn fine_structure(n: u8, z: u8, mass: NuclearMass) -> Result<Vec<Level>, Problem> {
    let mut all = Vec::new();
    for l in 0..n.max(1) {
        let orbital = Orbital::new(n, l).ok_or_else(|| no_such_shell(n))?;
        all.extend(levels(orbital, z, mass)?);
    }
    Ok(all)
}

/// The mean energy of nℓ weighted by 2j+1, hartree: what an average-of-configuration calculation
/// stands beside.
///
/// # Errors
/// As [`energy`].
pub fn average(orbital: Orbital, z: u8, mass: NuclearMass) -> Result<f64, Problem> {
    let levels = levels(orbital, z, mass)?;
    let weight = |level: &Level| level.j.degeneracy() as f64;
    let sum: f64 = levels.iter().map(|each| weight(each) * each.energy).sum();
    Ok(sum / levels.iter().map(weight).sum::<f64>())
}

#[inline(never)]
fn charge_out_of_range(z: u8) -> Problem {
    Problem::new(
        "nuclear-charge-out-of-range",
        format!("Dirac's levels of a point nucleus do not exist for the charge {z}."),
        0,
        0,
    )
    .bound("The nuclear charge is at least 1 and at most 137.")
}

#[inline(never)]
fn mass_out_of_range(mass: f64) -> Problem {
    Problem::new(
        "nuclear-mass-out-of-range",
        format!("A nucleus of {mass} electron masses is not possible here."),
        0,
        0,
    )
    .bound("A nucleus is heavier than the electron.")
}

#[inline(never)]
fn no_such_level(orbital: Orbital, j: TwiceJ) -> Problem {
    Problem::new(
        "level-does-not-exist",
        format!("{orbital} has no level with j = {j}."),
        0,
        0,
    )
    .bound("j is the orbital quantum number plus or minus 1/2, and positive.")
}

#[inline(never)]
fn no_such_shell(n: u8) -> Problem {
    Problem::new(
        "orbital-out-of-range",
        format!("There is no shell n = {n} here."),
        0,
        0,
    )
    .bound("n is at least 1 and at most 50.")
}
