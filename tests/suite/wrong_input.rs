//! Wrong input: each file holds one fault, and the program tells exactly that one, at its line, and computes
//! nothing. A line that ends in `# <-` is the one the message has to frame.

#![allow(clippy::unwrap_used, clippy::panic)]

use std::collections::BTreeSet;
use std::fs;
use std::path::{Path, PathBuf};

use crate::program::{self, Answer, program};

const MARK: &str = "# <-";

fn home() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/suite/wrong_input")
}

fn run(folder: &Path, arguments: &[&str], stdin: &[u8]) -> Answer {
    let mut command = program(folder, "100");
    command.env("NO_COLOR", "1");
    program::run(command, arguments, stdin)
}

fn sorted(folder: &Path) -> Vec<PathBuf> {
    let mut paths: Vec<PathBuf> = fs::read_dir(folder)
        .unwrap()
        .map(|e| e.unwrap().path())
        .collect();
    paths.sort();
    paths
}

fn stem(path: &Path) -> String {
    path.file_stem().unwrap().to_str().unwrap().to_owned()
}

fn faults(stderr: &str) -> usize {
    stderr.lines().filter(|l| l.starts_with("  × ")).count()
}

/// Lines that the frames of a message name, as `file:line`.
fn framed(stderr: &str) -> Vec<String> {
    stderr
        .lines()
        .filter_map(|l| l.split_once("╭─[")?.1.strip_suffix(']'))
        .map(|at| at.rsplit_once(':').unwrap().0.to_owned())
        .collect()
}

/// Where the files of a case are marked, as `file:line`.
fn marked(path: &Path) -> Vec<String> {
    let files = if path.is_dir() {
        sorted(path)
    } else {
        vec![path.to_owned()]
    };
    let home = home();
    let mut out = Vec::new();
    for file in files {
        let name = file
            .strip_prefix(&home)
            .unwrap()
            .to_str()
            .unwrap()
            .replace('\\', "/");
        let text = fs::read_to_string(&file).unwrap();
        let lines = text.lines().enumerate().filter(|(_, l)| l.ends_with(MARK));
        out.extend(lines.map(|(i, _)| format!("{name}:{}", i + 1)));
    }
    out
}

fn snapshot(name: &str, text: &str) {
    insta::with_settings!(
        { snapshot_path => "wrong_input/snapshots", prepend_module_to_snapshot => false, omit_expression => true },
        { insta::assert_snapshot!(name, text); }
    );
}

/// Checks a case and gives what is wrong with the answer, if anything.
fn complaint(name: &str, answer: &Answer) -> Option<String> {
    let count = faults(&answer.stderr);
    let what = if answer.code != Some(2) {
        format!("exit code {:?} instead of 2", answer.code)
    } else if !answer.stdout.is_empty() {
        "something on standard output".to_owned()
    } else if count != 1 {
        format!("{count} faults instead of 1")
    } else if answer.stderr.contains('\u{1b}') {
        "colour in spite of NO_COLOR".to_owned()
    } else {
        return None;
    };
    Some(format!("{name}: {what}\n{}", answer.stderr))
}

fn check_all(prefix: &str, cases: &[PathBuf], arguments: &[&str], least: usize) {
    let home = home();
    let mut wrong = Vec::new();
    let mut told = Vec::new();
    let mut at_a_line = 0;
    for path in cases {
        let name = path
            .strip_prefix(&home)
            .unwrap()
            .to_str()
            .unwrap()
            .replace('\\', "/");
        let answer = run(&home, &[arguments, &[&name]].concat(), b"");
        if let Some(complaint) = complaint(&name, &answer) {
            wrong.push(complaint);
            continue;
        }
        let marks = marked(path);
        if !marks.is_empty() {
            at_a_line += 1;
            if framed(&answer.stderr) != marks {
                wrong.push(format!("{name}: not at {marks:?}\n{}", answer.stderr));
                continue;
            }
        }
        told.push((format!("{prefix}-{}", stem(path)), answer.stderr));
    }
    assert!(
        wrong.is_empty(),
        "{} of {}:\n{}",
        wrong.len(),
        cases.len(),
        wrong.join("\n")
    );
    assert!(told.len() >= least, "only {} cases", told.len());
    assert!(
        at_a_line * 10 >= told.len() * 8,
        "only {at_a_line} of {} say where",
        told.len()
    );
    for (name, text) in told {
        snapshot(&name, &text);
    }
}

