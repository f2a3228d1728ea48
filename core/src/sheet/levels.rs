//! Which energies? The levels of all configurations in intermediate coupling, and what they are made of.

use serde::Serialize;

use crate::problem::Problem;
use crate::quantity::TwiceJ;
use crate::radiation::populations::{CutOff, Partition, Weighted, partition};
use crate::terms::chains::Chain;

use super::answer::Around;
use super::compositions::{Composition, Mean};
use super::decays::Radiation;
use super::document::Document;
use super::energy_case::EnergyCase;
use super::levels_limits::limits;
use super::levels_rows::{
    BlockRow, CorrelationRow, GroundRow, IntervalRow, IonisationRow, LevelRow, ParameterRow,
    PartitionRow, SchemeRow, SeriesRow, ShareRow, Shared,
};
use super::levels_words::{Told, kinds, sentence, working};
use super::placed::Placed;
use super::rich::{Rich, TermName};
use super::solved::{Solved, solved};
use super::states_terms::chain_rich;
use super::watch::Watch;
use super::{ionised, levels_facts, levels_limits, parameter_rows};

/// Above this many levels their lines, and so lifetimes, are not worked out.
pub const MOST_LEVELS_WITH_LINES: usize = 2500;

/// The most levels that are listed, the lowest ones; all of them count for everything else.
pub const MAX_LEVELS: usize = 20_000;

/// The answer.
#[derive(Debug, Serialize)]
pub struct Levels {
    #[serde(flatten)]
    around: Around,
    species: Rich,
    levels: Vec<LevelRow>,
    levels_total: usize,
    parameters: Vec<ParameterRow>,
    schemes: Vec<SchemeRow>,
    correlation: Option<CorrelationRow>,
    ground: Option<GroundRow>,
    intervals: Vec<IntervalRow>,
    series: Vec<SeriesRow>,
    blocks: Vec<BlockRow>,
    partition: Option<PartitionRow>,
    ionisation: Option<IonisationRow>,
}

/// The answer on levels.
pub fn answer(document: &Document, watch: &mut Watch) -> Result<Levels, Problem> {
    if let Some(lack) = document.lacks(super::Question::Levels) {
        return Err(super::orbitals_case::lacking(&lack));
    }
    let solved = solved(document, watch)?;
    let placed = Placed::new(document, &solved);
    let strengths = match solved.levels.len() <= MOST_LEVELS_WITH_LINES {
        true => Some(solved.strengths(document, watch)?),
        false => None,
    };
    let radiation = strengths.map(|found| Radiation::new(&solved, found, &placed));
    let weighted = placed.weighted(&solved);
    let filled = populated(document, &weighted);
    let levels = level_rows(
        document,
        &solved,
        &placed,
        radiation.as_ref(),
        filled.as_ref(),
    );
    let mut parameters = Vec::new();
    if let Some(spectrum) = &solved.spectrum {
        parameters = parameter_rows::rows(document, &solved, &spectrum.parameters);
        let integrals = strengths.map(|found| found.integrals.as_slice());
        parameters.extend(parameter_rows::rows(
            document,
            &solved,
            integrals.unwrap_or_default(),
        ));
    }
    let schemes = schemes(&solved.compositions().means);
    let ground = levels_facts::ground(document, &solved, &placed);
    let intervals = levels_facts::intervals(document, &solved, &placed);
    let series = levels_facts::series(document, &solved, &placed);
    let ionisation = filled
        .as_ref()
        .and_then(|filled| ionised::row(document, &solved, &placed, &series, filled));
    let correlation = match solved.case() {
        EnergyCase::Model { case, entries } => levels_limits::correlation(document, case, entries),
        EnergyCase::OneElectron { .. } => None,
    };
    let told = Told {
        document,
        solved: &solved,
        placed: &placed,
        levels: &levels,
        parameters: &parameters,
        ground: ground.as_ref(),
        intervals: &intervals,
        ionisation: ionisation.as_ref(),
    };
    let mut around = Around::saying(sentence(&told));
    around.working = working(&told);
    around.limits = limits(&told);
    around.kinds = kinds(&told);
    Ok(Levels {
        around,
        species: document.species_rich(),
        series,
        ionisation,
        blocks: blocks(&solved),
        partition: filled.map(|found| PartitionRow {
            temperature: found.temperature,
            value: found.value,
            cut_off: found.highest,
            cut_off_by: "highest level",
            levels: found.counted,
        }),
        levels,
        levels_total: solved.levels.len(),
        parameters,
        schemes,
        correlation,
        ground,
        intervals,
    })
}

/// The partition function at the temperature of the source.
pub fn populated(document: &Document, weighted: &[Weighted]) -> Option<Partition> {
    let temperature = document.conditions.temperature?;
    partition(weighted, temperature, CutOff::HighestLevel).ok()
}

