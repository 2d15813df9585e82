//! Published values, each with its source beside it.
//!
//! "Memory" says that a figure is recalled and not read from the source. "Identity" says that it was worked out for
//! this project from the published formula, at higher precision and by other means than the core's.

use aftercount_tests::tables::{assert_close, number, outcome};
use serde_json::Value;

/// What is printed to twelve digits is right to half of the last of them.
const TWELVE_DIGITS: f64 = 5e-12;

/// The outcome of aimed fire against aimed fire, to the last.
fn aimed(x: f64, x_rate: f64, y: f64, y_rate: f64) -> Value {
    outcome(&format!(
        "x.start={x}&x.rate={x_rate}&y.start={y}&y.rate={y_rate}"
    ))
}

/// The strength left to a side: `x` or `y`.
fn left(outcome: &Value, side: &str) -> f64 {
    number(outcome, &format!("{side}.end")).expect("a side that does not grow has an end")
}

fn assert_left(outcome: &Value, side: &str, known: f64, within: f64) {
    assert_close(
        left(outcome, side),
        known,
        within,
        &format!("{side} left: {outcome}"),
    );
}

/// Lanchester, Aircraft in Warfare (1916), p. 65 §42: 40 ships cut a fleet of 46 in two. 32 fight the half of 23 while 8
/// hold the other 23, then what is left of the two fights meets: 32² + 8² = 1088 against 23² + 23² = 1058 leaves √30
/// (printed 5½).
#[test]
fn lanchester_fleets_met_in_two_halves() {
    let concentrated = left(&aimed(32.0, 1.0, 23.0, 1.0), "x");
    let held = left(&aimed(8.0, 1.0, 23.0, 1.0), "y");
    let rest = aimed(concentrated, 1.0, held, 1.0);
    assert_eq!(rest["breaks"], "y");
    assert_left(&rest, "x", 30f64.sqrt(), 1e-13);
}

/// Lanchester 1916, p. 65 §42: all together 46² − 40² = 516, "23 approximately" left of the larger fleet.
#[test]
fn lanchester_fleets_all_together() {
    let together = aimed(40.0, 1.0, 46.0, 1.0);
    assert_eq!(together["to_the_last"], "y");
    assert_left(&together, "y", 516f64.sqrt(), 1e-15);
    assert_left(&together, "y", 23.0, 0.02);
}

/// Lanchester 1916, p. 65, footnote: 23√2 = 32.5 ships would meet the two halves of 23 one after the other and come out
/// even.
#[test]
fn lanchester_footnote_on_two_halves_in_turn() {
    let first = aimed(23.0 * 2f64.sqrt(), 1.0, 23.0, 1.0);
    assert_left(&first, "x", 23.0, 1e-15);
    assert_close(23.0 * 2f64.sqrt(), 32.5, 1e-3, "printed to one decimal");
}

/// Lanchester 1916, p. 53 §31: 600² × 1 against 100² × 16, 360,000 against 160,000; so √200,000 are left.
#[test]
fn lanchester_quality_against_number() {
    let fight = aimed(600.0, 1.0, 100.0, 16.0);
    assert_eq!(
        (&fight["breaks"], &fight["ended"]),
        (&Value::from("y"), &Value::from("break"))
    );
    assert_left(&fight, "x", (360_000f64 - 160_000.0).sqrt(), 1e-15);
}

/// Lanchester 1916 (memory): 50,000 can meet 40,000 and then 30,000 and come out even, 5² = 4² + 3²; against the two
/// joined they stand as 25 to 49.
#[test]
fn lanchester_armies_in_turn_and_joined() {
    let first = aimed(50_000.0, 0.01, 40_000.0, 0.01);
    assert_eq!(left(&first, "x"), 30_000.0);
    let second = aimed(left(&first, "x"), 0.01, 30_000.0, 0.01);
    assert_eq!(
        (&second["to_the_last"], &second["ended"]),
        (&Value::from("parity"), &Value::from("limit"))
    );
    assert_left(
        &aimed(50_000.0, 0.01, 70_000.0, 0.01),
        "y",
        24f64.sqrt() * 10_000.0,
        1e-15,
    );
}

