//! The constants against the published list.
//!
//! CODATA 2022 as listed by scipy.constants of SciPy 1.17.1 (BSD-3-Clause),
//! `tests/vectors/constants.json`.

use rungline_core::constants::{ALL, CODATA_YEAR};
use rungline_tests::{Row, relative_error, report, vector_json};

/// How many of our units one of the list's unit is.
fn scale(name: &str) -> f64 {
    match name {
        "Bohr magneton in inverse meter per tesla"
        | "Rydberg constant"
        | "hartree-inverse meter relationship"
        | "electron volt-inverse meter relationship"
        | "Boltzmann constant in inverse meter per kelvin" => 1e-2,
        "Bohr magneton in Hz/T" => 1e-9,
        _ => 1.0,
    }
}

#[test]
fn every_constant_is_the_published_one() {
    assert_eq!(CODATA_YEAR, 2022);
    let list = vector_json("constants.json");
    let mut worst: f64 = 0.0;
    for constant in ALL {
        let entry = &list["constants"][constant.name];
        let number = |key: &str| {
            entry[key]
                .as_str()
                .unwrap_or_else(|| panic!("{}", constant.name))
                .parse::<f64>()
                .unwrap()
        };
        let scale = scale(constant.name);
        // g_s is counted positive here.
        worst = worst.max(relative_error(
            constant.value,
            number("value").abs() * scale,
        ));
        assert!(
            relative_error(constant.uncertainty, number("uncertainty") * scale) < 1e-12,
            "{}",
            constant.name
        );
    }
    report(
        "constants",
        Row {
            quantity: "CODATA 2022 constants".into(),
            cases: ALL.len(),
            worst,
            tolerance: 2e-16,
            measure: "relative".into(),
            source: "scipy.constants of SciPy 1.17.1 (BSD-3-Clause)".into(),
        },
    );
}

#[test]
fn derived_constants_follow_from_the_others() {
    use rungline_core::constants as c;
    // μ_B/hc and μ_B/h, R∞ = E_h/2hc, k/hc: definitions.
    let hc = c::PLANCK.value * c::SPEED_OF_LIGHT.value * 100.0;
    for (value, expected, tolerance) in [
        (
            c::BOHR_MAGNETON.value / hc,
            c::BOHR_MAGNETON_WAVENUMBER.value,
            1e-10,
        ),
        (
            c::BOHR_MAGNETON.value / c::PLANCK.value / 1e9,
            c::BOHR_MAGNETON_FREQUENCY.value,
            1e-10,
        ),
        (c::HARTREE_WAVENUMBER.value / 2.0, c::RYDBERG.value, 1e-12),
        (
            c::BOLTZMANN.value / hc,
            c::BOLTZMANN_WAVENUMBER.value,
            1e-15,
        ),
        (
            c::ELEMENTARY_CHARGE.value / hc,
            c::ELECTRON_VOLT_WAVENUMBER.value,
            1e-15,
        ),
        (
            c::ELECTRON_MASS.value / c::ATOMIC_MASS.value,
            c::ELECTRON_MASS_U.value,
            1e-9,
        ),
    ] {
        assert!(
            relative_error(value, expected) < tolerance,
            "{value} {expected}"
        );
    }
}
