//! Where something changes its sign between two fields.

use std::ops::Range;

/// Fields this close, as a share of the field, are one.
const CLOSE: f64 = 1e-13;

/// Where a list of values changes its sign: the fields around each change, and whether the value rises there.
///
/// Values within a tolerance of zero, the first without a field and the second in one, have no sign: a
/// change is looked for between the last that had one and the next. What coincides without a field does
/// not change there.
pub fn changes(
    tesla: &[f64],
    values: &[f64],
    (at_rest, in_field): (f64, f64),
    found: &mut Vec<(Range<f64>, bool)>,
) {
    found.clear();
    let mut last: Option<(f64, bool)> = None;
    for (&field, &value) in tesla.iter().zip(values) {
        let tolerance = if field == 0.0 { at_rest } else { in_field };
        if value.abs() <= tolerance {
            continue;
        }
        let positive = value > 0.0;
        if let Some((before, sign)) = last
            && sign != positive
        {
            found.push((before..field, positive));
        }
        last = Some((field, positive));
    }
}

/// The field within a range where a value that has opposite signs at its ends is zero, to a part in 10¹²:
/// false position after Illinois (Dowell & Jarratt, BIT 11, 168 (1971)) with a bisection every third step.
/// Nothing where both ends have one sign or the value cannot be had.
pub fn root(range: &Range<f64>, mut value: impl FnMut(f64) -> Option<f64>) -> Option<f64> {
    let (mut low, mut high) = (range.start, range.end);
    let (mut at_low, mut at_high) = (value(low)?, value(high)?);
    if at_low == 0.0 {
        return Some(low);
    }
    if at_high == 0.0 {
        return Some(high);
    }
    if (at_low > 0.0) == (at_high > 0.0) {
        return None;
    }
    for step in 0..200 {
        if high - low <= CLOSE * high {
            break;
        }
        let mut middle = low - at_low * (high - low) / (at_high - at_low);
        if step % 3 == 2 || !(low < middle && middle < high) {
            middle = 0.5 * (low + high);
        }
        let found = value(middle)?;
        if found == 0.0 {
            return Some(middle);
        }
        if (found > 0.0) == (at_high > 0.0) {
            (high, at_high) = (middle, found);
            at_low *= 0.5;
        } else {
            (low, at_low) = (middle, found);
            at_high *= 0.5;
        }
    }
    // The end whose own value is nearer to zero would need one more call; they are the same field.
    Some(0.5 * (low + high))
}

/// Where a cubic with these values and slopes at both ends of a range has an extremum beyond zero, though
/// both values have one sign: two changes that a list of values hides.
pub fn hidden(range: &Range<f64>, values: (f64, f64), slopes: (f64, f64)) -> Option<f64> {
    let width = range.end - range.start;
    let (v, w) = values;
    let (s, t) = (slopes.0 * width, slopes.1 * width);
    // Towards zero at the start and away from it at the end.
    if v * w <= 0.0 || v * s >= 0.0 || v * t <= 0.0 {
        return None;
    }
    // v + s x + c x² + d x³.
    let c = 3.0 * (w - v) - 2.0 * s - t;
    let d = 2.0 * (v - w) + s + t;
    let root = (c * c - 3.0 * d * s).max(0.0).sqrt();
    let candidates = [
        (root - c) / (3.0 * d),
        (-root - c) / (3.0 * d),
        -s / (2.0 * c),
    ];
    let beyond = |x: &f64| {
        let value = v + x * (s + x * (c + x * d));
        (0.0..1.0).contains(x) && value * v <= 0.0
    };
    let x = candidates.into_iter().find(beyond)?;
    Some(range.start + x * width)
}

/// Where a parabola through three neighbours of one sign, the middle one nearest to zero, comes near zero or
/// beyond it: two changes that a list of values may hide. The fields around it, and where.
pub fn dips(tesla: &[f64], values: &[f64], found: &mut Vec<(Range<f64>, f64)>) {
    found.clear();
    for (fields, three) in tesla.windows(3).zip(values.windows(3)) {
        let (&[a, b, c], &[u, v, w]) = (fields, three) else {
            continue;
        };
        if u * v <= 0.0 || v * w <= 0.0 || v.abs() >= u.abs() || v.abs() >= w.abs() {
            continue;
        }
        // Newton's divided differences.
        let (first, second) = ((v - u) / (b - a), (w - v) / (c - b));
        let bent = (second - first) / (c - a);
        let middle = 0.5 * (a + b - first / bent);
        let value = u + (middle - a) * (first + bent * (middle - b));
        if a < middle && middle < c && value / v < 0.5 {
            found.push((a..c, middle));
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn roots_are_found_to_their_last_digits() {
        for (power, shift) in [(1, 0.3), (3, 0.7), (5, 0.123), (9, 0.5)] {
            let value = |x: f64| {
                let u = x - shift;
                (0..power).fold(1.0, |p, _| p * u)
            };
            let x = root(&(0.0..1.0), |x| Some(value(x))).expect("a root");
            assert!((x - shift).abs() < 1e-12, "{power} {x}");
        }
        assert_eq!(root(&(0.0..1.0), |x| Some(x + 1.0)), None);
        assert_eq!(root(&(0.0..1.0), |_| None), None);
    }

    #[test]
    fn two_changes_within_a_step_are_seen() {
        // (x − 0.4)(x − 0.6) has 0.24 at both ends of 0…1.
        let middle = hidden(&(0.0..1.0), (0.24, 0.24), (-1.0, 1.0)).expect("an extremum");
        assert!((middle - 0.5).abs() < 1e-12);
        assert_eq!(hidden(&(0.0..1.0), (0.26, 0.26), (-1.0, 1.0)), None);
        assert_eq!(hidden(&(0.0..1.0), (0.24, 0.24), (1.0, 1.0)), None);
    }

    #[test]
    fn a_list_of_values_dips_to_zero() {
        let tesla = [0.0, 1.0, 2.0, 3.0, 4.0];
        let values = tesla.map(|x| (x - 2.2) * (x - 2.4) + 0.01);
        let mut found = Vec::new();
        dips(&tesla, &values, &mut found);
        assert_eq!(found.len(), 1);
        assert_eq!(found[0].0, 1.0..3.0);
        assert!((found[0].1 - 2.3).abs() < 1e-12);
        dips(&tesla, &values.map(|value| value + 1.0), &mut found);
        assert_eq!(found, []);
    }

    #[test]
    fn a_value_without_a_sign_is_passed_over() {
        let mut found = Vec::new();
        let tesla = [0.0, 1.0, 2.0, 3.0, 4.0];
        changes(
            &tesla,
            &[0.0, 1.0, 0.0, -1.0, -2.0],
            (1e-9, 1e-9),
            &mut found,
        );
        assert_eq!(found, [(1.0..3.0, false)]);
        // Rounding without a field is no sign either.
        let rounding = [-1e-12, 1.0, 2.0, 3.0, 4.0];
        changes(&tesla, &rounding, (1e-11, 1e-13), &mut found);
        assert_eq!(found, []);
    }
}
