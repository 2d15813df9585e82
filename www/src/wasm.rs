//! Compiles the web crate to WebAssembly and makes its JavaScript glue.

use std::collections::{BTreeMap, BTreeSet};
use std::ffi::OsString;
use std::io::BufReader;
use std::path::{Path, PathBuf};
use std::process::{Child, Stdio};

use anyhow::{Context, Result, bail, ensure};
use cargo_metadata::camino::Utf8PathBuf;
use cargo_metadata::{Artifact, Message, PackageId};
use wasm_bindgen_cli_support::Bindgen;

use crate::tighten;
use crate::toolchain::{TARGET, rustc_prints};
use crate::workspace::{Workspace, cargo};

/// The crate that becomes the page's program.
const PROGRAM: &str = "aftercount_web";

/// The one that unpacks it.
const UNPACKER: &str = "aftercount_unpack";

/// Settings from outside that would change the program. The page must be the same whoever builds it.
const DEAF_TO: [&str; 7] = [
    "RUSTFLAGS",
    "CARGO_BUILD_RUSTFLAGS",
    "CARGO_BUILD_TARGET",
    "CARGO_TARGET_WASM32_UNKNOWN_UNKNOWN_RUSTFLAGS",
    "CARGO_INCREMENTAL",
    "RUSTC_WORKSPACE_WRAPPER",
    "RUSTDOCFLAGS",
];

/// What the compiler left.
pub(crate) struct Built {
    /// The program, not yet bound to JavaScript.
    pub(crate) program: PathBuf,
    /// What unpacks it, likewise.
    pub(crate) unpacker: PathBuf,
    /// Every package that was compiled into them.
    pub(crate) packages: Vec<PackageId>,
}

/// The program and the script that ties it to the browser.
pub(crate) struct Bound {
    /// The program's bytes.
    pub(crate) wasm: Vec<u8>,
    /// The script; it declares a variable of the name that it was given.
    pub(crate) glue: String,
}

/// Compiles both crates with the profile `page`.
pub(crate) fn build(workspace: &Workspace) -> Result<Built> {
    let mut command = cargo();
    // A target directory of its own: Cargo would otherwise fill the folder of the finished page, named like the profile.
    command
        .current_dir(&workspace.root)
        .args([
            "build",
            "--package",
            &PROGRAM.replace('_', "-"),
            "--package",
            &UNPACKER.replace('_', "-"),
            "--lib",
            "--target",
            TARGET,
            "--profile",
            "page",
        ])
        .args(["--message-format", "json-render-diagnostics", "--target-dir"])
        .arg(workspace.target.join("wasm"))
        .stdout(Stdio::piped());
    for name in DEAF_TO {
        command.env_remove(name);
    }
    for (name, _) in std::env::vars_os() {
        if name.to_string_lossy().starts_with("CARGO_PROFILE_") {
            command.env_remove(name);
        }
    }
    // This one takes the place of every other setting, those of Cargo's own files among them.
    command.env("CARGO_ENCODED_RUSTFLAGS", flags(workspace)?);
    let mut child = command.spawn().context("cargo did not start")?;
    let artifacts = artifacts(&mut child)?;
    let status = child.wait()?;
    ensure!(status.success(), "the web crate did not compile ({status})");
    gather(artifacts)
}

/// simd128 is in every current browser. The paths of the machine that built it have no place in the page.
fn flags(workspace: &Workspace) -> Result<OsString> {
    let mut flags = OsString::from("-Ctarget-feature=+simd128");
    let sysroot = rustc_prints(&["--print", "sysroot"])?;
    for (from, to) in [
        (sysroot.into(), "rust"),
        (cargo_home().unwrap_or_default(), "cargo"),
        (workspace.root.clone().into_os_string(), "aftercount"),
    ] {
        if !from.is_empty() {
            flags.push("\x1f--remap-path-prefix=");
            flags.push(from);
            flags.push("=");
            flags.push(to);
        }
    }
    Ok(flags)
}

fn cargo_home() -> Option<OsString> {
    std::env::var_os("CARGO_HOME")
        .or_else(|| std::env::home_dir().map(|home| home.join(".cargo").into_os_string()))
}

/// Reads Cargo's messages to their end.
fn artifacts(child: &mut Child) -> Result<Vec<Artifact>> {
    let output = child.stdout.take().context("cargo's output is not to be had")?;
    let mut artifacts = Vec::new();
    for message in Message::parse_stream(BufReader::new(output)) {
        if let Message::CompilerArtifact(artifact) = message.context("cargo's messages cannot be read")? {
            artifacts.push(artifact);
        }
    }
    Ok(artifacts)
}

/// Tells the program and its parts from what only helped to build it, which was compiled for this machine.
fn gather(artifacts: Vec<Artifact>) -> Result<Built> {
    let (mut programs, mut packages) = (Vec::new(), Vec::new());
    for artifact in artifacts {
        let Some(file) = artifact
            .filenames
            .iter()
            .find(|file| file.components().any(|part| part.as_str() == TARGET))
        else {
            continue;
        };
        let is_program = |file: &&Utf8PathBuf| file.extension() == Some("wasm");
        programs.extend(artifact.filenames.iter().find(is_program).cloned());
        if file.extension().is_some() {
            packages.push(artifact.package_id);
        }
    }
    let named = |name: &str| {
        let found = programs.iter().find(|file| file.file_stem() == Some(name));
        found
            .map(|file| file.clone().into_std_path_buf())
            .with_context(|| format!("cargo named no {name}.wasm among what it built"))
    };
    Ok(Built {
        program: named(PROGRAM)?,
        unpacker: named(UNPACKER)?,
        packages,
    })
}

