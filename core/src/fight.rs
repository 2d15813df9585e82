//! From an engagement to its outcome: the one function through which all questions go.

use crate::course::TOLERANCE;
use crate::double::Double;
use crate::ledger::Ledger;
use crate::outcome::Outcome;
use crate::piece::Piece;
use crate::run::Run;
use crate::schedule::instants;
use crate::sides::{Both, Side};
use crate::state::{Descent, StateEquation};
use crate::terms::Engagement;
use crate::trajectory::Trajectory;
use crate::work::Work;

/// How much is asked of a fight.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Effort {
    /// Who breaks, when, and what is left; of a fight without end also who fades. What it would have come to had it gone on
    /// is left out: to work that out takes as long again.
    Ending,
    /// The outcome alone.
    Outcome,
    /// The outcome, and strength over time.
    Trajectory,
}

/// No fight takes more evaluations of functions than this ([`Work::evaluations`]), whatever its numbers: where one would,
/// its outcome says how far it was worked out.
pub const MOST_EVALUATIONS: u32 = 600_000;

/// The loosest tolerance of an integration: with less than three digits a step it would not know who breaks.
const LOOSEST: f64 = 1e-3;

/// A fight worked out.
#[derive(Clone, Debug)]
pub struct Fight {
    /// What it leaves.
    pub outcome: Outcome,
    /// Strength over time, where it was asked for.
    pub trajectory: Option<Trajectory>,
    /// What it took.
    pub work: Work,
}

/// Works out what `engagement` leaves, to the rounding of doubles.
///
/// Its numbers keep the limits of their keys: `Statement::read` sees to that.
pub fn fight(engagement: &Engagement, effort: Effort) -> Fight {
    fight_to(engagement, effort, TOLERANCE)
}

/// The same, where what must be integrated keeps the error of each step to the part `tolerance` of the strengths.
///
/// A number without unit, from [`TOLERANCE`], below which a double has no digits, up to 1e-3; what is outside is taken as
/// the nearer of both. What has a formula or a state equation keeps its own accuracy.
pub fn fight_to(engagement: &Engagement, effort: Effort, tolerance: f64) -> Fight {
    let run = Run::of(engagement, tolerance.clamp(TOLERANCE, LOOSEST));
    let (outcome, further) = run.outcome(engagement, effort);
    let work = run.work().and(further);
    let trajectory = (effort == Effort::Trajectory).then(|| run.into_trajectory());
    Fight {
        outcome,
        trajectory,
        work,
    }
}

/// The engagement as a single piece under its two fires; `None` where it is more: where something arrives or changes, or
/// something besides the fires is lost, or the range counts.
pub fn plain_piece(engagement: &Engagement) -> Option<Box<Piece>> {
    let instants = instants(engagement);
    let conditions = instants[0].conditions;
    if instants.len() > 1 || !conditions.are_plain() || conditions.shared_growth() != Some(None) {
        return None;
    }
    let start = Both::of(|side| engagement.sides[side].start);
    let to_the_last = Side::BOTH.iter().all(|side| descent(engagement, *side).to == 0.0);
    Piece::new(start, &conditions, |cost| to_the_last && StateEquation::tie(cost))
}

/// The way of `side` from its start down to the strength at which it breaks; a descent of 0 or less is behind it.
pub fn descent(engagement: &Engagement, side: Side) -> Descent {
    let terms = &engagement.sides[side];
    Ledger::at_start(terms)
        .way_down(terms.start, terms.break_point, 0.0)
        .descent
}

/// The strength at which `side` breaks at the start: (1 − break point) of what it has committed.
pub fn break_line(engagement: &Engagement, side: Side) -> Double {
    descent(engagement, side).to
}

#[cfg(test)]
mod tests {
    use crate::answer::{Answer, answer};
    use crate::outcome::Breaks;

    /// A side of which next to nothing was left when the enemy's reserve came: its losses were rounded to all it had.
    #[test]
    fn a_side_that_fades_to_the_last_is_not_broken_by_rounding() {
        for wastage in [9, 90, 900] {
            let link = format!(
                "x.start=135&x.rate=0.23&x.join=30@1.9&x.wastage={wastage}&y.start=412&y.fire=logarithmic&y.rate=0.067&\
                 y.break=0.1&y.join=116@6.5"
            );
            let Answer::Outcome { outcome, .. } = answer(&link) else {
                panic!("it is worked out")
            };
            assert_eq!(outcome.breaks, Breaks::Neither, "{wastage}");
        }
    }

    /// Two that break at one moment do so wherever their fight is cut in two: which is first is not left to the rounding of
    /// the strengths at the cut.
    #[test]
    fn a_tie_is_one_behind_a_cut() {
        let pairings = [
            ("x.rate=0.04&x.break=0.3&y.rate=0.09&y.break=0.3", 5.9),
            (
                "x.rate=0.04&x.break=0.3&y.rate=0.09&y.break=0.3&x.wastage=0.01&y.wastage=0.01",
                5.0,
            ),
            (
                "x.rate=4e-4&x.fire=area&x.break=0.3&y.rate=6e-4&y.fire=area&y.break=0.3",
                1.0,
            ),
        ];
        for (pairing, end) in pairings {
            for step in 1..500 {
                let from = end * f64::from(step) / 500.0;
                let link = format!("x.start=600&y.start=400&{pairing}&phase1.from={from}");
                let Answer::Outcome { outcome, .. } = answer(&link) else {
                    panic!("it is worked out")
                };
                assert_eq!(outcome.breaks, Breaks::Both, "{link}");
            }
        }
    }

    /// A side that was withdrawn to the last while a flow kept bringing some: it was found gone again and again, without
    /// end.
    #[test]
    fn a_side_that_only_its_flow_keeps_alive_is_not_asked_for_ever() {
        let link = "x.start=493&x.fire=none&x.break=0.5&y.start=142&y.fire=area&y.rate=9216e-3&y.lost=9&x.join=65@0,-11@5\
                    &x.flow=7@0/7&y.join=42@1,-15@4&phase1.from=2&phase1.x.support.area=0.06";
        let Answer::Outcome { outcome, .. } = answer(link) else {
            panic!("it is worked out")
        };
        assert!(outcome.pieces.len() < 40, "{} pieces", outcome.pieces.len());
    }
}
