//! The layout of a device: ends, elements, the channel and its contacts.

use crate::designs::design::Part;
use crate::designs::layers::{ContactSpec, EndWord};
use crate::materials::choose::{self, ContactValue};
use crate::models::ladder::Magnetization;
use crate::quantities::kind::{self};

use crate::devices::inputs::Input;
use crate::devices::provenance::Provenance;
use crate::devices::vertical::{
    ElementPlan, EndPlan, InterfacePlan, InterfaceResistancePlan, LayerPlan, LikelyContact, Named,
    Position, Vertical,
};

use super::{Work, layer_spec, magnetization, origin_of};

impl Work<'_> {
    pub(super) fn build(&mut self) -> Option<Vertical> {
        let design = self.design;
        let parts = &design.parts;
        let mut layers: Vec<Option<(LayerPlan, Named)>> = Vec::new();
        for part in parts {
            layers.push(match part {
                Part::Ferromagnet(spec) => self.ferromagnet(spec),
                Part::Normal(spec) => self.normal(spec),
                Part::Contact(_) => None,
            });
        }
        let complete = parts
            .iter()
            .zip(&layers)
            .all(|(p, l)| matches!(p, Part::Contact(_)) || l.is_some());
        if !complete {
            return None;
        }
        let last = parts.len() - 1;
        let mut elements = Vec::new();
        let mut names = Vec::new();
        let mut gone: Vec<Option<Position>> = vec![None; parts.len()];
        let (mut left, mut right) = (end_plan(design.left), end_plan(design.right));
        let mut contacts: Vec<(usize, usize, usize)> = Vec::new();
        let mut previous: Option<usize> = None;
        for i in 0..parts.len() {
            let Some((plan, name)) = &layers[i] else {
                continue;
            };
            if let Some(before) = previous {
                let (Some((_, before_name)), spec) = (
                    &layers[before],
                    match parts.get(before + 1) {
                        Some(Part::Contact(c)) => Some(c),
                        _ => None,
                    },
                ) else {
                    continue;
                };
                let path =
                    spec.map_or_else(|| between(&parts[before], &parts[i]), |s| s.path.clone());
                let place = spec.map_or_else(|| design.place.clone(), |s| s.place.clone());
                let interface = self.interface(
                    spec,
                    &path,
                    &place,
                    (&parts[before], before_name, &parts[i], name),
                );
                contacts.push((elements.len(), before, i));
                elements.push(ElementPlan::Interface(interface.unwrap_or(InterfacePlan {
                    resistance: InterfaceResistancePlan::Zero,
                    asymmetry: None,
                    memory_loss: None,
                    magnetization: Magnetization::Fixed,
                })));
                names.push(interface_name(spec, path));
            }
            let position = if i == 0 && design.left == EndWord::SemiInfinite {
                left = EndPlan::SemiInfinite(*plan);
                Position::LeftEnd
            } else if i == last && design.right == EndWord::SemiInfinite {
                right = EndPlan::SemiInfinite(*plan);
                Position::RightEnd
            } else {
                elements.push(ElementPlan::Layer(*plan));
                Position::Element(elements.len() - 1)
            };
            gone[i] = Some(position);
            names.push(name.clone());
            previous = Some(i);
        }
        self.finish(elements, names, left, right, &gone, &contacts)
    }

    pub(super) fn finish(
        &mut self,
        elements: Vec<ElementPlan>,
        names: Vec<Named>,
        left: EndPlan,
        right: EndPlan,
        gone: &[Option<Position>],
        contacts: &[(usize, usize, usize)],
    ) -> Option<Vertical> {
        let design = self.design;
        let parts = &design.parts;
        let position = |i: usize| gone.get(i).copied().flatten();
        let is_f = |i: usize| matches!(parts[i], Part::Ferromagnet(_));
        let channel = position(design.channel)?;
        let before = (0..design.channel).rev().find(|i| is_f(*i));
        let after = (design.channel + 1..parts.len()).find(|i| is_f(*i));
        let injects_from_left = before.is_some();
        let injector_part = before.or(after)?;
        let injector = position(injector_part)?;
        let touching = |other: usize| {
            contacts
                .iter()
                .find(|(_, a, b)| {
                    (*a, *b) == (other, design.channel) || (*b, *a) == (other, design.channel)
                })
                .map(|(element, _, _)| *element)
        };
        let contacts_of_channel: Vec<(usize, usize)> = [before, after]
            .into_iter()
            .flatten()
            .filter_map(|magnet| touching(magnet).map(|element| (element, magnet)))
            .collect();
        let channel_contacts = contacts_of_channel
            .iter()
            .map(|(element, _)| *element)
            .collect();
        let injector_contact = touching(injector_part);
        let flips = |f: Magnetization| f == Magnetization::Free;
        let magnetizations: Vec<Magnetization> = parts
            .iter()
            .filter_map(|p| match p {
                Part::Ferromagnet(l) => Some(magnetization(l.magnetization)),
                _ => None,
            })
            .collect();
        let has_two_states =
            magnetizations.iter().any(|m| flips(*m)) && magnetizations.iter().any(|m| !flips(*m));
        let likely = contacts_of_channel
            .iter()
            .filter_map(|(element, magnet)| self.likely(*element, elements.get(*element), *magnet))
            .collect();
        Some(Vertical {
            table: std::mem::take(&mut self.table),
            left,
            elements,
            right,
            names,
            channel,
            injector_contact,
            injects_from_left,
            injector,
            channel_contacts,
            has_two_states,
            likely,
            temperature: design.temperature.value.value(),
            current_density: design.current_density.as_ref().map(|j| j.value.value()),
        })
    }

    /// γ that a barrier might have at a contact without one.
    pub(super) fn likely(
        &self,
        element: usize,
        contact: Option<&ElementPlan>,
        magnet: usize,
    ) -> Option<LikelyContact> {
        let Some(ElementPlan::Interface(InterfacePlan {
            asymmetry: None, ..
        })) = contact
        else {
            return None;
        };
        let channel = self.design.parts.get(self.design.channel)?;
        let id = |part: &Part| {
            let name = &layer_spec(part)?.material.as_ref()?.value;
            self.library.id_of(name)
        };
        let f = id(self.design.parts.get(magnet)?)?;
        let n = id(channel)?;
        let wanted = self.wanted(layer_spec(channel));
        let value = choose::likely_asymmetry(self.library, &f, &n, &wanted, self.faults)?;
        let ContactValue {
            reading,
            chosen,
            interface,
            barrier,
        } = value;
        let provenance = Provenance {
            origin: origin_of(&chosen.record.common, chosen.decided, chosen.among),
            marks: chosen.marks,
        };
        let side = if magnet < self.design.channel {
            "injector"
        } else {
            "detector"
        };
        let input = Input {
            name: format!("{side}.barrier.interface_asymmetry"),
            kind: &kind::INTERFACE_ASYMMETRY,
            reading,
            provenance,
        };
        Some(LikelyContact {
            element,
            input,
            barrier,
            interface,
        })
    }
}

