//! Hostile texts: a few thousand with every native run, so that a fault shows at once; `tests/run` gives the core millions
//! (`src/bin/hostile.rs`), and `fuzz/` goes on for as long as one likes.

use aftercount_tests::hostile::{SEED, dictionary, run};
use aftercount_tests::tables::project_text;

#[test]
fn no_text_is_too_hostile() {
    let report = run(4000, SEED + 1);
    assert!(report.is_good(), "{report}");
}

/// The fuzzer's dictionary is that of the table of keys. To make it again:
/// `cargo run -p aftercount-tests --bin hostile -- --dictionary > tests/fuzz/keys.dict`.
#[test]
fn the_fuzzer_knows_every_key() {
    assert_eq!(project_text("tests/fuzz/keys.dict"), dictionary());
}
