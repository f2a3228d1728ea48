//! Splitting of levels and lines in a magnetic field.

pub mod weak_field;
mod wigner_eckart;
