//! The linear pattern of one line: g M alone, for levels whose energies are not known.

use crate::problem::Problem;
use crate::quantity::TwiceJ;
use crate::radiation::Multipole;
use crate::splitting::seen::{effective_g, weight};
use crate::splitting::weak_field::{self, SplitLevel};
use crate::terms::lande;

use super::answer::{Around, Working};
use super::document::{Document, LevelOf};
use super::field::Field;
use super::formula::{Formula, fraction, name, number, operator, row, sub, sup};
use super::levels_rows::Shared;
use super::line_ends::End;
use super::line_wavelength::line_wavelength;
use super::pairs;
use super::rich::{Kind, Rich, six_digits};
use super::splitting::{cautions, field_of};
use super::splitting_keeps::{Shown, keeps};
use super::splitting_pattern::{Pattern, bright, pattern as pattern_of, widest};
use super::splitting_rows::{ComponentRow, LineOf, Splitting, StateRow};
use super::splitting_words::{in_field, left_out_words, offset_words, pattern_verb};

/// The two levels of the line with their g.
struct Ends<'a> {
    upper: &'a LevelOf,
    lower: &'a LevelOf,
    above: SplitLevel,
    below: SplitLevel,
}

/// The answer by g M alone.
pub fn answer(document: &Document) -> Result<Splitting, Problem> {
    let (Some((upper_end, lower_end)), Some(field)) = (&document.line, &document.field) else {
        return Err(Problem::new(
            "needs-a-line",
            "This question needs a line and a field.",
            0,
            0,
        )
        .at("/line"));
    };
    let (Some(upper), Some(lower)) = (upper_end.as_level(), lower_end.as_level()) else {
        return Err(needs_energies(document));
    };
    let multipole = multipole(document, &upper, &lower)?;
    let (g_upper, g_lower) = (g(&upper), g(&lower));
    let split = |of: &LevelOf, g: Option<f64>| SplitLevel {
        j: of.level.j,
        g: g.unwrap_or(0.0),
    };
    let ends = Ends {
        upper: &upper,
        lower: &lower,
        above: split(&upper, g_upper),
        below: split(&lower, g_lower),
    };
    let pattern =
        weak_field::pattern(ends.above, ends.below, multipole).map_err(|p| p.at("/line"))?;
    let wavelength = line_wavelength(document, &upper, &lower);
    let nm = wavelength.map(|(nm, _)| nm);
    let mut states = Vec::new();
    for (of, level, side) in [(&upper, ends.above, "upper"), (&lower, ends.below, "lower")] {
        states.extend(state_rows(document, of, level, field, side)?);
    }
    let components = component_rows(document, &ends, &pattern, field, nm)?;
    let (one, other) = (upper.level.j.value(), lower.level.j.value());
    let effective = effective_g(one, ends.above.g, other, ends.below.g);
    let line = LineOf {
        upper: document.level_label(&upper),
        lower: document.level_label(&lower),
        upper_rich: document.level_rich(&upper),
        lower_rich: document.level_rich(&lower),
        of: "level",
        g_upper,
        g_lower,
        g_effective: (multipole != Multipole::E2).then_some(effective),
        multipole,
        wavelength_nm: nm,
        wavelength_kind: wavelength.map(|(_, kind)| kind),
        centre: None,
    };
    let counted = pattern_of(&components, Some(&line), field.tesla);
    let mut around = Around::saying(
        sentence(&line, document, &components, counted)
            .say(left_out_words(document, None))
            .say("."),
    );
    around.working = working(&line, &ends, field, &components);
    around.limits = limits(document, field, &components, wavelength);
    around.cautions = cautions(Some(field));
    around.cautions.extend(document.source_cautions(nm));
    around.kinds = [
        ("components.lorentz", Kind::Computed),
        ("components.offset", Kind::Computed),
        ("components.ghz", Kind::Computed),
        ("components.pm", Kind::Computed),
        ("components.linear", Kind::Computed),
        ("components.strength", Kind::Exact),
        ("components.along", Kind::Exact),
        ("components.across", Kind::Exact),
        ("components.seen", Kind::Exact),
        ("components.M_upper", Kind::Exact),
        ("components.M_lower", Kind::Exact),
        ("positions", Kind::Exact),
        ("groups", Kind::Exact),
        ("crossings_left_out", Kind::Exact),
        ("component_crossings_left_out", Kind::Exact),
        ("resonances_left_out", Kind::Exact),
        ("conversions.ghz_per_wavenumber", Kind::Exact),
        ("conversions.mu_b_per_tesla", Kind::Measured),
        ("conversions.pm_per_wavenumber", Kind::Computed),
        ("field.up_to", Kind::Entered),
        ("positions_seen", Kind::Exact),
        ("states.M", Kind::Exact),
        ("states.shift", Kind::Computed),
        ("states.slope", Kind::Computed),
        ("states.lorentz", Kind::Computed),
        ("line.g_upper", Kind::Computed),
        ("line.g_lower", Kind::Computed),
        ("line.g_effective", Kind::Computed),
        ("field.angle_degrees", Kind::Entered),
        ("field.tesla", Kind::Entered),
        (
            "line.wavelength_nm",
            wavelength.map_or(Kind::Entered, |(_, kind)| kind),
        ),
    ]
    .into_iter()
    .collect();
    let shown = components.iter().map(|c| Shown {
        polarisation: c.polarisation,
        offset: c.offset,
        seen: c.seen,
    });
    let plain = Splitting::new("linear", around);
    Ok(Splitting {
        conversions: plain.conversions.at(nm),
        groups: counted.seen,
        field: Some(field_of(field, keeps(field, &shown.collect::<Vec<_>>()))),
        line: Some(line),
        states,
        components,
        positions: counted.all,
        positions_seen: counted.seen,
        pattern: counted.words(),
        ..plain
    })
}

