//! A square lattice of points that is filled coarsely first, and finely only where neighbours differ.

use crate::order::sort_by;

/// Cells of the coarsest lattice along each axis.
pub(super) const BASE: usize = 38;

/// How often a cell is halved where its corners differ.
const LEVELS: usize = 3;

/// Cells of the finest lattice along each axis.
pub const FINEST: usize = BASE << LEVELS;

/// What is known of points: one more along each axis than there are cells.
#[derive(Clone, Debug)]
pub(super) struct Lattice<P> {
    points: Vec<Option<P>>,
}

/// A place on the finest lattice, across and up.
pub(super) type At = (usize, usize);

impl<P: Copy> Lattice<P> {
    pub(super) fn new() -> Lattice<P> {
        Lattice {
            points: vec![None; (FINEST + 1) * (FINEST + 1)],
        }
    }

    pub(super) fn get(&self, (across, up): At) -> Option<P> {
        self.points[up * (FINEST + 1) + across]
    }

    pub(super) fn put(&mut self, (across, up): At, point: P) {
        self.points[up * (FINEST + 1) + across] = Some(point);
    }

    /// The corners of the cell of so many steps at a place, counter-clockwise; `None` where one is not known.
    pub(super) fn corners(&self, (across, up): At, step: usize) -> Option<[P; 4]> {
        Some([
            self.get((across, up))?,
            self.get((across + step, up))?,
            self.get((across + step, up + step))?,
            self.get((across, up + step))?,
        ])
    }

    /// The smallest cell around a place whose corners are known: where it begins, and its steps. `None` before the coarsest
    /// lattice is filled.
    pub(super) fn cell_around(&self, (across, up): At) -> Option<(At, usize)> {
        let (across, up) = (across.min(FINEST - 1), up.min(FINEST - 1));
        (0..=LEVELS).find_map(|level| {
            let step = 1 << level;
            let at = (across - across % step, up - up % step);
            self.corners(at, step).map(|_| (at, step))
        })
    }
}

/// The places of the coarsest lattice, in rows.
pub(super) fn coarsest() -> Vec<At> {
    let step = FINEST / BASE;
    places(step)
}

/// The middles of the cells of the coarsest lattice.
pub(super) fn middles() -> Vec<At> {
    let step = FINEST / BASE;
    let cells = (0..BASE).flat_map(move |up| (0..BASE).map(move |across| (across, up)));
    cells
        .map(|(across, up)| (across * step + step / 2, up * step + step / 2))
        .collect()
}

fn places(step: usize) -> Vec<At> {
    let count = FINEST / step;
    let all = (0..=count).flat_map(|up| (0..=count).map(move |across| (across * step, up * step)));
    all.collect()
}

/// The cells of so many steps.
pub(super) fn cells(step: usize) -> impl Iterator<Item = At> {
    let count = FINEST / step;
    (0..count).flat_map(move |up| (0..count).map(move |across| (across * step, up * step)))
}

/// Places at which a finer lattice is wanted: those that halve the cells of `step` steps whose corners differ, or whose
/// neighbours do.
pub(super) fn halving<P: Copy>(lattice: &Lattice<P>, step: usize, same: impl Fn(&P, &P) -> bool) -> Vec<At> {
    let count = FINEST / step;
    let mut mixed = vec![false; count * count];
    for (across, up) in cells(step) {
        if let Some([first, rest @ ..]) = lattice.corners((across, up), step) {
            mixed[up / step * count + across / step] = !rest.iter().all(|corner| same(&first, corner));
        }
    }
    let is_mixed = |across: usize, up: usize| across < count && up < count && mixed[up * count + across];
    let mut wanted = Vec::new();
    for (across, up) in cells(step) {
        let (a, u) = (across / step, up / step);
        let around = is_mixed(a, u)
            || is_mixed(a + 1, u)
            || is_mixed(a.wrapping_sub(1), u)
            || is_mixed(a, u + 1)
            || is_mixed(a, u.wrapping_sub(1));
        if around && lattice.corners((across, up), step).is_some() {
            let half = step / 2;
            wanted.extend([
                (across + half, up),
                (across, up + half),
                (across + half, up + half),
                (across + step, up + half),
                (across + half, up + step),
            ]);
        }
    }
    wanted.retain(|at| lattice.get(*at).is_none());
    sort_by(&mut wanted, Ord::cmp);
    wanted.dedup();
    wanted
}
