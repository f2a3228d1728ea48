//! The angular part of an orbital, in section.

use serde::Serialize;

use crate::angular::spherical;

/// Degrees between two points of a section.
const STEP: u32 = 3;

#[derive(Serialize)]
struct Sections {
    l: u32,
    kind: super::rich::Kind,
    /// One for each |m|, from 0.
    sections: Vec<Section>,
}

#[derive(Serialize)]
struct Section {
    m: u32,
    /// Degrees from the axis, once around: beyond 180 lies the half plane φ = 180°.
    theta: Vec<u32>,
    /// The real spherical harmonic, with its sign.
    value: Vec<f64>,
}

/// The sections of every real spherical harmonic of ℓ, through the axis and the greatest lobe:
/// `{"l":2,"kind":"exact","sections":[{"m":0,"theta":[…],"value":[…]}]}`; an ℓ that no orbital of
/// this program has gives no sections.
pub fn sections_message(l: u32) -> String {
    let orders = if l <= spherical::MOST_L { l + 1 } else { 0 };
    let sections = (0..orders).map(|m| {
        let theta: Vec<u32> = (0..=360 / STEP).map(|i| i * STEP).collect();
        let value = theta.iter().map(|degrees| at(l, m, *degrees)).collect();
        Section { m, theta, value }
    });
    super::to_json(&Sections {
        l,
        kind: super::rich::Kind::Exact,
        sections: sections.collect(),
    })
}

fn at(l: u32, m: u32, degrees: u32) -> f64 {
    let radians = |degrees: u32| f64::from(degrees) * (core::f64::consts::PI / 180.0);
    // The harmonic changes its sign with cos mφ on the other side of the axis.
    let sign = if degrees > 180 && !m.is_multiple_of(2) {
        -1.0
    } else {
        1.0
    };
    let polar = if degrees > 180 {
        360_u32.saturating_sub(degrees)
    } else {
        degrees
    };
    let value = sign * spherical::section(l, m, radians(polar));
    // A node on the grid is a node: π is not exact, so its sine leaves a rest.
    if value.abs() < 1e-14 { 0.0 } else { value }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn sections_go_once_around_and_change_sign_with_odd_m() {
        let text = sections_message(2);
        let json: serde_json::Value = serde_json::from_str(&text).unwrap();
        assert_eq!(json["kind"], "exact");
        assert_eq!(json["sections"].as_array().unwrap().len(), 3);
        // d with |m| = 1: sin θ cos θ, a lobe up right, its negative up left.
        assert!(at(2, 1, 45) > 0.5 && at(2, 1, 315) < -0.5);
        assert_eq!(at(2, 1, 45), -at(2, 1, 315));
        assert_eq!((at(2, 1, 0), at(2, 1, 90), at(2, 1, 180)), (0.0, 0.0, 0.0));
        assert!(sections_message(99).ends_with("\"sections\":[]}"));
    }
}
