//! Quantum defects, expansions and limits against measured levels.

use rungline_core::constants::RYDBERG;
use rungline_core::radiation::isotope::{light_nucleus, nuclear_mass, rydberg};
use rungline_core::radiation::series::{Core, Member, defect, fit};
use rungline_tests::{Row, relative_error, report, vector_rows};

/// The np ²P of an alkali atom, the level of this weight, n rising from `first`.
fn alkali(element: &str, weight: &str, first: u32) -> Vec<Member> {
    let rows = vector_rows("resonance_lines_fvalues.csv");
    let own = rows
        .iter()
        .filter(|row| row["element"] == element && row["stage"] == "I" && row["g_up"] == weight);
    own.zip(first..)
        .map(|(row, n)| Member {
            n,
            energy: row["E_up_cm1"].parse().expect("a number"),
        })
        .collect()
}

fn core(mass: f64) -> Core {
    Core {
        charge: 1,
        rydberg: rydberg(Some(mass)).expect("a mass"),
    }
}

/// Limits in cm⁻¹ from the ionisation energies of `ground_levels_all_ions.csv`.
fn limit(element: &str) -> f64 {
    let rows = vector_rows("ground_levels_all_ions.csv");
    let row = rows
        .iter()
        .find(|row| row["symbol"] == element && row["charge"] == "0")
        .expect("an atom");
    row["IE_eV"].parse::<f64>().expect("a number") * 8_065.543_937
}

#[test]
fn limits_of_alkali_atoms() {
    // Levels of Morton 2003; limits of the table of ionisation energies.
    let (mut worst, mut cases) = (0.0_f64, 0);
    for (element, first, mass) in [("Na", 3, 22.989_77), ("K", 4, 38.963_7)] {
        for weight in ["2", "4"] {
            let members = alkali(element, weight, first);
            let found = fit(&members, None, core(mass), 3).expect("a series");
            let uncertainty = found.limit_uncertainty().expect("members to spare");
            let deviation = (found.limit() - limit(element)).abs();
            println!(
                "{element} {weight}: {} ± {uncertainty}, {:?}",
                found.limit(),
                found.coefficients()
            );
            assert!(uncertainty < 0.2);
            worst = worst.max(deviation);
            cases += 1;
        }
    }
    report(
        "radiation-series-limits",
        Row {
            quantity: "limits of np series by Ritz's expansion, cm⁻¹".into(),
            cases,
            worst,
            tolerance: 0.1,
            measure: "absolute".into(),
            source: "levels: Morton 2003 by linetools 0.3.2 (BSD-3-Clause); limits: mendeleev 1.3.0 (MIT)"
                .into(),
        },
    );
}

#[test]
fn members_beyond_the_known_ones() {
    // From 3p … 8p to 9p … 18p, with the limit of the table.
    let members = alkali("Na", "4", 3);
    let (known, hidden) = members.split_at(6);
    let found = fit(known, Some(limit("Na")), core(22.989_77), 3).expect("a series");
    assert_eq!(found.limit_uncertainty(), None);
    let mut worst = 0.0_f64;
    for member in hidden {
        let energy = found.energy(member.n).expect("a member");
        worst = worst.max((energy - member.energy).abs());
    }
    report(
        "radiation-series-members",
        Row {
            quantity: "9p … 18p of sodium from 3p … 8p, cm⁻¹".into(),
            cases: hidden.len(),
            worst,
            tolerance: 0.15,
            measure: "absolute".into(),
            source: "Morton 2003 by linetools 0.3.2 (BSD-3-Clause)".into(),
        },
    );
}

#[test]
fn an_expansion_is_found_again() {
    let own = Core {
        charge: 2,
        rydberg: RYDBERG.value,
    };
    let (limit, expansion) = (121_267.61, [1.35, 0.06, -0.02]);
    let energy = |n: u32| {
        let t = 1.0 / ((f64::from(n) - expansion[0]) * (f64::from(n) - expansion[0]));
        let effective = f64::from(n) - (expansion[0] + t * (expansion[1] + t * expansion[2]));
        limit - 4.0 * RYDBERG.value / (effective * effective)
    };
    let members: Vec<Member> = (3..10)
        .map(|n| Member {
            n,
            energy: energy(n),
        })
        .collect();
    for given in [None, Some(limit)] {
        let found = fit(&members, given, own, 3).expect("a series");
        assert!((found.limit() - limit).abs() < 1e-6, "{}", found.limit());
        for (one, other) in found.coefficients().iter().zip(expansion) {
            assert!((one - other).abs() < 1e-8, "{one} {other}");
        }
        assert!(found.residuals().iter().all(|miss| miss.abs() < 1e-7));
        assert!((found.energy(40).expect("a member") - energy(40)).abs() < 1e-6);
        let one = defect(members[0], limit, own).expect("below the limit");
        assert!((one.defect - found.defect(3).expect("a member")).abs() < 1e-8);
        assert_eq!(one.effective + one.defect, 3.0);
    }
    // As many unknowns as members: exact, without an uncertainty.
    let exact = fit(&members[..4], None, own, 3).expect("a series");
    assert!((exact.limit() - limit).abs() < 1e-4);
    assert_eq!(exact.limit_uncertainty(), None);
}

