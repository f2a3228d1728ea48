//! The step towards stationary orbitals: a Newton-like correction of each orbital outside the space
//! of the occupied ones of its ℓ, and rotations within that space.

use super::field::{Coefficients, between};
use super::wave::{Case, Wave, active, add, dot};
use crate::numerics::linear;

/// The largest rotation and the largest length of a correction in one step.
const MOST: f64 = 0.3;

/// One step for every wave, and the largest length of any (in ⟨δ|δ⟩^½).
pub(super) struct Steps {
    pub steps: Vec<Vec<f64>>,
    pub largest: f64,
}

/// The corrections of all waves, whose fields must be up to date.
pub(super) fn steps(
    case: &Case,
    coefficients: &Coefficients,
    waves: &[Wave],
    average: &[f64],
) -> Steps {
    let metric = case.mesh.metric();
    let duals: Vec<Vec<f64>> = waves
        .iter()
        .map(|wave| metric.times(&wave.coefficients))
        .collect();
    let mut all: Vec<Vec<f64>> = waves
        .iter()
        .map(|wave| {
            let group: Vec<&[f64]> = (waves.iter().zip(&duals))
                .filter(|(other, _)| other.l == wave.l)
                .map(|(_, dual)| dual.as_slice())
                .collect();
            outside(case, wave, average, waves, &group)
        })
        .collect();
    for (place, a) in waves.iter().enumerate() {
        for (further, b) in waves.iter().enumerate().skip(place + 1) {
            if a.l != b.l {
                continue;
            }
            let angle = rotation(case, coefficients, a, b).clamp(-MOST, MOST);
            if let Some(step) = all.get_mut(place) {
                add(step, angle, &b.coefficients);
            }
            if let Some(step) = all.get_mut(further) {
                add(step, -angle, &a.coefficients);
            }
        }
    }
    let mut largest: f64 = 0.0;
    for step in &mut all {
        let length = dot(step, &metric.times(step)).max(0.0).sqrt();
        if !length.is_finite() {
            largest = f64::INFINITY;
        } else if length > MOST {
            step.iter_mut().for_each(|c| *c *= MOST / length);
        }
        largest = largest.max(length);
    }
    Steps {
        steps: all,
        largest,
    }
}

/// Solves (K + V + v − ε) δ + Σ_b μ_b B c_b = −(F P − Σ_b λ_b B c_b) with ⟨b|δ⟩ = 0 for every b of
/// equal ℓ, v being Slater's average of the exchange, which F holds exactly.
fn outside(
    case: &Case,
    wave: &Wave,
    average: &[f64],
    waves: &[Wave],
    group: &[&[f64]],
) -> Vec<f64> {
    let (start, end) = active(&case.mesh, wave.l);
    // An orbital that is hardly bound yet, or not, must not be taken for one of the continuum.
    let n = f64::from(wave.n);
    let shift = wave.energy.min(-0.25 * case.tail * case.tail / (n * n));
    let local: Vec<f64> = (wave.local.iter().zip(average))
        .map(|(v, x)| v + x - shift)
        .collect();
    let factors = case
        .operator(wave.l, &wave.inverse_mass, &local)
        .part(start, end)
        .factorise();
    let same = waves.iter().filter(|other| other.l == wave.l);
    let mut residual: Vec<f64> = wave.force.iter().map(|f| -f).collect();
    for (other, dual) in same.zip(group) {
        let multiplier = dot(&other.coefficients, &wave.force);
        add(&mut residual, multiplier, dual);
    }
    let cut = |vector: &[f64]| vector.get(start..end).unwrap_or_default().to_vec();
    let mut step = cut(&residual);
    factors.solve(&mut step);
    let borders: Vec<Vec<f64>> = group.iter().map(|dual| cut(dual)).collect();
    let solved: Vec<Vec<f64>> = borders
        .iter()
        .map(|border| {
            let mut column = border.clone();
            factors.solve(&mut column);
            column
        })
        .collect();
    let rows = borders
        .iter()
        .map(|border| {
            let mut row: Vec<f64> = solved.iter().map(|column| dot(border, column)).collect();
            row.push(dot(border, &step));
            row
        })
        .collect();
    if let Some(multipliers) = linear::solve(rows) {
        for (column, multiplier) in solved.iter().zip(multipliers) {
            add(&mut step, -multiplier, column);
        }
    }
    let mut whole = vec![0.0; case.mesh.size()];
    if let Some(part) = whole.get_mut(start..end) {
        part.copy_from_slice(&step);
    }
    whole
}

