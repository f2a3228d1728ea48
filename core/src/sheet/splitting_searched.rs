//! Crossings of states and components, and where the linear pattern ends: what depends on the end of the maps and
//! not on the field, kept beside what is prepared.

use std::rc::Rc;

use crate::numerics::order::{sort, sort_by};
use crate::problem::Problem;
use crate::splitting::in_field::{
    ComponentCrossing, Crossing, CrossingKind, MHZ_PER_WAVENUMBER, SearchFields, State,
    Tolerance as Departure, Wanted, component_crossings, crossings, map_at, search_fields,
};

use super::document::Document;
use super::field::Tolerance;
use super::levels_rows::Shared;
use super::splitting_full::{ends, isotope_of};
use super::splitting_joins::Join;
use super::splitting_names::state_name;
use super::splitting_rows::{ComponentCrossingRow, CrossingRow};
use super::splitting_sets::{Pass, Prepared, Set};

/// The most rows of each kind for each nucleus.
const MOST_ROWS: usize = 120;

/// The strongest components among which crossings are looked for.
pub const MOST_COMPONENTS: usize = 24;

/// Multiplications that the search may take, and that it takes where it can.
const MOST_WORK: f64 = 6e9;
const USUAL_WORK: f64 = 1e9;

/// Fields of the search.
const MOST_FIELDS: f64 = 300.0;
const LEAST_FIELDS: f64 = 60.0;

/// What was found.
#[derive(Clone, Debug, Default)]
pub struct Searched {
    pub crossings: Vec<CrossingRow>,
    pub crossings_left_out: usize,
    pub component_crossings: Vec<ComponentCrossingRow>,
    pub component_crossings_left_out: usize,
    /// Tesla.
    pub departs_at: Option<f64>,
    /// Where it was looked for; nothing where it was not.
    pub fields: Option<SearchFields>,
    /// Why something was not looked for.
    pub missing: Option<String>,
}

/// What a search depends on beside what is prepared.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Range {
    up_to: f64,
    tolerance: Tolerance,
}

/// Fields that a search takes for a preparation of so many multiplications; none where it is too long.
pub fn fields_of_search(multiplications: f64) -> usize {
    let fields = (USUAL_WORK / multiplications.max(1.0)).clamp(LEAST_FIELDS, MOST_FIELDS);
    if fields * multiplications > MOST_WORK {
        0
    } else {
        fields as usize
    }
}

impl Prepared {
    /// Crossings up to the end of the maps, kept or found.
    pub fn searched(&self, document: &Document) -> Result<Rc<Searched>, Problem> {
        let field = document.field.as_ref();
        let range = Range {
            up_to: field.map_or(0.0, |field| field.end()),
            tolerance: field.map_or(Tolerance::Relative(0.01), |field| field.tolerance),
        };
        if let Some((known, found)) = &*self.kept_search.borrow()
            && *known == range
        {
            return Ok(Rc::clone(found));
        }
        let found = Rc::new(self.search(document, range)?);
        self.kept_search.replace(Some((range, Rc::clone(&found))));
        Ok(found)
    }

    fn search(&self, document: &Document, range: Range) -> Result<Searched, Problem> {
        let mut found = Searched::default();
        if range.up_to <= 0.0 {
            return Ok(found);
        }
        let fields = fields_of_search(self.multiplications);
        if fields == 0 {
            found.missing = Some(
                "Crossings are not looked for: the matrices are too large for hundreds of fields. A line between two levels of fewer configurations has them.".to_owned(),
            );
            return Ok(found);
        }
        let splits = self.passes.iter().flat_map(|pass| &pass.splits);
        let fields = search_fields(splits, range.up_to, fields);
        let most = MOST_ROWS * self.passes.len();
        for pass in &self.passes {
            let isotope = isotope_of(document, pass);
            let searched = SearchOf {
                document,
                ready: self,
                pass,
                isotope,
                tesla: &fields.tesla,
                range,
                most,
            };
            searched.states(&mut found)?;
            searched.components(&mut found)?;
        }
        // At one field, as without any, those of one photon before those of two.
        sort_by(&mut found.crossings, |a, b| a.photons.cmp(&b.photons));
        found.crossings_left_out += first(&mut found.crossings, most, |row| row.tesla);
        found.component_crossings_left_out +=
            first(&mut found.component_crossings, most, |row| row.tesla);
        found.fields = Some(fields);
        Ok(found)
    }
}

/// Keeps the first rows by field of all nuclei and sets together; how many it takes away.
fn first<T>(rows: &mut Vec<T>, most: usize, tesla: impl Fn(&T) -> f64) -> usize {
    sort_by(rows, |a, b| tesla(a).total_cmp(&tesla(b)));
    let left_out = rows.len().saturating_sub(most);
    rows.truncate(most);
    left_out
}

struct SearchOf<'a> {
    document: &'a Document,
    ready: &'a Prepared,
    pass: &'a Pass,
    isotope: Option<Shared>,
    tesla: &'a [f64],
    range: Range,
    /// The most rows.
    most: usize,
}

/// Places of the components that are strongest in some field of the map, in their own order.
fn brightest(strengths: &[Vec<f64>]) -> Vec<usize> {
    let most = |place: &usize| {
        let all = strengths.get(*place).into_iter().flatten();
        all.fold(0.0_f64, |most, strength| most.max(*strength))
    };
    let mut places: Vec<usize> = (0..strengths.len()).filter(|p| most(p) > 0.0).collect();
    sort_by(&mut places, |a, b| {
        most(b).total_cmp(&most(a)).then(a.cmp(b))
    });
    places.truncate(MOST_COMPONENTS);
    sort(&mut places);
    places
}

