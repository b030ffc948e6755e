//! Do the outputs shown in README.md come out of the program, and do its commands name files that exist?

#![allow(clippy::unwrap_used)]

use std::path::Path;

use assert_cmd::Command;

fn readme() -> String {
    std::fs::read_to_string(Path::new(env!("CARGO_MANIFEST_DIR")).join("README.md")).unwrap()
}

/// Splits a command line as a shell does, as far as double quotes go.
fn words(line: &str) -> Vec<String> {
    let mut all = Vec::new();
    let mut word = String::new();
    let mut quoted = false;
    for c in line.chars() {
        match c {
            '"' => quoted = !quoted,
            ' ' if !quoted => {
                if !word.is_empty() {
                    all.push(std::mem::take(&mut word));
                }
            }
            c => word.push(c),
        }
    }
    if !word.is_empty() {
        all.push(word);
    }
    all
}

#[test]
fn the_outputs_shown_are_the_programs() {
    let text = readme();
    let mut shown = 0;
    for part in text.split("<!-- output of: ").skip(1) {
        let (command, rest) = part.split_once(" -->").unwrap();
        let block = rest
            .split("```text\n")
            .nth(1)
            .unwrap()
            .split("```")
            .next()
            .unwrap();
        let output = Command::new(env!("CARGO_BIN_EXE_injectance"))
            .current_dir(env!("CARGO_MANIFEST_DIR"))
            .env("COLUMNS", "80")
            .env("NO_COLOR", "1")
            .args(words(command))
            .output()
            .unwrap();
        assert!(output.status.success(), "{command}");
        assert_eq!(
            String::from_utf8(output.stdout).unwrap(),
            block,
            "README.md shows another output of `{command}`"
        );
        shown += 1;
    }
    assert_eq!(shown, 2);
}

#[test]
fn the_two_commands_are_there() {
    let text = readme();
    let command = |mark: &str| {
        text.split(mark)
            .nth(1)
            .unwrap()
            .split("```sh\n")
            .nth(1)
            .unwrap()
            .lines()
            .next()
            .unwrap()
            .to_owned()
    };
    assert_eq!(command("<!-- test -->"), "cargo test --locked");
    let run = command("<!-- run -->");
    let design = words(&run).pop().unwrap();
    assert!(run.starts_with("cargo run --release --locked -- assess "));
    assert!(Path::new(env!("CARGO_MANIFEST_DIR")).join(design).is_file());
}
