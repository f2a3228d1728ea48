//! The refractive index of air and wavelengths in media.
//!
//! `tests/vectors/air_index.csv`: ref_index 1.0 (BSD) and specutils 2.4.0 (BSD-3-Clause), for checks
//! only.

use rungline_core::problem::Problem;
use rungline_core::radiation::air::{Air, LONGEST, SHORTEST};
use rungline_core::radiation::{Medium, SpectralUnit};
use rungline_tests::{Row, relative_error, report, vector_rows};

const SOURCE: &str = "Ciddor 1996 by ref_index 1.0 (BSD), specutils 2.4.0 (BSD-3-Clause)";

fn row(quantity: &str, cases: usize, worst: f64, tolerance: f64) -> Row {
    Row {
        quantity: quantity.into(),
        cases,
        worst,
        tolerance,
        measure: "absolute".into(),
        source: SOURCE.into(),
    }
}

#[test]
fn standard_air_is_that_of_other_programs() {
    let (mut index, mut length, mut cases) = (0.0_f64, 0.0_f64, 0);
    for row in vector_rows("air_index.csv") {
        let number = |key: &str| row[key].parse::<f64>().expect("a number");
        let vacuum = number("vac_nm");
        let refractivity = Air::STANDARD.refractivity(vacuum).expect("in range");
        for key in [
            "n_minus_1_ciddor_15C_101325Pa_dry_450ppm",
            "n_minus_1_Ciddor1996",
        ] {
            index = index.max((refractivity - number(key)).abs());
        }
        let air = Medium::Air(Air::STANDARD).wavelength(vacuum);
        assert!(!air.vacuum_instead);
        length = length.max((air.nm - number("air_nm_ciddor")).abs());
        cases += 1;
    }
    report(
        "radiation-air-index",
        row("n − 1 of standard air", 2 * cases, index, 1e-13),
    );
    report(
        "radiation-air-wavelength",
        row("wavelength in standard air, nm", cases, length, 1e-9),
    );
}

#[test]
fn moist_air_is_that_of_another_program() {
    let air = Air::new(20.0, 101_325.0, 0.5, 450.0).expect("air");
    let (mut worst, mut cases) = (0.0_f64, 0);
    for row in vector_rows("air_index.csv") {
        let number = |key: &str| row[key].parse::<f64>().expect("a number");
        let refractivity = air.refractivity(number("vac_nm")).expect("in range");
        worst = worst.max((refractivity - number("n_minus_1_ciddor_20C_50pctRH")).abs());
        cases += 1;
    }
    report(
        "radiation-air-moist",
        row("n − 1 of air at 20 °C, 50 % humidity", cases, worst, 1e-10),
    );
}

#[test]
fn conditions_that_are_standard_give_standard_air() {
    let air = Air::new(15.0, 101_325.0, 0.0, 450.0).expect("air");
    for vacuum in [200.0, 589.158, 1700.0] {
        let (one, other) = (air.refractivity(vacuum), Air::STANDARD.refractivity(vacuum));
        let (one, other) = (one.expect("in range"), other.expect("in range"));
        assert!(relative_error(one, other) < 1e-15, "{vacuum}");
    }
    // No air, no refraction; colder or denser air refracts more.
    let none = Air::new(15.0, 0.0, 0.0, 450.0).expect("air");
    assert_eq!(none.refractivity(500.0), Some(0.0));
    let cold = Air::new(-30.0, 101_325.0, 0.8, 450.0).expect("air");
    assert!(cold.refractivity(500.0) > Air::STANDARD.refractivity(500.0));
}

#[test]
fn air_ends_where_it_says() {
    let medium = Medium::Air(Air::STANDARD);
    for vacuum in [SHORTEST - 1e-9, LONGEST + 1e-9, 50.0, 1e6, f64::NAN] {
        let found = medium.wavelength(vacuum);
        assert!(found.vacuum_instead && found.index == 1.0, "{vacuum}");
    }
    for vacuum in [SHORTEST, LONGEST] {
        assert!(!medium.wavelength(vacuum).vacuum_instead);
    }
}

#[test]
fn the_way_back_leads_to_the_wavelength_in_vacuum() {
    let media = [
        Medium::Vacuum,
        Medium::Air(Air::STANDARD),
        Medium::Air(Air::new(30.0, 90_000.0, 0.9, 600.0).expect("air")),
        Medium::of_index(1.76).expect("an index"),
    ];
    for medium in media {
        for vacuum in [50.0, 199.0, 200.0, 589.158, 1699.9, 1700.0, 1701.0, 1e5] {
            let back = medium.vacuum(medium.wavelength(vacuum).nm);
            assert!(
                relative_error(back, vacuum) < 1e-15,
                "{medium:?} {vacuum}: {back}"
            );
        }
    }
}

#[test]
fn impossible_media_are_refused() {
    let code = |air: Result<Air, Problem>| air.expect_err("refused").code;
    assert_eq!(
        code(Air::new(150.0, 1e5, 0.0, 450.0)),
        "air-temperature-out-of-range"
    );
    assert_eq!(
        code(Air::new(f64::NAN, 1e5, 0.0, 450.0)),
        "air-temperature-out-of-range"
    );
    assert_eq!(
        code(Air::new(15.0, -1.0, 0.0, 450.0)),
        "air-pressure-out-of-range"
    );
    assert_eq!(
        code(Air::new(15.0, 1e5, 50.0, 450.0)),
        "air-humidity-out-of-range"
    );
    // Boiling water at a tenth of an atmosphere.
    assert_eq!(
        code(Air::new(100.0, 1e4, 1.0, 450.0)),
        "air-humidity-out-of-range"
    );
    assert_eq!(
        code(Air::new(15.0, 0.0, 0.5, 450.0)),
        "air-humidity-out-of-range"
    );
    assert_eq!(
        code(Air::new(15.0, 1e5, 0.0, 1e6)),
        "air-carbon-dioxide-out-of-range"
    );
    for index in [0.9, f64::NAN, f64::INFINITY] {
        let problem = Medium::of_index(index).expect_err("refused");
        assert_eq!(problem.code, "refractive-index-out-of-range");
    }
}

#[test]
fn units_of_the_spectrum_agree() {
    // The sodium line at 589.1583 nm in vacuum; the other figures by the exact constants of the SI.
    let wavenumber = SpectralUnit::Nanometre
        .to_wavenumber(589.1583)
        .expect("a line");
    let expected = [589.1583, 5891.583, 16_973.366_9, 2.104_429_37, 508.848_7];
    for (unit, value) in SpectralUnit::ALL.into_iter().zip(expected) {
        let found = unit.of_wavenumber(wavenumber).expect("a line");
        assert!(relative_error(found, value) < 1e-7, "{unit:?} {found}");
        let back = unit.to_wavenumber(found).expect("a line");
        assert!(relative_error(back, wavenumber) < 1e-15);
        assert_eq!(unit.of_wavenumber(0.0), None);
        assert_eq!(unit.to_wavenumber(-1.0), None);
        assert_eq!(unit.to_wavenumber(f64::NAN), None);
    }
}
