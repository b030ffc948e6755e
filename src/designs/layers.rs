//! Layers and contacts of a design, as written.

use crate::documents::fault::{Fault, Place, Wrong, nearest};
use crate::documents::reader::{Faults, Placed, Reader};
use crate::documents::tree::Node;
use crate::materials::library::{Library, Listed};
use crate::materials::record::Class;
use crate::quantities::kind;
use crate::quantities::text::Reading;
use crate::quantities::unit::Context;

/// What a side of the stack ends in.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum EndWord {
    /// Many spin diffusion lengths thick.
    SemiInfinite,
    /// Spins relax at once.
    SpinSink,
    /// No spin current passes.
    Reflecting,
    /// A strip that carries the current sideways.
    FedInPlane,
}

impl EndWord {
    /// Words and meanings.
    pub const WORDS: &'static [(&'static str, Self)] = &[
        ("semi-infinite", Self::SemiInfinite),
        ("spin sink", Self::SpinSink),
        ("reflecting", Self::Reflecting),
        ("fed in plane", Self::FedInPlane),
    ];

    /// The word.
    #[must_use]
    pub fn word(self) -> &'static str {
        Self::WORDS
            .iter()
            .find(|(_, e)| *e == self)
            .map_or("", |(w, _)| w)
    }
}

/// How a ferromagnet stands.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum MagnetizationWord {
    /// Along the reference in both states.
    Fixed,
    /// Against it in both states.
    FixedAntiparallel,
    /// Turns between the states.
    Free,
}

const MAGNETIZATIONS: &[(&str, MagnetizationWord)] = &[
    ("fixed", MagnetizationWord::Fixed),
    ("fixed antiparallel", MagnetizationWord::FixedAntiparallel),
    ("free", MagnetizationWord::Free),
];

/// Which neighbour an interface between two ferromagnets flips with.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Side {
    /// The one to its left.
    Left,
    /// The one to its right.
    Right,
}

/// A ferromagnetic or normal layer as written.
#[derive(Clone, PartialEq, Debug)]
pub struct LayerSpec {
    /// Path in the design.
    pub path: String,
    /// Where it stands.
    pub place: Place,
    /// Library material, by any of its names.
    pub material: Option<Placed<String>>,
    /// ρ.
    pub resistivity: Option<Placed<Reading>>,
    /// σ, in place of ρ.
    pub conductivity: Option<Placed<Reading>>,
    /// β; ferromagnets only.
    pub bulk_asymmetry: Option<Placed<Reading>>,
    /// λ.
    pub spin_diffusion_length: Option<Placed<Reading>>,
    /// t.
    pub thickness: Option<Placed<Reading>>,
    /// Doping, for the choice of records.
    pub doping: Option<Placed<Reading>>,
    /// Dopant.
    pub dopant: Option<String>,
    /// `n` or `p`.
    pub carrier_type: Option<String>,
    /// End on the outer side.
    pub end: Option<Placed<EndWord>>,
    /// Magnetization.
    pub magnetization: Option<MagnetizationWord>,
    /// Marked as the channel.
    pub is_channel: bool,
    /// Remark on overridden properties.
    pub note: Option<String>,
}

/// A barrier or a direct interface as written.
#[derive(Clone, PartialEq, Debug)]
pub struct ContactSpec {
    /// Path in the design.
    pub path: String,
    /// Where it stands.
    pub place: Place,
    /// Whether it is a barrier (else a direct interface).
    pub is_barrier: bool,
    /// Barrier material.
    pub material: Option<Placed<String>>,
    /// RA, both channels in parallel.
    pub resistance_area: Option<Placed<Reading>>,
    /// AR*, in place of RA.
    pub interface_spin_resistance: Option<Placed<Reading>>,
    /// γ.
    pub interface_asymmetry: Option<Placed<Reading>>,
    /// δ.
    pub spin_memory_loss: Option<Placed<Reading>>,
    /// Barrier thickness.
    pub thickness: Option<Placed<Reading>>,
    /// Which ferromagnet it flips with, where there are two.
    pub flips_with: Option<Side>,
    /// Remark.
    pub note: Option<String>,
}

/// Role of a layer, which decides the keys it takes.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Role {
    /// Ferromagnet of a contact: may state its own end.
    ContactFerromagnet,
    /// The channel of the short form.
    Channel,
    /// Ferromagnet in a stack.
    StackFerromagnet,
    /// Normal layer in a stack.
    StackNormal,
}

fn overriding(place: &Place) -> bool {
    // What comes from the command line carries its reason with it; a file has to say why.
    !place.source.name.starts_with("--")
}

