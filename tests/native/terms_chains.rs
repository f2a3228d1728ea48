//! Coupling chains: as many as terms, each one a valid coupling, repeats told apart.

use rungline_core::configuration::{Orbital, Subshell};
use rungline_core::terms::{Term, chains, ls};
use std::collections::BTreeSet;

fn shell(n: u8, l: u8, electrons: u32) -> Subshell {
    Subshell::new(Orbital::new(n, l).unwrap(), electrons).unwrap()
}

#[test]
fn every_term_has_as_many_chains_as_it_occurs() {
    let cases = [
        vec![shell(3, 2, 3)],
        vec![shell(3, 2, 6), shell(4, 0, 1)],
        vec![shell(2, 1, 2), shell(3, 1, 1)],
        vec![shell(3, 2, 5), shell(4, 0, 1), shell(4, 1, 1)],
        vec![shell(4, 3, 3), shell(5, 2, 2), shell(6, 0, 1)],
        vec![shell(4, 3, 7)],
        vec![],
    ];
    for shells in cases {
        let all = ls::terms(&shells).unwrap();
        let chains = chains::chains(&shells, usize::MAX).unwrap();
        assert_eq!(chains.total, all.n_terms());
        assert_eq!(chains.listed.len() as u128, all.n_terms(), "{shells:?}");
        let names: BTreeSet<String> = chains.listed.iter().map(ToString::to_string).collect();
        assert_eq!(names.len(), chains.listed.len(), "all names differ");
        for t in &all.terms {
            let of_term: Vec<_> = chains.listed.iter().filter(|c| c.term == t.term).collect();
            assert_eq!(of_term.len() as u128, t.times);
            for (i, chain) in of_term.iter().enumerate() {
                assert_eq!(chain.index, i as u128 + 1);
                let mut coupled = Term::SINGLET_S;
                for link in &chain.links {
                    assert!(coupled.coupled_to(link.own).any(|x| x == link.coupled));
                    coupled = link.coupled;
                }
                assert_eq!(coupled, chain.term);
            }
            let alone = chains::chains_of(&shells, t.term, 2).unwrap();
            assert_eq!(alone.total, t.times);
            assert!(alone.listed.iter().eq(of_term.iter().take(2).copied()));
        }
    }
}

#[test]
fn chains_are_written_as_in_the_trade() {
    let iron = [shell(3, 2, 6), shell(4, 0, 1)];
    let sextet_d = Term { two_s: 5, l: 2 };
    let found = chains::chain(&iron, sextet_d, None, 10).unwrap().unwrap();
    assert_eq!(found.to_string(), "3d6(5D) 4s 6D");
    // The order in the sheet does not matter: shells couple in the order n, ℓ.
    let chromium = [shell(4, 1, 1), shell(4, 0, 1), shell(3, 2, 5)];
    let octet_p = Term { two_s: 7, l: 1 };
    let found = chains::chain(&chromium, octet_p, None, 10)
        .unwrap()
        .unwrap();
    assert_eq!(found.to_string(), "3d5(6S) 4s (7S) 4p 8P");
    let quartet_d = Term { two_s: 3, l: 2 };
    let listed = chains::chains_of(&iron, quartet_d, 10).unwrap();
    let names: Vec<String> = listed.listed.iter().map(ToString::to_string).collect();
    assert_eq!(names, ["3d6(5D) 4s 4D", "3d6(3D) 4s 4D"]);
    assert_eq!(chains::chains(&[], 5).unwrap().listed[0].to_string(), "1S");
    let absent = Term { two_s: 9, l: 0 };
    assert_eq!(chains::chains_of(&iron, absent, 10).unwrap().total, 0);
    assert_eq!(chains::chain(&iron, absent, None, 10).unwrap(), None);
    assert_eq!(chains::chain(&iron, quartet_d, Some(3), 10).unwrap(), None);
    assert_eq!(chains::chain(&iron, quartet_d, Some(0), 10).unwrap(), None);
}

#[test]
fn a_repeated_shell_term_carries_its_index() {
    let shells = [shell(3, 2, 3), shell(4, 0, 1)];
    let listed = chains::chains_of(&shells, Term { two_s: 2, l: 2 }, 10).unwrap();
    let names: Vec<String> = listed.listed.iter().map(ToString::to_string).collect();
    assert_eq!(names, ["3d3(2D #1) 4s 3D", "3d3(2D #2) 4s 3D"]);
}

#[test]
fn listing_is_bounded() {
    let many = [shell(4, 3, 7), shell(5, 2, 5), shell(6, 1, 3)];
    let some = chains::chains(&many, 50).unwrap();
    assert_eq!(some.listed.len(), 50);
    assert!(some.total > 100_000);
    let wide = [shell(50, 49, 4), shell(50, 48, 4)];
    assert_eq!(chains::chains(&wide, 50).unwrap().listed.len(), 50);
    let wider = [shell(50, 49, 3), shell(50, 48, 3), shell(50, 47, 3)];
    let fault = chains::chains(&wider, 50).map(|c| c.total).unwrap_err();
    assert_eq!(fault.code, "coupling-too-long");
    assert!(chains::chains(&many, 0).unwrap().listed.is_empty());
}
