//! Lines of one electron from weak to strong fields: patterns, sums, crossings, where linear ends.
//!
//! Levels of sodium and lithium: published intervals, sources beside them.

use rungline_core::configuration::Orbital;
use rungline_core::constants::{BOHR_MAGNETON_WAVENUMBER, ELECTRON_G, HARTREE_WAVENUMBER};
use rungline_core::radial::hydrogenic::multipole;
use rungline_core::splitting::in_field::{
    AtField, Components, CrossingKind, Diamagnetic, Linear, MHZ_PER_WAVENUMBER, Manifold, Nucleus,
    OneElectron, Operator, Reduced, Split, Tolerance, Wanted, component_crossings, crossings, map,
};
use rungline_tests::{Row, report};

fn level(n: u8, l: u8, two_j: i32, energy: f64) -> OneElectron {
    OneElectron {
        n,
        l,
        two_j,
        energy,
    }
}

/// np above ns, with ⟨j‖C¹‖½⟩ in units of ⟨1‖C¹‖0⟩: S of P3/2 is twice that of P1/2.
fn doublet(n: u8, lower: f64, upper: f64) -> (Manifold, Manifold, Operator) {
    let p = Manifold::one_electron(&[level(n, 1, 1, lower), level(n, 1, 3, upper)]);
    let s = Manifold::one_electron(&[level(n, 0, 1, 0.0)]);
    // ⟨½ℓj‖C¹‖½ℓ′j′⟩ ∝ (−1)^(½+ℓ′+j+1) √[(2j+1)(2j′+1)] {ℓ j ½; j′ ℓ′ 1} (Edmonds, eq. 7.1.8).
    let element = |left: usize, two_j: i32| {
        let six = rungline_core::angular::wigner_6j(2, two_j, 1, 1, 0, 2);
        let root = (f64::from(two_j + 1) * 2.0).sqrt();
        let sign = if two_j == 1 { 1.0 } else { -1.0 };
        Reduced {
            left,
            right: 0,
            value: sign * root * six,
        }
    };
    let operator = Operator::between(1, vec![element(0, 1), element(1, 3)]);
    (p.expect("levels"), s.expect("a level"), operator)
}

struct Line {
    upper: Split,
    lower: Split,
    components: Components,
}

fn line((p, s, operator): (Manifold, Manifold, Operator), nuclei: [Option<&Nucleus>; 2]) -> Line {
    let upper = Split::new(&p, nuclei[0]).expect("a split");
    let lower = Split::new(&s, nuclei[1]).expect("a split");
    let all = (&[true, true][..], &[true][..]);
    let components = Components::new(&upper, &lower, &operator, all, 10_000);
    Line {
        components: components.expect("components"),
        upper,
        lower,
    }
}

/// The D lines of sodium: 16 956.17 and 16 973.37 cm⁻¹ (vacuum 589.755 81 and 589.158 26 nm; Steck, Sodium D
/// Line Data (2000), from memory).
const SODIUM: (f64, f64) = (16_956.170, 16_973.366);

fn sodium() -> Line {
    line(doublet(3, SODIUM.0, SODIUM.1), [None, None])
}

/// By component: q, wavenumber, share of the strength.
fn pattern(line: &Line, tesla: f64) -> Vec<(i32, f64, f64)> {
    let upper = line.upper.at(tesla).expect("energies");
    let lower = line.lower.at(tesla).expect("energies");
    let strengths = line.components.strengths(&upper, &lower);
    let whole: f64 = strengths.iter().sum();
    let list = line.components.list().iter().zip(strengths);
    list.map(|(c, s)| {
        (
            c.q,
            upper.energies[c.upper] - lower.energies[c.lower],
            s / whole,
        )
    })
    .collect()
}

