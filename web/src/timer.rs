//! A timer that can be started anew: the last start counts.

use crate::page::Page;
use std::cell::RefCell;
use std::rc::Weak;
use wasm_bindgen::JsCast;
use wasm_bindgen::closure::Closure;
use web_sys::Window;

/// Calls one thing of the page after a delay.
pub(crate) struct Timer {
    window: Window,
    call: Closure<dyn FnMut()>,
    running: Option<i32>,
}

impl Timer {
    /// A timer at rest. A page that is borrowed when the time comes is one that has trapped: it is left alone.
    pub(crate) fn new(window: &Window, page: &Weak<RefCell<Page>>, action: fn(&mut Page)) -> Timer {
        Timer {
            window: window.clone(),
            call: later(page, action),
            running: None,
        }
    }

    /// Starts the timer, from now, in milliseconds.
    pub(crate) fn start(&mut self, milliseconds: i32) {
        self.stop();
        let call = self.call.as_ref().unchecked_ref();
        // Without timers there is nothing to wait with; what waits is then done at the next event.
        self.running = self
            .window
            .set_timeout_with_callback_and_timeout_and_arguments_0(call, milliseconds)
            .ok();
    }

    /// Whether it was started and not stopped. A timer does not see its time come: its action must call [`Timer::stop`].
    pub(crate) fn is_running(&self) -> bool {
        self.running.is_some()
    }

    /// Stops it where it runs.
    pub(crate) fn stop(&mut self) {
        if let Some(running) = self.running.take() {
            self.window.clear_timeout_with_handle(running);
        }
    }
}

/// Calls one thing of the page before the next paint, however often it is asked for; a little later where nothing is
/// painted, since a frame of a wiki that is out of sight may be printed, and is scrolled to.
pub(crate) struct NextFrame {
    window: Window,
    call: Closure<dyn FnMut()>,
    asked: Option<i32>,
    late: Timer,
}

/// How long a frame may be in coming, in milliseconds.
const LATE: i32 = 100;

impl NextFrame {
    /// Nothing is asked for yet. The action must call [`NextFrame::came`].
    pub(crate) fn new(window: &Window, page: &Weak<RefCell<Page>>, action: fn(&mut Page)) -> NextFrame {
        NextFrame {
            window: window.clone(),
            call: later(page, action),
            asked: None,
            late: Timer::new(window, page, action),
        }
    }

    /// Asks for the next frame.
    pub(crate) fn ask(&mut self) {
        if self.asked.is_none() {
            let call = self.call.as_ref().unchecked_ref();
            self.asked = self.window.request_animation_frame(call).ok();
            self.late.start(LATE);
        }
    }

    /// The frame has come, or its time is over.
    pub(crate) fn came(&mut self) {
        self.late.stop();
        if let Some(asked) = self.asked.take() {
            let _ = self.window.cancel_animation_frame(asked);
        }
    }
}

fn later(page: &Weak<RefCell<Page>>, action: fn(&mut Page)) -> Closure<dyn FnMut()> {
    let page = page.clone();
    Closure::new(move || {
        if let Some(page) = page.upgrade()
            && let Ok(mut page) = page.try_borrow_mut()
            && !page.is_over()
        {
            action(&mut page);
        }
    })
}
