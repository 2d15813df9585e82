//! The numbers of an engagement, as quantities of a statement or as plain numbers.

use crate::laws::FireLaw;
use crate::sides::{Both, Side};

/// How one side's fire takes effect on the enemy.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Fire<N> {
    /// The law it follows.
    pub law: FireLaw,
    /// Its attrition-rate coefficient, in the unit of the law; 0 for no fire.
    pub rate: N,
    /// For `search`: the number of targets at which its shooters spend half their time searching.
    pub half: Option<N>,
    /// For `power`: the exponent on the shooters.
    pub p: Option<N>,
    /// For `power`: the exponent on the targets.
    pub q: Option<N>,
}

/// What is stated of one side.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct SideTerms<N> {
    /// Strength at time 0.
    pub start: N,
    /// Strength lost before time 0.
    pub lost: N,
    /// Its fire on the enemy.
    pub fire: Fire<N>,
    /// The fraction lost at which it breaks.
    pub break_point: N,
}

/// All numbers of an engagement.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Terms<N> {
    /// What is stated of each side.
    pub sides: Both<SideTerms<N>>,
    /// The clock, in the unit of time.
    pub until: Option<N>,
}

/// An engagement in plain numbers: what is worked out.
pub type Engagement = Terms<f64>;

impl<N> Terms<N> {
    /// The same terms with each number replaced by what `change` makes of it and of its slot's name.
    pub fn map<M>(&self, mut change: impl FnMut(&str, &N) -> M) -> Terms<M> {
        let mut on =
            |side: Side, name: &str, number: &N| change(&format!("{}.{name}", side.letter()), number);
        let sides = Both::of(|side| {
            let terms = &self.sides[side];
            SideTerms {
                start: on(side, "start", &terms.start),
                lost: on(side, "lost", &terms.lost),
                fire: Fire {
                    law: terms.fire.law,
                    rate: on(side, "rate", &terms.fire.rate),
                    half: terms.fire.half.as_ref().map(|half| on(side, "half", half)),
                    p: terms.fire.p.as_ref().map(|p| on(side, "p", p)),
                    q: terms.fire.q.as_ref().map(|q| on(side, "q", q)),
                },
                break_point: on(side, "break", &terms.break_point),
            }
        });
        Terms {
            sides,
            until: self.until.as_ref().map(|until| change("until", until)),
        }
    }
}

impl Engagement {
    /// All that a side has put in by time 0: its start and what it lost before.
    pub fn committed_at_start(&self, side: Side) -> f64 {
        self.sides[side].start + self.sides[side].lost
    }
}
