//! Resonance lines with mixing and core polarisation, nothing fitted, against tabulated wavelengths and f.
//!
//! Tabulated: Morton, Astrophys. J. Suppl. 130, 403 (2000) and 149, 205 (2003), as they stand in
//! linetools 0.3.2 (BSD-3-Clause). Polarisabilities of the cores: random-phase values of Johnson, Kolb
//! and Huang, At. Data Nucl. Data Tables 28, 333 (1983), from memory, those marked with a tilde by
//! interpolation along their sequences; cut-off radius: the mean radius of the core's outermost orbital
//! (Migdalek and Baylis 1978).

use rungline_core::configuration::Subshell;
use rungline_core::radial::hartree_fock::{Atom, Polarisation};
use rungline_core::radial::nucleus::stable_mass_number;
use rungline_core::structure::model::{Case, MultipoleKind};
use rungline_tests::model::{configuration, field, spectrum};
use rungline_tests::{Listing, Row, list, median_and_largest, report, vector_rows};

/// One ion: element, stage, Z, α of its core, the core's noble gas and its further full shells, the
/// configurations outside it, the wavelengths in the table, in Å, of the line with the largest f, by J.
type Ion<'a> = (
    &'a str,
    &'a str,
    u8,
    f64,
    u8,
    &'a str,
    &'a [&'a str],
    &'a [&'a str],
);

const ALKALI_LIKE: &[Ion] = &[
    (
        "Li",
        "I",
        3,
        0.1894,
        2,
        "",
        &["2s", "2p"],
        &["6709.7666", "6709.6156"],
    ),
    (
        "B",
        "III",
        5,
        0.0196,
        2,
        "",
        &["2s", "2p"],
        &["2067.8876", "2066.4305"],
    ),
    ("N", "V", 7, 0.0047, 2, "", &["2s", "2p"], &["1238.821"]),
    (
        "Na",
        "I",
        11,
        0.9457,
        10,
        "",
        &["3s", "3p"],
        &["5897.5581", "5891.5833"],
    ),
    (
        "Al",
        "III",
        13,
        0.2649,
        10,
        "",
        &["3s", "3p"],
        &["1862.7910", "1854.7184"],
    ),
    (
        "P",
        "V",
        15,
        0.106,
        10,
        "",
        &["3s", "3p"],
        &["1128.0078", "1117.9774"],
    ),
    (
        "K",
        "I",
        19,
        5.457,
        18,
        "",
        &["4s", "4p"],
        &["7701.0835", "7667.0089"],
    ),
    (
        "Cu",
        "I",
        29,
        5.36,
        18,
        "3d10",
        &["4s", "4p"],
        &["3274.8980", "3248.4739"],
    ),
    (
        "Ga",
        "III",
        31,
        1.24,
        18,
        "3d10",
        &["4s", "4p"],
        &["1534.462", "1495.045"],
    ),
    (
        "As",
        "V",
        33,
        0.50,
        18,
        "3d10",
        &["4s", "4p"],
        &["1029.480", "987.651"],
    ),
    (
        "Rb",
        "I",
        37,
        9.076,
        36,
        "",
        &["5s", "5p"],
        &["7949.789", "7802.415"],
    ),
    (
        "Ag",
        "I",
        47,
        8.83,
        36,
        "4d10",
        &["5s", "5p"],
        &["3383.860", "3281.625"],
    ),
    (
        "In",
        "III",
        49,
        3.22,
        36,
        "4d10",
        &["5s", "5p"],
        &["1748.741", "1625.295"],
    ),
    (
        "Sb",
        "V",
        51,
        1.7,
        36,
        "4d10",
        &["5s", "5p"],
        &["1226.00", "1104.33"],
    ),
    (
        "Cs",
        "I",
        55,
        15.81,
        54,
        "",
        &["6s", "6p"],
        &["8945.9284", "8523.4722"],
    ),
    (
        "Lu",
        "III",
        71,
        6.4,
        54,
        "4f14",
        &["6s", "6p"],
        &["2604.125", "2236.876"],
    ),
    (
        "Au",
        "I",
        79,
        12.8,
        54,
        "4f14 5d10",
        &["6s", "6p"],
        &["2676.7318", "2428.6810"],
    ),
    (
        "Tl",
        "III",
        81,
        5.2,
        54,
        "4f14 5d10",
        &["6s", "6p"],
        &["1558.630", "1266.236"],
    ),
];

