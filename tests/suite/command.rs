//! The program as a user runs it: whole outputs of the template and laws that hold between them.

#![allow(clippy::unwrap_used, clippy::panic)]

mod streams;

use std::fs;
use std::io::Read as _;
use std::path::{Path, PathBuf};
use std::process::{Command, Stdio};

use assert_cmd::cargo::cargo_bin;
use serde_json::Value;

use injectance::materials::library::Library;

use crate::program::{self, Answer, program};

fn run_at(folder: &Path, columns: &str, arguments: &[&str], stdin: &str) -> Answer {
    let mut command = program(folder, columns);
    command.env_remove("NO_COLOR");
    program::run(command, arguments, stdin.as_bytes())
}

fn here() -> &'static Path {
    Path::new(env!("CARGO_TARGET_TMPDIR"))
}

/// Runs and expects an answer.
fn answer(arguments: &[&str], stdin: &str) -> String {
    let got = run_at(here(), "80", arguments, stdin);
    assert_eq!(got.code, Some(0), "{arguments:?}: {}", got.stderr);
    assert!(got.stderr.is_empty(), "{arguments:?}: {}", got.stderr);
    assert!(!got.stdout.is_empty(), "{arguments:?}");
    got.stdout
}

fn json(arguments: &[&str], stdin: &str) -> Value {
    serde_json::from_str(&answer(&[arguments, &["--format", "json"]].concat(), stdin)).unwrap()
}

fn template() -> String {
    answer(&["new", "vertical"], "")
}

/// The template with the lines of its comments on a second contact taken up.
fn with_detector() -> String {
    let text = template();
    let mut out = String::new();
    let mut taken = 0;
    for line in text.lines() {
        let bare = line.strip_prefix("# ").filter(|l| {
            [
                "[detector]",
                "ferromagnet = ",
                "barrier = ",
                "magnetoresistance = ",
            ]
            .iter()
            .any(|s| l.starts_with(s))
        });
        taken += usize::from(bare.is_some());
        // The channel ends at the detector then.
        if !line.starts_with("end = ") {
            out.push_str(bare.unwrap_or(line));
            out.push('\n');
        }
    }
    assert_eq!(taken, 4, "{text}");
    out
}

fn folder(name: &str) -> PathBuf {
    let path = here().join(format!("command-{name}"));
    let _ = fs::remove_dir_all(&path);
    fs::create_dir_all(&path).unwrap();
    path
}

/// Laws of a text for people: nothing wider than asked for, no blank at the end of a line, no colour.
fn check_lines(what: &str, text: &str, width: usize) -> usize {
    let mut lines = 0;
    for line in text.lines() {
        let long = line.chars().count();
        assert!(
            long <= width,
            "{what}: {long} characters where {width} were asked for: {line}"
        );
        assert_eq!(
            line.trim_end(),
            line,
            "{what}: blanks at the end of: {line:?}"
        );
        lines += 1;
    }
    assert!(
        text.ends_with('\n') && !text.ends_with("\n\n"),
        "{what}: the end is not one line break"
    );
    assert!(
        !text.contains('\u{1b}'),
        "{what}: an escape sequence in a pipe"
    );
    lines
}

const KEYS: [&str; 7] = ["value", "unit", "low", "high", "level", "status", "from"];

/// Counts the number objects and checks each.
fn check_numbers(path: &str, value: &Value) -> usize {
    match value {
        Value::Array(items) => items
            .iter()
            .enumerate()
            .map(|(i, v)| check_numbers(&format!("{path}.{i}"), v))
            .sum(),
        Value::Object(map) if map.contains_key("unit") => {
            let keys: Vec<&str> = map.keys().map(String::as_str).collect();
            assert_eq!(keys, KEYS, "{path}");
            assert!(
                map["value"].is_number() || map["value"].is_null(),
                "{path}: {value}"
            );
            assert!(
                map["unit"].is_string() && map["from"].is_array(),
                "{path}: {value}"
            );
            let status = map["status"].as_str().unwrap();
            assert!(
                ["ok", "outside range", "not computed"].contains(&status),
                "{path}: {status}"
            );
            assert_eq!(
                map["value"].is_null(),
                status == "not computed",
                "{path}: {value}"
            );
            1
        }
        Value::Object(map) => map
            .iter()
            .map(|(k, v)| check_numbers(&format!("{path}.{k}"), v))
            .sum(),
        _ => 0,
    }
}

