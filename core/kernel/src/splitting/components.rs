//! Components of lines: their strengths from the eigenvectors of both ends.

use super::operator::Operator;
use super::projections::Factors;
use super::rows::Between;
use super::split::{AtField, Split, State};
use crate::numerics::lanes::{add, dot};
use crate::numerics::order::{sort_by, sort_by_key};
use crate::problem::Problem;

/// A component from one state to another.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Component {
    /// The upper state's place in its [`Split::states`].
    pub upper: usize,
    /// The lower state's place.
    pub lower: usize,
    /// M_upper − M_lower.
    pub q: i32,
}

impl Component {
    /// How far it is from its line's centre, the distance of both levels without field and nucleus, cm⁻¹;
    /// both ends at one field.
    pub fn offset(&self, upper: &AtField, lower: &AtField) -> f64 {
        self.difference(&upper.shifts, &lower.shifts)
    }

    /// d(offset)/dB, cm⁻¹/T.
    pub fn slope(&self, upper: &AtField, lower: &AtField) -> f64 {
        self.difference(&upper.slopes, &lower.slopes)
    }

    fn difference(&self, upper: &[f64], lower: &[f64]) -> f64 {
        let at = |list: &[f64], state: usize| list.get(state).copied().unwrap_or(0.0);
        at(upper, self.upper) - at(lower, self.lower)
    }
}

/// Components between two manifolds, or inside one, ready for any field.
#[derive(Clone, Debug)]
pub struct Components {
    list: Vec<Component>,
    pairs: Vec<Pair>,
}

/// An operator between two parts, and the components there.
#[derive(Clone, Debug)]
struct Pair {
    upper: usize,
    lower: usize,
    /// By the rows of the lower part, then those of the upper.
    matrix: Vec<f64>,
    /// Rank of the lower state, rank of the upper one, place in the list; by these.
    components: Vec<(usize, usize, usize)>,
}

impl Components {
    /// Every component between states that come from the chosen levels; by q, then M of the upper state, then
    /// both states. One whose strength vanishes in every field is left out, one that vanishes in some is not.
    ///
    /// `upper` and `lower` may be the same, with an operator inside its manifold. A level beyond a list is
    /// not chosen.
    ///
    /// # Errors
    /// `nuclei-differ` where both have not the same nuclear spin; `too-many-components` above `most`.
    pub fn new(
        upper: &Split,
        lower: &Split,
        operator: &Operator,
        (upper_levels, lower_levels): (&[bool], &[bool]),
        most: usize,
    ) -> Result<Components, Problem> {
        let is_in = |list: &[bool], state: &State| list.get(state.level) == Some(&true);
        Components::of(upper, lower, operator, most, &|_, above, _, below| {
            is_in(upper_levels, above) && is_in(lower_levels, below)
        })
    }

