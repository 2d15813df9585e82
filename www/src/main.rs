//! Builds Aftercount's page into one file.
//!
//! `cargo run -p aftercount-www` compiles the web crate to WebAssembly, puts it with its glue, the boot script, the
//! style sheet and the licence notices into `www/page/index.html`, and writes `aftercount.html` and an example wiki
//! page that frames it to `page/` in Cargo's target directory. Beside them it writes `aftercount.js`, the same program for
//! pages with scripts of their own, with an example. `--no-open` keeps the result from being opened.

mod inline;
mod licences;
mod open;
mod pack;
mod policy;
mod sides;
mod sizes;
mod tighten;
mod toolchain;
mod wasm;
mod workspace;

use std::fs;
use std::path::{Path, PathBuf};
use std::process::ExitCode;

use anyhow::{Context, Result, bail};
use base64::Engine as _;
use base64::engine::general_purpose::STANDARD as BASE64;
use sha2::{Digest, Sha256};

use crate::sizes::{Limits, Sizes};
use crate::workspace::Workspace;

/// What the page may weigh: it is mailed, and carried over on discs.
const LIMITS: Limits = Limits {
    raw: 900_000,
    gzipped: 350_000,
};

const USAGE: &str = "cargo run -p aftercount-www [-- --no-open]\n\n\
    Builds the page into one file. --no-open: do not show it afterwards.";

fn main() -> ExitCode {
    match run() {
        Ok(()) => ExitCode::SUCCESS,
        Err(error) => {
            eprintln!("error: {error:#}");
            ExitCode::FAILURE
        }
    }
}

fn run() -> Result<()> {
    let mut show = true;
    for argument in std::env::args().skip(1) {
        match argument.as_str() {
            "--no-open" => show = false,
            "--help" | "-h" => {
                println!("{USAGE}");
                return Ok(());
            }
            other => bail!("`{other}` is not understood\n\n{USAGE}"),
        }
    }
    let workspace = Workspace::find()?;
    let built = build(&workspace)?;
    let written = write(&workspace, &built)?;
    let sizes = Sizes::of(built.page.as_bytes())?;
    println!("{}  {sizes}", written[0].display());
    for further in &written[1..] {
        println!("{}", further.display());
    }
    sizes.check(LIMITS)?;
    if show {
        open::show(&written[0]);
    }
    Ok(())
}

/// What is made of the program.
struct Finished {
    /// The page.
    page: String,
    /// The script for other pages.
    script: String,
}

/// The finished page and script as texts.
fn build(workspace: &Workspace) -> Result<Finished> {
    toolchain::ensure_wasm_target()?;
    let built = wasm::build(workspace)?;
    let bound = wasm::bind(&built.program, "wasm_bindgen")?;
    let unpacker = wasm::bind(&built.unpacker, "unpacker")?;
    let licences = licences::notices(workspace, &built.packages)?;

    let sheet = read(&workspace.page_source("index.html"))?;
    let template = sides::with_sides(&sheet, &read(&workspace.page_source("side.html"))?);
    let template = tighten::page(&template)?;
    let style = tighten::style(&style(workspace)?);
    let boot = tighten::script("boot.js", &read(&workspace.page_source("boot.js"))?)?;
    inline::check("the style sheet", &style)?;
    inline::check("boot.js", &boot)?;
    inline::check("the glue", &bound.glue)?;

    inline::check("the unpacker's glue", &unpacker.glue)?;

    // Packed, since base64 makes it a third larger again; what unpacks it stands before it as it is.
    let encoded = BASE64.encode(pack::packed(&bound.wasm)?);
    let first = pack::hex(&unpacker.wasm);
    let version = version(&[
        template.as_bytes(),
        style.as_bytes(),
        boot.as_bytes(),
        bound.glue.as_bytes(),
        &bound.wasm,
        unpacker.glue.as_bytes(),
        &unpacker.wasm,
    ]);
    let filled = inline::fill(
        &template,
        &[
            ("style", &style),
            ("wasm", &encoded),
            ("unpacker", &first),
            ("unpacker-glue", &unpacker.glue),
            ("glue", &bound.glue),
            ("boot", &boot),
            ("version", &version),
            ("licences", &licences),
            // Stands until the rest is in place, since the policy is a digest of it.
            ("policy", "{{policy}}"),
        ],
    )?;
    let policy = policy::policy(&filled)?;
    let script = inline::fill(
        &read(&workspace.interface_source("loader.js"))?,
        &[
            ("wasm", &encoded),
            ("unpacker", &first),
            ("unpacker-glue", &unpacker.glue),
            ("glue", &bound.glue),
            ("version", &version),
            // The notices stand in a comment there, as plain text.
            ("licences", &inline::in_comment(&licences)),
        ],
    )?;
    // Only once: the text above is free to contain the same letters.
    let page = filled.replacen("{{policy}}", &policy, 1);
    Ok(Finished { page, script })
}

