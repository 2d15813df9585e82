//! What the pairs say, or the list of what is wrong with them.

mod goals;
mod lists;
mod name;
mod phases;
mod reader;
mod time_unit;
mod whole;
mod wrong;

pub use time_unit::TimeUnit;

use crate::goals::Goal;
use crate::pairs::Pairs;
use crate::problem::Problem;
use crate::quantity::Quantity;
use crate::sides::Both;
use crate::terms::{Engagement, Terms};
use reader::Reader;
use std::borrow::Cow;
use std::collections::BTreeMap;
use wrong::whole_problem;

/// Numbers for slots, in place of those of the statement.
pub type Values = BTreeMap<String, f64>;

/// What the sides are called; most links leave it at the names that everybody's have.
pub type Names = Both<Cow<'static, str>>;

/// What a link says, in order.
#[derive(Clone, Debug, PartialEq)]
pub struct Statement {
    /// A name for the engagement; empty where none is given, as the other free texts.
    pub title: String,
    /// Assumptions and sources.
    pub note: String,
    /// A handling marking.
    pub marking: String,
    /// The unit of time.
    pub unit: TimeUnit,
    /// What strength counts, in the plural.
    pub counted: Cow<'static, str>,
    /// What the sides are called.
    pub names: Names,
    /// Its quantities.
    pub terms: Terms<Quantity>,
    /// What its questions are asked for; empty where they are asked for the whole story.
    pub so_that: Vec<Goal>,
    /// Whether any number is in question.
    in_question: bool,
}

impl Statement {
    /// Reads what `pairs` say.
    ///
    /// # Errors
    /// Every problem at once, in the order of the link, then the missing keys; never an empty list.
    pub fn read(pairs: &Pairs) -> Result<Statement, Vec<Problem>> {
        if let Some(problem) = whole_problem(pairs) {
            return Err(vec![problem]);
        }
        let mut reader = Reader::new(pairs);
        reader.check_keys();
        let statement = reader.statement();
        let problems = reader.into_problems();
        match statement {
            Some(statement) if problems.is_empty() => Ok(statement),
            _ => Err(problems),
        }
    }

    /// The engagement in plain numbers.
    ///
    /// An interval counts as its likeliest or middle value until intervals are worked out, and a number that is asked for
    /// and has no value now as 0: what is worked out of it then is for its question alone, see [`Statement::has_base`].
    pub fn engagement(&self) -> Engagement {
        self.terms.map_unnamed(Quantity::now_or_zero)
    }

    /// The same, with those of `values` in their slots.
    pub fn engagement_with(&self, values: &Values) -> Engagement {
        self.terms.map(|slot, quantity| {
            let value = values.get(slot).copied();
            value.unwrap_or_else(|| quantity.now_or_zero())
        })
    }

    /// Whether every number has a value now, so that there is an outcome beside the answers to its questions.
    pub fn has_base(&self) -> bool {
        let mut whole = true;
        self.terms
            .map_unnamed(|quantity| whole &= quantity.now().is_some());
        whole
    }

    /// Whether any number is in question.
    pub fn asks(&self) -> bool {
        self.in_question
    }
}
