//! The ground term and level by Hund's rules (Hund, Z. Phys. 33, 345 (1925); Condon & Shortley
//! 1935, ch. VII; Cowan 1981, §4-16).
//!
//! 1. The largest multiplicity. 2. Of those, the largest L. 3. Of its levels the smallest J for a
//!    shell less than half full, the largest J for one more than half full.
//!
//! The first two are meant for one open shell and are common practice for several. The third
//! follows from the sign of the spin–orbit splitting, which is one shell's matter: it is applied
//! for one open shell, also beside open s shells, which have no spin–orbit energy. With two or
//! more open shells of ℓ > 0 the level is left undecided, unless the term has only one.

use super::ls::{LsTerm, LsTerms};
use super::open_shells;
use super::term::Term;
use crate::configuration::Subshell;
use crate::quantity::TwiceJ;

/// Why J is what it is, or why it is left open.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum ThirdRule {
    /// The term has one level only.
    OnlyLevel,
    /// The ℓ > 0 shell is less than half full: smallest J.
    LessThanHalf,
    /// The ℓ > 0 shell is more than half full: largest J, the term is inverted.
    MoreThanHalf,
    /// Several shells of ℓ > 0 are open: no rule.
    Undecided,
}

/// The ground term and level by Hund's rules.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Ground {
    /// By the first two rules.
    pub term: Term,
    /// By the third, where it holds.
    pub j: Option<TwiceJ>,
    /// What decided J.
    pub third_rule: ThirdRule,
    /// Whether more than one shell is open, where the first two rules are a custom only.
    pub several_open_shells: bool,
}

/// One rule and what it kept.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Step {
    /// The rule in words: "largest multiplicity".
    pub rule: &'static str,
    /// The terms that it kept.
    pub terms: Vec<LsTerm>,
    /// The levels that it kept, for the third rule.
    pub levels: Vec<TwiceJ>,
}

/// The ground term and level.
///
/// In closed form, so it holds for any number of shells: a shell of N electrons has at most
/// S = min(N, 4ℓ + 2 − N)/2 and, with it, at most L = n(2ℓ + 1 − n)/2, n = N mod (2ℓ + 1); the
/// sums of both over the shells are the largest ones of the configuration.
pub fn ground(subshells: &[Subshell]) -> Ground {
    let open = open_shells(subshells);
    let mut term = Term::SINGLET_S;
    for shell in &open {
        let orbitals = shell.orbital().capacity() / 2;
        let holes = shell.orbital().capacity().saturating_sub(shell.electrons());
        let unpaired = shell.electrons().min(holes);
        let beyond_half = shell.electrons() % orbitals;
        term.two_s = term.two_s.saturating_add(unpaired);
        term.l = term
            .l
            .saturating_add(beyond_half.saturating_mul(orbitals - beyond_half) / 2);
    }
    let third_rule = third_rule(term, &open);
    let j = match third_rule {
        ThirdRule::OnlyLevel | ThirdRule::LessThanHalf => term.levels().next(),
        ThirdRule::MoreThanHalf => term.levels().last(),
        ThirdRule::Undecided => None,
    };
    Ground {
        term,
        j,
        third_rule,
        several_open_shells: open.len() > 1,
    }
}

fn third_rule(term: Term, open: &[Subshell]) -> ThirdRule {
    if term.level_count() == 1 {
        return ThirdRule::OnlyLevel;
    }
    let mut orbital_shells = open.iter().filter(|s| s.orbital().l() > 0);
    match (orbital_shells.next(), orbital_shells.next()) {
        // A half-filled shell has L = 0, so only the two unequal cases are left.
        (Some(shell), None) if shell.electrons() < shell.orbital().capacity() / 2 => {
            ThirdRule::LessThanHalf
        }
        (Some(_), None) => ThirdRule::MoreThanHalf,
        _ => ThirdRule::Undecided,
    }
}

/// Each rule with what it kept, out of all terms of the configuration.
pub fn steps(ground: &Ground, all: &LsTerms) -> Vec<Step> {
    let kept = |keep: &dyn Fn(Term) -> bool| -> Vec<LsTerm> {
        all.terms.iter().copied().filter(|t| keep(t.term)).collect()
    };
    let term = ground.term;
    let one_term = kept(&|t| t == term);
    let third = match ground.third_rule {
        ThirdRule::OnlyLevel => "the term has one level only",
        ThirdRule::LessThanHalf => "less than half full: smallest J",
        ThirdRule::MoreThanHalf => "more than half full: largest J",
        ThirdRule::Undecided => "several shells with orbital momentum are open: no rule for J",
    };
    vec![
        Step {
            rule: "largest multiplicity",
            terms: kept(&|t| t.two_s == term.two_s),
            levels: Vec::new(),
        },
        Step {
            rule: "largest L among them",
            terms: one_term.clone(),
            levels: Vec::new(),
        },
        Step {
            rule: third,
            terms: one_term,
            levels: match ground.j {
                Some(j) => vec![j],
                None => term.levels().collect(),
            },
        },
    ]
}
