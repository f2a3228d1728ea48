//! What energies a sheet asks for, and why some cannot be had.

use crate::configuration::{Orbital, Subshell};
use crate::problem::Problem;
use crate::radial::hartree_fock::{HEAVIEST, Polarisation};
use crate::structure::model::{Case, Given as GivenValue, Name};

use super::document::Document;
use super::entry::{Content, Entry, Named};
use super::given::Given;
use super::orbitals_case::without_core;
use super::orbitals_closed::{mass_number_of, nuclear_mass};
use super::parameter_name::Parameter;
use super::structure::Energies;

/// What the energies of a sheet depend on, and nothing else.
#[derive(Clone, Debug, PartialEq)]
pub enum EnergyCase {
    /// One electron: closed formulas.
    OneElectron {
        /// Nuclear charge.
        z: u8,
        /// Mass of the nucleus in electron masses.
        mass: f64,
        /// Each orbital with its entry.
        orbitals: Vec<(usize, Orbital)>,
    },
    /// Radial integrals and matrices.
    Model {
        /// The case.
        case: Case,
        /// The entry of each of its configurations.
        entries: Vec<usize>,
    },
}

/// Why there is nothing to be computed: a code and what the question needs instead.
pub type Need = (&'static str, String);

/// Whether the sheet asks for energies at all: any atom for which nothing is given does not.
pub fn wanted(document: &Document) -> bool {
    document.energies() == Energies::Computed || !document.given.is_empty()
}

/// What the sheet's energies need that it does not have; cheap, for it is asked while typing.
pub fn need(document: &Document) -> Option<Need> {
    let needs = |code, text: &str| Some((code, text.to_owned()));
    if one_electron(document) {
        return None;
    }
    if document.entries.iter().any(|e| e.named().is_none()) {
        return needs(
            "needs-a-configuration",
            "a configuration: a bare shell has levels only where the atom has one electron",
        );
    }
    if !wanted(document) && full_shells_alone(document) {
        return needs(
            "needs-an-open-shell",
            "an open shell: full shells alone have the one level 1S0",
        );
    }
    if !wanted(document) {
        return needs(
            "needs-parameters",
            match document.is_of_an_element() {
                true => "given parameters such as F2(3p,3p) and zeta(3p), or computed energies",
                false => "an atom or ion, or given parameters such as F2(3p,3p) and zeta(3p)",
            },
        );
    }
    let element = document.species.and_then(|species| species.element);
    if document.energies() == Energies::Computed && element.is_some_and(|z| z > HEAVIEST) {
        return Some((
            "needs-a-lighter-nucleus",
            format!("a nuclear charge of at most {HEAVIEST}, or given parameters"),
        ));
    }
    None
}

/// Whether no configuration has an open shell.
pub fn full_shells_alone(document: &Document) -> bool {
    let full = |entry: &Entry| {
        let subshells = entry.configuration().map(|c| c.subshells());
        subshells.is_some_and(|all| all.iter().all(|s| !s.is_open()))
    };
    document.entries.iter().all(full)
}

/// Whether the atom has one electron and its levels are those of Dirac's equation.
fn one_electron(document: &Document) -> bool {
    let electrons = document.species.and_then(|species| species.electrons());
    let nucleus = document.species.and_then(|species| species.element);
    document.energies() == Energies::Computed
        && electrons == Some(1)
        && nucleus.is_some_and(|z| z <= crate::radial::hydrogenic::dirac::LARGEST_CHARGE)
}

/// What the sheet's energies depend on.
///
/// # Errors
/// `electron-numbers-differ` at the configuration; a polarisation without a core.
pub fn energy_case(document: &Document) -> Result<EnergyCase, Problem> {
    let species = document.species;
    let typed = species.and_then(|species| species.mass_number);
    let z = species.and_then(|species| species.element).unwrap_or(0);
    let mass_number = mass_number_of(z.max(1), typed).0;
    if one_electron(document) {
        let mut orbitals = Vec::new();
        for (place, entry) in document.entries.iter().enumerate() {
            match &entry.content {
                Content::BareShell(n) => {
                    let all = (0..*n).filter_map(|l| Orbital::new(*n, l));
                    orbitals.extend(all.map(|orbital| (place, orbital)));
                }
                Content::Configuration(named) => {
                    let subshells = named.configuration.subshells().iter();
                    orbitals.extend(subshells.map(|s| (place, s.orbital())));
                }
            }
        }
        return Ok(EnergyCase::OneElectron {
            z,
            mass: nuclear_mass(z, mass_number).0,
            orbitals,
        });
    }
    let named: Vec<(usize, &Entry, &Named)> = document
        .entries
        .iter()
        .enumerate()
        .filter_map(|(place, entry)| Some((place, entry, entry.named()?)))
        .collect();
    same_electrons(&named)?;
    let entries: Vec<usize> = named.iter().map(|(place, ..)| *place).collect();
    let computed = document.energies() == Energies::Computed;
    let polarisation = match document.structure.polarisation.filter(|_| computed) {
        Some(entered) => {
            let core = core(&named);
            if let (true, Some((_, entry, _))) = (core.is_empty(), named.first()) {
                return Err(without_core(entry));
            }
            Some(Polarisation {
                alpha: entered.alpha,
                radius: entered.radius,
                core,
            })
        }
        None => None,
    };
    let given = document
        .given
        .iter()
        .filter_map(|given| given_value(given, &entries))
        .collect();
    let configurations = named
        .iter()
        .map(|(_, _, named)| named.configuration.subshells().to_vec())
        .collect();
    let case = Case {
        nucleus: (z > 0).then_some((z, mass_number)),
        computed,
        relativity: document.structure.relativity,
        mixing: document.structure.mixing,
        correlation: document.structure.correlation,
        scale: document.structure.scale,
        polarisation,
        given,
        ..Case::new(z, mass_number, configurations)
    };
    Ok(EnergyCase::Model { case, entries })
}

/// Levels and lines are those of one atom or ion.
fn same_electrons(named: &[(usize, &Entry, &Named)]) -> Result<(), Problem> {
    let Some((_, first, first_named)) = named.first() else {
        return Ok(());
    };
    let electrons = first_named.configuration.electrons();
    let other = named
        .iter()
        .find(|(_, _, named)| named.configuration.electrons() != electrons);
    let Some((_, entry, named)) = other else {
        return Ok(());
    };
    Err(Problem::new(
        "electron-numbers-differ",
        format!(
            "{} has {} electrons, and {} has {electrons}.",
            entry.label,
            named.configuration.electrons(),
            first.label
        ),
        0,
        0,
    )
    .bound("Levels and lines are those of configurations with the same number of electrons.")
    .way("Leave this one out", "")
    .at(entry.path.clone()))
}

/// What no configuration opens and none writes beside its core.
fn core(named: &[(usize, &Entry, &Named)]) -> Vec<Orbital> {
    let inner = |named: &Named, shell: &Subshell| {
        !shell.is_open()
            && named.configuration.subshells().contains(shell)
            && !named.beyond.contains(shell)
    };
    let Some((_, _, first)) = named.first() else {
        return Vec::new();
    };
    first
        .configuration
        .subshells()
        .iter()
        .filter(|shell| named.iter().all(|(_, _, named)| inner(named, shell)))
        .map(|shell| shell.orbital())
        .collect()
}

/// A given parameter as the model takes it; configurations are counted as in the case.
pub fn given_value(given: &Given, entries: &[usize]) -> Option<GivenValue> {
    Some(GivenValue {
        name: name_of(given, entries)?,
        configuration: match given.entry {
            Some(entry) => Some(entries.iter().position(|place| *place == entry)?),
            None => None,
        },
        value: given.value,
    })
}

/// Its name in the model.
pub fn name_of(given: &Given, entries: &[usize]) -> Option<Name> {
    let configuration = given
        .entry
        .and_then(|entry| entries.iter().position(|place| *place == entry));
    Some(
        match (given.name.parameter, given.name.orbitals.as_slice()) {
            (Parameter::Average, _) => Name::Average(configuration?),
            (Parameter::Direct(k), &[a, b]) => Name::Direct { k, a, b },
            (Parameter::Exchange(k), &[a, b]) => Name::Exchange { k, a, b },
            (Parameter::Mixing(k), &[a, b, c, d]) => Name::Mixing { k, a, b, c, d },
            (Parameter::SpinOrbit, &[a]) => Name::SpinOrbit(a),
            (Parameter::Alpha, &[a]) => Name::Alpha(a),
            (Parameter::Beta, &[a]) => Name::Beta(a),
            (Parameter::Gamma, &[a]) => Name::Gamma(a),
            (Parameter::Dipole, &[a, b]) => Name::Dipole(a, b),
            (Parameter::Quadrupole, &[a, b]) => Name::Quadrupole(a, b),
            _ => return None,
        },
    )
}
