"""Writes balances.tsv: a side that only its flow keeps alive, lost thousands of times faster than its enemy changes.

Run by hand: `python3 tests/reference/balances.py` (needs mpmath and NumPy, and a machine whose long double has 64 bits; a
minute). The tests only read the table that it leaves. By collocation at Radau's points (E. Hairer and G. Wanner, Solving
Ordinary Differential Equations II, 2nd ed. 1996, IV.5: IIA) with eight stages, in the logarithms of the strengths, over steps
that grow with the time: implicit, where the core's own way is a series along the balance. Each row is worked out twice, the
second time with steps half as long, and must come to the same but for a part of 1e-15.
"""

from pathlib import Path

import numpy as np
from mpmath import legendre, matrix, mp, mpf, nstr, polyroots, taylor

mp.dps = 40
STAGES = 8
Real = np.longdouble
ROWS = [
    ("x.start=1000&x.fire=area&x.rate=500&x.wastage=0.01&y.start=100&y.fire=logarithmic&y.rate=0.02&y.flow=50@0/", 100),
    ("x.start=400&x.fire=search&x.half=80&x.rate=1e6&x.wastage=1e-3&y.start=2&y.fire=area&y.rate=1e-3&y.flow=50@0/", 500),
    ("x.start=600&x.fire=power&x.p=0.4&x.q=1.5&x.rate=9000&x.support.area=60&y.start=400&y.fire=aimed&y.rate=2.3&y.flow=6@0/", 3000),
    ("x.start=600&x.fire=area&x.rate=200&y.start=30&y.fire=power&y.p=1&y.q=0.5&y.rate=4&y.flow=40@0/", 2000),
    ("x.start=900&x.fire=search&x.half=5&x.rate=2000&x.wastage=0.02&y.start=50&y.fire=search&y.half=20&y.rate=10&y.flow=30@0/", 120),
    ("x.start=500&x.fire=logarithmic&x.rate=4000&y.start=500&y.fire=area&y.rate=0.5&y.flow=900@0/", 20),
    ("x.start=300&x.fire=power&x.p=0.8&x.q=2&x.rate=1e5&y.start=10&y.fire=power&y.p=0.5&y.q=0.5&y.rate=0.6&y.flow=200@0/", 20),
    ("x.start=700&x.fire=area&x.rate=30&x.flow=5@0/&y.start=100&y.fire=area&y.rate=0.4&y.flow=60@0/", 200),
    ("x.start=100&x.fire=power&x.p=1&x.q=0.7&x.rate=3000&y.start=1e-6&y.fire=aimed&y.rate=20&y.wastage=3&y.flow=12@0/", 20),
    ("x.start=2000&x.fire=area&x.rate=1e4&x.wastage=1e-4&y.start=1&y.fire=area&y.rate=50&y.flow=5@0/", 5000),
    ("x.start=50&x.fire=search&x.half=0.5&x.rate=1e5&y.start=3&y.fire=power&y.p=0.3&y.q=1.2&y.rate=0.01&y.support.aimed=0.01&y.flow=70@0/", 60),
    ("x.start=800&x.fire=power&x.p=1.5&x.q=3&x.rate=1e4&y.start=5&y.fire=logarithmic&y.rate=0.01&y.support.area=0.002&y.flow=3@0/", 300),
]


def collocation():
    """Radau's points, and the integrals from 0 to each of the polynomials that are 1 at one of them."""
    # (P_s(2t − 1) − P_(s−1)(2t − 1))/(t − 1) has the other points as its roots.
    terms = taylor(lambda t: legendre(STAGES, 2 * t - 1) - legendre(STAGES - 1, 2 * t - 1), 0, STAGES)
    roots = polyroots([mpf(term) for term in reversed(terms)], maxsteps=500, extraprec=400)
    points = sorted(mp.re(root) for root in roots)
    points[-1] = mpf(1)
    vandermonde = matrix(STAGES, STAGES)
    for row in range(STAGES):
        for column in range(STAGES):
            vandermonde[row, column] = points[row] ** column
    into_powers = vandermonde**-1
    sums = matrix(STAGES, STAGES)
    for row in range(STAGES):
        for column in range(STAGES):
            sums[row, column] = sum(
                into_powers[power, column] * points[row] ** (power + 1) / (power + 1) for power in range(STAGES)
            )
    real = lambda value: Real(nstr(value, 30))
    return [real(point) for point in points], [[real(sums[row, column]) for column in range(STAGES)] for row in range(STAGES)]


