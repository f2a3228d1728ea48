//! What radiation or an oscillating field acts by.

use super::manifold::{Chosen, Manifold, Reduced, turn};
use super::nucleus::{NUCLEAR_MAGNETON_WAVENUMBER, Nucleus};
use crate::constants::BOHR_MAGNETON_WAVENUMBER;

/// T^k between the levels of two manifolds, or of one, with a multiple of the nuclear spin.
#[derive(Clone, Debug, PartialEq)]
pub struct Operator {
    pub(super) rank: u8,
    /// ⟨left‖T^k‖right⟩, also those from right to left where both are one manifold.
    pub(super) elements: Vec<Reduced>,
    /// The factor of I.
    pub(super) nuclear: f64,
}

impl Operator {
    /// Between two manifolds, the left levels being the upper ones: rank 1 for E1 and M1, 2 for E2.
    pub fn between(rank: u8, elements: Vec<Reduced>) -> Operator {
        Operator {
            rank,
            elements,
            nuclear: 0.0,
        }
    }

    /// Inside one manifold, each pair of levels once: ⟨b‖T‖a⟩ = (−1)^(J_b−J_a) ⟨a‖T‖b⟩.
    pub fn within(rank: u8, manifold: &Manifold, elements: &[Reduced]) -> Operator {
        let mut all = Vec::with_capacity(elements.len() * 2);
        for element in elements {
            all.push(*element);
            if element.left != element.right {
                all.push(Reduced {
                    left: element.right,
                    right: element.left,
                    value: turn(&manifold.levels, element) * element.value,
                });
            }
        }
        Operator::between(rank, all)
    }

    /// The magnetic dipole L + g_s S − (μ_N/μ_B) g_I I, in Bohr magnetons: minus the moment.
    pub fn magnetic_dipole(manifold: &Manifold, nucleus: Option<&Nucleus>) -> Operator {
        let g_i = nucleus.map_or(0.0, |nucleus| nucleus.g_i);
        Operator {
            nuclear: -g_i * NUCLEAR_MAGNETON_WAVENUMBER / BOHR_MAGNETON_WAVENUMBER.value,
            ..Operator::within(1, manifold, &manifold.magnetic)
        }
    }

    /// k.
    pub fn rank(&self) -> u8 {
        self.rank
    }

    /// The reduced elements.
    pub fn elements(&self) -> &[Reduced] {
        &self.elements
    }

    /// Between levels that were chosen by [`Manifold::select`] with these places.
    #[must_use]
    pub fn select(&self, left: &[usize], right: &[usize]) -> Operator {
        let ends = |of: &dyn Fn(&Reduced) -> usize| {
            self.elements
                .iter()
                .map(of)
                .max()
                .map_or(0, |most| most + 1)
        };
        let lefts = Chosen::of(left, ends(&|e| e.left));
        let rights = Chosen::of(right, ends(&|e| e.right));
        let elements = self.elements.iter().filter_map(|element| {
            Some(Reduced {
                left: lefts.place(element.left)?,
                right: rights.place(element.right)?,
                ..*element
            })
        });
        Operator {
            elements: elements.collect(),
            ..*self
        }
    }
}
