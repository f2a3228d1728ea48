//! One-electron radial functions and what is integrated over them.
//!
//! Energies in hartree, lengths in a₀; P(r) = r·R(r).

pub mod blume_watson;
pub mod hydrogenic;
