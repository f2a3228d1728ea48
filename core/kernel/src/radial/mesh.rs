//! The radial mesh: B-splines with a quadrature on their intervals, free of any equation.
//!
//! A radial function is Σ c_i B_i(r); on the mesh it is also its values at [`POINTS`]
//! Gauss–Legendre points in each interval. Matrices are banded and made by quadrature from any
//! weight; [`Mesh::slopes_with`] gives B′ + κB/r for any κ, so that one mesh serves equations of
//! one or of two components.

use crate::numerics::banded::Banded;
use crate::numerics::gauss_legendre::{gauss_legendre, running_weights};
use crate::numerics::spline::SplineBasis;

/// Order of the splines: polynomials of degree 8.
pub const ORDER: usize = 9;
/// Points of the quadrature in each interval; products of two splines are integrated exactly.
pub const POINTS: usize = 9;

/// On one interval: for each of its splines the values at its points.
pub type Block = [[f64; POINTS]; ORDER];

/// Splines and quadrature on rising break points.
#[derive(Clone, Debug)]
pub struct Mesh {
    basis: SplineBasis,
    breaks: Vec<f64>,
    firsts: Vec<usize>,
    radii: Vec<f64>,
    weights: Vec<f64>,
    halves: Vec<f64>,
    values: Vec<Block>,
    slopes: Vec<Block>,
    metric: Banded,
    means: Vec<f64>,
    rule: [f64; POINTS],
    running: [[f64; POINTS]; POINTS],
    powers: Vec<Powers>,
}

/// r^k and r^{−k−1} at every point.
#[derive(Clone, Debug)]
struct Powers {
    rising: Vec<f64>,
    falling: Vec<f64>,
}

fn array(values: &[f64]) -> [f64; POINTS] {
    let mut array = [0.0; POINTS];
    for (to, from) in array.iter_mut().zip(values) {
        *to = *from;
    }
    array
}

impl Mesh {
    /// The mesh on break points that rise from zero, with fields up to multipole `rank`; nothing
    /// where they do not rise. At break points that are also in `kinks` the splines have only two
    /// continuous derivatives, elsewhere seven.
    pub fn new(breaks: Vec<f64>, kinks: &[f64], rank: usize) -> Option<Self> {
        let rising = breaks.windows(2).all(|pair| match pair {
            [a, b] => *a >= 0.0 && a < b && b.is_finite(),
            _ => false,
        });
        if !rising || breaks.len() < 3 {
            return None;
        }
        let mut knots = Vec::with_capacity(breaks.len() + 2 * ORDER);
        for (i, &r) in breaks.iter().enumerate() {
            let times = if i == 0 || i + 1 == breaks.len() {
                ORDER
            } else if kinks.contains(&r) {
                ORDER - 3
            } else {
                1
            };
            knots.extend(core::iter::repeat_n(r, times));
        }
        let basis = SplineBasis::new(ORDER, knots)?;
        let rule = gauss_legendre(POINTS);
        let mut running = [[0.0; POINTS]; POINTS];
        for (to, from) in running.iter_mut().zip(running_weights(&rule)) {
            *to = array(&from);
        }
        let weights_of_rule: Vec<f64> = rule.iter().map(|&(_, w)| w).collect();
        let mut mesh = Mesh {
            means: Vec::new(),
            firsts: Vec::new(),
            radii: Vec::new(),
            weights: Vec::new(),
            halves: Vec::new(),
            values: Vec::new(),
            slopes: Vec::new(),
            metric: Banded::zero(basis.len(), ORDER),
            rule: array(&weights_of_rule),
            running,
            powers: Vec::new(),
            basis,
            breaks,
        };
        mesh.fill(&rule);
        mesh.metric = mesh.assemble(&mesh.values, &mesh.weights);
        mesh.means = mesh.project(&mesh.values, &mesh.weights);
        mesh.fill_powers(rank);
        Some(mesh)
    }

    fn fill(&mut self, rule: &[(f64, f64)]) {
        for pair in self.breaks.windows(2) {
            let [start, end] = pair else { continue };
            let first = self.basis.first_at(0.5 * (start + end));
            self.firsts.push(first);
            let half = 0.5 * (end - start);
            let mut values = [[0.0; POINTS]; ORDER];
            let mut slopes = [[0.0; POINTS]; ORDER];
            for (q, &(x, weight)) in rule.iter().enumerate() {
                let r = start + half * (1.0 + x);
                self.radii.push(r);
                self.weights.push(half * weight);
                let pairs = [
                    (&mut values, self.basis.values(first, r)),
                    (&mut slopes, self.basis.slopes(first, r)),
                ];
                for (block, column) in pairs {
                    for (row, value) in block.iter_mut().zip(column) {
                        if let Some(entry) = row.get_mut(q) {
                            *entry = value;
                        }
                    }
                }
            }
            self.halves.push(half);
            self.values.push(values);
            self.slopes.push(slopes);
        }
    }

