//! Wigner 9j symbols.

use super::racah_sum::{RacahSum, Tetrahedron};
use super::six_j::wigner_6j;
use super::triad::{Triad, beyond, signed_root};
use crate::numerics::binomial::{Triangle, triangle};
use crate::numerics::natural::Natural;
use crate::problem::Problem;

/// The largest doubled angular momentum up to which 9j symbols are computed: j = 150.
///
/// The work grows as the fourth power of j; at the bound it is some tenths of a second.
pub const NINE_J_CAPACITY: i32 = 300;

/// The 9j symbol {a b c; d e f; g h i} of doubled angular momenta, by rows.
///
/// Σ_k (−1)^(2k) (2k+1) {a b c; f i k} {d e f; b k h} {g h i; k a d}: in the product of the three
/// 6j symbols the factors Δ of the triads that hold k meet in pairs, and cancel when each 6j
/// symbol's own sum takes one of them out. What remains is one integer over one root,
/// 9j = Σ_k (−1)^(2k) (2k+1) S₁ S₂ S₃ / √Π N over the six rows and columns, so that a value which
/// is small by cancellation keeps its digits: relative error below 2·10⁻¹⁵.
///
/// Zero where a row or a column breaks the triangle rule, and where two rows or columns are equal
/// while the sum of all nine is odd. Above j = 150 ([`NINE_J_CAPACITY`]) the symbol is not
/// computed: the value is then that of a 6j symbol where an argument is zero, otherwise
/// `f64::INFINITY`, which no symbol has; [`try_wigner_9j`] says it as a fault. Never NaN.
///
/// Source: Wigner's definition in Edmonds, *Angular Momentum in Quantum Mechanics* (1957), eq. 6.4.3.
#[must_use]
#[allow(clippy::too_many_arguments)]
pub fn wigner_9j(
    two_a: i32,
    two_b: i32,
    two_c: i32,
    two_d: i32,
    two_e: i32,
    two_f: i32,
    two_g: i32,
    two_h: i32,
    two_i: i32,
) -> f64 {
    try_wigner_9j([
        two_a, two_b, two_c, two_d, two_e, two_f, two_g, two_h, two_i,
    ])
    .unwrap_or(f64::INFINITY)
}

/// [`wigner_9j`] with the fault `angular-momentum-too-large` where it is not computed.
///
/// # Errors
/// An argument above j = 150 while the selection rules allow the symbol and no argument is zero.
pub fn try_wigner_9j(two_j: [i32; 9]) -> Result<f64, Problem> {
    let [a, b, c, d, e, f, g, h, i] = two_j;
    let lines = [
        (a, b, c),
        (d, e, f),
        (g, h, i),
        (a, d, g),
        (b, e, h),
        (c, f, i),
    ];
    let mut triads = Vec::with_capacity(6);
    for (one, two, three) in lines {
        match Triad::of(one, two, three) {
            Some(triad) => triads.push(triad),
            None => return Ok(0.0),
        }
    }
    if vanishes_by_symmetry(two_j) {
        return Ok(0.0);
    }
    let largest = two_j.into_iter().max().unwrap_or(0);
    if largest > NINE_J_CAPACITY {
        return with_a_zero(two_j).ok_or_else(|| beyond("9j", largest, NINE_J_CAPACITY));
    }
    let first = (a - i).abs().max((f - b).abs()).max((d - h).abs());
    let last = (a + i).min(f + b).min(d + h);
    let sums: Vec<(i32, [RacahSum; 3])> = (first..=last)
        .step_by(2)
        .filter_map(|k| {
            // Each with a triad of k first: (a i k), (b f k), (d h k).
            let symbols = [[a, i, k, f, b, c], [b, f, k, d, h, e], [d, h, k, i, a, g]];
            let [one, two, three] =
                symbols.map(|two_j| Tetrahedron::of(two_j).map(|case| case.sum()));
            Some((k, [one?, two?, three?]))
        })
        .collect();
    // (−1)^(2k) is the same for every k of one symbol.
    let odd = first & 1 == 1;
    let square = triads
        .iter()
        .fold(Natural::from_u64(1).scaled(), |square, triad| {
            square.over(triad.multinomial().scaled())
        });
    let (negative, magnitude) = match small_sum(&sums, triangle()) {
        Some(sum) => (sum < 0, Natural::from_u128(sum.unsigned_abs())),
        None => wide_sum(&sums),
    };
    Ok(signed_root(negative != odd, &magnitude, square))
}

/// Σ (2k+1) S₁ S₂ S₃ in 128 bits, nothing when it does not fit.
fn small_sum(sums: &[(i32, [RacahSum; 3])], triangle: &Triangle) -> Option<i128> {
    let mut total = 0_i128;
    for (two_k, factors) in sums {
        let mut term = i128::from(*two_k) + 1;
        for factor in factors {
            term = term.checked_mul(factor.small(triangle)?)?;
        }
        total = total.checked_add(term)?;
    }
    Some(total)
}

