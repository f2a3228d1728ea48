//! The levels that a field or a nucleus splits, by parity, with what joins them: prepared once for all
//! fields and kept by what it depends on.

use std::cell::RefCell;
use std::rc::Rc;

use crate::numerics::order::sort_by;
use crate::problem::Problem;
use crate::quantity::TwiceJ;
use crate::splitting::hyperfine::{self, Unit};
use crate::splitting::in_field::{
    Components, Linear, MHZ_PER_WAVENUMBER, Manifold, Nucleus, Size, Split,
};

use super::document::{Document, LevelOf};
use super::energy_case::{EnergyCase, energy_case};
use super::level_alone::LevelAlone;
use super::levels_rows::Shared;
use super::line_ends::End;
use super::nucleus::{Constant, Nuclear};
use super::placed::Placed;
use super::rich::Rich;
use super::solved::{Solved, solved};
use super::splitting_joins::{Join, joins};
use super::splitting_line::centre_of;
use super::splitting_manifolds::{manifold, no_estimate, parities, set_level, small_enough, units};
use super::splitting_searched::{Range, Searched};
use super::watch::Watch;

/// The most components of an answer.
pub const MAX_COMPONENTS: usize = 20_000;

/// The most states of an answer.
pub const MAX_STATES: usize = 20_000;

/// A level of a set.
#[derive(Clone, Debug)]
pub struct SetLevel {
    /// Its place among the levels that were computed; nothing for a level alone.
    pub place: Option<usize>,
    pub of: Option<LevelOf>,
    pub label: Shared,
    pub rich: Rich,
    pub configuration: Option<Shared>,
    pub j: TwiceJ,
    /// cm⁻¹; nothing for a level alone.
    pub energy: Option<f64>,
    /// Whether it belongs to the ends of the line.
    pub is_upper: bool,
    pub is_lower: bool,
    /// Where A and B are to be estimated.
    pub unit: Option<Unit>,
}

impl SetLevel {
    /// Which end of the line it belongs to.
    pub fn side(&self) -> Option<&'static str> {
        match (self.is_upper, self.is_lower) {
            (true, _) => Some("upper"),
            (_, true) => Some("lower"),
            _ => None,
        }
    }

    /// A and B in MHz: estimated where they are not entered; nothing where neither is known.
    pub fn constants(&self, nuclear: &Nuclear) -> [Option<Found>; 2] {
        let least = nuclear.two_i().min(self.j.doubled());
        let find = |rank: i32, constants: &[Constant], moment: Option<f64>, unit: Option<f64>| {
            if let Some(known) = Nuclear::constant(constants, self.of.as_ref()?) {
                return Some(Found {
                    value: known.value,
                    scaled: known.scaled,
                    estimated: false,
                });
            }
            (least >= rank).then_some(Found {
                value: moment? * unit?,
                scaled: false,
                estimated: true,
            })
        };
        let (a, b) = self.unit.map(|unit| (unit.a, unit.b)).unzip();
        let q = nuclear.isotope.and_then(|i| i.quadrupole);
        [
            find(1, &nuclear.dipole, nuclear.g, a),
            find(2, &nuclear.quadrupole, q, b),
        ]
    }
}

/// A constant of a level, MHz.
#[derive(Clone, Copy, Debug)]
pub struct Found {
    pub value: f64,
    /// Whether it is another isotope's, scaled.
    pub scaled: bool,
    pub estimated: bool,
}

/// Levels of one parity, or a level alone.
#[derive(Clone, Debug)]
pub struct Set {
    pub manifold: Manifold,
    pub levels: Vec<SetLevel>,
    /// Whether some levels of the parity were left out, for there would have been too many states.
    pub reduced: bool,
    /// The largest mean shift by the diamagnetic term at 1 T, cm⁻¹; nothing where radii are not known.
    pub diamagnetic_at_one: Option<f64>,
}

impl Set {
    fn flags(&self, of: impl Fn(&SetLevel) -> bool) -> Vec<bool> {
        self.levels.iter().map(of).collect()
    }
}

