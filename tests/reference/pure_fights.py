"""Writes pure_fights.tsv: outcomes of fights to 45 digits, for every pairing of aimed, area and no fire.

Run by hand: `python3 tests/reference/pure_fights.py` (needs mpmath). The tests only read the table that it leaves.
Rates lie between 1e-9 and 1e9 and strengths between 1 and 1e9. The groups of a pairing:

* `last`: both to the last; `lines`: break points, and losses from before; `clock`: a clock, before or after the end;
* `near`: within 1e-3 to 1e-12 of both lines at the same moment, and a few within some roundings of it;
* `parity`: as near to parity of two sides that fight to the last; `tie`: on the tie, exactly or to a rounding.

Each row is checked before it is written: at two precisions; against quadrature of the time; against the equations of
motion, differentiated numerically; some clocks against a Taylor integrator.
"""

from dataclasses import replace
from fractions import Fraction
from pathlib import Path

import mpmath
from mpmath import mp, mpf

from drawing import Chance, check_by_integrator, close, line, same_numbers, share_left, sizes_fit, write
from exact import Fight, outcome, strengths_at
from fights import TIE, Side, big, exact, text

TWO_SIDED = [("aimed", "aimed"), ("area", "area"), ("aimed", "area"), ("area", "aimed")]
ONE_SIDED = [("aimed", "none"), ("none", "aimed"), ("area", "none"), ("none", "area")]
chance = Chance(1916)


def random_fight(laws):
    sides = [Side(text(chance.between(0, 9)), rate=text(chance.between(-9, 9)), fire=law) for law in laws]
    return Fight(*sides)


def balanced(fight, ratio):
    """The fight with y's rate so set that the worth of x to its line is `ratio` that of y; None where it cannot be."""
    one = replace(fight.y, rate="1")
    worth_x, worth_y = replace(fight, y=one).worths(fight.x.line, fight.y.line)
    if worth_y <= 0 or worth_x <= 0:
        return None
    rate = float(worth_x / worth_y / Fraction(ratio))
    return replace(fight, y=replace(fight.y, rate=text(rate))) if 1e-9 <= rate <= 1e9 else None


def with_lines(fight, before=0.4):
    return chance.with_lines(fight, 0.9, before)


def until_good(make):
    """Draws until `make` gives something."""
    while True:
        made = make()
        if made is not None:
            return made


def last(laws):
    if chance.random() < 0.3:
        return random_fight(laws)
    return balanced(random_fight(laws), 10 ** chance.uniform(-2, 2))


def lines(laws):
    drawn = with_lines(random_fight(laws))
    return drawn if chance.random() < 0.3 else balanced(drawn, 10 ** chance.uniform(-1, 1))


def near(laws):
    return balanced(with_lines(random_fight(laws)), chance.near_one())


def parity(laws):
    return balanced(random_fight(laws), chance.near_one())


def tie(laws):
    """Lines reached together: in small integers, exactly; or with the last rate rounded to a double."""
    if chance.random() < 0.5:
        drawn = with_lines(random_fight(laws), 0)
    else:
        whole = [Side(str(chance.randint(1, 40) * 2 ** chance.randint(0, 20)), law, "1") for law in laws]
        drawn = Fight(replace(whole[0], rate=text(3 * 2.0 ** chance.randint(-9, 9))), whole[1])
        breaks = chance.choice(["0.25", "0.5", "0.75", "1"])
        drawn = replace(drawn, x=replace(drawn.x, breaks=breaks), y=replace(drawn.y, breaks=breaks))
    drawn = balanced(drawn, 1)
    if drawn is None or min(share_left(drawn.x), share_left(drawn.y)) < 0.1:
        drawn = drawn if drawn and drawn.x.line == drawn.y.line == 0 else None
    return drawn if drawn and abs(drawn.margin(drawn.x.line, drawn.y.line)) <= TIE else None


def clock(laws):
    one_sided = "none" in laws
    drawn = random_fight(laws) if chance.random() < 0.3 else with_lines(random_fight(laws))
    if not one_sided:
        close_to = chance.choice([chance.near_one(), 10 ** chance.uniform(-1, 1), 10 ** chance.uniform(-12, 12)])
        drawn = balanced(drawn, close_to)
    if drawn is None:
        return None
    ending = outcome(drawn)
    if ending.time is not None:
        return replace(drawn, until=short(ending.time * chance.choice([0.01, 0.1, 0.3, 0.5, 0.7, 0.9, 1.5])))
    scale = characteristic_time(drawn)
    return replace(drawn, until=short(scale * chance.choice([0.01, 0.2, 1, 3, 7])))


def characteristic_time(fight):
    """How long the losses of the first moment would take to use up the side that they use up sooner."""
    x, y = big(fight.x.strength), big(fight.y.strength)
    loss_x = big(fight.y.effect) * y * (x if fight.y.fire == "area" else 1)
    loss_y = big(fight.x.effect) * x * (y if fight.x.fire == "area" else 1)
    return 1 / max(loss_x / x, loss_y / y)


def short(time):
    value = float(f"{float(time):.4g}")
    return text(value)


PLAN = {"last": 16, "lines": 20, "near": 26, "parity": 16, "tie": 8, "clock": 24}
PLAN_ONE_SIDED = {"last": 4, "lines": 6, "clock": 5}
MAKERS = {"last": last, "lines": lines, "near": near, "parity": parity, "tie": tie, "clock": clock}


def one_sided(kind, laws):
    drawn = random_fight(laws)
    if kind == "lines":
        return with_lines(drawn)
    return clock(laws) if kind == "clock" else drawn


