//! Choosing a record. The rule that decided, and every mark the choice carries, are part of the answer.
//!
//! Order in which records are ranked: doping within a factor 2 of the design's (else the nearest);
//! temperature within ±10 % (else the nearest, marked); a record of the user before a shipped one; a
//! record with a value before one that is only a bound; same dopant; status; how it was obtained; the
//! remaining distances; the order in the file. Superseded records are never chosen. Nothing is averaged.

use std::cmp::Ordering;

use crate::documents::reader::Faults;
use crate::quantities::dimensions::Dimension;
use crate::quantities::kind::{self, Kind};
use crate::quantities::spread::Spread;
use crate::quantities::text::{Reading, read};
use crate::quantities::unit::Context;

use super::library::Library;
use super::record::{
    Common, ContactKind, ContactRecord, Material, Obtained, PairRecord, Status, ValueRecord,
};

/// Fraction of a record's temperature by which the design's may differ without a mark.
pub const TEMPERATURE_REACH: f64 = 0.10;
/// Factor by which a record's doping may differ from the design's without a mark.
pub const DOPING_REACH: f64 = 2.0;
/// Factor beyond which a record of another doping is no answer at all.
pub const DOPING_LIMIT: f64 = 10.0;

/// What decided between the record taken and the next best.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Decided {
    /// There was only one.
    OnlyRecord,
    /// The nearer doping.
    Doping,
    /// The nearer temperature.
    Temperature,
    /// A record of the user goes before a shipped one.
    OwnRecord,
    /// A value goes before a bound.
    ValueBeforeBound,
    /// The same dopant.
    Dopant,
    /// Its standing in the library.
    Status,
    /// How it was obtained.
    Obtained,
    /// The order in the file: nothing else told them apart.
    Order,
}

/// A mark that travels with a number to the answer.
#[derive(Clone, PartialEq, Debug)]
pub enum Mark {
    /// The number was recalled, not read.
    Recalled,
    /// The number is derived from others.
    Derived,
    /// The number is an estimate.
    Estimated,
    /// A fact of the trade without a source.
    CommonPractice,
    /// The record's temperature differs by more than ±10 %.
    OtherTemperature {
        /// Temperature of the record, K.
        record: f64,
        /// Temperature of the design, K.
        wanted: f64,
    },
    /// The record's temperature is not stated beside the value.
    TemperatureNotStated,
    /// The record's doping differs by more than a factor 2.
    OtherDoping {
        /// Doping of the record, m⁻³.
        record: f64,
        /// Doping of the design, m⁻³.
        wanted: f64,
    },
    /// The record is of another dopant.
    OtherDopant {
        /// Dopant of the record.
        record: String,
        /// Dopant of the design.
        wanted: String,
    },
    /// No uncertainty is stated; a prior of the property class stands in.
    PriorSpread {
        /// The prior, as text.
        prior: String,
    },
    /// No uncertainty is stated and there is no prior: it cannot be spread.
    NoSpread,
    /// Only a bound is known; the bound itself is used.
    BoundOnly,
    /// The tunnel polarization of the same ferromagnet and barrier stands in for γ of this contact.
    Borrowed {
        /// Tunnel polarization of the record.
        polarization: f64,
    },
    /// λ of a pair is scaled with the user's resistivity, its product ρλ held.
    LengthScaled,
    /// λ of a pair stands although the resistivity is the user's: the pair's own is not from the same paper.
    LengthNotScaled,
    /// β comes from one technique and ρλ from another; at least 30 % is carried on the product.
    MixedTechniques,
    /// The resistivity of the pair is not from the same paper.
    ResistivityAssumed,
    /// The record disagrees with others.
    Disagrees {
        /// Their ids.
        with: Vec<String>,
    },
    /// β is within its own uncertainty of ±1.
    NearUnity,
}

/// A record taken, and why.
#[derive(Clone, Debug)]
pub struct Chosen<T> {
    /// The record.
    pub record: T,
    /// What decided.
    pub decided: Decided,
    /// Number of records that were looked at.
    pub among: usize,
    /// Marks.
    pub marks: Vec<Mark>,
}

