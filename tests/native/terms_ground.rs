//! Hund's rules and Landé factors against published lists.

use rungline_core::configuration::{Orbital, Subshell};
use rungline_core::constants::ELECTRON_G;
use rungline_core::quantity::TwiceJ;
use rungline_core::terms::{Term, hund, lande, ls};
use rungline_tests::{Row, report, vector_json};

const G_S: f64 = ELECTRON_G.value;

fn shell(n: u8, l: u8, electrons: u32) -> Subshell {
    Subshell::new(Orbital::new(n, l).unwrap(), electrons).unwrap()
}

fn level(shells: &[Subshell]) -> String {
    let ground = hund::ground(shells);
    match ground.j {
        Some(j) => format!("{}{j}", ground.term),
        None => ground.term.to_string(),
    }
}

#[test]
fn lowest_terms_of_d_and_ground_levels_of_f() {
    // Standard; e.g. Cowan, The Theory of Atomic Structure and Spectra, 1981.
    let d = ["2D", "3F", "4F", "5D", "6S", "5D", "4F", "3F", "2D"];
    for (n, term) in (1..).zip(d) {
        assert_eq!(hund::ground(&[shell(3, 2, n)]).term.to_string(), term);
    }
    let f = [
        "2F5/2", "3H4", "4I9/2", "5I4", "6H5/2", "7F0", "8S7/2", "7F6", "6H15/2", "5I8", "4I15/2",
        "3H6", "2F7/2",
    ];
    for (n, name) in (1..).zip(f) {
        assert_eq!(level(&[shell(4, 3, n)]), name);
    }
    // Ground levels of p shells and d shells with J (standard; from memory).
    let p = ["2P1/2", "3P0", "4S3/2", "3P2", "2P3/2"];
    for (n, name) in (1..).zip(p) {
        assert_eq!(level(&[shell(2, 1, n)]), name);
    }
    let d = [
        "2D3/2", "3F2", "4F3/2", "5D0", "6S5/2", "5D4", "4F9/2", "3F4", "2D5/2",
    ];
    for (n, name) in (1..).zip(d) {
        assert_eq!(level(&[shell(3, 2, n)]), name);
    }
}

#[test]
fn several_open_shells_decide_j_only_where_the_rule_is_founded() {
    // Cr I 3d5 4s 7S3, Fe II 3d6 4s 6D9/2, V II-like 3d3 4s 5F1, Gd I 4f7 5d 9D (J = 2 observed): from memory.
    assert_eq!(level(&[shell(3, 2, 5), shell(4, 0, 1)]), "7S3");
    assert_eq!(level(&[shell(3, 2, 6), shell(4, 0, 1)]), "6D9/2");
    assert_eq!(level(&[shell(3, 2, 3), shell(4, 0, 1)]), "5F1");
    let gadolinium = hund::ground(&[shell(4, 3, 7), shell(5, 2, 1), shell(6, 0, 2)]);
    assert_eq!(gadolinium.term.to_string(), "9D");
    assert_eq!(gadolinium.j, None);
    assert_eq!(gadolinium.third_rule, hund::ThirdRule::Undecided);
    assert!(gadolinium.several_open_shells);
    // Two half-filled shells leave one level only.
    assert_eq!(level(&[shell(3, 2, 5), shell(4, 1, 3)]), "9S4");
    assert_eq!(level(&[]), "1S0");
    assert_eq!(level(&[shell(3, 2, 10)]), "1S0");
}

#[test]
fn the_closed_form_is_the_first_term_of_the_list() {
    for l in 0..=5_u8 {
        for n in 1..4 * u32::from(l) + 2 {
            for other in [shell(9, 1, 2), shell(9, 2, 7), shell(9, 0, 1)] {
                let shells = [shell(7, l, n), other];
                let all = ls::terms(&shells).unwrap();
                assert_eq!(hund::ground(&shells).term, all.terms[0].term);
                assert_eq!(all.terms[0].times, 1);
            }
        }
    }
}

#[test]
fn each_rule_shows_what_it_kept() {
    let d2 = [shell(3, 2, 2)];
    let steps = hund::steps(&hund::ground(&d2), &ls::terms(&d2).unwrap());
    let kept: Vec<Vec<String>> = steps
        .iter()
        .map(|s| s.terms.iter().map(|t| t.term.to_string()).collect())
        .collect();
    assert_eq!(kept, [vec!["3F", "3P"], vec!["3F"], vec!["3F"]]);
    assert_eq!(steps[2].levels, [TwiceJ::from_doubled(4)]);
    assert_eq!(steps[2].rule, "less than half full: smallest J");
    let undecided = [shell(4, 3, 1), shell(5, 2, 1)];
    let steps = hund::steps(&hund::ground(&undecided), &ls::terms(&undecided).unwrap());
    assert_eq!(steps[2].levels.len(), 3);
}

