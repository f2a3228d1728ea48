//! Names of levels: every level of many configurations is read back, and nothing that is typed
//! makes the reader fail in any way but by a fault with its place.

use rungline_core::configuration::{Orbital, Subshell};
use rungline_core::terms::{label, ls};

fn shell(n: u8, l: u8, electrons: u32) -> Subshell {
    Subshell::new(Orbital::new(n, l).unwrap(), electrons).unwrap()
}

#[test]
fn every_level_is_read_back_and_names_are_unique() {
    let cases = [
        vec![shell(3, 2, 6), shell(4, 0, 2)],
        vec![shell(4, 3, 7)],
        vec![shell(4, 3, 3), shell(5, 2, 1), shell(6, 0, 1)],
        vec![shell(8, 7, 4), shell(9, 8, 2)],
        vec![],
    ];
    for shells in cases {
        let text: Vec<String> = shells.iter().map(ToString::to_string).collect();
        let text = text.join(" ");
        let all = ls::terms(&shells).unwrap();
        let levels = all.levels(20_000);
        let mut names: Vec<String> = levels
            .iter()
            .map(|level| label::format(&text, level))
            .collect();
        for (name, level) in names.iter().zip(&levels) {
            let read = label::parse(name).unwrap();
            assert_eq!(
                (read.configuration, &read.level),
                (text.as_str(), level),
                "{name}"
            );
            assert!(all.has(&read.level), "{name}");
        }
        names.sort();
        names.dedup();
        assert_eq!(names.len(), levels.len());
    }
}

#[test]
fn levels_that_a_configuration_lacks_are_not_had() {
    let d3 = ls::terms(&[shell(3, 2, 3)]).unwrap();
    let has = |name: &str| d3.has(&label::parse(name).unwrap().level);
    assert!(has("3d3 2D5/2 #2") && has("3d3 4F9/2"));
    // 2D occurs twice: without its index the name is not unique; 4F once: an index is one too many.
    assert!(!has("3d3 2D5/2") && !has("3d3 2D5/2 #3") && !has("3d3 4F9/2 #1") && !has("3d3 2S1/2"));
}

#[test]
fn anything_typed_gives_a_level_or_a_fault_with_its_place() {
    let alphabet: Vec<char> = "0123456789 SPDFGIspd[]#/*°o²³₃⸝⁄-−+.,eאب🙂\u{0}\u{200f}\u{a0}\t\n"
        .chars()
        .collect();
    let mut state = 1_u64;
    let mut draw = |bound: usize| {
        state = state
            .wrapping_mul(6_364_136_223_846_793_005)
            .wrapping_add(1_442_695_040_888_963_407);
        usize::try_from(state >> 33).unwrap() % bound
    };
    let (mut read, mut faults) = (0, 0);
    for _ in 0..60_000 {
        // Random text, or a good name with up to two characters changed.
        let good = [
            "3d3 2D5/2 #2",
            "3d6 4s2 5D4",
            "3p ²P°₃⸝₂",
            "4f7 5d2 11[21]26",
            "",
        ][draw(5)];
        let mut text: Vec<char> = good.chars().collect();
        let changes = if text.is_empty() { draw(14) } else { draw(3) };
        for _ in 0..changes {
            let at = draw(text.len() + 1);
            if at < text.len() && draw(2) == 0 {
                text.remove(at);
            }
            text.insert(at.min(text.len()), alphabet[draw(alphabet.len())]);
        }
        let text: String = text.into_iter().collect();
        match label::parse(&text) {
            Ok(found) => {
                read += 1;
                assert!(found.level.term.has(found.level.j));
                let again = label::format(found.configuration, &found.level);
                assert_eq!(label::parse(&again).unwrap().level, found.level, "{text:?}");
            }
            Err(problem) => {
                faults += 1;
                assert!(
                    problem.start <= problem.end && problem.end <= text.len(),
                    "{text:?}"
                );
                assert!(
                    text.is_char_boundary(problem.start) && text.is_char_boundary(problem.end),
                    "{text:?}"
                );
                assert!(problem.bound.is_some(), "{text:?}");
                for way in &problem.ways {
                    assert!(
                        label::parse(&way.replacement).is_ok(),
                        "{text:?} → {:?}",
                        way.replacement
                    );
                }
            }
        }
    }
    assert!(read > 100 && faults > 1000, "{read} read, {faults} faults");
    for digits in [
        "9".repeat(1500),
        format!("{}P1", "9".repeat(40)),
        format!("3p 2P{}/2", "9".repeat(40)),
    ] {
        assert!(label::parse(&digits).is_err());
    }
}
