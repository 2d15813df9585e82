//! What of an engagement can be taken hold of in its pictures: where each handle stands, and what is written when it is
//! somewhere else.

use super::{Axes, Axis};
use crate::fight::Fight;
use crate::number;
use crate::quantity::Quantity;
use crate::sides::Side;
use crate::slots::{Part, Place};
use crate::statement::Statement;
use crate::words::format::{NO_BREAK, per_cent, six, strength};

/// What is taken hold of.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Grip {
    /// The start, in the picture of one side against the other: both strengths.
    Start,
    /// A reserve, counted from 0, in the picture over time: its time across, its size up.
    Reserve(Side, usize),
    /// A break line, in the picture over time: the break point, up.
    Line(Side),
}

/// A handle.
#[derive(Clone, Debug, PartialEq)]
pub struct Handle {
    /// What it holds.
    pub grip: Grip,
    /// Where it stands, across and up, in the units of its picture.
    pub at: (f64, f64),
    /// What it is, and which keys move it.
    pub label: String,
    /// Where it stands, in words.
    pub value: String,
}

impl Grip {
    /// Its name: `start`, `x.join.1`, `y.break`.
    pub fn name(self) -> String {
        match self {
            Grip::Start => "start".into(),
            Grip::Reserve(side, item) => format!("{}.join.{}", side.letter(), item + 1),
            Grip::Line(side) => format!("{}.break", side.letter()),
        }
    }

    /// Whether it stands in the picture of one side against the other.
    pub fn is_on_orbit(self) -> bool {
        self == Grip::Start
    }
}

/// The handles of an engagement that was worked out with its trajectory. What is in question or in doubt has none: the text
/// says more than one number there.
pub fn handles(statement: &Statement, fight: &Fight) -> Vec<Handle> {
    let mut grips = vec![Grip::Start];
    for side in Side::BOTH {
        let count = statement.terms.sides[side].joins.len();
        grips.extend((0..count).map(|item| Grip::Reserve(side, item)));
        grips.push(Grip::Line(side));
    }
    grips
        .into_iter()
        .filter_map(|grip| handle(statement, fight, grip))
        .collect()
}

fn handle(statement: &Statement, fight: &Fight, grip: Grip) -> Option<Handle> {
    let at = place(statement, fight, grip)?;
    let names = &statement.names;
    let engagement = statement.engagement();
    let (label, value) = match grip {
        Grip::Start => (
            format!(
                "The start: left and right for {}, up and down for {}",
                names.x, names.y
            ),
            format!("{} {}, {} {}", names.x, six(at.0), names.y, six(at.1)),
        ),
        Grip::Reserve(side, item) => {
            let join = engagement.sides[side].joins.get(item)?;
            let number = match engagement.sides[side].joins.len() {
                1 => String::new(),
                _ => format!(" {}", item + 1),
            };
            (
                format!(
                    "{}'s reserve{number}: left and right for its time, up and down for its size",
                    names[side]
                ),
                format!(
                    "{} at {}{NO_BREAK}{}",
                    six(join.size),
                    six(join.time),
                    statement.unit.symbol()
                ),
            )
        }
        Grip::Line(side) => {
            let point = engagement.sides[side].break_point;
            (
                format!("{}'s break line: up and down", names[side]),
                format!("breaks at {} lost, {} left", per_cent(point), strength(at.1)),
            )
        }
    };
    Some(Handle {
        grip,
        at,
        label,
        value,
    })
}

/// Where a handle stands; `None` where its numbers are not plain, or it would stand beyond the end.
fn place(statement: &Statement, fight: &Fight, grip: Grip) -> Option<(f64, f64)> {
    let engagement = statement.engagement();
    let stated = &statement.terms.sides;
    let plain = |quantity: &Quantity| matches!(quantity, Quantity::Number(_));
    match grip {
        Grip::Start => {
            let all = plain(&stated.x.start) && plain(&stated.y.start);
            all.then_some((engagement.sides.x.start, engagement.sides.y.start))
        }
        Grip::Reserve(side, item) => {
            let (join, written) = (
                engagement.sides[side].joins.get(item)?,
                stated[side].joins.get(item)?,
            );
            let shown = fight.trajectory.as_ref()?.shown;
            let all = plain(&written.size) && plain(&written.time) && join.time <= shown;
            let there = before(fight, side, join.time)?;
            all.then_some((join.time, (there + join.size).max(0.0)))
        }
        Grip::Line(side) => {
            let terms = &engagement.sides[side];
            let committed = engagement.committed_at_start(side);
            (plain(&stated[side].break_point) && committed > 0.0)
                .then_some((0.0, (1.0 - terms.break_point) * committed))
        }
    }
}

