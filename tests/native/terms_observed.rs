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

#[test]
fn what_the_exceptions_are() {
    // Judged one by one. Of 98 rows, 88 have a single open shell, and in all of these the tabulated J is
    // Hund's: the levels are those of highly charged ions near jj coupling, calculated or extrapolated,
    // and named after their leading LS component. The lowest level of np3 there is (p1/2)2 p3/2, half
    // of it 2P, so 85 of them read "2P3/2" for Hund's "4S3/2". The rest has several open shells:
    // Ce I (1G4) is measured and real, Ce II and the 5f2 6d ion semi-empirical and credible, the
    // 4f13 5p2 and 4f11 5p5 ions calculated, again close to jj coupling.
    let exceptions = rows(&vector("hund_exceptions.csv"));
    let single: Vec<_> = exceptions
        .iter()
        .filter(|r| r["class"] == "single open shell")
        .collect();
    assert_eq!((exceptions.len(), single.len()), (98, 88));
    let mut np3 = 0;
    for row in single {
        let shells = shells(&row["shells"]);
        let open: Vec<&Subshell> = shells.iter().filter(|s| s.is_open()).collect();
        let ground = hund::ground(&shells);
        assert_eq!(ground.j.unwrap().to_string(), row["tabulated_J"], "{row:?}");
        assert_ne!(
            ground.term.to_string(),
            row["tabulated_term"].trim_end_matches('*')
        );
        let p3 = open.len() == 1 && open[0].orbital().l() == 1 && open[0].electrons() == 3;
        np3 += u32::from(p3 && row["tabulated_term"] == "2P*");
    }
    assert_eq!(np3, 85);
    let measured: Vec<_> = exceptions
        .iter()
        .filter(|r| r["theoretical"] == "0" && r["semi_empirical"] == "0")
        .map(|r| format!("{}{}", r["symbol"], r["charge"]))
        .collect();
    assert_eq!(measured, ["Ce0"]);
}