/// The files of the style sheet, an idea each, in the order in which their rules outdo one another.
const STYLES: [&str; 11] = [
    "colours", "ground", "form", "outcome", "pictures", "takes", "working", "pass", "narrow", "frame",
    "paper",
];

/// The style sheet as one.
fn style(workspace: &Workspace) -> Result<String> {
    let files = STYLES
        .iter()
        .map(|name| read(&workspace.page_source(&format!("style/{name}.css"))));
    files.collect()
}

/// Writes everything, the page first, and says where it lies.
fn write(workspace: &Workspace, built: &Finished) -> Result<Vec<PathBuf>> {
    let folder = workspace.target.join("page");
    fs::create_dir_all(&folder).with_context(|| format!("cannot make {}", folder.display()))?;
    let wiki = read(&workspace.page_source("wiki.html"))?;
    let types = read(&workspace.interface_source("aftercount.d.ts"))?;
    let example = read(&workspace.interface_source("example.html"))?;
    let its_script = read(&workspace.interface_source("example.js"))?;
    let files = [
        ("aftercount.html", &built.page),
        ("wiki.html", &wiki),
        ("aftercount.js", &built.script),
        ("aftercount.d.ts", &types),
        ("interface.html", &example),
        ("interface.js", &its_script),
    ];
    let put = |(name, text): (&str, &String)| {
        let path = folder.join(name);
        fs::write(&path, text).with_context(|| format!("cannot write {}", path.display()))?;
        Ok(path)
    };
    files.into_iter().map(put).collect()
}

fn read(path: &Path) -> Result<String> {
    fs::read_to_string(path).with_context(|| format!("cannot read {}", path.display()))
}

/// The crate's version and a short fingerprint of everything inside, so that two copies can be told apart.
fn version(parts: &[&[u8]]) -> String {
    let mut digest = Sha256::new();
    for part in parts {
        digest.update((part.len() as u64).to_le_bytes());
        digest.update(part);
    }
    let fingerprint: String = digest
        .finalize()
        .iter()
        .take(4)
        .map(|byte| format!("{byte:02x}"))
        .collect();
    format!("{}-{fingerprint}", env!("CARGO_PKG_VERSION"))
}

#[cfg(test)]
mod tests {
    use super::version;

    #[test]
    fn boot_script_stays_small() {
        // All that the page does beyond starting is Rust.
        let lines = include_str!("../page/boot.js").lines().count();
        assert!(lines <= 80, "{lines} lines");
    }

    #[test]
    fn version_tells_builds_apart() {
        assert_eq!(version(&[b"one", b"two"]), version(&[b"one", b"two"]));
        assert_ne!(version(&[b"one", b"two"]), version(&[b"onet", b"wo"]));
        assert!(version(&[]).starts_with(concat!(env!("CARGO_PKG_VERSION"), "-")));
    }
}
