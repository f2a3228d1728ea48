//! What levels are made of, in LS, jj and jK coupling.

use crate::configuration::{Orbital, Subshell};
use crate::numerics::order::sort_by_key;
use crate::quantity::TwiceJ;
use crate::structure::model::{Parity, Spectrum};
use crate::structure::{JjCoupled, JkCoupled, Level as SolvedOf, Scheme};
use crate::terms::{Level, Term};

use super::rich::{Piece, Rich, TermName};
use super::solved::Solved;

/// Smaller shares than this, in percent, are left out unless they are the largest.
const LEAST: f64 = 0.1;

/// The most components that are listed in each scheme.
const MOST: usize = 6;

/// Above this many levels only LS coupling is worked out.
const MOST_LEVELS: usize = 1500;

/// A component: which state of its scheme, and its share in percent.
pub type Share = (usize, f64);

/// The components of one level, largest first.
#[derive(Clone, Debug, Default)]
pub struct Composition {
    /// Places in the parity's basis.
    pub ls: Vec<Share>,
    /// Names and shares in jj coupling.
    pub jj: Option<Vec<(Rich, f64)>>,
    /// Names and shares in jK coupling.
    pub jk: Option<Vec<(Rich, f64)>>,
    /// Share of each multiplicity, by rising 2S.
    pub spins: Vec<SpinShare>,
}

/// What a level holds of one multiplicity.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct SpinShare {
    /// 2S.
    pub two_s: u32,
    /// Percent.
    pub percent: f64,
    /// Its largest term.
    pub term: Term,
}

/// Mean leading share of a coupling scheme.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Mean {
    /// "LS", "jj" or "jK".
    pub scheme: &'static str,
    /// Percent.
    pub mean: f64,
}

/// Of all levels in their order.
#[derive(Clone, Debug, Default)]
pub struct Compositions {
    /// One for each level.
    pub levels: Vec<Composition>,
    /// Each scheme that was worked out for all levels.
    pub means: Vec<Mean>,
}

/// What every level is made of.
pub fn compositions(solved: &Solved) -> Compositions {
    let Some(spectrum) = &solved.spectrum else {
        // One electron: every level is one state of each scheme.
        let one = |level: &super::solved::SolvedLevel| Composition {
            ls: vec![(0, 100.0)],
            spins: vec![SpinShare {
                two_s: level.level.term.two_s,
                percent: 100.0,
                term: level.level.term,
            }],
            ..Composition::default()
        };
        return Compositions {
            levels: solved.levels.iter().map(one).collect(),
            means: vec![Mean {
                scheme: "LS",
                mean: 100.0,
            }],
        };
    };
    let small = spectrum.levels.len() <= MOST_LEVELS;
    let jj: Option<Vec<Vec<Scheme<JjCoupled>>>> = small
        .then(|| spectrum.parities.iter().map(|p| p.jj().ok()).collect())
        .flatten();
    // Full shells alone are the same in any scheme.
    let mut subshells = spectrum.case.configurations.iter().flatten();
    let has_open = subshells.any(|s| s.is_open());
    let jk: Option<Vec<Vec<Scheme<JkCoupled>>>> = (small && has_open)
        .then(|| spectrum.parities.iter().map(Parity::jk).collect())
        .flatten();
    let mut found = Compositions::default();
    let mut sums = [0.0; 3];
    for place in &spectrum.levels {
        let Some((parity, level)) = spectrum.level(*place) else {
            continue;
        };
        let rows = parity.rows_place(level);
        let of_scheme = || Namer {
            spectrum,
            parity,
            level,
        };
        let in_jj = jj.as_ref().and_then(|jj| jj.get(place.parity)?.get(rows?));
        let in_jk = jk.as_ref().and_then(|jk| jk.get(place.parity)?.get(rows?));
        let shares = parity.levels.composition(level);
        let composition = Composition {
            spins: spins(parity, &shares),
            ls: leading(shares),
            jj: in_jj.map(|scheme| of_scheme().jj(scheme)),
            jk: in_jk.map(|scheme| of_scheme().jk(scheme)),
        };
        let first = |all: Option<f64>| all.unwrap_or(0.0);
        let [ls_sum, jj_sum, jk_sum] = &mut sums;
        *ls_sum += first(composition.ls.first().map(|s| s.1));
        *jj_sum += first(composition.jj.iter().flatten().next().map(|s| s.1));
        *jk_sum += first(composition.jk.iter().flatten().next().map(|s| s.1));
        found.levels.push(composition);
    }
    let count = found.levels.len().max(1) as f64;
    let there = [true, jj.is_some(), jk.is_some()];
    for ((scheme, sum), there) in ["LS", "jj", "jK"].into_iter().zip(sums).zip(there) {
        if there {
            found.means.push(Mean {
                scheme,
                mean: sum / count,
            });
        }
    }
    found
}

