//! Asking backwards: what a number must be.
//!
//! One number in question makes a family of engagements. An [`Inquiry`] looks along it, finds every change of the outcome
//! and of the conditions, and gives the answer, [`Asked`]. Two make a map, a [`Chart`].

mod answer;
mod golden;
mod inquiry;
mod map;
mod outright;
mod put;
mod reply;
mod span;
mod story;

pub use answer::{Asked, Boundary, End, Met, Nearest, Segment};
pub use inquiry::{Inquiry, STEPS};
pub use map::{Chart, FINEST, Flip, Miss, Second};
pub use outright::outright;
pub use put::{Putting, near_text};
pub use reply::{FlipLine, Mapped, MetLine, Reply};
pub use span::Why;
pub use story::{Sample, Story, Worst};

/// The answer to a question takes no more evaluations of functions than this and one fight more: where fights are so dear
/// that it would, it says what it knows by then, and that it was cut short.
pub const MOST_EVALUATIONS: u64 = 100_000_000;
