//! Faults of a field, a nucleus, isotopes and a level alone: each has its code, its characters, a bound and
//! a way out, whatever was typed.
//!
//! Bounds: a magnetic dipole constant needs I and J of at least 1/2, an electric quadrupole one of at
//! least 1 (Kopfermann, *Nuclear Moments*, 1958, § 4); isotopes by the table in `tests/vectors`.

use rungline_core::sheet::{self, Document};
use rungline_tests::sheets::{self, OddTexts, answered_or_faulted};
use serde_json::{Value, json};

fn faults(sheet: &Value) -> Vec<(String, String, String)> {
    let found = sheets::faults(sheet).into_iter();
    found
        .map(|(fault, span)| {
            assert!(
                fault.message.ends_with(['.', '?']) && fault.bound.is_some(),
                "{fault:?}"
            );
            (fault.code.to_owned(), fault.path.clone(), span)
        })
        .collect()
}

/// A sheet with one value put in, and the first fault of it.
fn first(base: &Value, pointer: &str, value: Value) -> (String, String, String) {
    let mut sheet = base.clone();
    let (parent, key) = pointer.rsplit_once('/').unwrap();
    let parent = sheet.pointer_mut(parent).expect("the group is there");
    parent[key.replace("~1", "/")] = value;
    let found = faults(&sheet);
    found
        .into_iter()
        .next()
        .unwrap_or_else(|| panic!("{pointer}: no fault"))
}

fn rubidium() -> Value {
    json!({
        "rungline": 1, "species": "87Rb", "configurations": ["5s", "5p"],
        "field": {"flux_density": "0.5 T"}, "line": {"upper": "5p 2P3/2", "lower": "5s 2S1/2"},
        "nucleus": {"magnetic_dipole": {"5s 2S1/2": "3417.341 MHz"},
                    "electric_quadrupole": {"5p 2P3/2": "12.4965 MHz"}},
        "isotopes": [], "level": {}
    })
}

#[test]
fn a_sheet_with_all_keys_has_no_fault() {
    let mut sheet = rubidium();
    sheet["field"] = json!({"flux_density": "0.5 T", "up_to": "1 T", "view": "along", "diamagnetic": true,
        "tolerance": "0.01 cm-1", "polariser": "left circular"});
    sheet["nucleus"]["g_I"] = json!("1.8342");
    sheet["isotopes"] = json!([
        {"isotope": "85Rb", "share": "72.17 %", "shift": "78 MHz", "magnetic_dipole": {"5s 2S1/2": "1011.91 MHz"}},
        {"isotope": "Rb-87"}
    ]);
    assert_eq!(faults(&sheet), []);
    for (upper, lower) in [("5p 2P", "5s"), ("5p", "5s 2S1/2"), ("5p", "[Kr] 5s")] {
        sheet["line"] = json!({"upper": upper, "lower": lower});
        assert_eq!(faults(&sheet), [], "{upper}");
    }
    for polariser in ["none", "RIGHT circular", "30 deg", "-45°"] {
        sheet["field"]["polariser"] = json!(polariser);
        assert_eq!(faults(&sheet), [], "{polariser}");
    }
    // A B constant of zero is always accepted.
    sheet["nucleus"]["electric_quadrupole"]["5s 2S1/2"] = json!("0 MHz");
    assert_eq!(faults(&sheet), []);
}

#[test]
fn each_slip_has_its_sentence() {
    let base = rubidium();
    let a = "/nucleus/magnetic_dipole/5s 2S1~12";
    for (pointer, value, code, span) in [
        (
            "/field/flux_density",
            "-1 T",
            "quantity-out-of-range",
            "-1 T",
        ),
        (
            "/field/flux_density",
            "1e9 T",
            "quantity-out-of-range",
            "1e9 T",
        ),
        (
            "/field/flux_density",
            "5 mm",
            "unit-of-another-quantity",
            "mm",
        ),
        ("/field/up_to", "2 km", "unit-unknown", "km"),
        ("/field/tolerance", "0 %", "tolerance-not-positive", "0 %"),
        ("/field/tolerance", "1 T", "unit-of-another-quantity", "T"),
        (
            "/field/tolerance",
            "200 %",
            "quantity-out-of-range",
            "200 %",
        ),
        ("/field/polariser", "elliptic", "unknown-choice", "elliptic"),
        ("/field/polariser", "30", "unit-missing", "30"),
        ("/nucleus/spin", "0.7", "not-half-integer", "0.7"),
        ("/nucleus/spin", "7/4", "not-half-integer", "7/4"),
        ("/nucleus/spin", "-3/2", "angular-momentum-negative", "-3/2"),
        ("/nucleus/spin", "77/2", "spin-too-large", "77/2"),
        ("/nucleus/g_I", "2 T", "unit-not-wanted", "T"),
        ("/nucleus/g_I", "1e9", "g-out-of-range", "1e9"),
        (a, "5 T", "unit-of-another-quantity", "T"),
        ("/level/J", "1/3", "not-half-integer", "1/3"),
        ("/level/J", "200", "angular-momentum-out-of-range", "200"),
        ("/level/I", "31", "angular-momentum-out-of-range", "31"),
        ("/level/A", "1 kg", "unit-of-another-quantity", "kg"),
        ("/level/g", "-2000", "g-out-of-range", "-2000"),
    ] {
        let found = first(&base, pointer, json!(value));
        assert_eq!(
            (found.0.as_str(), found.1.as_str(), found.2.as_str()),
            (code, pointer, span),
            "{value}"
        );
    }
}

