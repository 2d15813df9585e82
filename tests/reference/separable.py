"""Any law of fire against any other: who breaks first, when, and what is left, to 45 digits.

Every law of fire is a product: rate x a factor of the shooters x a factor of the targets, here S = n^p and T with
1/T = sum of c*n^e. So for x' = -a S(y) T(x) and y' = -b S(x) T(y) the difference b*Int S(x)/T(x) dx - a*Int S(y)/T(y) dy
is constant. That decides who breaks and what is left; the time is one integral along it, which is taken here by Gauss
and Legendre's rule on intervals that are halved until they no longer change it, at 110 digits.

Laws and sources: aimed, area, Lanchester 1916; logarithmic, Peterson 1953/1967; search, Brackney, Operations Research 7
(1959) 30-44; power, Helmbold, Operations Research 13 (1965) 857-859. Every input is the double nearest to its text,
taken as exact, also the exponents.
"""

from dataclasses import dataclass, replace
from fractions import Fraction
from functools import cached_property

import mpmath
from mpmath import mp, mpf

import fights
from fights import TIE, Outcome, big, broken_from_the_start, exact, mirrored

mp.dps = 110
INFINITE = mpf("inf")

# Two exponents that are the same but for the rounding of the inputs count as the same.
SAME_EXPONENT = Fraction(1, 10**14)


@dataclass(frozen=True)
class Side(fights.Side):
    """A side with the factors of its law."""

    @cached_property
    def shooters(self):
        """The exponent of S."""
        if self.fire == "power":
            return exact(self.p)
        return Fraction(0) if self.fire in ("logarithmic", "none") else Fraction(1)

    @cached_property
    def per_target(self):
        """1/T of the enemy's strength, as pairs of a coefficient and an exponent."""
        if self.fire == "search" and exact(self.half) > 0:
            return [(Fraction(1), Fraction(0)), (exact(self.half), Fraction(-1))]
        exponent = {"area": Fraction(-1), "logarithmic": Fraction(-1), "power": -exact(self.q or "0")}
        return [(Fraction(1), exponent.get(self.fire, Fraction(0)))]

    @cached_property
    def vanishing(self):
        """T falls as the targets to this power, next to 0."""
        return max(-exponent for _, exponent in self.per_target)


@dataclass(frozen=True)
class Fight(fights.Fight):
    """A fight that separates."""

    @cached_property
    def terms(self):
        """S/T of x over its own strength: pairs of a coefficient and the order k of the integral c*n^k/k."""
        return [(c, self.x.shooters + exponent + 1) for c, exponent in self.y.per_target]

    def cost(self, line):
        """What it takes to bring x down to a line: its rate x Int S/T. Infinite where its enemy would pay for ever."""
        if self.x.effect == 0:
            return mpf(0)
        return self.x.big_effect * area(self.terms, self.x.big_strength, big(line))

    def costs(self, x_line, y_line):
        return self.cost(x_line), self.swapped.cost(y_line)

    def margin(self, x_line, y_line):
        """The difference of the costs over the larger: above 0 where y is brought down first; None where both are
        infinite."""
        return margin_of(*self.costs(x_line, y_line))


def margin_of(cost_x, cost_y):
    if cost_x == cost_y == INFINITE:
        return None
    if INFINITE in (cost_x, cost_y):
        return mpf(1 if cost_x == INFINITE else -1)
    larger = max(cost_x, cost_y)
    return (cost_x - cost_y) / larger if larger else mpf(0)


def area(terms, upper, lower):
    """The integral of a sum of c*n^(k-1) from lower to upper."""
    return sum(big(c) * power_area(k, upper, lower) for c, k in terms)


def power_area(order, upper, lower):
    """(upper^k - lower^k)/k, written so that a k next to 0 costs no digits."""
    if order <= 0 and lower == 0:
        return INFINITE
    if lower == 0:
        return raised(upper, order) / big(order)
    if order.denominator == 1 and order > 0:
        return (raised(upper, order) - raised(lower, order)) / big(order)
    span = mpmath.log(upper / lower)
    return raised(lower, order) * mpmath.expm1(span * big(order)) / big(order) if order else span


def raised(number, power):
    """A power with a rational exponent; quick where that is a whole number."""
    if number == 0:
        return mpf(1) if power == 0 else mpf(0)
    return number ** int(power) if power.denominator == 1 else mpmath.exp(mpmath.log(number) * big(power))


