//! How does it split? Levels and lines in a magnetic field and with their nucleus.

use crate::problem::Problem;

use super::Question;
use super::document::Document;
use super::energy_case;
use super::field::Field;
use super::splitting_full;
use super::splitting_linear;
use super::splitting_rows::{FieldOf, Splitting};
use super::structure::Energies;
use super::watch::Watch;

/// The answer to *How does it split?*
pub fn answer(document: &Document, watch: &mut Watch) -> Result<Splitting, Problem> {
    if let Some(lack) = document.lacks(Question::Splitting) {
        return Err(lack.problem());
    }
    if is_full(document) {
        splitting_full::answer(document, watch)
    } else {
        splitting_linear::answer(document)
    }
}

/// Whether energies are known, so that the field can be diagonalised.
///
/// What is not given is zero, and without any parameter all levels of a configuration lie together: that
/// is meant where the sheet says so or asks for no line.
pub fn is_full(document: &Document) -> bool {
    if document.level_alone.is_some() {
        return true;
    }
    match energy_case::need(document) {
        None => true,
        Some(("needs-parameters", _)) => {
            document.line.is_none() || document.structure.energies == Some(Energies::Given)
        }
        Some(_) => false,
    }
}

/// The field as answers carry it.
pub fn field_of(field: &Field, keeps: Option<String>) -> FieldOf {
    FieldOf {
        tesla: field.tesla,
        text: field.text.clone(),
        angle_degrees: field.angle_degrees,
        view: match field.angle_degrees {
            0.0 => "along",
            90.0 => "across",
            _ => "angle",
        },
        polariser: field.polariser_words(),
        keeps,
        up_to: field.end(),
    }
}

/// Cautions on magnets.
pub fn cautions(field: Option<&Field>) -> Vec<&'static str> {
    let tesla = field.map_or(0.0, |field| field.tesla);
    let mut cautions = Vec::new();
    if tesla > 0.0 {
        cautions.push(
            "Strong magnets pull tools and disturb implanted devices; a limit of 0.5 mT for people who carry one is common practice. Local codes and licensed practice come first.",
        );
    }
    if tesla > 2.0 {
        cautions.push(
            "Fields this strong usually come from superconducting or pulsed magnets: cryogens can burn, and displace the air; pulsed coils store lethal energy. Local codes and licensed practice come first.",
        );
    }
    cautions
}
