//! Populations, balance of ions, absorption: against closed forms and handbook constants.

use rungline_core::radiation::Multipole;
use rungline_core::radiation::absorption::{
    centre_cross_section, doppler_width, optical_depth, saturation_intensity,
};
use rungline_core::radiation::ionisation::{lowering, saha};
use rungline_core::radiation::populations::{CutOff, Weighted, partition, thermal_energy};
use rungline_core::radiation::rates::rates;
use rungline_tests::{Row, relative_error, report};

fn level(energy: f64, weight: f64) -> Weighted {
    Weighted { energy, weight }
}

#[test]
fn shares_follow_boltzmann() {
    // A rigid ladder has a closed form: Σ e^(−kx) = 1/(1 − e^(−x)).
    let ladder: Vec<Weighted> = (0..400)
        .map(|k| level(7.0 + 300.0 * f64::from(k), 2.0))
        .collect();
    let found = partition(&ladder, 1000.0, CutOff::HighestLevel).expect("levels");
    // k/hc = 0.695 034 8 cm⁻¹/K, CODATA 2022.
    let x = 300.0 / (0.695_034_800_486_127_4 * 1000.0);
    assert!(relative_error(found.value, 2.0 / (1.0 - libm_exp(-x))) < 1e-14);
    assert_eq!((found.lowest, found.highest), (7.0, 119_700.0));
    assert_eq!((found.counted, found.left_out), (400, 0));
    let total: f64 = ladder.iter().map(|&each| found.share(each)).sum();
    assert!((total - 1.0).abs() < 1e-14);
    let ratio = found.share(level(607.0, 6.0)) / found.share(level(7.0, 2.0));
    assert!(relative_error(ratio, 3.0 * libm_exp(-2.0 * x)) < 1e-14);
}

/// e^x by its series, so that the check has another way than the core's.
fn libm_exp(x: f64) -> f64 {
    let (mut term, mut sum) = (1.0, 1.0);
    for k in 1..200 {
        term *= -x / f64::from(k);
        sum += term;
    }
    1.0 / sum
}

#[test]
fn a_cut_off_takes_levels_away() {
    let levels = [
        level(50.0, 5.0),
        level(0.0, 1.0),
        level(20.0, 3.0),
        level(f64::NAN, 3.0),
        level(1.0, 0.0),
    ];
    let found = partition(&levels, 100.0, CutOff::Energy(20.0)).expect("levels");
    assert_eq!((found.counted, found.left_out, found.highest), (2, 1, 20.0));
    assert_eq!(found.share(level(50.0, 5.0)), 0.0);
    assert!((found.share(level(0.0, 1.0)) + found.share(level(20.0, 3.0)) - 1.0).abs() < 1e-15);
    // Cold and hot without end.
    let cold = partition(&levels, 1e-9, CutOff::HighestLevel).expect("levels");
    assert_eq!((cold.value, cold.share(level(20.0, 3.0))), (1.0, 0.0));
    let hot = partition(&levels, 1e9, CutOff::HighestLevel).expect("levels");
    assert!(relative_error(hot.value, 9.0) < 1e-6);
}

#[test]
fn impossible_populations_are_refused() {
    for temperature in [0.0, -5.0, f64::NAN, f64::INFINITY] {
        let problem = partition(&[level(0.0, 1.0)], temperature, CutOff::HighestLevel);
        let code = problem.expect_err("refused").code;
        assert_eq!(code, "temperature-out-of-range");
    }
    let code = |found: Result<_, rungline_core::problem::Problem>| found.expect_err("refused").code;
    assert_eq!(
        code(partition(&[], 300.0, CutOff::HighestLevel)),
        "no-level-to-populate"
    );
    assert_eq!(
        code(partition(&[level(0.0, 1.0)], 300.0, CutOff::Energy(-1.0))),
        "no-level-to-populate"
    );
    let balance = |limit, density, part| saha(limit, 1, 1e4, density, part, 1.0).map(|_| ());
    let code =
        |found: Result<(), rungline_core::problem::Problem>| found.expect_err("refused").code;
    assert_eq!(
        code(balance(1e5, 0.0, 2.0)),
        "electron-density-out-of-range"
    );
    assert_eq!(
        code(balance(1e5, 1e40, 2.0)),
        "electron-density-out-of-range"
    );
    assert_eq!(
        code(balance(1e3, 1e27, 2.0)),
        "ionisation-energy-out-of-range"
    );
    assert_eq!(
        code(balance(f64::NAN, 1e20, 2.0)),
        "ionisation-energy-out-of-range"
    );
    assert_eq!(
        code(balance(1e5, 1e20, 0.0)),
        "partition-function-out-of-range"
    );
    assert!(thermal_energy(0.0).is_err());
}

