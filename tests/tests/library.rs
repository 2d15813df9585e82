//! One library of problems for every way of solving: closed form, state equation with quadrature, and the integrator.
//!
//! `reference/library.tsv` says where each problem comes from. `reference/work.tsv` holds what each took: to make it again
//! after a change that is meant, run `cargo test -p aftercount-tests --test library -- --nocapture` and copy the rows that
//! it prints.

use aftercount_core::course::Course;
use aftercount_core::double::Double;
use aftercount_core::fight::{Effort, Fight, break_line, fight, plain_piece};
use aftercount_core::laws::along_orbit::AlongOrbit;
use aftercount_core::outcome::{Breaks, Ended, Method};
use aftercount_core::pairs::Pairs;
use aftercount_core::piece::Piece;
use aftercount_core::sides::{Both, Side};
use aftercount_core::statement::Statement;
use aftercount_core::terms::Engagement;
use aftercount_tests::tables::{self, relative_error};

/// How nearly the ways of solving agree.
const AGREEMENT: f64 = 1e-11;

/// A problem of the library.
struct Problem {
    name: String,
    engagement: Engagement,
}

impl Problem {
    fn piece(&self) -> Box<Piece> {
        plain_piece(&self.engagement).expect("a fight of two fires alone")
    }

    fn solved(&self) -> Fight {
        fight(&self.engagement, Effort::Trajectory)
    }

    /// How far the costs of the two lines are apart, in parts of the larger: next to 0 the rounding of a strength on the
    /// way is another fight.
    fn distance_from_tie(&self) -> f64 {
        let piece = self.piece();
        let cost = Both::of(|side: Side| {
            let line = break_line(&self.engagement, side);
            f64::from(piece.equation.cost(side, piece.start[side].into(), line))
        });
        if cost.x.is_infinite() || cost.y.is_infinite() {
            1.0
        } else {
            (cost.x - cost.y).abs() / cost.x.max(cost.y)
        }
    }

    /// The side that is down to its line first, or would be if it ever got there; and the strength that it ends with.
    fn loser(&self) -> (Side, f64) {
        let outcome = self.solved().outcome;
        let part = Both::of(|side: Side| {
            let sides = outcome.sides();
            sides[side].end.expect("no side grows") / sides[side].start
        });
        let side = if part.x < part.y { Side::X } else { Side::Y };
        (side, outcome.sides()[side].end.expect("no side grows"))
    }
}

fn library() -> Vec<Problem> {
    let rows = tables::read("library.tsv");
    assert!(rows.len() >= 60, "{} problems", rows.len());
    let problem = |row: tables::Row| {
        assert!(
            row.text("source").len() > 8,
            "{}: where is it from?",
            row.text("name")
        );
        let statement = Statement::read(&Pairs::parse(row.text("link")));
        let statement = statement.unwrap_or_else(|why| panic!("{}: {why:?}", row.text("name")));
        Problem {
            name: row.text("name").to_owned(),
            engagement: statement.engagement(),
        }
    };
    rows.into_iter().map(problem).collect()
}

/// Strengths of the loser on the way, its end among them where that is above 0.
fn on_the_way(start: f64, end: f64) -> Vec<f64> {
    let parts = [0.999, 0.9, 0.5, 0.1, 0.01];
    let mut strengths: Vec<f64> = parts
        .iter()
        .map(|part| part * start)
        .filter(|left| *left > end)
        .collect();
    if end > 0.0 {
        strengths.push(end);
    }
    strengths
}

