"""Writes every_law.tsv: outcomes to 45 digits for every pairing with logarithmic, search or power fire in it.

Run by hand: `python3 tests/reference/every_law.py` (needs mpmath; some ten minutes on two cores). The tests only read the
table that it leaves. The arithmetic is in separable.py. Strengths lie between 1 and 1e9, rates between 1e-9 and 1e9,
exponents between 0 and 3. The groups of a pairing:

* `ends`: both to the last, or with break points and losses from before;
* `near`: within 1e-3 to 1e-12 of both lines at the same moment, or of parity, or on it, exactly or to a rounding;
* `clock`: a clock, before or after the end, where a relative error of the time is not more than 30 times as large in
  the strengths.

Exponents are biased to where the formulas change: S/T an integer power, next to the logarithm by some roundings, both
at nothing in finite time, more of a side a hindrance to it; the half of a search to next to nothing and to far more than
there are targets.

Each row is checked before it is written: a second time with more digits and a finer rule; by the other side followed,
with the double exponential rule of mpmath; some by mpmath's Taylor integrator.
"""

import math
from dataclasses import replace
from fractions import Fraction
from multiprocessing import Pool
from pathlib import Path

import mpmath
from mpmath import mp, mpf

import separable
from drawing import Chance, check_by_integrator, close, line, same_numbers, share_left, sizes_fit, write
from fights import TIE, big, exact, text
from separable import Fight, Orbit, Rule, Side, TooWide, outcome, speed

LAWS = ("aimed", "area", "logarithmic", "search", "power")
NEW = LAWS[2:]
EXPONENTS = ["0", "0.25", "0.3", "0.5", "0.7", "0.75", "0.9", "0.99", "1", "1.2", "1.5", "1.75", "2", "2.5", "3"]
PLAN = {"last": 5, "lines": 6, "near": 7, "parity": 4, "tie": 3, "clock": 7}
PLAN_ONE_SIDED = {"last": 4, "lines": 5, "clock": 4}
GROUP = {"last": "ends", "lines": "ends", "near": "near", "parity": "near", "tie": "near", "clock": "clock"}
MOST_CONDITION = 30
chance = Chance(1959)


def ulps(value, most):
    """A double a few roundings away."""
    for _ in range(chance.randint(0, most)):
        value = math.nextafter(value, chance.choice([-9, 9]))
    return min(max(value, 0.0), 3.0)


def exponent(most):
    drawn = chance.choice([text(chance.uniform(0, most)), f"{chance.uniform(0, most):.2f}", chance.choice(EXPONENTS)])
    return drawn if float(drawn) <= most else text(float(drawn) / 3)


def random_side(law, strength):
    """A side; the rate is set later, against that of the other."""
    side = Side(text(chance.between(*strength)), law)
    if law == "search":
        size = chance.choice([(-12, -3), (-3, 0), (0, 4), (4, 9)])
        side = replace(side, half=text(chance.between(*size)))
    if law == "power":
        side = replace(side, p=exponent(chance.choice([1, 2, 3])), q=exponent(chance.choice([1, 2, 3])))
    return side


def next_to_the_logarithm(x, y):
    """Lets the order p - q + 1 of x be 0, or some roundings from it, where an exponent is free for that."""
    if y.fire == "power":
        return x, replace(y, q=text(ulps(float(x.shooters) + 1, 3)))
    if x.fire == "power" and y.vanishing == 1:
        return replace(x, p=text(chance.choice([0.0, 5e-324, 1e-300, 2.0**-53, 1e-16, 3e-15]))), y
    return x, y


def finite_at_parity(x, y):
    """Lets both come to nothing together in finite time, where the exponents are free for that."""
    if x.fire == "power":
        x = replace(x, p=f"{chance.uniform(0, 0.6):.3g}", q=f"{chance.uniform(0, 0.5):.3g}")
    if y.fire == "power":
        y = replace(y, p=f"{chance.uniform(0, 0.6):.3g}", q=f"{chance.uniform(0, 0.5):.3g}")
    return x, y


