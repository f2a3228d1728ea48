//! What the answers on levels and lines leave out, and how far off that puts them.

use crate::configuration::{Orbital, Subshell};
use crate::quantity::TwiceJ;
use crate::structure::model::{Case, Correlation, Scale, UsualDeviation};

use super::document::Document;
use super::energy_case::{EnergyCase, given_value};
use super::given::Given;
use super::json::Json;
use super::lack::Way;
use super::levels::parity;
use super::levels_rows::{CorrelatedRow, CorrelationRow};
use super::levels_words::Told;
use super::rich::Kind;
use super::solved::Solved;

/// The limits of the answer on levels.
pub fn limits(told: &Told) -> Vec<String> {
    let mut limits = Vec::new();
    let document = told.document;
    match told.solved.case() {
        EnergyCase::OneElectron { .. } => limits.push(
            "One electron in the field of a point nucleus of finite mass; the Lamb shift and the spin of the nucleus are left out (in hydrogen 0.27 cm⁻¹ for 1s and 0.035 cm⁻¹ for 2s, from memory)."
                .to_owned(),
        ),
        EnergyCase::Model { case, .. } => {
            if case.computed {
                limits.extend(computed(case));
            } else {
                limits.push(
                    "Energies follow from the given parameters alone; what is not given is zero."
                        .to_owned(),
                );
            }
            if !case.mixing {
                limits.push("Configurations do not mix, as the sheet asks.".to_owned());
            }
        }
    }
    limits.extend(without_effect(document, told.solved));
    if told.placed.pinned {
        limits.push(
            "Measured levels stand at their measured energies; a level without one keeps its computed distance from the nearest measured level of its configuration."
                .to_owned(),
        );
    }
    limits.extend(told.placed.anchored(told.solved));
    limits.extend(too_low(document, told.solved));
    limits.extend(incomplete(told.solved));
    if told.levels.len() < told.solved.levels.len() {
        limits.push(format!(
            "Of {} levels the {} lowest are listed.",
            told.solved.levels.len(),
            told.levels.len()
        ));
    }
    if let Some(balance) = told.ionisation {
        limits.push(format!(
            "The balance with the next ion counts the levels listed here and those of its {}; the limit is {}.",
            balance.higher_configuration.as_deref().unwrap_or("bare nucleus"),
            match balance.limit_kind {
                Kind::Measured => "that of the measured series",
                _ => "computed, mostly some thousand cm⁻¹ too low (common practice, no source)",
            }
        ));
    }
    limits.extend(document.unused());
    limits
}

/// What the sheet asks of the energies and these levels have no use for.
pub fn without_effect(document: &Document, solved: &Solved) -> Option<String> {
    if let EnergyCase::Model { entries, .. } = solved.case() {
        let spectrum = solved.spectrum.as_ref()?;
        // As the case counts them.
        let given: Vec<&Given> = (document.given.iter())
            .filter(|given| given_value(given, entries).is_some())
            .collect();
        let spelling = |place: &usize| Some(given.get(*place)?.spelling.clone());
        let unused: Vec<String> = spectrum.unused.iter().filter_map(spelling).collect();
        return (!unused.is_empty()).then(|| {
            format!(
                "Given without effect, for none of these configurations has such a parameter: {}.",
                unused.join(", ")
            )
        });
    }
    let structure = &document.structure;
    let mut unused: Vec<String> = document.given.iter().map(|g| g.spelling.clone()).collect();
    let switched = [
        (structure.scale != Scale::default(), "the scales"),
        (!structure.relativity, "“without relativity”"),
        (!structure.mixing, "“without mixing”"),
        (structure.correlation, "correlation within subshells"),
        (structure.polarisation.is_some(), "core polarisation"),
    ];
    let words = switched.iter().filter(|(is, _)| *is);
    unused.extend(words.map(|(_, words)| (*words).to_owned()));
    (!unused.is_empty()).then(|| {
        format!(
            "One electron has Dirac’s levels in closed form, which use nothing of this: {}. With energies from given values alone, what is given counts.",
            unused.join(", ")
        )
    })
}

/// How far computed energies usually are from measured ones, by the validation report.
pub fn computed(case: &Case) -> Vec<String> {
    let terms = correlation(case).map_or(String::new(), |row| format!(" {}", row.say));
    let mut limits = vec![format!(
        "Computed, nothing fitted. How far off that usually is, by the validation report: wavenumbers of resonance lines 0.7 % (worst 10 %) in alkali-like ions and 2 % (worst 14 %) in alkaline-earth-like ones, with core polarisation and in the latter with np², np nd and ns (n+1)p mixed in; without these up to 18 %; fine-structure intervals 5 %, nine of ten within 13 %.{terms} Pin measured energies for wavelengths to be compared with a spectrometer."
    )];
    if case.correlation && case.mixing && pairs_of_one_subshell(case) {
        limits.push(
            "Two of these configurations differ by two electrons of one subshell and mix, and correlation within subshells is added: what both describe counts twice. Without mixing or without correlation it counts once."
                .to_owned(),
        );
    }
    limits
}