#[test]
fn saha_has_its_known_constant() {
    // 2(2πm_e k/h²)^(3/2) = 4.8294e21 m⁻³ K^(−3/2) (from memory: Griem 1964; Allen, *Astrophysical
    // Quantities*). Hydrogen at 10 000 K, 10²⁰ m⁻³: Z = 2 and 1.
    let found = saha(109_678.77, 1, 1e4, 1e20, 2.0, 1.0).expect("a balance");
    let energy = (109_678.77 - found.lowering) / (0.695_034_800_486_127_4 * 1e4);
    let expected = 0.5 * 4.8294e21 * 1e6 / 1e20 * libm_exp(-energy);
    // Debye length of the electrons alone 7.434e3 m √(T/n), T in eV (*Plasma Formulary*, from memory),
    // with as many ions less by √2.
    let debye = 7.434e3 * (1e4_f64 / 11_604.518 / 1e20).sqrt() / 2.0_f64.sqrt();
    let worst = relative_error(found.ratio, expected) + relative_error(found.debye_length, debye);
    // e²/4πε₀λ_D = 1.43996e-9 eV m/λ_D.
    let shift = 1.439_964_5e-9 / found.debye_length * 8065.544;
    let worst = worst.max(relative_error(found.lowering, shift));
    report(
        "radiation-saha",
        Row {
            quantity: "Saha's ratio, Debye length, lowering".into(),
            cases: 3,
            worst,
            tolerance: 1e-4,
            measure: "relative, the constants' digits".into(),
            source: "Griem 1964, Plasma Formulary, from memory".into(),
        },
    );
    let (doubled, _) = lowering(2, 1e4, 1e20).expect("a plasma");
    assert_eq!(doubled, 2.0 * found.lowering);
    // Too cold to ionise anything: zero, not a fault.
    assert_eq!(saha(1e5, 1, 1.0, 1e3, 2.0, 1.0).expect("cold").ratio, 0.0);
}

#[test]
fn profiles_at_the_centre() {
    // e^(x²) erfc(x), mpmath 1.3.0 (BSD) to 40 digits.
    let values = [
        (0.001, 0.998_872_620_081_151_4),
        (0.1, 0.896_456_979_969_126_6),
        (1.0, 0.427_583_576_155_807),
        (3.9, 0.140_314_181_600_689_74),
        (4.1, 0.133_834_116_418_652),
        (10.0, 0.056_140_992_743_822_59),
        (100.0, 0.005_641_613_782_989_433),
        (1e6, 5.641_895_835_474_742e-7),
    ];
    let (wavenumber, temperature, mass) = (16_973.366, 500.0, 22.9898);
    let section =
        |decay| centre_cross_section(0.64, wavenumber, temperature, mass, decay).expect("a line");
    // w in Hz: the width at half height over 2√ln 2.
    let width =
        doppler_width(wavenumber, temperature, mass).expect("a width") * 299_792_458.0 * 100.0
            / (2.0 * 0.832_554_611_157_697_7);
    let mut worst = 0.0_f64;
    for (x, value) in values {
        let decay = x * 4.0 * std::f64::consts::PI * width;
        worst = worst.max(relative_error(section(decay) / section(0.0), value));
    }
    report(
        "radiation-line-centre",
        Row {
            quantity: "Voigt's profile at its centre".into(),
            cases: values.len(),
            worst,
            tolerance: 1e-13,
            measure: "relative".into(),
            source: "mpmath 1.3.0 (BSD)".into(),
        },
    );
}

