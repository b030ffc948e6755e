//! Reading and printing of quantities: spellings, rounding, refusals, spreads.

#![allow(clippy::unwrap_used, clippy::panic)]

use injectance::quantities::dimensions::{Dimension, Length, Measured};
use injectance::quantities::kind::{self, Kind};
use injectance::quantities::spread::{Side, Spread};
use injectance::quantities::text::{
    ReadFaultKind, Reading, dimension_names, read, read_bare, read_interval,
};
use injectance::quantities::unit::{Context, UnitFault, parse_unit};

mod printing;

const KINDS: &[Kind] = &[
    kind::RESISTIVITY,
    kind::CONDUCTIVITY,
    kind::SPIN_DIFFUSION_LENGTH,
    kind::THICKNESS,
    kind::RESISTANCE_AREA,
    kind::INTERFACE_SPIN_RESISTANCE,
    kind::SPIN_RESISTANCE,
    kind::RHO_LAMBDA,
    kind::BULK_ASYMMETRY,
    kind::INTERFACE_ASYMMETRY,
    kind::SPIN_POLARIZATION,
    kind::CURRENT_SPIN_POLARIZATION,
    kind::DENSITY_SPIN_POLARIZATION,
    kind::SPIN_MEMORY_LOSS,
    kind::MAGNETORESISTANCE,
    kind::RESISTANCE_AREA_CHANGE,
    kind::TEMPERATURE,
    kind::DOPING,
    kind::CURRENT_DENSITY,
    kind::SPIN_ACCUMULATION,
    kind::SPIN_SPLITTING,
    kind::ENERGY,
    kind::MOBILITY,
    kind::DIFFUSION,
    kind::SPIN_LIFETIME,
    kind::APPLIED_FIELD,
    kind::RESISTANCE,
    kind::LATTICE_LENGTH,
    kind::PERMITTIVITY,
    kind::EFFECTIVE_MASS,
    kind::MAGNETIZATION,
    kind::DECADE_THICKNESS,
    kind::NUMBER,
];

const NONE: Context = Context { monolayer: None };

fn reading(text: &str, kind: &Kind) -> Reading {
    read(text, kind, &NONE).unwrap_or_else(|e| panic!("{text}: {e}"))
}

fn message(text: &str, kind: &Kind) -> String {
    match read(text, kind, &NONE) {
        Ok(reading) => panic!("{text} was accepted: {reading:?}"),
        Err(fault) => {
            let at = fault.at.clone().unwrap_or(0..text.len());
            assert!(
                text.get(at.clone()).is_some(),
                "{text}: {at:?} is no range of the text"
            );
            fault.message()
        }
    }
}

/// Relative comparison only: the numbers here are far below any fixed tolerance.
fn close(got: f64, want: f64, relative: f64) -> bool {
    (got - want).abs() <= relative * want.abs()
}

#[test]
fn every_spelling_of_a_unit_gives_the_same_unit() {
    #[rustfmt::skip]
    let groups: &[(&str, &[&str])] = &[
        ("cm^2/(V s)", &["cm²/(V s)", "cm2/(V s)", "cm**2/(V*s)", "cm² V⁻¹ s⁻¹", "cm^2 V^-1 s^-1",
            "cm^2·V^(-1)·s^(-1)", "cm²⋅V-1⋅s-1", "cm2×V**-1×s−1", "cm² / (V·s)", " cm²/( V s ) "]),
        ("cm^-3", &["/cm^3", "1/cm^3", "/cm³", "cm-3", "cm⁻³", "cm**-3", "cm^(-3)", "cm−3", "1 / cm3", "cm^−3", "/cc"]),
        ("um^2", &["µm²", "μm²", "um2", "µm^2", "µm**2", "μm^(2)"]),
        ("Ohm", &["Ω", "\u{2126}", "ohm", "ohms", "Ohms"]),
        ("Å", &["\u{212b}", "A\u{30a}", "angstrom", "Angstrom"]),
        ("Ω cm", &["Ωcm", "ohm cm", "Ω·cm", "Ohm*cm", "ohm-cm", "Ω-cm", "\u{2126}cm"]),
        ("kΩ µm²", &["kΩµm²", "kΩμm^2", "kohm um2", "kOhm µm²", "µm² kΩ", "kΩ·µm²"]),
        ("mΩ cm", &["mΩcm", "mohm cm"]),
        ("MΩ", &["Mohm", "MOhm", "MΩ/sq", "MΩ/□", "Mohm sq^-1"]),
        ("S/cm", &["(Ω cm)⁻¹", "(ohm cm)^-1", "1/(Ω cm)", "Ω⁻¹ cm⁻¹"]),
        ("Ω µm²", &["Ωµm²", "Ω um^2"]),
        ("m/s²", &["m/s^2", "m s⁻²", "m/(s s)", "m/(s²)"]),
    ];
    for (first, others) in groups {
        let want = parse_unit(first, &NONE).unwrap();
        for text in *others {
            let got = parse_unit(text, &NONE).unwrap_or_else(|e| panic!("{text}: {e}"));
            assert_eq!(got.dimension, want.dimension, "{text}");
            assert_eq!(got.power_of_ten, want.power_of_ten, "{text}");
            assert_eq!(got.factor.to_bits(), want.factor.to_bits(), "{text}");
            assert_eq!(got.text, text.trim());
        }
    }
}

