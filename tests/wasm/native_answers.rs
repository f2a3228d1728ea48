//! Runs natively while the tests are compiled, and writes what the native core answers.

use std::fmt::Write as _;
use std::path::Path;

use rungline_core::angular::{wigner_3j, wigner_6j, wigner_9j};
use rungline_core::sheet::{Question, answer_text, curves_message, sections_message, unwatched};
use rungline_core::structure::{Basis, Hamiltonian, lowest_of_j};

#[path = "../src/figures.rs"]
mod figures;

use figures::round_figures;

/// Longer answers are compared by length and digest: the tables of the tests stay small.
const LARGE: usize = 1_000_000;

fn main() -> Result<(), Box<dyn std::error::Error>> {
    let out = std::env::var("OUT_DIR")?;
    let examples = Path::new(&std::env::var("CARGO_MANIFEST_DIR")?).join("../examples");
    println!("cargo::rerun-if-changed={}", examples.display());

    let mut files: Vec<_> = std::fs::read_dir(&examples)?
        .filter_map(|entry| Some(entry.ok()?.path()))
        .filter(|path| {
            path.extension()
                .is_some_and(|extension| extension == "json")
        })
        .collect();
    files.sort();
    let mut answers = String::from("pub const ANSWERS: &[(&str, &str, &str, &str)] = &[\n");
    let mut large = String::from("pub const LARGE: &[(&str, &str, &str, usize, u64)] = &[\n");
    let mut curves = String::from("pub const CURVES: &[(&str, &str, &str)] = &[\n");
    for file in files {
        let sheet = std::fs::read_to_string(&file)?;
        let name = file.file_name().unwrap_or_default().to_string_lossy();
        let drawn = curves_message(&serde_json::from_str(&sheet)?, &mut unwatched);
        writeln!(curves, "    ({name:?}, {sheet:?}, {drawn:?}),")?;
        for question in Question::ALL {
            // A question that the example does not allow is left to the page tests.
            let Ok(answer) = answer_text(&sheet, Some(question)) else {
                continue;
            };
            let question = question.name();
            if answer.len() > LARGE {
                let (length, digest) = (answer.len(), digest(answer.as_bytes()));
                writeln!(
                    large,
                    "    ({name:?}, {sheet:?}, {question:?}, {length}, {digest}),"
                )?;
                continue;
            }
            writeln!(
                answers,
                "    ({name:?}, {sheet:?}, {question:?}, {answer:?}),"
            )?;
        }
    }
    answers.push_str("];\n");
    curves.push_str("];\n");
    answers.push_str(&curves);
    large.push_str("];\n");
    answers.push_str(&large);
    answers.push_str("pub const SECTIONS: &[(u32, &str)] = &[\n");
    for l in 0..=6 {
        writeln!(answers, "    ({l}, {:?}),", sections_message(l))?;
    }
    answers.push_str("];\n");
    std::fs::write(Path::new(&out).join("answers.rs"), answers)?;

    let lowest: Vec<u8> = (lowest_levels().iter())
        .flat_map(|value| value.to_bits().to_le_bytes())
        .collect();
    std::fs::write(
        Path::new(&out).join("lowest.rs"),
        format!(
            "pub const LOWEST_BYTES: usize = {};\npub const LOWEST_DIGEST: u64 = {};\n",
            lowest.len(),
            digest(&lowest)
        ),
    )?;

    let bits: Vec<u64> = symbols().iter().map(|value| value.to_bits()).collect();
    std::fs::write(
        Path::new(&out).join("symbols.rs"),
        format!("pub const SYMBOL_BITS: &[u64] = &{bits:?};\n"),
    )?;
    Ok(())
}

include!("symbols.rs");
include!("lowest.rs");
include!("digest.rs");
