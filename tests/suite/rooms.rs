//! Are the rooms in order? Each file under `src/<room>` may import only rooms to its left.

#![allow(clippy::unwrap_used)]

use std::fs;
use std::path::{Path, PathBuf};

/// Rooms from left to right. Rooms of one place do not see each other.
const ORDER: &[&[&str]] = &[
    &["numerics", "quantities"],
    &["documents"],
    &["materials", "models"],
    &["designs"],
    &["devices"],
    &["studies"],
    &["presentation"],
    &["cli"],
];

fn place(room: &str) -> Option<usize> {
    ORDER.iter().position(|rooms| rooms.contains(&room))
}

/// Whether `room` may import `other`.
fn may(room: &str, other: &str) -> bool {
    match (place(room), place(other)) {
        (Some(a), Some(b)) => room == other || b < a,
        _ => false,
    }
}

fn sources(folder: &Path, into: &mut Vec<PathBuf>) {
    for entry in fs::read_dir(folder).unwrap() {
        let path = entry.unwrap().path();
        if path.is_dir() {
            sources(&path, into);
        } else if path.extension().is_some_and(|e| e == "rs") {
            into.push(path);
        }
    }
}

/// Rooms that a text names as `crate::room` or, against the house, in a nested import.
fn imports(text: &str) -> Vec<(usize, String)> {
    let mut found = Vec::new();
    for (number, line) in text.lines().enumerate() {
        let code = line.split("//").next().unwrap_or("");
        let mut rest = code;
        while let Some(at) = rest.find("crate::") {
            rest = &rest[at + "crate::".len()..];
            let room: String = rest
                .chars()
                .take_while(|c| c.is_alphanumeric() || *c == '_' || *c == '{')
                .collect();
            found.push((number + 1, room));
        }
    }
    found
}

#[test]
fn no_room_looks_to_its_right() {
    let root = Path::new(env!("CARGO_MANIFEST_DIR")).join("src");
    let mut read = 0;
    let mut seen = 0;
    let mut faults = Vec::new();
    for entry in fs::read_dir(&root).unwrap() {
        let folder = entry.unwrap().path();
        if !folder.is_dir() {
            continue;
        }
        let room = folder.file_name().unwrap().to_string_lossy().into_owned();
        assert!(
            place(&room).is_some(),
            "src/{room} has no place in the order of rooms"
        );
        let mut files = Vec::new();
        sources(&folder, &mut files);
        for file in files {
            read += 1;
            let text = fs::read_to_string(&file).unwrap();
            for (line, other) in imports(&text) {
                seen += 1;
                if !may(&room, &other) {
                    faults.push(format!("{}:{line}: {room} imports {other}", file.display()));
                }
            }
        }
    }
    assert!(read >= 50, "only {read} files were read");
    assert!(seen >= 100, "only {seen} imports were seen");
    assert!(
        faults.is_empty(),
        "imports against the order of rooms:\n{}",
        faults.join("\n")
    );
}

#[test]
fn the_order_itself_refuses_what_it_should() {
    assert!(may("studies", "models") && may("cli", "numerics") && may("designs", "materials"));
    assert!(!may("models", "materials") && !may("materials", "models"));
    assert!(!may("numerics", "quantities") && !may("models", "studies"));
    let sample =
        "use crate::presentation::lines;\n// use crate::cli::x;\nlet y = crate::models::z();";
    let seen: Vec<String> = imports(sample).into_iter().map(|(_, room)| room).collect();
    assert_eq!(seen, ["presentation", "models"]);
    assert!(
        imports("use crate::{models, cli};")
            .iter()
            .all(|(_, room)| !may("cli", room))
    );
}

/// Text for people belongs to presentation and cli, printing to cli alone.
#[test]
fn only_the_command_line_prints() {
    let root = Path::new(env!("CARGO_MANIFEST_DIR")).join("src");
    let mut files = Vec::new();
    sources(&root, &mut files);
    let offenders: Vec<String> = files
        .iter()
        .filter(|f| !f.starts_with(root.join("cli")) && !f.ends_with("build_index.rs"))
        .filter(|f| {
            let text = fs::read_to_string(f).unwrap();
            ["println!", "eprintln!", "print!(", "stdout()", "stderr()"]
                .iter()
                .any(|p| text.contains(p))
        })
        .map(|f| f.display().to_string())
        .collect();
    assert!(files.len() >= 50);
    assert!(offenders.is_empty(), "{offenders:?}");
}
