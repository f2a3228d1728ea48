//! Natural numbers of any size, for sums that must not round before their last step.

use std::cmp::Ordering;

/// A natural number of any size: digits to base 2³², the least first, no leading zeros.
///
/// Digits of 32 bits, because their products fit the 64-bit arithmetic that a browser has as well.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct Natural {
    digits: Vec<u32>,
}

/// m · 2^e with 1 ≤ |m| < 2, or zero: a number whose exponent cannot overflow.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Scaled {
    mantissa: f64,
    exponent: i64,
}

impl Natural {
    /// From a machine number.
    pub fn from_u64(value: u64) -> Self {
        Self::from_u128(u128::from(value))
    }

    /// From a wide machine number.
    pub fn from_u128(mut value: u128) -> Self {
        let mut digits = Vec::with_capacity(4);
        while value != 0 {
            digits.push((value & 0xffff_ffff) as u32);
            value >>= 32;
        }
        Natural { digits }
    }

    /// Whether it is zero.
    pub fn is_zero(&self) -> bool {
        self.digits.is_empty()
    }

    /// self × factor.
    pub fn multiply_small(&mut self, factor: u32) {
        let mut carry = 0_u64;
        for digit in &mut self.digits {
            let product = u64::from(*digit) * u64::from(factor) + carry;
            *digit = product as u32;
            carry = product >> 32;
        }
        if carry != 0 {
            self.digits.push(carry as u32);
        }
        self.trim();
    }

    /// The whole part of self / divisor; nothing changes for a divisor of zero.
    pub fn divide_small(&mut self, divisor: u32) {
        if divisor <= 1 {
            return;
        }
        let divisor = u64::from(divisor);
        let mut rest = 0_u64;
        for digit in self.digits.iter_mut().rev() {
            let value = (rest << 32) | u64::from(*digit);
            *digit = (value / divisor) as u32;
            rest = value % divisor;
        }
        self.trim();
    }

    /// self + other.
    pub fn add(&mut self, other: &Natural) {
        if self.digits.len() < other.digits.len() {
            self.digits.resize(other.digits.len(), 0);
        }
        let mut carry = 0_u64;
        let others = other.digits.iter().copied().chain(std::iter::repeat(0));
        for (digit, more) in self.digits.iter_mut().zip(others) {
            let sum = u64::from(*digit) + u64::from(more) + carry;
            *digit = sum as u32;
            carry = sum >> 32;
        }
        if carry != 0 {
            self.digits.push(carry as u32);
        }
    }

    /// |self − other| and whether the difference is negative.
    pub fn difference(&self, other: &Natural) -> (bool, Natural) {
        let negative = self.compare(other) == Ordering::Less;
        let (large, small) = if negative {
            (other, self)
        } else {
            (self, other)
        };
        let mut digits = Vec::with_capacity(large.digits.len());
        let mut borrow = 0_i64;
        let smaller = small.digits.iter().copied().chain(std::iter::repeat(0));
        for (&digit, less) in large.digits.iter().zip(smaller) {
            let value = i64::from(digit) - i64::from(less) - borrow;
            borrow = i64::from(value < 0);
            digits.push(value as u32);
        }
        let mut difference = Natural { digits };
        difference.trim();
        (negative, difference)
    }

    /// self × other.
    #[must_use]
    pub fn product(&self, other: &Natural) -> Natural {
        let mut digits = vec![0_u32; self.digits.len() + other.digits.len()];
        for (shift, &left) in self.digits.iter().enumerate() {
            let mut carry = 0_u64;
            let rights = other.digits.iter().copied().chain(std::iter::repeat(0));
            for (digit, right) in digits.iter_mut().skip(shift).zip(rights) {
                let value = u64::from(left) * u64::from(right) + u64::from(*digit) + carry;
                *digit = value as u32;
                carry = value >> 32;
            }
        }
        let mut product = Natural { digits };
        product.trim();
        product
    }

    /// Larger, equal or smaller.
    pub fn compare(&self, other: &Natural) -> Ordering {
        self.digits
            .len()
            .cmp(&other.digits.len())
            .then_with(|| self.digits.iter().rev().cmp(other.digits.iter().rev()))
    }

