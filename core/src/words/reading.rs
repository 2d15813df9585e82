//! What the reading line reads.

use super::format::{strength, with_unit};
use crate::statement::Statement;
use crate::trajectory::Trajectory;

/// The strengths at the time `t`: "at 2.5 h: Ondrel 545, Vessary 341".
pub fn reading(statement: &Statement, trajectory: &Trajectory, t: f64) -> String {
    let at = trajectory.strengths_at(t);
    format!(
        "at {}: {} {}, {} {}",
        with_unit(t, statement.unit),
        statement.names.x,
        strength(at.x),
        statement.names.y,
        strength(at.y)
    )
}

/// What the button says that makes the engagement that goes on from the time `t`: "Continue from 2.5 h".
pub fn continue_from(statement: &Statement, t: f64) -> String {
    format!("Continue from {}", with_unit(t, statement.unit))
}
