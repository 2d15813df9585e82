//! What must hold for every fight, tried on thousands.

mod drawn;

use aftercount_core::fight::{Effort, Fight, fight, plain_piece};
use aftercount_core::laws::FireLaw;
use aftercount_core::outcome::{Breaks, Ended, Method, ToTheLast};
use aftercount_core::piece::Piece;
use aftercount_core::sides::{Both, Side};
use aftercount_core::terms::{Engagement, Fire};
use aftercount_tests::tables::relative_error;
use drawn::{config, cost, distance_from_tie, engagement, per_target, shooters, slope, terms, vanishing};
use proptest::prelude::*;

/// So many fights, each of which is worked out in full and often twice.
const CASES: u32 = 1500;

fn solved(engagement: &Engagement) -> Fight {
    fight(engagement, Effort::Trajectory)
}

/// Losses of a side per unit of time at the start.
fn first_losses(engagement: &Engagement, side: Side) -> f64 {
    let (own, enemy) = (&engagement.sides[side], &engagement.sides[side.enemy()]);
    if enemy.fire.law == FireLaw::None {
        return 0.0;
    }
    let inverse: f64 = per_target(&enemy.fire)
        .into_iter()
        .map(|(coefficient, exponent)| coefficient * own.start.powf(exponent))
        .sum();
    enemy.fire.rate * enemy.start.powf(shooters(&enemy.fire)) / inverse
}

/// The part of a strength by which a trajectory may be off: the rounding of a formula, or the integrator's own error.
fn rounding(fight: &Fight) -> f64 {
    match fight.outcome.method {
        Method::ClosedForm => 4e-14,
        Method::Quadrature | Method::Integration => 1e-11,
    }
}

/// Twenty times from 0 to the end, or where there is none, to well past the time in which much is lost.
fn twenty_times(engagement: &Engagement, fight: &Fight) -> Vec<f64> {
    let share = |side: Side| first_losses(engagement, side) / engagement.sides[side].start;
    let last = fight
        .outcome
        .time
        .unwrap_or(5.0 / share(Side::X).max(share(Side::Y)));
    if last.is_finite() {
        (0..20).map(|step| last * f64::from(step) / 19.0).collect()
    } else {
        vec![0.0]
    }
}

fn swapped(engagement: &Engagement) -> Engagement {
    Engagement {
        sides: Both {
            x: engagement.sides.y.clone(),
            y: engagement.sides.x.clone(),
        },
        ..engagement.clone()
    }
}

/// Strengths at the end.
fn ends(fight: &Fight) -> [f64; 2] {
    [
        fight.outcome.x.end.expect("an end"),
        fight.outcome.y.end.expect("an end"),
    ]
}

