//! One delegated listener an event kind, all of which end with the page's signal.

use crate::dom::{Dom, control_value};
use crate::hand::Writes;
use crate::lists::{Act, Cell};
use crate::page::Page;
use crate::passing;
use crate::phases::Ask;
use crate::reading::Pointer;
use crate::rolling;
use aftercount_core::sides::Side;
use std::cell::RefCell;
use std::rc::Rc;
use wasm_bindgen::closure::Closure;
use wasm_bindgen::{JsCast, JsValue};
use web_sys::{
    AbortSignal, AddEventListenerOptions, Element, Event, EventTarget, FocusEvent, KeyboardEvent, MouseEvent,
    PointerEvent, ResizeObserver,
};

/// The page as its listeners and what they start hold it.
pub(crate) type Shared = Rc<RefCell<Page>>;

/// What is left to do once the page is no longer borrowed: these calls send events of their own.
pub(crate) enum After {
    /// Nothing.
    Nothing,
    /// Moves the focus.
    GoTo(String),
    /// Opens the browser's way to the printer, which tells the page when it looks.
    Print,
    /// Selects a text and offers it to the clipboard.
    Copy(crate::copy::Source),
    /// Something that needs the page itself.
    Do(Box<dyn FnOnce(&Shared)>),
}

/// Sets up every listener.
pub(crate) fn all(dom: &Dom, page: &Shared, signal: &AbortSignal) -> Result<(), JsValue> {
    let document: &EventTarget = dom.document.as_ref();
    let window: &EventTarget = dom.window.as_ref();
    let on = |target: &EventTarget, kind: &str, act: fn(&mut Page, &Event) -> After| {
        listen(target, kind, signal, page, act)
    };
    on(document, "input", input)?;
    on(document, "change", left)?;
    on(document, "focusout", focus_out)?;
    on(document, "mousedown", hold_focus)?;
    on(document, "focusin", focused)?;
    on(document, "click", click)?;
    on(document, "keydown", key)?;
    on(document, "keyup", came)?;
    on(document, "submit", submit)?;
    on(document, "dragover", passing::dragged)?;
    on(document, "drop", passing::dropped)?;
    on(window, "storage", stored)?;
    on(document, "pointerdown", pointer)?;
    on(document, "pointermove", pointer)?;
    on(document, "pointerup", let_go)?;
    on(document, "pointercancel", let_go)?;
    on(document, "toggle", unfolded)?;
    on(document, "visibilitychange", hide)?;
    on(window, "pagehide", hide)?;
    on(window, "beforeunload", going)?;
    on(window, "popstate", moved)?;
    on(window, "hashchange", moved)?;
    on(window, "resize", resized)?;
    on(window, "beforeprint", print)?;
    on(window, "afterprint", printed)?;
    let queries = [
        "(prefers-color-scheme: dark)",
        "(forced-colors: active)",
        "(min-resolution: 1.5dppx)",
        "(min-resolution: 2.5dppx)",
    ];
    for query in queries {
        if let Ok(Some(media)) = dom.window.match_media(query) {
            on(media.as_ref(), "change", resized)?;
        }
    }
    watch_sizes(dom, page, signal)
}

fn listen(
    target: &EventTarget,
    kind: &str,
    signal: &AbortSignal,
    page: &Shared,
    act: fn(&mut Page, &Event) -> After,
) -> Result<(), JsValue> {
    let page = page.clone();
    let call = Closure::<dyn FnMut(Event)>::new(move |event: Event| {
        // An event inside another one is an echo of what the page itself does.
        let Ok(mut borrowed) = page.try_borrow_mut() else {
            return;
        };
        let after = act(&mut borrowed, &event);
        drop(borrowed);
        do_after(&page, after);
    });
    let options = AddEventListenerOptions::new();
    options.set_signal(signal);
    // That a panel opened is told to the panel alone, so it is heard on the way there.
    options.set_capture(kind == "toggle");
    let call = call.into_js_value();
    target.add_event_listener_with_callback_and_add_event_listener_options(
        kind,
        call.unchecked_ref(),
        &options,
    )
}

