"""Two sides that do nothing but fire at each other: who breaks first, when, and what is left, to 45 digits.

The arithmetic that decides is rational and exact: every input is the double nearest to its text, taken as exact.
Times and strengths are closed forms at 120 digits:

* aimed against aimed, the square law: Lanchester, Aircraft in Warfare (1916); Osipov (1915), who gives
  sqrt(b) x + sqrt(a) y = (sqrt(b) x0 + sqrt(a) y0) exp(-sqrt(ab) t);
* area against area, the linear law: Lanchester (1916); y/x = (y0/x0) exp(-(b x0 - a y0) t);
* aimed against area: Deitchman, Operations Research 10 (1962) 818-827, whose constant is b x - a y^2/2, so that the
  side which aims obeys y' = -(K + a y^2/2), a Riccati equation;
* fire met by no fire: the shooters stay, the targets fall in a line (aimed) or by an exponential (area).

`pure_fights.py` holds these against quadrature and an integrator before it writes anything.
"""

from dataclasses import dataclass, replace
from fractions import Fraction

import mpmath
from mpmath import mp, mpf

import fights
from fights import TIE, Outcome, big, broken_from_the_start, exact, mirrored

mp.dps = 120


@dataclass(frozen=True)
class Fight(fights.Fight):
    """A fight whose margins are rational."""

    def worths(self, x_line, y_line):
        """What it takes of x, and of y, to be brought to a line: rate times the integral of shooters over targets."""
        worth_x = self.x.effect * integral(self.y.fire, self.x.strength, x_line)
        worth_y = self.y.effect * integral(self.x.fire, self.y.strength, y_line)
        return worth_x, worth_y

    def margin(self, x_line, y_line):
        """The difference of the two worths over the larger of them: above 0 where y is brought to its line first."""
        worth_x, worth_y = self.worths(x_line, y_line)
        larger = max(abs(worth_x), abs(worth_y))
        return (worth_x - worth_y) / larger if larger else Fraction(0)


def integral(enemy_fire, upper, lower):
    """Of shooters (the strength) over targets (1 where the enemy aims, the strength where it fires at an area)."""
    if enemy_fire == "area":
        return upper - lower
    return (upper**2 - lower**2) / 2


def used_up(enemy_fire, upper, worth, rate):
    """The strength that is left of `upper` once `worth` of it is gone: `integral` turned round."""
    if enemy_fire == "area":
        return big(upper - worth / rate)
    return mpmath.sqrt(big(upper**2 - 2 * worth / rate))


def time_between(fight, x_end, y_end):
    """The time from the start to the point (x_end, y_end) of the fight's path."""
    a, b = big(fight.y.effect), big(fight.x.effect)
    x, y = big(fight.x.strength), big(fight.y.strength)
    if a == 0:
        return one_sided_time(fight.x.fire, b * x, y, y_end)
    if b == 0:
        return one_sided_time(fight.y.fire, a * y, x, x_end)
    laws = (fight.x.fire, fight.y.fire)
    if laws == ("aimed", "aimed"):
        p, q = mpmath.sqrt(b), mpmath.sqrt(a)
        return mpmath.log((p * x + q * y) / (p * x_end + q * y_end)) / (p * q)
    if laws == ("area", "area"):
        drift = b * x - a * y
        if drift == 0:
            return (1 / y_end - 1 / y) / a
        return mpmath.log(y * x_end / (x * y_end)) / drift
    if laws == ("area", "aimed"):
        return time_between(fight.swapped, y_end, x_end)
    return ambush_time(b * x - a * y**2 / 2, a, y, y_end)


def one_sided_time(fire, effect, start, end):
    """How long fire of a constant effect takes to bring a side that does not answer from start to end."""
    return mpmath.log(start / end) / effect if fire == "area" else (start - end) / effect


def ambush_time(constant, a, y, y_end):
    """Of the side that aims, under area fire at rate a: the integral of dy / (constant + a y^2/2)."""
    if constant == 0:
        return (1 / y_end - 1 / y) * 2 / a
    root = mpmath.sqrt(2 * abs(constant) / a)
    if constant > 0:
        return (mpmath.atan(y / root) - mpmath.atan(y_end / root)) * 2 / (a * root)
    return mpmath.log((y - root) * (y_end + root) / ((y + root) * (y_end - root))) / (a * root)


def strengths_at(fight, time):
    """Both strengths at a time, for as long as neither side has run out."""
    a, b = big(fight.y.effect), big(fight.x.effect)
    x, y = big(fight.x.strength), big(fight.y.strength)
    laws = (fight.x.fire, fight.y.fire)
    if a == 0:
        return x, one_sided_strength(fight.x.fire, b * x, y, time)
    if b == 0:
        return one_sided_strength(fight.y.fire, a * y, x, time), y
    if laws == ("aimed", "aimed"):
        root = mpmath.sqrt(a * b)
        cosh, sinh = mpmath.cosh(root * time), mpmath.sinh(root * time)
        return x * cosh - y * sinh * a / root, y * cosh - x * sinh * b / root
    if laws == ("area", "area"):
        return linear_strengths(a, b, x, y, time)
    if laws == ("area", "aimed"):
        return tuple(reversed(strengths_at(fight.swapped, time)))
    constant = b * x - a * y**2 / 2
    left = ambush_strength(constant, a, y, time)
    return (constant + a * left**2 / 2) / b, left


