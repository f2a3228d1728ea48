//! Angular momentum algebra: 3j, 6j and 9j symbols, states of equivalent electrons, parentage.
//!
//! Angular momenta are doubled integers throughout, phases those of Condon and Shortley.

pub mod equivalent;
mod narrow_six_j;
mod nine_j;
pub mod parentage;
mod racah_sum;
mod six_j;
pub mod spherical;
mod three_j;
mod triad;
pub mod unit_tensors;

pub use nine_j::{NINE_J_CAPACITY, try_wigner_9j, wigner_9j};
pub use six_j::{try_wigner_6j, wigner_6j};
pub use three_j::{try_wigner_3j, wigner_3j};
pub use triad::CAPACITY;
