//! Angular momentum algebra.
