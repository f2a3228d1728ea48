//! The sentence and the kinds of the answer on splitting by diagonalisation.

use crate::numerics::sorted_map::SortedMap;

use super::document::Document;
use super::nucleus::{Nuclear, isotope_name};
use super::rich::{Kind, Rich, six_digits};
use super::splitting_estimated::is_estimated;
use super::splitting_pattern::{Pattern, bright, widest};
use super::splitting_rows::{
    ComponentRow, DiamagneticRow, EstimateRow, LineOf, LinearRow, StateRow,
};
use super::splitting_searched::Searched;
use super::splitting_sets::Prepared;

/// What the words are about.
pub struct Told<'a> {
    pub document: &'a Document,
    pub ready: &'a Prepared,
    pub line: Option<&'a LineOf>,
    pub states: &'a [StateRow],
    pub components: &'a [ComponentRow],
    pub groups: usize,
    pub pattern: Pattern,
    pub linear: Option<&'a LinearRow>,
    pub searched: &'a Searched,
    pub diamagnetic: Option<&'a DiamagneticRow>,
    pub estimate: Option<&'a EstimateRow>,
}

impl Told<'_> {
    pub fn tesla(&self) -> f64 {
        self.document.field.as_ref().map_or(0.0, |f| f.tesla)
    }

    pub fn has_spin(&self) -> bool {
        let alone = self.document.level_alone.as_ref();
        alone.is_some_and(|level| level.two_i() > 0)
            || self
                .document
                .nuclei
                .iter()
                .any(|nuclear| nuclear.two_i() > 0)
    }
}

/// "In a field of 0.5 T, seen across it, ": the measure of what is counted stands in the sentence.
pub fn in_field(document: &Document, is_line: bool) -> Rich {
    let Some(field) = &document.field else {
        return Rich::new();
    };
    let say = Rich::words("In a field of ")
        .number(field.tesla, Some("T"), Kind::Entered)
        .say(", ");
    match is_line {
        true => say.say(field.looked()).say(", "),
        false => say,
    }
}

/// " splits into " or, where some components are hidden, " shows ".
pub fn pattern_verb(pattern: Pattern, several_lines: bool) -> &'static str {
    match (pattern.is_whole(), several_lines) {
        (true, false) => " splits into ",
        (true, true) => " split into ",
        (false, false) => " shows ",
        (false, true) => " show ",
    }
}

/// What stands before the largest offset.
pub fn offset_words(pattern: Pattern) -> &'static str {
    match pattern.is_whole() {
        true => "; the largest offset from the centre is ",
        false => "; the largest offset of these from the centre is ",
    }
}

/// One sentence.
pub fn sentence(told: &Told) -> Rich {
    let said = match told.line {
        Some(line) => of_line(told, line),
        None => of_levels(told),
    };
    let end = left_out_words(told.document, Some(told.ready));
    said.say(end).say(".")
}

/// The nuclei with a spin that split nothing, because no constant is known.
fn left_out(document: &Document, ready: Option<&Prepared>) -> Vec<String> {
    let is_estimated = |n: &Nuclear| ready.is_some_and(|ready| is_estimated(ready, n));
    let lacks = |n: &&Nuclear| {
        n.two_i() > 0 && n.dipole.is_empty() && n.quadrupole.is_empty() && !is_estimated(n)
    };
    let name = |n: &Nuclear| n.name.clone().unwrap_or_else(|| "this spin".to_owned());
    if document.level_alone.is_some() {
        return Vec::new();
    }
    if !document.nuclei.is_empty() {
        return document.nuclei.iter().filter(lacks).map(name).collect();
    }
    // An isotope that the sheet names, and says nothing more of.
    let is_named = document.species.is_some_and(|s| s.mass_number.is_some());
    let isotope = document
        .isotope()
        .filter(|isotope| is_named && isotope.spin.is_some_and(|spin| spin.doubled() > 0));
    isotope.iter().map(isotope_name).collect()
}

/// The same as the end of the sentence.
pub fn left_out_words(document: &Document, ready: Option<&Prepared>) -> String {
    let names = left_out(document, ready);
    match names.is_empty() {
        true => String::new(),
        false => format!(
            "; the nucleus of {} is left out because no A is entered",
            names.join(", ")
        ),
    }
}

fn of_levels(told: &Told) -> Rich {
    let shifts = told.states.iter().map(|s| s.shift);
    let (low, high) = shifts.fold((0.0_f64, 0.0_f64), |(low, high), shift| {
        (low.min(shift), high.max(shift))
    });
    let sets = told.ready.sets.iter();
    let levels = sets.map(|set| set.levels.len()).sum::<usize>();
    let say = started(told)
        .count(levels, "level", "levels")
        .say(with_nuclei(told))
        .say(if levels == 1 {
            " splits into "
        } else {
            " split into "
        })
        .count(told.states.len(), "state", "states");
    if low == 0.0 && high == 0.0 {
        return say.say(match told.states.len() {
            1 => ", which keeps its energy",
            _ => ", which all keep their energy",
        });
    }
    say.say("; shifts reach from ")
        .number(six_digits(low), Some("cm-1"), Kind::Computed)
        .say(" to ")
        .number(six_digits(high), Some("cm-1"), Kind::Computed)
}

