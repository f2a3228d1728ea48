//! A level alone: what is entered is all there is, and no configuration is needed.

use crate::problem::Problem;
use crate::quantity::{self, Dimension, TwiceJ};

use super::document::Document;
use super::json::Json;
use super::nucleus::{MAX_SPIN, number, refused_constant};

/// The largest J of a level alone.
pub const MAX_J: i32 = 100;

/// The level of the sheet; what was not entered is not there.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct LevelAlone {
    /// J.
    pub j: Option<TwiceJ>,
    /// g_J.
    pub g: Option<f64>,
    /// I.
    pub spin: Option<TwiceJ>,
    /// A, MHz.
    pub a: f64,
    /// B, MHz.
    pub b: f64,
    /// g_I.
    pub g_i: Option<f64>,
}

impl LevelAlone {
    /// 2I; 0 where none was entered.
    pub fn two_i(&self) -> i32 {
        self.spin.map_or(0, TwiceJ::doubled)
    }
}

impl Document {
    /// Reads `level`; an empty group is none.
    pub(super) fn read_level_alone(&mut self, json: &Json) {
        let Some(level @ Json::Object(entries)) = json.get("level") else {
            return;
        };
        let text = |key: &str| level.get(key).and_then(Json::as_text);
        if !entries
            .iter()
            .any(|(_, value)| value.as_text().is_some_and(|t| !t.trim().is_empty()))
        {
            return;
        }
        let mut momentum = |key: &str, most: i32| {
            let typed = text(key)?;
            let found = quantity::half_integer(typed).ok()?;
            if found.doubled() > 2 * most {
                self.faults.push(
                    Problem::new(
                        "angular-momentum-out-of-range",
                        format!("{key} = {found} is too large for a level alone."),
                        0,
                        typed.len(),
                    )
                    .bound(format!("{key} is at most {most}."))
                    .way(format!("Use {most}"), most.to_string())
                    .in_utf16(typed)
                    .at(format!("/level/{key}")),
                );
                return None;
            }
            Some(found).filter(|found| found.doubled() >= 0)
        };
        let (j, spin) = (momentum("J", MAX_J), momentum("I", MAX_SPIN));
        let constant = |key: &str| {
            let found = text(key).and_then(|t| quantity::quantity(t, Dimension::Frequency).ok());
            found.map_or(0.0, |found| found.value)
        };
        let alone = LevelAlone {
            j,
            g: number(level.get("g"), "/level/g", &mut self.faults),
            spin,
            a: constant("A"),
            b: constant("B"),
            g_i: number(level.get("g_I"), "/level/g_I", &mut self.faults),
        };
        for (key, value, is_dipole) in [("A", alone.a, true), ("B", alone.b, false)] {
            let (Some(j), Some(typed)) = (alone.j, text(key)) else {
                continue;
            };
            if let Some(mut problem) =
                refused_constant("The nucleus", j, alone.spin, value, is_dipole)
            {
                problem.end = typed.len();
                self.faults
                    .push(problem.in_utf16(typed).at(format!("/level/{key}")));
            }
        }
        self.level_alone = Some(alone);
    }
}
