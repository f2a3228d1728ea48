//! Splitting of levels and lines in a magnetic field.

pub mod hyperfine;
pub mod hyperfine_radial;
pub mod seen;
pub mod weak_field;
mod wigner_eckart;

/// States in a field of any strength, with or without a nucleus.
pub use rungline_kernel::splitting as in_field;
