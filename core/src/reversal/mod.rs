//! What would reverse the outcome: for every number of an engagement, changed alone, the nearest value at which the other
//! side breaks first, and where no value does that, the nearest at which nobody does.
//!
//! Where the state equation gives the value in closed form it is taken from there; else the number is looked
//! at from its present value outwards (`outward`), on both sides, and the first change is closed in on (`close_in`). All
//! of it is done one fight at a time, so that a page can stop between two of them.

mod aim;
mod close_in;
mod elasticity;
mod exact;
mod measure;
mod outward;
mod search;
mod written;

pub use elasticity::Elasticity;
pub use measure::Told;

use crate::asked::outright;
use crate::family::Tally;
use crate::fight::{Effort, fight};
use crate::keys::Unit;
use crate::number;
use crate::order::sort_by;
use crate::outcome::{Breaks, Outcome};
use crate::pairs::Pairs;
use crate::sides::Side;
use crate::slots::{Slot, slots};
use crate::statement::Statement;
use crate::terms::Engagement;
use aim::{Aim, Standing, gives_way, lead};
use measure::Measure;
use search::{Found, Search};
use serde::ser::{Serialize, SerializeStruct, Serializer};
use std::cmp::Ordering;

/// What a value beyond the present one brings.
#[derive(Clone, Copy, Debug, PartialEq, Eq, serde::Serialize)]
#[serde(rename_all = "lowercase")]
pub enum Kind {
    /// The other side breaks first; where neither does now, one does.
    Reversed,
    /// Neither side breaks, or both do at one moment.
    Undecided,
}

/// The nearest value at which the outcome is another.
#[derive(Clone, Debug, PartialEq)]
pub struct Change {
    /// The value next to the change, on its far side, to a part of 1e-10 or better.
    pub value: f64,
    /// The same as it would be written: beyond the change, in the fewest digits that are not far from it.
    pub written: String,
    /// By how much it differs from the present value, told as [`Entry::told`] says.
    pub by: f64,
    /// What it brings.
    pub kind: Kind,
    /// Who breaks first there.
    pub breaks: Breaks,
    /// Who gives way there: breaks first, or fades without end; `None` for neither or both.
    pub gives_way: Option<Side>,
}

/// One number of the engagement, and what it takes to reverse the outcome by it alone.
#[derive(Clone, Debug, PartialEq)]
pub struct Entry {
    /// The number.
    pub slot: Slot,
    /// Its present value.
    pub now: f64,
    /// How its changes are told.
    pub told: Told,
    /// The nearest reversal; `None` where no value within its limits does, at the resolution of the search.
    pub change: Option<Change>,
    /// The change in parts of what counts as a whole: by this entries are set in order.
    pub size: f64,
    /// What a small change of it does.
    pub elasticity: Elasticity,
}

/// The digits that a value is written with.
const FEWEST: usize = 4;
const MOST: usize = 17;

/// A hair, in parts of a value or of its change: on either side of it the outcome must be clear.
const HAIR: f64 = 1e-9;

/// What is being done for the number at hand.
#[derive(Clone, Debug)]
enum Stage {
    /// Its value is searched.
    Search(Box<Search>),
    /// It is written in as few digits as will do, these next.
    Write(Box<Search>, Found, usize),
    /// Nothing is left but what a small change does.
    Elasticity,
}

/// The search through all numbers of an engagement.
#[derive(Clone, Debug)]
pub struct Reversal {
    engagement: Engagement,
    outcome: Outcome,
    aim: Aim,
    measure: Measure,
    slots: Vec<Slot>,
    /// The number at hand, and what was found for it.
    at: usize,
    stage: Option<Stage>,
    change: Option<Change>,
    small: elasticity::Search,
    entries: Vec<Entry>,
    tally: Tally,
    most: u64,
    /// Numbers that were not looked at.
    left_out: usize,
}

/// The table takes no more evaluations of functions than this, and one number's few fights more: where fights are so dear that
/// it would, the numbers behind are left out, and it says so.
pub const MOST_EVALUATIONS: u64 = 200_000_000;

/// Looks to a power of ten of change.
pub const A_DECADE: f64 = 16.0;
/// The same where each look takes the integrator.
pub const A_DECADE_INTEGRATED: f64 = 6.0;

/// A change of no more than this part of a whole is the least there is: any change of that number does it,
const LEAST: f64 = 1e-9;
/// and so it is written as this part of a whole.
const SOME: f64 = 1e-3;

/// A written value is no further beyond the change than this part of the way to it.
const FURTHER: f64 = 0.02;

impl Reversal {
    /// A search at its beginning; `pairs` are those that `statement` was read from.
    pub fn new(pairs: &Pairs, statement: &Statement) -> Reversal {
        let engagement = statement.engagement();
        let fight = fight(&engagement, Effort::Ending);
        let mut tally = Tally::default();
        tally.count(&fight);
        Reversal {
            aim: Aim::of(&fight.outcome),
            measure: Measure::of(&engagement, &fight.outcome),
            slots: slots(pairs, statement),
            at: 0,
            stage: None,
            change: None,
            small: elasticity::Search::default(),
            entries: Vec::new(),
            tally,
            most: MOST_EVALUATIONS,
            left_out: 0,
            outcome: fight.outcome,
            engagement,
        }
    }

