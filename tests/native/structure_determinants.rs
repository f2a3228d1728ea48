//! Levels of mixing configurations against sums over Slater determinants.
//!
//! The reference is ours but shares nothing with the method: spin-orbitals with definite m, matrix
//! elements by Condon and Shortley's c^k (*The Theory of Atomic Spectra*, 1935, chapter 6), one
//! matrix of all determinants of one M. Radial integrals are arbitrary numbers with the
//! symmetry of R^k and no other, so every phase between configurations counts.

use nalgebra::DMatrix;
use rungline_core::angular::wigner_3j;
use rungline_core::numerics::symmetric::{Eigensystem, eigensystem};
use rungline_core::structure::{
    Basis, Hamiltonian, Integral, Levels, Multipole, Parameter, amplitudes,
};
use rungline_tests::{Row, report};
use std::collections::BTreeMap;

#[derive(Clone, Copy)]
struct SpinOrbital {
    shell: usize,
    l: i32,
    m: i32,
    two_sigma: i32,
}

/// A number between −1 and 1 that only its key decides.
fn arbitrary(key: &[usize]) -> f64 {
    let mut state = 0x2545_F491_4F6C_DD1D_u64;
    for &part in key {
        state = (state ^ (part as u64 + 1)).wrapping_mul(0x9E37_79B9_7F4A_7C15);
        state ^= state >> 29;
    }
    (state >> 11) as f64 / (1_u64 << 52) as f64 - 1.0
}

/// R^k(ab,cd), unchanged when a and c, b and d, or both pairs change places.
fn radial(k: usize, [a, b, c, d]: [usize; 4]) -> f64 {
    let one = (a.min(c), a.max(c));
    let two = (b.min(d), b.max(d));
    let (one, two) = (one.min(two), one.max(two));
    arbitrary(&[1, k, one.0, one.1, two.0, two.1])
}

/// ⟨a|h|c⟩.
fn single(a: usize, c: usize) -> f64 {
    arbitrary(&[2, a.min(c), a.max(c)])
}

/// ⟨a|r|c⟩.
fn length(a: usize, c: usize) -> f64 {
    arbitrary(&[4, a.min(c), a.max(c)])
}

fn zeta(a: usize) -> f64 {
    0.3 * arbitrary(&[3, a])
}

/// c^k(ℓm,ℓ′m′).
fn gaunt(k: i32, a: SpinOrbital, b: SpinOrbital) -> f64 {
    let sign = if a.m % 2 == 0 { 1.0 } else { -1.0 };
    sign * f64::from((2 * a.l + 1) * (2 * b.l + 1)).sqrt()
        * wigner_3j(2 * a.l, 2 * k, 2 * b.l, 0, 0, 0)
        * wigner_3j(2 * a.l, 2 * k, 2 * b.l, -2 * a.m, 2 * (a.m - b.m), 2 * b.m)
}

/// ⟨rs|1/r₁₂|pq⟩.
fn repulsion(r: SpinOrbital, s: SpinOrbital, p: SpinOrbital, q: SpinOrbital) -> f64 {
    if r.two_sigma != p.two_sigma || s.two_sigma != q.two_sigma || r.m + s.m != p.m + q.m {
        return 0.0;
    }
    (0..=(r.l + p.l).min(s.l + q.l))
        .map(|k| {
            gaunt(k, r, p)
                * gaunt(k, q, s)
                * radial(k as usize, [r.shell, s.shell, p.shell, q.shell])
        })
        .sum()
}

/// ⟨r|h + ζ ℓ·s|p⟩.
fn one_body(r: SpinOrbital, p: SpinOrbital) -> f64 {
    let mut value = 0.0;
    if r.l == p.l && r.m == p.m && r.two_sigma == p.two_sigma {
        value += single(r.shell, p.shell);
    }
    if r.shell == p.shell {
        let z = zeta(r.shell);
        if r.m == p.m && r.two_sigma == p.two_sigma {
            value += z * f64::from(r.m * r.two_sigma) / 2.0;
        }
        if r.m - p.m == (p.two_sigma - r.two_sigma) / 2 && r.two_sigma != p.two_sigma {
            let product = r.l * (r.l + 1) - r.m * p.m;
            value += 0.5 * z * f64::from(product).sqrt();
        }
    }
    value
}

