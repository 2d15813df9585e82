//! The map of two numbers in question: how it comes out, where that flips, and a second reading as contours.

use super::{Axis, Line, Picture, Role, Spot};
use crate::asked::{Chart, FINEST, Second, Story};
use crate::outcome::Breaks;
use crate::sides::Side;
use crate::statement::Statement;
use crate::words::format::three;
use crate::words::map::{sentence, table};
use crate::words::slot;

/// How a part of a map is marked: by hatch and lightness.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Tone {
    /// This side breaks, or is the one that fades.
    Breaks(Side),
    /// Both break.
    Both,
    /// Neither breaks.
    Neither,
}

impl Tone {
    /// The tone of a story.
    pub fn of(story: &Story) -> Tone {
        match (story.breaks, story.prevails) {
            (Breaks::X, _) | (_, Some(Side::Y)) => Tone::Breaks(Side::X),
            (Breaks::Y, _) | (_, Some(Side::X)) => Tone::Breaks(Side::Y),
            (Breaks::Both, _) => Tone::Both,
            _ => Tone::Neither,
        }
    }
}

/// How every place of a map comes out.
#[derive(Clone, Debug, PartialEq)]
pub struct Ground {
    /// How it comes out, and whether all that is wanted holds.
    tones: Vec<(Tone, bool)>,
}

impl Ground {
    fn of(chart: &Chart) -> Ground {
        let tones: Vec<Tone> = chart.stories().iter().map(Tone::of).collect();
        let tone = |across: usize, up: usize| {
            let tone = tones.get(chart.story_at(across, up)?).copied()?;
            Some((tone, chart.is_met_at(across, up)))
        };
        let places = (0..=FINEST).flat_map(|up| (0..=FINEST).map(move |across| (across, up)));
        Ground {
            tones: places
                .map(|(across, up)| tone(across, up).unwrap_or((Tone::Neither, false)))
                .collect(),
        }
    }

    /// The tone at parts of both axes, each from 0 to 1.
    pub fn tone(&self, across: f64, up: f64) -> Tone {
        self.at(across, up).0
    }

    /// Whether all that is wanted holds there.
    pub fn is_wanted(&self, across: f64, up: f64) -> bool {
        self.at(across, up).1
    }

    fn at(&self, across: f64, up: f64) -> (Tone, bool) {
        let place = |part: f64| (part.clamp(0.0, 1.0) * FINEST as f64).round() as usize;
        self.tones
            .get(place(up) * (FINEST + 1) + place(across))
            .copied()
            .unwrap_or((Tone::Neither, false))
    }

    /// Whether anything has this tone.
    pub fn has(&self, tone: Tone) -> bool {
        self.tones.iter().any(|(one, _)| *one == tone)
    }
}

/// Contours of a second reading, about so many.
const CONTOURS: usize = 7;

/// The map; `None` before anything was looked at.
pub fn map(statement: &Statement, chart: &Chart, second: Option<Second>) -> Option<Picture> {
    if !chart.has_ground() {
        return None;
    }
    let [one, other] = chart.slots();
    let [across, up] = chart.spans();
    let named = |slot: &crate::slots::Slot| {
        let (name, unit) = (slot::name(statement, slot), slot::unit(statement, slot.unit));
        if unit.is_empty() {
            name
        } else {
            format!("{name} ({unit})")
        }
    };
    let mut lines: Vec<Line> = second.map_or(Vec::new(), |second| contours(chart, second));
    lines.extend(chart.flips().into_iter().map(|flip| Line {
        role: Role::Flip,
        points: flip.points,
        label: String::new(),
    }));
    lines.extend(chart.met_lines().into_iter().map(|points| Line {
        role: Role::Wanted,
        points,
        label: String::new(),
    }));
    let now = one.value().zip(other.value());
    let inside = |(a, b): &(f64, f64)| across.low <= *a && *a <= across.high && up.low <= *b && *b <= up.high;
    let spots = now.filter(inside).map(|at| Spot {
        side: None,
        at,
        label: "now".into(),
    });
    Some(Picture {
        across: Axis::between(named(one), across.low, across.high, 6),
        up: Axis::between(named(other), up.low, up.high, 5),
        lines,
        spots: spots.into_iter().collect(),
        summary: sentence(statement, chart),
        table: table(statement, chart),
        names: statement.names.clone(),
        ground: Some(Ground::of(chart)),
    })
}

/// Contours at round values, the longest of each named.
fn contours(chart: &Chart, second: Second) -> Vec<Line> {
    let Some((low, high)) = chart.range(second).filter(|(low, high)| low < high) else {
        return Vec::new();
    };
    let levels = Axis::between(String::new(), low, high, CONTOURS).ticks;
    let mut lines = Vec::new();
    for level in levels.iter().map(|tick| tick.at) {
        let chains = chart.contour(second, level);
        let longest = (0..chains.len()).max_by_key(|place| chains[*place].len());
        for (place, points) in chains.into_iter().enumerate() {
            lines.push(Line {
                role: Role::Contour,
                points,
                label: if Some(place) == longest {
                    three(level)
                } else {
                    String::new()
                },
            });
        }
    }
    lines
}
