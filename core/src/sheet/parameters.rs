//! Keys that wait for a later question, checked all the same: the whole sheet is checked whichever
//! question is asked.
//!
//! Names of radial parameters: `F2(3d,3d)`, `G1(3d,4p)`, `R1(3d,4p,4s,4p)`, `zeta(3d)`, `E(3d6 4s2)`,
//! `r(3s,3p)`, `r2(3d,3d)`, each with ` @ configuration` behind it where it holds for one only.

use crate::configuration;
use crate::problem::Problem;
use crate::quantity::{self, Dimension};

use super::json::Json;
use super::schema::pointer;

/// Adds the faults of `structure.given`, `readings`, `fit`, `window`, `pair` and `level`.
pub fn check(json: &Json, faults: &mut Vec<Problem>) {
    if let Some(Json::Object(given)) = json.get("structure").and_then(|s| s.get("given")) {
        for (name, value) in given {
            let path = pointer("/structure/given", name);
            match dimension_of(name) {
                Err(problem) => faults.push(problem.in_utf16(name).at(path)),
                Ok(dimension) => typed(Some(value), dimension, &path, faults),
            }
        }
    }
    if let Some(Json::List(names)) = json.get("fit").and_then(|fit| fit.get("free")) {
        for (index, name) in names.iter().enumerate() {
            let Some(name) = name.as_text() else { continue };
            if let Err(problem) = dimension_of(name) {
                faults.push(problem.in_utf16(name).at(format!("/fit/free/{index}")));
            }
        }
    }
    if let Some(Json::List(readings)) = json.get("readings") {
        for (index, reading) in readings.iter().enumerate() {
            check_reading(reading, &format!("/readings/{index}"), faults);
        }
    }
    for key in ["window", "pair"] {
        if let Some(Json::List(ends)) = json.get(key)
            && ends.len() != 2
        {
            faults.push(
                Problem::new(
                    "two-values-needed",
                    format!("\"{key}\" has {} of 2 values.", ends.len()),
                    0,
                    0,
                )
                .bound("It takes two wavelengths.")
                .at(format!("/{key}")),
            );
        }
    }
    if let Some(level) = json.get("level") {
        typed(level.get("g"), Dimension::Number, "/level/g", faults);
        typed(level.get("g_I"), Dimension::Number, "/level/g_I", faults);
        not_negative(level.get("J"), "/level/J", faults);
        not_negative(level.get("I"), "/level/I", faults);
    }
    not_negative(
        json.get("nucleus").and_then(|n| n.get("spin")),
        "/nucleus/spin",
        faults,
    );
}

fn check_reading(reading: &Json, path: &str, faults: &mut Vec<Problem>) {
    let Json::Object(_) = reading else { return };
    let kind = reading.get("kind").and_then(Json::as_text);
    let dimension = match kind {
        Some("line") => Dimension::Wavelength,
        Some("level" | "interval" | "offset" | "peak") => Dimension::Wavenumber,
        Some("intensity" | "pixel") => Dimension::Number,
        // Another word is a fault already.
        Some(_) => return,
        None => {
            faults.push(
                Problem::new("reading-without-kind", "This reading has no kind.", 0, 0)
                    .bound("One of: line, level, interval, offset, intensity, peak, pixel.")
                    .at(path),
            );
            return;
        }
    };
    if reading.get("value").is_none() {
        faults.push(
            Problem::new("reading-without-value", "This reading has no value.", 0, 0)
                .bound(format!("It takes {}.", dimension.name()))
                .at(path),
        );
    }
    for key in ["value", "u"] {
        typed(
            reading.get(key),
            dimension,
            &format!("{path}/{key}"),
            faults,
        );
    }
}

fn typed(value: Option<&Json>, dimension: Dimension, path: &str, faults: &mut Vec<Problem>) {
    if let Some(text) = value.and_then(Json::as_text)
        && let Err(problem) = quantity::quantity(text, dimension)
    {
        faults.push(problem.in_utf16(text).at(path));
    }
}

fn not_negative(value: Option<&Json>, path: &str, faults: &mut Vec<Problem>) {
    if let Some(text) = value.and_then(Json::as_text)
        && let Ok(j) = quantity::half_integer(text)
        && j.doubled() < 0
    {
        faults.push(
            Problem::new(
                "angular-momentum-negative",
                format!("{text} is negative."),
                0,
                text.len(),
            )
            .bound("0, 1/2, 1, 3/2 and so on.")
            .in_utf16(text)
            .at(path),
        );
    }
}

