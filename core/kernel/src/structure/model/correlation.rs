//! Correlation within a subshell as parameters: what it adds to F^k, and α, β and γ.
//!
//! The changes of the terms of ℓ² ([`crate::radial::correlation`]) are exactly a constant, ΔF^k, α L(L+1)
//! and, for d and f, β and γ times Casimir's operators: 3, 5 and 7 numbers for as many terms. Being
//! operators of two electrons, they serve ℓ^N with any N. The constant belongs to E_av, which is left as
//! it is, as are F^k and G^k between subshells.

use crate::angular::equivalent::classify;
use crate::configuration::{Orbital, Subshell};
use crate::numerics::linear::solve;
use crate::radial::correlation::pair_amplitudes;
use crate::radial::hartree_fock::{RadialOrbital, Solution};
use crate::structure::parameters::Effective;

/// What is added, hartree.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Correlation {
    /// ΔF^k, k = 2, 4, … .
    pub direct: Vec<(u8, f64)>,
    /// α, β and γ, those that the subshell has.
    pub effective: Vec<(Effective, f64)>,
}

/// By how much distances between the terms of a subshell usually come out too large, in percent: what the
/// native tests find and the validation report lists.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct UsualDeviation {
    /// Least and most without correlation.
    pub without: (u8, u8),
    /// At most with it, in either direction.
    pub with: u8,
}

impl UsualDeviation {
    /// Of a subshell p, d or f; of f by all terms of one ion alone.
    pub fn of(orbital: Orbital) -> Option<Self> {
        let (without, with) = match (orbital.n(), orbital.l()) {
            (2, 1) => ((6, 24), 4),
            (_, 1) => ((18, 40), 4),
            (_, 2) => ((23, 46), 12),
            (_, 3) => ((14, 38), 5),
            _ => return None,
        };
        Some(UsualDeviation { without, with })
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
            row.push(change.pair + change.exclusion + change.screening);
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