#[test]
fn exact_symbols_go_before_prefixes() {
    #[rustfmt::skip]
    let cases = [
        ("m", [1, 0, 0, 0, 0, 0, 0], 0), ("mm", [1, 0, 0, 0, 0, 0, 0], -3), ("T", [0, 1, -2, -1, 0, 0, 0], 0),
        ("Pa", [-1, 1, -2, 0, 0, 0, 0], 0), ("G", [0, 1, -2, -1, 0, 0, 0], -4), ("GHz", [0, 0, -1, 0, 0, 0, 0], 9),
        ("cd", [0, 0, 0, 0, 0, 0, 1], 0), ("min", [0, 0, 1, 0, 0, 0, 0], 1), ("kg", [0, 1, 0, 0, 0, 0, 0], 0),
        ("mol", [0, 0, 0, 0, 0, 1, 0], 0), ("dam", [1, 0, 0, 0, 0, 0, 0], 1), ("YW", [2, 1, -3, 0, 0, 0, 0], 24),
        ("yW", [2, 1, -3, 0, 0, 0, 0], -24), ("%", [0; 7], -2), ("kOe", [0, 1, -2, -1, 0, 0, 0], -1),
    ];
    for (text, dimension, power) in cases {
        let unit = parse_unit(text, &NONE).unwrap();
        assert_eq!(
            (unit.dimension, unit.power_of_ten),
            (Dimension(dimension), power),
            "{text}"
        );
    }
}

