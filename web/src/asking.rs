//! What a number in question must be: worked out in slices, so that typing is never held up, and put on the page.

use crate::canvas;
use crate::dom::{Dom, append, set};
use crate::draw::Ink;
use crate::mapping::Mapping;
use crate::outcome::show_table;
use crate::stopwatch::{ASKING, Stopwatch};
use aftercount_core::asked::{Asked, Inquiry, Putting};
use aftercount_core::pairs::Pairs;
use aftercount_core::picture::{self, Picture, Role};
use aftercount_core::put::put;
use aftercount_core::sides::Side;
use aftercount_core::statement::Statement;
use aftercount_core::words::asked as words;
use aftercount_core::words::goal;
use web_sys::HtmlSelectElement;

/// The canvas of the picture.
const PICTURE: &str = "asked-picture";

/// How long the page works at a stretch, in milliseconds.
const SLICE: f64 = 12.0;

/// Fights between two looks at the clock.
const AT_ONCE: u32 = 8;

/// The question of the text, and how far it has come.
pub(crate) struct Asking {
    dom: Dom,
    statement: Option<Statement>,
    inquiry: Option<Inquiry>,
    answer: Option<Asked>,
    picture: Option<Picture>,
    mapping: Mapping,
}

impl Asking {
    pub(crate) fn new(dom: &Dom) -> Asking {
        Asking {
            dom: dom.clone(),
            statement: None,
            inquiry: None,
            answer: None,
            picture: None,
            mapping: Mapping::new(dom),
        }
    }

    /// Takes up the question of a statement, or the two; without one the answer before goes.
    pub(crate) fn begin(&mut self, pairs: &Pairs, statement: &Statement) {
        self.inquiry = Inquiry::new(pairs, statement);
        if self.inquiry.is_some() {
            self.mapping.clear();
            self.begin_one(statement);
        } else {
            self.clear_one();
            if !self.mapping.begin(pairs, statement) {
                self.clear();
                return;
            }
        }
        self.show_choices(statement);
        let echo = goal::goals(statement, &statement.so_that);
        self.dom.set_text("sothat.echo", &sentence_of(&echo));
        self.dom.set_shown("asked-how", false);
        self.dom.mark_root(
            "data-asked",
            Some(if statement.has_base() { "beside" } else { "alone" }),
        );
    }

    fn begin_one(&mut self, statement: &Statement) {
        self.statement = Some(statement.clone());
        self.dom.set_shown("asked", true);
        self.dom.set_attribute("asked", "aria-busy", "true");
        for side in Side::BOTH {
            let id = format!("asked.{}.who", side.letter());
            self.dom.set_text(&id, &statement.names[side]);
        }
    }

    /// Takes the answer off the page.
    pub(crate) fn clear(&mut self) {
        self.clear_one();
        self.mapping.clear();
        self.dom.set_shown("asked-how", true);
        self.dom.mark_root("data-asked", None);
    }

    fn clear_one(&mut self) {
        self.statement = None;
        self.inquiry = None;
        self.answer = None;
        self.picture = None;
        self.dom.set_shown("asked", false);
        self.dom.set_shown("asked-brief", false);
    }

    /// The map, where two numbers are in question.
    pub(crate) fn mapping(&mut self) -> &mut Mapping {
        &mut self.mapping
    }

    /// Whether nothing is being worked out.
    pub(crate) fn is_done(&self) -> bool {
        self.inquiry.is_none() && self.mapping.is_done()
    }

    /// Leaves off: the text has changed to one that cannot be worked out.
    pub(crate) fn stop(&mut self) {
        self.inquiry = None;
        self.mapping.stop();
        self.dom.set_attribute("asked", "aria-busy", "false");
        self.dom.set_text("asked-working", "");
        self.dom.set_shown("asked-brief", false);
    }

    /// Works for a slice, and shows what there is to be shown; whether there is something new to draw.
    pub(crate) fn go_on(&mut self, pairs: &Pairs) -> bool {
        let watch = Stopwatch::start(&self.dom, ASKING);
        let mut done = self.is_done();
        while !done && watch.elapsed() < SLICE {
            done = match &mut self.inquiry {
                Some(inquiry) => inquiry.go_on(AT_ONCE),
                None => self.mapping.go_on(AT_ONCE),
            };
        }
        if self.inquiry.is_none() {
            return self.mapping.show();
        }
        self.show_one(done, pairs);
        done
    }

    fn show_one(&mut self, done: bool, pairs: &Pairs) {
        let Some(inquiry) = &self.inquiry else { return };
        if done {
            self.answer = Some(inquiry.answer());
            self.inquiry = None;
            self.show(pairs);
        } else {
            let part = (inquiry.progress() * 100.0).round();
            self.dom
                .set_text("asked-working", &format!("Being worked out: {part} % so far."));
        }
    }

