//! Exponentials and logarithms in double-double arithmetic, good to a part of 1e-30.

use super::{Double, fast_two_sum, two_sum};

/// ln 2 to 32 digits.
const LN_2: Double = Double {
    hi: std::f64::consts::LN_2,
    lo: 2.319_046_813_846_299_6e-17,
};

/// Parts into which the exponent's unit, a factor of 2, is cut.
const PARTS: i64 = 32;

/// So many parts make a factor of e.
const PARTS_IN_E: f64 = 46.166_241_308_446_83;

/// 2^(j/32) − 1 for j from −16 to 16, from mpmath at 60 digits.
const GROWN: [(f64, f64); 33] = [
    (-0.292_893_218_813_452_5, 7.174_684_663_993_261e-18),
    (-0.277_409_596_511_476_7, -1.511_879_067_496_993_7e-17),
    (-0.261_586_927_030_250_3, -1.741_997_278_446_398e-17),
    (-0.245_417_786_203_288_63, 4.688_384_843_543_075e-18),
    (-0.228_894_587_296_029_6, 1.199_359_843_285_919e-17),
    (-0.212_009_577_446_056_75, -5.068_458_235_639_152e-18),
    (-0.194_754_834_025_372_86, 1.235_359_628_489_894_4e-17),
    (-0.177_122_260_923_017_58, 4.882_751_662_883_964e-18),
    (-0.159_103_584_746_285_47, 1.323_947_448_727_857_2e-17),
    (-0.140_690_350_938_761_03, -9.256_902_091_315_555e-18),
    (-0.121_873_919_813_350_26, 9.229_156_694_299_104e-19),
    (-0.102_645_462_498_446_4, -4.764_058_593_858_412_6e-18),
    (-0.082_995_956_795_328_77, 2.537_748_313_413_679e-18),
    (-0.062_916_182_944_850_05, -2.858_241_449_391_796_6e-18),
    (-0.042_396_719_301_426_355, 2.411_420_950_278_012_3e-18),
    (-0.021_427_937_912_299_865, -2.989_714_202_136_461e-19),
    (0.0, 0.0),
    (0.021_897_148_654_116_68, -9.494_539_895_697_731e-19),
    (0.044_273_782_427_413_84, 2.252_170_208_492_904e-18),
    (0.067_140_400_676_823_61, 4.268_187_178_470_922e-18),
    (0.090_507_732_665_257_66, -2.712_245_182_495_796e-18),
    (0.114_386_742_595_892_54, -6.919_517_894_059_943e-18),
    (0.138_788_634_756_691_65, 5.861_399_913_367_335e-18),
    (0.163_724_858_777_577_5, 1.053_647_275_361_202_1e-17),
    (0.189_207_115_002_721_05, 1.206_457_669_902_754_9e-17),
    (0.215_247_359_980_468_87, 6.140_419_920_071_864e-18),
    (0.241_857_812_073_484_06, -8.930_875_312_888_462e-18),
    (0.269_050_957_191_733_2, 2.667_932_131_342_186e-18),
    (0.296_839_554_651_009_64, 2.538_250_279_488_831_5e-17),
    (0.325_236_643_159_741_27, 2.692_383_913_086_921_3e-17),
    (0.354_255_546_936_892_7, 2.149_833_256_677_206_5e-17),
    (0.383_909_881_963_831_97, -1.219_396_535_669_003_6e-17),
    (0.414_213_562_373_095_03, 1.434_936_932_798_652_3e-17),
];

/// 1/6!, 1/5!, 1/4! and 1/3!.
const FIRST: [Double; 4] = [
    Double {
        hi: 0.001_388_888_888_888_889,
        lo: -5.300_543_954_373_577e-20,
    },
    Double {
        hi: 0.008_333_333_333_333_333,
        lo: 1.156_482_317_317_871_4e-19,
    },
    Double {
        hi: 0.041_666_666_666_666_664,
        lo: 2.312_964_634_635_742_7e-18,
    },
    Double {
        hi: 0.166_666_666_666_666_66,
        lo: 9.251_858_538_542_97e-18,
    },
];

/// 1/13! down to 1/7!: their terms are so small that plain doubles do.
const LAST: [f64; 7] = [
    1.605_904_383_682_161_3e-10,
    2.087_675_698_786_81e-9,
    2.505_210_838_544_172e-8,
    2.755_731_922_398_589e-7,
    2.755_731_922_398_589_3e-6,
    2.480_158_730_158_73e-5,
    0.000_198_412_698_412_698_4,
];

