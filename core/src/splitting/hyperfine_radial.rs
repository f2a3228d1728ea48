//! What the nucleus feels of one electron: magnetic and quadrupole elements ⟨½ℓj‖T‖½ℓ′j′⟩.
//!
//! With the large component P and the small one (α/2) S (P′ + κP/r), S = 1/M being that of the orbital's run
//! (1 without relativity),
//!
//! ⟨κ‖T¹‖κ′⟩ = −½ (κ + κ′) ⟨−κ‖C¹‖κ′⟩ ∫ [P S(P″ + κ′P″/r) + P″ S(P + κP/r)] r⁻² dr (P″ of κ′, slopes understood),
//! ⟨κ‖T²‖κ′⟩ = ⟨κ‖C²‖κ′⟩ ∫ (P P″ + small components) r⁻³ dr,
//!
//! in units in which T¹ without relativity is Σ [ℓ − √10 (s C²)¹] r⁻³ + (8π/3) |ψ(0)|² s. For s electrons the
//! first integral is the density at the nucleus, in the relativistic run averaged by S′ over the radius
//! Zα²/2 inside which the electron is fast; the charge of the nucleus is spread, its magnetism is not.
//!
//! The radial functions of a run are averages over j. With relativity each κ takes its own function in the
//! field of the run (Slater's average exchange), scaled by what the run's function and the average one in that
//! same field have of ⟨r⁻³⟩. So no relativistic factor is put on top, and nothing counts twice.
//!
//! Source: Lindgren and Rosén, Case Stud. At. Phys. 4, 93 (1974); Armstrong, *Theory of the Hyperfine Structure of
//! Free Atoms* (1971); Blügel et al., Phys. Rev. B 35, 3271 (1987) for S′.

use crate::angular::wigner_3j;
use crate::configuration::Orbital;
use crate::constants::FINE_STRUCTURE;
use crate::numerics::banded_eigen::eigenpair;
use crate::radial::hartree_fock::{RadialOrbital, Solution};
use crate::radial::mesh::{Block, Mesh, ORDER};
use crate::radial::multipole::between;

/// The radial function of one κ on a mesh.
#[derive(Clone, Debug)]
struct Function {
    kappa: i32,
    p: Vec<f64>,
    /// S(P′ + κP/r).
    small: Vec<f64>,
}

/// The functions of both j of an orbital.
#[derive(Clone, Debug)]
pub struct Functions {
    l: u8,
    own: Vec<Function>,
    overlap: f64,
    /// Whether small components have densities.
    relative: bool,
}

/// The κ of ℓ: j = ℓ − ½ first.
fn kappas(l: u8) -> Vec<i32> {
    let l = i32::from(l);
    if l > 0 { vec![l, -l - 1] } else { vec![-1] }
}

/// 2j.
fn two_j(kappa: i32) -> i32 {
    2 * kappa.abs() - 1
}

/// ∫ f g r⁻ᵏ dr.
fn integral(mesh: &Mesh, f: &[f64], g: &[f64], k: u32) -> f64 {
    let mut sum = 0.0;
    for ((f, g), (w, r)) in f.iter().zip(g).zip(mesh.weights().iter().zip(mesh.radii())) {
        let mut term = w * f * g;
        for _ in 0..k {
            term /= r;
        }
        sum += term;
    }
    sum
}

fn multiply(f: &mut [f64], factor: f64) {
    for f in f {
        *f *= factor;
    }
}

impl Functions {
    /// Of an orbital of a run; nothing where it is not occupied.
    pub fn of(run: &Solution, orbital: Orbital) -> Option<Functions> {
        let orbital = run.orbital(orbital)?;
        let l = orbital.orbital.l();
        let relative = run.atom.relativity;
        let inverse_cube = |coefficients: &[f64]| {
            let p = run.mesh.sample(run.mesh.values(), coefficients);
            integral(&run.mesh, &p, &p, 3)
        };
        let mut own = Vec::new();
        let average = match (relative, l) {
            (true, 1..) => in_field(run, orbital, None),
            _ => None,
        };
        for kappa in kappas(l) {
            let turned = match &average {
                Some(_) => in_field(run, orbital, Some(kappa)),
                None => None,
            };
            let coefficients = match (turned, &average) {
                (Some(mut turned), Some(average)) => {
                    let share = inverse_cube(&orbital.coefficients) / inverse_cube(average);
                    multiply(&mut turned, share.sqrt());
                    turned
                }
                _ if relative => orthogonal(run, orbital, kappa),
                _ => orbital.coefficients.clone(),
            };
            own.push(Function::new(
                &run.mesh,
                &coefficients,
                kappa,
                orbital,
                relative,
            ));
        }
        Some(Functions {
            l,
            own,
            overlap: 1.0,
            relative,
        })
    }