/// What a design wants a record for.
#[derive(Clone, PartialEq, Debug)]
pub struct Wanted {
    /// Temperature, K.
    pub temperature: f64,
    /// Doping, m⁻³.
    pub doping: Option<f64>,
    /// `n` or `p`.
    pub carrier_type: Option<String>,
    /// Dopant.
    pub dopant: Option<String>,
}

/// Why no record was chosen.
#[derive(Clone, PartialEq, Debug)]
pub enum NotChosen {
    /// The library has none.
    None,
    /// Records exist for several dopings and the design states none. Their dopings, m⁻³.
    WhichDoping(Vec<f64>),
}

/// Whether a record of temperature `t` applies at `wanted`: within ±10 % of its own temperature.
fn applies_at(t: f64, wanted: f64) -> bool {
    (t - wanted).abs() <= TEMPERATURE_REACH * t * (1.0 + 1e-12)
}

fn beyond(x: f64, reach: f64) -> f64 {
    if x <= reach { 0.0 } else { x }
}

struct Rank {
    doping: f64,
    temperature: f64,
    own: bool,
    bound: bool,
    dopant: bool,
    status: Status,
    obtained: usize,
    fine_doping: f64,
    fine_temperature: f64,
    order: usize,
}

fn rank(common: &Common, bound: bool, wanted: &Wanted, order: usize) -> Rank {
    // Distances of temperature are ratios: 10 K is nearer to 20 K than 300 K is.
    let fine_temperature = common
        .temperature
        .map_or(0.0, |t| (t / wanted.temperature).ln().abs());
    let in_reach = common
        .temperature
        .is_none_or(|t| applies_at(t, wanted.temperature));
    let fine_doping = match (&common.conditions.doping, wanted.doping) {
        (Some(r), Some(w)) => (r.si / w).ln().abs(),
        (None, Some(_)) => 20.0,
        _ => 0.0,
    };
    let dopant = match (&common.conditions.dopant, &wanted.dopant) {
        (Some(a), Some(b)) => !a.eq_ignore_ascii_case(b),
        (None, Some(_)) => true,
        _ => false,
    };
    Rank {
        doping: beyond(fine_doping, DOPING_REACH.ln() * (1.0 + 1e-12)),
        temperature: if in_reach { 0.0 } else { fine_temperature },
        own: !common.from_user,
        bound,
        dopant,
        status: common.status,
        obtained: common.obtained.rank(),
        fine_doping,
        fine_temperature,
        order,
    }
}

fn compare(a: &Rank, b: &Rank) -> (Ordering, Decided) {
    let steps = [
        (a.doping.total_cmp(&b.doping), Decided::Doping),
        (
            a.temperature.total_cmp(&b.temperature),
            Decided::Temperature,
        ),
        (a.own.cmp(&b.own), Decided::OwnRecord),
        (a.bound.cmp(&b.bound), Decided::ValueBeforeBound),
        (a.dopant.cmp(&b.dopant), Decided::Dopant),
        (a.status.cmp(&b.status), Decided::Status),
        (a.obtained.cmp(&b.obtained), Decided::Obtained),
        (a.fine_doping.total_cmp(&b.fine_doping), Decided::Doping),
        (
            a.fine_temperature.total_cmp(&b.fine_temperature),
            Decided::Temperature,
        ),
        (a.order.cmp(&b.order), Decided::Order),
    ];
    steps
        .into_iter()
        .find(|(o, _)| *o != Ordering::Equal)
        .unwrap_or((Ordering::Equal, Decided::Order))
}

fn marks_of(common: &Common, wanted: &Wanted) -> Vec<Mark> {
    let mut marks = Vec::new();
    match common.obtained {
        Obtained::Recalled => marks.push(Mark::Recalled),
        Obtained::Derived => marks.push(Mark::Derived),
        Obtained::Estimated => marks.push(Mark::Estimated),
        Obtained::CommonPractice => marks.push(Mark::CommonPractice),
        Obtained::Read | Obtained::MeasuredHere => {}
    }
    if let Some(t) = common.temperature {
        if !applies_at(t, wanted.temperature) {
            marks.push(Mark::OtherTemperature {
                record: t,
                wanted: wanted.temperature,
            });
        }
        if common.temperature_from != super::record::TemperatureFrom::Stated {
            marks.push(Mark::TemperatureNotStated);
        }
    }
    if let (Some(r), Some(w)) = (&common.conditions.doping, wanted.doping)
        && (r.si / w).ln().abs() > DOPING_REACH.ln() * (1.0 + 1e-12)
    {
        marks.push(Mark::OtherDoping {
            record: r.si,
            wanted: w,
        });
    }
    if let (Some(a), Some(b)) = (&common.conditions.dopant, &wanted.dopant)
        && !a.eq_ignore_ascii_case(b)
    {
        marks.push(Mark::OtherDopant {
            record: a.clone(),
            wanted: b.clone(),
        });
    }
    if !common.disagrees_with.is_empty() {
        marks.push(Mark::Disagrees {
            with: common.disagrees_with.clone(),
        });
    }
    marks
}

