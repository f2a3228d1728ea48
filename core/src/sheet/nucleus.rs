//! The nucleus of the sheet, or several isotopes side by side.

use crate::configuration;
use crate::elements::{self, Isotope};
use crate::problem::Problem;
use crate::quantity::{self, Dimension, TwiceJ};

use super::document::{Document, LevelOf};
use super::json::Json;
use super::rich::Kind;
use super::schema;

/// The largest spin of a nucleus that is taken; the largest known are below it.
pub const MAX_SPIN: i32 = 30;

/// The largest |g|.
pub const MAX_G: f64 = 1000.0;

/// A hyperfine constant of a level.
#[derive(Clone, Debug, PartialEq)]
pub struct Constant {
    /// Of which level.
    pub level: LevelOf,
    /// MHz.
    pub value: f64,
    /// Whether it was scaled from another isotope's.
    pub scaled: bool,
}

/// A nucleus.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Nuclear {
    /// `85Rb`; nothing where only numbers were entered.
    pub name: Option<String>,
    /// Its row in the table of isotopes.
    pub isotope: Option<Isotope>,
    /// I; nothing where neither the sheet nor the table has it.
    pub spin: Option<TwiceJ>,
    /// g_I = μ/(I μ_N).
    pub g: Option<f64>,
    /// Whether spin and g were typed.
    pub typed: bool,
    /// Share of the atoms, percent; nothing for one nucleus alone.
    pub share: Option<(f64, Kind)>,
    /// By how much its lines lie higher, MHz.
    pub shift: f64,
    /// A of levels.
    pub dipole: Vec<Constant>,
    /// B of levels.
    pub quadrupole: Vec<Constant>,
}

impl Nuclear {
    /// 2I; 0 where it is not known.
    pub fn two_i(&self) -> i32 {
        self.spin.map_or(0, TwiceJ::doubled)
    }

    /// A constant of a level.
    pub fn constant<'a>(constants: &'a [Constant], of: &LevelOf) -> Option<&'a Constant> {
        constants.iter().find(|constant| constant.level == *of)
    }
}

impl Document {
    /// Reads `nucleus` and `isotopes` once atom and configurations are known.
    pub(super) fn read_nuclei(&mut self, json: &Json) {
        let single = json.get("nucleus").map(|nucleus| self.single(nucleus));
        let estimate = json.get("nucleus").and_then(|n| n.get("estimate"));
        self.estimate = matches!(estimate, Some(Json::Bool(true)));
        let listed = match json.get("isotopes") {
            Some(Json::List(items)) if !items.is_empty() => self.isotopes(items),
            _ => {
                self.nuclei.extend(single);
                return;
            }
        };
        self.isotopes_listed = true;
        self.nuclei = listed;
        share_constants(single.as_ref(), &mut self.nuclei);
    }

    /// The nucleus that the group of this name describes.
    fn single(&mut self, nucleus: &Json) -> Nuclear {
        let isotope = self.isotope();
        let spin = nucleus.get("spin").and_then(Json::as_text);
        let typed_spin = spin
            .and_then(|text| quantity::half_integer(text).ok())
            .filter(|spin| spin.doubled() >= 0);
        if let (Some(spin), Some(text)) = (typed_spin, spin)
            && spin.doubled() > 2 * MAX_SPIN
        {
            self.faults.push(
                Problem::new(
                    "spin-too-large",
                    format!("No nucleus has a spin of {spin}."),
                    0,
                    text.len(),
                )
                .bound(format!("A spin is at most {MAX_SPIN}."))
                .way("Use 1/2", "1/2")
                .in_utf16(text)
                .at("/nucleus/spin"),
            );
        }
        let typed_g = number(nucleus.get("g_I"), "/nucleus/g_I", &mut self.faults);
        // Numbers of another spin than the table's are those of another nucleus.
        let same = typed_spin.is_none_or(|spin| isotope.and_then(|i| i.spin) == Some(spin));
        let known = isotope.filter(|_| same);
        let mut found = Nuclear {
            name: known.as_ref().map(isotope_name),
            isotope: known,
            spin: typed_spin.or(known.and_then(|i| i.spin)),
            g: typed_g.or(known.and_then(|i| i.g)),
            typed: typed_spin.is_some() || typed_g.is_some(),
            ..Nuclear::default()
        };
        self.read_constants(nucleus, "/nucleus", &mut found);
        found
    }

