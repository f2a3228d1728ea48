//! The lines between the levels of a case.

use super::names::{Name, Value};
use super::spectrum::{Parity, Spectrum};
use crate::configuration::Orbital;
use crate::constants::ELECTRON_G;
use crate::numerics::order::sort_by_key;
use crate::problem::Problem;
use crate::radial::multipole::between;
use crate::structure::levels::stopped;
use crate::structure::multipole::{Multipole, Transfer, magnetic_elements};
use crate::structure::transitions::{Amplitude, amplitudes};

/// The radiation of a line.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Kind {
    /// Electric dipole; S in e²a₀².
    E1,
    /// Magnetic dipole; S in μ_B².
    M1,
    /// Electric quadrupole, with C² operators; S in e²a₀⁴.
    E2,
}

/// One line.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct LineStrength {
    /// Place of the upper level in [`Spectrum::levels`].
    pub upper: usize,
    /// Place of the lower level.
    pub lower: usize,
    /// Its radiation.
    pub multipole: Kind,
    /// S = |⟨upper‖T‖lower⟩|².
    pub s: f64,
    /// See [`Amplitude::cancellation`].
    pub cancellation: f64,
}

/// Lines, and the radial integrals they were computed from.
#[derive(Clone, Debug, PartialEq)]
pub struct Lines {
    /// By lower level, upper level, then multipole.
    pub lines: Vec<LineStrength>,
    /// ⟨a|r|c⟩ and ⟨a|r²|c⟩, in a₀ and a₀²; Σ over like functions of two configurations is in them.
    pub integrals: Vec<Value>,
}

impl Spectrum {
    /// Every line of these kinds whose strength does not vanish.
    ///
    /// E1 integrals between configurations take functions of both runs, with the overlaps of all other
    /// electrons ([`between`]), and carry the dipole of a polarised core. `watch` is told how much is
    /// done, and ends the work by answering false.
    ///
    /// # Errors
    /// Those of [`Multipole::new`]; `stopped`.
    pub fn lines(
        &self,
        kinds: &[Kind],
        watch: &mut dyn FnMut(f64) -> bool,
    ) -> Result<Lines, Problem> {
        let mut found = Lines {
            lines: Vec::new(),
            integrals: Vec::new(),
        };
        let mut places: Vec<Vec<usize>> = (self.parities.iter())
            .map(|parity| vec![0; parity.levels.levels.len()])
            .collect();
        for (place, level) in self.levels.iter().enumerate() {
            let entry = places.get_mut(level.parity);
            if let Some(entry) = entry.and_then(|of| of.get_mut(level.level)) {
                *entry = place;
            }
        }
        let mut pairs = Vec::new();
        for &kind in kinds {
            for left in 0..self.parities.len() {
                for right in left..self.parities.len() {
                    if (kind == Kind::E1) == (left != right) {
                        pairs.push((kind, left, right));
                    }
                }
            }
        }
        for (number, &(kind, left, right)) in pairs.iter().enumerate() {
            let once = left == right;
            let lines = self.amplitudes(kind, (left, right), once, &mut found.integrals)?;
            let place = |parity: usize, level: usize| {
                places.get(parity).and_then(|of| of.get(level)).copied()
            };
            for line in lines {
                let (Some(a), Some(b)) = (place(left, line.left), place(right, line.right)) else {
                    continue;
                };
                found.lines.push(LineStrength {
                    upper: a.max(b),
                    lower: a.min(b),
                    multipole: kind,
                    s: line.reduced * line.reduced,
                    cancellation: line.cancellation,
                });
            }
            if !watch((number + 1) as f64 / pairs.len() as f64) {
                return Err(stopped());
            }
        }
        sort_by_key(&mut found.lines, |line| {
            (line.lower, line.upper, line.multipole)
        });
        Ok(found)
    }

    /// ⟨a‖T‖b⟩ of every level a of one parity and b of another, or of the same, where both orders and a = b
    /// are among them; signed, for they interfere. Their squares are S.
    ///
    /// # Errors
    /// Those of [`Multipole::new`].
    pub fn reduced(
        &self,
        kind: Kind,
        (left, right): (usize, usize),
    ) -> Result<Vec<Amplitude>, Problem> {
        self.amplitudes(kind, (left, right), false, &mut Vec::new())
    }

    fn amplitudes(
        &self,
        kind: Kind,
        (left, right): (usize, usize),
        once: bool,
        integrals: &mut Vec<Value>,
    ) -> Result<Vec<Amplitude>, Problem> {
        let (Some(one), Some(two)) = (self.parities.get(left), self.parities.get(right)) else {
            return Ok(Vec::new());
        };
        let rank = match kind {
            Kind::E1 => 1,
            Kind::E2 => 2,
            Kind::M1 => {
                let electron = ELECTRON_G.value;
                let elements =
                    |rows: &_, columns: &_| magnetic_elements(one.basis(), electron, rows, columns);
                return Ok(amplitudes(&one.levels, &one.levels, 1, once, elements));
            }
        };
        let operator = Multipole::new(one.basis(), two.basis(), rank)?;
        let values: Vec<Option<Value>> = (operator.transfers().iter())
            .map(|transfer| self.transfer(rank, (one, two), transfer))
            .collect();
        let lengths: Vec<f64> = values.iter().map(|v| v.map_or(0.0, |v| v.value)).collect();
        integrals.extend(values.into_iter().flatten());
        Ok(amplitudes(
            &one.levels,
            &two.levels,
            rank,
            once,
            |rows, columns| operator.elements(&lengths, rows, columns),
        ))
    }

    /// ⟨a|r|c⟩ (rank 1) or ⟨a|r²|c⟩ between configurations of two parities, given or computed, a₀ and a₀².
    pub fn transfer(
        &self,
        rank: u8,
        (left, right): (&Parity, &Parity),
        transfer: &Transfer,
    ) -> Option<Value> {
        let first = *left.configurations.get(transfer.first)?;
        let second = *right.configurations.get(transfer.second)?;
        let a = *self.orbitals.get(transfer.a)?;
        let c = *self.orbitals.get(transfer.c)?;
        let name = match rank {
            1 => Name::Dipole(a, c),
            _ => Name::Quadrupole(a, c),
        };
        let computed = self.length(rank, (first, a), (second, c));
        Some(self.value(name, (first, second), computed))
    }

    /// ⟨a|r^k|c⟩, a₀^k.
    fn length(
        &self,
        rank: u8,
        (first, a): (usize, Orbital),
        (second, c): (usize, Orbital),
    ) -> Option<f64> {
        let from = self.runs.get(first)?.as_ref()?;
        let to = self.runs.get(second)?.as_ref()?;
        if first == second {
            return Some(from.multipole(rank, from.orbital(a)?, from.orbital(c)?));
        }
        let found = between(rank, (from, a), (to, c)).ok()?;
        Some(found.integral)
    }
}
