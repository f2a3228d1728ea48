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
//! The empty orbitals are all eigenfunctions, on the splines, of the field that an electron of the
//! subshell sees, exchange by Slater's average, orthogonal to what is occupied. Left out: states close by
//! or below, which have to be mixed in; single electrons that leave the subshell, third order, and what
//! three electrons do together.
//!
//! Source: Lindgren and Morrison, *Atomic Many-Body Theory* (1986), chapters 9 and 13; the diagrams
//! reduced for LS terms here.

use super::hartree_fock::{RadialOrbital, Solution};
use super::mesh::Mesh;
use crate::angular::{wigner_3j, wigner_6j};
use crate::numerics::generalised::{full, generalised_eigensystem, lift};

/// ℓ of empty orbitals at most.
const HIGHEST: u8 = 6;
/// Empty orbitals above this energy, in hartree, are left out.
const TOP: f64 = 60.0;
/// States less than this above the one in question are left out, hartree: no perturbation is small there,
/// and 4s² beside 3d² has to be mixed in.
const LEAST: f64 = 0.1;
/// Where occupied orbitals of equal ℓ are moved out of the way, hartree.
const ASIDE: f64 = 1e6;

/// The change of one term of ℓ², hartree.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct PairEnergy {
    /// S.
    pub s: i32,
    /// L.
    pub l: i32,
    /// Both electrons in empty orbitals.
    pub pair: f64,
    /// Two electrons of full subshells in the places of both.
    pub exclusion: f64,
    /// Full subshells in between.
    pub screening: f64,
}

/// An orbital that is empty or full.
struct Partner {
    l: i32,
    energy: f64,
    /// P at the points.
    p: Vec<f64>,
    /// P_ℓ P r_<^k/r_>^(k+1), by k.
    fields: Vec<Vec<f64>>,
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

impl Solution {
    /// The change of every term of two electrons in the subshell; nothing where the field has no
    /// functions to compute it with.
    pub fn pair_energies(&self, orbital: &RadialOrbital) -> Option<Vec<PairEnergy>> {
        let highest = HIGHEST.max(orbital.orbital.l());
        let rank = usize::from(orbital.orbital.l()) + usize::from(highest);
        let mesh = Mesh::new(
            self.mesh.breaks().to_vec(),
            &self.atom.nucleus.kinks(),
            rank,
        )?;
        let l = i32::from(orbital.orbital.l());
        let mut empty: Vec<Partner> = Vec::new();
        for other in 0..=highest {
            empty.extend(self.empty(&mesh, orbital, other)?);
        }
        let full = |o: &&RadialOrbital| o.electrons == o.orbital.capacity();
        let mut cores: Vec<Partner> = (self.orbitals.iter().filter(full))
            .map(|core| Partner {
                l: i32::from(core.orbital.l()),
                energy: core.energy,
                p: core.p.clone(),
                fields: Vec::new(),
            })
            .collect();
        for partner in empty.iter_mut().chain(&mut cores) {
            partner.fields = fields(&mesh, orbital, partner);
        }
        let mut terms: Vec<PairEnergy> = (0..=2 * l)
            .map(|total| PairEnergy {
                // Antisymmetric: L + S is even.
                s: total % 2,
                l: total,
                pair: 0.0,
                exclusion: 0.0,
                screening: 0.0,
            })
            .collect();
        for_pairs(&mesh, orbital, &empty, |term, square, energies| {
            let gap = energies - 2.0 * orbital.energy;
            if let (Some(term), true) = (terms.get_mut(term), gap > LEAST) {
                term.pair -= square / gap;
            }
        });
        for_pairs(&mesh, orbital, &cores, |term, square, energies| {
            let gap = 2.0 * orbital.energy - energies;
            if let (Some(term), true) = (terms.get_mut(term), gap > LEAST) {
                term.exclusion -= square / gap;
            }
        });
        screening_of_pairs(&mesh, orbital, (&cores, &empty), &mut terms);
        Some(terms)
    }

