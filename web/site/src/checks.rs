//! `cargo site test`: every check there is, and how many passed.

use std::path::PathBuf;
use std::process::Command;
use std::time::{Duration, Instant};

use crate::browsers;
use crate::command::{program, stream};
use crate::node::Node;
use crate::paths::{Paths, files_under};
use crate::profile::Profile;
use crate::target::{self, Target};
use crate::wasm;
use crate::{Outcome, build};

/// Kinds of checks that can be run alone.
pub const KINDS: &[&str] = &["format", "lints", "native", "wasm", "page"];

/// The page tests of `--quick`: what a change most likely breaks, in minutes.
const EVERY_DAY: &[&str] = &[
    "states-view",
    "lines-view",
    "splitting-view",
    "engine",
    "faults",
    "keyboard",
    "palette",
    "sentence",
    "store",
    "tokens",
];

/// Native tests that `--quick` leaves out, by a part of their names: sweeps over all atoms, tables
/// of measured values that need a model of each atom, and comparisons with brute force or with a
/// definition term by term.
const LONG: &[&str] = &[
    "sweep",
    "observed_j",
    "as_far_off",
    "acts_as_zeta",
    "converge",
    "determinant",
    "brute_force",
    "by_their_share",
    "definition_says",
];

/// The packages that run on this machine.
const NATIVE: &[&str] = &[
    "rungline-kernel",
    "rungline-core",
    "rungline-web",
    "rungline-site",
    "rungline-tests",
];

/// No kind of check runs longer than this.
const LIMIT: Duration = Duration::from_secs(40 * 60);

/// How many checks passed and failed.
#[derive(Default)]
struct Count {
    passed: u64,
    failed: u64,
}

/// What has been run so far.
struct Checks<'a> {
    paths: &'a Paths,
    profile: Profile,
    /// The part of the tests' names that is wanted; empty for all.
    filter: &'a str,
    lines: Vec<String>,
    sum: Count,
}

/// Runs one kind of checks or all, and fails if one of them did.
pub fn run(paths: &Paths, profile: Profile, kind: Option<&str>, filter: &str) -> Outcome<()> {
    let mut checks = Checks {
        paths,
        profile,
        filter,
        lines: Vec::new(),
        sum: Count::default(),
    };
    let wanted = |name: &str| kind.is_none_or(|kind| kind == name);
    if wanted("format") {
        checks.step("format", Checks::format)?;
    }
    if wanted("lints") {
        checks.step("lints", Checks::lints)?;
    }
    if wanted("native") {
        checks.step("native", Checks::native)?;
    }
    if wanted("wasm") {
        checks.step("wasm", Checks::wasm)?;
    }
    if wanted("page") {
        checks.step("page", Checks::page)?;
    }
    println!("\n{}", checks.lines.join("\n"));
    if profile == Profile::Quick {
        println!(
            "Quick: the quick build; of the page tests {}, in Chromium with the one file; native \
             tests without those whose names have {} in them. “cargo site test” runs everything.",
            EVERY_DAY.join(", "),
            LONG.join(", ")
        );
    }
    println!("{} passed, {} failed", checks.sum.passed, checks.sum.failed);
    if checks.sum.failed == 0 {
        Ok(())
    } else {
        Err("Not everything passed; what failed is above.".to_string())
    }
}

