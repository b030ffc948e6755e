//! No text makes the program panic, and whatever it answers is finite or told as not computed.

#![allow(clippy::unwrap_used, clippy::panic)]

mod generators;

use std::cell::Cell;
use std::sync::OnceLock;

use proptest::prelude::*;
use proptest::test_runner::{Config, RngAlgorithm, TestRng, TestRunner};

use injectance::designs::design::read_design;
use injectance::designs::template::VERTICAL;
use injectance::designs::variation::read_variation;
use injectance::devices::resolve;
use injectance::documents::fault::Source;
use injectance::documents::overlay::{lay_over, read_setting};
use injectance::documents::reader::Faults;
use injectance::documents::tree::{Node, Value, parse};
use injectance::materials::check::check;
use injectance::materials::library::Library;
use injectance::presentation::{full, machine, summary, varied};
use injectance::studies::assess::assess;
use injectance::studies::vary::vary;

use generators::*;

thread_local! {
    static LIBRARY: Library = Library::shipped();
}

/// What became of a text.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
enum End {
    NotToml,
    Refused,
    Answered,
}

/// Every number object of a document is whole: a value that is no number says that it was not computed.
fn check_numbers(path: &str, value: &serde_json::Value, seen: &mut usize) {
    match value {
        serde_json::Value::Array(items) => {
            for (i, item) in items.iter().enumerate() {
                check_numbers(&format!("{path}.{i}"), item, seen);
            }
        }
        serde_json::Value::Object(map) => {
            if map.contains_key("status") && map.contains_key("from") {
                *seen += 1;
                let number = map["value"].as_f64();
                assert_eq!(
                    number.is_none(),
                    map["status"] == "not computed",
                    "{path}: {value}"
                );
                assert!(number.is_none_or(f64::is_finite), "{path}: {value}");
            }
            if map.contains_key("intervals") {
                assert_eq!(
                    map["best"]["value"]["status"], "ok",
                    "{path}: a window without a best value"
                );
            }
            for (key, inner) in map {
                check_numbers(&format!("{path}.{key}"), inner, seen);
            }
        }
        serde_json::Value::Number(n) => {
            assert!(n.as_f64().is_some_and(f64::is_finite), "{path}: {n}");
        }
        _ => {}
    }
}

/// Words that a printed number turns into when nobody looked at it. Words of the input are not looked at.
fn check_text(lines: &[String]) {
    for line in lines {
        for word in line.split(|c: char| !c.is_alphanumeric()) {
            assert!(
                !matches!(word, "NaN" | "nan" | "inf" | "Infinity"),
                "{line}"
            );
        }
    }
}

/// From a tree to every kind of answer. `own_words`: no word of the tree could be taken for a number gone wrong.
fn through(root: &Node, own_words: bool) -> End {
    LIBRARY.with(|library| {
        let faults = Faults::default();
        let design = read_design(root, library, &faults);
        let (Some(design), 0) = (design, faults.count()) else {
            assert!(faults.count() > 0, "refused without a word");
            return End::Refused;
        };
        let Some(device) = resolve(&design, library, &faults) else {
            assert!(faults.count() > 0, "refused without a word");
            return End::Refused;
        };
        // A stack may still have no solution in floating-point numbers; that is told, too.
        let Ok(answer) = assess(&design, device, library) else {
            return End::Refused;
        };
        for width in [60, 140] {
            let (short, long) = (summary::summary(&answer, width), full::full(&answer, width));
            assert!(!short.is_empty() && long.len() > short.len());
            if own_words {
                check_text(&short);
                check_text(&long);
            }
        }
        let document = machine::assessment(&answer);
        let text = serde_json::to_string(&document).unwrap();
        let again: serde_json::Value = serde_json::from_str(&text).unwrap();
        assert_eq!(again, document);
        let mut seen = 0;
        check_numbers("", &again, &mut seen);
        assert!(seen >= 30, "only {seen} numbers");
        End::Answered
    })
}

fn design(text: &str, own_words: bool) -> End {
    match parse(&Source::new("a.toml", text)) {
        Ok(root) => through(&root, own_words),
        Err(faults) => {
            assert!(!faults.is_empty());
            End::NotToml
        }
    }
}

fn records(text: &str) -> usize {
    let faults = Faults::default();
    LIBRARY.with(|library| {
        let files = [
            ("a.toml".to_owned(), text.to_owned()),
            ("b.bib".to_owned(), text.to_owned()),
        ];
        check(&files, Some(library), true, &faults);
        check(&files, None, false, &faults);
    });
    let mut user = Library::shipped();
    user.lay_over(&[("a.toml".to_owned(), text.to_owned())], &faults);
    faults.count()
}

