"""How fast the core is beside SciPy's solve_ivp, its quadrature beside its own integrator, and the batch door.

Run by hand from the project's folder: `python3 tests/speed/speed.py` (needs SciPy and cargo). All is measured in one run,
since only the ratios of one run mean anything. It prints

* for each engagement the time from the text of its link to the JSON of its answer, and the same with solve_ivp, DOP853 and
  an event at each break line, at the loosest tolerance that gives the same accuracy: 1e-12 in the time of the break for a
  closed form, 1e-11 for a quadrature, or as near to it as solve_ivp comes;
* the quadrature of the time beside the integrator of the core at full accuracy;
* 100,000 mixed links through the batch door: the wall time on all cores, whether the answers are byte for byte those of
  one core, and the memory at its highest, beside that of 10,000 links.
"""

import json
import os
import subprocess
import sys
import tempfile
import time
from pathlib import Path
from urllib.parse import parse_qsl

from scipy.integrate import solve_ivp

PROJECT = Path(__file__).resolve().parents[2]

# Every class of pairing, to a break point, and to the last where that ends.
ENGAGEMENTS = {
    "aimed, aimed": "x.start=600&x.rate=0.04&x.break=0.5&y.start=400&y.rate=0.05&y.break=0.5",
    "area, area": "x.start=120&x.fire=area&x.rate=0.0015&x.break=0.5&y.start=100&y.fire=area&y.rate=0.001&y.break=0.5",
    "aimed, area": "x.start=40&x.rate=0.1&x.break=0.5&y.start=100&y.fire=area&y.rate=0.0002&y.break=0.5",
    "logarithmic, logarithmic": "x.start=600&x.fire=logarithmic&x.rate=0.04&x.break=0.5"
    "&y.start=400&y.fire=logarithmic&y.rate=0.05&y.break=0.5",
    "logarithmic, area": "x.start=300&x.fire=logarithmic&x.rate=0.05&x.break=0.6"
    "&y.start=500&y.fire=area&y.rate=0.0002&y.break=0.5",
    "Helmbold": "x.start=100&x.fire=power&x.p=0.75&x.q=0.25&x.rate=0.03&x.break=0.6"
    "&y.start=70&y.fire=power&y.p=0.75&y.q=0.25&y.rate=0.05&y.break=0.6",
    "aimed, none": "x.start=600&x.rate=0.04&y.start=400&y.fire=none&y.break=0.5",
    "aimed, aimed, last": "x.start=600&x.rate=0.04&y.start=400&y.rate=0.05",
    "aimed, area, last": "x.start=40&x.rate=0.1&y.start=100&y.fire=area&y.rate=0.0002",
    "area, area, 99 %": "x.start=120&x.fire=area&x.rate=0.0015&x.break=0.99"
    "&y.start=100&y.fire=area&y.rate=0.001&y.break=0.99",
    "logarithmic, area, 99 %": "x.start=300&x.fire=logarithmic&x.rate=0.05&x.break=0.99"
    "&y.start=500&y.fire=area&y.rate=0.0002&y.break=0.99",
    "search, search": "x.start=120&x.fire=search&x.rate=0.05&x.half=40&x.break=0.5"
    "&y.start=90&y.fire=search&y.rate=0.08&y.half=15&y.break=0.5",
    "aimed, search": "x.start=120&x.rate=0.05&x.break=0.5&y.start=90&y.fire=search&y.rate=0.08&y.half=15&y.break=0.5",
    "power, power": "x.start=100&x.fire=power&x.p=1.2&x.q=0.5&x.rate=0.008&x.break=0.5"
    "&y.start=90&y.fire=power&y.p=1.2&y.q=0.5&y.rate=0.01&y.break=0.5",
    "power, area": "x.start=100&x.fire=power&x.p=0.8&x.q=0.4&x.rate=0.02&x.break=0.6"
    "&y.start=90&y.fire=area&y.rate=0.0008&y.break=0.6",
    "search, power": "x.start=120&x.fire=search&x.rate=0.05&x.half=40&x.break=0.5"
    "&y.start=90&y.fire=power&y.p=0.7&y.q=0.3&y.rate=0.08&y.break=0.5",
    "aimed, search, last": "x.start=120&x.rate=0.05&y.start=60&y.fire=search&y.rate=0.08&y.half=15",
    "search, search, 99 %": "x.start=120&x.fire=search&x.rate=0.05&x.half=40&x.break=0.99"
    "&y.start=90&y.fire=search&y.rate=0.08&y.half=15&y.break=0.99",
    "power, power, last": "x.start=120&x.fire=power&x.p=1&x.q=0.5&x.rate=0.02"
    "&y.start=90&y.fire=power&y.p=1.1&y.q=0.4&y.rate=0.01",
}