#[test]
fn each_wrong_design_is_refused_for_its_one_fault() {
    let files = sorted(&home().join("designs"));
    check_all("design", &files, &["assess"], 138);
}

#[test]
fn each_wrong_folder_of_records_is_refused_for_its_one_fault() {
    let folders = sorted(&home().join("records"));
    check_all("records", &folders, &["materials", "check"], 50);
}

#[test]
fn the_files_that_wrong_ones_are_made_from_are_accepted() {
    for good in ["good.toml", "good-stack.toml"] {
        let answer = run(&home(), &["assess", good], b"");
        assert_eq!(answer.code, Some(0), "{good}: {}", answer.stderr);
        assert!(
            answer.stderr.is_empty() && !answer.stdout.is_empty(),
            "{good}: {}",
            answer.stderr
        );
    }
}

/// Name, arguments, standard input. Each is refused for one fault.
const COMMANDS: &[(&str, &[&str], &[u8])] = &[
    (
        "set-without-equals",
        &["assess", "good.toml", "--set", "channel.thickness"],
        b"",
    ),
    (
        "set-empty-path-part",
        &["assess", "good.toml", "--set", "channel..thickness=40 nm"],
        b"",
    ),
    (
        "set-no-path",
        &["assess", "good.toml", "--set", "=40 nm"],
        b"",
    ),
    (
        "set-through-a-text",
        &["assess", "good.toml", "--set", "temperature.value=40 nm"],
        b"",
    ),
    (
        "set-past-the-end-of-a-list",
        &[
            "assess",
            "good-stack.toml",
            "--set",
            "stack.4.normal.thickness=40 nm",
        ],
        b"",
    ),
    (
        "set-word-for-index",
        &[
            "assess",
            "good-stack.toml",
            "--set",
            "stack.first.normal.thickness=40 nm",
        ],
        b"",
    ),
    (
        "set-unknown-key",
        &["assess", "good.toml", "--set", "channel.thicknes=40 nm"],
        b"",
    ),
    (
        "set-unknown-table",
        &["assess", "good.toml", "--set", "chanel.thickness=40 nm"],
        b"",
    ),
    (
        "set-wrong-unit",
        &["assess", "good.toml", "--set", "channel.thickness=40 K"],
        b"",
    ),
    (
        "set-out-of-range",
        &[
            "assess",
            "good.toml",
            "--set",
            "injector.barrier.interface_asymmetry=1.2",
        ],
        b"",
    ),
    (
        "set-unknown-material",
        &["assess", "good.toml", "--set", "channel.material=silicone"],
        b"",
    ),
    (
        "set-nothing",
        &["assess", "good.toml", "--set", "channel.thickness="],
        b"",
    ),
    (
        "vary-without-equals",
        &["assess", "good.toml", "--vary", "channel.thickness"],
        b"",
    ),
    (
        "vary-unknown-field",
        &[
            "assess",
            "good.toml",
            "--vary",
            "channel.thicknes=10 .. 40 nm",
        ],
        b"",
    ),
    (
        "vary-a-text-field",
        &["assess", "good.toml", "--vary", "channel.material=1 .. 2"],
        b"",
    ),
    (
        "vary-field-of-unknown-table",
        &[
            "assess",
            "good.toml",
            "--vary",
            "chanel.thickness=10 .. 40 nm",
        ],
        b"",
    ),
    (
        "vary-reversed-range",
        &[
            "assess",
            "good.toml",
            "--vary",
            "channel.thickness=40 .. 10 nm",
        ],
        b"",
    ),
    (
        "vary-single-value",
        &["assess", "good.toml", "--vary", "channel.thickness=40 nm"],
        b"",
    ),
    (
        "vary-list",
        &["assess", "good.toml", "--vary", "channel.thickness=[1, 2]"],
        b"",
    ),
    (
        "vary-wrong-unit",
        &[
            "assess",
            "good.toml",
            "--vary",
            "channel.thickness=10 .. 40 K",
        ],
        b"",
    ),
    (
        "vary-without-unit",
        &[
            "assess",
            "good.toml",
            "--vary",
            "channel.thickness=10 .. 40",
        ],
        b"",
    ),
    (
        "vary-beyond-range",
        &[
            "assess",
            "good.toml",
            "--vary",
            "injector.barrier.interface_asymmetry=0.5 .. 1.5",
        ],
        b"",
    ),
    (
        "vary-log-from-zero",
        &[
            "assess",
            "good.toml",
            "--vary",
            "injector.barrier.resistance_area=0 .. 1e4 Ω µm²",
            "--spacing",
            "log",
        ],
        b"",
    ),
    (
        "vary-one-point",
        &[
            "assess",
            "good.toml",
            "--vary",
            "channel.thickness=10 .. 40 nm",
            "--points",
            "1",
        ],
        b"",
    ),
    (
        "vary-too-many-points",
        &[
            "assess",
            "good.toml",
            "--vary",
            "channel.thickness=10 .. 40 nm",
            "--points",
            "100001",
        ],
        b"",
    ),
    (
        "vary-without-influence",
        &[
            "assess",
            "good.toml",
            "--vary",
            "injector.barrier.thickness=1 .. 2 nm",
        ],
        b"",
    ),
    (
        "vary-with-full",
        &[
            "assess",
            "good.toml",
            "--vary",
            "channel.thickness=10 .. 40 nm",
            "--full",
        ],
        b"",
    ),
    (
        "vary-with-strict",
        &[
            "assess",
            "good.toml",
            "--vary",
            "channel.thickness=10 .. 40 nm",
            "--strict",
        ],
        b"",
    ),
    (
        "csv-without-vary",
        &["assess", "good.toml", "--format", "csv"],
        b"",
    ),
    ("unknown-material", &["materials", "show", "silicone"], b""),
    (
        "unknown-material-far",
        &["materials", "show", "unobtainium"],
        b"",
    ),
    ("missing-file", &["assess", "nowhere.toml"], b""),
    ("folder-for-file", &["assess", "designs"], b""),
    ("not-utf-8", &["assess", "latin-1.toml"], b""),
    (
        "standard-input-not-toml",
        &["assess", "-"],
        b"thickness: 40 nm\n",
    ),
    ("standard-input-empty", &["assess", "-"], b""),
    ("standard-input-not-utf-8", &["assess", "-"], b"# \xb5m\n"),
    (
        "missing-folder-of-records",
        &["assess", "good.toml", "--materials", "nowhere"],
        b"",
    ),
    (
        "folder-without-records",
        &["materials", "check", "snapshots"],
        b"",
    ),
    (
        "wrong-records-beside-good-design",
        &[
            "assess",
            "good.toml",
            "--materials",
            "records/class-unknown",
        ],
        b"",
    ),
    (
        "records-for-design",
        &["materials", "check", "good.toml"],
        b"",
    ),
];

