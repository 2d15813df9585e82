//! Nothing may go wrong unseen: errors of the console and the page, breaches of the policy, loads from a network.

use serde_json::Value;

use super::command::Command;
use super::{Browser, Engine};

/// Tells the console of what else a page could hide.
const LISTENERS: &str = "
    addEventListener('securitypolicyviolation', (event) =>
      console.error('policy violation: ' + event.violatedDirective + ' ' + event.blockedURI), true);
    addEventListener('unhandledrejection', (event) => console.error('unhandled: ' + event.reason));";

/// Has Firefox tell an error that a page writes to the console in words: it would tell of an object.
const IN_WORDS: &str = "const write = console.error;
    console.error = (...all) => write.apply(console, all.map(String));";

/// Schemes that stay on the machine.
const LOCAL: [&str; 6] = ["file:", "data:", "blob:", "about:", "chrome:", "resource:"];

impl Browser {
    /// Listens to every document from now on.
    pub(super) fn watch(&self) {
        if self.engine == Engine::Firefox {
            self.before_each_page(IN_WORDS);
        }
        self.before_each_page(LISTENERS);
    }

    /// All that went wrong since this was last asked.
    pub fn complaints(&self) -> Vec<String> {
        if let Some(wire) = &self.wire {
            return wire.borrow_mut().complaints(is_local);
        }
        let mut complaints = Vec::new();
        for entry in self.log("browser") {
            if entry["level"] == "SEVERE" {
                complaints.push(format!("{}: {}", entry["source"], entry["message"]));
            }
        }
        for entry in self.log("performance") {
            complaints.extend(load(entry["message"].as_str().unwrap_or_default()));
        }
        complaints
    }

    /// Fails where anything went wrong since this was last asked.
    #[track_caller]
    pub fn assert_clean(&self) {
        let complaints = self.complaints();
        assert!(
            complaints.is_empty(),
            "the page was not clean:\n{}",
            complaints.join("\n")
        );
    }

    fn log(&self, kind: &'static str) -> Vec<Value> {
        match self.run(kind, self.client().issue_cmd(Command::log(kind))) {
            Value::Array(entries) => entries,
            other => panic!("chromedriver's {kind} log is no list: {other}"),
        }
    }
}

/// The complaint about a message of the performance log that tells of a load from elsewhere.
fn load(message: &str) -> Option<String> {
    let message: Value = serde_json::from_str(message).ok()?;
    let event = &message["message"];
    let url = match event["method"].as_str()? {
        "Network.requestWillBeSent" => event["params"]["request"]["url"].as_str()?,
        "Network.webSocketCreated" | "Network.webTransportCreated" => event["params"]["url"].as_str()?,
        _ => return None,
    };
    (!is_local(url)).then(|| format!("network: {url}"))
}

fn is_local(url: &str) -> bool {
    LOCAL.iter().any(|scheme| url.starts_with(scheme))
}

#[cfg(test)]
mod tests {
    use super::load;

    #[test]
    fn loads_from_elsewhere_are_told_from_local_ones() {
        let sent = |url: &str| {
            format!(
                r#"{{"message":{{"method":"Network.requestWillBeSent","params":{{"request":{{"url":"{url}"}}}}}}}}"#
            )
        };
        assert!(load(&sent("file:///page.html")).is_none());
        assert!(load(&sent("data:,")).is_none());
        assert_eq!(
            load(&sent("http://127.0.0.1/a")),
            Some("network: http://127.0.0.1/a".to_owned())
        );
        assert!(load(r#"{"message":{"method":"Network.dataReceived","params":{}}}"#).is_none());
    }
}
