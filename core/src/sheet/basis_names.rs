//! Names of the LS-coupled states of a basis: the same term and running index that the listing of
//! terms gives them.

use crate::configuration::{Orbital, Subshell};
use crate::numerics::order::sort_by;
use crate::structure::{Basis, State};
use crate::terms::Term;
use crate::terms::chains::{Chain, Link};

/// The chain of every state of a basis, in the order of [`Basis::states`].
///
/// `orbitals` are those of the basis, by n, then ℓ: the order in which [`crate::terms::chains`] couples
/// open shells. Full and empty subshells couple to ¹S and change nothing, so a state is a chain; its
/// index is its place among the chains of its configuration and term, which are listed depth first:
/// shell after shell by own term, index of that, term coupled so far.
pub fn chains(basis: &Basis, orbitals: &[Orbital]) -> Vec<Chain> {
    let mut chains: Vec<(usize, Chain)> = basis
        .states()
        .iter()
        .map(|state| (state.configuration, chain(basis, orbitals, state)))
        .collect();
    let mut places: Vec<usize> = (0..chains.len()).collect();
    sort_by(&mut places, |a, b| {
        let key = |place: &usize| chains.get(*place).map(|(c, chain)| (*c, chain.term));
        key(a).cmp(&key(b)).then_with(|| {
            let links = |place: &usize| chains.get(*place).map(|(_, chain)| order(chain));
            links(a).cmp(&links(b))
        })
    });
    let mut last = None;
    let mut index = 0;
    for place in places {
        if let Some((configuration, chain)) = chains.get_mut(place) {
            let of = (*configuration, chain.term);
            index = if last == Some(of) { index + 1 } else { 1 };
            last = Some(of);
            chain.index = index;
        }
    }
    chains.into_iter().map(|(_, chain)| chain).collect()
}

fn order(chain: &Chain) -> Vec<(Term, Option<u128>, Term)> {
    chain
        .links
        .iter()
        .map(|link| (link.own, link.own_index, link.coupled))
        .collect()
}

fn chain(basis: &Basis, orbitals: &[Orbital], state: &State) -> Chain {
    let term = |part: crate::structure::Coupled| Term {
        two_s: u32::try_from(part.two_s).unwrap_or(0),
        l: u32::try_from(part.l).unwrap_or(0),
    };
    let mut links = Vec::new();
    for (place, orbital) in orbitals.iter().enumerate() {
        let shell = Subshell::new(*orbital, basis.electrons(state.configuration, place));
        let own = state.terms.get(place).and_then(|own| {
            let terms = basis.terms(state.configuration, place);
            terms.get(*own)
        });
        let running = state.running.get(place).copied().unwrap_or_default();
        if let (Some(shell), Some(own)) = (shell.filter(|s| s.is_open()), own) {
            links.push(Link {
                shell,
                own: Term {
                    two_s: u32::try_from(own.two_s).unwrap_or(0),
                    l: own.l_total,
                },
                own_index: (own.times > 1).then_some(u128::from(own.index)),
                coupled: term(running),
            });
        }
    }
    Chain {
        links,
        term: term(state.total()),
        index: 0,
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::configuration;
    use crate::terms::chains as listing;

    /// Every state of these configurations is a listed chain, and each chain is a state.
    fn agree(texts: &[&str]) {
        let read = |text: &&str| -> Vec<Subshell> {
            let written = configuration::parse(text).unwrap();
            written.subshells.iter().map(|s| s.subshell).collect()
        };
        let configurations: Vec<Vec<Subshell>> = texts.iter().map(read).collect();
        let mut orbitals: Vec<Orbital> = configurations
            .iter()
            .flatten()
            .map(|s| s.orbital())
            .collect();
        orbitals.sort();
        orbitals.dedup();
        let electrons = |all: &[Subshell], orbital: &Orbital| {
            let found = all.iter().find(|s| s.orbital() == *orbital);
            found.map_or(0, |s| s.electrons())
        };
        let l: Vec<u8> = orbitals.iter().map(|o| o.l()).collect();
        let occupations: Vec<Vec<u32>> = configurations
            .iter()
            .map(|c| orbitals.iter().map(|o| electrons(c, o)).collect())
            .collect();
        let basis = Basis::new(&l, &occupations).unwrap();
        let named = chains(&basis, &orbitals);
        for (place, subshells) in configurations.iter().enumerate() {
            let mut found: Vec<Chain> = basis
                .states()
                .iter()
                .zip(&named)
                .filter(|(state, _)| state.configuration == place)
                .map(|(_, chain)| chain.clone())
                .collect();
            found.sort_by_key(|chain| (chain.term, chain.index));
            let listed = listing::chains(subshells, usize::MAX).unwrap();
            assert_eq!(found, listed.listed, "{}", texts[place]);
        }
    }

    #[test]
    fn every_state_has_the_index_of_its_chain() {
        for n in 1..10 {
            agree(&[&format!("3d{n}")]);
        }
        for n in 1..14 {
            agree(&[&format!("4f{n}")]);
        }
        agree(&["2p3"]);
        agree(&["2p5 3s", "2p5 3d", "2p5 5g"]);
        agree(&["3d6 4s 4p", "3d7 4p", "3d5 4s2 4p"]);
        agree(&["3d6 4s2", "3d7 4s", "3d8"]);
        agree(&["4f3 5d 6s", "4f3 5d2", "4f3 6s2"]);
        agree(&["4f7 5d 6s2", "4f7 5d2 6s"]);
        agree(&["2p3 3p3", "2p4 3p2"]);
    }
}
