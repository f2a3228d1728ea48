//! Every atom, its first ions, its K and L holes and its excited states: do they converge?

use rungline_core::configuration::{Orbital, Subshell, filling};
use rungline_core::radial::hartree_fock::{Atom, HEAVIEST, solve};
use rungline_core::radial::nucleus::stable_mass_number;
use rungline_tests::{Row, report};

/// What a sweep found.
#[derive(Default)]
struct Found {
    cases: usize,
    iterations: usize,
    most: usize,
    virial: f64,
    failures: Vec<String>,
}

impl Found {
    fn run(&mut self, name: &str, z: u8, subshells: &[Subshell], relativity: bool) -> Option<f64> {
        let atom = if relativity {
            Atom::relativistic(z, subshells.to_vec(), stable_mass_number(z))
        } else {
            Atom::new(z, subshells.to_vec())
        };
        self.cases += 1;
        match solve(&atom, &mut |_| true) {
            Ok(solution) => {
                self.iterations += solution.iterations();
                self.most = self.most.max(solution.iterations());
                let deviation = (solution.virial_ratio() + 2.0).abs();
                if !relativity {
                    self.virial = self.virial.max(deviation);
                }
                let bound = solution.orbitals.iter().all(|o| o.energy < 0.0);
                let near = solution.residual() < 1e-10;
                if !(bound && near && solution.total_energy.is_finite()) {
                    self.failures.push(format!("{name}, Z = {z}: no good"));
                }
                Some(solution.total_energy)
            }
            Err(failure) => {
                let message = failure.problem.message;
                self.failures.push(format!("{name}, Z = {z}: {message}"));
                None
            }
        }
    }

    fn close(self, name: &str, what: &str) {
        println!(
            "{what}: {} runs, {:.1} iterations each, {} at most",
            self.cases,
            self.iterations as f64 / self.cases as f64,
            self.most
        );
        for failure in &self.failures {
            eprintln!("{what}: {failure}");
        }
        report(
            name,
            Row {
                quantity: format!("{what}: runs that do not converge"),
                cases: self.cases,
                worst: self.failures.len() as f64,
                tolerance: 0.0,
                measure: "cases".into(),
                source: "ground configurations from mendeleev 1.3.0 (MIT)".into(),
            },
        );
        if self.virial > 0.0 {
            report(
                &format!("{name}_virial"),
                Row {
                    quantity: format!("{what}: virial ratio + 2"),
                    cases: self.cases,
                    worst: self.virial,
                    tolerance: 1e-8,
                    measure: "absolute".into(),
                    source: "the virial theorem".into(),
                },
            );
        }
    }
}

fn ground(z: u8, charge: i32) -> Vec<Subshell> {
    let ground = filling::ground(z, charge).expect("a ground configuration");
    ground.configuration().subshells().to_vec()
}

/// One electron less in an orbital.
fn without(subshells: &[Subshell], orbital: Orbital) -> Vec<Subshell> {
    subshells
        .iter()
        .filter_map(|s| match s.orbital() == orbital {
            true => Subshell::new(orbital, s.electrons() - 1),
            false => Some(*s),
        })
        .collect()
}

/// One electron more in an orbital, where it has room.
fn with(subshells: &[Subshell], orbital: Orbital) -> Option<Vec<Subshell>> {
    let held = subshells.iter().find(|s| s.orbital() == orbital);
    let added = Subshell::new(orbital, held.map_or(0, |s| s.electrons()) + 1)?;
    let mut all: Vec<Subshell> = subshells
        .iter()
        .copied()
        .filter(|s| s.orbital() != orbital)
        .collect();
    all.push(added);
    Some(all)
}

fn orbital(n: u8, l: u8) -> Orbital {
    Orbital::new(n, l).expect("ℓ below n")
}

fn atoms_and_ions(relativity: bool) -> Found {
    let mut found = Found::default();
    for charge in 0..=2 {
        for z in 1..=HEAVIEST {
            if i32::from(z) > charge {
                found.run(
                    &format!("charge {charge}"),
                    z,
                    &ground(z, charge),
                    relativity,
                );
            }
        }
    }
    found
}

fn holes(relativity: bool) -> Found {
    let mut found = Found::default();
    for z in 10..=92 {
        for (n, l) in [(1, 0), (2, 0), (2, 1)] {
            let hole = without(&ground(z, 0), orbital(n, l));
            found.run(&format!("hole in {}", orbital(n, l)), z, &hole, relativity);
        }
    }
    found
}

