//! The repulsion of the electrons as coefficients of radial integrals, once for each S and L.
//!
//! Σ_{i<j} 1/r_ij = ½ Σ_k Σ_{abcd} R^k(ab,cd) 2 (−1)^k (2k+1)^(−½) ⟨a‖C^k‖c⟩⟨b‖C^k‖d⟩
//! :[[a†c̃]^(0k) [b†d̃]^(0k)]^(00):, the sum over ordered subshells; energies count from the average
//! of each configuration, so that the mean over its states is zero.
//!
//! Source: Slater, *Quantum Theory of Atomic Structure* (1960); second quantisation as in Judd,
//! *Second Quantization and Atomic Spectroscopy* (1967).

use super::basis::{Basis, Coupled, State};
use super::chain::{Chain, Workshop};
use super::hamiltonian::Terms;
use super::matrix::Table;
use super::parameters::{Effective, Integral, Parameter};
use super::recoupling::{Electron, sorted};
use super::shell_operators::{Ranks, multipole};
use super::symbols::signed;
use crate::problem::Problem;
use crate::radial::average::exchange;

/// Below this a coefficient is zero: what cancels leaves rounding.
const ZERO: f64 = 1e-11;

/// One coefficient of the lower triangle of a block.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Entry {
    /// Place of the parameter.
    pub parameter: usize,
    /// Row in the block.
    pub row: usize,
    /// Column in the block, at most the row.
    pub column: usize,
    /// What the parameter is multiplied by.
    pub value: f64,
}

/// An interaction of two electrons: the same subshells, every rank X, some integrals.
struct Group {
    /// First and last subshell touched.
    span: (usize, usize),
    /// Places of the parameters.
    parameters: Vec<usize>,
    /// Σ over these; the factors belong to `parameters`.
    chains: Vec<(Chain, Vec<f64>)>,
    /// Added to the diagonal for each parameter.
    diagonal: Vec<f64>,
}

/// F^k of one subshell.
struct Within {
    subshell: usize,
    tables: Vec<(usize, Table)>,
}

/// What connects two configurations.
#[derive(Default)]
struct Connection {
    within: Vec<Within>,
    groups: Vec<Group>,
}

/// The coefficients of all blocks, in their order; parameters that are met are appended.
///
/// # Errors
/// Those of [`crate::angular::parentage::parents`].
pub fn coefficients(
    basis: &Basis,
    workshop: &mut Workshop,
    parameters: &mut Vec<Parameter>,
    terms: Terms,
) -> Result<Vec<Vec<Entry>>, Problem> {
    let count = basis.configurations().len();
    let mut connections = Vec::with_capacity(count * count);
    for first in 0..count {
        for second in 0..count {
            connections.push(match second.cmp(&first) {
                std::cmp::Ordering::Less => Connection::default(),
                std::cmp::Ordering::Equal => {
                    let mut own = diagonal(basis, workshop, first, parameters)?;
                    if terms.effective {
                        effective(basis, first, parameters, &mut own.within);
                    }
                    own
                }
                std::cmp::Ordering::Greater if !terms.mixing => Connection::default(),
                std::cmp::Ordering::Greater => {
                    between(basis, workshop, (first, second), parameters)?
                }
            });
        }
    }
    let mut blocks = Vec::with_capacity(basis.blocks().len());
    for block in basis.blocks() {
        let states = basis.block_states(block);
        let mut entries = Vec::new();
        for (row, ket) in states.iter().enumerate() {
            for (column, bra) in states.iter().enumerate().take(row + 1) {
                let place = bra.configuration * count + ket.configuration;
                if let Some(connection) = connections.get(place) {
                    connection.add(workshop, (row, ket), (column, bra), &mut entries);
                }
            }
        }
        blocks.push(entries);
    }
    Ok(blocks)
}

