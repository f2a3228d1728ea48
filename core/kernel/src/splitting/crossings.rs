//! Where states cross, avoid each other, or keep their distance.
//!
//! A map says roughly where, its states' own matrices exactly. States of one part never cross; those of
//! different parts do.

use super::map::Followed;
use super::probe::Probe;
use super::root::{changes, dips, hidden, root};
use super::split::{COINCIDE, Split};
use crate::constants::BOHR_MAGNETON_WAVENUMBER;
use crate::numerics::order::sort_by;
use crate::problem::Problem;
use std::ops::Range;

/// Pairs of states times fields that are searched at most.
pub const MOST_COMPARED: usize = 75_000_000;

/// Differences of energies in a field below this share of the energies are rounding.
const ROUNDING: f64 = 1e-14;

/// Differences of slopes below this, in μ_B, are rounding.
const LEVEL: f64 = 1e-11;

/// Differences of slopes without a field below this, in μ_B, are rounding: levels of one term have equal g
/// but for what spin–orbit coupling far away mixes in.
const LEVEL_AT_REST: f64 = 1e-8;

/// What happens between two states.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum CrossingKind {
    /// They cross: a field does not connect them.
    Crossing,
    /// They come closest and repel each other.
    Avoided,
    /// Their distance does not depend on the field, in first order: a clock transition.
    Clock,
}

/// One of them.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Crossing {
    /// Which.
    pub kind: CrossingKind,
    /// The state that is the lower one before, or all the time.
    pub first: usize,
    /// The other state.
    pub second: usize,
    /// The field, good to a part in 10¹⁰ where the energies are.
    pub tesla: f64,
    /// The energy of the first state there, cm⁻¹.
    pub energy: f64,
    /// The second state above the first there, cm⁻¹; 0 for a crossing.
    pub gap: f64,
    /// dE/dB of the first and the second state, cm⁻¹/T.
    pub slopes: (f64, f64),
}

/// What is looked for.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Wanted {
    /// Crossings.
    pub crossings: bool,
    /// Avoided ones.
    pub avoided: bool,
    /// Clock transitions inside a level, by the largest |ΔM|.
    pub clock: Option<i32>,
}

/// What was found, by rising field.
#[derive(Clone, Debug, PartialEq)]
pub struct Found<T> {
    /// The first of them.
    pub found: Vec<T>,
    /// How many more there are, at higher fields.
    pub left_out: usize,
}

/// Where it is, roughly.
struct Candidate {
    kind: CrossingKind,
    first: usize,
    second: usize,
    range: Range<f64>,
}

/// What happens between chosen states within the fields of a map, at most so much of it.
///
/// # Errors
/// `search-too-large` above [`MOST_COMPARED`] pairs times fields.
pub fn crossings(
    split: &Split,
    (tesla, followed): (&[f64], &Followed),
    chosen: &[usize],
    wanted: Wanted,
    most: usize,
) -> Result<Found<Crossing>, Problem> {
    let pairs = chosen.len().saturating_mul(chosen.len()) / 2;
    if pairs.saturating_mul(tesla.len()) > MOST_COMPARED {
        return Err(too_large(chosen.len()));
    }
    let mut search = Search {
        split,
        tesla,
        followed,
        probe: Probe::new(split),
        other: Probe::new(split),
        changes: Vec::new(),
        dips: Vec::new(),
        candidates: Vec::new(),
    };
    for (place, &one) in chosen.iter().enumerate() {
        for &two in chosen.iter().skip(place + 1) {
            search.pair(one, two, wanted);
        }
    }
    let candidates = std::mem::take(&mut search.candidates);
    Ok(first_of(
        candidates,
        most,
        |candidate| candidate.range.start,
        |crossing: &Crossing| crossing.tesla,
        |candidate| search.refine(candidate),
    ))
}

