//! One-electron radial functions and what is integrated over them.
//!
//! Energies in hartree, lengths in a₀; P(r) = r·R(r).

pub mod average;
pub mod blume_watson;
pub mod correlation;
pub mod expectation;
pub mod hartree_fock;
pub mod hydrogenic;
pub mod knots;
pub mod mesh;
pub mod mixing;
pub mod multipole;
pub mod nucleus;
mod running;
pub mod slater;
pub mod spin_orbit;
pub mod thomas_fermi;
