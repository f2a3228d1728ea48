//! States and components by diagonalisation, from weak to strong fields, with or without a nucleus.

use crate::constants::BOHR_MAGNETON_WAVENUMBER;
use crate::numerics::order::sort_by;
use crate::problem::Problem;
use crate::quantity::TwiceJ;
use crate::splitting::in_field::{AtField, MHZ_PER_WAVENUMBER, Split, State};
use crate::splitting::seen::{Polariser, weight};
use crate::splitting::weak_field::pm_offset;

use super::document::Document;
use super::field::Field;
use super::levels_rows::Shared;
use super::nucleus::Nuclear;
use super::splitting::{cautions, field_of};
use super::splitting_estimated::estimate_row;
use super::splitting_joins::Join;
use super::splitting_keeps::{Shown, keeps};
use super::splitting_limits::limits;
use super::splitting_line::line_of;
use super::splitting_linear::refused;
use super::splitting_names::{state_name, state_rich};
use super::splitting_nuclei::{isotope_rows, nucleus_row};
use super::splitting_pattern::{groups, pattern};
use super::splitting_resonances;
use super::splitting_rows::{ComponentRow, DiamagneticRow, LineOf, LinearRow, Splitting, StateRow};
use super::splitting_sets::{Pass, Prepared, Set, SetLevel, prepared};
use super::splitting_words::{Told, kinds, sentence};
use super::splitting_working::working;
use super::watch::Watch;

/// Strengths below this share of the whole are rounding.
pub const LEAST_STRENGTH: f64 = 1e-12;

/// The answer by diagonalisation.
pub fn answer(document: &Document, watch: &mut Watch) -> Result<Splitting, Problem> {
    let ready = prepared(document, watch)?;
    let field = document.field.as_ref();
    if let (Some(true), Err(problem)) = (field.map(|f| f.diamagnetic), &ready.diamagnetic) {
        let way = problem.clone().way("Leave it out", "false");
        return Err(way.at("/field/diamagnetic"));
    }
    let tesla = field.map_or(0.0, |field| field.tesla);
    let line = line_of(document, &ready);
    let mut states = Vec::new();
    let mut components = Vec::new();
    let (mut resonances, mut resonances_left_out) = (Vec::new(), 0);
    let searched = ready.searched(document)?;
    for pass in &ready.passes {
        let now = fields(pass, tesla)?;
        resonances_left_out +=
            splitting_resonances::add(document, &ready, (pass, &now), &mut resonances)?;
        let name = isotope_of(document, pass);
        for ((set, split), at) in ready.sets.iter().zip(&pass.splits).zip(&now) {
            for place in ready.order(set, split, document.line.is_some()) {
                states.extend(state_row(document, set, split, at, place, name.as_ref()));
            }
        }
        for (number, join) in ready.joins.iter().enumerate() {
            let rows = Rows {
                document,
                ready: &ready,
                pass,
                join,
                number,
                now: &now,
                line: line.as_ref(),
                isotope: name.clone(),
            };
            components.extend(rows.rows(field));
        }
    }
    if let (Some((upper, lower)), true, None) = (
        document.ends(ready.turned),
        components.is_empty(),
        &ready.no_components,
    ) {
        return Err(refused(document, upper, lower));
    }
    resonances_left_out += splitting_resonances::first(&mut resonances);
    // With a line the upper end first, as one reads it.
    sort_by(&mut states, |a, b| side_order(a).cmp(&side_order(b)));
    let counted = pattern(&components, line.as_ref(), tesla);
    let groups = groups(&components);
    let linear = linear(field, &components, searched.departs_at);
    let nucleus = nucleus_row(document, &ready);
    let estimate = estimate_row(document, &ready);
    let isotopes = isotope_rows(document, &ready);
    let diamagnetic = field.map(|field| DiamagneticRow {
        included: field.diamagnetic,
        largest: ready
            .sets
            .iter()
            .filter_map(|set| set.diamagnetic_at_one)
            .fold(None, |most: Option<f64>, at| {
                Some(most.unwrap_or(0.0).max(at))
            })
            .map(|at_one| at_one * tesla * tesla),
    });
    let told = Told {
        document,
        ready: &ready,
        line: line.as_ref(),
        states: &states,
        components: &components,
        groups,
        pattern: counted,
        linear: linear.as_ref(),
        searched: &searched,
        diamagnetic: diamagnetic.as_ref(),
        estimate: estimate.as_ref(),
    };
    let mut around = super::answer::Around::saying(sentence(&told));
    around.working = working(&told);
    around.limits = limits(&told);
    around.cautions = cautions(field);
    let nm = line.as_ref().and_then(|line| line.wavelength_nm);
    around.cautions.extend(document.source_cautions(nm));
    around.kinds = kinds(&told);
    let shown: Vec<Shown> = components
        .iter()
        .map(|c| Shown {
            polarisation: c.polarisation,
            // From the centre of its own isotope's line.
            offset: c.offset - c.moved,
            seen: c.seen,
        })
        .collect();
    let plain = Splitting::new("full", around);
    Ok(Splitting {
        conversions: plain.conversions.at(nm),
        groups,
        field: field.map(|field| field_of(field, keeps(field, &shown))),
        line,
        diamagnetic,
        nucleus,
        estimate,
        isotopes,
        states,
        components,
        no_components: ready.no_components.clone(),
        linear,
        positions: counted.all,
        positions_seen: counted.seen,
        pattern: counted.words(),
        crossings: searched.crossings.clone(),
        crossings_left_out: searched.crossings_left_out,
        component_crossings: searched.component_crossings.clone(),
        component_crossings_left_out: searched.component_crossings_left_out,
        resonances,
        resonances_left_out,
        ..plain
    })
}

