//! A value rounded away from another, to the fewest digits that will do.

use crate::number::rounded;

/// `value` as it is written to `digits` significant digits, not on the side of `from`; plain decimals.
pub(crate) fn beyond(value: f64, from: f64, digits: usize) -> String {
    let nearest = rounded(value, digits);
    if is_beyond(nearest, value, from) {
        return plain(nearest);
    }
    // The neighbour on the far side: a step of the last digit.
    let exponent = libm::floor(libm::log10(value.abs())) as i32;
    let step = libm::exp10(f64::from(exponent - digits as i32 + 1));
    let stepped = rounded(nearest + (value - from).signum() * step, digits);
    plain(if is_beyond(stepped, value, from) {
        stepped
    } else {
        value
    })
}

fn is_beyond(written: f64, value: f64, from: f64) -> bool {
    (written - value) * (value - from).signum() >= 0.0
}

fn plain(value: f64) -> String {
    // A zero keeps no sign: `-0` would be read as a number below it.
    format!("{}", value + 0.0)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn digits_go_away_from_the_present_value() {
        for (value, from, text) in [
            (607.204_915, 600.0, "607.3"),
            (396.123_4, 400.0, "396.1"),
            (0.057_131_2, 0.06, "0.05713"),
            (0.057_137, 0.06, "0.05713"),
            (0.057_137, 0.05, "0.05714"),
            (999.99, 600.0, "1000"),
            (4.0, 5.0, "4"),
            (0.0, 5.0, "0"),
            (-12.345_6, 5.0, "-12.35"),
            (1e-9, 2e-9, "0.000000001"),
        ] {
            assert_eq!(beyond(value, from, 4), text, "{value} from {from}");
        }
    }
}
