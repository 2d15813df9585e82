//! No fire at all: the side is shot at, and does not shoot.

use super::{Law, NO_POWER, Power, RateMeaning};

/// The law of a side that does not fire.
pub static NONE: Law = Law {
    word: "none",
    label: "None",
    source: "no fire",
    rate: RateMeaning::NoRate,
    needs: &[],
    shooters: |_| 0.0,
    per_target: |_| {
        [
            Power {
                coefficient: 1.0,
                exponent: 0.0,
            },
            NO_POWER,
        ]
    },
};
