//! The linear pattern against the full one.

use super::components::Components;
use super::split::{AtField, Split, check_field};
use crate::problem::Problem;

/// A component whose strength in the limit of no field is below this share of the largest has no place in
/// the linear pattern.
const FAINT: f64 = 1e-12;

/// The weakest field that is tried, as a share of the strongest.
const WEAKEST: f64 = 1e-7;

/// Fields that are tried between.
const TRIED: u32 = 70;

/// How far a component may be from its place in the linear pattern.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Tolerance {
    /// As a share of the largest linear shift of any component.
    Relative(f64),
    /// cm⁻¹.
    Absolute(f64),
}

/// Where components would be if all energies were linear in the field: g_J μ_B M B, with a nucleus
/// g_F μ_B M_F B from its hyperfine level.
#[derive(Clone, Debug, PartialEq)]
pub struct Linear {
    /// Offset without a field and slope, by component; nothing for one that a weak field does not show.
    lines: Vec<Option<(f64, f64)>>,
}

impl Linear {
    /// The linear pattern of these components.
    ///
    /// # Errors
    /// Those of [`Split::at`].
    pub fn new(upper: &Split, lower: &Split, components: &Components) -> Result<Linear, Problem> {
        let (above, below) = (upper.at(0.0)?, lower.at(0.0)?);
        let strengths = components.strengths(&above, &below);
        let largest = strengths.iter().fold(0.0_f64, |most, &s| most.max(s));
        let list = components.list().iter().zip(&strengths);
        let lines = list.map(|(component, &strength)| {
            let line = (
                component.offset(&above, &below),
                component.slope(&above, &below),
            );
            (strength > FAINT * largest).then_some(line)
        });
        Ok(Linear {
            lines: lines.collect(),
        })
    }

    /// A component's offset from the line's centre, cm⁻¹; nothing for one that a weak field does not show.
    pub fn offset(&self, component: usize, tesla: f64) -> Option<f64> {
        let (start, slope) = self.lines.get(component).copied().flatten()?;
        Some(start + slope * tesla)
    }

    /// The largest distance of a component from its linear place, and the largest linear shift, cm⁻¹.
    pub fn difference(
        &self,
        components: &Components,
        upper: &AtField,
        lower: &AtField,
    ) -> (f64, f64) {
        let tesla = upper.tesla;
        let (mut difference, mut largest) = (0.0_f64, 0.0_f64);
        for (component, line) in components.list().iter().zip(&self.lines) {
            if let Some((start, slope)) = line {
                let linear = slope * tesla;
                let full = component.offset(upper, lower) - start;
                difference = difference.max((full - linear).abs());
                largest = largest.max(linear.abs());
            }
        }
        (difference, largest)
    }

    /// The weakest field, to a part in 10⁹, at which a component is farther from its linear place than
    /// tolerated; nothing where there is none up to `up_to`. It is looked for from 10⁻⁷ of that on.
    ///
    /// # Errors
    /// `field-out-of-range`; those of [`Split::at`].
    pub fn departs_at(
        &self,
        (upper, lower): (&Split, &Split),
        components: &Components,
        tolerance: Tolerance,
        up_to: f64,
    ) -> Result<Option<f64>, Problem> {
        check_field(up_to)?;
        let (mut above, mut below) = (AtField::default(), AtField::default());
        let mut departs = |tesla: f64| -> Result<bool, Problem> {
            upper.at_into(tesla, &mut above)?;
            lower.at_into(tesla, &mut below)?;
            let (difference, largest) = self.difference(components, &above, &below);
            Ok(match tolerance {
                Tolerance::Relative(share) => difference > share * largest,
                Tolerance::Absolute(most) => difference > most,
            })
        };
        let factor = libm::pow(WEAKEST, -1.0 / f64::from(TRIED));
        let (mut low, mut high) = (0.0, up_to * WEAKEST);
        for tried in 0..=TRIED {
            if tried == TRIED {
                high = up_to;
            }
            if departs(high)? {
                // Levels that are alike without a field part from it in the weakest one.
                while low > 0.0 && high - low > 1e-9 * high {
                    let middle = 0.5 * (low + high);
                    if departs(middle)? {
                        high = middle;
                    } else {
                        low = middle;
                    }
                }
                return Ok(Some(high));
            }
            low = high;
            high *= factor;
        }
        Ok(None)
    }
}
