//! Exit codes, streams and folders of the user.

use super::*;

#[test]
fn strict_fails_when_and_only_when_a_goal_is_not_met() {
    let text = template();
    let mut seen = [0, 0];
    for goal in [
        ">= 1 %",
        ">= 10 %",
        ">= 99 %",
        "<= 1 %",
        "<= 99 %",
        "1 .. 2 %",
        "0 .. 100 %",
    ] {
        let setting = format!("goal.injected_polarization={goal}");
        let met = json(&["assess", "-", "--set", &setting], &text)["goals_met"]
            .as_bool()
            .unwrap();
        for format in [&[][..], &["--format", "json"], &["--full"]] {
            let plain = run_at(
                here(),
                "80",
                &[&["assess", "-", "--set", &setting], format].concat(),
                &text,
            );
            let strict = run_at(
                here(),
                "80",
                &[&["assess", "-", "--strict", "--set", &setting], format].concat(),
                &text,
            );
            assert_eq!(plain.code, Some(0), "{goal}");
            assert_eq!(strict.code, Some(i32::from(!met)), "{goal}: met: {met}");
            assert_eq!(
                plain.stdout, strict.stdout,
                "{goal}: --strict changes the answer"
            );
            assert!(strict.stderr.is_empty(), "{goal}: {}", strict.stderr);
        }
        seen[usize::from(met)] += 1;
    }
    assert_eq!(seen, [3, 4]);
    let without_goal = text.replace("injected_polarization = ", "# ");
    assert_eq!(
        run_at(here(), "80", &["assess", "-", "--strict"], &without_goal).code,
        Some(0)
    );
}

#[test]
fn a_reader_that_goes_away_is_no_failure() {
    let folder = folder("pipe");
    fs::write(folder.join("first.toml"), template()).unwrap();
    let vary = [
        "--vary",
        "channel.thickness=10 .. 3000 nm",
        "--points",
        "20000",
    ];
    let cases: &[&[&str]] = &[
        &[&["assess", "first.toml", "--format", "csv"], &vary[..]].concat(),
        &[&["assess", "first.toml", "--format", "json"], &vary[..]].concat(),
        &[&["assess", "first.toml"], &vary[..]].concat(),
    ];
    for arguments in cases {
        let mut child = Command::new(cargo_bin("injectance"))
            .current_dir(&folder)
            .args(*arguments)
            .stdin(Stdio::null())
            .stdout(Stdio::piped())
            .stderr(Stdio::piped())
            .spawn()
            .unwrap();
        // A few bytes, far less than the answer and than a pipe holds, and then nobody listens.
        let mut first = [0; 16];
        let mut out = child.stdout.take().unwrap();
        out.read_exact(&mut first).unwrap();
        drop(out);
        let output = child.wait_with_output().unwrap();
        assert_eq!(
            output.status.code(),
            Some(0),
            "{arguments:?}: {}",
            output.status
        );
        assert_eq!(
            String::from_utf8(output.stderr).unwrap(),
            "",
            "{arguments:?}"
        );
    }
}

#[test]
fn the_library_can_be_listed_shown_and_checked() {
    let list = answer(&["materials", "list"], "");
    let listed = Library::shipped().listed();
    assert!(listed.len() >= 40, "only {}", listed.len());
    for entry in &listed {
        assert!(list.contains(&entry.id), "{} is not listed", entry.id);
        let shown = answer(&["materials", "show", &entry.id], "");
        for alias in &entry.aliases {
            assert_eq!(answer(&["materials", "show", alias], ""), shown, "{alias}");
        }
    }
    let counted = answer(&["materials", "check"], "");
    assert!(counted.contains("no fault"), "{counted}");
    let rules = answer(&["findings"], "");
    for rule in injectance::studies::findings::RULES {
        assert!(rules.contains(rule.name), "{} is not told", rule.name);
    }
}

#[test]
fn help_and_version_are_answers() {
    let mut seen = 0;
    for arguments in [
        &["--help"][..],
        &["--version"],
        &["assess", "--help"],
        &["materials", "--help"],
        &["new", "--help"],
        &["findings", "--help"],
        &["help", "assess"],
        &["materials", "show", "--help"],
    ] {
        let text = answer(arguments, "");
        assert!(!text.contains('\u{1b}'), "{arguments:?}");
        seen += 1;
    }
    assert_eq!(seen, 8);
    assert_eq!(
        answer(&["--version"], ""),
        format!("injectance {}\n", env!("CARGO_PKG_VERSION"))
    );
    let bare = run_at(here(), "80", &[], "");
    assert_eq!(bare.code, Some(0));
    assert!(bare.stdout.contains("assess") && bare.stderr.is_empty());
}

