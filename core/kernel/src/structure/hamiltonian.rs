//! The energy as a matrix for each J, linear in the radial integrals.

use super::basis::{Basis, Block, Coupled};
use super::bounds::MOST_ROWS;
use super::chain::Workshop;
use super::electrostatic::{self, Entry};
use super::parameters::{Integral, Parameter};
use super::spin_orbit::{self, Joint};
use super::symbols::Symbols;
use crate::angular::NINE_J_CAPACITY;
use crate::numerics::sparse::{Elements, SparseSymmetric};
use crate::problem::Problem;
use nalgebra::DMatrix;

/// What the energy holds beside E_av, F^k, G^k and ζ.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Terms {
    /// R^k and ⟨a|h|c⟩ between configurations.
    pub mixing: bool,
    /// α, β and γ of every subshell that has them.
    pub effective: bool,
}

/// All coefficients of a basis; a change of a parameter only sums them again.
#[derive(Clone, Debug)]
pub struct Hamiltonian {
    basis: Basis,
    parameters: Vec<Parameter>,
    /// By block.
    electrostatic: Vec<Vec<Entry>>,
    spin_orbit: Vec<Joint>,
}

/// The rows of the matrix of one J.
#[derive(Clone, Debug, PartialEq)]
pub struct Rows {
    /// 2J.
    pub two_j: i32,
    /// For each block that reaches J its place and its first row.
    pub blocks: Vec<(usize, usize)>,
    /// The place of each row's state in [`Basis::states`].
    pub states: Vec<usize>,
}

impl Rows {
    /// The first row of a block, where it reaches J.
    pub fn first(&self, block: usize) -> Option<usize> {
        let place = self.blocks.binary_search_by_key(&block, |known| known.0);
        place
            .ok()
            .and_then(|place| self.blocks.get(place))
            .map(|known| known.1)
    }
}

impl Hamiltonian {
    /// The coefficients of E_av, F^k, G^k, R^k, ⟨a|h|c⟩ and ζ in this basis.
    ///
    /// # Errors
    /// Those of [`crate::angular::parentage::parents`]; `angular-momentum-too-large` where a 9j symbol
    /// is beyond what is computed.
    pub fn new(basis: Basis) -> Result<Self, Problem> {
        let terms = Terms {
            mixing: true,
            effective: false,
        };
        Self::of(basis, terms)
    }

    /// The same with α, β and γ of every subshell that has them among the parameters.
    ///
    /// # Errors
    /// Those of [`Hamiltonian::new`].
    pub fn with_effective(basis: Basis) -> Result<Self, Problem> {
        let terms = Terms {
            mixing: true,
            effective: true,
        };
        Self::of(basis, terms)
    }

    /// The same with these terms.
    ///
    /// # Errors
    /// Those of [`Hamiltonian::new`].
    pub fn of(basis: Basis, terms: Terms) -> Result<Self, Problem> {
        let mut workshop = Workshop::default();
        let mut parameters: Vec<Parameter> = (0..basis.configurations().len())
            .map(|place| Parameter {
                first: place,
                second: place,
                integral: Integral::Average,
            })
            .collect();
        let electrostatic =
            electrostatic::coefficients(&basis, &mut workshop, &mut parameters, terms)?;
        let spin_orbit = spin_orbit::coefficients(&basis, &mut workshop, &mut parameters)?;
        let finite = |entries: &Vec<Entry>| entries.iter().all(|entry| entry.value.is_finite());
        let joints = spin_orbit.iter().map(|joint| &joint.entries);
        if !electrostatic.iter().chain(joints).all(finite) {
            return Err(beyond_symbols());
        }
        Ok(Hamiltonian {
            basis,
            parameters,
            electrostatic,
            spin_orbit,
        })
    }

    /// The states.
    pub fn basis(&self) -> &Basis {
        &self.basis
    }

    /// The radial integrals that a value is needed for: first the averages of all configurations.
    pub fn parameters(&self) -> &[Parameter] {
        &self.parameters
    }

    /// The value of each parameter, in their order.
    pub fn values(&self, value: impl FnMut(&Parameter) -> f64) -> Vec<f64> {
        self.parameters.iter().map(value).collect()
    }

    /// Electrostatic coefficients of each block, without the averages.
    pub fn electrostatic(&self) -> &[Vec<Entry>] {
        &self.electrostatic
    }

    /// Spin–orbit coefficients between blocks.
    pub fn spin_orbit(&self) -> &[Joint] {
        &self.spin_orbit
    }

