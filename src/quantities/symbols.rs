//! The unit symbols of this field, the prefixes, and what to say about a symbol that is neither.

/// Which prefixes a symbol takes.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub(super) enum Prefixes {
    /// None: `min`, `%`.
    Never,
    /// Powers of a thousand: `kΩ`, `meV`.
    Thousands,
    /// Also c, d, da and h: `cm`.
    All,
}

/// What a symbol is besides a number and a dimension.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub(super) enum Role {
    /// Nothing else.
    Usual,
    /// The ohm: the one symbol that others follow without a space, and that takes `/sq`.
    Ohm,
    /// Per cent.
    Percent,
    /// A scale with its own zero.
    Celsius,
    /// Oersted and gauss.
    Field,
    /// The square of a sheet resistance.
    Square,
    /// Monolayers of a barrier.
    Monolayer,
}

/// One symbol: its SI value is `factor * 10^power`.
#[derive(Clone, Copy, Debug)]
pub(super) struct Symbol {
    pub(super) spelling: &'static str,
    pub(super) dimension: [i8; 7],
    pub(super) power: i32,
    pub(super) factor: f64,
    pub(super) prefixes: Prefixes,
    pub(super) role: Role,
}

use Prefixes::{All, Never, Thousands};

const fn si(spelling: &'static str, dimension: [i8; 7]) -> Symbol {
    decimal(spelling, dimension, 0, Thousands)
}

const fn decimal(
    spelling: &'static str,
    dimension: [i8; 7],
    power: i32,
    prefixes: Prefixes,
) -> Symbol {
    Symbol {
        spelling,
        dimension,
        power,
        factor: 1.0,
        prefixes,
        role: Role::Usual,
    }
}

const fn with_role(symbol: Symbol, role: Role) -> Symbol {
    Symbol { role, ..symbol }
}

const fn with_factor(symbol: Symbol, factor: f64) -> Symbol {
    Symbol { factor, ..symbol }
}

const NUMBER: [i8; 7] = [0; 7];
const LENGTH: [i8; 7] = [1, 0, 0, 0, 0, 0, 0];
const TIME: [i8; 7] = [0, 0, 1, 0, 0, 0, 0];
const KELVIN: [i8; 7] = [0, 0, 0, 0, 1, 0, 0];
const OHM: [i8; 7] = [2, 1, -3, -2, 0, 0, 0];
const TESLA: [i8; 7] = [0, 1, -2, -1, 0, 0, 0];
const JOULE: [i8; 7] = [2, 1, -2, 0, 0, 0, 0];

const fn ohm(spelling: &'static str) -> Symbol {
    with_role(si(spelling, OHM), Role::Ohm)
}

/// Every symbol; the first spelling of a unit is the one that is suggested.
pub(super) const SYMBOLS: &[Symbol] = &[
    decimal("m", LENGTH, 0, All),
    ohm("Ω"),
    si("K", KELVIN),
    si("s", TIME),
    si("A", [0, 0, 0, 1, 0, 0, 0]),
    si("V", [2, 1, -3, -1, 0, 0, 0]),
    // The elementary charge is exact by the definition of the SI; its power of ten is kept apart.
    with_factor(decimal("eV", JOULE, -19, Thousands), 1.602_176_634),
    si("T", TESLA),
    si("S", [-2, -1, 3, 2, 0, 0, 0]),
    si("Hz", [0, 0, -1, 0, 0, 0, 0]),
    si("J", JOULE),
    si("W", [2, 1, -3, 0, 0, 0, 0]),
    si("C", [0, 0, 1, 1, 0, 0, 0]),
    si("F", [-2, -1, 4, 2, 0, 0, 0]),
    si("H", [2, 1, -2, -2, 0, 0, 0]),
    si("Wb", [2, 1, -2, -1, 0, 0, 0]),
    si("N", [1, 1, -2, 0, 0, 0, 0]),
    si("Pa", [-1, 1, -2, 0, 0, 0, 0]),
    decimal("g", [0, 1, 0, 0, 0, 0, 0], -3, Thousands),
    si("mol", [0, 0, 0, 0, 0, 1, 0]),
    si("cd", [0, 0, 0, 0, 0, 0, 1]),
    decimal("Å", LENGTH, -10, Never),
    decimal("angstrom", LENGTH, -10, Never),
    decimal("Angstrom", LENGTH, -10, Never),
    decimal("angstroms", LENGTH, -10, Never),
    decimal("cc", [3, 0, 0, 0, 0, 0, 0], -6, Never),
    ohm("ohm"),
    ohm("Ohm"),
    ohm("ohms"),
    ohm("Ohms"),
    with_factor(decimal("min", TIME, 1, Never), 6.0),
    with_factor(decimal("h", TIME, 3, Never), 3.6),
    with_role(decimal("°C", KELVIN, 0, Never), Role::Celsius),
    with_role(decimal("℃", KELVIN, 0, Never), Role::Celsius),
    with_role(decimal("%", NUMBER, -2, Never), Role::Percent),
    with_role(decimal("Oe", TESLA, -4, Thousands), Role::Field),
    with_role(decimal("G", TESLA, -4, Thousands), Role::Field),
    with_role(decimal("ML", LENGTH, 0, Never), Role::Monolayer),
    with_role(decimal("sq", NUMBER, 0, Never), Role::Square),
    with_role(decimal("□", NUMBER, 0, Never), Role::Square),
];

/// Prefixes, the common ones first, so that a suggestion prefers them.
const PREFIXES: &[(&str, i32, bool)] = &[
    ("n", -9, false),
    ("µ", -6, false),
    ("u", -6, false),
    ("m", -3, false),
    ("k", 3, false),
    ("c", -2, true),
    ("M", 6, false),
    ("G", 9, false),
    ("p", -12, false),
    ("f", -15, false),
    ("T", 12, false),
    ("a", -18, false),
    ("z", -21, false),
    ("y", -24, false),
    ("P", 15, false),
    ("E", 18, false),
    ("Z", 21, false),
    ("Y", 24, false),
    ("d", -1, true),
    ("da", 1, true),
    ("h", 2, true),
];