def by_hand():
    """Fights whose answer must never be left to chance."""
    known = [
        ("tie", Fight(Side("600", rate="0.04"), Side("400", rate="0.09"))),
        ("last", Fight(Side("600", rate="0.04"), Side("400", rate="0.05"))),
        ("lines", Fight(Side("600", rate="0.04", breaks="0.3"), Side("400", rate="0.05", breaks="0.3"))),
        ("lines", Fight(Side("75", rate="0.1", breaks="0.25", lost="25"), Side("80", rate="0.1"))),
        ("lines", Fight(Side("60", rate="0.1", breaks="0.25", lost="40"), Side("50", rate="0.1", breaks="0.5", lost="70"))),
        ("lines", Fight(Side("100", rate="0.1", breaks="0.5"), Side("10", rate="0.1", breaks="0.5", lost="30"), "3")),
        ("last", Fight(Side("100", rate="0.1"), Side("50", rate="0"))),
        ("last", Fight(Side("100", "area", "0"), Side("50", "area", "0.001"))),
    ]
    return known


def rows():
    yield from by_hand()
    for laws in TWO_SIDED:
        for kind, count in PLAN.items():
            for _ in range(count):
                yield kind, until_good(lambda kind=kind, laws=laws: fit(kind, MAKERS[kind](laws)))
    for laws in ONE_SIDED:
        for kind, count in PLAN_ONE_SIDED.items():
            for _ in range(count):
                yield kind, until_good(lambda kind=kind, laws=laws: fit(kind, one_sided(kind, laws)))


def fit(kind, drawn):
    """Lets a fight through unless it starts broken, is lost in the rounding, or sits on the very edge of a tie."""
    if drawn is None or drawn.x.strength <= drawn.x.line or drawn.y.strength <= drawn.y.line:
        return None
    if drawn.until is not None and not 1e-300 < float(drawn.until) <= 1e9:
        return None
    margins = [drawn.margin(drawn.x.line, drawn.y.line), drawn.margin(Fraction(0), Fraction(0))]
    if any(abs(abs(margin) / TIE - 1) < Fraction(1, 10**6) for margin in margins):
        return None
    if kind != "tie" and abs(margins[0]) <= TIE:
        return None
    found = outcome(drawn)
    return drawn if sizes_fit(found) else None


def check(fight, found):
    """Holds a row against a higher precision, the equations of motion, and quadrature."""
    with mp.workdps(160):
        again = outcome(fight)
    same_numbers(fight, found, again, 46)
    if found.time:
        check_time(fight, found)
    if found.ended == "clock":
        check_motion(fight, big(exact(fight.until)), found)


def check_time(fight, found):
    """The strengths at the time found are the ends found, and quadrature along the state equation gives the time."""
    if found.breaks == "both":
        return
    ends = strengths_at(fight, found.time)
    scales = (big(fight.x.strength), big(fight.y.strength))
    for end, known, scale in zip(ends, (found.x_end, found.y_end), scales):
        assert abs(end - known) < scale * mpf(10) ** -40, fight.link()
    if fight.x.effect and fight.y.effect and abs(fight.margin(Fraction(0), Fraction(0))) > Fraction(1, 100):
        assert close(quadrature(fight, found), found.time, 12), fight.link()


def quadrature(fight, found):
    """The time as the integral along the path of dx over the losses of x, y being taken from the state equation."""
    a, b = big(fight.y.effect), big(fight.x.effect)
    x0, y0 = big(fight.x.strength), big(fight.y.strength)

    def pace(gone):
        x = x0 - gone
        spent = b / a * (gone if fight.y.fire == "area" else gone * (2 * x0 - gone) / 2)
        y = y0 - spent if fight.x.fire == "area" else mpmath.sqrt(abs(y0**2 - 2 * spent))
        return 1 / (a * y * (x if fight.y.fire == "area" else 1))

    with mp.workdps(30):
        gone = x0 - found.x_end
        if gone < x0 * mpf(10) ** -15:
            return found.time
        steps = [gone * (1 - mpf(10) ** -k) for k in range(0, 14)] + [gone]
        return mpmath.quad(pace, steps)


def check_motion(fight, time, found):
    """At the clock the strengths change as the laws of fire say; a Taylor integrator comes to the same place."""
    a, b = big(fight.y.effect), big(fight.x.effect)

    def losses(x, y):
        return (
            a * y * (x if fight.y.fire == "area" else 1),
            b * x * (y if fight.x.fire == "area" else 1),
        )

    step = time * mpf(10) ** -30
    before, after = strengths_at(fight, time - step), strengths_at(fight, time + step)
    for lower, upper, loss in zip(before, after, losses(found.x_end, found.y_end)):
        slope = (lower - upper) / (2 * step)
        assert abs(slope - loss) <= abs(loss) * mpf(10) ** -20, fight.link()
    if is_tame(fight):
        with mp.workdps(25):
            check_by_integrator(fight, found, time, losses)


def is_tame(fight):
    """Whether a row is short enough for the integrator to be quick."""
    return big(exact(fight.until)) < 3 * characteristic_time(fight)


def main():
    done = []
    for kind, fight in rows():
        found = outcome(fight)
        check(fight, found)
        done.append(line(f"{fight.x.fire}/{fight.y.fire} {kind}", fight, found))
    path = Path(__file__).with_suffix(".tsv")
    write(path, done)
    print(f"{len(done)} rows in {path.name}")


if __name__ == "__main__":
    main()
