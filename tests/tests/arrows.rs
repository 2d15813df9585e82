//! What must never appear where: the arrows and the house rules, read from the sources and the dependencies.

use aftercount_core::demo::DEMO;
use aftercount_core::keys::KEYS;
use aftercount_tests::tables::{project, project_text};
use cargo_metadata::{DependencyKind, Metadata, MetadataCommand, Package};
use std::collections::BTreeSet;
use std::path::{Path, PathBuf};

#[path = "../../www/src/sides.rs"]
mod sides;

fn metadata() -> Metadata {
    MetadataCommand::new()
        .manifest_path(project().join("Cargo.toml"))
        .exec()
        .expect("cargo metadata runs")
}

fn package<'a>(metadata: &'a Metadata, name: &str) -> &'a Package {
    metadata
        .workspace_packages()
        .into_iter()
        .find(|package| package.name.as_str() == name)
        .expect(name)
}

/// The names of a package's direct dependencies of one kind.
fn direct(metadata: &Metadata, name: &str, kind: DependencyKind) -> BTreeSet<String> {
    let of_kind = package(metadata, name)
        .dependencies
        .iter()
        .filter(|dependency| dependency.kind == kind);
    of_kind.map(|dependency| dependency.name.to_string()).collect()
}

/// Everything that a package is built with on any target, its own name left out.
fn all_dependencies(metadata: &Metadata, name: &str) -> BTreeSet<String> {
    let nodes = &metadata.resolve.as_ref().expect("a resolved graph").nodes;
    let mut open = vec![package(metadata, name).id.clone()];
    let mut seen = BTreeSet::new();
    while let Some(id) = open.pop() {
        let node = nodes
            .iter()
            .find(|node| node.id == id)
            .expect("a node for each package");
        let built = node.deps.iter().filter(|dep| {
            dep.dep_kinds
                .iter()
                .any(|k| k.kind != DependencyKind::Development)
        });
        for dependency in built {
            if seen.insert(dependency.pkg.clone()) {
                open.push(dependency.pkg.clone());
            }
        }
    }
    metadata
        .packages
        .iter()
        .filter(|p| seen.contains(&p.id))
        .map(|p| p.name.to_string())
        .collect()
}

/// The files of a folder and of those in it that end so, build output left out.
fn files(folder: &str, endings: &[&str]) -> Vec<PathBuf> {
    let mut open = vec![project().join(folder)];
    let mut found = Vec::new();
    while let Some(folder) = open.pop() {
        for entry in std::fs::read_dir(&folder).unwrap_or_else(|why| panic!("{}: {why}", folder.display())) {
            let path = entry.expect("an entry").path();
            let name = path.file_name().expect("a name").to_string_lossy().into_owned();
            if path.is_dir()
                && !name.starts_with("target")
                && !name.starts_with('.')
                && name != "node_modules"
            {
                open.push(path);
            } else if path.is_file() && endings.iter().any(|ending| name.ends_with(ending)) {
                found.push(path);
            }
        }
    }
    found.sort();
    found
}

fn text_of(path: &Path) -> String {
    std::fs::read_to_string(path).unwrap_or_else(|why| panic!("{}: {why}", path.display()))
}

/// The lines of the core's sources that hold one of the words, comments left out.
fn core_lines_with(words: &[&str]) -> Vec<String> {
    let mut found = Vec::new();
    for path in files("core/src", &[".rs"]) {
        for (at, line) in text_of(&path).lines().enumerate() {
            let code = line.split("//").next().unwrap_or_default();
            if words.iter().any(|word| code.contains(word)) {
                found.push(format!("{}:{}: {}", path.display(), at + 1, line.trim()));
            }
        }
    }
    found
}

#[test]
fn the_core_knows_no_browser_and_no_machine() {
    let metadata = metadata();
    let all = all_dependencies(&metadata, "aftercount-core");
    assert!(all.contains("libm"), "the walk finds what is there: {all:?}");
    for barred in [
        "web-sys",
        "js-sys",
        "wasm-bindgen",
        "plotters",
        "getrandom",
        "rayon",
        "tokio",
        "aftercount-web",
    ] {
        assert!(!all.contains(barred), "the core is built with {barred}");
    }
    let dev = direct(&metadata, "aftercount-core", DependencyKind::Development);
    assert_eq!(
        dev,
        BTreeSet::new(),
        "the batch door would wait for these to compile"
    );
    let words = [
        "std::time",
        "std::fs",
        "std::thread",
        "std::net",
        "std::env",
        "std::process",
        "std::io",
        "HashMap",
        "HashSet",
        "SystemTime",
        "Instant::",
        "thread_local",
        "unsafe ",
        "println!",
        "static mut",
    ];
    assert_eq!(core_lines_with(&words), Vec::<String>::new());
}

