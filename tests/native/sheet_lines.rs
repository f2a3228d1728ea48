//! The answer on lines whose energies are known: wavelengths, rates, windows, media, pins, spins, and what
//! is left when no energies are to be had.

use rungline_core::sheet::{Question, answer_text};
use rungline_tests::sheets::sheet;
use serde_json::{Value, json};

fn asked(sheet: &Value, question: Question) -> Value {
    let text = answer_text(&sheet.to_string(), Some(question)).expect("an answer");
    let whole: Value = serde_json::from_str(&text).expect("JSON");
    whole["answers"][question.name()].clone()
}

fn lines(sheet: &Value) -> Value {
    asked(sheet, Question::Lines)
}

fn rows(answer: &Value) -> &Vec<Value> {
    answer["lines"].as_array().expect("lines")
}

fn number(value: &Value) -> f64 {
    value
        .as_f64()
        .unwrap_or_else(|| panic!("{value} is no number"))
}

fn row<'a>(answer: &'a Value, upper: &str, lower: &str, multipole: &str) -> &'a Value {
    rows(answer)
        .iter()
        .find(|row| row["upper"] == upper && row["lower"] == lower && row["multipole"] == multipole)
        .unwrap_or_else(|| panic!("no {multipole} line from {upper} to {lower}"))
}

fn near(value: f64, wanted: f64, within: f64, what: &str) {
    assert!(
        (value - wanted).abs() <= within,
        "{what}: {value} is not {wanted}"
    );
}

/// Balmer α to δ in air, centres weighted by strength: 656.2793, 486.1323, 434.0462, 410.1733 nm; the
/// handbook values of the unresolved lines, from memory.
#[test]
fn the_balmer_lines_lie_where_they_are_seen() {
    for (n, air) in [(3, 656.2793), (4, 486.1323), (5, 434.0462), (6, 410.1733)] {
        let shell = format!("n={n}");
        let answer = lines(&sheet("H", &["n=2", &shell], json!({"medium": "air"})));
        let (mut sum, mut weights) = (0.0, 0.0);
        for row in rows(&answer) {
            // Lines within a shell lie in the radio range.
            if !row["air_nm"].is_null() {
                sum += number(&row["S"]) * number(&row["air_nm"]);
                weights += number(&row["S"]);
            }
        }
        near(sum / weights, air, 0.001, &shell);
    }
}

/// A(2p–1s) = 6.26490·10⁸ s⁻¹, standard, from memory.
#[test]
fn lyman_alpha_has_its_rate() {
    let answer = lines(&sheet("H", &["1s", "2p"], json!({})));
    for upper in ["2p 2P1/2", "2p 2P3/2"] {
        let a = number(&row(&answer, upper, "1s 2S1/2", "E1")["A"]);
        near(a / 6.26490e8, 1.0, 5e-6, upper);
    }
}

/// The D lines in air, 588.9950 and 589.5924 nm, and their levels: published tables, from memory.
#[test]
fn pins_give_the_wavelengths_and_say_so() {
    let pins = json!({"measured": {"3s 2S1/2": "0 cm-1", "3p 2P1/2": "16956.17025 cm-1",
        "3p 2P3/2": "16973.36619 cm-1"}, "medium": "air", "window": ["588 nm", "590 nm"]});
    let answer = lines(&sheet("Na", &["3s", "3p"], pins));
    for (upper, air) in [("3p 2P3/2", 588.9950), ("3p 2P1/2", 589.5924)] {
        let line = row(&answer, upper, "3s 2S1/2", "E1");
        near(number(&line["air_nm"]), air, 2e-4, upper);
        assert_eq!(line["energy_kind"], "measured");
        // 6.16·10⁷ s⁻¹ (from memory); a frozen core gives some ten per cent more.
        near(number(&line["A"]) / 6.16e7, 1.0, 0.15, "A");
        near(number(&line["branching"]), 1.0, 1e-6, "branching");
    }
    assert_eq!(answer["window"]["lines"], 2);
    assert_eq!(answer["window"]["medium"], "air");
    assert!(answer["say_plain"].as_str().unwrap().starts_with(
        "Between 588 and 590 nm in air lie 2 lines; the strongest by gf is 588.995 nm in air"
    ));
    // One pin counts from the lowest level, which needs none.
    let one = lines(&sheet(
        "Na",
        &["3s", "3p"],
        json!({"measured": {"3p 2P1/2": "16956.17 cm-1"}}),
    ));
    let line = row(&one, "3p 2P1/2", "3s 2S1/2", "E1");
    near(number(&line["wavenumber"]), 16956.17, 1e-9, "one pin");
    assert_eq!(line["energy_kind"], "measured");
    let other = row(&one, "3p 2P3/2", "3s 2S1/2", "E1");
    assert_eq!(other["energy_kind"], "computed");
    near(number(&other["wavenumber"]), 16973.4, 8.0, "beside the pin");
}

