//! Every isotope that is compiled in against the tables it was made from, and what is left out.
//!
//! Source: mendeleev 1.3.0 (MIT), second table pyscf 2.14.0 (Apache-2.0; IAEA INDC(NDS)-0658), third
//! periodictable 2.1.0 (public domain), side by side in `tests/vectors/isotopes.csv`.

use std::collections::BTreeMap;

use rungline_core::elements::{HEAVIEST, isotope, isotopes, most_abundant};
use rungline_tests::{Row, relative_error, report, vector_rows};

fn value(row: &BTreeMap<String, String>, column: &str) -> Option<f64> {
    row[column].parse().ok().filter(|v: &f64| v.is_finite())
}

#[test]
fn all_values_are_those_of_the_tables() {
    // By symbol and mass number: which value is that of the second table (True), or left out.
    let second_q = ["S33", "Cl36", "K39", "K40", "K41"];
    let left_out_g = ["Ba133", "Sm151", "Ta180"];
    let (mut count, mut worst) = (0, 0.0_f64);
    for row in vector_rows("isotopes.csv") {
        let (z, a) = (row["Z"].parse().unwrap(), row["A"].parse().unwrap());
        let name = format!("{}{a}", row["symbol"]);
        let found = isotope(z, a);
        if row["abundance_pct"].is_empty() && row["pyscf_spin"].is_empty() {
            assert_eq!(
                found, None,
                "{name} is neither found nor in the second table"
            );
            continue;
        }
        let found = found.unwrap_or_else(|| panic!("{name} is missing"));
        count += 1;
        assert!(
            (found.mass - value(&row, "mass_u").unwrap()).abs() <= 0.51e-6,
            "{name}"
        );
        if name == "Ta180" {
            // The table's spin is that of a state that does not occur in nature.
            assert_eq!((found.spin, found.g, found.quadrupole), (None, None, None));
            continue;
        }
        let mut same = |found: Option<f64>, expected: Option<f64>, what: &str| {
            assert_eq!(found.is_some(), expected.is_some(), "{name} {what}");
            if let (Some(found), Some(expected)) = (found, expected) {
                let error = relative_error(found, expected);
                worst = worst.max(error);
                assert!(error <= 6e-7, "{name} {what}: {found}, {expected}");
            }
        };
        same(found.abundance, value(&row, "abundance_pct"), "abundance");
        let spin = found.spin.map(|spin| spin.to_string()).unwrap_or_default();
        assert_eq!(spin, row["spin"], "{name}");
        let has_g = spin != "0" && !left_out_g.contains(&name.as_str());
        let g = if name == "Ag109" {
            "pyscf_g"
        } else {
            "g_factor"
        };
        same(found.g, value(&row, g).filter(|_| has_g), "g");
        let has_q = spin != "0" && spin != "1/2";
        let q = if second_q.contains(&name.as_str()) {
            "pyscf_Q_barn"
        } else {
            "Q_barn"
        };
        same(found.quadrupole, value(&row, q).filter(|_| has_q), "Q");
        assert_eq!(
            found.second_table,
            second_q.contains(&name.as_str()) || name == "Ag109",
            "{name}"
        );
    }
    assert_eq!(count, 325);
    report(
        "elements_isotopes",
        Row {
            quantity: "isotopes: abundance, spin, g, Q".into(),
            cases: count,
            worst,
            tolerance: 6e-7,
            measure: "relative".into(),
            source: "mendeleev 1.3.0 (MIT), pyscf 2.14.0 (Apache-2.0)".into(),
        },
    );
}

#[test]
fn abundances_add_up_and_name_the_usual_isotope() {
    for z in 1..=HEAVIEST {
        let all = isotopes(z);
        let shares: Vec<f64> = all.iter().filter_map(|i| i.abundance).collect();
        assert!(
            all.windows(2)
                .all(|pair| pair[0].mass_number < pair[1].mass_number)
        );
        if shares.is_empty() {
            assert_eq!(most_abundant(z), None, "{z}");
            continue;
        }
        let sum: f64 = shares.iter().sum();
        assert!((sum - 100.0).abs() < 0.11, "{z}: {sum}");
    }
    // Kondev et al., NUBASE2020 (from memory): the commonest isotopes of some elements.
    for (z, a) in [
        (1, 1),
        (2, 4),
        (3, 7),
        (17, 35),
        (18, 40),
        (19, 39),
        (26, 56),
        (28, 58),
        (37, 85),
        (48, 114),
        (54, 132),
        (80, 202),
        (82, 208),
        (92, 238),
    ] {
        assert_eq!(most_abundant(z), Some(a), "{z}");
    }
    // Technetium, promethium and what follows bismuth but for thorium, protactinium and uranium.
    for z in [43, 61, 84, 89, 94, 118, 0, 200] {
        assert_eq!(most_abundant(z), None, "{z}");
    }
}

/// Values of another table that everybody knows (Stone, INDC(NDS)-0658, 2014; from memory).
#[test]
fn moments_of_usual_nuclei() {
    for (z, a, spin, moment, quadrupole) in [
        (1, 1, 0.5, 2.792_847, None),
        (3, 7, 1.5, 3.256_427, Some(-0.040)),
        (11, 23, 1.5, 2.217_522, Some(0.104)),
        (19, 39, 1.5, 0.391_47, Some(0.0585)),
        (37, 85, 2.5, 1.352_98, Some(0.277)),
        (37, 87, 1.5, 2.751_31, Some(0.1335)),
        (47, 109, 0.5, -0.130_69, None),
        (55, 133, 3.5, 2.582_025, Some(-0.00343)),
        (80, 199, 0.5, 0.505_885, None),
    ] {
        let isotope = isotope(z, a).unwrap();
        let i = isotope.spin.unwrap().value();
        assert_eq!(i, spin, "{z} {a}");
        // Tables differ by the shielding of the electrons that they correct for.
        assert!(
            relative_error(isotope.g.unwrap() * i, moment) < 5e-3,
            "{z} {a}"
        );
        match (isotope.quadrupole, quadrupole) {
            (Some(found), Some(expected)) => {
                assert!(relative_error(found, expected) < 0.05, "{z} {a}")
            }
            (found, expected) => assert_eq!(found, expected, "{z} {a}"),
        }
    }
}
