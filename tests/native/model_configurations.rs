//! Distances between configurations, nothing fitted, against measured ones: tests/vectors/configuration_distances.csv, whose head
//! names the sources. The limits of the answers on levels and lines say these numbers.

use rungline_tests::sheets::{answer, number, rows};
use rungline_tests::{Listing, Row, list, median_and_largest, report, vector_rows};
use serde_json::{Value, json};

const SOURCE: &str = "Sugar and Corliss, J. Phys. Chem. Ref. Data 14, Suppl. 2 (1985); Moore, NBS Circ. 467 (1949–1958); Martin, Zalubas and Hagan, NSRDS-NBS 60 (1978), from memory";

fn levels(species: &str, configurations: [&str; 2]) -> Value {
    let sheet = json!({"rungline": 1, "species": species, "configurations": configurations});
    answer(&sheet, "levels")
}

/// The lowest energy of a configuration.
fn lowest(levels: &Value, configuration: &str) -> f64 {
    let own = format!("{configuration} ");
    let found = rows(levels, "levels")
        .iter()
        .find(|row| row["label"].as_str().expect("a label").starts_with(&own));
    number(found.expect("a level of this configuration"), "energy")
}

/// How far too high more electrons of a kind put the lowest level of a configuration, cm⁻¹, with a row for the report.
fn departures(kind: &str, table: &mut Listing) -> Vec<f64> {
    let mut found = Vec::new();
    for row in vector_rows("configuration_distances.csv") {
        if row["kind"] != kind {
            continue;
        }
        let (from, to) = (row["from"].as_str(), row["to"].as_str());
        let answer = levels(&row["species"], [from, to]);
        let computed = lowest(&answer, to) - lowest(&answer, from);
        let measured: f64 = row["distance"].parse().expect("a distance");
        let more: f64 = row["more"].parse().expect("electrons");
        found.push((computed - measured) * more.signum());
        table.rows.push(vec![
            row["species"].clone(),
            from.into(),
            to.into(),
            format!("{measured:.0}"),
            format!("{computed:.0}"),
            format!("{:+.0}", computed - measured),
        ]);
    }
    found
}

#[test]
fn distances_are_as_far_off_as_the_answer_says() {
    let mut table = Listing::new(
        "Distances between configurations",
        "From the lowest level of one configuration to the lowest of the other, cm⁻¹, both configurations alone in a sheet, nothing fitted. Source: see tests/vectors/configuration_distances.csv, from memory.",
        &["ion", "from", "to", "measured", "computed", "departure"],
    );
    let says = |answer: &Value| answer["limits"].to_string();
    let iron = says(&levels("Fe I", ["3d6 4s2", "3d7 4s"]));
    let promoted = says(&levels("Fe I", ["3d6 4s2", "3d6 4s 4p"]));
    let cerium = says(&levels("Ce III", ["4f2", "4f 5d"]));
    let sodium = says(&levels("Na I", ["3s", "3p"]));
    assert!(!sodium.contains("Distances between configurations"));
    for (kind, sign, said, words, tolerance) in [
        ("d", 1.0, &iron, "one more d electron", 17_000.0),
        ("f", 1.0, &cerium, "one more f electron", 32_000.0),
        (
            "s to p",
            -1.0,
            &promoted,
            "an electron moved from s to p",
            10_000.0,
        ),
    ] {
        let found = departures(kind, &mut table);
        let (median, largest) = median_and_largest(&found);
        // All but what is next to nothing lie on the side that the words name.
        assert!(found.iter().all(|d| d * sign > -200.0), "{kind}: {found:?}");
        let hundreds = |value: f64| (value / 100.0).round() * 100.0;
        let numbers = format!("with {words} up to {} cm", hundreds(largest));
        let middle = format!("median {}", hundreds(median));
        assert!(said.contains(&numbers), "{numbers}: {said}");
        assert!(said.contains(&middle), "{middle}: {said}");
        report(
            &format!("model_configurations_{}", kind.replace(' ', "_")),
            Row {
                quantity: format!(
                    "distances between configurations that differ by {words}, nothing fitted (median {})",
                    hundreds(median)
                ),
                cases: found.len(),
                worst: largest,
                tolerance,
                measure: "cm⁻¹".into(),
                source: SOURCE.into(),
            },
        );
    }
    list("model_configurations", &table);
}

/// The way out that the limit names: one measured level of each configuration.
#[test]
fn a_measured_level_takes_its_configuration_along() {
    let pinned = json!({
        "rungline": 1, "species": "Fe I", "configurations": ["3d6 4s2", "3d7 4s"],
        "measured": {"3d6 4s2 5D4": "0 cm-1", "3d7 4s 5F5": "6928.268 cm-1"}
    });
    let of = |answer: &Value, label: &str| {
        let row = rows(answer, "levels")
            .iter()
            .find(|row| row["label"] == label);
        number(row.expect("a level"), "energy")
    };
    let (computed, placed) = (
        levels("Fe I", ["3d6 4s2", "3d7 4s"]),
        answer(&pinned, "levels"),
    );
    let above = |answer: &Value| of(answer, "3d7 4s 5F4") - of(answer, "3d7 4s 5F5");
    assert_eq!(of(&placed, "3d7 4s 5F5"), 6928.268);
    assert!((above(&placed) - above(&computed)).abs() < 1e-6);
}