#[test]
fn a_window_without_a_line_names_the_nearest() {
    let answer = lines(&sheet(
        "Na",
        &["3s", "3p"],
        json!({"window": ["400 nm", "401 nm"], "medium": "air"}),
    ));
    assert_eq!(answer["window"]["lines"], 0);
    assert_eq!(answer["window"]["nearest"]["upper"], "3p 2P3/2");
    let said = answer["say_plain"].as_str().unwrap();
    assert!(
        said.starts_with("No line lies between 400 and 401 nm in air; the nearest is "),
        "{said}"
    );
    // Nothing is filtered away.
    assert!(rows(&answer).len() >= 2);
}

#[test]
fn a_window_may_be_open_and_in_other_units() {
    let seen = |window: Value| {
        let answer = lines(&sheet(
            "Na",
            &["3s", "3p", "4s"],
            json!({"window": window, "medium": "air"}),
        ));
        (
            answer["window"].clone(),
            answer["say_plain"].as_str().unwrap().to_owned(),
        )
    };
    let (all, _) = seen(json!(["1 nm", "1 m"]));
    let count = |window: &Value| window["lines"].as_u64().unwrap();
    let (above, said) = seen(json!(["800 nm"]));
    assert!(said.starts_with("Above 800 nm in air lie "), "{said}");
    assert!(above["to"].is_null() && above["to_nm"].is_null());
    assert_eq!(above["from"], 800.0);
    let (below, said) = seen(json!(["", "800 nm"]));
    assert!(said.starts_with("Below 800 nm in air lie "), "{said}");
    assert_eq!(below["to"], 800.0);
    assert!(count(&above) > 0 && count(&below) > 0);
    assert_eq!(count(&above) + count(&below), count(&all));
    // 12500 cm⁻¹ is 800 nm in vacuum.
    let (energy, said) = seen(json!(["12500 cm-1", ""]));
    assert_eq!(number(&energy["to_nm"]), 800.0);
    assert_eq!(energy["from_nm"], Value::Null);
    assert!(said.starts_with("Below 799.78 nm in air lie "), "{said}");
    assert_eq!(count(&energy), count(&below));
    let (turned, said) = seen(json!(["800 nm", "500 nm"]));
    assert_eq!(
        (&turned["from"], &turned["to"]),
        (&json!(500.0), &json!(800.0))
    );
    assert!(
        said.starts_with("Between 500 and 800 nm in air lie "),
        "{said}"
    );
    let (none, said) = seen(json!(["", "50 nm"]));
    assert_eq!(count(&none), 0);
    assert!(
        said.starts_with("No line lies below 50 nm in vacuum; the nearest is "),
        "{said}"
    );
}

#[test]
fn a_medium_moves_every_wavelength() {
    let answer = lines(&sheet(
        "*",
        &["3d3"],
        json!({"refractive_index": "1.76", "structure": {"given":
            {"F2(3d,3d)": "60000 cm-1", "F4(3d,3d)": "40000 cm-1", "zeta(3d)": "200 cm-1"}}}),
    ));
    for row in rows(&answer) {
        let (vacuum, medium) = (number(&row["vacuum_nm"]), number(&row["medium_nm"]));
        near(medium * 1.76 / vacuum, 1.0, 1e-14, "index");
        assert_eq!(row["energy_kind"], "entered");
    }
    assert_eq!(answer["conversions"]["angstrom_per_nm"], 10.0);
}

#[test]
fn pairs_are_lines_or_refused_and_rates_add_up() {
    let answer = lines(&sheet(
        "C",
        &["2p2", "2p 3s"],
        json!({"source": {"temperature": "6000 K"}}),
    ));
    let pair = |row: &Value| -> (String, String) {
        let (one, other) = (
            row["upper"].as_str().unwrap(),
            row["lower"].as_str().unwrap(),
        );
        (one.min(other).to_owned(), one.max(other).to_owned())
    };
    let joined: std::collections::BTreeSet<_> = rows(&answer).iter().map(pair).collect();
    let refused: std::collections::BTreeSet<_> = answer["refused"]
        .as_array()
        .unwrap()
        .iter()
        .map(pair)
        .collect();
    assert!(joined.is_disjoint(&refused));
    assert_eq!(answer["refused_total"], refused.len());
    // ³P₀ to ¹S₀ of 2p²: no multipole; 9 levels have 36 pairs.
    assert!(refused.contains(&("2p2 1S0".to_owned(), "2p2 3P0".to_owned())));
    assert_eq!(answer["pairs"], 36);
    assert_eq!(joined.len() + refused.len(), 36);
    let mut sums = std::collections::BTreeMap::new();
    let (mut brightest, mut darkest) = (0.0_f64, 0.0_f64);
    for row in rows(&answer) {
        let (f, gf) = (number(&row["f"]), number(&row["gf"]));
        let lower: f64 = row["lower_J"].as_str().unwrap().parse().unwrap();
        near(f * (2.0 * lower + 1.0) / gf, 1.0, 1e-12, "gf");
        *sums.entry(row["upper"].as_str().unwrap()).or_insert(0.0) += number(&row["branching"]);
        brightest = brightest.max(number(&row["intensity"]));
        darkest = darkest.max(number(&row["absorption"]));
        assert!(number(&row["cancellation"]) <= 1.0 + 1e-12);
    }
    assert!(sums.len() > 5);
    for (upper, sum) in sums {
        near(sum, 1.0, 1e-12, upper);
    }
    assert_eq!((brightest, darkest), (1.0, 1.0));
}

