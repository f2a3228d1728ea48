//! What energies are asked for.

use super::names::Given;
use crate::configuration::{Orbital, Subshell};
use crate::numerics::order::sort;
use crate::problem::Problem;
use crate::radial::hartree_fock::{Atom, Polarisation};
use crate::radial::nucleus::Nucleus;

/// Factors on computed integrals; values that are given stay as they are.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Scale {
    /// On F^k, k > 0.
    pub f: f64,
    /// On G^k.
    pub g: f64,
    /// On R^k.
    pub r: f64,
    /// On ζ.
    pub zeta: f64,
}

impl Default for Scale {
    fn default() -> Self {
        Scale {
            f: 1.0,
            g: 1.0,
            r: 1.0,
            zeta: 1.0,
        }
    }
}

/// A set of configurations, and where their radial integrals come from.
#[derive(Clone, Debug, PartialEq)]
pub struct Case {
    /// Charge and mass number; nothing for any atom, where what is not given is zero.
    pub nucleus: Option<(u8, u16)>,
    /// Whether what is not given is computed.
    pub computed: bool,
    /// Whether the radial equation is relativistic.
    pub relativity: bool,
    /// Whether configurations of one parity mix.
    pub mixing: bool,
    /// Whether correlation within subshells is added to what is computed ([`super::Correlation`]): nowhere,
    /// everywhere, which counts twice what a configuration describes that mixes in, or without a word where
    /// that is sound ([`Case::correlates`]).
    pub correlation: Option<bool>,
    /// Factors on what is computed.
    pub scale: Scale,
    /// Core polarisation with its core.
    pub polarisation: Option<Polarisation>,
    /// Every configuration, complete, with the same number of electrons; both parities in any order.
    pub configurations: Vec<Vec<Subshell>>,
    /// What is given.
    pub given: Vec<Given>,
}

impl Case {
    /// Computed from nothing but the nucleus, relativistic, mixing, unscaled, with correlation where it is sound.
    pub fn new(z: u8, mass_number: u16, configurations: Vec<Vec<Subshell>>) -> Self {
        Case {
            nucleus: Some((z, mass_number)),
            computed: true,
            relativity: true,
            mixing: true,
            correlation: None,
            scale: Scale::default(),
            polarisation: None,
            configurations,
            given: Vec::new(),
        }
    }

    /// What the radial functions of a configuration depend on; nothing where none are computed.
    pub fn atom(&self, configuration: usize) -> Option<Atom> {
        let (z, mass_number) = self.nucleus.filter(|_| self.computed)?;
        let subshells = self.configurations.get(configuration)?.clone();
        let nucleus = if self.relativity {
            Nucleus::Uniform { mass_number }
        } else {
            Nucleus::Point
        };
        Some(Atom {
            nucleus,
            relativity: self.relativity,
            polarisation: self.polarisation.clone(),
            ..Atom::new(z, subshells)
        })
    }

    /// Electrons of an orbital in a configuration.
    pub fn electrons(&self, configuration: usize, orbital: Orbital) -> u32 {
        let subshells = self.configurations.get(configuration);
        let found = subshells
            .into_iter()
            .flatten()
            .find(|s| s.orbital() == orbital);
        found.map_or(0, |subshell| subshell.electrons())
    }

    /// The orbitals that are not full in every configuration, by n, then ℓ: the order of coupling. The last
    /// one of all where every one is full, for such a configuration has its one level too.
    pub fn orbitals(&self) -> Vec<Orbital> {
        let all = self.configurations.iter().flatten();
        let mut orbitals: Vec<Orbital> = all.map(|subshell| subshell.orbital()).collect();
        sort(&mut orbitals);
        orbitals.dedup();
        let last = orbitals.last().copied();
        orbitals.retain(|&orbital| {
            (0..self.configurations.len())
                .any(|place| self.electrons(place, orbital) != orbital.capacity())
        });
        if orbitals.is_empty() {
            orbitals.extend(last);
        }
        orbitals
    }

    /// Whether Σ Nℓ of a configuration is odd.
    pub fn is_odd(&self, configuration: usize) -> bool {
        let subshells = self.configurations.get(configuration);
        let odd = subshells
            .into_iter()
            .flatten()
            .filter(|s| s.orbital().l() % 2 == 1 && s.electrons() % 2 == 1);
        odd.count() % 2 == 1
    }

    /// The places of the configurations of one parity.
    pub fn of_parity(&self, odd: bool) -> Vec<usize> {
        (0..self.configurations.len())
            .filter(|&place| self.is_odd(place) == odd)
            .collect()
    }

    /// Electrons of a configuration in these orbitals.
    pub fn occupations(&self, configuration: usize, orbitals: &[Orbital]) -> Vec<u32> {
        let electrons = orbitals
            .iter()
            .map(|&orbital| self.electrons(configuration, orbital));
        electrons.collect()
    }

    /// # Errors
    /// `no-configuration`; `electron-numbers-differ`, also between configurations of two parities.
    pub(super) fn check(&self) -> Result<(), Problem> {
        let count = |subshells: &Vec<Subshell>| {
            let electrons = subshells.iter().map(|s| s.electrons());
            electrons.fold(0_u32, u32::saturating_add)
        };
        let Some(first) = self.configurations.first().map(count) else {
            return Err(Problem::new(
                "no-configuration",
                "There is no configuration.",
                0,
                0,
            ));
        };
        for (number, electrons) in (1..).zip(self.configurations.iter().map(count)) {
            if electrons != first {
                return Err(Problem::new(
                    "electron-numbers-differ",
                    format!(
                        "Configuration {number} has {electrons} electrons, the first has {first}."
                    ),
                    0,
                    0,
                ));
            }
        }
        Ok(())
    }
}
