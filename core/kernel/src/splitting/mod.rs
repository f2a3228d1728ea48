//! What a magnetic field and a nucleus make of levels, from weak to strong.
//!
//! H = E(γJ) + H_nucleus + B₀ [μ_B (L_z + g_s S_z) − μ_N g_I I_z] + B₀² D. The levels without field and
//! nucleus are the basis, with the energies that they are known to have; L + g_s S connects them by
//! reduced elements from their eigenvectors, so that weak fields, crossings and the Paschen–Back limit
//! are one calculation (Condon & Shortley, *The Theory of Atomic Spectra* (1935), chapter 16). A and B
//! act inside each level; what a nucleus couples between levels is left out. D is the diamagnetic term,
//! by choice.
//!
//! Energies in cm⁻¹, fields in tesla, angular momenta doubled, reduced elements after Edmonds,
//! *Angular Momentum in Quantum Mechanics* (1957), eq. 5.4.1.

mod component_crossings;
mod components;
mod crossings;
mod eigenpairs;
mod from_model;
mod linear;
mod manifold;
mod map;
mod nucleus;
mod one_electron;
mod operator;
mod part;
mod probe;
mod projections;
mod resonances;
mod root;
mod rows;
mod search_fields;
mod split;

pub use component_crossings::{ComponentCrossing, component_crossings};
pub use components::{Component, Components};
pub use crossings::{Crossing, CrossingKind, Found, MOST_COMPARED, Wanted, crossings};
pub use linear::{Linear, Tolerance};
pub use manifold::{Diamagnetic, Level, Manifold, OneElectron, Reduced};
pub use map::{Followed, MOST_NUMBERS, Map, map, map_at};
pub use nucleus::{MHZ_PER_WAVENUMBER, NUCLEAR_MAGNETON_WAVENUMBER, Nucleus, casimir};
pub use operator::Operator;
pub use resonances::{Resonance, Resonances};
pub use search_fields::{SearchFields, search_fields};
pub use split::{AtField, MOST_ROWS, MOST_STATES, MOST_TESLA, Size, Split, State};
