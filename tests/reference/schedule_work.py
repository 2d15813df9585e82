"""Picks the links of schedule_work.tsv out of schedules.tsv: four of each kind, so that every way of solving is there.

Run by hand: `python3 tests/reference/schedule_work.py`, then fill in the counts that
`cargo test --release -p aftercount-tests --test schedule_rules the_work -- --nocapture` prints.
"""

from pathlib import Path

HERE = Path(__file__).parent
lines = [line for line in (HERE / "schedules.tsv").read_text(encoding="utf-8").splitlines() if not line.startswith("# ")]
picked = {}
for line in lines[1:]:
    kind, link = line.split("\t")[:2]
    picked.setdefault(kind, []).append(link)
print("link\tevaluations\tsteps")
for links in picked.values():
    for link in links[:: max(1, len(links) // 4)][:4]:
        print(f"{link}\t0\t0")
