//! Typed quantities: half-integers held exactly, and the reading of what a person types.

mod half_integer;
pub(crate) mod signs;

pub use half_integer::TwiceJ;
