//! Fields on computed levels: limits of weak and strong fields, sums, the diamagnetic term.

use rungline_core::constants::{BOHR_MAGNETON_WAVENUMBER, ELECTRON_G, HARTREE_WAVENUMBER};
use rungline_core::splitting::in_field::{Components, Diamagnetic, Manifold, Operator, Split};
use rungline_core::structure::model::{Case, MultipoleKind, Scale};
use rungline_core::structure::{Basis, Hamiltonian, Integral, Levels};
use rungline_tests::model::{case, spectrum};
use rungline_tests::{Row, report};

/// d², d³ or p³ of invented integrals, with ζ as given; levels and g_J of `structure` beside the manifold.
fn invented(subshells: &[u8], occupations: &[u32], zeta: f64) -> (Manifold, Vec<Option<f64>>) {
    let basis = Basis::new(subshells, &[occupations.to_vec()]).expect("a basis");
    let own = Hamiltonian::new(basis).expect("coefficients");
    let values = own.values(|parameter| match parameter.integral {
        Integral::Direct { k, .. } => 60_000.0 / f64::from(k),
        Integral::Exchange { k, .. } => 9_000.0 / f64::from(k + 1),
        Integral::SpinOrbit { .. } => zeta,
        _ => 0.0,
    });
    let levels = Levels::solve(&own, &values).expect("levels");
    let energies: Vec<f64> = levels.levels.iter().map(|level| level.energy).collect();
    let electron = ELECTRON_G.value;
    let g = levels
        .levels
        .iter()
        .map(|l| levels.g(own.basis(), l, electron));
    let g = g.collect();
    (
        Manifold::of_levels(own.basis(), &levels, &energies).expect("a manifold"),
        g,
    )
}

const CASES: [(&[u8], &[u32]); 4] = [(&[1], &[3]), (&[2], &[2]), (&[2], &[3]), (&[2, 1], &[1, 1])];

#[test]
fn weak_fields_have_the_slopes_of_g() {
    let mu_b = BOHR_MAGNETON_WAVENUMBER.value;
    for (subshells, occupations) in CASES {
        let (manifold, g) = invented(subshells, occupations, 500.0);
        let split = Split::new(&manifold, None).expect("a split");
        let (limit, weak) = (split.at(0.0), split.at(1e-4));
        let (limit, weak) = (limit.expect("slopes"), weak.expect("slopes"));
        for (place, state) in split.states().iter().enumerate() {
            let expected = g[state.level].unwrap_or(0.0) * f64::from(state.two_m) / 2.0;
            assert!((limit.slopes[place] / mu_b - expected).abs() < 1e-11);
            // The second order leaves μ_B B over the distance of levels.
            assert!((weak.slopes[place] / mu_b - expected).abs() < 1e-4);
            let shift = limit.slopes[place] * 1e-4;
            assert!((weak.shifts[place] - shift).abs() < 1e-8);
        }
    }
}

#[test]
fn strong_fields_have_the_slopes_of_m_l_and_m_s() {
    let (mut worst, mut cases) = (0.0_f64, 0);
    let (mu_b, g) = (BOHR_MAGNETON_WAVENUMBER.value, ELECTRON_G.value);
    for (subshells, occupations) in CASES {
        // Repulsion commutes with L and S; only ζ, far below μ_B B, does not.
        let (manifold, _) = invented(subshells, occupations, 0.01);
        let split = Split::new(&manifold, None).expect("a split");
        let at = split.at(1000.0).expect("slopes");
        let mut spins: Vec<i32> = Vec::new();
        for (state, slope) in split.states().iter().zip(&at.slopes) {
            // M_L + g_s M_S = M + (g_s − 1) M_S.
            let two_m_s = (2.0 * slope / mu_b - f64::from(state.two_m)) / (g - 1.0);
            worst = worst.max((two_m_s - two_m_s.round()).abs());
            cases += 1;
            spins.push(two_m_s.round() as i32);
        }
        // As many states of each M_S as determinants.
        let mut expected = vec![0];
        for (&l, &electrons) in subshells.iter().zip(occupations) {
            let orbitals = 2 * (2 * u32::from(l) + 1);
            let of_shell = (0_u32..1 << orbitals).filter(|set| set.count_ones() == electrons);
            // Even bits up, odd bits down.
            let up =
                of_shell.map(|set| 2 * (set & 0x5555_5555).count_ones() as i32 - electrons as i32);
            let up: Vec<i32> = up.collect();
            expected = expected
                .iter()
                .flat_map(|a| up.iter().map(move |b| a + b))
                .collect();
        }
        spins.sort_unstable();
        expected.sort_unstable();
        assert_eq!(spins, expected);
    }
    report(
        "splitting-strong",
        Row {
            quantity: "slopes in the Paschen–Back limit: p³, d², d³, d p".to_owned(),
            cases,
            worst,
            tolerance: 1e-5,
            measure: "absolute, 2 M_S from (slope/μ_B − M)/(g_s − 1)".to_owned(),
            source: "M_L + g_s M_S of the determinants".to_owned(),
        },
    );
}