fn side_order(row: &StateRow) -> u8 {
    u8::from(row.side == Some("lower"))
}

/// The states of every set of a pass in a field.
pub fn fields(pass: &Pass, tesla: f64) -> Result<Vec<AtField>, Problem> {
    let found = pass.splits.iter().map(|split| split.at(tesla));
    found
        .collect::<Result<Vec<_>, _>>()
        .map_err(|p| p.at("/field/flux_density"))
}

/// The name of a pass's isotope, where there are several.
pub fn isotope_of(document: &Document, pass: &Pass) -> Option<Shared> {
    let nuclear = document.nuclei.get(pass.nuclear?)?;
    let name = nuclear
        .name
        .as_deref()
        .filter(|_| document.isotopes_listed)?;
    Some(Shared(name.into()))
}

/// Share of the light of a pass, from 0 to 1.
pub fn share_of(document: &Document, pass: &Pass) -> f64 {
    let own = pass.nuclear.and_then(|place| document.nuclei.get(place));
    let share = |nuclear: &Nuclear| nuclear.share.map_or(1.0, |(share, _)| share);
    let whole: f64 = document.nuclei.iter().map(share).sum();
    match own {
        Some(own) if whole > 0.0 => share(own) / whole,
        _ => 1.0,
    }
}

/// Where the lines of a pass lie beside the others, cm⁻¹.
pub fn shift_of(document: &Document, pass: &Pass) -> f64 {
    let own = pass.nuclear.and_then(|place| document.nuclei.get(place));
    own.map_or(0.0, |nuclear| nuclear.shift / MHZ_PER_WAVENUMBER)
}

fn state_row(
    document: &Document,
    set: &Set,
    split: &Split,
    at: &AtField,
    place: usize,
    isotope: Option<&Shared>,
) -> Option<StateRow> {
    let state = split.states().get(place)?;
    let level = set.levels.get(state.level)?;
    let shift = *at.shifts.get(place)?;
    let slope = *at.slopes.get(place)?;
    let lorentz = match document.nuclei.is_empty() && document.level_alone.is_none() {
        true if at.tesla > 0.0 => Some(shift / (BOHR_MAGNETON_WAVENUMBER.value * at.tesla)),
        true => Some(slope / BOHR_MAGNETON_WAVENUMBER.value),
        false => None,
    };
    let doubled = TwiceJ::from_doubled;
    let coupled = state.two_m_i.is_some();
    Some(StateRow {
        name: state_name(level, state, isotope),
        rich: state_rich(level, state),
        configuration: level.configuration.clone(),
        level: level.label.clone(),
        j: level.j,
        m: doubled(state.two_m),
        f: state.two_f.map(doubled),
        m_j: state.two_m_j.filter(|_| coupled).map(doubled),
        m_i: state.two_m_i.map(doubled),
        // A level alone counts from its energy without nucleus and field.
        energy: at.energies.get(place).copied(),
        shift,
        slope,
        lorentz,
        side: level.side(),
        isotope: isotope.cloned(),
    })
}

/// π, σ+ … by M_upper − M_lower.
pub fn polarisation(q: i32) -> &'static str {
    match q {
        0 => "pi",
        1 => "sigma+",
        -1 => "sigma-",
        2 => "delta-M+2",
        _ => "delta-M-2",
    }
}

/// A component whose ends are told apart by their energies.
pub struct Ends<'a> {
    /// Upper and lower level and state, with their places in the answer of their sets.
    pub upper: (&'a SetLevel, &'a State, usize),
    pub lower: (&'a SetLevel, &'a State, usize),
    /// Whether the join's upper set holds the lower end.
    pub turned: bool,
    /// M_upper − M_lower.
    pub q: i32,
}

/// The ends of a component; without a line the join's upper set may hold the lower level.
pub fn ends<'a>(
    document: &Document,
    ready: &'a Prepared,
    pass: &'a Pass,
    join: &Join,
    component: &crate::splitting::in_field::Component,
) -> Option<Ends<'a>> {
    let of = |set: usize, place: usize| {
        let state = pass.splits.get(set)?.states().get(place)?;
        Some((ready.sets.get(set)?.levels.get(state.level)?, state, place))
    };
    let upper = of(join.upper, component.upper)?;
    let lower = of(join.lower, component.lower)?;
    let turned = document.line.is_none() && upper.0.energy < lower.0.energy;
    Some(match turned {
        false => Ends {
            upper,
            lower,
            turned,
            q: component.q,
        },
        true => Ends {
            upper: lower,
            lower: upper,
            turned,
            q: -component.q,
        },
    })
}

