//! Quantities as people type them: a number and a unit.

pub use super::half_integer_text::half_integer;
pub use super::number::number;
use super::number::{leading, sized, with};
use super::signs::{clipped, typeset};
use super::unit::{Dimension, Unit, normalised};
use super::whole_ways::{keep_unit, usual_values};
use crate::problem::Problem;

/// A typed quantity.
#[derive(Clone, Debug, PartialEq)]
pub struct Quantity {
    /// In the dimension's own unit, [`Dimension::own_unit`].
    pub value: f64,
    /// The number as typed, in [`Quantity::unit`].
    pub typed: f64,
    /// The unit in its usual spelling; empty for a pure number.
    pub unit: &'static str,
    /// What it measures.
    pub dimension: Dimension,
    /// Standard uncertainty in the own unit, from `589.592(2) nm`.
    pub uncertainty: Option<f64>,
    /// The text as typed, without spaces around it.
    pub text: String,
}

/// Reads a quantity: `589.592 nm`, `0,5 T`, `1e15 m-2`, `0.95 a0^3`, `2298.1579425 MHz`.
///
/// A comma is the decimal mark and spaces group digits. Faults, with bytes of `text`: empty, longer
/// than 200 characters, not a number, no unit, an unknown unit, a unit of another quantity, outside
/// [`Dimension::bounds`].
pub fn quantity(text: &str, dimension: Dimension) -> Result<Quantity, Problem> {
    if let Some(problem) = sized(text, dimension.name()) {
        return Err(usual_values(problem, dimension));
    }
    let number = leading(text).map_err(|problem| keep_unit(problem, text, dimension))?;
    let rest = text.get(number.end..).unwrap_or("");
    let spelling = rest.trim();
    let end = text.trim_end().len();
    let start = end - spelling.len();
    let digits = text.get(number.start..number.end).unwrap_or("").trim();
    let unit = match (dimension.units().is_empty(), spelling.is_empty()) {
        (true, true) => None,
        (false, true) => return Err(unit_missing(dimension, digits, number.start, end)),
        (true, false) => return Err(unit_not_wanted(dimension, spelling, digits, start, end)),
        (false, false) => match dimension.unit(spelling) {
            Some(unit) => Some(unit),
            None => {
                return Err(unit_wrong(
                    dimension,
                    spelling,
                    digits,
                    number.value,
                    start,
                    end,
                ));
            }
        },
    };
    let value = unit.map_or(number.value, |unit| unit.to_own(number.value));
    within(dimension, value, unit, text, number.start, end)?;
    Ok(Quantity {
        value,
        typed: number.value,
        unit: unit.map_or("", |unit| unit.symbol),
        dimension,
        uncertainty: number
            .uncertainty
            .map(|u| unit.map_or(u, |unit| unit.difference_to_own(u))),
        text: text.trim().to_string(),
    })
}

fn usual_units(dimension: Dimension) -> String {
    let symbols: Vec<&str> = dimension
        .units()
        .iter()
        .take(5)
        .map(|unit| unit.symbol)
        .collect();
    format!("Units of {}: {}.", dimension.name(), symbols.join(", "))
}

fn with_units(mut problem: Problem, dimension: Dimension, digits: &str) -> Problem {
    for unit in dimension.units().iter().take(3) {
        let whole = format!("{digits} {}", unit.symbol);
        if !problem.ways.iter().any(|way| way.replacement == whole) {
            problem = problem.way(format!("Use {}", clipped(&whole)), whole);
        }
    }
    problem
}

fn unit_missing(dimension: Dimension, digits: &str, start: usize, end: usize) -> Problem {
    let problem = Problem::new(
        "unit-missing",
        format!("{} needs a unit of {}.", clipped(digits), dimension.name()),
        start,
        end,
    )
    .bound(usual_units(dimension));
    with_units(problem, dimension, digits)
}

fn unit_not_wanted(
    dimension: Dimension,
    spelling: &str,
    digits: &str,
    start: usize,
    end: usize,
) -> Problem {
    Problem::new(
        "unit-not-wanted",
        format!(
            "{} has no unit, so “{}” cannot stand here.",
            capitalised(&with_article(dimension)),
            clipped(spelling)
        ),
        start,
        end,
    )
    .bound("A pure number without a unit stands here.")
    .way(format!("Use {}", clipped(digits)), digits)
}