    /// The rows of the matrix of J.
    pub fn rows(&self, two_j: i32) -> Rows {
        let mut rows = Rows {
            two_j,
            blocks: Vec::new(),
            states: Vec::new(),
        };
        for (place, block) in self.basis.blocks().iter().enumerate() {
            if block.total.reaches(two_j) {
                rows.blocks.push((place, rows.states.len()));
                rows.states.extend(block.first..block.first + block.len);
            }
        }
        rows
    }

    /// The matrix of J; only its lower triangle is set.
    ///
    /// # Errors
    /// `matrix-too-large` above [`MOST_ROWS`] rows; `parameter-not-finite`.
    pub fn matrix(&self, rows: &Rows, values: &[f64]) -> Result<DMatrix<f64>, Problem> {
        let size = rows.states.len();
        if u64::try_from(size).unwrap_or(u64::MAX) > MOST_ROWS {
            return Err(too_large(size, rows.two_j));
        }
        // By columns, as the eigensolver wants it.
        let mut entries = vec![0.0; size * size];
        self.elements(rows, values, |row, column, value| {
            let (row, column) = (row.max(column), row.min(column));
            if let Some(entry) = entries.get_mut(column * size + row) {
                *entry += value;
            }
        })?;
        Ok(DMatrix::from_vec(size, size, entries))
    }

    /// The matrix of J without its zeros, whatever its size.
    ///
    /// # Errors
    /// `parameter-not-finite`.
    pub fn sparse(&self, rows: &Rows, values: &[f64]) -> Result<SparseSymmetric, Problem> {
        let mut elements = Elements::new(u32::try_from(rows.states.len()).unwrap_or(u32::MAX));
        self.elements(rows, values, |row, column, value| {
            if value != 0.0 {
                elements.add(row, column, value);
            }
        })?;
        Ok(elements.finish())
    }

    /// Gives every contribution to an element of the matrix of J, its row and column in either order.
    fn elements(
        &self,
        rows: &Rows,
        values: &[f64],
        mut put: impl FnMut(usize, usize, f64),
    ) -> Result<(), Problem> {
        if values.len() != self.parameters.len() || !values.iter().all(|v| v.is_finite()) {
            return Err(not_finite());
        }
        let value_of = |parameter: usize| values.get(parameter).copied().unwrap_or(0.0);
        for &(place, first) in &rows.blocks {
            let Some(block) = self.basis.blocks().get(place) else {
                continue;
            };
            for (row, state) in (first..).zip(self.basis.block_states(block)) {
                // The averages stand first among the parameters.
                put(row, row, value_of(state.configuration));
            }
            for entry in self.electrostatic.get(place).into_iter().flatten() {
                let energy = entry.value * value_of(entry.parameter);
                put(first + entry.row, first + entry.column, energy);
            }
        }
        let mut symbols = Symbols::default();
        let total = |place: usize| self.basis.blocks().get(place).map(|b: &Block| b.total);
        for joint in &self.spin_orbit {
            let (Some(row), Some(column)) = (rows.first(joint.rows), rows.first(joint.columns))
            else {
                continue;
            };
            let left: Coupled = total(joint.rows).unwrap_or_default();
            let right: Coupled = total(joint.columns).unwrap_or_default();
            let factor = spin_orbit::factor(&mut symbols, left, right, rows.two_j);
            if factor == 0.0 {
                continue;
            }
            for entry in &joint.entries {
                let energy = factor * entry.value * value_of(entry.parameter);
                put(row + entry.row, column + entry.column, energy);
            }
        }
        Ok(())
    }
}

#[inline(never)]
fn too_large(size: usize, two_j: i32) -> Problem {
    let j = crate::quantity::TwiceJ::from_doubled(two_j);
    Problem::new(
        "matrix-too-large",
        format!("The matrix of J = {j} has {size} rows."),
        0,
        0,
    )
    .bound(format!("at most {MOST_ROWS} rows"))
}

#[inline(never)]
fn not_finite() -> Problem {
    Problem::new(
        "parameter-not-finite",
        "A radial integral has no finite value.",
        0,
        0,
    )
}

#[inline(never)]
pub(super) fn beyond_symbols() -> Problem {
    Problem::new(
        "angular-momentum-too-large",
        "The coupling of these subshells needs 9j symbols that are not computed.",
        0,
        0,
    )
    .bound(format!("angular momenta up to {}", NINE_J_CAPACITY / 2))
}
