//! Where words stand in a picture: at the place, of some that would do, where they cover least.

use super::axes::{is_orbit, side_colour};
use super::layout::Layout;
use super::pen::{Pen, Point, Set};
use super::surface::Drawn;
use aftercount_core::picture::{Line, Picture, Role, Spot};
use aftercount_core::sides::Side;
use plotters::prelude::RGBColor;
use plotters::style::text_anchor::{HPos, VPos};

/// The size of words in the field, in CSS pixels.
const WORDS: f64 = 13.0;
/// The size of the words at what happens on the way.
const SMALL: f64 = 11.5;

/// How far the words of a break line begin from where it begins, in CSS pixels.
const FROM_MARK: f64 = 6.0;

/// What it costs to stand on other words.
const OTHER_WORDS: f64 = 1e3;

type Box = (f64, f64, f64, f64);

/// How words are written, wherever they stand.
#[derive(Clone, Copy)]
struct Hand {
    colour: RGBColor,
    italic: bool,
    size: f64,
}

impl Hand {
    fn italic(colour: RGBColor) -> Hand {
        Hand {
            colour,
            italic: true,
            size: WORDS,
        }
    }

    fn at(self, across: HPos, up: VPos) -> Set {
        Set {
            size: self.size,
            italic: self.italic,
            colour: self.colour,
            across,
            up,
        }
    }
}

/// Whether a spot is neither the start nor the end of the path of one side against the other.
pub(crate) fn is_on_the_way(picture: &Picture, index: usize) -> bool {
    is_orbit(picture) && index > 0 && index + 1 < picture.spots.len()
}

/// The words of a picture being set: what is taken already.
pub(crate) struct Labels {
    field: Layout,
    taken: Vec<Box>,
    /// Points that words should not cover, and how much it matters.
    curves: Vec<(Point, f64)>,
    /// Whether there is the ground of a map behind them.
    on_ground: bool,
}

impl Labels {
    pub(crate) fn of(field: &Layout, picture: &Picture) -> Labels {
        let mut curves = Vec::new();
        for line in &picture.lines {
            let weight = match line.role {
                Role::Strength(_) | Role::Fight => 3.0,
                Role::Neighbour => 0.1,
                _ => 1.0,
            };
            let points: Vec<Point> = line.points.iter().map(|point| field.place(*point)).collect();
            curves.extend(finely(&points).into_iter().map(|point| (point, weight)));
        }
        Labels {
            field: *field,
            taken: Vec::new(),
            curves,
            on_ground: picture.ground.is_some(),
        }
    }

    /// Sets every label of the picture, those that have the least choice first.
    pub(crate) fn draw(mut self, pen: &mut Pen<'_>, picture: &Picture) -> Drawn {
        for (index, spot) in picture.spots.iter().enumerate() {
            self.spot(pen, picture, spot, index)?;
        }
        for line in picture.lines.iter().filter(|line| !line.label.is_empty()) {
            match line.role {
                Role::Defeat | Role::Clock | Role::Change => self.moment(pen, line)?,
                Role::BreakLine(side) => self.break_line(pen, picture, line, side)?,
                Role::Region => self.region(pen, line)?,
                Role::Parity | Role::Contour => self.along(pen, line, pen.ink.ink, true)?,
                _ => {}
            }
        }
        for line in picture
            .lines
            .iter()
            .filter(|line| matches!(line.role, Role::Instant | Role::Now))
        {
            self.instant(pen, line)?;
        }
        for line in picture.lines.iter().filter(|line| !line.label.is_empty()) {
            if let Role::Strength(side) = line.role {
                self.along(pen, line, side_colour(pen, side), false)?;
            }
        }
        Ok(())
    }

    fn spot(&mut self, pen: &mut Pen<'_>, picture: &Picture, spot: &Spot, index: usize) -> Drawn {
        let (x, y) = self.field.place(spot.at);
        let colour = spot.side.map_or(pen.ink.ink, |side| side_colour(pen, side));
        let around = [
            ((x + 9.0, y), HPos::Left, VPos::Center),
            ((x + 7.0, y - 5.0), HPos::Left, VPos::Bottom),
            ((x + 7.0, y + 5.0), HPos::Left, VPos::Top),
            ((x - 9.0, y), HPos::Right, VPos::Center),
            ((x - 7.0, y - 5.0), HPos::Right, VPos::Bottom),
            ((x - 7.0, y + 5.0), HPos::Right, VPos::Top),
            ((x, y - 9.0), HPos::Center, VPos::Bottom),
            ((x, y + 9.0), HPos::Center, VPos::Top),
        ];
        let hand = Hand {
            colour,
            italic: is_orbit(picture) && index > 0,
            size: if is_on_the_way(picture, index) {
                SMALL
            } else {
                WORDS
            },
        };
        // On the strength picture the first of them stand behind the end, in the margin, where a number is not too wide.
        self.set(pen, &spot.label, hand, &around)
    }

