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
--question   one of: states, orbitals, levels, lines, splitting; without it every answer that the sheet allows
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
        Err(problem) => {
            if arguments.iter().any(|a| a == "--json") {
                eprintln!("{}", sheet::faults_json(&[problem]));
            } else {
                eprintln!("rungline: {}\n\n{USAGE}", sheet::fault_words(&problem));
            }
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

const COMMANDS: &str = "The commands are answer and recheck.";

fn fault(code: &'static str, message: impl Into<String>, bound: &str) -> Problem {
    Problem::new(code, message, 0, 0).bound(bound)
}

fn unknown_option(option: &str, command: Command) -> Problem {
    let (name, known) = match command {
        Command::Answer(_) => (
            "answer",
            "--question NAME and --json; a file whose name begins with a hyphen is written ./-name",
        ),
        Command::Recheck => (
            "recheck",
            "--json alone; a file whose name begins with a hyphen is written ./-name",
        ),
    };
    fault(
        "unknown-option",
        format!("\"{name}\" has no option \"{option}\"."),
        &format!("Its options: {known}."),
    )
}

fn job(arguments: &[String]) -> Result<Job, Problem> {
    let mut words = arguments.iter();
    let mut command = match words.next().map(String::as_str) {
        Some("answer") => Command::Answer(None),
        Some("recheck") => Command::Recheck,
        Some(option) if option.starts_with('-') => {
            let message = format!("The option \"{option}\" stands where a command has to stand.");
            return Err(fault("command-missing", message, COMMANDS));
        }
        Some(other) => {
            let message = format!("There is no command \"{other}\".");
            return Err(fault("unknown-command", message, COMMANDS));
        }
        None => return Err(fault("command-missing", "A command is missing.", COMMANDS)),
    };
    let (mut json, mut files) = (false, Vec::new());
    while let Some(word) = words.next() {
        match (word.as_str(), command) {
            ("--json", _) => json = true,
            ("--question", Command::Answer(_)) => {
                let name = words.next().map_or("", String::as_str);
                command = Command::Answer(Some(question(name)?));
            }
            (other, command_now) if other.len() > 1 && other.starts_with('-') => {
                match (other.strip_prefix("--question="), command_now) {
                    (Some(name), Command::Answer(_)) => {
                        command = Command::Answer(Some(question(name)?))
                    }
                    _ => return Err(unknown_option(other, command_now)),
                }
            }
            (file, _) => files.push(file.to_owned()),
        }
    }
    if files.is_empty() {
        return Err(fault(
            "file-missing",
            "A file is missing.",
            "Name one or more, or - for standard input.",
        ));
    }
    Ok(Job {
        command,
        json,
        files,
    })
}

fn question(name: &str) -> Result<Question, Problem> {
    Question::ALL
        .into_iter()
        .find(|q| q.name() == name)
        .ok_or_else(|| {
            let known: Vec<&str> = Question::ALL.iter().map(|q| q.name()).collect();
            let message = match name {
                "" => "--question needs a name.".to_owned(),
                _ => format!("\"{name}\" is not a question that this version answers."),
            };
            let bound = format!("It answers {}.", known.join(", "));
            fault("unknown-question", message, &bound)
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

/// One line of the input, or the fault that makes it none.
type Line = Result<String, Problem>;

/// Reads the next line, at most one byte more of it than the library takes; longer ones are passed
/// over to their end, so that a stream goes on after them.
fn next_line(input: &mut impl BufRead) -> io::Result<Option<Line>> {
    loop {
        let mut bytes = Vec::new();
        let bound = sheet::MAX_BYTES as u64 + 1;
        if input.by_ref().take(bound).read_until(b'\n', &mut bytes)? == 0 {
            return Ok(None);
        }
        let whole = bytes.last() == Some(&b'\n') || (bytes.len() as u64) < bound;
        if !whole {
            skip_line(input)?;
        }
        match String::from_utf8(bytes) {
            Ok(line) if line.trim().is_empty() => {}
            Ok(line) => return Ok(Some(Ok(line))),
            Err(_) => {
                let problem = Problem::new("not-utf8", "This is not text in UTF-8.", 0, 0)
                    .bound("A sheet is a text file in UTF-8.");
                return Ok(Some(Err(problem)));
            }
        }
    }
}

fn skip_line(input: &mut impl BufRead) -> io::Result<()> {
    loop {
        let (used, ended) = {
            let buffer = input.fill_buf()?;
            match buffer.iter().position(|byte| *byte == b'\n') {
                Some(place) => (place + 1, true),
                None => (buffer.len(), buffer.is_empty()),
            }
        };
        input.consume(used);
        if ended {
            return Ok(());
        }
    }
}

fn process_line(line: &Line, command: Command) -> Outcome {
    match line {
        Ok(text) => process(text, command),
        Err(problem) => Outcome::Faults(vec![problem.clone()]),
    }
}

/// One document, or one on each line. A document that spans lines never parses by its first line alone.
fn standard_input(job: &Job, report: &mut Report) -> io::Result<()> {
    let mut input = io::stdin().lock();
    let Some(first) = next_line(&mut input)? else {
        return report.write(process("", job.command), "standard input");
    };
    if !first.as_ref().is_ok_and(|line| sheet::is_json(line)) {
        return rest_at_once(first, &mut input, job, report);
    }
    let outcome = process_line(&first, job.command);
    // Whether a fault is written depends on there being more than one sheet; an answer does not wait.
    let mut following = None;
    if matches!(outcome, Outcome::Faults(_)) {
        following = next_line(&mut input)?;
        report.many |= following.is_some();
    }
    report.write(outcome, "sheet 1")?;
    report.many = true;
    let mut number = 1;
    while let Some(line) = match following.take() {
        Some(line) => Some(line),
        None => next_line(&mut input)?,
    } {
        number += 1;
        report.write(process_line(&line, job.command), &format!("sheet {number}"))?;
    }
    Ok(())
}

/// The first line is no sheet by itself: one sheet over several lines, or a stream that begins badly.
fn rest_at_once(
    first: Line,
    input: &mut impl BufRead,
    job: &Job,
    report: &mut Report,
) -> io::Result<()> {
    let mut lines = vec![first];
    let mut bytes = 0;
    while bytes <= sheet::MAX_BYTES {
        let Some(line) = next_line(input)? else { break };
        bytes += line.as_ref().map_or(0, String::len);
        lines.push(line);
    }
    let whole: Option<String> = lines.iter().map(|line| line.as_deref().ok()).collect();
    let is_sheet = |line: &Line| {
        line.as_ref()
            .is_ok_and(|text| sheet::is_json(text) && text.trim_start().starts_with('{'))
    };
    match whole {
        Some(whole) if sheet::is_json(&whole) || !lines.iter().any(is_sheet) => {
            report.write(process(&whole, job.command), "standard input")
        }
        _ => {
            report.many = lines.len() > 1;
            for (index, line) in lines.iter().enumerate() {
                report.write(
                    process_line(line, job.command),
                    &format!("sheet {}", index + 1),
                )?;
            }
            let mut number = lines.len();
            while let Some(line) = next_line(input)? {
                number += 1;
                report.write(process_line(&line, job.command), &format!("sheet {number}"))?;
            }
            Ok(())
        }
    }
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
