//! Logarithmic fire: losses in proportion to the targets alone, as when the vulnerable set their own losses.
//!
//! Losses of y: b·y (R. H. Peterson, "On the logarithmic law of attrition and its application to tank combat",
//! Operations Research 15 (1967) 557–558; he proposed it in 1953). The number of shooters does not count, so the target
//! fades by itself, and the other side follows by the state equation: see [`super::alone`].

use super::{Law, NO_POWER, Power, RateMeaning};

/// The law of logarithmic fire.
pub static LOGARITHMIC: Law = Law {
    word: "logarithmic",
    label: "Logarithmic: losses follow the targets alone",
    source: "Peterson 1953/1967",
    rate: RateMeaning::Fraction,
    needs: &[],
    shooters: |_| 0.0,
    per_target: |_| {
        [
            Power {
                coefficient: 1.0,
                exponent: -1.0,
            },
            NO_POWER,
        ]
    },
};
