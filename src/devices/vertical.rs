//! The vertical device: plan of a stack over an input table, and its evaluator.

use ndarray::{Array2, ArrayView1, ArrayView2};

use crate::models::ladder::{
    Element, End, Interface, Layer, Magnetization, Solution, Stack, StackFault, State,
};
use crate::quantities::dimensions::{
    ElectricCurrentDensity, ElectricalConductivity, ElectricalResistivity, Measured,
    ResistanceTimesArea, ThermodynamicTemperature,
};
use crate::quantities::meanings::{
    BulkAsymmetry, CurrentSpinPolarization, InterfaceAsymmetry, InterfaceSpinResistance,
    Magnetoresistance, ResistanceAreaChange, ResistanceAreaProduct, SpinDiffusionLength,
    SpinMemoryLoss, Thickness,
};

use super::inputs::{InputTable, Row, Slot};

/// How a layer's resistivity is given.
#[derive(Clone, Copy, Debug)]
pub enum ResistivityPlan {
    /// As such.
    Direct(Slot<ElectricalResistivity>),
    /// As a conductivity.
    FromConductivity(Slot<ElectricalConductivity>),
}

/// How a layer's spin diffusion length is given.
#[derive(Clone, Copy, Debug)]
pub enum LengthPlan {
    /// As such.
    Direct(Slot<SpinDiffusionLength>),
    /// From the material's product ρλ and the layer's resistivity.
    FromProduct(Slot<ResistanceTimesArea>),
}

/// Plan of a layer.
#[derive(Clone, Copy, Debug)]
pub struct LayerPlan {
    /// ρ.
    pub resistivity: ResistivityPlan,
    /// β; none of a normal layer.
    pub asymmetry: Option<Slot<BulkAsymmetry>>,
    /// λ.
    pub length: LengthPlan,
    /// t; none where a semi-infinite end states none.
    pub thickness: Option<Slot<Thickness>>,
    /// Magnetization.
    pub magnetization: Magnetization,
}

/// How an interface's resistance is given.
#[derive(Clone, Copy, Debug)]
pub enum InterfaceResistancePlan {
    /// None at all.
    Zero,
    /// As RA.
    ResistanceArea(Slot<ResistanceAreaProduct>),
    /// As r_b*.
    SpinResistance(Slot<InterfaceSpinResistance>),
}

/// Plan of an interface.
#[derive(Clone, Copy, Debug)]
pub struct InterfacePlan {
    /// Resistance.
    pub resistance: InterfaceResistancePlan,
    /// γ.
    pub asymmetry: Option<Slot<InterfaceAsymmetry>>,
    /// δ.
    pub memory_loss: Option<Slot<SpinMemoryLoss>>,
    /// Magnetization.
    pub magnetization: Magnetization,
}

/// Plan of an element.
#[derive(Clone, Copy, Debug)]
pub enum ElementPlan {
    /// A layer.
    Layer(LayerPlan),
    /// An interface.
    Interface(InterfacePlan),
}

/// Plan of an end.
#[derive(Clone, Copy, Debug)]
pub enum EndPlan {
    /// A medium.
    SemiInfinite(LayerPlan),
    /// A sink.
    SpinSink,
    /// A wall.
    Reflecting,
    /// A strip.
    FedInPlane,
}

/// What stands at a place of the stack, for people.
#[derive(Clone, PartialEq, Debug)]
pub struct Named {
    /// Path in the design.
    pub path: String,
    /// What to call it: `iron`, `magnesia`, `n-silicon`, `channel`.
    pub label: String,
    /// Id of the library material, if it is one.
    pub material: Option<String>,
    /// Whether the material is a semiconductor.
    pub semiconductor: bool,
}

/// γ that a barrier might have where the design has none.
#[derive(Clone, Debug)]
pub struct LikelyContact {
    /// Element of the contact.
    pub element: usize,
    /// The input, not part of the table: the present stack does not depend on it.
    pub input: super::inputs::Input,
    /// Barrier it is known for.
    pub barrier: Option<String>,
    /// Interface record it stands in.
    pub interface: String,
}

