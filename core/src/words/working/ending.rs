//! How it ends: who breaks, what is left, when, and what would be left if nobody broke.

use super::{LETTERS, Writer};
use crate::double::Double;
use crate::fight::descent;
use crate::outcome::{Breaks, Ended, Method, ToTheLast};
use crate::sides::{Both, Side};
use crate::state::{StateEquation, Term, is_endless};
use crate::words::format::time as time_in_words;
use crate::words::math::*;
use crate::words::times;

impl Writer<'_> {
    pub(super) fn verdict(&mut self, costs: Both<Double>) {
        let names = self.statement.names.clone();
        if is_endless(costs.x) && is_endless(costs.y) {
            let words = "Both are without bound: each side fades, and neither ever reaches its line";
            self.line("breaks", words, None);
            if self.outcome.ended == Ended::Clock {
                self.clock();
            }
            return;
        }
        let tie = StateEquation::tie(costs);
        let loser = if tie || costs.x < costs.y {
            Side::X
        } else {
            Side::Y
        };
        let margin = if is_endless(costs.x) || is_endless(costs.y) {
            None
        } else {
            let difference = f64::from(costs.x - costs.y);
            let of = |side: Side| number(costs[side].into());
            Some(equal(&[minus(&of(Side::X), &of(Side::Y)), number(difference)]))
        };
        let words = if tie {
            "The margin is no more than the rounding of the figures: both come to their lines together".into()
        } else {
            let name = &names[loser];
            match &margin {
                Some(_) => format!("The margin; {name} costs less, so it comes to its line first"),
                None => {
                    format!(
                        "{name} costs less, since the other is without bound, so it comes to its line first"
                    )
                }
            }
        };
        self.line("breaks", words, margin);
        self.left(loser, costs[loser]);
        self.time(loser);
    }

    /// What is left of the other side when `loser` is at its line, and the state at the clock.
    fn left(&mut self, loser: Side, cost: Double) {
        let winner = loser.enemy();
        let letters = &LETTERS[winner];
        let left = self
            .piece
            .point_down(loser, descent(&self.engagement, loser))
            .left[winner];
        let terms = self.piece.equation.terms[winner];
        let rate = self.piece.equation.rate[winner];
        let words = format!(
            "Then {} has, from the state equation with {} at its line",
            self.statement.names[winner], self.statement.names[loser]
        );
        let start = self.piece.start[winner];
        let spent = |rate: Math, cost: Math| over(&cost, &rate);
        let math = if terms[1].weight > 0.0 {
            let sum = self.cost(
                winner,
                &number(rate),
                &number(start),
                Some(&letter(letters.strength)),
            );
            equal(&[sum, number(cost.into())])
        } else {
            let numbers = left_of(
                &terms[0],
                &number(start),
                &spent(number(rate), number(cost.into())),
            );
            equal(&[letter(letters.strength), numbers, number(left)])
        };
        self.line("left", words.clone(), Some(math));
        if terms[1].weight > 0.0 {
            let solved = equal(&[letter(letters.strength), number(left)]);
            self.line("left.root", "which holds at", Some(solved));
        }
    }

    fn time(&mut self, loser: Side) {
        let point = self.piece.point_down(loser, descent(&self.engagement, loser));
        let unit = self.statement.unit;
        let reached = self.piece.equation.is_reached(point.left);
        let at = if reached {
            self.piece.time_to(&point)
        } else {
            f64::INFINITY
        };
        if !at.is_finite() {
            let words = format!(
                "{} comes ever nearer to its line and never reaches it: what shrinks its losses shrinks as fast",
                self.statement.names[loser]
            );
            self.line("time", words, None);
        } else {
            if let Some(constant) = times::constant(&self.piece) {
                self.line("", times::CONSTANT, Some(constant));
            }
            let formula = times::formula(&self.piece, &point, loser);
            let math = equal(&[letter("t"), formula, number(at)]);
            let words = format!("The time of it, {}", time_in_words(at, unit));
            self.line("time", words, Some(math));
        }
        if self.outcome.ended == Ended::Clock {
            self.clock();
        }
    }

    /// The clock came first.
    fn clock(&mut self) {
        let at = self
            .outcome
            .pieces
            .last()
            .and_then(|piece| piece.to)
            .unwrap_or(0.0);
        let sides = self.outcome.sides();
        let end = |side: Side| {
            let name = marked(LETTERS[side].strength, "t");
            equal(&[name, number(sides[side].end.unwrap_or(f64::INFINITY))])
        };
        let math = beside(&end(Side::X), &end(Side::Y));
        let how = match self.piece.motion.method() {
            Method::ClosedForm => "the formula of the time, turned round",
            Method::Integration => "the integrator",
            Method::Quadrature => "the integral of the time, turned round by Newton's steps",
        };
        let words = format!(
            "The clock comes first, at {}; by {how}",
            time_in_words(at, self.statement.unit)
        );
        self.line("clock", words, Some(math));
    }

    pub(super) fn last_line(&mut self) {
        let cost = self.piece.cost;
        let of = |side: Side| {
            if is_endless(cost[side]) {
                "more than any cost".to_owned()
            } else {
                number(cost[side].into()).text
            }
        };
        let names = &self.statement.names;
        let left = match self.outcome.to_the_last {
            Some(ToTheLast::X) => format!("{} takes more, and is left", names.x),
            Some(ToTheLast::Y) => format!("{} takes more, and is left", names.y),
            Some(ToTheLast::Parity) => "they take the same, and nobody is left".into(),
            None => "both fade to nothing, and nobody is left".into(),
        };
        let words = format!(
            "If no side broke and no clock ran, to bring {} down to nothing takes {}, and {} {}: {left}",
            names.x,
            of(Side::X),
            names.y,
            of(Side::Y)
        );
        self.line("last", words, None);
    }

    pub(super) fn ratios(&mut self) {
        let sides = self.outcome.sides();
        let fire = Both::of(|side| number(sides[side].losses.fire));
        if let Some(ratio) = self.outcome.loss_exchange_ratio {
            let math = equal(&[over(&fire.y, &fire.x), number(ratio)]);
            let names = &self.statement.names;
            let words = format!(
                "The loss exchange ratio, losses of {} over losses of {}",
                names.y, names.x
            );
            self.line("exchange", words, Some(math));
        }
        if let Some(ratio) = self.outcome.fractional_exchange_ratio {
            let part = Both::of(|side| over(&fire[side], &number(sides[side].committed)));
            let math = equal(&[over(&part.y, &part.x), number(ratio)]);
            self.line(
                "exchange.fraction",
                "The same, each over what its side committed",
                Some(math),
            );
        }
        if self.outcome.breaks == Breaks::Both {
            self.line(
                "both",
                "Both sides broke together, to the rounding of the figures",
                None,
            );
        }
    }
}

/// What is left of `from` after the area `spent`, for a single term.
fn left_of(term: &Term, from: &Math, spent: &Math) -> Math {
    let order = f64::from(term.order);
    if order == 0.0 {
        return times(&[from.clone(), function("exp", &negative(spent))]);
    }
    if order == 1.0 {
        return minus(from, spent);
    }
    let rest = minus(&power(from, order), &times(&[number(order), spent.clone()]));
    if order == 2.0 {
        root(&rest)
    } else {
        power(&rest, 1.0 / order)
    }
}
