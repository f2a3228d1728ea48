//! The rows of the answer on levels.

use std::rc::Rc;

use serde::{Serialize, Serializer};

use crate::quantity::TwiceJ;

use super::lack::Way;
use super::rich::{Kind, Rich};

/// One level; energies in cm⁻¹.
#[derive(Debug, Serialize)]
pub struct LevelRow {
    pub label: Shared,
    pub rich: Rich,
    pub configuration: Shared,
    pub term: String,
    pub energy: f64,
    pub energy_kind: Kind,
    pub computed_energy: f64,
    pub above_lowest: f64,
    #[serde(rename = "J")]
    pub j: TwiceJ,
    pub parity: &'static str,
    pub g: Option<f64>,
    pub composition: Vec<ShareRow>,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub composition_jj: Option<Vec<ShareRow>>,
    #[serde(skip_serializing_if = "Option::is_none")]
    pub composition_jk: Option<Vec<ShareRow>>,
    /// The largest share in LS coupling, percent.
    pub leading: f64,
    /// Seconds.
    pub lifetime: Option<f64>,
    /// Share of the atoms at the temperature of the source.
    pub population: Option<f64>,
}

/// A text that many rows carry.
#[derive(Clone, Debug)]
pub struct Shared(pub Rc<str>);

impl Serialize for Shared {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        serializer.serialize_str(&self.0)
    }
}

#[derive(Debug, Serialize)]
pub struct ShareRow {
    pub name: String,
    pub rich: Rich,
    pub percent: f64,
}

#[derive(Debug, Serialize)]
pub struct ParameterRow {
    /// As it may stand in `structure.given`.
    pub name: String,
    pub configuration: Option<String>,
    /// The other one, for an integral between two.
    pub second: Option<String>,
    pub value: f64,
    pub unit: &'static str,
    /// "computed", "entered" or "zero".
    pub kind: &'static str,
    pub computed: Option<f64>,
    pub scale: Option<f64>,
    /// Whether the sheet may give it.
    pub can_be_given: bool,
}

/// What correlation within subshells does for these terms, in percent of the distances between them.
#[derive(Debug, Serialize)]
pub struct CorrelationRow {
    /// Whether it is in these energies, for one subshell at least.
    pub on: bool,
    pub subshells: Vec<CorrelatedRow>,
    /// Subshells of configurations that get none.
    pub left_out: Vec<LeftOutRow>,
    /// In words.
    pub say: String,
    /// What puts it in.
    pub way: Option<Way>,
}

/// One kind of subshell: how far distances of terms from the ground term usually are off, percent.
#[derive(Debug, Serialize)]
pub struct CorrelatedRow {
    pub orbital: String,
    /// The first excited term, least and most without correlation: too large.
    pub without: (u8, u8),
    /// At most with it.
    pub with: u8,
    /// Higher terms without and with correlation, at most in either direction; for f they are above.
    pub higher: Option<(u8, u8)>,
    /// The configurations in which it has correlation.
    pub configurations: Vec<String>,
}

/// A subshell without correlation.
#[derive(Debug, Serialize)]
pub struct LeftOutRow {
    pub orbital: String,
    pub configuration: String,
    /// In words.
    pub because: String,
}

#[derive(Debug, Serialize)]
pub struct SchemeRow {
    pub scheme: &'static str,
    pub mean_leading: f64,
    pub best: bool,
}

#[derive(Debug, Serialize)]
pub struct GroundRow {
    pub label: Shared,
    pub rich: Rich,
    #[serde(rename = "J")]
    pub j: TwiceJ,
    pub hund: Agreement,
    pub observed: Option<Agreement>,
}

#[derive(Debug, Serialize)]
pub struct Agreement {
    pub term: Option<String>,
    #[serde(rename = "J")]
    pub j: Option<TwiceJ>,
    pub agrees: bool,
    /// How the table has it: "measured", "semi-empirical", "theoretical", …
    pub status: Option<String>,
    pub source: Option<String>,
}

/// An interval between neighbours of one term.
#[derive(Debug, Serialize)]
pub struct IntervalRow {
    pub configuration: Shared,
    pub term: String,
    pub rich: Rich,
    #[serde(rename = "upper_J")]
    pub upper_j: TwiceJ,
    #[serde(rename = "lower_J")]
    pub lower_j: TwiceJ,
    /// E(J) − E(J − 1), cm⁻¹.
    pub interval: f64,
    /// By Landé's rule, beside the interval of the largest J.
    pub expected_ratio: f64,
    pub ratio: Option<f64>,
}

#[derive(Debug, Serialize)]
pub struct SeriesRow {
    pub name: String,
    pub rich: Rich,
    /// cm⁻¹ on the scale of the energies.
    pub limit: f64,
    pub limit_kind: Kind,
    pub limit_uncertainty: Option<f64>,
    /// δ₀, δ₂ …
    pub coefficients: Vec<f64>,
    pub members: Vec<MemberRow>,
}

#[derive(Debug, Serialize)]
pub struct MemberRow {
    pub n: u32,
    pub label: Option<String>,
    pub energy: f64,
    pub n_effective: f64,
    pub defect: f64,
    pub kind: &'static str,
}

#[derive(Debug, Serialize)]
pub struct BlockRow {
    pub parity: &'static str,
    #[serde(rename = "J")]
    pub j: TwiceJ,
    pub rows: usize,
}

#[derive(Debug, Serialize)]
pub struct PartitionRow {
    /// K.
    pub temperature: f64,
    pub value: f64,
    /// Energy of the highest level counted, cm⁻¹ above the lowest.
    pub cut_off: f64,
    pub cut_off_by: &'static str,
    pub levels: usize,
}

/// The balance with the next ion.
#[derive(Debug, Serialize)]
pub struct IonisationRow {
    /// K.
    pub temperature: f64,
    /// m⁻³.
    pub electron_density: f64,
    /// Energy of ionisation from the lowest level, cm⁻¹.
    pub limit: f64,
    pub limit_kind: Kind,
    /// By how much the plasma lowers it, cm⁻¹.
    pub lowering: f64,
    /// m.
    pub debye_length: f64,
    pub lower_partition: f64,
    pub higher_partition: f64,
    /// The configuration whose levels the higher one counts.
    pub higher_configuration: Option<String>,
    /// Ions of the higher charge for each of this one.
    pub ratio: f64,
    /// Their share among both.
    pub ionised: f64,
}
