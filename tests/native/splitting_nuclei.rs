//! Alkali atoms with their nuclei: the closed form of Breit and Rabi, published frequencies and fields.
//!
//! A, g_J and g_I: Arimondo, Inguscio & Violino, Rev. Mod. Phys. 49, 31 (1977), of ⁸⁷Rb in the
//! atom, shielded: −g_I′ = 0.000 995 141 4; the other g_I those of bare nuclei. Frequencies and fields: sources beside each.
//! All of these values are written from memory of the sources, but for caesium's, which is exact.

use rungline_core::constants::BOHR_MAGNETON_WAVENUMBER;
use rungline_core::splitting::in_field::{
    Components, CrossingKind, MHZ_PER_WAVENUMBER, Manifold, NUCLEAR_MAGNETON_WAVENUMBER, Nucleus,
    Operator, Resonances, Split, Wanted, casimir, component_crossings, crossings, map,
};
use rungline_tests::{Row, report};

/// A ground level ²S1/2: name, 2I, g_I in nuclear magnetons, A in MHz, g_J.
const ATOMS: [(&str, i32, f64, f64, f64); 10] = [
    ("1H", 1, 5.585_694_689, 1_420.405_751_768, 2.002_283_8),
    ("6Li", 2, 0.822_047, 152.136_840_7, 2.002_301_0),
    ("7Li", 3, 2.170_951, 401.752_043_3, 2.002_301_0),
    ("23Na", 3, 1.478_348, 885.813_064_4, 2.002_296_0),
    ("39K", 3, 0.260_977, 230.859_860_1, 2.002_294_21),
    ("40K", 8, -0.324_525, -285.730_8, 2.002_294_21),
    ("41K", 3, 0.143_247, 127.006_935_2, 2.002_294_21),
    ("85Rb", 5, 0.541_341, 1_011.910_813_0, 2.002_331_13),
    ("87Rb", 3, 1.827_232, 3_417.341_305_452_15, 2.002_331_13),
    ("133Cs", 7, 0.737_721, 2_298.157_942_5, 2.002_540_261),
];

fn atom(name: &str) -> (Manifold, Nucleus) {
    let known = ATOMS.iter().find(|atom| atom.0 == name).expect("an atom");
    let &(_, two_i, g_i, a, g_j) = known;
    let nucleus = Nucleus {
        two_i,
        g_i,
        magnetic_dipole: vec![a / MHZ_PER_WAVENUMBER],
        electric_quadrupole: Vec::new(),
    };
    (Manifold::alone(1, 0.0, g_j).expect("a level"), nucleus)
}

fn split(name: &str) -> Split {
    let (manifold, nucleus) = atom(name);
    Split::new(&manifold, Some(&nucleus)).expect("a split")
}

fn state(split: &Split, two_f: i32, two_m: i32) -> usize {
    let own =
        |s: &rungline_core::splitting::in_field::State| s.two_f == Some(two_f) && s.two_m == two_m;
    split.states().iter().position(own).expect("a state")
}

/// E = −ΔE/[2(2I+1)] + g_I′ μ_B M B ± (ΔE/2) √[1 + 4Mx/(2I+1) + x²], x = (g_J − g_I′) μ_B B/ΔE,
/// ΔE = A(I+½), g_I′ = −g_I μ_N/μ_B (Breit & Rabi, Phys. Rev. 38, 2082 (1931)).
fn breit_rabi(name: &str, upper: bool, two_m: i32, tesla: f64) -> f64 {
    let known = ATOMS.iter().find(|atom| atom.0 == name).expect("an atom");
    let &(_, two_i, g_i, a, g_j) = known;
    let mu_b = BOHR_MAGNETON_WAVENUMBER.value * MHZ_PER_WAVENUMBER;
    let nuclear = -g_i * NUCLEAR_MAGNETON_WAVENUMBER * MHZ_PER_WAVENUMBER;
    let width = f64::from(two_i + 1);
    let (m, distance) = (f64::from(two_m) / 2.0, a * width / 2.0);
    let x = (g_j * mu_b - nuclear) * tesla / distance;
    let root = if two_m.abs() == two_i + 1 {
        1.0 + f64::from(two_m.signum()) * x
    } else {
        (1.0 + 4.0 * m * x / width + x * x).sqrt()
    };
    let sign = if upper { 1.0 } else { -1.0 };
    -distance / (2.0 * width) + nuclear * m * tesla + sign * distance / 2.0 * root
}