fn unit_wrong(
    dimension: Dimension,
    spelling: &str,
    digits: &str,
    typed: f64,
    start: usize,
    end: usize,
) -> Problem {
    let name = clipped(spelling);
    // A slip in the case of letters comes first: `ghz`.
    // Only Å has a case of its own beyond ASCII; the tables for all scripts would be shipped.
    let lowered = |spelling: &str| normalised(spelling).to_ascii_lowercase().replace('Å', "å");
    let lower = lowered(spelling);
    let slip = dimension
        .units()
        .iter()
        .find(|unit| lowered(unit.symbol) == lower);
    let other = Dimension::ALL
        .iter()
        .find_map(|&other| Some((other, other.unit(spelling)?)));
    let mut problem = match (slip, other) {
        (None, Some((other, unit))) => {
            let problem = Problem::new(
                "unit-of-another-quantity",
                format!(
                    "{name} is a unit of {}, not of {}.",
                    called(other, unit),
                    dimension.name()
                ),
                start,
                end,
            );
            match converted(dimension, other, unit, typed) {
                Some((label, text)) => problem.way(label, text),
                None => problem,
            }
        }
        _ => Problem::new(
            "unit-unknown",
            format!("“{name}” is no unit of {}.", dimension.name()),
            start,
            end,
        ),
    };
    problem = problem.bound(usual_units(dimension));
    if let Some(unit) = slip {
        let whole = format!("{digits} {}", unit.symbol);
        problem = problem.way(format!("Use {}", clipped(&whole)), whole);
    }
    with_units(problem, dimension, digits)
}

/// What a unit of another quantity measures: energies are also typed as frequency or wavenumber.
fn called(dimension: Dimension, unit: Unit) -> &'static str {
    let spectral = unit.symbol.contains("Hz") || unit.symbol.ends_with("m-1");
    match dimension {
        Dimension::Wavenumber if spectral => "a frequency or wavenumber",
        other => other.name(),
    }
}

/// The vacuum wavelength of a wavenumber and the other way round: σ(cm⁻¹) = 10⁷/λ(nm).
fn converted(
    wanted: Dimension,
    given: Dimension,
    unit: Unit,
    typed: f64,
) -> Option<(String, String)> {
    let spectroscopic = |d: Dimension| matches!(d, Dimension::Wavelength | Dimension::Wavenumber);
    let own = unit.to_own(typed);
    if !spectroscopic(wanted) || !spectroscopic(given) || wanted == given || own <= 0.0 {
        return None;
    }
    let value = 1e7 / own;
    let (lowest, highest) = wanted.bounds();
    let text = format!("{} {}", shortened(value), wanted.own_unit());
    (value.is_finite() && (lowest..=highest).contains(&value))
        .then(|| (format!("Use {text} (in vacuum)"), text))
}

/// `a wavelength`, `an angle`.
fn with_article(dimension: Dimension) -> String {
    let name = dimension.name();
    let article = if name.starts_with(['a', 'e', 'i', 'o', 'u']) {
        "an"
    } else {
        "a"
    };
    format!("{article} {name}")
}

fn capitalised(words: &str) -> String {
    let mut letters = words.chars();
    letters
        .next()
        .map(|c| c.to_ascii_uppercase())
        .into_iter()
        .chain(letters)
        .collect()
}

/// Nine significant digits, no trailing zeros.
fn shortened(value: f64) -> String {
    let rounded = format!("{value:.8e}").parse::<f64>().unwrap_or(value);
    plain(rounded)
}

/// A number in words of a message: plain within reason, else with an exponent.
fn plain(value: f64) -> String {
    let size = value.abs();
    if size == 0.0 || (1e-4..1e7).contains(&size) {
        value.to_string()
    } else {
        format!("{value:e}")
    }
}

pub(super) fn bound_text(dimension: Dimension) -> String {
    let (lowest, highest) = dimension.bounds();
    let unit = dimension.own_unit();
    let gap = if unit.is_empty() { "" } else { " " };
    format!(
        "{} is taken from {} to {}{gap}{unit}.",
        capitalised(&with_article(dimension)),
        typeset(lowest),
        typeset(highest)
    )
}