    fn moment(&mut self, pen: &mut Pen<'_>, line: &Line) -> Drawn {
        let Some(&(at, _)) = line.points.first() else {
            return Ok(());
        };
        let (x, top, foot) = (self.field.x(at), self.field.top, self.field.foot);
        let heights = [0.0, 0.12, 0.25, 0.4, 0.55, 0.7, 0.85].map(|part| top + 2.0 + (foot - top) * part);
        let behind = heights.map(|y| ((x - 6.0, y), HPos::Right, VPos::Top));
        let before = heights.map(|y| ((x + 8.0, y), HPos::Left, VPos::Top));
        let places: Vec<_> = behind.into_iter().chain(before).collect();
        self.set(pen, &line.label, Hand::italic(pen.ink.ink), &places)
    }

    /// What happens on the way, near the top of its upright line.
    fn instant(&mut self, pen: &mut Pen<'_>, line: &Line) -> Drawn {
        let Some(&(at, _)) = line.points.first() else {
            return Ok(());
        };
        let (x, top) = (self.field.x(at), self.field.top);
        let rows = [0.0, 1.0, 2.0, 3.0, 4.0, 5.0].map(|row| top + row * (SMALL + 2.0));
        let sides = |y: f64| {
            [
                ((x + 3.0, y), HPos::Left, VPos::Top),
                ((x - 3.0, y), HPos::Right, VPos::Top),
            ]
        };
        let places: Vec<_> = rows.into_iter().flat_map(sides).collect();
        let hand = Hand {
            size: SMALL,
            ..Hand::italic(pen.ink.ink)
        };
        self.set(pen, &line.label, hand, &places)
    }

    fn break_line(&mut self, pen: &mut Pen<'_>, picture: &Picture, line: &Line, side: Side) -> Drawn {
        let Some(&last) = line.points.last() else {
            return Ok(());
        };
        // A line that moves with what arrives is named where it has come to.
        let level = line
            .points
            .iter()
            .rev()
            .take_while(|point| point.1 == last.1)
            .last();
        let first = match (is_orbit(picture), level) {
            (false, Some(level)) => *level,
            _ => line.points[0],
        };
        let (from, to) = (self.field.place(first), self.field.place(last));
        let mut places = Vec::new();
        if from.0 == to.0 {
            for part in [0.96, 0.8, 0.6, 0.4, 0.2, 0.06] {
                let y = from.1 + (to.1 - from.1) * part;
                places.push(((from.0 + 5.0, y), HPos::Left, VPos::Center));
                places.push(((from.0 - 5.0, y), HPos::Right, VPos::Center));
            }
        } else {
            // Clear of the upright mark of what moved it.
            let room = (to.0 - from.0 - FROM_MARK).max(0.0);
            for part in [0.0, 0.3, 0.55, 0.75] {
                let x = from.0 + FROM_MARK + room * part;
                let y = from.1 + (to.1 - from.1) * (x - from.0) / (to.0 - from.0);
                places.push(((x, y - 3.0), HPos::Left, VPos::Bottom));
                places.push(((x, y + 3.0), HPos::Left, VPos::Top));
            }
            places.push(((to.0 - 3.0, to.1 - 3.0), HPos::Right, VPos::Bottom));
            places.push(((to.0 - 3.0, to.1 + 3.0), HPos::Right, VPos::Top));
        }
        let hand = Hand::italic(side_colour(pen, side));
        // Where there is no room for all its words, the number tells the level.
        let (number, _) = line.label.split_once(": ").unwrap_or_default();
        if !self.has_set(pen, &line.label, hand, &places)? && !number.is_empty() {
            self.set(pen, number, hand, &places)?;
        }
        Ok(())
    }

