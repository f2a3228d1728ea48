//! One dense block near the largest that is diagonalised in full, alone: its time, and the most memory
//! that stood allocated at one time.

use rungline_core::structure::{Basis, Hamiltonian, MOST_ROWS, solve_j};
use rungline_tests::figures::round_figures;
use std::alloc::{GlobalAlloc, Layout, System};
use std::sync::atomic::{AtomicUsize, Ordering};
use std::time::Instant;

/// The system's allocator with a tally.
struct Counting;

static NOW: AtomicUsize = AtomicUsize::new(0);
static MOST: AtomicUsize = AtomicUsize::new(0);

fn taken(bytes: usize) {
    let now = NOW.fetch_add(bytes, Ordering::Relaxed) + bytes;
    MOST.fetch_max(now, Ordering::Relaxed);
}

// SAFETY: every call goes to the system's allocator as it came.
unsafe impl GlobalAlloc for Counting {
    unsafe fn alloc(&self, layout: Layout) -> *mut u8 {
        taken(layout.size());
        unsafe { System.alloc(layout) }
    }

    unsafe fn dealloc(&self, place: *mut u8, layout: Layout) {
        NOW.fetch_sub(layout.size(), Ordering::Relaxed);
        unsafe { System.dealloc(place, layout) }
    }

    unsafe fn realloc(&self, place: *mut u8, layout: Layout, size: usize) -> *mut u8 {
        // Both may stand at one time.
        taken(size);
        NOW.fetch_sub(layout.size(), Ordering::Relaxed);
        unsafe { System.realloc(place, layout, size) }
    }
}

#[global_allocator]
static ALLOCATOR: Counting = Counting;

/// What a block of that size may take, bytes.
const BOUND: usize = 1_000_000_000;

fn measure(name: &str, shells: &[u8], configurations: &[Vec<u32>], least: usize) {
    let start = Instant::now();
    let basis = Basis::new(shells, configurations).expect("a basis");
    let own = Hamiltonian::new(basis).expect("coefficients");
    let values = own.values(round_figures);
    let rows = own
        .basis()
        .two_js()
        .into_iter()
        .map(|two_j| own.rows(two_j));
    let rows = rows.max_by_key(|rows| rows.states.len()).expect("a J");
    let size = rows.states.len();
    assert!((least..=MOST_ROWS as usize).contains(&size), "{size} rows");
    let coefficients = start.elapsed().as_secs_f64();
    let start = Instant::now();
    let levels = solve_j(&own, &rows, &values).expect("levels");
    let time = start.elapsed().as_secs_f64();
    assert_eq!(levels.len(), size);
    let most = MOST.load(Ordering::Relaxed);
    println!(
        "{name}, 2J = {}, {size} rows: coefficients {coefficients:.2} s, block {time:.1} s, at most {:.0} MB at one time ({:.1} times the matrix)",
        rows.two_j,
        most as f64 * 1e-6,
        most as f64 / (8.0 * (size * size) as f64)
    );
    assert!(most < BOUND, "{most} bytes");
}

fn main() {
    measure(
        "f7 d p + f7 s p",
        &[3, 2, 1, 0],
        &[vec![7, 1, 1, 0], vec![7, 0, 1, 1]],
        2900,
    );
}