#[test]
fn constants_belong_to_levels_that_are_there_and_spins_that_allow_them() {
    let base = rubidium();
    let of = |key: &str, name: &str| {
        let pointer = format!("/nucleus/{key}/{}", name.replace('/', "~1"));
        let mut sheet = base.clone();
        sheet["nucleus"][key][name] = json!("5 MHz");
        let found = faults(&sheet);
        assert_eq!(found.len(), 1, "{name}: {found:?}");
        assert_eq!(found[0].1, pointer);
        found[0].0.clone()
    };
    assert_eq!(of("magnetic_dipole", "5p 2P5/2"), "level-j-impossible");
    assert_eq!(of("magnetic_dipole", "5p 4P1/2"), "level-unknown");
    assert_eq!(
        of("magnetic_dipole", "6s 2S1/2"),
        "level-of-no-configuration"
    );
    assert_eq!(
        of("magnetic_dipole", "2S1/2"),
        "level-without-configuration"
    );
    assert_eq!(
        of("electric_quadrupole", "5p 2P1/2"),
        "constant-needs-larger-j"
    );
    let mut spinless = json!({"rungline": 1, "species": "40Ca", "configurations": ["4s 4p"],
        "nucleus": {"magnetic_dipole": {"4s 4p 3P1": "10 MHz"}}});
    assert_eq!(faults(&spinless)[0].0, "nucleus-without-spin");
    spinless["species"] = json!("43Ca");
    assert_eq!(faults(&spinless), []);
    let silver = json!({"rungline": 1, "species": "107Ag", "configurations": ["4d10 5s", "4d10 5p"],
        "nucleus": {"electric_quadrupole": {"4d10 5p 2P3/2": "10 MHz"}}});
    let found = faults(&silver);
    assert_eq!(found[0].0, "constant-needs-larger-spin");
    assert_eq!(found[0].2, "10 MHz");
    for (level, code) in [
        (
            json!({"J": "1/2", "I": "0", "A": "5 MHz"}),
            "nucleus-without-spin",
        ),
        (
            json!({"J": "1/2", "I": "3/2", "B": "5 MHz"}),
            "constant-needs-larger-j",
        ),
        (
            json!({"J": "3/2", "I": "1/2", "B": "5 MHz"}),
            "constant-needs-larger-spin",
        ),
        (
            json!({"J": "0", "I": "1/2", "A": "5 MHz"}),
            "constant-needs-larger-j",
        ),
    ] {
        assert_eq!(faults(&json!({"rungline": 1, "level": level}))[0].0, code);
    }
    let good =
        json!({"rungline": 1, "level": {"J": "1/2", "I": "3/2", "A": "885.8 MHz", "B": "0 MHz"}});
    assert_eq!(faults(&good), []);
}

#[test]
fn isotopes_are_those_of_the_element_and_of_the_table() {
    let base = rubidium();
    for (text, code) in [
        ("99Rb", "isotope-unknown"),
        ("133Cs", "isotope-of-another-element"),
        ("Rb", "isotope-without-mass-number"),
        ("*", "isotope-of-no-element"),
    ] {
        let found = first(&base, "/isotopes", json!([{"isotope": text}]));
        assert_eq!(
            (found.0.as_str(), found.1.as_str(), found.2.as_str()),
            (code, "/isotopes/0/isotope", text)
        );
    }
    let twice = first(
        &base,
        "/isotopes",
        json!([{"isotope": "85Rb"}, {"isotope": "Rb-85"}]),
    );
    assert_eq!(
        (twice.0.as_str(), twice.1.as_str()),
        ("isotope-repeated", "/isotopes/1/isotope")
    );
    assert_eq!(first(&base, "/isotopes", json!([{}])).0, "isotope-missing");
    let many: Vec<Value> = (0..50).map(|_| json!({"isotope": "85Rb"})).collect();
    assert_eq!(first(&base, "/isotopes", json!(many)).0, "too-many-entries");
    let sodium = json!({"rungline": 1, "species": "Na I", "isotopes": [{"isotope": "22Na"}]});
    assert_eq!(faults(&sodium)[0].0, "isotope-without-share");
    let calcium = json!({"rungline": 1, "species": "Ca I", "configurations": ["4s 4p"],
        "isotopes": [{"isotope": "40Ca", "magnetic_dipole": {"4s 4p 3P1": "10 MHz"}}]});
    assert_eq!(faults(&calcium)[0].0, "nucleus-without-spin");
    let shares = first(
        &base,
        "/isotopes",
        json!([{"isotope": "85Rb", "share": "120 %"}]),
    );
    assert_eq!(shares.1, "/isotopes/0/share");
}