def brought_to(terms, upper, spent, near=None):
    """The strength whose area up to `upper` is `spent`: `area` turned round. 0 where that is more than there is."""
    if spent <= 0:
        return upper
    if len(terms) == 1:
        return brought_by_one(terms[0], upper, spent)
    (c, k), (d, m) = terms
    if (k, m) == (2, 1):
        c, d = big(c) / 2, big(d)
        rest = upper * (c * upper + d) - spent
        return 2 * rest / (d + mpmath.sqrt(d * d + 4 * c * rest)) if rest > 0 else mpf(0)
    return brought_by_two(terms, upper, spent, near)


def brought_by_one(term, upper, spent):
    c, k = term
    if k == 0:
        return upper * mpmath.exp(-spent / big(c))
    part = big(k) * spent / big(c) / raised(upper, k)
    return upper * mpmath.exp(mpmath.log1p(-part) / big(k)) if part < 1 else mpf(0)


def brought_by_two(terms, upper, spent, near):
    """Newton's steps in the logarithm, in which the area is convex or close to it; halving keeps them in bounds."""
    if area(terms, upper, mpf(0)) <= spent:
        return mpf(0)
    low, high = None, mpmath.log(upper)
    at = mpmath.log(near) if near else high - 1
    for _ in range(2000):
        strength = mpmath.exp(at)
        off = area(terms, upper, strength) - spent
        if off > 0:
            low = at
        else:
            high = min(high, at)
        step = off / sum(big(c) * raised(strength, k) for c, k in terms)
        following = at + step
        if low is not None and not low < following < high:
            following = (low + high) / 2
        elif following > high:
            following = (at + high) / 2
        if abs(following - at) < mpf(10) ** (10 - mp.dps) * (1 + abs(at)):
            return mpmath.exp(following)
        at = following
    raise AssertionError("no root")


def left_of(fight, y_line, near=None):
    """What x still has when y is brought to a line."""
    if fight.x.effect == 0 or y_line == fight.y.strength:
        return fight.x.big_strength
    spent = fight.swapped.cost(y_line)
    if spent == INFINITE:
        return mpf(0)
    return brought_to(fight.terms, fight.x.big_strength, spent / fight.x.big_effect, near)


# --- time ---

NODES = {}


def nodes(count):
    """Gauss and Legendre's nodes and weights on the interval from -1 to 1."""
    key = (count, mp.dps)
    if key not in NODES:
        with mp.extradps(10):
            NODES[key] = [node(count, index) for index in range(1, count + 1)]
    return NODES[key]


def node(count, index):
    x = mpmath.cos(mpmath.pi * (index - mpf(1) / 4) / (count + mpf(1) / 2))
    for _ in range(200):
        before, now = mpf(1), x
        for n in range(2, count + 1):
            before, now = now, ((2 * n - 1) * x * now - (n - 1) * before) / n
        slope = count * (x * now - before) / (x * x - 1)
        step = now / slope
        x -= step
        if abs(step) < mpf(10) ** (5 - mp.dps):
            return x, 2 / ((1 - x * x) * slope * slope)
    raise AssertionError("no node")


class TooWide(Exception):
    """A strength falls by more powers of ten than anyone would ask for."""


@dataclass(frozen=True)
class Rule:
    """How fine an integral is taken: at two of them the digits of a table agree."""

    count: int = 48
    alike: int = 40
    most: int = 400

    def once(self, integrand, low, high):
        middle, half = (low + high) / 2, (high - low) / 2
        return half * sum(weight * integrand(middle + half * at) for at, weight in nodes(self.count))

    def integral(self, integrand, edges):
        """Over intervals halved until they no longer change it: halving squares the error, and more."""
        if len(edges) > self.most:
            raise TooWide
        waiting = [(low, high, self.once(integrand, low, high)) for low, high in zip(edges, edges[1:])]
        total, done = sum(abs(part) for _, _, part in waiting), mpf(0)
        taken = 0
        while waiting:
            taken += 1
            if taken > self.most:
                raise TooWide
            low, high, part = waiting.pop()
            middle = (low + high) / 2
            lower, upper = self.once(integrand, low, middle), self.once(integrand, middle, high)
            if abs(part - lower - upper) <= mpf(10) ** -self.alike * total:
                done += lower + upper
            else:
                waiting += [(low, middle, lower), (middle, high, upper)]
        return done


RULE = Rule()


