//! 6j symbols whose sum fits 64 bits, the common case, with as few steps as it takes.

use crate::numerics::binomial::{LARGEST_ROW, Triangle};

/// Doubled angular momenta above this take the general route.
const LARGEST: u32 = 63;

/// |S₀|² stays below 2¹²⁴, so S₀ lies within ±2⁶² and is what 64 wrapping bits say it is.
const BOUND: f64 = (1_u128 << 124) as f64;

/// {a b c; d e f} by the formula of [`super::racah_sum`]; nothing where this route is not certain
/// beforehand to be exact.
///
/// The twelve excesses of the four triads are the differences qⱼ − sᵢ, so the triangle rules say that
/// the largest s is at most the smallest q. And since no 6j symbol exceeds 1, S₀² is at most
/// N(aef) N(dbf) N(dec) / N(abc): where that fits, so does S₀, and then the terms may be added up
/// modulo 2⁶⁴, however large they are themselves.
#[inline]
pub(super) fn narrow_six_j(two_j: [i32; 6], triangle: &Triangle) -> Option<f64> {
    let [a, b, c, d, e, f] = two_j;
    // A negative number is a large unsigned one.
    if (a | b | c | d | e | f).cast_unsigned() > LARGEST {
        return None;
    }
    let (s0, s1, s2, s3) = (a + b + c, a + e + f, d + b + f, d + e + c);
    if (s0 | s1 | s2 | s3) & 1 == 1 {
        return Some(0.0);
    }
    let (s0, s1, s2, s3) = (s0 / 2, s1 / 2, s2 / 2, s3 / 2);
    let (q1, q2, q3) = (
        (b + e + c + f) / 2,
        (a + d + c + f) / 2,
        (a + d + b + e) / 2,
    );
    let first = s0.max(s1).max(s2).max(s3);
    let last = q1.min(q2).min(q3);
    if last < first {
        return Some(0.0);
    }
    if last >= LARGEST_ROW as i32 {
        return None;
    }
    // Exchanging upper and lower in two columns leaves the symbol and the q as they are; with the
    // largest sum in the first place S₀ is smallest, and its own binomial coefficients begin at 1.
    let (s1, s2, s3) = if s0 == first {
        (s1, s2, s3)
    } else if s1 == first {
        (s0, s3, s2)
    } else if s2 == first {
        (s3, s0, s1)
    } else {
        (s2, s1, s0)
    };
    // N = (J+1) C(J, x) C(J−x, y) of a triad with the sum J.
    let multinomial = |sum: i32, x: i32, y: i32| {
        f64::from(sum + 1) * triangle.nearest(sum, x) * triangle.nearest(sum - x, y)
    };
    let base = multinomial(first, q3 - s3, q2 - s2);
    let others = multinomial(s1, q3 - s2, q2 - s3)
        * multinomial(s2, q3 - s1, q2 - first)
        * multinomial(s3, q3 - first, q2 - s1);
    if others >= base * BOUND {
        return None;
    }
    let terms = last - first + 1;
    let c0 = triangle.rising(first + 1, 0, terms);
    let c1 = triangle.row(q1 - s1, first - s1, terms);
    let c2 = triangle.row(q2 - s2, first - s2, terms);
    let c3 = triangle.row(q3 - s3, first - s3, terms);
    let mut sum = 0_u64;
    let mut rows = c1.iter().zip(c2).zip(c3);
    for c0 in c0 {
        // Leaving from within keeps the compiler from multiplying in pairs, which a browser's 64 bits
        // pay with twice the time.
        let ((c1, c2), c3) = rows.next()?;
        // S = t₀ − (t₁ − (t₂ − …)) read from the other end: change the sign, then add.
        let term = c0.wrapping_mul(*c1).wrapping_mul(c2.wrapping_mul(*c3));
        sum = term.wrapping_sub(sum);
    }
    let sum = sum.cast_signed();
    let sum = if last & 1 == 1 { -sum } else { sum };
    Some(sum as f64 * (base / others).sqrt())
}

#[cfg(test)]
mod tests {
    use super::super::racah_sum::Tetrahedron;
    use super::*;
    use crate::numerics::binomial::triangle;

    /// Every symbol up to j = 4, and others up to where 64 bits no longer suffice, against the sum in
    /// digits of any number.
    #[test]
    fn it_is_what_the_sum_in_digits_gives() {
        let by_digits = |two_j: [i32; 6]| {
            let Some(tetrahedron) = Tetrahedron::of(two_j) else {
                return 0.0;
            };
            let (negative, magnitude) = tetrahedron.sum().wide();
            let [base, one, two, three] =
                tetrahedron.triads.map(|triad| triad.multinomial().scaled());
            super::super::triad::signed_root(
                negative,
                &magnitude,
                base.over(one.times(two).times(three)),
            )
        };
        let check = |two_j: [i32; 6]| {
            let found = narrow_six_j(two_j, triangle());
            if let Some(value) = found {
                let expected = by_digits(two_j);
                assert!(
                    (value - expected).abs() <= 2e-15 * expected.abs(),
                    "{two_j:?} {value} {expected}"
                );
            }
            found
        };
        for a in 0..9 {
            for b in 0..9 {
                for c in 0..9 {
                    for d in 0..9 {
                        for e in 0..9 {
                            for f in 0..9 {
                                assert!(check([a, b, c, d, e, f]).is_some());
                            }
                        }
                    }
                }
            }
        }
        let mut state = 17_u64;
        let mut draw = |largest: u64| {
            state = state
                .wrapping_mul(6_364_136_223_846_793_005)
                .wrapping_add(1_442_695_040_888_963_407);
            i32::try_from((state >> 33) % (largest + 1)).expect("small")
        };
        let (mut found, mut left) = (0, 0);
        while found < 3000 || left < 300 {
            let two_j = [0; 6].map(|_| draw(44));
            if Tetrahedron::of(two_j).is_some_and(|of| of.sum().wide().1 != Default::default()) {
                match check(two_j) {
                    Some(_) => found += 1,
                    None => left += 1,
                }
            }
        }
    }

    #[test]
    fn what_is_not_small_is_left_to_the_general_route() {
        for two_j in [
            [-2, 0, 2, 0, 2, 2],
            [64, 64, 0, 0, 0, 64],
            [i32::MIN; 6],
            [i32::MAX; 6],
        ] {
            assert_eq!(narrow_six_j(two_j, triangle()), None);
        }
    }
}
