//! The sentence, the working and the limits of the answer on levels.

use crate::numerics::sorted_map::SortedMap;

use super::answer::Working;
use super::document::Document;
use super::energy_case::{EnergyCase, full_shells_alone};
use super::formula::{Formula, fraction, name, number, operator, row, sub, sup};
use super::levels_rows::{GroundRow, IntervalRow, IonisationRow, LevelRow, ParameterRow};
use super::placed::Placed;
use super::rich::{Kind, Rich};
use super::solved::Solved;
use super::structure::Energies;

/// What the words are about.
pub struct Told<'a> {
    pub document: &'a Document,
    pub solved: &'a Solved,
    pub placed: &'a Placed,
    pub levels: &'a [LevelRow],
    pub parameters: &'a [ParameterRow],
    pub ground: Option<&'a GroundRow>,
    pub intervals: &'a [IntervalRow],
    pub ionisation: Option<&'a IonisationRow>,
}

/// Levels this close, in cm⁻¹, are said to have one energy.
const SAME_ENERGY: f64 = 1e-6;

/// A wavenumber as it is read aloud.
pub fn rounded(value: f64) -> f64 {
    let digits = if value.abs() >= 1000.0 { 1.0 } else { 100.0 };
    libm::round(value * digits) / digits
}

/// The same, with three digits where nothing would be left.
fn read_aloud(value: f64) -> f64 {
    match rounded(value) {
        0.0 => format!("{value:.2e}").parse().unwrap_or(value),
        some => some,
    }
}

pub fn sentence(told: &Told) -> Rich {
    let species = told.document.species_rich();
    let say = if species.0.is_empty() {
        Rich::words(match told.document.entries.len() {
            1 => "This configuration has ",
            _ => "These configurations have ",
        })
    } else {
        species.say(" has ")
    };
    let say = say.count(told.solved.levels.len(), "level here", "levels here");
    let Some(lowest) = told.levels.first() else {
        return say.say(".");
    };
    let say = say.say("; the lowest is ").then(&lowest.rich);
    let say = match told.ground {
        Some(ground) => beside(say, ground),
        None => say,
    };
    let kind = |row: &LevelRow| row.energy_kind;
    // Levels that nothing parts but rounding: Dirac's are good to some 10⁻⁷ cm⁻¹.
    let together = told
        .levels
        .iter()
        .take_while(|row| row.above_lowest < SAME_ENERGY)
        .count();
    if together > 1 {
        let say = say.say(match together {
            2 => ", with another at the same energy".to_owned(),
            many => format!(", with {} others at the same energy", many - 1),
        });
        return match (told.levels.get(together), told.levels.last()) {
            (Some(_), Some(last)) => say
                .say("; the highest lies ")
                .number(read_aloud(last.above_lowest), Some("cm-1"), kind(last))
                .say(" above it."),
            _ => say.say("."),
        };
    }
    match (told.levels.get(1), told.levels.last()) {
        (Some(next), Some(last)) if told.levels.len() > 2 => say
            .say("; the next lies ")
            .number(read_aloud(next.above_lowest), Some("cm-1"), kind(next))
            .say(" above it, the highest ")
            .number(read_aloud(last.above_lowest), Some("cm-1"), kind(last))
            .say("."),
        (Some(next), _) => say
            .say("; the other lies ")
            .number(read_aloud(next.above_lowest), Some("cm-1"), kind(next))
            .say(" above it."),
        _ if full_shells_alone(told.document) => say.say(
            ": full shells have this one level alone, and there is no line inside the configuration.",
        ),
        _ => say.say("."),
    }
}

/// The lowest level beside the tabulated one and Hund's rules.
fn beside(say: Rich, ground: &GroundRow) -> Rich {
    let Some(known) = &ground.observed else {
        return say.say(match ground.hund.agrees {
            true => ", as Hund’s rules say",
            false => ", where Hund’s rules name another",
        });
    };
    // Only what was measured is observed.
    let status = known.status.as_deref().unwrap_or_default();
    let measured = status == "measured";
    if known.agrees {
        let say = match measured {
            true => say.say(", as observed"),
            false => say.say(format!(", as tabulated ({status})")),
        };
        return say.say(match ground.hund.agrees {
            true => " and by Hund’s rules",
            false => ", where Hund’s rules name another",
        });
    }
    let named = match (&known.term, known.j) {
        (Some(term), Some(j)) => format!("{term}{j}"),
        (None, Some(j)) => format!("a level with J = {j}"),
        _ => "another".to_owned(),
    };
    say.say(match measured {
        true => format!(", but observed is {named}"),
        false => format!(", but tabulated ({status}) is {named}"),
    })
}

fn sum_of(letter: &str, below: &str) -> [Formula; 3] {
    let raised = |letter: &str| sup(name(letter), name("k"));
    let small = sub(name(below), name("k"));
    [operator("∑"), raised(letter), small]
}

