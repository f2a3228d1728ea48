//! 3j, 6j and 9j symbols: against exact published-library values, and by their own sum rules.

use rungline_core::angular::{
    CAPACITY, NINE_J_CAPACITY, try_wigner_3j, try_wigner_6j, try_wigner_9j, wigner_3j, wigner_6j,
    wigner_9j,
};
use rungline_tests::{Row, relative_error, report, vector_json};

/// Numbers that repeat from run to run: a linear congruential generator (Knuth's MMIX constants).
struct Sequence(u64);

impl Sequence {
    fn next(&mut self) -> u32 {
        self.0 = self
            .0
            .wrapping_mul(6_364_136_223_846_793_005)
            .wrapping_add(1_442_695_040_888_963_407);
        (self.0 >> 32) as u32
    }

    fn up_to(&mut self, largest: i32) -> i32 {
        (self.next() % (largest as u32 + 1)) as i32
    }
}

fn symbol(kind: &str, j: &[i32]) -> f64 {
    match (kind, j) {
        ("three_j", &[a, b, c, d, e, f]) => wigner_3j(a, b, c, d, e, f),
        ("six_j", &[a, b, c, d, e, f]) => wigner_6j(a, b, c, d, e, f),
        ("nine_j", &[a, b, c, d, e, f, g, h, i]) => wigner_9j(a, b, c, d, e, f, g, h, i),
        _ => panic!("{kind} of {j:?}"),
    }
}

#[test]
fn agree_with_forty_digits_and_exact_squares() {
    let vectors = vector_json("wigner.json");
    for (kind, name) in [
        ("three_j", "3j symbols"),
        ("six_j", "6j symbols"),
        ("nine_j", "9j symbols"),
    ] {
        let cases = vectors[kind].as_array().expect("a list of cases");
        let mut worst = 0.0_f64;
        for case in cases {
            let j: Vec<i32> = case["two_j"]
                .as_array()
                .expect("arguments")
                .iter()
                .map(|two| two.as_i64().unwrap() as i32)
                .collect();
            let text = |key: &str| {
                case[key]
                    .as_str()
                    .expect("text")
                    .parse::<f64>()
                    .expect("a number")
            };
            let value = symbol(kind, &j);
            let sign = case["sign"].as_f64().expect("a sign");
            worst = worst.max(relative_error(value, text("value")));
            let square = text("square_num") / text("square_den");
            assert!(relative_error(value * value, square) < 4e-14, "{j:?}");
            assert!(
                value == 0.0 && sign == 0.0 || value.signum() == sign,
                "{j:?}"
            );
        }
        report(
            &format!("wigner_{kind}"),
            Row {
                quantity: format!("{name}, j up to 60"),
                cases: cases.len(),
                worst,
                tolerance: 2e-14,
                measure: "relative".into(),
                source: "sympy 1.14.0, exact squares and 40 digits".into(),
            },
        );
    }
}

/// Σ_{m₁m₂} (2j₃+1) (j₁ j₂ j₃; m₁ m₂ m₃)(j₁ j₂ j₃′; m₁ m₂ m₃) = δ(j₃,j₃′), Edmonds (1957) eq. 3.7.8.
#[test]
fn orthogonality_of_3j_symbols_edmonds_3_7_8() {
    let mut sequence = Sequence(1);
    let (mut worst, mut cases) = (0.0_f64, 0);
    while cases < 300 {
        let (j1, j2) = (sequence.up_to(60), sequence.up_to(60));
        let step = (j1 + j2 - (j1 - j2).abs()) / 2;
        let left = (j1 - j2).abs() + 2 * sequence.up_to(step);
        let right = if cases % 2 == 0 {
            left
        } else {
            (j1 - j2).abs() + 2 * sequence.up_to(step)
        };
        let m3 = -left.min(right) + 2 * sequence.up_to(left.min(right));
        let sum: f64 = (-j1..=j1)
            .step_by(2)
            .map(|m1| {
                wigner_3j(j1, j2, left, m1, -m1 - m3, m3)
                    * wigner_3j(j1, j2, right, m1, -m1 - m3, m3)
            })
            .sum();
        let expected = f64::from(u8::from(left == right));
        worst = worst.max(((f64::from(left) + 1.0) * sum - expected).abs());
        cases += 1;
    }
    report(
        "wigner_three_j_orthogonality",
        Row {
            quantity: "orthogonality of 3j symbols, j up to 60".into(),
            cases,
            worst,
            tolerance: 5e-14,
            measure: "absolute".into(),
            source: "Edmonds (1957) eq. 3.7.8".into(),
        },
    );
}

