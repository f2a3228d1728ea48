//! States and components over a range of fields.

use super::components::Components;
use super::split::{AtField, Split, check_field};
use crate::problem::Problem;

/// Numbers of one map.
pub const MOST_NUMBERS: usize = 40_000_000;

/// The states of a manifold over the fields of a map; each list by state, then field.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Followed {
    /// On the scale of the levels, cm⁻¹.
    pub energies: Vec<Vec<f64>>,
    /// From each state's level without field and nucleus, cm⁻¹.
    pub shifts: Vec<Vec<f64>>,
    /// dE/dB, cm⁻¹/T.
    pub slopes: Vec<Vec<f64>>,
}

impl Followed {
    fn new(states: usize, fields: usize) -> Followed {
        let empty = || vec![Vec::with_capacity(fields); states];
        Followed {
            energies: empty(),
            shifts: empty(),
            slopes: empty(),
        }
    }

    fn push(&mut self, at: &AtField) {
        let lists = [
            (&mut self.energies, &at.energies),
            (&mut self.shifts, &at.shifts),
            (&mut self.slopes, &at.slopes),
        ];
        for (by_state, values) in lists {
            for (own, &value) in by_state.iter_mut().zip(values) {
                own.push(value);
            }
        }
    }
}

/// What becomes of states and components from field to field.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Map {
    /// The fields, rising.
    pub tesla: Vec<f64>,
    /// States of the upper manifold, or of the only one.
    pub upper: Followed,
    /// States of the lower one, where there are two.
    pub lower: Option<Followed>,
    /// Offset of each component from its line's centre, by field, cm⁻¹.
    pub offsets: Vec<Vec<f64>>,
    /// Strength of each component, by field.
    pub strengths: Vec<Vec<f64>>,
}

/// All states of one manifold or two, and components between them, at `fields` fields evenly from the first to
/// the last of a range. Without a lower manifold components are those inside the upper one.
///
/// # Errors
/// `field-out-of-range` where the range does not rise inside 0 … [`super::MOST_TESLA`]; `map-too-large` for
/// fewer than 2 fields or more than [`MOST_NUMBERS`] numbers; those of [`Split::at`].
pub fn map(
    upper: &Split,
    lower: Option<&Split>,
    components: Option<&Components>,
    (from, to): (f64, f64),
    fields: usize,
) -> Result<Map, Problem> {
    check_field(from)?;
    check_field(to)?;
    if from >= to {
        let message = format!("Fields from {from} T to {to} T are no rising range.");
        return Err(Problem::new("field-out-of-range", message, 0, 0));
    }
    let last = fields.saturating_sub(1).max(1) as f64;
    // Exact at both ends; more than can be mapped are refused below.
    let even = (0..fields.min(MOST_NUMBERS)).map(|step| {
        let share = step as f64 / last;
        from * (1.0 - share) + to * share
    });
    map_at(upper, lower, components, &even.collect::<Vec<f64>>())
}

/// The same at rising fields of one's own choice.
///
/// # Errors
/// Those of [`map`].
pub fn map_at(
    upper: &Split,
    lower: Option<&Split>,
    components: Option<&Components>,
    tesla: &[f64],
) -> Result<Map, Problem> {
    let fields = tesla.len();
    let states = upper.states().len() + lower.map_or(0, |lower| lower.states().len());
    let list = components.map(Components::list).unwrap_or_default();
    let numbers = (3 * states + 2 * list.len()).saturating_mul(fields);
    if fields < 2 || numbers > MOST_NUMBERS {
        return Err(too_large(states, list.len(), fields));
    }
    let empty = || vec![Vec::with_capacity(fields); list.len()];
    let mut found = Map {
        tesla: tesla.to_vec(),
        upper: Followed::new(upper.states().len(), fields),
        lower: lower.map(|lower| Followed::new(lower.states().len(), fields)),
        offsets: empty(),
        strengths: empty(),
    };
    let (mut above, mut below) = (AtField::default(), AtField::default());
    let mut strengths = Vec::new();
    for &tesla in tesla {
        upper.at_into(tesla, &mut above)?;
        found.upper.push(&above);
        if let (Some(lower), Some(followed)) = (lower, &mut found.lower) {
            lower.at_into(tesla, &mut below)?;
            followed.push(&below);
        }
        let Some(components) = components else {
            continue;
        };
        let ends = (&above, if lower.is_some() { &below } else { &above });
        components.strengths_into(ends.0, ends.1, &mut strengths);
        let lists = found.offsets.iter_mut().zip(&mut found.strengths);
        for ((offsets, own), (component, &strength)) in lists.zip(list.iter().zip(&strengths)) {
            offsets.push(component.offset(ends.0, ends.1));
            own.push(strength);
        }
    }
    Ok(found)
}

#[inline(never)]
fn too_large(states: usize, components: usize, fields: usize) -> Problem {
    let message = format!(
        "{states} states and {components} components at {fields} fields cannot be mapped at once."
    );
    Problem::new("map-too-large", message, 0, 0)
        .bound(format!("at least 2 fields, at most {MOST_NUMBERS} numbers"))
}