#[test]
fn decimal_input_is_correctly_rounded() {
    #[rustfmt::skip]
    let cases = [
        ("12 kΩ µm²", kind::RESISTANCE_AREA, 12e-9), ("8 Ω µm²", kind::RESISTANCE_AREA, 8e-12),
        ("0.51 fΩ m²", kind::INTERFACE_SPIN_RESISTANCE, 0.51e-15),
        ("5e-16 Ω m²", kind::INTERFACE_SPIN_RESISTANCE, 5e-16), ("4.5e-15 Ω m²", kind::SPIN_RESISTANCE, 4.5e-15),
        ("3.6nm", kind::THICKNESS, 3.6e-9), ("1.4 nm", kind::THICKNESS, 1.4e-9), ("5.43 Å", kind::LATTICE_LENGTH, 5.43e-10),
        ("2.1 mΩ cm", kind::RESISTIVITY, 2.1e-5), ("60 nΩ m", kind::RESISTIVITY, 60e-9), ("7 µΩcm", kind::RESISTIVITY, 7e-8),
        ("480 S/cm", kind::CONDUCTIVITY, 480e2), ("1e19 /cm³", kind::DOPING, 1e25), ("5e16 cm⁻³", kind::DOPING, 5e22),
        ("1×10^19 cm-3", kind::DOPING, 1e25), ("1x10^19 cm-3", kind::DOPING, 1e25), ("1·10^19 cm-3", kind::DOPING, 1e25),
        ("1×10¹⁹ cm^-3", kind::DOPING, 1e25), ("10^19 cm^-3", kind::DOPING, 1e25), ("1.7 × 10**19 /cm^3", kind::DOPING, 1.7e25),
        ("10¹⁹ 1/cm³", kind::DOPING, 1e25), ("2.5*10^(19) /cm^3", kind::DOPING, 2.5e25),
        ("45 %", kind::SPIN_POLARIZATION, 0.45), ("−3.3 %", kind::SPIN_POLARIZATION, -0.033), ("+.5", kind::NUMBER, 0.5),
        ("5.", kind::NUMBER, 5.0), ("−3", kind::NUMBER, -3.0), ("-0.1e-3", kind::NUMBER, -0.1e-3), ("1e−3", kind::NUMBER, 1e-3),
        ("1400 cm²/(V s)", kind::MOBILITY, 0.14), ("2.8 cm²/s", kind::DIFFUSION, 2.8e-4), ("84ps", kind::SPIN_LIFETIME, 84e-12),
        ("1e5A/cm²", kind::CURRENT_DENSITY, 1e9), ("10 µA/µm²", kind::CURRENT_DENSITY, 1e7), ("0.8 µV", kind::SPIN_ACCUMULATION, 0.8e-6),
        ("800 kA/m", kind::MAGNETIZATION, 8e5), ("500 Oe", kind::APPLIED_FIELD, 0.05), ("1.1 kOe", kind::APPLIED_FIELD, 0.11),
        ("7 G", kind::APPLIED_FIELD, 7e-4), ("50 mT", kind::APPLIED_FIELD, 0.05), ("25 °C", kind::TEMPERATURE, 298.15),
        ("−40.13 °C", kind::TEMPERATURE, 233.02), ("0.001 °C", kind::TEMPERATURE, 273.151), ("1e2 °C", kind::TEMPERATURE, 373.15),
        ("1.2 kΩ", kind::RESISTANCE, 1.2e3), ("0.3 kΩ/sq", kind::RESISTANCE, 300.0), ("0.1 min", kind::SPIN_LIFETIME, 6.0),
    ];
    for (text, kind, want) in cases {
        let wide = Kind {
            range: kind::NUMBER.range,
            ..kind
        };
        let got = reading(text, &wide);
        let want: f64 = want;
        assert_eq!(
            got.si.to_bits(),
            want.to_bits(),
            "{text}: {} for {want}",
            got.si
        );
        assert_eq!((got.spread, got.text.as_str()), (Spread::Exact, text));
    }
    let gap = reading("0.35eV", &kind::ENERGY);
    assert!(close(gap.si, 0.35 * 1.602_176_634e-19, 1e-15));
    assert!(close(
        reading("1e-3eV", &kind::ENERGY).si,
        1.602_176_634e-22,
        1e-15
    ));
    let strength = reading("1000 A/m", &kind::APPLIED_FIELD).si;
    assert!(close(strength, 1.256_637_061_27e-3, 1e-15));
    let typed: Length = reading("3 µm", &kind::THICKNESS).value();
    assert_eq!(typed.si().to_bits(), 3e-6_f64.to_bits());
}

