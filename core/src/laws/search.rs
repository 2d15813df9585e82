//! Aimed fire at targets that must be found first: plenty of targets, aimed fire; few, and most of the time is search.
//!
//! Losses of y: b·x·y/(y + s), where s is the number of targets at which shooters spend half their time searching
//! (H. Brackney, "The dynamics of military combat", Operations Research 7 (1959) 30–44; his c = 1/b, his s = half/b).
//! 1 over the factor of the targets is 1 + s/y, a sum of two powers.

use super::{Law, Power, RateMeaning};

/// The law of aimed fire with search.
pub static SEARCH: Law = Law {
    word: "search",
    label: "Search: aimed, once a target is found",
    source: "Brackney 1959",
    rate: RateMeaning::TargetsPerShooterInPlenty,
    needs: &["half"],
    shooters: |_| 1.0,
    per_target: |fire| {
        let half = fire.half.unwrap_or(0.0);
        [
            Power {
                coefficient: 1.0,
                exponent: 0.0,
            },
            Power {
                coefficient: half,
                exponent: -1.0,
            },
        ]
    },
};
