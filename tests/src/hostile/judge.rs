//! Whether what comes back for a text is as it must be, whatever the text.

use aftercount_core::answer::{Answer, answer};
use aftercount_core::continued::continued;
use aftercount_core::fight::{Effort, Fight, fight};
use aftercount_core::outcome::{Breaks, Ended, Outcome, SideOutcome};
use aftercount_core::pairs::{LONGEST_LINK, Pairs};
use aftercount_core::problem::{Problem, is_hidden};
use aftercount_core::sides::Side;
use aftercount_core::statement::Statement;
use aftercount_core::trajectory::Trajectory;
use aftercount_core::words::decided::decided;
use aftercount_core::words::figures::figures;
use aftercount_core::words::working::{WorkingLine, working};
use aftercount_core::words::{meaning, reading, sentence, timeline};
use aftercount_core::work::Work;
use aftercount_core::{keys, picture};

/// How much is looked at.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Depth {
    /// The answer, as the command line gives it.
    Answer,
    /// All that the page shows: words, working, tables, pictures.
    Page,
}

/// What came back, where all is well.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Verdict {
    /// It was refused, with so many problems.
    Refused(usize),
    /// It was worked out.
    Answered {
        /// What the answer took.
        work: Work,
        /// What all took that the page shows of it, where that was looked at; may be more than [`MOST_SHOWN`].
        shown: Option<Work>,
        /// Whether what each side had, lost and has left adds up.
        adds_up: bool,
    },
}

/// The most that an answer may take: evaluations of integrands and steps of the integrator together.
pub const MOST_WORK: u32 = 200_000;

/// The same for nearly all that the page shows: some hundred strengths over time besides.
pub const MOST_SHOWN: u32 = 200_000;

/// The part of what a side had by which its account may be out.
const ROUNDING: f64 = 1e-9;

/// Judges what comes back for `text`.
///
/// # Errors
/// What is wrong with it, in words.
///
/// # Panics
/// Where the core does, which is the worst that can be found.
pub fn judge(text: &str, depth: Depth) -> Result<Verdict, String> {
    let pairs = Pairs::parse(text);
    written_as_read(&pairs)?;
    judged(&pairs, &answer(text), depth)
}

fn judged(pairs: &Pairs, answer: &Answer, depth: Depth) -> Result<Verdict, String> {
    match answer {
        Answer::Problems(problems) => {
            refused_with_reasons(pairs, problems)?;
            Ok(Verdict::Refused(problems.len()))
        }
        // A number in question has a value now, or there is no outcome to look at.
        Answer::Asked {
            outcome: Some(outcome),
            ..
        } => judged(pairs, outcome, depth),
        Answer::Asked { outcome: None, .. } => Ok(Verdict::Answered {
            work: Work::default(),
            shown: None,
            adds_up: true,
        }),
        Answer::Outcome { outcome, .. } => {
            makes_sense(outcome)?;
            let (work, shown) = worked_out(pairs, outcome, depth)?;
            // What flows in for ever is without bound, and so are its losses.
            let flows = outcome.pieces.last().is_some_and(|piece| piece.to.is_none())
                && pairs.iter().any(|(key, _)| key.ends_with(".flow"));
            let adds_up = flows || Side::BOTH.into_iter().all(|side| adds_up(outcome.sides()[side]));
            Ok(Verdict::Answered { work, shown, adds_up })
        }
    }
}

/// The writer's round trip: what is written reads as the same pairs, and is written the same again.
fn written_as_read(pairs: &Pairs) -> Result<(), String> {
    let written = pairs.link();
    // Far longer texts are not even taken apart.
    if written.len() > 8 * LONGEST_LINK {
        return Ok(());
    }
    let again = Pairs::parse(&written);
    if in_written_order(&again) != in_written_order(pairs) {
        return Err(format!("written {written:?}, it reads as another text"));
    }
    if again.link() != written {
        return Err(format!("written {written:?}, then {:?}", again.link()));
    }
    Ok(())
}

/// The pairs with the version last, as the writer puts them.
fn in_written_order(pairs: &Pairs) -> Vec<(&str, &str)> {
    let mut all: Vec<(&str, &str)> = pairs.iter().collect();
    if !all.is_empty() && !all.iter().any(|(key, _)| *key == "v") {
        all.push(("v", "1"));
    }
    all.sort_by_key(|(key, _)| *key == "v");
    all.retain(|pair| *pair != ("v", "1"));
    all
}

/// Every problem names a key that stands in the text or is missing from it, or says what it is about.
fn refused_with_reasons(pairs: &Pairs, problems: &[Problem]) -> Result<(), String> {
    if problems.is_empty() {
        return Err("refused without a problem".to_owned());
    }
    for problem in problems {
        let words = &problem.problem;
        if words.trim().is_empty() || problem.line().chars().any(is_hidden) {
            return Err(format!("a problem without words that can be read: {problem:?}"));
        }
        let says_why = match (&problem.key, &problem.found) {
            // Of the text as a whole: its length, that it is empty, or a piece that is no pair.
            (None, None) => words.contains(&LONGEST_LINK.to_string()) || words.contains("no engagement"),
            (None, Some(found)) => !found.contains('=') && words == "write it as key=value",
            (Some(key), Some(_)) => pairs.iter().any(|(name, _)| name == key),
            (Some(key), None) => keys::find(key).is_some() || keys::is_numbered(key),
        };
        if !says_why {
            return Err(format!("a problem that names no key and no reason: {problem:?}"));
        }
    }
    Ok(())
}