POINTS, SUMS = collocation()


def solved(system, rest):
    """The solution of linear equations: NumPy's own has only doubles."""
    system = np.column_stack([system, rest])
    size = len(rest)
    for column in range(size):
        pivot = column + int(np.argmax(abs(system[column:, column])))
        system[[column, pivot]] = system[[pivot, column]]
        system[column] /= system[column, column]
        for row in range(size):
            if row != column:
                system[row] -= system[row, column] * system[column]
    return system[:, size]


class Engagement:
    """What a link says, as far as these rows go."""

    def __init__(self, link):
        keys = dict(pair.split("=") for pair in link.split("&"))
        self.number = lambda key: Real(keys.get(key, "0").split("@")[0])
        self.law = {side: keys[f"{side}.fire"] for side in "xy"}

    def fire(self, side, shooters, targets):
        """What the fire of a side takes, and its slopes over the logarithms of the shooters and of the targets."""
        rate, law = self.number(f"{side}.rate"), self.law[side]
        p, q = {"aimed": (1, 0), "area": (1, 1), "logarithmic": (0, 1), "search": (1, 0)}.get(
            law, (self.number(f"{side}.p"), self.number(f"{side}.q"))
        )
        lost = rate * shooters**p * targets**q
        if law != "search":
            return lost, p * lost, q * lost
        half = self.number(f"{side}.half")
        lost *= targets / (targets + half)
        return lost, lost, lost * half / (targets + half)

    def change(self, logs):
        """How the logarithms change, and the matrix of the slopes of that."""
        x, y = np.exp(logs[0]), np.exp(logs[1])
        changes, slopes = [], []
        for side, enemy, own, other in (("x", "y", x, y), ("y", "x", y, x)):
            fire, by_shooters, by_targets = self.fire(enemy, other, own)
            steady = self.number(f"{side}.flow") - self.number(f"{enemy}.support.aimed")
            part = self.number(f"{side}.wastage") + self.number(f"{enemy}.support.area")
            changes.append((steady - fire) / own - part)
            by_own, by_other = (fire - by_targets - steady) / own, -by_shooters / own
            slopes.append((by_own, by_other) if side == "x" else (by_other, by_own))
        return changes, slopes


def step(engagement, logs, length):
    """The logarithms after a step."""
    stages, before = [list(logs) for _ in range(STAGES)], np.inf
    while True:
        values = [engagement.change(stage) for stage in stages]
        size = 2 * STAGES
        system, rest = np.zeros((size, size), Real), np.zeros(size, Real)
        for row in range(STAGES):
            for side in range(2):
                place = 2 * row + side
                rest[place] = logs[side] - stages[row][side]
                for column in range(STAGES):
                    weight = SUMS[row][column] * length
                    rest[place] += weight * values[column][0][side]
                    for of in range(2):
                        system[place, 2 * column + of] -= weight * values[column][1][side][of]
                system[place, place] += 1
        moved = solved(system, rest)
        for place in range(size):
            stages[place // 2][place % 2] += moved[place]
        largest = max(abs(moved))
        assert np.isfinite(largest), "a step that is too long"
        # The steps double their digits, down to where the rounding leaves them.
        if largest < 1e-14 and largest >= before / 2 or largest == 0:
            return stages[-1]
        before = largest


def strengths(link, until, finer):
    """The strengths at the end, over steps that grow from a hundredth of the shortest time."""
    engagement = Engagement(link)
    logs = [np.log(engagement.number("x.start")), np.log(engagement.number("y.start"))]
    fastest = max(abs(change) for change in engagement.change(logs)[0])
    at, length, growth = Real(0), 1 / fastest / 100 / finer, Real(3) ** (Real(1) / (2 * finer))
    while at < until:
        length = min(length * growth, Real(until) / (40 * finer), until - at)
        logs = step(engagement, logs, length)
        at += length
    return [np.exp(value) for value in logs]


def main():
    path = Path(__file__).with_name("balances.tsv")
    with path.open("w") as table:
        table.write("# Written by balances.py.\nlink\tx_end\ty_end\n")
        for link, until in ROWS:
            once, again = strengths(link, until, 2), strengths(link, until, 4)
            apart = max(abs(one / other - 1) for one, other in zip(once, again))
            print(f"{apart:.1e} {link}")
            assert apart < 1e-15, link
            table.write(f"{link}&until={until}\t{again[0]:.17e}\t{again[1]:.17e}\n")


if __name__ == "__main__":
    main()
