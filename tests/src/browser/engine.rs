//! Which browser the tests drive.

use std::io::Write as _;
use std::path::Path;
use std::{env, fs, thread};

use serde_json::{Map, Value, json};

use super::PATIENCE;

/// The variable that names another browser than the usual one.
const CHOICE: &str = "AFTERCOUNT_BROWSER";

/// The variable that names a file for the tests that a browser skips; `tests/run` counts its lines.
const SKIPPED: &str = "AFTERCOUNT_SKIPPED";

/// A browser's engine.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Engine {
    /// Chromium with chromedriver, as a rule.
    Chromium,
    /// Firefox with geckodriver, where `AFTERCOUNT_BROWSER` is `firefox`.
    Firefox,
}

impl Engine {
    /// The one that was chosen.
    pub fn chosen() -> Engine {
        match env::var(CHOICE).as_deref() {
            Ok("firefox") => Engine::Firefox,
            Ok("chromium" | "") | Err(_) => Engine::Chromium,
            Ok(other) => panic!("{CHOICE} is {other}: there are chromium and firefox"),
        }
    }

    /// The driver's program, and what it is started with.
    pub(super) fn driver(self, folder: &Path) -> (&'static str, Vec<String>) {
        match self {
            Engine::Chromium => ("chromedriver", vec!["--port=0".to_owned()]),
            Engine::Firefox => {
                let arguments = ["--port=0", "--websocket-port=0", "--allow-system-access"];
                let mut arguments: Vec<String> = arguments.map(str::to_owned).to_vec();
                arguments.push(format!("--profile-root={}", folder.display()));
                ("geckodriver", arguments)
            }
        }
    }

    /// The port in the line with which the driver says that it listens.
    pub(super) fn port(self, line: &str) -> Option<u16> {
        match self {
            // "ChromeDriver was started successfully on port 12345."
            Engine::Chromium => {
                line.strip_suffix('.')?
                    .split_once("started successfully on port ")?
                    .1
            }
            // "1764600000000 geckodriver INFO Listening on 127.0.0.1:12345"
            Engine::Firefox => line.split_once("Listening on 127.0.0.1:")?.1,
        }
        .trim()
        .parse()
        .ok()
    }

    /// What the browser is started with; everything it writes goes into `folder`.
    pub(super) fn capabilities(self, folder: &Path) -> Map<String, Value> {
        let script = 2 * PATIENCE.as_millis() as u64;
        let mut capabilities = match self {
            Engine::Chromium => chromium(folder),
            Engine::Firefox => firefox(folder),
        };
        capabilities["timeouts"] = json!({"script": script, "pageLoad": PATIENCE.as_millis() as u64});
        match capabilities {
            Value::Object(map) => map,
            _ => Map::new(),
        }
    }
}

/// Whether this test is one for Chromium alone; says so where it is skipped, with the reason.
///
/// Chromium's own protocol can do what WebDriver cannot: show how the page is told to a screen reader, switch scripts off.
#[track_caller]
pub fn is_skipped(reason: &str) -> bool {
    if Engine::chosen() == Engine::Chromium {
        return false;
    }
    let name = thread::current().name().unwrap_or("a test").to_owned();
    let line = format!("skipped in Firefox: {name}: {reason}\n");
    print!("{line}");
    if let Ok(path) = env::var(SKIPPED) {
        let file = fs::OpenOptions::new().create(true).append(true).open(&path);
        let written = file.and_then(|mut file| file.write_all(line.as_bytes()));
        written.unwrap_or_else(|why| panic!("{path}: {why}"));
    }
    true
}

fn chromium(folder: &Path) -> Value {
    let profile = folder.join("profile");
    let mut arguments = vec![
        "--headless=new".to_owned(),
        "--disable-gpu".to_owned(),
        "--disable-quic".to_owned(),
        "--no-first-run".to_owned(),
        "--disable-background-networking".to_owned(),
        "--disable-component-update".to_owned(),
        "--disable-sync".to_owned(),
        // A sandboxed frame in a process of its own would escape the driver's logs. Its origin is opaque all the same.
        "--disable-features=IsolateSandboxedIframes".to_owned(),
        format!("--user-data-dir={}", profile.display()),
    ];
    // Chromium refuses its own sandbox to root.
    if rustix::process::geteuid().is_root() {
        arguments.push("--no-sandbox".to_owned());
    }
    json!({
        "browserName": "chrome",
        "goog:chromeOptions": {"args": arguments},
        "goog:loggingPrefs": {"browser": "ALL", "performance": "ALL"},
    })
}

fn firefox(folder: &Path) -> Value {
    json!({
        "browserName": "firefox",
        "webSocketUrl": true,
        "moz:firefoxOptions": {
            "args": ["-headless"],
            "prefs": {
                "browser.download.folderList": 2,
                "browser.download.dir": folder.join("downloads"),
                "browser.download.useDownloadDir": true,
                "browser.download.always_ask_before_handling_new_types": false,
                "browser.download.alwaysOpenPanel": false,
            },
        },
    })
}

#[cfg(test)]
mod tests {
    use super::Engine;

    #[test]
    fn port_is_read_from_the_driver_s_greeting() {
        let chromium = |line| Engine::Chromium.port(line);
        assert_eq!(
            chromium("ChromeDriver was started successfully on port 43927."),
            Some(43927)
        );
        assert_eq!(chromium("Starting ChromeDriver 156.0 (ea19f97) on port 0"), None);
        let firefox = |line| Engine::Firefox.port(line);
        assert_eq!(
            firefox("1764\tgeckodriver\tINFO\tListening on 127.0.0.1:35001"),
            Some(35001)
        );
        assert_eq!(
            firefox("1764\tWebDriver BiDi listening on ws://127.0.0.1:41"),
            None
        );
    }
}