/// Runs cases from a fixed seed, so that a run tells the same as the run before.
fn cases<S: Strategy>(count: u32, seed: u8, strategy: &S, test: impl Fn(S::Value)) {
    let config = Config {
        cases: count,
        failure_persistence: None,
        max_shrink_iters: 2000,
        ..Config::default()
    };
    let mut runner = TestRunner::new_with_rng(
        config,
        TestRng::from_seed(RngAlgorithm::ChaCha, &[seed; 32]),
    );
    let run = Cell::new(0);
    runner
        .run(strategy, |value| {
            run.set(run.get() + 1);
            test(value);
            Ok(())
        })
        .unwrap();
    assert!(run.get() >= count, "{} of {count} cases", run.get());
}

// ---- generated texts

const TWO_CONTACTS: &str = r#"
temperature = "300 K"
current_density = "1e4 A/cm²"
[injector]
ferromagnet = { resistivity = "100 nΩ m", bulk_asymmetry = "0.4 ± 0.1", spin_diffusion_length = "8 nm ×/ 1.5", thickness = "40 nm", end = "reflecting" }
barrier = { resistance_area = "100 ± 5 Ω µm²", interface_asymmetry = "0.3", spin_memory_loss = 0.2 }
[channel]
resistivity = "2 mΩ cm"
spin_diffusion_length = "0.5 .. 1 µm"
thickness = "300 nm"
[detector]
ferromagnet = { material = "cobalt", thickness = "20 nm", end = "spin sink" }
interface = { interface_spin_resistance = "5 Ω µm²", interface_asymmetry = "0.5" }
[layout]
kind = "vertical"
[goal]
magnetoresistance = ">= 1 %"
resistance_area_change = "<= 1 Ω µm²"
state = "antiparallel"
injected_polarization = "1 .. 5 %"
"#;

const STACK: &str = r#"
temperature = "4.2 K"
[[stack]]
ferromagnet = { material = "permalloy", thickness = "20 nm" }
[[stack]]
interface = { resistance_area = "1 Ω µm²", interface_asymmetry = "0.3", flips_with = "right", spin_memory_loss = "0.3" }
[[stack]]
ferromagnet = { material = "cobalt", thickness = "6 nm", magnetization = "free" }
[[stack]]
normal = { material = "copper", thickness = "20 nm", channel = true }
[[stack]]
ferromagnet = { material = "cobalt", thickness = "10 nm", magnetization = "fixed antiparallel" }
[ends]
left = "semi-infinite"
right = "fed in plane"
[layout]
kind = "vertical"
"#;

const RECORDS: &str = r#"
format = 1
[material]
id = "rhodium"
name = "Rhodium"
class = "metal"
aliases = ["Rh"]
[[value]]
id = "rhodium.resistivity.1"
property = "resistivity"
value = "4.9 ± 0.3 µΩ cm"
temperature = "300 K"
conditions = { form = "film", doping = "1e19 /cm³" }
obtained = "estimated"
disagrees_with = ["rhodium.resistivity.2"]
[[value]]
id = "rhodium.resistivity.2"
property = "resistivity"
value = "6 ± 1 µΩ cm"
temperature = "300 K"
obtained = "derived"
parents = ["rhodium.resistivity.1"]
rule = "scaled"
disagrees_with = ["rhodium.resistivity.1"]
[[law]]
id = "rhodium.law.1"
property = "resistivity"
form = "linear"
formula = "a + b T"
coefficients = { a = "0.711", b = "9.2e-3 µΩ cm/K" }
range = { temperature = "100 .. 400 K" }
obtained = "estimated"
"#;

fn beginnings() -> &'static [&'static str] {
    static ALL: OnceLock<Vec<&'static str>> = OnceLock::new();
    ALL.get_or_init(|| vec![VERTICAL, TWO_CONTACTS, STACK])
}

/// Deletes, doubles, inserts or overwrites characters.
fn edited(text: &str, edits: &[(usize, u8, char)]) -> String {
    let mut chars: Vec<char> = text.chars().collect();
    for (at, how, c) in edits {
        if chars.is_empty() {
            break;
        }
        let at = at % chars.len();
        match how % 5 {
            0 => {
                chars.remove(at);
            }
            1 => chars.insert(at, chars[at]),
            2 => chars.insert(at, *c),
            3 => chars[at] = *c,
            _ => {
                let end = (at + 20).min(chars.len());
                chars.drain(at..end);
            }
        }
    }
    chars.into_iter().collect()
}

