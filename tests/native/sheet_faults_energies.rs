//! Every fault of what a sheet says about energies, light sources and media: its code, its place, a
//! plain sentence, a bound, and a way out that leaves a better sheet.
//!
//! The codes are this project's own. Which ranks a Slater integral has is Condon & Shortley, *The Theory
//! of Atomic Spectra* (1935), ch. VI: F^k with k even up to 2ℓ, G^k with |ℓ − ℓ′| ≤ k ≤ ℓ + ℓ′.

use rungline_core::sheet::Document;
use serde_json::{Value, json};

/// Code and path of each fault, after a look at its words.
fn faults(sheet: &Value) -> Vec<(String, String)> {
    let document = Document::read(&serde_json::from_value(sheet.clone()).expect("JSON"));
    let found = document.faults.iter().map(|fault| {
        assert!(fault.message.ends_with('.'), "{}", fault.message);
        let bound = fault.bound.as_deref().unwrap_or("None.");
        assert!(bound.ends_with('.'), "{bound}");
        assert!(!bound.starts_with(char::is_lowercase), "{bound}");
        assert!(fault.bound.is_some() || !fault.ways.is_empty());
        (fault.code.to_owned(), fault.path.clone())
    });
    found.collect()
}

/// The faults of one given parameter, for the carbon-like configurations 2p2 and 2p 3s.
fn of_given(name: &str, value: &str) -> Vec<(String, String)> {
    faults(&json!({
        "rungline": 1, "species": "C", "configurations": ["2p2", "2p 3s"],
        "structure": {"given": {name: value}}
    }))
}

fn one(code: &str, path: &str) -> Vec<(String, String)> {
    vec![(code.to_owned(), path.to_owned())]
}

#[test]
fn given_parameters_are_taken_in_every_spelling() {
    for (name, value) in [
        ("F2(2p,2p)", "5.5 eV"),
        ("F²(2p,2p)", "44362 cm⁻¹"),
        ("F2(2p,2p) @ 2p2", "0 cm-1"),
        ("G1(3s,2p)", "3000 cm-1"),
        ("G1(2p,3s) @ [He] 2s2 2p 3s", "3000 cm-1"),
        ("zeta(2p)", "-1 cm-1"),
        ("ζ(2p)", "31 cm-1"),
        ("E(2p2)", "-20 cm-1"),
        ("E(2p 3s)", "60000 cm-1"),
        ("alpha(2p)", "12 cm-1"),
        ("r(2p,3s)", "1.1 a0"),
        ("r2(2p,2p)", "3 a0^2"),
    ] {
        assert_eq!(of_given(name, value), [], "{name}: {value}");
    }
}

#[test]
fn a_wrong_unit_of_a_parameter_is_told_by_its_kind() {
    for (name, value, code) in [
        ("F2(2p,2p)", "5 nm", "unit-of-another-quantity"),
        ("zeta(2p)", "31", "unit-missing"),
        ("r(2p,3s)", "1 cm-1", "unit-of-another-quantity"),
        ("r2(2p,2p)", "1 a0", "unit-of-another-quantity"),
        ("E(2p2)", "3 bananas", "unit-unknown"),
    ] {
        let path = format!("/structure/given/{name}");
        assert_eq!(of_given(name, value), one(code, &path), "{name}: {value}");
    }
}

#[test]
fn a_name_that_is_none_or_that_no_shell_has_is_told() {
    for (name, code) in [
        ("bogus", "parameter-unknown"),
        ("Q2(2p,2p)", "parameter-unknown"),
        ("F2(2p)", "parameter-unknown"),
        ("F1(2p,2p)", "parameter-rank-impossible"),
        ("F4(2p,2p)", "parameter-rank-impossible"),
        ("F0(2p,2p)", "parameter-rank-impossible"),
        ("zeta(3s)", "parameter-rank-impossible"),
        ("zeta(3d)", "parameter-without-shell"),
        ("F2(2p,4f)", "parameter-without-shell"),
        ("zeta(2p) @ 2p3", "parameter-of-no-configuration"),
        ("E(2p3)", "parameter-of-no-configuration"),
        ("G1(2p,3s) @ 2p2", "parameter-without-shell"),
        ("G1(2s,2p)", "parameter-of-closed-shell"),
    ] {
        let path = format!("/structure/given/{name}");
        assert_eq!(of_given(name, "1 cm-1"), one(code, &path), "{name}");
    }
}

#[test]
fn a_slater_integral_is_never_negative() {
    let sheet = json!({
        "rungline": 1, "species": "*", "configurations": ["3d2"],
        "structure": {"given": {"F2(3d,3d)": "−70000 cm-1"}}
    });
    assert_eq!(
        faults(&sheet),
        one("slater-integral-negative", "/structure/given/F2(3d,3d)")
    );
    let document = Document::read(&serde_json::from_value(sheet).unwrap());
    assert_eq!(document.faults[0].ways[0].replacement, "70000 cm-1");
    assert_eq!(
        of_given("G1(2p,3s)", "-1 cm-1"),
        one("slater-integral-negative", "/structure/given/G1(2p,3s)")
    );
}