/// The first of what candidates turn out to be, by field. Each has to lie behind its start, so that those
/// that begin behind the last one that has room need not be looked at.
pub(super) fn first_of<C, T>(
    mut candidates: Vec<C>,
    most: usize,
    start: impl Fn(&C) -> f64,
    tesla: impl Fn(&T) -> f64,
    mut refine: impl FnMut(&C) -> Option<T>,
) -> Found<T> {
    sort_by(&mut candidates, |a, b| start(a).total_cmp(&start(b)));
    let mut found: Vec<T> = Vec::new();
    let mut left_out = 0;
    for candidate in &candidates {
        let last = found.get(most.wrapping_sub(1)).map(&tesla);
        if most == 0 || last.is_some_and(|last| start(candidate) > last) {
            left_out += 1;
            continue;
        }
        let Some(one) = refine(candidate) else {
            continue;
        };
        let own = tesla(&one);
        let place = found.partition_point(|known| tesla(known) <= own);
        found.insert(place, one);
        if found.len() > most {
            found.pop();
            left_out += 1;
        }
    }
    Found { found, left_out }
}

struct Search<'a> {
    split: &'a Split,
    tesla: &'a [f64],
    followed: &'a Followed,
    probe: Probe<'a>,
    other: Probe<'a>,
    changes: Vec<(Range<f64>, bool)>,
    dips: Vec<(Range<f64>, f64)>,
    candidates: Vec<Candidate>,
}

