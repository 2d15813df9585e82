//! The batch door: one link a line in, one JSON object a line out, blank and bad lines answered in place, in order.
//!
//! With `--working` each outcome also has its working, as the lines of plain text that the page shows; with `--reversal`
//! what would reverse it. The lines are worked out on all cores, a block at a time, so that memory stays flat however many
//! there are.

use aftercount_core::answer::{Besides, answer_with};
use std::io::{self, BufRead, BufReader, BufWriter, Write};
use std::process::ExitCode;
use std::thread;

/// Lines that one core is given at a time.
const BLOCK: usize = 512;

fn main() -> ExitCode {
    let mut besides = Besides::default();
    for option in std::env::args().skip(1) {
        let wanted = match option.as_str() {
            "--working" => &mut besides.working,
            "--reversal" => &mut besides.reversal,
            _ => return refuse(),
        };
        if std::mem::replace(wanted, true) {
            return refuse();
        }
    }
    match run(besides) {
        Ok(()) => ExitCode::SUCCESS,
        // Whoever reads the answers has enough of them.
        Err(error) if error.kind() == io::ErrorKind::BrokenPipe => ExitCode::SUCCESS,
        Err(error) => {
            eprintln!("outcome: {error}");
            ExitCode::FAILURE
        }
    }
}

fn refuse() -> ExitCode {
    eprintln!(
        "outcome: links on standard input, one a line; its options are --working and --reversal, each once"
    );
    ExitCode::from(2)
}

fn run(besides: Besides) -> io::Result<()> {
    let cores = thread::available_parallelism().map_or(1, usize::from);
    let mut out = BufWriter::new(io::stdout().lock());
    let mut input = BufReader::with_capacity(1 << 20, io::stdin());
    loop {
        let lines = read_lines(&mut input, cores * BLOCK)?;
        if lines.is_empty() {
            return out.flush();
        }
        for answer in answers(&lines, cores, besides) {
            writeln!(out, "{answer}")?;
        }
        // A pipe that asks line by line is answered line by line.
        if input.buffer().is_empty() {
            out.flush()?;
        }
    }
}

/// The lines that are there, at least one unless the input has ended, at most `most`.
fn read_lines(input: &mut BufReader<io::Stdin>, most: usize) -> io::Result<Vec<String>> {
    let mut lines = Vec::new();
    loop {
        let mut line = Vec::new();
        if input.read_until(b'\n', &mut line)? == 0 {
            return Ok(lines);
        }
        // A byte that is no UTF-8 becomes a mark that no key or number holds, and so a problem of that line.
        lines.push(String::from_utf8_lossy(&line).into_owned());
        if lines.len() == most || !input.buffer().contains(&b'\n') {
            return Ok(lines);
        }
    }
}

/// The answers in the order of the lines.
fn answers(lines: &[String], cores: usize, besides: Besides) -> Vec<String> {
    let share = lines.len().div_ceil(cores);
    let work = |lines: &[String]| -> Vec<String> {
        lines
            .iter()
            .map(|line| answer_with(line, besides).to_json())
            .collect()
    };
    if lines.len() < 2 * cores {
        return work(lines);
    }
    thread::scope(|scope| {
        let shares: Vec<_> = lines
            .chunks(share)
            .map(|lines| scope.spawn(move || work(lines)))
            .collect();
        shares
            .into_iter()
            .flat_map(|share| {
                share
                    .join()
                    .unwrap_or_else(|panic| std::panic::resume_unwind(panic))
            })
            .collect()
    })
}
