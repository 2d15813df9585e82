//! Families of engagements: one in which a number or two vary, everything else being as it is stated.
//!
//! All of them go through `fight`. A [`Scan`] looks along one number, at a stated resolution, for every change of what is
//! asked about the outcomes, and closes in on each; its work is counted ([`Tally`]), and done in slices as small as is wanted.

mod points;
mod scan;
mod tally;

pub use points::{Span, points};
pub use scan::{Change, Scan};
pub use tally::Tally;

use crate::slots::Place;
use crate::terms::Engagement;

/// An engagement in which some numbers vary.
#[derive(Clone, Debug)]
pub struct Family<const N: usize> {
    engagement: Engagement,
    places: [Place; N],
}

impl<const N: usize> Family<N> {
    /// The family of `engagement` in which the numbers at `places` vary.
    pub fn new(engagement: Engagement, places: [Place; N]) -> Family<N> {
        Family { engagement, places }
    }

    /// The member with these numbers. It costs no more than writing them.
    pub fn member(&mut self, values: [f64; N]) -> &Engagement {
        for (place, value) in self.places.into_iter().zip(values) {
            self.engagement.put(place, value);
        }
        &self.engagement
    }
}
