//! Which radial functions? Energies, radii, integrals and ζ of each configuration, in the field of
//! its nucleus and electrons.

use serde::Serialize;

use crate::problem::Problem;
use crate::radial::hartree_fock::Progress as Step;

use super::answer::Around;
use super::document::Document;
use super::entry::Entry;
use super::orbitals_cache as cache;
use super::orbitals_case::{Asked, asked, lacking, place, without_core};
use super::orbitals_rows::{BetweenRow, Block, Curve};
use super::orbitals_words::{kinds, limits, sentence, working};
use super::rich::Rich;
use super::states::configuration_text;
use super::watch::{Progress, Watch};
use super::{orbitals_between, orbitals_closed, orbitals_field};

/// The answer: the first configuration's own keys, then a block for every further one.
#[derive(Debug, Serialize)]
pub struct Orbitals {
    #[serde(flatten)]
    around: Around,
    species: Rich,
    #[serde(flatten)]
    first: Block,
    configurations: Vec<Block>,
    /// Radial integrals between the configurations.
    between: Vec<BetweenRow>,
}

/// The picture's data.
#[derive(Debug, Serialize)]
pub struct Curves {
    curves: Vec<Curve>,
}

/// The answer on orbitals.
pub fn answer(document: &Document, watch: &mut Watch) -> Result<Orbitals, Problem> {
    if let Some(lack) = document.lacks(super::Question::Orbitals) {
        return Err(lacking(&lack));
    }
    let mut blocks = Vec::new();
    for_each(document, watch, |entry, asked, watch| {
        blocks.push(block(document, entry, asked, watch)?);
        Ok(())
    })?;
    let mut blocks = blocks.into_iter();
    let Some(first) = blocks.next() else {
        return Err(Problem::new(
            "needs-a-nucleus",
            "This question needs electrons in the field of a nucleus.",
            0,
            0,
        ));
    };
    let configurations: Vec<Block> = blocks.collect();
    // Nothing is left to watch: every solution is there.
    let between = orbitals_between::rows(document, &mut |_| true)?;
    let mut around = Around::saying(sentence(document, &first, &configurations));
    around.working = working(&first);
    around.limits = limits(document, &first, &configurations);
    around.kinds = kinds(&first);
    Ok(Orbitals {
        around,
        species: document.species_rich(),
        first,
        configurations,
        between,
    })
}

/// The densities of all subshells for their picture.
pub fn curves(document: &Document, watch: &mut Watch) -> Result<Curves, Problem> {
    if let Some(lack) = document.lacks(super::Question::Orbitals) {
        return Err(lacking(&lack));
    }
    let mut curves = Vec::new();
    for_each(document, watch, |entry, asked, watch| {
        let mut of_entry = match asked {
            Asked::OneElectron {
                z,
                orbitals,
                occupied,
            } => orbitals_closed::curves(*z, orbitals, *occupied)?,
            Asked::Field(atom) => orbitals_field::curves(&*orbitals_field::solution(atom, watch)?),
        };
        for curve in &mut of_entry {
            curve.configuration = entry.label.clone();
            curve.path = entry.path.clone();
        }
        curves.append(&mut of_entry);
        Ok(())
    })?;
    Ok(Curves { curves })
}

/// Calls with every configuration that can be computed; faults are put in their place of the sheet.
fn for_each(
    document: &Document,
    watch: &mut Watch,
    mut what: impl FnMut(&Entry, &Asked, &mut dyn FnMut(&Step) -> bool) -> Result<(), Problem>,
) -> Result<(), Problem> {
    let all: Vec<(&Entry, Asked)> = document
        .entries
        .iter()
        .filter_map(|entry| Some((entry, asked(document, entry)?)))
        .collect();
    let of = all.len();
    for (configuration, (entry, asked)) in all.iter().enumerate() {
        if let Asked::Field(atom) = asked
            && atom
                .polarisation
                .as_ref()
                .is_some_and(|p| p.core.is_empty())
        {
            return Err(without_core(entry));
        }
        let mut tell = |step: &Step| {
            watch(&Progress {
                configuration,
                of,
                label: &entry.label,
                iteration: step.iteration,
                residual: step.residual,
                done: None,
            })
        };
        what(entry, asked, &mut tell).map_err(|problem| place(document, entry, problem))?;
    }
    Ok(())
}

fn block(
    document: &Document,
    entry: &Entry,
    asked: &Asked,
    watch: &mut dyn FnMut(&Step) -> bool,
) -> Result<Block, Problem> {
    let typed = document.species.and_then(|species| species.mass_number);
    let mut block = match asked {
        Asked::OneElectron {
            z,
            orbitals,
            occupied,
        } => {
            let relativity = document.structure.relativity;
            orbitals_closed::block(*z, typed, orbitals, *occupied, relativity)?
        }
        Asked::Field(atom) => {
            let outside = entry.named().map(|named| named.outside.as_slice());
            orbitals_field::block(atom, outside.unwrap_or_default(), watch)?
        }
    };
    // A computed function knows its nucleus, the sheet where that comes from.
    let (_, by) = orbitals_closed::mass_number_of(block.nucleus.charge, typed);
    block.nucleus.mass_number_by = block.nucleus.mass_number.map(|_| by);
    block.configuration = entry.named().map(configuration_text);
    Ok(block)
}

/// Seconds and megabytes that the answer takes beyond what is kept already.
pub fn estimate(document: &Document) -> (f64, f64) {
    let mut total = (0.0, 0.0);
    for entry in &document.entries {
        if let Some(Asked::Field(atom)) = asked(document, entry) {
            let bare = orbitals_field::without_polarisation(&atom);
            for atom in std::iter::once(atom)
                .chain(bare)
                .filter(|atom| !cache::has(atom))
            {
                let (seconds, megabytes) = orbitals_field::cost(&atom);
                total = (total.0 + seconds, total.1 + megabytes);
            }
        }
    }
    total
}
