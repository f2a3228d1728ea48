//! Hund's rules against the ground levels of all ions.
//!
//! Source: `vectors/ground_levels_all_ions.csv` and `vectors/hund_exceptions.csv` (mendeleev 1.3.0,
//! MIT); the second was made from the first by a separate brute-force program, whose exceptions must
//! be ours.

use rungline_core::configuration::{Orbital, Subshell, l_of_letter};
use rungline_core::terms::hund;
use rungline_tests::vector;
use std::collections::{BTreeMap, BTreeSet};

/// `[Xe].4f.5d.6s2` without the closed core.
fn shells(text: &str) -> Vec<Subshell> {
    text.split('.')
        .filter(|part| !part.starts_with('['))
        .map(|part| {
            let at = part.find(|c: char| c.is_ascii_lowercase()).unwrap();
            let (n, rest) = part.split_at(at);
            let l = l_of_letter(rest.chars().next().unwrap()).unwrap();
            let electrons = if rest.len() > 1 {
                rest[1..].parse().unwrap()
            } else {
                1
            };
            Subshell::new(Orbital::new(n.parse().unwrap(), l).unwrap(), electrons).unwrap()
        })
        .collect()
}

/// Columns by name of a CSV without quotes, comments left out.
fn rows(text: &str) -> Vec<BTreeMap<String, String>> {
    let mut lines = text.lines().filter(|line| !line.starts_with('#'));
    let names: Vec<&str> = lines.next().unwrap().split(',').collect();
    lines
        .map(|line| {
            let values = line.split(',').map(str::to_string);
            names.iter().map(|n| (*n).to_string()).zip(values).collect()
        })
        .collect()
}

#[test]
fn exceptions_to_hund_are_the_known_ones() {
    let mut ours = BTreeSet::new();
    let mut compared = 0;
    for row in rows(&vector("ground_levels_all_ions.csv")) {
        let (term, j) = (row["term"].as_str(), row["J"].as_str());
        if term.is_empty() || j.is_empty() {
            continue;
        }
        compared += 1;
        let ground = hund::ground(&shells(&row["shells"]));
        let observed = term.trim_end_matches('*');
        let j_differs = ground.j.is_some_and(|ours| ours.to_string() != j);
        if observed != ground.term.to_string() || j_differs {
            let hund_j = ground.j.map_or(String::new(), |j| j.to_string());
            ours.insert(format!(
                "{},{},{term},{j},{},{hund_j}",
                row["Z"], row["charge"], ground.term
            ));
        }
    }
    let theirs: BTreeSet<String> = rows(&vector("hund_exceptions.csv"))
        .iter()
        .map(|row| {
            let hund_term = row["hund_term"].trim_end_matches('*');
            format!(
                "{},{},{},{},{hund_term},{}",
                row["Z"], row["charge"], row["tabulated_term"], row["tabulated_J"], row["hund_J"]
            )
        })
        .collect();
    assert!(compared > 5000, "{compared} levels compared");
    let missing: Vec<&String> = theirs.difference(&ours).collect();
    let more: Vec<&String> = ours.difference(&theirs).collect();
    assert!(
        missing.is_empty() && more.is_empty(),
        "missing {missing:?}, more {more:?}"
    );
}
