//! What a question is asked for.

use super::name::Name;
use super::reader::Reader;
use crate::goals::Goal;
use crate::keys::rows;

/// Conditions that are read at most.
const MOST_GOALS: usize = 10;

impl Reader<'_> {
    /// The conditions of `sothat`; those in trouble left out.
    pub(super) fn goals(&mut self) -> Vec<Goal> {
        let key = Name::whole(rows::SOTHAT);
        let items = self.items(key);
        if items.len() > MOST_GOALS {
            self.report(
                key,
                format!(
                    "has {} conditions; at most {MOST_GOALS} are worked out",
                    items.len()
                ),
            );
            return Vec::new();
        }
        let mut goals = Vec::new();
        for (item, text) in items {
            match Goal::read(text) {
                Ok(goal) => goals.push(goal),
                Err(problem) => self.report_item(key, item, text, problem),
            }
        }
        goals
    }
}
