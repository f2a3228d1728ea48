//! The sentence, the working and the limits of lines whose energies are known.

use crate::numerics::sorted_map::SortedMap;
use crate::radiation::Multipole;
use crate::radiation::rates::wavelength_factor;

use super::answer::Working;
use super::document::Document;
use super::energy_case::EnergyCase;
use super::formula::{Formula, fraction, name, number, operator, row, sub, sup};
use super::given::Given;
use super::levels_limits::{computed, incomplete, too_low, without_effect};
use super::levels_rows::Shared;
use super::light::{Surroundings, air_range};
use super::line_rows::{LineRow, WindowRow};
use super::lines_energies::WEAK;
use super::parameter_name::Parameter;
use super::placed::Placed;
use super::rich::{Kind, Rich, six_digits};
use super::solved::{Solved, SolvedLevel};
use super::structure::Energies;

/// What the words are about.
pub struct Told<'a> {
    pub document: &'a Document,
    pub solved: &'a Solved,
    pub placed: &'a Placed,
    pub lines: &'a [LineRow],
    pub surroundings: &'a Surroundings,
    pub window: Option<&'a WindowRow>,
    pub refused_listed: bool,
}

fn three_digits(value: f64) -> f64 {
    format!("{value:.2e}").parse().unwrap_or(value)
}

/// A level of a row, typeset.
fn level(told: &Told, label: &Shared) -> Rich {
    let of_label = |level: &&SolvedLevel| *level.label == *label.0;
    let level = told.solved.levels.iter().find(of_label);
    level
        .map(|level| level.rich(told.document))
        .unwrap_or_default()
}

/// ", E1 from upper to lower".
fn ends(told: &Told, say: Rich, multipole: Multipole, upper: &Shared, lower: &Shared) -> Rich {
    say.say(format!(", {multipole} from "))
        .then(&level(told, upper))
        .say(" to ")
        .then(&level(told, lower))
}

/// The strongest line: by emitted power where a temperature is entered, otherwise by gf.
fn strongest<'a>(lines: impl Iterator<Item = &'a LineRow>) -> Option<&'a LineRow> {
    let size = |line: &LineRow| line.intensity.or(line.gf).unwrap_or(0.0);
    let mut best: Option<&LineRow> = None;
    for line in lines.filter(|line| line.wavenumber.is_some()) {
        if best.is_none_or(|known| size(line) > size(known)) {
            best = Some(line);
        }
    }
    best
}

/// By what it is the strongest.
fn strongest_is(told: &Told) -> &'static str {
    match told.lines.iter().any(|line| line.intensity.is_some()) {
        true => "; the strongest in emission is ",
        false => "; the strongest by gf is ",
    }
}

pub fn sentence(told: &Told) -> Rich {
    if let Some(window) = told.window {
        return in_window(told, window);
    }
    let many = |multipole| {
        let of = |line: &&LineRow| line.multipole == multipole;
        told.lines.iter().filter(of).count()
    };
    let (dipole, others) = (
        many(Multipole::E1),
        many(Multipole::M1) + many(Multipole::E2),
    );
    let lacking = dipole == 0 && lacks_radial_integrals(told.document);
    let species = told.document.species_rich();
    let first = if lacking { others } else { dipole };
    let say = match (species.0.is_empty(), first) {
        (true, 1) => Rich::words("There is "),
        (true, _) => Rich::words("There are "),
        _ => species.say(" has "),
    };
    let counted = |say: Rich, count: usize, one: &str, many: &str| match count {
        0 => say.say(format!("no {many}")),
        _ => say.count(count, one, many),
    };
    let say = if let EnergyCase::OneElectron { .. } = told.solved.case() {
        let one = "electric dipole line here";
        counted(say, dipole, one, "electric dipole lines here")
    } else if lacking {
        counted(say, others, "forbidden line here", "forbidden lines here").say(
            "; electric dipole lines have no strength, for their radial integral r(…) is not given",
        )
    } else {
        let one = "electric dipole line";
        let say = counted(say, dipole, one, "electric dipole lines").say(" and ");
        let one = "forbidden line here";
        counted(say, others, one, "forbidden lines here")
    };
    match strongest(told.lines.iter()) {
        Some(line) => named(told, say.say(strongest_is(told)), line).say("."),
        None => say.say("."),
    }
}

