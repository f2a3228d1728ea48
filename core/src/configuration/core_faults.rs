//! The faults of what stands beside subshells in a configuration's text: cores, words, bare shells.

use super::MAX_N;
use super::occupation::{NOBLE_GASES, closed_core};
use super::text_faults::way;
use crate::elements::{nearest, symbol};
use crate::problem::Problem;
use crate::quantity::signs::clipped;

pub(super) fn core_not_closed(text: &str, start: usize, end: usize, name: &str) -> Problem {
    let problem = Problem::new(
        "core-not-closed",
        "A bracket is opened and not closed.",
        start,
        end,
    )
    .bound("A core is written [Ar].");
    if name.is_empty() {
        return way(problem, text, start, end, "");
    }
    way(problem, text, start, end, &format!("[{}]", clipped(name)))
}

pub(super) fn core_repeated(text: &str, start: usize, end: usize, symbol: &str) -> Problem {
    let problem = Problem::new(
        "core-repeated",
        format!("A second core, [{symbol}], is given."),
        start,
        end,
    )
    .bound("A configuration has at most one core.");
    way(problem, text, start, end, "")
}

pub(super) fn core_open(text: &str, start: usize, end: usize, z: u8) -> Problem {
    let name = symbol(z).unwrap_or_default();
    let mut problem = Problem::new(
        "core-open",
        format!("[{name}] is not a core: its shells are not all full."),
        start,
        end,
    )
    .bound("A core is an atom with full subshells only, such as [Ar] or [Xe].");
    let below = (1..z).rev().find(|&z| closed_core(z).is_some());
    for core in below.and_then(symbol).into_iter().chain(noble_below(z)) {
        let core = format!("[{core}]");
        if !problem
            .ways
            .iter()
            .any(|w| w.label == format!("Use {core}"))
        {
            problem = way(problem, text, start, end, &core);
        }
    }
    problem
}

fn noble_below(z: u8) -> Option<&'static str> {
    NOBLE_GASES
        .iter()
        .rev()
        .find(|&&noble| noble < z)
        .and_then(|&noble| symbol(noble))
}

pub(super) fn core_unknown(text: &str, start: usize, end: usize, name: &str) -> Problem {
    let mut problem = Problem::new(
        "core-unknown",
        format!("There is no core “[{}]”.", clipped(name)),
        start,
        end,
    )
    .bound("A core is the symbol of an atom with full subshells only, such as [Ar] or [Xe].");
    let near: Vec<u8> = nearest(name, 8)
        .into_iter()
        .filter(|&z| closed_core(z).is_some())
        .take(3)
        .collect();
    for z in if near.is_empty() {
        vec![18, 36, 54]
    } else {
        near
    } {
        problem = way(
            problem,
            text,
            start,
            end,
            &format!("[{}]", symbol(z).unwrap_or_default()),
        );
    }
    problem
}

pub(super) fn word(text: &str, start: usize, end: usize, word: &str) -> Problem {
    let shown_word = clipped(word);
    let problem = Problem::new(
        "unexpected-word",
        format!("“{shown_word}” is no part of a configuration."),
        start,
        end,
    )
    .bound("A configuration is made of subshells such as 3d6 and a core such as [Ar].");
    let core = crate::elements::by_symbol(word)
        .or_else(|| crate::elements::by_name(word))
        .filter(|&z| closed_core(z).is_some())
        .and_then(symbol);
    match core {
        Some(core) => way(problem, text, start, end, &format!("[{core}]")),
        None => way(problem, text, start, end, ""),
    }
}

pub(super) fn bare_shell_with_more(text: &str, n: u8) -> Problem {
    Problem::new(
        "bare-shell-with-more",
        format!("n={n} stands for the whole bare shell {n}, alone."),
        0,
        text.len(),
    )
    .bound("A bare shell has nothing beside it.")
    .way(format!("Use n={n}"), format!("n={n}"))
}

pub(super) fn shell_without_number(text: &str, start: usize, end: usize) -> Problem {
    let problem = Problem::new(
        "shell-number-missing",
        "The bare shell has no number.",
        start,
        end,
    )
    .bound(format!(
        "The principal quantum number n is a whole number from 1 to {MAX_N}."
    ));
    way(problem, text, start, end, "n=3")
}
