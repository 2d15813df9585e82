"""Holds the core against SciPy over random plausible schedules of every pairing of laws, and prints where they disagree.

Run by hand from the project's folder: `python3 tests/reference/schedules_by_scipy.py [SEED [HOW MANY]]` (needs NumPy, SciPy,
mpmath and cargo; a minute for 2,000). SciPy's DOP853 follows strengths and what is lost by each cause at rtol 1e-12 from one
instant to the next, the moving break lines its events; a break is then closed in on by Newton's method on steps of its own.
Where fire grows from nothing, or a side does, a root of the time is the variable. What disagrees by more than 1e-9 is followed
again at the tightest tolerance that there is, and by schedule_taylor.py in decimals.
"""

import json
import random
import subprocess
import sys
from decimal import Decimal as D
from pathlib import Path

import numpy as np
from scipy.integrate import solve_ivp

from schedule_taylor import CAUSES, ENEMY, Engagement, Stretch, Unfit, gone, meet, solve
from schedules import LAWS, Draft

ROOT = Path(__file__).resolve().parent.parent.parent
HORIZON = 20_000
AGREES = 1e-9
SHAPES = ["0.5", "0.5", "1", "1", "1.5", "2", "2", "3", "0.7", "2.4", "0"]


def drawn(source, x_law, y_law):
    """A link with whatever an engagement may have."""
    draft = Draft(source)
    draft.sides(x_law, y_law)
    chance = lambda part: source.random() < part
    for k in "xy":
        if chance(0.15) and draft.keys[f"{ENEMY[k]}.fire"] in ("aimed", "none"):
            draft.put(f"{k}.break", "1")
    if chance(0.5):
        draft.besides(0.4)
    if chance(0.4):
        draft.flows(0.5)
    if chance(0.6):
        draft.joins(3)
    if chance(0.4):
        draft.phases(laws=LAWS)
    if chance(0.6):
        closing(draft)
    if chance(0.15):
        from_nothing(draft)
    if chance(0.35):
        draft.put("until", draft.between(0.5, 20))
    return draft.link()


def closing(draft):
    """From out of reach or within, to nothing or not, with the same reach and shape or others; or a range that stays."""
    far = draft.among("300", "600", "900", "1500", "2000")
    draft.put("range", far)
    draft.put("range.closing", draft.among("0", "60", "60", "100", "240", "700"))
    draft.put("range.least", draft.among("0", "100", "250"))
    both = draft.random.random() < 0.3
    reach, shape = draft.among("400", "800", "1500", "2500"), draft.among(*SHAPES)
    for k in "xy":
        if both or draft.random.random() < 0.85:
            draft.put(f"{k}.reach", reach if both else draft.among("400", "800", "1500", "2500", far))
            draft.put(f"{k}.reach.shape", shape if both else draft.among(*SHAPES))


def from_nothing(draft):
    k = draft.among("x", "y")
    start = float(draft.keys[f"{k}.start"])
    draft.keys[f"{k}.start"] = "0"
    begin = draft.among(0.0, draft.between(0, 2))
    if draft.random.random() < 0.4:
        draft.put(f"{k}.join", f"{round(start)}@{begin + 0.5:.3f}")
    else:
        draft.put(f"{k}.flow", f"{start / 3:.4f}@{begin:.3f}/{draft.among('', f'{begin + 3:.3f}')}")


def loses(fire):
    """What a fire takes per unit of time, of shooters and targets."""
    rate = float(fire.rate)
    if rate == 0 or fire.law == "none":
        return lambda s, t: 0.0
    half, p, q = (None if v is None else float(v) for v in (fire.half, fire.p, fire.q))
    return {
        "aimed": lambda s, t: rate * s,
        "area": lambda s, t: rate * s * t,
        "logarithmic": lambda s, t: rate * t,
        "search": lambda s, t: rate * s * t / (t + half) if t + half > 0 else 0.0,
        "power": lambda s, t: rate * max(s, 0.0) ** p * max(t, 0.0) ** q,
    }[fire.law]


