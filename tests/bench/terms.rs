//! How long counting terms takes: `cargo bench -p rungline-tests --bench terms`.
//!
//! Prints the best of several rounds, one line for each quantity: name, value, unit.

use std::hint::black_box;
use std::time::Instant;

use rungline_core::configuration::{Orbital, Subshell};
use rungline_core::radiation::selection::{Between, TermOf};
use rungline_core::terms::{chains, grid, jj, ls};

fn shell(n: u8, l: u8, electrons: u32) -> Subshell {
    let orbital = Orbital::new(n, l).expect("an orbital of the bench");
    Subshell::new(orbital, electrons).expect("a subshell of the bench")
}

/// Milliseconds of one call, the fastest of seven rounds.
fn report<R>(name: &str, calls: u32, mut work: impl FnMut() -> R) {
    black_box(work());
    let best = (0..7)
        .map(|_| {
            let start = Instant::now();
            for _ in 0..calls {
                black_box(work());
            }
            start.elapsed().as_secs_f64()
        })
        .fold(f64::INFINITY, f64::min);
    println!("{name:<40} {:>10.4} ms", best / f64::from(calls) * 1e3);
}

fn main() {
    let f7 = [shell(4, 3, 7)];
    let wide = [shell(4, 3, 7), shell(5, 2, 5), shell(6, 1, 3)];
    report("f7, terms", 200, || ls::terms(black_box(&f7)));
    report("f7 d5 p3, terms", 200, || ls::terms(black_box(&wide)));
    report("f7 d5 p3, grid", 200, || grid::grid(black_box(&wide)));
    report("f7 d5 p3, levels by J through jj", 100, || {
        jj::levels_by_j(black_box(&wide))
    });
    report("f7 d5 p3, 200 jj configurations", 20, || {
        jj::configurations(black_box(&wide), 200)
    });
    report("f7 d5 p3, 2000 coupling chains", 5, || {
        chains::chains(black_box(&wide), 2000)
    });

    let upper = [shell(3, 2, 5), shell(4, 1, 1)];
    let lower = [shell(3, 2, 5), shell(4, 0, 1)];
    let list = |shells: &[Subshell]| chains::chains(shells, 2000).expect("few terms").listed;
    let (uppers, lowers) = (list(&upper), list(&lower));
    report("d5 p to d5 s, every pair of levels judged", 5, || {
        let between = Between::new(&upper, &lower).expect("as many electrons");
        let mut allowed = 0_u32;
        for a in &uppers {
            for b in &lowers {
                let of = |c| {
                    let chain: &chains::Chain = c;
                    TermOf {
                        term: chain.term,
                        index: Some(chain.index),
                        chain: Some(chain),
                    }
                };
                for j in a.term.levels() {
                    for k in b.term.levels() {
                        let verdicts = between.verdicts(&of(a), j, &of(b), k);
                        allowed +=
                            verdicts.iter().filter(|v| v.refused_by.is_none()).count() as u32;
                    }
                }
            }
        }
        allowed
    });
}
