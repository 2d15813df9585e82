//! The page on paper, as the browser prints it.

use std::fs;
use std::process::Command;

use base64::Engine as _;
use base64::engine::general_purpose::STANDARD as BASE64;

use super::{Browser, command, files};

/// A size of paper in centimetres.
#[derive(Clone, Copy, Debug)]
pub struct Paper {
    /// How wide it is.
    pub width: f64,
    /// How high it is.
    pub height: f64,
}

impl Paper {
    /// ISO 216.
    pub const A4: Self = Self {
        width: 21.0,
        height: 29.7,
    };
    /// ANSI/ASME Y14.1, size A.
    pub const LETTER: Self = Self {
        width: 21.59,
        height: 27.94,
    };
}

impl Browser {
    /// Prints the page, leaves the PDF as `screens/NAME.pdf` in the target directory for a person to look at, and hands back
    /// the text of each page with every run of blanks as one.
    #[track_caller]
    pub fn print(&self, name: &str, paper: Paper) -> Vec<String> {
        let answer = self.run(
            "print",
            self.client()
                .issue_cmd(command::Command::print(paper.width, paper.height)),
        );
        let encoded = answer.as_str().expect("a document in base64");
        let bytes = BASE64.decode(encoded).expect("base64 from the browser");
        let path = files::screen(name).with_extension("pdf");
        fs::write(&path, &bytes).expect("a document is written");
        let read = Command::new("pdftotext").arg(&path).arg("-").output();
        let read = read.expect("pdftotext is installed (Debian: poppler-utils)");
        assert!(read.status.success(), "{}", String::from_utf8_lossy(&read.stderr));
        let text = apart(&String::from_utf8(read.stdout).expect("text is UTF-8"));
        // Each page ends with a form feed.
        let pages = text.trim_end_matches('\u{c}').split('\u{c}');
        pages
            .map(|page| page.split_whitespace().collect::<Vec<_>>().join(" "))
            .collect()
    }

    /// How far a word stands below the top of each page of a document that [`Browser::print`] left, in points: where it stands
    /// first; pages without it are left out.
    pub fn heights_of(&self, name: &str, word: &str) -> Vec<f64> {
        let boxes = boxes(name);
        let pages = boxes.split("<page").skip(1);
        let tail = format!(">{word}</word>");
        pages
            .filter_map(|page| Some(edge(page.lines().find(|line| line.ends_with(&tail))?, "yMin")))
            .collect()
    }

    /// Every word of a document that [`Browser::print`] left lies at least a centimetre from each edge of its page.
    ///
    /// # Panics
    /// Where one does not: it would be cut off by a printer, or has been.
    #[track_caller]
    pub fn assert_within_margins(&self, name: &str, paper: Paper) {
        let boxes = boxes(name);
        // Points of a document are 72 to the inch.
        let margin = 72.0 / 2.54;
        let (right, foot) = ((paper.width - 1.0) * margin, (paper.height - 0.8) * margin);
        let words = boxes
            .lines()
            .filter(|line| line.trim_start().starts_with("<word"));
        let mut count = 0;
        for word in words {
            let edge = |side: &str| edge(word, side);
            assert!(
                edge("xMin") >= margin
                    && edge("yMin") >= margin
                    && edge("xMax") <= right
                    && edge("yMax") <= foot,
                "{name}: {word}"
            );
            count += 1;
        }
        assert!(count > 50, "{name} has {count} words");
    }
}

/// The words of a document with their places, as `pdftotext` tells them.
#[track_caller]
fn boxes(name: &str) -> String {
    let path = files::screen(name).with_extension("pdf");
    let read = Command::new("pdftotext")
        .arg("-bbox")
        .arg(&path)
        .arg("-")
        .output();
    let read = read.expect("pdftotext is installed (Debian: poppler-utils)");
    String::from_utf8_lossy(&read.stdout).into_owned()
}

/// An edge of such a word.
#[track_caller]
fn edge(word: &str, side: &str) -> f64 {
    let (_, rest) = word
        .split_once(&format!("{side}=\""))
        .expect("a box has four sides");
    let digits = rest.split('"').next().unwrap_or_default();
    digits.parse().expect("a number of points")
}

/// The text with letters that a font joins as letters of their own: what Firefox prints says which form it took.
fn apart(text: &str) -> String {
    let joined = [("ﬀ", "ff"), ("ﬁ", "fi"), ("ﬂ", "fl"), ("ﬃ", "ffi"), ("ﬄ", "ffl")];
    joined
        .into_iter()
        .fold(text.to_owned(), |text, (one, several)| text.replace(one, several))
}