#[test]
fn sodium_d_lines_from_weak_to_strong() {
    let line = sodium();
    let mu_b = BOHR_MAGNETON_WAVENUMBER.value;
    let centre = (SODIUM.0 + 2.0 * SODIUM.1) / 3.0;
    for tesla in [0.0, 0.1, 1.0, 10.0, 50.0, 1000.0] {
        let all = pattern(&line, tesla);
        // Four of D1 and six of D2; none vanishes at these fields.
        assert_eq!(all.iter().filter(|c| c.2 > 1e-6).count(), 10, "{tesla}");
        for q in -1..=1 {
            let share: f64 = all.iter().filter(|c| c.0 == q).map(|c| c.2).sum();
            assert!((share - 1.0 / 3.0).abs() < 1e-13, "{tesla} {q}: {share}");
        }
        // Tr over both levels: the mean over all components stays where it is without a field.
        let mean: f64 = all.iter().map(|c| c.1 * c.2).sum();
        assert!((mean - centre).abs() < 1e-9, "{tesla}: {mean} {centre}");
    }
    // Weak: places of g_J M_J with the electron's g, in Lorentz units (Condon & Shortley, ch. XVI).
    let weak = line.upper.at(0.0).expect("slopes");
    let ground = line.lower.at(0.0).expect("slopes");
    let g = ELECTRON_G.value;
    // g(²P1/2) = (4 − g_s)/3, g(²P3/2) = (2 + g_s)/3, g(²S1/2) = g_s.
    for component in line.components.list() {
        let (u, l) = (
            line.upper.states()[component.upper],
            line.lower.states()[component.lower],
        );
        let own = if u.level == 0 {
            (4.0 - g) / 3.0
        } else {
            (2.0 + g) / 3.0
        };
        let expected = own * f64::from(u.two_m) / 2.0 - g * f64::from(l.two_m) / 2.0;
        let ours = component.slope(&weak, &ground) / mu_b;
        assert!((ours - expected).abs() < 1e-13, "{ours} {expected}");
    }
    // Strong: three groups of two, a sixth of the strength each, at −1, 0, 1 Lorentz units; the others carry
    // (ζ/μ_B B)² of it.
    let strong = pattern(&line, 1000.0);
    let bright: Vec<_> = strong.iter().filter(|c| c.2 > 1e-3).collect();
    assert_eq!(bright.len(), 6);
    for q in -1..=1 {
        let group: Vec<_> = bright.iter().filter(|c| c.0 == q).collect();
        assert_eq!(group.len(), 2);
        for component in group {
            let place = (component.1 - centre) / (mu_b * 1000.0);
            assert!((place - f64::from(q)).abs() < 0.02, "{q}: {place}");
            assert!(
                (component.2 - 1.0 / 6.0).abs() < 1e-3,
                "{q}: {}",
                component.2
            );
        }
    }
    assert!(strong.iter().all(|c| c.2 > 1e-3 || c.2 < 2e-4));
    // At 50 T the groups are apart but for ζ = ⅔ · 17.2 cm⁻¹, against 23.3 cm⁻¹ a Lorentz unit: not yet three.
    let between = pattern(&line, 50.0);
    let faint = between.iter().filter(|c| c.2 < 0.1).map(|c| c.2);
    assert!(faint.fold(0.0_f64, f64::max) > 0.01);
}

#[test]
fn polarisations_share_alike_with_a_nucleus_too() {
    // A and B of ²³Na 3s and 3p, MHz: Steck, Sodium D Line Data (2000), from memory.
    let mhz = |value: f64| value / MHZ_PER_WAVENUMBER;
    let nucleus = |a: Vec<f64>, b: Vec<f64>| Nucleus {
        two_i: 3,
        g_i: 1.478_348,
        magnetic_dipole: a.into_iter().map(mhz).collect(),
        electric_quadrupole: b.into_iter().map(mhz).collect(),
    };
    let upper = nucleus(vec![94.44, 18.534], vec![0.0, 2.724]);
    let lower = nucleus(vec![885.813_064_4], Vec::new());
    let line = line(doublet(3, SODIUM.0, SODIUM.1), [Some(&upper), Some(&lower)]);
    assert_eq!(line.upper.states().len(), 24);
    for tesla in [0.0, 1e-4, 0.002, 0.05, 1.0, 30.0, 1000.0] {
        let all = pattern(&line, tesla);
        for q in -1..=1 {
            let share: f64 = all.iter().filter(|c| c.0 == q).map(|c| c.2).sum();
            assert!((share - 1.0 / 3.0).abs() < 1e-12, "{tesla} {q}: {share}");
        }
        let upper = line.upper.at(tesla).expect("energies");
        let lower = line.lower.at(tesla).expect("energies");
        let whole: f64 = line.components.strengths(&upper, &lower).iter().sum();
        // S (2I+1): ⟨½‖C‖½⟩² + ⟨3/2‖C‖½⟩² = 2/3 + 4/3 in units of ⟨1‖C¹‖0⟩².
        assert!((whole - 8.0).abs() < 1e-11, "{whole}");
    }
}

