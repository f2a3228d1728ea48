//! Weak-field patterns against published ones, exact 3j symbols and a diagonalised Zeeman effect.

use rungline_core::quantity::TwiceJ;
use rungline_core::radiation::Multipole;
use rungline_core::splitting::weak_field::{
    Polarisation, SplitLevel, energy, offset, pattern, states,
};
use rungline_core::terms::{Term, lande};
use rungline_tests::{Row, relative_error, report, vector_json};

fn level(two_s: u32, l: u32, two_j: i32) -> SplitLevel {
    let j = TwiceJ::from_doubled(two_j);
    let g = lande::ls(Term { two_s, l }, j).unwrap_or(0.0);
    SplitLevel { j, g }
}

#[test]
fn strengths_are_squares_of_3j_symbols() {
    let vectors = vector_json("zeeman_components.json");
    let cases = vectors["cases"].as_array().unwrap();
    let (mut count, mut worst) = (0, 0.0_f64);
    for case in cases {
        let [upper, lower] = ["twoJ_upper", "twoJ_lower"].map(|key| SplitLevel {
            j: TwiceJ::from_doubled(i32::try_from(case[key].as_i64().unwrap()).unwrap()),
            g: 1.0,
        });
        let ours = pattern(upper, lower, Multipole::E1).unwrap();
        let theirs = case["components"].as_array().unwrap();
        assert_eq!(ours.components.len(), theirs.len());
        for component in theirs {
            let [m, n, p, q] = [0, 1, 2, 3].map(|i| component[i].as_i64().unwrap());
            let found = ours
                .components
                .iter()
                .find(|c| {
                    i64::from(c.m_upper.doubled()) == m && i64::from(c.m_lower.doubled()) == n
                })
                .unwrap();
            worst = worst.max(relative_error(found.strength, p as f64 / q as f64));
            count += 1;
        }
    }
    report(
        "splitting-components",
        Row {
            quantity: "strengths of weak-field components".into(),
            cases: count,
            worst,
            tolerance: 4e-16,
            measure: "relative".into(),
            source: "3j symbols of sympy 1.14.0 (BSD-3-Clause)".into(),
        },
    );
}

#[test]
fn sodium_d_lines() {
    // Published diagrams (Condon & Shortley 1935, ch. XVI; from memory), places with g_s = 2, seen
    // across the field: D1 has four equal components, π ±2/3 and σ ±4/3; D2 has six, π ±1/3,
    // σ ±1, σ ±5/3 with 4 : 3 : 1.
    let ground = level(1, 0, 1);
    let d1 = pattern(level(1, 1, 1), ground, Multipole::E1).unwrap();
    assert_eq!(d1.components.len(), 4);
    for c in &d1.components {
        let place = match c.polarisation {
            Polarisation::Pi => 2.0 / 3.0,
            _ => 4.0 / 3.0,
        };
        assert!((c.lorentz.abs() - place).abs() < 2e-3);
        assert!((c.across() - 0.25).abs() < 1e-15);
    }
    let d2 = pattern(level(1, 1, 3), ground, Multipole::E1).unwrap();
    assert_eq!(d2.components.len(), 6);
    let mut seen: Vec<(f64, &str, f64)> = d2
        .components
        .iter()
        .map(|c| (c.lorentz, c.polarisation.name(), 16.0 * c.across()))
        .collect();
    seen.sort_by(|a, b| a.0.total_cmp(&b.0));
    let published = [
        (-5.0 / 3.0, "sigma-", 1.0),
        (-1.0, "sigma-", 3.0),
        (-1.0 / 3.0, "pi", 4.0),
        (1.0 / 3.0, "pi", 4.0),
        (1.0, "sigma+", 3.0),
        (5.0 / 3.0, "sigma+", 1.0),
    ];
    for (ours, theirs) in seen.iter().zip(published) {
        assert!((ours.0 - theirs.0).abs() < 2e-3, "{ours:?} {theirs:?}");
        assert_eq!(ours.1, theirs.1);
        assert!((ours.2 - theirs.2).abs() < 1e-14, "{ours:?} {theirs:?}");
    }
}

