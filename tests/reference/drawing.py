"""How fights are drawn by chance for the tables of pure fights, and how their rows are written and checked."""

import random
from dataclasses import replace
from fractions import Fraction

import mpmath
from mpmath import mpf

from fights import big, text

COLUMNS = ("group", "link", "breaks", "ended", "time", "x_end", "y_end", "to_the_last", "below_one", "x_lost", "y_lost")
BREAKS = ["0.05", "0.1", "0.2", "0.25", "0.3", "0.4", "0.5", "0.6", "0.75", "0.9", "0.99"]


class Chance(random.Random):
    """Draws numbers, and what is put into a fight by chance."""

    def between(self, low, high):
        """A number between two powers of ten, half of them cut to a few digits as a person would write it."""
        value = 10 ** self.uniform(low, high)
        if self.random() < 0.5:
            value = float(f"{value:.{self.randint(1, 5)}e}")
        return min(max(value, 10.0**low), 10.0**high)

    def near_one(self):
        """A ratio within 1e-3 to 1e-12 of 1, or now and then just outside the rounding that counts as a tie."""
        if self.random() < 0.1:
            return 1 + self.choice([-1, 1]) * Fraction(self.randint(6, 60), 2**53)
        return 1 + self.choice([-1, 1]) * Fraction(10 ** self.uniform(-12, -3))

    def with_lines(self, fight, breaking, before):
        """The fight with break points and losses from before: how often, as parts of 1."""
        sides = []
        for side in (fight.x, fight.y):
            breaks = self.choice(BREAKS) if breaking == 1 or self.random() < breaking else "1"
            lost = "0"
            if before and self.random() < before:
                share = float(breaks) / (1 - min(float(breaks), 0.9)) * self.uniform(0, 0.9)
                lost = text(min(float(f"{float(side.start) * share:.3g}"), 1e9))
            sides.append(replace(side, breaks=breaks, lost=lost))
        return replace(fight, x=sides[0], y=sides[1])


def share_left(side):
    """A tie to rounding alone says little of a side whose line is a small part of it: such rows would prove nothing."""
    return float(side.line / side.strength)


def sizes_fit(found):
    """Whether a double holds every number of an outcome."""
    sizes = [found.time, found.x_end, found.y_end, found.below_one]
    return all(size is None or size == 0 or 1e-250 < size < 1e250 for size in sizes)


def digits(value):
    """45 significant digits; an empty cell for what is not there."""
    return "" if value is None else value if isinstance(value, str) else mpmath.nstr(value, 45, min_fixed=0, max_fixed=0)


def line(group, fight, found):
    """A row of a table."""
    cells = [group, fight.link(), found.breaks, found.ended, found.time, found.x_end, found.y_end]
    cells += [found.to_the_last, found.below_one]
    cells += [big(fight.x.strength) - found.x_end, big(fight.y.strength) - found.y_end]
    return "\t".join(digits(cell) for cell in cells)


def write(path, lines):
    path.write_text("\n".join(["\t".join(COLUMNS), *lines]) + "\n", encoding="utf-8")


def close(one, other, digits_alike):
    scale = max(abs(one), abs(other))
    return scale == 0 or abs(one - other) <= scale * mpf(10) ** -digits_alike


def same_numbers(fight, found, again, digits_alike):
    """Holds an outcome against the same worked out otherwise."""
    for name in ("time", "x_end", "y_end", "below_one"):
        one, other = getattr(found, name), getattr(again, name)
        assert (one is None) == (other is None) and (one is None or close(one, other, digits_alike)), (fight.link(), name)


def check_by_integrator(fight, found, time, losses):
    """Mpmath's Taylor integrator comes to the same place; `losses` gives those of both sides at their strengths."""
    scale = (big(fight.x.strength), big(fight.y.strength))

    def motion(_, state):
        return [-loss * time / whole for loss, whole in zip(losses(state[0] * scale[0], state[1] * scale[1]), scale)]

    path = mpmath.odefun(motion, 0, [mpf(1), mpf(1)])(1)
    for value, known, whole in zip(path, (found.x_end, found.y_end), scale):
        assert abs(value * whole - known) < whole * mpf(10) ** -12, (fight.link(), value * whole, known)