#[test]
fn lande_factors_of_common_levels() {
    // Closed fractions of the usual tables (any textbook; from memory) with g_s = 2, to which
    // (g_s − 2) times the spin part is added here.
    let table = [
        ("2S1/2", 1, 0, 1, 2.0),
        ("2P1/2", 1, 1, 1, 2.0 / 3.0),
        ("2P3/2", 1, 1, 3, 4.0 / 3.0),
        ("2D3/2", 1, 2, 3, 4.0 / 5.0),
        ("2D5/2", 1, 2, 5, 6.0 / 5.0),
        ("2F5/2", 1, 3, 5, 6.0 / 7.0),
        ("2F7/2", 1, 3, 7, 8.0 / 7.0),
        ("1P1", 0, 1, 2, 1.0),
        ("1D2", 0, 2, 4, 1.0),
        ("3S1", 2, 0, 2, 2.0),
        ("3P1", 2, 1, 2, 3.0 / 2.0),
        ("3P2", 2, 1, 4, 3.0 / 2.0),
        ("3D1", 2, 2, 2, 1.0 / 2.0),
        ("3D2", 2, 2, 4, 7.0 / 6.0),
        ("3D3", 2, 2, 6, 4.0 / 3.0),
        ("4P1/2", 3, 1, 1, 8.0 / 3.0),
        ("4D1/2", 3, 2, 1, 0.0),
        ("4F3/2", 3, 3, 3, 2.0 / 5.0),
        ("5D4", 4, 2, 8, 3.0 / 2.0),
        ("5F1", 4, 3, 2, 0.0),
        ("6D1/2", 5, 2, 1, 10.0 / 3.0),
        ("7F6", 6, 3, 12, 3.0 / 2.0),
        ("4I9/2", 3, 6, 9, 8.0 / 11.0),
        ("6H15/2", 5, 5, 15, 4.0 / 3.0),
    ];
    for (name, two_s, l, two_j, with_two) in table {
        let term = Term { two_s, l };
        let j = TwiceJ::from_doubled(two_j);
        assert_eq!(format!("{term}{j}"), name);
        let g = lande::ls(term, j).unwrap();
        // With g_s = 2, g = 1 + spin part, so the whole is 1 + (g_s − 1)(g₂ − 1).
        let expected = 1.0 + (G_S - 1.0) * (with_two - 1.0);
        assert!(
            (g - expected).abs() < 2e-15,
            "{name}: {g} against {expected}"
        );
    }
    // ²S1/2 carries the electron's g itself (CODATA 2022, 2.00231930436092).
    let g = lande::ls(Term { two_s: 1, l: 0 }, TwiceJ::from_doubled(1)).unwrap();
    assert_eq!(g.to_bits(), 2.002_319_304_360_92_f64.to_bits());
    assert_eq!(
        lande::ls(Term { two_s: 2, l: 1 }, TwiceJ::from_doubled(0)),
        None
    );
    assert_eq!(
        lande::ls(Term { two_s: 2, l: 1 }, TwiceJ::from_doubled(6)),
        None
    );
    assert_eq!(
        lande::ls(Term { two_s: 2, l: 1 }, TwiceJ::from_doubled(1)),
        None
    );
    assert_eq!(
        lande::ls(Term { two_s: 2, l: 1 }, TwiceJ::from_doubled(-2)),
        None
    );
}