/// ζ from the interval, and b = μ_B B/ζ of a field.
fn lithium() -> (Line, f64) {
    // ⁷Li 2p: 10 053.18 MHz (Brog, Eck & Wieder, Phys. Rev. 153, 91 (1967), from memory).
    let interval = 10_053.18 / MHZ_PER_WAVENUMBER;
    let line = line(doublet(2, 14_903.648, 14_903.648 + interval), [None, None]);
    (line, interval * 2.0 / 3.0)
}

#[test]
fn a_doublet_crosses_in_closed_form() {
    let (line, zeta) = lithium();
    let split = &line.upper;
    let state = |level: usize, two_m: i32| {
        let mut all = split.states().iter();
        all.position(|s| s.level == level && s.two_m == two_m)
            .expect("a state")
    };
    let whole = map(split, None, None, (0.0, 1.5), 40).expect("a map");
    let wanted = Wanted {
        crossings: true,
        avoided: true,
        clock: None,
    };
    let chosen: Vec<usize> = (0..split.states().len()).collect();
    let fields = (whole.tesla.as_slice(), &whole.upper);
    let found = crossings(split, fields, &chosen, wanted, 100).expect("crossings");
    let g = ELECTRON_G.value;
    let tesla = |b: f64| b * zeta / BOHR_MAGNETON_WAVENUMBER.value;
    let at = |kind: CrossingKind, one: usize, two: usize| {
        let pair = |c: &&rungline_core::splitting::in_field::Crossing| {
            c.kind == kind
                && [c.first, c.second].contains(&one)
                && [c.first, c.second].contains(&two)
        };
        *found.found.iter().find(pair).expect("a crossing")
    };
    // From the 2 × 2 matrices of M = ½ and −½: b = (2 + g_s)/[2(1 + g_s)] and (1 + g_s/2)/g_s; with g_s = 2
    // that is 4/9 and 2/3 of the interval, 3.2 and 4.8 kG: the crossings that Brog, Eck & Wieder observed
    // (from memory).
    let first = at(CrossingKind::Crossing, state(1, -3), state(0, 1));
    let second = at(CrossingKind::Crossing, state(1, -3), state(0, -1));
    let expected = tesla((2.0 + g) / (2.0 * (1.0 + g)));
    let mut crossed = (first.tesla / expected - 1.0).abs();
    assert!((first.tesla - 0.32).abs() < 0.005);
    let expected = tesla((1.0 + g / 2.0) / g);
    crossed = crossed.max((second.tesla / expected - 1.0).abs());
    assert!((second.tesla - 0.48).abs() < 0.005);
    // M = −½ of both levels come closest at b = 1/[2(g_s − 1)], √2 ζ apart.
    let avoided = at(CrossingKind::Avoided, state(1, -1), state(0, -1));
    let expected = tesla(0.5 / (g - 1.0));
    assert!(
        (avoided.tesla / expected - 1.0).abs() < 1e-9,
        "{} {expected}",
        avoided.tesla
    );
    assert!((avoided.gap / (zeta * 2.0_f64.sqrt()) - 1.0).abs() < 1e-11);
    assert_eq!(
        (avoided.first, avoided.second),
        (state(0, -1), state(1, -1))
    );
    for pair in found.found.windows(2) {
        assert!(pair[0].tesla <= pair[1].tesla);
    }
    report(
        "splitting-crossings",
        Row {
            quantity: "crossing fields of a 2p doublet".to_owned(),
            cases: 2,
            worst: crossed,
            tolerance: 1e-10,
            measure: "relative".to_owned(),
            source: "2 × 2 matrices in closed form; 3.2 and 4.8 kG of ⁷Li observed by Brog, Eck & Wieder (1967)"
                .to_owned(),
        },
    );
    // No more than asked for, and how many are left out.
    let few = crossings(split, fields, &chosen, wanted, 1).expect("crossings");
    assert_eq!((few.found.len(), few.left_out), (1, found.found.len() - 1));
    assert_eq!(few.found[0], found.found[0]);
}

