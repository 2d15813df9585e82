//! The life of Aftercount's page: it listens, calls the core, and shows what comes back.
//!
//! A thin shell: the state is a text, every word and number comes from the core, and the pictures are drawn by code
//! that knows no browser.

mod address;
mod asking;
mod canvas;
mod copy;
mod dom;
pub mod draw;
mod form;
mod hand;
mod handles;
pub mod interface;
mod kept_rates;
mod law_fields;
mod list_text;
mod listen;
mod lists;
mod live;
mod mapping;
mod outcome;
mod pace;
mod page;
mod paper;
mod passing;
mod phases;
mod plates;
mod points;
mod problems;
mod reading;
mod reversal;
mod rolling;
mod share;
mod stopwatch;
mod timeline;
mod timer;
mod unit_change;
mod working;

use wasm_bindgen::JsValue;
use wasm_bindgen::prelude::wasm_bindgen;
use web_sys::AbortSignal;

/// Brings the page to life: takes its text from `kept`, else from the address, else shows the demo.
///
/// Every listener ends with `signal`. The text stands in `window.aftercountText` from then on, so that the boot script
/// can start another instance with it.
///
/// # Errors
/// Where there is no document, or it takes no listeners.
#[wasm_bindgen]
pub fn start(signal: &AbortSignal, kept: Option<String>) -> Result<(), JsValue> {
    console_error_panic_hook::set_once();
    let dom = dom::Dom::find()?;
    let page = page::Page::begin(&dom, signal, kept);
    listen::all(&dom, &page, signal)
}
