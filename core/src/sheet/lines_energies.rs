//! Lines between levels whose energies are known: strengths, rates, wavelengths, intensities.

use std::rc::Rc;

use crate::constants::BOLTZMANN_WAVENUMBER;
use crate::elements;
use crate::numerics::sorted_map::SortedMap;
use crate::radiation::absorption::{centre_cross_section, optical_depth, saturation_intensity};
use crate::radiation::populations::{Partition, Weighted};
use crate::radiation::{Multipole, isotope};

use super::compositions::Composition;
use super::decays::{Line, Radiation};
use super::document::Document;
use super::energy_case::EnergyCase;
use super::levels::populated;
use super::levels_rows::Shared;
use super::light::Surroundings;
use super::line_rows::LineRow;
use super::lines_relative::Judgement;
use super::orbitals_closed::mass_number_of;
use super::placed::Placed;
use super::rich::Kind;
use super::solved::{Solved, SolvedLevel};

/// A cancellation factor below this marks a line as weak: its strength is what little is left of large
/// terms (common practice, no source: below 0.05 a strength may be far off).
pub const WEAK: f64 = 0.05;

/// Everything that the rows are made of.
pub struct Source<'a> {
    pub document: &'a Document,
    pub solved: &'a Solved,
    pub placed: &'a Placed,
    pub radiation: &'a Radiation,
    pub surroundings: &'a Surroundings,
    /// Pure LS coupling, where its pairs are not too many.
    pub judged: Option<&'a Judgement>,
}

/// By the two names in order, and the multipole.
type Key<'a> = (&'a str, &'a str, Multipole);

fn key<'a>(one: &'a str, other: &'a str, multipole: Multipole) -> Key<'a> {
    (one.min(other), one.max(other), multipole)
}

