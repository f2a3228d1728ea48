//! What answers and faults say is true of the case at hand: media, ends of a line, limits, ways out.

use rungline_core::sheet::answer_message;
use rungline_tests::sheets::{answer, faults, number, rows, sheet};
use serde_json::{Value, json};

fn said(answer: &Value) -> String {
    answer["say_plain"].as_str().expect("a sentence").to_owned()
}

fn limits(answer: &Value) -> String {
    answer["limits"].to_string()
}

/// The first fault of an answer that there is not.
fn refused(sheet: &Value, question: &str) -> Value {
    let json = serde_json::from_value(sheet.clone()).expect("a sheet");
    let text = answer_message(&json, question);
    let message: Value = serde_json::from_str(&text).expect("JSON");
    assert!(message["answer"].is_null(), "{text}");
    message["faults"][0].clone()
}

/// Ciddor's formula (Appl. Opt. 35, 1566 (1996)) is used from 200 to 1700 nm: what lies beyond is in vacuum,
/// whatever the medium. Lyman α without the Lamb shift, from memory (121.567 nm with it).
#[test]
fn a_wavelength_beyond_the_formula_of_air_is_one_in_vacuum() {
    let hydrogen = answer(
        &sheet("H I", &["n=1", "n=2"], json!({"medium": "air"})),
        "lines",
    );
    assert!(
        said(&hydrogen).contains("121.566 nm in vacuum"),
        "{}",
        said(&hydrogen)
    );
    let sodium = sheet("Na I", &["3s", "3p"], json!({"medium": "air"}));
    assert!(said(&answer(&sodium, "lines")).contains(" nm in air"));
    let window = json!({"medium": "air", "window": ["100 nm", "150 nm"]});
    let far = answer(&sheet("H I", &["n=1", "n=2"], window), "lines");
    assert!(
        said(&far).starts_with("Between 100 and 150 nm in vacuum"),
        "{}",
        said(&far)
    );
    let both = json!({"medium": "air", "refractive_index": "1.5"});
    let both = answer(&sheet("Na I", &["3s", "3p"], both), "lines");
    assert!(limits(&both).contains("air does not"));
}

/// A = C S/(g λ³) with the numbers that the working prints.
#[test]
fn the_worked_rate_of_one_electron_follows_from_its_numbers() {
    let uranium = answer(&sheet("U XCII", &["n=1", "n=2"], json!({})), "lines");
    let step = &uranium["working"][0];
    // C × S/(g × λ^3)
    let plain = step["numbers"]["plain"].as_str().expect("numbers");
    let values: Vec<f64> = plain
        .trim_end_matches("^3)")
        .split([' ', '×', '/', '(', ')'])
        .filter(|piece| !piece.is_empty())
        .map(|piece| piece.parse().expect("a number"))
        .collect();
    let &[factor, s, degeneracy, angstrom] = values.as_slice() else {
        panic!("{plain}");
    };
    let by_hand = factor * s / (degeneracy * angstrom * angstrom * angstrom);
    let told = step["result"][1]["number"]["text"].as_str().expect("A");
    let told: f64 = told.parse().expect("a number");
    assert!(
        (by_hand / told - 1.0).abs() < 5e-3,
        "{by_hand} in {plain}: {told}"
    );
}

#[test]
fn the_higher_end_of_a_line_is_the_upper_one() {
    let measured =
        json!({"3s 2S1/2": "0 cm-1", "3p 2P1/2": "16956.17 cm-1", "3p 2P3/2": "16973.37 cm-1"});
    let of = |upper: &str, lower: &str| {
        let extra = json!({"measured": measured, "line": {"upper": upper, "lower": lower}, "field": {"flux_density": "10 T"}});
        answer(&sheet("Na I", &["3s", "3p"], extra), "splitting")
    };
    let (right, turned) = (of("3p 2P3/2", "3s 2S1/2"), of("3s 2S1/2", "3p 2P3/2"));
    for key in ["say_plain", "components", "states", "line", "groups"] {
        assert_eq!(right[key], turned[key], "{key}");
    }
    assert!(!limits(&right).contains("the other way round"));
    assert!(limits(&turned).contains("the other way round"));
    // σ+ goes up; the shifts are of the size of μ_B B, 4.67 cm⁻¹ at 10 T (CODATA).
    assert!(
        rows(&turned, "components")
            .iter()
            .any(|c| c["polarisation"] == "sigma+" && number(c, "offset") > 4.0)
    );
}

#[test]
fn a_line_that_there_is_not_is_refused_with_the_rules() {
    let extra = json!({"field": {"flux_density": "1 T"}, "line": {"upper": "5f 2F7/2", "lower": "3s 2S1/2"}});
    let fault = refused(&sheet("Na I", &["3s", "5f"], extra), "splitting");
    assert_eq!(fault["code"], "line-refused");
    assert_eq!(
        fault["message"],
        "There is no line between 3s 2S1/2 and 5f 2F7/2."
    );
    assert!(fault["bound"].as_str().unwrap().contains("E1"), "{fault}");
    let extra = json!({"field": {"flux_density": "1 T"}, "line": {"upper": "5f", "lower": "3s"}});
    assert_eq!(
        refused(&sheet("Na I", &["3s", "5f"], extra), "splitting")["code"],
        "line-refused"
    );
}

