//! Answers as the batch door gives them.

use super::answer::Asked;
use super::map::{Chart, Miss};
use super::story::Story;
use crate::outcome::Breaks;
use crate::slots::Slot;
use serde::{Serialize, Serializer};

/// The answer to the questions of a text.
#[derive(Clone, Debug, PartialEq, Serialize)]
#[serde(untagged)]
pub enum Reply {
    /// One number was in question.
    One(Box<Asked>),
    /// Two were.
    Two(Box<Mapped>),
}

/// The map of two numbers: the lines along which the outcome flips.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Mapped {
    /// The two numbers.
    #[serde(serialize_with = "names")]
    pub slots: [Slot; 2],
    /// The least of each that was looked at.
    pub from: [f64; 2],
    /// The greatest.
    pub to: [f64; 2],
    /// The lines.
    pub flips: Vec<FlipLine>,
    /// Whether it was ended before all was looked at, since the fights are so dear.
    #[serde(skip_serializing_if = "std::ops::Not::not")]
    pub cut_short: bool,
    /// The lines within which all conditions hold; `None` where there are no conditions.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub met: Option<Vec<MetLine>>,
    /// The part of the map on which they do.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub met_share: Option<f64>,
    /// The place that comes nearest, where there are conditions and none was found to meet them.
    #[serde(skip_serializing_if = "Option::is_none")]
    pub nearest: Option<Miss>,
    /// How much of the map comes out in each way, the most first.
    #[serde(skip)]
    pub shares: Vec<(Story, f64)>,
}

fn names<S: Serializer>(slots: &[Slot; 2], serializer: S) -> Result<S::Ok, S::Error> {
    slots
        .each_ref()
        .map(|slot| slot.name.as_str())
        .serialize(serializer)
}

/// A line along which the outcome flips.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct FlipLine {
    /// Who breaks on its two sides.
    pub between: [Breaks; 2],
    /// Its points in order, in the values of the two numbers.
    pub points: Vec<(f64, f64)>,
}

/// A line within which all conditions hold.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct MetLine {
    /// Its points in order, in the values of the two numbers: conditions hold on the left hand as they go.
    pub points: Vec<(f64, f64)>,
}

impl Chart {
    /// The lines along which the outcome flips and within which conditions hold, as far as they are found.
    pub fn answer(&self) -> Mapped {
        let spans = self.spans();
        let flips = self.flips().into_iter().map(|flip| FlipLine {
            between: flip.between.map(|story| story.breaks),
            points: flip.points,
        });
        Mapped {
            slots: self.slots().clone(),
            from: spans.map(|span| span.low),
            to: spans.map(|span| span.high),
            flips: flips.collect(),
            cut_short: self.is_cut_short(),
            met: self.met_share().map(|_| {
                let lines = self.met_lines().into_iter();
                lines.map(|points| MetLine { points }).collect()
            }),
            met_share: self.met_share(),
            nearest: self.miss(),
            shares: self.shares(),
        }
    }
}
