//! The pictures as core hands them over: what they show, in the units of the engagement.
//!
//! How they are drawn is `drawing.rs`'s matter.

use aftercount_core::picture::Role;
use aftercount_core::sides::Side;
use aftercount_tests::shown::{links, worked};

#[test]
fn core_hands_over_nothing_outside_the_axes() {
    for link in links() {
        let worked = worked(&link);
        for picture in [&worked.strength, &worked.orbit] {
            assert!(
                picture.across.to > 0.0 && picture.up.to > 0.0,
                "{link}: an axis of no length"
            );
            let inside = |&(x, y): &(f64, f64)| {
                (0.0..=picture.across.to).contains(&x) && (0.0..=picture.up.to).contains(&y)
            };
            for line in &picture.lines {
                let outside = line.points.iter().find(|point| !inside(point));
                assert_eq!(
                    outside, None,
                    "{link}: {:?} within {} by {}",
                    line.role, picture.across.to, picture.up.to
                );
            }
            assert!(
                picture.spots.iter().all(|spot| inside(&spot.at)),
                "{link}: {:?}",
                picture.spots
            );
        }
    }
}

/// Start, end, break lines, parity and neighbours, all on the orbits that the state equation gives.
#[test]
fn the_orbit_has_its_parts() {
    let link = "x.start=600&x.rate=0.04&x.break=0.3&y.start=400&y.rate=0.05&y.break=0.4";
    let worked = worked(link);
    let count = |role: Role| worked.orbit.lines.iter().filter(|line| line.role == role).count();
    assert_eq!(
        [count(Role::Fight), count(Role::Parity), count(Role::ToTheLast)],
        [1, 1, 1]
    );
    assert!(count(Role::Neighbour) >= 3);
    assert_eq!(
        [count(Role::BreakLine(Side::X)), count(Role::BreakLine(Side::Y))],
        [1, 1]
    );
    let constant = |&(x, y): &(f64, f64)| 0.04 * x * x - 0.05 * y * y;
    let scale = constant(&(worked.orbit.across.to, 0.0));
    for line in &worked.orbit.lines {
        if matches!(line.role, Role::BreakLine(_)) {
            continue;
        }
        let first = constant(&line.points[0]);
        let off = line
            .points
            .iter()
            .map(|point| (constant(point) - first).abs())
            .fold(0.0, f64::max);
        assert!(
            off <= 1e-12 * scale,
            "{:?} leaves its orbit by {off:e}",
            line.role
        );
        if line.role == Role::Parity {
            assert!(
                first.abs() <= 1e-12 * scale,
                "parity is where neither is left: {first:e}"
            );
        }
    }
    let spots: Vec<(f64, f64)> = worked.orbit.spots.iter().map(|spot| spot.at).collect();
    let end = worked.fight.outcome.sides();
    assert_eq!(
        spots,
        [
            (600.0, 400.0),
            (end.x.end.expect("an end"), end.y.end.expect("an end"))
        ]
    );
}