/// The sign of taking out orbital `place`, and what is left.
fn without(determinant: u64, place: usize) -> Option<(f64, u64)> {
    if determinant >> place & 1 == 0 {
        return None;
    }
    let before = (determinant & ((1 << place) - 1)).count_ones();
    let sign = if before.is_multiple_of(2) { 1.0 } else { -1.0 };
    Some((sign, determinant & !(1 << place)))
}

/// The sign of putting in orbital `place`, and what it makes.
fn with(determinant: u64, place: usize) -> Option<(f64, u64)> {
    if determinant >> place & 1 == 1 {
        return None;
    }
    let (sign, _) = without(determinant | 1 << place, place)?;
    Some((sign, determinant | 1 << place))
}

struct Brute {
    orbitals: Vec<SpinOrbital>,
    determinants: Vec<u64>,
}

impl Brute {
    /// All determinants of the configurations; with `two_m` only those of that M.
    fn new(shells: &[u8], configurations: &[Vec<u32>], two_m: Option<i32>) -> Brute {
        let mut orbitals = Vec::new();
        for (shell, &l) in shells.iter().enumerate() {
            let l = i32::from(l);
            for m in -l..=l {
                for two_sigma in [-1, 1] {
                    orbitals.push(SpinOrbital {
                        shell,
                        l,
                        m,
                        two_sigma,
                    });
                }
            }
        }
        assert!(orbitals.len() < 60);
        let mut determinants = Vec::new();
        for occupations in configurations {
            let mut open = vec![(0_u64, 0_i32)];
            for (shell, &electrons) in occupations.iter().enumerate() {
                let own: Vec<usize> = (0..orbitals.len())
                    .filter(|&place| orbitals[place].shell == shell)
                    .collect();
                let mut longer = Vec::new();
                for subset in 0..1_u64 << own.len() {
                    if subset.count_ones() != electrons {
                        continue;
                    }
                    let mut bits = 0;
                    let mut m = 0;
                    for (number, &place) in own.iter().enumerate() {
                        if subset >> number & 1 == 1 {
                            bits |= 1 << place;
                            m += 2 * orbitals[place].m + orbitals[place].two_sigma;
                        }
                    }
                    longer.extend(open.iter().map(|&(old, old_m)| (old | bits, old_m + m)));
                }
                open = longer;
            }
            let chosen = open.into_iter().filter(|o| two_m.is_none_or(|m| o.1 == m));
            determinants.extend(chosen.map(|open| open.0));
        }
        Brute {
            orbitals,
            determinants,
        }
    }

    fn apply(&self, ket: u64, mut found: impl FnMut(u64, f64)) {
        let count = self.orbitals.len();
        for p in 0..count {
            let Some((first, left)) = without(ket, p) else {
                continue;
            };
            for r in 0..count {
                let value = one_body(self.orbitals[r], self.orbitals[p]);
                if value != 0.0
                    && let Some((sign, made)) = with(left, r)
                {
                    found(made, first * sign * value);
                }
            }
            for q in 0..p {
                // a_q a_p |ket⟩
                let Some((second, left)) = without(left, q) else {
                    continue;
                };
                for r in 0..count {
                    for s in 0..r {
                        let [or, os, op, oq] = [r, s, p, q].map(|place| self.orbitals[place]);
                        let value = repulsion(or, os, op, oq) - repulsion(or, os, oq, op);
                        if value != 0.0
                            && let Some((third, made)) = with(left, s)
                            && let Some((fourth, made)) = with(made, r)
                        {
                            // a†_r a†_s a_q a_p
                            found(made, first * second * third * fourth * value);
                        }
                    }
                }
            }
        }
    }

    fn eigensystem(&self) -> Eigensystem {
        let places: BTreeMap<u64, usize> = self.determinants.iter().copied().zip(0..).collect();
        let size = self.determinants.len();
        let mut matrix = DMatrix::zeros(size, size);
        for (column, &ket) in self.determinants.iter().enumerate() {
            self.apply(ket, |bra, value| {
                if let Some(&row) = places.get(&bra) {
                    matrix[(row, column)] += value;
                }
            });
        }
        assert!((&matrix - matrix.transpose()).abs().max() < 1e-12);
        eigensystem(matrix).expect("converges")
    }