/// The same of any size: whether it is negative, and its magnitude.
fn wide_sum(sums: &[(i32, [RacahSum; 3])]) -> (bool, Natural) {
    let (mut positive, mut negative) = (Natural::default(), Natural::default());
    for (two_k, factors) in sums {
        let mut term = Natural::from_u64(u64::try_from(*two_k).unwrap_or(0) + 1);
        let mut below = false;
        for factor in factors {
            let (sign, magnitude) = match factor.small(triangle()) {
                Some(sum) => (sum < 0, Natural::from_u128(sum.unsigned_abs())),
                None => factor.wide(),
            };
            below ^= sign;
            term = term.product(&magnitude);
        }
        if below {
            negative.add(&term);
        } else {
            positive.add(&term);
        }
    }
    positive.difference(&negative)
}

/// Exchanging two rows or columns multiplies by (−1)^(sum of all nine).
fn vanishes_by_symmetry(two_j: [i32; 9]) -> bool {
    let [a, b, c, d, e, f, g, h, i] = two_j;
    let sum: i64 = two_j.into_iter().map(i64::from).sum();
    let (rows, columns) = (
        [[a, b, c], [d, e, f], [g, h, i]],
        [[a, d, g], [b, e, h], [c, f, i]],
    );
    let repeated = |[one, two, three]: [[i32; 3]; 3]| one == two || one == three || two == three;
    (sum / 2) & 1 == 1 && (repeated(rows) || repeated(columns))
}

/// {a b c; d e f; g h 0} = δ(c,f) δ(g,h) (−1)^(b+c+d+g) {a b c; e d g} / √[(2c+1)(2g+1)], Edmonds
/// (1957) eq. 6.4.14, with the zero anywhere; nothing where that 6j symbol is not computed.
fn with_a_zero(two_j: [i32; 9]) -> Option<f64> {
    let place = two_j.into_iter().position(|two| two == 0)?;
    let at = |row: usize, column: usize| two_j.get(row * 3 + column).copied().unwrap_or(0);
    // Cyclic exchanges of rows and of columns are even and bring the zero to the last place.
    let (row, column) = (place / 3 + 1, place % 3 + 1);
    let turned = |r: usize, c: usize| at((row + r) % 3, (column + c) % 3);
    let (a, b, c) = (turned(0, 0), turned(0, 1), turned(0, 2));
    let (d, e, g) = (turned(1, 0), turned(1, 1), turned(2, 0));
    let value = wigner_6j(a, b, c, e, d, g);
    if !value.is_finite() {
        return None;
    }
    let phase: i64 = [b, c, d, g].into_iter().map(i64::from).sum();
    let value = value / ((f64::from(c) + 1.0) * (f64::from(g) + 1.0)).sqrt();
    Some(if (phase / 2) & 1 == 1 { -value } else { value })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_zero_argument_gives_a_6j_symbol() {
        let base = [3, 4, 5, 6, 5, 5, 7, 7, 0];
        for turn in 0..3 {
            for shift in 0..3 {
                let mut rows = [[0; 3]; 3];
                for (row, values) in rows.iter_mut().zip(base.chunks(3)) {
                    row.copy_from_slice(values);
                    row.rotate_right(shift);
                }
                rows.rotate_right(turn);
                let mut two_j = [0; 9];
                two_j
                    .iter_mut()
                    .zip(rows.into_iter().flatten())
                    .for_each(|(to, from)| *to = from);
                let value = try_wigner_9j(two_j).expect("small");
                let closed = with_a_zero(two_j).expect("has a zero");
                assert!(
                    value.abs() > 1e-3 && (value - closed).abs() < 1e-15,
                    "{two_j:?} {value} {closed}"
                );
            }
        }
    }

    #[test]
    fn both_routes_agree_with_the_defining_sum() {
        let two_j = [8, 6, 6, 7, 5, 4, 3, 5, 6];
        let [a, b, c, d, e, f, g, h, i] = two_j;
        let sum: f64 = (0..30)
            .map(|k| {
                let sign = if k & 1 == 1 { -1.0 } else { 1.0 };
                sign * f64::from(k + 1)
                    * wigner_6j(a, b, c, f, i, k)
                    * wigner_6j(d, e, f, b, k, h)
                    * wigner_6j(g, h, i, k, a, d)
            })
            .sum();
        let value = wigner_9j(a, b, c, d, e, f, g, h, i);
        assert!(value != 0.0 && (value - sum).abs() < 1e-15, "{value} {sum}");
    }

    #[test]
    fn beyond_the_capacity_it_is_said() {
        let large = i32::MAX - 1;
        // Nine equal ones whose sum is odd vanish by symmetry, however large.
        assert_eq!(try_wigner_9j([large; 9]), Ok(0.0));
        assert_eq!(try_wigner_9j([i32::MAX; 9]), Ok(0.0));
        let problem = try_wigner_9j([large - 2; 9]).expect_err("too large");
        assert_eq!(problem.code, "angular-momentum-too-large");
        assert_eq!(
            wigner_9j(large, large, 0, large, large, 0, 0, 0, 0),
            1.0 / (f64::from(large) + 1.0)
        );
    }
}