/// Makes the glue for a page without modules, which a file opened from disc cannot load.
///
/// The glue declares a variable `name`, which holds all that the program offers.
pub(crate) fn bind(input: &Path, name: &str) -> Result<Bound> {
    let mut output = Bindgen::new()
        .input_path(input)
        .no_modules(true)?
        .no_modules_global(name)?
        .typescript(false)
        .remove_name_section(true)
        .remove_producers_section(true)
        .generate_output()
        .context("wasm-bindgen failed")?;
    for (package, snippets) in output.snippets() {
        ensure!(
            snippets.is_empty(),
            "{package} brings JavaScript of its own, which the page has no place for"
        );
    }
    let glue = tighten::script("the glue", &redeclarable(output.js(), name)?)?;
    let module = output.wasm_mut();
    let mut names = Names::default();
    for import in module.imports.iter_mut() {
        import.name = names.plain(&import.name);
    }
    Ok(Bound {
        glue: names.put_into(&glue)?,
        wasm: module.emit_wasm(),
    })
}

/// Names of imports without the fingerprints that wasm-bindgen gives them, since glue and program need no telling apart
/// from other ones: what cannot be foretold cannot be packed, and they weighed as much as all the keys.
#[derive(Default)]
struct Names {
    /// Each name that there was, with the one that it has now.
    known: BTreeMap<String, String>,
    taken: BTreeSet<String>,
}

impl Names {
    /// `__wbg_arc_0123456789abcdef` is `arc`; a second one of a name has a number behind it.
    fn plain(&mut self, name: &str) -> String {
        let short = name.strip_prefix("__wbg_").unwrap_or(name);
        let short = match short.rsplit_once('_') {
            Some((short, print)) if is_fingerprint(print) && !short.is_empty() => short,
            _ => short,
        };
        let numbered = (2..).map(|number| format!("{short}{number}"));
        let mut choices = std::iter::once(short.to_owned()).chain(numbered);
        let plain = choices
            .find(|choice| !self.taken.contains(choice))
            .unwrap_or_default();
        self.taken.insert(plain.clone());
        self.known.insert(name.to_owned(), plain.clone());
        plain
    }

    /// Renames in the glue, where each name begins a line of its own.
    fn put_into(&self, glue: &str) -> Result<String> {
        let mut left = self.known.clone();
        let mut renamed = String::with_capacity(glue.len());
        for line in glue.lines() {
            match line
                .split_once(": ")
                .map(|(name, rest)| (left.remove(name), rest))
            {
                Some((Some(plain), rest)) => renamed.extend([&plain, ": ", rest]),
                _ => renamed.push_str(line),
            }
            renamed.push('\n');
        }
        ensure!(left.is_empty(), "the glue has no line for {:?}", left.keys());
        Ok(renamed)
    }
}

fn is_fingerprint(text: &str) -> bool {
    text.len() == 16 && text.bytes().all(|byte| byte.is_ascii_hexdigit())
}

/// Turns the glue's `let` into `var`.
///
/// After a trap the boot script runs the glue's text once more to get an instance with a state of its own; a second
/// `let` of one name would be a syntax error.
fn redeclarable(glue: &str, name: &str) -> Result<String> {
    let from = format!("let {name} =");
    match glue.trim_start().strip_prefix(&from) {
        Some(rest) => Ok(format!("var {name} ={rest}")),
        None => bail!(
            "the glue no longer begins with `{from}`: {:?}",
            glue.chars().take(60).collect::<String>()
        ),
    }
}

#[cfg(test)]
mod tests {
    use super::{Names, redeclarable};

    #[test]
    fn imports_have_plain_names_on_both_sides() {
        let mut names = Names::default();
        for (name, plain) in [
            ("__wbg_arc_df3f7eb77e59876f", "arc"),
            ("__wbg_arc_0000000000000000", "arc2"),
            ("__wbg_arc2_0000000000000001", "arc22"),
            ("__wbg___wbindgen_throw_4c88d8bf264fd984", "__wbindgen_throw"),
            ("__wbindgen_cast_0000000000000001", "__wbindgen_cast"),
            (
                "__wbindgen_init_externref_table",
                "__wbindgen_init_externref_table",
            ),
            ("__wbg_short_df3f", "short_df3f"),
        ] {
            assert_eq!(names.plain(name), plain, "{name}");
        }
        let keys = [
            "__wbg_arc_df3f7eb77e59876f",
            "__wbg_arc_0000000000000000",
            "__wbg_short_df3f",
        ];
        names.known.retain(|name, _| keys.contains(&name.as_str()));
        let glue = "a: 1,\n__wbg_arc_df3f7eb77e59876f: function(a) {\n__wbg_arc_0000000000000000: b: c\n\
                    __wbg_short_df3f: 1\n";
        let renamed = names.put_into(glue).expect("all are there");
        assert_eq!(renamed, "a: 1,\narc: function(a) {\narc2: b: c\nshort_df3f: 1\n");
        assert!(names.put_into("a: 1").is_err(), "an import without its function");
    }

    #[test]
    fn glue_can_run_twice() {
        assert_eq!(
            redeclarable("\n  let wasm_bindgen = 1;", "wasm_bindgen").expect("begins so"),
            "var wasm_bindgen = 1;"
        );
        assert!(redeclarable("const other = 1;", "other").is_err());
    }
}