#[test]
fn units_agree_with_an_independent_library() {
    use uom::si::{f64 as q, *};
    macro_rules! agree {
        ($($quantity:ident, $module:ident :: $unit:ident, $text:literal;)*) => {$(
            let theirs = q::$quantity::new::<$module::$unit>(1.0);
            let ours = parse_unit($text, &NONE).unwrap();
            let factor = ours.factor * 10_f64.powi(ours.power_of_ten);
            assert!(close(factor, theirs.value, 1e-12), "{}: {factor} and {}", $text, theirs.value);
            assert_eq!(ours.dimension, <q::$quantity as Measured>::DIMENSION, $text);
        )*};
    }
    agree! {
        Length, length::nanometer, "nm"; Length, length::angstrom, "Å"; Length, length::micrometer, "um";
        Time, time::picosecond, "ps"; Time, time::minute, "min"; Time, time::hour, "h";
        Energy, energy::electronvolt, "eV"; Energy, energy::kiloelectronvolt, "keV"; Energy, energy::joule, "J";
        Mass, mass::gram, "g"; Force, force::newton, "N"; Pressure, pressure::kilopascal, "kPa";
        Power, power::milliwatt, "mW"; Frequency, frequency::gigahertz, "GHz";
        ElectricCurrent, electric_current::microampere, "µA"; ElectricCharge, electric_charge::coulomb, "C";
        ElectricPotential, electric_potential::millivolt, "mV"; Capacitance, capacitance::picofarad, "pF";
        Inductance, inductance::microhenry, "µH"; MagneticFlux, magnetic_flux::weber, "Wb";
        MagneticFluxDensity, magnetic_flux_density::gauss, "G"; MagneticFluxDensity, magnetic_flux_density::millitesla, "mT";
        ElectricalResistance, electrical_resistance::kiloohm, "kohm";
        ElectricalConductance, electrical_conductance::siemens, "S";
        ElectricalResistivity, electrical_resistivity::ohm_centimeter, "Ω cm";
        ElectricalConductivity, electrical_conductivity::siemens_per_centimeter, "S/cm";
        ElectricalMobility, electrical_mobility::square_centimeter_per_volt_second, "cm²/(V s)";
        DiffusionCoefficient, diffusion_coefficient::square_centimeter_per_second, "cm²/s";
        ElectricCurrentDensity, electric_current_density::ampere_per_square_centimeter, "A/cm²";
        VolumetricNumberDensity, volumetric_number_density::per_cubic_centimeter, "cm⁻³";
        AmountOfSubstance, amount_of_substance::mole, "mol"; Ratio, ratio::percent, "%";
        LuminousIntensity, luminous_intensity::candela, "cd"; ThermodynamicTemperature, thermodynamic_temperature::kelvin, "K";
    }
}

#[test]
fn a_unit_is_refused_with_what_to_write_instead() {
    #[rustfmt::skip]
    let cases = [
        ("m/s/s", "the unit is ambiguous: two slashes; write one slash and a power or brackets, for example m/s²"),
        ("m/s kg", "the unit is ambiguous: a product after the slash; put what is divided by in brackets, for example cm²/(V s)"),
        ("A/Ωm", "the unit is ambiguous: a product after the slash; put what is divided by in brackets, for example cm²/(V s)"),
        ("cm^2.5", "the exponent is not accepted: only whole powers have a meaning here"),
        ("cm2.5", "the exponent is not accepted: only whole powers have a meaning here"),
        ("m^(1/2)", "the exponent is not accepted: only whole powers have a meaning here"),
        ("m^0", "the exponent is not accepted: the power zero leaves no unit"),
        ("m^99999999999", "the exponent is not accepted: it is too large"),
        ("m^21", "the exponent is not accepted: it is too large"),
        ("m^20 m^20 m^20 m^20", "the exponent is not accepted: all powers together are too large"),
        ("m^", "the exponent is not accepted: a number must follow"),
        ("cm–3", "the exponent is not accepted: it is a dash; write the minus as - or −"),
        ("k", "\"k\" is not a known unit; did you mean K?"),
        ("ev", "\"ev\" is not a known unit; did you mean eV?"),
        ("KΩ", "\"KΩ\" is not accepted here: kilo is a small k; write kΩ"),
        ("kω", "\"kω\" is not accepted here: ω is the small letter; write kΩ"),
        ("micron", "\"micron\" is not accepted here: write µm or um"),
        ("mic", "\"mic\" is not accepted here: write µm or um"),
        ("°F", "\"°F\" is not accepted here: write the temperature in K or in °C"),
        ("sq", "\"sq\" is not accepted here: a square is no unit of its own; a sheet resistance is written Ω/sq"),
        ("m/sq", "\"sq\" is not accepted here: a square is no unit of its own; a sheet resistance is written Ω/sq"),
        ("°C/m", "\"°C\" is not accepted here: °C stands alone only; write K in a product or a quotient"),
        ("ML", "\"ML\" is not accepted here: ML needs a barrier whose record gives its monolayer height"),
        ("ohmcm", "\"ohmcm\" is not accepted here: write a space after the ohm: ohm cm"),
        ("atoms/cm³", "\"atoms\" is not accepted here: leave the noun out, for example \"1e19 /cm³\""),
        ("(V s", "a bracket in the unit has no partner"),
        ("V s)", "a bracket in the unit has no partner"),
        ("cm²/(V s", "a bracket in the unit has no partner"),
        ("cm^(2", "a bracket in the unit has no partner"),
        ("((m))", "the unit is ambiguous: brackets inside brackets; one pair is enough"),
        ("m(s)", "\"(\" does not belong into a unit here: write a space or · between two units"),
        ("V-s", "\"-\" does not belong into a unit here: write a space or · between two units"),
        ("cm 2", "\"2\" does not belong into a unit here: a power follows its symbol without a space, for example cm² or cm^2"),
        ("m ·", "the unit breaks off: a unit symbol was expected"),
        ("m/", "the unit breaks off: a unit symbol was expected"),
        ("xyzzy", "\"xyzzy\" is not a known unit"),
        ("  ", "the unit is missing"),
    ];
    for (text, want) in cases {
        let fault = parse_unit(text, &NONE).unwrap_err();
        assert_eq!(fault.to_string(), want, "{text}");
    }
    let fault = parse_unit("cm² wrong", &NONE).unwrap_err();
    assert_eq!(fault.at(), Some(5..10), "bytes, and ² has two");
    assert!(matches!(fault, UnitFault::Unknown { .. }));
}

