//! The integral of a function over an interval: by Gauss and Kronrod's rule where that is enough, else by the double
//! exponential rule.
//!
//! R. Piessens, E. de Doncker-Kapenga, C. W. Überhuber and D. K. Kahaner, *QUADPACK* (1983), pp. 16–17 and 63: 21 points, of
//! which 10 are Gauss's; nodes and weights recomputed at 40 digits. Where little of a side falls, the pace is so smooth that
//! both agree, and the error of the finer rule is then far below the rounding.
//!
//! H. Takahasi and M. Mori, "Double exponential formulas for numerical integration", Publ. RIMS 9 (1974) 721–741. It
//! hands the function the distances from both ends, which keep their digits there, and so takes end points at which the
//! function is singular, or nearly so, in its stride: a fight that begins next to a tie is nearly singular at its end.

use std::sync::OnceLock;

/// An integral, and what it took.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Integral {
    /// Its value.
    pub value: f64,
    /// The difference of the last two levels: a bound of the error of the last but one, far above that of the last.
    pub error: f64,
    /// How often the function was called.
    pub evaluations: u32,
}

/// Steps of 1/2, 1/4 … of this many levels; a finer one is not needed by any function here.
const LEVELS: usize = 8;

/// The levels agree to this part: the rule doubles its digits from level to level, so the last has the rounding alone.
const AGREEMENT: f64 = 1e-11;

/// The weight of the node in the middle of Gauss and Kronrod's 21.
const CENTRE_WEIGHT: f64 = 0.149_445_554_002_916_9;

/// The other nodes, each standing for one on either side: the distance from its end on the interval from −1 to 1, the
/// weight, and the weight by Gauss's rule, 0 where it is none of his.
const KRONROD: [(f64, f64, f64); 10] = [
    (
        0.851_125_661_018_368_8,
        0.147_739_104_901_338_49,
        0.295_524_224_714_752_87,
    ),
    (0.705_607_137_298_539_9, 0.142_775_938_577_060_09, 0.0),
    (
        0.566_604_605_870_752_8,
        0.134_709_217_311_473_34,
        0.269_266_719_309_996_35,
    ),
    (0.437_242_865_331_395_34, 0.123_491_976_262_065_84, 0.0),
    (
        0.320_590_431_700_975_6,
        0.109_387_158_802_297_64,
        0.219_086_362_515_982_04,
    ),
    (0.219_182_273_413_583_1, 0.093_125_454_583_697_6, 0.0),
    (
        0.134_936_633_311_015_5,
        0.075_039_674_810_919_96,
        0.149_451_349_150_580_6,
    ),
    (0.069_842_508_644_291_77, 0.054_755_896_574_351_995, 0.0),
    (
        0.026_093_471_482_828_28,
        0.032_558_162_307_964_725,
        0.066_671_344_308_688_14,
    ),
    (0.004_342_836_974_191_919, 0.011_694_638_867_371_874, 0.0),
];

/// A point of the double exponential rule on the interval from 0 to 1: its distance from the nearer end, and its weight.
#[derive(Clone, Copy)]
struct Node {
    distance: f64,
    weight: f64,
}

/// The node in the middle, of which there is one alone.
const MIDDLE: Node = Node {
    distance: 0.5,
    weight: std::f64::consts::FRAC_PI_4,
};

/// A part of the sum below which a node no longer counts.
const FAINT: f64 = 1e-18;

/// The nodes that each level adds, from the middle out, all on one side of it.
fn levels() -> &'static [Vec<Node>] {
    static LEVEL: OnceLock<Vec<Vec<Node>>> = OnceLock::new();
    LEVEL.get_or_init(|| (0..LEVELS).map(level).collect())
}

fn level(number: usize) -> Vec<Node> {
    let step = 0.5 / (1 << number) as f64;
    // A level has the odd multiples of its step; the first has all of them.
    let (first, stride) = if number == 0 { (1, 1) } else { (1, 2) };
    let node = |multiple: u32| {
        let u = step * f64::from(multiple);
        let s = std::f64::consts::FRAC_PI_2 * libm::sinh(u);
        // (1 − tanh s)/2, and the derivative of (1 + tanh s)/2 by u.
        let distance = 1.0 / (1.0 + libm::exp(2.0 * s));
        let weight = std::f64::consts::PI * libm::cosh(u) * distance * (1.0 - distance);
        Node { distance, weight }
    };
    (0..)
        .map(|index| node(first + stride * index))
        .take_while(|node| node.distance > 1e-300)
        .collect()
}

/// Which end of the interval a node is nearer to.
const ENDS: [bool; 2] = [true, false];

