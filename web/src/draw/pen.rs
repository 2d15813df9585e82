//! Strokes, marks and labels in CSS pixels, on any backend of plotters.

use super::ink::Ink;
use super::surface::{Drawn, Surface};
use plotters::prelude::{Color, RGBColor, ShapeStyle, TextStyle};
use plotters::style::text_anchor::{HPos, Pos, VPos};
use plotters::style::{FontDesc, FontFamily, FontStyle};
use plotters_backend::BackendCoord;

/// A point in CSS pixels, from the top left.
pub(crate) type Point = (f64, f64);

/// Dash lengths in CSS pixels: drawn, left out, and so on; none for a solid line.
pub(crate) type Dash = &'static [f64];

/// No gaps.
pub(crate) const SOLID: Dash = &[];

/// How far a drawn line may be from its points, in CSS pixels: less than is seen.
const TOLERANCE: f64 = 0.15;

/// How a label is set.
#[derive(Clone, Copy)]
pub(crate) struct Set {
    pub(crate) size: f64,
    pub(crate) italic: bool,
    pub(crate) colour: RGBColor,
    pub(crate) across: HPos,
    pub(crate) up: VPos,
}

impl Set {
    /// Left, top, right and foot of a label of this width.
    pub(crate) fn extent(self, width: f64, (x, y): Point) -> (f64, f64, f64, f64) {
        let left = match self.across {
            HPos::Left => x,
            HPos::Center => x - width / 2.0,
            HPos::Right => x - width,
        };
        let top = match self.up {
            VPos::Top => y,
            VPos::Center => y - self.size / 2.0,
            VPos::Bottom => y - self.size,
        };
        (left, top, left + width, top + self.size)
    }
}

/// Draws in CSS pixels on a backend that has `scale` times as many, on all of it or on a sheet within it.
pub(crate) struct Pen<'a> {
    surface: &'a mut dyn Surface,
    scale: f64,
    /// The top left of the sheet.
    corner: Point,
    /// Its width and height.
    size: (f64, f64),
    /// How many times as large letters must be asked for: some backends draw them smaller.
    letters: f64,
    pub(crate) ink: &'a Ink,
}

