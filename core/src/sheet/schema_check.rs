//! The check of a JSON value against what the sheet may hold.

use crate::problem::Problem;
use crate::quantity::Dimension;
use crate::quantity::signs::typeset;

use super::choice::{choice, nearest, not_a_choice};
use super::json::Json;
use super::schema::{MAX_NAME, Shape, VERSION, key_of, pointer};
use Shape::{
    Bool, Choice, ChoiceOr, Group, HalfInteger, Label, List, Named, Notation, Number, Quantity,
    Reading, Text, WindowEnd,
};

/// Adds every fault of `json` against `shape`, in the order of the input.
///
/// Notations and labels are only checked for being text: their own parsers follow.
pub fn check(json: &Json, shape: &Shape, path: &str, faults: &mut Vec<Problem>) {
    match shape {
        Shape::Version => version(json, path, faults),
        Text(max) => {
            text(json, path, *max, faults);
        }
        Notation => {
            text(json, path, usize::MAX, faults);
        }
        Label | Reading => {
            text(json, path, MAX_NAME, faults);
        }
        Bool => {
            if !matches!(json, Json::Bool(_)) {
                faults.push(kind(json, path, "true or false"));
            }
        }
        Number(low, high) => match json {
            Json::Number(value) if (*low..=*high).contains(value) => {}
            Json::Number(value) => {
                let edge = if value < low { low } else { high };
                faults.push(
                    Problem::new(
                        "number-out-of-range",
                        format!("{} is {}.", key_of(path), typeset(*value)),
                        0,
                        0,
                    )
                    .bound(format!(
                        "It lies from {} to {}.",
                        typeset(*low),
                        typeset(*high)
                    ))
                    .way(format!("Use {}", typeset(*edge)), edge.to_string())
                    .at(path),
                );
            }
            _ => faults.push(kind(json, path, "a number")),
        },
        Choice(words) => {
            if let Some(word) = text(json, path, MAX_NAME, faults)
                && choice(word, words).is_none()
            {
                faults.push(not_a_choice(word, words, None, path));
            }
        }
        ChoiceOr(words, dimension) => {
            if let Some(word) = text(json, path, MAX_NAME, faults)
                && choice(word, words).is_none()
            {
                if word.trim_start().starts_with(char::is_alphabetic) {
                    faults.push(not_a_choice(word, words, Some(*dimension), path));
                } else {
                    quantity(word, *dimension, path, faults);
                }
            }
        }
        Quantity(dimension) => {
            if let Some(typed) = text(json, path, MAX_NAME, faults) {
                quantity(typed, *dimension, path, faults);
            }
        }
        WindowEnd => {
            if let Some(typed) = text(json, path, MAX_NAME, faults)
                && let Err(problem) = super::window::end(typed)
            {
                faults.push(problem.in_utf16(typed).at(path));
            }
        }
        HalfInteger => {
            if let Some(typed) = text(json, path, MAX_NAME, faults)
                && let Err(problem) = crate::quantity::half_integer(typed)
            {
                faults.push(problem.in_utf16(typed).at(path));
            }
        }
        List(item, max) => match json {
            Json::List(items) => {
                if items.len() > *max {
                    faults.push(
                        Problem::new(
                            "too-many-entries",
                            format!("{} has {} entries.", key_of(path), items.len()),
                            0,
                            0,
                        )
                        .bound(format!("It takes at most {max}."))
                        .at(path),
                    );
                    return;
                }
                for (index, value) in items.iter().enumerate() {
                    check(value, item, &format!("{path}/{index}"), faults);
                }
            }
            _ => faults.push(kind(json, path, "a list in square brackets")),
        },
        Group(keys) => group(json, keys, path, faults),
        Named(value, max) => match json {
            Json::Object(entries) => {
                if entries.len() > *max {
                    faults.push(
                        Problem::new(
                            "too-many-entries",
                            format!("{} has {} entries.", key_of(path), entries.len()),
                            0,
                            0,
                        )
                        .bound(format!("It takes at most {max}."))
                        .at(path),
                    );
                    return;
                }
                for (key, entry) in entries {
                    if key.chars().count() > MAX_NAME {
                        faults.push(too_long(key.chars().count(), MAX_NAME, path));
                        continue;
                    }
                    check(entry, value, &pointer(path, key), faults);
                }
            }
            _ => faults.push(kind(json, path, "a group of names with values")),
        },
    }
}

fn kind(json: &Json, path: &str, wanted: &str) -> Problem {
    Problem::new(
        "wrong-kind-of-value",
        format!("{} is {}.", key_of(path), json.what()),
        0,
        0,
    )
    .bound(format!("It must be {wanted}."))
    .at(path)
}

fn too_long(length: usize, max: usize, path: &str) -> Problem {
    Problem::new(
        "text-too-long",
        format!("This text has {length} characters."),
        0,
        0,
    )
    .bound(format!("At most {max} characters stand here."))
    .at(path)
}

