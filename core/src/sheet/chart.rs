//! The chart of the elements for one charge: what each ion's ground configuration and level are.

use serde::Serialize;

use crate::configuration::{chart as place, filling};
use crate::elements;
use crate::terms::hund;

use super::entry::Named;
use super::ground::observed_rich;
use super::rich::{Piece, Rich, TermName};
use super::to_json;

#[derive(Serialize)]
struct Chart {
    charge: i32,
    cells: Vec<Cell>,
}

#[derive(Serialize)]
struct Cell {
    #[serde(rename = "Z")]
    z: u8,
    symbol: &'static str,
    name: &'static str,
    row: u8,
    column: u8,
    block: String,
    ladder: String,
    /// No keys where the charge leaves no electron.
    #[serde(flatten)]
    ion: Option<Ion>,
}

#[derive(Serialize)]
struct Ion {
    rich: Rich,
    configuration: String,
    ground: Rich,
    ground_text: String,
    open: String,
    source: String,
}

/// The chart for ions of one charge, as JSON text.
pub fn chart(charge: i32) -> String {
    let cells = (1..=118)
        .filter_map(|z| {
            let place = place::place(z)?;
            Some(Cell {
                z,
                symbol: elements::symbol(z)?,
                name: elements::name(z)?,
                row: place.row,
                column: place.column,
                block: place.block.to_string(),
                ladder: place.ladder.to_string(),
                ion: ion(z, charge),
            })
        })
        .collect();
    to_json(&Chart { charge, cells })
}

fn ion(z: u8, charge: i32) -> Option<Ion> {
    let filled = filling::ground(z, charge)?;
    let configuration = filled.configuration().clone();
    let odd = configuration.is_odd();
    let rules = hund::ground(configuration.subshells());
    let observed = filled
        .observed
        .as_ref()
        .map(|o| (observed_rich(&o.entry), o.entry.status_text()));
    let (ground, source) = match observed.filter(|(rich, _)| !rich.0.is_empty()) {
        Some(known) => known,
        None => {
            let name = TermName::new(rules.term, odd);
            let name = if let Some(j) = rules.j {
                name.level(j)
            } else {
                name
            };
            (
                Rich::new().with(Piece::Term(name)),
                "by Hund’s rules".to_owned(),
            )
        }
    };
    let open: Vec<String> = configuration
        .subshells()
        .iter()
        .filter(|s| s.is_open())
        .map(|s| s.to_string())
        .collect();
    let named = Named::untyped(configuration);
    Some(Ion {
        rich: named.short_rich(),
        configuration: named.label(),
        ground_text: ground.plain(),
        ground,
        open: if open.is_empty() {
            "closed".to_owned()
        } else {
            open.join(" ")
        },
        source,
    })
}
