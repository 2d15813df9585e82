//! The map of two numbers in question: how it comes out, where that flips, and a second reading as contours.

use super::{Axis, Line, Picture, Role, Spot};
use crate::asked::{Chart, FINEST, Second, Story};
use crate::order::sort_by;
use crate::outcome::Breaks;
use crate::sides::Side;
use crate::statement::Statement;
use crate::words::asked::happens;
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
    lines.extend(regions(statement, chart));
    let now = one.value().zip(other.value());
    let inside = |(a, b): &(f64, f64)| across.low <= *a && *a <= across.high && up.low <= *b && *b <= up.high;
    let spots = now.filter(inside).map(|at| Spot {
        side: None,
        at,
        label: "now".into(),
    });
    Some(Picture {
        across: Axis::between(slot::name_with_unit(statement, one), across.low, across.high, 6),
        up: Axis::between(slot::name_with_unit(statement, other), up.low, up.high, 5),
        lines,
        spots: spots.into_iter().collect(),
        summary: sentence(statement, chart),
        table: table(statement, chart),
        names: statement.names.clone(),
        ground: Some(Ground::of(chart)),
    })
}

/// Steps along each axis by which a place for words is looked for.
const STEPS: i32 = 16;

/// How much wider than high words are, and the least room for them in steps across.
const WIDER: i32 = 4;
const ROOM: i32 = 2;

/// Letters of a word in the middle of which there must be a step of room on each side.
const LETTERS: i32 = 9;

/// The places from which the words of a part take the one that is freest of lines and other words.
const CHOICES: usize = 8;

/// A place on the map, in steps across and up, with the number of its story and whether all that is wanted holds there.
#[derive(Clone, Copy)]
struct Place {
    step: (i32, i32),
    told: (usize, bool),
    /// How many steps across are free for words around it, as far as that is known.
    room: i32,
}

impl Place {
    fn of(chart: &Chart, step: (i32, i32)) -> Option<Place> {
        let [across, up] = [step.0, step.1].map(|step| step as usize * FINEST / STEPS as usize);
        Some(Place {
            step,
            told: (chart.story_at(across, up)?, chart.is_met_at(across, up)),
            room: step.0.min(STEPS - step.0).min(WIDER * step.1.min(STEPS - step.1)),
        })
    }

    fn among(self, places: &[Place]) -> Place {
        let others = places.iter().filter(|other| other.told != self.told);
        let off = |other: &Place| {
            let (across, up) = (other.step.0 - self.step.0, other.step.1 - self.step.1);
            across.abs().max(WIDER * up.abs())
        };
        Place {
            room: others.map(off).fold(self.room, i32::min),
            ..self
        }
    }
}

/// What happens, and whether that is wanted, in the middle of each part of the map with room for the words: a picture that is
/// passed on has no legend beside it.
fn regions(statement: &Statement, chart: &Chart) -> Vec<Line> {
    let steps = (0..=STEPS).flat_map(|up| (0..=STEPS).map(move |across| (across, up)));
    let places: Vec<Place> = steps.filter_map(|step| Place::of(chart, step)).collect();
    let mut roomy: Vec<Place> = places.iter().map(|place| place.among(&places)).collect();
    sort_by(&mut roomy, |a, b| b.room.cmp(&a.room));
    let mut lines: Vec<Line> = Vec::new();
    for Place { step, told, room } in roomy.into_iter().take_while(|place| place.room >= ROOM) {
        let Some(story) = chart.stories().get(told.0) else {
            continue;
        };
        let label = happens(statement, story) + if told.1 { ", as wanted" } else { "" };
        let letters = label.chars().count() as i32;
        if room < letters / LETTERS {
            continue;
        }
        let [across, up] = chart.values([step.0, step.1].map(|step| f64::from(step) / f64::from(STEPS)));
        match lines.iter_mut().find(|line| line.label == label) {
            Some(line) if line.points.len() < CHOICES => line.points.push((across, up)),
            Some(_) => {}
            None => lines.push(Line {
                role: Role::Region,
                points: vec![(across, up)],
                label,
            }),
        }
    }
    lines
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
