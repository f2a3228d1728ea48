//! Hartree–Fock for the average energy of a configuration, on B-splines.
//!
//! Source: Slater, *Quantum Theory of Atomic Structure* (1960), vol. 1, chapters 14 and 17; Froese
//! Fischer, *The Hartree–Fock Method for Atoms* (1977); Froese Fischer, Comput. Phys. Commun. 182,
//! 1315 (2011) for the splines.
//!
//! Each subshell has one radial function; those of equal ℓ are orthogonal. The functions make
//! E_av ([`crate::radial::average`]) stationary; for two full subshells of equal ℓ, whose rotation
//! leaves E_av as it is, ⟨a|F|b⟩ = 0 besides. Core polarisation would favour one of those rotations, for
//! only what is outside the core feels it; it is left out of that ⟨a|F|b⟩, or it would mix core and
//! outer functions.
//!
//! **Relativity.** The kinetic energy is then
//! K_a = ½ ∫ (1/M_a) [(P′ − P/r)² + ℓ(ℓ+1) P²/r²] dr, M_a = 1 + ½α²(ε_a − V_a),
//! the Dirac equation without its small component and without spin–orbit coupling, of which the
//! mass–velocity and Darwin terms are the first order in α². It is the equation of Cowan and Griffin,
//! J. Opt. Soc. Am. 66, 1010 (1976), with the Darwin term kept for every ℓ (it vanishes in first order
//! above s), in the form that is its own adjoint: Koelling and Harmon, J. Phys. C 10, 3107 (1977).
//! In M_a, V_a is nucleus, direct field and Slater's average exchange. Claimed:
//! - a lone electron's s energies are Dirac's; those of ℓ > 0 are Dirac's averaged over j with weights
//!   2j + 1, up to the second order of spin–orbit coupling, relative (Zα)⁴;
//! - E_av is Σ q(I + ε)/2, right to order α² with the two-electron Darwin term, without Breit's
//!   interaction and quantum electrodynamics; densities are P² of normalised P.
//!
//! The orbitals are stationary at given M_a; since these differ, rotations between orbitals of equal
//! ℓ take the mean of both.

mod atom;
mod correction;
mod field;
mod iterate;
mod polarisation;
mod repair;
mod solve;
mod start;
mod wave;

pub use atom::{Atom, HEAVIEST, MAX_L, MAX_N};
pub use polarisation::{Polarisation, polarisability};
pub use solve::solve;

use crate::configuration::Orbital;
use crate::problem::Problem;
use crate::radial::mesh::Mesh;

/// How far a run has come.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Progress {
    /// Iterations done, this one included.
    pub iteration: usize,
    /// The largest correction of an orbital that is still called for, as a part of its norm.
    pub residual: f64,
}

/// A run without a result: the fault, and what the iterations did until then.
#[derive(Clone, Debug, PartialEq)]
pub struct Failure {
    /// The fault.
    pub problem: Problem,
    /// Every iteration.
    pub history: Vec<Progress>,
}

/// The radial function of one subshell.
#[derive(Clone, Debug)]
pub struct RadialOrbital {
    /// nℓ.
    pub orbital: Orbital,
    /// Electrons in it.
    pub electrons: u32,
    /// ε, hartree: minus the energy to remove one electron from the average, the orbitals as they are.
    pub energy: f64,
    /// I = ⟨kinetic + nucleus + core polarisation⟩, hartree.
    pub one_electron: f64,
    /// ⟨kinetic⟩, hartree.
    pub kinetic: f64,
    /// The local potential it moves in: nucleus, direct field without its own, core polarisation, at
    /// the mesh's points, hartree.
    pub potential: Vec<f64>,
    /// 1/M at the mesh's points: 1 without relativity.
    pub inverse_mass: Vec<f64>,
    /// Coefficients of P on the mesh's splines.
    pub coefficients: Vec<f64>,
    /// P at the mesh's points; positive near the nucleus.
    pub p: Vec<f64>,
}

/// A converged run.
#[derive(Clone, Debug)]
pub struct Solution {
    /// What was asked for.
    pub atom: Atom,
    /// The mesh.
    pub mesh: Mesh,
    /// One for each subshell, by n, then ℓ.
    pub orbitals: Vec<RadialOrbital>,
    /// E_av, hartree.
    pub total_energy: f64,
    /// ⟨T⟩, hartree; with relativity Σ q K.
    pub kinetic_energy: f64,
    /// Slater's average exchange potential at the mesh's points, hartree.
    pub average_exchange: Vec<f64>,
    /// Every iteration.
    pub history: Vec<Progress>,
}

impl Solution {
    /// (E_av − ⟨T⟩)/⟨T⟩: −2 for a point nucleus without relativity and polarisation, and no check
    /// otherwise.
    pub fn virial_ratio(&self) -> f64 {
        (self.total_energy - self.kinetic_energy) / self.kinetic_energy
    }

    /// Number of iterations.
    pub fn iterations(&self) -> usize {
        self.history.len()
    }

    /// The last residual.
    pub fn residual(&self) -> f64 {
        self.history.last().map_or(0.0, |last| last.residual)
    }

    /// The radial function of an orbital.
    pub fn orbital(&self, orbital: Orbital) -> Option<&RadialOrbital> {
        self.orbitals.iter().find(|o| o.orbital == orbital)
    }
}
