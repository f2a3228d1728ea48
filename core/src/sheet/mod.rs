//! The sheet: the one document a person writes, its questions, its answers, its record.
//!
//! Every answer is a pure function of the sheet and the same bytes on every computer. The doors
//! (`web`, the command `rungline`) call the functions of this module and translate nothing but
//! their own calling conventions.

mod answer;
mod basis_names;
mod chart;
mod choice;
mod compositions;
mod conditions;
mod decays;
mod document;
mod energy_case;
mod entry;
mod field;
mod formula;
mod given;
mod ground;
mod ionised;
mod json;
mod json_repair;
mod lack;
mod level_alone;
mod level_names;
mod levels;
mod levels_between;
mod levels_facts;
mod levels_file;
mod levels_limits;
mod levels_rows;
mod levels_words;
mod light;
mod line_ends;
mod line_rows;
mod line_wavelength;
mod lines;
mod lines_energies;
mod lines_relative;
mod lines_spectrum_words;
mod lines_words;
mod measured;
mod nucleus;
mod orbitals;
mod orbitals_between;
mod orbitals_cache;
mod orbitals_case;
mod orbitals_closed;
mod orbitals_field;
mod orbitals_rows;
mod orbitals_sample;
mod orbitals_words;
mod pairs;
mod parameter_name;
mod parameter_rows;
mod parameters;
mod placed;
mod reading;
mod record;
mod rich;
mod schema;
mod schema_check;
mod sections;
mod shells;
mod solved;
mod solved_lines;
mod splitting;
mod splitting_estimate;
pub mod splitting_estimated;
mod splitting_full;
mod splitting_joins;
mod splitting_keeps;
mod splitting_limits;
mod splitting_line;
mod splitting_linear;
mod splitting_manifolds;
mod splitting_map;
mod splitting_names;
mod splitting_nuclei;
mod splitting_pattern;
mod splitting_resonances;
mod splitting_rows;
mod splitting_searched;
mod splitting_sets;
mod splitting_words;
mod splitting_working;
mod states;
mod states_schemes;
mod states_terms;
mod states_words;
mod structure;
mod unused;
mod watch;
mod window;

use serde::Serialize;

use crate::problem::Problem;

pub use chart::chart;
pub use document::Document;
pub use json::{Json, MAX_BYTES};
pub use reading::reading;
pub use record::{Recheck, recheck_text};
pub use sections::sections_message;
pub use watch::{Progress, Watch, unwatched};

/// The program's version, as records carry it.
pub const VERSION: &str = env!("CARGO_PKG_VERSION");

/// A question that a sheet can ask.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Question {
    /// Which states does the configuration allow, and which lies lowest?
    States,
    /// Which radial functions, with what energies, radii, integrals and ζ?
    Orbitals,
    /// Which levels, at which energies, made of what?
    Levels,
    /// Which lines are allowed, and how strong are they beside each other?
    Lines,
    /// How does the line split in the field?
    Splitting,
}

impl Question {
    /// All questions in the order of work.
    pub const ALL: [Question; 5] = [
        Question::States,
        Question::Orbitals,
        Question::Levels,
        Question::Lines,
        Question::Splitting,
    ];

    /// Its key among the answers.
    pub fn name(self) -> &'static str {
        match self {
            Question::States => "states",
            Question::Orbitals => "orbitals",
            Question::Levels => "levels",
            Question::Lines => "lines",
            Question::Splitting => "splitting",
        }
    }

    /// Whether its answer hangs on what stands at a pointer into the sheet.
    pub fn hangs_on(self, path: &str) -> bool {
        const OF_SPLITTING: [&str; 5] = ["field", "line", "nucleus", "isotopes", "level"];
        const OF_LINES: [&str; 6] = [
            "measured",
            "window",
            "medium",
            "source",
            "refractive_index",
            "air",
        ];
        let key = path.split('/').nth(1).unwrap_or_default();
        match self {
            Question::Splitting => true,
            _ if OF_SPLITTING.contains(&key) => false,
            Question::Levels | Question::Lines => true,
            _ if OF_LINES.contains(&key) => false,
            Question::Orbitals => true,
            Question::States => key != "structure",
        }
    }

    fn named(name: &str) -> Option<Question> {
        Question::ALL.into_iter().find(|q| q.name() == name)
    }
}

