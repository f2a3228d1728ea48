//! Real spherical harmonics in section.

use libm::{cos, sin, sqrt};

/// The largest ℓ of [`section`].
pub const MOST_L: u32 = 20;

/// The real spherical harmonic of ℓ and |m| in the half plane φ = 0, where cos mφ = 1:
/// S_ℓm(θ) = √[(2 − δ_m0)(2ℓ + 1)/4π · (ℓ − m)!/(ℓ + m)!] P_ℓ^m(cos θ), with ∫ S² cos²mφ dΩ = 1 and
/// without the phase (−1)^m; θ in radians.
///
/// Upwards in ℓ by the recurrence DLMF 14.10.3 in its normalised form, from DLMF 14.6.1 for ℓ = m;
/// nothing cancels there. Zero for m above ℓ or ℓ above [`MOST_L`].
pub fn section(l: u32, m: u32, theta: f64) -> f64 {
    if m > l || l > MOST_L {
        return 0.0;
    }
    let (x, sine) = (cos(theta), sin(theta));
    let order = f64::from(m);
    // ℓ = m: √[(2 − δ)(2m + 1)/4π · (2m − 1)!!/(2m)!!] sin^m θ.
    let doubled = if m == 0 { 1.0 } else { 2.0 };
    let mut squared = doubled * (2.0 * order + 1.0) / (4.0 * core::f64::consts::PI);
    let mut power = 1.0;
    for k in 1..=m {
        let k = f64::from(k);
        squared *= (2.0 * k - 1.0) / (2.0 * k);
        power *= sine;
    }
    let (mut below, mut value) = (0.0, sqrt(squared) * power);
    for degree in m + 1..=l {
        let n = f64::from(degree);
        let step = sqrt((4.0 * n * n - 1.0) / (n * n - order * order));
        let before = n - 1.0;
        let back = sqrt((before * before - order * order) / (4.0 * before * before - 1.0));
        (below, value) = (value, step * (x * value - back * below));
    }
    value
}

#[cfg(test)]
mod tests {
    use super::*;
    use core::f64::consts::PI;

    fn close(a: f64, b: f64) {
        assert!((a - b).abs() < 1e-14, "{a} {b}");
    }

    // The table of Condon & Shortley, The Theory of Atomic Spectra (1935), 4³, times √2 for m > 0.
    #[test]
    fn the_lowest_harmonics_have_their_closed_forms() {
        for degrees in 0..=12 {
            let theta = f64::from(degrees) * PI / 12.0;
            let (x, s) = (cos(theta), sin(theta));
            close(section(0, 0, theta), (1.0 / (4.0 * PI)).sqrt());
            close(section(1, 0, theta), (3.0 / (4.0 * PI)).sqrt() * x);
            close(section(1, 1, theta), (3.0 / (4.0 * PI)).sqrt() * s);
            close(
                section(2, 0, theta),
                (5.0 / (16.0 * PI)).sqrt() * (3.0 * x * x - 1.0),
            );
            close(section(2, 1, theta), (15.0 / (4.0 * PI)).sqrt() * s * x);
            close(section(2, 2, theta), (15.0 / (16.0 * PI)).sqrt() * s * s);
            close(
                section(3, 1, theta),
                (21.0 / (32.0 * PI)).sqrt() * s * (5.0 * x * x - 1.0),
            );
            close(
                section(4, 0, theta),
                3.0 / 16.0 / PI.sqrt() * (35.0 * x * x * x * x - 30.0 * x * x + 3.0),
            );
        }
    }

    // Σ over m = −ℓ…ℓ of Y² is (2ℓ + 1)/4π in every direction (DLMF 14.30.9); at φ = 0 only the
    // cosines count, each pair ±m once.
    #[test]
    fn the_squares_add_up_in_every_direction() {
        for l in 0..=MOST_L {
            for step in 0..=20 {
                let theta = f64::from(step) * PI / 20.0;
                let sum: f64 = (0..=l)
                    .map(|m| section(l, m, theta) * section(l, m, theta))
                    .sum();
                assert!((sum * 4.0 * PI / f64::from(2 * l + 1) - 1.0).abs() < 1e-13);
            }
        }
        close(section(1, 2, 0.3), 0.0);
        close(section(MOST_L + 1, 0, 0.3), 0.0);
    }
}
