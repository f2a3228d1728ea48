//! Three angular momenta that may couple to zero, and the bound of the exact route.

use crate::numerics::binomial::{LARGEST_ROW, Triangle, binomial};
use crate::numerics::natural::{Natural, Scaled};
use crate::problem::Problem;
use crate::quantity::TwiceJ;

/// The largest doubled angular momentum up to which 3j and 6j symbols are computed: j = 2000.
///
/// The alternating sum then has up to 4001 terms of up to 16 000 binary digits, some hundredths
/// of a second.
pub const CAPACITY: i32 = 4000;

/// Doubled angular momenta that satisfy the triangle rule and add up to a whole number.
///
/// With J = a + b + c, the excesses x = a+b−c, y = a−b+c, z = −a+b+c add up to J.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) struct Triad {
    /// a + b + c.
    pub sum: i64,
    /// a + b − c.
    pub x: i64,
    /// a − b + c.
    pub y: i64,
    /// −a + b + c.
    pub z: i64,
}

impl Triad {
    /// The triad of the doubled a, b, c; nothing when the selection rules forbid it.
    #[inline]
    pub fn of(two_a: i32, two_b: i32, two_c: i32) -> Option<Triad> {
        let (a, b, c) = (i64::from(two_a), i64::from(two_b), i64::from(two_c));
        let sum = a + b + c;
        let (x, y, z) = (a + b - c, a - b + c, b + c - a);
        let allowed = a >= 0 && b >= 0 && c >= 0 && sum & 1 == 0 && x >= 0 && y >= 0 && z >= 0;
        allowed.then_some(Triad {
            sum: sum / 2,
            x: x / 2,
            y: y / 2,
            z: z / 2,
        })
    }

    /// N = (J+1)! / (x! y! z!) = (J+1) · C(J, x) · C(y+z, y), the reciprocal of Δ²(abc).
    pub fn multinomial(&self) -> Natural {
        let mut value = choose(self.sum, self.x).product(&choose(self.y + self.z, self.y));
        value.multiply_small(u32::try_from(self.sum + 1).unwrap_or(u32::MAX));
        value
    }

    /// The same where 64 bits hold each factor: four roundings.
    #[inline]
    pub fn small_multinomial(&self, triangle: &Triangle) -> f64 {
        let (sum, x) = (index(self.sum), index(self.x));
        let (rest, y) = (index(self.y + self.z), index(self.y));
        (self.sum + 1) as f64 * triangle.choose(sum, x) as f64 * triangle.choose(rest, y) as f64
    }

    /// Whether the triangle of 64-bit binomial coefficients suffices for it.
    #[inline]
    pub fn is_small(&self) -> bool {
        self.sum <= LARGEST_ROW as i64
    }
}

/// C(n, k) for the numbers of a triad.
pub(super) fn choose(n: i64, k: i64) -> Natural {
    match (u32::try_from(n), u32::try_from(k)) {
        (Ok(n), Ok(k)) => binomial(n, k),
        _ => Natural::default(),
    }
}

/// A place in the triangle; what is negative lies outside it.
#[inline]
pub(super) fn index(value: i64) -> usize {
    usize::try_from(value).unwrap_or(LARGEST_ROW + 1)
}

/// ±magnitude · √square.
pub(super) fn signed_root(negative: bool, magnitude: &Natural, square: Scaled) -> f64 {
    let value = magnitude.scaled().times(square.root()).value();
    if negative { -value } else { value }
}

/// The fault of arguments beyond the capacity, both doubled.
pub(super) fn beyond(symbol: &str, largest: i32, capacity: i32) -> Problem {
    let (largest, capacity) = (
        TwiceJ::from_doubled(largest),
        TwiceJ::from_doubled(capacity),
    );
    Problem::new(
        "angular-momentum-too-large",
        format!("The {symbol} symbol with j = {largest} is beyond what is computed exactly."),
        0,
        0,
    )
    .bound(format!(
        "{symbol} symbols are computed up to j = {capacity}"
    ))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::numerics::binomial::triangle;

    #[test]
    fn the_triangle_rule_holds_for_any_integers() {
        assert!(Triad::of(1, 1, 2).is_some());
        assert!(Triad::of(1, 1, 1).is_none());
        assert!(Triad::of(2, 2, 6).is_none());
        assert!(Triad::of(-2, 2, 0).is_none());
        assert!(Triad::of(i32::MIN, i32::MIN, i32::MIN).is_none());
        assert!(Triad::of(i32::MAX, i32::MAX, 0).is_some());
    }

    #[test]
    fn both_multinomials_agree() {
        // J = 10, excesses 2, 3, 5: 11!/(2! 3! 5!) = 27720.
        let triad = Triad::of(5, 7, 8).expect("a triangle");
        assert_eq!((triad.sum, triad.x, triad.y, triad.z), (10, 2, 3, 5));
        assert_eq!(triad.small_multinomial(triangle()), 27720.0);
        assert_eq!(triad.multinomial(), Natural::from_u64(27720));
    }
}