/// Does what is left to do once nobody has borrowed the page.
pub(crate) fn do_after(page: &Shared, after: After) {
    let Ok(borrowed) = page.try_borrow() else { return };
    let dom = borrowed.dom().clone();
    drop(borrowed);
    match after {
        After::Nothing => {}
        After::GoTo(id) => dom.go_to(&id),
        // A frame may not be allowed to: then nothing happens.
        After::Print => drop(dom.window.print()),
        After::Copy(source) => crate::copy::copy(&dom, &source),
        After::Do(act) => act(page),
    }
}

fn element(event: &Event) -> Option<Element> {
    event.target()?.dyn_into().ok()
}

fn input(page: &mut Page, event: &Event) -> After {
    let Some(target) = element(event) else {
        return After::Nothing;
    };
    if let (Some(cell), true, Some(text)) = (
        Cell::of(&target),
        target.has_attribute("data-part"),
        control_value(&target),
    ) {
        page.cell_typed(&cell, &text);
    } else if let (Some(old), Some(change)) = (target.get_attribute("data-change"), control_value(&target)) {
        return page.exchange_change(&old, &change);
    } else if let (Some(side), Some(text)) = (side_of(&target, "data-share"), control_value(&target)) {
        page.share_typed(side, &text);
    } else if let Some((key, text)) = crate::form::changed_field(&target) {
        page.typed(&key, &text);
    } else {
        passing::asked_anew(page, &target);
    }
    After::Nothing
}

fn left(page: &mut Page, event: &Event) -> After {
    if event.type_() == "change" && element(event).is_some_and(|element| element.id() == "map-second") {
        page.choose_second();
        return After::Nothing;
    }
    if event.type_() == "change"
        && let Some(element) = element(event).filter(|element| element.has_attribute("data-choice"))
    {
        return passing::chosen(&element);
    }
    let Some(element) = element(event) else {
        return After::Nothing;
    };
    if is_field(&element) {
        page.field_left();
    } else if grip_of(&element).is_some() {
        return page.handle_left();
    }
    After::Nothing
}

/// Whether an element holds a part of the text: a field, a cell of a table, or an entry that writes one.
fn is_field(element: &Element) -> bool {
    ["name", "data-part", "data-share"]
        .iter()
        .any(|name| element.has_attribute(name))
}

/// The side whose letter stands in an attribute.
fn side_of(element: &Element, name: &str) -> Option<Side> {
    let letter = element.get_attribute(name)?;
    Side::BOTH.into_iter().find(|side| side.letter() == letter)
}

fn focus_out(page: &mut Page, event: &Event) -> After {
    let next = event.dyn_ref::<FocusEvent>().and_then(FocusEvent::related_target);
    page.focus_left(next.and_then(|next| next.dyn_into::<Element>().ok()).as_ref());
    left(page, event)
}

/// A press on the buttons of a number leaves the focus in its field, or they would be gone before the press is over.
fn hold_focus(_page: &mut Page, event: &Event) -> After {
    if let Some(element) = element(event)
        && let Ok(Some(_)) = element.closest(".hand")
    {
        event.prevent_default();
    }
    After::Nothing
}

/// A box with a text to copy offers itself whole; a number has its buttons beside it.
fn focused(page: &mut Page, event: &Event) -> After {
    let element = element(event);
    if let Some(element) = &element {
        page.focused(element);
    }
    if let Some(element) = element
        && let Some(area) = element.dyn_ref::<web_sys::HtmlTextAreaElement>()
        && area.read_only()
    {
        area.select();
    }
    After::Nothing
}

/// The way by the keyboard has come to another stop.
fn came(page: &mut Page, event: &Event) -> After {
    if event
        .dyn_ref::<KeyboardEvent>()
        .is_some_and(|event| event.key() == "Tab")
    {
        rolling::bring_into_sight(page.dom());
    }
    After::Nothing
}

