//! Terms of equivalent electrons: their number, their labels, and the labels against operators
//! that are built and diagonalised in a basis of determinants.

use nalgebra::{DMatrix, SymmetricEigen};
use rungline_core::angular::equivalent::{EquivalentTerm, classify};
use rungline_core::angular::wigner_3j;
use rungline_tests::{Row, report, vector_json};

const LETTERS: &str = "spdfg";

fn name(term: &EquivalentTerm) -> (i32, u32) {
    (term.two_s + 1, term.l_total)
}

#[test]
fn occur_as_often_as_counted_by_brute_force() {
    let vectors = vector_json("term_counts.json");
    let mut cases = 0;
    for (key, case) in vectors["LS"].as_object().expect("cases") {
        let Some((l, electrons)) = LETTERS.find(&key[..1]).zip(key[1..].parse::<u32>().ok()) else {
            continue;
        };
        let terms = classify(l as u8, electrons).expect("within bounds");
        let mut found: Vec<(i32, u32)> = terms.iter().map(name).collect();
        let mut expected: Vec<(i32, u32)> = case["terms"]
            .as_array()
            .expect("terms")
            .iter()
            .flat_map(|term| {
                let number = |key: &str| term[key].as_u64().expect("a number");
                vec![(number("multiplicity") as i32, number("L") as u32); number("count") as usize]
            })
            .collect();
        found.sort_unstable();
        expected.sort_unstable();
        assert_eq!(found, expected, "{key}");
        for term in &terms {
            assert_eq!(
                term.times as usize,
                terms
                    .iter()
                    .filter(|other| name(other) == name(term))
                    .count()
            );
        }
        cases += terms.len();
    }
    report(
        "equivalent_terms",
        Row {
            quantity: "terms of equivalent electrons s to f".into(),
            cases,
            worst: 0.0,
            tolerance: 0.0,
            measure: "cases that differ".into(),
            source: "enumeration of all microstates by a separate program".into(),
        },
    );
    assert_eq!(classify(2, 5).expect("d5").len(), 16);
    assert_eq!(classify(3, 7).expect("f7").len(), 119);
}

#[test]
fn holes_have_the_terms_of_electrons() {
    for l in 0..5 {
        let capacity = 4 * u32::from(l) + 2;
        for electrons in 0..=capacity {
            assert_eq!(classify(l, electrons), classify(l, capacity - electrons));
        }
    }
}

/// Seniority, W and U of repeated terms, from memory of Nielson & Koster (1963).
#[test]
fn labels_of_repeated_terms_from_memory_of_nielson_and_koster() {
    type Labels = (
        u32,
        i32,
        u32,
        u32,
        &'static [(u32, &'static [i32], Option<[i32; 2]>)],
    );
    let cases: [Labels; 7] = [
        (2, 2, 3, 2, &[(1, &[1, 0], None), (3, &[2, 1], None)]),
        (
            2,
            2,
            5,
            2,
            &[(1, &[1, 0], None), (3, &[2, 1], None), (5, &[2, 2], None)],
        ),
        (2, 1, 4, 4, &[(2, &[2, 0], None), (4, &[2, 2], None)]),
        (
            3,
            2,
            3,
            3,
            &[(1, &[1, 0, 0], Some([1, 0])), (3, &[2, 1, 0], Some([2, 1]))],
        ),
        (
            3,
            2,
            3,
            2,
            &[(3, &[2, 1, 0], Some([2, 0])), (3, &[2, 1, 0], Some([2, 1]))],
        ),
        (
            3,
            2,
            3,
            5,
            &[(3, &[2, 1, 0], Some([1, 1])), (3, &[2, 1, 0], Some([2, 1]))],
        ),
        (
            3,
            3,
            4,
            1,
            &[
                (2, &[1, 1, 0], Some([1, 1])),
                (4, &[2, 1, 1], Some([1, 1])),
                (4, &[2, 1, 1], Some([3, 0])),
            ],
        ),
    ];
    for (l, multiplicity, electrons, l_total, expected) in cases {
        let terms = classify(l as u8, electrons).expect("within bounds");
        let same: Vec<_> = terms
            .iter()
            .filter(|term| name(term) == (multiplicity, l_total))
            .collect();
        assert_eq!(
            same.len(),
            expected.len(),
            "{l} {electrons} {multiplicity} {l_total}"
        );
        for ((index, term), &(seniority, w, u)) in (1..).zip(same).zip(expected) {
            assert_eq!((term.index, term.seniority, term.u), (index, seniority, u));
            assert!(term.w.expect("W").components().eq(w.iter().copied()));
            assert!(term.distinguished);
        }
    }
}

