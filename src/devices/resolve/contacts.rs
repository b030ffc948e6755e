//! Contacts: barriers and direct interfaces, stated or on record.

use crate::designs::design::Part;
use crate::designs::layers::{ContactSpec, Side};
use crate::documents::fault::Place;
use crate::materials::choose::{self, ContactNumber, ContactValue, Wanted};
use crate::materials::record::Class;
use crate::models::ladder::Magnetization;
use crate::quantities::dimensions::Measured;
use crate::quantities::kind::{self};
use crate::quantities::meanings::InterfaceAsymmetry;

use crate::devices::inputs::Slot;
use crate::devices::provenance::Provenance;
use crate::devices::vertical::{InterfacePlan, InterfaceResistancePlan, Named};

use super::{Work, layer_spec, magnetization, origin_of};

impl Work<'_> {
    pub(super) fn contact_value<Q: Measured>(
        &mut self,
        path: &str,
        number: ContactNumber,
        value: ContactValue,
    ) -> Slot<Q> {
        let ContactValue {
            reading, chosen, ..
        } = value;
        let provenance = Provenance {
            origin: origin_of(&chosen.record.common, chosen.decided, chosen.among),
            marks: chosen.marks,
        };
        self.add(
            format!("{path}.{}", number.property()),
            number.kind(),
            reading,
            provenance,
        )
    }

    /// The interface between two neighbours. `spec` is none where the design states none.
    pub(super) fn interface(
        &mut self,
        spec: Option<&ContactSpec>,
        path: &str,
        place: &Place,
        neighbours: (&Part, &Named, &Part, &Named),
    ) -> Option<InterfacePlan> {
        let (left, left_name, right, right_name) = neighbours;
        let is_f = |p: &Part| matches!(p, Part::Ferromagnet(_));
        let ferromagnet = match (is_f(left), is_f(right), spec.and_then(|s| s.flips_with)) {
            (true, false, _) | (true, true, Some(Side::Left)) => {
                Some((left, left_name, right_name))
            }
            (false, true, _) | (true, true, Some(Side::Right)) => {
                Some((right, right_name, left_name))
            }
            _ => None,
        };
        let magnetization = ferromagnet
            .and_then(|(p, _, _)| layer_spec(p))
            .map_or(Magnetization::Fixed, |l| magnetization(l.magnetization));
        let both = ferromagnet.and_then(|(_, f, n)| {
            Some((f.material.clone()?, n.material.clone()?, n.semiconductor))
        });
        // A contact record belongs to a channel of a type and doping: those of the normal neighbour.
        let normal = [left, right]
            .into_iter()
            .find(|p| matches!(p, Part::Normal(_)));
        let wanted = self.wanted(normal.and_then(layer_spec));
        let mut plan = InterfacePlan {
            resistance: InterfaceResistancePlan::Zero,
            asymmetry: None,
            memory_loss: None,
            magnetization,
        };
        let Some(spec) = spec else {
            // Nothing stated. Between metals the library may know the interface; on a semiconductor a bare
            // contact has no resistance of its own in this model, which a finding says.
            if let Some((f, n, false)) = &both {
                self.known_direct(path, f, n, &wanted, &mut plan, (true, true));
            }
            return Some(plan);
        };
        if let Some(name) = &spec.material {
            self.material(name, path, &[Class::Barrier])?;
        }
        let note = spec.note.as_ref();
        if let Some(ra) = &spec.resistance_area {
            let name = format!("{path}.resistance_area");
            plan.resistance = InterfaceResistancePlan::ResistanceArea(self.given(
                name,
                &kind::RESISTANCE_AREA,
                ra,
                note,
                false,
            ));
        } else if let Some(ar) = &spec.interface_spin_resistance {
            let name = format!("{path}.interface_spin_resistance");
            plan.resistance = InterfaceResistancePlan::SpinResistance(self.given(
                name,
                &kind::INTERFACE_SPIN_RESISTANCE,
                ar,
                note,
                false,
            ));
        } else if let Some((f, n, _)) = &both {
            let missing = (
                spec.interface_asymmetry.is_none(),
                spec.spin_memory_loss.is_none(),
            );
            self.known_direct(path, f, n, &wanted, &mut plan, missing);
        }
        if matches!(plan.resistance, InterfaceResistancePlan::Zero) {
            self.not_in_library(
                place,
                path,
                "interface_spin_resistance",
                "resistance of this interface".to_owned(),
                Vec::new(),
                "0.5 fΩ m²",
            );
            return None;
        }
        if let Some(gamma) = &spec.interface_asymmetry {
            let name = format!("{path}.interface_asymmetry");
            plan.asymmetry = Some(self.given(name, &kind::INTERFACE_ASYMMETRY, gamma, note, false));
        } else if plan.asymmetry.is_none() && ferromagnet.is_some() {
            plan.asymmetry = Some(self.asymmetry_of(
                spec,
                path,
                ferromagnet.map(|(_, f, n)| (f, n)),
                &wanted,
            )?);
        }
        if let Some(delta) = &spec.spin_memory_loss {
            let name = format!("{path}.spin_memory_loss");
            plan.memory_loss = Some(self.given(name, &kind::SPIN_MEMORY_LOSS, delta, note, false));
        }
        Some(plan)
    }

    /// AR* of a direct contact between library metals, and γ and δ where asked for, as far as records exist.
    pub(super) fn known_direct(
        &mut self,
        path: &str,
        f: &str,
        n: &str,
        wanted: &Wanted,
        plan: &mut InterfacePlan,
        (asymmetry_wanted, loss_wanted): (bool, bool),
    ) {
        let find =
            |number| choose::contact_number(self.library, f, None, n, number, wanted, self.faults);
        let resistance = find(ContactNumber::SpinResistance);
        let asymmetry = find(ContactNumber::Asymmetry);
        let loss = find(ContactNumber::MemoryLoss);
        // Nothing stated: only a whole contact is taken. Stated in part: the resistance alone is of use.
        let Some(resistance) = resistance.filter(|_| asymmetry.is_some() || !asymmetry_wanted)
        else {
            return;
        };
        plan.resistance = InterfaceResistancePlan::SpinResistance(self.contact_value(
            path,
            ContactNumber::SpinResistance,
            resistance,
        ));
        if let Some(asymmetry) = asymmetry.filter(|_| asymmetry_wanted) {
            plan.asymmetry = Some(self.contact_value(path, ContactNumber::Asymmetry, asymmetry));
        }
        plan.memory_loss = loss
            .filter(|_| loss_wanted)
            .map(|loss| self.contact_value(path, ContactNumber::MemoryLoss, loss));
    }

    pub(super) fn asymmetry_of(
        &mut self,
        spec: &ContactSpec,
        path: &str,
        sides: Option<(&Named, &Named)>,
        wanted: &Wanted,
    ) -> Option<Slot<InterfaceAsymmetry>> {
        let barrier = match &spec.material {
            Some(name) => Some(self.material(name, path, &[Class::Barrier])?.id.clone()),
            None => None,
        };
        let found = sides.and_then(|(f, n)| {
            let (f, n) = (f.material.as_deref()?, n.material.as_deref()?);
            if spec.is_barrier && barrier.is_none() {
                return None;
            }
            choose::tunnel_asymmetry(self.library, f, barrier.as_deref(), n, wanted, self.faults)
        });
        if let Some(value) = found {
            return Some(self.contact_value(path, ContactNumber::Asymmetry, value));
        }
        let label = |n: Option<&Named>| n.map_or("?".to_owned(), |n| n.label.clone());
        let triple = [
            label(sides.map(|s| s.0)),
            barrier.unwrap_or_else(|| {
                if spec.is_barrier {
                    "barrier".into()
                } else {
                    "direct".into()
                }
            }),
            label(sides.map(|s| s.1)),
        ]
        .join(" | ");
        let exists = sides
            .and_then(|(f, _)| f.material.as_deref())
            .map(|f| {
                self.library
                    .interfaces_of(f)
                    .into_iter()
                    .map(|(id, _, _)| id)
                    .collect()
            })
            .unwrap_or_default();
        self.not_in_library(
            &spec.place,
            path,
            "interface_asymmetry",
            format!("interface asymmetry γ of {triple}, nor a tunnel polarization to borrow"),
            exists,
            "0.3 ± 0.1",
        );
        None
    }
}
