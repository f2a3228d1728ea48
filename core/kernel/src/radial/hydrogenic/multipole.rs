//! Radial integrals between two hydrogenic orbitals, by an exact sum.

use super::{Hydrogenic, power};
use crate::configuration::Orbital;
use crate::numerics::natural::{Natural, Scaled};
use crate::problem::Problem;

/// The highest power k of a radial integral between two orbitals.
pub const HIGHEST_MULTIPOLE: i32 = 100;

/// ∫₀^∞ P_a r^k P_b dr in a₀^k for two orbitals of one charge Z; nothing where it diverges
/// (k ≤ −ℓ_a − ℓ_b − 3).
///
/// With p = n − ℓ − 1 and both Laguerre polynomials written out it is
/// 4 (n n′)^(1+k) (n+n′)^(−n−n′−1−k) Z^(−k) / √{p! p′! (n+ℓ)! (n′+ℓ′)!} ·
/// Σ_ij (−1)^(i+j) c_i c′_j (2n′)^(ℓ+i) (2n)^(ℓ′+j) (n+n′)^(p+p′−i−j) (ℓ+ℓ′+i+j+2+k)!,
/// c_i = p!/i! · C(n+ℓ, p−i): a sum of whole numbers, added exactly and rounded once. Relative
/// error below 2e-15 for Z = 1, whatever the cancellation; Gordon's formula (Ann. Phys. 394, 1031
/// (1929)) is its case k = 1.
///
/// Source: definition; Bethe & Salpeter, *Quantum Mechanics of One- and Two-Electron Atoms* (1957),
/// eq. 3.16.
///
/// # Errors
/// `radial-power-out-of-range` for |k| above 100, `nuclear-charge-out-of-range`.
pub fn multipole(a: Orbital, b: Orbital, k: i32, z: f64) -> Result<Option<f64>, Problem> {
    let (a, b) = (Hydrogenic::new(a, z)?, Hydrogenic::new(b, z)?);
    if k.unsigned_abs() > HIGHEST_MULTIPOLE.unsigned_abs() {
        return Err(rank_out_of_range(k));
    }
    if a.l + b.l + 2 + k < 0 {
        return Ok(None);
    }
    let (negative, sum) = exact_sum(&a, &b, k);
    let (n, m) = (a.n, b.n);
    let mut value = sum.scaled();
    for factor in [n, m] {
        value = value.times(whole_power(factor, 1 + k));
    }
    value = value.times(whole_power(n + m, -n - m - 1 - k));
    let magnitude = 4.0 * value.over(norm(&[a, b])).value() / power(z, k);
    Ok(Some(if negative { -magnitude } else { magnitude }))
}

/// The alternating sum: whether it is negative, and its magnitude.
fn exact_sum(a: &Hydrogenic, b: &Hydrogenic, k: i32) -> (bool, Natural) {
    let (n, m) = (a.n, b.n);
    let total = (n + m).unsigned_abs();
    let (p, q) = (a.degree(), b.degree());
    // The term i = j = 0.
    let mut row = Natural::from_u64(1);
    raise(&mut row, 2 * m, a.l);
    raise(&mut row, 2 * n, b.l);
    raise(&mut row, n + m, p + q);
    rise(&mut row, 2, a.l + b.l + 2 + k);
    // c_0 = p! C(n+ℓ, p) = (n+ℓ)!/(2ℓ+1)!.
    rise(&mut row, 2 * a.l + 2, n + a.l);
    rise(&mut row, 2 * b.l + 2, m + b.l);
    let mut sums = [Natural::default(), Natural::default()];
    for i in 0..=p {
        let mut term = row.clone();
        for j in 0..=q {
            let [even, odd] = &mut sums;
            if (i + j) % 2 == 0 { even } else { odd }.add(&term);
            if j < q {
                let up = [q - j, 2 * n, a.l + b.l + i + j + 3 + k];
                step(&mut term, up, [2 * b.l + 2 + j, j + 1], total);
            }
        }
        if i < p {
            let up = [p - i, 2 * m, a.l + b.l + i + 3 + k];
            step(&mut row, up, [2 * a.l + 2 + i, i + 1], total);
        }
    }
    let [even, odd] = sums;
    even.difference(&odd)
}

/// Multiplies by factorᵖ.
#[inline(never)]
pub(super) fn raise(value: &mut Natural, factor: i32, exponent: i32) {
    (0..exponent).for_each(|_| value.multiply_small(factor.unsigned_abs()));
}

/// Multiplies by every whole number from the first to the last.
#[inline(never)]
pub(super) fn rise(value: &mut Natural, first: i32, last: i32) {
    (first..=last).for_each(|factor| value.multiply_small(factor.unsigned_abs()));
}

/// From one term to the next; every quotient is whole.
#[inline(never)]
fn step(term: &mut Natural, up: [i32; 3], down: [i32; 2], total: u32) {
    up.iter()
        .for_each(|factor| term.multiply_small(factor.unsigned_abs()));
    down.iter()
        .for_each(|divisor| term.divide_small(divisor.unsigned_abs()));
    term.divide_small(total);
}

/// √Π p! (n+ℓ)!, p = n − ℓ − 1, over the orbitals.
#[inline(never)]
pub(super) fn norm(orbitals: &[Hydrogenic]) -> Scaled {
    let mut square = Natural::from_u64(1);
    for orbital in orbitals {
        rise(&mut square, 2, orbital.degree());
        rise(&mut square, 2, orbital.n + orbital.l);
    }
    square.scaled().root()
}

/// baseᵖ, p of either sign, rounded once or twice.
#[inline(never)]
pub(super) fn whole_power(base: i32, exponent: i32) -> Scaled {
    let mut product = Natural::from_u64(1);
    raise(&mut product, base, exponent.saturating_abs());
    let one = Scaled::new(1.0, 0);
    if exponent < 0 {
        one.over(product.scaled())
    } else {
        product.scaled()
    }
}

#[inline(never)]
fn rank_out_of_range(k: i32) -> Problem {
    Problem::new(
        "radial-power-out-of-range",
        format!("A radial integral with r to the power {k} is not computed."),
        0,
        0,
    )
    .bound("The power is between -100 and 100.")
}
