//! `rungline answer FILE…` and `rungline recheck FILE…`: the same core on a desk, a server or in CI.
//!
//! Reads, writes and sets the exit code; every answer and every fault comes from the library.

use std::fs::File;
use std::io::{self, BufRead, Read, Write};
use std::process::ExitCode;

use rungline_core::problem::Problem;
use rungline_core::sheet::{self, Question};

const USAGE: &str = "\
rungline answer FILE… [--question NAME] [--json]    answer sheets
rungline recheck FILE… [--json]                     recompute records and name what moved

FILE may be - for standard input: one sheet, or a stream with one sheet on each line.
Several files or a stream give one output line each, {\"fault\": …} in a faulted one's place.
--question   one of: states, lines, splitting; without it every answer that the sheet allows
--json       faults as a JSON array on standard error
Exit: 0 answered or reproduced · 1 a record that no longer reproduces · 2 a fault";

#[derive(Clone, Copy, PartialEq, Eq)]
enum Command {
    Answer(Option<Question>),
    Recheck,
}

struct Job {
    command: Command,
    json: bool,
    files: Vec<String>,
}

/// What became of one document.
enum Outcome {
    Line(String),
    Moved(String),
    Faults(Vec<Problem>),
}

fn main() -> ExitCode {
    let arguments: Vec<String> = std::env::args().skip(1).collect();
    if arguments.iter().any(|a| a == "--help" || a == "-h") {
        return say(USAGE, ExitCode::SUCCESS);
    }
    if arguments.iter().any(|a| a == "--version") {
        return say(&format!("rungline {}", sheet::VERSION), ExitCode::SUCCESS);
    }
    match job(&arguments) {
        Ok(job) => run(&job).unwrap_or_else(|error| {
            // A reader that has gone away (a closed pipe) wants no more words.
            if error.kind() != io::ErrorKind::BrokenPipe {
                eprintln!("rungline: {error}");
            }
            ExitCode::from(2)
        }),
        Err(reason) => {
            eprintln!("rungline: {reason}\n\n{USAGE}");
            ExitCode::from(2)
        }
    }
}

fn say(text: &str, code: ExitCode) -> ExitCode {
    match writeln!(io::stdout(), "{text}") {
        Ok(()) => code,
        Err(_) => ExitCode::from(2),
    }
}

fn job(arguments: &[String]) -> Result<Job, String> {
    let mut words = arguments.iter();
    let mut command = match words.next().map(String::as_str) {
        Some("answer") => Command::Answer(None),
        Some("recheck") => Command::Recheck,
        Some(other) => return Err(format!("there is no command \"{other}\"")),
        None => return Err("a command is missing".to_owned()),
    };
    let (mut json, mut files) = (false, Vec::new());
    while let Some(word) = words.next() {
        match (word.as_str(), command) {
            ("--json", _) => json = true,
            ("--question", Command::Answer(_)) => {
                let name = words.next().ok_or("--question needs a name")?;
                command = Command::Answer(Some(question(name)?));
            }
            (other, command_now) if other.starts_with("--") => {
                match (other.strip_prefix("--question="), command_now) {
                    (Some(name), Command::Answer(_)) => {
                        command = Command::Answer(Some(question(name)?))
                    }
                    _ => return Err(format!("there is no option \"{other}\" here")),
                }
            }
            (file, _) => files.push(file.to_owned()),
        }
    }
    if files.is_empty() {
        return Err("a file is missing".to_owned());
    }
    Ok(Job {
        command,
        json,
        files,
    })
}

fn question(name: &str) -> Result<Question, String> {
    Question::ALL
        .into_iter()
        .find(|q| q.name() == name)
        .ok_or_else(|| {
            let known: Vec<&str> = Question::ALL.iter().map(|q| q.name()).collect();
            format!(
                "\"{name}\" is not a question that this version answers; it answers {}",
                known.join(", ")
            )
        })
}

fn run(job: &Job) -> io::Result<ExitCode> {
    let mut report = Report {
        json: job.json,
        many: job.files.len() > 1,
        worst: 0,
    };
    for file in &job.files {
        if file == "-" {
            standard_input(job, &mut report)?;
        } else {
            let outcome = match read_file(file) {
                Ok(text) => process(&text, job.command),
                Err(problem) => Outcome::Faults(vec![problem]),
            };
            report.write(outcome, file)?;
        }
    }
    Ok(ExitCode::from(report.worst))
}

fn read_file(name: &str) -> Result<String, Problem> {
    let fail = |error: io::Error| {
        Problem::new(
            "file-unreadable",
            format!("{name} cannot be read: {error}."),
            0,
            0,
        )
        .bound("A sheet is a text file in UTF-8.")
    };
    let file = File::open(name).map_err(fail)?;
    let mut text = String::new();
    // One byte past the bound is enough for the library to refuse it.
    file.take(sheet::MAX_BYTES as u64 + 1)
        .read_to_string(&mut text)
        .map_err(fail)?;
    Ok(text)
}

fn process(text: &str, command: Command) -> Outcome {
    match command {
        Command::Answer(question) => match sheet::answer_text(text, question) {
            Ok(line) => Outcome::Line(line),
            Err(faults) => Outcome::Faults(faults),
        },
        Command::Recheck => match sheet::recheck_text(text) {
            Ok(check) if check.reproduces() => Outcome::Line(check.to_json()),
            Ok(check) => Outcome::Moved(check.to_json()),
            Err(faults) => Outcome::Faults(faults),
        },
    }
}

/// One document, or one on each line. A document that spans lines never parses by its first line alone.
fn standard_input(job: &Job, report: &mut Report) -> io::Result<()> {
    let input = io::stdin();
    let mut lines = input.lock().lines();
    let Some(first) = next_line(&mut lines)? else {
        return report.write(process("", job.command), "standard input");
    };
    if !sheet::is_json(&first) {
        let mut whole = vec![first];
        for line in lines {
            whole.push(line?);
        }
        let stream = whole
            .iter()
            .skip(1)
            .any(|line| sheet::is_json(line) && line.trim_start().starts_with('{'));
        if !stream || sheet::is_json(&whole.join("\n")) {
            return report.write(process(&whole.join("\n"), job.command), "standard input");
        }
        report.many = true;
        for (index, line) in whole
            .iter()
            .enumerate()
            .filter(|(_, line)| !line.trim().is_empty())
        {
            report.write(process(line, job.command), &format!("line {}", index + 1))?;
        }
        return Ok(());
    }
    let outcome = process(&first, job.command);
    // Whether a fault is written depends on there being more than one sheet; an answer does not wait.
    let mut following = None;
    if matches!(outcome, Outcome::Faults(_)) {
        following = next_line(&mut lines)?;
        report.many |= following.is_some();
    }
    report.write(outcome, "line 1")?;
    report.many = true;
    let mut number = 1;
    while let Some(line) = match following.take() {
        Some(line) => Some(line),
        None => next_line(&mut lines)?,
    } {
        number += 1;
        report.write(process(&line, job.command), &format!("sheet {number}"))?;
    }
    Ok(())
}

fn next_line(lines: &mut impl Iterator<Item = io::Result<String>>) -> io::Result<Option<String>> {
    for line in lines {
        let line = line?;
        if !line.trim().is_empty() {
            return Ok(Some(line));
        }
    }
    Ok(None)
}

struct Report {
    json: bool,
    many: bool,
    worst: u8,
}

impl Report {
    fn write(&mut self, outcome: Outcome, name: &str) -> io::Result<()> {
        let mut output = io::stdout().lock();
        match outcome {
            Outcome::Line(line) => writeln!(output, "{line}")?,
            Outcome::Moved(line) => {
                self.worst = self.worst.max(1);
                writeln!(output, "{line}")?;
            }
            Outcome::Faults(faults) => {
                self.worst = 2;
                if self.many {
                    writeln!(output, "{}", sheet::fault_line(&faults))?;
                }
                let mut errors = io::stderr().lock();
                if self.json {
                    writeln!(errors, "{}", sheet::faults_json(&faults))?;
                } else {
                    for fault in &faults {
                        writeln!(errors, "{name}: {}", sheet::fault_words(fault))?;
                    }
                }
            }
        }
        output.flush()
    }
}
