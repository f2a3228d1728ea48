// The same work natively and in WebAssembly: included by both benches.

use std::hint::black_box;
use std::rc::Rc;

use rungline_core::angular::{equivalent, wigner_6j};
use rungline_core::configuration::{Orbital, Subshell, filling};
use rungline_core::radial::hartree_fock::{Atom, solve};
use rungline_core::radial::nucleus::stable_mass_number;
use rungline_core::sheet;
use rungline_core::structure::model::{self, Case, MultipoleKind};
use rungline_core::terms::ls;

/// A named piece of work and how often it is repeated within one timing.
pub const WORKLOADS: &[(&str, u32)] = &[
    ("6j symbols with j up to 15, 4096 of them", 20),
    ("f7 terms with seniority", 2000),
    ("f7 d5 p3 terms", 2000),
    (
        "the states of neutral iron, as the page asks for them",
        1000,
    ),
    ("the self-consistent field of neutral iron", 5),
    (
        "the self-consistent field of neutral uranium, relativistic",
        1,
    ),
    ("levels of d5, radial functions included", 5),
    ("all 327 levels of f7, radial functions included", 1),
    (
        "neutral iron, d6 s2 + d7 s + d6 s p + d7 p: levels and E1 lines from nothing",
        1,
    ),
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
        3 => {
            let text = r#"{"rungline":1,"species":"Fe I","configurations":["3d6 4s2"]}"#;
            sheet::answer_text(black_box(text), Some(sheet::Question::States))
                .map_or(0.0, |answer| answer.len() as f64)
        }
        4 => field(26, false),
        5 => field(92, true),
        6 => levels((25, 55), &[&[(3, 2, 5)]], false),
        7 => levels((64, 158), &[&[(4, 3, 7)]], false),
        _ => levels(
            (26, 56),
            &[
                &[(3, 2, 6), (4, 0, 2)],
                &[(3, 2, 7), (4, 0, 1)],
                &[(3, 2, 6), (4, 0, 1), (4, 1, 1)],
                &[(3, 2, 7), (4, 1, 1)],
            ],
            true,
        ),
    }
}

/// Levels of configurations n ℓ N outside a noble gas, relativistic and mixing, and their E1 lines;
/// nothing is kept from one call to the next.
fn levels((z, mass_number): (u8, u16), outside: &[&[(u8, u8, u32)]], with_lines: bool) -> f64 {
    let noble = if z > 54 { 54 } else { 18 };
    let Some(core) = filling::ground(black_box(noble), 0) else {
        return 0.0;
    };
    let configurations = outside.iter().map(|shells| {
        let mut all = core.configuration().subshells().to_vec();
        let open = shells.iter();
        all.extend(
            open.filter_map(|&(n, l, electrons)| Subshell::new(Orbital::new(n, l)?, electrons)),
        );
        all
    });
    let case = Case::new(z, mass_number, configurations.collect());
    let mut field = |atom: &Atom| {
        solve(atom, &mut |_| true)
            .map(Rc::new)
            .map_err(|f| f.problem)
    };
    let Ok(spectrum) = model::solve(&case, &mut field, &mut |_| true) else {
        return 0.0;
    };
    let lines = match with_lines {
        true => spectrum
            .lines(&[MultipoleKind::E1], &mut |_| true)
            .map_or(0, |found| found.lines.len()),
        false => 0,
    };
    (spectrum.levels.len() + lines) as f64
}

/// The average energy of a neutral atom's ground configuration.
fn field(z: u8, relativity: bool) -> f64 {
    let Some(ground) = filling::ground(black_box(z), 0) else {
        return 0.0;
    };
    let subshells = ground.configuration().subshells().to_vec();
    let atom = match relativity {
        true => Atom::relativistic(z, subshells, stable_mass_number(z)),
        false => Atom::new(z, subshells),
    };
    solve(&atom, &mut |_| true).map_or(0.0, |solution| solution.total_energy)
}