def losses(pairs, side):
    """What a side's fire does to its enemy per unit of time, as a function of shooters and targets."""
    law, rate = pairs.get(f"{side}.fire", "aimed"), float(pairs.get(f"{side}.rate", "0"))
    half, p, q = (float(pairs.get(f"{side}.{key}", "0")) for key in ("half", "p", "q"))
    return {
        "aimed": lambda s, t: rate * s,
        "area": lambda s, t: rate * s * t,
        "logarithmic": lambda s, t: rate * t,
        "search": lambda s, t: rate * s * t / (t + half),
        "power": lambda s, t: rate * s**p * t**q,
        "none": lambda s, t: 0.0,
    }[law]


def solver(link):
    """solve_ivp on the engagement of a link: a function of the tolerance that gives the time of the break."""
    pairs = dict(parse_qsl(link))
    on_y, on_x = losses(pairs, "x"), losses(pairs, "y")
    starts = [float(pairs[f"{side}.start"]) for side in "xy"]
    lines = [start * (1 - float(pairs.get(f"{side}.break", "1"))) for side, start in zip("xy", starts)]

    def motion(_, now):
        x, y = max(now[0], 0.0), max(now[1], 0.0)
        return [-on_x(y, x), -on_y(x, y)]

    events = [lambda _, now: now[0] - lines[0], lambda _, now: now[1] - lines[1]]
    for event in events:
        event.terminal = True

    def solve(tolerance, until):
        found = solve_ivp(motion, (0, until), starts, "DOP853", events=events, rtol=tolerance, atol=tolerance * min(starts))
        times = [event[0] for event in found.t_events if len(event)]
        return min(times) if times else float("nan")

    return solve


def to_json(link, tolerance, until):
    """The same way with solve_ivp: from the text of a link to JSON."""
    return json.dumps({"ok": True, "time": solver(link)(tolerance, until)})


def scipy_time(link, known, aim):
    """Seconds of solve_ivp at the loosest tolerance that comes within `aim` of the known time, and how near it comes;
    where none does, at the one that comes nearest."""
    solve, best = solver(link), None
    for power in range(6, 14):
        tolerance = 10.0**-power
        error = abs(solve(tolerance, 2 * known) / known - 1)
        if best is None or error < best[1]:
            best = (tolerance, error)
        if error <= aim:
            break
    spent = []
    for _ in range(9):
        start = time.perf_counter()
        to_json(link, best[0], 2 * known)
        spent.append(time.perf_counter() - start)
    return min(spent), *best


def cargo(*arguments, **keywords):
    command = ["cargo", "run", "-q", "--release", *arguments]
    return subprocess.run(command, cwd=PROJECT, check=True, text=True, capture_output=True, **keywords).stdout


