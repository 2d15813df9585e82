//! What must hold for every fight and every text, tried on thousands of each.
//!
//! Half of the fights are near the degenerate: planted ties, neighbours of a tie in their last digits, ratios of rates
//! and strengths of many powers of ten. The seed is fixed: the same cases come on every machine and every run.

use aftercount_core::fight::{Effort, Fight, fight, plain_piece};
use aftercount_core::laws::FireLaw;
use aftercount_core::outcome::{Breaks, Ended, Method, ToTheLast};
use aftercount_core::pairs::Pairs;
use aftercount_core::piece::Piece;
use aftercount_core::sides::{Both, Side};
use aftercount_core::terms::{Engagement, Fire, SideTerms};
use aftercount_tests::tables::relative_error;
use proptest::prelude::*;
use proptest::test_runner::{Config, RngSeed};

/// So many texts; half as many fights, each of which is worked out in full and often twice.
const CASES: u32 = 3000;

fn config(cases: u32) -> Config {
    Config {
        cases,
        max_global_rejects: 100_000,
        rng_seed: RngSeed::Fixed(1916),
        failure_persistence: None,
        ..Config::default()
    }
}

fn power_of_ten(low: f64, high: f64) -> impl Strategy<Value = f64> {
    (low..high).prop_map(|exponent| 10f64.powf(exponent))
}

fn law() -> impl Strategy<Value = FireLaw> {
    prop_oneof![
        4 => Just(FireLaw::Aimed),
        4 => Just(FireLaw::Area),
        3 => Just(FireLaw::Logarithmic),
        4 => Just(FireLaw::Search),
        5 => Just(FireLaw::Power),
        1 => Just(FireLaw::None),
    ]
}

/// An exponent: where the formulas change, next to that by a rounding, or anywhere.
fn exponent() -> impl Strategy<Value = f64> {
    let special = prop_oneof![
        Just(0.0),
        Just(0.5),
        Just(1.0),
        Just(1.5),
        Just(2.0),
        Just(1.0f64.next_down()),
        Just(1.0f64.next_up())
    ];
    prop_oneof![1 => special, 2 => 0.0f64..2.5, 1 => (0u32..25).prop_map(|tenths| f64::from(tenths) / 10.0)]
}

/// A fire, with all that any law may need.
fn fire() -> impl Strategy<Value = Fire<f64>> {
    let half = prop_oneof![1 => Just(0.0), 3 => power_of_ten(-12.0, 9.0)];
    let exponents = (exponent(), exponent());
    (law(), power_of_ten(-9.0, 9.0), half, exponents).prop_map(|(law, rate, half, (p, q))| Fire {
        law,
        rate,
        half: Some(half),
        p: Some(p),
        q: Some(q),
    })
}

/// One side; its line is no smaller a part of it than a thousandth, unless it fights to the last.
fn side() -> impl Strategy<Value = SideTerms<f64>> {
    let start = prop_oneof![2 => power_of_ten(0.0, 9.0), 1 => (1u32..2000).prop_map(f64::from)];
    let break_point = prop_oneof![2 => Just(1.0), 1 => 0.02f64..0.99, 1 => Just(0.5), 1 => Just(0.3)];
    let lost = prop_oneof![3 => Just(0.0), 1 => 0.0f64..0.9];
    (start, fire(), break_point, lost).prop_map(|(start, fire, break_point, share)| {
        let most = if break_point < 1.0 {
            start * break_point / (1.0 - break_point)
        } else {
            start
        };
        SideTerms::of_fire(start, share * most, fire, break_point)
    })
}

/// The exponent of the factor of a side's shooters.
fn shooters(fire: &Fire<f64>) -> f64 {
    match fire.law {
        FireLaw::Logarithmic | FireLaw::None => 0.0,
        FireLaw::Power => fire.p.expect("given"),
        _ => 1.0,
    }
}

