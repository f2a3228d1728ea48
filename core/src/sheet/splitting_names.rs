//! What states in a field are called.

use crate::quantity::TwiceJ;
use crate::splitting::in_field::State;

use super::levels_rows::Shared;
use super::rich::Rich;
use super::splitting_sets::SetLevel;

/// What a state is called: level, F or M_J and M_I, M.
pub fn state_name(level: &SetLevel, state: &State, isotope: Option<&Shared>) -> String {
    let isotope = isotope.map_or(String::new(), |name| format!("{} ", name.0));
    format!("{isotope}{} {}", level.label.0, momenta(state))
}

fn momenta(state: &State) -> String {
    let j = TwiceJ::from_doubled;
    match (state.two_f, state.two_m_j, state.two_m_i) {
        (Some(f), ..) => format!("F {} M {}", j(f), j(state.two_m)),
        (None, Some(m_j), Some(m_i)) => format!("M_J {} M_I {}", j(m_j), j(m_i)),
        _ => format!("M {}", j(state.two_m)),
    }
}

/// The same as it is read: "F = 2, M = −1".
fn momenta_words(state: &State) -> String {
    let words = momenta(state);
    let mut parts = Vec::new();
    let mut words = words.split(' ');
    while let (Some(name), Some(value)) = (words.next(), words.next()) {
        parts.push(format!("{name} = {}", value.replace('-', "−")));
    }
    parts.join(", ")
}

/// The same, typeset.
pub fn state_rich(level: &SetLevel, state: &State) -> Rich {
    level
        .rich
        .clone()
        .say(format!(", {}", momenta_words(state)))
}