/// A vertical device.
#[derive(Clone, Debug)]
pub struct Vertical {
    /// Inputs.
    pub table: InputTable,
    /// Left end.
    pub left: EndPlan,
    /// Elements between the ends.
    pub elements: Vec<ElementPlan>,
    /// Right end.
    pub right: EndPlan,
    /// Names of the left end medium (if it is one), the elements, the right end medium (if it is one).
    pub names: Vec<Named>,
    /// Where the channel stands.
    pub channel: Position,
    /// Contact through which the channel is injected into: its interface element, if it has one.
    pub injector_contact: Option<usize>,
    /// Whether the injecting side of the channel is its left one.
    pub injects_from_left: bool,
    /// Ferromagnet that injects.
    pub injector: Position,
    /// All tunnel barriers or direct interfaces next to the channel.
    pub channel_contacts: Vec<usize>,
    /// Whether two magnetic states differ: something flips and something does not.
    pub has_two_states: bool,
    /// γ for barriers that are not there, one a bare contact.
    pub likely: Vec<LikelyContact>,
    /// Temperature.
    pub temperature: ThermodynamicTemperature,
    /// Current density.
    pub current_density: Option<ElectricCurrentDensity>,
}

/// Place of a layer in the plan.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Position {
    /// The medium of the left end.
    LeftEnd,
    /// An element.
    Element(usize),
    /// The medium of the right end.
    RightEnd,
}

/// A stack with its numbers put in, before it is solved: studies move single numbers of it.
#[derive(Clone, PartialEq, Debug)]
pub struct Blueprint {
    /// Left end.
    pub left: End,
    /// Elements.
    pub elements: Vec<Element>,
    /// Right end.
    pub right: End,
}

impl Blueprint {
    /// The stack.
    ///
    /// # Errors
    /// [`StackFault`]; designs that were read without fault do not give one.
    pub fn stack(&self) -> Result<Stack, StackFault> {
        Stack::new(self.left, &self.elements, self.right)
    }

    /// The layer at a position.
    #[must_use]
    pub fn layer(&self, at: Position) -> Option<&Layer> {
        match at {
            Position::LeftEnd => match &self.left {
                End::SemiInfinite(layer) => Some(layer),
                _ => None,
            },
            Position::RightEnd => match &self.right {
                End::SemiInfinite(layer) => Some(layer),
                _ => None,
            },
            Position::Element(i) => match self.elements.get(i) {
                Some(Element::Layer(layer)) => Some(layer),
                _ => None,
            },
        }
    }

    /// The layer at a position, to move its numbers.
    pub fn layer_mut(&mut self, at: Position) -> Option<&mut Layer> {
        match at {
            Position::LeftEnd => match &mut self.left {
                End::SemiInfinite(layer) => Some(layer),
                _ => None,
            },
            Position::RightEnd => match &mut self.right {
                End::SemiInfinite(layer) => Some(layer),
                _ => None,
            },
            Position::Element(i) => match self.elements.get_mut(i) {
                Some(Element::Layer(layer)) => Some(layer),
                _ => None,
            },
        }
    }

    /// The interface at an element, to move its numbers.
    pub fn interface_mut(&mut self, at: usize) -> Option<&mut Interface> {
        match self.elements.get_mut(at) {
            Some(Element::Interface(interface)) => Some(interface),
            _ => None,
        }
    }

    /// The interface at an element.
    #[must_use]
    pub fn interface(&self, at: usize) -> Option<&Interface> {
        match self.elements.get(at) {
            Some(Element::Interface(interface)) => Some(interface),
            _ => None,
        }
    }
}

/// What a row of inputs leads to.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Outcome {
    /// p just inside the channel at the injector, parallel state.
    pub polarization: CurrentSpinPolarization,
    /// The same in the antiparallel state.
    pub polarization_antiparallel: CurrentSpinPolarization,
    /// u/j at the same place, parallel state, Ω m².
    pub accumulation: ResistanceTimesArea,
    /// The same in the antiparallel state.
    pub accumulation_antiparallel: ResistanceTimesArea,
    /// RA of the stack, parallel state.
    pub resistance_area: ResistanceAreaProduct,
    /// ΔRA.
    pub resistance_area_change: ResistanceAreaChange,
    /// ΔRA/RA.
    pub magnetoresistance: Magnetoresistance,
}

