"""Writes questions.tsv: what a number in question must be, found from outside.

Run by hand: `python3 tests/reference/questions.py` (some minutes; SciPy and mpmath). The tests only read the table that it
leaves. Two kinds of rows:

- "parity": the number at which both sides reach their break lines together, for every pairing of laws, by mpmath at 40 digits:
  numerical integrals of the state equation and a root of their difference. No formula of the core is used.
- the others: thresholds by a search of its own. A fight is followed by SciPy's DOP853 at a relative tolerance of 1e-13, stretch by
  stretch between the instants of the schedule, with the break lines as events; the interval is looked at in even steps, and each
  change of the outcome is halved down to 1e-11. Its own reading of the link, its own rules of breaking.

A row: kind, link, the outcomes along the interval ("x|y": x breaks, then y), the thresholds between them, and where there are
conditions the intervals that meet them ("607.2..900", an end that is the edge of the question in square brackets).
"""

import random
from pathlib import Path

import numpy as np
from mpmath import findroot, mp, mpf, quad
from scipy.integrate import solve_ivp

ENEMY = {"x": "y", "y": "x"}
STEPS = 96
PRECISION = 1e-11
HORIZON = 600.0


def plain(value):
    written = repr(float(value))
    written = written[:-2] if written.endswith(".0") else written
    return written.replace("e-0", "e-").replace("e+", "e")


def text(value):
    return plain(float(f"{value:.4g}"))


# The fight, followed in time.


def losses(law, rate, half, p, q, shooters, targets):
    if law == "aimed":
        return rate * shooters
    if law == "area":
        return rate * shooters * targets
    if law == "logarithmic":
        return rate * targets
    if law == "search":
        return rate * shooters * targets / (targets + half)
    if law == "power":
        return rate * shooters**p * targets**q
    return 0.0


class Side:
    """What stands in the link of one side, at a time."""

    def __init__(self, keys, k):
        number = lambda key, default: float(keys.get(f"{k}.{key}", default))
        self.left = number("start", 0)
        self.lost = number("lost", 0)
        self.committed = self.left + self.lost
        self.breaks = number("break", 1)
        self.law = keys.get(f"{k}.fire", "aimed")
        self.rate, self.half = number("rate", 0), number("half", 0)
        self.p, self.q = number("p", 1), number("q", 0)
        self.wastage, self.area, self.aimed = number("wastage", 0), number("support.area", 0), number("support.aimed", 0)
        items = lambda key: [item for item in keys.get(f"{k}.{key}", "").split(",") if item]
        self.joins = [tuple(map(float, item.split("@"))) for item in items("join")]
        self.flows = []
        for item in items("flow"):
            rate, when = item.split("@")
            begin, end = when.split("/")
            self.flows.append((float(rate), float(begin), float(end) if end else np.inf))

    def fire(self, shooters, targets):
        return losses(self.law, self.rate, self.half, self.p, self.q, shooters, targets)

    def flow(self, now):
        return sum(rate for rate, begin, end in self.flows if begin <= now < end)

    def above(self):
        """How far losses are from the break line."""
        return self.breaks * self.committed - self.lost


def phases(keys):
    numbers = sorted({key.split(".")[0] for key in keys if key.startswith("phase")})
    return sorted((float(keys[f"{number}.from"]), number) for number in numbers)


def fight(keys):
    """Who breaks ("x", "y" or "neither"), when, what is left, and what was lost from time 0."""
    sides = {k: Side(keys, k) for k in "xy"}
    until = float(keys.get("until", HORIZON))
    changes = phases(keys)
    times = {0.0, *(time for time, _ in changes)}
    for side in sides.values():
        times |= {time for _, time in side.joins} | {end for flow in side.flows for end in flow[1:]}
    times = sorted(time for time in times if time <= until)
    before = {k: sides[k].lost for k in "xy"}
    for place, now in enumerate(times):
        for k, side in sides.items():
            for size, time in side.joins:
                if time == now:
                    side.left += size
                    side.committed += size
        for time, number in changes:
            if time == now:
                for key, value in keys.items():
                    if key.startswith(f"{number}.") and key != f"{number}.from":
                        k, name = key[len(number) + 1 :].split(".", 1)
                        setattr(sides[k], {"support.area": "area", "support.aimed": "aimed"}.get(name, name), float(value))
        end = times[place + 1] if place + 1 < len(times) else until
        if end <= now:
            continue
        broke = stretch(sides, now, end)
        if broke:
            return (*broke, {k: sides[k].left for k in "xy"}, {k: sides[k].lost - before[k] for k in "xy"})
    return ("neither", np.inf, {k: sides[k].left for k in "xy"}, {k: sides[k].lost - before[k] for k in "xy"})