#[test]
fn sums_of_energies_are_not_linear_in_the_field() {
    for (subshells, occupations) in CASES {
        let (manifold, _) = invented(subshells, occupations, 300.0);
        let split = Split::new(&manifold, None).expect("a split");
        let start: f64 = split.at(0.0).expect("energies").energies.iter().sum();
        for tesla in [0.0, 0.01, 1.0, 30.0, 1000.0] {
            let at = split.at(tesla).expect("energies");
            let (sum, slope) = (
                at.energies.iter().sum::<f64>(),
                at.slopes.iter().sum::<f64>(),
            );
            let size: f64 = at.energies.iter().map(|e| e.abs()).sum();
            assert!((sum - start).abs() < 1e-12 * size, "{tesla}: {sum} {start}");
            assert!(slope.abs() < 1e-10, "{tesla}: {slope}");
            // Of each M they are: μ_B B Tr(M + (g_s − 1) M_S).
            let shifts: f64 = at.shifts.iter().sum();
            assert!(shifts.abs() < 1e-8, "{tesla}: {shifts}");
        }
    }
}

#[test]
fn slopes_are_the_derivatives() {
    let (manifold, _) = invented(&[2], &[3], 400.0);
    let split = Split::new(&manifold, None).expect("a split");
    for tesla in [0.5, 20.0, 400.0] {
        let step = tesla * 1e-4;
        let at = |tesla: f64| split.at(tesla).expect("energies");
        let (low, own, high) = (at(tesla - step), at(tesla), at(tesla + step));
        for (place, slope) in own.slopes.iter().enumerate() {
            let numeric = (high.shifts[place] - low.shifts[place]) / (2.0 * step);
            assert!((slope - numeric).abs() < 1e-5, "{tesla}: {slope} {numeric}");
        }
    }
}

#[test]
fn the_diamagnetic_term_of_hydrogen() {
    // μ_B²B²/(2E_h) ⟨r² sin²θ⟩ with ⟨r²⟩ = 3 and 30, ⟨sin²θ⟩ = ⅔ for s, ⅖ and ⅘ for p with m = 0 and ±1
    // (Bethe & Salpeter, Quantum Mechanics of One- and Two-Electron Atoms (1957), § 3 and 47).
    let case = Case {
        relativity: false,
        ..case(1, 1, 0, &["1s", "2p"])
    };
    let hydrogen = spectrum(&case);
    let mu_b = BOHR_MAGNETON_WAVENUMBER.value;
    let unit = mu_b * mu_b / (2.0 * HARTREE_WAVENUMBER.value);
    let mut worst = 0.0_f64;
    for (parity, expected) in [(0, vec![(1, 2.0)]), (1, vec![(3, 24.0), (1, 36.0)])] {
        let levels = &hydrogen.parities[parity].levels.levels;
        let energies: Vec<f64> = levels.iter().map(|level| level.energy).collect();
        let plain = Manifold::of_parity(&hydrogen, parity, &energies).expect("a manifold");
        let operator = Diamagnetic::of_parity(&hydrogen, parity).expect("an operator");
        let with = plain.clone().with(operator);
        let tesla = 1000.0;
        let mean = if parity == 0 { 2.0 } else { 20.0 };
        let shift = with.diamagnetic_shift(tesla).expect("a shift");
        assert!((shift / (unit * tesla * tesla * mean) - 1.0).abs() < 1e-6);
        let (plain, with) = (Split::new(&plain, None), Split::new(&with, None));
        let (plain, with) = (plain.expect("a split"), with.expect("a split"));
        // The sum over states of one M is a trace, in which no mixing counts.
        let sum = |split: &Split, two_m: i32| -> f64 {
            let at = split.at(tesla).expect("energies");
            let states = split.states().iter().zip(at.energies);
            states
                .filter(|(s, _)| s.two_m.abs() == two_m)
                .map(|(_, e)| e)
                .sum()
        };
        for (two_m, squares) in expected {
            let ours = (sum(&with, two_m) - sum(&plain, two_m)) / (2.0 * unit * tesla * tesla);
            worst = worst.max((ours / squares - 1.0).abs());
        }
    }
    report(
        "splitting-diamagnetic",
        Row {
            quantity: "diamagnetic term of hydrogen 1s and 2p".to_owned(),
            cases: 3,
            worst,
            tolerance: 1e-6,
            measure: "relative".to_owned(),
            source: "Bethe & Salpeter (1957), ⟨r² sin²θ⟩ in closed form".to_owned(),
        },
    );
}