/// std's transcendental functions differ in their last bits from machine to machine, and `powi` and `mul_add` with how
/// they are compiled. Clippy bans them by type; this test holds the ban itself, and looks for the plainest ways past it.
#[test]
fn the_core_calls_no_function_whose_bits_differ() {
    let banned = project_text("core/.clippy.toml");
    let functions = [
        "exp", "exp2", "exp_m1", "ln", "ln_1p", "log", "log2", "log10", "powf", "powi", "sin", "cos", "tan",
        "asin", "acos", "atan", "atan2", "sinh", "cosh", "tanh", "asinh", "acosh", "atanh", "cbrt", "hypot",
        "mul_add",
    ];
    for function in functions {
        assert!(
            banned.contains(&format!("\"f64::{function}\"")),
            "core/.clippy.toml lets f64::{function} through"
        );
        let called = format!("f64::{function}(");
        assert_eq!(core_lines_with(&[called.as_str()]), Vec::<String>::new());
    }
    let mut past_it = core_lines_with(&["disallowed_methods", "disallowed_types", "f32"]);
    // serde's trait asks for a way to write one, which is none, as no answer holds any.
    past_it.retain(|line| !line.contains("serialize_f32("));
    assert_eq!(past_it, Vec::<String>::new());
}

#[test]
fn arrows_point_one_way() {
    let metadata = metadata();
    let ours = |name: &str| -> BTreeSet<String> {
        let mut direct = direct(&metadata, name, DependencyKind::Normal);
        direct.retain(|dependency| dependency.starts_with("aftercount"));
        direct
    };
    assert_eq!(ours("aftercount-core"), BTreeSet::new());
    assert_eq!(
        ours("aftercount-web"),
        BTreeSet::from(["aftercount-core".to_owned()])
    );
    assert_eq!(
        ours("aftercount-www"),
        BTreeSet::new(),
        "www builds web; it is not built with it"
    );
}

#[test]
fn the_two_halves_of_wasm_bindgen_are_pinned_to_one_version() {
    let metadata = metadata();
    let pinned = |name: &str, dependency: &str| {
        let found = package(&metadata, name)
            .dependencies
            .iter()
            .find(|found| found.name == dependency);
        found
            .unwrap_or_else(|| panic!("{name} uses {dependency}"))
            .req
            .to_string()
    };
    let web = pinned("aftercount-web", "wasm-bindgen");
    assert!(web.starts_with('='), "{web}");
    assert_eq!(web, pinned("aftercount-www", "wasm-bindgen-cli-support"));
}

/// Scripts start the program and hand texts to it; all else is Rust. The last is an example of a page that is not ours.
#[test]
fn the_only_scripts_are_short_ones() {
    let allowed = [
        ("www/interface/aftercount.d.ts", 180),
        ("www/interface/example.js", 40),
        ("www/interface/loader.js", 60),
        ("www/page/boot.js", 80),
    ];
    let scripts = files("", &[".js", ".mjs", ".cjs", ".ts", ".jsx", ".tsx"]);
    assert_eq!(scripts, allowed.map(|(script, _)| project().join(script)));
    for (script, most) in allowed {
        let lines = project_text(script).lines().count();
        assert!((1..=most).contains(&lines), "{script} has {lines} lines");
    }
}

/// The types of the interface for scripts name every key of an answer, and no other.
#[test]
fn the_types_of_the_interface_are_those_of_an_answer() {
    let types = project_text("www/interface/aftercount.d.ts");
    let mut known = BTreeSet::new();
    for link in [
        DEMO,
        "x.start=1,000",
        "x.start=600?&x.rate=1&y.start=400&y.rate=1&sothat=y.breaks",
        "x.start=600?&x.rate=1&y.start=400&y.rate=1&sothat=x.breaks,x.holds",
        "x.start=600?&x.rate=1&y.start=400?&y.rate=1&sothat=y.breaks,x.breaks",
        "x.start=600?&x.rate=1&y.start=400?&y.rate=1&sothat=y.breaks",
        "x.start=600?500..700&x.rate=1e-3&y.start=400&y.rate=1e-3&until=1&sothat=time:..0.5",
    ] {
        let answer = aftercount_tests::tables::answer(link);
        let mut open = vec![&answer];
        while let Some(value) = open.pop() {
            if let Some(object) = value.as_object() {
                known.extend(object.keys().cloned());
                open.extend(object.values());
            }
            open.extend(value.as_array().into_iter().flatten());
        }
    }
    // What the interface adds, and what only an answer that was ended early has.
    known.extend(["sentence", "marking", "link", "text_mark", "cut_short"].map(str::to_owned));
    let (_, of_answers) = types.split_once("interface AftercountWords").expect("its type");
    let comments = |line: &&str| !line.trim_start().starts_with("/**");
    let named: BTreeSet<String> = of_answers
        .lines()
        .filter(comments)
        .flat_map(|line| line.split(['{', ';', ' ']))
        .filter_map(|word| word.strip_suffix(':'))
        .map(|word| word.trim_end_matches('?').to_owned())
        .collect();
    assert_eq!(named, known);
}

