//! The answer on splitting as a user gets it: energies of all states through the sheet.
//!
//! Vectors: `zeeman_checks.json` and `hyperfine_checks.json`, made by separate programs (own computation, no
//! outside data). Caesium's interval is the definition of the second (SI Brochure, 9th edition, 2019).

use rungline_tests::sheets::{self, doubled, number, rows};
use rungline_tests::{Row, relative_error, report, vector_json};
use serde_json::{Value, json};

/// MHz in one cm⁻¹, exact by the definition of the metre.
const MHZ: f64 = 29_979.245_8;
/// μ_B/hc in cm⁻¹ per tesla, CODATA 2022.
const MU_B: f64 = 0.466_864_477_19;

fn answer(sheet: &Value) -> Value {
    sheets::answer(sheet, "splitting")
}

/// (2M, E) by M, then E.
fn sorted(mut states: Vec<(i64, f64)>) -> Vec<(i64, f64)> {
    states.sort_by(|a, b| a.0.cmp(&b.0).then(a.1.total_cmp(&b.1)));
    states
}

fn own(answer: &Value, unit: f64) -> Vec<(i64, f64)> {
    let states = rows(answer, "states").iter();
    sorted(
        states
            .map(|s| (doubled(&s["M"]), number(s, "energy") * unit))
            .collect(),
    )
}

/// The worst deviation beside the largest energy, 2M being equal.
fn compare(found: &[(i64, f64)], expected: &[(i64, f64)], what: &str) -> f64 {
    assert_eq!(found.len(), expected.len(), "{what}");
    let scale = expected.iter().fold(0.0_f64, |most, e| most.max(e.1.abs()));
    let mut worst = 0.0_f64;
    for (one, other) in found.iter().zip(expected) {
        assert_eq!(one.0, other.0, "{what}");
        worst = worst.max((one.1 - other.1).abs() / scale.max(1e-300));
    }
    worst
}

#[test]
fn whole_configurations_in_a_field() {
    let orbital = |label: &str| match label {
        "s" => "2s",
        "t" => "3s",
        "p" => "2p",
        "q" => "3p",
        "d" => "3d",
        other => panic!("{other}"),
    };
    let vectors = vector_json("zeeman_checks.json");
    let cases = vectors["cases"].as_array().unwrap();
    let states = |case: &Value| -> Vec<(i64, f64)> {
        let all = case["states"].as_array().unwrap().iter();
        sorted(
            all.map(|s| (s["twoM"].as_i64().unwrap(), number(s, "E")))
                .collect(),
        )
    };
    let (mut worst, mut count) = (0.0_f64, 0);
    for case in cases {
        let shells = case["shells"].as_array().unwrap();
        let configuration: Vec<String> = shells
            .iter()
            .map(|s| format!("{}{}", orbital(s[0].as_str().unwrap()), s[2]))
            .collect();
        let configuration = configuration.join(" ");
        let mut given = serde_json::Map::new();
        for (name, value) in case["params"].as_object().unwrap() {
            let (letters, shells) = name.trim_end_matches(')').split_once('(').unwrap();
            let shells: Vec<&str> = shells.split(',').map(orbital).collect();
            given.insert(
                format!("{letters}({})", shells.join(",")),
                json!(format!("{value} cm-1")),
            );
        }
        // The reference has F⁰ = 0, the sheet counts from the average: its value of the same case.
        let zero = cases
            .iter()
            .find(|other| other["name"] == case["name"] && other["B_T"] == json!(0.0))
            .unwrap();
        let zero = states(zero);
        let mean = zero.iter().map(|s| s.1).sum::<f64>() / zero.len() as f64;
        given.insert(format!("E({configuration})"), json!(format!("{mean} cm-1")));
        let found = answer(&json!({
            "rungline": 1, "species": "*", "configurations": [configuration],
            "structure": {"energies": "given", "given": given},
            "field": {"flux_density": format!("{} T", case["B_T"])},
        }));
        let what = format!("{} {}", case["name"], case["B_T"]);
        worst = worst.max(compare(&own(&found, 1.0), &states(case), &what));
        count += zero.len();
    }
    report(
        "sheet-splitting-field",
        Row {
            quantity: "states in a field, through the sheet".into(),
            cases: count,
            worst,
            tolerance: 1e-9,
            measure: "relative".into(),
            source: "separate program, determinants, zeeman_checks.json".into(),
        },
    );
}

