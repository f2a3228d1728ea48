//! The record: a sheet with its answers, recomputed and compared by anyone.

use serde::Serialize;

use crate::problem::Problem;

use super::document::Document;
use super::json::{self, Json};
use super::watch::{Watch, unwatched};
use super::{VERSION, answers, to_json};

/// What rechecking a record found.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Recheck {
    reproduces: bool,
    /// The version that wrote the record.
    version: Option<String>,
    /// The version that rechecked it.
    rechecked_by: &'static str,
    moved: Vec<Moved>,
}

/// One value that is not what the record says.
#[derive(Clone, Debug, PartialEq, Serialize)]
struct Moved {
    /// JSON pointer into the record's answers.
    name: String,
    was: Option<Json>,
    now: Option<Json>,
}

impl Recheck {
    /// Whether every value came out the same.
    pub fn reproduces(&self) -> bool {
        self.reproduces
    }

    /// As the command prints it.
    pub fn to_json(&self) -> String {
        to_json(self)
    }
}

/// Rechecks the text of a record.
///
/// # Errors
/// The faults of the text, or that it holds no record.
pub fn recheck_text(text: &str) -> Result<Recheck, Vec<Problem>> {
    let json = json::read(text).map_err(|p| vec![p])?;
    match open(&json, &mut unwatched)? {
        (_, Some(recheck)) => Ok(recheck),
        (_, None) => Err(vec![
            Problem::new(
                "not-a-record",
                "This file is a sheet, not a record: it has no answers.",
                0,
                0,
            )
            .bound("A record has the keys \"sheet\" and \"answers\"."),
        ]),
    }
}

/// The sheet of a file, and the recheck if the file is a record.
pub fn open<'a>(
    json: &'a Json,
    watch: &mut Watch,
) -> Result<(&'a Json, Option<Recheck>), Vec<Problem>> {
    let (sheet, Some(recorded)) = split(json)? else {
        return Ok((json, None));
    };
    let document = Document::read(sheet);
    if !document.faults.is_empty() {
        let faults = document.faults.iter().cloned().map(|mut fault| {
            fault.path = format!("/sheet{}", fault.path);
            fault
        });
        return Err(faults.collect());
    }
    let mut moved = Vec::new();
    let now = answers(&document, None, watch)
        .ok()
        .and_then(|text| json::read_own(&text));
    compare("", Some(recorded), now.as_ref(), &mut moved);
    let codata = Json::Number(f64::from(crate::constants::CODATA_YEAR));
    compare("/codata", json.get("codata"), Some(&codata), &mut moved);
    let version = json
        .get("version")
        .and_then(Json::as_text)
        .map(str::to_owned);
    Ok((
        sheet,
        Some(Recheck {
            reproduces: moved.is_empty(),
            version,
            rechecked_by: VERSION,
            moved,
        }),
    ))
}

/// The sheet of a file, and the answers if it is a record.
///
/// # Errors
/// The record's own faults: its version, its keys, their kinds.
pub fn split(json: &Json) -> Result<(&Json, Option<&Json>), Vec<Problem>> {
    let (Some(sheet), Some(recorded)) = (json.get("sheet"), json.get("answers")) else {
        return Ok((json, None));
    };
    let faults = check_shape(json);
    if faults.is_empty() {
        Ok((sheet, Some(recorded)))
    } else {
        Err(faults)
    }
}

fn check_shape(json: &Json) -> Vec<Problem> {
    let mut faults = Vec::new();
    let Json::Object(entries) = json else {
        return faults;
    };
    if json.get("rungline") != Some(&Json::Number(super::schema::VERSION)) {
        faults.push(
            Problem::new(
                "wrong-version",
                "This record does not carry \"rungline\": 1.",
                0,
                0,
            )
            .bound("This program reads records of document version 1.")
            .at("/rungline"),
        );
    }
    for (key, value) in entries {
        let fits = match key.as_str() {
            "rungline" | "codata" => matches!(value, Json::Number(_)),
            "version" => matches!(value, Json::Text(_)),
            "sheet" | "answers" => matches!(value, Json::Object(_)),
            "cautions" => matches!(value, Json::List(_)),
            _ => false,
        };
        if fits {
            continue;
        }
        let short: String = key.chars().take(60).collect();
        faults.push(
            Problem::new(
                "not-as-recorded",
                format!(
                    "\"{short}\" is {}, which no record holds there.",
                    value.what()
                ),
                0,
                0,
            )
            .bound("The keys of a record: rungline, version, codata, sheet, cautions, answers.")
            .at(super::schema::pointer("", key)),
        );
        if faults.len() > 50 {
            break;
        }
    }
    faults
}

fn compare(name: &str, was: Option<&Json>, now: Option<&Json>, moved: &mut Vec<Moved>) {
    match (was, now) {
        (Some(Json::Object(a)), Some(Json::Object(b))) => {
            for (key, value) in a {
                let other = b.iter().find(|(k, _)| k == key).map(|(_, v)| v);
                compare(
                    &super::schema::pointer(name, key),
                    Some(value),
                    other,
                    moved,
                );
            }
            for (key, value) in b.iter().filter(|(key, _)| !a.iter().any(|(k, _)| k == key)) {
                compare(&super::schema::pointer(name, key), None, Some(value), moved);
            }
        }
        (Some(Json::List(a)), Some(Json::List(b))) => {
            for index in 0..a.len().max(b.len()) {
                compare(
                    &format!("{name}/{index}"),
                    a.get(index),
                    b.get(index),
                    moved,
                );
            }
        }
        (was, now) if was == now => {}
        (was, now) => moved.push(Moved {
            name: name.to_owned(),
            was: was.cloned(),
            now: now.cloned(),
        }),
    }
}

/// The text of the record of a sheet: the sheet indented for a person, each answer on a line.
pub fn record(sheet: &Json, watch: &mut Watch) -> Result<String, Vec<Problem>> {
    let document = Document::read(sheet);
    let answers = answers(&document, None, watch)?;
    let cautions = cautions(&answers);
    let indented = super::pretty(sheet).trim_end().replace('\n', "\n  ");
    let parts = [
        "\"rungline\": 1".to_owned(),
        format!("\"version\": {}", to_json(VERSION)),
        format!("\"codata\": {}", crate::constants::CODATA_YEAR),
        format!("\"sheet\": {indented}"),
        format!("\"cautions\": {}", to_json(&cautions)),
        format!("\"answers\": {answers}"),
    ];
    Ok(format!("{{\n  {}\n}}\n", parts.join(",\n  ")))
}

/// The cautions of all answers, each once.
///
/// They are looked for in the text, which can be very long: a quotation mark inside a text is escaped, so
/// the key stands nowhere else.
fn cautions(answers: &str) -> Vec<String> {
    const KEY: &str = "\"cautions\":";
    let mut cautions: Vec<String> = Vec::new();
    for (start, _) in answers.match_indices(KEY) {
        let rest = answers.get(start + KEY.len()..).unwrap_or_default();
        let mut values = serde_json::Deserializer::from_str(rest).into_iter::<Vec<String>>();
        for caution in values.next().and_then(Result::ok).unwrap_or_default() {
            if !cautions.contains(&caution) {
                cautions.push(caution);
            }
        }
    }
    cautions
}
