//! What only paper has: the assumptions as a table, the pictures as SVG in light ink, and on every page the marking, the text
//! mark, the version and the date. It is put together when the printer is about to look.

use crate::canvas;
use crate::dom::{Dom, append, append_words, set};
use crate::draw::{self, Ink};
use aftercount_core::mark::text_mark;
use aftercount_core::number;
use aftercount_core::pairs::Pairs;
use aftercount_core::picture::Picture;
use aftercount_core::problem::seen;
use aftercount_core::sides::Side;
use aftercount_core::statement::Statement;
use aftercount_core::words::assumptions::{Assumed, Assumptions, assumptions};
use aftercount_core::words::format::date;
use wasm_bindgen::JsCast;
use web_sys::{DomParser, Element, HtmlDetailsElement, HtmlElement, SupportedType};

/// The size of a picture on the sheet in CSS pixels; it is scaled to the width of its column.
const SIZE: (u32, u32) = (350, 300);

/// That of a picture that has the sheet's whole width.
const LARGE: (u32, u32) = (560, 340);

/// The most CSS pixels that a picture of a frame is wide: then its letters are not smaller than others on the paper.
const WIDEST: i32 = 600;

/// The paper, and what was opened for it alone.
pub(crate) struct Paper {
    dom: Dom,
    /// The pictures and the foot, while they are on the page.
    drawn: Vec<Element>,
    opened: bool,
}

impl Paper {
    pub(crate) fn new(dom: &Dom) -> Paper {
        Paper {
            dom: dom.clone(),
            drawn: Vec::new(),
            opened: false,
        }
    }

    /// Puts everything on the paper: the assumptions of `stated`, each picture beside the canvas with its id, and in the
    /// margins what stands in the form now; the text mark is that of what was stated.
    pub(crate) fn fill(
        &mut self,
        text: &Pairs,
        stated: Option<(&Pairs, &Statement)>,
        pictures: &[(&str, Option<&Picture>)],
    ) {
        self.put_away();
        self.dom.mark_root("data-on-paper", Some(""));
        self.margins(text, stated.map_or(text, |(pairs, _)| pairs));
        if let Some((pairs, statement)) = stated {
            self.table(&assumptions(pairs, statement));
        }
        self.dom.set_shown("assumptions", stated.is_some());
        for (id, picture) in pictures {
            self.picture(id, *picture);
        }
        self.set_timeline_apart(true);
        // The working is opened, so that it is on the paper.
        if let Some(details) = self.dom.typed::<HtmlDetailsElement>("working-details") {
            self.opened = !details.open();
            details.set_open(true);
        }
        self.measure_formulas();
    }

    /// The printer has looked.
    pub(crate) fn put_away(&mut self) {
        self.dom.mark_root("data-on-paper", None);
        self.dom.set_shown("assumptions", false);
        self.dom.set_text("assumptions-table", "");
        for drawn in self.drawn.drain(..) {
            drawn.remove();
        }
        self.set_timeline_apart(false);
        if let Some(details) = self.dom.typed::<HtmlDetailsElement>("working-details")
            && std::mem::take(&mut self.opened)
        {
            details.set_open(false);
        }
    }

    /// On paper the timeline stands below the part of the pictures and not among them: it may go on for pages, and they stay on
    /// one.
    fn set_timeline_apart(&self, apart: bool) -> Option<()> {
        let (timeline, plate) = (
            self.dom.element("timeline-part")?,
            self.dom.element("strength-plate")?,
        );
        let moved = if apart {
            let part = plate.closest(".part").ok()??;
            part.insert_adjacent_element("afterend", &timeline)
        } else {
            let table = plate.query_selector(".as-table").ok()??;
            table.insert_adjacent_element("beforebegin", &timeline)
        };
        moved.ok()?.map(drop)
    }

    /// What stands at the top and the foot of every page.
    fn margins(&mut self, text: &Pairs, worked_out: &Pairs) {
        let written = |key: &str| seen(text.get(key).unwrap_or_default().trim());
        let now = js_sys::Date::new_0();
        let today = date(now.get_full_year(), now.get_month() + 1, now.get_date());
        let version = self
            .dom
            .element("version")
            .and_then(|element| element.text_content());
        for (id, words) in [
            ("paper-marking-top", written("marking")),
            ("paper-marking-foot", written("marking")),
            ("paper-title", written("title")),
            ("paper-mark", format!("Text mark {}", text_mark(worked_out))),
            (
                "paper-version",
                format!("Aftercount {}", version.unwrap_or_default()),
            ),
            ("paper-date", today.clone()),
            ("foot-date", today),
        ] {
            self.dom.set_text(id, &words);
        }
        self.foot();
    }

