//! The parameters of an energy matrix from radial functions.
//!
//! Each configuration has radial functions of its own, which make its E_av stationary, and its E_av, F^k,
//! G^k and ζ are theirs (Cowan, *The Theory of Atomic Structure and Spectra* (1981), chapters 8 and
//! 16). R^k between two takes functions of both, see [`crate::radial::mixing`]. ζ between configurations
//! that differ by nℓ → n′ℓ is left out.
//!
//! **nℓ → n′ℓ.** Functions that make E_av stationary leave no mean coupling between a configuration
//! and one in which nℓ has become n′ℓ: Σ (2S+1)(2L+1) over what both have in common vanishes,
//! ⟨a|h|c⟩ + Σ_b n_b [R⁰(ab,cb) − Σ_k g_k R^k(ab,bc)] = 0, for b = a and b = c with the coefficients c_k of
//! equivalent electrons and one electron less (Brillouin's theorem for the average: Froese Fischer,
//! *The Hartree–Fock Method for Atoms* (1977), chapter 3). ⟨a|h|c⟩ is taken from that. What remains is how each
//! term departs from the mean, which is real: a term's own radial function differs from the
//! average one.
//!
//! What is left out is of second order in the overlaps of unlike functions: where ⟨nℓ|n′ℓ⟩ is not small,
//! a state of nℓ → n′ℓ is not orthogonal to one of its own S and L below it, and lies too low, by up to
//! q⟨nℓ|n′ℓ⟩² times the energy between the two, q being the electrons that can jump ([`CrossOverlap`]
//! tells it). Mg 3s² and 3s4s have ⟨3s|4s′⟩ = −0.28: ¹S of 3s4s comes out 400 cm⁻¹ below ³S and is observed
//! 2300 above. An overlap matrix in the energies makes it 7700, and 5300 with 5s and 6s besides, for
//! average functions are no good ones for such a ¹S; so there is none.

use super::case::Case;
use super::correlation::Correlation;
use super::names::{Kind, Name, Value};
use crate::configuration::Orbital;
use crate::constants::HARTREE_WAVENUMBER;
use crate::radial::average::{exchange, within};
use crate::radial::hartree_fock::{RadialOrbital, Solution};
use crate::radial::mixing::{Between, Cross};
use crate::structure::basis::Basis;
use crate::structure::hamiltonian::Hamiltonian;
use crate::structure::parameters::{Effective, Integral, Parameter};
use std::rc::Rc;

/// The runs of all configurations; nothing for one that was not computed.
pub(super) type Runs = [Option<Rc<Solution>>];

/// The overlap of unlike functions of two configurations that matters most.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct CrossOverlap {
    /// The places of the two configurations.
    pub configurations: (usize, usize),
    /// Which functions, and how much.
    pub cross: Cross,
    /// How much too low a level of the upper configuration can lie that has S and L of one of the lower:
    /// q⟨a|c⟩²|ΔE_av| where the configurations differ by a → c, otherwise zero; cm⁻¹.
    pub too_low: f64,
}

/// What the matrices of one parity need.
pub(super) struct Source<'a> {
    pub case: &'a Case,
    pub runs: &'a Runs,
    /// The list of subshells of the basis.
    pub orbitals: &'a [Orbital],
    /// The places of the configurations of the basis.
    pub configurations: &'a [usize],
}

/// The values of the parameters of one parity.
pub(super) struct Found {
    /// Of every parameter of the matrix, cm⁻¹.
    pub used: Vec<f64>,
    /// What they are made of.
    pub shown: Vec<Value>,
    /// The largest overlap of unlike functions.
    pub cross: Option<CrossOverlap>,
}