impl Checks<'_> {
    fn step(&mut self, name: &str, work: fn(&Self) -> Outcome<Count>) -> Outcome<()> {
        println!("\n── {name}");
        let started = Instant::now();
        // What cannot even be run counts as failed, and the others still run.
        let count = work(self).unwrap_or_else(|message| {
            println!("{message}");
            Count {
                passed: 0,
                failed: 1,
            }
        });
        self.lines.push(format!(
            "{name:<22}{:>7.1} s   {} passed, {} failed",
            started.elapsed().as_secs_f64(),
            count.passed,
            count.failed
        ));
        self.sum.passed += count.passed;
        self.sum.failed += count.failed;
        Ok(())
    }

    fn cargo(&self, arguments: &[&str]) -> Command {
        let mut cargo = program("cargo");
        cargo.args(arguments).current_dir(&self.paths.root);
        cargo
    }

    fn format(&self) -> Outcome<Count> {
        one(&mut self.cargo(&["fmt", "--all", "--check"]))
    }

    fn lints(&self) -> Outcome<Count> {
        let mut count = one(&mut self.cargo(&[
            "clippy",
            "--quiet",
            "--workspace",
            "--all-targets",
            "--all-features",
            "--",
            "-D",
            "warnings",
        ]))?;
        // Where the usual compiler has the target, its lints see the browser's own code paths too.
        if target::library_is_there("rustc") {
            let target = one(&mut self.cargo(&[
                "clippy",
                "--quiet",
                "--package",
                "rungline-web",
                "--target",
                "wasm32-unknown-unknown",
                "--target-dir",
                "target/wasm",
                "--",
                "-D",
                "warnings",
            ]))?;
            count.passed += target.passed;
            count.failed += target.failed;
        }
        Ok(count)
    }

    fn native(&self) -> Outcome<Count> {
        let mut cargo = self.cargo(&["test", "--quiet", "--no-fail-fast"]);
        for package in NATIVE {
            cargo.args(["--package", package]);
        }
        if !self.filter.is_empty() {
            cargo.arg(self.filter);
        } else if self.profile == Profile::Quick {
            cargo.arg("--");
            for long in LONG {
                cargo.args(["--skip", long]);
            }
        }
        counted(&mut cargo, libtest_counts)
    }

    fn wasm(&self) -> Outcome<Count> {
        let (target, _) = target::find_or_install()?;
        let mut runner = self.cargo(&["build", "--quiet", "--package", "rungline-wasm-runner"]);
        if !stream(&mut runner, LIMIT)?.0 {
            return Err("The runner of the wasm tests does not compile.".to_string());
        }
        counted(&mut self.wasm_tests(target), libtest_counts)
    }

    fn wasm_tests(&self, target: Target) -> Command {
        let mut cargo = self.cargo(&["test", "--package", "rungline-wasm-tests"]);
        cargo
            .args([
                "--profile",
                wasm::cargo_profile(Profile::Quick),
                "--target-dir",
            ])
            .arg(&self.paths.wasm)
            .env("CARGO_ENCODED_RUSTFLAGS", wasm::flags(self.paths))
            .env("CARGO_TARGET_WASM32_UNKNOWN_UNKNOWN_RUNNER", self.runner())
            .env("WASM_BINDGEN_TEST_ONLY_NODE", "1");
        target.apply(&mut cargo);
        if !self.filter.is_empty() {
            cargo.arg("--").arg(self.filter);
        }
        cargo
    }

    /// The runner lies beside this program.
    fn runner(&self) -> PathBuf {
        let name = format!("rungline-wasm-runner{}", std::env::consts::EXE_SUFFIX);
        std::env::current_exe()
            .ok()
            .and_then(|program| Some(program.parent()?.join(&name)))
            .filter(|runner| runner.is_file())
            .unwrap_or_else(|| self.paths.root.join("target").join("debug").join(name))
    }

    fn page(&self) -> Outcome<Count> {
        build(self.paths, self.profile)?;
        let (browsers, note) = browsers::find_or_install()?;
        println!("Browsers: {note}.");
        let specs = self.specs()?;
        if specs.is_empty() {
            return Err(format!("No page test has “{}” in its name.", self.filter));
        }
        // Who asks for the same bytes of the native program needs it.
        if specs
            .iter()
            .any(|file| file.ends_with("same-bytes.spec.mjs"))
        {
            self.native_program()?;
        }
        let mut node = Node::find()?.program();
        // Times are only measured by the full run, which has the machine to itself.
        let at_once = match self.profile {
            Profile::Quick => "--test-concurrency=2",
            Profile::Full => "--test-concurrency=1",
        };
        node.args(["--test", at_once, "--test-reporter=spec"])
            .args(specs)
            .current_dir(&self.paths.page_tests)
            .env(
                "RUNGLINE_NATIVE",
                self.paths
                    .root
                    .join("target/release")
                    .join(format!("rungline{}", std::env::consts::EXE_SUFFIX)),
            );
        if self.profile == Profile::Quick {
            node.env("RUNGLINE_QUICK", "1");
        }
        for (variable, browser) in browsers {
            node.env(variable, browser);
        }
        counted(&mut node, node_counts)
    }

    fn native_program(&self) -> Outcome<()> {
        let mut native = self.cargo(&[
            "build",
            "--quiet",
            "--release",
            "--package",
            "rungline-core",
            "--bin",
            "rungline",
        ]);
        if !stream(&mut native, LIMIT)?.0 {
            return Err("The native program does not compile.".to_string());
        }
        Ok(())
    }

    fn specs(&self) -> Outcome<Vec<PathBuf>> {
        // Who names a file of tests gets it.
        let all = self.profile != Profile::Quick || !self.filter.is_empty();
        let wanted = |name: &str| all || EVERY_DAY.iter().any(|part| name.starts_with(part));
        let specs = files_under(&self.paths.page_tests.join("specs"))?;
        Ok(specs
            .into_iter()
            .filter(|file| {
                file.file_name()
                    .and_then(|name| name.to_str())
                    .is_some_and(|name| {
                        name.ends_with(".spec.mjs") && name.contains(self.filter) && wanted(name)
                    })
            })
            .collect())
    }
}

