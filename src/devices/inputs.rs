//! The input table and its typed handles.
//!
//! One row per input, and for many evaluations a matrix with one *column* per input and one row per
//! evaluation. A [`Slot`] remembers the type of its column, so that the evaluator's code has units; bare
//! numbers exist only in the matrix.

use std::marker::PhantomData;

use ndarray::{Array1, Array2, ArrayView1};

use crate::quantities::dimensions::Measured;
use crate::quantities::kind::Kind;
use crate::quantities::spread::Spread;
use crate::quantities::text::Reading;

use super::provenance::Provenance;

/// One input.
#[derive(Clone, PartialEq, Debug)]
pub struct Input {
    /// Path of the field that sets it: `channel.thickness`.
    pub name: String,
    /// Kind of quantity.
    pub kind: &'static Kind,
    /// Value and spread.
    pub reading: Reading,
    /// Where it comes from.
    pub provenance: Provenance,
}

/// A typed handle on a column.
#[derive(Debug)]
pub struct Slot<Q> {
    column: usize,
    kind: PhantomData<fn() -> Q>,
}

impl<Q> Clone for Slot<Q> {
    fn clone(&self) -> Self {
        *self
    }
}

impl<Q> Copy for Slot<Q> {}

impl<Q> Slot<Q> {
    /// The column.
    #[must_use]
    pub fn column(self) -> usize {
        self.column
    }
}

/// The inputs of a device.
#[derive(Clone, Default, Debug)]
pub struct InputTable {
    inputs: Vec<Input>,
}

impl InputTable {
    /// Adds an input and returns its handle. The dimension of `Q` must be that of the kind.
    pub fn add<Q: Measured>(&mut self, input: Input) -> Slot<Q> {
        debug_assert_eq!(Q::DIMENSION, input.kind.dimension, "{}", input.name);
        self.inputs.push(input);
        Slot {
            column: self.inputs.len() - 1,
            kind: PhantomData,
        }
    }

    /// All inputs, in the order of the columns.
    #[must_use]
    pub fn inputs(&self) -> &[Input] {
        &self.inputs
    }

    /// The column of that name.
    #[must_use]
    pub fn column(&self, name: &str) -> Option<usize> {
        self.inputs.iter().position(|i| i.name == name)
    }

    /// The central row, in SI. Shape: (inputs,).
    #[must_use]
    pub fn central(&self) -> Array1<f64> {
        self.inputs.iter().map(|i| i.reading.si).collect()
    }

    /// `rows` copies of the central row. Shape: (rows, inputs), columns contiguous.
    #[must_use]
    pub fn repeated(&self, rows: usize) -> Array2<f64> {
        use ndarray::ShapeBuilder;
        let mut matrix = Array2::zeros((rows, self.inputs.len()).f());
        for (mut column, input) in matrix.columns_mut().into_iter().zip(&self.inputs) {
            column.fill(input.reading.si);
        }
        matrix
    }

    /// The central row with some inputs moved by `sigmas` standard deviations along their distributions;
    /// `None` where one has no spread or its moved value leaves the range of its kind.
    #[must_use]
    pub fn moved(&self, columns: &[usize], sigmas: f64) -> Option<Array1<f64>> {
        let mut row = self.central();
        for column in columns {
            let input = self.inputs.get(*column)?;
            if matches!(
                input.reading.spread,
                Spread::Exact | Spread::Unknown | Spread::Bound { .. }
            ) {
                return None;
            }
            let value = input.reading.spread.shifted(input.reading.si, sigmas);
            if !input.kind.range.holds(value) {
                return None;
            }
            row[*column] = value;
        }
        Some(row)
    }
}

/// One row of values, read through typed handles.
#[derive(Clone, Copy, Debug)]
pub struct Row<'a>(pub ArrayView1<'a, f64>);

impl Row<'_> {
    /// The quantity in a column.
    #[must_use]
    pub fn get<Q: Measured>(&self, slot: Slot<Q>) -> Q {
        Q::from_si(self.0[slot.column])
    }
}
