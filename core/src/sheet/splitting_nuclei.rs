//! Nuclei and isotopes in the answer on splitting, with the constants of its levels.

use super::document::Document;
use super::nucleus::Nuclear;
use super::rich::Kind;
use super::splitting_rows::{ConstantRow, IsotopeRow, NucleusRow};
use super::splitting_sets::Prepared;

/// The nucleus, unless there are several isotopes.
pub fn nucleus_row(document: &Document, ready: &Prepared) -> Option<NucleusRow> {
    if let Some(level) = &document.level_alone {
        let spin = level.spin.filter(|spin| spin.doubled() > 0)?;
        let set = ready.sets.first()?.levels.first()?;
        return Some(NucleusRow {
            isotope: None,
            spin,
            g: level.g_i,
            kind: Kind::Entered,
            source: None,
            levels: vec![ConstantRow {
                label: set.label.clone(),
                rich: set.rich.clone(),
                a: Some(level.a),
                b: Some(level.b),
                kind: "entered",
                scaled: false,
                estimated: None,
            }],
        });
    }
    if document.isotopes_listed {
        return None;
    }
    let nuclear = document.nuclei.first()?;
    Some(NucleusRow {
        isotope: nuclear.name.clone(),
        spin: nuclear.spin.unwrap_or_default(),
        g: nuclear.g,
        kind: if nuclear.typed {
            Kind::Entered
        } else {
            Kind::Measured
        },
        source: (!nuclear.typed).then_some(TABLE),
        levels: constant_rows(ready, nuclear),
    })
}

/// Where spins and g of nuclei are taken from.
pub const TABLE: &str = "Stone 2014, updated 2019, by the table of isotopes of mendeleev 1.3.0";

/// Constants of the levels that the answer lists.
fn constant_rows(ready: &Prepared, nuclear: &Nuclear) -> Vec<ConstantRow> {
    let with_line = ready
        .sets
        .iter()
        .any(|set| set.levels.iter().any(|l| l.is_upper || l.is_lower));
    let levels = ready.sets.iter().flat_map(|set| &set.levels);
    levels
        .filter(|level| !with_line || level.is_upper || level.is_lower)
        .filter_map(|level| {
            level.of.as_ref()?;
            let [a, b] = level.constants(nuclear);
            Some(ConstantRow {
                label: level.label.clone(),
                rich: level.rich.clone(),
                a: a.map(|c| c.value),
                b: b.map(|c| c.value),
                kind: match a.or(b) {
                    None => "zero",
                    Some(c) if c.scaled || c.estimated => "computed",
                    Some(_) => "entered",
                },
                scaled: a.or(b).is_some_and(|c| c.scaled),
                estimated: match [a, b].map(|c| c.is_some_and(|c| c.estimated)) {
                    [true, true] => Some("A, B"),
                    [true, false] => Some("A"),
                    [false, true] => Some("B"),
                    _ => None,
                },
            })
        })
        .collect()
}

/// The isotopes of the mixture.
pub fn isotope_rows(document: &Document, ready: &Prepared) -> Vec<IsotopeRow> {
    if !document.isotopes_listed {
        return Vec::new();
    }
    let shares = document.nuclei.iter().filter_map(|n| n.share);
    let whole: f64 = shares.map(|(share, _)| share).sum();
    let row = |nuclear: &Nuclear| {
        let (share, kind) = nuclear.share?;
        Some(IsotopeRow {
            isotope: nuclear.name.clone()?,
            share: if whole > 0.0 {
                100.0 * share / whole
            } else {
                share
            },
            shift: nuclear.shift,
            spin: nuclear.spin,
            kind,
            levels: constant_rows(ready, nuclear),
        })
    };
    document.nuclei.iter().filter_map(row).collect()
}
