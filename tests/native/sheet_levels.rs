//! The answer on levels: closed forms, names, pins, given and scaled parameters, series, populations,
//! and what each bad question is told.

use std::collections::BTreeSet;

use rungline_core::sheet::{Document, Question, answer_text};
use rungline_tests::sheets::sheet;
use serde_json::{Value, json};

fn asked(sheet: &Value, question: Question) -> Result<Value, Vec<String>> {
    match answer_text(&sheet.to_string(), Some(question)) {
        Ok(text) => {
            let whole: Value = serde_json::from_str(&text).expect("JSON");
            Ok(whole["answers"][question.name()].clone())
        }
        Err(faults) => Err(faults
            .into_iter()
            .map(|fault| {
                assert!(fault.message.ends_with('.'), "{}", fault.message);
                fault.code.to_owned()
            })
            .collect()),
    }
}

fn levels(sheet: &Value) -> Value {
    asked(sheet, Question::Levels).expect("levels")
}

fn number(value: &Value) -> f64 {
    value
        .as_f64()
        .unwrap_or_else(|| panic!("{value} is no number"))
}

fn level<'a>(answer: &'a Value, label: &str) -> &'a Value {
    let rows = answer["levels"].as_array().expect("levels");
    let found = rows.iter().find(|row| row["label"] == label);
    found.unwrap_or_else(|| panic!("no level {label}"))
}

fn near(value: f64, wanted: f64, within: f64, what: &str) {
    assert!(
        (value - wanted).abs() <= within,
        "{what}: {value} is not {wanted}"
    );
}

/// E(³P, ¹D, ¹S) of p² and E(⁴S, ²D, ²P) of p³ in F²: Condon & Shortley, *The Theory of Atomic Spectra*
/// (1935), ch. VII (there in F₂ = F²/25); ζ of p: E(²P₃⸝₂) = ζ/2, E(²P₁⸝₂) = −ζ, ch. V.
#[test]
fn closed_forms_come_out() {
    let of = |configuration: &str, given: Value| {
        levels(&sheet(
            "*",
            &[configuration],
            json!({"structure": {"given": given}}),
        ))
    };
    let p2 = of("3p2", json!({"F2(3p,3p)": "25000 cm-1"}));
    for (label, energy) in [
        ("3p2 3P1", -3000.0),
        ("3p2 1D2", 3000.0),
        ("3p2 1S0", 12000.0),
    ] {
        near(number(&level(&p2, label)["energy"]), energy, 1e-6, label);
    }
    let p3 = of(
        "3p3",
        json!({"F2(3p,3p)": "25000 cm-1", "E(3p3)": "100 cm-1"}),
    );
    let quartet = number(&level(&p3, "3p3 4S3/2")["energy"]);
    let d = number(&level(&p3, "3p3 2D5/2")["energy"]);
    let p = number(&level(&p3, "3p3 2P3/2")["energy"]);
    // E(²D) − E(⁴S) = 9 F₂, E(²P) − E(⁴S) = 15 F₂.
    near(d - quartet, 9.0 * 1000.0, 1e-6, "2D above 4S");
    near(p - quartet, 15.0 * 1000.0, 1e-6, "2P above 4S");
    near(
        (4.0 * quartet + 10.0 * d + 6.0 * p) / 20.0,
        100.0,
        1e-6,
        "mean of p3",
    );
    let one = of("3p", json!({"zeta(3p)": "10 cm-1"}));
    near(number(&level(&one, "3p 2P3/2")["energy"]), 5.0, 1e-9, "3/2");
    near(
        number(&level(&one, "3p 2P1/2")["energy"]),
        -10.0,
        1e-9,
        "1/2",
    );
    assert_eq!(level(&one, "3p 2P1/2")["energy_kind"], "entered");
}