fn leading(mut shares: Vec<Share>) -> Vec<Share> {
    let shown = shares
        .iter()
        .take(MOST)
        .enumerate()
        .take_while(|(place, share)| *place == 0 || share.1 >= LEAST)
        .count();
    shares.truncate(shown);
    shares
}

fn spins(parity: &Parity, shares: &[Share]) -> Vec<SpinShare> {
    let mut spins: Vec<SpinShare> = Vec::new();
    // Largest first, so that the first term of a multiplicity is its largest.
    for (place, percent) in shares {
        let Some(total) = parity.basis().states().get(*place).map(|s| s.total()) else {
            continue;
        };
        let term = Term {
            two_s: u32::try_from(total.two_s).unwrap_or(0),
            l: u32::try_from(total.l).unwrap_or(0),
        };
        match spins.iter_mut().find(|known| known.two_s == term.two_s) {
            Some(known) => known.percent += percent,
            None => spins.push(SpinShare {
                two_s: term.two_s,
                percent: *percent,
                term,
            }),
        }
    }
    sort_by_key(&mut spins, |share| share.two_s);
    spins
}

/// Names the states of a level's schemes.
struct Namer<'a> {
    spectrum: &'a Spectrum,
    parity: &'a Parity,
    level: &'a SolvedOf,
}

impl Namer<'_> {
    fn open(&self, configuration: usize) -> impl Iterator<Item = (usize, Orbital, u32)> {
        let basis = self.parity.basis();
        self.spectrum
            .orbitals
            .iter()
            .enumerate()
            .map(move |(place, orbital)| (place, *orbital, basis.electrons(configuration, place)))
            .filter(|(_, orbital, electrons)| (1..orbital.capacity()).contains(electrons))
    }

    /// `3d3/2⁴ 3d5/2²`, with the J of each group behind it where it holds several electrons.
    fn jj(&self, scheme: &Scheme<JjCoupled>) -> Vec<(Rich, f64)> {
        let name = |state: &JjCoupled| {
            let mut subshells = Vec::new();
            let mut groups = Vec::new();
            for (place, orbital, _) in self.open(state.configuration) {
                let Some(own) = state.subshells.get(place) else {
                    continue;
                };
                let two_l = 2 * i32::from(orbital.l());
                for (electrons, two_j, own_j) in [
                    (own.lower, two_l - 1, own.two_j_lower),
                    (own.upper, two_l + 1, own.two_j_upper),
                ] {
                    if electrons > 0 {
                        let j = TwiceJ::from_doubled(two_j);
                        subshells.push((orbital.to_string(), j, electrons));
                        groups.push(TwiceJ::from_doubled(own_j).to_string());
                    }
                }
            }
            if groups.is_empty() {
                return Rich::words("full shells");
            }
            let several = groups.len() > 1;
            let rich = Rich::new().with(Piece::Jj { subshells, j: None });
            if several {
                rich.say(format!(" ({})", groups.join(", ")))
            } else {
                rich
            }
        };
        self.named(scheme, name)
    }

    /// `(³D₂) 4p ²[5/2]`.
    fn jk(&self, scheme: &Scheme<JkCoupled>) -> Vec<(Rich, f64)> {
        let name = |state: &JkCoupled| {
            let core = state.running.last().copied().unwrap_or_default();
            let parent = Level {
                term: Term {
                    two_s: u32::try_from(core.two_s).unwrap_or(0),
                    l: u32::try_from(core.l).unwrap_or(0),
                },
                index: None,
                j: TwiceJ::from_doubled(state.two_j_core),
            };
            let Some(two_k) = state.two_k else {
                return Rich::new().with(Piece::Term(TermName::of_level(&parent, false)));
            };
            let outer = self.open(state.configuration).last();
            let parent_odd =
                self.parity.odd != outer.is_some_and(|(_, orbital, _)| orbital.l() % 2 == 1);
            let shell = outer.and_then(|(_, orbital, _)| Subshell::new(orbital, 1));
            Rich::words("(")
                .with(Piece::Term(TermName::of_level(&parent, parent_odd)))
                .say(") ")
                .with(Piece::Configuration {
                    core: None,
                    subshells: shell.into_iter().map(Into::into).collect(),
                })
                .say(" ")
                .with(Piece::Pair {
                    parent: Rich::new(),
                    multiplicity: 2,
                    k: TwiceJ::from_doubled(two_k),
                    odd: self.parity.odd,
                    j: None,
                })
        };
        self.named(scheme, name)
    }

    fn named<T>(&self, scheme: &Scheme<T>, name: impl Fn(&T) -> Rich) -> Vec<(Rich, f64)> {
        leading(scheme.composition(self.level))
            .into_iter()
            .filter_map(|(place, share)| Some((name(scheme.states.get(place)?), share)))
            .collect()
    }
}
