//! From a nucleus and configurations to levels and lines: the bridge between radial functions and
//! energy matrices.
//!
//! Energies outside are in cm⁻¹, lengths in a₀; radial functions are in hartree.

mod case;
mod correlation;
mod estimate;
mod integrals;
mod lines;
mod names;
mod spectrum;

pub use case::{Case, Scale};
pub use correlation::{Correlation, Uncorrelated, UsualDeviation};
pub use estimate::{Estimate, estimate};
pub use integrals::CrossOverlap;
pub use lines::{Kind as MultipoleKind, LineStrength, Lines};
pub use names::{Given, Kind, Name, Value};
pub use spectrum::{Means, Parity, Place, Spectrum, solve};