impl Connection {
    fn add(
        &self,
        workshop: &mut Workshop,
        (row, ket): (usize, &State),
        (column, bra): (usize, &State),
        entries: &mut Vec<Entry>,
    ) {
        let mut push = |parameter: usize, value: f64| {
            if value.abs() > ZERO || value.is_nan() {
                entries.push(Entry {
                    parameter,
                    row,
                    column,
                    value,
                });
            }
        };
        for within in &self.within {
            if bra.running == ket.running && alike(bra, ket, (within.subshell, within.subshell)) {
                let term = |state: &State| state.terms.get(within.subshell).copied().unwrap_or(0);
                let (left, right) = (term(bra), term(ket));
                for (parameter, table) in &within.tables {
                    push(*parameter, table.at(left.min(right), left.max(right)));
                }
            }
        }
        let mut sums = Vec::new();
        for group in &self.groups {
            if !alike(bra, ket, group.span) {
                continue;
            }
            sums.clear();
            sums.extend(
                group
                    .diagonal
                    .iter()
                    .map(|d| if row == column { *d } else { 0.0 }),
            );
            for (chain, factors) in &group.chains {
                let value = chain.value(&mut workshop.symbols, bra, ket);
                if value != 0.0 {
                    for (sum, factor) in sums.iter_mut().zip(factors) {
                        *sum += value * factor;
                    }
                }
            }
            for (&parameter, &sum) in group.parameters.iter().zip(&sums) {
                push(parameter, sum);
            }
        }
    }
}

/// Whether two states agree in all that an operator on these subshells leaves alone.
fn alike(bra: &State, ket: &State, (first, last): (usize, usize)) -> bool {
    let terms = bra.terms.iter().zip(&ket.terms).enumerate();
    let running = bra.running.iter().zip(&ket.running).enumerate();
    let mut terms = terms.filter(|&(place, _)| place < first || place > last);
    let mut running = running.filter(|&(place, _)| place < first || place >= last);
    terms.all(|(_, (a, b))| a == b) && running.all(|(_, (a, b))| a == b)
}

/// F^k and G^k of one configuration.
fn diagonal(
    basis: &Basis,
    workshop: &mut Workshop,
    place: usize,
    parameters: &mut Vec<Parameter>,
) -> Result<Connection, Problem> {
    let mut connection = Connection::default();
    let open: Vec<(Electron, u32)> = electrons(basis)
        .map(|electron| (electron, basis.electrons(place, electron.subshell)))
        .filter(|(electron, n)| (1..4 * u32::from(electron.l) + 2).contains(n))
        .collect();
    let mut named = |integral: Integral| {
        parameters.push(Parameter {
            first: place,
            second: place,
            integral,
        });
        parameters.len() - 1
    };
    for &(electron, n) in &open {
        let (l, a) = (electron.l, electron.subshell);
        if basis.terms(place, a).len() == 1 {
            continue;
        }
        let tables = workshop.operators.repulsion(&mut workshop.symbols, l, n)?;
        let ranks = (2_u8..).step_by(2);
        connection.within.push(Within {
            subshell: a,
            tables: ranks
                .zip(tables)
                .map(|(k, table)| (named(Integral::Direct { k, a, b: a }), table))
                .collect(),
        });
    }
    for (number, &(one, n)) in open.iter().enumerate() {
        for &(two, m) in open.iter().skip(number + 1) {
            let (a, b) = (one.subshell, two.subshell);
            let mut integrals = Vec::new();
            for k in ranks([one, two], [one, two]).filter(|&k| k > 0) {
                let parameter = named(Integral::Direct { k, a, b });
                integrals.push((parameter, k, [one, two], 0.0));
            }
            let averages = exchange(one.l, two.l);
            for (k, average) in ranks([one, two], [two, one]).zip(averages) {
                let parameter = named(Integral::Exchange { k, a, b });
                let pairs = f64::from(n) * f64::from(m);
                integrals.push((parameter, k, [two, one], pairs * average.coefficient));
            }
            let group = group(basis, workshop, place, [one, two], &integrals)?;
            connection.groups.extend(group);
        }
    }
    Ok(connection)
}

