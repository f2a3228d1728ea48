//! Filling: the ground configuration by rule and as observed.

use crate::numerics::order::sort_by_key;
use std::cmp::Reverse;

use super::occupation::{Configuration, configuration_of};
use super::{Orbital, Subshell};
use crate::elements::{HEAVIEST, ObservedGround, observed_ground};

/// Orbitals in the order n + ℓ, then n (the order in which subshells fill in neutral atoms;
/// Madelung 1936, common practice), as far as n + ℓ = 12.
pub fn filling_order() -> impl Iterator<Item = Orbital> {
    (1u8..=12).flat_map(|sum| (1..=sum).filter_map(move |n| Orbital::new(n, sum - n)))
}

/// The ground configuration of one atom or ion, by rule and as tabulated.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Ground {
    /// By [`rule`].
    pub rule: Configuration,
    /// As tabulated, with level, status and source.
    pub observed: Option<Observed>,
    /// Whether the two are different configurations.
    pub differs: bool,
    /// Which of the two is used.
    pub used: Used,
}

impl Ground {
    /// The configuration that is used.
    pub fn configuration(&self) -> &Configuration {
        match (&self.observed, self.used) {
            (Some(observed), Used::Observed) => &observed.configuration,
            _ => &self.rule,
        }
    }

    /// Which one was used and why, in one sentence.
    pub fn note(&self) -> String {
        match (&self.observed, self.used) {
            (Some(observed), Used::Observed) if self.differs => format!(
                "The table's configuration {} ({}) is used; the filling rule would give {}.",
                observed.configuration.valence_text(),
                observed.entry.status_text(),
                self.rule.valence_text()
            ),
            (Some(observed), Used::Observed) => {
                format!(
                    "The table ({}) and the filling rule agree.",
                    observed.entry.status_text()
                )
            }
            (Some(observed), Used::Rule) => format!(
                "The filling rule is used: the table's {} is {}.",
                observed.configuration.valence_text(),
                observed.entry.status_text()
            ),
            (None, _) => "No configuration is tabulated; the filling rule is used.".to_string(),
        }
    }
}

/// A tabulated ground configuration.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Observed {
    /// The configuration, complete.
    pub configuration: Configuration,
    /// The table's entry: level, status, source.
    pub entry: ObservedGround,
}

/// Where a ground configuration comes from.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Used {
    /// The table.
    Observed,
    /// The filling rule.
    Rule,
}

/// `observed`, `rule`.
impl std::fmt::Display for Used {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        f.write_str(match self {
            Used::Observed => "observed",
            Used::Rule => "rule",
        })
    }
}

/// The ground configuration by rule, for Z = 1…118 and a charge of −1…Z − 1.
///
/// Neutral atoms fill in the order n + ℓ, then n. Cations lose the electrons of highest n first,
/// then of highest ℓ, from the neutral atom's configuration (the tabulated one where there is one);
/// anions add to it in filling order. Common practice, no source.
pub fn rule(z: u8, charge: i32) -> Option<Configuration> {
    let electrons = counted_electrons(z, charge)?;
    if charge == 0 {
        return fill(Configuration::default(), electrons);
    }
    let neutral = match trusted(z, 0) {
        Some(observed) => observed.configuration,
        None => fill(Configuration::default(), u32::from(z))?,
    };
    match neutral.electrons().checked_sub(electrons) {
        Some(lost) => strip(&neutral, lost),
        None => {
            let added = electrons.checked_sub(neutral.electrons())?;
            fill(neutral, added)
        }
    }
}

/// The ground configuration of Z = 1…118 with a charge of −1…Z − 1. The observed one wins over the
/// rule, except an extrapolation that another table contradicts.
pub fn ground(z: u8, charge: i32) -> Option<Ground> {
    let rule = rule(z, charge)?;
    let observed = tabulated(z, charge);
    let differs = observed.as_ref().is_some_and(|o| o.configuration != rule);
    let used = match &observed {
        Some(o) if !o.entry.is_doubtful() => Used::Observed,
        _ => Used::Rule,
    };
    Some(Ground {
        rule,
        observed,
        differs,
        used,
    })
}

fn tabulated(z: u8, charge: i32) -> Option<Observed> {
    let entry = observed_ground(z, charge)?;
    Some(Observed {
        configuration: configuration_of(&entry)?,
        entry,
    })
}

fn trusted(z: u8, charge: i32) -> Option<Observed> {
    tabulated(z, charge).filter(|observed| !observed.entry.is_doubtful())
}

