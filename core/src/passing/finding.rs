//! The finding: what an engagement leaves, in a few lines that stand by themselves.

use crate::caution;
use crate::mark::text_mark;
use crate::outcome::Outcome;
use crate::pairs::Pairs;
use crate::statement::Statement;
use crate::words::format::plain;
use crate::words::sentence::sentence;

/// An engagement that was worked out, and which copy of the page says so.
#[derive(Clone, Copy, Debug)]
pub struct Finding<'a> {
    /// The text.
    pub pairs: &'a Pairs,
    /// What it says.
    pub statement: &'a Statement,
    /// What it leaves.
    pub outcome: &'a Outcome,
    /// What a number in question must be, where one is asked for.
    pub asked: Option<&'a str>,
    /// The line "Nearest reversal: …", where it is known.
    pub reversal: Option<&'a str>,
    /// The version of the page.
    pub version: &'a str,
}

/// "Text mark 6Z3K-X0PW, Aftercount 0.1.0".
pub fn mark_and_version(pairs: &Pairs, version: &str) -> String {
    format!("Text mark {}, Aftercount {version}", text_mark(pairs))
}

impl Finding<'_> {
    /// The finding with plain digits, a line each: the marking, the sentence, the answer to a question, the nearest
    /// reversal, the text mark with the version, the caution. What there is none of is left out.
    pub fn lines(&self) -> String {
        let sentence = plain(&sentence(self.statement, self.outcome));
        let [asked, reversal] = [self.asked, self.reversal].map(|line| line.map(plain).unwrap_or_default());
        let lines = [
            self.statement.marking.trim(),
            &sentence,
            &asked,
            &reversal,
            &mark_and_version(self.pairs, self.version),
            caution::SHORT,
        ];
        let lines = lines.into_iter().filter(|line| !line.is_empty());
        lines.collect::<Vec<_>>().join("\n")
    }

    /// Lines for a wiki: a frame with title and size; and the plain link, the finding and the caution as text, which
    /// print and search find.
    ///
    /// `address` is where the wiki's copy of the page lies.
    pub fn wiki(&self, address: &str) -> String {
        let framed = self.link_with(address, "frame");
        let whole = self.link_with(address, "");
        let name = match self.statement.title.trim() {
            "" => "Aftercount".to_owned(),
            title => format!("Aftercount: {title}"),
        };
        let name = escaped(&name);
        let lines: Vec<String> = self.lines().lines().map(escaped).collect();
        format!(
            "<iframe title=\"{name}\" width=\"800\" height=\"420\" sandbox=\"allow-scripts allow-popups\" \
             src=\"{framed}\"></iframe>\n\
             <p><a href=\"{whole}\">{name}</a></p>\n<p>{}</p>\n",
            lines.join("<br>\n")
        )
    }

    fn link_with(&self, address: &str, view: &str) -> String {
        let mut pairs = self.pairs.clone();
        pairs.set("view", view);
        escaped(&format!("{address}#{}", pairs.link()))
    }
}

/// A text as it stands in HTML, between tags or within an attribute.
pub fn escaped(text: &str) -> String {
    let mut safe = String::with_capacity(text.len());
    for letter in text.chars() {
        match letter {
            '&' => safe += "&amp;",
            '<' => safe += "&lt;",
            '>' => safe += "&gt;",
            '"' => safe += "&quot;",
            other => safe.push(other),
        }
    }
    safe
}

#[cfg(test)]
pub(super) mod tests {
    use super::*;
    use crate::fight::{Effort, Fight, fight};

    /// A text, worked out.
    pub(crate) fn worked_out(link: &str) -> (Pairs, Statement, Fight) {
        let pairs = Pairs::parse(link);
        let statement = Statement::read(&pairs).unwrap_or_else(|problems| panic!("{link}: {problems:?}"));
        let fight = fight(&statement.engagement(), Effort::Trajectory);
        (pairs, statement, fight)
    }

    const LINK: &str = "title=Turn <3>&marking=EXERCISE \"%26\"&x.name=Ondrel&x.start=60000&x.rate=0.04&x.break=0.3\
                        &y.name=Vessary&y.start=40000&y.rate=0.06&y.break=0.4";

    #[test]
    fn five_lines_with_plain_digits() {
        let (pairs, statement, fight) = worked_out(LINK);
        let finding = Finding {
            pairs: &pairs,
            statement: &statement,
            outcome: &fight.outcome,
            asked: None,
            reversal: Some("Nearest reversal: 12\u{202f}345 more"),
            version: "0.1.0",
        };
        let lines = finding.lines();
        let lines: Vec<&str> = lines.lines().collect();
        assert_eq!(lines[0], "EXERCISE \"&\"");
        let sentence =
            "In this model Vessary breaks first, after 7.68 h (7 h 41 min); left: Ondrel 45431 of 60000, ";
        assert!(lines[1].starts_with(sentence), "{}", lines[1]);
        assert_eq!(lines[2], "Nearest reversal: 12345 more");
        assert_eq!(
            lines[3],
            format!("Text mark {}, Aftercount 0.1.0", text_mark(&pairs))
        );
        assert_eq!(lines[4], caution::SHORT);
        let asked = Finding {
            reversal: None,
            asked: Some("A number must be 12\u{202f}000."),
            ..finding
        };
        assert_eq!(asked.lines().lines().nth(2), Some("A number must be 12000."));
        let neither = Finding { asked: None, ..asked };
        assert_eq!(neither.lines().lines().count(), 4);
    }

    #[test]
    fn a_wiki_gets_the_frame_the_link_and_the_words() {
        let (pairs, statement, fight) = worked_out(LINK);
        let finding = Finding {
            pairs: &pairs,
            statement: &statement,
            outcome: &fight.outcome,
            asked: None,
            reversal: None,
            version: "0.1.0",
        };
        let wiki = finding.wiki("aftercount.html");
        for part in [
            "<iframe title=\"Aftercount: Turn &lt;3&gt;\" width=\"800\" height=\"420\" sandbox=\"allow-scripts allow-popups\" \
             src=\"aftercount.html#title=Turn%20%3C3%3E&amp;",
            "&amp;view=frame&amp;v=1\"></iframe>",
            "&amp;y.break=0.4&amp;v=1\">Aftercount: Turn &lt;3&gt;</a>",
            "<p>EXERCISE &quot;&amp;&quot;<br>\nIn this model Vessary",
            caution::SHORT,
        ] {
            assert!(wiki.contains(part), "{part} in {wiki}");
        }
        assert_eq!(
            super::super::received::received(&wiki)
                .expect("opens")
                .get("x.name"),
            Some("Ondrel")
        );
    }
}
