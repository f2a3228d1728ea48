//! What the sheet says about how radial functions and energies are computed.

use crate::problem::Problem;
use crate::quantity::{self, Dimension};
use crate::structure::model::Scale;

use super::choice::{ENERGIES, choice};
use super::json::Json;

/// A core polarisation: both values as entered.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Polarisation {
    /// Dipole polarisability of the core, a₀³, above zero.
    pub alpha: f64,
    /// Cut-off radius, a₀, above zero.
    pub radius: f64,
}

/// Where the radial parameters of energies come from.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Energies {
    /// From radial functions; what is given replaces what is computed.
    Computed,
    /// Only what is given; the rest is zero.
    Given,
}

/// The group `structure`, what it gives apart.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Structure {
    /// Where parameters come from, if the sheet says so.
    pub energies: Option<Energies>,
    /// Whether configurations of one parity mix.
    pub mixing: bool,
    /// Whether correlation within subshells is added in second order; where the sheet does not say, where it
    /// is sound.
    pub correlation: Option<bool>,
    /// Of computed integrals.
    pub scale: Scale,
    /// Whether the radial equation holds the relativistic terms.
    pub relativity: bool,
    /// The core polarisation, off where none is entered.
    pub polarisation: Option<Polarisation>,
}

impl Default for Structure {
    fn default() -> Self {
        Structure {
            energies: None,
            mixing: true,
            correlation: None,
            scale: Scale::default(),
            relativity: true,
            polarisation: None,
        }
    }
}

impl Structure {
    /// Reads the group; what its schema does not know of is added to the faults.
    pub fn read(json: &Json, faults: &mut Vec<Problem>) -> Structure {
        let mut structure = Structure::default();
        let Some(group) = json.get("structure") else {
            return structure;
        };
        if let Some(Json::Bool(relativity)) = group.get("relativity") {
            structure.relativity = *relativity;
        }
        if let Some(Json::Bool(mixing)) = group.get("mixing") {
            structure.mixing = *mixing;
        }
        if let Some(Json::Bool(correlation)) = group.get("correlation") {
            structure.correlation = Some(*correlation);
        }
        let energies = group.get("energies").and_then(Json::as_text);
        structure.energies = match energies.and_then(|typed| choice(typed, &ENERGIES)) {
            Some("computed") => Some(Energies::Computed),
            Some(_) => Some(Energies::Given),
            None => None,
        };
        let scale = &mut structure.scale;
        for (key, place) in [
            ("F", &mut scale.f),
            ("G", &mut scale.g),
            ("R", &mut scale.r),
            ("zeta", &mut scale.zeta),
        ] {
            if let Some(Json::Number(value)) = group.get("scale").and_then(|s| s.get(key)) {
                *place = *value;
            }
        }
        if let Some(polarisation) = group.get("polarisation") {
            structure.polarisation = polarise(polarisation, faults);
        }
        structure
    }
}

fn polarise(group: &Json, faults: &mut Vec<Problem>) -> Option<Polarisation> {
    let path = "/structure/polarisation";
    let keys = [
        ("alpha", Dimension::Polarisability, "0.95 a0^3"),
        ("radius", Dimension::Radius, "1.2 a0"),
    ];
    let [alpha, radius] = keys.map(|(key, dimension, _)| {
        let text = group.get(key)?.as_text()?;
        Some((text, quantity::quantity(text, dimension).ok()?.value))
    });
    let given = keys.map(|(key, ..)| group.get(key).is_some());
    if let [true, false] | [false, true] = given {
        let [(first, ..), (second, ..)] = keys;
        let (here, missing) = if group.get(first).is_some() {
            (first, second)
        } else {
            (second, first)
        };
        faults.push(
            Problem::new(
                "polarisation-incomplete",
                format!("The core polarisation has \"{here}\" but no \"{missing}\"."),
                0,
                0,
            )
            .bound("It takes a polarisability alpha and a cut-off radius together.")
            .at(path),
        );
        return None;
    }
    let (alpha, radius) = (alpha?, radius?);
    let mut sound = true;
    let names = [
        ("polarisability-not-positive", "polarisability"),
        ("polarisation-radius-not-positive", "cut-off radius"),
    ];
    for ((key, _, usual), ((text, value), (code, name))) in
        keys.into_iter().zip([alpha, radius].into_iter().zip(names))
    {
        if value > 0.0 {
            continue;
        }
        sound = false;
        faults.push(
            Problem::new(
                code,
                format!("The {name} of the core is {}.", text.trim()),
                0,
                text.len(),
            )
            .bound("It is above zero; without a polarisation both stay empty.")
            .way(format!("Use {usual}"), usual)
            .in_utf16(text)
            .at(format!("{path}/{key}")),
        );
    }
    let ((_, alpha), (_, radius)) = (alpha, radius);
    sound.then_some(Polarisation { alpha, radius })
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::sheet::json::read;

    fn found(polarisation: &str) -> (Option<Polarisation>, Vec<(&'static str, String)>) {
        let text = format!(r#"{{"structure":{{"polarisation":{polarisation}}}}}"#);
        let mut faults = Vec::new();
        let structure = Structure::read(&read(&text).unwrap(), &mut faults);
        let faults = faults.into_iter().map(|f| (f.code, f.path)).collect();
        (structure.polarisation, faults)
    }

    #[test]
    fn a_polarisation_takes_two_positive_values() {
        let (good, faults) = found(r#"{"alpha":"0.95 a0^3","radius":"1.2 a0"}"#);
        assert_eq!(faults, []);
        assert_eq!(
            good,
            Some(Polarisation {
                alpha: 0.95,
                radius: 1.2
            })
        );
        let (none, faults) = found(r#"{"alpha":"0.95 a0^3"}"#);
        assert_eq!(none, None);
        assert_eq!(faults[0].0, "polarisation-incomplete");
        let (none, faults) = found(r#"{"alpha":"0 a0^3","radius":"0 a0"}"#);
        assert_eq!(none, None);
        let at = |key: &str| format!("/structure/polarisation/{key}");
        assert_eq!(
            faults,
            [
                ("polarisability-not-positive", at("alpha")),
                ("polarisation-radius-not-positive", at("radius"))
            ]
        );
        assert_eq!(found("{}"), (None, vec![]));
    }

    #[test]
    fn relativity_is_on_unless_the_sheet_says_no() {
        let mut faults = Vec::new();
        let read_it = |text: &str, faults: &mut Vec<Problem>| {
            Structure::read(&read(text).unwrap(), faults).relativity
        };
        assert!(read_it("{}", &mut faults));
        assert!(!read_it(
            r#"{"structure":{"relativity":false}}"#,
            &mut faults
        ));
        assert!(faults.is_empty());
    }
}
