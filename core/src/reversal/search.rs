//! The nearest value of one number at which the outcome reverses, one fight at a time.

use super::aim::{Aim, Standing, lead};
use super::close_in::Bracket;
use crate::family::Tally;
use crate::fight::Effort;
use crate::slots::{Limits, Place};
use crate::terms::Engagement;

/// What one look shows.
#[derive(Clone, Copy, Debug)]
struct Look {
    standing: Standing,
    lead: Option<f64>,
}

/// A value behind a change.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Found {
    /// The value next to the change, on its far side.
    pub(crate) value: f64,
    /// What holds there.
    pub(crate) standing: Standing,
}

/// The way out in one direction.
#[derive(Clone, Debug)]
struct Way {
    values: Vec<f64>,
    /// How many have been looked at.
    looked: usize,
    /// What the last of them showed, or the present value does.
    last: (f64, Look),
    /// The nearest change on it to where nobody breaks.
    undecided: Option<Bracket>,
    over: bool,
}

impl Way {
    /// How far its next look is beyond: no change on it that is not yet found is nearer to `value`.
    fn reach(&self, value: f64) -> f64 {
        (self.last.0 - value).abs()
    }
}

/// The search for the nearest reversal by one number.
#[derive(Clone, Debug)]
pub(crate) struct Search {
    place: Place,
    value: f64,
    aim: Aim,
    /// A distance that counts as none.
    least: f64,
    ways: [Way; 2],
    /// The change that is being closed in on, and what is behind it.
    closing: Option<(Bracket, Standing)>,
    found: Option<Found>,
    /// The fights it took.
    pub(crate) tally: Tally,
}

/// A distance that counts as none, in parts of a whole.
const NONE: f64 = 1e-13;

/// To this part a formula says where a change is; the rest is seen by fights.
const HAIR: f64 = 1e-9;

impl Search {
    /// A search from the present `value` at `place` outwards over `outward`; a change of `whole` counts as 1.
    pub(crate) fn new(
        place: Place,
        value: f64,
        whole: f64,
        aim: Aim,
        lead: Option<f64>,
        outward: [Vec<f64>; 2],
    ) -> Search {
        let here = Look {
            standing: Standing::Same,
            lead,
        };
        let ways = outward.map(|values| Way {
            over: values.is_empty(),
            values,
            looked: 0,
            last: (value, here),
            undecided: None,
        });
        Search {
            place,
            value,
            aim,
            least: NONE * whole,
            ways,
            closing: None,
            found: None,
            tally: Tally::default(),
        }
    }

    /// Closes in at once on the change that a formula puts at `value`. Where fights do not bear it out nothing is changed.
    pub(crate) fn try_at(&mut self, engagement: &mut Engagement, value: f64, limits: Limits) {
        let hair = HAIR * value.abs() * (value - self.value).signum();
        let (near, far) = (value - hair, value + hair);
        let is_past = (near - self.value) * hair <= 0.0;
        let near = if is_past { self.value } else { near };
        if hair == 0.0 || !limits.hold(near) || !limits.hold(far) {
            return;
        }
        let (before, behind) = (self.look(engagement, near), self.look(engagement, far));
        if before.standing == Standing::Same && behind.standing == Standing::Reversed {
            self.closing = Some((between((near, before), (far, behind)), Standing::Reversed));
            for way in &mut self.ways {
                way.over = true;
            }
        }
    }

    /// One fight more; says whether the search goes on. `engagement` is left with its own number in place.
    pub(crate) fn step(&mut self, engagement: &mut Engagement) -> bool {
        if let Some((bracket, standing)) = self.closing {
            self.step_closing(engagement, bracket, standing);
            return true;
        }
        if let Some(way) = self.next_way() {
            self.step_out(engagement, way);
            return true;
        }
        self.close_in_on_undecided()
    }

    /// The nearest reversal; without any, the nearest value at which nobody breaks.
    pub(crate) fn found(&self) -> Option<Found> {
        self.found
    }

