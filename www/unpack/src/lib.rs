//! Unpacks the page's program where the page starts.
//!
//! The program travels packed by LZMA, which makes it a sixth smaller than gzip does. Browsers do not unpack that
//! themselves, so this does: it comes first, and is small because it knows one shape of stream only and never panics.

mod lzma;

pub use lzma::unpacked;

use wasm_bindgen::prelude::wasm_bindgen;

/// Memory is asked for a few times in all and never given back: the usual allocator would be half of this program.
#[cfg(target_arch = "wasm32")]
#[global_allocator]
static MEMORY: lol_alloc::LeakingPageAllocator = lol_alloc::LeakingPageAllocator;

/// The bytes that were packed: see [`unpacked`].
#[wasm_bindgen]
pub fn unpack(packed: &[u8]) -> Vec<u8> {
    unpacked(packed)
}