fn text<'a>(json: &'a Json, path: &str, max: usize, faults: &mut Vec<Problem>) -> Option<&'a str> {
    let Some(typed) = json.as_text() else {
        faults.push(kind(json, path, "a text in quotation marks"));
        return None;
    };
    let length = typed.chars().count();
    if length > max {
        let kept: String = typed.chars().take(max).collect();
        let mut problem = too_long(length, max, path)
            .way(format!("Keep the first {max} characters"), kept.clone());
        problem.start = kept.encode_utf16().count();
        problem.end = typed.encode_utf16().count();
        faults.push(problem);
        return None;
    }
    Some(typed)
}

fn quantity(typed: &str, dimension: Dimension, path: &str, faults: &mut Vec<Problem>) {
    if let Err(problem) = crate::quantity::quantity(typed, dimension) {
        faults.push(problem.in_utf16(typed).at(path));
    }
}

fn version(json: &Json, path: &str, faults: &mut Vec<Problem>) {
    match json {
        Json::Number(value) if *value == VERSION => {}
        Json::Number(value) => faults.push(
            Problem::new(
                "wrong-version",
                format!("This sheet has document version {}.", typeset(*value)),
                0,
                0,
            )
            .bound("This program reads document version 1.")
            .way("Read it as version 1", "1")
            .at(path),
        ),
        _ => faults.push(kind(json, path, "the number 1")),
    }
}

fn group(json: &Json, keys: &[(&str, Shape)], path: &str, faults: &mut Vec<Problem>) {
    let Json::Object(entries) = json else {
        faults.push(kind(json, path, "a group of keys in braces"));
        return;
    };
    if path.is_empty() && json.get("rungline").is_none() {
        let mut problem = Problem::new(
            "version-missing",
            "This is not a Rungline sheet: it lacks \"rungline\".",
            0,
            0,
        )
        .bound("A sheet starts with \"rungline\": 1.");
        let mut whole = vec![("rungline".to_owned(), Json::Number(VERSION))];
        whole.extend(entries.iter().cloned());
        let text = super::pretty(&Json::Object(whole));
        if text.len() <= super::json::MAX_REPAIRED_BYTES {
            problem = problem.way("Add \"rungline\": 1", text);
        }
        faults.push(problem);
    }
    for (key, value) in entries {
        match keys.iter().find(|(name, _)| name == key) {
            Some((_, shape)) => check(value, shape, &pointer(path, key), faults),
            None => {
                let short: String = key.chars().take(60).collect();
                let place = if path.is_empty() {
                    "a sheet".to_owned()
                } else {
                    key_of(path)
                };
                let mut problem = Problem::new(
                    "unknown-key",
                    format!("There is no key \"{short}\" in {place}."),
                    0,
                    0,
                )
                .at(pointer(path, key));
                let names: Vec<&str> = keys.iter().map(|(name, _)| *name).collect();
                problem = match nearest(key, names.iter().copied()) {
                    Some(near) => problem
                        .bound(format!("The nearest known key is \"{near}\"."))
                        .way(format!("Rename it {near}"), near),
                    None => problem.bound(format!("Known keys: {}.", names.join(", "))),
                };
                faults.push(problem);
            }
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::sheet::json::read;
    use crate::sheet::schema::SHEET;

    #[test]
    fn a_sheet_without_its_version_gets_it() {
        let mut faults = Vec::new();
        check(
            &read(r#"{"species":"Fe"}"#).unwrap(),
            &SHEET,
            "",
            &mut faults,
        );
        let whole = read(&faults[0].ways[0].replacement).unwrap();
        faults.clear();
        check(&whole, &SHEET, "", &mut faults);
        assert_eq!(faults, []);
    }

    fn codes(text: &str) -> Vec<(&'static str, String)> {
        let mut faults = Vec::new();
        check(&read(text).unwrap(), &SHEET, "", &mut faults);
        faults.into_iter().map(|f| (f.code, f.path)).collect()
    }

    #[test]
    fn every_fault_is_reported_in_order() {
        let found = codes(
            r#"{"rungline":2,"specie":"Fe","title":7,"structure":{"relativity":"yes","scal":{}},"medium":"ais"}"#,
        );
        let expected = [
            ("wrong-version", "/rungline"),
            ("unknown-key", "/specie"),
            ("wrong-kind-of-value", "/title"),
            ("wrong-kind-of-value", "/structure/relativity"),
            ("unknown-key", "/structure/scal"),
            ("unknown-choice", "/medium"),
        ];
        assert_eq!(found, expected.map(|(c, p)| (c, p.to_owned())));
    }

    #[test]
    fn the_nearest_known_key_is_named() {
        let mut faults = Vec::new();
        check(
            &read(r#"{"rungline":1,"configuration":[]}"#).unwrap(),
            &SHEET,
            "",
            &mut faults,
        );
        assert_eq!(faults[0].ways[0].replacement, "configurations");
    }
}
