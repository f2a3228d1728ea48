//! What the answer on splitting says of estimated constants A and B.

use super::document::Document;
use super::energy_case::EnergyCase;
use super::json::Json;
use super::lack::Way;
use super::nucleus::Nuclear;
use super::splitting_rows::EstimateRow;
use super::splitting_sets::{Found, Prepared};

/// How far off estimates were from published values, percent: median and largest of A, then of B. The validation
/// report has every one; a test holds these to it.
pub const OFF: [u32; 4] = [21, 92, 21, 53];

/// The published values: of A, of B.
pub const PUBLISHED: [usize; 2] = [39, 12];

/// Median departures of A of one electron outside full shells, percent: without core polarisation, and with it.
pub const POLARISED: [u32; 2] = [35, 19];

/// Whether some constant of this nucleus is an estimate.
pub fn is_estimated(ready: &Prepared, nuclear: &Nuclear) -> bool {
    let mut levels = ready.sets.iter().flat_map(|set| &set.levels);
    let is = |found: &Option<Found>| found.is_some_and(|c| c.estimated);
    levels.any(|level| level.constants(nuclear).iter().any(is))
}

/// The row; nothing where nothing is estimated and nothing could be.
pub fn estimate_row(document: &Document, ready: &Prepared) -> Option<EstimateRow> {
    let included = document.nuclei.iter().any(|n| is_estimated(ready, n));
    if !included && !could_be(document, ready) {
        return None;
    }
    let ([a, worst_a, b, worst_b], [of_a, of_b]) = (OFF, PUBLISHED);
    let say = format!(
        "Estimates of A were off by {a} % in the median of {of_a} published values and by up to {worst_a} %, those of B by {b} % and up to {worst_b} % of {of_b}."
    );
    Some(EstimateRow {
        included,
        say,
        way: (!included).then(|| Way {
            label: "Estimate A and B".to_owned(),
            path: "/nucleus/estimate".to_owned(),
            value: Json::Bool(true),
        }),
    })
}

/// Whether the sheet's nucleus has a spin and no constants, and radial functions are there.
fn could_be(document: &Document, ready: &Prepared) -> bool {
    let is_computed = match ready.solved.as_ref().map(|solved| solved.case()) {
        Some(EnergyCase::Model { case, .. }) => case.computed,
        Some(EnergyCase::OneElectron { .. }) => true,
        None => false,
    };
    let has_spin = match document.nuclei.as_slice() {
        [] => document
            .isotope()
            .and_then(|i| i.spin)
            .is_some_and(|s| s.doubled() > 0),
        all => all
            .iter()
            .any(|n| n.two_i() > 0 && n.dipole.is_empty() && n.g.is_some()),
    };
    is_computed && has_spin && !document.estimate
}

/// What estimates leave out, and what is not estimated.
pub fn limits(document: &Document, row: Option<&EstimateRow>) -> Vec<String> {
    let mut limits = Vec::new();
    if let Some(EstimateRow {
        included: true,
        say,
        ..
    }) = row
    {
        limits.push(format!("A and B that are not entered are estimates, from radial functions and the nuclear moments. {say} Left out: the polarisation of full shells by open ones, correlation that these configurations do not hold, what joins different levels. Where every open subshell is half full, as in N 2p3 and Mn 3d5, A comes from that polarisation alone, and the estimate is next to zero."));
        if document.structure.polarisation.is_none() {
            let [without, with] = POLARISED;
            limits.push(format!("For one electron outside full shells the sheet's core polarisation brings estimates of A nearer: from {without} % too small to {with} %, in the median."));
        }
    }
    if !document.estimate {
        return limits;
    }
    if document.level_alone.is_some() {
        limits.push("A and B of a level alone are those entered: it has no radial functions to estimate them from.".to_owned());
        return limits;
    }
    for nuclear in document.nuclei.iter().filter(|n| n.two_i() > 0) {
        let name = nuclear.name.as_deref().unwrap_or("the nucleus");
        if nuclear.g.is_none() {
            limits.push(format!("A is not estimated: g_I of {name} is not known."));
        }
        if nuclear.two_i() > 1 && nuclear.isotope.and_then(|i| i.quadrupole).is_none() {
            limits.push(format!(
                "B is not estimated: the quadrupole moment of {name} is not known."
            ));
        }
    }
    limits
}
