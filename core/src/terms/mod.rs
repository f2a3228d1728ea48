//! Terms and levels that a configuration allows: LS, jj and jK coupling, Hund's rules, Landé
//! factors, and the names of levels.
//!
//! Everything here follows from symmetry alone. The functions take the subshells of a
//! configuration; full ones change nothing and may be left out.

pub mod chains;
pub mod grid;
pub mod hund;
pub mod jj;
pub mod jk;
pub mod label;
pub mod lande;
pub mod ls;
pub mod seniority;
mod term;

pub use term::{Level, Term};

use crate::configuration::Subshell;
use crate::numerics::order::sort;

/// The open subshells, in the order n, ℓ in which they are coupled.
pub fn open_shells(subshells: &[Subshell]) -> Vec<Subshell> {
    let mut open: Vec<Subshell> = subshells.iter().copied().filter(|s| s.is_open()).collect();
    sort(&mut open);
    open
}

/// Whether the parity Π(−1)^ℓ over the electrons is odd.
pub fn is_odd(subshells: &[Subshell]) -> bool {
    subshells
        .iter()
        .filter(|s| s.orbital().l() % 2 == 1 && s.electrons() % 2 == 1)
        .count()
        % 2
        == 1
}
