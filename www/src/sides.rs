//! The two sides of the form: one block of HTML, filled once for each side.
//!
//! No dependency, since the tests that hold the form to the core's tables fill the sheet in the same way.

/// What one side's block has of its own.
struct OneSide {
    /// The letter that its keys begin with.
    side: &'static str,
    /// What it is called until it has a name.
    name: &'static str,
    /// The same of the other side.
    enemy: &'static str,
    /// The line and the mark by which the pictures show it, in a box of 52 by 14.
    sign: &'static str,
}

const SIDES: [OneSide; 2] = [
    OneSide {
        side: "x",
        name: "Side X",
        enemy: "Side Y",
        sign: r#"<path class="line" d="M0 7h52"/><path class="mark" d="M21.5 2.5h9v9h-9z"/>"#,
    },
    OneSide {
        side: "y",
        name: "Side Y",
        enemy: "Side X",
        sign: r#"<path class="line" d="M0 7h15M37 7h15"/><path class="mark" d="M26 1.5l6 10.5h-12z"/>"#,
    },
];

/// The sheet with both sides where it says `{{sides}}`, each made from the block of one side.
pub(crate) fn with_sides(sheet: &str, block: &str) -> String {
    let filled = SIDES.map(|of| {
        block
            .replace("{{side}}", of.side)
            .replace("{{name}}", of.name)
            .replace("{{enemy}}", of.enemy)
            .replace("{{sign}}", of.sign)
    });
    sheet.replace("{{sides}}", &filled.join("\n"))
}

#[cfg(test)]
mod tests {
    use super::with_sides;

    #[test]
    fn each_side_has_its_own_letter_names_and_sign() {
        let sheet = with_sides(
            "<{{sides}}>{{style}}",
            "{{side}}: {{name}} against {{enemy}}, {{sign}}",
        );
        assert!(sheet.starts_with("<x: Side X against Side Y, <path"), "{sheet}");
        assert!(sheet.contains("\ny: Side Y against Side X, <path"), "{sheet}");
        assert!(sheet.ends_with(">{{style}}"), "{sheet}");
        assert_eq!(sheet.matches("{{").count(), 1, "{sheet}");
    }
}
