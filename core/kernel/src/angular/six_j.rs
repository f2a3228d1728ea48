//! Wigner 6j symbols.

use super::narrow_six_j::narrow_six_j;
use super::racah_sum::{Tetrahedron, nearest};
use super::triad::{CAPACITY, beyond, signed_root};
use crate::numerics::binomial::triangle;
use crate::problem::Problem;

/// The 6j symbol {a b c; d e f} of doubled angular momenta.
///
/// {a b c; d e f} = S₀ · √[N(abc) / (N(aef) N(dbf) N(dec))], N = 1/Δ², S₀ and N integers: nothing
/// is rounded before the root. The root and its quotient round at most fifteen times by 2⁻⁵³
/// before their halving, so the relative error stays below 1.5·10⁻¹⁵.
///
/// Zero where a triad breaks the triangle rule, adds up to a half-integer or holds a negative
/// number. Above j = 2000 ([`CAPACITY`]) the symbol is not computed: the value is then closed
/// where one argument is zero, otherwise `f64::INFINITY`, which no symbol has (all lie in −1…1);
/// [`try_wigner_6j`] says it as a fault. Never NaN.
///
/// Source: Racah, Phys. Rev. 62, 438 (1942); Edmonds, *Angular Momentum in Quantum Mechanics*
/// (1957), §6.3.
#[must_use]
pub fn wigner_6j(two_a: i32, two_b: i32, two_c: i32, two_d: i32, two_e: i32, two_f: i32) -> f64 {
    let two_j = [two_a, two_b, two_c, two_d, two_e, two_f];
    // A result with a fault in it travels through memory: not for what is asked millions of times.
    narrow_six_j(two_j, triangle()).unwrap_or_else(|| general(two_j).unwrap_or(f64::INFINITY))
}

/// [`wigner_6j`] with the fault `angular-momentum-too-large` where it is not computed.
///
/// # Errors
/// An argument above j = 2000 while the selection rules allow the symbol and no argument is zero.
pub fn try_wigner_6j(
    two_a: i32,
    two_b: i32,
    two_c: i32,
    two_d: i32,
    two_e: i32,
    two_f: i32,
) -> Result<f64, Problem> {
    let two_j = [two_a, two_b, two_c, two_d, two_e, two_f];
    narrow_six_j(two_j, triangle()).map_or_else(|| general(two_j), Ok)
}

/// Any arguments, in as many digits as it takes.
#[inline(never)]
fn general(two_j: [i32; 6]) -> Result<f64, Problem> {
    let Some(tetrahedron) = Tetrahedron::of(two_j) else {
        return Ok(0.0);
    };
    let tetrahedron = tetrahedron.ordered();
    let [base, one, two, three] = tetrahedron.triads;
    let sum = tetrahedron.sum();
    if base.is_small() {
        let triangle = triangle();
        if let Some(sum) = sum.small(triangle) {
            let others = one.small_multinomial(triangle)
                * two.small_multinomial(triangle)
                * three.small_multinomial(triangle);
            return Ok(nearest(sum) * (base.small_multinomial(triangle) / others).sqrt());
        }
    }
    let largest = two_j.into_iter().max().unwrap_or(0);
    if largest > CAPACITY {
        return with_a_zero(two_j).ok_or_else(|| beyond("6j", largest, CAPACITY));
    }
    let (negative, magnitude) = sum.wide();
    let [base, one, two, three] = [base, one, two, three].map(|triad| triad.multinomial().scaled());
    Ok(signed_root(
        negative,
        &magnitude,
        base.over(one.times(two).times(three)),
    ))
}

/// {a b c; 0 c b} = (−1)^(a+b+c) / √[(2b+1)(2c+1)], Edmonds (1957) eq. 6.3.2, with the zero
/// anywhere; for arguments that satisfy the selection rules.
fn with_a_zero(two_j: [i32; 6]) -> Option<f64> {
    let [a, b, c, d, e, f] = two_j;
    // The other angular momentum of the zero's column, and the two of a column beside it.
    let (opposite, left, right) = match two_j.into_iter().position(|two| two == 0)? {
        0 => (d, b, e),
        1 => (e, a, d),
        2 => (f, a, d),
        3 => (a, b, e),
        4 => (b, a, d),
        _ => (c, a, d),
    };
    let sum = i64::from(opposite) + i64::from(left) + i64::from(right);
    let value = 1.0 / ((f64::from(left) + 1.0) * (f64::from(right) + 1.0)).sqrt();
    Some(if (sum / 2) & 1 == 1 { -value } else { value })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_zero_argument_gives_the_closed_form() {
        for place in 0..3 {
            for (left, right) in [(3, 4), (20, 21), (7, 7), (90, 101)] {
                let opposite = left + right - 2;
                let mut columns = [(opposite, 0), (left, right), (right, left)];
                columns.rotate_right(place);
                let [(a, d), (b, e), (c, f)] = columns;
                // Exchanges of upper and lower in two columns change nothing.
                for two_j in [
                    [a, b, c, d, e, f],
                    [d, e, c, a, b, f],
                    [a, e, f, d, b, c],
                    [d, b, f, a, e, c],
                ] {
                    let [a, b, c, d, e, f] = two_j;
                    let (value, closed) = (wigner_6j(a, b, c, d, e, f), with_a_zero(two_j));
                    let closed = closed.expect("has a zero");
                    assert!(
                        (value - closed).abs() <= 1e-15 * closed.abs(),
                        "{two_j:?} {value} {closed}"
                    );
                }
            }
        }
    }

    #[test]
    fn beyond_the_capacity_it_is_said() {
        let large = i32::MAX - 1;
        let problem =
            try_wigner_6j(large, large, large, large, large, large).expect_err("too large");
        assert_eq!(problem.code, "angular-momentum-too-large");
        assert_eq!(
            wigner_6j(large, large, large, large, large, large),
            f64::INFINITY
        );
        // (−1)^(a+a+1) = −1 for the partner 2j = 2 of the zero.
        assert_eq!(
            wigner_6j(large, large, 0, large, large, 2),
            -1.0 / (f64::from(large) + 1.0)
        );
        assert_eq!(wigner_6j(i32::MAX, i32::MAX, i32::MAX, 0, 0, 0), 0.0);
    }
}
