//! Levels with a nucleus, with and without a field: reference cases and published splittings.
//!
//! Vectors: `hyperfine_checks.json`, made by a separate program (own computation, no outside data, free to
//! use; its A, B and g_J are round inputs).

use rungline_core::splitting::in_field::{MHZ_PER_WAVENUMBER, Manifold, Nucleus, Split, casimir};
use rungline_tests::{Row, report, vector_json};

const SOURCE: &str = "separate program, hyperfine_checks.json";

/// A level alone with its nucleus, A and B in MHz.
fn alone(two_j: i32, g_j: f64, two_i: i32, g_i: f64, (a, b): (f64, f64)) -> Split {
    let manifold = Manifold::alone(two_j, 0.0, g_j).expect("a level");
    let nucleus = Nucleus {
        two_i,
        g_i,
        magnetic_dipole: vec![a / MHZ_PER_WAVENUMBER],
        electric_quadrupole: vec![b / MHZ_PER_WAVENUMBER],
    };
    Split::new(&manifold, Some(&nucleus)).expect("a split")
}

#[test]
fn energies_of_the_reference_cases() {
    let vectors = vector_json("hyperfine_checks.json");
    let cases = vectors["cases"].as_array().expect("cases");
    let (mut worst, mut seen) = (0.0_f64, 0);
    for case in cases {
        let number = |key: &str| case[key].as_f64().expect("a number");
        let doubled = |key: &str| (2.0 * number(key)).round() as i32;
        let (two_j, two_i) = (doubled("J"), doubled("I"));
        let (a, b) = (number("A_MHz"), number("B_MHz"));
        let split = alone(two_j, number("gJ"), two_i, number("gI"), (a, b));
        let zero = case["zero_field"].as_array().expect("levels");
        let energies: Vec<f64> = zero
            .iter()
            .map(|f| f["E_MHz"].as_f64().expect("E"))
            .collect();
        let spread = |all: &[f64]| {
            let high = all.iter().copied().fold(f64::NEG_INFINITY, f64::max);
            high - all.iter().copied().fold(f64::INFINITY, f64::min)
        };
        for (f, theirs) in zero.iter().zip(&energies) {
            let two_f = f["twoF"].as_i64().expect("2F") as i32;
            let ours = casimir(two_i, two_j, two_f, a, b);
            worst = worst.max((ours - theirs).abs() / spread(&energies));
            seen += 1;
        }
        for field in case["field"].as_array().expect("fields") {
            let at = split
                .at(field["B_T"].as_f64().expect("B"))
                .expect("energies");
            let states = field["states"].as_array().expect("states");
            assert_eq!(states.len(), split.states().len());
            let all: Vec<f64> = states.iter().map(|s| s["E"].as_f64().expect("E")).collect();
            let highest = two_i + two_j;
            for two_m in (-highest..=highest).step_by(2) {
                let own = split.states().iter().zip(&at.shifts);
                let mut ours: Vec<f64> = own
                    .filter(|(state, _)| state.two_m == two_m)
                    .map(|(_, shift)| shift * MHZ_PER_WAVENUMBER)
                    .collect();
                ours.sort_by(f64::total_cmp);
                let theirs = states.iter().zip(&all).filter(|(s, _)| s["twoMF"] == two_m);
                let theirs: Vec<f64> = theirs.map(|(_, &energy)| energy).collect();
                assert_eq!(ours.len(), theirs.len());
                for (ours, theirs) in ours.iter().zip(&theirs) {
                    worst = worst.max((ours - theirs).abs() / spread(&all));
                    seen += 1;
                }
            }
        }
    }
    assert_eq!(cases.len(), 6);
    report(
        "splitting-hyperfine",
        Row {
            quantity: "hyperfine energies without a field and in 0.001 to 2 T".to_owned(),
            cases: seen,
            worst,
            tolerance: 1e-9,
            measure: "relative to the spread".to_owned(),
            source: SOURCE.to_owned(),
        },
    );
}
