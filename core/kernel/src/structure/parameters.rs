//! The radial integrals that energies are linear in.

use crate::angular::equivalent::EquivalentTerm;

/// A named radial integral; letters are places in the list of subshells.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Integral {
    /// The average energy of the configuration (Slater's, with all F⁰ in it).
    Average,
    /// F^k(a,b) with k > 0 and a ≤ b.
    Direct {
        /// Rank.
        k: u8,
        /// First subshell.
        a: usize,
        /// Second subshell.
        b: usize,
    },
    /// G^k(a,b) with a < b.
    Exchange {
        /// Rank.
        k: u8,
        /// First subshell.
        a: usize,
        /// Second subshell.
        b: usize,
    },
    /// ζ(a).
    SpinOrbit {
        /// The subshell.
        a: usize,
    },
    /// An effective interaction within one subshell: what distant configurations leave behind.
    Effective {
        /// Which one.
        kind: Effective,
        /// The subshell.
        a: usize,
    },
    /// R^k(ab,cd) = ∬ P_a(1)P_b(2) (r_<^k/r_>^(k+1)) P_c(1)P_d(2); a and b of the one configuration,
    /// c and d of the other, a ≤ b, and c ≤ d where a = b.
    Mixing {
        /// Rank.
        k: u8,
        /// Electron 1 of the first configuration.
        a: usize,
        /// Electron 2 of the first configuration.
        b: usize,
        /// Electron 1 of the second configuration.
        c: usize,
        /// Electron 2 of the second configuration.
        d: usize,
    },
    /// ⟨a|h|c⟩ of two subshells of equal ℓ: kinetic energy, nucleus, and every subshell that is not
    /// in the list (Σ over closed ones of 2F⁰-like and exchange integrals).
    OneElectron {
        /// The subshell that the first configuration has more of.
        a: usize,
        /// The subshell that the second configuration has more of.
        c: usize,
    },
}

/// The effective interactions of two electrons of one subshell, each less its mean over the states of
/// the subshell, so that averages stay averages.
///
/// Source: Trees, Phys. Rev. 83, 756 (1951), for α; Rajnak & Wybourne, Phys. Rev. 132, 280 (1963),
/// for β and γ. Casimir operators with the eigenvalues of [`crate::angular::equivalent`].
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Effective {
    /// α L(L+1), p, d and f.
    Alpha,
    /// β times Casimir's operator of R(5) for d, of G₂ for f.
    Beta,
    /// γ times Casimir's operator of R(7) for f.
    Gamma,
}

impl Effective {
    /// What the parameter is multiplied by in a term, before the mean is taken off; nothing where
    /// the subshell has no such parameter.
    pub fn factor(self, term: &EquivalentTerm, l: u8) -> Option<f64> {
        let total = f64::from(term.l_total);
        match (self, l) {
            (Effective::Alpha, 1..=3) => Some(total * (total + 1.0)),
            (Effective::Beta, 2) | (Effective::Gamma, 3) => term.rotation_casimir,
            (Effective::Beta, 3) => term.g2_casimir,
            _ => None,
        }
    }
}

/// A radial integral of one configuration, or of two that it mixes.
///
/// The same integral is a parameter of its own in each configuration, because orbitals differ; who
/// wants one value for all gives it to all.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub struct Parameter {
    /// The configuration, or the first of the two.
    pub first: usize,
    /// The same, or the second of the two.
    pub second: usize,
    /// Which integral.
    pub integral: Integral,
}