    /// The same search for some of the numbers alone.
    pub fn only(mut self, keep: impl Fn(&Slot) -> bool) -> Reversal {
        self.slots.retain(keep);
        self
    }

    /// The same search, to end when its fights have taken so many evaluations instead of [`MOST_EVALUATIONS`].
    pub fn with_at_most(mut self, evaluations: u64) -> Reversal {
        self.most = evaluations;
        self
    }

    /// Goes to the end at once.
    pub fn finished(mut self) -> Reversal {
        while self.step() {}
        self
    }

    /// Goes on by one fight, or what takes no longer; says whether anything is left to do.
    pub fn step(&mut self) -> bool {
        if self.tally.evaluations > self.most {
            self.left_out += self.slots.drain(self.at..).len();
        }
        let Some(slot) = self.slots.get(self.at) else {
            return false;
        };
        let slot = slot.clone();
        let now = slot.value().unwrap_or(0.0);
        match self.stage.take() {
            None => {
                let search = self.search(&slot, now);
                self.stage = Some(Stage::Search(Box::new(search)));
            }
            Some(Stage::Search(mut search)) => {
                let goes_on = search.step(&mut self.engagement);
                self.count(&mut search);
                self.stage = Some(match (goes_on, search.found()) {
                    (true, _) => Stage::Search(search),
                    (false, Some(found)) => Stage::Write(search, found, FEWEST - 1),
                    (false, None) => Stage::Elasticity,
                });
            }
            Some(Stage::Write(search, found, digits)) => self.write(search, &slot, now, found, digits),
            Some(Stage::Elasticity) => self.small_change(slot, now),
        }
        true
    }

    /// Whether nothing is left to do.
    pub fn is_done(&self) -> bool {
        self.at == self.slots.len()
    }

    /// How far it is, from 0 to 1.
    pub fn progress(&self) -> f64 {
        self.at as f64 / self.slots.len().max(1) as f64
    }

    /// The fights it took so far.
    pub fn fights(&self) -> u32 {
        self.tally.fights
    }

    /// How many numbers were not looked at, since the fights are so dear.
    pub fn left_out(&self) -> usize {
        self.left_out
    }

    /// Whether a side breaks first, or fades, as it is: else there is nothing to reverse, and a change decides.
    pub fn is_decided(&self) -> bool {
        self.aim != Aim::Undecided
    }

    /// What has been found so far: first what reverses the outcome, then what leaves it undecided, each the smallest change
    /// first, strengths, rates and lengths that are 0 now behind the rest; then the numbers of which no value does.
    pub fn entries(&self) -> Vec<&Entry> {
        let mut entries: Vec<&Entry> = self.entries.iter().collect();
        sort_by(&mut entries, |a, b| a.before(b));
        entries
    }

    /// The same, as a list of its own.
    pub fn into_entries(mut self) -> Vec<Entry> {
        sort_by(&mut self.entries, Entry::before);
        self.entries
    }

    /// Takes what a search took to the account of all.
    fn count(&mut self, search: &mut Search) {
        self.tally = self.tally.and(std::mem::take(&mut search.tally));
    }

    fn search(&mut self, slot: &Slot, now: f64) -> Search {
        let whole = self.measure.whole(slot, now);
        let a_decade = if self.is_integrated(slot, now, whole) {
            A_DECADE_INTEGRATED
        } else {
            A_DECADE
        };
        let outward = outward::outward(slot, now, &self.engagement, &self.measure, a_decade);
        let lead = lead(&self.engagement, &self.outcome);
        let mut search = Search::new(slot.place, now, whole, self.aim, lead, outward);
        let formula = matches!(self.aim, Aim::Broken(_)).then(|| outright(&self.engagement, slot.place));
        if let Some(value) = formula.flatten() {
            search.try_at(&mut self.engagement, value, slot.limits);
            self.count(&mut search);
        }
        search
    }

    /// Whether a fight takes the integrator once this number is another.
    fn is_integrated(&mut self, slot: &Slot, now: f64, whole: f64) -> bool {
        let others = [now + 0.01 * whole, now - 0.01 * whole];
        let Some(other) = others.into_iter().find(|value| slot.limits.hold(*value)) else {
            return false;
        };
        self.engagement.put(slot.place, other);
        let fight = fight(&self.engagement, Effort::Ending);
        self.engagement.put(slot.place, now);
        self.tally.count(&fight);
        fight.work.steps > 0
    }

