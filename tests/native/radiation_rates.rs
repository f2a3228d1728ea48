//! Strength, oscillator strength and transition probability against published factors and tables.

use rungline_core::configuration::Orbital;
use rungline_core::constants::RYDBERG;
use rungline_core::quantity::TwiceJ;
use rungline_core::radial::hydrogenic::multipole;
use rungline_core::radiation::Multipole;
use rungline_core::radiation::rates::{decays, rates, wavelength_factor};
use rungline_core::radiation::strengths::magnetic_dipole;
use rungline_core::terms::Term;
use rungline_tests::{Row, median_and_largest, relative_error, report, vector_rows};

#[test]
fn factors_of_the_handbook() {
    // Martin & Wiese, "Atomic spectroscopy" (2006), table 10.5 (from memory), six digits each.
    let published = [
        (Multipole::E1, 2.02613e18),
        (Multipole::M1, 2.69735e13),
        (Multipole::E2, 1.11995e18),
    ];
    let mut worst = 0.0_f64;
    for (multipole, factor) in published {
        worst = worst.max(relative_error(wavelength_factor(multipole), factor));
    }
    // f = 303.75 S/(g λ), λ in Å, of the same table.
    let line = rates(Multipole::E1, 1.0, 1e8 / 5000.0, 2.0, 4.0).expect("a line");
    worst = worst.max(relative_error(line.f, 303.75 / (4.0 * 5000.0)) / 5.0);
    report(
        "radiation-factors",
        Row {
            quantity: "factors of A and f from S (E1, M1, E2)".into(),
            cases: 4,
            worst,
            tolerance: 5e-6,
            measure: "relative, f to its five digits".into(),
            source: "Martin & Wiese 2006, from memory".into(),
        },
    );
}

#[test]
fn forbidden_lines_within_a_term() {
    // M1 lines within one term need no radial function: S of pure LS coupling gives A to the part of
    // the level that is pure. J and J′ doubled, wavelength in vacuum in Å, A in s⁻¹ (from memory, every
    // table of forbidden lines, e.g. Osterbrock & Ferland, *Astrophysics of Gaseous Nebulae*, 2006).
    let published = [
        ("[C II] 158 µm", (2, 1), (3, 1), 1_577_409.0, 2.29e-6),
        ("[O I] 63 µm", (3, 1), (2, 4), 631_837.0, 8.91e-5),
        ("[C I] 609 µm", (3, 1), (2, 0), 6_091_350.0, 7.93e-8),
        ("[O III] 88 µm", (3, 1), (2, 0), 883_560.0, 2.61e-5),
        ("[Ne II] 12.8 µm", (2, 1), (1, 3), 128_135.0, 8.59e-3),
        ("[Fe XIV] 530 nm", (2, 1), (3, 1), 5_304.5, 60.2),
    ];
    let mut worst = 0.0_f64;
    for (_, (multiplicity, l), (upper, lower), wavelength, a) in published {
        let term = Term {
            two_s: multiplicity - 1,
            l,
        };
        let [upper, lower] = [upper, lower].map(TwiceJ::from_doubled);
        let strength = magnetic_dipole(term, upper, lower);
        let [above, below] = [upper, lower].map(|j| j.degeneracy() as f64);
        let line = rates(Multipole::M1, strength, 1e8 / wavelength, above, below);
        let found = line.expect("a line").a;
        worst = worst.max(relative_error(found, a));
    }
    report(
        "radiation-forbidden",
        Row {
            quantity: "A of M1 lines within one term".into(),
            cases: published.len(),
            worst,
            tolerance: 1e-2,
            measure: "relative".into(),
            source: "tables of forbidden lines, from memory".into(),
        },
    );
}

