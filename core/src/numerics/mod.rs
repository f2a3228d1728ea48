//! Numerical tools free of the physics that uses them.
