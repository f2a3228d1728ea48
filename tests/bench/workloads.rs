// The same work natively and in WebAssembly: included by both benches.

use std::hint::black_box;

use rungline_core::angular::{equivalent, wigner_6j};
use rungline_core::configuration::{Orbital, Subshell};
use rungline_core::sheet;
use rungline_core::terms::ls;

/// A named piece of work and how often it is repeated within one timing.
pub const WORKLOADS: &[(&str, u32)] = &[
    ("6j symbols with j up to 15, 4096 of them", 20),
    ("f7 terms with seniority", 20),
    ("f7 d5 p3 terms", 50),
    ("the states of neutral iron, as the page asks for them", 50),
];

/// Does a piece of work once. The number only keeps the compiler from leaving the work out.
pub fn work(index: usize) -> f64 {
    match index {
        0 => {
            let mut sum = 0.0;
            for step in 0..4096 {
                let j = |salt: i32| (step * salt) % 31;
                let (a, b) = (j(7), j(11));
                let c = (a - b).abs() + 2 * (step % (a.min(b) + 1));
                sum += wigner_6j(black_box(a), b, c, a, b, c);
            }
            sum
        }
        1 => equivalent::classify(black_box(3), 7).map_or(0.0, |terms| terms.len() as f64),
        2 => {
            let shells: Vec<Subshell> = [(4, 3, 7), (5, 2, 5), (6, 1, 3)]
                .into_iter()
                .filter_map(|(n, l, electrons)| Subshell::new(Orbital::new(n, l)?, electrons))
                .collect();
            ls::terms(black_box(&shells)).map_or(0.0, |found| found.terms.len() as f64)
        }
        _ => {
            let text = r#"{"rungline":1,"species":"Fe I","configurations":["3d6 4s2"]}"#;
            sheet::answer_text(black_box(text), Some(sheet::Question::States))
                .map_or(0.0, |answer| answer.len() as f64)
        }
    }
}
