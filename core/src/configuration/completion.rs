//! Making a typed configuration whole: the unnamed core, and the count against the charge.

use super::filling::filling_order;
use super::occupation::{Configuration, closed_core, join};
use super::species::Species;
use super::written::Written;
use super::{Orbital, Subshell};
use crate::elements::symbol;
use crate::numerics::order::{sort, sort_by_key};
use crate::problem::Problem;

/// The largest n where a core is completed or several electrons are counted; one electron alone may
/// have any n that is read.
pub const MAX_N_FILLING: u8 = 30;

/// A configuration made whole.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Reading {
    /// Every subshell, typed or completed.
    pub configuration: Configuration,
    /// What was added to the typed text, if anything was.
    pub completed_core: Option<CompletedCore>,
}

/// The subshells that were added to a typed configuration.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct CompletedCore {
    /// All of them, full.
    pub configuration: Configuration,
    /// The symbol of the noble gas that they are, where they are one.
    pub noble_gas: Option<&'static str>,
}

/// `[Ar]`, or the subshells: `1s2 2s2`.
impl std::fmt::Display for CompletedCore {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        match self.noble_gas {
            Some(symbol) => write!(f, "[{symbol}]"),
            None => write!(f, "{}", self.configuration),
        }
    }
}

/// Completes a typed configuration and checks its electrons against the species.
///
/// Without a typed core, the electrons that are left fill the unnamed subshells in the order n + ℓ,
/// then n, each completely; a complete listing is taken as it is. For any atom (`*`) nothing is
/// added. A bare shell (`n=5`) is no configuration of a species: see [`Written::bare_shell`].
///
/// All faults, in the order of the text; places are bytes of the typed text.
pub fn complete(written: &Written, species: &Species) -> Result<Reading, Vec<Problem>> {
    if let Some(n) = written.bare_shell {
        let problem = Problem::new(
            "bare-shell-alone",
            format!("n={n} is a bare shell and not a configuration of an atom."),
            0,
            written.text.len(),
        );
        let usual = species
            .element
            .and_then(|z| super::filling::ground(z, species.charge))
            .map_or_else(
                || "1s".to_string(),
                |ground| ground.configuration().valence_text(),
            );
        return Err(vec![problem.way(format!("Use {usual}"), usual)]);
    }
    let mut problems = overlaps(written);
    problems.extend(too_high(written, species));
    if !problems.is_empty() {
        sort_by_key(&mut problems, |problem| problem.start);
        return Err(problems);
    }
    let core = written.core.and_then(|core| closed_core(core.z));
    let typed: Vec<Subshell> = written.subshells.iter().map(|s| s.subshell).collect();
    let parts = Parts { core, typed };
    parts
        .whole(species.electrons())
        .ok_or_else(|| vec![count_problem(written, &parts, species)])
}

/// The typed core and subshells.
#[derive(Clone)]
pub(super) struct Parts {
    pub core: Option<&'static Configuration>,
    pub typed: Vec<Subshell>,
}

impl Parts {
    pub(super) fn named(&self) -> Vec<Subshell> {
        let core = self
            .core
            .iter()
            .flat_map(|core| core.subshells().iter().copied());
        core.chain(self.typed.iter().copied()).collect()
    }

    pub(super) fn electrons(&self) -> u32 {
        self.named()
            .iter()
            .fold(0, |sum, s| sum.saturating_add(s.electrons()))
    }

    /// The whole configuration of a number of electrons, or of any number.
    pub(super) fn whole(&self, electrons: Option<u32>) -> Option<Reading> {
        let mut all = self.named();
        let left = match electrons {
            Some(electrons) => electrons.checked_sub(self.electrons())?,
            None => 0,
        };
        let mut completed_core = None;
        if left > 0 {
            if self.core.is_some() {
                return None;
            }
            let added = full_subshells(left, &all, filling_order())?;
            all.extend(added.iter().copied());
            let configuration = Configuration::new(added)?;
            let noble_gas = super::NOBLE_GASES
                .iter()
                .find(|&&z| closed_core(z).is_some_and(|core| *core == configuration))
                .and_then(|&z| symbol(z));
            completed_core = Some(CompletedCore {
                configuration,
                noble_gas,
            });
        }
        Some(Reading {
            configuration: Configuration::new(all)?,
            completed_core,
        })
    }

    /// Whether what was added is a noble gas, or fills before the typed subshells do.
    fn core_is_usual(&self, reading: &Reading) -> bool {
        let Some(added) = &reading.completed_core else {
            return true;
        };
        let last_typed = filling_order().fold(None, |last, orbital| {
            let typed = self.typed.iter().any(|s| s.orbital() == orbital);
            if typed { Some(orbital) } else { last }
        });
        added.noble_gas.is_some()
            || filling_order()
                .skip_while(|&orbital| Some(orbital) != last_typed)
                .all(|orbital| added.configuration.electrons_in(orbital) == 0)
    }

    /// The text of these parts: `[Ar] 3d6 4s2`.
    pub(super) fn text(&self, core: Option<&str>) -> String {
        let mut typed = self.typed.clone();
        sort(&mut typed);
        match core {
            Some(core) if typed.is_empty() => format!("[{core}]"),
            Some(core) => format!("[{core}] {}", join(&typed)),
            None => join(&typed),
        }
    }
}

