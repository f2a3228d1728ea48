//! Ways out of a text that holds no number: whole quantities, number and unit.

use super::parse::{bound_text, quantity};
use super::unit::Dimension;
use crate::problem::Problem;

/// Ways out of an empty field: a usual value.
pub(super) fn usual_values(problem: Problem, dimension: Dimension) -> Problem {
    let usual = dimension.usual();
    problem
        .bound(bound_text(dimension))
        .way(format!("Use {usual}"), usual)
}

/// Ways out of a number that cannot be read or counted: a bare number would lack its unit, so each
/// is a whole quantity. A fraction sign is its decimal, a typed unit is kept.
pub(super) fn keep_unit(mut problem: Problem, text: &str, dimension: Dimension) -> Problem {
    if !matches!(problem.code, "number-missing" | "number-out-of-range") {
        return problem;
    }
    problem.ways.clear();
    let typed = text.trim();
    let fraction = typed.chars().next().and_then(|c| match c {
        '½' => Some("0.5"),
        '¼' => Some("0.25"),
        '¾' => Some("0.75"),
        _ => None,
    });
    let after_fraction = typed.chars().next().map_or(0, char::len_utf8);
    let spelling = match fraction {
        Some(_) => typed.get(after_fraction..).unwrap_or("").trim(),
        None => typed.split_whitespace().next_back().unwrap_or(""),
    };
    let number = fraction.unwrap_or("1");
    let usual = dimension.usual();
    // What follows characters that do not belong here: `🙂0.5 T`.
    let tail = typed
        .find(|c: char| c.is_ascii_digit())
        .filter(|_| problem.code == "number-missing")
        .and_then(|digit| typed.get(digit..))
        .map(str::to_string);
    let kept = dimension
        .unit(spelling)
        .map(|unit| format!("{number} {}", unit.symbol));
    for whole in tail.into_iter().chain(kept).chain([usual.to_string()]) {
        let known = problem.ways.iter().any(|way| way.replacement == whole);
        if !known && quantity(&whole, dimension).is_ok() {
            problem = problem.way(format!("Use {whole}"), whole);
        }
    }
    problem
}