/// The labels of both answers are one set, and unique.
#[test]
fn levels_are_named_as_the_states_are() {
    for (species, configurations) in [
        ("Fe", vec!["3d6 4s2", "3d7 4s", "3d6 4s 4p"]),
        ("Nd 3+", vec!["4f3"]),
        ("Eu 3+", vec!["4f6"]),
        ("Ne", vec!["2p6", "2p5 3s", "2p5 3p", "2p5 3d"]),
        ("C", vec!["2p2", "2s 2p3"]),
        ("Ce", vec!["4f 5d 6s2"]),
    ] {
        let sheet = sheet(species, &configurations, json!({}));
        let named = |answer: &Value| -> BTreeSet<String> {
            let rows = answer["levels"].as_array().expect("levels");
            let names = rows
                .iter()
                .map(|row| row["label"].as_str().unwrap().to_owned());
            let set: BTreeSet<String> = names.collect();
            assert_eq!(set.len(), rows.len(), "{species}: names are not unique");
            set
        };
        let found = named(&levels(&sheet));
        let states = asked(&sheet, Question::States).expect("states");
        let every = states["by_configuration"]
            .as_array()
            .expect("configurations");
        // A lone configuration is not told twice.
        let alone = configurations.len() == 1;
        assert_eq!(every.len(), if alone { 0 } else { configurations.len() });
        let listed: BTreeSet<String> = match alone {
            true => named(&states),
            false => every.iter().flat_map(named).collect(),
        };
        assert_eq!(found, listed, "{species}");
    }
}

#[test]
fn shares_and_kinds_are_told() {
    let iron = levels(&sheet("Fe", &["3d6 4s2"], json!({})));
    assert_eq!(iron["ground"]["label"], "3d6 4s2 5D4");
    assert_eq!(iron["ground"]["observed"]["agrees"], true);
    assert_eq!(iron["ground"]["hund"]["agrees"], true);
    assert_eq!(iron["kinds"]["levels.energy"], "computed");
    for row in iron["levels"].as_array().unwrap() {
        let sum: f64 = row["composition"]
            .as_array()
            .unwrap()
            .iter()
            .map(|share| number(&share["percent"]))
            .sum();
        assert!(sum > 99.0 && sum < 100.000001, "{}: {sum}", row["label"]);
        assert_eq!(row["g"].is_null(), row["J"] == "0", "{}", row["label"]);
        assert_eq!(row["parity"], "even");
    }
    let schemes = iron["schemes"].as_array().unwrap();
    assert_eq!(schemes.iter().filter(|s| s["best"] == true).count(), 1);
    // Second-order spin–orbit bends Landé’s rule: the measured intervals of this term (415.9, 288.1, 184.1,
    // 89.9 cm⁻¹, from memory) depart from it by up to 14 %, the computed ones by less.
    let quintet: Vec<&Value> = iron["intervals"]
        .as_array()
        .unwrap()
        .iter()
        .filter(|row| row["term"] == "5D")
        .collect();
    assert_eq!(quintet.len(), 4);
    for row in quintet {
        let ratio = number(&row["ratio"]) / number(&row["expected_ratio"]);
        near(ratio, 1.0, 0.14, "interval");
    }
}

#[test]
fn given_values_replace_computed_ones_and_are_never_scaled() {
    let of = |structure: Value| levels(&sheet("C", &["2p2"], json!({"structure": structure})));
    let parameter = |answer: &Value, name: &str| -> Value {
        let rows = answer["parameters"].as_array().unwrap();
        rows.iter()
            .find(|row| row["name"] == name)
            .cloned()
            .unwrap_or_default()
    };
    let plain = of(json!({}));
    let f2 = parameter(&plain, "F2(2p,2p)");
    assert_eq!(f2["kind"], "computed");
    assert_eq!(f2["unit"], "cm-1");
    let scaled = of(json!({"scale": {"F": 0.8}, "given": {"zeta(2p)": "30 cm-1"}}));
    let less = parameter(&scaled, "F2(2p,2p)");
    near(
        number(&less["value"]),
        0.8 * number(&f2["value"]),
        1e-9,
        "F2",
    );
    assert_eq!(less["scale"], 0.8);
    near(
        number(&less["computed"]),
        number(&f2["value"]),
        1e-9,
        "F2 computed",
    );
    let zeta = parameter(&scaled, "zeta(2p)");
    assert_eq!(
        (&zeta["value"], &zeta["kind"]),
        (&json!(30.0), &json!("entered"))
    );
    let spelled = of(json!({"scale": {"F": 0.8}, "given": {"F²(2p, 2p)": "50000 cm-1"}}));
    let given = parameter(&spelled, "F²(2p, 2p)");
    assert_eq!(given["value"], 50000.0);
    assert!(given["computed"].is_number());
    // A qualified name wins.
    let qualified = levels(&sheet(
        "*",
        &["3p2", "3p 4p"],
        json!({"structure": {"given": {"zeta(3p)": "10 cm-1", "zeta(3p) @ 3p2": "20 cm-1"}}}),
    ));
    let values: Vec<(String, f64)> = qualified["parameters"]
        .as_array()
        .unwrap()
        .iter()
        .filter(|row| row["kind"] == "entered")
        .map(|row| {
            (
                row["configuration"].as_str().unwrap().to_owned(),
                number(&row["value"]),
            )
        })
        .collect();
    assert_eq!(
        values,
        [("3p2".to_owned(), 20.0), ("3p 4p".to_owned(), 10.0)]
    );
}

