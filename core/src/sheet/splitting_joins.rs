//! What joins the levels of two sets, or of one: the radiation of a line, with its signed reduced elements.

use crate::angular::{wigner_3j, wigner_6j};
use crate::configuration::Orbital;
use crate::problem::Problem;
use crate::quantity::TwiceJ;
use crate::radiation::{Multipole, hydrogenic_lines};
use crate::splitting::in_field::{Operator, Reduced};
use crate::structure::model::{Given, MultipoleKind, Name, Spectrum};

use super::document::Document;
use super::energy_case::EnergyCase;
use super::solved::Solved;
use super::splitting_sets::{Set, SetLevel};

/// What joins two sets, or one with itself.
#[derive(Clone, Debug)]
pub struct Join {
    pub upper: usize,
    pub lower: usize,
    pub multipole: Multipole,
    pub operator: Operator,
    /// Whether radial integrals were taken as 1 because none was given.
    pub unit_integrals: bool,
}

/// What joins the sets.
pub fn joins(
    document: &Document,
    solved: &Solved,
    sets: &[Set],
    origins: &[(usize, Vec<usize>)],
) -> Result<Vec<Join>, Problem> {
    let with_line = |of: fn(&SetLevel) -> bool| sets.iter().position(|s| s.levels.iter().any(of));
    let pair = match &document.line {
        Some(_) => with_line(|l| l.is_upper).zip(with_line(|l| l.is_lower)),
        None => (sets.len() == 2).then_some((1, 0)),
    };
    let Some((upper, lower)) = pair else {
        return Ok(Vec::new());
    };
    let mut unit_integrals = false;
    let mut operator = |kind: MultipoleKind| -> Result<Operator, Problem> {
        let (Some(above), Some(below)) = (origins.get(upper), origins.get(lower)) else {
            return Ok(Operator::between(1, Vec::new()));
        };
        let Some(spectrum) = &solved.spectrum else {
            return Ok(one_electron_dipole(
                solved,
                sets.get(upper),
                sets.get(lower),
            ));
        };
        let found = Operator::of_spectrum(spectrum, kind, (above.0, below.0))?;
        let found = if found.elements().is_empty() && kind != MultipoleKind::M1 {
            unit_integrals = true;
            let unit = with_unit_integrals(spectrum, kind);
            Operator::of_spectrum(&unit, kind, (above.0, below.0))?
        } else {
            found
        };
        Ok(found.select(&above.1, &below.1))
    };
    let (multipole, operator) = if upper != lower {
        (Multipole::E1, operator(MultipoleKind::E1)?)
    } else {
        let magnetic = operator(MultipoleKind::M1)?;
        match (sets.get(upper), reach(sets.get(upper), &magnetic)) {
            (_, strength) if strength > 0.0 => (Multipole::M1, magnetic),
            _ => (Multipole::E2, operator(MultipoleKind::E2)?),
        }
    };
    let join = Join {
        upper,
        lower,
        multipole,
        operator,
        unit_integrals,
    };
    Ok(vec![join])
}

/// S of all pairs of an upper and a lower level of one set.
fn reach(set: Option<&Set>, operator: &Operator) -> f64 {
    let Some(set) = set else { return 0.0 };
    let flag = |place: usize, of: fn(&SetLevel) -> bool| set.levels.get(place).is_some_and(of);
    operator
        .elements()
        .iter()
        .filter(|e| flag(e.left, |l| l.is_upper) && flag(e.right, |l| l.is_lower))
        .map(|e| e.value * e.value)
        .sum()
}

/// The same levels with every radial integral of the radiation 1: relative strengths of one pair of
/// subshells do not depend on it.
fn with_unit_integrals(spectrum: &Spectrum, kind: MultipoleKind) -> Spectrum {
    let mut with = spectrum.clone();
    for (place, a) in spectrum.orbitals.iter().enumerate() {
        for b in spectrum.orbitals.iter().skip(place) {
            let apart = a.l().abs_diff(b.l());
            let name = match kind {
                MultipoleKind::E1 if apart == 1 => Name::Dipole(*a, *b),
                MultipoleKind::E2 if apart == 0 || apart == 2 => Name::Quadrupole(*a, *b),
                _ => continue,
            };
            with.case.given.push(Given {
                name,
                configuration: None,
                value: 1.0,
            });
        }
    }
    with
}

/// ⟨s ℓ j‖C¹‖s ℓ′ j′⟩ of one electron times a radial integral from its line strength.
///
/// Its sign for each nℓ and n′ℓ′ is common to all j and j′, which is all that counts where a field
/// joins only levels of one nℓ. Source: Edmonds (1957), eqs. 5.4.5 and 7.1.8.
fn one_electron_dipole(solved: &Solved, upper: Option<&Set>, lower: Option<&Set>) -> Operator {
    let (Some(upper), Some(lower)) = (upper, lower) else {
        return Operator::between(1, Vec::new());
    };
    let EnergyCase::OneElectron { z, mass, .. } = solved.case() else {
        return Operator::between(1, Vec::new());
    };
    let end = |level: &SetLevel| -> Option<(Orbital, TwiceJ)> {
        Some((solved.levels.get(level.place?)?.orbital?, level.j))
    };
    let mut elements = Vec::new();
    for (left, one) in upper.levels.iter().enumerate() {
        for (right, other) in lower.levels.iter().enumerate() {
            let (Some(a), Some(b)) = (end(one), end(other)) else {
                continue;
            };
            let strength = hydrogenic_lines::strength(a, b, *z, Some(*mass));
            let angular = angular((a.0.l(), a.1.doubled()), (b.0.l(), b.1.doubled()));
            if let Ok(s) = strength
                && s > 0.0
            {
                let value = s.sqrt().copysign(angular);
                elements.push(Reduced { left, right, value });
            }
        }
    }
    Operator::between(1, elements)
}

fn angular((l, two_j): (u8, i32), (lp, two_jp): (u8, i32)) -> f64 {
    let (two_l, two_lp) = (2 * i32::from(l), 2 * i32::from(lp));
    let phase = (1 + two_lp + two_j + 2) / 2 + i32::from(l);
    let sign = if phase % 2 == 0 { 1.0 } else { -1.0 };
    sign * wigner_6j(two_l, two_j, 1, two_jp, two_lp, 2) * wigner_3j(two_l, 2, two_lp, 0, 0, 0)
}