/// What a parameter of this name measures.
///
/// # Errors
/// `parameter-unknown`, with the bytes of `name`; faults of the orbitals or the configuration in it.
fn dimension_of(name: &str) -> Result<Dimension, Problem> {
    let unknown = |why: &str| {
        Problem::new("parameter-unknown", format!("\"{name}\" is no parameter: {why}."), 0, name.len()).bound(
            "Names like F2(3d,3d), G1(3d,4p), R1(3d,4p,4s,4p), zeta(3d), E(3d6 4s2), r(3s,3p), r2(3d,3d), with @ and a configuration behind.",
        )
    };
    let (bare, only) = match name.split_once('@') {
        Some((bare, only)) => (bare.trim(), Some(only)),
        None => (name.trim(), None),
    };
    if let Some(only) = only {
        configuration::parse(only).map_err(|_| unknown("a configuration must follow @"))?;
    }
    let inside = bare
        .split_once('(')
        .and_then(|(kind, rest)| Some((kind.trim(), rest.strip_suffix(')')?)));
    let Some((kind, inside)) = inside else {
        return Err(unknown("it needs its shells in brackets"));
    };
    if kind == "E" {
        configuration::parse(inside).map_err(|_| unknown("E takes a configuration"))?;
        return Ok(Dimension::Wavenumber);
    }
    let rank = kind.get(1..).unwrap_or_default();
    let is_rank = !rank.is_empty() && rank.len() < 3 && rank.bytes().all(|b| b.is_ascii_digit());
    let (wanted, dimension) = match kind.chars().next() {
        _ if kind == "zeta" => (1, Dimension::Wavenumber),
        _ if kind == "r" => (2, Dimension::RadialIntegral),
        _ if kind == "r2" => (2, Dimension::RadialIntegralSquared),
        Some('F' | 'G') if is_rank => (2, Dimension::Wavenumber),
        Some('R') if is_rank => (4, Dimension::Wavenumber),
        _ => return Err(unknown("its letter is not known")),
    };
    let orbitals: Vec<&str> = inside.split(',').map(str::trim).collect();
    let is_orbital = |text: &&str| {
        configuration::parse(text)
            .is_ok_and(|written| written.subshells.len() == 1 && written.core.is_none())
    };
    if orbitals.len() != wanted || !orbitals.iter().all(is_orbital) {
        return Err(unknown(&format!("it takes {wanted} shells such as 3d")));
    }
    Ok(dimension)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn names_of_parameters_are_read() {
        for (name, dimension) in [
            ("F2(3d,3d)", Dimension::Wavenumber),
            ("G1( 3d, 4p )", Dimension::Wavenumber),
            ("R1(3d,4p,4s,4p)", Dimension::Wavenumber),
            ("zeta(3p) @ 3p2", Dimension::Wavenumber),
            ("E(3d6 4s2)", Dimension::Wavenumber),
            ("r(3s,3p)", Dimension::RadialIntegral),
            ("r2(3d,3d)", Dimension::RadialIntegralSquared),
        ] {
            assert_eq!(dimension_of(name).unwrap(), dimension, "{name}");
        }
        for name in [
            "nonsense!!",
            "F(3d,3d)",
            "zeta(9z)",
            "zeta(3p,3p)",
            "F2(3d",
            "zeta(3p) @",
            "",
        ] {
            assert_eq!(
                dimension_of(name).unwrap_err().code,
                "parameter-unknown",
                "{name}"
            );
        }
    }

    #[test]
    fn keys_of_later_questions_are_checked() {
        let json = super::super::json::read(
            r#"{"rungline":1,"structure":{"given":{"zeta(3p)":"abc"}},"readings":[{},{"kind":"line","value":"xyz"}],
                "fit":{"free":["blah"]},"window":["588 nm"],"level":{"g":"abc","J":"-1/2"},"nucleus":{"spin":"-1/2"}}"#,
        )
        .unwrap();
        let mut faults = Vec::new();
        check(&json, &mut faults);
        let paths: Vec<&str> = faults.iter().map(|f| f.path.as_str()).collect();
        assert_eq!(
            paths,
            [
                "/structure/given/zeta(3p)",
                "/fit/free/0",
                "/readings/0",
                "/readings/1/value",
                "/window",
                "/level/g",
                "/level/J",
                "/nucleus/spin"
            ]
        );
    }
}