class Way:
    """A stretch as a system of x, y, their losses by fire, and their strengths summed over time."""

    def __init__(self, engagement, stretch):
        sides, f = engagement.sides, float
        self.length = f(stretch.until - stretch.now)
        growths = [tuple(map(f, stretch.growths[k])) for k in "xy"]
        self.growths = growths
        self.fires = [loses(stretch.fires[k]) for k in "xy"]
        self.flow, self.part, self.steady = ([f(table[k]) for k in "xy"] for table in (stretch.flow, stretch.part, stretch.steady))
        left = [f(sides[k].left) for k in "xy"]
        rises = any(value == 0 and slope > 0 for value, slope, _ in growths) or 0.0 in left
        whole = all(2 * shape == round(2 * shape) for value, slope, shape in growths if value == 0 and slope > 0)
        powers = any(fire.law == "power" for fire in stretch.fires.values()) and 0.0 in left
        # The time is a power of the variable.
        self.power = (2 if whole and not powers else 6) if rises else 1
        self.margins = [f(sides[k].margin()) for k in "xy"]
        self.rising = [f(sides[k].breaks_at) * self.flow[i] for i, k in enumerate("xy")]
        self.start = np.array(left + [0.0] * 4)
        self.scale = np.array([max(left[0], 1.0), max(left[1], 1.0)] * 3)

    def factor(self, k, t):
        value, slope, shape = self.growths[k]
        grown = max(value + slope * t, 0.0)
        if slope == 0:
            return value
        return 1.0 if shape == 0 else grown**shape

    def slopes(self, s, now):
        t, pace = s**self.power, self.power * s ** (self.power - 1)
        x, y = now[0], now[1]
        on_y = self.fires[0](x, y) * self.factor(0, t)
        on_x = self.fires[1](y, x) * self.factor(1, t)
        dx = self.flow[0] - on_x - self.part[0] * x - self.steady[0]
        dy = self.flow[1] - on_y - self.part[1] * y - self.steady[1]
        return np.array([dx, dy, on_x, on_y, x, y]) * pace

    def lost(self, k, s, now):
        return now[2 + k] + self.part[k] * now[4 + k] + self.steady[k] * s**self.power

    def margin(self, k, s, now):
        """How much more side k may lose; of one that comes only now, what there is."""
        return self.margins[k] + self.rising[k] * s**self.power - self.lost(k, s, now)

    def loses_at_once(self, k):
        """Whether side k, of which nobody is there yet, loses more than its line rises by as soon as somebody is."""
        return self.nearing(k, 1e-9, self.start + np.array([self.flow[0], self.flow[1], 0, 0, 0, 0]) * 1e-12) >= 0

    def nearing(self, k, s, now):
        slopes = self.slopes(s, now)
        pace = self.power * s ** (self.power - 1)
        return slopes[2 + k] + self.part[k] * slopes[4 + k] + (self.steady[k] - self.rising[k]) * pace

    def go(self, begin, start, end, rtol, events=None, parts=1):
        return solve_ivp(
            self.slopes, (begin, end), start, method="DOP853", rtol=rtol, atol=rtol * 1e-2 * self.scale, events=events,
            max_step=(end - begin) / parts if end > begin else np.inf,
        )

    def follow(self, breaking, rtol, parts):
        """The variable at the end or at the first break, who breaks, and the numbers then."""
        end = self.length ** (1 / self.power)
        events = []
        for k in breaking:
            event = lambda s, now, k=k: self.margin(k, s, now)
            event.terminal, event.direction = True, -1
            events.append(event)
        went = self.go(0.0, self.start, end, rtol, events, parts)
        assert went.status >= 0, went.message
        if went.status == 0:
            return end, [], went.y[:, -1]
        k = next(k for k, times in zip(breaking, went.t_events) if len(times))
        at, begin, start = went.t[-1], went.t[-2], went.y[:, -2]
        for _ in range(4):
            now = self.go(begin, start, at, rtol).y[:, -1]
            at += self.margin(k, at, now) / self.nearing(k, at, now)
            at = min(max(at, begin), end)
        now = self.go(begin, start, at, rtol).y[:, -1]
        return at, [k], now


def by_scipy(link, rtol=1e-12, parts=8):
    """What SciPy makes of a link: who breaks, how it ends, when, and the numbers; `Unfit` where its end is not looked for."""
    engagement = Engagement(link)
    sides, clock = engagement.sides, engagement.clock
    instants = engagement.instants()
    for place, now in enumerate(instants):
        if clock is not None and now > clock:
            break
        meet(engagement, now)
        broken = [k for k, side in sides.items() if side.has_broken()]
        if broken:
            return told(sides, broken[0] if len(broken) == 1 else "both", "break", now)
        if now == clock:
            return told(sides, "neither", "clock", now)
        if gone(engagement, instants, place):
            return told(sides, "neither", "withdrawn", now)
        following = instants[place + 1] if place + 1 < len(instants) else None
        until = min(t for t in (following, clock, max(D(HORIZON), now + 1)) if t is not None)
        way = Way(engagement, Stretch(engagement, now, until))
        for side in sides.values():
            if (1 - side.breaks_at) * side.committed - side.withdrawn < 0:
                raise Unfit("a line below 0")
        breaking = [i for i, k in enumerate("xy") if sides[k].committed > 0 or way.flow[i] > 0]
        if any(way.margins[i] == 0 and way.loses_at_once(i) for i in breaking):
            raise Unfit("a side that breaks as it appears")
        s, broken, end = way.follow(breaking, rtol, parts)
        t = D(float(s)) ** way.power
        for i, k in enumerate("xy"):
            side, summed = sides[k], D(float(end[4 + i]))
            support = D(way.part[i]) - side.wastage
            side.losses["fire"] += D(float(end[2 + i]))
            side.losses["wastage"] += side.wastage * summed
            side.losses["support"] += support * summed + D(way.steady[i]) * t
            side.committed += D(way.flow[i]) * t
            side.left = D(float(end[i]))
        if broken:
            return told(sides, "xy"[broken[0]], "break", now + t)
    if clock is None:
        return told(sides, "neither", "endless", D(HORIZON))
    return told(sides, "neither", "clock", clock)


