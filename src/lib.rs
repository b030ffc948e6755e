//! How much spin polarization crosses from a ferromagnet into a semiconductor, why, and what would fix it.
//!
//! A device scientist has a candidate stack: a ferromagnet, perhaps a barrier, a channel, perhaps a second
//! contact. Growing it costs weeks. This crate answers, before growth, from published values with their
//! sources:
//!
//! - what current spin polarization will be injected, with which spin accumulation;
//! - why it is that small: what the contact offers and what the channel takes;
//! - which resistance-area products meet the goal, and where the design stands;
//! - what bulk polarization would be needed without a barrier;
//! - where every number comes from, and which of them are recalled, borrowed or out of range.
//!
//! # Map
//! A design file flows from left to right; a room imports only from rooms before it.
//!
//! | room | holds |
//! |---|---|
//! | [`numerics`] | bare mathematics |
//! | [`quantities`] | units in types, kinds with ranges, reading and printing |
//! | [`documents`] | TOML with places, overlays, faults as facts |
//! | [`materials`] | records, the library, how a record is chosen |
//! | [`models`] | physics as pure functions: the spin ladder |
//! | [`designs`] | what the user wrote, checked |
//! | [`devices`] | a design joined with records: input table and evaluator |
//! | [`studies`] | questions asked of a device |
//! | [`presentation`] | answers as text, tables, JSON, CSV |
//! | [`cli`] | the command line |
//!
//! # Not here
//! Lateral devices, precession, drift, ballistic channels, bias dependence and Schottky contacts: a
//! design that asks for one of them is refused, never answered with another formula.
//!
//! # Example
//! ```
//! use injectance::models::ladder::{Element, End, Interface, Layer, Magnetization, Stack, State};
//! use injectance::quantities::dimensions::Measured;
//! use injectance::quantities::kind;
//! use injectance::quantities::meanings::{
//!     BulkAsymmetry, InterfaceAsymmetry, InterfaceSpinResistance, SpinMemoryLoss, Thickness,
//! };
//! use injectance::quantities::text::read;
//! use injectance::quantities::unit::Context;
//!
//! # fn main() -> Result<(), Box<dyn std::error::Error>> {
//! let quantity = |text: &str, kind| read(text, kind, &Context::default()).map_err(|f| f.message());
//! let thick = Thickness::from_si(f64::INFINITY);
//! let ferromagnet = Layer {
//!     resistivity: quantity("59.13 nΩ m", &kind::RESISTIVITY)?.value(),
//!     asymmetry: BulkAsymmetry::from_si(0.46),
//!     length: quantity("60 nm", &kind::SPIN_DIFFUSION_LENGTH)?.value(),
//!     thickness: thick,
//!     magnetization: Magnetization::Fixed,
//! };
//! let channel = Layer {
//!     resistivity: quantity("2 mΩ m", &kind::RESISTIVITY)?.value(),
//!     asymmetry: BulkAsymmetry::from_si(0.0),
//!     length: quantity("2 µm", &kind::SPIN_DIFFUSION_LENGTH)?.value(),
//!     thickness: thick,
//!     magnetization: Magnetization::Fixed,
//! };
//! let barrier = Interface {
//!     spin_resistance: InterfaceSpinResistance::from_si(4e-9), // equal to r_N = ρλ of the channel
//!     asymmetry: InterfaceAsymmetry::from_si(0.5),
//!     memory_loss: SpinMemoryLoss::from_si(0.0),
//!     magnetization: Magnetization::Fixed,
//! };
//! let stack = Stack::new(
//!     End::SemiInfinite(ferromagnet),
//!     &[Element::Interface(barrier)],
//!     End::SemiInfinite(channel),
//! )
//! .map_err(|fault| format!("{fault:?}"))?;
//! let p = stack.solve(State::Parallel).faces[1].polarization;
//! // Half of γ: a barrier as resistive as the channel's spin resistance shares the drop evenly.
//! assert!((p.si() - 0.25).abs() < 1e-6);
//! # Ok(())
//! # }
//! ```

#![forbid(unsafe_code)]

pub mod cli;
pub mod designs;
pub mod devices;
pub mod documents;
pub mod materials;
pub mod models;
pub mod numerics;
pub mod presentation;
pub mod quantities;
pub mod studies;
