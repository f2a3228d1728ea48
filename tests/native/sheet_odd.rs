//! Sheets that nobody should write: whatever stands in them, levels and lines are answered or refused with
//! a sentence, and no number of an answer is missing its value.

use rungline_core::sheet::{Question, answer_text};
use serde_json::{Value, json};

const QUESTIONS: [Question; 3] = [Question::Levels, Question::Lines, Question::Splitting];

fn ask(sheet: &Value) -> Vec<String> {
    let mut codes = Vec::new();
    for question in QUESTIONS {
        match answer_text(&sheet.to_string(), Some(question)) {
            Ok(text) => {
                assert!(!text.contains("NaN") && !text.contains("inf,"), "{sheet}");
                let whole: Value = serde_json::from_str(&text).expect("JSON");
                let answer = &whole["answers"][question.name()];
                assert!(
                    answer["say_plain"].as_str().unwrap().ends_with('.'),
                    "{sheet}"
                );
                for row in answer["levels"].as_array().into_iter().flatten() {
                    if question == Question::Levels {
                        assert!(row["energy"].is_number(), "{sheet}: {row}");
                    }
                }
            }
            Err(faults) => {
                for fault in faults {
                    assert!(fault.message.ends_with('.'), "{sheet}: {}", fault.message);
                    codes.push(fault.code.to_owned());
                }
            }
        }
    }
    codes
}

#[test]
fn odd_sheets_are_answered_or_refused() {
    let base = |species: &str, configurations: &[&str], structure: Value| {
        json!({"rungline": 1, "species": species, "configurations": configurations, "structure": structure,
            "field": {"flux_density": "1 T"}})
    };
    let with = |mut sheet: Value, extra: Value| {
        for (key, value) in extra.as_object().expect("a group") {
            sheet[key] = value.clone();
        }
        sheet
    };
    let sheets = [
        base(
            "*",
            &["3d2"],
            json!({"given": {"F2(3d,3d)": "1e10 cm-1", "zeta(3d)": "-1e10 cm-1"}}),
        ),
        base("*", &["3d2"], json!({"given": {"F2(3d,3d)": "0 cm-1"}})),
        base(
            "*",
            &["3p2", "3p 4p"],
            json!({"given": {"R2(3p,3p;3p,4p)": "1e10 cm-1", "r2(3p,4p)": "1e9 a0^2"}}),
        ),
        base(
            "*",
            &["3p", "3d"],
            json!({"given": {"E(3d)": "-1e10 cm-1", "r(3p,3d)": "1e6 a0"}}),
        ),
        base(
            "*",
            &["3p", "n=4"],
            json!({"given": {"zeta(3p)": "1 cm-1"}}),
        ),
        base("*", &["1s", "2s"], json!({"given": {"E(2s)": "5 cm-1"}})),
        base("*", &["6h2"], json!({"given": {"F2(6h,6h)": "100 cm-1"}})),
        base("*", &["6h3"], json!({"given": {"F2(6h,6h)": "100 cm-1"}})),
        base("C", &["2p2"], json!({"scale": {"F": 0, "zeta": 10}})),
        base(
            "C",
            &["2p2"],
            json!({"mixing": false, "relativity": false, "correlation": true}),
        ),
        base("C", &["2p2", "2s 2p3", "2p4"], json!({"correlation": true})),
        base(
            "Na",
            &["3s", "3p"],
            json!({"polarisation": {"alpha": "1e6 a0^3", "radius": "1e-3 a0"}}),
        ),
        base("He", &["1s2", "1s 50s"], json!({})),
        base("H", &["n=1"], json!({})),
        base("H", &["n=50"], json!({"given": {}})),
        base("U 91+", &["1s", "2p"], json!({})),
        base("H-", &["1s2", "1s 2p"], json!({})),
        base("He-", &["1s 2s 2p"], json!({})),
        base("Og", &["7p6", "7p5 8s"], json!({})),
        base(
            "Og",
            &["7p6", "7p5 8s"],
            json!({"energies": "given", "given": {"zeta(7p)": "1 cm-1"}}),
        ),
        base("Fe", &[], json!({})),
        base("H+", &[], json!({})),
        with(
            base("C", &["2p2"], json!({})),
            json!({"measured": {"2p2 1S0": "-5 cm-1", "2p2 3P0": "5 cm-1",
            "2p2 3P1": "5 cm-1", "2p2 3P2": "5 cm-1", "2p2 1D2": "5 cm-1"}}),
        ),
        with(
            base("C", &["2p2", "2p 3s"], json!({})),
            json!({"source": {"temperature": "1e-9 K", "electron_density": "1e40 m-3",
            "column": "1e30 m-2"}, "window": ["0.001 nm", "1e9 nm"], "air": {"pressure": "0 Pa"}, "medium": "air"}),
        ),
        with(
            base("C", &["2p2", "2p 3s"], json!({})),
            json!({"source": {"temperature": "1e9 K", "column": "0 m-2"},
            "refractive_index": "10"}),
        ),
        with(
            base("300Na", &["3s", "3p"], json!({})),
            json!({"source": {"temperature": "300 K", "column": "1 m-2"}}),
        ),
        with(
            base("Na", &["3s", "3p"], json!({})),
            json!({"line": {"upper": "3p 2P3/2", "lower": "3p 2P1/2"}}),
        ),
    ];
    for sheet in sheets {
        for code in ask(&sheet) {
            assert_ne!(code, "lines-not-found", "{sheet}");
        }
    }
}

#[test]
fn air_that_is_not_known_is_a_fault_in_its_place() {
    let faults = |air: Value| -> Vec<(String, String)> {
        let sheet = json!({"rungline": 1, "species": "Na", "air": air});
        let found = answer_text(&sheet.to_string(), Some(Question::Lines)).expect_err("a fault");
        found
            .into_iter()
            .map(|fault| {
                assert!(fault.bound.is_some_and(|bound| bound.ends_with('.')));
                (fault.code.to_owned(), fault.path)
            })
            .collect()
    };
    for (air, code, path) in [
        (
            json!({"temperature": "3000 K"}),
            "air-temperature-out-of-range",
            "/air/temperature",
        ),
        (
            json!({"pressure": "5 bar"}),
            "air-pressure-out-of-range",
            "/air/pressure",
        ),
        (
            json!({"co2": "50 %"}),
            "air-carbon-dioxide-out-of-range",
            "/air/co2",
        ),
    ] {
        assert_eq!(faults(air), [(code.to_owned(), path.to_owned())]);
    }
}
