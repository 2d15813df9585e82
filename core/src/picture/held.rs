//! A picture on the axes of another: while a handle is dragged the paper stays where it is, and what leaves it is cut off.

use super::{Axis, Line, Picture};

/// The axes that a picture is held to.
#[derive(Clone, Debug, PartialEq)]
pub struct Axes {
    /// The axis across.
    pub across: Axis,
    /// The axis up.
    pub up: Axis,
}

impl Axes {
    /// Those of a picture.
    pub fn of(picture: &Picture) -> Axes {
        Axes {
            across: picture.across.clone(),
            up: picture.up.clone(),
        }
    }

    fn has(&self, (x, y): (f64, f64)) -> bool {
        (self.across.from..=self.across.to).contains(&x) && (self.up.from..=self.up.to).contains(&y)
    }

    /// The part of the way from one point to another that lies within; `None` where none does.
    ///
    /// Liang and Barsky, ACM Transactions on Graphics 3 (1984): each edge cuts off a part of the way.
    fn within(&self, from: (f64, f64), to: (f64, f64)) -> Option<(f64, f64)> {
        let (dx, dy) = (to.0 - from.0, to.1 - from.1);
        let edges = [
            (-dx, from.0 - self.across.from),
            (dx, self.across.to - from.0),
            (-dy, from.1 - self.up.from),
            (dy, self.up.to - from.1),
        ];
        let (mut first, mut last) = (0.0_f64, 1.0_f64);
        for (outwards, room) in edges {
            if outwards == 0.0 && room < 0.0 {
                return None;
            }
            let part = room / outwards;
            if outwards < 0.0 {
                first = first.max(part);
            } else if outwards > 0.0 {
                last = last.min(part);
            }
        }
        (first <= last).then_some((first, last))
    }

    /// The parts of a line that lie within.
    fn cut(&self, line: &Line) -> Vec<Line> {
        let mut parts: Vec<Vec<(f64, f64)>> = Vec::new();
        let mut open = false;
        for pair in line.points.windows(2) {
            let (from, to) = (pair[0], pair[1]);
            let at = |part: f64| match part {
                0.0 => from,
                1.0 => to,
                part => (from.0 + part * (to.0 - from.0), from.1 + part * (to.1 - from.1)),
            };
            let Some((first, last)) = self.within(from, to) else {
                open = false;
                continue;
            };
            match parts.last_mut() {
                Some(part) if open && first == 0.0 => part.push(at(last)),
                _ => parts.push(vec![at(first), at(last)]),
            }
            open = last == 1.0;
        }
        let part = |points: Vec<(f64, f64)>| Line {
            points,
            ..line.clone()
        };
        parts.into_iter().map(part).collect()
    }
}

impl Picture {
    /// The same picture on other axes.
    #[must_use]
    pub fn held_to(mut self, axes: &Axes) -> Picture {
        self.lines = self.lines.iter().flat_map(|line| axes.cut(line)).collect();
        self.spots.retain(|spot| axes.has(spot.at));
        self.across = axes.across.clone();
        self.up = axes.up.clone();
        self
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::picture::Role;

    #[test]
    fn what_leaves_the_paper_is_cut_off_at_its_edge() {
        let axes = Axes {
            across: Axis::new(String::new(), 10.0, 5),
            up: Axis::new(String::new(), 10.0, 5),
        };
        let line = |points: &[(f64, f64)]| Line {
            role: Role::Fight,
            points: points.to_vec(),
            label: String::new(),
        };
        let cut = |points: &[(f64, f64)]| -> Vec<Vec<(f64, f64)>> {
            axes.cut(&line(points))
                .into_iter()
                .map(|line| line.points)
                .collect()
        };
        assert_eq!(cut(&[(1.0, 1.0), (9.0, 9.0)]), [vec![(1.0, 1.0), (9.0, 9.0)]]);
        assert_eq!(cut(&[(5.0, 5.0), (15.0, 5.0)]), [vec![(5.0, 5.0), (10.0, 5.0)]]);
        assert_eq!(
            cut(&[(5.0, 5.0), (15.0, 5.0), (5.0, 7.0), (4.0, 7.0)]),
            [
                vec![(5.0, 5.0), (10.0, 5.0)],
                vec![(10.0, 6.0), (5.0, 7.0), (4.0, 7.0)]
            ]
        );
        assert_eq!(cut(&[(5.0, 12.0), (15.0, 13.0)]), Vec::<Vec<(f64, f64)>>::new());
    }
}
