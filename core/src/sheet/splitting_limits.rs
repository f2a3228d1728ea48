//! What the answer on splitting by diagonalisation leaves out, and how large that is.

use crate::radial::hartree_fock::Solution;
use crate::radiation::Multipole;

use super::energy_case::EnergyCase;
use super::nucleus::Nuclear;
use super::rich::Kind;
use super::splitting_estimated::{self, is_estimated};
use super::splitting_pattern::bright;
use super::splitting_rows::{DiamagneticRow, LineOf};
use super::splitting_searched::MOST_COMPONENTS;
use super::splitting_words::Told;

/// What was left out, and how large it is likely to be.
pub fn limits(told: &Told) -> Vec<String> {
    let (document, ready) = (told.document, told.ready);
    let mut limits = Vec::new();
    if let Some(reason) = &ready.no_components {
        limits.push(reason.clone());
    }
    match told.diamagnetic {
        Some(diamagnetic) if diamagnetic.included => {}
        Some(DiamagneticRow {
            largest: Some(largest),
            ..
        }) if *largest > 0.0 => limits.push(format!(
            "The diamagnetic term is left out. In first order it raises the mean of a level's states by up to {largest:.3e} cm⁻¹ here and no state by more than {:.3e} cm⁻¹; states of different M differ.{}",
            1.5 * largest,
            match ready.diamagnetic {
                Ok(()) => " The sheet's \"diamagnetic\" counts it.",
                Err(_) => "",
            }
        )),
        Some(DiamagneticRow { largest: None, .. }) if told.tesla() > 0.0 => limits.push(
            "The diamagnetic term is left out, and its size is not known without radial functions.".to_owned(),
        ),
        _ => {}
    }
    if document.level_alone.is_some() {
        limits.push(
            "The level is alone: nothing mixes other levels into it, which bends its states where μB·B comes near the distance to a neighbour.".to_owned(),
        );
        if !document.entries.is_empty() {
            limits.push(
                "The level entered alone is split; the configurations of the sheet are not."
                    .to_owned(),
            );
        }
    } else {
        limits.push(match ready.solved.as_ref().map(|s| s.case()) {
            Some(EnergyCase::Model { case, .. }) if case.computed => {
                "The field mixes the levels of these configurations and no others. Distances between levels are those of the answer on levels: where they are computed and not measured, crossings move with them."
            }
            _ => "The field mixes the levels of these configurations and no others.",
        }.to_owned());
    }
    if told.has_spin() {
        limits.push("A and B act inside each level; what the nucleus mixes between levels is left out, about A²/ΔE (a part in 10⁴ of A or less where the fine structure is large beside it).".to_owned());
    } else if told.tesla() > 0.0 {
        limits.push("The nucleus is left out: hyperfine structure comparable with the shifts changes the pattern. A spin and constants A, B of levels bring it in.".to_owned());
    }
    if ready.sets.iter().any(|set| set.reduced) {
        limits.push("With this nucleus the whole set would have too many states: the field mixes only the levels of the line's terms.".to_owned());
    }
    if bright(told.components).len() < told.components.len() {
        limits.push("Components below 1 % of the strongest that is seen are listed, but neither the largest offset nor the groups in the sentence count them.".to_owned());
    }
    limits.extend(of_nuclei(told));
    limits.extend(splitting_estimated::limits(document, told.estimate));
    limits.extend(told.searched.missing.clone());
    if let Some(fields) = &told.searched.fields {
        let below = fields.rising.map_or(String::new(), |(start, ratio)| {
            let percent = 100.0 * (ratio - 1.0);
            format!(" and, from {start:.1e} T, {percent:.0} % of the field")
        });
        let end = fields.tesla.last().copied().unwrap_or(0.0);
        limits.push(format!("Crossings and clock points are looked for in steps of at most {:.2e} T{below}, up to {end} T: two of one pair within a step may be missed.", fields.step));
    }
    let each = told.components.len() / ready.passes.len().max(1);
    if !told.searched.component_crossings.is_empty() && each > MOST_COMPONENTS {
        limits.push(format!(
            "Crossings of components are looked for among the {MOST_COMPONENTS} strongest."
        ));
    }
    if ready.joins.iter().any(|join| join.unit_integrals) {
        limits.push("No radial integral of the radiation is given; each is taken as 1, which relative strengths between two subshells do not depend on.".to_owned());
    }
    if ready.turned {
        limits.push("The sheet has the ends of the line the other way round: the higher one is taken as the upper.".to_owned());
    }
    if told.line.is_none() && !told.components.is_empty() {
        limits.push("Without a line the strengths of all components together are 1, and offsets count from each line's own centre.".to_owned());
    }
    if let Some(LineOf {
        wavelength_nm: Some(nm),
        wavelength_kind: Some(Kind::Computed),
        ..
    }) = told.line
    {
        limits.push(format!("Nobody entered the wavelength; it is computed, {nm:.1} nm in vacuum, and the offsets in pm are as far off as twice its error."));
    }
    if let Some(LineOf {
        wavelength_kind: Some(Kind::Entered),
        ..
    }) = told.line
    {
        limits.push("The wavelength is taken as that in vacuum; typed in air instead, the offsets in pm would be 0.06 % too small.".to_owned());
    }
    if let (Some(field), Some(line)) = (&document.field, told.line)
        && field.angle_degrees == 0.0
        && line.multipole != Multipole::E2
        && !told.components.is_empty()
    {
        limits.push("Along the field the π components send no light: only σ is seen.".to_owned());
    }
    limits.extend(document.unused());
    limits
}

