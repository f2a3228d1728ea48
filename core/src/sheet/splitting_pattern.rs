//! What the components of a line look like together: places, groups, and which are faint.

use crate::numerics::order::sort_by;
use crate::radiation::Multipole;

use super::splitting_rows::{ComponentRow, LineOf};

/// Offsets this close, as a share of the largest, are one place.
const SAME_PLACE: f64 = 1e-9;

/// A component of which less than this share passes is not seen: what rounding of an angle leaves.
const UNSEEN: f64 = 1e-9;

/// The components of which view and polariser let something be seen.
fn seen(components: &[ComponentRow]) -> Vec<&ComponentRow> {
    let is_seen = |c: &&ComponentRow| c.seen > UNSEEN * c.strength;
    components.iter().filter(is_seen).collect()
}

/// What a pattern has, and how much of it is seen.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Pattern {
    /// Places of the components by polarisation.
    pub all: usize,
    /// Those of the components that are seen.
    pub seen: usize,
    pub is_normal_triplet: bool,
}

/// Counts the places; without a field no direction is marked, and every component is seen from everywhere.
pub fn pattern(components: &[ComponentRow], line: Option<&LineOf>, tesla: f64) -> Pattern {
    let is_normal_triplet = is_normal_triplet(components, line);
    let count = |rows: &[&ComponentRow]| match is_normal_triplet {
        // Each polarisation is one place but for what the field mixes.
        true => POLARISATIONS
            .iter()
            .filter(|name| rows.iter().any(|c| c.polarisation == **name))
            .count(),
        false => positions(rows),
    };
    let all = count(&components.iter().collect::<Vec<_>>());
    let seen = match tesla > 0.0 {
        true => count(&seen(components)),
        false => all,
    };
    Pattern {
        all,
        seen,
        is_normal_triplet,
    }
}

const POLARISATIONS: [&str; 3] = ["pi", "sigma+", "sigma-"];

/// How many places the components have, by polarisation.
fn positions(components: &[&ComponentRow]) -> usize {
    let place = |c: &ComponentRow| match c.offset == 0.0 {
        true => c.lorentz.unwrap_or(0.0),
        false => c.offset,
    };
    let mut all: Vec<(&str, f64)> = components
        .iter()
        .map(|c| (c.polarisation, place(c)))
        .collect();
    sort_by(&mut all, |a, b| a.0.cmp(b.0).then(a.1.total_cmp(&b.1)));
    let largest = all.iter().fold(0.0_f64, |most, c| most.max(c.1.abs()));
    let mut count = 0;
    let mut last: Option<(&str, f64)> = None;
    for (polarisation, offset) in all {
        let same = last.is_some_and(|(known, at)| {
            known == polarisation && offset - at <= SAME_PLACE * largest
        });
        if !same {
            count += 1;
        }
        last = Some((polarisation, offset));
    }
    count
}

/// Components below this share of the strongest one that is seen are faint: neither the largest offset nor the
/// groups of a pattern count them.
const FAINT: f64 = 0.01;

/// The components that are seen and not faint.
pub fn bright(components: &[ComponentRow]) -> Vec<&ComponentRow> {
    let mut seen = seen(components);
    let strongest = seen.iter().map(|c| c.seen).fold(0.0_f64, f64::max);
    seen.retain(|c| c.seen >= FAINT * strongest);
    seen
}

/// The largest offset among them, cm⁻¹.
pub fn widest(components: &[&ComponentRow]) -> f64 {
    let offsets = components.iter().map(|c| c.offset.abs());
    offsets.fold(0.0, f64::max)
}

/// Groups of the bright components, a twentieth of their spread or more apart.
pub fn groups(components: &[ComponentRow]) -> usize {
    let mut offsets: Vec<f64> = bright(components).iter().map(|c| c.offset).collect();
    sort_by(&mut offsets, f64::total_cmp);
    let (Some(first), Some(last)) = (offsets.first(), offsets.last()) else {
        return 0;
    };
    let apart = (last - first) / 20.0;
    let gap = |pair: &&[f64]| matches!(pair, [a, b] if b - a > apart);
    1 + offsets.windows(2).filter(gap).count()
}

/// How near a normal triplet's components lie to 0 and ±μ_B B, in μ_B B.
const NORMAL: f64 = 2e-3;

/// Whether these are π at the centre and σ at ±μ_B B.
fn is_normal_triplet(components: &[ComponentRow], line: Option<&LineOf>) -> bool {
    let step = |c: &ComponentRow| match c.polarisation {
        "pi" => 0.0,
        "sigma+" => 1.0,
        _ => -1.0,
    };
    line.is_some_and(|line| line.multipole != Multipole::E2)
        && components.len() >= 3
        && components
            .iter()
            .all(|c| c.lorentz.is_some_and(|x| (x - step(c)).abs() < NORMAL))
}

impl Pattern {
    /// How many components there are, or how many of them are seen.
    pub fn words(self) -> String {
        let count = match self.all {
            1 => "1 component".to_owned(),
            many => format!("{many} components"),
        };
        let of = match self.seen {
            _ if self.is_whole() => String::new(),
            0 => "none of ".to_owned(),
            some => format!("{some} of "),
        };
        let triplet = match self.is_normal_triplet {
            true => ", the normal triplet",
            false => "",
        };
        format!("{of}{count}{triplet}")
    }

    /// Whether every component is seen.
    pub fn is_whole(self) -> bool {
        self.seen == self.all
    }
}
