//! The levels of a case.

use super::case::Case;
use super::integrals::{CrossOverlap, Source, larger};
use super::names::{Name, Value};
use crate::angular::equivalent::EquivalentTerm;
use crate::configuration::Orbital;
use crate::constants::ELECTRON_G;
use crate::numerics::order::sort_by;
use crate::problem::Problem;
use crate::radial::hartree_fock::{Atom, Solution};
use crate::structure::basis::{Basis, State};
use crate::structure::hamiltonian::{Hamiltonian, Terms};
use crate::structure::levels::{Level, Levels, stopped};
use crate::structure::schemes::{JjCoupled, JjTransformation, JkCoupled, Scheme, jk_scheme};
use std::rc::Rc;

/// Shares below this, in percent, are not asked first which state a level is named after.
const SLIGHT: f64 = 0.5;

/// The levels of the configurations of one parity.
#[derive(Clone, Debug)]
pub struct Parity {
    /// Whether it is odd.
    pub odd: bool,
    /// The places of its configurations in the case, in the order of the basis.
    pub configurations: Vec<usize>,
    /// The coefficients, with the basis.
    pub hamiltonian: Hamiltonian,
    /// The value of each of its parameters, cm⁻¹.
    pub values: Vec<f64>,
    /// Energies and eigenvectors.
    pub levels: Levels,
    /// For each level the place in [`Basis::states`] of the state that it is named after: no two levels
    /// of one J share one.
    pub named: Vec<usize>,
}

/// A level: its parity's place in [`Spectrum::parities`], and its place in [`Levels::levels`].
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub struct Place {
    /// Which parity.
    pub parity: usize,
    /// Which of its levels.
    pub level: usize,
}

/// Levels of both parities, with what they were computed from.
#[derive(Clone, Debug)]
pub struct Spectrum {
    /// What was asked for.
    pub case: Case,
    /// The subshells of the bases, in the order of coupling: those not full everywhere.
    pub orbitals: Vec<Orbital>,
    /// Even before odd; only those that occur.
    pub parities: Vec<Parity>,
    /// Every radial integral of the energies.
    pub parameters: Vec<Value>,
    /// All levels by rising energy.
    pub levels: Vec<Place>,
    /// Places in [`Case::given`] of what no configuration has, dipole and quadrupole integrals aside.
    pub unused: Vec<usize>,
    /// Of the overlaps of unlike functions between configurations that mix, the one that falsifies most.
    pub largest_cross: Option<CrossOverlap>,
    /// E_av of the first configuration, hartree, where it was computed.
    pub origin: Option<f64>,
    pub(super) runs: Vec<Option<Rc<Solution>>>,
}

/// Mean leading shares in percent, by scheme.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Means {
    /// LS.
    pub ls: f64,
    /// jj.
    pub jj: f64,
    /// jK, where every configuration has such states.
    pub jk: Option<f64>,
}

/// Levels of a case.
///
/// Energies count from E_av of the first configuration where it is computed, otherwise from the scale of
/// what is given. `field` makes radial functions, or has them; `watch` is told how much is done, from
/// 0 to 1, and ends the work by answering false.
///
/// # Errors
/// `no-configuration`, `electron-numbers-differ`; those of [`Basis::new`], [`Hamiltonian::new`] and
/// [`Levels::solve`]; what `field` answers; `stopped`.
pub fn solve(
    case: &Case,
    field: &mut dyn FnMut(&Atom) -> Result<Rc<Solution>, Problem>,
    watch: &mut dyn FnMut(f64) -> bool,
) -> Result<Spectrum, Problem> {
    let expected = super::estimate(case)?;
    let mut progress = Progress {
        done: 0.0,
        whole: expected.seconds.max(1e-9),
        watch,
    };
    let each = expected.field_seconds / case.configurations.len() as f64;
    let mut runs = Vec::with_capacity(case.configurations.len());
    for place in 0..case.configurations.len() {
        runs.push(match case.atom(place) {
            Some(atom) => Some(field(&atom)?),
            None => None,
        });
        progress.step(each)?;
    }
    let orbitals = case.orbitals();
    let mut spectrum = Spectrum {
        case: case.clone(),
        orbitals,
        parities: Vec::new(),
        parameters: Vec::new(),
        levels: Vec::new(),
        unused: Vec::new(),
        largest_cross: None,
        origin: runs
            .first()
            .and_then(|run| run.as_ref().map(|r| r.total_energy)),
        runs,
    };
    for odd in [false, true] {
        let configurations = case.of_parity(odd);
        if configurations.is_empty() {
            continue;
        }
        let (parity, values, cross) = spectrum.parity(odd, configurations, &mut progress)?;
        spectrum.parities.push(parity);
        spectrum.parameters.extend(values);
        spectrum.largest_cross = larger(spectrum.largest_cross, cross);
    }
    spectrum.order();
    spectrum.find_unused();
    Ok(spectrum)
}

