//! Polarisation of the core by the electrons outside it.

use super::atom::fault;
use crate::configuration::Orbital;
use crate::problem::Problem;

/// A polarisable core: V_p(r) = −½ α r²/(r² + ρ²)³ for every electron outside it.
///
/// What the field of one outer electron does to the core is taken to act on that electron alone; the
/// mixed term of two outer electrons is left out. In E1 integrals the dipole that an outer electron
/// induces in the core belongs to it: r becomes r [1 − α/(r² + ρ²)^{3/2}], see
/// [`Polarisation::dipole`]. Source: Migdalek and Baylis, J. Phys. B 11, L497 (1978).
#[derive(Clone, Debug, PartialEq)]
pub struct Polarisation {
    /// Static dipole polarisability of the core, a₀³.
    pub alpha: f64,
    /// Cut-off radius, a₀; about the mean radius of the core's outermost orbital.
    pub radius: f64,
    /// The orbitals of the core.
    pub core: Vec<Orbital>,
}

/// The deepest V_p that is taken for a polarised core, hartree.
const DEEPEST: f64 = 5.0;

/// Static dipole polarisability of a closed core of this many electrons, a₀³, where one is known here.
///
/// Random-phase values of Johnson, Kolb and Huang, At. Data Nucl. Data Tables 28, 333 (1983), FROM
/// MEMORY, for the ions of the first two groups; nothing for other cores.
pub fn polarisability(z: u8, electrons: u32) -> Option<f64> {
    const KNOWN: [(u8, u32, f64); 10] = [
        (3, 2, 0.1894),
        (4, 2, 0.05182),
        (11, 10, 0.9457),
        (12, 10, 0.4698),
        (19, 18, 5.457),
        (20, 18, 3.254),
        (37, 36, 9.076),
        (38, 36, 5.813),
        (55, 54, 15.81),
        (56, 54, 10.61),
    ];
    let found = KNOWN
        .iter()
        .find(|known| (known.0, known.1) == (z, electrons));
    found.map(|known| known.2)
}

impl Polarisation {
    /// # Errors
    /// `polarisability-not-positive` and `polarisation-radius-not-positive`, also where they are not
    /// finite; `polarisation-too-strong` where V_p alone is deeper than 5 hartree (real cores: 0.2).
    pub fn check(&self) -> Result<(), Problem> {
        let positive = |value: f64| value > 0.0 && value.is_finite();
        if !positive(self.alpha) {
            return Err(fault(
                "polarisability-not-positive",
                format!(
                    "A core polarisability of {} a0^3 has no meaning.",
                    self.alpha
                ),
                "A polarisability is above 0.".into(),
            ));
        }
        if !positive(self.radius) {
            return Err(fault(
                "polarisation-radius-not-positive",
                format!(
                    "A cut-off radius of {} a0 leaves the potential without bound.",
                    self.radius
                ),
                "A cut-off radius is above 0.".into(),
            ));
        }
        // V_p is deepest at r = ρ/√2.
        let square = self.radius * self.radius;
        let depth = 2.0 / 27.0 * self.alpha / (square * square);
        if depth > DEEPEST || !depth.is_finite() {
            return Err(fault(
                "polarisation-too-strong",
                format!(
                    "A core polarisability of {} a0^3 with a cut-off radius of {} a0 makes a well of its own, {depth:.3e} hartree deep.",
                    self.alpha, self.radius
                ),
                format!(
                    "The well of a core is at most {DEEPEST} hartree deep here; a larger cut-off radius makes it shallower."
                ),
            ));
        }
        Ok(())
    }

    /// V_p at r, hartree.
    pub fn potential(&self, r: f64) -> f64 {
        let square = r * r + self.radius * self.radius;
        -0.5 * self.alpha * r * r / (square * square * square)
    }

    /// r/(r² + ρ²)^{3/2}: times the square root of α, how strongly an electron at r polarises the core.
    pub fn pull(&self, r: f64) -> f64 {
        let square = r * r + self.radius * self.radius;
        r / (square * square.sqrt())
    }

    /// The factor 1 − α/(r² + ρ²)^{3/2} on the dipole operator r.
    pub fn dipole(&self, r: f64) -> f64 {
        let square = r * r + self.radius * self.radius;
        1.0 - self.alpha / (square * square.sqrt())
    }
}
