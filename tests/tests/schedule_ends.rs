//! How a schedule ends that never comes to a break, and what its books then say.

use aftercount_core::outcome::{Breaks, Ended, Outcome, ToTheLast};
use aftercount_core::pairs::Pairs;
use aftercount_core::statement::Statement;
use aftercount_core::words::figures::figures;
use aftercount_core::words::sentence::sentence;
use aftercount_tests::tables::{assert_close, outcome};

fn statement(link: &str) -> Statement {
    Statement::read(&Pairs::parse(link)).unwrap_or_else(|why| panic!("{link}: {why:?}"))
}

fn ended(link: &str) -> Outcome {
    let engagement = statement(link).engagement();
    aftercount_core::fight::fight(&engagement, aftercount_core::fight::Effort::Outcome).outcome
}

/// X gains 5 an hour and loses a twentieth of itself by wastage: it comes to rest at 100. Y fades by fire at its area.
const BALANCE: &str =
    "x.start=40&x.fire=none&x.wastage=0.05&x.flow=5@0/&y.start=50&y.fire=none&x.support.area=0.1";

/// What flows in for ever has no bound, nor have the losses that balance it; JSON has null for them, and the words say so.
#[test]
fn endless_reinforcement_has_no_bound_in_the_books() {
    let found = ended(BALANCE);
    assert_eq!((found.breaks, found.ended), (Breaks::Neither, Ended::Equilibrium));
    assert_close(found.x.end.expect("an end"), 100.0, 1e-12, "the balance");
    for endless in [
        found.x.joined,
        found.x.committed,
        found.x.losses.wastage,
        found.x.losses.all,
    ] {
        assert_eq!(endless, f64::INFINITY);
    }
    // What has a bound keeps it.
    assert_eq!(
        (found.x.losses.fire, found.x.losses.support, found.x.withdrawn),
        (0.0, 0.0, 0.0)
    );
    assert_close(found.y.losses.support, 50.0, 1e-12, "y fades to the last");
    assert_eq!((found.y.joined, found.y.end), (0.0, Some(0.0)));
    assert_eq!(found.to_the_last, Some(ToTheLast::X), "y fades, x stands");
    let answer = outcome(BALANCE);
    for key in ["joined", "committed"] {
        assert!(answer["x"][key].is_null(), "{key}: {answer}");
    }
    assert!(answer["x"]["losses"]["wastage"].is_null() && answer["x"]["losses"]["all"].is_null());
    assert!(answer["loss_exchange_ratio"].is_null(), "{answer}");
    let statement = statement(BALANCE);
    let words = sentence(&statement, &found);
    assert!(words.contains("Side X 100, reinforced without end"), "{words}");
    let rows = figures(&statement, &found).rows;
    let x = |label: &str| {
        &rows
            .iter()
            .find(|row| row.label.starts_with(label))
            .expect(label)
            .values
            .x
    };
    for label in ["Joined", "Committed in all", "Losses (", "Losses by wastage"] {
        assert_eq!(x(label), "without bound", "{label}");
    }
    assert!(
        rows.iter().all(|row| ![&row.values.x, &row.values.y]
            .iter()
            .any(|text| text.contains("NaN"))),
        "{rows:?}"
    );
}

/// Cut off by a clock, however late, the books of the same engagement balance, and approach what they tend to.
#[test]
fn a_clock_gives_endless_reinforcement_its_numbers() {
    for until in [1.0, 50.0, 1e4, 1e9] {
        let found = ended(&format!("{BALANCE}&until={until}"));
        assert_close(found.x.joined, 5.0 * until, 1e-15, "joined");
        let there = found.x.start + found.x.joined;
        let gone = found.x.end.expect("an end") + found.x.losses.all;
        assert_close(gone, there, 1e-13, &format!("at {until}"));
    }
}

/// Growth without bound: y grows by 1 an hour for ever, and its fire is next to none, yet it grows with y: x is down to
/// nothing when 1e-300·t²/2 is 1e9.
#[test]
fn a_break_in_the_far_future_is_a_break() {
    let found = ended("x.start=1e9&x.rate=0&y.start=1&y.rate=1e-300&y.flow=1@0/");
    assert_eq!((found.breaks, found.ended), (Breaks::X, Ended::Break));
    assert_close(
        found.time.expect("a time") / 1e154,
        20.0_f64.sqrt(),
        1e-12,
        "the time",
    );
    assert_close(found.x.losses.fire, 1e9, 1e-12, "what x lost");
    // Without that fire y grows, and nobody breaks.
    let growth = ended("x.start=1e9&x.rate=0&y.start=1&y.rate=0&y.flow=1@0/");
    assert_eq!(
        (growth.ended, growth.y.end, growth.x.end),
        (Ended::Growth, None, Some(1e9))
    );
    assert_eq!((growth.y.joined, growth.y.losses.all), (f64::INFINITY, 0.0));
}

