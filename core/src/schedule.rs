//! What happens when: the instants of an engagement, and what holds between them.

use crate::conditions::{Conditions, Growth};
use crate::order::sort_by;
use crate::sides::{Both, Side};
use crate::terms::{Changes, Engagement, Fire, Flow};

/// What happens at one instant, in this order: arrivals, phases, withdrawals.
#[derive(Clone, Debug, PartialEq)]
pub struct Instant {
    /// When.
    pub time: f64,
    /// What joins each side.
    pub arrivals: Both<f64>,
    /// What is to be withdrawn from each side.
    pub withdrawals: Both<f64>,
    /// What of it was there and went, where a fight came so far.
    pub went: Both<f64>,
    /// The numbers of the phases that begin.
    pub phases: Vec<u8>,
    /// What holds from then on.
    pub conditions: Conditions,
}

/// The instants of an engagement, time 0 first.
pub fn instants(engagement: &Engagement) -> Vec<Instant> {
    if is_quiet(engagement) {
        return vec![instant(engagement, &[], 0.0)];
    }
    let mut phases: Vec<usize> = (0..engagement.phases.len()).collect();
    sort_by(&mut phases, |a, b| {
        let key = |place: &usize| (engagement.phases[*place].from, engagement.phases[*place].number);
        key(a).partial_cmp(&key(b)).unwrap_or(std::cmp::Ordering::Equal)
    });
    times(engagement)
        .into_iter()
        .map(|time| instant(engagement, &phases, time))
        .collect()
}

/// What happens at `time`; `phases` are the places of the phases, in the order of their beginning.
fn instant(engagement: &Engagement, phases: &[usize], time: f64) -> Instant {
    let sum = |side: Side, sign: f64| {
        let sizes = engagement.sides[side]
            .joins
            .iter()
            .filter(|join| join.time == time);
        sizes
            .map(|join| (join.size * sign).max(0.0))
            .fold(0.0, |sum, size| sum + size)
    };
    let begun: Vec<usize> = phases
        .iter()
        .copied()
        .filter(|place| engagement.phases[*place].from <= time)
        .collect();
    let beginning = begun
        .iter()
        .map(|place| &engagement.phases[*place])
        .filter(|phase| phase.from == time);
    Instant {
        time,
        arrivals: Both::of(|side| sum(side, 1.0)),
        withdrawals: Both::of(|side| sum(side, -1.0)),
        went: Both::default(),
        phases: beginning.map(|phase| phase.number).collect(),
        conditions: conditions(engagement, &begun, time),
    }
}

/// Whether nothing comes, goes or changes after the beginning.
fn is_quiet(engagement: &Engagement) -> bool {
    let nobody =
        |side: Side| engagement.sides[side].joins.is_empty() && engagement.sides[side].flows.is_empty();
    nobody(Side::X) && nobody(Side::Y) && engagement.phases.is_empty() && engagement.closing.is_none()
}

/// Whether the fire of any side has an effect at any time.
pub(crate) fn any_fire(engagement: &Engagement) -> bool {
    instants(engagement).iter().any(|instant| {
        Side::BOTH
            .iter()
            .any(|side| instant.conditions.fire[*side].takes_effect())
    })
}

/// Every time at which something changes, in order, each once.
fn times(engagement: &Engagement) -> Vec<f64> {
    let mut times = vec![0.0];
    for side in [&engagement.sides.x, &engagement.sides.y] {
        times.extend(side.joins.iter().map(|join| join.time));
        times.extend(
            side.flows
                .iter()
                .flat_map(|flow| [Some(flow.from), flow.to])
                .flatten(),
        );
    }
    times.extend(engagement.phases.iter().map(|phase| phase.from));
    if let Some(closing) = engagement.closing.filter(|closing| closing.speed > 0.0) {
        let reaches =
            [&engagement.sides.x, &engagement.sides.y].map(|side| side.reach.map(|reach| reach.reach));
        let ranges = reaches.into_iter().flatten().chain([closing.least]);
        times.extend(ranges.map(|range| (closing.range - range) / closing.speed));
    }
    times.retain(|time| *time >= 0.0);
    sort_by(&mut times, f64::total_cmp);
    times.dedup();
    times
}

/// What holds from `time` on, with the phases `begun` in the order of their beginning.
fn conditions(engagement: &Engagement, begun: &[usize], time: f64) -> Conditions {
    let mut fire = Both::of(|side: Side| engagement.sides[side].fire);
    let mut wastage = Both::of(|side: Side| engagement.sides[side].wastage);
    let mut support = Both::of(|side: Side| engagement.sides[side].support);
    for place in begun {
        for side in Side::BOTH {
            let changes = &engagement.phases[*place].changes[side];
            fire[side] = changed(&fire[side], changes);
            wastage[side] = changes.wastage.unwrap_or(wastage[side]);
            support[side].area = changes.support_area.unwrap_or(support[side].area);
            support[side].aimed = changes.support_aimed.unwrap_or(support[side].aimed);
        }
    }
    let runs = |flow: &&Flow<f64>| flow.from <= time && flow.to.is_none_or(|to| time < to);
    let flow = Both::of(|side: Side| {
        engagement.sides[side]
            .flows
            .iter()
            .filter(runs)
            .map(|flow| flow.rate)
            .fold(0.0, |sum, rate| sum + rate)
    });
    let mut growth = Both::default();
    for side in Side::BOTH {
        match growth_at(engagement, side, time) {
            Factor::Full => {}
            Factor::Steady(factor) => fire[side].rate *= factor,
            Factor::Growing(grows) => growth[side] = Some(grows),
        }
    }
    Conditions {
        fire,
        wastage,
        support,
        flow,
        growth,
    }
}

fn changed(fire: &Fire<f64>, changes: &Changes<f64>) -> Fire<f64> {
    Fire {
        law: changes.law.unwrap_or(fire.law),
        rate: changes.rate.unwrap_or(fire.rate),
        half: changes.half.or(fire.half),
        p: changes.p.or(fire.p),
        q: changes.q.or(fire.q),
    }
}

/// What range does to a rate from a time on.
enum Factor {
    Full,
    Steady(f64),
    Growing(Growth),
}

fn growth_at(engagement: &Engagement, side: Side, time: f64) -> Factor {
    let (Some(closing), Some(reach)) = (engagement.closing, engagement.sides[side].reach) else {
        return Factor::Full;
    };
    let open = closing.range - closing.speed * time;
    // At the instant where it comes to an end, rounding may leave it a hair short.
    let over = (closing.range - closing.least) / closing.speed;
    let range = if time >= over || open <= closing.least {
        closing.least.min(closing.range)
    } else {
        open
    };
    let value = ((reach.reach - range) / reach.reach).max(0.0);
    let arrives = (closing.range - reach.reach) / closing.speed;
    let closes = range > closing.least && closing.speed > 0.0;
    if !closes || (value == 0.0 && time < arrives) {
        let full = Growth {
            value,
            slope: 0.0,
            power: reach.shape,
        };
        return if value > 0.0 {
            Factor::Steady(full.at(0.0))
        } else {
            Factor::Steady(0.0)
        };
    }
    if reach.shape == 0.0 {
        return Factor::Full;
    }
    // Next to the moment at which it comes into reach only rounding is left of the value.
    let value = if time == arrives || value <= 4.0 * f64::EPSILON {
        0.0
    } else {
        value
    };
    Factor::Growing(Growth {
        value,
        slope: closing.speed / reach.reach,
        power: reach.shape,
    })
}
