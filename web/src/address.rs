//! The address: where the text comes from, and where it is kept.
//!
//! The text stands in the fragment, which never reaches a server's log. Keystrokes replace it, at a pace that browsers
//! bear; the first change after a field was left begins a new entry of the history, so that back, forward, Undo and Redo
//! step from field to field. In a frame nothing is pushed. Browsers throttle these calls, with an error or without a
//! word, and some refuse them in a sandbox: so every write is looked at, and where one failed the page goes on with its
//! own list of entries.
//!
//! Beside each entry stands the text as it was received, and what its rates were written as, so that what was changed
//! since, and which rates are from another law, is known after a reload too.

use crate::dom::Dom;
use crate::kept_rates::{self, WrittenAs};
use crate::pace::Pace;
use js_sys::Array;
use std::rc::Rc;
use wasm_bindgen::{JsCast, JsValue};
use web_sys::History;

/// The entries of the history that this page knows, and what is still to be written.
pub(crate) struct Address {
    dom: Dom,
    framed: bool,
    entries: Vec<Entry>,
    at: usize,
    /// Whether the browser came to this page with a text of its own, instead of reloading it.
    fresh: bool,
    /// Whether the current entry is still being edited.
    open: bool,
    /// Whether the browser's own history holds these entries.
    kept_by_browser: bool,
    unwritten: Option<String>,
    pace: Pace,
}

/// An entry of the history.
#[derive(Clone, Default)]
struct Entry {
    /// Its text; `None` where it is from before a reload.
    text: Option<String>,
    /// What was received, where its text goes back to that.
    received: Option<Rc<str>>,
    /// What its rates were written as, where this page has shown it.
    written_as: Option<WrittenAs>,
}

/// What a step through the history needs.
pub(crate) enum Step {
    /// The browser walks, and tells the page by an event.
    Browser,
    /// The page shows this text itself.
    Show(String),
    /// There is nothing there.
    Nowhere,
}

impl Address {
    /// Takes up the history where a reload left it.
    pub(crate) fn new(dom: &Dom) -> Address {
        let known = history(dom).and_then(|history| state(&history));
        let fresh = known.is_none();
        let (at, entry) = known.unwrap_or_default();
        let mut entries = vec![Entry::default(); at];
        entries.push(entry);
        Address {
            dom: dom.clone(),
            framed: dom.is_framed(),
            entries,
            at,
            fresh,
            open: false,
            kept_by_browser: true,
            unwritten: None,
            pace: Pace::new(),
        }
    }

    /// The text that the page begins with, and whether the address may be behind it: where a program before this one
    /// trapped, the last keystrokes are still to be written. An empty one is that of the demo, which nobody sent.
    pub(crate) fn begin(&mut self, text: String, behind: bool) {
        self.unwritten = Some(text.clone()).filter(|_| behind);
        if behind {
            self.entries[self.at].written_as = None;
        }
        if self.fresh && !behind && !text.is_empty() {
            self.entries[self.at].received = Some(text.as_str().into());
        }
        self.entries[self.at].text = Some(text);
        if let Some(history) = history(&self.dom) {
            // So that the page knows this entry when it comes back to it. A refusal is met again at the first write.
            let _ = history.replace_state(&self.state(), "");
        }
    }

    /// What was received, where the text that is shown goes back to that.
    pub(crate) fn received_text(&self) -> Option<&str> {
        self.entries[self.at].received.as_deref()
    }

    /// From now on the current entry goes back to another text that was received, or to none.
    pub(crate) fn goes_back_to(&mut self, received: Option<&str>) {
        let entry = &mut self.entries[self.at];
        entry.received = received.map(Rc::from);
        // Written anew, with the state beside it.
        self.unwritten = entry.text.clone();
    }

    /// What the rates of the current entry were written as, where that is known.
    pub(crate) fn written_as(&mut self) -> &mut Option<WrittenAs> {
        &mut self.entries[self.at].written_as
    }

    /// A text that the user has just changed.
    pub(crate) fn edited(&mut self, text: String, written_as: WrittenAs) {
        let entry = Entry {
            text: Some(text.clone()),
            received: self.entries[self.at].received.clone(),
            written_as: Some(written_as),
        };
        if self.open {
            self.entries[self.at] = entry;
        } else {
            self.open = true;
            self.entries.truncate(self.at + 1);
            self.entries.push(entry);
            self.at += 1;
            if !self.framed && self.push(&text) {
                self.unwritten = None;
                return;
            }
        }
        self.unwritten = Some(text);
        if self.pace.wait(self.now()) <= 0.0 {
            self.write();
        }
    }

    /// The milliseconds after which [`Address::write`] is due; `None` where nothing waits, or trying is of no use.
    pub(crate) fn due(&self) -> Option<i32> {
        self.unwritten.as_ref().filter(|_| !self.pace.is_given_up())?;
        Some(self.pace.wait(self.now()).ceil() as i32)
    }

    /// A field was left or a button pressed: the next change begins a new entry.
    pub(crate) fn close(&mut self) {
        self.write();
        self.open = false;
    }

    /// Writes what is still to be written; what is refused waits on.
    pub(crate) fn write(&mut self) {
        let Some(text) = self.unwritten.take() else { return };
        if !self.replace(&format!("#{text}")) {
            self.unwritten = Some(text);
        }
    }

