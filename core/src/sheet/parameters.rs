//! Keys that wait for a later question, checked all the same: the whole sheet is checked whichever
//! question is asked.
//!

use crate::problem::Problem;
use crate::quantity::{self, Dimension};

use super::json::Json;
use super::parameter_name;

/// Adds the faults of `readings`, `fit`, `pair` and `level`.
pub fn check(json: &Json, faults: &mut Vec<Problem>) {
    if let Some(Json::List(names)) = json.get("fit").and_then(|fit| fit.get("free")) {
        for (index, name) in names.iter().enumerate() {
            let Some(name) = name.as_text() else { continue };
            if let Err(problem) = parameter_name::parse(name) {
                faults.push(problem.in_utf16(name).at(format!("/fit/free/{index}")));
            }
        }
    }
    if let Some(Json::List(readings)) = json.get("readings") {
        for (index, reading) in readings.iter().enumerate() {
            check_reading(reading, &format!("/readings/{index}"), faults);
        }
    }
    if let Some(Json::List(ends)) = json.get("pair")
        && ends.len() != 2
    {
        faults.push(two_needed(ends.len()));
    }
    if let Some(level) = json.get("level") {
        typed(level.get("g"), Dimension::Number, "/level/g", faults);
        typed(level.get("g_I"), Dimension::Number, "/level/g_I", faults);
        not_negative(level.get("J"), "/level/J", faults);
        not_negative(level.get("I"), "/level/I", faults);
    }
    if let Some(nucleus) = json.get("nucleus") {
        not_negative(nucleus.get("spin"), "/nucleus/spin", faults);
        typed(
            nucleus.get("g_I"),
            Dimension::Number,
            "/nucleus/g_I",
            faults,
        );
    }
}

/// A pair must hold two wavelengths.
fn two_needed(found: usize) -> Problem {
    Problem::new(
        "two-values-needed",
        format!("\"pair\" has {found} of 2 values."),
        0,
        0,
    )
    .bound("It takes two wavelengths.")
    .at("/pair")
}

fn check_reading(reading: &Json, path: &str, faults: &mut Vec<Problem>) {
    let Json::Object(_) = reading else { return };
    let kind = reading.get("kind").and_then(Json::as_text);
    let dimension = match kind {
        Some("line") => Dimension::Wavelength,
        Some("level" | "interval" | "offset" | "peak") => Dimension::Wavenumber,
        Some("intensity" | "pixel") => Dimension::Number,
        // Another word is a fault already.
        Some(_) => return,
        None => {
            faults.push(
                Problem::new("reading-without-kind", "This reading has no kind.", 0, 0)
                    .bound("One of: line, level, interval, offset, intensity, peak, pixel.")
                    .at(path),
            );
            return;
        }
    };
    if reading.get("value").is_none() {
        faults.push(
            Problem::new("reading-without-value", "This reading has no value.", 0, 0)
                .bound(format!("It takes {}.", dimension.name()))
                .at(path),
        );
    }
    for key in ["value", "u"] {
        typed(
            reading.get(key),
            dimension,
            &format!("{path}/{key}"),
            faults,
        );
    }
}

fn typed(value: Option<&Json>, dimension: Dimension, path: &str, faults: &mut Vec<Problem>) {
    if let Some(text) = value.and_then(Json::as_text)
        && let Err(problem) = quantity::quantity(text, dimension)
    {
        faults.push(problem.in_utf16(text).at(path));
    }
}

fn not_negative(value: Option<&Json>, path: &str, faults: &mut Vec<Problem>) {
    if let Some(text) = value.and_then(Json::as_text)
        && let Ok(j) = quantity::half_integer(text)
        && j.doubled() < 0
    {
        faults.push(
            Problem::new(
                "angular-momentum-negative",
                format!("{text} is negative."),
                0,
                text.len(),
            )
            .bound("0, 1/2, 1, 3/2 and so on.")
            .in_utf16(text)
            .at(path),
        );
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn keys_of_later_questions_are_checked() {
        let json = super::super::json::read(
            r#"{"rungline":1,"readings":[{},{"kind":"line","value":"xyz"}],
                "fit":{"free":["blah"]},"pair":["588 nm"],"level":{"g":"abc","J":"-1/2"},"nucleus":{"spin":"-1/2"}}"#,
        )
        .unwrap();
        let mut faults = Vec::new();
        check(&json, &mut faults);
        let paths: Vec<&str> = faults.iter().map(|f| f.path.as_str()).collect();
        assert_eq!(
            paths,
            [
                "/fit/free/0",
                "/readings/0",
                "/readings/1/value",
                "/pair",
                "/level/g",
                "/level/J",
                "/nucleus/spin"
            ]
        );
    }
}