def one_sided_strength(fire, effect, start, time):
    return start * mpmath.exp(-effect * time) if fire == "area" else start - effect * time


def linear_strengths(a, b, x, y, time):
    drift = b * x - a * y
    if drift == 0:
        shrink = 1 + a * y * time
        return x / shrink, y / shrink
    ratio = y / x * mpmath.exp(-drift * time)
    x_left = drift / (b - a * ratio)
    return x_left, x_left * ratio


def ambush_strength(constant, a, y, time):
    """The strength at a time of the side that aims: the Riccati equation solved."""
    if constant == 0:
        return y / (1 + a * y * time / 2)
    root = mpmath.sqrt(2 * abs(constant) / a)
    angle = a * root * time / 2
    if constant > 0:
        return root * mpmath.tan(mpmath.atan(y / root) - angle)
    return root * (y + root * mpmath.tanh(angle)) / (root + y * mpmath.tanh(angle))


def outcome(fight):
    """The outcome of a fight, its clock included."""
    last = to_the_last(fight)
    ending = unclocked(fight)
    if fight.until is not None:
        clock = big(exact(fight.until))
        if ending.time is None or ending.time > clock:
            x_end, y_end = strengths_at(fight, clock)
            below = falls_below_one(fight, last)
            below = below if below is not None and below <= clock else None
            return Outcome("neither", "clock", None, x_end, y_end, last, below)
    below = falls_below_one(fight, last) if ending.ended == "limit" else None
    return replace(ending, to_the_last=last, below_one=below)


def falls_below_one(fight, last):
    """When the first side that fades without ever reaching 0 is down to one; None where none fades."""
    times = []
    if last in ("y", "parity"):
        times.append(fades_below_one(fight, last))
    if last in ("x", "parity"):
        times.append(fades_below_one(fight.swapped, last))
    return min((time for time in times if time is not None), default=None)


def fades_below_one(fight, last):
    """The same for x, which loses or stands at parity."""
    if last != "parity" and fight.y.fire != "area":
        return None
    if fight.x.strength <= 1:
        return mpf(0)
    if last == "parity":
        return parity_time_to_one(fight)
    worth, _ = fight.worths(Fraction(1), fight.y.line)
    return time_between(fight, mpf(1), used_up(fight.x.fire, fight.y.strength, worth, fight.y.effect))


def parity_time_to_one(fight):
    """Of x at parity, where the worths stay equal all the way down: parity to a rounding counts as parity."""
    a, b = big(fight.y.effect), big(fight.x.effect)
    x, y = big(fight.x.strength), big(fight.y.strength)
    laws = (fight.x.fire, fight.y.fire)
    if laws == ("aimed", "aimed"):
        return mpmath.log(x) / mpmath.sqrt(a * b)
    if laws == ("area", "area"):
        return (1 - 1 / x) / b
    if laws == ("aimed", "area"):
        return (mpmath.sqrt(x) - 1) / y * 2 / a
    return (1 - 1 / x) * 2 / b


def to_the_last(fight):
    """Who would be left if no side had a break point."""
    if fight.x.effect == 0 and fight.y.effect == 0:
        return None
    margin = fight.margin(Fraction(0), Fraction(0))
    return "parity" if abs(margin) <= TIE else "x" if margin > 0 else "y"


def unclocked(fight):
    broken = broken_from_the_start(fight)
    if broken:
        return broken
    margin = fight.margin(fight.x.line, fight.y.line)
    if abs(margin) <= TIE:
        return tied(fight)
    if margin > 0:
        return mirrored(first_is_x(fight.swapped))
    return first_is_x(fight)


def can_be_reached(line, enemy_fire):
    """Area fire takes effect in proportion to its targets: it never brings the last of them down."""
    return line > 0 or enemy_fire != "area"


def tied(fight):
    x, y = fight.x, fight.y
    reached = can_be_reached(x.line, y.fire) and can_be_reached(y.line, x.fire) and (x.line > 0 or y.line > 0)
    x_end, y_end = big(x.line), big(y.line)
    if not reached:
        return Outcome("neither", "limit", None, x_end, y_end, None, None)
    times = [time for line, time in ((y.line, time_to_line_x(fight)), (x.line, time_to_line_y(fight))) if line > 0]
    return Outcome("both", "break", sum(times) / len(times), x_end, y_end, None, None)


def time_to_line_x(fight):
    """When x is at its line, y being wherever it then is: a tie to rounding alone leaves y a hair off its own."""
    worth, _ = fight.worths(fight.x.line, fight.y.line)
    if fight.y.line == 0:
        return None
    return time_between(fight, big(fight.x.line), used_up(fight.x.fire, fight.y.strength, worth, fight.y.effect))


def time_to_line_y(fight):
    return time_to_line_x(fight.swapped)


def first_is_x(fight):
    """x comes to its line before y does, or would if area fire could bring it to 0."""
    x, y = fight.x, fight.y
    worth, _ = fight.worths(x.line, y.line)
    x_end, y_end = big(x.line), used_up(x.fire, y.strength, worth, y.effect)
    if can_be_reached(x.line, y.fire):
        return Outcome("x", "break", time_between(fight, x_end, y_end), x_end, y_end, None, None)
    return Outcome("neither", "limit", None, x_end, y_end, None, None)
