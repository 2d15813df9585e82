"""Writes schedules.tsv: outcomes of schedules to 30 digits, by Taylor series in decimal arithmetic.

Run by hand: `python3 tests/reference/schedules.py` (about a minute; mpmath for the check of linear rows). The tests only
read the table that it leaves. The arithmetic is in schedule_taylor.py. Each row is checked before it is written: a second time
with another order, tolerance and number of digits; linear ones also by matrix exponentials of mpmath.

A row whose end is ill-conditioned is left out: a line that is met at a slow pace, or next to nothing left.
"""

import random
from decimal import Decimal as D, localcontext
from pathlib import Path

from mpmath import expm, matrix, mp, mpf

from schedule_taylor import CAUSES, ENEMY, Effort, Engagement, Unfit, meet, number, read, solve

COUNTS = {
    "linear": 90, "plain": 60, "separable": 50, "general": 60, "closing same": 30, "closing": 40, "moving lines": 40,
    "clock": 45, "from nothing": 20,
}
SECOND = Effort(order=33, tolerance=D("1e-30"), digits=40)
AGREEMENT = D("1e-22")
LAWS = ["aimed", "area", "logarithmic", "search", "power"]
BREAKS = ["0.1", "0.2", "0.3", "0.4", "0.5", "0.6", "0.75", "0.9"]


def text(value):
    """A number as the link writes it, to five digits."""
    return plain(float(f"{value:.5g}"))


def plain(value):
    written = repr(float(value))
    written = written[:-2] if written.endswith(".0") else written
    return written.replace("e-0", "e-").replace("e+", "e")


class Draft:
    """A link in the making."""

    def __init__(self, source):
        self.random = source
        self.keys = {}

    def among(self, *choices):
        return self.random.choice(choices)

    def between(self, low, high):
        return self.random.uniform(low, high)

    def put(self, key, value):
        self.keys[key] = value if isinstance(value, str) else text(value)

    def link(self):
        return "&".join(f"{key}={value}" for key, value in self.keys.items())

    def sides(self, x_law, y_law, breaks=BREAKS):
        for k, law in (("x", x_law), ("y", y_law)):
            self.put(f"{k}.start", float(self.random.randint(50, 900)))
            self.put(f"{k}.break", self.random.choice(breaks))
            if self.random.random() < 0.25:
                self.put(f"{k}.lost", float(self.random.randint(1, 15)))
            self.put(f"{k}.fire", law)
        for k in "xy":
            self.fire(f"{k}.", self.keys[f"{k}.fire"], k)

    def fire(self, stem, law, k):
        """Rate and exponents, so that the enemy loses some hundredth parts of itself per unit of time."""
        own, enemy = (float(self.keys[f"{side}.start"]) or 300 for side in (k, ENEMY[k]))
        pace = 10 ** self.between(-2, -1)
        if law == "none":
            return
        if law == "search":
            self.put(stem + "half", float(self.random.randint(0, 300)))
        if law == "power":
            self.put(stem + "p", round(self.between(0, 2), 2))
            self.put(stem + "q", round(self.between(0, 1.6), 2))
        exponents = {
            "aimed": (1, 0), "area": (1, 1), "logarithmic": (0, 1), "search": (1, 0),
            "power": (float(self.keys.get(stem + "p", 1)), float(self.keys.get(stem + "q", 0))),
        }[law]
        self.put(stem + "rate", pace * enemy / (own ** exponents[0] * enemy ** exponents[1]))

    def joins(self, most=3, until=14, withdrawals=True):
        for k in "xy":
            count = self.random.randint(0, most)
            start = float(self.keys[f"{k}.start"])
            sizes = [self.between(0.02, 0.3) * start for _ in range(count)]
            if withdrawals:
                sizes = [-size / 4 if self.random.random() < 0.3 else size for size in sizes]
            if count:
                items = [f"{text(round(size, 1))}@{text(self.between(0, until))}" for size in sizes]
                self.put(f"{k}.join", ",".join(items))

    def flows(self, chance=0.5):
        for k in "xy":
            if self.random.random() < chance:
                rate = float(self.keys[f"{k}.start"]) * self.between(0.001, 0.02)
                begin = self.among("0", text(self.between(0, 4)))
                end = self.among("", text(self.between(5, 15)))
                self.put(f"{k}.flow", f"{text(rate)}@{begin}/{end}")

    def besides(self, chance=0.5, wastage=True, area=True, aimed=True):
        for k in "xy":
            enemy = float(self.keys[f"{ENEMY[k]}.start"])
            if wastage and self.random.random() < chance:
                self.put(f"{k}.wastage", self.between(0.001, 0.02))
            if area and self.random.random() < chance:
                self.put(f"{k}.support.area", self.between(0.001, 0.02))
            if aimed and self.random.random() < chance:
                self.put(f"{k}.support.aimed", enemy * self.between(0.001, 0.01))

    def phases(self, laws=None, most=2):
        for n in range(1, self.random.randint(0, most) + 1):
            self.put(f"phase{n}.from", self.between(0.5, 10))
            k = self.among("x", "y")
            if laws and self.random.random() < 0.5:
                law = self.random.choice(laws)
                self.put(f"phase{n}.{k}.fire", law)
                self.fire(f"phase{n}.{k}.", law, k)
            elif f"{k}.rate" in self.keys:
                self.put(f"phase{n}.{k}.rate", float(self.keys[f"{k}.rate"]) * self.between(0.3, 2))


