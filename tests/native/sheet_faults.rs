//! Every fault of an input has its own code, points at its characters, states a bound or a way out,
//! and none hides another.
//!
//! The codes are this project's own; the bounds come from the counting of states (a subshell holds
//! 2(2ℓ+1) electrons, ℓ < n: common practice, no source).

use rungline_core::sheet::{self, Document};
use rungline_tests::sheets::{self, OddTexts, answered_or_faulted};
use serde_json::{Value, json};

fn faults(sheet: &Value) -> Vec<(String, String, String)> {
    let found = sheets::faults(sheet).into_iter();
    found
        .map(|(fault, span)| (fault.code.to_owned(), fault.path.clone(), span))
        .collect()
}

fn of_configuration(text: &str) -> Vec<(String, String)> {
    faults(&json!({"rungline": 1, "species": "*", "configurations": [text]}))
        .into_iter()
        .map(|(code, _, span)| (code, span))
        .collect()
}

#[test]
fn what_nobody_should_type_is_a_plain_fault_with_a_way_out() {
    let mut codes = std::collections::BTreeSet::new();
    for text in [
        "2p7",
        "2d",
        "1p",
        "3d6 3d2",
        "3j2",
        "4f15",
        "3d-1",
        "3d6.5",
        "1e9s2",
        "🙂",
        "שלום",
        "3d6 🙂 4s2",
        "[Xx] 3d6",
        "p2",
        "0s2",
        "3d0",
        "99s2",
    ] {
        let json = serde_json::from_value(
            json!({"rungline": 1, "species": "*", "configurations": [text]}),
        )
        .unwrap();
        let faults = Document::read(&json).faults;
        assert!(!faults.is_empty(), "{text} is taken without a word");
        for fault in &faults {
            assert!(fault.message.ends_with('.'), "{text}: {}", fault.message);
            if let Some(bound) = &fault.bound {
                assert!(
                    !bound.starts_with(char::is_lowercase) && bound.ends_with('.'),
                    "{text}: {bound}"
                );
            }
            assert!(
                fault.bound.is_some() || !fault.ways.is_empty(),
                "{text}: neither bound nor way out"
            );
            assert!(
                fault.end > fault.start,
                "{text}: {} has no place",
                fault.code
            );
            codes.insert(fault.code);
        }
    }
    assert!(codes.len() >= 8, "few codes for many faults: {codes:?}");
}

#[test]
fn ways_out_lead_out() {
    for text in ["2p7", "2d", "1p", "3d6 3d2", "3j2", "4f15"] {
        let json = serde_json::from_value(
            json!({"rungline": 1, "species": "*", "configurations": [text]}),
        )
        .unwrap();
        let fault = Document::read(&json).faults.remove(0);
        let way = fault
            .ways
            .first()
            .unwrap_or_else(|| panic!("{text} has no way out"));
        assert_eq!(
            of_configuration(&way.replacement),
            [],
            "{text} → {}",
            way.replacement
        );
    }
}

#[test]
fn places_hold_after_an_emoji_a_superscript_and_right_to_left_text() {
    assert_eq!(of_configuration("3d⁶ 2p7").last().unwrap().1, "2p7");
    for before in ["🙂", "שלום"] {
        let found = of_configuration(&format!("{before} 2p7"));
        assert!(
            found.iter().any(|(_, span)| span == "2p7"),
            "{before}: {found:?}"
        );
        assert!(
            found.len() >= 2,
            "the fault before it is reported too: {found:?}"
        );
    }
}

#[test]
fn all_faults_are_reported_in_input_order() {
    let found = faults(&json!({
        "rungline": 1,
        "species": "Xx",
        "configurations": ["2p7 1p", "4f15"],
        "field": {"flux_density": "0.5 kg"},
        "nonsense": true,
    }));
    let paths: Vec<&str> = found.iter().map(|(_, path, _)| path.as_str()).collect();
    assert_eq!(
        paths,
        [
            "/species",
            "/configurations/0",
            "/configurations/0",
            "/configurations/1",
            "/field/flux_density",
            "/nonsense"
        ]
    );
}

#[test]
fn electrons_and_charge_are_checked_against_each_other() {
    let found = faults(&json!({"rungline": 1, "species": "Fe", "configurations": ["3d6 4s"]}));
    assert_eq!(found.len(), 1, "{found:?}");
    assert_eq!(found[0].1, "/configurations/0");
    assert_eq!(
        faults(&json!({"rungline": 1, "species": "Fe+", "configurations": ["3d6 4s"]})),
        []
    );
    assert!(!faults(&json!({"rungline": 1, "species": "Fe 30+"})).is_empty());
}

#[test]
fn lines_and_pins_must_name_levels_that_exist() {
    let sheet = |line: Value, measured: Value| {
        faults(
            &json!({"rungline": 1, "species": "Na", "configurations": ["3s", "3p"], "line": line, "measured": measured}),
        )
    };
    assert_eq!(
        sheet(
            json!({"upper": "3p 2P1/2", "lower": "3s 2S1/2"}),
            json!({"3p 2P3/2": "16973.37 cm-1"})
        ),
        []
    );
    let found = sheet(
        json!({"upper": "3p 2D5/2", "lower": "4s 2S1/2"}),
        json!({"3p 4P1/2": "1 cm-1"}),
    );
    let spans: Vec<&str> = found.iter().map(|(_, _, span)| span.as_str()).collect();
    assert_eq!(spans.len(), 3, "{found:?}");
    assert_eq!(&spans[..2], ["2D5/2", "4s"]);
}

