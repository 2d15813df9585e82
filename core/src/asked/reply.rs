//! Answers as the batch door gives them.

use super::answer::Asked;
use super::map::Chart;
use crate::outcome::Breaks;
use serde::Serialize;

/// The answer to the questions of a text.
#[derive(Clone, Debug, PartialEq, Serialize)]
#[serde(untagged)]
pub enum Reply {
    /// One number was in question.
    One(Box<Asked>),
    /// Two were.
    Two(Mapped),
}

/// The map of two numbers: the lines along which the outcome flips.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Mapped {
    /// The names of the two slots.
    pub slots: [String; 2],
    /// The least of each that was looked at.
    pub from: [f64; 2],
    /// The greatest.
    pub to: [f64; 2],
    /// The lines.
    pub flips: Vec<FlipLine>,
}

/// A line along which the outcome flips.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct FlipLine {
    /// Who breaks on its two sides.
    pub between: [Breaks; 2],
    /// Its points in order, in the values of the two numbers.
    pub points: Vec<(f64, f64)>,
}

impl Chart {
    /// The lines along which the outcome flips, as far as they are found.
    pub fn answer(&self) -> Mapped {
        let spans = self.spans();
        let flips = self.flips().into_iter().map(|flip| FlipLine {
            between: flip.between.map(|story| story.breaks),
            points: flip.points,
        });
        Mapped {
            slots: self.slots().each_ref().map(|slot| slot.name.clone()),
            from: spans.map(|span| span.low),
            to: spans.map(|span| span.high),
            flips: flips.collect(),
        }
    }
}
