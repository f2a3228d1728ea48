//! Making a typed configuration whole: the unnamed core, and the count against the charge.

use super::filling::filling_order;
use super::occupation::{Configuration, closed_core, join};
use super::orbital::{Orbital, Subshell};
use super::species::Species;
use super::written::Written;
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
struct Parts {
    core: Option<&'static Configuration>,
    typed: Vec<Subshell>,
}

impl Parts {
    fn named(&self) -> Vec<Subshell> {
        let core = self
            .core
            .iter()
            .flat_map(|core| core.subshells().iter().copied());
        core.chain(self.typed.iter().copied()).collect()
    }

    fn electrons(&self) -> u32 {
        self.named()
            .iter()
            .fold(0, |sum, s| sum.saturating_add(s.electrons()))
    }

    /// The whole configuration of a number of electrons, or of any number.
    fn whole(&self, electrons: Option<u32>) -> Option<Reading> {
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

    /// The text of these parts: `[Ar] 3d6 4s2`.
    fn text(&self, core: Option<&str>) -> String {
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
fn full_subshells(
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
            .bound("each subshell is named once");
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
                "n is at most {MAX_N_FILLING} beside other electrons, 50 for one electron alone"
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
                "{species} has {}: the {} besides {text} do not fill whole subshells.",
                electrons_word(wanted),
                wanted - have
            ),
        )
    };
    let mut problem = Problem::new(code, message, 0, written.text.len());
    problem = problem.bound(match fitting_species(parts, species, have) {
        Some(fitting) => {
            format!(
                "{species} has {}; as written it fits {fitting}",
                electrons_word(wanted)
            )
        }
        None => format!("{species} has {}", electrons_word(wanted)),
    });
    for (label, replacement) in ways(parts, core, wanted) {
        if problem.ways.len() < 4
            && !problem
                .ways
                .iter()
                .any(|way| way.replacement == replacement)
        {
            problem = problem.way(label, replacement);
        }
    }
    problem
}

/// The charge with which the same text is whole, the nearest to the one given.
fn fitting_species(parts: &Parts, species: &Species, have: u32) -> Option<Species> {
    let z = species.element?;
    let fits = |charge: i32| {
        let other = Species { charge, ..*species };
        let electrons = other.electrons()?;
        (electrons >= have).then(|| parts.whole(Some(electrons)))??;
        Some(other)
    };
    let mut charges: Vec<i32> = (-1..i32::from(z)).collect();
    sort_by_key(&mut charges, |charge| {
        (charge.abs_diff(species.charge), *charge)
    });
    charges.into_iter().find_map(fits)
}

/// Texts that do fit, each tried before it is offered.
fn ways(parts: &Parts, core: Option<&str>, wanted: u32) -> Vec<(String, String)> {
    let mut found = Vec::new();
    let mut offer = |parts: &Parts, core: Option<&str>| {
        if parts.whole(Some(wanted)).is_some() {
            let text = parts.text(core);
            if !text.is_empty() {
                found.push((format!("Use {text}"), text));
            }
        }
    };
    // Put or take the difference in one subshell, the outermost first.
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
    // Or fill up what is missing: with full subshells, the lowest n first; or in filling order, the
    // last subshell not full.
    let left = wanted.checked_sub(parts.electrons());
    let named = parts.named();
    if let (Some(left), None) = (left, core) {
        let lowest = (1..=8u8).flat_map(|n| (0..n).filter_map(move |l| Orbital::new(n, l)));
        if let Some(added) = full_subshells(left, &named, lowest) {
            offer_with(parts, added, &mut offer);
        }
    }
    for (_, _, other) in changed.into_iter().take(2) {
        offer(&other, core);
    }
    if let Some(added) = left.and_then(|left| partly_filled(left, &named)) {
        offer_with(parts, added, &mut |parts, none| offer(parts, core.or(none)));
    }
    found
}

/// Offers the typed subshells with others added; full noble-gas shells stay unwritten by the
/// core's own completion where that still fits.
fn offer_with(parts: &Parts, added: Vec<Subshell>, offer: &mut impl FnMut(&Parts, Option<&str>)) {
    let mut typed = parts.typed.clone();
    typed.extend(added);
    let Some(whole) = Configuration::new(typed.clone()) else {
        return;
    };
    match (&parts.core, whole.noble_core()) {
        (None, Some(z)) => {
            let shorter = Parts {
                core: closed_core(z),
                typed: whole.valence(),
            };
            offer(&shorter, symbol(z));
        }
        _ => offer(
            &Parts {
                core: parts.core,
                typed,
            },
            None,
        ),
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

fn electrons_word(count: u32) -> String {
    if count == 1 {
        "1 electron".to_string()
    } else {
        format!("{count} electrons")
    }
}
