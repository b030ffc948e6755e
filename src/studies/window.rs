//! The window: which resistance-area products meet a demand.
//!
//! The quantity is followed over the resistance-area product on a grid of 24 points a decade, sharpened
//! wherever it peaks short of the demand or passes through zero, and every edge is then found by a
//! bracketed root on the ladder. With several contacts at the channel all their products are scaled by
//! one factor; the window is told as the product of the reference contact.

use crate::devices::vertical::{Blueprint, Vertical};
use crate::designs::goals::Comparison;
use crate::models::ladder::StackFault;
use crate::numerics::root::{RootFault, bracketed_root, largest};
use crate::quantities::dimensions::Measured;
use crate::quantities::meanings::{InterfaceAsymmetry, InterfaceSpinResistance, ResistanceAreaProduct};

use super::target::{Demand, Wish};

/// Smallest and largest resistance-area product looked at, Ω m²: 10⁻⁸ Ω µm² to 10¹⁶ Ω µm².
const SMALLEST: f64 = 1e-20;
const LARGEST: f64 = 1e4;
/// A best value this near the largest product is the limit of an infinite one.
const FLAT: f64 = 1e-2;
const POINTS_A_DECADE: usize = 24;
/// Edges are found to this fraction of the product.
const EDGE_TOLERANCE: f64 = 1e-12;

/// An interval of resistance-area products; a missing edge is none.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Interval {
    /// Lower edge.
    pub low: Option<ResistanceAreaProduct>,
    /// Upper edge.
    pub high: Option<ResistanceAreaProduct>,
}

impl Interval {
    /// Whether a product lies inside.
    #[must_use]
    pub fn holds(&self, ra: ResistanceAreaProduct) -> bool {
        self.low.is_none_or(|l| ra.si() >= l.si()) && self.high.is_none_or(|h| ra.si() <= h.si())
    }
}

/// The most (or the best) a quantity reaches over the product.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Best {
    /// Value, signed, SI.
    pub value: f64,
    /// Where; none for the limit of an infinite product.
    pub at: Option<ResistanceAreaProduct>,
}

/// A window.
#[derive(Clone, PartialEq, Debug)]
pub struct Window {
    /// What it is about.
    pub wish: Wish,
    /// What has to be met; the fraction turned into a number.
    pub threshold: Comparison,
    /// Whether the threshold is a fraction of the most.
    pub fraction: Option<f64>,
    /// Intervals that meet it, in order. Empty: none does.
    pub intervals: Vec<Interval>,
    /// The best that can be had.
    pub best: Best,
    /// Product of this design at the reference contact.
    pub here: ResistanceAreaProduct,
    /// Element of the reference contact.
    pub contact: usize,
    /// Elements of the contacts that are scaled together.
    pub contacts: Vec<usize>,
    /// γ used at the reference contact.
    pub asymmetry: InterfaceAsymmetry,
    /// Whether that γ belongs to no contact of the design but to one it might have.
    pub asymmetry_is_likely: bool,
}

/// Why there is no window.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum NoWindow {
    /// There is no contact at the channel whose product could be varied.
    NoContact,
    /// γ is not known for a barrier that the design does not have.
    NoAsymmetry,
    /// A root could not be found.
    NotFound,
    /// The stack cannot be solved.
    Stack(StackFault),
}

impl From<StackFault> for NoWindow {
    fn from(fault: StackFault) -> Self {
        Self::Stack(fault)
    }
}

impl From<RootFault> for NoWindow {
    fn from(_: RootFault) -> Self {
        Self::NotFound
    }
}

/// Contacts to scale, and how.
struct Scaled<'a> {
    device: &'a Vertical,
    base: Blueprint,
    /// Element, factor on the reference product, γ.
    contacts: Vec<(usize, f64, InterfaceAsymmetry)>,
    wish: Wish,
}

