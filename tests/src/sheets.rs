//! Sheets as a person types them: their faults, their answers, and texts that nobody should type.

use rungline_core::problem::Problem;
use rungline_core::sheet::{self, Document};
use serde_json::{Value, json};

/// A sheet on these configurations, with more keys.
///
/// # Panics
/// When what is added is no group.
pub fn sheet(species: &str, configurations: &[&str], extra: Value) -> Value {
    let mut sheet = json!({"rungline": 1, "species": species, "configurations": configurations});
    for (key, value) in extra.as_object().expect("a group") {
        sheet[key] = value.clone();
    }
    sheet
}

/// Every fault of a sheet, with the characters that it points at.
pub fn faults(sheet: &Value) -> Vec<(Problem, String)> {
    let json = serde_json::from_value(sheet.clone()).expect("a sheet is JSON");
    let found = Document::read(&json).faults.into_iter();
    found
        .map(|fault| {
            let text = sheet.pointer(&fault.path).and_then(Value::as_str);
            let units: Vec<u16> = text.unwrap_or_default().encode_utf16().collect();
            let span = units.get(fault.start..fault.end);
            let span = span.map(String::from_utf16_lossy);
            (fault, span.unwrap_or_else(|| "outside the text".to_owned()))
        })
        .collect()
}

/// Reads a sheet and asks it these questions: whatever stands in it, nothing panics and all that comes is JSON.
pub fn answered_or_faulted(sheet: Value, questions: &[&str]) {
    let json = serde_json::from_value(sheet).expect("a sheet is JSON");
    let reading: Value = serde_json::from_str(&sheet::reading(&json)).expect("a reading is JSON");
    assert!(reading["faults"].is_array());
    for question in questions {
        let answer = sheet::answer_message(&json, question);
        let answer: Value = serde_json::from_str(&answer).expect("an answer is JSON");
        assert!(answer.get("answer").is_some() || answer.get("faults").is_some());
    }
}

/// The answer to a question.
///
/// # Panics
/// When there are faults instead.
pub fn answer(sheet: &Value, question: &str) -> Value {
    let json = serde_json::from_value(sheet.clone()).expect("a sheet is JSON");
    let text = sheet::answer_message(&json, question);
    let message: Value = serde_json::from_str(&text).expect("an answer is JSON");
    assert!(message["answer"].is_object(), "{text}");
    message["answer"].clone()
}

/// The rows of a table of an answer.
pub fn rows<'a>(answer: &'a Value, key: &str) -> &'a Vec<Value> {
    answer[key].as_array().expect("rows")
}

/// A number of a row.
pub fn number(row: &Value, key: &str) -> f64 {
    row[key].as_f64().unwrap_or_else(|| panic!("{key}: {row}"))
}

/// 2M of a text such as "-3/2".
pub fn doubled(text: &Value) -> i64 {
    let text = text.as_str().expect("M is text");
    match text.strip_suffix("/2") {
        Some(number) => number.parse().expect("a number"),
        None => 2 * text.parse::<i64>().expect("a number"),
    }
}

/// A fixed sequence of texts from an alphabet (the multiplier is Knuth's, *The Art of Computer Programming*,
/// volume 2, § 3.3.4).
pub struct OddTexts {
    alphabet: Vec<char>,
    state: u64,
}

impl OddTexts {
    /// A sequence that its seed fixes.
    pub fn new(alphabet: &str, seed: u64) -> Self {
        OddTexts {
            alphabet: alphabet.chars().collect(),
            state: seed,
        }
    }

    fn below(&mut self, bound: usize) -> usize {
        self.state = self
            .state
            .wrapping_mul(6_364_136_223_846_793_005)
            .wrapping_add(1_442_695_040_888_963_407);
        (self.state >> 33) as usize % bound
    }

    /// The next text, shorter than `most` characters.
    pub fn text(&mut self, most: usize) -> String {
        let length = self.below(most);
        let places: Vec<usize> = (0..length)
            .map(|_| self.below(self.alphabet.len()))
            .collect();
        places
            .into_iter()
            .map(|place| self.alphabet[place])
            .collect()
    }
}