def hurt_by_more(x, y):
    """Lets the enemy's fire feed on x's number by more than x's fire gains from it."""
    if x.fire == "power" and y.vanishing == 1:
        return x, y
    if y.fire == "power" and x.shooters <= Fraction(3, 2):
        most = min(3.0, float(x.shooters) + 2.5)
        return x, replace(y, q=f"{chance.uniform(float(x.shooters) + 1.1, most):.3g}") if most > float(
            x.shooters
        ) + 1.2 else y
    return x, y


def random_fight(laws, kind):
    """Two sides as hard as each other to bring down, more or less: rates within their limits."""
    decades = chance.choice([(0, 9), (0, 9), (1, 4), (2, 3)])
    x, y = (random_side(law, decades) for law in laws)
    if "power" in laws:
        turn = chance.random()
        twist = [next_to_the_logarithm, finite_at_parity, hurt_by_more]
        if turn < 0.6:
            change = twist[1] if kind in ("parity", "tie") and turn < 0.4 else twist[int(turn * 5)]
            if chance.random() < 0.5:
                x, y = change(x, y)
            else:
                y, x = change(y, x)
    return Fight(replace(x, rate=text(chance.between(-6, 6))), replace(y, rate=text(chance.between(-6, 6))))


def balanced(fight, ratio):
    """The fight with y's rate so set that the cost of x's line is `ratio` that of y's; None where it cannot be."""
    one = replace(fight, y=replace(fight.y, rate="1"))
    cost_x, cost_y = one.costs(fight.x.line, fight.y.line)
    if not (0 < cost_x < mpmath.inf and 0 < cost_y < mpmath.inf):
        return None
    rate = cost_x / cost_y / big(Fraction(ratio))
    if not mpf("1e-15") <= rate <= mpf("1e15"):
        return None
    # Both rates together are a matter of the unit of time: they are brought into their limits.
    scale = mpf(10) ** int(mpmath.log10(rate) / 2)
    x_rate = exact(fight.x.rate) * Fraction(1, int(scale)) if scale >= 1 else exact(fight.x.rate) * int(1 / scale)
    if not Fraction(1, 10**9) <= x_rate <= 10**9:
        return None
    changed = replace(fight, x=replace(fight.x, rate=text(float(x_rate))))
    cost_x, cost_y = replace(changed, y=one.y).costs(fight.x.line, fight.y.line)
    rate = float(cost_x / cost_y / big(Fraction(ratio)))
    return replace(changed, y=replace(fight.y, rate=text(rate))) if 1e-9 <= rate <= 1e9 else None


def draw(kind, laws):
    fight = random_fight(laws, kind)
    if "none" in laws:
        return fight if kind == "last" else chance.with_lines(fight, 0.9, 0.3)
    endless = mpmath.inf in fight.costs(Fraction(0), Fraction(0))
    if kind == "last":
        return fight if endless else balanced(fight, 10 ** chance.uniform(-2, 2))
    if kind == "lines":
        lined = chance.with_lines(fight, 0.9, 0.3)
        return balanced(lined, 10 ** chance.uniform(-1, 1)) or lined
    if kind == "near" or endless:
        lined = chance.with_lines(fight, 1, 0.3)
        lined = lined if kind != "tie" else replace(lined, x=replace(lined.x, lost="0"), y=replace(lined.y, lost="0"))
        return balanced(lined, 1 if kind == "tie" else chance.near_one())
    if kind in ("parity", "tie"):
        return balanced(fight, 1 if kind == "tie" else chance.near_one())
    lined = chance.with_lines(fight, 0.9, 0.3) if chance.random() < 0.7 else fight
    return balanced(lined, chance.choice([chance.near_one(), 10 ** chance.uniform(-1, 1), 10 ** chance.uniform(-6, 6)])) or lined


