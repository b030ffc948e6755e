//! The window: which resistance-area products meet a demand.
//!
//! The quantity is followed over the resistance-area product on a grid of 24 points a decade; its zeros and
//! extrema are added, so that it is monotone between points, and every edge is then found by a bracketed
//! root on the ladder. With several contacts at the channel their products are scaled by one factor; the
//! window is told as the product of the reference contact.

use crate::designs::goals::Comparison;
use crate::devices::vertical::{Blueprint, Vertical};
use crate::models::ladder::StackFault;
use crate::numerics::root::{RootFault, bracketed_root, largest};
use crate::quantities::dimensions::Measured;
use crate::quantities::meanings::{
    InterfaceAsymmetry, InterfaceSpinResistance, ResistanceAreaProduct,
};

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
        blueprint
            .interface(i)
            .map_or(0.0, |x| x.spin_resistance.resistance_area(x.asymmetry).si())
    };
    let first = *contacts.first().ok_or(NoWindow::NoContact)?;
    let reference = contacts
        .iter()
        .copied()
        .find(|i| product(*i) > 0.0)
        .unwrap_or(first);
    let here = product(reference);
    let gamma_of = |i: usize| -> Result<(InterfaceAsymmetry, bool), NoWindow> {
        match blueprint.interface(i).map(|x| x.asymmetry) {
            Some(gamma) if device.states_asymmetry(i) => Ok((gamma, false)),
            _ => device
                .likely
                .iter()
                .find(|l| l.element == i)
                .map(|l| (l.input.reading.value::<InterfaceAsymmetry>(), true))
                .ok_or(NoWindow::NoAsymmetry),
        }
    };
    let mut scaled = Scaled {
        device,
        base: blueprint.clone(),
        contacts: Vec::new(),
        wish,
    };
    for i in contacts.iter().copied() {
        // A factor on nothing is nothing: beside a contact with resistance a bare one stays bare.
        let factor = if here > 0.0 { product(i) / here } else { 1.0 };
        if factor > 0.0 {
            scaled.contacts.push((i, factor, gamma_of(i)?.0));
        }
    }
    let (asymmetry, asymmetry_is_likely) = gamma_of(reference)?;
    let mut grid = follow(&scaled)?;
    if grid.is_empty() {
        return Err(NoWindow::NotFound);
    }
    cross_zero(&scaled, &mut grid)?;
    sharpen(&scaled, &mut grid, &f64::abs)?;
    sharpen(&scaled, &mut grid, &|v| -v.abs())?;
    let best_of = |score: &dyn Fn(f64) -> f64| {
        grid.iter()
            .copied()
            .max_by(|a, b| score(a.1).total_cmp(&score(b.1)))
    };
    let (threshold, fraction) = match demand {
        Demand::Goal(comparison) => (comparison, None),
        Demand::FractionOfMost(fraction) => {
            let most = best_of(&f64::abs).map_or(0.0, |(_, v)| v.abs());
            (Comparison::AtLeast(fraction * most), Some(fraction))
        }
    };
    let margin = |v: f64| threshold.margin(v);
    let (at, value) = best_of(&margin).ok_or(NoWindow::NotFound)?;
    let intervals = intervals(&scaled, &grid, &threshold)?;
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
        contacts: scaled.contacts.iter().map(|(i, _, _)| *i).collect(),
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
        scaled
            .base
            .interface(*i)
            .is_some_and(|x| x.memory_loss.si() > 0.0)
    });
    let mut grid = if lossy {
        Vec::new()
    } else {
        vec![(0.0, scaled.value(0.0)?)]
    };
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
            let f = |x: f64| {
                scaled
                    .value(10.0_f64.powf(x))
                    .map_or(f64::NEG_INFINITY, score)
            };
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
        if (a.1 > 0.0 && b.1 < 0.0) || (a.1 < 0.0 && b.1 > 0.0) {
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

/// Where |quantity| crosses the levels of the demand. Between grid points it is monotone, because its zeros
/// and extrema are on the grid, so each level is crossed at most once there and both levels of a goal
/// `a .. b` are found even if they lie between the same two points.
fn intervals(
    scaled: &Scaled<'_>,
    grid: &[(f64, f64)],
    threshold: &Comparison,
) -> Result<Vec<Interval>, NoWindow> {
    let levels: Vec<f64> = match *threshold {
        Comparison::AtLeast(a) | Comparison::AtMost(a) => vec![a],
        Comparison::Between(a, b) => vec![a, b],
    };
    let mut edges = Vec::new();
    for two in grid.windows(2) {
        let [a, b] = two else { continue };
        for level in &levels {
            if (a.1.abs() > *level) != (b.1.abs() > *level) {
                edges.push(root_between(scaled, a.0, b.0, &|v| v.abs() - level)?);
            }
        }
    }
    edges.sort_by(f64::total_cmp);
    let first = grid.first().map_or(0.0, |g| g.0);
    let last = grid.last().map_or(LARGEST, |g| g.0);
    let ends: Vec<f64> = [first].into_iter().chain(edges).chain([last]).collect();
    let mut found: Vec<(usize, usize)> = Vec::new();
    for (i, two) in ends.windows(2).enumerate() {
        let [a, b] = two else { continue };
        if a >= b {
            continue;
        }
        // Inside a piece the demand is met everywhere or nowhere: look in its middle.
        let middle = if *a > 0.0 {
            (a * b).sqrt()
        } else {
            (SMALLEST * b).sqrt().min(0.5 * b)
        };
        if threshold.met(scaled.value(middle)?) {
            match found.last_mut() {
                Some(piece) if piece.1 == i => piece.1 = i + 1,
                _ => found.push((i, i + 1)),
            }
        }
    }
    let edge = |i: usize| ResistanceAreaProduct::from_si(ends[i]);
    Ok(found
        .into_iter()
        .map(|(low, high)| Interval {
            low: (low > 0).then(|| edge(low)),
            high: (high + 1 < ends.len()).then(|| edge(high)),
        })
        .collect())
}
