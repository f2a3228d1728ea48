//! States of one M that a field connects, and what becomes of them.

use super::eigenpairs::{Eigenpairs, eigenpairs};
use super::rows::Block;
use crate::numerics::lanes::dot;
use crate::numerics::order::sort_by;

/// Energies of one level this close, as a share of the largest, are equal.
const SAME: f64 = 1e-12;

/// A part in a field.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct PartField {
    /// Energies from the part's origin by rank, cm⁻¹, with the vectors.
    pub pairs: Eigenpairs,
    /// dE/dB by rank, cm⁻¹/T.
    pub slopes: Vec<f64>,
}

/// H = D + B Z + B² Q among states that it connects. None of its levels cross, so that the n-th state of
/// it stays the n-th.
#[derive(Clone, Debug)]
pub struct Part {
    /// Its states without a field.
    pub block: Block,
    /// For each rank its state's place among all.
    pub states: Vec<usize>,
    /// The energy that D counts from, cm⁻¹.
    pub origin: f64,
    /// D.
    pub diagonal: Vec<f64>,
    /// Z, cm⁻¹/T.
    pub zeeman: Vec<f64>,
    /// Q, cm⁻¹/T².
    pub diamagnetic: Option<Vec<f64>>,
    /// In the limit B → 0⁺.
    pub weak: PartField,
    /// For each rank the row that its state is named after.
    pub named: Vec<usize>,
}

impl Part {
    /// How many states.
    pub fn size(&self) -> usize {
        self.block.rows.len()
    }

    /// Energies, vectors and slopes at a field; nothing where no iteration converges.
    pub fn at(&self, tesla: f64, matrix: &mut Vec<f64>, found: &mut PartField) -> Option<()> {
        if tesla == 0.0 {
            found.clone_from(&self.weak);
            return Some(());
        }
        let size = self.size();
        matrix.clear();
        matrix.extend(self.zeeman.iter().map(|z| tesla * z));
        if let Some(diamagnetic) = &self.diamagnetic {
            let square = tesla * tesla;
            for (entry, q) in matrix.iter_mut().zip(diamagnetic) {
                *entry += square * q;
            }
        }
        for (entry, energy) in matrix.iter_mut().step_by(size + 1).zip(&self.diagonal) {
            *entry += energy;
        }
        eigenpairs(size, matrix, &mut found.pairs)?;
        found.slopes.clear();
        for rank in 0..size {
            let vector = found.pairs.vector(rank);
            let mut slope = form(&self.zeeman, vector);
            if let Some(diamagnetic) = &self.diamagnetic {
                slope += 2.0 * tesla * form(diamagnetic, vector);
            }
            found.slopes.push(slope);
        }
        Some(())
    }

    /// Finds the limit B → 0⁺ and names the states; `scale` is the largest energy of any level. Nothing
    /// where no iteration converges.
    pub fn name(&mut self, scale: f64) -> Option<()> {
        let size = self.size();
        let mut order: Vec<(f64, usize)> = self.diagonal.iter().copied().zip(0..).collect();
        sort_by(&mut order, |a, b| a.0.total_cmp(&b.0));
        let order: Vec<usize> = order.into_iter().map(|(_, row)| row).collect();
        let mut weak = PartField::default();
        let mut named = Vec::with_capacity(size);
        let mut left = order.as_slice();
        while !left.is_empty() {
            let tied = 1 + left
                .windows(2)
                .take_while(|pair| self.are_equal(pair, scale))
                .count();
            let (group, rest) = left.split_at(tied.min(left.len()));
            self.name_group(group, &mut weak, &mut named)?;
            left = rest;
        }
        self.weak = weak;
        self.named = named;
        Some(())
    }

    fn are_equal(&self, pair: &[usize], scale: f64) -> bool {
        let &[one, other] = pair else {
            return false;
        };
        let energy = |row: usize| self.diagonal.get(row).copied().unwrap_or(0.0);
        let (Some(a), Some(b)) = (self.block.rows.get(one), self.block.rows.get(other)) else {
            return false;
        };
        let scale = if a.level == b.level {
            a.nuclear.abs().max(b.nuclear.abs())
        } else {
            scale.max(a.nuclear.abs()).max(b.nuclear.abs())
        };
        (energy(one) - energy(other)).abs() <= SAME * scale
    }

    /// Rows of equal energy: first order by degenerate perturbation theory.
    fn name_group(
        &self,
        group: &[usize],
        weak: &mut PartField,
        named: &mut Vec<usize>,
    ) -> Option<()> {
        let size = self.size();
        let entry = |row: usize, column: usize| {
            self.zeeman.get(row * size + column).copied().unwrap_or(0.0)
        };
        let mut inner: Vec<f64> = Vec::with_capacity(group.len() * group.len());
        for &row in group {
            inner.extend(group.iter().map(|&column| entry(row, column)));
        }
        let mut pairs = Eigenpairs::default();
        eigenpairs(group.len(), &mut inner, &mut pairs)?;
        for (rank, &slope) in pairs.values.iter().enumerate() {
            let mut vector = vec![0.0; size];
            let mut mean = 0.0;
            for (&row, &component) in group.iter().zip(pairs.vector(rank)) {
                if let Some(place) = vector.get_mut(row) {
                    *place = component;
                }
                mean += component * component * self.diagonal.get(row).copied().unwrap_or(0.0);
            }
            weak.pairs.values.push(mean);
            weak.pairs.vectors.extend(vector);
            weak.slopes.push(slope);
        }
        let mut rows = group.to_vec();
        sort_by(&mut rows, |&a, &b| entry(a, a).total_cmp(&entry(b, b)));
        named.extend(rows);
        Some(())
    }
}

/// vᵀ M v.
fn form(matrix: &[f64], vector: &[f64]) -> f64 {
    let rows = matrix.chunks_exact(vector.len().max(1));
    rows.zip(vector).map(|(row, v)| v * dot(row, vector)).sum()
}
