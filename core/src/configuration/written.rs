//! A configuration as typed: its core, its subshells with their places, or a bare shell.

use super::Subshell;
use super::text::Reader;
use crate::problem::Problem;

/// A subshell and its place in the text, in bytes.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct WrittenSubshell {
    /// What was read.
    pub subshell: Subshell,
    /// First byte.
    pub start: usize,
    /// One past the last byte.
    pub end: usize,
}

/// A core in brackets and its place in the text, in bytes.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct WrittenCore {
    /// The atom whose ground configuration it stands for.
    pub z: u8,
    /// Its symbol.
    pub symbol: &'static str,
    /// First byte.
    pub start: usize,
    /// One past the last byte.
    pub end: usize,
}

/// A configuration as typed, each part without fault; [`super::complete`] makes it whole.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Written {
    /// The text.
    pub text: String,
    /// The core, where one was typed.
    pub core: Option<WrittenCore>,
    /// The subshells in the order of the text, each orbital once.
    pub subshells: Vec<WrittenSubshell>,
    /// n of `n=5`, the bare shell; then there is neither core nor subshell.
    pub bare_shell: Option<u8>,
}

/// Reads a configuration: `3d6 4s2`, `[Ar] 3d6 4s2`, `3d⁶4s²`, `3d6.4s2`, `1s22s22p6`, `3d^6`, `3d(6)`,
/// `4f7 5d 6s2`, `22[21]3`, `n=5`.
///
/// Where digits stand between two letters, the last one is the next subshell's n (`2p63s` is 2p6 3s),
/// the last two where it is 0 or where ℓ ≥ 9 needs it. Names of orbitals: s p d f g h i k l m n o q r t u v w x y z, then `[21]`, `[22]` ….
///
/// All faults, in the order of the text; places are bytes of `text`. Bounds: 400 characters,
/// n = 1…50, ℓ < n, 1…2(2ℓ + 1) electrons.
pub fn parse(text: &str) -> Result<Written, Vec<Problem>> {
    Reader::new(text).read()
}
