//! How much the fights of one question took together, so that it ends whatever its numbers are.

use crate::fight::{Effort, Fight, fight};
use crate::outcome::Outcome;
use crate::terms::Engagement;

/// What a piece of a fight costs besides its evaluations, in evaluations: about what a closed form takes.
const PIECE: u64 = 60;

/// Fights of one question, counted.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub struct Tally {
    /// How many.
    pub fights: u32,
    /// What they took: evaluations of functions, or what takes as long.
    pub evaluations: u64,
}

impl Tally {
    /// One fight more.
    pub fn fight(&mut self, engagement: &Engagement, effort: Effort) -> Outcome {
        let fight = fight(engagement, effort);
        self.count(&fight);
        fight.outcome
    }

    /// One more that was fought elsewhere.
    pub fn count(&mut self, fight: &Fight) {
        self.fights += 1;
        self.evaluations += u64::from(fight.work.evaluations()) + PIECE * fight.outcome.pieces.len() as u64;
    }

    /// Both together.
    pub fn and(self, other: Tally) -> Tally {
        Tally {
            fights: self.fights + other.fights,
            evaluations: self.evaluations + other.evaluations,
        }
    }
}