impl Search<'_> {
    fn pair(&mut self, one: usize, two: usize, wanted: Wanted) {
        let states = self.split.states();
        let (Some(a), Some(b)) = (states.get(one), states.get(two)) else {
            return;
        };
        if one == two {
            return;
        }
        let mu_b = BOHR_MAGNETON_WAVENUMBER.value;
        let level = (LEVEL_AT_REST * mu_b, LEVEL * mu_b);
        let same_level = a.level == b.level;
        if a.part != b.part && wanted.crossings {
            self.crossing(one, two, same_level);
        }
        let (lower, higher) = if a.rank < b.rank {
            (one, two)
        } else {
            (two, one)
        };
        if a.part == b.part && wanted.avoided && a.rank.abs_diff(b.rank) == 1 {
            let Search {
                tesla,
                followed,
                changes: found,
                candidates,
                ..
            } = self;
            changes(
                tesla,
                &difference(&followed.slopes, higher, lower),
                level,
                found,
            );
            let nearest = found.drain(..).filter(|(_, rises)| *rises);
            candidates.extend(nearest.map(|(range, _)| Candidate {
                kind: CrossingKind::Avoided,
                first: lower,
                second: higher,
                range,
            }));
        }
        let near = wanted
            .clock
            .is_some_and(|most| (a.two_m - b.two_m).abs() <= 2 * most);
        if same_level && near {
            self.clock(one, two, level);
        }
    }

    fn crossing(&mut self, one: usize, two: usize, same_level: bool) {
        let Search {
            split,
            tesla,
            followed,
            probe,
            other,
            changes: found,
            candidates,
            ..
        } = self;
        // Inside a level shifts have more digits.
        let lists = if same_level {
            &followed.shifts
        } else {
            &followed.energies
        };
        let largest = |state: usize| {
            let list = lists.get(state).map(Vec::as_slice).unwrap_or_default();
            list.iter().fold(0.0_f64, |most, e| most.max(e.abs()))
        };
        let at_rest = |state: usize| {
            let first = lists.get(state).and_then(|list| list.first());
            let first = first.copied().unwrap_or(0.0).abs();
            first.max(split.size_at_rest(state))
        };
        let rest = at_rest(one).max(at_rest(two));
        let tolerance = (
            COINCIDE * rest,
            ROUNDING * rest.max(largest(one)).max(largest(two)),
        );
        let values = difference(lists, two, one);
        changes(tesla, &values, tolerance, found);
        let mut add = |range: Range<f64>, rises: bool| {
            let (first, second) = if rises { (two, one) } else { (one, two) };
            candidates.push(Candidate {
                kind: CrossingKind::Crossing,
                first,
                second,
                range,
            });
        };
        for (range, rises) in found.drain(..) {
            add(range, rises);
        }
        let slopes = difference(&followed.slopes, two, one);
        let mut last: Option<(f64, f64, f64)> = None;
        for (&field, (&value, &slope)) in tesla.iter().zip(values.iter().zip(&slopes)) {
            if let Some((before, v, s)) = last
                && v.abs() > tolerance.0
                && let Some(middle) = hidden(&(before..field), (v, value), (s, slope))
                && let (Some(a), Some(b)) = (probe.state(one, middle), other.state(two, middle))
                && b.above(&a) * v < 0.0
            {
                add(before..middle, v < 0.0);
                add(middle..field, v > 0.0);
            }
            last = Some((field, value, slope));
        }
    }

    fn clock(&mut self, one: usize, two: usize, level: (f64, f64)) {
        let Search {
            tesla,
            followed,
            probe,
            other,
            changes: found,
            dips: near,
            candidates,
            ..
        } = self;
        let start = |state: usize| followed.shifts.get(state).and_then(|list| list.first());
        let slopes = difference(&followed.slopes, two, one);
        let still = slopes.first().is_some_and(|slope| slope.abs() <= level.0);
        let moves = slopes.iter().any(|slope| slope.abs() > level.0);
        let (first, second) = if start(two) < start(one) {
            (two, one)
        } else {
            (one, two)
        };
        let mut add = |range: Range<f64>| {
            candidates.push(Candidate {
                kind: CrossingKind::Clock,
                first,
                second,
                range,
            });
        };
        if still && moves && tesla.first() == Some(&0.0) {
            add(0.0..0.0);
        }
        changes(tesla, &slopes, level, found);
        for (range, _) in found.drain(..) {
            add(range);
        }
        dips(tesla, &slopes, near);
        for (range, middle) in near.drain(..) {
            let (Some(a), Some(b)) = (probe.state(one, middle), other.state(two, middle)) else {
                continue;
            };
            let before = tesla.partition_point(|field| *field < range.start);
            let known = slopes.get(before).copied().unwrap_or(0.0);
            if known.abs() > level.0 && (b.slope - a.slope) * known < 0.0 {
                add(range.start..middle);
                add(middle..range.end);
            }
        }
    }

    /// Exactly where, if it is there at all.
    fn refine(&mut self, candidate: &Candidate) -> Option<Crossing> {
        let Candidate {
            kind,
            first,
            second,
            ..
        } = *candidate;
        let (probe, other) = (&mut self.probe, &mut self.other);
        let mut both = |tesla: f64| Some((probe.state(first, tesla)?, other.state(second, tesla)?));
        let range = &candidate.range;
        let tesla = if range.end == 0.0 {
            0.0
        } else {
            root(range, |tesla| {
                let (a, b) = both(tesla)?;
                Some(match kind {
                    CrossingKind::Crossing => b.above(&a),
                    _ => b.slope - a.slope,
                })
            })?
        };
        let (a, b) = both(tesla)?;
        let gap = match kind {
            CrossingKind::Crossing => 0.0,
            _ => b.above(&a),
        };
        let (first, second, a, b, gap) = if gap < 0.0 {
            (second, first, b, a, -gap)
        } else {
            (first, second, a, b, gap)
        };
        Some(Crossing {
            kind,
            first,
            second,
            tesla,
            energy: a.origin + a.energy,
            gap,
            slopes: (a.slope, b.slope),
        })
    }
}

/// One state's list less another's, by field.
#[inline(never)]
fn difference(lists: &[Vec<f64>], one: usize, two: usize) -> Vec<f64> {
    let list = |state: usize| lists.get(state).map(Vec::as_slice).unwrap_or_default();
    list(one)
        .iter()
        .zip(list(two))
        .map(|(a, b)| a - b)
        .collect()
}

#[inline(never)]
pub(super) fn too_large(count: usize) -> Problem {
    let message = format!("{count} are too many to be searched for crossings at so many fields.");
    Problem::new("search-too-large", message, 0, 0)
        .bound(format!("at most {MOST_COMPARED} pairs times fields"))
}