    /// ⟨this determinant|Σ r C¹_0|that one of `other`⟩.
    fn dipole(&self, other: &Brute) -> DMatrix<f64> {
        let places: BTreeMap<u64, usize> = self.determinants.iter().copied().zip(0..).collect();
        let mut matrix = DMatrix::zeros(self.determinants.len(), other.determinants.len());
        for (column, &ket) in other.determinants.iter().enumerate() {
            for (p, &from) in self.orbitals.iter().enumerate() {
                for (r, &to) in self.orbitals.iter().enumerate() {
                    if to.m != from.m || to.two_sigma != from.two_sigma {
                        continue;
                    }
                    if let Some((first, left)) = without(ket, p)
                        && let Some((second, made)) = with(left, r)
                        && let Some(&row) = places.get(&made)
                    {
                        let value = gaunt(1, to, from) * length(to.shell, from.shell);
                        matrix[(row, column)] += first * second * value;
                    }
                }
            }
        }
        matrix
    }

    /// The mean of the diagonal.
    fn mean(&self) -> f64 {
        let mut pairs = Vec::new();
        for &one in &self.orbitals {
            for &two in &self.orbitals {
                pairs.push(repulsion(one, two, one, two) - repulsion(one, two, two, one));
            }
        }
        let count = self.orbitals.len();
        let mut sum = 0.0;
        for &ket in &self.determinants {
            let places: Vec<usize> = (0..count).filter(|&p| ket >> p & 1 == 1).collect();
            for &p in &places {
                sum += one_body(self.orbitals[p], self.orbitals[p]);
                let lower = places.iter().take_while(|&&q| q < p);
                sum += lower.map(|q| pairs[p * count + q]).sum::<f64>();
            }
        }
        sum / self.determinants.len() as f64
    }
}

/// The average is what the determinants say, so that the trace rule is checked with the rest.
fn averages(shells: &[u8], configurations: &[Vec<u32>]) -> Vec<f64> {
    let mean = |one: &Vec<u32>| Brute::new(shells, std::slice::from_ref(one), None).mean();
    configurations.iter().map(mean).collect()
}

fn value(parameter: &Parameter, averages: &[f64]) -> f64 {
    match parameter.integral {
        Integral::Average => averages[parameter.first],
        Integral::Direct { k, a, b } => radial(k.into(), [a, b, a, b]),
        Integral::Exchange { k, a, b } => radial(k.into(), [a, b, b, a]),
        Integral::SpinOrbit { a } => zeta(a),
        Integral::Mixing { k, a, b, c, d } => radial(k.into(), [a, b, c, d]),
        Integral::OneElectron { a, c } => single(a, c),
        Integral::Effective { .. } => 0.0,
    }
}

const MOST_DETERMINANTS: usize = 300;

/// The worst deviation of all levels, relative to the largest energy, and their number.
fn compare(shells: &[u8], configurations: &[Vec<u32>]) -> (f64, usize) {
    let basis = Basis::new(shells, configurations).expect("a basis");
    let hamiltonian = Hamiltonian::new(basis).expect("coefficients");
    let averages = averages(shells, configurations);
    let values = hamiltonian.values(|parameter| value(parameter, &averages));
    let ours = Levels::solve(&hamiltonian, &values).expect("levels");
    let electrons: u32 = configurations[0].iter().sum();
    // The lowest M whose determinants are not too many: every level with J ≥ M.
    let mut two_m = i32::try_from(electrons % 2).expect("small");
    let mut brute = Brute::new(shells, configurations, Some(two_m));
    while brute.determinants.len() > MOST_DETERMINANTS {
        two_m += 2;
        brute = Brute::new(shells, configurations, Some(two_m));
    }
    let brute = brute.eigensystem().values;
    let scale = brute.iter().fold(0.0_f64, |most, e| most.max(e.abs()));
    let levels = ours.levels.iter().filter(|level| level.two_j >= two_m);
    let mut energies: Vec<f64> = levels.map(|level| level.energy).collect();
    energies.sort_by(f64::total_cmp);
    assert_eq!(energies.len(), brute.len(), "{shells:?} {configurations:?}");
    let worst = energies
        .iter()
        .zip(&brute)
        .fold(0.0_f64, |worst, (a, b)| worst.max((a - b).abs() / scale));
    println!(
        "{shells:?} {configurations:?}: {} levels, {worst:e}",
        brute.len()
    );
    (worst, brute.len())
}