fn edits(most: usize) -> impl Strategy<Value = Vec<(usize, u8, char)>> {
    let c = prop_oneof![
        3 => prop::sample::select("0123456789.eE+-−±×/%\"'=[]{}#,_ \n\tµΩ²³⁻·^()<>≥nmK".chars().collect::<Vec<_>>()),
        1 => any::<char>(),
    ];
    prop::collection::vec((any::<usize>(), any::<u8>(), c), 1..=most)
}

/// Paths of all single values of a tree.
fn paths(node: &Node, here: &str, out: &mut Vec<String>) {
    let step = |key: &str| {
        if here.is_empty() {
            key.to_owned()
        } else {
            format!("{here}.{key}")
        }
    };
    match &node.value {
        Value::Table(entries) => {
            for e in entries {
                paths(&e.node, &step(&e.key), out);
            }
        }
        Value::List(items) => {
            for (i, item) in items.iter().enumerate() {
                paths(item, &step(&(i + 1).to_string()), out);
            }
        }
        _ => out.push(here.to_owned()),
    }
}

// ---- tests

#[test]
fn the_beginnings_are_good() {
    for text in beginnings() {
        assert_eq!(design(text, true), End::Answered, "{text}");
    }
    assert_eq!(records(RECORDS), 0);
}

#[test]
fn arbitrary_text_is_refused_without_panic() {
    cases(600, 1, &"(?s).{0,300}", |text| {
        assert_ne!(design(&text, false), End::Answered, "{text:?}");
        records(&text);
    });
}

#[test]
fn generated_toml_is_read_without_panic() {
    let toml = Cell::new(0);
    cases(1500, 2, &toml_texts(), |text| {
        if design(&text, false) != End::NotToml {
            toml.set(toml.get() + 1);
        }
        records(&text);
    });
    assert!(toml.get() >= 100, "only {} texts were TOML", toml.get());
}

#[test]
fn edited_designs_answer_in_finite_numbers_or_are_refused() {
    let ends = Cell::new([0_usize; 3]);
    cases(
        1200,
        3,
        &(0..beginnings().len(), edits(3)),
        |(which, edits)| {
            let end = design(&edited(beginnings()[which], &edits), false);
            let mut count = ends.get();
            count[end as usize] += 1;
            ends.set(count);
        },
    );
    let [not_toml, refused, answered] = ends.get();
    assert!(
        not_toml >= 50 && refused >= 50 && answered >= 50,
        "{:?}",
        ends.get()
    );
}

#[test]
fn edited_records_are_checked_without_panic() {
    let faulty = Cell::new(0);
    cases(300, 4, &edits(4), |edits| {
        if records(&edited(RECORDS, &edits)) > 0 {
            faulty.set(faulty.get() + 1);
        }
    });
    assert!(faulty.get() >= 50, "only {} had a fault", faulty.get());
}

#[test]
fn any_value_at_any_path_answers_in_finite_numbers_or_is_refused() {
    let text = prop_oneof![6 => quantities(), 1 => words(), 2 => values()];
    let strategy = (
        0..beginnings().len(),
        prop::collection::vec((any::<usize>(), text), 1..3),
    );
    let ends = Cell::new([0_usize; 3]);
    cases(1500, 5, &strategy, |(which, settings)| {
        let mut root = parse(&Source::new("a.toml", beginnings()[which])).unwrap();
        let mut all = Vec::new();
        paths(&root, "", &mut all);
        for (at, value) in &settings {
            let setting = read_setting("--set", &format!("{}={value}", all[at % all.len()]));
            if let Ok(setting) = setting {
                let _ = lay_over(&mut root, &setting);
            }
        }
        let end = through(&root, false);
        let mut count = ends.get();
        count[end as usize] += 1;
        ends.set(count);
    });
    let [_, refused, answered] = ends.get();
    assert!(refused >= 200 && answered >= 20, "{:?}", ends.get());
}

