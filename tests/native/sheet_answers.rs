//! Sheets through the whole core: keys that outside checks read, examples, records.

use rungline_core::sheet::{self, Question};
use serde_json::{Value, json};

fn answer(sheet: Value, question: &str) -> Value {
    let json = serde_json::from_value(sheet).unwrap();
    let message: Value = serde_json::from_str(&sheet::answer_message(&json, question)).unwrap();
    assert!(message.get("faults").is_none(), "{message}");
    message["answer"].clone()
}

fn examples() -> Vec<(String, String)> {
    let mut files: Vec<_> = std::fs::read_dir(rungline_tests::folder().join("examples"))
        .unwrap()
        .map(|entry| entry.unwrap().path())
        .collect();
    files.sort();
    files
        .into_iter()
        .map(|p| (p.display().to_string(), std::fs::read_to_string(p).unwrap()))
        .collect()
}

#[test]
fn iron_has_the_keys_and_numbers_of_its_ground_configuration() {
    // d6: 16 terms, 34 levels, 210 states (electron–hole twin of d4; any textbook). Ground level ⁵D₄:
    // mendeleev 1.3.0 (MIT), as in the table that ships.
    for configurations in [
        json!([]),
        json!(["3d6 4s2"]),
        json!(["[Ar] 3d⁶4s²"]),
        json!(["3d6.4s2"]),
    ] {
        let states = answer(
            json!({"rungline": 1, "species": "iron", "configurations": configurations}),
            "states",
        );
        assert_eq!(states["states"], 210);
        assert_eq!(states["parity"], "even");
        assert_eq!(states["n_terms"], 16);
        assert_eq!(states["n_levels"], 34);
        assert_eq!(states["terms"][0]["term"], "5D");
        assert_eq!(states["terms"][0]["J"], json!(["0", "1", "2", "3", "4"]));
        let by_j = states["levels_by_J"].as_object().unwrap();
        assert_eq!(by_j.values().map(|n| n.as_u64().unwrap()).sum::<u64>(), 34);
        let degeneracy = |j: &String| 2 * j.parse::<u64>().unwrap() + 1;
        assert_eq!(
            by_j.iter()
                .map(|(j, n)| degeneracy(j) * n.as_u64().unwrap())
                .sum::<u64>(),
            210
        );
        assert_eq!(states["levels_by_J"], states["jj_levels_by_J"]);
        let ground = &states["ground"];
        assert_eq!(
            (&ground["term"], &ground["J"], &ground["by"]),
            (&json!("5D"), &json!("4"), &json!("measured"))
        );
        assert_eq!(ground["differs_from_hund"], false);
        let shells = states["shells"].as_array().unwrap();
        assert_eq!(
            shells
                .iter()
                .map(|s| s["letter"].as_str().unwrap())
                .collect::<String>(),
            "KLMN"
        );
        assert_eq!(shells[2]["subshells"][2]["label"], "3d");
        assert_eq!(shells[2]["subshells"][2]["electrons"], 6);
        assert_eq!(shells[2]["subshells"][2]["capacity"], 10);
    }
}

#[test]
fn cerium_is_observed_where_hund_names_another_term() {
    // hund_exceptions.csv: Ce I 4f 5d 6s2, tabulated ¹G*₄, Hund ³H*.
    let states = answer(json!({"rungline": 1, "species": "Ce"}), "states");
    assert_eq!(states["ground"]["term"], "1G");
    assert_eq!(states["ground"]["differs_from_hund"], true);
    assert_eq!(states["ground"]["hund"]["term"], "3H");
}

#[test]
fn counts_beyond_doubles_are_text() {
    let states = answer(
        json!({"rungline": 1, "species": "*", "configurations": ["4f7 5f7 5d5 6d5 4p3 5p3 6p3 7p3"]}),
        "states",
    );
    assert!(states["states"].is_string(), "{}", states["states"]);
}

