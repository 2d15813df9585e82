//! The page's own measure of how long it keeps the browser from its other work, in the browser's list of measures.

use crate::dom::Dom;
use web_sys::Performance;

/// Reading, working out and showing a text.
pub(crate) const WORK: &str = "aftercount.work";
/// A slice of the search for what would reverse the outcome.
pub(crate) const REVERSAL: &str = "aftercount.reversal";
/// A slice of what is asked.
pub(crate) const ASKING: &str = "aftercount.asking";
/// Drawing all pictures.
pub(crate) const DRAW: &str = "aftercount.draw";

/// Measures from its start until it is dropped. Only the last measure of a name is kept.
pub(crate) struct Stopwatch {
    clock: Option<Performance>,
    name: &'static str,
    began: f64,
}

impl Stopwatch {
    pub(crate) fn start(dom: &Dom, name: &'static str) -> Stopwatch {
        let clock = dom.window.performance();
        if let Some(clock) = &clock {
            clock.clear_marks_with_mark_name(name);
            clock.clear_measures_with_measure_name(name);
            // A browser that keeps no marks measures nothing, and loses nothing.
            let _ = clock.mark(name);
        }
        let began = now(clock.as_ref());
        Stopwatch { clock, name, began }
    }

    /// How long it has been running, in milliseconds; 0 without a clock.
    pub(crate) fn elapsed(&self) -> f64 {
        now(self.clock.as_ref()) - self.began
    }
}

fn now(clock: Option<&Performance>) -> f64 {
    clock.map_or(0.0, Performance::now)
}

impl Drop for Stopwatch {
    fn drop(&mut self) {
        if let Some(clock) = &self.clock {
            let _ = clock.measure_with_start_mark(self.name, self.name);
        }
    }
}
