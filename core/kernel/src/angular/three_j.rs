//! Wigner 3j symbols.

use super::racah_sum::{step, width};
use super::triad::{CAPACITY, Triad, beyond, choose, index, signed_root};
use crate::numerics::binomial::{Triangle, triangle};
use crate::numerics::natural::Natural;
use crate::problem::Problem;

/// The 3j symbol (j₁ j₂ j₃; m₁ m₂ m₃) of doubled angular momenta and projections.
///
/// With the excesses x = j₁+j₂−j₃, y = j₁−j₂+j₃, z = −j₁+j₂+j₃ and J = j₁+j₂+j₃:
/// (j₁ j₂ j₃; m₁ m₂ m₃) = (−1)^(j₁−j₂−m₃) S ·
/// √{ C(2j₁,x) C(2j₃,y) / [(J+1) C(J,y) C(2j₁,j₁+m₁) C(2j₂,j₂+m₂) C(2j₃,j₃+m₃)] },
/// S = Σ_k (−1)^k C(x,k) C(y,j₁−m₁−k) C(z,j₂+m₂−k): Racah's formula with its factorials gathered
/// into integers, so that nothing is rounded before the root. Relative error below 1.5·10⁻¹⁵.
///
/// Zero where a selection rule says so: triangle, m₁+m₂+m₃ = 0, |m| ≤ j, j and m both whole or
/// both half, and J even when all m are zero. Above j = 2000 ([`CAPACITY`]) it is not computed: the
/// value is then closed where one j is zero, otherwise `f64::INFINITY`, which no symbol has (all
/// lie in −1…1); [`try_wigner_3j`] says it as a fault. Never NaN.
///
/// Source: Racah, Phys. Rev. 62, 438 (1942); Edmonds, *Angular Momentum in Quantum Mechanics*
/// (1957), eqs. 3.6.11 and 3.7.3.
#[must_use]
pub fn wigner_3j(
    two_j1: i32,
    two_j2: i32,
    two_j3: i32,
    two_m1: i32,
    two_m2: i32,
    two_m3: i32,
) -> f64 {
    try_wigner_3j(two_j1, two_j2, two_j3, two_m1, two_m2, two_m3).unwrap_or(f64::INFINITY)
}

/// [`wigner_3j`] with the fault `angular-momentum-too-large` where it is not computed.
///
/// # Errors
/// A j above 2000 while the selection rules allow the symbol and no j is zero.
pub fn try_wigner_3j(
    two_j1: i32,
    two_j2: i32,
    two_j3: i32,
    two_m1: i32,
    two_m2: i32,
    two_m3: i32,
) -> Result<f64, Problem> {
    let Some(case) = Case::of([two_j1, two_j2, two_j3], [two_m1, two_m2, two_m3]) else {
        return Ok(0.0);
    };
    let triangle = triangle();
    if case.triad.is_small()
        && let Some(sum) = case.small_sum(triangle)
    {
        return Ok(case.signed(sum as f64 * case.small_square(triangle).sqrt()));
    }
    let largest = two_j1.max(two_j2).max(two_j3);
    if largest > CAPACITY {
        return case
            .with_a_zero()
            .ok_or_else(|| beyond("3j", largest, CAPACITY));
    }
    let (negative, magnitude) = case.wide_sum();
    let (numerator, denominator) = case.wide_square();
    let square = numerator.scaled().over(denominator.scaled());
    Ok(case.signed(signed_root(negative, &magnitude, square)))
}

/// Arguments that no selection rule forbids.
struct Case {
    triad: Triad,
    /// 2jᵢ.
    tops: [i64; 3],
    /// jᵢ + mᵢ.
    raised: [i64; 3],
    /// j₁ − m₁.
    lowered: i64,
    negative: bool,
}

impl Case {
    fn of(two_j: [i32; 3], two_m: [i32; 3]) -> Option<Case> {
        let [j1, j2, j3] = two_j;
        let triad = Triad::of(j1, j2, j3)?;
        let [j1, j2, j3] = two_j.map(i64::from);
        let [m1, m2, m3] = two_m.map(i64::from);
        let fits = |j: i64, m: i64| m.abs() <= j && (j - m) & 1 == 0;
        if m1 + m2 + m3 != 0 || !fits(j1, m1) || !fits(j2, m2) || !fits(j3, m3) {
            return None;
        }
        // Changing the sign of all projections multiplies by (−1)^J.
        if m1 == 0 && m2 == 0 && triad.sum & 1 == 1 {
            return None;
        }
        Some(Case {
            triad,
            tops: [j1, j2, j3],
            raised: [(j1 + m1) / 2, (j2 + m2) / 2, (j3 + m3) / 2],
            lowered: (j1 - m1) / 2,
            negative: ((j1 - j2 - m3) / 2) & 1 == 1,
        })
    }

