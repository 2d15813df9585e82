//! Lines through a lattice: edges between points that differ, chained from cell to cell.
//!
//! Edges are numbers, and what is known of them stands in tables by that number.

use super::lattice::{At, FINEST, Lattice, cells};
use crate::order::sort_by;

/// An edge of the finest lattice between two neighbouring points: twice the number of the point where it begins, and one more
/// where it goes up.
pub(super) type Edge = u32;

/// No edge.
const NONE: Edge = Edge::MAX;

/// One more than the largest edge.
const EDGES: usize = 2 * (FINEST + 1) * (FINEST + 1);

fn edge((across, up): At, goes_up: bool) -> Edge {
    (2 * (up * (FINEST + 1) + across) + usize::from(goes_up)) as Edge
}

/// Where an edge begins, and where it ends.
pub(super) fn ends(edge: Edge) -> [At; 2] {
    let (point, goes_up) = (edge as usize / 2, edge % 2 == 1);
    let (across, up) = (point % (FINEST + 1), point / (FINEST + 1));
    let end = if goes_up {
        (across, up + 1)
    } else {
        (across + 1, up)
    };
    [(across, up), end]
}

/// The edges of a cell of the finest lattice, in order around it.
fn around((across, up): At) -> [Edge; 4] {
    [
        edge((across, up), false),
        edge((across + 1, up), true),
        edge((across, up + 1), false),
        edge((across, up), true),
    ]
}

/// Lines through the lattice where classes meet, and where on each edge.
#[derive(Clone, Debug, Default)]
pub(super) struct Traced {
    crossed: Crossings,
    /// The part of each edge at which it is crossed; half-way where that is not known yet.
    closed: Vec<f64>,
}

impl Traced {
    /// Where the classes of neighbouring points differ.
    pub(super) fn of<P: Copy>(lattice: &Lattice<P>, class: impl Fn(&P) -> u8) -> Traced {
        Traced {
            crossed: Crossings::of(lattice, class),
            closed: vec![0.5; EDGES],
        }
    }

    /// Every edge that is crossed, in order.
    pub(super) fn edges(&self) -> impl Iterator<Item = Edge> {
        self.crossed.edges.iter().copied()
    }

    /// Where an edge is crossed, as a part of it.
    pub(super) fn put(&mut self, edge: Edge, part: f64) {
        self.closed[edge as usize] = part;
    }

    /// The same, as parts of both axes.
    pub(super) fn place(&self, edge: Edge) -> (f64, f64) {
        let [from, to] = ends(edge);
        let along =
            |from: usize, to: usize| part(from) + (part(to) - part(from)) * self.closed[edge as usize];
        (along(from.0, to.0), along(from.1, to.1))
    }

    /// The edges in order along each line; a line that closes ends with its first.
    pub(super) fn chains(&self) -> Vec<Vec<Edge>> {
        self.crossed.chains()
    }
}

/// Where classes meet.
#[derive(Clone, Debug, Default)]
struct Crossings {
    /// Every edge whose ends are of two classes, in order.
    edges: Vec<Edge>,
    /// The edges that an edge is connected with through the cells on its two sides.
    next: Vec<[Edge; 2]>,
}

impl Crossings {
    /// Every edge of the finest lattice whose ends are of two classes.
    fn of<P: Copy>(lattice: &Lattice<P>, class: impl Fn(&P) -> u8) -> Crossings {
        let mut found = Crossings {
            edges: Vec::new(),
            next: vec![[NONE; 2]; EDGES],
        };
        for cell in cells(1) {
            let Some(corners) = lattice.corners(cell, 1) else {
                continue;
            };
            let classes = corners.map(|corner| class(&corner));
            // Edges of the same two classes belong together, one after the other around the cell.
            let mut open: [Option<(Edge, u8, u8)>; 4] = [None; 4];
            for (place, edge) in around(cell).into_iter().enumerate() {
                let (from, to) = (classes[place], classes[(place + 1) % 4]);
                if from == to {
                    continue;
                }
                found.edges.push(edge);
                let (low, high) = (from.min(to), from.max(to));
                let before = open
                    .iter_mut()
                    .find(|slot| slot.is_some_and(|(_, a, b)| (a, b) == (low, high)));
                match before {
                    Some(slot) => {
                        if let Some((before, ..)) = slot.take() {
                            found.connect(before, edge);
                        }
                    }
                    None => open[place] = Some((edge, low, high)),
                }
            }
        }
        sort_by(&mut found.edges, Ord::cmp);
        found.edges.dedup();
        found
    }

    fn connect(&mut self, one: Edge, other: Edge) {
        for (from, to) in [(one, other), (other, one)] {
            if let Some(free) = self.next[from as usize].iter_mut().find(|next| **next == NONE) {
                *free = to;
            }
        }
    }

    fn connections(&self, edge: Edge) -> impl Iterator<Item = Edge> {
        self.next[edge as usize].into_iter().filter(|next| *next != NONE)
    }

    /// The edges in order along each line; a line that closes ends with its first.
    fn chains(&self) -> Vec<Vec<Edge>> {
        let mut used = vec![false; EDGES];
        let mut chains = Vec::new();
        // Lines with ends first, so that none is begun in its middle; then those that close.
        for with_end in [true, false] {
            for begin in self.edges.iter().copied() {
                let count = self.connections(begin).count();
                if used[begin as usize] || count == 0 || (count == 1) != with_end {
                    continue;
                }
                chains.push(self.chain(begin, &mut used));
            }
        }
        chains
    }

    fn chain(&self, begin: Edge, used: &mut [bool]) -> Vec<Edge> {
        let mut chain = vec![begin];
        let mut at = begin;
        used[begin as usize] = true;
        while let Some(next) = self.connections(at).find(|next| !used[*next as usize]) {
            used[next as usize] = true;
            chain.push(next);
            at = next;
        }
        if chain.len() > 2 && self.connections(at).any(|next| next == begin) {
            chain.push(begin);
        }
        chain
    }
}

/// A place of the lattice as a part of the axis.
pub(super) fn part(place: usize) -> f64 {
    place as f64 / FINEST as f64
}
