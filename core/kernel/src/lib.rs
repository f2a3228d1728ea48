//! The rooms of the core that calculate most, and what they stand on.
//!
//! A package of its own for one reason: it is compiled for speed, the rest of the core for size.
//! Nothing outside uses it but `rungline-core`, which gives its modules the places of its own.
#![forbid(unsafe_code)]

pub mod angular;
pub mod configuration;
pub mod constants;
mod json_text;
pub mod numerics;
pub mod problem;
pub mod projections;
pub mod quantity;
pub mod radial;
pub mod splitting;
pub mod structure;
pub mod weights;

pub use json_text::json_text;