pub fn working(told: &Told) -> Vec<Working> {
    if let EnergyCase::OneElectron { .. } = told.solved.case() {
        return vec![Working::new(
            "Energy of one electron",
            row([
                name("E"),
                operator("="),
                name("μ"),
                sup(name("c"), number(2)),
                operator("["),
                name("f"),
                operator("("),
                name("n"),
                operator(","),
                name("j"),
                operator(")"),
                operator("−"),
                number(1),
                operator("]"),
            ]),
            "Dirac’s levels with the mass of the nucleus: Bethe & Salpeter, Quantum Mechanics of One- and Two-Electron Atoms (1957), §§14 and 42",
        )];
    }
    let mut steps = vec![matrix(told)];
    steps.extend(interval_rule(told));
    steps.extend(factor(told));
    steps.extend(told.ionisation.map(balance));
    steps
}

/// Saha's equation with this case's numbers.
fn balance(row_of: &IonisationRow) -> Working {
    let ratio = || fraction(sub(name("n"), name("ion")), sub(name("n"), name("atom")));
    let exponent = |over: Formula, under: Formula| row([operator("−"), fraction(over, under)]);
    let formula = row([
        ratio(),
        operator("="),
        fraction(
            number(2),
            row([sub(name("n"), name("e")), sup(name("Λ"), number(3))]),
        ),
        fraction(sub(name("Z"), name("ion")), sub(name("Z"), name("atom"))),
        sup(
            name("e"),
            exponent(
                row([name("χ"), operator("−"), name("Δχ")]),
                row([name("k"), name("T")]),
            ),
        ),
    ]);
    let three = |value: f64| number(format!("{value:.3}"));
    let numbers = row([
        ratio(),
        operator("="),
        fraction(
            number(2),
            row([
                number(format!("{:.3e}", row_of.electron_density)),
                sup(name("Λ"), number(3)),
            ]),
        ),
        fraction(
            three(row_of.higher_partition),
            three(row_of.lower_partition),
        ),
        sup(
            name("e"),
            exponent(
                number(rounded(row_of.limit - row_of.lowering)),
                number(rounded(
                    crate::constants::BOLTZMANN_WAVENUMBER.value * row_of.temperature,
                )),
            ),
        ),
    ]);
    let result = Rich::new()
        .number(
            format!("{:.3e}", row_of.ratio)
                .parse()
                .unwrap_or(row_of.ratio),
            None,
            Kind::Computed,
        )
        .say(" ions of the next charge for each of this one");
    Working::new(
        "Balance with the next ion, Λ the thermal wavelength of the electron",
        formula,
        "M. N. Saha, Phil. Mag. 40, 472 (1920); limit lowered by Debye and Hückel’s screening",
    )
    .numbers(numbers, result)
}

/// The energy matrix with the first parameters of this case.
fn matrix(told: &Told) -> Working {
    let mut formula = vec![name("H"), operator("="), sub(name("E"), name("av"))];
    for (letter, below) in [("F", "f"), ("G", "g"), ("R", "r")] {
        formula.push(operator("+"));
        formula.extend(sum_of(letter, below));
    }
    formula.extend([
        operator("+"),
        operator("∑"),
        name("ζ"),
        name("ℓ"),
        operator("·"),
        name("s"),
    ]);
    let step = Working::new(
        "Energy matrix in intermediate coupling",
        row(formula),
        "J. C. Slater, Phys. Rev. 34, 1293 (1929); Condon & Shortley, The Theory of Atomic Spectra (1935), ch. VI–XI; R. D. Cowan, The Theory of Atomic Structure and Spectra (1981), ch. 10–13",
    );
    let mut numbers = Vec::new();
    let shown = told
        .parameters
        .iter()
        .filter(|row| row.value != 0.0 && row.unit == "cm-1" && !row.name.starts_with("E("));
    for parameter in shown.take(4) {
        if !numbers.is_empty() {
            numbers.push(operator(","));
        }
        numbers.extend([
            name(&parameter.name),
            operator("="),
            number(rounded(parameter.value)),
        ]);
    }
    let Some(ground) = told.ground.filter(|_| !numbers.is_empty()) else {
        return step;
    };
    let energy = told.levels.first().map_or(0.0, |row| row.computed_energy);
    let result = ground
        .rich
        .clone()
        .say(" at ")
        .number(rounded(energy), Some("cm-1"), Kind::Computed)
        .say(match told.document.energies() {
            Energies::Computed => " from the average of the first configuration",
            Energies::Given => " on the scale of the given averages",
        });
    step.numbers(row(numbers), result)
}

