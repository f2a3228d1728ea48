//! The iteration to stationary orbitals.

use super::Progress;
use super::correction::steps;
use super::field::{Coefficients, update};
use super::start::orthonormalise;
use super::wave::{Case, Wave};
use crate::numerics::anderson::Anderson;
use crate::radial::knots::extent;

/// Iterations at most.
const MOST: usize = 120;
/// Steps that the acceleration remembers.
const DEPTH: usize = 10;
/// The residual that counts as converged.
const CONVERGED: f64 = 1e-10;
/// The residual from which on the energies tell how far the orbitals reach and whether they are bound.
const NEAR: f64 = 2e-3;
/// Iterations after which an orbital that is still unbound counts as such.
const PATIENCE: usize = 40;
/// An electron of a negative ion bound by less than this counts as unbound, hartree: 3 meV.
const LEAST_BOUND: f64 = 1e-4;

/// How a run of iterations ended.
pub(super) enum End {
    Converged,
    /// The box is too small for the orbitals.
    Cramped,
    /// This orbital has no bound state.
    Unbound(u8, u8),
    Stopped,
    Failed,
}

/// Natural logarithms by which every orbital has to decay before the end of the box.
pub(super) const DECAY: f64 = 17.0;

/// Where the farthest orbital has decayed.
pub(super) fn reach(case: &Case, waves: &[Wave], decay: f64) -> f64 {
    waves
        .iter()
        .map(|wave| extent(wave.energy, case.tail, decay))
        .fold(0.0, f64::max)
}

/// Iterates x ← x + β f(x), accelerated, `share` being β.
pub(super) fn iterate(
    case: &Case,
    coefficients: &Coefficients,
    waves: &mut [Wave],
    share: f64,
    history: &mut Vec<Progress>,
    progress: &mut dyn FnMut(Progress) -> bool,
) -> End {
    let mut memory = Anderson::new(DEPTH);
    // In these units the sum of squares is about the norm ⟨δ|δ⟩.
    let scale: Vec<f64> = case.mesh.means().iter().map(|m| m.sqrt()).collect();
    let size = scale.len();
    let mut best = f64::INFINITY;
    for turn in 0..MOST {
        let average = update(case, coefficients, waves);
        let found = steps(case, coefficients, waves, &average);
        let residual = found.largest;
        let now = Progress {
            iteration: history.len() + 1,
            residual,
        };
        history.push(now);
        if !progress(now) {
            return End::Stopped;
        }
        if !residual.is_finite() {
            return End::Failed;
        }
        if residual < NEAR || turn > PATIENCE {
            let unbound = |wave: &&Wave| {
                wave.energy >= 0.0 || (residual < NEAR && wave.energy > -LEAST_BOUND)
            };
            // On the way, only a negative ion is judged: all others have bound states.
            let judged = case.anion || residual < CONVERGED;
            if let (true, Some(wave)) = (judged, waves.iter().find(unbound)) {
                return End::Unbound(wave.n, wave.l);
            }
        }
        if residual < NEAR && reach(case, waves, DECAY) > case.mesh.end() {
            return End::Cramped;
        }
        if residual < CONVERGED {
            return End::Converged;
        }
        // A memory of another region misleads.
        if residual > 10.0 * best && residual > 0.05 {
            memory.clear();
            best = f64::INFINITY;
        }
        best = best.min(residual);
        let mut x = Vec::with_capacity(size * waves.len());
        let mut f = Vec::with_capacity(size * waves.len());
        for (wave, step) in waves.iter().zip(&found.steps) {
            x.extend(wave.coefficients.iter().zip(&scale).map(|(c, s)| c * s));
            f.extend(step.iter().zip(&scale).map(|(c, s)| share * c * s));
        }
        let mut step = memory.step(&x, &f);
        limit(&mut step, size);
        for (wave, step) in waves.iter_mut().zip(step.chunks_exact(size)) {
            for ((c, step), scale) in wave.coefficients.iter_mut().zip(step).zip(&scale) {
                *c += step / scale;
            }
        }
        orthonormalise(case, waves);
    }
    End::Failed
}

/// Shortens the whole step where any orbital would change by more than half its norm.
fn limit(step: &mut [f64], size: usize) {
    let mut largest: f64 = 0.0;
    for part in step.chunks_exact(size) {
        largest = largest.max(part.iter().map(|s| s * s).sum::<f64>());
    }
    if largest > 0.25 {
        let factor = 0.5 / largest.sqrt();
        step.iter_mut().for_each(|s| *s *= factor);
    }
}
