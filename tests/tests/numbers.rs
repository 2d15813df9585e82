//! The core's reader of numbers against that of the standard library, on millions of texts.

use aftercount_core::number::plain;

/// Agrees bit for bit, and gives nothing where the number leaves the range of doubles.
fn check(text: &str) {
    let known: f64 = text.parse().expect("a number");
    let is_zero = || {
        text.bytes()
            .take_while(|byte| !b"eE".contains(byte))
            .all(|byte| b"-0.".contains(&byte))
    };
    let within = known.is_finite() && (known != 0.0 || is_zero());
    // A zero has one sign only.
    let known = within.then_some((known + 0.0).to_bits());
    assert_eq!(plain(text).map(f64::to_bits), known, "{text}");
}

#[test]
fn a_million_doubles_come_back() {
    let mut random = fastrand::Rng::with_seed(5);
    for _ in 0..1_000_000 {
        // Around 1, where they are read by another way than those of all sizes.
        let usual = f64::from_bits(random.u64(0x3eb0_0000_0000_0000..0x4340_0000_0000_0000));
        assert_eq!(plain(&format!("{usual}")), Some(usual));
        assert_eq!(plain(&format!("-{usual:e}")), Some(-usual));
    }
    for _ in 0..30_000 {
        let any = f64::from_bits(random.u64(0..0x7ff0_0000_0000_0000));
        assert_eq!(plain(&format!("{any:e}")), Some(any));
        let subnormal = f64::from_bits(random.u64(0..1 << 53) >> random.u32(0..53));
        assert_eq!(plain(&format!("{subnormal:e}")), Some(subnormal));
    }
}

#[test]
fn a_million_decimals_are_read_as_by_the_standard_library() {
    let mut random = fastrand::Rng::with_seed(6);
    for _ in 0..700_000 {
        let digits = random.u64(..) >> random.u32(0..64);
        check(&format!("{digits}e{}", random.i32(-25..25)));
        check(&format!("{}.{digits}", random.u32(0..10_000)));
    }
    // Of any number of digits, and next to both ends of the range.
    for _ in 0..30_000 {
        let mut text: String = (0..random.usize(1..60)).map(|_| random.digit(10)).collect();
        text.insert(random.usize(1..=text.len()), '.');
        text.push(random.digit(10));
        let exponent = *random.choice(&[0, -30, 30, 290, -300, -330]).expect("some");
        check(&format!("{text}e{}", exponent + random.i32(-20..20)));
    }
    for length in [700, 767, 768, 769, 800, 1200] {
        for _ in 0..40 {
            let text: String = (0..length).map(|_| random.digit(10)).collect();
            check(&format!("1.{text}e{}", random.i32(-330..310)));
        }
    }
}
