//! Outside energies and strengths through the whole sheet: names of parameters, averages, radial integrals,
//! labels and rows.
//!
//! Source: `slater_condon_checks.json` and `transition_checks.json`, diagonalised in determinants (own work).

use rungline_core::sheet::{Question, answer_text};
use rungline_tests::{Row, report};
use serde_json::{Map, Value, json};

fn vectors(file: &str) -> Value {
    let path = rungline_tests::folder().join("vectors").join(file);
    serde_json::from_str(&std::fs::read_to_string(path).expect("vectors")).expect("JSON")
}

fn ask(sheet: &Value, question: Question) -> Value {
    let text = answer_text(&sheet.to_string(), Some(question)).expect("an answer");
    let whole: Value = serde_json::from_str(&text).expect("JSON");
    whole["answers"][question.name()].clone()
}

/// (label, ℓ, electrons), given as an object or a list.
fn shells(of: &Value) -> Vec<(String, u64, u64)> {
    let part = |shell: &Value, key: &str, place: usize| match shell {
        Value::Array(all) => all[place].clone(),
        other => other[key].clone(),
    };
    let list = of.as_array().expect("shells").iter();
    list.map(|shell| {
        (
            part(shell, "label", 0)
                .as_str()
                .expect("a label")
                .to_owned(),
            part(shell, "l", 1).as_u64().expect("l"),
            part(shell, "occ", 2).as_u64().expect("occupation"),
        )
    })
    .collect()
}

/// An orbital for each label: the first n that is free.
fn orbitals(shells: &[(String, u64, u64)]) -> Vec<(String, (u64, u64))> {
    let mut found: Vec<(String, (u64, u64))> = Vec::new();
    for (label, l, _) in shells {
        if found.iter().any(|(known, _)| known == label) {
            continue;
        }
        let free = |n: &u64| found.iter().all(|(_, taken)| *taken != (*n, *l));
        let n = (l + 1..).find(free).expect("an n");
        found.push((label.clone(), (n, *l)));
    }
    found
}

fn written((n, l): (u64, u64)) -> String {
    format!("{n}{}", ["s", "p", "d", "f", "g"][l as usize])
}

fn configuration(shells: &[(String, u64, u64)], orbitals: &[(String, (u64, u64))]) -> String {
    let mut parts: Vec<((u64, u64), u64)> = shells
        .iter()
        .filter(|(_, _, electrons)| *electrons > 0)
        .map(|(label, _, electrons)| {
            let orbital = orbitals.iter().find(|(known, _)| known == label);
            (orbital.expect("an orbital").1, *electrons)
        })
        .collect();
    parts.sort_unstable();
    let texts = parts.iter().map(|(orbital, electrons)| match electrons {
        1 => written(*orbital),
        many => format!("{}{many}", written(*orbital)),
    });
    texts.collect::<Vec<_>>().join(" ")
}

/// The parameters with the sheet's names, each with this behind it.
fn given(of: &Value, orbitals: &[(String, (u64, u64))], behind: &str) -> Map<String, Value> {
    let named = of
        .as_object()
        .expect("parameters")
        .iter()
        .map(|(name, value)| {
            let (kind, inside) = name
                .trim_end_matches(')')
                .split_once('(')
                .expect("brackets");
            let inside: Vec<String> = inside
                .split(',')
                .map(|label| {
                    let orbital = orbitals.iter().find(|(known, _)| known == label.trim());
                    written(orbital.expect("an orbital").1)
                })
                .collect();
            let name = format!("{kind}({}){behind}", inside.join(","));
            (name, json!(format!("{value} cm-1")))
        });
    named.collect()
}

fn sheet(configurations: &[&str], given: Map<String, Value>) -> Value {
    json!({"rungline": 1, "species": "*", "configurations": configurations, "structure": {"given": given}})
}

