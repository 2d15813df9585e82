//! The work that a fight takes, counted without a clock.

use crate::course::ORDER;

/// What it took to solve a piece: for tests that a change has not made it dearer, without a clock.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub struct Work {
    /// Evaluations of integrands and of the exponentials of linear systems.
    pub evaluations: u32,
    /// Steps of the integrator.
    pub steps: u32,
}

impl Work {
    /// Both together.
    pub fn and(self, other: Work) -> Work {
        Work {
            evaluations: self.evaluations.saturating_add(other.evaluations),
            steps: self.steps.saturating_add(other.steps),
        }
    }

    /// All evaluations of functions: a step of the integrator takes the right-hand sides once for each order of its series.
    pub fn evaluations(self) -> u32 {
        self.evaluations
            .saturating_add(self.steps.saturating_mul(ORDER as u32))
    }
}