/// Whether nothing but what is given is known, no radial integral of electric dipole lines among it, though
/// there are levels of both parities.
fn lacks_radial_integrals(document: &Document) -> bool {
    let odd = |entry: usize| document.is_odd(entry);
    let dipole = |given: &Given| given.name.parameter == Parameter::Dipole;
    document.energies() == Energies::Given
        && !document.given.iter().any(dipole)
        && (1..document.entries.len()).any(|entry| odd(entry) != odd(0))
}

fn in_window(told: &Told, window: &WindowRow) -> Rich {
    // As typed, or of an energy six digits.
    let nm = |nm: f64, typed: bool| if typed { nm } else { six_digits(nm) };
    let by_energy = (told.document.conditions.window)
        .is_some_and(|window| window.ends.iter().flatten().any(|end| end.by_energy));
    let end = |say: Rich, value: f64, unit| say.number(nm(value, !by_energy), unit, Kind::Entered);
    // In air if one of its ends is.
    let ends_nm = [window.from_nm, window.to_nm].into_iter().flatten();
    let media = ends_nm.map(|nm| told.surroundings.words(nm));
    let medium = media.max_by_key(|words| *words == " in air").unwrap_or("");
    let between = |say: Rich, words: [&str; 3]| {
        let [between, above, below] = words;
        let say = match (window.from, window.to) {
            (Some(from), Some(to)) => {
                let say = end(say.say(between), from, None).say(" and ");
                end(say, to, Some("nm"))
            }
            (Some(from), None) => end(say.say(above), from, Some("nm")),
            (None, Some(to)) => end(say.say(below), to, Some("nm")),
            (None, None) => say,
        };
        say.say(medium)
    };
    if window.lines == 0 {
        let words = ["between ", "above ", "below "];
        let say = between(Rich::words("No line lies "), words);
        return match &window.nearest {
            Some(nearest) => {
                let say = say.say("; the nearest is ");
                let say = say.number(six_digits(nearest.nm), Some("nm"), Kind::Computed);
                let say = match told.surroundings.words(nearest.nm) {
                    same if same == medium => say,
                    other => say.say(other),
                };
                let (upper, lower) = (&nearest.upper, &nearest.lower);
                ends(told, say, nearest.multipole, upper, lower).say(".")
            }
            None => say.say(", and none lies anywhere else."),
        };
    }
    let inside = |line: &&LineRow| {
        let nm = line.vacuum_nm.unwrap_or(0.0);
        window.from_nm.is_none_or(|from| from <= nm) && window.to_nm.is_none_or(|to| nm <= to)
    };
    let say = between(Rich::new(), ["Between ", "Above ", "Below "]).say(match window.lines {
        1 => " lies ",
        _ => " lie ",
    });
    let say = say.count(window.lines, "line", "lines");
    match strongest(told.lines.iter().filter(inside)) {
        Some(line) if window.lines > 1 => named(told, say.say(strongest_is(told)), line).say("."),
        Some(line) => named(told, say.say(": "), line).say("."),
        None => say.say("."),
    }
}

/// A line with its wavelength and how that is known.
fn named(told: &Told, say: Rich, line: &LineRow) -> Rich {
    let vacuum = line.vacuum_nm.unwrap_or(0.0);
    let (nm, words) = match told.surroundings.name {
        // A table's wavelength: in air where air has one.
        "vacuum" => (vacuum, " in vacuum"),
        _ => (
            told.surroundings.medium_nm(vacuum),
            told.surroundings.words(vacuum),
        ),
    };
    let kind = line.energy_kind.unwrap_or(Kind::Computed);
    let say = say.number(six_digits(nm), Some("nm"), kind).say(words);
    let say = ends(told, say, line.multipole, &line.upper, &line.lower);
    say.say(match kind {
        Kind::Measured => ", between measured levels",
        Kind::Entered => ", by the given parameters",
        _ => ", computed",
    })
}