    fn fill_powers(&mut self, rank: usize) {
        let mut rising = vec![1.0; self.radii.len()];
        let mut falling: Vec<f64> = self.radii.iter().map(|r| 1.0 / r).collect();
        for _ in 0..=rank {
            self.powers.push(Powers {
                rising: rising.clone(),
                falling: falling.clone(),
            });
            for ((up, down), r) in rising.iter_mut().zip(&mut falling).zip(&self.radii) {
                *up *= r;
                *down /= r;
            }
        }
    }

    /// The highest multipole rank of fields.
    pub fn rank(&self) -> usize {
        self.powers.len().saturating_sub(1)
    }

    /// The splines.
    pub fn basis(&self) -> &SplineBasis {
        &self.basis
    }

    /// Number of splines.
    pub fn size(&self) -> usize {
        self.basis.len()
    }

    /// Number of intervals.
    pub fn intervals(&self) -> usize {
        self.halves.len()
    }

    /// The break points, first 0, last the radius of the box.
    pub fn breaks(&self) -> &[f64] {
        &self.breaks
    }

    /// The radius of the box, a₀.
    pub fn end(&self) -> f64 {
        self.breaks.last().copied().unwrap_or(0.0)
    }

    /// The points of the quadrature, a₀.
    pub fn radii(&self) -> &[f64] {
        &self.radii
    }

    /// The weights of the quadrature: ∫ f dr = Σ w f.
    pub fn weights(&self) -> &[f64] {
        &self.weights
    }

    /// B_i at the points.
    pub fn values(&self) -> &[Block] {
        &self.values
    }

    /// B_i′ at the points.
    pub fn slopes(&self) -> &[Block] {
        &self.slopes
    }

    /// B_i′ + κ B_i/r at the points.
    pub fn slopes_with(&self, kappa: f64) -> Vec<Block> {
        let mut blocks = self.slopes.clone();
        let radii = self.radii.chunks_exact(POINTS);
        for ((block, values), radii) in blocks.iter_mut().zip(&self.values).zip(radii) {
            for (row, values) in block.iter_mut().zip(values) {
                for ((slope, value), r) in row.iter_mut().zip(values).zip(radii) {
                    *slope += kappa * value / r;
                }
            }
        }
        blocks
    }

    /// ⟨B_i|B_j⟩.
    pub fn metric(&self) -> &Banded {
        &self.metric
    }

    /// ∫ B_i dr.
    pub fn means(&self) -> &[f64] {
        &self.means
    }

    /// Σ w f.
    pub fn integral(&self, f: impl Iterator<Item = f64>) -> f64 {
        self.weights.iter().zip(f).map(|(w, f)| w * f).sum()
    }

    /// The function Σ c_i B_i (or its slope, with those blocks) at the points.
    pub fn sample(&self, blocks: &[Block], coefficients: &[f64]) -> Vec<f64> {
        let mut out = vec![0.0; self.radii.len()];
        let parts = self.firsts.iter().zip(blocks);
        for ((&first, block), out) in parts.zip(out.chunks_exact_mut(POINTS)) {
            let part = coefficients.get(first..).unwrap_or_default();
            let mut sum = [0.0; POINTS];
            for (c, row) in part.iter().zip(block) {
                for (sum, value) in sum.iter_mut().zip(row) {
                    *sum += c * value;
                }
            }
            out.copy_from_slice(&sum);
        }
        out
    }

    /// Several functions Σ c_i B_i at any radii, zero beyond the end.
    pub fn sample_at(&self, coefficients: &[&[f64]], radii: &[f64]) -> Vec<Vec<f64>> {
        let none = || Vec::with_capacity(radii.len());
        let mut all: Vec<Vec<f64>> = coefficients.iter().map(|_| none()).collect();
        for &r in radii {
            let first = self.basis.first_at(r);
            let values = if r <= self.end() {
                self.basis.values(first, r)
            } else {
                Vec::new()
            };
            for (coefficients, out) in coefficients.iter().zip(&mut all) {
                let part = coefficients.get(first..).unwrap_or_default();
                out.push(part.iter().zip(&values).map(|(c, b)| c * b).sum());
            }
        }
        all
    }

    /// Σ_q f_q B_i(r_q) for each spline; f holds the weights of the quadrature already.
    pub fn project(&self, blocks: &[Block], f: &[f64]) -> Vec<f64> {
        let mut out = vec![0.0; self.size()];
        let parts = self.firsts.iter().zip(blocks);
        for ((&first, block), f) in parts.zip(f.chunks_exact(POINTS)) {
            let rest = out.get_mut(first..).unwrap_or_default();
            for (out, row) in rest.iter_mut().zip(block) {
                let sum: f64 = row.iter().zip(f).map(|(value, f)| value * f).sum();
                *out += sum;
            }
        }
        out
    }

