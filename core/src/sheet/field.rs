//! The magnetic field of the sheet, and how its pattern is looked at.

use crate::problem::Problem;
use crate::quantity::{self, Dimension};
use crate::splitting::seen::Polariser;

use super::choice::{POLARISERS, VIEWS, choice};
use super::document::Document;
use super::json::Json;

/// Six decimals, for words: an angle that was typed in radians has more.
fn short(value: f64) -> f64 {
    libm::round(value * 1e6) / 1e6
}

/// How far the linear pattern may be from the full one.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Tolerance {
    /// A share of the largest linear offset.
    Relative(f64),
    /// cm⁻¹.
    Absolute(f64),
}

/// The field of the sheet.
#[derive(Clone, Debug)]
pub struct Field {
    /// B in tesla.
    pub tesla: f64,
    /// As it was typed.
    pub text: String,
    /// Angle between field and line of sight.
    pub angle_degrees: f64,
    /// Where maps of it end, tesla; nothing where the sheet does not say.
    pub up_to: Option<f64>,
    /// Whether the diamagnetic term counts.
    pub diamagnetic: bool,
    /// Where the linear pattern ends.
    pub tolerance: Tolerance,
    /// What stands before the detector.
    pub polariser: Polariser,
}

impl Field {
    /// Where maps end: as said, otherwise at twice the field; never before it.
    pub fn end(&self) -> f64 {
        let most = Dimension::FluxDensity.bounds().1;
        let usual = if self.tesla > 0.0 {
            2.0 * self.tesla
        } else {
            1.0
        };
        self.up_to.unwrap_or(usual).max(self.tesla).min(most)
    }
}

impl Document {
    /// Reads `field`; what its shapes do not show is added to the faults.
    pub(super) fn read_field(&mut self, json: &Json) {
        let Some(field) = json.get("field") else {
            return;
        };
        let text = |key: &str| field.get(key).and_then(Json::as_text);
        let angle = |typed: &str| Some(quantity::quantity(typed, Dimension::Angle).ok()?.value);
        let density = |key: &str| {
            Some(
                quantity::quantity(text(key)?, Dimension::FluxDensity)
                    .ok()?
                    .value,
            )
        };
        let tolerance = self.tolerance(text("tolerance"));
        let polariser = match text("polariser").map(|typed| (choice(typed, &POLARISERS), typed)) {
            None | Some((Some("none"), _)) => Polariser::None,
            Some((Some("left circular"), _)) => Polariser::LeftCircular,
            Some((Some(_), _)) => Polariser::RightCircular,
            Some((None, typed)) => angle(typed).map_or(Polariser::None, Polariser::Linear),
        };
        let view = text("view").unwrap_or("across");
        let angle_degrees = match choice(view, &VIEWS) {
            Some("along") => Some(0.0),
            Some(_) => Some(90.0),
            None => angle(view),
        };
        if let (Some(tesla), Some(angle_degrees)) = (density("flux_density"), angle_degrees) {
            self.field = Some(Field {
                tesla,
                text: text("flux_density").unwrap_or_default().trim().to_owned(),
                angle_degrees,
                up_to: density("up_to").filter(|end| *end > 0.0),
                diamagnetic: matches!(field.get("diamagnetic"), Some(Json::Bool(true))),
                tolerance,
                polariser,
            });
        }
    }

    /// `1 %` or `0.01 cm-1`.
    fn tolerance(&mut self, typed: Option<&str>) -> Tolerance {
        let usual = Tolerance::Relative(0.01);
        let Some(typed) = typed else {
            return usual;
        };
        let share = typed.trim_end().ends_with('%');
        let dimension = if share {
            Dimension::Share
        } else {
            Dimension::Wavenumber
        };
        let problem = match quantity::quantity(typed, dimension) {
            Ok(found) if found.value > 0.0 && share => {
                return Tolerance::Relative(found.value / 100.0);
            }
            Ok(found) if found.value > 0.0 => return Tolerance::Absolute(found.value),
            Ok(_) => Problem::new(
                "tolerance-not-positive",
                format!("A tolerance of {} is never met.", typed.trim()),
                0,
                typed.len(),
            )
            .bound("It lies above zero."),
            Err(problem) => problem,
        };
        self.faults.push(
            problem
                .way("Use 1 %", "1 %")
                .in_utf16(typed)
                .at("/field/tolerance"),
        );
        usual
    }
}

impl Field {
    /// How the pattern is looked at: "seen across it through a linear polariser at 0° from the field".
    pub fn looked(&self) -> String {
        let view = match self.angle_degrees {
            0.0 => "along it".to_owned(),
            90.0 => "across it".to_owned(),
            angle => format!("at {}° to it", short(angle)),
        };
        let through = match self.polariser {
            Polariser::None => String::new(),
            Polariser::LeftCircular => " through a left circular polariser".to_owned(),
            Polariser::RightCircular => " through a right circular polariser".to_owned(),
            Polariser::Linear(angle) => {
                format!(
                    " through a linear polariser at {}° from the field",
                    short(angle)
                )
            }
        };
        format!("seen {view}{through}")
    }

    /// The polariser in words; nothing without one.
    pub fn polariser_words(&self) -> Option<String> {
        match self.polariser {
            Polariser::None => None,
            Polariser::LeftCircular => Some("left circular".to_owned()),
            Polariser::RightCircular => Some("right circular".to_owned()),
            Polariser::Linear(angle) => Some(format!("linear at {}° from the field", short(angle))),
        }
    }

    /// The tolerance of the linear pattern in words.
    pub fn tolerance_words(&self) -> String {
        match self.tolerance {
            Tolerance::Relative(share) => format!("{} %", short(share * 100.0)),
            Tolerance::Absolute(value) => format!("{value} cm-1"),
        }
    }
}
