//! What radial functions a configuration of the sheet asks for, and why some cannot be had.

use crate::configuration::{Orbital, Subshell};
use crate::problem::Problem;

use super::document::Document;
use super::entry::{Content, Entry};
use super::orbitals_closed::mass_number_of;
use super::structure::Polarisation;

/// The heaviest nucleus whose electrons are computed.
pub const LARGEST_CHARGE: u8 = 103;

/// Everything that radial functions depend on, and nothing else: the key of the cache.
#[derive(Clone, Debug, PartialEq)]
pub struct Case {
    /// Nuclear charge.
    pub z: u8,
    /// Nucleons of a nucleus of finite size; nothing for a point.
    pub mass_number: Option<u16>,
    /// Every occupied subshell.
    pub subshells: Vec<Subshell>,
    /// Whether the radial equation is relativistic.
    pub relativity: bool,
    /// The core polarisation.
    pub polarisation: Option<Polarisation>,
}

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
    /// Many electrons.
    Field(Case),
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
                _ if z > LARGEST_CHARGE => None,
                _ => Some(Asked::Field(Case {
                    z,
                    mass_number: document
                        .structure
                        .relativity
                        .then(|| mass_number_of(z, species.mass_number).0),
                    subshells: subshells.to_vec(),
                    relativity: document.structure.relativity,
                    polarisation: document.structure.polarisation,
                })),
            }
        }
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
        _ if element > LARGEST_CHARGE => Some(format!(
            "a nuclear charge of at most {LARGEST_CHARGE}: this atom has {element}"
        )),
        _ => Some("at least one electron".to_owned()),
    }
}

/// The place in the sheet that a fault of an entry's radial functions belongs to.
pub fn place(entry: &Entry, problem: Problem) -> Problem {
    if !problem.path.is_empty() {
        return problem;
    }
    // A configuration that nobody typed stands for the species.
    let path = if entry.path.is_empty() {
        "/species"
    } else {
        &entry.path
    };
    problem.at(path)
}
