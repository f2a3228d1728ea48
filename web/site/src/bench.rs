//! `cargo site bench`: the same work natively and in WebAssembly, as ratios within one run.

use std::fmt::Write as _;
use std::path::Path;
use std::time::Duration;

use crate::Outcome;
use crate::command::{capture, program};
use crate::node::Node;
use crate::paths::{Paths, write};
use crate::profile::Profile;
use crate::{target, wasm};

/// Native and WebAssembly take turns this often, so that a busy moment meets both.
const TURNS: usize = 3;
const LIMIT: Duration = Duration::from_secs(900);

/// Times everything and writes `tests/bench/numbers.md`.
pub fn run(paths: &Paths) -> Outcome<()> {
    let node = Node::find()?;
    node.install(paths)?;
    let (target, _) = target::find_or_install()?;
    println!("Compiling the benches …");
    let compiled = wasm::compile(paths, Profile::Full, target, &["bench"])?;
    let folder = paths.wasm.join("bound").join("bench");
    wasm::bind(&compiled, &folder)?;
    let module = folder.join("core.wasm");
    wasm::optimise(paths, &node, &folder.join("rungline_web_bg.wasm"), &module)?;
    let mut names = Vec::new();
    let mut native: Vec<f64> = Vec::new();
    let mut browser: Vec<f64> = Vec::new();
    for turn in 1..=TURNS {
        println!("Turn {turn} of {TURNS} …");
        let lines = cargo_bench(paths, "ratio")?;
        let (seconds, found) = split(&lines)?;
        names = found;
        keep_best(&mut native, &seconds);
        let lines = capture(
            node.program()
                .arg(paths.root.join("tests/bench/wasm.mjs"))
                .arg(folder.join("rungline_web.js"))
                .arg(&module),
            LIMIT,
        )?;
        keep_best(&mut browser, &split(&lines)?.0);
    }
    let mut text = String::from(
        "# Numbers of the bench\n\nWritten by `cargo site bench`: best of three turns, native and \
         WebAssembly (full build, in Node) taking turns on one machine. Only the ratio travels to \
         other machines.\n\n| work | native | WebAssembly | ratio |\n|---|---|---|---|\n",
    );
    for ((name, native), browser) in names.iter().zip(&native).zip(&browser) {
        let ratio = browser / native;
        let row = format!(
            "| {name} | {} | {} | {ratio:.2} |",
            time(*native),
            time(*browser)
        );
        println!("{row}");
        writeln!(text, "{row}").map_err(|error| error.to_string())?;
    }
    text += &against_numpy(paths)?;
    for bench in ["angular", "terms", "radial", "structure", "memory"] {
        let lines = cargo_bench(paths, bench)?;
        print!("{lines}");
        write!(text, "\nNative, `{bench}`:\n\n```\n{lines}```\n")
            .map_err(|error| error.to_string())?;
    }
    let file: &Path = &paths.root.join("tests/bench/numbers.md");
    write(file, text)?;
    println!("Written to {}.", file.display());
    Ok(())
}

/// Our eigensystem and numpy's on one thread, taking turns. Where there is no numpy, the text says so.
fn against_numpy(paths: &Paths) -> Outcome<String> {
    println!("Comparing with numpy …");
    let mut sizes = Vec::new();
    let (mut ours, mut theirs): (Vec<f64>, Vec<f64>) = (Vec::new(), Vec::new());
    for _ in 0..TURNS {
        let script = paths.root.join("tests/bench/eigen.py");
        let Ok(lines) = capture(program("python3").arg(script), LIMIT) else {
            let words = "Not compared with numpy's eigh: python3 with numpy is not there.";
            println!("{words}");
            return Ok(format!("\n{words}\n"));
        };
        keep_best(&mut theirs, &split(&lines)?.0);
        let (seconds, found) = split(&cargo_bench(paths, "eigen")?)?;
        sizes = found;
        keep_best(&mut ours, &seconds);
    }
    let mut text = String::from(
        "\n| all eigenpairs of a full symmetric matrix, native | ours | numpy's eigh, one thread | ratio \
         |\n|---|---|---|---|\n",
    );
    for ((size, ours), theirs) in sizes.iter().zip(&ours).zip(&theirs) {
        let ratio = ours / theirs;
        let row = format!(
            "| n = {size} | {} | {} | {ratio:.2} |",
            time(*ours),
            time(*theirs)
        );
        println!("{row}");
        writeln!(text, "{row}").map_err(|error| error.to_string())?;
    }
    Ok(text)
}

fn cargo_bench(paths: &Paths, name: &str) -> Outcome<String> {
    capture(
        program("cargo")
            .args([
                "bench",
                "--quiet",
                "--package",
                "rungline-tests",
                "--bench",
                name,
            ])
            .current_dir(&paths.root),
        LIMIT,
    )
}

/// Seconds, and what follows them, of each line.
fn split(lines: &str) -> Outcome<(Vec<f64>, Vec<String>)> {
    lines
        .lines()
        .map(|line| {
            let (seconds, name) = line.split_once(' ').unwrap_or((line, ""));
            let seconds = seconds
                .parse::<f64>()
                .map_err(|_| format!("The bench printed “{line}” where a time was expected."))?;
            Ok((seconds, name.to_string()))
        })
        .collect::<Outcome<Vec<_>>>()
        .map(|pairs| pairs.into_iter().unzip())
}

fn keep_best(best: &mut Vec<f64>, seconds: &[f64]) {
    if best.is_empty() {
        best.extend_from_slice(seconds);
    } else {
        for (best, &seconds) in best.iter_mut().zip(seconds) {
            *best = best.min(seconds);
        }
    }
}

fn time(seconds: f64) -> String {
    format!("{:.3} ms", seconds * 1e3)
}
