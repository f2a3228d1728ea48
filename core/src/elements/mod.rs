//! The elements: symbols, names, observed ground levels.
