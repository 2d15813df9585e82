//! Commands of the drivers' own that WebDriver does not have.

use fantoccini::wd::WebDriverCompatibleCommand;
use http::Method;
use serde_json::{Value, json};
use url::{ParseError, Url};

/// A command below the session's address.
#[derive(Debug)]
pub(super) struct Command {
    path: &'static str,
    body: Value,
}

impl Command {
    /// A method of the DevTools protocol.
    pub(super) fn devtools(method: &'static str, parameters: Value) -> Self {
        Self {
            path: "goog/cdp/execute",
            body: json!({"cmd": method, "params": parameters}),
        }
    }

    /// The page as a PDF on paper so many centimetres large, with the margins that the page itself asks for.
    pub(super) fn print(width: f64, height: f64) -> Self {
        Self {
            path: "print",
            body: json!({"page": {"width": width, "height": height}, "background": false, "shrinkToFit": false}),
        }
    }

    /// Whether scripts from now on run in Firefox's own window (`chrome`) or in the page (`content`).
    pub(super) fn firefox_context(context: &'static str) -> Self {
        Self {
            path: "moz/context",
            body: json!({"context": context}),
        }
    }

    /// What a log gathered since it was last asked for.
    pub(super) fn log(kind: &'static str) -> Self {
        Self {
            path: "se/log",
            body: json!({"type": kind}),
        }
    }
}

impl WebDriverCompatibleCommand for Command {
    fn endpoint(&self, base: &Url, session: Option<&str>) -> Result<Url, ParseError> {
        base.join(&format!("session/{}/{}", session.unwrap_or_default(), self.path))
    }

    fn method_and_body(&self, _: &Url) -> (Method, Option<String>) {
        (Method::POST, Some(self.body.to_string()))
    }
}
