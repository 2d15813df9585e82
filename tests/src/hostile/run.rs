//! Millions of texts on all cores, under a watch for one that hangs.

use std::panic::{self, AssertUnwindSafe, catch_unwind};
use std::process;
use std::sync::atomic::{AtomicBool, AtomicU64, Ordering};
use std::thread;
use std::time::{Duration, Instant};

use super::report::Report;
use super::{Depth, Generator, judge};

/// Of so many texts one is looked at in full, as the page shows it: that takes many times as long.
const IN_FULL: u64 = 40;

/// How long one text may take, on a busy machine and with every check on: a map whose fights are all as dear as can be takes
/// some seconds of the processor.
const PATIENCE: Duration = Duration::from_secs(90);

/// How many texts a thread takes at a time.
const BLOCK: u64 = 1000;

/// What a thread is at: the text's number, and when it began, in milliseconds; for the watch.
#[derive(Default)]
struct At {
    index: AtomicU64,
    since: AtomicU64,
}

/// Judges the first `count` texts of a seed.
///
/// A text that hangs cannot be ended from outside: it is told, and the whole process with it ended.
pub fn run(count: u64, seed: u64) -> Report {
    // Faults are told at the end, with their texts.
    let hook = panic::take_hook();
    panic::set_hook(Box::new(|_| {}));
    let generator = Generator::new(seed);
    let begun = Instant::now();
    let (next, over) = (AtomicU64::new(0), AtomicBool::new(false));
    let threads = thread::available_parallelism().map_or(1, usize::from);
    let at: Vec<At> = (0..threads).map(|_| At::default()).collect();
    let work = |at: &At| {
        let mut report = Report::default();
        loop {
            let from = next.fetch_add(BLOCK, Ordering::Relaxed);
            if from >= count {
                return report;
            }
            for index in from..count.min(from + BLOCK) {
                at.index.store(index, Ordering::Relaxed);
                at.since.store(milliseconds(begun), Ordering::Relaxed);
                one(&generator, index, &mut report);
            }
        }
    };
    let mut report = thread::scope(|scope| {
        let running: Vec<_> = at.iter().map(|at| scope.spawn(|| work(at))).collect();
        scope.spawn(|| watch(&at, begun, &over, &generator));
        let reports = running
            .into_iter()
            .map(|thread| thread.join().unwrap_or_default());
        let all = reports.fold(Report::default(), Report::and);
        over.store(true, Ordering::Relaxed);
        all
    });
    panic::set_hook(hook);
    report.close(&generator, begun.elapsed());
    report
}

fn milliseconds(begun: Instant) -> u64 {
    begun.elapsed().as_millis() as u64
}

fn one(generator: &Generator, index: u64, report: &mut Report) {
    let depth = if index.is_multiple_of(IN_FULL) {
        Depth::Page
    } else {
        Depth::Answer
    };
    let text = generator.text(index);
    let begun = Instant::now();
    match catch_unwind(AssertUnwindSafe(|| judge(&text, depth))) {
        Ok(Ok(verdict)) => report.judged(index, verdict, begun.elapsed()),
        Ok(Err(what)) => report.fault(index, what),
        Err(panic) => {
            let said = panic.downcast_ref::<String>().cloned();
            let said = said.or_else(|| panic.downcast_ref::<&str>().map(|said| said.to_string()));
            report.fault(index, format!("it panicked, {}", said.unwrap_or_default()));
        }
    }
}

/// Ends the whole run where a text takes too long: nothing else would.
fn watch(at: &[At], begun: Instant, over: &AtomicBool, generator: &Generator) {
    while !over.load(Ordering::Relaxed) {
        thread::sleep(Duration::from_millis(100));
        for at in at {
            let taken = milliseconds(begun).saturating_sub(at.since.load(Ordering::Relaxed));
            if u128::from(taken) > PATIENCE.as_millis() && !over.load(Ordering::Relaxed) {
                let index = at.index.load(Ordering::Relaxed);
                println!("text {index} hangs: {:?}", generator.text(index));
                process::exit(1);
            }
        }
    }
}