/// Components of one join and one nucleus.
struct Rows<'a> {
    document: &'a Document,
    ready: &'a Prepared,
    pass: &'a Pass,
    join: &'a Join,
    number: usize,
    now: &'a [AtField],
    line: Option<&'a LineOf>,
    isotope: Option<Shared>,
}

impl Rows<'_> {
    fn rows(&self, field: Option<&Field>) -> Vec<ComponentRow> {
        let Some(components) = self.pass.components.get(self.number) else {
            return Vec::new();
        };
        let (Some(above), Some(below)) =
            (self.now.get(self.join.upper), self.now.get(self.join.lower))
        else {
            return Vec::new();
        };
        let strengths = components.strengths(above, below);
        let whole: f64 = strengths.iter().sum();
        if whole <= 0.0 {
            return Vec::new();
        }
        let share = share_of(self.document, self.pass);
        let mut rows = Vec::with_capacity(strengths.len());
        for (place, strength) in strengths.iter().enumerate() {
            let strength = strength / whole;
            if strength > LEAST_STRENGTH {
                rows.extend(self.row(place, strength * share, field));
            }
        }
        rows
    }

    fn row(&self, place: usize, strength: f64, field: Option<&Field>) -> Option<ComponentRow> {
        let component = self.pass.components.get(self.number)?.list().get(place)?;
        let ends = ends(self.document, self.ready, self.pass, self.join, component)?;
        let (set_up, set_low) = match ends.turned {
            false => (self.join.upper, self.join.lower),
            true => (self.join.lower, self.join.upper),
        };
        let value = |fields: &[AtField], of: fn(&AtField) -> &Vec<f64>| -> Option<f64> {
            let up = *of(fields.get(set_up)?).get(ends.upper.2)?;
            let low = *of(fields.get(set_low)?).get(ends.lower.2)?;
            Some(up - low)
        };
        let own = match (
            self.line.and_then(|line| line.centre),
            ends.upper.0.energy,
            ends.lower.0.energy,
        ) {
            (Some(centre), Some(up), Some(low)) => (up - low) - centre,
            _ => 0.0,
        };
        let away = own + shift_of(self.document, self.pass);
        let tesla = self.now.first().map_or(0.0, |at| at.tesla);
        let offset = value(self.now, |at| &at.shifts)? + away + 0.0;
        let linear = self.pass.linear.get(self.number);
        let linear = linear.and_then(|linear| linear.offset(place, tesla));
        // Without a line the join's upper set may hold the lower end.
        let linear = linear.map(|linear| if ends.turned { -linear } else { linear } + away + 0.0);
        let plain = self.document.nuclei.is_empty();
        let lorentz = match plain {
            true if tesla > 0.0 => {
                Some((offset - away) / (BOHR_MAGNETON_WAVENUMBER.value * tesla) + 0.0)
            }
            // In the limit of no field.
            true => Some(value(self.now, |at| &at.slopes)? / BOHR_MAGNETON_WAVENUMBER.value + 0.0),
            false => None,
        };
        let look = |angle: f64, polariser: Polariser| {
            strength * weight(self.join.multipole, ends.q, angle, polariser)
        };
        let doubled = TwiceJ::from_doubled;
        let name = |end: &(&SetLevel, &State, usize)| {
            Shared(state_name(end.0, end.1, self.isotope.as_ref()).into())
        };
        Some(ComponentRow {
            polarisation: polarisation(ends.q),
            upper: name(&ends.upper),
            lower: name(&ends.lower),
            level_upper: ends.upper.0.label.clone(),
            level_lower: ends.lower.0.label.clone(),
            m_upper: doubled(ends.upper.1.two_m),
            m_lower: doubled(ends.lower.1.two_m),
            f_upper: ends.upper.1.two_f.map(doubled),
            f_lower: ends.lower.1.two_f.map(doubled),
            lorentz,
            offset,
            ghz: offset * MHZ_PER_WAVENUMBER / 1e3,
            pm: self
                .line
                .and_then(|line| pm_offset(line.wavelength_nm?, offset)),
            strength,
            along: look(0.0, Polariser::None),
            across: look(90.0, Polariser::None),
            // Without a field there is no direction to look from.
            seen: field.map_or(strength, |field| look(field.angle_degrees, field.polariser)),
            linear,
            isotope: self.isotope.clone(),
            moved: shift_of(self.document, self.pass),
        })
    }
}

fn linear(
    field: Option<&Field>,
    components: &[ComponentRow],
    departs_at: Option<f64>,
) -> Option<LinearRow> {
    let field = field.filter(|_| !components.is_empty())?;
    let differences = components
        .iter()
        .map(|c| (c.offset - c.linear.unwrap_or(c.offset)).abs());
    Some(LinearRow {
        tolerance: field.tolerance_words(),
        departs_at,
        largest_difference: differences.fold(0.0, f64::max),
    })
}
