//! Series of one outer electron: quantum defects, Ritz's expansion, members beyond those that are
//! known, and the limit.
//!
//! E_n = E_∞ − R_M ζ²/n*², n* = n − δ_n, with ζ the charge of what the electron moves around (1 in a
//! neutral atom), and δ_n = δ₀ + δ₂ t + δ₄ t² + …, t = 1/(n − δ₀)² (Ritz).
//!
//! It holds for one electron outside closed shells or outside one level of the core; a level of
//! another configuration between the members moves them, and the residuals show it.
//!
//! Source: Ritz, Astrophys. J. 28, 237 (1908); Edlén, *Atomic Spectra*, Handbuch der Physik XXVII
//! (1964), sect. 20; Drake & Swainson, Phys. Rev. A 44, 5448 (1991).

use crate::numerics::least_squares::least_squares;
use crate::problem::Problem;

/// The most coefficients δ₀, δ₂, … of an expansion.
pub const MOST_COEFFICIENTS: usize = 5;

/// The highest n that a series is continued to.
pub const HIGHEST_N: u32 = 1000;

/// A known member.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Member {
    /// Principal quantum number of the outer electron.
    pub n: u32,
    /// Energy, cm⁻¹, on the scale of the limit.
    pub energy: f64,
}

/// n* and δ of a member.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Defect {
    /// n* = ζ √{R_M/(E_∞ − E)}.
    pub effective: f64,
    /// δ = n − n*.
    pub defect: f64,
}

/// What the electron moves around.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Core {
    /// ζ: 1 for a neutral atom, 2 for a singly charged ion.
    pub charge: u32,
    /// R_M, cm⁻¹ ([`super::isotope::rydberg`] with the mass of the whole core).
    pub rydberg: f64,
}

/// A fitted series.
#[derive(Clone, Debug, PartialEq)]
pub struct Series {
    core: Core,
    limit: f64,
    limit_uncertainty: Option<f64>,
    coefficients: Vec<f64>,
    residuals: Vec<f64>,
}

/// n* and δ of a member below a limit, cm⁻¹; exact but for rounding.
///
/// # Errors
/// `series-limit-below-level` unless the limit is above the member; `series-core-out-of-range` for
/// a charge outside 1 … 137 or an R that is not above zero.
pub fn defect(member: Member, limit: f64, core: Core) -> Result<Defect, Problem> {
    core.check()?;
    let effective = core.strength().sqrt() / (limit - member.energy).sqrt();
    if !(limit > member.energy && effective.is_finite()) {
        return Err(limit_below(limit, member));
    }
    Ok(Defect {
        effective,
        defect: f64::from(member.n) - effective,
    })
}

/// Fits the coefficients of Ritz's expansion, and the limit where it is not given, to the energies
/// of the members, all with one weight: least squares by Gauss and Newton.
///
/// `coefficients` is how many of δ₀, δ₂, … there are.
///
/// # Errors
/// `series-too-short` with fewer members than unknowns or no coefficient, `series-not-rising` unless the energies rise
/// with n and every n occurs once, `series-limit-below-level`, `series-core-out-of-range`,
/// `series-fit-failed` where no expansion of this kind follows the members.
pub fn fit(
    members: &[Member],
    limit: Option<f64>,
    core: Core,
    coefficients: usize,
) -> Result<Series, Problem> {
    core.check()?;
    let mut members = members.to_vec();
    crate::numerics::order::sort_by_key(&mut members, |member| member.n);
    let unknowns = coefficients.saturating_add(usize::from(limit.is_none()));
    if members.len() < unknowns || !(1..=MOST_COEFFICIENTS).contains(&coefficients) {
        return Err(too_short(members.len(), unknowns.max(1)));
    }
    for (one, next) in members.iter().zip(members.iter().skip(1)) {
        let rises = one.energy < next.energy && next.energy.is_finite();
        if one.n == next.n || !rises {
            return Err(not_rising(*one, *next));
        }
    }
    let last = members.last().copied().ok_or_else(|| too_short(0, 1))?;
    let start = match limit {
        Some(limit) => limit,
        None => first_limit(&members, core).ok_or_else(failed)?,
    };
    let mut series = Series {
        core,
        limit: start,
        limit_uncertainty: None,
        coefficients: vec![0.0; coefficients],
        residuals: Vec::new(),
    };
    if let Some(first) = series.coefficients.first_mut() {
        *first = defect(last, start, core)?.defect;
    }
    series.improve(&members, limit.is_none())?;
    Ok(series)
}

