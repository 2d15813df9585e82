//! A place along a fight: what is left, and what has fallen, each with all its digits.

use crate::sides::Both;

/// Strengths on the orbit through the start, with the losses since the start kept apart: near the start the losses have
/// more digits than the difference of the strengths, near the end the strengths have more than the difference.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct OrbitPoint {
    /// What is left of each side.
    pub left: Both<f64>,
    /// What each side has lost since the start.
    pub fallen: Both<f64>,
}