impl Scaled<'_> {
    fn value(&self, ra: f64) -> Result<f64, StackFault> {
        let mut blueprint = self.base.clone();
        for (element, factor, gamma) in &self.contacts {
            if let Some(interface) = blueprint.interface_mut(*element) {
                interface.asymmetry = *gamma;
                interface.spin_resistance = InterfaceSpinResistance::from_resistance_area(
                    ResistanceAreaProduct::from_si(ra * factor),
                    *gamma,
                );
            }
        }
        self.wish.of_blueprint(self.device, &blueprint)
    }
}

/// The window of a demand on a device at a row of inputs, over the products of the given contacts.
///
/// # Errors
/// [`NoWindow`].
pub fn window(
    device: &Vertical,
    blueprint: &Blueprint,
    contacts: &[usize],
    wish: Wish,
    demand: Demand,
) -> Result<Window, NoWindow> {
    let product = |i: usize| {
        blueprint.interface(i).map_or(0.0, |x| x.spin_resistance.resistance_area(x.asymmetry).si())
    };
    let first = *contacts.first().ok_or(NoWindow::NoContact)?;
    let reference = contacts.iter().copied().find(|i| product(*i) > 0.0).unwrap_or(first);
    let here = product(reference);
    let likely = device.likely.as_ref().map(|l| l.input.reading.value::<InterfaceAsymmetry>());
    let gamma_of = |i: usize| -> Result<(InterfaceAsymmetry, bool), NoWindow> {
        let own = blueprint.interface(i).map(|x| x.asymmetry);
        match own {
            Some(gamma) if device.states_asymmetry(i) => Ok((gamma, false)),
            _ => likely.map(|g| (g, true)).ok_or(NoWindow::NoAsymmetry),
        }
    };
    let mut scaled = Scaled { device, base: blueprint.clone(), contacts: Vec::new(), wish };
    for i in contacts.iter().copied() {
        let factor = if here > 0.0 { product(i) / here } else { 1.0 };
        scaled.contacts.push((i, factor, gamma_of(i)?.0));
    }
    let (asymmetry, asymmetry_is_likely) = gamma_of(reference)?;
    let mut grid = follow(&scaled)?;
    let best_of = |grid: &[(f64, f64)], score: &dyn Fn(f64) -> f64| {
        grid.iter().copied().max_by(|a, b| score(a.1).total_cmp(&score(b.1)))
    };
    let (threshold, fraction) = match demand {
        Demand::Goal(comparison) => (comparison, None),
        Demand::FractionOfMost(fraction) => {
            sharpen(&scaled, &mut grid, &|v| v.abs())?;
            let most = best_of(&grid, &f64::abs).map_or(0.0, |(_, v)| v.abs());
            (Comparison::AtLeast(fraction * most), Some(fraction))
        }
    };
    let margin = |v: f64| threshold.margin(v);
    sharpen(&scaled, &mut grid, &margin)?;
    cross_zero(&scaled, &mut grid)?;
    let (at, value) = best_of(&grid, &margin).ok_or(NoWindow::NotFound)?;
    let intervals = edges(&scaled, &grid, &margin)?;
    Ok(Window {
        wish,
        threshold,
        fraction,
        intervals,
        best: Best {
            value,
            at: (at < LARGEST * FLAT).then(|| ResistanceAreaProduct::from_si(at)),
        },
        here: ResistanceAreaProduct::from_si(here),
        contact: reference,
        contacts: contacts.to_vec(),
        asymmetry,
        asymmetry_is_likely,
    })
}