/// The sets with one nucleus.
#[derive(Debug)]
pub struct Pass {
    /// Its place in [`Document::nuclei`]; nothing without a nucleus.
    pub nuclear: Option<usize>,
    /// By set.
    pub nuclei: Vec<Option<Nucleus>>,
    /// By set.
    pub splits: Vec<Split>,
    /// By join.
    pub components: Vec<Components>,
    /// By join.
    pub linear: Vec<Linear>,
}

/// Everything that does not depend on the field.
#[derive(Debug)]
pub struct Prepared {
    key: Key,
    /// Whether the sheet has the ends of the line the other way round.
    pub turned: bool,
    pub solved: Option<Rc<Solved>>,
    pub sets: Vec<Set>,
    pub joins: Vec<Join>,
    /// Why there are no components, where there could be some.
    pub no_components: Option<String>,
    pub passes: Vec<Pass>,
    /// Why the diamagnetic term is not known.
    pub diamagnetic: Result<(), Problem>,
    /// Multiplications for one field.
    pub multiplications: f64,
    /// Crossings, with the range that they belong to.
    pub kept_search: RefCell<Option<(Range, Rc<Searched>)>>,
}

/// What the preparation depends on, and nothing else.
#[derive(Clone, Debug, PartialEq)]
struct Key {
    case: Option<EnergyCase>,
    labels: Vec<String>,
    measured: Vec<(LevelOf, f64)>,
    line: Option<(End, End)>,
    nuclei: Vec<Nuclear>,
    alone: Option<LevelAlone>,
    diamagnetic: bool,
    estimate: bool,
}

thread_local! {
    static KEPT: RefCell<Vec<Rc<Prepared>>> = const { RefCell::new(Vec::new()) };
}

/// The most preparations that are kept.
const MOST: usize = 3;

fn key(document: &Document) -> Result<Key, Problem> {
    let alone = document.level_alone.clone();
    Ok(Key {
        case: match alone {
            Some(_) => None,
            None => Some(energy_case(document)?),
        },
        labels: document.entries.iter().map(|e| e.label.clone()).collect(),
        measured: document.measured.clone(),
        line: document.line.clone(),
        nuclei: document.nuclei.clone(),
        alone,
        diamagnetic: diamagnetic_wanted(document),
        estimate: document.estimate,
    })
}

fn diamagnetic_wanted(document: &Document) -> bool {
    document
        .field
        .as_ref()
        .is_some_and(|field| field.diamagnetic)
}

/// The preparation of a sheet, if it is kept.
pub fn kept(document: &Document) -> Option<Rc<Prepared>> {
    let key = key(document).ok()?;
    KEPT.with_borrow_mut(|kept| {
        let place = kept.iter().position(|known| known.key == key)?;
        let known = kept.remove(place);
        kept.push(Rc::clone(&known));
        Some(known)
    })
}

/// The preparation of a sheet, kept or made.
///
/// # Errors
/// Those of the levels; of the diagonalisation: `splitting-too-large`, `too-many-states`.
pub fn prepared(document: &Document, watch: &mut Watch) -> Result<Rc<Prepared>, Problem> {
    if let Some(known) = kept(document) {
        return Ok(known);
    }
    let key = key(document)?;
    let prepared = match &document.level_alone {
        Some(level) => alone(document, level, key)?,
        None => {
            let found = of_levels(document, (key, false), watch)?;
            match centre_of(document, &found) {
                Some(centre) if centre < 0.0 => of_levels(document, (found.key, true), watch)?,
                _ => found,
            }
        }
    };
    let prepared = Rc::new(prepared);
    KEPT.with_borrow_mut(|kept| {
        if kept.len() >= MOST {
            kept.remove(0);
        }
        kept.push(Rc::clone(&prepared));
    });
    Ok(prepared)
}