impl Source<'_> {
    /// The value of every parameter in their order, behind F^k what correlation adds to it, and the largest
    /// overlap of unlike functions.
    pub fn values(&self, hamiltonian: &Hamiltonian) -> Found {
        let mut values: Vec<Value> = Vec::with_capacity(hamiltonian.parameters().len());
        let mut changed: Vec<Option<f64>> = Vec::new();
        let mut largest: Option<CrossOverlap> = None;
        let correlations = self.correlations();
        // Parameters of one pair of configurations stand together.
        let mut pair: Option<((usize, usize), Option<Between>)> = None;
        for parameter in hamiltonian.parameters() {
            let places = (parameter.first, parameter.second);
            let Some(configurations) = self.configurations_of(places) else {
                continue;
            };
            let between = match parameter.integral {
                Integral::Mixing { .. } | Integral::OneElectron { .. } => {
                    if pair.as_ref().is_none_or(|(known, _)| *known != places) {
                        let between = self.between(configurations);
                        let cross = between.as_ref().and_then(|b| self.cross(b, configurations));
                        largest = larger(largest, cross);
                        pair = Some((places, between));
                    }
                    pair.as_ref().and_then(|(_, between)| between.as_ref())
                }
                _ => None,
            };
            let Some(name) = Name::of(parameter, self.orbitals, self.configurations) else {
                continue;
            };
            let added = correlation(&correlations, name, configurations.0)
                .map(|hartree| hartree * HARTREE_WAVENUMBER.value);
            let computed = self.computed(name, configurations, between);
            let is_own = matches!(name, Name::Direct { .. });
            let computed = if is_own { computed } else { computed.or(added) };
            let value = Value::new(self.case, name, configurations, computed);
            let changes = is_own && value.kind == Kind::Computed;
            values.push(value);
            changed.push(added.filter(|_| changes));
        }
        stationary(hamiltonian.basis(), hamiltonian.parameters(), &mut values);
        let (mut used, mut shown) = (Vec::new(), Vec::new());
        for (value, added) in values.into_iter().zip(changed) {
            used.push(value.value + added.unwrap_or(0.0));
            shown.push(value);
            if let (Name::Direct { k, a, .. }, true) = (value.name, added.is_some()) {
                let name = Name::Change { k, a };
                shown.push(Value::new(self.case, name, value.configurations, added));
            }
        }
        Found {
            used,
            shown,
            cross: largest,
        }
    }

    /// What correlation adds, by configuration and subshell.
    fn correlations(&self) -> Vec<((usize, Orbital), Correlation)> {
        let mut found = Vec::new();
        for &place in self.configurations {
            let Some(run) = self.run(place) else {
                continue;
            };
            for &orbital in self.orbitals {
                let sound = self.case.correlates(place, orbital) == Some(Ok(()));
                let function = run.orbital(orbital).filter(|_| sound);
                let correlation = function.and_then(|function| Correlation::of(run, function));
                found.extend(correlation.map(|correlation| ((place, orbital), correlation)));
            }
        }
        found
    }

    fn configurations_of(&self, (first, second): (usize, usize)) -> Option<(usize, usize)> {
        let first = self.configurations.get(first)?;
        let second = self.configurations.get(second)?;
        Some((*first, *second))
    }

    fn run(&self, configuration: usize) -> Option<&Rc<Solution>> {
        self.runs.get(configuration)?.as_ref()
    }

    fn between(&self, (first, second): (usize, usize)) -> Option<Between<'_>> {
        Between::new(self.run(first)?, self.run(second)?)
    }

    /// What overlaps most between two configurations.
    fn cross(&self, between: &Between, configurations: (usize, usize)) -> Option<CrossOverlap> {
        let cross = between.largest_cross(self.orbitals)?;
        let energy = |place: usize| self.run(place).map(|run| average(run));
        let (one, two) = (energy(configurations.0)?, energy(configurations.1)?);
        let gap = (two - one).abs() * HARTREE_WAVENUMBER.value;
        let (lower, upper) = if one <= two {
            configurations
        } else {
            (configurations.1, configurations.0)
        };
        let jumps = self.jump(lower, upper).map_or(0.0, |(orbital, to)| {
            let is_it = [(cross.a, cross.c), (cross.c, cross.a)].contains(&(orbital, to));
            let electrons = f64::from(self.case.electrons(lower, orbital));
            if is_it { electrons } else { 0.0 }
        });
        Some(CrossOverlap {
            configurations,
            cross,
            too_low: jumps * cross.overlap * cross.overlap * gap,
        })
    }

    /// The orbitals by which two configurations differ, if it is by one electron.
    fn jump(&self, from: usize, to: usize) -> Option<(Orbital, Orbital)> {
        let (mut left, mut entered) = (None, None);
        for &orbital in self.orbitals {
            let (before, after) = (
                self.case.electrons(from, orbital),
                self.case.electrons(to, orbital),
            );
            match i64::from(after) - i64::from(before) {
                0 => {}
                1 if entered.is_none() => entered = Some(orbital),
                -1 if left.is_none() => left = Some(orbital),
                _ => return None,
            }
        }
        left.zip(entered)
    }

    /// In cm⁻¹; nothing without radial functions, and for α, β and γ.
    fn computed(
        &self,
        name: Name,
        (first, _): (usize, usize),
        between: Option<&Between>,
    ) -> Option<f64> {
        let run = self.run(first)?;
        let orbital = |orbital: Orbital| run.orbital(orbital);
        let hartree = match name {
            // Total energies are large; their difference is taken before anything else.
            Name::Average(place) => average(self.run(place)?) - average(self.run(0)?),
            Name::Direct { k, a, b } => run.f(k.into(), orbital(a)?, orbital(b)?)?,
            Name::Exchange { k, a, b } => {
                let (a, b) = (orbital(a)?, orbital(b)?);
                let polarised = (k == 1).then(|| run.polarised_exchange(a, b)).flatten();
                run.g(k.into(), a, b)? - polarised.unwrap_or(0.0)
            }
            Name::SpinOrbit(a) => run.zeta(orbital(a)?)?,
            Name::Mixing { k, a, b, c, d } => between?.r(k.into(), [a, b], [c, d])?,
            // Made of the R^k of its two configurations, once these are known.
            Name::OneElectron(..) => between.map(|_| 0.0)?,
            _ => return None,
        };
        Some(hartree * HARTREE_WAVENUMBER.value)
    }
}

