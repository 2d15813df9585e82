//! Gives the core millions of hostile texts, and reports how many there were, the slowest and the dearest.
//!
//! `cargo run --profile checked -p aftercount-tests --bin hostile [-- COUNT [SEED]]`. With `--text N` it shows text number N
//! and what comes back for it; with `--dictionary` or `--corpus FOLDER` it writes what a fuzzer begins with.

use std::fs;
use std::path::Path;
use std::process::ExitCode;
use std::time::Instant;

use aftercount_tests::hostile::{Corpus, Depth, Generator, SEED, dictionary, judge, run};

/// How many texts where none are asked for.
const COUNT: u64 = 2_200_000;

const USAGE: &str = "hostile [COUNT [SEED]] | --text N | --dictionary | --corpus FOLDER";

fn main() -> ExitCode {
    let arguments: Vec<String> = std::env::args().skip(1).collect();
    let number = |text: &str| text.parse::<u64>().ok();
    let done = match arguments.iter().map(String::as_str).collect::<Vec<_>>()[..] {
        ["--dictionary"] => {
            print!("{}", dictionary());
            Ok(())
        }
        ["--corpus", folder] => write_corpus(Path::new(folder)).map_err(|why| format!("{folder}: {why}")),
        ["--text", index] => number(index).map(show).ok_or_else(|| USAGE.to_owned()),
        [] => judged(Some(COUNT), Some(SEED)),
        [count] => judged(number(count), Some(SEED)),
        [count, seed] => judged(number(count), number(seed)),
        _ => Err(USAGE.to_owned()),
    };
    match done {
        Ok(()) => ExitCode::SUCCESS,
        Err(why) => {
            eprintln!("{why}");
            ExitCode::FAILURE
        }
    }
}

fn judged(count: Option<u64>, seed: Option<u64>) -> Result<(), String> {
    let (Some(count), Some(seed)) = (count, seed) else {
        return Err(USAGE.to_owned());
    };
    let report = run(count, seed);
    println!("{report}");
    if report.is_good() {
        Ok(())
    } else {
        Err("there are faults: see above".to_owned())
    }
}

/// One text, and what comes back for it.
fn show(index: u64) {
    let text = Generator::new(SEED).text(index);
    println!("{text}");
    for depth in [Depth::Answer, Depth::Page] {
        let begun = Instant::now();
        let verdict = judge(&text, depth);
        println!(
            "{depth:?}, {:.2} ms: {verdict:?}",
            1e3 * begun.elapsed().as_secs_f64()
        );
    }
}

/// The committed links, one a file, as a fuzzer takes them.
fn write_corpus(folder: &Path) -> std::io::Result<()> {
    fs::create_dir_all(folder)?;
    for (place, link) in Corpus::committed().links.iter().enumerate() {
        fs::write(folder.join(format!("{place:05}")), link)?;
    }
    Ok(())
}