fn best<'a, T>(
    candidates: Vec<&'a T>,
    wanted: &Wanted,
    common: impl Fn(&T) -> &Common,
    bound: impl Fn(&T) -> bool,
) -> Option<Chosen<&'a T>> {
    let mut ranked: Vec<(Rank, &T)> = candidates
        .into_iter()
        .enumerate()
        .filter(|(_, r)| {
            let c = common(r);
            let kind = match (&c.conditions.carrier_type, &wanted.carrier_type) {
                (Some(a), Some(b)) => a == b,
                _ => true,
            };
            kind && c.status != Status::Superseded
        })
        .map(|(i, r)| (rank(common(r), bound(r), wanted, i), r))
        .collect();
    ranked.sort_by(|a, b| compare(&a.0, &b.0).0);
    let (first, record) = ranked.first()?;
    let decided = ranked
        .get(1)
        .map_or(Decided::OnlyRecord, |(second, _)| compare(first, second).1);
    let mut marks = marks_of(common(record), wanted);
    if bound(record) {
        marks.push(Mark::BoundOnly);
    }
    Some(Chosen {
        record,
        decided,
        among: ranked.len(),
        marks,
    })
}

/// The reading with the prior of its property class where its source states no spread.
#[must_use]
pub fn with_prior(
    library: &Library,
    property: &str,
    kind: &'static Kind,
    reading: &Reading,
) -> (Reading, Option<Mark>) {
    if !matches!(reading.spread, Spread::Unknown) {
        return (reading.clone(), None);
    }
    let spread = library.prior(property).and_then(|prior| {
        // A pure number is written bare, so that `± 0.1` means the same beside 0.5 and beside 50 %.
        let value = if kind.dimension == Dimension::NONE {
            reading.si.to_string()
        } else {
            reading.text.clone()
        };
        let text = format!("{value} {}", prior.spread);
        read(&text, kind, &Context::default())
            .ok()
            .map(|r| (r, prior.spread.clone()))
    });
    match spread {
        Some((r, prior)) => (r, Some(Mark::PriorSpread { prior })),
        None => (reading.clone(), Some(Mark::NoSpread)),
    }
}

/// Whether a choice is of a doping so far away that it is no answer.
#[must_use]
pub fn too_far_in_doping(marks: &[Mark]) -> bool {
    marks.iter().any(|m| {
        matches!(m, Mark::OtherDoping { record, wanted }
            if (record / wanted).ln().abs() > DOPING_LIMIT.ln() * (1.0 + 1e-12))
    })
}

fn is_bound(reading: &Reading) -> bool {
    matches!(reading.spread, Spread::Bound { .. })
}

/// Chooses a value record.
///
/// # Errors
/// [`NotChosen`]: none exists, or several dopings exist and the design states none.
pub fn value(
    material: &Material,
    property: &str,
    wanted: &Wanted,
) -> Result<Chosen<ValueRecord>, NotChosen> {
    let candidates: Vec<&ValueRecord> = material
        .values
        .iter()
        .filter(|v| v.property.name == property)
        .collect();
    if wanted.doping.is_none() {
        let mut dopings: Vec<f64> = candidates
            .iter()
            .filter(|v| v.common.status != Status::Superseded)
            .filter_map(|v| v.common.conditions.doping.as_ref().map(|d| d.si))
            .collect();
        dopings.sort_by(f64::total_cmp);
        dopings.dedup();
        if dopings.len() > 1 {
            return Err(NotChosen::WhichDoping(dopings));
        }
    }
    best(candidates, wanted, |v| &v.common, |v| is_bound(&v.reading))
        .map(|c| Chosen {
            record: c.record.clone(),
            decided: c.decided,
            among: c.among,
            marks: c.marks,
        })
        .ok_or(NotChosen::None)
}