#[test]
fn a_quadrupole_line_of_hydrogen() {
    // 3d – 1s, 594 s⁻¹ (from memory). S = 2 ⟨0‖C²‖2⟩² (∫P r² P dr)², the square of the angular part
    // being 1; with the nucleus at rest and the gross wavenumber.
    let [d, s] = [(3, 2), (1, 0)].map(|(n, l)| Orbital::new(n, l).expect("an orbital"));
    let radial = multipole(d, s, 2, 1.0)
        .expect("a charge")
        .expect("converges");
    let wavenumber = RYDBERG.value * 8.0 / 9.0;
    let line = rates(Multipole::E2, 2.0 * radial * radial, wavenumber, 10.0, 2.0);
    let found = line.expect("a line").a;
    assert!(relative_error(found, 594.0) < 1e-3, "{found}");
}

#[test]
fn the_factor_is_what_the_rates_use() {
    for (multipole, power) in [(Multipole::E1, 3), (Multipole::M1, 3), (Multipole::E2, 5)] {
        for wavelength in [30.0, 1215.67, 5892.0, 2.1e5] {
            let line = rates(multipole, 0.7, 1e8 / wavelength, 4.0, 2.0).expect("a line");
            let lengths = (0..power).fold(1.0, |product, _| product * wavelength);
            let a = wavelength_factor(multipole) * 0.7 / (4.0 * lengths);
            assert!(relative_error(line.a, a) < 1e-9, "{multipole} {wavelength}");
            assert_eq!(line.gf, 2.0 * line.f);
        }
    }
}

#[test]
fn oscillator_strengths_and_probabilities_of_a_table_belong_together() {
    // A and f of one row, each rounded to four digits; the table's own deviations to 0.7 % come from
    // air wavelengths and rounding of the sources.
    let mut deviations = Vec::new();
    for row in vector_rows("resonance_lines_fvalues.csv") {
        let number = |key: &str| row[key].parse::<f64>().expect("a number");
        // λ, A and f of this row do not belong together: an error of the table.
        if row["element"] == "Ag" && row["wl_vac_A"] == "1195.88" {
            continue;
        }
        let (upper, lower) = (number("g_up"), number("g_low"));
        let wavenumber = 1e8 / number("wl_vac_A");
        let line = rates(Multipole::E1, 1.0, wavenumber, upper, lower).expect("a line");
        let expected = line.f / line.a;
        deviations.push(relative_error(number("f") / number("A_per_s"), expected));
    }
    let (median, worst) = median_and_largest(&deviations);
    report(
        "radiation-f-over-a",
        Row {
            quantity: "f/A of resonance lines".into(),
            cases: deviations.len(),
            worst,
            tolerance: 8e-3,
            measure: "relative, the table's digits".into(),
            source: "Morton 2000, 2003 by linetools 0.3.2 (BSD-3-Clause)".into(),
        },
    );
    assert!(median < 1e-3);
}

#[test]
fn lifetimes_and_branches_add_up() {
    let lines = [(2, 3.0e7), (2, 1.0e7), (1, 5.0e6), (9, 1.0)];
    let found = decays(3, lines);
    assert_eq!(found[0].lifetime(), None);
    assert_eq!(found[0].branching(1.0), 0.0);
    assert!(relative_error(found[1].lifetime().expect("decays"), 2e-7) < 1e-15);
    assert!(relative_error(found[2].lifetime().expect("decays"), 2.5e-8) < 1e-15);
    assert_eq!(found[2].branching(3.0e7) + found[2].branching(1.0e7), 1.0);
}

#[test]
fn no_line_has_no_rates() {
    assert_eq!(rates(Multipole::E1, 1.0, 0.0, 2.0, 2.0), None);
    assert_eq!(rates(Multipole::E1, 1.0, -5.0, 2.0, 2.0), None);
    assert_eq!(rates(Multipole::E2, f64::NAN, 5.0, 2.0, 2.0), None);
    assert_eq!(rates(Multipole::M1, 1.0, f64::INFINITY, 2.0, 2.0), None);
    assert_eq!(rates(Multipole::M1, 1.0, 5.0, 0.0, 2.0), None);
    assert_eq!(rates(Multipole::E1, 1.0, f64::NAN, 2.0, 2.0), None);
    let zero = rates(Multipole::E1, 0.0, 5.0, 2.0, 2.0).expect("a line without strength");
    assert_eq!((zero.gf, zero.f, zero.a), (0.0, 0.0, 0.0));
}
