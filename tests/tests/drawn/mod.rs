//! Fights drawn by chance, and what their laws say of them, worked out anew from the factors.
//!
//! Half of them are near the degenerate: planted ties, neighbours of a tie in their last digits, ratios of rates and
//! strengths of many powers of ten. The seed is fixed: the same cases come on every machine and every run.

use aftercount_core::laws::FireLaw;
use aftercount_core::sides::Both;
use aftercount_core::terms::{Engagement, Fire, SideTerms};
use proptest::prelude::*;
use proptest::test_runner::{Config, RngSeed};

/// So many cases, the same on every machine and every run.
pub(crate) fn config(cases: u32) -> Config {
    Config {
        cases,
        max_global_rejects: 100_000,
        rng_seed: RngSeed::Fixed(1916),
        failure_persistence: None,
        ..Config::default()
    }
}

fn power_of_ten(low: f64, high: f64) -> impl Strategy<Value = f64> {
    (low..high).prop_map(|exponent| 10f64.powf(exponent))
}

fn law() -> impl Strategy<Value = FireLaw> {
    prop_oneof![
        4 => Just(FireLaw::Aimed),
        4 => Just(FireLaw::Area),
        3 => Just(FireLaw::Logarithmic),
        4 => Just(FireLaw::Search),
        5 => Just(FireLaw::Power),
        1 => Just(FireLaw::None),
    ]
}

/// An exponent: where the formulas change, next to that by a rounding, or anywhere.
fn exponent() -> impl Strategy<Value = f64> {
    let special = prop_oneof![
        Just(0.0),
        Just(0.5),
        Just(1.0),
        Just(1.5),
        Just(2.0),
        Just(1.0f64.next_down()),
        Just(1.0f64.next_up())
    ];
    prop_oneof![1 => special, 2 => 0.0f64..2.5, 1 => (0u32..25).prop_map(|tenths| f64::from(tenths) / 10.0)]
}

/// A fire, with all that any law may need.
fn fire() -> impl Strategy<Value = Fire<f64>> {
    let half = prop_oneof![1 => Just(0.0), 3 => power_of_ten(-12.0, 9.0)];
    let exponents = (exponent(), exponent());
    (law(), power_of_ten(-9.0, 9.0), half, exponents).prop_map(|(law, rate, half, (p, q))| Fire {
        law,
        rate,
        half: Some(half),
        p: Some(p),
        q: Some(q),
    })
}

/// One side; its line is no smaller a part of it than a thousandth, unless it fights to the last.
fn side() -> impl Strategy<Value = SideTerms<f64>> {
    let start = prop_oneof![2 => power_of_ten(0.0, 9.0), 1 => (1u32..2000).prop_map(f64::from)];
    let break_point = prop_oneof![2 => Just(1.0), 1 => 0.02f64..0.99, 1 => Just(0.5), 1 => Just(0.3)];
    let lost = prop_oneof![3 => Just(0.0), 1 => 0.0f64..0.9];
    (start, fire(), break_point, lost).prop_map(|(start, fire, break_point, share)| {
        let most = if break_point < 1.0 {
            start * break_point / (1.0 - break_point)
        } else {
            start
        };
        SideTerms::of_fire(start, share * most, fire, break_point)
    })
}

/// The exponent of the factor of a side's shooters.
pub(crate) fn shooters(fire: &Fire<f64>) -> f64 {
    match fire.law {
        FireLaw::Logarithmic | FireLaw::None => 0.0,
        FireLaw::Power => fire.p.expect("given"),
        _ => 1.0,
    }
}

/// 1 over the factor of the targets: coefficients and exponents.
pub(crate) fn per_target(fire: &Fire<f64>) -> [(f64, f64); 2] {
    match fire.law {
        FireLaw::Area | FireLaw::Logarithmic => [(1.0, -1.0), (0.0, 0.0)],
        FireLaw::Search => [(1.0, 0.0), (fire.half.expect("given"), -1.0)],
        FireLaw::Power => [(1.0, -fire.q.expect("given")), (0.0, 0.0)],
        FireLaw::Aimed | FireLaw::None => [(1.0, 0.0), (0.0, 0.0)],
    }
}

