//! The ground level by energy: of the observed ground configuration, with nothing fitted, is the lowest
//! computed level of the observed J?

use rungline_core::configuration::{Orbital, Subshell};
use rungline_core::elements::{self, Status, observed_ground};
use rungline_core::radial::nucleus::stable_mass_number;
use rungline_core::structure::model::{Case, solve};
use rungline_core::terms::hund;
use rungline_tests::model::field;
use rungline_tests::{Listing, Row, list, report};

/// `2J` as people write J.
fn half(two_j: i32) -> String {
    match two_j % 2 {
        0 => (two_j / 2).to_string(),
        _ => format!("{two_j}/2"),
    }
}

/// Ions to look at one by one: another J than observed, Hund's rules against what is observed, or a
/// level of another J close by.
struct Judged {
    ion: String,
    observed: i32,
    computed: i32,
    hund: Option<i32>,
    /// Computed distance to the lowest level of another J, cm⁻¹.
    distance: f64,
}

/// A computed distance below this is a close call, cm⁻¹.
const CLOSE: f64 = 100.0;

impl Judged {
    fn cells(&self) -> Vec<String> {
        let verdict = match (self.computed == self.observed, self.hund) {
            (false, _) => "**exception**: not the observed level",
            (true, None) => "right, where Hund’s rules name no J",
            (true, Some(j)) if j != self.observed => "right, where Hund’s rules are not",
            (true, Some(_)) => "right, and close",
        };
        vec![
            self.ion.clone(),
            half(self.observed),
            half(self.computed),
            self.hund.map_or_else(|| "none".into(), half),
            format!("{:.0}", self.distance),
            verdict.into(),
        ]
    }
}

/// Computes all, names those that differ and holds them against the known ones.
fn check(correlation: bool, name: &str, what: &str, exceptions: &[&str]) {
    let (mut cases, mut differing) = (0_usize, Vec::new());
    let mut judged: Vec<Judged> = Vec::new();
    for z in 1..=92_u8 {
        for charge in 0..=10.min(i32::from(z) - 1) {
            let Some(ground) = observed_ground(z, charge) else {
                continue;
            };
            let Some(j) = ground.level.j else { continue };
            if ground.status != Status::Measured {
                continue;
            }
            let subshells = (ground.subshells.iter())
                .filter_map(|&(n, l, electrons)| Subshell::new(Orbital::new(n, l)?, electrons));
            let subshells: Vec<Subshell> = subshells.collect();
            let rules = hund::ground(&subshells).j.map(|j| j.doubled());
            let mut case = Case::new(z, stable_mass_number(z), vec![subshells]);
            // With it is what happens by default.
            case.correlation = (!correlation).then_some(false);
            let spectrum = solve(&case, &mut field, &mut |_| true).expect("levels");
            let lowest = spectrum.levels.first().expect("a level");
            let (parity, level) = spectrum.level(*lowest).expect("a level");
            cases += 1;
            let other = (spectrum.levels.iter())
                .filter_map(|&place| Some(spectrum.level(place)?.1))
                .find(|other| other.two_j != level.two_j);
            let distance = other.map_or(f64::INFINITY, |other| other.energy - level.energy);
            if level.two_j != j.doubled() || rules != Some(j.doubled()) || distance < CLOSE {
                judged.push(Judged {
                    ion: format!(
                        "{} {charge}+ {}",
                        elements::symbol(z).expect("a symbol"),
                        ground.written
                    ),
                    observed: j.doubled(),
                    computed: level.two_j,
                    hund: rules,
                    distance,
                });
            }
            let name = format!("{z} charge {charge}: {}", ground.written);
            if level.two_j != j.doubled() || parity.odd != ground.level.odd {
                let observed = spectrum.levels.iter().find_map(|&place| {
                    let (_, other) = spectrum.level(place)?;
                    (other.two_j == j.doubled()).then_some(other.energy - level.energy)
                });
                let text = format!(
                    "{name}: 2J = {}, observed {}, which lies {observed:?} higher",
                    level.two_j,
                    j.doubled()
                );
                println!("{text}");
                differing.push(name);
            }
        }
    }
    let mut listing = Listing::new(
        &format!("Ground levels one by one, {what}"),
        &format!(
            "Of {cases} measured ions (mendeleev 1.3.0, MIT; charge to 10, Z to 92) {} come out with another J than observed. Listed are these, those for which Hund’s rules alone name another J or none, and those with a computed level of another J less than {CLOSE} cm⁻¹ above the lowest.",
            differing.len()
        ),
        &[
            "ion",
            "J observed",
            "J computed",
            "J by Hund’s rules",
            "next J above, cm⁻¹",
            "judgement",
        ],
    );
    listing.rows = judged.iter().map(Judged::cells).collect();
    list(name, &listing);
    assert_eq!(differing, exceptions);
    let named = match differing.as_slice() {
        [] => "none".to_owned(),
        some => some.join(", "),
    };
    report(
        name,
        Row {
            quantity: format!(
                "ground J by energy in the observed ground configuration, measured ions to charge 10 and Z = 92, nothing fitted, {what}; other than observed: {named}"
            ),
            cases,
            worst: differing.len() as f64 / cases as f64,
            tolerance: 0.02,
            measure: "share that differs".into(),
            source: "mendeleev 1.3.0 (MIT)".into(),
        },
    );
}

#[test]
fn the_lowest_level_has_the_observed_j() {
    check(false, "structure_model_ground", "average functions", &[]);
}

#[test]
fn the_lowest_level_has_the_observed_j_with_correlation() {
    check(
        true,
        "structure_model_ground_correlation",
        "correlation in second order",
        &[],
    );
}
