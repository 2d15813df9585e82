//! What the browser downloads.

use std::path::PathBuf;
use std::time::Instant;
use std::{fs, thread};

use serde_json::json;

use super::{Browser, Engine, PATIENCE};

impl Browser {
    /// Lets files come, into a folder of this browser's own.
    pub fn allow_downloads(&self) {
        let folder = self.downloads();
        fs::create_dir_all(&folder).expect("a folder for downloads");
        // Firefox is started with this folder.
        if self.engine == Engine::Chromium {
            let parameters = json!({"behavior": "allow", "downloadPath": folder});
            self.devtools("Browser.setDownloadBehavior", parameters);
        }
    }

    /// The names of the files that have come, in order.
    pub fn downloaded_names(&self) -> Vec<String> {
        let entries = fs::read_dir(self.downloads()).expect("the folder for downloads");
        let mut names: Vec<String> = entries
            .map(|entry| {
                entry
                    .expect("an entry")
                    .file_name()
                    .to_string_lossy()
                    .into_owned()
            })
            .collect();
        names.sort();
        names
    }

    /// Waits for a file whose name ends so, and hands over what it holds.
    #[track_caller]
    pub fn downloaded(&self, ending: &str) -> Vec<u8> {
        let end = Instant::now() + PATIENCE;
        loop {
            // While it comes it has another name, and its own is held by an empty file.
            let names = self.downloaded_names().into_iter();
            let read = |name| fs::read(self.downloads().join(name)).expect("a file");
            let mut contents = names.filter(|name| name.ends_with(ending)).map(read);
            if let Some(content) = contents.find(|content| !content.is_empty()) {
                return content;
            }
            assert!(Instant::now() < end, "no file {ending}: {}", self.summary());
            thread::yield_now();
        }
    }

    fn downloads(&self) -> PathBuf {
        self.folder().join("downloads")
    }
}
