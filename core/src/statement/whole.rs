//! The engagement as a whole, its sides and the range between them.

use super::name::Name;
use super::reader::Reader;
use super::{Statement, TimeUnit};
use crate::keys::rows;
use crate::laws::FireLaw;
use crate::quantity::Quantity;
use crate::sides::{Both, Side};
use crate::terms::{Closing, Fire, Reach, SideTerms, Support, Terms};

impl Reader<'_> {
    pub(super) fn statement(&mut self) -> Option<Statement> {
        let title = self.free_text(Name::whole(rows::TITLE));
        let note = self.free_text(Name::whole(rows::NOTE));
        let marking = self.free_text(Name::whole(rows::MARKING));
        let unit = self
            .choice(Name::whole(rows::UNIT))
            .and_then(TimeUnit::of_word)
            .unwrap_or_default();
        let counted = self.text_or(Name::whole(rows::COUNTED), "combatants");
        let names = Both {
            x: self.text_or(Name::of_side(Side::X, rows::NAME), "Side X"),
            y: self.text_or(Name::of_side(Side::Y, rows::NAME), "Side Y"),
        };
        let until = self.quantity(Name::whole(rows::UNTIL));
        for key in [rows::VIEW, rows::PAPER, rows::V] {
            self.choice(Name::whole(key));
        }
        let x = self.side(Side::X);
        let y = self.side(Side::Y);
        let phases = self.phases();
        let so_that = self.goals();
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
            so_that,
            in_question: self.asks(),
        })
    }

    fn side(&mut self, side: Side) -> Option<SideTerms<Quantity>> {
        let key = |row: usize| Name::of_side(side, row);
        let start = self.required(key(rows::START), "a strength at the start");
        let law = self.fire_law(key(rows::FIRE));
        let rate = match law {
            Some(FireLaw::None) => Some(Quantity::Number(0.0)),
            _ => self.required(key(rows::RATE), "a rate"),
        };
        let lost = self.quantity(key(rows::LOST)).unwrap_or(Quantity::Number(0.0));
        let break_point = self.quantity(key(rows::BREAK)).unwrap_or(Quantity::Number(1.0));
        let law = law?;
        let mut needed = |row: usize, what: &str| {
            if law.law().needs.contains(&key(row).row().name) {
                self.required(key(row), what).map(Some)
            } else {
                Some(None)
            }
        };
        let half = needed(
            rows::HALF,
            "the number of targets at which half the time is search",
        );
        let p = needed(rows::P, "the exponent on the shooters");
        let q = needed(rows::Q, "the exponent on the targets");
        let fire = Fire {
            law,
            rate: rate?,
            half: half?,
            p: p?,
            q: q?,
        };
        let none = Quantity::Number(0.0);
        let wastage = self.quantity(key(rows::WASTAGE)).unwrap_or(none);
        let support = Support {
            area: self.quantity(key(rows::SUPPORT_AREA)).unwrap_or(none),
            aimed: self.quantity(key(rows::SUPPORT_AIMED)).unwrap_or(none),
        };
        let shape = self
            .quantity(key(rows::REACH_SHAPE))
            .unwrap_or(Quantity::Number(1.0));
        let reach = self
            .quantity(key(rows::REACH))
            .map(|reach| Reach { reach, shape });
        let joins = self.joins(key(rows::JOIN));
        let flows = self.flows(key(rows::FLOW));
        let start = start?;
        let comes = joins.iter().any(|join| join.size.may_exceed_zero())
            || flows.iter().any(|flow| flow.rate.may_exceed_zero());
        if start.now() == Some(0.0) && !comes {
            self.report(
                key(rows::START),
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
        if sides.x.reach.is_none() && sides.y.reach.is_none() {
            self.without_effect(|reader| {
                for key in [rows::RANGE_CLOSING, rows::RANGE_LEAST, rows::RANGE] {
                    reader.quantity(Name::whole(key));
                }
            });
            return Some(None);
        }
        let speed = self.quantity(Name::whole(rows::RANGE_CLOSING)).unwrap_or(none);
        let least = self.quantity(Name::whole(rows::RANGE_LEAST)).unwrap_or(none);
        let range = self.required(
            Name::whole(rows::RANGE),
            "the range at the start, which a reach is measured against",
        )?;
        Some(Some(Closing { range, speed, least }))
    }
}