#[test]
fn a_level_alone_with_its_nucleus() {
    let vectors = vector_json("hyperfine_checks.json");
    let half = |value: f64| format!("{}/2", 2.0 * value);
    let (mut worst, mut count) = (0.0_f64, 0);
    for case in vectors["cases"].as_array().unwrap() {
        let level = json!({
            "J": half(number(case, "J")), "I": half(number(case, "I")),
            "g": case["gJ"].to_string(), "g_I": case["gI"].to_string(),
            "A": format!("{} MHz", case["A_MHz"]), "B": format!("{} MHz", case["B_MHz"]),
        });
        for field in case["field"].as_array().unwrap() {
            let found = answer(&json!({
                "rungline": 1, "level": level,
                "field": {"flux_density": format!("{} T", field["B_T"])},
            }));
            let expected = field["states"].as_array().unwrap().iter();
            let expected = sorted(
                expected
                    .map(|s| (s["twoMF"].as_i64().unwrap(), number(s, "E")))
                    .collect(),
            );
            let what = format!("{} {}", case["name"], field["B_T"]);
            worst = worst.max(compare(&own(&found, MHZ), &expected, &what));
            count += expected.len();
        }
        // Without any field the same as at zero, each F with all its M.
        let found = answer(&json!({"rungline": 1, "level": level}));
        assert_eq!(found["field"], Value::Null);
        for zero in case["zero_field"].as_array().unwrap() {
            let of_f = |s: &&Value| doubled(&s["F"]) == zero["twoF"].as_i64().unwrap();
            let of_f: Vec<&Value> = rows(&found, "states").iter().filter(of_f).collect();
            assert_eq!(of_f.len() as i64, zero["twoF"].as_i64().unwrap() + 1);
            for state in of_f {
                let error = (number(state, "energy") * MHZ - number(zero, "E_MHz")).abs();
                worst = worst.max(error / number(zero, "E_MHz").abs());
            }
        }
    }
    report(
        "sheet-splitting-alone",
        Row {
            quantity: "a level alone with its nucleus, through the sheet".into(),
            cases: count,
            worst,
            tolerance: 1e-9,
            measure: "relative".into(),
            source: "separate program, hyperfine_checks.json".into(),
        },
    );
}

/// Breit & Rabi, Phys. Rev. 38, 2082 (1931): E = −ΔE/2(2I+1) − g_I μ_N B M ± (ΔE/2) √(1 + 4Mx/(2I+1) + x²), x = (g_J μ_B + g_I μ_N)B/ΔE.
#[test]
fn caesium_from_its_sheet() {
    let sheet = |tesla: f64| {
        json!({
            "rungline": 1, "species": "133Cs", "configurations": ["6s"],
            "nucleus": {"spin": "7/2", "magnetic_dipole": {"6s 2S1/2": "2298.1579425 MHz"}},
            "field": {"flux_density": format!("{tesla} T")}
        })
    };
    let zero = answer(&sheet(0.0));
    let of = |f: &str| {
        let states = rows(&zero, "states").iter();
        let found = states.clone().find(|s| s["F"] == f && s["M"] == "0");
        number(found.unwrap(), "shift") * MHZ * 1e6
    };
    let interval = of("4") - of("3");
    assert!((interval - 9_192_631_770.0).abs() < 0.5, "{interval}");
    assert_eq!(zero["nucleus"]["isotope"], "133Cs");
    let g_i = number(&zero["nucleus"], "g_I");
    let mu_n = 7.622_593_218_8 / MHZ;
    for tesla in [0.001, 0.01, 0.3, 5.0] {
        let found = answer(&sheet(tesla));
        let level: Vec<f64> = rows(&found, "states")
            .iter()
            .map(|s| number(s, "energy") - number(s, "shift"))
            .collect();
        let g = 2.002_319_304_36;
        let apart = 9_192.631_77 / MHZ;
        let x = (g * MU_B + g_i * mu_n) * tesla / apart;
        for (state, own) in rows(&found, "states").iter().zip(level) {
            assert!(
                own.abs() < 1e-9,
                "one level of one configuration is its average"
            );
            let m = doubled(&state["M"]) as f64 / 2.0;
            let inside = (1.0 + 4.0 * m * x / 8.0 + x * x).max(0.0);
            // The state of the largest |M| of F = 4 is one of a pair of which the other is not there.
            let root = if m == -4.0 { 1.0 - x } else { inside.sqrt() };
            let sign = if state["F"] == "4" { 1.0 } else { -1.0 };
            let expected = -apart / 16.0 - g_i * mu_n * tesla * m + sign * apart / 2.0 * root;
            assert!(
                relative_error(number(state, "shift"), expected) < 1e-9,
                "{tesla} {state}"
            );
        }
    }
}

/// A one-electron atom in closed form: the whole n = 2 shell, and its lines to 1s.
#[test]
fn hydrogen_splits_in_closed_form() {
    let found = answer(&json!({
        "rungline": 1, "species": "H I", "configurations": ["1s", "2p"],
        "line": {"upper": "2p 2P", "lower": "1s"}, "field": {"flux_density": "1 T"}
    }));
    let components = rows(&found, "components");
    assert_eq!(components.len(), 10);
    let total: f64 = components.iter().map(|c| number(c, "strength")).sum();
    assert!((total - 1.0).abs() < 1e-12);
    for polarisation in ["pi", "sigma+", "sigma-"] {
        let all = components
            .iter()
            .filter(|c| c["polarisation"] == polarisation);
        let sum: f64 = all.map(|c| number(c, "strength")).sum();
        assert!((sum - 1.0 / 3.0).abs() < 1e-9, "{polarisation}: {sum}");
    }
    let shell = answer(
        &json!({"rungline": 1, "species": "H I", "configurations": ["n=2"], "field": {"flux_density": "1 T"}}),
    );
    assert_eq!(rows(&shell, "states").len(), 8);
}
