//! From the coefficients of ℓ^(N−1) to those of ℓ^N.

use super::Parentage;
use crate::angular::equivalent::{EquivalentTerm, classify};
use crate::angular::wigner_6j;
use crate::numerics::symmetric::eigensystem;
use crate::problem::Problem;
use nalgebra::{DMatrix, DVector};
use std::sync::OnceLock;

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
        let basis = exchange.antisymmetric(first, &places, same.len());
        let rows = resolve(basis, same, &places, previous)?;
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
    orbital: &'static OrbitalFactors,
    /// For each parent its grandparents: place, 2S₀, L₀ and coefficient, without those that vanish.
    lines: Vec<Vec<(usize, i32, u32, f64)>>,
}

impl<'a> Exchange<'a> {
    fn new(previous: &'a Parentage) -> Self {
        let lines = (0..previous.children().len())
            .map(|parent| {
                let coefficients = previous.row(parent).iter().copied();
                (0..)
                    .zip(previous.parents().iter().zip(coefficients))
                    .filter(|&(_, (_, coefficient))| coefficient != 0.0)
                    .map(|(place, (term, coefficient))| {
                        (place, term.two_s, term.l_total, coefficient)
                    })
                    .collect()
            })
            .collect();
        Exchange {
            previous,
            orbital: OrbitalFactors::of(previous.l()),
            lines,
        }
    }

    /// An orthonormal basis of the states of S L that are antisymmetric in all N electrons.
    ///
    /// It is the range of the projector A = (1 − (N−1) P)/N, whose rank is known. Of A only the
    /// diagonal is computed and, one after another, the column that reaches farthest out of the
    /// span of those before it.
    fn antisymmetric(
        &self,
        child: &EquivalentTerm,
        places: &[usize],
        rank: usize,
    ) -> Vec<DVector<f64>> {
        let spin = SpinFactors::new(child.two_s);
        let element = |left: usize, right: usize| self.projector(child, &spin, left, right);
        let diagonal: Vec<f64> = places.iter().map(|&place| element(place, place)).collect();
        let mut basis: Vec<DVector<f64>> = Vec::with_capacity(rank);
        for _ in 0..rank {
            let mut best: Option<(usize, f64)> = None;
            for (row, &whole) in diagonal.iter().enumerate() {
                let within: f64 = basis
                    .iter()
                    .filter_map(|vector| vector.get(row))
                    .map(|part| part * part)
                    .sum();
                // A clear lead, so that rounding does not choose between equals.
                if best.is_none_or(|(_, largest)| whole - within > largest + ZERO) {
                    best = Some((row, whole - within));
                }
            }
            let Some(&pivot) = best.and_then(|(row, _)| places.get(row)) else {
                break;
            };
            let column = places.iter().map(|&place| element(place, pivot));
            let mut chosen = DVector::from_iterator(places.len(), column);
            // Twice: the first pass leaves the rounding of what it took away.
            for _ in 0..2 {
                for earlier in &basis {
                    let overlap = earlier.dot(&chosen);
                    chosen.axpy(-overlap, earlier, 1.0);
                }
                let length = chosen.norm();
                if length < ZERO {
                    return basis;
                }
                chosen /= length;
            }
            basis.push(chosen);
        }
        basis
    }

    /// One element of (1 − (N−1) P)/N.
    fn projector(
        &self,
        child: &EquivalentTerm,
        spin: &SpinFactors,
        left: usize,
        right: usize,
    ) -> f64 {
        let parents = self.previous.children();
        let (Some(one), Some(two), Some(line)) =
            (parents.get(left), parents.get(right), self.lines.get(left))
        else {
            return 0.0;
        };
        let others = self.previous.row(right);
        let mut sum = 0.0;
        for &(place, two_s0, l0, c1) in line {
            let c2 = others.get(place).copied().unwrap_or(0.0);
            if c2 != 0.0 {
                let orbital = self.orbital.at(l0, one.l_total, two.l_total, child.l_total);
                sum += c1 * c2 * spin.at(two_s0, one.two_s, two.two_s) * orbital;
            }
        }
        let before = f64::from(self.previous.electrons());
        let root = (f64::from(2 * one.l_total + 1) * f64::from(2 * two.l_total + 1)).sqrt();
        (f64::from(u8::from(left == right)) - before * sum * root) / (before + 1.0)
    }
}

