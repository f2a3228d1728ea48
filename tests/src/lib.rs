//! Shared by the native checks: reading vectors, comparing, reporting.