/// An end that fits who broke, at a time that is one, and pieces without a gap.
fn makes_sense(outcome: &Outcome) -> Result<(), String> {
    let wrong = |what: &str| Err(format!("{what}: {outcome:?}"));
    let decided = outcome.breaks != Breaks::Neither;
    if decided != (outcome.ended == Ended::Break) || (decided && outcome.time.is_none()) {
        return wrong("who breaks and how it ended do not agree");
    }
    let times = [outcome.time, outcome.below_one];
    if times
        .into_iter()
        .flatten()
        .any(|time| !time.is_finite() || time < 0.0)
    {
        return wrong("a time that is none");
    }
    let mut before = 0.0;
    for piece in &outcome.pieces {
        if piece.from != before || piece.to.is_some_and(|to| to < piece.from) {
            return wrong("pieces that do not follow one another");
        }
        // What never ends is the last.
        before = piece.to.unwrap_or(f64::NAN);
    }
    Ok(())
}

fn numbers_of(side: &SideOutcome) -> [f64; 9] {
    let losses = side.losses;
    [
        side.start,
        side.joined,
        side.withdrawn,
        side.committed,
        side.end.unwrap_or(0.0),
        losses.fire,
        losses.support,
        losses.wastage,
        losses.all,
    ]
}

/// Nobody lost or made: start, joined, withdrawn, losses and end are one account, with nothing below 0 in it, and nothing
/// that is no number.
fn adds_up(side: &SideOutcome) -> bool {
    let losses = side.losses;
    let rounding = ROUNDING * side.committed;
    let near = |one: f64, other: f64| (one - other).abs() <= rounding;
    let left = side.start + side.joined - side.withdrawn - losses.all;
    numbers_of(side).iter().all(|number| *number >= -rounding)
        && near(losses.fire + losses.support + losses.wastage, losses.all)
        && side.end.is_none_or(|end| near(left, end))
}

/// Works it out once more, counts, and looks at what else is shown of it.
fn worked_out(pairs: &Pairs, outcome: &Outcome, depth: Depth) -> Result<(Work, Option<Work>), String> {
    let statement =
        Statement::read(pairs).map_err(|problems| format!("answered, then refused: {problems:?}"))?;
    let engagement = statement.engagement();
    let again = fight(&engagement, Effort::Outcome);
    // As text, since what is no number is not equal to itself.
    let (one, other) = (format!("{outcome:?}"), format!("{:?}", again.outcome));
    if one != other {
        return Err(format!("two answers: {one}, {other}"));
    }
    let Work { evaluations, steps } = again.work;
    if evaluations + steps > MOST_WORK {
        return Err(format!(
            "too much work: {evaluations} evaluations and {steps} steps"
        ));
    }
    let shown = match depth {
        Depth::Answer => None,
        Depth::Page => Some(shown(pairs, &statement, &fight(&engagement, Effort::Trajectory))?),
    };
    Ok((again.work, shown))
}

/// Everything that the page makes of an outcome.
fn shown(pairs: &Pairs, statement: &Statement, fight: &Fight) -> Result<Work, String> {
    let outcome = &fight.outcome;
    let mut words = vec![sentence::sentence(statement, outcome)];
    words.extend(
        figures(statement, outcome)
            .rows
            .iter()
            .flat_map(|row| [row.values.x.clone(), row.values.y.clone()]),
    );
    words.extend(working(statement, outcome).iter().map(WorkingLine::text));
    words.extend(decided(statement, outcome));
    words.extend(Side::BOTH.map(|side| meaning::rate(statement, side)));
    words.extend(Side::BOTH.map(|side| meaning::break_point(statement, side)));
    words.extend(
        timeline::timeline(statement, fight)
            .into_iter()
            .map(|moment| moment.standing),
    );
    let pictures = [
        picture::strength(statement, fight),
        picture::orbit(statement, fight),
    ];
    for picture in pictures.into_iter().flatten() {
        let mut points = picture.lines.iter().flat_map(|line| &line.points);
        if points.any(|(across, up)| !across.is_finite() || !up.is_finite()) {
            return Err(format!("a line through nowhere: {}", picture.summary));
        }
        words.push(picture.summary);
    }
    if let Some(trajectory) = &fight.trajectory {
        words.push(reading::reading(statement, trajectory, trajectory.shown / 2.0));
        goes_on(pairs, statement, trajectory)?;
    }
    let own = pairs.link();
    let is_none = |words: &&String| {
        ["NaN", "inf "]
            .iter()
            .any(|mark| words.contains(mark) && !own.contains(mark))
    };
    match words.iter().find(is_none) {
        Some(words) => Err(format!("a number that is none is shown: {words}")),
        None => Ok(fight.trajectory.as_ref().map_or(fight.work, Trajectory::work)),
    }
}

/// The engagement that goes on from halfway is one that can be read.
fn goes_on(pairs: &Pairs, statement: &Statement, trajectory: &Trajectory) -> Result<(), String> {
    let half = trajectory.shown / 2.0;
    let left = trajectory.strengths_at(half);
    let over = half <= 0.0 || trajectory.ends().is_some_and(|end| half >= end);
    if over || left.x == 0.0 || left.y == 0.0 {
        return Ok(());
    }
    let on = continued(pairs, statement, trajectory, half);
    match Statement::read(&on) {
        Ok(_) => Ok(()),
        // Strengths and losses may have grown out of the limits of a text.
        Err(problems)
            if problems
                .iter()
                .all(|problem| problem.problem.starts_with("must be at most")) =>
        {
            Ok(())
        }
        Err(problems) => Err(format!("it goes on as {:?}, which has {problems:?}", on.link())),
    }
}
