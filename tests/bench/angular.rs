//! How long angular momentum algebra takes: `cargo bench -p rungline-tests --bench angular`.
//!
//! Prints the best of several rounds, one line for each quantity: name, value, unit.

use std::hint::black_box;
use std::time::Instant;

use rungline_core::angular::equivalent::classify;
use rungline_core::angular::parentage::parents;
use rungline_core::angular::{wigner_3j, wigner_6j, wigner_9j};

/// Arguments that no selection rule forbids, repeating from run to run.
fn arguments(count: usize, largest: u64) -> Vec<[i32; 6]> {
    let mut state = 7_u64;
    let mut draw = || {
        state = state
            .wrapping_mul(6_364_136_223_846_793_005)
            .wrapping_add(1_442_695_040_888_963_407);
        ((state >> 33) % (largest + 1)) as i32
    };
    let mut found = Vec::with_capacity(count);
    while found.len() < count {
        let two_j = [0; 6].map(|_| draw());
        let [a, b, c, d, e, f] = two_j;
        let allowed =
            |a: i32, b: i32, c: i32| (a + b + c) % 2 == 0 && c >= (a - b).abs() && c <= a + b;
        if allowed(a, b, c) && allowed(a, e, f) && allowed(d, b, f) && allowed(d, e, c) {
            found.push(two_j);
        }
    }
    found
}

/// Seconds of the fastest of `rounds` calls.
fn best(rounds: usize, mut work: impl FnMut()) -> f64 {
    work();
    (0..rounds)
        .map(|_| {
            let start = Instant::now();
            work();
            start.elapsed().as_secs_f64()
        })
        .fold(f64::INFINITY, f64::min)
}

fn main() {
    for (name, largest, count) in [("j <= 15", 30, 100_000), ("j <= 60", 120, 2000)] {
        let cases = arguments(count, largest);
        let seconds = best(7, || {
            let sum: f64 = cases
                .iter()
                .map(|&[a, b, c, d, e, f]| wigner_6j(a, b, c, d, e, f))
                .sum();
            black_box(sum);
        });
        println!(
            "6j, {name:<28} {:>10.3} million/s",
            count as f64 / seconds / 1e6
        );
        let seconds = best(7, || {
            let sum: f64 = cases
                .iter()
                .map(|&[a, b, c, ..]| wigner_3j(a, b, c, a % 2, b % 2, -(a % 2) - b % 2))
                .sum();
            black_box(sum);
        });
        println!(
            "3j, {name:<28} {:>10.3} million/s",
            count as f64 / seconds / 1e6
        );
    }
    let cases = arguments(2000, 10);
    let seconds = best(7, || {
        let sum: f64 = cases
            .iter()
            .map(|&[a, b, c, d, e, f]| {
                wigner_9j(a, b, c, d, e, c, f, f, 0) + wigner_9j(a, b, c, b, c, a, c, a, b)
            })
            .sum();
        black_box(sum);
    });
    println!(
        "9j, {:<28} {:>10.3} million/s",
        "j <= 5",
        2.0 * cases.len() as f64 / seconds / 1e6
    );
    for (name, l, electrons) in [
        ("terms of d5", 2, 5),
        ("terms of f7", 3, 7),
        ("terms of f9", 3, 9),
    ] {
        let seconds = best(200, || {
            black_box(classify(black_box(l), black_box(electrons)).is_ok());
        });
        println!("{name:<32} {:>10.1} microseconds", seconds * 1e6);
    }
    // Tables are kept, so only the first call works; each needs those of fewer electrons.
    for (name, l, electrons) in [
        ("parents of d5", 2, 5),
        ("parents of f7", 3, 7),
        ("parents of f8, after f7", 3, 8),
    ] {
        let start = Instant::now();
        black_box(parents(l, electrons).is_ok());
        println!(
            "{name:<32} {:>10.3} milliseconds, first call",
            start.elapsed().as_secs_f64() * 1e3
        );
    }
}
