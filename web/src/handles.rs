//! Handles on the pictures: what of the engagement is dragged there by hand, with pointer or keys. What is dragged is the text.

use crate::dom::{Dom, append, set};
use crate::draw::Layout;
use crate::outcome::Good;
use aftercount_core::number;
use aftercount_core::pairs::Pairs;
use aftercount_core::picture::Axes;
use aftercount_core::picture::handles::{Grip, Handle, dragged, handles, nudged};
use aftercount_core::put::put;
use aftercount_core::slots::{Place, slots};
use web_sys::{Element, HtmlElement};

/// The axes of both pictures while something is dragged: those that they had at its beginning.
#[derive(Clone)]
pub(crate) struct HeldAxes {
    /// That of strength over time.
    pub(crate) strength: Axes,
    /// That of one side against the other.
    pub(crate) orbit: Axes,
}

/// A drag that goes on.
struct Drag {
    grip: Grip,
    field: Layout,
    held: HeldAxes,
}

/// The handles as they stand, and what is dragged.
pub(crate) struct Handles {
    dom: Dom,
    shown: Vec<Handle>,
    drag: Option<Drag>,
}

impl Handles {
    pub(crate) fn new(dom: &Dom) -> Handles {
        Handles {
            dom: dom.clone(),
            shown: Vec::new(),
            drag: None,
        }
    }

    /// The axes that pictures are held to while something is dragged.
    pub(crate) fn held(&self) -> Option<&HeldAxes> {
        self.drag.as_ref().map(|drag| &drag.held)
    }

    /// Puts every handle where it belongs; none in a frame, where nothing is dragged.
    pub(crate) fn show(&mut self, good: &Good, strength: Option<Layout>, orbit: Option<Layout>) {
        let framed =
            self.dom.is_framed() || self.dom.root.get_attribute("data-view").as_deref() == Some("frame");
        let wanted = if framed {
            Vec::new()
        } else {
            handles(&good.statement, &good.fight)
        };
        for on_orbit in [false, true] {
            let part: Vec<&Handle> = wanted
                .iter()
                .filter(|handle| handle.grip.is_on_orbit() == on_orbit)
                .collect();
            let (id, field) = if on_orbit {
                ("orbit-handles", orbit)
            } else {
                ("strength-handles", strength)
            };
            if let (Some(box_of), Some(field)) = (self.dom.element(id), field) {
                self.show_in(&box_of, &part, &field);
            }
        }
        self.shown = wanted;
    }

    /// Takes every handle off.
    pub(crate) fn clear(&mut self) {
        self.shown.clear();
        for id in ["strength-handles", "orbit-handles"] {
            self.dom.set_text(id, "");
        }
    }

    /// The handles of one picture: those that were there stay the same elements, since one may have the focus or be held.
    fn show_in(&self, box_of: &Element, wanted: &[&Handle], field: &Layout) {
        let names: Vec<String> = wanted.iter().map(|handle| handle.grip.name()).collect();
        let on_orbit = box_of.id() == "orbit-handles";
        let before = self
            .shown
            .iter()
            .filter(|handle| handle.grip.is_on_orbit() == on_orbit);
        let there: Vec<String> = before.map(|handle| handle.grip.name()).collect();
        if there != names {
            box_of.set_text_content(None);
            for name in &names {
                if let Some(element) = self.dom.make("div", "") {
                    set(&element, "class", "handle");
                    set(&element, "id", &format!("handle.{name}"));
                    set(&element, "data-grip", name);
                    set(&element, "role", "slider");
                    set(&element, "tabindex", "0");
                    append(box_of, &element);
                }
            }
        }
        for handle in wanted {
            if let Some(element) = self
                .dom
                .typed::<HtmlElement>(&format!("handle.{}", handle.grip.name()))
            {
                place_handle(&element, handle, field);
            }
        }
    }