/// The quantity on the grid, zero product included.
fn follow(scaled: &Scaled<'_>) -> Result<Vec<(f64, f64)>, StackFault> {
    let decades = (LARGEST / SMALLEST).log10().round() as usize;
    let count = decades * POINTS_A_DECADE;
    // With spin-memory loss a vanishing product is a spin sink, while none at all is no interface: the two
    // do not join, so the window begins at the smallest product looked at.
    let lossy = scaled.contacts.iter().any(|(i, _, _)| {
        scaled.base.interface(*i).is_some_and(|x| x.memory_loss.si() > 0.0)
    });
    let mut grid = if lossy { Vec::new() } else { vec![(0.0, scaled.value(0.0)?)] };
    for i in 0..=count {
        let ra = SMALLEST * 10.0_f64.powf(i as f64 / POINTS_A_DECADE as f64);
        grid.push((ra, scaled.value(ra)?));
    }
    // Inputs hundreds of decades out leave no number at some products: nothing is concluded from those.
    grid.retain(|(_, value)| value.is_finite());
    Ok(grid)
}

/// Adds the local maxima of `score` between grid points, so that a narrow peak is not missed.
fn sharpen(
    scaled: &Scaled<'_>,
    grid: &mut Vec<(f64, f64)>,
    score: &dyn Fn(f64) -> f64,
) -> Result<(), StackFault> {
    let mut added = Vec::new();
    for three in grid.windows(3) {
        let [a, b, c] = three else { continue };
        if a.0 > 0.0 && score(b.1) > score(a.1) && score(b.1) >= score(c.1) {
            let f = |x: f64| scaled.value(10.0_f64.powf(x)).map_or(f64::NEG_INFINITY, score);
            let (x, _) = largest(f, a.0.log10(), c.0.log10(), 1e-7);
            let ra = 10.0_f64.powf(x);
            added.push((ra, scaled.value(ra)?));
        }
    }
    grid.extend(added);
    grid.sort_by(|a, b| a.0.total_cmp(&b.0));
    Ok(())
}

/// Adds the places where the quantity changes sign: there its absolute value dips to nothing.
fn cross_zero(scaled: &Scaled<'_>, grid: &mut Vec<(f64, f64)>) -> Result<(), NoWindow> {
    let mut added = Vec::new();
    for two in grid.windows(2) {
        let [a, b] = two else { continue };
        if a.1 * b.1 < 0.0 {
            let ra = root_between(scaled, a.0, b.0, &|v| v)?;
            added.push((ra, 0.0));
        }
    }
    grid.extend(added);
    grid.sort_by(|a, b| a.0.total_cmp(&b.0));
    Ok(())
}

fn root_between(
    scaled: &Scaled<'_>,
    a: f64,
    b: f64,
    function: &dyn Fn(f64) -> f64,
) -> Result<f64, RootFault> {
    if a > 0.0 {
        // In the logarithm: edges lie decades apart and are wanted to a fraction of themselves.
        let f = |x: f64| scaled.value(x.exp()).map_or(f64::NAN, function);
        bracketed_root(f, a.ln(), b.ln(), EDGE_TOLERANCE).map(f64::exp)
    } else {
        let f = |x: f64| scaled.value(x).map_or(f64::NAN, function);
        bracketed_root(f, a, b, EDGE_TOLERANCE * b)
    }
}

fn edges(
    scaled: &Scaled<'_>,
    grid: &[(f64, f64)],
    margin: &dyn Fn(f64) -> f64,
) -> Result<Vec<Interval>, NoWindow> {
    let mut intervals = Vec::new();
    let mut open: Option<Option<f64>> = None;
    for (i, (ra, value)) in grid.iter().enumerate() {
        let inside = margin(*value) >= 0.0;
        match (inside, open) {
            (true, None) => {
                open = Some(if i == 0 {
                    None
                } else {
                    Some(root_between(scaled, grid[i - 1].0, *ra, margin)?)
                });
            }
            (false, Some(low)) => {
                let high = root_between(scaled, grid[i - 1].0, *ra, margin)?;
                intervals.push(Interval {
                    low: low.map(ResistanceAreaProduct::from_si),
                    high: Some(ResistanceAreaProduct::from_si(high)),
                });
                open = None;
            }
            _ => {}
        }
    }
    if let Some(low) = open {
        intervals.push(Interval { low: low.map(ResistanceAreaProduct::from_si), high: None });
    }
    Ok(intervals)
}
