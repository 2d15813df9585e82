//! Shows the finished page, where there is somebody to see it.

use std::path::Path;
use std::process::{Command, Stdio};

/// Opens the page in the browser that the system prefers, or says that it does not where there is no display.
pub(crate) fn show(page: &Path) {
    let Some((program, arguments)) = opener(std::env::consts::OS, |name| std::env::var_os(name).is_some())
    else {
        println!("Open it in a browser: there is no display here to show it on.");
        return;
    };
    let started = Command::new(program)
        .args(arguments)
        .arg(page)
        .stdin(Stdio::null())
        .stdout(Stdio::null())
        .stderr(Stdio::null())
        .spawn();
    if started.is_err() {
        println!("Open it in a browser: `{program}` did not start.");
    }
}

/// The program that opens files, with its first arguments; none under continuous integration or without a display.
fn opener(system: &str, is_set: impl Fn(&str) -> bool) -> Option<(&'static str, &'static [&'static str])> {
    if is_set("CI") {
        return None;
    }
    match system {
        "macos" => Some(("open", &[])),
        // The empty text is the title of the window, which `start` would otherwise take from the path.
        "windows" => Some(("cmd", &["/C", "start", ""])),
        _ if is_set("DISPLAY") || is_set("WAYLAND_DISPLAY") => Some(("xdg-open", &[])),
        _ => None,
    }
}

#[cfg(test)]
mod tests {
    use super::opener;

    #[test]
    fn opens_only_where_somebody_looks() {
        let name =
            |system, set: &[&str]| opener(system, |name| set.contains(&name)).map(|(program, _)| program);
        assert_eq!(name("linux", &[]), None);
        assert_eq!(name("linux", &["DISPLAY"]), Some("xdg-open"));
        assert_eq!(name("linux", &["WAYLAND_DISPLAY"]), Some("xdg-open"));
        assert_eq!(name("macos", &[]), Some("open"));
        assert_eq!(name("windows", &[]), Some("cmd"));
        for system in ["linux", "macos", "windows"] {
            assert_eq!(name(system, &["CI", "DISPLAY"]), None, "{system} under CI");
        }
    }
}