/// The id of the library material that a name means, of one of the classes that may stand there. What is
/// wrong with the name is reported.
pub fn known_material(
    library: &Library,
    name: &Placed<String>,
    path: &str,
    allowed: &[Class],
    faults: &Faults,
) -> Option<String> {
    let listed = library.listed();
    let fits = |l: &&Listed| allowed.iter().any(|c| c.word() == l.class);
    let wrong = match library.id_of(&name.value) {
        Some(id) => {
            let found = listed.iter().find(|l| l.id == id)?;
            if fits(&found) {
                return Some(id);
            }
            let wanted: Vec<&str> = allowed.iter().map(|c| c.word()).collect();
            Wrong::Conflict {
                reason: format!("{id} is a {}, not a {}", found.class, wanted.join(" or ")),
                help: Some(format!("this place takes a {}", wanted.join(" or a "))),
            }
        }
        None => {
            let words: Vec<&str> = listed
                .iter()
                .filter(fits)
                .flat_map(|l| {
                    std::iter::once(l.id.as_str()).chain(l.aliases.iter().map(String::as_str))
                })
                .collect();
            Wrong::UnknownWord {
                what: "material",
                found: name.value.clone(),
                nearest: nearest(&name.value, words),
                allowed: listed.iter().filter(fits).map(|l| l.id.clone()).collect(),
            }
        }
    };
    faults.push(Fault {
        place: Some(name.place.clone()),
        field: format!("{path}.material"),
        wrong,
    });
    None
}

/// Classes of material that a layer may be of.
#[must_use]
pub fn classes_of(role: Role) -> &'static [Class] {
    match role {
        Role::ContactFerromagnet | Role::StackFerromagnet => &[Class::Ferromagnet],
        Role::Channel | Role::StackNormal => &[Class::Semiconductor, Class::Metal],
    }
}

/// Reads a layer.
pub fn read_layer(
    node: &Node,
    path: &str,
    role: Role,
    library: &Library,
    faults: &Faults,
) -> LayerSpec {
    let r = Reader::new(node, path, faults);
    let plain = Context::default();
    let ferromagnet = matches!(role, Role::ContactFerromagnet | Role::StackFerromagnet);
    let material = r.text("material");
    if let Some(name) = &material {
        known_material(library, name, path, classes_of(role), faults);
    }
    let resistivity = r.quantity("resistivity", &kind::RESISTIVITY, &plain);
    let conductivity = r.quantity("conductivity", &kind::CONDUCTIVITY, &plain);
    let bulk_asymmetry = if ferromagnet {
        r.quantity("bulk_asymmetry", &kind::BULK_ASYMMETRY, &plain)
    } else {
        None
    };
    let spin_diffusion_length = r.quantity(
        "spin_diffusion_length",
        &kind::SPIN_DIFFUSION_LENGTH,
        &plain,
    );
    let thickness = r.quantity("thickness", &kind::THICKNESS, &plain);
    let (mut doping, mut dopant, mut carrier_type) = (None, None, None);
    if !ferromagnet {
        doping = r.exact_quantity("doping", &kind::DOPING);
        dopant = r.text("dopant").map(|t| t.value);
        carrier_type = r
            .word("type", "carrier type", &[("n", "n"), ("p", "p")])
            .map(|w| w.value.to_owned());
    }
    let end = if matches!(role, Role::ContactFerromagnet | Role::Channel) {
        r.word("end", "end", EndWord::WORDS)
    } else {
        None
    };
    let magnetization = if role == Role::StackFerromagnet {
        r.word("magnetization", "magnetization", MAGNETIZATIONS)
            .map(|w| w.value)
    } else {
        None
    };
    let is_channel = role == Role::StackNormal && r.flag("channel").unwrap_or(false);
    let note = r.text("note").map(|t| t.value);
    r.finish();
    if r.has("resistivity") && r.has("conductivity") {
        r.fault(
            "conductivity",
            Wrong::Conflict {
                reason: "resistivity and conductivity are both given".to_owned(),
                help: Some("keep one of them".to_owned()),
            },
        );
    }
    if material.is_some() && note.is_none() {
        for (key, given) in [
            ("resistivity", &resistivity),
            ("conductivity", &conductivity),
            ("bulk_asymmetry", &bulk_asymmetry),
            ("spin_diffusion_length", &spin_diffusion_length),
        ] {
            if given.as_ref().is_some_and(|g| overriding(&g.place)) {
                r.fault(
                    key,
                    Wrong::Missing {
                        key: "note".to_owned(),
                        help: format!("`{key}` beside `material` overrides the library: add `note = \"…\"` that says where the number comes from"),
                    },
                );
            }
        }
    }
    let (has_beta, has_lambda) = (r.has("bulk_asymmetry"), r.has("spin_diffusion_length"));
    if material.is_some() && ferromagnet && has_beta != has_lambda {
        let (given, other) = if has_beta {
            ("bulk_asymmetry", "spin_diffusion_length")
        } else {
            ("spin_diffusion_length", "bulk_asymmetry")
        };
        r.fault(
            given,
            Wrong::Conflict {
                reason: format!("`{given}` is overridden without `{other}`"),
                help: Some(
                    "β and λ of a ferromagnet are a pair from one technique: give both, or neither"
                        .to_owned(),
                ),
            },
        );
    }
    LayerSpec {
        path: path.to_owned(),
        place: r.place().clone(),
        material,
        resistivity,
        conductivity,
        bulk_asymmetry,
        spin_diffusion_length,
        thickness,
        doping,
        dopant,
        carrier_type,
        end,
        magnetization,
        is_channel,
        note,
    }
}