#[test]
fn components_with_one_lower_state_cross_with_their_upper_states() {
    let (line, zeta) = lithium();
    let whole = map(
        &line.upper,
        Some(&line.lower),
        Some(&line.components),
        (0.0, 1.0),
        33,
    );
    let whole = whole.expect("a map");
    let states = |place: usize| {
        let c = line.components.list()[place];
        (line.upper.states()[c.upper], line.lower.states()[c.lower])
    };
    let chosen: Vec<usize> = (0..line.components.list().len())
        .filter(|&place| {
            let (u, l) = states(place);
            l.two_m == -1 && matches!((u.level, u.two_m), (1, -3) | (0, 1))
        })
        .collect();
    assert_eq!(chosen.len(), 2);
    let both = (&line.upper, Some(&line.lower));
    let found = component_crossings(both, &line.components, &whole, &chosen, 10);
    let found = found.expect("crossings").found;
    let g = ELECTRON_G.value;
    let expected = (2.0 + g) / (2.0 * (1.0 + g)) * zeta / BOHR_MAGNETON_WAVENUMBER.value;
    let crossing: Vec<f64> = found
        .iter()
        .filter(|c| !c.farthest)
        .map(|c| c.tesla)
        .collect();
    assert_eq!(crossing.len(), 1);
    assert!(
        (crossing[0] / expected - 1.0).abs() < 1e-9,
        "{crossing:?} {expected}"
    );
    // A map is the fields one by one.
    let (mut upper, mut lower) = (AtField::default(), AtField::default());
    for (place, &tesla) in whole.tesla.iter().enumerate() {
        line.upper.at_into(tesla, &mut upper).expect("energies");
        line.lower.at_into(tesla, &mut lower).expect("energies");
        for (list, own) in whole.upper.energies.iter().zip(&upper.energies) {
            assert_eq!(list[place].to_bits(), own.to_bits());
        }
        let strengths = line.components.strengths(&upper, &lower);
        for (number, component) in line.components.list().iter().enumerate() {
            assert_eq!(
                whole.offsets[number][place],
                component.offset(&upper, &lower)
            );
            assert_eq!(whole.strengths[number][place], strengths[number]);
        }
    }
}

#[test]
fn linear_ends_where_second_order_says() {
    let line = sodium();
    let linear = Linear::new(&line.upper, &line.lower, &line.components).expect("a pattern");
    let difference = |tesla: f64| {
        let upper = line.upper.at(tesla).expect("energies");
        let lower = line.lower.at(tesla).expect("energies");
        linear.difference(&line.components, &upper, &lower)
    };
    let both = (&line.upper, &line.lower);
    let departs = |tolerance: Tolerance| {
        linear
            .departs_at(both, &line.components, tolerance, 100.0)
            .expect("a search")
    };
    // ±(2/9) [(g_s − 1) μ_B B]²/Δ is the second order of M = ±½ of both levels: ⟨½|S_z|3/2⟩ = √2/3.
    let mu_b = BOHR_MAGNETON_WAVENUMBER.value;
    let interval = SODIUM.1 - SODIUM.0;
    for tolerance in [1e-4, 1e-3] {
        let tesla = departs(Tolerance::Absolute(tolerance)).expect("a field");
        let expected = (tolerance * interval * 4.5).sqrt() / (mu_b * (ELECTRON_G.value - 1.0));
        assert!((tesla / expected - 1.0).abs() < 0.01, "{tesla} {expected}");
        assert!((difference(tesla).0 / tolerance - 1.0).abs() < 1e-6);
    }
    let tesla = departs(Tolerance::Relative(0.01)).expect("a field");
    let (apart, largest) = difference(tesla);
    assert!((apart / largest - 0.01).abs() < 1e-8, "{apart} {largest}");
    // The largest linear shift is that of σ of D2, 5/3 Lorentz units.
    assert!((largest / (mu_b * tesla) - 5.0 / 3.0).abs() < 2e-3);
    assert_eq!(departs(Tolerance::Absolute(1e6)), None);
    // A level alone is linear for ever.
    let alone = |two_j: i32, g: f64| Manifold::alone(two_j, 0.0, g).expect("a level");
    let operator = Operator::between(
        1,
        vec![Reduced {
            left: 0,
            right: 0,
            value: 1.0,
        }],
    );
    let (upper, lower) = (alone(3, 1.3), alone(1, 2.0));
    let upper = Split::new(&upper, None).expect("a split");
    let lower = Split::new(&lower, None).expect("a split");
    let all = (&[true][..], &[true][..]);
    let components = Components::new(&upper, &lower, &operator, all, 100).expect("components");
    let linear = Linear::new(&upper, &lower, &components).expect("a pattern");
    let ends = (&upper, &lower);
    let never = linear.departs_at(ends, &components, Tolerance::Relative(1e-9), 1000.0);
    assert_eq!(never.expect("a search"), None);
}

