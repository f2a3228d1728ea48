//! Electric multipole and magnetic dipole operators as coefficients between LS-coupled states.
//!
//! Electric: Σ r^k C^k = Σ_{ac} ⟨a|r^k|c⟩ (−√2) ⟨a‖C^k‖c⟩ (2k+1)^(−½) [a†c̃]^(0k), the letters
//! running over subshells; between states of J,
//! ⟨SLJ‖T^k‖SL′J′⟩ = (−1)^(S+L′+J+k) √[(2J+1)(2J′+1)] {L J S; J′ L′ k} ⟨SL‖T^(0k)‖SL′⟩/√(2S+1).
//!
//! Magnetic: L + g_s S = J + (g_s−1) S in units of the Bohr magneton, which connects only states of
//! one term; ⟨SLJ‖S‖SLJ′⟩ = (−1)^(S+L+J′+1) √[(2J+1)(2J′+1)] {S J L; J′ S 1} √[S(S+1)(2S+1)].
//!
//! Any one-electron operator Σ [u^κ v^k]^K, of ranks κ in spin and k in orbital space, is had from the same
//! chains: Σ w_{ac} (−1) [(2κ+1)(2k+1)]^(−½) [a†c̃]^(κk), where ⟨½‖u‖½⟩⟨a‖v‖c⟩ = w_{ac}, and then
//! ⟨SLJ‖T^K‖S′L′J′⟩ = √[(2J+1)(2K+1)(2J′+1)] {S S′ κ; L L′ k; J J′ K} ⟨SL‖T^(κk)‖S′L′⟩.
//!
//! Source: Edmonds, *Angular Momentum in Quantum Mechanics* (1957), eqs. 7.1.5 to 7.1.8; Condon &
//! Shortley, *The Theory of Atomic Spectra* (1935), chapters 4 and 11.

use super::basis::{Basis, Coupled};
use super::chain::{Chain, Workshop};
use super::electrostatic::{Entry, electrons};
use super::hamiltonian::{Rows, beyond_symbols};
use super::recoupling::Electron;
use super::shell_operators::{Ranks, multipole};
use super::spin_orbit::Joint;
use super::symbols::{Symbols, signed};
use crate::problem::Problem;

/// Below this a coefficient is zero.
const ZERO: f64 = 1e-11;

/// A radial integral ⟨a|r^k|c⟩ between two configurations.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub struct Transfer {
    /// Configuration of the left side.
    pub first: usize,
    /// Configuration of the right side.
    pub second: usize,
    /// The subshell of the electron in the left state.
    pub a: usize,
    /// The subshell of the electron in the right state.
    pub c: usize,
}

/// Elements of an operator between the rows of one J and the columns of another.
pub type Elements = Vec<(usize, usize, f64)>;

/// Σ r^k C^k between all states of two bases.
#[derive(Clone, Debug)]
pub struct Multipole {
    rank: u8,
    ranks: Ranks,
    transfers: Vec<Transfer>,
    joints: Vec<Joint>,
    /// S and L of the blocks on either side.
    totals: [Vec<Coupled>; 2],
}

impl Multipole {
    /// The coefficients of every ⟨a|r^k|c⟩ between the states of `left` and `right`, rank k ≥ 1.
    ///
    /// Both must be built on the same list of subshells.
    ///
    /// # Errors
    /// `subshells-differ`, `angular-momentum-too-large`; those of
    /// [`crate::angular::parentage::parents`].
    pub fn new(left: &Basis, right: &Basis, rank: u8) -> Result<Self, Problem> {
        let k = i32::from(rank);
        let ranks = Ranks {
            spin: 0,
            orbital: 2 * k,
        };
        Self::of(left, right, (ranks, rank), &|a, c| {
            -multipole(a, k, c) * (2.0 / f64::from(2 * k + 1)).sqrt()
        })
    }

