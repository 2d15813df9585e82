//! Any pairing in time, along its orbit: the time is one integral, ∫ dy/(b·S(x(y))·T(y)).
//!
//! The side that falls by the larger factor is followed; the other follows from the state equation. Both are measured
//! from the end of the stretch, where a fight next to a tie is most sensitive: the cost from there on and what it leaves
//! are sums without cancelling, in plain doubles, while the end itself comes from the state equation in double-double.

use super::span::span_of;
use super::{Power, growth};
use crate::double::Double;
use crate::orbit_point::OrbitPoint;
use crate::piece::Piece;
use crate::quadrature::{Integral, integrate};
use crate::sides::{Both, Side};
use crate::state::{LEAST, Term, powers};

/// Steps at most from the integrator's strengths to the root; two or three where those are near it, as they mostly are.
const MOST_POLISHING: usize = 60;

/// So many times as far in the logarithm the end of a stretch no longer counts: e^−600.
const FAR: f64 = 600.0;

/// While less than this part has fallen, the first moment's losses are the better guess.
const EARLY: f64 = 1e-4;

/// A pairing in time, by its state equation and a quadrature; both fires take effect.
pub struct AlongOrbit<'a> {
    /// The piece that moves so.
    pub piece: &'a Piece,
}

/// The part of the orbit from the start to a point on it, followed along one side.
struct Stretch<'a> {
    piece: &'a Piece,
    along: Side,
    /// How far the side followed falls, in the logarithm.
    span: f64,
    /// Strengths where the stretch ends.
    end: Both<f64>,
    /// Whether the other side is measured from its start: more of a side that more hurts takes less to bring down, and it
    /// is the start, then, that must not cancel.
    from_start: bool,
    /// The costs of the side followed, and of the other, as sums over their strengths.
    own: Vec<Summand>,
    other: Vec<Summand>,
    /// The exponent of the other side's fire on the side followed, and the strength it is measured from raised to that.
    shooters: Power,
    raised: f64,
}

/// A term of a cost with the powers that do not change along the stretch.
#[derive(Clone, Copy)]
struct Summand {
    weight: f64,
    order: f64,
    /// The strengths at the start and at the end raised to the order.
    start: f64,
    end: f64,
}