#[test]
fn maps_that_cannot_be_are_refused() {
    let line = sodium();
    let code = |range: (f64, f64), fields: usize| {
        map(&line.upper, None, None, range, fields)
            .unwrap_err()
            .code
    };
    assert_eq!(code((0.0, 1.0), 1), "map-too-large");
    assert_eq!(code((0.0, 1.0), usize::MAX), "map-too-large");
    for range in [
        (1.0, 1.0),
        (2.0, 1.0),
        (-1.0, 1.0),
        (0.0, 1001.0),
        (f64::NAN, 1.0),
        (0.0, f64::NAN),
    ] {
        assert_eq!(code(range, 10), "field-out-of-range");
    }
}

/// ρ² of one electron about a proton in closed form, without fine structure and in fields that leave ℓ and spin apart:
/// E = μ_B B (m + g_s m_s) + (μ_B² B²/2E_h) ⟨r²⟩ 2(ℓ²+ℓ−1+m²)/[(2ℓ−1)(2ℓ+3)] in a₀, and for 3s with 3d, m = 0, the
/// two by two of ⟨3s|r²|3d⟩/√5 (Bethe & Salpeter, *Quantum Mechanics of One- and Two-Electron Atoms* (1957), §47 and
/// eq. 3.20).
#[test]
fn the_diamagnetic_term_of_one_electron_is_the_closed_one() {
    let tesla = 900.0;
    let linear = BOHR_MAGNETON_WAVENUMBER.value * tesla;
    let square = linear * linear / (2.0 * HARTREE_WAVENUMBER.value);
    let split = |levels: &[OneElectron]| {
        let term = Diamagnetic::one_electron(levels, 1, None).expect("a charge");
        let manifold = Manifold::one_electron(levels).expect("levels").with(term);
        let split = Split::new(&manifold, None).expect("a split");
        let mut found = split.at(tesla).expect("a field").energies;
        found.sort_by(f64::total_cmp);
        found
    };
    let shift = |n: f64, l: f64, m: f64| {
        let radius = n * n * (5.0 * n * n + 1.0 - 3.0 * l * (l + 1.0)) / 2.0;
        radius * 2.0 * (l * l + l - 1.0 + m * m) / ((2.0 * l - 1.0) * (2.0 * l + 3.0))
    };
    let mut worst = 0.0_f64;
    let mut cases = 0;
    let mut compare = |found: &[f64], mut expected: Vec<f64>| {
        expected.sort_by(f64::total_cmp);
        assert_eq!(found.len(), expected.len());
        for (found, expected) in found.iter().zip(&expected) {
            worst = worst.max((found - expected).abs() / square);
            cases += 1;
        }
    };
    let spins = [-0.5, 0.5].map(|m| m * ELECTRON_G.value);
    for n in 1..=6_u8 {
        for l in 0..n.min(5) {
            let two_l = 2 * i32::from(l);
            let js = [two_l - 1, two_l + 1].into_iter().filter(|j| *j > 0);
            let levels: Vec<_> = js.map(|two_j| level(n, l, two_j, 0.0)).collect();
            let (n, l) = (f64::from(n), f64::from(l));
            let expected = (-two_l / 2..=two_l / 2).flat_map(|m| {
                let m = f64::from(m);
                spins.map(|spin| linear * (m + spin) + square * shift(n, l, m))
            });
            compare(&split(&levels), expected.collect());
        }
    }
    let between = multipole(
        Orbital::new(3, 0).expect("3s"),
        Orbital::new(3, 2).expect("3d"),
        2,
        1.0,
    );
    let between = between.expect("a charge").expect("it converges") * (2.0 / 3.0) / 5.0_f64.sqrt();
    let (s, d) = (shift(3.0, 0.0, 0.0), shift(3.0, 2.0, 0.0));
    let half = ((s - d) * (s - d) / 4.0 + between * between).sqrt();
    let mut expected = Vec::new();
    for spin in spins {
        expected.extend([-half, half].map(|h| linear * spin + square * ((s + d) / 2.0 + h)));
        for m in [-2.0, -1.0, 1.0, 2.0] {
            expected.push(linear * (m + spin) + square * shift(3.0, 2.0, m));
        }
    }
    let levels = [
        level(3, 0, 1, 0.0),
        level(3, 2, 3, 0.0),
        level(3, 2, 5, 0.0),
    ];
    compare(&split(&levels), expected);
    report(
        "splitting_diamagnetic_one_electron",
        Row {
            quantity: "⟨ρ²⟩ of states of hydrogen, n up to 6, a₀²".into(),
            cases,
            worst,
            tolerance: 1e-5,
            measure: "absolute".into(),
            source: "Bethe & Salpeter, Quantum Mechanics of One- and Two-Electron Atoms (1957), §47: closed forms".into(),
        },
    );
}
