//! Round figures for radial parameters, of the size of a lanthanide's; the spin–orbit interaction is large
//! enough to mix all terms.

use rungline_core::structure::{Integral, Parameter};

/// The value of a parameter.
pub fn round_figures(parameter: &Parameter) -> f64 {
    match parameter.integral {
        Integral::Average => 10_000.0 * parameter.first as f64,
        Integral::Direct { k, .. } => 60_000.0 / f64::from(k),
        Integral::Exchange { k, .. } => 9_000.0 / f64::from(k + 1),
        Integral::SpinOrbit { a } => 1_500.0 / (a + 1) as f64,
        Integral::Mixing { k, .. } => 6_000.0 / f64::from(k + 1),
        Integral::OneElectron { .. } | Integral::Effective { .. } => 0.0,
    }
}