/// A range that takes 1e18 hours to close, under rates of 1e-300, leaves numbers.
#[test]
fn an_extreme_closing_range_leaves_numbers() {
    let closing = "range=1e9&range.closing=1e-9&x.reach=1e9&y.reach=1e9&x.reach.shape=10";
    for (x, y) in [("1e-300", "1e-300"), ("0", "1e-300"), ("1e-300", "0.05")] {
        for flow in ["", "&y.flow=1@0/", "&y.wastage=1e-300"] {
            let link = format!("x.start=1e9&x.rate={x}&y.start=1&y.rate={y}&{closing}{flow}");
            let found = ended(&link);
            for side in [&found.x, &found.y] {
                let losses = side.losses;
                assert!(losses.fire >= 0.0 && losses.all >= 0.0, "{link}: {losses:?}");
                assert!(
                    !losses.all.is_infinite() || side.joined.is_infinite(),
                    "{link}: {losses:?}"
                );
            }
        }
    }
}

/// Who has nobody left there, some of them withdrawn, is not who would be left.
#[test]
fn who_is_withdrawn_or_fades_is_not_left_in_the_end() {
    let withdrawn = ended("x.start=400&x.rate=0.01&y.start=100&y.rate=0.01&y.break=0.5&y.join=-1000@1");
    assert_eq!(
        (withdrawn.ended, withdrawn.to_the_last),
        (Ended::Withdrawn, Some(ToTheLast::X))
    );
    let searched = "x.start=600&x.fire=search&x.half=80&x.rate=0.03&x.wastage=0.002&y.start=500&y.fire=power&y.p=0.8&y.q=0.4\
                    &y.rate=0.012&y.support.area=0.003&x.join=30@1,-10@3";
    let last = ended(searched);
    assert_eq!(
        (last.ended, last.to_the_last),
        (Ended::Withdrawn, Some(ToTheLast::Y))
    );
    // With a break point on the way the end is the same, found as soon as it is sure.
    let broken = ended(&format!("{searched}&x.break=0.5"));
    assert_eq!(
        (broken.breaks, broken.to_the_last),
        (Breaks::X, Some(ToTheLast::Y))
    );
}

/// A side with nobody there whose first reinforcement is lost as it comes breaks at once; one whose line is below 0 waits
/// until its losses have brought it up, or the enemy is too weak.
#[test]
fn reinforcement_that_is_lost_as_it_comes() {
    let at_once =
        ended("x.start=0&x.fire=search&x.rate=0.04&x.half=1&x.flow=1@5/&y.start=600&y.rate=0.05&until=100");
    assert_eq!((at_once.breaks, at_once.time), (Breaks::X, Some(5.0)));
    // 40 of 100 withdrawn, the rest lost: 60 + 2t are lost of 100 + 2t, which is 0.8 of it at 50 h, unless the enemy fades.
    let pinned = "x.start=100&x.break=0.8&x.fire=none&x.join=-40@0&x.flow=2@9/&y.start=300&y.rate=0.05";
    let waits = ended(pinned);
    assert_eq!(waits.breaks, Breaks::X, "{waits:?}");
    assert_close(waits.time.expect("a time"), 59.0, 1e-12, "9 h and 50");
    assert_close(waits.x.losses.fire, 160.0, 1e-12, "60, and 2 an hour");
    let fades = ended(&format!("{pinned}&y.wastage=0.2&until=60"));
    assert_eq!(fades.ended, Ended::Clock, "{fades:?}");
    // Freed when y's fire is 2 an hour: 40 of y are left.
    assert!(fades.x.end.expect("an end") > 10.0, "{fades:?}");
    let there = fades.x.start + fades.x.joined - fades.x.withdrawn;
    assert_close(
        fades.x.end.expect("an end") + fades.x.losses.all,
        there,
        1e-12,
        "the books",
    );
}