/// One electron excited to every nℓ up to n = 12, ℓ = 5, above the singly charged ground
/// configuration; the energies of each series have to rise with n.
fn excited(relativity: bool) -> Found {
    let mut found = Found::default();
    for z in [2u8, 6, 11, 19, 20, 29, 37, 55, 56, 64, 80, 87, 92] {
        let core = ground(z, 1);
        for l in 0..=5 {
            let mut below = f64::NEG_INFINITY;
            for n in l + 1..=12 {
                let Some(subshells) = with(&core, orbital(n, l)) else {
                    continue;
                };
                let name = format!("{} excited", orbital(n, l));
                let energy = found.run(&name, z, &subshells, relativity);
                // Two members of a series with one energy would be one state found twice.
                if energy.is_some_and(|energy| energy < below + 1e-6) {
                    let failure = format!("{name}, Z = {z}: not above the one before it");
                    found.failures.push(failure);
                }
                below = energy.unwrap_or(below);
            }
        }
    }
    found
}

/// Every charge of a few elements.
fn charges(relativity: bool) -> Found {
    let mut found = Found::default();
    for z in [10u8, 26, 36, 54, 74, 92, 103] {
        for charge in 3..i32::from(z) {
            found.run(
                &format!("charge {charge}"),
                z,
                &ground(z, charge),
                relativity,
            );
        }
    }
    found
}

/// Up to three electrons of a ground configuration put elsewhere, drawn with a fixed seed.
fn drawn(relativity: bool) -> Found {
    let mut found = Found::default();
    let mut seed = 20_261_201_u64;
    let mut draw = |below: usize| {
        // Knuth's linear congruence; its high bits are good enough here.
        seed = seed
            .wrapping_mul(6_364_136_223_846_793_005)
            .wrapping_add(1_442_695_040_888_963_407);
        (seed >> 33) as usize % below
    };
    for _ in 0..250 {
        let z = 1 + draw(usize::from(HEAVIEST)) as u8;
        let charge = draw(usize::from(z).min(6)) as i32;
        let mut subshells = ground(z, charge);
        for _ in 0..1 + draw(3) {
            let from = subshells[draw(subshells.len())].orbital();
            let l = draw(5) as u8;
            let to = orbital(l + 1 + draw(6) as u8, l);
            if let (true, Some(moved)) = (from != to, with(&without(&subshells, from), to)) {
                subshells = moved;
            }
        }
        let text: Vec<String> = subshells.iter().map(|s| s.to_string()).collect();
        found.run(&text.join(" "), z, &subshells, relativity);
    }
    found
}

#[test]
fn every_charge_converges() {
    charges(false).close("radial_charges", "every charge of seven elements");
}

#[test]
fn every_charge_converges_with_relativity() {
    let what = "every charge of seven elements, with relativity";
    charges(true).close("radial_charges_relativity", what);
}

#[test]
fn drawn_configurations_converge() {
    drawn(false).close("radial_drawn", "configurations drawn at random");
}

#[test]
fn drawn_configurations_converge_with_relativity() {
    let what = "configurations drawn at random, with relativity";
    drawn(true).close("radial_drawn_relativity", what);
}

#[test]
fn atoms_and_ions_converge() {
    atoms_and_ions(false).close("radial_sweep", "neutral atoms, charges 1 and 2");
}

#[test]
fn atoms_and_ions_converge_with_relativity() {
    let what = "neutral atoms, charges 1 and 2, with relativity";
    atoms_and_ions(true).close("radial_sweep_relativity", what);
}

#[test]
fn inner_holes_converge() {
    holes(false).close("radial_holes", "K and L holes of Z = 10 to 92");
}

#[test]
fn inner_holes_converge_with_relativity() {
    let what = "K and L holes of Z = 10 to 92, with relativity";
    holes(true).close("radial_holes_relativity", what);
}

#[test]
fn excited_configurations_converge() {
    excited(false).close("radial_excited", "excited to n = 12, ℓ = 5");
}

#[test]
fn excited_configurations_converge_with_relativity() {
    excited(true).close(
        "radial_excited_relativity",
        "excited to n = 12, ℓ = 5, with relativity",
    );
}
