//! Typed quantities: half-integers held exactly, and the reading of what a person types.

mod half_integer_text;
mod number;
pub mod parse;
pub(crate) mod signs;
mod unit;
mod whole_ways;

pub use half_integer_text::MAX_ANGULAR_MOMENTUM;
pub use number::{LONGEST, number};
pub use parse::{Quantity, half_integer, quantity};
pub use rungline_kernel::quantity::TwiceJ;
pub use unit::{Dimension, Unit};
