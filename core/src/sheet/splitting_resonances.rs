//! What an oscillating magnetic field drives between the states of levels in the field.

use crate::numerics::order::sort_by;
use crate::problem::Problem;
use crate::splitting::in_field::{AtField, MHZ_PER_WAVENUMBER, Resonance, Resonances};

use super::document::Document;
use super::levels_rows::Shared;
use super::splitting_full::isotope_of;
use super::splitting_names::state_name;
use super::splitting_rows::ResonanceRow;
use super::splitting_sets::{Pass, Prepared, Set, SetLevel};

/// The most resonances of an answer.
const MOST: usize = 600;

/// The most pairs of states that are compared.
const MOST_PAIRS: usize = 60_000;

/// A strength below this share of the largest is rounding.
const LEAST: f64 = 1e-12;

/// The first resonances by frequency, of all nuclei and sets together; how many are taken away.
pub fn first(rows: &mut Vec<ResonanceRow>) -> usize {
    sort_by(rows, |a, b| a.mhz.total_cmp(&b.mhz));
    let left_out = rows.len().saturating_sub(MOST);
    rows.truncate(MOST);
    left_out
}

/// The resonances of one nucleus, the first of each set by frequency, added to the rows; how many were left out.
pub fn add(
    document: &Document,
    ready: &Prepared,
    (pass, now): (&Pass, &[AtField]),
    rows: &mut Vec<ResonanceRow>,
) -> Result<usize, Problem> {
    let with_line = document.line.is_some();
    let isotope = isotope_of(document, pass);
    let mut left_out = 0;
    for (number, set) in ready.sets.iter().enumerate() {
        let (Some(split), Some(at)) = (pass.splits.get(number), now.get(number)) else {
            continue;
        };
        let nucleus = pass.nuclei.get(number).and_then(Option::as_ref);
        let levels: Vec<bool> = set
            .levels
            .iter()
            .map(|level: &SetLevel| !with_line || level.is_upper || level.is_lower)
            .collect();
        let found = match Resonances::new(split, &set.manifold, nucleus, &levels, MOST_PAIRS) {
            Ok(found) => found.at(split, at),
            Err(problem) if problem.code == "too-many-components" => continue,
            Err(problem) => return Err(problem),
        };
        let largest = found.iter().fold(0.0_f64, |most, r| most.max(r.strength));
        let mut found: Vec<Resonance> = found
            .into_iter()
            .filter(|r| r.strength > LEAST * largest && r.frequency > 0.0)
            .collect();
        sort_by(&mut found, |a, b| a.frequency.total_cmp(&b.frequency));
        left_out += found.len().saturating_sub(MOST);
        for resonance in found.iter().take(MOST) {
            rows.extend(row(set, split.states(), resonance, isotope.as_ref()));
        }
    }
    Ok(left_out)
}

fn row(
    set: &Set,
    states: &[crate::splitting::in_field::State],
    resonance: &Resonance,
    isotope: Option<&Shared>,
) -> Option<ResonanceRow> {
    let name = |place: usize| {
        let state = states.get(place)?;
        let level = set.levels.get(state.level)?;
        Some(Shared(state_name(level, state, isotope).into()))
    };
    Some(ResonanceRow {
        from: name(resonance.lower)?,
        to: name(resonance.upper)?,
        mhz: resonance.frequency * MHZ_PER_WAVENUMBER,
        // No −0.
        slope: resonance.slope * MHZ_PER_WAVENUMBER / 1e3 + 0.0,
        strength: resonance.strength,
        kind: if resonance.change_of_m == 0 {
            "parallel"
        } else {
            "perpendicular"
        },
        isotope: isotope.cloned(),
    })
}
