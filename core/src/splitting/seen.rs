//! What is seen of a component: by the angle between field and line of sight, and through a polariser.
//!
//! A photon of multipole rank k whose angular momentum along the field is q leaves at the angle θ from the
//! field with helicity h = ±1 in proportion to [dᵏ_qh(θ)]². Its electric field has the components (d_q1 − d_q,−1)/√2 along
//! the projected field direction and i(d_q1 + d_q,−1)/√2 across it for electric multipoles, the other way
//! round for magnetic ones. All weights have the mean 1 over all directions, both helicities together.
//!
//! q = M_upper − M_lower in emission. Light of helicity +1 turns anticlockwise for an eye that it reaches:
//! left circular in the convention of optics (Jackson, *Classical Electrodynamics*, § 7.2; Born & Wolf,
//! *Principles of Optics*, § 1.4.2), right circular in some engineering texts.
//!
//! Source: Jackson, § 9.7 and table 9.1; Edmonds, *Angular Momentum in Quantum Mechanics* (1957), table 1
//! for dᵏ.

use crate::radiation::Multipole;

/// What stands before the detector; all of them without loss.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub enum Polariser {
    /// Nothing.
    #[default]
    None,
    /// Passes helicity +1.
    LeftCircular,
    /// Passes helicity −1.
    RightCircular,
    /// Passes the electric field at this angle from the projected magnetic field, degrees.
    Linear(f64),
}

/// The intensity of a component with q = M_upper − M_lower at the angle θ between field and line of
/// sight, in degrees; formula of the module's head.
pub fn weight(multipole: Multipole, q: i32, angle_degrees: f64, polariser: Polariser) -> f64 {
    let (s, c) = sine_and_cosine(angle_degrees);
    // dᵏ_q,+1 and dᵏ_q,−1.
    let (plus, minus) = match (multipole.rank(), q) {
        (1, 0) => (
            s / core::f64::consts::SQRT_2,
            -s / core::f64::consts::SQRT_2,
        ),
        (1, 1) => (0.5 * (1.0 + c), 0.5 * (1.0 - c)),
        (1, -1) => (0.5 * (1.0 - c), 0.5 * (1.0 + c)),
        (2, 0) => {
            let d = 1.5_f64.sqrt() * s * c;
            (d, -d)
        }
        (2, 1) => (
            0.5 * (1.0 + c) * (2.0 * c - 1.0),
            0.5 * (1.0 - c) * (2.0 * c + 1.0),
        ),
        (2, -1) => (
            0.5 * (1.0 - c) * (2.0 * c + 1.0),
            0.5 * (1.0 + c) * (2.0 * c - 1.0),
        ),
        (2, 2) => (-0.5 * s * (1.0 + c), -0.5 * s * (1.0 - c)),
        (2, -2) => (0.5 * s * (1.0 - c), 0.5 * s * (1.0 + c)),
        _ => (0.0, 0.0),
    };
    let passed = match polariser {
        Polariser::None => plus * plus + minus * minus,
        Polariser::LeftCircular => plus * plus,
        Polariser::RightCircular => minus * minus,
        Polariser::Linear(angle) => {
            let (sine, cosine) = sine_and_cosine(angle);
            let (mut along, mut across) = (plus - minus, plus + minus);
            if multipole == Multipole::M1 {
                (along, across) = (across, along);
            }
            0.5 * (along * along * cosine * cosine + across * across * sine * sine)
        }
    };
    0.5 * f64::from(2 * multipole.rank() + 1) * passed
}

/// sin and cos of an angle in degrees, exact at multiples of 90°; an angle that is no number counts as 90°.
fn sine_and_cosine(degrees: f64) -> (f64, f64) {
    if !degrees.is_finite() {
        return (1.0, 0.0);
    }
    let folded = degrees % 360.0;
    let turned = if folded < 0.0 { folded + 360.0 } else { folded };
    match turned {
        0.0 => (0.0, 1.0),
        90.0 => (1.0, 0.0),
        180.0 => (0.0, -1.0),
        270.0 => (-1.0, 0.0),
        other => {
            let angle = other * (core::f64::consts::PI / 180.0);
            (libm::sin(angle), libm::cos(angle))
        }
    }
}

/// Landé factor of a line's centre of gravity: the mean offset of its σ⁺ components, weighted with their
/// strengths, in units of μ_B B,
///
/// g = ½(g₁ + g₂) + ¼(g₁ − g₂)[J₁(J₁+1) − J₂(J₂+1)],
///
/// for electric and magnetic dipole lines in a weak field; 1 and 2 may change places.
///
/// Source: Shenstone & Blair, Phil. Mag. 8, 765 (1929).
pub fn effective_g(j: f64, g: f64, other_j: f64, other_g: f64) -> f64 {
    0.5 * (g + other_g) + 0.25 * (g - other_g) * (j * (j + 1.0) - other_j * (other_j + 1.0))
}

