//! Strengths of all lines between the levels of a sheet.

use crate::configuration::Orbital;
use crate::problem::Problem;
use crate::radiation::Multipole;
use crate::radiation::hydrogenic_lines::{self, gross_wavenumber};
use crate::structure::model::{MultipoleKind, Value};

use super::energy_case::EnergyCase;
use super::solved::{Solved, SolvedLevel, told};
use super::watch::Watch;

/// A pair of levels that a photon joins.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Strength {
    /// Place of the level of higher computed energy.
    pub upper: usize,
    /// Place of the other.
    pub lower: usize,
    /// By which radiation.
    pub multipole: Multipole,
    /// S: e²a₀² (E1), μ_B² (M1), e²a₀⁴ (E2).
    pub s: f64,
    /// Cancellation factor.
    pub cancellation: f64,
    /// The wavenumber that rates belong to, where it is not the line's own.
    pub rated_at: Option<f64>,
}

/// All of them, with the radial integrals behind.
#[derive(Clone, Debug, Default)]
pub struct Strengths {
    /// By lower, then upper level.
    pub lines: Vec<Strength>,
    /// ⟨r⟩ and ⟨r²⟩ between configurations.
    pub integrals: Vec<Value>,
}

/// Every line with S > 0.
///
/// # Errors
/// Those of the model's lines; a refusal of `watch`.
pub fn strengths(solved: &Solved, watch: &mut Watch) -> Result<Strengths, Problem> {
    let Some(spectrum) = &solved.spectrum else {
        return one_electron(solved);
    };
    let kinds = [MultipoleKind::E1, MultipoleKind::M1, MultipoleKind::E2];
    let found = spectrum.lines(&kinds, &mut |done| watch(&told("lines", done)))?;
    let line = |line: &crate::structure::model::LineStrength| Strength {
        upper: line.upper,
        lower: line.lower,
        multipole: match line.multipole {
            MultipoleKind::E1 => Multipole::E1,
            MultipoleKind::M1 => Multipole::M1,
            MultipoleKind::E2 => Multipole::E2,
        },
        s: line.s,
        cancellation: line.cancellation,
        rated_at: None,
    };
    Ok(Strengths {
        lines: found.lines.iter().map(line).collect(),
        integrals: found.integrals,
    })
}

/// Electric dipole lines of one electron in closed form.
fn one_electron(solved: &Solved) -> Result<Strengths, Problem> {
    let EnergyCase::OneElectron { z, mass, .. } = solved.case() else {
        return Ok(Strengths::default());
    };
    let mut lines = Vec::new();
    for (lower, one) in solved.levels.iter().enumerate() {
        for (upper, other) in solved.levels.iter().enumerate().skip(lower + 1) {
            let (Some(a), Some(b)) = (end(one), end(other)) else {
                continue;
            };
            let s = hydrogenic_lines::strength(b, a, *z, Some(*mass))?;
            let gross = gross_wavenumber(b.0.n(), a.0.n(), *z, Some(*mass)).abs();
            if s > 0.0 {
                lines.push(Strength {
                    upper,
                    lower,
                    multipole: Multipole::E1,
                    s,
                    cancellation: 1.0,
                    // Strengths without relativity and the gross wavenumber belong together.
                    rated_at: (gross > 0.0).then_some(gross),
                });
            }
        }
    }
    Ok(Strengths {
        lines,
        integrals: Vec::new(),
    })
}

fn end(level: &SolvedLevel) -> Option<(Orbital, crate::quantity::TwiceJ)> {
    Some((level.orbital?, level.level.j))
}
