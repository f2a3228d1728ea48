//! What the answer on splitting says of estimated constants A and B.

use super::document::Document;
use super::energy_case::EnergyCase;
use super::json::Json;
use super::lack::Way;
use super::nucleus::Nuclear;
use super::splitting_rows::EstimateRow;
use super::splitting_sets::{Found, Prepared};

/// How far off estimates of one configuration were. The validation report has every value; a test holds these words to
/// it.
pub const OFF: &str = "Estimates of A were off by 21 % in the median of 39 published values, by 92 % at most; those of B by 18 % of 12, 53 % at most.";

/// The same for one electron outside full shells, without and with a polarised core.
pub const POLARISED: &str = "For one electron outside full shells the sheet's core polarisation brings A nearer: from 34 % too small to 19 % in the median.";

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
    Some(EstimateRow {
        included,
        say: OFF,
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
    if row.is_some_and(|row| row.included) {
        limits.push(format!("A and B that are not entered are estimates, from radial functions and the nuclear moments. {OFF} Left out: the polarisation of full shells by open ones (all of A in N 2p3 and Mn 3d5, where the estimate is next to zero), correlation that these configurations do not hold, what joins different levels."));
        if document.structure.polarisation.is_none() {
            limits.push(POLARISED.to_owned());
        }
    }
    let nuclei = document.nuclei.iter().filter(|n| n.two_i() > 0);
    for nuclear in nuclei.filter(|_| document.estimate) {
        let missing = match (nuclear.g, nuclear.isotope.and_then(|i| i.quadrupole)) {
            (None, _) => "A: g_I",
            (_, None) if nuclear.two_i() > 1 => "B: the quadrupole moment",
            _ => continue,
        };
        let name = nuclear.name.as_deref().unwrap_or("the nucleus");
        limits.push(format!("No estimate of {missing} of {name} is not known."));
    }
    limits
}
