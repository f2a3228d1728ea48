//! Texts to offer where the electrons of a typed configuration do not match the species.

use super::completion::{Parts, full_subshells};
use super::filling::{filling_order, ground};
use super::occupation::{Configuration, closed_core};
use super::species::Species;
use super::{Orbital, Subshell};
use crate::elements::symbol;
use crate::numerics::order::sort_by_key;

/// The most texts that are offered.
const MOST: usize = 4;

/// The most electrons that an offered configuration has outside the places of the ground
/// configuration.
const MOST_PROMOTED: u32 = 2;

/// Texts that fit, best first: the ground configuration, then what differs little from the typed
/// text and leaves no hole in an inner shell beside those that were typed.
pub(super) fn fitting_texts(parts: &Parts, core: Option<&str>, species: &Species) -> Vec<String> {
    let (Some(z), Some(wanted)) = (species.element, species.electrons()) else {
        return Vec::new();
    };
    let Some(ground) = ground(z, species.charge) else {
        return Vec::new();
    };
    let ground = ground.configuration();
    // The user's way of writing: the core in brackets where one was typed.
    let mut texts = vec![match core {
        Some(_) => ground.short_text(),
        None => ground.valence_text(),
    }];
    let mut seen = vec![ground.clone()];
    let mut offer = |other: &Parts, core: Option<&str>| {
        let Some(reading) = other.whole(Some(wanted)) else {
            return;
        };
        let whole = reading.configuration;
        let text = other.text(core);
        if is_sensible(&whole, ground, &parts.typed) && !text.is_empty() && !seen.contains(&whole) {
            texts.push(text);
            seen.push(whole);
        }
    };
    for other in with_one_changed(parts, core, wanted).into_iter().take(2) {
        offer(&other, core);
    }
    // Or fill up what is missing: with full subshells, the lowest n first; or in filling order, the
    // last subshell not full.
    let named = parts.named();
    let left = wanted.checked_sub(parts.electrons());
    if let (Some(left), None) = (left, core) {
        let lowest = (1..=8u8).flat_map(|n| (0..n).filter_map(move |l| Orbital::new(n, l)));
        if let Some(added) = full_subshells(left, &named, lowest) {
            offer_with(parts, added, core, &mut offer);
        }
    }
    if let Some(added) = left.and_then(|left| partly_filled(left, &named)) {
        offer_with(parts, added, core, &mut offer);
    }
    texts.truncate(MOST);
    texts
}

/// Whether a configuration is one that somebody may mean: few electrons outside the ground
/// configuration's places, and the shells of its core full but for holes that were typed beside
/// electrons further out.
fn is_sensible(whole: &Configuration, ground: &Configuration, typed: &[Subshell]) -> bool {
    let outermost = typed.iter().map(|s| s.orbital().n()).max().unwrap_or(0);
    let inner: &[Subshell] = ground
        .noble_core()
        .and_then(closed_core)
        .map_or(&[], |core| core.subshells());
    let closed = inner.iter().all(|&full| {
        whole.subshells().contains(&full)
            || (full.orbital().n() < outermost
                && typed.iter().any(|hole| {
                    hole.orbital() == full.orbital() && whole.subshells().contains(hole)
                }))
    });
    let promoted = whole.subshells().iter().fold(0u32, |sum, s| {
        let at_home = ground.electrons_in(s.orbital());
        sum.saturating_add(s.electrons().saturating_sub(at_home))
    });
    closed && promoted <= MOST_PROMOTED
}

/// The parts with the difference put into or taken from one subshell: the smallest change first,
/// then the outermost.
fn with_one_changed(parts: &Parts, core: Option<&str>, wanted: u32) -> Vec<Parts> {
    let mut by_shell: Vec<usize> = (0..parts.typed.len()).collect();
    sort_by_key(&mut by_shell, |&i| {
        parts.typed.get(i).map(|s| std::cmp::Reverse(s.orbital()))
    });
    let mut changed: Vec<(u32, usize, Parts)> = Vec::new();
    for (rank, &i) in by_shell.iter().enumerate() {
        let Some(&subshell) = parts.typed.get(i) else {
            continue;
        };
        for electrons in 0..=subshell.orbital().capacity() {
            let mut other = parts.clone();
            match Subshell::new(subshell.orbital(), electrons) {
                Some(new) => other
                    .typed
                    .iter_mut()
                    .skip(i)
                    .take(1)
                    .for_each(|s| *s = new),
                None => {
                    other.typed.remove(i);
                }
            }
            if electrons != subshell.electrons()
                && !(other.typed.is_empty() && core.is_none())
                && other.whole(Some(wanted)).is_some()
            {
                changed.push((electrons.abs_diff(subshell.electrons()), rank, other));
            }
        }
    }
    sort_by_key(&mut changed, |&(change, rank, _)| (change, rank));
    changed.into_iter().map(|(_, _, other)| other).collect()
}

/// Offers the typed subshells with others added; a noble-gas core that they make is abbreviated
/// where the plain completion would not find it.
fn offer_with(
    parts: &Parts,
    added: Vec<Subshell>,
    core: Option<&str>,
    offer: &mut impl FnMut(&Parts, Option<&str>),
) {
    let mut typed = parts.typed.clone();
    typed.extend(added);
    if parts.core.is_some() {
        let core_kept = Parts { typed, ..*parts };
        return offer(&core_kept, core);
    }
    let Some(whole) = Configuration::new(typed.clone()) else {
        return;
    };
    let valence = Parts {
        core: None,
        typed: whole.valence(),
    };
    let electrons = Some(whole.electrons());
    let found_alone = valence
        .whole(electrons)
        .is_some_and(|reading| reading.configuration == whole);
    match whole.noble_core() {
        Some(z) if !found_alone => {
            let bracketed = Parts {
                core: closed_core(z),
                typed: whole.valence(),
            };
            offer(&bracketed, symbol(z));
        }
        _ => offer(&valence, None),
    }
}

/// Electrons put into unnamed orbitals in filling order, the last one perhaps not full.
fn partly_filled(mut left: u32, named: &[Subshell]) -> Option<Vec<Subshell>> {
    let mut added = Vec::new();
    for orbital in filling_order() {
        if left == 0 {
            break;
        }
        if named.iter().any(|s| s.orbital() == orbital) {
            continue;
        }
        let electrons = left.min(orbital.capacity());
        added.push(Subshell::new(orbital, electrons)?);
        left -= electrons;
    }
    (left == 0).then_some(added)
}
