//! The numbers of an engagement by slot: their names, limits and units, and where each stands, so that one can be changed
//! without a name being read.

use crate::keys::{self, Key, Kind, LARGEST, Unit};
use crate::laws::FireLaw;
use crate::pairs::Pairs;
use crate::quantity::Quantity;
use crate::sides::Side;
use crate::statement::Statement;
use crate::terms::{Changes, SideTerms, Terms};

/// Which number of a side.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Part {
    /// `start`
    Start,
    /// `lost`
    Lost,
    /// `rate`
    Rate,
    /// `half`
    Half,
    /// `p`
    P,
    /// `q`
    Q,
    /// `break`
    Break,
    /// `wastage`
    Wastage,
    /// `support.area`
    SupportArea,
    /// `support.aimed`
    SupportAimed,
    /// `reach`
    Reach,
    /// `reach.shape`
    ReachShape,
}

/// Where a number stands in an engagement.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Place {
    /// A number of a side.
    Side(Side, Part),
    /// The size of a join, counted from 0.
    JoinSize(Side, usize),
    /// The time of a join.
    JoinTime(Side, usize),
    /// The rate of a flow, counted from 0.
    FlowRate(Side, usize),
    /// When a flow begins.
    FlowFrom(Side, usize),
    /// When a flow ends.
    FlowTo(Side, usize),
    /// When a phase begins, by its place among the phases.
    PhaseFrom(usize),
    /// What a phase makes of a number of a side.
    PhaseChange(usize, Side, Part),
    /// `range`
    Range,
    /// `range.closing`
    RangeClosing,
    /// `range.least`
    RangeLeast,
    /// `until`
    Until,
}

/// The values that a number may take.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Limits {
    /// The least.
    pub low: f64,
    /// Whether the least itself is excluded.
    pub above: bool,
    /// The greatest.
    pub high: f64,
    /// Whether the greatest itself is excluded.
    pub below: bool,
}

/// One number of an engagement.
#[derive(Clone, Debug, PartialEq)]
pub struct Slot {
    /// Its name: `x.start`, `x.join.1.size`, `phase2.x.rate`.
    pub name: String,
    /// The key of the link that holds it: `x.start`, `x.join`, `phase2.x.rate`.
    pub key: String,
    /// Where it stands in the engagement.
    pub place: Place,
    /// What is written there, or what holds by default.
    pub quantity: Quantity,
    /// Whether it stands in the link, or holds by default.
    pub written: bool,
    /// The values it may take, the others being as they are.
    pub limits: Limits,
    /// What it is measured in.
    pub unit: Unit,
}

impl Limits {
    /// Whether a value keeps them.
    pub fn hold(&self, value: f64) -> bool {
        let from = if self.above {
            value > self.low
        } else {
            value >= self.low
        };
        let to = if self.below {
            value < self.high
        } else {
            value <= self.high
        };
        from && to
    }

    fn of_key(key: &Key) -> Limits {
        match key.kind {
            Kind::Quantity { low, above, high } => Limits {
                low,
                above,
                high,
                below: false,
            },
            _ => Limits::between(0.0, LARGEST),
        }
    }

    fn between(low: f64, high: f64) -> Limits {
        Limits {
            low,
            above: false,
            high,
            below: false,
        }
    }
}

impl Slot {
    /// Its number; `None` where it is asked for and has none.
    pub fn value(&self) -> Option<f64> {
        self.quantity.now()
    }

    /// Whether it is a time.
    pub fn is_time(&self) -> bool {
        self.unit == Unit::Time
    }
}

/// The numbers of an engagement in the order of `Terms::map`, those without effect under their law of fire left out.
///
/// `pairs` are those that `statement` was read from.
pub fn slots(pairs: &Pairs, statement: &Statement) -> Vec<Slot> {
    let mut named = Vec::new();
    // The names come from where they are given.
    statement.terms.map(|name, quantity| {
        named.push((name.to_owned(), *quantity));
        0.0
    });
    let terms = &statement.terms;
    named
        .into_iter()
        .zip(places(terms))
        .filter(|(_, place)| !is_idle(terms, *place))
        .map(|((name, quantity), place)| slot(pairs, terms, name, quantity, place))
        .collect()
}