/// 1 over the factor of the targets: coefficients and exponents.
fn per_target(fire: &Fire<f64>) -> [(f64, f64); 2] {
    match fire.law {
        FireLaw::Area | FireLaw::Logarithmic => [(1.0, -1.0), (0.0, 0.0)],
        FireLaw::Search => [(1.0, 0.0), (fire.half.expect("given"), -1.0)],
        FireLaw::Power => [(1.0, -fire.q.expect("given")), (0.0, 0.0)],
        FireLaw::Aimed | FireLaw::None => [(1.0, 0.0), (0.0, 0.0)],
    }
}

/// How the factor of the targets of a fire vanishes next to 0.
fn vanishing(fire: &Fire<f64>) -> f64 {
    let powers = per_target(fire).into_iter().filter(|power| power.0 > 0.0);
    powers.map(|power| -power.1).fold(0.0, f64::max)
}

/// Shooters over targets of a side: coefficients and orders of the integral.
fn terms(own: &SideTerms<f64>, enemy: &SideTerms<f64>) -> Vec<(f64, f64)> {
    let powers = per_target(&enemy.fire).into_iter().filter(|power| power.0 > 0.0);
    powers
        .map(|(coefficient, exponent)| (coefficient, exponent + shooters(&own.fire) + 1.0))
        .collect()
}

/// What it costs the enemy to bring a side from its start to `line`: its own rate × ∫ shooters / targets.
fn cost(own: &SideTerms<f64>, enemy: &SideTerms<f64>, line: f64) -> f64 {
    if own.fire.law == FireLaw::None {
        return 0.0;
    }
    let integral = |(coefficient, order): (f64, f64)| {
        if line == 0.0 && order <= 0.0 {
            return f64::INFINITY;
        }
        let span = (own.start / line).ln();
        coefficient
            * if line == 0.0 {
                own.start.powf(order) / order
            } else if order == 0.0 {
                span
            } else {
                line.powf(order) * (order * span).exp_m1() / order
            }
    };
    own.fire.rate * terms(own, enemy).into_iter().map(integral).sum::<f64>()
}

/// How much the cost of a side changes for a change of its strength.
fn slope(own: &SideTerms<f64>, enemy: &SideTerms<f64>, strength: f64) -> f64 {
    if own.fire.law == FireLaw::None {
        return 0.0;
    }
    let at = |(coefficient, order): (f64, f64)| coefficient * strength.powf(order - 1.0);
    own.fire.rate * terms(own, enemy).into_iter().map(at).sum::<f64>()
}

fn line(side: &SideTerms<f64>) -> f64 {
    (side.start + side.lost) * (1.0 - side.break_point)
}

/// How far from a tie a fight is planted.
#[derive(Clone, Copy, Debug)]
enum Planted {
    /// Nowhere near one.
    Nowhere,
    /// So many neighbouring doubles from it.
    Neighbours(i64),
    /// At this ratio of the costs.
    Ratio(f64),
}

fn planted() -> impl Strategy<Value = Planted> {
    prop_oneof![
        2 => Just(Planted::Nowhere),
        1 => (-6i64..=6).prop_map(Planted::Neighbours),
        1 => (power_of_ten(-14.0, -1.0), any::<bool>())
            .prop_map(|(off, less)| Planted::Ratio(if less { 1.0 - off } else { 1.0 + off })),
        3 => power_of_ten(-1.0, 1.0).prop_map(Planted::Ratio),
    ]
}

fn engagement() -> impl Strategy<Value = Engagement> {
    (side(), side(), planted()).prop_map(|(x, y, planted)| {
        let mut sides = Both {
            x: x.clone(),
            y: y.clone(),
        };
        let tied = cost(&x, &y, line(&x)) / (cost(&y, &x, line(&y)) / y.fire.rate);
        if tied.is_finite() && tied > 0.0 {
            sides.y.fire.rate = match planted {
                Planted::Nowhere => y.fire.rate,
                Planted::Neighbours(count) => f64::from_bits(tied.to_bits().saturating_add_signed(count)),
                Planted::Ratio(ratio) => tied * ratio,
            };
        }
        Engagement::of_sides(sides)
    })
}