fn needs_energies(document: &Document) -> Problem {
    let way = pairs::first_allowed(document);
    let problem = Problem::new(
        "line-needs-energies",
        "A line between whole terms or configurations needs the energies of their levels.",
        0,
        0,
    )
    .bound("Name an atom or give parameters such as zeta(3p), or name one level at each end.")
    .at("/line/upper");
    match way {
        Some((upper, _)) => {
            let name = document.level_label(&upper);
            problem.way(format!("Use {name}"), name)
        }
        None => problem,
    }
}

fn state_rows(
    document: &Document,
    of: &LevelOf,
    level: SplitLevel,
    field: &Field,
    side: &'static str,
) -> Result<Vec<StateRow>, Problem> {
    let entry = document.entries.get(of.entry);
    let configuration = Shared(entry.map(|e| e.label.as_str()).unwrap_or_default().into());
    let label = Shared(document.level_label(of).into());
    let rich = document.level_rich(of);
    let states = weak_field::states(level).map_err(|p| p.at("/line"))?;
    let mut rows = Vec::with_capacity(states.len());
    for (m, lorentz) in states {
        let shift = cm(lorentz, field.tesla)?;
        rows.push(StateRow {
            name: format!("{} M {m}", label.0),
            rich: rich.clone().say(format!(", M = {m}").replace('-', "−")),
            configuration: Some(configuration.clone()),
            level: label.clone(),
            j: level.j,
            m,
            f: None,
            m_j: None,
            m_i: None,
            energy: None,
            shift,
            slope: cm(lorentz, 1.0)?,
            lorentz: Some(lorentz),
            side: Some(side),
            isotope: None,
        });
    }
    Ok(rows)
}

/// x μ_B B/hc in cm⁻¹.
fn cm(lorentz: f64, tesla: f64) -> Result<f64, Problem> {
    let offset = weak_field::offset(lorentz, tesla, None);
    Ok(offset.map_err(|p| p.at("/field/flux_density"))?.wavenumber)
}

