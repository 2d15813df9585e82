//! The map of two numbers in question: worked out in slices, drawn, read by pointer and keys, and put into the fields.

use crate::asking::show_in_brief;
use crate::canvas;
use crate::dom::Dom;
use crate::draw::{self, Ink, Layout};
use crate::outcome::show_table;
use aftercount_core::asked::{Chart, Second, near_text};
use aftercount_core::pairs::Pairs;
use aftercount_core::picture::{self, Picture, Role, Tone};
use aftercount_core::put::put;
use aftercount_core::sides::Side;
use aftercount_core::statement::Statement;
use aftercount_core::words::map as words;
use web_sys::HtmlSelectElement;

/// How far an arrow key goes, as a part of an axis; with Shift ten times as far.
const STEP: f64 = 0.01;

/// The canvas of the map.
const MAP: &str = "map";

/// The map of the text.
pub(crate) struct Mapping {
    dom: Dom,
    statement: Option<Statement>,
    chart: Option<Chart>,
    done: bool,
    /// Whether the coarse map has been shown.
    shown: bool,
    picture: Option<Picture>,
    field: Option<Layout>,
    /// The place that is read, as parts of both axes.
    at: [f64; 2],
    second: Option<Second>,
}

impl Mapping {
    pub(crate) fn new(dom: &Dom) -> Mapping {
        Mapping {
            dom: dom.clone(),
            statement: None,
            chart: None,
            done: true,
            shown: false,
            picture: None,
            field: None,
            at: [0.5, 0.5],
            second: None,
        }
    }

    /// Takes up the two questions of a statement; whether it has two.
    pub(crate) fn begin(&mut self, pairs: &Pairs, statement: &Statement) -> bool {
        let Some(chart) = Chart::new(pairs, statement) else {
            return false;
        };
        if self.chart.is_none() {
            self.at = [0.5, 0.5];
        }
        self.at = place_now(&chart).unwrap_or(self.at);
        self.done = false;
        self.shown = false;
        self.chart = Some(chart);
        self.statement = Some(statement.clone());
        self.dom.set_shown("mapped", true);
        self.dom.set_attribute("mapped", "aria-busy", "true");
        self.show_seconds();
        true
    }

    pub(crate) fn clear(&mut self) {
        *self = Mapping {
            second: self.second,
            ..Mapping::new(&self.dom)
        };
        self.dom.set_shown("mapped", false);
    }

    /// Leaves off: the text has changed to one that cannot be worked out.
    pub(crate) fn stop(&mut self) {
        self.done = true;
        self.dom.set_attribute("mapped", "aria-busy", "false");
        self.dom.set_text("map-working", "");
    }

    pub(crate) fn is_done(&self) -> bool {
        self.done
    }

    /// About so many fights more; whether it is done.
    pub(crate) fn go_on(&mut self, most: u32) -> bool {
        let Some(chart) = &mut self.chart else {
            return true;
        };
        self.done = self.done || chart.go_on(most);
        self.done
    }

    /// Shows how far it has come; whether there is a new picture to draw.
    pub(crate) fn show(&mut self) -> bool {
        let Some(chart) = &self.chart else { return false };
        if !self.done {
            let part = (chart.progress() * 100.0).round();
            self.dom
                .set_text("map-working", &format!("Being worked out: {part} % so far."));
            if self.shown || !chart.has_ground() {
                return false;
            }
        }
        self.shown = true;
        self.show_all();
        true
    }

    fn show_all(&mut self) {
        let (Some(statement), Some(chart)) = (&self.statement, &self.chart) else {
            return;
        };
        self.picture = picture::map(statement, chart, self.second);
        let dom = &self.dom;
        let sentence = words::sentence(statement, chart);
        dom.set_text("map-sentence", &sentence);
        show_in_brief(dom, statement, &sentence);
        dom.set_words("map-where", &words::where_looked(statement, chart));
        if let Some(picture) = &self.picture {
            dom.set_text("map-words", &picture.summary);
            show_table(dom, "map-table", &picture.table);
            for (id, tone) in [
                ("map-key-x", Tone::Breaks(Side::X)),
                ("map-key-y", Tone::Breaks(Side::Y)),
                ("map-key-both", Tone::Both),
                ("map-key-neither", Tone::Neither),
            ] {
                let there = picture.ground.as_ref().is_some_and(|ground| ground.has(tone));
                dom.set_shown(id, there);
            }
            dom.set_shown("map-key-flip", picture.has(Role::Flip));
            // All over the map it has no edge.
            let wanted = chart.met_share().is_some_and(|share| share > 0.0);
            dom.set_shown("map-key-met", wanted || picture.has(Role::Wanted));
        }
        for side in Side::BOTH {
            let id = format!("map.{}.who", side.letter());
            dom.set_text(&id, &statement.names[side]);
        }
        if self.done {
            dom.set_text("map-working", "");
            dom.set_attribute("mapped", "aria-busy", "false");
        }
        self.read();
    }

