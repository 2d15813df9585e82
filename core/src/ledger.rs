//! What a side has put in, taken out and lost, and how far it is from its break line.

use crate::double::Double;
use crate::outcome::Losses;
use crate::state::{Descent, TIE};
use crate::stretch::WayDown;
use crate::terms::SideTerms;

/// What a side has put in, taken out and lost so far.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Ledger {
    /// Start, lost before, and all arrivals, in full: next to a tie the rounding of their sum would count.
    pub committed: Double,
    /// What joined after time 0.
    pub joined: f64,
    /// What was withdrawn.
    pub withdrawn: f64,
    /// Lost before time 0.
    pub lost_before: f64,
    /// Lost since.
    pub losses: Losses,
}

impl Ledger {
    /// That of a side at time 0, before anything arrives.
    pub(crate) fn at_start(terms: &SideTerms<f64>) -> Ledger {
        Ledger {
            committed: Double::sum(terms.start, terms.lost),
            lost_before: terms.lost,
            ..Ledger::default()
        }
    }

    /// The way from `left` down to the break line; a height of 0 or less is behind.
    ///
    /// A side breaks where lost = break × committed. What is left is committed − withdrawn − lost, so the line stands at
    /// (1 − break) × committed − withdrawn: arrivals move it, withdrawals move both.
    pub fn way_down(&self, left: f64, break_point: f64, flow: f64) -> WayDown {
        let rising = flow * (1.0 - break_point);
        let lost = Double::sum(self.lost_before, self.losses.all);
        let by = self.committed * break_point - lost;
        let to = if break_point == 1.0 {
            Double::from(-self.withdrawn)
        } else {
            self.committed * Double::difference(1.0, break_point) - self.withdrawn
        };
        // To the last, or with the line below 0, the way is all that is left.
        let sunk = (-f64::from(to)).max(0.0);
        let descent = if to > 0.0 {
            Descent { to, by }
        } else {
            Descent {
                to: Double::from(0.0),
                by: left.into(),
            }
        };
        WayDown {
            descent,
            rising,
            sunk,
        }
    }

    /// Whether the line is reached; `to_rounding` where it is known to be so to the rounding of the figures.
    pub(crate) fn has_broken(&self, break_point: f64, to_rounding: bool) -> bool {
        let lost = Double::sum(self.lost_before, self.losses.all);
        let by = self.committed * break_point - lost;
        let rounding = if to_rounding {
            self.committed * TIE
        } else {
            Double::from(0.0)
        };
        self.committed > 0.0 && lost > 0.0 && by <= rounding
    }

    /// Enters what joins.
    pub(crate) fn join(&mut self, came: f64) {
        self.joined += came;
        self.committed = if came.is_finite() {
            self.committed + came
        } else {
            Double::from(came)
        };
    }

    /// Enters what is lost.
    pub(crate) fn add(&mut self, losses: &Losses) {
        self.losses = self.losses.and(losses);
    }
    /// Enters what is lost as it comes.
    pub(crate) fn pass(&mut self, losses: &Losses) {
        self.join(losses.all);
        self.add(losses);
    }
}
