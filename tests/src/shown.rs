//! Links worked out with their pictures.

use aftercount_core::demo::DEMO;
use aftercount_core::fight::{Effort, Fight, fight};
use aftercount_core::golden;
use aftercount_core::outcome::Outcome;
use aftercount_core::pairs::Pairs;
use aftercount_core::picture::{self, Picture};
use aftercount_core::statement::{Statement, Values};

/// A link worked out, with both pictures.
pub struct Worked {
    /// The fight, with its trajectory.
    pub fight: Fight,
    /// Strength over time.
    pub strength: Picture,
    /// One side against the other.
    pub orbit: Picture,
}

/// What `link` states.
///
/// # Panics
/// Where it cannot be read.
pub fn read(link: &str) -> (Pairs, Statement) {
    let pairs = Pairs::parse(link);
    let statement = Statement::read(&pairs).unwrap_or_else(|problems| panic!("{link}: {problems:?}"));
    (pairs, statement)
}

/// The outcome with a number changed, by the name of its slot.
pub fn outcome_with(statement: &Statement, slot: &str, value: f64) -> Outcome {
    let values = Values::from([(slot.to_owned(), value)]);
    fight(&statement.engagement_with(&values), Effort::Outcome).outcome
}

/// Works `link` out.
///
/// # Panics
/// Where it cannot be worked out.
pub fn worked(link: &str) -> Worked {
    let (_, statement) = read(link);
    let fight = fight(&statement.engagement(), Effort::Trajectory);
    let strength = picture::strength(&statement, &fight).expect("a trajectory was asked for");
    let orbit = picture::orbit(&statement, &fight).expect("a trajectory was asked for");
    Worked {
        fight,
        strength,
        orbit,
    }
}

/// Engagements of every kind, some of them absurd.
pub fn links() -> Vec<String> {
    let absurd = [
        DEMO,
        // Its break line begins with a step.
        "x.start=0&x.break=0.2&x.fire=logarithmic&y.start=621&y.break=0.5&x.rate=0.017369&y.rate=0.057282&x.flow=280.67@1.118/4.118&y.wastage=0.0083757",
        "x.start=600&x.rate=0.04&y.start=400&y.rate=0.09",
        "x.start=600&x.rate=0.04&x.break=0.3&y.start=400&y.rate=0.09&y.break=0.3",
        "x.start=1e9&x.rate=1e9&y.start=1&y.rate=1e-9",
        "x.start=1&x.rate=1e-9&y.start=1e9&y.fire=area&y.rate=1e9",
        "x.start=1e-300&x.rate=1&y.start=1e9&y.rate=1",
        "x.start=600&x.fire=none&y.start=400&y.fire=none",
        "x.start=600&x.rate=0&y.start=400&y.rate=0&until=3",
        "x.start=60&x.lost=40&x.break=0.3&x.rate=1&y.start=400&y.rate=0.1",
        "x.start=600&x.rate=0.04&y.start=400&y.rate=0.05&until=1e-9",
        "x.start=600&x.rate=0.04&y.start=400&y.rate=0.05&until=1e9",
        "x.start=600&x.fire=area&x.rate=0.0001&y.start=400&y.fire=area&y.rate=0.00015",
        "x.start=600&x.fire=area&x.rate=0.0001&y.start=400&y.fire=area&y.rate=0.0001&until=1e9",
        "x.start=600&x.rate=1e-300&y.start=400&y.rate=1e-300",
        "x.start=600&x.rate=0.04&x.break=1e-9&y.start=400&y.rate=0.05&y.break=0.999999",
        "x.start=600&x.fire=logarithmic&x.rate=0.04&y.start=400&y.fire=logarithmic&y.rate=0.05",
        "x.start=600&x.fire=logarithmic&x.rate=1e9&y.start=1e9&y.fire=area&y.rate=1e-9",
        "x.start=100&x.fire=power&x.p=0.5&x.q=0&x.rate=1&y.start=100&y.fire=power&y.p=0.5&y.q=0&y.rate=1",
        "x.start=200&x.fire=power&x.p=0.5&x.q=0&x.rate=25&x.break=0.5&y.start=100&y.fire=power&y.p=1&y.q=2&y.rate=0.0005",
        "x.start=1e9&x.fire=power&x.p=3&x.q=3&x.rate=1e9&y.start=1e9&y.fire=power&y.p=3&y.q=3&y.rate=1e9",
        "x.start=1&x.fire=power&x.p=0&x.q=3&x.rate=1e-9&y.start=1e9&y.fire=power&y.p=3&y.q=0&y.rate=1e-9",
        "x.start=1e9&x.fire=search&x.rate=1e-9&x.half=1e9&y.start=1&y.fire=search&y.rate=1e9&y.half=0",
        "x.start=500&x.fire=search&x.rate=1&x.half=1e-12&y.start=500&y.fire=search&y.rate=1&y.half=1e-12",
        "x.start=600&x.fire=none&y.start=400&y.fire=power&y.p=0&y.q=2.9&y.rate=1e-3",
    ];
    absurd
        .into_iter()
        .map(str::to_owned)
        .chain((0..60).map(golden::link))
        .collect()
}
