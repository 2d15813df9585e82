//! The laws of both sides, the state equation that they make, and what it costs to bring a side down by it.

use super::{LETTERS, Writer};
use crate::double::Double;
use crate::fight::{break_line, descent};
use crate::laws::Law;
use crate::sides::Side;
use crate::state::{Term, is_endless};
use crate::words::math::*;

impl Writer<'_> {
    fn law(&self, side: Side) -> &'static Law {
        self.engagement.sides[side].fire.law.law()
    }

    /// How `side` loses by its enemy's fire, and where that law is from.
    pub(super) fn losses_of(&mut self, side: Side) {
        let enemy = side.enemy();
        let name = LETTERS[side].strength;
        let fire = &self.engagement.sides[enemy].fire;
        let losses = if fire.takes_effect() {
            let mut factors = vec![letter(LETTERS[enemy].rate)];
            let shooters = fire.shooters().exponent;
            if shooters != 0.0 {
                factors.push(power(&letter(LETTERS[enemy].strength), shooters));
            }
            let [first, second] = fire.per_target();
            if second.coefficient > 0.0 {
                let found = plus(&[letter(name), number(second.coefficient)]);
                factors.push(over(&letter(name), &found));
            } else if first.exponent != 0.0 {
                factors.push(power(&letter(name), -first.exponent));
            }
            equal(&[
                derivative(name),
                negative(&times(&factors)),
                negative(&self.in_numbers(enemy, &factors)),
            ])
        } else {
            equal(&[derivative(name), number(0.0)])
        };
        let law = self.law(enemy);
        let words = format!(
            "{} loses by {}'s fire ({}; {})",
            self.statement.names[side], self.statement.names[enemy], law.word, law.source
        );
        self.line(
            if side == Side::X { "losses.x" } else { "losses.y" },
            words,
            Some(losses),
        );
    }

    /// The factors of a loss with the rate as a number.
    fn in_numbers(&self, shooter: Side, factors: &[Math]) -> Math {
        let mut factors = factors.to_vec();
        factors[0] = number(self.engagement.sides[shooter].fire.rate);
        times(&factors)
    }

    /// rate × ∫ S/T from `to` to `from`, in letters or numbers.
    pub(super) fn cost(&self, side: Side, rate: &Math, from: &Math, to: Option<&Math>) -> Math {
        let rate_of = self.piece.equation.rate[side];
        let active = self.piece.equation.active(side);
        let sums: Vec<Math> = active.iter().map(|term| area(term, rate_of, from, to)).collect();
        times(&[rate.clone(), plus(&sums)])
    }

    pub(super) fn state_equation(&mut self) {
        let of = |side: Side| {
            let letters = &LETTERS[side];
            self.cost(
                side,
                &letter(letters.rate),
                &marked(letters.strength, "0"),
                Some(&letter(letters.strength)),
            )
        };
        let rate = self.piece.equation.rate;
        if rate.x == 0.0 || rate.y == 0.0 {
            let still = if rate.x == 0.0 { Side::Y } else { Side::X };
            let words = format!(
                "{} is not shot at and keeps its strength",
                self.statement.names[still]
            );
            self.line("state", words, None);
            return;
        }
        let math = equal(&[of(Side::X), of(Side::Y)]);
        let words =
            "The state equation, dy/dx with the time divided out and each side gathered and integrated";
        self.line("state", words, Some(math));
    }

    pub(super) fn break_line(&mut self, side: Side) -> Double {
        let terms = &self.engagement.sides[side];
        let line = break_line(&self.engagement, side);
        let name = &self.statement.names[side];
        let words = if terms.break_point == 1.0 {
            format!("{name} fights to the last: its line")
        } else {
            format!("{name} breaks where it has lost that part of all it committed: its line")
        };
        let whole = self.engagement.committed_at_start(side);
        let product = times(&[minus(&number(1.0), &number(terms.break_point)), number(whole)]);
        let math = equal(&[marked(LETTERS[side].strength, "1"), product, number(line.into())]);
        self.line(
            if side == Side::X { "line.x" } else { "line.y" },
            words,
            Some(math),
        );
        line
    }

    /// What it costs to bring a side down to its line.
    pub(super) fn cost_line(&mut self, side: Side, line: Double) -> Double {
        let letters = &LETTERS[side];
        let start = self.piece.start[side];
        let cost = self.piece.cost_of(side, descent(&self.engagement, side));
        let name = if side == Side::X { "cost.x" } else { "cost.y" };
        let words = format!(
            "To bring {} down to its line it takes",
            self.statement.names[side]
        );
        if self.piece.equation.rate[side] == 0.0 {
            self.line(name, format!("{words} nothing: its own fire has no effect"), None);
            return cost;
        }
        let symbols = self.cost(
            side,
            &letter(letters.rate),
            &marked(letters.strength, "0"),
            Some(&marked(letters.strength, "1")),
        );
        if is_endless(cost) {
            self.line(
                name,
                format!("{words} more than any cost: the sum has no bound at 0"),
                Some(symbols),
            );
            return cost;
        }
        let line = f64::from(line);
        let to = (line > 0.0).then(|| number(line));
        let rate = number(self.piece.equation.rate[side]);
        let numbers = self.cost(side, &rate, &number(start), to.as_ref());
        self.line(name, words, Some(equal(&[symbols, numbers, number(cost.into())])));
        cost
    }
}

/// (fromᵏ − toᵏ)/k, or ln(from/to), times its coefficient; without `to` down to nothing.
pub(crate) fn area(term: &Term, rate: f64, from: &Math, to: Option<&Math>) -> Math {
    let order = f64::from(term.order);
    let area = match to {
        Some(to) if order == 0.0 => function("ln", &over(from, to)),
        Some(to) if order == 1.0 => minus(from, to),
        Some(to) => over(&minus(&power(from, order), &power(to, order)), &number(order)),
        None if order == 1.0 => from.clone(),
        None => over(&power(from, order), &number(order)),
    };
    let coefficient = f64::from(term.weight / rate);
    if coefficient == 1.0 {
        area
    } else {
        times(&[number(coefficient), area])
    }
}