/// What correlation within subshells does for the terms of this case; nothing where no subshell has
/// several, and where nothing is computed.
pub fn correlation(case: &Case) -> Option<CorrelationRow> {
    let many = |orbital: &Orbital| {
        (0..case.configurations.len()).any(|place| {
            let electrons = case.electrons(place, *orbital);
            Subshell::new(*orbital, electrons).is_some_and(Correlation::matters)
        })
    };
    let subshells: Vec<CorrelatedRow> = case
        .orbitals()
        .into_iter()
        .filter(many)
        .filter_map(|orbital| {
            let usual = UsualDeviation::of(orbital)?;
            Some(CorrelatedRow {
                orbital: orbital.to_string(),
                without: usual.without,
                with: usual.with,
            })
        })
        .collect();
    if subshells.is_empty() || !case.computed {
        return None;
    }
    let parts: Vec<String> = subshells
        .iter()
        .map(|row| {
            let (least, most) = row.without;
            let (orbital, with) = (&row.orbital, row.with);
            match case.correlation {
                true => {
                    format!("{orbital} within {with} % (without it {least} to {most} % too large)")
                }
                false => {
                    format!("{orbital} {least} to {most} % too large (with it within {with} %)")
                }
            }
        })
        .collect();
    let parts = parts.join(", ");
    let on = case.correlation;
    let say = match on {
        true => format!(
            "Correlation within subshells is in these energies in second order: distances between terms of {parts}, by the validation report."
        ),
        false => format!(
            "Correlation within subshells is left out: distances between terms of {parts}, by the validation report."
        ),
    };
    Some(CorrelationRow {
        on,
        subshells,
        say,
        way: (!on).then(|| Way {
            label: "Put in correlation within subshells".to_owned(),
            path: "/structure/correlation".to_owned(),
            value: Json::Bool(true),
        }),
    })
}

/// Whether two configurations of one parity differ by two electrons that leave one subshell.
fn pairs_of_one_subshell(case: &Case) -> bool {
    let electrons = |place: usize, orbital| i64::from(case.electrons(place, orbital));
    let places = 0..case.configurations.len();
    places.clone().any(|one| {
        places.clone().skip(one + 1).any(|other| {
            let orbitals = case.orbitals();
            let differences = || {
                orbitals
                    .iter()
                    .map(|o| electrons(one, *o) - electrons(other, *o))
            };
            case.is_odd(one) == case.is_odd(other)
                && differences().map(i64::abs).sum::<i64>() == 4
                && differences().any(|difference| difference.abs() == 2)
        })
    })
}

/// The smallest fault of overlapping functions that is told, cm⁻¹.
const LEAST_TOO_LOW: f64 = 100.0;

/// What overlapping functions of two mixing configurations do to the upper one.
pub fn too_low(document: &Document, solved: &Solved) -> Option<String> {
    let EnergyCase::Model { entries, .. } = solved.case() else {
        return None;
    };
    let cross = solved.spectrum.as_ref()?.largest_cross.as_ref()?;
    if cross.too_low < LEAST_TOO_LOW {
        return None;
    }
    let label = |place: usize| Some(&document.entries.get(*entries.get(place)?)?.label);
    let (one, other) = (
        label(cross.configurations.0)?,
        label(cross.configurations.1)?,
    );
    Some(format!(
        "Levels of {other} that have the S and L of one of {one} can lie up to {:.0} cm⁻¹ too low, because their functions overlap: ⟨{}|{}′⟩ = {:.2}.",
        cross.too_low, cross.cross.a, cross.cross.c, cross.cross.overlap
    ))
}

/// Blocks too large to be diagonalised whole, of which the lowest levels were sought.
pub fn incomplete(solved: &Solved) -> Option<String> {
    let spectrum = solved.spectrum.as_ref()?;
    let mut blocks = Vec::new();
    for of_parity in &spectrum.parities {
        let of = &of_parity.levels;
        for rows in of.rows.iter().filter(|rows| !of.is_complete(rows.two_j)) {
            let found = of.levels.iter().filter(|l| l.two_j == rows.two_j).count();
            blocks.push(format!(
                "{found} of {} with J = {}, {}",
                rows.states.len(),
                TwiceJ::from_doubled(rows.two_j),
                parity(of_parity.odd)
            ));
        }
    }
    (!blocks.is_empty()).then(|| {
        format!(
            "Only the lowest levels were sought where there are very many: {}. What lies above is missing, also among the lines.",
            blocks.join("; ")
        )
    })
}
