//! Levels of single configurations against sums over Slater determinants.
//!
//! Vectors: `slater_condon_checks.json`, made by a separate brute-force program in a basis of
//! determinants (own computation, no outside data, free to use).

use rungline_core::structure::{Basis, Hamiltonian, Integral, Levels, Parameter};
use rungline_tests::{Row, report, vector_json};
use serde_json::Value;

const SOURCE: &str = "separate program, determinants of spin-orbitals, slater_condon_checks.json";

/// The value of a parameter by its name in either order of the labels; zero when it is not listed.
fn value(parameter: &Parameter, labels: &[String], given: &Value) -> f64 {
    let label = |place: usize| labels[place].as_str();
    let names = match parameter.integral {
        Integral::Direct { k, a, b } => vec![
            format!("F{k}({},{})", label(a), label(b)),
            format!("F{k}({},{})", label(b), label(a)),
        ],
        Integral::Exchange { k, a, b } => vec![
            format!("G{k}({},{})", label(a), label(b)),
            format!("G{k}({},{})", label(b), label(a)),
        ],
        Integral::SpinOrbit { a } => vec![format!("zeta({})", label(a))],
        _ => Vec::new(),
    };
    let found = names.iter().find_map(|name| given.get(name)?.as_f64());
    found.unwrap_or(0.0)
}

#[test]
fn all_levels_and_g_of_the_reference_cases() {
    let vectors = vector_json("slater_condon_checks.json");
    let cases = vectors["cases"].as_array().expect("cases");
    let (mut levels_seen, mut worst, mut worst_g, mut g_seen) = (0, 0.0_f64, 0.0_f64, 0);
    for case in cases {
        let shells = case["shells"].as_array().expect("shells");
        let labels: Vec<String> = shells
            .iter()
            .map(|shell| shell["label"].as_str().expect("a label").to_owned())
            .collect();
        let number = |shell: &Value, key: &str| shell[key].as_u64().expect("a number");
        let subshells: Vec<u8> = shells.iter().map(|s| number(s, "l") as u8).collect();
        let occupations: Vec<u32> = shells.iter().map(|s| number(s, "occ") as u32).collect();
        let basis = Basis::new(&subshells, &[occupations]).expect("a basis");
        let hamiltonian = Hamiltonian::new(basis).expect("coefficients");
        let average = case["average_energy_with_F0_zero"].as_f64().expect("E_av");
        for (key, with_zeta) in [("levels", true), ("levels_without_spin_orbit", false)] {
            let values = hamiltonian.values(|parameter| match parameter.integral {
                Integral::SpinOrbit { .. } if !with_zeta => 0.0,
                Integral::Average => average,
                _ => value(parameter, &labels, &case["params"]),
            });
            let found = Levels::solve(&hamiltonian, &values).expect("levels");
            let expected = case[key].as_array().expect("levels");
            assert_eq!(found.levels.len(), expected.len(), "{}", case["name"]);
            let scale = expected.iter().fold(0.0_f64, |most, level| {
                most.max(level["E"].as_f64().expect("E").abs())
            });
            // Levels of equal energy may stand in either order: sorted by J, then energy.
            for two_j in hamiltonian.basis().two_js() {
                let ours = found.levels.iter().filter(|level| level.two_j == two_j);
                let theirs = expected
                    .iter()
                    .filter(|level| level["twoJ"].as_i64() == Some(i64::from(two_j)));
                let pairs: Vec<_> = ours.zip(theirs).collect();
                for (ours, theirs) in pairs {
                    let energy = theirs["E"].as_f64().expect("E");
                    worst = worst.max((ours.energy - energy).abs() / scale);
                    levels_seen += 1;
                    if let Some(g) = theirs.get("g").and_then(Value::as_f64) {
                        let own = found.g(hamiltonian.basis(), ours, 2.0).expect("g");
                        worst_g = worst_g.max((own - g).abs());
                        g_seen += 1;
                    }
                }
            }
        }
    }
    assert_eq!(cases.len(), 14);
    assert!(g_seen > 150, "{g_seen}");
    report(
        "structure-energies",
        Row {
            quantity: "energies of 14 configurations, with and without ζ".to_owned(),
            cases: levels_seen,
            worst,
            tolerance: 1e-12,
            measure: "relative to the largest".to_owned(),
            source: SOURCE.to_owned(),
        },
    );
    report(
        "structure-g",
        Row {
            quantity: "g_J in intermediate coupling, g_s = 2".to_owned(),
            cases: g_seen,
            worst: worst_g,
            tolerance: 1e-9,
            measure: "absolute".to_owned(),
            source: SOURCE.to_owned(),
        },
    );
}
