//! The alternating sum of a 6j symbol as an exact integer.
//!
//! Racah (Phys. Rev. 62, 438 (1942), eq. 36'):
//! {a b c; d e f} = Δ(abc) Δ(aef) Δ(dbf) Δ(dec) · Σ_t (−1)^t (t+1)! / Π(t−sᵢ)! Π(qⱼ−t)!
//! with the four sums sᵢ of the triads and the three sums qⱼ of the pairs of columns. Taking
//! 1/Δ²(s₀) = (s₀+1)!/(x! y! z!) out of the sum leaves four binomial coefficients in each term,
//! because the three qⱼ − sᵢ are the excesses x, y, z of the triad taken out:
//! {a b c; d e f} = S₀ · Δ(aef) Δ(dbf) Δ(dec) / Δ(abc),
//! S₀ = Σ_t (−1)^t C(t+1, s₀+1) C(q₁₂−s₃, t−s₃) C(q₁₃−s₂, t−s₂) C(q₂₃−s₁, t−s₁).
//! S₀ is an integer, and 1/Δ² as well.

use super::triad::{Triad, choose, index};
use crate::numerics::binomial::{LARGEST_ROW, Triangle};
use crate::numerics::natural::Natural;

/// The four triads (abc) (aef) (dbf) (dec) of {a b c; d e f} and the sums of its pairs of columns.
#[derive(Clone, Copy, Debug)]
pub(super) struct Tetrahedron {
    pub triads: [Triad; 4],
    /// Columns 2 3, columns 1 3, columns 1 2.
    pub pairs: [i64; 3],
}

/// The sum S₀ for one of the four triads, ready to be added up.
pub(super) struct RacahSum {
    base: i64,
    /// sᵢ and qⱼ − sᵢ of the other three.
    others: [(i64, i64); 3],
    first: i64,
    last: i64,
}

impl Tetrahedron {
    /// Nothing when a selection rule makes the 6j symbol zero.
    #[inline]
    pub fn of(two_j: [i32; 6]) -> Option<Tetrahedron> {
        let [a, b, c, d, e, f] = two_j;
        let triads = [
            Triad::of(a, b, c)?,
            Triad::of(a, e, f)?,
            Triad::of(d, b, f)?,
            Triad::of(d, e, c)?,
        ];
        let column = |upper: i32, lower: i32| i64::from(upper) + i64::from(lower);
        let (first, second, third) = (column(a, d), column(b, e), column(c, f));
        let pairs = [
            (second + third) / 2,
            (first + third) / 2,
            (first + second) / 2,
        ];
        Some(Tetrahedron { triads, pairs })
    }

    /// The sum that takes out Δ of the triad (abc).
    #[inline]
    pub fn sum(&self) -> RacahSum {
        let [base, one, two, three] = self.triads.map(|triad| triad.sum);
        let [q23, q13, q12] = self.pairs;
        RacahSum {
            base,
            others: [(one, q23 - one), (two, q13 - two), (three, q12 - three)],
            first: base.max(one).max(two).max(three),
            last: q23.min(q13).min(q12),
        }
    }

    /// The same symbol with the triad of the largest sum in the first place, where S₀ is smallest.
    #[inline]
    pub fn ordered(&self) -> Tetrahedron {
        let [one, two, three, four] = self.triads;
        let largest = one.sum.max(two.sum).max(three.sum).max(four.sum);
        // Exchanging upper and lower in two columns leaves a 6j symbol and the pairs as they are.
        let triads = if one.sum == largest {
            [one, two, three, four]
        } else if two.sum == largest {
            [two, one, four, three]
        } else if three.sum == largest {
            [three, four, one, two]
        } else {
            [four, three, two, one]
        };
        Tetrahedron {
            triads,
            pairs: self.pairs,
        }
    }
}

