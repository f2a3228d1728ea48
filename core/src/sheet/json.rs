//! Strict JSON: order kept, a repeated key refused, places counted for the person who typed it.
//!
//! `serde_json` reads the text; its own value type would silently keep the last of two equal keys.

use std::fmt;

use serde::de::{self, Deserialize, Deserializer, MapAccess, SeqAccess, Visitor};
use serde::ser::{Serialize, SerializeMap, SerializeSeq, Serializer};

use super::json_repair::repaired;
use crate::problem::Problem;

/// The largest sheet that is read, in bytes of UTF-8.
pub const MAX_SHEET_BYTES: usize = 5_000_000;

/// The largest record that is read: it holds the answers too, with every line.
pub const MAX_BYTES: usize = 120_000_000;

/// The longest corrected text that a way out carries.
pub const MAX_REPAIRED_BYTES: usize = 100_000;

/// The text of a sheet with nothing in it.
pub const EMPTY_SHEET: &str = "{\"rungline\": 1}";

/// A JSON value with its keys in the order of the text.
#[derive(Clone, Debug, PartialEq)]
pub enum Json {
    /// `null`
    Null,
    /// `true`, `false`
    Bool(bool),
    /// Any number.
    Number(f64),
    /// A string.
    Text(String),
    /// An array.
    List(Vec<Json>),
    /// An object; keys are unique.
    Object(Vec<(String, Json)>),
}

impl Json {
    /// The value under `key`, when this is an object that has it.
    pub fn get(&self, key: &str) -> Option<&Json> {
        match self {
            Json::Object(entries) => entries.iter().find(|(k, _)| k == key).map(|(_, v)| v),
            _ => None,
        }
    }

    /// The text, when this is one.
    pub fn as_text(&self) -> Option<&str> {
        match self {
            Json::Text(text) => Some(text),
            _ => None,
        }
    }

    /// What a person would call this value.
    pub fn what(&self) -> &'static str {
        match self {
            Json::Null => "null",
            Json::Bool(_) => "true or false",
            Json::Number(_) => "a number",
            Json::Text(_) => "a text",
            Json::List(_) => "a list",
            Json::Object(_) => "a group of keys",
        }
    }
}

struct JsonVisitor;

impl<'de> Visitor<'de> for JsonVisitor {
    type Value = Json;

    fn expecting(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str("a JSON value")
    }

    fn visit_unit<E>(self) -> Result<Json, E> {
        Ok(Json::Null)
    }

    fn visit_none<E>(self) -> Result<Json, E> {
        Ok(Json::Null)
    }

    fn visit_some<D: Deserializer<'de>>(self, deserializer: D) -> Result<Json, D::Error> {
        Json::deserialize(deserializer)
    }

    fn visit_bool<E>(self, value: bool) -> Result<Json, E> {
        Ok(Json::Bool(value))
    }

    fn visit_i64<E>(self, value: i64) -> Result<Json, E> {
        Ok(Json::Number(value as f64))
    }

    fn visit_u64<E>(self, value: u64) -> Result<Json, E> {
        Ok(Json::Number(value as f64))
    }

    fn visit_f64<E: de::Error>(self, value: f64) -> Result<Json, E> {
        if value.is_finite() {
            Ok(Json::Number(value))
        } else {
            Err(E::custom("a number that is not finite"))
        }
    }

    fn visit_str<E>(self, value: &str) -> Result<Json, E> {
        Ok(Json::Text(value.to_owned()))
    }

    fn visit_string<E>(self, value: String) -> Result<Json, E> {
        Ok(Json::Text(value))
    }

    fn visit_seq<A: SeqAccess<'de>>(self, mut items: A) -> Result<Json, A::Error> {
        let mut list = Vec::new();
        while let Some(item) = items.next_element()? {
            list.push(item);
        }
        Ok(Json::List(list))
    }

    fn visit_map<A: MapAccess<'de>>(self, mut entries: A) -> Result<Json, A::Error> {
        let mut object: Vec<(String, Json)> = Vec::new();
        let mut seen = std::collections::BTreeSet::new();
        while let Some(key) = entries.next_key::<String>()? {
            if !seen.insert(key.clone()) {
                return Err(de::Error::custom(format!("repeated key \"{key}\"")));
            }
            object.push((key, entries.next_value()?));
        }
        Ok(Json::Object(object))
    }
}

impl<'de> Deserialize<'de> for Json {
    fn deserialize<D: Deserializer<'de>>(deserializer: D) -> Result<Self, D::Error> {
        deserializer.deserialize_any(JsonVisitor)
    }
}