fn assert_near(found: f64, known: f64, within: f64, what: &str) -> Result<(), TestCaseError> {
    let error = relative_error(found, known);
    prop_assert!(
        error <= within,
        "{what}: {found:e} for {known:e}, off by {error:.2e}"
    );
    Ok(())
}
proptest! {
    #![proptest_config(config(CASES))]

    #[test]
    fn the_state_equation_is_constant(engagement in engagement()) {
        let fight = solved(&engagement);
        let trajectory = fight.trajectory.as_ref().expect("asked for");
        let Both { x, y } = &engagement.sides;
        for t in twenty_times(&engagement, &fight) {
            let now = trajectory.strengths_at(t);
            let (of_x, of_y) = (cost(x, y, now.x), cost(y, x, now.y));
            // What a strength off by its rounding makes of the costs, and the rounding of these here.
            let by_strength = slope(x, y, now.x) * x.start + slope(y, x, now.y) * y.start;
            let allowed = rounding(&fight) * (by_strength + of_x + of_y);
            // What no double holds has no digits to be held to.
            if allowed.is_finite() && now.x.min(now.y) > 1e-200 {
                prop_assert!((of_x - of_y).abs() <= allowed, "at {t:e}: {now:?}, {of_x:e} for {of_y:e}");
            }
        }
    }

    #[test]
    fn strength_never_grows_and_never_falls_below_its_end(engagement in engagement()) {
        let fight = solved(&engagement);
        let trajectory = fight.trajectory.as_ref().expect("asked for");
        let end = ends(&fight);
        let mut last = trajectory.strengths_at(0.0);
        prop_assert_eq!(last, Both { x: engagement.sides.x.start, y: engagement.sides.y.start });
        for t in twenty_times(&engagement, &fight) {
            let now = trajectory.strengths_at(t);
            for (side, end) in Side::BOTH.into_iter().zip(end) {
                let rounding = rounding(&fight) * engagement.sides[side].start;
                prop_assert!(now[side] <= last[side] + rounding, "{side:?} grows at {t:e}");
                prop_assert!(now[side] >= end - rounding, "{side:?} is below its end at {t:e}");
            }
            last = now;
        }
    }

    #[test]
    fn sides_swapped_give_the_mirrored_outcome(engagement in engagement()) {
        let (one, other) = (solved(&engagement).outcome, solved(&swapped(&engagement)).outcome);
        let mirrored = match other.breaks { Breaks::X => Breaks::Y, Breaks::Y => Breaks::X, same => same };
        prop_assert_eq!(one.breaks, mirrored);
        prop_assert_eq!(one.ended, other.ended);
        let last = other.to_the_last.map(|last| match last {
            ToTheLast::X => ToTheLast::Y,
            ToTheLast::Y => ToTheLast::X,
            same => same,
        });
        prop_assert_eq!(one.to_the_last, last);
        prop_assert_eq!(one.x.end, other.y.end);
        prop_assert_eq!(one.y.end, other.x.end);
        prop_assert_eq!(one.x.losses.fire, other.y.losses.fire);
        for (found, known) in [(one.time, other.time), (one.below_one, other.below_one)] {
            prop_assert_eq!(found.is_some(), known.is_some());
            let within = if one.method == Method::ClosedForm { 2e-15 } else { 1e-13 };
            assert_near(found.unwrap_or(0.0), known.unwrap_or(0.0), within, "the time")?;
        }
    }

    #[test]
    fn rates_four_times_as_high_take_a_quarter_of_the_time(engagement in engagement(), twice in -5i32..=5) {
        let factor = 4f64.powi(twice);
        let mut faster = engagement.clone();
        faster.sides.x.fire.rate *= factor;
        faster.sides.y.fire.rate *= factor;
        let (slow, fast) = (solved(&engagement).outcome, solved(&faster).outcome);
        prop_assert_eq!((slow.breaks, slow.ended, slow.to_the_last), (fast.breaks, fast.ended, fast.to_the_last));
        prop_assert_eq!((slow.x.end, slow.y.end), (fast.x.end, fast.y.end));
        prop_assert_eq!(slow.time, fast.time.map(|time| time * factor));
        prop_assert_eq!(slow.below_one, fast.below_one.map(|time| time * factor));
    }

    /// Powers of two, which change no digit of a number; a rate keeps its digits too where the exponents together are
    /// a whole number, but what is raised to a power in between does not.
    #[test]
    fn strengths_in_another_unit_change_nothing(engagement in engagement(), doubled in -8i32..=8) {
        let factor = 2f64.powi(doubled);
        let mut other = engagement.clone();
        let mut exact = true;
        for side in Side::BOTH {
            let terms = &mut other.sides[side];
            terms.start *= factor;
            terms.lost *= factor;
            let fire = &mut terms.fire;
            match fire.law {
                FireLaw::Area => fire.rate /= factor,
                FireLaw::Search => fire.half = fire.half.map(|half| half * factor),
                FireLaw::Power => fire.rate /= factor.powf(fire.p.expect("given") + fire.q.expect("given") - 1.0),
                _ => {}
            }
            exact &= !matches!(fire.law, FireLaw::Logarithmic | FireLaw::Search | FireLaw::Power);
        }
        prop_assume!(exact || distance_from_tie(&engagement) > 1e-3);
        let (one, other) = (solved(&engagement).outcome, solved(&other).outcome);
        prop_assert_eq!((one.breaks, one.ended), (other.breaks, other.ended));
        let within = if exact { 0.0 } else { 1e-11 };
        assert_near(other.time.unwrap_or(0.0), one.time.unwrap_or(0.0), within, "the time")?;
        for side in Side::BOTH {
            let (found, known) = (other.sides()[side].end, one.sides()[side].end);
            let off = (found.expect("an end") - known.expect("an end") * factor).abs();
            prop_assert!(off <= within * engagement.sides[side].start * factor, "{side:?} ends {off:e} off");
        }
    }

    #[test]
    fn cut_and_taken_up_again_it_is_the_same_fight(engagement in engagement(), share in 0.01f64..0.98) {
        let whole = solved(&engagement);
        // Nearer to a tie the rounding of the strengths at the cut is itself a different fight.
        prop_assume!(distance_from_tie(&engagement) > 0.01);
        let Some(time) = whole.outcome.time else { return Ok(()) };
        prop_assume!(time > 0.0);
        let cut = Engagement { until: Some(time * share), ..engagement.clone() };
        let first = solved(&cut);
        prop_assert_eq!((first.outcome.breaks, first.outcome.ended), (Breaks::Neither, Ended::Clock));
        // What is left to a rounding of all that was there counts as nothing left.
        let lasts = |side: Side| first.outcome.sides()[side].end > Some(1e-14 * engagement.sides[side].start);
        prop_assume!(Side::BOTH.into_iter().all(lasts));
        let mut rest = engagement.clone();
        for (side, end) in Side::BOTH.into_iter().zip(ends(&first)) {
            rest.sides[side].lost += first.outcome.sides()[side].losses.all;
            rest.sides[side].start = end;
        }
        let second = solved(&rest);
        prop_assert_eq!(second.outcome.breaks, whole.outcome.breaks);
        let total = time * share + second.outcome.time.expect("it still ends");
        assert_near(total, time, 1e-11, "the time")?;
        for (side, (found, known)) in Side::BOTH.into_iter().zip(ends(&second).into_iter().zip(ends(&whole))) {
            let within = 1e-11 * engagement.sides[side].start;
            prop_assert!((found - known).abs() <= within, "{side:?} left: {found:e} for {known:e}");
        }
    }

    #[test]
    fn a_line_reached_at_the_clock_is_reached(engagement in engagement()) {
        let whole = solved(&engagement).outcome;
        let Some(time) = whole.time else { return Ok(()) };
        prop_assume!(time > 0.0);
        for until in [time, time * 1.5] {
            let clocked = solved(&Engagement { until: Some(until), ..engagement.clone() }).outcome;
            prop_assert_eq!(&clocked, &whole, "a clock at {:e}", until);
        }
        let before = solved(&Engagement { until: Some(time * 0.999_999), ..engagement.clone() }).outcome;
        prop_assert_eq!((before.breaks, before.ended, before.time), (Breaks::Neither, Ended::Clock, None));
    }

    #[test]
    fn the_time_to_a_strength_turns_the_strength_at_a_time_round(engagement in engagement()) {
        let fight = solved(&engagement);
        let trajectory = fight.trajectory.as_ref().expect("asked for");
        for t in twenty_times(&engagement, &fight) {
            for side in Side::BOTH {
                let strength = trajectory.strengths_at(t)[side];
                let start = engagement.sides[side].start;
                if strength <= ends(&fight)[side as usize] + 1e-9 * start || strength >= start {
                    continue;
                }
                let found = trajectory.time_to_strength(side, strength);
                prop_assert!(found.is_some(), "{side:?} is at {strength:e} at {t:e}");
                let again = trajectory.strengths_at(found.unwrap_or(0.0))[side];
                prop_assert!((again - strength).abs() <= 3.0 * rounding(&fight) * start, "{side:?}: {again:e} for {strength:e}");
            }
        }
    }
}

