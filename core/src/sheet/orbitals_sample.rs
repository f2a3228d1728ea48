//! Where a radial density is sampled for its picture.

/// Points of a curve.
const POINTS: u32 = 200;

/// The curve ends where P² has fallen below this part of its height.
const END: f64 = 1e-5;

/// Points even in ∛r from 0 to where the density has fallen for good: inner waves are short, outer
/// ones long. `highest` and `height` are the place and value of the largest maximum, which for
/// atomic radial functions is the outermost but for deep penetration.
pub fn radii(highest: f64, height: f64, density: impl Fn(f64) -> f64) -> Vec<f64> {
    // Outwards in steps of 5 % until eight in a row are low: a zero of P is low for one or two.
    let mut end = highest.max(f64::MIN_POSITIVE);
    let mut low = 0;
    while low < 8 && end < 1e6 {
        end *= 1.05;
        low = if density(end) < END * height {
            low + 1
        } else {
            0
        };
    }
    let root = libm::cbrt(end);
    (0..=POINTS)
        .map(|i| {
            let t = root * f64::from(i) / f64::from(POINTS);
            t * t * t
        })
        .collect()
}
