//! The working of an engagement with a schedule: each stretch with its equations, its method, the formula with numbers,
//! and what it hands over to the next.

use super::format::{time as time_in_words, with_unit};
use super::math::*;
use super::timeline::timeline;
use super::times;
use super::working::{WorkingLine, area};
use crate::conditions::{Conditions, Growth};
use crate::fight::{Effort, fight};
use crate::linear_system::{LinearSystem, Part};
use crate::motion::Motion;
use crate::outcome::{Method, Outcome};
use crate::piece::Piece;
use crate::sides::{Both, Side};
use crate::statement::Statement;
use crate::stretch::Stretch;
use crate::trajectory::Trajectory;

const NAMES: Both<&str> = Both { x: "x", y: "y" };

/// The lines of the working, stretch by stretch.
pub(super) fn lines(statement: &Statement, outcome: &Outcome) -> Vec<WorkingLine> {
    let fight = fight(&statement.engagement(), Effort::Trajectory);
    let mut lines = vec![line("letters", letters(statement), None)];
    let Some(trajectory) = &fight.trajectory else {
        return lines;
    };
    let moments = timeline(statement, &fight);
    let happens_at = |time: f64| {
        let moment = moments.iter().find(|moment| moment.time == time)?;
        Some(line("", format!("At {}: {}", moment.at, moment.what), None))
    };
    let moved = moved_at_end(trajectory);
    for (place, stretch) in trajectory.stretches.iter().enumerate() {
        lines.extend(happens_at(stretch.from).filter(|_| place > 0));
        let is_last = place + 1 == trajectory.stretches.len();
        let end = trajectory.end.filter(|_| is_last && moved.is_none());
        lines.extend(stretch_lines(statement, stretch, place, end));
    }
    if let (Some(time), Some(end)) = (moved, trajectory.end) {
        lines.extend(happens_at(time));
        lines.push(line("left", "After that there are", Some(strengths(end))));
    }
    lines.extend(end_lines(statement, trajectory, outcome));
    lines
}

fn line(name: &'static str, words: impl Into<String>, math: Option<Math>) -> WorkingLine {
    WorkingLine {
        name,
        words: words.into(),
        math,
    }
}

fn letters(statement: &Statement) -> String {
    let names = &statement.names;
    format!(
        "x is the strength of {} and y that of {}, in {}; t is the time in {} since the beginning of each stretch; \
         numbers to six significant digits, worked out in full: by hand the last may differ",
        names.x,
        names.y,
        statement.counted,
        statement.unit.symbol()
    )
}

/// When the fight ended, where at that very moment somebody still came or went.
fn moved_at_end(trajectory: &Trajectory) -> Option<f64> {
    let end = trajectory.ends().filter(|end| *end > 0.0)?;
    let last = trajectory.instants.iter().find(|instant| instant.time == end)?;
    let moves = |side: &Side| last.arrivals[*side] > 0.0 || last.went[*side] > 0.0;
    Side::BOTH.iter().any(moves).then_some(end)
}

/// How many are left of each side.
fn strengths(left: Both<f64>) -> Math {
    both(|side| equal(&[letter(NAMES[side]), number(left[side])]))
}

/// The lines of a stretch, which hands over the strengths `end`, its own where there are none.
fn stretch_lines(
    statement: &Statement,
    stretch: &Stretch,
    place: usize,
    end: Option<Both<f64>>,
) -> Vec<WorkingLine> {
    let unit = statement.unit;
    let until = match stretch.to {
        Some(to) => format!("to {}", with_unit(to, unit)),
        None => "on".into(),
    };
    let begins = both(|side| equal(&[marked(NAMES[side], "0"), number(stretch.start[side])]));
    let number_of = place + 1;
    let words = format!(
        "Stretch {number_of}, from {} {until}, begins with",
        with_unit(stretch.from, unit)
    );
    let mut lines = vec![line("", words, Some(begins))];
    for side in Side::BOTH {
        let words = format!("{} changes by", statement.names[side]);
        lines.push(line("", words, Some(equation(&stretch.conditions, side))));
    }
    lines.extend(ways(statement, stretch));
    lines.extend(method(stretch));
    if let Some(to) = stretch.to {
        let length = to - stretch.from;
        let hands = strengths(end.unwrap_or_else(|| stretch.strengths_at(length)));
        let words = format!("At its end, t = {}, it hands over", number(length).text);
        lines.push(line(if end.is_some() { "left" } else { "" }, words, Some(hands)));
    }
    lines
}

