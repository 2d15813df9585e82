//! The licence notices of everything inside the page.
//!
//! Most packages offer the MIT licence, and its text differs between them in the copyright lines only: those are
//! listed by package, and the text follows once. Whatever else a package says is given as it stands, once for all
//! packages that say the same.

use std::collections::BTreeMap;
use std::fs;
use std::path::Path;

use anyhow::{Context, Result};
use cargo_metadata::{Package, PackageId};

use crate::inline::escape;
use crate::toolchain::rustc_prints;
use crate::workspace::Workspace;

/// Where the text of the MIT licence begins; above it stand a title and the copyright lines.
const MIT_BEGINS: &str = "Permission is hereby granted";

/// Shorter than any licence: what the archive of a package holds where its author had put a symbolic link.
const SHORTEST_TEXT: usize = 200;

/// What there is to say, as text of HTML whose line breaks matter.
pub(crate) fn notices(workspace: &Workspace, inside: &[PackageId]) -> Result<String> {
    let own = fs::read_to_string(workspace.root.join("LICENSE"))
        .context("the workspace's LICENSE cannot be read")?;
    let (own_lines, mit) = split_mit(&own).context("the workspace's LICENSE is not the MIT licence")?;
    let mut notices = Notices {
        mit: letters(mit),
        lines: Vec::new(),
        others: BTreeMap::new(),
    };
    notices.lines.push(format!("Aftercount: {own_lines}"));
    // The compiler's own libraries are inside too, and are no package of Cargo's.
    let rust = rustc_prints(&["--version"])?;
    notices.lines.push(format!(
        "Rust's standard library ({rust}), MIT OR Apache-2.0: Copyright (c) The Rust Project Contributors"
    ));
    let mut packages: Vec<&Package> = inside.iter().filter_map(|id| find(workspace, id)).collect();
    packages.sort_by_key(|package| (&package.name, &package.version));
    packages.dedup_by_key(|package| &package.id);
    for package in packages {
        notices.add(package);
    }
    Ok(escape(&notices.text(mit)))
}

/// A package from elsewhere, by its identity.
fn find<'a>(workspace: &'a Workspace, id: &PackageId) -> Option<&'a Package> {
    workspace
        .metadata
        .packages
        .iter()
        .find(|package| package.id == *id && package.source.is_some())
}

struct Notices {
    /// The MIT licence, by its letters alone.
    mit: String,
    /// A line for each package, with its copyright lines where the MIT licence is all else that there is to say.
    lines: Vec<String>,
    /// Further texts, each with the packages it belongs to.
    others: BTreeMap<String, Vec<String>>,
}

impl Notices {
    fn add(&mut self, package: &Package) {
        let name = format!("{} {}", package.name, package.version);
        let licence = package.license.as_deref().unwrap_or("see below");
        let mut credits = Vec::new();
        let folder = package.manifest_path.parent().map(|folder| folder.as_std_path());
        for text in folder
            .map(|folder| texts(folder, &passed_over(licence)))
            .unwrap_or_default()
        {
            match split_mit(&text) {
                Some((lines, body)) if letters(body) == self.mit => credits.push(lines),
                _ => self
                    .others
                    .entry(text.trim().to_owned())
                    .or_default()
                    .push(name.clone()),
            }
        }
        credits.retain(|lines| !lines.is_empty());
        if credits.is_empty() && !package.authors.is_empty() {
            // Their addresses are for mail about the package, not for every reader of a page.
            let names: Vec<&str> = package
                .authors
                .iter()
                .map(|author| before(author, " <"))
                .collect();
            credits.push(format!("by {}", names.join(", ")));
        }
        let credits = if credits.is_empty() {
            "by its contributors".to_owned()
        } else {
            credits.join("; ")
        };
        self.lines.push(format!("{name}, {licence}: {credits}"));
    }

    fn text(&self, mit: &str) -> String {
        let mut text = format!(
            "{}\n\nThe MIT licence:\n\n{}\n",
            self.lines.join("\n"),
            mit.trim()
        );
        for (other, packages) in &self.others {
            text.push_str(&format!("\nWith {}:\n\n{other}\n", packages.join(", ")));
        }
        text
    }
}

fn before<'a>(text: &'a str, mark: &str) -> &'a str {
    text.split_once(mark).map_or(text, |(before, _)| before)
}

/// The licences that need not be given once the MIT licence is chosen where the expression offers it, by the first part
/// of their identifiers in capitals, as files are named.
fn passed_over(licence: &str) -> Vec<String> {
    // The stroke is how Cargo once wrote OR.
    let licence = licence.replace(['(', ')'], "").replace('/', " OR ");
    for group in licence.split(" AND ") {
        let choices: Vec<&str> = group.split(" OR ").map(str::trim).collect();
        if choices.contains(&"MIT") {
            let others = choices.iter().filter(|choice| **choice != "MIT");
            return others
                .map(|choice| before(choice, "-").to_ascii_uppercase())
                .collect();
        }
    }
    Vec::new()
}

