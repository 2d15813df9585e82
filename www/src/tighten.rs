//! Leaves out of the page what only those need who read its sources: comments, indentation, empty lines.
//!
//! Nothing is renamed or rewritten, and what cannot be judged by these few rules is refused.

use anyhow::{Result, ensure};

/// A style sheet without comments, and with blanks only where they part words.
pub(crate) fn style(css: &str) -> String {
    let mut tight = String::with_capacity(css.len());
    let mut rest = css;
    let mut blank = false;
    while let Some(letter) = rest.chars().next() {
        let length = match letter {
            // As blank as a blank, and like one not always to be left out.
            '/' if rest.starts_with("/*") => rest.find("*/").map_or(rest.len(), |end| end + 2),
            '"' | '\'' => text_length(rest, letter),
            _ => letter.len_utf8(),
        };
        let (part, after) = rest.split_at(length);
        rest = after;
        if part.starts_with("/*") || letter.is_ascii_whitespace() {
            blank = true;
            continue;
        }
        // No selector has a blank behind a colon; before one it means something.
        if blank
            && !tight.is_empty()
            && !tight.ends_with(['{', '}', ';', ',', ':'])
            && !"{};,".contains(letter)
        {
            tight.push(' ');
        }
        blank = false;
        if letter == '}' && tight.ends_with(';') {
            tight.pop();
        }
        tight.push_str(part);
    }
    tight
}

/// The length of the text in quotation marks that the rest begins with.
fn text_length(rest: &str, mark: char) -> usize {
    let mut escaped = false;
    let closes = |(_, letter): &(usize, char)| {
        let closes = *letter == mark && !escaped;
        escaped = *letter == '\\' && !escaped;
        closes
    };
    let end = rest.char_indices().skip(1).find(closes);
    end.map_or(rest.len(), |(at, _)| at + mark.len_utf8())
}

/// A script without indentation, without empty lines, and without the comments that have lines of their own.
///
/// Line breaks stay, since they may end a statement.
///
/// # Errors
/// Where a text goes on over the end of a line, whose blanks would count.
pub(crate) fn script(name: &str, text: &str) -> Result<String> {
    let mut tight = String::with_capacity(text.len());
    let mut in_comment = false;
    for (number, line) in text.lines().enumerate() {
        let line = line.trim();
        in_comment |= line.starts_with("/*");
        if in_comment {
            let end = line.find("*/").map(|end| &line[end + 2..]);
            in_comment = end.is_none();
            ensure!(
                end.is_none_or(str::is_empty),
                "{name}, line {}: code behind a comment that began the line",
                number + 1
            );
            continue;
        }
        if line.is_empty() || line.starts_with("//") {
            continue;
        }
        ensure!(
            line.matches('`').count() % 2 == 0 && !line.ends_with('\\'),
            "{name}, line {}: a text over more than one line would lose its blanks",
            number + 1
        );
        tight.push_str(line);
        tight.push('\n');
    }
    Ok(tight)
}

/// A page's template without indentation.
///
/// # Errors
/// Where an element whose blanks count goes on over the end of a line.
pub(crate) fn page(html: &str) -> Result<String> {
    let mut tight = String::with_capacity(html.len());
    for (number, line) in html.lines().enumerate() {
        for name in ["pre", "textarea", "script", "style"] {
            ensure!(
                line.matches(&format!("<{name}")).count() == line.matches(&format!("</{name}")).count(),
                "the template, line {}: <{name}> goes on over the end of the line, and would lose its blanks",
                number + 1
            );
        }
        let line = line.trim();
        if !line.is_empty() {
            tight.push_str(line);
            tight.push('\n');
        }
    }
    Ok(tight)
}

#[cfg(test)]
mod tests {
    use super::{page, script, style};

    #[test]
    fn a_style_keeps_every_blank_that_means_something() {
        for (css, tight) in [
            (
                "a {\n  color: red;\n  margin: 0 1px;\n}\n",
                "a{color:red;margin:0 1px}",
            ),
            ("/* why */\na > b ,\n c /* x */ d { }", "a > b,c d{}"),
            (
                "p :hover::before { content: \" /* ; } */  \" }",
                "p :hover::before{content:\" /* ; } */  \"}",
            ),
            (
                "p { content: 'it\\'s  ;' ; width: calc(1px + 2px) }",
                "p{content:'it\\'s  ;';width:calc(1px + 2px)}",
            ),
            (
                "@media (min-width: 3rem) and print { a { b: c; } }",
                "@media (min-width:3rem) and print{a{b:c}}",
            ),
            (
                "a { content: \"\\\\\" ; b: url(data:,x) }",
                "a{content:\"\\\\\";b:url(data:,x)}",
            ),
            ("a { --b: ; }", "a{--b:}"),
            ("a { b: \u{2013} } /* never closed", "a{b:\u{2013}}"),
        ] {
            assert_eq!(style(css), tight, "{css}");
        }
    }

    #[test]
    fn a_script_keeps_its_texts_and_line_ends() {
        let text = "// why\n(function () {\n  /** what\n   * more\n   */\n  const a = \"// no\"; // stays\n\n  \
                    return a.replace(/\\/\\*/g, `  ${a}  `)\n})();\n";
        let tight =
            "(function () {\nconst a = \"// no\"; // stays\nreturn a.replace(/\\/\\*/g, `  ${a}  `)\n})();\n";
        assert_eq!(script("a file", text).expect("it can be judged"), tight);
        assert_eq!(
            script("a file", "/* one */\na\n").expect("it can be judged"),
            "a\n"
        );
        for refused in ["a = `\n  b`", "a = 'b\\\n  c'", "/* a */ b", "/*\n*/ b"] {
            let error = script("a file", refused).expect_err(refused).to_string();
            assert!(error.starts_with("a file, line "), "{error}");
        }
    }

    #[test]
    fn a_page_loses_its_indentation_alone() {
        let html = "<p>\n  one <b>two</b>\n\n  three</p>\n  <pre>  {{a}}</pre>\n";
        assert_eq!(
            page(html).expect("it can be judged"),
            "<p>\none <b>two</b>\nthree</p>\n<pre>  {{a}}</pre>\n"
        );
        for refused in ["<pre>\n  a</pre>", "<textarea>\n</textarea>"] {
            assert!(page(refused).is_err(), "{refused}");
        }
    }

    #[test]
    fn the_sources_can_be_judged() {
        page(include_str!("../page/index.html")).expect("the page");
        page(include_str!("../page/side.html")).expect("the block of a side");
        script("boot.js", include_str!("../page/boot.js")).expect("the boot script");
        let workspace = crate::workspace::Workspace::find().expect("a workspace");
        let css = crate::style(&workspace).expect("the style sheet");
        let tight = style(&css);
        assert_eq!(style(&tight), tight, "once is enough");
        for mark in ['{', '}', '"', '\''] {
            assert_eq!(
                tight.matches(mark).count(),
                without_comments(&css).matches(mark).count(),
                "{mark}"
            );
        }
    }

    fn without_comments(css: &str) -> String {
        let mut parts = css.split("/*");
        let first = parts.next().unwrap_or_default().to_owned();
        let rest = parts.filter_map(|part| part.split_once("*/"));
        rest.fold(first, |text, (_, after)| text + after)
    }
}
