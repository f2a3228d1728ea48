//! Half-integers held exactly as their doubles.

use std::fmt;

/// An angular momentum or projection j, stored as 2j, so that half-integers are exact and an
/// integer cannot be taken for a doubled one.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct TwiceJ(i32);

impl TwiceJ {
    /// From the doubled value 2j.
    pub const fn from_doubled(two_j: i32) -> Self {
        TwiceJ(two_j)
    }

    /// The doubled value 2j.
    pub const fn doubled(self) -> i32 {
        self.0
    }

    /// j as a number.
    pub fn value(self) -> f64 {
        f64::from(self.0) / 2.0
    }

    /// 2j + 1, the number of states.
    pub fn degeneracy(self) -> i64 {
        i64::from(self.0) + 1
    }

    /// Whether j is a whole number.
    pub const fn is_integer(self) -> bool {
        self.0 % 2 == 0
    }
}

/// ASCII, as everywhere in answers: `2`, `-3/2`.
impl fmt::Display for TwiceJ {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        if self.is_integer() {
            write!(f, "{}", self.0 / 2)
        } else {
            write!(f, "{}/2", self.0)
        }
    }
}

impl serde::Serialize for TwiceJ {
    fn serialize<S: serde::Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        serializer.collect_str(self)
    }
}
