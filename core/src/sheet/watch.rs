//! How far a long calculation has come, told to whoever waits for it.

use serde::Serialize;

/// One iteration of one configuration's radial functions, or a share of the matrices and lines.
#[derive(Clone, Copy, Debug, PartialEq, Serialize)]
pub struct Progress<'a> {
    /// Which configuration of the sheet, from 0.
    pub configuration: usize,
    /// How many there are.
    pub of: usize,
    /// Its name.
    pub label: &'a str,
    /// Iterations done.
    pub iteration: usize,
    /// The residual they have left.
    pub residual: f64,
    /// How much of the matrices or lines is done, from 0 to 1; nothing during the iterations above.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub done: Option<f64>,
}

/// Is told of every iteration, and says whether to go on. What it is told never changes an answer;
/// a refusal becomes a fault.
pub type Watch<'a> = dyn FnMut(&Progress) -> bool + 'a;

/// Watches nothing and lets everything run.
pub fn unwatched(_: &Progress) -> bool {
    true
}
