//! Hydrogen-like functions, integrals and levels.
//!
//! `tests/vectors/hydrogenic.json`: exact rational arithmetic of our own, three ⟨r²⟩ and the Dirac
//! energies by SymPy 1.14.0 (BSD-3-Clause); the file says which.

use rungline_core::configuration::{MAX_N, Orbital, l_of_letter};
use rungline_core::constants::{ELECTRON_G, FINE_STRUCTURE, HARTREE_WAVENUMBER};
use rungline_core::quantity::TwiceJ;
use rungline_core::radial::hydrogenic::{Hydrogenic, Maximum, dirac, multipole, slater};
use rungline_tests::{Row, relative_error, report, vector_json};
use serde_json::Value;

fn orbital(n: u8, l: u8) -> Orbital {
    Orbital::new(n, l).unwrap_or_else(|| panic!("n {n} l {l}"))
}

fn named(name: &str) -> Orbital {
    let letter = name.chars().last().unwrap();
    orbital(
        name[..name.len() - 1].parse().unwrap(),
        l_of_letter(letter).unwrap(),
    )
}

fn hydrogen(n: u8, l: u8) -> Hydrogenic {
    Hydrogenic::new(orbital(n, l), 1.0).unwrap()
}

fn fraction(text: &str) -> f64 {
    match text.split_once('/') {
        Some((above, below)) => above.parse::<f64>().unwrap() / below.parse::<f64>().unwrap(),
        None => text.parse().unwrap(),
    }
}

fn number(case: &Value, key: &str) -> f64 {
    case[key].as_str().unwrap().parse().unwrap()
}

fn small(case: &Value, key: &str) -> u8 {
    u8::try_from(case[key].as_u64().unwrap()).unwrap()
}

fn cases(kind: &str) -> Vec<Value> {
    vector_json("hydrogenic.json")[kind]
        .as_array()
        .unwrap()
        .clone()
}

fn row(quantity: &str, cases: usize, worst: f64, tolerance: f64, source: &str) -> Row {
    Row {
        quantity: quantity.into(),
        cases,
        worst,
        tolerance,
        measure: "relative".into(),
        source: source.into(),
    }
}

const OWN: &str = "own exact rational arithmetic, hydrogenic.json";

#[test]
fn means_of_powers_are_the_exact_ones() {
    let (mut worst, mut count) = (0.0_f64, 0);
    for case in cases("rk") {
        let (n, l) = (small(&case, "n"), small(&case, "l"));
        let exact = case["exact"].as_object().unwrap();
        for k in -4..=4 {
            let mean = hydrogen(n, l).expectation(k).unwrap();
            match exact.get(&k.to_string()) {
                Some(value) => {
                    let value = fraction(value.as_str().unwrap());
                    worst = worst.max(relative_error(mean.unwrap(), value));
                    count += 1;
                }
                // Not in the list: it diverges, or k = 0.
                None => assert_eq!(mean, (k == 0).then_some(1.0), "{n} {l} {k}"),
            }
        }
    }
    report(
        "radial-hydrogenic-means",
        row("hydrogenic ⟨r^k⟩, k = −4…4", count, worst, 1e-13, OWN),
    );
}

#[test]
fn dipole_integrals_are_the_exact_ones() {
    let (mut worst, mut count) = (0.0_f64, 0);
    for case in cases("dipole") {
        let [a, b] = ["a", "b"].map(|key| named(case[key].as_str().unwrap()));
        for (first, second) in [(a, b), (b, a)] {
            let value = multipole(first, second, 1, 1.0).unwrap().unwrap();
            worst = worst.max(relative_error(value, number(&case, "value")));
            count += 1;
        }
    }
    report(
        "radial-hydrogenic-dipole",
        row("hydrogenic dipole integrals", count, worst, 1e-13, OWN),
    );
}