/// The fight as a piece.
fn piece(engagement: &Engagement) -> Box<Piece> {
    plain_piece(engagement).expect("a fight of two fires alone")
}

/// Whether `side` can be brought to nothing in finite time by what the exponents say: next to nothing its losses go as
/// its strength to a power, and below 1 that ends; at parity both powers count together.
fn ends_by_exponents(engagement: &Engagement, side: Side, parity: bool) -> bool {
    let fire = |side: Side| &engagement.sides[side].fire;
    let q = vanishing(fire(side.enemy()));
    if !parity {
        return q < 1.0;
    }
    let (q_enemy, p) = (
        vanishing(fire(side)),
        shooters(fire(side)) * shooters(fire(side.enemy())),
    );
    q < 1.0 && q_enemy < 1.0 && p < (1.0 - q) * (1.0 - q_enemy)
}

proptest! {
    #![proptest_config(config(CASES))]

    /// Each thousandfold fall of the loser takes ever less time where the fight ends, and no less where it never does.
    #[test]
    fn whether_it_ends_follows_from_the_exponents_and_shows(engagement in engagement()) {
        let mut engagement = engagement;
        for side in Side::BOTH {
            engagement.sides[side].break_point = 1.0;
            engagement.sides[side].lost = 0.0;
        }
        // Nearer to parity the winner still falls with the loser over many decades.
        let off = distance_from_tie(&engagement);
        prop_assume!(off > 0.5 || off.is_nan());
        let outcome = fight(&engagement, Effort::Outcome).outcome;
        let loser = match outcome.to_the_last {
            Some(ToTheLast::X) => Side::Y,
            Some(_) => Side::X,
            None => return Ok(()),
        };
        // Next to 1, or next to the logarithm, the difference shows only after more decades than there are.
        let q = vanishing(&engagement.sides[loser.enemy()].fire);
        let own = terms(&engagement.sides[loser], &engagement.sides[loser.enemy()]);
        prop_assume!((q == 1.0 || (q - 1.0).abs() > 0.02) && own.iter().all(|(_, order)| *order > 0.25));
        // A winner with less left than a double holds takes longer than one holds, too.
        prop_assume!(outcome.sides()[loser.enemy()].end > Some(1e-100));
        let ends = ends_by_exponents(&engagement, loser, false);
        prop_assert_eq!(outcome.ended == Ended::Break, ends, "{:?} of {:?}", outcome.ended, loser);
        // From where the loser's factor has come to its power: far below the half of a search.
        let half = match engagement.sides[loser.enemy()].fire {
            Fire { law: FireLaw::Search, half: Some(half), .. } if half > 0.0 => half,
            _ => f64::INFINITY,
        };
        let from = (1e-3 * half).min(0.1 * engagement.sides[loser].start);
        let point = piece(&engagement).point_with(loser, from.into());
        for side in Side::BOTH {
            engagement.sides[side].start = point.left[side];
        }
        let piece = piece(&engagement);
        let time_down_to = |part: f64| piece.time_to(&piece.point_with(loser, (from * part).into()));
        let times = [1e-3, 1e-6, 1e-9].map(time_down_to);
        let (before, after) = (times[1] - times[0], times[2] - times[1]);
        if ends {
            prop_assert!(after <= 0.95 * before, "{times:?}");
        } else {
            prop_assert!(after >= 0.999 * before, "{times:?}");
        }
    }

    /// At parity both are at nothing together, and in finite time only under some powers.
    #[test]
    fn parity_ends_where_the_exponents_let_it(engagement in engagement()) {
        let mut engagement = engagement;
        for side in Side::BOTH {
            engagement.sides[side].break_point = 1.0;
            engagement.sides[side].lost = 0.0;
        }
        let Both { x, y } = engagement.sides.clone();
        let tied = cost(&x, &y, 0.0) / (cost(&y, &x, 0.0) / y.fire.rate);
        prop_assume!(tied.is_finite() && tied > 0.0);
        engagement.sides.y.fire.rate = tied;
        let outcome = fight(&engagement, Effort::Outcome).outcome;
        // The costs here are plain doubles, and not always near enough.
        prop_assume!(outcome.to_the_last == Some(ToTheLast::Parity));
        let ends = ends_by_exponents(&engagement, Side::X, true);
        prop_assert_eq!(outcome.breaks == Breaks::Both, ends);
        prop_assert_eq!(ends, ends_by_exponents(&engagement, Side::Y, true));
        prop_assert_eq!((outcome.x.end, outcome.y.end), (Some(0.0), Some(0.0)));
    }
}