    /// Takes back what was found, and all that would be found on the ways out: what is left is where nobody breaks.
    pub(crate) fn discard(&mut self) {
        self.found = None;
        for way in &mut self.ways {
            way.over = true;
        }
    }

    /// The way whose next look is the nearest, of those that may still have something nearer than what is found.
    fn next_way(&mut self) -> Option<usize> {
        if let Some(found) = self.found {
            let distance = (found.value - self.value).abs();
            for way in &mut self.ways {
                way.over |= way.reach(self.value) >= distance;
            }
        }
        let open = (0..2).filter(|way| !self.ways[*way].over);
        open.min_by(|a, b| {
            self.ways[*a]
                .reach(self.value)
                .total_cmp(&self.ways[*b].reach(self.value))
        })
    }

    fn step_out(&mut self, engagement: &mut Engagement, way: usize) {
        let place = self.ways[way].looked;
        let Some(value) = self.ways[way].values.get(place).copied() else {
            self.ways[way].over = true;
            return;
        };
        let look = self.look(engagement, value);
        let before = self.ways[way].last;
        self.ways[way].looked += 1;
        self.ways[way].last = (value, look);
        match (before.1.standing, look.standing) {
            (Standing::Same | Standing::Undecided, Standing::Reversed) => {
                self.ways[way].over = true;
                self.close_in(before, (value, look));
            }
            (Standing::Same, Standing::Undecided) if self.ways[way].undecided.is_none() => {
                self.ways[way].undecided = Some(between(before, (value, look)));
            }
            _ => {}
        }
    }

    fn close_in(&mut self, near: (f64, Look), far: (f64, Look)) {
        self.closing = Some((between(near, far), far.1.standing));
    }

    fn step_closing(&mut self, engagement: &mut Engagement, mut bracket: Bracket, standing: Standing) {
        if bracket.is_closed(self.least) {
            self.closing = None;
            let found = Found {
                value: bracket.far,
                standing,
            };
            let nearer = |other: &Found| (other.value - self.value).abs() < (found.value - self.value).abs();
            if !self.found.as_ref().is_some_and(nearer) {
                self.found = Some(found);
            }
            return;
        }
        let value = bracket.next(self.least);
        let look = self.look(engagement, value);
        if standing == Standing::Undecided && look.standing == Standing::Reversed {
            // Between the outcome as it is and nobody's breaking there is a window that the way out has stepped over.
            let near = Look {
                standing: Standing::Same,
                lead: None,
            };
            self.closing = Some((between((bracket.near, near), (value, look)), Standing::Reversed));
            return;
        }
        let behind = look.standing == standing;
        bracket.look(
            value,
            behind,
            look.lead.filter(|_| standing == Standing::Reversed),
        );
        self.closing = Some((bracket, standing));
    }

    /// Where no value reverses: closes in on the nearest change to where nobody breaks. Says whether there is one.
    fn close_in_on_undecided(&mut self) -> bool {
        if self.found.is_some() {
            return false;
        }
        let nearest = |bracket: &Bracket| (bracket.near - self.value).abs();
        let undecided = self.ways.iter_mut().filter_map(|way| way.undecided.take());
        let nearest = undecided.min_by(|a, b| nearest(a).total_cmp(&nearest(b)));
        self.closing = nearest.map(|bracket| {
            (
                Bracket {
                    leads: None,
                    ..bracket
                },
                Standing::Undecided,
            )
        });
        self.closing.is_some()
    }

    fn look(&mut self, engagement: &mut Engagement, value: f64) -> Look {
        engagement.put(self.place, value);
        let outcome = self.tally.fight(engagement, Effort::Ending);
        let lead = lead(engagement, &outcome);
        engagement.put(self.place, self.value);
        Look {
            standing: self.aim.judge(&outcome),
            lead,
        }
    }
}

/// The bracket between two looks.
fn between(near: (f64, Look), far: (f64, Look)) -> Bracket {
    Bracket {
        near: near.0,
        far: far.0,
        leads: near.1.lead.map(|lead| -lead).zip(far.1.lead),
        looks: 0,
    }
}
