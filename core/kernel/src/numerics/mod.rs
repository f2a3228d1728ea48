//! Numerical tools free of the physics that uses them.

pub mod anderson;
pub mod banded;
pub mod banded_eigen;
pub mod binomial;
pub mod connected;
pub mod gauss_legendre;
pub mod generalised;
pub mod lanes;
pub mod least_squares;
pub mod linear;
pub mod lowest;
pub mod natural;
mod nearby;
pub mod order;
pub mod sorted_map;
pub mod sparse;
pub mod spline;
pub mod symmetric;
