//! Fine structure and lowest excited terms of single configurations, nothing fitted.
//!
//! Observed levels: Moore, *Atomic Energy Levels*, NBS Circular 467 (1949–1958), from memory.

use rungline_core::radial::nucleus::stable_mass_number;
use rungline_core::structure::model::Spectrum;
use rungline_tests::model::{case, spectrum};
use rungline_tests::{Row, report, vector_rows};
use std::collections::BTreeMap;

const SOURCE: &str = "Moore, Atomic Energy Levels, NBS Circ. 467 (1949–1958), from memory";

/// 2S and L of `3P`.
fn term(text: &str) -> (i32, i32) {
    let (multiplicity, letter) = text.split_at(1);
    let l = "SPDFGHIK".find(letter).expect("a letter") as i32;
    (multiplicity.parse::<i32>().expect("2S+1") - 1, l)
}

fn two_j(text: &str) -> i32 {
    match text.strip_suffix("/2") {
        Some(doubled) => doubled.parse().expect("2J"),
        None => 2 * text.parse::<i32>().expect("J"),
    }
}

/// The lowest level that is named after this term, with this J.
fn energy(spectrum: &Spectrum, term: (i32, i32), two_j: i32) -> f64 {
    let found = spectrum.levels.iter().find_map(|&place| {
        let (_, level) = spectrum.level(place)?;
        let total = spectrum.state_of(place)?.total();
        (level.two_j == two_j && (total.two_s, total.l) == term).then_some(level.energy)
    });
    found.expect("a level of this name")
}

/// One observed level with the computed one.
struct Pair {
    term: (i32, i32),
    two_j: i32,
    observed: f64,
    computed: f64,
}

/// By ion, in the order of the table.
fn ions(correlation: bool) -> Vec<(String, Vec<Pair>)> {
    let mut ions: Vec<(String, Vec<Pair>)> = Vec::new();
    let mut spectra: BTreeMap<String, Spectrum> = BTreeMap::new();
    for row in vector_rows("fine_structure.csv") {
        let name = format!(
            "{} {} {}",
            row["symbol"], row["charge"], row["configuration"]
        );
        let z: u8 = row["Z"].parse().expect("Z");
        let core: u8 = row["core"].parse().expect("Z of the core");
        let found = spectra.entry(name.clone()).or_insert_with(|| {
            let mut case = case(z, stable_mass_number(z), core, &[&row["configuration"]]);
            case.correlation = correlation;
            spectrum(&case)
        });
        let (term, two_j) = (term(&row["term"]), two_j(&row["J"]));
        let pair = Pair {
            term,
            two_j,
            observed: row["energy"].parse().expect("an energy"),
            computed: energy(found, term, two_j),
        };
        match ions.last_mut() {
            Some((last, pairs)) if *last == name => pairs.push(pair),
            _ => ions.push((name, vec![pair])),
        }
    }
    ions
}

/// The value below which this share of the values lies.
fn quantile(values: &[f64], share: f64) -> f64 {
    let mut sorted = values.to_vec();
    sorted.sort_by(f64::total_cmp);
    let place = (share * sorted.len() as f64).ceil() as usize;
    sorted[place.clamp(1, sorted.len()) - 1]
}

fn row(quantity: String, deviations: &[f64], worst: f64, tolerance: f64) -> Row {
    Row {
        quantity,
        cases: deviations.len(),
        worst,
        tolerance,
        measure: "relative".into(),
        source: SOURCE.into(),
    }
}

/// The intervals, and how far half and nine tenths of them deviate.
fn intervals(correlation: bool, name: &str, what: &str) {
    let mut deviations = Vec::new();
    for (ion, pairs) in ions(correlation) {
        for pair in pairs.windows(2) {
            let [a, b] = pair else { continue };
            if a.term != b.term || a.term != pairs[0].term {
                continue;
            }
            let (observed, computed) = (b.observed - a.observed, b.computed - a.computed);
            let deviation = computed / observed - 1.0;
            println!(
                "{ion} 2J = {} to {}: {computed:.1}, observed {observed:.1}, {:+.1} %",
                a.two_j,
                b.two_j,
                100.0 * deviation
            );
            deviations.push(deviation.abs());
        }
    }
    let worst = quantile(&deviations, 1.0);
    for (part, share, tolerance) in [("median", 0.5, 0.10), ("90 % of them", 0.9, 0.25)] {
        let quantity = format!(
            "fine-structure intervals of ground terms, Z ≤ 54, nothing fitted, {what}: {part} (worst {worst:.2})"
        );
        let reached = quantile(&deviations, share);
        report(
            &format!("{name}_{}", (100.0 * share) as u8),
            row(quantity, &deviations, reached, tolerance),
        );
    }
}

#[test]
fn intervals_of_ground_terms() {
    intervals(false, "structure_model_intervals", "average functions");
}

#[test]
fn intervals_of_ground_terms_with_correlation() {
    intervals(
        true,
        "structure_model_intervals_correlation",
        "correlation in second order",
    );
}

/// Relative deviations of the first excited terms, with the names of the ions.
fn excited_terms(correlation: bool) -> Vec<(String, f64)> {
    let mut deviations = Vec::new();
    for (name, pairs) in ions(correlation) {
        // Centres of gravity of the levels that are listed.
        let centre = |excited: bool, value: fn(&Pair) -> f64| {
            let of_term = (pairs.iter()).filter(|pair| (pair.term != pairs[0].term) == excited);
            let (mut sum, mut weight) = (0.0, 0.0);
            for pair in of_term {
                sum += f64::from(pair.two_j + 1) * value(pair);
                weight += f64::from(pair.two_j + 1);
            }
            sum / weight
        };
        if pairs.iter().all(|pair| pair.term == pairs[0].term) {
            continue;
        }
        let observed = centre(true, |pair| pair.observed) - centre(false, |pair| pair.observed);
        let computed = centre(true, |pair| pair.computed) - centre(false, |pair| pair.computed);
        let deviation = computed / observed - 1.0;
        println!(
            "{name}: first excited term {computed:.0}, observed {observed:.0}, {:+.1} %",
            100.0 * deviation
        );
        deviations.push((name, deviation));
    }
    deviations
}

#[test]
fn first_excited_terms() {
    let deviations: Vec<f64> = (excited_terms(true).iter()).map(|d| d.1.abs()).collect();
    let quantity = format!(
        "first excited terms of p², p³, p⁴, d², d³, d⁸, correlation in second order, nothing fitted (median {:.3})",
        quantile(&deviations, 0.5)
    );
    let worst = quantile(&deviations, 1.0);
    report(
        "structure_model_terms",
        row(quantity, &deviations, worst, 0.15),
    );
}

#[test]
fn first_excited_terms_without_correlation() {
    // Average functions of one configuration leave out that electrons avoid each other, which is least
    // for 2p.
    let deviations = excited_terms(false);
    assert!(deviations.iter().all(|d| d.1 > 0.0));
    for (name, shells, second, tolerance) in [
        ("structure_model_terms_bare_2p", "2p², 2p³, 2p⁴", true, 0.25),
        (
            "structure_model_terms_bare",
            "3p, 4p, 5p and 3d",
            false,
            0.5,
        ),
    ] {
        let of_shells: Vec<f64> = (deviations.iter())
            .filter(|d| d.0.contains("2p") == second)
            .map(|d| d.1)
            .collect();
        let quantity = format!(
            "first excited terms of one configuration, {shells}, without correlation: always too high"
        );
        let worst = quantile(&of_shells, 1.0);
        report(name, row(quantity, &of_shells, worst, tolerance));
    }
}
