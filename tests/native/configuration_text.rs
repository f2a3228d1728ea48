//! What people type for configurations and species, right and wrong: readings, places, ways out.

use rungline_core::configuration::{Species, complete, filling, parse, species};
use rungline_core::problem::Problem;

fn problems(text: &str) -> Vec<Problem> {
    parse(text).expect_err(text)
}

fn codes(text: &str) -> Vec<(&'static str, &str)> {
    problems(text)
        .iter()
        .map(|p| (p.code, text.get(p.start..p.end).expect("whole characters")))
        .collect()
}

fn ways(text: &str) -> Vec<String> {
    problems(text)
        .iter()
        .flat_map(|p| p.ways.iter().map(|w| w.replacement.clone()))
        .collect()
}

fn read(species_text: &str, text: &str) -> String {
    let species = species::parse(species_text).expect(species_text);
    complete(&parse(text).expect(text), &species)
        .expect(text)
        .configuration
        .short_text()
}

fn count_problem(species_text: &str, text: &str) -> Problem {
    let species = species::parse(species_text).unwrap();
    let mut problems = complete(&parse(text).unwrap(), &species).expect_err(text);
    assert_eq!(problems.len(), 1);
    problems.remove(0)
}

#[test]
fn every_way_of_writing_is_one_configuration() {
    for text in [
        "3d6 4s2",
        "4s2 3d6",
        "[Ar] 3d6 4s2",
        "[ar]3d6.4s2",
        "[Ar]3d⁶4s²",
        "3d⁶4s²",
        "3d⁶ 4s²",
        "3d6.4s2",
        "3d64s2",
        "3d6·4s2",
        "3d6, 4s2",
        "3d^6 4s^2",
        "3d^{6}4s^{2}",
        "3d(6) 4s(2)",
        "3d^(6)4s^(2)",
        "3d6\u{A0}4s2",
        "3d6\u{2009}4s2",
        "  3d6\u{202F}4s2  ",
        "1s2 2s2 2p6 3s2 3p6 3d6 4s2",
        "1s22s22p63s23p63d64s2",
    ] {
        assert_eq!(read("Fe", text), "[Ar] 3d6 4s2", "{text}");
    }
    assert_eq!(read("Gd", "4f7 5d 6s2"), "[Xe] 4f7 5d 6s2");
    assert_eq!(read("Gd", "4f75d6s2"), "[Xe] 4f7 5d 6s2");
    assert_eq!(read("Zn", "3d104s2"), "[Ar] 3d10 4s2");
    assert_eq!(read("*", "22[21]3"), "22[21]^3");
    assert_eq!(read("*", "30s 22[21]^3"), "22[21]^3 30s");
    assert_eq!(read("H", "50s"), "50s");
}

#[test]
fn letters_skip_j_and_those_already_used() {
    // s p d f, then alphabetical without j, s, p (common practice); w x y z follow v.
    for (l, letter) in "spdfghiklmnoqrtuvwxyz".chars().enumerate() {
        let text = format!("{}{letter}", l + 1);
        let written = parse(&text).unwrap();
        assert_eq!(
            usize::from(written.subshells[0].subshell.orbital().l()),
            l,
            "{text}"
        );
    }
}

#[test]
fn a_core_is_completed_and_named() {
    let completed = |species_text: &str, text: &str| {
        let species = species::parse(species_text).unwrap();
        let reading = complete(&parse(text).unwrap(), &species).unwrap();
        reading
            .completed_core
            .map(|core| (core.to_string(), core.noble_gas.is_some()))
    };
    assert_eq!(completed("Fe", "3d6 4s2"), Some(("[Ar]".into(), true)));
    assert_eq!(completed("Na", "3p"), Some(("[Ne]".into(), true)));
    assert_eq!(
        completed("Ga", "4p"),
        Some(("1s2 2s2 2p6 3s2 3p6 3d10 4s2".into(), false))
    );
    assert_eq!(
        completed("Fe 16+", "2p5 3s"),
        Some(("1s2 2s2".into(), false))
    );
    assert_eq!(completed("Fe", "[Ar] 3d6 4s2"), None);
    assert_eq!(completed("H", "2p"), None);
    // Any atom: nothing is added.
    assert_eq!(completed("*", "3d6"), None);
}