/// Added and taken away again, it leaves the nearest whole number.
const TO_WHOLE: f64 = 6_755_399_441_055_744.0;

/// e^z.
pub(super) fn exp(z: Double) -> Double {
    match halves(z) {
        Some((grown, turns)) => doubled(grown + 1.0, turns),
        None => Double::from(libm::exp(z.hi)),
    }
}

/// e^z − 1, with all its digits where z is next to 0.
pub(super) fn exp_m1(z: Double) -> Double {
    match halves(z) {
        Some((grown, 0)) => grown,
        Some((grown, turns)) => doubled(grown + 1.0, turns) - 1.0,
        None => Double::from(libm::exp(z.hi)) - 1.0,
    }
}

/// ln z, for z above 0: one step of Newton's from the logarithm of the nearest double.
pub(super) fn ln(z: Double) -> Double {
    let near = libm::log(z.hi);
    corrected(near, (z * exp(Double::from(-near)) - 1.0).hi)
}

/// ln(1 + z), with all its digits where z is next to 0; z is above −1.
pub(super) fn ln_1p(z: Double) -> Double {
    let near = libm::log1p(z.hi);
    let off = (z - exp_m1(Double::from(near))).hi;
    corrected(near, off / ((1.0 + z.hi) + z.lo))
}

/// `near` + ln(1 + e) for an e next to 1e-16: two terms of its series.
fn corrected(near: f64, e: f64) -> Double {
    two_sum(near, e - 0.5 * e * e)
}

/// e^z as (1 + g)·2ⁿ, g between −0.3 and 0.42: g, and n; `None` beyond what doubles hold.
fn halves(z: Double) -> Option<(Double, i64)> {
    let parts = (z.hi * PARTS_IN_E + TO_WHOLE) - TO_WHOLE;
    if parts.abs() > 1020.0 * PARTS as f64 {
        return None;
    }
    let turns = (parts as i64 + PARTS / 2).div_euclid(PARTS);
    let part = parts as i64 - turns * PARTS;
    let rest = series(z - LN_2 * (parts / PARTS as f64));
    if part == 0 {
        return Some((rest, turns));
    }
    let (hi, lo) = GROWN[(part + PARTS / 2) as usize];
    let grown = Double { hi, lo };
    // (1 + g)·(1 + r) − 1, the larger first.
    Some((grown + (grown * rest + rest), turns))
}

/// `number`·2ⁿ, which is exact on both halves.
fn doubled(number: Double, turns: i64) -> Double {
    let scale = f64::from_bits(((1023 + turns) as u64) << 52);
    Double {
        hi: number.hi * scale,
        lo: number.lo * scale,
    }
}

/// e^z − 1 for |z| up to ln 2/64, by its series: the term of 14 is below a part of 1e-33.
fn series(z: Double) -> Double {
    // Of the nearest double alone, and e^(h + l) − 1 = (e^h − 1) + l·e^h, of which the last counts in its first digits.
    let h = z.hi;
    let last = LAST.into_iter().fold(0.0, |sum, term| sum * h + term);
    let [sixth, rest @ ..] = FIRST;
    let sum = rest
        .into_iter()
        .fold(sixth + last * h, |sum, term| far_larger(term, sum * h));
    let half = far_larger(Double::from(0.5), sum * h);
    let grown = far_larger(Double::from(1.0), half * h) * h;
    grown + z.lo * (1.0 + grown.hi)
}

/// The sum of two numbers of which the first is by far the larger: fewer steps than for any two.
fn far_larger(one: Double, other: Double) -> Double {
    let sum = fast_two_sum(one.hi, other.hi);
    fast_two_sum(sum.hi, sum.lo + (one.lo + other.lo))
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

    /// e^z against (e^(z/2))², where the reduction falls otherwise.
    #[test]
    fn the_exponential_is_the_square_of_the_half() {
        for step in -2000..2000 {
            let z = Double::from(f64::from(step) * 0.0137) + 1e-19;
            let half = exp(z * 0.5);
            assert!(
                f64::from((exp(z) - half * half) / exp(z)).abs() < 4e-31 * (1.0 + z.hi.abs()),
                "{step}"
            );
            let grown = exp_m1(z * 0.5);
            assert!(
                f64::from((exp_m1(z) - grown * (grown + 2.0)) / exp_m1(z)).abs() < 1e-30 * (1.0 + z.hi.abs()),
                "{step}"
            );
        }
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