/// Landé's interval rule on the term of the lowest level.
fn interval_rule(told: &Told) -> Option<Working> {
    let ground = told.ground?;
    let lowest = told.levels.first()?;
    let of_term = |row: &&IntervalRow| {
        row.term == lowest.term && row.configuration.0 == lowest.configuration.0
    };
    let first = told.intervals.iter().find(of_term)?;
    let (upper, lower) = (first.upper_j, first.lower_j);
    let formula = row([
        name("E"),
        operator("("),
        name("J"),
        operator(")"),
        operator("−"),
        name("E"),
        operator("("),
        name("J"),
        operator("−"),
        number(1),
        operator(")"),
        operator("="),
        name("A"),
        name("J"),
    ]);
    let j = f64::from(upper.doubled()) / 2.0;
    let numbers = row([
        fraction(number(rounded(first.interval)), number(upper)),
        operator("="),
        number(rounded(first.interval / j)),
    ]);
    let rest: Vec<&IntervalRow> = told.intervals.iter().filter(of_term).skip(1).collect();
    let worst = rest
        .iter()
        .filter_map(|row| Some((row.ratio? / row.expected_ratio - 1.0).abs()))
        .fold(0.0, f64::max);
    let result = Rich::words("A = ")
        .number(rounded(first.interval / j), Some("cm-1"), Kind::Computed)
        .say(format!(" between J = {lower} and {upper} of "))
        .then(&ground.rich);
    let result = match rest.is_empty() {
        true => result,
        false => result
            .say("; the other intervals of its term depart from the rule by up to ")
            .number(
                libm::round(worst * 1000.0) / 10.0,
                Some("%"),
                Kind::Computed,
            ),
    };
    let step = Working::new(
        "Interval rule",
        formula,
        "A. Landé, Z. Phys. 15, 189 (1923)",
    );
    Some(step.numbers(numbers, result))
}

/// g of the lowest level that has one.
fn factor(told: &Told) -> Option<Working> {
    let level = told.levels.iter().find(|row| row.g.is_some())?;
    let formula = row([
        sub(name("g"), name("J")),
        operator("="),
        operator("∑"),
        sup(name("c"), number(2)),
        name("g"),
        operator("("),
        name("S"),
        name("L"),
        name("J"),
        operator(")"),
    ]);
    let mut numbers = Vec::new();
    for share in level.composition.iter().take(3) {
        if !numbers.is_empty() {
            numbers.push(operator("+"));
        }
        numbers.extend([
            number(libm::round(share.percent * 100.0) / 1e4),
            name("g"),
            operator("("),
            name(&share.name),
            operator(")"),
        ]);
    }
    let numbers = row(numbers);
    let result = level
        .rich
        .clone()
        .say(": ")
        .number(level.g?, None, Kind::Computed);
    let step = Working::new(
        "Landé factor in intermediate coupling",
        formula,
        "Condon & Shortley (1935), ch. XVI; g_s from CODATA 2022",
    );
    Some(step.numbers(numbers, result))
}

pub fn kinds(told: &Told) -> SortedMap<&'static str, Kind> {
    let (document, placed) = (told.document, told.placed);
    let known = told.ground.and_then(|ground| ground.observed.as_ref());
    let measured = known.is_none_or(|known| known.status.as_deref() == Some("measured"));
    let own = match document.energies() {
        Energies::Computed => Kind::Computed,
        Energies::Given => Kind::Entered,
    };
    let energy = if placed.pinned { Kind::Measured } else { own };
    [
        ("levels.energy", energy),
        ("levels.above_lowest", energy),
        ("levels.computed_energy", own),
        ("levels.J", Kind::Exact),
        ("levels.g", Kind::Computed),
        ("levels.composition.percent", Kind::Computed),
        ("levels.composition_jj.percent", Kind::Computed),
        ("levels.composition_jk.percent", Kind::Computed),
        ("levels.leading", Kind::Computed),
        ("levels.lifetime", Kind::Computed),
        ("levels.population", Kind::Computed),
        ("parameters.value", own),
        ("parameters.computed", Kind::Computed),
        ("parameters.scale", Kind::Entered),
        ("schemes.mean_leading", Kind::Computed),
        ("ground.hund", Kind::Exact),
        (
            "ground.observed",
            match measured {
                true => Kind::Measured,
                false => Kind::Computed,
            },
        ),
        ("intervals.interval", energy),
        ("intervals.expected_ratio", Kind::Exact),
        ("intervals.ratio", Kind::Computed),
        ("levels_total", Kind::Exact),
        ("correlation.subshells", Kind::Computed),
        ("series.limit", Kind::Computed),
        ("series.limit_uncertainty", Kind::Computed),
        ("series.coefficients", Kind::Computed),
        ("series.members", Kind::Computed),
        ("series.continued", Kind::Computed),
        ("blocks.rows", Kind::Exact),
        ("partition.value", Kind::Computed),
        ("partition.temperature", Kind::Entered),
        ("partition.levels", Kind::Exact),
        ("partition.cut_off", energy),
        ("ionisation", Kind::Computed),
        ("ionisation.temperature", Kind::Entered),
        ("ionisation.electron_density", Kind::Entered),
    ]
    .into_iter()
    .collect()
}