/// The three times agree, and so do the strengths at them; every way is tried on enough of the problems.
#[test]
fn closed_form_quadrature_and_integration_agree() {
    let mut tried = [0, 0, 0];
    let mut worst = (0.0, String::new());
    for problem in library() {
        let (side, end) = problem.loser();
        let piece = problem.piece();
        let both_fire = piece.equation.rate.x > 0.0 && piece.equation.rate.y > 0.0;
        // Next to a tie the integrator, which knows nothing of the state equation, drifts off it in the end.
        let end = if problem.distance_from_tie() < 1e-6 {
            0.0
        } else {
            end
        };
        for strength in on_the_way(piece.start[side], end) {
            let point = piece.point_with(side, strength.into());
            let time = piece.time_to(&point);
            let course = Course::follow(piece.start, piece.fire(), time * 1.001, f64::EPSILON);
            let followed = course.time_to(side, strength).unwrap_or(f64::NAN);
            let mut times = vec![("integration", followed)];
            if both_fire {
                times.push(("quadrature", AlongOrbit { piece: &piece }.time_to(&point).value));
            }
            for (way, found) in times {
                let error = relative_error(found, time);
                if error > worst.0 || error.is_nan() {
                    worst = (error, format!("{}: {way} down to {strength:e}", problem.name));
                }
                tried[usize::from(way == "quadrature")] += 1;
            }
            let at_that_time = course.strengths_at(followed);
            for side in Side::BOTH {
                let off = (at_that_time[side] - point.left[side]).abs() / piece.start[side];
                if off > worst.0 || off.is_nan() {
                    worst = (off, format!("{}: strength of {side:?} at {time:e}", problem.name));
                }
            }
            tried[2] += usize::from(piece.motion.method() == Method::ClosedForm && both_fire);
        }
    }
    println!("{tried:?} by integration, quadrature, both against a closed form; worst {worst:?}");
    assert!(worst.0 <= AGREEMENT, "{worst:?}");
    assert!(tried.iter().all(|count| *count >= 40), "{tried:?}");
}

/// Both down to nothing at one moment: no side is left to follow, and the closed integral is all there is; the integrator
/// comes as near as its last steps let it.
#[test]
fn a_finite_end_of_both_is_the_integrators_too() {
    let mut found = 0;
    for problem in library() {
        let outcome = problem.solved().outcome;
        if (outcome.breaks, outcome.x.end, outcome.y.end) != (Breaks::Both, Some(0.0), Some(0.0)) {
            continue;
        }
        found += 1;
        let piece = problem.piece();
        let time = outcome.time.expect("in finite time");
        let strength = 1e-6 * piece.start.x;
        let point = piece.point_with(Side::X, strength.into());
        let course = Course::follow(piece.start, piece.fire(), time, f64::EPSILON);
        let followed = course.time_to(Side::X, strength).expect("on the way");
        tables::assert_close(
            followed,
            piece.time_to(&point),
            AGREEMENT,
            &format!("{}: down to {strength:e}", problem.name),
        );
        assert!(followed < time && followed > 0.99 * time, "{}", problem.name);
    }
    assert_eq!(found, 2);
}

/// The fight that is left at the time `t`: its strengths, and what has been lost before.
fn taken_up_at(engagement: &Engagement, t: f64) -> (Fight, Engagement) {
    let cut = fight(
        &Engagement {
            until: Some(t),
            ..engagement.clone()
        },
        Effort::Trajectory,
    );
    let mut rest = Engagement {
        until: engagement.until.map(|until| until - t),
        ..engagement.clone()
    };
    for side in Side::BOTH {
        let left = *cut.outcome.sides()[side];
        rest.sides[side].lost += left.losses.all;
        rest.sides[side].start = left.end.expect("no side grows");
    }
    (cut, rest)
}

/// Cut at any time and taken up again, the strengths are those of the whole fight, whatever is close to a tie or not.
#[test]
fn strengths_after_a_cut_are_those_of_the_whole() {
    let mut tried = 0;
    for problem in library() {
        let whole = problem.solved();
        let trajectory = whole.trajectory.as_ref().expect("asked for");
        let shown = trajectory.shown;
        for share in [1e-6, 0.1, 0.35, 0.62, 0.9] {
            let t = share * shown;
            let (cut, rest) = taken_up_at(&problem.engagement, t);
            assert_eq!(
                (cut.outcome.breaks, cut.outcome.ended),
                (Breaks::Neither, Ended::Clock),
                "{}",
                problem.name
            );
            let rest = fight(&rest, Effort::Trajectory);
            for later in [0.2, 0.6, 0.95].map(|part| t + part * (shown - t)) {
                let after = rest
                    .trajectory
                    .as_ref()
                    .expect("asked for")
                    .strengths_at(later - t);
                let known = trajectory.strengths_at(later);
                for side in Side::BOTH {
                    let off = (after[side] - known[side]).abs() / problem.engagement.sides[side].start;
                    assert!(
                        off <= AGREEMENT,
                        "{}: {side:?} at {later:e} after a cut at {t:e}, off by {off:e}",
                        problem.name
                    );
                    tried += 1;
                }
            }
        }
    }
    assert!(tried > 1500, "{tried}");
}

