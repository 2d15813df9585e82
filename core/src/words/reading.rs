//! What the reading line reads.

use super::format::{strength, three};
use crate::statement::Statement;
use crate::trajectory::Trajectory;

/// The strengths at the time `t`: "at 2.5 h: Ondrel 545, Vessary 341".
pub fn reading(statement: &Statement, trajectory: &Trajectory, t: f64) -> String {
    let at = trajectory.strengths_at(t);
    format!(
        "at {} {}: {} {}, {} {}",
        three(t),
        statement.unit.symbol(),
        statement.names.x,
        strength(at.x),
        statement.names.y,
        strength(at.y)
    )
}
