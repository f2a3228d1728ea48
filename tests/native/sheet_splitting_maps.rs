//! Maps over the field, crossings, resonances and the end of the linear pattern, through the sheet.

use rungline_core::sheet::{self, Json};
use rungline_tests::relative_error;
use rungline_tests::sheets::{self, number, rows};
use serde_json::{Value, json};

/// MHz in one cm⁻¹, exact by the definition of the metre.
const MHZ: f64 = 29_979.245_8;
/// μ_B/hc in cm⁻¹ per tesla, CODATA 2022.
const MU_B: f64 = 0.466_864_477_19;

fn answer(sheet: &Value) -> Value {
    sheets::answer(sheet, "splitting")
}

fn map(sheet: &Value) -> Value {
    let sheet: Json = serde_json::from_value(sheet.clone()).unwrap();
    let text = sheet::splitting_map_message(&sheet, &mut sheet::unwatched);
    let map: Value = serde_json::from_str(&text).unwrap();
    assert!(map["map"].is_object(), "{text}");
    map["map"].clone()
}

#[test]
fn the_map_holds_the_answers_of_its_fields() {
    let sheet = |tesla: &str| {
        json!({
            "rungline": 1, "species": "87Rb", "configurations": ["5s", "5p"],
            "line": {"upper": "5p 2P3/2", "lower": "5s 2S1/2"},
            "nucleus": {"magnetic_dipole": {"5s 2S1/2": "3417.341 MHz", "5p 2P3/2": "84.7185 MHz"},
                        "electric_quadrupole": {"5p 2P3/2": "12.4965 MHz"}},
            "field": {"flux_density": tesla, "up_to": "0.199 T", "view": "45 deg", "polariser": "30 deg"}
        })
    };
    let whole = map(&sheet("0.199 T"));
    let fields = rows(&whole, "tesla");
    assert_eq!(fields.len(), 200);
    for step in [0, 1, 100, 199] {
        let tesla = fields[step].as_f64().unwrap();
        let found = answer(&sheet(&format!("{tesla} T")));
        let at = |row: &Value, key: &str| row[key][step].as_f64().unwrap();
        let states = rows(&found, "states");
        assert_eq!(states.len(), rows(&whole, "states").len());
        for (one, other) in states.iter().zip(rows(&whole, "states")) {
            assert_eq!(one["name"], other["name"]);
            assert_eq!(number(one, "energy"), at(other, "energies"));
            assert_eq!(number(one, "slope"), at(other, "slopes"));
        }
        let name = |place: &Value| &whole["states"][place.as_u64().unwrap() as usize]["name"];
        let mut met = 0;
        for component in rows(&whole, "components") {
            let own = rows(&found, "components").iter().find(|c| {
                c["upper"] == *name(&component["upper"]) && c["lower"] == *name(&component["lower"])
            });
            let Some(own) = own else {
                assert!(at(component, "strengths") <= 1e-12);
                continue;
            };
            met += 1;
            assert_eq!(number(own, "strength"), at(component, "strengths"));
            assert!((number(own, "seen") - at(component, "seen")).abs() < 1e-15);
            assert!((number(own, "offset") - at(component, "offsets")).abs() < 1e-15);
        }
        assert_eq!(met, rows(&found, "components").len());
    }
    // Slopes are those of the energies: the cubic through two fields meets the field between them.
    for state in rows(&whole, "states") {
        let of = |key: &str, step: usize| state[key][step].as_f64().unwrap();
        let h = fields[2].as_f64().unwrap() - fields[0].as_f64().unwrap();
        for step in [40, 120, 180] {
            let middle = 0.5 * (of("shifts", step) + of("shifts", step + 2))
                + h / 8.0 * (of("slopes", step) - of("slopes", step + 2));
            assert!(
                (middle - of("shifts", step + 1)).abs() < 1e-6,
                "{} {step}",
                state["name"]
            );
        }
    }
}

