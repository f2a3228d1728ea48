//! The browser's door: translates between JavaScript and the core, and nothing else.
//!
//! Sheets come in as JavaScript values, answers go out as JSON text, because a number printed by
//! JavaScript is not the same text.

#[cfg(feature = "bench")]
pub mod bench;

use rungline_core::sheet::{self, Json, Progress};
use wasm_bindgen::prelude::*;

/// Sends a panic's words to the page before the trap ends this worker.
#[wasm_bindgen(start)]
pub fn start() {
    std::panic::set_hook(Box::new(|information| {
        console_error_panic_hook::hook(information);
        post("panic", &JsValue::from_str(&information.to_string()));
    }));
}

/// Posts `{key: value}` to the page; nowhere else than in a worker is there anyone to tell.
fn post(key: &str, value: &JsValue) {
    let message = js_sys::Object::new();
    if js_sys::Reflect::set(&message, &JsValue::from_str(key), value).is_ok()
        && let Ok(worker) = js_sys::global().dyn_into::<web_sys::DedicatedWorkerGlobalScope>()
    {
        // Nothing is left to do when even this message cannot be sent.
        let _ = worker.post_message(&message);
    }
}

/// The least time between two messages of progress, in milliseconds.
const PROGRESS_EVERY: f64 = 100.0;

/// Posts a calculation's iterations as `{progress: {…}}`, at most ten a second. It never stops a
/// calculation: the page does that by ending this worker.
fn teller() -> impl FnMut(&Progress) -> bool {
    let mut told = js_sys::Date::now();
    move |progress| {
        let now = js_sys::Date::now();
        if now - told >= PROGRESS_EVERY
            && let Ok(value) = serde_wasm_bindgen::to_value(progress)
        {
            told = now;
            post("progress", &value);
        }
        true
    }
}

fn json(value: JsValue) -> Result<Json, JsValue> {
    serde_wasm_bindgen::from_value(value).map_err(JsValue::from)
}

/// Version, CODATA year and the questions that are answered.
#[wasm_bindgen]
pub fn about() -> String {
    sheet::about()
}

/// How every field of a sheet was read: faults, echoes, and what each question lacks.
#[wasm_bindgen]
pub fn read(sheet: JsValue) -> Result<String, JsValue> {
    Ok(sheet::reading(&json(sheet)?))
}

/// One answer, or the faults that stand before it.
#[wasm_bindgen]
pub fn answer(sheet: JsValue, question: &str) -> Result<String, JsValue> {
    Ok(sheet::answer_message_watched(
        &json(sheet)?,
        question,
        &mut teller(),
    ))
}

/// The radial densities of the sheet's subshells for their picture, or the faults before them.
#[wasm_bindgen]
pub fn curves(sheet: JsValue) -> Result<String, JsValue> {
    Ok(sheet::curves_message(&json(sheet)?, &mut teller()))
}

/// States and components over the field for their picture, or the faults before them.
#[wasm_bindgen]
pub fn splitting_map(sheet: JsValue) -> Result<String, JsValue> {
    Ok(sheet::splitting_map_message(&json(sheet)?, &mut teller()))
}

/// Seconds and megabytes that an answer is likely to take; `splitting_map` names the map.
#[wasm_bindgen]
pub fn estimate(sheet: JsValue, question: &str) -> Result<String, JsValue> {
    Ok(sheet::estimate_message(&json(sheet)?, question))
}

/// The sheet in the text of a file, be it a sheet or a record.
#[wasm_bindgen]
pub fn open(text: &str) -> String {
    sheet::open_message(text, &mut teller())
}

/// The text of a sheet's file.
#[wasm_bindgen]
pub fn save(sheet: JsValue) -> Result<String, JsValue> {
    Ok(sheet::pretty(&json(sheet)?))
}

/// The text of a record: the sheet, its answers, the version, the constants' year, the cautions.
#[wasm_bindgen]
pub fn record(sheet: JsValue) -> Result<String, JsValue> {
    Ok(sheet::record_message_watched(&json(sheet)?, &mut teller()))
}

/// The measured levels in a table, as the sheet's pins.
#[wasm_bindgen]
pub fn measured_csv(text: &str, sheet: JsValue) -> Result<String, JsValue> {
    Ok(sheet::measured_message(text, &json(sheet)?))
}

/// The angular part of orbitals with this ℓ, in section.
#[wasm_bindgen]
pub fn sections(l: u32) -> String {
    sheet::sections_message(l)
}

/// The chart of the elements for one charge.
#[wasm_bindgen]
pub fn chart(charge: i32) -> String {
    sheet::chart(charge)
}