def linear(draft):
    laws = ["aimed", "aimed", "logarithmic", "none"]
    draft.sides(draft.random.choice(laws), draft.random.choice(laws), breaks=BREAKS + ["1"])
    draft.besides()
    draft.flows(0.4)
    draft.joins()
    draft.phases()


def plain_pieces(draft):
    draft.sides(draft.random.choice(LAWS), draft.random.choice(LAWS))
    draft.joins()
    draft.phases(laws=LAWS)


def separable(draft):
    x, y = draft.among(("area", "area"), ("area", "logarithmic"), ("area", "aimed"), ("aimed", "area"))
    draft.sides(x, y)
    for k in "xy":
        targets_of = draft.keys[f"{ENEMY[k]}.fire"]
        if targets_of in ("area", "logarithmic"):
            draft.put(f"{k}.wastage", draft.between(0.001, 0.02))
            if draft.random.random() < 0.5:
                draft.put(f"{ENEMY[k]}.support.area", draft.between(0.001, 0.02))
        elif draft.random.random() < 0.7:
            draft.put(f"{ENEMY[k]}.support.aimed", float(draft.keys[f"{k}.start"]) * draft.between(0.001, 0.01))
    draft.joins(2)


def general(draft):
    draft.sides(draft.among("search", "power"), draft.random.choice(LAWS))
    if draft.random.random() < 0.5:
        swap_sides(draft)
    draft.besides()
    draft.flows(0.3)
    draft.joins()
    draft.phases(laws=LAWS)


def swap_sides(draft):
    swapped = {"x": "y", "y": "x"}
    draft.keys = {swapped[key[0]] + key[1:]: value for key, value in draft.keys.items()}


def closing_range(draft, same):
    draft.put("range", draft.among("900", "1200", "2000"))
    draft.put("range.closing", draft.among("60", "100", "240"))
    draft.put("range.least", draft.among("0", "100", "300"))
    reach, shape = draft.among("500", "800", "1500"), draft.among("0.5", "1", "1.5", "2")
    for k in "xy":
        draft.put(f"{k}.reach", reach if same else draft.among("500", "800", "1500"))
        draft.put(f"{k}.reach.shape", shape if same else draft.among("0.5", "1", "1.5", "2"))


def closing_same(draft):
    draft.sides(draft.random.choice(LAWS), draft.random.choice(LAWS))
    closing_range(draft, same=True)
    draft.joins(2)
    draft.phases(most=1)


def closing(draft):
    draft.sides(draft.random.choice(LAWS), draft.random.choice(LAWS))
    closing_range(draft, same=draft.random.random() < 0.2)
    draft.besides(0.3)
    draft.joins(2)
    draft.flows(0.2)


def moving_lines(draft):
    laws = ["aimed", "aimed", "area", "logarithmic", "search"]
    draft.sides(draft.random.choice(laws), draft.random.choice(laws))
    draft.flows(1)
    draft.joins(1)
    draft.besides(0.3)


def clock(draft):
    draft.among(linear, plain_pieces, general, closing)(draft)
    draft.put("until", draft.between(0.5, 6))


def from_nothing(draft):
    """A side that is not there at first: reserves or a flow bring it."""
    laws = ["aimed", "area", "logarithmic"]
    draft.sides(draft.random.choice(laws), draft.random.choice(laws))
    k = draft.among("x", "y")
    start = float(draft.keys[f"{k}.start"])
    draft.keys[f"{k}.start"] = "0"
    if draft.random.random() < 0.5:
        draft.put(f"{k}.join", f"{text(start)}@{text(draft.between(0, 4))},{text(start / 3)}@{text(draft.between(4, 8))}")
    else:
        begin = draft.between(0, 2)
        draft.put(f"{k}.flow", f"{text(start / 3)}@{text(begin)}/{text(begin + 3)}")
    draft.put(f"{ENEMY[k]}.wastage", draft.between(0.001, 0.01))


