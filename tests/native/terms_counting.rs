//! Terms and levels counted by the core against a separate enumeration of microstates.
//!
//! Source: `vectors/term_counts.json`, made by a brute-force program of our own that writes out
//! every microstate (own work, no outside data); see its `meta`.

use rungline_core::configuration::{Orbital, Subshell, l_of_letter};
use rungline_core::quantity::TwiceJ;
use rungline_core::terms::{Term, grid, jj, jk, ls};
use rungline_tests::{Row, report, vector_json};
use serde_json::Value;
use std::collections::BTreeMap;

/// `f7 d1 s2` with made-up n, each shell its own.
fn shells(text: &str) -> Vec<Subshell> {
    text.split_whitespace()
        .enumerate()
        .map(|(i, part)| {
            let l = l_of_letter(part.chars().next().unwrap()).unwrap();
            let n = u8::try_from(i).unwrap() + l + 1;
            Subshell::new(Orbital::new(n, l).unwrap(), part[1..].parse().unwrap()).unwrap()
        })
        .collect()
}

fn by_two_j(levels: &[(TwiceJ, u128)]) -> BTreeMap<String, u128> {
    levels
        .iter()
        .map(|(j, n)| (j.doubled().to_string(), *n))
        .collect()
}

fn expected(value: &Value) -> BTreeMap<String, u128> {
    let pairs = value.as_object().unwrap().iter();
    pairs
        .map(|(j, n)| (j.clone(), n.as_u64().unwrap().into()))
        .collect()
}

#[test]
fn ls_terms_agree_with_the_enumeration_of_microstates() {
    let vectors = vector_json("term_counts.json");
    let cases = vectors["LS"].as_object().unwrap();
    assert_eq!(cases.len(), 48);
    for (name, case) in cases {
        let all = ls::terms(&shells(name)).unwrap();
        assert_eq!(
            all.states,
            u128::from(case["microstates"].as_u64().unwrap()),
            "{name}"
        );
        assert_eq!(
            all.n_terms(),
            u128::from(case["n_terms"].as_u64().unwrap()),
            "{name}"
        );
        assert_eq!(
            all.n_levels(),
            u128::from(case["n_levels"].as_u64().unwrap()),
            "{name}"
        );
        assert_eq!(
            by_two_j(&all.levels_by_j()),
            expected(&case["levels_by_twoJ"]),
            "{name}"
        );
        let ours: Vec<(u64, u64, String, u128)> = all
            .terms
            .iter()
            .map(|t| {
                let term = t.term;
                (
                    term.multiplicity().into(),
                    term.l.into(),
                    term.to_string(),
                    t.times,
                )
            })
            .collect();
        let theirs: Vec<(u64, u64, String, u128)> = case["terms"]
            .as_array()
            .unwrap()
            .iter()
            .map(|t| {
                (
                    t["multiplicity"].as_u64().unwrap(),
                    t["L"].as_u64().unwrap(),
                    t["symbol"].as_str().unwrap().to_string(),
                    t["count"].as_u64().unwrap().into(),
                )
            })
            .collect();
        assert_eq!(ours, theirs, "{name}");
    }
    report(
        "terms-ls",
        Row {
            quantity: "LS terms and levels".into(),
            cases: cases.len(),
            worst: 0.0,
            tolerance: 0.0,
            measure: "cases that differ".into(),
            source: "enumeration of microstates (own work)".into(),
        },
    );
}

#[test]
fn jj_levels_agree_with_the_enumeration_of_microstates() {
    let vectors = vector_json("term_counts.json");
    let cases = vectors["jj"].as_object().unwrap();
    assert_eq!(cases.len(), 22);
    for (name, case) in cases {
        let shells = shells(name);
        let two_l = 2 * i32::from(shells[0].orbital().l());
        assert_eq!(
            by_two_j(&jj::levels_by_j(&shells).unwrap()),
            expected(&case["total_twoJ"]),
            "{name}"
        );
        if !shells[0].is_open() {
            continue;
        }
        let ours = jj::configurations(&shells, usize::MAX).unwrap();
        let theirs = case["subconfigs"].as_array().unwrap();
        assert_eq!(ours.total, theirs.len() as u128, "{name}");
        assert_eq!(ours.listed.len(), theirs.len(), "{name}");
        for sub in theirs {
            let minus = sub["n_minus"].as_u64().unwrap();
            let found = ours
                .listed
                .iter()
                .find(|c| {
                    let lower = c.subshells.iter().filter(|s| s.j.doubled() == two_l - 1);
                    lower.map(|s| u64::from(s.electrons)).sum::<u64>() == minus
                })
                .unwrap();
            let electrons: u32 = found.subshells.iter().map(|s| s.electrons).sum();
            assert_eq!(electrons, shells[0].electrons());
            assert_eq!(
                by_two_j(&found.levels),
                expected(&sub["twoJ"]),
                "{name} {found}"
            );
        }
    }
    report(
        "terms-jj",
        Row {
            quantity: "jj levels".into(),
            cases: cases.len(),
            worst: 0.0,
            tolerance: 0.0,
            measure: "cases that differ".into(),
            source: "enumeration of microstates (own work)".into(),
        },
    );
}