    /// The matrix Σ_q f_q B_i(r_q) B_j(r_q); f holds the weights of the quadrature already.
    pub fn assemble(&self, blocks: &[Block], f: &[f64]) -> Banded {
        let mut matrix = Banded::zero(self.size(), ORDER);
        let parts = self.firsts.iter().zip(blocks);
        for ((&first, block), f) in parts.zip(f.chunks_exact(POINTS)) {
            let rest = matrix.entries_mut().get_mut(first * ORDER..);
            let mut rows = rest.unwrap_or_default().chunks_exact_mut(ORDER);
            let mut others: &[[f64; POINTS]] = block;
            for row in block {
                let mut weighted = [0.0; POINTS];
                for ((to, value), f) in weighted.iter_mut().zip(row).zip(f) {
                    *to = value * f;
                }
                if let Some(out) = rows.next() {
                    for (out, other) in out.iter_mut().zip(others) {
                        let sum: f64 = weighted.iter().zip(other).map(|(a, b)| a * b).sum();
                        *out += sum;
                    }
                }
                others = others.get(1..).unwrap_or_default();
            }
        }
        matrix
    }

    /// Adds to `out` the field of multipole `rank` of a density,
    /// factor · ∫ r_<^k/r_>^{k+1} ρ(s) ds, at every point.
    ///
    /// Two running integrals, outward of s^k ρ and inward of s^{−k−1} ρ, whose integrands are
    /// interpolated by polynomials of degree 8 in each interval. The double integral of two
    /// densities is symmetric in them to rounding.
    pub fn add_field(&self, rank: usize, factor: f64, density: &[f64], out: &mut [f64]) {
        let Some(powers) = self.powers.get(rank) else {
            return;
        };
        let mut outward = 0.0;
        let parts = density
            .chunks_exact(POINTS)
            .zip(powers.rising.chunks_exact(POINTS))
            .zip(powers.falling.chunks_exact(POINTS))
            .zip(out.chunks_exact_mut(POINTS))
            .zip(&self.halves);
        for ((((density, rising), falling), out), half) in parts {
            let mut running = [outward; POINTS];
            let mut whole = 0.0;
            let terms = density
                .iter()
                .zip(rising)
                .zip(&self.running)
                .zip(&self.rule);
            for (((density, power), column), weight) in terms {
                let source = half * density * power;
                whole += weight * source;
                for (sum, a) in running.iter_mut().zip(column) {
                    *sum += a * source;
                }
            }
            outward += whole;
            for ((out, power), sum) in out.iter_mut().zip(falling).zip(&running) {
                *out += factor * power * sum;
            }
        }
        let mut inward = 0.0;
        let parts = density
            .chunks_exact(POINTS)
            .zip(powers.rising.chunks_exact(POINTS))
            .zip(powers.falling.chunks_exact(POINTS))
            .zip(out.chunks_exact_mut(POINTS))
            .zip(&self.halves)
            .rev();
        for ((((density, rising), falling), out), half) in parts {
            let mut running = [0.0; POINTS];
            let mut whole = inward;
            let terms = density
                .iter()
                .zip(falling)
                .zip(&self.running)
                .zip(&self.rule);
            for (((density, power), column), weight) in terms {
                let source = half * density * power;
                whole += weight * source;
                for (sum, a) in running.iter_mut().zip(column) {
                    *sum += a * source;
                }
            }
            inward = whole;
            for ((out, power), sum) in out.iter_mut().zip(rising).zip(&running) {
                *out += factor * power * (whole - sum);
            }
        }
    }

    /// ∫₀^r f ds at every point, f being interpolated as in [`Mesh::add_field`].
    pub fn running_integral(&self, f: &[f64]) -> Vec<f64> {
        let mut out = vec![0.0; f.len()];
        let mut before = 0.0;
        let parts = f.chunks_exact(POINTS).zip(out.chunks_exact_mut(POINTS));
        for ((f, out), half) in parts.zip(&self.halves) {
            let mut whole = 0.0;
            out.fill(before);
            for ((f, column), weight) in f.iter().zip(&self.running).zip(&self.rule) {
                whole += half * weight * f;
                for (sum, a) in out.iter_mut().zip(column) {
                    *sum += a * half * f;
                }
            }
            before += whole;
        }
        out
    }

    /// Σ c_i B_i with the coefficients that come nearest to f, given at the points.
    pub fn fit(&self, f: &[f64]) -> Vec<f64> {
        let weighted: Vec<f64> = f.iter().zip(&self.weights).map(|(f, w)| f * w).collect();
        let mut out = self.project(&self.values, &weighted);
        self.metric.clone().factorise().solve(&mut out);
        out
    }
}
