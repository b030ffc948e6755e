//! Why the polarization is what it is: what the contact offers and what the channel takes.

use crate::designs::goals::Comparison;
use crate::devices::vertical::{Blueprint, Position, Vertical};
use crate::models::ladder::{StackFault, State};
use crate::numerics::root::bracketed_root;
use crate::quantities::dimensions::{Measured, ResistanceTimesArea};
use crate::quantities::meanings::{
    BulkAsymmetry, InterfaceAsymmetry, InterfaceSpinResistance, ResistanceAreaProduct,
    SpinResistance,
};

use super::target::Wish;

/// The injecting contact against the channel, parallel state: p = source·(1/(contact + channel)).
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Mismatch {
    /// Spin impedance of everything on the contact's side, r_F + r_b* of a thick contact.
    pub contact: ResistanceTimesArea,
    /// Spin impedance of everything on the channel's side, r_N of a thick channel; infinite if closed.
    pub channel: ResistanceTimesArea,
    /// Spin source of the contact's side over its impedance: what it would inject without mismatch.
    pub offered: f64,
    /// What of it crosses: its part of the injected polarization.
    pub crossing: f64,
    /// What the far side (a second contact) adds to the injected polarization.
    pub from_far_side: f64,
    /// r_N = ρλ of the channel.
    pub r_channel: SpinResistance,
    /// r_F of the injecting ferromagnet.
    pub r_ferromagnet: SpinResistance,
    /// r_b* of the injecting interface.
    pub r_interface: InterfaceSpinResistance,
    /// γ of it.
    pub asymmetry: InterfaceAsymmetry,
    /// RA of it.
    pub resistance_area: ResistanceAreaProduct,
    /// What a measurement on this stack would read for the interface, r_b*(1 − γp).
    pub measured: ResistanceAreaProduct,
    /// t/λ of the channel where it has a thickness.
    pub reduced_length: Option<f64>,
    /// Time an electron stays between two contacts over its spin lifetime, (r_1 ∥ r_2) t/(r_N λ) with r the
    /// spin resistances of the two interfaces: it leaves through the less resistive one. Only where there
    /// are two contacts with resistance.
    ///
    /// Source: Fert, George, Jaffrès, Mattana, IEEE Trans. Electron Devices 54, 921 (2007) [abstract read];
    /// the factor is derived from the high-resistance limit of the two-contact formula.
    pub dwell: Option<f64>,
}

/// The mismatch of a device at a blueprint.
///
/// # Errors
/// [`StackFault`]; designs that were read without fault do not give one.
pub fn mismatch(device: &Vertical, blueprint: &Blueprint) -> Result<Option<Mismatch>, StackFault> {
    let stack = blueprint.stack()?;
    let face = device.injector_face();
    let sides = stack.sides(face, State::Parallel);
    let (contact, channel, source, far) = if device.injects_from_left {
        (
            sides.left_impedance,
            sides.right_impedance,
            sides.left_source,
            sides.right_source,
        )
    } else {
        (
            sides.right_impedance,
            sides.left_impedance,
            sides.right_source,
            sides.left_source,
        )
    };
    let (Some(n), Some(f)) = (
        blueprint.layer(device.channel),
        blueprint.layer(device.injector),
    ) else {
        return Ok(None);
    };
    let solution = stack.solve(State::Parallel);
    let p = solution.faces.get(face).map(|f| f.polarization);
    let interface = device.injector_contact.and_then(|i| blueprint.interface(i));
    let zero = InterfaceSpinResistance::from_si(0.0);
    let (r_interface, asymmetry) = interface
        .map_or((zero, InterfaceAsymmetry::from_si(0.0)), |x| {
            (x.spin_resistance, x.asymmetry)
        });
    let t = n.thickness.si();
    Ok(Some(Mismatch {
        contact: ResistanceTimesArea::from_si(contact),
        channel: ResistanceTimesArea::from_si(channel),
        offered: if contact > 0.0 { source / contact } else { 0.0 },
        crossing: if contact + channel > 0.0 {
            source / (contact + channel)
        } else {
            0.0
        },
        from_far_side: if contact + channel > 0.0 {
            far / (contact + channel)
        } else {
            0.0
        },
        r_channel: n.spin_resistance(),
        r_ferromagnet: f.spin_resistance(),
        r_interface,
        asymmetry,
        resistance_area: r_interface.resistance_area(asymmetry),
        measured: p.map_or(r_interface.resistance_area(asymmetry), |p| {
            r_interface.as_measured(asymmetry, p)
        }),
        reduced_length: t.is_finite().then(|| t / n.length.si()),
        dwell: dwell(device, blueprint, t / n.length.si(), n.spin_resistance()),
    }))
}

