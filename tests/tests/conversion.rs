//! An engagement restated in another unit of time ends as it did, its times in the other unit.

use aftercount_core::converted::converted;
use aftercount_core::fight::{Effort, fight};
use aftercount_core::golden;
use aftercount_core::outcome::Outcome;
use aftercount_core::pairs::Pairs;
use aftercount_core::statement::{Statement, TimeUnit};
use proptest::prelude::*;

const UNITS: [TimeUnit; 5] = [
    TimeUnit::Second,
    TimeUnit::Minute,
    TimeUnit::Hour,
    TimeUnit::Day,
    TimeUnit::Week,
];

fn outcome(pairs: &Pairs) -> Outcome {
    let statement = Statement::read(pairs).unwrap_or_else(|why| panic!("{}: {why:?}", pairs.link()));
    fight(&statement.engagement(), Effort::Outcome).outcome
}

/// How far two numbers are apart, in parts of `scale`; none at all where both are missing.
fn apart(one: Option<f64>, other: Option<f64>, scale: f64) -> f64 {
    match (one, other) {
        (Some(one), Some(other)) => (one - other).abs() / scale.max(f64::MIN_POSITIVE),
        (None, None) => 0.0,
        _ => f64::INFINITY,
    }
}

/// How far the outcome is from that of the same link in another unit of time, relative.
fn change_of_outcome(link: &str, from: TimeUnit, to: TimeUnit) -> Option<f64> {
    let mut pairs = Pairs::parse(link);
    pairs.set("unit", from.symbol());
    // A number beyond its limits is refused: then there is nothing to compare.
    let other = converted(&pairs, from, to).ok()?;
    assert_eq!(other.get("unit"), Some(to.symbol()));
    let (here, there) = (outcome(&pairs), outcome(&other));
    assert_eq!(
        (here.breaks, here.ended),
        (there.breaks, there.ended),
        "{link} {to:?}"
    );
    let factor = from.in_a_day() / to.in_a_day();
    let time = here.time.unwrap_or(0.0);
    let times = apart(here.time, there.time.map(|time| time * factor), time);
    let sides = [(&here.x, &there.x), (&here.y, &there.y)];
    let ends = sides.map(|(here, there)| {
        let committed = here.committed.max(1.0);
        let losses = apart(Some(here.losses.all), Some(there.losses.all), committed);
        apart(here.end, there.end, committed).max(losses)
    });
    Some(times.max(ends[0]).max(ends[1]))
}

/// The golden links hold every pairing of laws, reserves, flows, phases, wastage, support and clocks.
#[test]
fn every_golden_engagement_ends_alike_in_every_unit() {
    let (mut compared, mut worst) = (0, (0.0, String::new()));
    for number in 0..golden::COUNT {
        let link = golden::link(number);
        for to in UNITS.into_iter().filter(|to| *to != TimeUnit::Hour) {
            if let Some(change) = change_of_outcome(&link, TimeUnit::Hour, to) {
                compared += 1;
                if change > worst.0 {
                    worst = (change, format!("{number} in {to:?}: {link}"));
                }
            }
        }
    }
    println!("{compared} compared, worst {} of {}", worst.0, worst.1);
    assert!(compared > 1900, "{compared}");
    assert!(worst.0 <= 1e-12, "{} of {}", worst.0, worst.1);
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 300, failure_persistence: None, ..ProptestConfig::default() })]

    /// Numbers of few digits, as people write them, in any two units; with a range that closes, which golden links lack.
    #[test]
    fn any_engagement_ends_alike(
        rates in (1u32..999, 1u32..999),
        joins in (1u32..90, 1u32..20),
        closing in 1u32..60,
        until in proptest::option::of(1u32..200),
        units in (0usize..5, 0usize..5),
    ) {
        let clock = until.map_or(String::new(), |until| format!("&until={until}"));
        let link = format!(
            "x.start=600&x.rate=0.0{}&x.break=0.3&x.reach=300&y.start=400&y.rate=0.0{}&y.break=0.4&y.join={}@0.{}\
             &y.flow=2@1/9&phase1.from=3&phase1.x.wastage=0.01&range=200&range.closing={closing}{clock}&v=1",
            rates.0, rates.1, joins.0, joins.1,
        );
        if let Some(change) = change_of_outcome(&link, UNITS[units.0], UNITS[units.1]) {
            prop_assert!(change <= 1e-12, "{change} of {link}");
        }
    }
}