fn click(page: &mut Page, event: &Event) -> After {
    let Some(element) = element(event) else {
        return After::Nothing;
    };
    if let Ok(Some(link)) = element.closest("a[href^='#']:not([target])") {
        // Followed by the browser, the fragment would replace the engagement in the address.
        event.prevent_default();
        let href = link.get_attribute("href").unwrap_or_default();
        return After::GoTo(href.trim_start_matches('#').to_owned());
    }
    if element.id() == "map-at" {
        return page.put_place();
    }
    let Ok(Some(button)) = element.closest("button") else {
        return After::Nothing;
    };
    if let Some(key) = button.get_attribute("data-take-out") {
        page.take_out(&key);
        return After::Nothing;
    }
    if let Some(key) = button.get_attribute("data-keep-first") {
        page.keep_first(&key);
        return After::GoTo(key);
    }
    if let Some(place) = button
        .get_attribute("data-put")
        .and_then(|place| place.parse().ok())
    {
        return page.put_answer(place);
    }
    if let Some(row) = button
        .get_attribute("data-reverse")
        .and_then(|row| row.parse().ok())
    {
        return page.put_reversal(row);
    }
    if let (Some(cell), Some(act)) = (Cell::of(&button), act_of(&button)) {
        return page.act_on_list(&cell, act, None);
    }
    if let Some(ask) = Ask::of(&button) {
        return page.ask_of_phases(&ask);
    }
    if let (false, Some(after)) = (is_off(&button), passing::click(page, &button)) {
        return after;
    }
    // Such a button keeps the focus when its own press leaves it nothing more to do.
    if is_off(&button) {
        return After::Nothing;
    }
    if let Some(writes) = Writes::of(&button) {
        return page.hand_pressed(writes);
    }
    if let Some(side) = side_of(&button, "data-share-of") {
        return page.toggle_share(side);
    }
    match button.id().as_str() {
        "unit.convert" => page.convert_unit(),
        "unit.keep" => page.keep_numbers(),
        "continue" => page.continue_from_here(),
        "sothat.add" => page.add_condition(),
        "blank" => {
            page.start_from_blank();
            After::GoTo("x.name".into())
        }
        "undo" => page.step(false),
        "redo" => page.step(true),
        "copy" => {
            page.field_left();
            After::Copy(crate::copy::TEXT)
        }
        "print" => {
            page.field_left();
            After::Print
        }
        "copy-working" => After::Copy(crate::copy::WORKING),
        _ => After::Nothing,
    }
}

fn key(page: &mut Page, event: &Event) -> After {
    let (Some(element), Some(event)) = (element(event), event.dyn_ref::<KeyboardEvent>()) else {
        return After::Nothing;
    };
    if let Some(next) = page.hand_key(&element, &event.key()) {
        event.prevent_default();
        return After::GoTo(next);
    }
    if let Some(name) = grip_of(&element) {
        if !event.ctrl_key() && !event.alt_key() && !event.meta_key() && page.handle_key(&name, &event.key())
        {
            event.prevent_default();
        }
    } else if element.id() == "reading" {
        if !event.ctrl_key() && !event.alt_key() && !event.meta_key() && page.reading_key(&event.key()) {
            event.prevent_default();
        }
    } else if element.id() == "map-at" {
        let plain = !event.ctrl_key() && !event.alt_key() && !event.meta_key();
        if plain && page.map_key(&event.key(), event.shift_key()) {
            event.prevent_default();
        } else if plain && event.key() == "Enter" {
            event.prevent_default();
            return page.put_place();
        }
    } else if let (true, Some(cell), Some(act)) = (event.alt_key(), Cell::of(&element), arrow(&event.key())) {
        event.prevent_default();
        return page.act_on_list(&cell, act, Some(act));
    } else if event.key() == "Enter" && !event.is_composing() && is_field(&element) {
        // A field of one line ends here; a line break in the note would be a problem of the text.
        if !element.tag_name().eq_ignore_ascii_case("select") {
            event.prevent_default();
        }
        page.field_left();
    }
    After::Nothing
}

fn act_of(button: &Element) -> Option<Act> {
    Act::of_word(&button.get_attribute("data-act")?)
}

/// With Alt, the arrows up and down move the row that is being filled.
fn arrow(key: &str) -> Option<Act> {
    match key {
        "ArrowUp" => Some(Act::Up),
        "ArrowDown" => Some(Act::Down),
        _ => None,
    }
}

fn is_off(button: &Element) -> bool {
    button.get_attribute("aria-disabled").as_deref() == Some("true")
}

/// Another page of this browser has kept or forgotten something.
fn stored(page: &mut Page, _event: &Event) -> After {
    page.passing().show_kept();
    After::Nothing
}

fn submit(_page: &mut Page, event: &Event) -> After {
    event.prevent_default();
    After::Nothing
}

