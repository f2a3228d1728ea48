//! Every state of a manifold in a field, followed from weak to strong.

use super::manifold::{DIAMAGNETIC, Manifold, Reduced};
use super::nucleus::{NUCLEAR_MAGNETON_WAVENUMBER, Nucleus};
use super::part::{Part, PartField};
use super::projections::Factors;
use super::rows::{Between, Block, blocks};
use crate::constants::BOHR_MAGNETON_WAVENUMBER;
use crate::numerics::connected::connected;
use crate::numerics::order::sort_by_key;
use crate::problem::Problem;

/// The strongest field, tesla.
pub const MOST_TESLA: f64 = 1000.0;

/// Energies this close without a field, as a share of them, coincide.
pub(super) const COINCIDE: f64 = 1e-12;

/// States of a manifold with a nucleus.
pub const MOST_STATES: u64 = 40_000;

/// States of one M.
pub const MOST_ROWS: u64 = 1500;

/// Matrix elements of all M together.
pub const MOST_ELEMENTS: u64 = 8_000_000;

/// What a manifold and a nucleus take, found before anything is built.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Size {
    /// States.
    pub states: u64,
    /// States of the M that has most.
    pub largest: u64,
    /// Squares of the states of each M.
    pub elements: u64,
    /// Multiplications for one field, were no M in parts.
    pub multiplications: f64,
}

/// A state, named by what it is as the field vanishes.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct State {
    /// Its level's place in the manifold.
    pub level: usize,
    /// 2M, with a nucleus 2M_F.
    pub two_m: i32,
    /// 2F, where the level has A or B.
    pub two_f: Option<i32>,
    /// 2M_J, where it has neither.
    pub two_m_j: Option<i32>,
    /// 2M_I, with a nucleus where it has neither.
    pub two_m_i: Option<i32>,
    /// The number of its part; states of one part never cross.
    pub part: usize,
    /// Its place by energy in its part.
    pub rank: usize,
}

/// Energies of all states in a field.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct AtField {
    /// The field.
    pub tesla: f64,
    /// By state, on the scale of the levels, cm⁻¹.
    pub energies: Vec<f64>,
    /// By state, from its level without field and nucleus, cm⁻¹.
    pub shifts: Vec<f64>,
    /// dE/dB by state, cm⁻¹/T: the mean of ∂H/∂B (Hellmann, Feynman).
    pub slopes: Vec<f64>,
    pub(super) parts: Vec<PartField>,
    matrix: Vec<f64>,
}

/// A manifold, with or without a nucleus, ready for any field.
#[derive(Clone, Debug)]
pub struct Split {
    states: Vec<State>,
    /// The energy of each state's level, from its part's origin.
    levels: Vec<f64>,
    pub(super) parts: Vec<Part>,
    pub(super) two_i: i32,
    pub(super) g_i: f64,
    pub(super) two_js: Vec<i32>,
}

impl Split {
    /// What it takes.
    pub fn size(manifold: &Manifold, nucleus: Option<&Nucleus>) -> Size {
        let two_i = nucleus.map_or(0, |nucleus| i64::from(nucleus.two_i));
        let two_js = manifold.levels.iter().map(|level| i64::from(level.two_j));
        let highest = two_js.clone().max().unwrap_or(0).saturating_add(two_i);
        let mut size = Size {
            states: 0,
            largest: 0,
            elements: 0,
            multiplications: 0.0,
        };
        for two_m in (-highest..=highest).step_by(2) {
            // Projections of J that leave one for I.
            let rows = two_js.clone().map(|two_j| {
                let (low, high) = ((two_m - two_i).max(-two_j), (two_m + two_i).min(two_j));
                ((high - low) / 2 + 1).max(0)
            });
            let rows = rows.sum::<i64>().unsigned_abs();
            size.states = size.states.saturating_add(rows);
            size.largest = size.largest.max(rows);
            size.elements = size.elements.saturating_add(rows.saturating_mul(rows));
            let rows = rows as f64;
            size.multiplications += 10.0 * rows * rows * rows;
        }
        size
    }

