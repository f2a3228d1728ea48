//! The largest sizes that are allowed, from `tests/page/budgets.json`.

use serde_json::Value;

use crate::Outcome;
use crate::assemble::Built;
use crate::paths::{Paths, read};
use crate::profile::Profile;

/// Prints each size with its bound; a full build above a bound fails.
pub fn check(paths: &Paths, profile: Profile, built: &Built) -> Outcome<()> {
    let file = paths.page_tests.join("budgets.json");
    let budgets: Value = serde_json::from_str(&read(&file)?)
        .map_err(|error| format!("{} is not JSON: {error}.", file.display()))?;
    let mut above = Vec::new();
    for (key, what, bytes) in [
        ("one_file_bytes", "the one file", built.one_file_bytes),
        ("gzip_bytes", "all its parts with gzip", built.gzip_bytes),
    ] {
        let bound = budgets
            .get(key)
            .and_then(Value::as_u64)
            .ok_or_else(|| format!("{} has no {key}.", file.display()))?;
        println!(
            "Size         {what}: {} of at most {}",
            kilobytes(bytes as u64),
            kilobytes(bound)
        );
        if bytes as u64 > bound {
            above.push(format!(
                "{what} has {} and may have {}",
                kilobytes(bytes as u64),
                kilobytes(bound)
            ));
        }
    }
    if profile == Profile::Quick {
        println!(
            "This is a quick build, so labelled on the page; the bounds hold for the full one."
        );
        return Ok(());
    }
    match above.as_slice() {
        [] => Ok(()),
        _ => Err(format!("Too large: {}.", above.join("; "))),
    }
}

fn kilobytes(bytes: u64) -> String {
    #[expect(clippy::cast_precision_loss, reason = "shown to a person")]
    let kilobytes = bytes as f64 / 1000.0;
    format!("{kilobytes:.1} kB")
}