/// Where an answer would take more evaluations than it may, it says how far it was worked out.
#[test]
fn what_would_take_too_long_says_how_far_it_is_known() {
    // Y holds X in a balance of his own for longer than a double has time: 1e302 hours at the least.
    let link = "x.start=400&x.fire=power&x.rate=1e-300&x.p=2&x.q=3&x.flow=1@0/&y.start=0.3&y.fire=area&y.rate=0.4323&y.break=0.999999999&y.support.area=0.0117";
    let found = ended(link);
    if found.ended == Ended::Unfinished {
        let to = found
            .pieces
            .last()
            .and_then(|piece| piece.to)
            .expect("it is cut off");
        assert!(to > 0.0 && found.time.is_none() && found.breaks == Breaks::Neither);
        let words = sentence(&statement(link), &found);
        assert!(
            words.contains("would take more steps than an answer may"),
            "{words}"
        );
        let there = found.y.start + found.y.joined;
        assert_close(
            found.y.end.expect("an end") + found.y.losses.all,
            there,
            1e-9,
            "the books",
        );
    } else {
        panic!("it is worked out now: find another, {found:?}");
    }
}

/// Two sides of which whoever comes is lost at once, both from the same moment on: only the first was said to break.
#[test]
fn two_that_are_lost_as_they_come_break_together() {
    let link = "x.start=0&x.fire=none&x.support.aimed=2&x.flow=1@3/&y.start=0&y.fire=none&y.support.aimed=2&y.flow=1@3/";
    let found = ended(link);
    assert_eq!((found.breaks, found.time), (Breaks::Both, Some(3.0)));
    // One that was withdrawn before waits for its line to rise; the other breaks at once.
    let found = ended(&link.replace("x.start=0", "x.start=10&x.break=0.5&x.join=-10@0"));
    assert_eq!((found.breaks, found.time), (Breaks::Y, Some(3.0)));
}

/// A side that had fallen below one before the last stretch began was said to do so at its beginning.
#[test]
fn who_falls_below_one_does_so_in_whatever_stretch() {
    let alone = "x.start=100&x.fire=none&y.start=300&y.fire=logarithmic&y.rate=1";
    let at = 100_f64.ln();
    for (later, known) in [("", at), ("&phase1.from=3", at), ("&phase1.from=10", at)] {
        let found = ended(&format!("{alone}{later}"));
        assert_close(found.below_one.expect("it fades"), known, 1e-13, later);
    }
    // 100·e⁻² are 13.53; with 13 of them gone less than one is left at once.
    let leaves = ended(&format!("{alone}&x.join=-13@2"));
    assert_eq!(leaves.below_one, Some(2.0));
    let returns = ended(&format!("{alone}&x.join=50@8"));
    let at_8 = 100.0 * (-8_f64).exp() + 50.0;
    assert_close(
        returns.below_one.expect("it fades"),
        8.0 + at_8.ln(),
        1e-13,
        "a reserve",
    );
}

/// At parity two sides that also waste alike wear each other out for ever: each was brought to nothing in 320 hours, by what
/// rounding had left along the growing eigenvector, and which of them changed with a cut.
#[test]
fn parity_with_wastage_is_parity() {
    let sides = "x.start=600&x.rate=0.04&x.wastage=0.01&y.start=400&y.rate=0.09&y.wastage=0.01";
    for part in 0..40 {
        let cut = match part {
            0 => String::new(),
            _ => format!("&phase1.from={}", f64::from(part) * 0.17),
        };
        let found = ended(&format!("{sides}{cut}"));
        let how = (found.breaks, found.ended, found.to_the_last);
        assert_eq!(
            how,
            (Breaks::Neither, Ended::Limit, Some(ToTheLast::Parity)),
            "{cut}"
        );
        assert_eq!((found.x.end, found.y.end), (Some(0.0), Some(0.0)), "{cut}");
        // x = 600·e^(−0.07·t), also where it is cut.
        let below_one = found.below_one.expect("both fade");
        assert_close(below_one, 400_f64.ln() / 0.07, 1e-12, &cut);
        let broken = ended(&format!("{sides}&x.break=0.3&y.break=0.3{cut}"));
        assert_eq!(
            (broken.breaks, broken.to_the_last),
            (Breaks::Both, Some(ToTheLast::Parity)),
            "{cut}"
        );
    }
    // Three roundings beside it, it is none.
    let stronger = 400_f64.next_up().next_up().next_up();
    let found = ended(&sides.replace("y.start=400", &format!("y.start={stronger}")));
    assert_eq!((found.breaks, found.to_the_last), (Breaks::X, Some(ToTheLast::Y)));
}

