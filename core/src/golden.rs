//! The golden bits: one hash of 500 answers, which must be the same on every machine; the page must give the same answers.

use crate::answer::answer;
use crate::mark::fnv1a;

/// How many answers are hashed.
pub const COUNT: u32 = 500;

/// The link of golden answer number `index`: the pairings in turn, with numbers spread over decades.
pub fn link(index: u32) -> String {
    let mut state = u64::from(index).wrapping_mul(0x9e37_79b9_7f4a_7c15) ^ 0x2545_f491_4f6c_dd1d;
    let mut draw = |most: u32| {
        // xorshift64: enough to spread numbers, the same everywhere.
        state ^= state << 13;
        state ^= state >> 7;
        state ^= state << 17;
        (state >> 32) as u32 % most
    };
    let fires = ["aimed", "area", "logarithmic", "search", "power", "none"];
    let mut link = String::new();
    for side in ["x", "y"] {
        let fire = fires[if draw(12) == 0 { 5 } else { draw(5) } as usize];
        let (start, digits, decade) = (1 + draw(2000), 1 + draw(9999), 3 + draw(6));
        link += &format!("{side}.start={start}&{side}.fire={fire}&{side}.rate={digits}e-{decade}&");
        link += &format!(
            "{side}.half={}&{side}.p=0.{}&{side}.q=1.{}&",
            draw(300),
            1 + draw(99),
            draw(40)
        );
        if draw(2) == 0 {
            link += &format!("{side}.break=0.{}&", 1 + draw(9));
        }
        if draw(4) == 0 {
            link += &format!("{side}.lost={}&", draw(50));
        }
    }
    // Reserves, losses besides the fires, and a phase for some.
    for side in ["x", "y"] {
        if draw(5) == 0 {
            link += &format!(
                "{side}.join={}@{},-{}@{}&",
                1 + draw(90),
                draw(9),
                draw(20),
                draw(20)
            );
        }
        if draw(6) == 0 {
            link += &format!(
                "{side}.wastage=0.00{}&{side}.support.aimed=0.{}&",
                1 + draw(9),
                draw(10)
            );
        }
        if draw(8) == 0 {
            link += &format!("{side}.flow={}@{}/{}&", 1 + draw(9), draw(5), 6 + draw(9));
        }
    }
    if draw(8) == 0 {
        link += &format!(
            "phase1.from={}&phase1.x.support.area=0.0{}&",
            1 + draw(9),
            1 + draw(9)
        );
    }
    if draw(3) == 0 {
        link += &format!("until={}&", 1 + draw(100));
    }
    link + "v=1"
}

/// The hash of all golden answers, as 16 hexadecimal digits.
pub fn digest() -> String {
    let answers: Vec<String> = (0..COUNT).map(|index| answer(&link(index)).to_json()).collect();
    format!("{:016x}", fnv1a(answers.join("\n").as_bytes()))
}
