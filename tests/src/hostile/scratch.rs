//! Engagements made from nothing, near the edges of what the keys allow.

use aftercount_core::keys::FIRES;
use fastrand::Rng;

use super::numbers::{number, pick, spread};

/// Exponents where the formulas change, and others.
const EXPONENTS: [&str; 12] = [
    "0",
    "0.5",
    "1",
    "1.5",
    "2",
    "3",
    "0.9999999999999999",
    "1.0000000000000002",
    "0.3",
    "1.7",
    "2.9",
    "1e-9",
];

/// Fractions for break points.
const FRACTIONS: [&str; 8] = [
    "1",
    "0.3",
    "0.5",
    "0.9999999999999999",
    "1e-9",
    "1e-300",
    "0.05",
    "0.7",
];

/// The text of an engagement with all that its laws need.
pub(super) fn engagement(rng: &mut Rng) -> String {
    let mut pairs = Vec::new();
    for side in ["x", "y"] {
        side_of(rng, side, &mut pairs);
    }
    if rng.bool() {
        planted_tie(rng, &mut pairs);
    }
    if rng.u8(..3) == 0 {
        phases(rng, &mut pairs);
    }
    if rng.u8(..5) == 0 {
        let (from, closing, least) = (spread(rng), spread(rng), spread(rng));
        pairs.push(format!(
            "range={from}&range.closing={closing}&range.least={least}"
        ));
    }
    if rng.u8(..3) == 0 {
        pairs.push(format!("until={}", spread(rng)));
    }
    rng.shuffle(&mut pairs);
    pairs.push("v=1".to_owned());
    pairs.join("&")
}

fn side_of(rng: &mut Rng, side: &str, pairs: &mut Vec<String>) {
    let mut put = |key: &str, text: String| pairs.push(format!("{side}.{key}={text}"));
    let start = match rng.u8(..8) {
        0 => "0".to_owned(),
        1..=3 => spread(rng),
        _ => format!("{}", 1 + rng.u32(..2000)),
    };
    put("start", start);
    put("fire", pick(rng, FIRES).to_owned());
    put("rate", spread(rng));
    put("half", if rng.bool() { "0".to_owned() } else { spread(rng) });
    put("p", pick(rng, &EXPONENTS).to_owned());
    put("q", pick(rng, &EXPONENTS).to_owned());
    if rng.bool() {
        put("break", pick(rng, &FRACTIONS).to_owned());
    }
    for key in ["lost", "wastage", "support.area", "support.aimed"] {
        if rng.u8(..4) == 0 {
            put(key, spread(rng));
        }
    }
    if rng.u8(..6) == 0 {
        put("reach", spread(rng));
        put("reach.shape", pick(rng, &EXPONENTS).to_owned());
    }
    if rng.u8(..3) == 0 {
        put("join", joins(rng));
    }
    if rng.u8(..4) == 0 {
        put("flow", flows(rng));
    }
}

/// A list of reserves, seldom longer than is allowed, at times that are often the same.
pub(super) fn joins(rng: &mut Rng) -> String {
    let count = if rng.u8(..30) == 0 { 24 } else { rng.usize(1..6) };
    let items = (0..count).map(|_| {
        let sign = if rng.u8(..4) == 0 { "-" } else { "" };
        format!("{sign}{}@{}", spread(rng), time(rng))
    });
    items.collect::<Vec<_>>().join(",")
}

/// A list of flows, open or closed.
pub(super) fn flows(rng: &mut Rng) -> String {
    let count = if rng.u8(..30) == 0 { 24 } else { rng.usize(1..4) };
    let items = (0..count).map(|_| {
        let to = if rng.bool() { time(rng) } else { String::new() };
        format!("{}@{}/{to}", spread(rng), time(rng))
    });
    items.collect::<Vec<_>>().join(",")
}

fn time(rng: &mut Rng) -> String {
    match rng.u8(..4) {
        0 => spread(rng),
        1 => number(rng),
        _ => format!("{}", rng.u32(..12)),
    }
}

fn phases(rng: &mut Rng, pairs: &mut Vec<String>) {
    for phase in 1..=rng.u8(1..10) {
        let side = if rng.bool() { "x" } else { "y" };
        let (key, text) = match rng.u8(..4) {
            0 => ("wastage", spread(rng)),
            1 => ("support.aimed", spread(rng)),
            _ => ("rate", spread(rng)),
        };
        pairs.push(format!(
            "phase{phase}.from={}&phase{phase}.{side}.{key}={text}",
            time(rng)
        ));
        if rng.u8(..4) == 0 {
            let fire = pick(rng, FIRES);
            pairs.push(format!(
                "phase{phase}.{side}.fire={fire}&phase{phase}.{side}.half={}",
                spread(rng)
            ));
        }
    }
}

/// Rates that tie the two sides under aimed fire, to the rounding or next to it.
fn planted_tie(rng: &mut Rng, pairs: &mut Vec<String>) {
    let (x, y) = (f64::from(1 + rng.u32(..2000)), f64::from(1 + rng.u32(..2000)));
    let rate = 10f64.powf(6.0 * rng.f64() - 6.0);
    let mut tied = rate * (x / y) * (x / y);
    for _ in 0..rng.u8(..4) {
        tied = tied.next_up();
    }
    pairs.retain(|pair| ![".start=", ".rate="].iter().any(|key| pair[1..].starts_with(key)));
    pairs.push(format!("x.start={x}&y.start={y}&x.rate={rate:?}&y.rate={tied:?}"));
}
