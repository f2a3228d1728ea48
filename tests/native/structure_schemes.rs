//! Levels in jj and jK coupling: shares that add up, and the limits in which a scheme is pure.

use rungline_core::structure::{
    Basis, Hamiltonian, Integral, JjTransformation, Levels, Parameter, jk_scheme,
};
use rungline_tests::{Row, report};

fn solve(
    shells: &[u8],
    configurations: &[Vec<u32>],
    value: impl FnMut(&Parameter) -> f64,
) -> (Hamiltonian, Levels) {
    let basis = Basis::new(shells, configurations).expect("a basis");
    let hamiltonian = Hamiltonian::new(basis).expect("coefficients");
    let values = hamiltonian.values(value);
    let levels = Levels::solve(&hamiltonian, &values).expect("levels");
    (hamiltonian, levels)
}

fn ordinary(parameter: &Parameter) -> f64 {
    match parameter.integral {
        Integral::Average => parameter.first as f64,
        Integral::SpinOrbit { a } => 0.4 / (a + 1) as f64,
        Integral::Direct { k, .. } | Integral::Exchange { k, .. } => 1.0 / f64::from(k + 1),
        Integral::Mixing { k, .. } => 0.3 / f64::from(k + 1),
        Integral::OneElectron { .. } | Integral::Effective { .. } => 0.0,
    }
}

#[test]
fn shares_add_up_in_every_scheme() {
    let sets: &[(&[u8], &[Vec<u32>])] = &[
        (&[1], &[vec![3]]),
        (&[2], &[vec![5]]),
        (&[3], &[vec![7]]),
        (&[2, 0, 1], &[vec![2, 1, 1], vec![3, 0, 1]]),
        (&[0, 3, 2], &[vec![2, 3, 1]]),
        (&[1, 0, 2, 1], &[vec![5, 1, 0, 0], vec![5, 0, 1, 0]]),
    ];
    let (mut worst, mut cases, mut jk_cases) = (0.0_f64, 0, 0);
    for (shells, configurations) in sets {
        let (hamiltonian, levels) = solve(shells, configurations, ordinary);
        let basis = hamiltonian.basis();
        let jj = JjTransformation::new(basis).expect("jj states");
        for rows in &levels.rows {
            let scheme = jj.of(basis, rows);
            assert_eq!(scheme.states.len(), rows.states.len());
            let jk = jk_scheme(basis, rows);
            for level in levels.levels.iter().filter(|l| l.two_j == rows.two_j) {
                let sum: f64 = scheme.composition(level).iter().map(|share| share.1).sum();
                worst = worst.max((sum - 100.0).abs());
                cases += 1;
                if let Some(jk) = &jk {
                    assert_eq!(jk.states.len(), rows.states.len());
                    let sum: f64 = jk.composition(level).iter().map(|share| share.1).sum();
                    worst = worst.max((sum - 100.0).abs());
                    jk_cases += 1;
                }
            }
        }
    }
    assert!(jk_cases > 100, "{jk_cases}");
    report(
        "structure-schemes",
        Row {
            quantity: "shares of every level in jj and jK coupling add up".to_owned(),
            cases: cases + jk_cases,
            worst,
            tolerance: 1e-9,
            measure: "percent".to_owned(),
            source: "both are complete".to_owned(),
        },
    );
}

/// Strong spin–orbit coupling of different size in each subshell: levels are single jj states, or
/// share those of equal energy.
#[test]
fn strong_spin_orbit_coupling_makes_jj_pure() {
    let sets: &[(&[u8], &[u32])] = &[
        (&[1], &[2]),
        (&[2], &[3]),
        (&[3], &[3]),
        (&[2], &[6]),
        (&[1, 2], &[1, 1]),
        (&[1, 0], &[3, 1]),
        (&[2, 1, 0], &[2, 1, 1]),
    ];
    let (mut worst, mut cases) = (0.0_f64, 0);
    for &(shells, electrons) in sets {
        let (hamiltonian, levels) =
            solve(shells, &[electrons.to_vec()], |parameter| {
                match parameter.integral {
                    Integral::SpinOrbit { a } => 1.0 + a as f64 * 0.618_033_988_749_895,
                    Integral::Direct { .. } | Integral::Exchange { .. } => {
                        1e-7 * ordinary(parameter)
                    }
                    _ => 0.0,
                }
            });
        let basis = hamiltonian.basis();
        let jj = JjTransformation::new(basis).expect("jj states");
        for rows in &levels.rows {
            let scheme = jj.of(basis, rows);
            for level in levels.levels.iter().filter(|l| l.two_j == rows.two_j) {
                let shares = scheme.composition(level);
                let kind = |place: usize| -> Vec<u32> {
                    scheme.states[place]
                        .subshells
                        .iter()
                        .map(|s| s.upper)
                        .collect()
                };
                let lead = kind(shares[0].0);
                let same: f64 = shares
                    .iter()
                    .filter(|s| kind(s.0) == lead)
                    .map(|s| s.1)
                    .sum();
                worst = worst.max((same - 100.0).abs());
                // The energy is that of the electrons of either j.
                let energy: f64 = scheme.states[shares[0].0]
                    .subshells
                    .iter()
                    .zip(shells)
                    .enumerate()
                    .map(|(a, (state, &l))| {
                        let zeta = 1.0 + a as f64 * 0.618_033_988_749_895;
                        let l = f64::from(l);
                        zeta * (f64::from(state.upper) * l - f64::from(state.lower) * (l + 1.0))
                            / 2.0
                    })
                    .sum();
                assert!((level.energy - energy).abs() < 1e-5);
                cases += 1;
            }
        }
    }
    report(
        "structure-jj-pure",
        Row {
            quantity: "purity by occupation of j for ζ = 10⁷ F²".to_owned(),
            cases,
            worst,
            tolerance: 1e-8,
            measure: "percent".to_owned(),
            source: "limit of jj coupling".to_owned(),
        },
    );
}

/// A core with strong spin–orbit coupling, an outer electron with F² alone: K is good.
#[test]
fn a_direct_interaction_weaker_than_the_cores_coupling_makes_jk_pure() {
    let (mut worst, mut cases) = (0.0_f64, 0);
    for (shells, electrons) in [
        (vec![1_u8, 1], vec![5_u32, 1]),
        (vec![1, 2], vec![5, 1]),
        (vec![1, 3], vec![1, 1]),
        (vec![2, 0, 3], vec![9, 2, 1]),
    ] {
        let (hamiltonian, levels) = solve(&shells, &[electrons], |parameter| {
            match parameter.integral {
                Integral::SpinOrbit { a: 0 } => 1.0,
                Integral::Direct { k: 2, .. } => 1e-7,
                Integral::Direct { k: 4, .. } => 0.3e-7,
                Integral::Average | Integral::Direct { .. } => 0.0,
                _ => 0.0,
            }
        });
        for rows in &levels.rows {
            let scheme = jk_scheme(hamiltonian.basis(), rows).expect("one outer electron");
            for level in levels.levels.iter().filter(|l| l.two_j == rows.two_j) {
                let shares = scheme.composition(level);
                worst = worst.max(100.0 - shares[0].1);
                cases += 1;
            }
        }
    }
    report(
        "structure-jk-pure",
        Row {
            quantity: "purity in jK coupling for ζ of the core ≫ F² ≫ the rest".to_owned(),
            cases,
            worst,
            tolerance: 1e-8,
            measure: "percent".to_owned(),
            source: "limit of jK coupling".to_owned(),
        },
    );
}