KINDS = {
    "linear": linear, "plain": plain_pieces, "separable": separable, "general": general, "closing same": closing_same,
    "closing": closing, "moving lines": moving_lines, "clock": clock, "from nothing": from_nothing,
}


def at_the_moment():
    """A reserve that comes at the very moment of a break, which is a decimal of few digits, and roundings or hairs away."""
    links = []
    for start, breaks, aimed, moment in [
        ("100", "0.5", "10", 5.0), ("400", "0.25", "25", 4.0), ("300", "0.3", "9", 10.0), ("200", "0.4", "16", 5.0),
        ("640", "0.1", "16", 4.0), ("90", "0.9", "27", 3.0), ("500", "0.2", "12.5", 8.0),
    ]:
        base = f"x.start=400&x.fire=none&x.support.aimed={aimed}&y.start={start}&y.fire=logarithmic&y.rate=0.01&y.break={breaks}"
        for at in [moment, moment * (1 - 1e-9), moment * (1 - 1e-13), moment * (1 + 1e-13), moment * (1 + 1e-9)]:
            links.append(("moment", f"{base}&y.join=37@{plain(at)}"))
        links.append(("moment", f"{base}&y.join=-5@{plain(moment)}"))
        links.append(("moment", f"{base}&until={plain(moment)}"))
        links.append(("moment", f"{base}&y.flow=3@{plain(moment)}/"))
    return links


def a_hair(source):
    """A reserve of the side that breaks, a hair before the moment and a hair after."""
    links = []
    for kind, make, hair in [("hair closed", linear, 1e-12), ("hair", general, 1e-9), ("hair", closing, 1e-9)]:
        for _ in range(8):
            link, result = found(source, make)
            while result.breaks not in ("x", "y") or result.instants_met < 1:
                link, result = found(source, make)
            keys = read(link)
            k, time = result.breaks, float(result.time)
            for at in (time * (1 - hair), time * (1 + hair)):
                more = f"{text(float(result.sides[k].committed) * 0.1)}@{plain(at)}"
                joins = {**keys, f"{k}.join": ",".join(filter(None, [keys.get(f"{k}.join"), more]))}
                links.append((kind, "&".join(f"{key}={value}" for key, value in joins.items())))
    return links


def withdrawn():
    """All that is left of a side goes, or fire brings it to nothing after some have gone."""
    base = "x.start=500&x.rate=0.05&y.start=200&y.rate=0.04"
    return [("withdrawn", link) for link in (
        f"{base}&y.join=-500@2", f"{base}&y.break=0.9&y.join=-900@1.5", f"{base}&y.join=-40@1",
        f"{base}&y.join=-20@1,30@2,-60@3", f"{base}&x.join=-100@1,-600@3", f"{base}&y.wastage=0.02&y.join=-80@0.5",
    )]


def found(source, make):
    """A link of a kind that makes a row, and its outcome."""
    while True:
        draft = Draft(source)
        make(draft)
        try:
            result = solve(draft.link())
        except Unfit:
            continue
        if result.time > 0:
            return draft.link(), result


def checked(link, result):
    """Holds an outcome against another order, tolerance and number of digits."""
    try:
        again = solve(link, SECOND)
    except Unfit as why:
        raise AssertionError(link) from why
    assert (again.breaks, again.ended) == (result.breaks, result.ended), link
    for one, other in zip(result.numbers(), again.numbers()):
        assert abs(one - other) <= AGREEMENT * max(abs(one), D("1e-9")), (link, one, other)


