//! Rules of unmixed coupling chains.
//!
//! The operator acts on one electron, so every shell that takes no part keeps its own term, and what
//! the shells up to some point couple to changes by no more than the part of the operator that
//! acts there. Where only the coupling is passed on, its factor {L₁ L s; L′ L₁′ k} must not vanish
//! (Racah, Phys. Rev. 62, 438 (1942), eqs. 44; Cowan 1981, §11-5).

use super::selection::Jump;
use super::shell_operator::{Own, ShellOperator};
use super::{Multipole, Rule};
use crate::angular::wigner_6j;
use crate::configuration::{Orbital, Subshell};
use crate::terms::Term;
use crate::terms::chains::Chain;
use crate::terms::seniority::Seniorities;
use std::sync::OnceLock;

/// The shells of two configurations.
#[derive(Clone, Debug)]
pub(super) struct Shells {
    /// Every orbital of either, in the order n, ℓ.
    orbitals: Vec<Orbital>,
    /// Half-filled shells, where the two configurations are one.
    half_filled: Vec<Seniorities>,
    /// The shells that may be active: of the one configuration, or the two between which an electron
    /// moves, each with that electron.
    may_act: Vec<Subshell>,
    /// Their parentage, made when it is first asked for.
    operators: OnceLock<Vec<ShellOperator>>,
}

impl Shells {
    /// `common` are the subshells if the two configurations are one, `active` those between which
    /// an electron moves, each with it. A shell too large to be counted is left without its rules.
    pub(super) fn new(orbitals: Vec<Orbital>, common: &[Subshell], active: &[Subshell]) -> Self {
        let half = common
            .iter()
            .filter(|s| 2 * s.electrons() == s.orbital().capacity());
        let open = common.iter().filter(|s| s.is_open()).chain(active);
        Shells {
            orbitals,
            half_filled: half.filter_map(|&s| Seniorities::of(s).ok()).collect(),
            may_act: open.copied().collect(),
            operators: OnceLock::new(),
        }
    }

    /// The rule on chains that refuses, if one does.
    pub(super) fn refusal(
        &self,
        jump: Jump,
        multipole: Multipole,
        upper: &Chain,
        lower: &Chain,
    ) -> Option<Rule> {
        let rank = multipole.rank();
        let (upper, lower) = (self.along(upper), self.along(lower));
        match jump {
            Jump::Several(_) => None,
            Jump::None if multipole == Multipole::M1 => None,
            Jump::One {
                upper: from,
                lower: to,
            } => {
                let first = from.min(to);
                let last = from.max(to);
                first_refusal(&upper, &lower, |orbital| Acting {
                    on_own: if orbital == from || orbital == to {
                        Change::OneElectron(orbital.l().into())
                    } else {
                        Change::Nothing
                    },
                    on_coupled: if orbital < first {
                        Change::Nothing
                    } else if orbital < last {
                        Change::OneElectron(first.l().into())
                    } else {
                        Change::Orbital(rank)
                    },
                })
                .or_else(|| {
                    let shell = self.without_parent(from, &upper, &lower)?;
                    self.parent_rule(shell, &upper, &lower)
                })
                .or_else(|| {
                    let shell = self.without_parent(to, &lower, &upper)?;
                    self.parent_rule(shell, &upper, &lower)
                })
            }
            Jump::None => {
                // Any one open shell may be the active one; refused only if none of them can be.
                let mut refusal = None;
                for active in upper.iter().filter(|p| p.is_open).map(|p| p.orbital) {
                    let refused = first_refusal(&upper, &lower, |orbital| Acting {
                        on_own: if orbital == active {
                            Change::Orbital(rank)
                        } else {
                            Change::Nothing
                        },
                        on_coupled: if orbital < active {
                            Change::Nothing
                        } else {
                            Change::Orbital(rank)
                        },
                    });
                    let refused = refused
                        .or_else(|| self.seniority_rule(active, &upper, &lower))
                        .or_else(|| self.operator_rule(active, rank, &upper, &lower));
                    match refused {
                        None => return None,
                        refused => refusal = refusal.or(refused),
                    }
                }
                refusal
            }
        }
    }

    /// In a half-filled shell the orbital operators of even rank, E2 here, link only terms whose
    /// seniorities differ by two (Racah, Phys. Rev. 63, 367 (1943)).
    fn seniority_rule(&self, active: Orbital, upper: &[Place], lower: &[Place]) -> Option<Rule> {
        let half_filled = self
            .half_filled
            .iter()
            .find(|s| s.shell().orbital() == active)?;
        let seniority = |places: &[Place]| {
            let place = places.iter().find(|p| p.orbital == active)?;
            half_filled.of_term(place.own, place.own_index)
        };
        let (upper, lower) = (seniority(upper)?, seniority(lower)?);
        (upper.abs_diff(lower) != 2).then_some(Rule::Seniority {
            shell: half_filled.shell(),
            upper,
            lower,
        })
    }

    fn operator(&self, orbital: Orbital) -> Option<&ShellOperator> {
        let made = || {
            self.may_act
                .iter()
                .filter_map(|&s| ShellOperator::of(s))
                .collect()
        };
        let operators: &Vec<ShellOperator> = self.operators.get_or_init(made);
        operators.iter().find(|o| o.shell().orbital() == orbital)
    }

    /// The shell, if its term with the electron, in `with`, does not have that without it as a parent.
    fn without_parent(
        &self,
        orbital: Orbital,
        with: &[Place],
        without: &[Place],
    ) -> Option<Subshell> {
        let operator = self.operator(orbital)?;
        let (child, parent) = (own(with, orbital)?, own(without, orbital)?);
        (!operator.has_parent(child, parent)).then_some(operator.shell())
    }

