"""A schedule solved step by step with Taylor series in decimal arithmetic: the truth behind schedules.tsv.

Every number of a link is the double that it parses to, taken as exact. A stretch between two instants is followed by the
Taylor series of its differential equations, whatever its laws: nothing here is a closed form, nothing is shared with the
core. Where a rate begins to grow at the beginning of a stretch as a power of time, the square root of time is the
variable, in which half powers are whole ones.
"""

from dataclasses import dataclass, field
from decimal import Decimal as D, getcontext
from operator import mul

CAUSES = ("fire", "support", "wastage")
ENEMY = {"x": "y", "y": "x"}
# The rounding of the inputs: what is nearer than this to the same moment, or to a line, is at it.
TIE = 4 * D(2) ** -53
# A break whose line is met at a slower pace than this, as a part of the line over the time, has an ill-conditioned time.
STEEP = D("0.02")


class Unfit(Exception):
    """The engagement does not make a row: its end is ill-conditioned, or not one that this solver looks for."""


@dataclass
class Effort:
    """The order of the series, the part of a strength that a step may miss, and the digits of the arithmetic."""

    order: int = 40
    tolerance: D = D("1e-33")
    digits: int = 46


def read(link):
    """The keys of a link, and its numbers as exact decimals."""
    return dict(pair.split("=", 1) for pair in link.split("&"))


def number(keys, name, default=None):
    text = keys.get(name, default)
    return None if text is None else D(float(text))


def items(keys, name):
    return [item for item in keys.get(name, "").split(",") if item]


@dataclass
class Fire:
    law: str
    rate: D
    half: D = None
    p: D = None
    q: D = None


@dataclass
class Side:
    """What a link says of a side, and what has become of it."""

    start: D
    lost: D
    breaks_at: D
    fire: Fire
    wastage: D
    area: D
    aimed: D
    joins: list
    flows: list
    reach: D
    shape: D
    left: D = D(0)
    committed: D = D(0)
    joined: D = D(0)
    withdrawn: D = D(0)
    losses: dict = field(default_factory=lambda: dict.fromkeys(CAUSES, D(0)))

    def all_losses(self):
        return sum(self.losses.values())

    def margin(self):
        """How much more it may lose before it breaks."""
        return self.breaks_at * self.committed - self.lost - self.all_losses()

    def has_broken(self):
        lost = self.lost + self.all_losses()
        return self.committed > 0 and lost > 0 and self.margin() <= self.committed * TIE


def side_of(keys, letter):
    def key(name, default=None):
        return number(keys, f"{letter}.{name}", default)

    joins = [tuple(D(float(part)) for part in item.split("@")) for item in items(keys, f"{letter}.join")]
    flows = []
    for item in items(keys, f"{letter}.flow"):
        rate, when = item.split("@")
        begin, end = when.split("/")
        flows.append((D(float(rate)), D(float(begin)), D(float(end)) if end else None))
    law = keys.get(f"{letter}.fire", "aimed")
    rate = D(0) if law == "none" else key("rate")
    start = key("start")
    side = Side(
        start, key("lost", "0"), key("break", "1"), Fire(law, rate, key("half"), key("p"), key("q")), key("wastage", "0"),
        key("support.area", "0"), key("support.aimed", "0"), joins, flows, key("reach"), key("reach.shape", "1"),
    )
    side.left = start
    side.committed = start + side.lost
    return side