/// Levels of C I from published tables, from memory.
#[test]
fn pins_place_levels_and_say_so() {
    let carbon = levels(&sheet(
        "C",
        &["2p2"],
        json!({"measured": {"2p2 3P1": "16.40 cm-1", "2p2 1D2": "10192.63 cm-1"}}),
    ));
    let of = |label: &str| {
        let row = level(&carbon, label);
        (number(&row["energy"]), row["energy_kind"].as_str().unwrap())
    };
    assert_eq!(of("2p2 3P1"), (16.40, "measured"));
    assert_eq!(of("2p2 1D2"), (10192.63, "measured"));
    // Nobody pinned the lowest level: pins count from it.
    assert_eq!(of("2p2 3P0"), (0.0, "measured"));
    let (energy, kind) = of("2p2 3P2");
    assert_eq!(kind, "computed");
    let apart = |a: &str, b: &str| {
        number(&level(&carbon, a)["computed_energy"])
            - number(&level(&carbon, b)["computed_energy"])
    };
    near(
        energy,
        16.40 + apart("2p2 3P2", "2p2 3P1"),
        1e-9,
        "beside its neighbour",
    );
    assert_eq!(carbon["kinds"]["levels.energy"], "measured");
}

/// Levels of Na I from published tables, from memory; the limit 41449.45 cm⁻¹.
#[test]
fn a_series_leads_to_its_limit() {
    let sodium = levels(&sheet(
        "Na",
        &["3s", "4s", "5s", "6s", "7s"],
        json!({"measured": {
            "3s 2S1/2": "0 cm-1", "4s 2S1/2": "25739.999 cm-1", "5s 2S1/2": "33200.673 cm-1",
            "6s 2S1/2": "36372.618 cm-1", "7s 2S1/2": "38012.042 cm-1"
        }}),
    ));
    let series = &sodium["series"][0];
    assert_eq!(series["name"], "ns");
    near(number(&series["limit"]), 41449.45, 5.0, "limit");
    assert_eq!(series["limit_kind"], "measured");
    let members = series["members"].as_array().unwrap();
    assert_eq!(members.len(), 10);
    near(number(&members[3]["defect"]), 1.35, 0.01, "defect of 6s");
    assert_eq!(members[5]["kind"], "extrapolated");
    // 8s at 38968.5 cm⁻¹, from memory.
    near(number(&members[5]["energy"]), 38968.5, 2.0, "8s");
}

#[test]
fn populations_add_up_to_one() {
    let carbon = levels(&sheet(
        "C",
        &["2p2"],
        json!({"source": {"temperature": "6000 K"}}),
    ));
    let rows = carbon["levels"].as_array().unwrap();
    let sum: f64 = rows.iter().map(|row| number(&row["population"])).sum();
    near(sum, 1.0, 1e-12, "all");
    assert_eq!(carbon["partition"]["temperature"], 6000.0);
    assert!(number(&carbon["partition"]["value"]) > 8.0);
}

/// Dirac's levels with the proton's mass: 2p₃⸝₂ − 2p₁⸝₂ is 0.3652 cm⁻¹ (Bethe & Salpeter 1957, from memory).
#[test]
fn one_electron_has_dirac_s_levels() {
    let hydrogen = levels(&sheet("H", &["n=2", "n=3"], json!({})));
    assert_eq!(hydrogen["levels"].as_array().unwrap().len(), 8);
    let apart = number(&level(&hydrogen, "2p 2P3/2")["energy"])
        - number(&level(&hydrogen, "2p 2P1/2")["energy"]);
    near(apart, 0.3652, 2e-4, "fine structure");
    let above = number(&level(&hydrogen, "3d 2D5/2")["above_lowest"]);
    near(above, 15233.4, 0.1, "n = 3");
}