/// The angle θ by which a turns to b (P_a + θ P_b, P_b − θ P_a) for E_av to be stationary; for two full
/// subshells, whose turning leaves E_av as it is, for ⟨b|F|a⟩ to vanish.
///
/// With relativity K_a and K_b differ by their ε; their mean is used for both.
fn rotation(case: &Case, coefficients: &Coefficients, a: &Wave, b: &Wave) -> f64 {
    let (f_ba, k_ba) = between(b, a);
    let (f_ab, k_ab) = between(a, b);
    let shift = 0.5 * (k_ab - k_ba);
    let (f_ba, f_ab) = (f_ba + shift, f_ab - shift);
    if a.full && b.full {
        // Of a core and a full subshell outside it, the core's is the field without its polarisation.
        let coupling = match (a.polarised, b.polarised) {
            (false, true) => f_ba,
            (true, false) => f_ab,
            _ => 0.5 * (f_ba + f_ab),
        };
        return coupling / (a.energy - b.energy);
    }
    let slope = 2.0 * (a.q * f_ba - b.q * f_ab);
    -slope / curvature(case, coefficients, a, b)
}

/// d²E_av/dθ² of the rotation of a and b, all else fixed.
///
/// From P_a′ = P_a cos θ + P_b sin θ, P_b′ = P_b cos θ − P_a sin θ in each Slater integral.
fn curvature(case: &Case, coefficients: &Coefficients, a: &Wave, b: &Wave) -> f64 {
    let mesh = &case.mesh;
    let with = |field: &[f64], left: &[f64], right: &[f64]| {
        mesh.integral(
            (field.iter().zip(left))
                .zip(right)
                .map(|((u, p), s)| u * p * s),
        )
    };
    let product: Vec<f64> = a.p.iter().zip(&b.p).map(|(p, s)| p * s).collect();
    let mut ranks = vec![0];
    ranks.extend(coefficients.within(a.l).iter().map(|rank| rank.k));
    let exchange = coefficients.exchange(a.l, b.l);
    let (mut own_a, mut own_b, mut pair) = (0.0, 0.0, 0.0);
    let (mut own_a2, mut own_b2, mut pair2) = (0.0, 0.0, 0.0);
    for (place, &k) in ranks.iter().enumerate() {
        let (Some(of_a), Some(of_b)) = (a.own.get(place), b.own.get(place)) else {
            continue;
        };
        let mut of_ab = vec![0.0; product.len()];
        mesh.add_field(k, 1.0, &product, &mut of_ab);
        let f_aa = with(of_a, &a.p, &a.p);
        let f_bb = with(of_b, &b.p, &b.p);
        let f_ab = with(of_a, &b.p, &b.p);
        let g = with(&of_ab, &a.p, &b.p);
        let inner = match place.checked_sub(1) {
            None => 1.0,
            Some(place) => -coefficients
                .within(a.l)
                .get(place)
                .map_or(0.0, |r| r.coefficient),
        };
        let outer = exchange.get(place).map_or(0.0, |rank| rank.coefficient);
        let direct = if k == 0 { 1.0 } else { 0.0 };
        own_a += inner * f_aa;
        own_b += inner * f_bb;
        pair += direct * f_ab - outer * g;
        own_a2 += inner * (8.0 * g + 4.0 * (f_ab - f_aa));
        own_b2 += inner * (8.0 * g + 4.0 * (f_ab - f_bb));
        let sum = f_aa + f_bb - 2.0 * f_ab;
        pair2 += direct * (2.0 * sum - 8.0 * g) - outer * (2.0 * sum - 8.0 * g);
    }
    // I plus the interaction with all but a and b.
    let outside_a = a.energy - (a.q - 1.0) * own_a - b.q * pair;
    let outside_b = b.energy - (b.q - 1.0) * own_b - a.q * pair;
    2.0 * (a.q - b.q) * (outside_b - outside_a)
        + 0.5 * a.q * (a.q - 1.0) * own_a2
        + 0.5 * b.q * (b.q - 1.0) * own_b2
        + a.q * b.q * pair2
}