    fn signed(&self, value: f64) -> f64 {
        if self.negative { -value } else { value }
    }

    /// The first and the last k of the sum.
    fn range(&self) -> (i64, i64) {
        let Triad { x, y, z, .. } = self.triad;
        let [_, raised, _] = self.raised;
        (
            0.max(self.lowered - y).max(raised - z),
            x.min(self.lowered).min(raised),
        )
    }

    /// S in 128 bits; nothing where it is not certain beforehand that every step fits.
    fn small_sum(&self, triangle: &Triangle) -> Option<i128> {
        let (first, last) = self.range();
        let Triad { x, y, z, .. } = self.triad;
        let (x, y, z) = (index(x), index(y), index(z));
        let [_, raised, _] = self.raised.map(index);
        let (lowered, first, last) = (index(self.lowered), index(first), index(last));
        let middle = |top: usize| width(triangle.choose(top, top / 2));
        let terms = last.checked_sub(first)?.checked_add(1)?;
        let bits = middle(x) + middle(y) + middle(z) + width(terms as u64);
        if bits > 127 || middle(x) + middle(y) > 64 {
            return None;
        }
        // C(n, k) = C(n, n−k) lets the falling places of y and z rise with k.
        let along_y = triangle.along_row(y, (y + first).checked_sub(lowered)?);
        let along_z = triangle.along_row(z, (z + first).checked_sub(raised)?);
        let entries = triangle
            .along_row(x, first)
            .zip(along_y.zip(along_z))
            .take(terms);
        if bits <= 63 {
            let mut sum = 0_i64;
            for (&c1, (&c2, &c3)) in entries {
                // t₀ − (t₁ − (t₂ − …)) from the other end: change the sign, then add.
                sum = (c1 * c2 * c3) as i64 - sum;
            }
            return Some(i128::from(if last & 1 == 1 { -sum } else { sum }));
        }
        let mut sum = 0_i128;
        for (&c1, (&c2, &c3)) in entries {
            sum = (u128::from(c1 * c2) * u128::from(c3)) as i128 - sum;
        }
        Some(if last & 1 == 1 { -sum } else { sum })
    }

    /// The square of the prefactor, at most twelve roundings.
    fn small_square(&self, triangle: &Triangle) -> f64 {
        let choose = |n: i64, k: i64| triangle.choose(index(n), index(k)) as f64;
        let Triad { sum, x, y, .. } = self.triad;
        let [top1, top2, top3] = self.tops;
        let [raised1, raised2, raised3] = self.raised;
        let states = choose(top1, raised1) * choose(top2, raised2) * choose(top3, raised3);
        choose(top1, x) * choose(top3, y) / ((sum + 1) as f64 * choose(sum, y) * states)
    }

    /// S of any size: whether it is negative, and |S|.
    fn wide_sum(&self) -> (bool, Natural) {
        let (first, last) = self.range();
        let Triad { x, y, z, .. } = self.triad;
        let [_, raised, _] = self.raised;
        let mut term = choose(x, first)
            .product(&choose(y, self.lowered - first))
            .product(&choose(z, raised - first));
        let mut sums = [Natural::default(), Natural::default()];
        for k in first..=last {
            if let Some(sum) = sums.get_mut(index(k & 1)) {
                sum.add(&term);
            }
            // C(n, k+1) = C(n, k) · (n−k)/(k+1);  C(n, k−1) = C(n, k) · k/(n−k+1).
            step(&mut term, x - k, k + 1);
            step(&mut term, self.lowered - k, y - (self.lowered - k) + 1);
            step(&mut term, raised - k, z - (raised - k) + 1);
        }
        let [even, odd] = sums;
        even.difference(&odd)
    }

    /// Numerator and denominator of the square of the prefactor.
    fn wide_square(&self) -> (Natural, Natural) {
        let Triad { sum, x, y, .. } = self.triad;
        let [top1, _, top3] = self.tops;
        let mut denominator = choose(sum, y);
        denominator.multiply_small(u32::try_from(sum + 1).unwrap_or(u32::MAX));
        for (&top, &raised) in self.tops.iter().zip(&self.raised) {
            denominator = denominator.product(&choose(top, raised));
        }
        (choose(top1, x).product(&choose(top3, y)), denominator)
    }

