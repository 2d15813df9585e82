//! The numbers of an engagement, as quantities of a statement or as plain numbers.

pub use crate::conditions::Support;
use crate::laws::FireLaw;
use crate::sides::{Both, Side};
use std::fmt;

/// How one side's fire takes effect on the enemy.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Fire<N> {
    /// The law it follows.
    pub law: FireLaw,
    /// Its attrition-rate coefficient, in the unit of the law; 0 for no fire.
    pub rate: N,
    /// For `search`: the number of targets at which its shooters spend half their time searching.
    pub half: Option<N>,
    /// For `power`: the exponent on the shooters.
    pub p: Option<N>,
    /// For `power`: the exponent on the targets.
    pub q: Option<N>,
}

/// Reserves that join, or for a size below 0 a withdrawal.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Join<N> {
    /// How many.
    pub size: N,
    /// When.
    pub time: N,
}

/// Steady reinforcement.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Flow<N> {
    /// How many per unit of time.
    pub rate: N,
    /// From when.
    pub from: N,
    /// Until when; `None` where it never ends.
    pub to: Option<N>,
}

/// How a side's fire grows as the range closes: rate × (1 − range/reach)^shape.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Reach<N> {
    /// The range beyond which its fire has no effect.
    pub reach: N,
    /// The exponent.
    pub shape: N,
}

/// What is stated of one side.
#[derive(Clone, Debug, PartialEq)]
pub struct SideTerms<N> {
    /// Strength at time 0.
    pub start: N,
    /// Strength lost before time 0.
    pub lost: N,
    /// Its fire on the enemy.
    pub fire: Fire<N>,
    /// The fraction lost at which it breaks.
    pub break_point: N,
    /// The part of itself that it loses per unit of time without the enemy.
    pub wastage: N,
    /// Its supporting arms.
    pub support: Support<N>,
    /// How its fire grows as the range closes; `None` where range does not count.
    pub reach: Option<Reach<N>>,
    /// Its reserves and withdrawals.
    pub joins: Vec<Join<N>>,
    /// Its steady reinforcement.
    pub flows: Vec<Flow<N>>,
}

/// What changes of a side at a phase; `None` where it stays.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Changes<N> {
    /// The law of its fire.
    pub law: Option<FireLaw>,
    /// Its rate.
    pub rate: Option<N>,
    /// See [`Fire`].
    pub half: Option<N>,
    /// See [`Fire`].
    pub p: Option<N>,
    /// See [`Fire`].
    pub q: Option<N>,
    /// Its wastage.
    pub wastage: Option<N>,
    /// Its supporting arms, firing at an area.
    pub support_area: Option<N>,
    /// Its supporting arms, firing aimed.
    pub support_aimed: Option<N>,
}

/// A phase: from a time on, some keys have other values.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Phase<N> {
    /// Its number in the link, 1 to 9.
    pub number: u8,
    /// From when.
    pub from: N,
    /// What changes of each side.
    pub changes: Both<Changes<N>>,
}

/// The closing of the range between the sides.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Closing<N> {
    /// The range at time 0.
    pub range: N,
    /// By how much it closes per unit of time.
    pub speed: N,
    /// Where it stops.
    pub least: N,
}

/// All numbers of an engagement.
#[derive(Clone, Debug, PartialEq)]
pub struct Terms<N> {
    /// What is stated of each side.
    pub sides: Both<SideTerms<N>>,
    /// The phases, by number.
    pub phases: Vec<Phase<N>>,
    /// The range, where it counts.
    pub closing: Option<Closing<N>>,
    /// The clock, in the unit of time.
    pub until: Option<N>,
}

/// An engagement in plain numbers: what is worked out.
pub type Engagement = Terms<f64>;

/// Puts the names of slots together, where they are wanted.
#[derive(Clone, Copy)]
struct Naming {
    wanted: bool,
}

impl Naming {
    fn of(self, parts: fmt::Arguments<'_>) -> String {
        if self.wanted {
            parts.to_string()
        } else {
            String::new()
        }
    }
}

/// Replaces numbers by their slots' names.
struct Mapper<F> {
    change: F,
    naming: Naming,
}

impl<F> Mapper<F> {
    fn fire<N, M>(&mut self, at: &str, fire: &Fire<N>) -> Fire<M>
    where
        F: FnMut(&str, &N) -> M,
    {
        let name = self.naming;
        Fire {
            law: fire.law,
            rate: (self.change)(&name.of(format_args!("{at}.rate")), &fire.rate),
            half: self.option(&name.of(format_args!("{at}.half")), fire.half.as_ref()),
            p: self.option(&name.of(format_args!("{at}.p")), fire.p.as_ref()),
            q: self.option(&name.of(format_args!("{at}.q")), fire.q.as_ref()),
        }
    }

    fn option<N, M>(&mut self, slot: &str, number: Option<&N>) -> Option<M>
    where
        F: FnMut(&str, &N) -> M,
    {
        number.map(|number| (self.change)(slot, number))
    }

