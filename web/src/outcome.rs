//! What the model leaves, put on the page: the sentence, the figures, the echoes, the tables, the data attributes.

use crate::dom::{Dom, append, set};
use crate::form;
use crate::handles::HeldAxes;
use crate::law_fields::{self, law_of};
use crate::working;
use aftercount_core::continued::continued;
use aftercount_core::fight::{Effort, Fight, fight};
use aftercount_core::outcome::Breaks;
use aftercount_core::pairs::Pairs;
use aftercount_core::picture::{self, Picture, Role, Table};
use aftercount_core::sides::{Both, Side};
use aftercount_core::statement::{Statement, TimeUnit};
use aftercount_core::words::decided::decided;
use aftercount_core::words::figures::{Figures, figures};
use aftercount_core::words::{meaning, reading, sentence};
use web_sys::Element;

/// The last text that could be worked out, and what it led to.
pub(crate) struct Good {
    pub(crate) statement: Statement,
    pub(crate) fight: Fight,
    pub(crate) strength: Option<Picture>,
    pub(crate) orbit: Option<Picture>,
}

impl Good {
    /// Works a statement out; its pictures are held to axes where something is dragged on them.
    pub(crate) fn new(statement: Statement, held: Option<&HeldAxes>) -> Good {
        let fight = fight(&statement.engagement(), Effort::Trajectory);
        let (strength, orbit) = match held {
            Some(held) => (
                picture::strength_on(&statement, &fight, &held.strength),
                picture::orbit_on(&statement, &fight, &held.orbit),
            ),
            None => (
                picture::strength(&statement, &fight),
                picture::orbit(&statement, &fight),
            ),
        };
        Good {
            statement,
            fight,
            strength,
            orbit,
        }
    }

    /// The outcome in one sentence.
    pub(crate) fn sentence(&self) -> String {
        sentence::sentence(&self.statement, &self.fight.outcome)
    }

    /// Both strengths at a time; `None` without a trajectory, which is always asked for.
    pub(crate) fn strengths_at(&self, t: f64) -> Option<Both<f64>> {
        self.fight
            .trajectory
            .as_ref()
            .map(|trajectory| trajectory.strengths_at(t))
    }

    /// Whether there is an engagement that goes on from a time: after the start, and before the end.
    pub(crate) fn goes_on_from(&self, t: f64) -> bool {
        let trajectory = self.fight.trajectory.as_ref();
        trajectory.is_some_and(|trajectory| t > 0.0 && trajectory.ends().is_none_or(|end| t < end))
    }

    /// The text of the engagement that goes on from a time, where `pairs` is that of this one.
    pub(crate) fn continued(&self, pairs: &Pairs, t: f64) -> Option<Pairs> {
        let trajectory = self.fight.trajectory.as_ref()?;
        self.goes_on_from(t)
            .then(|| continued(pairs, &self.statement, trajectory, t))
    }

    /// What decided it, where a computation shows it. Takes many fights.
    pub(crate) fn decided(&self) -> Option<String> {
        decided(&self.statement, &self.fight.outcome)
    }

    /// What the reading line says at a time.
    pub(crate) fn reading(&self, t: f64) -> String {
        self.fight
            .trajectory
            .as_ref()
            .map(|path| reading::reading(&self.statement, path, t))
            .unwrap_or_default()
    }
}

/// The keys behind "more" that have a unit beside them.
pub(crate) const MORE: [&str; 5] = ["wastage", "support.area", "support.aimed", "reach", "reach.shape"];