    /// The text in the address; `None` where it holds no key.
    ///
    /// A query that holds `v=1` is moved to the fragment at once, so that no later load sends it anywhere.
    pub(crate) fn received(&mut self) -> Option<String> {
        let location = self.dom.window.location();
        let fragment = location.hash().unwrap_or_default();
        if let Some(text) = fragment.strip_prefix('#').filter(|text| text.contains('=')) {
            return Some(text.to_owned());
        }
        let query = location.search().unwrap_or_default();
        let text = query
            .strip_prefix('?')
            .filter(|text| text.split('&').any(|pair| pair == "v=1"))?;
        let path = location.pathname().unwrap_or_default();
        self.replace(&format!("{path}#{text}"));
        Some(text.to_owned())
    }

    /// The browser went to another entry, or the user wrote another fragment: `text` is what it holds.
    pub(crate) fn arrived(&mut self, text: String) {
        self.unwritten = None;
        self.open = false;
        match history(&self.dom).and_then(|history| state(&history)) {
            Some((at, entry)) => {
                let length = self.entries.len().max(at + 1);
                self.entries.resize(length, Entry::default());
                self.at = at;
                self.entries[at] = Entry {
                    text: Some(text),
                    ..entry
                };
            }
            // A fragment written by hand makes an entry of its own.
            None => {
                self.entries.truncate(self.at + 1);
                self.entries.push(Entry::default());
                self.at += 1;
                self.fresh = true;
                self.begin(text, false);
            }
        }
    }

    /// Whether Undo and Redo have somewhere to go.
    pub(crate) fn can_step(&self) -> (bool, bool) {
        (self.at > 0, self.at + 1 < self.entries.len())
    }

    /// One entry back or forward.
    pub(crate) fn step(&mut self, forward: bool) -> Step {
        self.close();
        let (back, on) = self.can_step();
        if !(if forward { on } else { back }) {
            return Step::Nowhere;
        }
        if !self.framed
            && self.kept_by_browser
            && let Some(history) = history(&self.dom)
            && (if forward {
                history.forward()
            } else {
                history.back()
            })
            .is_ok()
        {
            return Step::Browser;
        }
        self.at = if forward { self.at + 1 } else { self.at - 1 };
        match self.entries[self.at].text.clone() {
            Some(text) => {
                self.unwritten = Some(text.clone());
                self.write();
                Step::Show(text)
            }
            None => Step::Nowhere,
        }
    }

    /// Whether there is something that a reload would lose.
    pub(crate) fn is_behind(&self) -> bool {
        self.unwritten.is_some()
    }

    /// Whether the page stands in a frame.
    pub(crate) fn is_framed(&self) -> bool {
        self.framed
    }

    fn push(&mut self, text: &str) -> bool {
        let address = format!("#{text}");
        let pushed = history(&self.dom).is_some_and(|history| {
            history
                .push_state_with_url(&self.state(), "", Some(&address))
                .is_ok()
        }) && self.stands(&address);
        self.kept_by_browser &= pushed;
        self.pace.tried(self.now(), pushed);
        pushed
    }

    /// Whether the browser took it: one that throttles refuses now and takes it later.
    fn replace(&mut self, address: &str) -> bool {
        let held = history(&self.dom).is_some_and(|history| {
            history
                .replace_state_with_url(&self.state(), "", Some(address))
                .is_ok()
        }) && self.stands(address);
        self.pace.tried(self.now(), held);
        held
    }

    /// Whether the fragment of an address that was written is there: a browser that throttles may say nothing of it.
    fn stands(&self, address: &str) -> bool {
        let fragment = self.dom.window.location().hash().unwrap_or_default();
        address
            .split_once('#')
            .is_none_or(|(_, text)| fragment.strip_prefix('#').unwrap_or_default() == text)
    }

    /// What stands beside the current entry in the browser's own history: its number, what was received, and what its
    /// rates were written as.
    fn state(&self) -> JsValue {
        let received = self.received_text().map_or(JsValue::NULL, JsValue::from_str);
        let written_as = self.entries[self.at].written_as.map_or(0, kept_rates::number);
        Array::of3(&JsValue::from(self.at), &received, &JsValue::from(written_as)).into()
    }

    fn now(&self) -> f64 {
        self.dom.window.performance().map_or(0.0, |clock| clock.now())
    }
}

fn history(dom: &Dom) -> Option<History> {
    dom.window.history().ok()
}

/// Our own number of the current entry, and what stands beside it.
fn state(history: &History) -> Option<(usize, Entry)> {
    let state: Array = history.state().ok()?.dyn_into().ok()?;
    // A page that someone else wrote may keep a state of its own here.
    let number = |place| {
        let number = state.get(place).as_f64()?;
        let ours = (0.0..10_000.0).contains(&number) && number.fract() == 0.0;
        ours.then_some(number as usize)
    };
    let entry = Entry {
        text: None,
        received: state.get(1).as_string().map(Rc::from),
        written_as: number(2)
            .filter(|written_as| *written_as > 0)
            .map(kept_rates::of_number),
    };
    Some((number(0)?, entry))
}
