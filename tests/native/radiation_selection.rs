//! Selection rules: known lines of the laboratory and the sky, and every pair of terms of small
//! configurations against states written out in determinants.

use rungline_core::configuration::{Orbital, Subshell, l_of_letter};
use rungline_core::quantity::TwiceJ;
use rungline_core::radiation::selection::{Between, Jump, TermOf, pair_count};
use rungline_core::radiation::{Multipole, Rule};
use rungline_core::terms::chains::{Chain, chains};
use rungline_core::terms::{Level, label, ls};
use rungline_tests::{Row, report, vector_json};
use serde_json::Value;
use std::collections::{BTreeMap, BTreeSet};

/// `2s2 2p3`, one digit for n.
fn shells(text: &str) -> Vec<Subshell> {
    text.split_whitespace()
        .map(|part| {
            let n = part[..1].parse().unwrap();
            let l = l_of_letter(part[1..].chars().next().unwrap()).unwrap();
            let electrons = if part.len() > 2 {
                part[2..].parse().unwrap()
            } else {
                1
            };
            Subshell::new(Orbital::new(n, l).unwrap(), electrons).unwrap()
        })
        .collect()
}

fn chain_of(shells: &[Subshell], level: &Level) -> Chain {
    let all = chains(shells, usize::MAX).unwrap().listed;
    let index = level.index.unwrap_or(1);
    all.into_iter()
        .find(|c| c.term == level.term && c.index == index)
        .unwrap()
}

/// What is said of `configuration term J` ↔ `configuration term J`.
fn judge(upper: &str, lower: &str, multipole: Multipole) -> Option<Rule> {
    let (a, b) = (label::parse(upper).unwrap(), label::parse(lower).unwrap());
    let (c, d) = (shells(a.configuration), shells(b.configuration));
    assert!(ls::terms(&c).unwrap().has(&a.level), "{upper}");
    assert!(ls::terms(&d).unwrap().has(&b.level), "{lower}");
    let (chain_a, chain_b) = (chain_of(&c, &a.level), chain_of(&d, &b.level));
    let between = Between::new(&c, &d).unwrap();
    let of = |level: &Level, chain| TermOf {
        term: level.term,
        index: level.index,
        chain: Some(chain),
    };
    let verdicts = between.verdicts(
        &of(&a.level, &chain_a),
        a.level.j,
        &of(&b.level, &chain_b),
        b.level.j,
    );
    verdicts
        .iter()
        .find(|v| v.multipole == multipole)
        .unwrap()
        .refused_by
}