/// (−1)^(L₁+L₂) {ℓ L₀ L₁; ℓ L L₂} for every L₀ of ℓ^N, ℓ ≤ 3.
struct OrbitalFactors {
    l: i32,
    /// By L₀, then L₁−L₀+ℓ, L₂−L₀+ℓ, L−L₁+ℓ.
    values: Vec<f64>,
}

static ORBITAL_FACTORS: [OnceLock<OrbitalFactors>; 4] = [const { OnceLock::new() }; 4];

impl OrbitalFactors {
    /// Those of ℓ, kept; of ℓ = 3 for any ℓ above.
    fn of(l: u8) -> &'static Self {
        let [s, p, d, f] = &ORBITAL_FACTORS;
        let place = match l {
            0 => s,
            1 => p,
            2 => d,
            _ => f,
        };
        place.get_or_init(|| Self::compute(i32::from(l.min(3))))
    }

    fn compute(l: i32) -> Self {
        // The largest L of any ℓ^N: m = ℓ, ℓ−1, … 1 each taken twice.
        let largest = l * (l + 1);
        let mut values = Vec::new();
        for l0 in 0..=largest {
            for l1 in l0 - l..=l0 + l {
                for l2 in l0 - l..=l0 + l {
                    for total in l1 - l..=l1 + l {
                        let value = wigner_6j(2 * l, 2 * l0, 2 * l1, 2 * l, 2 * total, 2 * l2);
                        values.push(signed(l1 + l2, value));
                    }
                }
            }
        }
        OrbitalFactors { l, values }
    }

    fn at(&self, l0: u32, l1: u32, l2: u32, total: u32) -> f64 {
        let [l0, l1, l2, total] =
            [l0, l1, l2, total].map(|value| i32::try_from(value).unwrap_or(0));
        let width = 2 * self.l + 1;
        let place = ((l0 * width + l1 - l0 + self.l) * width + l2 - l0 + self.l) * width + total
            - l1
            + self.l;
        usize::try_from(place)
            .ok()
            .and_then(|place| self.values.get(place))
            .copied()
            .unwrap_or(0.0)
    }
}

/// −(−1)^(S₁+S₂) √[(2S₁+1)(2S₂+1)] {½ S₀ S₁; ½ S S₂} for one S: S₁ and S₂ differ from it by ½, S₀
/// by 0 or 1.
struct SpinFactors {
    two_s: i32,
    values: [f64; 12],
}

impl SpinFactors {
    fn new(two_s: i32) -> Self {
        let mut values = [0.0; 12];
        for (place, value) in (0..).zip(&mut values) {
            let (s0, s1, s2) = (
                two_s - 2 + place / 4 * 2,
                two_s - 1 + place / 2 % 2 * 2,
                two_s - 1 + place % 2 * 2,
            );
            let root = (f64::from(s1 + 1) * f64::from(s2 + 1)).sqrt();
            *value = signed((s1 + s2) / 2 + 1, root * wigner_6j(1, s0, s1, 1, two_s, s2));
        }
        SpinFactors { two_s, values }
    }

    fn at(&self, s0: i32, s1: i32, s2: i32) -> f64 {
        let place = (s0 - self.two_s + 2) / 2 * 4
            + (s1 - self.two_s + 1) / 2 * 2
            + (s2 - self.two_s + 1) / 2;
        usize::try_from(place)
            .ok()
            .and_then(|place| self.values.get(place))
            .copied()
            .unwrap_or(0.0)
    }
}

fn signed(exponent: i32, value: f64) -> f64 {
    if exponent & 1 == 0 { value } else { -value }
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
    let mut fixed: Vec<DVector<f64>> = Vec::with_capacity(rows.len());
    for place in 0..width {
        if fixed.len() == rows.len() {
            break;
        }
        // The projection of this parent on the span, less what is fixed already.
        let mut chosen = DVector::zeros(width);
        for row in rows.iter() {
            chosen.axpy(row.get(place).copied().unwrap_or(0.0), row, 1.0);
        }
        for _ in 0..2 {
            for earlier in &fixed {
                let overlap = earlier.dot(&chosen);
                chosen.axpy(-overlap, earlier, 1.0);
            }
        }
        let length = chosen.norm();
        if length > ZERO.sqrt() {
            chosen /= length;
            fixed.push(chosen);
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
