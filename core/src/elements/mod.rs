//! The elements: symbols, names, observed ground levels.

mod ground;
mod level;
mod names;

pub use ground::{DOUBTFUL_NEUTRALS, ObservedGround, Status, observed_ground};
pub use level::{LevelSymbol, TermSymbol, read_level};
pub use names::{HEAVIEST, by_name, by_symbol, name, nearest, symbol};
