//! The core's side of `tests/speed/speed.py`: how long its answers take, and links for a batch.
//!
//! `speed times` reads lines of a name and a link, tab between, and prints for each as one line of JSON the nanoseconds
//! from the text of the link to the JSON of its answer, and, where its time is a quadrature, those of the quadrature and of
//! the integrator to the same moment. `speed links N` prints N mixed links, `speed ugly N` N ugly schedules. `speed slowest`
//! reads links and prints those that took longest, with their microseconds and evaluations.

use aftercount_core::answer::answer;
use aftercount_core::course::Course;
use aftercount_core::fight::{Effort, break_line, fight, plain_piece};
use aftercount_core::golden;
use aftercount_core::laws::along_orbit::AlongOrbit;
use aftercount_core::outcome::{Breaks, Method};
use aftercount_core::pairs::Pairs;
use aftercount_core::sides::Side;
use aftercount_core::statement::Statement;
use aftercount_core::terms::Engagement;
use aftercount_tests::ugly;
use serde_json::{Value, json};
use std::hint::black_box;
use std::io::{BufWriter, Write};
use std::process::ExitCode;
use std::time::Instant;

/// Each time is the least of so many, each the mean over a row of calls that takes some milliseconds.
const ROUNDS: u32 = 15;

fn main() -> ExitCode {
    let arguments: Vec<String> = std::env::args().skip(1).collect();
    match arguments.iter().map(String::as_str).collect::<Vec<_>>()[..] {
        ["times"] => {
            for line in std::io::stdin().lines() {
                let line = line.expect("lines of text");
                let (name, link) = line.split_once('\t').expect("a name and a link");
                println!("{}", times(name, link));
            }
            ExitCode::SUCCESS
        }
        ["links", count] => {
            let count: u32 = count.parse().expect("how many");
            let mut out = BufWriter::new(std::io::stdout().lock());
            for index in 0..count {
                writeln!(out, "{}", golden::link(index)).expect("somebody reads them");
            }
            ExitCode::SUCCESS
        }
        ["ugly", count] => {
            let count: u32 = count.parse().expect("how many");
            let mut out = BufWriter::new(std::io::stdout().lock());
            for index in 0..count {
                writeln!(out, "{}", ugly::link(index)).expect("somebody reads them");
            }
            ExitCode::SUCCESS
        }
        ["slowest"] => {
            slowest();
            ExitCode::SUCCESS
        }
        _ => {
            eprintln!("speed: `times`, `links N`, `ugly N` or `slowest`");
            ExitCode::from(2)
        }
    }
}

/// How many of the slowest are printed.
const SLOWEST: usize = 12;

fn slowest() {
    let mut found: Vec<(u128, u32, String)> = Vec::new();
    for line in std::io::stdin().lines() {
        let line = line.expect("lines of text");
        let Ok(statement) = Statement::read(&Pairs::parse(&line)) else {
            continue;
        };
        let engagement = statement.engagement();
        let start = Instant::now();
        let work = fight(&engagement, Effort::Outcome).work;
        found.push((start.elapsed().as_micros(), work.evaluations(), line));
    }
    println!("{} links", found.len());
    for order in [
        |a: &(u128, u32, String)| a.0,
        |a: &(u128, u32, String)| u128::from(a.1),
    ] {
        found.sort_by_key(|one| std::cmp::Reverse(order(one)));
        for (microseconds, evaluations, link) in found.iter().take(SLOWEST) {
            println!("{microseconds} µs, {evaluations} evaluations: {link}");
        }
    }
}

fn times(name: &str, link: &str) -> Value {
    let written = answer(link).to_json();
    let outcome: Value = serde_json::from_str(&written).expect("JSON");
    let whole = nanoseconds(|| answer(black_box(link)).to_json());
    let mut found = json!({"name": name, "whole": whole, "outcome": outcome});
    let engagement = Statement::read(&Pairs::parse(link))
        .unwrap_or_else(|why| panic!("{link}: {why:?}"))
        .engagement();
    if let Some((quadrature, integrator, apart)) = ways(&engagement) {
        found["quadrature"] = json!(quadrature);
        found["integrator"] = json!(integrator);
        found["apart"] = json!(apart);
    }
    found
}

/// The time to the break, by quadrature and by the integrator: the nanoseconds of each, and how far they are apart.
fn ways(engagement: &Engagement) -> Option<(f64, f64, f64)> {
    let outcome = fight(engagement, Effort::Outcome).outcome;
    let loser = match outcome.breaks {
        Breaks::X => Side::X,
        Breaks::Y => Side::Y,
        _ => return None,
    };
    if outcome.method != Method::Quadrature {
        return None;
    }
    let piece = plain_piece(engagement)?;
    let line = break_line(engagement, loser);
    let point = piece.point_with(loser, line);
    let by_quadrature = || AlongOrbit { piece: &piece }.time_to(&point).value;
    // The integrator is told when to stop, which it would have to find out.
    let horizon = 1.01 * by_quadrature();
    let by_integrator = || {
        Course::follow(piece.start, piece.fire(), horizon, f64::EPSILON)
            .time_to(loser, f64::from(line))
            .unwrap_or(f64::NAN)
    };
    let apart = (by_integrator() / by_quadrature() - 1.0).abs();
    Some((nanoseconds(by_quadrature), nanoseconds(by_integrator), apart))
}

/// How long a call takes.
fn nanoseconds<T>(call: impl Fn() -> T) -> f64 {
    let once = Instant::now();
    black_box(call());
    let row = (3e6 / once.elapsed().as_nanos().max(1) as f64)
        .ceil()
        .clamp(1.0, 1e5) as u32;
    (0..ROUNDS)
        .map(|_| {
            let start = Instant::now();
            for _ in 0..row {
                black_box(call());
            }
            start.elapsed().as_nanos() as f64 / f64::from(row)
        })
        .fold(f64::INFINITY, f64::min)
}