#[test]
fn the_sodium_lines_split_into_four_and_six() {
    // Common practice, no source: D1 shows 4 components, D2 shows 6.
    // Any atom has no energies and J stays good, which makes these sums exact; with energies the field mixes
    // J, and light moves from one line to the other.
    for (species, j, components) in [
        ("*", "1/2", 4),
        ("*", "3/2", 6),
        ("Na I", "1/2", 4),
        ("Na I", "3/2", 6),
    ] {
        let splitting = answer(
            json!({"rungline": 1, "species": species, "configurations": ["3s", "3p"],
                   "line": {"upper": format!("3p 2P{j}"), "lower": "3s 2S1/2", "wavelength": "589 nm"},
                   "field": {"flux_density": "0.5 T", "view": "across"}}),
            "splitting",
        );
        let rows = splitting["components"].as_array().unwrap();
        assert_eq!(rows.len(), components);
        let strength: f64 = rows.iter().map(|r| r["strength"].as_f64().unwrap()).sum();
        assert!((strength - 1.0).abs() < 1e-14, "{strength}");
        if species == "Na I" {
            assert_eq!(splitting["method"], "full");
            continue;
        }
        assert_eq!(splitting["method"], "linear");
        for key in ["seen", "along", "across"] {
            let total: f64 = rows.iter().map(|row| row[key].as_f64().unwrap()).sum();
            assert!((total - 1.0).abs() < 1e-14, "{key} adds up to {total}");
        }
        let balance: f64 = rows
            .iter()
            .map(|row| row["offset"].as_f64().unwrap() * row["strength"].as_f64().unwrap())
            .sum();
        assert!(balance.abs() < 1e-14, "the pattern keeps its centre");
    }
}

#[test]
fn pairs_are_allowed_or_refused_and_never_both() {
    let lines = answer(
        json!({"rungline": 1, "species": "C", "configurations": ["2p2", "2p 3s"]}),
        "lines",
    );
    let key = |row: &Value| format!("{} {}", row["upper"], row["lower"]);
    let allowed: std::collections::BTreeSet<String> =
        lines["lines"].as_array().unwrap().iter().map(key).collect();
    let refused: std::collections::BTreeSet<String> = lines["refused"]
        .as_array()
        .unwrap()
        .iter()
        .map(key)
        .collect();
    assert!(allowed.is_disjoint(&refused));
    // 5 levels and 4 levels: 9 · 8 / 2 pairs.
    assert_eq!(allowed.len() + refused.len(), 36);
    for multiplet in lines["multiplets"].as_array().unwrap() {
        assert!(
            (multiplet["sum"].as_f64().unwrap() - 1.0).abs() < 1e-13,
            "{multiplet}"
        );
    }
}

#[test]
fn every_example_is_answered_and_its_record_reproduces() {
    let examples = examples();
    assert!(examples.len() > 10, "a first visit and ten more");
    for (name, text) in examples {
        let line =
            sheet::answer_text(&text, None).unwrap_or_else(|faults| panic!("{name}: {faults:?}"));
        assert!(
            !line.contains("NaN") && !line.contains("null,null,null,null,null,null,null"),
            "{name}"
        );
        let sheet = serde_json::from_str(&text).unwrap();
        let message: Value = serde_json::from_str(&sheet::record_message(&sheet)).unwrap();
        let record = message["record"]
            .as_str()
            .unwrap_or_else(|| panic!("{name}: {message}"));
        assert!(sheet::recheck_text(record).unwrap().reproduces(), "{name}");
        assert!(
            text.contains("Invented scenario"),
            "{name} says that it is invented"
        );
    }
}

#[test]
fn a_record_that_was_tampered_with_names_what_moved() {
    let sheet = serde_json::from_value(json!({"rungline": 1, "species": "Fe"})).unwrap();
    let message: Value = serde_json::from_str(&sheet::record_message(&sheet)).unwrap();
    let record = message["record"]
        .as_str()
        .unwrap()
        .replace("\"n_terms\":16", "\"n_terms\":17");
    let check: Value =
        serde_json::from_str(&sheet::recheck_text(&record).unwrap().to_json()).unwrap();
    assert_eq!(check["reproduces"], false);
    assert!(
        check["moved"]
            .as_array()
            .unwrap()
            .iter()
            .any(|m| m["name"] == "/states/n_terms" && m["was"] == 17 && m["now"] == 16)
    );
}