def stretch(sides, now, end):
    x, y = sides["x"], sides["y"]
    flows = {k: side.flow(now) for k, side in sides.items()}
    scale = max(x.committed, y.committed)

    def rates(_, state):
        a, b = max(state[0], 0.0), max(state[1], 0.0)
        lost = (
            y.fire(b, a) + (x.wastage + y.area) * a + y.aimed,
            x.fire(a, b) + (y.wastage + x.area) * b + x.aimed,
        )
        return [flows["x"] - lost[0], flows["y"] - lost[1], lost[0], lost[1]]

    def event(row, side, flow):
        if side.breaks == 1:
            meets = lambda t, state: state[row]
        else:
            meets = lambda t, state: side.above() + side.breaks * flow * (t - now) - state[2 + row]
        meets.terminal = True
        meets.direction = -1
        return meets

    def lowest(row, side, flow):
        """Where the distance from the line turns: a flow moves the line, so that it may be met between two steps only."""
        turns = lambda t, state: side.breaks * flow - rates(t, state)[2 + row]
        turns.direction = 1
        return turns

    events = [event(0, x, flows["x"]), event(1, y, flows["y"])]
    flowing = [row for row in (0, 1) if flows["xy"[row]] > 0]
    events += [lowest(row, (x, y)[row], flows["xy"[row]]) for row in flowing]
    for k, one in zip("xy", events):
        if one(now, [x.left, y.left, 0, 0]) <= 0:
            return k, now
    found = solve_ivp(
        rates, (now, end), [x.left, y.left, 0.0, 0.0], method="DOP853", rtol=1e-13, atol=1e-13 * scale, events=events,
    )
    for row, times, states in zip(flowing, found.t_events[2:], found.y_events[2:]):
        for time, state in zip(times, states):
            if events[row](time, state) <= 0:
                return "xy"[row], time
    state, time = found.y[:, -1], found.t[-1]
    for row, side in enumerate((x, y)):
        side.left = state[row]
        side.lost += state[2 + row]
        side.committed += flows["xy"[row]] * (time - now)
    if found.status == 1:
        met = [k for k, times in zip("xy", found.t_events[:2]) if len(times)]
        return met[0], time
    return None


# The search along one number.


def put(keys, key, value):
    """The keys with the number in question replaced: the first question mark with what stands around it."""
    changed = dict(keys)
    changed[key] = put_into(keys[key], plain(value))
    return changed


def put_into(written, value):
    mark = written.index("?")
    first = mark
    while first > 0 and written[first - 1] not in "@/,":
        first -= 1
    last = mark
    while last < len(written) and written[last] not in "@/,":
        last += 1
    return written[:first] + value + written[last:]


def asked(keys):
    (key,) = [key for key, value in keys.items() if "?" in value and key != "sothat"]
    written = keys[key]
    span = written[written.index("?") + 1 :]
    for sign in "@/,":
        span = span.split(sign)[0]
    low, high = span.split("..")
    return key, float(low), float(high)


def holds(goals, result):
    broke, time, left, lost = result
    for goal in filter(None, goals.split(",")):
        what, _, allowed = goal.partition(":")
        if allowed:
            low, _, high = allowed.partition("..")
            k, _, name = what.partition(".")
            value = time if what == "time" else left[k] if name == "end" else lost[k]
            if not (float(low or "-inf") <= value <= float(high or "inf")):
                return False
            continue
        k, name = what.split(".")
        if not {"breaks": broke == k, "holds": broke != k, "prevails": broke == ENEMY[k]}[name]:
            return False
    return True


def at_a_glance(keys, steps=12):
    """The outcomes at a few values."""
    key, low, high = asked(keys)
    return [fight(put(keys, key, low + (high - low) * (step + 0.5) / steps))[0] for step in range(steps)]


