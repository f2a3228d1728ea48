//! Seniority of the terms of equivalent electrons: the number of electrons left when pairs
//! coupled to ¹S are taken away (Racah, Phys. Rev. 63, 367 (1943)).
//!
//! A term of ℓ^v reappears in ℓ^(v+2), ℓ^(v+4) … with the same seniority, so that ℓ^N has as many
//! terms S L of seniority at most v as ℓ^v has. The running index counts lower seniorities first.

use super::ls::{self, LsTerms};
use super::term::Term;
use crate::configuration::Subshell;
use crate::problem::Problem;

/// The seniorities of one shell's terms.
#[derive(Clone, Debug)]
pub struct Seniorities {
    shell: Subshell,
    /// v and the terms of ℓ^v, v rising.
    fewer: Vec<(u32, LsTerms)>,
}

impl Seniorities {
    /// Counts the terms of ℓ^v for each v.
    ///
    /// Errors: as [`ls::terms`].
    pub fn of(shell: Subshell) -> Result<Self, Problem> {
        let capacity = shell.orbital().capacity();
        let particles = shell
            .electrons()
            .min(capacity.saturating_sub(shell.electrons()));
        let fewer = (particles % 2..=particles)
            .step_by(2)
            .map(|v| {
                // No electron: the closed shell's ¹S.
                let electrons: Vec<Subshell> =
                    Subshell::new(shell.orbital(), v).into_iter().collect();
                Ok((v, ls::terms(&electrons)?))
            })
            .collect::<Result<_, Problem>>()?;
        Ok(Seniorities { shell, fewer })
    }

    /// The shell.
    pub fn shell(&self) -> Subshell {
        self.shell
    }

    /// The seniority of a term with its running index from 1; nothing where the shell has none.
    pub fn of_term(&self, term: Term, index: u128) -> Option<u32> {
        let found = self
            .fewer
            .iter()
            .find(|(_, terms)| terms.times(term) >= index.max(1));
        found.map(|&(v, _)| v)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::angular::equivalent::classify;
    use crate::configuration::Orbital;

    #[test]
    fn seniorities_agree_with_the_classification_of_equivalent_electrons() {
        for l in 0..=4_u8 {
            let orbital = Orbital::new(9, l).unwrap();
            for n in 1..orbital.capacity() {
                let seniorities = Seniorities::of(Subshell::new(orbital, n).unwrap()).unwrap();
                let classified = classify(l, n).unwrap();
                let counted = ls::terms(&[seniorities.shell()]).unwrap();
                assert_eq!(classified.len() as u128, counted.n_terms());
                for term in classified {
                    let own = Term {
                        two_s: u32::try_from(term.two_s).unwrap(),
                        l: term.l_total,
                    };
                    let index = u128::from(term.index);
                    assert_eq!(counted.times(own), u128::from(term.times));
                    assert_eq!(
                        seniorities.of_term(own, index),
                        Some(term.seniority),
                        "{own} #{index}"
                    );
                }
            }
        }
    }
}