/// Z − charge within −1 ≤ charge ≤ Z − 1.
fn counted_electrons(z: u8, charge: i32) -> Option<u32> {
    let allowed = (1..=HEAVIEST).contains(&z) && (-1..i32::from(z)).contains(&charge);
    allowed.then(|| u32::try_from(i32::from(z) - charge).ok())?
}

/// Adds electrons in filling order where there is room.
fn fill(to: Configuration, mut electrons: u32) -> Option<Configuration> {
    let mut subshells: Vec<Subshell> = to.subshells().to_vec();
    for orbital in filling_order() {
        if electrons == 0 {
            break;
        }
        let held = to.electrons_in(orbital);
        let added = electrons.min(orbital.capacity().saturating_sub(held));
        if added > 0 {
            subshells.retain(|s| s.orbital() != orbital);
            subshells.push(Subshell::new(orbital, held + added)?);
            electrons -= added;
        }
    }
    (electrons == 0).then(|| Configuration::new(subshells))?
}

/// Takes electrons away, highest n first, then highest ℓ.
fn strip(from: &Configuration, mut electrons: u32) -> Option<Configuration> {
    let mut order: Vec<Subshell> = from.subshells().to_vec();
    sort_by_key(&mut order, |s| Reverse((s.orbital().n(), s.orbital().l())));
    let mut left = Vec::new();
    for subshell in order {
        let taken = electrons.min(subshell.electrons());
        electrons -= taken;
        left.extend(Subshell::new(
            subshell.orbital(),
            subshell.electrons() - taken,
        ));
    }
    (electrons == 0).then(|| Configuration::new(left))?
}

#[cfg(test)]
mod tests {
    use super::*;

    fn text(z: u8, charge: i32) -> String {
        rule(z, charge).unwrap().valence_text()
    }

    #[test]
    fn neutral_atoms_fill_by_n_plus_l() {
        assert_eq!(text(26, 0), "3d6 4s2");
        assert_eq!(text(24, 0), "3d4 4s2");
        assert_eq!(text(64, 0), "4f8 6s2");
        assert_eq!(rule(118, 0).unwrap().electrons(), 118);
        let order: Vec<String> = filling_order().take(19).map(|o| o.to_string()).collect();
        assert_eq!(
            order.join(" "),
            "1s 2s 2p 3s 3p 4s 3d 4p 5s 4d 5p 6s 4f 5d 6p 7s 5f 6d 7p"
        );
    }

    #[test]
    fn cations_lose_the_highest_n_and_anions_gain() {
        assert_eq!(text(26, 1), "3d6 4s");
        assert_eq!(text(26, 2), "3d6");
        assert_eq!(text(26, 3), "3d5");
        assert_eq!(text(24, 1), "3d5");
        assert_eq!(text(1, -1), "1s2");
        assert_eq!(text(29, -1), "3d10 4s2");
    }

    #[test]
    fn the_configuration_of_wins() {
        let chromium = ground(24, 0).unwrap();
        assert!(chromium.differs);
        assert_eq!(chromium.used, Used::Observed);
        assert_eq!(chromium.configuration().valence_text(), "3d5 4s");
        assert!(chromium.note().contains("3d4 4s2"));
        let iron_ion = ground(26, 1).unwrap();
        assert_eq!((iron_ion.differs, iron_ion.used), (false, Used::Observed));
    }

    #[test]
    fn doubtful_extrapolations_do_not_win() {
        let darmstadtium = ground(110, 0).unwrap();
        assert_eq!(darmstadtium.used, Used::Rule);
        assert!(
            darmstadtium
                .configuration()
                .to_string()
                .ends_with("6d8 7s2")
        );
        assert!(darmstadtium.note().contains("doubtful"));
    }

    #[test]
    fn every_atom_and_ion_has_a_ground_configuration() {
        for z in 1..=HEAVIEST {
            for charge in -1..i32::from(z) {
                let ground = ground(z, charge).unwrap();
                let electrons = u32::try_from(i32::from(z) - charge).unwrap();
                assert_eq!(
                    ground.rule.electrons(),
                    electrons,
                    "Z = {z}, charge {charge}"
                );
                assert_eq!(
                    ground.configuration().electrons(),
                    electrons,
                    "Z = {z}, charge {charge}"
                );
            }
            assert_eq!(ground(z, i32::from(z)), None);
            assert_eq!(ground(z, -2), None);
        }
        assert_eq!(ground(0, 0), None);
        assert_eq!(ground(119, 0), None);
        assert_eq!(ground(26, i32::MIN), None);
    }
}