    /// The coefficients of every w_{ac} of Σ [u^κ v^k]^K, the ranks being κ, k and K; w stands for
    /// ⟨½‖u‖½⟩⟨a‖v‖c⟩ with its radial integral.
    ///
    /// # Errors
    /// Those of [`Multipole::new`].
    pub fn unit(left: &Basis, right: &Basis, [spin, k, rank]: [u8; 3]) -> Result<Self, Problem> {
        let ranks = Ranks {
            spin: 2 * i32::from(spin),
            orbital: 2 * i32::from(k),
        };
        let weight = f64::from(2 * spin + 1) * f64::from(2 * k + 1);
        Self::of(left, right, (ranks, rank), &|a, c| {
            let meets = (a.abs_diff(c)..=a.saturating_add(c)).contains(&k);
            if meets { -1.0 / weight.sqrt() } else { 0.0 }
        })
    }

    fn of(
        left: &Basis,
        right: &Basis,
        (ranks, rank): (Ranks, u8),
        factor: &dyn Fn(u8, u8) -> f64,
    ) -> Result<Self, Problem> {
        if left.subshells() != right.subshells() {
            return Err(Problem::new(
                "subshells-differ",
                "The configurations of both sides have to name the same subshells in the same order.",
                0,
                0,
            ));
        }
        let mut workshop = Workshop::default();
        let mut transfers = Vec::new();
        // By the configuration on the left, then the one on the right.
        let width = right.configurations().len();
        let mut chains: Vec<Vec<(usize, Chain, f64)>> = Vec::new();
        for first in 0..left.configurations().len() {
            for second in 0..width {
                let mut own = Vec::new();
                for (a, c) in moves(left, first, right, second) {
                    let factor = factor(a.l, c.l);
                    if factor.abs() < ZERO {
                        continue;
                    }
                    let chain = workshop.one_electron(right, second, a, c, ranks)?;
                    if let Some(chain) = chain {
                        own.push((transfers.len(), chain, factor));
                        transfers.push(Transfer {
                            first,
                            second,
                            a: a.subshell,
                            c: c.subshell,
                        });
                    }
                }
                chains.push(own);
            }
        }
        let mut joints = Vec::new();
        for (rows, upper) in left.blocks().iter().enumerate() {
            for (columns, lower) in right.blocks().iter().enumerate() {
                let (bra, ket) = (upper.total, lower.total);
                let within = 2 * (bra.l - ket.l).abs() <= ranks.orbital;
                if (bra.two_s - ket.two_s).abs() > ranks.spin || !within {
                    continue;
                }
                let mut entries = Vec::new();
                for (row, bra) in left.block_states(upper).iter().enumerate() {
                    for (column, ket) in right.block_states(lower).iter().enumerate() {
                        let place = bra.configuration * width + ket.configuration;
                        for (parameter, chain, factor) in chains.get(place).into_iter().flatten() {
                            let value = factor * chain.value(&mut workshop.symbols, bra, ket);
                            if value.abs() > ZERO || value.is_nan() {
                                entries.push(Entry {
                                    parameter: *parameter,
                                    row,
                                    column,
                                    value,
                                });
                            }
                        }
                    }
                }
                if !entries.is_empty() {
                    joints.push(Joint {
                        rows,
                        columns,
                        entries,
                    });
                }
            }
        }
        let finite = |joint: &Joint| joint.entries.iter().all(|entry| entry.value.is_finite());
        if !joints.iter().all(finite) {
            return Err(beyond_symbols());
        }
        let totals = |basis: &Basis| basis.blocks().iter().map(|b| b.total).collect();
        Ok(Multipole {
            rank,
            ranks,
            transfers,
            joints,
            totals: [totals(left), totals(right)],
        })
    }

    /// k.
    pub fn rank(&self) -> u8 {
        self.rank
    }

    /// The radial integrals that a value is needed for.
    pub fn transfers(&self) -> &[Transfer] {
        &self.transfers
    }

