//! Lines of equal value of a second reading, within the parts of a map that come out alike.

use super::lattice::{At, FINEST, Lattice, cells};
use crate::order::sort_by;

/// The pieces of the line at `level`, in places of the lattice, from every cell whose corners are of one class and have a
/// value each.
pub(super) fn contour<P: Copy>(
    lattice: &Lattice<P>,
    same: impl Fn(&P, &P) -> bool,
    value: impl Fn(&P) -> Option<f64>,
    level: f64,
) -> Vec<[(f64, f64); 2]> {
    let mut pieces = Vec::new();
    for (cell, step) in leaves(lattice) {
        let Some(corners) = lattice.corners(cell, step) else {
            continue;
        };
        if !corners[1..].iter().all(|corner| same(&corners[0], corner)) {
            continue;
        }
        let values: Vec<f64> = corners.iter().filter_map(&value).collect();
        if let [a, b, c, d] = values[..] {
            pieces.extend(through(cell, step as f64, [a, b, c, d], level));
        }
    }
    pieces
}

/// The smallest cells that are known, each with its steps.
fn leaves<P: Copy>(lattice: &Lattice<P>) -> Vec<(At, usize)> {
    let mut leaves = Vec::new();
    let mut open: Vec<(At, usize)> = {
        let step = FINEST / super::lattice::BASE;
        cells(step).map(|cell| (cell, step)).collect()
    };
    while let Some(((across, up), step)) = open.pop() {
        let half = step / 2;
        let halved = step > 1
            && [
                (across + half, up),
                (across, up + half),
                (across + half, up + half),
                (across + step, up + half),
                (across + half, up + step),
            ]
            .into_iter()
            .all(|at| lattice.get(at).is_some());
        if halved {
            open.extend([
                ((across, up), half),
                ((across + half, up), half),
                ((across, up + half), half),
                ((across + half, up + half), half),
            ]);
        } else {
            leaves.push(((across, up), step));
        }
    }
    leaves
}

/// The piece of a line through one cell, corners counter-clockwise from its beginning.
fn through((across, up): At, step: f64, values: [f64; 4], level: f64) -> Option<[(f64, f64); 2]> {
    let (across, up) = (across as f64, up as f64);
    let places = [
        (across, up),
        (across + step, up),
        (across + step, up + step),
        (across, up + step),
    ];
    let mut ends = Vec::new();
    for corner in 0..4 {
        let next = (corner + 1) % 4;
        let (from, to) = (values[corner] - level, values[next] - level);
        if (from < 0.0) != (to < 0.0) {
            let part = from / (from - to);
            let (a, b) = (places[corner], places[next]);
            ends.push((a.0 + (b.0 - a.0) * part, a.1 + (b.1 - a.1) * part));
        }
    }
    match ends[..] {
        [from, to] => Some([from, to]),
        _ => None,
    }
}

/// A place as a number, to the rounding with which two pieces meet.
fn key((across, up): (f64, f64)) -> u64 {
    let part = |place: f64| (place * 1e6).round() as u64;
    part(up) * 1_000_000_000 + part(across)
}

/// The pieces put together to lines.
pub(super) fn chained(pieces: &[[(f64, f64); 2]]) -> Vec<Vec<(f64, f64)>> {
    let mut meeting: Vec<(u64, u32)> = Vec::with_capacity(2 * pieces.len());
    for (place, piece) in pieces.iter().enumerate() {
        meeting.extend(piece.iter().map(|end| (key(*end), place as u32)));
    }
    sort_by(&mut meeting, Ord::cmp);
    let mut used = vec![false; pieces.len()];
    let mut lines = Vec::new();
    for first in 0..pieces.len() {
        if used[first] {
            continue;
        }
        used[first] = true;
        let [from, to] = pieces[first];
        let mut ahead = followed(to, pieces, &meeting, &mut used);
        let mut line = followed(from, pieces, &meeting, &mut used);
        line.reverse();
        line.extend([from, to]);
        line.append(&mut ahead);
        lines.push(line);
    }
    lines
}

/// The points of the line that goes on from `at` through pieces that are not used yet; `meeting` has the pieces by the places
/// of their ends, in order.
fn followed(
    mut at: (f64, f64),
    pieces: &[[(f64, f64); 2]],
    meeting: &[(u64, u32)],
    used: &mut [bool],
) -> Vec<(f64, f64)> {
    let mut line = Vec::new();
    loop {
        let here = key(at);
        let first = meeting.partition_point(|(place, _)| *place < here);
        let mut pieces_here = meeting[first..].iter().take_while(|(place, _)| *place == here);
        let Some(next) =
            pieces_here.find_map(|(_, piece)| (!used[*piece as usize]).then_some(*piece as usize))
        else {
            return line;
        };
        used[next] = true;
        let [from, to] = pieces[next];
        at = if key(from) == here { to } else { from };
        line.push(at);
    }
}