/// Osipov (1915; translated and described by Helmbold, European Journal of Operational Research 65):
/// A' = A cosh αt − B sinh αt. Identity: A = 1000, B = 800, α = 0.1, t = 3.
#[test]
fn osipov_strengths_at_a_time() {
    let fight = outcome("x.start=1000&x.rate=0.1&y.start=800&y.rate=0.1&until=3");
    assert_eq!(fight["ended"], "clock");
    assert_left(&fight, "x", 801.722279371, TWELVE_DIGITS);
    assert_left(&fight, "y", 531.750517856, TWELVE_DIGITS);
}

/// Osipov (1915): A' ± B' = (A ± B)·e^(∓αt), here at ten times with α = 0.1.
#[test]
fn osipov_sum_and_difference() {
    for tenths in 1..=10 {
        let time = f64::from(tenths) * 1.05;
        let fight = outcome(&format!(
            "x.start=1000&x.rate=0.1&y.start=800&y.rate=0.1&until={time}"
        ));
        let (x, y) = (left(&fight, "x"), left(&fight, "y"));
        assert_close(x + y, 1800.0 * (-0.1 * time).exp(), 1e-14, "the sum");
        assert_close(x - y, 200.0 * (0.1 * time).exp(), 1e-13, "the difference");
    }
}

/// Johnson & MacKay, Naval Research Logistics 58 (2011) 210–222: with 2 : 1 in number against 3 : 1 in effectiveness the
/// more numerous side is left with half its strength, √(4 − 3) = 1 of 2.
#[test]
fn johnson_and_mackay_number_against_effectiveness() {
    let fight = aimed(2.0, 1.0, 1.0, 3.0);
    assert_eq!(fight["breaks"], "y");
    assert_eq!(left(&fight, "x"), 1.0);
}

/// Johnson & MacKay 2011, identity: the more numerous side met in two equal halves, one after the other, leaves the
/// smaller side √(2/3) and then √(1/3) of its strength.
#[test]
fn johnson_and_mackay_halves_in_turn() {
    let first = aimed(1.0, 1.0, 1.0, 3.0);
    assert_left(&first, "y", (2f64 / 3.0).sqrt(), 1e-15);
    let second = aimed(1.0, 1.0, left(&first, "y"), 3.0);
    assert_left(&second, "y", (1f64 / 3.0).sqrt(), 1e-15);
    assert_left(&second, "y", 0.577350, 1e-6);
}

/// Deitchman, Operations Research 10 (1962) 818–827: x' = −B·y, y' = −D·x·y keep B·y − D·x²/2. Identity: B = 0.1,
/// D = 0.0002, 100 against 40: the side under aimed fire reaches 0 at 30.2299894039, facing K/B = 30.
#[test]
fn deitchman_ambush_succeeds() {
    let fight = outcome("x.start=100&x.fire=area&x.rate=0.0002&y.start=40&y.rate=0.1");
    assert_eq!(
        (&fight["breaks"], &fight["ended"]),
        (&Value::from("x"), &Value::from("break"))
    );
    assert_close(
        number(&fight, "time").expect("a time"),
        30.2299894039,
        TWELVE_DIGITS,
        "the end",
    );
    assert_left(&fight, "y", 30.0, 1e-15);
}

/// Deitchman 1962, identity, the same rates, 260 against 40: the strengths at 20, and √(−2K/D) in the limit.
#[test]
fn deitchman_ambush_fails() {
    let link = "x.start=260&x.fire=area&x.rate=0.0002&y.start=40&y.rate=0.1";
    let at_twenty = outcome(&format!("{link}&until=20"));
    assert_left(&at_twenty, "x", 208.603689735, TWELVE_DIGITS);
    assert_left(&at_twenty, "y", 15.9154994, 5e-9);
    let limit = outcome(link);
    assert_eq!(
        (&limit["breaks"], &limit["ended"]),
        (&Value::from("neither"), &Value::from("limit"))
    );
    assert_left(&limit, "x", 166.132477258, TWELVE_DIGITS);
    assert_eq!(left(&limit, "y"), 0.0);
}