/// A check that passes or fails as a whole.
fn one(command: &mut Command) -> Outcome<Count> {
    let (passed, _) = stream(command, LIMIT)?;
    Ok(Count {
        passed: u64::from(passed),
        failed: u64::from(!passed),
    })
}

/// A program that counts its checks. One that ends badly without a failed check did not come to
/// its end, and counts as failed.
fn counted(command: &mut Command, counts: fn(&str) -> Count) -> Outcome<Count> {
    let (passed, output) = stream(command, LIMIT)?;
    let mut count = counts(&output);
    if !passed {
        count.failed = count.failed.max(1);
    }
    if count.passed + count.failed == 0 {
        return Err("No check was run.".to_string());
    }
    Ok(count)
}

/// `test result: ok. 3 passed; 0 failed; …`, as Rust's test programs end.
fn libtest_counts(output: &str) -> Count {
    let mut count = Count::default();
    for line in output
        .lines()
        .filter(|line| line.starts_with("test result:"))
    {
        count.passed += number_before(line, " passed");
        count.failed += number_before(line, " failed");
    }
    count
}

/// `ℹ pass 3`, `ℹ fail 0`, as Node's test runner ends.
fn node_counts(output: &str) -> Count {
    let number = |word: &str| {
        output
            .lines()
            .rev()
            .find_map(|line| line.trim_start_matches(['ℹ', '#', ' ']).strip_prefix(word))
            .and_then(|rest| rest.trim().parse().ok())
            .unwrap_or(0)
    };
    Count {
        passed: number("pass "),
        failed: number("fail ") + number("cancelled "),
    }
}

fn number_before(line: &str, word: &str) -> u64 {
    line.split(word)
        .next()
        .and_then(|before| before.split_whitespace().next_back())
        .and_then(|number| number.parse().ok())
        .unwrap_or(0)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn closing_lines_are_counted() {
        let rust = "test result: ok. 12 passed; 0 failed; 1 ignored; 0 measured\n\
                    test result: FAILED. 3 passed; 2 failed; 0 ignored; 0 measured";
        let count = libtest_counts(rust);
        assert_eq!((count.passed, count.failed), (15, 2));
        let node = "ℹ tests 9\nℹ pass 7\nℹ fail 1\nℹ cancelled 1\nℹ skipped 0";
        let count = node_counts(node);
        assert_eq!((count.passed, count.failed), (7, 2));
    }
}
