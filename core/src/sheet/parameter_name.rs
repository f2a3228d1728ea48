//! Names of radial parameters as the sheet spells them.
//!
//! `F2(3d,3d)`, `G1(3d,4p)`, `R1(3d,4p;4s,4p)`, `zeta(3d)`, the average `E(3d6 4s2)`, the effective
//! `alpha(3d)`, `beta(3d)`, `gamma(4f)`, the radial integrals of radiation `r(3s,3p)` and `r2(3d,3d)`;
//! each with ` @ configuration` behind it where it holds for one configuration only. Two spellings
//! are one name when they mean the same integral: the order of the orbitals in F, G and r is free, and
//! R^k(ab,cd) is that of the two densities ac and bd.

use crate::configuration::{self, Orbital};
use crate::problem::Problem;
use crate::quantity::Dimension;
use crate::quantity::signs::{clipped, superscript_digit};

/// What a parameter is; ranks are those of the multipole expansion.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Parameter {
    /// E(…): the average energy of a configuration.
    Average,
    /// F^k(a,b)
    Direct(u8),
    /// G^k(a,b)
    Exchange(u8),
    /// R^k(ab,cd)
    Mixing(u8),
    /// ζ(a)
    SpinOrbit,
    /// α(a)
    Alpha,
    /// β(a)
    Beta,
    /// γ(a)
    Gamma,
    /// r(a,b) = ∫ P_a r P_b dr
    Dipole,
    /// r2(a,b) = ∫ P_a r² P_b dr
    Quadrupole,
}

impl Parameter {
    /// What its value measures.
    pub fn dimension(self) -> Dimension {
        match self {
            Parameter::Dipole => Dimension::RadialIntegral,
            Parameter::Quadrupole => Dimension::RadialIntegralSquared,
            _ => Dimension::Wavenumber,
        }
    }

    /// How many orbitals its brackets hold; none for a configuration.
    fn orbitals(self) -> usize {
        match self {
            Parameter::Average => 0,
            Parameter::SpinOrbit | Parameter::Alpha | Parameter::Beta | Parameter::Gamma => 1,
            Parameter::Mixing(_) => 4,
            _ => 2,
        }
    }

    /// Whether it is a Slater integral of a density with itself, which is never negative.
    pub fn is_positive(self) -> bool {
        matches!(self, Parameter::Direct(_) | Parameter::Exchange(_))
    }
}

/// A name that was read.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct ParameterName {
    /// What it is.
    pub parameter: Parameter,
    /// The orbitals in its brackets, in one order for all spellings of a name.
    pub orbitals: Vec<Orbital>,
    /// The configuration in the brackets of E(…).
    pub average: Option<String>,
    /// The configuration behind @.
    pub only: Option<String>,
}

const EXAMPLES: &str = "Names like F2(3d,3d), G1(3d,4p), R1(3d,4p;4s,4p), zeta(3d), E(3d6 4s2), alpha(3d), r(3s,3p), r2(3d,3d), with @ and a configuration behind.";

/// Reads a name.
///
/// # Errors
/// `parameter-unknown`, `parameter-rank-impossible`, with the bytes of `name`; faults of the orbitals or
/// the configuration in it.
pub fn parse(name: &str) -> Result<ParameterName, Problem> {
    let fault = |why: &str| {
        let shown = clipped(name);
        Problem::new(
            "parameter-unknown",
            format!("\"{shown}\" is no parameter: {why}."),
            0,
            name.len(),
        )
        .bound(EXAMPLES)
    };
    let (bare, only) = match name.split_once('@') {
        Some((bare, only)) => (bare.trim(), Some(only.trim())),
        None => (name.trim(), None),
    };
    if let Some(only) = only {
        configuration::parse(only).map_err(|_| fault("a configuration must follow @"))?;
    }
    let inside = bare
        .split_once('(')
        .and_then(|(kind, rest)| Some((kind.trim(), rest.strip_suffix(')')?)));
    let Some((kind, inside)) = inside else {
        return Err(fault("it needs its shells in brackets"));
    };
    let Some(parameter) = parameter(kind) else {
        return Err(fault("its letter is not known"));
    };
    let mut found = ParameterName {
        parameter,
        orbitals: Vec::new(),
        average: None,
        only: only.map(str::to_owned),
    };
    if parameter == Parameter::Average {
        let sound = configuration::parse(inside).is_ok_and(|w| w.bare_shell.is_none());
        if !sound {
            return Err(fault("E takes a configuration"));
        }
        found.average = Some(inside.trim().to_owned());
        return Ok(found);
    }
    let wanted = parameter.orbitals();
    let parts = || inside.split([',', ';']).map(str::trim);
    found.orbitals = parts().filter_map(orbital).collect();
    if found.orbitals.len() != wanted || parts().count() != wanted {
        let such_as = match wanted {
            1 => "it takes one shell such as 3d",
            2 => "it takes 2 shells such as 3d,4p",
            _ => "it takes 4 shells such as 3d,4p;4s,4p",
        };
        return Err(fault(such_as));
    }
    check_rank(name, &found)?;
    put_in_order(&mut found);
    Ok(found)
}

