//! A picture that stands by itself, with words above and below it that it must not go without.

use super::layout::Layout;
use super::pen::{Pen, Set};
use aftercount_core::picture::Picture;
use plotters::prelude::RGBColor;
use plotters::style::text_anchor::{HPos, VPos};

/// What stands around a picture that is passed on.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Around {
    /// The handling marking, above and below; may be empty, as the title.
    pub marking: String,
    /// The engagement's title.
    pub title: String,
    /// What the model leaves, in a sentence.
    pub sentence: String,
    /// The text mark and the version.
    pub mark: String,
    /// The caution.
    pub caution: String,
}

/// The blank edge, in CSS pixels.
const EDGE: f64 = 16.0;
/// The size of the title.
const TITLE: f64 = 17.0;
/// The size of the other words.
const WORDS: f64 = 13.0;
/// The part of the width that lines fill: whoever opens an SVG may have a wider face.
const FILLED: f64 = 0.88;
/// The height of a line in sizes of its letters.
const LINE: f64 = 1.35;

/// Lines of words of one hand.
struct Lines {
    lines: Vec<String>,
    set: Set,
}

impl Lines {
    fn height(&self) -> f64 {
        self.lines.len() as f64 * self.set.size * LINE
    }
}

/// Draws `picture` with the words around it over the whole of the pen's sheet.
pub(crate) fn draw(pen: &mut Pen<'_>, picture: &Picture, around: &Around) -> Result<Layout, String> {
    let (width, height) = pen.size();
    let ink = pen.ink;
    pen.paper((0.0, 0.0), (width, height))?;
    let line = |pen: &Pen<'_>, text: &str, size: f64, italic: bool, colour: RGBColor| {
        let set = Set {
            size,
            italic,
            colour,
            across: HPos::Left,
            up: VPos::Top,
        };
        let lines = wrapped(text, (width - 2.0 * EDGE) * FILLED, |text| pen.width(text, set));
        Lines { lines, set }
    };
    let head = [
        line(pen, &around.marking, WORDS, false, ink.ink),
        line(pen, &around.title, TITLE, true, ink.ink),
    ];
    let foot = [
        line(pen, &around.sentence, WORDS, false, ink.ink),
        line(pen, &around.caution, WORDS, true, ink.ink),
        line(pen, &around.mark, WORDS, false, ink.ink),
        line(pen, &around.marking, WORDS, false, ink.ink),
    ];
    let top = below(pen, &head, EDGE)? + 4.0;
    let under: f64 = foot.iter().map(Lines::height).sum();
    // However long the words are, the picture keeps its place; then the last of them fall off the edge.
    let bottom = (height - EDGE - under).max(top + 200.0);
    below(pen, &foot, bottom)?;
    let size = (width - 2.0 * EDGE, bottom - top - 6.0);
    super::draw_with(&mut pen.within((EDGE, top), size), picture)
}

/// Sets lines one below the other, and gives where the next would stand.
fn below(pen: &mut Pen<'_>, all: &[Lines], from: f64) -> Result<f64, String> {
    let mut at = from;
    for lines in all {
        for line in &lines.lines {
            pen.label(line, (EDGE, at), lines.set)?;
            at += lines.set.size * LINE;
        }
    }
    Ok(at)
}

/// Breaks a text into lines no wider than `width`: between words, and within one that is wider by itself.
fn wrapped(text: &str, width: f64, measure: impl Fn(&str) -> f64) -> Vec<String> {
    let mut lines: Vec<String> = Vec::new();
    for word in text.split_whitespace() {
        if let Some(last) = lines.last_mut() {
            let longer = format!("{last} {word}");
            if measure(&longer) <= width {
                *last = longer;
                continue;
            }
        }
        if measure(word) <= width {
            lines.push(word.to_owned());
            continue;
        }
        let mut piece = String::new();
        for letter in word.chars() {
            piece.push(letter);
            if measure(&piece) > width && piece.chars().count() > 1 {
                piece.pop();
                lines.push(std::mem::replace(&mut piece, letter.to_string()));
            }
        }
        lines.push(piece);
    }
    lines
}

#[cfg(test)]
mod tests {
    use super::wrapped;

    #[test]
    fn lines_break_between_words_and_within_long_ones() {
        let width = |text: &str| text.chars().count() as f64;
        assert_eq!(wrapped("one two three", 7.0, width), ["one two", "three"]);
        assert_eq!(
            wrapped("a böigefällt b", 4.0, width),
            ["a", "böig", "efäl", "lt b"]
        );
        assert_eq!(wrapped("  ", 4.0, width), Vec::<String>::new());
        assert_eq!(wrapped("ab", 0.5, width), ["a", "b"]);
    }
}