def fits(kind, fight):
    """Lets a fight through unless it starts broken, is lost in the rounding, or sits on the very edge of a tie."""
    if fight is None or fight.x.strength <= fight.x.line or fight.y.strength <= fight.y.line:
        return False
    margins = [fight.margin(fight.x.line, fight.y.line), fight.margin(Fraction(0), Fraction(0))]
    known = [margin for margin in margins if margin is not None]
    if any(abs(abs(margin) / big(TIE) - 1) < mpf(10) ** -6 for margin in known):
        return False
    # A cost next to the logarithm is 1e16 and more, and the difference of two lost in it: a tie of no meaning.
    orders = [abs(order) for one in (fight, fight.swapped) for _, order in one.terms]
    if any(0 < order < Fraction(1, 100) for order in orders) and 0 in (fight.x.line, fight.y.line):
        return False
    if kind == "tie" and any(0 < share_left(side) < 0.1 for side in (fight.x, fight.y)):
        return False
    tied = margins[0] is not None and abs(margins[0]) <= big(TIE)
    return tied == (kind == "tie")


def clocked(fight):
    """The fight with a clock at a time when nothing is too sensitive to it, and the place at that time."""
    ending = outcome(fight)
    if ending.time is not None and chance.random() < 0.1:
        late = float(f"{float(ending.time) * chance.choice([1.5, 4]):.4g}")
        return (replace(fight, until=text(late)), None) if 1e-300 < late <= 1e9 else None
    loser = fight if ending.x_end / big(fight.x.strength) < ending.y_end / big(fight.y.strength) else fight.swapped
    orbit = Orbit(loser)
    end = ending.x_end if loser is fight else ending.y_end
    low = mpmath.log(end) if end > 0 else mpmath.log(big(loser.x.strength)) - 6
    share = mpf(chance.choice([0.002, 0.03, 0.2, 0.5, 0.8]))
    x = mpmath.exp(mpmath.log(big(loser.x.strength)) * (1 - share) + low * share)
    y = orbit.y_at(x)
    near = (x, y) if loser is fight else (y, x)
    clock = separable.time_to(fight, *near)
    written = float(clock) if chance.random() < 0.5 else float(f"{float(clock):.5g}")
    if not 1e-300 < written <= 1e9 or (ending.time is not None and written >= 0.999 * ending.time):
        return None
    condition = [speed(one, *place) * clock / place[0] for one, place in ((loser, (x, y)), (loser.swapped, (y, x)))]
    return (replace(fight, until=text(written)), near) if max(condition) <= MOST_CONDITION else None


def drawn(kind, laws):
    """Draws until there is a row: the fight, the place near its clock if it has one, and its outcome."""
    while True:
        fight = draw(kind, laws)
        if not fits(kind, fight):
            continue
        try:
            made = clocked(fight) if kind == "clock" else (fight, None)
            found = outcome(*made) if made is not None else None
        except TooWide:
            continue
        if found is not None and sizes_fit(found):
            return *made, found


def by_hand():
    """Fights whose answer must never be left to chance."""
    half = Side("100", "power", "1", p="0.5", q="0")
    hurting = Side("100", "power", "0.0005", p="1", q="2", breaks="0.5")
    return [
        # A constant fire, and the root of the number of shooters: at parity both come to nothing at 20.
        ("tie", Fight(half, half)),
        ("tie", Fight(Side("100", "aimed", "0.1"), Side("100", "power", "5", p="0", q="0"))),
        # More hurts: 100 win where 200 break first.
        ("lines", Fight(Side("100", "power", "25", p="0.5", q="0", breaks="0.5"), hurting)),
        ("lines", Fight(Side("200", "power", "25", p="0.5", q="0", breaks="0.5"), hurting)),
        # No tie at any strength, and neither left.
        ("last", Fight(Side("600", "logarithmic", "0.04"), Side("400", "logarithmic", "0.05"))),
        ("last", Fight(Side("600", "logarithmic", "0.04"), Side("400", "area", "0.0001"))),
        # Half at 0 is aimed fire.
        ("tie", Fight(Side("600", "search", "0.04", half="0"), Side("400", "search", "0.09", half="0"))),
        ("last", Fight(Side("600", "search", "0.04", half="0"), Side("400", "aimed", "0.05"))),
        ("lines", Fight(Side("75", "search", "0.1", half="30", breaks="0.25", lost="25"), Side("80", "aimed", "1"))),
        ("last", Fight(Side("100", "search", "0", half="3"), Side("50", "power", "0.1", p="1", q="0.5"))),
    ]