#[test]
fn each_wrong_command_is_refused_for_its_one_fault() {
    let mut wrong = Vec::new();
    let names: BTreeSet<&str> = COMMANDS.iter().map(|(name, _, _)| *name).collect();
    assert_eq!(names.len(), COMMANDS.len(), "two cases have one name");
    assert!(COMMANDS.len() >= 41);
    let mut told = Vec::new();
    for (name, arguments, stdin) in COMMANDS {
        let answer = run(&home(), arguments, stdin);
        match complaint(name, &answer) {
            Some(complaint) => wrong.push(complaint),
            None => told.push((format!("command-{name}"), answer.stderr)),
        }
    }
    assert!(
        wrong.is_empty(),
        "{} of {}:\n{}",
        wrong.len(),
        COMMANDS.len(),
        wrong.join("\n")
    );
    for (name, text) in told {
        snapshot(&name, &text);
    }
}

#[test]
fn a_file_too_large_to_be_a_design_is_refused_unread() {
    let folder = Path::new(env!("CARGO_TARGET_TMPDIR"));
    let line = "# a comment that goes on and on\n";
    fs::write(
        folder.join("huge.toml"),
        line.repeat(5_000_000 / line.len()),
    )
    .unwrap();
    let answer = run(folder, &["assess", "huge.toml"], b"");
    assert_eq!(complaint("huge.toml", &answer), None);
    snapshot("command-huge-file", &answer.stderr);
    let answer = run(
        folder,
        &["assess", "-"],
        line.repeat(5_000_000 / line.len()).as_bytes(),
    );
    assert_eq!(complaint("huge standard input", &answer), None);
    snapshot("command-huge-standard-input", &answer.stderr);
}

