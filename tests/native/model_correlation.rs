//! Correlation in second order: its coefficients against sums over intermediate states, and the levels
//! it leads to against observed ones.

use rungline_core::radial::correlation::{Screening, pair_amplitudes};
use rungline_core::structure::model::{Kind, Name, UsualDeviation};
use rungline_core::structure::{Basis, Hamiltonian, Integral};
use rungline_tests::model::{case, energy, orbital, spectrum};
use rungline_tests::{Row, report};

/// An arbitrary value of R^k.
fn arbitrary(k: i32, exchanged: bool) -> f64 {
    let k = f64::from(k);
    if exchanged {
        0.7 - 0.11 * k
    } else {
        1.0 + 0.3 * k
    }
}

/// Σ |⟨ℓ² LS|H|LS⟩|² over all states of the second configuration, by S and L of ℓ²; `own` is ℓ's place.
fn sums(subshells: &[u8], configurations: &[Vec<u32>], own: usize) -> Vec<((i32, i32), f64)> {
    let basis = Basis::new(subshells, configurations).expect("a basis");
    let hamiltonian = Hamiltonian::new(basis).expect("coefficients");
    let basis = hamiltonian.basis();
    let value = |parameter: usize| match hamiltonian.parameters()[parameter].integral {
        Integral::Mixing { k, a, b, c, d } => {
            // Direct where ℓ stays what it is.
            let is_direct = (a, c) == (own, own) || (b, d) == (own, own);
            arbitrary(k.into(), !is_direct)
        }
        // Acts alike in every term.
        Integral::OneElectron { .. } => 0.4,
        other => panic!("{other:?}"),
    };
    let mut found = Vec::new();
    for (block, entries) in basis.blocks().iter().zip(hamiltonian.electrostatic()) {
        let states = basis.block_states(block);
        for (place, state) in states
            .iter()
            .enumerate()
            .filter(|(_, s)| s.configuration == 0)
        {
            let total = (state.total().two_s, state.total().l);
            let mut row = vec![0.0; states.len()];
            for entry in entries {
                let other = match (entry.row == place, entry.column == place) {
                    (true, false) => entry.column,
                    (false, true) => entry.row,
                    _ => continue,
                };
                if states[other].configuration == 1 {
                    row[other] += entry.value * value(entry.parameter);
                }
            }
            found.push((total, row.iter().map(|h| h * h).sum()));
        }
    }
    found
}

/// The largest difference of two sets of term energies, a constant apart.
fn apart(sums: &[((i32, i32), f64)], expected: &[f64], constant: bool) -> f64 {
    let of = |l: i32| expected[usize::try_from(l).expect("L")];
    let shift = if constant {
        sums[0].1 - of(sums[0].0.1)
    } else {
        0.0
    };
    let scale = sums.iter().fold(0.0_f64, |most, s| most.max(s.1.abs()));
    let differences = sums
        .iter()
        .map(|((_, l), sum)| (sum - of(*l) - shift).abs() / scale);
    differences.fold(0.0, f64::max)
}

#[test]
fn coefficients_are_those_of_sums_over_intermediate_states() {
    let (mut worst, mut count): (f64, usize) = (0.0, 0);
    let squares = |l: i32, l_r: i32, l_s: i32, orders: f64| -> Vec<f64> {
        let mut amplitudes = vec![0.0; usize::try_from(2 * l + 1).expect("terms")];
        for (k, factors) in pair_amplitudes(l, l_r, l_s) {
            for (amplitude, factor) in amplitudes.iter_mut().zip(factors) {
                *amplitude += factor * arbitrary(k as i32, true);
            }
        }
        amplitudes.iter().map(|a| orders * a * a).collect()
    };
    // Both electrons in empty orbitals r s, or r².
    for (l, r, s) in [
        (1, 0, 2),
        (1, 1, 3),
        (2, 1, 3),
        (2, 0, 2),
        (3, 1, 3),
        (3, 2, 4),
    ] {
        let found = sums(&[l, r, s], &[vec![2, 0, 0], vec![0, 1, 1]], 0);
        let expected = squares(l.into(), r.into(), s.into(), 2.0);
        worst = worst.max(apart(&found, &expected, false));
        count += found.len();
    }
    for (l, r) in [(1, 2), (2, 1), (2, 3), (3, 2)] {
        let found = sums(&[l, r], &[vec![2, 0], vec![0, 2]], 0);
        let expected = squares(l.into(), r.into(), r.into(), 1.0);
        worst = worst.max(apart(&found, &expected, false));
        count += found.len();
    }
    // Two electrons of a full subshell in the places of both: besides what one electron does.
    for (n, l) in [(0, 1), (0, 2), (1, 2), (2, 3)] {
        let full = 4 * u32::from(n) + 2;
        let found = sums(&[n, l], &[vec![full, 2], vec![full - 2, 4]], 1);
        let expected = squares(l.into(), n.into(), n.into(), 1.0);
        worst = worst.max(apart(&found, &expected, true));
        count += found.len();
    }
    // One electron of a full subshell n in an empty r.
    for (n, l, r) in [
        (0, 1, 2),
        (1, 1, 3),
        (1, 2, 1),
        (1, 2, 3),
        (0, 2, 2),
        (2, 3, 4),
        (1, 3, 3),
    ] {
        let full = 4 * u32::from(n) + 2;
        let found = sums(&[n, l, r], &[vec![full, 2, 0], vec![full - 1, 2, 1]], 1);
        let least = (i32::from(l) - i32::from(r)).abs();
        let expected: Vec<f64> = Screening::new([l.into(), n.into(), r.into()])
            .sums(
                |k| arbitrary(k as i32, false),
                |place| arbitrary(least + 2 * place as i32, true),
            )
            .iter()
            .map(|sum| 2.0 * sum)
            .collect();
        worst = worst.max(apart(&found, &expected, true));
        count += found.len();
    }
    report(
        "structure_model_correlation_coefficients",
        Row {
            quantity: "second-order energies of the terms of ℓ², arbitrary integrals".into(),
            cases: count,
            worst,
            tolerance: 1e-11,
            measure: "relative to the largest".into(),
            source: "sums over all states of the intermediate configuration".into(),
        },
    );
}

