//! The states of levels and a nucleus by their whole projection, and operators between them.
//!
//! A level with A or B stands coupled, |γ (J I) F M_F⟩, so that it is split exactly without a field; one
//! without stands uncoupled, |γ J M_J⟩|I M_I⟩, so that what a field does not connect stays apart. Either
//! is written in products, and operators are taken there.

use super::manifold::{Level, Manifold, Reduced, momentum};
use super::nucleus::{Nucleus, casimir};
use super::projections::{Factors, clebsch_gordan, place};
use std::ops::Range;

/// A sum below this share of its terms is zero: a rule that the products do not know.
const ROUNDING: f64 = 16.0 * f64::EPSILON;

/// One state of a level and the nucleus.
#[derive(Clone, Debug, PartialEq)]
pub struct Row {
    /// Its level.
    pub level: usize,
    /// 2J of it.
    pub two_j: i32,
    /// 2F of a coupled one.
    pub two_f: Option<i32>,
    /// Components by M_I rising from −I; M_J is what M leaves.
    pub products: Vec<f64>,
    /// What the nucleus adds without a field, cm⁻¹.
    pub nuclear: f64,
}

impl Row {
    /// 2M_I of an uncoupled row.
    pub fn two_m_i(&self, two_i: i32) -> Option<i32> {
        if self.two_f.is_some() {
            return None;
        }
        let place = self.products.iter().position(|&c| c != 0.0)?;
        Some(2 * i32::try_from(place).ok()? - two_i)
    }
}

/// All states of one M (M_F with a nucleus), by level, then F or M_I.
#[derive(Clone, Debug)]
pub struct Block {
    /// 2M.
    pub two_m: i32,
    /// The states.
    pub rows: Vec<Row>,
    /// The places of each level's states.
    pub levels: Vec<Range<usize>>,
}

impl Block {
    /// Some of its states, given by rising places.
    pub fn part(&self, places: &[usize]) -> Block {
        let rows = places.iter().filter_map(|&place| self.rows.get(place));
        let below = |end: usize| places.partition_point(|&place| place < end);
        let levels = self.levels.iter();
        Block {
            two_m: self.two_m,
            rows: rows.cloned().collect(),
            levels: levels.map(|of| below(of.start)..below(of.end)).collect(),
        }
    }
}

/// The blocks of every M, rising.
pub fn blocks(manifold: &Manifold, nucleus: Option<&Nucleus>) -> Vec<Block> {
    let two_i = nucleus.map_or(0, |nucleus| nucleus.two_i);
    let highest = manifold.levels.iter().map(|level| level.two_j).max();
    let Some(highest) = highest.map(|two_j| two_j + two_i) else {
        return Vec::new();
    };
    let all = (-highest..=highest).step_by(2);
    all.map(|two_m| block(&manifold.levels, nucleus, two_m))
        .collect()
}

fn block(levels: &[Level], nucleus: Option<&Nucleus>, two_m: i32) -> Block {
    let two_i = nucleus.map_or(0, |nucleus| nucleus.two_i);
    let mut block = Block {
        two_m,
        rows: Vec::new(),
        levels: Vec::with_capacity(levels.len()),
    };
    for (place, level) in levels.iter().enumerate() {
        let first = block.rows.len();
        let two_j = level.two_j;
        let (a, b) = nucleus.map_or((0.0, 0.0), |nucleus| nucleus.constants(place));
        let mut push = |two_f, products, nuclear| {
            block.rows.push(Row {
                level: place,
                two_j,
                two_f,
                products,
                nuclear,
            });
        };
        if a == 0.0 && b == 0.0 {
            for two_m_i in (-two_i..=two_i).step_by(2) {
                if (two_m - two_m_i).abs() <= two_j {
                    let one = |other: i32| f64::from(u8::from(other == two_m_i));
                    push(None, (-two_i..=two_i).step_by(2).map(one).collect(), 0.0);
                }
            }
        } else {
            let lowest = (two_j - two_i).abs().max(two_m.abs());
            for two_f in (lowest..=two_j + two_i).step_by(2) {
                let products = (-two_i..=two_i).step_by(2).map(|two_m_i| {
                    let two_m_j = two_m - two_m_i;
                    if two_m_j.abs() > two_j {
                        return 0.0;
                    }
                    clebsch_gordan(two_j, two_m_j, two_i, two_m_i, two_f)
                });
                push(
                    Some(two_f),
                    products.collect(),
                    casimir(two_i, two_j, two_f, a, b),
                );
            }
        }
        block.levels.push(first..block.rows.len());
    }
    block
}

