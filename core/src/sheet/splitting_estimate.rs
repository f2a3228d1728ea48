//! How long the answer on splitting takes, before anything is computed.

use super::document::Document;
use super::nucleus::Nuclear;
use super::solved;
use super::splitting::is_full;
use super::splitting_manifolds::MOST_MULTIPLICATIONS;
use super::splitting_searched::fields_of_search;
use super::splitting_sets::kept;

/// Multiplications of one second in a browser.
const PER_SECOND: f64 = 1e9;

/// Seconds and bytes for a row of the answer.
const SECONDS_FOR_A_ROW: f64 = 6e-6;
const BYTES_FOR_A_ROW: f64 = 900.0;

/// Seconds and megabytes for states in so many fields.
pub fn estimate(document: &Document, fields: f64) -> (f64, f64) {
    if !is_full(document) || document.level_alone.is_some() {
        return (0.0, 0.0);
    }
    let (mut seconds, mut megabytes) = (0.0, 0.0);
    let multiplications = match kept(document) {
        Some(known) => known.multiplications,
        None => {
            (seconds, megabytes) = solved::estimate_levels(document);
            multiplications(document)
        }
    };
    let search = fields_of_search(multiplications) as f64 * multiplications;
    if kept(document).is_none_or(|known| known.kept_search.borrow().is_none()) {
        seconds += search / PER_SECOND;
    }
    let rows = states(document);
    seconds += multiplications * fields / PER_SECOND + rows * fields * SECONDS_FOR_A_ROW;
    megabytes += rows * fields * BYTES_FOR_A_ROW * 1e-6;
    (seconds, megabytes)
}

/// 2J of the levels of one parity.
fn momenta(document: &Document, odd: bool) -> Vec<i64> {
    let mut found = Vec::new();
    for entry in 0..document.entries.len() {
        if document.is_odd(entry) == odd {
            let levels = document.levels(entry, MOST_LEVELS);
            found.extend(levels.iter().map(|level| i64::from(level.j.doubled())));
        }
    }
    found
}

/// The most levels of a configuration that are counted for an estimate.
const MOST_LEVELS: usize = 20_000;

fn two_i(document: &Document) -> Vec<i64> {
    let spins = document.nuclei.iter().map(Nuclear::two_i);
    let spins: Vec<i64> = spins.map(i64::from).collect();
    if spins.is_empty() { vec![0] } else { spins }
}

fn multiplications(document: &Document) -> f64 {
    let mut sum = 0.0;
    for odd in [false, true] {
        let all = momenta(document, odd);
        for two_i in two_i(document) {
            let highest = all.iter().copied().max().unwrap_or(0) + two_i;
            let mut own = 0.0;
            for two_m in (-highest..=highest).step_by(2) {
                let of = |two_j: &i64| {
                    let (low, high) = ((two_m - two_i).max(-two_j), (two_m + two_i).min(*two_j));
                    ((high - low) / 2 + 1).max(0)
                };
                let rows = all.iter().map(of).sum::<i64>() as f64;
                own += 10.0 * rows * rows * rows;
            }
            // Beyond this a nucleus meets the terms of the line alone.
            let is_reduced = two_i > 0 && own > MOST_MULTIPLICATIONS && document.line.is_some();
            sum += if is_reduced {
                MOST_MULTIPLICATIONS
            } else {
                own
            };
        }
    }
    sum
}

/// About how many states are listed.
fn states(document: &Document) -> f64 {
    let spins = two_i(document)
        .iter()
        .map(|two| *two as f64 + 1.0)
        .sum::<f64>();
    let mut sum = 0.0;
    for odd in [false, true] {
        let of = |two_j: i64| two_j as f64 + 1.0;
        sum += momenta(document, odd).into_iter().map(of).sum::<f64>();
    }
    if document.line.is_some() {
        sum = f64::min(sum, 100.0);
    }
    sum * spins
}