/// What a side has just before something happens at `time`.
fn before(fight: &Fight, side: Side, time: f64) -> Option<f64> {
    let trajectory = fight.trajectory.as_ref()?;
    let stretch = trajectory
        .stretches
        .iter()
        .position(|stretch| stretch.from >= time);
    Some(match stretch {
        Some(stretch) if trajectory.stretches[stretch].from == time => {
            trajectory.strengths_before(stretch)[side]
        }
        _ => trajectory.strengths_at(time)[side],
    })
}

/// The numbers that a handle writes when it is dragged to `to`, each with its place, rounded to what can be seen in a picture
/// with these axes.
pub fn dragged(
    statement: &Statement,
    fight: &Fight,
    grip: Grip,
    to: (f64, f64),
    axes: &Axes,
) -> Vec<(Place, String)> {
    let engagement = statement.engagement();
    let (across, up) = (step(&axes.across), step(&axes.up));
    match grip {
        Grip::Start => vec![
            (
                Place::Side(Side::X, Part::Start),
                written(to.0.max(across), across),
            ),
            (Place::Side(Side::Y, Part::Start), written(to.1.max(up), up)),
        ],
        Grip::Reserve(side, item) => {
            let Some(join) = engagement.sides[side].joins.get(item) else {
                return Vec::new();
            };
            let there = before(fight, side, join.time).unwrap_or(0.0);
            // Reserves stay reserves, and withdrawals withdrawals.
            let size = if join.size < 0.0 {
                (to.1 - there).min(-up)
            } else {
                (to.1 - there).max(up)
            };
            vec![
                (Place::JoinSize(side, item), written(size, up)),
                (Place::JoinTime(side, item), written(to.0.max(0.0), across)),
            ]
        }
        Grip::Line(side) => {
            let committed = engagement.committed_at_start(side);
            let step = decade(up / committed);
            let point = (1.0 - to.1 / committed).clamp(step, 1.0);
            vec![(Place::Side(side, Part::Break), written(point, step))]
        }
    }
}

/// The same for keys: so many steps across and up from where it is.
pub fn nudged(
    statement: &Statement,
    fight: &Fight,
    grip: Grip,
    (right, higher): (f64, f64),
    axes: &Axes,
) -> Vec<(Place, String)> {
    let Some(at) = place(statement, fight, grip) else {
        return Vec::new();
    };
    let up = match grip {
        // A step of the break point itself: in the units of the picture it may be less than one of those.
        Grip::Line(side) => {
            let committed = statement.engagement().committed_at_start(side);
            decade(step(&axes.up) / committed) * committed
        }
        _ => step(&axes.up),
    };
    let to = (at.0 + right * step(&axes.across), at.1 + higher * up);
    let all = dragged(statement, fight, grip, to, axes);
    // What a key does not move stays as it is written.
    let moved = |place: &Place| match place {
        Place::Side(Side::X, Part::Start) | Place::JoinTime(..) => right != 0.0,
        _ => higher != 0.0,
    };
    all.into_iter().filter(|(place, _)| moved(place)).collect()
}

/// The steps of an axis by which a drag can be seen: the power of ten below a two-hundredth of it.
fn step(axis: &Axis) -> f64 {
    decade((axis.to - axis.from) / 200.0)
}

/// The power of ten that is no more than `least`.
fn decade(least: f64) -> f64 {
    let exponent = libm::floor(libm::log10(least)) as i32;
    number::plain(&format!("1e{exponent}")).unwrap_or(least)
}

