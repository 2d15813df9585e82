//! All wording of results: the page, the batch door and the tests say the same.

pub mod asked;
pub mod assumptions;
pub mod decided;
pub mod entry;
pub mod figures;
pub mod format;
pub mod goal;
pub mod map;
pub mod math;
pub mod meaning;
pub mod points;
pub mod reading;
pub mod reversal;
pub mod sentence;
pub mod slot;
pub mod timeline;
mod times;
pub mod working;
mod working_pieces;

/// Stands beside the figures while what is typed cannot be worked out.
pub const STALE: &str = "For the last complete figures, not for what is typed now.";

/// Stands in place of the outcome while nothing is stated.
pub const BLANK: &str = "Two sides, two strengths, two rates: then the outcome appears here.";

/// Stands beside the text of the engagement.
pub const HANDLE: &str = "The text carries every name and figure. Handle it like the document itself.";

/// Stands beside the break points.
pub const BREAK_POINT_DOUBT: &str = "Losses alone seldom explain why a side breaks: studies of past battles agree on that, and on no single figure.";

/// Stands under figures that have a fraction of a combatant.
pub const CONTINUOUS: &str = "Strength is treated as a continuous amount; read it to the nearest whole.";
