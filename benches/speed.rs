//! Speed: the ladder beside SciPy on the same stacks in the same run, its growth with the number of
//! layers, and the whole program on a design. `cargo bench` runs it; every setting stands below.
//!
//! Prints medians, the goals and what was reached. Never passes or fails on time: that depends on the
//! machine. It does fail when the two answers differ, because then the times compare nothing.

#![allow(
    clippy::print_stdout,
    clippy::panic,
    clippy::unwrap_used,
    clippy::expect_used,
    missing_docs,
    reason = "a bench is a program for a person to read and may stop at the first fault"
)]

use std::fmt::Write as _;
use std::fs;
use std::hint::black_box;
use std::path::{Path, PathBuf};
use std::process::{Command, Stdio};
use std::time::{Duration, Instant};

use injectance::models::ladder::{
    Element, End, Interface, Layer, Magnetization, Solution, Stack, State,
};
use injectance::quantities::dimensions::Measured;

/// Sizes of the stacks that both sides solve.
const BESIDE_SCIPY: [usize; 4] = [10, 100, 1_000, 100_000];
/// Sizes for the growth of the time a layer takes.
const GROWTH: [usize; 4] = [1_000, 10_000, 100_000, 1_000_000];
/// Seed of every stack.
const SEED: u64 = 20_260_117;
/// One timed sample repeats the work until it lasts about this long.
const SAMPLE: Duration = Duration::from_micros(400);
/// Each median is taken over samples worth this much time, and over so many at least and at most.
const EFFORT: Duration = Duration::from_millis(600);
const FEWEST: usize = 15;
const MOST: usize = 1_000;
/// Runs of the whole program.
const PROCESS_RUNS: usize = 50;
/// Largest difference of J, u and V, relative to the largest of each, that counts as the same answer.
const SAME: f64 = 1e-9;

const GOAL_LAYER_NS: f64 = 40.0;
const GOAL_RATIO: [(usize, f64); 2] = [(100, 12.0), (100_000, 5.0)];
const GOAL_PROCESS: Duration = Duration::from_millis(15);
const GOAL_GROWTH: f64 = 1.5;

fn main() {
    let room = Room::new();
    println!("medians on this machine; ns a layer count one layer with one interface\n");
    beside_scipy(&room);
    growth();
    whole_program(&room);
}

// ---------------------------------------------------------------- the ladder beside SciPy

fn beside_scipy(room: &Room) {
    let scipy = Scipy::found();
    if let Err(missing) = &scipy {
        println!("!!! NO COMPARISON WITH SCIPY: {missing}");
        println!("!!! the ratios below are left out; the times of the ladder stand alone\n");
    }
    println!(
        "{:>9} {:>12} {:>12} {:>10} {:>12} {:>12} {:>7} {:>7} {:>10}",
        "layers",
        "ladder",
        "solve alone",
        "ns/layer",
        "SciPy",
        "solve alone",
        "ratio",
        "lean",
        "difference"
    );
    let mut reached = Vec::new();
    for layers in BESIDE_SCIPY {
        let case = Case::random(layers);
        let whole = median_time(|| case.solve());
        let stack = case.stack();
        let alone = median_time(|| stack.solve(State::Parallel));
        print!(
            "{layers:>9} {:>12} {:>12} {:>10.1}",
            shown(whole),
            shown(alone),
            per_layer(whole, layers)
        );
        if layers == 100_000 {
            reached.push((
                format!("ladder, {layers} layers"),
                format!("≤ {GOAL_LAYER_NS} ns a layer"),
                format!("{:.1} ns", per_layer(whole, layers)),
            ));
        }
        match &scipy {
            Ok(scipy) => {
                let other = scipy.run(room, &case);
                let difference = case.difference(&case.solve(), &other.answer);
                let ratio = other.sum / whole.as_secs_f64();
                println!(
                    " {:>12} {:>12} {ratio:>7.1} {:>7.1} {difference:>10.1e}",
                    shown(Duration::from_secs_f64(other.sum)),
                    shown(Duration::from_secs_f64(other.solve)),
                    (other.assembly + other.solve) / whole.as_secs_f64(),
                );
                assert!(
                    difference < SAME,
                    "the two answers differ by {difference:e}"
                );
                if let Some((_, goal)) = GOAL_RATIO.iter().find(|(size, _)| *size == layers) {
                    reached.push((
                        format!("SciPy over ladder, {layers} layers"),
                        format!("≥ {goal} times"),
                        format!("{ratio:.1} times"),
                    ));
                }
            }
            Err(_) => println!(" {:>12}", "skipped"),
        }
    }
    println!(
        "\nladder: typed elements to J, u and V at every face (Stack::new and solve); SciPy: assembly,\n\
         solve and read-out of the same from plain arrays; ratio: SciPy over ladder; lean: the same\n\
         without SciPy's read-out of u and V; difference: largest of J, u, V over the largest of each.\n"
    );
    for (what, goal, got) in reached {
        goal_line(&what, &goal, &got);
    }
}