#[test]
fn energies_come_through_the_sheet() {
    let all = vectors("slater_condon_checks.json");
    let mut worst = 0.0_f64;
    let cases = all["cases"].as_array().expect("cases");
    for case in cases {
        let shells = shells(&case["shells"]);
        let orbitals = orbitals(&shells);
        let text = configuration(&shells, &orbitals);
        let mut given = given(&case["params"], &orbitals, "");
        let average = &case["average_energy_with_F0_zero"];
        given.insert(format!("E({text})"), json!(format!("{average} cm-1")));
        let answer = ask(&sheet(&[&text], given), Question::Levels);
        let mut found: Vec<f64> = answer["levels"]
            .as_array()
            .expect("levels")
            .iter()
            .map(|level| level["energy"].as_f64().expect("an energy"))
            .collect();
        found.sort_by(f64::total_cmp);
        let expected = case["levels"].as_array().expect("levels");
        assert_eq!(found.len(), expected.len(), "{}", case["name"]);
        let scale = found.iter().fold(0.0_f64, |most, e| most.max(e.abs()));
        for (energy, level) in found.iter().zip(expected) {
            let wanted = level["E"].as_f64().expect("an energy");
            worst = worst.max((energy - wanted).abs() / scale);
        }
    }
    report(
        "sheet-energies",
        Row {
            quantity: "level energies from given parameters, through the sheet".into(),
            cases: cases.len(),
            worst,
            tolerance: 1e-9,
            measure: "relative".into(),
            source: "configurations diagonalised in determinants (own work)".into(),
        },
    );
}

#[test]
fn electric_dipole_strengths_come_through_the_sheet() {
    let all = vectors("transition_checks.json");
    let (mut worst, mut lines) = (0.0_f64, 0);
    for case in all["E1"].as_array().expect("cases") {
        let sides = ["config1", "config2"].map(|side| shells(&case[side]["shells"]));
        let orbitals = orbitals(&sides.concat());
        let texts = [0, 1].map(|side| configuration(&sides[side], &orbitals));
        let mut all_given = Map::new();
        for (side, key) in ["config1", "config2"].iter().enumerate() {
            let behind = format!(" @ {}", texts[side]);
            all_given.extend(given(&case[*key]["params"], &orbitals, &behind));
        }
        let electrons = |side: usize, label: &str| {
            let shell = sides[side].iter().find(|(known, ..)| known == label);
            shell.map_or(0, |(_, _, electrons)| *electrons)
        };
        let changed: Vec<String> = orbitals
            .iter()
            .filter(|(label, _)| electrons(0, label) != electrons(1, label))
            .map(|(_, orbital)| written(*orbital))
            .collect();
        all_given.insert(format!("r({})", changed.join(",")), json!("1 a0"));
        // Far apart, so that the levels of each stand together.
        all_given.insert(format!("E({})", texts[1]), json!("1000000 cm-1"));
        let answer = ask(&sheet(&[&texts[0], &texts[1]], all_given), Question::Lines);
        let labels = |side: usize| -> Vec<&str> {
            let levels = answer["levels"].as_array().expect("levels").iter();
            let own = levels.filter(|level| level["configuration"] == texts[side].as_str());
            own.map(|level| level["label"].as_str().expect("a label"))
                .collect()
        };
        let (lower, upper) = (labels(0), labels(1));
        for line in case["lines"].as_array().expect("lines") {
            let wanted = line["S_angular"].as_f64().expect("S");
            if wanted < 1e-9 {
                continue;
            }
            let place = |key: &str| line[key].as_u64().expect("a place") as usize;
            let (low, up) = (lower[place("level1")], upper[place("level2")]);
            let row = answer["lines"]
                .as_array()
                .expect("lines")
                .iter()
                .find(|row| row["multipole"] == "E1" && row["lower"] == low && row["upper"] == up);
            let s = row.unwrap_or_else(|| panic!("no line {low} - {up}"))["S"].as_f64();
            worst = worst.max((s.expect("S") / wanted - 1.0).abs());
            lines += 1;
        }
    }
    report(
        "sheet-strengths",
        Row {
            quantity: "electric dipole strengths from given parameters, through the sheet".into(),
            cases: lines,
            worst,
            tolerance: 1e-8,
            measure: "relative".into(),
            source: "configurations diagonalised in determinants (own work)".into(),
        },
    );
}