/// What is said of both sides.
fn both(of: impl Fn(Side) -> Math) -> Math {
    beside(&of(Side::X), &of(Side::Y))
}

/// dx/dt with this stretch's numbers.
fn equation(conditions: &Conditions, side: Side) -> Math {
    let enemy = side.enemy();
    let (own, other) = (letter(NAMES[side]), letter(NAMES[enemy]));
    let mut gains = Vec::new();
    let mut losses = Vec::new();
    if conditions.flow[side] > 0.0 {
        gains.push(number(conditions.flow[side]));
    }
    let fire = &conditions.fire[enemy];
    if fire.takes_effect() {
        let mut factors = vec![number(fire.rate)];
        if let Some(growth) = conditions.growth[enemy] {
            factors.push(grown(&growth));
        }
        let shooters = fire.shooters().exponent;
        if shooters != 0.0 {
            factors.push(power(&other, shooters));
        }
        let [first, second] = fire.per_target();
        if second.coefficient > 0.0 {
            factors.push(over(&own, &plus(&[own.clone(), number(second.coefficient)])));
        } else if first.exponent != 0.0 {
            factors.push(power(&own, -first.exponent));
        }
        losses.push(times(&factors));
    }
    let part = conditions.part_lost(side);
    if part > 0.0 {
        losses.push(times(&[number(part), own]));
    }
    let steady = conditions.steadily_lost(side);
    if steady > 0.0 {
        losses.push(number(steady));
    }
    let right = match (gains.first(), losses.is_empty()) {
        (None, true) => number(0.0),
        (Some(gain), true) => gain.clone(),
        (None, false) => negative(&plus(&losses)),
        (Some(gain), false) => minus(gain, &plus(&losses)),
    };
    equal(&[derivative(NAMES[side]), right])
}

/// How far each side is from its break line.
fn ways(statement: &Statement, stretch: &Stretch) -> Vec<WorkingLine> {
    let engagement = statement.engagement();
    let way = |side: Side| {
        let ledger = &stretch.ledger[side];
        let break_point = engagement.sides[side].break_point;
        let lost = ledger.lost_before + ledger.losses.all;
        let committed = times(&[number(break_point), number(ledger.committed.into())]);
        let rest = number(f64::from(ledger.committed * break_point - lost));
        let words = format!(
            "{} breaks at {} of what it has committed; it may still lose",
            statement.names[side],
            number(break_point).text
        );
        line("", words, Some(equal(&[minus(&committed, &number(lost)), rest])))
    };
    Side::BOTH.into_iter().map(way).collect()
}

/// The method of a stretch, and its formula with numbers.
fn method(stretch: &Stretch) -> Vec<WorkingLine> {
    if let Some(system) = stretch.linear() {
        return linear(system);
    }
    let words = match stretch.method() {
        Method::ClosedForm => {
            "It is solved by the state equation, which is constant along it, and a formula in time"
        }
        Method::Quadrature => {
            "Who breaks and what is left come from the state equation, which is constant along it, the time from an \
             integral"
        }
        Method::Integration => {
            "It is integrated by Taylor series of order 20, each step good to the rounding of the strengths"
        }
    };
    let constant = stretch.piece().and_then(|piece| state_equation(piece, stretch));
    let mut lines = vec![line("", words, constant)];
    lines.extend(
        stretch
            .piece()
            .and_then(|piece| time_formula(piece, stretch))
            .into_iter()
            .flatten(),
    );
    lines
}

/// What X costs less what Y costs, from the beginning of the stretch down to x and y: 0 all along it.
fn state_equation(piece: &Piece, stretch: &Stretch) -> Option<Math> {
    let cost = |side: Side| {
        let (from, to) = (number(stretch.start[side]), letter(NAMES[side]));
        let terms: Vec<Math> = piece
            .equation
            .active(side)
            .iter()
            .map(|term| area(term, 1.0, &from, Some(&to)))
            .collect();
        (!terms.is_empty()).then(|| plus(&terms))
    };
    Some(equal(&[cost(Side::X)?, cost(Side::Y)?]))
}

