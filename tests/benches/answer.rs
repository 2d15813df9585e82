//! How long an answer takes, from the text of a link to its JSON.

use aftercount_core::answer::answer;
use criterion::{Criterion, criterion_group, criterion_main};
use std::hint::black_box;

/// One link for each way the core works an outcome out.
const LINKS: &[(&str, &str)] = &[
    ("aimed/aimed", "x.start=600&x.rate=0.04&y.start=400&y.rate=0.05"),
    (
        "area/area",
        "x.start=120&x.fire=area&x.rate=0.0015&y.start=100&y.fire=area&y.rate=0.001",
    ),
    (
        "aimed/area",
        "x.start=40&x.rate=0.1&y.start=100&y.fire=area&y.rate=0.0002",
    ),
    ("a tie", "x.start=600&x.rate=0.04&y.start=400&y.rate=0.09"),
    (
        "both lines at once",
        "x.start=600&x.rate=0.04&x.break=0.3&y.start=400&y.rate=0.09&y.break=0.3",
    ),
    (
        "break points",
        "x.start=600&x.rate=0.04&x.break=0.3&y.start=400&y.rate=0.05&y.break=0.4",
    ),
    (
        "a clock",
        "x.start=600&x.rate=0.04&y.start=400&y.rate=0.05&until=6",
    ),
    ("problems", "x.start=1,000&x.rate=0,04&y.strat=400&y.rate=0.05"),
];

fn answers(criterion: &mut Criterion) {
    let mut group = criterion.benchmark_group("from link to JSON");
    for (name, link) in LINKS {
        group.bench_function(*name, |bencher| {
            bencher.iter(|| answer(black_box(link)).to_json())
        });
    }
    group.finish();
}

criterion_group!(benches, answers);
criterion_main!(benches);