#[test]
fn a_monolayer_needs_its_height() {
    let context = Context {
        monolayer: Some(0.2106e-9),
    };
    let three = read("3 ML", &kind::THICKNESS, &context).unwrap();
    assert!(close(three.si, 3.0 * 0.2106e-9, 1e-15));
    assert_eq!(three.unit_text, "ML");
    for height in [0.0, -1e-9, f64::NAN] {
        assert!(
            parse_unit(
                "ML",
                &Context {
                    monolayer: Some(height)
                }
            )
            .is_err()
        );
    }
}

#[test]
fn spreads_are_read_in_every_form() {
    let normal = |sd| Spread::Normal { sd };
    let sides = Spread::Asymmetric {
        minus: 7e-9,
        plus: 12e-9,
    };
    #[rustfmt::skip]
    let cases = [
        ("3.6 ± 0.4 nm", kind::THICKNESS, 3.6e-9, normal(0.4e-9)), ("3.6 nm ± 0.4 nm", kind::THICKNESS, 3.6e-9, normal(0.4e-9)),
        ("3.6 +- 0.4 nm", kind::THICKNESS, 3.6e-9, normal(0.4e-9)), ("3.6+/-0.4nm", kind::THICKNESS, 3.6e-9, normal(0.4e-9)),
        ("3.6 nm ± 400 pm", kind::THICKNESS, 3.6e-9, normal(400e-12)), ("3.6 nm ± 0.4", kind::THICKNESS, 3.6e-9, normal(0.4e-9)),
        ("45 nm ± 10 %", kind::THICKNESS, 45e-9, normal(45e-9 * 0.1)), ("45 ± 3 %", kind::SPIN_POLARIZATION, 0.45, normal(0.03)),
        ("45 % ± 3 %", kind::SPIN_POLARIZATION, 0.45, normal(0.03)), ("0.46 ± 0.05", kind::BULK_ASYMMETRY, 0.46, normal(0.05)),
        ("11.7 ± 5 %", kind::PERMITTIVITY, 11.7, normal(11.7 * 0.05)),
        ("38 +12 -7 nm", kind::THICKNESS, 38e-9, sides), ("38 +12/-7 nm", kind::THICKNESS, 38e-9, sides),
        ("38 nm +12 -7", kind::THICKNESS, 38e-9, sides), ("38 nm +12 −7 nm", kind::THICKNESS, 38e-9, sides),
        ("1.5 nm ×/ 1.5", kind::THICKNESS, 1.5e-9, Spread::LogNormal { factor: 1.5 }),
        ("1.5 nm x/ 1.5", kind::THICKNESS, 1.5e-9, Spread::LogNormal { factor: 1.5 }),
        ("1.5 nm */ 1.5", kind::THICKNESS, 1.5e-9, Spread::LogNormal { factor: 1.5 }),
        ("26 .. 50 nm", kind::THICKNESS, 38e-9, Spread::Uniform { low: 26e-9, high: 50e-9 }),
        ("26..50 nm", kind::THICKNESS, 38e-9, Spread::Uniform { low: 26e-9, high: 50e-9 }),
        ("26 nm .. 50 nm", kind::THICKNESS, 38e-9, Spread::Uniform { low: 26e-9, high: 50e-9 }),
        ("0.8 µm .. 1200 nm", kind::THICKNESS, 1e-6, Spread::Uniform { low: 0.8e-6, high: 1.2e-6 }),
        ("> 230 nm", kind::THICKNESS, 230e-9, Spread::Bound { side: Side::Above }),
        ("≥230 nm", kind::THICKNESS, 230e-9, Spread::Bound { side: Side::Above }),
        ("< 5 nm", kind::THICKNESS, 5e-9, Spread::Bound { side: Side::Below }), ("≤ 5 nm", kind::THICKNESS, 5e-9, Spread::Bound { side: Side::Below }),
        ("25 ± 2 °C", kind::TEMPERATURE, 298.15, normal(2.0)), ("25 °C ± 2 K", kind::TEMPERATURE, 298.15, normal(2.0)),
        ("300 K ± 5 %", kind::TEMPERATURE, 300.0, normal(15.0)), ("500 ± 20 Oe", kind::APPLIED_FIELD, 0.05, normal(0.002)),
        ("5.0×10¹⁹ ± 3×10¹⁸ cm⁻³", kind::DOPING, 5e25, normal(3e24)), ("0 ± 3 %", kind::MAGNETORESISTANCE, 0.0, normal(0.03)),
    ];
    for (text, kind, si, spread) in cases {
        let got = reading(text, &kind);
        assert!(close(got.si, si, 1e-15), "{text}: {}", got.si);
        let same = match (got.spread, spread) {
            (Spread::Normal { sd: a }, Spread::Normal { sd: b }) => close(a, b, 1e-15),
            (
                Spread::Asymmetric { minus: a, plus: b },
                Spread::Asymmetric { minus: c, plus: d },
            )
            | (Spread::Uniform { low: a, high: b }, Spread::Uniform { low: c, high: d }) => {
                close(a, c, 1e-15) && close(b, d, 1e-15)
            }
            (a, b) => a == b,
        };
        assert!(same, "{text}: {:?} for {spread:?}", got.spread);
    }
    assert_eq!(reading("3.6 ± 0.4 nm", &kind::THICKNESS).unit_text, "nm");
    assert_eq!(reading("38 nm +12 -7", &kind::THICKNESS).unit_text, "nm");
}