fn takes(symbol: &Symbol, only_all: bool) -> bool {
    match symbol.prefixes {
        Never => false,
        Thousands => !only_all,
        All => true,
    }
}

/// One spelling for the characters that have two code points.
pub(super) fn normalized(symbol: &str) -> String {
    symbol
        .replace("A\u{30a}", "Å")
        .chars()
        .map(|c| match c {
            '\u{3bc}' => '\u{b5}',
            '\u{2126}' => '\u{3a9}',
            '\u{212b}' => '\u{c5}',
            '\u{212a}' => 'K',
            '\u{ba}' => '\u{b0}',
            other => other,
        })
        .collect()
}

/// The symbol and the power of ten of its prefix. The exact symbol goes first: `m`, `min`, `T`, `Pa`.
pub(super) fn lookup(normal: &str) -> Option<(&'static Symbol, i32)> {
    if let Some(symbol) = SYMBOLS.iter().find(|s| s.spelling == normal) {
        return Some((symbol, 0));
    }
    PREFIXES.iter().find_map(|&(prefix, power, only_all)| {
        let rest = normal.strip_prefix(prefix)?;
        let symbol = SYMBOLS
            .iter()
            .find(|s| s.spelling == rest && takes(s, only_all))?;
        Some((symbol, power))
    })
}

/// Spellings that are understood but not accepted, with what to write instead.
const REFUSED: &[(&[&str], &str)] = &[
    (
        &[
            "micron",
            "microns",
            "mic",
            "micrometer",
            "micrometre",
            "mu",
            "mum",
        ],
        "write µm or um",
    ),
    (
        &["nanometer", "nanometre", "nanometers", "nanometres"],
        "write nm",
    ),
    (&["meter", "metre", "meters", "metres"], "write m"),
    (&["°F", "degF", "℉"], "write the temperature in K or in °C"),
    (
        &["degC", "deg", "°", "°K", "celsius", "Celsius"],
        "write K or °C",
    ),
    (&["kelvin", "Kelvin", "kelvins"], "write K"),
    (&["sec", "second", "seconds", "secs"], "write s"),
    (&["hour", "hours", "hr"], "write h"),
    (&["day", "days"], "write h"),
    (&["amp", "amps", "ampere", "amperes", "Amp"], "write A"),
    (&["volt", "volts", "Volt"], "write V"),
    (&["electronvolt", "electronvolts"], "write eV"),
    (&["tesla", "Tesla"], "write T"),
    (&["gauss", "Gauss"], "write G"),
    (&["oersted", "Oersted", "oersteds"], "write Oe"),
    (&["siemens", "Siemens", "mho"], "write S"),
    (&["percent", "pct"], "write %"),
    (
        &["ppm", "ppb"],
        "write the number with a power of ten, for example 3e-6",
    ),
    (&["monolayer", "monolayers"], "write ML"),
    (&["square", "squares"], "write Ω/sq"),
    (&["emu"], "write kA/m: 1 emu/cm³ is 1 kA/m"),
    (&["inch", "inches", "mil"], "write mm or µm"),
    (
        &[
            "atoms",
            "atom",
            "at",
            "carriers",
            "electrons",
            "holes",
            "donors",
            "acceptors",
        ],
        "leave the noun out, for example \"1e19 /cm³\"",
    ),
    (
        &["to"],
        "write a range with two dots, for example \"26 .. 50 nm\"",
    ),
    (&["and"], "write one value with one unit"),
];

/// Why this symbol is not accepted and what to write instead, if that is known.
pub(super) fn refusal(normal: &str) -> Option<String> {
    if let Some((_, reason)) = REFUSED.iter().find(|(words, _)| words.contains(&normal)) {
        return Some((*reason).to_owned());
    }
    if normal.contains('ω') {
        return Some(format!(
            "ω is the small letter; write {}",
            normal.replace('ω', "Ω")
        ));
    }
    if let Some(rest) = normal.strip_prefix('K')
        && let small = format!("k{rest}")
        && lookup(&small).is_some()
    {
        return Some(format!("kilo is a small k; write {small}"));
    }
    for word in ["ohm", "Ohm"] {
        if let Some((head, tail)) = normal.split_once(word)
            && !tail.is_empty()
            && lookup(tail).is_some()
            && lookup(&format!("{head}{word}")).is_some()
        {
            return Some(format!("write a space after the ohm: {head}{word} {tail}"));
        }
    }
    None
}

/// The accepted spelling nearest to an unknown symbol: the same letters in another case, else one
/// letter away in a word of at least three.
pub(super) fn nearest(normal: &str) -> Option<String> {
    let length = normal.chars().count();
    if length > 12 {
        return None;
    }
    let bare = SYMBOLS.iter().map(|s| s.spelling.to_owned());
    let prefixed = PREFIXES.iter().flat_map(|&(prefix, _, only_all)| {
        SYMBOLS
            .iter()
            .filter(move |s| takes(s, only_all))
            .map(move |s| format!("{prefix}{}", s.spelling))
    });
    let candidates: Vec<String> = bare.chain(prefixed).collect();
    let folded = normal.to_lowercase();
    if let Some(same) = candidates.iter().find(|c| c.to_lowercase() == folded) {
        return Some(same.clone());
    }
    if length < 3 {
        return None;
    }
    candidates
        .into_iter()
        .find(|c| c.chars().count() >= 2 && strsim::osa_distance(c, normal) == 1)
}
