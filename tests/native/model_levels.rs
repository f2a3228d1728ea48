//! From a nucleus to levels and lines: what must hold whatever the radial functions are.

use rungline_core::structure::Integral;
use rungline_core::structure::model::{Case, Given, Kind, MultipoleKind, Name, Spectrum, solve};
use rungline_tests::model::{case, energy, field, orbital, spectrum};
use rungline_tests::{Row, report};
use std::collections::BTreeSet;

fn cases() -> Vec<Case> {
    vec![
        case(
            12,
            24,
            10,
            &["3s2", "3p2", "3s 3d", "3s 3p", "3p 3d", "3s 4p"],
        ),
        case(
            6,
            12,
            2,
            &[
                "2s2 2p2",
                "2p4",
                "2s 2p3",
                "2s2 2p 3s",
                "2s2 2p 3d",
                "2s2 2p 3p",
            ],
        ),
        case(26, 56, 18, &["3d6 4s2", "3d7 4s", "3d6 4s 4p"]),
        case(
            22,
            48,
            18,
            &["3d2 4s2", "3d3 4s", "3d4", "3d2 4s 4p", "3d3 4p", "3d3 5s"],
        ),
    ]
}

#[test]
fn the_mean_of_all_levels_is_the_mean_of_the_averages() {
    let (mut worst, mut count): (f64, usize) = (0.0, 0);
    for case in cases() {
        let spectrum = spectrum(&case);
        for parity in &spectrum.parities {
            let (mut sum, mut weight) = (0.0, 0.0);
            for level in &parity.levels.levels {
                sum += f64::from(level.two_j + 1) * level.energy;
                weight += f64::from(level.two_j + 1);
            }
            let mut averages = 0.0;
            let mut states = 0.0;
            for state in parity.basis().states() {
                let place = parity.configuration_of(state).expect("a configuration");
                let average = spectrum
                    .parameters
                    .iter()
                    .find(|v| v.name == Name::Average(place));
                let degeneracy = state.total().degeneracy();
                averages += degeneracy * average.expect("an average").value;
                states += degeneracy;
            }
            assert!((states - weight).abs() < 1e-9);
            worst = worst.max((sum / weight - averages / states).abs());
            count += 1;
        }
    }
    report(
        "structure_model_trace",
        Row {
            quantity: "mean of all computed levels against E_av, mixing configurations of one atom"
                .into(),
            cases: count,
            worst,
            tolerance: 1e-8,
            measure: "absolute, cm⁻¹".into(),
            source: "trace rule".into(),
        },
    );
}

#[test]
fn functions_that_are_stationary_leave_no_mean_coupling() {
    let (mut worst, mut count): (f64, usize) = (0.0, 0);
    let sets = [
        case(12, 24, 10, &["3s2", "3s 4s", "3s 5s"]),
        case(13, 27, 10, &["3s2 3p", "3s2 4p", "3s 3p 4s"]),
        case(7, 14, 2, &["2s2 2p3", "2s2 2p2 3p", "2p5"]),
        case(
            23,
            51,
            18,
            &["3d3 4s2", "3d4 4s", "3d3 4s 5s", "3d2 4s2 4d"],
        ),
    ];
    for case in sets {
        let spectrum = spectrum(&case);
        for parity in &spectrum.parities {
            let hamiltonian = &parity.hamiltonian;
            let basis = parity.basis();
            for (place, parameter) in hamiltonian.parameters().iter().enumerate() {
                if !matches!(parameter.integral, Integral::OneElectron { .. }) {
                    continue;
                }
                // Σ (2S+1)(2L+1) ⟨coupling⟩⟨a†c⟩ over all pairs of states of the two configurations.
                let (mut mean, mut size) = (0.0, 0.0);
                for (block, entries) in basis.blocks().iter().zip(hamiltonian.electrostatic()) {
                    let weight = block.total.degeneracy();
                    let jumps = entries.iter().filter(|entry| entry.parameter == place);
                    for jump in jumps {
                        let same = entries
                            .iter()
                            .filter(|e| (e.row, e.column) == (jump.row, jump.column));
                        for entry in same {
                            let term =
                                weight * jump.value * entry.value * parity.values[entry.parameter];
                            mean += term;
                            size += term.abs();
                        }
                    }
                }
                assert!(size > 0.0, "{case:?}");
                worst = worst.max(mean.abs() / size);
                count += 1;
            }
        }
    }
    report(
        "structure_model_stationary",
        Row {
            quantity: "mean coupling of configurations that differ by nℓ → n′ℓ".into(),
            cases: count,
            worst,
            tolerance: 1e-9,
            measure: "relative to its parts".into(),
            source: "Brillouin's theorem for the average of a configuration".into(),
        },
    );
}

