//! A and B of computed levels, for a nucleus of g_I = 1 and of Q = 1 barn.
//!
//! A = (α² m_e/2m_p) E_h/h · g_I ⟨J‖T¹‖J⟩/√[J(J+1)(2J+1)] and
//! B = −2 E_h/h (Q/a₀²) (J 2 J; −J 0 J) ⟨J‖T²‖J⟩, T¹ and T² being sums over the electrons of open subshells,
//! also between configurations that differ by one of them. The elements of one electron between its j,
//! [`super::hyperfine_radial`], become coefficients of [u^κ v^k]^K,
//! w = (2κ+1)(2k+1)/√(2K+1) Σ √[(2j+1)(2j′+1)] {½ ½ κ; ℓ ℓ′ k; j j′ K} ⟨j‖T^K‖j′⟩, the effective operators of
//! Sandars and Beck, Proc. R. Soc. A 289, 97 (1965). Parts with κ = 1 of T¹ carry g_s/2.
//!
//! Left out: what open electrons do to full shells (core polarisation: all of A where every open subshell is half
//! full and has ℓ > 0), correlation that the configurations do not hold, shielding of Q, the nucleus' own
//! magnetic size, and what joins different levels.
//!
//! Source: Lindgren and Morrison, *Atomic Many-Body Theory* (1982), chapter 14; Armstrong (1971).

use crate::angular::{wigner_3j, wigner_9j};
use crate::configuration::Orbital;
use crate::constants::{
    BOHR_RADIUS, ELECTRON_G, ELECTRON_MASS_U, FINE_STRUCTURE, HARTREE_WAVENUMBER, PROTON_MASS_U,
};
use crate::problem::Problem;
use crate::quantity::TwiceJ;
use crate::radial::hydrogenic::Hydrogenic;
use crate::structure::model::{Parity, Spectrum};
use crate::structure::{Multipole, Transfer, diagonal};

use super::hyperfine_radial::{Element, Functions, elements};
use super::in_field::MHZ_PER_WAVENUMBER;

/// A and B of a level of a unit nucleus.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Unit {
    /// A/g_I, MHz.
    pub a: f64,
    /// B/Q, MHz per barn.
    pub b: f64,
}

/// E_h/h, MHz.
const HARTREE_MHZ: f64 = HARTREE_WAVENUMBER.value * MHZ_PER_WAVENUMBER;

/// (α² m_e/2m_p) E_h/h: 95.41 MHz.
const MAGNETIC: f64 = 0.5 * FINE_STRUCTURE.value * FINE_STRUCTURE.value * ELECTRON_MASS_U.value
    / PROTON_MASS_U.value
    * HARTREE_MHZ;

/// E_h/h · barn/a₀²: 234.96 MHz.
const ELECTRIC: f64 = HARTREE_MHZ * 1e-28 / (BOHR_RADIUS.value * BOHR_RADIUS.value);

/// Ranks κ, k, K of the operators.
const RANKS: [[u8; 3]; 6] = [
    [0, 1, 1],
    [1, 0, 1],
    [1, 2, 1],
    [0, 2, 2],
    [1, 1, 2],
    [1, 3, 2],
];

/// Below this, in a₀⁻³, a coefficient is rounding.
const ZERO: f64 = 1e-12;

/// Of every level of a parity, by its place there.
///
/// # Errors
/// `no-radial-functions`; those of [`Multipole::unit`].
pub fn of_parity(spectrum: &Spectrum, parity: &Parity) -> Result<Vec<Unit>, Problem> {
    let mut sums = vec![Unit::default(); parity.levels.levels.len()];
    let mut known: Vec<(Transfer, u8, Vec<Element>)> = Vec::new();
    for ranks in RANKS {
        let [spin, orbital, rank] = ranks;
        let operator = Multipole::unit(parity.basis(), parity.basis(), ranks)?;
        let mut values = Vec::with_capacity(operator.transfers().len());
        for transfer in operator.transfers() {
            let same = |(of, k, _): &&(Transfer, u8, Vec<Element>)| (*of, *k) == (*transfer, rank);
            let found = match known.iter().find(same) {
                Some((_, _, found)) => found.clone(),
                None => {
                    let found = of_transfer(spectrum, parity, transfer, rank)?;
                    known.push((*transfer, rank, found.clone()));
                    found
                }
            };
            let ends = [transfer.a, transfer.c].map(|place| {
                let orbital = spectrum.orbitals.get(place);
                orbital.map_or(0, |o| o.l())
            });
            let anomaly = match (spin, rank) {
                (1, 1) => ELECTRON_G.value / 2.0,
                _ => 1.0,
            };
            values.push(anomaly * coefficient(&found, ends, [spin, orbital, rank]));
        }
        if values.iter().all(|value| value.abs() < ZERO) {
            continue;
        }
        let of_levels = diagonal(&parity.levels, |rows| {
            operator.elements(&values, rows, rows)
        });
        for ((level, sum), value) in (parity.levels.levels.iter().zip(&mut sums)).zip(of_levels) {
            match rank {
                1 => sum.a += dipole(level.two_j, value),
                _ => sum.b += quadrupole(level.two_j, value),
            }
        }
    }
    Ok(sums)
}