impl AlongOrbit<'_> {
    /// The time at which the fight is at `point`, which lies on its orbit; infinite where it never gets there.
    pub fn time_to(&self, point: &OrbitPoint) -> Integral {
        let exact = |value| Integral {
            value,
            error: 0.0,
            evaluations: 0,
        };
        if !self.piece.equation.is_reached(point.left) {
            return exact(f64::INFINITY);
        }
        if point.left.x == 0.0 && point.left.y == 0.0 {
            return exact(self.time_to_parity(Side::Y));
        }
        let stretch = self.stretch(point);
        let (rate, besides) = self.losses(stretch.along);
        self.along(&stretch, |_, fallen, above| {
            1.0 / (rate * stretch.shooters_at(fallen, above) + besides)
        })
    }

    /// A rate of loss, which depends on the strengths alone, summed over time up to `point`, which is reached with at
    /// least one side left.
    pub fn summed(&self, point: &OrbitPoint, rate_of: impl Fn(Both<f64>) -> f64) -> Integral {
        let stretch = self.stretch(&self.last_with_digits(point));
        let (rate, besides) = self.losses(stretch.along);
        let shooters = self.piece.fire()[stretch.along.enemy()].shooters();
        self.along(&stretch, |own, fallen, above| {
            let other = stretch.other_at(fallen, above);
            let mut strengths = Both { x: own, y: own };
            strengths[stretch.along.enemy()] = other;
            rate_of(strengths) / (rate * shooters.at(other) + besides)
        })
    }

    /// The point itself, or where a side only fades and has faded below the least double, the last that has digits: beyond
    /// it nothing is lost any more.
    fn last_with_digits(&self, point: &OrbitPoint) -> OrbitPoint {
        let piece = self.piece;
        let faded = |side: &Side| {
            let fades = piece.per_target[*side][0].exponent <= -1.0;
            fades && point.left[*side] < LEAST && piece.lasts_until(*side, LEAST.into())
        };
        match Side::BOTH.into_iter().find(faded) {
            Some(side) => piece.point_with(side, LEAST.into()),
            None => *point,
        }
    }

    fn stretch(&self, point: &OrbitPoint) -> Stretch<'_> {
        let span = Both::of(|side| libm::log1p(point.fallen[side] / point.left[side]));
        let along = self.to_follow(span);
        Stretch {
            span: span[along],
            ..Stretch::new(self.piece, along, point.left)
        }
    }

    /// The rate of the fire on `side`, 0 where it has no effect, and what it loses besides by its factor as targets.
    fn losses(&self, side: Side) -> (f64, f64) {
        (self.piece.equation.rate[side.enemy()], self.piece.besides[side])
    }

    /// ∫ of `inner` dn/T(n) along a stretch; it is told the strength of the side followed, how far that has fallen from
    /// its start and how far it is above its end, in the logarithm.
    fn along(&self, stretch: &Stretch, inner: impl Fn(f64, f64, f64) -> f64) -> Integral {
        let along = stretch.along;
        if stretch.end[along] > 0.0 {
            self.by_logarithm(stretch, stretch.span, inner)
        } else {
            self.to_nothing(stretch, inner)
        }
    }

    /// The side that falls by the larger factor; or one that falls by much the same, where the other would have to be
    /// searched for at each step.
    fn to_follow(&self, span: Both<f64>) -> Side {
        let larger = if span.x > span.y { Side::X } else { Side::Y };
        let other = larger.enemy();
        let sought = self.piece.equation.needs_root(other);
        if sought && span[other] > 0.25 * span[larger] && span[larger].is_finite() {
            other
        } else {
            larger
        }
    }

    /// Both down to nothing in finite time: the orbit is a single power of each side, and so is the integrand.
    fn time_to_parity(&self, along: Side) -> f64 {
        let other = along.enemy();
        let order = Both::of(|side| f64::from(self.piece.equation.terms[side][0].order));
        let scale = Both::of(|side| f64::from(self.piece.equation.terms[side][0].weight) / order[side]);
        let fire = &self.piece.fire()[other];
        let per_target = fire.per_target()[0];
        // other = (scale ratio · along^order)^(1/order of the other), taken to the exponent of its fire.
        let shooters = fire.shooters().exponent / order[other];
        let integrand = Power {
            coefficient: per_target.coefficient * libm::pow(scale[other] / scale[along], shooters)
                / fire.rate,
            exponent: per_target.exponent - shooters * order[along],
        };
        integrand.integral(0.0, self.piece.start[along])
    }

    /// In the logarithm of the side followed: dn/T(n) = n·dw/T(n), with w = ln(n/end).
    fn by_logarithm(&self, stretch: &Stretch, span: f64, inner: impl Fn(f64, f64, f64) -> f64) -> Integral {
        let end = stretch.end[stretch.along];
        let powers = self.piece.per_target[stretch.along].map(|power| {
            let exponent = power.exponent + 1.0;
            (Power { exponent, ..power }.at(end), exponent)
        });
        integrate(span, |fallen, above| {
            let volume: f64 = powers
                .iter()
                .filter(|(scale, _)| *scale > 0.0)
                .map(|(scale, order)| scale * raised_by(*order, above))
                .sum();
            volume * inner(end * libm::exp(above), fallen, above)
        })
    }

    /// Down to nothing: in z = n^(1−q), in which the target's factor n^q drops out.
    fn to_nothing(&self, stretch: &Stretch, inner: impl Fn(f64, f64, f64) -> f64) -> Integral {
        let power = self.piece.per_target[stretch.along][0];
        let order = power.exponent + 1.0;
        let start = self.piece.start[stretch.along];
        let length = libm::pow(start, order);
        let mut integral = integrate(length, |below, above| {
            let fallen = if below < 0.5 * length {
                -libm::log1p(-below / length)
            } else {
                libm::log(length / above)
            };
            let fallen = fallen / order;
            inner(start * libm::exp(-fallen), fallen, f64::INFINITY)
        });
        let scale = power.coefficient / order;
        integral.value *= scale;
        integral.error *= scale;
        integral
    }

    /// Where the piece is at the time `t` after its beginning: the inverse of the same integral.
    ///
    /// `near` is a guess of the strengths, from the integrator; Newton's steps on the side that falls by the larger
    /// factor polish it, in λ = ln(start/left), which keeps its digits also where next to nothing has fallen. They stay
    /// within a bracket, for where the integrator stopped short of `t`.
    pub fn point_at(&self, t: f64, near: Both<f64>) -> OrbitPoint {
        let piece = self.piece;
        let part = Both::of(|side: Side| near[side] / piece.start[side]);
        let along = if part.x < part.y { Side::X } else { Side::Y };
        let (start, enemy) = (piece.start[along], along.enemy());
        let share = |left: Both<f64>| piece.share_per_time(along, left);
        let at = |span: f64| piece.point_with(along, left_after(start, span));
        // The end of the orbit, or as near to it as a double can be.
        let nothing = Double::from(0.0);
        let last = if piece.lasts_until(along, nothing) {
            nothing
        } else {
            piece.point_with(enemy, nothing).left[along].into()
        };
        let most = libm::log(start / f64::from(last).max(LEAST));
        let (mut low, mut high) = (0.0, most);
        let fallen = -libm::log(part[along]);
        let guess = if fallen < EARLY {
            share(piece.start) * t
        } else {
            fallen
        };
        let mut span = if guess > low && guess < most {
            guess
        } else {
            0.5 * most
        };
        let mut point = at(span);
        for _ in 0..MOST_POLISHING {
            let off = t - piece.time_to(&point);
            if off > 0.0 {
                low = span
            } else {
                high = span
            }
            let step = share(point.left) * off;
            let next = span + step;
            if next >= most && piece.time_to(&at(most)) <= t {
                return piece.point_with(along, last);
            }
            // The steps double their digits, so that one more would be lost in the rounding.
            let is_last = step.abs() <= 1e-10 * span;
            let before = span;
            span = if is_last || (next > low && next < high) {
                next
            } else {
                0.5 * (low + high)
            };
            point = at(span);
            if is_last || span == before {
                break;
            }
        }
        point
    }
}