    /// Every state by level, F or M_J, and M, with the operators between them.
    ///
    /// # Errors
    /// `splitting-too-large`; `levels-differ` where some J are whole and some half; `levels-not-found` where
    /// a matrix cannot be diagonalised; for a nucleus those of its spin, g and constants: `spin-out-of-range`,
    /// `g-out-of-range`, `hyperfine-needs-momentum`, `constant-not-finite`, `constants-differ`.
    pub fn new(manifold: &Manifold, nucleus: Option<&Nucleus>) -> Result<Split, Problem> {
        if let Some(nucleus) = nucleus {
            nucleus.check(&manifold.levels)?;
        }
        let odd = |level: &super::Level| level.two_j % 2 != 0;
        if manifold
            .levels
            .windows(2)
            .any(|pair| matches!(pair, [a, b] if odd(a) != odd(b)))
        {
            let message = "Whole and half J cannot belong to one manifold.";
            return Err(Problem::new("levels-differ", message, 0, 0));
        }
        let size = Split::size(manifold, nucleus);
        if size.states > MOST_STATES || size.largest > MOST_ROWS || size.elements > MOST_ELEMENTS {
            return Err(too_large(&size));
        }
        let mut split = Split {
            states: Vec::new(),
            levels: Vec::new(),
            parts: Vec::new(),
            two_i: nucleus.map_or(0, |nucleus| nucleus.two_i),
            g_i: nucleus.map_or(0.0, |nucleus| nucleus.g_i),
            two_js: manifold.levels.iter().map(|level| level.two_j).collect(),
        };
        let mut builder = Builder::new(manifold, &split);
        for block in blocks(manifold, nucleus) {
            builder
                .block(block, &mut split.parts)
                .ok_or_else(not_found)?;
        }
        split.number(manifold, nucleus.is_some());
        Ok(split)
    }

    /// Gives every rank of every part the place of its state.
    fn number(&mut self, manifold: &Manifold, with_nucleus: bool) {
        let mut states: Vec<State> = Vec::new();
        for (part, own) in self.parts.iter().enumerate() {
            for (rank, &row) in own.named.iter().enumerate() {
                let Some(row) = own.block.rows.get(row) else {
                    continue;
                };
                let two_m_i = row.two_m_i(self.two_i);
                states.push(State {
                    level: row.level,
                    two_m: own.block.two_m,
                    two_f: row.two_f,
                    two_m_j: two_m_i.map(|two_m_i| own.block.two_m - two_m_i),
                    two_m_i: two_m_i.filter(|_| with_nucleus),
                    part,
                    rank,
                });
            }
        }
        sort_by_key(&mut states, |s| (s.level, s.two_f, s.two_m_j, s.two_m));
        for part in &mut self.parts {
            part.states = vec![0; part.block.rows.len()];
        }
        for (place, state) in states.iter().enumerate() {
            let Some(part) = self.parts.get_mut(state.part) else {
                continue;
            };
            if let Some(entry) = part.states.get_mut(state.rank) {
                *entry = place;
            }
            let level = manifold.levels.get(state.level);
            self.levels
                .push(level.map_or(0.0, |level| level.energy - part.origin));
        }
        self.states = states;
    }

    /// The states.
    pub fn states(&self) -> &[State] {
        &self.states
    }

    /// The energy of a state's level, from the origin of its part.
    pub(super) fn level_of(&self, state: usize) -> Option<f64> {
        self.levels.get(state).copied()
    }

    /// The smallest distance without a field of two states that a field mixes, cm⁻¹; nothing where it mixes
    /// none but equal ones.
    pub(super) fn smallest_distance(&self) -> Option<f64> {
        let mut least: Option<f64> = None;
        for part in &self.parts {
            let values = &part.weak.pairs.values;
            let largest = values
                .iter()
                .fold(0.0_f64, |most, value| most.max(value.abs()));
            for pair in values.windows(2) {
                if let &[low, high] = pair
                    && high - low > COINCIDE * largest
                {
                    least = Some(least.unwrap_or(f64::INFINITY).min(high - low));
                }
            }
        }
        least
    }

