//! Where on a map all conditions of `sothat` are met.

use super::line::ends;
use super::{Chart, FINEST, lattice, parts};
use crate::asked::story::{Worst, worst};
use crate::goals::Goal;
use crate::outcome::Outcome;
use serde::ser::{Serialize, SerializeStruct, Serializer};

/// The place that comes nearest where none meets the conditions.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Miss {
    /// The values of the two numbers.
    pub values: [f64; 2],
    /// What is missing there.
    pub worst: Worst,
}

impl Chart {
    /// What is wanted; nothing where there are no conditions.
    pub fn goals(&self) -> &[Goal] {
        &self.goals
    }

    /// What is missing of the conditions in `outcome`, which has these values; `None` where they are met.
    pub fn missing(&mut self, values: [f64; 2], outcome: &Outcome) -> Option<Worst> {
        worst(self.family.member(values), outcome, &self.goals)
    }

    /// Whether all conditions are met in a cell of the finest lattice; nowhere where there are none.
    pub fn is_met_at(&self, across: usize, up: usize) -> bool {
        let met = self
            .nearest_to((across, up))
            .is_some_and(|point| point.worst.is_none());
        met && !self.goals.is_empty()
    }

    /// On how much of the map all conditions are met; `None` where there are none.
    pub fn met_share(&self) -> Option<f64> {
        let met = lattice::cells(2).filter(|(across, up)| self.is_met_at(*across, *up));
        let all = (FINEST / 2) * (FINEST / 2);
        (!self.goals.is_empty()).then(|| met.count() as f64 / all as f64)
    }

    /// The lines within which all conditions are met: on the left hand of each, as its points go.
    pub fn met_lines(&self) -> Vec<Vec<(f64, f64)>> {
        let chains = self.met.chains().into_iter();
        chains
            .map(|mut chain| {
                let places: Vec<(f64, f64)> = chain.iter().map(|edge| self.met.place(*edge)).collect();
                // The end of an edge at which they are met lies to one side of the line from there to the next.
                let side = |(place, pair): (usize, &[(f64, f64)])| {
                    let is_met = |at| self.lattice.get(at).is_some_and(|point| point.worst.is_none());
                    let [begin, end] = ends(chain[place]);
                    let [across, up] = parts(if is_met(begin) { begin } else { end });
                    let (from, to) = (pair[0], pair[1]);
                    (to.0 - from.0) * (up - from.1) - (to.1 - from.1) * (across - from.0)
                };
                let left: f64 = places.windows(2).enumerate().map(side).sum();
                if left < 0.0 {
                    chain.reverse();
                }
                chain.iter().map(|edge| self.crossing(&self.met, *edge)).collect()
            })
            .collect()
    }

    /// Of the places that were looked at, the one that comes nearest where none meets the conditions.
    pub fn miss(&self) -> Option<Miss> {
        let places = (0..=FINEST).flat_map(|up| (0..=FINEST).map(move |across| (across, up)));
        let mut least: Option<(lattice::At, Worst)> = None;
        for at in places {
            let Some(point) = self.lattice.get(at) else {
                continue;
            };
            let worst = point.worst?;
            let nearer = least.is_none_or(|(_, least)| worst.short.part < least.short.part);
            if nearer && worst.short.part.is_finite() {
                least = Some((at, worst));
            }
        }
        least.map(|(at, worst)| Miss {
            values: self.values(parts(at)),
            worst,
        })
    }
}

impl Serialize for Miss {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        let mut miss = serializer.serialize_struct("Miss", 1 + self.worst.count())?;
        miss.serialize_field("values", &self.values)?;
        self.worst.write(&mut miss)?;
        miss.end()
    }
}