#[test]
fn the_usual_mistakes_have_their_own_codes() {
    for (text, code, place, way) in [
        ("2p7", "subshell-over-capacity", "2p7", "2p6"),
        ("4f15", "subshell-over-capacity", "4f15", "4f14"),
        (
            "3d99999999999999999999",
            "subshell-over-capacity",
            "3d99999999999999999999",
            "3d10",
        ),
        ("2d", "l-not-below-n", "2d", "3d"),
        ("2d6", "l-not-below-n", "2d", "3d6"),
        ("1p", "l-not-below-n", "1p", "2p"),
        ("3f", "l-not-below-n", "3f", "4f"),
        ("3d6 3d2", "subshell-repeated", "3d2", "3d8"),
        ("3j2", "orbital-letter-unknown", "j", "3d2"),
        ("3d-1", "occupation-negative", "-1", "3d1"),
        ("3d−1", "occupation-negative", "−1", "3d1"),
        ("3d6.5", "occupation-fraction", "3d6.5", "3d6"),
        ("3d6,5 4s", "occupation-fraction", "3d6,5", "3d6 4s"),
        ("1e9s2", "orbital-letter-unknown", "e", "1s 9s2"),
        ("3d0", "occupation-zero", "3d0", "3d"),
        ("3d0 4s2", "occupation-zero", "3d0", "4s2"),
        ("d6", "n-missing", "d6", "3d6"),
        ("[21]3", "n-missing", "[21]3", "22[21]^3"),
        ("51s", "n-out-of-range", "51", "50s"),
        ("0s", "n-out-of-range", "0", "1s"),
        ("n=51", "n-out-of-range", "n=51", "n=50"),
        ("n=0", "n-out-of-range", "n=0", "n=1"),
        ("n=", "shell-number-missing", "n=", "n=3"),
        ("n=5 3d", "bare-shell-with-more", "n=5 3d", "n=5"),
        ("[Xx] 3d6", "core-unknown", "[Xx]", "[Xe] 3d6"),
        ("[] 3d6", "core-unknown", "[]", "[Ar] 3d6"),
        ("[Fe] 3d6", "core-open", "[Fe]", "[Ca] 3d6"),
        ("[Ar] [Kr] 3d6", "core-repeated", "[Kr]", "[Ar] 3d6"),
        ("[Ar 3d6", "core-not-closed", "[Ar", "[Ar] 3d6"),
        ("Ar 3d6", "unexpected-word", "Ar", "[Ar] 3d6"),
        ("argon 3d6", "unexpected-word", "argon", "[Ar] 3d6"),
        ("3D6", "orbital-letter-capital", "D", "3d6"),
        ("3d6 4", "number-without-letter", "4", "3d6 4s"),
        ("3d6(5D)4s2", "unexpected-character", "(5D)", "3d6 4s2"),
        ("3d6–4s2", "unexpected-character", "–", "3d6 4s2"),
        ("3d6+4s2", "unexpected-character", "+", "3d6 4s2"),
        ("", "configuration-empty", "", "1s"),
        ("  ", "configuration-empty", "  ", "1s"),
        ("🙂", "unexpected-character", "🙂", "1s"),
        ("אבג", "unexpected-character", "אבג", "1s"),
        ("\u{202E}3d6", "unexpected-character", "\u{202E}", "3d6"),
    ] {
        assert_eq!(codes(text), [(code, place)], "{text}");
        assert_eq!(ways(text).first().map(String::as_str), Some(way), "{text}");
        assert!(problems(text)[0].bound.is_some(), "{text} states its bound");
    }
}

#[test]
fn every_way_out_of_a_single_fault_can_be_read() {
    for text in [
        "2p7",
        "2d",
        "1p",
        "3f",
        "3d6 3d2",
        "3d6 4s2 3d2",
        "4s2 3d6 3d2",
        " 3d6 3d2 4s",
        "3j2",
        "4f15",
        "3d-1",
        "3d6.5",
        "1e9s2",
        "3d0 4s2",
        "d6 4s2",
        "51s",
        "n=51",
        "[Xx] 3d6",
        "[Fe] 3d6",
        "[Ar][Kr]3d6",
        "[Ar 3d6",
        "Ar 3d6",
        "3D6",
        "3d6 4",
        "3d6(5D)4s2",
        "",
        "🙂",
        "1s22s22p73s",
        "2d6 4s",
        "1s22d6",
        "3d⁶3d²",
    ] {
        for way in ways(text) {
            assert!(parse(&way).is_ok(), "{text:?} → {way:?}: {:?}", parse(&way));
        }
    }
}