    /// Of the orbital that an electron of `to` is in where the one of `from` is in another, on the mesh of
    /// `from` and with the overlaps of all other electrons; nothing unless it is one electron's jump.
    pub fn beside(
        (from, a): (&Solution, Orbital),
        (to, b): (&Solution, Orbital),
    ) -> Option<Functions> {
        let overlap = between(2, (from, a), (to, b)).ok()?.overlap;
        let mass = from.orbital(a)?;
        let orbital = to.orbital(b)?;
        let l = b.l();
        let sampled = to
            .mesh
            .sample_at(&[&orbital.coefficients], from.mesh.radii());
        let coefficients = from.mesh.fit(sampled.first()?);
        let own = kappas(l)
            .into_iter()
            .map(|kappa| Function::new(&from.mesh, &coefficients, kappa, mass, false));
        Some(Functions {
            l,
            own: own.collect(),
            overlap,
            relative: from.atom.relativity,
        })
    }
}

impl Function {
    /// Normalised with its small component where that counts.
    fn new(
        mesh: &Mesh,
        coefficients: &[f64],
        kappa: i32,
        orbital: &RadialOrbital,
        relative: bool,
    ) -> Function {
        let mut p = mesh.sample(mesh.values(), coefficients);
        let mut small = small(mesh, coefficients, kappa, orbital);
        if relative {
            let large = integral(mesh, &p, &p, 0);
            let other = QUARTER_ALPHA_SQUARED * integral(mesh, &small, &small, 0);
            let scale = (large / (large + other)).sqrt();
            multiply(&mut p, scale);
            multiply(&mut small, scale);
        }
        Function { kappa, p, small }
    }
}

/// S(P′ + κP/r).
fn small(mesh: &Mesh, coefficients: &[f64], kappa: i32, orbital: &RadialOrbital) -> Vec<f64> {
    let mut small = mesh.sample(&mesh.slopes_with(kappa.into()), coefficients);
    for (small, mass) in small.iter_mut().zip(&orbital.inverse_mass) {
        *small *= mass;
    }
    small
}

/// An orbital made orthogonal to those below it with their small components.
///
/// The run has ∫ P P_b dr = 0 in place of ∫ (P P_b + small components) dr = 0, and so too much of the inner
/// functions at the nucleus: 9 % of the density of Cs 6s.
fn orthogonal(run: &Solution, orbital: &RadialOrbital, kappa: i32) -> Vec<f64> {
    let mesh = &run.mesh;
    let own = small(mesh, &orbital.coefficients, kappa, orbital);
    let mut coefficients = orbital.coefficients.clone();
    for below in &run.orbitals {
        if below.orbital.l() != orbital.orbital.l() || below.orbital.n() >= orbital.orbital.n() {
            continue;
        }
        let inner = small(mesh, &below.coefficients, kappa, below);
        let with = |f: &[f64]| QUARTER_ALPHA_SQUARED * integral(mesh, &inner, f, 0);
        let share = with(&own) / (1.0 + with(&inner));
        for (c, b) in coefficients.iter_mut().zip(&below.coefficients) {
            *c -= share * b;
        }
    }
    coefficients
}

/// (α/2)².
const QUARTER_ALPHA_SQUARED: f64 = 0.25 * FINE_STRUCTURE.value * FINE_STRUCTURE.value;