#[test]
fn a_map_that_cannot_be_had_says_why() {
    let fault = |sheet: Value| {
        let sheet: Json = serde_json::from_value(sheet).unwrap();
        let text = sheet::splitting_map_message(&sheet, &mut sheet::unwatched);
        let found: Value = serde_json::from_str(&text).unwrap();
        found["faults"][0]["code"].as_str().unwrap().to_owned()
    };
    let line = json!({"upper": "3p 2P1/2", "lower": "3s 2S1/2"});
    assert_eq!(
        fault(
            json!({"rungline": 1, "species": "*", "configurations": ["3s", "3p"], "line": line, "field": {"flux_density": "1 T"}})
        ),
        "map-needs-energies"
    );
    assert_eq!(
        fault(json!({"rungline": 1, "species": "Na"})),
        "needs-a-field"
    );
    let sheet: Json = serde_json::from_value(
        json!({"rungline": 1, "species": "Na I", "configurations": ["3s", "3p"], "field": {"flux_density": "1 T"}}),
    )
    .unwrap();
    let text = sheet::splitting_map_message(&sheet, &mut |_| false);
    assert!(text.contains("\"stopped\""), "{text}");
}

/// Clock transitions, resonances and crossings of a caesium atom. The slope of the 9.19 GHz line vanishes without
/// field; ν(F=3,M=−1 → F=4,M=0) is flat near 41.7 mT (Breit & Rabi's formula solved by hand: x from dν/dx = 0).
#[test]
fn crossings_and_resonances_are_told() {
    let found = answer(&json!({
        "rungline": 1, "species": "133Cs", "configurations": ["6s"],
        "nucleus": {"magnetic_dipole": {"6s 2S1/2": "2298.1579425 MHz"}},
        "field": {"flux_density": "1 mT", "up_to": "0.1 T"}
    }));
    let clock = |first: &str, second: &str| {
        let all = rows(&found, "crossings").iter();
        let row = all.clone().find(|c| {
            c["kind"] == "clock"
                && c["first"] == format!("6s 2S1/2 {first}")
                && c["second"] == format!("6s 2S1/2 {second}")
        });
        number(row.unwrap_or_else(|| panic!("{first}")), "tesla")
    };
    assert!(clock("F 3 M 0", "F 4 M 0") < 1e-9);
    let flat = clock("F 3 M -1", "F 4 M 0");
    // √(1 + x²) of M = 0 and √(1 − x/2 + x²) of M = −1 have opposite slopes but for g_I:
    // x/√(1 + x²) = (1/4 − x)/√(1 − x/2 + x²).
    let x =
        (2.002_319_304_36 * MU_B + 0.737_720 * 7.622_593_218_8 / MHZ) * flat / (9_192.631_77 / MHZ);
    let balance = x / (1.0 + x * x).sqrt() + (x - 0.25) / (1.0 - x / 2.0 + x * x).sqrt();
    assert!(balance.abs() < 2e-3, "{flat} {x} {balance}");
    // Every resonance is the distance of its states, and is driven along or across the field.
    let energy = |name: &Value| {
        let states = rows(&found, "states").iter();
        number(
            states.clone().find(|s| s["name"] == *name).unwrap(),
            "energy",
        )
    };
    assert!(rows(&found, "resonances").len() >= 30);
    for resonance in rows(&found, "resonances") {
        let apart = (energy(&resonance["to"]) - energy(&resonance["from"])) * MHZ;
        assert!(
            (number(resonance, "mhz") - apart).abs() < 1e-8,
            "{resonance}"
        );
        assert!(number(resonance, "strength") > 0.0);
    }
}

