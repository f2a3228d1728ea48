//! A table of measured levels as text: rows of configuration, term, J and energy, or of names and energies.
//!
//! Columns are found by their headings, separators by what the first line holds. Rows of other
//! configurations than the sheet's are left out and counted, for a table mostly holds many more; a row
//! that cannot be read is a fault with its line.

use serde::Serialize;

use crate::numerics::sorted_map::SortedMap;
use crate::problem::Problem;
use crate::quantity::signs::clipped;
use crate::quantity::{self, Dimension};

use super::document::{Document, LevelOf};

/// The most rows that are read.
const MAX_ROWS: usize = 100_000;
/// The most rows that are told one by one.
const MAX_TOLD: usize = 50;

/// What a table gave.
#[derive(Debug, Default, Serialize)]
pub struct LevelsFile {
    /// The pins as `measured` takes them.
    pub measured: SortedMap<String, String>,
    /// Rows taken.
    pub taken: usize,
    /// Rows left out.
    pub left: usize,
    /// Why, for the first of them.
    pub left_rows: Vec<LeftRow>,
    /// What could not be read, with lines.
    pub faults: Vec<Problem>,
}

/// A row that was left out.
#[derive(Debug, Serialize)]
pub struct LeftRow {
    /// From 1.
    pub line: u64,
    /// In words.
    pub why: String,
}

/// A record and the line it ends in.
struct Record {
    line: u64,
    cells: Vec<String>,
}

/// Which column holds what.
#[derive(Clone, Copy, Debug, Default)]
struct Columns {
    name: Option<usize>,
    configuration: Option<usize>,
    term: Option<usize>,
    j: Option<usize>,
    energy: Option<usize>,
    unit: Option<&'static str>,
}

/// The pins in a table, for the levels of this document.
pub fn read(document: &Document, text: &str) -> LevelsFile {
    let mut file = LevelsFile::default();
    if text.len() > super::json::MAX_SHEET_BYTES {
        let problem = Problem::new(
            "file-too-large",
            format!("This table has {} bytes.", text.len()),
            0,
            0,
        );
        file.faults.push(problem.bound(format!(
            "At most {} bytes are read.",
            super::json::MAX_SHEET_BYTES
        )));
        return file;
    }
    let records = records(text.trim_start_matches('\u{FEFF}'));
    let mut rows = records
        .iter()
        .filter(|r| r.cells.iter().any(|c| !c.is_empty()));
    let Some(first) = rows.next() else {
        file.faults.push(
            Problem::new("table-empty", "This table has no rows.", 0, 0)
                .bound("It takes a heading and one level in each line."),
        );
        return file;
    };
    let mut columns = Columns::of(first);
    let mut pins: Vec<(LevelOf, String, String)> = Vec::new();
    if columns.energy.is_none() {
        columns = Columns {
            name: Some(0),
            energy: Some(1),
            ..Columns::default()
        };
        let second = first.cells.get(1);
        if second.is_none_or(|cell| value(cell, None).is_err()) {
            file.faults.push(no_columns(first));
            return file;
        }
        file.take(document, columns, first, &mut pins);
    }
    for row in rows.take(MAX_ROWS) {
        file.take(document, columns, row, &mut pins);
    }
    file.taken = pins.len();
    file.measured = pins
        .into_iter()
        .map(|(_, name, value)| (name, value))
        .collect();
    if file.taken == 0 && file.faults.is_empty() {
        let labels: Vec<&str> = document.entries.iter().map(|e| e.label.as_str()).collect();
        file.faults.push(
            Problem::new(
                "table-without-these-levels",
                "No row of this table is a level of this sheet.",
                0,
                0,
            )
            .bound(format!("Its configurations: {}.", labels.join(", "))),
        );
    }
    file
}

impl LevelsFile {
    fn leave(&mut self, line: u64, why: String) {
        self.left += 1;
        if self.left_rows.len() < MAX_TOLD {
            self.left_rows.push(LeftRow { line, why });
        }
    }

    fn fault(&mut self, code: &'static str, message: String, bound: &str) {
        if self.faults.len() < MAX_TOLD {
            self.faults
                .push(Problem::new(code, message, 0, 0).bound(bound));
        }
    }