/// ∫ of `function` over an interval of length `length`, 0 or more; it is given the distances from the start and from
/// the end. Where it is not finite next to an end, it is left out: there the rule has no weight left.
pub fn integrate(length: f64, mut function: impl FnMut(f64, f64) -> f64) -> Integral {
    let quick = gauss_kronrod(length, &mut function);
    // By QUADPACK's estimate the finer rule is then off by less than (200·1e-12)^(3/2), 3e-15.
    if quick.error <= 1e-12 * quick.value.abs() {
        return quick;
    }
    let integral = double_exponential(length, function);
    Integral {
        evaluations: quick.evaluations + integral.evaluations,
        ..integral
    }
}

/// Gauss and Kronrod's rule on 21 points; its error is the difference from Gauss's on 10.
fn gauss_kronrod(length: f64, function: &mut impl FnMut(f64, f64) -> f64) -> Integral {
    let half = 0.5 * length;
    let (mut fine, mut coarse) = (CENTRE_WEIGHT * function(half, half), 0.0);
    for (from_end, weight, of_gauss) in KRONROD {
        let (near, far) = (half * from_end, half * (2.0 - from_end));
        let value = function(near, far) + function(far, near);
        fine += weight * value;
        coarse += of_gauss * value;
    }
    Integral {
        value: fine * half,
        error: (fine - coarse).abs() * half,
        evaluations: 21,
    }
}

fn double_exponential(length: f64, mut function: impl FnMut(f64, f64) -> f64) -> Integral {
    let mut evaluations = 0;
    let mut value_at = |from_start: f64, from_end: f64| {
        evaluations += 1;
        let value = function(from_start, from_end);
        if value.is_finite() { value } else { 0.0 }
    };
    let mut part_at = |node: &Node, from_start: bool| {
        let (near, far) = (node.distance * length, (1.0 - node.distance) * length);
        node.weight
            * if from_start {
                value_at(near, far)
            } else {
                value_at(far, near)
            }
    };
    let (first, finer) = (&levels()[0], &levels()[1..]);
    // The first level is taken to both ends, since all that counts may lie next to one of them; the finer ones as far as
    // it counted there, and one node more.
    let parts = ENDS.map(|from_start| -> Vec<f64> {
        let parts = first.iter().map(|node| part_at(node, from_start));
        parts.collect()
    });
    let middle = part_at(&MIDDLE, true);
    let mut sum = middle + parts.iter().flatten().sum::<f64>();
    let nearest = parts.map(|parts| reach(first, &parts, FAINT * sum.abs()));
    let (mut last, mut error) = (sum * length * 0.5, f64::INFINITY);
    for (number, nodes) in finer.iter().enumerate() {
        for (from_start, nearest) in ENDS.into_iter().zip(nearest) {
            let counting = nodes.iter().take_while(|node| node.distance >= nearest);
            sum += counting.map(|node| part_at(node, from_start)).sum::<f64>();
        }
        let value = sum * length * 0.25 / (1 << number) as f64;
        error = (value - last).abs();
        last = value;
        if number >= 1 && error <= AGREEMENT * value.abs() {
            break;
        }
    }
    Integral {
        value: last,
        error,
        evaluations,
    }
}

/// How near to its end the nodes count: one beyond the last whose part is above `faint`.
fn reach(nodes: &[Node], parts: &[f64], faint: f64) -> f64 {
    let beyond = parts
        .iter()
        .rposition(|part| part.abs() > faint)
        .map_or(0, |last| last + 1);
    nodes.get(beyond).map_or(0.0, |node| node.distance)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn off(value: f64, truth: f64) -> f64 {
        (value / truth - 1.0).abs()
    }

    #[test]
    fn singular_ends_are_integrated() {
        // ∫ n^−0.9 from 0 to 1 = 10; ∫ 1/√(1 − n) = 2; ∫ ln n = −1.
        assert!(off(integrate(1.0, |n, _| libm::pow(n, -0.9)).value, 10.0) < 1e-13);
        assert!(off(integrate(1.0, |_, m| 1.0 / libm::sqrt(m)).value, 2.0) < 1e-14);
        assert!(off(integrate(1.0, |n, _| libm::log(n)).value, -1.0) < 1e-14);
    }

    #[test]
    fn nearly_singular_ends_are_integrated() {
        // ∫ dn/√(n² + e²) from 0 to 1 = asinh(1/e).
        for e in [1e-3, 1e-6, 1e-9, 1e-12] {
            let integral = integrate(1.0, |n, _| 1.0 / libm::hypot(n, e));
            let truth = libm::asinh(1.0 / e);
            assert!(off(integral.value, truth) < 1e-13, "{e}: {integral:?} {truth}");
        }
    }

    /// A fight whose one side all but vanishes on the way has all its time next to its end.
    #[test]
    fn what_counts_may_lie_next_to_one_end() {
        for steep in [50.0, 216.0, 500.0] {
            let value = integrate(1.0, |_, m| libm::exp(-steep * m)).value;
            assert!(off(value, 1.0 / steep) < 1e-14, "{steep}: {value}");
            let value = integrate(1.0, |n, _| libm::exp(-steep * n)).value;
            assert!(off(value, 1.0 / steep) < 1e-14, "{steep}: {value}");
        }
    }
}
