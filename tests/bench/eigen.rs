//! The native side of the comparison with numpy in `cargo site bench`: seconds and size, one a line.
//!
//! The matrix is that of `eigen.py`: a_ij = ((104729 ij + 7919 (i + j)) mod 65521)/65521 − ½.

use std::hint::black_box;
use std::time::Instant;

use nalgebra::DMatrix;
use rungline_core::numerics::symmetric::eigensystem;

/// Sizes, and how often each is repeated.
const SIZES: [(usize, u32); 2] = [(300, 5), (1000, 2)];

fn main() {
    for (size, rounds) in SIZES {
        let matrix = DMatrix::from_fn(size, size, |i, j| {
            ((104_729 * i * j + 7919 * (i + j)) % 65_521) as f64 / 65_521.0 - 0.5
        });
        let best = (0..rounds)
            .map(|_| {
                let matrix = matrix.clone();
                let start = Instant::now();
                black_box(eigensystem(black_box(matrix)).expect("converges"));
                start.elapsed().as_secs_f64()
            })
            .fold(f64::INFINITY, f64::min);
        println!("{best:e} {size}");
    }
}
