//! The lowest eigenvalues of large symmetric matrices with their eigenvectors.
//!
//! Davidson's method in blocks: eigenpairs are sought in a space that grows by corrections
//! t = (M − θ)⁻¹(r − ε x) to the pairs that have not converged, r = A x − θ x, where M is a matrix
//! [`Nearby`], and ε makes t orthogonal to x (Olsen). When the space is full it shrinks to the best
//! pairs and what those in work were a turn before.
//!
//! Nothing in it is random: the start is made of the lowest eigenvectors of M and of a few vectors
//! that reach all rows. All sums have one order, so the result has the same bits everywhere.
//!
//! Source: Davidson, J. Comput. Phys. 17, 87 (1975); Olsen, Jørgensen & Simons, Chem. Phys. Lett. 169,
//! 463 (1990); Stathopoulos & Saad, Electron. Trans. Numer. Anal. 7, 163 (1998), for the restart.

use super::lanes::{add, dot, norm};
use super::nearby::Nearby;
use super::sparse::{SparseSymmetric, products};
use super::symmetric::{Eigensystem, eigensystem};
use nalgebra::DMatrix;

/// Corrections made in one turn.
const WIDTH: usize = 8;

/// Vectors among which the nearby matrix is the whole one, or six for each pair followed.
const LOW: usize = 600;

/// Turns of corrections that the space has room for beyond twice the pairs followed.
const ROOM: usize = 8;

/// How much larger the residual of a pair beyond those wanted may be.
const COARSER: f64 = 1e4;

/// A correction of which less than this part is outside the space adds nothing to it.
const INSIDE: f64 = 1e-7;

/// Eigenvalues of M nearer to θ than this part of their spread are moved away.
const FLOOR: f64 = 1e-9;

/// What is asked for.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Wanted {
    /// How many of the lowest pairs.
    pub count: usize,
    /// ‖A x − θ x‖ at most, in the unit of the matrix; θ is at most that far from an eigenvalue, and
    /// its square over the gap to the next one is a better bound.
    pub residual: f64,
    /// Turns at most.
    pub turns: usize,
}

/// The lowest pairs.
#[derive(Clone, Debug, PartialEq)]
pub struct Lowest {
    /// Rising.
    pub values: Vec<f64>,
    /// Normalised, one for each value.
    pub vectors: Vec<Vec<f64>>,
    /// ‖A x − θ x‖ of each, evaluated anew at the end.
    pub residuals: Vec<f64>,
    /// Turns made.
    pub turns: usize,
}

/// Why there is no result.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Failure {
    /// The matrix is empty or has an element that is not finite.
    NoMatrix,
    /// Not all pairs converged; the largest residual that was left.
    NotConverged(f64),
    /// The watch refused.
    Stopped,
}

