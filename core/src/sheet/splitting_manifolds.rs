//! The levels of a parity as a field finds them: at their places, within bounds.

use crate::problem::Problem;
use crate::splitting::hyperfine::{self, Unit};
use crate::splitting::in_field::{Diamagnetic, Manifold, Nucleus, OneElectron, Split};

use super::document::Document;
use super::energy_case::EnergyCase;
use super::levels_rows::Shared;
use super::line_ends::End;
use super::nucleus::Nuclear;
use super::placed::Placed;
use super::solved::{Solved, SolvedLevel};
use super::splitting_sets::{MAX_STATES, Set, SetLevel};

/// Places of the solved levels by parity, in the order of the spectrum's own levels.
pub fn parities(solved: &Solved) -> Vec<Vec<usize>> {
    let Some(spectrum) = &solved.spectrum else {
        let of = |odd: bool| {
            let all = 0..solved.levels.len();
            all.filter(|place| solved.levels.get(*place).is_some_and(|l| l.odd == odd))
                .collect::<Vec<_>>()
        };
        return [of(false), of(true)]
            .into_iter()
            .filter(|all| !all.is_empty())
            .collect();
    };
    let mut found: Vec<Vec<usize>> = spectrum
        .parities
        .iter()
        .map(|parity| vec![0; parity.levels.levels.len()])
        .collect();
    for (place, at) in spectrum.levels.iter().enumerate() {
        let own = found.get_mut(at.parity);
        if let Some(own) = own.and_then(|own| own.get_mut(at.level)) {
            *own = place;
        }
    }
    found
}

/// A solved level with its end of the line, whose ends may be turned.
pub fn set_level(
    document: &Document,
    turned: bool,
    solved: &Solved,
    placed: &Placed,
    place: usize,
) -> Option<SetLevel> {
    let level: &SolvedLevel = solved.levels.get(place)?;
    let of = level.of();
    let holds = |end: Option<&End>| end.is_some_and(|end| end.holds(&of));
    let (upper, lower) = document.ends(turned).unzip();
    Some(SetLevel {
        place: Some(place),
        label: Shared(level.label.clone()),
        rich: level.rich(document),
        configuration: Some(Shared(level.configuration.clone())),
        j: level.level.j,
        energy: Some(placed.of(place)),
        is_upper: holds(upper),
        is_lower: holds(lower),
        of: Some(of),
        unit: None,
    })
}

/// Levels with their moments, the largest mean shift by the diamagnetic term at 1 T in cm⁻¹, and why that term is
/// not to be had.
pub type WithDiamagnetic = (Manifold, Option<f64>, Result<(), Problem>);

/// The levels of a parity with their moments, the largest mean shift by the diamagnetic term at 1 T, and why that
/// term is not to be had.
pub fn manifold(
    solved: &Solved,
    parity: usize,
    levels: &[SetLevel],
    with_diamagnetic: bool,
) -> Result<WithDiamagnetic, Problem> {
    let energies: Vec<f64> = levels.iter().map(|l| l.energy.unwrap_or(0.0)).collect();
    let Some(spectrum) = &solved.spectrum else {
        let electrons: Vec<OneElectron> = levels
            .iter()
            .zip(&energies)
            .filter_map(|(level, energy)| {
                let orbital = solved.levels.get(level.place?)?.orbital?;
                Some(OneElectron {
                    n: orbital.n(),
                    l: orbital.l(),
                    two_j: level.j.doubled(),
                    energy: *energy,
                })
            })
            .collect();
        let EnergyCase::OneElectron { z, mass, .. } = solved.case() else {
            return Ok((
                Manifold::one_electron(&electrons)?,
                None,
                Err(no_radial_functions()),
            ));
        };
        let plain = Manifold::one_electron(&electrons)?;
        let term = Diamagnetic::one_electron(&electrons, *z, Some(*mass))?;
        return Ok(joined(plain, term, with_diamagnetic));
    };
    let plain = Manifold::of_parity(spectrum, parity, &energies)?;
    let term = match Diamagnetic::of_parity(spectrum, parity) {
        Ok(term) => term,
        Err(problem) => return Ok((plain, None, Err(problem))),
    };
    Ok(joined(plain, term, with_diamagnetic))
}