class Engagement:
    """A link, and its two sides."""

    def __init__(self, link):
        self.keys = keys = read(link)
        self.sides = {letter: side_of(keys, letter) for letter in "xy"}
        self.clock = number(keys, "until")
        self.range = number(keys, "range")
        self.closing = number(keys, "range.closing", "0")
        self.least = number(keys, "range.least", "0")
        numbers = [n for n in range(1, 10) if f"phase{n}.from" in keys]
        self.phases = sorted((number(keys, f"phase{n}.from"), n) for n in numbers)

    def instants(self):
        times = {D(0)} | {time for time, _ in self.phases}
        for side in self.sides.values():
            times |= {time for _, time in side.joins}
            times |= {time for _, begin, end in side.flows for time in (begin, end) if time is not None}
            if side.reach is not None and self.closing > 0:
                times.add((self.range - side.reach) / self.closing)
        if self.range is not None and self.closing > 0:
            times.add((self.range - self.least) / self.closing)
        return sorted(time for time in times if time >= 0)

    def begin_phases(self, now):
        for time, n in self.phases:
            if time != now:
                continue
            for letter, side in self.sides.items():
                stem = f"phase{n}.{letter}."
                side.fire.law = self.keys.get(stem + "fire", side.fire.law)
                for name in ("rate", "half", "p", "q"):
                    if stem + name in self.keys:
                        setattr(side.fire, name, number(self.keys, stem + name))
                for key, name in (("wastage", "wastage"), ("support.area", "area"), ("support.aimed", "aimed")):
                    if stem + key in self.keys:
                        setattr(side, name, number(self.keys, stem + key))

    def growth(self, side, now, until):
        """What multiplies the rate of a side: (value + slope·t) to a power, with t from `now` on; slope 0 where it is steady."""
        if side.reach is None or self.range is None:
            return D(1), D(0), D(0)
        # In the middle of the stretch it is plain on which side of each instant one is.
        middle = (now + until) / 2
        open_range = self.range - self.closing * middle
        if self.closing == 0 or open_range <= self.least:
            end = self.range if self.closing == 0 else min(self.least, self.range)
            value = max(D(0), 1 - end / side.reach)
            return (value ** side.shape if value > 0 else D(0)), D(0), D(0)
        if open_range >= side.reach:
            return D(0), D(0), D(0)
        value = 1 - (self.range - self.closing * now) / side.reach
        begins = abs(value) < D("1e-30")
        return (D(0) if begins else value), self.closing / side.reach, side.shape


def product(a, b, k):
    """The coefficient k of the product of two series."""
    return sum(map(mul, a[: k + 1], b[k::-1]))


def raise_next(base, powers, exponent, k):
    """Appends the coefficient k of a series to a power."""
    if k == 0:
        powers.append(base[0] ** exponent)
    else:
        terms = sum((exponent * j - (k - j)) * base[j] * powers[k - j] for j in range(1, k + 1))
        powers.append(terms / (k * base[0]))


class FireSeries:
    """The losses per unit of time by one side's fire, coefficient by coefficient."""

    def __init__(self, fire, shooters, targets, growth):
        self.fire, self.shooters, self.targets, self.growth = fire, shooters, targets, growth
        self.whole, self.first, self.second = [], [], []

    def coefficient(self, k):
        law, shooters, targets = self.fire.law, self.shooters, self.targets
        if law == "none" or self.fire.rate == 0:
            return D(0)
        if law == "aimed":
            self.whole.append(shooters[k])
        elif law == "logarithmic":
            self.whole.append(targets[k])
        elif law == "area":
            self.whole.append(product(shooters, targets, k))
        elif law == "search":
            # whole = shooters·targets/(targets + half)
            above = product(shooters, targets, k)
            under = targets[0] + self.fire.half
            rest = sum(targets[j] * self.whole[k - j] for j in range(1, k + 1))
            self.whole.append((above - rest) / under)
        else:
            raise_next(shooters, self.first, self.fire.p, k)
            raise_next(targets, self.second, self.fire.q, k)
            self.whole.append(product(self.first, self.second, k))
        grown = self.whole[k] if self.growth is None else product(self.whole, self.growth, k)
        return self.fire.rate * grown