/// The lowest eigenpairs of a matrix whose rows fall into consecutive parts of these lengths, rows of
/// one part being linked strongly; rows beyond them make one more part.
///
/// A few more pairs than wanted are followed, to a coarser residual, so that a low one that comes in
/// late is not missed. That none is missed is likely and is not proved by the residuals. `watch`
/// hears which share of the pairs has converged, and ends the work by answering false.
///
/// # Errors
/// [`Failure`].
pub fn lowest(
    matrix: &SparseSymmetric,
    parts: &[usize],
    wanted: Wanted,
    watch: &mut dyn FnMut(f64) -> bool,
) -> Result<Lowest, Failure> {
    let size = matrix.size();
    if size == 0 || !matrix.is_finite() {
        return Err(Failure::NoMatrix);
    }
    let count = wanted.count.min(size);
    let followed = (count + 3 + count / 8).min(size);
    let most = followed
        .saturating_mul(2)
        .saturating_add(ROOM * WIDTH)
        .min(size);
    let nearby = Nearby::new(matrix, parts, LOW.max(6 * followed)).ok_or(Failure::NoMatrix)?;
    let floor = FLOOR * nearby.spread();
    let mut space = Space::default();
    space.grow(matrix, nearby.start(followed));
    // The value each pair had when its residual was small enough; it mostly stays so while the value
    // does.
    let mut settled: Vec<Option<f64>> = vec![None; followed];
    let mut worst = f64::INFINITY;
    let mut before: Vec<Vec<f64>> = Vec::new();
    for turn in 1..=wanted.turns {
        let pairs = space.pairs().ok_or(Failure::NoMatrix)?;
        let mut corrections = Vec::new();
        let mut now = Vec::new();
        let mut open = 0_usize;
        let mut passed_over = false;
        worst = 0.0;
        for ((place, known), &value) in settled.iter_mut().enumerate().zip(&pairs.values) {
            let coarser = if place < count { 1.0 } else { COARSER };
            let bound = wanted.residual * coarser;
            if known.is_some_and(|known| (known - value).abs() <= bound) {
                passed_over = true;
                continue;
            }
            *known = None;
            if corrections.len() == WIDTH {
                open += 1;
                continue;
            }
            let (vector, rest) = space.residual(&pairs, place, value);
            let length = norm(&rest);
            if length <= bound {
                *known = Some(value);
                continue;
            }
            open += 1;
            worst = f64::max(worst, length / coarser);
            let mut correction = nearby.solve(value, floor, &rest);
            let along = nearby.solve(value, floor, &vector);
            let epsilon = dot(&vector, &correction) / dot(&vector, &along);
            add(&mut correction, -epsilon, &along);
            corrections.push(correction);
            now.push(pairs.vectors.column(place).iter().copied().collect());
        }
        if !watch(1.0 - open as f64 / followed as f64) {
            return Err(Failure::Stopped);
        }
        if open == 0 && passed_over {
            // Vectors of equal values may turn while their values stay: all residuals once more.
            settled.fill(None);
            continue;
        }
        if open == 0 {
            return finish(matrix, &space, &pairs, wanted, turn);
        }
        if space.vectors.len() + corrections.len() > most {
            now = space.shrink(&pairs, followed, &before, now);
        }
        before = now;
        if space.grow(matrix, corrections) == 0 {
            break;
        }
    }
    Err(Failure::NotConverged(worst))
}

fn finish(
    matrix: &SparseSymmetric,
    space: &Space,
    pairs: &Eigensystem,
    wanted: Wanted,
    turns: usize,
) -> Result<Lowest, Failure> {
    let values: Vec<f64> = pairs.values.iter().take(wanted.count).copied().collect();
    let vectors: Vec<Vec<f64>> = (0..values.len())
        .map(|place| {
            let mut vector = combined(&space.vectors, pairs, place);
            let length = norm(&vector);
            vector.iter_mut().for_each(|entry| *entry /= length);
            vector
        })
        .collect();
    // The images of the space have gathered rounding: from the matrix itself once more.
    let mut rests = products(matrix, &vectors);
    for ((rest, vector), value) in rests.iter_mut().zip(&vectors).zip(&values) {
        add(rest, -value, vector);
    }
    let residuals: Vec<f64> = rests.iter().map(|rest| norm(rest)).collect();
    let worst = residuals
        .iter()
        .fold(0.0, |most, &each| f64::max(most, each));
    if worst <= 2.0 * wanted.residual {
        Ok(Lowest {
            values,
            vectors,
            residuals,
            turns,
        })
    } else {
        Err(Failure::NotConverged(worst))
    }
}

/// Orthonormal vectors, their images, and the matrix between them.
#[derive(Default)]
struct Space {
    vectors: Vec<Vec<f64>>,
    images: Vec<Vec<f64>>,
    /// Row i holds ⟨i|A|j⟩ for j ≤ i.
    elements: Vec<Vec<f64>>,
}

impl Space {
    /// Takes up what is new in the vectors; how many of them had something new.
    fn grow(&mut self, matrix: &SparseSymmetric, vectors: Vec<Vec<f64>>) -> usize {
        let before = self.vectors.len();
        for mut vector in vectors {
            if normalise(&mut vector, 0.0)
                && take_off(&self.vectors, &mut vector, INSIDE)
                // Again, because the first time leaves what rounding brought in.
                && take_off(&self.vectors, &mut vector, 0.5)
            {
                self.vectors.push(vector);
            }
        }
        let fresh = products(matrix, self.vectors.get(before..).unwrap_or(&[]));
        for (place, image) in (before..).zip(fresh) {
            let known = self.vectors.iter().take(place + 1);
            self.elements
                .push(known.map(|vector| dot(vector, &image)).collect());
            self.images.push(image);
        }
        self.vectors.len() - before
    }

    fn pairs(&self) -> Option<Eigensystem> {
        let size = self.vectors.len();
        eigensystem(DMatrix::from_fn(size, size, |row, column| {
            // Only the lower triangle is read.
            let row = self.elements.get(row);
            row.and_then(|row| row.get(column)).copied().unwrap_or(0.0)
        }))
    }