/// ℓ of the subshells, and configurations.
type Case = (&'static [u8], &'static [&'static [u32]]);

/// Every way that one or two electrons can change their subshell, spectators before, between and
/// behind them, and occupations up to, at and past the half.
const CASES: &[Case] = &[
    (&[1], &[&[2]]),
    (&[1], &[&[4]]),
    (&[2], &[&[7]]),
    (&[1, 2], &[&[1, 1]]),
    (&[2, 1, 0], &[&[1, 1, 1]]),
    (&[0, 1, 2], &[&[1, 2, 1]]),
    (&[2, 0], &[&[2, 0], &[1, 1], &[0, 2]]),
    (&[0, 1, 2], &[&[0, 2, 0], &[1, 0, 1]]),
    (&[1, 0, 2], &[&[2, 0, 0], &[0, 1, 1]]),
    (&[0, 1, 2, 3], &[&[1, 0, 0, 1], &[0, 1, 1, 0]]),
    (&[1, 0, 3, 2], &[&[2, 0, 0, 1], &[1, 1, 1, 0]]),
    (&[0, 1, 2], &[&[2, 1, 0], &[0, 3, 0], &[1, 1, 1]]),
    (&[0, 0, 1], &[&[2, 0, 1], &[1, 1, 1], &[0, 2, 1]]),
    (
        &[0, 1, 0],
        &[&[1, 2, 0], &[0, 2, 1], &[1, 0, 2], &[2, 0, 1]],
    ),
    (&[1, 1], &[&[3, 0], &[2, 1], &[1, 2], &[0, 3]]),
    (&[1, 1], &[&[4, 0], &[3, 1], &[2, 2], &[1, 3]]),
    (&[0, 1, 1], &[&[1, 5, 0], &[1, 4, 1], &[1, 3, 2]]),
    (
        &[0, 1, 1],
        &[&[2, 4, 0], &[2, 3, 1], &[0, 6, 0], &[0, 5, 1]],
    ),
    (
        &[2, 1, 0],
        &[&[1, 1, 1], &[2, 1, 0], &[0, 1, 2], &[0, 3, 0]],
    ),
    (&[0, 1, 2], &[&[1, 2, 0], &[0, 2, 1], &[1, 0, 2]]),
    (&[3, 1], &[&[2, 0], &[1, 1], &[0, 2]]),
    (&[3, 1], &[&[3, 0], &[2, 1], &[1, 2]]),
    (&[1, 3], &[&[0, 3], &[1, 2]]),
    (&[2, 0], &[&[8, 2], &[9, 1], &[10, 0]]),
    (&[2, 0], &[&[5, 1], &[6, 0], &[4, 2]]),
    (&[0, 2], &[&[1, 5], &[0, 6], &[2, 4]]),
    (&[1, 2, 0], &[&[5, 1, 0], &[5, 0, 1], &[3, 1, 2]]),
    (&[3, 1], &[&[7, 1], &[8, 0]]),
    (&[1, 3], &[&[1, 6], &[0, 7], &[2, 5]]),
    (&[3, 2, 1], &[&[2, 1, 1], &[3, 1, 0], &[1, 3, 0]]),
    (&[4, 3], &[&[1, 1]]),
    (&[0, 4], &[&[1, 1], &[0, 2], &[2, 0]]),
    (
        &[0, 1, 0, 1],
        &[
            &[1, 1, 1, 1],
            &[2, 2, 0, 0],
            &[2, 0, 0, 2],
            &[0, 1, 2, 1],
            &[1, 2, 1, 0],
        ],
    ),
];

#[test]
fn mixed_configurations_have_the_levels_of_their_determinants() {
    let (mut worst, mut levels) = (0.0_f64, 0);
    for (shells, configurations) in CASES {
        let configurations: Vec<Vec<u32>> = configurations.iter().map(|c| c.to_vec()).collect();
        let (deviation, count) = compare(shells, &configurations);
        worst = worst.max(deviation);
        levels += count;
    }
    report(
        "structure-mixing",
        Row {
            quantity: "energies of 33 sets of mixing configurations, arbitrary integrals"
                .to_owned(),
            cases: levels,
            worst,
            tolerance: 1e-12,
            measure: "relative to the largest".to_owned(),
            source: "sums over Slater determinants in the test itself".to_owned(),
        },
    );
}

/// Subshells, configurations of one parity, configurations of the other.
type Dipole = (
    &'static [u8],
    &'static [&'static [u32]],
    &'static [&'static [u32]],
);

