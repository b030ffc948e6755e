//! Findings: what a colleague would point out, as facts with the numbers inside. The sentences are worded
//! in presentation; `RULES` lists every rule there is.

use crate::designs::goals::Target;
use crate::designs::layers::EndWord;
use crate::quantities::dimensions::ElectricPotential;
use crate::quantities::meanings::{
    ResistanceAreaProduct, SpinDiffusionLength, SpinResistance, Thickness,
};

use super::window::Window;

/// How much a finding matters.
#[derive(Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Debug)]
pub enum Severity {
    /// The design cannot do what it is meant to do.
    Problem,
    /// The answer rests on something that should be looked at.
    Caution,
    /// Worth knowing.
    Remark,
}

/// One rule.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub struct Rule {
    /// Name, for lists and machine output.
    pub name: &'static str,
    /// Severity of its findings.
    pub severity: Severity,
}

const fn rule(name: &'static str, severity: Severity) -> Rule {
    Rule { name, severity }
}

/// Every rule, in the order in which findings are told.
pub static RULES: &[Rule] = &[
    rule("above-curie-temperature", Severity::Problem),
    rule("conductivity-mismatch", Severity::Problem),
    rule("goal-out-of-reach", Severity::Problem),
    rule("outside-window", Severity::Problem),
    rule("window-unknown", Severity::Caution),
    rule("bare-semiconductor", Severity::Caution),
    rule("uncertain-inputs-matter", Severity::Caution),
    rule("borrowed-asymmetry", Severity::Caution),
    rule("only-a-bound", Severity::Caution),
    rule("near-curie-temperature", Severity::Caution),
    rule("high-bias", Severity::Caution),
    rule("not-linear", Severity::Caution),
    rule("drift", Severity::Caution),
    rule("long-channel", Severity::Caution),
    rule("thin-channel", Severity::Caution),
    rule("thin-ferromagnet", Severity::Caution),
    rule("thin-barrier", Severity::Caution),
    rule("temperature-outside-data", Severity::Caution),
    rule("doping-outside-data", Severity::Caution),
    rule("other-dopant", Severity::Caution),
    rule("memory-loss-outside-temperature", Severity::Caution),
    rule("asymmetry-near-one", Severity::Caution),
    rule("interface-left-out", Severity::Caution),
    rule("measured-otherwise", Severity::Remark),
    rule("strip-resistance-left-out", Severity::Remark),
    rule("record-replaced", Severity::Remark),
];

/// An input that matters, for findings about inputs.
#[derive(Clone, PartialEq, Debug)]
pub struct Named {
    /// Names of the inputs that move together.
    pub names: Vec<String>,
    /// Record, if they come from one.
    pub record: Option<String>,
    /// Share of Σ(change)².
    pub share: f64,
    /// What is uncertain about it: recalled or assumed.
    pub recalled: bool,
}

