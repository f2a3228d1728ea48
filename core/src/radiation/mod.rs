//! Which lines there are, by which multipole, and how strong they are within their multiplet.

mod chain_rules;
mod multipole;
mod rule;
pub mod selection;
mod shell_operator;
pub mod strengths;

pub use multipole::Multipole;
pub use rule::Rule;
