//! The built page in a browser, for the tests that look at it as a reader would.
//!
//! Each [`Browser`] has a driver and a profile of its own, on a port that the system picked, and leaves nothing behind
//! when it is dropped, also by a test that panics. It blocks, so that a test reads from top to bottom, and it waits
//! on what the page says of itself, never for a length of time.

mod axe;
mod command;
mod downloads;
mod driver;
mod engine;
mod files;
mod harm;
mod input;
mod keyboard;
mod native;
mod paper;
mod server;
mod sheet;
mod text;
mod watch;
mod wire;

use std::cell::RefCell;
use std::path::PathBuf;
use std::time::Duration;

use fantoccini::{Client, ClientBuilder};
use hyper_util::client::legacy::connect::HttpConnector;
use serde_json::{Value, json};
use tokio::runtime::Runtime;

use command::Command;
use driver::Driver;
pub use engine::{Engine, is_skipped};
pub use files::{interface_url, page_url, wiki_url};
pub use harm::Doing;
pub use input::Key;
pub use keyboard::Struck;
pub use native::{changed, native, native_sentence};
pub use paper::Paper;
pub use server::serve;
pub use sheet::Shown;
use wire::Wire;

/// How long anything may take before a test gives up on it. Far beyond what it takes, for a busy machine.
pub const PATIENCE: Duration = Duration::from_secs(20);

/// A window's size in CSS pixels, and how many device pixels stand for one of them.
#[derive(Clone, Copy, Debug)]
pub struct Screen {
    /// In CSS pixels.
    pub width: u32,
    /// In CSS pixels.
    pub height: u32,
    /// Device pixels for a CSS pixel.
    pub ratio: f64,
}

impl Screen {
    /// A desk.
    pub const DESK: Self = Self {
        width: 1280,
        height: 900,
        ratio: 1.0,
    };
    /// A small telephone.
    pub const SMALL: Self = Self {
        width: 320,
        height: 640,
        ratio: 2.0,
    };
    /// A wiki's frame, upright.
    pub const FRAME_UPRIGHT: Self = Self {
        width: 360,
        height: 480,
        ratio: 2.0,
    };
    /// A wiki's frame, lying.
    pub const FRAME_LYING: Self = Self {
        width: 800,
        height: 420,
        ratio: 1.0,
    };
}

/// A page of fewer dots in height Firefox takes whole, also where it still grows: it takes 65,535.
const MOST_DOTS: f64 = 30_000.0;

/// Sets what Firefox takes the system to prefer, by its own settings.
const PREFER: &str = "const [feature, value] = arguments, set = (name, number) => Services.prefs.setIntPref(name, number);
    if (feature === 'prefers-color-scheme')
      set('layout.css.prefers-color-scheme.content-override', {dark: 0, light: 1}[value]);
    else if (feature === 'prefers-reduced-motion') set('ui.prefersReducedMotion', value === 'reduce' ? 1 : 0);
    else if (feature === 'forced-colors') set('browser.display.document_color_use', value === 'active' ? 2 : 0);
    else throw new Error('no setting for ' + feature);";

/// A browser with one window.
pub struct Browser {
    // Dropped in this order: the driver may only go once the session is closed.
    client: Option<Client>,
    runtime: Runtime,
    engine: Engine,
    /// What Firefox tells; Chromium's driver keeps logs instead.
    wire: Option<RefCell<Wire>>,
    driver: Driver,
}

impl Browser {
    /// A browser that has opened `link` and shows what it says.
    pub fn opened(link: &str) -> Browser {
        let browser = Browser::start();
        browser.open(link);
        browser.settle(link);
        browser
    }

    /// Starts a browser that shows an empty page.
    ///
    /// # Panics
    /// Where the browser or its driver is not installed or does not start.
    pub fn start() -> Self {
        let engine = Engine::chosen();
        let driver = Driver::start(engine);
        let runtime = tokio::runtime::Builder::new_current_thread()
            .enable_all()
            .build()
            .expect("a runtime for one thread");
        let mut builder = ClientBuilder::new(HttpConnector::new());
        builder.capabilities(engine.capabilities(driver.folder()));
        let client = runtime
            .block_on(builder.connect(&driver.address()))
            .expect("the driver starts the browser");
        let told_at = client
            .capabilities()
            .and_then(|all| all.get("webSocketUrl")?.as_str());
        let browser = Self {
            wire: told_at.map(|address| RefCell::new(Wire::open(address))),
            client: Some(client),
            runtime,
            engine,
            driver,
        };
        browser.watch();
        browser.screen(Screen::DESK);
        browser
    }

    /// The folder of everything that this browser and its driver write.
    pub fn folder(&self) -> PathBuf {
        self.driver.folder().to_owned()
    }

    /// Runs something of the driver's to its end.
    fn run<T, E: std::fmt::Display>(&self, what: &str, doing: impl Future<Output = Result<T, E>>) -> T {
        match self
            .runtime
            .block_on(async { tokio::time::timeout(3 * PATIENCE, doing).await })
        {
            Ok(Ok(done)) => done,
            Ok(Err(error)) => panic!("{what}: {error}"),
            Err(_) => panic!("{what}: no answer; the page hangs"),
        }
    }

    fn client(&self) -> &Client {
        self.client.as_ref().expect("only taken when dropped")
    }