fn end_plan(word: EndWord) -> EndPlan {
    match word {
        EndWord::SpinSink => EndPlan::SpinSink,
        EndWord::FedInPlane => EndPlan::FedInPlane,
        // A semi-infinite end is replaced by its medium when the outermost layer is laid out.
        EndWord::Reflecting | EndWord::SemiInfinite => EndPlan::Reflecting,
    }
}

fn between(left: &Part, right: &Part) -> String {
    let path = |p: &Part| layer_spec(p).map_or(String::new(), |l| l.path.clone());
    let (a, b) = (path(left), path(right));
    if a.starts_with("injector") {
        "injector.interface".to_owned()
    } else if b.starts_with("detector") {
        "detector.interface".to_owned()
    } else {
        let number = |p: &str| p.split('.').nth(1).unwrap_or("?").to_owned();
        format!("stack.{}-{}.interface", number(&a), number(&b))
    }
}

fn interface_name(spec: Option<&ContactSpec>, path: String) -> Named {
    let label = match spec {
        Some(s) if s.is_barrier => s
            .material
            .as_ref()
            .map_or("barrier".to_owned(), |m| m.value.clone()),
        _ => "interface".to_owned(),
    };
    Named {
        path,
        label,
        material: None,
        semiconductor: false,
    }
}