    /// The isotope that the sheet is about: the typed one, or the only natural one of the element.
    pub fn isotope(&self) -> Option<Isotope> {
        let species = self.species?;
        let z = species.element?;
        match species.mass_number {
            Some(number) => elements::isotope(z, number),
            None => {
                let mut natural = natural(z).into_iter();
                natural.next().filter(|_| natural.next().is_none())
            }
        }
    }

    fn isotopes(&mut self, items: &[Json]) -> Vec<Nuclear> {
        let mut nuclei: Vec<Nuclear> = Vec::new();
        let texts = items
            .iter()
            .filter_map(|item| item.get("isotope")?.as_text());
        let listed: Vec<&str> = texts.map(str::trim).collect();
        for (index, item) in items.iter().enumerate() {
            let path = format!("/isotopes/{index}");
            let Some(text) = item.get("isotope").and_then(Json::as_text) else {
                if matches!(item, Json::Object(_)) && !self.has_fault_at(&path) {
                    self.faults.push(
                        Problem::new("isotope-missing", "This entry names no isotope.", 0, 0)
                            .bound("An isotope is written like 85Rb.")
                            .at(path),
                    );
                }
                continue;
            };
            if self.has_fault_at(&format!("{path}/isotope")) {
                continue;
            }
            let isotope = match self.isotope_named(text, &listed) {
                Ok(isotope) => isotope,
                Err(problems) => {
                    self.add(problems, text, &format!("{path}/isotope"));
                    continue;
                }
            };
            if nuclei.iter().any(|known| known.isotope == Some(isotope)) {
                let problem = Problem::new(
                    "isotope-repeated",
                    format!("{} stands twice in this sheet.", isotope_name(&isotope)),
                    0,
                    text.len(),
                )
                .bound("Each isotope stands once.");
                let z = self.species.and_then(|species| species.element);
                let problem = with_natural(problem, z.unwrap_or(0), &listed);
                self.add(vec![problem], text, &format!("{path}/isotope"));
                continue;
            }
            let value = |key: &str, dimension| {
                let text = item.get(key)?.as_text()?;
                Some(quantity::quantity(text, dimension).ok()?.value)
            };
            let share = match value("share", Dimension::Share) {
                Some(share) => (share, Kind::Entered),
                None => (isotope.abundance.unwrap_or(0.0), Kind::Measured),
            };
            if item.get("share").is_none() && isotope.abundance.is_none() {
                self.faults.push(
                    Problem::new(
                        "isotope-without-share",
                        format!("{} has no natural abundance.", isotope_name(&isotope)),
                        0,
                        text.len(),
                    )
                    .bound("Its share has to be entered, such as 50 %.")
                    .in_utf16(text)
                    .at(format!("{path}/isotope")),
                );
            }
            let mut found = Nuclear {
                name: Some(isotope_name(&isotope)),
                isotope: Some(isotope),
                spin: isotope.spin,
                g: isotope.g,
                share: Some(share),
                shift: value("shift", Dimension::Frequency).unwrap_or(0.0),
                ..Nuclear::default()
            };
            self.read_constants(item, &path, &mut found);
            nuclei.push(found);
        }
        nuclei
    }

