//! How much memory the largest atoms take in WebAssembly, where it never shrinks.

use rungline_core::sheet::{Question, answer_text};
use wasm_bindgen::JsCast;
use wasm_bindgen_test::wasm_bindgen_test;

/// What the memory of this module may have grown to after every atom below.
const MOST_BYTES: u32 = 200_000_000;

#[wasm_bindgen_test]
fn the_radial_functions_of_the_heaviest_atoms_stay_below_200_megabytes() {
    for species in ["U I", "Lr I", "Cf I", "U 91+", "Gd I"] {
        let sheet = format!(r#"{{"rungline":1,"species":"{species}"}}"#);
        let answer = answer_text(&sheet, Some(Question::Orbitals)).expect("orbitals");
        assert!(answer.contains("\"orbitals\":["), "{species}");
    }
    let memory = wasm_bindgen::memory().unchecked_into::<js_sys::WebAssembly::Memory>();
    let bytes = memory
        .buffer()
        .unchecked_into::<js_sys::ArrayBuffer>()
        .byte_length();
    assert!(bytes <= MOST_BYTES, "{bytes} bytes");
}
