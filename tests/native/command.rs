//! The command: answers, streams, faults, records, exit codes.

use std::io::Write;
use std::process::{Command, Stdio};

use rungline_core::sheet;
use serde_json::Value;

fn command(arguments: &[&str], input: &str) -> (i32, String, String) {
    let mut child = Command::new(env!("CARGO_BIN_EXE_rungline"))
        .args(arguments)
        .stdin(Stdio::piped())
        .stdout(Stdio::piped())
        .stderr(Stdio::piped())
        .spawn()
        .unwrap();
    // A command that refuses its arguments ends without reading.
    let _ = child.stdin.take().unwrap().write_all(input.as_bytes());
    let output = child.wait_with_output().unwrap();
    let text = |bytes: Vec<u8>| String::from_utf8(bytes).unwrap();
    (
        output.status.code().unwrap(),
        text(output.stdout),
        text(output.stderr),
    )
}

#[test]
fn the_command_answers_streams_faults_and_records() {
    let good = r#"{"rungline":1,"species":"Fe"}"#;
    let bad = r#"{"rungline":1,"species":"Xx"}"#;
    let (code, out, err) = command(&["answer", "-", "--question", "states"], good);
    assert_eq!((code, err.as_str()), (0, ""));
    assert!(out.starts_with(r#"{"rungline":1,"answers":{"states":{"#));
    assert_eq!(out.lines().count(), 1);

    let (code, out, err) = command(&["answer", "-", "--json"], bad);
    assert_eq!((code, out.as_str()), (2, ""), "a fault writes nothing");
    let faults: Value = serde_json::from_str(&err).unwrap();
    assert_eq!(faults[0]["path"], "/species");

    let (code, out, _) = command(&["answer", "-"], &format!("{good}\n{bad}\n{good}\n"));
    assert_eq!(code, 2);
    let kinds: Vec<bool> = out
        .lines()
        .map(|line| line.starts_with("{\"fault\":"))
        .collect();
    assert_eq!(kinds, [false, true, false]);

    let (code, out, _) = command(
        &["answer", "-"],
        &format!("{{\n{}\n}}\n", r#""rungline":1,"species":"Fe""#),
    );
    assert_eq!(
        (code, out.lines().count()),
        (0, 1),
        "a sheet may span lines"
    );

    let (code, _, err) = command(&["answer", "-", "--question", "colour"], good);
    assert_eq!(code, 2);
    assert!(err.contains("colour"));

    let (code, out, _) = command(&["answer", "-"], &format!("nonsense\n{good}\n"));
    assert_eq!(code, 2);
    let kinds: Vec<bool> = out
        .lines()
        .map(|line| line.starts_with("{\"fault\":"))
        .collect();
    assert_eq!(kinds, [true, false], "a stream may begin badly");

    let folder = std::env::temp_dir().join(format!("rungline-{}", std::process::id()));
    std::fs::create_dir_all(&folder).unwrap();
    let record = sheet::record_message(&serde_json::from_str(good).unwrap());
    let record: Value = serde_json::from_str(&record).unwrap();
    let (kept, moved) = (folder.join("kept.json"), folder.join("moved.json"));
    std::fs::write(&kept, record["record"].as_str().unwrap()).unwrap();
    std::fs::write(
        &moved,
        record["record"]
            .as_str()
            .unwrap()
            .replace("\"n_levels\":34", "\"n_levels\":35"),
    )
    .unwrap();
    assert_eq!(command(&["recheck", kept.to_str().unwrap()], "").0, 0);
    let (code, out, _) = command(&["recheck", moved.to_str().unwrap()], "");
    assert_eq!(code, 1);
    assert!(out.contains("/states/n_levels"));
    let hollow = folder.join("hollow.json");
    std::fs::write(
        &hollow,
        format!("{{\"rungline\":1,\"codata\":2022,\"sheet\":{good},\"answers\":{{}}}}"),
    )
    .unwrap();
    assert_eq!(
        command(&["recheck", hollow.to_str().unwrap()], "").0,
        1,
        "a missing answer has moved"
    );
    std::fs::write(
        &hollow,
        format!("{{\"rungline\":2,\"sheet\":{good},\"answers\":5,\"zz\":1}}"),
    )
    .unwrap();
    assert_eq!(command(&["recheck", hollow.to_str().unwrap()], "").0, 2);
    std::fs::remove_dir_all(folder).unwrap();
}

/// The energies of ¹³³Cs in a field from the command, by the formula of Breit & Rabi, Phys. Rev. 38, 2082 (1931), for
/// the two states of largest |M|: E = 7A/4 ± (g_J μ_B/2 − 7 g_I μ_N/2) B.
#[test]
fn the_command_splits_a_level_with_its_nucleus() {
    let sheet = r#"{"rungline":1,"species":"133Cs","configurations":["6s"],
        "nucleus":{"spin":"7/2","g_I":"0.7377","magnetic_dipole":{"6s 2S1/2":"2298.1579425 MHz"}},
        "field":{"flux_density":"0.01 T"}}"#;
    let (code, out, err) = command(&["answer", "-", "--question", "splitting"], sheet);
    assert_eq!((code, err.as_str()), (0, ""));
    let answer: Value = serde_json::from_str(&out).unwrap();
    let states = answer["answers"]["splitting"]["states"].as_array().unwrap();
    assert_eq!(states.len(), 16);
    let (mhz, mu_b, mu_n) = (
        29_979.245_8,
        0.466_864_477_19,
        7.622_593_218_8 / 29_979.245_8,
    );
    for (m, sign) in [("4", 1.0), ("-4", -1.0)] {
        let state = states.iter().find(|s| s["M"] == m).unwrap();
        let moment = 2.002_319_304_36 / 2.0 * mu_b - 3.5 * 0.7377 * mu_n;
        let expected = 1.75 * 2_298.157_942_5 / mhz + sign * moment * 0.01;
        let found = state["energy"].as_f64().unwrap();
        assert!(
            (found / expected - 1.0).abs() < 1e-9,
            "{m}: {found} {expected}"
        );
    }
}

#[test]
fn what_the_command_does_not_know_is_a_plain_fault() {
    for (arguments, words) in [
        (
            vec!["answer", "--questoin", "-"],
            "\"answer\" has no option \"--questoin\".",
        ),
        (
            vec!["answer", "-q", "-"],
            "\"answer\" has no option \"-q\".",
        ),
        (
            vec!["recheck", "--question", "-"],
            "\"recheck\" has no option \"--question\".",
        ),
        (
            vec!["--verbose"],
            "The option \"--verbose\" stands where a command has to stand.",
        ),
        (vec!["anwser", "-"], "There is no command \"anwser\"."),
        (vec!["answer"], "A file is missing."),
        (
            vec!["answer", "-", "--question"],
            "--question needs a name.",
        ),
    ] {
        let (code, out, err) = command(&arguments, "");
        assert_eq!((code, out.as_str()), (2, ""), "{arguments:?}");
        assert!(err.starts_with(&format!("rungline: {words} ")), "{err}");
    }
    let (code, _, err) = command(&["answer", "-", "--jsn", "--json"], "");
    let faults: Value = serde_json::from_str(&err).unwrap();
    assert_eq!(
        (code, &faults[0]["code"]),
        (2, &Value::from("unknown-option"))
    );
    assert!(faults[0]["bound"].as_str().unwrap().contains("--question"));
}