def grown(growth, clock, order):
    """The series of a growing factor; `clock` is time since the beginning of the stretch, as a series."""
    value, slope, power = growth
    if slope == 0:
        return [value] + [D(0)] * order
    if power == 0:
        return [D(1)] + [D(0)] * order
    base = [value + slope * clock[0]] + [slope * c for c in clock[1:]]
    base += [D(0)] * (order + 1 - len(base))
    if base[0] == 0:
        # At the very beginning time is the square of the variable: (slope·s²) to the power is a whole power of s.
        exact = 2 * power
        if exact != exact.to_integral_value():
            raise Unfit("a shape that is no half of a whole number")
        series = [D(0)] * (order + 1)
        series[int(exact)] = slope**power
        return series
    series = []
    for k in range(order + 1):
        raise_next(base, series, power, k)
    return series


def value_at(series, s):
    total = D(0)
    for c in reversed(series):
        total = total * s + c
    return total


class Step:
    """The series of a step from a point of a stretch on, in time or in its square root."""

    def __init__(self, stretch, at, left, effort):
        self.stretch, self.at = stretch, at
        order = effort.order
        self.clock = [at * at, 2 * at, D(1)] if stretch.rooted else [at, D(1)]
        pace = [2 * at, D(2)] if stretch.rooted else [D(1)]
        growths = {k: grown(growth, self.clock, order) for k, growth in stretch.growths.items()}
        series = {k: [left[k]] for k in "xy"}
        fires = {k: FireSeries(stretch.fires[k], series[k], series[ENEMY[k]], growths[k]) for k in "xy"}
        self.by_fire = {k: [D(0)] for k in "xy"}
        self.summed = {k: [D(0)] for k in "xy"}
        rates = {k: {"own": [], "fire": [], "sum": []} for k in "xy"}
        for n in range(order):
            for k in "xy":
                lost = fires[ENEMY[k]].coefficient(n)
                steady = stretch.flow[k] - stretch.steady[k] if n == 0 else D(0)
                rates[k]["fire"].append(lost)
                rates[k]["own"].append(steady - lost - stretch.part[k] * series[k][n])
                rates[k]["sum"].append(series[k][n])
            for k in "xy":
                for into, name in ((series, "own"), (self.by_fire, "fire"), (self.summed, "sum")):
                    into[k].append(product_short(rates[k][name], pace, n) / (n + 1))
        self.left = series
        self.length = self.longest(effort)

    def longest(self, effort):
        lengths = []
        for table in (self.left, self.by_fire):
            for k in "xy":
                scale = self.stretch.scale[k]
                # In the root of time many powers are missing.
                for n in range(effort.order - 7, effort.order + 1):
                    last = abs(table[k][n])
                    if last > 0:
                        lengths.append((effort.tolerance * scale / last) ** (D(1) / n))
        length = D("0.8") * min(lengths) if lengths else None
        # Beyond a break strengths may fall below 0, and what is lost come back: no step is so long that it hides one.
        for k in "xy":
            pace = abs(self.left[k][1]) + abs(self.by_fire[k][1])
            if pace > 0 and length is not None:
                length = min(length, self.stretch.scale[k] / pace / 4)
        return length

    def time(self, s):
        return value_at(self.clock, s)

    def lost(self, k, s):
        """What side k has lost since the beginning of the step, by cause."""
        stretch, t = self.stretch, self.time(s) - self.clock[0]
        summed = value_at(self.summed[k], s)
        support = stretch.area[k] * summed + stretch.steady[k] * t
        return {"fire": value_at(self.by_fire[k], s), "support": support, "wastage": stretch.wastage[k] * summed}

    def slope(self, k, s):
        """What side k loses per unit of the variable."""
        pace = 2 * (self.at + s) if self.stretch.rooted else D(1)
        left = value_at(self.left[k], s)
        by_fire = value_at([n * c for n, c in enumerate(self.by_fire[k])][1:], s)
        return by_fire + pace * (self.stretch.part[k] * left + self.stretch.steady[k]), pace


def product_short(a, b, k):
    return sum(a[k - j] * b[j] for j in range(min(len(b), k + 1)))


