//! Term energies in closed form, the trace rule, Landé's interval rule and the limit of jj coupling.

use rungline_core::structure::{Basis, Effective, Hamiltonian, Integral, Level, Levels, estimate};
use rungline_tests::{Row, report};

/// 2S, L and the coefficient of each parameter.
type TermEnergy = (i32, i32, &'static [f64]);

/// The terms of one configuration.
struct Closed {
    shells: &'static [u8],
    electrons: &'static [u32],
    /// Whether it is a G, its rank, and F^k/F_k or G^k/G_k.
    parameters: &'static [(bool, u8, f64)],
    terms: &'static [TermEnergy],
}

/// Condon and Shortley, *The Theory of Atomic Spectra* (1935), chapters 5 and 7, beyond F₀; typed from memory, and the same for any textbook (Cowan, *The
/// Theory of Atomic Structure and Spectra*, 1981, chapter 12).
const TABLE: &[Closed] = &[
    Closed {
        shells: &[1],
        electrons: &[2],
        parameters: &[(false, 2, 25.0)],
        terms: &[(2, 1, &[-5.0]), (0, 2, &[1.0]), (0, 0, &[10.0])],
    },
    Closed {
        shells: &[1],
        electrons: &[3],
        parameters: &[(false, 2, 25.0)],
        terms: &[(3, 0, &[-15.0]), (1, 2, &[-6.0]), (1, 1, &[0.0])],
    },
    Closed {
        shells: &[2],
        electrons: &[2],
        parameters: &[(false, 2, 49.0), (false, 4, 441.0)],
        terms: &[
            (2, 3, &[-8.0, -9.0]),
            (2, 1, &[7.0, -84.0]),
            (0, 4, &[4.0, 1.0]),
            (0, 2, &[-3.0, 36.0]),
            (0, 0, &[14.0, 126.0]),
        ],
    },
    Closed {
        shells: &[3],
        electrons: &[2],
        parameters: &[
            (false, 2, 225.0),
            (false, 4, 1089.0),
            (false, 6, 184_041.0 / 25.0),
        ],
        terms: &[
            (2, 5, &[-25.0, -51.0, -13.0]),
            (2, 3, &[-10.0, -33.0, -286.0]),
            (2, 1, &[45.0, 33.0, -1287.0]),
            (0, 6, &[25.0, 9.0, 1.0]),
            (0, 4, &[-30.0, 97.0, 78.0]),
            (0, 2, &[19.0, -99.0, 715.0]),
            (0, 0, &[60.0, 198.0, 1716.0]),
        ],
    },
    Closed {
        shells: &[1, 2],
        electrons: &[1, 1],
        parameters: &[(false, 2, 35.0), (true, 1, 15.0), (true, 3, 245.0)],
        terms: &[
            (0, 1, &[7.0, 1.0, 63.0]),
            (2, 1, &[7.0, -1.0, -63.0]),
            (0, 2, &[-7.0, -3.0, 21.0]),
            (2, 2, &[-7.0, 3.0, -21.0]),
            (0, 3, &[2.0, 6.0, 3.0]),
            (2, 3, &[2.0, -6.0, -3.0]),
        ],
    },
    Closed {
        shells: &[0, 2],
        electrons: &[1, 1],
        parameters: &[(true, 2, 5.0)],
        terms: &[(0, 2, &[1.0]), (2, 2, &[-1.0])],
    },
];

fn hamiltonian(shells: &[u8], configurations: &[Vec<u32>]) -> Hamiltonian {
    let basis = Basis::new(shells, configurations).expect("a basis");
    Hamiltonian::new(basis).expect("coefficients")
}

#[test]
fn term_energies_are_those_of_the_textbook() {
    let (mut worst, mut cases) = (0.0_f64, 0);
    for closed in TABLE {
        let own = hamiltonian(closed.shells, &[closed.electrons.to_vec()]);
        for (number, &(exchange, rank, divisor)) in closed.parameters.iter().enumerate() {
            let values = own.values(|parameter| match parameter.integral {
                Integral::Direct { k, .. } if !exchange && k == rank => divisor,
                Integral::Exchange { k, .. } if exchange && k == rank => divisor,
                _ => 0.0,
            });
            let levels = Levels::solve(&own, &values).expect("levels");
            let states = |term: &TermEnergy| f64::from((term.0 + 1) * (2 * term.1 + 1));
            let whole: f64 = closed.terms.iter().map(states).sum();
            let mean: f64 = closed
                .terms
                .iter()
                .map(|term| states(term) * term.2[number] / whole)
                .sum();
            for &(two_s, l, energies) in closed.terms {
                let found = levels.levels.iter().find(|level| {
                    let (place, share) = levels.composition(level)[0];
                    let total = own.basis().states()[place].total();
                    (total.two_s, total.l) == (two_s, l) && share > 99.999_999
                });
                let energy = found.expect("the term").energy;
                worst = worst.max((energy - (energies[number] - mean)).abs());
                cases += 1;
            }
        }
    }
    report(
        "structure-closed-forms",
        Row {
            quantity: "term energies of p² p³ d² f² pd sd in F_k and G_k".to_owned(),
            cases,
            worst,
            tolerance: 1e-10,
            measure: "absolute".to_owned(),
            source: "Condon & Shortley 1935, from memory".to_owned(),
        },
    );
}

/// A number between 1 and 2 that only the place decides.
fn arbitrary(place: usize) -> f64 {
    1.0 + (place as f64 * 0.618_033_988_749_895).fract()
}

fn any_values(own: &Hamiltonian) -> Vec<f64> {
    (0..own.parameters().len()).map(arbitrary).collect()
}

#[test]
fn the_mean_of_all_levels_is_the_mean_of_the_averages() {
    let sets: &[(&[u8], &[Vec<u32>])] = &[
        (&[2], &[vec![4]]),
        (&[3], &[vec![6]]),
        (&[3, 2], &[vec![3, 1]]),
        (&[2, 0, 1], &[vec![6, 1, 1], vec![7, 0, 1]]),
        (
            &[1, 0, 2, 1],
            &[vec![5, 0, 1, 0], vec![5, 1, 0, 0], vec![4, 1, 0, 1]],
        ),
    ];
    let (mut worst, mut cases) = (0.0_f64, 0);
    for (shells, configurations) in sets {
        let own = hamiltonian(shells, configurations);
        let values = any_values(&own);
        let levels = Levels::solve(&own, &values).expect("levels");
        let weight = |level: &Level| f64::from(level.two_j + 1);
        let sum: f64 = levels.levels.iter().map(|l| weight(l) * l.energy).sum();
        let states: f64 = levels.levels.iter().map(weight).sum();
        let expected: f64 = own
            .basis()
            .states()
            .iter()
            .map(|state| state.total().degeneracy() * values[state.configuration])
            .sum();
        worst = worst.max(((sum - expected) / states).abs());
        cases += levels.levels.len();
        let sizes = estimate(shells, configurations).expect("sizes");
        assert_eq!(sizes.levels as usize, levels.levels.len());
        assert_eq!(sizes.states as f64, states);
        assert_eq!(sizes.ls_states as usize, own.basis().states().len());
        for rows in &levels.rows {
            assert!(
                sizes
                    .rows_by_two_j
                    .contains(&(rows.two_j, rows.states.len() as u64))
            );
        }
        // Normalised, orthogonal, the largest component positive; the same again.
        for (number, level) in levels.levels.iter().enumerate() {
            for other in levels.levels.iter().skip(number) {
                if other.two_j == level.two_j {
                    let overlap: f64 = level
                        .vector
                        .iter()
                        .zip(&other.vector)
                        .map(|(a, b)| a * b)
                        .sum();
                    let expected = f64::from(u8::from(std::ptr::eq(level, other)));
                    assert!((overlap - expected).abs() < 1e-12);
                }
            }
        }
        assert_eq!(Levels::solve(&own, &values).expect("levels"), levels);
    }
    report(
        "structure-trace",
        Row {
            quantity: "mean of all levels against the averages, mixing configurations too"
                .to_owned(),
            cases,
            worst,
            tolerance: 1e-11,
            measure: "absolute, integrals 1 to 2".to_owned(),
            source: "trace rule".to_owned(),
        },
    );
}

/// [E(J) − E(J−1)]/(J ζ) of every interval of every term with more than one.
fn intervals(own: &Hamiltonian, zeta: f64) -> Vec<Vec<f64>> {
    let values = own.values(|parameter| match parameter.integral {
        Integral::Direct { k, .. } => 1.0 / f64::from(k),
        Integral::SpinOrbit { .. } => zeta,
        _ => 0.0,
    });
    let levels = Levels::solve(own, &values).expect("levels");
    let lead = |level: &Level| levels.composition(level)[0].0;
    let of_term = |place: usize| {
        let mut term: Vec<&Level> = levels.levels.iter().filter(|l| lead(l) == place).collect();
        term.sort_by_key(|level| level.two_j);
        let interval = |pair: &[&Level]| {
            (pair[1].energy - pair[0].energy) * 2.0 / f64::from(pair[1].two_j) / zeta
        };
        term.windows(2).map(interval).collect()
    };
    (0..own.basis().states().len()).map(of_term).collect()
}

#[test]
fn weak_spin_orbit_coupling_keeps_landes_intervals() {
    let (mut worst, mut cases) = (0.0_f64, 0);
    for (l, electrons) in [(1, 2), (1, 4), (2, 2), (2, 3), (2, 7), (3, 3), (3, 11)] {
        let own = hamiltonian(&[l], &[vec![electrons]]);
        let (weak, weaker) = (intervals(&own, 1e-6), intervals(&own, 1e-7));
        for (weak, weaker) in weak.iter().zip(&weaker) {
            // The second order grows with ζ; extrapolated to ζ = 0 it is gone.
            let limit = weak.iter().zip(weaker).map(|(a, b)| (10.0 * b - a) / 9.0);
            let limit: Vec<f64> = limit.collect();
            for pair in limit.windows(2) {
                worst = worst.max((pair[0] - pair[1]).abs());
                cases += 1;
            }
        }
    }
    report(
        "structure-lande",
        Row {
            quantity: "Landé's intervals in the limit ζ → 0".to_owned(),
            cases,
            worst,
            tolerance: 1e-6,
            measure: "of ζ".to_owned(),
            source: "Landé's interval rule".to_owned(),
        },
    );
}

#[test]
fn strong_spin_orbit_coupling_gives_the_energies_of_jj_coupling() {
    let choose = |n: u32, k: u32| (0..k).fold(1.0, |c, i| c * f64::from(n - i) / f64::from(i + 1));
    let (mut worst, mut cases) = (0.0_f64, 0);
    for (l, electrons) in [
        (1, 2),
        (1, 3),
        (2, 2),
        (2, 5),
        (2, 8),
        (3, 2),
        (3, 4),
        (3, 12),
    ] {
        let own = hamiltonian(&[l], &[vec![electrons]]);
        let values = own.values(|parameter| match parameter.integral {
            Integral::SpinOrbit { .. } => 1.0,
            _ => 0.0,
        });
        let levels = Levels::solve(&own, &values).expect("levels");
        let l32 = u32::from(l);
        // ζ ℓ/2 for j = ℓ + ½, −ζ (ℓ+1)/2 for j = ℓ − ½.
        let (mut seen, mut levels_seen) = (0.0, 0);
        for lower in 0..=electrons.min(2 * l32) {
            let upper = electrons - lower;
            if upper > 2 * l32 + 2 {
                continue;
            }
            let energy = (f64::from(upper * l32) - f64::from(lower * (l32 + 1))) / 2.0;
            let of_it = levels
                .levels
                .iter()
                .filter(|level| (level.energy - energy).abs() < 0.1);
            let mut states = 0.0;
            for level in of_it {
                worst = worst.max((level.energy - energy).abs());
                states += f64::from(level.two_j + 1);
                levels_seen += 1;
            }
            assert_eq!(states, choose(2 * l32, lower) * choose(2 * l32 + 2, upper));
            seen += states;
        }
        assert_eq!(seen, choose(4 * l32 + 2, electrons));
        assert_eq!(levels_seen, levels.levels.len());
        cases += levels_seen;
        // Ties: equal energies still have orthonormal vectors of a rule, and the same ones again.
        assert_eq!(Levels::solve(&own, &values).expect("levels"), levels);
    }
    report(
        "structure-jj",
        Row {
            quantity: "energies of jj coupling for F² = 0".to_owned(),
            cases,
            worst,
            tolerance: 1e-12,
            measure: "of ζ".to_owned(),
            source: "ζ ℓ/2 and −ζ (ℓ+1)/2 for each electron, exact".to_owned(),
        },
    );
}

/// α shifts the terms of a subshell by L(L+1), and no average; β and γ are there for d and f alone.
#[test]
fn effective_interactions_keep_the_average() {
    let count = |shells: &[u8], electrons: &[u32], kind: Effective| {
        let basis = Basis::new(shells, &[electrons.to_vec()]).expect("a basis");
        let own = Hamiltonian::with_effective(basis).expect("coefficients");
        let is_it = |integral: Integral| matches!(integral, Integral::Effective { kind: k, .. } if k == kind);
        let values = own.values(|parameter| f64::from(u8::from(is_it(parameter.integral))));
        let levels = Levels::solve(&own, &values).expect("levels");
        let weight = |level: &Level| f64::from(level.two_j + 1);
        let mean: f64 = levels.levels.iter().map(|l| weight(l) * l.energy).sum();
        assert!(mean.abs() < 1e-9);
        // Without other interactions a level is one state, shifted by its subshells' terms.
        let mut offset: Option<f64> = None;
        for level in &levels.levels {
            let state = &own.basis().states()[levels.composition(level)[0].0];
            let factor = |subshell: usize| {
                let term = &own.basis().terms(0, subshell)[state.terms[subshell]];
                let l = f64::from(term.l_total);
                match (kind, shells[subshell]) {
                    (Effective::Alpha, 1..=3) => l * (l + 1.0),
                    (Effective::Beta, 2) | (Effective::Gamma, 3) => {
                        term.rotation_casimir.expect("W")
                    }
                    (Effective::Beta, 3) => term.g2_casimir.expect("U"),
                    _ => 0.0,
                }
            };
            let shift: f64 = (0..shells.len())
                .filter(|&a| own.basis().terms(0, a).len() > 1)
                .map(factor)
                .sum();
            let here = level.energy - shift;
            assert!((here - *offset.get_or_insert(here)).abs() < 1e-11);
        }
        values.iter().filter(|&&value| value == 1.0).count()
    };
    for (shells, electrons, expected) in [
        (vec![1], vec![3], [1, 0, 0]),
        (vec![2], vec![3], [1, 1, 0]),
        (vec![3], vec![4], [1, 1, 1]),
        (vec![2, 1], vec![2, 2], [2, 1, 0]),
        (vec![3, 2, 0], vec![2, 1, 2], [1, 1, 1]),
        (vec![0], vec![1], [0, 0, 0]),
    ] {
        let kinds = [Effective::Alpha, Effective::Beta, Effective::Gamma];
        assert_eq!(kinds.map(|kind| count(&shells, &electrons, kind)), expected);
    }
}

#[test]
fn without_any_interaction_levels_are_pure_and_in_order() {
    let own = hamiltonian(&[2, 1], &[vec![3, 1]]);
    let levels = Levels::solve(&own, &own.values(|_| 0.0)).expect("levels");
    let two_js: Vec<i32> = levels.levels.iter().map(|level| level.two_j).collect();
    assert!(two_js.is_sorted());
    for level in &levels.levels {
        assert_eq!(levels.composition(level).len(), 1);
        assert_eq!(levels.composition(level)[0].1, 100.0);
    }
}

#[test]
fn bad_values_are_faults() {
    let own = hamiltonian(&[1], &[vec![2]]);
    let code = |values: &[f64]| Levels::solve(&own, values).expect_err("a fault").code;
    assert_eq!(code(&[]), "parameter-not-finite");
    assert_eq!(code(&own.values(|_| f64::NAN)), "parameter-not-finite");
    assert_eq!(code(&own.values(|_| f64::INFINITY)), "parameter-not-finite");
    // Finite, but not their sums.
    assert_eq!(code(&own.values(|_| f64::MAX)), "levels-not-found");
}

/// Every shell that is allowed, alone, beside an s electron and beside another of its kind.
#[test]
fn high_orbital_momenta_are_computed() {
    for l in [4_u8, 5, 9, 20, 49] {
        let full = 4 * u32::from(l) + 2;
        for electrons in [0, 1, 2, full - 1, full] {
            for (shells, occupations) in [
                (vec![l], vec![electrons]),
                (vec![0, l], vec![1, electrons]),
                (vec![l, 1], vec![electrons, 5]),
            ] {
                let own = hamiltonian(&shells, &[occupations]);
                let values = any_values(&own);
                let levels = Levels::solve(&own, &values).expect("levels");
                let weight = |level: &Level| f64::from(level.two_j + 1);
                let sum: f64 = levels.levels.iter().map(|l| weight(l) * l.energy).sum();
                let states: f64 = levels.levels.iter().map(weight).sum();
                assert!((sum / states - values[0]).abs() < 1e-10, "{l} {electrons}");
            }
        }
    }
}
