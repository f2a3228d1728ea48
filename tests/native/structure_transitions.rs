//! Line strengths between levels: reference cases and sum rules.
//!
//! Vectors: `transition_checks.json`, made by a separate brute-force program in a basis of
//! determinants (own computation, no outside data, free to use). Interference between mixing
//! configurations is checked in `structure_determinants.rs`.

use rungline_core::constants::ELECTRON_G;
use rungline_core::structure::{
    Amplitude, Basis, Hamiltonian, Integral, Levels, Multipole, amplitudes, magnetic_elements,
};
use rungline_tests::{Row, report, vector_json};
use serde_json::Value;

const SOURCE: &str = "separate program, determinants of spin-orbitals, transition_checks.json";

struct Side {
    hamiltonian: Hamiltonian,
    levels: Levels,
}

impl Side {
    fn basis(&self) -> &Basis {
        self.hamiltonian.basis()
    }

    /// From shells `[label, ℓ, electrons]`, parameters by name and levels in the reference's order.
    fn read(case: &Value) -> Side {
        let shells = case["shells"].as_array().expect("shells");
        let labels: Vec<&str> = shells
            .iter()
            .map(|s| s[0].as_str().expect("label"))
            .collect();
        let number = |value: &Value| value.as_u64().expect("a number");
        let subshells: Vec<u8> = shells.iter().map(|s| number(&s[1]) as u8).collect();
        let occupations: Vec<u32> = shells.iter().map(|s| number(&s[2]) as u32).collect();
        let basis = Basis::new(&subshells, &[occupations]).expect("a basis");
        let hamiltonian = Hamiltonian::new(basis).expect("coefficients");
        let given = |letter: &str, a: usize, b: usize| {
            let value = |a: usize, b: usize| {
                case["params"].get(format!("{letter}({},{})", labels[a], labels[b]))
            };
            value(a, b)
                .or(value(b, a))
                .and_then(Value::as_f64)
                .unwrap_or(0.0)
        };
        let values = hamiltonian.values(|parameter| match parameter.integral {
            Integral::Direct { k, a, b } => given(&format!("F{k}"), a, b),
            Integral::Exchange { k, a, b } => given(&format!("G{k}"), a, b),
            Integral::SpinOrbit { a } => {
                let name = format!("zeta({})", labels[a]);
                case["params"]
                    .get(name)
                    .and_then(Value::as_f64)
                    .unwrap_or(0.0)
            }
            _ => 0.0,
        });
        let levels = Levels::solve(&hamiltonian, &values).expect("levels");
        let expected = case["levels"].as_array().expect("levels");
        assert_eq!(levels.levels.len(), expected.len());
        for (level, expected) in levels.levels.iter().zip(expected) {
            assert_eq!(
                i64::from(level.two_j),
                expected["twoJ"].as_i64().expect("2J")
            );
        }
        Side {
            hamiltonian,
            levels,
        }
    }

    fn magnetic(&self, g_s: f64) -> Vec<Amplitude> {
        amplitudes(&self.levels, &self.levels, 1, true, |rows, columns| {
            magnetic_elements(self.basis(), g_s, rows, columns)
        })
    }
}

fn electric(left: &Side, right: &Side, rank: u8, once: bool) -> Vec<Amplitude> {
    let operator = Multipole::new(left.basis(), right.basis(), rank).expect("coefficients");
    let values = vec![1.0; operator.transfers().len()];
    amplitudes(&left.levels, &right.levels, rank, once, |rows, columns| {
        operator.elements(&values, rows, columns)
    })
}

fn strength(lines: &[Amplitude], left: usize, right: usize) -> f64 {
    let found = lines.iter().find(|l| (l.left, l.right) == (left, right));
    found.map_or(0.0, |line| line.reduced * line.reduced)
}

/// |a − b| over b, over 10⁻⁴ of the largest where b is smaller: what is left of mixing of 10⁻⁸ has
/// no more digits in either program.
fn deviation(ours: f64, theirs: f64, largest: f64) -> f64 {
    (ours - theirs).abs() / theirs.max(1e-4 * largest)
}

fn place(line: &Value, key: &str) -> usize {
    line[key].as_u64().expect("a place") as usize
}

