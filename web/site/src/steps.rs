//! Says what each step did and how long it took.

use std::time::Instant;

use crate::Outcome;

/// The steps of one run, timed.
pub struct Steps {
    started: Instant,
}

impl Steps {
    /// Starts the clock.
    pub fn new() -> Self {
        Steps {
            started: Instant::now(),
        }
    }

    /// Runs a step that ends with a note for the reader.
    pub fn step(&mut self, name: &str, work: impl FnOnce() -> Outcome<String>) -> Outcome<()> {
        self.step_with(name, || Ok(((), work()?)))
    }

    /// Runs a step that also makes something.
    pub fn step_with<T>(
        &mut self,
        name: &str,
        work: impl FnOnce() -> Outcome<(T, String)>,
    ) -> Outcome<T> {
        let started = Instant::now();
        let (value, note) = work()?;
        println!(
            "{name:<22}{:>7.1} s   {note}",
            started.elapsed().as_secs_f64()
        );
        Ok(value)
    }

    /// The sum.
    pub fn total(&self) {
        println!(
            "{:<22}{:>7.1} s",
            "together",
            self.started.elapsed().as_secs_f64()
        );
    }
}