#[test]
fn all_faults_are_found_in_the_order_of_the_text() {
    assert_eq!(
        codes("🙂 2p7 [Xx] 3d6 2d 3j2 3d2 q"),
        [
            ("unexpected-character", "🙂"),
            ("subshell-over-capacity", "2p7"),
            ("core-unknown", "[Xx]"),
            ("l-not-below-n", "2d"),
            ("orbital-letter-unknown", "j"),
            ("subshell-repeated", "3d2"),
            ("n-missing", "q"),
        ]
    );
}

#[test]
fn places_hold_behind_an_emoji_a_superscript_and_right_to_left_text() {
    for (before, units) in [
        ("🙂 ", 3),
        ("3d⁶ ", 4),
        ("אב ", 3),
        ("👩\u{200D}🚀3d⁶ אב ", 12),
    ] {
        let text = format!("{before}2p7");
        let all = problems(&text);
        let fault = all
            .iter()
            .find(|p| p.code == "subshell-over-capacity")
            .unwrap();
        assert_eq!(
            (fault.start, fault.end),
            (before.len(), text.len()),
            "{text}"
        );
        let in_utf16 = fault.clone().in_utf16(&text);
        assert_eq!((in_utf16.start, in_utf16.end), (units, units + 3), "{text}");
        let utf16: Vec<u16> = text.encode_utf16().collect();
        assert_eq!(
            String::from_utf16(&utf16[in_utf16.start..in_utf16.end]).unwrap(),
            "2p7"
        );
    }
}

#[test]
fn long_texts_are_refused_with_the_bound() {
    let long = "3d6 ".repeat(2500);
    assert_eq!(long.len(), 10_000);
    let found = problems(&long);
    assert_eq!(found.len(), 1);
    assert_eq!(found[0].code, "configuration-too-long");
    assert_eq!(
        found[0].bound.as_deref(),
        Some("A configuration has at most 400 characters.")
    );
    let found = species::parse(&"Fe".repeat(5000)).unwrap_err();
    assert_eq!(found[0].code, "species-too-long");
}

#[test]
fn the_ground_configuration_is_the_first_way_out_and_no_inner_shell_is_opened() {
    let first =
        |species: &str, text: &str| count_problem(species, text).ways[0].replacement.clone();
    assert_eq!(first("Ti II", "3s"), "3d2 4s");
    assert_eq!(first("Fe", "3s"), "3d6 4s2");
    assert_eq!(first("Fe", "[Ar] 3d5 4s2"), "[Ar] 3d6 4s2");
    let offered = |species: &str, text: &str| -> Vec<String> {
        let ways = count_problem(species, text).ways;
        ways.into_iter().map(|way| way.replacement).collect()
    };
    assert_eq!(offered("Ti II", "3s"), ["3d2 4s"]);
    assert!(offered("Mg", "3p").contains(&"3s 3p".to_string()));
    assert!(offered("Fe", "3d7").contains(&"3d7 4s".to_string()));
    // A charge fits only with the usual core, and cations come before the anion.
    let iron = count_problem("Fe", "4s2 3d");
    assert_eq!(
        iron.bound.as_deref(),
        Some("Fe I has 26 electrons. As written it fits Fe VI.")
    );
    assert_eq!(
        count_problem("Ti II", "3s").bound.as_deref(),
        Some("Ti II has 21 electrons. As written it fits Ti XII.")
    );
}

#[test]
fn the_text_of_every_ground_configuration_is_read_as_that_configuration() {
    for z in 1..=118u8 {
        for charge in -1..i32::from(z) {
            let species = Species {
                element: Some(z),
                charge,
                mass_number: None,
            };
            let ground = filling::ground(z, charge).unwrap();
            let text = ground.configuration().valence_text();
            let written = parse(&text).unwrap();
            let reading = complete(&written, &species);
            assert_eq!(
                reading.map(|r| r.configuration).as_ref(),
                Ok(ground.configuration()),
                "{species}: {text}"
            );
        }
    }
}