/// The function of an orbital in the local field of its run: of one κ, or averaged over j; nothing where that
/// field does not hold it.
fn in_field(run: &Solution, orbital: &RadialOrbital, kappa: Option<i32>) -> Option<Vec<f64>> {
    let mesh = &run.mesh;
    let l = i32::from(orbital.orbital.l());
    let half_mass: Vec<f64> = (orbital.inverse_mass.iter().zip(mesh.weights()))
        .map(|(mass, weight)| 0.5 * mass * weight)
        .collect();
    // Without κ: P′ − P/r and a centrifugal term.
    let (blocks, centrifugal): (Vec<Block>, i32) = match kappa {
        Some(kappa) => (mesh.slopes_with(kappa.into()), 0),
        None => (mesh.slopes_with(-1.0), l * (l + 1)),
    };
    let local = (orbital.potential.iter().zip(&run.average_exchange))
        .zip(mesh.weights().iter().zip(&half_mass))
        .zip(mesh.radii());
    let local: Vec<f64> = local
        .map(|(((v, x), (w, m)), r)| (v + x) * w + m * f64::from(centrifugal) / (r * r))
        .collect();
    let mut operator = mesh.assemble(&blocks, &half_mass);
    operator.add(1.0, &mesh.assemble(mesh.values(), &local));
    let start = usize::from(orbital.orbital.l())
        .saturating_add(1)
        .min(ORDER - 2);
    let end = mesh.size().saturating_sub(1);
    let nodes = usize::from(orbital.orbital.n())
        .saturating_sub(usize::from(orbital.orbital.l()).saturating_add(1));
    let z = f64::from(run.atom.z);
    let part = mesh.metric().part(start, end);
    let found = eigenpair(&operator.part(start, end), &part, nodes, -z * z, 0.0)?;
    let mut coefficients = vec![0.0; mesh.size()];
    for (to, from) in coefficients.iter_mut().skip(start).zip(found.vector) {
        *to = from;
    }
    // As the orbital's own sign.
    let p = mesh.sample(mesh.values(), &coefficients);
    if integral(mesh, &p, &orbital.p, 0) < 0.0 {
        multiply(&mut coefficients, -1.0);
    }
    Some(coefficients)
}

/// One reduced element ⟨½ℓj‖T^K‖½ℓ′j′⟩, spin first in the coupling, with its 2j and 2j′.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Element {
    /// 2j.
    pub two_j: i32,
    /// 2j′.
    pub two_jp: i32,
    /// The element, a₀⁻³.
    pub value: f64,
}

/// All elements of T^K between two orbitals, K = 1 or 2, on the mesh of both.
pub fn elements(mesh: &Mesh, a: &Functions, c: &Functions, rank: u8) -> Vec<Element> {
    let mut found = Vec::new();
    for bra in &a.own {
        for ket in &c.own {
            let (two_j, two_jp) = (two_j(bra.kappa), two_j(ket.kappa));
            // (−1)^(j+½) √[(2j+1)(2j′+1)] (j K j′; ½ 0 −½), orbit first; each change of order takes
            // (−1)^(ℓ+½−j).
            let three = wigner_3j(two_j, 2 * i32::from(rank), two_jp, 1, 0, -1);
            let root = (f64::from(two_j + 1) * f64::from(two_jp + 1)).sqrt();
            let order = |l: u8, two_j: i32| (2 * i32::from(l) + 1 - two_j) / 2;
            let phase = (two_j + 1) / 2 + order(a.l, two_j) + order(c.l, two_jp);
            let angular = if phase % 2 == 0 { root } else { -root } * three;
            let with = |f: &[f64], g: &[f64], k: u32| integral(mesh, f, g, k);
            let radial = if rank == 1 {
                let sum = with(&bra.p, &ket.small, 2) + with(&bra.small, &ket.p, 2);
                -0.5 * f64::from(bra.kappa + ket.kappa) * sum
            } else {
                let share = if a.relative {
                    QUARTER_ALPHA_SQUARED
                } else {
                    0.0
                };
                with(&bra.p, &ket.p, 3) + share * with(&bra.small, &ket.small, 3)
            };
            found.push(Element {
                two_j,
                two_jp,
                value: angular * radial * a.overlap * c.overlap,
            });
        }
    }
    found
}