/// How the factor of the targets of a fire vanishes next to 0.
pub(crate) fn vanishing(fire: &Fire<f64>) -> f64 {
    let powers = per_target(fire).into_iter().filter(|power| power.0 > 0.0);
    powers.map(|power| -power.1).fold(0.0, f64::max)
}

/// Shooters over targets of a side: coefficients and orders of the integral.
pub(crate) fn terms(own: &SideTerms<f64>, enemy: &SideTerms<f64>) -> Vec<(f64, f64)> {
    let powers = per_target(&enemy.fire).into_iter().filter(|power| power.0 > 0.0);
    powers
        .map(|(coefficient, exponent)| (coefficient, exponent + shooters(&own.fire) + 1.0))
        .collect()
}

/// What it costs the enemy to bring a side from its start to `line`: its own rate × ∫ shooters / targets.
pub(crate) fn cost(own: &SideTerms<f64>, enemy: &SideTerms<f64>, line: f64) -> f64 {
    if own.fire.law == FireLaw::None {
        return 0.0;
    }
    let integral = |(coefficient, order): (f64, f64)| {
        if line == 0.0 && order <= 0.0 {
            return f64::INFINITY;
        }
        let span = (own.start / line).ln();
        coefficient
            * if line == 0.0 {
                own.start.powf(order) / order
            } else if order == 0.0 {
                span
            } else {
                line.powf(order) * (order * span).exp_m1() / order
            }
    };
    own.fire.rate * terms(own, enemy).into_iter().map(integral).sum::<f64>()
}

/// How much the cost of a side changes for a change of its strength.
pub(crate) fn slope(own: &SideTerms<f64>, enemy: &SideTerms<f64>, strength: f64) -> f64 {
    if own.fire.law == FireLaw::None {
        return 0.0;
    }
    let at = |(coefficient, order): (f64, f64)| coefficient * strength.powf(order - 1.0);
    own.fire.rate * terms(own, enemy).into_iter().map(at).sum::<f64>()
}

/// The strength at which a side breaks.
pub(crate) fn line(side: &SideTerms<f64>) -> f64 {
    (side.start + side.lost) * (1.0 - side.break_point)
}

/// How far from a tie a fight is planted.
#[derive(Clone, Copy, Debug)]
enum Planted {
    /// Nowhere near one.
    Nowhere,
    /// So many neighbouring doubles from it.
    Neighbours(i64),
    /// At this ratio of the costs.
    Ratio(f64),
}

fn planted() -> impl Strategy<Value = Planted> {
    prop_oneof![
        2 => Just(Planted::Nowhere),
        1 => (-6i64..=6).prop_map(Planted::Neighbours),
        1 => (power_of_ten(-14.0, -1.0), any::<bool>())
            .prop_map(|(off, less)| Planted::Ratio(if less { 1.0 - off } else { 1.0 + off })),
        3 => power_of_ten(-1.0, 1.0).prop_map(Planted::Ratio),
    ]
}

/// Any two sides, half of the time planted at or next to a tie.
pub(crate) fn engagement() -> impl Strategy<Value = Engagement> {
    (side(), side(), planted()).prop_map(|(x, y, planted)| {
        let mut sides = Both {
            x: x.clone(),
            y: y.clone(),
        };
        let tied = cost(&x, &y, line(&x)) / (cost(&y, &x, line(&y)) / y.fire.rate);
        if tied.is_finite() && tied > 0.0 {
            sides.y.fire.rate = match planted {
                Planted::Nowhere => y.fire.rate,
                Planted::Neighbours(count) => f64::from_bits(tied.to_bits().saturating_add_signed(count)),
                Planted::Ratio(ratio) => tied * ratio,
            };
        }
        Engagement::of_sides(sides)
    })
}

/// How far the costs of the two lines are apart, in parts of the larger.
pub(crate) fn distance_from_tie(engagement: &Engagement) -> f64 {
    let Both { x, y } = &engagement.sides;
    let (of_x, of_y) = (cost(x, y, line(x)), cost(y, x, line(y)));
    (of_x - of_y).abs() / of_x.max(of_y)
}