#[test]
fn weighted_sum_of_g_is_the_same_in_every_coupling() {
    // The g-sum rule (Pauli 1923): for each J the sum of g over the levels does not depend on the
    // coupling. 2p5 3p: LS against jK against jj, J = 1 and 2.
    let j_of = |two_j| TwiceJ::from_doubled(two_j);
    for two_j in [2, 4] {
        let j = j_of(two_j);
        let mut in_ls = 0.0;
        for two_s in [0, 2] {
            for l in 0..=2 {
                in_ls += lande::ls(Term { two_s, l }, j).unwrap_or(0.0);
            }
        }
        let (mut in_jk, mut in_jj) = (0.0, 0.0);
        for parent in [1, 3] {
            let g_parent = lande::electron(1, j_of(parent));
            for k in [parent - 2, parent, parent + 2] {
                if k > 0 {
                    in_jk += lande::pair(g_parent, j_of(parent), 1, j_of(k), j).unwrap_or(0.0);
                }
            }
            for outer in [1, 3] {
                let g_outer = lande::electron(1, j_of(outer)).unwrap();
                in_jj += lande::coupled(g_parent.unwrap(), j_of(parent), g_outer, j_of(outer), j)
                    .unwrap_or(0.0);
            }
        }
        assert!((in_ls - in_jk).abs() < 1e-14, "J = {j}: {in_ls} {in_jk}");
        assert!((in_ls - in_jj).abs() < 1e-14, "J = {j}: {in_ls} {in_jj}");
    }
}

#[test]
fn sum_of_g_is_that_of_diagonalised_configurations() {
    // Source: vectors/slater_condon_checks.json, g of every level of configurations diagonalised in
    // intermediate coupling (own determinant code, g_s = 2). By the g-sum rule Σ g over the levels of one
    // J is that of LS coupling, whatever the interactions.
    let vectors = vector_json("slater_condon_checks.json");
    let (mut sums, mut worst) = (0, 0.0_f64);
    for case in vectors["cases"].as_array().unwrap() {
        let number = |value: &serde_json::Value| u32::try_from(value.as_u64().unwrap()).unwrap();
        let open: Vec<Subshell> = (1..)
            .zip(case["shells"].as_array().unwrap())
            .map(|(n, s)| {
                let l = u8::try_from(number(&s["l"])).unwrap();
                shell(n + l, l, number(&s["occ"]))
            })
            .collect();
        let all = ls::terms(&open).unwrap();
        let levels = case["levels"].as_array().unwrap();
        assert_eq!(all.n_levels(), levels.len() as u128, "{}", case["name"]);
        for (j, count) in all.levels_by_j() {
            let of_j: Vec<Option<f64>> = levels
                .iter()
                .filter(|l| l["twoJ"].as_i64() == Some(j.doubled().into()))
                .map(|l| l["g"].as_f64())
                .collect();
            assert_eq!(of_j.len() as u128, count);
            // None for J = 0, and where levels of equal energy cannot be told apart.
            let Some(theirs) = of_j.into_iter().sum::<Option<f64>>() else {
                continue;
            };
            let ours: f64 = all
                .terms
                .iter()
                .filter_map(|t| Some((t.times, lande::ls(t.term, j)?)))
                .map(|(times, g)| times as f64 * (1.0 + (g - 1.0) / (G_S - 1.0)))
                .sum();
            worst = worst.max((ours - theirs).abs() / theirs.abs().max(1.0));
            sums += 1;
        }
    }
    report(
        "terms-g-sums",
        Row {
            quantity: "sums of g over the levels of one J".into(),
            cases: sums,
            worst,
            tolerance: 1e-11,
            measure: "relative".into(),
            source: "configurations diagonalised in determinants (own work)".into(),
        },
    );
}

#[test]
fn moments_of_lanthanide_ions() {
    // μ_eff of trivalent lanthanides to two decimals, and spin-only √(n(n+2)), as in the usual
    // tables (from memory; computed there with g_s = 2, which moves none of these by more than 0.02).
    let table = [
        (1, 2.54),
        (2, 3.58),
        (3, 3.62),
        (5, 0.85),
        (7, 7.94),
        (8, 9.72),
        (9, 10.65),
        (10, 10.61),
        (11, 9.58),
        (12, 7.56),
        (13, 4.54),
    ];
    for (n, moment) in table {
        let ground = hund::ground(&[shell(4, 3, n)]);
        let j = ground.j.unwrap();
        let ours = lande::effective_moment(lande::ls(ground.term, j).unwrap(), j);
        assert!((ours - moment).abs() < 0.02, "f{n}: {ours}");
    }
    for (unpaired, moment) in [(1, 1.73), (2, 2.83), (3, 3.87), (4, 4.90), (5, 5.92)] {
        let ours = lande::spin_only_moment(TwiceJ::from_doubled(unpaired));
        assert!((ours - moment).abs() < 0.012, "{unpaired}: {ours}");
    }
    assert_eq!(lande::spin_only_moment(TwiceJ::from_doubled(0)), 0.0);
}