#[test]
fn what_cannot_be_answered_is_told() {
    let codes = |sheet: &Value| asked(sheet, Question::Levels).expect_err("a fault");
    assert_eq!(
        codes(&sheet(
            "*",
            &["3p2", "3p3"],
            json!({"structure": {"given": {"F2(3p,3p)": "1 cm-1"}}})
        )),
        ["electron-numbers-differ"]
    );
    assert_eq!(
        codes(&sheet("*", &["2p6"], json!({}))),
        ["needs-an-open-shell"]
    );
    assert_eq!(
        codes(&sheet("*", &["3p2"], json!({}))),
        ["needs-parameters"]
    );
    assert_eq!(
        codes(&sheet("Og", &["[Rn] 5f14 6d10 7s2 7p5 8s"], json!({}))),
        ["needs-a-lighter-nucleus"]
    );
    assert_eq!(
        codes(&sheet("C", &["n=2"], json!({}))),
        ["needs-a-configuration"]
    );
    assert_eq!(codes(&sheet("*", &[], json!({}))), ["needs-an-atom"]);
    let large = sheet(
        "*",
        &["4f7 5d5 6p3"],
        json!({"structure": {"given": {"zeta(4f)": "1 cm-1"}}}),
    );
    assert_eq!(codes(&large), ["basis-too-large"]);
    let document = Document::read(&serde_json::from_value(large).unwrap());
    assert!(document.faults.is_empty());
}

/// n_ion n_e/n_atom = 2.4146·10²¹ m⁻³ (T/K)^(3/2) (2 Z_ion/Z_atom) e^(−χ/kT), the constant standard, from memory;
/// χ of hydrogen 109678.77 cm⁻¹, k/hc 0.695035 cm⁻¹/K.
#[test]
fn the_next_ion_is_in_balance() {
    let light = json!({"source": {"temperature": "10000 K", "electron_density": "1e20 m-3"}});
    let hydrogen = levels(&sheet("H", &["1s"], light.clone()));
    let balance = &hydrogen["ionisation"];
    // Without the Lamb shift of 1s, 0.27 cm⁻¹ (from memory).
    near(number(&balance["limit"]), 109_678.77 + 0.27, 0.01, "limit");
    // e^(−109678.77/6950.35) = 1.401821e-07.
    let expected = 2.4146e21 * 1e6 * 1.401821e-07 / 1e20;
    near(number(&balance["ratio"]) / expected, 1.0, 0.01, "ratio");
    near(number(&balance["lowering"]), 24.0, 5.0, "lowering");
    // 41449.45 cm⁻¹ from tables, from memory; a frozen core binds the electron some per cent less.
    let sodium = levels(&sheet("Na", &["3s", "3p"], light));
    let balance = &sodium["ionisation"];
    near(
        number(&balance["limit"]) / 41_449.45,
        0.96,
        0.02,
        "limit of Na",
    );
    assert_eq!(balance["limit_kind"], "computed");
    assert_eq!(balance["higher_partition"], 1.0);
    assert!(levels(&sheet("Na", &["3s"], json!({})))["ionisation"].is_null());
}

#[test]
fn full_shells_have_their_one_level() {
    for (species, configuration, label) in [
        ("Ne", "2p6", "2p6 1S0"),
        ("He", "1s2", "1s2 1S0"),
        ("Zn", "4s2", "4s2 1S0"),
    ] {
        let alone = levels(&sheet(species, &[configuration], json!({})));
        let rows = alone["levels"].as_array().unwrap();
        assert_eq!(rows.len(), 1, "{species}");
        assert_eq!(rows[0]["label"], label);
        assert_eq!(rows[0]["J"], "0");
        // Counted from the average of the first configuration, which has no other level.
        assert_eq!(number(&rows[0]["energy"]), 0.0);
        assert!(rows[0]["g"].is_null());
        assert_eq!(rows[0]["composition"][0]["percent"], 100.0);
        let said = alone["say_plain"].as_str().unwrap();
        assert!(said.contains("1 level here; the lowest is"), "{said}");
        assert!(
            said.contains("full shells have this one level alone, and there is no line"),
            "{said}"
        );
    }
    // Beside another configuration it stands where it stood.
    let both = levels(&sheet("Ne", &["2p6", "2p5 3s"], json!({})));
    assert_eq!(both["levels"].as_array().unwrap().len(), 5);
    assert!(!both["say_plain"].as_str().unwrap().contains("one level"));
    let given = levels(&sheet(
        "*",
        &["2p6"],
        json!({"structure": {"given": {"E(2p6)": "12 cm-1"}}}),
    ));
    assert_eq!(number(&given["levels"][0]["energy"]), 12.0);
}

