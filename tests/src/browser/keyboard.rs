//! A reader who has a keyboard and nothing else. Wherever the focus comes to on the way, it is looked at.

use fantoccini::actions::{InputSource as _, KeyAction, KeyActions};
use serde_json::{Value, json};

use super::Browser;

/// A key as the keyboard has it.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Struck {
    /// To the next stop.
    Tab,
    /// To the stop before.
    BackTab,
    /// Presses a button, follows a link, ends a field.
    Enter,
    /// Presses a button, opens a panel.
    Space,
    /// Leaves what is open.
    Escape,
    /// A step back.
    Left,
    /// A step on.
    Right,
    /// A line down; the next choice of a list.
    Down,
    /// To the near end.
    Home,
    /// To the far end.
    End,
    /// A large step on.
    PageUp,
    /// A large step back.
    PageDown,
}

const SHIFT: char = '\u{e008}';

impl Struck {
    fn code(self) -> char {
        match self {
            Self::Tab | Self::BackTab => '\u{e004}',
            Self::Enter => '\u{e007}',
            Self::Space => ' ',
            Self::Escape => '\u{e00c}',
            Self::PageUp => '\u{e00e}',
            Self::PageDown => '\u{e00f}',
            Self::End => '\u{e010}',
            Self::Home => '\u{e011}',
            Self::Left => '\u{e012}',
            Self::Right => '\u{e014}',
            Self::Down => '\u{e015}',
        }
    }
}

/// Says what is wrong with the place of the focus: not shown, without a ring, out of sight, covered by something else,
/// or not after the stop before (before it, where the way goes back). Empty on the page itself.
const LOOK: &str = "
    const back = arguments[0], stop = document.activeElement, last = window.lastStop;
    if (stop === document.body || !stop) return {name: '', wrong: []};
    const name = stop.tagName.toLowerCase() + (stop.id ? '#' + stop.id : '.' + stop.className) + ' ' +
      (stop.getAttribute('aria-label') || stop.innerText || '').trim().slice(0, 30);
    const wrong = [], style = getComputedStyle(stop), box = stop.getBoundingClientRect();
    if (!stop.checkVisibility({visibilityProperty: true}) || box.width < 2 || box.height < 2) wrong.push('is not shown');
    if (style.outlineStyle === 'none' || parseFloat(style.outlineWidth) < 1) wrong.push('has no ring');
    // What hardly fits into the window fills the most of it, and need not show its beginning.
    const large = box.height > 0.6 * innerHeight, seen = Math.min(box.bottom, innerHeight) - Math.max(box.top, 0);
    const y = large ? innerHeight / 2 : (box.top + box.bottom) / 2, x = Math.min((box.left + box.right) / 2, innerWidth - 1);
    if ((large ? seen < innerHeight / 2 : box.top < -1 || y > innerHeight) || box.left < -1) wrong.push('is out of sight: ' + [box.left, box.top, box.right, box.bottom].map(Math.round) + ' in ' + [innerWidth, innerHeight]);
    else {
      const there = document.elementFromPoint(x, y);
      if (there && !stop.contains(there) && !there.contains(stop)) wrong.push('is covered by ' + there.tagName + '#' + there.id + '.' + there.className);
    }
    // The buttons of a number go with the focus from field to field, so they have no place of their own in the order.
    if (stop.closest('.hand')) return {name: 'the buttons beside ' + (stop.closest('.hand').parentElement.querySelector('input') || {}).id, wrong};
    const way = back ? Node.DOCUMENT_POSITION_PRECEDING : Node.DOCUMENT_POSITION_FOLLOWING;
    if (last && last !== stop && last.isConnected && !last.closest('.hand') && !(last.compareDocumentPosition(stop) & way)) wrong.push('is out of order');
    if (last === stop) wrong.push('holds the focus');
    window.lastStop = stop;
    return {name, wrong};";

impl Browser {
    /// Strikes a key, wherever the focus is.
    #[track_caller]
    pub fn strike(&self, key: Struck) {
        let mut actions = KeyActions::new("keyboard".to_owned());
        if key == Struck::BackTab {
            actions = actions.then(KeyAction::Down { value: SHIFT });
        }
        actions = actions
            .then(KeyAction::Down { value: key.code() })
            .then(KeyAction::Up { value: key.code() });
        if key == Struck::BackTab {
            actions = actions.then(KeyAction::Up { value: SHIFT });
        }
        self.run("a key", self.client().perform_actions(actions));
    }

    /// Types, wherever the focus is.
    #[track_caller]
    pub fn type_here(&self, text: &str) {
        let actions = text
            .chars()
            .fold(KeyActions::new("keyboard".to_owned()), |actions, letter| {
                actions
                    .then(KeyAction::Down { value: letter })
                    .then(KeyAction::Up { value: letter })
            });
        self.run(text, self.client().perform_actions(actions));
    }

    /// Looks at the place of the focus; its name, which is empty where the page itself has it.
    ///
    /// # Panics
    /// Where a reader would not see it, or it is not where one would look for it.
    #[track_caller]
    pub fn look_at_focus(&self, back: bool) -> String {
        let found = self.script(LOOK, vec![json!(back)]);
        let name = found["name"].as_str().unwrap_or_default().to_owned();
        assert_eq!(found["wrong"], json!([]), "the focus at {name}");
        name
    }

    /// Walks with the Tab key until the focus is at an element, and looks at every stop on the way. The way may begin
    /// anywhere, so its first stop has none before it.
    ///
    /// # Panics
    /// Where it does not come there, or a stop on the way is not as it should be.
    #[track_caller]
    pub fn walk_to(&self, selector: &str, back: bool) -> Vec<String> {
        self.script("window.lastStop = document.activeElement;", vec![]);
        let mut stops = Vec::new();
        loop {
            self.strike(if back { Struck::BackTab } else { Struck::Tab });
            let name = self.look_at_focus(back);
            assert!(!name.is_empty(), "no {selector} on the way: {stops:?}");
            stops.push(name);
            if self.has_focus(selector) {
                return stops;
            }
        }
    }

    /// Whether the focus is at an element.
    pub fn has_focus(&self, selector: &str) -> bool {
        let script = "return document.activeElement.matches(arguments[0]);";
        self.script(script, vec![json!(selector)]) == Value::Bool(true)
    }
}