#[test]
fn lines_between_different_spins_say_what_makes_them() {
    let answer = lines(&sheet("Hg", &["6s2", "6s 6p"], json!({})));
    let line = row(&answer, "6s 6p 3P1", "6s2 1S0", "E1");
    let note = line["spin_note"].as_str().expect("a note");
    assert!(note.starts_with("S is not good here: "), "{note}");
    assert!(note.ends_with("% 1P in the upper level"), "{note}");
    assert!(row(&answer, "6s 6p 1P1", "6s2 1S0", "E1")["spin_note"].is_null());
    let cautions = answer["cautions"].to_string();
    assert!(cautions.contains("Mercury") && cautions.contains("Ultraviolet"));
}

#[test]
fn without_energies_strengths_stay_relative() {
    let answer = lines(&sheet("*", &["3p2", "3p 4s"], json!({})));
    assert!(!rows(&answer).is_empty());
    for row in rows(&answer) {
        assert!(number(&row["relative"]) > 0.0);
        assert!(row["S"].is_null() && row["A"].is_null() && row["wavenumber"].is_null());
    }
    assert!(answer["window"].is_null());
}

#[test]
fn too_many_pairs_are_counted_and_not_listed() {
    let answer = lines(&sheet(
        "Fe",
        &["3d6 4s2", "3d7 4s", "3d6 4s 4p", "3d7 4p"],
        json!({}),
    ));
    let pairs = answer["pairs"].as_u64().unwrap();
    assert!(pairs > 140_000);
    assert!(answer["refused"].as_array().unwrap().is_empty());
    let mut joined: Vec<(&str, &str)> = rows(&answer)
        .iter()
        .map(|row| {
            (
                row["upper"].as_str().unwrap(),
                row["lower"].as_str().unwrap(),
            )
        })
        .collect();
    joined.sort_unstable();
    joined.dedup();
    assert_eq!(
        answer["refused_total"].as_u64().unwrap() + joined.len() as u64,
        pairs
    );
}

#[test]
fn the_splitting_takes_its_wavelength_from_the_energies() {
    let of = |extra: Value| {
        let mut whole = sheet(
            "Na",
            &["3s", "3p"],
            json!({"field": {"flux_density": "0.5 T"}, "line": {"upper": "3p 2P1/2", "lower": "3s 2S1/2"}}),
        );
        for (key, value) in extra.as_object().unwrap() {
            whole[key] = value.clone();
        }
        asked(&whole, Question::Splitting)["line"].clone()
    };
    let computed = of(json!({}));
    assert_eq!(computed["wavelength_kind"], "computed");
    // The computed resonance line of a frozen core is some six per cent too long.
    near(
        number(&computed["wavelength_nm"]) / 589.756,
        1.06,
        0.03,
        "computed",
    );
    let pinned = of(json!({"measured": {"3p 2P1/2": "16956.17025 cm-1"}}));
    assert_eq!(pinned["wavelength_kind"], "measured");
    near(number(&pinned["wavelength_nm"]), 589.7558, 1e-4, "pinned");
}

/// Hα of deuterium lies 4.15 cm⁻¹ above that of hydrogen (Urey's 1.79 Å at 6563 Å: published, from memory).
#[test]
fn isotopes_are_apart_by_their_masses() {
    let answer = lines(&sheet("2H", &["n=2", "n=3"], json!({})));
    let line = row(&answer, "3d 2D5/2", "2p 2P3/2", "E1");
    near(number(&line["mass_shift"]), 4.15, 0.01, "normal mass shift");
    let usual = lines(&sheet("H", &["n=2", "n=3"], json!({})));
    let other = row(&usual, "3d 2D5/2", "2p 2P3/2", "E1");
    let apart = number(&line["wavenumber"]) - number(&other["wavenumber"]);
    near(apart, 4.15, 0.01, "both computed");
    assert!(other["mass_shift"].is_null());
}