#[test]
fn strong_fields_keep_m_s_in_every_line() {
    // E1 and E2 do not touch the spin: with ζ far below μ_B B components change M_S by nothing, which amplitudes
    // between levels of L S J give only with the right signs. Slopes tell M_S, as above.
    let (mu_b, g) = (BOHR_MAGNETON_WAVENUMBER.value, ELECTRON_G.value);
    let sodium = (11, 23, 10, &["3s", "3p", "3d"][..]);
    let scandium = (21, 45, 18, &["3d 4s", "3d 4p"][..]);
    for (z, mass_number, core, outside) in [sodium, scandium] {
        let case = Case {
            scale: Scale {
                zeta: 1e-5,
                ..Scale::default()
            },
            ..case(z, mass_number, core, outside)
        };
        let atom = spectrum(&case);
        let split = |parity: usize| {
            let levels = &atom.parities[parity].levels.levels;
            let energies: Vec<f64> = levels.iter().map(|level| level.energy).collect();
            let manifold = Manifold::of_parity(&atom, parity, &energies).expect("a manifold");
            (
                Split::new(&manifold, None).expect("a split"),
                vec![true; levels.len()],
            )
        };
        for (kind, parities) in [
            (MultipoleKind::E1, (1, 0)),
            (MultipoleKind::E1, (0, 1)),
            (MultipoleKind::E2, (0, 0)),
            (MultipoleKind::E2, (1, 1)),
        ] {
            let operator = Operator::of_spectrum(&atom, kind, parities).expect("an operator");
            let (upper, of_upper) = split(parities.0);
            let (lower, of_lower) = split(parities.1);
            let chosen = (of_upper.as_slice(), of_lower.as_slice());
            let components = Components::new(&upper, &lower, &operator, chosen, 100_000);
            let components = components.expect("components");
            let (above, below) = (upper.at(1000.0), lower.at(1000.0));
            let (above, below) = (above.expect("energies"), below.expect("energies"));
            let strengths = components.strengths(&above, &below);
            let whole: f64 = strengths.iter().sum();
            assert!(whole > 0.1, "{z} {kind:?}");
            let mut turned = 0.0;
            for (component, strength) in components.list().iter().zip(&strengths) {
                let slope = component.slope(&above, &below) / mu_b;
                let change = (slope - f64::from(component.q)) / (g - 1.0);
                if change.abs() > 0.5 {
                    turned += strength;
                }
            }
            assert!(turned < 1e-8 * whole, "{z} {kind:?}: {turned} of {whole}");
            // Each q has its share of the whole.
            let rank = i32::from(operator.rank());
            for q in -rank..=rank {
                let list = components.list().iter().zip(&strengths);
                let share: f64 = list.filter(|(c, _)| c.q == q).map(|(_, s)| s).sum();
                let expected = whole / f64::from(2 * rank + 1);
                assert!((share / expected - 1.0).abs() < 1e-10, "{z} {kind:?} {q}");
            }
        }
    }
}
