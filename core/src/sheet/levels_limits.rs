//! What the answers on levels and lines leave out, and how far off that puts them.

use crate::configuration::Subshell;
use crate::quantity::TwiceJ;
use crate::structure::model::{Case, Scale, Uncorrelated, UsualDeviation};

use super::document::Document;
use super::energy_case::{EnergyCase, given_value};
use super::given::Given;
use super::json::Json;
use super::lack::Way;
use super::levels::parity;
use super::levels_between::between_configurations;
use super::levels_rows::{CorrelatedRow, CorrelationRow, LeftOutRow};
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
        EnergyCase::Model { case, entries } => {
            if case.computed {
                limits.extend(computed(document, case, entries));
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
    if told.levels.iter().any(|level| level.lifetime.is_some()) {
        limits.push("Lifetimes count E1, M1 and E2 to the levels here. M2, two photons and the nucleus are left out: they decide for levels that no strong line leaves, such as 3P2 and 3P0 of an s and a p electron.".to_owned());
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
        (
            structure.correlation == Some(true),
            "correlation within subshells",
        ),
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
pub fn computed(document: &Document, case: &Case, entries: &[usize]) -> Vec<String> {
    let how = match case.given.is_empty() {
        true => "Computed, nothing fitted.",
        false => "Computed, but for the given parameters, which count as given.",
    };
    let mut limits = vec![format!(
        "{how} How far off computed energies usually are, by the validation report: wavenumbers of resonance lines 0.7 % (worst 10 %) in alkali-like ions and 2 % (worst 14 %) in alkaline-earth-like ones, with core polarisation and in the latter with np², np nd and ns (n+1)p mixed in; without these up to 18 %; fine-structure intervals of ground terms 5 %, nine of ten within 13 %, but of the outer p electron of an excited alkali up to 44 % too small. Pin measured energies for wavelengths to be compared with a spectrometer."
    )];
    let light = case.nucleus.is_some_and(|(z, _)| z <= LIGHT);
    let pairs = |all: &Vec<Subshell>| all.iter().filter(|s| s.is_open()).count() > 1;
    if light && case.configurations.iter().any(pairs) {
        limits.push("Left out is what the spin of one electron does to the orbit and the spin of another, beyond its share in ζ: in light atoms it can turn the levels of a triplet round (1s 2p 3P of helium is inverted).".to_owned());
    }
    limits.extend(between_configurations(case));
    limits.extend(correlation(document, case, entries).map(|row| row.say));
    limits
}

/// What correlation within subshells does for the terms of this case; nothing where no subshell has
/// several, and where nothing is computed.
pub fn correlation(document: &Document, case: &Case, entries: &[usize]) -> Option<CorrelationRow> {
    let label = |place: usize| {
        let entry = entries.get(place).and_then(|e| document.entries.get(*e));
        entry.map(|e| e.label.clone()).unwrap_or_default()
    };
    let (mut subshells, mut left_out) = (Vec::new(), Vec::new());
    let (mut parts, mut reasons): (Vec<String>, Vec<String>) = (Vec::new(), Vec::new());
    let (mut refused, mut twice) = (false, false);
    for orbital in case.orbitals() {
        let Some(usual) = UsualDeviation::of(orbital) else {
            continue;
        };
        let name = orbital.to_string();
        let mut configurations = Vec::new();
        let before = left_out.len();
        for place in 0..case.configurations.len() {
            let why = match case.correlates(place, orbital) {
                None => continue,
                Some(Ok(())) => {
                    twice |= case.mixed_pair(place, orbital).is_some();
                    configurations.push(label(place));
                    continue;
                }
                Some(Err(why)) => why,
            };
            refused |= why == Uncorrelated::Refused;
            let because = match why {
                Uncorrelated::Refused => "as the sheet asks".to_owned(),
                Uncorrelated::Scaled => {
                    "the scale of F stands for the same, and would count twice".to_owned()
                }
                Uncorrelated::Given => "F of its own are given".to_owned(),
                Uncorrelated::Mixed(other) => format!(
                    "{} mixes with it and differs by two electrons of {name}: part of the same correlation",
                    label(other)
                ),
            };
            let configuration = label(place);
            reasons.push(format!("{name} of {configuration} ({because})"));
            left_out.push(LeftOutRow {
                orbital: name.clone(),
                configuration,
                because,
            });
        }
        if configurations.is_empty() && left_out.len() == before {
            continue;
        }
        let (least, most) = usual.without;
        parts.push(match usual.higher {
            Some((bare, correlated)) => format!(
                "the first excited term of {name} is within {} %, higher ones within {correlated} % (without it {least} to {most} % too far up, higher ones up to {bare} % off)",
                usual.with
            ),
            None => format!(
                "levels of {name} are, by Pr IV 4f2 alone, within {} % (without it {least} to {most} % too far up)",
                usual.with
            ),
        });
        subshells.push(CorrelatedRow {
            orbital: name,
            without: usual.without,
            with: usual.with,
            higher: usual.higher,
            configurations,
        });
    }
    if subshells.is_empty() {
        return None;
    }
    let named: Vec<String> = (subshells.iter())
        .filter(|row| !row.configurations.is_empty())
        .map(|row| format!("{} of {}", row.orbital, row.configurations.join(", ")))
        .collect();
    let on = !named.is_empty();
    let mut say = String::new();
    if on {
        say.push_str(&format!(
            "Correlation within subshells is in these energies in second order: {}. ",
            named.join("; ")
        ));
    }
    if !reasons.is_empty() {
        say.push_str(&format!(
            "Correlation within subshells is left out: {}. ",
            reasons.join("; ")
        ));
    }
    say.push_str(&format!(
        "Above the ground term, by the validation report, with it {}.",
        parts.join("; ")
    ));
    if twice {
        say.push_str(" Two of these configurations differ by two electrons of one subshell and mix: what correlation and mixing both describe counts twice.");
    }
    Some(CorrelationRow {
        on,
        subshells,
        left_out,
        say,
        way: refused.then(|| Way {
            label: "Put in correlation within subshells".to_owned(),
            path: "/structure/correlation".to_owned(),
            value: Json::Null,
        }),
    })
}

/// Up to this nuclear charge interactions between spins and orbits of different electrons are told as left out:
/// beyond, ζ is the larger part (common practice, no source).
const LIGHT: u8 = 10;

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