class Orbit:
    """The way of x, with y beside it: along the state equation from the start, or at parity towards nothing."""

    def __init__(self, fight, parity=False):
        self.fight, self.parity = fight, parity
        self.near = None
        self.start = fight.y.big_strength
        self.terms = fight.swapped.terms

    def y_at(self, x):
        """y where x is left with `x`."""
        fight = self.fight
        if fight.y.effect == 0:
            return self.start
        if self.parity:
            worth = fight.cost(Fraction(0)) - fight_cost(fight, x)
            spent = (fight.swapped.cost(Fraction(0)) - worth) / fight.y.big_effect
        else:
            spent = fight_cost(fight, x) / fight.y.big_effect
        self.near = brought_to(self.terms, self.start, spent, self.near)
        return self.near

    def time(self, x_from, x_to, rule=RULE):
        """The integral of dx over the losses of x, by w = ln x; down to nothing as far as it counts at 70 digits."""
        if x_from == x_to:
            return mpf(0)
        fight = self.fight
        rate, per_target, shooters = fight.y.big_effect, fight.y.per_target, fight.y.shooters

        def pace(w):
            x = mpmath.exp(w)
            inverse = sum(big(c) * raised(x, exponent + 1) for c, exponent in per_target)
            return inverse / (rate * raised(self.y_at(x), shooters))

        high = mpmath.log(x_from)
        if x_to > 0:
            low, longest = mpmath.log(x_to), mpf(4)
        else:
            slowest = 1 - big(fight.y.vanishing)
            low, longest = high - 100 * mpmath.log(10) / slowest, max(20 / slowest, mpf(4))
        edges, step = [high], mpf(4)
        while edges[-1] > low and len(edges) <= rule.most:
            edges.append(max(low, edges[-1] - step))
            step = min(step * mpf("1.5"), longest) if x_to == 0 else step
        return rule.integral(pace, edges[::-1])


def fight_cost(fight, x):
    """What it takes to bring x down to a strength that is no fraction."""
    if fight.x.effect == 0:
        return mpf(0)
    return fight.x.big_effect * area(fight.terms, fight.x.big_strength, x)


def falls_more(fight, x, y):
    """Whether x falls by the larger factor, and so is the one to follow."""
    if fight.y.effect == 0:
        return False
    if fight.x.effect == 0 or x == 0:
        return True
    return y != 0 and fight.x.big_strength / x > fight.y.big_strength / y


def time_to(fight, x, y, parity=False, rule=RULE):
    """The time at which the fight is at (x, y), which lies on its orbit and is reached in finite time."""
    if not falls_more(fight, x, y):
        fight, x = fight.swapped, y
    return Orbit(fight, parity).time(fight.x.big_strength, x, rule)


def place_at(fight, clock, x, y, rule=RULE):
    """The strengths at the clock, from a place (x, y) of the orbit that is near: Newton's steps, each of which takes
    the integral of what is missing alone."""
    if not falls_more(fight, x, y):
        return tuple(reversed(place_at(fight.swapped, clock, y, x, rule)))
    orbit = Orbit(fight)
    now, time = x, orbit.time(fight.x.big_strength, x, rule)
    for _ in range(60):
        off = clock - time
        if abs(off) <= clock * mpf(10) ** -60:
            return now, orbit.y_at(now)
        slope = now / speed(fight, now, orbit.y_at(now))
        following = now * mpmath.exp(-max(min(off / slope, mpf(1)), mpf(-1)))
        low, high = min(now, following), max(now, following)
        time += orbit.time(high, low, rule) * (1 if following < now else -1)
        now = following
    raise AssertionError(fight.link())


def speed(fight, x, y):
    """What x loses per unit of time."""
    inverse = sum(big(c) * raised(x, exponent) for c, exponent in fight.y.per_target)
    return fight.y.big_effect * raised(y, fight.y.shooters) / inverse


# --- the outcome ---


def outcome(fight, near=None, rule=RULE):
    """The outcome of a fight, its clock included; `near` is a place of the orbit near the clock."""
    last = to_the_last(fight)
    ending = unclocked(fight, rule)
    below = falls_below_one(fight, rule) if ending.ended == "limit" or fight.until is not None else None
    if fight.until is not None:
        clock = big(exact(fight.until))
        if ending.time is None or ending.time > clock:
            x_end, y_end = place_at(fight, clock, *near, rule)
            below = below if below is not None and below <= clock else None
            return Outcome("neither", "clock", None, x_end, y_end, last, below)
    return replace(ending, to_the_last=last, below_one=below if ending.ended == "limit" else None)


