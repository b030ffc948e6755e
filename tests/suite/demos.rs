//! Whole answers of the demo designs, read by a person before a snapshot is accepted.

#![allow(clippy::unwrap_used)]

use std::path::{Path, PathBuf};

use assert_cmd::Command;

fn demos() -> Vec<PathBuf> {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("designs-demo");
    let mut all: Vec<PathBuf> = std::fs::read_dir(folder)
        .unwrap()
        .map(|e| e.unwrap().path())
        .filter(|p| p.extension().is_some_and(|e| e == "toml"))
        .collect();
    all.sort();
    all
}

fn answer(design: &Path, columns: usize, options: &[&str]) -> String {
    let output = Command::new(env!("CARGO_BIN_EXE_injectance"))
        .current_dir(env!("CARGO_MANIFEST_DIR"))
        .env("COLUMNS", columns.to_string())
        .env("NO_COLOR", "1")
        .arg("assess")
        .arg(Path::new("designs-demo").join(design.file_name().unwrap()))
        .args(options)
        .output()
        .unwrap();
    assert!(
        output.status.success(),
        "{}",
        String::from_utf8_lossy(&output.stderr)
    );
    assert!(output.stderr.is_empty());
    String::from_utf8(output.stdout).unwrap()
}

fn name(design: &Path, what: &str) -> String {
    format!("{}-{what}", design.file_stem().unwrap().to_string_lossy())
}

#[test]
fn there_are_four_and_each_says_it_is_invented() {
    let all = demos();
    assert!(all.len() >= 4, "{all:?}");
    for design in all {
        let text = std::fs::read_to_string(&design).unwrap();
        let first = text.lines().next().unwrap();
        assert!(
            first.starts_with("# Invented scenario:") && first.contains("invented"),
            "{first}"
        );
    }
}

#[test]
fn short_answers() {
    for design in demos() {
        for columns in [80, 140] {
            let text = answer(&design, columns, &[]);
            assert!(
                text.lines().count() <= 24,
                "{}: {} lines",
                design.display(),
                text.lines().count()
            );
            assert!(text.lines().all(|l| l.chars().count() <= columns), "{text}");
            insta::assert_snapshot!(name(&design, &columns.to_string()), text);
        }
    }
}

#[test]
fn full_answers() {
    for design in demos() {
        for columns in [80, 140] {
            let text = answer(&design, columns, &["--full"]);
            let long: Vec<&str> = text
                .lines()
                .filter(|l| l.chars().count() > columns)
                .collect();
            assert!(long.is_empty(), "{}: {long:#?}", design.display());
            if columns == 80 {
                insta::assert_snapshot!(name(&design, "full"), text);
            }
        }
    }
}

/// What each demo claims in its comment holds in the machine's answer.
#[test]
fn the_demos_answer_their_questions() {
    let json = |file: &str, options: &[&str]| -> serde_json::Value {
        let mut all = vec!["--format", "json"];
        all.extend(options);
        serde_json::from_str(&answer(Path::new(file), 80, &all)).unwrap()
    };
    let p = |v: &serde_json::Value| v["injected_polarization"]["value"].as_f64().unwrap();
    let ohmic = json("ohmic-contact.toml", &[]);
    assert_eq!(ohmic["goals_met"], false);
    assert!(p(&ohmic) < 1e-3);
    let tunnel = json("tunnel-contact.toml", &[]);
    assert_eq!(tunnel["goals_met"], true);
    assert!(p(&tunnel) > 100.0 * p(&ohmic));
    let thick = json("thick-barriers.toml", &[]);
    assert_eq!(thick["goals_met"], false);
    let window = &thick["goals"][0]["window"];
    let edge = window["intervals"][0]["high"]["value"].as_f64().unwrap();
    assert!(window["here"]["value"].as_f64().unwrap() > 100.0 * edge);
    let valve = json("metal-spin-valve.toml", &[]);
    let kept = json(
        "metal-spin-valve.toml",
        &[
            "--set",
            "stack.2.interface.spin_memory_loss=0",
            "--set",
            "stack.4.interface.spin_memory_loss=0",
        ],
    );
    let change = |v: &serde_json::Value| v["resistance_area_change"]["value"].as_f64().unwrap();
    assert!(
        change(&kept) > 1.05 * change(&valve),
        "{} {}",
        change(&kept),
        change(&valve)
    );
}