#[test]
fn alkalis_follow_breit_and_rabi() {
    let (mut worst, mut seen) = (0.0_f64, 0);
    for (name, two_i, ..) in ATOMS {
        let split = split(name);
        assert_eq!(
            split.states().len(),
            2 * usize::try_from(two_i + 1).expect("few")
        );
        for tesla in [
            0.0, 1e-6, 1e-4, 1e-3, 0.01, 0.03, 0.1, 0.3, 1.0, 10.0, 1000.0,
        ] {
            let at = split.at(tesla).expect("energies");
            let of = split.states().iter().zip(&at.shifts);
            let pairs: Vec<(f64, f64)> = of
                .map(|(s, shift)| {
                    let upper = s.two_f == Some(two_i + 1);
                    (
                        shift * MHZ_PER_WAVENUMBER,
                        breit_rabi(name, upper, s.two_m, tesla),
                    )
                })
                .collect();
            let size = pairs
                .iter()
                .fold(0.0_f64, |most, pair| most.max(pair.1.abs()));
            for (ours, closed) in pairs {
                worst = worst.max((ours - closed).abs() / size);
                seen += 1;
            }
        }
    }
    report(
        "splitting-breit-rabi",
        Row {
            quantity: "ground levels of hydrogen and the alkalis in 0 to 1000 T".to_owned(),
            cases: seen,
            worst,
            tolerance: 1e-10,
            measure: "relative to the largest shift".to_owned(),
            source: "Breit & Rabi, Phys. Rev. 38, 2082 (1931), closed form".to_owned(),
        },
    );
}

/// The resonance between both states M_F = 0, MHz.
fn clock(name: &str, tesla: f64) -> f64 {
    let (manifold, nucleus) = atom(name);
    let split = Split::new(&manifold, Some(&nucleus)).expect("a split");
    let (low, high) = (nucleus.two_i - 1, nucleus.two_i + 1);
    let wanted = (state(&split, low, 0), state(&split, high, 0));
    let resonances = Resonances::new(&split, &manifold, Some(&nucleus), &[true], 1000);
    let at = split.at(tesla).expect("energies");
    let all = resonances.expect("resonances").at(&split, &at);
    let found = all.iter().find(|r| (r.lower, r.upper) == wanted);
    let found = found.expect("the resonance");
    assert_eq!(found.change_of_m, 0);
    // ⟨I+½ 0|g_J S_z + …|I−½ 0⟩ = (g_J − g_I′)/2.
    assert!((found.strength - 1.0).abs() < 0.01, "{}", found.strength);
    found.frequency * MHZ_PER_WAVENUMBER
}

#[test]
fn published_splittings_of_ground_levels() {
    // MHz. ¹³³Cs: the definition of the second (SI Brochure, 9th ed.). ⁸⁷Rb: Bize et al., Europhys. Lett. 45,
    // 558 (1999). ¹H: Hellwig et al., IEEE Trans. Instrum. Meas. 19, 200 (1970). ⁸⁵Rb, ²³Na, ³⁹K, ⁷Li:
    // Arimondo, Inguscio & Violino (1977); A is published beside them with fewer or as many digits.
    let known = [
        ("133Cs", 9_192.631_770, 5e-7),
        ("87Rb", 6_834.682_610_904_29, 5e-7),
        ("1H", 1_420.405_751_768, 5e-7),
        ("85Rb", 3_035.732_439_0, 1e-5),
        ("23Na", 1_771.626_128_8, 1e-5),
        ("39K", 461.719_720_2, 1e-5),
        ("7Li", 803.504_086_6, 1e-5),
    ];
    let mut worst = 0.0_f64;
    for (name, published, tolerance) in known {
        let ours = clock(name, 0.0);
        assert!((ours - published).abs() < tolerance, "{name}: {ours}");
        worst = worst.max((ours - published).abs() / published);
    }
    report(
        "splitting-clocks",
        Row {
            quantity: "splittings of ground levels from published A".to_owned(),
            cases: known.len(),
            worst,
            tolerance: 1e-8,
            measure: "relative".to_owned(),
            source: "SI Brochure; Bize 1999; Hellwig 1970; Arimondo 1977".to_owned(),
        },
    );
}

