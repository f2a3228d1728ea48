//! Relative strengths within multiplets against published tables, against levels written out in
//! products, and against a diagonalised configuration.

use rungline_core::constants::ELECTRON_G;
use rungline_core::quantity::TwiceJ;
use rungline_core::radiation::Multipole;
use rungline_core::radiation::strengths::{
    Multiplet, between, magnetic_dipole, orbital_share, within,
};
use rungline_core::terms::Term;
use rungline_tests::{Row, relative_error, report, vector_json};

fn term(multiplicity: u32, l: u32) -> Term {
    Term {
        two_s: multiplicity - 1,
        l,
    }
}

/// Strength of 2J – 2J′ in a multiplet.
fn of(multiplet: &Multiplet, upper: i32, lower: i32) -> f64 {
    let line = multiplet
        .lines
        .iter()
        .find(|l| l.upper.doubled() == upper && l.lower.doubled() == lower);
    line.map_or(0.0, |l| l.relative)
}

#[test]
fn published_multiplets() {
    // White & Eliason, Phys. Rev. 44, 753 (1933); Condon & Shortley 1935, ch. IX: relative
    // intensities in whole numbers (from memory, checked by their row and column sums). Doubled J of
    // the upper and of the lower level.
    type Published = (Term, Term, &'static [(i32, i32, u32)]);
    let tables: [Published; 9] = [
        (term(2, 1), term(2, 0), &[(3, 1, 2), (1, 1, 1)]),
        (term(3, 1), term(3, 0), &[(4, 2, 5), (2, 2, 3), (0, 2, 1)]),
        (term(4, 1), term(4, 0), &[(5, 3, 3), (3, 3, 2), (1, 3, 1)]),
        (term(2, 2), term(2, 1), &[(5, 3, 9), (3, 3, 1), (3, 1, 5)]),
        (term(2, 3), term(2, 2), &[(7, 5, 20), (5, 5, 1), (5, 3, 14)]),
        (
            term(2, 1),
            term(2, 1),
            &[(3, 3, 5), (3, 1, 1), (1, 3, 1), (1, 1, 2)],
        ),
        (
            term(3, 1),
            term(3, 1),
            &[
                (4, 4, 15),
                (4, 2, 5),
                (2, 4, 5),
                (2, 2, 3),
                (2, 0, 4),
                (0, 2, 4),
            ],
        ),
        (
            term(3, 2),
            term(3, 1),
            &[
                (6, 4, 84),
                (4, 4, 15),
                (2, 4, 1),
                (4, 2, 45),
                (2, 2, 15),
                (2, 0, 20),
            ],
        ),
        (term(1, 2), term(1, 1), &[(4, 2, 1)]),
    ];
    for (upper, lower, lines) in tables {
        let multiplet = between(Multipole::E1, upper, lower);
        assert_eq!(multiplet.lines.len(), lines.len(), "{upper} – {lower}");
        let total: u32 = lines.iter().map(|l| l.2).sum();
        for &(j, k, published) in lines {
            let expected = f64::from(published) / f64::from(total);
            assert!(
                relative_error(of(&multiplet, j, k), expected) < 4e-15,
                "{upper}{j} – {lower}{k}"
            );
            // Emission and absorption: the same strength with the terms exchanged.
            let turned = between(Multipole::E1, lower, upper);
            assert!(relative_error(of(&turned, k, j), expected) < 4e-15);
        }
    }
}

#[test]
fn strengths_agree_with_levels_written_out_in_products() {
    let vectors = vector_json("multiplet_strengths.json");
    let (mut lines, mut worst) = (0, 0.0_f64);
    for case in vectors["cases"].as_array().unwrap() {
        let number = |key: &str| u32::try_from(case[key].as_u64().unwrap()).unwrap();
        let two_s = number("twoS");
        let upper = Term {
            two_s,
            l: number("L_upper"),
        };
        let lower = Term {
            two_s,
            l: number("L_lower"),
        };
        let rank = if case["multipole"] == "E1" { 1 } else { 2 };
        let theirs = case["lines"].as_array().unwrap();
        let mut ours = 0;
        for upper_j in upper.levels() {
            for lower_j in lower.levels() {
                ours += usize::from(orbital_share(rank, upper, upper_j, lower, lower_j) > 0.0);
            }
        }
        assert_eq!(ours, theirs.len(), "{upper} – {lower}, rank {rank}");
        for line in theirs {
            let j =
                |i: usize| TwiceJ::from_doubled(i32::try_from(line[i].as_i64().unwrap()).unwrap());
            let share = orbital_share(rank, upper, j(0), lower, j(1));
            worst = worst.max(relative_error(share, line[2].as_f64().unwrap()));
            lines += 1;
        }
    }
    report(
        "radiation-multiplets",
        Row {
            quantity: "relative strengths within multiplets, E1 and E2".into(),
            cases: lines,
            worst,
            tolerance: 2e-13,
            measure: "relative".into(),
            source:
                "products of states with Clebsch-Gordan coefficients of sympy 1.14.0 (BSD-3-Clause)"
                    .into(),
        },
    );
}

#[test]
fn sums_over_a_level_are_proportional_to_its_weight() {
    // Ornstein, Burger & Dorgelo, Z. Phys. 24, 41 (1924).
    for multipole in [Multipole::E1, Multipole::E2] {
        for multiplicity in 1..=8 {
            for l in 0..=6_u32 {
                for k in l.saturating_sub(2)..=l + 2 {
                    let multiplet =
                        between(multipole, term(multiplicity, l), term(multiplicity, k));
                    let rank = multipole.rank();
                    if l.abs_diff(k) > rank || l + k < rank {
                        assert!(multiplet.lines.is_empty());
                        continue;
                    }
                    let total: f64 = multiplet.lines.iter().map(|line| line.relative).sum();
                    assert!((total - 1.0).abs() < 1e-14);
                    for sum in multiplet.upper_sums.iter().chain(&multiplet.lower_sums) {
                        assert!((sum.sum - sum.expected).abs() < 1e-14, "{sum:?}");
                    }
                }
            }
        }
    }
}

#[test]
fn other_spins_and_other_j_have_no_strength() {
    let j = TwiceJ::from_doubled;
    assert_eq!(orbital_share(1, term(3, 1), j(2), term(1, 0), j(0)), 0.0);
    assert_eq!(orbital_share(1, term(3, 1), j(1), term(3, 0), j(2)), 0.0);
    assert_eq!(orbital_share(1, term(3, 1), j(-2), term(3, 0), j(2)), 0.0);
    assert!(
        between(Multipole::M1, term(3, 1), term(3, 1))
            .lines
            .is_empty()
    );
    assert!(within(Multipole::E1, term(3, 1)).lines.is_empty());
    assert!(within(Multipole::M1, term(1, 1)).lines.is_empty());
    assert!(within(Multipole::E2, term(3, 0)).lines.is_empty());
    let wide = Term {
        two_s: u32::MAX,
        l: u32::MAX,
    };
    assert_eq!(magnetic_dipole(wide, j(2), j(4)), 0.0);
    assert_eq!(orbital_share(u32::MAX, wide, j(2), wide, j(4)), 0.0);
}

#[test]
fn fine_structure_lines_within_a_term() {
    // Source: vectors/transition_checks.json, M1 and E2 strengths of diagonalised configurations
    // (own determinant code). 2p2 with F² = 47 000, ζ = 120: the ³P levels are pure to 1e-4, so
    // strengths agree to about that.
    let vectors = vector_json("transition_checks.json");
    let case = vectors["M1E2"]
        .as_array()
        .unwrap()
        .iter()
        .find(|c| c["name"] == "p2")
        .unwrap();
    let strength = |lower: u64, upper: u64, key: &str| -> f64 {
        let lines = case["lines"].as_array().unwrap().iter();
        let mut found = lines.filter(|l| l["lower"] == lower && l["upper"] == upper);
        found.next().unwrap()[key].as_f64().unwrap()
    };
    let triplet_p = term(3, 1);
    let j = TwiceJ::from_doubled;
    let m1 = |a, b| magnetic_dipole(triplet_p, j(a), j(b));
    assert!(relative_error(m1(0, 2), strength(0, 1, "S_M1_gs_codata")) < 1e-4);
    assert!(relative_error(m1(2, 4), strength(1, 2, "S_M1_gs_codata")) < 1e-4);
    // In units of (g_s − 1)²: 2 and 5/2 (any textbook).
    assert!((m1(0, 2) / m1(2, 4) - 0.8).abs() < 1e-15);
    let lines = within(Multipole::M1, triplet_p);
    assert!((of(&lines, 2, 0) - 4.0 / 9.0).abs() < 1e-15);
    assert!((of(&lines, 4, 2) - 5.0 / 9.0).abs() < 1e-15);
    let e2 = within(Multipole::E2, triplet_p);
    let ratio = strength(0, 2, "S_E2_angular") / strength(1, 2, "S_E2_angular");
    assert_eq!(e2.lines.len(), 2);
    assert!(relative_error(of(&e2, 4, 0) / of(&e2, 4, 2), ratio) < 1e-3);
    let total: f64 = e2.lines.iter().map(|line| line.relative).sum();
    assert!((total - 1.0).abs() < 1e-15);
}

#[test]
fn magnetic_dipole_is_the_off_diagonal_part_of_the_g_formula() {
    // Σ_J′ S(J, J′) = (2J+1)⟨(L + g_s S)²⟩ with the diagonal part g²J(J+1)(2J+1): a rule that the
    // closed form has to fulfil together with the Landé factor.
    use rungline_core::terms::lande::ls;
    const G_S: f64 = ELECTRON_G.value;
    for multiplicity in 2..=8 {
        for l in 1..=6 {
            let t = term(multiplicity, l);
            let (l, s) = (f64::from(l), f64::from(t.two_s) / 2.0);
            for j in t.levels() {
                let x = j.value() * (j.value() + 1.0);
                // ⟨L² + g_s² S² + 2 g_s L·S⟩ with 2 L·S = J² − L² − S².
                let square = l * (l + 1.0)
                    + G_S * G_S * s * (s + 1.0)
                    + G_S * (x - l * (l + 1.0) - s * (s + 1.0));
                let weight = j.value() * 2.0 + 1.0;
                let diagonal = ls(t, j).map_or(0.0, |g| g * g * x * weight);
                let others: f64 = t.levels().map(|k| magnetic_dipole(t, j, k)).sum();
                assert!(
                    ((diagonal + others) / (square * weight) - 1.0).abs() < 1e-13,
                    "{t}{j}"
                );
            }
        }
    }
}
