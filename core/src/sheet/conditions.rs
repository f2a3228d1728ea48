//! Where the light comes from and in what its wavelengths are measured.

use crate::problem::Problem;
use crate::quantity::{self, Dimension};

use super::choice::{MEDIA, choice};
use super::json::Json;
use super::light;
use super::window::Window;

/// The air that wavelengths are measured in; nothing where the standard value stands.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct AirOf {
    /// Kelvin.
    pub temperature: Option<f64>,
    /// Pascal.
    pub pressure: Option<f64>,
    /// Relative humidity, %.
    pub humidity: Option<f64>,
    /// Carbon dioxide, parts in a million molecules.
    pub co2: Option<f64>,
}

/// `window`, `medium`, `refractive_index`, `air` and the `source` of light.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Conditions {
    /// What is looked at.
    pub window: Option<Window>,
    /// Whether the sheet says that wavelengths are those in air; otherwise they are those in vacuum.
    pub air_wanted: bool,
    /// Of a medium that is neither air nor vacuum.
    pub refractive_index: Option<f64>,
    /// The air.
    pub air: AirOf,
    /// Of the source, kelvin.
    pub temperature: Option<f64>,
    /// Of the source, m⁻³.
    pub electron_density: Option<f64>,
    /// Atoms in a column along the line of sight, m⁻².
    pub column: Option<f64>,
}

impl Conditions {
    /// Reads the keys; what their shapes do not show is added to the faults.
    pub fn read(json: &Json, faults: &mut Vec<Problem>) -> Conditions {
        let value = |group: Option<&Json>, key: &str, dimension| {
            let text = group?.get(key)?.as_text()?;
            Some(quantity::quantity(text, dimension).ok()?.value)
        };
        let (source, air) = (json.get("source"), json.get("air"));
        let medium = json.get("medium").and_then(Json::as_text);
        let conditions = Conditions {
            window: Window::read(json, faults),
            air_wanted: medium.and_then(|typed| choice(typed, &MEDIA)) == Some("air"),
            refractive_index: value(Some(json), "refractive_index", Dimension::RefractiveIndex),
            air: AirOf {
                temperature: value(air, "temperature", Dimension::Temperature),
                pressure: value(air, "pressure", Dimension::Pressure),
                humidity: value(air, "humidity", Dimension::Humidity),
                co2: value(air, "co2", Dimension::MoleFraction),
            },
            temperature: value(source, "temperature", Dimension::Temperature),
            electron_density: value(source, "electron_density", Dimension::NumberDensity),
            column: value(source, "column", Dimension::ColumnDensity),
        };
        if let Err(mut problem) = light::air(&conditions) {
            let key = problem.path.rsplit('/').next().unwrap_or_default();
            let typed = air.and_then(|air| air.get(key)).and_then(Json::as_text);
            problem.end = typed.unwrap_or_default().encode_utf16().count();
            faults.push(problem);
        }
        conditions
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::sheet::json::read;

    fn found(text: &str) -> (Conditions, Vec<(&'static str, String)>) {
        let mut faults = Vec::new();
        let conditions = Conditions::read(&read(text).unwrap(), &mut faults);
        let faults = faults.into_iter().map(|f| (f.code, f.path)).collect();
        (conditions, faults)
    }

    #[test]
    fn conditions_are_read_in_their_own_units() {
        let (all, faults) = found(
            r#"{"window":["5880 Å","590 nm"],"medium":"Vacuum","refractive_index":"1.76",
                "source":{"temperature":"926.85 °C","electron_density":"1e14 cm-3","column":"1e11 cm-2"},
                "air":{"temperature":"20 °C","pressure":"1 atm","humidity":"45 %","co2":"400 ppm"}}"#,
        );
        assert_eq!(faults, []);
        assert_eq!(
            all.window
                .map(|window| window.ends.map(|end| end.unwrap().nm)),
            Some([588.0, 590.0])
        );
        assert!(!all.air_wanted);
        assert_eq!(all.refractive_index, Some(1.76));
        assert_eq!(all.temperature, Some(1200.0));
        assert_eq!(all.electron_density, Some(1e20));
        assert_eq!(all.column, Some(1e15));
        assert_eq!(
            all.air,
            AirOf {
                temperature: Some(293.15),
                pressure: Some(101_325.0),
                humidity: Some(45.0),
                co2: Some(400.0)
            }
        );
    }
}
