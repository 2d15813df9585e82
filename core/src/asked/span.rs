//! Where a number in question is looked for: as it was asked, or else on a scale taken from the engagement.

use crate::family::Span;
use crate::fight::{Effort, fight};
use crate::keys::LARGEST;
use crate::quantity::Quantity;
use crate::sides::Side;
use crate::slots::{Part, Place, Slot};
use crate::terms::Engagement;

/// Why a span was chosen.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Why {
    /// It was asked for.
    Asked,
    /// It is all that the number can be.
    Whole,
    /// Nothing in the engagement says on what scale it counts.
    NoScale,
    /// Up to four times the larger side.
    LargerSide,
    /// Up to ten times the number it has now.
    Now,
    /// Up to ten times what makes both sides lose the same part of themselves at the start.
    EqualFire,
    /// Up to ten times what is lost to the fire at the start.
    LostAtStart,
    /// Up to ten times the enemy's strength at the start.
    Targets,
    /// Up to the clock.
    Clock,
    /// Up to twice as long as the fight lasts.
    Lasting,
    /// Up to four times the larger of the range and the reaches.
    Range,
}

/// Where a number in question is looked for, and why there.
pub(super) fn span(slot: &Slot, engagement: &Engagement) -> (Span, Why) {
    if let Quantity::Question {
        between: Some((low, high)),
        ..
    } = slot.quantity
    {
        return (Span { low, high }, Why::Asked);
    }
    let now = slot.value().unwrap_or(0.0);
    let (scale, why) = match slot.place {
        Place::Side(side, part) | Place::PhaseChange(_, side, part) => of_side(engagement, side, part),
        Place::JoinSize(..) => (4.0 * larger_side(engagement), Why::LargerSide),
        Place::FlowRate(side, _) => (10.0 * lost_at_start(engagement, side), Why::LostAtStart),
        Place::Range | Place::RangeLeast => (4.0 * largest_range(engagement), Why::Range),
        Place::RangeClosing => (
            4.0 * largest_range(engagement) / lasting(engagement, slot.place),
            Why::Range,
        ),
        Place::Until => (2.0 * lasting(engagement, slot.place), Why::Lasting),
        Place::JoinTime(..) | Place::FlowFrom(..) | Place::FlowTo(..) | Place::PhaseFrom(_) => {
            match engagement.until {
                Some(clock) if clock > 0.0 => (clock, Why::Clock),
                _ => (2.0 * lasting(engagement, slot.place), Why::Lasting),
            }
        }
    };
    within(slot, scale, why, now)
}

/// The span up to `scale` and far enough for the number there is `now`, within the limits of the slot.
fn within(slot: &Slot, scale: f64, why: Why, now: f64) -> (Span, Why) {
    let tenfold = 10.0 * now.abs();
    let beyond = now.abs() > scale || !(scale > 0.0 && scale.is_finite());
    let (high, why) = match (beyond, now != 0.0) {
        (false, _) => (scale, why),
        (true, true) => (tenfold, Why::Now),
        (true, false) => (1.0, Why::NoScale),
    };
    let high = if why == Why::Clock { high } else { rounded_up(high) };
    let limits = slot.limits;
    let low = if now < 0.0 { -high } else { 0.0 };
    let span = Span {
        low: low.max(limits.low),
        high: high.min(limits.high),
    };
    if span.low < span.high {
        (span, why)
    } else {
        let (low, high) = (limits.low, limits.high);
        (Span { low, high }, Why::Whole)
    }
}

