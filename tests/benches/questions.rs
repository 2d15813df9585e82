//! What a question and a map take: every fight of them, until all is closed in on.

use aftercount_core::asked::{Chart, Inquiry};
use aftercount_core::pairs::Pairs;
use aftercount_core::statement::Statement;
use criterion::{Criterion, criterion_group, criterion_main};
use std::hint::black_box;

const CLOSED: &str = "&y.start=400&x.rate=0.04&y.rate=0.09&x.break=0.3&y.break=0.4";
const TEN_EVENTS: &str = "&x.break=0.3&y.break=0.39&x.wastage=0.01&x.join=9@1,9@2,9@3,9@4,9@5&y.join=9@1.5,9@2.5,9@3.5,64@4.5,9@5.5";
const INTEGRATED: &str = "&x.fire=search&x.half=80&x.rate=0.06&x.break=0.3&x.wastage=0.01&y.fire=power&y.p=0.9&y.q=0.2&y.rate=0.02&y.break=0.5";

fn statement(link: &str) -> (Pairs, Statement) {
    let pairs = Pairs::parse(link);
    let statement = Statement::read(&pairs).unwrap_or_else(|problems| panic!("{link}: {problems:?}"));
    (pairs, statement)
}

fn questions(criterion: &mut Criterion) {
    let mut group = criterion.benchmark_group("question");
    group.sample_size(10);
    for (name, link) in [
        ("closed", format!("x.start=600?{CLOSED}")),
        (
            "ten events",
            format!("x.start=600?&y.start=400&x.rate=0.04&y.rate=0.06{TEN_EVENTS}"),
        ),
    ] {
        let (pairs, statement) = statement(&link);
        group.bench_function(name, |bencher| {
            bencher.iter(|| {
                let mut inquiry =
                    Inquiry::new(black_box(&pairs), &statement).expect("one number is in question");
                while !inquiry.go_on(u32::MAX) {}
                inquiry.answer()
            });
        });
    }
    group.finish();
}

fn maps(criterion: &mut Criterion) {
    let mut group = criterion.benchmark_group("map");
    group.sample_size(10);
    for (name, link) in [
        (
            "closed",
            format!("x.start=600?{CLOSED}").replace("y.start=400", "y.start=400?"),
        ),
        (
            "ten events",
            format!("x.start=600&y.start=400&x.rate=0.04?&y.rate=0.06?{TEN_EVENTS}"),
        ),
        ("integrated", format!("x.start=600?&y.start=400?{INTEGRATED}")),
    ] {
        let (pairs, statement) = statement(&link);
        group.bench_function(name, |bencher| {
            bencher.iter(|| {
                let mut chart =
                    Chart::new(black_box(&pairs), &statement).expect("two numbers are in question");
                while !chart.go_on(u32::MAX) {}
                chart.flips()
            });
        });
    }
    group.finish();
}

criterion_group!(benches, questions, maps);
criterion_main!(benches);
