//! What a reader's hands do.

use fantoccini::Locator;
use fantoccini::elements::Element;
use serde_json::{Value, json};

use super::{Browser, Engine};

/// Keys that type no letter, as WebDriver writes them.
#[derive(Clone, Copy, Debug)]
pub enum Key {
    /// One character back.
    Backspace,
    /// To the next control.
    Tab,
    /// Done.
    Enter,
    /// To the far end.
    End,
    /// To the near end.
    Home,
    /// A line up.
    Up,
    /// A line down.
    Down,
    /// A step back.
    Left,
    /// A step on.
    Right,
    /// A large step back.
    PageUp,
    /// A large step on.
    PageDown,
    /// Out of it.
    Escape,
}

impl Key {
    fn code(self) -> char {
        match self {
            Self::Backspace => '\u{e003}',
            Self::Tab => '\u{e004}',
            Self::Enter => '\u{e007}',
            Self::Escape => '\u{e00c}',
            Self::PageUp => '\u{e00e}',
            Self::PageDown => '\u{e00f}',
            Self::End => '\u{e010}',
            Self::Home => '\u{e011}',
            Self::Left => '\u{e012}',
            Self::Up => '\u{e013}',
            Self::Down => '\u{e015}',
            Self::Right => '\u{e014}',
        }
    }
}

impl Browser {
    /// Writes into a field in place of what stands there, key by key. An empty text clears it.
    #[track_caller]
    pub fn write(&self, name: &str, text: &str) {
        self.write_at(&format!("[name='{name}']"), text);
    }

    /// The same, for a field without a name.
    #[track_caller]
    pub fn write_at(&self, selector: &str, text: &str) {
        let keys = if text.is_empty() {
            Key::Backspace.code().to_string()
        } else {
            text.to_owned()
        };
        // Control and A choose all that stands there; Firefox's driver forgets the text behind them.
        let chosen = match self.engine {
            Engine::Chromium => "\u{e009}a\u{e000}",
            Engine::Firefox => {
                let script =
                    "const field = document.querySelector(arguments[0]); field.focus(); field.select();";
                self.script(script, vec![json!(selector)]);
                ""
            }
        };
        self.run(
            selector,
            self.element(selector).send_keys(&format!("{chosen}{keys}")),
        );
    }

    /// Writes on after what stands in a field.
    #[track_caller]
    pub fn write_on(&self, name: &str, text: &str) {
        self.run(
            name,
            self.field(name).send_keys(&format!("{}{text}", Key::End.code())),
        );
    }

    /// Chooses a value of a list with the arrow keys. The driver's own way sends no `input` event, as a hand would.
    #[track_caller]
    pub fn choose(&self, name: &str, value: &str) {
        let script = "const list = document.getElementsByName(arguments[0])[0];
                      return [...list.options].findIndex((o) => o.value === arguments[1]) - list.selectedIndex;";
        let steps = self
            .script(script, vec![json!(name), json!(value)])
            .as_i64()
            .expect("a list has places");
        let key = if steps < 0 { Key::Up } else { Key::Down };
        self.run(
            name,
            self.field(name)
                .send_keys(&key.code().to_string().repeat(steps.unsigned_abs() as usize)),
        );
        assert_eq!(self.value(name), value, "the list {name} has no {value}");
    }

    /// Presses a key where the focus is, or at an element.
    #[track_caller]
    pub fn press(&self, selector: &str, key: Key) {
        self.run(
            selector,
            self.element(selector).send_keys(&key.code().to_string()),
        );
    }

    /// Goes on from where the focus is to the next control.
    #[track_caller]
    pub fn leave(&self) {
        let active = self.run("the focus", self.client().active_element());
        self.run("the focus", active.send_keys(&Key::Tab.code().to_string()));
    }

    /// Types at an element, in place of what is chosen there.
    #[track_caller]
    pub fn type_at(&self, selector: &str, text: &str) {
        self.run(selector, self.element(selector).send_keys(text));
    }

    /// Chooses a value of a list that is built anew by the choice, as a hand does with a list that is open.
    #[track_caller]
    pub fn choose_value(&self, name: &str, value: &str) {
        let script = "const list = document.getElementsByName(arguments[0])[0];
                      list.focus(); list.value = arguments[1];
                      list.dispatchEvent(new Event('input', {bubbles: true}));";
        self.script(script, vec![json!(name), json!(value)]);
    }

