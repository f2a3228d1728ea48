//! Lines of one electron against published wavelengths and probabilities.

use rungline_core::configuration::Orbital;
use rungline_core::quantity::TwiceJ;
use rungline_core::radiation::air::Air;
use rungline_core::radiation::hydrogenic_lines::{binding, gross_wavenumber, strength, transition};
use rungline_core::radiation::isotope::{in_electron_masses, light_nucleus, normal_mass_shift};
use rungline_core::radiation::rates::rates;
use rungline_core::radiation::{Medium, Multipole};
use rungline_tests::{Row, relative_error, report, vector_rows};

fn mass(z: u8, mass_number: u32) -> f64 {
    light_nucleus(z, mass_number).expect("a light nucleus")
}

fn orbital(n: u8, l: u8) -> Orbital {
    Orbital::new(n, l).expect("an orbital")
}

#[test]
fn balmer_lines_in_air() {
    // Strength-weighted centres in standard air, nm (from memory: the wavelengths in every table of
    // the Balmer series, such as Reader & Corliss, *CRC Handbook*, "Line Spectra of the Elements").
    let published = [(3, 656.2793), (4, 486.1323), (5, 434.0462), (6, 410.1733)];
    let proton = in_electron_masses(mass(1, 1));
    let mut worst = 0.0_f64;
    for (upper, air) in published {
        let line = transition(upper, 2, 1, Some(proton)).expect("a line");
        let found = Medium::Air(Air::STANDARD).wavelength(1e7 / line.centre);
        worst = worst.max((found.nm - air).abs());
        // 2s – np, 2p – ns, 2p – nd with their j.
        assert_eq!(line.components.len(), 7);
    }
    report(
        "radiation-balmer",
        Row {
            quantity: "Balmer α–δ in air, nm".into(),
            cases: 4,
            worst,
            tolerance: 1e-3,
            measure: "absolute".into(),
            source: "tables of the Balmer series, from memory".into(),
        },
    );
}

#[test]
fn probabilities_of_hydrogen() {
    // Mean probabilities between shells, and that of 2p – 1s, s⁻¹: Wiese & Fuhr, J. Phys. Chem. Ref.
    // Data 38, 565 (2009), table of hydrogen (from memory).
    let published = [
        (2, 1, 4.6986e8),
        (3, 1, 5.5751e7),
        (4, 1, 1.2785e7),
        (3, 2, 4.4101e7),
        (4, 2, 8.4193e6),
        (5, 2, 2.5304e6),
        (4, 3, 8.9860e6),
    ];
    let proton = Some(in_electron_masses(mass(1, 1)));
    let mut worst = 0.0_f64;
    for (upper, lower, a) in published {
        let line = transition(upper, lower, 1, proton).expect("a line");
        worst = worst.max(relative_error(line.a, a));
    }
    report(
        "radiation-hydrogen-shells",
        Row {
            quantity: "A between shells of hydrogen".into(),
            cases: published.len(),
            worst,
            tolerance: 3e-5,
            measure: "relative, the table's five digits".into(),
            source: "Wiese & Fuhr 2009, from memory".into(),
        },
    );
    let lyman = transition(2, 1, 1, proton).expect("a line");
    let mut worst = 0.0_f64;
    for component in &lyman.components {
        worst = worst.max(relative_error(component.rates.a, 6.264_90e8));
    }
    report(
        "radiation-hydrogen-2p-1s",
        Row {
            quantity: "A of 2p – 1s in hydrogen".into(),
            cases: lyman.components.len(),
            worst,
            tolerance: 1e-6,
            measure: "relative".into(),
            source: "6.26490e8 s⁻¹, standard, from memory".into(),
        },
    );
}

#[test]
fn lyman_lines_of_two_isotopes() {
    // 1s – np of H and D: wavelengths without the Lamb shift of 1s, 0.273 cm⁻¹, which the table has;
    // A and f of H to the four digits of the table.
    let (mut length, mut rate) = (0.0_f64, 0.0_f64);
    let (mut cases, mut rated) = (0, 0);
    for row in vector_rows("resonance_lines_fvalues.csv") {
        let mass_number = match row["element"].as_str() {
            "H" => 1,
            "D" => 2,
            _ => continue,
        };
        let number = |key: &str| row[key].parse::<f64>().expect("a number");
        let n: u8 = match row["upper"].split('p').next().map(str::parse) {
            Some(Ok(n)) => n,
            _ => continue,
        };
        let nucleus = Some(in_electron_masses(mass(1, mass_number)));
        let line = transition(n, 1, 1, nucleus).expect("a line");
        let two_j = number("g_up") as i32 - 1;
        let component = line
            .components
            .iter()
            .find(|line| line.upper.j.doubled() == two_j)
            .expect("a component");
        length = length.max((component.wavenumber - 0.273 - number("E_up_cm1")).abs());
        cases += 1;
        // The table has f of D larger than f of H, but f ∝ ωS falls with the mass: that part of it is
        // scaled the wrong way.
        if mass_number != 1 {
            continue;
        }
        rated += 1;
        let deviation = relative_error(component.rates.f, number("f"));
        rate = rate.max(deviation.max(relative_error(component.rates.a, number("A_per_s"))));
    }
    let source = "Morton 2003 by linetools 0.3.2 (BSD-3-Clause); Lamb shift of 1s from memory";
    report(
        "radiation-lyman-wavenumbers",
        Row {
            quantity: "1s – np of H and D, cm⁻¹".into(),
            cases,
            worst: length,
            tolerance: 0.02,
            measure: "absolute, after the Lamb shift of 1s".into(),
            source: source.into(),
        },
    );
    report(
        "radiation-lyman-rates",
        Row {
            quantity: "A and f of 1s – np of H".into(),
            cases: 2 * rated,
            worst: rate,
            tolerance: 5e-4,
            measure: "relative, the table's four digits".into(),
            source: "Morton 2003 by linetools 0.3.2 (BSD-3-Clause)".into(),
        },
    );
}