#[cfg(test)]
mod tests {
    use super::*;

    const ALL: [Multipole; 3] = [Multipole::E1, Multipole::M1, Multipole::E2];

    #[test]
    fn weights_have_the_mean_one() {
        // Gauss–Legendre would do; Simpson over cos θ is exact enough for polynomials of degree 4.
        for multipole in ALL {
            let rank = i32::try_from(multipole.rank()).unwrap();
            for q in -rank..=rank {
                for (polariser, mean) in [
                    (Polariser::None, 1.0),
                    (Polariser::LeftCircular, 0.5),
                    (Polariser::RightCircular, 0.5),
                ] {
                    let steps = 2000;
                    let mut sum = 0.0;
                    for step in 0..=steps {
                        let c = -1.0 + 2.0 * f64::from(step) / f64::from(steps);
                        let factor = match step {
                            0 => 1.0,
                            s if s == steps => 1.0,
                            s if s % 2 == 1 => 4.0,
                            _ => 2.0,
                        };
                        let angle = libm::acos(c) * 180.0 / core::f64::consts::PI;
                        sum += factor * weight(multipole, q, angle, polariser);
                    }
                    let found = sum / (3.0 * f64::from(steps));
                    assert!((found - mean).abs() < 1e-9, "{multipole} {q}: {found}");
                }
            }
        }
    }

    #[test]
    fn two_crossed_polarisers_share_all_light() {
        for multipole in ALL {
            let rank = i32::try_from(multipole.rank()).unwrap();
            for q in -rank..=rank {
                for angle in [0.0, 17.0, 45.0, 90.0, 133.0, 180.0, -60.0] {
                    let of = |polariser| weight(multipole, q, angle, polariser);
                    let all = of(Polariser::None);
                    for tilt in [0.0, 12.0, 45.0, 90.0] {
                        let crossed =
                            of(Polariser::Linear(tilt)) + of(Polariser::Linear(tilt + 90.0));
                        assert!((crossed - all).abs() < 1e-14);
                    }
                    let circular = of(Polariser::LeftCircular) + of(Polariser::RightCircular);
                    assert!((circular - all).abs() < 1e-14);
                }
            }
        }
    }

    #[test]
    fn along_the_field_circles_and_across_it_lines() {
        let e1 = |q, angle, polariser| weight(Multipole::E1, q, angle, polariser);
        // Along the field: σ+ has positive helicity; against it, the other one.
        assert_eq!(e1(1, 0.0, Polariser::LeftCircular), 1.5);
        assert_eq!(e1(-1, 0.0, Polariser::LeftCircular), 0.0);
        assert_eq!(e1(1, 180.0, Polariser::LeftCircular), 0.0);
        assert_eq!(e1(0, 0.0, Polariser::None), 0.0);
        // Across: π along the field, σ across it; the other way round for magnetic dipoles.
        assert_eq!(e1(0, 90.0, Polariser::Linear(90.0)), 0.0);
        assert!((e1(0, 90.0, Polariser::Linear(0.0)) - 1.5).abs() < 1e-15);
        assert_eq!(e1(1, 90.0, Polariser::Linear(0.0)), 0.0);
        assert_eq!(weight(Multipole::M1, 0, 90.0, Polariser::Linear(0.0)), 0.0);
    }

    #[test]
    fn without_a_polariser_the_closed_forms_hold() {
        // From the squares of d-functions by hand (Edmonds (1957), table 2 and eq. 4.1.15):
        // (3/2) sin², (3/4)(1 + cos²); (15/2) sin² cos², (5/4)(1 − 3cos² + 4cos⁴), (5/4)(1 − cos⁴).
        for angle in [0.0, 10.0, 33.0, 60.0, 90.0, 120.0] {
            let (s, c) = sine_and_cosine(angle);
            let c2 = c * c;
            for (multipole, q, expected) in [
                (Multipole::E1, 0, 1.5 * s * s),
                (Multipole::E1, 1, 0.75 * (1.0 + c2)),
                (Multipole::E2, 0, 7.5 * s * s * c2),
                (Multipole::E2, -1, 1.25 * (1.0 - 3.0 * c2 + 4.0 * c2 * c2)),
                (Multipole::E2, 2, 1.25 * (1.0 - c2 * c2)),
            ] {
                let found = weight(multipole, q, angle, Polariser::None);
                assert!((found - expected).abs() < 1e-14, "{multipole} {q} {angle}");
            }
        }
    }
}