    /// The same between pairs that are wanted, given as places and states.
    pub(super) fn of(
        upper: &Split,
        lower: &Split,
        operator: &Operator,
        most: usize,
        wanted: &dyn Fn(usize, &State, usize, &State) -> bool,
    ) -> Result<Components, Problem> {
        if upper.two_i != lower.two_i {
            let message = "Both ends of a line have the same nucleus.";
            return Err(Problem::new("nuclei-differ", message, 0, 0));
        }
        let mut found = Components {
            list: Vec::new(),
            pairs: Vec::new(),
        };
        let rank = i32::from(operator.rank);
        let mut factors = Factors::new(2 * rank);
        for (place, above) in upper.parts.iter().enumerate() {
            for (other, below) in lower.parts.iter().enumerate() {
                let two_q = above.block.two_m - below.block.two_m;
                if two_q.abs() > 2 * rank || two_q % 2 != 0 {
                    continue;
                }
                let mut pair = Pair {
                    upper: place,
                    lower: other,
                    matrix: Vec::new(),
                    components: Vec::new(),
                };
                let mut list = Vec::new();
                for (low, &lower_state) in below.states.iter().enumerate() {
                    for (high, &upper_state) in above.states.iter().enumerate() {
                        let states = (
                            upper.states().get(upper_state),
                            lower.states().get(lower_state),
                        );
                        if let (Some(u), Some(l)) = states
                            && wanted(upper_state, u, lower_state, l)
                        {
                            pair.components
                                .push((low, high, found.list.len() + list.len()));
                            list.push(Component {
                                upper: upper_state,
                                lower: lower_state,
                                q: two_q / 2,
                            });
                        }
                    }
                }
                if list.is_empty() {
                    continue;
                }
                let (rows, columns) = (above.size(), below.size());
                let mut matrix = vec![0.0; rows * columns];
                let between = Between {
                    left: &above.block,
                    right: &below.block,
                    two_i: upper.two_i,
                };
                let mut put = |row: usize, column: usize, value: f64| {
                    if let Some(entry) = matrix.get_mut(column * rows + row) {
                        *entry += value;
                    }
                };
                between.electrons(&operator.elements, &mut factors, &mut put);
                if operator.nuclear != 0.0 {
                    between.nucleus(operator.nuclear, &mut put);
                }
                if matrix.iter().all(|&entry| entry == 0.0) {
                    continue;
                }
                pair.matrix = matrix;
                found.list.extend(list);
                found.pairs.push(pair);
                if found.list.len() > most {
                    return Err(too_many(most));
                }
            }
        }
        found.in_order(upper);
        Ok(found)
    }

    fn in_order(&mut self, upper: &Split) {
        let mut order: Vec<usize> = (0..self.list.len()).collect();
        sort_by_key(&mut order, |&place| {
            let component = self.list.get(place)?;
            let two_m = upper.states().get(component.upper)?.two_m;
            Some((component.q, two_m, component.upper, component.lower))
        });
        let mut new = vec![0; order.len()];
        for (place, &old) in order.iter().enumerate() {
            if let Some(entry) = new.get_mut(old) {
                *entry = place;
            }
        }
        let list = order
            .iter()
            .filter_map(|&place| self.list.get(place).copied());
        self.list = list.collect();
        for pair in &mut self.pairs {
            for component in &mut pair.components {
                component.2 = new.get(component.2).copied().unwrap_or(0);
            }
            sort_by(&mut pair.components, Ord::cmp);
        }
    }

    /// The components.
    pub fn list(&self) -> &[Component] {
        &self.list
    }

    /// |⟨u|T_q|l⟩|² of each component, interference of all that both states hold included. Over all states of
    /// a pair of levels and all q it adds up to S (2I+1), for each q to a (2k+1)-th of that.
    pub fn strengths(&self, upper: &AtField, lower: &AtField) -> Vec<f64> {
        let mut found = Vec::new();
        self.strengths_into(upper, lower, &mut found);
        found
    }

    /// The same into a list that is already there.
    pub fn strengths_into(&self, upper: &AtField, lower: &AtField, found: &mut Vec<f64>) {
        found.clear();
        found.resize(self.list.len(), 0.0);
        let mut image: Vec<f64> = Vec::new();
        for pair in &self.pairs {
            let ends = (upper.parts.get(pair.upper), lower.parts.get(pair.lower));
            let (Some(above), Some(below)) = ends else {
                continue;
            };
            let rows = above.pairs.values.len();
            let mut last = None;
            for &(low, high, place) in &pair.components {
                if last != Some(low) {
                    image.clear();
                    image.resize(rows, 0.0);
                    let columns = pair.matrix.chunks_exact(rows.max(1));
                    for (column, &component) in columns.zip(below.pairs.vector(low)) {
                        if component != 0.0 {
                            add(&mut image, component, column);
                        }
                    }
                    last = Some(low);
                }
                let amplitude = dot(above.pairs.vector(high), &image);
                if let Some(entry) = found.get_mut(place) {
                    *entry = amplitude * amplitude;
                }
            }
        }
    }
}

#[inline(never)]
fn too_many(most: usize) -> Problem {
    let message = format!("There are more than {most} components.");
    Problem::new("too-many-components", message, 0, 0).bound(format!("at most {most} components"))
}