/// `start`·e^(−`span`), as a difference while little has fallen.
fn left_after(start: f64, span: f64) -> Double {
    if span < 0.5 {
        Double::sum(start, start * libm::expm1(-span))
    } else {
        (start * libm::exp(-span)).into()
    }
}

impl Stretch<'_> {
    fn new(piece: &Piece, along: Side, end: Both<f64>) -> Stretch<'_> {
        let other = along.enemy();
        let equation = &piece.equation;
        let summands = |side: Side| {
            equation
                .active(side)
                .iter()
                .map(|term| {
                    let order = f64::from(term.order);
                    let raised = |strength: f64| {
                        Power {
                            coefficient: 1.0,
                            exponent: order,
                        }
                        .at(strength)
                    };
                    Summand {
                        weight: term.weight.into(),
                        order,
                        start: raised(piece.start[side]),
                        end: raised(end[side]),
                    }
                })
                .collect::<Vec<Summand>>()
        };
        let (own, others) = (summands(along), summands(other));
        let from_start = others.first().is_some_and(|term| term.order < 0.0);
        let shooters = piece.fire()[other].shooters();
        Stretch {
            piece,
            along,
            span: 0.0,
            end,
            from_start,
            own,
            other: others,
            shooters,
            raised: shooters.at(if from_start {
                piece.start[other]
            } else {
                end[other]
            }),
        }
    }

    /// The factor of the other side's fire where the side followed has fallen by e^`fallen` from its start, and stands
    /// `above` its end in the same measure; infinitely far where it ends with nothing.
    fn shooters_at(&self, fallen: f64, above: f64) -> f64 {
        match &self.other[..] {
            // A side that costs nothing stays as it is.
            [] => self.raised,
            [single] => self.of_single(single, self.area(fallen, above)),
            _ => self.shooters.at(self.other_at(fallen, above)),
        }
    }

    /// What the other side has there.
    fn other_at(&self, fallen: f64, above: f64) -> f64 {
        let other = self.along.enemy();
        let terms = self.piece.equation.active(other);
        let end = self.end[other];
        match (terms, &self.other[..]) {
            ([], _) => end,
            ([single], _) if self.from_start => {
                after(single, self.piece.start[other], -self.area(fallen, above))
            }
            ([single], _) => after(single, end, self.area(fallen, above)),
            (_, [first, second]) if first.order == 2.0 && second.order == 1.0 => {
                let (c, d, area) = (first.weight, second.weight, self.area(fallen, above));
                // c·(n² − end²)/2 + d·(n − end) = area, for n − end: no difference in it.
                let slope = c * end + d;
                end + 2.0 * area / (slope + libm::sqrt(slope * slope + 2.0 * c * area))
            }
            _ => self.before(self.area(fallen, above)),
        }
    }

    /// What the side followed costs from there to its end, or from its start to there.
    fn area(&self, fallen: f64, above: f64) -> f64 {
        self.own
            .iter()
            .map(|term| term.weight * self.integral(term, fallen, above))
            .sum()
    }

    /// ∫ n^(k−1) of the side followed between a place on the stretch and its end, or its start.
    fn integral(&self, term: &Summand, fallen: f64, above: f64) -> f64 {
        let order = term.order;
        if self.from_start {
            return term.start * growth(-order, fallen);
        }
        if order > 0.0 && (term.end == 0.0 || order * above > FAR) {
            // The end no longer counts, and its power may be none that a double holds.
            return term.start * libm::exp(-order * fallen) * growth(-order, above);
        }
        term.end * growth(order, above)
    }

    /// The factor of the other side's fire where its S/T is the single power c·n^(k−1) and the area between it and its
    /// end, or its start, is `area`: n^p with nᵏ = endᵏ + k·area/c.
    fn of_single(&self, term: &Summand, area: f64) -> f64 {
        let (order, exponent) = (term.order, self.shooters.exponent);
        let (from, area) = if self.from_start {
            (term.start, -area / term.weight)
        } else {
            (term.end, area / term.weight)
        };
        let part = area / from;
        if from == 0.0 || part.is_infinite() {
            // So little is left at the end that it does not count.
            return libm::pow(area * order, exponent / order);
        }
        if exponent == order {
            return from + area * order;
        }
        let span = if order == 0.0 {
            part
        } else {
            libm::log1p(part * order) / order
        };
        self.raised * libm::exp(exponent * span)
    }

    /// What the other side had before it came down to its end at the cost `area`, where that is a sum of several powers.
    fn before(&self, area: f64) -> f64 {
        let other = self.along.enemy();
        let (terms, end) = (self.piece.equation.active(other), self.end[other]);
        // Each term alone would have taken more to make up the whole.
        let most = terms
            .iter()
            .map(|term| after(term, end, area))
            .fold(f64::INFINITY, f64::min);
        let scaled = powers(terms, end);
        end * libm::exp(span_of(&scaled[..terms.len()], area, libm::log(most / end)))
    }
}

/// e^(order·span); most orders are 0 or 1.
fn raised_by(order: f64, span: f64) -> f64 {
    if order == 0.0 {
        1.0
    } else {
        libm::exp(order * span)
    }
}

/// The strength n above `from` with nᵏ = fromᵏ + k·area/c.
fn after(term: &Term, from: f64, area: f64) -> f64 {
    let (order, area) = (f64::from(term.order), area / f64::from(term.weight));
    if from == 0.0 {
        return libm::pow(area * order, 1.0 / order);
    }
    let part = area / libm::pow(from, order);
    if part.is_infinite() {
        return libm::pow(area * order, 1.0 / order);
    }
    from * libm::exp(if order == 0.0 {
        part
    } else {
        libm::log1p(part * order) / order
    })
}