/// From f⁵ on some L occurs twice in one U, and nothing but a number tells the two apart.
#[test]
fn only_what_labels_separate_counts_as_distinguished() {
    for electrons in 0..=4 {
        assert!(
            classify(3, electrons)
                .expect("f")
                .iter()
                .all(|term| term.distinguished)
        );
        assert!(
            classify(2, electrons + 1)
                .expect("d")
                .iter()
                .all(|term| term.distinguished)
        );
    }
    for electrons in 5..=7 {
        let terms = classify(3, electrons).expect("f");
        for term in &terms {
            let alike = |other: &&EquivalentTerm| {
                name(other) == name(term) && other.u == term.u && other.seniority == term.seniority
            };
            assert_eq!(term.distinguished, terms.iter().filter(alike).count() == 1);
        }
        assert!(terms.iter().any(|term| !term.distinguished));
    }
}

/// A Slater determinant: occupied spin-orbitals as bits, ascending m with spin down, then up.
type Determinant = u64;

/// Operators on the determinants of ℓ^N.
struct Shell {
    l: i32,
    electrons: u32,
}

impl Shell {
    fn orbitals(&self) -> i32 {
        2 * self.l + 1
    }

    fn bit(&self, m: i32, up: bool) -> u64 {
        1 << (m + self.l + if up { self.orbitals() } else { 0 })
    }

    fn totals(&self, determinant: Determinant) -> (i32, i32) {
        let (mut m_l, mut two_m_s) = (0, 0);
        for m in -self.l..=self.l {
            for up in [false, true] {
                if determinant & self.bit(m, up) != 0 {
                    m_l += m;
                    two_m_s += if up { 1 } else { -1 };
                }
            }
        }
        (m_l, two_m_s)
    }

    fn sector(&self, m_l: i32, two_m_s: i32) -> Vec<Determinant> {
        (0..1_u64 << (2 * self.orbitals()))
            .filter(|bits| {
                bits.count_ones() == self.electrons && self.totals(*bits) == (m_l, two_m_s)
            })
            .collect()
    }

    /// a†(to) a(from) with its sign.
    fn moved(determinant: Determinant, from: u64, to: u64) -> Option<(f64, Determinant)> {
        if determinant & from == 0 {
            return None;
        }
        let without = determinant & !from;
        if without & to != 0 {
            return None;
        }
        let passed = (determinant & (from - 1)).count_ones() + (without & (to - 1)).count_ones();
        Some((
            if passed.is_multiple_of(2) { 1.0 } else { -1.0 },
            without | to,
        ))
    }

    /// Matrix of Σ amplitude(m → m′, same or other spin) a†a from one sector to another.
    fn one_body(
        &self,
        from: &[Determinant],
        to: &[Determinant],
        amplitude: impl Fn(i32, bool, i32, bool) -> f64,
    ) -> DMatrix<f64> {
        let mut matrix = DMatrix::zeros(to.len(), from.len());
        for (column, &determinant) in from.iter().enumerate() {
            for m in -self.l..=self.l {
                for n in -self.l..=self.l {
                    for (up, into) in [(false, false), (true, true), (false, true), (true, false)] {
                        let value = amplitude(m, up, n, into);
                        if value == 0.0 {
                            continue;
                        }
                        if let Some((sign, result)) =
                            Self::moved(determinant, self.bit(m, up), self.bit(n, into))
                            && let Ok(row) = to.binary_search(&result)
                        {
                            matrix[(row, column)] += sign * value;
                        }
                    }
                }
            }
        }
        matrix
    }

    /// U^k·U^k = Σ_q (U^k_q)† U^k_q in one sector, u^k the unit tensor with ⟨ℓ‖u^k‖ℓ⟩ = 1.
    fn unit_square(&self, k: i32, m_l: i32, two_m_s: i32) -> DMatrix<f64> {
        let from = self.sector(m_l, two_m_s);
        let mut sum = DMatrix::zeros(from.len(), from.len());
        for q in -k..=k {
            let to = self.sector(m_l + q, two_m_s);
            let l = self.l;
            let matrix = self.one_body(&from, &to, |m, up, n, into| {
                if up != into {
                    return 0.0;
                }
                let sign = if (l - n) % 2 == 0 { 1.0 } else { -1.0 };
                sign * wigner_3j(2 * l, 2 * k, 2 * l, -2 * n, 2 * q, 2 * m)
            });
            sum += matrix.transpose() * matrix;
        }
        sum
    }

