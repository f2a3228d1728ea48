//! Levels of configurations with any number of open subshells, in intermediate coupling.
//!
//! H = E_av + Σ F^k f_k + Σ G^k g_k + Σ R^k r_k + Σ ζ ℓ·s, on request with α, β and γ, in a basis of LS-coupled states, several
//! configurations of one parity together. Operators are products of creation and annihilation
//! operators, whose reduced elements within a subshell come from fractional parentage; subshells are
//! coupled one after another. Electrostatic coefficients belong to S and L, spin–orbit ones to pairs
//! of them: each is made once and serves every J, whatever the values of the radial integrals.

mod basis;
mod bounds;
mod chain;
mod electrostatic;
mod estimate;
mod hamiltonian;
mod levels;
mod lowest;
mod matrix;
pub mod model;
mod multipole;
mod parameters;
mod recoupling;
mod schemes;
mod shell_operators;
mod spin_orbit;
mod subshell_jj;
mod symbols;
mod ties;
mod transitions;

pub use basis::{Basis, Block, Coupled, State};
pub use bounds::{
    MOST_CONFIGURATIONS, MOST_L, MOST_LS_STATES, MOST_PRODUCTS, MOST_ROWS, MOST_SUBSHELLS,
};
pub use electrostatic::Entry;
pub use estimate::{Estimate, estimate};
pub use hamiltonian::{Hamiltonian, Rows, Terms};
pub use levels::{Level, Levels, lande, solve_j};
pub use lowest::{LOWEST_LEVELS, lowest_of_j, multiplications};
pub use multipole::{Elements, Multipole, Transfer, magnetic_elements};
pub use parameters::{Effective, Integral, Parameter};
pub use schemes::{JjCoupled, JjTransformation, JkCoupled, Scheme, jk_scheme};
pub use spin_orbit::Joint;
pub use subshell_jj::JjState;
pub use transitions::{Amplitude, amplitudes, diagonal};
