//! Orbitals, subshells and configurations: reading, counting, filling.

mod orbital;

pub use orbital::{MAX_N, Orbital, Subshell, l_of_letter, orbital_letter, total_letter};
