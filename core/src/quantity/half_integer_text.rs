//! The reading of angular momenta.

use super::TwiceJ;
use super::number::{leading, sized};
use super::signs::clipped;
use crate::problem::Problem;

/// The largest angular momentum that is taken as typed.
pub const MAX_ANGULAR_MOMENTUM: i32 = 500;

/// Reads an integer or half-integer: `7/2`, `3.5`, `3,5`, `-3/2`, `2`.
///
/// Faults: not a number, not a multiple of 1/2, beyond ±500.
pub fn half_integer(text: &str) -> Result<TwiceJ, Problem> {
    if let Some(problem) = sized(text, "angular momentum") {
        return Err(problem.way("Use 1/2", "1/2").way("Use 1", "1"));
    }
    let (start, end) = (text.len() - text.trim_start().len(), text.trim_end().len());
    let number = leading(text)?;
    let rest = text.get(number.end..).unwrap_or("").trim();
    let doubled = match rest.strip_prefix('/') {
        _ if number.uncertainty.is_some() => f64::NAN,
        None if rest.is_empty() => number.value * 2.0,
        Some(below) if below.trim() == "2" => number.value,
        Some(below) if below.trim() == "1" => number.value * 2.0,
        _ => f64::NAN,
    };
    let limit = 2.0 * f64::from(MAX_ANGULAR_MOMENTUM);
    // sign and wholeness are exact for doubles of this size
    if doubled.is_finite() && doubled.abs() <= limit && doubled.trunc() == doubled {
        #[expect(
            clippy::cast_possible_truncation,
            reason = "a whole number within ±1000"
        )]
        return Ok(TwiceJ::from_doubled(doubled as i32));
    }
    let shown = clipped(text.trim());
    if doubled.is_finite() && doubled.abs() > limit {
        return Err(Problem::new(
            "angular-momentum-out-of-range",
            format!("{shown} is too large for an angular momentum."),
            start,
            end,
        )
        .bound(format!(
            "Angular momenta are taken from −{MAX_ANGULAR_MOMENTUM} to {MAX_ANGULAR_MOMENTUM}."
        ))
        .way("Use 1/2", "1/2"));
    }
    let mut problem = Problem::new(
        "not-half-integer",
        format!("{shown} is neither a whole number nor half of one."),
        start,
        end,
    )
    .bound("Angular momenta are multiples of 1/2, such as 2 or 7/2.");
    let meant = match rest
        .strip_prefix('/')
        .and_then(|below| below.trim().parse::<u16>().ok())
    {
        Some(below) if below > 0 => number.value / f64::from(below),
        _ => number.value,
    };
    for doubled in [(meant * 2.0).floor(), (meant * 2.0).ceil()] {
        if doubled.abs() <= limit {
            #[expect(
                clippy::cast_possible_truncation,
                reason = "a whole number within ±1000"
            )]
            let near = TwiceJ::from_doubled(doubled as i32);
            if !problem
                .ways
                .iter()
                .any(|way| way.replacement == near.to_string())
            {
                problem = problem.way(format!("Use {near}"), near.to_string());
            }
        }
    }
    Err(if problem.ways.is_empty() {
        problem.way("Use 1/2", "1/2")
    } else {
        problem
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn half_integers_are_exact() {
        for (text, doubled) in [
            ("7/2", 7),
            ("3.5", 7),
            ("3,5", 7),
            ("−3/2", -3),
            ("2", 4),
            (" 0 ", 0),
            ("7 / 2", 7),
            ("500", 1000),
        ] {
            assert_eq!(
                half_integer(text).map(TwiceJ::doubled),
                Ok(doubled),
                "{text}"
            );
        }
        for (text, code, way) in [
            ("7/4", "not-half-integer", "3/2"),
            ("3.4", "not-half-integer", "3"),
            ("1/2/2", "not-half-integer", "1"),
            ("501", "angular-momentum-out-of-range", "1/2"),
            ("1e300", "angular-momentum-out-of-range", "1/2"),
            ("x", "number-missing", "1"),
            ("", "value-empty", "1/2"),
        ] {
            let problem = half_integer(text).unwrap_err();
            assert_eq!(problem.code, code, "{text}");
            assert_eq!(
                problem.ways.first().map(|w| w.replacement.as_str()),
                Some(way),
                "{text}"
            );
        }
    }
}
