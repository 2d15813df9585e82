//! Passing an engagement on: what is copied, saved and exported, and how it is taken up again from whatever shape it
//! comes in.

pub mod changes;
pub mod finding;
pub mod json;
pub mod kept;
mod mailed;
pub mod received;
pub mod remarks;
pub mod saved;
pub mod table;
mod taken_in;
pub mod times;
pub mod words;
