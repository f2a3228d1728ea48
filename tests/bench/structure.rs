//! Times of the levels of configurations: coefficients from nothing, then all levels; and of lines.

use rungline_core::structure::model::{Case, MultipoleKind};
use rungline_core::structure::{
    Basis, Hamiltonian, Integral, JjTransformation, Levels, Multipole, Parameter, amplitudes,
    estimate,
};
use rungline_tests::model::{case, spectrum};
use std::time::Instant;

fn value(parameter: &Parameter) -> f64 {
    match parameter.integral {
        Integral::Average => 1000.0 * parameter.first as f64,
        Integral::Direct { k, .. } => 60_000.0 / f64::from(k),
        Integral::Exchange { k, .. } => 9_000.0 / f64::from(k + 1),
        Integral::SpinOrbit { a } => 500.0 / (a + 1) as f64,
        Integral::Mixing { k, .. } => 6_000.0 / f64::from(k + 1),
        Integral::OneElectron { .. } | Integral::Effective { .. } => 0.0,
    }
}

fn solve(shells: &[u8], configurations: &[Vec<u32>], best: &mut [f64; 2]) -> (Basis, Levels) {
    let start = Instant::now();
    let basis = Basis::new(shells, configurations).expect("a basis");
    let own = Hamiltonian::new(basis).expect("coefficients");
    best[0] = best[0].min(start.elapsed().as_secs_f64() * 1e3);
    let values = own.values(value);
    let start = Instant::now();
    let levels = Levels::solve(&own, &values).expect("levels");
    best[1] = best[1].min(start.elapsed().as_secs_f64() * 1e3);
    (own.basis().clone(), levels)
}

fn measure(name: &str, shells: &[u8], configurations: &[Vec<u32>]) {
    let sizes = estimate(shells, configurations).expect("sizes");
    let mut best = [f64::INFINITY; 2];
    for _ in 0..3 {
        let (_, levels) = solve(shells, configurations, &mut best);
        assert_eq!(levels.levels.len() as u64, sizes.levels);
    }
    println!(
        "{name:<32} {:>6} levels, largest {:>4}: coefficients {:>9.2} ms, levels {:>9.2} ms",
        sizes.levels, sizes.largest, best[0], best[1]
    );
}

/// Neutral iron: levels of both parities and all E1 lines, from nothing.
fn measure_iron() {
    let shells = [2, 0, 1];
    let mut best = f64::INFINITY;
    let mut lines = 0;
    for _ in 0..3 {
        let start = Instant::now();
        let mut times = [f64::INFINITY; 2];
        let (even, lower) = solve(&shells, &[vec![6, 2, 0], vec![7, 1, 0]], &mut times);
        let (odd, upper) = solve(&shells, &[vec![6, 1, 1], vec![7, 0, 1]], &mut times);
        let operator = Multipole::new(&even, &odd, 1).expect("coefficients");
        let lengths = vec![1.0; operator.transfers().len()];
        let found = amplitudes(&lower, &upper, 1, false, |rows, columns| {
            operator.elements(&lengths, rows, columns)
        });
        lines = found.len();
        best = best.min(start.elapsed().as_secs_f64() * 1e3);
    }
    println!("d6 s2 + d7 s, d6 s p + d7 p, {lines} E1 lines: {best:.2} ms");
}

/// Levels and E1 lines of an atom from nothing, radial functions included.
fn measure_atom(name: &str, case: &Case) {
    let mut best = [f64::INFINITY; 3];
    let (mut levels, mut lines) = (0, 0);
    for _ in 0..3 {
        let start = Instant::now();
        let spectrum = spectrum(case);
        let after = Instant::now();
        let found = spectrum
            .lines(&[MultipoleKind::E1], &mut |_| true)
            .expect("lines");
        let end = Instant::now();
        let (_, parity) = (&found, &spectrum.parities[0]);
        let jj = parity.jj().expect("jj states");
        let means = parity.means(&jj, None);
        assert!(means.ls > 0.0);
        let times = [after - start, end - after, end.elapsed()];
        for (best, time) in best.iter_mut().zip(times) {
            *best = best.min(time.as_secs_f64() * 1e3);
        }
        (levels, lines) = (spectrum.levels.len(), found.lines.len());
    }
    println!(
        "{name}: {levels} levels {:.2} ms, {lines} E1 lines {:.2} ms, jj of one parity {:.2} ms",
        best[0], best[1], best[2]
    );
}

/// The composition of every level in jj coupling, the levels being there.
fn measure_jj(name: &str, shells: &[u8], configurations: &[Vec<u32>]) {
    let (basis, levels) = solve(shells, configurations, &mut [0.0; 2]);
    let start = Instant::now();
    let jj = JjTransformation::new(&basis).expect("jj states");
    let mut leading = 0.0;
    for rows in &levels.rows {
        let scheme = jj.of(&basis, rows);
        for level in levels.levels.iter().filter(|l| l.two_j == rows.two_j) {
            leading += scheme
                .composition(level)
                .first()
                .map_or(0.0, |share| share.1);
        }
    }
    let time = start.elapsed().as_secs_f64() * 1e3;
    let mean = leading / levels.levels.len() as f64;
    println!("{name}, mean leading share in jj {mean:.1} %: {time:.2} ms");
}

fn main() {
    measure("d5", &[2], &[vec![5]]);
    measure("f7", &[3], &[vec![7]]);
    measure("d6 s2 + d7 s", &[2, 0], &[vec![6, 2], vec![7, 1]]);
    measure("d6 s p + d7 p", &[2, 0, 1], &[vec![6, 1, 1], vec![7, 0, 1]]);
    measure(
        "f3 d s2 + f3 d2 s",
        &[3, 2, 0],
        &[vec![3, 1, 2], vec![3, 2, 1]],
    );
    measure("f4 d s", &[3, 2, 0], &[vec![4, 1, 1]]);
    measure("f7 d", &[3, 2], &[vec![7, 1]]);
    measure_iron();
    measure_jj("f7", &[3], &[vec![7]]);
    measure_jj("d6 s p + d7 p", &[2, 0, 1], &[vec![6, 1, 1], vec![7, 0, 1]]);
    measure_jj("f7 d", &[3, 2], &[vec![7, 1]]);
    let iron = ["3d6 4s2", "3d7 4s", "3d6 4s 4p", "3d7 4p"];
    measure_atom("Fe I from nothing", &case(26, 56, 18, &iron));
    measure_atom("Gd IV from nothing", &case(64, 158, 54, &["4f7"]));
    measure_atom("Mn III from nothing", &case(25, 55, 18, &["3d5"]));
}