def by_exponentials(link, result):
    """Strengths at the end and losses of a linear row by matrix exponentials, a stretch at a time."""
    mp.dps = 45
    engagement = Engagement(link)
    end = result.time
    times = [time for time in engagement.instants() if time <= end]
    big = lambda value: mpf(str(value))
    for place, now in enumerate(times):
        with localcontext() as context:
            context.prec = 46
            meet(engagement, now)
            until = times[place + 1] if place + 1 < len(times) else end
            sides = engagement.sides
            there = all(
                side.left > 0 or any(b <= now and (e is None or now < e) for _, b, e in side.flows) for side in sides.values()
            )
            # Strengths, 1, and the two strengths summed over time.
            rows = {"x": 0, "y": 1}
            system = matrix(5, 5)
            for k, row in rows.items():
                side, enemy = sides[k], sides[ENEMY[k]]
                flow = sum((rate for rate, b, e in side.flows if b <= now and (e is None or now < e)), D(0))
                present = side.left > 0 or flow > 0
                own = side.wastage + enemy.area
                if there and enemy.fire.law == "logarithmic":
                    own += enemy.fire.rate
                if there and enemy.fire.law == "aimed":
                    system[row, rows[ENEMY[k]]] -= big(enemy.fire.rate)
                system[row, row] -= big(own)
                system[row, 2] += big(flow - (enemy.aimed if present else D(0)))
                system[3 + row, row] = mpf(1)
            after = expm(system * big(until - now), method="taylor") * matrix(
                [big(sides["x"].left), big(sides["y"].left), 1, 0, 0]
            )
            for k, row in rows.items():
                sides[k].left = D(mp.nstr(after[row], 44))
    for k in "xy":
        known = result.sides[k].left
        off = abs(engagement.sides[k].left - known)
        assert off <= D("1e-24") * max(abs(known), D(1)), (link, k, known, engagement.sides[k].left)


def row(kind, link, result):
    def cell(value):
        return "0" if value == 0 else f"{value:.31e}"

    cells = [kind, link, result.breaks, result.ended, cell(result.time) if result.ended == "break" else ""]
    cells += [cell(result.sides[k].left) for k in "xy"]
    for k in "xy":
        cells += [cell(result.sides[k].losses[cause]) for cause in CAUSES]
    return "\t".join(cells)


def endless():
    """Fights that never end, with what a page of algebra gives: nothing here is followed in time."""
    base = "x.start={}&y.start={}"
    rows = []
    # Each side fades on its own: fire and wastage share what there was.
    for a, b, u, v in [("0.03", "0.04", "0.01", "0.02"), ("0.002", "0.05", "0.003", "0.0007"), ("1.5", "0.25", "0.5", "2")]:
        link = base.format(500, 300) + f"&x.fire=logarithmic&x.rate={a}&y.fire=logarithmic&y.rate={b}&x.wastage={u}&y.wastage={v}"
        a, b, u, v = (D(float(value)) for value in (a, b, u, v))
        losses = [500 * b / (b + u), D(0), 500 * u / (b + u), 300 * a / (a + v), D(0), 300 * v / (a + v)]
        rows.append(("limit", link, [D(0), D(0)], losses))
    # No fire at all: a flow against wastage, and a flow that nothing stops.
    for flow, wastage in [("5", "0.01"), ("12.5", "0.05"), ("0.3", "0.002")]:
        link = base.format(500, 300) + f"&x.fire=none&y.fire=none&x.flow={flow}@0/&x.wastage={wastage}&y.wastage={wastage}"
        rows.append(("equilibrium", link, [D(float(flow)) / D(float(wastage)), D(0)], [None] * 6))
    for flow in ("5", "0.01"):
        link = base.format(500, 300) + f"&x.fire=none&y.fire=none&x.flow={flow}@2/"
        rows.append(("growth", link, [None, D(300)], [None] * 6))
    # A flow that keeps a side alive against fire that feeds on its number.
    for flow, rate in [("6", "0.03"), ("40", "0.25")]:
        link = base.format(500, 300) + f"&x.fire=none&y.fire=logarithmic&y.rate={rate}&x.flow={flow}@0/&y.break=0.5"
        rows.append(("equilibrium", link, [D(float(flow)) / D(float(rate)), D(300)], [None] * 6))
    for ended, link, ends, losses in rows:
        cells = ["" if value is None else "0" if value == 0 else f"{value:.31e}" for value in ends + losses]
        yield "\t".join(["endless", link, "neither", ended, "", *cells])


def main():
    source = random.Random(20_240_401)
    rows = []
    for kind, count in COUNTS.items():
        for _ in range(count):
            link, result = found(source, KINDS[kind])
            rows.append((kind, link, result))
    for kind, link in at_the_moment() + a_hair(source) + withdrawn():
        rows.append((kind, link, solve(link)))
    for kind, link, result in rows:
        checked(link, result)
        if kind in ("linear", "hair closed"):
            by_exponentials(link, result)
    columns = ["kind", "link", "breaks", "ended", "time", "x_end", "y_end"]
    columns += [f"{k}_{cause}" for k in "xy" for cause in CAUSES]
    lines = ["# Written by schedules.py. An empty cell is a number that is not there, or not looked at."]
    lines += ["\t".join(columns)] + [row(*one) for one in rows] + list(endless())
    Path(__file__).with_name("schedules.tsv").write_text("\n".join(lines) + "\n", encoding="utf-8")
    print(len(rows), "rows")


if __name__ == "__main__":
    main()
