//! WebDriver BiDi, the protocol by which Firefox tells what Chromium writes into its logs, and takes what WebDriver has no
//! command for: scripts before every page, and the size of the window's content.

use std::net::TcpStream;

use serde_json::{Value, json};
use tungstenite::{Message, WebSocket};

use super::PATIENCE;

/// The open line to a browser.
pub(super) struct Wire {
    socket: WebSocket<TcpStream>,
    calls: u64,
    /// What the browser told, in order, since it was last asked.
    told: Vec<Value>,
}

impl Wire {
    /// Opens the line at an address such as `ws://127.0.0.1:35002/session/…`, and asks to be told of errors and loads.
    pub(super) fn open(address: &str) -> Wire {
        let host = address
            .strip_prefix("ws://")
            .and_then(|rest| rest.split('/').next());
        let stream = TcpStream::connect(host.expect("an address of a web socket")).expect("Firefox listens");
        stream.set_read_timeout(Some(PATIENCE)).expect("a length of time");
        let (socket, _) = tungstenite::client(address, stream).expect("Firefox shakes hands");
        let mut wire = Wire {
            socket,
            calls: 0,
            told: Vec::new(),
        };
        let events = ["log.entryAdded", "network.beforeRequestSent"];
        wire.call("session.subscribe", json!({"events": events}));
        wire
    }

    /// Calls a method and waits for what it gives back; what is told meanwhile is kept.
    pub(super) fn call(&mut self, method: &str, parameters: Value) -> Value {
        self.calls += 1;
        let call = json!({"id": self.calls, "method": method, "params": parameters});
        self.socket
            .send(Message::text(call.to_string()))
            .expect("Firefox listens");
        loop {
            let message = self.socket.read().expect("Firefox answers");
            let Ok(text) = message.to_text() else { continue };
            let Ok(answer) = serde_json::from_str::<Value>(text) else {
                continue;
            };
            if answer["type"] == "event" {
                self.told.push(answer);
            } else if answer["id"] == self.calls {
                assert_eq!(answer["type"], "success", "{method}: {answer}");
                return answer["result"].clone();
            }
        }
    }

    /// What was told since this was last asked: errors and loads, in words; those of other kinds are left out.
    pub(super) fn complaints(&mut self, is_local: impl Fn(&str) -> bool) -> Vec<String> {
        // What happened before this call is told before its answer.
        self.call("session.status", json!({}));
        let complaint = |event: Value| {
            let about = &event["params"];
            match event["method"].as_str()? {
                "log.entryAdded" if about["level"] == "error" => {
                    Some(format!("{}: {}", about["type"], about["text"]))
                }
                "network.beforeRequestSent" => {
                    let url = about["request"]["url"].as_str()?;
                    (!is_local(url)).then(|| format!("network: {url}"))
                }
                _ => None,
            }
        };
        self.told.drain(..).filter_map(complaint).collect()
    }
}