/// g_I if it is the table's.
fn bare_g(nuclear: &Nuclear) -> Option<f64> {
    nuclear
        .g
        .filter(|_| nuclear.isotope.and_then(|i| i.g) == nuclear.g)
}

fn of_nuclei(told: &Told) -> Vec<String> {
    let document = told.document;
    let mut limits = Vec::new();
    for nuclear in &document.nuclei {
        let name = nuclear.name.as_deref().unwrap_or("the nucleus");
        if nuclear.spin.is_none() {
            limits.push(format!(
                "The table has no spin for {name}: it is taken as 0."
            ));
        } else if nuclear.two_i() > 0 && nuclear.g.is_none() {
            limits.push(format!("g_I of {name} is not known: its own moment in the field is left out, about a thousandth of the electrons'."));
        }
        let table = document.isotope().and_then(|isotope| isotope.spin);
        if let (true, Some(entered), Some(known)) = (nuclear.typed, nuclear.spin, table)
            && entered != known
            && document.species.is_some_and(|s| s.mass_number.is_some())
        {
            limits.push(format!("The entered spin {entered} counts; the isotope that the sheet names has {known} in the table."));
        }
        if let (true, Some(g)) = (told.tesla() > 0.0 && nuclear.two_i() > 0, bare_g(nuclear)) {
            let run = told.ready.solved.as_ref();
            let run = run.and_then(|solved| solved.spectrum.as_ref()?.run(0));
            limits.push(match run.map(Solution::shielding) {
                Some(part) => format!("g_I of {name} is that of the bare nucleus: left out is that the atom's electrons shield it by about {:.2} % (computed, from ⟨1/r⟩). The value {:.5} entered as g_I holds it.", 100.0 * part, g * (1.0 - part)),
                None => format!("g_I of {name} is that of the bare nucleus: left out is that the atom's electrons shield it, by 0.01 % in lithium and 0.6 % in caesium."),
            });
        }
        let entered = !nuclear.dipole.is_empty() || !nuclear.quadrupole.is_empty();
        if nuclear.two_i() > 0 && !entered && !is_estimated(told.ready, nuclear) {
            limits.push(format!(
                "No constant A or B of {name} is entered: its levels do not split by it."
            ));
        }
        let scaled = |constants: &[super::nucleus::Constant]| constants.iter().any(|c| c.scaled);
        if scaled(&nuclear.dipole) || scaled(&nuclear.quadrupole) {
            limits.push(format!("Constants of {name} that were not entered are scaled from another isotope's: A with g_I, B with the quadrupole moment; the hyperfine anomaly, below 1 %, is left out."));
        }
    }
    if document.isotopes_listed {
        let shares = document.nuclei.iter().filter_map(|n| n.share);
        let whole: f64 = shares.map(|(share, _)| share).sum();
        if (whole - 100.0).abs() > 0.01 {
            limits.push(format!(
                "The shares add up to {whole} %; they are taken in their ratio."
            ));
        }
        limits.push("Offsets count from the line of an isotope without shift.".to_owned());
    }
    if let Some(level) = &document.level_alone
        && level.two_i() > 0
        && level.g_i.is_none()
    {
        limits.push("g_I is not entered: the moment of the nucleus in the field is left out unless the sheet names an isotope.".to_owned());
    }
    limits
}
