//! Whether one electron of a shell can lead from one of its terms to another.
//!
//! Taking it away or adding it: the coefficient of fractional parentage. Acting on its orbit: the
//! reduced element of the unit tensor,
//! ⟨ℓ^N αSL‖U^k‖ℓ^N α′SL′⟩ ∝ Σ (−1)^L″ ⟨αSL{|α″S″L″⟩ ⟨α″S″L″|}α′SL′⟩ {L L′ k; ℓ ℓ L″}
//! over the parents (Racah, Phys. Rev. 63, 367 (1943), eq. 29; Cowan 1981, eq. 11.53).

use crate::angular::parentage::{Parentage, parents};
use crate::angular::wigner_6j;
use crate::configuration::Subshell;
use crate::terms::Term;
use std::sync::Arc;

/// A sum smaller than this part of its terms is zero up to rounding; true ones lie far above.
const ROUNDING: f64 = 1.0e-10;

/// A term of a shell and its running index from 1.
#[derive(Clone, Copy, Debug)]
pub(super) struct Own {
    pub term: Term,
    pub index: u128,
}

/// Parentage of one shell.
#[derive(Clone, Debug)]
pub(super) struct ShellOperator {
    shell: Subshell,
    table: Arc<Parentage>,
}

impl ShellOperator {
    /// Nothing where the parentage of the shell is not computed: above f with three or more electrons.
    pub(super) fn of(shell: Subshell) -> Option<Self> {
        let table = parents(shell.orbital().l(), shell.electrons()).ok()?;
        Some(ShellOperator { shell, table })
    }

    /// The shell.
    pub(super) fn shell(&self) -> Subshell {
        self.shell
    }

    /// Whether the parent is one of this shell's term; true where either is not found.
    pub(super) fn has_parent(&self, child: Own, parent: Own) -> bool {
        let places = place(self.table.children(), child).zip(place(self.table.parents(), parent));
        places.is_none_or(|(child, parent)| self.table.coefficient(child, parent) != 0.0)
    }

    /// Whether an orbital operator of this rank links two terms of equal spin; true where either is
    /// not found.
    pub(super) fn links(&self, one: Own, other: Own, rank: u32) -> bool {
        let children = self.table.children();
        let Some((a, b)) = place(children, one).zip(place(children, other)) else {
            return true;
        };
        let doubled = |l: u32| i32::try_from(l.saturating_mul(2)).unwrap_or(i32::MAX);
        let two_l = doubled(self.shell.orbital().l().into());
        let (mut sum, mut size) = (0.0, 0.0);
        let parents = self.table.parents().iter();
        for ((parent, &c), &d) in parents.zip(self.table.row(a)).zip(self.table.row(b)) {
            if c == 0.0 || d == 0.0 {
                continue;
            }
            let (l, k) = (doubled(one.term.l), doubled(other.term.l));
            let six_j = wigner_6j(l, k, doubled(rank), two_l, two_l, doubled(parent.l_total));
            let part = c * d * six_j;
            sum += if parent.l_total % 2 == 0 { part } else { -part };
            size += part.abs();
        }
        sum.abs() > ROUNDING * size
    }
}

fn place(terms: &[crate::angular::equivalent::EquivalentTerm], own: Own) -> Option<usize> {
    terms.iter().position(|t| {
        u32::try_from(t.two_s) == Ok(own.term.two_s)
            && t.l_total == own.term.l
            && u128::from(t.index) == own.index
    })
}
