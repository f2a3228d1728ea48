//! What is asked for, and the faults that it may hold.

use super::polarisation::Polarisation;
use crate::configuration::{Orbital, Subshell};
use crate::problem::Problem;
use crate::radial::nucleus::Nucleus;

/// The heaviest nucleus that is computed.
pub const HEAVIEST: u8 = 103;
/// The largest principal quantum number that is computed.
pub const MAX_N: u8 = 20;
/// The largest ℓ that is computed.
pub const MAX_L: u8 = 8;

/// What is to be computed.
#[derive(Clone, Debug, PartialEq)]
pub struct Atom {
    /// Nuclear charge.
    pub z: u8,
    /// The configuration: every occupied subshell, in any order.
    pub subshells: Vec<Subshell>,
    /// The nucleus.
    pub nucleus: Nucleus,
    /// Whether the radial equation holds the mass–velocity and Darwin terms.
    pub relativity: bool,
    /// Core polarisation, where wanted.
    pub polarisation: Option<Polarisation>,
}

impl Atom {
    /// Without relativity and polarisation, with a point nucleus.
    pub fn new(z: u8, subshells: Vec<Subshell>) -> Self {
        Atom {
            z,
            subshells,
            nucleus: Nucleus::Point,
            relativity: false,
            polarisation: None,
        }
    }

    /// With relativity, and with a uniformly charged nucleus of this many nucleons.
    pub fn relativistic(z: u8, subshells: Vec<Subshell>, mass_number: u16) -> Self {
        Atom {
            nucleus: Nucleus::Uniform { mass_number },
            relativity: true,
            ..Atom::new(z, subshells)
        }
    }

    /// Number of electrons.
    pub fn electrons(&self) -> u32 {
        self.subshells
            .iter()
            .fold(0, |sum, subshell| sum.saturating_add(subshell.electrons()))
    }

    /// The first fault, if any.
    ///
    /// # Errors
    /// `nuclear-charge-out-of-range`, `no-electrons`, `too-many-electrons`, `orbital-out-of-range`,
    /// `repeated-subshell` and those of [`Polarisation::check`].
    pub fn check(&self) -> Result<(), Problem> {
        if !(1..=HEAVIEST).contains(&self.z) {
            return Err(fault(
                "nuclear-charge-out-of-range",
                format!("Radial functions are not computed for Z = {}.", self.z),
                format!("They are computed for Z = 1 to {HEAVIEST}."),
            ));
        }
        let electrons = self.electrons();
        if electrons == 0 {
            return Err(fault(
                "no-electrons",
                "There is no electron to compute a radial function for.".into(),
                "At least one electron is needed.".into(),
            ));
        }
        if electrons > u32::from(self.z) + 1 {
            return Err(fault(
                "too-many-electrons",
                format!(
                    "A nucleus with Z = {} does not bind {electrons} electrons.",
                    self.z
                ),
                format!("It binds at most {}, to charge −1.", u32::from(self.z) + 1),
            ));
        }
        let mut seen: Vec<Orbital> = Vec::with_capacity(self.subshells.len());
        for subshell in &self.subshells {
            let orbital = subshell.orbital();
            if orbital.n() > MAX_N || orbital.l() > MAX_L {
                return Err(fault(
                    "orbital-out-of-range",
                    format!("The radial function of {orbital} is not computed."),
                    format!("With several electrons n goes to {MAX_N} and ℓ to {MAX_L}."),
                ));
            }
            if seen.contains(&orbital) {
                return Err(fault(
                    "repeated-subshell",
                    format!("{orbital} occurs twice."),
                    "Each subshell stands once.".into(),
                ));
            }
            seen.push(orbital);
        }
        self.polarisation
            .as_ref()
            .map_or(Ok(()), Polarisation::check)
    }
}

/// A fault with its bound.
#[cold]
#[inline(never)]
pub(super) fn fault(code: &'static str, message: String, bound: String) -> Problem {
    Problem::new(code, message, 0, 0).bound(bound)
}