#[test]
fn ends_of_a_line_have_no_level_in_common() {
    let base = rubidium();
    for (upper, lower, code, span) in [
        ("5p 2P", "5p 2P", "line-without-change", "5p 2P"),
        ("5p 2P3/2", "5p", "line-without-change", "5p 2P3/2"),
        ("5p 4P", "5s", "level-unknown", "4P"),
        ("2P", "5s", "level-without-configuration", "2P"),
        ("7p", "5s", "level-unknown-letter", "p"),
    ] {
        let found = first(&base, "/line", json!({"upper": upper, "lower": lower}));
        assert_eq!(
            (found.0.as_str(), found.1.as_str(), found.2.as_str()),
            (code, "/line/upper", span),
            "{upper}"
        );
    }
}

#[test]
fn places_hold_after_an_emoji_a_superscript_and_right_to_left_text() {
    let base = rubidium();
    for (pointer, value, span) in [
        ("/field/flux_density", "0.5 🙂", "🙂"),
        ("/field/up_to", "1 שלום", "שלום"),
        ("/field/tolerance", "🙂 %", "🙂 %"),
        ("/nucleus/g_I", "1.8 🙂", "🙂"),
        ("/level/A", "885 ⁸🙂", "⁸🙂"),
        ("/line/upper", "5p⁶ 2P3/2", "5p⁶"),
        ("/line/upper", "🙂 2P", "🙂"),
        ("/line/upper", "שלום 2P3/2", "שלום"),
    ] {
        let found = first(&base, pointer, json!(value));
        assert_eq!(
            (found.1.as_str(), found.2.as_str()),
            (pointer, span),
            "{value}"
        );
    }
    for text in ["🙂", "שלום", "85🙂Rb", "⁹⁹Rb", ""] {
        let found = first(&base, "/isotopes", json!([{"isotope": text}]));
        assert_eq!(found.1, "/isotopes/0/isotope", "{text}");
    }
    // In a key the characters are the key's.
    let mut sheet = base;
    let name = "🙂 5p 2P9/2";
    sheet["nucleus"]["magnetic_dipole"][name] = json!("1 MHz");
    let json = serde_json::from_value(sheet).unwrap();
    let fault = Document::read(&json).faults.remove(0);
    let units: Vec<u16> = name.encode_utf16().collect();
    let span = String::from_utf16_lossy(&units[fault.start..fault.end]);
    assert_eq!((fault.code, span.as_str()), ("level-j-impossible", "9/2"));
}

#[test]
fn ways_out_lead_out() {
    let base = rubidium();
    for (pointer, value) in [
        ("/field/flux_density", "-1 T"),
        ("/field/tolerance", "0 %"),
        ("/nucleus/spin", "7/4"),
        ("/nucleus/g_I", "1e9"),
        ("/level/J", "200"),
        ("/level/g", "-2000"),
        ("/line/upper", "5p 4P"),
    ] {
        let mut sheet = base.clone();
        let (parent, key) = pointer.rsplit_once('/').unwrap();
        sheet.pointer_mut(parent).unwrap()[key] = json!(value);
        let json = serde_json::from_value(sheet.clone()).unwrap();
        let fault = Document::read(&json).faults.remove(0);
        let way = fault
            .ways
            .first()
            .unwrap_or_else(|| panic!("{value}: no way"));
        sheet.pointer_mut(parent).unwrap()[key] = json!(way.replacement);
        assert!(
            faults(&sheet).iter().all(|(_, path, _)| path != pointer),
            "{value} → {}",
            way.replacement
        );
    }
}