#[test]
fn slater_integrals_are_the_exact_ones() {
    let (mut worst, mut count) = (0.0_f64, 0);
    for case in cases("slater") {
        let name = case["integral"].as_str().unwrap();
        let k: u32 = name[1..2].parse().unwrap();
        let (a, b) = name[3..name.len() - 1].split_once(',').unwrap();
        let (a, b) = (named(a), named(b));
        let [third, fourth] = if name.starts_with('F') {
            [a, b]
        } else {
            [b, a]
        };
        let value = slater(k, [a, b, third, fourth], 1.0).unwrap();
        worst = worst.max(relative_error(value, number(&case, "value")));
        count += 1;
        let turned = slater(k, [b, a, fourth, third], 26.0).unwrap() / 26.0;
        assert!(relative_error(turned, value) < 1e-14, "{name}");
    }
    report(
        "radial-hydrogenic-slater",
        row("hydrogenic Slater integrals", count, worst, 1e-13, OWN),
    );
}

#[test]
fn spin_orbit_parameters_are_the_exact_ones() {
    let (mut worst, mut count) = (0.0_f64, 0);
    for case in cases("zeta") {
        let zeta = hydrogen(small(&case, "n"), small(&case, "l"))
            .spin_orbit()
            .unwrap();
        let alpha = FINE_STRUCTURE.value;
        let exact = fraction(case["zeta_over_alpha2_Z4_hartree"].as_str().unwrap());
        let printed = case["zeta_Z1_cm1"].as_f64().or_else(|| {
            let text = case["zeta_Z1_cm1"].as_str()?;
            text.parse().ok()
        });
        worst = worst.max(relative_error(zeta, exact * alpha * alpha));
        worst = worst.max(relative_error(
            zeta * HARTREE_WAVENUMBER.value,
            printed.unwrap(),
        ));
        count += 1;
    }
    assert_eq!(hydrogen(3, 0).spin_orbit(), None);
    report(
        "radial-hydrogenic-zeta",
        row("hydrogenic ζ", count, worst, 1e-13, OWN),
    );
}

#[test]
fn dirac_levels_are_those_of_the_formula() {
    let (mut worst, mut count) = (0.0_f64, 0);
    for case in cases("dirac") {
        let shell = orbital(small(&case, "n"), small(&case, "l"));
        let j = TwiceJ::from_doubled(small(&case, "twoJ").into());
        let energy = dirac::energy(shell, j, small(&case, "Z"), None).unwrap();
        worst = worst.max(relative_error(energy, number(&case, "E_hartree")));
        count += 1;
    }
    report(
        "radial-hydrogenic-dirac",
        row(
            "Dirac energies of one electron, infinite mass",
            count,
            worst,
            1e-13,
            "SymPy 1.14.0 (BSD-3-Clause), hydrogenic.json",
        ),
    );
}

#[test]
fn functions_are_normalised_and_orthogonal_to_the_highest_n() {
    // The exact sum for k = 0, every pair of one l in steps, to n = 50.
    for l in [0, 1, 2, 5, 20, 48] {
        let all: Vec<u8> = (l + 1..=MAX_N)
            .filter(|n| n % 7 == 1 || *n == MAX_N)
            .collect();
        for &n in &all {
            for &m in &all {
                let overlap = multipole(orbital(n, l), orbital(m, l), 0, 3.0)
                    .unwrap()
                    .unwrap();
                let expected = f64::from(u8::from(n == m));
                assert!((overlap - expected).abs() < 1e-14, "{n} {m} {l}: {overlap}");
            }
        }
    }
}