/// Whether a number has no effect, as the rate of a side without fire.
fn is_idle<N>(terms: &Terms<N>, place: Place) -> bool {
    match place {
        Place::Side(side, Part::Rate) => terms.sides[side].fire.law == FireLaw::None,
        _ => false,
    }
}

fn slot(pairs: &Pairs, terms: &Terms<Quantity>, name: String, quantity: Quantity, place: Place) -> Slot {
    let key = key_of(&name, place);
    let limits = limits(terms, place);
    let written = pairs.get(&key).is_some_and(|text| !text.trim().is_empty());
    Slot {
        unit: unit(place),
        name,
        key,
        place,
        quantity,
        written,
        limits,
    }
}

/// The key of the link: for an item of a list, that of the list.
fn key_of(name: &str, place: Place) -> String {
    let list = match place {
        Place::JoinSize(side, _) | Place::JoinTime(side, _) => Some((side, "join")),
        Place::FlowRate(side, _) | Place::FlowFrom(side, _) | Place::FlowTo(side, _) => Some((side, "flow")),
        _ => None,
    };
    list.map_or_else(
        || name.to_owned(),
        |(side, list)| format!("{}.{list}", side.letter()),
    )
}

/// The row of the table of keys for a number that has one of its own.
fn row(place: Place) -> Option<&'static Key> {
    let name = match place {
        Place::Side(_, part) | Place::PhaseChange(_, _, part) => part.key(),
        Place::Range => "range",
        Place::RangeClosing => "range.closing",
        Place::RangeLeast => "range.least",
        Place::Until | Place::PhaseFrom(_) => "until",
        _ => return None,
    };
    let side = match place {
        Place::Side(side, _) | Place::PhaseChange(_, side, _) => Some(side),
        _ => None,
    };
    keys::slot_of(side, name).map(keys::row)
}

fn unit(place: Place) -> Unit {
    match place {
        Place::JoinSize(..) => Unit::Strength,
        Place::JoinTime(..) | Place::FlowFrom(..) | Place::FlowTo(..) => Unit::Time,
        Place::FlowRate(..) => Unit::StrengthPerTime,
        _ => row(place).map_or(Unit::None, |key| key.unit),
    }
}

/// The limits of a number while the others stay: those of its key, and the order of what must follow each other.
fn limits(terms: &Terms<Quantity>, place: Place) -> Limits {
    let number = |quantity: &Quantity| quantity.numbers().next();
    match place {
        Place::Side(side, Part::Start) => Limits {
            // Somebody must be there, or come.
            above: !terms.sides[side].is_reinforced(),
            ..Limits::between(0.0, LARGEST)
        },
        Place::JoinSize(..) => Limits::between(-LARGEST, LARGEST),
        Place::FlowFrom(side, item) => {
            let to = terms.sides[side].flows[item].to.as_ref().and_then(number);
            Limits {
                below: to.is_some(),
                ..Limits::between(0.0, to.unwrap_or(LARGEST))
            }
        }
        Place::FlowTo(side, item) => Limits {
            above: true,
            ..Limits::between(
                number(&terms.sides[side].flows[item].from).unwrap_or(0.0),
                LARGEST,
            )
        },
        Place::JoinTime(..) | Place::FlowRate(..) => Limits::between(0.0, LARGEST),
        _ => row(place).map_or(Limits::between(0.0, LARGEST), Limits::of_key),
    }
}

