//! Slater integrals of hydrogenic orbitals, by an exact sum.

use super::Hydrogenic;
use super::multipole::{norm, raise, rise, whole_power};
use crate::configuration::Orbital;
use crate::numerics::natural::{Natural, Scaled};
use crate::problem::Problem;

/// R^k(ab,cd) = ∫∫ P_a(r₁) P_b(r₂) r_<^k / r_>^(k+1) P_c(r₁) P_d(r₂) dr₁ dr₂ of four orbitals of one
/// charge Z, hartree; F^k(a,b) = R^k(ab,ab), G^k(a,b) = R^k(ab,ba).
///
/// In y = r/N, N = n_a n_b n_c n_d, every exponent and coefficient is a whole number, and with
/// J(p,q) = ∫₀^∞ y₁ᵖ e^(−By₁) ∫₀^{y₁} y₂^q e^(−Gy₂), p J(p−1,q)/B + (p+q)!/[B (B+G)^(p+q+1)], the
/// integral is a sum of whole numbers for r₁ > r₂ and another one for r₁ < r₂, each added exactly
/// and rounded once. Relative error below 2e-15 of the larger part. Time grows like n⁴: 0.03 ms at
/// n = 4, 0.1 s at n = 50 for four equal orbitals.
///
/// Source: definition; Bethe & Salpeter, *Quantum Mechanics of One- and Two-Electron Atoms* (1957),
/// eq. 3.16.
///
/// # Errors
/// `radial-power-out-of-range` unless k ≤ ℓ_a + ℓ_c and k ≤ ℓ_b + ℓ_d, beyond which no angular
/// factor is left; `nuclear-charge-out-of-range`.
pub fn slater(k: u32, [a, b, c, d]: [Orbital; 4], z: f64) -> Result<f64, Problem> {
    let pair = |x: Orbital, y: Orbital| Ok([Hydrogenic::new(x, z)?, Hydrogenic::new(y, z)?]);
    let (first, second): ([Hydrogenic; 2], [Hydrogenic; 2]) = (pair(a, c)?, pair(b, d)?);
    let most = angular(&first).min(angular(&second));
    let rank = i32::try_from(k).unwrap_or(i32::MAX);
    if rank > most {
        return Err(rank_out_of_range(k, most));
    }
    let [na, nc] = first.map(|each| each.n);
    let [nb, nd] = second.map(|each| each.n);
    let product = na * nb * nc * nd;
    let (own, other) = (Pair::new(&first, product), Pair::new(&second, product));
    let scale = whole_power(product, 3)
        .over(norm(&first))
        .over(norm(&second));
    let sum = own.outside(&other, rank, scale) + other.outside(&own, rank, scale);
    Ok(16.0 * z * sum)
}

/// ℓ + ℓ′.
fn angular(pair: &[Hydrogenic; 2]) -> i32 {
    let [x, y] = pair;
    x.l + y.l
}

/// P_a P_c without its normalisation, in y: y^(ℓ+ℓ′+2) e^(−rate·y) Σ_s (−1)^s coefficients_s y^s.
struct Pair {
    /// ℓ + ℓ′.
    l: i32,
    rate: u32,
    coefficients: Vec<Natural>,
}

impl Pair {
    fn new(pair: &[Hydrogenic; 2], product: i32) -> Self {
        let [x, y] = pair;
        let rates = pair.map(|each| product / each.n);
        let [first, second] = [polynomial(x, product), polynomial(y, product)];
        let mut coefficients = vec![Natural::default(); first.len() + second.len() - 1];
        for (shift, left) in first.iter().enumerate() {
            for (sum, right) in coefficients.iter_mut().skip(shift).zip(&second) {
                sum.add(&left.product(right));
            }
        }
        Pair {
            l: x.l + y.l,
            rate: rates.iter().map(|rate| rate.unsigned_abs()).sum(),
            coefficients,
        }
    }

    fn degree(&self) -> i32 {
        i32::try_from(self.coefficients.len()).unwrap_or(1) - 1
    }

    /// The part of the integral where this pair's radius is the larger one, times `scale`.
    fn outside(&self, inner: &Pair, rank: i32, scale: Scaled) -> f64 {
        // y₁ᵖ of this pair with s = 0, y₂^q of the other with t = 0.
        let (low_p, low_q) = (self.l + 1 - rank, inner.l + 2 + rank);
        let (high_p, high_q) = (low_p + self.degree(), low_q + inner.degree());
        let rates = self.rate + inner.rate;
        let mut sums = [Natural::default(), Natural::default()];
        for (t, weight) in inner.coefficients.iter().enumerate() {
            let q = low_q + i32::try_from(t).unwrap_or(0);
            // J(p,q) B^(P+1) T^(P+Q+1), P and Q being the highest powers and T = B + G: the term
            // (p+q)! B^P T^(P+Q−p−q) at p = 0, which each step turns into the next.
            let mut term = Natural::from_u64(1);
            rise(&mut term, 2, q);
            raise(&mut term, whole(self.rate), high_p);
            raise(&mut term, whole(rates), high_p + high_q - q);
            let mut nested = term.clone();
            let mut row = [Natural::default(), Natural::default()];
            let mut coefficients = self.coefficients.iter().enumerate();
            for p in 0..=high_p {
                if p > 0 {
                    nested.multiply_small(p.unsigned_abs());
                    nested.divide_small(self.rate);
                    term.multiply_small((p + q).unsigned_abs());
                    term.divide_small(rates);
                    nested.add(&term);
                }
                if p >= low_p
                    && let Some((s, coefficient)) = coefficients.next()
                {
                    let [even, odd] = &mut row;
                    if s % 2 == 0 { even } else { odd }.add(&coefficient.product(&nested));
                }
            }
            let [even, odd] = &row;
            let (negative, total) = even.difference(odd);
            let [even, odd] = &mut sums;
            if negative == (t % 2 == 1) { even } else { odd }.add(&total.product(weight));
        }
        let [even, odd] = &sums;
        let (negative, total) = even.difference(odd);
        let down = whole_power(whole(self.rate), high_p + 1);
        let magnitude = total
            .scaled()
            .times(scale)
            .over(down)
            .over(whole_power(whole(rates), high_p + high_q + 1))
            .value();
        if negative { -magnitude } else { magnitude }
    }
}

/// p!/i! C(n+ℓ, p−i) (2N/n)^(ℓ+i) for i = 0 … p = n−ℓ−1: the polynomial of P/r in y, without its
/// alternating signs.
fn polynomial(orbital: &Hydrogenic, product: i32) -> Vec<Natural> {
    let (degree, l) = (orbital.degree(), orbital.l);
    let width = (2 * product / orbital.n).unsigned_abs();
    let mut coefficient = Natural::from_u64(1);
    raise(&mut coefficient, whole(width), l);
    rise(&mut coefficient, 2 * l + 2, orbital.n + l);
    let mut all = Vec::new();
    for i in 0..=degree {
        all.push(coefficient.clone());
        coefficient.multiply_small((degree - i).unsigned_abs());
        coefficient.multiply_small(width);
        coefficient.divide_small((2 * l + 2 + i).unsigned_abs());
        coefficient.divide_small((i + 1).unsigned_abs());
    }
    all
}

fn whole(value: u32) -> i32 {
    i32::try_from(value).unwrap_or(i32::MAX)
}

#[inline(never)]
fn rank_out_of_range(k: u32, most: i32) -> Problem {
    Problem::new(
        "radial-power-out-of-range",
        format!("A Slater integral of rank {k} does not occur between these orbitals."),
        0,
        0,
    )
    .bound(format!("The rank is at most {most} here."))
}