#[test]
fn strengths_of_the_reference_cases() {
    let vectors = vector_json("transition_checks.json");
    let (mut worst, mut lines_seen, mut worst_sum) = (0.0_f64, 0, 0.0_f64);
    let cases = vectors["E1"].as_array().expect("cases");
    assert_eq!(cases.len(), 5);
    for case in cases {
        let (left, right) = (Side::read(&case["config1"]), Side::read(&case["config2"]));
        let lines = electric(&left, &right, 1, false);
        let total = case["sum_S"].as_f64().expect("a sum");
        let sum: f64 = lines.iter().map(|line| line.reduced * line.reduced).sum();
        worst_sum = worst_sum.max((sum / total - 1.0).abs());
        let expected = case["lines"].as_array().expect("lines");
        let largest = expected.iter().fold(0.0_f64, |most, line| {
            most.max(line["S_angular"].as_f64().expect("S"))
        });
        for line in expected {
            let ours = strength(&lines, place(line, "level1"), place(line, "level2"));
            let theirs = line["S_angular"].as_f64().expect("S");
            worst = worst.max(deviation(ours, theirs, largest));
            lines_seen += 1;
        }
        // Turned round, the same strengths.
        for line in electric(&right, &left, 1, false) {
            let other = strength(&lines, line.right, line.left);
            assert!((line.reduced * line.reduced - other).abs() < 1e-12 * largest);
        }
    }
    report(
        "structure-e1",
        Row {
            quantity: "E1 strengths between configurations".to_owned(),
            cases: lines_seen,
            worst,
            tolerance: 1e-9,
            measure: "relative".to_owned(),
            source: SOURCE.to_owned(),
        },
    );
    report(
        "structure-e1-sum",
        Row {
            quantity: "sum of all E1 strengths of two configurations".to_owned(),
            cases: cases.len(),
            worst: worst_sum,
            tolerance: 1e-12,
            measure: "relative".to_owned(),
            source: SOURCE.to_owned(),
        },
    );
}

#[test]
fn magnetic_dipole_and_electric_quadrupole_of_the_reference_cases() {
    let vectors = vector_json("transition_checks.json");
    let cases = vectors["M1E2"].as_array().expect("cases");
    assert_eq!(cases.len(), 4);
    let (mut worst, mut lines_seen) = ([0.0_f64; 3], 0);
    for case in cases {
        let side = Side::read(case);
        let own = [
            ("S_M1_gs2", side.magnetic(2.0)),
            ("S_M1_gs_codata", side.magnetic(ELECTRON_G.value)),
            ("S_E2_angular", electric(&side, &side, 2, true)),
        ];
        let expected = case["lines"].as_array().expect("lines");
        for ((key, lines), worst) in own.iter().zip(&mut worst) {
            let of = |line: &Value| line[key].as_f64().expect("a strength");
            let largest = expected
                .iter()
                .fold(0.0_f64, |most, line| most.max(of(line)));
            for line in expected {
                let ours = strength(lines, place(line, "lower"), place(line, "upper"));
                *worst = worst.max(deviation(ours, of(line), largest));
                lines_seen += 1;
            }
        }
    }
    for (name, worst) in ["m1-gs2", "m1", "e2"].iter().zip(worst) {
        report(
            &format!("structure-{name}"),
            Row {
                quantity: format!(
                    "{} strengths within a configuration",
                    &name[..2].to_uppercase()
                ),
                cases: lines_seen / 3,
                worst,
                tolerance: 1e-9,
                measure: "relative".to_owned(),
                source: SOURCE.to_owned(),
            },
        );
    }
}