#[test]
fn closed_forms_agree_with_the_exact_sum_to_the_highest_n() {
    let (mut worst, mut count) = (0.0_f64, 0);
    for n in (1..=MAX_N).filter(|n| *n < 12 || n % 9 == 5) {
        for l in (0..n).filter(|l| *l < 4 || l % 8 == 1 || l + 1 == n) {
            for z in [1.0, 26.0] {
                let function = Hydrogenic::new(orbital(n, l), z).unwrap();
                for k in -4..=4 {
                    let sum = multipole(orbital(n, l), orbital(n, l), k, z).unwrap();
                    let closed = function.expectation(k).unwrap();
                    assert_eq!(sum.is_some(), closed.is_some(), "{n} {l} {k}");
                    if let (Some(sum), Some(closed)) = (sum, closed) {
                        worst = worst.max(relative_error(sum, closed));
                        count += 1;
                    }
                }
            }
        }
    }
    report(
        "radial-hydrogenic-sums",
        row(
            "hydrogenic ⟨r^k⟩ to n = 50: closed form against the exact sum",
            count,
            worst,
            5e-15,
            "Bethe & Salpeter 1957, eqs. 3.20–3.26, against the definition",
        ),
    );
}

#[test]
fn kramers_relation_and_virial_theorem_hold() {
    // (k+1)/n² ⟨r^k⟩ − (2k+1) ⟨r^(k−1)⟩ + k/4 [(2l+1)² − k²] ⟨r^(k−2)⟩ = 0 (Kramers 1938).
    for n in 1..=MAX_N {
        for l in 0..n {
            let mean = |k: i32| hydrogen(n, l).expectation(k).unwrap().unwrap_or(0.0);
            let square = f64::from(n) * f64::from(n);
            for k in 0_i32..=4 {
                let q = f64::from(k);
                let width = f64::from(2 * u32::from(l) + 1);
                let terms = [
                    (q + 1.0) / square * mean(k),
                    -(2.0 * q + 1.0) * mean(k - 1),
                    q / 4.0 * (width * width - q * q) * mean(k - 2),
                ];
                let size: f64 = terms.iter().map(|term| term.abs()).fold(0.0, f64::max);
                assert!(
                    terms.iter().sum::<f64>().abs() < 4e-15 * size,
                    "{n} {l} {k}"
                );
            }
            // 2E = −Z⟨1/r⟩.
            let energy = hydrogen(n, l).energy();
            assert!(relative_error(2.0 * energy, -mean(-1)) < 1e-15);
        }
    }
}

/// ∫₀^∞ f dr by the trapezoid rule in t = √r, where all waves have about one length.
fn integral(f: impl Fn(f64) -> f64, end: f64) -> f64 {
    let points = 6000;
    let step = end.sqrt() / f64::from(points);
    (1..=points)
        .map(|i| {
            let t = step * f64::from(i);
            2.0 * t * f(t * t)
        })
        .sum::<f64>()
        * step
}

#[test]
fn sampled_functions_carry_their_norm_energy_and_radii() {
    for (n, l) in [
        (1, 0),
        (2, 1),
        (4, 0),
        (7, 3),
        (20, 0),
        (35, 12),
        (50, 0),
        (50, 1),
        (50, 49),
    ] {
        let function = hydrogen(n, l);
        let end = 4.0 * f64::from(n) * f64::from(n) + 60.0 * f64::from(n);
        let density = |r: f64| function.reduced(r) * function.reduced(r);
        for (k, tolerance) in [(0, 1e-12), (1, 1e-12), (2, 1e-12)] {
            let power = |r: f64| [1.0, r, r * r][k];
            let sum = integral(|r| density(r) * power(r), end);
            let mean = function.expectation(k as i32).unwrap().unwrap();
            assert!(
                relative_error(sum, mean) < tolerance,
                "{n} {l} {k}: {sum} {mean}"
            );
        }
        let other = if l + 1 < n { n - 1 } else { n + 1 };
        if other <= MAX_N {
            let partner = hydrogen(other, l);
            let overlap = integral(|r| function.reduced(r) * partner.reduced(r), end * 1.2);
            assert!(overlap.abs() < 1e-12, "{n} {other} {l}: {overlap}");
        }
        // Positive near the origin.
        assert!(function.radial(1e-3) > 0.0, "{n} {l}");
    }
    // Another charge only scales: R(Z, r) = Z^(3/2) R(1, Zr).
    for z in [1.0, 26.0, 92.0] {
        let function = Hydrogenic::new(orbital(1, 0), z).unwrap();
        for r in [0.0, 0.01, 0.3, 2.0] {
            let exact = z * z.sqrt() * hydrogen(1, 0).radial(z * r);
            assert!(relative_error(function.radial(r), exact) < 1e-13, "{z} {r}");
        }
    }
}