/// Quantities that are of the right kind but as far out as is allowed, so that most of them are answered.
#[test]
fn numbers_at_the_ends_of_their_ranges_are_answered_in_finite_numbers() {
    fn far(
        places: &'static [(&'static str, &'static str, i32, i32)],
    ) -> impl Strategy<Value = (String, f64)> {
        (prop::sample::select(places), 0.0..1.0_f64).prop_map(|((path, unit, low, high), f)| {
            let exponent = f64::from(low) + f * f64::from(high - low);
            (
                format!("{path}={:e} {unit}", 10_f64.powf(exponent)),
                exponent,
            )
        })
    }
    const PLACES: &[(&str, &str, i32, i32)] = &[
        ("temperature", "K", -300, 3),
        ("current_density", "A/m²", -300, 14),
        ("injector.ferromagnet.resistivity", "Ω m", -300, 12),
        ("injector.ferromagnet.spin_diffusion_length", "m", -300, -1),
        ("injector.ferromagnet.thickness", "m", -300, -1),
        ("injector.barrier.resistance_area", "Ω m²", -300, 6),
        ("injector.barrier.interface_asymmetry", "", -300, 0),
        ("injector.barrier.spin_memory_loss", "", -300, 1),
        ("channel.resistivity", "Ω m", -300, 12),
        ("channel.spin_diffusion_length", "m", -300, -1),
        ("channel.thickness", "m", -300, -1),
        (
            "detector.interface.interface_spin_resistance",
            "Ω m²",
            -300,
            6,
        ),
    ];
    const NEAR: &[(&str, &str, i32, i32)] = &[
        ("channel.resistivity", "Ω m", -9, 3),
        ("channel.thickness", "m", -9, -2),
        ("channel.spin_diffusion_length", "m", -9, -2),
        ("injector.barrier.resistance_area", "Ω m²", -16, 2),
    ];
    let strategy = prop::collection::vec(prop_oneof![far(PLACES), far(NEAR)], 1..4);
    let ends = Cell::new([0_usize; 3]);
    cases(900, 6, &strategy, |settings| {
        let mut root = parse(&Source::new("a.toml", TWO_CONTACTS)).unwrap();
        for (text, _) in &settings {
            lay_over(&mut root, &read_setting("--set", text).unwrap()).unwrap();
        }
        let end = through(&root, true);
        let mut count = ends.get();
        count[end as usize] += 1;
        ends.set(count);
    });
    assert!(ends.get()[2] >= 500, "{:?}", ends.get());
}

#[test]
fn any_variation_is_followed_or_refused_without_panic() {
    let range = prop_oneof![
        2 => (numbers(), numbers(), units()).prop_map(|(a, b, u)| format!("{a} .. {b} {u}")),
        1 => quantities(),
    ];
    let fields = prop::sample::select(vec![
        "temperature",
        "channel.thickness",
        "channel.resistivity",
        "injector.barrier.resistance_area",
        "injector.barrier.interface_asymmetry",
        "channel.doping",
        "injector.ferromagnet.bulk_asymmetry",
        "current_density",
        "channel.material",
        "detector",
        "stack.1.normal.thickness",
        "a.b.c.thickness",
    ]);
    let good = (
        -18_i32..4,
        1_i32..9,
        prop::sample::select(vec![
            ("channel.thickness", "m"),
            ("injector.barrier.resistance_area", "Ω m²"),
            ("channel.resistivity", "Ω m"),
        ]),
    )
        .prop_map(|(e, more, (field, unit))| format!("{field}=1e{e} .. 1e{} {unit}", e + more));
    let strategy = (
        0..2_usize,
        prop_oneof![3 => (fields, range).prop_map(|(f, r)| format!("{f}={r}")), 1 => good, 1 => "\\PC{0,20}"],
        0_usize..5,
    );
    let answered = Cell::new(0);
    cases(1200, 7, &strategy, |(which, text, points)| {
        let root = parse(&Source::new("a.toml", beginnings()[which])).unwrap();
        let Ok(variation) = read_variation(&text, points, None) else {
            return;
        };
        assert_eq!(variation.points.len(), points);
        LIBRARY.with(|library| {
            let faults = Faults::default();
            let Some(result) = vary(&root, variation, library, &faults) else {
                assert!(faults.count() > 0, "{text}: refused without a word");
                return;
            };
            assert_eq!(result.rows.len(), points);
            let mut seen = 0;
            check_numbers("", &machine::varied(&result), &mut seen);
            assert!(seen >= 2 * points);
            assert!(varied::csv(&result).unwrap().lines().count() == points + 1);
            check_text(&varied::lines(&result, 80));
            answered.set(answered.get() + 1);
        });
    });
    assert!(answered.get() >= 60, "only {} answered", answered.get());
}
