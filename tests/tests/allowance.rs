//! Questions whose fights are dear end all the same, and say that they were cut short.

use aftercount_core::asked::{Chart, Inquiry};
use aftercount_core::reversal::Reversal;
use aftercount_core::words;
use aftercount_tests::shown::read;

const LINK: &str = "x.start=600&x.fire=search&x.half=80&x.rate=0.06&x.break=0.3&x.wastage=0.01&y.start=400&y.fire=power&y.p=0.9\
                    &y.q=0.2&y.rate=0.02&y.break=0.5&y.flow=3@0/9";

/// All that is known is told, up to where it was looked.
#[test]
fn a_question_that_is_cut_short_answers_for_what_it_saw() {
    let (pairs, statement) = read(&LINK.replace("=600", "=600?"));
    let whole = || Inquiry::new(&pairs, &statement).expect("one question");
    let ended = |mut inquiry: Inquiry| {
        assert!(inquiry.go_on(u32::MAX));
        inquiry.answer()
    };
    let all = ended(whole());
    assert!(!all.cut_short && all.outcomes.len() > 1, "{:?}", all.outcomes);
    for most in [0, 50_000, 400_000] {
        let some = ended(whole().with_at_most(most));
        assert!(
            some.cut_short && some.fights < all.fights,
            "{most}: {} fights",
            some.fights
        );
        assert!(some.span.low == all.span.low && some.span.high <= all.span.high);
        let last = some.samples.iter().map(|sample| sample.value).fold(0.0, f64::max);
        assert_eq!(some.span.high, last, "{most}");
        let first = some.outcomes.first().expect("it saw one value");
        assert_eq!(first.story, all.outcomes[0].story);
        let told = words::asked::where_looked(&statement, &some);
        assert!(told.contains("ended early"), "{told}");
        let json = serde_json::to_value(&some).expect("JSON");
        assert_eq!(json["cut_short"], true);
    }
    let json = serde_json::to_value(&all).expect("JSON");
    assert!(json.get("cut_short").is_none());
}

/// Without its coarsest points there is no map to show; with them it is shown, and says that it is not whole.
#[test]
fn a_map_that_is_cut_short_says_so() {
    let (pairs, statement) = read(&LINK.replace("=600", "=600?").replace("=400", "=400?"));
    let ended = |most: u64| {
        let mut chart = Chart::new(&pairs, &statement)
            .expect("two questions")
            .with_at_most(most);
        assert!(chart.go_on(u32::MAX));
        chart
    };
    let nothing = ended(100_000);
    assert!(nothing.is_cut_short() && !nothing.has_ground());
    let told = words::map::sentence(&statement, &nothing);
    assert!(told.contains("too much work for a map"), "{told}");
    let all = ended(u64::MAX);
    assert!(!all.is_cut_short() && !all.flips().is_empty());
    let part = ended(6_000_000);
    assert!(part.is_cut_short() && part.has_ground() && part.fights() < all.fights());
    let told = words::map::where_looked(&statement, &part);
    assert!(told.contains("ended early"), "{told}");
    assert_eq!(part.answer().shares.len(), all.answer().shares.len());
}

/// Numbers behind the allowance are left out, and counted; none is said to reverse nothing because of it.
#[test]
fn a_reversal_table_that_is_cut_short_leaves_numbers_out() {
    let (pairs, statement) = read(LINK);
    let all = Reversal::new(&pairs, &statement).finished();
    assert_eq!(all.left_out(), 0);
    let some = Reversal::new(&pairs, &statement).with_at_most(100_000).finished();
    assert!(some.left_out() > 0 && some.is_done());
    assert_eq!(some.entries().len() + some.left_out(), all.entries().len());
    let of_all = all.entries();
    for entry in some.entries() {
        let same = of_all.iter().find(|other| other.slot.name == entry.slot.name);
        assert_eq!(
            same.map(|other| &other.change),
            Some(&entry.change),
            "{}",
            entry.slot.name
        );
    }
    let told = words::reversal::looked(&some);
    assert!(told.contains("ended early"), "{told}");
}