/// Chooses a pair of a ferromagnet. A pair is one record: never put together from two, never
/// interpolated in temperature.
#[must_use]
pub fn pair(material: &Material, wanted: &Wanted) -> Option<Chosen<PairRecord>> {
    let candidates: Vec<&PairRecord> = material.pairs.iter().collect();
    let chosen = best(
        candidates,
        wanted,
        |p| &p.common,
        |p| is_bound(&p.bulk_asymmetry) || is_bound(&p.spin_diffusion_length),
    )?;
    let mut marks = chosen.marks;
    if chosen.record.resistivity_assumed {
        marks.push(Mark::ResistivityAssumed);
    }
    let beta = &chosen.record.bulk_asymmetry;
    if beta
        .spread
        .standard_deviation(beta.si)
        .is_some_and(|sd| beta.si.abs() + sd >= 1.0)
    {
        marks.push(Mark::NearUnity);
    }
    Some(Chosen {
        record: chosen.record.clone(),
        decided: chosen.decided,
        among: chosen.among,
        marks,
    })
}

/// A number of a contact record.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum ContactNumber {
    /// γ.
    Asymmetry,
    /// AR*.
    SpinResistance,
    /// δ.
    MemoryLoss,
}

impl ContactNumber {
    fn of(self, record: &ContactRecord) -> Option<&Reading> {
        match self {
            Self::Asymmetry => record.interface_asymmetry.as_ref(),
            Self::SpinResistance => record.interface_spin_resistance.as_ref(),
            Self::MemoryLoss => record.spin_memory_loss.as_ref(),
        }
    }

    /// Property class for priors.
    #[must_use]
    pub fn property(self) -> &'static str {
        match self {
            Self::Asymmetry => "interface_asymmetry",
            Self::SpinResistance => "interface_spin_resistance",
            Self::MemoryLoss => "spin_memory_loss",
        }
    }

    /// Kind of quantity.
    #[must_use]
    pub fn kind(self) -> &'static Kind {
        match self {
            Self::Asymmetry => &kind::INTERFACE_ASYMMETRY,
            Self::SpinResistance => &kind::INTERFACE_SPIN_RESISTANCE,
            Self::MemoryLoss => &kind::SPIN_MEMORY_LOSS,
        }
    }
}

/// A number of a contact, with the record it came from.
#[derive(Clone, Debug)]
pub struct ContactValue {
    /// The number, prior applied; a borrowed polarization already turned into its guide for γ.
    pub reading: Reading,
    /// The record.
    pub chosen: Chosen<ContactRecord>,
    /// Id of the interface it stands in.
    pub interface: String,
    /// Barrier of that interface.
    pub barrier: Option<String>,
}

fn contacts_of(
    library: &Library,
    faults: &Faults,
    ids: &[(String, Option<String>)],
    keep: impl Fn(&ContactRecord) -> bool,
) -> Vec<(ContactRecord, String, Option<String>)> {
    ids.iter()
        .filter_map(|(id, barrier)| library.interface(id, faults).map(|i| (i, id, barrier)))
        .flat_map(|(i, id, barrier)| {
            i.contacts
                .iter()
                .filter(|c| keep(c))
                .map(|c| (c.clone(), id.clone(), barrier.clone()))
                .collect::<Vec<_>>()
        })
        .collect()
}

fn best_contact(
    found: &[(ContactRecord, String, Option<String>)],
    wanted: &Wanted,
    number: impl Fn(&ContactRecord) -> Option<Reading>,
) -> Option<ContactValue> {
    let candidates: Vec<&(ContactRecord, String, Option<String>)> = found.iter().collect();
    let bound =
        |c: &(ContactRecord, String, Option<String>)| number(&c.0).is_some_and(|r| is_bound(&r));
    let chosen = best(candidates, wanted, |c| &c.0.common, bound)?;
    let (record, interface, barrier) = chosen.record.clone();
    Some(ContactValue {
        reading: number(&record)?,
        chosen: Chosen {
            record,
            decided: chosen.decided,
            among: chosen.among,
            marks: chosen.marks,
        },
        interface,
        barrier,
    })
}

