//! The radial mesh: B-splines with a quadrature on their intervals, free of any equation.
//!
//! A radial function is Σ c_i B_i(r); on the mesh it is also its values at [`POINTS`]
//! Gauss–Legendre points in each interval. Matrices are banded and made by quadrature from any
//! weight; [`Mesh::slopes_with`] gives B′ + κB/r for any κ, so that one mesh serves equations of
//! one or of two components.

use crate::numerics::banded::Banded;
use crate::numerics::gauss_legendre::gauss_legendre;
use crate::numerics::spline::SplineBasis;

use super::running::Running;

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
    running: Running,
    powers: Vec<Powers>,
}

/// r^k and r^{−k−1} at every point.
#[derive(Clone, Debug)]
struct Powers {
    rising: Vec<f64>,
    falling: Vec<f64>,
}

/// The values of each interval.
fn chunks(values: &[f64]) -> impl DoubleEndedIterator<Item = &[f64; POINTS]> + ExactSizeIterator {
    let (chunks, _) = values.as_chunks::<POINTS>();
    chunks.iter()
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
        let mut mesh = Mesh {
            means: Vec::new(),
            firsts: Vec::new(),
            radii: Vec::new(),
            weights: Vec::new(),
            halves: Vec::new(),
            values: Vec::new(),
            slopes: Vec::new(),
            metric: Banded::zero(basis.len(), ORDER),
            running: Running::new(&rule),
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
        let parts = chunks(density)
            .zip(chunks(&powers.rising))
            .zip(chunks(&powers.falling))
            .zip(out.chunks_exact_mut(POINTS))
            .zip(&self.halves);
        for ((((density, rising), falling), out), half) in parts {
            let (whole, running) = self.running.of(density, rising, *half);
            let middle = outward + 0.5 * whole;
            for ((out, power), sum) in out.iter_mut().zip(falling).zip(running) {
                *out += factor * power * (middle + sum);
            }
            outward += whole;
        }
        let mut inward = 0.0;
        let parts = chunks(density)
            .zip(chunks(&powers.rising))
            .zip(chunks(&powers.falling))
            .zip(out.chunks_exact_mut(POINTS))
            .zip(&self.halves)
            .rev();
        for ((((density, rising), falling), out), half) in parts {
            let (whole, running) = self.running.of(density, falling, *half);
            let middle = inward + 0.5 * whole;
            for ((out, power), sum) in out.iter_mut().zip(rising).zip(running) {
                *out += factor * power * (middle - sum);
            }
            inward += whole;
        }
    }

    /// ∫₀^r f ds at every point, f being interpolated as in [`Mesh::add_field`].
    pub fn running_integral(&self, f: &[f64]) -> Vec<f64> {
        let mut out = Vec::with_capacity(f.len());
        let mut before = 0.0;
        for (f, half) in chunks(f).zip(&self.halves) {
            let (whole, running) = self.running.of(f, &[1.0; POINTS], *half);
            out.extend(running.iter().map(|sum| before + 0.5 * whole + sum));
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

#[cfg(test)]
mod tests {
    use super::*;

    fn mesh() -> Mesh {
        let breaks = (0..=40).map(|i| 0.02 * f64::from(i * i)).collect();
        Mesh::new(breaks, &[], 6).expect("rising break points")
    }

    #[test]
    fn the_field_of_an_exponential_density_is_exact() {
        // ρ = 4 r² e^{−2r}, the 1s density: U⁰ = [1 − (1 + r) e^{−2r}]/r.
        let mesh = mesh();
        let density: Vec<f64> = (mesh.radii().iter())
            .map(|&r| 4.0 * r * r * libm::exp(-2.0 * r))
            .collect();
        let mut field = vec![0.0; density.len()];
        mesh.add_field(0, 1.0, &density, &mut field);
        for (u, &r) in field.iter().zip(mesh.radii()) {
            let exact = -libm::expm1(-2.0 * r) / r - libm::exp(-2.0 * r);
            assert!((u - exact).abs() < 1e-9, "{r}: {u} {exact}");
        }
        assert!((mesh.integral(density.iter().copied()) - 1.0).abs() < 1e-12);
        let running = mesh.running_integral(&density);
        assert!((running.last().copied().unwrap_or(0.0) - 1.0).abs() < 1e-12);
    }

    #[test]
    fn double_integrals_are_symmetric() {
        let mesh = mesh();
        let density = |power: i32, rate: f64| -> Vec<f64> {
            (mesh.radii().iter())
                .map(|&r| (0..power).fold(libm::exp(-rate * r), |p, _| p * r))
                .collect()
        };
        let (f, g) = (density(8, 3.0), density(9, 0.7));
        for k in 0..=6 {
            let between = |source: &[f64], probe: &[f64]| {
                let mut field = vec![0.0; source.len()];
                mesh.add_field(k, 1.0, source, &mut field);
                mesh.integral(field.iter().zip(probe).map(|(u, p)| u * p))
            };
            let (there, back) = (between(&f, &g), between(&g, &f));
            assert!((there / back - 1.0).abs() < 1e-13, "k = {k}");
        }
        let mut untouched = vec![1.0; f.len()];
        mesh.add_field(7, 1.0, &f, &mut untouched);
        assert!(untouched.iter().all(|u| *u == 1.0));
    }

    #[test]
    fn polynomials_are_fitted_and_found_again_anywhere() {
        let mesh = mesh();
        let cubic = |r: f64| r * (1.0 - 0.3 * r + 0.01 * r * r);
        let values: Vec<f64> = mesh.radii().iter().map(|&r| cubic(r)).collect();
        let fitted = mesh.fit(&values);
        let radii = [0.0, 0.013, 1.7, 12.0, mesh.end(), 2.0 * mesh.end()];
        let found = mesh.sample_at(&[&fitted], &radii);
        for (value, r) in found[0].iter().zip(radii) {
            let exact = if r > mesh.end() { 0.0 } else { cubic(r) };
            assert!((value - exact).abs() < 1e-9, "{r}: {value} {exact}");
        }
        let slopes = mesh.sample(mesh.slopes(), &fitted);
        let with = mesh.sample(&mesh.slopes_with(2.0), &fitted);
        for (((s, t), v), r) in slopes.iter().zip(&with).zip(&values).zip(mesh.radii()) {
            assert!((s + 2.0 * v / r - t).abs() < 1e-8 * (1.0 + t.abs()));
        }
    }

    #[test]
    fn a_kink_is_followed_where_it_is_announced() {
        let breaks = vec![0.0, 1.0, 2.0, 3.0, 4.0];
        let bent = |r: f64| {
            let beyond = (r - 2.0).max(0.0);
            r + beyond * beyond * beyond
        };
        let miss = |kinks: &[f64]| {
            let mesh = Mesh::new(breaks.clone(), kinks, 0).expect("rising break points");
            let values: Vec<f64> = mesh.radii().iter().map(|&r| bent(r)).collect();
            let found = mesh.sample(mesh.values(), &mesh.fit(&values));
            let pairs = found.iter().zip(&values);
            pairs.fold(0.0_f64, |most, (f, v)| most.max((f - v).abs()))
        };
        assert!(miss(&[2.0]) < 1e-11 && miss(&[]) > 1e-5);
    }

    #[test]
    fn what_is_no_mesh_is_refused() {
        assert!(Mesh::new(vec![0.0, 1.0], &[], 0).is_none());
        assert!(Mesh::new(vec![0.0, 1.0, 1.0], &[], 0).is_none());
        assert!(Mesh::new(vec![0.0, 1.0, f64::NAN], &[], 0).is_none());
        assert!(Mesh::new(vec![-1.0, 1.0, 2.0], &[], 0).is_none());
    }
}