const DIPOLES: &[Dipole] = &[
    (&[0, 1], &[&[1, 0]], &[&[0, 1]]),
    (
        &[0, 1, 2],
        &[&[2, 0, 0], &[0, 2, 0], &[1, 0, 1]],
        &[&[1, 1, 0], &[0, 1, 1]],
    ),
    (
        &[2, 1, 0],
        &[&[2, 1, 0], &[1, 1, 1], &[0, 1, 2]],
        &[&[3, 0, 0], &[2, 0, 1], &[1, 2, 0]],
    ),
    (
        &[0, 1, 0],
        &[&[1, 2, 0], &[0, 2, 1], &[2, 0, 1]],
        &[&[1, 1, 1], &[2, 1, 0], &[0, 3, 0]],
    ),
    (
        &[1, 2, 0],
        &[&[5, 1, 0], &[5, 0, 1]],
        &[&[6, 0, 0], &[4, 1, 1], &[4, 2, 0]],
    ),
    (
        &[0, 1, 2],
        &[&[1, 4, 0], &[2, 2, 1]],
        &[&[2, 3, 0], &[1, 3, 1]],
    ),
    (&[3, 2], &[&[2, 0], &[0, 2]], &[&[1, 1]]),
    (&[2, 3, 0], &[&[1, 1, 1]], &[&[0, 2, 1], &[2, 0, 1]]),
];

/// How far an energy is from its neighbours, relative to the largest.
fn gap(energies: &[f64], place: usize) -> f64 {
    let largest = energies.iter().fold(0.0_f64, |most, e| most.max(e.abs()));
    let others = energies
        .iter()
        .enumerate()
        .filter(|&(other, _)| other != place);
    let nearest = others.fold(largest, |least, (_, e)| {
        least.min((e - energies[place]).abs())
    });
    nearest / largest
}

#[test]
fn dipole_strengths_are_those_of_the_determinants() {
    let (mut worst, mut lines) = (0.0_f64, 0);
    for &(shells, left, right) in DIPOLES {
        let own = |configurations: &[&[u32]]| {
            let owned: Vec<Vec<u32>> = configurations.iter().map(|c| c.to_vec()).collect();
            let basis = Basis::new(shells, &owned).expect("a basis");
            let hamiltonian = Hamiltonian::new(basis).expect("coefficients");
            let averages = averages(shells, &owned);
            let values = hamiltonian.values(|parameter| value(parameter, &averages));
            let levels = Levels::solve(&hamiltonian, &values).expect("levels");
            // For M = 0 the 3j symbol of J = J′ vanishes.
            let two_m = 2 - i32::try_from(owned[0].iter().sum::<u32>() % 2).expect("small");
            let brute = Brute::new(shells, &owned, Some(two_m));
            let system = brute.eigensystem();
            let seen = (0..levels.levels.len()).filter(|&p| levels.levels[p].two_j >= two_m);
            let seen: Vec<usize> = seen.collect();
            assert_eq!(seen.len(), system.values.len());
            (
                hamiltonian.basis().clone(),
                levels,
                brute,
                system,
                seen,
                two_m,
            )
        };
        let (one, two) = (own(left), own(right));
        let operator = Multipole::new(&one.0, &two.0, 1).expect("coefficients");
        let lengths: Vec<f64> = operator
            .transfers()
            .iter()
            .map(|t| length(t.a, t.c))
            .collect();
        let found = amplitudes(&one.1, &two.1, 1, false, |rows, columns| {
            operator.elements(&lengths, rows, columns)
        });
        let matrix = one.3.vectors.transpose() * one.2.dipole(&two.2) * &two.3.vectors;
        let largest = matrix.abs().max();
        for (row, &bra) in one.4.iter().enumerate() {
            for (column, &ket) in two.4.iter().enumerate() {
                let line = found.iter().find(|l| (l.left, l.right) == (bra, ket));
                let (j, jp) = (one.1.levels[bra].two_j, two.1.levels[ket].two_j);
                // Eigenvectors have signs of their own.
                let ours =
                    line.map_or(0.0, |line| line.reduced) * wigner_3j(j, 2, jp, -one.5, 0, two.5);
                let difference = ours.abs() - matrix[(row, column)].abs();
                // A vector is as exact as its energy is apart from the next.
                let apart = gap(&one.3.values, row).min(gap(&two.3.values, column));
                worst = worst.max(difference.abs() / largest * apart);
                lines += 1;
            }
        }
    }
    report(
        "structure-dipole",
        Row {
            quantity: "E1 amplitudes between sets of mixing configurations, arbitrary integrals"
                .to_owned(),
            cases: lines,
            worst,
            tolerance: 1e-13,
            measure: "relative to the largest, times the gap to the next level".to_owned(),
            source: "sums over Slater determinants in the test itself".to_owned(),
        },
    );
}