// ---------------------------------------------------------------- growth

fn growth() {
    let rows: Vec<(usize, f64)> = GROWTH
        .iter()
        .map(|&layers| {
            let case = Case::random(layers);
            (layers, per_layer(median_time(|| case.solve()), layers))
        })
        .collect();
    let (least, most) = rows
        .iter()
        .fold((f64::INFINITY, 0.0_f64), |(low, high), (_, ns)| {
            (low.min(*ns), high.max(*ns))
        });
    let shown: Vec<String> = rows
        .iter()
        .map(|(n, ns)| format!("{ns:.1} at {n}"))
        .collect();
    goal_line(
        "time a layer, slowest over fastest size",
        &format!("≤ {GOAL_GROWTH}"),
        &format!("{:.2}  (ns: {})", most / least, shown.join(", ")),
    );
}

// ---------------------------------------------------------------- the whole program

fn whole_program(room: &Room) {
    let program = env!("CARGO_BIN_EXE_injectance");
    let template = Command::new(program)
        .args(["new", "vertical"])
        .output()
        .expect("program starts");
    assert!(
        template.status.success(),
        "`injectance new vertical` failed"
    );
    let design = room.file("design.toml");
    fs::write(&design, &template.stdout).expect("design written");
    let mut times: Vec<Duration> = (0..PROCESS_RUNS)
        .map(|_| {
            let start = Instant::now();
            let status = Command::new(program)
                .arg("assess")
                .arg(&design)
                .stdout(Stdio::null())
                .status()
                .expect("program starts");
            let took = start.elapsed();
            assert!(status.success(), "`injectance assess` failed");
            took
        })
        .collect();
    goal_line(
        &format!("`assess`, whole process, {PROCESS_RUNS} runs"),
        &format!("< {} ms", GOAL_PROCESS.as_millis()),
        &shown(median(&mut times)),
    );
}

// ---------------------------------------------------------------- the stacks

/// A ferromagnet/normal multilayer between two normal ends, an interface at every face.
struct Case {
    left: Layer,
    right: Layer,
    elements: Vec<Element>,
}

impl Case {
    fn random(layers: usize) -> Self {
        let mut draw = Draw(SEED);
        let left = Self::lead(&mut draw);
        let mut elements = Vec::with_capacity(2 * layers + 1);
        let mut magnet = Magnetization::Fixed;
        for i in 0..layers {
            if i % 2 == 0 {
                magnet = [
                    Magnetization::Fixed,
                    Magnetization::Free,
                    Magnetization::FixedOpposite,
                ][draw.below(3)];
            }
            elements.push(Self::interface(&mut draw, magnet));
            elements.push(Element::Layer(if i % 2 == 0 {
                Self::ferromagnet(&mut draw, magnet)
            } else {
                Self::normal(&mut draw)
            }));
        }
        elements.push(Self::interface(&mut draw, magnet));
        let right = Self::lead(&mut draw);
        Self {
            left,
            right,
            elements,
        }
    }

    fn ferromagnet(draw: &mut Draw, magnetization: Magnetization) -> Layer {
        Layer {
            resistivity: Measured::from_si(draw.between(6e-8, 3e-7)),
            asymmetry: Measured::from_si(draw.between(0.3, 0.8)),
            length: Measured::from_si(draw.between(4e-9, 6e-8)),
            thickness: Measured::from_si(draw.between(1e-9, 2e-8)),
            magnetization,
        }
    }