/// Where every number of `terms` stands, in the order of `Terms::map`.
pub fn places<N>(terms: &Terms<N>) -> Vec<Place> {
    let mut places = Vec::new();
    for side in Side::BOTH {
        side_places(&terms.sides[side], side, &mut places);
    }
    for (at, phase) in terms.phases.iter().enumerate() {
        places.push(Place::PhaseFrom(at));
        for side in Side::BOTH {
            let changes = Part::ALL
                .into_iter()
                .filter(|part| phase.changes[side].has(*part));
            places.extend(changes.map(|part| Place::PhaseChange(at, side, part)));
        }
    }
    if terms.closing.is_some() {
        places.extend([Place::Range, Place::RangeClosing, Place::RangeLeast]);
    }
    places.extend(terms.until.as_ref().map(|_| Place::Until));
    places
}

fn side_places<N>(terms: &SideTerms<N>, side: Side, places: &mut Vec<Place>) {
    let parts = Part::ALL.into_iter().filter(|part| terms.has(*part));
    places.extend(parts.map(|part| Place::Side(side, part)));
    for item in 0..terms.joins.len() {
        places.extend([Place::JoinSize(side, item), Place::JoinTime(side, item)]);
    }
    for (item, flow) in terms.flows.iter().enumerate() {
        places.extend([Place::FlowRate(side, item), Place::FlowFrom(side, item)]);
        places.extend(flow.to.as_ref().map(|_| Place::FlowTo(side, item)));
    }
}

impl Part {
    /// The numbers of a side, in the order of `Terms::map`.
    const ALL: [Part; 12] = [
        Part::Start,
        Part::Lost,
        Part::Rate,
        Part::Half,
        Part::P,
        Part::Q,
        Part::Break,
        Part::Wastage,
        Part::SupportArea,
        Part::SupportAimed,
        Part::Reach,
        Part::ReachShape,
    ];

    /// Its key, without the side's letter.
    pub fn key(self) -> &'static str {
        match self {
            Part::Start => "start",
            Part::Lost => "lost",
            Part::Rate => "rate",
            Part::Half => "half",
            Part::P => "p",
            Part::Q => "q",
            Part::Break => "break",
            Part::Wastage => "wastage",
            Part::SupportArea => "support.area",
            Part::SupportAimed => "support.aimed",
            Part::Reach => "reach",
            Part::ReachShape => "reach.shape",
        }
    }
}

impl SideTerms<Quantity> {
    /// Whether reserves or a flow bring strength, or may.
    fn is_reinforced(&self) -> bool {
        self.joins.iter().any(|join| join.size.may_exceed_zero())
            || self.flows.iter().any(|flow| flow.rate.may_exceed_zero())
    }
}

impl<N> SideTerms<N> {
    fn has(&self, part: Part) -> bool {
        match part {
            Part::Half => self.fire.half.is_some(),
            Part::P => self.fire.p.is_some(),
            Part::Q => self.fire.q.is_some(),
            Part::Reach | Part::ReachShape => self.reach.is_some(),
            _ => true,
        }
    }

    fn number_mut(&mut self, part: Part) -> Option<&mut N> {
        match part {
            Part::Start => Some(&mut self.start),
            Part::Lost => Some(&mut self.lost),
            Part::Rate => Some(&mut self.fire.rate),
            Part::Half => self.fire.half.as_mut(),
            Part::P => self.fire.p.as_mut(),
            Part::Q => self.fire.q.as_mut(),
            Part::Break => Some(&mut self.break_point),
            Part::Wastage => Some(&mut self.wastage),
            Part::SupportArea => Some(&mut self.support.area),
            Part::SupportAimed => Some(&mut self.support.aimed),
            Part::Reach => self.reach.as_mut().map(|reach| &mut reach.reach),
            Part::ReachShape => self.reach.as_mut().map(|reach| &mut reach.shape),
        }
    }
}

impl<N> Changes<N> {
    fn has(&self, part: Part) -> bool {
        match part {
            Part::Rate => self.rate.is_some(),
            Part::Half => self.half.is_some(),
            Part::P => self.p.is_some(),
            Part::Q => self.q.is_some(),
            Part::Wastage => self.wastage.is_some(),
            Part::SupportArea => self.support_area.is_some(),
            Part::SupportAimed => self.support_aimed.is_some(),
            _ => false,
        }
    }