/// The linear pattern ends where a component is further off than the tolerance, and not before.
#[test]
fn the_end_of_the_linear_pattern() {
    let sheet = |tesla: f64, tolerance: &str| {
        json!({
            "rungline": 1, "species": "Na I", "configurations": ["3s", "3p"],
            "line": {"upper": "3p 2P3/2", "lower": "3s 2S1/2"},
            "field": {"flux_density": format!("{tesla} T"), "up_to": "50 T", "tolerance": tolerance}
        })
    };
    for tolerance in ["1 %", "0.05 cm-1"] {
        let end = number(&answer(&sheet(1.0, tolerance))["linear"], "departs_at");
        for (factor, beyond) in [(0.999, false), (1.001, true)] {
            let found = answer(&sheet(end * factor, tolerance));
            let largest = rows(&found, "components")
                .iter()
                .map(|c| number(c, "linear").abs());
            let scale = largest.fold(0.0, f64::max);
            let allowed = if tolerance == "1 %" {
                0.01 * scale
            } else {
                0.05
            };
            let off = number(&found["linear"], "largest_difference");
            assert_eq!(off > allowed, beyond, "{tolerance} {end} {off} {allowed}");
        }
    }
    // The doublet's levels cross: 3p 2P1/2 M = 1/2 rises into 3p 2P3/2 M = −3/2.
    let found = answer(&json!({
        "rungline": 1, "species": "Na I", "configurations": ["3s", "3p"],
        "measured": {"3s 2S1/2": "0 cm-1", "3p 2P1/2": "16956.170 cm-1", "3p 2P3/2": "16973.366 cm-1"},
        "line": {"upper": "3p 2P", "lower": "3s 2S"}, "field": {"flux_density": "1 T", "up_to": "60 T"}
    }));
    let crossing = rows(&found, "crossings")
        .iter()
        .find(|c| c["kind"] == "crossing" && c["first"] == "3p 2P1/2 M 1/2");
    let tesla = number(crossing.unwrap(), "tesla");
    // With g_s = 2 and b = μ_B B/ζ of a p electron: −2b + 1/2 = −1/4 + b/2 + ½√(9/4 + b + b²) at b = 2/9·… ;
    // solved here by bisection on the 2 × 2 matrix of M = 1/2 with the true g_s.
    let (g_s, zeta) = (2.002_319_304_36, 17.196 / 1.5);
    let upper = |b: f64| zeta / 2.0 - (1.0 + g_s / 2.0) * MU_B * b;
    let lower = |b: f64| {
        let (up, down) = (
            g_s / 2.0 * MU_B * b,
            -zeta / 2.0 + (1.0 - g_s / 2.0) * MU_B * b,
        );
        0.5 * (up + down) + (0.25 * (up - down) * (up - down) + zeta * zeta / 2.0).sqrt()
    };
    let lower_branch = |b: f64| {
        let (up, down) = (
            g_s / 2.0 * MU_B * b,
            -zeta / 2.0 + (1.0 - g_s / 2.0) * MU_B * b,
        );
        up + down - lower(b)
    };
    let (mut low, mut high) = (1.0, 60.0);
    for _ in 0..200 {
        let middle = 0.5 * (low + high);
        if upper(middle) > lower_branch(middle) {
            low = middle;
        } else {
            high = middle;
        }
    }
    assert!(relative_error(tesla, low) < 1e-6, "{tesla} {low}");
}

/// The clock points of a ground state by the formula of Breit & Rabi, Phys. Rev. 38, 2082 (1931): far below the end
/// of the map they are found as well as near it, those of two photons too.
#[test]
fn clock_points_do_not_hang_on_the_end_of_the_map() {
    // (isotope, configuration, A in MHz, 2I, g_I, published field of the pair of two photons in T): ⁸⁷Rb by
    // Harber et al., Phys. Rev. A 66, 053616 (2002), with the g_J of rubidium, which moves it by 0.4 %.
    let cases = [
        ("87Rb", "5s", "3417.34130545 MHz", 3, Some(3.228_917e-4)),
        ("133Cs", "6s", "2298.1579425 MHz", 7, None),
    ];
    for (isotope, shell, a, two_i, published) in cases {
        let level = format!("{shell} 2S1/2");
        let f = [i64::from(two_i - 1) / 2, i64::from(two_i + 1) / 2];
        let asked = |up_to: &str| {
            answer(&json!({
                "rungline": 1, "species": isotope, "configurations": [shell],
                "nucleus": {"magnetic_dipole": {&level: a}},
                "field": {"flux_density": "1 mT", "up_to": up_to}
            }))
        };
        for up_to in ["0.01 T", "1 T", "100 T"] {
            let found = asked(up_to);
            let clock = |m: i64, n: i64| {
                let names = [
                    format!("{level} F {} M {m}", f[0]),
                    format!("{level} F {} M {n}", f[1]),
                ];
                let all = rows(&found, "crossings").iter();
                let row = all.clone().find(|c| {
                    c["kind"] == "clock" && c["first"] == names[0] && c["second"] == names[1]
                });
                row.unwrap_or_else(|| panic!("{isotope} up to {up_to}: {names:?}"))
                    .clone()
            };
            let zero = clock(0, 0);
            assert_eq!((number(&zero, "tesla"), &zero["photons"]), (0.0, &json!(1)));
            let pair = clock(-1, 1);
            assert_eq!(pair["photons"], 2);
            let tesla = number(&pair, "tesla");
            if let Some(published) = published {
                assert!((tesla / published - 1.0).abs() < 5e-3, "{tesla}");
            }
            // ν = E_hfs/2 [√(1 + 4x/(2I+1) + x²) + √(1 − 4x/(2I+1) + x²)] − 2 g_I μ_N B is flat:
            // its slope in x by hand.
            let hfs: f64 = number(&zero, "mhz");
            let g_i = number(&found["nucleus"], "g_I");
            let nuclear = g_i * 7.622_593_218_8 * tesla;
            let electron = 2.002_319_304_36 * MU_B * MHZ * tesla;
            let x = (electron + nuclear) / hfs;
            let c = 2.0 / f64::from(two_i + 1);
            let root = |sign: f64| (1.0 + 2.0 * sign * c * x + x * x).sqrt();
            let slope = hfs / 2.0 * ((x + c) / root(1.0) + (x - c) / root(-1.0)) * x;
            assert!(
                (slope / (2.0 * nuclear) - 1.0).abs() < 1e-6,
                "{isotope} {up_to}: {slope} {nuclear}"
            );
            let frequency = hfs / 2.0 * (root(1.0) + root(-1.0)) - 2.0 * nuclear;
            assert!((number(&pair, "mhz") - frequency).abs() < 1e-6);
        }
        // Where it was looked for is said.
        let limits = asked("1 T")["limits"].to_string();
        assert!(limits.contains("in steps of at most"), "{limits}");
    }
}

