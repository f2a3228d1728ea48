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
    use crate::configuration::Orbital;

    #[test]
    fn seniorities_of_p3_and_d3() {
        // Racah 1943 (from memory).
        let shell =
            |l, n| Seniorities::of(Subshell::new(Orbital::new(9, l).unwrap(), n).unwrap()).unwrap();
        let term = |two_s, l| Term { two_s, l };
        let p3 = shell(1, 3);
        assert_eq!(p3.of_term(term(3, 0), 1), Some(3));
        assert_eq!(p3.of_term(term(1, 1), 1), Some(1));
        assert_eq!(p3.of_term(term(1, 2), 1), Some(3));
        assert_eq!(p3.of_term(term(1, 2), 2), None);
        let d7 = shell(2, 7);
        assert_eq!(d7.of_term(term(1, 2), 1), Some(1));
        assert_eq!(d7.of_term(term(1, 2), 2), Some(3));
        assert_eq!(shell(2, 4).of_term(Term::SINGLET_S, 1), Some(0));
    }
}