impl Serialize for Json {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        match self {
            Json::Null => serializer.serialize_unit(),
            Json::Bool(value) => serializer.serialize_bool(*value),
            // Whole numbers print as they are typed: 1, not 1.0.
            Json::Number(value) if *value == value.trunc() && value.abs() < 9e15 => {
                serializer.serialize_i64(*value as i64)
            }
            Json::Number(value) => serializer.serialize_f64(*value),
            Json::Text(text) => serializer.serialize_str(text),
            Json::List(items) => {
                let mut list = serializer.serialize_seq(Some(items.len()))?;
                for item in items {
                    list.serialize_element(item)?;
                }
                list.end()
            }
            Json::Object(entries) => {
                let mut map = serializer.serialize_map(Some(entries.len()))?;
                for (key, value) in entries {
                    map.serialize_entry(key, value)?;
                }
                map.end()
            }
        }
    }
}

/// The JSON value of a text, or the fault that makes it none. `start` and `end` are UTF-16 units.
///
/// Bounds: 5 MB, 40 MB for a record; 127 levels of nesting.
pub fn read(text: &str) -> Result<Json, Problem> {
    if text.len() > MAX_BYTES {
        return Err(too_large(text.len()));
    }
    let text = text.strip_prefix('\u{feff}').unwrap_or(text);
    if text.trim().is_empty() {
        return Err(Problem::new("file-empty", "This file is empty.", 0, 0)
            .bound("A sheet is a JSON object with at least \"rungline\": 1.")
            .way("Start an empty sheet", EMPTY_SHEET));
    }
    let json: Json = serde_json::from_str(text).map_err(|error| explain(text, &error))?;
    let is_record = json.get("sheet").is_some() && json.get("answers").is_some();
    if text.len() > MAX_SHEET_BYTES && !is_record {
        return Err(too_large(text.len()));
    }
    Ok(json)
}

fn too_large(bytes: usize) -> Problem {
    Problem::new(
        "sheet-too-large",
        format!("This file is {:.1} MB long.", bytes as f64 / 1e6),
        0,
        0,
    )
    .bound("A sheet is at most 5 MB, a record at most 40 MB.")
}

/// The JSON value of a text that this program wrote itself.
pub fn read_own(text: &str) -> Option<Json> {
    serde_json::from_str(text).ok()
}

/// A fault of the JSON syntax in plain words.
fn explain(text: &str, error: &serde_json::Error) -> Problem {
    let line_start = text
        .split_inclusive('\n')
        .take(error.line().saturating_sub(1))
        .map(str::len)
        .sum::<usize>();
    // serde_json counts columns in bytes from 1 and names the last one read.
    let end = (line_start + error.column()).min(text.len());
    let start = if error.is_eof() {
        end
    } else {
        end.saturating_sub(1)
    };
    let words = error.to_string();
    let problem = if error.is_eof() {
        Problem::new("file-truncated", "The file ends too early.", start, end)
            .bound("Every bracket and quotation mark that opens must close.")
    } else if words.starts_with("recursion limit") {
        Problem::new("nesting-too-deep", "The nesting goes too deep.", start, end)
            .bound("A sheet is nested at most 127 deep.")
    } else if let Some(key) = words.strip_prefix("repeated key ") {
        let key = key.split(" at line").next().unwrap_or(key);
        // The reader stops right behind the second one.
        let again = text.get(..end).and_then(|read| read.rfind(key));
        let (start, end) = again.map_or((start, end), |at| (at, at + key.len()));
        Problem::new(
            "key-repeated",
            format!("The key {key} stands twice in its group; this is the second one."),
            start,
            end,
        )
        .bound(
            "Each key stands at most once in its group: rename one, or take it out with its value.",
        )
    } else {
        Problem::new(
            "not-json",
            format!("This is not valid JSON: {}.", reason(&words)),
            start,
            end,
        )
        .bound("A sheet is one JSON object.")
    };
    let problem = match repaired(text, error) {
        Some((label, whole)) => problem.way(label, whole),
        None => problem,
    };
    problem
        .way("Start an empty sheet", EMPTY_SHEET)
        .in_utf16(text)
}