#[test]
fn what_a_question_lacks_is_said_with_a_usual_value() {
    let lack = |sheet: Value| {
        let json = serde_json::from_value(sheet).unwrap();
        let reading: Value = serde_json::from_str(&sheet::reading(&json)).unwrap();
        let questions = reading["questions"].as_array().unwrap().clone();
        let found = questions
            .into_iter()
            .find(|q| q["name"] == "splitting")
            .unwrap();
        (
            found["status"].as_str().unwrap().to_owned(),
            found["way"]["path"].clone(),
        )
    };
    let ready = |sheet| assert_eq!(lack(sheet), ("ready".to_owned(), Value::Null));
    ready(
        json!({"rungline": 1, "species": "Na I", "configurations": ["3s", "3p"], "field": {"flux_density": "1 T"}}),
    );
    ready(
        json!({"rungline": 1, "species": "133Cs", "configurations": ["6s"], "nucleus": {"magnetic_dipole": {"6s 2S1/2": "2298 MHz"}}}),
    );
    ready(json!({"rungline": 1, "level": {"J": "1/2", "I": "3/2", "A": "885.8 MHz"}}));
    ready(
        json!({"rungline": 1, "level": {"J": "1/2", "g": "2"}, "field": {"flux_density": "1 T"}}),
    );
    let lacks = |sheet, path: &str| assert_eq!(lack(sheet), ("lacks".to_owned(), json!(path)));
    lacks(
        json!({"rungline": 1, "species": "Na I", "configurations": ["3s", "3p"]}),
        "/field",
    );
    lacks(
        json!({"rungline": 1, "species": "Rb", "configurations": ["5s"], "nucleus": {}}),
        "/nucleus/spin",
    );
    lacks(json!({"rungline": 1, "level": {"I": "3/2"}}), "/level/J");
    lacks(
        json!({"rungline": 1, "level": {"J": "1/2"}, "field": {"flux_density": "1 T"}}),
        "/level/g",
    );
    lacks(
        json!({"rungline": 1, "level": {"J": "1/2", "A": "1 MHz"}}),
        "/level/I",
    );
    // An element with one isotope needs no mass number.
    ready(
        json!({"rungline": 1, "species": "Cs", "configurations": ["6s"], "nucleus": {"magnetic_dipole": {"6s 2S1/2": "2298 MHz"}}}),
    );
}

#[test]
fn the_natural_isotopes_are_offered() {
    let json = serde_json::from_value(json!({"rungline": 1, "species": "Rb"})).unwrap();
    let reading: Value = serde_json::from_str(&sheet::reading(&json)).unwrap();
    assert_eq!(
        reading["isotopes"],
        json!([{"isotope": "85Rb", "share": "72.17 %", "spin": "5/2"},
               {"isotope": "87Rb", "share": "27.83 %", "spin": "3/2"}])
    );
}

/// A fixed sequence of odd texts in every new place; nothing panics, everything is JSON.
#[test]
fn odd_input_in_every_place_is_answered_or_faulted() {
    let alphabet = "0123456789./-+%eE TMHzcm-1 spdPSF#*🙂ש⁸½°\u{0}\"\\RbNa~ ";
    let mut odd = OddTexts::new(alphabet, 88_172_645_463_325_252);
    for _ in 0..400 {
        let mut text = || odd.text(14);
        let sheet = json!({
            "rungline": 1, "species": "Rb", "configurations": ["5s", "5p"],
            "line": {"upper": text(), "lower": text()},
            "field": {"flux_density": text(), "view": text(), "up_to": text(), "tolerance": text(), "polariser": text()},
            "nucleus": {"spin": text(), "g_I": text(), "magnetic_dipole": {text(): text()}, "electric_quadrupole": {text(): text()}},
            "isotopes": [{"isotope": text(), "share": text(), "shift": text(), "magnetic_dipole": {text(): text()}}],
            "level": {"J": text(), "g": text(), "I": text(), "A": text(), "B": text(), "g_I": text()},
        });
        answered_or_faulted(sheet, &["splitting"]);
    }
}

/// A fault is one of the questions that hang on its field; the others are answered all the same.
#[test]
fn a_fault_in_the_field_is_none_of_the_other_questions() {
    let mut sheet = rubidium();
    sheet["field"]["flux_density"] = json!("strong");
    let reading = |sheet: &Value| -> Vec<(String, String)> {
        let json = serde_json::from_value::<sheet::Json>(sheet.clone()).unwrap();
        let read: Value = serde_json::from_str(&sheet::reading(&json)).unwrap();
        let questions = read["questions"].as_array().unwrap().iter();
        let word = |value: &Value| value.as_str().unwrap().to_owned();
        questions
            .map(|q| (word(&q["name"]), word(&q["status"])))
            .collect()
    };
    for (name, status) in reading(&sheet) {
        assert_eq!(status == "fault", name == "splitting", "{name}: {status}");
        let json = serde_json::from_value::<sheet::Json>(sheet.clone()).unwrap();
        let told = sheet::answer_message(&json, &name);
        assert_eq!(
            told.starts_with("{\"faults\""),
            name == "splitting",
            "{name}"
        );
    }
    let mut sheet = rubidium();
    sheet["configurations"] = json!(["5s3"]);
    assert!(reading(&sheet).iter().all(|(_, status)| status == "fault"));
}
