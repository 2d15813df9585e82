//! A browser's driver as a process that ends with the test.

use std::fs;
use std::io::{BufRead as _, BufReader};
use std::os::unix::process::CommandExt as _;
use std::path::Path;
use std::process::{Child, Command, Stdio};
use std::sync::mpsc;
use std::thread;
use std::time::Instant;

use tempfile::TempDir;

use super::{Engine, PATIENCE};

/// A driver on a port of its own, with a folder for all that it and its browser write.
pub(super) struct Driver {
    process: Child,
    port: u16,
    folder: TempDir,
}

impl Driver {
    /// Starts one, and waits until it says which port it got.
    pub(super) fn start(engine: Engine) -> Self {
        let folder = TempDir::with_prefix("aftercount-browser-").expect("a folder for the browser's profile");
        let (program, arguments) = engine.driver(folder.path());
        let mut process = Command::new(program)
            .args(arguments)
            .env("TMPDIR", folder.path())
            .stdin(Stdio::null())
            .stdout(Stdio::piped())
            .stderr(Stdio::null())
            // The browser joins the driver's group, so that one signal ends both.
            .process_group(0)
            .spawn()
            .unwrap_or_else(|why| panic!("{program}: {why}; tests/run installs it"));
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
                if let Some(port) = engine.port(&line) {
                    let _ = sender.send(port);
                }
            }
        });
        driver.port = receiver
            .recv_timeout(PATIENCE)
            .expect("the driver says which port it listens on");
        driver
    }

    pub(super) fn address(&self) -> String {
        format!("http://127.0.0.1:{}", self.port)
    }

    pub(super) fn folder(&self) -> &Path {
        self.folder.path()
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
