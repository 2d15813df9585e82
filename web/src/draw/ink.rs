//! The colours and the face of a picture.

use aftercount_core::number::plain;
use plotters::style::RGBColor;

/// What a picture is drawn with. On the page it is read from the style sheet, so that both agree.
#[derive(Clone, Debug, PartialEq)]
pub struct Ink {
    /// The ground, which shows through open marks and behind labels.
    pub paper: RGBColor,
    /// Text, axes and the reading line.
    pub ink: RGBColor,
    /// Rules that only guide the eye.
    pub faint: RGBColor,
    /// Side X.
    pub x: RGBColor,
    /// Side Y.
    pub y: RGBColor,
    /// The face of the labels, as a list of CSS families.
    pub face: String,
}

impl Ink {
    /// On white paper, as in the style sheet's light theme: for print and export.
    pub fn light() -> Ink {
        Ink {
            paper: RGBColor(0xfc, 0xfc, 0xfa),
            ink: RGBColor(0x23, 0x23, 0x2b),
            faint: RGBColor(0xc9, 0xc9, 0xcf),
            x: RGBColor(0x7a, 0x24, 0x58),
            y: RGBColor(0x96, 0x62, 0x0c),
            face: "\"Palatino Linotype\", Palatino, \"Book Antiqua\", serif".into(),
        }
    }
}

impl Ink {
    /// A quiet colour between the ink and the paper, nearer to the paper.
    pub fn between(&self) -> RGBColor {
        let mix = |ink: u8, paper: u8| ((4 * u16::from(ink) + 6 * u16::from(paper)) / 10) as u8;
        let (ink, paper) = (self.ink, self.paper);
        RGBColor(mix(ink.0, paper.0), mix(ink.1, paper.1), mix(ink.2, paper.2))
    }
}

/// Reads a computed colour: `rgb(122, 36, 88)` or `rgba(122, 36, 88, 0.5)`.
pub fn parse_colour(css: &str) -> Option<RGBColor> {
    let inside = css.trim().strip_prefix("rgb")?.trim_start_matches('a');
    let inside = inside.strip_prefix('(')?.strip_suffix(')')?;
    let mut parts = inside.split([',', ' ', '/']).filter(|part| !part.is_empty());
    let mut next = || {
        let value = plain(parts.next()?)?;
        Some(value.clamp(0.0, 255.0) as u8)
    };
    Some(RGBColor(next()?, next()?, next()?))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn both_ways_of_writing_a_colour_are_read() {
        assert_eq!(parse_colour("rgb(122, 36, 88)"), Some(RGBColor(122, 36, 88)));
        assert_eq!(parse_colour("rgba(0, 0, 0, 0)"), Some(RGBColor(0, 0, 0)));
        assert_eq!(parse_colour("rgb(1 2 3 / 50%)"), Some(RGBColor(1, 2, 3)));
        assert_eq!(parse_colour("CanvasText"), None);
    }

    #[test]
    fn the_quiet_colour_is_neither_ink_nor_paper() {
        let ink = Ink {
            paper: RGBColor(255, 255, 255),
            ink: RGBColor(0, 0, 0),
            ..Ink::light()
        };
        assert_eq!(ink.between(), RGBColor(153, 153, 153));
    }
}