#[test]
fn questions_keep_their_names() {
    assert_eq!(
        Question::ALL.map(Question::name),
        ["states", "orbitals", "levels", "lines", "splitting"]
    );
}

/// Parts of typeset text, whose numbers are names.
const TYPESET: [&str; 8] = [
    "say",
    "working",
    "rich",
    "species",
    "configuration",
    "name",
    "parent",
    "kept",
];

/// Every number below a key, by its keys without places in lists.
fn numbers(value: &Value, path: &str, found: &mut Vec<String>) {
    match value {
        Value::Number(_) => found.push(path.to_owned()),
        Value::Array(all) => all.iter().for_each(|one| numbers(one, path, found)),
        // A row that says the kind of its numbers itself.
        Value::Object(all) if !all.contains_key("kind") => {
            for (key, one) in all {
                let typeset = TYPESET.contains(&key.as_str()) && !one.is_number();
                let own_kind = all.contains_key(&format!("{key}_kind"));
                if typeset || key.ends_with("_rich") || own_kind {
                    continue;
                }
                // Configurations of several have the columns of one.
                let inner = match key.as_str() {
                    "by_configuration" | "configurations" => path.to_owned(),
                    _ if path.is_empty() => key.clone(),
                    _ => format!("{path}.{key}"),
                };
                numbers(one, &inner, found);
            }
        }
        _ => {}
    }
}

#[test]
fn every_number_of_every_answer_has_a_kind() {
    let mut sheets: Vec<(String, Value)> = examples()
        .into_iter()
        .map(|(name, text)| (name, serde_json::from_str(&text).unwrap()))
        .collect();
    let more = [
        json!({"species": "H I", "configurations": ["1s", "2s", "2p"], "field": {"flux_density": "1 T"}}),
        json!({
            "species": "Na I", "configurations": ["3s", "4s", "5s", "3p", "4p"], "medium": "air",
            "source": {"temperature": "2000 K", "electron_density": "1e20 m-3", "column": "1e15 m-2"},
            "structure": {"polarisation": {"alpha": "0.95 a0^3", "radius": "1.2 a0"}}
        }),
        json!({"species": "23Na", "configurations": ["3s", "3p"], "refractive_index": "1.3"}),
        json!({"species": "*", "configurations": ["3s", "3p"], "line": {"upper": "3p 2P1/2", "lower": "3s 2S1/2"}, "field": {"flux_density": "1 T"}}),
    ];
    for (place, mut sheet) in more.into_iter().enumerate() {
        sheet["rungline"] = json!(1);
        sheets.push((format!("sheet {place}"), sheet));
    }
    let mut missing: Vec<String> = Vec::new();
    let mut count = 0;
    for (name, sheet) in sheets {
        for question in ["states", "orbitals", "levels", "lines", "splitting"] {
            let json = serde_json::from_value(sheet.clone()).unwrap();
            let message = sheet::answer_message(&json, question);
            let message: Value = serde_json::from_str(&message).unwrap();
            let Some(answer) = message.get("answer") else {
                continue;
            };
            let kinds = answer["kinds"].as_object().unwrap();
            let mut found = Vec::new();
            numbers(answer, "", &mut found);
            found.dedup();
            count += found.len();
            for path in found {
                // The kind of a table is that of its columns.
                let mut wanted = path.as_str();
                while !kinds.contains_key(wanted) {
                    match wanted.rsplit_once('.') {
                        Some((outer, _)) => wanted = outer,
                        None => {
                            missing.push(format!("{question} {path} ({name})"));
                            break;
                        }
                    }
                }
            }
        }
    }
    assert!(count > 500, "{count}");
    missing.sort();
    missing.dedup_by_key(|text| text.split(" (").next().unwrap().to_owned());
    assert!(missing.is_empty(), "{missing:#?}");
}
