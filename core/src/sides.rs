//! The two sides, and a value for each.

use serde::Serialize;
use std::ops::{Index, IndexMut};

/// One of the two sides of an engagement.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Side {
    /// The side whose keys begin with `x.`.
    X,
    /// The side whose keys begin with `y.`.
    Y,
}

impl Side {
    /// Both sides, X first.
    pub const BOTH: [Side; 2] = [Side::X, Side::Y];

    /// The other side.
    pub fn enemy(self) -> Side {
        match self {
            Side::X => Side::Y,
            Side::Y => Side::X,
        }
    }

    /// `x` or `y`, as in the link.
    pub fn letter(self) -> &'static str {
        match self {
            Side::X => "x",
            Side::Y => "y",
        }
    }
}

/// A value for each side, taken out by `both[side]`.
#[derive(Clone, Copy, Debug, Default, PartialEq, Serialize)]
pub struct Both<T> {
    /// The value of side X.
    pub x: T,
    /// The value of side Y.
    pub y: T,
}

impl<T> Both<T> {
    /// The value that `make` gives for each side.
    pub fn of(mut make: impl FnMut(Side) -> T) -> Both<T> {
        Both {
            x: make(Side::X),
            y: make(Side::Y),
        }
    }
}

impl<T> Index<Side> for Both<T> {
    type Output = T;

    fn index(&self, side: Side) -> &T {
        match side {
            Side::X => &self.x,
            Side::Y => &self.y,
        }
    }
}

impl<T> IndexMut<Side> for Both<T> {
    fn index_mut(&mut self, side: Side) -> &mut T {
        match side {
            Side::X => &mut self.x,
            Side::Y => &mut self.y,
        }
    }
}