    /// The nearest number of 53 bits: one rounding, to even at a tie.
    pub fn scaled(&self) -> Scaled {
        let mut top = self.digits.iter().rev();
        let first = u64::from(top.next().copied().unwrap_or(0));
        let second = u64::from(top.next().copied().unwrap_or(0));
        let third = u64::from(top.next().copied().unwrap_or(0));
        let lost = top.any(|&digit| digit != 0);
        // 96 leading bits hold at least 65 significant ones; what is below only breaks a tie.
        let lead =
            (u128::from(first) << 64) | u128::from((second << 32) | third) | u128::from(lost);
        let digits = i64::try_from(self.digits.len()).unwrap_or(i64::MAX / 64);
        Scaled::new(lead as f64, (digits - 3) * 32)
    }

    fn trim(&mut self) {
        while self.digits.last() == Some(&0) {
            self.digits.pop();
        }
    }
}

impl Scaled {
    /// value · 2^exponent, brought to its standard form; not finite counts as zero.
    pub fn new(value: f64, exponent: i64) -> Self {
        if value == 0.0 || !value.is_finite() {
            return Scaled {
                mantissa: 0.0,
                exponent: 0,
            };
        }
        let shift = libm::ilogb(value);
        Scaled {
            mantissa: libm::scalbn(value, -shift),
            exponent: exponent + i64::from(shift),
        }
    }

    /// self × other, one rounding.
    #[must_use]
    pub fn times(self, other: Scaled) -> Scaled {
        Scaled::new(
            self.mantissa * other.mantissa,
            self.exponent + other.exponent,
        )
    }

    /// self / other, one rounding; zero when the other is zero.
    #[must_use]
    pub fn over(self, other: Scaled) -> Scaled {
        Scaled::new(
            self.mantissa / other.mantissa,
            self.exponent - other.exponent,
        )
    }

    /// √self, one rounding; zero when negative.
    #[must_use]
    pub fn root(self) -> Scaled {
        if self.mantissa <= 0.0 {
            return Scaled::new(0.0, 0);
        }
        let odd = self.exponent.rem_euclid(2);
        let radicand = if odd == 1 {
            2.0 * self.mantissa
        } else {
            self.mantissa
        };
        Scaled::new(radicand.sqrt(), (self.exponent - odd) / 2)
    }

    /// As a plain number; below 2⁻¹⁰⁷⁴ zero, above 2¹⁰²⁴ infinite.
    pub fn value(self) -> f64 {
        let exponent = self.exponent.clamp(-5000, 5000);
        libm::scalbn(self.mantissa, i32::try_from(exponent).unwrap_or(0))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn factorial(n: u32) -> Natural {
        let mut value = Natural::from_u64(1);
        (2..=n).for_each(|factor| value.multiply_small(factor));
        value
    }

    #[test]
    fn products_and_quotients_undo_each_other() {
        let mut value = factorial(90);
        (31..=90).for_each(|divisor| value.divide_small(divisor));
        assert_eq!(value, factorial(30));
        assert_eq!(
            factorial(30),
            Natural::from_u128(265_252_859_812_191_058_636_308_480_000_000)
        );
    }

    #[test]
    fn sums_and_differences_undo_each_other() {
        let (large, small) = (factorial(60), factorial(59));
        let mut sum = large.clone();
        sum.add(&small);
        // 60! + 59! = 61 · 59!
        let mut expected = small.clone();
        expected.multiply_small(61);
        assert_eq!(sum, expected);
        assert_eq!(sum.difference(&large), (false, small.clone()));
        assert_eq!(large.difference(&sum), (true, small));
        assert!(large.difference(&large).1.is_zero());
    }

    #[test]
    fn a_product_equals_repeated_small_ones() {
        let mut expected = factorial(40);
        (2..=25).for_each(|factor| expected.multiply_small(factor));
        assert_eq!(factorial(40).product(&factorial(25)), expected);
    }

    #[test]
    fn rounding_is_to_the_nearest() {
        // 170! is the largest factorial a 64-bit float holds; printed value from memory of
        // tables of factorials, 7.257415615307999e306.
        assert_eq!(factorial(170).scaled().value(), 7.257415615307999e306);
        for value in [1_u128, 3, (1 << 53) + 1, (1 << 100) + 1, u128::MAX] {
            assert_eq!(Natural::from_u128(value).scaled().value(), value as f64);
        }
        let ratio = factorial(1000).scaled().over(factorial(999).scaled());
        assert!((ratio.value() - 1000.0).abs() < 1e-12);
        let root = factorial(1000).scaled().root();
        let square = root.times(root).over(factorial(1000).scaled());
        assert!((square.value() - 1.0).abs() < 1e-15);
    }
}