fn number(document: &Value, key: &str) -> f64 {
    document[key]["value"]
        .as_f64()
        .unwrap_or_else(|| panic!("{key}: {}", document[key]))
}

#[test]
fn the_short_answer_fits_a_screen_and_every_answer_its_width() {
    let mut seen = 0;
    for (name, text) in [
        ("one contact", template()),
        ("two contacts", with_detector()),
    ] {
        for width in [60_usize, 80, 140, 400] {
            let columns = width.to_string();
            for full in [false, true] {
                if full && width == 60 {
                    continue;
                }
                let what = format!("{name}, {width} columns, full: {full}");
                let mut arguments = vec!["assess", "-"];
                if full {
                    arguments.push("--full");
                }
                let by_environment = run_at(here(), &columns, &arguments, &text);
                arguments.extend(["--width", &columns]);
                let by_option = run_at(here(), "999", &arguments, &text);
                assert_eq!(
                    by_environment.code,
                    Some(0),
                    "{what}: {}",
                    by_environment.stderr
                );
                assert_eq!(
                    by_environment.stdout, by_option.stdout,
                    "{what}: COLUMNS and --width differ"
                );
                assert!(
                    by_environment.stderr.is_empty(),
                    "{what}: {}",
                    by_environment.stderr
                );
                let lines = check_lines(&what, &by_environment.stdout, width);
                if !full && width >= 80 {
                    assert!(
                        lines <= 24,
                        "{what}: {lines} lines\n{}",
                        by_environment.stdout
                    );
                }
                if full {
                    assert!(lines > 24, "{what}: {lines} lines");
                }
                seen += 1;
            }
        }
    }
    assert_eq!(seen, 14);
}

#[test]
fn tables_of_the_library_and_of_variations_keep_to_their_width() {
    let text = template();
    let vary = "injector.barrier.resistance_area=1 .. 1e4 Ω µm²";
    let cases: &[&[&str]] = &[
        &["assess", "-", "--vary", vary],
        &["materials", "list"],
        &["materials", "show", "iron"],
        &["materials", "show", "silicon"],
        &["materials", "show", "iron-magnesia-silicon"],
        &["materials", "check"],
        &["findings"],
    ];
    let mut lines = 0;
    for arguments in cases {
        for width in [80, 140] {
            let got = run_at(here(), &width.to_string(), arguments, &text);
            assert_eq!(got.code, Some(0), "{arguments:?}: {}", got.stderr);
            lines += check_lines(&format!("{arguments:?} at {width}"), &got.stdout, width);
        }
    }
    assert!(lines > 200, "only {lines} lines");
}

#[test]
fn json_names_its_format_and_every_number_has_the_seven_keys() {
    for (text, least) in [(template(), 30), (with_detector(), 60)] {
        let document = json(&["assess", "-"], &text);
        assert_eq!(document["format"], "injectance.assessment/1");
        assert_eq!(
            document["program"],
            format!("injectance {}", env!("CARGO_PKG_VERSION"))
        );
        assert_eq!(document["design"], "standard input");
        let numbers = check_numbers("", &document);
        assert!(numbers >= least, "only {numbers} numbers");
    }
    let vary = [
        "assess",
        "-",
        "--vary",
        "channel.thickness=10 .. 1000 nm",
        "--points",
        "5",
    ];
    let document = json(&vary, &template());
    assert_eq!(document["format"], "injectance.variation/1");
    assert_eq!(document["field"], "channel.thickness");
    assert_eq!(document["rows"].as_array().unwrap().len(), 5);
    let numbers = check_numbers("", &document);
    assert!(numbers >= 20, "only {numbers} numbers");
}