#[test]
fn strengths_sum_to_those_of_the_shells() {
    // Σ over j, j′ of S(nℓj, n′ℓ′j′) = 2 ℓ_> R²: 2p – 1s has R² = 2^15/3^9.
    let (mut total, half) = (0.0, TwiceJ::from_doubled(1));
    for two_j in [1, 3] {
        let j = TwiceJ::from_doubled(two_j);
        total += strength((orbital(2, 1), j), (orbital(1, 0), half), 1, None).expect("allowed");
    }
    assert!(relative_error(total, 2.0 * 32_768.0 / 19_683.0) < 1e-14);
    // Forbidden by ℓ and by j.
    let s = (orbital(3, 0), half);
    assert_eq!(strength(s, (orbital(1, 0), half), 1, None), Ok(0.0));
    let f = (orbital(4, 3), TwiceJ::from_doubled(7));
    let d = (orbital(3, 2), TwiceJ::from_doubled(3));
    assert_eq!(strength(f, d, 1, None), Ok(0.0));
    // S ∝ 1/Z².
    let p = (orbital(2, 1), half);
    let [one, ten] = [1, 10].map(|z| strength(p, (orbital(1, 0), half), z, None).expect("allowed"));
    assert!(relative_error(one, 100.0 * ten) < 1e-14);
}

#[test]
fn rates_grow_like_the_fourth_power_of_the_charge() {
    let (one, many) = (
        transition(2, 1, 1, None).expect("a line"),
        transition(2, 1, 8, None).expect("a line"),
    );
    assert!(relative_error(many.a, 4096.0 * one.a) < 1e-14);
    assert!(relative_error(many.gf, one.gf) < 1e-14);
    let line = rates(
        Multipole::E1,
        1.0,
        gross_wavenumber(2, 1, 8, None),
        6.0,
        2.0,
    );
    let component = many.components[0];
    let expected = component.rates.gf / component.strength;
    assert!(relative_error(line.expect("a line").gf, expected) < 1e-15);
    assert_eq!(gross_wavenumber(2, 2, 1, None), 0.0);
    // (2/3)⁸ α³ of the atomic unit of rate, 4.134 137 333e16 s⁻¹ (CODATA): A of 2p – 1s in closed form,
    // 3/4 of which is the mean over the shell.
    let alpha = 0.007_297_352_564_3_f64;
    let closed = 256.0 / 6561.0 * alpha * alpha * alpha * 4.134_137_333_5e16;
    assert!(relative_error(one.a, 0.75 * closed) < 1e-9);
}

#[test]
fn shells_that_do_not_descend_are_refused() {
    let code = |upper, lower, z| transition(upper, lower, z, None).expect_err("refused").code;
    assert_eq!(code(2, 2, 1), "shells-not-descending");
    assert_eq!(code(1, 2, 1), "shells-not-descending");
    assert_eq!(code(2, 0, 1), "orbital-out-of-range");
    assert_eq!(code(51, 1, 1), "orbital-out-of-range");
    assert_eq!(code(2, 1, 0), "nuclear-charge-out-of-range");
    assert_eq!(code(2, 1, 138), "nuclear-charge-out-of-range");
    let light = transition(2, 1, 1, Some(0.5)).expect_err("refused");
    assert_eq!(light.code, "nuclear-mass-out-of-range");
    // The largest shells give finite numbers.
    let long = transition(50, 49, 137, None).expect("a line");
    assert!(long.a.is_finite() && long.centre > 0.0);
}

#[test]
fn the_normal_mass_shift_is_that_of_the_levels() {
    let [light, heavy] = [1, 2].map(|a| mass(1, a));
    let [one, other] = [light, heavy].map(|m| {
        transition(3, 2, 1, Some(in_electron_masses(m)))
            .expect("a line")
            .centre
    });
    let shift = normal_mass_shift(one, light, heavy).expect("masses");
    // Recoil of order α² is no part of the normal mass shift.
    assert!(relative_error(shift, other - one) < 1e-4);
    // 0.1785 nm between Hα and Dα (from memory: the discovery of deuterium, Urey, Brickwedde & Murphy,
    // Phys. Rev. 40, 1 (1932), 1.79 Å).
    assert!((1e7 / one - 1e7 / (one + shift) - 0.179).abs() < 1e-3);
    for (from, to) in [(0.0, 1.0), (1.0, f64::NAN), (1.0, 1e4)] {
        let problem = normal_mass_shift(1.0, from, to).expect_err("refused");
        assert_eq!(problem.code, "nuclear-mass-out-of-range");
    }
}

#[test]
fn hydrogen_is_bound_by_what_is_known() {
    // 109678.7717 cm⁻¹ (from memory: CODATA's and every table's ionisation energy), which has the
    // Lamb shift of 1s, 0.273 cm⁻¹.
    let proton = Some(in_electron_masses(mass(1, 1)));
    let found = binding(orbital(1, 0), TwiceJ::from_doubled(1), 1, proton).expect("a level");
    assert!((found - 0.273 - 109_678.771_7).abs() < 2e-3, "{found}");
}
