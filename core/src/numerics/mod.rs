//! Numerical tools free of the physics that uses them.

pub mod binomial;
pub mod natural;
pub mod order;
pub mod symmetric;
