//! The rows of the answer to *Which lines?*

use crate::numerics::sorted_map::SortedMap;

use serde::Serialize;

use crate::quantity::TwiceJ;
use crate::radiation::Multipole;
use crate::radiation::strengths::LevelSum;

use super::rich::Rich;

#[derive(Debug, Serialize)]
pub struct LevelEntry {
    pub label: String,
    pub rich: Rich,
    #[serde(rename = "J")]
    pub j: TwiceJ,
    pub configuration: String,
    pub term: String,
}

#[derive(Debug, Serialize)]
pub struct LineRow {
    pub upper: String,
    pub lower: String,
    #[serde(rename = "upper_J")]
    pub upper_j: TwiceJ,
    #[serde(rename = "lower_J")]
    pub lower_j: TwiceJ,
    pub multipole: Multipole,
    pub relative: f64,
    pub multiplet: String,
    pub wavenumber: Option<f64>,
    pub vacuum_nm: Option<f64>,
    pub air_nm: Option<f64>,
    #[serde(rename = "S")]
    pub s: Option<f64>,
    pub gf: Option<f64>,
    #[serde(rename = "A")]
    pub a: Option<f64>,
}

#[derive(Debug, Serialize)]
pub struct RefusedRow {
    pub upper: String,
    pub lower: String,
    #[serde(rename = "upper_J")]
    pub upper_j: TwiceJ,
    #[serde(rename = "lower_J")]
    pub lower_j: TwiceJ,
    pub multipole: Multipole,
    pub rule: String,
    pub code: &'static str,
    pub rigorous: bool,
    /// The rule against each other multipole, by its code.
    pub others: SortedMap<String, &'static str>,
}

#[derive(Debug, Serialize)]
pub struct MultipletRow {
    pub name: String,
    pub upper_rich: Rich,
    pub lower_rich: Rich,
    pub multipole: Multipole,
    pub lines: usize,
    pub sum: f64,
    pub upper_sums: Vec<SumRow>,
    pub lower_sums: Vec<SumRow>,
}

#[derive(Debug, Serialize)]
pub struct SumRow {
    #[serde(rename = "J")]
    pub j: TwiceJ,
    pub sum: f64,
    pub expected: f64,
}

impl From<&LevelSum> for SumRow {
    fn from(sum: &LevelSum) -> Self {
        SumRow {
            j: sum.j,
            sum: sum.sum,
            expected: sum.expected,
        }
    }
}
