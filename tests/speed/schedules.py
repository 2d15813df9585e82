"""Prints how many times faster a schedule is answered than SciPy follows it, both in this one run.

Run by hand from the project's folder: `python3 tests/speed/schedules.py` (needs NumPy, SciPy and cargo). SciPy's DOP853 is
given the right-hand side of the schedule alone, a stretch at a time, its break lines as terminal events, at rtol 1e-12, and is
timed without reading any text; the core from the text of the link to the JSON of its answer. Each is the least of as many
rounds of some milliseconds within one process, so that what else the machine has to do counts for neither. Their ends must
agree to 1e-9.
"""

import json
import subprocess
import sys
import time
from pathlib import Path

from scipy.integrate import solve_ivp

TESTS = Path(__file__).resolve().parent.parent
sys.path.insert(0, str(TESTS / "reference"))
from schedule_taylor import Engagement, Stretch  # noqa: E402

JOINS = "&x.join=30@1,20@2,-10@3,25@4,30@5&y.join=20@1.5,25@2.5,-10@3.5,25@4.5,20@5.5"
SCHEDULES = {
    "ten events, linear": (100, "x.start=600&x.rate=0.03&x.break=0.5&x.wastage=0.002&y.start=500&y.rate=0.04&y.break=0.5"
                           "&y.support.area=0.003" + JOINS),
    "ten events, integrated": (20, "x.start=600&x.fire=search&x.half=80&x.rate=0.03&x.break=0.5&x.wastage=0.002&y.start=500"
                               "&y.fire=power&y.p=0.8&y.q=0.4&y.rate=0.012&y.break=0.5&y.support.area=0.003" + JOINS),
    "one event, integrated": (20, "x.start=600&x.fire=search&x.half=80&x.rate=0.03&x.break=0.5&x.wastage=0.002&y.start=500"
                              "&y.fire=power&y.p=0.8&y.q=0.4&y.rate=0.012&y.break=0.5&x.join=30@3"),
}
ROUNDS = 20


def fire(law, shooters, targets):
    rate, half, p, q = law.rate, law.half, law.p, law.q
    if law.law == "aimed":
        return rate * shooters
    if law.law == "search":
        return rate * shooters * targets / (targets + half)
    return rate * shooters**p * targets**q


class Plain:
    """The laws of a stretch in plain numbers."""

    def __init__(self, law):
        self.law = law.law
        self.rate, self.half, self.p, self.q = (None if v is None else float(v) for v in (law.rate, law.half, law.p, law.q))


def by_scipy(stretches, breaks):
    """Follows prepared stretches: arrivals, laws, parts lost, length."""
    left, committed, withdrawn = [0.0, 0.0], [0.0, 0.0], [0.0, 0.0]
    for begin, end, joins, leaves, laws, part in stretches:
        for k in (0, 1):
            left[k] += joins[k] - leaves[k]
            committed[k] += joins[k]
            withdrawn[k] += leaves[k]
        lines = [(1 - breaks[k]) * committed[k] - withdrawn[k] for k in (0, 1)]

        def slopes(_, now, laws=laws, part=part):
            x, y = now
            return [-fire(laws[1], y, x) - part[0] * x, -fire(laws[0], x, y) - part[1] * y]

        def event(k):
            def distance(_, now):
                return now[k] - lines[k]

            distance.terminal = True
            return distance

        solved = solve_ivp(slopes, (begin, end), left, method="DOP853", rtol=1e-12, atol=1e-12, events=[event(0), event(1)])
        left = [float(solved.y[0][-1]), float(solved.y[1][-1])]
        if solved.status == 1:
            return float(solved.t[-1]), left
    return None, left


def prepared(link):
    engagement = Engagement(link)
    times = engagement.instants()
    stretches = []
    for place, now in enumerate(times):
        until = times[place + 1] if place + 1 < len(times) else now + 1000
        stretch = Stretch(engagement, now, until)
        sides = [engagement.sides[k] for k in "xy"]
        joins = [sum(float(size) for size, at in side.joins if at == now and size > 0) for side in sides]
        leaves = [sum(float(-size) for size, at in side.joins if at == now and size < 0) for side in sides]
        if place == 0:
            joins = [join + float(side.start) for join, side in zip(joins, sides)]
        laws = [Plain(side.fire) for side in sides]
        part = [float(stretch.part[k]) for k in "xy"]
        stretches.append((float(now), float(until), joins, leaves, laws, part))
    return stretches, [float(engagement.sides[k].breaks_at) for k in "xy"]


def ours():
    """For each schedule the seconds from text to JSON, and the answer."""
    command = ["cargo", "run", "-q", "--release", "-p", "aftercount-tests", "--example", "speed", "--", "times"]
    lines = "".join(f"{name}\t{link}\n" for name, (_, link) in SCHEDULES.items())
    out = subprocess.run(command, input=lines, capture_output=True, text=True, check=True, cwd=TESTS.parent).stdout
    found = map(json.loads, out.splitlines())
    return {one["name"]: (one["whole"] / 1e9, one["outcome"]) for one in found}


def main():
    answers = ours()
    for name, (wanted, link) in SCHEDULES.items():
        stretches, breaks = prepared(link)
        best = float("inf")
        for _ in range(ROUNDS):
            began = time.perf_counter()
            when, left = by_scipy(stretches, breaks)
            best = min(best, time.perf_counter() - began)
        own, answer = answers[name]
        assert abs(answer["time"] - when) <= 1e-9 * when, (answer["time"], when)
        assert abs(answer["x"]["end"] - left[0]) <= 1e-9 * left[0], (answer["x"]["end"], left)
        ratio = best / own
        print(f"{name}: SciPy {best * 1e3:.2f} ms, ours {own * 1e6:.1f} µs ({answer['method']}, {len(answer['pieces'])} pieces): "
              f"{ratio:.0f} times as fast, {wanted} wanted: {'yes' if ratio >= wanted else 'NO'}")


if __name__ == "__main__":
    main()