    /// The isotope that a text names: `85Rb`, of the sheet's element; `listed` are those of all entries.
    fn isotope_named(&self, text: &str, listed: &[&str]) -> Result<Isotope, Vec<Problem>> {
        let fault = |code, message: String| Problem::new(code, message, 0, text.len());
        let own = self.species.and_then(|species| species.element);
        let offered = |problem: Problem, z: u8| {
            let names: Vec<String> = elements::isotopes(z).iter().map(isotope_name).collect();
            let problem = match names.is_empty() {
                true => problem.bound("The table has no isotope of this element."),
                false => problem.bound(format!("The table has {}.", names.join(", "))),
            };
            with_natural(problem, z, listed)
        };
        let species = match configuration::species::parse(text) {
            Ok(species) => species,
            Err(problems) => {
                // A mass number that the element cannot have.
                let without = text.trim().trim_start_matches(|c: char| c.is_ascii_digit());
                let element = configuration::species::parse(without).ok();
                return Err(match element.and_then(|species| species.element) {
                    Some(z) if own.is_none_or(|own| own == z) => {
                        let message =
                            format!("There is no {} in the table of isotopes.", text.trim());
                        vec![offered(fault("isotope-unknown", message), z)]
                    }
                    _ => problems,
                });
            }
        };
        let Some(z) = species.element else {
            let problem = fault(
                "isotope-of-no-element",
                format!("{} names no isotope.", text.trim()),
            );
            return Err(vec![match own {
                Some(z) => offered(problem, z),
                None => problem.bound("An isotope is written like 85Rb."),
            }]);
        };
        if let Some(own) = own.filter(|own| *own != z) {
            let name = elements::name(own).unwrap_or_default();
            let problem = fault(
                "isotope-of-another-element",
                format!("{} is no isotope of {name}.", text.trim()),
            );
            return Err(vec![offered(problem, own)]);
        }
        let Some(number) = species.mass_number else {
            let problem = fault(
                "isotope-without-mass-number",
                format!("{} has no mass number.", text.trim()),
            );
            return Err(vec![offered(problem, z)]);
        };
        elements::isotope(z, number).ok_or_else(|| {
            let symbol = elements::symbol(z).unwrap_or_default();
            let problem = fault(
                "isotope-unknown",
                format!("There is no {number}{symbol} in the table of isotopes."),
            );
            vec![offered(problem, z)]
        })
    }

    /// Reads A and B of levels beneath `path`.
    fn read_constants(&mut self, json: &Json, path: &str, nuclear: &mut Nuclear) {
        for key in ["magnetic_dipole", "electric_quadrupole"] {
            let Some(Json::Object(entries)) = json.get(key) else {
                continue;
            };
            let is_dipole = key == "magnetic_dipole";
            let mut found: Vec<Constant> = Vec::new();
            for (name, value) in entries {
                let path = schema::pointer(&format!("{path}/{key}"), name);
                let text = value.as_text().unwrap_or_default();
                let typed = quantity::quantity(text, Dimension::Frequency).ok();
                match (self.level(name), typed) {
                    (Ok(Some(level)), Some(typed)) => {
                        let refused = refuse(&level, typed.value, nuclear, is_dipole);
                        if let Some(problem) = refused {
                            let problem = Problem {
                                start: 0,
                                end: text.len(),
                                ..problem
                            };
                            self.add(vec![problem], text, &path);
                        } else if found.iter().any(|known| known.level == level) {
                            self.faults.push(
                                Problem::new(
                                    "level-repeated",
                                    format!("{} has its constant twice.", self.level_label(&level)),
                                    0,
                                    name.encode_utf16().count(),
                                )
                                .bound("Each level has one constant.")
                                .way("Leave this value out", "")
                                .at(path),
                            );
                        } else {
                            found.push(Constant {
                                level,
                                value: typed.value,
                                scaled: false,
                            });
                        }
                    }
                    (Ok(_), _) => {}
                    // The fault stands in the key, whose characters are not those of the value.
                    (Err(problems), _) => {
                        self.faults.extend(problems.into_iter().map(|mut problem| {
                            problem.ways.clear();
                            problem
                                .way("Leave this value out", "")
                                .in_utf16(name)
                                .at(path.clone())
                        }));
                    }
                }
            }
            match is_dipole {
                true => nuclear.dipole = found,
                false => nuclear.quadrupole = found,
            }
        }
    }
}

/// Why a level of this J cannot have such a constant with this nucleus.
fn refuse(level: &LevelOf, value: f64, nuclear: &Nuclear, is_dipole: bool) -> Option<Problem> {
    let who = nuclear.name.as_deref().unwrap_or("This nucleus");
    refused_constant(who, level.level.j, nuclear.spin, value, is_dipole)
}