    /// x and A x − θ x of a pair.
    fn residual(&self, pairs: &Eigensystem, place: usize, value: f64) -> (Vec<f64>, Vec<f64>) {
        let vector = combined(&self.vectors, pairs, place);
        let mut rest = combined(&self.images, pairs, place);
        add(&mut rest, -value, &vector);
        (vector, rest)
    }

    /// Keeps the span of the lowest pairs and of what the pairs in work were a turn ago, which is what
    /// a shrunk space would otherwise forget of their way. Vectors are given by their components in
    /// the space; what the pairs in work are now is answered by those in the new one.
    fn shrink(
        &mut self,
        pairs: &Eigensystem,
        count: usize,
        before: &[Vec<f64>],
        now: Vec<Vec<f64>>,
    ) -> Vec<Vec<f64>> {
        let size = self.vectors.len();
        let lowest = pairs.vectors.column_iter().take(count);
        let mut kept: Vec<Vec<f64>> = lowest.map(|c| c.iter().copied().collect()).collect();
        for old in before {
            let mut old = old.clone();
            old.resize(size, 0.0);
            if take_off(&kept, &mut old, INSIDE) && take_off(&kept, &mut old, 0.5) {
                kept.push(old);
            }
        }
        let images: Vec<Vec<f64>> = kept.iter().map(|own| self.element_times(own)).collect();
        self.elements = (kept.iter().enumerate())
            .map(|(row, own)| {
                images
                    .iter()
                    .take(row + 1)
                    .map(|image| dot(own, image))
                    .collect()
            })
            .collect();
        let combine = |old: &[Vec<f64>]| kept.iter().map(|own| mixed(old, own)).collect();
        self.vectors = combine(&self.vectors);
        self.images = combine(&self.images);
        let inside = |own: Vec<f64>| kept.iter().map(|each| dot(each, &own)).collect();
        now.into_iter().map(inside).collect()
    }

    /// The matrix within the space times a vector of it.
    fn element_times(&self, own: &[f64]) -> Vec<f64> {
        let mut product = vec![0.0; own.len()];
        for (row, elements) in self.elements.iter().enumerate() {
            let mut sum = 0.0;
            let factor = own.get(row).copied().unwrap_or(0.0);
            let beside = product.iter_mut().zip(own);
            for (column, (element, (target, other))) in elements.iter().zip(beside).enumerate() {
                sum += element * other;
                if column != row {
                    *target += element * factor;
                }
            }
            if let Some(target) = product.get_mut(row) {
                *target += sum;
            }
        }
        product
    }
}

/// Σ v_j y_j for the pair at this place.
fn combined(vectors: &[Vec<f64>], pairs: &Eigensystem, place: usize) -> Vec<f64> {
    let own: Vec<f64> = pairs.vectors.column(place).iter().copied().collect();
    mixed(vectors, &own)
}

/// Σ v_j y_j.
fn mixed(vectors: &[Vec<f64>], factors: &[f64]) -> Vec<f64> {
    let mut sum = vec![0.0; vectors.first().map_or(0, Vec::len)];
    for (vector, &factor) in vectors.iter().zip(factors) {
        add(&mut sum, factor, vector);
    }
    sum
}

/// Takes what lies along orthonormal vectors off a unit vector and normalises the rest; whether it
/// was longer than `least`.
fn take_off(known: &[Vec<f64>], vector: &mut [f64], least: f64) -> bool {
    for each in known {
        let part = dot(each, vector);
        add(vector, -part, each);
    }
    normalise(vector, least)
}

/// Whether the vector was longer than `least` and of finite length; then it has the length 1.
fn normalise(vector: &mut [f64], least: f64) -> bool {
    let length = norm(vector);
    if !(length > least && length.is_finite()) {
        return false;
    }
    vector.iter_mut().for_each(|entry| *entry /= length);
    true
}

#[cfg(test)]
mod tests {
    use super::super::sparse::Elements;
    use super::*;

