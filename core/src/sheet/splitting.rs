//! How does it split? The linear pattern of one line in a weak field.

use serde::Serialize;

use crate::problem::Problem;
use crate::quantity::TwiceJ;
use crate::radiation::Multipole;
use crate::splitting::weak_field::{self, SplitLevel};
use crate::terms::lande;

use super::answer::{Around, Working};
use super::document::{Document, Field, LevelOf};
use super::formula::{Formula, fraction, name, number, operator, row, sub, sup};
use super::line_wavelength::line_wavelength;
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
    wavelength_kind: Option<Kind>,
    #[serde(skip)]
    upper_j: TwiceJ,
    #[serde(skip)]
    lower_j: TwiceJ,
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
    let wavelength = line_wavelength(document, upper, lower);
    let nm = wavelength.map(|(nm, _)| nm);
    let mut components = Vec::new();
    for component in &pattern.components {
        let offset = weak_field::offset(component.lorentz, field.tesla, nm)
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
        wavelength_nm: nm,
        wavelength_kind: wavelength.map(|(_, kind)| kind),
        upper_j: upper.level.j,
        lower_j: lower.level.j,
    };
    let described = describe(positions, pattern.is_normal_triplet());
    let mut around = Around::saying(sentence(&line, field, &components, &described));
    around.working = working(&line, field, &components);
    around.limits = limits(document, field, &components, wavelength);
    around.cautions = cautions(field);
    around.cautions.extend(document.source_cautions(nm));
    around.kinds = [
        ("components.lorentz", Kind::Computed),
        ("components.offset", Kind::Computed),
        ("components.ghz", Kind::Computed),
        ("components.pm", Kind::Computed),
        ("components.strength", Kind::Exact),
        ("components.along", Kind::Exact),
        ("components.across", Kind::Exact),
        ("components.seen", Kind::Exact),
        ("components.M_upper", Kind::Exact),
        ("components.M_lower", Kind::Exact),
        ("positions", Kind::Exact),
        ("states.M", Kind::Exact),
        ("states.energy", Kind::Computed),
        ("states.lorentz", Kind::Computed),
        ("line.g_upper", Kind::Computed),
        ("line.g_lower", Kind::Computed),
        ("field.angle_degrees", Kind::Entered),
        ("field.tesla", Kind::Entered),
        (
            "line.wavelength_nm",
            wavelength.map_or(Kind::Entered, |(_, kind)| kind),
        ),
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

fn describe(positions: usize, normal_triplet: bool) -> String {
    match (positions, normal_triplet) {
        (_, true) => "3 components, the normal triplet".to_owned(),
        (1, _) => "1 component".to_owned(),
        (many, _) => format!("{many} components"),
    }
}

fn sentence(line: &LineOf, field: &Field, components: &[ComponentRow], pattern: &str) -> Rich {
    let widest = components
        .iter()
        .map(|c| c.offset.abs())
        .fold(0.0, f64::max);
    let named = |say: Rich| {
        say.say(format!("the {} line from ", line.multipole))
            .then(&line.upper_rich)
            .say(" to ")
            .then(&line.lower_rich)
    };
    if field.tesla == 0.0 {
        return named(Rich::words("Without a field "))
            .say(format!(" does not split; any field makes {pattern} of it."));
    }
    let say = named(
        Rich::words("In a field of ")
            .number(field.tesla, Some("T"), Kind::Entered)
            .say(", "),
    )
    .say(format!(" splits into {pattern}"));
    if widest == 0.0 {
        return say.say(", which stays where the line is.");
    }
    say.say("; the largest offset from its centre is ")
        .number(widest, Some("cm-1"), Kind::Computed)
        .say(".")
}

fn working(line: &LineOf, field: &Field, components: &[ComponentRow]) -> Vec<Working> {
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
    let (up, low) = (line.upper_j, line.lower_j);
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