/// The licence texts in a package's folder, less those passed over if that of the MIT licence is marked as such.
fn texts(folder: &Path, passed_over: &[String]) -> Vec<String> {
    let Ok(entries) = folder.read_dir() else {
        return Vec::new();
    };
    let mut names: Vec<String> = entries
        .flatten()
        .filter_map(|entry| entry.file_name().into_string().ok())
        .filter(|name| is_licence(name))
        .collect();
    names.sort();
    if names.iter().any(|name| name.to_ascii_uppercase().contains("MIT")) {
        names.retain(|name| {
            !passed_over
                .iter()
                .any(|other| name.to_ascii_uppercase().contains(other))
        });
    }
    let read = |name: &String| fs::read_to_string(folder.join(name)).ok();
    names
        .iter()
        .filter_map(read)
        .map(|text| without_apache(&text.replace('\r', "")))
        .filter(|text| text.len() >= SHORTEST_TEXT)
        .collect()
}

/// A text that holds the MIT licence, and then the whole of the Apache License for those who contribute, without the latter:
/// it is not what this copy is under.
fn without_apache(text: &str) -> String {
    const TITLE: &str = "Apache License";
    const LAST: &str = "limitations under the License.";
    let parts = text.split_once(MIT_BEGINS).and_then(|(_, after)| {
        let (_, apache) = after.split_once(TITLE)?;
        let (_, rest) = apache.split_once(LAST)?;
        let before = text.len() - apache.len() - TITLE.len();
        Some((text[..before].trim_end(), rest.trim_start()))
    });
    match parts {
        Some((before, rest)) => format!("{before}\n(the text of the {TITLE} 2.0 is left out here)\n{rest}"),
        None => text.to_owned(),
    }
}

fn is_licence(name: &str) -> bool {
    let name = name.to_ascii_uppercase();
    ["LICENSE", "LICENCE", "COPYING", "NOTICE", "UNLICENSE"]
        .iter()
        .any(|start| name.starts_with(start))
}

/// Splits a text of the MIT licence into its copyright lines, on one line, and its body.
fn split_mit(text: &str) -> Option<(String, &str)> {
    let (head, body) = text.split_at(text.find(MIT_BEGINS)?);
    let is_title =
        |line: &str| line.to_ascii_lowercase().contains("mit license") && !line.contains("Copyright");
    let lines: Vec<&str> = head
        .lines()
        .map(str::trim)
        .filter(|line| !line.is_empty() && !is_title(line))
        .collect();
    Some((lines.join("; "), body))
}

/// A text's letters alone, in lower case: line breaks, quotation marks and case vary between copies of one licence.
fn letters(text: &str) -> String {
    text.chars()
        .filter(char::is_ascii_alphanumeric)
        .map(|letter| letter.to_ascii_lowercase())
        .collect()
}

#[cfg(test)]
mod tests {
    use super::{is_licence, letters, passed_over, split_mit, without_apache};

    #[test]
    fn the_licence_of_contributions_is_left_out_beside_that_of_the_copy() {
        let apache = "   Apache License\n   Version 2.0\n\n long text; the Apache License again\n limitations under the License.";
        let both = format!(
            "Available under MIT:\n\nPermission is hereby granted, free\n---\n{apache}\n---\nCopyright A. Maker"
        );
        assert_eq!(
            without_apache(&both),
            "Available under MIT:\n\nPermission is hereby granted, free\n---\n\
             (the text of the Apache License 2.0 is left out here)\n---\nCopyright A. Maker"
        );
        for whole in [
            apache,
            "Permission is hereby granted, free",
            "Permission is hereby granted. Apache License or MIT",
        ] {
            assert_eq!(without_apache(whole), whole);
        }
    }

    #[test]
    fn mit_is_chosen_where_it_may_be() {
        assert_eq!(passed_over("MIT OR Apache-2.0"), ["APACHE"]);
        assert_eq!(passed_over("Apache-2.0/MIT"), ["APACHE"]);
        assert_eq!(passed_over("Zlib OR Apache-2.0 OR MIT"), ["ZLIB", "APACHE"]);
        assert_eq!(passed_over("(MIT OR Apache-2.0) AND Unicode-3.0"), ["APACHE"]);
        for nothing in ["MIT", "Apache-2.0", "Apache-2.0 AND MIT", "MIT-0 OR Apache-2.0"] {
            assert!(passed_over(nothing).is_empty(), "{nothing}");
        }
    }

    #[test]
    fn copyright_lines_are_kept_and_the_title_is_not() {
        let text = "The MIT License (MIT)\n\nCopyright (c) 2001 A. Maker\n  Copyright (c) 2002 B. Maker\n\n\
                    Permission is hereby granted, free";
        let (lines, body) = split_mit(text).expect("the text has the beginning");
        assert_eq!(lines, "Copyright (c) 2001 A. Maker; Copyright (c) 2002 B. Maker");
        assert_eq!(body, "Permission is hereby granted, free");
        assert!(split_mit("Apache License").is_none());
    }

    #[test]
    fn layout_makes_no_difference() {
        assert_eq!(
            letters("of this\nsoftware (the \"Software\")"),
            letters("of  this software (the 'software')")
        );
    }

    #[test]
    fn licence_files_are_known_by_name() {
        for yes in ["LICENSE", "LICENSE-MIT", "license.txt", "COPYING", "NOTICE"] {
            assert!(is_licence(yes), "{yes}");
        }
        assert!(!is_licence("README.md"));
    }
}
