//! Level energies that were measured: the pins of the sheet.

use crate::problem::Problem;
use crate::quantity::{self, Dimension};

use super::document::Document;
use super::json::Json;
use super::schema;

impl Document {
    /// Reads `measured` once the configurations are known.
    pub(super) fn read_measured(&mut self, json: &Json) {
        let Some(Json::Object(pins)) = json.get("measured") else {
            return;
        };
        for (name, value) in pins {
            let path = schema::pointer("/measured", name);
            let energy = value
                .as_text()
                .and_then(|t| quantity::quantity(t, Dimension::Wavenumber).ok());
            match (self.level(name), energy) {
                (Ok(Some(level)), Some(_))
                    if self.measured.iter().any(|(other, _)| *other == level) =>
                {
                    self.faults.push(
                        Problem::new(
                            "level-repeated",
                            format!("{} is pinned twice.", self.level_label(&level)),
                            0,
                            name.encode_utf16().count(),
                        )
                        .bound("Each level has one measured energy.")
                        .at(path),
                    );
                }
                (Ok(Some(level)), Some(energy)) => self.measured.push((level, energy.value)),
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
    }
}
