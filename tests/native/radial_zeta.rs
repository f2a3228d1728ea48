//! ζ with two-electron screening of computed orbitals, against the definition of every integral by a
//! quadrature of its own.
//!
//! The reference is ours: N^k and V^k as `radial::blume_watson` defines them, integrated
//! with more points than the mesh has and with inner integrals carried to each of them, instead of
//! the mesh's running weights.

use rungline_core::configuration::{Configuration, Species, complete, parse};
use rungline_core::constants::FINE_STRUCTURE;
use rungline_core::numerics::gauss_legendre::gauss_legendre;
use rungline_core::radial::blume_watson::{closed_shell, equivalent_share};
use rungline_core::radial::hartree_fock::{Atom, RadialOrbital, Solution, solve};
use rungline_tests::{Row, relative_error, report};

/// Each interval of the mesh is cut into so many.
const CUTS: usize = 1;

struct Points {
    /// Radius and weight, in intervals.
    intervals: Vec<Vec<(f64, f64)>>,
    starts: Vec<f64>,
    rule: Vec<(f64, f64)>,
}

fn points(solution: &Solution) -> Points {
    let rule = gauss_legendre(13);
    let mut starts = Vec::new();
    let mut intervals = Vec::new();
    for pair in solution.mesh.breaks().windows(2) {
        let width = (pair[1] - pair[0]) / CUTS as f64;
        for cut in 0..CUTS {
            let start = pair[0] + width * cut as f64;
            starts.push(start);
            intervals.push(scaled(&rule, start, start + width));
        }
    }
    Points {
        intervals,
        starts,
        rule,
    }
}

fn scaled(rule: &[(f64, f64)], start: f64, end: f64) -> Vec<(f64, f64)> {
    let half = 0.5 * (end - start);
    rule.iter()
        .map(|(x, w)| (start + half * (1.0 + x), half * w))
        .collect()
}

impl Points {
    /// ∫₀^∞ dr₁ f(r₁) ∫₀^{r₁} dr₂ g(r₂).
    fn nested(&self, f: &dyn Fn(f64) -> f64, g: &dyn Fn(f64) -> f64) -> f64 {
        let mut inside = 0.0;
        let mut total = 0.0;
        for (interval, start) in self.intervals.iter().zip(&self.starts) {
            for &(r, weight) in interval {
                let partial: f64 = scaled(&self.rule, *start, r)
                    .iter()
                    .map(|&(s, w)| w * g(s))
                    .sum();
                total += weight * f(r) * (inside + partial);
            }
            inside += interval.iter().map(|&(s, w)| w * g(s)).sum::<f64>();
        }
        total
    }
}

fn power(r: f64, k: i32) -> f64 {
    let product = (0..k.abs()).fold(1.0, |product, _| product * r);
    if k < 0 { 1.0 / product } else { product }
}

fn slope(solution: &Solution, orbital: &RadialOrbital, r: f64) -> f64 {
    let basis = solution.mesh.basis();
    let first = basis.first_at(r);
    let coefficients = orbital.coefficients.iter().skip(first);
    coefficients
        .zip(basis.slopes(first, r))
        .map(|(c, slope)| c * slope)
        .sum()
}

/// ζ of one orbital, hartree, for a point nucleus.
fn by_definition(solution: &Solution, orbital: &RadialOrbital) -> f64 {
    let points = points(solution);
    let alpha = FINE_STRUCTURE.value;
    let p = |of: &RadialOrbital, r: f64| solution.p_at(of, r);
    let cube: f64 = points
        .intervals
        .iter()
        .flatten()
        .map(|&(r, w)| w * p(orbital, r) * p(orbital, r) / (r * r * r))
        .sum();
    let mut zeta = 0.5 * alpha * alpha * f64::from(solution.atom.z) * cube;
    let quarter = 0.25 * alpha * alpha;
    for other in &solution.orbitals {
        let (l, capacity) = (orbital.orbital.l(), other.orbital.capacity());
        let share = if other.orbital == orbital.orbital {
            equivalent_share(l, orbital.electrons)
        } else {
            f64::from(other.electrons) / f64::from(capacity)
        };
        let product = |r: f64| p(orbital, r) * p(other, r);
        let slopes = |r: f64| {
            p(orbital, r) * slope(solution, other, r) - slope(solution, orbital, r) * p(other, r)
        };
        let coefficients = closed_shell(l, other.orbital.l());
        let own = |r: f64| p(orbital, r) * p(orbital, r) * power(r, -3);
        let mut sum = coefficients.direct * points.nested(&own, &|r| p(other, r) * p(other, r));
        for term in &coefficients.exchange_n {
            let k = term.k;
            let outer = |r: f64| product(r) * power(r, -k - 3);
            sum += term.coefficient * points.nested(&outer, &|r| product(r) * power(r, k));
        }
        for term in &coefficients.exchange_v {
            let k = term.k;
            let value = points.nested(&|r| slopes(r) * power(r, -k - 2), &|r| {
                product(r) * power(r, k)
            }) + points.nested(&|r| product(r) * power(r, -k - 1), &|r| {
                slopes(r) * power(r, k - 1)
            });
            sum += term.coefficient * value;
        }
        zeta += share * quarter * sum;
    }
    zeta
}

fn atom(z: u8, charge: i32, text: &str) -> Atom {
    let species = Species {
        element: Some(z),
        charge,
        mass_number: None,
    };
    let reading = complete(&parse(text).unwrap(), &species).unwrap();
    let configuration: Configuration = reading.configuration;
    Atom::new(z, configuration.subshells().to_vec())
}

#[test]
fn zeta_is_what_its_definition_says() {
    let (mut worst, mut cases) = (0.0_f64, 0);
    for (z, charge, text) in [
        (3, 0, "1s2 2p"),
        (8, 0, "2p4"),
        (11, 0, "3p"),
        (26, 0, "3d6 4s2"),
        (22, 1, "3d2 4p"),
        (60, 3, "4f3"),
        (58, 0, "4f 5d 6s2"),
    ] {
        let solution = solve(&atom(z, charge, text), &mut |_| true).unwrap();
        // Of heavy atoms the open shells are enough.
        let wanted = |o: &&RadialOrbital| {
            o.orbital.l() > 0 && (z < 30 || o.electrons < o.orbital.capacity())
        };
        for orbital in solution.orbitals.iter().filter(wanted) {
            let zeta = solution.zeta(orbital).unwrap();
            let expected = by_definition(&solution, orbital);
            worst = worst.max(relative_error(zeta, expected));
            cases += 1;
        }
    }
    report(
        "radial-zeta",
        Row {
            quantity: "ζ with two-electron screening, computed orbitals".into(),
            cases,
            worst,
            tolerance: 1e-9,
            measure: "relative".into(),
            source: "own quadrature of the definition".into(),
        },
    );
}
