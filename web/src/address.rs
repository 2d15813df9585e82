//! The address: where the text comes from, and where it is kept.
//!
//! The text stands in the fragment, which never reaches a server's log. Keystrokes replace it, at most every 300 ms;
//! the first change after a field was left begins a new entry of the history, so that back, forward, Undo and Redo
//! step from field to field. In a frame nothing is pushed. Browsers throttle these calls, and some refuse them in a
//! sandbox: then the page goes on with its own list of entries.

use crate::dom::Dom;
use wasm_bindgen::JsValue;
use web_sys::History;

/// The least time between two writes, in milliseconds.
pub(crate) const WRITE_APART: f64 = 300.0;

/// How many refusals in a row are answered by another try without a change; the waits between them double. Browsers
/// that throttle forget within half a minute; a sandbox never gives way.
const MOST_REFUSALS: u32 = 8;

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
    /// When a write was last tried.
    written_at: f64,
    /// How many writes were refused since the last that held.
    refusals: u32,
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
            written_at: f64::NEG_INFINITY,
            refusals: 0,
        }
    }

    /// The text that the page begins with.
    pub(crate) fn begin(&mut self, text: String) {
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
        if self.written_at + WRITE_APART <= self.now() {
            self.write();
        }
    }

    /// The milliseconds after which [`Address::write`] is due; `None` where nothing waits, or trying is of no use.
    pub(crate) fn due(&self) -> Option<i32> {
        self.unwritten
            .as_ref()
            .filter(|_| self.refusals <= MOST_REFUSALS)?;
        let apart = WRITE_APART * 2_f64.powi(self.refusals as i32);
        Some((self.written_at + apart - self.now()).ceil().max(0.0) as i32)
    }

    /// A field was left or a button pressed: the next change begins a new entry.
    pub(crate) fn close(&mut self) {
        self.write();
        self.open = false;
    }

    /// Writes what is still to be written; what is refused waits on.
    pub(crate) fn write(&mut self) {
        let Some(text) = self.unwritten.take() else { return };
        if self.replace(&format!("#{text}")) {
            self.refusals = 0;
        } else {
            self.refusals = self.refusals.saturating_add(1);
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

    /// Whether the page stands in a frame.
    pub(crate) fn is_framed(&self) -> bool {
        self.framed
    }

    fn push(&mut self, text: &str) -> bool {
        let pushed = history(&self.dom).is_some_and(|history| {
            history
                .push_state_with_url(&JsValue::from(self.at as f64), "", Some(&format!("#{text}")))
                .is_ok()
        });
        self.kept_by_browser &= pushed;
        self.written_at = self.now();
        pushed
    }

    /// Whether the browser took it: one that throttles refuses now and takes it later.
    fn replace(&mut self, address: &str) -> bool {
        self.written_at = self.now();
        history(&self.dom).is_some_and(|history| {
            history
                .replace_state_with_url(&JsValue::from(self.at as f64), "", Some(address))
                .is_ok()
        })
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