#[test]
fn what_is_given_without_effect_is_named() {
    let limits = |species: &str, configurations: &[&str], structure: Value| {
        let sheet = sheet(species, configurations, json!({"structure": structure}));
        let both = [Question::Levels, Question::Lines];
        both.map(|question| asked(&sheet, question).expect("an answer")["limits"].to_string())
            .concat()
    };
    let given =
        json!({"given": {"F2(3p,3p)": "1 cm-1", "alpha(3p)": "2 cm-1", "zeta(3p)": "11 cm-1"}});
    let said = limits("Na", &["3s", "3p"], given);
    let sentence = "none of these configurations has such a parameter: F2(3p,3p), alpha(3p).";
    assert_eq!(said.matches(sentence).count(), 2, "{said}");
    let given = json!({"given": {"zeta(3p)": "11 cm-1"}});
    assert!(!limits("Na", &["3s", "3p"], given).contains("without effect"));
    let closed = json!({"given": {"zeta(2p)": "1 cm-1"}, "scale": {"F": 0.8}, "relativity": false});
    let said = limits("H", &["1s", "2p"], closed);
    let sentence = "use nothing of this: zeta(2p), the scales, “without relativity”.";
    assert_eq!(said.matches(sentence).count(), 2, "{said}");
    assert!(!limits("H", &["1s", "2p"], json!({})).contains("use nothing of this"));
    // With given values alone they count.
    let entered = json!({"energies": "given", "given": {"zeta(2p)": "2 cm-1"}});
    let hydrogen = levels(&sheet("H", &["2p"], json!({"structure": entered})));
    near(
        number(&hydrogen["levels"][1]["above_lowest"]),
        3.0,
        1e-12,
        "3/2 ζ",
    );
}

/// ³P₀ to ¹D₂ of Si I 3p²: 6298.85 cm⁻¹ by published tables, from memory.
#[test]
fn correlation_brings_terms_together() {
    let above = |correlation: bool| {
        let silicon = levels(&sheet(
            "Si",
            &["3p2"],
            json!({"structure": {"correlation": correlation}}),
        ));
        let limits = silicon["limits"].to_string();
        assert_eq!(limits.contains("in second order"), correlation, "{limits}");
        let rows = silicon["parameters"].as_array().unwrap();
        let alpha = rows.iter().find(|row| row["name"] == "alpha(3p)");
        assert_eq!(alpha.is_some(), correlation);
        number(&level(&silicon, "3p2 1D2")["above_lowest"])
    };
    near(above(true) / 6298.85, 1.0, 0.05, "with correlation");
    assert!(above(false) > 1.2 * 6298.85);
}

#[test]
fn correlation_is_in_where_it_is_sound_and_the_answer_says_where_not() {
    let of = |configurations: &[&str], structure: Value| {
        let found = levels(&sheet(
            "Ti",
            configurations,
            json!({"structure": structure}),
        ));
        let rows = found["parameters"].as_array().unwrap().clone();
        let change = move |name: &str| rows.iter().find(|row| row["name"] == name).cloned();
        (
            found["correlation"].clone(),
            found["limits"].to_string(),
            change,
        )
    };
    let (told, limits, row) = of(&["3d2 4s2"], json!({}));
    assert_eq!(told["on"], true);
    assert_eq!(told["left_out"], json!([]));
    assert!(
        told["way"].is_null() && limits.contains("3d of 3d2 4s2"),
        "{limits}"
    );
    // F² stays that of the radial functions; what is added is a row of its own, which cannot be given.
    let (_, _, bare) = of(&["3d2 4s2"], json!({"correlation": false}));
    assert_eq!(row("F2(3d,3d)"), bare("F2(3d,3d)"));
    let added = row("ΔF2(3d,3d)").unwrap();
    assert!(number(&added["value"]) < -10_000.0 && added["kind"] == "computed");
    assert_eq!(added["can_be_given"], false);
    assert!(bare("ΔF2(3d,3d)").is_none() && bare("alpha(3d)").is_none());
    // A scale of F stands for the same; a word of the sheet wins.
    let (told, limits, row) = of(&["3d2 4s2"], json!({"scale": {"F": 0.85}}));
    assert_eq!(told["on"], false);
    assert!(limits.contains("count twice") && row("alpha(3d)").is_none());
    let (told, ..) = of(
        &["3d2 4s2"],
        json!({"scale": {"F": 0.85}, "correlation": true}),
    );
    assert_eq!(told["on"], true);
    // So does a given F.
    let (told, limits, row) = of(&["3d2 4s2"], json!({"given": {"F2(3d,3d)": "60000 cm-1"}}));
    assert_eq!(
        (told["on"] == true, row("ΔF4(3d,3d)").is_some()),
        (false, false),
        "{limits}"
    );
    assert_eq!(row("F2(3d,3d)").unwrap()["value"], 60_000.0);
    // What mixes in describes part of it.
    let (told, limits, _) = of(&["3d2 4s2", "3d3 4s", "3d4"], json!({}));
    assert_eq!(told["subshells"][0]["configurations"], json!(["3d3 4s"]));
    let left: Vec<&Value> = told["left_out"]
        .as_array()
        .unwrap()
        .iter()
        .map(|row| &row["configuration"])
        .collect();
    assert_eq!(left, ["3d2 4s2", "3d4"]);
    assert!(
        limits.contains("differs by two electrons of 3d"),
        "{limits}"
    );
    let (told, limits, _) = of(&["3d2 4s2", "3d4"], json!({"correlation": true}));
    assert_eq!(told["left_out"], json!([]));
    assert!(limits.contains("counts twice"), "{limits}");
    let (told, ..) = of(&["3d2 4s2", "3d4"], json!({"mixing": false}));
    assert_eq!(told["left_out"], json!([]));
}

