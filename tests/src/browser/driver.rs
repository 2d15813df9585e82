//! Chromium's driver as a process that ends with the test.

use std::fs;
use std::io::{BufRead as _, BufReader};
use std::os::unix::process::CommandExt as _;
use std::path::Path;
use std::process::{Child, Command, Stdio};
use std::sync::mpsc;
use std::thread;
use std::time::Instant;

use serde_json::{Map, Value, json};
use tempfile::TempDir;

use super::PATIENCE;

/// A chromedriver on a port of its own, with a folder for all that it and its browser write.
pub(super) struct Driver {
    process: Child,
    port: u16,
    folder: TempDir,
}

impl Driver {
    /// Starts one, and waits until it says which port it got.
    pub(super) fn start() -> Self {
        let folder = TempDir::with_prefix("aftercount-browser-").expect("a folder for the browser's profile");
        let mut process = Command::new("chromedriver")
            .arg("--port=0")
            .env("TMPDIR", folder.path())
            .stdin(Stdio::null())
            .stdout(Stdio::piped())
            .stderr(Stdio::null())
            // The browser joins the driver's group, so that one signal ends both.
            .process_group(0)
            .spawn()
            .expect("chromedriver is installed (Debian: chromium-driver)");
        let output = process.stdout.take().expect("its output is piped");
        let mut driver = Self {
            process,
            port: 0,
            folder,
        };
        let (sender, receiver) = mpsc::channel();
        // Reads on to the end: a full pipe would stop the driver.
        thread::spawn(move || {
            for line in BufReader::new(output).lines().map_while(Result::ok) {
                if let Some(port) = port(&line) {
                    let _ = sender.send(port);
                }
            }
        });
        driver.port = receiver
            .recv_timeout(PATIENCE)
            .expect("chromedriver says which port it listens on");
        driver
    }

    pub(super) fn address(&self) -> String {
        format!("http://127.0.0.1:{}", self.port)
    }

    pub(super) fn folder(&self) -> &Path {
        self.folder.path()
    }

    /// What the browser is started with.
    pub(super) fn capabilities(&self) -> Map<String, Value> {
        let profile = self.folder.path().join("profile");
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
        let capabilities = json!({
            "browserName": "chrome",
            "goog:chromeOptions": {"args": arguments},
            "goog:loggingPrefs": {"browser": "ALL", "performance": "ALL"},
            "timeouts": {"script": 2 * PATIENCE.as_millis() as u64, "pageLoad": PATIENCE.as_millis() as u64},
        });
        match capabilities {
            Value::Object(map) => map,
            _ => Map::new(),
        }
    }
}

impl Drop for Driver {
    fn drop(&mut self) {
        if let Some(group) = rustix::process::Pid::from_raw(self.process.id() as i32) {
            let _ = rustix::process::kill_process_group(group, rustix::process::Signal::KILL);
        }
        let _ = self.process.wait();
        // The browser's processes may still be going, and write while their folder is being emptied.
        let end = Instant::now() + PATIENCE;
        while fs::remove_dir_all(self.folder.path()).is_err()
            && self.folder.path().exists()
            && Instant::now() < end
        {
            thread::yield_now();
        }
    }
}

/// The port in "ChromeDriver was started successfully on port 12345."
fn port(line: &str) -> Option<u16> {
    line.strip_suffix('.')?
        .split_once("started successfully on port ")?
        .1
        .parse()
        .ok()
}

#[cfg(test)]
mod tests {
    use super::port;

    #[test]
    fn port_is_read_from_the_driver_s_greeting() {
        assert_eq!(
            port("ChromeDriver was started successfully on port 43927."),
            Some(43927)
        );
        assert_eq!(port("Starting ChromeDriver 156.0 (ea19f97) on port 0"), None);
    }
}
