//! Which part of a pattern a polariser keeps, in words.

use crate::splitting::seen::Polariser;

use super::field::Field;

/// What a component looks like.
#[derive(Clone, Copy, Debug)]
pub struct Shown {
    pub polarisation: &'static str,
    pub offset: f64,
    pub seen: f64,
}

/// A share of the light below this counts as none: what rounding of an angle leaves.
const NONE: f64 = 1e-9;

/// "σ+ only, on the side of higher energy"; nothing without a polariser or without light.
pub fn keeps(field: &Field, components: &[Shown]) -> Option<String> {
    if field.polariser == Polariser::None {
        return None;
    }
    let all: f64 = components.iter().map(|c| c.seen).sum();
    if all <= NONE {
        return Some("nothing of the pattern".to_owned());
    }
    let mut kept: Vec<(&str, f64, f64)> = Vec::new();
    for component in components {
        match kept.iter_mut().find(|k| k.0 == component.polarisation) {
            Some(found) => {
                found.1 += component.seen;
                found.2 += component.seen * component.offset;
            }
            None => kept.push((
                component.polarisation,
                component.seen,
                component.seen * component.offset,
            )),
        }
    }
    kept.retain(|k| k.1 > NONE * all);
    let words = kept.iter().map(|(name, seen, offset)| {
        let sign = match *name {
            "pi" => "π",
            "sigma+" => "σ+",
            "sigma-" => "σ−",
            "delta-M+2" => "ΔM = +2",
            _ => "ΔM = −2",
        };
        let side = match offset {
            _ if *name == "pi" || field.tesla == 0.0 => "",
            o if *o > 0.0 => " on the side of higher energy",
            o if *o < 0.0 => " on the side of lower energy",
            _ => "",
        };
        format!("{sign} ({:.0} %{side})", 100.0 * seen / all)
    });
    Some(words.collect::<Vec<_>>().join(", "))
}