#[test]
fn clock_frequencies_rise_with_the_square_of_the_field() {
    // Hz at 10⁻⁴ T: Steck, Cesium D Line Data and Rubidium 87 D Line Data (2003): 427.45 and 575.15 Hz/G².
    for (name, published) in [("133Cs", 427.45), ("87Rb", 575.15)] {
        let shift = (clock(name, 1e-4) - clock(name, 0.0)) * 1e6;
        assert!((shift - published).abs() < 0.01, "{name}: {shift}");
    }
}

#[test]
fn fields_that_a_transition_does_not_feel() {
    // ⁸⁷Rb |1, −1⟩ – |2, 1⟩: 3.228 917 G (Harber et al., Phys. Rev. A 66, 053616 (2002)).
    let rubidium = split("87Rb");
    let followed = map(&rubidium, None, None, (0.0, 1e-3), 101).expect("a map");
    let chosen = [state(&rubidium, 2, -2), state(&rubidium, 4, 2)];
    let wanted = Wanted {
        crossings: false,
        avoided: false,
        clock: Some(2),
    };
    let fields = (followed.tesla.as_slice(), &followed.upper);
    let found = crossings(&rubidium, fields, &chosen, wanted, 10).expect("crossings");
    assert_eq!((found.found.len(), found.left_out), (1, 0));
    let only = found.found[0];
    assert_eq!(only.kind, CrossingKind::Clock);
    assert!((only.tesla - 3.228_917e-4).abs() < 1e-8, "{}", only.tesla);

    // M to M of caesium: x = −2M/(2I+1) = −M/4, in closed form, with ν = ΔE √(1 − x²).
    let caesium = split("133Cs");
    let followed = map(&caesium, None, None, (0.0, 0.3), 61).expect("a map");
    let fields = (followed.tesla.as_slice(), &followed.upper);
    let &(_, _, g_i, a, g_j) = ATOMS.last().expect("caesium");
    let mu_b = BOHR_MAGNETON_WAVENUMBER.value * MHZ_PER_WAVENUMBER;
    let g = g_j * mu_b + g_i * NUCLEAR_MAGNETON_WAVENUMBER * MHZ_PER_WAVENUMBER;
    for m in [-1, -2, -3] {
        let chosen = [state(&caesium, 6, 2 * m), state(&caesium, 8, 2 * m)];
        let wanted = Wanted {
            crossings: true,
            avoided: true,
            clock: Some(0),
        };
        let found = crossings(&caesium, fields, &chosen, wanted, 10).expect("crossings");
        // Closest where the distance stands still: states of one part.
        let kinds: Vec<CrossingKind> = found.found.iter().map(|c| c.kind).collect();
        assert_eq!(kinds, [CrossingKind::Avoided, CrossingKind::Clock]);
        let x = -f64::from(m) / 4.0;
        let tesla = x * 4.0 * a / g;
        let gap = 4.0 * a * (1.0 - x * x).sqrt();
        for c in &found.found {
            assert!(
                (c.tesla / tesla - 1.0).abs() < 1e-9,
                "{m}: {} {tesla}",
                c.tesla
            );
            assert!((c.gap * MHZ_PER_WAVENUMBER / gap - 1.0).abs() < 1e-11);
            assert!((c.slopes.0 - c.slopes.1).abs() < 1e-10);
        }
    }
    // M = 0 to M = 0 stands still without a field.
    let chosen = [state(&caesium, 6, 0), state(&caesium, 8, 0)];
    let found = crossings(&caesium, fields, &chosen, wanted, 10).expect("crossings");
    assert_eq!(
        found.found.iter().map(|c| c.tesla).collect::<Vec<_>>(),
        [0.0]
    );
}

#[test]
fn published_levels_of_p_electrons() {
    // MHz from the level without nucleus: Steck, Rubidium 87 D Line Data and Cesium D Line Data (2003), from
    // memory; caesium has an octupole constant there, worth some kHz.
    let rubidium = [(6, 193.7407), (4, -72.9112), (2, -229.8518), (0, -302.0738)];
    for (two_f, published) in rubidium {
        let ours = casimir(3, 3, two_f, 84.7185, 12.4965);
        assert!((ours - published).abs() < 2e-4, "{two_f}: {ours}");
    }
    let caesium = [(10, 263.8906), (8, 12.7985), (6, -188.4885), (4, -339.7128)];
    for (two_f, published) in caesium {
        let ours = casimir(7, 3, two_f, 50.28827, -0.4934);
        assert!((ours - published).abs() < 0.02, "{two_f}: {ours}");
    }
}

