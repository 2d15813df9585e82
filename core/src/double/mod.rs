//! Double-double arithmetic: a number as the unevaluated sum of two doubles, with twice the digits.
//!
//! M. Joldes, J.-M. Muller and V. Popescu, "Tight and rigorous error bounds for basic building blocks of double-word
//! arithmetic", ACM Transactions on Mathematical Software 44 (2017), 15:1–15:27: the algorithms named below, each with its
//! bound in units of u² = 2⁻¹⁰⁶. Products are split after T. J. Dekker, Numerische Mathematik 18 (1971) 224–242, since a
//! fused multiply-add is slow where the machine has none.
//!
//! Our own, since the margins of a fight next to parity stand or fall with it: the crate for it, `twofloat` 0.8.4, was
//! tried and its quotients are good to 1e-16 and its exponentials to 1e-12 only. Numbers beyond 1e300 are not supported.

mod functions;

use std::cmp::Ordering;
use std::ops::{Add, AddAssign, Div, Mul, Neg, Sub};

/// A number of about 32 decimal digits.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Double {
    /// The double nearest to the number.
    hi: f64,
    /// The rest, at most half a unit in the last place of the first.
    lo: f64,
}

/// 2²⁷ + 1, which splits a double in two halves of 26 bits.
const SPLITTER: f64 = 134_217_729.0;

/// The exact sum of two doubles of which the first is no smaller (Algorithm 1, Fast2Sum).
fn fast_two_sum(a: f64, b: f64) -> Double {
    let sum = a + b;
    Double {
        hi: sum,
        lo: b - (sum - a),
    }
}

/// The exact sum of two doubles (Algorithm 2, 2Sum).
fn two_sum(a: f64, b: f64) -> Double {
    let sum = a + b;
    let (first, second) = (sum - b, sum - (sum - b));
    Double {
        hi: sum,
        lo: (a - first) + (b - second),
    }
}

fn split(a: f64) -> (f64, f64) {
    let scaled = SPLITTER * a;
    let high = scaled - (scaled - a);
    (high, a - high)
}

/// The exact product of two doubles (Dekker).
fn two_product(a: f64, b: f64) -> Double {
    let product = a * b;
    let ((ah, al), (bh, bl)) = (split(a), split(b));
    Double {
        hi: product,
        lo: ((ah * bh - product) + ah * bl + al * bh) + al * bl,
    }
}

impl Double {
    /// The exact sum of two doubles.
    pub fn sum(a: f64, b: f64) -> Double {
        two_sum(a, b)
    }

    /// The exact difference of two doubles.
    pub fn difference(a: f64, b: f64) -> Double {
        two_sum(a, -b)
    }

    /// The exact product of two doubles.
    pub fn product(a: f64, b: f64) -> Double {
        two_product(a, b)
    }

    /// Whether it is infinite.
    pub fn is_infinite(self) -> bool {
        self.hi.is_infinite()
    }

    /// Its magnitude.
    pub fn abs(self) -> Double {
        if self.hi < 0.0 { -self } else { self }
    }

    /// Its square root; it is 0 or more (A. H. Karp and P. Markstein, ACM TOMS 23 (1997) 561–589).
    pub fn sqrt(self) -> Double {
        if self.hi <= 0.0 {
            return Double::default();
        }
        let near = libm::sqrt(self.hi);
        fast_two_sum(near, (self - two_product(near, near)).hi / (2.0 * near))
    }

    /// Its cube root; it is above 0: one step of Newton's from that of the nearest double.
    pub fn cbrt(self) -> Double {
        let near = libm::cbrt(self.hi);
        let square = two_product(near, near);
        fast_two_sum(near, (self - square * near).hi / (3.0 * square.hi))
    }

    /// e to it.
    pub fn exp(self) -> Double {
        functions::exp(self)
    }

    /// e to it, less 1, with all its digits where it is next to 0.
    pub fn exp_m1(self) -> Double {
        functions::exp_m1(self)
    }

    /// Its natural logarithm; it is above 0.
    pub fn ln(self) -> Double {
        functions::ln(self)
    }

    /// The natural logarithm of 1 + it, with all its digits where it is next to 0; it is above −1.
    pub fn ln_1p(self) -> Double {
        functions::ln_1p(self)
    }

    /// It to a power; it is above 0.
    pub fn pow(self, power: Double) -> Double {
        (self.ln() * power).exp()
    }
}

impl From<f64> for Double {
    fn from(number: f64) -> Double {
        Double { hi: number, lo: 0.0 }
    }
}

impl From<Double> for f64 {
    fn from(number: Double) -> f64 {
        number.hi + number.lo
    }
}

