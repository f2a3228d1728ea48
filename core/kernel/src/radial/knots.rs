//! Where the mesh has its break points: spaced by the phase of the fastest wave.

use super::thomas_fermi::effective_charge;

/// What the spacing follows.
#[derive(Clone, Copy, Debug)]
pub struct Spacing {
    /// Nuclear charge.
    pub z: f64,
    /// Charge that an outer electron sees, at least 0.
    pub tail: f64,
    /// √(2|ε|) of the least bound orbital, a₀⁻¹.
    pub decay: f64,
    /// Radius of the box, a₀.
    pub end: f64,
    /// Phase, in radians, that one interval spans.
    pub phase: f64,
}

/// Intervals at most; n = 20 at Z = 103 takes 300.
const MOST: usize = 1000;

/// Break points 0 = r₀ < r₁ < … = `end`.
///
/// The local wave number is bounded by k(r) = √(2 Z_eff(r)/r + κ²), which is also the rate of decay
/// at large r; each interval spans an equal part of ∫k dr. In s = √r the integrand is smooth at 0.
/// Near a finite nucleus, or where r^γ is no power series, the functions change on the scale of r
/// itself: then the points `inner` are taken as they are, and k² has a term 1/r² beyond them.
pub fn breaks(spacing: &Spacing, inner: &[f64]) -> Vec<f64> {
    let last = spacing.end.sqrt();
    let start = inner.last().map_or(0.0, |r| r.sqrt());
    // dφ/ds = k dr/ds.
    let rate = |s: f64| {
        let r = s * s;
        let charge = effective_charge(spacing.z, spacing.tail, r);
        let inverse = if start > 0.0 { 1.0 / r } else { 0.0 };
        2.0 * (2.0 * charge + spacing.decay * spacing.decay * r + inverse).sqrt()
    };
    // The phase up to the end, in steps far below an interval's.
    let fine = 0.25 * spacing.phase;
    let mut s = start;
    let mut total = 0.0;
    let mut table = vec![(0.0, start)];
    while s < last && table.len() < 4 * MOST {
        let step = fine / rate(s + 0.5 * fine / rate(s));
        let next = (s + step).min(last);
        let middle = 0.5 * (s + next);
        total += (next - s) * (rate(s) + 4.0 * rate(middle) + rate(next)) / 6.0;
        s = next;
        table.push((total, s));
    }
    let count = (total / spacing.phase).ceil().max(8.0);
    let share = total / count;
    let mut points = vec![0.0];
    points.extend_from_slice(inner);
    let mut done = 1.0;
    for pair in table.windows(2) {
        let [(before, s), (after, next)] = pair else {
            continue;
        };
        while done * share <= *after && done < count {
            let part = (done * share - before) / (after - before);
            let s = s + part * (next - s);
            points.push(s * s);
            done += 1.0;
        }
    }
    points.push(spacing.end);
    points
}

/// The radius where an orbital has decayed: beyond its classical turning point in the field of
/// `tail`, ∫√(2|ε| − 2 tail/r) dr reaches `decades` natural logarithms.
pub fn extent(energy: f64, tail: f64, decades: f64) -> f64 {
    let bound = energy.abs().max(1e-5);
    let mut r = tail / bound;
    let decay = (2.0 * bound).sqrt();
    let mut sum = 0.0;
    let step = decades / decay / 64.0;
    while sum < decades {
        r += step;
        let square = 2.0 * bound - 2.0 * tail / (r - 0.5 * step);
        sum += step * square.max(0.0).sqrt();
    }
    r
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn break_points_rise_to_the_end() {
        for (z, tail, end) in [(1.0, 1.0, 40.0), (92.0, 1.0, 60.0), (11.0, 1.0, 700.0)] {
            for inner in [vec![], vec![5e-7, 1e-6]] {
                let spacing = Spacing {
                    z,
                    tail,
                    decay: 0.4,
                    end,
                    phase: 1.6,
                };
                let points = breaks(&spacing, &inner);
                assert!(points.windows(2).all(|pair| pair[0] < pair[1]));
                assert_eq!((points[0], points[points.len() - 1]), (0.0, end));
                assert!(points.len() < 250, "{}", points.len());
            }
        }
    }

    #[test]
    fn an_extent_lies_beyond_the_turning_point() {
        // Hydrogen 1s: e^{−r} without the potential, so a little more than 20 with it.
        let r = extent(-0.5, 1.0, 20.0);
        assert!((20.0..26.0).contains(&r), "{r}");
    }
}