/// Shows everything that is text or number.
pub(crate) fn show(dom: &Dom, good: &Good) {
    dom.set_text("sentence", &good.sentence());
    let long = good.sentence().chars().count() > 180;
    dom.set_attribute("sentence", "class", if long { "long" } else { "" });
    show_figures(dom, &figures(&good.statement, &good.fight.outcome));
    for side in Side::BOTH {
        let letter = side.letter();
        dom.set_text(
            &format!("{letter}.rate.echo"),
            &meaning::rate(&good.statement, side),
        );
        dom.set_text(
            &format!("{letter}.break.echo"),
            &meaning::break_point(&good.statement, side),
        );
        let warning = meaning::more_hurts(&good.statement, side);
        show_warning(dom, side, warning.as_deref());
    }
    for (name, picture) in [("strength", &good.strength), ("orbit", &good.orbit)] {
        let Some(picture) = picture else { continue };
        dom.set_text(&format!("{name}-words"), &picture.summary);
        show_table(dom, &format!("{name}-table"), &picture.table);
    }
    // A key to what is not there would send the eye searching.
    let pictures = || good.strength.iter().chain(&good.orbit);
    dom.set_shown("parity-key", pictures().any(|picture| picture.has(Role::Parity)));
    let mut lines = pictures().flat_map(|picture| &picture.lines);
    dom.set_shown(
        "break-key",
        lines.any(|line| matches!(line.role, Role::BreakLine(_))),
    );
    show_attributes(dom, good);
}

/// Takes off what no longer follows from any text.
pub(crate) fn clear(dom: &Dom) {
    for id in [
        "sentence",
        "figures",
        "strength-words",
        "orbit-words",
        "strength-table",
        "orbit-table",
        "reading-words",
        "decided",
    ] {
        dom.set_text(id, "");
    }
    for letter in ["x", "y"] {
        dom.set_text(&format!("{letter}.rate.echo"), "");
        dom.set_text(&format!("{letter}.break.echo"), "");
    }
    for side in Side::BOTH {
        show_warning(dom, side, None);
    }
    for name in ["data-breaks", "data-time", "data-x-end", "data-y-end"] {
        dom.mark_root(name, None);
    }
}

/// The note beside a strength of which more can hurt.
fn show_warning(dom: &Dom, side: Side, warning: Option<&str>) {
    let id = format!("{}.more-hurts", side.letter());
    dom.set_text(&id, warning.unwrap_or_default());
    dom.set_shown(&id, warning.is_some());
}

/// The outcome at full precision, for the tests: the shortest digits that read back the same.
fn show_attributes(dom: &Dom, good: &Good) {
    let outcome = &good.fight.outcome;
    let breaks = match outcome.breaks {
        Breaks::X => "x",
        Breaks::Y => "y",
        Breaks::Both => "both",
        Breaks::Neither => "neither",
    };
    let number = |value: Option<f64>| value.map(|value| value.to_string()).unwrap_or_default();
    dom.mark_root("data-breaks", Some(breaks));
    dom.mark_root("data-time", Some(&number(outcome.time)));
    dom.mark_root("data-x-end", Some(&number(outcome.x.end)));
    dom.mark_root("data-y-end", Some(&number(outcome.y.end)));
}

/// Names, directions and units: what is read from the text alone, so that it is right beside a problem too.
pub(crate) fn show_names(dom: &Dom, pairs: &Pairs) {
    let names = Both::of(|side| form::name_of(pairs, side.letter()));
    let word = |key: &str, default: &'static str| {
        pairs
            .get(key)
            .map(str::trim)
            .filter(|word| !word.is_empty())
            .unwrap_or(default)
            .to_owned()
    };
    let counted = word("counted", "combatants");
    let unit = TimeUnit::of_word(&word("unit", "h")).unwrap_or_default();
    for side in Side::BOTH {
        let (letter, name, enemy) = (side.letter(), &names[side], &names[side.enemy()]);
        dom.set_text(&format!("{letter}.who"), name);
        dom.set_text(&format!("{letter}.spoken"), &format!("{name}:"));
        dom.set_text(&format!("{letter}.direction"), &meaning::direction(name, enemy));
        let rate_unit = law_of(pairs, side)
            .map(|law| meaning::rate_unit(law, name, enemy, unit))
            .unwrap_or_default();
        dom.set_text(&format!("{letter}.rate.unit"), &rate_unit);
        for key in law_fields::names().chain(MORE) {
            let unit = meaning::parameter_unit(key, name, enemy, unit);
            dom.set_text(&format!("{letter}.{key}.unit"), &unit);
        }
        for key in ["start", "lost"] {
            dom.set_text(&format!("{letter}.{key}.unit"), &counted);
        }
        if let Ok(places) = dom.document.query_selector_all(&format!("[data-name={letter}]")) {
            for place in (0..places.length()).filter_map(|at| places.item(at)) {
                place.set_text_content(Some(name));
            }
        }
    }
    for side in Side::BOTH {
        for (list, part, words) in [
            ("join", "size", counted.clone()),
            ("join", "time", unit.symbol().to_owned()),
            ("flow", "rate", format!("{counted} per\u{a0}{}", unit.symbol())),
            ("flow", "from", unit.symbol().to_owned()),
            ("flow", "to", unit.symbol().to_owned()),
        ] {
            dom.set_text(&format!("{}.{list}.{part}.unit", side.letter()), &words);
        }
    }
    dom.set_text("until.unit", unit.symbol());
    dom.set_text("table-unit", unit.symbol());
    dom.set_text(
        "range.closing.unit",
        &format!("length per\u{a0}{}", unit.symbol()),
    );
}