/// A number of the exact contact (ferromagnet, barrier, channel) from device and multilayer fits.
#[must_use]
pub fn contact_number(
    library: &Library,
    ferromagnet: &str,
    barrier: Option<&str>,
    channel: &str,
    number: ContactNumber,
    wanted: &Wanted,
    faults: &Faults,
) -> Option<ContactValue> {
    let ids: Vec<(String, Option<String>)> = library
        .interfaces_of(ferromagnet)
        .into_iter()
        .filter(|(_, b, c)| b.as_deref() == barrier && c.as_deref() == Some(channel))
        .map(|(id, b, _)| (id, b))
        .collect();
    let found = contacts_of(library, faults, &ids, |c| {
        c.kind.is_interface_asymmetry() && number.of(c).is_some()
    });
    let mut value = best_contact(&found, wanted, |c| number.of(c).cloned())?;
    let (reading, mark) = with_prior(library, number.property(), number.kind(), &value.reading);
    value.reading = reading;
    value.chosen.marks.extend(mark);
    Some(value)
}

/// γ of a tunnel contact: the exact triple; else borrowed from the tunnel polarization of the same
/// ferromagnet and barrier, an upper guide, spread evenly from a quarter of it to it.
#[must_use]
pub fn tunnel_asymmetry(
    library: &Library,
    ferromagnet: &str,
    barrier: Option<&str>,
    channel: &str,
    wanted: &Wanted,
    faults: &Faults,
) -> Option<ContactValue> {
    let exact = contact_number(
        library,
        ferromagnet,
        barrier,
        channel,
        ContactNumber::Asymmetry,
        wanted,
        faults,
    );
    if exact.is_some() || barrier.is_none() {
        return exact;
    }
    let ids: Vec<(String, Option<String>)> = library
        .interfaces_of(ferromagnet)
        .into_iter()
        .filter(|(_, b, c)| b.as_deref() == barrier && c.is_none())
        .map(|(id, b, _)| (id, b))
        .collect();
    borrowed(library, &ids, wanted, faults)
}

/// γ that a barrier between this ferromagnet and this channel might have, for a design that has none yet:
/// the best contact record of any barrier on this channel, else borrowed from any barrier.
#[must_use]
pub fn likely_asymmetry(
    library: &Library,
    ferromagnet: &str,
    channel: &str,
    wanted: &Wanted,
    faults: &Faults,
) -> Option<ContactValue> {
    let all = library.interfaces_of(ferromagnet);
    let on_channel: Vec<(String, Option<String>)> = all
        .iter()
        .filter(|(_, b, c)| b.is_some() && c.as_deref() == Some(channel))
        .map(|(id, b, _)| (id.clone(), b.clone()))
        .collect();
    let number = ContactNumber::Asymmetry;
    let found = contacts_of(library, faults, &on_channel, |c| {
        c.kind.is_interface_asymmetry() && number.of(c).is_some()
    });
    if let Some(mut value) = best_contact(&found, wanted, |c| number.of(c).cloned()) {
        let (reading, mark) = with_prior(library, number.property(), number.kind(), &value.reading);
        value.reading = reading;
        value.chosen.marks.extend(mark);
        return Some(value);
    }
    let any: Vec<(String, Option<String>)> = all
        .into_iter()
        .filter(|(_, b, c)| b.is_some() && c.is_none())
        .map(|(id, b, _)| (id, b))
        .collect();
    borrowed(library, &any, wanted, faults)
}

fn borrowed(
    library: &Library,
    ids: &[(String, Option<String>)],
    wanted: &Wanted,
    faults: &Faults,
) -> Option<ContactValue> {
    let found = contacts_of(library, faults, ids, |c| {
        c.kind == ContactKind::TunnelPolarization && c.polarization.is_some()
    });
    let mut value = best_contact(&found, wanted, |c| c.polarization.clone())?;
    let p = value.reading.si;
    let (low, high) = (p.min(0.25 * p), p.max(0.25 * p));
    value.reading = Reading {
        si: 0.5 * (low + high),
        spread: Spread::Uniform { low, high },
        unit_text: String::new(),
        text: format!("{low} .. {high}"),
    };
    value.chosen.marks.push(Mark::Borrowed { polarization: p });
    Some(value)
}