/// α, β and γ of every subshell that has them.
fn effective(
    basis: &Basis,
    place: usize,
    parameters: &mut Vec<Parameter>,
    within: &mut Vec<Within>,
) {
    for electron in electrons(basis) {
        let a = electron.subshell;
        let terms = basis.terms(place, a);
        if terms.len() < 2 {
            continue;
        }
        let weights = terms.iter().map(|term| Coupled::of(term).degeneracy());
        let weights: Vec<f64> = weights.collect();
        let mut tables = Vec::new();
        for kind in [Effective::Alpha, Effective::Beta, Effective::Gamma] {
            let factors = terms.iter().map(|term| kind.factor(term, electron.l));
            let Some(factors) = factors.collect::<Option<Vec<f64>>>() else {
                continue;
            };
            let weighted = factors.iter().zip(&weights).map(|(f, w)| f * w);
            let mean = weighted.sum::<f64>() / weights.iter().sum::<f64>();
            let value = |row: usize| factors.get(row).map_or(0.0, |factor| factor - mean);
            let table = Table::from_fn(terms.len(), terms.len(), |row, column| {
                if row == column { value(row) } else { 0.0 }
            });
            parameters.push(Parameter {
                first: place,
                second: place,
                integral: Integral::Effective { kind, a },
            });
            tables.push((parameters.len() - 1, table));
        }
        within.push(Within {
            subshell: a,
            tables,
        });
    }
}

/// R^k and ⟨a|h|c⟩ between two configurations.
fn between(
    basis: &Basis,
    workshop: &mut Workshop,
    (first, second): (usize, usize),
    parameters: &mut Vec<Parameter>,
) -> Result<Connection, Problem> {
    let mut connection = Connection::default();
    let (mut created, mut annihilated) = (Vec::new(), Vec::new());
    for electron in electrons(basis) {
        let left = basis.electrons(first, electron.subshell);
        let right = basis.electrons(second, electron.subshell);
        // More than two of a kind are too many anyway.
        created.extend((right..left).take(3).map(|_| electron));
        annihilated.extend((left..right).take(3).map(|_| electron));
    }
    let mut named = |integral: Integral| {
        parameters.push(Parameter {
            first,
            second,
            integral,
        });
        parameters.len() - 1
    };
    match (created.as_slice(), annihilated.as_slice()) {
        (&[x], &[y]) => {
            if x.l == y.l {
                let (a, c) = (x.subshell, y.subshell);
                let scalar = Ranks::default();
                let chain = workshop.one_electron(basis, second, x, y, scalar)?;
                if let Some(chain) = chain {
                    let width = 2.0 * f64::from(2 * u32::from(x.l) + 1);
                    let parameter = named(Integral::OneElectron { a, c });
                    connection.groups.push(Group {
                        span: chain.span(),
                        parameters: vec![parameter],
                        chains: vec![(chain, vec![-width.sqrt()])],
                        diagonal: vec![0.0],
                    });
                }
            }
            for spectator in electrons(basis) {
                let there = |configuration, gone: Electron| {
                    let gone = u32::from(gone.subshell == spectator.subshell);
                    basis.electrons(configuration, spectator.subshell) > gone
                };
                if there(first, x) && there(second, y) {
                    let ab = in_order(x, spectator);
                    let cd = in_order(y, spectator);
                    let integrals = mixing(ab, cd, &mut named);
                    let group = group(basis, workshop, second, ab, &integrals)?;
                    connection.groups.extend(group);
                }
            }
        }
        (&[a, b], &[c, d]) => {
            let integrals = mixing([a, b], [c, d], &mut named);
            let group = group(basis, workshop, second, [a, b], &integrals)?;
            connection.groups.extend(group);
        }
        _ => {}
    }
    Ok(connection)
}

/// Parameter, rank, the electrons c d, and what is added to the diagonal.
type Named = (usize, u8, [Electron; 2], f64);