    /// ⟨SLJ‖T‖S′L′J′⟩ with these values of ⟨a|r^k|c⟩ or w.
    pub fn elements(&self, values: &[f64], rows: &Rows, columns: &Rows) -> Elements {
        let mut symbols = Symbols::default();
        let [left, right] = &self.totals;
        let two_k = 2 * i32::from(self.rank);
        let (two_j, two_jp) = (rows.two_j, columns.two_j);
        let root = (f64::from(two_j + 1) * f64::from(two_jp + 1)).sqrt();
        let mut found = Elements::new();
        for joint in &self.joints {
            let (Some(row), Some(column)) = (rows.first(joint.rows), columns.first(joint.columns))
            else {
                continue;
            };
            let bra = left.get(joint.rows).copied().unwrap_or_default();
            let ket = right.get(joint.columns).copied().unwrap_or_default();
            let (two_s, two_l, two_lp) = (bra.two_s, 2 * bra.l, 2 * ket.l);
            let factor = if self.ranks.spin == 0 {
                let six = symbols.six([two_l, two_j, two_s, two_jp, two_lp, two_k]);
                let factor = root / f64::from(two_s + 1).sqrt() * six;
                signed((two_s + two_lp + two_j + two_k) / 2, factor)
            } else {
                let Ranks { spin, orbital } = self.ranks;
                let two_sp = ket.two_s;
                symbols.step([
                    two_s, two_sp, spin, two_l, two_lp, orbital, two_j, two_jp, two_k,
                ])
            };
            if factor == 0.0 {
                continue;
            }
            for entry in &joint.entries {
                let radial = values.get(entry.parameter).copied().unwrap_or(0.0);
                let element = factor * entry.value * radial;
                found.push((row + entry.row, column + entry.column, element));
            }
        }
        found
    }
}

/// The electrons a (left) and c (right) that one electron's move between two configurations can have.
fn moves(left: &Basis, first: usize, right: &Basis, second: usize) -> Vec<(Electron, Electron)> {
    let mut gained = Vec::new();
    let mut lost = Vec::new();
    for electron in electrons(right) {
        let before = right.electrons(second, electron.subshell);
        let after = left.electrons(first, electron.subshell);
        gained.extend((before..after).take(2).map(|_| electron));
        lost.extend((after..before).take(2).map(|_| electron));
    }
    match (gained.as_slice(), lost.as_slice()) {
        ([], []) => electrons(right)
            .filter(|electron| right.electrons(second, electron.subshell) > 0)
            .map(|electron| (electron, electron))
            .collect(),
        (&[a], &[c]) => vec![(a, c)],
        _ => Vec::new(),
    }
}

/// ⟨SLJ‖L + g_s S‖SLJ′⟩ between the rows and columns of one basis, in Bohr magnetons.
pub fn magnetic_elements(basis: &Basis, g_s: f64, rows: &Rows, columns: &Rows) -> Elements {
    let mut symbols = Symbols::default();
    let (two_j, two_jp) = (rows.two_j, columns.two_j);
    let root = (f64::from(two_j + 1) * f64::from(two_jp + 1)).sqrt();
    let square = |two: i32| f64::from(two) * f64::from(two + 2) * f64::from(two + 1) / 4.0;
    let mut found = Elements::new();
    for (place, block) in basis.blocks().iter().enumerate() {
        let (Some(row), Some(column)) = (rows.first(place), columns.first(place)) else {
            continue;
        };
        let (two_s, two_l) = (block.total.two_s, 2 * block.total.l);
        let six = symbols.six([two_s, two_j, two_l, two_jp, two_s, 2]);
        let spin = signed((two_s + two_l + two_jp) / 2 + 1, root * six) * square(two_s).sqrt();
        let whole = if two_j == two_jp {
            square(two_j).sqrt()
        } else {
            0.0
        };
        let element = whole + (g_s - 1.0) * spin;
        if element != 0.0 {
            found.extend((0..block.len).map(|state| (row + state, column + state, element)));
        }
    }
    found
}