#[test]
fn lines_of_the_laboratory_and_the_sky() {
    use Multipole::{E1, E2, M1};
    // Well-known lines (from memory): which multipole gives them in pure LS coupling, or which rule
    // makes them forbidden or intercombination lines.
    let cases = [
        // Na D; the resonance lines of Ca and the intercombination line of Hg.
        ("3p 2P3/2", "3s 2S1/2", E1, None),
        ("3p 2P3/2", "3s 2S1/2", M1, Some("parity")),
        ("3p 2P1/2", "3s 2S1/2", E2, Some("parity")),
        ("4s 4p 1P1", "4s2 1S0", E1, None),
        ("6s 6p 3P1", "6s2 1S0", E1, Some("spin")),
        ("6s 6p 3P0", "6s2 1S0", E1, Some("j-sum")),
        ("6s 6p 3P2", "6s2 1S0", E1, Some("j-change")),
        // O I 557.7 nm (E2), 630.0 nm (M1 by mixing only: the spin changes), 63 µm (M1).
        ("2p4 1S0", "2p4 1D2", E2, None),
        ("2p4 1S0", "2p4 1D2", M1, Some("j-change")),
        ("2p4 1D2", "2p4 3P2", M1, Some("spin")),
        ("2p4 1D2", "2p4 3P2", E2, Some("spin")),
        ("2p4 3P1", "2p4 3P2", M1, None),
        ("2p4 3P0", "2p4 3P1", M1, None),
        ("2p4 3P0", "2p4 3P2", M1, Some("j-change")),
        ("2p4 3P0", "2p4 3P2", E2, None),
        ("2p4 3P0", "2p4 3P1", E2, Some("j-sum")),
        ("2p4 1S0", "2p4 3P1", E1, Some("parity")),
        // K 4s – 3d and 4s – 5s.
        ("3d 2D5/2", "4s 2S1/2", E2, None),
        ("3d 2D3/2", "4s 2S1/2", M1, Some("orbital-kept")),
        ("5s 2S1/2", "4s 2S1/2", E2, Some("j-sum")),
        ("4f 2F5/2", "4d 2D3/2", E1, None),
        ("4f 2F5/2", "4p 2P3/2", E1, Some("parity")),
        ("4f 2F5/2", "5s 2S1/2", E1, Some("j-change")),
        ("4f 3d 1P1", "5s 3d 1D2", E1, Some("orbital-step")),
        // Two electrons.
        ("2p2 1D2", "2s 3p 1P1", E1, Some("several-electrons")),
        // L.
        ("3p 3d 1F3", "3p2 1S0", E1, Some("j-change")),
        ("3p 3d 3F2", "3p2 3P2", E1, Some("l-change")),
        ("3d 4p 3P1", "3d2 3F2", E1, Some("l-change")),
        ("3d 4p 1P1", "3d 4s 1D2", E1, None),
        ("2p 3p 3S1", "2p 3p 3S1", M1, Some("same-level")),
        ("3p 4p 1P1", "3p 4p 1S0", M1, Some("other-term")),
        ("3s 4p2 4P1/2", "3s 4p2 4P3/2", M1, None),
        ("3d2 4s 4F9/2", "3d2 4s 4F7/2", M1, None),
        // The half-filled shell: 2p3 2D and 2P, lines of nitrogen in the sky, and their fine structure.
        ("2p3 2P3/2", "2p3 2D5/2", E2, None),
        ("2p3 2D5/2", "2p3 2D3/2", E2, Some("seniority")),
        ("2p3 2P3/2", "2p3 2P1/2", E2, Some("seniority")),
        ("2p3 2P3/2", "2p3 2P1/2", M1, None),
        // J(J+1) = S(S+1) − L(L+1): the matrix element of L within equal S, L, J is zero.
        ("3d4 4s 4p 7D2", "3d4 4s 5s 7D2", E1, Some("vanishing")),
        ("3d4 4s 4p 7D3", "3d4 4s 5s 7D3", E1, None),
    ];
    for (upper, lower, multipole, code) in cases {
        let rule = judge(upper, lower, multipole);
        assert_eq!(rule.map(|r| r.code()), code, "{upper} {lower} {multipole}");
        // A rule does not depend on which level is called the upper one.
        let turned = judge(lower, upper, multipole);
        assert_eq!(
            turned.map(|r| r.code()),
            code,
            "{lower} {upper} {multipole}"
        );
        let rigorous = matches!(code, Some("parity" | "j-change" | "j-sum" | "same-level"));
        assert_eq!(rule.is_some_and(|r| r.is_rigorous()), rigorous);
    }
}

#[test]
fn rules_are_told_with_the_numbers_of_the_case() {
    use Multipole::{E1, E2, M1};
    let cases = [
        (
            "6s 6p 3P1",
            "6s2 1S0",
            E1,
            "the spin changes from 1 to 0, and S is kept in pure LS coupling",
        ),
        (
            "6s 6p 3P2",
            "6s2 1S0",
            E1,
            "J changes from 2 to 0, and E1 changes it by at most 1",
        ),
        (
            "2p4 1S0",
            "2p4 3P1",
            E1,
            "both levels are even, and E1 needs a change of parity",
        ),
        (
            "3p 2P3/2",
            "3s 2S1/2",
            M1,
            "the parity changes from odd to even, and M1 keeps it",
        ),
        (
            "4f 3d 1P1",
            "5s 3d 1D2",
            E1,
            "the electron goes from 4f to 5s, its l from 3 to 0, and E1 changes it by 1",
        ),
        (
            "5s 2S1/2",
            "4s 2S1/2",
            E2,
            "J goes from 1/2 to 1/2, and E2 needs both together to be at least 2",
        ),
        (
            "3d5 4p 5P1",
            "3d5 4s 5S2",
            E1,
            "the 3d shell changes from 4P to 6S, though its electrons take no part",
        ),
    ];
    for (upper, lower, multipole, sentence) in cases {
        let a = label::parse(upper).unwrap();
        let shells = shells(a.configuration);
        // 3d5 4p has several 5P: take the one on 4P.
        let upper = if a.configuration == "3d5 4p" {
            let all = chains(&shells, usize::MAX).unwrap().listed;
            let on = all
                .iter()
                .find(|c| c.to_string() == "3d5(4P) 4p 5P")
                .unwrap();
            format!("{upper} #{}", on.index)
        } else {
            upper.to_string()
        };
        let rule = judge(&upper, lower, multipole).unwrap();
        assert_eq!(rule.to_string(), sentence);
    }
}