    /// A command of Chromium's own protocol.
    ///
    /// # Panics
    /// In Firefox: a test that needs one asks [`is_skipped`] first.
    #[track_caller]
    pub fn devtools(&self, method: &'static str, parameters: Value) -> Value {
        assert_eq!(self.engine, Engine::Chromium, "{method} is Chromium's alone");
        self.run(
            method,
            self.client().issue_cmd(Command::devtools(method, parameters)),
        )
    }

    /// The value of a script's `return`. Not subject to the page's policy.
    pub fn script(&self, text: &str, arguments: Vec<Value>) -> Value {
        self.run(text, self.client().execute(text, arguments))
    }

    /// Waits until a script's body returns something true, and hands that back.
    ///
    /// # Panics
    /// Where it does not within [`PATIENCE`]; says what the page showed then.
    #[track_caller]
    pub fn wait(&self, what: &str, body: &str) -> Value {
        // Looked at from within the page, so that neither side spins.
        let text = format!(
            "const [patience, done] = arguments; const end = performance.now() + patience;
             const look = () => {{ {body} }};
             (function again() {{
               let found = null; try {{ found = look(); }} catch (error) {{ found = null; }}
               if (found) done(found);
               else if (performance.now() > end) done(null);
               else setTimeout(again, 5);
             }})();"
        );
        let patience = json!(PATIENCE.as_millis() as u64);
        let found = self.run(what, self.client().execute_async(&text, vec![patience]));
        assert!(!found.is_null(), "waited in vain: {what}\n{}", self.summary());
        found
    }

    /// Calls a method of the protocol by which Firefox tells what happens.
    fn call(&self, method: &str, parameters: Value) -> Value {
        let wire = self.wire.as_ref().expect("Firefox has such a line");
        wire.borrow_mut().call(method, parameters)
    }

    /// A script that runs at the beginning of every document from now on, before any of its own.
    pub fn before_each_page(&self, script: &str) {
        match self.engine {
            Engine::Chromium => {
                self.devtools("Page.addScriptToEvaluateOnNewDocument", json!({"source": script}));
            }
            Engine::Firefox => {
                let function = format!("() => {{ {script} }}");
                self.call(
                    "script.addPreloadScript",
                    json!({"functionDeclaration": function}),
                );
            }
        }
    }

    /// Gives the window's content another size.
    pub fn screen(&self, screen: Screen) {
        let Screen { width, height, ratio } = screen;
        match self.engine {
            Engine::Chromium => {
                let metrics =
                    json!({"width": width, "height": height, "deviceScaleFactor": ratio, "mobile": false});
                self.devtools("Emulation.setDeviceMetricsOverride", metrics);
            }
            Engine::Firefox => {
                let window = self.run("the window", self.client().window());
                let size = json!({"context": String::from(window), "devicePixelRatio": ratio,
                    "viewport": {"width": width, "height": height}});
                self.call("browsingContext.setViewport", size);
            }
        }
    }

    /// Sets what the system prefers, for example `prefers-color-scheme` to `dark`.
    pub fn prefers(&self, feature: &str, value: &str) {
        self.prefers_all(&[(feature, value)]);
    }

    /// Sets several of what the system prefers at once.
    pub fn prefers_all(&self, features: &[(&str, &str)]) {
        match self.engine {
            Engine::Chromium => {
                let features: Vec<Value> = features
                    .iter()
                    .map(|(name, value)| json!({"name": name, "value": value}))
                    .collect();
                self.devtools("Emulation.setEmulatedMedia", json!({"features": features}));
            }
            Engine::Firefox => {
                for (name, value) in features {
                    self.firefox(PREFER, vec![json!(name), json!(value)]);
                }
            }
        }
    }

    /// The value of a script's `return` in Firefox's own window, where what the system says can be overridden.
    fn firefox(&self, text: &str, arguments: Vec<Value>) -> Value {
        let turn = |context| {
            self.run(
                context,
                self.client().issue_cmd(Command::firefox_context(context)),
            )
        };
        turn("chrome");
        let value = self.script(text, arguments);
        turn("content");
        value
    }

    /// Takes the whole page's picture to `screens/NAME.png` in the target directory, for a person to look at.
    pub fn picture(&self, name: &str) {
        match self.engine {
            Engine::Chromium => {
                let shot = json!({"format": "png", "captureBeyondViewport": true});
                let taken = self.devtools("Page.captureScreenshot", shot);
                files::write_picture(name, taken["data"].as_str().expect("a picture in base64"));
            }
            Engine::Firefox => {
                let window = self.run("the window", self.client().window());
                // A page with more dots than it takes at once is taken as far as it is in view.
                let dots = self.script(
                    "return document.documentElement.scrollHeight * devicePixelRatio;",
                    vec![],
                );
                let whole = dots.as_f64().is_some_and(|dots| dots < MOST_DOTS);
                let origin = if whole { "document" } else { "viewport" };
                let shot = json!({"context": String::from(window), "origin": origin});
                let taken = self.call("browsingContext.captureScreenshot", shot);
                let name = format!("firefox-{name}");
                files::write_picture(&name, taken["data"].as_str().expect("a picture in base64"));
            }
        }
    }
}

impl Drop for Browser {
    fn drop(&mut self) {
        if let Some(client) = self.client.take() {
            // Whatever is left is ended with the driver.
            let _ = self
                .runtime
                .block_on(async { tokio::time::timeout(Duration::from_secs(5), client.close()).await });
        }
    }
}