    /// Words in a part of a map, at one of the places that lie within it: a little beside them is another part.
    fn region(&mut self, pen: &mut Pen<'_>, line: &Line) -> Drawn {
        let points = line.points.iter().map(|point| self.field.place(*point));
        let places: Vec<_> = points.map(|at| (at, HPos::Center, VPos::Center)).collect();
        self.set(pen, &line.label, Hand::italic(pen.ink.ink), &places)
    }

    /// Words beside a curve: its name.
    fn along(&mut self, pen: &mut Pen<'_>, line: &Line, colour: RGBColor, italic: bool) -> Drawn {
        let mut places = Vec::new();
        for part in [0.4, 0.3, 0.5, 0.2, 0.6, 0.1, 0.75, 0.88] {
            let Some(point) = line.points.get((part * line.points.len() as f64) as usize) else {
                continue;
            };
            let (x, y) = self.field.place(*point);
            places.push(((x + 4.0, y - 9.0), HPos::Left, VPos::Bottom));
            places.push(((x - 4.0, y + 9.0), HPos::Right, VPos::Top));
            places.push(((x - 4.0, y - 9.0), HPos::Right, VPos::Bottom));
            places.push(((x + 4.0, y + 9.0), HPos::Left, VPos::Top));
        }
        let hand = Hand {
            italic,
            ..Hand::italic(colour)
        };
        self.set(pen, &line.label, hand, &places)
    }

    /// Sets words at the best of `places`.
    fn set(&mut self, pen: &mut Pen<'_>, text: &str, hand: Hand, places: &[(Point, HPos, VPos)]) -> Drawn {
        self.has_set(pen, text, hand, places).map(drop)
    }

    /// The same; says whether there was room for them.
    fn has_set(
        &mut self,
        pen: &mut Pen<'_>,
        text: &str,
        hand: Hand,
        places: &[(Point, HPos, VPos)],
    ) -> Drawn<bool> {
        let room = pen.size().0 - 6.0;
        let room = room.min((self.field.right - self.field.left) * 0.8);
        let text = pen.fitted(text, hand.at(HPos::Left, VPos::Top), room);
        // Measured once: a canvas takes its time over it.
        let width = pen.width(&text, hand.at(HPos::Left, VPos::Top));
        let mut best: Option<(f64, Point, Set, Box)> = None;
        for &(at, across, up) in places {
            let set = hand.at(across, up);
            let extent = set.extent(width, at);
            let cost = self.cost(extent, pen.size());
            if best.as_ref().is_none_or(|(least, ..)| cost < *least) {
                best = Some((cost, at, set, extent));
            }
        }
        let Some((cost, at, set, extent)) = best else {
            return Ok(false);
        };
        // In a low picture there is no room for everything: the names of the sides stay, and words on words help nobody.
        if cost >= OTHER_WORDS && hand.italic {
            return Ok(false);
        }
        self.taken.push(extent);
        if cost >= 1.0 || self.on_ground {
            pen.label_on_paper(&text, at, set)?;
        } else {
            pen.label(&text, at, set)?;
        }
        Ok(true)
    }

    /// How much words in this box would cover.
    fn cost(&self, (left, top, right, foot): Box, (width, height): (f64, f64)) -> f64 {
        let inside = left >= self.field.left.min(width * 0.2)
            && top >= 0.0
            && right <= width
            && foot <= height.min(self.field.foot);
        let taken = self.taken.iter().filter(|other| {
            left < other.2 + 3.0 && other.0 < right + 3.0 && top < other.3 + 1.0 && other.1 < foot + 1.0
        });
        let covered = self
            .curves
            .iter()
            .filter(|((x, y), _)| (left - 2.0..=right + 2.0).contains(x) && (top..=foot).contains(y));
        let curves: f64 = covered.map(|(_, weight)| weight).sum();
        (if inside { 0.0 } else { 1e4 }) + OTHER_WORDS * taken.count() as f64 + curves
    }
}

/// Points along a line at most some pixels apart, so that a long straight stroke is not missed.
fn finely(points: &[Point]) -> Vec<Point> {
    let mut fine: Vec<Point> = points.first().copied().into_iter().collect();
    for pair in points.windows(2) {
        let (from, to) = (pair[0], pair[1]);
        let pieces = ((to.0 - from.0).hypot(to.1 - from.1) / 5.0)
            .ceil()
            .clamp(1.0, 1000.0) as usize;
        for piece in 1..=pieces {
            let part = piece as f64 / pieces as f64;
            fine.push((from.0 + (to.0 - from.0) * part, from.1 + (to.1 - from.1) * part));
        }
    }
    fine
}
