//! Exponentials and logarithms in double-double arithmetic, good to a part of 1e-30.

use super::Double;

/// ln 2 to 32 digits.
const LN_2: Double = Double {
    hi: std::f64::consts::LN_2,
    lo: 2.319_046_813_846_299_6e-17,
};

/// Halvings before the series of e^z − 1, so that eleven terms of it do.
const HALVINGS: i32 = 6;

/// Terms of the series: (ln 2/2/64)¹² / 12! is below 1e-35.
const TERMS: u32 = 12;

/// e^z.
pub(super) fn exp(z: Double) -> Double {
    let turns = libm::round(z.hi / std::f64::consts::LN_2);
    if turns.abs() > 1020.0 {
        return Double::from(libm::exp(z.hi));
    }
    let grown = series(z - LN_2 * turns) + 1.0;
    let scale = libm::scalbn(1.0, turns as i32);
    // A power of two is exact on both halves.
    Double {
        hi: grown.hi * scale,
        lo: grown.lo * scale,
    }
}

/// e^z − 1, with all its digits where z is next to 0.
pub(super) fn exp_m1(z: Double) -> Double {
    if z.hi.abs() < 0.3 { series(z) } else { exp(z) - 1.0 }
}

/// ln z, for z above 0: one step of Newton's from the logarithm of the nearest double.
pub(super) fn ln(z: Double) -> Double {
    let near = libm::log(z.hi);
    correction(z * exp(Double::from(-near)) - 1.0) + near
}

/// ln(1 + z), with all its digits where z is next to 0; z is above −1.
pub(super) fn ln_1p(z: Double) -> Double {
    let near = Double::from(libm::log1p(z.hi));
    correction((z - exp_m1(near)) * exp(-near)) + near
}

/// ln(1 + e) for an e next to 1e-16: two terms of its series.
fn correction(e: Double) -> Double {
    e - e * e * 0.5
}

/// e^z − 1 for |z| up to ln 2/2: the series at z/64, then (1 + e)² − 1 = e·(e + 2) six times.
fn series(z: Double) -> Double {
    let part = z * libm::scalbn(1.0, -HALVINGS);
    let mut sum = Double::from(1.0);
    for n in (2..=TERMS).rev() {
        sum = part / f64::from(n) * sum + 1.0;
    }
    let mut grown = part * sum;
    for _ in 0..HALVINGS {
        grown = grown * (grown + 2.0);
    }
    grown
}

#[cfg(test)]
mod tests {
    use super::*;

    fn off(value: Double, truth: (f64, f64)) -> f64 {
        let truth = Double {
            hi: truth.0,
            lo: truth.1,
        };
        f64::from((value - truth) / truth).abs()
    }

    /// Truth: mpmath at 50 digits, split into two doubles.
    #[test]
    #[allow(clippy::approx_constant)] // truth, digit by digit, of which some happen to be ln 2 and ln 10
    fn functions_are_good_to_thirty_digits() {
        let f = Double::from;
        assert!(off(exp(f(-30.0)), (9.357622968840175e-14, -2.1170146272646406e-30)) < 1e-30);
        assert!(off(exp(f(-0.7)), (0.4965853037914095, 9.827550225511106e-18)) < 1e-30);
        assert!(off(exp(f(0.1)), (1.1051709180756477, -8.149523913327619e-17)) < 1e-30);
        assert!(off(exp(f(5.5)), (244.69193226422038, 4.129320187450839e-15)) < 1e-30);
        assert!(off(exp(f(40.0)), (2.3538526683702e+17, -14.592100089250966)) < 1e-30);
        assert!(off(exp_m1(f(1e-09)), (1.0000000005000001e-09, -7.443897403844588e-26)) < 1e-30);
        assert!(off(exp_m1(f(-0.1)), (-0.09516258196404043, -4.9513045439257505e-18)) < 1e-30);
        assert!(off(exp_m1(f(0.29)), (0.33642748802547207, 1.1012659132893117e-17)) < 1e-30);
        assert!(off(exp_m1(f(-2.9)), (-0.9449767799435927, -1.763774072496631e-17)) < 1e-30);
        assert!(off(ln(f(0.0006)), (-7.418580902748128, 3.8010954221697176e-16)) < 1e-30);
        assert!(off(ln(f(0.9)), (-0.10536051565782628, 4.81014917638444e-18)) < 1e-30);
        assert!(off(ln(f(2.0)), (0.6931471805599453, 2.3190468138462996e-17)) < 1e-30);
        assert!(off(ln(f(600.0)), (6.396929655216146, 5.3437763424576075e-17)) < 1e-30);
        assert!(off(ln(f(1000000000.0)), (20.72326583694641, 7.108546580563512e-16)) < 1e-30);
        assert!(off(ln_1p(f(1e-09)), (9.999999995e-10, 7.493897403823754e-26)) < 1e-30);
        assert!(
            off(
                ln_1p(f(-0.001)),
                (-0.0010005003335835335, -2.4776547035721437e-20)
            ) < 1e-30
        );
        assert!(off(ln_1p(f(0.24)), (0.2151113796169455, 3.4164782178855512e-18)) < 1e-30);
        assert!(off(ln_1p(f(-0.9)), (-2.302585092994046, -4.968982586806388e-18)) < 1e-30);
    }

    #[test]
    fn logarithm_and_exponential_undo_each_other() {
        for exponent in -60..60 {
            let z = Double::from(f64::from(exponent) * 0.37) / 3.0 + 1e-3;
            assert!(f64::from(ln(exp(z)) - z).abs() < 1e-30, "{exponent}");
            assert!(
                f64::from(ln_1p(exp_m1(z)) - z).abs() < 1e-29 * f64::from(exp(-z)).max(1.0),
                "{exponent}"
            );
        }
    }
}