/// The reader's own words on a fault of the syntax in plain ones.
fn reason(words: &str) -> &'static str {
    const REASONS: [(&str, &str); 16] = [
        ("expected value", "a value is missing here"),
        (
            "expected `,` or `}`",
            "a comma or a closing brace is missing",
        ),
        (
            "expected `,` or `]`",
            "a comma or a closing bracket is missing",
        ),
        ("expected `:`", "a colon is missing after the key"),
        (
            "trailing comma",
            "a comma stands before the closing bracket",
        ),
        (
            "trailing characters",
            "something follows the end of the sheet",
        ),
        (
            "key must be a string",
            "a key must stand in quotation marks",
        ),
        ("expected ident", "this is neither true, false nor null"),
        (
            "invalid escape",
            "\\ is followed by a letter that has no meaning there",
        ),
        (
            "unexpected end of hex escape",
            "\\u is not followed by four hexadecimal digits",
        ),
        ("lone leading surrogate", "half of a \\u pair stands alone"),
        (
            "control character",
            "a line break, tab or control character stands inside a text",
        ),
        ("invalid number", "this is no number as JSON writes it"),
        (
            "number out of range",
            "this number is too large to be counted",
        ),
        (
            "a number that is not finite",
            "this number is too large to be counted",
        ),
        ("invalid unicode code point", "\\u names no character"),
    ];
    REASONS
        .iter()
        .find(|(theirs, _)| words.starts_with(theirs))
        .map_or(
            "a value or sign stands where none is expected",
            |(_, plain)| plain,
        )
}

#[cfg(test)]
mod tests {
    use super::*;

    fn code(text: &str) -> &'static str {
        read(text).unwrap_err().code
    }

    #[test]
    fn order_is_kept_and_numbers_print_as_typed() {
        let json = read(r#"{"b":1,"a":[0.1,-3,null,true]}"#).unwrap();
        assert_eq!(
            serde_json::to_string(&json).unwrap(),
            r#"{"b":1,"a":[0.1,-3,null,true]}"#
        );
    }

    #[test]
    fn faults_of_the_syntax_have_their_own_codes() {
        assert_eq!(code(""), "file-empty");
        assert_eq!(code("{\"rungline\":1"), "file-truncated");
        assert_eq!(code("{\"a\":1,\"a\":2}"), "key-repeated");
        assert_eq!(code("{\"a\":01}"), "not-json");
        assert_eq!(code("{\"a\":1e999}"), "not-json");
        assert_eq!(code(&"[".repeat(100_000)), "nesting-too-deep");
        assert_eq!(code(&" ".repeat(MAX_BYTES + 1)), "sheet-too-large");
    }

    #[test]
    fn faults_of_the_syntax_are_plain_and_lead_out() {
        for (text, words, whole) in [
            (
                r#"{"rungline":1,}"#,
                "comma stands before",
                r#"{"rungline":1}"#,
            ),
            (r#"{"rungline":1"#, "ends too early", r#"{"rungline":1}"#),
            (
                r#"{"rungline":1,"title":"a"#,
                "ends too early",
                r#"{"rungline":1,"title":"a"}"#,
            ),
            (
                r#"{"rungline":1} x"#,
                "follows the end",
                r#"{"rungline":1}"#,
            ),
            (
                r#"{"rungline":1 "title":"a"}"#,
                "comma or a closing brace",
                r#"{"rungline":1, "title":"a"}"#,
            ),
            (
                r#"{"configurations":["3s" "3p"]}"#,
                "closing bracket",
                r#"{"configurations":["3s", "3p"]}"#,
            ),
            (r#"{"rungline":01}"#, "no number", EMPTY_SHEET),
            (r#"{"rungline":}"#, "value is missing", EMPTY_SHEET),
            (r#"{rungline:1}"#, "quotation marks", EMPTY_SHEET),
            (r#"{"a":"\q"}"#, "no meaning", EMPTY_SHEET),
            (r#"{"a":"\ud800"}"#, "", EMPTY_SHEET),
            ("{\"a\":\"\t\"}", "control character", EMPTY_SHEET),
            (r#"{"a":1,"a":2}"#, "twice", EMPTY_SHEET),
        ] {
            let problem = read(text).unwrap_err();
            assert!(
                problem.message.contains(words),
                "{text}: {}",
                problem.message
            );
            assert!(!problem.message.contains("line 1"), "{}", problem.message);
            assert_eq!(problem.ways[0].replacement, whole, "{text}");
            for way in &problem.ways {
                assert!(read(&way.replacement).is_ok(), "{text}: {way:?}");
            }
        }
    }

    #[test]
    fn a_repeated_key_is_named_and_marked() {
        let text = r#"{"title": "view", "field": {"view": "along", "view": "across"}}"#;
        let problem = read(text).unwrap_err();
        assert!(problem.message.contains("\"view\""), "{}", problem.message);
        assert_eq!(&text[problem.start..problem.end], "\"view\"");
        assert_eq!(problem.start, text.rfind("\"view\"").unwrap());
    }

    #[test]
    fn places_count_utf16_units() {
        let problem = read("{\"🙂\": x}").unwrap_err();
        assert_eq!((problem.start, problem.end), (7, 8));
    }
}
