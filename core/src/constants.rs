//! CODATA constants.