fn alone(document: &Document, level: &LevelAlone, key: Key) -> Result<Prepared, Problem> {
    if document.estimate {
        return Err(no_estimate(hyperfine::without_functions()));
    }
    let j = level.j.unwrap_or_default();
    let manifold =
        Manifold::alone(j.doubled(), 0.0, level.g.unwrap_or(0.0)).map_err(|p| p.at("/level/J"))?;
    let text = format!("J = {j}");
    let set = Set {
        manifold,
        levels: vec![SetLevel {
            place: None,
            of: None,
            label: Shared(text.as_str().into()),
            rich: Rich::words(text),
            configuration: None,
            j,
            energy: None,
            is_upper: false,
            is_lower: false,
            unit: None,
        }],
        reduced: false,
        diamagnetic_at_one: None,
    };
    let nucleus = (level.two_i() > 0).then(|| Nucleus {
        two_i: level.two_i(),
        g_i: level.g_i.or_else(|| document.isotope()?.g).unwrap_or(0.0),
        magnetic_dipole: vec![level.a / MHZ_PER_WAVENUMBER],
        electric_quadrupole: vec![level.b / MHZ_PER_WAVENUMBER],
    });
    let split = Split::new(&set.manifold, nucleus.as_ref()).map_err(|p| p.at("/level/J"))?;
    let multiplications = Split::size(&set.manifold, nucleus.as_ref()).multiplications;
    Ok(Prepared {
        key,
        turned: false,
        solved: None,
        sets: vec![set],
        joins: Vec::new(),
        no_components: None,
        passes: vec![Pass {
            nuclear: None,
            nuclei: vec![nucleus],
            splits: vec![split],
            components: Vec::new(),
            linear: Vec::new(),
        }],
        kept_search: RefCell::new(None),
        diamagnetic: Err(Problem::new(
            "radius-not-known",
            "A level alone has no radial functions.",
            0,
            0,
        )),
        multiplications,
    })
}

fn of_levels(
    document: &Document,
    (key, turned): (Key, bool),
    watch: &mut Watch,
) -> Result<Prepared, Problem> {
    let solved = solved(document, watch)?;
    let placed = Placed::new(document, &solved);
    let mut diamagnetic = Ok(());
    let mut sets = Vec::new();
    // By set the parity in the spectrum, and the places of its levels there.
    let mut origins: Vec<(usize, Vec<usize>)> = Vec::new();
    for (parity, all) in parities(&solved).into_iter().enumerate() {
        let mut levels: Vec<SetLevel> = all
            .iter()
            .filter_map(|place| set_level(document, turned, &solved, &placed, *place))
            .collect();
        let wanted = |level: &SetLevel| level.is_upper || level.is_lower;
        if document.line.is_some() && !levels.iter().any(wanted) {
            continue;
        }
        if document.estimate {
            units(&solved, parity, &mut levels)?;
        }
        let (manifold, diamagnetic_at_one, term) =
            manifold(&solved, parity, &levels, key.diamagnetic)?;
        let set = Set {
            manifold,
            levels,
            reduced: false,
            diamagnetic_at_one,
        };
        diamagnetic = diamagnetic.and(term);
        let (set, chosen) = small_enough(document, set);
        origins.push((parity, chosen));
        sets.push(set);
    }
    let joins = joins(document, &solved, &sets, &origins)?;
    let mut no_components = None;
    let listed: Vec<Option<usize>> = match document.nuclei.len() {
        0 => vec![None],
        many => (0..many).map(Some).collect(),
    };
    let mut passes = Vec::with_capacity(listed.len());
    let (mut multiplications, mut states) = (0.0, 0);
    for nuclear in listed {
        let pass = pass(document, &sets, &joins, nuclear)?;
        for (set, nucleus) in sets.iter().zip(&pass.0.nuclei) {
            let size = Split::size(&set.manifold, nucleus.as_ref());
            multiplications += size.multiplications;
            states += listed_states(document, set, size);
        }
        no_components = no_components.or(pass.1);
        passes.push(pass.0);
    }
    if states > MAX_STATES {
        return Err(Problem::new(
            "too-many-states",
            format!("{states} states would be listed."),
            0,
            0,
        )
        .bound(format!(
            "At most {MAX_STATES} are listed: choose a line, or fewer configurations."
        ))
        .at("/configurations"));
    }
    if no_components.is_some() {
        for pass in &mut passes {
            pass.components.clear();
            pass.linear.clear();
        }
    }
    Ok(Prepared {
        key,
        turned,
        solved: Some(solved),
        sets,
        joins,
        no_components,
        passes,
        diamagnetic,
        multiplications,
        kept_search: RefCell::new(None),
    })
}