fn pointer(page: &mut Page, event: &Event) -> After {
    let Some(element) = element(event) else {
        return After::Nothing;
    };
    if let Some(pointer) = event.dyn_ref::<PointerEvent>() {
        if let (true, Some(name)) = (event.type_() == "pointerdown", grip_of(&element)) {
            return take(page, &element, &name, pointer);
        }
        if let Some(id) = page.dragged_on() {
            drag(page, id, pointer);
            return After::Nothing;
        }
    }
    let (Ok(Some(print)), Some(pointer)) = (element.closest(".print"), event.dyn_ref::<PointerEvent>())
    else {
        return After::Nothing;
    };
    let place = print.get_bounding_client_rect();
    let mouse: &MouseEvent = pointer.as_ref();
    let holds = |canvas: &str| print.query_selector(canvas).is_ok_and(|canvas| canvas.is_some());
    let x = f64::from(mouse.client_x()) - place.left();
    let y = f64::from(mouse.client_y()) - place.top();
    if holds("#map") {
        page.pointed_on_map((x, y));
    } else if holds("#strength") || holds("#orbit") {
        page.pointed(&Pointer {
            on_strength: holds("#strength"),
            x,
            y,
        });
    }
    After::Nothing
}

/// The name of a handle on a picture.
fn grip_of(element: &Element) -> Option<String> {
    element.get_attribute("data-grip")
}

/// Takes hold of a handle: its pointer is the handle's wherever it goes.
fn take(page: &mut Page, element: &Element, name: &str, pointer: &PointerEvent) -> After {
    let mouse: &MouseEvent = pointer.as_ref();
    if mouse.button() != 0 || !page.take_handle(name) {
        return After::Nothing;
    }
    // Without capture the drag ends where the pointer leaves the page, which is no harm.
    let _ = element.set_pointer_capture(pointer.pointer_id());
    let event: &Event = pointer.as_ref();
    event.prevent_default();
    After::GoTo(element.id())
}

fn drag(page: &mut Page, id: &str, pointer: &PointerEvent) {
    if let Some(canvas) = page.dom().element(id) {
        let place = canvas.get_bounding_client_rect();
        let mouse: &MouseEvent = pointer.as_ref();
        page.drag_to((
            f64::from(mouse.client_x()) - place.left(),
            f64::from(mouse.client_y()) - place.top(),
        ));
    }
}

fn let_go(page: &mut Page, _event: &Event) -> After {
    page.let_handle_go();
    After::Nothing
}

fn unfolded(page: &mut Page, _event: &Event) -> After {
    page.mark_what_rolls();
    After::Nothing
}

fn hide(page: &mut Page, _event: &Event) -> After {
    page.write_address();
    After::Nothing
}

/// Where the address could not be written, the browser asks before it lets the text go.
fn going(page: &mut Page, event: &Event) -> After {
    if page.would_lose() {
        event.prevent_default();
    }
    After::Nothing
}

fn moved(page: &mut Page, _event: &Event) -> After {
    page.address_moved();
    After::Nothing
}

fn print(page: &mut Page, _event: &Event) -> After {
    page.put_on_paper();
    After::Nothing
}

fn printed(page: &mut Page, _event: &Event) -> After {
    page.printed();
    After::Nothing
}

fn resized(page: &mut Page, _event: &Event) -> After {
    page.draw_soon();
    After::Nothing
}

/// Draws anew where a picture's own size changes, as when a panel beside it opens.
fn watch_sizes(dom: &Dom, page: &Shared, signal: &AbortSignal) -> Result<(), JsValue> {
    let watching = page.clone();
    let call = Closure::<dyn FnMut()>::new(move || {
        if let Ok(mut page) = watching.try_borrow_mut()
            && !page.is_over()
        {
            page.draw_soon();
        }
    });
    let observer = ResizeObserver::new(call.into_js_value().unchecked_ref())?;
    for id in ["strength", "orbit", "asked-picture", "map"] {
        if let Some(canvas) = dom.element(id) {
            observer.observe(&canvas);
        }
    }
    let end = Closure::<dyn FnMut()>::new(move || observer.disconnect());
    signal.add_event_listener_with_callback("abort", end.into_js_value().unchecked_ref())
}