def search(keys):
    """The outcomes along the number, the thresholds between them, and where the conditions hold."""
    key, low, high = asked(keys)
    goals = keys.get("sothat", "")
    classed = lambda value: (lambda result: (result[0], bool(goals) and holds(goals, result)))(fight(put(keys, key, value)))
    span = high - low
    values = [low + span * step / STEPS for step in range(STEPS + 1)]
    classes = [classed(value) for value in values]
    changes = []
    for place in range(STEPS):
        brackets = [(values[place], classes[place], values[place + 1], classes[place + 1])]
        while brackets:
            a, first, b, last = brackets.pop()
            if first == last:
                continue
            middle = (a + b) / 2
            if b - a <= PRECISION * max(abs(a), abs(b)) or not a < middle < b:
                changes.append((middle, first, last))
                continue
            between = classed(middle)
            brackets += [(a, first, middle, between), (middle, between, b, last)]
    changes.sort()
    outcomes, thresholds = [classes[0][0]], []
    met, since = [], f"[{plain(low)}]" if classes[0][1] else None
    for value, first, last in changes:
        if first[0] != last[0]:
            outcomes.append(last[0])
            thresholds.append(value)
        if last[1] and not first[1]:
            since = plain(value)
        if first[1] and not last[1]:
            met.append(f"{since}..{plain(value)}")
            since = None
    if since is not None:
        met.append(f"{since}..[{plain(high)}]")
    return outcomes, thresholds, met


# Links in the making.


class Draft:
    def __init__(self, source, laws=("aimed", "area", "logarithmic", "search", "power")):
        self.random = source
        self.keys = {}
        for k in "xy":
            self.keys[f"{k}.start"] = str(source.randint(80, 800))
            self.keys[f"{k}.fire"] = source.choice(laws)
            self.keys[f"{k}.break"] = source.choice(["0.2", "0.25", "0.3", "0.4", "0.5", "0.6"])
        for k in "xy":
            own, enemy = float(self.keys[f"{k}.start"]), float(self.keys[f"{ENEMY[k]}.start"])
            pace = 10 ** source.uniform(-1.7, -0.8)
            law = self.keys[f"{k}.fire"]
            if law == "search":
                self.keys[f"{k}.half"] = str(source.randint(10, 300))
            p, q = {"aimed": (1, 0), "area": (1, 1), "logarithmic": (0, 1), "search": (1, 0), "power": (1, 0)}[law]
            if law == "power":
                p, q = round(source.uniform(0.3, 1.5), 2), round(source.uniform(0, 1.2), 2)
                self.keys[f"{k}.p"], self.keys[f"{k}.q"] = str(p), str(q)
            self.keys[f"{k}.rate"] = text(pace * enemy / (own**p * enemy**q))

    def number(self, key):
        return float(self.keys[key])

    def side(self):
        return self.random.choice("xy")

    def lasting(self):
        _, time, _, _ = fight(self.keys)
        return time

    def link(self):
        return "&".join(f"{key}={value}" for key, value in self.keys.items())


def start(draft):
    k = draft.side()
    draft.keys[f"{k}.start"] += f"?{text(draft.number(f'{k}.start') / 20)}..{text(draft.number(f'{k}.start') * 4)}"


def rate(draft):
    k = draft.side()
    value = draft.number(f"{k}.rate")
    draft.keys[f"{k}.rate"] = f"{text(value)}?{text(value / 50)}..{text(value * 6)}"


def break_point(draft):
    draft.keys[f"{draft.side()}.break"] = "?0.02..0.98"


def reserve_size(draft):
    k, time = draft.side(), draft.lasting()
    size = draft.number(f"{k}.start") * 2
    draft.keys[f"{k}.join"] = f"?0..{text(size)}@{text(time * draft.random.uniform(0.1, 0.8))}"


def reserve_time(draft):
    broke, time, _, _ = fight(draft.keys)
    k = broke if broke in "xy" else "x"
    size = draft.number(f"{k}.start") * draft.random.uniform(0.2, 0.9)
    draft.keys[f"{k}.join"] = f"{text(size)}@?0..{text(time * 1.4)}"


def flow_rate(draft):
    k, time = draft.side(), draft.lasting()
    most = 4 * draft.number(f"{k}.start") / time
    draft.keys[f"{k}.flow"] = f"?0..{text(most)}@{text(time * draft.random.uniform(0, 0.5))}/"


def flow_time(draft):
    broke, time, _, _ = fight(draft.keys)
    k = broke if broke in "xy" else "y"
    most = draft.number(f"{k}.start") / time * draft.random.uniform(0.8, 2.5)
    span = f"?0.001..{text(time * 0.99)}"
    draft.keys[f"{k}.flow"] = draft.random.choice([f"{text(most)}@{span}/{text(time)}", f"{text(most)}@0/{span}"])