#[test]
fn functions_and_maxima_are_those_of_sixty_digits() {
    let file = vector_json("hydrogenic_functions.json");
    let (mut worst, mut count) = (0.0_f64, 0);
    for case in file["samples"].as_array().unwrap() {
        let function = hydrogen(small(case, "n"), small(case, "l"));
        let r = case["r"].as_f64().unwrap();
        let exact = number(case, "R");
        // Among the waves the error is measured by the height of the nearest one, outside by R.
        let maxima = function.maxima();
        let among = maxima[0].radius <= r && r <= maxima.last().unwrap().radius;
        let nearest = maxima.iter().min_by(|a, b| {
            let distance = |each: &Maximum| (each.radius - r).abs();
            distance(a).total_cmp(&distance(b))
        });
        let height = nearest.unwrap().density.sqrt() / r;
        let size = if among { height } else { exact.abs() };
        worst = worst.max((function.radial(r) - exact).abs() / size);
        count += 1;
    }
    let source = "mpmath 1.3.0 (BSD-3-Clause), 60 digits, hydrogenic_functions.json";
    report(
        "radial-hydrogenic-functions",
        row("hydrogenic R(r) to n = 50", count, worst, 1e-13, source),
    );
    let (mut worst, mut count) = (0.0_f64, 0);
    for case in file["maxima"].as_array().unwrap() {
        let maxima = hydrogen(small(case, "n"), small(case, "l")).maxima();
        let radii = case["radii"].as_array().unwrap();
        assert_eq!(maxima.len(), radii.len());
        for (maximum, radius) in maxima.iter().zip(radii) {
            let radius: f64 = radius.as_str().unwrap().parse().unwrap();
            worst = worst.max(relative_error(maximum.radius, radius));
            count += 1;
        }
    }
    report(
        "radial-hydrogenic-maxima",
        row(
            "hydrogenic maxima of P² to n = 50",
            count,
            worst,
            1e-13,
            source,
        ),
    );
}

#[test]
fn radial_functions_are_tame_everywhere() {
    for n in [1, 2, 25, MAX_N] {
        for l in [0, n / 2, n - 1] {
            for r in [0.0, -1.0, f64::NAN, f64::INFINITY, 1e-300, 1e-9, 1e5, 1e300] {
                let value = hydrogen(n, l).reduced(r);
                assert!(value.is_finite() && value.abs() < 2.0, "{n} {l} {r}");
            }
        }
    }
}

#[test]
fn maxima_lie_between_the_zeros() {
    for n in 1..=MAX_N {
        for l in 0..n {
            let function = hydrogen(n, l);
            let maxima = function.maxima();
            assert_eq!(maxima.len(), usize::from(n - l), "{n} {l}");
            for pair in maxima.windows(2) {
                let [left, right] = pair else { continue };
                assert!(left.radius < right.radius);
                // One zero between two maxima.
                let (a, b) = (
                    function.reduced(left.radius),
                    function.reduced(right.radius),
                );
                assert!(a * b < 0.0, "{n} {l}");
            }
            for maximum in &maxima {
                for beside in [1.0 - 1e-5, 1.0 + 1e-5] {
                    let value = function.reduced(maximum.radius * beside);
                    assert!(value * value < maximum.density, "{n} {l}");
                }
            }
            // The outermost one is the highest.
            let most = function.most_probable();
            assert_eq!(most.radius, maxima.last().unwrap().radius);
        }
        // n−1 = l: one maximum at n² (a circular orbit).
        let circular = hydrogen(n, n - 1).most_probable();
        let square = f64::from(n) * f64::from(n);
        assert!(relative_error(circular.radius, square) < 1e-13, "{n}");
    }
    let iron = Hydrogenic::new(orbital(1, 0), 26.0).unwrap();
    assert!(relative_error(iron.most_probable().radius, 1.0 / 26.0) < 1e-14);
    // 2s: (3 ± √5) a₀.
    let maxima = hydrogen(2, 0).maxima();
    assert!(relative_error(maxima[0].radius, 3.0 - 5.0_f64.sqrt()) < 1e-13);
    assert!(relative_error(maxima[1].radius, 3.0 + 5.0_f64.sqrt()) < 1e-13);
}