    fn normal(draw: &mut Draw) -> Layer {
        Layer {
            resistivity: Measured::from_si(draw.between(5e-9, 5e-8)),
            asymmetry: Measured::from_si(0.0),
            length: Measured::from_si(draw.between(3e-8, 5e-7)),
            thickness: Measured::from_si(draw.between(1e-9, 1e-7)),
            magnetization: Magnetization::Fixed,
        }
    }

    /// A normal end without a stated thickness.
    fn lead(draw: &mut Draw) -> Layer {
        Layer {
            thickness: Measured::from_si(f64::INFINITY),
            ..Self::normal(draw)
        }
    }

    fn interface(draw: &mut Draw, magnetization: Magnetization) -> Element {
        Element::Interface(Interface {
            spin_resistance: Measured::from_si(draw.between(1e-16, 1e-15)),
            asymmetry: Measured::from_si(draw.between(0.4, 0.8)),
            memory_loss: Measured::from_si(0.0),
            magnetization,
        })
    }

    fn stack(&self) -> Stack {
        Stack::new(
            End::SemiInfinite(self.left),
            &self.elements,
            End::SemiInfinite(self.right),
        )
        .expect("a stack with layers")
    }

    fn solve(&self) -> Solution {
        self.stack().solve(State::Parallel)
    }

    /// The six lines that ladder.py reads; asymmetries carry the sign of the parallel state.
    fn spelled(&self) -> String {
        let sign = |m: Magnetization| {
            if m == Magnetization::FixedOpposite {
                -1.0
            } else {
                1.0
            }
        };
        let mut lines: [String; 6] = Default::default();
        let mut layer = |l: &Layer| {
            let beta = sign(l.magnetization) * l.asymmetry.si();
            let numbers = [l.resistivity.si(), beta, l.length.si(), l.thickness.si()];
            for (line, number) in lines.iter_mut().zip(numbers) {
                write!(line, "{number:e} ").expect("text grows");
            }
        };
        layer(&self.left);
        for element in &self.elements {
            if let Element::Layer(l) = element {
                layer(l);
            }
        }
        layer(&self.right);
        for element in &self.elements {
            if let Element::Interface(i) = element {
                let gamma = sign(i.magnetization) * i.asymmetry.si();
                for (line, number) in lines[4..].iter_mut().zip([i.spin_resistance.si(), gamma]) {
                    write!(line, "{number:e} ").expect("text grows");
                }
            }
        }
        lines.join("\n")
    }

    /// Largest difference of J, u and V (with RA before it) over the largest of each.
    fn difference(&self, mine: &Solution, other: &[Vec<f64>; 3]) -> f64 {
        let column = |f: fn(&injectance::models::ladder::Face) -> f64| mine.faces.iter().map(f);
        let current: Vec<f64> = column(|f| f.polarization.si()).collect();
        let accumulation: Vec<f64> = column(|f| f.accumulation_per_current_density.si()).collect();
        let potential: Vec<f64> = std::iter::once(mine.resistance_area.si())
            .chain(column(|f| f.potential_per_current_density.si()))
            .collect();
        [current, accumulation, potential]
            .iter()
            .zip(other)
            .map(|(a, b)| {
                assert_eq!(a.len(), b.len(), "both answer for the same faces");
                let scale = a.iter().fold(0.0_f64, |m, x| m.max(x.abs()));
                a.iter()
                    .zip(b)
                    .fold(0.0_f64, |m, (x, y)| m.max((x - y).abs()))
                    / scale
            })
            .fold(0.0, f64::max)
    }
}

/// SplitMix64: seeded, the same stacks everywhere.
struct Draw(u64);