/// A finding.
#[derive(Clone, PartialEq, Debug)]
pub enum Finding {
    /// The channel takes far more spin than the contact offers.
    ConductivityMismatch {
        /// Channel's over contact's spin impedance.
        ratio: f64,
        /// What the contact would inject without mismatch.
        offered: f64,
        /// What it does inject.
        injected: f64,
    },
    /// No resistance-area product meets the goal.
    GoalOutOfReach {
        /// Target.
        target: Target,
        /// Best value, SI.
        best: f64,
        /// Where; none for the limit of an infinite product.
        at: Option<ResistanceAreaProduct>,
        /// Whether one contact varied alone would meet it.
        alone: bool,
    },
    /// The design's product lies outside the window.
    OutsideWindow {
        /// The window.
        window: Box<Window>,
    },
    /// There is no window because γ is not known.
    WindowUnknown,
    /// A ferromagnet lies bare on a semiconductor.
    BareSemiconductor {
        /// Ferromagnet.
        ferromagnet: String,
        /// Semiconductor.
        channel: String,
    },
    /// γ is borrowed.
    BorrowedAsymmetry {
        /// Inputs.
        names: Vec<String>,
        /// Record it is borrowed from.
        record: String,
        /// Tunnel polarization there.
        polarization: f64,
        /// γ used.
        asymmetry: f64,
    },
    /// The channel between two contacts is longer than λ.
    LongChannel {
        /// t.
        thickness: Thickness,
        /// λ.
        length: SpinDiffusionLength,
    },
    /// A channel taken as semi-infinite is thinner than 3 λ.
    ThinChannel {
        /// t.
        thickness: Thickness,
        /// λ.
        length: SpinDiffusionLength,
    },
    /// A ferromagnet is used near or above its Curie temperature.
    CurieTemperature {
        /// Material.
        material: String,
        /// T_C of the record, K.
        curie: f64,
        /// Temperature of the design, K.
        temperature: f64,
        /// Record.
        record: String,
    },
    /// The voltage over an interface leaves the small-bias range.
    HighBias {
        /// Path.
        path: String,
        /// Voltage over it.
        voltage: ElectricPotential,
        /// Barrier thickness, where stated.
        thickness: Option<Thickness>,
    },
    /// Inputs of which only a bound is known.
    OnlyABound {
        /// Their names.
        inputs: Vec<String>,
    },
    /// Records of another dopant are used, or the dopant is not one that the library knows.
    OtherDopant {
        /// Inputs and the dopants of their records.
        inputs: Vec<(String, String)>,
        /// Dopant of the design.
        wanted: String,
    },
    /// A published value of the same contact differs by more than ten times.
    MeasuredOtherwise {
        /// Record.
        record: String,
        /// What it is.
        what: &'static str,
        /// Published value, SI.
        published: f64,
        /// Value of the design or its answer, SI.
        here: f64,
    },
    /// A ferromagnet taken as thick is thinner than 3 λ.
    ThinFerromagnet {
        /// Path.
        path: String,
        /// t.
        thickness: Thickness,
        /// λ.
        length: SpinDiffusionLength,
        /// r_F if thick.
        thick: SpinResistance,
    },
    /// A barrier is thinner than two monolayers.
    ThinBarrier {
        /// Path.
        path: String,
        /// t.
        thickness: Thickness,
        /// Monolayers.
        monolayers: f64,
    },
    /// Records of another temperature are used.
    TemperatureOutsideData {
        /// Input and temperature of its record, K.
        inputs: Vec<(String, f64)>,
        /// Temperature of the design, K.
        wanted: f64,
    },
    /// Records of another doping are used.
    DopingOutsideData {
        /// Input and doping of its record, m⁻³.
        inputs: Vec<(String, f64)>,
        /// Doping of the design, m⁻³.
        wanted: f64,
    },
    /// A spin-memory loss of another temperature is used.
    MemoryLossOutsideTemperature {
        /// Temperature of the record, K.
        record: f64,
        /// Temperature of the design, K.
        wanted: f64,
    },
    /// β or γ is within its uncertainty of ±1, or nearer to it than measurements support.
    AsymmetryNearOne {
        /// Input.
        name: String,
        /// β or γ.
        value: f64,
    },
    /// Recalled or assumed inputs carry a good part of the answer.
    UncertainInputsMatter {
        /// What they carry the spread of.
        target: Target,
        /// The inputs.
        inputs: Vec<Named>,
    },
    /// A direct interface has no record and no resistance.
    InterfaceLeftOut {
        /// Path.
        path: String,
    },
    /// The accumulation exceeds kT/e.
    NotLinear {
        /// |u|.
        accumulation: ElectricPotential,
        /// kT/e.
        thermal: ElectricPotential,
    },
    /// The field times λ exceeds kT/e.
    Drift {
        /// ρjλ.
        voltage: ElectricPotential,
        /// kT/e.
        thermal: ElectricPotential,
    },
    /// An end fed in its plane: the strip's own resistance is not counted.
    StripResistanceLeftOut {
        /// End.
        end: EndWord,
    },
    /// Records of the user have taken the place of shipped ones.
    RecordReplaced {
        /// Their ids.
        ids: Vec<String>,
    },
}

impl Finding {
    /// Name of its rule.
    #[must_use]
    pub fn rule_name(&self) -> &'static str {
        match self {
            Self::ConductivityMismatch { .. } => "conductivity-mismatch",
            Self::GoalOutOfReach { .. } => "goal-out-of-reach",
            Self::OutsideWindow { .. } => "outside-window",
            Self::WindowUnknown => "window-unknown",
            Self::BareSemiconductor { .. } => "bare-semiconductor",
            Self::ThinChannel { .. } => "thin-channel",
            Self::CurieTemperature {
                curie, temperature, ..
            } if temperature > curie => "above-curie-temperature",
            Self::CurieTemperature { .. } => "near-curie-temperature",
            Self::HighBias { .. } => "high-bias",
            Self::OnlyABound { .. } => "only-a-bound",
            Self::OtherDopant { .. } => "other-dopant",
            Self::MeasuredOtherwise { .. } => "measured-otherwise",
            Self::BorrowedAsymmetry { .. } => "borrowed-asymmetry",
            Self::LongChannel { .. } => "long-channel",
            Self::ThinFerromagnet { .. } => "thin-ferromagnet",
            Self::ThinBarrier { .. } => "thin-barrier",
            Self::TemperatureOutsideData { .. } => "temperature-outside-data",
            Self::DopingOutsideData { .. } => "doping-outside-data",
            Self::MemoryLossOutsideTemperature { .. } => "memory-loss-outside-temperature",
            Self::AsymmetryNearOne { .. } => "asymmetry-near-one",
            Self::UncertainInputsMatter { .. } => "uncertain-inputs-matter",
            Self::InterfaceLeftOut { .. } => "interface-left-out",
            Self::NotLinear { .. } => "not-linear",
            Self::Drift { .. } => "drift",
            Self::StripResistanceLeftOut { .. } => "strip-resistance-left-out",
            Self::RecordReplaced { .. } => "record-replaced",
        }
    }

    fn order(&self) -> usize {
        RULES
            .iter()
            .position(|r| r.name == self.rule_name())
            .unwrap_or(usize::MAX)
    }

    /// Severity.
    #[must_use]
    pub fn severity(&self) -> Severity {
        RULES
            .get(self.order())
            .map_or(Severity::Remark, |r| r.severity)
    }
}

/// Findings in the order of the rules.
#[must_use]
pub fn ordered(mut findings: Vec<Finding>) -> Vec<Finding> {
    findings.sort_by_key(Finding::order);
    // Two contacts of one kind say the same thing once.
    findings.dedup();
    findings
}