/// States and components that coincide without a field part there and do not cross.
#[test]
fn nothing_crosses_without_a_field() {
    for up_to in ["0.001 T", "0.01 T", "1 T", "500 T"] {
        let found = answer(&json!({
            "rungline": 1, "species": "23Na", "configurations": ["3s", "3p"],
            "nucleus": {"magnetic_dipole": {
                "3s 2S1/2": "885.81 MHz", "3p 2P1/2": "94.44 MHz", "3p 2P3/2": "18.53 MHz"
            }},
            "line": {"upper": "3p 2P", "lower": "3s 2S"},
            "field": {"flux_density": "1 mT", "up_to": up_to}
        }));
        for key in ["crossings", "component_crossings"] {
            for row in rows(&found, key)
                .iter()
                .filter(|row| row["kind"] != "clock")
            {
                assert!(number(row, "tesla") > 1e-9, "{up_to}: {row}");
            }
        }
    }
    // Levels of one term have one g but for what lies far away: no distance that is smallest at 10⁻⁹ T.
    let helium = answer(&json!({
        "rungline": 1, "species": "He I", "configurations": ["1s 2p", "1s 2s"],
        "field": {"flux_density": "1 T"}
    }));
    for row in rows(&helium, "crossings") {
        assert!(number(row, "tesla") > 1e-4, "{row}");
    }
}

/// Rows that are cut off are those of the highest fields, and their number is told.
#[test]
fn the_first_crossings_are_listed() {
    let asked = |up_to: &str| {
        answer(&json!({
            "rungline": 1, "species": "Cr I", "configurations": ["3d5 4s"],
            "field": {"flux_density": "0.1 T", "up_to": up_to}
        }))
    };
    let (near, far) = (asked("0.3 T"), asked("1 T"));
    let fields = |answer: &Value| -> Vec<f64> {
        let all = rows(answer, "crossings").iter();
        all.map(|row| number(row, "tesla")).collect()
    };
    let (few, many) = (fields(&near), fields(&far));
    assert_eq!(number(&near, "crossings_left_out"), 0.0);
    assert!(number(&far, "crossings_left_out") > 0.0);
    assert_eq!(many.len(), 120);
    for all in [&few, &many] {
        assert!(all.windows(2).all(|pair| pair[0] <= pair[1]));
    }
    let both = few.len().min(many.len());
    assert!(both > 20, "{both}");
    for (one, other) in few.iter().zip(&many) {
        // As good as the energies: 10⁻¹¹ cm⁻¹ beside shifts of 10⁻³ cm⁻¹.
        assert!((one - other).abs() <= 1e-6 * one.abs(), "{one} {other}");
    }
    let resonances = rows(&far, "resonances").iter();
    let frequencies: Vec<f64> = resonances.clone().map(|r| number(r, "mhz")).collect();
    assert!(frequencies.windows(2).all(|pair| pair[0] <= pair[1]));
    for row in resonances {
        let slope = number(row, "slope");
        assert!(slope != 0.0 || slope.is_sign_positive(), "{row}");
    }
}