#[test]
fn long_texts_are_refused_and_nothing_is_lost() {
    let long = "3d6 ".repeat(2500);
    let found = of_configuration(&long);
    assert_eq!(found.len(), 1, "one fault for 10 000 characters");
    assert!(!faults(&json!({"rungline": 1, "species": "F".repeat(10_000)})).is_empty());
    assert!(!faults(&json!({"rungline": 1, "title": "x".repeat(10_000)})).is_empty());
}

#[test]
fn malformed_files_point_into_the_file() {
    for (text, code) in [
        ("{\"rungline\": 2}", "wrong-version"),
        ("{\"rungline\": 1, \"specie\": \"Fe\"}", "unknown-key"),
        ("{\"species\": \"Fe\"}", "version-missing"),
        ("{\"rungline\": 1", "file-truncated"),
        ("[1, 2]", "wrong-kind-of-value"),
        ("", "file-empty"),
    ] {
        let faults = sheet::answer_text(text, None).expect_err(text);
        assert_eq!(faults[0].code, code, "{text}");
    }
    assert_eq!(
        sheet::answer_text(&"[".repeat(500_000), None).unwrap_err()[0].code,
        "nesting-too-deep"
    );
}

#[test]
fn no_text_in_any_field_panics() {
    // A fixed stream of awkward characters: digits, letters, signs, other scripts, halves of pairs.
    let alphabet =
        "0123456789spdfghijklSPDF[]()^.,;:*+-−–/#= \u{a0}\u{202f}⁰⁶²₃½∞🙂אe'\"\\{}\u{200f}\u{0301}";
    let mut odd = OddTexts::new(alphabet, 0x9e37_79b9);
    for _ in 0..1500 {
        let mut text = || odd.text(24);
        let sheet = json!({
            "rungline": 1, "species": text(), "configurations": [text(), text()],
            "line": {"upper": text(), "lower": text(), "wavelength": text()},
            "field": {"flux_density": text(), "view": text()},
            "measured": {text(): text()},
            "level": {"J": text(), "g": text()}, "window": [text(), text()],
        });
        answered_or_faulted(sheet, &["states", "lines", "splitting"]);
    }
}

/// Every bound is a sentence, and every way out of these slips leads to a sheet that is read or to
/// another fault with a way out of its own.
#[test]
fn bounds_are_sentences_and_ways_lead_on() {
    let with = |key: &str, text: &str| {
        let mut sheet = json!({
            "rungline": 1, "species": "Na I", "configurations": ["3s", "3p"],
            "field": {"flux_density": "0.5 T", "view": "across"},
            "line": {"upper": "3p 2P3/2", "lower": "3s 2S1/2", "wavelength": "589.592 nm"},
            "instrument": {"resolving_power": 50000}, "nucleus": {"spin": "3/2"},
        });
        *sheet.pointer_mut(key).unwrap() = text.into();
        sheet
    };
    let read = |sheet: &serde_json::Value| {
        Document::read(&serde_json::from_value(sheet.clone()).unwrap()).faults
    };
    assert_eq!(read(&with("/species", "Na I")), []);
    for (key, texts) in [
        (
            "/species",
            &["Ti II", "Fe I II", "Iorn", "H+", "שלום", "Fe 99+", "Fe3-"][..],
        ),
        (
            "/configurations/1",
            &["3s", "2p7", "", "n=5", "2p", "4f3 5d", "[Ne] 3d 3s"][..],
        ),
        (
            "/field/flux_density",
            &[
                "NaN T", "½ T", "1e400 T", "strong", "0.5", "0.5 nm", "-1 T", "1e9 T",
            ][..],
        ),
        (
            "/field/view",
            &["sideways", "Acros", "400 deg", "60", "60 T"][..],
        ),
        (
            "/line/upper",
            &[
                "3p²P3/2", "3p 2p3/2", "2P3/2", "3d 2D5/2", "3p 2D5/2", "3s 2S1/2", "3p 2P", "x",
            ][..],
        ),
        (
            "/line/wavelength",
            &["NaN", "THz", "500 THz", "16956 cm-1", "-1 nm"][..],
        ),
        ("/nucleus/spin", &["x", "7/4", "900"][..]),
    ] {
        for text in texts {
            for fault in read(&with(key, text)) {
                let bound = fault.bound.as_deref().unwrap_or("None.");
                assert!(
                    !bound.starts_with(char::is_lowercase) && bound.ends_with('.'),
                    "{key} {text}: {bound}"
                );
                for way in &fault.ways {
                    let changed = with(&fault.path, &way.replacement);
                    let after = read(&changed);
                    assert!(
                        after
                            .iter()
                            .all(|f| f.path != fault.path || !f.ways.is_empty()),
                        "{key} {text} → {}: {after:?}",
                        way.replacement
                    );
                }
            }
        }
    }
}