fn started(told: &Told) -> Rich {
    match told.tesla() > 0.0 {
        true => in_field(told.document, told.line.is_some()),
        false => Rich::words("Without a field, "),
    }
}

fn with_nuclei(told: &Told) -> String {
    let with = match told.document.nuclei.len() {
        _ if !told.has_spin() => String::new(),
        0 | 1 => " with its nucleus".to_owned(),
        many => format!(" of {many} isotopes"),
    };
    match told.estimate {
        Some(row) if row.included => format!("{with} (A and B estimated)"),
        _ => with,
    }
}

fn of_line(told: &Told, line: &LineOf) -> Rich {
    let several = line.of != "level";
    let named = |say: Rich| {
        say.say(format!(
            "the {} {}{} from ",
            line.multipole,
            if several { "lines" } else { "line" },
            with_nuclei(told)
        ))
        .then(&line.upper_rich)
        .say(" to ")
        .then(&line.lower_rich)
    };
    if told.tesla() == 0.0 && !told.has_spin() {
        return named(Rich::words("Without a field ")).say(format!(
            " {} not split; any field makes {} of {}",
            if several { "do" } else { "does" },
            told.pattern.words(),
            if several { "them" } else { "it" }
        ));
    }
    let say = named(started(told))
        .say(pattern_verb(told.pattern, several))
        .say(told.pattern.words());
    let say = match told.groups {
        groups
            if groups > 1
                && !told.pattern.is_normal_triplet
                && 2 * groups <= told.pattern.seen
                && groups < 10 =>
        {
            say.say(format!(" in {groups} groups"))
        }
        _ => say,
    };
    let bright = bright(told.components);
    let widest = widest(&bright);
    if widest == 0.0 {
        return say.say(match told.pattern.seen {
            0 => "",
            _ => ", which stays where the line is",
        });
    }
    let say = say.say(offset_words(told.pattern)).number(
        six_digits(widest),
        Some("cm-1"),
        Kind::Computed,
    );
    let away = |c: &&ComponentRow| (c.offset - c.linear.unwrap_or(c.offset)).abs();
    let largest = bright.iter().map(away).fold(0.0_f64, f64::max);
    if told.linear.is_none() || largest <= 1e-3 * widest {
        return say;
    }
    say.say(", and a pattern in proportion to the field would be off by up to ")
        .number(six_digits(largest), Some("cm-1"), Kind::Computed)
}

/// The kinds of the columns.
pub fn kinds(told: &Told) -> SortedMap<&'static str, Kind> {
    let mut kinds: Vec<(&'static str, Kind)> = vec![
        ("components.M_upper", Kind::Exact),
        ("components.M_lower", Kind::Exact),
        ("components.F_upper", Kind::Exact),
        ("components.F_lower", Kind::Exact),
        ("states.M", Kind::Exact),
        ("states.F", Kind::Exact),
        ("positions", Kind::Exact),
        ("crossings.photons", Kind::Exact),
        ("crossings_left_out", Kind::Exact),
        ("component_crossings_left_out", Kind::Exact),
        ("resonances_left_out", Kind::Exact),
        ("groups", Kind::Exact),
        ("conversions.ghz_per_wavenumber", Kind::Exact),
        ("conversions.mu_b_per_tesla", Kind::Measured),
        ("conversions.pm_per_wavenumber", Kind::Computed),
        ("positions_seen", Kind::Exact),
        ("field.angle_degrees", Kind::Entered),
        ("field.tesla", Kind::Entered),
        ("field.up_to", Kind::Entered),
    ];
    kinds.extend(
        [
            "components.lorentz",
            "components.offset",
            "components.ghz",
            "components.pm",
            "components.strength",
            "components.along",
            "components.across",
            "components.seen",
            "components.linear",
            "states.energy",
            "states.shift",
            "states.slope",
            "states.lorentz",
            "line.g_upper",
            "line.g_lower",
            "line.g_effective",
            "line.centre",
            "linear.departs_at",
            "linear.largest_difference",
            "crossings.tesla",
            "crossings.energy",
            "crossings.gap",
            "crossings.mhz",
            "crossings.slope_first",
            "crossings.slope_second",
            "component_crossings.tesla",
            "component_crossings.apart",
            "resonances.mhz",
            "resonances.slope",
            "resonances.strength",
            "diamagnetic.largest",
        ]
        .map(|key| (key, Kind::Computed)),
    );
    if let Some(kind) = told.line.and_then(|line| line.wavelength_kind) {
        kinds.push(("line.wavelength_nm", kind));
    }
    kinds.into_iter().collect()
}