    /// S² = S₋S₊ + M(M+1).
    fn spin_square(&self, m_l: i32, two_m_s: i32) -> DMatrix<f64> {
        let from = self.sector(m_l, two_m_s);
        let to = self.sector(m_l, two_m_s + 2);
        let raise = self.one_body(&from, &to, |m, up, n, into| {
            f64::from(u8::from(m == n && !up && into))
        });
        let m = f64::from(two_m_s) / 2.0;
        raise.transpose() * raise + DMatrix::identity(from.len(), from.len()) * (m * (m + 1.0))
    }
}

/// Weights that no two sets of labels can share: square roots of different primes.
fn weights() -> [f64; 4] {
    [
        2_f64.sqrt(),
        3_f64.sqrt(),
        5_f64.sqrt() / 10.0,
        7_f64.sqrt() / 3.0,
    ]
}

/// The Casimir operators of R(2ℓ+1), G₂, R(3) and spin, as sums of squares of unit tensors of odd
/// rank (Racah 1949), have together exactly the eigenvalues that the labels of all terms
/// demand: G(R) = Σ_k odd (2k+1) U^k·U^k/(2ℓ−1), G(G₂) = [3 U¹·U¹ + 11 U⁵·U⁵]/4,
/// L² = ℓ(ℓ+1)(2ℓ+1) U¹·U¹.
#[test]
fn casimir_operators_diagonalised_have_the_labelled_eigenvalues() {
    let [for_r, for_g, for_l, for_s] = weights();
    let (mut worst, mut cases) = (0.0_f64, 0);
    for (l, electrons) in [
        (2, 2),
        (2, 3),
        (2, 4),
        (2, 5),
        (3, 2),
        (3, 3),
        (3, 4),
        (3, 5),
        (3, 6),
        (3, 7),
    ] {
        let shell = Shell { l, electrons };
        let two_m_s = (electrons % 2) as i32;
        // M_L = 0 and the least M_S: every term is there once.
        let size = shell.sector(0, two_m_s).len();
        let first = shell.unit_square(1, 0, two_m_s);
        let mut rotation = DMatrix::zeros(size, size);
        for k in (1..2 * l).step_by(2) {
            rotation +=
                shell.unit_square(k, 0, two_m_s) * f64::from(2 * k + 1) / f64::from(2 * l - 1);
        }
        let exceptional = if l == 3 {
            &first * 0.75 + shell.unit_square(5, 0, two_m_s) * 2.75
        } else {
            DMatrix::zeros(size, size)
        };
        let orbital = &first * f64::from(l * (l + 1) * (2 * l + 1));
        let operator = rotation * for_r
            + exceptional * for_g
            + orbital * for_l
            + shell.spin_square(0, two_m_s) * for_s;
        let mut found: Vec<f64> = SymmetricEigen::new(operator)
            .eigenvalues
            .iter()
            .copied()
            .collect();
        let mut expected: Vec<f64> = classify(l as u8, electrons)
            .expect("within bounds")
            .iter()
            .map(|term| {
                let (total, spin) = (f64::from(term.l_total), f64::from(term.two_s) / 2.0);
                for_r * term.rotation_casimir.expect("R")
                    + for_g * term.g2_casimir.unwrap_or(0.0)
                    + for_l * total * (total + 1.0)
                    + for_s * spin * (spin + 1.0)
            })
            .collect();
        found.sort_by(f64::total_cmp);
        expected.sort_by(f64::total_cmp);
        assert_eq!(found.len(), expected.len());
        for (found, expected) in found.iter().zip(&expected) {
            worst = worst.max((found - expected).abs());
        }
        cases += found.len();
    }
    report(
        "equivalent_casimirs",
        Row {
            quantity: "Casimir eigenvalues of all terms of d², … d⁵, f², … f⁷".into(),
            cases,
            worst,
            tolerance: 1e-10,
            measure: "absolute".into(),
            source:
                "diagonalisation among determinants; operators of Racah, Phys. Rev. 76, 1352 (1949)"
                    .into(),
        },
    );
}

/// Different labels give sums further apart than the check above allows to differ.
#[test]
fn the_weights_keep_all_labels_apart() {
    let [for_r, for_g, for_l, for_s] = weights();
    for electrons in 2..=7 {
        let terms = classify(3, electrons).expect("f");
        let key = |term: &EquivalentTerm| (name(term), term.seniority, term.u);
        for one in &terms {
            for other in &terms {
                let sum = |term: &EquivalentTerm| {
                    let (total, spin) = (f64::from(term.l_total), f64::from(term.two_s) / 2.0);
                    for_r * term.rotation_casimir.unwrap_or(0.0)
                        + for_g * term.g2_casimir.unwrap_or(0.0)
                        + for_l * total * (total + 1.0)
                        + for_s * spin * (spin + 1.0)
                };
                assert!(key(one) == key(other) || (sum(one) - sum(other)).abs() > 1e-6);
            }
        }
    }
}
