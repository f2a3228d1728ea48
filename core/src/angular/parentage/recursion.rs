//! From the coefficients of ℓ^(N−1) to those of ℓ^N.

use super::Parentage;
use crate::angular::equivalent::{EquivalentTerm, classify};
use crate::angular::wigner_6j;
use crate::numerics::symmetric::eigensystem;
use crate::problem::Problem;
use nalgebra::{DMatrix, DVector};

/// Below this a coefficient is zero: of those that are not, the smallest is 8·10⁻⁵ (in f⁷).
const ZERO: f64 = 1e-10;

/// How far an eigenvalue may lie from the one its labels demand.
const LABEL_TOLERANCE: f64 = 1e-9;

/// Rows for all children; `previous` holds the coefficients of their parents.
pub(super) fn coefficients(
    children: &[EquivalentTerm],
    previous: &Parentage,
) -> Result<Vec<f64>, Problem> {
    let parents = previous.children();
    let exchange = Exchange::new(previous);
    let mut coefficients = Vec::with_capacity(children.len() * parents.len());
    for same in
        children.chunk_by(|one, other| (one.two_s, one.l_total) == (other.two_s, other.l_total))
    {
        let Some(first) = same.first() else { continue };
        let places: Vec<usize> = (0..parents.len())
            .filter(|&place| {
                parents
                    .get(place)
                    .is_some_and(|parent| couples(parent, first, previous.l()))
            })
            .collect();
        let projector = exchange.antisymmetriser(first, &places);
        let rows = resolve(range(&projector, same.len()), same, &places, previous)?;
        for row in &rows {
            let mut full = vec![0.0; parents.len()];
            for (&place, &value) in places.iter().zip(row.iter()) {
                if let Some(entry) = full.get_mut(place)
                    && value.abs() > ZERO
                {
                    *entry = value;
                }
            }
            coefficients.extend(full);
        }
    }
    Ok(coefficients)
}

fn couples(parent: &EquivalentTerm, child: &EquivalentTerm, l: u8) -> bool {
    (parent.two_s - child.two_s).abs() == 1
        && parent.l_total.abs_diff(child.l_total) <= u32::from(l)
        && parent.l_total + child.l_total >= u32::from(l)
}

/// The exchange of the last two electrons between states coupled from parents.
///
/// ⟨(p₁ ℓ)SL|P|(p₂ ℓ)SL⟩ = Σ_γ c(p₁,γ) c(p₂,γ) X_s X_ℓ over the grandparents γ = S₀ L₀, with
/// X_ℓ = (−1)^(L₁+L₂) √[(2L₁+1)(2L₂+1)] {ℓ L₀ L₁; ℓ L L₂} and
/// X_s = −(−1)^(S₁+S₂) √[(2S₁+1)(2S₂+1)] {½ S₀ S₁; ½ S S₂}: recoupling by Edmonds (1957) eq. 6.1.5.
struct Exchange<'a> {
    previous: &'a Parentage,
    l: i32,
    /// X_ℓ without its root, by L₀, then L₁−L₀+ℓ, L₂−L₀+ℓ, L−L₁+ℓ.
    orbital: Vec<f64>,
}

impl<'a> Exchange<'a> {
    fn new(previous: &'a Parentage) -> Self {
        let l = i32::from(previous.l());
        let largest = previous
            .parents()
            .iter()
            .map(|term| term.l_total)
            .max()
            .unwrap_or(0);
        let mut orbital = Vec::new();
        for l0 in 0..=i32::try_from(largest).unwrap_or(0) {
            for l1 in l0 - l..=l0 + l {
                for l2 in l0 - l..=l0 + l {
                    for total in l1 - l..=l1 + l {
                        let value = wigner_6j(2 * l, 2 * l0, 2 * l1, 2 * l, 2 * total, 2 * l2);
                        orbital.push(signed(l1 + l2, value));
                    }
                }
            }
        }
        Exchange {
            previous,
            l,
            orbital,
        }
    }

    fn orbital(&self, l0: u32, l1: u32, l2: u32, total: u32) -> f64 {
        let [l0, l1, l2, total] =
            [l0, l1, l2, total].map(|value| i32::try_from(value).unwrap_or(0));
        let width = 2 * self.l + 1;
        let place = ((l0 * width + l1 - l0 + self.l) * width + l2 - l0 + self.l) * width + total
            - l1
            + self.l;
        usize::try_from(place)
            .ok()
            .and_then(|place| self.orbital.get(place))
            .copied()
            .unwrap_or(0.0)
    }