#[test]
fn each_row_of_a_variation_equals_a_single_run_bit_for_bit() {
    let one = [
        "injector.barrier.resistance_area=0.1 .. 1e5 Ω µm²",
        "injector.barrier.interface_asymmetry=-0.5 .. 0.9",
        "injector.barrier.interface_asymmetry=5 .. 90 %",
        "channel.thickness=1 nm .. 10 nm",
        "temperature=4.2 .. 400 K",
        "temperature=-100 .. 100 °C",
        "channel.doping=1e19 .. 1e20 /cm³",
        "channel.doping=1e25 .. 1e26 m⁻³",
    ];
    let two = [
        "injector.barrier.resistance_area=1e-17 .. 1e-9 Ω m²",
        "detector.barrier.resistance_area=1 .. 1e4 Ω µm²",
        "channel.thickness=10 .. 3000 nm",
        "temperature=77 .. 300 K",
    ];
    let mut compared = 0;
    for (text, fields, columns) in [(template(), &one[..], 3), (with_detector(), &two[..], 7)] {
        for field in fields {
            let document = json(&["assess", "-", "--vary", field, "--points", "4"], &text);
            let rows = document["rows"].as_array().unwrap();
            assert_eq!(rows.len(), 4, "{field}");
            let path = field.split_once('=').unwrap().0;
            for row in rows {
                let setting = format!("{path}={}", row["as_written"].as_str().unwrap());
                let single = json(&["assess", "-", "--set", &setting], &text);
                let mut of_row = 0;
                assert_eq!(row["goals_met"], single["goals_met"], "{setting}");
                let others = ["as_written", "value", "goals_met"];
                for key in row
                    .as_object()
                    .unwrap()
                    .keys()
                    .filter(|k| !others.contains(&k.as_str()))
                {
                    let (a, b) = (number(row, key), number(&single, key));
                    assert_eq!(
                        a.to_bits(),
                        b.to_bits(),
                        "{setting}: {key}: {a:e} in the row, {b:e} alone"
                    );
                    of_row += 1;
                }
                assert_eq!(of_row, columns, "{setting}");
                compared += of_row;
            }
        }
    }
    assert_eq!(compared, 8 * 4 * 3 + 4 * 4 * 7);
}

#[test]
fn csv_holds_the_numbers_of_the_json() {
    let text = with_detector();
    let vary = [
        "assess",
        "-",
        "--vary",
        "channel.thickness=10 .. 3000 nm",
        "--points",
        "7",
    ];
    let table = answer(&[&vary[..], &["--format", "csv"]].concat(), &text);
    let document = json(&vary, &text);
    let mut reader = csv::Reader::from_reader(table.as_bytes());
    let heads: Vec<String> = reader
        .headers()
        .unwrap()
        .iter()
        .map(str::to_owned)
        .collect();
    assert_eq!(heads[0], "as_written");
    assert_eq!(heads[1], "channel.thickness (m)");
    let mut compared = 0;
    for (record, row) in reader
        .records()
        .map(Result::unwrap)
        .zip(document["rows"].as_array().unwrap())
    {
        assert_eq!(record.len(), heads.len());
        assert_eq!(row["as_written"], record[0]);
        assert_eq!(
            record[record.len() - 1],
            row["goals_met"].as_bool().unwrap().to_string()
        );
        for (head, cell) in heads[..heads.len() - 1].iter().zip(&record).skip(1) {
            let (name, unit) = head.strip_suffix(')').unwrap().split_once(" (").unwrap();
            let key = if name == "channel.thickness" {
                "value"
            } else {
                name
            };
            assert_eq!(row[key]["unit"], unit, "{head}");
            assert_eq!(
                cell.parse::<f64>().unwrap().to_bits(),
                number(row, key).to_bits(),
                "{head}: {cell}"
            );
            compared += 1;
        }
    }
    assert_eq!(compared, 7 * 8);
}

/// Where an input was stated is the only thing that may differ between two ways to state it.
fn without_places(mut document: Value) -> Value {
    let map = document.as_object_mut().unwrap();
    map.remove("design");
    let mut dropped = 0;
    for input in map["inputs"].as_array_mut().unwrap() {
        let origin = input["origin"].as_object_mut().unwrap();
        if origin["kind"] == "design" {
            origin.remove("file");
            origin.remove("line");
            dropped += 1;
        }
    }
    assert!(dropped > 0);
    document
}

