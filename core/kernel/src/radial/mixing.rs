//! Slater integrals between two configurations that were optimised separately.
//!
//! R^k(ab,c′d′): a and b are functions of the one run, c′ and d′ of the other. What the other electrons'
//! functions make of it is taken in as far as it is of first order in the overlaps of unlike functions:
//!
//! R = R^k(ãb̃,c̃′d̃′) Π_e ⟨e|e′⟩^{q_e},
//!
//! e runs over the electrons that take no part, q_e of each; ã is a without what the other side's full
//! shells of its ℓ hold of it (Löwdin, Phys. Rev. 97, 1474 (1955)), and without half of its overlap with
//! an unlike c′ or d′ of its ℓ, whose other half is taken from that one: symmetric orthogonalisation in
//! first order (Löwdin, J. Chem. Phys. 18, 365 (1950)). States of the two configurations are then
//! orthogonal, as an energy matrix without an overlap matrix requires. What is left out is of second
//! order in [`Between::largest_cross`], and for open shells that take no part, of first order in their
//! overlaps with unlike functions.
//!
//! With core polarisation, two electrons outside the core act on each other through it too,
//! −α r₁·r₂/[(r₁²+ρ²)(r₂²+ρ²)]^{3/2}: R¹(ab,cd) loses α⟨a|w|c⟩⟨b|w|d⟩, w = r/(r²+ρ²)^{3/2}.
//! Source: Chisholm and Öpik, Proc. Phys. Soc. 83, 541 (1964), with the cut-off of Migdalek and Baylis (1978).

use super::hartree_fock::{Polarisation, RadialOrbital, Solution};
use super::mesh::Mesh;
use super::multipole::{Common, Side};
use super::slater::r_integral;
use crate::configuration::Orbital;

/// Two runs on a common mesh.
pub struct Between<'a> {
    from: &'a Solution,
    to: &'a Solution,
    common: Common,
    mesh: Mesh,
    /// Each function of `from` without the full shells of `to`.
    left: Vec<Vec<f64>>,
    /// Each function of `to` without the full shells of `from`.
    right: Vec<Vec<f64>>,
}

/// An overlap of unlike functions of two runs.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Cross {
    /// ⟨a|c′⟩.
    pub overlap: f64,
    /// Of the one run.
    pub a: Orbital,
    /// Of the other.
    pub c: Orbital,
}

impl<'a> Between<'a> {
    /// The functions of both runs on one mesh; nothing where the two meshes make none together.
    pub fn new(from: &'a Solution, to: &'a Solution) -> Option<Self> {
        let common = Common::new(from, to);
        let rank = from.mesh.rank().max(to.mesh.rank());
        let mesh = Mesh::new(common.breaks.clone(), &[], rank)?;
        let clean = |side: Side, count: usize| -> Vec<Vec<f64>> {
            (0..count)
                .map(|place| common.without_core(from, to, place, side))
                .collect()
        };
        Some(Between {
            left: clean(Side::From, from.orbitals.len()),
            right: clean(Side::To, to.orbitals.len()),
            from,
            to,
            common,
            mesh,
        })
    }

    /// The largest overlap of unlike functions of equal ℓ that stand among `outside`; nothing where
    /// there are none.
    pub fn largest_cross(&self, outside: &[Orbital]) -> Option<Cross> {
        let mut largest: Option<Cross> = None;
        for (a, f) in self.from.orbitals.iter().zip(&self.left) {
            for (c, g) in self.to.orbitals.iter().zip(&self.right) {
                let (a, c) = (a.orbital, c.orbital);
                let unlike = a != c && a.l() == c.l();
                if !unlike || !outside.contains(&a) || !outside.contains(&c) {
                    continue;
                }
                let overlap = self.common.product(f, g);
                if largest.is_none_or(|known| known.overlap.abs() < overlap.abs()) {
                    largest = Some(Cross { overlap, a, c });
                }
            }
        }
        largest
    }