/// That 1s 2p 3P of helium is inverted: from memory.
#[test]
fn limits_are_those_of_the_case() {
    let of = |species: &str, configurations: &[&str], extra: Value| {
        limits(&answer(&sheet(species, configurations, extra), "levels"))
    };
    let helium = of("He I", &["1s2", "1s 2s", "1s 2p", "1s 3d"], json!({}));
    assert!(!helium.contains("more d electron"), "{helium}");
    assert!(helium.contains("1s 2p 3P of helium is inverted"));
    assert!(!of("Mg I", &["3s2", "3s 3d"], json!({})).contains("more d electron"));
    assert!(of("Fe I", &["3d6 4s2", "3d7 4s"], json!({})).contains("more d electron"));
    assert!(of("Ca II", &["4s", "3d"], json!({})).contains("more d electron"));
    assert!(of("Mg I", &["3s2", "3s 3p"], json!({})).contains("M2"));
    let given =
        json!({"structure": {"given": {"F2(4f,4f)": "72900 cm-1", "zeta(4f)": "885 cm-1"}}});
    let neodymium = of("Nd 3+", &["4f3"], given);
    assert!(!neodymium.contains("nothing fitted"), "{neodymium}");
    assert!(neodymium.contains("but for the given parameters"));
    assert!(of("Nd 3+", &["4f3"], json!({})).contains("Computed, nothing fitted."));
    let alone = json!({"structure": {"given": {"zeta(4f)": "885 cm-1"}}});
    let alone = answer(&sheet("*", &["4f3"], alone), "levels");
    assert!(
        said(&alone).starts_with("This configuration has 41 levels"),
        "{}",
        said(&alone)
    );
    let nucleus = json!({"nucleus": {"spin": "1/2", "magnetic_dipole": {"5s 2S1/2": "3417 MHz"}}, "field": {"flux_density": "0 T"}});
    let rubidium = answer(&sheet("87Rb", &["5s"], nucleus), "splitting");
    assert!(
        limits(&rubidium).contains("has 3/2 in the table"),
        "{}",
        limits(&rubidium)
    );
    let krypton = answer(
        &sheet("Kr I", &["4p6"], json!({"field": {"flux_density": "1 T"}})),
        "splitting",
    );
    assert!(
        said(&krypton).ends_with("1 state, which keeps its energy."),
        "{}",
        said(&krypton)
    );
}

/// Full shells have one name in any scheme, and leave jK coupling to the others.
#[test]
fn a_closed_configuration_leaves_the_pair_names_of_the_others() {
    let xenon = answer(
        &sheet("Xe I", &["5p6", "5p5 6s", "5p5 6p"], json!({})),
        "levels",
    );
    let schemes: Vec<&str> = rows(&xenon, "schemes")
        .iter()
        .map(|row| row["scheme"].as_str().expect("a scheme"))
        .collect();
    assert!(schemes.contains(&"jK"), "{schemes:?}");
    let ground = &rows(&xenon, "levels")[0];
    assert_eq!(ground["composition_jk"][0]["name"], "1S0");
    let argon = answer(&sheet("Ar I", &["3p6"], json!({})), "levels");
    assert!(!argon["schemes"].to_string().contains("jK"));
}

#[test]
fn an_ion_without_its_parameters_is_told_what_it_needs() {
    let given = json!({"structure": {"energies": "given"}});
    let fault = refused(&sheet("Ti III", &["3d2"], given), "levels");
    assert!(
        !fault["message"]
            .as_str()
            .unwrap()
            .contains("an atom or ion"),
        "{fault}"
    );
    assert_eq!(fault["path"], "/structure/energies");
    assert_eq!(fault["ways"][0]["replacement"], "computed");
}

/// Each way out of these faults, taken, leads to a sheet without a fault in that field.
#[test]
fn ways_out_lead_out() {
    let isotopes = |second: &str| {
        json!({
            "isotopes": [{"isotope": "198Hg"}, {"isotope": second}], "field": {"flux_density": "0.1 T"},
            "line": {"upper": "6s 6p 3P1", "lower": "6s2 1S0"}
        })
    };
    for sheet in [
        sheet("Fe I", &["3d11 4s"], json!({})),
        sheet("Ti III", &["3d2", "3d 4s", "3d 4p 4d"], json!({})),
        sheet("Na I", &["3s", "3p7"], json!({})),
        sheet("Hg I", &["6s2", "6s 6p"], isotopes("250Hg")),
        sheet("Hg I", &["6s2", "6s 6p"], isotopes("198Hg")),
    ] {
        let found = faults(&sheet);
        assert!(!found.is_empty(), "{sheet}");
        for (fault, _) in found {
            assert!(!fault.ways.is_empty(), "{fault:?}");
            for way in &fault.ways {
                let mut mended = sheet.clone();
                *mended.pointer_mut(&fault.path).expect("a field") = json!(way.replacement);
                let left = faults(&mended);
                assert!(
                    left.iter().all(|(other, _)| other.path != fault.path),
                    "{way:?}: {left:?}"
                );
            }
        }
    }
    let oersted = sheet(
        "Na I",
        &["3s", "3p"],
        json!({"field": {"flux_density": "3 kOe"}}),
    );
    assert_eq!(answer(&oersted, "splitting")["field"]["tesla"], 0.3);
}
