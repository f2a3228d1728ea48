//! The map of states and components over the field, for its picture.
//!
//! It stands beside the answer and not in it, so that answers and records stay small.

use serde::Serialize;

use crate::problem::Problem;
use crate::quantity::TwiceJ;
use crate::splitting::in_field::AtField;
use crate::splitting::seen::{Polariser, weight};

use super::Question;
use super::document::Document;
use super::levels_rows::Shared;
use super::rich::Rich;
use super::solved::told;
use super::splitting::is_full;
use super::splitting_full::{
    LEAST_STRENGTH, ends, fields, isotope_of, polarisation, share_of, shift_of,
};
use super::splitting_line::centre_of;
use super::splitting_names::{state_name, state_rich};
use super::splitting_sets::{Pass, Prepared, prepared};
use super::watch::Watch;

/// Fields of a map, both ends counted.
const MOST_FIELDS: usize = 200;

/// Fewer fields are no map.
const LEAST_FIELDS: usize = 24;

/// The most numbers of a map.
const MOST_NUMBERS: usize = 2_000_000;

#[derive(Debug, Serialize)]
pub struct Map {
    tesla: Vec<f64>,
    /// cm⁻¹; where offsets count from.
    centre: Option<f64>,
    states: Vec<MapState>,
    components: Vec<MapComponent>,
}

#[derive(Debug, Serialize)]
struct MapState {
    name: String,
    rich: Rich,
    level: Shared,
    #[serde(rename = "M")]
    m: TwiceJ,
    #[serde(rename = "F")]
    f: Option<TwiceJ>,
    #[serde(rename = "M_J", skip_serializing_if = "Option::is_none")]
    m_j: Option<TwiceJ>,
    #[serde(rename = "M_I", skip_serializing_if = "Option::is_none")]
    m_i: Option<TwiceJ>,
    side: Option<&'static str>,
    isotope: Option<Shared>,
    /// cm⁻¹, of the level without field and nucleus.
    level_energy: Option<f64>,
    /// cm⁻¹ by field.
    energies: Vec<f64>,
    /// cm⁻¹ from the level without field and nucleus.
    shifts: Vec<f64>,
    /// cm⁻¹/T.
    slopes: Vec<f64>,
    #[serde(skip)]
    at: (usize, usize, usize),
}

#[derive(Debug, Serialize)]
struct MapComponent {
    polarisation: &'static str,
    /// Places in the map's states.
    upper: usize,
    lower: usize,
    isotope: Option<Shared>,
    /// cm⁻¹ by field.
    offsets: Vec<f64>,
    /// cm⁻¹/T.
    slopes: Vec<f64>,
    strengths: Vec<f64>,
    seen: Vec<f64>,
    #[serde(skip)]
    at: (usize, usize, usize),
    #[serde(skip)]
    weight: f64,
}

/// The map of a sheet.
///
/// # Errors
/// What the question lacks; `map-needs-energies`; `map-too-large`; `stopped`.
pub fn map(document: &Document, watch: &mut Watch) -> Result<Map, Problem> {
    if let Some(lack) = document.lacks(Question::Splitting) {
        return Err(lack.problem());
    }
    if !is_full(document) {
        let message = "A map needs the energies of the levels.";
        return Err(Problem::new("map-needs-energies", message, 0, 0)
            .bound("Name an atom, or give parameters such as zeta(3p)."));
    }
    let ready = prepared(document, watch)?;
    let mut map = outline(document, &ready);
    let each = 3 * map.states.len() + 4 * map.components.len();
    let count = (MOST_NUMBERS / each.max(1)).min(MOST_FIELDS);
    if count < LEAST_FIELDS {
        let message = format!(
            "{} states and {} components are too many for a map.",
            map.states.len(),
            map.components.len()
        );
        return Err(Problem::new("map-too-large", message, 0, 0).bound(format!(
            "A map has at most {MOST_NUMBERS} numbers: choose a line between levels or terms."
        )));
    }
    let end = document.field.as_ref().map_or(1.0, |field| field.end());
    for step in 0..count {
        let tesla = end * step as f64 / (count - 1) as f64;
        map.tesla.push(tesla);
        for (number, pass) in ready.passes.iter().enumerate() {
            let at = fields(pass, tesla)?;
            map.take(document, &ready, (number, pass), &at);
        }
        if !watch(&told("splitting", (step + 1) as f64 / count as f64)) {
            let message = "The run was stopped.";
            return Err(Problem::new("stopped", message, 0, 0));
        }
    }
    map.components.retain(|component| {
        let mut strengths = component.strengths.iter();
        strengths.any(|strength| *strength > LEAST_STRENGTH)
    });
    Ok(map)
}

