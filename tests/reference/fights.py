"""Fights as the link writes them, and what comes of them: what every table of pure fights starts from and ends with.

Every number is a text: what is read is the double nearest to it, taken as exact.
"""

from dataclasses import dataclass, replace
from fractions import Fraction
from functools import cached_property

from mpmath import mpf

TIE = Fraction(4, 2**53)


def text(value):
    """The shortest decimal that reads back as this double, in the link's own grammar."""
    plain = repr(float(value)).replace("e+", "e")
    return plain[:-2] if plain.endswith(".0") else plain


def exact(written):
    """The double nearest to a text, as an exact fraction."""
    return Fraction(float(written))


def big(fraction):
    """A fraction at working precision."""
    return mpf(fraction.numerator) / fraction.denominator


@dataclass(frozen=True)
class Side:
    """One side as the link writes it: texts for the numbers, so that what is read is what is written."""

    start: str
    fire: str = "aimed"
    rate: str = "0"
    half: str | None = None
    p: str | None = None
    q: str | None = None
    breaks: str = "1"
    lost: str = "0"

    @cached_property
    def strength(self):
        return exact(self.start)

    @cached_property
    def effect(self):
        """The rate, or nothing for a side that does not fire."""
        return Fraction(0) if self.fire == "none" else exact(self.rate)

    @cached_property
    def line(self):
        """The strength at which the side breaks: it has then lost `breaks` of all it ever committed."""
        return (self.strength + exact(self.lost)) * (1 - exact(self.breaks))

    @property
    def big_effect(self):
        return big(self.effect)

    @property
    def big_strength(self):
        return big(self.strength)

    def pairs(self, name):
        yield f"{name}.start={self.start}"
        if self.fire != "aimed":
            yield f"{name}.fire={self.fire}"
        if self.fire != "none":
            yield f"{name}.rate={self.rate}"
        for key in ("half", "p", "q"):
            if getattr(self, key) is not None:
                yield f"{name}.{key}={getattr(self, key)}"
        if self.breaks != "1":
            yield f"{name}.break={self.breaks}"
        if self.lost != "0":
            yield f"{name}.lost={self.lost}"


@dataclass(frozen=True)
class Fight:
    """Two sides and perhaps a clock."""

    x: Side
    y: Side
    until: str | None = None

    def link(self):
        pairs = [*self.x.pairs("x"), *self.y.pairs("y")]
        if self.until is not None:
            pairs.append(f"until={self.until}")
        return "&".join(pairs)

    @cached_property
    def swapped(self):
        """The same fight seen from the other side."""
        return replace(self, x=self.y, y=self.x)


@dataclass(frozen=True)
class Outcome:
    breaks: str
    ended: str
    time: object
    x_end: object
    y_end: object
    to_the_last: str | None
    below_one: object


def broken_from_the_start(fight):
    """The outcome of a fight in which a side had reached its line before the start; None where none had."""
    gone = [side.strength <= side.line for side in (fight.x, fight.y)]
    if not any(gone):
        return None
    who = "both" if all(gone) else "x" if gone[0] else "y"
    return Outcome(who, "break", mpf(0), big(fight.x.strength), big(fight.y.strength), None, None)


def mirrored(result):
    names = {"x": "y", "y": "x"}
    return replace(
        result,
        breaks=names.get(result.breaks, result.breaks),
        x_end=result.y_end,
        y_end=result.x_end,
    )