/// σ₀ = 1.4·10⁻¹⁵ m² scale of D2 at 500 K: √(ln 2/π) · 2πr₀cf/Δν_D with f = 0.64 and a Doppler width of
/// 1.7 GHz is 1.2·10⁻¹⁵ m²; saturation 13 mW/cm² for light of all polarisations (both from memory).
#[test]
fn a_column_absorbs() {
    let answer = lines(&sheet(
        "Na",
        &["3s", "3p"],
        json!({"source": {"temperature": "500 K", "column": "1e15 m-2"},
            "measured": {"3s 2S1/2": "0 cm-1", "3p 2P1/2": "16956.17 cm-1", "3p 2P3/2": "16973.366 cm-1"}}),
    ));
    let line = row(&answer, "3p 2P3/2", "3s 2S1/2", "E1");
    let section = number(&line["cross_section"]);
    near(section / 1.25e-15, 1.0, 0.25, "cross-section");
    near(
        number(&line["optical_depth"]) / (section * 1e15),
        1.0,
        1e-6,
        "depth",
    );
    near(
        number(&line["saturation_intensity"]) / 130.0,
        1.0,
        0.35,
        "saturation",
    );
}

#[test]
fn an_isotope_shift_starts_from_the_line_that_it_has() {
    let [hydrogen, deuterium] =
        ["H I", "D I"].map(|species| lines(&sheet(species, &["1s", "2p"], json!({}))));
    for (light, heavy) in rows(&hydrogen).iter().zip(rows(&deuterium)) {
        let (from, to) = (number(&light["wavenumber"]), number(&heavy["wavenumber"]));
        // Reduced masses by CODATA 2022: σ_D − σ_H = σ_D (1 − μ_H/μ_D).
        let reduced = |mass: f64| 1.0 / (1.0 + 5.485_799_090_441e-4 / mass);
        let ratio = reduced(1.007_276_466_578_9) / reduced(2.013_553_212_544);
        let shift = number(&heavy["mass_shift"]);
        near(shift, to * (1.0 - ratio), 1e-8, "normal mass shift");
        // Dirac's terms beyond the first are of the order of α², here below 5·10⁻⁵ of it.
        near(shift, to - from, 1.2e-3, "difference of both answers");
    }
}

#[test]
fn doppler_widths_have_the_mass_of_the_atoms() {
    let absorbing = |species: &str| {
        let source = json!({"source": {"temperature": "500 K", "column": "1e15 m-2"}});
        let found = lines(&sheet(species, &["5s", "5p"], source));
        number(&row(&found, "5p 2P3/2", "5s 2S1/2", "E1")["cross_section"])
    };
    // σ₀ ∝ √m while the natural width is small: the element as found in nature (IUPAC: 85.4678 u) and ⁸⁵Rb
    // (84.911 79 u), both with the orbitals of mass number 85.
    let ratio = absorbing("Rb I") / absorbing("85Rb I");
    // The natural width, a hundredth of Doppler's, takes 0.3·10⁻⁴ of it; the mass number would be 16·10⁻⁴ off.
    near(ratio, (85.467_8_f64 / 84.911_79).sqrt(), 5e-5, "mean mass");
}

#[test]
fn lines_without_strength_are_told_from_lines_that_are_not() {
    let given = json!({"structure": {"given": {"zeta(3p)": "11 cm-1", "E(3p)": "16000 cm-1"}}});
    let found = lines(&sheet("*", &["3s", "3p"], given));
    let say = found["say_plain"].as_str().unwrap();
    assert!(
        say.starts_with("There is 1 forbidden line here; electric dipole lines have no strength"),
        "{say}"
    );
    assert!(found["limits"].to_string().contains("radial integral r(…)"));
    let hydrogen = lines(&sheet("H I", &["1s", "2p"], json!({})));
    let say = hydrogen["say_plain"].as_str().unwrap();
    assert!(
        say.starts_with("H I has 2 electric dipole lines here;"),
        "{say}"
    );
    let sodium = lines(&sheet("Na I", &["3s", "4s"], json!({})));
    let say = sodium["say_plain"].as_str().unwrap();
    assert!(!say.contains(" 0 "), "{say}");
}

#[test]
fn the_working_has_the_digits_of_the_sentence() {
    let found = lines(&sheet("Na I", &["3s", "3p"], json!({"medium": "air"})));
    let say = found["say"].as_array().unwrap().iter();
    let nm = |pieces: &Value| -> Vec<String> {
        let all = pieces.as_array().into_iter().flatten();
        let numbers = all.filter(|piece| piece["number"]["unit"] == "nm");
        numbers
            .map(|n| n["number"]["text"].as_str().unwrap().to_owned())
            .collect()
    };
    let told = nm(&json!(say.collect::<Vec<_>>()));
    let working = found["working"].as_array().unwrap();
    let air = working
        .iter()
        .find(|step| step["title"] == "Wavelength in air")
        .unwrap();
    assert_eq!(nm(&air["result"]), told);
}