#[test]
fn electrons_are_counted_against_the_charge() {
    let few = count_problem("Fe", "[Ar] 3d6 4s");
    assert_eq!(few.code, "too-few-electrons");
    assert_eq!(
        few.bound.as_deref(),
        Some("Fe I has 26 electrons. As written it fits Fe II.")
    );
    assert_eq!(few.ways[0].replacement, "[Ar] 3d6 4s2");
    let many = count_problem("Fe II", "[Ar] 3d6 4s2");
    assert_eq!(many.code, "too-many-electrons");
    assert_eq!(many.ways[0].replacement, "[Ar] 3d6 4s");
    let odd = count_problem("Fe", "3d5 4s2");
    assert_eq!(odd.code, "core-not-closed-shells");
    assert!(odd.message.contains("19"));
    assert!(odd.ways.iter().any(|way| way.replacement == "3d6 4s2"));
    // The order n + ℓ puts 6s before 4f: Hg VI 5d7 needs the core by lowest n, which is offered.
    let mercury = count_problem("Hg 5+", "5d7");
    assert_eq!(
        read("Hg 5+", &mercury.ways[0].replacement),
        read("Hg 5+", "[Xe] 4f14 5d7")
    );
    let helium = count_problem("He", "2p");
    assert!(helium.ways.iter().any(|way| way.replacement == "1s 2p"));
    for (species_text, text) in [
        ("Fe", "[Ar] 3d6 4s"),
        ("Fe II", "[Ar] 3d6 4s2"),
        ("Fe", "3d5 4s2"),
        ("Hg 5+", "5d7"),
        ("He", "2p"),
        ("H-", "1s"),
        ("Fe", "1s"),
        ("H", "[Og] 8s"),
        ("Og", "1s"),
        ("Li", "[Xe]"),
    ] {
        let problem = count_problem(species_text, text);
        assert!(
            !problem.ways.is_empty() || text.starts_with('['),
            "{species_text} {text} offers a way out"
        );
        for way in problem.ways {
            read(species_text, &way.replacement);
        }
    }
}

#[test]
fn other_faults_of_completion() {
    let species = species::parse("Fe").unwrap();
    let fails = |text: &str| complete(&parse(text).unwrap(), &species).unwrap_err();
    let doubled = fails("[Ar] 3p5 3d7 4s2");
    assert_eq!(
        (doubled[0].code, doubled[0].start, doubled[0].end),
        ("subshell-in-core", 5, 8)
    );
    assert_eq!(
        read("Fe", &doubled[0].ways[0].replacement),
        "[Ne] 3s2 3p5 3d7 4s2"
    );
    let high = fails("3d6 4s 35s");
    assert_eq!((high[0].code, high[0].start), ("n-above-filling", 7));
    assert_eq!(read("Fe", &high[0].ways[0].replacement), "[Ar] 3d6 4s 30s");
    assert_eq!(fails("n=5")[0].code, "bare-shell-alone");
    assert_eq!(parse("n = 5").unwrap().bare_shell, Some(5));
    assert_eq!(parse("N=5").unwrap().bare_shell, Some(5));
}

#[test]
fn species_are_read_as_the_trade_writes_them() {
    for (text, reading) in [
        ("Fe", "Fe I"),
        ("fe", "Fe I"),
        (" Fe I ", "Fe I"),
        ("Fe II", "Fe II"),
        ("fe ii", "Fe II"),
        ("FeII", "Fe II"),
        ("Fe+", "Fe II"),
        ("Fe 2+", "Fe III"),
        ("Fe2+", "Fe III"),
        ("Fe+2", "Fe III"),
        ("Fe++", "Fe III"),
        ("Fe³⁺", "Fe IV"),
        ("Fe^3+", "Fe IV"),
        ("Fe(3+)", "Fe IV"),
        ("57Fe II", "57Fe II"),
        ("⁵⁷Fe²⁺", "57Fe III"),
        ("Fe-57", "57Fe I"),
        ("133Cs", "133Cs I"),
        ("iron", "Fe I"),
        ("Iron II", "Fe II"),
        ("cesium", "Cs I"),
        ("wolfram", "W I"),
        ("H-", "H-"),
        ("H−", "H-"),
        ("H⁻", "H-"),
        ("D", "2H I"),
        ("T", "3H I"),
        ("C IV", "C IV"),
        ("CIV", "C IV"),
        ("HI", "H I"),
        ("Co", "Co I"),
        ("co", "Co I"),
        ("Fe 25+", "Fe XXVI"),
        ("Og CXVIII", "Og CXVIII"),
        ("*", "*"),
        (" * ", "*"),
    ] {
        let species =
            species::parse(text).unwrap_or_else(|problems| panic!("{text}: {problems:?}"));
        assert_eq!(species.to_string(), reading, "{text}");
        assert_eq!(species::parse(&species.to_string()), Ok(species));
    }
    assert_eq!(species::parse("Fe 16+").unwrap().electrons(), Some(10));
    assert_eq!(Species::ANY.electrons(), None);
    assert_eq!(Species::ANY.stage(), None);
}