#[test]
fn pages_hold_no_script_of_their_own() {
    let pages = files("www", &[".html"]);
    assert!(pages.contains(&project().join("www/page/index.html")));
    for path in pages {
        let page = text_of(&path).to_lowercase();
        for piece in page.split("<script").skip(1) {
            let body = piece
                .split_once('>')
                .expect("a tag ends")
                .1
                .split("</script")
                .next()
                .expect("a body")
                .trim();
            let placeholder = body.is_empty() || (body.starts_with("{{") && body.ends_with("}}"));
            assert!(placeholder, "{}: {body}", path.display());
        }
        assert!(!page.contains("javascript:"), "{}", path.display());
        let handler = page
            .split_whitespace()
            .find(|word| word.starts_with("on") && word.contains("=\""));
        assert_eq!(handler, None, "{}", path.display());
    }
}

/// Nothing that the page is made of may name an address to load from.
#[test]
fn the_page_names_no_address() {
    for path in files("www", &[".html", ".css", ".js"]) {
        let text = text_of(&path);
        for scheme in ["http:", "https:", "ws:", "wss:", "@import", "src=\"/", "url(//"] {
            let found: Vec<&str> = text
                .lines()
                .filter(|line| line.contains(scheme) && !line.contains("http://www.w3.org/"))
                .collect();
            assert_eq!(found, Vec::<&str>::new(), "{}", path.display());
        }
    }
}

/// What the tests take from npm comes from wherever npm is set up to look: the lock holds a digest and no address.
#[test]
fn the_lock_of_npm_names_no_address() {
    let lock = project_text("tests/package-lock.json");
    assert!(lock.contains("\"integrity\": \"sha512-"), "no digest: {lock}");
    assert!(!lock.contains("\"resolved\"") && !lock.contains("://"), "{lock}");
}

/// Keys that no field is for: the version, and the view that a frame asks for.
const WITHOUT_FIELD: &[&str] = &["v", "view"];

/// The field of every key that is worked out bears the key's name, and the label of the table of keys.
#[test]
fn labels_of_the_form_are_those_of_the_table() {
    let page = sides::with_sides(
        &project_text("www/page/index.html"),
        &project_text("www/page/side.html"),
    );
    for key in KEYS
        .iter()
        .filter(|key| key.worked_out && !WITHOUT_FIELD.contains(&key.name))
    {
        for letter in ["x", "y"] {
            let name = key.on(letter);
            assert!(
                page.contains(&format!("name=\"{name}\"")),
                "the form has no field {name}"
            );
            let label = page
                .split("<label")
                .find(|piece| piece.contains(&format!("for=\"{name}\"")));
            let label = label.unwrap_or_else(|| panic!("{name} has no label"));
            let words = label
                .split("</label>")
                .next()
                .and_then(|tag| tag.split_once('>'))
                .map(|tag| plain(tag.1));
            assert_eq!(words.as_deref(), Some(key.label), "the label of {name}");
        }
    }
}

/// The text of a piece of HTML, its tags left out and its blanks drawn together.
fn plain(html: &str) -> String {
    let text: String = html
        .split('<')
        .map(|piece| piece.split_once('>').map_or(piece, |tag| tag.1))
        .collect();
    text.replace("&amp;", "&")
        .split_whitespace()
        .collect::<Vec<_>>()
        .join(" ")
}

/// The README's table names each key that is worked out, with the meaning and the default of the table of keys.
#[test]
fn the_readme_has_the_table_of_keys() {
    let readme = project_text("README.md");
    let row_of = |name: &str| {
        let named = format!("`{name}`");
        let is_row =
            |line: &&str| line.starts_with('|') && line.split('|').nth(1).is_some_and(|c| c.contains(&named));
        readme
            .lines()
            .find(is_row)
            .unwrap_or_else(|| panic!("the README's table lacks {name}"))
    };
    for key in KEYS.iter().filter(|key| key.worked_out) {
        let row = row_of(&key.on("x"));
        assert!(row.contains(key.meaning), "{row} should say: {}", key.meaning);
        assert!(
            key.default.is_none_or(|default| row.contains(default)),
            "{row} should have {:?}",
            key.default
        );
    }
}