fn level_rows(
    document: &Document,
    solved: &Solved,
    placed: &Placed,
    radiation: Option<&Radiation>,
    filled: Option<&Partition>,
) -> Vec<LevelRow> {
    let lowest = placed.lowest();
    let compositions = solved.compositions();
    let mut rows = Vec::with_capacity(solved.levels.len());
    for place in placed.order.iter().take(MAX_LEVELS) {
        let Some(level) = solved.levels.get(*place) else {
            continue;
        };
        let energy = placed.of(*place);
        let composition = compositions.levels.get(*place);
        let decay = radiation.and_then(|found| found.decays.get(*place));
        rows.push(LevelRow {
            label: Shared(level.label.clone()),
            rich: level.rich(document),
            configuration: Shared(level.configuration.clone()),
            term: level.level.term.to_string(),
            energy,
            energy_kind: placed.kind_of(*place),
            computed_energy: level.energy,
            above_lowest: energy - lowest,
            j: level.level.j,
            parity: parity(level.odd),
            g: level.g,
            leading: composition
                .and_then(|c| c.ls.first())
                .map_or(100.0, |share| share.1),
            composition: composition
                .map(|c| ls_shares(document, solved, *place, c))
                .unwrap_or_default(),
            composition_jj: composition.and_then(|c| named_shares(c.jj.as_ref())),
            composition_jk: composition.and_then(|c| named_shares(c.jk.as_ref())),
            lifetime: decay.and_then(|decay| decay.lifetime()),
            population: filled.map(|found| {
                found.share(Weighted {
                    energy,
                    weight: level.weight(),
                })
            }),
        });
    }
    rows
}

/// "even" or "odd".
pub fn parity(odd: bool) -> &'static str {
    if odd { "odd" } else { "even" }
}

fn named_shares(shares: Option<&Vec<(Rich, f64)>>) -> Option<Vec<ShareRow>> {
    let rows = shares?.iter().map(|(rich, percent)| ShareRow {
        name: rich.plain(),
        rich: rich.clone(),
        percent: *percent,
    });
    Some(rows.collect())
}

/// The LS components by the names that the listing of terms gives them.
fn ls_shares(
    document: &Document,
    solved: &Solved,
    place: usize,
    composition: &Composition,
) -> Vec<ShareRow> {
    let whole = || {
        let level = solved.levels.get(place)?;
        let rich = levels_facts::term_rich(document, level);
        Some(vec![ShareRow {
            name: rich.plain(),
            rich,
            percent: 100.0,
        }])
    };
    let parts = || {
        let spectrum = solved.spectrum.as_ref()?;
        let at = spectrum.levels.get(place)?;
        let parity = spectrum.parities.get(at.parity)?;
        let chains = solved.chains.get(at.parity)?;
        let EnergyCase::Model { entries, .. } = solved.case() else {
            return None;
        };
        let mut rows = Vec::new();
        for (state, percent) in &composition.ls {
            let chain = chains.get(*state)?;
            let configuration = parity.configuration_of(parity.basis().states().get(*state)?)?;
            let entry = document.entries.get(*entries.get(configuration)?)?;
            let several = *solved.several.get(at.parity)?.get(*state)?;
            rows.push(ShareRow {
                name: format!("{} {}", entry.label, term_name(chain, parity.odd, several)),
                rich: chain_rich(chain, parity.odd),
                percent: *percent,
            });
        }
        Some(rows)
    };
    parts().or_else(whole).unwrap_or_default()
}

fn term_name(chain: &Chain, odd: bool, several: bool) -> String {
    TermName::new(chain.term, odd)
        .number(several.then_some(chain.index))
        .plain()
}

fn schemes(means: &[Mean]) -> Vec<SchemeRow> {
    let best = means
        .iter()
        .fold(f64::NEG_INFINITY, |best, mean| best.max(mean.mean));
    let mut found = false;
    means
        .iter()
        .map(|mean| {
            // Of those equal but for rounding the first: LS.
            let is_best = !found && mean.mean >= best - 1e-9;
            found |= is_best;
            SchemeRow {
                scheme: mean.scheme,
                mean_leading: mean.mean,
                best: is_best,
            }
        })
        .collect()
}

fn blocks(solved: &Solved) -> Vec<BlockRow> {
    let Some(spectrum) = &solved.spectrum else {
        return Vec::new();
    };
    let of_parity = |of: &crate::structure::model::Parity| {
        let odd = of.odd;
        let rows = of.levels.rows.iter().map(move |rows| BlockRow {
            parity: parity(odd),
            j: TwiceJ::from_doubled(rows.two_j),
            rows: rows.states.len(),
        });
        rows.collect::<Vec<_>>()
    };
    spectrum.parities.iter().flat_map(of_parity).collect()
}
