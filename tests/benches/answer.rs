//! How long an answer takes, from the text of a link to its JSON.

use aftercount_core::answer::answer;
use aftercount_core::fight::{Effort, fight};
use aftercount_core::pairs::Pairs;
use aftercount_core::statement::Statement;
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
    (
        "logarithmic/logarithmic",
        "x.start=600&x.fire=logarithmic&x.rate=0.04&x.break=0.5&y.start=400&y.fire=logarithmic&y.rate=0.05&y.break=0.5",
    ),
    (
        "logarithmic/area",
        "x.start=300&x.fire=logarithmic&x.rate=0.05&y.start=500&y.fire=area&y.rate=0.0002&y.break=0.5",
    ),
    (
        "powers that come to the square law",
        "x.start=100&x.fire=power&x.p=0.75&x.q=0.25&x.rate=0.03&y.start=70&y.fire=power&y.p=0.75&y.q=0.25&y.rate=0.05",
    ),
    (
        "search/none",
        "x.start=120&x.fire=search&x.rate=0.05&x.half=40&y.start=90&y.fire=none&y.break=0.5",
    ),
    (
        "search/search",
        "x.start=120&x.fire=search&x.rate=0.05&x.half=40&x.break=0.5&y.start=90&y.fire=search&y.rate=0.08&y.half=15",
    ),
    (
        "aimed/search",
        "x.start=120&x.rate=0.05&x.break=0.5&y.start=90&y.fire=search&y.rate=0.08&y.half=15&y.break=0.5",
    ),
    (
        "power/power",
        "x.start=100&x.fire=power&x.p=1.2&x.q=0.5&x.rate=0.008&x.break=0.5&y.start=90&y.fire=power&y.p=1.2&y.q=0.5&y.rate=0.01",
    ),
    (
        "power/power to the last",
        "x.start=120&x.fire=power&x.p=1&x.q=0.5&x.rate=0.02&y.start=90&y.fire=power&y.p=1.1&y.q=0.4&y.rate=0.01",
    ),
    (
        "search/power, a root to find",
        "x.start=120&x.fire=search&x.rate=0.05&x.half=40&x.break=0.5&y.start=90&y.fire=power&y.p=0.7&y.q=0.3&y.rate=0.08",
    ),
    (
        "power/power next to parity",
        "x.start=300&x.fire=power&x.p=0.7&x.q=0.2&x.rate=0.05&y.start=299.9999&y.fire=power&y.p=0.7&y.q=0.2&y.rate=0.05",
    ),
    (
        "power/power with a clock",
        "x.start=100&x.fire=power&x.p=1.2&x.q=0.5&x.rate=0.008&y.start=90&y.fire=power&y.p=1.2&y.q=0.5&y.rate=0.01&until=1",
    ),
    (
        "both at nothing in finite time",
        "x.start=100&x.fire=power&x.p=0.5&x.q=0&x.rate=1&y.start=100&y.fire=power&y.p=0.5&y.q=0&y.rate=1",
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

/// The same with strength over time, as the page asks for it: two of the dearer kind, and one of the cheaper.
fn trajectories(criterion: &mut Criterion) {
    let mut group = criterion.benchmark_group("a trajectory and 240 strengths");
    for (name, link) in LINKS
        .iter()
        .filter(|(name, _)| ["aimed/aimed", "power/power", "search/search"].contains(name))
    {
        let statement = Statement::read(&Pairs::parse(link)).expect("a good link");
        let engagement = statement.engagement();
        group.bench_function(*name, |bencher| {
            bencher.iter(|| {
                let trajectory = fight(black_box(&engagement), Effort::Trajectory)
                    .trajectory
                    .expect("asked for");
                (0..240)
                    .map(|step| {
                        trajectory
                            .strengths_at(trajectory.shown * f64::from(step) / 240.0)
                            .x
                    })
                    .sum::<f64>()
            })
        });
    }
    group.finish();
}

criterion_group!(benches, answers, trajectories);
criterion_main!(benches);