    /// A copy of the foot, which the style sheet fixes to the foot of every page.
    fn foot(&mut self) -> Option<()> {
        let foot = self.dom.element("paper-foot")?;
        let copy = foot.clone_node_with_deep(true).ok()?.dyn_into::<Element>().ok()?;
        append(&foot.parent_element()?, &copy);
        self.drawn.push(copy);
        Some(())
    }

    fn table(&self, assumed: &Assumptions) -> Option<()> {
        let dom = &self.dom;
        let table = dom.element("assumptions-table")?;
        let (head, body) = (dom.make("thead", "")?, dom.make("tbody", "")?);
        let names = dom.make("tr", "")?;
        append(&names, &dom.make("td", "")?);
        for side in Side::BOTH {
            let name = dom.make("th", &assumed.names[side])?;
            set(&name, "scope", "col");
            set(&name, "class", side.letter());
            append(&names, &name);
        }
        append(&head, &names);
        for row in &assumed.sides {
            let line = self.row(&row.label, &row.key)?;
            for side in Side::BOTH {
                append(&line, &self.cell(&row.holds[side])?);
            }
            append(&body, &line);
        }
        for row in &assumed.whole {
            let (line, cell) = (self.row(&row.label, &row.key)?, self.cell(&row.holds)?);
            set(&cell, "colspan", "2");
            append(&line, &cell);
            append(&body, &line);
        }
        append(&table, &head);
        append(&table, &body);
        Some(())
    }

    fn row(&self, label: &str, key: &str) -> Option<Element> {
        let (line, head) = (self.dom.make("tr", "")?, self.dom.make("th", label)?);
        set(&head, "scope", "row");
        append_words(&self.dom, &head, &format!(" `{key}`"));
        append(&line, &head);
        Some(line)
    }

    fn cell(&self, assumed: &Assumed) -> Option<Element> {
        let cell = self.dom.make("td", &assumed.words)?;
        if assumed.default {
            set(&cell, "class", "by-default");
        }
        Some(cell)
    }

    /// Tells the style sheet how wide each formula is, in its own letters: one that is wider than the paper is set smaller,
    /// since it cannot be rolled there, and would be cut.
    fn measure_formulas(&self) {
        let Ok(found) = self.dom.document.query_selector_all(".formula > math") else {
            return;
        };
        for math in (0..found.length()).filter_map(|at| found.item(at)?.dyn_into::<Element>().ok()) {
            let style = self.dom.window.get_computed_style(&math).ok().flatten();
            let letter = style.and_then(|style| style.get_property_value("font-size").ok());
            let letter = letter.and_then(|size| number::plain(size.trim_end_matches("px")));
            let holder = math
                .parent_element()
                .and_then(|holder| holder.dyn_into::<HtmlElement>().ok());
            if let (Some(letter), Some(holder)) = (letter.filter(|letter| *letter > 0.0), holder) {
                // Chromium gives the box of a formula that rolls the width of its strip, not its own.
                let width = match holder.scroll_width() {
                    rolled if rolled > holder.client_width() => f64::from(rolled),
                    _ => math.get_bounding_client_rect().width(),
                };
                let letters = width / letter;
                // Where it is refused the formula keeps its size.
                let _ = holder.style().set_property("--letters", &letters.to_string());
            }
        }
    }

    /// A picture as SVG, beside the canvas with its id.
    fn picture(&mut self, id: &str, picture: Option<&Picture>) -> Option<()> {
        let beside = self.dom.element(id)?.parent_element()?;
        let measure = canvas::measure(&self.dom)?;
        let ink = Ink {
            face: canvas::ink(&self.dom).face,
            ..Ink::light()
        };
        let text = draw::svg(picture?, &ink, self.size(id), measure, None);
        let text = text
            .map_err(|error| web_sys::console::error_1(&error.into()))
            .ok()?;
        // Read as SVG and never as HTML: what the names hold is text in it.
        let read = DomParser::new()
            .ok()?
            .parse_from_string(&text, SupportedType::ImageSvgXml);
        let place = self.dom.make("div", "")?;
        set(&place, "class", "on-paper drawn");
        append(&place, &read.ok()?.document_element()?);
        append(&beside, &place);
        self.drawn.push(place);
        Some(())
    }

    /// How large a picture is drawn: in a frame in the shape that it has there, and no wider than paper.
    fn size(&self, id: &str) -> (u32, u32) {
        let framed = self.dom.root.get_attribute("data-view").as_deref() == Some("frame");
        let canvas = self.dom.element(id).filter(|_| framed);
        let shown = canvas.map(|canvas| (canvas.client_width(), canvas.client_height()));
        match shown.filter(|size| size.0 >= 40 && size.1 >= 40) {
            Some((width, height)) => {
                let narrowed = width.min(WIDEST);
                (narrowed as u32, (height * narrowed / width).max(120) as u32)
            }
            None if matches!(id, "strength" | "orbit") => SIZE,
            None => LARGE,
        }
    }
}