const ALKALINE_EARTH_LIKE: &[Ion] = &[
    (
        "B",
        "II",
        5,
        0.0196,
        2,
        "",
        &["2s2", "2p2", "2s 2p"],
        &["1362.460"],
    ),
    (
        "Al",
        "II",
        13,
        0.2649,
        10,
        "",
        &["3s2", "3p2", "3s 3p", "3p 3d", "3s 4p"],
        &["1670.7886"],
    ),
    (
        "P",
        "IV",
        15,
        0.106,
        10,
        "",
        &["3s2", "3p2", "3s 3p", "3p 3d", "3s 4p"],
        &["950.6569"],
    ),
    (
        "Ga",
        "II",
        31,
        1.24,
        18,
        "3d10",
        &["4s2", "4p2", "4s 4p", "4p 4d", "4s 5p"],
        &["1414.402"],
    ),
    (
        "In",
        "II",
        49,
        3.22,
        36,
        "4d10",
        &["5s2", "5p2", "5s 5p", "5p 5d", "5s 6p"],
        &["1586.340"],
    ),
    (
        "Sb",
        "IV",
        51,
        1.7,
        36,
        "4d10",
        &["5s2", "5p2", "5s 5p", "5p 5d", "5s 6p"],
        &["1042.19"],
    ),
    (
        "Lu",
        "II",
        71,
        6.4,
        54,
        "4f14",
        &["6s2", "5d2", "6p2", "5d 6s", "6s 6p", "5d 6p"],
        &["2616.192"],
    ),
    (
        "Y",
        "II",
        39,
        4.05,
        36,
        "",
        &["5s2", "4d2", "5p2", "4d 5s", "5s 5p", "4d 5p"],
        &["3634.157"],
    ),
    (
        "Tl",
        "II",
        81,
        5.2,
        54,
        "4f14 5d10",
        &["6s2", "6p2", "6s 6p", "6p 6d", "6s 7p"],
        &["1321.6449"],
    ),
];

/// A line: ion, J of the upper level, wavenumbers and f.
struct Line {
    name: String,
    /// The configurations that mix.
    outer: String,
    source: String,
    observed: (f64, f64),
    computed: (f64, f64),
}

fn lines(ions: &[Ion]) -> Vec<Line> {
    let table = vector_rows("resonance_lines_fvalues.csv");
    let mut found = Vec::new();
    for &(element, stage, z, alpha, noble, further, outer, wanted) in ions {
        let core: Vec<Subshell> = configuration(noble, further);
        let mass_number = stable_mass_number(z);
        let bare = field(&Atom::relativistic(z, core.clone(), mass_number)).expect("the core");
        let radius = (bare.orbitals.iter())
            .filter_map(|orbital| bare.expectation(orbital, 1))
            .fold(0.0, f64::max);
        let configurations = outer.iter().map(|text| {
            let mut whole = core.clone();
            whole.extend(configuration(0, text));
            whole
        });
        let mut case = Case::new(z, mass_number, configurations.collect());
        case.polarisation = Some(Polarisation {
            alpha,
            radius,
            core: core.iter().map(|s| s.orbital()).collect(),
        });
        let spectrum = spectrum(&case);
        let radiation = spectrum
            .lines(&[MultipoleKind::E1], &mut |_| true)
            .expect("lines");
        for wavelength in wanted {
            let row = (table.iter())
                .find(|row| {
                    row["element"] == element
                        && row["stage"] == stage
                        && row["wl_vac_A"] == *wavelength
                })
                .expect("a line of the table");
            let number = |column: &str| row[column].parse::<f64>().expect("a number");
            let observed = (number("E_up_cm1") - number("E_low_cm1"), number("f"));
            let two_j = number("g_up") as i32 - 1;
            let ground = number("g_low") as i32 - 1;
            // The strongest line of that J near the place: what the table's line is.
            let best = (radiation.lines.iter())
                .filter(|line| line.lower == 0)
                .filter_map(|line| {
                    let (_, lower) = spectrum.level(spectrum.levels[0])?;
                    let (_, upper) = spectrum.level(spectrum.levels[line.upper])?;
                    let wavenumber = upper.energy - lower.energy;
                    // f = 303.75 S/(g λ), λ in Å: Martin & Wiese.
                    let f = 303.75e-8 * line.s * wavenumber / f64::from(lower.two_j + 1);
                    (upper.two_j == two_j && (wavenumber / observed.0 - 1.0).abs() < 0.35)
                        .then_some((wavenumber, f))
                })
                .max_by(|a, b| a.1.total_cmp(&b.1));
            found.push(Line {
                name: format!("{element} {stage}, J = {} – {}", half(ground), half(two_j)),
                outer: outer.join(", "),
                source: match row["source"].as_str() {
                    "Morton2000" => "Morton (2000)".into(),
                    "Morton2003" => "Morton (2003)".into(),
                    other => panic!("{other}: an unknown source"),
                },
                observed,
                computed: best.expect("a computed line"),
            });
        }
    }
    found
}

