//! The laws of fire. Each is a product: rate × a factor of the shooters × a factor of the targets.
//!
//! A law is one file with its factors, closed forms and source, and one row of [`FireLaw::law`]. The factors are given
//! as powers, and 1 over the factor of the targets as a sum of powers: the state equation, its integrals and the
//! integrator follow from that for every pairing. Closed forms in time are chosen by the exponents, not by the names of
//! the laws, so that a power law that comes to aimed fire is solved as aimed fire.

pub mod aimed;
pub mod alone;
pub mod along_orbit;
pub mod ambush;
pub mod area;
pub mod logarithmic;
pub mod none;
pub mod power;
pub mod search;
pub(crate) mod span;

use crate::terms::Fire;

/// The word of the link for how fire takes effect.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum FireLaw {
    /// `aimed`
    Aimed,
    /// `area`
    Area,
    /// `logarithmic`
    Logarithmic,
    /// `search`
    Search,
    /// `power`
    Power,
    /// `none`
    None,
}

/// A power `coefficient · n^exponent`.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
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
    /// The fraction of the targets lost per unit of time, whatever the number of shooters.
    Fraction,
    /// Targets lost per shooter per unit of time where targets are in plenty.
    TargetsPerShooterInPlenty,
    /// Targets lost per unit of time, for shooters and targets raised to their exponents.
    PerPowers,
    /// The law has no rate.
    NoRate,
}

/// What one law of fire is.
pub struct Law {
    /// The word of the link.
    pub word: &'static str,
    /// The words of the form.
    pub label: &'static str,
    /// Where it was published.
    pub source: &'static str,
    /// What its rate is measured in.
    pub rate: RateMeaning,
    /// The keys it needs beside the rate.
    pub needs: &'static [&'static str],
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
    /// The laws, in the order of the form.
    pub const ALL: [FireLaw; 6] = [
        FireLaw::Aimed,
        FireLaw::Area,
        FireLaw::Logarithmic,
        FireLaw::Search,
        FireLaw::Power,
        FireLaw::None,
    ];

    /// What this law is.
    pub fn law(self) -> &'static Law {
        match self {
            FireLaw::Aimed => &aimed::AIMED,
            FireLaw::Area => &area::AREA,
            FireLaw::Logarithmic => &logarithmic::LOGARITHMIC,
            FireLaw::Search => &search::SEARCH,
            FireLaw::Power => &power::POWER,
            FireLaw::None => &none::NONE,
        }
    }

    /// The law of that word.
    pub fn of_word(word: &str) -> Option<FireLaw> {
        FireLaw::ALL.into_iter().find(|law| law.law().word == word)
    }
}

impl Fire<f64> {
    /// Whether this fire causes losses at all.
    pub fn takes_effect(&self) -> bool {
        self.law != FireLaw::None && self.rate > 0.0
    }

    /// The factor of the shooters, as a power of their number.
    pub fn shooters(&self) -> Power {
        Power {
            coefficient: 1.0,
            exponent: (self.law.law().shooters)(self),
        }
    }

    /// 1 over the factor of the targets, as a sum of powers of their number.
    pub fn per_target(&self) -> [Power; 2] {
        (self.law.law().per_target)(self)
    }

    /// The part of the targets lost per unit of time: has digits where the losses themselves are too few for a double.
    pub fn share_per_time(&self, shooters: f64, targets: f64) -> f64 {
        if !self.takes_effect() {
            return 0.0;
        }
        let raised = |power: Power| Power {
            exponent: power.exponent + 1.0,
            ..power
        };
        let reciprocal: f64 = self
            .per_target()
            .iter()
            .map(|power| raised(*power).at(targets))
            .sum();
        self.rate * self.shooters().at(shooters) / reciprocal
    }

    /// Targets lost per unit of time.
    ///
    /// The factor of the targets is taken as 1 over its reciprocal, 0 where no target is left and the factor vanishes.
    pub fn losses_per_time(&self, shooters: f64, targets: f64) -> f64 {
        if !self.takes_effect() {
            return 0.0;
        }
        let reciprocal: f64 = self.per_target().iter().map(|power| power.at(targets)).sum();
        self.rate * self.shooters().at(shooters) / reciprocal
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
            2.0 => number * number,
            0.5 => libm::sqrt(number),
            exponent => libm::pow(number, exponent),
        };
        self.coefficient * power
    }

    /// ∫ of the power from `left` to `left` + `fallen`; infinite where it is without bound at 0.
    ///
    /// Written with the fallen, so that a short stretch keeps its digits, and through e^z − 1, so that exponents next
    /// to −1 do.
    pub fn integral(self, left: f64, fallen: f64) -> f64 {
        if self.coefficient == 0.0 || fallen == 0.0 {
            return 0.0;
        }
        let order = self.exponent + 1.0;
        let area = if order == 1.0 {
            fallen
        } else if left > 0.0 {
            let span = libm::log1p(fallen / left);
            if order == 0.0 {
                span
            } else if order > 0.0 {
                libm::pow(left + fallen, order) * growth(-order, span)
            } else {
                libm::pow(left, order) * growth(order, span)
            }
        } else if order > 0.0 {
            libm::pow(fallen, order) / order
        } else {
            f64::INFINITY
        };
        self.coefficient * area
    }
}

/// (e^(order·span) − 1)/order, and its limit `span` at order 0.
pub fn growth(order: f64, span: f64) -> f64 {
    if order == 0.0 {
        span
    } else {
        libm::expm1(order * span) / order
    }
}
