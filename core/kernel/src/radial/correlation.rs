//! What the electrons' keeping apart does to the terms of ℓ²: second order of perturbation theory.
//!
//! Average functions leave out that electrons avoid each other. To second order the energy of a term
//! of two electrons of one subshell changes by
//!
//! ΔE(LS) = −Σ_rs A_rs²/(ε_r + ε_s − 2ε) − Σ_nm A_nm²/(2ε − ε_n − ε_m) − Σ_{κnr} 2W_κ/(ε_r − ε_n),
//!
//! A_rs = Σ_k {L ℓ ℓ; k ℓ_r ℓ_s} ⟨ℓ‖C^k‖r⟩⟨ℓ‖C^k‖s⟩ R^k(ℓℓ,rs), both electrons in empty orbitals r and s;
//! A_nm the same with full subshells n and m, two electrons of which would take the places of ℓ²;
//! W_κ = [2(v_κ − ½y_κ)² + ½y_κ² (2S(S+1) − 3)] (−1)^L {L ℓ ℓ; κ ℓ ℓ}/(2κ+1), an electron of a full subshell n
//! in an empty orbital r, pulled there by the one electron and felt by the other:
//! v_κ = ⟨ℓ‖C^κ‖ℓ⟩⟨n‖C^κ‖r⟩ R^κ(ℓn,ℓr),
//! y_κ = (2κ+1) Σ_k (−1)^(κ+k) {ℓ ℓ κ; n r k} ⟨ℓ‖C^k‖r⟩⟨n‖C^k‖ℓ⟩ R^k(ℓn,rℓ).
//! The spin factor is that of σ₁·σ₂.
//!
//! The empty orbitals are all eigenfunctions, on splines, of the field that an electron of the
//! subshell sees, exchange by Slater's average, orthogonal to what is occupied. Since every integral holds
//! P_ℓ, the splines reach no farther than it does and need no finer mesh than its own scale: 23 functions
//! for each ℓ give ΔF^k within 1 % of those of 47 in a larger box (C to U). Left out: states close by
//! or below, which have to be mixed in; single electrons that leave the subshell, third order, and what
//! three electrons do together.
//!
//! Source: Lindgren and Morrison, *Atomic Many-Body Theory* (1986), chapters 9 and 13; the diagrams
//! reduced for LS terms here.

use super::hartree_fock::{RadialOrbital, Solution};
use super::mesh::{Mesh, ORDER};
use crate::angular::{wigner_3j, wigner_6j};
use crate::numerics::generalised::{full, generalised_eigensystem, lift};
use crate::numerics::lanes::dot;

/// ℓ of empty orbitals at most.
const HIGHEST: u8 = 6;
/// Intervals of the mesh, their ends at R(i/N)³.
const INTERVALS: u32 = 16;
/// R is where P_ℓ has fallen to this part of its maximum.
const FALLEN: f64 = 1e-3;
/// States less than this above the one in question are left out, hartree: no perturbation is small there,
/// and 4s² beside 3d² has to be mixed in.
const LEAST: f64 = 0.1;
/// Where occupied orbitals of equal ℓ are moved out of the way, hartree.
const ASIDE: f64 = 1e6;

/// An orbital that is empty or full.
struct Partner {
    energy: f64,
    /// P at the points.
    p: Vec<f64>,
    /// P_ℓ P r_<^k/r_>^(k+1), by k from the least that ℓ and its own allow, in steps of two.
    fields: Vec<Vec<f64>>,
}

/// Orbitals of one ℓ.
struct Partners {
    l: i32,
    all: Vec<Partner>,
}

/// ⟨ℓ‖C^k‖ℓ′⟩.
fn reduced(l: i32, k: i32, other: i32) -> f64 {
    let width = f64::from((2 * l + 1) * (2 * other + 1)).sqrt();
    let sign = if l % 2 == 0 { 1.0 } else { -1.0 };
    sign * width * wigner_3j(2 * l, 2 * k, 2 * other, 0, 0, 0)
}

/// {a b c; d e f}.
fn six(a: i32, b: i32, c: i32, d: i32, e: i32, f: i32) -> f64 {
    wigner_6j(2 * a, 2 * b, 2 * c, 2 * d, 2 * e, 2 * f)
}

/// The ranks k of a multipole that joins two ℓ.
fn ranks(l: i32, other: i32) -> impl Iterator<Item = (usize, i32)> {
    let least = (l - other).abs();
    (0..).zip((least..=l + other).step_by(2))
}