    /// R of the module's head, hartree; nothing where an orbital is not occupied or k is above what
    /// the orbitals' ℓ allow.
    pub fn r(&self, k: usize, [a, b]: [Orbital; 2], [c, d]: [Orbital; 2]) -> Option<f64> {
        let functions = self.orthogonal([a, b], [c, d])?;
        let [f, g, h, i] = &functions;
        let mut value = r_integral(&self.mesh, k, [f, g, h, i])?;
        if k == 1
            && let Some(polarisation) = self.polarisation()
            && [a, b, c, d].iter().all(|o| !polarisation.core.contains(o))
        {
            let radii = self.common.radii.iter();
            let pull: Vec<f64> = radii.map(|&r| polarisation.pull(r)).collect();
            let pulls = self.common.with(f, &pull, h) * self.common.with(g, &pull, i);
            value -= polarisation.alpha * pulls;
        }
        Some(value * self.spectators([a, b]))
    }

    fn polarisation(&self) -> Option<&Polarisation> {
        let own = self.from.atom.polarisation.as_ref();
        own.or(self.to.atom.polarisation.as_ref())
    }

    /// ã, b̃, c̃′ and d̃′.
    fn orthogonal(&self, [a, b]: [Orbital; 2], [c, d]: [Orbital; 2]) -> Option<[Vec<f64>; 4]> {
        let left = |orbital| function(self.from, &self.left, orbital);
        let right = |orbital| function(self.to, &self.right, orbital);
        let bras = [(a, left(a)?), (b, left(b)?)];
        let kets = [(c, right(c)?), (d, right(d)?)];
        let cleaned = |(own, f): (Orbital, &[f64]), others: [(Orbital, &[f64]); 2]| -> Vec<f64> {
            let mut clean = f.to_vec();
            let [first, second] = others;
            let twice = first.0 == second.0;
            for (other, g) in others.into_iter().take(if twice { 1 } else { 2 }) {
                if other == own || other.l() != own.l() {
                    continue;
                }
                let half = 0.5 * self.common.product(f, g);
                for (value, g) in clean.iter_mut().zip(g) {
                    *value -= half * g;
                }
            }
            clean
        };
        let [a, b] = bras;
        let [c, d] = kets;
        Some([
            cleaned(a, kets),
            cleaned(b, kets),
            cleaned(c, bras),
            cleaned(d, bras),
        ])
    }

    /// Π ⟨e|e′⟩^{q_e} of the electrons that take no part when a and b are taken from `from`.
    fn spectators(&self, taken: [Orbital; 2]) -> f64 {
        let mut overlap = 1.0;
        for (e, f) in self.from.orbitals.iter().zip(&self.common.from) {
            let place = (self.to.orbitals.iter()).position(|other| other.orbital == e.orbital);
            let Some(g) = place.and_then(|place| self.common.to.get(place)) else {
                continue;
            };
            let gone = taken.iter().filter(|taken| **taken == e.orbital).count();
            let stay = (0..e.electrons).skip(gone).count();
            let product = self.common.product(f, g);
            overlap *= (0..stay).fold(1.0, |power, _| power * product);
        }
        overlap
    }
}

fn function<'f>(
    solution: &Solution,
    functions: &'f [Vec<f64>],
    orbital: Orbital,
) -> Option<&'f [f64]> {
    let place = (solution.orbitals.iter()).position(|known| known.orbital == orbital)?;
    functions.get(place).map(Vec::as_slice)
}

impl Solution {
    /// What core polarisation takes from F¹-like and G¹-like integrals of two electrons outside the
    /// core, α⟨a|w|b⟩², hartree; nothing without polarisation and within the core.
    pub fn polarised_exchange(&self, a: &RadialOrbital, b: &RadialOrbital) -> Option<f64> {
        let polarisation = self.atom.polarisation.as_ref()?;
        let inside = |orbital: &RadialOrbital| polarisation.core.contains(&orbital.orbital);
        if inside(a) || inside(b) {
            return None;
        }
        let parts = (a.p.iter().zip(&b.p)).zip(self.mesh.radii());
        let pull = self
            .mesh
            .integral(parts.map(|((f, g), &r)| f * g * polarisation.pull(r)));
        Some(polarisation.alpha * pull * pull)
    }
}