class Stretch:
    """What holds between two instants."""

    def __init__(self, engagement, now, until):
        sides = engagement.sides
        self.now, self.until = now, until
        self.flow = {
            k: sum((rate for rate, begin, end in side.flows if begin <= now and (end is None or now < end)), D(0))
            for k, side in sides.items()
        }
        there = {k: side.left > 0 or self.flow[k] > 0 for k, side in sides.items()}
        both = all(there.values())
        nothing = Fire("none", D(0))
        self.fires = {k: side.fire if both else nothing for k, side in sides.items()}
        self.wastage = {k: side.wastage for k, side in sides.items()}
        self.area = {k: sides[ENEMY[k]].area for k in sides}
        self.part = {k: self.wastage[k] + self.area[k] for k in sides}
        self.steady = {k: sides[ENEMY[k]].aimed if there[k] else D(0) for k in sides}
        self.growths = {k: engagement.growth(side, now, until) for k, side in sides.items()}
        self.rooted = any(slope > 0 and value == 0 for value, slope, _ in self.growths.values())
        self.scale = {k: max(side.left, self.flow[k] * (until - now), D(1)) for k, side in sides.items()}


class Result:
    """What a fight leaves."""

    def __init__(self, engagement, breaks, ended, time, instants_met):
        self.breaks, self.ended, self.time, self.instants_met = breaks, ended, time, instants_met
        self.sides = engagement.sides

    def numbers(self):
        for k in "xy":
            side = self.sides[k]
            yield side.left
            yield from (side.losses[cause] for cause in CAUSES)
        if self.ended == "break":
            yield self.time


def solve(link, effort=None):
    """The outcome of a link; raises Unfit where it makes no row."""
    effort = effort or Effort()
    getcontext().prec = effort.digits
    engagement = Engagement(link)
    instants = engagement.instants()
    clock = engagement.clock
    for place, now in enumerate(instants):
        if clock is not None and now > clock:
            break
        meet(engagement, now)
        broken = [k for k, side in engagement.sides.items() if side.has_broken()]
        if broken:
            # What is left stands below the line, where the line has come to it.
            return Result(engagement, named(broken), "break", now, place)
        if now == clock:
            return ended(engagement, "clock", now, place)
        if gone(engagement, instants, place):
            return ended(engagement, "withdrawn", now, place)
        following = instants[place + 1] if place + 1 < len(instants) else None
        until = min(t for t in (following, clock, D(10) ** 4) if t is not None)
        arrivals = following is not None and until == following
        over = follow(engagement, Stretch(engagement, now, until), arrivals, effort)
        if over is not None:
            kind, broken, time = over
            if kind == "gone":
                engagement.sides[broken[0]].left = D(0)
                if not gone(engagement, instants, place):
                    raise Unfit("a side is away for a while")
                return ended(engagement, "withdrawn", time, place)
            return finish(engagement, broken, time, place)
    if clock is None:
        raise Unfit("endless")
    broken = [k for k, side in engagement.sides.items() if side.has_broken()]
    return finish(engagement, broken, clock, place) if broken else ended(engagement, "clock", clock, place)


def meet(engagement, now):
    """Arrivals, then phases, then withdrawals."""
    for side in engagement.sides.values():
        comes = sum((size for size, time in side.joins if time == now and size > 0), D(0))
        side.left += comes
        side.committed += comes
        side.joined += comes
    engagement.begin_phases(now)
    for side in engagement.sides.values():
        goes = min(side.left, sum((-size for size, time in side.joins if time == now and size < 0), D(0)))
        side.left -= goes
        side.withdrawn += goes


def gone(engagement, instants, place):
    now = instants[place]
    for side in engagement.sides.values():
        later = any(time > now and size > 0 for size, time in side.joins)
        flows = any(rate > 0 and (end is None or end > now) for rate, _, end in side.flows)
        if side.left == 0 and side.withdrawn > 0 and not later and not flows:
            return True
    return False