/// A run on the coarse mesh of one subshell.
struct Seen<'a> {
    run: &'a Solution,
    l: i32,
    mesh: Mesh,
    /// P_ℓ at the points.
    p: Vec<f64>,
    /// P of every orbital of the run at the points.
    all: Vec<Vec<f64>>,
    /// The local potential with average exchange, at the points.
    potential: Vec<f64>,
    /// 1/M at the points.
    inverse_mass: Vec<f64>,
}

impl Solution {
    /// The change of every term of two electrons in the subshell by L, hartree: S is 0 where L is even,
    /// otherwise 1. Nothing where there are no functions to compute it with.
    pub fn pair_energies(&self, orbital: &RadialOrbital) -> Option<Vec<f64>> {
        let seen = Seen::new(self, orbital)?;
        let mut empty: Vec<Partners> = Vec::new();
        for other in 0..=HIGHEST.max(orbital.orbital.l()) {
            empty.push(seen.empty(other)?);
        }
        let mut cores: Vec<Partners> = (0..=HIGHEST.into())
            .map(|l| Partners { l, all: Vec::new() })
            .collect();
        for (core, p) in self.orbitals.iter().zip(&seen.all) {
            if core.electrons == core.orbital.capacity()
                && let Some(of_l) = cores.get_mut(usize::from(core.orbital.l()))
            {
                of_l.all.push(seen.partner(of_l.l, core.energy, p.clone()));
            }
        }
        let twice = 2.0 * orbital.energy;
        let pair = seen.pairs(&empty, twice, 1.0);
        let exclusion = seen.pairs(&cores, twice, -1.0);
        let screening = seen.screening(&cores, &empty);
        let parts = pair.iter().zip(&exclusion).zip(&screening);
        Some(parts.map(|((pair, ex), sc)| -(pair + ex + sc)).collect())
    }
}

impl<'a> Seen<'a> {
    fn new(run: &'a Solution, of: &RadialOrbital) -> Option<Self> {
        let l = of.orbital.l();
        let largest = of.p.iter().fold(0.0_f64, |most, p| most.max(p.abs()));
        let inside = of.p.iter().rposition(|p| p.abs() > FALLEN * largest)?;
        let end = *run.mesh.radii().get(inside)?;
        let part = |i: u32| f64::from(i) / f64::from(INTERVALS);
        let breaks = (0..=INTERVALS).map(part).map(|x| end * x * x * x).collect();
        let rank = usize::from(l) + usize::from(HIGHEST.max(l));
        let mesh = Mesh::new(breaks, &[], rank)?;
        let radii = mesh.radii();
        // Smooth down to the nucleus.
        let times_r: Vec<f64> = (of.potential.iter().zip(&run.average_exchange))
            .zip(run.mesh.radii())
            .map(|((v, x), r)| (v + x) * r)
            .collect();
        let potential = run.mesh.fit(&times_r);
        let inverse_mass = run.mesh.fit(&of.inverse_mass);
        let mut functions: Vec<&[f64]> = vec![&potential, &inverse_mass, &of.coefficients];
        functions.extend(
            run.orbitals
                .iter()
                .map(|other| other.coefficients.as_slice()),
        );
        let mut sampled = run.mesh.sample_at(&functions, radii).into_iter();
        let mut potential = sampled.next()?;
        potential.iter_mut().zip(radii).for_each(|(v, r)| *v /= r);
        Some(Seen {
            l: l.into(),
            inverse_mass: sampled.next()?,
            p: sampled.next()?,
            all: sampled.collect(),
            run,
            potential,
            mesh,
        })
    }

    fn partner(&self, l: i32, energy: f64, p: Vec<f64>) -> Partner {
        let density: Vec<f64> = self.p.iter().zip(&p).map(|(p, s)| p * s).collect();
        let field = |(_, k)| {
            let mut field = vec![0.0; density.len()];
            let rank = usize::try_from(k).unwrap_or(usize::MAX);
            self.mesh.add_field(rank, 1.0, &density, &mut field);
            field
        };
        Partner {
            energy,
            fields: ranks(self.l, l).map(field).collect(),
            p,
        }
    }