fn half(two_j: i32) -> String {
    match two_j % 2 {
        0 => (two_j / 2).to_string(),
        _ => format!("{two_j}/2"),
    }
}

/// A row for each line.
fn listed(what: &str, lines: &[Line]) -> Listing {
    let mut listing = Listing::new(
        &format!("Resonance lines of {what} ions one by one"),
        "Wavelengths in vacuum, absorption f; mixing and core polarisation on, nothing fitted. Tables: Morton, Astrophys. J. Suppl. 130, 403 (2000) and 149, 205 (2003), as in linetools 0.3.2 (BSD-3-Clause); polarisabilities of the cores from memory of Johnson, Kolb and Huang, At. Data Nucl. Data Tables 28, 333 (1983).",
        &[
            "line",
            "configurations",
            "tabulated, nm",
            "computed, nm",
            "deviation",
            "f tabulated",
            "f computed",
            "deviation",
            "source",
        ],
    );
    for line in lines {
        let (computed, observed) = (1e7 / line.computed.0, 1e7 / line.observed.0);
        listing.rows.push(vec![
            line.name.clone(),
            line.outer.clone(),
            format!("{observed:.3}"),
            format!("{computed:.1}"),
            format!("{:+.1} %", 100.0 * (computed / observed - 1.0)),
            format!("{}", line.observed.1),
            format!("{:.4}", line.computed.1),
            format!(
                "{:+.1} %",
                100.0 * (line.computed.1 / line.observed.1 - 1.0)
            ),
            line.source.clone(),
        ]);
    }
    listing
}

fn check(name: &str, what: &str, ions: &[Ion], tolerance: f64) {
    let lines = lines(ions);
    list(name, &listed(what, &lines));
    let mut ratios = Vec::new();
    let mut shifts = Vec::new();
    for line in &lines {
        let ratio = line.computed.1 / line.observed.1 - 1.0;
        let shift = line.computed.0 / line.observed.0 - 1.0;
        ratios.push(ratio);
        shifts.push(shift);
    }
    let (median, worst) = median_and_largest(&ratios);
    let (median_shift, worst_shift) = median_and_largest(&shifts);
    report(
        name,
        Row {
            quantity: format!(
                "f > 0.1 of {what} resonance lines, mixing and core polarisation, nothing fitted: median of |ratio − 1| (worst {worst:.2}; wavenumbers: median {median_shift:.3}, worst {worst_shift:.3})"
            ),
            cases: lines.len(),
            worst: median,
            tolerance,
            measure: "relative".into(),
            source: "Morton (2000, 2003) by linetools 0.3.2 (BSD-3-Clause); polarisabilities from memory".into(),
        },
    );
}

#[test]
fn alkali_like_ions() {
    check(
        "structure_model_lines_alkali",
        "alkali-like",
        ALKALI_LIKE,
        0.15,
    );
}

#[test]
fn alkaline_earth_like_ions() {
    check(
        "structure_model_lines_alkaline_earth",
        "alkaline-earth-like",
        ALKALINE_EARTH_LIKE,
        0.25,
    );
}