#[test]
fn singlets_give_the_normal_triplet() {
    // Δν = 13.996 GHz/T (μ_B/h, CODATA 2022: 13.996 244 917 1 GHz/T).
    for (upper_l, lower_l) in [(1, 0), (2, 1), (3, 2), (1, 2)] {
        let upper = level(0, upper_l, 2 * i32::try_from(upper_l).unwrap());
        let lower = level(0, lower_l, 2 * i32::try_from(lower_l).unwrap());
        let triplet = pattern(upper, lower, Multipole::E1).unwrap();
        assert!(triplet.is_normal_triplet());
        let places = triplet.positions();
        let at: Vec<f64> = places.iter().map(|p| p.lorentz).collect();
        assert_eq!(at, [-1.0, 0.0, 1.0]);
        for place in &places {
            assert!((place.strength - 1.0 / 3.0).abs() < 1e-15);
        }
        let one = offset(1.0, 1.0, None).unwrap();
        assert!((one.frequency - 13.996_244_917_1).abs() < 1e-9);
        assert!((one.wavenumber - 0.466_864_477_19).abs() < 1e-15);
    }
}

#[test]
fn sum_rules_and_symmetry_of_every_pattern() {
    for two_s in 0..=5_u32 {
        for (l, k) in [(0, 1), (1, 0), (1, 1), (1, 2), (2, 3), (4, 3)] {
            for upper_j in (Term { two_s, l }).levels() {
                for lower_j in (Term { two_s, l: k }).levels() {
                    let upper = level(two_s, l, upper_j.doubled());
                    let lower = level(two_s, k, lower_j.doubled());
                    let Ok(pattern) = pattern(upper, lower, Multipole::E1) else {
                        continue;
                    };
                    let total: f64 = pattern.components.iter().map(|c| c.strength).sum();
                    assert!((total - 1.0).abs() < 1e-14);
                    for polarisation in [
                        Polarisation::Pi,
                        Polarisation::SigmaPlus,
                        Polarisation::SigmaMinus,
                    ] {
                        let of = pattern
                            .components
                            .iter()
                            .filter(|c| c.polarisation == polarisation);
                        let sum: f64 = of.map(|c| c.strength).sum();
                        assert!((sum - 1.0 / 3.0).abs() < 1e-14);
                    }
                    let centre: f64 = pattern
                        .components
                        .iter()
                        .map(|c| c.strength * c.lorentz)
                        .sum();
                    assert!(centre.abs() < 1e-14);
                    for angle in [0.0, 17.0, 45.0, 54.735_610_317_245_346, 90.0, 120.0, 180.0] {
                        let seen: f64 = pattern.components.iter().map(|c| c.seen(angle)).sum();
                        assert!((seen - 1.0).abs() < 1e-14, "{angle}: {seen}");
                    }
                    for c in &pattern.components {
                        // The mirror image, M → −M, has the opposite place and the same strength.
                        let mirror = pattern.components.iter().find(|d| {
                            d.m_upper.doubled() == -c.m_upper.doubled()
                                && d.m_lower.doubled() == -c.m_lower.doubled()
                        });
                        let mirror = mirror.unwrap();
                        assert_eq!(mirror.lorentz.to_bits(), (-c.lorentz + 0.0).to_bits());
                        assert_eq!(mirror.strength.to_bits(), c.strength.to_bits());
                        assert_eq!(c.seen(90.0).to_bits(), c.across().to_bits());
                        assert_eq!(c.seen(0.0).to_bits(), c.along().to_bits());
                        if c.polarisation == Polarisation::Pi {
                            assert_eq!(c.along(), 0.0);
                        }
                    }
                }
            }
        }
    }
}

#[test]
fn linear_energies_are_the_slope_of_the_diagonalised_ones() {
    // Source: vectors/zeeman_checks.json, eigenvalues of the whole configuration in a field (own
    // brute-force code). [E(M) − E(−M)]/2 has no quadratic part; the cubic one at 0.01 T is below
    // 1e-9 cm⁻¹ for ζ(p) = 11.46 cm⁻¹.
    let vectors = vector_json("zeeman_checks.json");
    let cases = vectors["cases"].as_array().unwrap();
    let case = cases
        .iter()
        .find(|c| c["name"] == "p1" && c["B_T"].as_f64() == Some(0.01))
        .unwrap();
    let energies = |two_m: i64| -> Vec<f64> {
        let of_m = case["states"].as_array().unwrap().iter();
        of_m.filter(|s| s["twoM"] == two_m)
            .map(|s| s["E"].as_f64().unwrap())
            .collect()
    };
    // Rising energy within an M: ²P1/2 lies below ²P3/2.
    let checks = [
        (level(1, 1, 1), 1, 0),
        (level(1, 1, 3), 1, 1),
        (level(1, 1, 3), 3, 0),
    ];
    for (split, two_m, place) in checks {
        let slope = (energies(two_m)[place] - energies(-two_m)[place]) / 2.0;
        let m = TwiceJ::from_doubled(i32::try_from(two_m).unwrap());
        let ours = offset(energy(split, m), 0.01, None).unwrap().wavenumber;
        assert!((ours - slope).abs() < 1e-9, "{two_m}: {ours} {slope}");
    }
}