    fn take(
        &mut self,
        document: &Document,
        columns: Columns,
        row: &Record,
        pins: &mut Vec<(LevelOf, String, String)>,
    ) {
        let line = row.line;
        let cell = |column: Option<usize>| {
            let cell = column.and_then(|column| row.cells.get(column));
            cell.map(String::as_str).unwrap_or_default()
        };
        let energy = cell(columns.energy);
        if energy.is_empty() {
            return self.leave(line, "it has no energy".to_owned());
        }
        let value = match value(energy, columns.unit) {
            Ok(value) => value,
            Err(problem) => {
                return self.fault(
                    "table-row-unreadable",
                    format!("Line {line}: {}", problem.message),
                    problem.bound.as_deref().unwrap_or("A number stands there."),
                );
            }
        };
        let Some(name) = name(cell, columns) else {
            return self.leave(line, "it names no term and J".to_owned());
        };
        match document.level(&name) {
            Ok(Some(level)) => {
                if pins.iter().any(|(known, ..)| *known == level) {
                    let label = document.level_label(&level);
                    return self.fault(
                        "level-repeated",
                        format!("Line {line}: {label} stood there before."),
                        "Each level has one measured energy.",
                    );
                }
                let label = document.level_label(&level);
                pins.push((level, label, value));
            }
            Ok(None) => self.leave(line, "the sheet's configurations are not known".to_owned()),
            Err(problems) => {
                let why = problems.first().map(|problem| problem.message.as_str());
                let why = why.unwrap_or("its name cannot be read.");
                self.leave(line, why.trim_end_matches('.').to_owned());
            }
        }
    }
}

impl Columns {
    fn of(heading: &Record) -> Columns {
        let mut columns = Columns::default();
        for (place, cell) in heading.cells.iter().enumerate() {
            let (word, unit) = match cell.split_once(['(', '[', '/']) {
                Some((word, unit)) => (word, Some(unit.trim_end_matches([')', ']']).trim())),
                None => (cell.as_str(), None),
            };
            let word = word.trim().to_ascii_lowercase();
            let unit = unit.and_then(|unit| Dimension::Wavenumber.unit(unit));
            let slot = match word.as_str() {
                "configuration" | "config" | "conf" | "conf." => &mut columns.configuration,
                "term" => &mut columns.term,
                "j" => &mut columns.j,
                "label" | "name" => &mut columns.name,
                "energy" | "e" | "wavenumber" => &mut columns.energy,
                "level" if unit.is_some() => &mut columns.energy,
                "level" => &mut columns.name,
                _ => continue,
            };
            if slot.is_none() {
                *slot = Some(place);
                if columns.energy == Some(place) {
                    columns.unit = unit.map(|unit| unit.symbol);
                }
            }
        }
        // Beside a configuration and a term a column "level" without a unit is the energy.
        if columns.energy.is_none() && columns.configuration.is_some() {
            columns.energy = columns.name.take();
        }
        let named = columns.name.is_some() || (columns.term.is_some() && columns.j.is_some());
        match named {
            true => columns,
            false => Columns::default(),
        }
    }
}

fn no_columns(heading: &Record) -> Problem {
    Problem::new(
        "table-without-columns",
        format!(
            "The first line, \"{}\", does not say which column holds what.",
            clipped(&heading.cells.join(", "))
        ),
        0,
        0,
    )
    .bound("Headings: configuration, term, J and energy (cm-1), or level and energy.")
}

/// The name of a row's level: `2p2 3P1`.
fn name<'a>(cell: impl Fn(Option<usize>) -> &'a str, columns: Columns) -> Option<String> {
    let whole = cell(columns.name);
    if !whole.is_empty() && (columns.term.is_none() || cell(columns.term).is_empty()) {
        return Some(whole.to_owned());
    }
    let (term, j) = (cell(columns.term), cell(columns.j));
    // Tables put letters that tell repeats apart before the term.
    let term = term.split_whitespace().next_back()?;
    if j.is_empty() {
        return None;
    }
    let mut configuration = String::new();
    let mut depth = 0_usize;
    // Parent terms stand in brackets: 3d6.(5D).4s.
    for c in cell(columns.configuration).chars() {
        match c {
            '(' | '<' => depth += 1,
            ')' | '>' => depth = depth.saturating_sub(1),
            '.' if depth == 0 => configuration.push(' '),
            c if depth == 0 => configuration.push(c),
            _ => {}
        }
    }
    Some(format!("{} {term}{j}", configuration.trim()))
}

/// An energy as `measured` takes it.
fn value(cell: &str, unit: Option<&'static str>) -> Result<String, Problem> {
    // Tables mark what is uncertain or interpolated.
    let marks = |c: char| matches!(c, '[' | ']' | '(' | ')' | '?' | '*' | '"') || c.is_whitespace();
    let bare = cell.trim_matches(marks);
    let text = match bare.chars().any(char::is_alphabetic) && bare.contains(' ') {
        true => bare.to_owned(),
        false => format!("{bare} {}", unit.unwrap_or("cm-1")),
    };
    quantity::quantity(&text, Dimension::Wavenumber).map(|typed| typed.text)
}

/// The separator of the first line: a tab, a semicolon or a comma.
fn separator(text: &str) -> char {
    let line = text.lines().find(|line| !line.trim().is_empty());
    let line = line.unwrap_or_default();
    let marks = ['\t', ';'].into_iter();
    marks
        .into_iter()
        .find(|mark| line.contains(*mark))
        .unwrap_or(',')
}

