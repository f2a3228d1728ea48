//! The answer on splitting as a user gets it: energies of all states through the sheet.
//!
//! Vectors: `zeeman_checks.json` and `hyperfine_checks.json`, made by separate programs (own computation, no
//! outside data). Caesium's interval is the definition of the second (SI Brochure, 9th edition, 2019).

use rungline_core::sheet::{self, Json};
use rungline_tests::{Row, relative_error, report, vector_json};
use serde_json::{Value, json};

const MHZ: f64 = 29_979.245_8;
const MU_B: f64 = 0.466_864_477_19;

fn answer(sheet: &Value) -> Value {
    let sheet: Json = serde_json::from_value(sheet.clone()).unwrap();
    let text = sheet::answer_message(&sheet, "splitting");
    let answer: Value = serde_json::from_str(&text).unwrap();
    assert!(answer["answer"].is_object(), "{text}");
    answer["answer"].clone()
}

fn rows<'a>(answer: &'a Value, key: &str) -> &'a Vec<Value> {
    answer[key].as_array().unwrap()
}

fn number(row: &Value, key: &str) -> f64 {
    row[key].as_f64().unwrap_or_else(|| panic!("{key}: {row}"))
}

fn doubled(text: &Value) -> i64 {
    let text = text.as_str().expect("M is text");
    match text.strip_suffix("/2") {
        Some(number) => number.parse().unwrap(),
        None => 2 * text.parse::<i64>().unwrap(),
    }
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

#[test]
fn the_sodium_doublet_from_weak_to_strong() {
    let lines = |tesla: f64| {
        answer(&json!({
            "rungline": 1, "species": "Na I", "configurations": ["3s", "3p"],
            "measured": {"3s 2S1/2": "0 cm-1", "3p 2P1/2": "16956.17 cm-1", "3p 2P3/2": "16973.37 cm-1"},
            "line": {"upper": "3p 2P", "lower": "3s 2S"}, "field": {"flux_density": format!("{tesla} T")}
        }))
    };
    for tesla in [0.0, 0.1, 1.0, 10.0, 50.0, 1000.0] {
        let found = lines(tesla);
        let components = rows(&found, "components");
        assert_eq!(components.len(), 10, "{tesla}");
        let of = |wanted: &str, key: &str| -> f64 {
            let all = components.iter().filter(|c| c["polarisation"] == wanted);
            all.map(|c| number(c, key)).sum()
        };
        for polarisation in ["pi", "sigma+", "sigma-"] {
            assert!((of(polarisation, "strength") - 1.0 / 3.0).abs() < 1e-12);
        }
        // The mean of the whole pattern does not move in proportion to the field.
        let mean: f64 = components
            .iter()
            .map(|c| number(c, "strength") * number(c, "offset"))
            .sum();
        assert!(mean.abs() < 1e-6 * (1.0 + tesla), "{tesla}: {mean}");
        // Seen across, all three; the sum over polarisations of what is seen is 1 at any angle for equal thirds.
        let seen: f64 = components.iter().map(|c| number(c, "seen")).sum();
        assert!((seen - 1.0).abs() < 1e-12);
    }
    // The Paschen–Back limit: three groups at 0 and ±μ_B B.
    let strong = lines(1000.0);
    for component in rows(&strong, "components") {
        let step = match component["polarisation"].as_str().unwrap() {
            "pi" => 0.0,
            "sigma+" => 1.0,
            _ => -1.0,
        };
        // What is strong lies within the fine structure of its group.
        if number(component, "strength") > 0.01 {
            let away = number(component, "offset") - step * MU_B * 1000.0;
            assert!(away.abs() < 17.2, "{component}");
        }
    }
    // Where the linear pattern ends it is said by how much.
    let ten = lines(10.0);
    assert!(number(&ten["linear"], "largest_difference") > 0.1);
    assert_eq!(ten["method"], "full");
    assert_eq!(ten["line"]["of"], "term");
}

#[test]
fn a_pattern_through_polarisers() {
    let seen = |view: &str, polariser: &str| {
        let found = answer(&json!({
            "rungline": 1, "species": "Na I", "configurations": ["3s", "3p"],
            "line": {"upper": "3p 2P1/2", "lower": "3s 2S1/2"},
            "field": {"flux_density": "1e-3 T", "view": view, "polariser": polariser}
        }));
        let of = |wanted: &str| -> f64 {
            let all = rows(&found, "components")
                .iter()
                .filter(|c| c["polarisation"] == wanted);
            all.map(|c| number(c, "seen")).sum()
        };
        let keeps = found["field"]["keeps"]
            .as_str()
            .unwrap_or_default()
            .to_owned();
        ([of("sigma-"), of("pi"), of("sigma+")], keeps)
    };
    let near = |found: [f64; 3], expected: [f64; 3]| {
        for (one, other) in found.iter().zip(expected) {
            assert!((one - other).abs() < 1e-4, "{found:?}");
        }
    };
    near(seen("along", "none").0, [0.5, 0.0, 0.5]);
    let (left, keeps) = seen("along", "left circular");
    near(left, [0.0, 0.0, 0.5]);
    assert_eq!(keeps, "σ+ (100 % on the side of higher energy)");
    near(seen("along", "right circular").0, [0.5, 0.0, 0.0]);
    near(seen("180 deg", "right circular").0, [0.0, 0.0, 0.5]);
    near(seen("across", "0 deg").0, [0.0, 0.5, 0.0]);
    near(seen("across", "90 deg").0, [0.25, 0.0, 0.25]);
    assert_eq!(seen("along", "none").1, "");
}

/// g_eff of the D lines in LS coupling with g_s: (Shenstone & Blair 1929), and the mean of the σ⁺ components of a
/// field that is weak.
#[test]
fn the_centre_of_gravity_of_a_line() {
    for (upper, lower) in [("3p 2P1/2", "3s 2S1/2"), ("3p 2P3/2", "3s 2S1/2")] {
        let found = answer(&json!({
            "rungline": 1, "species": "Na I", "configurations": ["3s", "3p"],
            "line": {"upper": upper, "lower": lower}, "field": {"flux_density": "1e-6 T"}
        }));
        let line = &found["line"];
        let j = if upper.ends_with("1/2") { 0.75 } else { 3.75 };
        let (g, h) = (number(line, "g_upper"), number(line, "g_lower"));
        let expected = 0.5 * (g + h) + 0.25 * (g - h) * (j - 0.75);
        assert!(relative_error(number(line, "g_effective"), expected) < 1e-14);
        let sigma = || {
            rows(&found, "components")
                .iter()
                .filter(|c| c["polarisation"] == "sigma+")
        };
        let sum: f64 = sigma()
            .map(|c| number(c, "strength") * number(c, "lorentz"))
            .sum();
        let whole: f64 = sigma().map(|c| number(c, "strength")).sum();
        assert!(relative_error(sum / whole, expected) < 1e-6, "{upper}");
    }
}

#[test]
fn isotopes_side_by_side() {
    let found = answer(&json!({
        "rungline": 1, "species": "Rb I", "configurations": ["5s", "5p"],
        "line": {"upper": "5p 2P1/2", "lower": "5s 2S1/2"},
        "isotopes": [
            {"isotope": "85Rb", "magnetic_dipole": {"5s 2S1/2": "1011.910813 MHz", "5p 2P1/2": "120.527 MHz"}},
            {"isotope": "87Rb", "shift": "77.6 MHz"}
        ]
    }));
    let of = |isotope: &str| -> f64 {
        let all = rows(&found, "components")
            .iter()
            .filter(|c| c["isotope"] == isotope);
        all.map(|c| number(c, "strength")).sum()
    };
    assert!((of("85Rb") - 0.7217).abs() < 1e-12 && (of("87Rb") - 0.2783).abs() < 1e-12);
    // A of the other isotope in the ratio of g_I: 3417.3413 MHz is published (Steck, *Rubidium 87 D Line Data*,
    // from memory), and the anomaly is 0.35 %.
    let interval = |isotope: &str, f: &str, g: &str| {
        let at = |f: &str| {
            let states = rows(&found, "states").iter();
            let found = states
                .clone()
                .find(|s| s["isotope"] == isotope && s["F"] == f && s["side"] == "lower");
            number(found.unwrap(), "shift") * MHZ
        };
        at(f) - at(g)
    };
    assert!(relative_error(interval("85Rb", "3", "2"), 3.0 * 1_011.910_813) < 1e-9);
    let scaled = interval("87Rb", "2", "1") / 2.0;
    assert!(relative_error(scaled, 3_417.341) < 5e-3, "{scaled}");
    let limits = found["limits"].to_string();
    assert!(limits.contains("scaled from another isotope"), "{limits}");
    // The whole pattern of an isotope moves by its shift.
    let centre: f64 = rows(&found, "components")
        .iter()
        .filter(|c| c["isotope"] == "87Rb")
        .map(|c| number(c, "strength") * number(c, "offset") / 0.2783)
        .sum();
    assert!((centre * MHZ - 77.6).abs() < 1e-4, "{}", centre * MHZ);
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

#[test]
fn without_a_line_all_states_and_lines() {
    let found = answer(&json!({
        "rungline": 1, "species": "Na I", "configurations": ["3s", "3p"], "field": {"flux_density": "1 T"}
    }));
    assert_eq!(found["line"], Value::Null);
    assert_eq!(rows(&found, "states").len(), 8);
    assert_eq!(rows(&found, "components").len(), 10);
    for component in rows(&found, "components") {
        assert!(component["upper"].as_str().unwrap().starts_with("3p"));
    }
    let names: std::collections::BTreeSet<&str> = rows(&found, "states")
        .iter()
        .map(|s| s["name"].as_str().unwrap())
        .collect();
    assert_eq!(names.len(), 8);
    assert!(names.contains("3p 2P3/2 M -3/2"));
}

/// What is used is no longer listed as unused.
#[test]
fn the_keys_are_used() {
    let found = answer(&json!({
        "rungline": 1, "species": "133Cs", "configurations": ["6s"], "instrument": {"resolving_power": 5e4},
        "nucleus": {"magnetic_dipole": {"6s 2S1/2": "2298.1579425 MHz"}}, "isotopes": []
    }));
    let limits = found["limits"].to_string();
    assert!(
        limits.contains("instrument") && !limits.contains("nucleus,"),
        "{limits}"
    );
    for key in ["isotopes", "level."] {
        assert!(!limits.contains(&format!("sheet: {key}")), "{limits}");
    }
}

fn map(sheet: &Value) -> Value {
    let sheet: Json = serde_json::from_value(sheet.clone()).unwrap();
    let text = sheet::splitting_map_message(&sheet, &mut sheet::unwatched);
    let map: Value = serde_json::from_str(&text).unwrap();
    assert!(map["map"].is_object(), "{text}");
    map["map"].clone()
}

#[test]
fn the_map_holds_the_answers_of_its_fields() {
    let sheet = |tesla: &str| {
        json!({
            "rungline": 1, "species": "87Rb", "configurations": ["5s", "5p"],
            "line": {"upper": "5p 2P3/2", "lower": "5s 2S1/2"},
            "nucleus": {"magnetic_dipole": {"5s 2S1/2": "3417.341 MHz", "5p 2P3/2": "84.7185 MHz"},
                        "electric_quadrupole": {"5p 2P3/2": "12.4965 MHz"}},
            "field": {"flux_density": tesla, "up_to": "0.199 T", "view": "45 deg", "polariser": "30 deg"}
        })
    };
    let whole = map(&sheet("0.199 T"));
    let fields = rows(&whole, "tesla");
    assert_eq!(fields.len(), 200);
    for step in [0, 1, 100, 199] {
        let tesla = fields[step].as_f64().unwrap();
        let found = answer(&sheet(&format!("{tesla} T")));
        let at = |row: &Value, key: &str| row[key][step].as_f64().unwrap();
        let states = rows(&found, "states");
        assert_eq!(states.len(), rows(&whole, "states").len());
        for (one, other) in states.iter().zip(rows(&whole, "states")) {
            assert_eq!(one["name"], other["name"]);
            assert_eq!(number(one, "energy"), at(other, "energies"));
            assert_eq!(number(one, "slope"), at(other, "slopes"));
        }
        let name = |place: &Value| &whole["states"][place.as_u64().unwrap() as usize]["name"];
        let mut met = 0;
        for component in rows(&whole, "components") {
            let own = rows(&found, "components").iter().find(|c| {
                c["upper"] == *name(&component["upper"]) && c["lower"] == *name(&component["lower"])
            });
            let Some(own) = own else {
                assert!(at(component, "strengths") <= 1e-12);
                continue;
            };
            met += 1;
            assert_eq!(number(own, "strength"), at(component, "strengths"));
            assert!((number(own, "seen") - at(component, "seen")).abs() < 1e-15);
            assert!((number(own, "offset") - at(component, "offsets")).abs() < 1e-15);
        }
        assert_eq!(met, rows(&found, "components").len());
    }
    // Slopes are those of the energies: the cubic through two fields meets the field between them.
    for state in rows(&whole, "states") {
        let of = |key: &str, step: usize| state[key][step].as_f64().unwrap();
        let h = fields[2].as_f64().unwrap() - fields[0].as_f64().unwrap();
        for step in [40, 120, 180] {
            let middle = 0.5 * (of("shifts", step) + of("shifts", step + 2))
                + h / 8.0 * (of("slopes", step) - of("slopes", step + 2));
            assert!(
                (middle - of("shifts", step + 1)).abs() < 1e-6,
                "{} {step}",
                state["name"]
            );
        }
    }
}

#[test]
fn a_map_that_cannot_be_had_says_why() {
    let fault = |sheet: Value| {
        let sheet: Json = serde_json::from_value(sheet).unwrap();
        let text = sheet::splitting_map_message(&sheet, &mut sheet::unwatched);
        let found: Value = serde_json::from_str(&text).unwrap();
        found["faults"][0]["code"].as_str().unwrap().to_owned()
    };
    let line = json!({"upper": "3p 2P1/2", "lower": "3s 2S1/2"});
    assert_eq!(
        fault(
            json!({"rungline": 1, "species": "*", "configurations": ["3s", "3p"], "line": line, "field": {"flux_density": "1 T"}})
        ),
        "map-needs-energies"
    );
    assert_eq!(
        fault(json!({"rungline": 1, "species": "Na"})),
        "needs-a-field"
    );
    let sheet: Json = serde_json::from_value(
        json!({"rungline": 1, "species": "Na I", "configurations": ["3s", "3p"], "field": {"flux_density": "1 T"}}),
    )
    .unwrap();
    let text = sheet::splitting_map_message(&sheet, &mut |_| false);
    assert!(text.contains("\"stopped\""), "{text}");
}

/// Clock transitions, resonances and crossings of a caesium atom. The slope of the 9.19 GHz line vanishes without
/// field; ν(F=3,M=−1 → F=4,M=0) is flat near 41.7 mT (Breit & Rabi's formula solved by hand: x from dν/dx = 0).
#[test]
fn crossings_and_resonances_are_told() {
    let found = answer(&json!({
        "rungline": 1, "species": "133Cs", "configurations": ["6s"],
        "nucleus": {"magnetic_dipole": {"6s 2S1/2": "2298.1579425 MHz"}},
        "field": {"flux_density": "1 mT", "up_to": "0.1 T"}
    }));
    let clock = |first: &str, second: &str| {
        let all = rows(&found, "crossings").iter();
        let row = all.clone().find(|c| {
            c["kind"] == "clock"
                && c["first"] == format!("6s 2S1/2 {first}")
                && c["second"] == format!("6s 2S1/2 {second}")
        });
        number(row.unwrap_or_else(|| panic!("{first}")), "tesla")
    };
    assert!(clock("F 3 M 0", "F 4 M 0") < 1e-9);
    let flat = clock("F 3 M -1", "F 4 M 0");
    // √(1 + x²) of M = 0 and √(1 − x/2 + x²) of M = −1 have opposite slopes but for g_I:
    // x/√(1 + x²) = (1/4 − x)/√(1 − x/2 + x²).
    let x =
        (2.002_319_304_36 * MU_B + 0.737_720 * 7.622_593_218_8 / MHZ) * flat / (9_192.631_77 / MHZ);
    let balance = x / (1.0 + x * x).sqrt() + (x - 0.25) / (1.0 - x / 2.0 + x * x).sqrt();
    assert!(balance.abs() < 2e-3, "{flat} {x} {balance}");
    // Every resonance is the distance of its states, and is driven along or across the field.
    let energy = |name: &Value| {
        let states = rows(&found, "states").iter();
        number(
            states.clone().find(|s| s["name"] == *name).unwrap(),
            "energy",
        )
    };
    assert!(rows(&found, "resonances").len() >= 30);
    for resonance in rows(&found, "resonances") {
        let apart = (energy(&resonance["to"]) - energy(&resonance["from"])) * MHZ;
        assert!(
            (number(resonance, "mhz") - apart).abs() < 1e-8,
            "{resonance}"
        );
        assert!(number(resonance, "strength") > 0.0);
    }
}

/// The linear pattern ends where a component is further off than the tolerance, and not before.
#[test]
fn the_end_of_the_linear_pattern() {
    let sheet = |tesla: f64, tolerance: &str| {
        json!({
            "rungline": 1, "species": "Na I", "configurations": ["3s", "3p"],
            "line": {"upper": "3p 2P3/2", "lower": "3s 2S1/2"},
            "field": {"flux_density": format!("{tesla} T"), "up_to": "50 T", "tolerance": tolerance}
        })
    };
    for tolerance in ["1 %", "0.05 cm-1"] {
        let end = number(&answer(&sheet(1.0, tolerance))["linear"], "departs_at");
        for (factor, beyond) in [(0.999, false), (1.001, true)] {
            let found = answer(&sheet(end * factor, tolerance));
            let largest = rows(&found, "components")
                .iter()
                .map(|c| number(c, "linear").abs());
            let scale = largest.fold(0.0, f64::max);
            let allowed = if tolerance == "1 %" {
                0.01 * scale
            } else {
                0.05
            };
            let off = number(&found["linear"], "largest_difference");
            assert_eq!(off > allowed, beyond, "{tolerance} {end} {off} {allowed}");
        }
    }
    // The doublet's levels cross: 3p 2P1/2 M = 1/2 rises into 3p 2P3/2 M = −3/2.
    let found = answer(&json!({
        "rungline": 1, "species": "Na I", "configurations": ["3s", "3p"],
        "measured": {"3s 2S1/2": "0 cm-1", "3p 2P1/2": "16956.170 cm-1", "3p 2P3/2": "16973.366 cm-1"},
        "line": {"upper": "3p 2P", "lower": "3s 2S"}, "field": {"flux_density": "1 T", "up_to": "60 T"}
    }));
    let crossing = rows(&found, "crossings")
        .iter()
        .find(|c| c["kind"] == "crossing" && c["first"] == "3p 2P1/2 M 1/2");
    let tesla = number(crossing.unwrap(), "tesla");
    // With g_s = 2 and b = μ_B B/ζ of a p electron: −2b + 1/2 = −1/4 + b/2 + ½√(9/4 + b + b²) at b = 2/9·… ;
    // solved here by bisection on the 2 × 2 matrix of M = 1/2 with the true g_s.
    let (g_s, zeta) = (2.002_319_304_36, 17.196 / 1.5);
    let upper = |b: f64| zeta / 2.0 - (1.0 + g_s / 2.0) * MU_B * b;
    let lower = |b: f64| {
        let (up, down) = (
            g_s / 2.0 * MU_B * b,
            -zeta / 2.0 + (1.0 - g_s / 2.0) * MU_B * b,
        );
        0.5 * (up + down) + (0.25 * (up - down) * (up - down) + zeta * zeta / 2.0).sqrt()
    };
    let lower_branch = |b: f64| {
        let (up, down) = (
            g_s / 2.0 * MU_B * b,
            -zeta / 2.0 + (1.0 - g_s / 2.0) * MU_B * b,
        );
        up + down - lower(b)
    };
    let (mut low, mut high) = (1.0, 60.0);
    for _ in 0..200 {
        let middle = 0.5 * (low + high);
        if upper(middle) > lower_branch(middle) {
            low = middle;
        } else {
            high = middle;
        }
    }
    assert!(relative_error(tesla, low) < 1e-6, "{tesla} {low}");
}