impl Source<'_> {
    /// A row for each line, by lower, then upper level.
    pub fn rows(&self) -> Vec<LineRow> {
        let relatives: SortedMap<Key, (Option<f64>, Option<&Shared>)> = self
            .judged
            .iter()
            .flat_map(|judged| &judged.lines)
            .map(|line| {
                let key = key(&line.upper.0, &line.lower.0, line.multipole);
                (key, (line.relative, line.multiplet.as_ref()))
            })
            .collect();
        let filled = populated(self.document, &self.placed.weighted(self.solved));
        let mut rows = Vec::with_capacity(self.radiation.lines.len());
        let (mut brightest, mut darkest) = (0.0_f64, 0.0_f64);
        let mut notes = Notes::default();
        let isotopes = self.isotopes();
        for line in &self.radiation.lines {
            let (Some(upper), Some(lower)) = (self.level(line.upper), self.level(line.lower))
            else {
                continue;
            };
            let mut row = self.row(line, upper, lower);
            let known = relatives.get(&key(&upper.label, &lower.label, line.multipole));
            if let Some((relative, multiplet)) = known {
                row.relative = *relative;
                row.multiplet = multiplet.cloned();
            }
            row.mass_shift =
                isotopes.and_then(|(from, to)| self.mass_shift(row.wavenumber?, from, to));
            if line.multipole == Multipole::E1 {
                row.spin_note = self.spin_note(line, &mut notes);
            }
            if let Some(filled) = &filled {
                self.lit(&mut row, line, filled);
                brightest = brightest.max(row.intensity.unwrap_or(0.0));
                darkest = darkest.max(row.absorption.unwrap_or(0.0));
            }
            rows.push(row);
        }
        for row in &mut rows {
            let beside =
                |value: Option<f64>, most: f64| value.filter(|_| most > 0.0).map(|v| v / most);
            row.intensity = beside(row.intensity, brightest);
            row.absorption = beside(row.absorption, darkest);
        }
        rows
    }

    fn level(&self, place: usize) -> Option<&SolvedLevel> {
        self.solved.levels.get(place)
    }

    fn row(&self, line: &Line, upper: &SolvedLevel, lower: &SolvedLevel) -> LineRow {
        let wavenumber = (line.wavenumber > 0.0).then_some(line.wavenumber);
        let vacuum_nm = wavenumber.map(|w| 1e7 / w);
        let kinds = [line.upper, line.lower].map(|place| self.placed.kind_of(place));
        let energy_kind = match kinds {
            [Kind::Measured, Kind::Measured] => Kind::Measured,
            [Kind::Entered, _] | [_, Kind::Entered] => Kind::Entered,
            _ => Kind::Computed,
        };
        let a = line.rates.map(|rates| rates.a);
        let decay = self.radiation.decays.get(line.upper);
        let index = self.surroundings.name == "index";
        LineRow {
            wavenumber,
            energy_kind: wavenumber.map(|_| energy_kind),
            vacuum_nm,
            air_nm: vacuum_nm.and_then(|nm| self.surroundings.air_nm(nm)),
            medium_nm: vacuum_nm
                .filter(|_| index)
                .map(|nm| self.surroundings.medium_nm(nm)),
            s: Some(line.s),
            gf: line.rates.map(|rates| rates.gf),
            f: line.rates.map(|rates| rates.f),
            a,
            branching: a.zip(decay).map(|(a, decay)| decay.branching(a)),
            cancellation: Some(line.cancellation),
            weak: line.cancellation < WEAK,
            ..LineRow::between(
                Shared(upper.label.clone()),
                Shared(lower.label.clone()),
                (upper.level.j, lower.level.j),
                line.multipole,
            )
        }
    }

    /// Emission N_u A hσ and absorption N_l f (1 − e^(−hcσ/kT)) of a thin source in equilibrium.
    fn lit(&self, row: &mut LineRow, line: &Line, filled: &Partition) {
        let (Some(rates), Some(upper), Some(lower)) =
            (line.rates, self.level(line.upper), self.level(line.lower))
        else {
            return;
        };
        let share = |place: usize, level: &SolvedLevel| {
            filled.share(Weighted {
                energy: self.placed.of(place),
                weight: level.weight(),
            })
        };
        let (above, below) = (share(line.upper, upper), share(line.lower, lower));
        row.intensity = Some(above * rates.a * line.wavenumber);
        let thermal = BOLTZMANN_WAVENUMBER.value * filled.temperature;
        let stimulated = 1.0 - libm::exp(-line.wavenumber / thermal);
        row.absorption = Some(below * rates.f * stimulated);
        let Some(column) = self.document.conditions.column else {
            return;
        };
        let decay = |place: usize| self.radiation.decays.get(place).map_or(0.0, |d| d.rate);
        let (total, own) = (decay(line.upper) + decay(line.lower), decay(line.upper));
        row.saturation_intensity = saturation_intensity(
            line.wavenumber,
            rates.a,
            own,
            lower.weight(),
            upper.weight(),
        );
        row.cross_section = self.mass().and_then(|mass| {
            centre_cross_section(rates.f, line.wavenumber, filled.temperature, mass, total)
        });
        row.optical_depth = row.cross_section.and_then(|cross_section| {
            optical_depth(
                cross_section,
                column,
                (below, lower.weight()),
                (above, upper.weight()),
            )
        });
    }

    /// The normal mass shift of a line from the usual isotope to the one entered. One electron's wavenumber is
    /// that of the isotope entered, so that the way is gone backwards.
    fn mass_shift(&self, wavenumber: f64, usual: f64, entered: f64) -> Option<f64> {
        match self.solved.case() {
            EnergyCase::OneElectron { .. } => {
                let back = isotope::normal_mass_shift(wavenumber, entered, usual);
                back.ok().map(|back| -back)
            }
            EnergyCase::Model { .. } => isotope::normal_mass_shift(wavenumber, usual, entered).ok(),
        }
    }

    /// Masses of the nuclei of the usual and of the entered isotope in u, where another one is entered.
    fn isotopes(&self) -> Option<(f64, f64)> {
        let species = self.document.species?;
        let (z, entered) = (species.element?, species.mass_number?);
        let (usual, _) = mass_number_of(z, None);
        let mass = |number: u16| {
            isotope::light_nucleus(z, number.into()).unwrap_or_else(|| {
                let tabulated = elements::isotope(z, number).map(|isotope| isotope.mass);
                isotope::nuclear_mass(tabulated.unwrap_or(number.into()), z)
            })
        };
        (usual != entered).then(|| (mass(usual), mass(entered)))
    }

    /// Mass of the atom in u: of the isotope entered, otherwise the mean of the element in nature; the mass
    /// number where no table has it.
    fn mass(&self) -> Option<f64> {
        let species = self.document.species?;
        let z = species.element?;
        if species.mass_number.is_none()
            && let Some(mean) = elements::mean_mass(z)
        {
            return Some(mean);
        }
        let (number, _) = mass_number_of(z, species.mass_number);
        let known = elements::isotope(z, number).map(|isotope| isotope.mass);
        Some(known.unwrap_or(f64::from(number)))
    }

    /// What makes a line between levels named with different spins.
    fn spin_note(&self, line: &Line, notes: &mut Notes) -> Option<Shared> {
        let (upper, lower) = (self.level(line.upper)?, self.level(line.lower)?);
        let (above, below) = (upper.level.term.two_s, lower.level.term.two_s);
        if above == below {
            return None;
        }
        let compositions = &self.solved.compositions().levels;
        let in_upper = part(compositions.get(line.upper), below);
        let in_lower = part(compositions.get(line.lower), above);
        let text = match (in_upper, in_lower) {
            (Some(one), Some(other)) => {
                format!("S is not good here: {one} in the upper level, {other} in the lower level")
            }
            (Some(one), None) => format!("S is not good here: {one} in the upper level"),
            (None, Some(other)) => format!("S is not good here: {other} in the lower level"),
            (None, None) => {
                "S is not good here: both levels hold small shares of other spins".to_owned()
            }
        };
        Some(notes.shared(text))
    }
}

/// "4 % 3P", where a level holds so much of a multiplicity.
fn part(composition: Option<&Composition>, two_s: u32) -> Option<String> {
    let share = composition?.spins.iter().find(|s| s.two_s == two_s)?;
    let percent = match share.percent {
        p if p < 0.01 => return None,
        p if p < 1.0 => format!("{p:.2}"),
        p => format!("{p:.0}"),
    };
    Some(format!("{percent} % {}", share.term))
}

/// The last note, shared by the lines that repeat it.
#[derive(Default)]
struct Notes {
    last: Option<Rc<str>>,
}

impl Notes {
    fn shared(&mut self, text: String) -> Shared {
        match &self.last {
            Some(last) if **last == *text => Shared(Rc::clone(last)),
            _ => {
                let new: Rc<str> = Rc::from(text);
                self.last = Some(Rc::clone(&new));
                Shared(new)
            }
        }
    }
}
