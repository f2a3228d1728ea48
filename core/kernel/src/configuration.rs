//! Orbitals nℓ and subshells nℓ^N.

use std::fmt;

/// Letters of ℓ = 0, 1, 2 …: s p d f, then alphabetical without j and without those already used;
/// w x y z follow v. From ℓ = 21 on the number stands in brackets.
const LETTERS: &[u8] = b"spdfghiklmnoqrtuvwxyz";

/// The largest principal quantum number that is counted.
pub const MAX_N: u8 = 50;

/// The letter of one electron's ℓ: `s`, `p`, …, `z` for 20, `[21]` beyond.
pub fn orbital_letter(l: u32) -> String {
    match usize::try_from(l).ok().and_then(|i| LETTERS.get(i)) {
        Some(&letter) => char::from(letter).to_string(),
        None => format!("[{l}]"),
    }
}

/// The letter of a total L: `S`, `P`, …, `Z` for 20, `[21]` beyond.
pub fn total_letter(l: u32) -> String {
    orbital_letter(l).to_ascii_uppercase()
}

/// The ℓ that a single lower-case letter stands for.
pub fn l_of_letter(letter: char) -> Option<u8> {
    LETTERS
        .iter()
        .position(|&c| char::from(c) == letter)
        .and_then(|i| u8::try_from(i).ok())
}

/// An orbital nℓ with 1 ≤ n ≤ 50 and ℓ < n.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct Orbital {
    n: u8,
    l: u8,
}

impl Orbital {
    /// The orbital, or nothing when n is out of 1…50 or ℓ ≥ n.
    pub fn new(n: u8, l: u8) -> Option<Self> {
        ((1..=MAX_N).contains(&n) && l < n).then_some(Orbital { n, l })
    }

    /// Principal quantum number.
    pub fn n(self) -> u8 {
        self.n
    }

    /// Orbital quantum number ℓ.
    pub fn l(self) -> u8 {
        self.l
    }

    /// 2(2ℓ + 1), the most electrons it holds.
    pub fn capacity(self) -> u32 {
        2 * (2 * u32::from(self.l) + 1)
    }
}

/// ASCII: `3d`.
impl fmt::Display for Orbital {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{}{}", self.n, orbital_letter(self.l.into()))
    }
}

/// A subshell nℓ^N with 1 ≤ N ≤ 2(2ℓ + 1).
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct Subshell {
    orbital: Orbital,
    electrons: u32,
}

impl Subshell {
    /// The subshell, or nothing when N is zero or above the capacity.
    pub fn new(orbital: Orbital, electrons: u32) -> Option<Self> {
        (1..=orbital.capacity())
            .contains(&electrons)
            .then_some(Subshell { orbital, electrons })
    }

    /// The orbital.
    pub fn orbital(self) -> Orbital {
        self.orbital
    }

    /// N.
    pub fn electrons(self) -> u32 {
        self.electrons
    }

    /// Neither empty nor full.
    pub fn is_open(self) -> bool {
        self.electrons < self.orbital.capacity()
    }
}

/// ASCII: `3d6`, `4s` for one electron.
impl fmt::Display for Subshell {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self.electrons {
            1 => write!(f, "{}", self.orbital),
            n if u32::from(self.orbital.l) >= 21 => write!(f, "{}^{n}", self.orbital),
            n => write!(f, "{}{n}", self.orbital),
        }
    }
}
