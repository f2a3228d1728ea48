//! Selection rules and relative strengths.