#[test]
fn wavelength_offsets_are_exact() {
    // Against 1/σ computed apart: 500 nm is 20 000 cm⁻¹.
    let shifted = offset(1.0, 1.0, Some(500.0)).unwrap();
    let expected = (1.0e7 / (20_000.0 + shifted.wavenumber) - 500.0) * 1.0e3;
    assert!((shifted.wavelength.unwrap() - expected).abs() < 1e-7);
    assert!(
        shifted.wavelength.unwrap() < 0.0,
        "higher energy, shorter wavelength"
    );
    // A shift that would take the line below zero energy has no wavelength.
    assert_eq!(offset(-1.0, 1.0e6, Some(1.0e9)).unwrap().wavelength, None);
    assert_eq!(offset(0.0, 0.0, Some(500.0)).unwrap().wavelength, Some(0.0));
}

#[test]
fn quadrupole_patterns_keep_their_sums_from_every_side() {
    // (J 2 J′; −M q M′)² sums to 1/5 for each q (orthogonality of 3j symbols; Edmonds 1957, eq. 3.7.8);
    // unpolarised levels send the same into every direction.
    for (a, b) in [(4, 0), (4, 2), (5, 1), (3, 3), (8, 4), (7, 5)] {
        let level = |two_j, g| SplitLevel {
            j: TwiceJ::from_doubled(two_j),
            g,
        };
        let line = pattern(level(a, 1.2), level(b, 0.8), Multipole::E2).unwrap();
        for q in -2..=2 {
            let share: f64 = line
                .components
                .iter()
                .filter(|c| c.polarisation.change_of_m() == q)
                .map(|c| c.strength)
                .sum();
            assert!((share - 0.2).abs() < 1e-14, "{a} {b} {q}: {share}");
        }
        for angle in [0.0, 17.0, 45.0, 60.0, 90.0] {
            let seen: f64 = line.components.iter().map(|c| c.seen(angle)).sum();
            assert!((seen - 1.0).abs() < 1e-14, "{a} {b} at {angle}: {seen}");
        }
        let along = line.components.iter().filter(|c| c.along() > 0.0);
        assert!(
            along
                .into_iter()
                .all(|c| c.polarisation.change_of_m().abs() == 1)
        );
    }
}

#[test]
fn what_cannot_be_is_refused() {
    let at = |two_j| SplitLevel {
        j: TwiceJ::from_doubled(two_j),
        g: 1.0,
    };
    let code = |a, b, multipole| pattern(a, b, multipole).unwrap_err().code;
    assert_eq!(code(at(2), at(0), Multipole::E2), "pattern-no-line");
    assert_eq!(code(at(0), at(0), Multipole::E1), "pattern-no-line");
    assert_eq!(code(at(5), at(1), Multipole::M1), "pattern-no-line");
    assert_eq!(code(at(2), at(1), Multipole::E1), "pattern-no-line");
    assert_eq!(code(at(-1), at(1), Multipole::E1), "pattern-negative-j");
    assert_eq!(
        code(at(i32::MAX), at(i32::MAX), Multipole::E1),
        "pattern-too-large"
    );
    for g in [f64::NAN, f64::INFINITY, 2.0e3] {
        let broken = SplitLevel { g, ..at(1) };
        assert_eq!(code(broken, at(1), Multipole::E1), "g-out-of-range");
        assert_eq!(states(broken).unwrap_err().code, "g-out-of-range");
    }
    // J = 0 has no g, so none is asked.
    let zero = SplitLevel {
        g: f64::NAN,
        ..at(0)
    };
    assert!(
        pattern(at(2), zero, Multipole::E1)
            .unwrap()
            .components
            .iter()
            .all(|c| c.lorentz.is_finite())
    );
    assert_eq!(states(zero).unwrap(), [(TwiceJ::from_doubled(0), 0.0)]);
    for tesla in [-1.0, 2.0e6, f64::NAN] {
        assert_eq!(
            offset(1.0, tesla, None).unwrap_err().code,
            "field-out-of-range"
        );
    }
    for nm in [0.0, -5.0, f64::NAN, f64::INFINITY] {
        assert_eq!(
            offset(1.0, 1.0, Some(nm)).unwrap_err().code,
            "wavelength-out-of-range"
        );
    }
}