/// The answer of a checked sheet to one question, as JSON text.
///
/// # Errors
/// What the question lacks, as a fault; a long calculation that found no end or was stopped.
pub fn answer(
    document: &Document,
    question: Question,
    watch: &mut Watch,
) -> Result<String, Vec<Problem>> {
    let text = match question {
        Question::States => states::answer(document).map(|a| to_json(&a)),
        Question::Orbitals => orbitals::answer(document, watch).map(|a| to_json(&a)),
        Question::Levels => levels::answer(document, watch).map(|a| to_json(&a)),
        Question::Lines => lines::answer(document, watch).map(|a| to_json(&a)),
        Question::Splitting => splitting::answer(document, watch).map(|a| to_json(&a)),
    };
    text.map_err(|problem| vec![problem])
}

/// Every answer that the document allows, or the one asked for: `{"states":{…}}`.
fn answers(
    document: &Document,
    question: Option<Question>,
    watch: &mut Watch,
) -> Result<String, Vec<Problem>> {
    if !document.faults.is_empty() {
        return Err(document.faults.clone());
    }
    if let Some(question) = question {
        return Ok(format!(
            "{{\"{}\":{}}}",
            question.name(),
            answer(document, question, watch)?
        ));
    }
    let mut parts = Vec::new();
    let mut first_fault = None;
    for question in Question::ALL {
        match answer(document, question, watch) {
            Ok(text) => parts.push(format!("\"{}\":{text}", question.name())),
            // What a question lacks or cannot do is no reason to keep the other answers back.
            Err(faults) => first_fault = first_fault.or(Some(faults)),
        }
    }
    match (parts.is_empty(), first_fault) {
        (true, Some(faults)) => Err(faults),
        _ => Ok(format!("{{{}}}", parts.join(","))),
    }
}

/// The line that `rungline answer` prints for the text of a sheet.
///
/// # Errors
/// Every fault of the text, in the order of the input.
pub fn answer_text(text: &str, question: Option<Question>) -> Result<String, Vec<Problem>> {
    let json = json::read(text).map_err(|p| vec![p])?;
    let (sheet, _) = record::split(&json)?;
    let document = Document::read(sheet);
    Ok(format!(
        "{{\"rungline\":1,\"answers\":{}}}",
        answers(&document, question, &mut unwatched)?
    ))
}

/// Whether a text is one complete JSON value.
pub fn is_json(text: &str) -> bool {
    json::read(text).is_ok()
}

/// The answer to one question for the page: `{"answer":{…}}` or `{"faults":[…]}`.
pub fn answer_message(sheet: &Json, question: &str) -> String {
    answer_message_watched(sheet, question, &mut unwatched)
}

/// [`answer_message`], telling `watch` how far it has come.
pub fn answer_message_watched(sheet: &Json, question: &str, watch: &mut Watch) -> String {
    let result = match Question::named(question) {
        Some(question) => {
            let mut document = Document::read(sheet);
            // A fault elsewhere in the sheet is told at its own field.
            let faults = &mut document.faults;
            faults.retain(|fault| question.hangs_on(&fault.path));
            if document.faults.is_empty() {
                answer(&document, question, watch)
            } else {
                Err(document.faults)
            }
        }
        None => Err(vec![
            Problem::new(
                "unknown-question",
                format!("There is no question \"{question}\"."),
                0,
                0,
            )
            .bound("The questions are states, orbitals, levels, lines and splitting."),
        ]),
    };
    match result {
        Ok(text) => format!("{{\"answer\":{text}}}"),
        Err(faults) => format!("{{\"faults\":{}}}", faults_json(&faults)),
    }
}

/// Seconds and megabytes that an answer will take, for the page to decide whether to ask first.
pub fn estimate_message(sheet: &Json, question: &str) -> String {
    #[derive(Serialize)]
    struct Estimate {
        seconds: f64,
        megabytes: f64,
    }
    let document = Document::read(sheet);
    // Measured in a browser: about 4 µs and 600 bytes for each row of an answer.
    let rows = |rows: f64| (rows * 4e-6, rows * 6e-4);
    let (seconds, megabytes) = match Question::named(question) {
        Some(Question::States) => rows(states::rows(&document)),
        Some(Question::Orbitals) => orbitals::estimate(&document),
        Some(Question::Levels) => solved::estimate(&document, false),
        Some(Question::Lines) if energy_case::need(&document).is_none() => {
            solved::estimate(&document, true)
        }
        Some(Question::Lines) => rows(pairs::rows(&document)),
        Some(Question::Splitting) => splitting_estimate::estimate(&document, 2.0),
        None if question == "splitting_map" => splitting_estimate::estimate(&document, 200.0),
        None => (0.0, 0.0),
    };
    to_json(&Estimate {
        seconds: 0.002 + seconds,
        megabytes: 4.0 + megabytes,
    })
}