impl PartialEq<f64> for Double {
    fn eq(&self, other: &f64) -> bool {
        self.hi == *other && self.lo == 0.0
    }
}

impl PartialOrd for Double {
    fn partial_cmp(&self, other: &Double) -> Option<Ordering> {
        match self.hi.partial_cmp(&other.hi) {
            Some(Ordering::Equal) => self.lo.partial_cmp(&other.lo),
            order => order,
        }
    }
}

impl PartialOrd<f64> for Double {
    fn partial_cmp(&self, other: &f64) -> Option<Ordering> {
        self.partial_cmp(&Double::from(*other))
    }
}

impl Neg for Double {
    type Output = Double;

    fn neg(self) -> Double {
        Double {
            hi: -self.hi,
            lo: -self.lo,
        }
    }
}

impl Add for Double {
    type Output = Double;

    /// Algorithm 6, AccurateDWPlusDW: 3u².
    fn add(self, other: Double) -> Double {
        let (high, low) = (two_sum(self.hi, other.hi), two_sum(self.lo, other.lo));
        let sum = fast_two_sum(high.hi, high.lo + low.hi);
        fast_two_sum(sum.hi, low.lo + sum.lo)
    }
}

impl Add<f64> for Double {
    type Output = Double;

    /// Algorithm 4, DWPlusFP: 2u².
    fn add(self, other: f64) -> Double {
        let sum = two_sum(self.hi, other);
        fast_two_sum(sum.hi, self.lo + sum.lo)
    }
}

impl AddAssign for Double {
    fn add_assign(&mut self, other: Double) {
        *self = *self + other;
    }
}

impl Sub for Double {
    type Output = Double;

    fn sub(self, other: Double) -> Double {
        self + -other
    }
}

impl Sub<f64> for Double {
    type Output = Double;

    fn sub(self, other: f64) -> Double {
        self + -other
    }
}

impl Mul for Double {
    type Output = Double;

    /// Algorithm 10, DWTimesDW1: 7u².
    fn mul(self, other: Double) -> Double {
        let product = two_product(self.hi, other.hi);
        fast_two_sum(product.hi, product.lo + (self.hi * other.lo + self.lo * other.hi))
    }
}

impl Mul<f64> for Double {
    type Output = Double;

    /// Algorithm 8, DWTimesFP2: 3u².
    fn mul(self, other: f64) -> Double {
        let product = two_product(self.hi, other);
        fast_two_sum(product.hi, product.lo + self.lo * other)
    }
}

impl Div for Double {
    type Output = Double;

    /// Algorithm 17, DWDivDW2: 15u².
    fn div(self, other: Double) -> Double {
        let near = self.hi / other.hi;
        let back = other * near;
        fast_two_sum(near, ((self.hi - back.hi) + (self.lo - back.lo)) / other.hi)
    }
}

impl Div<f64> for Double {
    type Output = Double;

    fn div(self, other: f64) -> Double {
        self / Double::from(other)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// A spread of numbers with both halves used.
    fn numbers() -> Vec<Double> {
        let spread = (1..60).map(|n| f64::from(n) * 0.737_3);
        spread
            .map(|n| Double::from(libm::exp(n - 20.0)) + libm::sin(n) * libm::exp(n - 20.0) * 1e-17)
            .collect()
    }

    #[test]
    fn products_quotients_and_roots_undo_each_other() {
        for a in numbers() {
            for b in numbers() {
                let off = |value: Double| f64::from((value - a) / a).abs();
                assert!(off(a * b / b) < 1e-30, "{a:?} {b:?}");
                assert!(
                    off((a + b) - b) <= 1e-31 * (1.0 + f64::from(b / a)),
                    "{a:?} {b:?}"
                );
            }
            assert!(f64::from((a.sqrt() * a.sqrt() - a) / a).abs() < 1e-30, "{a:?}");
            let root = a.cbrt();
            assert!(f64::from((root * root * root - a) / a).abs() < 1e-30, "{a:?}");
        }
    }

    /// 1/3 and √2 against mpmath at 50 digits.
    #[test]
    fn quotients_and_roots_against_known_digits() {
        let third = Double::from(1.0) / 3.0;
        assert_eq!(
            (third.hi, third.lo),
            (0.333_333_333_333_333_3, 1.850_371_707_708_594e-17)
        );
        let root = Double::from(2.0).sqrt();
        assert_eq!(root.hi, std::f64::consts::SQRT_2);
        assert!((root.lo / -9.667_293_313_452_913e-17 - 1.0).abs() < 1e-15);
    }
}
