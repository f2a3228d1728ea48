//! The fields at which crossings are looked for.

use super::split::Split;
use crate::constants::BOHR_MAGNETON_WAVENUMBER;
use crate::numerics::order::sort_by;

/// Where the rising steps begin, as a share of the field whose Zeeman energy is the smallest distance of two
/// levels that it mixes: the small moment of a nucleus makes clock points at a thousandth of that field.
const BELOW: f64 = 1e-4;

/// The weakest field of the rising steps, as a share of the last field.
const LEAST: f64 = 1e-8;

/// Fields of a search from 0 to an end, with what lies between them.
#[derive(Clone, Debug, PartialEq)]
pub struct SearchFields {
    /// The fields, rising from 0.
    pub tesla: Vec<f64>,
    /// The distance of the even ones, tesla.
    pub step: f64,
    /// The first of the others and the ratio of each to the one before; nothing where there are none.
    pub rising: Option<(f64, f64)>,
}

/// About so many fields: three in five evenly apart, and two in five in equal ratios, from far below the
/// field where fine or hyperfine structure and Zeeman energy are alike.
#[must_use]
pub fn search_fields<'a>(
    splits: impl IntoIterator<Item = &'a Split>,
    end: f64,
    count: usize,
) -> SearchFields {
    let scales = splits.into_iter().filter_map(Split::smallest_distance);
    let scale = scales.fold(f64::INFINITY, f64::min) / BOHR_MAGNETON_WAVENUMBER.value;
    let start = (BELOW * scale).max(LEAST * end);
    let ratios = if start < end { 2 * count / 5 } else { 0 };
    let steps = count.saturating_sub(ratios + 1).max(1);
    let step = end / steps as f64;
    let mut tesla: Vec<f64> = (0..=steps)
        .map(|place| end * (place as f64 / steps as f64))
        .collect();
    let ratio = libm::exp(libm::log(end / start) / ratios.max(1) as f64);
    let mut field = start;
    for _ in 0..ratios {
        tesla.push(field);
        field *= ratio;
    }
    tesla.retain(|field| *field <= end);
    sort_by(&mut tesla, f64::total_cmp);
    // Two fields that nearly agree tell no more than one.
    tesla.dedup_by(|field, before| *field - *before < 1e-9 * *field);
    SearchFields {
        tesla,
        step,
        rising: (ratios > 0).then_some((start, ratio)),
    }
}