/// An operator between the blocks of two M: T^k of the electrons, and a multiple of I.
pub struct Between<'a> {
    /// The left block.
    pub left: &'a Block,
    /// The right block.
    pub right: &'a Block,
    /// 2I.
    pub two_i: i32,
}

impl Between<'_> {
    fn two_q(&self) -> i32 {
        self.left.two_m - self.right.two_m
    }

    /// Gives every ⟨left|T^k_q|right⟩ that does not vanish, q being the difference of both M.
    pub fn electrons(
        &self,
        elements: &[Reduced],
        factors: &mut Factors,
        mut put: impl FnMut(usize, usize, f64),
    ) {
        let two_k = factors.two_k();
        for element in elements {
            let ends = (
                self.left.levels.get(element.left),
                self.right.levels.get(element.right),
            );
            let (Some(rows), Some(columns)) = ends else {
                continue;
            };
            let first =
                |block: &Block, range: &Range<usize>| block.rows.get(range.start).map(|r| r.two_j);
            let (Some(two_j), Some(two_jp)) = (first(self.left, rows), first(self.right, columns))
            else {
                continue;
            };
            let table = factors.of(two_j, two_jp, self.two_q());
            // The factor of each M_I.
            let by_m_i: Vec<f64> = (-self.two_i..=self.two_i)
                .step_by(2)
                .map(|two_m_i| {
                    let at = place(two_j, self.left.two_m - two_m_i);
                    at.and_then(|at| table.get(at)).copied().unwrap_or(0.0)
                })
                .collect();
            self.pairs(
                rows,
                columns,
                two_k,
                |left, right, sum| {
                    for ((a, b), factor) in left.products.iter().zip(&right.products).zip(&by_m_i) {
                        sum.add(a * b * factor);
                    }
                },
                |row, column, value| put(row, column, value * element.value),
            );
        }
    }

    /// Gives every ⟨left|I_q|right⟩ that does not vanish, times a factor; states of different levels have
    /// none.
    pub fn nucleus(&self, factor: f64, mut put: impl FnMut(usize, usize, f64)) {
        if self.two_i == 0 || factor == 0.0 {
            return;
        }
        let mut factors = Factors::new(2);
        let reduced = factor * momentum(self.two_i);
        let table = factors.of(self.two_i, self.two_i, self.two_q());
        let step = self.two_q() / 2;
        for (rows, columns) in self.left.levels.iter().zip(&self.right.levels) {
            self.pairs(
                rows,
                columns,
                2,
                |left, right, sum| {
                    for ((place, a), factor) in (0..).zip(&left.products).zip(table) {
                        // M_I of the right side is M_I − q.
                        let other = usize::try_from(place - step).ok();
                        let b = other.and_then(|other| right.products.get(other));
                        sum.add(a * b.copied().unwrap_or(0.0) * factor);
                    }
                },
                |row, column, value| put(row, column, value * reduced),
            );
        }
    }

    fn pairs(
        &self,
        rows: &Range<usize>,
        columns: &Range<usize>,
        two_k: i32,
        mut terms: impl FnMut(&Row, &Row, &mut Sum),
        mut put: impl FnMut(usize, usize, f64),
    ) {
        let lefts = self.left.rows.get(rows.clone()).unwrap_or(&[]);
        let rights = self.right.rows.get(columns.clone()).unwrap_or(&[]);
        for (row, left) in (rows.start..).zip(lefts) {
            for (column, right) in (columns.start..).zip(rights) {
                if let (Some(f), Some(other)) = (left.two_f, right.two_f)
                    && ((f - other).abs() > two_k || f + other < two_k)
                {
                    continue;
                }
                let mut sum = Sum::default();
                terms(left, right, &mut sum);
                let value = sum.value();
                if value != 0.0 {
                    put(row, column, value);
                }
            }
        }
    }
}

/// A sum that knows how large its terms were.
#[derive(Default)]
struct Sum {
    sum: f64,
    size: f64,
}

impl Sum {
    fn add(&mut self, term: f64) {
        self.sum += term;
        self.size += term.abs();
    }

    fn value(&self) -> f64 {
        if self.sum.abs() <= ROUNDING * self.size {
            0.0
        } else {
            self.sum
        }
    }
}