#[test]
fn oscillator_strengths_add_up() {
    // Σ over the bound states and what the continuum must hold: 1s–np, f = (2/3) ΔE ⟨r⟩². The bound
    // part is 0.5650 (Bethe & Salpeter 1957, table 13, three digits from memory); beyond n = 50
    // f → 1.5625/n³ (Kramers' limit; same place), summed as an integral.
    let ground = orbital(1, 0);
    let mut bound = 0.0;
    for n in 2..=MAX_N {
        let radial = multipole(ground, orbital(n, 1), 1, 1.0).unwrap().unwrap();
        let gap = 0.5 - 0.5 / (f64::from(n) * f64::from(n));
        bound += 2.0 / 3.0 * gap * radial * radial;
    }
    bound += 1.5625 / (2.0 * 50.5 * 50.5);
    assert!((bound - 0.565).abs() < 5e-4, "{bound}");
    // A closed sum: Σ_n' ⟨n l|r|n' l±1⟩² over all states is ⟨r²⟩, so a bound part stays below.
    for (n, l) in [(2_u8, 1_u8), (5, 3), (10, 0)] {
        let mean = hydrogen(n, l).expectation(2).unwrap().unwrap();
        let sum: f64 = (l + 2..=MAX_N)
            .map(|m| {
                multipole(orbital(n, l), orbital(m, l + 1), 1, 1.0)
                    .unwrap()
                    .unwrap()
            })
            .map(|radial| radial * radial)
            .sum();
        assert!(sum < mean && sum > 0.5 * mean, "{n} {l}: {sum} of {mean}");
    }
}

#[test]
fn neighbours_of_one_shell_follow_the_closed_formula() {
    // ⟨n l−1|r|n l⟩ = −(3/2) n √(n²−l²) (Pauli 1926; Bethe & Salpeter 1957, eq. 63.5).
    for n in 2..=MAX_N {
        for l in 1..n {
            let value = multipole(orbital(n, l - 1), orbital(n, l), 1, 1.0)
                .unwrap()
                .unwrap();
            let (n, l) = (f64::from(n), f64::from(l));
            let exact = -1.5 * n * (n * n - l * l).sqrt();
            assert!(relative_error(value, exact) < 1e-14, "{n} {l}");
        }
    }
}

#[test]
fn a_finite_mass_moves_levels_as_the_reduced_mass_and_recoil_say() {
    let alpha = FINE_STRUCTURE.value;
    // The proton, in electron masses (CODATA 2022: 1836.152673426).
    let mass = 1_836.152_673_426;
    let reduced = mass / (1.0 + mass);
    for z in [1_u8, 26] {
        for (n, l) in [(1_u8, 0_u8), (2, 1), (5, 2)] {
            let charge = f64::from(z);
            let plain = Hydrogenic::new(orbital(n, l), charge).unwrap().energy();
            for level in dirac::levels(orbital(n, l), z, Some(mass)).unwrap() {
                let relativistic = (charge * alpha) * (charge * alpha);
                let expected = reduced * plain;
                assert!(relative_error(level.energy, expected) < 2.0 * relativistic);
            }
        }
    }
    // Fine structure in order α²: ζ(l + 1/2) (μ/m)³ (1 + 2m/M), from the Breit Hamiltonian.
    let levels = dirac::levels(orbital(2, 1), 1, Some(mass)).unwrap();
    let zeta = hydrogen(2, 1).spin_orbit().unwrap();
    let split = levels[1].energy - levels[0].energy;
    let expected = 1.5 * zeta * reduced * reduced * reduced * (1.0 + 2.0 / mass);
    assert!(
        relative_error(split, expected) < 2.0 * alpha * alpha,
        "{split} {expected}"
    );
    // An enormous mass is an infinite one.
    let heavy = dirac::average(orbital(3, 2), 50, Some(1e14)).unwrap();
    let fixed = dirac::average(orbital(3, 2), 50, None).unwrap();
    assert!(relative_error(heavy, fixed) < 1e-13);
}