    /// Clicks, having rolled the page to where it is, as a hand does: the window's lower edge holds the sentence.
    #[track_caller]
    pub fn click(&self, selector: &str) {
        let script =
            "const e = document.querySelector(arguments[0]); if (e) e.scrollIntoView({block: 'center'});";
        self.script(script, vec![json!(selector)]);
        self.run(selector, self.element(selector).click());
    }

    /// Moves the mouse to a place in an element, in parts of its width and height, without pressing.
    #[track_caller]
    pub fn hover(&self, selector: &str, across: f64, down: f64) {
        let (x, y) = self.place(selector, across, down);
        match self.engine {
            Engine::Chromium => {
                let moved = json!({"type": "mouseMoved", "x": x, "y": y});
                self.devtools("Input.dispatchMouseEvent", moved);
            }
            Engine::Firefox => self.point("mouse", json!([move_to((x, y))])),
        }
    }

    /// Touches an element at a place, in parts of its width and height, and moves the finger to another.
    #[track_caller]
    pub fn swipe(&self, selector: &str, from: (f64, f64), to: (f64, f64)) {
        let [from, to] = [from, to].map(|(across, down)| self.place(selector, across, down));
        match self.engine {
            Engine::Chromium => {
                self.devtools("Emulation.setTouchEmulationEnabled", json!({"enabled": true}));
                let touch = |kind: &str, points: Value| {
                    let event = json!({"type": kind, "touchPoints": points});
                    self.devtools("Input.dispatchTouchEvent", event);
                };
                touch("touchStart", json!([{"x": from.0, "y": from.1}]));
                touch("touchMove", json!([{"x": to.0, "y": to.1}]));
                touch("touchEnd", json!([]));
            }
            Engine::Firefox => {
                let actions = json!([
                    move_to(from),
                    pointer("pointerDown"),
                    move_to(to),
                    pointer("pointerUp")
                ]);
                self.point("touch", actions);
            }
        }
    }

    /// What a mouse or a finger does, one after another, in Firefox.
    fn point(&self, kind: &str, actions: Value) {
        let window = self.run("the window", self.client().window());
        let pointer =
            json!({"type": "pointer", "id": kind, "parameters": {"pointerType": kind}, "actions": actions});
        let all = json!({"context": String::from(window), "actions": [pointer]});
        self.call("input.performActions", all);
    }

    /// Takes hold of an element in its middle with the mouse, and moves it by these amounts, in CSS pixels from where it was.
    #[track_caller]
    pub fn drag(&self, selector: &str, by: &[(f64, f64)]) {
        let (x, y) = self.place(selector, 0.5, 0.5);
        let mut way = by.iter().map(|(dx, dy)| (x + dx, y + dy));
        match self.engine {
            Engine::Chromium => {
                let mouse = |kind: &str, (x, y): (f64, f64), buttons: u32| {
                    let event = json!({"type": kind, "x": x, "y": y, "button": "left", "buttons": buttons,
                                       "clickCount": 1});
                    self.devtools("Input.dispatchMouseEvent", event);
                };
                mouse("mousePressed", (x, y), 1);
                for place in way.clone() {
                    mouse("mouseMoved", place, 1);
                }
                mouse("mouseReleased", way.next_back().unwrap_or((x, y)), 0);
            }
            Engine::Firefox => {
                let mut actions = vec![move_to((x, y)), pointer("pointerDown")];
                actions.extend(way.map(move_to));
                actions.push(pointer("pointerUp"));
                self.point("mouse", Value::Array(actions));
            }
        }
    }

    fn place(&self, selector: &str, across: f64, down: f64) -> (f64, f64) {
        let script = "const e = document.querySelector(arguments[0]); e.scrollIntoView({block: 'center'});
                      const r = e.getBoundingClientRect(); return [r.left, r.top, r.width, r.height];";
        let found = self.script(script, vec![json!(selector)]);
        let number = |index: usize| found[index].as_f64().expect("a rectangle has four numbers");
        (number(0) + across * number(2), number(1) + down * number(3))
    }

    #[track_caller]
    fn field(&self, name: &str) -> Element {
        self.element(&format!("[name='{name}']"))
    }

    #[track_caller]
    pub(super) fn element(&self, selector: &str) -> Element {
        self.run(selector, self.client().find(Locator::Css(selector)))
    }
}

/// A pointer's way to a place of the window, which is a whole number of pixels.
fn move_to((x, y): (f64, f64)) -> Value {
    json!({"type": "pointerMove", "x": x.round() as i64, "y": y.round() as i64})
}

/// A press or a release where the pointer is.
fn pointer(kind: &str) -> Value {
    json!({"type": kind, "button": 0})
}
