//! Build script: makes the index of the shipped library, so that a run parses only the files that its
//! design names. Reads nothing but the one-line keys of `[material]` and `[interface]`; a test compares the
//! index with the full parse.

// A build script talks to cargo on standard output.
#![allow(clippy::print_stdout)]

use std::fmt::Write as _;
use std::path::{Path, PathBuf};
use std::{env, fs};

fn toml_files(folder: &Path, into: &mut Vec<PathBuf>) -> std::io::Result<()> {
    let mut entries: Vec<PathBuf> = fs::read_dir(folder)?
        .map(|e| e.map(|e| e.path()))
        .collect::<Result<_, _>>()?;
    entries.sort();
    for path in entries {
        if path.is_dir() {
            toml_files(&path, into)?;
        } else if path.extension().is_some_and(|e| e == "toml") {
            into.push(path);
        }
    }
    Ok(())
}

fn head_value(text: &str, key: &str) -> Option<String> {
    let start = text
        .lines()
        .position(|l| l.starts_with("[material]") || l.starts_with("[interface]"))?;
    text.lines()
        .skip(start + 1)
        .take_while(|l| !l.starts_with('['))
        .find_map(|l| {
            l.strip_prefix(key)?
                .trim_start()
                .strip_prefix('=')
                .map(str::trim)
        })
        .map(|v| v.split(" #").next().unwrap_or(v).trim().to_owned())
}

fn text_value(text: &str, key: &str) -> Option<String> {
    head_value(text, key).map(|v| v.trim_matches('"').to_owned())
}

fn list_value(text: &str, key: &str) -> Vec<String> {
    head_value(text, key)
        .map(|v| {
            v.trim_matches(|c| c == '[' || c == ']')
                .split(',')
                .map(|s| s.trim().trim_matches('"').to_owned())
                .filter(|s| !s.is_empty())
                .collect()
        })
        .unwrap_or_default()
}

fn main() -> Result<(), Box<dyn std::error::Error>> {
    let root = PathBuf::from(env::var("CARGO_MANIFEST_DIR")?);
    let library = root.join("materials");
    println!("cargo::rerun-if-changed=materials");
    println!("cargo::rerun-if-changed=src/materials/build_index.rs");
    let mut files = Vec::new();
    toml_files(&library, &mut files)?;
    let mut out = String::from("pub(crate) static SHIPPED: &[ShippedFile] = &[\n");
    for path in files {
        let text = fs::read_to_string(&path)?;
        let inside = path
            .strip_prefix(&root)?
            .to_string_lossy()
            .replace('\\', "/");
        println!("cargo::rerun-if-changed={inside}");
        let role = if text.lines().any(|l| l.starts_with("[material]")) {
            format!(
                "Role::Material {{ class: {:?}, aliases: &{:?} }}",
                text_value(&text, "class").unwrap_or_default(),
                list_value(&text, "aliases")
            )
        } else if text.lines().any(|l| l.starts_with("[interface]")) {
            format!(
                "Role::Interface {{ ferromagnet: {:?}, barrier: {:?}, channel: {:?} }}",
                text_value(&text, "ferromagnet").unwrap_or_default(),
                text_value(&text, "barrier"),
                text_value(&text, "channel")
            )
        } else {
            "Role::Priors".to_owned()
        };
        writeln!(
            out,
            "    ShippedFile {{ path: {inside:?}, id: {:?}, name: {:?}, role: {role}, text: include_str!(concat!(env!(\"CARGO_MANIFEST_DIR\"), \"/\", {inside:?})) }},",
            text_value(&text, "id").unwrap_or_default(),
            text_value(&text, "name").unwrap_or_default(),
        )?;
    }
    out.push_str("];\npub(crate) static REFERENCES: &str = include_str!(concat!(env!(\"CARGO_MANIFEST_DIR\"), \"/materials/references.bib\"));\n");
    fs::write(
        PathBuf::from(env::var("OUT_DIR")?).join("library_index.rs"),
        out,
    )?;
    Ok(())
}