    /// The empty orbitals of one ℓ.
    fn empty(&self, l: u8) -> Option<Partners> {
        let mesh = &self.mesh;
        let start = (usize::from(l) + 1).min(ORDER - 2);
        let end = mesh.size().checked_sub(1)?;
        let weights = mesh.weights();
        let slopes: Vec<f64> = (self.inverse_mass.iter().zip(weights))
            .map(|(m, w)| 0.5 * m * w)
            .collect();
        let centrifugal = f64::from(l) * (f64::from(l) + 1.0);
        let mut values: Vec<f64> = (self.potential.iter().zip(weights))
            .map(|(v, w)| v * w)
            .collect();
        for ((value, half), r) in values.iter_mut().zip(&slopes).zip(mesh.radii()) {
            *value += half * centrifugal / (r * r);
        }
        let mut banded = mesh.assemble(&mesh.slopes_with(-1.0), &slopes);
        banded.add(1.0, &mesh.assemble(mesh.values(), &values));
        let mut matrix = full(&banded.part(start, end));
        for (other, p) in self.run.orbitals.iter().zip(&self.all) {
            if other.orbital.l() == l {
                let weighted: Vec<f64> = p.iter().zip(weights).map(|(p, w)| p * w).collect();
                let dual = mesh.project(mesh.values(), &weighted);
                lift(&mut matrix, ASIDE, dual.get(start..end)?);
            }
        }
        let factors = mesh.metric().part(start, end).factorise();
        let system = generalised_eigensystem(matrix, &factors)?;
        let mut all = Vec::new();
        for (&energy, column) in system.values.iter().zip(system.vectors.column_iter()) {
            let mut whole = vec![0.0; mesh.size()];
            whole
                .get_mut(start..end)?
                .copy_from_slice(column.as_slice());
            let p = mesh.sample(mesh.values(), &whole);
            all.push(self.partner(l.into(), energy, p));
        }
        Some(Partners { l: l.into(), all })
    }

    /// Σ A_rs²/gap of every term over every pair of these orbitals above (or with −1 below) 2ε whose gap is
    /// large enough.
    fn pairs(&self, partners: &[Partners], twice: f64, above: f64) -> Vec<f64> {
        let mut sums = vec![0.0; usize::try_from(2 * self.l + 1).unwrap_or(0)];
        let mut amplitudes = sums.clone();
        for (place, group) in partners.iter().enumerate() {
            let others = partners.iter().take(place + 1);
            for other in others.filter(|other| (other.l + group.l) % 2 == 0) {
                let factors = pair_amplitudes(self.l, other.l, group.l);
                let least = (self.l - other.l).abs();
                let first = (group.l - self.l).abs().saturating_sub(least) / 2;
                let first = usize::try_from(first.max(0)).unwrap_or(0);
                for (number, s) in group.all.iter().enumerate() {
                    let probe: Vec<f64> = (self.p.iter().zip(&s.p))
                        .zip(self.mesh.weights())
                        .map(|((p, s), w)| p * s * w)
                        .collect();
                    let own = other.l == group.l;
                    let count = if own { number + 1 } else { other.all.len() };
                    for (of_other, r) in other.all.iter().enumerate().take(count) {
                        let gap = above * (r.energy + s.energy - twice);
                        if gap <= LEAST {
                            continue;
                        }
                        amplitudes.fill(0.0);
                        for (field, (_, factors)) in r.fields.iter().skip(first).zip(&factors) {
                            let integral = dot(field, &probe);
                            for (amplitude, factor) in amplitudes.iter_mut().zip(factors) {
                                *amplitude += factor * integral;
                            }
                        }
                        // r before s and s before r.
                        let orders = if own && of_other == number { 1.0 } else { 2.0 };
                        for (sum, amplitude) in sums.iter_mut().zip(&amplitudes) {
                            *sum += orders * amplitude * amplitude / gap;
                        }
                    }
                }
            }
        }
        sums
    }

    /// Σ 2W_κ/(ε_r − ε_n) of every term.
    fn screening(&self, cores: &[Partners], empty: &[Partners]) -> Vec<f64> {
        let mut sums = vec![0.0; usize::try_from(2 * self.l + 1).unwrap_or(0)];
        let density: Vec<f64> = self.p.iter().map(|p| p * p).collect();
        let own: Vec<Vec<f64>> = (0..=usize::try_from(2 * self.l).unwrap_or(0))
            .map(|rank| {
                let mut field = vec![0.0; density.len()];
                self.mesh.add_field(rank, 1.0, &density, &mut field);
                field
            })
            .collect();
        for group in cores {
            for n in &group.all {
                let weigh = |with: &[f64]| -> Vec<f64> {
                    let parts = n.p.iter().zip(with).zip(self.mesh.weights());
                    parts.map(|((n, p), w)| n * p * w).collect()
                };
                let exchanged = weigh(&self.p);
                let direct: Vec<Vec<f64>> = own.iter().map(|field| weigh(field)).collect();
                for other in empty.iter().filter(|other| (other.l + group.l) % 2 == 0) {
                    let coefficients = Screening::new([self.l, group.l, other.l]);
                    for r in &other.all {
                        let gap = r.energy - n.energy;
                        if gap <= LEAST {
                            continue;
                        }
                        let found = coefficients.sums(
                            |kappa| direct.get(kappa).map_or(0.0, |field| dot(field, &r.p)),
                            |k| r.fields.get(k).map_or(0.0, |field| dot(field, &exchanged)),
                        );
                        for (sum, found) in sums.iter_mut().zip(found) {
                            *sum += 2.0 * found / gap;
                        }
                    }
                }
            }
        }
        sums
    }
}

