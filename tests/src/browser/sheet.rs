//! What the page shows.

use aftercount_core::mark::text_mark;
use aftercount_core::pairs::Pairs;
use serde_json::{Value, json};

use super::{Browser, page_url};

/// The outcome as the page states it of itself, at full precision.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Shown {
    /// `good`, `stale` or `empty`.
    pub state: String,
    /// The text mark of the text that the pictures match.
    pub settled: Option<String>,
    /// Who breaks.
    pub breaks: String,
    /// When, in units of time.
    pub time: Option<f64>,
    /// What is left of x.
    pub x_end: Option<f64>,
    /// What is left of y.
    pub y_end: Option<f64>,
}

impl Browser {
    /// Opens the page afresh with a text of an engagement, or without one if it is empty.
    pub fn open(&self, link: &str) {
        let mut url = page_url();
        if !link.is_empty() {
            url.set_fragment(Some(link));
        }
        self.open_address(url.as_str());
    }

    /// Opens any address afresh: never as a mere change of the fragment.
    pub fn open_address(&self, address: &str) {
        self.run("an empty page", self.client().goto("about:blank"));
        self.run(address, self.client().goto(address));
    }

    /// Reads the page anew, as its address stands.
    pub fn reload(&self) {
        self.run("reload", self.client().refresh());
    }

    /// One step back in the history.
    pub fn back(&self) {
        self.run("back", self.client().back());
    }

    /// One step on in the history.
    pub fn forward(&self) {
        self.run("forward", self.client().forward());
    }

    /// The address.
    pub fn address(&self) -> String {
        self.run("the address", self.client().current_url()).to_string()
    }

    /// Goes into the first frame of the page.
    pub fn enter_frame(&self) {
        self.run("the frame", self.client().enter_frame(0));
    }

    /// Goes into a frame of the page by its number, from 0.
    pub fn enter_frame_number(&self, number: u16) {
        self.run("the frame", self.client().enter_frame(number));
    }

    /// Goes back to the page around the frame.
    pub fn leave_frame(&self) {
        self.run("the page around", self.client().enter_parent_frame());
    }

    /// Waits until the pictures match a text.
    #[track_caller]
    pub fn settle(&self, text: &str) -> Shown {
        let mark = text_mark(&Pairs::parse(text));
        let body = format!(
            "return document.documentElement.dataset.settled === {};",
            json!(mark)
        );
        self.wait(&format!("settled on {text:?}"), &body);
        self.shown()
    }

    /// Waits until the pictures match whatever text there is.
    #[track_caller]
    pub fn settle_on_any(&self) -> Shown {
        self.wait(
            "settled",
            "return document.documentElement.dataset.settled !== undefined;",
        );
        self.shown()
    }

    /// Waits for a state of the page: `good`, `stale` or `empty`.
    #[track_caller]
    pub fn wait_state(&self, state: &str) -> Shown {
        let body = format!(
            "return document.documentElement.dataset.state === {};",
            json!(state)
        );
        self.wait(&format!("state {state}"), &body);
        self.shown()
    }

    /// What the page states now.
    pub fn shown(&self) -> Shown {
        let data = self.script("return {...document.documentElement.dataset};", vec![]);
        let text = |name: &str| data[name].as_str().unwrap_or_default().to_owned();
        let number = |name: &str| match data[name].as_str() {
            None | Some("") => None,
            Some(digits) => Some(
                digits
                    .parse()
                    .unwrap_or_else(|_| panic!("data-{name} is no number: {digits:?}")),
            ),
        };
        Shown {
            state: text("state"),
            settled: data["settled"].as_str().map(str::to_owned),
            breaks: text("breaks"),
            time: number("time"),
            x_end: number("xEnd"),
            y_end: number("yEnd"),
        }
    }

    /// The text of an element as it is read, or nothing where it is not shown.
    #[track_caller]
    pub fn text(&self, selector: &str) -> String {
        let script =
            "const e = document.querySelector(arguments[0]); return e.checkVisibility() ? e.innerText : '';";
        let text = self.script(script, vec![json!(selector)]);
        text.as_str()
            .map(str::trim)
            .map(str::to_owned)
            .unwrap_or_else(|| panic!("{selector} has no text"))
    }

    /// What stands in a field.
    #[track_caller]
    pub fn value(&self, name: &str) -> String {
        let value = self.script(
            "return document.getElementsByName(arguments[0])[0].value;",
            vec![json!(name)],
        );
        value
            .as_str()
            .map(str::to_owned)
            .unwrap_or_else(|| panic!("{name} is no field"))
    }

    /// The text of the engagement, as the page hands it on.
    pub fn link(&self) -> String {
        match self.script("return document.getElementById('text').value;", vec![]) {
            Value::String(text) => text,
            other => panic!("no text to hand on: {other}"),
        }
    }

    /// Waits until an element is seen to hold a text.
    #[track_caller]
    pub fn wait_text(&self, selector: &str, part: &str) {
        let body = format!(
            "const e = document.querySelector({}); return e && e.checkVisibility() && e.innerText.includes({});",
            json!(selector),
            json!(part)
        );
        self.wait(&format!("{selector} says {part:?}"), &body);
    }

    /// Waits until an element that is only heard holds a text.
    #[track_caller]
    pub fn wait_text_unseen(&self, selector: &str, text: &str) {
        let body = format!(
            "return document.querySelector({}).textContent === {};",
            json!(selector),
            json!(text)
        );
        self.wait(&format!("{selector} holds {text:?}"), &body);
    }

    /// What a test that waits in vain has to go by.
    pub(super) fn summary(&self) -> String {
        let script = "return JSON.stringify({address: location.href.slice(0, 300), ...document.documentElement.dataset,
                      text: document.body ? document.body.innerText.slice(0, 1500) : null}, null, 1);";
        let page = self.script(script, vec![]);
        let complaints = self.complaints().join("\n");
        format!("{}\n{complaints}", page.as_str().unwrap_or_default())
    }
}
