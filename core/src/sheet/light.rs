//! Wavelengths in the sheet's medium, its window, and the light of its source.

use crate::constants::{ELECTRON_VOLT_WAVENUMBER, SPEED_OF_LIGHT};
use crate::problem::Problem;
use crate::radiation::Medium;
use crate::radiation::air::{Air, LONGEST, SHORTEST};

use super::conditions::Conditions;
use super::line_rows::{Conversions, LineRow, NearestRow, WindowRow};

/// 0 °C in kelvin.
const ICE_POINT: f64 = 273.15;

/// The air of the sheet.
///
/// # Errors
/// Those of [`Air::new`], at the sheet's keys.
pub fn air(conditions: &Conditions) -> Result<Air, Problem> {
    let (standard, entered) = (Air::STANDARD, &conditions.air);
    let made = Air::new(
        entered
            .temperature
            .map_or(standard.temperature(), |kelvin| kelvin - ICE_POINT),
        entered.pressure.unwrap_or(standard.pressure()),
        entered
            .humidity
            .map_or(standard.humidity(), |percent| percent / 100.0),
        entered.co2.unwrap_or(standard.carbon_dioxide()),
    );
    made.map_err(|problem| {
        let (key, usual) = match problem.code {
            "air-temperature-out-of-range" => ("temperature", "15 °C"),
            "air-pressure-out-of-range" => ("pressure", "101325 Pa"),
            "air-humidity-out-of-range" => ("humidity", "0 %"),
            _ => ("co2", "450 ppm"),
        };
        let bound = problem.bound.clone().unwrap_or_default();
        problem
            .bound(format!("Known air: {bound}."))
            .way(format!("Use {usual}"), usual)
            .at(format!("/air/{key}"))
    })
}

/// What wavelengths are measured in.
#[derive(Clone, Copy, Debug)]
pub struct Surroundings {
    /// The air, for the column that every answer has.
    air: Medium,
    /// The medium of the window.
    medium: Medium,
    /// "vacuum", "air" or "index".
    pub name: &'static str,
}

impl Surroundings {
    /// Those of the sheet.
    pub fn new(conditions: &Conditions) -> Surroundings {
        // Air that cannot be was a fault of the sheet.
        let air = Medium::Air(air(conditions).unwrap_or(Air::STANDARD));
        let index = conditions
            .refractive_index
            .and_then(|index| Medium::of_index(index).ok());
        let (medium, name) = match index {
            Some(medium) => (medium, "index"),
            None if conditions.air_wanted => (air, "air"),
            None => (Medium::Vacuum, "vacuum"),
        };
        Surroundings { air, medium, name }
    }

    /// The wavelength in air; nothing beyond the range of its formula.
    pub fn air_nm(&self, vacuum_nm: f64) -> Option<f64> {
        let found = self.air.wavelength(vacuum_nm);
        (!found.vacuum_instead).then_some(found.nm)
    }

    /// The wavelength in the medium.
    pub fn medium_nm(&self, vacuum_nm: f64) -> f64 {
        self.medium.wavelength(vacuum_nm).nm
    }

    /// The window with the lines in it.
    pub fn window(&self, conditions: &Conditions, lines: &[LineRow]) -> Option<WindowRow> {
        let window = conditions.window?;
        let ends = window.sorted(|nm| self.medium.vacuum(nm));
        let [from_nm, to_nm] = ends.map(|end| end.map(|(nm, _)| nm));
        let [from, to] = ends.map(|end| match end {
            Some((nm, end)) if end.by_energy => Some(self.medium_nm(nm)),
            typed => typed.map(|(_, end)| end.nm),
        });
        // How far outside the window; zero inside.
        let distance = |nm: f64| {
            let short = from_nm.map_or(0.0, |from| from - nm);
            short.max(to_nm.map_or(0.0, |to| nm - to)).max(0.0)
        };
        let count = lines
            .iter()
            .filter(|line| line.vacuum_nm.is_some_and(|nm| distance(nm) <= 0.0))
            .count();
        let mut nearest: Option<(f64, &LineRow)> = None;
        for line in lines.iter().filter(|_| count == 0) {
            if let Some(nm) = line.vacuum_nm
                && nearest.is_none_or(|(known, _)| distance(nm) < distance(known))
            {
                nearest = Some((nm, line));
            }
        }
        Some(WindowRow {
            from_nm,
            to_nm,
            from,
            to,
            medium: self.name,
            lines: count,
            nearest: nearest.map(|(nm, line)| NearestRow {
                upper: line.upper.clone(),
                lower: line.lower.clone(),
                multipole: line.multipole,
                nm: self.medium_nm(nm),
            }),
        })
    }

    /// In what this wavelength is meant: in vacuum where the formula of air ends.
    pub fn words(&self, vacuum_nm: f64) -> &'static str {
        match self.name {
            "air" if self.air_nm(vacuum_nm).is_some() => " in air",
            "index" => " in the medium",
            _ => " in vacuum",
        }
    }
}

/// Where air ends, for the words.
pub fn air_range() -> String {
    format!("{SHORTEST} to {LONGEST} nm")
}

/// Exact by definition of the units.
pub fn conversions() -> Conversions {
    Conversions {
        angstrom_per_nm: 10.0,
        ev_per_wavenumber: 1.0 / ELECTRON_VOLT_WAVENUMBER.value,
        thz_per_wavenumber: SPEED_OF_LIGHT.value * 1e-10,
    }
}
