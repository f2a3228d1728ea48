//! Anderson's acceleration of a fixed-point iteration.

use std::collections::VecDeque;

/// The memory of an accelerated iteration x ← x + f(x).
///
/// With the last steps Δx_j and changes Δf_j, the next point is
/// x + f − Σ γ_j (Δx_j + Δf_j), where γ makes ‖f − Σ γ_j Δf_j‖ least.
/// Source: Anderson, J. ACM 12, 547 (1965); Walker and Ni, SIAM J. Numer. Anal. 49, 1715 (2011).
pub struct Anderson {
    depth: usize,
    last: Option<(Vec<f64>, Vec<f64>)>,
    steps: VecDeque<(Vec<f64>, Vec<f64>)>,
}

/// A change that lies within this part of its own length in the span of newer ones is left out.
const DEPENDENT: f64 = 1e-7;

impl Anderson {
    /// A memory of `depth` steps.
    pub fn new(depth: usize) -> Self {
        Anderson {
            depth,
            last: None,
            steps: VecDeque::new(),
        }
    }

    /// Forgets all.
    pub fn clear(&mut self) {
        self.last = None;
        self.steps.clear();
    }

    /// The step from x to the next point, f being f(x).
    pub fn step(&mut self, x: &[f64], f: &[f64]) -> Vec<f64> {
        if let Some((last_x, last_f)) = self.last.take() {
            self.steps
                .push_front((difference(x, &last_x), difference(f, &last_f)));
            self.steps.truncate(self.depth);
        }
        self.last = Some((x.to_vec(), f.to_vec()));
        let mut step = f.to_vec();
        let mut rest = f.to_vec();
        let mut done: Vec<(Vec<f64>, Vec<f64>)> = Vec::with_capacity(self.steps.len());
        for (dx, df) in &self.steps {
            let (mut dx, mut df) = (dx.clone(), df.clone());
            let before = dot(&df, &df).sqrt();
            for (y, q) in &done {
                let overlap = dot(&df, q);
                add(&mut df, -overlap, q);
                add(&mut dx, -overlap, y);
            }
            let after = dot(&df, &df).sqrt();
            if after <= DEPENDENT * before || !after.is_finite() {
                continue;
            }
            df.iter_mut().for_each(|v| *v /= after);
            dx.iter_mut().for_each(|v| *v /= after);
            let gamma = dot(&rest, &df);
            add(&mut rest, -gamma, &df);
            add(&mut step, -gamma, &df);
            add(&mut step, -gamma, &dx);
            done.push((dx, df));
        }
        step
    }
}

fn dot(a: &[f64], b: &[f64]) -> f64 {
    a.iter().zip(b).map(|(a, b)| a * b).sum()
}

fn add(to: &mut [f64], factor: f64, what: &[f64]) {
    for (to, what) in to.iter_mut().zip(what) {
        *to += factor * what;
    }
}

fn difference(a: &[f64], b: &[f64]) -> Vec<f64> {
    a.iter().zip(b).map(|(a, b)| a - b).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_linear_iteration_ends_after_as_many_steps_as_unknowns() {
        // f(x) = b − A x with an A on which the plain iteration diverges.
        let a = [[3.0, 1.0, 0.0], [0.5, -2.0, 1.0], [0.0, 1.0, 4.0]];
        let b = [1.0, 2.0, 3.0];
        let f =
            |x: &[f64]| -> Vec<f64> { a.iter().zip(b).map(|(row, b)| b - dot(row, x)).collect() };
        let mut memory = Anderson::new(5);
        let mut x = vec![0.0; 3];
        for _ in 0..5 {
            let step = memory.step(&x, &f(&x));
            add(&mut x, 1.0, &step);
        }
        assert!(f(&x).iter().all(|f| f.abs() < 1e-10), "{:?}", f(&x));
    }
}
