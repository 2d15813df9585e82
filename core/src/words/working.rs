//! The working: what a second analyst needs to check an outcome by hand, line by line.

use super::format::{plain, time as time_in_words};
use super::math::*;
use crate::double::Double;
use crate::fight::{break_line, descent, plain_piece};
use crate::laws::Law;
use crate::outcome::{Breaks, Ended, Outcome, ToTheLast};
use crate::piece::{Motion, Piece};

use crate::sides::{Both, Side};
use crate::state::{StateEquation, Term, is_endless};
use crate::statement::{Statement, Values};
use crate::terms::Engagement;

/// One line of the working.
#[derive(Clone, Debug, PartialEq)]
pub struct WorkingLine {
    /// The name by which a figure refers to it.
    pub name: &'static str,
    /// What it is, in words.
    pub words: String,
    /// Its formula, and with the numbers put in.
    pub math: Option<Math>,
}

impl WorkingLine {
    /// The line as plain text.
    pub fn text(&self) -> String {
        match &self.math {
            Some(math) => plain(&format!("{}: {}", self.words, math.text)),
            None => plain(&format!("{}.", self.words)),
        }
    }
}

/// The letters of a side: its strength, its rate, and those of its enemy's rate.
struct Letters {
    strength: &'static str,
    rate: &'static str,
}

const LETTERS: Both<Letters> = Both {
    x: Letters {
        strength: "x",
        rate: "b",
    },
    y: Letters {
        strength: "y",
        rate: "a",
    },
};

/// The working of `outcome`, which is that of `statement`.
pub fn working(statement: &Statement, outcome: &Outcome) -> Vec<WorkingLine> {
    let engagement = statement.engagement(&Values::new());
    match Writer::new(statement, engagement, outcome) {
        Some(writer) => writer.lines(),
        None => super::working_pieces::lines(statement, outcome),
    }
}

struct Writer<'a> {
    statement: &'a Statement,
    engagement: Engagement,
    outcome: &'a Outcome,
    piece: Piece,
    lines: Vec<WorkingLine>,
}

impl<'a> Writer<'a> {
    fn new(statement: &'a Statement, mut engagement: Engagement, outcome: &'a Outcome) -> Option<Writer<'a>> {
        let piece = plain_piece(&engagement)?;
        // A phase from the beginning may have another fire.
        for side in Side::BOTH {
            engagement.sides[side].fire = piece.fire[side];
        }
        Some(Writer {
            statement,
            engagement,
            outcome,
            piece,
            lines: Vec::new(),
        })
    }

    fn line(&mut self, name: &'static str, words: impl Into<String>, math: Option<Math>) {
        self.lines.push(WorkingLine {
            name,
            words: words.into(),
            math,
        });
    }

    fn lines(mut self) -> Vec<WorkingLine> {
        self.letters();
        for side in Side::BOTH {
            self.losses_of(side);
        }
        if self.begins_broken() {
            Both::of(|side| self.break_line(side));
            self.broken_at_start();
            return self.lines;
        }
        if self.piece.motion == Motion::Still {
            self.still();
            return self.lines;
        }
        self.state_equation();
        let lines = Both::of(|side| self.break_line(side));
        let costs = Both::of(|side| self.cost_line(side, lines[side]));
        self.verdict(costs);
        self.last_line();
        self.ratios();
        self.lines
    }

    /// Whether a side had reached its line before the start.
    fn begins_broken(&self) -> bool {
        let unharmed = Side::BOTH
            .iter()
            .all(|side| self.outcome.sides()[*side].losses.all == 0.0);
        self.outcome.ended == Ended::Break && self.outcome.time == Some(0.0) && unharmed
    }

    fn broken_at_start(&mut self) {
        let names = &self.statement.names;
        let who = match self.outcome.breaks {
            Breaks::X => format!("{} has", names.x),
            Breaks::Y => format!("{} has", names.y),
            Breaks::Both | Breaks::Neither => "Both sides have".into(),
        };
        let words = format!("{who} lost so much before the start that the line is reached at once");
        self.line("breaks", words, None);
        self.line(
            "left",
            "Nothing is lost after that, so each side has what it started with",
            None,
        );
        self.line("time", "The time of it is 0", None);
    }

    fn still(&mut self) {
        self.line("breaks", "Neither fire has any effect, so nothing changes", None);
        if self.outcome.ended == Ended::Clock {
            self.line("clock", "At the clock each side has what it started with", None);
        }
    }

    fn letters(&mut self) {
        let names = &self.statement.names;
        let unit = self.statement.unit.symbol();
        let counted = &self.statement.counted;
        let words = format!(
            "x is the strength of {} and y that of {}, in {counted}; t is the time in {unit}; b is the rate of {}'s \
             fire and a that of {}'s; numbers to six significant digits, worked out in full: by hand the last may differ",
            names.x, names.y, names.x, names.y
        );
        self.line("letters", words, None);
    }

    fn law(&self, side: Side) -> &'static Law {
        self.engagement.sides[side].fire.law.law()
    }

    /// How `side` loses by its enemy's fire, and where that law is from.
    fn losses_of(&mut self, side: Side) {
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
    fn cost(&self, side: Side, rate: &Math, from: &Math, to: Option<&Math>) -> Math {
        let rate_of = self.piece.equation.rate[side];
        let active = self.piece.equation.active(side);
        let sums: Vec<Math> = active.iter().map(|term| area(term, rate_of, from, to)).collect();
        times(&[rate.clone(), plus(&sums)])
    }

    fn state_equation(&mut self) {
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

    fn break_line(&mut self, side: Side) -> Double {
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
    fn cost_line(&mut self, side: Side, line: Double) -> Double {
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

    fn verdict(&mut self, costs: Both<Double>) {
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
            let formula = super::times::formula(&self.piece, &self.engagement, &point, loser);
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
        let math = times_apart(&end(Side::X), &end(Side::Y));
        let how = match self.piece.motion.method() {
            crate::outcome::Method::ClosedForm => "the formula of the time, turned round",
            crate::outcome::Method::Integration => "the integrator",
            crate::outcome::Method::Quadrature => "the integral of the time, turned round by Newton's steps",
        };
        let words = format!(
            "The clock comes first, at {}; by {how}",
            time_in_words(at, self.statement.unit)
        );
        self.line("clock", words, Some(math));
    }

    fn last_line(&mut self) {
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

    fn ratios(&mut self) {
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

/// (fromᵏ − toᵏ)/k, or ln(from/to), times its coefficient; without `to` down to nothing.
pub(super) fn area(term: &Term, rate: f64, from: &Math, to: Option<&Math>) -> Math {
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

/// Two statements side by side.
fn times_apart(first: &Math, second: &Math) -> Math {
    let mut both = first.clone();
    both.mathml = format!(
        "{}<mo>,</mo><mspace width=\"1em\"/>{}",
        first.mathml, second.mathml
    );
    both.text = format!("{}, {}", first.text, second.text);
    both
}