#[test]
fn a_value_is_refused_with_its_reason() {
    let t = kind::THICKNESS;
    #[rustfmt::skip]
    let cases = [
        ("", t, "the value is empty"),
        ("5", t, "the unit is missing: expected thickness"),
        ("3.6 ± 0.4", t, "the unit is missing: expected thickness"),
        ("5 A", t, "expected thickness, found electric current"),
        ("5 kΩ µm²", kind::RESISTIVITY, "expected resistivity, found resistance-area product or spin resistance"),
        ("5 nm", kind::NUMBER, "expected number, found length"),
        ("5 %", t, "\"%\" is not accepted here: thickness is not written in per cent; write it like \"80 nm\""),
        ("45 ± 10 %", t, "\"%\" is not accepted here: thickness is not written in per cent; write it like \"80 nm\""),
        ("25 %", kind::SPIN_MEMORY_LOSS, "\"%\" is not accepted here: spin-memory loss is not written in per cent; write it like \"0.25\""),
        ("300 k", kind::TEMPERATURE, "\"k\" is not a known unit; did you mean K?"),
        ("25 C", kind::TEMPERATURE, "expected temperature, found electric charge"),
        ("5 m^4/s", t, "expected thickness, found a quantity in m⁴ s⁻¹"),
        ("-3 nm", t, "-3 nm is out of range for the thickness: a layer's thickness is positive, at most 10 cm"),
        ("1 .. 200 mm", t, "200 mm is out of range for the thickness: a layer's thickness is positive, at most 10 cm"),
        ("> 101 %", kind::SPIN_POLARIZATION, "101 % is out of range for the spin polarization: a polarization lies between −100 % and 100 %"),
        ("1", kind::BULK_ASYMMETRY, "1 is out of range for the bulk asymmetry: an asymmetry lies between −1 and 1, both excluded: at ±1 one spin channel would not conduct at all"),
        ("5 Oe", kind::MAGNETIZATION, "\"Oe\" is not accepted here: Oe and G are for a field applied in vacuum, not for saturation magnetization; write SI units"),
        ("1,5 nm", t, "the number is not accepted: it has a comma; write the decimal point as in 1.5, and no marks between thousands"),
        ("1 000 nm", t, "the number is not accepted: write the digits without spaces between them, for example 1000"),
        ("1\u{202f}000 nm", t, "the number is not accepted: write the digits without spaces between them, for example 1000"),
        ("1'000 nm", t, "the number is not accepted: write the digits without marks between them"),
        ("1.2.3 nm", t, "the number is not accepted: it has two decimal points or a broken power"),
        ("10^1.5 nm", t, "the number is not accepted: it has two decimal points or a broken power"),
        ("1e400", kind::NUMBER, "the number is not accepted: it is too large for a finite number"),
        ("1e99999999999999", kind::NUMBER, "the number is not accepted: it is too large for a finite number"),
        ("1e-400", kind::NUMBER, "the number is not accepted: it is too small to be told from zero"),
        ("nan", kind::NUMBER, "the number is not accepted: only finite numbers are accepted"),
        ("-inf", kind::NUMBER, "the number is not accepted: only finite numbers are accepted"),
        ("–3", kind::NUMBER, "the number is not accepted: it begins with a dash; write the minus as - or −"),
        ("~3 nm", t, "the number is not accepted: leave the sign out and write the uncertainty, for example 3.6 ± 0.4 nm"),
        ("(3.6 ± 0.4) nm", t, "the number is not accepted: leave the brackets out, for example 3.6 ± 0.4 nm"),
        ("3.6(4) nm", t, "the number is not accepted: write the uncertainty with ±, for example 3.6 ± 0.4 nm"),
        ("nm", t, "the number is not accepted: it must begin with a number"),
        ("3 ±", t, "the number is not accepted: a number is missing at the end"),
        ("3 ± 0 nm", t, "the spread is not accepted: an uncertainty of zero says nothing; a plain number is exact already"),
        ("3 ± -1 nm", t, "the spread is not accepted: an uncertainty has no sign of its own"),
        ("38 +12 nm", t, "the spread is not accepted: behind the upper side follows the lower one, as in 38 +12 -7 nm"),
        ("38 +0 -0 nm", t, "the spread is not accepted: behind the upper side follows the lower one, as in 38 +12 -7 nm"),
        ("1.5 nm ×/ 1", t, "the spread is not accepted: ×/ needs a factor above 1 behind a positive value, not one in °C"),
        ("1.5 ×/ 1.5 nm", t, "the spread is not accepted: the factor is a pure number; write the unit before it, as in 1.5 nm ×/ 1.5"),
        ("50 .. 26 nm", t, "the spread is not accepted: the first end must lie below the second"),
        ("0.1...50 nm", t, "the spread is not accepted: an interval has two dots, not three"),
        ("26-50 nm", t, "the spread is not accepted: write an interval with two dots, as in 26 .. 50 nm, and unequal sides as in 38 +12 -7 nm"),
        ("26–50 nm", t, "the spread is not accepted: write an interval with two dots, as in 26 .. 50 nm, and unequal sides as in 38 +12 -7 nm"),
        ("26 to 50 nm", t, "\"to\" is not accepted here: write a range with two dots, for example \"26 .. 50 nm\""),
        ("3 ± 1 ± 1 nm", t, "the spread is not accepted: there are two spreads; one is enough"),
        ("> 3 ± 1 nm", t, "the spread is not accepted: a bound has no uncertainty beside it"),
        ("25 °C ± 5 %", kind::TEMPERATURE, "the spread is not accepted: a per cent of a temperature in °C is ambiguous; write both in K"),
        ("0.46 ± 10 %", kind::BULK_ASYMMETRY, "the spread is not accepted: it is not clear what the per cent sign belongs to; write it behind both numbers"),
    ];
    for (text, kind, want) in cases {
        assert_eq!(message(text, &kind), want, "{text}");
    }
}