    /// One try at writing a value that was found.
    fn write(&mut self, mut search: Box<Search>, slot: &Slot, now: f64, found: Found, digits: usize) {
        let whole = self.measure.whole(slot, now);
        let least = (found.value - now).abs() <= LEAST * whole;
        let last = digits >= MOST;
        let text = match digits {
            MOST.. => format!("{}", found.value),
            // Before all others: of what any change does, a change that can be seen.
            ..FEWEST if least => written::beyond(now + SOME * whole * (found.value - now).signum(), now, 2),
            _ => written::beyond(found.value, now, digits),
        };
        let value = number::plain(&text).unwrap_or(found.value);
        let near = if digits < FEWEST {
            least
        } else {
            (value - found.value).abs() <= FURTHER * (found.value - now).abs()
        };
        let written = near && slot.limits.hold(value);
        if !last && !written {
            self.stage = Some(Stage::Write(search, found, digits + 1));
            return;
        }
        self.engagement.put(slot.place, value);
        let outcome = self.tally.fight(&self.engagement, Effort::Ending);
        self.engagement.put(slot.place, now);
        if !last && self.aim.judge(&outcome) != found.standing {
            self.stage = Some(Stage::Write(search, found, digits + 1));
            return;
        }
        if !least && !self.is_clean(slot, now, found) {
            // What leaves it undecided may still be clear.
            search.discard();
            self.stage = Some(Stage::Search(search));
            return;
        }
        let by = match Measure::told(slot, now) {
            Told::Relative => (found.value - now) / now.abs(),
            Told::Absolute => found.value - now,
        };
        self.change = Some(Change {
            value: found.value,
            written: text,
            by,
            kind: match found.standing {
                Standing::Reversed => Kind::Reversed,
                _ => Kind::Undecided,
            },
            breaks: outcome.breaks,
            gives_way: gives_way(&outcome),
        });
        self.stage = Some(Stage::Elasticity);
    }

    /// Whether the outcome is another a hair behind the value that was found, and is not a hair before it. Where a side fades
    /// to less than a double can hold, it is neither: what seems to change there is the rounding alone.
    fn is_clean(&mut self, slot: &Slot, now: f64, found: Found) -> bool {
        let outwards = (found.value - now).signum();
        let hair = HAIR * found.value.abs().max((found.value - now).abs()) * outwards;
        let mut changes = |value: f64| {
            self.engagement.put(slot.place, value);
            let outcome = self.tally.fight(&self.engagement, Effort::Ending);
            self.aim.judge(&outcome) == found.standing
        };
        let [before, at, one, three] = [-1.0, 0.0, 1.0, 3.0].map(|hairs| found.value + hairs * hair);
        let behind =
            |value: f64, changes: &mut dyn FnMut(f64) -> bool| !slot.limits.hold(value) || changes(value);
        let clean =
            changes(at) && !changes(before) && (behind(one, &mut changes) || behind(three, &mut changes));
        self.engagement.put(slot.place, now);
        clean
    }

    fn small_change(&mut self, slot: Slot, now: f64) {
        let tally = &mut self.tally;
        if self
            .small
            .step(&mut self.engagement, &self.outcome, &slot, now, tally)
        {
            self.stage = Some(Stage::Elasticity);
            return;
        }
        let change = self.change.take();
        let whole = self.measure.whole(&slot, now);
        let size = change
            .as_ref()
            .map_or(f64::INFINITY, |change| (change.value - now).abs() / whole);
        self.entries.push(Entry {
            told: Measure::told(&slot, now),
            elasticity: std::mem::take(&mut self.small).elasticity(),
            slot,
            now,
            change,
            size,
        });
        self.at += 1;
    }
}

impl Entry {
    /// Whether the least change does it.
    pub fn is_least(&self) -> bool {
        self.size <= LEAST
    }

    /// Whether it is a strength, a rate or a length that is 0 now: no part of it says how much a change is.
    pub fn is_of_nothing(&self) -> bool {
        let measured_by_itself = matches!(self.slot.unit, Unit::Time | Unit::Fraction | Unit::Exponent);
        self.now == 0.0 && !measured_by_itself
    }

    /// The order of entries: see [`Reversal::entries`].
    fn before(&self, other: &Entry) -> Ordering {
        let rank = |entry: &Entry| match entry.change.as_ref().map(|change| change.kind) {
            Some(Kind::Reversed) => (0, entry.is_of_nothing()),
            Some(Kind::Undecided) => (1, entry.is_of_nothing()),
            None => (2, false),
        };
        rank(self)
            .cmp(&rank(other))
            .then(self.size.total_cmp(&other.size))
    }
}

impl Serialize for Entry {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        let change = self.change.as_ref();
        let mut entry = serializer.serialize_struct("Entry", 7)?;
        entry.serialize_field("slot", &self.slot.name)?;
        entry.serialize_field("now", &self.now)?;
        entry.serialize_field("value", &change.map(|change| change.value))?;
        entry.serialize_field("change", &change.map(|change| change.by))?;
        // Of a number of which no value does, what was looked for.
        let kind = change.map_or(Kind::Reversed, |change| change.kind);
        entry.serialize_field("kind", &kind)?;
        entry.serialize_field("breaks", &change.map(|change| change.breaks))?;
        entry.serialize_field("elasticity", &self.elasticity)?;
        entry.end()
    }
}