/// Coleman, as worked in Braun, Differential Equations and Their Applications (memory): ambushers who hit with one round
/// in ten, against rounds that find 2 of the 1,000 square feet each ambusher hides in, are outfought only where the
/// square of the force ratio exceeds 2 · 0.1 · 1000 / 2 = 100: ten to one.
#[test]
fn ten_to_one_against_an_ambush() {
    let against = |y: &str| {
        outcome(&format!(
            "x.start=100&x.rate=0.1&y.start={y}&y.fire=area&y.rate=0.00002"
        ))
    };
    assert_eq!(against("999")["to_the_last"], "x");
    assert_eq!(against("1000")["to_the_last"], "parity");
    assert_eq!(against("1001")["to_the_last"], "y");
}

/// The linear law, Lanchester 1916. Identity: a = 0.001, b = 0.0015, 120 against 100, at t = 10 and in the limit.
#[test]
fn linear_law() {
    let link = "x.start=120&x.fire=area&x.rate=0.0015&y.start=100&y.fire=area&y.rate=0.001";
    let at_ten = outcome(&format!("{link}&until=10"));
    assert_left(&at_ten, "x", 71.0757819259, TWELVE_DIGITS);
    assert_left(&at_ten, "y", 26.6136728888, TWELVE_DIGITS);
    let limit = outcome(link);
    assert_left(&limit, "x", 160.0 / 3.0, 1e-15);
    assert_eq!(limit["ended"], "limit");
}

/// Lanchester 1916: under the linear law fighting strength is number times rate, so concentration gains nothing. Two
/// halves met in turn leave what the whole leaves (identity: 100 − 80 = 100 − 40 − 40).
#[test]
fn linear_law_rewards_no_concentration() {
    let area = |x: f64, y: f64| {
        outcome(&format!(
            "x.start={x}&x.fire=area&x.rate=0.01&y.start={y}&y.fire=area&y.rate=0.01"
        ))
    };
    let first = area(100.0, 40.0);
    let second = area(left(&first, "x"), 40.0);
    assert_eq!(left(&second, "x"), left(&area(100.0, 80.0), "x"));
}

/// Lanchester 1916: 600 at 0.04 against 400 at 0.09 stand even under the square law, since 600² · 4 = 400² · 9.
#[test]
fn parity_of_the_square_law() {
    let fight = outcome("x.start=600&x.rate=0.04&y.start=400&y.rate=0.09");
    assert_eq!(fight["to_the_last"], "parity");
    let both = outcome("x.start=600&x.rate=0.04&x.break=0.3&y.start=400&y.rate=0.09&y.break=0.3");
    assert_eq!(both["breaks"], "both");
    // At parity both shrink as e^(−√(ab)·t): identity, ln(1/0.7) / 0.06.
    assert_close(
        number(&both, "time").expect("a time"),
        (1f64 / 0.7).ln() / 0.06,
        1e-14,
        "the end",
    );
}

/// The strengths at the clock of a fight, or at its end, within twelve digits.
fn assert_both(link: &str, x: f64, y: f64) {
    let fight = outcome(link);
    assert_left(&fight, "x", x, TWELVE_DIGITS);
    assert_left(&fight, "y", y, TWELVE_DIGITS);
}

/// Osipov (1915), his three-halves law A^1.5 − A'^1.5 = B^1.5 − B'^1.5: the state equation of losses that go as the root
/// of the shooters. Identity: 1,000 against 800, B brought to 0, and to a loss of 20 %.
#[test]
fn osipov_three_halves_law() {
    let link =
        "x.start=1000&x.fire=power&x.p=0.5&x.q=0&x.rate=1&y.start=800&y.fire=power&y.p=0.5&y.q=0&y.rate=1";
    let last = outcome(link);
    assert_eq!(
        (&last["breaks"], &last["ended"]),
        (&Value::from("y"), &Value::from("break"))
    );
    assert_left(&last, "x", 432.526133652, TWELVE_DIGITS);
    assert_left(
        &outcome(&format!("{link}&y.break=0.2")),
        "x",
        859.228503858,
        TWELVE_DIGITS,
    );
    // And all along: what each side has lost of its number to the power of 3/2 is the same.
    let midway = outcome(&format!("{link}&until=9"));
    let lost = |side: &str, start: f64| start.powf(1.5) - left(&midway, side).powf(1.5);
    assert_close(lost("x", 1000.0), lost("y", 800.0), 1e-12, "the three-halves law");
}