/// A value in whole steps, without zeros at its end.
fn written(value: f64, step: f64) -> String {
    let decimals = (-libm::floor(libm::log10(step) + 0.5)).max(0.0) as usize;
    let text = format!("{:.decimals$}", (value / step).round() * step);
    let text = match text.contains('.') {
        true => text.trim_end_matches('0').trim_end_matches('.'),
        false => &text,
    };
    match text {
        "" | "-0" => "0".into(),
        text => text.into(),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::demo::DEMO;
    use crate::fight::{Effort, fight};
    use crate::pairs::Pairs;
    use crate::picture::{orbit, strength as over_time};

    fn demo() -> (Statement, Fight) {
        let statement = Statement::read(&Pairs::parse(DEMO)).expect("the demo reads");
        let fight = fight(&statement.engagement(), Effort::Trajectory);
        (statement, fight)
    }

    fn texts(all: Vec<(Place, String)>) -> Vec<String> {
        all.into_iter().map(|(_, text)| text).collect()
    }

    #[test]
    fn what_is_dragged_nowhere_is_written_as_it_stands() {
        let (statement, fight) = demo();
        let on_orbit = Axes::of(&orbit(&statement, &fight).expect("a picture"));
        let over_time = Axes::of(&over_time(&statement, &fight).expect("a picture"));
        let handles = handles(&statement, &fight);
        let names: Vec<String> = handles.iter().map(|handle| handle.grip.name()).collect();
        assert_eq!(names, ["start", "x.break", "y.join.1", "y.break"]);
        for (handle, expected) in handles
            .iter()
            .zip([&["600", "400"][..], &["0.3"], &["64", "4"], &["0.39"]])
        {
            let axes = if handle.grip.is_on_orbit() {
                &on_orbit
            } else {
                &over_time
            };
            let written = dragged(&statement, &fight, handle.grip, handle.at, axes);
            assert_eq!(texts(written), expected, "{:?}", handle.grip);
        }
        assert_eq!(handles[2].value, "64 at 4\u{a0}h");
    }

    #[test]
    fn keys_move_by_steps_and_leave_the_rest_as_it_is_written() {
        let (statement, fight) = demo();
        let on_orbit = Axes::of(&orbit(&statement, &fight).expect("a picture"));
        let over_time = Axes::of(&over_time(&statement, &fight).expect("a picture"));
        let key = |grip, steps, axes| nudged(&statement, &fight, grip, steps, axes);
        assert_eq!(
            key(Grip::Start, (1.0, 0.0), &on_orbit),
            [(Place::Side(Side::X, Part::Start), "601".into())]
        );
        assert_eq!(
            key(Grip::Reserve(Side::Y, 0), (0.0, -10.0), &over_time),
            [(Place::JoinSize(Side::Y, 0), "54".into())]
        );
        assert_eq!(
            key(Grip::Reserve(Side::Y, 0), (1.0, 0.0), &over_time),
            [(Place::JoinTime(Side::Y, 0), "4.01".into())]
        );
        assert_eq!(
            key(Grip::Line(Side::X), (0.0, 1.0), &over_time),
            [(Place::Side(Side::X, Part::Break), "0.299".into())]
        );
    }

    #[test]
    fn what_is_in_question_is_not_dragged() {
        let pairs = Pairs::parse(&DEMO.replace("x.start=600", "x.start=600?"));
        let statement = Statement::read(&pairs).expect("it reads");
        let fight = fight(&statement.engagement(), Effort::Trajectory);
        let grips: Vec<Grip> = handles(&statement, &fight)
            .iter()
            .map(|handle| handle.grip)
            .collect();
        assert!(!grips.contains(&Grip::Start) && grips.contains(&Grip::Line(Side::X)));
    }

    #[test]
    fn steps_are_what_the_scale_lets_be_seen() {
        for (value, step, text) in [
            (617.3, 1.0, "617"),
            (617.3, 10.0, "620"),
            (4.5376, 0.01, "4.54"),
            (4.5, 0.01, "4.5"),
            (-0.2, 1.0, "0"),
            (0.3, 0.001, "0.3"),
        ] {
            assert_eq!(written(value, step), text);
        }
        assert_eq!(decade(0.0058), 0.001);
    }
}
