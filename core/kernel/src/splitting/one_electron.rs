//! The diamagnetic operator of one electron in closed form.

use super::manifold::{Diamagnetic, OneElectron, Reduced};
use crate::angular::{wigner_3j, wigner_6j};
use crate::configuration::Orbital;
use crate::problem::Problem;
use crate::radial::hydrogenic::dirac::NuclearMass;
use crate::radial::hydrogenic::multipole;

impl Diamagnetic {
    /// That of levels nℓj of one electron about a nucleus Z, whose mass is in electron masses:
    /// ⟨nℓ|r²|n′ℓ′⟩ without relativity, times (1 + m/M)² for the larger orbits about a moving nucleus;
    ///
    /// ⟨½ℓj‖C²‖½ℓ′j′⟩ = (−1)^(½+ℓ′+j) √[(2j+1)(2j′+1)] {ℓ j ½; j′ ℓ′ 2} ⟨ℓ‖C²‖ℓ′⟩ (Edmonds, eqs. 7.1.8
    /// and 5.4.6). Radii leave out a share of (Zα)².
    ///
    /// # Errors
    /// `nuclear-charge-out-of-range`; `level-out-of-range` where there is no such orbital.
    pub fn one_electron(
        levels: &[OneElectron],
        z: u8,
        mass: NuclearMass,
    ) -> Result<Diamagnetic, Problem> {
        let wider = mass.map_or(1.0, |mass| 1.0 + 1.0 / mass);
        let mut found = Diamagnetic::default();
        for (right, ket) in levels.iter().enumerate() {
            for (left, bra) in levels.iter().enumerate().take(right + 1) {
                let same = (bra.l, bra.two_j) == (ket.l, ket.two_j);
                let angular = quadrupole(bra, ket);
                let orbitals = (Orbital::new(bra.n, bra.l), Orbital::new(ket.n, ket.l));
                let (Some(one), Some(other)) = orbitals else {
                    continue;
                };
                if !same && angular == 0.0 {
                    continue;
                }
                let square = multipole(one, other, 2, f64::from(z))?.unwrap_or(0.0);
                let square = square * wider * wider;
                let element = |value: f64| Reduced { left, right, value };
                if same {
                    found.scalar.push(element(square));
                }
                if angular != 0.0 {
                    found.quadrupole.push(element(square * angular));
                }
            }
        }
        Ok(found)
    }
}

/// ⟨½ℓj‖C²‖½ℓ′j′⟩.
fn quadrupole(bra: &OneElectron, ket: &OneElectron) -> f64 {
    let (l, k) = (2 * i32::from(bra.l), 2 * i32::from(ket.l));
    let three = wigner_3j(l, 4, k, 0, 0, 0);
    let six = wigner_6j(l, bra.two_j, 1, ket.two_j, k, 4);
    let degeneracies = [l + 1, k + 1, bra.two_j + 1, ket.two_j + 1].map(f64::from);
    let root = degeneracies.into_iter().product::<f64>().sqrt();
    // ⟨ℓ‖C²‖ℓ′⟩ = (−1)^ℓ √[(2ℓ+1)(2ℓ′+1)] (ℓ 2 ℓ′; 0 0 0).
    let odd = ((1 + k + bra.two_j + l) / 2) % 2 != 0;
    let value = root * three * six;
    if odd { -value } else { value }
}