def answers():
    """Prints the ratios beside solve_ivp, and of quadrature and integrator."""
    lines = "".join(f"{name}\t{link}\n" for name, link in ENGAGEMENTS.items())
    out = cargo("-p", "aftercount-tests", "--example", "speed", "--", "times", input=lines)
    rows, ratios = [json.loads(line) for line in out.splitlines()], {}
    print("from link text to JSON, beside solve_ivp (DOP853, events)")
    for row in rows:
        method, aim = row["outcome"]["method"], 1e-12 if row["outcome"]["method"] == "closed form" else 1e-11
        spent, tolerance, error = scipy_time(ENGAGEMENTS[row["name"]], row["outcome"]["time"], aim)
        ratio = spent * 1e9 / row["whole"]
        ratios.setdefault(method, []).append(ratio)
        print(
            f"  {row['name']:25} {method:12} {row['whole'] / 1000:6.2f} us, solve_ivp {spent * 1e3:5.2f} ms "
            f"(rtol {tolerance:.0e}, off by {error:.0e}): {ratio:5.0f} times"
        )
    for method, all_of_it in ratios.items():
        middle = sorted(all_of_it)[len(all_of_it) // 2]
        print(f"  {method}: {min(all_of_it):.0f} to {max(all_of_it):.0f} times, {middle:.0f} in the middle")
    print("the time of the break: quadrature beside the integrator")
    for row in rows:
        if row.get("apart") is not None:
            print(
                f"  {row['name']:25} {row['quadrature'] / 1000:6.2f} us and {row['integrator'] / 1000:6.2f} us: "
                f"{row['integrator'] / row['quadrature']:4.1f} times; {row['apart']:.0e} apart"
            )


def through_the_door(door, links, cores=None):
    """Seconds and the highest memory in MiB of a batch, and its answers."""
    before = (lambda: os.sched_setaffinity(0, cores)) if cores else None
    with open(links, "rb") as source, tempfile.TemporaryFile() as sink:
        start = time.perf_counter()
        child = subprocess.Popen([door], stdin=source, stdout=sink, preexec_fn=before)
        memory = 0
        while child.poll() is None:
            memory = max(memory, highest_memory(child.pid))
            time.sleep(0.002)
        spent = time.perf_counter() - start
        assert child.returncode == 0
        sink.seek(0)
        return spent, memory / 1024, sink.read()


def highest_memory(process):
    """The highest resident memory so far in KiB. What wait4 says would count this process, from which the child was
    forked."""
    try:
        status = Path(f"/proc/{process}/status").read_text(encoding="ascii")
    except OSError:
        return 0
    return next((int(line.split()[1]) for line in status.splitlines() if line.startswith("VmHWM")), 0)


def batch():
    """Prints how long 100,000 links take, and what memory; whether they come in order."""
    subprocess.run(["cargo", "build", "-q", "--release", "-p", "aftercount-core", "--example", "outcome"], cwd=PROJECT, check=True)
    metadata = subprocess.run(
        ["cargo", "metadata", "--no-deps", "--format-version", "1"], cwd=PROJECT, check=True, text=True, capture_output=True
    )
    door = Path(json.loads(metadata.stdout)["target_directory"]) / "release" / "examples" / "outcome"
    with tempfile.TemporaryDirectory() as folder:
        links = Path(folder) / "links"
        links.write_text(cargo("-p", "aftercount-tests", "--example", "speed", "--", "links", "100000"), encoding="utf-8")
        fewer = Path(folder) / "fewer"
        fewer.write_text("\n".join(links.read_text(encoding="utf-8").splitlines()[:10_000]) + "\n", encoding="utf-8")
        spent, memory, answers_of_all = through_the_door(door, links)
        alone, _, answers_of_one = through_the_door(door, links, {min(os.sched_getaffinity(0))})
        _, memory_of_fewer, _ = through_the_door(door, fewer)
    same = answers_of_all == answers_of_one and answers_of_all.count(b"\n") == 100_000
    print("100,000 mixed links through the batch door")
    print(f"  {spent:.2f} s on {len(os.sched_getaffinity(0))} cores, {alone:.2f} s on one")
    print(f"  {'the same answers in the same order' if same else 'ANSWERS DIFFER'}")
    print(f"  {memory:.1f} MiB at the highest, {memory_of_fewer:.1f} MiB for 10,000 links")
    return same and memory < 1.5 * memory_of_fewer + 2


if __name__ == "__main__":
    answers()
    sys.exit(0 if batch() else "the order or the memory is not what it should be (see above)")