#[test]
fn the_fine_structure_of_a_shell_depends_on_j_alone() {
    for n in [1, 2, 3, 10, MAX_N] {
        let all = dirac::fine_structure(n, 20, None).unwrap();
        assert_eq!(all.len(), 2 * usize::from(n) - 1);
        for level in &all {
            for other in all.iter().filter(|other| other.j == level.j) {
                assert_eq!(level.energy, other.energy);
            }
            for other in all.iter().filter(|other| other.j > level.j) {
                assert!(level.energy < other.energy, "{level:?} {other:?}");
            }
        }
    }
    // Hydrogen's 2p interval, 10.969 GHz with the anomalous moment of the electron (measured; from
    // memory), which makes it g_s − 1 times as large (Bethe & Salpeter 1957, sect. 18).
    let all = dirac::levels(orbital(2, 1), 1, Some(1_836.152_673_426)).unwrap();
    let interval = (all[1].energy - all[0].energy) * HARTREE_WAVENUMBER.value * 29.979_245_8;
    let expected = 10.969 / (ELECTRON_G.value - 1.0);
    assert!((interval - expected).abs() < 1e-3, "{interval} {expected}");
}

#[test]
fn what_is_out_of_range_is_named() {
    let one = orbital(1, 0);
    for z in [0.0, -1.0, f64::NAN, f64::INFINITY, 1000.5] {
        let problem = Hydrogenic::new(one, z).unwrap_err();
        assert_eq!(problem.code, "nuclear-charge-out-of-range");
        assert!(problem.bound.is_some());
        assert!(multipole(one, one, 1, z).is_err() && slater(0, [one; 4], z).is_err());
    }
    for k in [-5, 5, i32::MIN, i32::MAX] {
        let problem = hydrogen(1, 0).expectation(k).unwrap_err();
        assert_eq!(problem.code, "radial-power-out-of-range");
    }
    for k in [-101, 101, i32::MIN, i32::MAX] {
        assert!(multipole(one, one, k, 1.0).is_err());
    }
    assert_eq!(multipole(one, one, -3, 1.0).unwrap(), None);
    assert_eq!(
        slater(1, [one; 4], 1.0).unwrap_err().code,
        "radial-power-out-of-range"
    );
    assert!(slater(u32::MAX, [one; 4], 1.0).is_err());
    let j = TwiceJ::from_doubled;
    assert_eq!(
        dirac::energy(one, j(1), 0, None).unwrap_err().code,
        "nuclear-charge-out-of-range"
    );
    assert!(dirac::energy(one, j(1), 138, None).is_err());
    assert!(dirac::energy(one, j(1), 137, None).unwrap().is_finite());
    for wrong in [-1, 0, 2, 3, i32::MIN, i32::MAX] {
        let problem = dirac::energy(one, j(wrong), 1, None).unwrap_err();
        assert_eq!(problem.code, "level-does-not-exist");
    }
    for mass in [0.0, 1.0, -3.0, f64::NAN, f64::INFINITY] {
        let problem = dirac::energy(one, j(1), 1, Some(mass)).unwrap_err();
        assert_eq!(problem.code, "nuclear-mass-out-of-range");
    }
    for n in [0, MAX_N + 1, u8::MAX] {
        assert_eq!(
            dirac::fine_structure(n, 1, None).unwrap_err().code,
            "orbital-out-of-range"
        );
    }
}
