//! What the components of a line look like together: places, groups, and which are faint.

use crate::numerics::order::sort_by;
use crate::radiation::Multipole;

use super::splitting_rows::{ComponentRow, LineOf};

/// Offsets this close, as a share of the largest, are one place.
const SAME_PLACE: f64 = 1e-9;

/// How many places the components have, by polarisation.
pub fn positions(components: &[ComponentRow]) -> usize {
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

/// Components below this share of the strongest one are faint: neither the largest offset nor the groups of a
/// pattern count them.
pub const FAINT: f64 = 0.01;

/// The components that are not faint.
pub fn bright(components: &[ComponentRow]) -> impl Iterator<Item = &ComponentRow> {
    let strengths = components.iter().map(|c| c.strength);
    let strongest = strengths.fold(0.0_f64, f64::max);
    let is_bright = move |c: &&ComponentRow| c.strength >= FAINT * strongest;
    components.iter().filter(is_bright)
}

/// Groups of the bright components, a twentieth of their spread or more apart.
pub fn groups(components: &[ComponentRow]) -> usize {
    let mut offsets: Vec<f64> = bright(components).map(|c| c.offset).collect();
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
pub fn is_normal_triplet(components: &[ComponentRow], line: Option<&LineOf>) -> bool {
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

/// The pattern in words.
pub fn describe(positions: usize, normal_triplet: bool) -> String {
    match (positions, normal_triplet) {
        (_, true) => "3 components, the normal triplet".to_owned(),
        (1, _) => "1 component".to_owned(),
        (many, _) => format!("{many} components"),
    }
}