    fn number_mut(&mut self, part: Part) -> Option<&mut N> {
        match part {
            Part::Rate => self.rate.as_mut(),
            Part::Half => self.half.as_mut(),
            Part::P => self.p.as_mut(),
            Part::Q => self.q.as_mut(),
            Part::Wastage => self.wastage.as_mut(),
            Part::SupportArea => self.support_area.as_mut(),
            Part::SupportAimed => self.support_aimed.as_mut(),
            _ => None,
        }
    }
}

impl<N> Terms<N> {
    /// The number at `place`; `None` where these terms have none there.
    pub fn number_mut(&mut self, place: Place) -> Option<&mut N> {
        match place {
            Place::Side(side, part) => self.sides[side].number_mut(part),
            Place::JoinSize(side, item) => self.sides[side].joins.get_mut(item).map(|join| &mut join.size),
            Place::JoinTime(side, item) => self.sides[side].joins.get_mut(item).map(|join| &mut join.time),
            Place::FlowRate(side, item) => self.sides[side].flows.get_mut(item).map(|flow| &mut flow.rate),
            Place::FlowFrom(side, item) => self.sides[side].flows.get_mut(item).map(|flow| &mut flow.from),
            Place::FlowTo(side, item) => self.sides[side].flows.get_mut(item)?.to.as_mut(),
            Place::PhaseFrom(at) => self.phases.get_mut(at).map(|phase| &mut phase.from),
            Place::PhaseChange(at, side, part) => self.phases.get_mut(at)?.changes[side].number_mut(part),
            Place::Range => self.closing.as_mut().map(|closing| &mut closing.range),
            Place::RangeClosing => self.closing.as_mut().map(|closing| &mut closing.speed),
            Place::RangeLeast => self.closing.as_mut().map(|closing| &mut closing.least),
            Place::Until => self.until.as_mut(),
        }
    }

    /// Puts `number` at `place`, where these terms have one.
    pub fn put(&mut self, place: Place, number: N) {
        if let Some(there) = self.number_mut(place) {
            *there = number;
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::statement::Values;

    const FULL: &str = "x.start=600&x.fire=search&x.rate=0.04&x.half=30&x.break=0.3&x.join=64@4,-20@6&x.flow=5@2/8,3@1/&x.reach=800\
                        &y.start=400&y.fire=power&y.rate=0.06&y.p=0.9&y.q=0.2&y.wastage=0.01&y.support.area=0.02&y.join=9@1\
                        &phase1.from=3&phase1.x.rate=0.05&phase1.y.support.aimed=2&phase3.from=2&phase3.y.rate=0.07\
                        &range=1000&range.closing=80&until=30";

    /// A place is the number that its name says: putting a value there does what the named value does.
    #[test]
    fn places_and_names_agree() {
        let pairs = Pairs::parse(FULL);
        let statement = Statement::read(&pairs).expect("it reads");
        let mut count = 0;
        statement.terms.map(|_, _| count += 1);
        let slots = slots(&pairs, &statement);
        assert_eq!(slots.len(), count);
        for slot in slots {
            let mut changed = statement.engagement();
            changed.put(slot.place, 12.5);
            let named = statement.engagement_with(&Values::from([(slot.name.clone(), 12.5)]));
            assert_eq!(changed, named, "{}", slot.name);
            let value = slot.value().expect("all are plain");
            assert!(slot.limits.hold(value), "{}", slot.name);
        }
    }

    #[test]
    fn what_is_written_is_told_from_what_holds_by_default() {
        let pairs = Pairs::parse("x.start=600&x.rate=0.04&y.start=400&y.fire=none&x.break= ");
        let statement = Statement::read(&pairs).expect("it reads");
        let slots = slots(&pairs, &statement);
        let written: Vec<&str> = slots
            .iter()
            .filter(|slot| slot.written)
            .map(|slot| slot.name.as_str())
            .collect();
        assert_eq!(written, ["x.start", "x.rate", "y.start"]);
        assert!(slots.iter().all(|slot| slot.name != "y.rate"));
    }
}
