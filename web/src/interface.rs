//! The interface for scripts of other pages: the text of an engagement in, its outcome as an object out.

use aftercount_core::answer::{Answer, answer};
use aftercount_core::mark::text_mark;
use aftercount_core::pairs::Pairs;
use aftercount_core::problem::Problem;
use aftercount_core::statement::Statement;
use aftercount_core::words::asked;
use aftercount_core::words::sentence::sentence;
use js_sys::Reflect;
use serde::Serialize;
use serde_wasm_bindgen::Serializer;
use wasm_bindgen::JsValue;
use wasm_bindgen::prelude::wasm_bindgen;

/// What is said of something that is no text.
const NO_TEXT: &str = "give the text of an engagement, as a string";

/// Works a text out: the object of the command line, with `sentence`, `marking`, `link` and `text_mark` where it can be
/// worked out. What is wrong with the text is a value too, `{ok: false, problems}`, and so is a text that is none.
#[wasm_bindgen]
pub fn outcome(text: &JsValue) -> JsValue {
    let Some(text) = text.as_string() else {
        return object(&Answer::Problems(vec![Problem::whole(NO_TEXT)]));
    };
    let answer = answer(&text);
    let object = object(&answer);
    let pairs = Pairs::parse(&text);
    if let Ok(statement) = Statement::read(&pairs) {
        add_words(&object, &answer, &statement, &pairs);
    }
    object
}

/// The object that the line of the command line stands for; what has no bound is `Infinity`, which JSON has no number for.
fn object(answer: &Answer) -> JsValue {
    // Every kind of value in an answer has one in JavaScript.
    answer
        .serialize(&Serializer::json_compatible())
        .unwrap_or(JsValue::NULL)
}

fn add_words(object: &JsValue, answer: &Answer, statement: &Statement, pairs: &Pairs) {
    let marking = Some(statement.marking.as_str()).filter(|marking| !marking.is_empty());
    for (key, value) in [
        ("sentence", JsValue::from(in_words(answer, statement))),
        ("marking", marking.map_or(JsValue::NULL, JsValue::from)),
        ("link", JsValue::from(pairs.link())),
        ("text_mark", JsValue::from(text_mark(pairs))),
    ] {
        // Only an object that is frozen refuses, and this one is new.
        let _ = Reflect::set(object, &key.into(), &value);
    }
}

/// The outcome in a sentence, and the answer to each question in one.
fn in_words(answer: &Answer, statement: &Statement) -> String {
    match answer {
        Answer::Outcome { outcome, .. } => sentence(statement, outcome),
        Answer::Asked { asked, outcome } => {
            let outcome = outcome.iter().map(|outcome| in_words(outcome, statement));
            let asked = asked.iter().map(|reply| asked::reply(statement, reply));
            outcome.chain(asked).collect::<Vec<_>>().join(" ")
        }
        Answer::Problems(_) => String::new(),
    }
}