    /// (1 − (N−1) P)/N between the parents at `places`, coupled to the child's S L: the projector
    /// on what is antisymmetric in all N electrons.
    fn antisymmetriser(&self, child: &EquivalentTerm, places: &[usize]) -> DMatrix<f64> {
        let (parents, grandparents) = (self.previous.children(), self.previous.parents());
        let before = f64::from(self.previous.electrons());
        let spin = |s0: i32, s1: i32, s2: i32| {
            let root = (f64::from(s1 + 1) * f64::from(s2 + 1)).sqrt();
            signed(
                (s1 + s2) / 2 + 1,
                root * wigner_6j(1, s0, s1, 1, child.two_s, s2),
            )
        };
        // S₀, S₁, S₂ differ from S by whole numbers 0 or ±2 (doubled ±1 for S₁ and S₂).
        let mut spins = Vec::with_capacity(12);
        for s0 in [child.two_s - 2, child.two_s, child.two_s + 2] {
            for s1 in [child.two_s - 1, child.two_s + 1] {
                for s2 in [child.two_s - 1, child.two_s + 1] {
                    spins.push(spin(s0, s1, s2));
                }
            }
        }
        let spin = |s0: i32, s1: i32, s2: i32| {
            let place = ((s0 - child.two_s + 2) / 2 * 2 + (s1 - child.two_s + 1) / 2) * 2
                + (s2 - child.two_s + 1) / 2;
            usize::try_from(place)
                .ok()
                .and_then(|place| spins.get(place))
                .copied()
                .unwrap_or(0.0)
        };
        let mut matrix = DMatrix::identity(places.len(), places.len());
        for (row, &left) in places.iter().enumerate() {
            for (column, &right) in places.iter().enumerate().take(row + 1) {
                let (Some(one), Some(two)) = (parents.get(left), parents.get(right)) else {
                    continue;
                };
                let rows = self.previous.row(left).iter().zip(self.previous.row(right));
                let mut sum = 0.0;
                for (grandparent, (&c1, &c2)) in grandparents.iter().zip(rows) {
                    if c1 != 0.0 && c2 != 0.0 {
                        sum += c1
                            * c2
                            * spin(grandparent.two_s, one.two_s, two.two_s)
                            * self.orbital(
                                grandparent.l_total,
                                one.l_total,
                                two.l_total,
                                child.l_total,
                            );
                    }
                }
                let root = (f64::from(2 * one.l_total + 1) * f64::from(2 * two.l_total + 1)).sqrt();
                let unit = f64::from(u8::from(row == column));
                let value = (unit - before * sum * root) / (before + 1.0);
                for place in [(row, column), (column, row)] {
                    if let Some(entry) = matrix.get_mut(place) {
                        *entry = value;
                    }
                }
            }
        }
        matrix
    }
}

fn signed(exponent: i32, value: f64) -> f64 {
    if exponent & 1 == 0 { value } else { -value }
}

/// An orthonormal basis of the range of a projector of known rank: the columns that reach farthest
/// out of the span of those taken before, made orthogonal twice.
fn range(projector: &DMatrix<f64>, rank: usize) -> Vec<DVector<f64>> {
    let mut columns: Vec<DVector<f64>> = projector
        .column_iter()
        .map(|column| column.into_owned())
        .collect();
    let mut basis: Vec<DVector<f64>> = Vec::with_capacity(rank);
    for _ in 0..rank {
        let mut best: Option<&DVector<f64>> = None;
        for column in &columns {
            // A clear lead, so that rounding does not choose between equals.
            if best.is_none_or(|best| column.norm_squared() > best.norm_squared() + ZERO) {
                best = Some(column);
            }
        }
        let Some(mut chosen) = best.cloned() else {
            break;
        };
        for earlier in &basis {
            let overlap = earlier.dot(&chosen);
            chosen.axpy(-overlap, earlier, 1.0);
        }
        let length = chosen.norm();
        if length < ZERO {
            break;
        }
        chosen /= length;
        for column in &mut columns {
            let overlap = chosen.dot(column);
            column.axpy(-overlap, &chosen, 1.0);
        }
        basis.push(chosen);
    }
    basis
}

