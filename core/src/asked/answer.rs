//! The answer to one question: the story along the number, and where all conditions hold.

use super::span::Why;
use super::story::{Class, Sample, Story, Worst};
use crate::family::Span;
use crate::goals::Goal;
use crate::slots::Slot;
use serde::ser::{Serialize, SerializeStruct, Serializer};

/// A value at which the outcome changes.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Boundary {
    /// The value.
    pub at: f64,
    /// Whether the outcome jumps there, as where a reserve is just in time, instead of going over.
    pub jump: bool,
    /// Whether the state equation gives it outright.
    pub by_formula: bool,
}

/// An end of a stretch of values.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum End {
    /// The edge of what was asked.
    Edge(f64),
    /// Where the outcome changes.
    Crossing(Boundary),
}

/// A stretch of values with the same story.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Segment {
    /// Its lower end.
    pub from: End,
    /// Its upper end.
    pub to: End,
    /// How it comes out there.
    pub story: Story,
}

/// A stretch of values with which all conditions hold; a single value where both ends are the same.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Met {
    /// Its lower end.
    pub from: End,
    /// Its upper end.
    pub to: End,
}

/// The value that comes nearest where none meets the conditions.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Nearest {
    /// The value.
    pub value: f64,
    /// What is missing there.
    pub worst: Worst,
}

/// The answer to the question of one number.
#[derive(Clone, Debug, PartialEq)]
pub struct Asked {
    /// The number.
    pub slot: Slot,
    /// What it is asked for.
    pub goals: Vec<Goal>,
    /// Where it was looked for.
    pub span: Span,
    /// Why there.
    pub why: Why,
    /// The whole story, in order; empty before anything was looked at.
    pub outcomes: Vec<Segment>,
    /// Where all conditions hold; `None` where there are no conditions.
    pub met: Option<Vec<Met>>,
    /// The value that comes nearest, where there are conditions and none meets them.
    pub nearest: Option<Nearest>,
    /// How many fights it took.
    pub fights: usize,
    /// Whether it was ended before all was looked at, since the fights are so dear.
    pub cut_short: bool,
    /// Those fights, in order of the value.
    pub samples: Vec<Sample>,
}

/// Two values this near, as a part of the larger end of what was asked, are one in the story.
const ONE: f64 = 1e-9;

/// What is no wider than this, by the same measure, is there by rounding alone.
const ROUNDING: f64 = 1e-12;

impl End {
    /// The value.
    pub fn at(&self) -> f64 {
        match self {
            End::Edge(at) => *at,
            End::Crossing(boundary) => boundary.at,
        }
    }

    fn word(&self) -> &'static str {
        match self {
            End::Edge(_) => "edge",
            End::Crossing(_) => "crossing",
        }
    }
}

impl Segment {
    /// The story along `span`, which begins with `first`; where neither prevails at a single value, as at parity, that
    /// value is the boundary.
    pub(super) fn all(span: Span, first: Story, told: &[(Class, Class, Boundary)]) -> Vec<Segment> {
        let mut all = vec![Segment {
            from: End::Edge(span.low),
            to: End::Edge(span.high),
            story: first,
        }];
        for (_, to, boundary) in told.iter().filter(|(from, to, _)| from.story != to.story) {
            let end = End::Crossing(*boundary);
            if let Some(last) = all.last_mut() {
                last.to = end;
            }
            all.push(Segment {
                from: end,
                to: End::Edge(span.high),
                story: to.story,
            });
        }
        without_single_values(all, span.scale())
    }
}

fn without_single_values(all: Vec<Segment>, scale: f64) -> Vec<Segment> {
    let mut kept: Vec<Segment> = Vec::new();
    let count = all.len();
    for (place, segment) in all.into_iter().enumerate() {
        let inside = 0 < place && place + 1 < count;
        let width = segment.to.at() - segment.from.at();
        // Both break there, or both fade.
        let is_one = width <= ONE * scale && segment.story.prevails.is_none();
        if inside && (is_one || width <= ROUNDING * scale) {
            continue;
        }
        match kept.last_mut() {
            Some(last) if last.story == segment.story => last.to = segment.to,
            Some(last) => {
                last.to = segment.from;
                kept.push(segment);
            }
            None => kept.push(segment),
        }
    }
    kept
}

impl Met {
    /// Where the conditions hold along `span`, at whose lower end they do if `first`.
    pub(super) fn all(
        span: Span,
        first: bool,
        told: &[(Class, Class, Boundary)],
        samples: &[Sample],
    ) -> Vec<Met> {
        let mut all = Vec::new();
        let mut since = first.then_some(End::Edge(span.low));
        for (from, to, boundary) in told {
            let end = End::Crossing(*boundary);
            match (from.met, to.met) {
                (false, true) => since = Some(end),
                (true, false) => all.extend(since.take().map(|from| Met { from, to: end })),
                (false, false) => {
                    // They may hold at that value alone, as where both must break.
                    let alone = samples
                        .iter()
                        .any(|sample| sample.value == boundary.at && sample.met);
                    all.extend(alone.then_some(Met { from: end, to: end }));
                }
                (true, true) => {}
            }
        }
        let to = End::Edge(span.high);
        all.extend(since.map(|from| Met { from, to }));
        all
    }
}

impl Nearest {
    pub(super) fn of(samples: &[Sample]) -> Option<Nearest> {
        let short = samples.iter().filter_map(|sample| {
            Some(Nearest {
                value: sample.value,
                worst: sample.worst?,
            })
        });
        short
            .filter(|nearest| nearest.worst.short.part.is_finite())
            .min_by(|a, b| a.worst.short.part.total_cmp(&b.worst.short.part))
    }
}

impl Serialize for Asked {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        let count = 2 + usize::from(self.met.is_some()) + usize::from(self.nearest.is_some());
        let mut asked = serializer.serialize_struct("Asked", count)?;
        asked.serialize_field("slot", &self.slot.name)?;
        asked.serialize_field("outcomes", &self.outcomes)?;
        if let Some(met) = &self.met {
            asked.serialize_field("met", met)?;
        }
        if let Some(nearest) = &self.nearest {
            asked.serialize_field("nearest", nearest)?;
        }
        if self.cut_short {
            asked.serialize_field("cut_short", &true)?;
        }
        asked.end()
    }
}

impl Serialize for Segment {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        let mut segment = serializer.serialize_struct("Segment", 5)?;
        segment.serialize_field("from", &self.from.at())?;
        segment.serialize_field("to", &self.to.at())?;
        segment.serialize_field("breaks", &self.story.breaks)?;
        segment.serialize_field("ended", &self.story.ended)?;
        segment.serialize_field("prevails", &self.story.prevails.map(crate::sides::Side::letter))?;
        segment.end()
    }
}

impl Serialize for Met {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        let mut met = serializer.serialize_struct("Met", 4)?;
        met.serialize_field("from", &self.from.at())?;
        met.serialize_field("to", &self.to.at())?;
        met.serialize_field("from_is", self.from.word())?;
        met.serialize_field("to_is", self.to.word())?;
        met.end()
    }
}

impl Serialize for Nearest {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        let mut nearest = serializer.serialize_struct("Nearest", 1 + self.worst.count())?;
        nearest.serialize_field("value", &self.value)?;
        self.worst.write(&mut nearest)?;
        nearest.end()
    }
}
