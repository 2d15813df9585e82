//! The page's Content-Security-Policy: nothing but what the file itself holds, named by digest.

use anyhow::{Context, Result, bail, ensure};
use base64::Engine as _;
use base64::engine::general_purpose::STANDARD as BASE64;
use sha2::{Digest, Sha256};

/// The policy for a page whose scripts and styles are all in place.
///
/// The digests are taken from the page as it will be read, so they hold whatever blanks the template puts around a
/// text. Fails where the page has a script or style that it would have to fetch.
pub(crate) fn policy(page: &str) -> Result<String> {
    let scripts = elements(page, "script")?;
    let styles = elements(page, "style")?;
    ensure!(!scripts.is_empty(), "the page has no script");
    ensure!(!styles.is_empty(), "the page has no style");
    let mut allowed = Vec::new();
    for script in &scripts {
        if script.attributes.contains("src=") {
            bail!("a script with src= would be fetched; the page must hold it");
        }
        if script.is_code() {
            allowed.push(source(script.text));
        }
    }
    let scripts = allowed.join(" ");
    let styles = styles
        .iter()
        .map(|style| source(style.text))
        .collect::<Vec<_>>()
        .join(" ");
    Ok(format!(
        "default-src 'none'; script-src {scripts} 'wasm-unsafe-eval'; style-src {styles}; img-src data: blob:; \
         connect-src 'none'; base-uri 'none'; form-action 'none'"
    ))
}

/// A digest as the policy writes it.
fn source(text: &str) -> String {
    format!("'sha256-{}'", BASE64.encode(Sha256::digest(text.as_bytes())))
}

struct Element<'page> {
    attributes: &'page str,
    text: &'page str,
}

impl Element<'_> {
    /// Whether a browser would run it: a script of another type is only data.
    fn is_code(&self) -> bool {
        !self
            .attributes
            .split_ascii_whitespace()
            .any(|attribute| attribute.starts_with("type="))
    }
}

/// All elements of a raw-text kind (`script`, `style`), in order.
fn elements<'page>(page: &'page str, kind: &str) -> Result<Vec<Element<'page>>> {
    let (open, close) = (format!("<{kind}"), format!("</{kind}>"));
    let mut found = Vec::new();
    let mut rest = page;
    while let Some((_, after)) = rest.split_once(&open) {
        // `<script` followed by a letter is another element, and inside a script it is only text.
        if !after.starts_with(['>', ' ', '\n']) {
            rest = after;
            continue;
        }
        let (attributes, after) = after
            .split_once('>')
            .with_context(|| format!("<{kind} without its end"))?;
        let (text, after) = after
            .split_once(&close)
            .with_context(|| format!("<{kind}> without {close}"))?;
        found.push(Element { attributes, text });
        rest = after;
    }
    Ok(found)
}

#[cfg(test)]
mod tests {
    use super::{elements, policy, source};

    #[test]
    fn digest_is_that_of_the_standard() {
        // The example of the W3C's "Content Security Policy Level 3", §8.3: "alert('Hello, world.');".
        let expected = "'sha256-qznLcsROx4GACP2dm0UCKCzCG+HiZ1guq6ZZDob/Tng='";
        assert_eq!(source("alert('Hello, world.');"), expected);
    }

    #[test]
    fn every_code_and_no_data_is_named() {
        let page = "<style>\np{}\n</style><script type=\"application/wasm-base64\" id=\"wasm\">AA</script>\
                    <script id=\"glue\">one</script><script>two</script>";
        let policy = policy(page).expect("a sound page");
        for text in ["one", "two", "\np{}\n"] {
            assert!(
                policy.contains(&source(text)),
                "{text:?} is missing from {policy}"
            );
        }
        assert!(!policy.contains(&source("AA")));
        assert!(!policy.contains("unsafe-inline") && policy.starts_with("default-src 'none'"));
    }

    #[test]
    fn what_would_be_fetched_is_refused() {
        assert!(policy("<style></style><script src=\"a.js\"></script>").is_err());
        assert!(policy("<style></style>").is_err());
        assert!(policy("<style></style><script>never closed").is_err());
    }

    #[test]
    fn longer_names_are_other_elements() {
        assert!(
            elements("<scripture>x</scripture>", "script")
                .expect("sound")
                .is_empty()
        );
    }
}