/// What the parser of arguments refuses is told in its own words, with usage.
#[test]
fn wrong_options_are_refused_with_usage() {
    let cases: &[&[&str]] = &[
        &["assess"],
        &["assess", "good.toml", "--points", "5"],
        &["assess", "good.toml", "--spacing", "log"],
        &[
            "assess",
            "good.toml",
            "--vary",
            "channel.thickness=10 .. 40 nm",
            "--points",
            "many",
        ],
        &["assess", "good.toml", "--format", "xml"],
        &["assess", "good.toml", "--strickt"],
        &["assess", "good.toml", "--width", "wide"],
        &["new", "lateral"],
        &["materials", "show"],
        &["asess", "good.toml"],
    ];
    let mut refused = 0;
    for arguments in cases {
        let answer = run(&home(), arguments, b"");
        assert_eq!(answer.code, Some(2), "{arguments:?}: {}", answer.stderr);
        assert!(answer.stdout.is_empty(), "{arguments:?}");
        assert!(
            answer.stderr.starts_with("error: "),
            "{arguments:?}: {}",
            answer.stderr
        );
        assert!(!answer.stderr.contains('\u{1b}'), "{arguments:?}");
        refused += 1;
    }
    assert_eq!(refused, 10);
}

#[test]
fn all_faults_of_a_file_are_told_at_once_in_order_of_place() {
    let answer = run(&home(), &["assess", "five.toml"], b"");
    assert_eq!(answer.code, Some(2));
    assert!(answer.stdout.is_empty());
    assert_eq!(faults(&answer.stderr), 5, "{}", answer.stderr);
    assert_eq!(
        framed(&answer.stderr),
        [1, 4, 5, 11, 17].map(|n| format!("five.toml:{n}")),
        "{}",
        answer.stderr
    );
    snapshot("design-five-faults", &answer.stderr);
}

#[test]
fn no_snapshot_is_left_without_its_case() {
    let home = home();
    let mut known: BTreeSet<String> = [
        "design-five-faults",
        "command-huge-file",
        "command-huge-standard-input",
    ]
    .map(str::to_owned)
    .into();
    known.extend(
        sorted(&home.join("designs"))
            .iter()
            .map(|p| format!("design-{}", stem(p))),
    );
    known.extend(
        sorted(&home.join("records"))
            .iter()
            .map(|p| format!("records-{}", stem(p))),
    );
    known.extend(
        COMMANDS
            .iter()
            .map(|(name, _, _)| format!("command-{name}")),
    );
    let found: BTreeSet<String> = sorted(&home.join("snapshots"))
        .iter()
        .filter(|p| p.extension().is_some_and(|e| e == "snap"))
        .map(|p| stem(p))
        .collect();
    assert_eq!(found, known);
}
