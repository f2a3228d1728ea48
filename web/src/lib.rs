//! The browser's door: translates between JavaScript and the core, and nothing else.
//!
//! Sheets come in as JavaScript values, answers go out as JSON text, because a number printed by
//! JavaScript is not the same text.

#[cfg(feature = "bench")]
pub mod bench;

use rungline_core::sheet::{self, Json};
use wasm_bindgen::prelude::*;

/// Sends a panic's words to the page before the trap ends this worker.
#[wasm_bindgen(start)]
pub fn start() {
    std::panic::set_hook(Box::new(|information| {
        console_error_panic_hook::hook(information);
        let message = js_sys::Object::new();
        let text = JsValue::from_str(&information.to_string());
        if js_sys::Reflect::set(&message, &JsValue::from_str("panic"), &text).is_ok()
            && let Ok(worker) = js_sys::global().dyn_into::<web_sys::DedicatedWorkerGlobalScope>()
        {
            // Nothing is left to tell when even this message cannot be sent.
            let _ = worker.post_message(&message);
        }
    }));
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
    Ok(sheet::answer_message(&json(sheet)?, question))
}

/// Seconds and megabytes that an answer is likely to take.
#[wasm_bindgen]
pub fn estimate(sheet: JsValue, question: &str) -> Result<String, JsValue> {
    Ok(sheet::estimate_message(&json(sheet)?, question))
}

/// The sheet in the text of a file, be it a sheet or a record.
#[wasm_bindgen]
pub fn open(text: &str) -> String {
    sheet::open_message(text)
}

/// The text of a sheet's file.
#[wasm_bindgen]
pub fn save(sheet: JsValue) -> Result<String, JsValue> {
    Ok(sheet::pretty(&json(sheet)?))
}

/// The text of a record: the sheet, its answers, the version, the constants' year, the cautions.
#[wasm_bindgen]
pub fn record(sheet: JsValue) -> Result<String, JsValue> {
    Ok(sheet::record_message(&json(sheet)?))
}

/// The chart of the elements for one charge.
#[wasm_bindgen]
pub fn chart(charge: i32) -> String {
    sheet::chart(charge)
}
