//! Sees to it that the compiler can make WebAssembly.

use std::ffi::OsString;
use std::path::PathBuf;
use std::process::Command;

use anyhow::{Context, Result, bail, ensure};

/// The target that browsers run.
pub(crate) const TARGET: &str = "wasm32-unknown-unknown";

/// Adds the WebAssembly target where it is missing.
///
/// Fails with what to install where there is no rustup, or it cannot fetch the target.
pub(crate) fn ensure_wasm_target() -> Result<()> {
    if has_target()? {
        return Ok(());
    }
    println!("The compiler lacks the target {TARGET}: adding it with rustup.");
    let help = format!(
        "Aftercount's page needs Rust's standard library for {TARGET}. With rustup and a network: `rustup target add \
         {TARGET}`. Without rustup: install your distribution's package for it (Debian: libstd-rust-dev-wasm32)."
    );
    match Command::new("rustup").args(["target", "add", TARGET]).status() {
        Ok(status) if status.success() => {}
        Ok(status) => bail!("rustup failed ({status}). {help}"),
        Err(error) => bail!("rustup did not start ({error}). {help}"),
    }
    ensure!(
        has_target()?,
        "rustup added the target to another toolchain than the one in use. {help}"
    );
    Ok(())
}

/// The compiler in use.
pub(crate) fn rustc() -> Command {
    Command::new(std::env::var_os("RUSTC").unwrap_or_else(|| OsString::from("rustc")))
}

/// What `rustc --print` says.
pub(crate) fn rustc_prints(arguments: &[&str]) -> Result<String> {
    let output = rustc().args(arguments).output().context("rustc did not start")?;
    ensure!(
        output.status.success(),
        "rustc {arguments:?}: {}",
        String::from_utf8_lossy(&output.stderr)
    );
    Ok(String::from_utf8(output.stdout)?.trim().to_owned())
}

/// Looks for the core library itself: rustc names a folder also where nothing is installed in it.
fn has_target() -> Result<bool> {
    let folder = PathBuf::from(rustc_prints(&["--print", "target-libdir", "--target", TARGET])?);
    let Ok(entries) = folder.read_dir() else {
        return Ok(false);
    };
    Ok(entries
        .flatten()
        .any(|entry| entry.file_name().to_string_lossy().starts_with("libcore-")))
}