fn dwell(
    device: &Vertical,
    blueprint: &Blueprint,
    reduced_length: f64,
    r_channel: SpinResistance,
) -> Option<f64> {
    let [first, second] = device.channel_contacts.as_slice() else {
        return None;
    };
    let r = |i: usize| blueprint.interface(i).map(|x| x.spin_resistance.si());
    let (a, b) = (r(*first)?, r(*second)?);
    (reduced_length.is_finite() && a > 0.0 && b > 0.0)
        .then(|| a * b / (a + b) * reduced_length / r_channel.si())
}

/// The bulk asymmetry that would meet a demand without a barrier.
#[derive(Clone, Copy, PartialEq, Debug)]
pub enum HalfMetal {
    /// The demand sets no lower limit: there is nothing that a larger β would have to reach.
    NotAsked,
    /// 1 − |β| that is needed.
    Needed {
        /// 1 − |β|.
        short_of_one: f64,
    },
    /// β as it is suffices.
    Suffices,
    /// No β below 1 − 10⁻¹² meets it.
    OutOfReach,
    /// The root could not be found.
    NotFound,
}

/// Smallest 1 − |β| looked at.
const NEAREST_TO_ONE: f64 = 1e-12;

/// β that the ferromagnets at the channel would need without any interface resistance, ρ and λ held and
/// r_F = ρλ/(1 − β²) recomputed.
///
/// # Errors
/// [`StackFault`]; designs that were read without fault do not give one.
pub fn half_metal(
    device: &Vertical,
    blueprint: &Blueprint,
    wish: Wish,
    demand: Comparison,
) -> Result<HalfMetal, StackFault> {
    if matches!(demand, Comparison::AtMost(_)) {
        return Ok(HalfMetal::NotAsked);
    }
    let mut bare = blueprint.clone();
    for i in &device.channel_contacts {
        if let Some(interface) = bare.interface_mut(*i) {
            interface.spin_resistance = InterfaceSpinResistance::from_si(0.0);
        }
    }
    if demand.met(wish.of_blueprint(device, &bare)?) {
        return Ok(HalfMetal::Suffices);
    }
    let magnets: Vec<Position> = magnets_at_channel(device);
    let margin = |log_short: f64| -> f64 {
        let beta = 1.0 - 10.0_f64.powf(log_short);
        let mut moved = bare.clone();
        for at in &magnets {
            if let Some(layer) = moved.layer_mut(*at) {
                let sign = if layer.asymmetry.si() < 0.0 {
                    -1.0
                } else {
                    1.0
                };
                layer.asymmetry = BulkAsymmetry::from_si(sign * beta);
            }
        }
        wish.of_blueprint(device, &moved)
            .map_or(f64::NAN, |v| demand.margin(v))
    };
    let points = 120;
    let floor = NEAREST_TO_ONE.log10();
    let mut previous = (0.0, 0.0);
    for i in 0..=points {
        let x = floor * f64::from(i) / f64::from(points);
        let here = margin(x);
        if here >= 0.0 {
            // The first point, β = 0, can meet a goal `a .. b` by nothing but the other contact.
            let root = if i == 0 {
                Ok(x)
            } else {
                bracketed_root(margin, x, previous.0, 1e-12)
            };
            return Ok(root.map_or(HalfMetal::NotFound, |root| HalfMetal::Needed {
                short_of_one: 10.0_f64.powf(root),
            }));
        }
        previous = (x, here);
    }
    Ok(HalfMetal::OutOfReach)
}

fn magnets_at_channel(device: &Vertical) -> Vec<Position> {
    let mut all = vec![device.injector];
    for contact in &device.channel_contacts {
        for at in device.neighbours(*contact) {
            if device.is_ferromagnet(at) && !all.contains(&at) {
                all.push(at);
            }
        }
    }
    all
}