#[test]
fn levels_of_equivalent_j_agree_with_the_enumeration() {
    let vectors = vector_json("term_counts.json");
    let cases = vectors["j_to_n"].as_object().unwrap();
    assert_eq!(cases.len(), 18);
    for (name, case) in cases {
        let (j, n) = name.split_once('^').unwrap();
        let two_j = j.strip_suffix("/2").unwrap().parse().unwrap();
        let levels = jj::levels_of_equivalent(TwiceJ::from_doubled(two_j), n.parse().unwrap());
        assert_eq!(by_two_j(&levels.unwrap()), expected(case), "{name}");
    }
    report(
        "terms-j-n",
        Row {
            quantity: "levels of equivalent electrons jⁿ".into(),
            cases: cases.len(),
            worst: 0.0,
            tolerance: 0.0,
            measure: "cases that differ".into(),
            source: "enumeration of microstates (own work)".into(),
        },
    );
}

#[test]
fn numbers_quoted_in_the_literature_come_out() {
    // Racah, Phys. Rev. 76, 1352 (1949) and Nielson & Koster 1963 for f7; any textbook for d5, p3
    // (from memory).
    let f7 = ls::terms(&shells("f7")).unwrap();
    assert_eq!((f7.n_terms(), f7.n_levels(), f7.states), (119, 327, 3432));
    let d5 = ls::terms(&shells("d5")).unwrap();
    assert_eq!((d5.n_terms(), d5.n_levels(), d5.states), (16, 37, 252));
    let p3: Vec<String> = ls::terms(&shells("p3"))
        .unwrap()
        .terms
        .iter()
        .map(|t| t.term.to_string())
        .collect();
    assert_eq!(p3, ["4S", "2D", "2P"]);
}

/// Everything that has to hold of any configuration.
fn sum_rules_hold(shells: &[Subshell]) {
    let name: Vec<String> = shells.iter().map(ToString::to_string).collect();
    let all = ls::terms(shells).unwrap();
    let in_terms: u128 = all
        .terms
        .iter()
        .map(|t| t.times * u128::from(t.term.states()))
        .sum();
    assert_eq!(in_terms, all.states, "{name:?}");
    let levels = all.levels_by_j();
    let in_levels: u128 = levels
        .iter()
        .map(|(j, n)| n * u128::try_from(j.degeneracy()).unwrap())
        .sum();
    assert_eq!(in_levels, all.states, "{name:?}");
    let count: u128 = levels.iter().map(|l| l.1).sum();
    assert_eq!(count, all.n_levels(), "{name:?}");
    assert_eq!(
        jj::levels_by_j(shells).unwrap(),
        levels,
        "jj and LS, {name:?}"
    );
    let cells: u128 = grid::grid(shells).unwrap().counts.iter().flatten().sum();
    assert_eq!(cells, all.states, "{name:?}");
    if let Some(pairs) = jk::pairs(shells, 0).unwrap() {
        assert_eq!(pairs.n_levels, all.n_levels(), "jK and LS, {name:?}");
    }
}

#[test]
fn states_add_up_for_every_shell_and_are_the_same_for_holes() {
    // s … i, that is ℓ = 0 … 6, every N.
    for l in 0..=6_u8 {
        let orbital = Orbital::new(l + 1, l).unwrap();
        for n in 1..=orbital.capacity() {
            let shell = Subshell::new(orbital, n).unwrap();
            sum_rules_hold(&[shell]);
            if let Some(holes) = Subshell::new(orbital, orbital.capacity() - n) {
                assert_eq!(
                    ls::terms(&[shell]).unwrap(),
                    ls::terms(&[holes]).unwrap(),
                    "{shell} and its holes"
                );
            }
        }
    }
}

/// A fixed sequence of numbers (Knuth's 64-bit linear congruential generator).
struct Numbers(u64);

impl Numbers {
    fn below(&mut self, bound: u32) -> u32 {
        self.0 = self
            .0
            .wrapping_mul(6_364_136_223_846_793_005)
            .wrapping_add(1_442_695_040_888_963_407);
        u32::try_from((self.0 >> 33) % u64::from(bound)).unwrap()
    }
}

#[test]
fn states_add_up_for_five_hundred_mixtures() {
    let mut numbers = Numbers(20_260_101);
    let mut several = 0;
    for _ in 0..500 {
        let count = 1 + numbers.below(4);
        let mut mixture = Vec::new();
        for i in 0..count {
            // Rarely g, h, i; each shell with an n of its own.
            let l = if numbers.below(8) == 0 {
                4 + numbers.below(3)
            } else {
                numbers.below(4)
            };
            let orbital =
                Orbital::new(u8::try_from(l + 1 + i).unwrap(), u8::try_from(l).unwrap()).unwrap();
            let electrons = 1 + numbers.below(orbital.capacity());
            mixture.push(Subshell::new(orbital, electrons).unwrap());
        }
        if ls::states(&mixture).unwrap() > 1 << 70 {
            mixture.truncate(2);
        }
        several += u32::from(mixture.len() > 1);
        sum_rules_hold(&mixture);
    }
    assert!(several > 300, "mixtures of several shells: {several}");
}

