//! The formula of the time of each motion, with the numbers put in, for the working.

use super::math::*;
use crate::laws::Power;
use crate::laws::ambush::Ambush;
use crate::motion::Motion;
use crate::orbit_point::OrbitPoint;
use crate::piece::Piece;
use crate::sides::{Both, Side};

/// The time at which `piece` is at `point`, where `loser` is at its line.
pub(super) fn formula(piece: &Piece, point: &OrbitPoint, loser: Side) -> Math {
    match &piece.motion {
        Motion::Still => number(0.0),
        Motion::Alone(motion) => alone(piece, point, motion.target),
        Motion::Square(_) => square(piece, point),
        Motion::Linear(_) => linear(piece, point),
        Motion::Ambush(motion) => ambush(piece, motion, point),
        Motion::AlongOrbit => along_orbit(piece, point, loser),
    }
}

/// ln((√b·x₀ + √a·y₀)/(√b·x + √a·y))/√(ab), with the strengths raised to the exponents of the shooters.
fn square(piece: &Piece, point: &OrbitPoint) -> Math {
    let exponent = Both::of(|side| piece.fire()[side].shooters().exponent);
    // With exponents other than 1 the raised strengths obey the square law at rates times the enemy's exponent.
    let rate = Both::of(|side: Side| {
        let rate = number(piece.equation.rate[side]);
        let enemy = exponent[side.enemy()];
        if enemy == 1.0 {
            rate
        } else {
            times(&[number(enemy), rate])
        }
    });
    let sum = |at: Both<f64>| {
        let part = |side: Side| times(&[root(&rate[side]), power(&number(at[side]), exponent[side])]);
        plus(&[part(Side::X), part(Side::Y)])
    };
    let quotient = over(&sum(piece.start), &sum(point.left));
    over(
        &function("ln", &quotient),
        &root(&times(&[rate.x.clone(), rate.y.clone()])),
    )
}

/// ln(y₀·x/(x₀·y))/(b·x₀ − a·y₀), and at parity (y₀ − y)/(b·x₀·y).
fn linear(piece: &Piece, point: &OrbitPoint) -> Math {
    let (start, left) = (piece.start, point.left);
    let rate = piece.equation.rate;
    let product = |first: f64, second: f64| times(&[number(first), number(second)]);
    if (rate.x * start.x - rate.y * start.y).abs() <= 1e-12 * rate.x * start.x {
        let fallen = minus(&number(start.y), &number(left.y));
        return over(
            &fallen,
            &times(&[number(rate.x), number(start.x), number(left.y)]),
        );
    }
    let quotient = over(&product(start.y, left.x), &product(start.x, left.y));
    let lead = minus(&product(rate.x, start.x), &product(rate.y, start.y));
    over(&function("ln", &quotient), &lead)
}

/// What stands before that number.
pub(super) const CONSTANT: &str = "In the time stands a number that the first strengths give";

/// The number in the time of aimed fire against area fire that stands nowhere else: c, with how it comes about; `None` for
/// every other motion.
pub(super) fn constant(piece: &Piece) -> Option<Math> {
    let Motion::Ambush(motion) = &piece.motion else {
        return None;
    };
    let hidden = motion.hidden;
    let (c, open_falls) = motion.constant();
    let strength = |side: Side| number(piece.start[side]);
    let rates = [number(2.0), number(piece.equation.rate[hidden]), strength(hidden)];
    let reached = over(&times(&rates), &number(piece.equation.rate[hidden.enemy()]));
    let open = power(&strength(hidden.enemy()), 2.0);
    let inside = if open_falls {
        minus(&reached, &open)
    } else {
        minus(&open, &reached)
    };
    Some(equal(&[letter("c"), root(&inside), number(c)]))
}