    /// How large the energies are that a state's energy without a field is a sum of, cm⁻¹.
    pub(super) fn size_at_rest(&self, state: usize) -> f64 {
        let own = self
            .states
            .get(state)
            .and_then(|s| Some((self.parts.get(s.part)?, s.rank)));
        own.map_or(0.0, |(part, rank)| {
            let value = part.weak.pairs.values.get(rank).copied().unwrap_or(0.0);
            let level = self.level_of(state).unwrap_or(0.0);
            value.abs().max(level.abs())
        })
    }

    /// How far the level of one state is above that of another, exactly 0 inside a level, cm⁻¹.
    pub(super) fn level_above(&self, state: usize, other: usize) -> Option<f64> {
        let (one, two) = (self.states.get(state)?, self.states.get(other)?);
        if one.level == two.level {
            return Some(0.0);
        }
        let origins = self.parts.get(one.part)?.origin - self.parts.get(two.part)?.origin;
        Some(origins + (self.level_of(state)? - self.level_of(other)?))
    }

    /// Energies and vectors in a field of 0 to [`MOST_TESLA`]; without one the limit B → 0⁺.
    ///
    /// # Errors
    /// `field-out-of-range`; `levels-not-found`.
    pub fn at(&self, tesla: f64) -> Result<AtField, Problem> {
        let mut found = AtField::default();
        self.at_into(tesla, &mut found)?;
        Ok(found)
    }

    /// The same into an answer that is already there, whose memory is used again.
    ///
    /// # Errors
    /// Those of [`Split::at`].
    pub fn at_into(&self, tesla: f64, found: &mut AtField) -> Result<(), Problem> {
        check_field(tesla)?;
        found.tesla = tesla;
        for list in [&mut found.energies, &mut found.shifts, &mut found.slopes] {
            list.clear();
            list.resize(self.states.len(), 0.0);
        }
        found
            .parts
            .resize_with(self.parts.len(), PartField::default);
        for (part, own) in self.parts.iter().zip(&mut found.parts) {
            part.at(tesla, &mut found.matrix, own)
                .ok_or_else(not_found)?;
            let ranks = own.pairs.values.iter().zip(&own.slopes).zip(&part.states);
            for ((&value, &slope), &state) in ranks {
                let level = self.levels.get(state).copied().unwrap_or(0.0);
                let lists = (
                    found.energies.get_mut(state),
                    found.shifts.get_mut(state),
                    found.slopes.get_mut(state),
                );
                if let (Some(energy), Some(shift), Some(place)) = lists {
                    *energy = part.origin + value;
                    *shift = value - level;
                    *place = slope;
                }
            }
        }
        Ok(())
    }
}

/// Makes parts of blocks.
struct Builder<'a> {
    manifold: &'a Manifold,
    two_i: i32,
    g_i: f64,
    magnetic: Factors,
    quadrupole: Factors,
    scalar: Factors,
    /// Scalars as elements of rank 0: ⟨a‖T⁰‖b⟩ = √(2J+1) ⟨a|T⁰|b⟩.
    scalars: Vec<Reduced>,
    /// The largest |E| of a level.
    scale: f64,
}

impl<'a> Builder<'a> {
    fn new(manifold: &'a Manifold, split: &Split) -> Self {
        let diamagnetic = manifold.diamagnetic.iter().flat_map(|own| &own.scalar);
        let scalars = diamagnetic.map(|element| Reduced {
            value: element.value * width(split.two_js.get(element.left)).sqrt(),
            ..*element
        });
        Builder {
            manifold,
            two_i: split.two_i,
            g_i: split.g_i,
            magnetic: Factors::new(2),
            quadrupole: Factors::new(4),
            scalar: Factors::new(0),
            scalars: scalars.collect(),
            scale: manifold
                .levels
                .iter()
                .fold(0.0, |most, level| level.energy.abs().max(most)),
        }
    }

