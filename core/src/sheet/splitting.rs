//! How does it split? The linear pattern of one line in a weak field.

use serde::Serialize;

use crate::problem::Problem;
use crate::quantity::TwiceJ;
use crate::radiation::Multipole;
use crate::splitting::weak_field::{self, SplitLevel};
use crate::terms::lande;

use super::answer::{Around, Working};
use super::document::{Document, Field, LevelOf};
use super::formula::{Formula, name, number, operator, row, sub, sup};
use super::pairs;
use super::rich::{Kind, Rich};

/// The answer.
#[derive(Debug, Serialize)]
pub struct Splitting {
    #[serde(flatten)]
    around: Around,
    line: LineOf,
    field: FieldOf,
    states: Vec<StateRow>,
    components: Vec<ComponentRow>,
    positions: usize,
    pattern: String,
}

#[derive(Debug, Serialize)]
struct LineOf {
    upper: String,
    lower: String,
    upper_rich: Rich,
    lower_rich: Rich,
    g_upper: Option<f64>,
    g_lower: Option<f64>,
    multipole: Multipole,
    wavelength_nm: Option<f64>,
}

#[derive(Debug, Serialize)]
struct FieldOf {
    tesla: f64,
    text: String,
    angle_degrees: f64,
    view: &'static str,
}

#[derive(Debug, Serialize)]
struct StateRow {
    configuration: String,
    level: String,
    #[serde(rename = "M")]
    m: TwiceJ,
    /// cm⁻¹ from the level without field.
    energy: f64,
    lorentz: f64,
}

#[derive(Debug, Serialize)]
struct ComponentRow {
    polarisation: &'static str,
    #[serde(rename = "M_upper")]
    m_upper: TwiceJ,
    #[serde(rename = "M_lower")]
    m_lower: TwiceJ,
    lorentz: f64,
    offset: f64,
    ghz: f64,
    pm: Option<f64>,
    strength: f64,
    along: f64,
    across: f64,
    seen: f64,
}

/// The answer to *How does it split?*
pub fn answer(document: &Document) -> Result<Splitting, Problem> {
    if let Some(lack) = document.lacks(super::Question::Splitting) {
        return Err(lack.problem());
    }
    let (Some((upper, lower)), Some(field)) = (&document.line, &document.field) else {
        return Err(Problem::new(
            "needs-a-line",
            "This question needs a line and a field.",
            0,
            0,
        )
        .at("/line"));
    };
    let multipole = multipole(document, upper, lower)?;
    let (g_upper, g_lower) = (g(upper), g(lower));
    let split = |of: &LevelOf, g: Option<f64>| SplitLevel {
        j: of.level.j,
        g: g.unwrap_or(0.0),
    };
    let (above, below) = (split(upper, g_upper), split(lower, g_lower));
    let pattern = weak_field::pattern(above, below, multipole).map_err(|p| p.at("/line"))?;
    let mut components = Vec::new();
    for component in &pattern.components {
        let offset = weak_field::offset(component.lorentz, field.tesla, document.wavelength_nm)
            .map_err(|p| p.at("/field/flux_density"))?;
        components.push(ComponentRow {
            polarisation: component.polarisation.name(),
            m_upper: component.m_upper,
            m_lower: component.m_lower,
            lorentz: component.lorentz,
            offset: offset.wavenumber,
            ghz: offset.frequency,
            pm: offset.wavelength,
            strength: component.strength,
            along: component.along(),
            across: component.across(),
            seen: component.seen(field.angle_degrees),
        });
    }
    let mut states = Vec::new();
    for (of, level) in [(upper, above), (lower, below)] {
        let configuration = document
            .entries
            .get(of.entry)
            .map(|e| e.label.clone())
            .unwrap_or_default();
        for (m, lorentz) in weak_field::states(level).map_err(|p| p.at("/line"))? {
            let offset = weak_field::offset(lorentz, field.tesla, None)
                .map_err(|p| p.at("/field/flux_density"))?;
            states.push(StateRow {
                configuration: configuration.clone(),
                level: document.level_label(of),
                m,
                energy: offset.wavenumber,
                lorentz,
            });
        }
    }
    let positions = pattern.positions().len();
    let line = LineOf {
        upper: document.level_label(upper),
        lower: document.level_label(lower),
        upper_rich: document.level_rich(upper),
        lower_rich: document.level_rich(lower),
        g_upper,
        g_lower,
        multipole,
        wavelength_nm: document.wavelength_nm,
    };
    let described = describe(positions, pattern.is_triplet());
    let mut around = Around::saying(sentence(&line, field, &components, &described));
    around.working = working(&line, field, &components);
    around.limits = limits(document, field, &components);
    around.cautions = cautions(field);
    around.kinds = [
        ("components.lorentz", Kind::Computed),
        ("components.offset", Kind::Computed),
        ("components.ghz", Kind::Computed),
        ("components.pm", Kind::Computed),
        ("components.strength", Kind::Exact),
        ("components.along", Kind::Exact),
        ("components.across", Kind::Exact),
        ("components.seen", Kind::Exact),
        ("components.M", Kind::Exact),
        ("states.energy", Kind::Computed),
        ("line.g", Kind::Computed),
        ("field.tesla", Kind::Entered),
        ("line.wavelength_nm", Kind::Entered),
    ]
    .into_iter()
    .collect();
    Ok(Splitting {
        around,
        line,
        field: FieldOf {
            tesla: field.tesla,
            text: field.text.clone(),
            angle_degrees: field.angle_degrees,
            view: match field.angle_degrees {
                0.0 => "along",
                90.0 => "across",
                _ => "angle",
            },
        },
        states,
        components,
        positions,
        pattern: described,
    })
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
    let reason: Vec<String> = verdicts
        .iter()
        .filter_map(|(m, rule)| rule.map(|rule| format!("{m}: {rule}")))
        .collect();
    Err(Problem::new(
        "line-refused",
        format!(
            "There is no line between {} and {}.",
            document.level_label(lower),
            document.level_label(upper)
        ),
        0,
        0,
    )
    .bound(format!("{}.", reason.join("; ")))
    .at("/line"))
}