#[test]
fn the_grid_of_p2_is_the_textbook_one() {
    // Condon & Shortley 1935, ch. VII (from memory): p2 has M_L = 2 … −2, M_S = 1 … −1.
    let p2 = grid::grid(&shells("p2")).unwrap();
    assert_eq!(p2.m_l, [2, 1, 0, -1, -2]);
    assert_eq!(
        p2.m_s.iter().map(|m| m.doubled()).collect::<Vec<_>>(),
        [2, 0, -2]
    );
    assert_eq!(
        p2.counts,
        [[0, 1, 0], [1, 2, 1], [1, 3, 1], [1, 2, 1], [0, 1, 0]]
    );
}

#[test]
fn closed_shells_have_one_state() {
    let closed = ls::terms(&shells("s2 p6 d10")).unwrap();
    assert_eq!(closed.states, 1);
    assert_eq!(closed.terms.len(), 1);
    assert_eq!(closed.terms[0].term, Term::SINGLET_S);
    assert_eq!(ls::terms(&[]).unwrap(), closed);
    assert_eq!(grid::grid(&[]).unwrap().counts, [[1]]);
    let jj = jj::configurations(&[], 10).unwrap();
    assert_eq!((jj.total, jj.listed.len()), (1, 1));
    assert_eq!(jj.listed[0].levels, [(TwiceJ::from_doubled(0), 1)]);
}

#[test]
fn what_is_too_large_is_refused_and_the_rest_is_quick() {
    let wide = |l: u8, n: u32| Subshell::new(Orbital::new(50, l).unwrap(), n).unwrap();
    let half = wide(49, 99);
    assert_eq!(
        ls::terms(&[half]).map(drop).unwrap_err().code,
        "too-many-states"
    );
    assert_eq!(
        jj::levels_by_j(&[half]).unwrap_err().code,
        "too-many-states"
    );
    assert_eq!(grid::grid(&[half]).unwrap_err().code, "too-many-states");
    let every: Vec<Subshell> = (1..=50)
        .flat_map(|n| (0..n).map(move |l| Subshell::new(Orbital::new(n, l).unwrap(), 1).unwrap()))
        .collect();
    assert_eq!(
        ls::terms(&every).map(drop).unwrap_err().code,
        "too-many-states"
    );
    assert_eq!(
        jj::configurations(&every, 10).unwrap_err().code,
        "too-many-states"
    );
    assert_eq!(
        ls::terms(&[wide(49, 12), wide(48, 10)])
            .map(drop)
            .unwrap_err()
            .code,
        "counting-too-long"
    );
    // Fifty open s shells: 2^50 states, 26 terms.
    let spins: Vec<Subshell> = (1..=50)
        .map(|n| Subshell::new(Orbital::new(n, 0).unwrap(), 1).unwrap())
        .collect();
    assert_eq!(ls::terms(&spins).unwrap().terms.len(), 26);
    sum_rules_hold(&spins);
    sum_rules_hold(&[wide(49, 190)]);
}

#[test]
fn jk_names_of_neon_like_excited_levels() {
    // 2p5 3p: parents 2P1/2, 2P3/2; K and J as in the published neon term lists (Racah 1942; from
    // memory): 2P3/2 gives 2[1/2], 2[3/2], 2[5/2], 2P1/2 gives 2[1/2], 2[3/2]; ten levels.
    let orbital = |n, l| Orbital::new(n, l).unwrap();
    let excited = [
        Subshell::new(orbital(2, 1), 5).unwrap(),
        Subshell::new(orbital(3, 1), 1).unwrap(),
    ];
    let pairs = jk::pairs(&excited, 100).unwrap().unwrap();
    let names: Vec<String> = pairs.listed.iter().map(ToString::to_string).collect();
    assert_eq!(
        names,
        [
            "(2P*1/2) 2[1/2]",
            "(2P*1/2) 2[3/2]",
            "(2P*3/2) 2[1/2]",
            "(2P*3/2) 2[3/2]",
            "(2P*3/2) 2[5/2]"
        ]
    );
    assert_eq!(pairs.n_levels, 10);
    let listed: usize = pairs.listed.iter().map(|p| p.j.len()).sum();
    assert_eq!(listed, 10);
    // A single shell, or an outer shell of two electrons, has no pair names.
    assert_eq!(jk::pairs(&excited[1..], 10).unwrap(), None);
    assert_eq!(
        jk::pairs(&[excited[0], Subshell::new(orbital(3, 1), 2).unwrap()], 10).unwrap(),
        None
    );
}