impl Outcome {
    /// Names of the columns of [`Vertical::evaluate_rows`].
    pub const COLUMNS: [&'static str; 7] = [
        "injected_polarization",
        "injected_polarization_antiparallel",
        "spin_accumulation_per_current_density",
        "spin_accumulation_per_current_density_antiparallel",
        "resistance_area",
        "resistance_area_change",
        "magnetoresistance",
    ];

    /// The numbers in the order of [`Outcome::COLUMNS`], SI.
    #[must_use]
    pub fn si(&self) -> [f64; 7] {
        [
            self.polarization.si(),
            self.polarization_antiparallel.si(),
            self.accumulation.si(),
            self.accumulation_antiparallel.si(),
            self.resistance_area.si(),
            self.resistance_area_change.si(),
            self.magnetoresistance.si(),
        ]
    }
}

impl Vertical {
    fn layer(&self, plan: &LayerPlan, row: Row<'_>) -> Layer {
        let resistivity = match plan.resistivity {
            ResistivityPlan::Direct(slot) => row.get(slot),
            ResistivityPlan::FromConductivity(slot) => {
                ElectricalResistivity::from_si(1.0 / row.get(slot).si())
            }
        };
        let length = match plan.length {
            LengthPlan::Direct(slot) => row.get(slot),
            LengthPlan::FromProduct(slot) => {
                SpinDiffusionLength::from_si(row.get(slot).si() / resistivity.si())
            }
        };
        Layer {
            resistivity,
            asymmetry: plan
                .asymmetry
                .map_or(BulkAsymmetry::from_si(0.0), |s| row.get(s)),
            length,
            thickness: plan
                .thickness
                .map_or(Thickness::from_si(f64::INFINITY), |s| row.get(s)),
            magnetization: plan.magnetization,
        }
    }

    fn interface(plan: &InterfacePlan, row: Row<'_>) -> Interface {
        let asymmetry = plan
            .asymmetry
            .map_or(InterfaceAsymmetry::from_si(0.0), |s| row.get(s));
        let spin_resistance = match plan.resistance {
            InterfaceResistancePlan::Zero => InterfaceSpinResistance::from_si(0.0),
            InterfaceResistancePlan::ResistanceArea(slot) => {
                InterfaceSpinResistance::from_resistance_area(row.get(slot), asymmetry)
            }
            InterfaceResistancePlan::SpinResistance(slot) => row.get(slot),
        };
        Interface {
            spin_resistance,
            asymmetry,
            memory_loss: plan
                .memory_loss
                .map_or(SpinMemoryLoss::from_si(0.0), |s| row.get(s)),
            magnetization: plan.magnetization,
        }
    }

    /// Puts a row of values into the plan. Shape of `row`: (inputs,), SI.
    #[must_use]
    pub fn blueprint(&self, row: ArrayView1<'_, f64>) -> Blueprint {
        let row = Row(row);
        let end = |plan: &EndPlan| match plan {
            EndPlan::SemiInfinite(layer) => End::SemiInfinite(self.layer(layer, row)),
            EndPlan::SpinSink => End::SpinSink,
            EndPlan::Reflecting => End::Reflecting,
            EndPlan::FedInPlane => End::FedInPlane,
        };
        Blueprint {
            left: end(&self.left),
            elements: self
                .elements
                .iter()
                .map(|e| match e {
                    ElementPlan::Layer(plan) => Element::Layer(self.layer(plan, row)),
                    ElementPlan::Interface(plan) => Element::Interface(Self::interface(plan, row)),
                })
                .collect(),
            right: end(&self.right),
        }
    }

    /// Face of the ladder just inside the channel at the injector.
    #[must_use]
    pub fn injector_face(&self) -> usize {
        match (self.channel, self.injects_from_left) {
            (Position::LeftEnd, _) => 0,
            (Position::RightEnd, _) => self.elements.len(),
            (Position::Element(i), true) => i,
            (Position::Element(i), false) => i + 1,
        }
    }

