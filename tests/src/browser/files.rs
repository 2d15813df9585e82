//! Where the built page lies.

use std::path::{Path, PathBuf};
use std::{env, fs};

use base64::Engine as _;
use base64::engine::general_purpose::STANDARD as BASE64;
use url::Url;

/// The page's address as it is opened from a disc.
pub fn page_url() -> Url {
    built("aftercount.html")
}

/// The address of the example of a wiki page that frames the page.
pub fn wiki_url() -> Url {
    built("wiki.html")
}

/// The address of the example of a page that uses the interface for scripts.
pub fn interface_url() -> Url {
    built("interface.html")
}

fn built(name: &str) -> Url {
    let path = target().join("page").join(name);
    assert!(
        path.is_file(),
        "{name} is not built: cargo run -p aftercount-www -- --no-open"
    );
    Url::from_file_path(path).expect("Cargo's folders have full paths")
}

/// Cargo's target directory: the tests lie in `TARGET/PROFILE/deps`.
fn target() -> PathBuf {
    let program = env::current_exe().expect("a test knows its own path");
    program
        .ancestors()
        .nth(3)
        .map(Path::to_owned)
        .expect("tests lie deep in the target directory")
}

/// Where something is put for a person to look at.
pub(super) fn screen(name: &str) -> PathBuf {
    let folder = target().join("screens");
    fs::create_dir_all(&folder).expect("a folder for pictures");
    folder.join(name)
}

/// Puts a picture where a person finds it.
pub(super) fn write_picture(name: &str, encoded: &str) {
    let picture = BASE64.decode(encoded).expect("base64 from the browser");
    fs::write(screen(name).with_extension("png"), picture).expect("a picture is written");
}