#[test]
fn the_order_of_configurations_changes_nothing() {
    let mut worst: f64 = 0.0;
    let mut count = 0;
    for case in cases().into_iter().take(2) {
        let mut turned = case.clone();
        turned.configurations.reverse();
        let (one, two) = (spectrum(&case), spectrum(&turned));
        let shift = energy(&one, 0).0 - energy(&two, 0).0;
        for place in 0..one.levels.len() {
            let (first, second) = (energy(&one, place), energy(&two, place));
            // Neighbours that are nearly equal may stand in either order.
            worst = worst.max((first.0 - second.0 - shift).abs());
            count += 1;
        }
        let sum = |spectrum: &Spectrum| -> f64 {
            let lines = spectrum
                .lines(&[MultipoleKind::E1], &mut |_| true)
                .expect("lines");
            assert!(
                lines
                    .lines
                    .iter()
                    .all(|line| line.upper > line.lower && line.s > 0.0)
            );
            lines.lines.iter().map(|line| line.s).sum()
        };
        assert!((sum(&one) / sum(&two) - 1.0).abs() < 1e-7);
    }
    report(
        "structure_model_order",
        Row {
            quantity: "levels of configurations in another order".into(),
            cases: count,
            worst,
            tolerance: 1e-6,
            measure: "absolute, cm⁻¹".into(),
            source: "the same states".into(),
        },
    );
}

#[test]
fn every_level_has_a_name_of_its_own() {
    for case in cases() {
        let spectrum = spectrum(&case);
        let mut names = BTreeSet::new();
        for &place in &spectrum.levels {
            let (parity, level) = spectrum.level(place).expect("a level");
            let state = parity.named[place.level];
            assert!(
                spectrum
                    .state_of(place)
                    .expect("a state")
                    .total()
                    .reaches(level.two_j)
            );
            assert!(names.insert((place.parity, state, level.two_j)));
        }
    }
}

#[test]
fn what_is_given_replaces_what_is_computed_and_is_not_scaled() {
    let mut case = case(12, 24, 10, &["3s2", "3s 3p", "3s 4p"]);
    let exchange = Name::Exchange {
        k: 1,
        a: orbital("3p"),
        b: orbital("3s"),
    };
    let given = |name, configuration, value| Given {
        name,
        configuration,
        value,
    };
    case.scale.g = 0.8;
    case.scale.zeta = 0.5;
    case.given = vec![
        given(exchange, Some(1), 25_000.0),
        given(exchange, None, 1.0),
        given(Name::SpinOrbit(orbital("5f")), None, 1.0),
        given(Name::Average(2), None, 50_000.0),
        given(Name::Dipole(orbital("3p"), orbital("3s")), None, 2.0),
    ];
    let spectrum = spectrum(&case);
    let value = |name: Name, place| {
        *(spectrum.parameters.iter())
            .find(|v| v.name.ordered() == name.ordered() && v.configurations == (place, place))
            .expect("a parameter")
    };
    let found = value(exchange, 1);
    assert_eq!(
        (found.value, found.kind, found.scale),
        (25_000.0, Kind::Entered, 1.0)
    );
    assert!(found.computed.expect("computed too") > 26_000.0);
    let zeta = value(Name::SpinOrbit(orbital("3p")), 1);
    assert_eq!(zeta.value, 0.5 * zeta.computed.expect("computed"));
    assert_eq!(value(Name::Average(2), 2).value, 50_000.0);
    assert_eq!(spectrum.unused, [2]);
    let lines = spectrum
        .lines(&[MultipoleKind::E1], &mut |_| true)
        .expect("lines");
    assert_eq!(lines.integrals[0].value, 2.0);
    assert_eq!(lines.integrals[0].kind, Kind::Entered);
}

