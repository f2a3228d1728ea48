//! The elements: symbols, names, isotopes, observed ground levels.

mod ground;
mod isotopes;
mod level;
mod names;

pub use ground::{DOUBTFUL_NEUTRALS, ObservedGround, Status, observed_ground};
pub use isotopes::{Isotope, isotope, isotopes, mean_mass, most_abundant};
pub use level::{LevelSymbol, TermSymbol, read_level};
pub(crate) use names::distance;
pub use names::{HEAVIEST, by_name, by_symbol, name, nearest, symbol};

/// Sources and licences of the data that are compiled in, to be shown or shipped with the program.
pub const NOTICE: &str = include_str!("../../data/NOTICE");