#[test]
fn help_says_what_to_write() {
    let help = |text, kind| read(text, kind, &NONE).unwrap_err().help();
    let amperes = help("5 A", &kind::THICKNESS).unwrap();
    assert!(amperes.contains('Å') && amperes.contains("nm"), "{amperes}");
    assert_eq!(
        help("5", &kind::THICKNESS).unwrap(),
        "write it like \"80 nm\" or \"1.4 nm\""
    );
    assert_eq!(
        help("1 m", &kind::THICKNESS).unwrap(),
        "it must be above 0 nm and at most 100 mm"
    );
    assert!(
        help("25 C", &kind::TEMPERATURE)
            .unwrap()
            .contains("write °C")
    );
    assert_eq!(help("300 k", &kind::TEMPERATURE).unwrap(), "write K");
    let fault = read("12 kΩ µm", &kind::RESISTANCE_AREA, &NONE).unwrap_err();
    assert_eq!(fault.at, Some(3.."12 kΩ µm".len()));
    let ReadFaultKind::Dimension { found, .. } = fault.what else {
        panic!("{fault}")
    };
    assert_eq!(found, kind::RESISTIVITY.dimension);
    let deep = read("3 ± 1 furlong", &kind::THICKNESS, &NONE).unwrap_err();
    assert_eq!(deep.at, Some(7..14), "bytes, and ± has two");
}

