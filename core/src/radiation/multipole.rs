//! The multipoles of radiation that are treated.

use std::fmt;

/// Electric dipole, magnetic dipole, electric quadrupole.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Multipole {
    /// Electric dipole.
    E1,
    /// Magnetic dipole.
    M1,
    /// Electric quadrupole.
    E2,
}

impl Multipole {
    /// All of them, strongest first.
    pub const ALL: [Multipole; 3] = [Multipole::E1, Multipole::M1, Multipole::E2];

    /// Rank of the operator, the angular momentum that the photon carries.
    pub fn rank(self) -> u32 {
        match self {
            Multipole::E1 | Multipole::M1 => 1,
            Multipole::E2 => 2,
        }
    }

    /// Whether the parity of the atom changes.
    pub fn changes_parity(self) -> bool {
        self == Multipole::E1
    }
}

/// `E1`, `M1`, `E2`.
impl fmt::Display for Multipole {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(match self {
            Multipole::E1 => "E1",
            Multipole::M1 => "M1",
            Multipole::E2 => "E2",
        })
    }
}

impl serde::Serialize for Multipole {
    fn serialize<S: serde::Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        serializer.collect_str(self)
    }
}