#[test]
fn centre_of_gravity_of_a_level_stays() {
    // Both terms of Casimir's formula are traceless and orthogonal: Σ (2F+1) E = 0, and so is the sum of the
    // quadrupole's energies times I·J.
    for (two_i, two_j) in [(2, 2), (3, 3), (5, 3), (7, 5), (9, 8), (12, 15)] {
        let low = i32::abs(two_i - two_j);
        let all = (low..=two_i + two_j).step_by(2);
        let sum = |a: f64, b: f64, power: i32| -> f64 {
            all.clone()
                .map(|two_f| {
                    let weight = f64::from(two_f + 1);
                    let dot = casimir(two_i, two_j, two_f, 1.0, 0.0);
                    let factor = if power == 1 { dot } else { 1.0 };
                    weight * factor * casimir(two_i, two_j, two_f, a, b)
                })
                .sum()
        };
        let width = f64::from((two_i + 1) * (two_j + 1));
        assert!(sum(1.7, 0.0, 0).abs() < 1e-11 * width);
        assert!(sum(0.0, 1.7, 0).abs() < 1e-11 * width);
        assert!(sum(0.0, 1.7, 1).abs() < 1e-11 * width * width);
        // Tr (I·J)² = I(I+1)(2I+1) J(J+1)(2J+1)/3.
        let square = |two: i32| {
            let x = f64::from(two) / 2.0;
            x * (x + 1.0) * (2.0 * x + 1.0)
        };
        let trace = square(two_i) * square(two_j) / 3.0;
        assert!((sum(1.0, 0.0, 1) / trace - 1.0).abs() < 1e-13);
    }
}

#[test]
fn two_transitions_are_farthest_apart() {
    // I = 3/2: ν(0) − ν(−1) = ΔE [√(1 + x²) − √(1 − x + x²)] has its maximum where both derivatives agree.
    let (manifold, nucleus) = atom("87Rb");
    let rubidium = Split::new(&manifold, Some(&nucleus)).expect("a split");
    let operator = Operator::magnetic_dipole(&manifold, Some(&nucleus));
    let all = (&[true][..], &[true][..]);
    let components = Components::new(&rubidium, &rubidium, &operator, all, 1000);
    let components = components.expect("components");
    let place = |m: i32| {
        let ends = (state(&rubidium, 4, 2 * m), state(&rubidium, 2, 2 * m));
        let list = components.list().iter();
        let found = list.enumerate().find(|(_, c)| (c.upper, c.lower) == ends);
        found.expect("a component").0
    };
    let whole = map(&rubidium, None, Some(&components), (0.0, 2.0), 101).expect("a map");
    let chosen = [place(-1), place(0)];
    let found = component_crossings((&rubidium, None), &components, &whole, &chosen, 10);
    let found = found.expect("crossings").found;
    assert_eq!(found.len(), 1);
    assert!(found[0].farthest);
    let steeper = |x: f64| x / (1.0 + x * x).sqrt() - (x - 0.5) / (1.0 - x + x * x).sqrt();
    let (mut low, mut high) = (1.0, 5.0);
    for _ in 0..60 {
        let middle = 0.5 * (low + high);
        if steeper(middle) > 0.0 {
            low = middle;
        } else {
            high = middle;
        }
    }
    let &(_, _, g_i, a, g_j) = ATOMS.iter().find(|atom| atom.0 == "87Rb").expect("it");
    let mu_b = BOHR_MAGNETON_WAVENUMBER.value * MHZ_PER_WAVENUMBER;
    let g = g_j * mu_b + g_i * NUCLEAR_MAGNETON_WAVENUMBER * MHZ_PER_WAVENUMBER;
    let tesla = low * 2.0 * a / g;
    assert!(
        (found[0].tesla / tesla - 1.0).abs() < 1e-8,
        "{} {tesla}",
        found[0].tesla
    );
    let apart = (1.0 + low * low).sqrt() - (1.0 - low + low * low).sqrt();
    let ours = found[0].apart * MHZ_PER_WAVENUMBER / (2.0 * a);
    assert!((ours / apart - 1.0).abs() < 1e-11, "{ours} {apart}");
}
