//! States in a magnetic field: reference cases, limits, sums.
//!
//! Vectors: `zeeman_checks.json`, made by a separate brute-force program in a basis of determinants (own
//! computation, no outside data, free to use).

use rungline_core::splitting::in_field::{AtField, Manifold, Split};
use rungline_core::structure::{Basis, Hamiltonian, Integral, Levels, Parameter};
use rungline_tests::{Row, report, vector_json};
use serde_json::Value;

const SOURCE: &str = "separate program, determinants of spin-orbitals, zeeman_checks.json";

fn value(parameter: &Parameter, labels: &[String], given: &Value) -> f64 {
    let label = |place: usize| labels[place].as_str();
    let either = |name: &str, a: usize, b: usize| {
        [
            format!("{name}({},{})", label(a), label(b)),
            format!("{name}({},{})", label(b), label(a)),
        ]
    };
    let names = match parameter.integral {
        Integral::Direct { k, a, b } => either(&format!("F{k}"), a, b).to_vec(),
        Integral::Exchange { k, a, b } => either(&format!("G{k}"), a, b).to_vec(),
        Integral::SpinOrbit { a } => vec![format!("zeta({})", label(a))],
        _ => Vec::new(),
    };
    let found = names.iter().find_map(|name| given.get(name)?.as_f64());
    found.unwrap_or(0.0)
}

fn solve(case: &Value) -> (Hamiltonian, Levels) {
    let shells = case["shells"].as_array().expect("shells");
    let labels: Vec<String> = shells
        .iter()
        .map(|shell| shell[0].as_str().expect("a label").to_owned())
        .collect();
    let number = |value: &Value| value.as_u64().expect("a number");
    let subshells: Vec<u8> = shells.iter().map(|s| number(&s[1]) as u8).collect();
    let occupations: Vec<u32> = shells.iter().map(|s| number(&s[2]) as u32).collect();
    let basis = Basis::new(&subshells, &[occupations]).expect("a basis");
    let own = Hamiltonian::new(basis).expect("coefficients");
    let values = own.values(|parameter| value(parameter, &labels, &case["params"]));
    let levels = Levels::solve(&own, &values).expect("levels");
    (own, levels)
}

fn manifold(own: &Hamiltonian, levels: &Levels) -> Manifold {
    let energies: Vec<f64> = levels.levels.iter().map(|level| level.energy).collect();
    Manifold::of_levels(own.basis(), levels, &energies).expect("a manifold")
}

/// Energies of one M, rising.
fn of_m(split: &Split, at: &AtField, two_m: i64) -> Vec<f64> {
    let states = split.states().iter().zip(&at.energies);
    let mut found: Vec<f64> = states
        .filter(|(state, _)| i64::from(state.two_m) == two_m)
        .map(|(_, &energy)| energy)
        .collect();
    found.sort_by(f64::total_cmp);
    found
}

#[test]
fn energies_of_the_reference_cases() {
    let vectors = vector_json("zeeman_checks.json");
    let cases = vectors["cases"].as_array().expect("cases");
    let (mut worst, mut seen) = (0.0_f64, 0);
    let mut offset: Option<(String, f64)> = None;
    for case in cases {
        let (own, levels) = solve(case);
        let split = Split::new(&manifold(&own, &levels), None).expect("a split");
        let at = split
            .at(case["B_T"].as_f64().expect("B"))
            .expect("energies");
        let expected = case["states"].as_array().expect("states");
        assert_eq!(expected.len(), split.states().len());
        let number = |state: &Value| state["E"].as_f64().expect("E");
        let all: Vec<f64> = expected.iter().map(number).collect();
        let mean = |list: &[f64]| list.iter().sum::<f64>() / list.len() as f64;
        // The reference has F⁰ = 0, ours E_av = 0; found once without field, the same in every field.
        let name = case["name"].as_str().expect("a name").to_owned();
        if offset.as_ref().is_none_or(|(known, _)| *known != name) {
            assert_eq!(at.tesla, 0.0);
            offset = Some((name, mean(&all) - mean(&at.energies)));
        }
        let shift = offset.as_ref().expect("known").1;
        let high = all.iter().copied().fold(f64::NEG_INFINITY, f64::max);
        let low = all.iter().copied().fold(f64::INFINITY, f64::min);
        let scale = (high - low).max(1e-3);
        let mut two_ms: Vec<i64> = expected
            .iter()
            .map(|s| s["twoM"].as_i64().expect("2M"))
            .collect();
        two_ms.dedup();
        for two_m in two_ms {
            let theirs = expected.iter().filter(|s| s["twoM"] == two_m).map(number);
            for (ours, theirs) in of_m(&split, &at, two_m).into_iter().zip(theirs) {
                worst = worst.max((ours + shift - theirs).abs() / scale);
                seen += 1;
            }
        }
    }
    assert_eq!(cases.len(), 28);
    report(
        "splitting-zeeman",
        Row {
            quantity: "energies in 0 to 300 T: s, p, p², d² …".to_owned(),
            cases: seen,
            worst,
            tolerance: 1e-9,
            measure: "relative to the spread".to_owned(),
            source: SOURCE.to_owned(),
        },
    );
}
