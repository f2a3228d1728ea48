//! Names of radial integrals by orbitals, as people write them, and their values.

use super::case::Case;
use crate::configuration::Orbital;
use crate::structure::parameters::{Effective, Integral, Parameter};

/// An integral of some configuration.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Name {
    /// E_av of the configuration at this place.
    Average(usize),
    /// F^k(a,b).
    Direct {
        /// Rank.
        k: u8,
        /// One orbital.
        a: Orbital,
        /// The other.
        b: Orbital,
    },
    /// G^k(a,b).
    Exchange {
        /// Rank.
        k: u8,
        /// One orbital.
        a: Orbital,
        /// The other.
        b: Orbital,
    },
    /// R^k(ab,cd) between two configurations.
    Mixing {
        /// Rank.
        k: u8,
        /// Electron 1 of the one configuration.
        a: Orbital,
        /// Electron 2 of the one configuration.
        b: Orbital,
        /// Electron 1 of the other configuration.
        c: Orbital,
        /// Electron 2 of the other configuration.
        d: Orbital,
    },
    /// ⟨a|h|c⟩ between two configurations, with the field of every other subshell's closed part.
    OneElectron(Orbital, Orbital),
    /// ζ.
    SpinOrbit(Orbital),
    /// ΔF^k(a,a): what correlation within a subshell adds to F^k.
    Change {
        /// Rank.
        k: u8,
        /// The orbital.
        a: Orbital,
    },
    /// α of Trees.
    Alpha(Orbital),
    /// β.
    Beta(Orbital),
    /// γ.
    Gamma(Orbital),
    /// ⟨a|r|b⟩, a₀.
    Dipole(Orbital, Orbital),
    /// ⟨a|r²|b⟩, a₀².
    Quadrupole(Orbital, Orbital),
}

impl Name {
    /// The same name for every way of writing it: F, G, ⟨r⟩ and ⟨r²⟩ are symmetric, and in R^k(ab,cd)
    /// a and c, b and d, both electrons, and so both sides, can be exchanged.
    #[must_use]
    pub fn ordered(self) -> Name {
        let pair = |a: Orbital, b: Orbital| (a.min(b), a.max(b));
        match self {
            Name::Direct { k, a, b } => {
                let (a, b) = pair(a, b);
                Name::Direct { k, a, b }
            }
            Name::Exchange { k, a, b } => {
                let (a, b) = pair(a, b);
                Name::Exchange { k, a, b }
            }
            Name::Mixing { k, a, b, c, d } => {
                let (one, two) = (pair(a, c), pair(b, d));
                let (one, two) = (one.min(two), one.max(two));
                Name::Mixing {
                    k,
                    a: one.0,
                    b: two.0,
                    c: one.1,
                    d: two.1,
                }
            }
            Name::OneElectron(a, c) => {
                let (a, c) = pair(a, c);
                Name::OneElectron(a, c)
            }
            Name::Dipole(a, b) => {
                let (a, b) = pair(a, b);
                Name::Dipole(a, b)
            }
            Name::Quadrupole(a, b) => {
                let (a, b) = pair(a, b);
                Name::Quadrupole(a, b)
            }
            other => other,
        }
    }

    /// The name of a parameter of the matrix; `orbitals` is its list of subshells, `configurations`
    /// the places of the configurations of its parity.
    pub(super) fn of(
        parameter: &Parameter,
        orbitals: &[Orbital],
        configurations: &[usize],
    ) -> Option<Name> {
        let orbital = |place: usize| orbitals.get(place).copied();
        Some(match parameter.integral {
            Integral::Average => Name::Average(*configurations.get(parameter.first)?),
            Integral::Direct { k, a, b } => Name::Direct {
                k,
                a: orbital(a)?,
                b: orbital(b)?,
            },
            Integral::Exchange { k, a, b } => Name::Exchange {
                k,
                a: orbital(a)?,
                b: orbital(b)?,
            },
            Integral::SpinOrbit { a } => Name::SpinOrbit(orbital(a)?),
            Integral::Effective { kind, a } => match kind {
                Effective::Alpha => Name::Alpha(orbital(a)?),
                Effective::Beta => Name::Beta(orbital(a)?),
                Effective::Gamma => Name::Gamma(orbital(a)?),
            },
            Integral::Mixing { k, a, b, c, d } => Name::Mixing {
                k,
                a: orbital(a)?,
                b: orbital(b)?,
                c: orbital(c)?,
                d: orbital(d)?,
            },
            Integral::OneElectron { a, c } => Name::OneElectron(orbital(a)?, orbital(c)?),
        })
    }
}

/// A value that replaces a computed one.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Given {
    /// Which integral.
    pub name: Name,
    /// The configuration it is meant for, for an integral of two either of them; every one that has
    /// the integral where none is named. One that is named wins.
    pub configuration: Option<usize>,
    /// cm⁻¹, a₀ or a₀².
    pub value: f64,
}

/// Where a value comes from.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Kind {
    /// From radial functions.
    Computed,
    /// Given.
    Entered,
    /// Neither, so it is zero.
    Zero,
}

/// A radial integral with its value.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Value {
    /// Which one.
    pub name: Name,
    /// The configuration, or the two that it connects, by their places in the case.
    pub configurations: (usize, usize),
    /// What is used, scaled: cm⁻¹, a₀ or a₀².
    pub value: f64,
    /// What radial functions give, unscaled, also where another value is given.
    pub computed: Option<f64>,
    /// Where the value comes from.
    pub kind: Kind,
    /// The factor on what was computed; 1 where there is none.
    pub scale: f64,
}

impl Value {
    /// The value that is given for it if there is one, the computed one otherwise.
    pub(super) fn new(
        case: &Case,
        name: Name,
        configurations: (usize, usize),
        computed: Option<f64>,
    ) -> Value {
        let factor = match name {
            Name::Direct { .. } => case.scale.f,
            Name::Exchange { .. } => case.scale.g,
            Name::Mixing { .. } => case.scale.r,
            Name::SpinOrbit(_) => case.scale.zeta,
            _ => 1.0,
        };
        let given = given(case, name, configurations);
        let (value, kind, scale) = match (given, computed) {
            (Some(place), _) => {
                let value = case.given.get(place).map_or(0.0, |given| given.value);
                (value, Kind::Entered, 1.0)
            }
            (None, Some(computed)) => (factor * computed, Kind::Computed, factor),
            (None, None) => (0.0, Kind::Zero, 1.0),
        };
        Value {
            name,
            configurations,
            value,
            computed,
            kind,
            scale,
        }
    }
}

/// The place of what is given for an integral; the last of several that fit equally well.
pub(super) fn given(case: &Case, name: Name, (first, second): (usize, usize)) -> Option<usize> {
    let name = name.ordered();
    let fits = |given: &Given| match given.configuration {
        Some(place) => place == first || place == second,
        None => true,
    };
    let fitting = (case.given.iter().enumerate())
        .filter(|(_, given)| given.name.ordered() == name && fits(given));
    let mut best: Option<(usize, bool)> = None;
    for (place, given) in fitting {
        let named = given.configuration.is_some();
        if best.is_none_or(|(_, known)| named >= known) {
            best = Some((place, named));
        }
    }
    best.map(|(place, _)| place)
}
