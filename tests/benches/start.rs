//! How long the page takes from navigation to the settled demo, by the browser's own clock.
//!
//! `cargo bench -p aftercount-tests --features browser --bench start`, once the page is built. It asserts nothing of time: a
//! busy machine is no fault of the page.

use aftercount_tests::browser::Browser;

/// Starts that count; those before them warm the browser up.
const STARTS: usize = 20;
const BEFORE: usize = 3;

/// Notes when the pictures match the text for the first time, in milliseconds since the navigation began.
const NOTE: &str = "new MutationObserver((_, observer) => {
    if (document.documentElement && document.documentElement.dataset.settled) {
      window.settledAt = performance.now(); observer.disconnect(); }
  }).observe(document, {subtree: true, attributes: true, attributeFilter: ['data-settled']});";

fn main() {
    let browser = Browser::start();
    browser.before_each_page(NOTE);
    let mut taken = Vec::new();
    for start in 0..BEFORE + STARTS {
        browser.open("");
        let settled = browser.wait("settled", "return window.settledAt;");
        if start >= BEFORE {
            taken.push(settled.as_f64().expect("milliseconds"));
        }
    }
    browser.assert_clean();
    taken.sort_by(f64::total_cmp);
    let at = |part: f64| taken[(part * (taken.len() - 1) as f64).round() as usize];
    println!("from navigation to the settled demo, {STARTS} starts:");
    for (name, part) in [
        ("least", 0.0),
        ("median", 0.5),
        ("nine in ten", 0.9),
        ("most", 1.0),
    ] {
        println!("{name}: {:.0} ms", at(part));
    }
}