    fn parent_rule(&self, shell: Subshell, upper: &[Place], lower: &[Place]) -> Option<Rule> {
        Some(Rule::Parent {
            shell,
            upper: own(upper, shell.orbital())?.term,
            lower: own(lower, shell.orbital())?.term,
        })
    }

    /// The operator on the one active shell links its two terms.
    fn operator_rule(
        &self,
        orbital: Orbital,
        rank: u32,
        upper: &[Place],
        lower: &[Place],
    ) -> Option<Rule> {
        let operator = self.operator(orbital)?;
        let (above, below) = (own(upper, orbital)?, own(lower, orbital)?);
        (!operator.links(above, below, rank)).then_some(Rule::Unlinked {
            shell: operator.shell(),
            upper: above.term,
            lower: below.term,
        })
    }

    /// The chain over all orbitals of both configurations: shells without a link of their own are
    /// closed or empty, have ¹S and change nothing.
    fn along(&self, chain: &Chain) -> Vec<Place> {
        let mut links = chain.links.iter().peekable();
        let mut coupled = Term::SINGLET_S;
        self.orbitals
            .iter()
            .map(|&orbital| {
                let link = links.next_if(|link| link.shell.orbital() == orbital);
                let before = coupled;
                coupled = link.map_or(coupled, |link| link.coupled);
                Place {
                    orbital,
                    is_open: link.is_some(),
                    own: link.map_or(Term::SINGLET_S, |link| link.own),
                    own_index: link.and_then(|link| link.own_index).unwrap_or(1),
                    electrons: link.map_or(0, |link| link.shell.electrons()),
                    before,
                    coupled,
                }
            })
            .collect()
    }
}

/// A shell in a chain.
struct Place {
    orbital: Orbital,
    is_open: bool,
    own: Term,
    own_index: u128,
    electrons: u32,
    /// What the shells before it couple to.
    before: Term,
    /// What it and they couple to.
    coupled: Term,
}

/// The own term of one shell.
fn own(places: &[Place], orbital: Orbital) -> Option<Own> {
    let place = places.iter().find(|p| p.orbital == orbital)?;
    Some(Own {
        term: place.own,
        index: place.own_index,
    })
}

/// What acts at one shell.
struct Acting {
    on_own: Change,
    on_coupled: Change,
}

/// What acts on a part of the atom.
#[derive(Clone, Copy)]
enum Change {
    /// Nothing: it stays as it is.
    Nothing,
    /// One electron of this ℓ is taken or added.
    OneElectron(u32),
    /// An orbital operator of this rank.
    Orbital(u32),
}

impl Change {
    /// Whether it can lead from one term to the other, by the triangle rules.
    fn allows(self, a: Term, b: Term) -> bool {
        let triangle = |rank: u32| a.l.abs_diff(b.l) <= rank && rank <= a.l.saturating_add(b.l);
        match self {
            Change::Nothing => a == b,
            Change::OneElectron(l) => a.two_s.abs_diff(b.two_s) == 1 && triangle(l),
            Change::Orbital(rank) => a.two_s == b.two_s && triangle(rank),
        }
    }
}

fn first_refusal(
    upper: &[Place],
    lower: &[Place],
    acting: impl Fn(Orbital) -> Acting,
) -> Option<Rule> {
    let mut rank_before = None;
    upper.iter().zip(lower).find_map(|(a, b)| {
        let Acting { on_own, on_coupled } = acting(a.orbital);
        let same_kind = a.own == b.own && a.own_index == b.own_index;
        if matches!(on_own, Change::Nothing) && !same_kind {
            return Some(Rule::Spectator {
                orbital: a.orbital,
                upper: a.own,
                lower: b.own,
            });
        }
        if !on_own.allows(a.own, b.own) {
            let shell = Subshell::new(a.orbital, a.electrons.max(b.electrons).max(1))?;
            return Some(Rule::Parent {
                shell,
                upper: a.own,
                lower: b.own,
            });
        }
        let passed_on = match (rank_before, on_own) {
            // Acting before this shell, which only passes the coupling on.
            (Some(rank), Change::Nothing) => factor(a.before, b.before, a, b, a.own, rank),
            // Acting on this shell as a whole, the first one that it changes.
            (None, Change::Orbital(rank)) => factor(a.own, b.own, a, b, a.before, rank),
            _ => 1.0,
        };
        rank_before = match on_coupled {
            Change::Orbital(rank) => Some(rank),
            _ => None,
        };
        let refused = !on_coupled.allows(a.coupled, b.coupled) || passed_on == 0.0;
        refused.then_some(Rule::Coupling {
            up_to: a.orbital,
            upper: a.coupled,
            lower: b.coupled,
        })
    })
}

/// {L₁ L s; L′ L₁′ k}: the part that changes from L₁ to L₁′ is coupled with s to L and to L′.
fn factor(
    changed: Term,
    changed_to: Term,
    upper: &Place,
    lower: &Place,
    kept: Term,
    rank: u32,
) -> f64 {
    let doubled = |l: u32| i32::try_from(l.saturating_mul(2)).unwrap_or(i32::MAX);
    wigner_6j(
        doubled(changed.l),
        doubled(upper.coupled.l),
        doubled(kept.l),
        doubled(lower.coupled.l),
        doubled(changed_to.l),
        doubled(rank),
    )
}