def phase_time(draft):
    k, time = draft.side(), draft.lasting()
    draft.keys["phase1.from"] = f"?0.001..{text(time * 1.2)}"
    draft.keys[f"phase1.{k}.rate"] = text(draft.number(f"{k}.rate") * draft.random.choice([0.1, 0.3, 2.5, 5]))


def besides(draft):
    k, time = draft.side(), draft.lasting()
    key = draft.random.choice(["wastage", "support.area", "support.aimed"])
    most = 2 / time * (draft.number(f"{ENEMY[k]}.start") if key == "support.aimed" else 1)
    draft.keys[f"{k}.{key}"] = f"?0..{text(most)}"


def clock(draft):
    time = draft.lasting()
    draft.keys["until"] = f"?{text(time * 0.2)}..{text(time * 2)}"


def more_hurts(draft):
    """The enemy's fire feeds on the number of a side more than the side's own fire gains by it."""
    k = draft.side()
    draft.keys[f"{k}.fire"], draft.keys[f"{ENEMY[k]}.fire"] = "power", "power"
    own, enemy = draft.number(f"{k}.start"), draft.number(f"{ENEMY[k]}.start")
    for side, p, q in ((k, 0.5, 0.0), (ENEMY[k], 1.0, draft.random.choice([1.8, 2.0]))):
        draft.keys[f"{side}.p"], draft.keys[f"{side}.q"] = plain(p), plain(q)
        a, b = (own, enemy) if side == k else (enemy, own)
        draft.keys[f"{side}.rate"] = text(0.1 * draft.random.uniform(0.6, 1.6) * b / (a**p * b**q))
    draft.keys[f"{k}.start"] = f"?{text(own / 10)}..{text(own * 3)}"


def window(draft):
    """A reserve that fire at an area takes much of if it comes early, and that is too late if it comes late."""
    k = draft.side()
    enemy = ENEMY[k]
    own, others = draft.number(f"{k}.start"), draft.number(f"{enemy}.start")
    draft.keys[f"{enemy}.fire"], draft.keys[f"{k}.fire"] = "area", "aimed"
    draft.keys[f"{k}.break"] = "0.5"
    barrage = draft.random.uniform(1, 3)
    draft.keys[f"{enemy}.rate"] = text(draft.random.uniform(0.3, 0.55) / barrage / others)
    draft.keys[f"{k}.rate"] = text(draft.random.uniform(0.03, 0.07) * others / own)
    draft.keys["phase1.from"] = text(barrage)
    draft.keys[f"phase1.{enemy}.rate"] = text(draft.random.uniform(0.02, 0.08) / others)
    draft.keys[f"{k}.join"] = f"{text(own * draft.random.uniform(0.3, 0.9))}@?0..{text(draft.lasting() * 1.3)}"


def conditions(draft):
    k = draft.side()
    draft.random.choice([start, rate, reserve_size, reserve_time])(draft)
    key, low, high = asked(draft.keys)
    _, time, left, lost = fight(put(draft.keys, key, low + 0.4 * (high - low)))
    goals = [f"{k}.prevails", f"{ENEMY[k]}.breaks", f"{k}.holds", f"{k}.end:{text(left[k] * 0.9)}..", f"{k}.lost:..{text(lost[k] * 1.1)}"]
    if time < HORIZON:
        goals += [f"time:..{text(time * 1.05)}", f"time:{text(time * 0.8)}..{text(time * 1.2)}"]
    draft.keys["sothat"] = ",".join(draft.random.sample(goals, draft.random.randint(1, 2)))


COUNTS = {
    start: 9, rate: 8, break_point: 7, reserve_size: 9, reserve_time: 9, flow_rate: 7, flow_time: 7, phase_time: 8, besides: 8, clock: 5,
    more_hurts: 7, window: 8, conditions: 20,
}


def is_clear(keys, thresholds, met):
    """Whether no threshold stands so near to another, or to an edge, that a coarser look would take them for one."""
    _, low, high = asked(keys)
    ends = [float(end) for one in met for end in one.split("..") if not end.startswith("[")]
    places = sorted(set(thresholds) | set(ends))
    gaps = [b - a for a, b in zip([low, *places], [*places, high])]
    return all(gap == 0 or gap > (high - low) / STEPS * 2 or gap < 1e-9 * high for gap in gaps)