/// States and components without their numbers.
fn outline(document: &Document, ready: &Prepared) -> Map {
    let mut map = Map {
        tesla: Vec::new(),
        centre: centre_of(document, ready),
        states: Vec::new(),
        components: Vec::new(),
    };
    for (number, pass) in ready.passes.iter().enumerate() {
        let isotope = isotope_of(document, pass);
        for (place, (set, split)) in ready.sets.iter().zip(&pass.splits).enumerate() {
            for state_place in ready.order(set, split, document.line.is_some()) {
                let Some(state) = split.states().get(state_place) else {
                    continue;
                };
                let Some(level) = set.levels.get(state.level) else {
                    continue;
                };
                map.states.push(MapState {
                    name: state_name(level, state, isotope.as_ref()),
                    rich: state_rich(level, state),
                    level: level.label.clone(),
                    m: TwiceJ::from_doubled(state.two_m),
                    f: state.two_f.map(TwiceJ::from_doubled),
                    m_j: state.two_m_i.and(state.two_m_j).map(TwiceJ::from_doubled),
                    m_i: state.two_m_i.map(TwiceJ::from_doubled),
                    side: level.side(),
                    isotope: isotope.clone(),
                    level_energy: level.energy,
                    energies: Vec::new(),
                    shifts: Vec::new(),
                    slopes: Vec::new(),
                    at: (number, place, state_place),
                });
            }
        }
    }
    // With a line the upper end first, as in the answer.
    crate::numerics::order::sort_by_key(&mut map.states, |state| state.side == Some("lower"));
    // Where each state stands, by pass, set and place.
    let places: crate::numerics::sorted_map::SortedMap<(usize, usize, usize), usize> = map
        .states
        .iter()
        .enumerate()
        .map(|(own, state)| (state.at, own))
        .collect();
    let (angle, polariser) = document
        .field
        .as_ref()
        .map_or((90.0, Polariser::None), |f| (f.angle_degrees, f.polariser));
    for (number, pass) in ready.passes.iter().enumerate() {
        let isotope = isotope_of(document, pass);
        for (join_place, join) in ready.joins.iter().enumerate() {
            let Some(components) = pass.components.get(join_place) else {
                continue;
            };
            for (own, component) in components.list().iter().enumerate() {
                let Some(ends) = ends(document, ready, pass, join, component) else {
                    continue;
                };
                let (up, low) = match ends.turned {
                    false => (join.upper, join.lower),
                    true => (join.lower, join.upper),
                };
                let find = |set: usize, place: usize| places.get(&(number, set, place)).copied();
                let (Some(upper), Some(lower)) = (find(up, ends.upper.2), find(low, ends.lower.2))
                else {
                    continue;
                };
                map.components.push(MapComponent {
                    polarisation: polarisation(ends.q),
                    upper,
                    lower,
                    isotope: isotope.clone(),
                    offsets: Vec::new(),
                    slopes: Vec::new(),
                    strengths: Vec::new(),
                    seen: Vec::new(),
                    at: (number, join_place, own),
                    weight: weight(join.multipole, ends.q, angle, polariser),
                });
            }
        }
    }
    map
}

impl Map {
    /// The numbers of one nucleus in one field.
    fn take(
        &mut self,
        document: &Document,
        ready: &Prepared,
        (number, pass): (usize, &Pass),
        at: &[AtField],
    ) {
        for state in self.states.iter_mut().filter(|s| s.at.0 == number) {
            let (_, set, place) = state.at;
            let Some(own) = at.get(set) else { continue };
            let value = |of: &[f64]| of.get(place).copied().unwrap_or(0.0);
            state.energies.push(value(&own.energies));
            state.shifts.push(value(&own.shifts));
            state.slopes.push(value(&own.slopes));
        }
        let share = share_of(document, pass);
        let strengths: Vec<Vec<f64>> = ready
            .joins
            .iter()
            .zip(&pass.components)
            .map(
                |(join, components)| match (at.get(join.upper), at.get(join.lower)) {
                    (Some(above), Some(below)) => {
                        let all = components.strengths(above, below);
                        let whole: f64 = all.iter().sum();
                        let relative = |strength: f64| match whole > 0.0 {
                            true => strength / whole * share,
                            false => 0.0,
                        };
                        all.into_iter().map(relative).collect()
                    }
                    _ => Vec::new(),
                },
            )
            .collect();
        let moved = shift_of(document, pass);
        for component in self.components.iter_mut().filter(|c| c.at.0 == number) {
            let (_, join, own) = component.at;
            let strength = strengths.get(join).and_then(|all| all.get(own)).copied();
            let strength = strength.unwrap_or(0.0);
            let ends = [component.upper, component.lower].map(|place| self.states.get(place));
            let [Some(upper), Some(lower)] = ends else {
                continue;
            };
            let last = |of: &[f64]| of.last().copied().unwrap_or(0.0);
            let own = match (self.centre, upper.level_energy, lower.level_energy) {
                (Some(centre), Some(up), Some(low)) => (up - low) - centre,
                _ => 0.0,
            };
            component
                .offsets
                .push(last(&upper.shifts) - last(&lower.shifts) + own + moved);
            component
                .slopes
                .push(last(&upper.slopes) - last(&lower.slopes));
            component.strengths.push(strength);
            component.seen.push(strength * component.weight);
        }
    }
}