    /// Outcome of a solved stack.
    #[must_use]
    pub fn outcome_of(&self, stack: &Stack) -> Outcome {
        let face = self.injector_face();
        let at = |solution: &Solution| {
            solution.faces.get(face).map_or(
                (
                    CurrentSpinPolarization::from_si(0.0),
                    ResistanceTimesArea::from_si(0.0),
                ),
                |f| (f.polarization, f.accumulation_per_current_density),
            )
        };
        let parallel = stack.solve(State::Parallel);
        let (p, u) = at(&parallel);
        let (pa, ua) = if self.has_two_states {
            at(&stack.solve(State::Antiparallel))
        } else {
            (p, u)
        };
        let change = stack.resistance_area_change();
        Outcome {
            polarization: p,
            polarization_antiparallel: pa,
            accumulation: u,
            accumulation_antiparallel: ua,
            resistance_area: parallel.resistance_area,
            resistance_area_change: change,
            magnetoresistance: Magnetoresistance::from_si(
                change.si() / parallel.resistance_area.si(),
            ),
        }
    }

    /// Evaluates one row. Shape of `row`: (inputs,), SI.
    ///
    /// # Errors
    /// [`StackFault`]; designs that were read without fault do not give one.
    pub fn evaluate(&self, row: ArrayView1<'_, f64>) -> Result<Outcome, StackFault> {
        Ok(self.outcome_of(&self.blueprint(row).stack()?))
    }

    /// Evaluates many rows. Shape of `rows`: (evaluations, inputs), SI; of the result: (evaluations, 7),
    /// columns as in [`Outcome::COLUMNS`].
    ///
    /// # Errors
    /// [`StackFault`], as for one row.
    pub fn evaluate_rows(&self, rows: ArrayView2<'_, f64>) -> Result<Array2<f64>, StackFault> {
        let mut out = Array2::zeros((rows.nrows(), Outcome::COLUMNS.len()));
        for (row, mut result) in rows.rows().into_iter().zip(out.rows_mut()) {
            for (slot, value) in result.iter_mut().zip(self.evaluate(row)?.si()) {
                *slot = value;
            }
        }
        Ok(out)
    }

    /// The name of what stands at a position.
    #[must_use]
    pub fn name(&self, at: Position) -> Option<&Named> {
        let shift = usize::from(matches!(self.left, EndPlan::SemiInfinite(_)));
        match at {
            Position::LeftEnd => self.names.first(),
            Position::Element(i) => self.names.get(i + shift),
            Position::RightEnd => self.names.last(),
        }
    }
}

impl Vertical {
    /// Whether the design or a record states γ of the interface at an element.
    #[must_use]
    pub fn states_asymmetry(&self, element: usize) -> bool {
        matches!(
            self.elements.get(element),
            Some(ElementPlan::Interface(InterfacePlan {
                asymmetry: Some(_),
                ..
            }))
        )
    }
}

impl Vertical {
    /// The two layers that an interface element stands between.
    #[must_use]
    pub fn neighbours(&self, element: usize) -> [Position; 2] {
        let left = element
            .checked_sub(1)
            .map_or(Position::LeftEnd, Position::Element);
        let right = if element + 1 < self.elements.len() {
            Position::Element(element + 1)
        } else {
            Position::RightEnd
        };
        [left, right]
    }

    /// Plan of the layer at a position.
    #[must_use]
    pub fn layer_plan(&self, at: Position) -> Option<&LayerPlan> {
        match at {
            Position::LeftEnd => match &self.left {
                EndPlan::SemiInfinite(plan) => Some(plan),
                _ => None,
            },
            Position::RightEnd => match &self.right {
                EndPlan::SemiInfinite(plan) => Some(plan),
                _ => None,
            },
            Position::Element(i) => match self.elements.get(i) {
                Some(ElementPlan::Layer(plan)) => Some(plan),
                _ => None,
            },
        }
    }

    /// Whether a ferromagnet stands at a position.
    #[must_use]
    pub fn is_ferromagnet(&self, at: Position) -> bool {
        self.layer_plan(at)
            .is_some_and(|plan| plan.asymmetry.is_some())
    }

    /// Every layer from left to right, end media included.
    #[must_use]
    pub fn layers(&self) -> Vec<Position> {
        std::iter::once(Position::LeftEnd)
            .chain((0..self.elements.len()).map(Position::Element))
            .chain(std::iter::once(Position::RightEnd))
            .filter(|at| self.layer_plan(*at).is_some())
            .collect()
    }
}