/// Tells how far the work has come.
struct Progress<'a> {
    done: f64,
    whole: f64,
    watch: &'a mut dyn FnMut(f64) -> bool,
}

impl Progress<'_> {
    fn step(&mut self, seconds: f64) -> Result<(), Problem> {
        self.done += seconds;
        if (self.watch)((self.done / self.whole).min(1.0)) {
            Ok(())
        } else {
            Err(stopped())
        }
    }
}

impl Spectrum {
    fn parity(
        &self,
        odd: bool,
        configurations: Vec<usize>,
        progress: &mut Progress,
    ) -> Result<(Parity, Vec<Value>, Option<CrossOverlap>), Problem> {
        let case = &self.case;
        let subshells: Vec<u8> = self.orbitals.iter().map(|orbital| orbital.l()).collect();
        let occupations: Vec<Vec<u32>> = (configurations.iter())
            .map(|&place| case.occupations(place, &self.orbitals))
            .collect();
        let sizes = crate::structure::estimate(&subshells, &occupations)?;
        let basis = Basis::new(&subshells, &occupations)?;
        let is_effective =
            |name: &Name| matches!(name, Name::Alpha(_) | Name::Beta(_) | Name::Gamma(_));
        let given = case.given.iter().any(|given| is_effective(&given.name));
        let effective = given
            || (configurations.iter()).any(|&place| {
                let mut orbitals = self.orbitals.iter();
                orbitals.any(|orbital| case.correlates(place, *orbital) == Some(Ok(())))
            });
        let terms = Terms {
            mixing: case.mixing,
            effective,
        };
        let hamiltonian = Hamiltonian::of(basis, terms)?;
        progress.step(super::estimate::coefficient_seconds(&sizes))?;
        let source = Source {
            case,
            runs: &self.runs,
            orbitals: &self.orbitals,
            configurations: &configurations,
        };
        let found = source.values(&hamiltonian);
        let correlation = (source.configurations.iter())
            .map(|&place| super::estimate::correlation_seconds(case, place));
        progress.step(correlation.sum())?;
        let mut refused = Ok(());
        let levels = Levels::solve_watched(&hamiltonian, &found.used, &mut |rows| {
            refused = progress.step(super::estimate::matrix_seconds(rows as f64));
            refused.is_ok()
        })?;
        refused?;
        let named = named(&levels);
        let parity = Parity {
            odd,
            configurations,
            hamiltonian,
            values: found.used,
            levels,
            named,
        };
        Ok((parity, found.shown, found.cross))
    }

    fn order(&mut self) {
        let mut levels: Vec<(f64, Place)> = Vec::new();
        for (parity, of) in self.parities.iter().enumerate() {
            for (level, known) in of.levels.levels.iter().enumerate() {
                levels.push((known.energy, Place { parity, level }));
            }
        }
        // Stable: equal energies stay even before odd.
        sort_by(&mut levels, |a, b| a.0.total_cmp(&b.0));
        self.levels = levels.into_iter().map(|(_, place)| place).collect();
    }

    fn find_unused(&mut self) {
        let mut used = vec![false; self.case.given.len()];
        for value in &self.parameters {
            for (place, given_here) in self.case.given.iter().enumerate() {
                let (first, second) = value.configurations;
                let fits = given_here
                    .configuration
                    .is_none_or(|named| named == first || named == second);
                if fits
                    && given_here.name.ordered() == value.name.ordered()
                    && let Some(mark) = used.get_mut(place)
                {
                    *mark = true;
                }
            }
        }
        self.unused = (self.case.given.iter().enumerate())
            .filter(|(place, known)| {
                let of_lines = matches!(known.name, Name::Dipole(..) | Name::Quadrupole(..));
                !of_lines && used.get(*place) == Some(&false)
            })
            .map(|(place, _)| place)
            .collect();
    }

    /// The radial functions of a configuration, by its place in the case; nothing where none were computed.
    pub fn run(&self, configuration: usize) -> Option<&Solution> {
        self.runs.get(configuration)?.as_deref()
    }

    /// The parity and the level at a place.
    pub fn level(&self, place: Place) -> Option<(&Parity, &Level)> {
        let parity = self.parities.get(place.parity)?;
        Some((parity, parity.levels.levels.get(place.level)?))
    }

    /// The LS state that a level is named after.
    pub fn state_of(&self, place: Place) -> Option<&State> {
        let parity = self.parities.get(place.parity)?;
        let named = parity.named.get(place.level)?;
        parity.basis().states().get(*named)
    }

    /// g_J in intermediate coupling with the electron's g; nothing for J = 0.
    pub fn g(&self, place: Place) -> Option<f64> {
        let (parity, level) = self.level(place)?;
        let electron = ELECTRON_G.value;
        parity.levels.g(parity.basis(), level, electron)
    }