    fn block(&mut self, block: Block, parts: &mut Vec<Part>) -> Option<()> {
        let size = block.rows.len();
        let between = Between {
            left: &block,
            right: &block,
            two_i: self.two_i,
        };
        let level = |row: usize| block.rows.get(row).map(|row| row.level);
        // Elements between two levels are given once, those inside one in both orders.
        let put = |matrix: &mut [f64], row: usize, column: usize, value: f64| {
            if row <= column || level(row) != level(column) {
                add(matrix, size, row, column, value);
            }
        };
        let mut zeeman = vec![0.0; size * size];
        let mu_b = BOHR_MAGNETON_WAVENUMBER.value;
        let magnetic = &self.manifold.magnetic;
        between.electrons(magnetic, &mut self.magnetic, |row, column, value| {
            put(&mut zeeman, row, column, mu_b * value);
        });
        let mu_n = NUCLEAR_MAGNETON_WAVENUMBER;
        between.nucleus(-mu_n * self.g_i, |row, column, value| {
            put(&mut zeeman, row, column, value);
        });
        let diamagnetic = self.manifold.diamagnetic.as_ref().map(|own| {
            let mut matrix = vec![0.0; size * size];
            let two_thirds = DIAMAGNETIC * 2.0 / 3.0;
            between.electrons(&self.scalars, &mut self.scalar, |row, column, value| {
                put(&mut matrix, row, column, two_thirds * value);
            });
            let quadrupole = &own.quadrupole;
            between.electrons(quadrupole, &mut self.quadrupole, |row, column, value| {
                put(&mut matrix, row, column, -two_thirds * value);
            });
            matrix
        });
        let linked = |row: usize, other: usize| {
            let is_there = |matrix: &[f64]| {
                let entry = matrix.get(row * size + other);
                entry.is_some_and(|&entry| entry != 0.0)
            };
            is_there(&zeeman) || diamagnetic.as_deref().is_some_and(is_there)
        };
        for places in connected(size, linked) {
            let mut part = self.part(&block, &places, &zeeman, diamagnetic.as_deref());
            part.name(self.scale)?;
            parts.push(part);
        }
        Some(())
    }

    fn part(
        &self,
        block: &Block,
        places: &[usize],
        zeeman: &[f64],
        diamagnetic: Option<&[f64]>,
    ) -> Part {
        let size = block.rows.len();
        let own = block.part(places);
        let energy = |level: usize| {
            self.manifold
                .levels
                .get(level)
                .map_or(0.0, |level| level.energy)
        };
        let origin = own.rows.first().map_or(0.0, |row| energy(row.level));
        let inner = |matrix: &[f64]| -> Vec<f64> {
            let all = places
                .iter()
                .flat_map(|&row| places.iter().map(move |&column| (row, column)));
            all.map(|(row, column)| matrix.get(row * size + column).copied().unwrap_or(0.0))
                .collect()
        };
        Part {
            diagonal: own
                .rows
                .iter()
                .map(|row| energy(row.level) - origin + row.nuclear)
                .collect(),
            zeeman: inner(zeeman),
            diamagnetic: diamagnetic.map(inner),
            origin,
            block: own,
            states: Vec::new(),
            weak: PartField::default(),
            named: Vec::new(),
        }
    }
}

fn width(two_j: Option<&i32>) -> f64 {
    two_j.map_or(0.0, |&two_j| f64::from(two_j) + 1.0)
}

/// Adds an element and, off the diagonal, its mirror image.
fn add(matrix: &mut [f64], size: usize, row: usize, column: usize, value: f64) {
    if let Some(entry) = matrix.get_mut(row * size + column) {
        *entry += value;
    }
    if row != column
        && let Some(entry) = matrix.get_mut(column * size + row)
    {
        *entry += value;
    }
}

/// # Errors
/// `field-out-of-range`.
pub(super) fn check_field(tesla: f64) -> Result<(), Problem> {
    // No range contains a NaN.
    if (0.0..=MOST_TESLA).contains(&tesla) {
        return Ok(());
    }
    let message = format!("A field of {tesla} T is out of range.");
    Err(Problem::new("field-out-of-range", message, 0, 0).bound(format!("0 to {MOST_TESLA} T")))
}

#[inline(never)]
fn too_large(size: &Size) -> Problem {
    let message = format!(
        "There are {} states, {} of one projection: too many for a field.",
        size.states, size.largest
    );
    Problem::new("splitting-too-large", message, 0, 0).bound(format!(
        "at most {MOST_STATES} states, {MOST_ROWS} of one projection"
    ))
}

#[inline(never)]
pub(super) fn not_found() -> Problem {
    let message = "The matrix of the energies in the field could not be diagonalised.";
    Problem::new("levels-not-found", message, 0, 0)
}
