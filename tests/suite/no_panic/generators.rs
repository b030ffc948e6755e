//! Texts that look half like designs and records.

use super::*;

pub(super) fn words() -> impl Strategy<Value = String> {
    let known = vec![
        "iron",
        "cobalt",
        "copper",
        "silicon",
        "magnesia",
        "gallium-arsenide",
        "Fe",
        "MgO",
        "unobtainium",
        "",
        "vertical",
        "lateral",
        "semi-infinite",
        "spin sink",
        "reflecting",
        "fed in plane",
        "free",
        "fixed",
        "fixed antiparallel",
        "left",
        "right",
        "n",
        "p",
        "phosphorus",
        "parallel",
        "antiparallel",
        ">= 10 %",
        "<= 1 Ω µm²",
        "1 .. 5 %",
        ">=",
        "own wafer",
    ];
    prop_oneof![
        6 => prop::sample::select(known).prop_map(str::to_owned),
        1 => "\\PC{0,12}",
    ]
}

pub(super) fn numbers() -> impl Strategy<Value = String> {
    let extreme = vec![
        "0",
        "-0",
        "1",
        "-1",
        "1e-300",
        "1e300",
        "-1e300",
        "4.9e-324",
        "1.7976931348623157e308",
        "1e999",
        "1e-999",
        "0.999999999999999",
        "0.9999999999999999999",
        "NaN",
        "nan",
        "inf",
        "-inf",
        "∞",
        "300",
        "40",
        "0.3",
        "1e4",
        "9e99999999999999999999",
        "2×10⁴",
        "2·10^4",
        "1,5",
        "0x10",
        "1_000",
        "+3",
        "--3",
        ".5",
        "5.",
        "e5",
        "−7",
    ];
    prop_oneof![
        4 => prop::sample::select(extreme).prop_map(str::to_owned),
        3 => any::<f64>().prop_map(|x| format!("{x:e}")),
        3 => (-12_i32..12, 1_u32..100_000).prop_map(|(e, m)| format!("{}e{e}", f64::from(m) / 1e4)),
    ]
}

pub(super) fn units() -> impl Strategy<Value = String> {
    let known = vec![
        "nm",
        "µm",
        "Å",
        "cm",
        "km",
        "K",
        "°C",
        "Ω µm²",
        "kΩ µm²",
        "fΩ m²",
        "Ω m²",
        "µΩ cm",
        "mΩ cm",
        "Ω m",
        "S/cm",
        "/cm³",
        "cm⁻³",
        "A/cm²",
        "%",
        "",
        "ML",
        "Oe",
        "eV",
        "m^99",
        "m⁹⁹⁹⁹⁹⁹⁹⁹",
        "nm^-127",
        "m^128",
        "nm/m/m",
        "(nm",
        "nm)",
        "((((nm))))",
        "nm nm nm nm",
        "1/nm",
        "Ω·cm",
        "mm²·Ω",
        "m^2147483648",
        "km^40",
        "nm^-40",
    ];
    prop_oneof![
        8 => prop::sample::select(known).prop_map(str::to_owned),
        1 => "[a-zA-ZµΩÅ°%/^()·⁻²³0-9 -]{0,8}",
    ]
}

pub(super) fn quantities() -> impl Strategy<Value = String> {
    (numbers(), numbers(), units(), units(), 0_usize..12).prop_map(
        |(a, b, u, v, form)| match form {
            0..4 => format!("{a} {u}"),
            4 => format!("{a} ± {b} {u}"),
            5 => format!("{a} {u} ± {b} {v}"),
            6 => format!("{a} {u} ± {b} %"),
            7 => format!("{a} {u} ×/ {b}"),
            8 => format!("{a} .. {b} {u}"),
            9 => format!("{a} +{b} -{a} {u}"),
            10 => format!("> {a} {u}"),
            _ => format!("{a}{u} ± ± {b}"),
        },
    )
}

/// A value as TOML.
pub(super) fn values() -> impl Strategy<Value = String> {
    let quoted = |s: String| format!("\"{}\"", s.replace(['"', '\\'], ""));
    prop_oneof![
        8 => quantities().prop_map(quoted),
        4 => words().prop_map(quoted),
        2 => numbers(),
        1 => Just("true".to_owned()),
        1 => Just("[]".to_owned()),
        1 => Just("{}".to_owned()),
        1 => Just("2020-01-01".to_owned()),
        1 => Just("[{ normal = {} }, 1, \"x\"]".to_owned()),
        1 => Just("{ material = \"iron\", thickness = \"1e-300 nm\" }".to_owned()),
    ]
}

pub(super) fn keys() -> impl Strategy<Value = &'static str> {
    prop::sample::select(vec![
        "title",
        "temperature",
        "current_density",
        "kind",
        "ferromagnet",
        "barrier",
        "interface",
        "normal",
        "material",
        "resistivity",
        "conductivity",
        "bulk_asymmetry",
        "spin_diffusion_length",
        "thickness",
        "doping",
        "dopant",
        "type",
        "end",
        "magnetization",
        "channel",
        "note",
        "resistance_area",
        "interface_spin_resistance",
        "interface_asymmetry",
        "spin_memory_loss",
        "flips_with",
        "left",
        "right",
        "injected_polarization",
        "magnetoresistance",
        "resistance_area_change",
        "state",
        "id",
        "name",
        "class",
        "format",
        "property",
        "value",
        "uncertainty",
        "obtained",
        "source",
        "locus",
        "parents",
        "rule",
        "status",
        "why",
        "conditions",
        "form",
        "coefficients",
        "range",
        "formula",
        "electrodes",
        "polarization",
        "technique",
        "spread",
    ])
}

pub(super) fn heads() -> impl Strategy<Value = &'static str> {
    prop::sample::select(vec![
        "",
        "[injector]",
        "[injector.ferromagnet]",
        "[injector.barrier]",
        "[injector.interface]",
        "[channel]",
        "[detector]",
        "[detector.ferromagnet]",
        "[detector.barrier]",
        "[layout]",
        "[goal]",
        "[[stack]]",
        "[stack.normal]",
        "[ends]",
        "[material]",
        "[interface]",
        "[[value]]",
        "[[pair]]",
        "[[contact]]",
        "[[calibration]]",
        "[[law]]",
        "[[note]]",
        "[[prior]]",
        "[value.conditions]",
    ])
}

pub(super) fn toml_texts() -> impl Strategy<Value = String> {
    let table = (heads(), prop::collection::vec((keys(), values()), 0..6));
    prop::collection::vec(table, 0..7).prop_map(|tables| {
        let mut text = String::new();
        for (head, lines) in tables {
            text.push_str(head);
            text.push('\n');
            for (key, value) in lines {
                text.push_str(&format!("{key} = {value}\n"));
            }
        }
        text
    })
}

// ---- designs and records to begin with
