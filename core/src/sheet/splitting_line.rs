//! The line of the answer on splitting: its g, its centre, its wavelength.

use crate::radiation::Multipole;
use crate::splitting::seen::effective_g;

use super::document::Document;
use super::line_ends::{End, Of};
use super::placed::Placed;
use super::rich::Kind;
use super::splitting_joins::Join;
use super::splitting_rows::LineOf;
use super::splitting_sets::{Prepared, Set};

/// The line with its g, its centre and its wavelength.
pub fn line_of(document: &Document, ready: &Prepared) -> Option<LineOf> {
    let (upper, lower) = document.ends(ready.turned)?;
    let join = ready.joins.first()?;
    let (above, below) = (ready.sets.get(join.upper)?, ready.sets.get(join.lower)?);
    let centre = centre_of(document, ready);
    let g = |end: &End, set: &Set| {
        let Of::Level(_) = end.of else { return None };
        let place = set
            .levels
            .iter()
            .position(|level| level.of.as_ref().is_some_and(|of| end.holds(of)))?;
        Some((set.manifold.g(place), set.levels.get(place)?.j.value()))
    };
    let (g_upper, g_lower) = (g(upper, above), g(lower, below));
    let g_effective = match (g_upper, g_lower) {
        (Some((g, j)), Some((other_g, other_j))) if join.multipole != Multipole::E2 => Some(
            effective_g(j, g.unwrap_or(0.0), other_j, other_g.unwrap_or(0.0)),
        ),
        _ => None,
    };
    let (wavelength_nm, wavelength_kind) = match document.wavelength_nm {
        Some(nm) => (Some(nm), Some(Kind::Entered)),
        None => {
            let nm = centre.filter(|c| c.abs() > 0.0).map(|c| 1e7 / c.abs());
            (nm, nm.map(|_| line_kind(document, ready, [above, below])))
        }
    };
    let widest = [upper, lower]
        .into_iter()
        .map(|end| match end.of {
            Of::Level(_) => (0, "level"),
            Of::Term(..) => (1, "term"),
            Of::Configuration => (2, "configuration"),
        })
        .max();
    Some(LineOf {
        upper: document.end_label(upper),
        lower: document.end_label(lower),
        upper_rich: document.end_rich(upper),
        lower_rich: document.end_rich(lower),
        of: widest.map_or("level", |(_, word)| word),
        g_upper: g_upper.and_then(|(g, _)| g),
        g_lower: g_lower.and_then(|(g, _)| g),
        g_effective,
        multipole: join.multipole,
        wavelength_nm,
        wavelength_kind,
        centre,
    })
}

/// Where the energies of a line's levels come from.
fn line_kind(document: &Document, ready: &Prepared, sets: [&Set; 2]) -> Kind {
    let Some(solved) = &ready.solved else {
        return Kind::Computed;
    };
    let placed = Placed::new(document, solved);
    let ends = sets.into_iter().flat_map(|set| &set.levels);
    let kinds: Vec<Kind> = ends
        .filter(|level| level.is_upper || level.is_lower)
        .filter_map(|level| Some(placed.kind_of(level.place?)))
        .collect();
    let all = |kind: Kind| kinds.iter().all(|k| *k == kind);
    if all(Kind::Measured) {
        Kind::Measured
    } else if kinds.contains(&Kind::Entered) {
        Kind::Entered
    } else {
        Kind::Computed
    }
}

/// Where offsets of the sheet's line count from, cm⁻¹.
pub fn centre_of(document: &Document, ready: &Prepared) -> Option<f64> {
    document.line.as_ref()?;
    let join = ready.joins.first()?;
    centre(
        join,
        ready.sets.get(join.upper)?,
        ready.sets.get(join.lower)?,
    )
}

/// The mean wavenumber of the lines between both ends without field and nucleus, weighted with S.
fn centre(join: &Join, above: &Set, below: &Set) -> Option<f64> {
    let mut sum = 0.0;
    let mut weights = 0.0;
    let mut only: Option<f64> = None;
    for element in join.operator.elements() {
        let (Some(up), Some(low)) = (
            above.levels.get(element.left),
            below.levels.get(element.right),
        ) else {
            continue;
        };
        if let (true, true, Some(high), Some(deep)) =
            (up.is_upper, low.is_lower, up.energy, low.energy)
        {
            let s = element.value * element.value;
            only = match weights > 0.0 {
                true => None,
                false => Some(high - deep),
            };
            sum += s * (high - deep);
            weights += s;
        }
    }
    only.or((weights > 0.0).then(|| sum / weights))
}