    /// A pointer is down on a handle.
    pub(crate) fn take(
        &mut self,
        name: &str,
        good: &Good,
        strength: Option<Layout>,
        orbit: Option<Layout>,
    ) -> bool {
        let grip = self
            .shown
            .iter()
            .map(|handle| handle.grip)
            .find(|grip| grip.name() == name);
        let (Some(grip), Some(over_time), Some(against)) = (grip, &good.strength, &good.orbit) else {
            return false;
        };
        let Some(field) = (if grip.is_on_orbit() { orbit } else { strength }) else {
            return false;
        };
        let held = HeldAxes {
            strength: Axes::of(over_time),
            orbit: Axes::of(against),
        };
        self.drag = Some(Drag { grip, field, held });
        true
    }

    /// The id of the canvas that the pointer is measured against.
    pub(crate) fn dragged_on(&self) -> Option<&'static str> {
        let on_orbit = self.drag.as_ref()?.grip.is_on_orbit();
        Some(if on_orbit { "orbit" } else { "strength" })
    }

    /// The text with the handle at a pixel of its picture; `None` where nothing is dragged, or the text stays.
    pub(crate) fn dragged(&self, pairs: &Pairs, good: &Good, (x, y): (f64, f64)) -> Option<Pairs> {
        let drag = self.drag.as_ref()?;
        let axes = if drag.grip.is_on_orbit() {
            &drag.held.orbit
        } else {
            &drag.held.strength
        };
        let to = (drag.field.value_at(x), drag.field.value_up_at(y));
        written(
            pairs,
            good,
            dragged(&good.statement, &good.fight, drag.grip, to, axes),
        )
    }

    /// Lets go; whether anything was held.
    pub(crate) fn let_go(&mut self) -> bool {
        self.drag.take().is_some()
    }

    /// The text after a key on a handle; `None` where it is none of its keys, or the text stays.
    pub(crate) fn key(&self, pairs: &Pairs, good: &Good, name: &str, key: &str) -> Option<Pairs> {
        let steps = match key {
            "ArrowRight" => (1.0, 0.0),
            "ArrowLeft" => (-1.0, 0.0),
            "ArrowUp" => (0.0, 1.0),
            "ArrowDown" => (0.0, -1.0),
            "PageUp" => (0.0, 10.0),
            "PageDown" => (0.0, -10.0),
            _ => return None,
        };
        let grip = self
            .shown
            .iter()
            .map(|handle| handle.grip)
            .find(|grip| grip.name() == name)?;
        let picture = if grip.is_on_orbit() {
            &good.orbit
        } else {
            &good.strength
        };
        let axes = Axes::of(picture.as_ref()?);
        written(
            pairs,
            good,
            nudged(&good.statement, &good.fight, grip, steps, &axes),
        )
    }
}

/// The text with these numbers in their places; `None` where it stays the same.
fn written(pairs: &Pairs, good: &Good, numbers: Vec<(Place, String)>) -> Option<Pairs> {
    let all = slots(pairs, &good.statement);
    let mut changed = pairs.clone();
    for (place, text) in numbers {
        let slot = all.iter().find(|slot| slot.place == place)?;
        // The same number stays as it was typed.
        if number::plain(&text) != slot.value() {
            put(&mut changed, slot, &text);
        }
    }
    (changed != *pairs).then_some(changed)
}

fn place_handle(element: &HtmlElement, handle: &Handle, field: &Layout) {
    let (x, y) = field.place(handle.at);
    let within = |value: f64, low: f64, high: f64| value.clamp(low, high);
    let (x, y) = (
        within(x, field.left, field.right),
        within(y, field.top, field.foot),
    );
    for (name, value) in [("left", x), ("top", y)] {
        // A handle that stays where it was is no reason to stop: its number is in the field.
        let _ = element.style().set_property(name, &format!("{value}px"));
    }
    let level = match handle.grip {
        Grip::Start => handle.at.0,
        _ => handle.at.1,
    };
    set(element, "aria-label", &handle.label);
    set(element, "aria-valuetext", &handle.value);
    set(element, "aria-valuenow", &level.to_string());
    set(element, "aria-valuemin", "0");
    let most = if handle.grip.is_on_orbit() {
        field.across.1
    } else {
        field.up.1
    };
    set(element, "aria-valuemax", &most.max(level).to_string());
}
