//! Energies of levels with the pins of the sheet.
//!
//! Pins stand on a scale of their own: that of the given averages, or with computed energies the one
//! that counts from the lowest level. A level without a pin keeps its computed distance from the nearest
//! pinned level of its configuration; a configuration without pins keeps its distance from the lowest
//! level.

use crate::numerics::order::sort_by;
use crate::radiation::populations::Weighted;

use super::document::Document;
use super::rich::Kind;
use super::solved::Solved;
use super::structure::Energies;

/// Where the levels lie.
#[derive(Clone, Debug)]
pub struct Placed {
    /// By level, cm⁻¹.
    pub energy: Vec<f64>,
    /// By level, where its energy comes from.
    pub kind: Vec<Kind>,
    /// Places of the levels by rising energy.
    pub order: Vec<usize>,
    /// Whether any level is pinned.
    pub pinned: bool,
    /// The level that pins count from, where none of them says it.
    pub anchor: Option<usize>,
}

impl Placed {
    /// From which level measured energies count where none of them says so.
    pub fn anchored(&self, solved: &Solved) -> Option<String> {
        let anchor = solved.levels.get(self.anchor?)?;
        Some(format!(
            "The measured energies count from {}, which is taken as zero.",
            anchor.label
        ))
    }

    /// The energies of the levels of a sheet.
    pub fn new(document: &Document, solved: &Solved) -> Placed {
        let levels = &solved.levels;
        let pins: Vec<Option<f64>> = match document.measured.is_empty() {
            true => vec![None; levels.len()],
            false => levels.iter().map(|l| document.pinned(&l.of())).collect(),
        };
        let computed = document.energies() == Energies::Computed;
        let own = if computed {
            Kind::Computed
        } else {
            Kind::Entered
        };
        let pinned = pins.iter().any(Option::is_some);
        let anchor = (pinned && computed && matches!(pins.first(), Some(None))).then_some(0);
        // What is known on the scale of the pins: place, computed and pinned energy.
        let mut known: Vec<(usize, f64, f64)> = Vec::new();
        for (place, (level, pin)) in levels.iter().zip(&pins).enumerate() {
            let pin = pin.or((anchor == Some(place)).then_some(0.0));
            known.extend(pin.map(|pin| (place, level.energy, pin)));
        }
        let base = match (computed, known.first()) {
            (true, Some((_, computed, pin))) => pin - computed,
            _ => 0.0,
        };
        let mut placed = Placed {
            energy: Vec::with_capacity(levels.len()),
            kind: Vec::with_capacity(levels.len()),
            order: (0..levels.len()).collect(),
            pinned,
            anchor,
        };
        for (place, (level, pin)) in levels.iter().zip(&pins).enumerate() {
            let is_anchor = anchor == Some(place);
            let (energy, kind) = match pin {
                Some(pin) => (*pin, Kind::Measured),
                None if is_anchor => (0.0, Kind::Measured),
                None => {
                    let mut nearest: Option<(f64, f64)> = None;
                    for (other, computed, pin) in &known {
                        let same = levels.get(*other).map(|l| l.entry) == Some(level.entry);
                        let distance = (computed - level.energy).abs();
                        if same && nearest.is_none_or(|(known, _)| distance < known) {
                            nearest = Some((distance, pin - computed));
                        }
                    }
                    let shift = nearest.map_or(base, |(_, shift)| shift);
                    (level.energy + shift, own)
                }
            };
            placed.energy.push(energy);
            placed.kind.push(kind);
        }
        let energy = &placed.energy;
        sort_by(&mut placed.order, |a, b| {
            let of = |place: &usize| energy.get(*place).copied().unwrap_or(0.0);
            of(a).total_cmp(&of(b))
        });
        placed
    }

    /// Energy of a level, cm⁻¹.
    pub fn of(&self, place: usize) -> f64 {
        self.energy.get(place).copied().unwrap_or(0.0)
    }

    /// Where its energy comes from.
    pub fn kind_of(&self, place: usize) -> Kind {
        self.kind.get(place).copied().unwrap_or(Kind::Computed)
    }

    /// The lowest energy.
    pub fn lowest(&self) -> f64 {
        self.order.first().map_or(0.0, |place| self.of(*place))
    }

    /// Energies with weights, for populations.
    pub fn weighted(&self, solved: &Solved) -> Vec<Weighted> {
        solved
            .levels
            .iter()
            .zip(&self.energy)
            .map(|(level, energy)| Weighted {
                energy: *energy,
                weight: level.weight(),
            })
            .collect()
    }
}