/// Full subshells of unnamed orbitals that hold exactly these electrons.
pub(super) fn full_subshells(
    mut left: u32,
    named: &[Subshell],
    order: impl Iterator<Item = Orbital>,
) -> Option<Vec<Subshell>> {
    let mut added = Vec::new();
    for orbital in order {
        if left == 0 {
            break;
        }
        if named.iter().any(|s| s.orbital() == orbital) {
            continue;
        }
        left = left.checked_sub(orbital.capacity())?;
        added.push(Subshell::new(orbital, orbital.capacity())?);
    }
    (left == 0).then_some(added)
}

/// Subshells that are named although the typed core has them.
fn overlaps(written: &Written) -> Vec<Problem> {
    let Some(core) = written.core else {
        return Vec::new();
    };
    let Some(inside) = closed_core(core.z) else {
        return Vec::new();
    };
    let doubled: Vec<_> = written
        .subshells
        .iter()
        .filter(|s| inside.electrons_in(s.subshell.orbital()) > 0)
        .collect();
    let typed: Vec<Subshell> = written.subshells.iter().map(|s| s.subshell).collect();
    // Without the brackets: the core's other subshells are written out.
    let mut opened: Vec<Subshell> = inside
        .subshells()
        .iter()
        .copied()
        .filter(|s| !typed.iter().any(|t| t.orbital() == s.orbital()))
        .collect();
    opened.extend(typed.iter().copied());
    let opened = Configuration::new(opened).map(|c| c.to_string());
    doubled
        .into_iter()
        .map(|s| {
            let mut problem = Problem::new(
                "subshell-in-core",
                format!(
                    "{} is already in the core [{}].",
                    s.subshell.orbital(),
                    core.symbol
                ),
                s.start,
                s.end,
            )
            .bound("Each subshell is named once.");
            if let Some(opened) = &opened {
                problem = problem.way("Write the core out", opened.clone());
            }
            let others: Vec<Subshell> =
                typed.iter().copied().filter(|&t| t != s.subshell).collect();
            let without = Parts {
                core: None,
                typed: others,
            }
            .text(Some(core.symbol));
            problem.way(format!("Use {without}"), without)
        })
        .collect()
}

/// n above the bound of filling, unless one electron stands alone.
fn too_high(written: &Written, species: &Species) -> Vec<Problem> {
    let typed: u32 = written
        .subshells
        .iter()
        .fold(0, |sum, s| sum.saturating_add(s.subshell.electrons()));
    if written.core.is_none() && species.electrons().unwrap_or(typed) == 1 {
        return Vec::new();
    }
    let above = written
        .subshells
        .iter()
        .filter(|s| s.subshell.orbital().n() > MAX_N_FILLING);
    above
        .map(|s| {
            let orbital = s.subshell.orbital();
            let mut problem = Problem::new(
                "n-above-filling",
                format!(
                    "n = {} is too high for an atom of several electrons.",
                    orbital.n()
                ),
                s.start,
                s.end,
            )
            .bound(format!(
                "Beside other electrons, n is at most {MAX_N_FILLING}; one electron alone has n up to 50."
            ));
            let lower = Orbital::new(MAX_N_FILLING, orbital.l())
                .and_then(|o| Subshell::new(o, s.subshell.electrons()));
            if let Some(lower) = lower {
                let whole =
                    super::text_faults::replaced(&written.text, s.start, s.end, &lower.to_string());
                problem = problem.way(format!("Use {lower}"), whole);
            }
            problem
        })
        .collect()
}

fn count_problem(written: &Written, parts: &Parts, species: &Species) -> Problem {
    let wanted = species.electrons().unwrap_or(0);
    let have = parts.electrons();
    let core = written.core.map(|core| core.symbol);
    let text = parts.text(core);
    let (code, message) = if have > wanted {
        (
            "too-many-electrons",
            format!(
                "{text} has {}, but {species} has {wanted}.",
                electrons_word(have)
            ),
        )
    } else if core.is_some() {
        (
            "too-few-electrons",
            format!(
                "{text} has {}, but {species} has {wanted}.",
                electrons_word(have)
            ),
        )
    } else {
        (
            "core-not-closed-shells",
            format!(
                "The {} of {species} besides {text} cannot fill whole subshells.",
                electrons_word(wanted - have)
            ),
        )
    };
    let mut problem = Problem::new(code, message, 0, written.text.len());
    problem = problem.bound(match fitting_species(parts, species, have) {
        Some(fitting) => {
            format!(
                "{species} has {}. As written it fits {fitting}.",
                electrons_word(wanted)
            )
        }
        None => format!("{species} has {}.", electrons_word(wanted)),
    });
    for text in super::completion_ways::fitting_texts(parts, core, species) {
        problem = problem.way(format!("Use {text}"), text);
    }
    problem
}

/// The charge with which the same text is whole and its unnamed core the usual one: cations and
/// the neutral atom before the anion, then the nearest to the one given.
fn fitting_species(parts: &Parts, species: &Species, have: u32) -> Option<Species> {
    let z = species.element?;
    let fits = |charge: i32| {
        let other = Species { charge, ..*species };
        let electrons = other.electrons()?;
        let reading = (electrons >= have).then(|| parts.whole(Some(electrons)))??;
        parts.core_is_usual(&reading).then_some(other)
    };
    let mut charges: Vec<i32> = (-1..i32::from(z)).collect();
    sort_by_key(&mut charges, |charge| {
        (*charge < 0, charge.abs_diff(species.charge), *charge)
    });
    charges.into_iter().find_map(fits)
}

fn electrons_word(count: u32) -> String {
    if count == 1 {
        "1 electron".to_string()
    } else {
        format!("{count} electrons")
    }
}