fn component_rows(
    document: &Document,
    ends: &Ends,
    pattern: &weak_field::Pattern,
    field: &Field,
    nm: Option<f64>,
) -> Result<Vec<ComponentRow>, Problem> {
    let [above, below] = [ends.upper, ends.lower].map(|of| Shared(document.level_label(of).into()));
    let mut rows = Vec::with_capacity(pattern.components.len());
    for component in &pattern.components {
        let offset = weak_field::offset(component.lorentz, field.tesla, nm)
            .map_err(|p| p.at("/field/flux_density"))?;
        let (m, n) = (component.m_upper, component.m_lower);
        rows.push(ComponentRow {
            polarisation: component.polarisation.name(),
            upper: Shared(format!("{} M {m}", above.0).into()),
            lower: Shared(format!("{} M {n}", below.0).into()),
            level_upper: above.clone(),
            level_lower: below.clone(),
            m_upper: m,
            m_lower: n,
            f_upper: None,
            f_lower: None,
            lorentz: Some(component.lorentz),
            offset: offset.wavenumber,
            ghz: offset.frequency,
            pm: offset.wavelength,
            strength: component.strength,
            along: component.along(),
            across: component.across(),
            seen: component.strength
                * weight(
                    pattern.multipole,
                    component.polarisation.change_of_m(),
                    field.angle_degrees,
                    field.polariser,
                ),
            linear: Some(offset.wavenumber),
            isotope: None,
            moved: 0.0,
        });
    }
    Ok(rows)
}

fn g(of: &LevelOf) -> Option<f64> {
    lande::ls(of.level.term, of.level.j)
}

/// The strongest multipole that is allowed: E1, M1, E2; otherwise the rule that refuses.
fn multipole(document: &Document, upper: &LevelOf, lower: &LevelOf) -> Result<Multipole, Problem> {
    let verdicts = pairs::judge(document, upper, lower)?;
    for wanted in Multipole::ALL {
        if verdicts
            .iter()
            .any(|(m, rule)| *m == wanted && rule.is_none())
        {
            return Ok(wanted);
        }
    }
    // An approximate rule does not stop a line that is seen; parity and J tell which multipole it is.
    for wanted in Multipole::ALL {
        if verdicts
            .iter()
            .any(|(m, rule)| *m == wanted && rule.is_some_and(|r| !r.is_rigorous()))
        {
            return Ok(wanted);
        }
    }
    let (upper, lower) = (End::level(upper.clone()), End::level(lower.clone()));
    Err(refused(document, &upper, &lower))
}

/// The fault of a line that there is not, with the rules against it where its ends are levels.
pub fn refused(document: &Document, upper: &End, lower: &End) -> Problem {
    let levels = upper.as_level().zip(lower.as_level());
    let verdicts = levels.and_then(|(above, below)| pairs::judge(document, &above, &below).ok());
    let reasons = verdicts.into_iter().flatten();
    let reasons: Vec<String> = reasons
        .filter_map(|(m, rule)| rule.map(|rule| format!("{m}: {rule}")))
        .collect();
    let bound = match reasons.is_empty() {
        true => {
            "Neither E1 nor M1 nor E2 joins a level of one end with one of the other".to_owned()
        }
        false => reasons.join("; "),
    };
    Problem::new(
        "line-refused",
        format!(
            "There is no line between {} and {}.",
            document.end_label(lower),
            document.end_label(upper)
        ),
        0,
        0,
    )
    .bound(format!("{bound}."))
    .at("/line")
}

fn sentence(line: &LineOf, document: &Document, rows: &[ComponentRow], pattern: Pattern) -> Rich {
    let named = |say: Rich| {
        say.say(format!("the {} line from ", line.multipole))
            .then(&line.upper_rich)
            .say(" to ")
            .then(&line.lower_rich)
    };
    let words = pattern.words();
    if document.field.as_ref().is_some_and(|f| f.tesla == 0.0) {
        return named(Rich::words("Without a field "))
            .say(format!(" does not split; any field makes {words} of it"));
    }
    let say = named(in_field(document, true))
        .say(pattern_verb(pattern, false))
        .say(words);
    match widest(&bright(rows)) {
        0.0 if pattern.seen == 0 => say,
        0.0 => say.say(", which stays where the line is"),
        widest => {
            say.say(offset_words(pattern))
                .number(six_digits(widest), Some("cm-1"), Kind::Computed)
        }
    }
}