/// Σ_x (2x+1)(2y+1) {a b x; c d y}{a b x; c d y′} = δ(y,y′), Edmonds (1957) eq. 6.2.9.
#[test]
fn orthogonality_of_6j_symbols_edmonds_6_2_9() {
    let mut sequence = Sequence(2);
    let (mut worst, mut cases) = (0.0_f64, 0);
    while cases < 300 {
        let [a, b, c, d] = [0; 4].map(|_| sequence.up_to(60));
        if (a + b + c + d) % 2 != 0 {
            continue;
        }
        let from = (a - d).abs().max((b - c).abs());
        let to = (a + d).min(b + c);
        if from > to {
            continue;
        }
        let left = from + 2 * sequence.up_to((to - from) / 2);
        let right = if cases % 2 == 0 {
            left
        } else {
            from + 2 * sequence.up_to((to - from) / 2)
        };
        let sum: f64 = ((a - b).abs()..=a + b)
            .step_by(2)
            .map(|x| {
                (f64::from(x) + 1.0)
                    * wigner_6j(a, b, x, c, d, left)
                    * wigner_6j(a, b, x, c, d, right)
            })
            .sum();
        let expected = f64::from(u8::from(left == right));
        worst = worst.max(((f64::from(left) + 1.0) * sum - expected).abs());
        cases += 1;
    }
    report(
        "wigner_six_j_orthogonality",
        Row {
            quantity: "orthogonality of 6j symbols, j up to 60".into(),
            cases,
            worst,
            tolerance: 5e-14,
            measure: "absolute".into(),
            source: "Edmonds (1957) eq. 6.2.9".into(),
        },
    );
}

/// Σ_{c f} (2c+1)(2f+1)(2g+1)(2h+1) {a b c; d e f; g h j}² = 1, Edmonds (1957) eq. 6.4.6.
#[test]
fn orthogonality_of_9j_symbols_edmonds_6_4_6() {
    for [a, b, d, e, g, h, j] in [
        [3, 4, 5, 2, 4, 4, 6],
        [9, 8, 7, 7, 4, 7, 5],
        [20, 21, 19, 20, 15, 13, 8],
    ] {
        let mut sum = 0.0;
        for c in 0..=a + b {
            for f in 0..=d + e {
                let value = wigner_9j(a, b, c, d, e, f, g, h, j);
                sum += f64::from((c + 1) * (f + 1) * (g + 1) * (h + 1)) * value * value;
            }
        }
        assert!((sum - 1.0).abs() < 1e-13, "{sum}");
    }
}

#[test]
fn symmetries_hold_to_the_last_bits() {
    let mut sequence = Sequence(3);
    let close =
        |left: f64, right: f64| assert!(relative_error(left, right) < 4e-15, "{left} {right}");
    let (mut threes, mut sixes, mut nines) = (0, 0, 0);
    while threes < 500 {
        let [j1, j2] = [0; 2].map(|_| sequence.up_to(60));
        let j3 = (j1 - j2).abs() + 2 * sequence.up_to(j1.min(j2));
        let (m1, m2) = (-j1 + 2 * sequence.up_to(j1), -j2 + 2 * sequence.up_to(j2));
        let value = wigner_3j(j1, j2, j3, m1, m2, -m1 - m2);
        let sign = if (j1 + j2 + j3) / 2 % 2 == 0 {
            1.0
        } else {
            -1.0
        };
        close(wigner_3j(j2, j3, j1, m2, -m1 - m2, m1), value);
        close(wigner_3j(j2, j1, j3, m2, m1, -m1 - m2), sign * value);
        close(wigner_3j(j1, j2, j3, -m1, -m2, m1 + m2), sign * value);
        threes += i32::from(value != 0.0);
    }
    while sixes < 500 {
        let [a, b, c, d, e, f] = [0; 6].map(|_| sequence.up_to(50));
        let value = wigner_6j(a, b, c, d, e, f);
        if value == 0.0 {
            continue;
        }
        close(wigner_6j(b, c, a, e, f, d), value);
        close(wigner_6j(b, a, c, e, d, f), value);
        close(wigner_6j(d, e, c, a, b, f), value);
        // Regge, Nuovo Cimento 11, 116 (1959).
        let half = (b + c + e + f) / 2;
        close(
            wigner_6j(a, half - b, half - c, d, half - e, half - f),
            value,
        );
        sixes += 1;
    }
    while nines < 100 {
        let [a, b, c, d, e, f, g, h, i] = [0; 9].map(|_| sequence.up_to(16));
        let value = wigner_9j(a, b, c, d, e, f, g, h, i);
        if value == 0.0 {
            continue;
        }
        let sign = if (a + b + c + d + e + f + g + h + i) / 2 % 2 == 0 {
            1.0
        } else {
            -1.0
        };
        close(wigner_9j(a, d, g, b, e, h, c, f, i), value);
        close(wigner_9j(d, e, f, a, b, c, g, h, i), sign * value);
        close(wigner_9j(b, c, a, e, f, d, h, i, g), value);
        nines += 1;
    }
}

