//! The rules that refuse a transition, with the numbers of the case.
//!
//! Parity and J are rigorous for a free atom without hyperfine structure or outer fields. All others
//! hold in pure LS coupling of pure configurations (Condon & Shortley 1935, ch. IX and XI;
//! Cowan 1981, §14-5 to §15-6; Martin & Wiese, handbook chapter "Atomic spectroscopy").

use super::Multipole;
use crate::configuration::{Orbital, Subshell};
use crate::quantity::TwiceJ;
use crate::terms::Term;
use std::fmt;

/// Why a transition is refused.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Rule {
    /// Both are one level.
    SameLevel,
    /// The parity changes where it must not, or does not where it must.
    Parity {
        /// Of which radiation.
        multipole: Multipole,
        /// Parity of the upper level is odd.
        upper_is_odd: bool,
        /// Parity of the lower level is odd.
        lower_is_odd: bool,
    },
    /// |J − J′| exceeds the rank.
    JChange {
        /// Of which radiation.
        multipole: Multipole,
        /// J of the upper level.
        upper: TwiceJ,
        /// J of the lower level.
        lower: TwiceJ,
    },
    /// J + J′ is smaller than the rank; 0 ↮ 0 for a dipole.
    JSum {
        /// Of which radiation.
        multipole: Multipole,
        /// J of the upper level.
        upper: TwiceJ,
        /// J of the lower level.
        lower: TwiceJ,
    },
    /// More than one electron would change its orbital.
    SeveralElectrons {
        /// How many.
        moved: u32,
    },
    /// The magnetic dipole moves no electron to another orbital.
    OrbitalKept {
        /// Where the electron is in the upper configuration.
        upper: Orbital,
        /// Where it is in the lower one.
        lower: Orbital,
    },
    /// ℓ, ℓ′ of the moving electron do not fit the multipole.
    OrbitalStep {
        /// Of which radiation.
        multipole: Multipole,
        /// Where the electron is in the upper configuration.
        upper: Orbital,
        /// Where it is in the lower one.
        lower: Orbital,
    },
    /// S changes.
    Spin {
        /// S of the upper term.
        upper: TwiceJ,
        /// S of the lower term.
        lower: TwiceJ,
    },
    /// |L − L′| exceeds the rank.
    LChange {
        /// Of which radiation.
        multipole: Multipole,
        /// L of the upper term.
        upper: u32,
        /// L of the lower term.
        lower: u32,
    },
    /// L + L′ is smaller than the rank.
    LSum {
        /// Of which radiation.
        multipole: Multipole,
        /// L of the upper term.
        upper: u32,
        /// L of the lower term.
        lower: u32,
    },
    /// The magnetic dipole links levels of one term only.
    OtherTerm {
        /// The upper term.
        upper: Term,
        /// The lower term.
        lower: Term,
    },
    /// A shell that does not take part changes its own term.
    Spectator {
        /// An orbital of that shell.
        orbital: Orbital,
        /// Its term in the upper level.
        upper: Term,
        /// Its term in the lower level.
        lower: Term,
    },
    /// The active shell's terms cannot differ by the one electron or by the operator.
    Parent {
        /// The active shell in the configuration that has more electrons in it.
        shell: Subshell,
        /// Its term in the upper level.
        upper: Term,
        /// Its term in the lower level.
        lower: Term,
    },
    /// The strength vanishes between these two levels, though their terms are linked.
    Vanishing {
        /// Of which radiation.
        multipole: Multipole,
        /// J of the upper level.
        upper: TwiceJ,
        /// J of the lower level.
        lower: TwiceJ,
    },
    /// The operator has no matrix element between two terms of the one active shell.
    Unlinked {
        /// The active shell.
        shell: Subshell,
        /// Its term in the upper level.
        upper: Term,
        /// Its term in the lower level.
        lower: Term,
    },
    /// In a half-filled shell an E2 line changes the seniority by two.
    Seniority {
        /// The shell.
        shell: Subshell,
        /// Seniority of its term in the upper level.
        upper: u32,
        /// Seniority of its term in the lower level.
        lower: u32,
    },
    /// What the shells up to one couple to changes more than the operator can change it.
    Coupling {
        /// The last of those shells.
        up_to: Orbital,
        /// What they couple to in the upper level.
        upper: Term,
        /// What they couple to in the lower level.
        lower: Term,
    },
}

impl Rule {
    /// Stable code.
    pub fn code(&self) -> &'static str {
        match self {
            Rule::SameLevel => "same-level",
            Rule::Parity { .. } => "parity",
            Rule::JChange { .. } => "j-change",
            Rule::JSum { .. } => "j-sum",
            Rule::SeveralElectrons { .. } => "several-electrons",
            Rule::OrbitalKept { .. } => "orbital-kept",
            Rule::OrbitalStep { .. } => "orbital-step",
            Rule::Spin { .. } => "spin",
            Rule::LChange { .. } => "l-change",
            Rule::LSum { .. } => "l-sum",
            Rule::OtherTerm { .. } => "other-term",
            Rule::Spectator { .. } => "spectator",
            Rule::Parent { .. } => "parent",
            Rule::Vanishing { .. } => "vanishing",
            Rule::Unlinked { .. } => "unlinked",
            Rule::Seniority { .. } => "seniority",
            Rule::Coupling { .. } => "coupling",
        }
    }

    /// Whether the rule holds whatever the coupling and the mixing of configurations.
    pub fn is_rigorous(&self) -> bool {
        matches!(
            self,
            Rule::SameLevel | Rule::Parity { .. } | Rule::JChange { .. } | Rule::JSum { .. }
        )
    }
}

