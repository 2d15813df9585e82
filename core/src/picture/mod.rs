//! What the two pictures show, in the units of the engagement: the shell draws it on canvas and as SVG.

mod asked;
mod axis;
pub mod handles;
mod held;
mod map;
mod orbit;
mod paths;
mod strength;

pub use asked::asked;
pub use axis::{Axis, Tick};
pub use held::Axes;
pub use map::{Ground, Tone, map};
pub use orbit::{orbit, orbit_on};
pub use strength::{strength, strength_on};

use crate::sides::Side;
use crate::statement::Names;

/// What a line stands for.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Role {
    /// The strength of a side over time.
    Strength(Side),
    /// The engagement, one side against the other.
    Fight,
    /// How it would go on if both fought to the last.
    ToTheLast,
    /// An engagement from other strengths under the same rates.
    Neighbour,
    /// Where neither side would be left.
    Parity,
    /// The strength at which a side breaks.
    BreakLine(Side),
    /// The moment at which a side breaks, or both do.
    Defeat,
    /// The moment at which the engagement is cut off.
    Clock,
    /// A moment at which something joins, leaves or changes.
    Instant,
    /// A value of a number in question at which the outcome changes.
    Change,
    /// The value that it has now.
    Now,
    /// Values with which all that is wanted holds.
    Met,
    /// Where the outcome flips, on a map.
    Flip,
    /// The edge of where all that is wanted holds, on a map.
    Wanted,
    /// How it comes out around a point of a map: words alone.
    Region,
    /// Where a second reading has the same value, on a map.
    Contour,
}

/// A line through points, all within the axes.
#[derive(Clone, Debug, PartialEq)]
pub struct Line {
    /// What it stands for.
    pub role: Role,
    /// Its points, across and up.
    pub points: Vec<(f64, f64)>,
    /// Its words; empty where it needs none.
    pub label: String,
}

/// A point that stands for something.
#[derive(Clone, Debug, PartialEq)]
pub struct Spot {
    /// The side whose point it is; `None` for both.
    pub side: Option<Side>,
    /// Where, across and up.
    pub at: (f64, f64),
    /// Its words.
    pub label: String,
}

/// The same picture as a table.
#[derive(Clone, Debug, PartialEq)]
pub struct Table {
    /// What it is, for whoever has it without its page.
    pub caption: String,
    /// The heads of the columns, with their units.
    pub heads: Vec<String>,
    /// The rows of cells.
    pub rows: Vec<Vec<String>>,
}

/// A picture.
#[derive(Clone, Debug, PartialEq)]
pub struct Picture {
    /// The axis across.
    pub across: Axis,
    /// The axis up.
    pub up: Axis,
    /// The lines, those in the background first.
    pub lines: Vec<Line>,
    /// The spots.
    pub spots: Vec<Spot>,
    /// What it shows, in one sentence.
    pub summary: String,
    /// The same as a table.
    pub table: Table,
    /// The names of the sides, for labels.
    pub names: Names,
    /// How every place comes out, on a map.
    pub ground: Option<Ground>,
}

impl Picture {
    /// Whether a line of it stands for this.
    pub fn has(&self, role: Role) -> bool {
        self.lines.iter().any(|line| line.role == role)
    }
}

/// How many points a curve is drawn through.
const POINTS: usize = 320;

/// How many steps a table has.
const STEPS: usize = 10;

/// `count` + 1 even steps from 0 to 1.
fn steps(count: usize) -> impl Iterator<Item = f64> {
    (0..=count).map(move |step| step as f64 / count as f64)
}
