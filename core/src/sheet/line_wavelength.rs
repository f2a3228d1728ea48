//! The wavelength of the sheet's line: typed, between measured levels, or computed.

use super::document::{Document, LevelOf};
use super::energy_case;
use super::placed::Placed;
use super::rich::Kind;
use super::solved::{self, solved};
use super::watch::unwatched;

/// The longest calculation, in seconds of a browser, that the question on splitting starts by itself.
const LONGEST: f64 = 0.15;

/// Vacuum wavelength of the line between two levels in nm, and where it comes from.
pub fn line_wavelength(
    document: &Document,
    upper: &LevelOf,
    lower: &LevelOf,
) -> Option<(f64, Kind)> {
    if let Some(nm) = document.wavelength_nm {
        return Some((nm, Kind::Entered));
    }
    let wavelength = |one: f64, other: f64| {
        let wavenumber = (one - other).abs();
        (wavenumber > 0.0).then(|| 1e7 / wavenumber)
    };
    if let (Some(above), Some(below)) = (document.pinned(upper), document.pinned(lower)) {
        return Some((wavelength(above, below)?, Kind::Measured));
    }
    if energy_case::need(document).is_some() || solved::cold_seconds(document)? > LONGEST {
        return None;
    }
    let levels = solved(document, &mut unwatched).ok()?;
    let placed = Placed::new(document, &levels);
    let find = |of: &LevelOf| levels.levels.iter().position(|level| level.of() == *of);
    let (one, other) = (find(upper)?, find(lower)?);
    let kind = match [one, other].map(|place| placed.kind_of(place)) {
        [Kind::Measured, Kind::Measured] => Kind::Measured,
        [Kind::Entered, _] | [_, Kind::Entered] => Kind::Entered,
        _ => Kind::Computed,
    };
    Some((wavelength(placed.of(one), placed.of(other))?, kind))
}
