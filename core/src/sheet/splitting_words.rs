//! The sentence and the kinds of the answer on splitting by diagonalisation.

use crate::numerics::sorted_map::SortedMap;

use super::document::Document;
use super::rich::{Kind, Rich};
use super::splitting_pattern::bright;
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
    pub positions: usize,
    pub pattern: &'a str,
    pub linear: Option<&'a LinearRow>,
    pub searched: &'a Searched,
    pub diamagnetic: Option<&'a DiamagneticRow>,
    pub estimate: Option<&'a EstimateRow>,
}

impl Told<'_> {
    pub fn tesla(&self) -> f64 {
        self.document.field.as_ref().map_or(0.0, |f| f.tesla)
    }

    fn widest(&self) -> f64 {
        let offsets = bright(self.components).map(|c| c.offset.abs());
        offsets.fold(0.0, f64::max)
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

/// One sentence.
pub fn sentence(told: &Told) -> Rich {
    let tesla = told.tesla();
    let start = |none: &str| match tesla > 0.0 {
        true => Rich::words("In a field of ")
            .number(tesla, Some("T"), Kind::Entered)
            .say(", "),
        false => Rich::words(none),
    };
    let with = match told.document.nuclei.len() {
        _ if !told.has_spin() => String::new(),
        0 | 1 => " with its nucleus".to_owned(),
        many => format!(" of {many} isotopes"),
    };
    let with = match told.estimate {
        Some(row) if row.included => format!("{with} (A and B estimated)"),
        _ => with,
    };
    let Some(line) = told.line else {
        let shifts = told.states.iter().map(|s| s.shift);
        let (low, high) = shifts.fold((0.0_f64, 0.0_f64), |(low, high), shift| {
            (low.min(shift), high.max(shift))
        });
        let levels = told
            .ready
            .sets
            .iter()
            .map(|set| set.levels.len())
            .sum::<usize>();
        let say = start("Without a field, ")
            .count(levels, "level", "levels")
            .say(with)
            .say(if levels == 1 {
                " splits into "
            } else {
                " split into "
            })
            .count(told.states.len(), "state", "states");
        if low == 0.0 && high == 0.0 {
            return say.say(", which all keep their energy.");
        }
        return say
            .say("; shifts reach from ")
            .number(low, Some("cm-1"), Kind::Computed)
            .say(" to ")
            .number(high, Some("cm-1"), Kind::Computed)
            .say(".");
    };
    let named = |say: Rich| {
        let line_or_lines = if line.of == "level" { "line" } else { "lines" };
        say.say(format!(
            "the {} {line_or_lines}{with} from ",
            line.multipole
        ))
        .then(&line.upper_rich)
        .say(" to ")
        .then(&line.lower_rich)
    };
    let verb = if line.of == "level" {
        "splits"
    } else {
        "split"
    };
    if tesla == 0.0 && !told.has_spin() {
        return named(Rich::words("Without a field ")).say(format!(
            " {} not split; any field makes {} of {}.",
            if line.of == "level" { "does" } else { "do" },
            told.pattern,
            if line.of == "level" { "it" } else { "them" }
        ));
    }
    let say = named(start("Without a field, ")).say(format!(" {verb} into {}", told.pattern));
    let say = match told.groups {
        groups if groups > 1 && 2 * groups <= told.positions && groups < 10 => {
            say.say(format!(" in {groups} groups"))
        }
        _ => say,
    };
    let widest = told.widest();
    if widest == 0.0 {
        return say.say(", which stays where the line is.");
    }
    let say = say.say("; the largest offset from the centre is ").number(
        widest,
        Some("cm-1"),
        Kind::Computed,
    );
    match told.linear {
        Some(linear) if linear.largest_difference > 1e-3 * widest => say
            .say(", and a pattern in proportion to the field would be off by up to ")
            .number(linear.largest_difference, Some("cm-1"), Kind::Computed)
            .say("."),
        _ => say.say("."),
    }
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