/// The records of a separated text, cells trimmed and freed from a spreadsheet's `="…"`: separators and
/// line ends inside quotation marks belong to the cell, and two marks there are one (RFC 4180).
fn records(text: &str) -> Vec<Record> {
    let separator = separator(text);
    let mut records = Vec::new();
    let (mut cells, mut current) = (Vec::new(), String::new());
    let (mut line, mut quoted) = (1, false);
    for c in text.chars().chain(['\n']) {
        match c {
            '"' => quoted = !quoted,
            '\n' if !quoted => {
                cells.push(cell(&current));
                records.push(Record {
                    line,
                    cells: std::mem::take(&mut cells),
                });
                current.clear();
                if records.len() > MAX_ROWS {
                    return records;
                }
            }
            c if c == separator && !quoted => {
                cells.push(cell(&current));
                current.clear();
                continue;
            }
            _ => {}
        }
        line += u64::from(c == '\n');
        if c != '\n' {
            current.push(c);
        }
    }
    records
}

fn cell(text: &str) -> String {
    let bare = text.trim().trim_start_matches('=').trim_matches('"');
    bare.trim().to_owned()
}

#[cfg(test)]
mod tests {
    use super::*;

    fn file(text: &str) -> LevelsFile {
        let sheet = crate::sheet::json::read(
            r#"{"rungline":1,"species":"C I","configurations":["2p2","2p 3s"]}"#,
        );
        read(&Document::read(&sheet.unwrap()), text)
    }

    fn measured(file: &LevelsFile) -> Vec<(&str, &str)> {
        let entries = file.measured.entries();
        entries
            .iter()
            .map(|(k, v)| (k.as_str(), v.as_str()))
            .collect()
    }

    #[test]
    fn tables_of_every_make_are_read() {
        let expected = [
            ("2p 3s 3P1", "60352.63 cm-1"),
            ("2p2 1D2", "10192.63 cm-1"),
            ("2p2 3P1", "16.40 cm-1"),
        ];
        for text in [
            "Configuration,Term,J,Level (cm-1)\n2s2.2p2,3P,1,16.40\n2s2.2p2,1D,2,10192.63\n2s2.2p.3s,3P*,1,60352.63\n",
            "\u{FEFF}\"Configuration\"\t\"Term\"\t\"J\"\t\"Level (cm-1)\"\n=\"2s2.2p2\"\t\"3P\"\t\"1\"\t\"16.40\"\n\n2p2\t1D\t2\t[10192.63]\r\n2p.(2P*).3s\t3P°\t1\t60352.63?",
            "level,energy\n2p2 3P1,16.40\n2p2 1D2,10192.63 cm-1\n2p 3s 3P1,60352.63\n",
            "2p2 3P1;16.40\n2p2 1D2;10192.63\n2p 3s 3P1;60352.63",
        ] {
            let found = file(text);
            assert_eq!(found.faults, [], "{text}");
            assert_eq!(measured(&found), expected, "{text}");
            assert_eq!((found.taken, found.left), (3, 0));
        }
        let comma = file("level;energy (cm-1)\n2p2 3P1;16,40\n");
        assert_eq!(measured(&comma), [("2p2 3P1", "16,40 cm-1")]);
        let volt = file("conf,term,J,energy (eV)\n2p2,1D,2,1.2637284\n");
        assert_eq!(measured(&volt), [("2p2 1D2", "1.2637284 eV")]);
    }

    #[test]
    fn what_does_not_fit_is_left_or_told_with_its_line() {
        let found = file(
            "conf,term,J,energy\n2p2,3P,1,16.4\n2p.4s,3P*,1,78000\n2p2,1D,2,abc\n2p2,3P,1,17\n2p2,3P,2,\n2p2,3P,7,1\n",
        );
        assert_eq!((found.taken, found.left), (1, 3));
        let codes: Vec<_> = found
            .faults
            .iter()
            .map(|f| (f.code, f.message.as_str()))
            .collect();
        assert_eq!(codes.len(), 2, "{codes:?}");
        assert_eq!(codes[0].0, "table-row-unreadable");
        assert!(codes[0].1.starts_with("Line 4: "), "{codes:?}");
        assert_eq!(codes[1].0, "level-repeated");
        assert!(codes[1].1.starts_with("Line 5: "), "{codes:?}");
        assert_eq!(found.left_rows[0].line, 3);
        for (text, code) in [
            ("", "table-empty"),
            ("what,is,this\n1,2,3\n", "table-without-columns"),
            (
                "conf,term,J,energy\n3d,2D,3/2,1\n",
                "table-without-these-levels",
            ),
        ] {
            assert_eq!(file(text).faults[0].code, code, "{text}");
        }
    }
}