    fn side<N, M>(&mut self, letter: &str, side: &SideTerms<N>) -> SideTerms<M>
    where
        F: FnMut(&str, &N) -> M,
    {
        let name = self.naming;
        let start = (self.change)(&name.of(format_args!("{letter}.start")), &side.start);
        let lost = (self.change)(&name.of(format_args!("{letter}.lost")), &side.lost);
        let fire = self.fire(letter, &side.fire);
        let mut one = |key: &str, number: &N| (self.change)(&name.of(format_args!("{letter}.{key}")), number);
        let break_point = one("break", &side.break_point);
        let wastage = one("wastage", &side.wastage);
        let support = Support {
            area: one("support.area", &side.support.area),
            aimed: one("support.aimed", &side.support.aimed),
        };
        let reach = side.reach.as_ref().map(|reach| Reach {
            reach: one("reach", &reach.reach),
            shape: one("reach.shape", &reach.shape),
        });
        let numbered = |place: usize| place + 1;
        let joins = side.joins.iter().enumerate().map(|(place, join)| Join {
            size: one(
                &name.of(format_args!("join.{}.size", numbered(place))),
                &join.size,
            ),
            time: one(
                &name.of(format_args!("join.{}.time", numbered(place))),
                &join.time,
            ),
        });
        let joins = joins.collect();
        let flows = side.flows.iter().enumerate().map(|(place, flow)| Flow {
            rate: one(
                &name.of(format_args!("flow.{}.rate", numbered(place))),
                &flow.rate,
            ),
            from: one(
                &name.of(format_args!("flow.{}.from", numbered(place))),
                &flow.from,
            ),
            to: flow
                .to
                .as_ref()
                .map(|to| one(&name.of(format_args!("flow.{}.to", numbered(place))), to)),
        });
        let flows = flows.collect();
        SideTerms {
            start,
            lost,
            fire,
            break_point,
            wastage,
            support,
            reach,
            joins,
            flows,
        }
    }

    fn changes<N, M>(&mut self, at: &str, changes: &Changes<N>) -> Changes<M>
    where
        F: FnMut(&str, &N) -> M,
    {
        let name = self.naming;
        Changes {
            law: changes.law,
            rate: self.option(&name.of(format_args!("{at}.rate")), changes.rate.as_ref()),
            half: self.option(&name.of(format_args!("{at}.half")), changes.half.as_ref()),
            p: self.option(&name.of(format_args!("{at}.p")), changes.p.as_ref()),
            q: self.option(&name.of(format_args!("{at}.q")), changes.q.as_ref()),
            wastage: self.option(&name.of(format_args!("{at}.wastage")), changes.wastage.as_ref()),
            support_area: self.option(
                &name.of(format_args!("{at}.support.area")),
                changes.support_area.as_ref(),
            ),
            support_aimed: self.option(
                &name.of(format_args!("{at}.support.aimed")),
                changes.support_aimed.as_ref(),
            ),
        }
    }
}

impl<N> Terms<N> {
    /// The same terms with each number replaced by what `change` makes of it and of its slot's name.
    pub fn map<M>(&self, change: impl FnMut(&str, &N) -> M) -> Terms<M> {
        self.mapped(Mapper {
            change,
            naming: Naming { wanted: true },
        })
    }

    /// The same without the names, which take longer to put together than all the rest.
    pub(crate) fn map_unnamed<M>(&self, mut change: impl FnMut(&N) -> M) -> Terms<M> {
        self.mapped(Mapper {
            change: |_: &str, number: &N| change(number),
            naming: Naming { wanted: false },
        })
    }

    fn mapped<M>(&self, mut mapper: Mapper<impl FnMut(&str, &N) -> M>) -> Terms<M> {
        let name = mapper.naming;
        let sides = Both::of(|side| mapper.side(side.letter(), &self.sides[side]));
        let phases = self.phases.iter().map(|phase| Phase {
            number: phase.number,
            from: (mapper.change)(&name.of(format_args!("phase{}.from", phase.number)), &phase.from),
            changes: Both::of(|side: Side| {
                mapper.changes(
                    &name.of(format_args!("phase{}.{}", phase.number, side.letter())),
                    &phase.changes[side],
                )
            }),
        });
        let phases = phases.collect();
        let closing = self.closing.as_ref().map(|closing| Closing {
            range: (mapper.change)("range", &closing.range),
            speed: (mapper.change)("range.closing", &closing.speed),
            least: (mapper.change)("range.least", &closing.least),
        });
        let until = mapper.option("until", self.until.as_ref());
        Terms {
            sides,
            phases,
            closing,
            until,
        }
    }
}

impl SideTerms<f64> {
    /// A side with nothing but its fire: no support, no wastage, no reach, and nobody to come.
    pub fn of_fire(start: f64, lost: f64, fire: Fire<f64>, break_point: f64) -> SideTerms<f64> {
        SideTerms {
            start,
            lost,
            fire,
            break_point,
            wastage: 0.0,
            support: Support::default(),
            reach: None,
            joins: Vec::new(),
            flows: Vec::new(),
        }
    }
}

impl Engagement {
    /// An engagement of these two sides without phases, range or clock.
    pub fn of_sides(sides: Both<SideTerms<f64>>) -> Engagement {
        Terms {
            sides,
            phases: Vec::new(),
            closing: None,
            until: None,
        }
    }

    /// All that a side has put in by time 0: its start and what it lost before.
    pub fn committed_at_start(&self, side: Side) -> f64 {
        self.sides[side].start + self.sides[side].lost
    }
}
