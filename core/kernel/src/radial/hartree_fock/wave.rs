//! One subshell of an iteration: its radial function and the field it moves in.

use crate::configuration::Orbital;
use crate::numerics::banded::Banded;
use crate::radial::knots::Spacing;
use crate::radial::mesh::{Block, Mesh, ORDER};

/// What does not change during an iteration.
pub(super) struct Case {
    pub mesh: Mesh,
    /// B′ − B/r at the points.
    pub twists: Vec<Block>,
    /// The kinetic energy of each ℓ, without relativity.
    pub kinetic: Vec<Banded>,
    /// Potential energy in the field of the nucleus, at the points.
    pub nuclear: Vec<f64>,
    /// Core polarisation, at the points, for the subshells that feel it.
    pub polarisation: Option<Vec<f64>>,
    /// The charge that an outer electron sees, at least 1.
    pub tail: f64,
    /// Whether there is one electron more than protons.
    pub anion: bool,
    /// What the mesh was made from.
    pub spacing: Spacing,
    /// α² with relativity, 0 without.
    pub alpha_squared: f64,
}

impl Case {
    /// Kinetic energy with these 1/M and a local potential, in functions of this ℓ.
    pub fn operator(&self, l: u8, inverse_mass: &[f64], local: &[f64]) -> Banded {
        let mesh = &self.mesh;
        let weights = mesh.weights();
        let mut values: Vec<f64> = local.iter().zip(weights).map(|(v, w)| v * w).collect();
        if let Some(kinetic) = self.kinetic.get(usize::from(l)) {
            let mut matrix = mesh.assemble(mesh.values(), &values);
            matrix.add(1.0, kinetic);
            return matrix;
        }
        let centrifugal = f64::from(l) * (f64::from(l) + 1.0);
        let slopes: Vec<f64> = (inverse_mass.iter().zip(weights))
            .map(|(m, w)| 0.5 * m * w)
            .collect();
        for ((value, half), r) in values.iter_mut().zip(&slopes).zip(mesh.radii()) {
            *value += half * centrifugal / (r * r);
        }
        let mut matrix = mesh.assemble(&self.twists, &slopes);
        matrix.add(1.0, &mesh.assemble(mesh.values(), &values));
        matrix
    }
}

/// A subshell with its radial function and, after [`super::field::update`], what acts on it.
#[derive(Clone)]
pub(super) struct Wave {
    pub n: u8,
    pub l: u8,
    /// Electrons.
    pub q: f64,
    /// As many as it can hold.
    pub full: bool,
    /// Whether core polarisation acts on it.
    pub polarised: bool,
    /// Coefficients of P.
    pub coefficients: Vec<f64>,
    /// P at the points.
    pub p: Vec<f64>,
    /// P′ − P/r at the points.
    pub twist: Vec<f64>,
    /// The local potential: nucleus, the other electrons' direct field, what of its own shell acts on it.
    pub local: Vec<f64>,
    /// The exchange function X: F P = (kinetic + local) P + X.
    pub exchange: Vec<f64>,
    /// Fields of its own density, k = 0, 2, …, 2ℓ.
    pub own: Vec<Vec<f64>>,
    /// 1/M at the points: 1 without relativity.
    pub inverse_mass: Vec<f64>,
    /// ε = ⟨P|F|P⟩.
    pub energy: f64,
    /// ⟨P| kinetic + nucleus |P⟩.
    pub one_electron: f64,
    /// ⟨P| kinetic |P⟩.
    pub kinetic: f64,
    /// ⟨B_i|F|P⟩.
    pub force: Vec<f64>,
    /// ⟨B_i| kinetic |P⟩; empty without relativity.
    pub kinetic_force: Vec<f64>,
}

impl Wave {
    /// A subshell without a radial function yet.
    pub fn new(orbital: Orbital, electrons: u32, polarised: bool) -> Self {
        Wave {
            n: orbital.n(),
            l: orbital.l(),
            q: f64::from(electrons),
            full: electrons == orbital.capacity(),
            polarised,
            coefficients: Vec::new(),
            p: Vec::new(),
            twist: Vec::new(),
            local: Vec::new(),
            exchange: Vec::new(),
            own: Vec::new(),
            inverse_mass: Vec::new(),
            energy: 0.0,
            one_electron: 0.0,
            kinetic: 0.0,
            force: Vec::new(),
            kinetic_force: Vec::new(),
        }
    }

    /// ℓ(ℓ + 1).
    pub fn centrifugal(&self) -> f64 {
        f64::from(self.l) * (f64::from(self.l) + 1.0)
    }
}

/// The splines that functions of this ℓ are made of: P starts as r^{ℓ+1} (as far as the order
/// allows) and vanishes at the end of the box.
pub(super) fn active(mesh: &Mesh, l: u8) -> (usize, usize) {
    let start = (usize::from(l) + 1).min(ORDER - 2);
    (start, mesh.size().saturating_sub(1))
}

/// a · b.
pub(super) fn dot(a: &[f64], b: &[f64]) -> f64 {
    a.iter().zip(b).map(|(a, b)| a * b).sum()
}

/// a + factor · b.
pub(super) fn add(a: &mut [f64], factor: f64, b: &[f64]) {
    for (a, b) in a.iter_mut().zip(b) {
        *a += factor * b;
    }
}