    pub(crate) fn sentence(&self) -> Option<String> {
        let (statement, chart) = (self.statement.as_ref()?, self.chart.as_ref()?);
        chart.has_ground().then(|| words::sentence(statement, chart))
    }

    /// The map as a picture, its canvas, and what was stated.
    pub(crate) fn picture(&self) -> Option<(&'static str, &Picture, &Statement)> {
        Some((MAP, self.picture.as_ref()?, self.statement.as_ref()?))
    }

    /// Draws the map and the place that is read.
    pub(crate) fn draw(&mut self, ink: &Ink) -> Result<(), String> {
        let field = canvas::draw(&self.dom, MAP, ink, self.picture.as_ref())?;
        self.field = field.or(self.field);
        self.draw_place(ink)
    }

    fn draw_place(&self, ink: &Ink) -> Result<(), String> {
        let (Some(field), Some(chart), Some(mut over)) =
            (&self.field, &self.chart, canvas::prepare(&self.dom, "map-over"))
        else {
            return Ok(());
        };
        let values = chart.values(self.at);
        draw::reading_on_map(&mut over.backend, over.scale, ink, field, (values[0], values[1]))
    }

    /// The pointer is over the map.
    pub(crate) fn pointed(&mut self, (x, y): (f64, f64), ink: &Ink) {
        let Some(field) = &self.field else { return };
        let part = |value: f64, from: f64, to: f64| ((value - from) / (to - from)).clamp(0.0, 1.0);
        self.go_to(
            [part(x, field.left, field.right), part(y, field.foot, field.top)],
            ink,
        );
    }

    /// A key on the map; whether it was one of its keys.
    pub(crate) fn key(&mut self, key: &str, far: bool, ink: &Ink) -> bool {
        let step = if far { 10.0 * STEP } else { STEP };
        let [across, up] = self.at;
        let at = match key {
            "ArrowLeft" => [across - step, up],
            "ArrowRight" => [across + step, up],
            "ArrowUp" => [across, up + step],
            "ArrowDown" => [across, up - step],
            "Home" => self.chart.as_ref().and_then(place_now).unwrap_or([0.5, 0.5]),
            _ => return false,
        };
        self.go_to(at.map(|part| part.clamp(0.0, 1.0)), ink);
        true
    }

    fn go_to(&mut self, at: [f64; 2], ink: &Ink) {
        self.at = at;
        self.read();
        if let Err(error) = self.draw_place(ink) {
            web_sys::console::error_1(&error.into());
        }
    }

    /// Says the outcome at the place.
    fn read(&mut self) {
        let (Some(statement), Some(chart)) = (&self.statement, &mut self.chart) else {
            return;
        };
        let values = chart.values(self.at);
        let outcome = chart.outcome(values);
        let missing = chart.missing(values, &outcome);
        let words = words::reading(statement, chart, values, &outcome, missing.as_ref());
        self.dom.set_text("map-reading", &words);
    }

    /// The text with the place put into its fields.
    pub(crate) fn putting(&self, pairs: &Pairs) -> Option<Pairs> {
        let chart = self.chart.as_ref()?;
        let mut changed = pairs.clone();
        for (slot, value) in chart.slots().iter().zip(chart.values(self.at)) {
            put(&mut changed, slot, &near_text(slot, value));
        }
        Some(changed)
    }

    /// Another second reading was chosen.
    pub(crate) fn choose_second(&mut self) {
        let Some(select) = self.dom.typed::<HtmlSelectElement>("map-second") else {
            return;
        };
        let place = usize::try_from(select.selected_index() - 1).ok();
        self.second = place.and_then(|place| Second::ALL.get(place).copied());
        if self.shown {
            self.show_all();
        }
    }

    fn show_seconds(&self) {
        let (Some(statement), Some(select)) =
            (&self.statement, self.dom.typed::<HtmlSelectElement>("map-second"))
        else {
            return;
        };
        let names = Second::ALL.map(|second| words::second(statement, second));
        let names = std::iter::once("none".to_owned()).chain(names);
        let chosen = self
            .second
            .and_then(|second| Second::ALL.iter().position(|one| *one == second));
        let chosen = chosen.map_or(0, |place| place as i32 + 1);
        self.dom
            .set_choices(&select, names.map(|name| (name.clone(), name)), chosen);
    }
}

/// Where the numbers are now, as parts of both axes.
fn place_now(chart: &Chart) -> Option<[f64; 2]> {
    let part = |axis: usize| {
        let (now, span) = (chart.slots()[axis].value()?, chart.spans()[axis]);
        let part = (now - span.low) / (span.high - span.low);
        (0.0..=1.0).contains(&part).then_some(part)
    };
    Some([part(0)?, part(1)?])
}