/// The basis turned so that each vector is one of the terms: by R(2ℓ+1) first, then by G₂ among
/// equal seniorities, so that only eigenvalues far apart have to be separated.
fn resolve(
    basis: Vec<DVector<f64>>,
    terms: &[EquivalentTerm],
    places: &[usize],
    previous: &Parentage,
) -> Result<Vec<DVector<f64>>, Problem> {
    let rotation = |term: &EquivalentTerm| term.rotation_casimir.unwrap_or(0.0);
    let exceptional = |term: &EquivalentTerm| term.g2_casimir.unwrap_or(0.0);
    let mut left = turn(basis, terms, places, previous, rotation)?;
    let mut rows = Vec::with_capacity(terms.len());
    for same in terms.chunk_by(|one, other| one.seniority == other.seniority) {
        let later = left.split_off(same.len().min(left.len()));
        let mut part = turn(left, same, places, previous, exceptional)?;
        left = later;
        let mut from = 0;
        for alike in same.chunk_by(|one, other| one.u == other.u) {
            if let Some(part) = part.get_mut(from..from + alike.len()) {
                fix_basis(part);
            }
            from += alike.len();
        }
        rows.extend(part);
    }
    Ok(rows)
}

/// The basis turned into eigenvectors of a Casimir operator, its eigenvalue rising along `terms`.
///
/// A Casimir operator is N times its value for one electron plus interactions of pairs, and a sum
/// over pairs in ℓ^N is N/(N−2) times the one over pairs among the first N−1 electrons, where it
/// is diagonal in the parents.
fn turn(
    basis: Vec<DVector<f64>>,
    terms: &[EquivalentTerm],
    places: &[usize],
    previous: &Parentage,
    casimir: impl Fn(&EquivalentTerm) -> f64,
) -> Result<Vec<DVector<f64>>, Problem> {
    if basis.len() != terms.len() {
        return Err(unresolved(terms));
    }
    let different = terms
        .windows(2)
        .any(|pair| matches!(pair, [one, two] if casimir(one) != casimir(two)));
    if !different {
        return Ok(basis);
    }
    let before = f64::from(previous.electrons());
    let single = classify(previous.l(), 1)?.first().map_or(0.0, &casimir);
    let pairs: Vec<f64> = places
        .iter()
        .map(|&place| previous.children().get(place).map_or(0.0, &casimir) - before * single)
        .collect();
    let scale = (before + 1.0) / (before - 1.0);
    let matrix = DMatrix::from_fn(basis.len(), basis.len(), |row, column| {
        match (basis.get(row), basis.get(column)) {
            (Some(left), Some(right)) => {
                let sum: f64 = left
                    .iter()
                    .zip(right.iter())
                    .zip(&pairs)
                    .map(|((a, b), pair)| a * b * pair)
                    .sum();
                scale * sum
            }
            _ => 0.0,
        }
    });
    let system = eigensystem(matrix).ok_or_else(|| unresolved(terms))?;
    let mut rows = Vec::with_capacity(terms.len());
    for ((term, value), turned) in terms
        .iter()
        .zip(&system.values)
        .zip(system.vectors.column_iter())
    {
        if (value + (before + 1.0) * single - casimir(term)).abs() > LABEL_TOLERANCE {
            return Err(unresolved(terms));
        }
        let mut row = DVector::zeros(places.len());
        for (vector, &share) in basis.iter().zip(turned.iter()) {
            row.axpy(share, vector, 1.0);
        }
        rows.push(row);
    }
    Ok(rows)
}

/// Vectors that only convention can choose within their span: each takes the first parent it can
/// reach for itself, with a positive coefficient.
fn fix_basis(rows: &mut [DVector<f64>]) {
    let width = rows.first().map_or(0, |row| row.len());
    let mut left = rows.to_vec();
    let mut fixed: Vec<DVector<f64>> = Vec::with_capacity(rows.len());
    for place in 0..width {
        if fixed.len() == rows.len() {
            break;
        }
        // The projection of this parent on what is left of the span.
        let mut chosen = DVector::zeros(width);
        for row in &left {
            chosen.axpy(row.get(place).copied().unwrap_or(0.0), row, 1.0);
        }
        let length = chosen.norm();
        if length < ZERO.sqrt() {
            continue;
        }
        chosen /= length;
        for row in &mut left {
            let overlap = chosen.dot(row);
            row.axpy(-overlap, &chosen, 1.0);
        }
        left = range(&DMatrix::from_columns(&left), left.len().saturating_sub(1));
        fixed.push(chosen);
        if left.is_empty() {
            break;
        }
    }
    for (row, chosen) in rows.iter_mut().zip(fixed) {
        *row = chosen;
    }
}

fn unresolved(terms: &[EquivalentTerm]) -> Problem {
    let name = terms.first().map_or(String::new(), |term| {
        format!("2S+1 = {}, L = {}", term.two_s + 1, term.l_total)
    });
    Problem::new(
        "parentage-unresolved",
        format!("The terms with {name} could not be told apart by their group labels."),
        0,
        0,
    )
}