fn describe(positions: usize, triplet: bool) -> String {
    if triplet {
        "3 components, the normal triplet".to_owned()
    } else {
        format!("{positions} components")
    }
}

fn sentence(line: &LineOf, field: &Field, components: &[ComponentRow], pattern: &str) -> Rich {
    let widest = components
        .iter()
        .map(|c| c.offset.abs())
        .fold(0.0, f64::max);
    let unseen = components.iter().all(|c| c.seen == 0.0);
    let say = Rich::new()
        .then(&line.lower_rich)
        .say(" to ")
        .then(&line.upper_rich)
        .say(" splits into ")
        .say(pattern.to_owned())
        .say(" in ")
        .number(field.tesla, Some("T"), Kind::Entered);
    if unseen {
        return say.say(".");
    }
    say.say(", the outermost ")
        .number(widest, Some("cm-1"), Kind::Computed)
        .say(" from the centre.")
}

fn working(line: &LineOf, field: &Field, components: &[ComponentRow]) -> Vec<Working> {
    let formula = row([
        operator("Δ"),
        name("σ"),
        operator("="),
        operator("("),
        sub(name("g"), name("upper")),
        sub(name("M"), name("upper")),
        operator("−"),
        sub(name("g"), name("lower")),
        sub(name("M"), name("lower")),
        operator(")"),
        sub(name("μ"), name("B")),
        name("B"),
    ]);
    let step = Working::new(
        "Offset of a component",
        formula,
        "Condon & Shortley, The Theory of Atomic Spectra (1935), ch. XVI; μ_B/hc from CODATA 2022",
    );
    let case = components
        .iter()
        .max_by(|a, b| a.offset.total_cmp(&b.offset));
    let step = match case {
        Some(c) => step.numbers(
            row([
                operator("("),
                number(line.g_upper.unwrap_or(0.0)),
                operator("×"),
                number(c.m_upper),
                operator("−"),
                number(line.g_lower.unwrap_or(0.0)),
                operator("×"),
                operator("("),
                number(c.m_lower),
                operator(")"),
                operator(")"),
                operator("×"),
                number(crate::constants::BOHR_MAGNETON_WAVENUMBER.value),
                operator("×"),
                number(field.tesla),
            ]),
            Rich::new().number(c.offset, Some("cm-1"), Kind::Computed),
        ),
        None => step,
    };
    let strength = Working::new(
        "Strength of a component",
        row([
            name("s"),
            operator("="),
            sup(
                Formula::ThreeJ(
                    [["J", "k", "J′"], ["−M", "q", "M′"]].map(|r| r.map(str::to_owned)),
                ),
                number(2),
            ),
        ]),
        "Wigner–Eckart theorem; E. U. Condon & G. H. Shortley (1935), ch. XVI",
    );
    vec![step, strength]
}

fn limits(document: &Document, field: &Field, components: &[ComponentRow]) -> Vec<String> {
    let widest = components
        .iter()
        .map(|c| c.offset.abs())
        .fold(0.0, f64::max);
    let mut limits = vec![
        format!(
            "The field is taken as weak: offsets grow in proportion to it, which holds while {widest:.4} cm-1 is small beside the distance to neighbouring levels. Quadratic shifts and crossings are left out."
        ),
        "g factors are those of pure LS coupling; measured ones differ, mostly in heavy atoms. The nucleus is left out: hyperfine structure comparable with the offsets changes the pattern.".to_owned(),
    ];
    if document.wavelength_nm.is_some() {
        limits.push("The wavelength is taken as that in vacuum; typed in air instead, the offsets in pm would be 0.06 % too small.".to_owned());
    }
    if field.angle_degrees == 0.0 {
        limits.push("Along the field the π components send no light: only σ is seen.".to_owned());
    }
    limits.extend(document.unused());
    limits
}

fn cautions(field: &Field) -> Vec<&'static str> {
    let mut cautions = Vec::new();
    if field.tesla > 0.0 {
        cautions.push(
            "Strong magnets pull tools and disturb implanted devices; a limit of 0.5 mT for people who carry one is common practice. Local codes and licensed practice come first.",
        );
    }
    if field.tesla > 2.0 {
        cautions.push(
            "Fields this strong usually come from superconducting or pulsed magnets: cryogens can burn, and displace the air; pulsed coils store lethal energy. Local codes and licensed practice come first.",
        );
    }
    cautions
}