    /// The answer in one sentence.
    pub(crate) fn sentence(&self) -> Option<String> {
        if let Some(map) = self.mapping.sentence() {
            return Some(map);
        }
        let (statement, answer) = (self.statement.as_ref()?, self.answer.as_ref()?);
        Some(words::sentence(statement, answer))
    }

    /// What is written in the field for one of the answers: the key and its text.
    pub(crate) fn putting(&self, pairs: &Pairs, place: usize) -> Option<(String, Pairs)> {
        let answer = self.answer.as_ref()?;
        let putting = answer.puttings().into_iter().nth(place)?;
        let mut changed = pairs.clone();
        put(&mut changed, &answer.slot, &putting.text);
        Some((answer.slot.key.clone(), changed))
    }

    /// Draws the picture.
    pub(crate) fn draw(&mut self, ink: &Ink) -> Result<(), String> {
        self.mapping.draw(ink)?;
        canvas::draw(&self.dom, PICTURE, ink, self.picture.as_ref()).map(|_| ())
    }

    /// The picture of the answer, or the map, with the canvas on which it stands and what was stated; where there is one.
    pub(crate) fn picture(&self) -> Option<(&'static str, &Picture, &Statement)> {
        let asked = self.picture.as_ref().zip(self.statement.as_ref());
        let asked = asked.map(|(picture, statement)| (PICTURE, picture, statement));
        asked.or_else(|| self.mapping.picture())
    }

    fn show(&mut self, pairs: &Pairs) {
        let (Some(statement), Some(answer)) = (&self.statement, &self.answer) else {
            return;
        };
        let dom = &self.dom;
        dom.set_attribute("asked", "aria-busy", "false");
        dom.set_text("asked-working", "");
        let sentence = words::sentence(statement, answer);
        dom.set_text("asked-sentence", &sentence);
        show_in_brief(dom, statement, &sentence);
        dom.set_words("asked-where", &words::where_looked(statement, answer));
        show_table(dom, "asked-story", &words::table(statement, answer));
        let met = words::met_table(statement, answer).filter(|table| !table.rows.is_empty());
        dom.set_shown("asked-met-part", met.is_some());
        if let Some(met) = &met {
            show_table(dom, "asked-met", met);
        }
        self.picture = picture::asked(statement, answer);
        if let Some(picture) = &self.picture {
            dom.set_text("asked-words", &picture.summary);
            show_table(dom, "asked-table", &picture.table);
            dom.set_shown("met-key", picture.has(Role::Met));
        }
        self.show_puttings(pairs, statement, answer);
    }

    /// The conditions that can be added, in words.
    fn show_choices(&self, statement: &Statement) {
        let Some(select) = self.dom.typed::<HtmlSelectElement>("sothat.choice") else {
            return;
        };
        let chosen = select.selected_index().max(0);
        let choices = goal::choices(statement).into_iter();
        let choices = choices.map(|choice| (choice.text, choice.words));
        self.dom.set_choices(&select, choices, chosen);
    }

    /// The conditions with the chosen one added.
    pub(crate) fn with_choice(&self, pairs: &Pairs) -> Option<String> {
        let select = self.dom.typed::<HtmlSelectElement>("sothat.choice")?;
        let before = pairs.get("sothat").unwrap_or_default().trim();
        let chosen = select.value();
        Some(if before.is_empty() {
            chosen
        } else {
            format!("{before},{chosen}")
        })
    }

    /// A button for each answer.
    fn show_puttings(&self, pairs: &Pairs, statement: &Statement, answer: &Asked) {
        let dom = &self.dom;
        let Some(list) = dom.element("asked-put") else {
            return;
        };
        list.set_text_content(None);
        for (place, putting) in answer.puttings().iter().enumerate() {
            if Some(putting.value) == answer.slot.value() {
                continue;
            }
            let Putting { value, .. } = putting;
            let label = words::putting(statement, answer, *value);
            if let Some(button) = dom.make("button", &label) {
                set(&button, "type", "button");
                set(&button, "data-put", &place.to_string());
                append(&list, &button);
            }
        }
        let nothing = pairs.get(&answer.slot.key).is_none();
        dom.set_shown("asked-put", !nothing);
    }
}

/// A clause as a sentence of its own.
fn sentence_of(clause: &str) -> String {
    if clause.is_empty() {
        String::new()
    } else {
        format!("So that {clause}.")
    }
}

/// The answer beside the outcome, where that stays in sight: whoever asks at a field sees it come, and goes to it from there.
/// Without an outcome the answer itself stands there.
pub(crate) fn show_in_brief(dom: &Dom, statement: &Statement, sentence: &str) {
    dom.set_text("asked-brief-words", sentence);
    dom.set_shown("asked-brief", statement.has_base());
}