/// Closed values from memory of tables: (1 1 0; 0 0 0) = −1/√3, (2 2 2; 0 0 0) = −√(2/35),
/// {1 1 1; 1 1 1} = 1/6, {2 2 2; 2 2 2} = −3/70, {½ ½ 1; ½ ½ 1} = 1/6.
#[test]
fn short_tables_from_memory() {
    assert!(relative_error(wigner_3j(2, 2, 0, 0, 0, 0), -1.0 / 3_f64.sqrt()) < 1e-15);
    assert!(relative_error(wigner_3j(4, 4, 4, 0, 0, 0), -(2.0 / 35_f64).sqrt()) < 1e-15);
    assert!(relative_error(wigner_6j(2, 2, 2, 2, 2, 2), 1.0 / 6.0) < 1e-15);
    assert!(relative_error(wigner_6j(4, 4, 4, 4, 4, 4), -3.0 / 70.0) < 1e-15);
    assert!(relative_error(wigner_6j(1, 1, 2, 1, 1, 2), 1.0 / 6.0) < 1e-15);
}

#[test]
fn no_integers_make_them_fail() {
    let edges = [
        i32::MIN,
        i32::MIN + 1,
        -3,
        -1,
        0,
        1,
        2,
        5,
        120,
        i32::MAX - 2,
        i32::MAX - 1,
        i32::MAX,
    ];
    let mut sequence = Sequence(4);
    let mut pick = || edges[sequence.up_to(edges.len() as i32 - 1) as usize];
    for _ in 0..20_000 {
        let [a, b, c, d, e, f, g, h, i] = [0; 9].map(|_| pick());
        for value in [
            wigner_3j(a, b, c, d, e, f),
            wigner_3j(a, b, c, d, e, 0_i32.wrapping_sub(d).wrapping_sub(e)),
            wigner_6j(a, b, c, d, e, f),
            wigner_9j(a, b, c, d, e, f, g, h, i),
        ] {
            assert!(!value.is_nan());
        }
    }
    for a in edges {
        for b in edges {
            let values = [
                wigner_3j(a, a, b, b, -b.max(-9), 0),
                wigner_6j(a, a, b, a, a, b),
                wigner_9j(a, a, b, a, a, b, b, b, b),
            ];
            assert!(values.iter().all(|value| !value.is_nan()), "{a} {b}");
        }
    }
}

#[test]
fn the_stated_capacity_is_reached_and_said() {
    let value = try_wigner_3j(CAPACITY, CAPACITY, CAPACITY, 0, 0, 0).expect("at the capacity");
    // (j j j; 0 0 0)² = J!·(J/2)!²… → 2/(π√3 j²)·… for large j: Edmonds (1957) eq. 3.7.17 by Stirling.
    let j = f64::from(CAPACITY) / 2.0;
    let square = 2.0 / (3_f64.sqrt() * std::f64::consts::PI * j * j);
    assert!(
        relative_error(value * value, square) < 2e-3,
        "{value} {}",
        square.sqrt()
    );
    let value = try_wigner_6j(CAPACITY, CAPACITY, CAPACITY, CAPACITY, CAPACITY, CAPACITY)
        .expect("at the capacity");
    assert!(value != 0.0 && value.abs() < 1.0 / (f64::from(CAPACITY) + 1.0));
    let value = try_wigner_9j([NINE_J_CAPACITY, 200, 160, 280, 200, 180, 200, 200, 120])
        .expect("at the capacity");
    assert!(value != 0.0 && value.abs() < 1e-4);
    for problem in [
        try_wigner_3j(CAPACITY + 4, CAPACITY, CAPACITY, 0, 0, 0).err(),
        try_wigner_6j(
            CAPACITY + 2,
            CAPACITY,
            CAPACITY,
            CAPACITY,
            CAPACITY,
            CAPACITY,
        )
        .err(),
        try_wigner_9j([NINE_J_CAPACITY + 2, 200, 160, 280, 200, 180, 200, 200, 120]).err(),
    ] {
        let problem = problem.expect("a fault");
        assert_eq!(problem.code, "angular-momentum-too-large");
        assert!(problem.bound.is_some());
    }
}
