//! Shared by the native checks: where the vectors are, how closely two numbers agree, and the
//! validation report, which is written from what the checks measured.

pub mod figures;
pub mod model;
pub mod sheets;

use std::collections::BTreeMap;
use std::fs;
use std::path::{Path, PathBuf};
use std::sync::Mutex;

use rungline_core::numerics::order::sort_by;
use serde::{Deserialize, Serialize};

/// The folder `tests/` of the repository.
pub fn folder() -> PathBuf {
    PathBuf::from(env!("CARGO_MANIFEST_DIR"))
}

/// The text of a file under `tests/vectors`.
pub fn vector(name: &str) -> String {
    let path = folder().join("vectors").join(name);
    fs::read_to_string(&path).unwrap_or_else(|error| panic!("{}: {error}", path.display()))
}

/// The JSON of a file under `tests/vectors`.
pub fn vector_json(name: &str) -> serde_json::Value {
    serde_json::from_str(&vector(name)).unwrap_or_else(|error| panic!("{name}: {error}"))
}

/// The rows of a table under `tests/vectors`, each by the names of its columns.
pub fn vector_rows(name: &str) -> Vec<BTreeMap<String, String>> {
    let text = vector(name);
    let mut reader = csv::ReaderBuilder::new()
        .comment(Some(b'#'))
        .from_reader(text.as_bytes());
    reader
        .deserialize()
        .map(|row| row.unwrap_or_else(|error| panic!("{name}: {error}")))
        .collect()
}

/// Median and largest of the sizes |x|; of an even number, the median is the mean of the middle two.
pub fn median_and_largest(values: &[f64]) -> (f64, f64) {
    let mut sizes: Vec<f64> = values.iter().map(|value| value.abs()).collect();
    sort_by(&mut sizes, f64::total_cmp);
    let middle = sizes.len() / 2;
    let median = if sizes.len() % 2 == 1 {
        sizes[middle]
    } else {
        f64::midpoint(sizes[middle - 1], sizes[middle])
    };
    (median, sizes[sizes.len() - 1])
}

/// |a − b| / |b|, or |a − b| where b is zero.
pub fn relative_error(a: f64, b: f64) -> f64 {
    if b == 0.0 {
        (a - b).abs()
    } else {
        ((a - b) / b).abs()
    }
}

/// One line of the validation report.
#[derive(Clone, Debug, Serialize, Deserialize)]
pub struct Row {
    /// What was compared: "6j symbols".
    pub quantity: String,
    /// How many cases.
    pub cases: usize,
    /// The worst deviation found.
    pub worst: f64,
    /// What was allowed; 0 for counts and names that must be equal.
    pub tolerance: f64,
    /// Relative, absolute, or "cases that differ".
    pub measure: String,
    /// Where the reference comes from.
    pub source: String,
}

static WRITING: Mutex<()> = Mutex::new(());

/// Checks one row against its tolerance and puts it into `tests/reports/validation.md`.
///
/// `name` is the row's own, stable: a later run replaces the row.
pub fn report(name: &str, row: Row) {
    let (worst, tolerance, quantity) = (row.worst, row.tolerance, row.quantity.clone());
    {
        let _guard = WRITING
            .lock()
            .unwrap_or_else(|poisoned| poisoned.into_inner());
        let parts = folder().join("reports").join("parts");
        fs::create_dir_all(&parts).expect("the report's folder can be made");
        let text = serde_json::to_string_pretty(&row).expect("a row is plain data");
        fs::write(parts.join(format!("{name}.json")), text + "\n")
            .expect("the report can be written");
        assemble(&parts);
    }
    assert!(row.cases > 0, "{quantity}: no case was checked");
    assert!(
        worst <= tolerance,
        "{quantity}: worst {worst:e}, allowed {tolerance:e}"
    );
}

/// Cases of the report one by one, below the rows that sum them up.
#[derive(Clone, Debug, Default, Serialize, Deserialize)]
pub struct Listing {
    /// What is listed: "Fine-structure intervals of ground terms".
    pub title: String,
    /// What a reader has to know before the rows: settings, sources, judgements.
    pub note: String,
    /// The heads of the columns.
    pub columns: Vec<String>,
    /// The cells of each row.
    pub rows: Vec<Vec<String>>,
}

impl Listing {
    /// An empty one.
    pub fn new(title: &str, note: &str, columns: &[&str]) -> Self {
        Listing {
            title: title.into(),
            note: note.into(),
            columns: columns.iter().map(|&head| head.into()).collect(),
            rows: Vec::new(),
        }
    }

    fn written(&self) -> String {
        let line = |cells: &[String]| format!("| {} |\n", cells.join(" | "));
        let mut text = format!("\n## {}\n\n{}\n\n", self.title, self.note);
        text.push_str(&line(&self.columns));
        text.push_str(&format!("|{}\n", "---|".repeat(self.columns.len())));
        for row in &self.rows {
            text.push_str(&line(row));
        }
        text
    }
}

/// Puts a list of cases into `tests/reports/validation.md`; `name` as in [`report`].
pub fn list(name: &str, listing: &Listing) {
    assert!(
        (listing.rows.iter()).all(|row| row.len() == listing.columns.len()),
        "{name}: a cell for each column"
    );
    let _guard = WRITING
        .lock()
        .unwrap_or_else(|poisoned| poisoned.into_inner());
    let lists = folder().join("reports").join("lists");
    fs::create_dir_all(&lists).expect("the report's folder can be made");
    let text = serde_json::to_string_pretty(listing).expect("a list is plain data");
    fs::write(lists.join(format!("{name}.json")), text + "\n").expect("the report can be written");
    assemble(&folder().join("reports").join("parts"));
}

/// The files of a folder by name; none where there is no folder.
fn files(folder: &Path) -> Vec<PathBuf> {
    let mut names: Vec<PathBuf> = (fs::read_dir(folder).into_iter().flatten())
        .filter_map(|entry| Some(entry.ok()?.path()))
        .collect();
    names.sort();
    names
}

fn assemble(parts: &Path) {
    let mut text = String::from(
        "# Validation\n\nWritten by the native tests from what they measured; do not edit.\n\n\
         | quantity | cases | worst | allowed | measure | source |\n|---|---|---|---|---|---|\n",
    );
    for path in files(parts) {
        let part = fs::read_to_string(&path).expect("a part can be read");
        let row: Row = serde_json::from_str(&part).expect("a part is a row");
        text.push_str(&format!(
            "| {} | {} | {:.1e} | {:.1e} | {} | {} |\n",
            row.quantity, row.cases, row.worst, row.tolerance, row.measure, row.source
        ));
    }
    let reports = parts.parent().expect("the parts lie in a folder");
    for path in files(&reports.join("lists")) {
        let list = fs::read_to_string(&path).expect("a list can be read");
        let listing: Listing = serde_json::from_str(&list).expect("a list");
        text.push_str(&listing.written());
    }
    fs::write(reports.join("validation.md"), text).expect("the report can be written");
}