#[test]
fn exactly_the_allowed_terms_are_linked_in_states_written_out() {
    // Source: vectors/linked_terms.json, states of coupled shells written out in determinants by a
    // separate Python program, see its `meta`.
    let vectors = vector_json("linked_terms.json");
    let (mut pairs, mut linked_pairs) = (0, 0);
    for case in vectors["cases"].as_array().unwrap() {
        let text = |key: &str| case[key].as_str().unwrap();
        let (upper, lower) = (shells(text("upper")), shells(text("lower")));
        let multipole = if text("multipole") == "E1" {
            Multipole::E1
        } else {
            Multipole::E2
        };
        let between = Between::new(&upper, &lower).unwrap();
        let by_name = |shells: &[Subshell], key: &str| -> BTreeMap<String, Chain> {
            let all = chains(shells, usize::MAX).unwrap().listed;
            let map: BTreeMap<String, Chain> =
                all.into_iter().map(|c| (c.to_string(), c)).collect();
            let theirs: BTreeSet<&str> = case[key]
                .as_array()
                .unwrap()
                .iter()
                .map(|n| n.as_str().unwrap())
                .collect();
            assert!(
                map.keys().map(String::as_str).eq(theirs.iter().copied()),
                "{key}"
            );
            map
        };
        let uppers = by_name(&upper, "upper_terms");
        let lowers = by_name(&lower, "lower_terms");
        let linked: BTreeSet<(&str, &str)> = case["linked"]
            .as_array()
            .unwrap()
            .iter()
            .map(|l: &Value| (l[0].as_str().unwrap(), l[1].as_str().unwrap()))
            .collect();
        linked_pairs += linked.len();
        for (a, upper_chain) in &uppers {
            for (b, lower_chain) in &lowers {
                let of = |chain| -> TermOf {
                    let chain: &Chain = chain;
                    TermOf {
                        term: chain.term,
                        index: Some(chain.index),
                        chain: Some(chain),
                    }
                };
                let refused = between.term_rule(multipole, &of(upper_chain), &of(lower_chain));
                let is_linked = linked.contains(&(a.as_str(), b.as_str()));
                pairs += 1;
                match refused {
                    Some(rule) => assert!(!is_linked, "{multipole} {a} – {b} is refused: {rule}"),
                    None => assert!(
                        is_linked,
                        "{multipole} {a} – {b} is allowed and has no strength"
                    ),
                }
            }
        }
    }
    assert!(linked_pairs > 400, "{linked_pairs}");
    report(
        "radiation-selection",
        Row {
            quantity: "pairs of terms allowed or refused by E1, E2".into(),
            cases: pairs,
            worst: 0.0,
            tolerance: 0.0,
            measure: "cases that differ".into(),
            source: "states written out in determinants (own work, sympy 1.14.0)".into(),
        },
    );
}

#[test]
fn pairs_are_counted_before_they_are_listed() {
    assert_eq!(pair_count(4, Some(34)), 136);
    assert_eq!(pair_count(34, None), 561);
    assert_eq!(pair_count(0, None), 0);
    assert_eq!(pair_count(1, None), 0);
    assert_eq!(pair_count(2, None), 1);
    assert_eq!(pair_count(u128::MAX, Some(2)), u128::MAX);
    assert_eq!(pair_count(u128::MAX, None), u128::MAX);
}

#[test]
fn configurations_are_compared_electron_by_electron() {
    let jump = |a: &str, b: &str| Between::new(&shells(a), &shells(b)).unwrap().jump();
    let orbital = |n, l| Orbital::new(n, l).unwrap();
    assert_eq!(jump("3d6 4s2", "4s2 3d6"), Jump::None);
    assert_eq!(
        jump("2s 2p2", "2s2 2p"),
        Jump::One {
            upper: orbital(2, 1),
            lower: orbital(2, 0)
        }
    );
    assert_eq!(jump("2s 3p", "2p2"), Jump::Several(2));
    let fault = Between::new(&shells("2s 2p2"), &shells("2s2")).unwrap_err();
    assert_eq!(fault.code, "electron-count-differs");
    // Levels beyond any atom are judged without a panic.
    let between = Between::new(&shells("2p"), &shells("2s")).unwrap();
    let extreme = |two_j| TwiceJ::from_doubled(two_j);
    for multipole in Multipole::ALL {
        for (a, b) in [
            (i32::MAX, i32::MAX),
            (i32::MIN, i32::MAX),
            (i32::MIN, i32::MIN),
        ] {
            let _ = between.level_rule(multipole, extreme(a), extreme(b));
        }
    }
}