fn within(
    dimension: Dimension,
    value: f64,
    unit: Option<Unit>,
    text: &str,
    start: usize,
    end: usize,
) -> Result<(), Problem> {
    let (lowest, highest) = dimension.bounds();
    if (lowest..=highest).contains(&value) {
        return Ok(());
    }
    let typed = clipped(text.trim());
    let own = dimension.own_unit();
    let low = value < lowest;
    let edge = plain(if low { lowest } else { highest });
    let nearest = if own.is_empty() {
        edge
    } else {
        format!("{edge} {own}")
    };
    let in_own = unit
        .filter(|unit| unit.symbol != own)
        .map_or(String::new(), |_| format!(" ({} {own})", shortened(value)));
    let size = if low { "small" } else { "large" };
    let mut problem = Problem::new(
        "quantity-out-of-range",
        format!(
            "{typed}{in_own} is too {size} for {}.",
            with_article(dimension)
        ),
        start,
        end,
    )
    .bound(bound_text(dimension));
    // A core without polarisability or size is no core: zero would only lead to the next fault.
    let no_way = low && matches!(dimension, Dimension::Polarisability | Dimension::Radius);
    if !no_way {
        problem = problem.way(format!("Use {nearest}"), with(text, start, end, &nearest));
    }
    Err(problem.way(
        format!("Use {}", dimension.usual()),
        with(text, start, end, dimension.usual()),
    ))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn value(text: &str, dimension: Dimension) -> f64 {
        quantity(text, dimension)
            .unwrap_or_else(|problem| panic!("{text}: {problem:?}"))
            .value
    }

    #[test]
    fn quantities_of_a_sheet_are_read() {
        assert_eq!(value("589.592 nm", Dimension::Wavelength), 589.592);
        assert_eq!(value("5895.92 Å", Dimension::Wavelength), 589.592);
        assert_eq!(value("0,5 T", Dimension::FluxDensity), 0.5);
        assert_eq!(value("500 mT", Dimension::FluxDensity), 0.5);
        assert_eq!(value("5 kG", Dimension::FluxDensity), 0.5);
        assert_eq!(value("16956.17 cm-1", Dimension::Wavenumber), 16956.17);
        assert_eq!(value("16956.17 cm⁻¹", Dimension::Wavenumber), 16956.17);
        assert_eq!(value("16956.17 1/cm", Dimension::Wavenumber), 16956.17);
        assert_eq!(value("0.95 a0^3", Dimension::Polarisability), 0.95);
        assert_eq!(value("1.2 a₀", Dimension::Radius), 1.2);
        assert_eq!(value("1200 K", Dimension::Temperature), 1200.0);
        assert_eq!(value("926.85 °C", Dimension::Temperature), 1200.0);
        assert_eq!(value("0.1 GHz", Dimension::Frequency), 100.0);
        assert_eq!(value("1e15 m-2", Dimension::ColumnDensity), 1e15);
        assert_eq!(
            value("2298.1579425 MHz", Dimension::Frequency),
            2298.1579425
        );
        assert_eq!(value("50000", Dimension::ResolvingPower), 50000.0);
        assert_eq!(value("90°", Dimension::Angle), 90.0);
        assert_eq!(value("760 Torr", Dimension::Pressure), 101_325.0);
        assert_eq!(value("1 atm", Dimension::Pressure), 101_325.0);
        let line = quantity("589.592(2) nm", Dimension::Wavelength).unwrap();
        assert_eq!(line.uncertainty, Some(0.002));
        assert_eq!((line.typed, line.unit), (589.592, "nm"));
    }

    #[test]
    fn faults_say_the_units_and_a_way_out() {
        for (text, dimension, code, place, way) in [
            (
                "0.5",
                Dimension::FluxDensity,
                "unit-missing",
                (0, 3),
                "0.5 T",
            ),
            (
                "0.5 nm",
                Dimension::FluxDensity,
                "unit-of-another-quantity",
                (4, 6),
                "0.5 T",
            ),
            (
                "0.5 t",
                Dimension::FluxDensity,
                "unit-unknown",
                (4, 5),
                "0.5 T",
            ),
            (
                "🙂0.5 T",
                Dimension::FluxDensity,
                "number-missing",
                (0, 9),
                "0.5 T",
            ),
            (
                "NaN T",
                Dimension::FluxDensity,
                "number-missing",
                (0, 5),
                "1 T",
            ),
            (
                "½ T",
                Dimension::FluxDensity,
                "number-missing",
                (0, 4),
                "0.5 T",
            ),
            (
                "1e400 T",
                Dimension::FluxDensity,
                "number-out-of-range",
                (0, 5),
                "1 T",
            ),
            (
                "yellow",
                Dimension::Wavelength,
                "number-missing",
                (0, 6),
                "589.592 nm",
            ),
            (
                "0.5 🙂",
                Dimension::FluxDensity,
                "unit-unknown",
                (4, 8),
                "0.5 T",
            ),
            (
                "1,234.5 nm",
                Dimension::Wavelength,
                "decimal-mark-repeated",
                (0, 7),
                "1234.5 nm",
            ),
            (
                "20000 cm-1",
                Dimension::Wavelength,
                "unit-of-another-quantity",
                (6, 10),
                "500 nm",
            ),
            (
                "500 nm",
                Dimension::Wavenumber,
                "unit-of-another-quantity",
                (4, 6),
                "20000 cm-1",
            ),
            (
                "-5 nm",
                Dimension::Wavelength,
                "quantity-out-of-range",
                (0, 5),
                "0.001 nm",
            ),
            (
                "1e9 T",
                Dimension::FluxDensity,
                "quantity-out-of-range",
                (0, 5),
                "1000 T",
            ),
            (
                "-300 °C",
                Dimension::Temperature,
                "quantity-out-of-range",
                (0, 8),
                "1e-9 K",
            ),
            ("5 T", Dimension::Number, "unit-not-wanted", (2, 3), "5"),
        ] {
            let problem = quantity(text, dimension).unwrap_err();
            assert_eq!(
                (problem.code, problem.start, problem.end),
                (code, place.0, place.1),
                "{text}"
            );
            assert_eq!(
                problem.ways.first().map(|w| w.replacement.as_str()),
                Some(way),
                "{text}"
            );
            assert!(problem.bound.is_some(), "{text}");
        }
        assert_eq!(
            quantity(" ", Dimension::Angle).unwrap_err().code,
            "value-empty"
        );
    }
}
