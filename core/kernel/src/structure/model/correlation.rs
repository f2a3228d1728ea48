//! Correlation within a subshell as parameters: what it adds to F^k, and α, β and γ.
//!
//! The changes of the terms of ℓ² ([`crate::radial::correlation`]) are exactly a constant, ΔF^k, α L(L+1)
//! and, for d and f, β and γ times Casimir's operators: 3, 5 and 7 numbers for as many terms. Being
//! operators of two electrons, they serve ℓ^N with any N. The constant belongs to E_av, which is left as
//! it is, as are F^k and G^k between subshells.

use super::case::Case;
use super::names::{Name, given};
use crate::angular::equivalent::classify;
use crate::configuration::{Orbital, Subshell};
use crate::numerics::linear::solve;
use crate::radial::correlation::pair_amplitudes;
use crate::radial::hartree_fock::{RadialOrbital, Solution};
use crate::structure::parameters::Effective;

/// Why a subshell with several terms gets no correlation.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Uncorrelated {
    /// Because nobody wants it.
    Refused,
    /// Its F^k are scaled, which stands for the same.
    Scaled,
    /// Some of its F^k are given, which hold it if they come from measured levels.
    Given,
    /// The configuration at this place mixes with it and differs by two electrons of the subshell: part of the
    /// same correlation.
    Mixed(usize),
}

impl Case {
    /// Whether correlation within a subshell of a configuration is computed; nothing where there is none to be
    /// computed.
    #[inline(never)]
    pub fn correlates(&self, place: usize, orbital: Orbital) -> Option<Result<(), Uncorrelated>> {
        self.nucleus.filter(|_| self.computed)?;
        let electrons = self.electrons(place, orbital);
        Subshell::new(orbital, electrons).filter(|of| Correlation::matters(*of))?;
        let is_given = || {
            (1..=orbital.l()).any(|half| {
                let (k, a, b) = (half.saturating_mul(2), orbital, orbital);
                given(self, Name::Direct { k, a, b }, (place, place)).is_some()
            })
        };
        Some(match self.correlation {
            Some(true) => Ok(()),
            Some(false) => Err(Uncorrelated::Refused),
            None if self.scale.f != 1.0 => Err(Uncorrelated::Scaled),
            None if is_given() => Err(Uncorrelated::Given),
            None => match self.mixed_pair(place, orbital) {
                Some(other) => Err(Uncorrelated::Mixed(other)),
                None => Ok(()),
            },
        })
    }

    /// The configuration that mixes with this one and differs from it by two electrons of this orbital.
    #[inline(never)]
    pub fn mixed_pair(&self, place: usize, orbital: Orbital) -> Option<usize> {
        let apart = |other: usize, of: Orbital| {
            self.electrons(place, of)
                .abs_diff(self.electrons(other, of))
        };
        let orbitals = self.orbitals();
        let all = || orbitals.iter().copied();
        (0..self.configurations.len())
            .filter(|&other| self.mixing && self.is_odd(other) == self.is_odd(place))
            .find(|&other| {
                apart(other, orbital) == 2 && all().map(|of| apart(other, of)).sum::<u32>() == 4
            })
    }
}

/// What is added, hartree.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Correlation {
    /// ΔF^k, k = 2, 4, … .
    pub direct: Vec<(u8, f64)>,
    /// α, β and γ, those that the subshell has.
    pub effective: Vec<(Effective, f64)>,
}

/// By how much distances of terms from the ground term are usually off, in percent: what the native tests find
/// and the validation report lists.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct UsualDeviation {
    /// Of the first excited term without correlation, which is too far up: least and most.
    pub without: (u8, u8),
    /// At most with it, in either direction.
    pub with: u8,
    /// Of higher terms without and with it, at most in either direction; nothing where the others count all.
    pub higher: Option<(u8, u8)>,
}

impl UsualDeviation {
    /// Of a subshell p, d or f; of f by all terms of one ion alone.
    pub fn of(orbital: Orbital) -> Option<Self> {
        let (without, with, higher) = match (orbital.n(), orbital.l()) {
            (2, 1) => ((6, 24), 4, Some((46, 17))),
            (_, 1) => ((18, 40), 4, Some((41, 15))),
            (_, 2) => ((23, 46), 11, Some((50, 13))),
            (_, 3) => ((14, 38), 4, None),
            _ => return None,
        };
        Some(UsualDeviation {
            without,
            with,
            higher,
        })
    }
}

impl Correlation {
    /// Whether a subshell has several terms that correlation moves apart or together.
    pub fn matters(subshell: Subshell) -> bool {
        let (electrons, orbital) = (subshell.electrons(), subshell.orbital());
        let alone = electrons < 2 || electrons.saturating_add(1) >= orbital.capacity();
        !alone && (1..=3).contains(&orbital.l())
    }

    /// Of a subshell p, d or f with more than one term; nothing for others.
    pub fn of(run: &Solution, orbital: &RadialOrbital) -> Option<Self> {
        let l = orbital.orbital.l();
        Subshell::new(orbital.orbital, orbital.electrons).filter(|of| Self::matters(*of))?;
        let changes = run.pair_energies(orbital)?;
        let kinds: Vec<Effective> = [Effective::Alpha, Effective::Beta, Effective::Gamma]
            .into_iter()
            .take(usize::from(l))
            .collect();
        let ranks: Vec<(usize, Vec<f64>)> = pair_amplitudes(l.into(), l.into(), l.into())
            .into_iter()
            .filter(|(k, _)| *k > 0)
            .collect();
        let mut rows = Vec::new();
        for term in classify(l, 2).ok()? {
            let place = usize::try_from(term.l_total).ok()?;
            let change = changes.get(place)?;
            let sign = if term.l_total % 2 == 0 { 1.0 } else { -1.0 };
            let mut row = vec![1.0];
            for (_, factors) in &ranks {
                row.push(sign * factors.get(place)?);
            }
            for kind in &kinds {
                row.push(kind.factor(&term, l)?);
            }
            row.push(*change);
            rows.push(row);
        }
        let found = solve(rows)?;
        let mut found = found.into_iter().skip(1);
        let mut correlation = Correlation::default();
        for (k, _) in ranks {
            correlation
                .direct
                .push((u8::try_from(k).ok()?, found.next()?));
        }
        correlation.effective = kinds.into_iter().zip(found).collect();
        Some(correlation)
    }

    /// ΔF^k.
    pub fn change(&self, k: u8) -> f64 {
        let found = self.direct.iter().find(|(rank, _)| *rank == k);
        found.map_or(0.0, |(_, change)| *change)
    }

    /// α, β or γ.
    pub fn parameter(&self, kind: Effective) -> Option<f64> {
        let found = self.effective.iter().find(|(of, _)| *of == kind);
        found.map(|(_, value)| *value)
    }
}