impl Draw {
    fn next(&mut self) -> u64 {
        self.0 = self.0.wrapping_add(0x9e37_79b9_7f4a_7c15);
        let mut z = self.0;
        z = (z ^ (z >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
        z = (z ^ (z >> 27)).wrapping_mul(0x94d0_49bb_1331_11eb);
        z ^ (z >> 31)
    }

    /// Spread evenly in the logarithm between two positive numbers.
    fn between(&mut self, low: f64, high: f64) -> f64 {
        let unit = (self.next() >> 11) as f64 / (1_u64 << 53) as f64;
        low * (high / low).powf(unit)
    }

    fn below(&mut self, n: usize) -> usize {
        (self.next() % n as u64) as usize
    }
}

// ---------------------------------------------------------------- SciPy

/// A python3 that has NumPy and SciPy.
struct Scipy;

/// Seconds and answer of ladder.py.
struct Other {
    assembly: f64,
    solve: f64,
    sum: f64,
    answer: [Vec<f64>; 3],
}

impl Scipy {
    fn found() -> Result<Self, String> {
        let probe =
            "import numpy, scipy; print('NumPy', numpy.__version__, 'SciPy', scipy.__version__)";
        let asked = Command::new("python3").args(["-c", probe]).output();
        let out = asked.map_err(|fault| format!("python3 does not start ({fault})"))?;
        if !out.status.success() {
            let words = String::from_utf8_lossy(&out.stderr);
            return Err(words
                .lines()
                .last()
                .unwrap_or("python3 lacks NumPy or SciPy")
                .to_owned());
        }
        println!("beside {}", String::from_utf8_lossy(&out.stdout));
        Ok(Self)
    }

    fn run(&self, room: &Room, case: &Case) -> Other {
        let (input, output) = (room.file("stack.txt"), room.file("answer.txt"));
        fs::write(&input, case.spelled()).expect("stack written");
        let runs = (600_000 / case.elements.len()).clamp(FEWEST, MOST);
        let script = Path::new(env!("CARGO_MANIFEST_DIR")).join("benches/ladder.py");
        let out = Command::new("python3")
            .arg(script)
            .args([&input, &output])
            .arg(runs.to_string())
            .output()
            .expect("python3 starts");
        assert!(
            out.status.success(),
            "ladder.py: {}",
            String::from_utf8_lossy(&out.stderr)
        );
        let times = numbers(&String::from_utf8_lossy(&out.stdout));
        let lines = fs::read_to_string(&output).expect("answer read");
        let mut answer: [Vec<f64>; 3] = Default::default();
        for (column, line) in answer.iter_mut().zip(lines.lines()) {
            *column = numbers(line);
        }
        Other {
            assembly: times[0],
            solve: times[1],
            sum: times[3],
            answer,
        }
    }
}

fn numbers(line: &str) -> Vec<f64> {
    line.split_whitespace()
        .map(|word| word.parse().expect("a number"))
        .collect()
}

// ---------------------------------------------------------------- time

/// Median time of one call, over samples of [`SAMPLE`] each.
fn median_time<T>(mut work: impl FnMut() -> T) -> Duration {
    let start = Instant::now();
    drop(black_box(work()));
    let once = start.elapsed().max(Duration::from_nanos(1));
    let calls = (SAMPLE.as_nanos() / once.as_nanos()).clamp(1, 100_000) as u32;
    let samples = (EFFORT.as_nanos() / (once * calls).as_nanos()) as usize;
    let mut times: Vec<Duration> = (0..samples.clamp(FEWEST, MOST))
        .map(|_| {
            let start = Instant::now();
            for _ in 0..calls {
                drop(black_box(work()));
            }
            start.elapsed() / calls
        })
        .collect();
    median(&mut times)
}

fn median(times: &mut [Duration]) -> Duration {
    times.sort_unstable();
    times[times.len() / 2]
}

fn per_layer(time: Duration, layers: usize) -> f64 {
    time.as_secs_f64() * 1e9 / layers as f64
}

fn shown(time: Duration) -> String {
    let us = time.as_secs_f64() * 1e6;
    if us < 1_000.0 {
        format!("{us:.2} µs")
    } else {
        format!("{:.2} ms", us / 1_000.0)
    }
}

fn goal_line(what: &str, goal: &str, reached: &str) {
    println!("{what:<40} goal {goal:<18} reached {reached}");
}

// ---------------------------------------------------------------- a place for files

/// A directory of this run, removed at its end.
struct Room(PathBuf);

impl Room {
    fn new() -> Self {
        let path = std::env::temp_dir().join(format!("injectance-speed-{}", std::process::id()));
        fs::create_dir_all(&path).expect("a temporary directory");
        Self(path)
    }

    fn file(&self, name: &str) -> PathBuf {
        self.0.join(name)
    }
}

impl Drop for Room {
    fn drop(&mut self) {
        let _ = fs::remove_dir_all(&self.0);
    }
}
