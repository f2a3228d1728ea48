//! The work of `tests/bench` for `cargo site bench`; in no build that is shipped.

use wasm_bindgen::prelude::wasm_bindgen;

include!("../../tests/bench/workloads.rs");

/// How often each workload is repeated within one timing, in their order.
#[wasm_bindgen]
pub fn bench_calls() -> Vec<u32> {
    WORKLOADS.iter().map(|&(_, calls)| calls).collect()
}

/// Does one of them so many times.
#[wasm_bindgen]
pub fn bench_work(index: usize, calls: u32) -> f64 {
    (0..calls).map(|_| work(index)).sum()
}