/// What correlation adds to an integral, hartree.
fn correlation(
    correlations: &[((usize, Orbital), Correlation)],
    name: Name,
    configuration: usize,
) -> Option<f64> {
    let of = |orbital: Orbital| {
        let found = correlations
            .iter()
            .find(|(key, _)| *key == (configuration, orbital));
        found.map(|(_, correlation)| correlation)
    };
    match name {
        Name::Direct { k, a, b } if a == b => of(a).map(|found| found.change(k)),
        Name::Alpha(a) => of(a)?.parameter(Effective::Alpha),
        Name::Beta(a) => of(a)?.parameter(Effective::Beta),
        Name::Gamma(a) => of(a)?.parameter(Effective::Gamma),
        _ => None,
    }
}

/// E_av with what core polarisation adds to the exchange of electrons outside the core, hartree.
fn average(run: &Solution) -> f64 {
    let mut energy = run.total_energy;
    for (place, a) in run.orbitals.iter().enumerate() {
        for b in run.orbitals.iter().skip(place + 1) {
            let pairs = f64::from(a.electrons) * f64::from(b.electrons);
            energy += pairs * polarised_average(run, a, b).unwrap_or(0.0);
        }
    }
    energy
}

/// g₁ α⟨a|w|b⟩².
fn polarised_average(run: &Solution, a: &RadialOrbital, b: &RadialOrbital) -> Option<f64> {
    let ranks = exchange(a.orbital.l(), b.orbital.l());
    let rank = ranks.iter().find(|rank| rank.k == 1)?;
    Some(rank.coefficient * run.polarised_exchange(a, b)?)
}

/// The one that falsifies more.
pub(super) fn larger(
    known: Option<CrossOverlap>,
    found: Option<CrossOverlap>,
) -> Option<CrossOverlap> {
    let weight = |cross: &CrossOverlap| (cross.too_low, cross.cross.overlap.abs());
    match (known, found) {
        (Some(known), Some(found)) if weight(&known) >= weight(&found) => Some(known),
        (known, found) => found.or(known),
    }
}

/// Sets every computed ⟨a|h|c⟩ so that the mean coupling vanishes with the R^k in use.
fn stationary(basis: &Basis, parameters: &[Parameter], values: &mut [Value]) {
    for place in 0..values.len() {
        let (Some(parameter), Some(value)) = (parameters.get(place), values.get(place)) else {
            continue;
        };
        let Integral::OneElectron { a, c } = parameter.integral else {
            continue;
        };
        if value.kind != Kind::Computed {
            continue;
        }
        let of_pair = parameters.iter().zip(values.iter()).filter(|(other, _)| {
            (other.first, other.second) == (parameter.first, parameter.second)
        });
        let mean: f64 = of_pair
            .map(|(other, value)| value.value * mean_coefficient(basis, other, (a, c)))
            .sum();
        if let Some(value) = values.get_mut(place) {
            value.value = -mean;
            value.computed = Some(-mean);
        }
    }
}

/// What an R^k adds to ⟨a|h|c⟩ in the mean.
fn mean_coefficient(basis: &Basis, parameter: &Parameter, (x, y): (usize, usize)) -> f64 {
    let Integral::Mixing { k, a, b, c, d } = parameter.integral else {
        return 0.0;
    };
    let l = |place: usize| basis.subshells().get(place).copied().unwrap_or(0);
    let many = |configuration, place| f64::from(basis.electrons(configuration, place));
    let spectator = if a == x { b } else { a };
    let of_rank = |ranks: Vec<crate::radial::average::Rank>| {
        let found = ranks.iter().find(|rank| rank.k == usize::from(k));
        found.map_or(0.0, |rank| rank.coefficient)
    };
    let equivalent = |electrons: f64| match k {
        0 => electrons,
        _ => -electrons * of_rank(within(l(x))),
    };
    if spectator == x {
        return equivalent(many(parameter.first, x) - 1.0);
    }
    if spectator == y {
        return equivalent(many(parameter.second, y) - 1.0);
    }
    let electrons = many(parameter.first, spectator);
    let is_direct = (a, c) == (x, y) || (b, d) == (x, y);
    match (is_direct, k) {
        (true, 0) => electrons,
        (true, _) => 0.0,
        (false, _) => -electrons * of_rank(exchange(l(x), l(spectator))),
    }
}