pub fn working(told: &Told) -> Vec<Working> {
    let mut steps = Vec::new();
    let electric = |line: &&LineRow| line.multipole == Multipole::E1;
    let case = strongest(told.lines.iter().filter(electric));
    let weight = |text: &str| sub(name("g"), name(text));
    let formula = row([
        name("A"),
        operator("="),
        name("C"),
        fraction(name("S"), row([weight("u"), sup(name("λ"), number(3))])),
    ]);
    let step = Working::new(
        match told.solved.case() {
            EnergyCase::OneElectron { .. } => {
                "Transition probability of an electric dipole line, λ in Å as S without relativity"
            }
            EnergyCase::Model { .. } => {
                "Transition probability of an electric dipole line, λ in Å in vacuum"
            }
        },
        formula,
        "G. W. F. Drake (ed.), Springer Handbook of Atomic, Molecular, and Optical Physics, ch. 10 (Martin & Wiese, Atomic spectroscopy); C from CODATA 2022",
    );
    steps.push(match case {
        Some(line) => {
            let factor = wavelength_factor(Multipole::E1);
            let (s, a) = (line.s.unwrap_or(0.0), line.a.unwrap_or(0.0));
            // One electron's A without relativity goes with a wavelength without it.
            let angstrom = match told.solved.case() {
                EnergyCase::OneElectron { .. } if a > 0.0 => {
                    libm::cbrt(factor * s / (line.upper_j.degeneracy() as f64 * a))
                }
                _ => line.vacuum_nm.unwrap_or(0.0) * 10.0,
            };
            let numbers = row([
                number(format!("{factor:.5e}")),
                operator("×"),
                fraction(
                    number(six_digits(s)),
                    row([
                        number(line.upper_j.degeneracy()),
                        operator("×"),
                        sup(number(six_digits(angstrom)), number(3)),
                    ]),
                ),
            ]);
            let result = Rich::words("A = ")
                .number(three_digits(a), Some("s-1"), Kind::Computed)
                .say(" for ")
                .then(&level(told, &line.upper))
                .say(" to ")
                .then(&level(told, &line.lower));
            step.numbers(numbers, result)
        }
        None => step,
    });
    steps.extend(air(told, case));
    steps
}

fn air(told: &Told, case: Option<&LineRow>) -> Option<Working> {
    let line = case?;
    let (vacuum, air) = (line.vacuum_nm?, line.air_nm?);
    let formula: Formula = row([
        sub(name("λ"), name("air")),
        operator("="),
        fraction(sub(name("λ"), name("vac")), name("n")),
    ]);
    let numbers = row([
        fraction(
            number(format!("{vacuum:.4}")),
            number(format!("{:.8}", vacuum / air)),
        ),
        operator("="),
        number(format!("{air:.4}")),
    ]);
    let words = match told.document.conditions.air {
        entered if entered == Default::default() => {
            "dry air of 15 °C and 101 325 Pa with 450 ppm CO₂"
        }
        _ => "the air of the sheet",
    };
    let step = Working::new(
        "Wavelength in air",
        formula,
        "P. E. Ciddor, Appl. Opt. 35, 1566 (1996)",
    );
    Some(
        step.numbers(
            numbers,
            Rich::new()
                .number(
                    six_digits(air),
                    Some("nm"),
                    line.energy_kind.unwrap_or(Kind::Computed),
                )
                .say(format!(
                    " in {words}; outside {} wavelengths are those in vacuum",
                    air_range()
                )),
        ),
    )
}

