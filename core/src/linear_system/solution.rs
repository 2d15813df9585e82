//! The strengths of a linear system as a formula in time, for the working.

use super::LinearSystem;
use crate::sides::{Both, Side};

/// A part of a strength over time: number · tⁿ · e^(λt).
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Part {
    /// The number before it.
    pub number: f64,
    /// n.
    pub power: u8,
    /// λ.
    pub eigenvalue: f64,
}

impl LinearSystem {
    /// The parts of each strength that are not 0, whatever the eigenvalues.
    ///
    /// With the first derivative v, what is added to the start is the integral of e^(Mt)·v. Where the eigenvalues differ
    /// v is taken apart along the eigenvectors; where both are λ, e^(Mt) is e^(λt)·(1 + t·N) with N = M − λ, whose square
    /// is 0.
    pub fn solution(&self) -> Both<Vec<Part>> {
        let [high, low] = self.eigenvalues;
        let parts: Vec<Both<Part>> = if self.delta > 0.0 {
            let [of_high, of_low] = self.first_parts();
            let (first, second) = (integrated(high, 0, *of_high), integrated(low, 0, *of_low));
            first.into_iter().chain(second).collect()
        } else {
            let moved = self.times(self.first);
            let by_time = Both::of(|side| moved[side] - high * self.first[side]);
            let (first, second) = (integrated(high, 0, self.first), integrated(high, 1, by_time));
            first.into_iter().chain(second).collect()
        };
        let steady = |number: f64| Part {
            number,
            power: 0,
            eigenvalue: 0.0,
        };
        Both::of(|side: Side| {
            let mut sum = vec![steady(self.start[side])];
            for part in parts.iter().map(|part| part[side]) {
                let alike = |one: &&mut Part| (one.power, one.eigenvalue) == (part.power, part.eigenvalue);
                match sum.iter_mut().find(alike) {
                    Some(one) => one.number += part.number,
                    None => sum.push(part),
                }
            }
            let greatest = sum.iter().map(|part| part.number.abs()).fold(0.0, f64::max);
            let digits = |part: &Part| {
                if part.power == 0 && part.eigenvalue == 0.0 {
                    SUM
                } else {
                    APART
                }
            };
            sum.retain(|part| part.number.abs() > digits(part) * greatest);
            sum
        })
    }
}

/// What is left, as a part of the greatest, where terms in plain doubles should add up to 0.
const SUM: f64 = 1e-14;

/// The same of what has been taken apart in full.
const APART: f64 = 1e-25;

/// The integral from 0 of `vector`·tⁿ·e^(λt), where n is 0 or 1.
fn integrated(eigenvalue: f64, power: u8, vector: Both<f64>) -> Vec<Both<Part>> {
    let part = |over: f64, power: u8, eigenvalue: f64| {
        Both::of(|side| Part {
            number: vector[side] / over,
            power,
            eigenvalue,
        })
    };
    match (eigenvalue, power) {
        (0.0, 0) => vec![part(1.0, 1, 0.0)],
        (0.0, _) => vec![part(2.0, 2, 0.0)],
        (_, 0) => vec![part(eigenvalue, 0, eigenvalue), part(-eigenvalue, 0, 0.0)],
        _ => {
            let square = eigenvalue * eigenvalue;
            vec![
                part(eigenvalue, 1, eigenvalue),
                part(-square, 0, eigenvalue),
                part(square, 0, 0.0),
            ]
        }
    }
}