/// Helmbold, Operations Research 13 (1965) 857–859: x' = −a·(x/y)^(1−W)·y, here the power law with W on the shooters
/// and 1 − W on the targets. Identity: a = 0.05 (y's rate), b = 0.03, 100 against 70, at t = 8. W = 1 is the square law.
#[test]
fn helmbold_ratio_of_forces() {
    for (w, x, y) in [
        (0.5, 71.2372937679, 52.7423762608),
        (0.75, 73.704529192, 51.1033008106),
        (1.0, 76.3883677692, 49.001118745),
    ] {
        let q = 1.0 - w;
        let power = |side: &str, rate: f64| {
            format!("{side}.fire=power&{side}.p={w}&{side}.q={q}&{side}.rate={rate}&")
        };
        let link = format!(
            "x.start=100&{}y.start=70&{}until=8",
            power("x", 0.03),
            power("y", 0.05)
        );
        let fight = outcome(&link);
        // Printed to twelve digits with the noughts at their ends left out.
        assert_left(&fight, "x", x, TWELVE_DIGITS);
        assert_left(&fight, "y", y, 2.0 * TWELVE_DIGITS);
        assert_eq!(
            fight["method"], "closed form",
            "it comes to the square law of powers"
        );
    }
}

/// Bracken, Naval Research Logistics 42 (1995) 559–577: x' = −a·y^p·x^q and the same the other way. Identity: p = 1.2,
/// q = 0.5, a = 0.01, b = 0.008, 100 against 90, at t = 1.
#[test]
fn bracken_general_exponents() {
    assert_both(
        "x.start=100&x.fire=power&x.p=1.2&x.q=0.5&x.rate=0.008&y.start=90&y.fire=power&y.p=1.2&y.q=0.5&y.rate=0.01&until=1",
        81.3039153305,
        73.9525159141,
    );
}

/// Brackney, Operations Research 7 (1959) 30–44: with x' = −x·y/(s₁ + c₁·x) and y' likewise,
/// s₁(x₀ − x) + c₁(x₀² − x²)/2 = s₂(y₀ − y) + c₂(y₀² − y²)/2. In the keys of the link c₁ = 1/`y.rate` and
/// s₁ = `y.half`/`y.rate`.
#[test]
fn brackney_state_equation() {
    let (x, y) = (120.0, 90.0);
    let (x_rate, x_half, y_rate, y_half) = (0.05, 40.0, 0.08, 15.0);
    let link = format!(
        "x.start={x}&x.fire=search&x.rate={x_rate}&x.half={x_half}&y.start={y}&y.fire=search&y.rate={y_rate}&y.half={y_half}"
    );
    let spent = |c: f64, s: f64, from: f64, to: f64| s * (from - to) + c * (from * from - to * to) / 2.0;
    for clock in [0.5, 2.0, 7.0, 30.0] {
        let fight = outcome(&format!("{link}&until={clock}"));
        let of_x = spent(1.0 / y_rate, y_half / y_rate, x, left(&fight, "x"));
        let of_y = spent(1.0 / x_rate, x_half / x_rate, y, left(&fight, "y"));
        assert_close(of_x, of_y, 1e-12, &format!("at {clock}"));
    }
    let last = outcome(&link);
    assert_eq!(
        (&last["breaks"], &last["ended"]),
        (&Value::from("neither"), &Value::from("limit")),
        "the last of a side is never found"
    );
    assert_eq!(left(&last, "x"), 0.0);
    let of_x = spent(1.0 / y_rate, y_half / y_rate, x, 0.0);
    let of_y = spent(1.0 / x_rate, x_half / x_rate, y, left(&last, "y"));
    assert_close(of_x, of_y, 1e-14, "in the limit");
}

