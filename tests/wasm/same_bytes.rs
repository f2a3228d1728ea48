//! The core and its door in WebAssembly, run in Node, against the native core's own bytes.

use rungline_core::angular::{wigner_3j, wigner_6j, wigner_9j};
use rungline_core::sheet::{Question, answer_text};
use rungline_core::structure::{Basis, Hamiltonian, lowest_of_j};
use wasm_bindgen_test::wasm_bindgen_test;

#[path = "../src/figures.rs"]
mod figures;

use figures::round_figures;

include!(concat!(env!("OUT_DIR"), "/answers.rs"));
include!(concat!(env!("OUT_DIR"), "/symbols.rs"));
include!(concat!(env!("OUT_DIR"), "/lowest.rs"));
include!("symbols.rs");
include!("lowest.rs");
include!("digest.rs");

fn named(name: &str) -> Question {
    Question::ALL
        .into_iter()
        .find(|question| question.name() == name)
        .expect("a question of the core")
}

#[wasm_bindgen_test]
fn there_are_answers_to_compare() {
    assert!(ANSWERS.len() >= 11, "{}", ANSWERS.len());
    assert!(SYMBOL_BITS.iter().any(|&bits| f64::from_bits(bits) != 0.0));
}

#[wasm_bindgen_test]
fn every_example_has_the_native_bytes() {
    for (name, sheet, question, native) in ANSWERS {
        let here = answer_text(sheet, Some(named(question))).expect("an answer as natively");
        assert!(
            here == *native,
            "{name}, {question}: {}",
            place(&here, native)
        );
    }
}

#[wasm_bindgen_test]
fn every_long_answer_has_the_native_bytes() {
    assert!(!LARGE.is_empty());
    for (name, sheet, question, length, native) in LARGE {
        let here = answer_text(sheet, Some(named(question))).expect("an answer as natively");
        assert_eq!(here.len(), *length, "{name}, {question}");
        assert_eq!(digest(here.as_bytes()), *native, "{name}, {question}");
    }
}

#[wasm_bindgen_test]
fn the_door_gives_the_core_s_text_for_a_sheet_from_javascript() {
    for (name, sheet, question, native) in ANSWERS {
        let value = js_sys::JSON::parse(sheet).expect("an example is JSON");
        let message = rungline_web::answer(value, question).expect("an answer as natively");
        let here = message
            .strip_prefix("{\"answer\":")
            .and_then(|text| text.strip_suffix('}'))
            .expect("an answer, not faults");
        let native = native
            .strip_prefix(&format!("{{\"rungline\":1,\"answers\":{{\"{question}\":"))
            .and_then(|text| text.strip_suffix("}}"))
            .expect("the form of an answer");
        assert!(
            here == native,
            "{name}, {question}: {}",
            place(here, native)
        );
    }
}

#[wasm_bindgen_test]
fn every_picture_has_the_native_bytes() {
    for (name, sheet, native) in CURVES {
        let value = js_sys::JSON::parse(sheet).expect("an example is JSON");
        let here = rungline_web::curves(value).expect("curves or faults as natively");
        assert!(here == *native, "{name}: {}", place(&here, native));
    }
}

#[wasm_bindgen_test]
fn every_section_has_the_native_bytes() {
    for (l, native) in SECTIONS {
        let here = rungline_web::sections(*l);
        assert!(here == *native, "ℓ = {l}: {}", place(&here, native));
    }
}

#[wasm_bindgen_test]
fn symbols_have_the_native_bits() {
    let here = symbols();
    assert_eq!(here.len(), SYMBOL_BITS.len());
    for (number, (value, &bits)) in here.iter().zip(SYMBOL_BITS).enumerate() {
        assert_eq!(value.to_bits(), bits, "symbol {number}: {value:e}");
    }
}

#[wasm_bindgen_test]
fn the_lowest_levels_of_large_matrices_have_the_native_bits() {
    let here: Vec<u8> = (lowest_levels().iter())
        .flat_map(|value| value.to_bits().to_le_bytes())
        .collect();
    assert_eq!(here.len(), LOWEST_BYTES);
    assert_eq!(digest(&here), LOWEST_DIGEST);
}

#[wasm_bindgen_test]
fn the_door_reads_a_sheet_with_every_kind_of_fault_without_a_trap() {
    for text in ["2p7", "2d", "3d6 3d2", "🙂3d6", "א3d6", "", "1e9s2", "3d-1"] {
        let sheet = js_sys::Object::new();
        let texts = js_sys::Array::of1(&text.into());
        js_sys::Reflect::set(&sheet, &"rungline".into(), &1.into()).expect("a plain object");
        js_sys::Reflect::set(&sheet, &"configurations".into(), &texts).expect("a plain object");
        let reading = rungline_web::read(sheet.into()).expect("a reading");
        assert!(reading.starts_with("{\"faults\":["), "{reading}");
    }
}

/// Where two texts part, with what stands there.
fn place(here: &str, native: &str) -> String {
    let at = here
        .bytes()
        .zip(native.bytes())
        .take_while(|(a, b)| a == b)
        .count();
    let around = |text: &str| {
        text.get(at.saturating_sub(40)..(at + 40).min(text.len()))
            .unwrap_or_default()
            .to_string()
    };
    format!("byte {at}: {} | {}", around(here), around(native))
}
