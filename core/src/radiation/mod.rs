//! Which lines there are, by which multipole, where they are seen and how strong they are.

pub mod absorption;
pub mod air;
mod chain_rules;
pub mod hydrogenic_lines;
pub mod ionisation;
pub mod isotope;
mod medium;
mod multipole;
pub mod populations;
pub mod rates;
mod rule;
pub mod selection;
pub mod series;
mod shell_operator;
mod spectral_unit;
pub mod strengths;

pub use medium::{Medium, Wavelength};
pub use multipole::Multipole;
pub use rule::Rule;
pub use spectral_unit::SpectralUnit;
