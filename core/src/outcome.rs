//! What a fight leaves: the outcome, as the batch door, the page and its attributes give it.

use crate::conditions::part_of;
use crate::sides::{Both, Side};
use serde::Serialize;

/// Who breaks first.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize)]
#[serde(rename_all = "lowercase")]
pub enum Breaks {
    /// Side X.
    X,
    /// Side Y.
    Y,
    /// Both at the same moment, to the rounding of the inputs.
    Both,
    /// Nobody in finite time, or before the clock.
    Neither,
}

impl Breaks {
    /// The sides that have broken; `None` where neither has.
    pub fn of(broken: Both<bool>) -> Option<Breaks> {
        match (broken.x, broken.y) {
            (false, false) => None,
            (true, false) => Some(Breaks::X),
            (false, true) => Some(Breaks::Y),
            (true, true) => Some(Breaks::Both),
        }
    }

    /// `side` alone.
    pub fn only(side: Side) -> Breaks {
        match side {
            Side::X => Breaks::X,
            Side::Y => Breaks::Y,
        }
    }

    /// Whether `side` is among those that break.
    pub fn includes(self, side: Side) -> bool {
        match self {
            Breaks::X => side == Side::X,
            Breaks::Y => side == Side::Y,
            Breaks::Both => true,
            Breaks::Neither => false,
        }
    }
}

/// How the engagement ended.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize)]
#[serde(rename_all = "lowercase")]
pub enum Ended {
    /// A side reached its break line.
    Break,
    /// The clock.
    Clock,
    /// It never ends; the strengths tend to a limit.
    Limit,
    /// Nothing changes, or what comes in and what is lost come to balance.
    Equilibrium,
    /// It never ends, and a side grows without bound.
    Growth,
    /// A side was withdrawn to the last, unbroken, with nobody to come.
    Withdrawn,
    /// It was worked out only so far: more would take more evaluations than an answer may.
    Unfinished,
}

impl Ended {
    /// Whether the fight goes on without end: whoever fades in it fades for ever.
    pub fn is_never(self) -> bool {
        matches!(self, Ended::Limit | Ended::Equilibrium | Ended::Growth)
    }
}

/// Who would be left if no side broke and no clock ran.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize)]
#[serde(rename_all = "lowercase")]
pub enum ToTheLast {
    /// Side X.
    X,
    /// Side Y.
    Y,
    /// Neither: the two wear each other out.
    Parity,
}

/// How a piece of the fight was solved, the strongest first.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Serialize)]
pub enum Method {
    /// By a formula in time.
    #[serde(rename = "closed form")]
    ClosedForm,
    /// Who breaks and what is left by the state equation, the time by an integral.
    #[serde(rename = "quadrature")]
    Quadrature,
    /// Step by step, by the integrator.
    #[serde(rename = "integration")]
    Integration,
}

/// Losses of one side since time 0, by cause; infinite, in JSON null, where they have no bound.
#[derive(Clone, Copy, Debug, Default, PartialEq, Serialize)]
pub struct Losses {
    /// By the enemy's fire.
    pub fire: f64,
    /// By the enemy's supporting arms.
    pub support: f64,
    /// By causes other than the enemy.
    pub wastage: f64,
    /// All of them.
    pub all: f64,
}

impl Losses {
    /// Losses by these causes.
    pub fn of(fire: f64, support: f64, wastage: f64) -> Losses {
        Losses {
            fire,
            support,
            wastage,
            all: fire + support + wastage,
        }
    }

    /// What is lost in the time `time` at this pace.
    pub(crate) fn over(&self, time: f64) -> Losses {
        let lost = |pace: f64| part_of(pace, time);
        Losses::of(lost(self.fire), lost(self.support), lost(self.wastage))
    }

    /// These and others, each cause summed on its own.
    pub fn and(&self, other: &Losses) -> Losses {
        Losses {
            fire: self.fire + other.fire,
            support: self.support + other.support,
            wastage: self.wastage + other.wastage,
            all: self.all + other.all,
        }
    }
}

/// What became of one side.
#[derive(Clone, Copy, Debug, Default, PartialEq, Serialize)]
pub struct SideOutcome {
    /// Strength at time 0.
    pub start: f64,
    /// What joined after time 0; infinite, in JSON null, where reinforcement never ends.
    pub joined: f64,
    /// What was withdrawn.
    pub withdrawn: f64,
    /// Start, lost before, and all arrivals; infinite, in JSON null, where reinforcement never ends.
    pub committed: f64,
    /// Strength at the break, at the clock, or the limit; `None` where it grows without bound.
    pub end: Option<f64>,
    /// What it lost since time 0.
    pub losses: Losses,
}

/// A stretch of time solved by one method.
#[derive(Clone, Copy, Debug, PartialEq, Serialize)]
pub struct PieceOutcome {
    /// When it begins.
    pub from: f64,
    /// When it ends; `None` where it does not.
    pub to: Option<f64>,
    /// How it was solved.
    pub method: Method,
}

/// What a fight leaves.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Outcome {
    /// Who breaks first.
    pub breaks: Breaks,
    /// When, in the link's unit of time; `None` where nobody breaks.
    pub time: Option<f64>,
    /// How it ended.
    pub ended: Ended,
    /// Who would be left if no side broke and no clock ran; `None` where nothing decides it.
    pub to_the_last: Option<ToTheLast>,
    /// When a loser that never reaches 0 falls below one.
    pub below_one: Option<f64>,
    /// Side X.
    pub x: SideOutcome,
    /// Side Y.
    pub y: SideOutcome,
    /// Y's losses by fire and support over X's; `None` over 0, and where either has no bound.
    pub loss_exchange_ratio: Option<f64>,
    /// The same, each over what its side had committed.
    pub fractional_exchange_ratio: Option<f64>,
    /// The weakest method used.
    pub method: Method,
    /// The stretches of time, in order.
    pub pieces: Vec<PieceOutcome>,
    /// The caution that travels with every result.
    pub caution: &'static str,
}

impl Outcome {
    /// What became of each side.
    pub fn sides(&self) -> Both<&SideOutcome> {
        Both {
            x: &self.x,
            y: &self.y,
        }
    }

    /// The ratio of Y's losses to X's, and the ratio of the fractions that they are.
    pub(crate) fn exchange_ratios(sides: &Both<SideOutcome>) -> (Option<f64>, Option<f64>) {
        let by_enemy = Both::of(|side| sides[side].losses.fire + sides[side].losses.support);
        // Of nobody committed nobody is lost.
        let fraction = Both::of(|side| match by_enemy[side] {
            0.0 => 0.0,
            lost => lost / sides[side].committed,
        });
        let known = by_enemy.x > 0.0 && by_enemy.x.is_finite() && by_enemy.y.is_finite();
        let of_all = fraction.x > 0.0 && sides.y.committed.is_finite();
        (
            known.then(|| by_enemy.y / by_enemy.x),
            (known && of_all).then(|| fraction.y / fraction.x),
        )
    }
}
