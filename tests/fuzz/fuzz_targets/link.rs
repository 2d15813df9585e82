//! Any text at all, judged as the hostile ones are.
#![no_main]

use aftercount_tests::hostile::{Depth, judge};
use libfuzzer_sys::fuzz_target;

fuzz_target!(|text: &str| {
    if let Err(fault) = judge(text, Depth::Answer) {
        panic!("{text:?}: {fault}");
    }
});