    /// The empty orbitals of one ℓ.
    fn empty(&self, mesh: &Mesh, orbital: &RadialOrbital, l: u8) -> Option<Vec<Partner>> {
        let start = (usize::from(l) + 1).min(super::mesh::ORDER - 2);
        let end = mesh.size().checked_sub(1)?;
        let weights = mesh.weights();
        let slopes: Vec<f64> = (orbital.inverse_mass.iter().zip(weights))
            .map(|(m, w)| 0.5 * m * w)
            .collect();
        let centrifugal = f64::from(l) * (f64::from(l) + 1.0);
        let mut values: Vec<f64> = (orbital.potential.iter().zip(&self.average_exchange))
            .zip(weights)
            .map(|((v, x), w)| (v + x) * w)
            .collect();
        for ((value, half), r) in values.iter_mut().zip(&slopes).zip(mesh.radii()) {
            *value += half * centrifugal / (r * r);
        }
        let mut banded = mesh.assemble(&mesh.slopes_with(-1.0), &slopes);
        banded.add(1.0, &mesh.assemble(mesh.values(), &values));
        let mut matrix = full(&banded.part(start, end));
        for other in self.orbitals.iter().filter(|o| o.orbital.l() == l) {
            let dual = mesh.metric().times(&other.coefficients);
            lift(&mut matrix, ASIDE, dual.get(start..end)?);
        }
        let factors = mesh.metric().part(start, end).factorise();
        let system = generalised_eigensystem(matrix, &factors)?;
        let mut found = Vec::new();
        for (&energy, column) in system.values.iter().zip(system.vectors.column_iter()) {
            if energy > TOP {
                break;
            }
            let mut whole = vec![0.0; mesh.size()];
            whole
                .get_mut(start..end)?
                .copy_from_slice(column.as_slice());
            found.push(Partner {
                l: i32::from(l),
                energy,
                p: mesh.sample(mesh.values(), &whole),
                fields: Vec::new(),
            });
        }
        Some(found)
    }
}

/// The fields of P_ℓ P by rank, empty where the angular factor vanishes.
fn fields(mesh: &Mesh, orbital: &RadialOrbital, partner: &Partner) -> Vec<Vec<f64>> {
    let l = i32::from(orbital.orbital.l());
    let density: Vec<f64> = (orbital.p.iter().zip(&partner.p))
        .map(|(p, s)| p * s)
        .collect();
    (0..=l + partner.l)
        .zip(0_usize..)
        .map(|(k, rank)| {
            let mut field = Vec::new();
            if reduced(l, k, partner.l) != 0.0 {
                field.resize(density.len(), 0.0);
                mesh.add_field(rank, 1.0, &density, &mut field);
            }
            field
        })
        .collect()
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

/// Calls with the place of each term, Σ A_rs² and ε_r + ε_s over every pair of these orbitals, r before s
/// and s before r together.
fn for_pairs(
    mesh: &Mesh,
    orbital: &RadialOrbital,
    partners: &[Partner],
    mut add: impl FnMut(usize, f64, f64),
) {
    let l = i32::from(orbital.orbital.l());
    let mut known: Option<((i32, i32), Amplitudes)> = None;
    for (place, s) in partners.iter().enumerate() {
        let probe: Vec<f64> = (orbital.p.iter().zip(&s.p))
            .zip(mesh.weights())
            .map(|((p, s), w)| p * s * w)
            .collect();
        for (other, r) in partners.iter().enumerate().take(place + 1) {
            if (r.l + s.l) % 2 != 0 {
                continue;
            }
            let shells = (r.l, s.l);
            if known.as_ref().is_none_or(|(of, _)| *of != shells) {
                known = Some((shells, pair_amplitudes(l, r.l, s.l)));
            }
            let Some((_, ranks)) = &known else { continue };
            let mut amplitudes = vec![0.0; usize::try_from(2 * l + 1).unwrap_or(0)];
            for (rank, factors) in ranks {
                let field = r.fields.get(*rank).map(Vec::as_slice).unwrap_or_default();
                let integral: f64 = field.iter().zip(&probe).map(|(u, p)| u * p).sum();
                for (amplitude, factor) in amplitudes.iter_mut().zip(factors) {
                    *amplitude += factor * integral;
                }
            }
            let orders = if other == place { 1.0 } else { 2.0 };
            for (term, amplitude) in amplitudes.iter().enumerate() {
                add(term, orders * amplitude * amplitude, r.energy + s.energy);
            }
        }
    }
}

/// W_κ summed over κ, of every term of ℓ², for a full subshell n and an empty orbital r; `direct` is
/// R^κ(ℓn,ℓr) and `exchanged` R^k(ℓn,rℓ) by their ranks.
pub fn screened_pairs(
    [l, n, l_r]: [i32; 3],
    direct: impl Fn(i32) -> f64,
    exchanged: impl Fn(i32) -> f64,
) -> Vec<f64> {
    let mut sums = vec![0.0; usize::try_from(2 * l + 1).unwrap_or(0)];
    for kappa in (n - l_r).abs()..=(2 * l).min(n + l_r) {
        let factor = reduced(l, kappa, l) * reduced(n, kappa, l_r);
        let v = if factor == 0.0 {
            0.0
        } else {
            factor * direct(kappa)
        };
        let mut y = 0.0;
        for k in 0..=(l + l_r).min(n + l) {
            let factor = reduced(l, k, l_r) * reduced(n, k, l);
            if factor != 0.0 {
                let sign = if (kappa + k) % 2 == 0 { 1.0 } else { -1.0 };
                y += sign * factor * six(l, l, kappa, n, l_r, k) * exchanged(k);
            }
        }
        y *= f64::from(2 * kappa + 1);
        let (still, turned) = (2.0 * (v - 0.5 * y) * (v - 0.5 * y), 0.5 * y * y);
        for (total, sum) in (0_i32..).zip(&mut sums) {
            let (s, sign) = if total % 2 == 0 { (0, 1.0) } else { (1, -1.0) };
            let spins = f64::from(2 * s * (s + 1) - 3);
            let turning = sign * six(total, l, l, kappa, l, l) / f64::from(2 * kappa + 1);
            *sum += (still + turned * spins) * turning;
        }
    }
    sums
}

/// −Σ 2W_κ/(ε_r − ε_n).
fn screening_of_pairs(
    mesh: &Mesh,
    orbital: &RadialOrbital,
    (cores, empty): (&[Partner], &[Partner]),
    terms: &mut [PairEnergy],
) {
    let l = i32::from(orbital.orbital.l());
    let density: Vec<f64> = orbital.p.iter().map(|p| p * p).collect();
    let own: Vec<Vec<f64>> = (0_usize..)
        .zip(0..=2 * l)
        .map(|(rank, _)| {
            let mut field = vec![0.0; density.len()];
            mesh.add_field(rank, 1.0, &density, &mut field);
            field
        })
        .collect();
    let rank = |k: i32| usize::try_from(k).unwrap_or(usize::MAX);
    for core in cores {
        let far = |r: &&Partner| r.energy - core.energy > LEAST;
        for r in empty.iter().filter(|r| (r.l + core.l) % 2 == 0).filter(far) {
            let with = |field: Option<&Vec<f64>>, f: &[f64], g: &[f64]| {
                let parts = field.into_iter().flatten().zip(f.iter().zip(g));
                mesh.integral(parts.map(|(u, (f, g))| u * f * g))
            };
            let sums = screened_pairs(
                [l, core.l, r.l],
                |k| with(own.get(rank(k)), &core.p, &r.p),
                |k| with(r.fields.get(rank(k)), &core.p, &orbital.p),
            );
            for (term, sum) in terms.iter_mut().zip(sums) {
                term.screening -= 2.0 * sum / (r.energy - core.energy);
            }
        }
    }
}
