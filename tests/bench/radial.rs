//! How long a self-consistent field takes: `cargo bench -p rungline-tests --bench radial`.
//!
//! Prints the best of several runs, one line for each atom; the last lines show how time grows with Z.

use std::hint::black_box;
use std::time::Instant;

use rungline_core::configuration::{Orbital, Subshell, filling};
use rungline_core::radial::hartree_fock::{Atom, Solution, solve};
use rungline_core::radial::multipole::between;
use rungline_core::radial::nucleus::stable_mass_number;

fn ground(z: u8, relativity: bool) -> Atom {
    let ground = filling::ground(z, 0).expect("an element of the bench");
    let subshells = ground.configuration().subshells().to_vec();
    if relativity {
        Atom::relativistic(z, subshells, stable_mass_number(z))
    } else {
        Atom::new(z, subshells)
    }
}

fn solved(atom: &Atom) -> Solution {
    solve(atom, &mut |_| true).expect("the bench's atoms converge")
}

/// Milliseconds of one call, the fastest of several rounds.
fn best<R>(rounds: u32, mut work: impl FnMut() -> R) -> f64 {
    (0..rounds)
        .map(|_| {
            let start = Instant::now();
            black_box(work());
            start.elapsed().as_secs_f64() * 1e3
        })
        .fold(f64::INFINITY, f64::min)
}

fn main() {
    for (name, z) in [("He", 2), ("Fe", 26), ("Xe", 54), ("U", 92)] {
        for relativity in [false, true] {
            let atom = ground(z, relativity);
            let time = best(15, || solved(black_box(&atom)));
            let found = solved(&atom);
            let mark = if relativity { ", relativistic" } else { "" };
            println!(
                "{:<40} {time:>10.3} ms   {} iterations, {} splines",
                format!("{name}{mark}"),
                found.iterations(),
                found.mesh.size()
            );
        }
    }
    let uranium = solved(&ground(92, true));
    let time = best(7, || {
        uranium
            .orbitals
            .iter()
            .filter_map(|o| uranium.zeta(o))
            .sum::<f64>()
    });
    println!("{:<40} {time:>10.3} ms", "U, every ζ");
    let mut excited = ground(55, true);
    let six_p = Subshell::new(Orbital::new(6, 1).expect("6p"), 1).expect("one electron");
    excited.subshells.retain(|s| s.orbital().n() < 6);
    excited.subshells.push(six_p);
    let (s, p) = (solved(&ground(55, true)), solved(&excited));
    let six_s = Orbital::new(6, 0).expect("6s");
    let time = best(7, || between(1, (&s, six_s), (&p, six_p.orbital())));
    println!("{:<40} {time:>10.3} ms", "Cs 6s – 6p between two runs");
    for z in (10..=100).step_by(15) {
        let atom = ground(z, false);
        let time = best(5, || solved(black_box(&atom)));
        println!("{:<40} {time:>10.3} ms", format!("Z = {z}"));
    }
}