/// For each rank k the factor of R^k in every term of ℓ².
pub type Amplitudes = Vec<(usize, Vec<f64>)>;

/// A_rs of every term of ℓ² from R^k(ℓℓ,rs), by the rank k.
///
/// The phase common to all k is left out.
pub fn pair_amplitudes(l: i32, l_r: i32, l_s: i32) -> Amplitudes {
    let highest = l + l_r.min(l_s);
    let ranks = (0..=highest).zip(0_usize..);
    ranks
        .filter_map(|(k, rank)| {
            let factor = reduced(l, k, l_r) * reduced(l, k, l_s);
            let of_terms = (0..=2 * l).map(|total| factor * six(total, l, l, k, l_r, l_s));
            (factor != 0.0).then(|| (rank, of_terms.collect()))
        })
        .collect()
}

/// The angular part of W_κ for a full subshell n and an empty orbital r.
pub struct Screening {
    /// For each κ its factor of R^κ(ℓn,ℓr), those of R^k(ℓn,rℓ), and what W_κ is multiplied by in each term.
    ranks: Vec<(usize, f64, Vec<f64>, Vec<f64>)>,
}

impl Screening {
    /// From ℓ, n's and r's.
    pub fn new([l, n, l_r]: [i32; 3]) -> Self {
        let of_kappa = |kappa: i32| {
            let direct = reduced(l, kappa, l) * reduced(n, kappa, l_r);
            let exchanged = ranks(l, l_r).map(|(_, k)| {
                let factor = reduced(l, k, l_r) * reduced(n, k, l);
                let sign = if (kappa + k) % 2 == 0 { 1.0 } else { -1.0 };
                let width = f64::from(2 * kappa + 1);
                width * sign * factor * six(l, l, kappa, n, l_r, k)
            });
            let turning = (0..=2 * l).map(|total| {
                let sign = if total % 2 == 0 { 1.0 } else { -1.0 };
                sign * six(total, l, l, kappa, l, l) / f64::from(2 * kappa + 1)
            });
            (
                usize::try_from(kappa).unwrap_or(usize::MAX),
                direct,
                exchanged.collect(),
                turning.collect(),
            )
        };
        let kappas = (n - l_r).abs()..=(2 * l).min(n + l_r);
        Screening {
            ranks: kappas.map(of_kappa).collect(),
        }
    }

    /// W_κ summed over κ, of every term of ℓ²; `direct` is R^κ(ℓn,ℓr) by κ, and `exchanged` R^k(ℓn,rℓ) by
    /// the place of k among |ℓ − ℓ_r|, |ℓ − ℓ_r| + 2, … .
    pub fn sums(
        &self,
        direct: impl Fn(usize) -> f64,
        exchanged: impl Fn(usize) -> f64,
    ) -> Vec<f64> {
        let mut sums: Vec<f64> = Vec::new();
        let mut integrals: Vec<f64> = Vec::new();
        for (kappa, factor, factors, turning) in &self.ranks {
            if integrals.is_empty() {
                integrals = (0..factors.len()).map(&exchanged).collect();
                sums.resize(turning.len(), 0.0);
            }
            let v = if *factor == 0.0 {
                0.0
            } else {
                factor * direct(*kappa)
            };
            let y: f64 = factors.iter().zip(&integrals).map(|(f, r)| f * r).sum();
            let (still, turned) = (2.0 * (v - 0.5 * y) * (v - 0.5 * y), 0.5 * y * y);
            for ((total, sum), turning) in (0..).zip(&mut sums).zip(turning) {
                // 2S(S + 1) − 3 with S of the parity of L.
                let spins = if total % 2 == 0 { -3.0 } else { 1.0 };
                *sum += (still + turned * spins) * turning;
            }
        }
        sums
    }
}
