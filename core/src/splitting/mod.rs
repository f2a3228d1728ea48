//! Splitting of levels and lines in a magnetic field.
