//! Numbers, good and bad, as texts.

use fastrand::Rng;

/// Good numbers where something changes: limits, neighbours of limits, the least that a double holds.
const EDGES: [&str; 22] = [
    "0",
    "-0",
    "1",
    "0.5",
    "2",
    "3",
    "10",
    "1e9",
    "1e-9",
    "1e-17",
    "1e-300",
    "5e-324",
    "2.2250738585072014e-308",
    "0.9999999999999999",
    "1.0000000000000002",
    "0.9999999999",
    "999999999.9999999",
    "1000000000.0000001",
    "0.1",
    "0.30000000000000004",
    "9007199254740993",
    "1e308",
];

/// What is no number here, or none anywhere.
const BAD: [&str; 34] = [
    "",
    " ",
    "5.",
    ".5",
    "1,000",
    "0,04",
    "1e+5",
    "+1",
    "--1",
    "-",
    "1e",
    "e5",
    "1e999",
    "1e-999",
    "-1",
    "-1e-300",
    "\u{2212}3",
    "NaN",
    "inf",
    "Infinity",
    "-inf",
    "0x10",
    "1_000",
    "1 000",
    "1.2.3",
    "1e5e5",
    "\u{661}\u{662}",
    "½",
    "1/2",
    "4%",
    "true",
    "null",
    "1;2",
    "\u{ff11}",
];

/// A number as somebody might write it, an edge, or something that is none.
pub(super) fn number(rng: &mut Rng) -> String {
    match rng.u8(..20) {
        0..=5 => format!("{}", 1 + rng.u32(..1000)),
        6..=8 => format!("0.{:0width$}", 1 + rng.u32(..9999), width = rng.usize(1..7)),
        9..=12 => spread(rng),
        13..=15 => pick(rng, &EDGES).to_owned(),
        16 => quantity(rng),
        17 => long(rng),
        _ => pick(rng, &BAD).to_owned(),
    }
}

/// A good number above 0, over eighteen powers of ten, with few digits or with all.
pub(super) fn spread(rng: &mut Rng) -> String {
    let value = 10f64.powf(18.0 * rng.f64() - 9.0);
    if rng.bool() {
        format!("{value:?}")
    } else {
        format!("{value:.2e}")
    }
}

/// A number in doubt or in question.
fn quantity(rng: &mut Rng) -> String {
    let (one, two, three) = (spread(rng), spread(rng), spread(rng));
    match rng.u8(..6) {
        0 => format!("{one}..{two}"),
        1 => format!("{one}..{two}..{three}"),
        2 => format!("{one}?"),
        3 => format!("{one}?{two}..{three}"),
        4 => "?".to_owned(),
        _ => format!("?{one}...{two}"),
    }
}

/// Many digits.
fn long(rng: &mut Rng) -> String {
    let digits = "9".repeat(rng.usize(1..400));
    match rng.u8(..3) {
        0 => digits,
        1 => format!("0.{digits}"),
        _ => format!("1e-{digits}"),
    }
}

/// A double next to the number of a text, a power of ten of it, or the text itself where it is no number.
pub(super) fn near(rng: &mut Rng, text: &str) -> String {
    let Ok(value) = text.parse::<f64>() else {
        return text.to_owned();
    };
    let other = match rng.u8(..6) {
        0 => value.next_up(),
        1 => value.next_down(),
        2 => value * 10f64.powi(rng.i32(-12..13)),
        3 => value * (1.0 + 1e-12 * (rng.f64() - 0.5)),
        4 => value * 2.0 * rng.f64(),
        _ => -value,
    };
    format!("{other:?}")
}

pub(super) fn pick<'a>(rng: &mut Rng, from: &[&'a str]) -> &'a str {
    rng.choice(from).copied().unwrap_or_default()
}