impl<'a> Pen<'a> {
    pub(crate) fn new(surface: &'a mut dyn Surface, scale: f64, ink: &'a Ink) -> Pen<'a> {
        let (width, height) = surface.size();
        Pen {
            surface,
            scale,
            corner: (0.0, 0.0),
            size: (f64::from(width) / scale, f64::from(height) / scale),
            letters: 1.0,
            ink,
        }
    }

    /// The same with letters that are asked for so many times as large.
    pub(crate) fn with_letters(self, letters: f64) -> Pen<'a> {
        Pen { letters, ..self }
    }

    /// A pen for a sheet within this one's.
    pub(crate) fn within(&mut self, corner: Point, size: (f64, f64)) -> Pen<'_> {
        Pen {
            surface: self.surface,
            corner: (self.corner.0 + corner.0, self.corner.1 + corner.1),
            size,
            ..*self
        }
    }

    /// Width and height of the sheet in CSS pixels.
    pub(crate) fn size(&self) -> (f64, f64) {
        self.size
    }

    fn coord(&self, (x, y): Point) -> BackendCoord {
        let (x, y) = (x + self.corner.0, y + self.corner.1);
        ((x * self.scale).round() as i32, (y * self.scale).round() as i32)
    }

    fn stroke(&self, colour: RGBColor, width: f64) -> ShapeStyle {
        ShapeStyle::from(&colour).stroke_width((width * self.scale).round().max(1.0) as u32)
    }

    /// A line through points, dashed where a dash is given.
    pub(crate) fn line(&mut self, points: &[Point], colour: RGBColor, width: f64, dash: Dash) -> Drawn {
        let style = self.stroke(colour, width);
        let points = simplified(points, TOLERANCE);
        let strokes = if dash.is_empty() {
            vec![points]
        } else {
            dashes(&points, dash)
        };
        for stroke in strokes.iter().filter(|stroke| stroke.len() > 1) {
            let path: Vec<BackendCoord> = stroke.iter().map(|point| self.coord(*point)).collect();
            self.surface.path(&path, &style)?;
        }
        Ok(())
    }

    /// A closed figure: filled, or open so that the paper shows through.
    pub(crate) fn figure(&mut self, corners: &[Point], colour: RGBColor, filled: bool) -> Drawn {
        let path: Vec<BackendCoord> = corners.iter().map(|point| self.coord(*point)).collect();
        let ground = if filled { colour } else { self.ink.paper };
        self.surface.polygon(&path, &ShapeStyle::from(&ground).filled())?;
        let style = self.stroke(colour, 1.6);
        // The first stroke again at the end, so that every corner is mitred.
        let around: Vec<BackendCoord> = path.iter().chain(path.iter().take(2)).copied().collect();
        self.surface.path(&around, &style)
    }

    /// A round mark.
    pub(crate) fn dot(&mut self, at: Point, radius: f64, colour: RGBColor, filled: bool) -> Drawn {
        let radius = (radius * self.scale).round() as u32;
        let ground = if filled { colour } else { self.ink.paper };
        let at = self.coord(at);
        self.surface
            .circle(at, radius, &ShapeStyle::from(&ground).filled(), true)?;
        let style = self.stroke(colour, 1.6);
        self.surface.circle(at, radius, &style, false)
    }

    /// A label with its anchor at a point.
    pub(crate) fn label(&mut self, text: &str, at: Point, set: Set) -> Drawn {
        let face = self.ink.face.clone();
        let size = set.size * self.letters;
        let style = self.text_style(&face, Set { size, ..set });
        let at = self.coord(at);
        self.surface.words(text, &style, at)
    }

    /// The same on a piece of blank paper, so that lines behind it do not run through the letters.
    pub(crate) fn label_on_paper(&mut self, text: &str, at: Point, set: Set) -> Drawn {
        let (left, top, right, foot) = self.extent(text, at, set);
        self.paper((left - 2.0, top), (right + 2.0, foot))?;
        self.label(text, at, set)
    }

    /// A piece of blank paper between two corners.
    pub(crate) fn paper(&mut self, from: Point, to: Point) -> Drawn {
        self.patch(from, to, self.ink.paper)
    }

    /// A patch of one colour between two corners.
    pub(crate) fn patch(&mut self, from: Point, to: Point, colour: RGBColor) -> Drawn {
        let style = ShapeStyle::from(&colour).filled();
        let (from, to) = (self.coord(from), self.coord(to));
        self.surface.rectangle(from, to, &style)
    }

    /// The width of a label in CSS pixels.
    pub(crate) fn width(&self, text: &str, set: Set) -> f64 {
        let style = self.text_style(&self.ink.face, set);
        // A backend that cannot measure is taken to set half an em a letter.
        let guess = || text.chars().count() as f64 * set.size / 2.0;
        self.surface
            .width(text, &style)
            .map_or_else(guess, |width| f64::from(width) / self.scale)
    }

    /// The text, shortened with an ellipsis where it is wider than its room.
    pub(crate) fn fitted(&self, text: &str, set: Set, room: f64) -> String {
        if self.width(text, set) <= room {
            return text.to_owned();
        }
        let letters: Vec<char> = text.chars().collect();
        let shortened = |count: usize| letters[..count].iter().chain(['…'].iter()).collect::<String>();
        let count = (1..letters.len())
            .rev()
            .find(|count| self.width(&shortened(*count), set) <= room);
        shortened(count.unwrap_or(1))
    }

    /// Left, top, right and foot of a label.
    pub(crate) fn extent(&self, text: &str, at: Point, set: Set) -> (f64, f64, f64, f64) {
        set.extent(self.width(text, set), at)
    }

    fn text_style<'b>(&self, face: &'b str, set: Set) -> TextStyle<'b> {
        let style = if set.italic {
            FontStyle::Italic
        } else {
            FontStyle::Normal
        };
        let font: FontDesc<'b> = FontDesc::new(FontFamily::Name(face), set.size * self.scale, style);
        TextStyle {
            font,
            color: set.colour.to_backend_color(),
            pos: Pos::new(set.across, set.up),
        }
    }
}