/// The limit above which the two highest members have one defect: by halving, for n* of the last
/// less that of the one before falls from infinity to zero as the limit rises.
fn first_limit(members: &[Member], core: Core) -> Option<f64> {
    let mut highest = members.iter().rev();
    let (last, before) = (highest.next()?, highest.next()?);
    let steps = f64::from(last.n) - f64::from(before.n);
    let gap = last.energy - before.energy;
    let root = core.strength().sqrt();
    let excess = |above: f64| root / above.sqrt() - root / (above + gap).sqrt() - steps;
    // In the logarithm of the distance of the limit from the last member.
    let (mut low, mut high) = (libm::log(gap * 1e-12), libm::log(core.strength() * 1e3));
    for _ in 0..200 {
        let middle = 0.5 * (low + high);
        if excess(libm::exp(middle)) > 0.0 {
            low = middle;
        } else {
            high = middle;
        }
    }
    let limit = last.energy + libm::exp(high);
    limit.is_finite().then_some(limit)
}

impl Core {
    fn check(self) -> Result<(), Problem> {
        if (1..=137).contains(&self.charge) && self.rydberg > 0.0 && self.rydberg.is_finite() {
            Ok(())
        } else {
            Err(core_out_of_range(self))
        }
    }

    /// R_M ζ².
    fn strength(self) -> f64 {
        self.rydberg * f64::from(self.charge) * f64::from(self.charge)
    }
}

/// Steps of the fit, and the part of the largest energy that a step may still move a member by.
const MOST_STEPS: usize = 200;
const SETTLED: f64 = 1e-12;

impl Series {
    /// E_∞, cm⁻¹, given or fitted.
    #[must_use]
    pub fn limit(&self) -> f64 {
        self.limit
    }

    /// The standard uncertainty of a fitted limit, from the scatter of the members; nothing for a
    /// given limit or without a member more than unknowns.
    #[must_use]
    pub fn limit_uncertainty(&self) -> Option<f64> {
        self.limit_uncertainty
    }

    /// δ₀, δ₂, δ₄, ….
    #[must_use]
    pub fn coefficients(&self) -> &[f64] {
        &self.coefficients
    }

    /// Energy less that of the expansion for each member, n rising, cm⁻¹.
    #[must_use]
    pub fn residuals(&self) -> &[f64] {
        &self.residuals
    }

    /// δ_n by the expansion; nothing where n is not above it or above [`HIGHEST_N`].
    #[must_use]
    pub fn defect(&self, n: u32) -> Option<f64> {
        let first = self.coefficients.first().copied()?;
        let base = f64::from(n) - first;
        if n > HIGHEST_N || base <= 0.0 {
            return None;
        }
        let t = 1.0 / (base * base);
        let defect = self
            .coefficients
            .iter()
            .rev()
            .fold(0.0, |sum, coefficient| sum * t + coefficient);
        (f64::from(n) > defect).then_some(defect)
    }

    /// E_n, cm⁻¹, by the expansion; nothing where [`Series::defect`] gives nothing.
    #[must_use]
    pub fn energy(&self, n: u32) -> Option<f64> {
        let effective = f64::from(n) - self.defect(n)?;
        let energy = self.limit - self.core.strength() / (effective * effective);
        energy.is_finite().then_some(energy)
    }

    fn improve(&mut self, members: &[Member], free_limit: bool) -> Result<(), Problem> {
        let mut misses = self.misses(members).ok_or_else(failed)?;
        let size = members.iter().fold(self.limit.abs(), |most, member| {
            most.max(member.energy.abs())
        });
        for _ in 0..MOST_STEPS {
            let columns = self.slopes(members, free_limit).ok_or_else(failed)?;
            let step = least_squares(&columns, &misses).ok_or_else(failed)?;
            let settled = largest_change(&columns, &step.solution) <= SETTLED * size;
            match self.stepped(members, &misses, &step.solution) {
                Some((next, better)) => (*self, misses) = (next, better),
                // At the bottom rounding alone decides whether a step makes it better.
                None if settled => {}
                None => return Err(failed()),
            }
            if settled {
                let freedom = members.len().saturating_sub(columns.len());
                if let (true, Some(factor)) = (free_limit && freedom > 0, step.variances.last()) {
                    let variance = square(&misses) / freedom as f64;
                    self.limit_uncertainty = Some((variance * factor).sqrt());
                }
                self.residuals = misses;
                return Ok(());
            }
        }
        Err(failed())
    }

