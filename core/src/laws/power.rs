//! General exponents: losses of y are b·xᵖ·y^q.
//!
//! R. L. Helmbold, "A modification of Lanchester's equations", Operations Research 13 (1965) 857–859; J. Bracken,
//! "Lanchester models of the Ardennes campaign", Naval Research Logistics 42 (1995) 559–577.

use super::{Law, NO_POWER, Power, RateMeaning};

/// The law of fire with general exponents.
pub static POWER: Law = Law {
    word: "power",
    label: "Power: exponents of your own",
    source: "Helmbold 1965; Bracken 1995",
    rate: RateMeaning::PerPowers,
    needs: &["p", "q"],
    shooters: |fire| fire.p.unwrap_or(1.0),
    per_target: |fire| {
        [
            Power {
                coefficient: 1.0,
                exponent: -fire.q.unwrap_or(0.0),
            },
            NO_POWER,
        ]
    },
};
