//! The batch door: one link a line in, one JSON object a line out, blank and bad lines answered in place.

use aftercount_core::answer::answer;
use std::io::{self, BufRead, BufReader, BufWriter, Write};

fn main() -> io::Result<()> {
    let mut out = BufWriter::new(io::stdout().lock());
    let mut line = Vec::new();
    let mut input = BufReader::new(io::stdin().lock());
    loop {
        line.clear();
        if input.read_until(b'\n', &mut line)? == 0 {
            return out.flush();
        }
        // A byte that is no UTF-8 becomes a mark that no key or number holds, and so a problem of that line.
        let link = String::from_utf8_lossy(&line);
        writeln!(out, "{}", answer(&link).to_json())?;
        // A pipe that asks line by line is answered line by line.
        if input.buffer().is_empty() {
            out.flush()?;
        }
    }
}