fn of_side(engagement: &Engagement, side: Side, part: Part) -> (f64, Why) {
    let enemy = side.enemy();
    match part {
        Part::Start | Part::Lost => (4.0 * larger_side(engagement), Why::LargerSide),
        Part::Rate => (10.0 * equal_rate(engagement, side), Why::EqualFire),
        Part::Half => (10.0 * engagement.sides[enemy].start, Why::Targets),
        Part::Break => (1.0, Why::Whole),
        Part::P | Part::Q => (3.0, Why::Whole),
        Part::ReachShape => (10.0, Why::Whole),
        Part::Wastage => (10.0 * part_lost_at_start(engagement, side), Why::LostAtStart),
        Part::SupportArea => (10.0 * part_lost_at_start(engagement, enemy), Why::LostAtStart),
        Part::SupportAimed => (10.0 * lost_at_start(engagement, enemy), Why::LostAtStart),
        Part::Reach => (4.0 * largest_range(engagement), Why::Range),
    }
}

/// All that the larger side has in the course of the engagement.
fn larger_side(engagement: &Engagement) -> f64 {
    let whole = |side: Side| {
        let terms = &engagement.sides[side];
        let joins = terms.joins.iter().map(|join| join.size.max(0.0));
        engagement.committed_at_start(side) + joins.fold(0.0, |sum, size| sum + size)
    };
    whole(Side::X).max(whole(Side::Y))
}

/// The rate of a side's fire at which both sides lose the same part of themselves at the start.
fn equal_rate(engagement: &Engagement, side: Side) -> f64 {
    let enemy = side.enemy();
    let mut fire = engagement.sides[side].fire;
    fire.rate = 1.0;
    let (own, others) = (engagement.sides[side].start, engagement.sides[enemy].start);
    part_lost_at_start(engagement, side) / fire.share_per_time(own, others)
}

/// The part of a side that the enemy's fire takes per unit of time at the start.
fn part_lost_at_start(engagement: &Engagement, side: Side) -> f64 {
    let start = engagement.sides[side].start;
    if start > 0.0 {
        lost_at_start(engagement, side) / start
    } else {
        0.0
    }
}

/// What the enemy's fire takes of a side per unit of time at the start.
fn lost_at_start(engagement: &Engagement, side: Side) -> f64 {
    let enemy = side.enemy();
    let (shooters, targets) = (engagement.sides[enemy].start, engagement.sides[side].start);
    engagement.sides[enemy].fire.losses_per_time(shooters, targets)
}

fn largest_range(engagement: &Engagement) -> f64 {
    let reaches = [&engagement.sides.x, &engagement.sides.y].map(|side| side.reach.map(|reach| reach.reach));
    let range = engagement.closing.map(|closing| closing.range);
    let all = reaches.into_iter().chain([range]).flatten();
    all.fold(0.0, f64::max)
}

/// How long the fight lasts: the latest of its break now, with the number at `place` at 0, and with it beyond reach; and no
/// less than what is still to come.
fn lasting(engagement: &Engagement, place: Place) -> f64 {
    let mut changed = engagement.clone();
    let mut longest = latest_instant(engagement, place);
    for value in [None, Some(0.0), Some(LARGEST)] {
        if let Some(value) = value {
            changed.put(place, value);
        }
        let outcome = fight(&changed, Effort::Outcome).outcome;
        longest = longest.max(outcome.time.unwrap_or(0.0));
    }
    if longest > 0.0 {
        return longest;
    }
    let fastest = part_lost_at_start(engagement, Side::X).max(part_lost_at_start(engagement, Side::Y));
    if fastest > 0.0 { 5.0 / fastest } else { 1.0 }
}

/// The last time at which anything else joins, leaves or changes.
fn latest_instant(engagement: &Engagement, place: Place) -> f64 {
    let mut without = engagement.clone();
    without.put(place, 0.0);
    let instants = crate::schedule::instants(&without);
    instants.last().map_or(0.0, |instant| instant.time)
}

/// The least number of two digits that is no less.
fn rounded_up(value: f64) -> f64 {
    let step = libm::pow(10.0, libm::floor(libm::log10(value)) - 1.0);
    let up = libm::ceil(value / step * (1.0 - 1e-12)) * step;
    // Without the last bits that the powers of ten left.
    crate::number::rounded(up, 2)
}
