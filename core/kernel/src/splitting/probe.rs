//! Single states of a manifold at any field, without all the others.

use super::part::PartField;
use super::split::Split;

/// What one state is found with; its memory is used again.
pub struct Probe<'a> {
    split: &'a Split,
    matrix: Vec<f64>,
    /// The last part and field that were found.
    known: Option<(usize, f64)>,
    field: PartField,
}

/// One state at a field.
#[derive(Clone, Copy, Debug)]
pub struct Found {
    /// The energy that the other one counts from, cm⁻¹.
    pub origin: f64,
    /// From the origin, cm⁻¹.
    pub energy: f64,
    /// dE/dB, cm⁻¹/T.
    pub slope: f64,
}

impl Found {
    /// This energy less that of another state, with no digits lost to a common origin.
    pub fn above(&self, other: &Found) -> f64 {
        (self.origin - other.origin) + (self.energy - other.energy)
    }
}

impl<'a> Probe<'a> {
    /// Of these states.
    pub fn new(split: &'a Split) -> Self {
        Probe {
            split,
            matrix: Vec::new(),
            known: None,
            field: PartField::default(),
        }
    }

    /// One state; nothing where there is none or no iteration converges.
    pub fn state(&mut self, state: usize, tesla: f64) -> Option<Found> {
        let state = self.split.states().get(state)?;
        let part = self.split.parts.get(state.part)?;
        if self.known != Some((state.part, tesla)) {
            self.known = None;
            part.at(tesla, &mut self.matrix, &mut self.field)?;
            self.known = Some((state.part, tesla));
        }
        Some(Found {
            origin: part.origin,
            energy: *self.field.pairs.values.get(state.rank)?,
            slope: *self.field.slopes.get(state.rank)?,
        })
    }
}