impl RacahSum {
    /// S₀ in 128 bits; nothing where it is not certain beforehand that every step fits.
    #[inline]
    pub fn small(&self, triangle: &Triangle) -> Option<i128> {
        if self.last >= LARGEST_ROW as i64 || self.last < self.first {
            return None;
        }
        let terms = index(self.last - self.first + 1);
        let (first, base) = (index(self.first), index(self.base));
        let outer = triangle.choose(index(self.last) + 1, base + 1);
        let mut bits = width(outer) + width(terms as u64);
        let mut widths = [0; 3];
        let mut rows = [(0, 0); 3];
        for ((bound, row), &(sum, top)) in widths.iter_mut().zip(&mut rows).zip(&self.others) {
            let (from, to) = (index(self.first - sum), index(self.last - sum));
            let top = index(top);
            // The largest of a row's entries that occur is the one next to its middle.
            *bound = width(triangle.choose(top, (top / 2).clamp(from, to.max(from))));
            *row = (top, from);
            bits += *bound;
        }
        let [one, two, three] = rows.map(|(top, from)| triangle.along_row(top, from));
        let entries = triangle
            .down_column(first + 1, base + 1)
            .zip(one)
            .zip(two.zip(three))
            .take(terms);
        let negative = self.first & 1 == 1;
        if bits <= 63 {
            let mut sum = 0_i64;
            for ((&c0, &c1), (&c2, &c3)) in entries {
                // S = t₀ − (t₁ − (t₂ − …)) read from the other end: change the sign, then add.
                sum = ((c0 * c1) * (c2 * c3)) as i64 - sum;
            }
            let negative = negative != (terms & 1 == 0);
            return Some(i128::from(if negative { -sum } else { sum }));
        }
        let [_, second, third] = widths;
        if bits > 127 || second + third > 64 {
            return None;
        }
        let mut sum = 0_i128;
        for ((&c0, &c1), (&c2, &c3)) in entries {
            sum = (u128::from(c0) * u128::from(c1) * u128::from(c2 * c3)) as i128 - sum;
        }
        let negative = negative != (terms & 1 == 0);
        Some(if negative { -sum } else { sum })
    }

    /// S₀ of any size: whether it is negative, and |S₀|.
    pub fn wide(&self) -> (bool, Natural) {
        if self.last < self.first {
            return (false, Natural::default());
        }
        let mut term = choose(self.first + 1, self.base + 1);
        for &(sum, top) in &self.others {
            term = term.product(&choose(top, self.first - sum));
        }
        let mut sums = [Natural::default(), Natural::default()];
        for t in self.first..=self.last {
            if let Some(sum) = sums.get_mut(index(t & 1)) {
                sum.add(&term);
            }
            // C(t+2, s₀+1) = C(t+1, s₀+1) · (t+2)/(t+1−s₀);  C(n, k+1) = C(n, k) · (n−k)/(k+1).
            step(&mut term, t + 2, t + 1 - self.base);
            for &(sum, top) in &self.others {
                step(&mut term, top - (t - sum), t - sum + 1);
            }
        }
        let [even, odd] = sums;
        even.difference(&odd)
    }
}

/// term × factor / divisor, where the quotient is a whole number.
#[inline]
pub(super) fn step(term: &mut Natural, factor: i64, divisor: i64) {
    term.multiply_small(u32::try_from(factor).unwrap_or(0));
    term.divide_small(u32::try_from(divisor).unwrap_or(1));
}

/// The nearest number of 53 bits; most sums fit 64 bits, which convert at once.
#[inline]
pub(super) fn nearest(sum: i128) -> f64 {
    i64::try_from(sum).map_or_else(|_| sum as f64, |sum| sum as f64)
}

/// Binary digits.
#[inline]
pub(super) fn width(value: u64) -> u32 {
    64 - value.leading_zeros()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::numerics::binomial::triangle;

    /// In 64 bits, in 128 bits and in digits, near the bounds between them and on both sides.
    #[test]
    fn all_routes_give_the_same_integer() {
        let mut state = 11_u64;
        let mut draw = |largest: u64| {
            state = state
                .wrapping_mul(6_364_136_223_846_793_005)
                .wrapping_add(1_442_695_040_888_963_407);
            i32::try_from((state >> 33) % (largest + 1)).expect("small")
        };
        let (mut narrow, mut middle, mut wide, mut turn) = (0, 0, 0, 0);
        while narrow < 500 || middle < 500 || wide < 500 {
            turn += 1;
            let largest = [16, 30, 44][turn % 3];
            let Some(tetrahedron) = Tetrahedron::of([0; 6].map(|_| draw(largest))) else {
                continue;
            };
            for arrangement in [tetrahedron, tetrahedron.ordered()] {
                let sum = arrangement.sum();
                let (negative, magnitude) = sum.wide();
                let Some(small) = sum.small(triangle()) else {
                    wide += 1;
                    continue;
                };
                assert_eq!(magnitude, Natural::from_u128(small.unsigned_abs()));
                assert!(small == 0 || negative == (small < 0));
                if small.unsigned_abs() < 1 << 60 {
                    narrow += 1;
                } else {
                    middle += 1;
                }
            }
        }
    }
}