/// Leaves out points that lie within `tolerance` of the line without them (Ramer 1972; Douglas and Peucker 1973).
///
/// The backend counts in whole pixels: a fine curve through many points would be a staircase, and look beaded.
fn simplified(points: &[Point], tolerance: f64) -> Vec<Point> {
    let Some(last) = points.len().checked_sub(1) else {
        return Vec::new();
    };
    let mut kept = vec![false; points.len()];
    (kept[0], kept[last]) = (true, true);
    let mut spans = vec![(0, last)];
    while let Some((from, to)) = spans.pop() {
        let offs = (from + 1..to).map(|index| (index, off_line(points[index], points[from], points[to])));
        if let Some((index, off)) = offs.max_by(|a, b| a.1.total_cmp(&b.1))
            && off > tolerance
        {
            kept[index] = true;
            spans.extend([(from, index), (index, to)]);
        }
    }
    points
        .iter()
        .zip(kept)
        .filter(|(_, kept)| *kept)
        .map(|(point, _)| *point)
        .collect()
}

/// How far a point is from the stretch between two others.
fn off_line(point: Point, from: Point, to: Point) -> f64 {
    let (dx, dy) = (to.0 - from.0, to.1 - from.1);
    let square = dx * dx + dy * dy;
    let along = if square == 0.0 {
        0.0
    } else {
        ((point.0 - from.0) * dx + (point.1 - from.1) * dy) / square
    };
    let along = along.clamp(0.0, 1.0);
    (point.0 - from.0 - dx * along).hypot(point.1 - from.1 - dy * along)
}

/// Cuts a line into dashes by length, so that a curve keeps its rhythm however finely it is sampled.
fn dashes(points: &[Point], dash: Dash) -> Vec<Vec<Point>> {
    let mut strokes = Vec::new();
    let mut stroke: Vec<Point> = points.first().copied().into_iter().collect();
    let (mut index, mut rest) = (0, dash[0]);
    for pair in points.windows(2) {
        let (mut from, to) = (pair[0], pair[1]);
        loop {
            let length = (to.0 - from.0).hypot(to.1 - from.1);
            if length < rest || !length.is_finite() {
                rest -= length;
                stroke.push(to);
                break;
            }
            let part = rest / length;
            from = (from.0 + (to.0 - from.0) * part, from.1 + (to.1 - from.1) * part);
            stroke.push(from);
            if index % 2 == 0 {
                strokes.push(std::mem::take(&mut stroke));
            }
            stroke = vec![from];
            index = (index + 1) % dash.len();
            rest = dash[index];
        }
    }
    if index % 2 == 0 {
        strokes.push(stroke);
    }
    strokes
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn dashes_keep_their_lengths_around_a_corner() {
        let strokes = dashes(&[(0.0, 0.0), (5.0, 0.0), (5.0, 10.0)], &[4.0, 2.0]);
        assert_eq!(strokes[0], [(0.0, 0.0), (4.0, 0.0)]);
        assert_eq!(strokes[1], [(5.0, 1.0), (5.0, 5.0)]);
        assert_eq!(strokes[2], [(5.0, 7.0), (5.0, 10.0)]);
    }

    #[test]
    fn straight_stretches_need_their_ends_only() {
        let steps = |from: i32, to: i32| (from..=to).map(f64::from);
        let bent: Vec<Point> = steps(0, 50)
            .map(|x| (x, 0.0))
            .chain(steps(1, 50).map(|y| (50.0, y)))
            .collect();
        assert_eq!(simplified(&bent, 0.1), [(0.0, 0.0), (50.0, 0.0), (50.0, 50.0)]);
        assert_eq!(simplified(&[], 0.1), []);
        assert_eq!(simplified(&[(1.0, 1.0)], 0.1), [(1.0, 1.0)]);
    }

    #[test]
    fn a_line_of_no_length_makes_no_dashes_for_ever() {
        assert_eq!(dashes(&[(1.0, 1.0), (1.0, 1.0)], &[4.0, 2.0]).len(), 1);
    }
}