/// Why a level J cannot have a constant of this value with a nucleus of this spin.
pub fn refused_constant(
    who: &str,
    j: TwiceJ,
    spin: Option<TwiceJ>,
    value: f64,
    is_dipole: bool,
) -> Option<Problem> {
    if value == 0.0 {
        return None;
    }
    let least = if is_dipole { 1 } else { 2 };
    let (letter, unit) = if is_dipole { ("A", "1/2") } else { ("B", "1") };
    let problem = match spin {
        Some(spin) if spin.doubled() == 0 => Problem::new(
            "nucleus-without-spin",
            format!("{who} has no spin, so that no level has a constant {letter}."),
            0,
            0,
        )
        .bound(format!("{letter} needs a nuclear spin of at least {unit}.")),
        Some(spin) if spin.doubled() < least => Problem::new(
            "constant-needs-larger-spin",
            format!("{who} has the spin {spin}, and {letter} is not zero."),
            0,
            0,
        )
        .bound(format!("{letter} needs a nuclear spin of at least {unit}.")),
        _ if j.doubled() < least => Problem::new(
            "constant-needs-larger-j",
            format!("The level has J = {j}, and {letter} is not zero."),
            0,
            0,
        )
        .bound(format!("{letter} needs a J of at least {unit}.")),
        _ => return None,
    };
    Some(problem.way("Use 0 MHz", "0 MHz"))
}

/// A g factor; its faults are those of `parameters`, and one beyond the bound.
pub fn number(json: Option<&Json>, path: &str, faults: &mut Vec<Problem>) -> Option<f64> {
    let text = json?.as_text()?;
    let value = quantity::quantity(text, Dimension::Number).ok()?.value;
    if value.abs() <= MAX_G {
        return Some(value);
    }
    faults.push(
        Problem::new(
            "g-out-of-range",
            format!("g = {} is out of range.", text.trim()),
            0,
            text.len(),
        )
        .bound(format!("|g| is at most {MAX_G}."))
        .way("Use 1", "1")
        .in_utf16(text)
        .at(path),
    );
    None
}

/// `85Rb`
pub fn isotope_name(isotope: &Isotope) -> String {
    let symbol = elements::symbol(isotope.z).unwrap_or_default();
    format!("{}{symbol}", isotope.mass_number)
}

/// The isotopes of an element that occur in nature.
pub fn natural(z: u8) -> Vec<Isotope> {
    let all = elements::isotopes(z).into_iter();
    all.filter(|isotope| isotope.abundance.is_some()).collect()
}

/// A fault with some natural isotopes as ways out, none of those that are listed already.
fn with_natural(problem: Problem, z: u8, listed: &[&str]) -> Problem {
    let names = natural(z).into_iter().map(|isotope| isotope_name(&isotope));
    let names = names.filter(|name| !listed.contains(&name.as_str()));
    names.take(4).fold(problem, |problem, name| {
        problem.way(format!("Use {name}"), name)
    })
}

/// Constants that an isotope lacks from the nucleus of the sheet, or from the first isotope that has
/// them: A in the ratio of g_I, B in that of Q (one electron charge distribution, two nuclei; the
/// hyperfine anomaly, below a percent, is left out).
///
/// Source: Kopfermann, *Nuclear Moments* (1958), § 5.
fn share_constants(single: Option<&Nuclear>, nuclei: &mut [Nuclear]) {
    let mut sources: Vec<Nuclear> = Vec::new();
    if let Some(single) = single {
        let first = nuclei.iter().find(|n| n.two_i() > 0);
        let own = single.isotope.or(first.and_then(|n| n.isotope));
        sources.push(Nuclear {
            g: single.g.or(own.and_then(|i| i.g)),
            isotope: own,
            ..single.clone()
        });
    }
    sources.extend(nuclei.iter().cloned());
    for nuclear in nuclei.iter_mut() {
        for source in &sources {
            let of_g = (nuclear.g, source.g);
            let moment = |n: &Nuclear| n.isotope.and_then(|i| i.quadrupole);
            let of_q = (moment(nuclear), moment(source));
            scale(&mut nuclear.dipole, &source.dipole, of_g);
            scale(&mut nuclear.quadrupole, &source.quadrupole, of_q);
        }
    }
}

fn scale(own: &mut Vec<Constant>, others: &[Constant], (to, from): (Option<f64>, Option<f64>)) {
    let (Some(to), Some(from)) = (to, from) else {
        return;
    };
    for other in others {
        let known = own.iter().any(|constant| constant.level == other.level);
        if !known && from != 0.0 && !other.scaled {
            let same = to == from;
            own.push(Constant {
                level: other.level.clone(),
                value: if same {
                    other.value
                } else {
                    other.value * to / from
                },
                scaled: !same,
            });
        }
    }
}