    /// The series after a step, halved until the members are followed no worse, and its misses.
    fn stepped(
        &self,
        members: &[Member],
        misses: &[f64],
        step: &[f64],
    ) -> Option<(Series, Vec<f64>)> {
        let before = square(misses);
        let mut part = 1.0;
        for _ in 0..40 {
            let mut next = self.clone();
            let mut changes = step.iter().map(|change| part * change);
            for (coefficient, change) in next.coefficients.iter_mut().zip(&mut changes) {
                *coefficient += change;
            }
            // What is left is the limit's, where it is free.
            next.limit += changes.next().unwrap_or(0.0);
            if let Some(better) = next.misses(members)
                && square(&better) <= before
            {
                return Some((next, better));
            }
            part *= 0.5;
        }
        None
    }

    /// Energies less those of the expansion.
    fn misses(&self, members: &[Member]) -> Option<Vec<f64>> {
        members
            .iter()
            .map(|member| Some(member.energy - self.energy(member.n)?))
            .collect()
    }

    /// ∂E/∂δ₀, ∂E/∂δ₂, …, and ∂E/∂E_∞ where the limit is free, each for all members.
    fn slopes(&self, members: &[Member], free_limit: bool) -> Option<Vec<Vec<f64>>> {
        let mut columns = vec![Vec::with_capacity(members.len()); self.coefficients.len()];
        let first = self.coefficients.first().copied()?;
        for member in members {
            let n = f64::from(member.n);
            let effective = n - self.defect(member.n)?;
            let by_defect = -2.0 * self.core.strength() / (effective * effective * effective);
            let base = n - first;
            let t = 1.0 / (base * base);
            // t moves with δ₀: ∂t/∂δ₀ = 2/(n − δ₀)³.
            let mut by_t = 0.0;
            let mut power = 1.0;
            for (place, coefficient) in self.coefficients.iter().enumerate().skip(1) {
                by_t += place as f64 * coefficient * power;
                power *= t;
            }
            let mut slope = by_defect;
            for (place, column) in columns.iter_mut().enumerate() {
                let own = if place == 0 {
                    by_t * 2.0 * t / base
                } else {
                    0.0
                };
                column.push(slope + own * by_defect);
                slope *= t;
            }
        }
        if free_limit {
            columns.push(vec![1.0; members.len()]);
        }
        Some(columns)
    }
}

fn square(values: &[f64]) -> f64 {
    values.iter().map(|value| value * value).sum()
}

/// How far the step moves the energy of any member, to first order.
fn largest_change(columns: &[Vec<f64>], step: &[f64]) -> f64 {
    let members = columns.first().map_or(0, Vec::len);
    let mut changes = vec![0.0; members];
    for (column, part) in columns.iter().zip(step) {
        for (change, slope) in changes.iter_mut().zip(column) {
            *change += slope * part;
        }
    }
    changes
        .iter()
        .fold(0.0, |most: f64, change| most.max(change.abs()))
}

#[inline(never)]
fn limit_below(limit: f64, member: Member) -> Problem {
    Problem::new(
        "series-limit-below-level",
        format!(
            "The limit {limit} cm-1 is not above the member n = {} at {} cm-1.",
            member.n, member.energy
        ),
        0,
        0,
    )
    .bound("The limit of a series is above all its members.")
}

#[inline(never)]
fn core_out_of_range(core: Core) -> Problem {
    Problem::new(
        "series-core-out-of-range",
        format!(
            "No electron is bound by the charge {} with the Rydberg constant {} cm-1.",
            core.charge, core.rydberg
        ),
        0,
        0,
    )
    .bound("The charge is between 1 and 137, the Rydberg constant above zero.")
}

#[inline(never)]
fn too_short(members: usize, unknowns: usize) -> Problem {
    Problem::new(
        "series-too-short",
        format!("{members} members of a series do not determine {unknowns} unknowns."),
        0,
        0,
    )
    .bound(format!(
        "At least as many members as unknowns, and at most {MOST_COEFFICIENTS} coefficients."
    ))
}

#[inline(never)]
fn not_rising(one: Member, next: Member) -> Problem {
    Problem::new(
        "series-not-rising",
        format!(
            "The member n = {} at {} cm-1 does not lie above n = {} at {} cm-1.",
            next.n, next.energy, one.n, one.energy
        ),
        0,
        0,
    )
    .bound("The energies of a series rise with n, and every n occurs once.")
}

#[inline(never)]
fn failed() -> Problem {
    Problem::new(
        "series-fit-failed",
        "No expansion of the quantum defect follows these members.",
        0,
        0,
    )
}