/// R^k(ab,cd) and R^k(ab,dc) that do not vanish.
fn mixing(
    [a, b]: [Electron; 2],
    [c, d]: [Electron; 2],
    named: &mut impl FnMut(Integral) -> usize,
) -> Vec<Named> {
    let mut orders = vec![[c, d]];
    if a != b && c != d {
        orders.push([d, c]);
    }
    let mut integrals = Vec::new();
    for cd in orders {
        for k in ranks([a, b], cd) {
            let [a, b] = [a, b].map(|electron| electron.subshell);
            let [c, d] = cd.map(|electron| electron.subshell);
            let parameter = named(Integral::Mixing { k, a, b, c, d });
            integrals.push((parameter, k, cd, 0.0));
        }
    }
    integrals
}

/// The chains of one set of subshells; nothing where all vanish.
fn group(
    basis: &Basis,
    workshop: &mut Workshop,
    ket: usize,
    [a, b]: [Electron; 2],
    integrals: &[Named],
) -> Result<Option<Group>, Problem> {
    let a = Electron { creates: true, ..a };
    let b = Electron { creates: true, ..b };
    let mut found: Vec<(Ranks, Chain, Vec<f64>)> = Vec::new();
    for (number, &(_, k, [c, d], _)) in integrals.iter().enumerate() {
        let rank = i32::from(k);
        let reduced = multipole(a.l, rank, c.l) * multipole(b.l, rank, d.l);
        // Of the sum over ordered subshells: ½ · 2 terms, or one where both pairs are equivalent.
        let both = a.subshell == b.subshell && c.subshell == d.subshell;
        let orders = if both { 1.0 } else { 2.0 };
        let strength = signed(rank, orders * reduced) / f64::from(2 * rank + 1).sqrt();
        let Some(sorted) = sorted(&mut workshop.symbols, [a, c, b, d], rank) else {
            continue;
        };
        for &(x, coefficient) in &sorted.terms {
            let known = found.iter().position(|(ranks, ..)| *ranks == x);
            let place = match known {
                Some(place) => place,
                None => {
                    let Some(chain) = workshop.interaction(basis, ket, &sorted, x)? else {
                        continue;
                    };
                    found.push((x, chain, vec![0.0; integrals.len()]));
                    found.len() - 1
                }
            };
            let factor = found.get_mut(place).and_then(|f| f.2.get_mut(number));
            if let Some(factor) = factor {
                *factor += strength * coefficient;
            }
        }
    }
    let Some(span) = found.first().map(|(_, chain, _)| chain.span()) else {
        return Ok(None);
    };
    Ok(Some(Group {
        span,
        parameters: integrals.iter().map(|named| named.0).collect(),
        chains: found.into_iter().map(|(_, chain, f)| (chain, f)).collect(),
        diagonal: integrals.iter().map(|named| named.3).collect(),
    }))
}

/// Every subshell, as an electron that is annihilated.
pub(super) fn electrons(basis: &Basis) -> impl Iterator<Item = Electron> {
    let subshells = basis.subshells().iter().enumerate();
    subshells.map(|(subshell, &l)| Electron {
        subshell,
        l,
        creates: false,
    })
}

fn in_order(one: Electron, two: Electron) -> [Electron; 2] {
    if one.subshell <= two.subshell {
        [one, two]
    } else {
        [two, one]
    }
}

/// The ranks k for which neither ⟨a‖C^k‖c⟩ nor ⟨b‖C^k‖d⟩ vanishes.
fn ranks([a, b]: [Electron; 2], [c, d]: [Electron; 2]) -> impl Iterator<Item = u8> {
    let lowest = a.l.abs_diff(c.l).max(b.l.abs_diff(d.l));
    let highest = a.l.saturating_add(c.l).min(b.l.saturating_add(d.l));
    let same_parity = a.l.abs_diff(c.l) % 2 == b.l.abs_diff(d.l) % 2;
    (lowest..=highest).step_by(2).filter(move |_| same_parity)
}