/// The letter and rank before the brackets; superscripts and Greek letters are taken too.
fn parameter(kind: &str) -> Option<Parameter> {
    let plain: String = kind
        .chars()
        .filter(|c| !c.is_whitespace() && *c != '^')
        .map(|c| superscript_digit(c).unwrap_or(c))
        .collect();
    match plain.as_str() {
        "E" => return Some(Parameter::Average),
        "zeta" | "ζ" => return Some(Parameter::SpinOrbit),
        "alpha" | "α" => return Some(Parameter::Alpha),
        "beta" | "β" => return Some(Parameter::Beta),
        "gamma" | "γ" => return Some(Parameter::Gamma),
        "r" => return Some(Parameter::Dipole),
        "r2" => return Some(Parameter::Quadrupole),
        _ => {}
    }
    let rank = plain.get(1..).filter(|rank| {
        !rank.is_empty() && rank.len() < 3 && rank.bytes().all(|b| b.is_ascii_digit())
    })?;
    let rank = rank.parse().ok()?;
    match plain.chars().next()? {
        'F' => Some(Parameter::Direct(rank)),
        'G' => Some(Parameter::Exchange(rank)),
        'R' => Some(Parameter::Mixing(rank)),
        _ => None,
    }
}

fn orbital(text: &str) -> Option<Orbital> {
    let written = configuration::parse(text).ok()?;
    match (written.subshells.as_slice(), written.core) {
        ([one], None) if one.subshell.electrons() == 1 => Some(one.subshell.orbital()),
        _ => None,
    }
}

/// The ranks k of a multipole that joins ℓ and ℓ′: |ℓ − ℓ′| to ℓ + ℓ′ in steps of two.
fn ranks(a: Orbital, b: Orbital) -> impl Iterator<Item = u8> + Clone {
    (a.l().abs_diff(b.l())..=a.l().saturating_add(b.l())).step_by(2)
}

/// The ranks that a name of this kind can have with its orbitals.
fn possible(name: &ParameterName) -> Vec<u8> {
    let both = |(a, c): (Orbital, Orbital), (b, d): (Orbital, Orbital)| -> Vec<u8> {
        let other = ranks(b, d);
        ranks(a, c)
            .filter(|k| other.clone().any(|m| m == *k))
            .collect()
    };
    match (name.parameter, name.orbitals.as_slice()) {
        // F⁰ is inside the averages.
        (Parameter::Direct(_), &[a, b]) => {
            let mut found = both((a, a), (b, b));
            found.retain(|k| *k > 0);
            found
        }
        (Parameter::Exchange(_), &[a, b]) if a != b => ranks(a, b).collect(),
        (Parameter::Mixing(_), &[a, b, c, d]) => both((a, c), (b, d)),
        _ => Vec::new(),
    }
}

fn check_rank(text: &str, name: &ParameterName) -> Result<(), Problem> {
    let letter = match name.parameter {
        Parameter::Direct(k) => Some(("F", k)),
        Parameter::Exchange(k) => Some(("G", k)),
        Parameter::Mixing(k) => Some(("R", k)),
        _ => None,
    };
    let fault = |message: String, bound: String| {
        Err(Problem::new("parameter-rank-impossible", message, 0, text.len()).bound(bound))
    };
    let clipped = clipped(text);
    if let Some((letter, k)) = letter {
        let possible = possible(name);
        if possible.contains(&k) {
            return Ok(());
        }
        if letter == "F" && k == 0 {
            return fault(
                format!("{clipped} is no parameter of its own."),
                "Every F0 is inside the average energy E(…) of its configuration.".to_owned(),
            );
        }
        let listed: Vec<String> = possible.iter().map(|k| format!("{letter}{k}")).collect();
        let bound = match listed.as_slice() {
            [] if letter == "G" => {
                "G takes two different shells; within one shell it is F.".to_owned()
            }
            [] => format!("These shells have no {letter}."),
            _ => format!("These shells have {}.", listed.join(", ")),
        };
        return fault(format!("{clipped} does not exist."), bound);
    }
    let [one] = name.orbitals.as_slice() else {
        return match (name.parameter, name.orbitals.as_slice()) {
            (Parameter::Dipole, [a, b]) if a.l().abs_diff(b.l()) != 1 => fault(
                format!("{clipped} joins shells that no electric dipole joins."),
                "The two shells of r have ℓ that differ by one.".to_owned(),
            ),
            (Parameter::Quadrupole, [a, b]) if !ranks(*a, *b).any(|k| k == 2) => fault(
                format!("{clipped} joins shells that no electric quadrupole joins."),
                "The two shells of r2 have equal ℓ, not both s, or ℓ that differ by two."
                    .to_owned(),
            ),
            _ => Ok(()),
        };
    };
    let shells = match (name.parameter, one.l()) {
        (Parameter::SpinOrbit, 0) => "Only p, d, f and higher shells have zeta",
        (Parameter::Alpha, l) if !(1..=3).contains(&l) => "Only p, d and f shells have alpha",
        (Parameter::Beta, l) if !(2..=3).contains(&l) => "Only d and f shells have beta",
        (Parameter::Gamma, l) if l != 3 => "Only f shells have gamma",
        _ => return Ok(()),
    };
    fault(format!("{clipped} does not exist."), format!("{shells}."))
}

