"""Prints how many times faster a schedule is answered than SciPy follows it, both in this one run.

Run by hand: `cargo build --release -p aftercount-core --example outcome`, then `python3 tests/speed/schedules.py [PROGRAM]`
with the program where cargo left it (needs NumPy and SciPy). SciPy's DOP853 is given the right-hand side of the schedule alone, a
stretch at a time, its break lines as terminal events, at rtol 1e-12, and is timed without reading any text; the program is
timed from text to JSON over many lines on one core, its start included.
"""

import json
import os
import subprocess
import sys
import time
from pathlib import Path

from scipy.integrate import solve_ivp

TESTS = Path(__file__).resolve().parent.parent
sys.path.insert(0, str(TESTS / "reference"))
from schedule_taylor import ENEMY, Engagement, Stretch  # noqa: E402

JOINS = "&x.join=30@1,20@2,-10@3,25@4,30@5&y.join=20@1.5,25@2.5,-10@3.5,25@4.5,20@5.5"
SCHEDULES = {
    "ten events, linear": (100, "x.start=600&x.rate=0.03&x.break=0.5&x.wastage=0.002&y.start=500&y.rate=0.04&y.break=0.5"
                           "&y.support.area=0.003" + JOINS),
    "ten events, integrated": (20, "x.start=600&x.fire=search&x.half=80&x.rate=0.03&x.break=0.5&x.wastage=0.002&y.start=500"
                               "&y.fire=power&y.p=0.8&y.q=0.4&y.rate=0.012&y.break=0.5&y.support.area=0.003" + JOINS),
    "one event, integrated": (20, "x.start=600&x.fire=search&x.half=80&x.rate=0.03&x.break=0.5&x.wastage=0.002&y.start=500"
                              "&y.fire=power&y.p=0.8&y.q=0.4&y.rate=0.012&y.break=0.5&x.join=30@3"),
}
LINES = 20_000
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


def timed(program, link, lines):
    text = (link + "\n") * lines
    one_core = {"preexec_fn": lambda: os.sched_setaffinity(0, {max(os.sched_getaffinity(0))})}
    began = time.perf_counter()
    out = subprocess.run([program], input=text, capture_output=True, text=True, check=True, **one_core).stdout
    return (time.perf_counter() - began) / lines, json.loads(out.splitlines()[0])


def main():
    target = Path(os.environ.get("CARGO_TARGET_DIR", TESTS.parent / "target"))
    program = sys.argv[1] if len(sys.argv) > 1 else target / "release" / "examples" / "outcome"
    for name, (wanted, link) in SCHEDULES.items():
        stretches, breaks = prepared(link)
        best = float("inf")
        for _ in range(ROUNDS):
            began = time.perf_counter()
            when, left = by_scipy(stretches, breaks)
            best = min(best, time.perf_counter() - began)
        own, answer = min((timed(program, link, LINES) for _ in range(3)), key=lambda run: run[0])
        assert abs(answer["time"] - when) <= 1e-6 * when, (answer["time"], when)
        assert abs(answer["x"]["end"] - left[0]) <= 1e-5 * left[0], (answer["x"]["end"], left)
        ratio = best / own
        print(f"{name}: SciPy {best * 1e3:.2f} ms, ours {own * 1e6:.1f} µs ({answer['method']}, {len(answer['pieces'])} pieces): "
              f"{ratio:.0f} times as fast, {wanted} wanted: {'yes' if ratio >= wanted else 'NO'}")


if __name__ == "__main__":
    main()