def tasks():
    """What rows there are: by hand, or so many of each kind of each pairing, each row drawn from a seed of its own."""
    for fight in by_hand():
        yield fight
    for laws in [(one, other) for one in LAWS for other in LAWS if one in NEW or other in NEW]:
        for kind, count in PLAN.items():
            if laws != ("logarithmic", "logarithmic") or kind != "parity":
                for index in range(count * (2 if laws == ("power", "power") else 1)):
                    yield kind, laws, index
    for laws in [pair for law in NEW for pair in ((law, "none"), ("none", law))]:
        for kind, count in PLAN_ONE_SIDED.items():
            for index in range(count):
                yield kind, laws, index


# --- checks ---


def check_twice(fight, near, found):
    """The same with more digits and a finer rule."""
    with mp.workdps(130):
        again = outcome(fight, near, Rule(60, 44, 800))
    same_numbers(fight, found, again, 45)


def check_other_side(fight, found):
    """The time by following the other side, in its own strength, by the double exponential rule.

    Where it is next to singular the rule has few digits: it says itself how many, and below 6 it is not asked.
    """
    x, y = (found.x_end, found.y_end)
    time = found.time if found.time is not None else big(exact(fight.until))
    if found.breaks == "both" or 0 in (x, y) or fight.x.effect == 0 or fight.y.effect == 0:
        return None
    other = fight.swapped if separable.falls_more(fight, x, y) else fight
    start, end = big(other.x.strength), (y if other is not fight else x)
    if abs(start - end) < start * mpf(10) ** -12:
        return None
    orbit = Orbit(other)
    with mp.workdps(50):
        pace = lambda n: 1 / speed(other, n, orbit.y_at(n))
        edges = [end * (start / end) ** (mpf(n) / 8) for n in range(9)]
        value, error = mpmath.quad(pace, edges, error=True, maxdegree=7)
    known = min(20, int(-mpmath.log10(error / value + mpf(10) ** -40)) - 3)
    if known < 6:
        return None
    assert close(value, time, known), (fight.link(), value, time, error)
    return known


def check_motion(fight, found):
    """A Taylor integrator comes to the same place."""
    time = found.time if found.time is not None else big(exact(fight.until))
    with mp.workdps(22):
        losses = lambda x, y: (speed(fight, x, y), speed(fight.swapped, y, x))
        check_by_integrator(fight, found, time, losses)


def is_tame(fight, found):
    """Whether the integrator is quick, and accurate: not much has fallen of either side."""
    ends = (found.x_end / big(fight.x.strength), found.y_end / big(fight.y.strength))
    return (found.time or found.ended == "clock") and min(ends) > 0.3 and fight.x.effect * fight.y.effect > 0


def row(numbered):
    """A row as text, checked; and what its checks were."""
    number, (kind, what, *index) = numbered
    if index:
        chance.seed(f"1959 {kind} {what} {index[0]}")
        fight, near, found = drawn(kind, what)
    else:
        fight, near, found = what, None, outcome(what)
    check_twice(fight, near, found)
    known = motion = None
    if found.time or (found.ended == "clock" and near):
        known = check_other_side(fight, found) if number % 3 == 0 else None
        if number % 5 == 0 and is_tame(fight, found):
            check_motion(fight, found)
            motion = True
    group = f"{fight.x.fire}/{fight.y.fire} {GROUP[kind]}"
    return line(group, fight, found), known, motion


def main():
    with Pool(2) as pool:
        done = list(pool.imap(row, enumerate(tasks())))
    path = Path(__file__).with_suffix(".tsv")
    write(path, [row for row, _, _ in done])
    followed = [known for _, known, _ in done if known]
    print(f"{len(done)} rows in {path.name}; {len(followed)} by the other side, {min(followed)} digits and more alike;")
    print(f"{sum(1 for _, _, motion in done if motion)} by the integrator")


if __name__ == "__main__":
    main()