def found(source, make):
    """A link of a kind whose outcome changes; that changes back, where it is useful in a window only."""
    least = 2 if make is window else 1
    while True:
        draft = Draft(source)
        if draft.lasting() >= HORIZON / 2:
            continue
        try:
            make(draft)
            glance = at_a_glance(draft.keys)
            if make is not conditions and sum(a != b for a, b in zip(glance, glance[1:])) < least:
                continue
            if make is more_hurts and glance[-1] != asked(draft.keys)[0][0]:
                # More must bring the side down.
                continue
            outcomes, thresholds, met = search(draft.keys)
        except (ValueError, OverflowError, ZeroDivisionError):
            continue
        changes = len(thresholds) if make is not conditions else len(met)
        if changes >= least and is_clear(draft.keys, thresholds, met):
            return draft.link(), outcomes, thresholds, met


# Both lines reached together, for every pairing, by the state equation.


def shot_factor(law, p):
    return {"aimed": 1, "area": 1, "logarithmic": 0, "search": 1, "power": p}[law]


def cost(keys, k, start, breaks, rate, half_of_enemy):
    """What it costs to bring a side down to its line: its rate times the integral of S/T, numerically."""
    law, other = keys[f"{k}.fire"], keys[f"{ENEMY[k]}.fire"]
    power = mpf(shot_factor(law, float(keys.get(f"{k}.p", 1))))
    q = mpf(float(keys.get(f"{ENEMY[k]}.q", 0)))

    def integrand(n):
        factor = {"aimed": mpf(1), "area": n, "logarithmic": n, "search": n / (n + half_of_enemy), "power": n**q}[other]
        return n**power / factor

    return rate * quad(integrand, [start * (1 - breaks), start])


def parities():
    mp.dps = 40
    fires = {
        "aimed": {"rate": "0.04"}, "area": {"rate": "0.0002"}, "logarithmic": {"rate": "0.05"},
        "search": {"rate": "0.07", "half": "90"}, "power": {"rate": "0.05", "p": "0.8", "q": "0.3"},
    }
    for x in fires:
        for y in fires:
            base = {"x.start": "600", "x.fire": x, "y.start": "410", "y.fire": y, "x.break": "0.31", "y.break": "0.42"}
            for k, law in (("x", x), ("y", y)):
                for name, value in fires[law].items():
                    base[f"{k}.{name}"] = value
            for name in ("start", "rate", "break", "half"):
                if f"x.{name}" in base:
                    yield from parity(base, f"x.{name}")


def parity(base, key):
    value = lambda name, changed: changed if name == key else mpf(float(base.get(name, 0)))

    def ahead(changed):
        own = cost(base, "x", value("x.start", changed), value("x.break", changed), value("x.rate", changed), value("y.half", changed))
        enemy = cost(base, "y", value("y.start", changed), value("y.break", changed), value("y.rate", changed), value("x.half", changed))
        return own - enemy

    low, high = (mpf("0.001"), mpf("0.999")) if key == "x.break" else (mpf(float(base[key])) / 50, mpf(float(base[key])) * 50)
    if ahead(low) * ahead(high) > 0:
        return
    threshold = findroot(ahead, (low, high), solver="anderson", tol=mpf(10) ** -60, maxsteps=300, verify=False)
    assert abs(ahead(threshold)) < mpf(10) ** -30 * cost(base, "y", mpf(410), mpf("0.42"), mpf(1), mpf(90))
    below = "x" if ahead(low) < 0 else "y"
    keys = dict(base)
    keys[key] = f"?{plain(low)}..{plain(high)}"
    link = "&".join(f"{name}={written}" for name, written in keys.items())
    yield "parity", link, [below, ENEMY[below]], [mp.nstr(threshold, 25)], []


def main():
    source = random.Random(20_250_607)
    rows = list(parities())
    print(len(rows), "parities", flush=True)
    path = Path(__file__).with_name("questions.tsv")
    for make, count in COUNTS.items():
        for _ in range(count):
            link, outcomes, thresholds, met = found(source, make)
            rows.append((make.__name__.replace("_", " "), link, outcomes, [plain(value) for value in thresholds], met))
        print(make.__name__, flush=True)
        write(path, rows)
    print(len(rows), "rows")


def write(path, rows):
    lines = ["# Written by questions.py.", "kind\tlink\toutcomes\tthresholds\tmet"]
    lines += ["\t".join([kind, link, "|".join(outcomes), "|".join(thresholds), "|".join(met)]) for kind, link, outcomes, thresholds, met in rows]
    path.write_text("\n".join(lines) + "\n", encoding="utf-8")


if __name__ == "__main__":
    main()
