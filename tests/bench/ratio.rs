//! The native side of `cargo site bench`: name and seconds of each piece of work, one a line.

use std::time::Instant;

include!("workloads.rs");

fn main() {
    for (index, &(name, calls)) in WORKLOADS.iter().enumerate() {
        black_box(work(index));
        let best = (0..5)
            .map(|_| {
                let start = Instant::now();
                for _ in 0..calls {
                    black_box(work(index));
                }
                start.elapsed().as_secs_f64() / f64::from(calls)
            })
            .fold(f64::INFINITY, f64::min);
        println!("{best:e} {name}");
    }
}