/// The state equation of one pairing: the link of its fires, and what is constant of the strengths along an orbit.
type Constant = (&'static str, fn(f64, f64) -> f64);

/// Worked out by hand from the sources of the laws: b·∫S(x)/T(x)dx − a·∫S(y)/T(y)dy.
const CONSTANTS: &[Constant] = &[
    (
        "x.fire=search&x.rate=0.05&x.half=40&y.fire=search&y.rate=0.08&y.half=15",
        |x, y| 0.05 * (x * x / 2.0 + 15.0 * x) - 0.08 * (y * y / 2.0 + 40.0 * y),
    ),
    (
        "x.fire=power&x.rate=0.01&x.p=1.2&x.q=0.5&y.fire=power&y.rate=0.02&y.p=0.9&y.q=0.3",
        |x, y| 0.01 * x.powf(1.9) / 1.9 - 0.02 * y.powf(1.4) / 1.4,
    ),
    ("x.rate=0.05&y.fire=search&y.rate=0.08&y.half=15", |x, y| {
        0.05 * (x * x / 2.0 + 15.0 * x) - 0.08 * y * y / 2.0
    }),
    (
        "x.fire=area&x.rate=0.0006&y.fire=power&y.rate=0.02&y.p=0.5&y.q=0.5",
        |x, y| 0.0006 * x.powf(1.5) / 1.5 - 0.02 * y.powf(0.5) / 0.5,
    ),
];
/// Every orbit of every pairing keeps its state equation, and parity is where neither is left.
#[test]
fn orbits_of_every_pairing_keep_their_state_equation() {
    for (fires, constant) in CONSTANTS {
        let worked = worked(&format!("x.start=120&y.start=90&{fires}"));
        let scale = constant(worked.orbit.across.to, 0.0).abs();
        let mut kinds = Vec::new();
        for line in &worked.orbit.lines {
            if matches!(line.role, Role::BreakLine(_)) {
                continue;
            }
            let first = constant(line.points[0].0, line.points[0].1);
            let off = line
                .points
                .iter()
                .map(|(x, y)| (constant(*x, *y) - first).abs())
                .fold(0.0, f64::max);
            assert!(
                off <= 1e-11 * scale,
                "{fires}: {:?} leaves its orbit by {off:e}",
                line.role
            );
            if line.role == Role::Parity {
                assert!(
                    first.abs() <= 1e-11 * scale,
                    "{fires}: parity is where neither is left: {first:e}"
                );
            }
            kinds.push(line.role);
        }
        assert!(
            kinds.contains(&Role::Parity) && kinds.contains(&Role::Fight),
            "{fires}: {kinds:?}"
        );
    }
}

/// No strength stands at parity with fire that only ever takes a part of what is left: no curve is made up for it.
#[test]
fn no_parity_is_drawn_where_there_is_none() {
    for fires in [
        "x.fire=logarithmic&x.rate=0.05&y.fire=logarithmic&y.rate=0.04",
        "x.fire=logarithmic&x.rate=0.05&y.fire=area&y.rate=0.0004",
        "x.fire=power&x.p=0.5&x.q=0&x.rate=25&y.fire=power&y.p=1&y.q=2&y.rate=0.0005",
        "x.rate=0.05&y.fire=none",
    ] {
        let worked = worked(&format!("x.start=120&y.start=90&{fires}"));
        let roles: Vec<Role> = worked.orbit.lines.iter().map(|line| line.role).collect();
        assert!(!roles.contains(&Role::Parity), "{fires}: {roles:?}");
        assert!(roles.contains(&Role::Fight), "{fires}: {roles:?}");
    }
}

/// An endless fight is shown for as long as it takes to see where it tends: the side that fades has faded, or at least
/// halved a few times over, and the axis reaches no further than that.
#[test]
fn endless_fights_are_shown_on_a_scale_that_shows_them() {
    for fires in [
        "x.fire=logarithmic&x.rate=0.05&y.fire=area&y.rate=0.0004",
        "x.fire=area&x.rate=0.002&y.fire=area&y.rate=0.001",
        "x.fire=search&x.rate=0.5&x.half=40&y.fire=search&y.rate=0.08&y.half=15",
        "x.fire=power&x.p=1&x.q=2&x.rate=0.001&y.rate=0.01",
    ] {
        let worked = worked(&format!("x.start=120&y.start=90&{fires}"));
        assert_eq!(worked.fight.outcome.time, None, "{fires}");
        let trajectory = worked.fight.trajectory.as_ref().expect("asked for");
        let shown = trajectory.shown;
        let last = trajectory.strengths_at(shown);
        assert!(
            last.y <= 0.5 * 90.0 || last.x <= 0.5 * 120.0,
            "{fires}: {last:?} at {shown}"
        );
        let across = worked.strength.across.to;
        assert!(
            (shown..=2.0 * shown).contains(&across),
            "{fires}: an axis to {across} for {shown}"
        );
    }
}

/// The table beside a picture says what the curve shows, from its start to its end.
#[test]
fn tables_run_from_start_to_end() {
    for link in links() {
        let worked = worked(&link);
        for picture in [&worked.strength, &worked.orbit] {
            let table = &picture.table;
            assert!(!table.rows.is_empty() && !picture.summary.is_empty(), "{link}");
            assert!(
                table.rows.iter().all(|row| row.len() == table.heads.len()),
                "{link}: a ragged table"
            );
            let bad = table
                .rows
                .iter()
                .flatten()
                .find(|cell| cell.contains("NaN") || cell.contains("inf"));
            assert_eq!(bad, None, "{link}");
        }
    }
}

/// What jumps has both its ends in the table, so that nobody seems to appear between two rows.
#[test]
fn a_jump_has_two_rows() {
    let worked = worked("x.start=600&x.rate=0.04&y.start=400&y.rate=0.06&y.break=0.39&y.join=64@4");
    let rows = &worked.strength.table.rows;
    let before = rows
        .iter()
        .position(|row| row[0] == "just before 4")
        .expect("a row before");
    let number = |row: usize| rows[row][2].parse::<f64>().expect("a number");
    assert_eq!(rows[before + 1][0], "4");
    assert!(
        (number(before + 1) - number(before) - 64.0).abs() < 1e-3,
        "{rows:?}"
    );
    assert_eq!(rows[before][1], rows[before + 1][1]);
}