/// "odd" or "even".
fn parity_word(is_odd: bool) -> &'static str {
    if is_odd { "odd" } else { "even" }
}

/// A plain sentence with the numbers of the case.
impl fmt::Display for Rule {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match *self {
            Rule::SameLevel => write!(f, "both are the same level"),
            Rule::Parity {
                multipole,
                upper_is_odd,
                lower_is_odd,
            } => {
                if multipole.changes_parity() {
                    let word = parity_word(upper_is_odd);
                    write!(
                        f,
                        "both levels are {word}, and {multipole} needs a change of parity"
                    )
                } else {
                    let (upper, lower) = (parity_word(upper_is_odd), parity_word(lower_is_odd));
                    write!(
                        f,
                        "the parity changes from {upper} to {lower}, and {multipole} keeps it"
                    )
                }
            }
            Rule::JChange {
                multipole,
                upper,
                lower,
            } => {
                let rank = multipole.rank();
                write!(
                    f,
                    "J changes from {upper} to {lower}, and {multipole} changes it by at most {rank}"
                )
            }
            Rule::JSum {
                multipole,
                upper,
                lower,
            } => {
                let rank = multipole.rank();
                write!(
                    f,
                    "J goes from {upper} to {lower}, and {multipole} needs both together to be at least {rank}"
                )
            }
            Rule::SeveralElectrons { moved } => {
                write!(
                    f,
                    "{moved} electrons would change their orbital, and a photon moves one"
                )
            }
            Rule::OrbitalKept { upper, lower } => {
                write!(
                    f,
                    "an electron would go from {upper} to {lower}, and M1 leaves every electron in its orbital"
                )
            }
            Rule::OrbitalStep {
                multipole,
                upper,
                lower,
            } => {
                let allowed = match multipole {
                    Multipole::E2 => "0 or 2, not from s to s",
                    Multipole::E1 | Multipole::M1 => "1",
                };
                write!(
                    f,
                    "the electron goes from {upper} to {lower}, its l from {} to {}, and {multipole} changes it by {allowed}",
                    upper.l(),
                    lower.l()
                )
            }
            Rule::Spin { upper, lower } => {
                write!(
                    f,
                    "the spin changes from {upper} to {lower}, and S is kept in pure LS coupling"
                )
            }
            Rule::LChange {
                multipole,
                upper,
                lower,
            } => {
                let rank = multipole.rank();
                write!(
                    f,
                    "L changes from {upper} to {lower}, and {multipole} changes it by at most {rank} in pure LS coupling"
                )
            }
            Rule::LSum {
                multipole,
                upper,
                lower,
            } => {
                let rank = multipole.rank();
                write!(
                    f,
                    "L goes from {upper} to {lower}, and {multipole} needs both together to be at least {rank} in pure LS coupling"
                )
            }
            Rule::OtherTerm { upper, lower } if upper == lower => {
                write!(
                    f,
                    "these are two different {upper} terms, and M1 stays within one term in pure LS coupling"
                )
            }
            Rule::OtherTerm { upper, lower } => {
                write!(
                    f,
                    "the term changes from {upper} to {lower}, and M1 stays within one term in pure LS coupling"
                )
            }
            Rule::Spectator {
                orbital,
                upper,
                lower,
            } if upper == lower => {
                write!(
                    f,
                    "the {orbital} shell changes from one {upper} term to another, though its electrons take no part"
                )
            }
            Rule::Spectator {
                orbital,
                upper,
                lower,
            } => {
                write!(
                    f,
                    "the {orbital} shell changes from {upper} to {lower}, though its electrons take no part"
                )
            }
            Rule::Parent {
                shell,
                upper,
                lower,
            } => {
                write!(
                    f,
                    "the {} shell would go from {upper} to {lower}, which its one active electron cannot do",
                    shell.orbital()
                )
            }
            Rule::Vanishing {
                multipole,
                upper,
                lower,
            } => {
                write!(
                    f,
                    "the 6j symbol of J = {upper} and {lower} is zero, so that this {multipole} line has no strength in pure LS coupling"
                )
            }
            Rule::Unlinked {
                shell,
                upper,
                lower,
            } => {
                write!(
                    f,
                    "no electron of the {} shell links these terms {upper} and {lower} of it: the matrix element is zero",
                    shell.orbital()
                )
            }
            Rule::Seniority {
                shell,
                upper,
                lower,
            } => {
                write!(
                    f,
                    "the half-filled {} shell would go from seniority {upper} to {lower}, and E2 changes it by 2 there",
                    shell.orbital()
                )
            }
            Rule::Coupling {
                up_to,
                upper,
                lower,
            } => {
                write!(
                    f,
                    "the shells up to {up_to} couple to {upper} in the upper and to {lower} in the lower level, which one electron's change cannot bring about"
                )
            }
        }
    }
}