    /// (j j 0; m −m 0) = (−1)^(j−m) / √(2j+1), Edmonds (1957) eq. 3.7.9, with the zero anywhere.
    fn with_a_zero(&self) -> Option<f64> {
        let [top1, top2, top3] = self.tops;
        let [raised1, raised2, raised3] = self.raised;
        // j − m of the first of the two others; the orders 1 2 0, 2 0 1 and 0 1 2 are even.
        let (top, lowered) = match [top1, top2, top3] {
            [_, _, 0] => (top1, top1 - raised1),
            [0, _, _] => (top2, top2 - raised2),
            [_, 0, _] => (top3, top3 - raised3),
            _ => return None,
        };
        let value = 1.0 / (top as f64 + 1.0).sqrt();
        Some(if lowered & 1 == 1 { -value } else { value })
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn both_routes_agree() {
        for two_j1 in 0..9 {
            for two_j2 in 0..9 {
                for two_j3 in 0..9 {
                    for two_m1 in -two_j1..=two_j1 {
                        for two_m2 in -two_j2..=two_j2 {
                            let m = [two_m1, two_m2, -two_m1 - two_m2];
                            let Some(case) = Case::of([two_j1, two_j2, two_j3], m) else {
                                continue;
                            };
                            let small = case.small_sum(triangle()).expect("fits");
                            let (negative, magnitude) = case.wide_sum();
                            assert_eq!(magnitude, Natural::from_u128(small.unsigned_abs()));
                            assert!(small == 0 || negative == (small < 0));
                            let (numerator, denominator) = case.wide_square();
                            let square = numerator.scaled().over(denominator.scaled()).value();
                            assert!((case.small_square(triangle()) / square - 1.0).abs() < 1e-15);
                        }
                    }
                }
            }
        }
    }

    /// In 64 bits, in 128 bits and in digits, up to where 128 bits no longer suffice.
    #[test]
    fn all_routes_give_the_same_integer() {
        let (mut narrow, mut middle, mut wide) = (0, 0, 0);
        for two_j in 20..64 {
            for two_m1 in (-two_j..=two_j).step_by(2) {
                for two_j3 in [two_j & !1, (2 * two_j - 6).min(66)] {
                    let two_m2 = -two_m1 / 3 * 2 + two_j % 2;
                    let m = [two_m1, two_m2, -two_m1 - two_m2];
                    let Some(case) = Case::of([two_j, two_j, two_j3], m) else {
                        continue;
                    };
                    let (negative, magnitude) = case.wide_sum();
                    match case
                        .triad
                        .is_small()
                        .then(|| case.small_sum(triangle()))
                        .flatten()
                    {
                        Some(small) => {
                            assert_eq!(magnitude, Natural::from_u128(small.unsigned_abs()));
                            assert!(small == 0 || negative == (small < 0));
                            let digits = 128 - small.unsigned_abs().leading_zeros();
                            *(if digits < 60 {
                                &mut narrow
                            } else {
                                &mut middle
                            }) += 1;
                        }
                        None => wide += 1,
                    }
                }
            }
        }
        assert!(narrow > 50 && wide > 50, "{narrow} {middle} {wide}");
    }

    #[test]
    fn a_zero_argument_gives_the_closed_form() {
        for two_j in [1, 2, 7, 40, 121] {
            for two_m in (-two_j..=two_j).step_by(2) {
                for place in 0..3 {
                    let (mut j, mut m) = ([two_j, two_j, 0], [two_m, -two_m, 0]);
                    j.rotate_right(place);
                    m.rotate_right(place);
                    let case = Case::of(j, m).expect("allowed");
                    let closed = case.with_a_zero().expect("has a zero");
                    let value = wigner_3j(j[0], j[1], j[2], m[0], m[1], m[2]);
                    assert!(
                        (value - closed).abs() < 1e-15 * closed.abs(),
                        "{j:?} {m:?} {value} {closed}"
                    );
                }
            }
        }
    }

    #[test]
    fn beyond_the_capacity_it_is_said() {
        let problem =
            try_wigner_3j(i32::MAX, i32::MAX, i32::MAX - 1, 1, -1, 0).expect_err("too large");
        assert_eq!(problem.code, "angular-momentum-too-large");
        assert_eq!(
            wigner_3j(i32::MAX, i32::MAX, 0, 1, -1, 0),
            -1.0 / 2_147_483_648_f64.sqrt()
        );
        assert_eq!(
            wigner_3j(i32::MAX - 1, i32::MAX - 1, i32::MAX - 1, 0, 0, 0),
            0.0
        );
    }
}
