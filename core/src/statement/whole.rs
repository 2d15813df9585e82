//! The engagement as a whole, its sides and the range between them.

use super::name::Name;
use super::reader::Reader;
use super::{Statement, TimeUnit};
use crate::laws::FireLaw;
use crate::quantity::Quantity;
use crate::sides::{Both, Side};
use crate::terms::{Closing, Fire, Reach, SideTerms, Support, Terms};

impl Reader<'_> {
    pub(super) fn statement(&mut self) -> Option<Statement> {
        let title = self.free_text(Name::whole("title"));
        let note = self.free_text(Name::whole("note"));
        let marking = self.free_text(Name::whole("marking"));
        let unit = self
            .choice(Name::whole("unit"))
            .and_then(TimeUnit::of_word)
            .unwrap_or_default();
        let counted = self.free_text(Name::whole("counted"));
        let counted = if counted.is_empty() {
            "combatants".into()
        } else {
            counted
        };
        let names = Both::of(|side| {
            let name = self.free_text(Name::of_side(side, "name"));
            if name.is_empty() {
                format!("Side {}", side.letter().to_uppercase())
            } else {
                name
            }
        });
        let until = self.quantity(Name::whole("until"));
        for key in ["view", "paper", "v"] {
            self.choice(Name::whole(key));
        }
        let x = self.side(Side::X);
        let y = self.side(Side::Y);
        let phases = self.phases();
        let sides = Both { x: x?, y: y? };
        let closing = self.closing(&sides)?;
        let terms = Terms {
            sides,
            phases: phases?,
            closing: Some(closing).flatten(),
            until,
        };
        Some(Statement {
            title,
            note,
            marking,
            unit,
            counted,
            names,
            terms,
        })
    }

    fn side(&mut self, side: Side) -> Option<SideTerms<Quantity>> {
        let key = |name: &'static str| Name::of_side(side, name);
        let start = self.required(key("start"), "a strength at the start");
        let law = self.fire_law(key("fire"));
        let rate = match law {
            Some(FireLaw::None) => Some(Quantity::Number(0.0)),
            _ => self.required(key("rate"), "a rate"),
        };
        let lost = self.quantity(key("lost")).unwrap_or(Quantity::Number(0.0));
        let break_point = self.quantity(key("break")).unwrap_or(Quantity::Number(1.0));
        let law = law?;
        let mut needed = |name: &'static str, what: &str| {
            if law.law().needs.contains(&name) {
                self.required(key(name), what).map(Some)
            } else {
                Some(None)
            }
        };
        let half = needed("half", "the number of targets at which half the time is search");
        let p = needed("p", "the exponent on the shooters");
        let q = needed("q", "the exponent on the targets");
        let fire = Fire {
            law,
            rate: rate?,
            half: half?,
            p: p?,
            q: q?,
        };
        let none = Quantity::Number(0.0);
        let wastage = self.quantity(key("wastage")).unwrap_or(none);
        let support = Support {
            area: self.quantity(key("support.area")).unwrap_or(none),
            aimed: self.quantity(key("support.aimed")).unwrap_or(none),
        };
        let shape = self.quantity(key("reach.shape")).unwrap_or(Quantity::Number(1.0));
        let reach = self.quantity(key("reach")).map(|reach| Reach { reach, shape });
        let joins = self.joins(key("join"));
        let flows = self.flows(key("flow"));
        let start = start?;
        let comes = joins
            .iter()
            .any(|join| join.size.numbers().any(|size| size > 0.0))
            || flows
                .iter()
                .any(|flow| flow.rate.numbers().any(|rate| rate > 0.0));
        if start == none && !comes {
            self.report(
                key("start"),
                "must be more than 0, unless reserves or a flow bring strength later",
            );
        }
        Some(SideTerms {
            start,
            lost,
            fire,
            break_point,
            wastage,
            support,
            reach,
            joins,
            flows,
        })
    }

    fn fire_law(&mut self, key: Name) -> Option<FireLaw> {
        let word = match self.text(key) {
            Some(_) => self.choice(key)?,
            None if !self.is_blank(key) => return None,
            None => "aimed",
        };
        FireLaw::of_word(word)
    }

    /// The closing of the range; the outer `None` where a problem keeps it from being read.
    fn closing(&mut self, sides: &Both<SideTerms<Quantity>>) -> Option<Option<Closing<Quantity>>> {
        let none = Quantity::Number(0.0);
        let speed = self.quantity(Name::whole("range.closing")).unwrap_or(none);
        let least = self.quantity(Name::whole("range.least")).unwrap_or(none);
        if sides.x.reach.is_none() && sides.y.reach.is_none() {
            self.quantity(Name::whole("range"));
            return Some(None);
        }
        let range = self.required(
            Name::whole("range"),
            "the range at the start, which a reach is measured against",
        )?;
        Some(Some(Closing { range, speed, least }))
    }
}