#[test]
fn a_parameter_has_one_value() {
    let sheet = json!({
        "rungline": 1, "species": "*", "configurations": ["3d 4p"],
        "structure": {"given": {"F2(3d,4p)": "1 cm-1", "F²(4p, 3d)": "2 cm-1", "F2(4p,3d) @ 3d 4p": "3 cm-1"}}
    });
    assert_eq!(
        faults(&sheet),
        one("parameter-repeated", "/structure/given/F²(4p, 3d)")
    );
}

#[test]
fn any_atom_has_no_nucleus_to_compute_energies_from() {
    let sheet = |energies: &str| json!({"rungline": 1, "species": "*", "configurations": ["3d2"], "structure": {"energies": energies}});
    assert_eq!(
        faults(&sheet("computed")),
        one("energies-need-a-nucleus", "/structure/energies")
    );
    assert_eq!(faults(&sheet("given")), []);
    assert_eq!(
        faults(&sheet("guessed")),
        one("unknown-choice", "/structure/energies")
    );
}

#[test]
fn a_pin_needs_a_level_that_is_there() {
    let sheet = |name: &str| json!({"rungline": 1, "species": "C", "configurations": ["2p2"], "measured": {name: "16.40 cm-1"}});
    assert_eq!(faults(&sheet("2p2 3P1")), []);
    for (name, code) in [
        ("2p2 5P1", "level-unknown"),
        ("2p2 3P3", "level-unknown-J"),
        ("2p3 4S3/2", "level-of-no-configuration"),
    ] {
        let found = faults(&sheet(name));
        assert_eq!(found.len(), 1, "{name}: {found:?}");
        assert_eq!(found[0].1, format!("/measured/{}", name.replace('/', "~1")));
        if code != "level-unknown-J" {
            assert_eq!(found[0].0, code, "{name}");
        }
    }
}

#[test]
fn windows_and_media_are_checked() {
    let of = |extra: Value| {
        let mut sheet = json!({"rungline": 1, "species": "Na", "configurations": ["3s", "3p"]});
        for (key, value) in extra.as_object().expect("a group") {
            sheet[key] = value.clone();
        }
        faults(&sheet)
    };
    assert_eq!(
        of(
            json!({"window": ["588 nm", "590 nm"], "medium": "air", "refractive_index": "1.76",
            "air": {"temperature": "20 °C", "pressure": "1013 hPa", "humidity": "50 %", "co2": "420 ppm"},
            "source": {"temperature": "2500 K", "electron_density": "1e15 cm-3", "column": "1e15 m-2"}})
        ),
        []
    );
    assert_eq!(
        of(json!({"window": ["590 nm", "5900 Å"]})),
        one("window-empty", "/window/1")
    );
    for allowed in [
        json!(["590 nm", "588 nm"]),
        json!(["590 nm"]),
        json!(["", "590 nm"]),
        json!(["2 eV", "2.2 eV"]),
        json!(["500 THz", "17000 cm-1"]),
    ] {
        assert_eq!(of(json!({"window": allowed})), [], "{allowed}");
    }
    assert_eq!(
        of(json!({"window": ["-2 eV", "590 nm"]})),
        one("quantity-out-of-range", "/window/0")
    );
    assert_eq!(
        of(json!({"window": ["588 nm", "590 kg"]})),
        one("unit-of-another-quantity", "/window/1")
    );
    assert_eq!(
        of(json!({"window": ["588 nm", "589 nm", "590 nm"]})),
        one("too-many-entries", "/window")
    );
    assert_eq!(
        of(json!({"refractive_index": "17"})),
        one("quantity-out-of-range", "/refractive_index")
    );
    assert_eq!(
        of(json!({"air": {"humidity": "140 %"}})),
        one("quantity-out-of-range", "/air/humidity")
    );
    assert_eq!(
        of(json!({"source": {"electron_density": "1e20 m-2"}})),
        one("unit-of-another-quantity", "/source/electron_density")
    );
}

#[test]
fn a_mean_square_is_never_negative() {
    let sheet = |name: &str, value: &str| {
        json!({
            "rungline": 1, "species": "*", "configurations": ["3s", "3p", "3d"],
            "structure": {"given": {name: value}}
        })
    };
    let place = "/structure/given/r2(3p,3p)".to_owned();
    let found = faults(&sheet("r2(3p,3p)", "-3 a0^2"));
    assert_eq!(found, [("mean-square-negative".to_owned(), place)]);
    // Between two orbitals it has either sign.
    assert!(faults(&sheet("r2(3s,3d)", "-3 a0^2")).is_empty());
}