pub fn limits(told: &Told) -> Vec<String> {
    let mut limits = Vec::new();
    if told.document.conditions.air_wanted && told.surroundings.name == "index" {
        limits.push("The refractive index entered counts, and air does not.".to_owned());
    }
    let any_computed = told
        .lines
        .iter()
        .any(|line| line.energy_kind == Some(Kind::Computed));
    match told.solved.case() {
        EnergyCase::OneElectron { .. } => limits.push(
            "Electric dipole lines of one electron between Dirac’s levels, strengths, f and A without relativity and at the wavelengths without it (between levels of one n at those listed); the Lamb shift and the spin of the nucleus are left out."
                .to_owned(),
        ),
        EnergyCase::Model { case, entries } if any_computed => {
            limits.extend(computed(told.document, case, entries));
            limits.extend(too_low(told.document, told.solved));
        }
        EnergyCase::Model { .. } => {}
    }
    limits.extend(without_effect(told.document, told.solved));
    limits.extend(incomplete(told.solved));
    if told.lines.iter().any(|line| line.weak) {
        limits.push(format!(
            "Lines marked weak are what little is left of large terms that cancel (factor below {WEAK}): their strengths may be far off (common practice, no source)."
        ));
    }
    if lacks_radial_integrals(told.document) {
        limits.push(
            "No radial integral r(…) is given: strengths of electric dipole lines are not known, and these lines are not listed. Relative strengths of pure LS coupling stand under the multiplets."
                .to_owned(),
        );
    }
    if told.lines.iter().any(|line| line.mass_shift.is_some()) {
        limits.push(
            "The mass shift is the normal one, from the usual isotope to the one entered; the specific mass shift and that by the size of the nucleus are left out, and can be as large or larger (common practice, no source)."
                .to_owned(),
        );
    }
    if !told.refused_listed {
        limits.push(format!(
            "With more than {} pairs of levels the refused ones are counted, not listed.",
            super::pairs::MAX_PAIRS
        ));
    }
    if told.document.conditions.temperature.is_some() {
        limits.push(
            "Intensities are those of a thin source in equilibrium at its temperature, populated among the listed levels alone."
                .to_owned(),
        );
    }
    limits.extend(told.placed.anchored(told.solved));
    limits.extend(told.document.unused());
    limits
}

pub fn kinds(document: &Document, placed: &Placed) -> SortedMap<&'static str, Kind> {
    let own = match document.energies() {
        Energies::Computed => Kind::Computed,
        Energies::Given => Kind::Entered,
    };
    let energy = if placed.pinned { Kind::Measured } else { own };
    [
        ("lines.wavenumber", energy),
        ("lines.vacuum_nm", energy),
        ("lines.air_nm", energy),
        ("lines.medium_nm", energy),
        ("lines.multipole", Kind::Exact),
        ("lines.S", Kind::Computed),
        ("lines.gf", Kind::Computed),
        ("lines.f", Kind::Computed),
        ("lines.A", Kind::Computed),
        ("lines.branching", Kind::Computed),
        ("lines.cancellation", Kind::Computed),
        ("lines.intensity", Kind::Computed),
        ("lines.absorption", Kind::Computed),
        ("lines.optical_depth", Kind::Computed),
        ("lines.cross_section", Kind::Computed),
        ("lines.saturation_intensity", Kind::Computed),
        ("lines.mass_shift", Kind::Computed),
        ("lines.relative", Kind::Computed),
        ("levels.energy", energy),
        ("levels.above_lowest", energy),
        ("levels.population", Kind::Computed),
        ("refused.rule", Kind::Exact),
        ("refused_total", Kind::Exact),
        ("multiplets.lines", Kind::Exact),
        ("multiplets.sum", Kind::Computed),
        ("multiplets.upper_sums.sum", Kind::Computed),
        ("multiplets.upper_sums.expected", Kind::Exact),
        ("multiplets.lower_sums.sum", Kind::Computed),
        ("multiplets.lower_sums.expected", Kind::Exact),
        ("multiplets_total", Kind::Exact),
        ("pairs", Kind::Exact),
        ("window.from", Kind::Entered),
        ("window.to", Kind::Entered),
        ("window.from_nm", Kind::Entered),
        ("window.to_nm", Kind::Entered),
        ("window.nearest", energy),
        ("window.lines", Kind::Exact),
        ("conversions", Kind::Exact),
    ]
    .into_iter()
    .collect()
}