    /// Parts of 20 rows with strong links inside and weak ones to some rows of other parts; `copies` of
    /// it without any link between them.
    fn sample(parts: usize, copies: usize) -> (SparseSymmetric, Vec<usize>) {
        let size = 20 * parts;
        let mut elements = Elements::new(u32::try_from(size * copies).expect("small"));
        let pattern = |i: usize, j: usize| ((7 * i + 13 * j) % 31) as f64 / 31.0 - 0.5;
        for copy in 0..copies {
            let shift = copy * size;
            for row in 0..size {
                elements.add(shift + row, shift + row, ((row * 37) % 101) as f64 * 10.0);
                for column in 0..row {
                    if row / 20 == column / 20 {
                        let value = 100.0 * pattern(row, column);
                        elements.add(shift + row, shift + column, value);
                    } else if (row + 3 * column) % 11 == 0 {
                        let value = 8.0 * pattern(column, row);
                        elements.add(shift + row, shift + column, value);
                    }
                }
            }
        }
        (elements.finish(), vec![20; parts * copies])
    }

    fn dense(matrix: &SparseSymmetric) -> Eigensystem {
        let mut full = DMatrix::zeros(matrix.size(), matrix.size());
        for row in 0..matrix.size() {
            full[(row, row)] = matrix.diagonal()[row];
            let (columns, values) = matrix.row(row);
            for (&column, &value) in columns.iter().zip(values) {
                full[(row, column as usize)] = value;
            }
        }
        eigensystem(full).expect("converges")
    }

    const WANTED: Wanted = Wanted {
        count: 12,
        residual: 1e-8,
        turns: 200,
    };

    #[test]
    fn the_lowest_pairs_are_those_of_the_dense_way() {
        let (matrix, parts) = sample(50, 1);
        let known = dense(&matrix);
        for parts in [&parts[..], &[]] {
            let found = lowest(&matrix, parts, WANTED, &mut |_| true).expect("converges");
            assert_eq!(found.values.len(), 12);
            for (place, value) in found.values.iter().enumerate() {
                assert!(
                    (value - known.values[place]).abs() < 1e-10,
                    "{place} {value}"
                );
                let own = known.vectors.column(place);
                let overlap = dot(own.as_slice(), &found.vectors[place]).abs();
                assert!((overlap - 1.0).abs() < 1e-12, "{place} {overlap}");
            }
            assert!(found.residuals.iter().all(|&residual| residual <= 2e-8));
        }
    }

    #[test]
    fn equal_values_are_found_as_often_as_they_occur() {
        let (matrix, parts) = sample(20, 3);
        let known = dense(&matrix);
        let found = lowest(&matrix, &parts, WANTED, &mut |_| true).expect("converges");
        for (value, expected) in found.values.iter().zip(&known.values) {
            assert!((value - expected).abs() < 1e-10, "{value} {expected}");
        }
        for (one, vector) in found.vectors.iter().enumerate() {
            for other in found.vectors.iter().take(one) {
                assert!(dot(vector, other).abs() < 1e-12);
            }
        }
    }

    #[test]
    fn small_matrices_are_solved_too() {
        let (matrix, _) = sample(1, 1);
        let known = dense(&matrix);
        for count in [0, 1, 19, 20, 400] {
            let wanted = Wanted { count, ..WANTED };
            let found = lowest(&matrix, &[3, 5], wanted, &mut |_| true).expect("converges");
            assert_eq!(found.values.len(), count.min(20));
            for (value, expected) in found.values.iter().zip(&known.values) {
                assert!((value - expected).abs() < 1e-10, "{value} {expected}");
            }
        }
    }

    #[test]
    fn what_cannot_be_solved_is_told() {
        let failure = |matrix: &SparseSymmetric, wanted, go: bool| {
            lowest(matrix, &[], wanted, &mut |_| go).expect_err("fails")
        };
        let (matrix, _) = sample(50, 1);
        assert_eq!(
            failure(&SparseSymmetric::default(), WANTED, true),
            Failure::NoMatrix
        );
        let mut elements = Elements::new(2);
        elements.add(1, 0, f64::NAN);
        assert_eq!(failure(&elements.finish(), WANTED, true), Failure::NoMatrix);
        assert_eq!(failure(&matrix, WANTED, false), Failure::Stopped);
        let few = Wanted { turns: 1, ..WANTED };
        assert!(matches!(failure(&matrix, few, true), Failure::NotConverged(r) if r > 1e-8));
        // Finer than rounding allows.
        let fine = Wanted {
            residual: 1e-30,
            ..WANTED
        };
        assert!(matches!(
            failure(&matrix, fine, true),
            Failure::NotConverged(_)
        ));
    }
}