/// How far the costs of the two lines are apart, in parts of the larger.
fn distance_from_tie(engagement: &Engagement) -> f64 {
    let Both { x, y } = &engagement.sides;
    let (of_x, of_y) = (cost(x, y, line(x)), cost(y, x, line(y)));
    (of_x - of_y).abs() / of_x.max(of_y)
}

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
    #![proptest_config(config(CASES / 2))]

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
fn piece(engagement: &Engagement) -> Piece {
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
    #![proptest_config(config(CASES / 2))]

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

/// Texts as users and their programs mangle them: plain, with marks of the grammar, with control and direction
/// characters, with escapes that are none.
fn any_text() -> impl Strategy<Value = String> {
    prop_oneof![
        "[a-z.]{1,8}",
        "[-=&%+#? @,:/;'\"<>|~0-9A-Fa-f.\u{0}\u{1b}\u{7f}\u{202e}\u{2212}\u{feff}]{0,12}",
        any::<String>(),
    ]
}

/// A link built of keys, texts and marks without regard to the grammar.
fn any_link() -> impl Strategy<Value = String> {
    let escape = prop_oneof![
        "%[0-9A-Fa-f]{2}",
        "%[0-9A-Za-z]?",
        Just("%FF".to_owned()),
        Just("%E2%88%92".to_owned())
    ];
    let mark = prop_oneof![
        Just("&"),
        Just("="),
        Just("#"),
        Just("?"),
        Just("+"),
        Just("v=1"),
        Just("x.start")
    ];
    let piece = prop_oneof![2 => any_text(), 2 => mark.prop_map(str::to_owned), 1 => escape];
    prop::collection::vec(piece, 0..14).prop_map(|pieces| pieces.concat())
}

/// The pairs with the version last, as the writer puts them.
fn in_written_order(pairs: &Pairs) -> Vec<(String, String)> {
    let mut all: Vec<(String, String)> = pairs
        .iter()
        .map(|(key, text)| (key.to_owned(), text.to_owned()))
        .collect();
    if !all.iter().any(|(key, _)| key == "v") {
        all.push(("v".into(), "1".into()));
    }
    all.sort_by_key(|(key, _)| key == "v");
    all
}

proptest! {
    #![proptest_config(config(CASES))]

    #[test]
    fn what_is_set_is_read_again(key in any_text(), text in any_text(), other in any_text()) {
        prop_assume!(!text.is_empty() && key != "v" && key != "note");
        let mut pairs = Pairs::parse("");
        pairs.set(&key, &text);
        if !other.is_empty() {
            pairs.set("note", &other);
        }
        let link = pairs.link();
        prop_assert!(link.ends_with("&v=1") || key.contains('?'), "{link}");
        let plain = |c: char| c.is_ascii_alphanumeric() || "-._,:@?/=&%".contains(c);
        prop_assert!(link.chars().all(plain), "{link}");
        let again = Pairs::parse(&link);
        prop_assert_eq!(again.get(&key), Some(text.as_str()), "{}", link);
        prop_assert_eq!(again.get("note").unwrap_or_default(), other, "{}", link);
    }

    #[test]
    fn any_link_is_written_as_it_reads(link in any_link()) {
        let pairs = Pairs::parse(&link);
        let written = pairs.link();
        let again = Pairs::parse(&written);
        prop_assert_eq!(in_written_order(&again), in_written_order(&pairs), "written {}", written);
        prop_assert_eq!(again.link(), written);
    }

    #[test]
    fn any_link_is_answered(link in any_link()) {
        let full = format!("x.start=600&y.start=400&x.rate=0.04&y.rate=0.05&{link}");
        for link in [link, full] {
            let json = aftercount_core::answer::answer(&link).to_json();
            prop_assert!(!json.contains('\n'), "one line: {json}");
            prop_assert!(serde_json::from_str::<serde_json::Value>(&json).is_ok(), "{json}");
        }
    }
}
