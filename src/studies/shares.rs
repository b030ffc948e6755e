//! How much each input carries: the change of the answer when it moves one standard deviation, one at a
//! time, as a share of the sum of squares.

use crate::devices::vertical::Vertical;
use crate::models::ladder::StackFault;

use super::target::Wish;

/// The part of one input, or of several that come from the same number of the same record and therefore
/// move together.
#[derive(Clone, PartialEq, Debug)]
pub struct Share {
    /// Columns of the input table.
    pub columns: Vec<usize>,
    /// Mean absolute change per standard deviation, SI.
    pub change: f64,
    /// Share of Σ(change)², 0 to 1.
    pub share: f64,
}

impl Share {
    /// The first of its columns, which stands for all.
    #[must_use]
    pub fn first(&self) -> usize {
        self.columns.first().copied().unwrap_or(0)
    }
}

/// Columns that move together: the same key of the same record.
fn groups(device: &Vertical) -> Vec<Vec<usize>> {
    let inputs = device.table.inputs();
    let same = |i: usize, j: usize| {
        let (a, b) = (&inputs[i], &inputs[j]);
        let key = |name: &str| name.rsplit('.').next().map(str::to_owned);
        let records = a.provenance.records();
        !records.is_empty() && records == b.provenance.records() && key(&a.name) == key(&b.name)
    };
    let mut all: Vec<Vec<usize>> = Vec::new();
    for i in 0..inputs.len() {
        match all
            .iter_mut()
            .find(|group| group.first().is_some_and(|j| same(i, *j)))
        {
            Some(group) => group.push(i),
            None => all.push(vec![i]),
        }
    }
    all
}

/// Shares of all inputs that have a spread, largest first. Inputs whose spread is exact, a bound or
/// unknown are left out.
///
/// # Errors
/// [`StackFault`]; designs that were read without fault do not give one.
pub fn shares(device: &Vertical, wish: Wish) -> Result<Vec<Share>, StackFault> {
    let central = wish.of_outcome(&device.evaluate(device.table.central().view())?);
    let mut all = Vec::new();
    for columns in groups(device) {
        let mut changes = Vec::new();
        for sigmas in [1.0, -1.0] {
            if let Some(row) = device.table.moved(&columns, sigmas) {
                let moved = wish.of_outcome(&device.evaluate(row.view())?);
                changes.push((moved - central).abs());
            }
        }
        if !changes.is_empty() {
            let change = changes.iter().sum::<f64>() / changes.len() as f64;
            all.push(Share {
                columns,
                change,
                share: 0.0,
            });
        }
    }
    let total: f64 = all.iter().map(|s| s.change * s.change).sum();
    if total > 0.0 {
        for s in &mut all {
            s.share = s.change * s.change / total;
        }
    }
    // Equal shares differ in the last bits: the order of the table breaks the tie.
    let whole = |s: &Share| (s.share * 1e9).round();
    all.sort_by(|a, b| {
        whole(b)
            .total_cmp(&whole(a))
            .then(a.columns.cmp(&b.columns))
    });
    Ok(all)
}

/// The smallest set of inputs that carries at least this fraction of Σ(change)².
#[must_use]
pub fn carriers(shares: &[Share], fraction: f64) -> Vec<Share> {
    let mut sum = 0.0;
    let mut set = Vec::new();
    for share in shares {
        if sum >= fraction {
            break;
        }
        sum += share.share;
        set.push(share.clone());
    }
    set
}
