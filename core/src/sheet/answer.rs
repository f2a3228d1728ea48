//! What every answer carries beside its own keys.

use crate::numerics::sorted_map::SortedMap;

use serde::Serialize;

use super::formula::{Formula, Typeset};
use super::rich::{Kind, Rich};

/// One step of the working: a formula, the same with this case's numbers, the result, the source.
#[derive(Clone, Debug, Serialize)]
pub struct Working {
    title: &'static str,
    formula: Typeset,
    numbers: Option<Typeset>,
    result: Option<Rich>,
    source: &'static str,
}

impl Working {
    /// A step with its formula and where the formula comes from.
    #[inline(never)]
    pub fn new(title: &'static str, formula: Formula, source: &'static str) -> Self {
        Working {
            title,
            formula: formula.into(),
            numbers: None,
            result: None,
            source,
        }
    }

    /// The same formula with this case's numbers, and what it gives.
    #[must_use]
    #[inline(never)]
    pub fn numbers(mut self, numbers: Formula, result: Rich) -> Self {
        self.numbers = Some(numbers.into());
        self.result = Some(result);
        self
    }
}

/// The sentence, the working, the limits, the cautions and the kinds of the columns.
#[derive(Clone, Debug, Default, Serialize)]
pub struct Around {
    /// One sentence that can be read out over the phone.
    pub say: Rich,
    /// The same as plain text.
    pub say_plain: String,
    /// How the main numbers come about.
    pub working: Vec<Working>,
    /// What was left out, and how large it is likely to be.
    pub limits: Vec<String>,
    /// Where something can hurt.
    pub cautions: Vec<&'static str>,
    /// The kind of every column or single number, by its path in the answer.
    pub kinds: SortedMap<&'static str, Kind>,
}

impl Around {
    /// With its sentence.
    #[inline(never)]
    pub fn saying(say: Rich) -> Self {
        Around {
            say_plain: say.plain(),
            say,
            ..Around::default()
        }
    }
}