def finish(engagement, broken, time, place):
    for k in broken:
        side = engagement.sides[k]
        side.left = (1 - side.breaks_at) * side.committed - side.withdrawn
        if side.left < 0:
            side.left = D(0)
    return Result(engagement, named(broken), "break", time, place)


def named(broken):
    return "both" if len(broken) == 2 else broken[0]


def ended(engagement, how, time, place):
    return Result(engagement, "neither", how, time, place)


def follow(engagement, stretch, arrivals, effort):
    """Follows a stretch to its end, or to a break: its kind, who breaks, when."""
    sides = engagement.sides
    length = stretch.until - stretch.now
    at, end = D(0), length.sqrt() if stretch.rooted else length
    for _ in range(3000):
        step = Step(stretch, at, {k: side.left for k, side in sides.items()}, effort)
        s = end - at if step.length is None or at + step.length >= end else step.length
        over = first_break(engagement, step, s)
        if over is not None:
            kind, broken, s, own = over
            time = stretch.now + own
            if not arrivals or time < stretch.until * (1 - TIE):
                book(engagement, step, s)
                return kind, broken, time
            s = end - at
        book(engagement, step, s)
        at += s
        if at >= end:
            return None
        if min(side.left for side in sides.values()) < D("1e-6"):
            raise Unfit("next to nothing is left")
    raise Unfit("too many steps")


def book(engagement, step, s):
    t = step.time(s) - step.clock[0]
    for k, side in engagement.sides.items():
        for cause, lost in step.lost(k, s).items():
            side.losses[cause] += lost
        came = step.stretch.flow[k] * t
        side.committed += came
        side.joined += came
        side.left = max(D(0), value_at(step.left[k], s))


def first_break(engagement, step, s):
    found = []
    for k, side in engagement.sides.items():
        sunk = (1 - side.breaks_at) * side.committed - side.withdrawn < 0
        if sunk and step.stretch.flow[k] > 0:
            raise Unfit("a line below 0 that rises")
        if side.committed == 0 and step.stretch.flow[k] == 0:
            continue
        if sunk:
            def margin(at, k=k):
                return value_at(step.left[k], at)
        else:
            def margin(at, k=k, side=side):
                t = step.time(at) - step.clock[0]
                came = side.breaks_at * step.stretch.flow[k] * t
                return side.margin() + came - sum(step.lost(k, at).values())
        parts = 8
        low = D(0)
        for part in range(1, parts + 1):
            high = s * part / parts
            if margin(high) <= 0 and low == 0 and margin(low) <= 0:
                raise Unfit("a side that breaks as it appears")
            if margin(high) <= 0:
                root = bisected(margin, low, high)
                found.append((step.time(root), root, k, sunk))
                break
            low = high
    if not found:
        return None
    time, root, k, sunk = min(found)
    if sunk:
        return "gone", [k], root, time
    broken = [k for other, _, k, _ in found if abs(other - time) <= TIE * (step.stretch.now + time)]
    for k in broken:
        side = engagement.sides[k]
        slope, pace = step.slope(k, root)
        nearing = slope / pace - side.breaks_at * step.stretch.flow[k]
        if nearing * (step.stretch.now + time) < STEEP * side.breaks_at * side.committed:
            raise Unfit("the line is met too slowly")
    return "break", broken, root, time


def bisected(margin, low, high):
    """The root between two variables: a secant that stays within the bracket, the bracket halved now and then."""
    at_low, at_high = margin(low), margin(high)
    if at_high == 0:
        return high
    for turn in range(400):
        middle = low - at_low * (high - low) / (at_high - at_low)
        if turn % 3 == 2 or not low < middle < high:
            middle = (low + high) / 2
        at = margin(middle)
        if at == 0 or high - low <= abs(high) * D(10) ** (6 - getcontext().prec):
            return middle
        if at > 0:
            low, at_low = middle, at
            at_high /= 2 if turn % 3 == 1 else 1
        else:
            high, at_high = middle, at
            at_low /= 2 if turn % 3 == 1 else 1
    return (low + high) / 2
