//! Attrition equations, from a line of text to an outcome.
//!
//! `text → Pairs → Statement → Engagement → Trajectory → Outcome → words and pictures`, with no step back. Pure: no
//! browser, no clock, no files, no threads; the same link gives the same bits on every machine.

pub mod answer;
pub mod asked;
pub mod caution;
pub mod conditions;
pub mod continued;
pub mod converted;
pub mod course;
mod decimal;
pub mod demo;
pub mod double;
pub mod family;
pub mod fight;
pub mod goals;
pub mod golden;
pub mod in_doubt;
mod json;
pub mod keys;
pub mod laws;
pub mod ledger;
pub mod linear_system;
pub mod list_part;
pub mod mark;
pub mod motion;
mod nearest_double;
pub mod number;
pub mod orbit_point;
pub mod order;
pub mod outcome;
pub mod pairs;
pub mod passing;
pub mod picture;
pub mod piece;
pub mod problem;
pub mod put;
pub mod quadrature;
pub mod quantity;
pub mod reversal;
mod root;
mod run;
pub mod schedule;
pub mod share;
pub mod sides;
pub mod slots;
pub mod state;
pub mod statement;
pub mod stretch;
pub mod terms;
pub mod trajectory;
mod verdict;
pub mod words;
pub mod work;