/// And so is the outcome, except next to a tie, where the rounding of the strengths at the cut is another fight.
#[test]
fn the_outcome_after_a_cut_is_that_of_the_whole() {
    let mut tried = 0;
    for problem in library() {
        if problem.distance_from_tie() < 1e-3 {
            continue;
        }
        let whole = problem.solved();
        let shown = whole.trajectory.as_ref().expect("asked for").shown;
        let whole = whole.outcome;
        for share in [1e-6, 0.1, 0.35, 0.62, 0.9] {
            let t = share * shown;
            let (_, rest) = taken_up_at(&problem.engagement, t);
            let rest = fight(&rest, Effort::Outcome).outcome;
            let words = |outcome: &aftercount_core::outcome::Outcome| {
                (outcome.breaks, outcome.ended, outcome.to_the_last)
            };
            assert_eq!(words(&rest), words(&whole), "{} cut at {t:e}", problem.name);
            let total = rest.time.map(|time| time + t);
            assert_eq!(total.is_some(), whole.time.is_some(), "{}", problem.name);
            let error = relative_error(total.unwrap_or(0.0), whole.time.unwrap_or(0.0));
            assert!(
                error <= AGREEMENT,
                "{} cut at {t:e}: off by {error:e}",
                problem.name
            );
            for side in Side::BOTH {
                let (found, known) = (rest.sides()[side].end, whole.sides()[side].end);
                let off = (found.expect("an end") - known.expect("an end")).abs();
                let start = problem.engagement.sides[side].start;
                assert!(
                    off <= AGREEMENT * start,
                    "{} cut at {t:e}: {side:?} ends {off:e} off",
                    problem.name
                );
            }
            tried += 1;
        }
    }
    assert!(tried > 250, "{tried}");
}

/// What each problem took: a change that makes one dearer shows here, without a clock.
#[test]
fn the_work_done_is_that_committed() {
    let found: Vec<String> = library()
        .iter()
        .map(|problem| {
            let fight = problem.solved();
            let shown = fight.trajectory.as_ref().expect("asked for").work();
            format!(
                "{}\t{}\t{}\t{}\t{}",
                problem.name, fight.work.evaluations, fight.work.steps, shown.evaluations, shown.steps
            )
        })
        .collect();
    let committed: Vec<String> = tables::read("work.tsv")
        .iter()
        .map(|row| {
            let columns = ["name", "evaluations", "steps", "shown_evaluations", "shown_steps"];
            columns.map(|column| row.text(column).to_owned()).join("\t")
        })
        .collect();
    println!("{}", found.join("\n"));
    assert!(
        found == committed,
        "reference/work.tsv holds others: see the rows above"
    );
}

/// The rest of a descent is what a descent of the rest is, so that a double-double strength loses nothing on the way.
#[test]
fn a_cut_costs_nothing() {
    for problem in library() {
        let piece = problem.piece();
        for side in Side::BOTH {
            let (start, middle, end) = (
                piece.start[side],
                0.7 * piece.start[side],
                0.2 * piece.start[side],
            );
            let cost = |from: f64, to: f64| piece.equation.cost(side, from.into(), to.into());
            let whole = cost(start, end);
            let parts = cost(start, middle) + cost(middle, end);
            let off = f64::from((whole - parts).abs());
            assert!(off <= 1e-28 * f64::from(whole), "{}: {off:e}", problem.name);
            assert!(whole >= Double::default());
        }
    }
}