/// How many states of a set the answer lists.
fn listed_states(document: &Document, set: &Set, size: Size) -> usize {
    let all = usize::try_from(size.states).unwrap_or(usize::MAX);
    if document.line.is_none() {
        return all;
    }
    let weight = |level: &SetLevel| f64::from(level.j.doubled()) + 1.0;
    let of = |wanted: bool| -> f64 {
        let levels = set.levels.iter();
        levels
            .filter(|level| !wanted || level.is_upper || level.is_lower)
            .map(weight)
            .sum()
    };
    let whole = of(false);
    if whole > 0.0 {
        (all as f64 * of(true) / whole).round() as usize
    } else {
        0
    }
}

/// All sets with one nucleus, and why components are not listed.
fn pass(
    document: &Document,
    sets: &[Set],
    joins: &[Join],
    nuclear: Option<usize>,
) -> Result<(Pass, Option<String>), Problem> {
    let known = nuclear.and_then(|place| document.nuclei.get(place));
    let at = |problem: Problem| match nuclear {
        Some(_) if problem.code != "splitting-too-large" => problem.at("/nucleus"),
        _ => problem.at("/configurations"),
    };
    let mut found = Pass {
        nuclear,
        nuclei: Vec::with_capacity(sets.len()),
        splits: Vec::with_capacity(sets.len()),
        components: Vec::with_capacity(joins.len()),
        linear: Vec::with_capacity(joins.len()),
    };
    for set in sets {
        let nucleus = known.map(|nuclear| nucleus(nuclear, set));
        found
            .splits
            .push(Split::new(&set.manifold, nucleus.as_ref()).map_err(at)?);
        found.nuclei.push(nucleus);
    }
    for join in joins {
        let (Some(above), Some(below)) =
            (found.splits.get(join.upper), found.splits.get(join.lower))
        else {
            continue;
        };
        let (Some(upper), Some(lower)) = (sets.get(join.upper), sets.get(join.lower)) else {
            continue;
        };
        let all = document.line.is_none();
        let flags = (
            upper.flags(|level| all || level.is_upper),
            lower.flags(|level| all || level.is_lower),
        );
        let most = MAX_COMPONENTS / document.nuclei.len().max(1);
        match Components::new(above, below, &join.operator, (&flags.0, &flags.1), most) {
            Ok(components) => {
                let linear = Linear::new(above, below, &components).map_err(at)?;
                found.components.push(components);
                found.linear.push(linear);
            }
            Err(problem) if problem.code == "too-many-components" => {
                let reason = format!(
                    "There would be more than {MAX_COMPONENTS} components, and none is listed: choose a line between levels or terms."
                );
                return Ok((found, Some(reason)));
            }
            Err(problem) => return Err(at(problem)),
        }
    }
    Ok((found, None))
}

/// A nucleus with the constants of a set's levels.
fn nucleus(nuclear: &Nuclear, set: &Set) -> Nucleus {
    let mut found = [Vec::new(), Vec::new()];
    for level in &set.levels {
        for (list, constant) in found.iter_mut().zip(level.constants(nuclear)) {
            list.push(constant.map_or(0.0, |c| c.value / MHZ_PER_WAVENUMBER));
        }
    }
    let [magnetic_dipole, electric_quadrupole] = found;
    Nucleus {
        two_i: nuclear.two_i(),
        g_i: nuclear.g.unwrap_or(0.0),
        magnetic_dipole,
        electric_quadrupole,
    }
}

impl Prepared {
    /// Places of a set's states in the order of the answer: by rising level, then as the room gives them;
    /// with a line only those of its ends.
    pub fn order(&self, set: &Set, split: &Split, with_line: bool) -> Vec<usize> {
        let level = |state: &usize| split.states().get(*state).map_or(0, |s| s.level);
        let mut order: Vec<usize> = (0..split.states().len())
            .filter(|state| {
                let own = set.levels.get(level(state));
                !with_line || own.is_some_and(|l| l.is_upper || l.is_lower)
            })
            .collect();
        let energy = |state: &usize| {
            let own = set.levels.get(level(state));
            own.and_then(|l| l.energy).unwrap_or(0.0)
        };
        sort_by(&mut order, |a, b| {
            let by_energy = energy(a).total_cmp(&energy(b));
            by_energy.then(level(a).cmp(&level(b))).then(a.cmp(b))
        });
        order
    }
}
