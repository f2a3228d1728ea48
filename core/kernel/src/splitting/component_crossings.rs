//! Where two components of lines cross, and where they are farthest apart.

use super::components::{Component, Components};
use super::crossings::{Found, MOST_COMPARED, first_of, too_large};
use super::map::Map;
use super::probe::Probe;
use super::root::{changes, root};
use super::split::{COINCIDE, Split};
use crate::constants::BOHR_MAGNETON_WAVENUMBER;
use crate::problem::Problem;
use std::ops::Range;

/// Components this close, in μ_B times the largest field of the map, are one, and so are slopes in μ_B.
const ROUNDING: f64 = 1e-11;

/// Two components at a field.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ComponentCrossing {
    /// Whether they are farthest apart there; otherwise they cross.
    pub farthest: bool,
    /// One component's place in [`Components::list`].
    pub first: usize,
    /// The other's, the higher one where they are farthest apart.
    pub second: usize,
    /// The field.
    pub tesla: f64,
    /// How far they are apart there, cm⁻¹.
    pub apart: f64,
}

/// What happens between chosen components within the fields of a map, at most so much of it.
///
/// Farthest apart means a largest distance inside the range; at its ends there may be a larger one.
///
/// # Errors
/// `search-too-large` above [`MOST_COMPARED`] pairs times fields.
pub fn component_crossings(
    (upper, lower): (&Split, Option<&Split>),
    components: &Components,
    map: &Map,
    chosen: &[usize],
    most: usize,
) -> Result<Found<ComponentCrossing>, Problem> {
    let below = lower.unwrap_or(upper);
    let pairs = chosen.len().saturating_mul(chosen.len()) / 2;
    if pairs.saturating_mul(map.tesla.len()) > MOST_COMPARED {
        return Err(too_large(chosen.len()));
    }
    let mut candidates: Vec<(Range<f64>, bool, usize, usize)> = Vec::new();
    let slopes: Vec<Vec<f64>> = (chosen.iter())
        .map(|&place| slopes(map, components.list().get(place)))
        .collect();
    let largest = map.tesla.last().copied().unwrap_or(0.0);
    let steep = ROUNDING * BOHR_MAGNETON_WAVENUMBER.value;
    let mut found = Vec::new();
    for (place, (&one, slope)) in chosen.iter().zip(&slopes).enumerate() {
        for (&two, other) in chosen.iter().zip(&slopes).skip(place + 1) {
            let (Some(a), Some(b)) = (map.offsets.get(one), map.offsets.get(two)) else {
                continue;
            };
            let Some(centres) = centres(upper, below, components, one, two) else {
                continue;
            };
            let rest = [one, two].into_iter().filter_map(|place| {
                let component = components.list().get(place)?;
                Some(
                    upper
                        .size_at_rest(component.upper)
                        .max(below.size_at_rest(component.lower)),
                )
            });
            let rest = COINCIDE * rest.fold(centres.abs(), f64::max);
            let apart = b.iter().zip(a).map(|(b, a)| centres + (b - a));
            let apart: Vec<f64> = apart.collect();
            let close = steep * largest;
            changes(&map.tesla, &apart, (close.max(rest), close), &mut found);
            candidates.extend(found.drain(..).map(|(range, _)| (range, false, one, two)));
            let steeper = other.iter().zip(slope).map(|(b, a)| b - a);
            let steeper: Vec<f64> = steeper.collect();
            changes(&map.tesla, &steeper, (steep, steep), &mut found);
            for (range, rises) in found.drain(..) {
                let at = map.tesla.partition_point(|&tesla| tesla < range.end);
                let higher = apart.get(at).is_some_and(|apart| *apart > 0.0);
                // A distance that falls behind the place was the largest there.
                if higher != rises {
                    let (low, high) = if higher { (one, two) } else { (two, one) };
                    candidates.push((range, true, low, high));
                }
            }
        }
    }
    let mut ends = Ends::new(upper, below, components);
    Ok(first_of(
        candidates,
        most,
        |candidate| candidate.0.start,
        |crossing: &ComponentCrossing| crossing.tesla,
        |candidate| ends.refine(candidate),
    ))
}

/// How far the centre of the second component's line is above that of the first one's.
fn centres(
    upper: &Split,
    lower: &Split,
    components: &Components,
    first: usize,
    second: usize,
) -> Option<f64> {
    let list = components.list();
    let (one, two) = (list.get(first)?, list.get(second)?);
    Some(upper.level_above(two.upper, one.upper)? - lower.level_above(two.lower, one.lower)?)
}

/// d(offset)/dB by field.
fn slopes(map: &Map, component: Option<&Component>) -> Vec<f64> {
    let Some(component) = component else {
        return Vec::new();
    };
    let upper = map.upper.slopes.get(component.upper);
    let lower = map
        .lower
        .as_ref()
        .unwrap_or(&map.upper)
        .slopes
        .get(component.lower);
    let both = upper.into_iter().flatten().zip(lower.into_iter().flatten());
    both.map(|(u, l)| u - l).collect()
}

struct Ends<'a> {
    components: &'a Components,
    /// Of the upper and the lower state of either component.
    probes: [Probe<'a>; 4],
    splits: (&'a Split, &'a Split),
}

impl<'a> Ends<'a> {
    fn new(upper: &'a Split, lower: &'a Split, components: &'a Components) -> Self {
        Ends {
            components,
            probes: [
                Probe::new(upper),
                Probe::new(lower),
                Probe::new(upper),
                Probe::new(lower),
            ],
            splits: (upper, lower),
        }
    }

    /// How far the second component is above the first, and how fast that grows.
    fn apart(&mut self, first: usize, second: usize, tesla: f64) -> Option<(f64, f64)> {
        let list = self.components.list();
        let (one, two) = (list.get(first)?, list.get(second)?);
        let [u, l, v, k] = &mut self.probes;
        let (upper, lower) = self.splits;
        let (u, l) = (u.state(one.upper, tesla)?, l.state(one.lower, tesla)?);
        let (v, k) = (v.state(two.upper, tesla)?, k.state(two.lower, tesla)?);
        let shift =
            |split: &Split, state: usize, energy: f64| Some(energy - split.level_of(state)?);
        let offset = shift(upper, one.upper, u.energy)? - shift(lower, one.lower, l.energy)?;
        let other = shift(upper, two.upper, v.energy)? - shift(lower, two.lower, k.energy)?;
        let centres = centres(upper, lower, self.components, first, second)?;
        Some((
            centres + (other - offset),
            (v.slope - k.slope) - (u.slope - l.slope),
        ))
    }

    fn refine(
        &mut self,
        candidate: &(Range<f64>, bool, usize, usize),
    ) -> Option<ComponentCrossing> {
        let &(ref range, farthest, first, second) = candidate;
        let tesla = root(range, |tesla| {
            let (apart, slope) = self.apart(first, second, tesla)?;
            Some(if farthest { slope } else { apart })
        })?;
        let (apart, _) = self.apart(first, second, tesla)?;
        Some(ComponentCrossing {
            farthest,
            first,
            second,
            tesla,
            apart: if farthest { apart.abs() } else { 0.0 },
        })
    }
}
