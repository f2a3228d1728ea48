//! Running integrals over the intervals of a mesh, by the polynomial through each one's points.

use crate::numerics::gauss_legendre::running_weights;

use super::mesh::POINTS;

/// Running integrals over one interval, from its middle on.
///
/// With a_qj of [`running_weights`], s_qj = a_qj − w_j/2 changes its sign when both q and j are
/// mirrored, so that even and odd parts of the integrand need half the products.
#[derive(Clone, Debug, Default)]
pub(super) struct Running {
    rule: [f64; POINTS],
    /// Column j: (s_qj + s_q,8−j)/2 for q < 4; the last one s_q4.
    even: [[f64; 4]; 5],
    /// Column j: (s_qj − s_q,8−j)/2 for q < 4.
    odd: [[f64; 4]; 4],
    /// The same for q = 4.
    centre: [f64; 4],
}

impl Running {
    pub(super) fn new(rule: &[(f64, f64)]) -> Self {
        let mut running = Running::default();
        for (to, &(_, w)) in running.rule.iter_mut().zip(rule) {
            *to = w;
        }
        let weights = running_weights(rule);
        let s = |q: usize, j: usize| {
            let a = weights.get(j).and_then(|column| column.get(q));
            let w = rule.get(j).map_or(0.0, |&(_, w)| w);
            a.map_or(0.0, |a| a - 0.5 * w)
        };
        for (j, column) in running.even.iter_mut().enumerate() {
            for (q, entry) in column.iter_mut().enumerate() {
                *entry = 0.5 * (s(q, j) + s(q, POINTS - 1 - j));
            }
        }
        for (j, column) in running.odd.iter_mut().enumerate() {
            for (q, entry) in column.iter_mut().enumerate() {
                *entry = 0.5 * (s(q, j) - s(q, POINTS - 1 - j));
            }
        }
        for (j, entry) in running.centre.iter_mut().enumerate() {
            *entry = 0.5 * (s(4, j) - s(4, POINTS - 1 - j));
        }
        running
    }

    /// The integral of f · power over an interval of this half width, and from the interval's
    /// start to each point less half the whole.
    #[inline(always)]
    pub(super) fn of(
        &self,
        f: &[f64; POINTS],
        power: &[f64; POINTS],
        half: f64,
    ) -> (f64, [f64; POINTS]) {
        let mut source = [0.0; POINTS];
        for ((to, f), power) in source.iter_mut().zip(f).zip(power) {
            *to = half * f * power;
        }
        let whole = source.iter().zip(&self.rule).map(|(f, w)| f * w).sum();
        let [a, b, c, d, middle, e, f, g, h] = source;
        let mut turning = [0.0; 4];
        for (column, f) in self.even.iter().zip([a + h, b + g, c + f, d + e, middle]) {
            for (sum, s) in turning.iter_mut().zip(column) {
                *sum += s * f;
            }
        }
        let odd = [a - h, b - g, c - f, d - e];
        let mut steady = [0.0; 4];
        for (column, f) in self.odd.iter().zip(odd) {
            for (sum, s) in steady.iter_mut().zip(column) {
                *sum += s * f;
            }
        }
        let centre = self.centre.iter().zip(odd).map(|(s, f)| s * f).sum();
        let [u0, u1, u2, u3] = turning;
        let [v0, v1, v2, v3] = steady;
        let points = [
            v0 + u0,
            v1 + u1,
            v2 + u2,
            v3 + u3,
            centre,
            v3 - u3,
            v2 - u2,
            v1 - u1,
            v0 - u0,
        ];
        (whole, points)
    }
}