/// The densities of all subshells for their picture: `{"curves":[…]}` or `{"faults":[…]}`.
///
/// They stand beside the answer and not in it, so that answers and records stay small.
pub fn curves_message(sheet: &Json, watch: &mut Watch) -> String {
    let document = Document::read(sheet);
    let curves = if document.faults.is_empty() {
        orbitals::curves(&document, watch).map_err(|problem| vec![problem])
    } else {
        Err(document.faults)
    };
    match curves {
        Ok(curves) => to_json(&curves),
        Err(faults) => format!("{{\"faults\":{}}}", faults_json(&faults)),
    }
}

/// States and components of a sheet over the field, for their picture: `{"map":{…}}` or `{"faults":[…]}`.
pub fn splitting_map_message(sheet: &Json, watch: &mut Watch) -> String {
    let document = Document::read(sheet);
    let map = if document.faults.is_empty() {
        splitting_map::map(&document, watch).map_err(|problem| vec![problem])
    } else {
        Err(document.faults)
    };
    match map {
        Ok(map) => format!("{{\"map\":{}}}", to_json(&map)),
        Err(faults) => format!("{{\"faults\":{}}}", faults_json(&faults)),
    }
}

/// The pins in a table of levels for the levels of a sheet:
/// `{"measured":{…},"taken":…,"left":…,"left_rows":[…],"faults":[…]}`.
pub fn measured_message(text: &str, sheet: &Json) -> String {
    to_json(&levels_file::read(&Document::read(sheet), text))
}

/// The version, the year of the constants and the questions of this build.
pub fn about() -> String {
    #[derive(Serialize)]
    struct About {
        version: &'static str,
        codata: u16,
        questions: Vec<&'static str>,
        /// Licences of the data that are compiled in.
        notices: &'static str,
    }
    to_json(&About {
        version: VERSION,
        codata: crate::constants::CODATA_YEAR,
        questions: Question::ALL.iter().map(|q| q.name()).collect(),
        notices: crate::elements::NOTICE,
    })
}

/// What a file holds: `{"sheet":…,"record":null|{…}}` or `{"faults":[…]}`.
///
/// A sheet with faults still opens: its fields show them.
pub fn open_message(text: &str, watch: &mut Watch) -> String {
    #[derive(Serialize)]
    struct Opened<'a> {
        sheet: &'a Json,
        record: Option<Recheck>,
    }
    match json::read(text) {
        Err(problem) => format!("{{\"faults\":{}}}", faults_json(&[problem])),
        Ok(json) => match record::open(&json, watch) {
            Ok((sheet, record)) => to_json(&Opened { sheet, record }),
            Err(faults) => format!("{{\"faults\":{}}}", faults_json(&faults)),
        },
    }
}

/// The record of a sheet for the page: `{"record":"text"}` or `{"faults":[…]}`.
pub fn record_message(sheet: &Json) -> String {
    record_message_watched(sheet, &mut unwatched)
}

/// [`record_message`], telling `watch` how far it has come.
pub fn record_message_watched(sheet: &Json, watch: &mut Watch) -> String {
    #[derive(Serialize)]
    struct Recorded {
        record: String,
    }
    match record::record(sheet, watch) {
        Ok(record) => to_json(&Recorded { record }),
        Err(faults) => format!("{{\"faults\":{}}}", faults_json(&faults)),
    }
}

/// A sheet as its file holds it: indented JSON that a person can read and edit.
pub fn pretty(sheet: &Json) -> String {
    let mut text = serde_json::to_string_pretty(sheet).unwrap_or_default();
    text.push('\n');
    text
}

/// Faults as a JSON array.
pub fn faults_json(faults: &[Problem]) -> String {
    to_json(&faults)
}

/// The line of a stream that stands in a faulted sheet's place.
pub fn fault_line(faults: &[Problem]) -> String {
    format!("{{\"fault\":{}}}", faults_json(faults))
}

/// A fault as the command prints it.
pub fn fault_words(fault: &Problem) -> String {
    let mut text = String::new();
    if !fault.path.is_empty() {
        text.push_str(&fault.path);
        text.push(' ');
    }
    if fault.end > fault.start {
        text.push_str(&format!("({}–{}) ", fault.start, fault.end));
    }
    text.push_str(&fault.message);
    if let Some(bound) = &fault.bound {
        text.push(' ');
        text.push_str(bound);
    }
    for way in &fault.ways {
        text.push_str(&format!(" [{}]", way.label));
    }
    text
}

/// JSON text of a value that serialises without fail: no maps with odd keys, no foreign types.
fn to_json<T: Serialize + ?Sized>(value: &T) -> String {
    rungline_kernel::json_text(value)
}