/// What is at its line at the clock is there, wherever its way is cut: of 996 cuts 31 came a rounding of the time late.
#[test]
fn a_line_at_the_clock_is_reached_behind_a_cut() {
    for (fire, clock, end) in [("x.rate=1", 10.0, 0.0), ("x.rate=1&y.break=0.3", 3.0, 700.0)] {
        for part in 1..997 {
            let cut = clock * f64::from(part) / 997.0;
            let link =
                format!("x.start=100&{fire}&y.start=1000&y.fire=none&until={clock}&phase1.from={cut:.6}");
            let found = ended(&link);
            assert_eq!((found.breaks, found.y.end), (Breaks::Y, Some(end)), "{link}");
        }
    }
}

/// Nobody of X has been committed until its flow begins at 3 h, so that it cannot break: where Y came to nothing before, it was
/// said to break with it.
#[test]
fn a_side_of_which_nobody_has_been_committed_does_not_break() {
    let found = ended(
        "x.start=0&x.fire=area&x.rate=0.04&x.support.area=1e9&x.flow=0.001@3/5&y.start=1e-9&y.fire=power&\
         y.rate=1e-5&y.p=1&y.q=2&y.support.area=0.04&y.support.aimed=1e-20&\
         y.flow=1e-300@1e-9/1e9,1e-5@735e-2/&range=1&range.closing=5177e-5&range.least=500&x.reach=500&\
         x.reach.shape=2&phase1.from=25e-0&phase1.x.fire=logarithmic&phase1.x.rate=0.04&\
         phase2.from=1266e-3&phase2.x.support.aimed=1e-5&phase3.from=5&phase3.x.fire=logarithmic&\
         phase3.x.rate=0.05&phase4.from=1e-9&phase4.x.fire=area&phase4.x.rate=0",
    );
    assert_eq!(
        (found.breaks, found.ended),
        (Breaks::Y, Ended::Break),
        "{found:?}"
    );
    assert_close(
        found.time.expect("a time"),
        1.266,
        1e-12,
        "as the support of X begins",
    );
}

/// Y is gone at the moment at which its reinforcement begins: it was gone by then. The integrator ends a hair before, and took
/// what was left up again and again, to no end.
#[test]
fn a_break_at_the_moment_at_which_something_begins_is_a_break() {
    let found = ended(
        "x.start=600&x.fire=power&x.rate=1e-20&x.p=1.5&x.q=0.9&x.support.aimed=50&y.start=100&y.fire=area&y.rate=1e-5\
         &y.flow=5@2/6",
    );
    assert_eq!(
        (found.breaks, found.ended),
        (Breaks::Y, Ended::Break),
        "{found:?}"
    );
    assert_close(found.time.expect("a time"), 2.0, 1e-15, "when it begins");
}

/// Where both fires grow from nothing, next to nothing else lost made the unit of the series longer than any number, and the
/// core went on for ever. It is then the state equation's fight, by another method: only one term of the series in as many as
/// the growth has orders is there, and what the last two say of the length of a step is nothing.
#[test]
fn next_to_nothing_lost_while_fire_grows_from_nothing_is_worked_out() {
    for shape in ["0.3", "1", "1.5", "2", "3", "4", "7", "9.5", "10"] {
        let link = format!(
            "x.start=839&x.break=0.6&x.fire=power&x.p=0.79&x.q=0.76&x.rate=0.00090384&y.start=881&y.break=0.3&y.fire=search&\
             y.half=143&y.rate=0.01448&range=2000&range.closing=100&range.least=100&x.reach=500&x.reach.shape={shape}&\
             y.reach=500&y.reach.shape={shape}"
        );
        let alone = ended(&link);
        for lost in ["5e-324", "1e-310", "1e-300", "1e-20"] {
            let found = ended(&format!("{link}&y.support.area={lost}"));
            let what = format!("shape {shape}, {lost}");
            assert_eq!(found.breaks, alone.breaks, "{what}");
            assert_close(
                found.time.expect("a time"),
                alone.time.expect("a time"),
                1e-14,
                &what,
            );
        }
    }
}
