//! Radial integrals of the radiation between the sheet's configurations, each with its own functions.

use std::rc::Rc;

use crate::configuration::{Orbital, Subshell};
use crate::problem::Problem;
use crate::radial::hartree_fock::{Progress as Step, Solution};
use crate::radial::{hydrogenic, multipole};

use super::document::Document;
use super::entry::Entry;
use super::orbitals_case::{Asked, asked};
use super::orbitals_field::solution;
use super::orbitals_rows::BetweenRow;

/// The most integrals that are listed.
const MAX_ROWS: usize = 400;

/// One side of a jump.
struct Side<'a> {
    entry: &'a Entry,
    functions: Functions,
}

enum Functions {
    Closed(u8),
    Field(Rc<Solution>),
}

/// E1 and E2 integrals between every two configurations that differ by one electron's orbital.
pub fn rows(
    document: &Document,
    watch: &mut dyn FnMut(&Step) -> bool,
) -> Result<Vec<BetweenRow>, Problem> {
    let mut sides = Vec::new();
    for entry in document.entries.iter().filter(|e| e.named().is_some()) {
        let functions = match asked(document, entry) {
            Some(Asked::OneElectron { z, .. }) => Functions::Closed(z),
            // Kept since the blocks were made, unless there were very many.
            Some(Asked::Field(atom)) => Functions::Field(solution(&atom, watch)?),
            None => continue,
        };
        sides.push(Side { entry, functions });
    }
    let mut rows = Vec::new();
    for (place, lower) in sides.iter().enumerate() {
        for upper in sides.iter().skip(place + 1) {
            let Some((a, b)) = jump(subshells(lower), subshells(upper)) else {
                continue;
            };
            for k in ranks(a, b) {
                if rows.len() < MAX_ROWS {
                    rows.extend(row(k, (lower, a), (upper, b)));
                }
            }
        }
    }
    Ok(rows)
}

fn subshells<'a>(side: &Side<'a>) -> &'a [Subshell] {
    side.entry
        .configuration()
        .map(|configuration| configuration.subshells())
        .unwrap_or_default()
}

/// The orbitals that one electron leaves and enters, if that is all by which they differ.
fn jump(from: &[Subshell], to: &[Subshell]) -> Option<(Orbital, Orbital)> {
    let held = |all: &[Subshell], orbital: Orbital| {
        all.iter()
            .find(|shell| shell.orbital() == orbital)
            .map_or(0, |shell| shell.electrons())
    };
    let (mut left, mut entered) = (None, None);
    let mut orbitals: Vec<Orbital> = from.iter().chain(to).map(|s| s.orbital()).collect();
    crate::numerics::order::sort(&mut orbitals);
    orbitals.dedup();
    for orbital in orbitals {
        let (before, after) = (held(from, orbital), held(to, orbital));
        if before == after {
            continue;
        }
        let place = match before.abs_diff(after) {
            1 if before > after => &mut left,
            1 => &mut entered,
            _ => return None,
        };
        if place.replace(orbital).is_some() {
            return None;
        }
    }
    left.zip(entered)
}

/// The k of r^k that the orbital quantum numbers allow: 1 for Δℓ = ±1; 2 for Δℓ = 0, ±2, not 0 to 0.
fn ranks(a: Orbital, b: Orbital) -> impl Iterator<Item = u8> {
    let (l, other) = (a.l(), b.l());
    [1_u8, 2].into_iter().filter(move |k| {
        l.abs_diff(other) <= *k && l.saturating_add(other) >= *k && (l + other + k) % 2 == 0
    })
}

fn row(k: u8, (lower, a): (&Side, Orbital), (upper, b): (&Side, Orbital)) -> Option<BetweenRow> {
    let found = match (&lower.functions, &upper.functions) {
        (Functions::Field(from), Functions::Field(to)) => {
            multipole::between(k, (from, a), (to, b)).ok()?
        }
        (Functions::Closed(z), Functions::Closed(_)) => {
            let integral = hydrogenic::multipole(a, b, k.into(), f64::from(*z)).ok()??;
            multipole::Multipole {
                integral,
                bare: integral,
                overlap: 1.0,
                largest_cross: 0.0,
            }
        }
        _ => return None,
    };
    let letter = if k == 1 { "r" } else { "r2" };
    Some(BetweenRow {
        name: format!("{letter}({a},{b})"),
        lower: lower.entry.label.clone(),
        upper: upper.entry.label.clone(),
        multipole: if k == 1 { "E1" } else { "E2" },
        value: found.integral,
        bare: found.bare,
        overlap: found.overlap,
        largest_cross: found.largest_cross,
    })
}
