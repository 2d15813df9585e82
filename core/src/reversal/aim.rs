//! What it means that the outcome of an engagement is reversed.

use crate::outcome::{Breaks, Ended, Outcome, ToTheLast};
use crate::sides::{Both, Side};
use crate::terms::Engagement;

/// How an outcome stands to the one that is to be reversed.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Standing {
    /// It is the same.
    Same,
    /// The other side breaks first.
    Reversed,
    /// Nobody does, or both at once.
    Undecided,
}

/// What would be a reversal, by the outcome as it is.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Aim {
    /// This side breaks first: that the other does.
    Broken(Side),
    /// This side fades without ever breaking, and nothing cuts the fight short: that the other gives way, breaking or
    /// fading.
    Fading(Side),
    /// Neither gives way, or both break at one moment: that one does.
    Undecided,
}

impl Aim {
    /// The aim for an outcome.
    pub(crate) fn of(outcome: &Outcome) -> Aim {
        match (outcome.breaks, gives_way(outcome)) {
            (Breaks::X, _) => Aim::Broken(Side::X),
            (Breaks::Y, _) => Aim::Broken(Side::Y),
            (_, Some(side)) => Aim::Fading(side),
            (_, None) => Aim::Undecided,
        }
    }

    /// How another outcome stands to it.
    pub(crate) fn judge(self, outcome: &Outcome) -> Standing {
        // What was not worked out to its end shows no change.
        if outcome.ended == Ended::Unfinished {
            return Standing::Same;
        }
        match self {
            Aim::Broken(loser) => match outcome.breaks {
                Breaks::X | Breaks::Y if outcome.breaks.includes(loser) => Standing::Same,
                Breaks::X | Breaks::Y => Standing::Reversed,
                Breaks::Both | Breaks::Neither => Standing::Undecided,
            },
            Aim::Fading(loser) => match gives_way(outcome) {
                Some(side) if side == loser => Standing::Same,
                Some(_) => Standing::Reversed,
                None => Standing::Undecided,
            },
            Aim::Undecided => match gives_way(outcome) {
                Some(_) => Standing::Reversed,
                None => Standing::Same,
            },
        }
    }
}

/// The side that breaks first or, in a fight that nothing ends, the one that fades to nothing; `None` for neither and both.
pub(crate) fn gives_way(outcome: &Outcome) -> Option<Side> {
    match (outcome.breaks, outcome.ended, outcome.to_the_last) {
        (Breaks::X, ..) => Some(Side::X),
        (Breaks::Y, ..) => Some(Side::Y),
        (Breaks::Neither, ended, Some(ToTheLast::X)) if ended.is_never() => Some(Side::Y),
        (Breaks::Neither, ended, Some(ToTheLast::Y)) if ended.is_never() => Some(Side::X),
        _ => None,
    }
}

/// How far the side that does not give way is from its own line at the end, in parts of what it has committed: where it
/// comes to 0 the two change places. `None` where neither gives way, or both do.
pub(crate) fn lead(engagement: &Engagement, outcome: &Outcome) -> Option<f64> {
    let holds = gives_way(outcome)?.enemy();
    let standing = outcome.sides()[holds];
    let lost = Both::of(|side: Side| engagement.sides[side].lost)[holds] + standing.losses.all;
    let lead = engagement.sides[holds].break_point - lost / standing.committed;
    // A withdrawal may have taken the line below nothing.
    let left = standing.end? / standing.committed;
    Some(lead.min(left)).filter(|lead| lead.is_finite())
}
