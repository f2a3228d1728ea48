//! The balance with the next ion in a plasma: Saha's equation with limits and levels of this sheet.

use crate::configuration::filling;
use crate::constants::HARTREE_WAVENUMBER;
use crate::radiation::hydrogenic_lines::binding;
use crate::radiation::ionisation::saha;
use crate::radiation::populations::{CutOff, Partition, Weighted, partition};
use crate::structure::model::{self, Case};

use super::document::Document;
use super::energy_case::EnergyCase;
use super::levels_rows::{IonisationRow, SeriesRow};
use super::orbitals_field::solution;
use super::placed::Placed;
use super::rich::Kind;
use super::solved::Solved;

/// What is known of the next ion.
struct Next {
    /// Above the lowest level, cm⁻¹.
    limit: f64,
    limit_kind: Kind,
    configuration: Option<String>,
    partition: f64,
}

/// The balance at the temperature and electron density of the source; nothing without them or without a
/// nucleus.
///
/// The limit is that of a series of measured levels where there is one, otherwise the difference of the
/// computed energies of both ions.
pub fn row(
    document: &Document,
    solved: &Solved,
    placed: &Placed,
    series: &[SeriesRow],
    filled: &Partition,
) -> Option<IonisationRow> {
    let electron_density = document.conditions.electron_density?;
    let charge = document.species?.charge.checked_add(1)?;
    let charge = u32::try_from(charge).ok().filter(|charge| *charge > 0)?;
    let temperature = filled.temperature;
    let mut next = next(document, solved, temperature)?;
    let measured = series.iter().find(|row| row.limit_kind == Kind::Measured);
    if let Some(measured) = measured {
        next.limit = measured.limit - placed.lowest();
        next.limit_kind = Kind::Measured;
    }
    let balance = saha(
        next.limit,
        charge,
        temperature,
        electron_density,
        filled.value,
        next.partition,
    )
    .ok()?;
    Some(IonisationRow {
        temperature,
        electron_density,
        limit: next.limit,
        limit_kind: next.limit_kind,
        lowering: balance.lowering,
        debye_length: balance.debye_length,
        lower_partition: filled.value,
        higher_partition: next.partition,
        higher_configuration: next.configuration,
        ratio: balance.ratio,
        ionised: balance.ratio / (1.0 + balance.ratio),
    })
}

fn next(document: &Document, solved: &Solved, temperature: f64) -> Option<Next> {
    let species = document.species?;
    let lowest = solved.levels.first()?;
    let case = match solved.case() {
        EnergyCase::OneElectron { z, mass, .. } => {
            return Some(Next {
                limit: binding(lowest.orbital?, lowest.level.j, *z, Some(*mass)).ok()?,
                limit_kind: Kind::Computed,
                configuration: None,
                partition: 1.0,
            });
        }
        EnergyCase::Model { case, .. } => case,
    };
    let origin = solved.spectrum.as_ref()?.origin?;
    let (z, mass_number) = case.nucleus?;
    let ion = filling::ground(z, species.charge.checked_add(1)?)?;
    let configuration = ion.configuration();
    let subshells = configuration.subshells().to_vec();
    let bare = subshells.iter().all(|shell| !shell.is_open());
    let asked = Case {
        relativity: case.relativity,
        scale: case.scale,
        correlation: case.correlation,
        polarisation: case.polarisation.clone().filter(|_| !bare),
        ..Case::new(z, mass_number, vec![subshells])
    };
    let mut field = |atom: &crate::radial::hartree_fock::Atom| solution(atom, &mut |_| true);
    let spectrum = model::solve(&asked, &mut field, &mut |_| true).ok()?;
    let mut levels = Vec::new();
    for place in &spectrum.levels {
        let (_, level) = spectrum.level(*place)?;
        levels.push(Weighted {
            energy: level.energy,
            weight: f64::from(level.two_j.saturating_add(1)),
        });
    }
    let above = spectrum.origin? * HARTREE_WAVENUMBER.value + levels.first()?.energy;
    let below = origin * HARTREE_WAVENUMBER.value + lowest.energy;
    Some(Next {
        limit: above - below,
        limit_kind: Kind::Computed,
        configuration: Some(configuration.short_text()),
        partition: partition(&levels, temperature, CutOff::HighestLevel)
            .ok()?
            .value,
    })
}