#[test]
fn hydrogen_has_no_defect() {
    let mass = light_nucleus(1, 1).expect("a proton");
    let own = core(mass);
    let members: Vec<Member> = (2..8)
        .map(|n| Member {
            n,
            energy: -own.rydberg / f64::from(n * n),
        })
        .collect();
    let found = fit(&members, None, own, 1).expect("a series");
    assert!(found.coefficients()[0].abs() < 1e-10);
    assert!(found.limit().abs() < 1e-6);
}

#[test]
fn impossible_series_are_refused() {
    let own = core(23.0);
    let member = |n, energy| Member { n, energy };
    let good = [member(3, 1e4), member(4, 3e4), member(5, 3.5e4)];
    let code = |members: &[Member], limit, core, count| {
        fit(members, limit, core, count).expect_err("refused").code
    };
    assert_eq!(code(&[], None, own, 1), "series-too-short");
    assert_eq!(code(&good, None, own, 3), "series-too-short");
    assert_eq!(code(&good, None, own, 0), "series-too-short");
    assert_eq!(code(&good, Some(1e5), own, 9), "series-too-short");
    let twice = [member(3, 1.0), member(3, 2.0), member(4, 3.0)];
    assert_eq!(code(&twice, None, own, 1), "series-not-rising");
    let falling = [member(3, 2.0), member(4, 1.0), member(5, 3.0)];
    assert_eq!(code(&falling, None, own, 1), "series-not-rising");
    let broken = [member(3, 2.0), member(4, f64::NAN), member(5, 3.0)];
    assert_eq!(code(&broken, None, own, 1), "series-not-rising");
    assert_eq!(code(&good, Some(2e4), own, 1), "series-limit-below-level");
    assert_eq!(
        code(&good, Some(f64::NAN), own, 1),
        "series-limit-below-level"
    );
    for (charge, rydberg) in [(0, 1e5), (1, 0.0), (1, f64::NAN), (500, 1e5)] {
        let core = Core { charge, rydberg };
        assert_eq!(code(&good, None, core, 1), "series-core-out-of-range");
    }
    // Whatever the members, an answer is finite or a fault.
    for energies in [[0.0, 1e-9, 2e-9], [0.0, 1e5, 1e9], [-1e9, 0.0, 1e-3]] {
        let members: Vec<Member> = (1..).zip(energies).map(|(n, e)| member(n, e)).collect();
        for count in 1..=2 {
            if let Ok(found) = fit(&members, None, own, count) {
                assert!(found.limit().is_finite());
                assert!(found.energy(20).is_none_or(f64::is_finite));
            }
        }
    }
}

#[test]
fn rydberg_constants_of_known_nuclei() {
    // R_H = 109677.5834 cm⁻¹, R_He = 109722.2741 (from memory, handbooks).
    let [hydrogen, helium] =
        [(1, 1), (2, 4)].map(|(z, a)| rydberg(light_nucleus(z, a)).expect("a nucleus"));
    assert!((hydrogen - 109_677.583_4).abs() < 2e-4, "{hydrogen}");
    assert!((helium - 109_722.274_1).abs() < 5e-3, "{helium}");
    assert_eq!(rydberg(None), Ok(RYDBERG.value));
    assert!(rydberg(Some(-1.0)).is_err());
    // The atom of ¹H has 1.007 825 032 u (from memory, atomic mass evaluations).
    let proton = light_nucleus(1, 1).expect("a proton");
    assert!(relative_error(nuclear_mass(1.007_825_032, 1), proton) < 1e-7);
    assert_eq!(light_nucleus(3, 7), None);
}