/// Identity, with the state equation of the power laws: two sides of 100, each losing the root of the other's number in a
/// unit of time, shrink as (10 − t/2)² and are both at nothing at 20; so are 100 whose aimed fire at 0.1 is met by a
/// steady loss of 5 a unit of time.
#[test]
fn power_laws_end_together_in_finite_time() {
    let root =
        "x.start=100&x.fire=power&x.p=0.5&x.q=0&x.rate=1&y.start=100&y.fire=power&y.p=0.5&y.q=0&y.rate=1";
    let steady = "x.start=100&x.rate=0.1&y.start=100&y.fire=power&y.p=0&y.q=0&y.rate=5";
    for link in [root, steady] {
        let fight = outcome(link);
        assert_eq!(
            [&fight["breaks"], &fight["ended"], &fight["to_the_last"]],
            ["both", "break", "parity"]
        );
        assert_close(
            number(&fight, "time").expect("a time"),
            20.0,
            1e-14,
            "both at nothing",
        );
        assert_eq!((left(&fight, "x"), left(&fight, "y")), (0.0, 0.0));
    }
    let midway = outcome(&format!("{root}&until=10"));
    assert_left(&midway, "x", 25.0, 1e-13);
    assert_left(&midway, "y", 25.0, 1e-13);
}

/// Identity: where y's fire feeds on x's number squared, 100 win and 200 break first.
#[test]
fn more_of_a_side_can_hurt_it() {
    let against = |x: &str| {
        outcome(&format!(
            "x.start={x}&x.fire=power&x.p=0.5&x.q=0&x.rate=25&x.break=0.5&y.start=100&y.fire=power&y.p=1&y.q=2&y.rate=0.0005&y.break=0.5"
        ))
    };
    assert_eq!(against("100")["breaks"], "y");
    assert_eq!(against("200")["breaks"], "x");
}

/// Peterson, Operations Research 15 (1967) 557–558, against Lanchester's area fire. Identity: with x's fire logarithmic
/// at b and y's area fire at a, y = y₀·e^(−b·t) and x = x₀·exp(−(a·y₀/b)·(1 − e^(−b·t))); the logarithmic side always
/// prevails in the limit, left with x₀·e^(−a·y₀/b).
#[test]
fn logarithmic_against_area() {
    let (b, a, x, y) = (0.05f64, 0.0004f64, 300.0, 500.0);
    let link = format!("x.start={x}&x.fire=logarithmic&x.rate={b}&y.start={y}&y.fire=area&y.rate={a}");
    for clock in [1.0, 20.0, 90.0] {
        let fight = outcome(&format!("{link}&until={clock}"));
        let gone = -(-b * clock).exp_m1();
        assert_left(&fight, "y", y * (-b * clock).exp(), 1e-14);
        assert_left(&fight, "x", x * (-a * y / b * gone).exp(), 1e-14);
    }
    let limit = outcome(&link);
    assert_eq!(
        [&limit["breaks"], &limit["ended"], &limit["to_the_last"]],
        ["neither", "limit", "x"]
    );
    assert_left(&limit, "x", x * (-a * y / b).exp(), 1e-14);
    assert_eq!(left(&limit, "y"), 0.0);
    // However strong the other side is.
    let outnumbered = outcome(&link.replace("y.start=500", "y.start=50000"));
    assert_eq!(outnumbered["to_the_last"], "x");
}

/// Peterson 1967: logarithmic fire both ways wears both sides out, whatever their strengths: x₀·e^(−a·t) and y₀·e^(−b·t).
#[test]
fn logarithmic_both_ways_has_no_winner() {
    let link = "x.start=600&x.fire=logarithmic&x.rate=0.04&y.start=400&y.fire=logarithmic&y.rate=0.05";
    let fight = outcome(link);
    assert_eq!(
        [&fight["breaks"], &fight["ended"], &fight["to_the_last"]],
        [&Value::from("neither"), &Value::from("limit"), &Value::Null]
    );
    let midway = outcome(&format!("{link}&until=10"));
    assert_left(&midway, "x", 600.0 * (-0.5f64).exp(), 1e-15);
    assert_left(&midway, "y", 400.0 * (-0.4f64).exp(), 1e-15);
}
