//! Atomic structure and spectra of any configuration of any atom or ion.
//!
//! Pure physics: no input or output, no clock, no randomness, no platform or browser type.
//! Modules depend on the ones listed before them and never on one listed after
//! (`tests/native/house.rs` guards it).
#![forbid(unsafe_code)]

pub use rungline_kernel::{angular, constants, numerics, problem, radial, structure};

pub mod configuration;
pub mod elements;
pub mod quantity;
pub mod radiation;
pub mod sheet;
pub mod splitting;
pub mod terms;
