//! Level energies that were measured: the pins of the sheet.

use crate::numerics::order::sort_by;
use crate::problem::Problem;
use crate::quantity::{self, Dimension};

use super::document::{Document, LevelOf};
use super::json::Json;
use super::schema;

impl Document {
    /// Reads `measured` once the configurations are known.
    pub(super) fn read_measured(&mut self, json: &Json) {
        let Some(Json::Object(pins)) = json.get("measured") else {
            return;
        };
        let mut found: Vec<(LevelOf, f64, &str)> = Vec::new();
        for (name, value) in pins {
            let path = schema::pointer("/measured", name);
            let energy = value
                .as_text()
                .and_then(|t| quantity::quantity(t, Dimension::Wavenumber).ok());
            match (self.level(name), energy) {
                (Ok(Some(level)), Some(energy)) => found.push((level, energy.value, name)),
                (Ok(_), _) => {}
                // The fault stands in the key, whose characters are not those of the value.
                (Err(problems), _) => {
                    self.faults.extend(
                        // A way out replaces the value, and the fault is in its name.
                        problems.into_iter().map(|mut p| {
                            p.ways.clear();
                            p.way("Leave this value out", "")
                                .in_utf16(name)
                                .at(path.clone())
                        }),
                    );
                }
            }
        }
        // Stable, so that of two pins of one level the later one is the fault.
        sort_by(&mut found, |a, b| a.0.cmp(&b.0));
        for (level, energy, name) in found {
            if self.measured.last().map(|(known, _)| known) == Some(&level) {
                self.faults.push(
                    Problem::new(
                        "level-repeated",
                        format!("{} is pinned twice.", self.level_label(&level)),
                        0,
                        name.encode_utf16().count(),
                    )
                    .bound("Each level has one measured energy.")
                    .at(schema::pointer("/measured", name)),
                );
            } else {
                self.measured.push((level, energy));
            }
        }
    }

    /// The measured energy of a level, in cm⁻¹.
    pub fn pinned(&self, of: &LevelOf) -> Option<f64> {
        let place = self.measured.binary_search_by(|(level, _)| level.cmp(of));
        let (_, energy) = self.measured.get(place.ok()?)?;
        Some(*energy)
    }
}
