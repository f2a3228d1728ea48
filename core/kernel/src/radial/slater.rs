//! Slater integrals of computed orbitals.
//!
//! R^k(ab,cd) = ∬ P_a(1)P_c(1) r_<^k/r_>^{k+1} P_b(2)P_d(2) dr₁dr₂, F^k(ab) = R^k(ab,ab),
//! G^k(ab) = R^k(ab,ba), hartree. Source: Slater, *Quantum Theory of Atomic Structure* (1960), vol. 1,
//! chapter 13.

use super::hartree_fock::{RadialOrbital, Solution};
use super::mesh::Mesh;

/// R^k(ab,cd) of functions given at the points of a mesh; nothing above the mesh's highest rank.
pub fn r_integral(mesh: &Mesh, k: usize, [a, b, c, d]: [&[f64]; 4]) -> Option<f64> {
    if k > mesh.rank() {
        return None;
    }
    let density: Vec<f64> = b.iter().zip(d).map(|(b, d)| b * d).collect();
    let mut field = vec![0.0; density.len()];
    mesh.add_field(k, 1.0, &density, &mut field);
    let parts = field.iter().zip(a).zip(c);
    Some(mesh.integral(parts.map(|((u, a), c)| u * a * c)))
}

impl Solution {
    /// F^k(ab), hartree, for k = 0, 2, … up to twice the smaller ℓ; nothing for other k, for which its
    /// angular factor vanishes.
    pub fn f(&self, k: usize, a: &RadialOrbital, b: &RadialOrbital) -> Option<f64> {
        let highest = 2 * usize::from(a.orbital.l().min(b.orbital.l()));
        if k > highest || k % 2 == 1 {
            return None;
        }
        self.r([a, b, a, b], k)
    }

    /// G^k(ab), hartree, for k = |ℓ−ℓ′|, |ℓ−ℓ′|+2, … ℓ+ℓ′; nothing for other k.
    pub fn g(&self, k: usize, a: &RadialOrbital, b: &RadialOrbital) -> Option<f64> {
        let (l, other) = (usize::from(a.orbital.l()), usize::from(b.orbital.l()));
        let lowest = l.abs_diff(other);
        if k < lowest || k > l + other || (k - lowest) % 2 == 1 {
            return None;
        }
        self.r([a, b, b, a], k)
    }

    /// R^k(ab,cd), hartree; nothing above twice the highest ℓ of the configuration.
    pub fn r(&self, [a, b, c, d]: [&RadialOrbital; 4], k: usize) -> Option<f64> {
        r_integral(&self.mesh, k, [&a.p, &b.p, &c.p, &d.p])
    }
}
