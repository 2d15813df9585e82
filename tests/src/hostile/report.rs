//! What a run found, and how it is told.

use std::collections::BTreeMap;
use std::fmt;
use std::time::{Duration, Instant};

use aftercount_core::work::Work;

use super::{Depth, Generator, MOST_SHOWN, MOST_WORK, Verdict, judge};

/// Of so many answers one may have an account that is out: the digits of strengths that are a hair's breadth of what a side
/// had, and of losses that are, at rates of many powers of ten, are not held to it.
const MOST_OUT: u64 = 400;

/// Of so many pages one may take more than [`MOST_SHOWN`].
const MOST_DEAR: u64 = 300;

/// How many of the slowest are timed again, since a busy machine makes any text slow once; a map may take ten seconds.
const TIMED_AGAIN: usize = 4;

/// How many kinds of faults are told.
const TOLD: usize = 20;

/// What a run found.
#[derive(Clone, Debug, Default)]
pub struct Report {
    answered: u64,
    refused: u64,
    in_full: u64,
    /// Answers whose account does not add up, and the first of them.
    out: (u64, Option<u64>),
    /// The slowest answers: how long they took, and their numbers.
    slowest: Vec<(Duration, u64)>,
    dearest: Told<u32>,
    dearest_shown: Told<u32>,
    /// Pages that took more than they should.
    dear: u64,
    /// By what is wrong in a few words: how often, the first text, and all that is to say of that.
    faults: BTreeMap<String, (u64, u64, String)>,
    taken: Duration,
    /// The texts to be told, by their numbers.
    texts: BTreeMap<u64, String>,
}

/// The greatest of something, and the text's number.
type Told<N> = (N, u64);

impl Report {
    pub(super) fn judged(&mut self, index: u64, verdict: Verdict, taken: Duration) {
        let Verdict::Answered { work, shown, adds_up } = verdict else {
            self.refused += 1;
            return;
        };
        self.answered += 1;
        if !adds_up {
            self.out.0 += 1;
            self.out.1 = self.out.1.or(Some(index));
        }
        let all = |work: Work| (work.evaluations + work.steps, index);
        self.dearest = self.dearest.max(all(work));
        match shown {
            Some(shown) => {
                self.in_full += 1;
                self.dearest_shown = self.dearest_shown.max(all(shown));
                self.dear += u64::from(all(shown).0 > MOST_SHOWN);
            }
            None => self.slow(taken, index),
        }
    }

    fn slow(&mut self, taken: Duration, index: u64) {
        if self.slowest.len() < TIMED_AGAIN || self.slowest.last().is_some_and(|last| taken > last.0) {
            self.slowest.push((taken, index));
            self.slowest.sort_by(|one, other| other.cmp(one));
            self.slowest.truncate(TIMED_AGAIN);
        }
    }

    pub(super) fn fault(&mut self, index: u64, what: String) {
        let kind = what
            .split(':')
            .next()
            .unwrap_or_default()
            .chars()
            .take(60)
            .collect();
        self.faults.entry(kind).or_insert((0, index, what)).0 += 1;
    }

    pub(super) fn and(mut self, other: Report) -> Report {
        self.answered += other.answered;
        self.refused += other.refused;
        self.in_full += other.in_full;
        self.dear += other.dear;
        self.out.0 += other.out.0;
        self.out.1 = self.out.1.into_iter().chain(other.out.1).min();
        for (taken, index) in other.slowest {
            self.slow(taken, index);
        }
        self.dearest = self.dearest.max(other.dearest);
        self.dearest_shown = self.dearest_shown.max(other.dearest_shown);
        for (kind, (count, index, what)) in other.faults {
            self.faults.entry(kind).or_insert((0, index, what)).0 += count;
        }
        self
    }

    /// Times the slowest again, and fetches the texts that are to be told.
    pub(super) fn close(&mut self, generator: &Generator, taken: Duration) {
        self.taken = taken;
        for (taken, index) in &mut self.slowest {
            let text = generator.text(*index);
            let begun = Instant::now();
            let _ = judge(&text, Depth::Answer);
            *taken = begun.elapsed().min(*taken);
        }
        self.slowest.sort_by(|one, other| other.cmp(one));
        let slowest = self.slowest.first().map(|slowest| slowest.1);
        let told = [
            Some(self.dearest.1),
            Some(self.dearest_shown.1),
            slowest,
            self.out.1,
        ];
        let told = told
            .into_iter()
            .flatten()
            .chain(self.faults.values().map(|fault| fault.1));
        self.texts = told.map(|index| (index, generator.text(index))).collect();
    }

    /// How many faults there are, a budget overdrawn among them.
    pub fn faults(&self) -> u64 {
        let faults: u64 = self.faults.values().map(|fault| fault.0).sum();
        let overdrawn = [
            self.out.0 * MOST_OUT > self.answered,
            self.dear * MOST_DEAR > self.in_full,
        ];
        faults + overdrawn.into_iter().map(u64::from).sum::<u64>()
    }

    /// Whether there is none.
    pub fn is_good(&self) -> bool {
        self.faults() == 0
    }

    fn text(&self, index: u64) -> String {
        format!(
            "text {index}: {:?}",
            self.texts.get(&index).map_or("", String::as_str)
        )
    }
}

impl fmt::Display for Report {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let faults = self.faults();
        let (answered, refused, in_full) = (self.answered, self.refused, self.in_full);
        let count = answered + refused + self.faults.values().map(|fault| fault.0).sum::<u64>();
        let seconds = self.taken.as_secs_f64();
        writeln!(
            f,
            "{count} hostile texts in {seconds:.0} s: {answered} answered, {refused} refused with a reason"
        )?;
        writeln!(
            f,
            "{in_full} of the answers were looked at in full, as the page shows them"
        )?;
        if let Some((taken, index)) = self.slowest.first() {
            writeln!(
                f,
                "slowest answer: {:.1} ms, {}",
                1e3 * taken.as_secs_f64(),
                self.text(*index)
            )?;
        }
        let (work, index) = self.dearest;
        writeln!(
            f,
            "dearest answer: {work} of at most {MOST_WORK} evaluations and steps, {}",
            self.text(index)
        )?;
        let ((work, index), dear) = (self.dearest_shown, self.dear);
        writeln!(
            f,
            "{dear} pages took more than {MOST_SHOWN} (at most one in {MOST_DEAR}), the dearest {work}, {}",
            self.text(index)
        )?;
        if let (out, Some(index)) = self.out {
            writeln!(
                f,
                "{out} accounts out by more than 1e-9 (at most one in {MOST_OUT}), first {}",
                self.text(index)
            )?;
        }
        for (kind, (count, index, what)) in self.faults.iter().take(TOLD) {
            writeln!(
                f,
                "\nFAULT, {count} times: {kind}\n  {}\n  {what}",
                self.text(*index)
            )?;
        }
        // The closing line that readers of test runs look for.
        write!(f, "{} passed, {faults} failed", answered + refused)
    }
}
