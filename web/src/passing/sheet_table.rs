//! The trajectory as a table for spreadsheets: which times, and how it is written.

use super::{offer_text, with_finding};
use crate::dom::Dom;
use crate::listen::After;
use crate::page::Page;
use aftercount_core::passing::table::{Request, Signs, table};
use aftercount_core::passing::times::Times;
use aftercount_core::passing::words;
use aftercount_core::trajectory::Trajectory;
use aftercount_core::words::timeline::timeline;
use web_sys::HtmlInputElement;

const PROBLEM: &str = "table-problem";

/// Offers the table as a file, or says what is wrong with what was asked for.
pub(super) fn save(page: &mut Page) -> After {
    page.field_left();
    clear_problem(page.dom());
    let made = with_finding(page, |finding, good| {
        let trajectory = good.fight.trajectory.as_ref()?;
        let request = request(page.dom(), trajectory);
        let moments = timeline(&good.statement, &good.fight);
        Some(request.map(|request| table(finding, trajectory, &moments, &request)))
    });
    match made.flatten() {
        Some(Ok(text)) => offer_text(page, "over-time", "csv", "text/csv;charset=utf-8", text),
        Some(Err(why)) => {
            say(page.dom(), &why);
            After::Nothing
        }
        None => {
            say(page.dom(), words::NO_OUTCOME);
            After::Nothing
        }
    }
}

/// What is wrong is no longer said once something else is asked for.
pub(super) fn clear_problem(dom: &Dom) {
    dom.set_text(PROBLEM, "");
    dom.set_shown(PROBLEM, false);
}

fn say(dom: &Dom, why: &str) {
    dom.set_words(PROBLEM, why);
    dom.set_shown(PROBLEM, true);
}

fn request(dom: &Dom, trajectory: &Trajectory) -> Result<Request, String> {
    let input = |id: &str| dom.typed::<HtmlInputElement>(id);
    let checked = |id: &str| input(id).is_some_and(|input| input.checked());
    let text = |id: &str| input(id).map(|input| input.value()).unwrap_or_default();
    let times = if checked("table-at") {
        Times::list(&text("table-list"))?
    } else if checked("table-happens") {
        Times::Events
    } else {
        Times::every(&text("table-step"), trajectory)?
    };
    let signs = if checked("table-commas") {
        Signs::Commas
    } else {
        Signs::Points
    };
    Ok(Request {
        times,
        events: checked("table-events"),
        signs,
    })
}
