//! The harness itself: what the other tests rely on it to notice, it does notice.

use std::path::Path;

use aftercount_tests::browser::Browser;

/// A page whose only content is a script.
fn page(script: &str) -> String {
    format!("data:text/html,<meta charset=utf-8><body><script>{script}</script>")
}

#[track_caller]
fn noticed(script: &str, part: &str) {
    let browser = Browser::start();
    browser.open_address(&page(script));
    browser.wait(
        "the complaint's cause",
        "return document.readyState === 'complete' && !window.waiting;",
    );
    let complaints = browser.complaints().join("\n");
    assert!(complaints.contains(part), "{part:?} is not in: {complaints:?}");
}

#[test]
fn clean_page_is_clean() {
    let browser = Browser::start();
    browser.open_address(&page("console.log('fine')"));
    browser.assert_clean();
}

#[test]
fn console_errors_are_noticed() {
    noticed("console.error('alarm')", "alarm");
}

#[test]
fn page_errors_are_noticed() {
    noticed("throw new Error('thrown')", "thrown");
}

#[test]
fn rejected_promises_are_noticed() {
    noticed("Promise.reject(new Error('rejected'))", "rejected");
}

#[test]
fn loads_are_noticed() {
    // A port of this machine at which nothing answers any more.
    let listener = std::net::TcpListener::bind("127.0.0.1:0").expect("a port");
    let port = listener.local_addr().expect("its number").port();
    drop(listener);
    noticed(
        &format!(
            "window.waiting = true; fetch('http://127.0.0.1:{port}/x').catch(() => {{ waiting = false; }})"
        ),
        &format!("network: http://127.0.0.1:{port}/x"),
    );
}

#[test]
fn breaches_of_the_policy_are_noticed_also_in_a_sandboxed_frame() {
    let inner =
        "<meta http-equiv=Content-Security-Policy content=\"default-src 'none'\"><p style=color:red>inside";
    let outer = format!(
        "<iframe sandbox=allow-scripts srcdoc='{}'></iframe>",
        inner.replace('\'', "&apos;")
    );
    let browser = Browser::start();
    browser.open_address(&format!("data:text/html,<meta charset=utf-8>{outer}"));
    browser.enter_frame();
    browser.wait("the frame", "return document.body.innerText.includes('inside');");
    let complaints = browser.complaints().join("\n");
    // Firefox writes it with hyphens.
    let plain = complaints.replace("Content-Security-Policy", "Content Security Policy");
    assert!(
        plain.contains("Content Security Policy"),
        "not noticed: {complaints:?}"
    );
}

/// Whether a process was started with a path among its arguments. One that has ended has none.
fn runs_with(path: &Path) -> bool {
    let path = path
        .to_str()
        .expect("temporary folders have plain names")
        .to_owned();
    let processes = std::fs::read_dir("/proc")
        .expect("Linux lists its processes")
        .flatten();
    let mut arguments = processes.filter_map(|process| std::fs::read(process.path().join("cmdline")).ok());
    arguments.any(|arguments| String::from_utf8_lossy(&arguments).contains(&path))
}

#[test]
fn nothing_is_left_by_a_test_that_panics() {
    let browser = Browser::start();
    let folder = browser.folder();
    assert!(
        folder.exists() && runs_with(&folder),
        "the browser runs with its folder"
    );
    let test = std::thread::spawn(move || {
        let _browser = browser;
        panic!("on purpose, to see what is left behind");
    });
    assert!(test.join().is_err());
    assert!(!folder.exists(), "{} is left", folder.display());
    assert!(!runs_with(&folder), "a process is left");
}