/// A/g_I from ⟨J‖T¹‖J⟩.
fn dipole(two_j: i32, reduced: f64) -> f64 {
    let j = f64::from(two_j);
    if two_j < 1 {
        return 0.0;
    }
    MAGNETIC * reduced / (j * (j + 2.0) * (j + 1.0) / 4.0).sqrt()
}

/// B/Q from ⟨J‖T²‖J⟩.
fn quadrupole(two_j: i32, reduced: f64) -> f64 {
    if two_j < 2 {
        return 0.0;
    }
    -2.0 * ELECTRIC * wigner_3j(two_j, 4, two_j, -two_j, 0, two_j) * reduced
}

/// w of the ranks κ, k, K.
fn coefficient(found: &[Element], [a, c]: [u8; 2], [spin, orbital, rank]: [u8; 3]) -> f64 {
    let doubled = |value: u8| 2 * i32::from(value);
    let mut sum = 0.0;
    for element in found {
        let (j, jp) = (element.two_j, element.two_jp);
        let [k, o, r] = [spin, orbital, rank].map(doubled);
        let nine = wigner_9j(1, 1, k, doubled(a), doubled(c), o, j, jp, r);
        sum += (f64::from(j + 1) * f64::from(jp + 1)).sqrt() * nine * element.value;
    }
    f64::from(2 * spin + 1) * f64::from(2 * orbital + 1) / f64::from(2 * rank + 1).sqrt() * sum
}

fn of_transfer(
    spectrum: &Spectrum,
    parity: &Parity,
    transfer: &Transfer,
    rank: u8,
) -> Result<Vec<Element>, Problem> {
    let run = |place: usize| spectrum.run(*parity.configurations.get(place)?);
    let orbital = |place: usize| spectrum.orbitals.get(place).copied();
    let ends = run(transfer.first).zip(run(transfer.second));
    let (Some((from, to)), Some((a, c))) = (ends, orbital(transfer.a).zip(orbital(transfer.c)))
    else {
        return Err(without_functions());
    };
    let Some(left) = Functions::of(from, a) else {
        return Err(without_functions());
    };
    let right = match (transfer.first, transfer.a) == (transfer.second, transfer.c) {
        true => Some(left.clone()),
        false => Functions::beside((from, a), (to, c)),
    };
    Ok(right.map_or(Vec::new(), |right| {
        elements(&from.mesh, &left, &right, rank)
    }))
}

/// Where nothing can be estimated.
#[inline(never)]
pub fn without_functions() -> Problem {
    Problem::new(
        "no-radial-functions",
        "A and B are estimated from radial functions, which given energies and a level alone do not have.",
        0,
        0,
    )
}

/// Of a level nℓj of one electron; `mass` of the nucleus in electron masses.
///
/// With γ = √(κ² − (αZ)²), n′ = n − |κ| and N = √(n′² + 2n′γ + κ²),
/// A/g_I = 95.41 MHz Z³ κ[2κ(γ + n′) − N] / [N⁴ γ(4γ² − 1)] / [j(j+1)] · 2, times g_s/2 for the spin's part and
/// (1 + m_e/M)⁻³; B without relativity. A point nucleus. Source: Shabaev, J. Phys. B 27, 5825 (1994), from memory.
///
/// # Errors
/// Those of [`Hydrogenic::new`].
pub fn one_electron(z: u8, mass: f64, orbital: Orbital, j: TwiceJ) -> Result<Unit, Problem> {
    let (l, two_j) = (f64::from(orbital.l()), j.doubled());
    let j = f64::from(two_j) / 2.0;
    let (square, momentum) = (j * (j + 1.0), l * (l + 1.0));
    let kappa = if j > l { -(l + 1.0) } else { l };
    let alpha = FINE_STRUCTURE.value * f64::from(z);
    let gamma = (kappa * kappa - alpha * alpha).sqrt();
    let nodes = f64::from(orbital.n()) - kappa.abs();
    let apparent = (nodes * nodes + 2.0 * nodes * gamma + kappa * kappa).sqrt();
    let bracket = kappa * (2.0 * kappa * (gamma + nodes) - apparent);
    let fourth = apparent * apparent * apparent * apparent;
    let cube = f64::from(z) * f64::from(z) * f64::from(z);
    let radial = 2.0 * cube * bracket / (fourth * gamma * (4.0 * gamma * gamma - 1.0)) / square;
    // What ℓ and s have of it: ℓ·j and the rest of ℓ(ℓ+1); all is the spin's in s.
    let orbit = if l > 0.0 {
        (square + momentum - 0.75) / (2.0 * momentum)
    } else {
        0.0
    };
    let spin = (1.0 - orbit) * ELECTRON_G.value / 2.0;
    let recoil = 1.0 + 1.0 / mass;
    let reduced = 1.0 / (recoil * recoil * recoil);
    let inverse = match orbital.l() {
        0 => 0.0,
        _ => Hydrogenic::new(orbital, z.into())?
            .expectation(-3)?
            .unwrap_or(0.0),
    };
    Ok(Unit {
        a: MAGNETIC * radial * (orbit + spin) * reduced,
        b: match two_j {
            0..=2 => 0.0,
            _ => ELECTRIC * inverse * (2.0 * j - 1.0) / (2.0 * j + 2.0) * reduced,
        },
    })
}
