//! Reduced matrix elements between levels: amplitudes of lines, and means.

use super::hamiltonian::Rows;
use super::levels::{Level, Levels};
use super::multipole::Elements;

/// An amplitude below this share of the operator's largest element is rounding of the eigenvectors.
const NOISE: f64 = 1e-13;

/// The amplitude between two levels.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Amplitude {
    /// Place of the left level.
    pub left: usize,
    /// Place of the right level.
    pub right: usize,
    /// ⟨left‖T‖right⟩; its square is the line strength S.
    pub reduced: f64,
    /// (Σ x)²/(Σ|x|)² over the products x of components and elements that add up to the amplitude: 1
    /// where all agree, small where the strength is what little is left of large terms.
    ///
    /// Source: Cowan, *The Theory of Atomic Structure and Spectra* (1981), eq. 14.107.
    pub cancellation: f64,
}

/// All amplitudes of an operator of rank k between two sets of levels, by left, then right place.
///
/// `elements` gives the operator between the rows of two J, such as
/// [`super::Multipole::elements`] or [`super::magnetic_elements`]. With `once`, for two sets that
/// are the same, each pair of different levels is given once, the left place being the lower.
pub fn amplitudes(
    left: &Levels,
    right: &Levels,
    rank: u8,
    once: bool,
    mut elements: impl FnMut(&Rows, &Rows) -> Elements,
) -> Vec<Amplitude> {
    let mut found = Vec::new();
    for rows in &left.rows {
        for columns in &right.rows {
            let two_k = 2 * i32::from(rank);
            let (two_j, two_jp) = (rows.two_j, columns.two_j);
            let apart = (two_j - two_jp).abs();
            if apart > two_k || two_j + two_jp < two_k || (two_j - two_jp) % 2 != 0 {
                continue;
            }
            let operator = elements(rows, columns);
            let pair = Pair {
                operator: &operator,
                rows: rows.states.len(),
                largest: operator.iter().fold(0.0_f64, |most, e| most.max(e.2.abs())),
            };
            pair.amplitudes((left, two_j), (right, two_jp), once, &mut found);
        }
    }
    crate::numerics::order::sort_by_key(&mut found, |line: &Amplitude| (line.left, line.right));
    found
}

/// ⟨a‖T‖a⟩ of every level, by its place; `elements` as for [`amplitudes`].
pub fn diagonal(levels: &Levels, mut elements: impl FnMut(&Rows) -> Elements) -> Vec<f64> {
    let mut found = vec![0.0; levels.levels.len()];
    for rows in &levels.rows {
        let operator = elements(rows);
        for (level, sum) in levels.levels.iter().zip(&mut found) {
            if level.two_j != rows.two_j {
                continue;
            }
            let of = |place: usize| level.vector.get(place).copied().unwrap_or(0.0);
            *sum = (operator.iter())
                .map(|&(row, column, element)| of(row) * element * of(column))
                .sum();
        }
    }
    found
}

/// An operator between two J.
struct Pair<'a> {
    operator: &'a Elements,
    rows: usize,
    largest: f64,
}

impl Pair<'_> {
    fn amplitudes(
        &self,
        (left, two_j): (&Levels, i32),
        (right, two_jp): (&Levels, i32),
        once: bool,
        found: &mut Vec<Amplitude>,
    ) {
        let of_j = |levels: &Levels, two_j: i32| -> Vec<usize> {
            let places = levels.levels.iter().enumerate();
            places
                .filter(|(_, l)| l.two_j == two_j)
                .map(|(place, _)| place)
                .collect()
        };
        let bras = of_j(left, two_j);
        for ket_place in of_j(right, two_jp) {
            let Some(ket) = right.levels.get(ket_place) else {
                continue;
            };
            let (image, magnitude) = self.image(ket);
            for &bra_place in bras.iter().filter(|&&place| !once || place < ket_place) {
                let Some(bra) = left.levels.get(bra_place) else {
                    continue;
                };
                let (mut sum, mut whole) = (0.0, 0.0);
                for ((component, value), size) in bra.vector.iter().zip(&image).zip(&magnitude) {
                    sum += component * value;
                    whole += component.abs() * size;
                }
                if sum.abs() > NOISE * self.largest {
                    found.push(Amplitude {
                        left: bra_place,
                        right: ket_place,
                        reduced: sum,
                        cancellation: sum * sum / (whole * whole),
                    });
                }
            }
        }
    }

    /// The operator on a level, and the same of all magnitudes.
    fn image(&self, ket: &Level) -> (Vec<f64>, Vec<f64>) {
        let mut image = vec![0.0; self.rows];
        let mut magnitude = vec![0.0; self.rows];
        for &(row, column, element) in self.operator {
            let component = ket.vector.get(column).copied().unwrap_or(0.0);
            if let (Some(value), Some(size)) = (image.get_mut(row), magnitude.get_mut(row)) {
                *value += element * component;
                *size += (element * component).abs();
            }
        }
        (image, magnitude)
    }
}