/// With K = b·h₀ − a·o₀²/2 and c = √(2|K|/a): an arc tangent for K > 0, an inverse hyperbolic tangent for K < 0.
fn ambush(piece: &Piece, motion: &Ambush, point: &OrbitPoint) -> Math {
    let open = motion.hidden.enemy();
    let area = piece.equation.rate[open];
    let (c, open_falls) = motion.constant();
    let (first, last) = (piece.start[open], point.left[open]);
    if c == 0.0 {
        let parts = minus(
            &over(&number(1.0), &number(last)),
            &over(&number(1.0), &number(first)),
        );
        return times(&[over(&number(2.0), &number(area)), parts]);
    }
    let fallen = times(&[number(c), minus(&number(first), &number(last))]);
    let product = times(&[number(first), number(last)]);
    let square = power(&number(c), 2.0);
    let (name, across) = if open_falls {
        ("arctan", plus(&[product, square]))
    } else {
        ("artanh", minus(&product, &square))
    };
    let factor = over(&number(2.0), &times(&[number(area), number(c)]));
    times(&[factor, function(name, &over(&fallen, &across))])
}

/// ∫ dn/T(n) over a steady s.
fn alone(piece: &Piece, point: &OrbitPoint, target: Side) -> Math {
    let shooter = target.enemy();
    let fire = &piece.fire()[shooter];
    let steady = match fire.shooters().exponent {
        0.0 => number(fire.rate),
        exponent => times(&[number(fire.rate), power(&number(piece.start[shooter]), exponent)]),
    };
    let active = fire
        .per_target()
        .into_iter()
        .filter(|power| power.coefficient > 0.0);
    let parts: Vec<Math> = active
        .map(|term| whole(term, piece.start[target], point.left[target]))
        .collect();
    over(&plus(&parts), &steady)
}

/// ∫ of a power between two strengths, written out.
fn whole(term: Power, from: f64, to: f64) -> Math {
    let order = term.exponent + 1.0;
    let (from, to) = (number(from), number(to));
    let area = if order == 0.0 {
        function("ln", &over(&from, &to))
    } else if order == 1.0 {
        minus(&from, &to)
    } else {
        over(&minus(&power(&from, order), &power(&to, order)), &number(order))
    };
    if term.coefficient == 1.0 {
        area
    } else {
        times(&[number(term.coefficient), area])
    }
}

/// ∫ dn/(losses of the loser per unit of time), with the winner's strength from the state equation at each n.
fn along_orbit(piece: &Piece, point: &OrbitPoint, loser: Side) -> Math {
    let winner = loser.enemy();
    let names = Both { x: "x", y: "y" };
    let fire = &piece.fire()[winner];
    let mut factors = vec![number(fire.rate)];
    let shooters = fire.shooters().exponent;
    if shooters != 0.0 {
        let followed = function(names[winner], &letter(names[loser]));
        factors.push(power(&followed, shooters));
    }
    let [first, second] = fire.per_target();
    if second.coefficient > 0.0 {
        let found = plus(&[letter(names[loser]), number(second.coefficient)]);
        factors.push(over(&letter(names[loser]), &found));
    } else if first.exponent != 0.0 {
        factors.push(power(&letter(names[loser]), -first.exponent));
    }
    let integrand = over(&number(1.0), &times(&factors));
    integral(
        &number(point.left[loser]),
        &number(piece.start[loser]),
        &integrand,
        names[loser],
    )
}

#[cfg(test)]
mod tests {
    use crate::answer::{Answer, Besides, answer_with};

    fn working(link: &str) -> Vec<String> {
        let besides = Besides {
            working: true,
            ..Besides::default()
        };
        match answer_with(link, besides) {
            Answer::Outcome {
                working: Some(lines), ..
            } => lines,
            _ => panic!("{link}"),
        }
    }

    /// √(2·0.03·850/0.0001 − 620²) = √125600, and with the sides' luck turned √(620² − 2·0.01·850/0.0001) = √214400.
    #[test]
    fn the_constant_of_aimed_against_area_is_shown_before_it_is_used() {
        for (rate, constant) in [
            ("0.03", "c = √(2·0.03·850/0.0001 − 620²) = 354.401"),
            ("0.01", "c = √(620² − 2·0.01·850/0.0001) = 463.033"),
        ] {
            for reserve in ["", "&x.join=1@0.5"] {
                let lines = working(&format!(
                    "x.start=850&x.rate={rate}&y.start=620&y.fire=area&y.rate=0.0001&x.break=0.3&y.break=0.3{reserve}"
                ));
                let shown = lines.iter().position(|line| line.contains(constant));
                let number = constant.rsplit(' ').next().expect("a number");
                let used = lines.iter().position(|line| line.contains(&format!("{number}·")));
                assert!(shown.is_some() && shown < used, "{lines:#?}");
            }
        }
    }
}