#[test]
fn faults_of_species_name_bound_and_way() {
    for (text, code, place, way) in [
        ("Xx", "element-unknown", "Xx", "Xe"),
        ("Xx II", "element-unknown", "Xx", "Xe II"),
        ("irom", "element-unknown", "irom", "Fe"),
        ("Fe 30+", "charge-above-z", "30+", "Fe 25+"),
        (
            "Fe 99999999999999999999+",
            "charge-above-z",
            "99999999999999999999+",
            "Fe 25+",
        ),
        ("Fe 26+", "charge-leaves-no-electron", "26+", "Fe 25+"),
        ("Fe XXVII", "charge-leaves-no-electron", "XXVII", "Fe 25+"),
        ("H+", "charge-leaves-no-electron", "+", "H I"),
        ("O2-", "charge-too-negative", "2-", "O-"),
        ("Fe IIII", "stage-not-roman", "IIII", "Fe IV"),
        ("Fe abc", "stage-not-roman", "abc", "Fe I"),
        ("Fe 2", "charge-without-sign", "2", "Fe 2+"),
        ("iron(II)", "stage-in-parentheses", "(II)", "iron 2+"),
        ("NI", "species-ambiguous", "NI", "Ni"),
        ("3Fe", "mass-number-out-of-range", "3", "Fe"),
        ("900Fe II", "mass-number-out-of-range", "900", "Fe II"),
        ("Fe 2+-", "charge-unreadable", "2+-", "Fe"),
        ("Fe 99", "charge-without-sign", "99", "Fe"),
        ("* II", "species-any-atom-with-more", "II", "*"),
        ("", "species-empty", "", "*"),
        ("🙂Fe", "species-unexpected-character", "🙂", "Fe"),
        (
            "\u{202E}Fe",
            "species-unexpected-character",
            "\u{202E}",
            "Fe",
        ),
        ("אב Fe", "species-unexpected-character", "אב", "Fe"),
        ("57", "species-without-element", "", "*"),
        ("Fe I II", "several-stages", "I II", "Fe I"),
        ("H 2+", "charge-above-z", "2+", "H I"),
    ] {
        let problems = species::parse(text).expect_err(text);
        assert_eq!(problems.len(), 1, "{text}: {problems:?}");
        let problem = &problems[0];
        assert_eq!(
            (problem.code, text.get(problem.start..problem.end)),
            (code, Some(place)),
            "{text}"
        );
        assert_eq!(
            problem.ways.first().map(|way| way.replacement.as_str()),
            Some(way),
            "{text}"
        );
        assert!(problem.bound.is_some(), "{text} states its bound");
        for way in &problem.ways {
            assert!(
                species::parse(&way.replacement).is_ok(),
                "{text} → {}",
                way.replacement
            );
        }
    }
}

#[test]
fn several_faults_of_a_species_are_all_found() {
    let found: Vec<&str> = species::parse("900Fe 30+")
        .unwrap_err()
        .iter()
        .map(|p| p.code)
        .collect();
    assert_eq!(found, ["mass-number-out-of-range", "charge-above-z"]);
    let found: Vec<&str> = species::parse("Xx IIII")
        .unwrap_err()
        .iter()
        .map(|p| p.code)
        .collect();
    assert_eq!(found, ["element-unknown", "stage-not-roman"]);
}
