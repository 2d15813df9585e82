//! The times for which a trajectory is written out: at a step, from a list, or at what happens.

use crate::number;
use crate::order::sort_by;
use crate::trajectory::Trajectory;

/// The most rows that are written.
pub const MOST_ROWS: usize = 10_000;

/// About how many rows a step has that nobody chose.
const USUAL_ROWS: f64 = 60.0;

/// Which times are asked for.
#[derive(Clone, Debug, PartialEq)]
pub enum Times {
    /// From 0 to the end, so far apart: above 0.
    Every(f64),
    /// These, each 0 or more.
    At(Vec<f64>),
    /// None but those at which something happens.
    Events,
}

impl Times {
    /// Reads a step as it is typed, in the grammar of the link; the usual step where nothing is.
    ///
    /// # Errors
    /// In words: no number, not above 0, or more than [`MOST_ROWS`] of them.
    pub fn every(text: &str, trajectory: &Trajectory) -> Result<Times, String> {
        let text = text.trim();
        if text.is_empty() {
            return Ok(Times::Every(usual_step(trajectory.shown)));
        }
        let step = number::read(text).map_err(|why| format!("`{text}`: {why}."))?;
        if step <= 0.0 {
            return Err(format!("`{text}`: must be more than 0."));
        }
        if trajectory.shown / step > MOST_ROWS as f64 {
            return Err(format!("`{text}`: that would be more than {MOST_ROWS} rows."));
        }
        Ok(Times::Every(step))
    }

    /// Reads a list of times with a comma between, in the grammar of the link.
    ///
    /// # Errors
    /// In words: nothing there, no number, below 0, or more than [`MOST_ROWS`] of them.
    pub fn list(text: &str) -> Result<Times, String> {
        let items: Vec<&str> = text.split(',').map(str::trim).collect();
        if items == [""] {
            return Err("Write the times with a comma between: 0, 2.5, 8.".into());
        }
        if items.len() > MOST_ROWS {
            return Err(format!("That would be more than {MOST_ROWS} rows."));
        }
        let time = |item: &&str| match number::read(item) {
            Ok(time) if time < 0.0 => Err(format!("`{item}`: must be 0 or more.")),
            Ok(time) => Ok(time),
            Err(why) => Err(format!("`{item}`: {why}.")),
        };
        items.iter().map(time).collect::<Result<_, _>>().map(Times::At)
    }

    /// The times in order, each once, without those of the events.
    pub(super) fn of(&self, trajectory: &Trajectory) -> Vec<f64> {
        let mut times = match self {
            Times::Every(step) => stepped(*step, trajectory.shown),
            Times::At(times) => times.clone(),
            Times::Events => Vec::new(),
        };
        sort_by(&mut times, f64::total_cmp);
        times.dedup();
        times
    }
}

/// A step of 1, 2 or 5 times a power of ten that gives about sixty rows up to the time `shown`, above 0.
pub fn usual_step(shown: f64) -> f64 {
    let least = shown / USUAL_ROWS;
    // The exponent as it is written: a power that is read from text is the nearest there is.
    let exponent = format!("{least:e}");
    let exponent = exponent.split_once('e').map_or("0", |(_, exponent)| exponent);
    let candidates = ["1", "2", "5", "10"]
        .iter()
        .filter_map(|digit| number::plain(&format!("{digit}e{exponent}")));
    candidates
        .into_iter()
        .find(|step| *step >= least)
        .unwrap_or(least)
}

/// The multiples of `step` from 0 to `last`, each as its decimals say: 3 × 0.1 is 0.3.
fn stepped(step: f64, last: f64) -> Vec<f64> {
    let mut scale = 1.0;
    // A decimal with few digits is a whole number over a power of ten, and both of these are exact.
    while scale < 1e15 && (step * scale).round() / scale != step {
        scale *= 10.0;
    }
    let whole = (step * scale).round();
    let exact = whole / scale == step && whole * (last / step) < 9e15;
    let time = |count: usize| {
        if exact {
            count as f64 * whole / scale
        } else {
            count as f64 * step
        }
    };
    (0..=MOST_ROWS)
        .map(time)
        .take_while(|time| *time <= last)
        .collect()
}

#[cfg(test)]
mod tests {
    use super::super::finding::tests::worked_out;
    use super::*;

    #[test]
    fn steps_are_the_decimals_that_were_asked_for() {
        assert_eq!(stepped(0.1, 0.75), [0.0, 0.1, 0.2, 0.3, 0.4, 0.5, 0.6, 0.7]);
        assert_eq!(stepped(1.5e-7, 4e-7), [0.0, 1.5e-7, 3e-7]);
        assert_eq!(stepped(1.0 / 3.0, 1.0).len(), 4);
        assert_eq!(stepped(1e300, 1e299), [0.0]);
    }

    #[test]
    fn the_usual_step_is_round() {
        for (shown, step) in [
            (8.81, 0.2),
            (60.0, 1.0),
            (61.0, 2.0),
            (4e-7, 1e-8),
            (5.5e20, 1e19),
        ] {
            assert_eq!(usual_step(shown), step, "{shown}");
        }
    }

    #[test]
    fn what_is_asked_for_is_read_in_the_grammar_of_the_link() {
        let (_, _, fight) = worked_out("x.start=600&x.rate=0.04&y.start=400&y.rate=0.06&y.break=0.4");
        let trajectory = fight.trajectory.expect("was asked for");
        assert_eq!(Times::every(" 0.5", &trajectory), Ok(Times::Every(0.5)));
        assert_eq!(Times::every("", &trajectory), Ok(Times::Every(0.2)));
        assert_eq!(Times::list("0, 2.5,8"), Ok(Times::At(vec![0.0, 2.5, 8.0])));
        for wrong in ["0", "-1", "0,5", "a", "1e-9"] {
            let why = Times::every(wrong, &trajectory).expect_err(wrong);
            assert!(
                why.starts_with(&format!("`{wrong}`: ")) && why.ends_with('.'),
                "{why}"
            );
        }
        for wrong in ["", "1;2", "1,,2", "-1"] {
            assert!(Times::list(wrong).is_err(), "{wrong}");
        }
    }
}
