//! Angular coefficients of ζ against sums over Slater determinants.
//!
//! The reference is ours but shares nothing with the formula: the Breit–Pauli interaction
//! (α²/2) Σ_{i≠j} [∇ᵢ(1/r_ij) × pᵢ]·(sᵢ + 2sⱼ) is evaluated between spin-orbitals with definite m by
//! the gradient formula (Edmonds, *Angular Momentum in Quantum Mechanics*, 1957, eq. 5.7.9) and
//! Gaunt integrals, for radial functions whose integrals are closed.

use rungline_core::angular::wigner_3j;
use rungline_core::radial::blume_watson::{closed_shell, equivalent_share};
use rungline_tests::{Row, relative_error, report};

/// Σ c rᵖ e^(−βr), terms (c, p, β).
type Radial = Vec<(f64, i32, f64)>;

fn times(f: &Radial, g: &Radial, power: i32) -> Radial {
    let pairs = f.iter().flat_map(|x| g.iter().map(move |y| (x, y)));
    pairs
        .map(|(x, y)| (x.0 * y.0, x.1 + y.1 + power, x.2 + y.2))
        .collect()
}

fn scaled(f: &Radial, factor: f64, power: i32) -> Radial {
    f.iter()
        .map(|&(c, p, b)| (factor * c, p + power, b))
        .collect()
}

fn derivative(f: &Radial) -> Radial {
    f.iter()
        .flat_map(|&(c, p, b)| [(c * f64::from(p), p - 1, b), (-c * b, p, b)])
        .collect()
}

fn plus(f: &Radial, g: &Radial) -> Radial {
    f.iter().chain(g).copied().collect()
}

/// ∫₀^∞ dr₁ f(r₁) ∫₀^{r₁} dr₂ g(r₂), a finite sum of positive terms for each pair.
fn nested(f: &Radial, g: &Radial) -> f64 {
    let mut total = 0.0;
    for &(c, p, b) in f.iter().filter(|t| t.0 != 0.0) {
        for &(d, q, e) in g.iter().filter(|t| t.0 != 0.0) {
            assert!(p >= 0 && q >= 0, "powers {p} and {q}");
            let mut outer = 1.0 / b;
            let mut sum = 0.0;
            // p!/j! β^(j−p−1), from j = p down.
            for j in (0..=p).rev() {
                let inner = (1..=q + j).fold(1.0 / (b + e), |v, i| v * f64::from(i) / (b + e));
                sum += outer * inner;
                outer *= f64::from(j) / b;
            }
            total += c * d * sum;
        }
    }
    total
}

#[derive(Clone, Copy)]
struct Orbital<'a> {
    l: i32,
    m: i32,
    /// R, without the factor r.
    radial: &'a Radial,
}

/// ⟨Y_a| Y_b |Y_c⟩ = ∫ Y*_a Y_b Y_c.
fn gaunt(a: (i32, i32), b: (i32, i32), c: (i32, i32)) -> f64 {
    let widths = f64::from((2 * a.0 + 1) * (2 * b.0 + 1) * (2 * c.0 + 1));
    let sign = if a.1 % 2 == 0 { 1.0 } else { -1.0 };
    sign * (widths / (4.0 * std::f64::consts::PI)).sqrt()
        * wigner_3j(2 * a.0, 2 * b.0, 2 * c.0, 0, 0, 0)
        * wigner_3j(2 * a.0, 2 * b.0, 2 * c.0, -2 * a.1, 2 * b.1, 2 * c.1)
}

/// ⟨l m 1 μ | L m+μ⟩.
fn clebsch(l: i32, m: i32, mu: i32, total: i32) -> f64 {
    let sign = if (l - 1 + m + mu) % 2 == 0 { 1.0 } else { -1.0 };
    sign * f64::from(2 * total + 1).sqrt()
        * wigner_3j(2 * l, 2, 2 * total, 2 * m, 2 * mu, -2 * (m + mu))
}

/// The two terms of ∇_μ f Y_lm: (raises?, angular factor, l of the result).
fn gradient(l: i32, m: i32, mu: i32) -> Vec<(bool, f64, i32)> {
    let mut terms = Vec::new();
    if (m + mu).abs() <= l + 1 {
        let factor = f64::from(l + 1) / f64::from(2 * l + 3);
        terms.push((true, factor.sqrt() * clebsch(l, m, mu, l + 1), l + 1));
    }
    if l > 0 && (m + mu).abs() < l {
        let factor = f64::from(l) / f64::from(2 * l - 1);
        terms.push((false, -factor.sqrt() * clebsch(l, m, mu, l - 1), l - 1));
    }
    terms
}