/// Its size is always told; it acts only where the sheet says so.
fn joined(plain: Manifold, term: Diamagnetic, acts: bool) -> WithDiamagnetic {
    let with = plain.clone().with(term);
    let size = with.diamagnetic_shift(1.0);
    (if acts { with } else { plain }, size, Ok(()))
}

/// Why the diamagnetic term cannot act.
pub fn no_radial_functions() -> Problem {
    Problem::new(
        "radius-not-known",
        "The diamagnetic term needs the mean square radius, and there are no radial functions here.",
        0,
        0,
    )
}

/// A fault of estimates, at the key that asks for them.
#[inline(never)]
pub fn no_estimate(problem: Problem) -> Problem {
    problem.way("Leave it out", "false").at("/nucleus/estimate")
}

/// A and B of a unit nucleus of every level, by its place in the parity.
///
/// # Errors
/// Those of [`hyperfine::of_parity`], at the key that asks for them.
pub fn units(solved: &Solved, parity: usize, levels: &mut [SetLevel]) -> Result<(), Problem> {
    let found = match &solved.spectrum {
        Some(spectrum) => match spectrum.parities.get(parity) {
            Some(own) => hyperfine::of_parity(spectrum, own),
            None => Ok(Vec::new()),
        },
        None => {
            let EnergyCase::OneElectron { z, mass, .. } = solved.case() else {
                return Ok(());
            };
            let of = |level: &SetLevel| match level.place.and_then(|p| solved.levels.get(p)) {
                Some(SolvedLevel {
                    orbital: Some(orbital),
                    ..
                }) => hyperfine::one_electron(*z, *mass, *orbital, level.j),
                _ => Ok(Unit::default()),
            };
            levels.iter().map(of).collect()
        }
    };
    let found = found.map_err(no_estimate)?;
    for (level, unit) in levels.iter_mut().zip(found) {
        level.unit = Some(unit);
    }
    Ok(())
}

/// A set within the bounds: as a whole, or where a nucleus makes it too large the levels of the terms of the
/// line; with the places of its levels in the parity.
pub fn small_enough(document: &Document, set: Set) -> (Set, Vec<usize>) {
    let all: Vec<usize> = (0..set.levels.len()).collect();
    let two_i = document.nuclei.iter().map(Nuclear::two_i).max();
    let Some(two_i) = two_i.filter(|two_i| *two_i > 0) else {
        return (set, all);
    };
    let nucleus = Nucleus {
        two_i,
        g_i: 0.0,
        magnetic_dipole: Vec::new(),
        electric_quadrupole: Vec::new(),
    };
    let size = Split::size(&set.manifold, Some(&nucleus));
    if size.multiplications <= MOST_MULTIPLICATIONS && size.states <= MAX_STATES as u64 {
        return (set, all);
    }
    let is_end = |level: &SetLevel| level.is_upper || level.is_lower;
    let term = |level: &SetLevel| {
        let of = level.of.as_ref();
        of.map(|of| (of.entry, of.level.term, of.level.index))
    };
    let ends: Vec<_> = set.levels.iter().filter(|l| is_end(l)).map(term).collect();
    let chosen: Vec<usize> = (0..set.levels.len())
        .filter(|place| {
            set.levels
                .get(*place)
                .is_some_and(|level| ends.contains(&term(level)))
        })
        .collect();
    if chosen.is_empty() || chosen.len() == set.levels.len() {
        return (set, all);
    }
    let levels = chosen
        .iter()
        .filter_map(|place| set.levels.get(*place).cloned());
    let smaller = Set {
        manifold: set.manifold.select(&chosen),
        levels: levels.collect(),
        reduced: true,
        ..set
    };
    (smaller, chosen)
}

/// Multiplications for one field above which a nucleus is joined to fewer levels: about two seconds.
pub const MOST_MULTIPLICATIONS: f64 = 2e9;