/// How long the stretch is, from the strengths at both its ends; where its rates grow together, how long it would be at full
/// rates.
fn time_formula(piece: &Piece, stretch: &Stretch) -> Option<Vec<WorkingLine>> {
    let length = stretch.to? - stretch.from;
    if !stretch.conditions.are_plain() || piece.motion == Motion::Still {
        return None;
    }
    let growth = stretch.conditions.shared_growth()?;
    let full = growth.map_or(length, |growth| growth.until(length));
    let point = piece.point_at(full);
    let loser = if point.fallen.x / stretch.start.x > point.fallen.y / stretch.start.y {
        Side::X
    } else {
        Side::Y
    };
    let constant = times::constant(piece);
    let constant = constant.map(|constant| line("", times::CONSTANT, Some(constant)));
    // Where its rates grow together the formula is that of their growth summed over the time.
    let time = match growth {
        Some(growth) => integral(&number(0.0), &number(length), &grown(&growth), "t"),
        None => letter("t"),
    };
    let formula = times::formula(piece, &point, loser);
    let time = line(
        "",
        "From its first strengths to its last, which come next, it takes",
        Some(equal(&[time, formula, number(full)])),
    );
    Some(constant.into_iter().chain([time]).collect())
}

/// The factor on a rate that grows.
fn grown(growth: &Growth) -> Math {
    let open = plus(&[number(growth.value), times(&[number(growth.slope), letter("t")])]);
    power(&open, growth.power)
}

/// The eigenvalues of a linear system, and its strengths as sums of exponentials.
fn linear(system: &LinearSystem) -> Vec<WorkingLine> {
    let [high, low] = system.eigenvalues();
    let mut math = equal(&[letter("λ"), number(high)]);
    math.mathml += "<mo>,</mo>";
    math.mathml += &number(low).mathml;
    math.text += &format!(", {}", number(low).text);
    let words = "It is linear, and solved in closed form by the exponentials of its eigenvalues";
    let solution = system.solution();
    let strength = |side: Side| {
        let parts: Vec<Math> = solution[side].iter().map(part).collect();
        let sum = if parts.is_empty() {
            number(0.0)
        } else {
            plus(&parts)
        };
        equal(&[letter(NAMES[side]), sum])
    };
    vec![
        line("", words, Some(math)),
        line("", "Its strengths are", Some(both(strength))),
    ]
}

/// number · tⁿ · e^(λt), without what is 1.
fn part(part: &Part) -> Math {
    let mut factors = vec![number(part.number)];
    if part.power > 0 {
        factors.push(power(&letter("t"), f64::from(part.power)));
    }
    if part.eigenvalue != 0.0 {
        factors.push(function("exp", &times(&[number(part.eigenvalue), letter("t")])));
    }
    match &factors[..] {
        [only] => only.clone(),
        _ => times(&factors),
    }
}

fn end_lines(statement: &Statement, trajectory: &Trajectory, outcome: &Outcome) -> Vec<WorkingLine> {
    let mut lines = Vec::new();
    match (trajectory.ends(), outcome.time) {
        (Some(_), Some(time)) => {
            let words = format!(
                "{}, after {}",
                who(statement, outcome),
                time_in_words(time, statement.unit)
            );
            lines.push(line("time", words, Some(equal(&[letter("t"), number(time)]))));
        }
        (Some(end), None) => {
            let words = format!(
                "Neither side has broken by {}",
                time_in_words(end, statement.unit)
            );
            lines.push(line("clock", words, None));
        }
        (None, _) => {
            let end = |side: Side| match outcome.sides()[side].end {
                Some(end) => number(end).text,
                None => "without bound".into(),
            };
            let words = format!(
                "Neither side ever breaks; in the end x tends to {}, y to {}",
                end(Side::X),
                end(Side::Y)
            );
            lines.push(line("left", words, None));
        }
    }
    for (name, ratio) in [
        ("exchange", outcome.loss_exchange_ratio),
        ("exchange.fraction", outcome.fractional_exchange_ratio),
    ] {
        let Some(ratio) = ratio else { continue };
        let sides = outcome.sides();
        let lost = Both::of(|side| number(sides[side].losses.fire + sides[side].losses.support));
        let names = &statement.names;
        let (words, math) = if name == "exchange" {
            let words = format!(
                "The loss exchange ratio, {}'s losses by fire and support over {}'s",
                names.y, names.x
            );
            (words, over(&lost.y, &lost.x))
        } else {
            let part = Both::of(|side| over(&lost[side], &number(sides[side].committed)));
            (
                "The same, each over what its side committed".to_owned(),
                over(&part.y, &part.x),
            )
        };
        lines.push(line(name, words, Some(equal(&[math, number(ratio)]))));
    }
    lines
}