    /// What a given value of an integral is replaced by, for an integral that is no parameter of the
    /// energies.
    pub(super) fn value(
        &self,
        name: Name,
        configurations: (usize, usize),
        computed: Option<f64>,
    ) -> Value {
        Value::new(&self.case, name, configurations, computed)
    }
}

impl Parity {
    /// The LS states.
    pub fn basis(&self) -> &Basis {
        self.hamiltonian.basis()
    }

    /// The place in the case of a state's configuration.
    pub fn configuration_of(&self, state: &State) -> Option<usize> {
        self.configurations.get(state.configuration).copied()
    }

    /// The term of a state's subshell.
    pub fn term_of(&self, state: &State, subshell: usize) -> Option<&EquivalentTerm> {
        let terms = self.basis().terms(state.configuration, subshell);
        terms.get(*state.terms.get(subshell)?)
    }

    /// The states of every J in jj coupling, in the order of [`Levels::rows`].
    ///
    /// # Errors
    /// Those of [`JjTransformation::new`].
    pub fn jj(&self) -> Result<Vec<Scheme<JjCoupled>>, Problem> {
        let transformation = JjTransformation::new(self.basis())?;
        let rows = self.levels.rows.iter();
        Ok(rows
            .map(|rows| transformation.of(self.basis(), rows))
            .collect())
    }

    /// The states of every J in jK coupling, in the order of [`Levels::rows`]; nothing where a
    /// configuration has none.
    pub fn jk(&self) -> Option<Vec<Scheme<JkCoupled>>> {
        let rows = self.levels.rows.iter();
        rows.map(|rows| jk_scheme(self.basis(), rows)).collect()
    }

    /// The place in [`Levels::rows`] of a level's J.
    pub fn rows_place(&self, level: &Level) -> Option<usize> {
        let rows = &self.levels.rows;
        rows.binary_search_by_key(&level.two_j, |rows| rows.two_j)
            .ok()
    }

    /// Mean leading shares of all levels.
    pub fn means(&self, jj: &[Scheme<JjCoupled>], jk: Option<&[Scheme<JkCoupled>]>) -> Means {
        let count = self.levels.levels.len().max(1) as f64;
        let (mut ls, mut in_jj, mut in_jk) = (0.0, 0.0, 0.0);
        let first = |shares: Vec<(usize, f64)>| shares.first().map_or(0.0, |share| share.1);
        for level in &self.levels.levels {
            ls += first(self.levels.composition(level));
            let place = self.rows_place(level);
            let of_jj = place.and_then(|place| jj.get(place));
            in_jj += of_jj.map_or(0.0, |scheme| first(scheme.composition(level)));
            let of_jk = jk.zip(place).and_then(|(jk, place)| jk.get(place));
            in_jk += of_jk.map_or(0.0, |scheme| first(scheme.composition(level)));
        }
        Means {
            ls: ls / count,
            jj: in_jj / count,
            jk: jk.map(|_| in_jk / count),
        }
    }
}

/// A state for each level, no two levels of one J the same: the largest share of all first, then the
/// largest of what is left.
fn named(levels: &Levels) -> Vec<usize> {
    let mut named = vec![usize::MAX; levels.levels.len()];
    for rows in &levels.rows {
        let of_j: Vec<(usize, &Level)> = (levels.levels.iter().enumerate())
            .filter(|(_, level)| level.two_j == rows.two_j)
            .collect();
        let mut shares: Vec<(f64, usize, usize)> = Vec::new();
        for &(place, level) in &of_j {
            for (row, component) in level.vector.iter().enumerate() {
                let share = 100.0 * component * component;
                if share > SLIGHT {
                    shares.push((share, place, row));
                }
            }
        }
        sort_by(&mut shares, |a, b| b.0.total_cmp(&a.0));
        let mut taken = vec![false; rows.states.len()];
        let mut name = |place: usize, row: usize, taken: &mut Vec<bool>| {
            let free = taken.get(row) == Some(&false) && named.get(place) == Some(&usize::MAX);
            if let (true, Some(&state)) = (free, rows.states.get(row)) {
                if let Some(name) = named.get_mut(place) {
                    *name = state;
                }
                if let Some(mark) = taken.get_mut(row) {
                    *mark = true;
                }
            }
        };
        for (_, place, row) in shares {
            name(place, row, &mut taken);
        }
        // Levels whose larger components all name others, by rising energy.
        for &(place, level) in &of_j {
            let mut best = (usize::MAX, -1.0);
            for (row, component) in level.vector.iter().enumerate() {
                if taken.get(row) == Some(&false) && component * component > best.1 {
                    best = (row, component * component);
                }
            }
            name(place, best.0, &mut taken);
        }
    }
    named
}
