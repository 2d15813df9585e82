//! Numbers at which both sides reach their lines together, straight from the state equation.
//!
//! Along a fight of two fires alone b·∫S(x)/T(x)dx − a·∫S(y)/T(y)dy is constant, so both lines are reached together where
//! what each side costs on its way down is the same. That cost is proportional to the side's rate; in its strength it is a
//! power where S/T is one; and of the line it is an integral that has an inverse. Where no number of the engagement turns
//! this round in closed form, nothing is given, and the search along the number stands.

use crate::double::Double;
use crate::fight::{descent, plain_piece};
use crate::laws::FireLaw;
use crate::sides::Side;
use crate::slots::{Part, Place};
use crate::state::{Descent, StateEquation, is_endless};
use crate::terms::Engagement;

/// The number at `place` at which both sides reach their lines together, the other numbers being those of `engagement`,
/// whose own number there is near the one that is looked for.
///
/// `None` where there is no such formula, or no such number.
pub fn outright(engagement: &Engagement, place: Place) -> Option<f64> {
    let Place::Side(side, part) = place else {
        return None;
    };
    let piece = plain_piece(engagement)?;
    let equation = &piece.equation;
    let found = match part {
        Part::Rate => rate(engagement, equation, side)?,
        Part::Half => half(engagement, equation, side)?,
        Part::Start => start(engagement, equation, side)?,
        Part::Break => line(engagement, equation, side)?.break_point(),
        Part::Lost => line(engagement, equation, side)?.lost()?,
        _ => return None,
    };
    let found = f64::from(found);
    (found.is_finite() && found >= 0.0).then_some(found)
}

/// What it costs to bring `side` down to its line.
fn cost(engagement: &Engagement, equation: &StateEquation, side: Side) -> Option<Double> {
    let way = descent(engagement, side);
    let origin = equation.origin(side, engagement.sides[side].start.into());
    let cost = equation.cost_from(side, &origin, way);
    (way.by > 0.0 && cost > 0.0 && !is_endless(cost)).then_some(cost)
}

/// The cost of a side is proportional to its rate.
fn rate(engagement: &Engagement, equation: &StateEquation, side: Side) -> Option<Double> {
    let own = cost(engagement, equation, side)?;
    let enemy = cost(engagement, equation, side.enemy())?;
    Some(Double::from(engagement.sides[side].fire.rate) * enemy / own)
}

/// The cost of the side that is searched for grows evenly with the number of targets at half the search.
fn half(engagement: &Engagement, equation: &StateEquation, side: Side) -> Option<Double> {
    let half = engagement.sides[side].fire.half.filter(|half| *half > 0.0)?;
    if engagement.sides[side].fire.law != FireLaw::Search {
        return None;
    }
    let mut found_at_once = engagement.clone();
    found_at_once.sides[side].fire.half = Some(0.0);
    let aimed = plain_piece(&found_at_once)?.equation;
    let enemy = side.enemy();
    let without = cost(engagement, &aimed, enemy)?;
    let with = cost(engagement, equation, enemy)?;
    let own = cost(engagement, equation, side)?;
    Some((own - without) / (with - without) * half)
}

/// With nothing lost before, and to a line at the part q of the start: w·sᵏ·(1 − qᵏ)/k for a single power, and the like
/// with two for search.
fn start(engagement: &Engagement, equation: &StateEquation, side: Side) -> Option<Double> {
    let terms = &engagement.sides[side];
    if terms.lost != 0.0 {
        return None;
    }
    let cost = cost(engagement, equation, side.enemy())?;
    let kept = Double::difference(1.0, terms.break_point);
    let lost_part = |order: Double| {
        if kept > 0.0 {
            // 1 − qᵏ, with its digits where q is next to 1.
            -((kept.ln() * order).exp_m1())
        } else {
            Double::from(1.0)
        }
    };
    match equation.active(side) {
        [one] if one.order > 0.0 => {
            let area = cost / one.weight * one.order / lost_part(one.order);
            Some(root(area, one.order))
        }
        [first, second] if first.order == 2.0 && second.order == 1.0 => {
            // c·s² + d·s = cost, the positive root written so that nothing cancels.
            let c = first.weight * lost_part(first.order) * 0.5;
            let d = second.weight * lost_part(second.order);
            Some(cost * 2.0 / ((d * d + c * cost * 4.0).sqrt() + d))
        }
        _ => None,
    }
}

fn root(area: Double, order: Double) -> Double {
    if order == 1.0 {
        area
    } else if order == 2.0 {
        area.sqrt()
    } else {
        area.pow(Double::from(1.0) / order)
    }
}

/// Where the line of a side must stand, and what is there.
struct Line {
    start: f64,
    lost: f64,
    break_point: f64,
    down: Descent,
}

/// Where `side` is when its enemy is at its line.
fn line(engagement: &Engagement, equation: &StateEquation, side: Side) -> Option<Line> {
    if equation.needs_root(side) {
        return None;
    }
    let terms = &engagement.sides[side];
    let cost = cost(engagement, equation, side.enemy())?;
    let to = equation.left(side, terms.start.into(), cost);
    let by = equation.fallen(side, terms.start.into(), to, cost);
    (to > 0.0).then_some(Line {
        start: terms.start,
        lost: terms.lost,
        break_point: terms.break_point,
        down: Descent { to, by },
    })
}

impl Line {
    /// The part lost there of all that was committed.
    fn break_point(&self) -> Double {
        (self.down.by + self.lost) / Double::sum(self.start, self.lost)
    }

    /// What must have been lost before for the line to stand there.
    fn lost(&self) -> Option<Double> {
        let kept = Double::difference(1.0, self.break_point);
        (kept > 0.0).then(|| self.down.to / kept - self.start)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::fight::{Effort, fight};
    use crate::outcome::Breaks;
    use crate::pairs::Pairs;
    use crate::statement::Statement;

    /// A hair to one side of it one side breaks, a hair to the other the other, for every pairing and every number that has
    /// a formula.
    #[test]
    fn the_outcome_turns_where_the_formula_says() {
        let fires = [
            "aimed&{}.rate=0.04",
            "area&{}.rate=0.0002",
            "logarithmic&{}.rate=0.05",
            "search&{}.rate=0.07&{}.half=90",
            "power&{}.rate=0.05&{}.p=0.8&{}.q=0.3",
        ];
        let parts = [Part::Rate, Part::Start, Part::Break, Part::Lost, Part::Half];
        let mut found = 0;
        for x in fires {
            for y in fires {
                let link = format!(
                    "x.start=600&x.break=0.31&x.fire={}&y.start=410&y.break=0.42&y.fire={}",
                    x.replace("{}", "x"),
                    y.replace("{}", "y")
                );
                let statement = Statement::read(&Pairs::parse(&link)).expect(&link);
                for part in parts {
                    let place = Place::Side(Side::X, part);
                    let mut engagement = statement.engagement();
                    let Some(at) = outright(&engagement, place) else {
                        continue;
                    };
                    let mut breaks = |value: f64| {
                        engagement.put(place, value);
                        fight(&engagement, Effort::Outcome).outcome.breaks
                    };
                    let sides = [breaks(at * (1.0 - 1e-12)), breaks(at * (1.0 + 1e-12))];
                    assert!(
                        sides == [Breaks::X, Breaks::Y] || sides == [Breaks::Y, Breaks::X],
                        "{link}: {part:?} {at}: {sides:?}"
                    );
                    found += 1;
                }
            }
        }
        assert!(found > 70, "{found}");
    }
}
