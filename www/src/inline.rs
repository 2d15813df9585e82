//! Puts texts into the places that a template keeps for them.

use anyhow::{Result, bail};

/// Refuses a script or style that would not survive inside an HTML element as it is.
///
/// `</script` and `</style` would end the element early, `<!--` turns a script into one that swallows the rest of the
/// page, and HTML reads a carriage return as a line feed, so that the browser's digest would differ from ours.
pub(crate) fn check(name: &str, text: &str) -> Result<()> {
    let lower = text.to_ascii_lowercase();
    for unsafe_text in ["</script", "</style", "<!--", "\r"] {
        if let Some(at) = lower.find(unsafe_text) {
            let line = lower[..at].matches('\n').count() + 1;
            bail!("{name}, line {line}: {unsafe_text:?} cannot stand in a page's script or style");
        }
    }
    Ok(())
}

/// Fills each `{{name}}` of the template with the value of that name.
///
/// One pass: what is filled in is never searched for further names. Fails on a name without a value and on a value
/// that no name asks for, since either means that the template and the builder no longer fit.
pub(crate) fn fill(template: &str, values: &[(&str, &str)]) -> Result<String> {
    let room = template.len() + values.iter().map(|(_, value)| value.len()).sum::<usize>();
    let mut page = String::with_capacity(room);
    let mut used = vec![false; values.len()];
    let mut rest = template;
    while let Some((before, after)) = rest.split_once("{{") {
        let Some((name, after)) = after.split_once("}}") else {
            bail!("the template opens a name with `{{{{` and does not close it");
        };
        let Some(index) = values.iter().position(|(known, _)| *known == name) else {
            bail!("the template asks for `{name}`, which the builder does not know");
        };
        used[index] = true;
        page.push_str(before);
        page.push_str(values[index].1);
        rest = after;
    }
    page.push_str(rest);
    if let Some(index) = used.iter().position(|used| !used) {
        bail!("the template has no place for `{}`", values[index].0);
    }
    Ok(page)
}

/// Text as HTML, for an element's content or a quoted attribute.
pub(crate) fn escape(text: &str) -> String {
    text.replace('&', "&amp;")
        .replace('<', "&lt;")
        .replace('>', "&gt;")
        .replace('"', "&quot;")
}

/// The text that [`escape`] was given, as it may stand in a comment of a script.
pub(crate) fn in_comment(html: &str) -> String {
    let text = html
        .replace("&quot;", "\"")
        .replace("&gt;", ">")
        .replace("&lt;", "<")
        .replace("&amp;", "&");
    text.replace("*/", "* /")
}

#[cfg(test)]
mod tests {
    use super::{check, escape, fill, in_comment};

    #[test]
    fn a_comment_is_not_ended_by_what_stands_in_it() {
        assert_eq!(
            in_comment(&escape("a <b> & \"c\" */ &lt;")),
            "a <b> & \"c\" * / &lt;"
        );
    }

    #[test]
    fn refuses_what_would_break_out() {
        for bad in [
            "let a = '</script>'",
            "'</SCRIPT'",
            "a <!-- b",
            "a\r\nb",
            "a\rb",
            "p{} </style>",
        ] {
            assert!(check("a file", bad).is_err(), "{bad:?} was let through");
        }
        check(
            "a file",
            "let a = b < c && c > d; // <script> and --> are harmless\n",
        )
        .expect("harmless");
    }

    #[test]
    fn refusal_names_file_and_line() {
        let error = check("boot.js", "one\ntwo\n  </script").expect_err("must be refused");
        assert!(error.to_string().starts_with("boot.js, line 3:"), "{error}");
    }

    #[test]
    fn fills_in_one_pass() {
        let page = fill("<{{a}}|{{b}}|{{a}}>", &[("a", "{{b}}"), ("b", "2")]).expect("fits");
        assert_eq!(page, "<{{b}}|2|{{b}}>");
    }

    #[test]
    fn template_and_values_must_fit() {
        assert!(fill("{{a}}", &[]).is_err());
        assert!(fill("none", &[("a", "1")]).is_err());
        assert!(fill("{{a", &[("a", "1")]).is_err());
    }

    #[test]
    fn escapes() {
        assert_eq!(escape("<a href=\"x&y\">"), "&lt;a href=&quot;x&amp;y&quot;&gt;");
    }
}