fn working(line: &LineOf, ends: &Ends, field: &Field, components: &[ComponentRow]) -> Vec<Working> {
    let shift = |upper: [Formula; 2], lower: [Formula; 2]| {
        let mut parts = vec![operator("(")];
        parts.extend(upper);
        parts.push(operator("−"));
        parts.extend(lower);
        parts.push(operator(")"));
        parts
    };
    let mut formula = vec![operator("Δ"), name("σ"), operator("=")];
    formula.extend(shift(
        [sub(name("g"), name("upper")), sub(name("M"), name("upper"))],
        [sub(name("g"), name("lower")), sub(name("M"), name("lower"))],
    ));
    formula.extend([
        fraction(sub(name("μ"), name("B")), row([name("h"), name("c")])),
        name("B"),
    ]);
    let offset = Working::new(
        "Offset of a component",
        row(formula),
        "Condon & Shortley, The Theory of Atomic Spectra (1935), ch. XVI; the Bohr magneton in cm⁻¹ per tesla from CODATA 2022",
    );
    let strength = Working::new(
        "Strength of a component",
        row([
            name("s"),
            operator("="),
            sup(
                three_j(["J", "k", "J′", "−M", "q", "M′"].map(str::to_owned)),
                number(2),
            ),
        ]),
        "Wigner–Eckart theorem; Condon & Shortley (1935), ch. XVI",
    );
    let Some(case) = components
        .iter()
        .max_by(|a, b| a.offset.total_cmp(&b.offset))
    else {
        return vec![offset, strength];
    };
    let of_case = format!(" for M from {} to {}", case.m_upper, case.m_lower).replace('-', "−");
    let mut numbers = shift(
        [number(line.g_upper.unwrap_or(0.0)), bracketed(case.m_upper)],
        [number(line.g_lower.unwrap_or(0.0)), bracketed(case.m_lower)],
    );
    numbers.extend([
        operator("×"),
        number(crate::constants::BOHR_MAGNETON_WAVENUMBER.value),
        operator("×"),
        number(field.tesla),
    ]);
    let (up, low) = (ends.above.j, ends.below.j);
    let (m, n) = (case.m_upper.doubled(), case.m_lower.doubled());
    let symbol = three_j(
        [
            up.doubled(),
            2 * i32::try_from(line.multipole.rank()).unwrap_or(1),
            low.doubled(),
            -m,
            m - n,
            n,
        ]
        .map(|two| TwiceJ::from_doubled(two).to_string().replace('-', "−")),
    );
    vec![
        offset.numbers(
            row(numbers),
            Rich::new()
                .number(case.offset, Some("cm-1"), Kind::Computed)
                .say(of_case.clone()),
        ),
        strength.numbers(
            sup(symbol, number(2)),
            Rich::new()
                .number(case.strength, None, Kind::Exact)
                .say(of_case),
        ),
    ]
}

/// (value), so that a product with a negative number can be read.
fn bracketed(m: TwiceJ) -> Formula {
    row([operator("("), number(m), operator(")")])
}

fn three_j(cells: [String; 6]) -> Formula {
    let [a, b, c, d, e, f] = cells;
    Formula::ThreeJ([[a, b, c], [d, e, f]])
}

fn limits(
    document: &Document,
    field: &Field,
    components: &[ComponentRow],
    wavelength: Option<(f64, Kind)>,
) -> Vec<String> {
    let widest = components
        .iter()
        .map(|c| c.offset.abs())
        .fold(0.0, f64::max);
    let mut limits = vec![
        format!(
            "The field is taken as weak: offsets grow in proportion to it, which holds while {widest:.4} cm⁻¹ is small beside the distance to neighbouring levels. Quadratic shifts and crossings are left out."
        ),
        "The g factors are those of pure LS coupling; measured ones differ, mostly in heavy atoms. The nucleus is left out: hyperfine structure comparable with the offsets changes the pattern.".to_owned(),
    ];
    if let Some((nm, Kind::Computed)) = wavelength {
        limits.push(format!("Nobody entered the wavelength; it is computed, {nm:.1} nm in vacuum, and the offsets in pm are as far off as twice its error."));
    }
    if let Some((_, Kind::Entered)) = wavelength {
        limits.push("The wavelength is taken as that in vacuum; typed in air instead, the offsets in pm would be 0.06 % too small.".to_owned());
    }
    if field.angle_degrees == 0.0 {
        limits.push("Along the field the π components send no light: only σ is seen.".to_owned());
    }
    limits.extend(document.unused());
    limits
}
