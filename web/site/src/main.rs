//! `cargo site`: sets up what is missing, builds both forms of the page, serves them, runs every test.

mod assemble;
mod bench;
mod browsers;
mod budget;
mod checks;
mod command;
mod digest;
mod node;
mod paths;
mod policy;
mod printable;
mod profile;
mod serve;
mod steps;
mod target;
mod wasm;

use std::process::ExitCode;

use paths::Paths;
use profile::Profile;
use steps::Steps;

/// What goes wrong here is told in one plain sentence and ends the run.
type Outcome<T> = Result<T, String>;

const USAGE: &str = "\
cargo site [--quick]                build both forms of the page and serve the site on 127.0.0.1
cargo site build [--quick]          build them without serving
cargo site test [--quick]           run every check
cargo site bench                    time the core natively and in WebAssembly: tests/bench/numbers.md
cargo site test [--quick] KIND [X]  run one kind (format, lints, native, wasm, page), of the last
                                    three only what has X in its name

--quick is for development: the page says so, and it is larger and slower than the full build.";

fn main() -> ExitCode {
    let arguments: Vec<String> = std::env::args().skip(1).collect();
    match run(&arguments) {
        Ok(()) => ExitCode::SUCCESS,
        Err(message) => {
            eprintln!("\n{message}");
            ExitCode::FAILURE
        }
    }
}

fn run(arguments: &[String]) -> Outcome<()> {
    let (options, words): (Vec<&str>, Vec<&str>) = arguments
        .iter()
        .map(String::as_str)
        .partition(|argument| argument.starts_with('-'));
    if options
        .iter()
        .any(|option| ["-h", "--help"].contains(option))
    {
        println!("{USAGE}");
        return Ok(());
    }
    if let Some(unknown) = options.iter().find(|option| **option != "--quick") {
        return Err(format!("There is no option {unknown}.\n{USAGE}"));
    }
    let profile = if options.is_empty() {
        Profile::Full
    } else {
        Profile::Quick
    };
    let paths = Paths::find()?;
    match words.as_slice() {
        [] => {
            build(&paths, profile)?;
            serve::serve(&paths.site)
        }
        ["build"] => build(&paths, profile),
        ["bench"] => bench::run(&paths),
        ["test"] => checks::run(&paths, profile, None, ""),
        ["test", kind] if checks::KINDS.contains(kind) => {
            checks::run(&paths, profile, Some(*kind), "")
        }
        ["test", kind, filter] if checks::KINDS.contains(kind) => {
            checks::run(&paths, profile, Some(*kind), filter)
        }
        _ => Err(format!(
            "I do not know what “{}” is.\n{USAGE}",
            words.join(" ")
        )),
    }
}

/// Builds both forms of the page and says where they are.
fn build(paths: &Paths, profile: Profile) -> Outcome<()> {
    let mut steps = Steps::new();
    let node = node::Node::find()?;
    steps.step("npm packages", || node.install(paths))?;
    let target = steps.step_with("WebAssembly target", target::find_or_install)?;
    let core = wasm::build(paths, profile, &target, &node, &mut steps)?;
    let built = steps.step_with("page", || {
        let built = assemble::assemble(paths, profile, &node, &core)?;
        let note = format!("{} files", built.site_files);
        Ok((built, note))
    })?;
    steps.total();
    println!("\nThe site     {}", paths.site.display());
    println!(
        "             SHA-256 {}  (of its file list)",
        built.site_digest
    );
    println!("The one file {}", built.one_file.display());
    println!("             SHA-256 {}", built.one_file_digest);
    budget::check(paths, profile, &built)
}
