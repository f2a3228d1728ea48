//! Orbitals, subshells and configurations: reading, counting, filling.

pub mod chart;
mod completion;
mod completion_ways;
mod core_faults;
pub mod filling;
mod occupation;
pub mod shells;
pub mod species;
mod species_faults;
mod species_text;
mod text;
mod text_faults;
mod written;

pub use completion::{CompletedCore, MAX_N_FILLING, Reading, complete};
pub use occupation::{Configuration, NOBLE_GASES, closed_core, join};
pub use rungline_kernel::configuration::{
    MAX_N, Orbital, Subshell, l_of_letter, orbital_letter, total_letter,
};
pub use species::Species;
pub use written::{Written, WrittenCore, WrittenSubshell, parse};