fn who(statement: &Statement, outcome: &Outcome) -> String {
    match outcome.breaks {
        crate::outcome::Breaks::X => format!("{} breaks first", statement.names.x),
        crate::outcome::Breaks::Y => format!("{} breaks first", statement.names.y),
        _ => "Both break at the same moment".into(),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::pairs::Pairs;

    fn texts(link: &str) -> Vec<String> {
        let statement = Statement::read(&Pairs::parse(link)).expect(link);
        let outcome = fight(&statement.engagement(), Effort::Outcome).outcome;
        let lines = lines(&statement, &outcome);
        let texts = lines.iter().map(WorkingLine::text);
        texts.map(|text| text.replace('\u{a0}', " ")).collect()
    }

    /// A stretch hands over what it leaves, and not also what comes at that very moment.
    #[test]
    fn who_comes_as_the_clock_ends_it_comes_after_the_last_stretch() {
        let texts =
            texts("x.start=400&x.rate=1&y.start=1000&y.fire=none&y.join=64@2&until=2&x.name=Tarn&y.name=Osk");
        let place = |text: &str| texts.iter().position(|line| line.contains(text));
        let (hands, joins) = (
            place("hands over: x = 400, y = 200"),
            place("At 2 h: 64 join Osk"),
        );
        let left = place("After that there are: x = 400, y = 264");
        assert!(hands.is_some() && hands < joins && joins < left, "{texts:#?}");
    }

    /// Where both fires grow alike the time runs by their growth: there was no formula. At half the range, 0.05·t of the reach
    /// closed in t, x and y at the same rates come down by exp(−0.1·T) from 100 each, to the half after T = 10·ln 2.
    #[test]
    fn a_stretch_whose_fires_grow_alike_has_its_formula() {
        let texts = texts(
            "x.start=100&x.rate=0.1&x.break=0.5&y.start=100&y.rate=0.1&y.break=0.5&range=10&range.closing=1&\
             x.reach=20&y.reach=20",
        );
        let takes = texts
            .iter()
            .find(|line| line.starts_with("From its first strengths"));
        let takes = takes.unwrap_or_else(|| panic!("{texts:#?}"));
        // 0.5·t + 0.025·t² = 10·ln 2: t = −10 + √(100 + 400·ln 2).
        for part in ["9.42315", "(0.5 + 0.05·t)", "ln(", "= 6.93147"] {
            assert!(takes.contains(part), "{takes}");
        }
    }

    /// A linear stretch shows its strengths in time also where an eigenvalue is 0 or both agree: they had no formula.
    #[test]
    fn every_linear_stretch_has_its_formula() {
        let sides = "x.start=100&y.start=50&y.fire=none";
        for (terms, formula) in [
            // One eigenvalue 0: x gains 2 an hour, y fades.
            (
                "x.fire=none&y.wastage=0.5&x.flow=2@0/",
                "x = 100 + 2·t, y = 50·exp((−0.5)·t)",
            ),
            // Both 0: what x's growing number takes of y.
            (
                "x.rate=0.01&x.flow=2@0/",
                "x = 100 + 2·t, y = 50 + (−1)·t + (−0.01)·t²",
            ),
            // Both the same.
            (
                "x.rate=0.01&x.wastage=0.5&y.wastage=0.5",
                "x = 100·exp((−0.5)·t), y = 50·exp((−0.5)·t) + (−1)·t·exp((−0.5)·t)",
            ),
            // Apart: y = 50·e^(−t) − 2·(e^(−0.5·t) − e^(−t)).
            (
                "x.rate=0.01&x.wastage=0.5&y.wastage=1",
                "x = 100·exp((−0.5)·t), y = (−2)·exp((−0.5)·t) + 52·exp((−1)·t)",
            ),
        ] {
            let texts = texts(&format!("{sides}&{terms}&until=9"));
            let shown = texts.iter().find(|line| line.starts_with("Its strengths are"));
            assert_eq!(
                shown.map(String::as_str),
                Some(format!("Its strengths are: {formula}").as_str())
            );
        }
    }
}