/// A search that is too large is left out and said; other faults are faults.
fn or_missing<T>(
    result: Result<T, Problem>,
    missing: &mut Option<String>,
) -> Result<Option<T>, Problem> {
    match result {
        Ok(found) => Ok(Some(found)),
        Err(problem) if ["search-too-large", "map-too-large"].contains(&problem.code) => {
            missing.get_or_insert_with(|| {
                "Crossings of so many states or components are not looked for: a line between two levels has few of them.".to_owned()
            });
            Ok(None)
        }
        Err(problem) => Err(problem.at("/field/flux_density")),
    }
}

impl SearchOf<'_> {
    fn name(&self, set: &Set, split_states: &[State], place: usize) -> Option<Shared> {
        let state = split_states.get(place)?;
        let level = set.levels.get(state.level)?;
        Some(Shared(
            state_name(level, state, self.isotope.as_ref()).into(),
        ))
    }

    fn states(&self, found: &mut Searched) -> Result<(), Problem> {
        let with_line = self.document.line.is_some();
        let wanted = Wanted {
            crossings: true,
            avoided: true,
            // Two photons change M by 2.
            clock: Some(2),
        };
        for (set, split) in self.ready.sets.iter().zip(&self.pass.splits) {
            let chosen = self.ready.order(set, split, with_line);
            let whole = map_at(split, None, None, self.tesla);
            let Some(whole) = or_missing(whole, &mut found.missing)? else {
                continue;
            };
            let rows = crossings(
                split,
                (&whole.tesla, &whole.upper),
                &chosen,
                wanted,
                self.most,
            );
            let Some(rows) = or_missing(rows, &mut found.missing)? else {
                continue;
            };
            found.crossings_left_out += rows.left_out;
            let two_m = |place: usize| Some(split.states().get(place)?.two_m);
            let row = |row: &Crossing| {
                let change = (two_m(row.first)? - two_m(row.second)?).abs();
                Some(CrossingRow {
                    photons: (row.kind == CrossingKind::Clock).then_some(if change > 2 {
                        2
                    } else {
                        1
                    }),
                    kind: match row.kind {
                        CrossingKind::Crossing => "crossing",
                        CrossingKind::Avoided => "avoided",
                        CrossingKind::Clock => "clock",
                    },
                    first: self.name(set, split.states(), row.first)?,
                    second: self.name(set, split.states(), row.second)?,
                    tesla: row.tesla,
                    energy: Some(row.energy),
                    gap: row.gap,
                    slope_first: row.slopes.0,
                    slope_second: row.slopes.1,
                    mhz: row.gap * MHZ_PER_WAVENUMBER,
                    isotope: self.isotope.clone(),
                })
            };
            found.crossings.extend(rows.found.iter().filter_map(row));
        }
        Ok(())
    }

    fn components(&self, found: &mut Searched) -> Result<(), Problem> {
        let joined = self.ready.joins.iter().zip(&self.pass.components);
        for ((join, components), linear) in joined.zip(&self.pass.linear) {
            let (Some(above), Some(below)) = (
                self.pass.splits.get(join.upper),
                self.pass.splits.get(join.lower),
            ) else {
                continue;
            };
            let departure = match self.range.tolerance {
                Tolerance::Relative(share) => Departure::Relative(share),
                Tolerance::Absolute(value) => Departure::Absolute(value),
            };
            let departs = linear
                .departs_at((above, below), components, departure, self.range.up_to)
                .map_err(|p| p.at("/field/up_to"))?;
            found.departs_at = match (found.departs_at, departs) {
                (Some(one), Some(other)) => Some(f64::min(one, other)),
                (one, other) => one.or(other),
            };
            if self.document.line.is_none() {
                continue;
            }
            let lower = (join.upper != join.lower).then_some(below);
            let whole = map_at(above, lower, Some(components), self.tesla);
            let Some(whole) = or_missing(whole, &mut found.missing)? else {
                continue;
            };
            let chosen = brightest(&whole.strengths);
            let rows = component_crossings((above, lower), components, &whole, &chosen, self.most);
            let Some(rows) = or_missing(rows, &mut found.missing)? else {
                continue;
            };
            found.component_crossings_left_out += rows.left_out;
            let row = |row: &ComponentCrossing| {
                Some(ComponentCrossingRow {
                    kind: if row.farthest { "farthest" } else { "crossing" },
                    first: self.component(join, components.list().get(row.first)?)?,
                    second: self.component(join, components.list().get(row.second)?)?,
                    tesla: row.tesla,
                    apart: row.apart,
                    isotope: self.isotope.clone(),
                })
            };
            found
                .component_crossings
                .extend(rows.found.iter().filter_map(row));
        }
        Ok(())
    }

    /// "upper state to lower state".
    fn component(
        &self,
        join: &Join,
        component: &crate::splitting::in_field::Component,
    ) -> Option<String> {
        let ends = ends(self.document, self.ready, self.pass, join, component)?;
        let name = |end: &(&super::splitting_sets::SetLevel, &State, usize)| {
            state_name(end.0, end.1, self.isotope.as_ref())
        };
        Some(format!("{} to {}", name(&ends.upper), name(&ends.lower)))
    }
}