/// d/dr − l/r, or d/dr + (l+1)/r.
fn radial_gradient(f: &Radial, l: i32, raises: bool) -> Radial {
    let over = if raises { -l } else { l + 1 };
    plus(&derivative(f), &scaled(f, f64::from(over), -1))
}

/// ⟨p(1) q(2)| [∇₁(1/r₁₂) × p₁]_z |s(1) t(2)⟩.
fn force(p: Orbital, q: Orbital, s: Orbital, t: Orbital) -> f64 {
    let component = p.m - s.m;
    if component + q.m - t.m != 0 {
        return 0.0;
    }
    let other = times(q.radial, t.radial, 2);
    let mut total = 0.0;
    for k in (q.l - t.l).abs()..=q.l + t.l {
        let (order, sign) = (component, if component % 2 == 0 { 1.0 } else { -1.0 });
        let normal = 4.0 * std::f64::consts::PI / f64::from(2 * k + 1);
        let second = sign * normal.sqrt() * gaunt((q.l, q.m), (k, -order), (t.l, t.m));
        if order.abs() > k || second == 0.0 {
            continue;
        }
        // (u × v)_z = −i (u₊v₋ − u₋v₊) and p = −i∇.
        for (mu, sign) in [(1, -1.0), (-1, 1.0)] {
            for (up, first, rank) in gradient(k, order, mu) {
                for (raises, angle, l) in gradient(s.l, s.m, -mu) {
                    let angle = angle * gaunt((p.l, p.m), (rank, order + mu), (l, s.m - mu));
                    if angle == 0.0 {
                        continue;
                    }
                    let own = times(p.radial, &radial_gradient(s.radial, s.l, raises), 2);
                    // The gradient of r_<^k / r_>^(k+1) lives on one side of r₁ = r₂ only.
                    let radial = if up {
                        -nested(&scaled(&own, 1.0, -k - 2), &scaled(&other, 1.0, k))
                    } else {
                        nested(&scaled(&other, 1.0, -k - 1), &scaled(&own, 1.0, k - 1))
                    };
                    let width = f64::from(2 * k + 1);
                    total += sign * normal.sqrt() * first * angle * second * radial * width;
                }
            }
        }
    }
    total
}

#[derive(Clone, Copy)]
struct Electron<'a> {
    orbital: Orbital<'a>,
    /// 2m_s.
    spin: i32,
}

/// ⟨ij|V|ij⟩ − ⟨ij|V|ji⟩ of V = (α²/2) Σ_{i≠j} [∇ᵢ(1/r_ij) × pᵢ]·(sᵢ + 2sⱼ), without α²/2.
fn pair(i: Electron, j: Electron) -> f64 {
    let (a, b) = (i.orbital, j.orbital);
    let (s, t) = (f64::from(i.spin) / 2.0, f64::from(j.spin) / 2.0);
    let direct = force(a, b, a, b) * (s + 2.0 * t) + force(b, a, b, a) * (t + 2.0 * s);
    if i.spin != j.spin {
        // Each term turns one spin at most, an exchange would have to turn both.
        return direct;
    }
    direct - 3.0 * s * (force(a, b, b, a) + force(b, a, a, b))
}

fn shell(l: i32, radial: &Radial) -> Vec<Electron<'_>> {
    (-l..=l)
        .flat_map(|m| [-1, 1].map(|spin| (m, spin)))
        .map(|(m, spin)| Electron {
            orbital: Orbital { l, m, radial },
            spin,
        })
        .collect()
}

/// A radial function like r^(l+2) e^(−βr), one power more than an atom's, so that all integrals are
/// of whole powers.
fn function(l: i32, rate: f64) -> Radial {
    vec![(1.0, l + 2, rate), (-0.4 * rate, l + 3, 0.8 * rate)]
}

/// ζ_ab by the coefficients under test and the radial integrals as their documentation defines
/// them, in units of α²/2.
fn by_coefficients(a: &Radial, l_a: i32, b: &Radial, l_b: i32) -> f64 {
    let (a, b) = (scaled(a, 1.0, 1), scaled(b, 1.0, 1));
    let product = times(&a, &b, 0);
    let n = |x: &Radial, y: &Radial, k: i32| nested(&scaled(x, 1.0, -k - 3), &scaled(y, 1.0, k));
    let v = |k: i32| {
        let slopes = plus(
            &times(&a, &derivative(&b), -1),
            &scaled(&times(&derivative(&a), &b, -1), -1.0, 0),
        );
        nested(&scaled(&slopes, 1.0, -k - 1), &scaled(&product, 1.0, k))
            + nested(&scaled(&product, 1.0, -k - 1), &scaled(&slopes, 1.0, k))
    };
    let coefficients = closed_shell(l_a as u8, l_b as u8);
    let mut zeta = coefficients.direct * n(&times(&a, &a, 0), &times(&b, &b, 0), 0);
    for term in &coefficients.exchange_n {
        zeta += term.coefficient * n(&product, &product, term.k);
    }
    for term in &coefficients.exchange_v {
        zeta += term.coefficient * v(term.k);
    }
    // N and V carry α²/4.
    zeta / 2.0
}