#[test]
fn any_atom_has_only_what_is_given() {
    let mut case = case(12, 24, 0, &["2p2", "2p 3s"]);
    case.nucleus = None;
    let p = orbital("2p");
    case.given = vec![Given {
        name: Name::Direct { k: 2, a: p, b: p },
        configuration: None,
        value: 25_000.0,
    }];
    let spectrum = spectrum(&case);
    // p²: −3/25, 3/25 and 12/25 of F² (Condon & Shortley 1935, chapter 5).
    let energies: Vec<f64> = (0..spectrum.levels.len())
        .map(|p| energy(&spectrum, p).0)
        .collect();
    let expected = [
        -3000.0, -3000.0, -3000.0, 0.0, 0.0, 0.0, 0.0, 3000.0, 12_000.0,
    ];
    for (energy, expected) in energies.iter().zip(expected) {
        assert!((energy - expected).abs() < 1e-8, "{energies:?}");
    }
    assert!(spectrum.origin.is_none());
}

#[test]
fn work_that_is_stopped_says_so() {
    let case = case(12, 24, 10, &["3s2", "3s 3p"]);
    let mut calls = 0;
    let refused = solve(&case, &mut field, &mut |done| {
        calls += 1;
        assert!((0.0..=1.0).contains(&done));
        calls < 4
    });
    assert_eq!(refused.expect_err("stopped").code, "stopped");
    let mut short = case.clone();
    short.configurations[1].pop();
    assert_eq!(
        solve(&short, &mut field, &mut |_| true)
            .expect_err("too few")
            .code,
        "electron-numbers-differ"
    );
}

#[test]
fn the_sum_of_all_strengths_does_not_depend_on_mixing() {
    let (mut worst, mut count): (f64, usize) = (0.0, 0);
    for case in cases().into_iter().take(3) {
        let mut pure = case.clone();
        pure.mixing = false;
        pure.scale.zeta = 0.0;
        let sum = |case: &Case, kind| -> f64 {
            let spectrum = spectrum(case);
            let lines = spectrum.lines(&[kind], &mut |_| true).expect("lines");
            lines.lines.iter().map(|line| line.s).sum()
        };
        let (one, two) = (sum(&case, MultipoleKind::E1), sum(&pure, MultipoleKind::E1));
        worst = worst.max((one / two - 1.0).abs());
        count += 1;
    }
    report(
        "structure_model_sum",
        Row {
            quantity: "sum of all E1 strengths of an atom, mixed and pure".into(),
            cases: count,
            worst,
            tolerance: 1e-10,
            measure: "relative".into(),
            source: "Condon & Shortley 1935, chapter 9".into(),
        },
    );
}

#[test]
fn levels_are_pure_in_the_limits_of_both_schemes() {
    // 3d² 4s 4p, 2p³ and 4f 5d, ζ times 10⁶ or nothing.
    for (z, core, text) in [
        (22, 18, "3d2 4s 4p"),
        (7, 2, "2s2 2p3"),
        (58, 54, "4f 5d 6s2"),
    ] {
        for (factor, in_jj) in [(1e6, true), (0.0, false)] {
            let mut case = case(z, 2 * u16::from(z), core, &[text]);
            case.scale.zeta = factor;
            let spectrum = spectrum(&case);
            let parity = &spectrum.parities[0];
            let jj = parity.jj().expect("jj states");
            let means = parity.means(&jj, None);
            if in_jj {
                // Levels of one set of j are told apart by what is left of F^k and G^k: mixed states of one
                // set count together.
                let mut least: f64 = 100.0;
                for level in &parity.levels.levels {
                    let scheme = &jj[parity.rows_place(level).expect("its J")];
                    let mut sets: std::collections::BTreeMap<Vec<u32>, f64> = Default::default();
                    for (place, share) in scheme.composition(level) {
                        let set = scheme.states[place].subshells.iter().map(|s| s.upper);
                        *sets.entry(set.collect()).or_default() += share;
                    }
                    least = least.min(sets.values().copied().fold(0.0, f64::max));
                }
                assert!(least > 99.99, "{text}: {least}");
            } else {
                assert!(
                    means.ls > 60.0
                        && parity.levels.levels.iter().all(|level| {
                            // One S and L each.
                            let shares = parity.levels.composition(level);
                            let totals: BTreeSet<_> = shares
                                .iter()
                                .filter(|share| share.1 > 1e-9)
                                .map(|share| parity.basis().states()[share.0].total())
                                .collect();
                            totals.len() == 1
                        }),
                    "{text}"
                );
            }
        }
    }
}
