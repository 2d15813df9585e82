//! A few hundred of the ugliest texts that the generator makes, one after another in one page, as its address changes.

use aftercount_core::answer::{Answer, answer};
use aftercount_core::pairs::Pairs;
use aftercount_tests::browser::{Browser, native};
use aftercount_tests::hostile::{Depth, Generator, SEED, Verdict, judge};
use serde_json::json;

/// How many texts are looked through for the ugliest, and how many of each kind are taken.
const LOOKED_THROUGH: u64 = 3000;
const OF_EACH_KIND: usize = 100;

/// The texts that are dearest to answer, have most to be refused for, and are furthest from plain letters.
fn ugliest() -> Vec<String> {
    let generator = Generator::new(SEED);
    let texts: Vec<String> = (0..LOOKED_THROUGH).map(|index| generator.text(index)).collect();
    let verdicts: Vec<Verdict> = texts
        .iter()
        .map(|text| judge(text, Depth::Answer).unwrap_or_else(|fault| panic!("{text:?}: {fault}")))
        .collect();
    let most = |measure: &dyn Fn(usize) -> usize| {
        let mut places: Vec<usize> = (0..texts.len()).collect();
        places.sort_by_key(|place| std::cmp::Reverse(measure(*place)));
        places.truncate(OF_EACH_KIND);
        places
    };
    let work = |place: usize| match verdicts[place] {
        Verdict::Answered { work, .. } => (work.evaluations + work.steps) as usize,
        Verdict::Refused(_) => 0,
    };
    let problems = |place: usize| match verdicts[place] {
        Verdict::Refused(problems) => problems,
        Verdict::Answered { .. } => 0,
    };
    let strange = |place: usize| {
        texts[place]
            .chars()
            .filter(|letter| !letter.is_ascii_graphic())
            .count()
    };
    let mut places = [most(&work), most(&problems), most(&strange)].concat();
    places.sort_unstable();
    places.dedup();
    places.into_iter().map(|place| texts[place].clone()).collect()
}

#[test]
fn the_page_takes_the_ugliest_one_after_another() {
    let browser = Browser::start();
    browser.open("x.start=600&x.rate=0.04&y.start=400&y.rate=0.05&v=1");
    let (mut good, mut bad) = (0, 0);
    for text in ugliest() {
        // The browser itself escapes some of what it is given: what counts is what the page received.
        let received = browser.script(
            "location.hash = arguments[0]; return location.hash.slice(1);",
            vec![text.clone().into()],
        );
        let received = received.as_str().expect("an address").to_owned();
        if !received.contains('=') || Pairs::parse(&received).is_empty() {
            continue;
        }
        match answer(&received) {
            Answer::Problems(problems) => {
                bad += 1;
                let body = format!(
                    "return document.documentElement.dataset.settled === undefined
                       && document.querySelectorAll('#problem-list > li').length === {};",
                    json!(problems.len())
                );
                browser.wait(&format!("the problems of {text:?}"), &body);
            }
            _ => {
                good += 1;
                let (shown, native) = (browser.settle(&received), native(&received));
                // What is no number is not equal to itself.
                assert_eq!(format!("{shown:?}"), format!("{native:?}"), "{text:?}");
            }
        }
        let complaints = browser.complaints();
        assert!(complaints.is_empty(), "{text:?}: {complaints:?}");
    }
    assert!(good >= 50 && bad >= 100, "{good} good and {bad} bad ones");
}