#[test]
fn a_closed_shell_acts_as_zeta_times_l_dot_s() {
    let mut worst: f64 = 0.0;
    let mut cases = 0;
    for l_a in 1..=3 {
        for l_b in 0..=3 {
            for (rate_a, rate_b) in [(0.7, 2.0), (1.5, 1.1)] {
                let (a, b) = (function(l_a, rate_a), function(l_b, rate_b));
                let zeta = by_coefficients(&a, l_a, &b, l_b);
                for electron in shell(l_a, &a) {
                    let sum: f64 = shell(l_b, &b).into_iter().map(|e| pair(electron, e)).sum();
                    let diagonal = f64::from(electron.orbital.m * electron.spin) / 2.0;
                    let error = (sum - zeta * diagonal).abs() / zeta.abs();
                    worst = worst.max(error);
                    cases += 1;
                }
            }
        }
    }
    report(
        "radial-blume-watson-closed",
        Row {
            quantity: "ζ of one electron by a closed shell, two-electron screening".into(),
            cases,
            worst,
            tolerance: 1e-11,
            measure: "relative".into(),
            source: "own sums over Slater determinants".into(),
        },
    );
}

#[test]
fn equivalent_electrons_act_by_their_share() {
    let mut worst: f64 = 0.0;
    let mut cases = 0;
    for (l, most) in [(1, 6), (2, 10), (3, 3)] {
        let radial = function(l, 1.3);
        let all = shell(l, &radial);
        let zeta = by_coefficients(&radial, l, &radial, l);
        let pairs: Vec<Vec<f64>> = all
            .iter()
            .map(|&i| all.iter().map(|&j| pair(i, j)).collect())
            .collect();
        for electrons in (1..=most).filter(|&n| l != 2 || [1, 2, 3, 9, 10].contains(&n)) {
            let (mut overlap, mut norm, mut hole) = (0.0, 0.0, 0.0_f64);
            for subset in 0_u32..1 << all.len() {
                if subset.count_ones() != electrons {
                    continue;
                }
                let held: Vec<usize> = (0..all.len()).filter(|i| subset >> i & 1 == 1).collect();
                let energy: f64 = held
                    .iter()
                    .flat_map(|&i| held.iter().filter(move |&&j| j > i).map(move |&j| (i, j)))
                    .map(|(i, j)| pairs[i][j])
                    .sum();
                let diagonal: f64 = held
                    .iter()
                    .map(|&i| f64::from(all[i].orbital.m * all[i].spin) / 2.0)
                    .sum();
                overlap += energy * diagonal;
                norm += diagonal * diagonal;
                hole = hole.max((energy - zeta * diagonal).abs());
            }
            if norm > 0.0 {
                let share = equivalent_share(l as u8, electrons);
                worst = worst.max(relative_error(overlap / norm / zeta + 1.0, share + 1.0));
                cases += 1;
            }
            if all.len() as u32 == electrons + 1 {
                // One hole: every determinant, not only the trace.
                worst = worst.max(hole / zeta.abs());
            }
        }
    }
    report(
        "radial-blume-watson-equivalent",
        Row {
            quantity: "ζ within ℓ^N, share of the other equivalent electrons".into(),
            cases,
            worst,
            tolerance: 1e-11,
            measure: "relative".into(),
            source: "own sums over Slater determinants".into(),
        },
    );
}

#[test]
fn spin_own_orbit_of_a_distant_electron_is_plain_screening() {
    // A small closed shell inside a large orbit: one unit of nuclear charge less for each electron,
    // ζ = (α²/2) ⟨r⁻³⟩ (Z − 2), exchange being negligible.
    let (outer, inner) = (function(2, 0.05), function(0, 40.0));
    let norm = |f: &Radial, power: i32| -> f64 {
        times(f, f, power)
            .iter()
            .map(|&(c, p, b)| c * (1..=p).fold(1.0 / b, |v, i| v * f64::from(i) / b))
            .sum()
    };
    let zeta = by_coefficients(&outer, 2, &inner, 0) / norm(&inner, 2);
    let plain = -2.0 * norm(&outer, -1);
    assert!(relative_error(zeta, plain) < 1e-9, "{zeta} {plain}");
}