def told(sides, breaks, ended, time):
    numbers = {"time": float(time)} if ended == "break" else {}
    for k, side in sides.items():
        numbers[f"{k}.end"] = float(side.left)
        numbers |= {f"{k}.{cause}": float(lost) for cause, lost in side.losses.items()}
    scale = {k: float(side.committed) for k, side in sides.items()}
    return breaks, ended, numbers, scale


def ours(links):
    command = ["cargo", "run", "-q", "--release", "-p", "aftercount-core", "--example", "outcome"]
    out = subprocess.run(command, input="\n".join(links) + "\n", capture_output=True, text=True, check=True, cwd=ROOT).stdout
    return [json.loads(line) for line in out.splitlines()]


def numbers_of(answer):
    numbers = {"time": answer["time"]} if answer["ended"] == "break" else {}
    for k in "xy":
        numbers[f"{k}.end"] = answer[k]["end"]
        numbers |= {f"{k}.{cause}": answer[k]["losses"][cause] for cause in CAUSES}
    return numbers


def apart(answer, known):
    """The largest part by which the numbers differ, and of which; infinite where the outcome is another.

    A number of less than a thousandth of what its side has committed is measured by that.
    """
    breaks, ended, numbers, scale = known
    endless = ended == "endless" and answer["ended"] in ("limit", "equilibrium", "growth")
    if ended == "endless" and (answer["time"] or 0) > HORIZON:
        return 0.0, "later than is looked"
    if ended == "break" and answer["ended"] == "limit" and numbers[f"{breaks}.end"] < 1e-9 * scale[breaks]:
        return 0.0, "what fades for ever is rounded to nobody by SciPy"
    if answer["breaks"] != breaks or not (answer["ended"] == ended or endless):
        return float("inf"), f"{answer['breaks']} {answer['ended']}, not {breaks} {ended}"
    if endless:
        return 0.0, "endless"
    own = numbers_of(answer)
    least = lambda name: 1e-3 * scale.get(name[0], 0.0) + 1e-300
    return max((abs(own[name] - value) / max(abs(value), least(name)), name) for name, value in numbers.items())


def in_decimals(link):
    result = solve(link)
    return told(result.sides, result.breaks, result.ended, result.time)


def main():
    seed, many = map(int, (sys.argv[1:] + ["1", "2000"][len(sys.argv) - 1 :])[:2])
    source = random.Random(seed)
    laws = LAWS + ["none"]
    pairings = [(x, y) for x in laws for y in laws]
    links = [drawn(source, *pairings[n % len(pairings)]) for n in range(many)]
    found, unfit = [], 0
    for link, answer in zip(links, ours(links)):
        if not answer["ok"]:
            print("REFUSED", answer["problems"][0]["problem"], link)
            continue
        try:
            known = by_scipy(link)
        except Unfit:
            unfit += 1
            continue
        off, name = apart(answer, known)
        if off > AGREES:
            again = apart(answer, by_scipy(link, 2.3e-14, 100))
            try:
                decimals = "{:.1e} {}".format(*apart(answer, in_decimals(link)))
            except (Unfit, ArithmeticError) as why:
                decimals = str(why)
            print(f"{off:.1e} {name}; tighter {again[0]:.1e} {again[1]}; in decimals {decimals}: {link}", flush=True)
            off = again[0]
        found.append(off)
    for bound in (1e-12, 1e-11, 1e-10, 1e-9):
        print(f"{sum(off <= bound for off in found)} of {len(found)} agree to {bound:g}")
    print(f"worst {max(found):.1e}; {unfit} not looked at")


if __name__ == "__main__":
    main()