#[test]
fn a_setting_answers_as_the_edited_file_does() {
    let text = template();
    let cases: &[(&str, &str, &str)] = &[
        (
            "channel.thickness=40 nm",
            "thickness = \"2 µm\"",
            "thickness = \"40 nm\"",
        ),
        (
            "channel.thickness=\"40 nm\"",
            "thickness = \"2 µm\"",
            "thickness = \"40 nm\"",
        ),
        (
            "temperature = 77 K",
            "temperature = \"300 K\"",
            "temperature = \"77 K\"",
        ),
        (
            "injector.ferromagnet.thickness=2 nm",
            "thickness = \"40 nm\" }\n# resistance_area",
            "thickness = \"2 nm\" }\n# resistance_area",
        ),
        (
            "injector.barrier.resistance_area=2 kΩ µm²",
            "resistance_area = \"100 Ω µm²\", thickness",
            "resistance_area = \"2 kΩ µm²\", thickness",
        ),
        (
            "goal.injected_polarization=>= 30 %",
            "injected_polarization = \">= 10 %\"",
            "injected_polarization = \">= 30 %\"",
        ),
        (
            "injector.barrier.interface_asymmetry=0.3",
            "thickness = \"1.2 nm\" }",
            "thickness = \"1.2 nm\", interface_asymmetry = 0.3 }",
        ),
        (
            "channel.end=reflecting",
            "end = \"semi-infinite\"",
            "end = \"reflecting\"",
        ),
    ];
    let plain = without_places(json(&["assess", "-"], &text));
    let mut changed = 0;
    for (setting, old, new) in cases {
        assert_eq!(text.matches(old).count(), 1, "{old}");
        let set = without_places(json(&["assess", "-", "--set", setting], &text));
        let edited = without_places(json(&["assess", "-"], &text.replace(old, new)));
        assert_eq!(set, edited, "{setting}");
        changed += usize::from(set != plain);
    }
    assert_eq!(changed, cases.len(), "a setting changed nothing");
}

#[test]
fn several_settings_are_all_laid_over_and_the_last_one_wins() {
    let text = template();
    let both = [
        "assess",
        "-",
        "--set",
        "channel.thickness=40 nm",
        "--set",
        "temperature=77 K",
    ];
    let turned = [
        "assess",
        "-",
        "--set",
        "temperature=77 K",
        "--set",
        "channel.thickness=40 nm",
    ];
    assert_eq!(json(&both, &text), json(&turned, &text));
    let twice = [
        "assess",
        "-",
        "--set",
        "channel.thickness=1 nm",
        "--set",
        "channel.thickness=40 nm",
    ];
    let once = ["assess", "-", "--set", "channel.thickness=40 nm"];
    assert_eq!(json(&twice, &text), json(&once, &text));
}

#[test]
fn standard_input_answers_as_the_file_does() {
    let folder = folder("stdin");
    let mut compared = 0;
    for text in [template(), with_detector()] {
        fs::write(folder.join("first.toml"), &text).unwrap();
        for more in [&[][..], &["--full"], &["--format", "json"]] {
            let file = run_at(
                &folder,
                "100",
                &[&["assess", "first.toml"], more].concat(),
                "",
            );
            let stdin = run_at(&folder, "100", &[&["assess", "-"], more].concat(), &text);
            assert_eq!(
                (file.code, stdin.code),
                (Some(0), Some(0)),
                "{}{}",
                file.stderr,
                stdin.stderr
            );
            if more.contains(&"--full") {
                // Names of different length wrap differently.
                let words = |s: &str| s.split_whitespace().collect::<Vec<_>>().join(" ");
                let named = words(&stdin.stdout).replace("standard input", "first.toml");
                assert_eq!(named.len(), words(&file.stdout).len());
            } else {
                assert_eq!(
                    stdin.stdout.replace("standard input", "first.toml"),
                    file.stdout
                );
            }
            compared += 1;
        }
    }
    assert_eq!(compared, 6);
}
