//! What a wavelength is measured in: vacuum, air, or anything of a given refractive index.

use super::air::{Air, LONGEST, SHORTEST};
use crate::problem::Problem;

/// The surroundings of the spectrometer's scale.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Medium {
    /// Vacuum.
    Vacuum,
    /// Air between 200 and 1700 nm in vacuum, vacuum beyond: the custom of tables.
    Air(Air),
    /// A crystal, a liquid or a gas of an entered index, taken the same at all wavelengths.
    Index(f64),
}

/// A wavelength and what it is measured in.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Wavelength {
    /// nm.
    pub nm: f64,
    /// Refractive index; 1 where the medium is not used at this wavelength.
    pub index: f64,
    /// Whether vacuum stands in for air, beyond the ends of air's range.
    pub vacuum_instead: bool,
}

/// Steps of the way back: each divides the error by more than a thousand.
const STEPS: usize = 8;

impl Medium {
    /// A medium of this index.
    ///
    /// # Errors
    /// `refractive-index-out-of-range` unless 1 ≤ n ≤ 10.
    pub fn of_index(index: f64) -> Result<Medium, Problem> {
        if (1.0..=10.0).contains(&index) {
            Ok(Medium::Index(index))
        } else {
            Err(index_out_of_range(index))
        }
    }

    /// λ = λ_vac/n(λ_vac), nm.
    #[must_use]
    pub fn wavelength(&self, vacuum_nm: f64) -> Wavelength {
        let (index, vacuum_instead) = match self {
            Medium::Vacuum => (1.0, false),
            Medium::Index(index) => (*index, false),
            Medium::Air(air) => match air.refractivity(vacuum_nm) {
                Some(refractivity) => (1.0 + refractivity, false),
                None => (1.0, true),
            },
        };
        Wavelength {
            nm: vacuum_nm / index,
            index,
            vacuum_instead,
        }
    }

    /// The wavelength in vacuum that is `nm` in this medium, nm: the inverse of
    /// [`Medium::wavelength`], to the last digits.
    ///
    /// At the ends of air's range the scale jumps by the index. What both sides of the lower end
    /// could mean is read as air; what neither side of the upper end has, as vacuum.
    #[must_use]
    pub fn vacuum(&self, nm: f64) -> f64 {
        match self {
            Medium::Vacuum => nm,
            Medium::Index(index) => nm * index,
            Medium::Air(air) => {
                let mut vacuum = nm;
                for _ in 0..STEPS {
                    // At the ends the index of the end itself stands in.
                    let inside = vacuum.clamp(SHORTEST, LONGEST);
                    vacuum = nm * (1.0 + air.refractivity(inside).unwrap_or(0.0));
                }
                if (SHORTEST..=LONGEST).contains(&vacuum) {
                    vacuum
                } else {
                    nm
                }
            }
        }
    }
}

#[inline(never)]
fn index_out_of_range(index: f64) -> Problem {
    Problem::new(
        "refractive-index-out-of-range",
        format!("A refractive index of {index} is not possible here."),
        0,
        0,
    )
    .bound("The refractive index is at least 1 and at most 10.")
}