/// One order of the orbitals for all spellings of the same integral.
fn put_in_order(name: &mut ParameterName) {
    match (name.parameter, name.orbitals.as_mut_slice()) {
        (Parameter::Mixing(_), [a, b, c, d]) => {
            for (one, other) in [(&mut *a, &mut *c), (&mut *b, &mut *d)] {
                if other < one {
                    std::mem::swap(one, other);
                }
            }
            if (*b, *d) < (*a, *c) {
                std::mem::swap(a, b);
                std::mem::swap(c, d);
            }
        }
        (_, [a, b]) if *b < *a => std::mem::swap(a, b),
        _ => {}
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn names_of_parameters_are_read() {
        for (name, parameter) in [
            ("F2(3d,3d)", Parameter::Direct(2)),
            ("F²(3d, 3d)", Parameter::Direct(2)),
            ("F^4(3d,3d)", Parameter::Direct(4)),
            ("G1( 3d, 4p )", Parameter::Exchange(1)),
            ("R1(3d,4s,4p,4p)", Parameter::Mixing(1)),
            ("R1(3d,4s;4p,4p)", Parameter::Mixing(1)),
            ("zeta(3p) @ 3p2", Parameter::SpinOrbit),
            ("ζ(3p)", Parameter::SpinOrbit),
            ("E(3d6 4s2)", Parameter::Average),
            ("alpha(3d)", Parameter::Alpha),
            ("beta(4f)", Parameter::Beta),
            ("γ(4f)", Parameter::Gamma),
            ("r(3s,3p)", Parameter::Dipole),
            ("r2(3d,3d)", Parameter::Quadrupole),
        ] {
            assert_eq!(parse(name).unwrap().parameter, parameter, "{name}");
        }
        for name in [
            "nonsense!!",
            "F(3d,3d)",
            "zeta(9z)",
            "zeta(3p,3p)",
            "F2(3d2,3d)",
            "F2(3d",
            "zeta(3p) @",
            "E(n=2)",
            "",
        ] {
            assert_eq!(parse(name).unwrap_err().code, "parameter-unknown", "{name}");
        }
        for name in [
            "F1(3d,3d)",
            "F0(3d,3d)",
            "F6(3d,3d)",
            "F2(3s,3s)",
            "F2(3d,4s)",
            "G1(3d,3d)",
            "G1(3d,4s)",
            "R2(3s,3s,3p,3p)",
            "zeta(3s)",
            "gamma(3d)",
            "beta(3p)",
            "alpha(5g)",
            "r(3s,3d)",
            "r2(3s,4s)",
        ] {
            let fault = parse(name).unwrap_err();
            assert_eq!(fault.code, "parameter-rank-impossible", "{name}");
            assert!(fault.bound.is_some(), "{name}");
        }
    }

    #[test]
    fn spellings_of_one_integral_are_one_name() {
        for (one, other) in [
            ("F2(3d,4p)", "F2( 4p,3d )"),
            ("G1(3d,4p)", "G1(4p,3d)"),
            ("r(3p,3s)", "r(3s,3p)"),
            ("R1(3s,3s;3p,3p)", "R1(3p,3p,3s,3s)"),
            // ac and bd are the densities: a and c change places, and both with b and d.
            ("R1(3d,4s;4p,4p)", "R1(4p,4s,3d,4p)"),
            ("R1(3d,3p;4p,5s)", "R1(3p,3d;5s,4p)"),
        ] {
            assert_eq!(parse(one).unwrap(), parse(other).unwrap(), "{one}");
        }
        assert_ne!(parse("zeta(3p) @ 3p2").unwrap(), parse("zeta(3p)").unwrap());
    }
}