#[test]
fn every_kind_is_named_and_reads_its_own_examples() {
    for kind in KINDS {
        assert!(!dimension_names(kind.dimension).is_empty(), "{}", kind.name);
        for example in kind.examples {
            reading(example, kind);
        }
    }
    assert_eq!(
        dimension_names(Dimension([4, 1, -3, -2, 0, 0, 0])),
        ["resistance-area product", "spin resistance"]
    );
    assert!(dimension_names(Dimension([9, 9, 9, 9, 9, 9, 9])).is_empty());
}

#[test]
fn a_bare_number_is_for_pure_numbers() {
    assert_eq!(read_bare(0.46, &kind::BULK_ASYMMETRY).unwrap().text, "0.46");
    assert!(matches!(
        read_bare(5.0, &kind::THICKNESS).unwrap_err().what,
        ReadFaultKind::UnitMissing { .. }
    ));
    assert!(matches!(
        read_bare(f64::NAN, &kind::NUMBER).unwrap_err().what,
        ReadFaultKind::Number { .. }
    ));
    assert!(matches!(
        read_bare(1.0, &kind::BULK_ASYMMETRY).unwrap_err().what,
        ReadFaultKind::OutOfRange { .. }
    ));
}

#[test]
fn an_interval_keeps_its_numbers_as_typed() {
    let got = read_interval("1 .. 1e4 Ω µm²", &kind::RESISTANCE_AREA).unwrap();
    assert_eq!(
        [got.low.to_bits(), got.high.to_bits()],
        [1e-12_f64.to_bits(), 1e-8_f64.to_bits()]
    );
    assert_eq!(
        [got.low_text, got.high_text, got.unit_text],
        ["1", "1e4", "Ω µm²"]
    );
    assert!(read_interval("1 nm .. 2 nm", &kind::THICKNESS).is_ok());
    for (text, want) in [
        (
            "5 nm",
            "the spread is not accepted: write an interval with two dots, for example \"1 .. 1e4\" and the unit",
        ),
        (
            "1 nm .. 1 µm",
            "the spread is not accepted: write the unit once, at the end",
        ),
        (
            "2 .. 1 nm",
            "the spread is not accepted: the first end must lie below the second",
        ),
        (
            "0 .. 1 nm",
            "0 nm is out of range for the thickness: a layer's thickness is positive, at most 10 cm",
        ),
        ("1 .. 2", "the unit is missing: expected thickness"),
    ] {
        assert_eq!(
            read_interval(text, &kind::THICKNESS).unwrap_err().message(),
            want,
            "{text}"
        );
    }
}
