//! Where things are.

use std::ffi::OsString;
use std::path::PathBuf;
use std::process::Command;

use anyhow::{Context, Result};
use cargo_metadata::{Metadata, MetadataCommand};

/// Cargo's view of this workspace.
pub(crate) struct Workspace {
    /// The folder of the workspace's `Cargo.toml`.
    pub(crate) root: PathBuf,
    /// Cargo's target directory, wherever the user keeps it.
    pub(crate) target: PathBuf,
    /// All packages in reach, for their licences.
    pub(crate) metadata: Metadata,
}

impl Workspace {
    /// Asks Cargo. Works from any current folder, since it starts from this crate's own.
    pub(crate) fn find() -> Result<Self> {
        let here = std::env::var_os("CARGO_MANIFEST_DIR")
            .unwrap_or_else(|| OsString::from(env!("CARGO_MANIFEST_DIR")));
        let metadata = MetadataCommand::new()
            .cargo_path(cargo_path())
            .manifest_path(PathBuf::from(here).join("Cargo.toml"))
            .exec()
            .context("cargo metadata failed")?;
        let root = metadata.workspace_root.clone().into_std_path_buf();
        let target = metadata.target_directory.clone().into_std_path_buf();
        Ok(Self {
            root,
            target,
            metadata,
        })
    }

    /// A file of the static page.
    pub(crate) fn page_source(&self, name: &str) -> PathBuf {
        self.root.join("www").join("page").join(name)
    }

    /// A file of the interface for scripts of other pages.
    pub(crate) fn interface_source(&self, name: &str) -> PathBuf {
        self.root.join("www").join("interface").join(name)
    }
}

/// The Cargo that started us.
pub(crate) fn cargo() -> Command {
    Command::new(cargo_path())
}

fn cargo_path() -> OsString {
    std::env::var_os("CARGO").unwrap_or_else(|| OsString::from("cargo"))
}