#[test]
fn a_record_of_the_user_takes_the_place_of_the_shipped_one_and_that_is_told() {
    let folder = folder("records");
    fs::write(folder.join("first.toml"), template()).unwrap();
    let run = |arguments: &[&str]| {
        run_at(
            &folder,
            "100",
            &[&["assess", "first.toml"], arguments].concat(),
            "",
        )
    };
    let parsed = |arguments: &[&str]| -> Value {
        serde_json::from_str(&run(&[arguments, &["--format", "json"]].concat()).stdout).unwrap()
    };
    let before = parsed(&[]);
    let resistivity = |document: &Value| -> Value {
        document["inputs"]
            .as_array()
            .unwrap()
            .iter()
            .find(|i| i["name"] == "channel.resistivity")
            .unwrap()
            .clone()
    };
    let id = resistivity(&before)["origin"]["id"]
        .as_str()
        .unwrap()
        .to_owned();
    fs::create_dir(folder.join("own")).unwrap();
    let record = format!(
        r#"format = 1

[material]
id = "silicon"
name = "Silicon"
class = "semiconductor"

[[value]]
id = "{id}"
property = "resistivity"
value = "4 ± 0.2 mΩ cm"
temperature = "300 K"
conditions = {{ type = "n", dopant = "phosphorus", doping = "5e19 /cm³" }}
obtained = "measured here"
status = "preferred"
why = "The wafer in use."
"#
    );
    fs::write(folder.join("own/wafer.toml"), record).unwrap();
    let after = parsed(&["--materials", "own"]);
    let input = resistivity(&after);
    assert_eq!(input["origin"]["id"], id.as_str());
    assert_eq!(
        input["value"]["value"].as_f64().unwrap().to_bits(),
        4e-5_f64.to_bits()
    );
    let (old, new) = (
        number(&before, "injected_polarization"),
        number(&after, "injected_polarization"),
    );
    assert!((old - new).abs() > 1e-3, "{old} and {new}");
    let told = |document: &Value| -> Vec<String> {
        let findings = document["findings"].as_array().unwrap().iter();
        findings
            .filter(|f| f["rule"] == "record-replaced")
            .map(|f| f["text"].as_str().unwrap().to_owned())
            .collect()
    };
    assert!(told(&before).is_empty());
    let told = told(&after);
    assert!(told.len() == 1 && told[0].contains(&id), "{told:?}");
    for more in [
        &["--materials", "own"][..],
        &["--materials", "own", "--full"],
    ] {
        let text = run(more).stdout;
        assert!(text.contains(&id), "{more:?}: {text}");
    }
    // The same number stated in the design gives the same answer: a record is no other road.
    let stated = parsed(&["--set", "channel.resistivity=4 ± 0.2 mΩ cm"]);
    assert_eq!(
        number(&stated, "injected_polarization").to_bits(),
        new.to_bits()
    );
    let check = run_at(&folder, "100", &["materials", "check", "own"], "");
    assert_eq!(check.code, Some(0), "{}", check.stderr);
    assert!(
        check.stdout.starts_with("1 files") || check.stdout.starts_with("1 file"),
        "{}",
        check.stdout
    );
    let shown = run_at(
        &folder,
        "100",
        &["materials", "show", "silicon", "--materials", "own"],
        "",
    );
    assert_eq!(shown.code, Some(0), "{}", shown.stderr);
    assert!(shown.stdout.contains(&id));
}

/// A device that is always full, where the system has one.
#[cfg(target_os = "linux")]
#[test]
fn a_full_disk_is_told_and_ends_with_three() {
    for arguments in [&["findings"][..], &["--help"], &["new", "stack"]] {
        let full = fs::OpenOptions::new()
            .write(true)
            .open("/dev/full")
            .unwrap();
        let output = Command::new(cargo_bin!("injectance"))
            .args(arguments)
            .stdout(Stdio::from(full))
            .output()
            .unwrap();
        let told = String::from_utf8(output.stderr).unwrap();
        assert_eq!(output.status.code(), Some(3), "{arguments:?}: {told}");
        assert!(
            told.starts_with("  × standard output: cannot be written: "),
            "{arguments:?}: {told}"
        );
        assert_eq!(told.lines().count(), 1, "{arguments:?}: {told}");
    }
}
