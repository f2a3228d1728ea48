//! Components of lines in a field, through the sheet: weak to strong, polarisers, centres, isotopes.

use rungline_tests::relative_error;
use rungline_tests::sheets::{self, number, rows};
use serde_json::{Value, json};

/// MHz in one cm⁻¹, exact by the definition of the metre.
const MHZ: f64 = 29_979.245_8;
/// μ_B/hc in cm⁻¹ per tesla, CODATA 2022.
const MU_B: f64 = 0.466_864_477_19;

fn answer(sheet: &Value) -> Value {
    sheets::answer(sheet, "splitting")
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
    // Every isotope has its constants in a row for each level, with where they come from.
    for (place, kind, is_scaled) in [(0, "entered", false), (1, "computed", true)] {
        let levels = rows(&found["isotopes"][place], "levels");
        assert_eq!(levels.len(), 2);
        for level in levels {
            assert_eq!(
                (&level["kind"], &level["scaled"]),
                (&json!(kind), &json!(is_scaled))
            );
            assert!(level["A_MHz"].is_number() && level["B_MHz"].is_null());
        }
    }
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

/// A singlet's line: in the classic picture three places, of which no sentence needs to say that they are groups.
#[test]
fn a_normal_triplet_is_called_so() {
    let found = answer(&json!({
        "rungline": 1, "species": "*", "configurations": ["2s 2p", "2s 3d"],
        "structure": {"energies": "given", "given": {"E(2s 3d)": "20000 cm-1", "G1(2s,2p)": "9000 cm-1", "G2(2s,3d)": "9000 cm-1"}},
        "line": {"upper": "2s 3d 1D2", "lower": "2s 2p 1P1"}, "field": {"flux_density": "1 T"}
    }));
    assert_eq!(found["pattern"], "3 components, the normal triplet");
    let said = found["say_plain"].as_str().expect("a sentence");
    assert!(
        said.contains("normal triplet") && !said.contains("groups"),
        "{said}"
    );
}

/// On which side a polariser leaves light is told from the line's own centre, wherever its isotope lies; the
/// working has the isotope's shift.
#[test]
fn an_isotope_far_away_keeps_its_sides() {
    let asked = |shift: &str| {
        answer(&json!({
            "rungline": 1, "species": "Rb I", "configurations": ["5s", "5p"],
            "line": {"upper": "5p 2P1/2", "lower": "5s 2S1/2"},
            "isotopes": [{"isotope": "85Rb"}, {"isotope": "87Rb", "shift": shift}],
            "field": {"flux_density": "5 mT", "view": "along", "polariser": "left circular"}
        }))
    };
    for shift in ["900 GHz", "-900 GHz"] {
        let found = asked(shift);
        assert_eq!(
            found["field"]["keeps"],
            "σ+ (100 % on the side of higher energy)"
        );
    }
    let working = asked("900 GHz")["working"].to_string();
    assert!(working.contains("δ_isotope"), "{working}");
}

/// The diamagnetic term of hydrogen's 2s: (e²B²/8m)(2/3)⟨r²⟩ with ⟨r²⟩ = 42 a₀² (Bethe & Salpeter, § 3), which is
/// left out and whose size is told.
#[test]
fn the_size_of_what_is_left_out_of_hydrogen() {
    let found = answer(&json!({
        "rungline": 1, "species": "H I", "configurations": ["1s", "2s", "2p"],
        "field": {"flux_density": "5 T"}
    }));
    let (mu_b, hartree) = (0.466_864_477_19_f64, 219_474.631_4_f64);
    let wanted = mu_b * mu_b / (2.0 * hartree) * 2.0 / 3.0 * 42.0 * 25.0;
    let stretched = 1.0 + 1.0 / 1_836.152_67;
    let mass = stretched * stretched;
    let size = number(&found["diamagnetic"], "largest");
    assert!(
        (size / (wanted * mass) - 1.0).abs() < 1e-6,
        "{size} {wanted}"
    );
    let limits = found["limits"].to_string();
    assert!(
        limits.contains("no state by more than 5.220e-4"),
        "{limits}"
    );
    assert!(!limits.contains("not known"), "{limits}");
}

/// Along the field a dipole line has no π (Jackson, *Classical Electrodynamics*, § 9.7): what is counted, called the
/// largest and named is what is seen.
#[test]
fn the_sentence_counts_what_is_seen() {
    let told = |view: &str, polariser: &str| {
        let found = answer(&json!({
            "rungline": 1, "species": "Na I", "configurations": ["3s", "3p"],
            "line": {"upper": "3p 2P3/2", "lower": "3s 2S1/2"},
            "field": {"flux_density": "0.5 T", "view": view, "polariser": polariser}
        }));
        let largest = rows(&found, "components")
            .iter()
            .filter(|c| number(c, "seen") > 0.0)
            .map(|c| number(c, "offset").abs())
            .fold(0.0, f64::max);
        let said = found["say_plain"].as_str().unwrap().to_owned();
        let counted = (found["positions"].clone(), found["positions_seen"].clone());
        (said, counted, largest)
    };
    let (said, counted, _) = told("across", "none");
    assert_eq!(counted, (json!(6), json!(6)));
    assert!(said.starts_with("In a field of 0.5 T, seen across it, the E1 line from 3p 2P3/2 to 3s 2S1/2 splits into 6 components; the largest offset from the centre is "), "{said}");
    let (said, counted, _) = told("along", "none");
    assert_eq!(counted, (json!(6), json!(4)));
    assert!(
        said.contains("seen along it")
            && said.contains(" shows 4 of 6 components; the largest offset of these"),
        "{said}"
    );
    let (said, counted, largest) = told("across", "0 deg");
    assert_eq!(counted, (json!(6), json!(2)));
    assert!(
        said.contains("seen across it through a linear polariser at 0° from the field")
            && said.contains(" shows 2 of 6 components"),
        "{said}"
    );
    // The π components lie at ±1/3 μ_B B (LS coupling).
    assert!(relative_error(largest, MU_B * 0.5 / 3.0) < 0.02);
    // Six digits are read aloud; the table has all.
    let aloud: f64 = format!("{largest:.5e}").parse().unwrap();
    assert!(said.contains(&format!("centre is {aloud} cm-1")), "{said}");
    let (said, counted, _) = told("along", "0.5 rad");
    assert_eq!(counted.1, json!(4));
    assert!(said.contains("at 28.64789° from the field"), "{said}");
    let (said, counted, _) = told("180 deg", "none");
    assert_eq!(counted.1, json!(4), "{said}");
}

/// An isotope that is named for nothing says so in the sentence.
#[test]
fn a_nucleus_without_constants_is_said_to_be_left_out() {
    let told = |more: Value| {
        let mut sheet = json!({
            "rungline": 1, "species": "133Cs I", "configurations": ["6s", "6p"],
            "line": {"upper": "6p 2P1/2", "lower": "6s 2S1/2"}, "field": {"flux_density": "0.1 T"}
        });
        for (key, value) in more.as_object().unwrap() {
            sheet[key] = value.clone();
        }
        answer(&sheet)["say_plain"].as_str().unwrap().to_owned()
    };
    let without = "the nucleus of 133Cs is left out because no A is entered.";
    assert!(told(json!({})).ends_with(without));
    let with = told(json!({"nucleus": {"magnetic_dipole": {"6s 2S1/2": "2298.1579425 MHz"}}}));
    assert!(
        !with.contains("left out") && with.contains("with its nucleus"),
        "{with}"
    );
    let estimated = told(json!({"nucleus": {"estimate": true}}));
    assert!(
        !estimated.contains("left out") && estimated.contains("(A and B estimated)"),
        "{estimated}"
    );
    // Without a spin there is nothing to leave out.
    let even = told(
        json!({"species": "4He I", "configurations": ["1s 2s", "1s 2p"], "line": {"upper": "1s 2p 1P1", "lower": "1s 2s 1S0"}}),
    );
    assert!(!even.contains("left out"), "{even}");
}
