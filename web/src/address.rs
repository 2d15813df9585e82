//! The address: where the text comes from, and where it is kept.
//!
//! The text stands in the fragment, which never reaches a server's log. Keystrokes replace it, at a pace that browsers
//! bear; the first change after a field was left begins a new entry of the history, so that back, forward, Undo and Redo
//! step from field to field. In a frame nothing is pushed. Browsers throttle these calls, with an error or without a
//! word, and some refuse them in a sandbox: so every write is looked at, and where one failed the page goes on with its
//! own list of entries.

use crate::dom::Dom;
use crate::pace::Pace;
use wasm_bindgen::JsValue;
use web_sys::History;

/// The entries of the history that this page knows, and what is still to be written.
pub(crate) struct Address {
    dom: Dom,
    framed: bool,
    /// The texts of the entries; `None` for those from before a reload.
    entries: Vec<Option<String>>,
    at: usize,
    /// Whether the current entry is still being edited.
    open: bool,
    /// Whether the browser's own history holds these entries.
    kept_by_browser: bool,
    unwritten: Option<String>,
    pace: Pace,
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
        let at = history(dom).and_then(|history| place(&history)).unwrap_or(0);
        if let Some(history) = history(dom) {
            // So that the page knows this entry when it comes back to it. A refusal is met again at the first write.
            let _ = history.replace_state(&JsValue::from(at as f64), "");
        }
        Address {
            dom: dom.clone(),
            framed: dom.is_framed(),
            entries: vec![None; at + 1],
            at,
            open: false,
            kept_by_browser: true,
            unwritten: None,
            pace: Pace::new(),
        }
    }

    /// The text that the page begins with, and whether the address may be behind it: where a program before this one
    /// trapped, the last keystrokes are still to be written.
    pub(crate) fn begin(&mut self, text: String, behind: bool) {
        self.unwritten = Some(text.clone()).filter(|_| behind);
        self.entries[self.at] = Some(text);
    }

    /// A text that the user has just changed.
    pub(crate) fn edited(&mut self, text: String) {
        if !self.open {
            self.open = true;
            self.entries.truncate(self.at + 1);
            self.entries.push(Some(text.clone()));
            self.at += 1;
            if !self.framed && self.push(&text) {
                self.unwritten = None;
                return;
            }
        }
        self.entries[self.at] = Some(text.clone());
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
        let known = history(&self.dom).and_then(|history| place(&history));
        match known {
            Some(at) if at < self.entries.len() => self.at = at,
            Some(at) => {
                self.entries.resize(at + 1, None);
                self.at = at;
            }
            // A fragment written by hand makes an entry of its own.
            None => {
                self.entries.truncate(self.at + 1);
                self.entries.push(None);
                self.at += 1;
                if let Some(history) = history(&self.dom) {
                    let _ = history.replace_state(&JsValue::from(self.at as f64), "");
                }
            }
        }
        self.entries[self.at] = Some(text);
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
        match self.entries[self.at].clone() {
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
                .push_state_with_url(&JsValue::from(self.at as f64), "", Some(&address))
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
                .replace_state_with_url(&JsValue::from(self.at as f64), "", Some(address))
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

    fn now(&self) -> f64 {
        self.dom.window.performance().map_or(0.0, |clock| clock.now())
    }
}

fn history(dom: &Dom) -> Option<History> {
    dom.window.history().ok()
}

/// Our own number of the current entry.
fn place(history: &History) -> Option<usize> {
    let number = history.state().ok()?.as_f64()?;
    // A page that someone else wrote may keep a state of its own here.
    ((0.0..10_000.0).contains(&number) && number.fract() == 0.0).then_some(number as usize)
}