def to_the_last(fight):
    """Who would be left if no side had a break point; None where no fire takes effect or neither is left anyway."""
    cost_x, cost_y = fight.costs(Fraction(0), Fraction(0))
    margin = margin_of(cost_x, cost_y)
    if margin is None or cost_x == cost_y == 0:
        return None
    return "parity" if abs(margin) <= big(TIE) else "x" if margin > 0 else "y"


def ends_at_parity(fight):
    """Whether both come to nothing together in finite time: next to nothing x^k is as y^m, with k = px - qx + 1 and
    m = py - qy + 1, and dx/dt as x^(qx + py k/m); the exponent is below 1 on both sides where px py is below
    (1 - qx)(1 - qy). Equal to the rounding of the inputs counts as equal."""
    q_x, q_y = fight.y.vanishing, fight.x.vanishing
    spare = (1 - q_x) * (1 - q_y) - fight.x.shooters * fight.y.shooters
    return q_x < 1 and q_y < 1 and spare > SAME_EXPONENT


def is_reached(fight, x, y):
    """Whether a place of the orbit is reached in finite time."""
    if x == 0 and y == 0:
        return ends_at_parity(fight)
    return (x > 0 or fight.y.vanishing < 1) and (y > 0 or fight.x.vanishing < 1)


def unclocked(fight, rule):
    broken = broken_from_the_start(fight)
    if broken:
        return broken
    margin = fight.margin(fight.x.line, fight.y.line)
    if margin is None:
        return Outcome("neither", "limit", None, mpf(0), mpf(0), None, None)
    if abs(margin) <= big(TIE):
        return tied(fight, rule)
    if margin > 0:
        return mirrored(first_is_x(fight.swapped, rule))
    return first_is_x(fight, rule)


def first_is_x(fight, rule):
    """x comes to its line before y does, or would if it were ever reached."""
    x_end, y_end = big(fight.x.line), left_of(fight.swapped, fight.x.line)
    if not is_reached(fight, x_end, y_end):
        return Outcome("neither", "limit", None, x_end, y_end, None, None)
    return Outcome("x", "break", time_to(fight, x_end, y_end, rule=rule), x_end, y_end, None, None)


def tied(fight, rule):
    """Both lines at one moment. To rounding alone each side has a time of its own: their mean, which is as near."""
    x_end, y_end = big(fight.x.line), big(fight.y.line)
    if not is_reached(fight, x_end, y_end):
        return Outcome("neither", "limit", None, x_end, y_end, None, None)
    if x_end == y_end == 0:
        times = [parity_time(one) for one in (fight, fight.swapped)]
    else:
        times = [time_to_line(one, rule) for one in (fight, fight.swapped) if one.x.line > 0]
    return Outcome("both", "break", sum(times) / len(times), x_end, y_end, None, None)


def time_to_line(fight, rule):
    """When x is at its line, y being wherever it then is."""
    return time_to(fight, big(fight.x.line), left_of(fight.swapped, fight.x.line), rule=rule)


def parity_time(fight):
    """Both to nothing: along the orbit a x^k/k = b y^m/m each factor is a single power, and so is the time."""
    (c, k), (d, m) = fight.terms[0], fight.swapped.terms[0]
    ratio = fight.x.big_effect * big(c) * big(m) / (fight.y.big_effect * big(d) * big(k))
    shooters = fight.y.shooters
    exponent = -fight.y.vanishing - shooters * k / m + 1
    start = raised(fight.x.big_strength, exponent) / big(exponent)
    return start * big(fight.y.per_target[0][0]) / (fight.y.big_effect * raised(ratio, shooters / m))


def falls_below_one(fight, rule):
    """When the first side that fades without ever reaching 0 is down to one; None where none fades."""
    cost_x, cost_y = fight.costs(Fraction(0), Fraction(0))
    margin = margin_of(cost_x, cost_y)
    parity = margin is not None and abs(margin) <= big(TIE)
    times = []
    for one, ahead in ((fight, -1), (fight.swapped, 1)):
        loses = margin is None or parity or margin * ahead > 0
        if one.y.effect == 0 or not loses:
            continue
        others = mpf(0) if parity or margin is None else left_of(one.swapped, Fraction(0))
        if is_reached(one, mpf(0), others):
            continue
        if one.x.strength <= 1:
            return mpf(0)
        at_one = Orbit(one, parity).y_at(mpf(1))
        times.append(time_to(one, mpf(1), at_one, parity, rule))
    return min(times, default=None)
