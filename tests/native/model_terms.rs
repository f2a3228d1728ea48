//! Fine structure and lowest excited terms of single configurations, nothing fitted.
//!
//! Observed levels: Moore, *Atomic Energy Levels*, NBS Circular 467 (1949–1958), from memory.

use rungline_core::radial::nucleus::stable_mass_number;
use rungline_core::structure::model::{Spectrum, UsualDeviation};
use rungline_tests::model::{case, orbital, spectrum};
use rungline_tests::{Listing, Row, list, median_and_largest, report, vector_rows};
use std::collections::BTreeMap;
use std::sync::LazyLock;

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

/// An ion with its levels, in the order of the table.
type Ion = (String, Vec<Pair>);

static BARE: LazyLock<Vec<Ion>> = LazyLock::new(|| compute(false));
static CORRELATED: LazyLock<Vec<Ion>> = LazyLock::new(|| compute(true));

fn ions(correlation: bool) -> &'static [Ion] {
    if correlation { &CORRELATED } else { &BARE }
}

fn compute(correlation: bool) -> Vec<Ion> {
    let mut ions: Vec<Ion> = Vec::new();
    let mut spectra: BTreeMap<String, Spectrum> = BTreeMap::new();
    for row in vector_rows("fine_structure.csv") {
        let charge: usize = row["charge"].parse().expect("a charge");
        let stage = ["I", "II", "III", "IV", "V", "VI"][charge];
        let name = format!("{} {stage} {}", row["symbol"], row["configuration"]);
        let z: u8 = row["Z"].parse().expect("Z");
        let core: u8 = row["core"].parse().expect("Z of the core");
        let found = spectra.entry(name.clone()).or_insert_with(|| {
            let mut case = case(z, stable_mass_number(z), core, &[&row["configuration"]]);
            // With it is what happens by default.
            case.correlation = (!correlation).then_some(false);
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

/// A difference of two levels, or of two terms, of one ion.
struct Difference {
    ion: String,
    what: String,
    observed: f64,
    computed: f64,
}

impl Difference {
    fn deviation(&self) -> f64 {
        self.computed / self.observed - 1.0
    }
}

fn half(two_j: i32) -> String {
    match two_j % 2 {
        0 => (two_j / 2).to_string(),
        _ => format!("{two_j}/2"),
    }
}

fn named((two_s, l): (i32, i32)) -> String {
    let letter = "SPDFGHIK".chars().nth(usize::try_from(l).expect("L"));
    format!("{}{}", two_s + 1, letter.expect("a letter"))
}

/// The intervals of ground terms.
fn intervals(correlation: bool) -> Vec<Difference> {
    let mut found = Vec::new();
    for (ion, pairs) in ions(correlation) {
        for pair in pairs.windows(2) {
            let [a, b] = pair else { continue };
            if a.term != b.term || a.term != pairs[0].term {
                continue;
            }
            found.push(Difference {
                ion: ion.clone(),
                what: format!("{} {} – {}", named(a.term), half(a.two_j), half(b.two_j)),
                observed: b.observed - a.observed,
                computed: b.computed - a.computed,
            });
        }
    }
    found
}

/// How far half and nine tenths of the intervals deviate.
fn check_intervals(correlation: bool, name: &str, what: &str) {
    let deviations: Vec<f64> = (intervals(correlation).iter())
        .map(|interval| interval.deviation().abs())
        .collect();
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

/// A row for each difference: published, then computed both ways with their deviations.
fn listed(
    title: &str,
    note: &str,
    unit: &str,
    both: [Vec<Difference>; 2],
    digits: usize,
) -> Listing {
    let columns = [
        "ion",
        "between",
        &format!("published, {unit}"),
        &format!("computed, {unit}"),
        "deviation",
        &format!("with correlation, {unit}"),
        "deviation",
        "source",
    ];
    let mut listing = Listing::new(title, note, &columns);
    let [bare, correlated] = both;
    assert_eq!(bare.len(), correlated.len());
    for (one, two) in bare.iter().zip(&correlated) {
        assert_eq!((&one.ion, &one.what), (&two.ion, &two.what));
        listing.rows.push(vec![
            one.ion.clone(),
            one.what.clone(),
            format!("{}", (one.observed * 1000.0).round() / 1000.0),
            format!("{:.digits$}", one.computed),
            format!("{:+.1} %", 100.0 * one.deviation()),
            format!("{:.digits$}", two.computed),
            format!("{:+.1} %", 100.0 * two.deviation()),
            "Moore, from memory".into(),
        ]);
    }
    listing
}

#[test]
fn every_interval_is_listed() {
    let note = format!(
        "One configuration each, nothing fitted, first with average functions alone, then by default, with correlation. Furthest off: carbon-like ions above ³P₁ (spin–spin and spin–other-orbit interactions between open-shell electrons, which are left out, are not small beside ζ there); one p electron beside s² (no core polarisation here); and Te I, where ³P₀ and ³P₁ lie close together because two large numbers cancel. Source: {SOURCE}."
    );
    let both = [intervals(false), intervals(true)];
    let listing = listed(
        "Fine-structure intervals of ground terms one by one",
        &note,
        "cm⁻¹",
        both,
        2,
    );
    list("structure_model_2_intervals", &listing);
}

#[test]
fn every_first_excited_term_is_listed() {
    let note = format!(
        "Distance of the centre of the first excited term from that of the ground term, of the levels that are listed in the source; one configuration each, nothing fitted, first with average functions alone, then by default, with correlation. Source: {SOURCE}."
    );
    let both = [excited_terms(false, true), excited_terms(true, true)];
    let listing = listed(
        "First excited terms of p², p³, p⁴, d², d³, d⁸ one by one",
        &note,
        "cm⁻¹",
        both,
        0,
    );
    list("structure_model_3_terms", &listing);
}

#[test]
fn every_higher_term_is_listed() {
    let note = format!(
        "The same for the terms of one configuration above the first excited one. Source: {SOURCE}."
    );
    let both = [excited_terms(false, false), excited_terms(true, false)];
    let listing = listed(
        "Higher terms of p², p³, p⁴, d², d³, d⁸ one by one",
        &note,
        "cm⁻¹",
        both,
        0,
    );
    list("structure_model_4_higher", &listing);
}

#[test]
fn intervals_of_ground_terms() {
    check_intervals(false, "structure_model_intervals", "average functions");
}

#[test]
fn intervals_of_ground_terms_with_correlation() {
    check_intervals(
        true,
        "structure_model_intervals_correlation",
        "correlation in second order",
    );
}

/// Terms above the ground terms: the first excited ones or the higher ones, by their centres of the levels
/// that are listed.
fn excited_terms(correlation: bool, first: bool) -> Vec<Difference> {
    let mut found = Vec::new();
    for (ion, pairs) in ions(correlation) {
        let centre = |term: (i32, i32), value: fn(&Pair) -> f64| {
            let (mut sum, mut weight) = (0.0, 0.0);
            for pair in pairs.iter().filter(|pair| pair.term == term) {
                sum += f64::from(pair.two_j + 1) * value(pair);
                weight += f64::from(pair.two_j + 1);
            }
            sum / weight
        };
        // In the order of the table.
        let mut terms: Vec<(i32, i32)> = Vec::new();
        for pair in pairs {
            if !terms.contains(&pair.term) {
                terms.push(pair.term);
            }
        }
        let ground = terms.remove(0);
        let of: &[(i32, i32)] = match (terms.split_first(), first) {
            (None, _) => &[],
            (Some((first, _)), true) => std::slice::from_ref(first),
            (Some((_, higher)), false) => higher,
        };
        for &term in of {
            found.push(Difference {
                ion: ion.clone(),
                what: format!("{} – {}", named(ground), named(term)),
                observed: centre(term, |pair| pair.observed) - centre(ground, |pair| pair.observed),
                computed: centre(term, |pair| pair.computed) - centre(ground, |pair| pair.computed),
            });
        }
    }
    found
}

#[test]
fn first_excited_terms() {
    let deviations: Vec<f64> = (excited_terms(true, true).iter())
        .map(|term| term.deviation().abs())
        .collect();
    let (median, worst) = median_and_largest(&deviations);
    let quantity = format!(
        "first excited terms of p², p³, p⁴, d², d³, d⁸, as computed by default, nothing fitted, scales 1 (median {median:.3})"
    );
    for kind in ["p2", "p3", "p4", "d2", "d3", "d8"] {
        let mut ions = excited_terms(true, true).into_iter();
        assert!(ions.any(|term| term.ion.contains(kind)), "{kind}");
    }
    report(
        "structure_model_terms",
        row(quantity, &deviations, worst, 0.15),
    );
}

#[test]
fn first_excited_terms_without_correlation() {
    // Average functions of one configuration leave out that electrons avoid each other, which is least
    // for 2p.
    let deviations = excited_terms(false, true);
    assert!(deviations.iter().all(|term| term.deviation() > 0.0));
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
            .filter(|term| term.ion.contains("2p") == second)
            .map(Difference::deviation)
            .collect();
        let quantity = format!(
            "first excited terms of one configuration, {shells}, without correlation: always too high"
        );
        let worst = quantile(&of_shells, 1.0);
        report(name, row(quantity, &of_shells, worst, tolerance));
    }
}

#[test]
fn higher_terms() {
    for (correlation, what, tolerance) in [
        (false, "without correlation", 0.6),
        (true, "correlation in second order", 0.35),
    ] {
        let deviations: Vec<f64> = (excited_terms(correlation, false).iter())
            .map(|term| term.deviation().abs())
            .collect();
        let (median, worst) = median_and_largest(&deviations);
        let quantity = format!(
            "higher terms of p², p³, p⁴, d², d³, d⁸, {what}, nothing fitted (median {median:.3})"
        );
        report(
            &format!("structure_model_terms_higher_{}", u8::from(correlation)),
            row(quantity, &deviations, worst, tolerance),
        );
    }
}

/// Intervals of the np that is outside full shells in excited alkalis, cm⁻¹, from memory.
const OUTER: [(u8, u16, u8, &str, f64); 4] = [
    (11, 23, 10, "3p", 17.196),
    (19, 39, 18, "4p", 57.71),
    (37, 85, 36, "5p", 237.6),
    (55, 133, 54, "6p", 554.04),
];

#[test]
fn intervals_of_outer_electrons_are_too_small() {
    let deviations: Vec<f64> = (OUTER.iter())
        .map(|&(z, mass_number, core, text, observed)| {
            let found = spectrum(&case(z, mass_number, core, &[text]));
            (energy(&found, (1, 1), 3) - energy(&found, (1, 1), 1)) / observed - 1.0
        })
        .collect();
    assert!(deviations.iter().all(|deviation| *deviation < 0.0));
    // What the answers say.
    let worst = deviations.iter().fold(0.0_f64, |most, d| most.max(d.abs()));
    let said = rungline_core::sheet::answer_text(
        r#"{"rungline":1,"species":"Na","configurations":["3p"]}"#,
        Some(rungline_core::sheet::Question::Levels),
    );
    let words = format!(
        "of an excited alkali up to {} % too small",
        (100.0 * worst).ceil()
    );
    assert!(said.expect("an answer").contains(&words), "{words}");
    report(
        "structure_model_intervals_outer",
        row(
            "fine-structure intervals of the outer p electron of Na, K, Rb, Cs: always too small"
                .into(),
            &deviations,
            worst,
            0.5,
        ),
    );
}

#[test]
fn what_the_answers_say_of_correlation_is_what_is_found() {
    let subshells = [
        ("2p", &["2p"][..]),
        ("3p", &["3p", "4p", "5p"]),
        ("3d", &["3d"]),
    ];
    for (name, members) in subshells {
        let usual = UsualDeviation::of(orbital(name)).expect("what is usual");
        let percent = |correlation: bool, first: bool| -> Vec<f64> {
            (excited_terms(correlation, first).iter())
                // The subshell that is open comes last, but for s² beside d.
                .filter(|term| {
                    let words = term.ion.split(' ').skip(2);
                    let open = words.filter(|word| !word.contains("d10") && !word.contains('s'));
                    open.last()
                        .is_some_and(|word| members.contains(&&word[..2]))
                })
                .map(|term| 100.0 * term.deviation())
                .collect()
        };
        let largest = |of: Vec<f64>| of.iter().fold(0.0_f64, |most, d| most.max(d.abs()));
        let least = percent(false, true)
            .into_iter()
            .fold(f64::INFINITY, f64::min);
        let found = (
            (
                least.floor() as u8,
                largest(percent(false, true)).ceil() as u8,
            ),
            largest(percent(true, true)).ceil() as u8,
            Some((
                largest(percent(false, false)).ceil() as u8,
                largest(percent(true, false)).ceil() as u8,
            )),
        );
        assert_eq!(found, (usual.without, usual.with, usual.higher), "{name}");
    }
}