fn show_figures(dom: &Dom, figures: &Figures) {
    let Some(table) = dom.element("figures") else {
        return;
    };
    table.set_text_content(None);
    let mut build = Build { dom, row: None };
    if let Some(head) = build.part(&table, "thead") {
        build.row_in(&head);
        build.cell("td", "", &[]);
        for side in Side::BOTH {
            build.cell(
                "th",
                &figures.names[side],
                &[("scope", "col"), ("class", side.letter())],
            );
        }
    }
    let Some(body) = build.part(&table, "tbody") else {
        return;
    };
    for row in &figures.rows {
        build.row_in(&body);
        build.cell("th", &row.label, &[("scope", "row")]);
        for side in Side::BOTH {
            let attributes = [("data-side", &*figures.names[side])];
            build.figure(&row.values[side], row.lines[side], &attributes);
        }
    }
    for row in &figures.both {
        build.row_in(&body);
        build.cell("th", &row.label, &[("scope", "row")]);
        build.figure(&row.value, row.line, &[("colspan", "2"), ("class", "both")]);
    }
}

/// Shows a table of core's.
pub(crate) fn show_table(dom: &Dom, id: &str, content: &Table) {
    let Some(table) = dom.element(id) else { return };
    table.set_text_content(None);
    let mut build = Build { dom, row: None };
    if let Some(caption) = build.part(&table, "caption") {
        caption.set_text_content(Some(&content.caption));
    }
    if let Some(head) = build.part(&table, "thead") {
        build.row_in(&head);
        for text in &content.heads {
            build.cell("th", text, &[("scope", "col")]);
        }
    }
    let Some(body) = build.part(&table, "tbody") else {
        return;
    };
    for row in &content.rows {
        build.row_in(&body);
        for (text, head) in row.iter().zip(&content.heads) {
            build.cell("td", text, &[("data-head", head)]);
        }
    }
}

/// Builds a table cell by cell, each filled as text.
struct Build<'a> {
    dom: &'a Dom,
    row: Option<Element>,
}

impl Build<'_> {
    fn part(&self, table: &Element, tag: &str) -> Option<Element> {
        let part = self.dom.make(tag, "")?;
        append(table, &part);
        Some(part)
    }

    fn row_in(&mut self, part: &Element) {
        self.row = self.part(part, "tr");
    }

    fn cell(&self, tag: &str, text: &str, attributes: &[(&str, &str)]) -> Option<Element> {
        let (row, cell) = (self.row.as_ref()?, self.dom.make(tag, text)?);
        for (name, value) in attributes {
            set(&cell, name, value);
        }
        append(row, &cell);
        Some(cell)
    }

    /// A figure, as a link to the line of the working that it comes from.
    fn figure(&self, text: &str, line: Option<&str>, attributes: &[(&str, &str)]) {
        let words = if line.is_some() { "" } else { text };
        if let Some(cell) = self.cell("td", words, attributes)
            && let Some(line) = line
            && let Some(link) = self.dom.make("a", text)
        {
            set(&link, "href", &format!("#{}", working::id(line)));
            append(&cell, &link);
        }
    }
}
