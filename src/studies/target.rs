//! The quantity a question is about, read off a stack.

use crate::designs::goals::{Comparison, Goal, GoalState, Target};
use crate::devices::vertical::{Blueprint, Outcome, Vertical};
use crate::models::ladder::StackFault;

/// A target in a magnetic state.
#[derive(Clone, Copy, PartialEq, Debug)]
pub struct Wish {
    /// The result.
    pub target: Target,
    /// The state it is read in.
    pub state: GoalState,
}

impl Wish {
    /// The wish of a goal.
    #[must_use]
    pub fn of(goal: &Goal) -> Self {
        Self {
            target: goal.target,
            state: goal.state,
        }
    }

    /// What is asked of a device without a goal: magnetoresistance of two contacts, injected polarization
    /// of one.
    #[must_use]
    pub fn default_of(device: &Vertical) -> Self {
        let target = if device.has_two_states {
            Target::Magnetoresistance
        } else {
            Target::InjectedPolarization
        };
        Self {
            target,
            state: GoalState::Parallel,
        }
    }

    /// Its column in [`Outcome::COLUMNS`].
    #[must_use]
    pub fn column(&self) -> usize {
        match (self.target, self.state) {
            (Target::InjectedPolarization, GoalState::Parallel) => 0,
            (Target::InjectedPolarization, GoalState::Antiparallel) => 1,
            (Target::ResistanceAreaChange, _) => 5,
            (Target::Magnetoresistance, _) => 6,
        }
    }

    /// Its value in an outcome, SI.
    #[must_use]
    pub fn of_outcome(&self, outcome: &Outcome) -> f64 {
        outcome.si()[self.column()]
    }

    /// Its value for a blueprint, SI.
    ///
    /// # Errors
    /// [`StackFault`]; designs that were read without fault do not give one.
    pub fn of_blueprint(
        &self,
        device: &Vertical,
        blueprint: &Blueprint,
    ) -> Result<f64, StackFault> {
        Ok(self.of_outcome(&device.outcome_of(&blueprint.stack()?)))
    }
}

/// What a window or a search has to meet.
#[derive(Clone, Copy, PartialEq, Debug)]
pub enum Demand {
    /// The comparison of a goal.
    Goal(Comparison),
    /// At least this fraction of the most that any resistance-area product gives.
    FractionOfMost(f64),
}