/// Σ over all pairs of levels, one with itself too, of |⟨L + g_s S⟩|² is the trace
/// Σ (2S+1)(2L+1) [L(L+1) + g_s² S(S+1)], whatever the coupling; g gives the diagonal.
#[test]
fn magnetic_strengths_add_up_to_the_trace() {
    let (mut worst, mut cases) = (0.0_f64, 0);
    let sets: &[(&[u8], &[u32])] = &[(&[2], &[3]), (&[3], &[6]), (&[2, 1], &[2, 1])];
    for &(shells, electrons) in sets {
        let basis = Basis::new(shells, &[electrons.to_vec()]).expect("a basis");
        let hamiltonian = Hamiltonian::new(basis).expect("coefficients");
        let values = hamiltonian.values(|parameter| match parameter.integral {
            Integral::SpinOrbit { a } => 0.3 / (a + 1) as f64,
            Integral::Direct { k, .. } | Integral::Exchange { k, .. } => 1.0 / f64::from(k + 1),
            _ => 0.0,
        });
        let levels = Levels::solve(&hamiltonian, &values).expect("levels");
        let side = Side {
            hamiltonian,
            levels,
        };
        let g_s = ELECTRON_G.value;
        let mut sum: f64 = side
            .magnetic(g_s)
            .iter()
            .map(|l| 2.0 * l.reduced * l.reduced)
            .sum();
        for level in &side.levels.levels {
            let g = side.levels.g(side.basis(), level, g_s).unwrap_or(0.0);
            let j = f64::from(level.two_j) / 2.0;
            sum += g * g * j * (j + 1.0) * (2.0 * j + 1.0);
        }
        let expected: f64 = side
            .basis()
            .states()
            .iter()
            .map(|state| {
                let total = state.total();
                let (s, l) = (f64::from(total.two_s) / 2.0, f64::from(total.l));
                total.degeneracy() * (l * (l + 1.0) + g_s * g_s * s * (s + 1.0))
            })
            .sum();
        worst = worst.max((sum / expected - 1.0).abs());
        cases += side.levels.levels.len();
    }
    report(
        "structure-m1-trace",
        Row {
            quantity: "sum of all M1 strengths and magnetic moments".to_owned(),
            cases,
            worst,
            tolerance: 1e-12,
            measure: "relative".to_owned(),
            source: "trace of (L + g_s S)²".to_owned(),
        },
    );
}

/// The J-file sum rule: between all levels of J and all of J′ the sum does not depend on coupling
/// (Condon & Shortley 1935, chapter 9).
#[test]
fn files_of_j_keep_their_sums_whatever_mixes() {
    let basis =
        |configurations: &[Vec<u32>]| Basis::new(&[2, 0, 1], configurations).expect("a basis");
    let [even, odd] = [
        basis(&[vec![2, 1, 0], vec![3, 0, 0], vec![1, 2, 0]]),
        basis(&[vec![2, 0, 1], vec![1, 1, 1]]),
    ];
    let side = |basis: &Basis, zeta: f64, mixing: f64| {
        let hamiltonian = Hamiltonian::new(basis.clone()).expect("coefficients");
        let values = hamiltonian.values(|parameter| match parameter.integral {
            Integral::SpinOrbit { a } => zeta / (a + 1) as f64,
            Integral::Mixing { k, .. } => mixing / f64::from(k + 1),
            Integral::Direct { k, .. } | Integral::Exchange { k, .. } => 1.0 / f64::from(k + 1),
            Integral::Average => parameter.first as f64,
            Integral::OneElectron { .. } | Integral::Effective { .. } => 0.0,
        });
        let levels = Levels::solve(&hamiltonian, &values).expect("levels");
        Side {
            hamiltonian,
            levels,
        }
    };
    let sums = |zeta: f64, mixing: f64| {
        let (left, right) = (side(&even, zeta, mixing), side(&odd, 2.0 * zeta, mixing));
        let mut by_j = std::collections::BTreeMap::new();
        for line in electric(&left, &right, 1, false) {
            let of = |side: &Side, place: usize| side.levels.levels[place].two_j;
            let key = (of(&left, line.left), of(&right, line.right));
            *by_j.entry(key).or_insert(0.0) += line.reduced * line.reduced;
            assert!(line.cancellation > 0.0 && line.cancellation <= 1.0 + 1e-12);
        }
        by_j
    };
    let pure = sums(0.0, 0.0);
    let (mut worst, mut cases) = (0.0_f64, 0);
    for mixed in [sums(0.5, 0.0), sums(0.0, 0.7), sums(3.0, 0.7)] {
        assert_eq!(mixed.len(), pure.len());
        for (key, sum) in mixed {
            worst = worst.max((sum / pure[&key] - 1.0).abs());
            cases += 1;
        }
    }
    report(
        "structure-j-file",
        Row {
            quantity: "E1 sums between all levels of two J, pure and mixed".to_owned(),
            cases,
            worst,
            tolerance: 1e-12,
            measure: "relative".to_owned(),
            source: "Condon & Shortley 1935, chapter 9".to_owned(),
        },
    );
}

#[test]
fn different_lists_of_subshells_are_a_fault() {
    let one = Basis::new(&[0, 1], &[vec![1, 0]]).expect("a basis");
    let other = Basis::new(&[1, 0], &[vec![1, 0]]).expect("a basis");
    let problem = Multipole::new(&one, &other, 1).expect_err("a fault");
    assert_eq!(problem.code, "subshells-differ");
}
