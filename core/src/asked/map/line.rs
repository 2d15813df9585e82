//! Lines through a lattice: edges between points that differ, chained from cell to cell.

use super::lattice::{At, FINEST, Lattice, cells};
use std::collections::{BTreeMap, BTreeSet};

/// An edge of the finest lattice between two neighbouring points.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub(super) struct Edge {
    /// Where it begins.
    pub(super) at: At,
    /// Whether it goes up, and not across.
    pub(super) up: bool,
}

impl Edge {
    /// Where it ends.
    pub(super) fn end(self) -> At {
        if self.up {
            (self.at.0, self.at.1 + 1)
        } else {
            (self.at.0 + 1, self.at.1)
        }
    }
}

/// The edges of a cell of the finest lattice, in order around it.
fn around((across, up): At) -> [Edge; 4] {
    let edge = |across, up, goes_up| Edge {
        at: (across, up),
        up: goes_up,
    };
    [
        edge(across, up, false),
        edge(across + 1, up, true),
        edge(across, up + 1, false),
        edge(across, up, true),
    ]
}

/// Where classes meet.
#[derive(Clone, Debug, Default)]
pub(super) struct Crossings {
    /// Every edge whose ends are of two classes, with them in order.
    pub(super) edges: BTreeMap<Edge, (u8, u8)>,
    /// The pairs of such edges that belong together in a cell.
    pub(super) pairs: Vec<(Edge, Edge)>,
}

/// Every edge of the finest lattice whose ends are of two classes.
pub(super) fn crossings<P: Copy>(lattice: &Lattice<P>, class: impl Fn(&P) -> u8) -> Crossings {
    let mut found = Crossings::default();
    for cell in cells(1) {
        if lattice.corners(cell, 1).is_none() {
            continue;
        }
        let crossed: Vec<(Edge, (u8, u8))> = around(cell)
            .into_iter()
            .filter_map(|edge| {
                let (from, to) = (class(&lattice.get(edge.at)?), class(&lattice.get(edge.end())?));
                (from != to).then_some((edge, (from.min(to), from.max(to))))
            })
            .collect();
        found.edges.extend(crossed.iter().copied());
        // Those of the same two classes belong together, one after the other around the cell.
        let mut open: BTreeMap<(u8, u8), Edge> = BTreeMap::new();
        for (edge, classes) in crossed {
            match open.remove(&classes) {
                Some(before) => found.pairs.push((before, edge)),
                None => {
                    open.insert(classes, edge);
                }
            }
        }
    }
    found
}

/// The edges in order along each line.
pub(super) fn chains(pairs: &[(Edge, Edge)]) -> Vec<Vec<Edge>> {
    let mut next: BTreeMap<Edge, Vec<Edge>> = BTreeMap::new();
    for (one, other) in pairs {
        next.entry(*one).or_default().push(*other);
        next.entry(*other).or_default().push(*one);
    }
    let mut left: BTreeSet<Edge> = next.keys().copied().collect();
    let mut chains = Vec::new();
    // Lines with ends first, so that none is begun in its middle; then those that close.
    let ends: Vec<Edge> = next
        .iter()
        .filter(|(_, to)| to.len() == 1)
        .map(|(edge, _)| *edge)
        .collect();
    for begin in ends.into_iter().chain(next.keys().copied()) {
        if !left.remove(&begin) {
            continue;
        }
        let mut chain = vec![begin];
        let mut at = begin;
        let step =
            |at: Edge, left: &BTreeSet<Edge>| next[&at].iter().copied().find(|edge| left.contains(edge));
        while let Some(edge) = step(at, &left) {
            left.remove(&edge);
            chain.push(edge);
            at = edge;
        }
        if chain.len() > 2 && next[&at].contains(&begin) {
            chain.push(begin);
        }
        chains.push(chain);
    }
    chains
}

/// A value of a lattice place as a part of the axis.
pub(super) fn part(place: usize) -> f64 {
    place as f64 / FINEST as f64
}
