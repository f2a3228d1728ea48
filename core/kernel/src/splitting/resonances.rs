//! Magnetic resonances: what an oscillating magnetic field drives at a chosen one.

use super::components::Components;
use super::manifold::Manifold;
use super::nucleus::Nucleus;
use super::operator::Operator;
use super::split::{AtField, Split};
use crate::problem::Problem;

/// A resonance between two states.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Resonance {
    /// The lower state at this field.
    pub lower: usize,
    /// The upper state.
    pub upper: usize,
    /// M_upper − M_lower: 0 for a field that oscillates along the static one, ±1 for one across it.
    pub change_of_m: i32,
    /// cm⁻¹.
    pub frequency: f64,
    /// cm⁻¹/T.
    pub slope: f64,
    /// |⟨u|(L + g_s S − (μ_N/μ_B) g_I I)_q|l⟩|² in μ_B²; a linear field across the static one has half of it.
    pub strength: f64,
}

/// The pairs of states of a manifold that are driven, ready for any field.
#[derive(Clone, Debug)]
pub struct Resonances {
    components: Components,
}

impl Resonances {
    /// Every pair of states, |ΔM| ≤ 1, that come from chosen levels, of one level or of several.
    ///
    /// # Errors
    /// `too-many-components` above `most`.
    pub fn new(
        split: &Split,
        manifold: &Manifold,
        nucleus: Option<&Nucleus>,
        levels: &[bool],
        most: usize,
    ) -> Result<Resonances, Problem> {
        let operator = Operator::magnetic_dipole(manifold, nucleus);
        let components = Components::of(split, split, &operator, most, &|one, a, two, b| {
            let chosen = |level: usize| levels.get(level) == Some(&true);
            one < two && chosen(a.level) && chosen(b.level)
        })?;
        Ok(Resonances { components })
    }

    /// Frequencies and strengths at a field, by ΔM as the states are named, then states.
    pub fn at(&self, split: &Split, at: &AtField) -> Vec<Resonance> {
        let strengths = self.components.strengths(at, at);
        let pairs = self.components.list().iter().zip(strengths);
        let found = pairs.filter_map(|(pair, strength)| {
            let states = (
                split.states().get(pair.upper)?,
                split.states().get(pair.lower)?,
            );
            let lists = if states.0.level == states.1.level {
                &at.shifts
            } else {
                &at.energies
            };
            let frequency = lists.get(pair.upper)? - lists.get(pair.lower)?;
            let slope = pair.slope(at, at);
            let named = Resonance {
                lower: pair.lower,
                upper: pair.upper,
                change_of_m: pair.q,
                frequency,
                slope,
                strength,
            };
            Some(if frequency < 0.0 {
                Resonance {
                    lower: pair.upper,
                    upper: pair.lower,
                    change_of_m: -pair.q,
                    frequency: -frequency,
                    slope: -slope,
                    strength,
                }
            } else {
                named
            })
        });
        found.collect()
    }
}
