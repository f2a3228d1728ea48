//! Cases of the model from short texts.

use rungline_core::configuration::{Orbital, Subshell, filling};
use rungline_core::problem::Problem;
use rungline_core::radial::hartree_fock::{Atom, Solution, solve as field_of};
use rungline_core::structure::model::{Case, Spectrum, solve};
use std::rc::Rc;

/// Radial functions, computed anew each time.
///
/// # Errors
/// Those of the run.
pub fn field(atom: &Atom) -> Result<Rc<Solution>, Problem> {
    field_of(atom, &mut |_| true)
        .map(Rc::new)
        .map_err(|failure| failure.problem)
}

/// `4d`.
pub fn orbital(name: &str) -> Orbital {
    let (n, l) = name.split_at(name.len() - 1);
    let l = "spdfgh".find(l).expect("a letter") as u8;
    Orbital::new(n.parse().expect("n"), l).expect("ℓ below n")
}

/// A closed core, of a noble gas or of none (0), then what is written: `3s2 3p`.
pub fn configuration(core: u8, text: &str) -> Vec<Subshell> {
    let mut subshells = match core {
        0 => Vec::new(),
        _ => {
            let ground = filling::ground(core, 0).expect("a noble gas");
            ground.configuration().subshells().to_vec()
        }
    };
    for word in text.split_whitespace() {
        let (name, electrons) = word.split_at(2);
        let electrons = match electrons {
            "" => 1,
            number => number.parse().expect("N"),
        };
        subshells.push(Subshell::new(orbital(name), electrons).expect("within its capacity"));
    }
    subshells
}

/// Computed levels of these configurations, relativistic and mixing.
pub fn case(z: u8, mass_number: u16, core: u8, configurations: &[&str]) -> Case {
    let all = configurations.iter().map(|text| configuration(core, text));
    Case::new(z, mass_number, all.collect())
}

/// The levels of a case that has some.
pub fn spectrum(case: &Case) -> Spectrum {
    solve(case, &mut field, &mut |_| true).expect("levels")
}

/// Energy and 2J of a level by its place among all.
pub fn energy(spectrum: &Spectrum, place: usize) -> (f64, i32) {
    let (_, level) = spectrum.level(spectrum.levels[place]).expect("a level");
    (level.energy, level.two_j)
}
