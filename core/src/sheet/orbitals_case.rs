//! What radial functions a configuration of the sheet asks for, and why some cannot be had.

use crate::configuration::{Orbital, Species, Subshell};
use crate::problem::Problem;
use crate::radial::hartree_fock::{Atom, HEAVIEST, Polarisation};

use super::document::Document;
use super::entry::{Content, Entry, Named};
use super::lack::Lack;
use super::orbitals_closed::mass_number_of;

/// What one entry of the sheet asks for.
pub enum Asked {
    /// One electron in these orbitals of a nucleus: closed formulas.
    OneElectron {
        /// Nuclear charge.
        z: u8,
        /// The orbitals, one of them occupied unless it is a bare shell.
        orbitals: Vec<Orbital>,
        /// Whether an electron is in it.
        occupied: bool,
    },
    /// Many electrons: everything that their radial functions depend on, and nothing else.
    Field(Atom),
}

/// What an entry asks for; nothing where no nucleus is known or it is past the bounds.
pub fn asked(document: &Document, entry: &Entry) -> Option<Asked> {
    let species = document.species?;
    let z = species.element?;
    let electrons = species.electrons()?;
    match &entry.content {
        Content::BareShell(n) => (electrons == 1).then(|| Asked::OneElectron {
            z,
            orbitals: (0..*n).filter_map(|l| Orbital::new(*n, l)).collect(),
            occupied: false,
        }),
        Content::Configuration(named) => {
            let subshells = named.configuration.subshells();
            match subshells {
                [] => None,
                [one] if one.electrons() == 1 => Some(Asked::OneElectron {
                    z,
                    orbitals: vec![one.orbital()],
                    occupied: true,
                }),
                _ if z > HEAVIEST => None,
                _ => Some(Asked::Field(atom(document, named, z))),
            }
        }
    }
}

fn atom(document: &Document, named: &Named, z: u8) -> Atom {
    let subshells = named.configuration.subshells().to_vec();
    let typed = document.species.and_then(|species| species.mass_number);
    let polarisation = document.structure.polarisation.map(|entered| {
        // What the sheet writes beside its core is polarising, what is open too.
        let inner = |shell: &&Subshell| !shell.is_open() && !named.beyond.contains(shell);
        Polarisation {
            alpha: entered.alpha,
            radius: entered.radius,
            core: subshells
                .iter()
                .filter(inner)
                .map(|s| s.orbital())
                .collect(),
        }
    });
    let atom = if document.structure.relativity {
        Atom::relativistic(z, subshells, mass_number_of(z, typed).0)
    } else {
        Atom::new(z, subshells)
    };
    Atom {
        polarisation,
        ..atom
    }
}

/// Why no entry of a document with a configuration can be computed: what is needed instead.
pub fn need(document: &Document) -> Option<String> {
    let Some(element) = document.species.and_then(|species| species.element) else {
        return Some(
            "an atom or ion: radial functions are computed in the field of a nucleus, and any atom has none"
                .to_owned(),
        );
    };
    let computable = document
        .entries
        .iter()
        .any(|e| asked(document, e).is_some());
    match document.entries.first().map(|entry| &entry.content) {
        _ if computable => None,
        Some(Content::BareShell(_)) => Some(
            "a configuration: a bare shell has radial functions only where the atom has one electron"
                .to_owned(),
        ),
        _ if element > HEAVIEST => Some(format!(
            "a nuclear charge of at most {HEAVIEST}: this atom has {element}"
        )),
        _ => Some("at least one electron".to_owned()),
    }
}

/// The lack as a fault: it is the atom that is lacking or too heavy.
pub fn lacking(lack: &Lack) -> Problem {
    let problem = lack.problem();
    if problem.path.is_empty() {
        problem.at("/species")
    } else {
        problem
    }
}

/// A fault of an entry's radial functions at its place in the sheet.
pub fn place(document: &Document, entry: &Entry, problem: Problem) -> Problem {
    if !problem.path.is_empty() {
        return problem;
    }
    if problem.code == "polarisation-too-strong" {
        return problem.at("/structure/polarisation/alpha");
    }
    if !entry.path.is_empty() {
        return problem.at(entry.path.clone());
    }
    // A configuration that nobody typed stands for the species.
    let problem = problem.at("/species");
    match document.species {
        Some(species) if species.charge < 0 => {
            let neutral = Species {
                charge: 0,
                ..species
            };
            problem.way(format!("Use {neutral}"), neutral.to_string())
        }
        _ => problem,
    }
}

/// A polarisation that is entered for a configuration without any core.
pub fn without_core(entry: &Entry) -> Problem {
    Problem::new(
        "polarisation-without-core",
        format!("{} has no core that could be polarised.", entry.label),
        0,
        0,
    )
    .bound("The core are the full subshells that the configuration does not write, such as [Ne] in 3s.")
    .at("/structure/polarisation")
}