#[test]
fn what_is_kept_costs_nothing_again() {
    let estimate = |sheet: &Value, question: &str| -> (f64, f64) {
        let text = rungline_core::sheet::estimate_message(
            &serde_json::from_value(sheet.clone()).unwrap(),
            question,
        );
        let found: Value = serde_json::from_str(&text).unwrap();
        (number(&found["seconds"]), number(&found["megabytes"]))
    };
    let chromium = sheet("Cr", &["3d5 4s", "3d5 4p"], json!({}));
    let (cold, megabytes) = estimate(&chromium, "levels");
    assert!(cold > 0.05 && megabytes > 5.0, "{cold} s, {megabytes} MB");
    let lines = estimate(&chromium, "lines").0;
    levels(&chromium);
    assert!(estimate(&chromium, "levels").0 < 0.5 * cold);
    // Another temperature or window asks for rows alone.
    let mut warm = chromium;
    warm["source"] = json!({"temperature": "4000 K"});
    warm["window"] = json!(["400 nm", "500 nm"]);
    assert!(estimate(&warm, "lines").0 < 0.8 * lines);
}

#[test]
fn only_what_was_measured_is_observed() {
    // The table of ground levels marks Po III as semi-empirical and Fe I as measured.
    let say = |species: &str, configurations: &[&str]| {
        let found = levels(&sheet(species, configurations, json!({})));
        let kind = found["kinds"]["ground.observed"].clone();
        (found["say_plain"].as_str().unwrap().to_owned(), kind)
    };
    let (polonium, kind) = say("Po III", &[]);
    assert!(
        polonium.contains(", as tabulated (semi-empirical) and by Hund’s rules"),
        "{polonium}"
    );
    assert_eq!(kind, "computed");
    let (carbon, kind) = say("C I", &[]);
    assert!(
        carbon.contains(", as observed and by Hund’s rules"),
        "{carbon}"
    );
    assert_eq!(kind, "measured");
}

#[test]
fn levels_at_one_energy_are_named_together() {
    // Dirac's 2s½ and 2p½ agree.
    let found = levels(&sheet("H I", &["2s", "2p"], json!({})));
    let say = found["say_plain"].as_str().unwrap();
    assert!(
        say.contains(", with another at the same energy; the highest lies 0.37 cm-1"),
        "{say}"
    );
    let given = json!({"structure": {"given": {"E(3p)": "0 cm-1"}}});
    let found = levels(&sheet("*", &["3p"], given));
    let say = found["say_plain"].as_str().unwrap();
    assert!(say.ends_with(", with another at the same energy."), "{say}");
}

#[test]
fn full_shells_have_a_name_in_every_coupling() {
    let found = levels(&sheet("Ne I", &["2p6"], json!({})));
    let share = &found["levels"][0]["composition_jj"][0];
    assert_eq!(share["name"], "full shells");
}