/// Height of a monolayer of a barrier material, for thicknesses in ML.
fn monolayer(library: &Library, material: Option<&Placed<String>>, faults: &Faults) -> Context {
    let height = material
        .and_then(|m| library.id_of(&m.value))
        .and_then(|id| library.material(&id, faults))
        .and_then(|m| {
            m.values
                .iter()
                .find(|v| v.property.name == "monolayer")
                .map(|v| v.reading.si)
        });
    Context { monolayer: height }
}

/// Reads a barrier or a direct interface.
pub fn read_contact(
    node: &Node,
    path: &str,
    is_barrier: bool,
    in_stack: bool,
    library: &Library,
    faults: &Faults,
) -> ContactSpec {
    let r = Reader::new(node, path, faults);
    let plain = Context::default();
    let material = if is_barrier { r.text("material") } else { None };
    if let Some(name) = &material {
        known_material(library, name, path, &[Class::Barrier], faults);
    }
    let resistance_area = r.quantity("resistance_area", &kind::RESISTANCE_AREA, &plain);
    let interface_spin_resistance = r.quantity(
        "interface_spin_resistance",
        &kind::INTERFACE_SPIN_RESISTANCE,
        &plain,
    );
    let interface_asymmetry = r.quantity("interface_asymmetry", &kind::INTERFACE_ASYMMETRY, &plain);
    let spin_memory_loss = r.quantity("spin_memory_loss", &kind::SPIN_MEMORY_LOSS, &plain);
    let thickness = if is_barrier {
        let context = monolayer(library, material.as_ref(), faults);
        r.quantity("thickness", &kind::BARRIER_THICKNESS, &context)
    } else {
        None
    };
    let flips_with = if in_stack {
        r.word(
            "flips_with",
            "side",
            &[("left", Side::Left), ("right", Side::Right)],
        )
        .map(|w| w.value)
    } else {
        None
    };
    let note = r.text("note").map(|t| t.value);
    r.finish();
    if r.has("resistance_area") && r.has("interface_spin_resistance") {
        r.fault(
            "interface_spin_resistance",
            Wrong::Conflict {
                reason: "resistance_area and interface_spin_resistance are both given".to_owned(),
                help: Some("RA = r_b*(1 − γ²): keep the one that you know".to_owned()),
            },
        );
    }
    if is_barrier && !r.has("resistance_area") && !r.has("interface_spin_resistance") {
        r.missing(
            "resistance_area",
            "a barrier states its resistance-area product, for example `resistance_area = \"8 kΩ µm²\"`",
        );
    }
    let none = |p: &Option<Placed<Reading>>| p.as_ref().is_some_and(|p| p.value.si <= 0.0);
    if spin_memory_loss.as_ref().is_some_and(|d| d.value.si > 0.0)
        && (none(&resistance_area) || none(&interface_spin_resistance))
    {
        r.fault(
            "spin_memory_loss",
            Wrong::Conflict {
                reason: "spin-memory loss needs an interface resistance above zero".to_owned(),
                help: Some("δ is defined by a layer that stands in for the interface and carries its resistance; with none it would be a perfect spin sink".to_owned()),
            },
        );
    }
    ContactSpec {
        path: path.to_owned(),
        place: r.place().clone(),
        is_barrier,
        material,
        resistance_area,
        interface_spin_resistance,
        interface_asymmetry,
        spin_memory_loss,
        thickness,
        flips_with,
        note,
    }
}