#[test]
fn doppler_width_of_the_standard_form() {
    // 7.16e-7 λ √(T/M) (every text on spectroscopy; three digits).
    let found = doppler_width(589.158, 500.0, 22.9898).expect("a width");
    let expected = 7.16e-7 * 589.158 * (500.0_f64 / 22.9898).sqrt();
    assert!(relative_error(found, expected) < 5e-4);
    for (wavenumber, temperature, mass) in [(0.0, 1.0, 1.0), (1.0, 0.0, 1.0), (1.0, 1.0, 0.0)] {
        assert_eq!(doppler_width(wavenumber, temperature, mass), None);
    }
    assert_eq!(doppler_width(f64::NAN, 1.0, 1.0), None);
}

#[test]
fn an_atom_at_rest_absorbs_its_wavelength_squared() {
    // σ₀ = (g_u/g_l) λ²/2π for a closed line (Hilborn, Am. J. Phys. 50, 982 (1982)).
    let (upper, lower, wavenumber) = (4.0, 2.0, 16_973.366);
    let line = rates(Multipole::E1, 12.4, wavenumber, upper, lower).expect("a line");
    let found = centre_cross_section(line.f, wavenumber, 1e-9, 22.9898, line.a).expect("a line");
    let wavelength = 0.01 / wavenumber;
    let expected = upper / lower * wavelength * wavelength / (2.0 * std::f64::consts::PI);
    assert!(relative_error(found, expected) < 1e-6);
    // Saturation: hν ΣA/2σ₀ for equal weights.
    let intensity = saturation_intensity(wavenumber, line.a, line.a, 2.0, 2.0).expect("a line");
    let photon = 6.626_070_15e-34 * 299_792_458.0 * wavenumber * 100.0;
    assert!(relative_error(intensity, photon * line.a / expected) < 1e-6);
    // The cycle of the sodium line saturates at 6.26 mW/cm² (from memory, many papers on cooling
    // sodium; Γ = 2π · 9.795 MHz), a third of what the lines of equal weights need.
    let sodium = saturation_intensity(wavenumber, 6.154e7, 6.154e7, 2.0, 2.0).expect("a line");
    assert!(relative_error(sodium / 3.0, 62.6) < 2e-3, "{sodium}");
    assert_eq!(saturation_intensity(1.0, 1.0, 0.0, 1.0, 1.0), None);
    assert_eq!(saturation_intensity(f64::NAN, 1.0, 1.0, 1.0, 1.0), None);
}

#[test]
fn a_column_absorbs_what_is_not_emitted_again() {
    let depth = optical_depth(1e-16, 1e15, (1.0, 2.0), (0.0, 4.0)).expect("finite");
    assert!(relative_error(depth, 0.1) < 1e-15);
    // Equal populations of all states: transparent; more above: amplifying.
    let even = optical_depth(1e-16, 1e15, (1.0 / 3.0, 2.0), (2.0 / 3.0, 4.0)).expect("finite");
    assert!(even.abs() < 1e-17);
    let inverted = optical_depth(1e-16, 1e15, (0.2, 2.0), (0.8, 4.0));
    assert!(inverted.is_some_and(|depth| depth < 0.0));
    assert_eq!(optical_depth(1e-16, 1e15, (1.0, 2.0), (0.0, 0.0)), None);
    assert_eq!(optical_depth(f64::NAN, 1e15, (1.0, 2.0), (0.0, 1.0)), None);
    assert_eq!(centre_cross_section(-1.0, 1.0, 1.0, 1.0, 1.0), None);
    assert_eq!(centre_cross_section(1.0, 1.0, 1.0, 1.0, f64::NAN), None);
}
