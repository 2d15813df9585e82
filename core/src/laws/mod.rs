//! The laws of fire. Each is a product: rate × a factor of the shooters × a factor of the targets.
//!
//! A law is one file with its factors, closed forms and source, and one row of [`FireLaw::law`]. The factors are given
//! as powers, and 1 over the factor of the targets as a sum of powers: the state equation and its integrals follow from
//! that for every pairing (see `state`).

pub mod aimed;
pub mod ambush;
pub mod area;
pub mod none;
pub mod one_sided;

use crate::terms::Fire;

/// The word of the link for how fire takes effect.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum FireLaw {
    /// `aimed`
    Aimed,
    /// `area`
    Area,
    /// `none`
    None,
}

/// A power `coefficient · n^exponent`.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Power {
    /// The factor before the power.
    pub coefficient: f64,
    /// The exponent.
    pub exponent: f64,
}

/// What a rate of this law is measured in.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum RateMeaning {
    /// Targets lost per shooter per unit of time.
    TargetsPerShooter,
    /// The fraction of the targets lost per shooter per unit of time.
    FractionPerShooter,
    /// The law has no rate.
    NoRate,
}

/// What one law of fire is.
pub struct Law {
    /// The word of the link.
    pub word: &'static str,
    /// The words of the form.
    pub label: &'static str,
    /// The losses it causes per unit of time, for `b` = rate, `S` shooters, `T` targets.
    pub formula: &'static str,
    /// Where it was published.
    pub source: &'static str,
    /// What its rate is measured in.
    pub rate: RateMeaning,
    /// The exponent of the factor of the shooters.
    pub shooters: fn(&Fire<f64>) -> f64,
    /// 1 over the factor of the targets, as a sum of at most two powers of their number; a zero coefficient ends it.
    pub per_target: fn(&Fire<f64>) -> [Power; 2],
}

/// No second power in a sum.
pub const NO_POWER: Power = Power {
    coefficient: 0.0,
    exponent: 0.0,
};

impl FireLaw {
    /// The laws that are worked out, in the order of the form.
    pub const ALL: [FireLaw; 3] = [FireLaw::Aimed, FireLaw::Area, FireLaw::None];

    /// What this law is.
    pub fn law(self) -> &'static Law {
        match self {
            FireLaw::Aimed => &aimed::AIMED,
            FireLaw::Area => &area::AREA,
            FireLaw::None => &none::NONE,
        }
    }

    /// The law of that word, where it is worked out.
    pub fn of_word(word: &str) -> Option<FireLaw> {
        FireLaw::ALL.into_iter().find(|law| law.law().word == word)
    }
}

impl Fire<f64> {
    /// Whether this fire causes losses at all.
    pub fn takes_effect(&self) -> bool {
        self.law != FireLaw::None && self.rate > 0.0
    }

    /// Targets lost per unit of time.
    ///
    /// The factor of the targets is taken as 1 over its reciprocal, 0 where no target is left and the factor vanishes.
    pub fn losses_per_time(&self, shooters: f64, targets: f64) -> f64 {
        if !self.takes_effect() {
            return 0.0;
        }
        let law = self.law.law();
        let reciprocal: f64 = (law.per_target)(self).iter().map(|power| power.at(targets)).sum();
        self.rate
            * Power {
                coefficient: 1.0,
                exponent: (law.shooters)(self),
            }
            .at(shooters)
            / reciprocal
    }
}

impl Power {
    /// The value at `number`, which is 0 or more.
    pub fn at(self, number: f64) -> f64 {
        if self.coefficient == 0.0 {
            return 0.0;
        }
        let power = match self.exponent {
            0.0 => 1.0,
            1.0 => number,
            -1.0 => 1.0 / number,
            exponent => libm::pow(number, exponent),
        };
        self.coefficient * power
    }
}