#[test]
fn all_levels_of_two_f_electrons() {
    // Pr IV 4f²: Sugar, J. Opt. Soc. Am. 55, 1058 (1965), from memory.
    const OBSERVED: [(f64, i32); 13] = [
        (0.0, 8),
        (2152.1, 10),
        (4389.1, 12),
        (4996.6, 4),
        (6415.2, 6),
        (6854.8, 8),
        (9921.2, 8),
        (17_334.5, 4),
        (21_390.1, 0),
        (22_007.6, 2),
        (22_211.5, 12),
        (23_160.9, 4),
        (50_090.3, 0),
    ];
    // By how much in percent levels above the ground level are off, those of ³H apart.
    let off = |correlation: bool| -> (Vec<f64>, Vec<f64>) {
        let mut case = case(59, 141, 54, &["4f2"]);
        case.correlation = Some(correlation);
        let spectrum = spectrum(&case);
        let mut computed: Vec<(f64, i32)> = (0..13).map(|place| energy(&spectrum, place)).collect();
        let ground = computed[0].0;
        let (mut own, mut others) = (Vec::new(), Vec::new());
        for (place, (observed, two_j)) in OBSERVED.into_iter().enumerate() {
            // Levels of one J keep their order.
            let found = (computed.iter()).position(|level| level.1 == two_j);
            let (found, _) = computed.remove(found.expect("a level"));
            let deviation = 100.0 * ((found - ground) / observed - 1.0);
            match place {
                0 => {}
                1 | 2 => own.push(deviation),
                _ => others.push(deviation),
            }
        }
        (own, others)
    };
    let ((_, bare), (own, others)) = (off(false), off(true));
    let usual = UsualDeviation::of(orbital("4f")).expect("what is usual");
    let least = bare.iter().copied().fold(f64::INFINITY, f64::min);
    let most = bare.iter().copied().fold(0.0, f64::max);
    assert_eq!((least.floor() as u8, most.ceil() as u8), usual.without);
    let largest = |of: &[f64]| of.iter().fold(0.0_f64, |most, d| most.max(d.abs()));
    assert_eq!(largest(&others).ceil() as u8, usual.with);
    let worst = largest(&own).max(largest(&others)) / 100.0;
    report(
        "structure_model_correlation_f2",
        Row {
            quantity: "all levels of Pr IV 4f² with correlation, nothing fitted".into(),
            cases: 12,
            worst,
            tolerance: 0.10,
            measure: "relative".into(),
            source: "Sugar, J. Opt. Soc. Am. 55, 1058 (1965), from memory".into(),
        },
    );
}

#[test]
fn correlation_shows_itself_in_parameters_that_can_be_given() {
    let mut case = case(22, 48, 18, &["3d2", "3d 4s"]);
    case.correlation = Some(true);
    let d = orbital("3d");
    let with = spectrum(&case);
    let value = |name: Name| {
        let found = with
            .parameters
            .iter()
            .find(|v| v.name == name && v.configurations == (0, 0));
        *found.expect("a parameter")
    };
    let alpha = value(Name::Alpha(d));
    assert!(alpha.kind == Kind::Computed && (20.0..80.0).contains(&alpha.value));
    assert!(value(Name::Beta(d)).computed.is_some());
    case.correlation = Some(false);
    let without = spectrum(&case);
    assert!(
        without
            .parameters
            .iter()
            .all(|v| !matches!(v.name, Name::Alpha(_) | Name::Beta(_)))
    );
    let direct = Name::Direct { k: 2, a: d, b: d };
    let change = value(Name::Change { k: 2, a: d });
    assert!(change.kind == Kind::Computed && change.value < -10_000.0);
    let bare = without
        .parameters
        .iter()
        .find(|v| v.name == direct)
        .expect("F²");
    assert_eq!(value(direct).value, bare.value);
}
