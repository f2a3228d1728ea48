//! Every entry of the compact table of ground levels against the table it was made from.
//!
//! Source: mendeleev 1.3.0 (MIT), `tests/vectors/ground_levels_all_ions.csv` and
//! `ground_configurations.csv`, whose columns `term` and `J` were read by another program.

use std::collections::BTreeMap;

use rungline_core::elements::{HEAVIEST, Status, by_symbol, observed_ground, symbol};
use rungline_tests::{Row, report, vector_rows};

type Listing = BTreeMap<(u8, u8), u32>;

/// Writes out `[Ar].3d6.4s2`, with cores taken from the same file.
fn listing(shells: &str, cores: &BTreeMap<String, Listing>) -> Listing {
    let mut all = Listing::new();
    for word in shells.split('.') {
        if let Some(core) = word.strip_prefix('[') {
            all.extend(cores[core.trim_end_matches(']')].clone());
        } else {
            let letter = word.find(|c: char| c.is_ascii_alphabetic()).unwrap();
            let l = "spdf".find(&word[letter..=letter]).unwrap();
            let electrons = word[letter + 1..].parse().unwrap_or(1);
            all.insert(
                (word[..letter].parse().unwrap(), u8::try_from(l).unwrap()),
                electrons,
            );
        }
    }
    all
}

#[test]
fn all_entries_are_decoded_as_tabulated() {
    let rows = vector_rows("ground_levels_all_ions.csv");
    assert_eq!(rows.len(), 5847);
    let mut cores: BTreeMap<String, Listing> = BTreeMap::new();
    for row in rows.iter().filter(|row| row["charge"] == "0") {
        let neutral = listing(&row["shells"], &cores);
        cores.insert(row["symbol"].clone(), neutral);
    }
    let mut differing = 0;
    for row in &rows {
        let z: u8 = row["Z"].parse().unwrap();
        let charge: i32 = row["charge"].parse().unwrap();
        let ground = observed_ground(z, charge).unwrap_or_else(|| panic!("{row:?}"));
        let status = match (row["semi_empirical"].as_str(), row["theoretical"].as_str()) {
            ("0", "0") => Status::Measured,
            ("1", "0") => Status::SemiEmpirical,
            _ => Status::Theoretical,
        };
        let decoded: Listing = ground
            .subshells
            .iter()
            .map(|&(n, l, e)| ((n, l), e))
            .collect();
        let term = ground
            .level
            .term
            .map_or(String::new(), |term| term.to_string());
        let j = ground.level.j.map_or(String::new(), |j| j.to_string());
        // The other program gives J only beside a term.
        let j_agrees = if row["term"].is_empty() {
            let level = &row["level_raw"];
            level.is_empty() || level == "*" || level.trim_end_matches('>').ends_with(&j)
        } else {
            j == row["J"]
        };
        let electrons: u32 = decoded.values().sum();
        let odd = decoded
            .iter()
            .fold(false, |odd, ((_, l), e)| odd ^ (u32::from(*l) * e % 2 == 1));
        let agrees = ground.written == row["shells"]
            && decoded == listing(&row["shells"], &cores)
            && i64::from(electrons) == i64::from(z) - i64::from(charge)
            && term == row["term"]
            && j_agrees
            && ground.level.odd == row["level_raw"].contains('*')
            // Parity by counting is the parity that the table marks.
            && ground.level.odd == odd
            && ground.status == status
            && ground.references.join(",") == row["refs"]
            && symbol(z) == Some(row["symbol"].as_str());
        if !agrees {
            differing += 1;
            eprintln!("{row:?}\n{ground:?}");
        }
    }
    report(
        "elements_ground",
        Row {
            quantity: "tabulated ground configurations and levels, decoded".into(),
            cases: rows.len(),
            worst: f64::from(differing),
            tolerance: 0.0,
            measure: "cases that differ".into(),
            source: "mendeleev 1.3.0 (MIT)".into(),
        },
    );
}

#[test]
fn nothing_is_added_but_heavy_neutral_atoms() {
    let rows = vector_rows("ground_levels_all_ions.csv");
    let tabulated: Vec<(u8, i32)> = rows
        .iter()
        .map(|row| (row["Z"].parse().unwrap(), row["charge"].parse().unwrap()))
        .collect();
    let mut added = Vec::new();
    for z in 1..=HEAVIEST {
        for charge in -1..=i32::from(z) {
            if observed_ground(z, charge).is_some() && !tabulated.contains(&(z, charge)) {
                added.push((z, charge));
                assert_eq!(
                    observed_ground(z, charge).unwrap().status,
                    Status::Extrapolated
                );
            }
        }
    }
    let heavy: Vec<(u8, i32)> = (109..=118).map(|z| (z, 0)).collect();
    assert_eq!(added, heavy);
}

#[test]
fn doubtful_entries_say_so() {
    // Ds 6d9 7s and Rg 6d10 7s are extrapolations: a second source, pyscf 2.14.0 (Apache-2.0), has
    // 6d8 7s2 and 6d9 7s2; its occupation per ℓ stands in the same file.
    let rows = vector_rows("ground_configurations.csv");
    for (z, d_electrons) in [(110u8, 38u32), (111, 39)] {
        let ground = observed_ground(z, 0).unwrap();
        assert!(ground.status_text().contains("doubtful"));
        let row = rows.iter().find(|row| row["Z"] == z.to_string()).unwrap();
        let second: Vec<u32> = row["pyscf_spdf_electrons"]
            .split(' ')
            .map(|n| n.parse().unwrap())
            .collect();
        let own: u32 = ground
            .subshells
            .iter()
            .filter(|s| s.1 == 2)
            .map(|s| s.2)
            .sum();
        assert_eq!(second[2], d_electrons);
        assert_eq!(own, d_electrons + 1);
    }
}

#[test]
fn symbols_are_the_tables() {
    let rows = vector_rows("ground_configurations.csv");
    assert_eq!(rows.len(), 118);
    for row in rows {
        assert_eq!(by_symbol(&row["symbol"]), row["Z"].parse().ok());
    }
}
